//! Charging: sources together, set points, compensation, load dump (R11), and the voltage that it reaches (R3).
//!
//! Rates by chemistry as `charge-rates` and `lfp-temperature-limits` in `tests/reference/battery.toml`; set points of lead-acid as
//! `lead-acid-charge-voltages` there; those of lithium and the greatest voltage of a cell recalled.

use ampwright::site::Severity::{Advice, Danger, Nonconforming, NotChecked};

use crate::document::Document;
use crate::pair::Pair;

const LIMIT: (&str, &str) = ("R11", "charge-above-limit");
const LOW: (&str, &str) = ("R11", "set-point-low");
const HIGH: (&str, &str) = ("R11", "set-point-high");

fn charger(keys: &str) -> Document {
    Document::plant("iec").with("generator", keys)
}

fn lithium(keys: &str) -> Document {
    Document::lithium("iec").with("generator", keys)
}

/// An LFP bank that may open under charge, filled by an array.
fn sunny(keys: &str) -> Document {
    Document::array("iec", 2, 1)
        .with(
            "bank",
            "chemistry = 'lfp'; nominal = '12.8 V'; disconnect = '12.6 V'; reconnect = '13.4 V'; air = none; \
             opens_under_charge = true",
        )
        .with("controller", "absorption = '14.2 V'; float = '13.5 V'")
        .with("controller", keys)
}

/// Two banks with a board and a charger each.
fn two_banks(charged: &str, board: &str) -> Document {
    Document::plant("iec")
        .with("bank", "board = 'one'")
        .with("generator", "bank = 'bank'; board = 'one'")
        .with("load", "board = 'one'")
        .add("board", "name = 'one'")
        .add("board", "name = 'other'")
        .add(
            "bank",
            &format!(
                "name = 'reserve'; chemistry = 'agm'; nominal = '12 V'; capacity = '100 Ah'; cut_off = '10.5 V'; \
                 highest = '15 V'; internal_resistance = '5 mohm'; greatest_discharge = '50 A'; disconnect = '12 V'; \
                 reconnect = '12.9 V'; space = 'room'; air = '5 m3/h'; temperature = ['25 degC', '30 degC']; \
                 board = '{board}'"
            ),
        )
        .add(
            "generator",
            &format!(
                "name = 'second'; kind = 'shore'; output = '10 A'; absorption = '14.4 V'; float = '13.6 V'; \
                 compensation = '0 mV/K'; sense = 'bank'; route = '1 m'; board = '{board}'; bank = '{charged}'"
            ),
        )
        .add(
            "load",
            &format!(
                "name = 'alarm'; current = '10 mA'; standing = true; least = '1 V'; greatest = '100 V'; route = '1 m'; \
                 board = '{board}'"
            ),
        )
}

