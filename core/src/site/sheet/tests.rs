//! The sheets of small sites, worked by hand.

use alloc::string::{String, ToString};
use alloc::vec::Vec;

use uom::si::electric_current::ampere;
use uom::si::electric_potential::volt;
use uom::si::electrical_resistance::{milliohm, ohm};

use super::path::{joints, loop_of};
use super::purchases::allowance;
use super::*;
use crate::quantity::ElectricPotential;
use crate::site::complete::complete;
use crate::site::model::LoadKind;
use crate::site::offers;
use crate::site::plan::plan;
use crate::site::{Report, inspect, read};

const CABIN: &str = include_str!("cabin.toml");
const BADLY_BUILT: &str = include_str!("../../../examples/sites/badly_built.toml");

/// A bank, a fuse of 20 A, 5 m of 16 mm², a load of 10 A.
const RUN: &str = r#"
format = 1
[site]
name = "run"
rules = "iec"
earthing = "negative"
ambient = ["0 degC", "30 degC"]
[[bank]]
name = "bank"
chemistry = "agm"
nominal = "12 V"
capacity = "100 Ah"
cut_off = "10.5 V"
highest = "15 V"
internal_resistance = "5 mohm"
stud = "M8"
[[load]]
name = "lamp"
current = "10 A"
[[circuit]]
name = "lamp"
from = "bank"
to = "lamp"
one_way = "5 m"
size = "16 mm2"
insulation = "PVC 70 degC"
[[circuit.device]]
name = "F1"
family = "gG"
rating = "20 A"
dc_voltage = "80 V"
breaking = "10 kA"
"#;

/// Bank, array, controller, engine set, inverter, two loads; conductors all designed.
const WHOLE: &str = r#"
format = 1
[site]
name = "whole"
rules = "craft_us"
earthing = "negative"
ambient = ["-20 degC", "35 degC"]
[[bank]]
name = "house"
chemistry = "flooded"
nominal = "24 V"
capacity = "450 Ah"
unit = "6 V"
series = 4
strings = 2
cut_off = "22.2 V"
highest = "31 V"
internal_resistance = "7 mohm"
stud = "M8"
[[board]]
name = "main"
[[array]]
name = "roof"
series = 2
strings = 2
power = "120 W"
voc = "21.6 V"
isc = "7.4 A"
vmp = "17.6 V"
imp = "6.8 A"
voc_coefficient = "-0.3 %/K"
isolator = "100 V"
isolator_current = "32 A"
controller = "regulator"
route = "10 m"
[[controller]]
name = "regulator"
kind = "mppt"
greatest_input = "100 V"
output = "30 A"
sense = "bank"
absorption = "28.8 V"
equalise = "31 V"
stud = "M6"
route = "1 m"
[[generator]]
name = "engine set"
kind = "engine"
power = "2 kW"
output = "40 A"
sense = "bank"
route = "3 m"
[[inverter]]
name = "inverter"
power = "800 W"
efficiency = "88 %"
capacitance = "10000 uF"
route = "1 m"
[[load]]
name = "lights"
power = "60 W"
route = "6 m"
"#;

fn report(text: &str) -> Report {
    let site = read(text).unwrap_or_else(|p| panic!("{p}"));
    inspect(&site).unwrap_or_else(|p| panic!("{p}"))
}

fn loaded(report: &Report) -> Vec<&LoadedTest> {
    let tests = report.commissioning.iter();
    tests.filter_map(|s| if let Step::Loaded(test) = s { Some(test.as_ref()) } else { None }).collect()
}

fn near(value: f64, hand: f64) {
    assert!((value - hand).abs() <= 1e-9 * hand.abs(), "{value}, by hand {hand}");
}

