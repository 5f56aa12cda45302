//! Ways between nodes: the path from one to another, and which of them hang together.

use alloc::collections::VecDeque;
use alloc::vec;
use alloc::vec::Vec;

/// A way from one node to another: the circuit's number and the node at its other end.
pub(super) type Way = (usize, usize);

/// The circuits of the way from one node to another, breadth first.
pub(super) fn path(ways: &[Vec<Way>], from: usize, to: usize) -> Vec<usize> {
    let mut came: Vec<Option<Way>> = vec![None; ways.len()];
    let mut queue = VecDeque::from([from]);
    while let Some(index) = queue.pop_front() {
        if index == to {
            break;
        }
        for &(number, other) in ways.get(index).into_iter().flatten() {
            match came.get_mut(other) {
                Some(way) if way.is_none() && other != from => *way = Some((number, index)),
                _ => continue,
            }
            queue.push_back(other);
        }
    }
    let mut path = Vec::new();
    let mut index = to;
    while let Some((number, before)) = came.get(index).copied().flatten() {
        path.push(number);
        index = before;
    }
    path.reverse();
    path
}

/// Which nodes hang together (disjoint sets with path halving).
pub(super) struct Groups(Vec<usize>);

impl Groups {
    pub(super) fn new(count: usize) -> Self {
        Self((0..count).collect())
    }

    /// The node that stands for a group.
    pub(super) fn top(&mut self, mut index: usize) -> usize {
        while let Some(&above) = self.0.get(index) {
            if above == index {
                break;
            }
            let next = self.0.get(above).copied().unwrap_or(above);
            if let Some(slot) = self.0.get_mut(index) {
                *slot = next;
            }
            index = next;
        }
        index
    }

    /// Joins two groups; false if they were one already.
    pub(super) fn join(&mut self, one: usize, other: usize) -> bool {
        let (one, other) = (self.top(one), self.top(other));
        if one == other {
            return false;
        }
        if let Some(slot) = self.0.get_mut(other) {
            *slot = one;
        }
        true
    }
}