fn rates() -> Vec<Pair> {
    let wrong = |what, edge, site, twins| Pair::of(Nonconforming, what, edge, site, twins);
    vec![
        wrong(
            ("R11", "bank-without-charge"),
            "every bank is charged by something",
            two_banks("reserve", "other").with_last("generator", "bank = none; board = none; ?"),
            ("board = 'other'\nbank = 'reserve'", "board = 'one'\nbank = 'bank'"),
        ),
        Pair::of(
            NotChecked,
            ("R11", "charging-not-checked"),
            "a bank that is charged through another is not checked",
            two_banks("?", "one"),
            ("reserve", "bank"),
        ),
        Pair::of(
            NotChecked,
            ("R11", "charger-limit-not-stated"),
            "what a charger gives is stated or not checked",
            charger("output = none; ?"),
            ("output = '15 A'", ""),
        ),
        // 0.25 /h of 100 Ah.
        wrong(
            LIMIT,
            "all sources keep to the usual rate of AGM",
            charger("output = '?'"),
            ("24.5 A", "25.5 A"),
        ),
        wrong(
            LIMIT,
            "all sources keep to the maker's limit",
            charger("output = '?'").with("bank", "greatest_charge = '20 A'"),
            ("19.5 A", "20.5 A"),
        ),
        // 0.13 /h of 100 Ah.
        wrong(
            LIMIT,
            "all sources keep to the usual rate of flooded cells",
            charger("output = '?'").with("bank", "chemistry = 'flooded'"),
            ("12.8 A", "13.2 A"),
        ),
        // Nickel-cadmium: usual rate and ceiling are 0.2 /h, so that no twin stands between them.
        Pair::of(
            Danger,
            ("R11", "charge-above-ceiling"),
            "no source exceeds the ceiling of the chemistry",
            charger("output = '?'; absorption = '15 V'; float = '14.2 V'")
                .with("bank", "chemistry = 'nicd'; highest = '16 V'"),
            ("19.5 A", "20.5 A"),
        ),
        // 0.1 /h of 100 Ah.
        Pair::of(
            Advice,
            ("R11", "charge-rate-low"),
            "a tenth of the capacity an hour mixes and fills lead-acid",
            charger("output = '?'"),
            ("10.2 A", "9.8 A"),
        ),
        // 0.5 /h of 100 Ah: a limit over a data link is no limit.
        Pair {
            also: &["charge-above-limit"],
            ..wrong(
                ("R11", "limit-by-data-link"),
                "no limit rests on a data link",
                lithium("output = '?'").with("bank", "data_link = true; greatest_discharge = '100 A'"),
                ("49 A", "51 A"),
            )
        },
        wrong(
            ("R11", "charge-blocked-by-heat"),
            "lithium is not charged above 45 °C",
            lithium("compensation = '0 mV/K'").with("bank", "temperature = ['25 degC', '?']"),
            ("44 degC", "46 degC"),
        ),
        // 0.2 /h above 5 °C and 0.1 /h from there down: 20 A and 10 A, of 15 A.
        wrong(
            ("R11", "charge-above-limit-in-cold"),
            "lithium takes less in the cold",
            lithium("compensation = '0 mV/K'").with("bank", "temperature = ['?', '30 degC']"),
            ("6 degC", "5 degC"),
        ),
        Pair::of(
            NotChecked,
            ("R11", "charge-limit-in-cold-not-stated"),
            "down to which cold a maker's limit holds is stated or not checked",
            lithium("compensation = '0 mV/K'")
                .with("bank", "temperature = ['3 degC', '30 degC']; greatest_charge = '50 A'; ?"),
            ("charge_from = '0 degC'", ""),
        ),
        Pair::of(
            Danger,
            ("R11", "load-dump"),
            "an alternator bears that its pack opens",
            lithium("kind = 'alternator'; load_dump = ?").with("bank", "opens_under_charge = true"),
            ("true", "false"),
        ),
        Pair::of(
            Danger,
            ("R11", "load-dump"),
            "an alternator of which nothing is stated does not bear that its pack opens",
            lithium("kind = 'alternator'; ?").with("bank", "opens_under_charge = true"),
            ("load_dump = true", ""),
        ),
        Pair::of(
            NotChecked,
            ("R11", "load-dump-not-stated"),
            "what a charger does when its pack opens is stated or not checked",
            lithium("?").with("bank", "opens_under_charge = true"),
            ("load_dump = true", ""),
        ),
        Pair::of(
            NotChecked,
            ("R11", "load-dump-not-stated"),
            "an alternator on lithium asks what happens when the pack opens",
            lithium("kind = 'alternator'; ?"),
            ("load_dump = true", ""),
        ),
        Pair::of(
            Danger,
            ("R11", "load-dump"),
            "a controller bears that its pack opens",
            sunny("load_dump = ?"),
            ("true", "false"),
        ),
        Pair::of(
            NotChecked,
            ("R11", "load-dump-not-stated"),
            "what a controller does when its pack opens is stated or not checked",
            sunny("?"),
            ("load_dump = true", ""),
        ),
        // The loads draw 10.01 A; the 15 A of the charger flow the other way.
        wrong(
            ("R11", "discharge-above-limit"),
            "what charges a bank is not drawn from it",
            Document::plant("iec").with("bank", "greatest_discharge = '?'"),
            ("10.2 A", "9.8 A"),
        ),
        // 126.7 Wh a day, of the energy AGM returns 0.8: 158.4 Wh.
        wrong(
            ("R10", "energy-short"),
            "as much comes in as is taken out",
            charger("kind = 'hydro'; load_dump = true; output = '15 A'; daily = '?'"),
            ("160 Wh", "157 Wh"),
        ),
        // The same by charge, of which AGM returns 0.9: 140.8 Wh, at 15 A and 12 V 0.782 h.
        wrong(
            ("R10", "energy-short"),
            "the hours of a source bring what is taken out",
            charger("hours = '?'"),
            ("0.79 h", "0.775 h"),
        ),
        Pair::of(
            NotChecked,
            ("R10", "energy-not-checked"),
            "what a source brings in a day is stated or not checked",
            charger("?"),
            ("hours = '1 h'", ""),
        ),
        Pair::of(
            NotChecked,
            ("R10", "energy-not-checked"),
            "a month is not short while what another source brings is not stated",
            charger("hours = '0.1 h'").with("bank", "capacity = '200 Ah'").add(
                "generator",
                "name = 'second'; kind = 'shore'; output = '10 A'; absorption = '14.4 V'; float = '13.6 V'; \
                 compensation = '0 mV/K'; sense = 'bank'; route = '1 m'; ?",
            ),
            ("hours = '2 h'", ""),
        ),
    ]
}

