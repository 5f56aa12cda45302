//! What the parts of the plant are read with.

use alloc::borrow::ToOwned;
use alloc::string::String;

use super::entry::Entry;
use super::keys::Key;
use crate::quantity::Textual;

/// A flag that may be left out.
pub(super) fn said(entry: &mut Entry<'_, '_>, key: &Key) -> Option<bool> {
    entry.has(key).then(|| entry.flag(key, false))
}

/// A name of something else in the file.
pub(super) fn named(entry: &mut Entry<'_, '_>, key: &Key) -> Option<String> {
    entry.text(key).map(ToOwned::to_owned)
}

/// Two quantities of which the first must not be above the second.
pub(super) fn rising<Q: Textual>(entry: &mut Entry<'_, '_>, key: &Key) -> Option<(Q, Q)> {
    let pair: (Q, Q) = entry.two_quantities(key)?;
    if pair.0.base() > pair.1.base() {
        entry.problem(key, "the least is above the greatest; write the least first".to_owned());
        return None;
    }
    Some(pair)
}
