//! Banks, energy, arrays, inverters, sources.

use alloc::vec::Vec;

use super::common::{DerivationStep, Rejected, list, texts};
use super::number::{Number, ampere_hours, amps, days, hours, part, volts, watt_hours, watts};
use super::shape::object;
use crate::site::describe::PlantLines;
use crate::site::energy;
use crate::site::lines::{ArrayLine, BankLine, DemandLine, GeneratorLine, InverterLine};

object! {
    /// The plant; every list is empty where only wiring is described.
    Plant<'a> {
        /// Banks.
        banks: Vec<Bank<'a>>,
        /// Energy of the months, one for each bank or group of banks.
        demands: Vec<BankDemand<'a>>,
        /// Arrays.
        arrays: Vec<Array<'a>>,
        /// Inverters.
        inverters: Vec<Inverter<'a>>,
        /// Sources beside the sun.
        generators: Vec<Generator<'a>>,
    }
}

object! {
    /// One bank.
    Bank<'a> {
        /// Name.
        name: &'a str,
        /// It was chosen by the design.
        designed: bool,
        /// Chemistry, as a site file names it.
        chemistry: &'static str,
        /// Nominal voltage, V.
        nominal_V: Number,
        /// Capacity of the whole bank, Ah.
        capacity_Ah: Number,
        /// Name of the battery in the stock; null where it is not of the stock.
        battery: Option<&'a str>,
        /// Batteries in one string; null where not known.
        series_count: Option<u32>,
        /// Strings in parallel.
        string_count: u32,
        /// Least voltage in use, V.
        cut_off_V: Number,
        /// Highest charge voltage, compensated for cold, V.
        highest_V: Number,
        /// Voltage at which loads are disconnected, V; null where not known.
        disconnect_V: Number,
        /// Voltage at which they come back, V; null where not known.
        reconnect_V: Number,
        /// Absorption at 25 °C, V; null where not known.
        absorption_V: Number,
        /// Float at 25 °C, V; null where there is none.
        float_V: Number,
        /// Equalising at 25 °C, V; null where there is none.
        equalise_V: Number,
        /// Capacity that the loads ask for, Ah; null where their times are not known.
        needed_Ah: Number,
        /// Days without charge on the greatest day's demand, down to its greatest depth, d; null where not known.
        autonomy_d: Number,
        /// How it came to that.
        steps: Vec<DerivationStep<'a>>,
        /// Batteries that were not taken.
        rejected: Vec<Rejected<'a>>,
    }
}

object! {
    /// Energy of the months on one bank. Lists of twelve begin with January.
    BankDemand<'a> {
        /// The bank, or the first of those joined.
        bank: &'a str,
        /// The mean day of each month.
        mean_days: [DayDemand; 12],
        /// A day of each month on which everything runs.
        full_days: [DayDemand; 12],
        /// What arrays bring into the bank on the mean day of each month, Wh; null without weather.
        arrays_Wh: Option<[Number; 12]>,
        /// What generators bring on a day, as stated, Wh.
        generators_Wh: Number,
    }
}

object! {
    /// What one day takes out of a bank.
    DayDemand {
        /// Loads on direct current, at their terminals, Wh.
        dc_Wh: Number,
        /// Loads behind inverters, at their terminals, Wh.
        ac_Wh: Number,
        /// What the inverters draw for them, idle included, Wh.
        inverters_Wh: Number,
        /// What controllers draw idle, Wh.
        controllers_Wh: Number,
        /// What converters lose and draw idle, Wh.
        converters_Wh: Number,
        /// What the wiring loses, Wh.
        wiring_Wh: Number,
        /// All of it, at the terminals of the bank, Wh.
        total_Wh: Number,
        /// The part of it that flows whether or not anybody uses the place, Wh.
        standing_Wh: Number,
    }
}

object! {
    /// One array.
    Array<'a> {
        /// Name.
        name: &'a str,
        /// It was chosen by the design.
        designed: bool,
        /// Name of the module, or that it has its own figures.
        module: &'a str,
        /// Modules in each string.
        series_count: u32,
        /// Strings in parallel.
        string_count: u32,
        /// Rated power, W.
        power_W: Number,
        /// Name of its controller; null where it has none.
        controller: Option<&'a str>,
        /// The controller was chosen by the design; null where it has none.
        controller_designed: Option<bool>,
        /// Greatest output current of the controller, A; null where not known.
        output_A: Number,
        /// Open-circuit voltage of a string in the greatest cold, V; null where not known.
        cold_voc_V: Number,
        /// Voltage of a string at maximum power in the greatest heat, V; null where not known.
        hot_vmp_V: Number,
        /// Greatest short-circuit current of the array, A; null where not known.
        greatest_A: Number,
        /// Every string needs a device of its own; null where not known.
        device_required: Option<bool>,
        /// Month in which demand over sun is greatest, 1 for January to 12; null where not known.
        worst_month: Option<usize>,
        /// Array-to-load ratio in that month; null where not known.
        reached_ratio: Number,
        /// Why series or parallel; empty where nothing was chosen.
        layout: &'a str,
        /// How it came to that.
        steps: Vec<DerivationStep<'a>>,
        /// What was not taken.
        rejected: Vec<Rejected<'a>>,
        /// Checks that passed, in words.
        passed: Vec<&'a str>,
    }
}

