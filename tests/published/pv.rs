//! Photovoltaic cells, modules and strings against `tests/reference/pv.toml`, and the array cases of `cases-energy.toml`.
//!
//! Every case of `pv.toml` is worked here; a list at the end says so. What the rule sets ask is in `pv_rules`.

use std::collections::BTreeSet;

use ampwright::array::{
    self, Conditions, DiodeParameters, KeyPoints, Module, ModuleCurve, ModuleSheet, SingleDiode,
};
use ampwright::converter::{self, ArrayInput, Controller, ControllerKind};
use ampwright::quantity::{
    ElectricCharge, ElectricCurrent, ElectricPotential, ElectricalResistance, Energy, Irradiance,
    Irradiation, Power, Ratio, RatioPerTemperature, ThermodynamicTemperature, Time,
};
use ampwright::rules::Rules;
use ampwright_tests::Reference;
use uom::si::electric_charge::ampere_hour;
use uom::si::electric_current::ampere;
use uom::si::electric_potential::volt;
use uom::si::electrical_resistance::ohm;
use uom::si::energy::watt_hour;
use uom::si::heat_flux_density::{kilowatt_per_square_meter, watt_per_square_meter};
use uom::si::power::watt;
use uom::si::radiant_exposure::watt_hour_per_square_meter;
use uom::si::ratio::ratio;
use uom::si::temperature_coefficient::per_kelvin;
use uom::si::thermodynamic_temperature::degree_celsius;
use uom::si::time::hour;

use crate::conductors::{Row, Table};

const PV: &str = include_str!("../reference/pv.toml");

/// Exact in the source: what is left is the rounding of f64.
const EXACT: f64 = 1e-9;

/// Boltzmann constant and elementary charge as the publications took them; see the note of `single-diode-parameters`.
const BOLTZMANN_THEN: f64 = 1.3806503e-23;
const CHARGE_THEN: f64 = 1.60217646e-19;

fn v(x: f64) -> ElectricPotential {
    ElectricPotential::new::<volt>(x)
}
fn a(x: f64) -> ElectricCurrent {
    ElectricCurrent::new::<ampere>(x)
}
fn w(x: f64) -> Power {
    Power::new::<watt>(x)
}
fn part(x: f64) -> Ratio {
    Ratio::new::<ratio>(x)
}
fn per_k(x: f64) -> RatioPerTemperature {
    RatioPerTemperature::new::<per_kelvin>(x)
}
fn celsius(x: f64) -> ThermodynamicTemperature {
    ThermodynamicTemperature::new::<degree_celsius>(x)
}

fn cell(row: &Row<'_>, column: &str) -> f64 {
    row.number(column).expect("a figure in every cell")
}

/// The curve of one row of published parameters.
fn curve(row: &Row<'_>) -> SingleDiode {
    let kelvin = cell(row, "temperature_C") + 273.15;
    SingleDiode::new(DiodeParameters {
        photocurrent: a(cell(row, "Iph_A")),
        saturation: a(cell(row, "I0_A")),
        series: ElectricalResistance::new::<ohm>(cell(row, "Rs_ohm")),
        shunt: Some(ElectricalResistance::new::<ohm>(cell(row, "Rsh_ohm"))),
        thermal: v(cell(row, "n_times_cells") * BOLTZMANN_THEN * kelvin / CHARGE_THEN),
    })
    .unwrap()
}

/// The measured points of a device, V and A.
fn measured(device: &str) -> Vec<(f64, f64)> {
    let table = Table::read(PV, &format!("{device}-iv"));
    let points: Vec<_> = table.rows().map(|row| (cell(&row, "V_V"), cell(&row, "I_A"))).collect();
    assert_eq!(points.len(), if device == "pwp201" { 25 } else { 26 });
    points
}

fn root_mean_square(errors: impl ExactSizeIterator<Item = f64>) -> f64 {
    let count = errors.len() as f64;
    (errors.map(|e| e * e).sum::<f64>() / count).sqrt()
}

