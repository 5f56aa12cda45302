//! DC–DC converters: what they draw where their input is lowest, and what they may be asked for.

use uom::si::{electric_current::ampere, electric_potential::volt, power::watt, ratio::ratio};

use super::controller::checked;
use crate::catalogue::calculations;
use crate::citation::{Citation, Seen};
use crate::error::{Allowed, Error};
use crate::quantity::{ElectricCurrent, ElectricPotential, Power, Ratio};

/// Efficiency where the sheet gives none. Common practice, no source.
const USUAL_EFFICIENCY: f64 = 0.9;

/// Whether input and output share a conductor.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Isolation {
    /// They are separated: each side has its own earthing.
    Isolated,
    /// They share the negative conductor: a fault on one side reaches the other.
    Common,
}

/// A DC–DC converter, as its sheet states it.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct DcDc {
    /// Whether input and output share a conductor; `None` where the sheet does not say.
    pub isolation: Option<Isolation>,
    /// Lowest input voltage.
    pub input_low: ElectricPotential,
    /// Highest input voltage.
    pub input_high: ElectricPotential,
    /// Output voltage.
    pub output_voltage: ElectricPotential,
    /// Greatest output current.
    pub output_current: ElectricCurrent,
    /// At full load.
    pub efficiency: Option<Ratio>,
    /// Its own use without load.
    pub idle_power: Option<Power>,
}

/// What a converter draws at a load and at an input voltage.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct DcDcDraw {
    /// Current at the output.
    pub output_current: ElectricCurrent,
    /// Part of the greatest output current that is used.
    pub used: Ratio,
    /// Current at the input.
    pub input_current: ElectricCurrent,
    /// Heat in the converter.
    pub loss: Power,
    /// Source of the efficiency.
    pub efficiency: Citation,
}

impl DcDc {
    /// Efficiency: stated, else 90 %, common practice.
    pub fn efficiency(&self) -> (Ratio, Citation) {
        match self.efficiency {
            Some(stated) => (stated, Citation::new("the converter's sheet", "", Seen::Stated)),
            None => (
                Ratio::new::<ratio>(USUAL_EFFICIENCY),
                Citation::new("common practice, no source", "", Seen::Practice),
            ),
        }
    }

    /// What it draws for a load at an input voltage: the design current at the lowest.
    ///
    /// # Errors
    /// [`Error::OutOfRange`] for a load that is negative or above the output's rating, an input voltage outside the
    /// converter's range, or figures that are not finite; [`Error::Contradiction`] for an input range upside down.
    ///
    /// # Example
    /// A radio of 10 A at 12 V from a 24 V bank at its cut-off:
    /// ```
    /// use ampwright::converter::DcDc;
    /// use ampwright::quantity::{parse, readable};
    /// let converter = DcDc {
    ///     isolation: None,
    ///     input_low: parse("18 V")?,
    ///     input_high: parse("35 V")?,
    ///     output_voltage: parse("12.5 V")?,
    ///     output_current: parse("20 A")?,
    ///     efficiency: Some(parse("88 %")?),
    ///     idle_power: None,
    /// };
    /// let draw = converter.draw(parse("10 A")?, parse("21 V")?)?;
    /// assert_eq!(readable(draw.input_current).to_string(), "6.76 A");
    /// assert_eq!(readable(draw.loss).to_string(), "17.05 W");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    pub fn draw(
        &self,
        output_current: ElectricCurrent,
        input_voltage: ElectricPotential,
    ) -> Result<DcDcDraw, Error> {
        let (low, high) = (self.input_low.get::<volt>(), self.input_high.get::<volt>());
        checked("input_low", low, "V", Allowed::AboveUpTo(0.0, 3000.0))?;
        checked("input_high", high, "V", Allowed::AboveUpTo(0.0, 3000.0))?;
        if low > high {
            let why = "it must not be above input_high";
            return Err(Error::Contradiction { name: "input_low", value: low, unit: "V", why });
        }
        let rated = self.output_current.get::<ampere>();
        checked("rated output current", rated, "A", Allowed::AboveUpTo(0.0, 1e5))?;
        checked("output current", output_current.get::<ampere>(), "A", Allowed::Between(0.0, rated))?;
        checked("input voltage", input_voltage.get::<volt>(), "V", Allowed::Between(low, high))?;
        let (efficiency, citation) = self.efficiency();
        let result = dc_dc_input_current(self.output_voltage, output_current, input_voltage, efficiency)?;
        Ok(DcDcDraw {
            output_current,
            used: output_current / self.output_current,
            input_current: result.input_current,
            loss: result.loss,
            efficiency: citation,
        })
    }

    /// Greatest power at the output.
    pub fn greatest_power(&self) -> Power {
        Power::new::<watt>(self.output_voltage.get::<volt>() * self.output_current.get::<ampere>())
    }
}

