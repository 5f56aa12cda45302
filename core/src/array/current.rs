//! Currents of an array for which conductors and devices are chosen, and when a string needs a device of its own.
//!
//! The factors come from a rule set, as numbers.

use uom::si::ratio::ratio;

use crate::catalogue::calculations;
use crate::quantity::{ElectricCurrent, Ratio};

calculations! {
    /// Current for which the conductors of a string or an array are chosen.
    ///
    /// # Example
    /// Two strings of 9.5 A after NFPA 70, 1.25 for bright light and 1.25 for hours of it:
    /// ```
    /// use ampwright::{array::array_current_design, quantity::{parse, readable}};
    /// let currents = array_current_design(parse("9.5 A")?, parse("2")?, parse("0 %")?, parse("1.25")?, parse("1.25")?)?;
    /// assert_eq!(readable(currents.greatest).to_string(), "23.8 A");
    /// assert_eq!(readable(currents.design).to_string(), "29.7 A");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn array_current_design(
        /// Short-circuit current of one string at standard test conditions.
        isc: ElectricCurrent in ampere [>= 0.0],
        /// Strings in parallel.
        strings: Ratio in ratio [1.0 ..= 1000.0] = 1.0,
        /// Current added by light from behind, as a part of the front's.
        bifacial_gain: Ratio in ratio [0.0 ..= 0.5] = 0.0,
        /// For light brighter than the standard 1000 W/m².
        irradiance_factor: Ratio in ratio [1.0 ..= 2.0] = 1.25,
        /// For current that flows for hours; 1 where the rule set has none.
        continuous_factor: Ratio in ratio [1.0 ..= 2.0] = 1.0,
    ) => ArrayCurrentDesign {
        /// What the sun can drive: with the irradiance factor.
        greatest: ElectricCurrent in ampere,
        /// For which conductors are chosen: with both factors.
        design: ElectricCurrent in ampere,
    }
    formula "I_greatest = n·Isc·(1 + b)·k_irradiance, I_design = I_greatest·k_continuous"
    source "us: NFPA 70-2023, 690.8(A)(1), (B)(1), 1.25 each; iec: IEC 62548:2016, 1.25 and 1 (recalled)"
    {
        let greatest = isc * strings * (Ratio::new::<ratio>(1.0) + bifacial_gain) * irradiance_factor;
        ArrayCurrentDesign { greatest, design: greatest * continuous_factor }
    }

    /// Current that all other strings and the bank drive backwards through a faulty string.
    ///
    /// A device in each string is required where it exceeds the module's series-fuse rating or the conductor's ampacity.
    ///
    /// # Example
    /// Three strings of 9.5 A, nothing from the bank:
    /// ```
    /// use ampwright::{array::string_fault_current, quantity::{parse, readable}};
    /// let fault = string_fault_current(parse("9.5 A")?, parse("3")?, parse("0 %")?, parse("1.25")?, parse("0 A")?)?;
    /// assert_eq!(readable(fault).to_string(), "23.8 A");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn string_fault_current(
        /// Short-circuit current of one string at standard test conditions.
        isc: ElectricCurrent in ampere [>= 0.0],
        /// Strings in parallel.
        strings: Ratio in ratio [1.0 ..= 1000.0],
        /// Current added by light from behind, as a part of the front's.
        bifacial_gain: Ratio in ratio [0.0 ..= 0.5] = 0.0,
        /// For light brighter than the standard 1000 W/m².
        irradiance_factor: Ratio in ratio [1.0 ..= 2.0] = 1.25,
        /// From the bank through the controller; 0 where that blocks.
        back_feed: ElectricCurrent in ampere [>= 0.0] = 0.0,
    ) -> current: ElectricCurrent in ampere
    formula "I = (n − 1)·Isc·(1 + b)·k_irradiance + I_back"
    source "Kirchhoff's current law; the rule: NFPA 70-2023, 690.9(A), IEC 62548:2016, 6.5.3 (recalled)"
    {
        let one = Ratio::new::<ratio>(1.0);
        isc * (strings - one) * (one + bifacial_gain) * irradiance_factor + back_feed
    }

    /// Most strings in parallel that need no device in each.
    ///
    /// # Example
    /// 9.5 A, modules that bear a fuse of 20 A, nothing from the bank:
    /// ```
    /// use ampwright::{array::strings_without_device, quantity::{parse, readable}};
    /// let most = strings_without_device(parse("9.5 A")?, parse("0 %")?, parse("1.25")?, parse("20 A")?, parse("0 A")?)?;
    /// assert_eq!(readable(most).to_string(), "2");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn strings_without_device(
        /// Short-circuit current of one string at standard test conditions.
        isc: ElectricCurrent in ampere [> 0.0],
        /// Current added by light from behind, as a part of the front's.
        bifacial_gain: Ratio in ratio [0.0 ..= 0.5] = 0.0,
        /// For light brighter than the standard 1000 W/m².
        irradiance_factor: Ratio in ratio [1.0 ..= 2.0] = 1.25,
        /// The module's series-fuse rating or the ampacity of the string's conductor, the lower.
        borne: ElectricCurrent in ampere [> 0.0],
        /// From the bank through the controller; 0 where that blocks.
        back_feed: ElectricCurrent in ampere [>= 0.0] = 0.0,
    ) -> strings: Ratio in ratio
    formula "n = ⌊(I_borne − I_back)/(Isc·(1 + b)·k_irradiance)⌋ + 1, at least 0; 0: even one string needs it"
    source "Kirchhoff's current law; the rule: NFPA 70-2023, 690.9(A), IEC 62548:2016, 6.5.3 (recalled)"
    {
        let one_string = isc * (Ratio::new::<ratio>(1.0) + bifacial_gain) * irradiance_factor;
        // The last bit of a quotient must not take a string away.
        let others = libm::floor(((borne - back_feed) / one_string).value * (1.0 + 1e-12));
        Ratio::new::<ratio>((others + 1.0).max(0.0))
    }

    /// Least rating of a string's fuse.
    ///
    /// # Example
    /// 9.5 A after NFPA 70 (1.56) and IEC 62548 (1.5):
    /// ```
    /// use ampwright::{array::string_fuse_least, quantity::{parse, readable}};
    /// let least = |factor| string_fuse_least(parse("9.5 A")?, parse("0 %")?, factor);
    /// assert_eq!(readable(least(parse("1.5625")?)?).to_string(), "14.84 A");
    /// assert_eq!(readable(least(parse("1.5")?)?).to_string(), "14.25 A");
    /// # Ok::<(), ampwright::Error>(())
    /// ```
    fn string_fuse_least(
        /// Short-circuit current of one string at standard test conditions.
        isc: ElectricCurrent in ampere [>= 0.0],
        /// Current added by light from behind, as a part of the front's.
        bifacial_gain: Ratio in ratio [0.0 ..= 0.5] = 0.0,
        /// Of the rule set: 1.5625, or 1.5.
        device_factor: Ratio in ratio [1.0 ..= 2.4],
    ) -> rating: ElectricCurrent in ampere
    formula "I = Isc·(1 + b)·k_device"
    source "us: NFPA 70-2023, 690.9(B), 1.25 × 1.25; iec: IEC 62548:2016, 6.5.3, 1.5 (recalled)"
    { isc * (Ratio::new::<ratio>(1.0) + bifacial_gain) * device_factor }
}