/// Source: `single-diode-parameters` (recalled) on `rtc-france-iv` and `pwp201-iv` (page seen): four fits, errors both ways.
///
/// With the measured current on the right of the equation, evaluated here from the parameters, as the literature defines its
/// error; and with the equation solved for the current, which is our solver's part. Tolerance: half the last printed digit.
#[test]
fn errors_of_published_fits_on_measured_points() {
    let mut published = 0;
    for row in Table::read(PV, "single-diode-parameters").rows() {
        let curve = curve(&row);
        let p = curve.parameters();
        let points = measured(row.text("device"));
        let (rs, thermal) = (p.series.value, p.thermal.value);
        let explicit = root_mean_square(points.iter().map(|(volts, amps)| {
            let u = volts + amps * rs;
            p.photocurrent.value
                - p.saturation.value * (u / thermal).exp_m1()
                - u / p.shunt.unwrap().value
                - amps
        }));
        row.check("rmse_recomputed_A", explicit, 5e-9);
        if cell(&row, "rmse_published_A") > 0.0 {
            published += 1;
            row.check("rmse_published_A", explicit, 6e-8);
        }
        let solved = root_mean_square(
            points.iter().map(|&(volts, amps)| curve.current(v(volts)).unwrap().get::<ampere>() - amps),
        );
        row.check("rmse_solved_current_A", solved, 5e-10);
    }
    assert_eq!(published, 3);
}

/// Source: `single-diode-key-points`, computed by another program; for the cell also the measured points of its note (page
/// seen). Tolerance: half the last printed digit.
#[test]
fn key_points_of_published_fits() {
    let parameters = Table::read(PV, "single-diode-parameters");
    for row in Table::read(PV, "single-diode-key-points").rows() {
        let best = parameters.rows().find(|fit| fit.text("device") == row.text("device")).unwrap();
        let points = curve(&best).key_points();
        let found = [
            ("Isc_A", points.isc.get::<ampere>()),
            ("Voc_V", points.voc.get::<volt>()),
            ("Vmp_V", points.vmp.get::<volt>()),
            ("Imp_A", points.imp.get::<ampere>()),
            ("Pmp_W", points.power().get::<watt>()),
        ];
        for (column, ours) in found {
            row.check(column, ours, if column == "Vmp_V" { 5e-5 } else { 5e-6 });
        }
        if row.text("device") == "rtc-france" {
            for ((_, ours), printed) in found.iter().zip([0.7603, 0.5728, 0.4507, 0.6894]) {
                assert!((ours - printed).abs() <= 6e-5, "{ours}, measured {printed}");
            }
        }
        // The catalogue takes the constants of today, 6e-7 apart.
        let entry = array::single_diode_points(
            a(cell(&best, "Iph_A")),
            a(cell(&best, "I0_A")),
            ElectricalResistance::new::<ohm>(cell(&best, "Rs_ohm")),
            ElectricalResistance::new::<ohm>(cell(&best, "Rsh_ohm")),
            part(cell(&best, "n_times_cells")),
            celsius(cell(&best, "temperature_C")),
        )
        .unwrap();
        row.check("Voc_V", entry.voc.get::<volt>(), 2e-5);
        row.check("Pmp_W", entry.power.get::<watt>(), 2e-5);
        let thermal =
            array::thermal_voltage(part(cell(&best, "n_times_cells")), celsius(cell(&best, "temperature_C")))
                .unwrap();
        assert!((thermal / curve(&best).parameters().thermal).value - 1.0 < 1e-6);
    }
}

/// Source: `pwp201-iv` (page seen): a curve laid through four points alone, against the 25 measured.
///
/// The four points are those of the best fit, standing for a sheet. No source gives a tolerance; asked is 1 % of the
/// short-circuit current. Five parameters fitted to all points reach 0.2 %; here the ideality is not known but taken as 1.2.
#[test]
fn a_curve_through_four_points_meets_the_measured_ones() {
    let row = Table::read(PV, "single-diode-key-points");
    let row = row.rows().find(|row| row.text("device") == "pwp201").unwrap();
    let points = KeyPoints {
        voc: v(cell(&row, "Voc_V")),
        isc: a(cell(&row, "Isc_A")),
        vmp: v(cell(&row, "Vmp_V")),
        imp: a(cell(&row, "Imp_A")),
    };
    let sheet = ModuleSheet { cells: Some(36), ..ModuleSheet::plain(w(cell(&row, "Pmp_W")), points) };
    let fitted = ModuleCurve::of(&Module::new(sheet).unwrap()).unwrap();
    let points = measured("pwp201");
    let error = root_mean_square(
        points
            .iter()
            .map(|&(volts, amps)| fitted.standard().current(v(volts)).unwrap().get::<ampere>() - amps),
    );
    assert!(error < 0.01 * points[0].1, "{error}");
}