#[test]
fn a_run_under_load_by_hand() {
    let report = report(RUN);
    let tests = loaded(&report);
    let test = tests.first().unwrap();
    assert_eq!((tests.len(), test.driven), (1, Driven::Loads));
    // 10 A by its nameplate, a tenth and the meter's 1 % and 20 mA either way.
    let current = test.current;
    near(current.value.unwrap().get::<ampere>(), 10.0);
    near(current.least.get::<ampere>(), 8.88);
    near(current.greatest.get::<ampere>(), 11.12);
    // 10 m of 1.21 mΩ/m at 20 °C (IEC 60228, class 5), four lugs of 0.1 mΩ, a fuse of 100 mV/20 A.
    near(test.resistance.get::<milliohm>(), 12.1 + 0.4 + 5.0);
    near(test.drop.value.unwrap().get::<volt>(), 0.175);
    near(test.source.unwrap().get::<volt>(), 12.0);
    near(test.end.unwrap().value.unwrap().get::<volt>(), 11.825);
    // As designed at 10 A, with 0.5 % and 0.2 mV of the volts and 1.2 % of the amperes.
    let designed = report.circuits[0].judgement.resistance.get::<ohm>() * 10.0;
    near(test.drop.greatest.get::<volt>(), designed * 1.017 + 2e-4);
    near(test.refused_resistance.get::<ohm>(), (designed * 1.017 + 2e-4) / 10.0);
    assert!(test.drop.least < test.drop.value.unwrap() && test.drop.value.unwrap() < test.drop.greatest);
    let end = test.end.unwrap();
    // At its end: the design's drop, and 0.5 % and 20 mV of the reading.
    near(end.least.get::<volt>(), 12.0 - designed - (0.005 * 11.825 + 0.02));
}

#[test]
fn its_joints_by_hand() {
    let report = report(RUN);
    let test = loaded(&report)[0];
    let [lug, fuse] = test.joints.as_slice() else { panic!("{:?}", test.joints) };
    assert_eq!((lug.joint.as_str(), lug.count, lug.stated), ("lug", 4, false));
    near(lug.voltage.value.unwrap().get::<volt>(), 1e-3);
    // 0.5 % of 1 mV and 0.2 mV.
    near(lug.voltage.greatest.get::<volt>(), 1.205e-3);
    near(lug.refused_above.get::<volt>(), 2e-3);
    near(lug.one_milliohm.unwrap().get::<ampere>(), 0.2 / 0.9945);
    near(lug.current_needed.unwrap().get::<ampere>(), 0.2 / (0.1 - 0.005 * 0.2));
    assert_eq!(fuse.joint, "F1");
    near(fuse.voltage.value.unwrap().get::<volt>(), 0.05);
    near(fuse.refused_above.get::<volt>(), 0.1);
}

#[test]
fn heat_refuses_a_joint_before_twice_its_resistance_does() {
    // At 10 A a lug of 0.2 Ω should make 20 W; 15 W are the most: 0.15 Ω.
    let joint = "[[circuit.joint]]\nkind = \"lug\"\nresistance = \"200 mohm\"\n";
    let report = report(&(RUN.to_string() + joint));
    let test = loaded(&report)[0];
    let lug = test.joints.iter().find(|j| j.joint == "lug").unwrap();
    assert!(lug.stated);
    near(lug.refused_resistance.get::<ohm>(), 0.15);
    // It is beyond its limit as stated: no current tells it from a sound one.
    assert_eq!(lug.current_needed, None);
}

#[test]
fn a_small_current_tells_nothing_of_a_lug_and_the_print_says_so() {
    let text = RUN.replace("current = \"10 A\"", "current = \"2.0 A\"");
    assert!(report(&text).to_string().contains("* more than the test current"));
    // 2.02 A are needed.
    let text = RUN.replace("current = \"10 A\"", "current = \"2.1 A\"");
    assert!(!report(&text).to_string().contains("* more than the test current"));
}

#[test]
fn joints_are_those_of_the_plan() {
    for text in [CABIN, BADLY_BUILT, RUN, WHOLE] {
        let (site, _) = complete(&read(text).unwrap()).unwrap();
        let plan = plan(&site).unwrap();
        for (circuit, planned) in site.circuits.iter().zip(&plan.circuits) {
            let Some(planned) = planned else { continue };
            let sum: f64 = joints(&site, circuit, &planned.fitted)
                .iter()
                .map(|j| f64::from(j.count) * j.each.get::<ohm>())
                .sum();
            near(sum, offers::joints(&site, circuit, &planned.fitted).get::<ohm>());
        }
    }
}

