//! What an array gives through a controller that clamps it to the bank, and through one that tracks its maximum.
//!
//! The array comes in as numbers and a current for each voltage: the rooms of physics do not use each other.

use uom::si::{electric_current::ampere, electric_potential::volt, power::watt, ratio::ratio};

use super::controller::{Controller, ControllerKind, checked};
use crate::catalogue::calculations;
use crate::error::{Allowed, Error};
use crate::quantity::{ElectricCurrent, ElectricPotential, Power, Ratio};

/// An array at the controller's input, in the light and at the cell temperature of the moment.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct ArrayInput {
    /// Rated power times the part of 1000 W/m²: what it would give with cells at 25 °C.
    pub rated: Power,
    /// Voltage at maximum power.
    pub vmp: ElectricPotential,
    /// Current at maximum power.
    pub imp: ElectricCurrent,
    /// Open-circuit voltage.
    pub voc: ElectricPotential,
}

/// What reaches the bank, and where the rest went: the terms sum to what the array is rated for.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct ControllerYield {
    /// What the array would give in this light with cells at 25 °C.
    pub rated: Power,
    /// Lost to the cells' temperature; negative in the cold.
    pub temperature: Power,
    /// Lost because the array is not held at its voltage of maximum power.
    pub voltage_mismatch: Power,
    /// Lost because the output is at its limit.
    pub clipping: Power,
    /// Lost in the controller.
    pub conversion: Power,
    /// Into the bank.
    pub delivered: Power,
    /// Voltage at which the array is held; 0 where it delivers nothing.
    pub array_voltage: ElectricPotential,
    /// Current into the bank.
    pub current: ElectricCurrent,
}

/// What an array gives through a controller into a bank at a voltage.
///
/// A clamped array stands at the bank's voltage. A tracked one stands at its maximum, or at the end of the controller's
/// window next to it, where the window begins no lower than bank voltage plus start margin (0 where not stated); an array that
/// cannot reach the window gives nothing. Both end at the output current: a clamping controller cannot hold back more
/// current than that, so what is beyond its rating is not counted as yield.
///
/// # Errors
/// [`Error::OutOfRange`] for figures outside their ranges, or a current of the array that is not finite.
///
/// # Example
/// A hot module of 100 W on a bank at 13 V, its current taken as that of maximum power:
/// ```
/// use ampwright::converter::{ArrayInput, Controller, ControllerKind, controller_yield};
/// use ampwright::quantity::{parse, readable};
/// let array = ArrayInput { rated: parse("100 W")?, vmp: parse("16 V")?, imp: parse("5.4 A")?, voc: parse("20 V")? };
/// let controller = Controller::plain(ControllerKind::Pwm, parse("20 A")?);
/// let found = controller_yield(&controller, &array, parse("13 V")?, |_| array.imp)?;
/// // 100 W less 13.6 W of heat, 16.2 W of volts that the clamp leaves, 1.4 W in the controller.
/// assert_eq!(readable(found.temperature).to_string(), "13.6 W");
/// assert_eq!(readable(found.voltage_mismatch).to_string(), "16.2 W");
/// assert_eq!(readable(found.delivered).to_string(), "68.8 W");
/// # Ok::<(), ampwright::Error>(())
/// ```
pub fn controller_yield(
    controller: &Controller,
    array: &ArrayInput,
    bank: ElectricPotential,
    current_at: impl Fn(ElectricPotential) -> ElectricCurrent,
) -> Result<ControllerYield, Error> {
    controller.check()?;
    let bank = bank.get::<volt>();
    checked("bank voltage", bank, "V", Allowed::AboveUpTo(0.0, 2000.0))?;
    let rated = array.rated.get::<watt>();
    let (vmp, imp) = (array.vmp.get::<volt>(), array.imp.get::<ampere>());
    let voc = array.voc.get::<volt>();
    checked("rated power of the array", rated, "W", Allowed::Between(0.0, 1e9))?;
    checked("vmp", vmp, "V", Allowed::Between(0.0, 1e4))?;
    checked("imp", imp, "A", Allowed::Between(0.0, 1e5))?;
    checked("voc", voc, "V", Allowed::Between(0.0, 1e4))?;
    let held = held_at(controller, vmp, voc, bank);
    let flowing = match held {
        Some(volts) => current_at(ElectricPotential::new::<volt>(volts)).get::<ampere>(),
        None => 0.0,
    };
    checked("current of the array", flowing, "A", Allowed::Between(-1e6, 1e6))?;
    let most = vmp * imp;
    // No array gives more than its maximum, and none takes power through a controller.
    let given = (held.unwrap_or(0.0) * flowing).clamp(0.0, most);
    let efficiency = controller.efficiency().0.get::<ratio>();
    let limit = controller.output_current.get::<ampere>() * bank;
    let delivered = (given * efficiency).min(limit);
    let taken = delivered / efficiency;
    let w = Power::new::<watt>;
    Ok(ControllerYield {
        rated: w(rated),
        temperature: w(rated - most),
        voltage_mismatch: w(most - given),
        clipping: w(given - taken),
        conversion: w(taken - delivered),
        delivered: w(delivered),
        array_voltage: ElectricPotential::new::<volt>(held.filter(|_| given > 0.0).unwrap_or(0.0)),
        current: ElectricCurrent::new::<ampere>(delivered / bank),
    })
}