/// Source: `cell-voc-full-sun` (recalled).
#[test]
fn open_circuit_of_a_cell_in_full_and_half_sun() {
    let case = &Reference::read("pv.toml").cases["cell-voc-full-sun"];
    let area = case.input("area_cm2");
    for (key, sun) in [("Voc_full_sun_V", 1.0), ("Voc_half_sun_V", 0.5)] {
        let cell = SingleDiode::new(DiodeParameters {
            photocurrent: a(sun * area * case.input("Isc_A_per_cm2")),
            saturation: a(area * case.input("I0_A_per_cm2")),
            series: ElectricalResistance::new::<ohm>(0.0),
            shunt: None,
            thermal: v(case.input("thermal_voltage_V")),
        })
        .unwrap();
        case.check(key, cell.open_circuit_voltage().get::<volt>(), 0.001);
    }
}

/// Source: `module-from-cells` (recalled): the module's voltage is found from its current, and the other way round.
#[test]
fn a_module_of_36_cells() {
    let case = &Reference::read("pv.toml").cases["module-from-cells"];
    let cell = SingleDiode::new(DiodeParameters {
        photocurrent: a(case.input("Isc_A")),
        saturation: a(case.input("I0_A")),
        series: ElectricalResistance::new::<ohm>(case.input("Rs_ohm")),
        shunt: Some(ElectricalResistance::new::<ohm>(case.input("Rp_ohm"))),
        thermal: v(1.0 / case.input("q_over_kT_per_V")),
    })
    .unwrap();
    let module = cell.array(36, 1).unwrap();
    assert_eq!(case.input("cells"), 36.0);
    let current = module.current(v(case.expected("V_V"))).unwrap();
    case.check("I_A", current.get::<ampere>(), 0.01);
    case.check("P_W", case.expected("V_V") * current.get::<ampere>(), 0.5);
    // The printed current is cut: 0.01 A are 0.05 V on this slope.
    let voltage = module.voltage(current).unwrap();
    case.check("V_V", voltage.get::<volt>(), 0.01);
    let junction = voltage.get::<volt>() / 36.0 + current.get::<ampere>() * case.input("Rs_ohm");
    case.close("junction voltage", junction, case.input("junction_voltage_V"), 1e-3);
}

/// Source: `noct-cell-temperature` (recalled), `noct-conditions` (recalled), `noct-formula-grid` (computed).
#[test]
fn cells_in_the_sun() {
    let reference = Reference::read("pv.toml");
    let case = &reference.cases["noct-cell-temperature"];
    let noct = celsius(case.input("NOCT_C"));
    let light = Irradiance::new::<kilowatt_per_square_meter>(case.input("irradiance_kW_m2"));
    let hot = array::cell_temperature(celsius(case.input("ambient_C")), noct, light).unwrap();
    case.check("cell_C", hot.get::<degree_celsius>(), 0.5);
    // The law is a straight line, so that the coldest morning's function serves for any temperature up to its end, 40 °C, and
    // its mirror image beyond: 63.75 °C lies as far above 25 °C as −13.75 °C below.
    let mirrored = celsius(50.0 - hot.get::<degree_celsius>());
    let voc = v(case.input("Voc_STC_V"));
    let cold = array::open_circuit_voltage_cold(
        voc,
        per_k(case.input("Voc_coefficient_per_C")),
        mirrored,
        part(1.0),
    )
    .unwrap();
    case.check("Voc_V", (voc - (cold - voc)).get::<volt>(), 0.1);
    let power =
        array::module_power(w(case.input("P_STC_W")), per_k(case.input("P_coefficient_per_C")), hot, light);
    case.check("P_W", power.unwrap().get::<watt>(), 0.5);

    for row in Table::read(PV, "noct-conditions").rows() {
        let light = Irradiance::new::<watt_per_square_meter>(cell(&row, "irradiance_W_m2"));
        // In the conditions that define it, the cells have that temperature.
        for noct in [40.0, 45.0, 52.0] {
            let found =
                array::cell_temperature(celsius(cell(&row, "ambient_C")), celsius(noct), light).unwrap();
            assert!((found.get::<degree_celsius>() - noct).abs() < EXACT);
        }
    }
    let mut rows = 0;
    for row in Table::read(PV, "noct-formula-grid").rows() {
        rows += 1;
        let found = array::cell_temperature(
            celsius(cell(&row, "ambient_C")),
            celsius(cell(&row, "NOCT_C")),
            Irradiance::new::<watt_per_square_meter>(cell(&row, "irradiance_W_m2")),
        );
        row.check("cell_C", found.unwrap().get::<degree_celsius>(), EXACT);
    }
    assert_eq!(rows, 7);
}

