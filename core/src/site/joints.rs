//! Heat in single joints and parts (R9): what no fuse sees.

use alloc::format;
use alloc::string::String;

use uom::si::electric_current::ampere;

use super::finding::{Findings, Severity, digits};
use super::model::CircuitEntry;
use crate::cable::{JointKind, joint_resistance, rated_joint_resistance};
use crate::citation::{Citation, Seen};
use crate::quantity::{ElectricCurrent, ElectricalResistance};

/// Heat of one contact that deserves a look, that is a fault, and that burns, W. Common practice, no source: 15 W make a
/// lug too hot for PVC, 30 W char what it touches.
const CONTACT_W: [f64; 3] = [5.0, 15.0, 30.0];
/// The same for parts that make heat by design, in terms of what their kind makes at its rating.
const BY_DESIGN: [f64; 3] = [1.0, 2.0, 4.0];
const PRACTICE: Citation = Citation::new("common practice, no source", "heat of one joint", Seen::Practice);

/// Joints of a circuit, and its parts of stated resistance, at its design current. A start lasts seconds: only advice.
pub(super) fn joints(
    circuit: &CircuitEntry,
    place: &str,
    current: ElectricCurrent,
    starts_engine: bool,
    found: &mut Findings,
) {
    for joint in &circuit.joints {
        let graded = joint.resistance.is_some() && !starts_engine;
        let each = joint.resistance.unwrap_or_else(|| joint_resistance(joint.kind));
        heat(joint.kind, each, current, graded, (place, circuit.line), found);
    }
    for part in &circuit.parts {
        if let Some(stated) = part.resistance {
            let place = format!("{place}, {}", part.name);
            heat(part.kind.joint(), stated, current, !starts_engine, (&place, part.line), found);
        }
    }
}

fn heat(
    kind: JointKind,
    each: ElectricalResistance,
    current: ElectricCurrent,
    graded: bool,
    (place, line): (&str, u32),
    found: &mut Findings,
) {
    let amps = current.get::<ampere>();
    let heat = amps * amps * each.value;
    let [advice_W, most_W, danger_W] = limits(kind, current);
    let text = |most: Option<f64>| -> String {
        let limit = most.map_or_else(String::new, |w| format!(", at most {} W", digits(w)));
        format!(
            "a joint of {} mΩ turns {} W into heat at {} A{limit}; no fuse sees that",
            digits(each.value * 1e3),
            digits(heat),
            digits(amps)
        )
    };
    let remedy = "remake the joint, and measure it under load";
    if graded && heat > danger_W {
        found.add(
            Severity::Danger,
            "R9",
            "joint-heat",
            place,
            line,
            text(Some(most_W)),
            Some(PRACTICE),
            remedy,
        );
    } else if graded && heat > most_W {
        found.add(
            Severity::Nonconforming,
            "R9",
            "joint-heat",
            place,
            line,
            text(Some(most_W)),
            Some(PRACTICE),
            remedy,
        );
    } else if heat > advice_W {
        found.add(Severity::Advice, "R9", "joint-heat", place, line, text(None), None, remedy);
    }
}

/// Heat from which a joint is pointed out, does not conform, and is a danger, W.
pub(super) fn limits(kind: JointKind, current: ElectricCurrent) -> [f64; 3] {
    let by_design = match kind {
        JointKind::Lug | JointKind::Terminal | JointKind::Busbar | JointKind::Connector => 0.0,
        JointKind::Switch | JointKind::Relay | JointKind::Fuse | JointKind::Breaker | JointKind::Shunt => {
            let amps = current.get::<ampere>();
            rated_joint_resistance(kind, current).map_or(0.0, |r| amps * amps * r.value)
        }
    };
    let [a, b, c] = CONTACT_W;
    let [x, y, z] = BY_DESIGN;
    [a.max(x * by_design), b.max(y * by_design), c.max(z * by_design)]
}
