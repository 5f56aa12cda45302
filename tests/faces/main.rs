//! What the faces are made from: the entries of the catalogue, the reference page and the test vectors.
//!
//! Generated files are committed; where one is stale, `tests/run regenerate` writes it anew.

mod entries;
mod reference_page;
mod vectors;

use ampwright::cable::{AWG_SERIES, METRIC_SERIES};
use ampwright::catalogue::{Entry, Input};
use ampwright::quantity::{ConductorSize, Designation};

/// All entries of all rooms, in the order of the reference page.
fn catalogue() -> impl Iterator<Item = &'static Entry> {
    ampwright::entries()
}

/// Compares a committed file with what it should be, or writes it where `AMPWRIGHT_REGENERATE` is set.
fn committed(path: &str, content: &str) {
    let full = std::path::Path::new(env!("CARGO_MANIFEST_DIR")).join("..").join(path);
    if std::env::var_os("AMPWRIGHT_REGENERATE").is_some() {
        std::fs::write(&full, content).unwrap_or_else(|e| panic!("{path}: {e}"));
        return;
    }
    let found = std::fs::read_to_string(&full).unwrap_or_default();
    if found == content {
        return;
    }
    let line = found.lines().zip(content.lines()).take_while(|(a, b)| a == b).count();
    panic!(
        "{path} is stale from line {}; if the change is meant, run `tests/run regenerate`\n- {}\n+ {}",
        line + 1,
        found.lines().nth(line).unwrap_or("(end)"),
        content.lines().nth(line).unwrap_or("(end)")
    );
}

/// Numbers without end, the same in every run (xorshift64*).
struct Numbers(u64);

impl Numbers {
    /// For one entry: its own sequence, so that adding an entry moves no other.
    fn of(entry: &Entry) -> Self {
        // FNV-1a of the name; never nought.
        Self(entry.name.bytes().fold(0xcbf2_9ce4_8422_2325, |hash, byte| {
            (hash ^ u64::from(byte)).wrapping_mul(0x0100_0000_01b3)
        }))
    }

    fn bits(&mut self) -> u64 {
        self.0 ^= self.0 >> 12;
        self.0 ^= self.0 << 25;
        self.0 ^= self.0 >> 27;
        self.0.wrapping_mul(0x2545_f491_4f6c_dd1d)
    }

    /// From 0 up to 1.
    fn unit(&mut self) -> f64 {
        // The upper 53 bits fill the fraction of an f64.
        (self.bits() >> 11) as f64 / (1u64 << 53) as f64
    }

    /// A valid value of an input: from the middle of its range, or a size where only those of a table have one.
    fn valid(&mut self, input: &Input) -> f64 {
        use ampwright::error::Allowed;
        /// 18 AWG to 4/0; what follows is kcmil.
        const GAUGES: usize = 15;
        let part = 0.05 + 0.9 * self.unit();
        match (input.name, input.unit) {
            ("size", "mm²") => return self.size_of(&METRIC_SERIES),
            ("gauge", "AWG") => return self.size_of(&AWG_SERIES[..GAUGES]),
            _ => {}
        }
        match input.range {
            Allowed::Finite => 100.0 * (part - 0.5),
            Allowed::Above(least) | Allowed::AtLeast(least) => least + 100.0 * part,
            Allowed::Between(least, most) | Allowed::AboveUpTo(least, most) => least + (most - least) * part,
            Allowed::Code(count) => (part * f64::from(count)).floor(),
            Allowed::Words(words) => panic!("no entry has a range in words: {words}"),
        }
    }

    /// One of a series, as its designation counts.
    fn size_of(&mut self, series: &[ConductorSize]) -> f64 {
        let place = self.bits() % series.len() as u64;
        match series[usize::try_from(place).unwrap()].designation() {
            Designation::Awg(number) => f64::from(number),
            Designation::Kcmil(size) => f64::from(size),
            Designation::SquareMillimeter(size) => size,
        }
    }

    /// Inputs that the entry accepts.
    fn accepted(&mut self, entry: &Entry) -> Vec<f64> {
        for _ in 0..10_000 {
            let inputs: Vec<f64> = entry.inputs.iter().map(|input| self.valid(input)).collect();
            if call(entry, &inputs).is_ok() {
                return inputs;
            }
        }
        panic!("{} accepts nothing", entry.name)
    }
}

/// The entry on plain numbers.
fn call(entry: &Entry, inputs: &[f64]) -> Result<Vec<f64>, ampwright::Error> {
    let mut outputs = vec![f64::NAN; entry.outputs.len()];
    (entry.scalar)(inputs, &mut outputs).map(|()| outputs)
}
