//! The room `law`: time of one checked call beside the same arithmetic on plain `f64`.
#![allow(missing_docs)] // criterion's macro makes public functions without docs

use std::hint::black_box;

use ampwright::law;
use ampwright::quantity::{
    Area, ElectricCurrent, ElectricPotential, ElectricalResistance, ElectricalResistivity, Length,
};
use criterion::{Criterion, criterion_group, criterion_main};
use uom::si::area::square_millimeter;
use uom::si::electric_current::ampere;
use uom::si::electric_potential::volt;
use uom::si::electrical_resistance::ohm;
use uom::si::electrical_resistivity::ohm_meter;
use uom::si::length::meter;

fn ohm_current(criterion: &mut Criterion) {
    let mut group = criterion.benchmark_group("law/ohm_current");
    let typed = (ElectricPotential::new::<volt>(12.0), ElectricalResistance::new::<ohm>(0.5));
    group.bench_function("typed", |b| b.iter(|| law::ohm_current(black_box(typed.0), black_box(typed.1))));
    group.bench_function("raw, same checks", |b| {
        b.iter(|| ampwright_benches::ohm_current_checked(black_box(12.0), black_box(0.5)));
    });
    group.finish();
}

fn voltage_drop(criterion: &mut Criterion) {
    let mut group = criterion.benchmark_group("law/voltage_drop");
    let one_way = Length::new::<meter>(12.0);
    let cross_section = Area::new::<square_millimeter>(16.0);
    let resistivity = ElectricalResistivity::new::<ohm_meter>(1.0 / 58e6);
    let current = ElectricCurrent::new::<ampere>(25.0);
    group.bench_function("typed", |b| {
        b.iter(|| {
            law::voltage_drop(
                black_box(one_way),
                black_box(cross_section),
                black_box(resistivity),
                black_box(current),
            )
        });
    });
    group.bench_function("raw, same checks", |b| {
        b.iter(|| {
            ampwright_benches::voltage_drop_checked(
                black_box(12.0),
                black_box(16e-6),
                black_box(1.0 / 58e6),
                black_box(25.0),
            )
        });
    });
    group.finish();
}

criterion_group!(benches, ohm_current, voltage_drop);
criterion_main!(benches);
