//! Joints: what a lug, switch, fuse or shunt adds to a run (R9), and the heat made there.
//!
//! A joint is what no fuse sees: its heat depends on a resistance that nobody rates. The generic values here are
//! for the drop and the least prospective current, so they lie on the high side; for the greatest prospective
//! current a joint counts as nothing (R6).

use uom::si::electric_current::ampere;
use uom::si::electric_potential::volt;
use uom::si::electrical_resistance::ohm;
use uom::si::power::watt;

use crate::citation::{Citation, Seen};
use crate::error::{Allowed, Error};
use crate::quantity::{ElectricCurrent, ElectricPotential, ElectricalResistance, Power};

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

/// Source of every generic value.
pub const GENERIC_JOINT: Citation = Citation::new(
    "common practice, no source",
    "generic resistance of joints, on the high side",
    Seen::Practice,
);

impl JointKind {
    /// All kinds.
    pub const ALL: [Self; 9] = [
        Self::Lug,
        Self::Terminal,
        Self::Switch,
        Self::Relay,
        Self::Fuse,
        Self::Breaker,
        Self::Shunt,
        Self::Busbar,
        Self::Connector,
    ];

    /// Generic resistance where no rating is known, and generic voltage drop at the rating: Ω, V.
    const fn generic(self) -> (f64, f64) {
        match self {
            // A fair crimp with its contact face on the stud: 0.02 to 0.1 mΩ.
            Self::Lug => (0.1e-3, 0.010),
            // Bare strands under a screw: about twice a lug.
            Self::Terminal => (0.2e-3, 0.020),
            // Two contacts and two studs inside.
            Self::Switch => (0.3e-3, 0.050),
            // As a switch, with lighter contact pressure.
            Self::Relay => (0.5e-3, 0.080),
            // The element itself makes its heat at the rating, some watts at 100 A, and two clips come on top.
            Self::Fuse => (1.0e-3, 0.100),
            // Bimetal, coil and contact in line; the small ones drop most.
            Self::Breaker => (2.0e-3, 0.200),
            // Shunts of the trade drop 50 or 75 mV at their rating.
            Self::Shunt => (0.75e-3, 0.075),
            // The bar and its two contact faces.
            Self::Busbar => (0.05e-3, 0.010),
            // Both contacts of one pole, mated, some use.
            Self::Connector => (1.0e-3, 0.050),
        }
    }
}

/// Generic resistance of one joint of a kind whose rating is not known. Common practice, no source: see
/// [`GENERIC_JOINT`].
///
/// ```
/// # use ampwright::cable::{JointKind, joint_resistance};
/// # use uom::si::electrical_resistance::milliohm;
/// assert!((joint_resistance(JointKind::Lug).get::<milliohm>() - 0.1).abs() < 1e-12);
/// ```
pub fn joint_resistance(kind: JointKind) -> ElectricalResistance {
    ElectricalResistance::new::<ohm>(kind.generic().0)
}

/// Generic resistance of one joint or part of a known rating: its generic voltage drop at the rating over the
/// rating. A 10 A breaker has ten times the resistance of a 100 A one.
///
/// # Errors
/// [`Error::OutOfRange`] if the rating is not greater than 0 and finite.
///
/// # Source
/// Common practice, no source: volts at rated current lug 10 mV, terminal 20 mV, switch 50 mV, relay 80 mV, fuse
/// with holder 100 mV, breaker pole 200 mV, shunt 75 mV, busbar 10 mV, connector 50 mV.
///
/// # Example
/// ```
/// # use ampwright::cable::{JointKind, rated_joint_resistance};
/// # use uom::si::{f64::ElectricCurrent, electric_current::ampere, electrical_resistance::milliohm};
/// let fuse = rated_joint_resistance(JointKind::Fuse, ElectricCurrent::new::<ampere>(50.0))?;
/// assert!((fuse.get::<milliohm>() - 2.0).abs() < 1e-12); // 100 mV at 50 A
/// # Ok::<(), ampwright::Error>(())
/// ```
pub fn rated_joint_resistance(
    kind: JointKind,
    rating: ElectricCurrent,
) -> Result<ElectricalResistance, Error> {
    let amperes = rating.get::<ampere>();
    // Written so that NaN fails.
    if !(amperes > 0.0 && amperes <= f64::MAX) {
        let allowed = Allowed::Above(0.0);
        return Err(Error::OutOfRange { name: "rating", value: amperes, unit: "A", allowed });
    }
    Ok(ElectricPotential::new::<volt>(kind.generic().1) / rating)
}

/// Heat made in one joint: I²R.
///
/// # Errors
/// [`Error::OutOfRange`] if the current is not finite, or the resistance is negative or not finite.
///
/// # Source
/// Joule's law, P = I²·R.
///
/// # Example
/// A lug gone bad, 2 mΩ at 150 A, makes 45 W where a hand could touch it:
/// ```
/// # use ampwright::cable::joint_heat;
/// # use uom::si::f64::{ElectricCurrent, ElectricalResistance};
/// # use uom::si::{electric_current::ampere, electrical_resistance::milliohm, power::watt};
/// let heat = joint_heat(
///     ElectricCurrent::new::<ampere>(150.0),
///     ElectricalResistance::new::<milliohm>(2.0),
/// )?;
/// assert!((heat.get::<watt>() - 45.0).abs() < 1e-9);
/// # Ok::<(), ampwright::Error>(())
/// ```
pub fn joint_heat(current: ElectricCurrent, resistance: ElectricalResistance) -> Result<Power, Error> {
    let (amperes, ohms) = (current.get::<ampere>(), resistance.get::<ohm>());
    if !amperes.is_finite() {
        return Err(Error::OutOfRange {
            name: "current",
            value: amperes,
            unit: "A",
            allowed: Allowed::Finite,
        });
    }
    // NaN lies in no range.
    if !(0.0..=f64::MAX).contains(&ohms) {
        let allowed = Allowed::AtLeast(0.0);
        return Err(Error::OutOfRange { name: "resistance", value: ohms, unit: "ohm", allowed });
    }
    Ok(Power::new::<watt>(amperes * amperes * ohms))
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn every_kind_has_a_positive_value_that_falls_with_the_rating() {
        for kind in JointKind::ALL {
            let at = |a| rated_joint_resistance(kind, ElectricCurrent::new::<ampere>(a)).unwrap();
            assert!(joint_resistance(kind) > ElectricalResistance::new::<ohm>(0.0), "{kind:?}");
            assert!(at(10.0) > at(100.0), "{kind:?}");
        }
    }

    #[test]
    fn odd_ratings_currents_and_resistances_are_refused() {
        for odd in [0.0, -0.0, -1.0, f64::NAN, f64::INFINITY] {
            assert!(rated_joint_resistance(JointKind::Fuse, ElectricCurrent::new::<ampere>(odd)).is_err());
        }
        let (one_a, one_ohm) = (ElectricCurrent::new::<ampere>(1.0), ElectricalResistance::new::<ohm>(1.0));
        assert!(joint_heat(ElectricCurrent::new::<ampere>(f64::NAN), one_ohm).is_err());
        assert!(joint_heat(one_a, ElectricalResistance::new::<ohm>(-1.0)).is_err());
        assert!(joint_heat(one_a, ElectricalResistance::new::<ohm>(f64::INFINITY)).is_err());
    }
}
