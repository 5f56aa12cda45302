//! What devices further away let pass towards a circuit from either side (R7).

use alloc::vec;
use alloc::vec::Vec;

use uom::si::electric_current::ampere;

use super::graph::{Item, Tree};
use super::plan::Planned;
use super::system::Site;

/// What all devices of a side together let pass towards each circuit, A: infinite where a source is not guarded.
pub(super) struct Reach {
    /// From the far side, by circuit.
    pub far: Vec<f64>,
    /// From the source's side.
    pub near: Vec<f64>,
}

impl Reach {
    pub fn new(site: &Site, trees: &[Tree], circuits: &[Option<Planned>]) -> Self {
        let mut reach = Self { far: vec![0.0; site.circuits.len()], near: vec![0.0; site.circuits.len()] };
        let rating = |circuit: usize| {
            circuits
                .get(circuit)
                .and_then(|p| p.as_ref())
                .and_then(|p| p.fitted.iter().map(|f| f.guard.device.rating.get::<ampere>()).reduce(f64::min))
                .unwrap_or(f64::INFINITY)
        };
        let source = |item| if matches!(item, Item::Bank(_)) { f64::INFINITY } else { 0.0 };
        for tree in trees {
            // Upwards: what comes out of each node towards its parent.
            let mut out: Vec<f64> = tree.nodes.iter().map(|n| source(n.item)).collect();
            for (index, node) in tree.nodes.iter().enumerate().skip(1).rev() {
                let Some(circuit) = node.circuit else { continue };
                let own = out.get(index).copied().unwrap_or(0.0);
                if let Some(far) = reach.far.get_mut(circuit) {
                    *far = own;
                }
                if let Some(parent) = out.get_mut(node.parent) {
                    *parent += own.min(rating(circuit));
                }
            }
            // Downwards: what each node receives from above and gives to each branch; infinities do not subtract,
            // so the branches of a node are summed anew where one of them is unguarded.
            let mut into = vec![0.0; tree.nodes.len()];
            for (index, node) in tree.nodes.iter().enumerate().skip(1) {
                let Some(circuit) = node.circuit else { continue };
                let own = reach.far.get(circuit).copied().unwrap_or(0.0).min(rating(circuit));
                let all = out.get(node.parent).copied().unwrap_or(0.0);
                let from_below = if own.is_finite() && all.is_finite() {
                    (all - own).max(0.0)
                } else if tree.nodes.get(node.parent).is_some_and(|p| source(p.item) > 0.0) || own.is_finite()
                {
                    f64::INFINITY
                } else {
                    // Only this branch, or another too: count the other unguarded ones.
                    let others = tree.nodes.iter().enumerate().skip(1).any(|(other, n)| {
                        other != index
                            && n.parent == node.parent
                            && n.circuit.is_some_and(|c| {
                                reach.far.get(c).copied().unwrap_or(0.0).min(rating(c)).is_infinite()
                            })
                    });
                    if others { f64::INFINITY } else { 0.0 }
                };
                let near = from_below + into.get(node.parent).copied().unwrap_or(0.0);
                if let Some(slot) = reach.near.get_mut(circuit) {
                    *slot = near;
                }
                if let Some(slot) = into.get_mut(index) {
                    *slot = near.min(rating(circuit));
                }
            }
        }
        reach
    }
}
