//! Ventilation of batteries that give off hydrogen (R20), after IEC 62485-2.

use uom::si::area::square_centimeter;
use uom::si::electric_charge::ampere_hour;
use uom::si::length::millimeter;
use uom::si::volume_rate::cubic_meter_per_hour;

use super::{Chemistry, Datum};
use crate::catalogue::{Choice, calculations};
use crate::citation::{Citation, Seen};
use crate::error::Error;
use crate::quantity::{Area, ElectricCharge, Length, Ratio, VolumeFlow};

/// Source of gassing currents, flow and opening.
pub const GASSING: Citation =
    Citation::new("IEC 62485-2", "ventilation, current producing gas", Seen::Recalled);

/// Stage of charge that ventilation is laid out for.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum ChargeStage {
    /// Held full at the float voltage.
    Float,
    /// Charged quickly, absorption and equalisation included.
    Boost,
}

impl Choice for ChargeStage {
    const ALL: &'static [Self] = &[Self::Float, Self::Boost];
    const WORDS: &'static [&'static str] = &["float", "boost"];
    const FIRST: Self = Self::Float;
}

/// Current that produces gas, mA for each Ah of capacity; `None` for lithium, which gives off none in ordinary use.
///
/// The factors of the standard are in it: 5 for emission and reserve, 0.2 for what valve-regulated cells recombine.
///
/// ```
/// # use ampwright::battery::{ChargeStage, Chemistry, gassing_current};
/// assert_eq!(gassing_current(Chemistry::Flooded, ChargeStage::Boost).map(|g| g.value), Some(20.0));
/// assert_eq!(gassing_current(Chemistry::Lfp, ChargeStage::Boost), None);
/// ```
pub const fn gassing_current(chemistry: Chemistry, stage: ChargeStage) -> Option<Datum<f64>> {
    let (float, boost) = match chemistry {
        Chemistry::Flooded => (5.0, 20.0),
        Chemistry::Agm | Chemistry::Gel => (1.0, 8.0),
        Chemistry::NickelCadmium => (5.0, 50.0),
        Chemistry::Lfp | Chemistry::Nmc => return None,
    };
    let value = match stage {
        ChargeStage::Float => float,
        ChargeStage::Boost => boost,
    };
    Some(Datum { value, citation: GASSING })
}

/// Flow for each milliampere, m³/h: 0.42·10⁻³ m³/Ah of hydrogen, thinned to 4 %, five times over, rounded by the
/// standard.
const FLOW_PER_MILLIAMPERE: f64 = 0.05 / 1000.0;
/// Free opening for each m³/h of natural draught, cm².
const OPENING: f64 = 28.0;

const NO_GAS: Error = Error::NotTabulated {
    what: "the gassing current of a lithium bank",
    table: GASSING,
    remedy: "it gives off none in ordinary use; follow its maker about gas in a failure",
};

fn gassing_mA_per_Ah(chemistry: Chemistry, stage: ChargeStage) -> Result<f64, Error> {
    gassing_current(chemistry, stage).map(|datum| datum.value).ok_or(NO_GAS)
}