fn set_points() -> Vec<Pair> {
    let wrong = |what, edge, site, twins| Pair::of(Nonconforming, what, edge, site, twins);
    let cool = |keys: &str| charger(keys).with("bank", "temperature = ['10 degC', '30 degC']");
    vec![
        Pair::of(
            NotChecked,
            ("R11", "set-points-not-stated"),
            "set points are stated or not checked",
            charger("absorption = none; ?"),
            ("absorption = '14.4 V'", ""),
        ),
        // 6 × 2.38 = 14.28 V.
        wrong(
            LOW,
            "absorption of AGM is not too low",
            charger("absorption = '?'"),
            ("14.3 V", "14.25 V"),
        ),
        // 6 × 2.45 = 14.7 V, to the hair.
        wrong(
            HIGH,
            "absorption of AGM is not too high",
            charger("absorption = '?'"),
            ("14.7 V", "14.75 V"),
        ),
        // 6 × 2.25 = 13.5 V.
        wrong(
            LOW,
            "float of AGM is not too low",
            charger("float = '?'"),
            ("13.5 V", "13.45 V"),
        ),
        // 6 × 2.4 = 14.4 V and no more.
        wrong(
            HIGH,
            "gel is equalised at its absorption voltage",
            charger("equalise = '?'").with("bank", "chemistry = 'gel'"),
            ("14.4 V", "14.45 V"),
        ),
        // 4 × 3.6 = 14.4 V is usual; at 4 × 3.65 = 14.6 V the cells still bear it.
        wrong(
            HIGH,
            "absorption of LFP is not above what is usual",
            lithium("absorption = '?'"),
            ("14.4 V", "14.6 V"),
        ),
        // 4 × 4.2 = 16.8 V is both usual and the most.
        Pair::of(
            Danger,
            HIGH,
            "no cell of lithium is overcharged",
            lithium("absorption = '?'; float = none").with(
                "bank",
                "chemistry = 'nmc'; nominal = '14.8 V'; highest = '17 V'; cut_off = '12 V'; disconnect = '13.8 V'; \
                 reconnect = '15 V'",
            ),
            ("16.8 V", "16.9 V"),
        ),
        // 14.6 V by the cells.
        Pair::of(
            Danger,
            HIGH,
            "no cell of LFP is overcharged",
            lithium("absorption = '?'"),
            ("14.4 V", "14.65 V"),
        ),
        wrong(
            ("R11", "set-point-not-for-chemistry"),
            "lithium is not equalised",
            lithium("?"),
            ("", "equalise = '14.5 V'"),
        ),
        Pair::of(
            Danger,
            ("R11", "set-point-not-for-chemistry"),
            "least of all above what its cells bear",
            lithium("?"),
            ("", "equalise = '14.65 V'"),
        ),
        Pair::of(
            NotChecked,
            ("R11", "compensation-not-stated"),
            "compensation is stated or not checked",
            cool("compensation = none; ?"),
            ("compensation = '-5 mV/K'", ""),
        ),
        wrong(
            ("R11", "compensation-missing"),
            "lead-acid is compensated by 3 mV/K at least",
            cool("compensation = '?'"),
            ("-3 mV/K", "-2.9 mV/K"),
        ),
        // 10 K from 25 °C, however steady.
        wrong(
            ("R11", "compensation-missing"),
            "cells within 10 K of 25 °C need no compensation",
            charger("compensation = '0 mV/K'").with("bank", "temperature = ['?', '16 degC']"),
            ("15 degC", "14 degC"),
        ),
        wrong(
            ("R11", "compensation-not-for-chemistry"),
            "lithium is not compensated",
            lithium("compensation = '?'"),
            ("0 mV/K", "-0.5 mV/K"),
        ),
        // 14.4 + 6 × 0.005 × 15 = 14.85 V, less the last digit of a setting.
        wrong(
            ("R3", "highest-below-charging"),
            "the stated highest voltage is what charging reaches in the cold",
            cool("compensation = '-5 mV/K'").with("bank", "highest = '?'"),
            ("14.8 V", "14.7 V"),
        ),
    ]
}

pub fn pairs() -> Vec<Pair> {
    [rates(), set_points()].into_iter().flatten().collect()
}