#[test]
fn the_end_of_a_power_load_is_the_upper_root_of_its_quadratic() {
    let report = report(CABIN);
    let (site, _) = complete(&read(CABIN).unwrap()).unwrap();
    let plan = plan(&site).unwrap();
    let ohms = |name: &str| {
        let index = site.circuits.iter().position(|c| c.name == name).unwrap();
        loop_of(&site, &site.circuits[index], plan.circuits[index].as_ref().unwrap()).unwrap().expected
    };
    for (way, load) in [
        (["bank main", "cabin feed", "lights"], "cabin lights"),
        (["bank main", "cabin feed", "pump"], "water pump"),
    ] {
        let load = site.loads.iter().find(|l| l.name == load).unwrap();
        assert_eq!(load.kind, LoadKind::Power);
        let watts = load.power.unwrap().value * f64::from(load.count);
        let path: f64 = way.iter().map(|name| ohms(name)).sum();
        // V = (E + √(E² − 4·P·R))/2 with the bank's terminals at 24 V.
        let hand = 0.5 * (24.0 + crate::quantity::sqrt(24.0 * 24.0 - 4.0 * watts * path));
        let test = loaded(&report).into_iter().find(|t| t.circuit == way[2]).unwrap();
        near(test.end.unwrap().value.unwrap().get::<volt>(), hand);
        near(test.current.value.unwrap().get::<ampere>(), watts / hand);
    }
}

#[test]
fn what_a_source_drives_is_stated_as_a_most() {
    let report = report(WHOLE);
    let tests = loaded(&report);
    let output = tests.iter().find(|t| t.circuit == "regulator output").unwrap();
    assert_eq!((output.driven, output.end), (Driven::Source, None));
    near(output.current.value.unwrap().get::<ampere>(), 30.0);
    assert_eq!(output.current.least.get::<ampere>(), 0.0);
}

#[test]
fn a_return_that_is_not_known_is_said_to_have_no_figure() {
    let report = report(BADLY_BUILT);
    assert!(!loaded(&report).iter().any(|t| t.circuit == "sender"));
    let said = report.commissioning.iter().any(|s| {
        matches!(s, Step::Task { place, what, .. } if place.contains("sender") && what.contains("no figure"))
    });
    assert!(said);
}

fn voltage(report: &Report, at: &str, what: &str) -> Expected<ElectricPotential> {
    let found = report.commissioning.iter().find_map(|step| match step {
        Step::Voltage { place, what: words, expected, .. } if place.contains(at) && words.contains(what) => {
            *expected
        }
        _ => None,
    });
    found.unwrap()
}

#[test]
fn open_circuit_voltages_by_hand() {
    let report = report(WHOLE);
    // 12 cells of 1.98 to 2.2 V, with 0.5 % and 20 mV.
    let bank = voltage(&report, "bank \"house\"", "terminals");
    near(bank.least.get::<volt>(), 23.76 - (0.005 * 23.76 + 0.02));
    near(bank.greatest.get::<volt>(), 26.4 + (0.005 * 26.4 + 0.02));
    let battery = voltage(&report, "bank \"house\"", "8 batteries");
    near(battery.least.get::<volt>(), 5.94 - (0.005 * 5.94 + 0.02));
    // Two of 21.6 V: at -20 °C 43.2·(1 + 0.003·45); at 35 °C + 27 K·1000/800 = 68.75 °C 43.2·(1 - 0.003·43.75).
    let string = voltage(&report, "array \"roof\"", "string");
    let (hot, cold) = (43.2 * (1.0 - 0.003 * 43.75), 43.2 * 1.135);
    near(string.least.get::<volt>(), hot - (0.005 * hot + 0.02));
    near(string.greatest.get::<volt>(), cold + (0.005 * cold + 0.02));
}