/// Voltage at which the array is held, if it delivers there.
fn held_at(controller: &Controller, vmp: f64, voc: f64, bank: f64) -> Option<f64> {
    let volts = match controller.kind {
        ControllerKind::Pwm => bank,
        ControllerKind::Mppt => {
            let margin = controller.start_margin.map_or(0.0, |v| v.get::<volt>());
            let low = controller.window_low.map_or(0.0, |v| v.get::<volt>()).max(bank + margin);
            let high = controller.window_high.map_or(f64::INFINITY, |v| v.get::<volt>());
            if low > high {
                return None;
            }
            vmp.clamp(low, high)
        }
    };
    (volts < voc).then_some(volts)
}

calculations! {
    /// Power into a bank from an array that is clamped to its voltage.
    ///
    /// The plain product: the current at the bank's voltage is nearly that at maximum power, a little more in truth.
    ///
    /// # Example
    /// A module of 17 V and 7 A on a bank at 12 V:
    /// ```
    /// use ampwright::{converter::pwm_power, quantity::{parse, readable}};
    /// let result = pwm_power(parse("17 V")?, parse("7 A")?, parse("12 V")?, parse("100 %")?)?;
    /// assert_eq!(readable(result.delivered).to_string(), "84 W");
    /// assert_eq!(readable(result.mismatch_part).to_string(), "0.294");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn pwm_power(
        /// Voltage of the array at maximum power, with the cells as hot as they are.
        vmp: ElectricPotential in volt [> 0.0],
        /// Current of the array at maximum power.
        imp: ElectricCurrent in ampere [>= 0.0],
        /// Of the bank.
        bank_voltage: ElectricPotential in volt [> 0.0],
        /// Of the controller.
        efficiency: Ratio in ratio [> 0.0 ..= 1.0] = 0.98,
    ) => PwmPower {
        /// Into the bank.
        delivered: Power in watt,
        /// Part of the maximum power that the clamp loses.
        mismatch_part: Ratio in ratio,
    }
    where (bank_voltage <= vmp) bank_voltage in volt: "it must not be above vmp: the array's current falls there; take more modules in series"
    formula "P = Imp·U·η, part lost 1 − U/Vmp"
    source "energy balance; the default efficiency is common practice, no source"
    {
        PwmPower {
            delivered: imp * bank_voltage * efficiency,
            mismatch_part: Ratio::new::<ratio>(1.0) - bank_voltage / vmp,
        }
    }

    /// Power into a bank from an array held at its maximum, up to the controller's output current.
    ///
    /// # Example
    /// 900 W through 95 % into 24 V with at most 30 A:
    /// ```
    /// use ampwright::{converter::mppt_power, quantity::{parse, readable}};
    /// let result = mppt_power(parse("900 W")?, parse("24 V")?, parse("30 A")?, parse("95 %")?)?;
    /// assert_eq!(readable(result.delivered).to_string(), "720 W");
    /// assert_eq!(readable(result.clipped).to_string(), "142.1 W");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn mppt_power(
        /// Greatest power of the array in this light and heat.
        array_power: Power in watt [>= 0.0],
        /// Of the bank.
        bank_voltage: ElectricPotential in volt [> 0.0],
        /// Greatest current into the bank.
        output_current: ElectricCurrent in ampere [> 0.0],
        /// Of the controller.
        efficiency: Ratio in ratio [> 0.0 ..= 1.0] = 0.95,
    ) => MpptPower {
        /// Into the bank.
        delivered: Power in watt,
        /// Power that the array could give and the output does not take.
        clipped: Power in watt,
        /// Lost in the controller.
        conversion: Power in watt,
    }
    formula "P = min(η·P_array, I·U), clipped = P_array − P/η, conversion = P/η − P"
    source "energy balance; the default efficiency is common practice, no source"
    {
        let limit = output_current * bank_voltage;
        let could = array_power * efficiency;
        let delivered = if could < limit { could } else { limit };
        let taken = delivered / efficiency;
        MpptPower { delivered, clipped: array_power - taken, conversion: taken - delivered }
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

    /// Twelve-volt module, hot: rated 100 W.
    fn array() -> ArrayInput {
        ArrayInput { rated: q("100 W"), vmp: q("16 V"), imp: q("5.4 A"), voc: q("20 V") }
    }

    fn volts(x: f64) -> ElectricPotential {
        ElectricPotential::new::<volt>(x)
    }

    /// Of the test: flat to maximum power, then straight to open circuit.
    fn plain(array: ArrayInput) -> impl Fn(ElectricPotential) -> ElectricCurrent {
        move |voltage| {
            let beyond = ((voltage - array.vmp) / (array.voc - array.vmp)).value.clamp(0.0, 1.0);
            array.imp * (1.0 - beyond)
        }
    }

    fn given(controller: &Controller, bank: f64) -> ControllerYield {
        controller_yield(controller, &array(), volts(bank), plain(array())).unwrap()
    }

    fn sum(y: &ControllerYield) -> f64 {
        (y.temperature + y.voltage_mismatch + y.clipping + y.conversion + y.delivered).value
    }

    #[test]
    fn a_clamped_array_loses_the_volts_it_does_not_use() {
        let mut controller = Controller::plain(ControllerKind::Pwm, q("20 A"));
        controller.efficiency = Some(q("1"));
        let y = given(&controller, 13.0);
        // 100 W rated, 86.4 W hot, 70.2 W at 13 V.
        for (term, expected) in [
            (y.temperature, 13.6),
            (y.voltage_mismatch, 16.2),
            (y.clipping, 0.0),
            (y.conversion, 0.0),
            (y.delivered, 70.2),
        ] {
            assert!((term.value - expected).abs() < 1e-9, "{y:?}");
        }
        assert_eq!((y.array_voltage, y.current.value), (volts(13.0), 5.4));
        // The plain formula is the same product.
        let plain = pwm_power(array().vmp, array().imp, volts(13.0), q("1")).unwrap();
        assert!((plain.delivered.value - y.delivered.value).abs() < 1e-12);
        assert!((plain.mismatch_part.value - 16.2 / 86.4).abs() < 1e-12);
    }

    #[test]
    fn a_tracked_array_gives_its_maximum_less_the_converter() {
        let mut controller = Controller::plain(ControllerKind::Mppt, q("20 A"));
        controller.start_margin = Some(q("2 V"));
        let y = given(&controller, 13.0);
        assert!((y.delivered.value - 0.95 * 86.4).abs() < 1e-9 && y.voltage_mismatch.value == 0.0);
        assert!((y.conversion.value - 0.05 * 86.4).abs() < 1e-9);
        let plain = mppt_power(q("86.4 W"), volts(13.0), q("20 A"), q("95 %")).unwrap();
        assert!((plain.delivered.value - y.delivered.value).abs() < 1e-12);
    }

    #[test]
    fn the_output_current_clips() {
        let mut controller = Controller::plain(ControllerKind::Mppt, q("5 A"));
        controller.efficiency = Some(q("90 %"));
        let y = given(&controller, 12.0);
        assert!((y.delivered.value - 60.0).abs() < 1e-9 && (y.current.value - 5.0).abs() < 1e-12);
        assert!((y.clipping.value - (86.4 - 60.0 / 0.9)).abs() < 1e-9);
        let plain = mppt_power(q("86.4 W"), volts(12.0), q("5 A"), q("90 %")).unwrap();
        assert!((plain.clipped.value - y.clipping.value).abs() < 1e-12);
        assert!((plain.conversion.value - y.conversion.value).abs() < 1e-12);
    }

    #[test]
    fn an_array_below_the_bank_or_the_window_gives_nothing_or_less() {
        let mut controller = Controller::plain(ControllerKind::Mppt, q("20 A"));
        controller.start_margin = Some(q("5 V"));
        // 13 + 5 = 18 V: between maximum power and open circuit; half the current is left there.
        let y = given(&controller, 13.0);
        assert_eq!(y.array_voltage, volts(18.0));
        assert!((y.voltage_mismatch.value - (86.4 - 18.0 * 2.7)).abs() < 1e-9);
        // 16 + 5 = 21 V: above open circuit.
        let y = given(&controller, 16.0);
        assert_eq!((y.delivered.value, y.array_voltage.value), (0.0, 0.0));
        assert!((y.voltage_mismatch.value - 86.4).abs() < 1e-9);
        // The window's upper end holds the array below its maximum.
        controller.start_margin = None;
        controller.window_high = Some(q("14 V"));
        assert!((given(&controller, 13.0).voltage_mismatch.value - 2.0 * 5.4).abs() < 1e-9);
        assert_eq!(given(&controller, 14.5).delivered.value, 0.0);
        // A clamping controller above open circuit.
        assert_eq!(given(&Controller::plain(ControllerKind::Pwm, q("20 A")), 20.5).delivered.value, 0.0);
    }

    #[test]
    fn a_bank_above_maximum_power_is_no_case_for_the_plain_product() {
        let error = pwm_power(q("17 V"), q("7 A"), q("18 V"), q("1")).unwrap_err();
        assert_eq!(
            error.to_string(),
            "bank_voltage is 18 V; it must not be above vmp: the array's current falls there; take more modules in series"
        );
    }

    proptest! {
        #[test]
        fn the_terms_sum_to_the_whole(
            tracking: bool, bank in 8.0..70.0f64, vmp in 5.0..120.0f64, above in 1.05..1.4f64,
            imp in 0.0..40.0f64, output in 1.0..60.0f64, rated in 0.0..5000.0f64, efficiency in 0.5..1.0f64,
        ) {
            let kind = if tracking { ControllerKind::Mppt } else { ControllerKind::Pwm };
            let mut controller = Controller::plain(kind, ElectricCurrent::new::<ampere>(output));
            controller.efficiency = Some(Ratio::new::<ratio>(efficiency));
            let array = ArrayInput {
                rated: Power::new::<watt>(rated),
                vmp: volts(vmp),
                imp: ElectricCurrent::new::<ampere>(imp),
                voc: volts(vmp * above),
            };
            let y = controller_yield(&controller, &array, volts(bank), plain(array)).unwrap();
            prop_assert!((sum(&y) - rated).abs() <= 1e-9 * (rated + vmp * imp), "{y:?}");
            for term in [y.voltage_mismatch, y.clipping, y.conversion, y.delivered] {
                prop_assert!(term.value >= -1e-9, "{y:?}");
            }
            prop_assert!(y.current.value <= output * (1.0 + 1e-12));
        }

        #[test]
        fn any_bits_give_an_answer_or_an_error(bits in prop::array::uniform8(any::<u64>())) {
            let [a, b, c, d, e, f, g, h] = bits.map(f64::from_bits);
            for kind in [ControllerKind::Pwm, ControllerKind::Mppt] {
                let mut controller = Controller::plain(kind, ElectricCurrent::new::<ampere>(a));
                controller.window_low = Some(volts(b));
                controller.window_high = Some(volts(c));
                let array = ArrayInput {
                    rated: Power::new::<watt>(d),
                    vmp: volts(e),
                    imp: ElectricCurrent::new::<ampere>(f),
                    voc: volts(g),
                };
                let _ = controller_yield(&controller, &array, volts(h), |_| ElectricCurrent::new::<ampere>(d));
                let controller = Controller::plain(kind, q("20 A"));
                let _ = controller_yield(&controller, &array, volts(h), |v| ElectricCurrent::new::<ampere>(v.value * d));
            }
        }
    }
}
