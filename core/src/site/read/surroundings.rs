//! What a circuit states of its surroundings, held against the site's.

use alloc::borrow::ToOwned;
use alloc::format;

use super::entry::Found;
use super::keys::{AMBIENT, CIRCUIT, NAME};
use super::log::{Cut, Log, Quoted};
use crate::quantity::{ThermodynamicTemperature, parse};

/// A circuit's `ambient` below the site's least would raise its capacity by a place that does not exist.
pub(super) fn check(
    site: Option<(ThermodynamicTemperature, ThermodynamicTemperature)>,
    found: Found<'_>,
    log: &mut Log,
) {
    let stated =
        found.table.get(AMBIENT.name).and_then(|value| Some((value.get_ref().as_str()?, value.span())));
    let (Some((least, _)), Some((written, span))) = (site, stated) else { return };
    // What cannot be read, or lies outside the key's range, has its problem already.
    let Ok(ambient) = parse::<ThermodynamicTemperature>(written) else { return };
    if !AMBIENT.range.admits(ambient.value) || ambient >= least {
        return;
    }
    let name = found.table.get(NAME.name).and_then(|value| value.get_ref().as_str());
    let place =
        name.map_or_else(|| CIRCUIT.header.to_owned(), |n| format!("{} {}", CIRCUIT.header, Quoted(n)));
    let sentence = format!(
        "'{}' is below the least ambient of [site]; state what the circuit's place reaches, or a lower least there",
        Cut(written)
    );
    log.push(span.start, format!("{place}, {}", AMBIENT.name), sentence);
}