#[test]
fn without_a_coefficient_no_range_is_made_up() {
    let text = WHOLE.replace("voc_coefficient = \"-0.3 %/K\"\n", "");
    let report = report(&text);
    let open = report.commissioning.iter().any(|step| {
        matches!(step, Step::Voltage { place, what, expected: None, .. }
            if place.contains("roof") && what.contains("not stated"))
    });
    assert!(open);
}

#[test]
fn stages_come_in_working_order() {
    for text in [CABIN, WHOLE, BADLY_BUILT] {
        let stages: Vec<Stage> = report(text).commissioning.iter().map(Step::stage).collect();
        assert!(stages.is_sorted(), "{stages:?}");
    }
}

#[test]
fn insulation_has_a_limit_where_one_is_held_and_torque_never() {
    let of = |text: &str| {
        let runs = report(text).commissioning;
        runs.iter().find_map(|s| if let Step::Run(run) = s { Some(run.insulation) } else { None }).unwrap()
    };
    assert!(of(CABIN).is_some_and(|(_, _, citation)| citation.seen == crate::citation::Seen::Recalled));
    assert_eq!(of(WHOLE), None);
    assert!(report(CABIN).to_string().contains("torque: as the maker of each terminal states"));
}

fn order(report: &Report, direction: Direction, what: &str) -> usize {
    let steps: Vec<&SwitchingStep> = report.switching.iter().filter(|s| s.direction == direction).collect();
    steps.iter().position(|s| s.what.contains(what)).unwrap_or_else(|| panic!("{what}: {steps:?}"))
}

#[test]
fn bank_before_controller_and_array_last_on_and_first_off() {
    let report = report(WHOLE);
    let on = |what| order(&report, Direction::Connect, what);
    let off = |what| order(&report, Direction::Disconnect, what);
    assert!(on("bank \"house\"") < on("controller \"regulator\""));
    assert!(on("controller \"regulator\"") < on("array \"roof\" last"));
    assert!(on("inverter") < on("array \"roof\" last") && on("engine set") < on("array \"roof\" last"));
    assert_eq!(off("array \"roof\" first"), 0);
    assert!(off("loads off") < off("engine set") && off("engine set") < off("bank \"house\" last"));
    assert!(off("regulator\", its bank side") < off("bank \"house\" last"));
    // No array, no word of one.
    assert!(!self::report(CABIN).switching.iter().any(|s| s.what.contains("array")));
}

#[test]
fn pre_charge_by_hand() {
    // 31 V at 1 A are 31 Ω; five times 31 Ω·10 mF are 1.55 s.
    let report = report(WHOLE);
    let step = order(&report, Direction::Connect, "inverter");
    assert!(
        report.switching[step].what.contains("resistor of 31 Ω for 1.55 s"),
        "{:?}",
        report.switching[step]
    );
}

#[test]
fn an_inverter_at_the_bank_itself_is_filled_before_its_device_closes() {
    let text = RUN.replace(
        "[[load]]\nname = \"lamp\"\ncurrent = \"10 A\"",
        "[[inverter]]\nname = \"lamp\"\npower = \"100 W\"\nefficiency = 0.9",
    );
    let report = report(&text);
    let bank = &report.switching[order(&report, Direction::Connect, "bank \"bank\"")].what;
    assert!(!bank.contains("F1"), "{bank}");
    let inverter = &report.switching[order(&report, Direction::Connect, "inverter")].what;
    assert!(inverter.find("resistor") < inverter.find("F1"), "{inverter}");
}

#[test]
fn a_relay_is_opened_before_its_fuse_is_taken_out() {
    let report = report(CABIN);
    let off = &report.switching.iter().rfind(|s| s.what.contains("bank \"house\" last")).unwrap().what;
    assert!(off.find("bank switch") < off.find("F1"), "{off}");
    let on = &report.switching[order(&report, Direction::Connect, "bank \"house\"")].what;
    assert!(on.find("F1") < on.find("bank switch"), "{on}");
}

