//! Cells at rest and over a discharge: lookups in what the battery room holds.

use uom::si::ratio::ratio;
use uom::si::thermodynamic_temperature::degree_celsius;

use super::span::Span;
use crate::battery::{Chemistry, cold_fraction, relative_density_at_reference, temperature_factor};
use crate::quantity::{Ratio, ThermodynamicTemperature};

/// By how much the density of acid differs between sources at one state of charge: the middles of the bands of
/// `lead-acid-ocv-soc-magazine` in `tests/reference/battery.toml` lie up to 0.025 above the table.
pub(super) const DENSITY_SPREAD: f64 = 0.02;
/// Hours to which a capacity is rated where nobody says so: common practice, no source.
pub(super) const USUAL_RATE_H: f64 = 20.0;
/// Temperature to which densities are held, °C.
const TABLE: f64 = 25.0;

fn celsius(value: f64) -> ThermodynamicTemperature {
    ThermodynamicTemperature::new::<degree_celsius>(value)
}

/// What a density at a temperature gains when it is brought to that of the table.
pub(super) fn density_gain(degC: Span) -> Span {
    // Linear in the density: any reading shows it.
    let gain = |at: f64| {
        relative_density_at_reference(
            Ratio::new::<ratio>(1.2),
            celsius(at.clamp(-40.0, 60.0)),
            celsius(TABLE),
        )
        .map_or(0.0, |d| d.get::<ratio>() - 1.2)
    };
    Span::new(gain(degC.least), gain(degC.greatest))
}

/// Part of the capacity at 25 °C that a bank gives between two temperatures; `None` where no table holds it.
pub(super) fn part_at(chemistry: Chemistry, degC: Span) -> Option<Span> {
    let part = |at: f64| -> Option<f64> {
        if chemistry.is_lead_acid() {
            Some(1.0 / temperature_factor(celsius(at)).ok()?.get::<ratio>())
        } else {
            Some(cold_fraction(chemistry, celsius(at)).ok()?.value.get::<ratio>())
        }
    };
    Some(Span::new(part(degC.least)?, part(degC.greatest)?))
}

/// State of charge at a value of the second column, by the straight line between rows; nought and one beyond its ends.
pub(super) fn charge_at(rows: &[(f64, f64)], value: f64) -> f64 {
    along(rows.iter().map(|&(charge, column)| (column, charge)), value)
}

/// Value of the second column at a state of charge.
pub(super) fn value_at(rows: &[(f64, f64)], charge: f64) -> f64 {
    along(rows.iter().copied(), charge)
}

fn along(rows: impl Iterator<Item = (f64, f64)>, x: f64) -> f64 {
    let mut before: Option<(f64, f64)> = None;
    let mut last = f64::NAN;
    for (here, value) in rows {
        match before {
            None if x <= here => return value,
            Some((left, from)) if x <= here => {
                return from + (value - from) * (x - left) / (here - left);
            }
            _ => {}
        }
        (before, last) = (Some((here, value)), value);
    }
    last
}

#[cfg(test)]
mod tests {
    use uom::si::electric_potential::volt;

    use super::*;
    use crate::battery::{rest_table, state_of_charge};
    use crate::quantity::ElectricPotential;

    #[test]
    fn rows_are_met_and_the_line_runs_between_them() {
        let rows = rest_table(Chemistry::Flooded).voltage_V.value;
        assert_eq!(charge_at(rows, 2.04), 0.5);
        // Half way from 2.040 to 2.075 V.
        assert!((charge_at(rows, 2.0575) - 0.625).abs() < 1e-12);
        assert_eq!((charge_at(rows, 1.0), charge_at(rows, 3.0)), (0.0, 1.0));
        assert!((value_at(rows, 0.625) - 2.0575).abs() < 1e-12);
    }

    /// The battery room's own answer, by another way.
    #[test]
    fn charge_is_what_the_battery_room_says() {
        for chemistry in Chemistry::ALL {
            let table = rest_table(chemistry);
            for part in 0..=20 {
                let volts = value_at(table.voltage_V.value, f64::from(part) / 20.0);
                let error = ElectricPotential::new::<volt>(0.0);
                let theirs =
                    state_of_charge(chemistry, 1, ElectricPotential::new::<volt>(volts), error).unwrap();
                let spread = table.spread_V.value;
                let ours = charge_at(table.voltage_V.value, volts - spread)
                    ..=charge_at(table.voltage_V.value, volts + spread);
                assert!((theirs.least.get() - ours.start()).abs() < 1e-9, "{chemistry} {part}");
                assert!((theirs.greatest.get() - ours.end()).abs() < 1e-9, "{chemistry} {part}");
            }
        }
    }

    #[test]
    fn warmth_and_density_by_hand() {
        // 0.003 for 10 °F: 1.250 read at 90 °F is 1.253 at 80 °F.
        let gain = density_gain(Span::exactly(25.0 + 10.0 / 1.8));
        assert!((gain.least - 0.003).abs() < 1e-12 && gain.least == gain.greatest);
        // IEEE 485: 1.19 at 10 °C.
        let part = part_at(Chemistry::Flooded, Span::new(10.0, 25.0)).unwrap();
        assert!((part.least - 1.0 / 1.19).abs() < 1e-12 && (part.greatest - 1.0).abs() < 1e-12);
        assert!(part_at(Chemistry::Flooded, Span::new(-20.0, 25.0)).is_none());
        assert!(
            part_at(Chemistry::Lfp, Span::new(-10.0, 25.0)).is_some_and(|p| (p.least - 0.7).abs() < 1e-12)
        );
    }
}