/// The 150 W module of `noct-cell-temperature` once more, through the curve and through the coefficients.
#[test]
fn the_whole_curve_at_64_degrees() {
    let case = &Reference::read("pv.toml").cases["noct-cell-temperature"];
    let coefficient = |key| Some(per_k(case.input(key)));
    // The book gives Voc and power; the other three points are of a usual module of 72 cells and that power.
    let points = KeyPoints { voc: v(case.input("Voc_STC_V")), isc: a(4.75), vmp: v(34.5), imp: a(4.35) };
    let sheet = ModuleSheet {
        voc_coefficient: coefficient("Voc_coefficient_per_C"),
        power_coefficient: coefficient("P_coefficient_per_C"),
        cells: Some(72),
        ..ModuleSheet::plain(w(case.input("P_STC_W")), points)
    };
    let module = Module::new(sheet).unwrap();
    let hot =
        Conditions { irradiance: Irradiance::new::<kilowatt_per_square_meter>(1.0), cell: celsius(63.75) };
    let curve = ModuleCurve::of(&module).unwrap().at(&hot).unwrap().key_points();
    for points in [curve, module.at(&hot).unwrap()] {
        case.check("Voc_V", points.voc.get::<volt>(), 0.1);
        case.check("P_W", points.power().get::<watt>(), 1.5);
    }
}

/// Source: `string-sizing-minus-5C` (page seen).
///
/// DIFFERENCE: the source heats the modules to the air's 45 °C, and gives Vmp the coefficient of Voc; we do as it does here, and
/// otherwise take the cells' temperature and the coefficient of Vmp.
#[test]
fn most_modules_in_series_at_minus_5() {
    let case = &Reference::read("pv.toml").cases["string-sizing-minus-5C"];
    let (voc, coefficient) = (v(case.input("Voc_STC_V")), per_k(case.input("coefficient_per_C")));
    let coldest = celsius(case.input("minimum_C"));
    let cold = |count: f64| {
        array::open_circuit_voltage_cold(voc, coefficient, coldest, part(count)).unwrap().get::<volt>()
    };
    case.check("Voc_cold_V", cold(1.0), 0.01);
    let hot = |count: f64| {
        array::operating_voltage_hot(
            v(case.input("Vmp_STC_V")),
            coefficient,
            celsius(case.input("maximum_C")),
            part(count),
            part(0.0),
            part(0.0),
        )
        .unwrap()
    };
    case.check("Vmp_hot_V", hot(1.0).get::<volt>(), 0.05);
    let count = array::modules_in_series(
        voc,
        coefficient,
        coldest,
        v(case.input("maximum_input_V")),
        hot(1.0),
        v(case.input("minimum_input_V")),
    )
    .unwrap();
    case.check("modules_max", count.most.get::<ratio>(), EXACT);
    assert!(cold(18.0) <= 1000.0 && cold(19.0) > 1000.0);
    case.check("string_Vmp_hot_V", hot(18.0).get::<volt>(), 1.0);
    assert!(hot(18.0).get::<volt>() > case.input("minimum_input_V"));
}

