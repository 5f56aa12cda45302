//! What was found about one run, check by check.

use alloc::vec::Vec;

use super::common::{Citation, Size, list};
use super::number::{Number, amps, degC, exact, ohms, part, tidy, volts, watts};
use super::shape::object;
use super::words::{CheckKind, Outcome, Relation};
use crate::circuit;
use crate::rules;
use crate::site::report::{CircuitLine, DeviceLine};
use crate::site::text::{is_bought, is_recommended};

object! {
    /// What was found about one run with one device.
    Judgement {
        /// Design current in the worst hour, A.
        current_A: Number,
        /// Its part of three hours or more, A.
        continuous_A: Number,
        /// Continuous current-carrying capacity as installed; null where the rule set tabulates none.
        ampacity: Option<Ampacity>,
        /// Temperature rating that picked the column of the table, °C.
        counted_degC: Number,
        /// Conductor temperature at the design current, °C.
        temperature_degC: Number,
        /// Resistance of the whole loop at that temperature, joints included, Ω.
        resistance_ohm: Number,
        /// Drop of this run, V.
        drop_V: Number,
        /// Drop of the whole path from the source, as part of nominal voltage.
        path_drop_ratio: Number,
        /// Voltage at the far end in the worst hour, V.
        end_voltage_V: Number,
        /// Power lost in the run, W.
        loss_W: Number,
        /// Least prospective current at the far end, A; null where the source is not known.
        least_fault_A: Number,
        /// Greatest device on this conductor; null where its ampacity is not tabulated.
        device_limit: Option<DeviceLimit>,
        /// The checks, in the order of the rule set.
        checks: Vec<Check>,
    }
}

object! {
    /// Ampacity (current-carrying capacity) of a conductor as installed.
    Ampacity {
        /// After all factors, A.
        corrected_A: Number,
        /// The cell of the table, A.
        base_A: Number,
        /// Table of that cell.
        base_citation: Citation,
        /// Column of the table.
        column: &'static str,
        /// Row of the table: the stated size, or the next smaller one that the table lists.
        row: Size,
        /// Factors, each once.
        factors: Vec<Factor>,
    }
}

object! {
    /// One correction factor of an ampacity.
    Factor {
        /// What it corrects for.
        name: &'static str,
        /// The factor.
        factor_ratio: Number,
        /// Table.
        citation: Citation,
    }
}

object! {
    /// Greatest device on a conductor.
    DeviceLimit {
        /// Greatest rating, A.
        most_A: Number,
        /// Rule in words.
        rule: &'static str,
        /// Source.
        citation: Citation,
    }
}

object! {
    /// One check with its numbers and its source.
    Check {
        /// Which check.
        check: CheckKind,
        /// How it went.
        outcome: Outcome,
        /// The value found, in `unit`, to the last bit; null without numbers and where not checked.
        value: Number,
        /// Its limit, in `unit`, to the last bit; null without numbers and where not checked.
        limit: Number,
        /// Unit of both; empty without numbers.
        unit: &'static str,
        /// The value is what a device to be bought must have: nothing is known of a part yet.
        to_be_bought: bool,
        /// The limit is a recommendation: not to keep it is advice, no nonconformity.
        recommended: bool,
        /// How value and limit relate.
        relation: Relation,
        /// Part of the limit that is used, above 1 where it failed; null without numbers and where not checked.
        used_ratio: Number,
        /// What was compared, or why nothing was.
        what: &'static str,
        /// The words of its result: against a recalled value nothing conforms.
        verdict: &'static str,
        /// Source of the limit.
        citation: Citation,
    }
}

impl Judgement {
    /// Of a circuit with one of its devices.
    pub(super) fn of(
        judgement: &circuit::Judgement,
        line: &CircuitLine,
        device: Option<&DeviceLine>,
    ) -> Self {
        let circuit::Judgement {
            current,
            continuous,
            ampacity,
            counted_degC,
            temperature,
            resistance,
            drop,
            path_drop,
            end_voltage,
            loss,
            least_fault,
            device_limit,
            checks,
        } = judgement;
        Self {
            current_A: amps(*current),
            continuous_A: amps(*continuous),
            ampacity: ampacity.as_ref().map(Into::into),
            counted_degC: tidy(*counted_degC),
            temperature_degC: degC(*temperature),
            resistance_ohm: ohms(*resistance),
            drop_V: volts(*drop),
            path_drop_ratio: part(*path_drop),
            end_voltage_V: volts(*end_voltage),
            loss_W: watts(*loss),
            least_fault_A: least_fault.and_then(amps),
            device_limit: device_limit.as_ref().map(Into::into),
            checks: checks.iter().map(|checked| Check::of(checked, line, device)).collect(),
        }
    }
}

impl From<&rules::Ampacity> for Ampacity {
    fn from(ampacity: &rules::Ampacity) -> Self {
        let rules::Ampacity { corrected, base, column, row, factors } = ampacity;
        let rules::Cell { value, citation } = base;
        Self {
            corrected_A: amps(*corrected),
            base_A: tidy(*value),
            base_citation: citation.into(),
            column,
            row: row.into(),
            factors: list(factors),
        }
    }
}

impl From<&rules::Factor> for Factor {
    fn from(factor: &rules::Factor) -> Self {
        let rules::Factor { name, value, citation } = factor;
        Self { name, factor_ratio: tidy(*value), citation: citation.into() }
    }
}

impl From<&rules::DeviceLimit> for DeviceLimit {
    fn from(limit: &rules::DeviceLimit) -> Self {
        let rules::DeviceLimit { most, rule, citation } = limit;
        Self { most_A: amps(*most), rule, citation: citation.into() }
    }
}

impl Check {
    fn of(checked: &circuit::Checked, line: &CircuitLine, device: Option<&DeviceLine>) -> Self {
        let circuit::Checked { check, outcome, actual, limit, unit, relation, what, citation } = checked;
        let compared = *relation != circuit::Relation::Plain && *outcome != circuit::Outcome::NotChecked;
        let number = |value: f64| if compared { exact(value) } else { None };
        Self {
            check: check.into(),
            outcome: outcome.into(),
            value: number(*actual),
            limit: number(*limit),
            unit,
            to_be_bought: device.is_some_and(|d| is_bought(d, *check)),
            recommended: is_recommended(line, *check),
            relation: relation.into(),
            used_ratio: checked.used().and_then(tidy),
            what,
            verdict: checked.verdict(),
            citation: citation.into(),
        }
    }
}
