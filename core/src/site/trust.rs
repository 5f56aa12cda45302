//! What the report rests on because the file states it: a cooler place (R4), what a device lets through (R6), a chassis
//! as the return (R9), loads that do not run together (R16).

use alloc::format;

use uom::si::electric_current::ampere;
use uom::si::electrical_resistance::milliohm;
use uom::si::power::watt;
use uom::si::thermodynamic_temperature::degree_celsius;

use super::finding::{Findings, Severity, digits};
use super::flow::{Flows, Loops, Network, Relief};
use super::model::{CircuitEntry, Return};
use super::plan::{Fitted, Plan, Planned};
use super::system::Site;
use crate::circuit::{Run, capacity};
use crate::device::least_let_through_A2s;
use crate::quantity::Power;
use crate::rules::Key;

/// A circuit cooler than the site's greatest ambient carries more by that word alone.
pub(super) fn cooler(site: &Site, circuit: &CircuitEntry, planned: &Planned, found: &mut Findings) {
    let greatest = site.ambient.1;
    let Some(stated) = circuit.ambient.filter(|a| *a < greatest) else { return };
    let Ok(own) = capacity(&planned.run, &planned.positive, None) else { return };
    let (own, hot) = (
        own.corrected.get::<ampere>(),
        capacity(&Run { ambient: greatest, ..planned.run }, &planned.positive, None),
    );
    let hot = hot.map_or(0.0, |a| a.corrected.get::<ampere>());
    if own > hot {
        found.add(
            Severity::Advice,
            "R4",
            "ambient-below-greatest",
            format!("circuit \"{}\"", circuit.name),
            circuit.line,
            format!(
                "its capacity rests on a place of {} °C: {} A there, {} A at the site's greatest, {} °C",
                digits(stated.get::<degree_celsius>()),
                digits(own),
                digits(hot),
                digits(greatest.get::<degree_celsius>())
            ),
            None,
            "make sure that the place never gets warmer, fires and closed hatches included",
        );
    }
}

/// A stated let-through that no such device reaches.
pub(super) fn let_through(fitted: &Fitted, place: &str, line: u32, found: &mut Findings) {
    let device = fitted.guard.device;
    let (least, source) = least_let_through_A2s(device.family, device.rating);
    if let Some(stated) = fitted.guard.let_through_A2s.filter(|stated| *stated < least) {
        found.add(
            Severity::Nonconforming,
            "R6",
            "let-through-implausible",
            place,
            line,
            format!(
                "let_through {} A²s; no {} of {} A opens on less than {} A²s",
                digits(stated),
                device.family,
                digits(device.rating.get::<ampere>()),
                digits(least)
            ),
            Some(source),
            "state the I²t of the maker's sheet at the greatest prospective current, on DC",
        );
    }
}

/// A chassis of stated resistance as the return, where the set does not speak of it.
pub(super) fn chassis(site: &Site, circuit: &CircuitEntry, planned: &Planned, found: &mut Findings) {
    let Return::Chassis(Some(stated)) = circuit.way_back else { return };
    if matches!(site.rules.set().key, Key::CraftIso | Key::CraftUs) {
        return;
    }
    let current = planned.judgement.current;
    let heat: Power = current * current * stated;
    found.add(
        Severity::Advice,
        "R9",
        "chassis-as-return",
        format!("circuit \"{}\"", circuit.name),
        circuit.line,
        format!(
            "hull or chassis carries {} A back: {} W in the stated {} mΩ, in bonds that loosen and corrode, and \
             whatever bridges them carries its share",
            digits(current.get::<ampere>()),
            digits(heat.get::<watt>()),
            digits(stated.get::<milliohm>())
        ),
        None,
        "run a return conductor, or measure the return under load again every year",
    );
}

/// Devices that open when all loads run together, which the user's diversity says they do not (R16).
pub(super) fn diversity(site: &Site, plan: &Plan, found: &mut Findings) {
    // Written so that a site without any diversity costs nothing.
    if site.circuits.iter().all(|c| c.diversity >= 1.0) {
        return;
    }
    let Some(any) = plan.circuits.iter().flatten().next() else { return };
    let mut together = site.clone();
    for circuit in &mut together.circuits {
        circuit.diversity = 1.0;
    }
    // What hangs on no bank is in no tree: its conductors are not read.
    let wired = plan.circuits.iter().map(|own| {
        let p = own.as_ref().unwrap_or(any);
        let temperature = own.as_ref().map(|p| p.judgement.temperature.get::<degree_celsius>());
        ((p.positive, p.negative, p.run.joints), temperature)
    });
    let mut loops = Loops::default();
    loops.update(&together, wired);
    let relief = Relief { can: &|_| false, at_once: false };
    let flows = Flows::new(&together, &Network::new(&together), &plan.trees, &loops, &relief);
    for ((circuit, planned), flow) in site.circuits.iter().zip(&plan.circuits).zip(&flows.circuits) {
        let Some(planned) = planned.as_ref().filter(|_| circuit.diversity < 1.0) else { continue };
        let rating = |f: &Fitted| f.guard.device.rating.get::<ampere>();
        let smallest = planned.fitted.iter().min_by(|a, b| rating(a).total_cmp(&rating(b)));
        let Some(smallest) = smallest.filter(|f| rating(f) < flow.current) else { continue };
        found.add(
            Severity::Advice,
            "R16",
            "diversity-above-device",
            format!("circuit \"{}\"", circuit.name),
            circuit.line,
            format!(
                "its loads draw {} A together, by diversity {} it counts with {} A, and {} is rated {} A: it opens \
                 when they do run together",
                digits(flow.current),
                digits(circuit.diversity),
                digits(planned.judgement.current.get::<ampere>()),
                smallest.name,
                digits(rating(smallest))
            ),
            None,
            "use a device and a conductor for the sum, or make sure that they cannot run together",
        );
    }
}
