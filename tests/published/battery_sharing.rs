//! Currents of parallel strings against two other ways to them: a general nodal solution, and the tree of `network`.
//!
//! Source of all: Kirchhoff's laws. The room of batteries may not use `network`; here both are at hand.

use ampwright::battery::{Link, StringShare, StringSource, TakeOff, share};
use ampwright::network::{self, NodeLoad, NodeState, TreeNode};
use ampwright::quantity::{ElectricCurrent, ElectricPotential, ElectricalResistance};
use proptest::collection::vec;
use proptest::prelude::*;
use uom::si::electric_current::ampere;
use uom::si::electric_potential::volt;
use uom::si::electrical_resistance::milliohm;

fn string(volts: f64, milliohms: f64) -> StringSource {
    StringSource {
        emf: ElectricPotential::new::<volt>(volts),
        resistance: ElectricalResistance::new::<milliohm>(milliohms),
    }
}
fn link(plus: f64, minus: f64) -> Link {
    Link {
        positive: ElectricalResistance::new::<milliohm>(plus),
        negative: ElectricalResistance::new::<milliohm>(minus),
    }
}

/// Currents of the strings and the voltage between the take-offs.
fn ours(strings: &[StringSource], links: &[Link], take_off: TakeOff, amperes: f64) -> (Vec<f64>, f64) {
    let mut shares = vec![StringShare::default(); strings.len()];
    let current = ElectricCurrent::new::<ampere>(amperes);
    let sharing = share(strings, links, take_off, current, &mut shares).unwrap();
    (shares.iter().map(|s| s.current.get::<ampere>()).collect(), sharing.voltage.get::<volt>())
}

/// The same by the potentials of all nodes: conductances in a full matrix, solved by elimination with pivots.
fn nodal(
    strings: &[StringSource],
    links: &[Link],
    (positive, negative): (usize, usize),
    amperes: f64,
) -> (Vec<f64>, f64) {
    let n = strings.len();
    // Nodes 0 … n−1 on the positive bar, n … 2n−1 on the negative one. The negative take-off is earthed.
    let mut matrix = vec![vec![0.0; 2 * n + 1]; 2 * n];
    let mut join = |a: usize, b: usize, siemens: f64, feed: f64| {
        for (i, j, sign) in [(a, b, 1.0), (b, a, -1.0)] {
            matrix[i][i] += siemens;
            matrix[i][j] -= siemens;
            matrix[i][2 * n] += sign * feed;
        }
    };
    for (i, s) in strings.iter().enumerate() {
        let siemens = 1.0 / s.resistance.value;
        join(i, n + i, siemens, siemens * s.emf.value);
    }
    for (i, l) in links.iter().enumerate() {
        join(i, i + 1, 1.0 / l.positive.value, 0.0);
        join(n + i, n + i + 1, 1.0 / l.negative.value, 0.0);
    }
    matrix[positive][2 * n] -= amperes;
    matrix[n + negative] = vec![0.0; 2 * n + 1];
    matrix[n + negative][n + negative] = 1.0;
    for column in 0..2 * n {
        let pivot =
            (column..2 * n).max_by(|a, b| matrix[*a][column].abs().total_cmp(&matrix[*b][column].abs()));
        matrix.swap(column, pivot.unwrap());
        for row in 0..2 * n {
            if row != column {
                let factor = matrix[row][column] / matrix[column][column];
                let above = matrix[column].clone();
                for (cell, above) in matrix[row].iter_mut().zip(above) {
                    *cell -= factor * above;
                }
            }
        }
    }
    let potential: Vec<f64> = (0..2 * n).map(|i| matrix[i][2 * n] / matrix[i][i]).collect();
    let current =
        |i: usize| (strings[i].emf.value - potential[i] + potential[n + i]) / strings[i].resistance.value;
    ((0..n).map(current).collect(), potential[positive] - potential[n + negative])
}

/// As far as a tree goes: both cables at the first string, so that each link is a loop.
fn tree(strings: &[StringSource], links: &[Link], amperes: f64) -> (Vec<f64>, f64) {
    let source = |s: &StringSource| network::Source { emf: s.emf, resistance: s.resistance };
    let nodes: Vec<TreeNode> = (0..strings.len())
        .map(|i| TreeNode {
            parent: i.saturating_sub(1),
            resistance: i.checked_sub(1).map_or(ElectricalResistance::new::<milliohm>(0.0), |before| {
                links[before].positive + links[before].negative
            }),
            load: NodeLoad {
                current: ElectricCurrent::new::<ampere>(if i == 0 { amperes } else { 0.0 }),
                ..NodeLoad::default()
            },
            source: (i > 0).then(|| source(&strings[i])),
        })
        .collect();
    let mut states = vec![NodeState::default(); nodes.len()];
    network::solve(source(&strings[0]), &nodes, &mut states).unwrap();
    let current = |i: usize| (strings[i].emf - states[i].voltage).value / strings[i].resistance.value;
    ((0..strings.len()).map(current).collect(), states[0].voltage.value)
}

