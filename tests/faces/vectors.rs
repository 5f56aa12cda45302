//! `tests/vectors/catalogue.csv`: what every face must answer, bit for bit.

use std::fmt::Write;

use ampwright::catalogue::Entry;
use ampwright::error::Allowed;

use crate::{Numbers, call, catalogue, committed};

#[test]
fn the_test_vectors_are_current() {
    committed("tests/vectors/catalogue.csv", &vectors());
}

fn vectors() -> String {
    let mut text = String::from(
        "# Made by `tests/run regenerate`. Numbers are parted by spaces, in the order and units of the catalogue; bits are\n\
         # those of IEEE 754 binary64, in hexadecimal. A result is the outputs, or an error's slug without bits.\n\
         name,inputs,input_bits,result,result_bits\n",
    );
    for entry in catalogue() {
        for inputs in rows(entry) {
            let (result, bits) = match call(entry, &inputs) {
                Ok(outputs) => (decimals(&outputs), hex(&outputs)),
                Err(error) => (error.slug().to_owned(), String::new()),
            };
            writeln!(text, "{},{},{},{result},{bits}", entry.name, decimals(&inputs), hex(&inputs)).unwrap();
        }
    }
    text
}

/// Eight ordinary rows; then each input alone at the ends of its range, one step before and after, and at the edges of
/// numbers.
fn rows(entry: &Entry) -> Vec<Vec<f64>> {
    let mut numbers = Numbers::of(entry);
    let mut rows: Vec<_> = (0..8).map(|_| numbers.accepted(entry)).collect();
    let base = rows[0].clone();
    for (place, input) in entry.inputs.iter().enumerate() {
        let ends: &[f64] = match input.range {
            Allowed::Above(least) | Allowed::AtLeast(least) => &[least],
            Allowed::Between(least, most) | Allowed::AboveUpTo(least, most) => &[least, most],
            Allowed::Code(count) => &[0.0, f64::from(count) - 1.0],
            Allowed::Finite | Allowed::Words(_) => &[0.0],
        };
        let steps = ends.iter().flat_map(|end| [end.next_down(), *end, end.next_up()]);
        let edges = [-0.0, f64::MIN_POSITIVE, f64::MAX, f64::INFINITY, f64::NEG_INFINITY, f64::NAN];
        for value in steps.chain(edges) {
            let mut row = base.clone();
            row[place] = value;
            rows.push(row);
        }
    }
    rows
}

fn decimals(numbers: &[f64]) -> String {
    numbers.iter().map(|x| format!("{x:?}")).collect::<Vec<_>>().join(" ")
}

fn hex(numbers: &[f64]) -> String {
    numbers.iter().map(|x| format!("{:016x}", x.to_bits())).collect::<Vec<_>>().join(" ")
}
