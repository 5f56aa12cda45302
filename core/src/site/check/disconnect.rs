//! Where the loads of a bank are dropped and taken back (R14).

use alloc::format;

use uom::si::electric_charge::ampere_hour;
use uom::si::electric_current::ampere;
use uom::si::electric_potential::volt;
use uom::si::thermodynamic_temperature::degree_celsius;

use super::At;
use crate::battery::{Chemistry, DISCONNECT, disconnect};
use crate::quantity::ChargeRate;
use crate::site::complete::bank::{temperatures, was_designed};
use crate::site::energy::Demand;
use crate::site::finding::{Severity, digits};
use crate::site::parts::BankPart;
use crate::site::system::{BankEntry, Site};

/// How far a stated disconnect may lie below what the chemistry, current and cold ask for, part of nominal.
const DISCONNECT_SLACK: f64 = 0.01;
/// Least distance of reconnect from disconnect, part of nominal. Common practice, no source.
const HYSTERESIS: f64 = 0.025;
const HOURS_A_DAY: f64 = 24.0;
/// Rounding of voltages, V.
const HAIR_V: f64 = 1e-6;

/// Disconnect and reconnect (R14).
pub(super) fn disconnects(
    site: &Site,
    bank: &BankEntry,
    chemistry: Chemistry,
    part: &BankPart,
    demand: Option<&Demand>,
    at: &mut At<'_>,
) {
    let peak = demand.map_or(0.0, |d| (d.peak / bank.nominal).get::<ampere>());
    let rate = ChargeRate::per_hour((peak / bank.capacity.get::<ampere_hour>()).clamp(0.0, 100.0));
    let asked = rate.and_then(|rate| disconnect(chemistry, bank.cells, rate, temperatures(site, part).0));
    if part.line == 0 || (part.disconnect.is_none() && was_designed(part)) {
        if let Ok(asked) = asked {
            at.pass(
                "R14",
                &format!(
                    "to be disconnected at {} V and reconnected at {} V ({})",
                    digits(bank.cut_off.get::<volt>()),
                    digits(asked.reconnect.get::<volt>()),
                    asked.citation
                ),
            );
        }
        return;
    }
    let Some(own) = part.disconnect else {
        at.nonconforming(
            ("R14", "bank-without-disconnect"),
            "no disconnect is stated: nothing keeps the loads from emptying it".into(),
            "fit a disconnect for low voltage, and state disconnect and reconnect",
        );
        return;
    };
    let slack = DISCONNECT_SLACK * bank.nominal.get::<volt>();
    match asked {
        Ok(asked) if own.get::<volt>() < asked.disconnect.get::<volt>() - slack => at.tell(
            Severity::Nonconforming,
            ("R14", "disconnect-too-low"),
            format!(
                "disconnected at {} V; chemistry, {} A and {} °C ask for {} V",
                digits(own.get::<volt>()),
                digits(peak),
                digits(temperatures(site, part).0.get::<degree_celsius>()),
                digits(asked.disconnect.get::<volt>())
            ),
            Some(asked.citation),
            "raise it: even while all loads draw, the bank is emptier there than it may be, and more so under few",
        ),
        Ok(asked) => {
            at.pass(
                "R14",
                &format!(
                    "disconnected at {} V, at least {} V less one per cent of nominal",
                    digits(own.get::<volt>()),
                    digits(asked.disconnect.get::<volt>())
                ),
            );
            few_loads(site, bank, chemistry, part, demand, at);
        }
        Err(error) => at.unmade(("R14", "disconnect-not-checked"), &format!("disconnect voltage: {error}")),
    }
    if own < bank.cut_off {
        at.nonconforming(
            ("R14", "disconnect-below-cut-off"),
            format!(
                "disconnected at {} V, and the wiring is laid out for {} V at least",
                digits(own.get::<volt>()),
                digits(bank.cut_off.get::<volt>())
            ),
            "state the lower as cut_off",
        );
    }
    match part.reconnect {
        None => at.unmade(("R14", "reconnect-not-stated"), "reconnect voltage; state reconnect"),
        Some(back) => {
            let apart = own.get::<volt>() + HYSTERESIS * bank.nominal.get::<volt>();
            // Without loads it recovers to its voltage at rest, and that alone must not take them back.
            let rest = asked.map_or(f64::NEG_INFINITY, |asked| asked.at_rest.get::<volt>());
            let volts = back.get::<volt>();
            if volts < apart.max(rest) - HAIR_V {
                at.tell(
                    Severity::Nonconforming,
                    ("R14", "reconnect-too-near"),
                    format!(
                        "reconnected at {} V, at least {} V: disconnected at {} V it recovers by itself, and switches to \
                         and fro",
                        digits(volts),
                        digits(apart.max(rest)),
                        digits(own.get::<volt>())
                    ),
                    Some(DISCONNECT),
                    "raise the reconnect voltage",
                );
            } else {
                at.pass("R14", &format!("reconnected at {} V", digits(volts)));
            }
        }
    }
}

/// The disconnect under the mean current of a day: few loads pull the voltage less, and the bank is emptier when it falls.
fn few_loads(
    site: &Site,
    bank: &BankEntry,
    chemistry: Chemistry,
    part: &BankPart,
    demand: Option<&Demand>,
    at: &mut At<'_>,
) {
    let Some((own, demand)) = part.disconnect.zip(demand) else { return };
    let mean = demand.greatest_day().charge(bank.nominal).get::<ampere_hour>() / HOURS_A_DAY;
    let rate = ChargeRate::per_hour((mean / bank.capacity.get::<ampere_hour>()).clamp(0.0, 100.0));
    let asked = rate.and_then(|rate| disconnect(chemistry, bank.cells, rate, temperatures(site, part).0));
    let Ok(asked) = asked else { return };
    let slack = DISCONNECT_SLACK * bank.nominal.get::<volt>();
    if own.get::<volt>() < asked.disconnect.get::<volt>() - slack {
        at.tell(
            Severity::Advice,
            ("R14", "disconnect-low-under-few-loads"),
            format!(
                "disconnected at {} V; under the mean of {} A it is emptier than {:.0} % below {} V",
                digits(own.get::<volt>()),
                digits(mean),
                100.0 * asked.floor.get(),
                digits(asked.disconnect.get::<volt>())
            ),
            Some(asked.citation),
            "raise it, or use a disconnect that counts charge",
        );
    }
}
