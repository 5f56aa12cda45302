//! The room `site`: the Heron Point demo from text to printed report. The design asks for less than 1 ms.
#![allow(missing_docs)] // criterion's macro makes public functions without docs

use std::hint::black_box;

use ampwright::site::{Problems, inspect, read};
use criterion::{Criterion, criterion_group, criterion_main};

const HERON_POINT: &str = include_str!("../core/examples/sites/heron_point.toml");

fn text_to_report(text: &str) -> Result<String, Problems> {
    Ok(inspect(&read(text)?)?.to_string())
}

fn heron_point(criterion: &mut Criterion) {
    let mut group = criterion.benchmark_group("site/heron_point");
    let (report, site) = match read(HERON_POINT).and_then(|site| Ok((inspect(&site)?, site))) {
        Ok(both) => both,
        Err(problems) => panic!("the demo is refused, so there is nothing to time:\n{problems}"),
    };
    group.bench_function("text to report", |b| b.iter(|| text_to_report(black_box(HERON_POINT))));
    group.bench_function("read", |b| b.iter(|| read(black_box(HERON_POINT))));
    group.bench_function("inspect", |b| b.iter(|| inspect(black_box(&site))));
    group.bench_function("print", |b| b.iter(|| black_box(&report).to_string()));
    group.finish();
}

criterion_group!(benches, heron_point);
criterion_main!(benches);
