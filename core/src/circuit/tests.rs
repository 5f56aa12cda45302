//! Laws that every sized run obeys, whatever the rule set.

extern crate std;

use std::vec::Vec;

use proptest::prelude::*;
use uom::si::electric_current::ampere;
use uom::si::electric_potential::volt;
use uom::si::length::meter;
use uom::si::power::watt;
use uom::si::ratio::ratio;
use uom::si::thermodynamic_temperature::degree_celsius;

use super::*;
use crate::cable::{Conductor, Insulation};
use crate::device::{Device, Family, Polarity, Supply};
use crate::error::Error;
use crate::protection::{Guard, Offer};
use crate::quantity::{ElectricCurrent, ElectricPotential, Length, Power, Ratio, ThermodynamicTemperature};
use crate::rules::{Check, Installation, Rules};

const SETS: [&str; 4] = ["us", "iec", "craft_iso", "craft_us"];

fn cables(rules: Rules, insulation: Insulation) -> Vec<Conductor> {
    rules.sizes().iter().map(|&size| Conductor::flexible_copper(size, insulation)).collect()
}

fn run(set: &str, volts: f64, metres: f64, amps: f64) -> Run {
    Run::plain(
        Rules::named(set).unwrap(),
        ElectricPotential::new::<volt>(volts),
        Length::new::<meter>(metres),
        Demand::Current {
            continuous: ElectricCurrent::new::<ampere>(amps),
            other: ElectricCurrent::new::<ampere>(0.0),
        },
    )
}

fn offer(family: Family) -> Offer<'static> {
    Offer::standard(family, ElectricPotential::new::<volt>(125.0), ElectricCurrent::new::<ampere>(20_000.0))
}

