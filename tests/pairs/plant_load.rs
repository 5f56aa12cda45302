//! Loads in time and inverters (R16), loads past the disconnect (R14).
//!
//! One fifth of standing loads, and the inrush from which a contact suffers: common practice, no source.

use ampwright::site::Severity::{Advice, Nonconforming, NotChecked};

use crate::document::Document;
use crate::pair::Pair;

/// With an inverter of 500 W, 1000 W for a start, and a drill of 300 W behind it.
fn inverter(inverter: &str, load: &str) -> Document {
    Document::plant("iec")
        .with("bank", "capacity = '200 Ah'; greatest_discharge = '200 A'; highest = '15 V'; disconnect = '11.6 V'")
        .with("generator", "output = '30 A'")
        .add(
            "inverter",
            &format!(
                "name = 'inverter'; efficiency = '85 %'; least = '9 V'; greatest = '16 V'; route = '1 m'; {inverter}"
            ),
        )
        .without("load")
        .add("load", &format!("name = 'drill'; ac = true; hours = '0.2 h'; {load}"))
        .add(
            "load",
            "name = 'clock'; current = '10 mA'; standing = true; least = '1 V'; greatest = '100 V'; route = '1 m'",
        )
}

const PLAIN: &str = "power = '500 W'; surge = '1000 W'; surge_time = '5 s'; idle = '1 W'; precharge = true";

pub fn pairs() -> Vec<Pair> {
    let wrong = |what, edge, site, twins| Pair::of(Nonconforming, what, edge, site, twins);
    let advice = |what, edge, site, twins| Pair::of(Advice, what, edge, site, twins);
    let unmade = |what, edge, site, twins| Pair::of(NotChecked, what, edge, site, twins);
    let clock = |keys: &str| {
        Document::plant("iec").with("bank", "disconnect = '12 V'").without("load").add(
            "load",
            &format!(
                "name = 'clock'; current = '10 mA'; least = '1 V'; greatest = '100 V'; route = '1 m'; {keys}"
            ),
        )
    };
    vec![
        unmade(
            ("R16", "standing-loads-not-stated"),
            "standing loads are listed or not checked",
            clock("hours = '24 h'; standing = ?"),
            ("true", "false"),
        ),
        unmade(
            ("R16", "load-time-not-stated"),
            "hours of a load are stated or not checked",
            clock("?"),
            ("hours = '24 h'", ""),
        ),
        // s·24 h over (10 Ah + s·24 h)/0.97 is a fifth at 108 mA.
        advice(
            ("R16", "standing-share-high"),
            "standing loads take less than a fifth",
            Document::plant("iec").without("load").add(
                "load",
                "name = 'load'; current = '10 A'; hours = '1 h'; least = '1 V'; greatest = '100 V'; route = '1 m'",
            )
            .add(
                "load",
                "name = 'clock'; current = '?'; standing = true; least = '1 V'; greatest = '100 V'; route = '1 m'",
            ),
            ("107 mA", "110 mA"),
        ),
        wrong(
            ("R14", "load-past-disconnect"),
            "no load is wired past the disconnect",
            Document::plant("iec").with("load", "past_disconnect = ?"),
            ("false", "true"),
        ),
        unmade(
            ("R16", "inverter-idle-not-stated"),
            "what an inverter draws idle is stated or not checked",
            inverter("power = '500 W'; surge = '1000 W'; surge_time = '5 s'; precharge = true; ?", "power = '300 W'"),
            ("idle = '1 W'", ""),
        ),
        advice(
            ("R16", "inverter-without-load"),
            "every inverter has a load",
            inverter(PLAIN, "power = '300 W'; inverter = 'inverter'")
                .add(
                    "inverter",
                    "name = 'second'; power = '100 W'; surge = '200 W'; surge_time = '5 s'; idle = '1 W'; \
                     efficiency = '85 %'; least = '10 V'; greatest = '16 V'; route = '1 m'; precharge = true",
                )
                .add("load", "name = 'lamp'; ac = true; power = '20 W'; hours = '1 h'; inverter = '?'"),
            ("second", "inverter"),
        ),
        wrong(
            ("R16", "inverter-overloaded"),
            "an inverter gives what its loads draw",
            inverter(
                "power = '?'; surge = '1000 W'; surge_time = '5 s'; idle = '1 W'; precharge = true",
                "power = '300 W'",
            ),
            ("305 W", "295 W"),
        ),
        // 300/0.6 = 500 VA.
        wrong(
            ("R16", "inverter-overloaded"),
            "an inverter gives the apparent power of its loads",
            inverter(PLAIN, "power = '300 W'; power_factor = ?"),
            ("0.61", "0.59"),
        ),
        wrong(
            ("R16", "inverter-start-too-large"),
            "an inverter gives the start of its largest load",
            inverter(PLAIN, "power = '300 W'; start_power = '?'"),
            ("990 W", "1010 W"),
        ),
        // A start lasts 2 s: common practice, no source.
        wrong(
            ("R16", "inverter-start-too-large"),
            "an inverter gives it as long as it lasts",
            inverter(
                "power = '500 W'; surge = '1000 W'; surge_time = '?'; idle = '1 W'; precharge = true",
                "power = '300 W'; start_power = '900 W'",
            ),
            ("2.1 s", "1.9 s"),
        ),
        unmade(
            ("R16", "inverter-start-not-checked"),
            "what an inverter gives for a start is stated or not checked",
            inverter("power = '500 W'; surge_time = '5 s'; idle = '1 W'; precharge = true; ?", "power = '300 W'; start_power = '900 W'"),
            ("surge = '1000 W'", ""),
        ),
        unmade(
            ("R16", "inrush-not-checked"),
            "the inrush of an inverter is stated or not checked",
            inverter("power = '500 W'; surge = '1000 W'; surge_time = '5 s'; idle = '1 W'; ?", "power = '300 W'"),
            ("precharge = true", ""),
        ),
        // 15 V over some 10 mΩ of bank and cable are 1.5 kA, on a device of 63 A or so.
        advice(
            ("R16", "inverter-inrush"),
            "an empty input is charged through a resistor",
            inverter(
                "power = '500 W'; surge = '1000 W'; surge_time = '5 s'; idle = '1 W'; capacitance = '5000 uF'; precharge = ?",
                "power = '300 W'",
            ),
            ("true", "false"),
        ),
    ]
}