object! {
    /// One inverter.
    Inverter<'a> {
        /// Name.
        name: &'a str,
        /// It was chosen by the design.
        designed: bool,
        /// Continuous power, W.
        power_W: Number,
        /// Surge, W; null where not stated.
        surge_W: Number,
        /// Greatest coincident power of its loads, W.
        demand_W: Number,
        /// The same as apparent power with the largest start, VA.
        starting_VA: Number,
        /// How it came to that.
        steps: Vec<DerivationStep<'a>>,
        /// What was not taken.
        rejected: Vec<Rejected<'a>>,
    }
}

object! {
    /// One source beside the sun.
    Generator<'a> {
        /// Name.
        name: &'a str,
        /// What it gives to the bank, A; null where not known.
        current_A: Number,
        /// What lasts of it when hot and high, A; null where not known.
        lasting_A: Number,
        /// Time from greatest depth to full, absorption included, h; null where not known.
        recharge_h: Number,
        /// How it came to that.
        steps: Vec<DerivationStep<'a>>,
    }
}

impl<'a> From<&'a PlantLines> for Plant<'a> {
    fn from(plant: &'a PlantLines) -> Self {
        let PlantLines { banks, demands, arrays, inverters, generators } = plant;
        Self {
            banks: list(banks),
            demands: list(demands),
            arrays: list(arrays),
            inverters: list(inverters),
            generators: list(generators),
        }
    }
}

impl<'a> From<&'a BankLine> for Bank<'a> {
    fn from(line: &'a BankLine) -> Self {
        let BankLine {
            name,
            designed,
            chemistry,
            nominal,
            capacity,
            battery,
            series,
            strings,
            cut_off,
            highest,
            disconnect,
            reconnect,
            absorption,
            float,
            equalise,
            needed,
            autonomy,
            steps,
            rejected,
        } = line;
        Self {
            name,
            designed: *designed,
            chemistry: chemistry.word(),
            nominal_V: volts(*nominal),
            capacity_Ah: ampere_hours(*capacity),
            battery: battery.as_deref(),
            series_count: *series,
            string_count: *strings,
            cut_off_V: volts(*cut_off),
            highest_V: volts(*highest),
            disconnect_V: disconnect.and_then(volts),
            reconnect_V: reconnect.and_then(volts),
            absorption_V: absorption.and_then(volts),
            float_V: float.and_then(volts),
            equalise_V: equalise.and_then(volts),
            needed_Ah: needed.and_then(ampere_hours),
            autonomy_d: autonomy.and_then(days),
            steps: list(steps),
            rejected: list(rejected),
        }
    }
}

impl<'a> From<&'a DemandLine> for BankDemand<'a> {
    fn from(line: &'a DemandLine) -> Self {
        let DemandLine { bank, mean, full, arrays, generators } = line;
        Self {
            bank,
            mean_days: mean.each_ref().map(Into::into),
            full_days: full.each_ref().map(Into::into),
            arrays_Wh: arrays.map(|months| months.map(watt_hours)),
            generators_Wh: watt_hours(*generators),
        }
    }
}

impl From<&energy::DayDemand> for DayDemand {
    fn from(day: &energy::DayDemand) -> Self {
        let energy::DayDemand { dc, ac, inverters, controllers, converters, wiring, total, standing } = *day;
        Self {
            dc_Wh: watt_hours(dc),
            ac_Wh: watt_hours(ac),
            inverters_Wh: watt_hours(inverters),
            controllers_Wh: watt_hours(controllers),
            converters_Wh: watt_hours(converters),
            wiring_Wh: watt_hours(wiring),
            total_Wh: watt_hours(total),
            standing_Wh: watt_hours(standing),
        }
    }
}

impl<'a> From<&'a ArrayLine> for Array<'a> {
    fn from(line: &'a ArrayLine) -> Self {
        let ArrayLine {
            name,
            designed,
            module,
            series,
            strings,
            power,
            controller,
            output,
            cold_voc,
            hot_vmp,
            greatest,
            device_required,
            worst_month,
            reached,
            layout,
            steps,
            rejected,
            passed,
        } = line;
        Self {
            name,
            designed: *designed,
            module,
            series_count: *series,
            string_count: *strings,
            power_W: watts(*power),
            controller: controller.as_ref().map(|(name, _)| name.as_str()),
            controller_designed: controller.as_ref().map(|(_, designed)| *designed),
            output_A: output.and_then(amps),
            cold_voc_V: cold_voc.and_then(volts),
            hot_vmp_V: hot_vmp.and_then(volts),
            greatest_A: greatest.and_then(amps),
            device_required: *device_required,
            worst_month: worst_month.map(|month| month.saturating_add(1)),
            reached_ratio: reached.and_then(part),
            layout,
            steps: list(steps),
            rejected: list(rejected),
            passed: texts(passed),
        }
    }
}

impl<'a> From<&'a InverterLine> for Inverter<'a> {
    fn from(line: &'a InverterLine) -> Self {
        let InverterLine { name, designed, power, surge, demand, starting, steps, rejected } = line;
        Self {
            name,
            designed: *designed,
            power_W: watts(*power),
            surge_W: surge.and_then(watts),
            demand_W: watts(*demand),
            starting_VA: watts(*starting),
            steps: list(steps),
            rejected: list(rejected),
        }
    }
}

impl<'a> From<&'a GeneratorLine> for Generator<'a> {
    fn from(line: &'a GeneratorLine) -> Self {
        let GeneratorLine { name, current, lasting, recharge, steps } = line;
        Self {
            name,
            current_A: current.and_then(amps),
            lasting_A: lasting.and_then(amps),
            recharge_h: recharge.and_then(hours),
            steps: list(steps),
        }
    }
}