/// Area of the size a run gets; infinite where nothing on offer passes, so that "never thinner" still means something.
fn area(run: &Run, offers: &[Offer<'_>]) -> f64 {
    let insulation = run.rules.usual_insulation();
    match size_run(run, &cables(run.rules, insulation), offers) {
        Ok(sized) => sized.conductor.size.area_mm2(),
        Err(Error::NoneFits { .. } | Error::NoSolution { .. }) => f64::INFINITY,
        Err(other) => panic!("{other}"),
    }
}

fn family(set: &str) -> Family {
    if set == "iec" { Family::Gg } else { Family::ClassT }
}

proptest! {
    #[test]
    fn longer_is_never_thinner(set in 0..4_usize, metres in 0.5..40.0_f64, more in 1.0..4.0_f64, amps in 0.5..150.0_f64) {
        let set = SETS[set];
        let offers = [offer(family(set))];
        let near = area(&run(set, 24.0, metres, amps), &offers);
        let far = area(&run(set, 24.0, metres * more, amps), &offers);
        prop_assert!(far >= near, "{set}: {metres} m {near} mm², {} m {far} mm²", metres * more);
    }

    #[test]
    fn more_current_is_never_thinner(set in 0..4_usize, metres in 0.5..40.0_f64, more in 1.0..4.0_f64, amps in 0.5..100.0_f64) {
        let set = SETS[set];
        // Under `us` a terminal without mark takes the 60 °C column up to 100 A and the 75 °C column above: there more
        // current may well take a thinner conductor. Marked terminals keep one column.
        let offers = [Offer { terminal_degC: Some(75.0), ..offer(family(set)) }];
        let run = |set, volts, metres, amps| {
            let mut task = run(set, volts, metres, amps);
            task.terminal = Some(ThermodynamicTemperature::new::<degree_celsius>(75.0));
            task
        };
        prop_assert!(
            area(&run(set, 24.0, metres, amps * more), &offers) >= area(&run(set, 24.0, metres, amps), &offers)
        );
    }

    #[test]
    fn hotter_is_never_thinner(set in 0..4_usize, amps in 0.5..150.0_f64, ambient in -20.0..50.0_f64, hotter in 0.0..10.0_f64) {
        let set = SETS[set];
        let offers = [offer(family(set))];
        let mut cool = run(set, 24.0, 3.0, amps);
        cool.ambient = ThermodynamicTemperature::new::<degree_celsius>(ambient);
        let mut hot = cool;
        hot.ambient = ThermodynamicTemperature::new::<degree_celsius>(ambient + hotter);
        prop_assert!(area(&hot, &offers) >= area(&cool, &offers));
    }

    #[test]
    fn a_larger_device_never_sits_on_a_smaller_conductor(set in 0..4_usize, small in 0..12_usize, step in 0..4_usize) {
        const RATINGS: [f64; 16] =
            [10.0, 16.0, 20.0, 25.0, 32.0, 40.0, 50.0, 63.0, 80.0, 100.0, 125.0, 160.0, 200.0, 250.0, 315.0, 400.0];
        let set = SETS[set];
        let of = |rating: &'static [f64]| Offer { ratings_A: rating, ..offer(Family::Gg) };
        let task = run(set, 48.0, 2.0, 1.0);
        let smaller = area(&task, &[of(&RATINGS[small..=small])]);
        let larger = area(&task, &[of(&RATINGS[small + step..=small + step])]);
        prop_assert!(larger >= smaller);
    }

    #[test]
    fn odd_numbers_give_a_result_or_a_sentence(bits in prop::array::uniform8(any::<u64>()), set in 0..4_usize) {
        let f = bits.map(f64::from_bits);
        let mut odd = run(SETS[set], f[0], f[1], f[2]);
        odd.beginning = ElectricPotential::new::<volt>(f[3]);
        odd.ambient = ThermodynamicTemperature::new::<degree_celsius>(f[4]);
        odd.drop = Some(Ratio::new::<ratio>(f[5]));
        odd.greatest_fault = Some(ElectricCurrent::new::<ampere>(f[6]));
        odd.demand = Demand::Power { power: Power::new::<watt>(f[7]), continuous: true };
        let insulation = odd.rules.usual_insulation();
        let _ = size_run(&odd, &cables(odd.rules, insulation), &[offer(Family::Gg)]);
    }

    #[test]
    fn every_smaller_size_has_a_failed_check(set in 0..4_usize, metres in 0.5..30.0_f64, amps in 0.5..120.0_f64) {
        let task = run(SETS[set], 24.0, metres, amps);
        let insulation = task.rules.usual_insulation();
        if let Ok(sized) = size_run(&task, &cables(task.rules, insulation), &[]) {
            for rejected in &sized.rejected {
                let thin = Conductor::flexible_copper(rejected.size, insulation);
                prop_assert!(judge(&task, &thin, &thin, None).unwrap().first_failure().is_some());
            }
            prop_assert!(sized.judgement.first_failure().is_none());
        }
    }
}

fn gg(rating: f64) -> Guard {
    Guard {
        device: Device {
            family: Family::Gg,
            rating: ElectricCurrent::new::<ampere>(rating),
            supply: Supply::NotStated,
            breaking: None,
            polarity: Polarity::None,
            full_rated: false,
        },
        let_through_A2s: None,
        terminal_range: None,
        terminal_degC: None,
    }
}

#[test]
fn a_check_without_data_is_not_made() {
    let task = run("iec", 24.0, 2.0, 10.0);
    let cable = Conductor::flexible_copper("6 mm2".parse().unwrap(), task.rules.usual_insulation());
    let judged = judge(&task, &cable, &cable, Some(&gg(16.0))).unwrap();
    for check in [Check::Breaking, Check::LeastFault, Check::DeviceSupply, Check::Withstand] {
        let checked = judged.checks.iter().find(|c| c.check == check).unwrap();
        assert_eq!(checked.outcome, Outcome::NotChecked, "{check:?}");
        assert_eq!(checked.verdict(), "not checked");
    }
}

#[test]
fn the_order_of_checks_is_the_sets_own() {
    for set in SETS {
        let task = run(set, 24.0, 2.0, 10.0);
        let cable =
            Conductor::flexible_copper(*task.rules.sizes().last().unwrap(), task.rules.usual_insulation());
        let judged = judge(&task, &cable, &cable, Some(&gg(16.0))).unwrap();
        let order = task.rules.set().order;
        let places: Vec<usize> =
            judged.checks.iter().map(|c| order.iter().position(|o| *o == c.check).unwrap()).collect();
        assert!(places.windows(2).all(|w| w[0] <= w[1]), "{set}: {places:?}");
    }
}

#[test]
fn an_unmarked_terminal_holds_xlpe_to_seventy_degrees_under_iec() {
    let mut task = run("iec", 24.0, 1.0, 10.0);
    task.installation = Installation::Clipped;
    let xlpe = Conductor::flexible_copper("16 mm2".parse().unwrap(), "XLPE 90 degC".parse().unwrap());
    // IEC 60364-5-52:2009, Table B.52.2, method C, 16 mm²: 85 A; Table B.52.3: 107 A (pages seen).
    let amps =
        |task: &Run| judge(task, &xlpe, &xlpe, None).unwrap().ampacity.unwrap().corrected.get::<ampere>();
    assert_eq!(amps(&task), 85.0);
    task.terminal = Some(ThermodynamicTemperature::new::<degree_celsius>(90.0));
    assert_eq!(amps(&task), 107.0);
}

#[test]
fn under_us_the_terminal_governs_before_derating() {
    // 8 AWG of 90 °C carries 55 A, a 60 °C terminal only 40 A (NFPA 70-2023, Table 310.16, page seen).
    let mut task = run("us", 24.0, 1.0, 44.0);
    let cable = Conductor::flexible_copper("8 AWG".parse().unwrap(), "PVC 90 degC".parse().unwrap());
    task.demand = Demand::Current {
        continuous: ElectricCurrent::new::<ampere>(0.0),
        other: ElectricCurrent::new::<ampere>(44.0),
    };
    let judged = judge(&task, &cable, &cable, None).unwrap();
    assert_eq!(judged.first_failure().map(|c| (c.check, c.limit)), Some((Check::TerminalColumn, 40.0)));
    task.terminal = Some(ThermodynamicTemperature::new::<degree_celsius>(75.0));
    assert!(judge(&task, &cable, &cable, None).unwrap().first_failure().is_none());
}