calculations! {
    /// Current that a DC–DC converter draws at its input.
    ///
    /// # Example
    /// 20 A at 13.5 V from a 48 V bank at its cut-off, 42 V:
    /// ```
    /// use ampwright::{converter::dc_dc_input_current, quantity::{parse, readable}};
    /// let draw = dc_dc_input_current(parse("13.5 V")?, parse("20 A")?, parse("42 V")?, parse("90 %")?)?;
    /// assert_eq!(readable(draw.input_current).to_string(), "7.14 A");
    /// assert_eq!(readable(draw.loss).to_string(), "30 W");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn dc_dc_input_current(
        /// At the output.
        output_voltage: ElectricPotential in volt [> 0.0],
        /// At the output.
        output_current: ElectricCurrent in ampere [>= 0.0],
        /// The lowest at which it still runs gives the design current.
        input_voltage: ElectricPotential in volt [> 0.0],
        /// At that load.
        efficiency: Ratio in ratio [> 0.0 ..= 1.0] = 0.9,
    ) => DcDcInput {
        /// At the output.
        output_power: Power in watt,
        /// At the input.
        input_current: ElectricCurrent in ampere,
        /// Heat in the converter.
        loss: Power in watt,
    }
    formula "P = U_out·I_out, I_in = P/(η·U_in), loss = P/η − P"
    source "energy balance; the default efficiency is common practice, no source"
    {
        let output_power = output_voltage * output_current;
        let input_power = output_power / efficiency;
        DcDcInput { output_power, input_current: input_power / input_voltage, loss: input_power - output_power }
    }
}

#[cfg(test)]
mod tests {
    extern crate std;
    use std::string::ToString;

    use proptest::prelude::*;

    use super::*;
    use crate::quantity::{Textual, parse};

    fn q<Q: Textual>(text: &str) -> Q {
        parse(text).unwrap()
    }

    fn converter() -> DcDc {
        DcDc {
            isolation: Some(Isolation::Isolated),
            input_low: q("18 V"),
            input_high: q("35 V"),
            output_voltage: q("12.5 V"),
            output_current: q("20 A"),
            efficiency: None,
            idle_power: None,
        }
    }

    #[test]
    fn what_it_cannot_do_is_refused() {
        let told = |load, input| converter().draw(q(load), q(input)).unwrap_err().to_string();
        assert_eq!(told("21 A", "24 V"), "output current is 21 A; it must be between 0 and 20");
        assert_eq!(told("10 A", "17.9 V"), "input voltage is 17.9 V; it must be between 18 and 35");
        assert_eq!(told("10 A", "36 V"), "input voltage is 36 V; it must be between 18 and 35");
        let upside_down = DcDc { input_low: q("36 V"), ..converter() };
        assert!(matches!(upside_down.draw(q("1 A"), q("24 V")), Err(Error::Contradiction { .. })));
    }

    #[test]
    fn without_a_stated_efficiency_it_is_practice() {
        let draw = converter().draw(q("20 A"), q("18 V")).unwrap();
        assert_eq!(draw.efficiency.seen, Seen::Practice);
        assert_eq!((draw.used.value, converter().greatest_power().value), (1.0, 250.0));
        assert!((draw.input_current.value - 250.0 / 0.9 / 18.0).abs() < 1e-12);
    }

    proptest! {
        #[test]
        fn energy_is_kept_and_the_lowest_voltage_draws_most(load in 0.0..20.0f64, input in 18.0..35.0f64) {
            let at = |x| converter().draw(ElectricCurrent::new::<ampere>(load), ElectricPotential::new::<volt>(x)).unwrap();
            let draw = at(input);
            prop_assert!((draw.input_current.value * input - 12.5 * load - draw.loss.value).abs() < 1e-9);
            prop_assert!(at(18.0).input_current >= draw.input_current);
        }

        #[test]
        fn any_bits_give_an_answer_or_an_error(a: u64, b: u64, c: u64, d: u64, e: u64) {
            let f = f64::from_bits;
            let odd = DcDc {
                input_low: ElectricPotential::new::<volt>(f(a)),
                output_voltage: ElectricPotential::new::<volt>(f(b)),
                output_current: ElectricCurrent::new::<ampere>(f(c)),
                ..converter()
            };
            let _ = odd.draw(ElectricCurrent::new::<ampere>(f(d)), ElectricPotential::new::<volt>(f(e)));
        }
    }
}
