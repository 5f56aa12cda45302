//! Joints: what a lug, switch, fuse or shunt adds to a run (R9).

use crate::quantity::ElectricalResistance;
use uom::si::electrical_resistance::ohm;

/// Kind of joint or part in the path, for its generic resistance.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
#[non_exhaustive]
pub enum JointKind {
    /// Crimped lug on a stud.
    Lug,
    /// Screw terminal.
    Terminal,
    /// Switch or isolator.
    Switch,
    /// Relay or contactor contact.
    Relay,
    /// Fuse with its holder.
    Fuse,
    /// Breaker pole.
    Breaker,
    /// Measuring shunt.
    Shunt,
    /// Busbar, stud to stud.
    Busbar,
    /// Plug connector.
    Connector,
}

/// Generic resistance of one joint of a kind.
pub fn joint_resistance(kind: JointKind) -> ElectricalResistance {
    let _ = kind;
    ElectricalResistance::new::<ohm>(1e-4)
}