/// Source: `voc-cold-nec-factor` (computed from the recalled table).
#[test]
fn ten_modules_by_the_factor() {
    let case = &Reference::read("pv.toml").cases["voc-cold-nec-factor"];
    let factor = Rules::named("us").unwrap().pv().cold_factor(celsius(case.input("minimum_C"))).unwrap();
    case.check("factor", factor.value, EXACT);
    case.check("maximum_V", case.input("Voc_STC_V") * case.input("modules") * factor.value, 0.05);
}

/// Source: `pwm-120W` (page seen): by the plain product, by the yield of a controller, and with a curve.
#[test]
fn a_clamped_120_w_module() {
    let case = &Reference::read("pv.toml").cases["pwm-120W"];
    let (vmp, imp) = (v(case.input("Vmp_V")), a(case.input("Imp_A")));
    let bank = v(case.input("battery_V"));
    let plain = converter::pwm_power(vmp, imp, bank, part(1.0)).unwrap();
    case.check("power_W", plain.delivered.get::<watt>(), 0.5);
    let lost = |share: f64| (case.expected("loss_low")..=case.expected("loss_high")).contains(&share);
    assert!(lost(plain.mismatch_part.get::<ratio>()));

    let controller =
        Controller { efficiency: Some(part(1.0)), ..Controller::plain(ControllerKind::Pwm, a(10.0)) };
    // A usual module of that power: the source gives no open and short circuit.
    let points = KeyPoints { voc: v(21.0), isc: a(7.6), vmp, imp };
    let sheet = ModuleSheet { cells: Some(36), ..ModuleSheet::plain(w(case.input("rated_W")), points) };
    let curve = *ModuleCurve::of(&Module::new(sheet).unwrap()).unwrap().standard();
    let input = ArrayInput { rated: vmp * imp, vmp, imp, voc: v(21.0) };
    let flat = converter::controller_yield(&controller, &input, bank, |_| imp).unwrap();
    case.check("power_W", flat.delivered.get::<watt>(), 0.5);
    let curved =
        converter::controller_yield(&controller, &input, bank, |volts| curve.current(volts).unwrap())
            .unwrap();
    // At 12 V the current lies between that of maximum power and that of short circuit: 84 … 91.2 W.
    let power = curved.delivered.get::<watt>();
    assert!(power > 84.0 && power < 91.2, "{power}");
    assert!(lost(1.0 - power / (vmp * imp).get::<watt>()));
}

/// Source: `load-lamp-fan-fridge`, `array-lagos`, `array-48V-computer-fans`, `panel-40W-yield` (page seen), as this room sizes.
#[test]
fn arrays_of_the_energy_cases() {
    let cases = Reference::read("cases-energy.toml").cases;
    let power = |demand: f64, hours: f64, factor: f64| {
        array::array_power(
            Energy::new::<watt_hour>(demand),
            Time::new::<hour>(hours),
            part(factor),
            part(0.0),
            part(1.0),
            part(1.0),
        )
        .unwrap()
        .get::<watt>()
    };
    let case = &cases["load-lamp-fan-fridge"];
    let array = power(
        case.expected("load_Wh_per_day"),
        case.input("panel_generation_factor_h"),
        case.input("loss_factor"),
    );
    // The source prints 413.9 for 417.5: 1 per cent.
    case.check("array_Wp", array, 4.139);
    case.check("modules", (array / case.input("module_Wp")).ceil(), EXACT);

    let case = &cases["array-lagos"];
    let array = power(1000.0 * case.input("load_kWh_per_day"), case.input("peak_sun_h"), 1.0);
    case.check("array_kW", array / 1000.0, EXACT);

    let case = &cases["array-48V-computer-fans"];
    let sun = case.inputs("sun_hours");
    let mean = sun.iter().sum::<f64>() / sun.len() as f64;
    let array = power(case.expected("load_Wh"), mean, case.input("correction"));
    case.check("array_W", array, 0.1);
    case.check("strings", (array / case.input("module_W")).ceil(), EXACT);
    // Once more with a month of 5/6 of its sun: the worst of twelve decides. 3.05 modules instead of 2.54.
    let month = |hours| array::NeedMonth {
        demand: Energy::new::<watt_hour>(case.expected("load_Wh")),
        sun_hours: Time::new::<hour>(hours),
    };
    let mut months = [month(mean); 12];
    let mut need = array::EnergyNeed {
        months,
        array_to_load: part(case.input("correction")),
        losses: part(0.0),
        controller_efficiency: part(1.0),
        charge_efficiency: part(1.0),
        module_power: w(case.input("module_W")),
        in_series: 1,
    };
    case.check("strings", f64::from(array::energy_need(&need).unwrap().strings), EXACT);
    months[6] = month(mean * 5.0 / 6.0);
    need.months = months;
    let steps = array::energy_need(&need).unwrap();
    assert_eq!((steps.worst_month, steps.strings), (6, 4));

    // 40 W for 4 h with 0.85: what a clamped or tracked array of 40 W gives, less 15 %.
    let case = &cases["panel-40W-yield"];
    let controller = converter::mppt_power(
        w(case.input("panel_W")),
        v(case.input("battery_V")),
        a(100.0),
        part(case.input("loss_factor")),
    );
    case.check("yield_Wh", controller.unwrap().delivered.get::<watt>() * case.input("sun_h"), EXACT);
}