#[test]
fn labels_are_short_whatever_the_names() {
    let long = "name = \"a very long name indeed, longer than any label\"";
    for text in [
        CABIN.to_string(),
        BADLY_BUILT.to_string(),
        WHOLE.replace("name = \"whole\"", long),
        RUN.replace("\"lamp\"", "\"the lamp at the far end of the jetty\""),
    ] {
        let report = report(&text);
        assert!(!report.labels.is_empty());
        for label in &report.labels {
            assert!((1..=3).contains(&label.lines.len()), "{label:?}");
            assert!(label.lines.iter().all(|l| (1..=28).contains(&l.chars().count())), "{label:?}");
        }
    }
}

#[test]
fn every_device_end_board_bank_array_and_inverter_has_its_label() {
    let report = report(WHOLE);
    let of =
        |kind: &str| report.labels.iter().filter(|l| l.place.starts_with(kind)).map(|l| l.count).sum::<u32>();
    let devices = report.circuits.iter().map(|c| c.devices.len()).sum::<usize>();
    assert_eq!(of("device") as usize, devices);
    assert_eq!(of("ends of circuit") as usize, 2 * report.circuits.len());
    assert_eq!([of("board"), of("bank"), of("array"), of("inverter")], [1; 4]);
    let lines =
        |place: &str| report.labels.iter().find(|l| l.place == place).map(|l| l.lines.join("|")).unwrap();
    // Bank, controller and engine set.
    assert!(lines("board main").contains("3 SOURCES"));
    assert!(lines("array roof").contains("LIVE IN DAYLIGHT"));
    assert!(lines("ends of circuit regulator output").contains("LIVE FROM BOTH ENDS"));
    // 43.2 V·1.135.
    assert!(lines("array roof").contains("max. 49.03 V DC"), "{}", lines("array roof"));
}

#[test]
fn maintenance_names_only_what_the_site_has() {
    let words = |text: &str| {
        let tasks = report(text).maintenance;
        tasks.iter().map(|t| t.place.clone() + ": " + &t.what + "\n").collect::<String>()
    };
    let flooded = words(CABIN);
    assert!(flooded.contains("electrolyte above the plates") && flooded.contains("density of every cell"));
    assert!(!flooded.contains("equalise") && !flooded.contains("array") && !flooded.contains("engine"));
    let whole = words(WHOLE);
    assert!(
        whole.contains("equalise") && whole.contains("array \"roof\"") && whole.contains("running hours")
    );
    let agm = words(RUN);
    assert!(!agm.contains("electrolyte") && !agm.contains("density"));
    let lfp = words(&RUN.replace("\"agm\"", "\"lfp\""));
    assert!(lfp.contains("pack's own monitor") && !lfp.contains("electrolyte"));
    let floating = words(&RUN.replace("earthing = \"negative\"", "earthing = \"floating\""));
    assert!(floating.contains("volts of each to earth") && !floating.contains("bond"));
    assert!(flooded.contains("the bond to earth tight, and the only one"));
}

#[test]
fn one_spare_in_ten_and_a_tenth_of_the_cable() {
    let spares = [1, 9, 10, 11, 20, 21].map(maintenance::spare);
    assert_eq!(spares, [1, 1, 1, 2, 2, 3]);
    let metres = [0.0, 3.0, 10.0, 10.1, 142.0].map(allowance);
    assert_eq!(metres, [0.0, 1.0, 1.0, 2.0, 15.0]);
}

fn bought<'a>(report: &'a Report, what: &str) -> Vec<&'a Purchase> {
    report.purchases.iter().filter(|p| p.what.contains(what)).collect()
}

