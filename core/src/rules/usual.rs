//! What a rule set takes where a document says nothing: every use of these shows among the report's assumptions.

use super::answer::Rules;
use super::query::{Installation, Key};
use crate::cable::{Compound, Insulation};
use crate::citation::{Citation, Seen};
use crate::device::Family;

impl Rules {
    /// Way of installation that is assumed where none is stated: the common one with the lower capacity.
    pub fn usual_installation(&self) -> Installation {
        match self.set().key {
            Key::Us => Installation::Conduit,
            Key::Iec => Installation::CableInConduit,
            Key::CraftIso | Key::CraftUs => Installation::Loom,
        }
    }

    /// Insulation that is assumed where none is stated: the lowest rating in common use under the set.
    pub fn usual_insulation(&self) -> Insulation {
        let (compound, rating_degC) = match self.set().key {
            Key::Us => (Compound::Pvc, 75.0),
            Key::Iec | Key::CraftIso => (Compound::Pvc, 70.0),
            Key::CraftUs => (Compound::Pvc, 105.0),
        };
        // PVC is made for 60 to 105 °C, so the lowest never stands in; a test asks every set.
        Insulation::new(compound, rating_degC).unwrap_or(Insulation::PVC_60)
    }

    /// Families that are designed with where the stock lists none, preferred first.
    pub fn usual_families(&self) -> &'static [Family] {
        match self.set().key {
            Key::Us => &[Family::ClassT],
            Key::Iec => &[Family::Gg],
            Key::CraftIso | Key::CraftUs => &[Family::Blade, Family::ClassT],
        }
    }

    /// Whether conductors of engine starting need no device (R7): under craft rules.
    pub fn exempts_cranking(&self) -> bool {
        matches!(self.set().key, Key::CraftIso | Key::CraftUs)
    }

    /// The rule by which a family may not be the only device of a circuit; `None` where it may.
    pub fn refuses_family(&self, family: Family) -> Option<Citation> {
        match (self.set().key, family) {
            (Key::Us, Family::Supplementary) => {
                Some(Citation::new("NFPA 70-2023", "240.10, supplementary protection", Seen::Recalled))
            }
            _ => None,
        }
    }

    /// Temperature rating of a terminal without mark, °C; `None` where another check of the set covers it, or where
    /// craft columns hold for lugs on studs.
    pub fn unmarked_terminal_degC(&self) -> Option<f64> {
        match self.set().key {
            // Terminals are type-tested with PVC conductors (IEC 60947-1, recalled).
            Key::Iec => Some(70.0),
            Key::Us | Key::CraftIso | Key::CraftUs => None,
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn every_set_has_a_usual_insulation_its_tables_know() {
        for (word, rating) in [("us", 75.0), ("iec", 70.0), ("craft_iso", 70.0), ("craft_us", 105.0)] {
            let rules = Rules::named(word).unwrap();
            assert_eq!(rules.usual_insulation().rating_degC(), rating);
            assert!(!rules.usual_families().is_empty());
        }
    }
}
