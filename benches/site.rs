//! The room `site`: the demo sites and large ones from text to printed report.
//!
//! The design asks for less than 1 ms of any demo without the year, and less than 200 ms of ten thousand circuits, with
//! growth no worse than n log n: the large sites come in four sizes, and their throughput is circuits a second.
#![allow(missing_docs)] // criterion's macro makes public functions without docs

use std::fmt::Write as _;
use std::hint::black_box;

use ampwright::site::{Problems, inspect, read};
use criterion::{BenchmarkId, Criterion, SamplingMode, Throughput, criterion_group, criterion_main};

const DEMOS: [(&str, &str); 4] = [
    ("badly_built", include_str!("../core/examples/sites/badly_built.toml")),
    ("heron_point", include_str!("../core/examples/sites/heron_point.toml")),
    ("launch", include_str!("../core/examples/sites/launch.toml")),
    ("telemetry_mast", include_str!("../core/examples/sites/telemetry_mast.toml")),
];

const SIZES: [usize; 4] = [1_000, 2_000, 5_000, 10_000];
/// Circuits on one board.
const ON_BOARD: usize = 99;

fn text_to_report(text: &str) -> Result<String, Problems> {
    Ok(inspect(&read(text)?)?.to_string())
}

/// How the circuits of a large site hang together.
#[derive(Clone, Copy)]
enum Shape {
    /// Boards on the bank, every size to be found.
    Boards,
    /// The same with every size stated.
    Stated,
    /// One cable from the bank to a board that feeds all boards.
    MainBoard,
    /// All on one board.
    OneBoard,
}

impl Shape {
    const ALL: [(Self, &str); 4] = [
        (Self::Boards, "boards on the bank"),
        (Self::Stated, "sizes stated"),
        (Self::MainBoard, "boards on a main board"),
        (Self::OneBoard, "one board"),
    ];

    /// A site of so many circuits.
    fn text(self, circuits: usize) -> String {
        let mut text = String::from(
            "format = 1\n[site]\nname = \"large\"\nrules = \"iec\"\nearthing = \"negative\"\n\
             ambient = [\"-10 degC\", \"30 degC\"]\n[[bank]]\nname = \"house\"\nchemistry = \"flooded\"\n\
             nominal = \"48 V\"\ncapacity = \"40000 Ah\"\ncut_off = \"44 V\"\nhighest = \"62 V\"\n\
             internal_resistance = \"0.5 mohm\"\n",
        );
        // What one main cable can carry in all, or what is usual for each load.
        let watts = match self {
            Self::Boards | Self::Stated => 40.0,
            Self::MainBoard | Self::OneBoard => 9000.0 / circuits as f64,
        };
        let mut made = 0;
        let mut add = |name: &str, from: &str, metres: usize, size: &str, what: &str| {
            if made < circuits {
                let size = if matches!(self, Self::Stated) { size } else { "" };
                // Writing to a String cannot fail.
                let _ = write!(
                    text,
                    "{what}name = \"{name}\"\n[[circuit]]\nname = \"to {name}\"\nfrom = \"{from}\"\nto = \"{name}\"\n\
                     one_way = \"{metres} m\"\n{size}"
                );
                made += 1;
            }
        };
        let board = "[[board]]\nbusbar = \"2000 A\"\n";
        let load = format!("[[load]]\npower = \"{watts:.3} W\"\nleast = \"40 V\"\ngreatest = \"65 V\"\n");
        let top = match self {
            Self::Boards | Self::Stated => "house",
            Self::MainBoard | Self::OneBoard => {
                add("main", "house", 2, "", board);
                "main"
            }
        };
        for number in 0..circuits {
            let metres = 3 + number % 17;
            if matches!(self, Self::OneBoard) {
                add(&format!("load {number}"), top, metres, "", &load);
                continue;
            }
            let group = number / ON_BOARD;
            if number % ON_BOARD == 0 {
                add(&format!("board {group}"), top, 5, "size = \"70 mm2\"\n", board);
            }
            add(&format!("load {number}"), &format!("board {group}"), metres, "size = \"2.5 mm2\"\n", &load);
        }
        text
    }
}

fn demos(criterion: &mut Criterion) {
    let mut group = criterion.benchmark_group("site/demo");
    for (name, text) in DEMOS {
        if let Err(problems) = text_to_report(text) {
            panic!("the demo {name} is refused, so there is nothing to time:\n{problems}");
        }
        group.bench_function(BenchmarkId::new("text to report", name), |b| {
            b.iter(|| text_to_report(black_box(text)));
        });
    }
    group.finish();
}

fn large(criterion: &mut Criterion) {
    for (shape, name) in Shape::ALL {
        let mut group = criterion.benchmark_group(format!("site/{name}"));
        group.sample_size(10).sampling_mode(SamplingMode::Flat);
        for circuits in SIZES {
            let text = shape.text(circuits);
            let (site, report) = match read(&text).and_then(|site| Ok((inspect(&site)?, site))) {
                Ok((report, site)) => (site, report),
                Err(problems) => panic!("{circuits} circuits, {name}: refused:\n{problems}"),
            };
            assert_eq!(report.circuits.len(), circuits, "{name}");
            group.throughput(Throughput::Elements(circuits as u64));
            group.bench_function(BenchmarkId::new("read", circuits), |b| b.iter(|| read(black_box(&text))));
            group.bench_function(BenchmarkId::new("inspect", circuits), |b| {
                b.iter(|| inspect(black_box(&site)));
            });
            group.bench_function(BenchmarkId::new("print", circuits), |b| {
                b.iter(|| black_box(&report).to_string());
            });
        }
        group.finish();
    }
}

criterion_group!(benches, demos, large);
criterion_main!(benches);