/// Source: `nec-690.8-156` (page seen): the two factors of `us`, as the rule set holds them and as the array's room takes them.
#[test]
fn the_two_factors_of_one_and_a_quarter() {
    let case = &Reference::read("cases-energy.toml").cases["nec-690.8-156"];
    let pv = Rules::named("us").unwrap().pv();
    let factors = pv.factors();
    case.close("irradiance_factor", factors.irradiance.value, case.input("irradiance_factor"), EXACT);
    case.close("continuous_factor", factors.continuous.value, case.input("continuous_factor"), EXACT);
    let isc = a(9.5);
    let currents = array::array_current_design(
        isc,
        part(1.0),
        part(0.0),
        part(factors.irradiance.value),
        part(factors.continuous.value),
    )
    .unwrap();
    case.check("combined_factor", (currents.design / isc).get::<ratio>(), 0.005);
    case.check("combined_factor", pv.device_least.unwrap().value, 0.005);
    let fuse = array::string_fuse_least(isc, part(0.0), part(pv.device_least.unwrap().value)).unwrap();
    assert!((fuse - currents.design).get::<ampere>().abs() < EXACT);
}

/// Common practice, no source: a day of so many kilowatt-hours a square metre has as many sun-hours.
#[test]
fn sun_hours_and_the_ratio() {
    let sun = array::sun_hours(Irradiation::new::<watt_hour_per_square_meter>(3100.0)).unwrap();
    assert!((sun.get::<hour>() - 3.1).abs() < EXACT);
    let demand = ElectricCharge::new::<ampere_hour>(40.0);
    let array = array::array_modules(demand, sun, part(1.2), part(0.1), a(5.38), part(2.0)).unwrap();
    // 48/(0.9 × 3.1 × 5.38) by hand.
    assert!((array.strings_exact.get::<ratio>() - 3.197_825).abs() < 1e-6);
    let reached = array::array_to_load_ratio(a(5.38), array.strings, sun, part(0.1), demand).unwrap();
    assert!((reached.get::<ratio>() - 4.0 / 3.197_825 * 1.2).abs() < 1e-6);
}

/// No case and no table of the file is forgotten.
#[test]
fn every_case_of_the_file_is_worked_above_or_in_pv_rules() {
    let reference = Reference::read("pv.toml");
    let cases: BTreeSet<_> = reference.cases.keys().map(String::as_str).collect();
    let tables: BTreeSet<_> = reference.tables.keys().map(String::as_str).collect();
    let here = concat!(include_str!("pv.rs"), include_str!("pv_rules.rs"));
    for id in cases.union(&tables) {
        // The measured points are read by the device's name.
        let name = id.trim_end_matches("-iv");
        assert!(here.contains(&format!("\"{name}\"")) || here.contains(&format!("`{id}`")), "{id}");
    }
    assert_eq!((cases.len(), tables.len()), (6, 7));
}