#[test]
fn a_designed_run_is_bought_with_all_that_goes_with_it() {
    let text = RUN
        .replace("size = \"16 mm2\"\n", "")
        .replace("family = \"gG\"\nrating = \"20 A\"\n", "family = \"gG\"\n")
        + "[[stock.cable]]\nsize = \"6 mm2\"\nclass = 5\ninsulation = \"PVC 70 degC\"\nlength = \"10.5 m\"\nprice = 2\n"
        + "[[stock.lug]]\nsize = \"6 mm2\"\nstud = \"M8\"\nprice = 0.5\n";
    let report = report(&text);
    // 5 m there and back, and one metre on top; the shelf has 10.5 m, half a metre of it for the allowance.
    let cable = bought(&report, "6 mm2 copper");
    let amounts: Vec<(f64, Option<f64>, Option<f64>)> =
        cable.iter().map(|p| (p.amount, p.price, p.shelf)).collect();
    assert_eq!(amounts, [(10.0, Some(20.0), Some(10.5)), (1.0, Some(2.0), Some(0.5))]);
    assert!(report.to_string().contains("(only 0.5 m on the shelf)"));
    // The bank's stud is stated, the lamp's is not.
    let lugs: Vec<(f64, &str, Option<f64>)> =
        bought(&report, "lug ").iter().map(|p| (p.amount, p.what.as_str(), p.price)).collect();
    assert_eq!(
        lugs,
        [(2.0, "lug M8 for 6 mm2", Some(1.0)), (2.0, "lug for 6 mm2, stud to be measured", None)]
    );
    assert_eq!(bought(&report, "heat-shrink").iter().map(|p| p.amount).sum::<f64>(), 4.0);
    assert_eq!([bought(&report, "holder").len(), bought(&report, "spare fuse-link").len()], [1, 1]);
    // Bank, device and two ends.
    assert_eq!(bought(&report, "label").iter().map(|p| p.amount).sum::<f64>(), 4.0);
    let total = report.purchase_total().unwrap();
    near(total.sum, 23.0);
    assert_eq!(total.without_price, report.purchases.len() - 3);
}

#[test]
fn over_a_chassis_one_conductor_is_bought_and_floating_two_devices() {
    let bare = RUN
        .replace("size = \"16 mm2\"\n", "")
        .replace("family = \"gG\"\nrating = \"20 A\"\n", "family = \"gG\"\n");
    let chassis = bare.replace(
        "one_way = \"5 m\"\n",
        "one_way = \"5 m\"\nreturn = \"chassis\"\nreturn_resistance = \"1 mohm\"\n",
    );
    let over = report(&chassis);
    assert_eq!(over.purchases.iter().find(|p| p.unit == "m").unwrap().amount, 5.0);
    assert_eq!(bought(&over, "lug ").iter().map(|p| p.amount).sum::<f64>(), 2.0);
    let i = bare.find("[[circuit.device]]").unwrap();
    let floating = report(&bare[..i].replace("earthing = \"negative\"", "earthing = \"floating\""));
    assert_eq!(bought(&floating, "holder").iter().map(|p| p.amount).sum::<f64>(), 2.0);
}

#[test]
fn where_nothing_was_designed_nothing_is_bought() {
    let report = report(RUN);
    assert!(report.purchases.is_empty() && report.purchase_total().is_none());
    assert!(!report.to_string().contains("To buy"));
}

#[test]
fn a_designed_board_takes_busbars_for_all_its_sources() {
    let report = report(&WHOLE.replace("[[board]]\nname = \"main\"\n", ""));
    let rating = |circuit: &str| {
        let line = report.circuits.iter().find(|c| c.name == circuit).unwrap();
        line.devices[0].guard.device.rating.get::<ampere>()
    };
    let limit = |circuit: &str| {
        let line = report.circuits.iter().find(|c| c.name == circuit).unwrap();
        line.judgement.current.get::<ampere>()
    };
    // The chargers limit themselves: what they give counts, not the devices that guard them from the bank.
    let sum = rating("house main") + limit("regulator output") + limit("engine set output");
    let bars = bought(&report, "busbar");
    assert_eq!(bars.len(), 1);
    assert_eq!(
        (bars[0].amount, bars[0].what.as_str()),
        (2.0, alloc::format!("busbar for at least {sum} A").as_str())
    );
}