calculations! {
    /// Flow of air that a room or box with a bank needs, so that its hydrogen does not gather.
    ///
    /// Several banks in one room: the sum. Where a charger's voltage is not limited, the gassing current is the
    /// charger's own.
    ///
    /// # Example
    /// Twelve flooded cells of 400 Ah that are boost-charged:
    /// ```
    /// use ampwright::{battery::{ChargeStage, Chemistry, ventilation_flow}, quantity::{parse, readable}};
    /// let result = ventilation_flow(Chemistry::Flooded, ChargeStage::Boost, parse("12")?, parse("400 Ah")?)?;
    /// assert_eq!(readable(result).to_string(), "4.8 m3/h");
    /// assert!(ventilation_flow(Chemistry::Lfp, ChargeStage::Boost, parse("8")?, parse("400 Ah")?).is_err());
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn ventilation_flow(
        /// Of the bank.
        chemistry: Chemistry in choice [choice],
        /// Stage that the ventilation is laid out for.
        stage: ChargeStage in choice [choice],
        /// In series.
        cells: Ratio in ratio [1.0 ..= 1000.0],
        /// Of the whole bank: at 10 h for lead-acid, at 5 h for nickel-cadmium.
        capacity: ElectricCharge in ampere_hour [> 0.0],
    ) -> flow: VolumeFlow in cubic_meter_per_hour
    formula "Q = 0.05·n·I_gas·C/1000, I_gas in mA/Ah at float and boost: flooded 5 and 20, AGM and gel 1 and 8, \
        vented nickel-cadmium 5 and 50"
    source "IEC 62485-2, recalled"
    fallible "the bank gives off no hydrogen in ordinary use: lithium"
    {
        let gas = gassing_mA_per_Ah(chemistry, stage)?;
        let flow = FLOW_PER_MILLIAMPERE * cells.value * gas * capacity.get::<ampere_hour>();
        Ok(VolumeFlow::new::<cubic_meter_per_hour>(flow))
    }

    /// Free area of each of two openings, inlet and outlet, through which natural draught carries a flow of air.
    ///
    /// Opposite walls, one low and one high, or at least 2 m apart in one wall.
    ///
    /// # Example
    /// ```
    /// use ampwright::{battery::ventilation_opening, quantity::parse};
    /// use uom::si::area::square_centimeter;
    /// let result = ventilation_opening(parse("4.8 m3/h")?)?;
    /// assert!((result.get::<square_centimeter>() - 134.4).abs() < 1e-9);
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn ventilation_opening(
        /// That is needed.
        flow: VolumeFlow in cubic_meter_per_hour [>= 0.0],
    ) -> area: Area in square_centimeter
    formula "A = 28·Q, A in cm², Q in m³/h"
    source "IEC 62485-2, recalled"
    { Area::new::<square_centimeter>(OPENING * flow.get::<cubic_meter_per_hour>()) }

    /// Distance from the cells within which nothing may spark or glow.
    ///
    /// # Example
    /// ```
    /// use ampwright::{battery::{ChargeStage, Chemistry, ignition_distance}, quantity::{parse, readable}};
    /// let result = ignition_distance(Chemistry::Flooded, ChargeStage::Boost, parse("400 Ah")?)?;
    /// assert_eq!(readable(result).to_string(), "576 mm");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn ignition_distance(
        /// Of the bank.
        chemistry: Chemistry in choice [choice],
        /// Stage of charge.
        stage: ChargeStage in choice [choice],
        /// Of one string: at 10 h for lead-acid, at 5 h for nickel-cadmium.
        capacity: ElectricCharge in ampere_hour [> 0.0],
    ) -> distance: Length in meter
    formula "d = 28.8 mm·∛I_gas·∛C, I_gas in mA/Ah as for the flow, C in Ah"
    source "IEC 62485-2, recalled"
    fallible "the bank gives off no hydrogen in ordinary use: lithium"
    {
        let gas = gassing_mA_per_Ah(chemistry, stage)?;
        let distance = 28.8 * libm::cbrt(gas) * libm::cbrt(capacity.get::<ampere_hour>());
        Ok(Length::new::<millimeter>(distance))
    }
}

#[cfg(test)]
mod tests {
    extern crate std;
    use super::*;
    use uom::si::ratio::ratio;

    fn flow(chemistry: Chemistry, stage: ChargeStage, cells: f64, capacity: f64) -> Result<f64, Error> {
        let capacity = ElectricCharge::new::<ampere_hour>(capacity);
        ventilation_flow(chemistry, stage, Ratio::new::<ratio>(cells), capacity)
            .map(|q| q.get::<cubic_meter_per_hour>())
    }

    #[test]
    fn boost_needs_more_than_float_and_sealed_less_than_vented() {
        for chemistry in [Chemistry::Flooded, Chemistry::Agm, Chemistry::Gel, Chemistry::NickelCadmium] {
            let [float, boost] =
                [ChargeStage::Float, ChargeStage::Boost].map(|s| flow(chemistry, s, 12.0, 100.0).unwrap());
            assert!(0.0 < float && float < boost, "{chemistry}");
            // In proportion to cells and capacity.
            assert!((flow(chemistry, ChargeStage::Boost, 24.0, 300.0).unwrap() - 6.0 * boost).abs() < 1e-12);
            let of =
                |vented, sealed| if crate::battery::data(chemistry).vented.value { vented } else { sealed };
            assert!((float - of(0.3, 0.06)).abs() < 1e-12, "{chemistry}: {float}");
        }
        for chemistry in [Chemistry::Lfp, Chemistry::Nmc] {
            assert_eq!(flow(chemistry, ChargeStage::Float, 4.0, 100.0).unwrap_err().slug(), "not-tabulated");
        }
    }

    /// The rounded factor of the standard against what it is rounded from: Faraday's law, 4 % by volume, five times
    /// over.
    #[test]
    fn the_flow_keeps_hydrogen_at_a_fifth_of_its_lower_limit() {
        // One electron for each H: half a mole of H2 for each mole of charge, 22.4 l/mol at 0 °C.
        let hydrogen_m3_per_Ah: f64 = 0.5 * 22.414e-3 * 3600.0 / 96485.0;
        assert!((hydrogen_m3_per_Ah - 0.42e-3).abs() < 0.005e-3);
        // 24 parts of air to one of hydrogen keep it at 4 %; five times as much keep it at a fifth of that. Rounded down by the
        // standard from 0.0504.
        let per_milliampere = 5.0 * 24.0 * hydrogen_m3_per_Ah * 1e-3;
        assert!((FLOW_PER_MILLIAMPERE / per_milliampere - 1.0).abs() < 0.01);
    }

    /// The faces print the formula: its figures are those of the table.
    #[test]
    fn the_formula_names_the_figures_of_the_table() {
        for chemistry in Chemistry::ALL {
            let pair = [ChargeStage::Float, ChargeStage::Boost]
                .map(|s| gassing_current(chemistry, s).map(|g| g.value));
            if let [Some(float), Some(boost)] = pair {
                assert!(ENTRIES[0].formula.contains(&std::format!("{float} and {boost}")), "{chemistry}");
            }
        }
    }
}
