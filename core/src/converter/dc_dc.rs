//! DC–DC converters: what they draw where their input is lowest, and what they may be asked for.

use uom::si::{electric_current::ampere, electric_potential::volt, power::watt, ratio::ratio};

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
    /// assert_eq!(readable(draw.loss).to_string(), "17 W");
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

fn checked(name: &'static str, value: f64, unit: &'static str, allowed: Allowed) -> Result<(), Error> {
    // Written so that NaN fails.
    let held = match allowed {
        Allowed::Between(least, most) => value >= least && value <= most,
        Allowed::AboveUpTo(least, most) => value > least && value <= most,
        _ => value.is_finite(),
    };
    if held { Ok(()) } else { Err(Error::OutOfRange { name, value, unit, allowed }) }
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
