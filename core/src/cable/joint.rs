//! Joints: what a lug, switch, fuse or shunt adds to a run (R9), and the heat made there.
//!
//! A joint is what no fuse sees: its heat depends on a resistance that nobody rates. The generic values here are
//! for the drop and the least prospective current, so they lie on the high side; for the greatest prospective
//! current a joint counts as nothing (R6).

use uom::si::electric_potential::volt;
use uom::si::electrical_resistance::ohm;

use crate::catalogue::{Choice, calculations};
use crate::citation::{Citation, Seen};
use crate::law::{ohm_resistance, power_in_resistance};
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

impl Choice for JointKind {
    const ALL: &'static [Self] = &Self::ALL;
    const WORDS: &'static [&'static str] =
        &["lug", "terminal", "switch", "relay", "fuse", "breaker", "shunt", "busbar", "connector"];
    const FIRST: Self = Self::Lug;
}

calculations! {
    /// Generic resistance of one joint or part of a known rating.
    ///
    /// A 10 A breaker has ten times the resistance of a 100 A one. For a measured or stated one take that.
    ///
    /// # Example
    /// 100 mV at 50 A:
    /// ```
    /// use ampwright::{cable::{JointKind, rated_joint_resistance}, quantity::{parse, readable}};
    /// let fuse = rated_joint_resistance(JointKind::Fuse, parse("50 A")?)?;
    /// assert_eq!(readable(fuse).to_string(), "2 mΩ");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn rated_joint_resistance(
        /// Kind of joint or part.
        kind: JointKind in choice [choice],
        /// Of the part.
        rating: ElectricCurrent in ampere [> 0.0],
    ) -> resistance: ElectricalResistance in ohm
    formula "R = U/I; at the rated current lug 10 mV, terminal 20 mV, switch 50 mV, relay 80 mV, fuse with holder 100 mV, breaker pole 200 mV, shunt 75 mV, busbar 10 mV, connector 50 mV"
    source "common practice, no source"
    { ohm_resistance::formula(ElectricPotential::new::<volt>(kind.generic().1), rating) }

    /// Heat made in one joint.
    ///
    /// A joint is what no fuse sees.
    ///
    /// # Example
    /// A lug gone bad, 2 mΩ at 150 A, makes 45 W where a hand could touch it:
    /// ```
    /// use ampwright::{cable::joint_heat, quantity::{parse, readable}};
    /// let heat = joint_heat(parse("150 A")?, parse("2 mohm")?)?;
    /// assert_eq!(readable(heat).to_string(), "45 W");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn joint_heat(
        /// Through the joint.
        current: ElectricCurrent in ampere [any],
        /// Of the joint, measured or generic.
        resistance: ElectricalResistance in ohm [>= 0.0],
    ) -> heat: Power in watt
    formula "P = I²·R"
    source "Joule's law"
    { power_in_resistance::formula(current, resistance) }
}

#[cfg(test)]
mod tests {
    use uom::si::electric_current::ampere;

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