fn agree(a: &(Vec<f64>, f64), b: &(Vec<f64>, f64)) -> bool {
    // Amperes and volts out of milliohms: what is left is the rounding of the full matrix.
    a.0.len() == b.0.len()
        && a.0.iter().zip(&b.0).all(|(x, y)| (x - y).abs() < 1e-6)
        && (a.1 - b.1).abs() < 1e-9
}

/// Source: rule R15 of the design: 37.5, 12.5, 12.5, 37.5 A of 100 A. It holds where each string has the resistance
/// of one link, 1 mΩ; by hand, outer = 25 A·(r + 2l)/(r + l). A stiffer link or a softer string shares better.
#[test]
fn four_strings_on_a_diagonal_share_as_the_design_says() {
    let (strings, links) = ([string(25.6, 1.0); 4], [link(1.0, 1.0); 3]);
    let (shares, volts) = ours(&strings, &links, TakeOff::Diagonal, 100.0);
    for (share, printed) in shares.iter().zip([37.5, 12.5, 12.5, 37.5]) {
        assert!((share - printed).abs() < 1e-9, "{shares:?}");
    }
    assert!(agree(&(shares, volts), &nodal(&strings, &links, (0, 3), 100.0)));
    // Half the resistance of a string, and the middle ones carry a sixth of the current together.
    let (stiff, _) = ours(&[string(25.6, 0.5); 4], &links, TakeOff::Diagonal, 100.0);
    assert!((stiff[0] - 25.0 * 2.5 / 1.5).abs() < 1e-9 && stiff[1] < 9.0);
}

/// Source: Kirchhoff's laws. Both cables at one end: currents fall from string to string, by whole numbers where
/// string and loop of a link are alike (5, 2, 1 of 8: each sees what lies behind it).
#[test]
fn three_strings_from_one_end_fall_like_a_ladder() {
    let (shares, _) = ours(&[string(12.0, 2.0); 3], &[link(1.0, 1.0); 2], TakeOff::OneEnd, 8.0);
    for (share, expected) in shares.iter().zip([5.0, 2.0, 1.0]) {
        assert!((share - expected).abs() < 1e-9, "{shares:?}");
    }
}

proptest! {
    #![proptest_config(ProptestConfig::with_cases(128))]
    #[test]
    fn any_ladder_is_the_general_network(
        parts in vec((11.5..12.9f64, 0.2..20.0f64, 0.02..2.0f64, 0.02..2.0f64), 2..8), amperes in -200.0..200.0f64,
        ends in (0usize..7, 0usize..7),
    ) {
        let strings: Vec<_> = parts.iter().map(|(u, r, _, _)| string(*u, *r)).collect();
        let links: Vec<_> = parts.iter().skip(1).map(|(_, _, p, m)| link(*p, *m)).collect();
        let n = strings.len();
        let (positive, negative) = (ends.0 % n, ends.1 % n);
        let found = ours(&strings, &links, TakeOff::At { positive, negative }, amperes);
        let general = nodal(&strings, &links, (positive, negative), amperes);
        prop_assert!(agree(&found, &general), "{found:?} {general:?}");
        // The named take-offs are two of these.
        prop_assert!(agree(&ours(&strings, &links, TakeOff::Diagonal, amperes), &nodal(&strings, &links, (0, n - 1), amperes)));
        let end = ours(&strings, &links, TakeOff::OneEnd, amperes);
        prop_assert!(agree(&end, &nodal(&strings, &links, (0, 0), amperes)));
        prop_assert!(agree(&end, &tree(&strings, &links, amperes)), "{end:?}");
    }

    #[test]
    fn a_busbar_is_a_tree_without_links(parts in vec((11.5..12.9f64, 0.2..20.0f64), 2..8), amperes in -200.0..200.0f64) {
        let strings: Vec<_> = parts.iter().map(|(u, r)| string(*u, *r)).collect();
        let found = ours(&strings, &[], TakeOff::Busbar, amperes);
        // By hand: one voltage, all conductances in parallel.
        let siemens: f64 = strings.iter().map(|s| 1.0 / s.resistance.value).sum();
        let volts = (strings.iter().map(|s| s.emf.value / s.resistance.value).sum::<f64>() - amperes) / siemens;
        let by_hand = strings.iter().map(|s| (s.emf.value - volts) / s.resistance.value).collect();
        prop_assert!(agree(&found, &(by_hand, volts)));
        let bare = vec![link(0.0, 0.0); strings.len() - 1];
        prop_assert!(agree(&found, &tree(&strings, &bare, amperes)));
    }
}
