//! Where devices belong: at every end that can feed, in every unearthed pole (R7).

use crate::error::Error;

/// Which pole is tied to earth.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Earthing {
    /// The negative pole, at one point.
    Negative,
    /// The positive pole, at one point.
    Positive,
    /// Neither.
    Floating,
}

/// A pole of the system.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Pole {
    /// The positive pole.
    Positive,
    /// The negative pole.
    Negative,
    /// Both poles.
    Both,
}

/// End of a run.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum End {
    /// Its beginning.
    From,
    /// Its far end.
    To,
}

/// What is wrong with the pole a device sits in.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum PoleFault {
    /// It opens only the earthed pole: a fault from the other pole to earth is not interrupted.
    EarthedPoleAlone,
    /// The system floats and only one pole is guarded.
    OnePoleOfFloating,
}

/// Judges the pole of a device; `None` where it is right.
///
/// # Source
/// Rule R7 (guide `rules`); for the earthed pole also IEC 60364-4-43:2008, 431.2 (recalled).
///
/// # Example
/// ```
/// use ampwright::protection::{Earthing, Pole, PoleFault, pole_fault};
/// assert_eq!(pole_fault(Earthing::Negative, Pole::Positive), None);
/// assert_eq!(pole_fault(Earthing::Negative, Pole::Negative), Some(PoleFault::EarthedPoleAlone));
/// ```
pub const fn pole_fault(earthing: Earthing, pole: Pole) -> Option<PoleFault> {
    match (earthing, pole) {
        (_, Pole::Both) | (Earthing::Negative, Pole::Positive) | (Earthing::Positive, Pole::Negative) => None,
        (Earthing::Negative, Pole::Negative) | (Earthing::Positive, Pole::Positive) => {
            Some(PoleFault::EarthedPoleAlone)
        }
        (Earthing::Floating, _) => Some(PoleFault::OnePoleOfFloating),
    }
}

/// Which ends of a run can feed a fault on it.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq)]
pub struct Feeds {
    /// From its beginning: a source lies on the parent's side.
    pub from: bool,
    /// From its far end: a source lies at the node or below it.
    pub to: bool,
}

/// Which ends of each run can feed, for a tree given by parents and the nodes that hold a source.
///
/// Entry i concerns the run from node i's parent to node i; entry 0, the root's, is left as it is.
///
/// # Errors
/// [`Error::NotATree`] if the slices differ in length or a parent does not precede its child.
///
/// # Example
/// A board (0, with the first bank) feeds a lamp (1) and a second bank (2):
/// ```
/// use ampwright::protection::{Feeds, feeds};
/// let mut ends = [Feeds::default(); 3];
/// feeds(&[0, 0, 0], &[true, false, true], &mut ends)?;
/// assert_eq!(ends[1], Feeds { from: true, to: false });
/// assert_eq!(ends[2], Feeds { from: true, to: true });
/// # Ok::<(), ampwright::Error>(())
/// ```
pub fn feeds(parents: &[usize], has_source: &[bool], ends: &mut [Feeds]) -> Result<(), Error> {
    let wrong = Error::NotATree {
        what: "a node hangs from itself or from a later node; list every parent before its children",
    };
    if parents.len() != has_source.len() || parents.len() != ends.len() {
        return Err(wrong);
    }
    for (end, source) in ends.iter_mut().zip(has_source) {
        *end = Feeds { from: false, to: *source };
    }
    // Upwards: a source anywhere below feeds the run from its far end.
    for (index, &parent) in parents.iter().enumerate().skip(1).rev() {
        if parent >= index {
            return Err(wrong);
        }
        if ends.get(index).is_some_and(|e| e.to)
            && let Some(above) = ends.get_mut(parent)
        {
            above.to = true;
        }
    }
    // Sources on the parent's side: all of them less those in this branch. Counts of branches with a source are
    // kept in no extra memory: a run is fed from its beginning where its parent is fed from above, holds a source,
    // or has another branch that does.
    for (index, &parent) in parents.iter().enumerate().skip(1) {
        let from_above = parent > 0 && ends.get(parent).is_some_and(|e| e.from);
        let at_parent = has_source.get(parent).copied().unwrap_or(false);
        let sibling = !from_above
            && !at_parent
            && parents
                .iter()
                .zip(ends.iter())
                .enumerate()
                .skip(1)
                .any(|(other, (&p, e))| other != index && p == parent && e.to);
        if let Some(end) = ends.get_mut(index) {
            end.from = from_above || at_parent || sibling;
        }
    }
    Ok(())
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_single_source_feeds_every_run_from_its_beginning_only() {
        let parents = [0, 0, 1, 1, 3];
        let mut ends = [Feeds::default(); 5];
        feeds(&parents, &[true, false, false, false, false], &mut ends).unwrap();
        assert!(ends.iter().skip(1).all(|e| e.from && !e.to));
    }

    #[test]
    fn a_source_at_a_leaf_feeds_its_path_from_below_and_its_siblings_from_above() {
        // root without source — board 1 — lamp 2, bank 3
        let mut ends = [Feeds::default(); 4];
        feeds(&[0, 0, 1, 1], &[false, false, false, true], &mut ends).unwrap();
        assert_eq!(ends[1], Feeds { from: false, to: true });
        assert_eq!(ends[2], Feeds { from: true, to: false });
        assert_eq!(ends[3], Feeds { from: false, to: true });
    }

    #[test]
    fn a_floating_system_needs_both_poles() {
        assert_eq!(pole_fault(Earthing::Floating, Pole::Positive), Some(PoleFault::OnePoleOfFloating));
        assert_eq!(pole_fault(Earthing::Floating, Pole::Both), None);
        assert_eq!(pole_fault(Earthing::Positive, Pole::Negative), None);
        assert_eq!(pole_fault(Earthing::Positive, Pole::Positive), Some(PoleFault::EarthedPoleAlone));
    }
}
