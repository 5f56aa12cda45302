//! What holds for every entry, whatever it computes.

use std::collections::BTreeSet;

use ampwright::Error;
use ampwright::catalogue::Entry;
use ampwright::error::Allowed;

use crate::{Numbers, call, catalogue};

#[test]
fn names_are_unique_and_every_text_is_there() {
    let mut names = BTreeSet::new();
    for entry in catalogue() {
        assert!(names.insert(entry.name), "{} stands twice", entry.name);
        assert!((1..=7).contains(&entry.inputs.len()), "{}: at most seven inputs", entry.name);
        assert!(entry.summary.ends_with('.'), "{}: its summary is one line", entry.name);
        assert!(!entry.formula.is_empty() && !entry.source.is_empty(), "{}", entry.name);
        // An output named like an input is no valid C.
        let mut own = BTreeSet::new();
        for name in entry.inputs.iter().map(|i| i.name).chain(entry.outputs.iter().map(|o| o.name)) {
            assert!(own.insert(name), "{}: {name} stands twice", entry.name);
        }
        for input in entry.inputs {
            assert!(!input.doc.is_empty() && input.choices.is_empty() == (input.suffix != "code"));
        }
    }
    // `house` compares that listing with the source.
    let listing = include_str!("../house/public_api.txt");
    let declared = listing.lines().filter_map(|line| line.strip_prefix("calculation ")?.split('(').next());
    assert_eq!(declared.collect::<BTreeSet<_>>(), names, "declared in the source, and listed");
}

#[test]
fn defaults_are_valid() {
    for entry in catalogue() {
        let mut inputs = Numbers::of(entry).accepted(entry);
        for (place, input) in entry.inputs.iter().enumerate() {
            if let Some(default) = input.default {
                inputs[place] = default;
                assert!(!names_input(&call(entry, &inputs), input.name), "{}: {}", entry.name, input.name);
            }
        }
    }
}

fn names_input(result: &Result<Vec<f64>, Error>, input: &str) -> bool {
    matches!(result, Err(Error::OutOfRange { name, .. }) if *name == input)
}

#[test]
fn the_ends_of_each_range_are_kept() {
    for entry in catalogue() {
        let base = Numbers::of(entry).accepted(entry);
        for (place, input) in entry.inputs.iter().enumerate() {
            let refused = |value: f64| {
                let mut inputs = base.clone();
                inputs[place] = value;
                names_input(&call(entry, &inputs), input.name)
            };
            let at = |values: &[f64], should: bool| {
                for &value in values {
                    assert_eq!(refused(value), should, "{}: {} = {value:e}", entry.name, input.name);
                }
            };
            at(&[f64::NAN, -f64::NAN, f64::INFINITY, f64::NEG_INFINITY], true);
            match input.range {
                Allowed::Finite => at(&[0.0], false),
                Allowed::Above(least) => {
                    assert_eq!(least, 0.0, "the cases below are those of nought");
                    at(&[0.0, -0.0, -f64::MIN_POSITIVE, -5e-324, -1.0], true);
                    at(&[f64::MIN_POSITIVE, 1e-30], false);
                }
                Allowed::AtLeast(least) => {
                    assert_eq!(least, 0.0, "the cases below are those of nought");
                    at(&[-f64::MIN_POSITIVE, -1.0], true);
                    at(&[0.0, -0.0, 5e-324, f64::MIN_POSITIVE], false);
                }
                Allowed::Between(least, most) => {
                    at(&[least, most], false);
                    // Checks are made in the base unit: one step may be lost in conversion, a thousandth may not.
                    at(&[least - 1e-3, most + 1e-3], true);
                }
                Allowed::AboveUpTo(least, most) => {
                    at(&[least, least - 1e-3, most + 1e-3], true);
                    at(&[most], false);
                }
                Allowed::Code(count) => {
                    at(&[-1.0, 0.5, f64::from(count)], true);
                    at(&[0.0, f64::from(count) - 1.0], false);
                }
                Allowed::Words(words) => panic!("{}: {words}", entry.name),
            }
        }
    }
}

/// Any bits at all, valid values, and what lies at the edge of numbers, mixed.
fn odd_rows(entry: &Entry, count: usize) -> Vec<Vec<f64>> {
    const EDGES: [f64; 12] = [
        0.0,
        -0.0,
        5e-324,
        f64::MIN_POSITIVE,
        f64::MAX,
        f64::MIN,
        f64::INFINITY,
        f64::NEG_INFINITY,
        f64::NAN,
        1.0,
        1e154,
        -273.15,
    ];
    let mut numbers = Numbers::of(entry);
    (0..count)
        .map(|row| {
            let mut inputs =
                if row % 4 == 0 { numbers.accepted(entry) } else { vec![0.0; entry.inputs.len()] };
            for (place, input) in entry.inputs.iter().enumerate() {
                let bits = numbers.bits();
                inputs[place] = match (row % 4, bits % 3) {
                    (0, _) => inputs[place],
                    (1, _) => f64::from_bits(bits),
                    (_, 0) => EDGES[usize::try_from(bits / 3 % 12).unwrap()],
                    _ => numbers.valid(input),
                };
            }
            inputs
        })
        .collect()
}

#[test]
fn odd_inputs_give_a_finite_result_or_an_error_and_columns_the_same() {
    const ROWS: usize = 2000;
    for entry in catalogue() {
        let rows = odd_rows(entry, ROWS);
        let single: Vec<_> = rows.iter().map(|row| call(entry, row)).collect();
        for (row, result) in rows.iter().zip(&single) {
            if let Ok(outputs) = result {
                assert!(outputs.iter().all(|x| x.is_finite()), "{}({row:?}) = {outputs:?}", entry.name);
            }
        }

        // All rows: the first error, at its row. NaN makes errors unequal, so their texts are compared.
        let told = |e: &Error| e.to_string();
        let first_bad = single.iter().position(Result::is_err);
        let error = columns(entry, &rows).map_err(|e| (e.index, told(&e.error)));
        let expected = first_bad.map(|at| (Some(at), told(single[at].as_ref().unwrap_err())));
        assert_eq!(error.err(), expected, "{}", entry.name);

        // Good rows alone: the same bits.
        let good: Vec<_> = rows.iter().zip(&single).filter(|(_, result)| result.is_ok()).collect();
        assert!(good.len() >= ROWS / 4, "{}: {} good rows", entry.name, good.len());
        let inputs: Vec<_> = good.iter().map(|(row, _)| (*row).clone()).collect();
        let outputs = columns(entry, &inputs).unwrap();
        for (i, (row, result)) in good.iter().enumerate() {
            for (column, value) in outputs.iter().zip(result.as_ref().unwrap()) {
                assert_eq!(column[i].to_bits(), value.to_bits(), "{}({row:?})", entry.name);
            }
        }
    }
}

#[allow(clippy::result_large_err, reason = "as the entry")]
fn columns(entry: &Entry, rows: &[Vec<f64>]) -> Result<Vec<Vec<f64>>, ampwright::catalogue::AtIndex> {
    let inputs: Vec<Vec<f64>> =
        (0..entry.inputs.len()).map(|place| rows.iter().map(|row| row[place]).collect()).collect();
    let mut outputs = vec![vec![f64::NAN; rows.len()]; entry.outputs.len()];
    (entry.array)(
        &inputs.iter().map(Vec::as_slice).collect::<Vec<_>>(),
        &mut outputs.iter_mut().map(Vec::as_mut_slice).collect::<Vec<_>>(),
    )?;
    Ok(outputs)
}
