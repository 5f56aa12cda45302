//! Earthing, touch, surges and masts (R19, R20).

use alloc::format;

use super::At;
use crate::citation::{Citation, Seen};
use crate::protection::Earthing;
use crate::rules::Bonding;
use crate::site::finding::{Findings, Severity, digits};
use crate::site::system::Site;

/// Highest voltage that may be touched in dry places, V (R19).
const TOUCH_V: f64 = 60.0;
const TOUCH: Citation = Citation::new("IEC 60364-4-41:2005", "extra-low voltage limits", Seen::Page);

/// The site as a whole.
pub(super) fn place(site: &Site, found: &mut Findings) {
    let rule = site.rules.surroundings_rule();
    let mut at = At::new(found, "site".into(), 0);
    bonds(site, rule.bond_points.value, rule.bond_points.citation, &mut at);
    let exposed = site.place.mast || site.arrays.iter().any(|a| a.part.exposed);
    if exposed {
        let asked = if site.place.mast { rule.surge_mast } else { None };
        match site.place.surge_protection {
            Some(true) => at.pass("R20", "surge protection is fitted"),
            Some(false) => at.tell(
                Severity::Nonconforming,
                ("R20", "surge-protection-missing"),
                "a mast or an exposed array, and no surge protection".into(),
                asked.map(|a| a.citation),
                "fit surge protective devices where conductors enter, bonded on the shortest way",
            ),
            None => at.unmade(
                ("R20", "surge-protection-not-stated"),
                "surge protection of a mast or an exposed array; state surge_protection",
            ),
        }
    }
    if site.place.mast {
        let least =
            rule.least_bonding(Bonding::AntennaMast).or_else(|| rule.least_bonding(Bonding::LightningDown));
        match (site.place.bonding, least) {
            (Some(size), Some(least)) if size.area_mm2() < least.value.area_mm2() => at.tell(
                Severity::Nonconforming,
                ("R20", "bonding-too-thin"),
                format!("bonding conductor of the mast {size}, at least {}", least.value),
                Some(least.citation),
                "use a thicker conductor, straight down",
            ),
            (Some(size), Some(least)) => at.pass(
                "R20",
                &format!(
                    "bonding conductor of the mast {size}, at least {}{}",
                    least.value,
                    if least.citation.seen == Seen::Recalled { ": the recalled value; verify" } else { "" }
                ),
            ),
            (_, None) => at.unmade(
                ("R20", "bonding-not-checked"),
                "bonding conductor of the mast: the rule set holds no size",
            ),
            (None, _) => at.unmade(
                ("R20", "bonding-not-checked"),
                "size of the mast's bonding conductor; state bonding",
            ),
        }
    }
}

/// One point at which the system is tied to earth.
fn bonds(site: &Site, most: u8, citation: Citation, at: &mut At<'_>) {
    if site.earthing == Earthing::Floating {
        if site.place.bonds.is_some_and(|b| b > 0) {
            at.nonconforming(
                ("R19", "floating-but-bonded"),
                "earthing = \"floating\", yet a pole is tied to earth".into(),
                "state the pole that is earthed, or take the bond out",
            );
        }
        return;
    }
    match site.place.bonds {
        None => at.unmade(("R19", "bond-points-not-stated"), "points at which a pole is tied to earth; state bonds"),
        Some(0) => at.nonconforming(
            ("R19", "no-bond-point"),
            "one pole is to be earthed, and no point is".into(),
            "tie it to earth at one point, near the bank",
        ),
        Some(count) if count > u32::from(most) => at.tell(
            Severity::Nonconforming,
            ("R19", "several-bond-points"),
            format!("{count} points tie a pole to earth, at most {most}: current returns through earth and metalwork"),
            Some(citation),
            "keep the one near the bank, take out the others",
        ),
        Some(_) => at.pass("R19", "tied to earth at one point"),
    }
}

/// Above a voltage live parts are covered.
pub(in crate::site) fn touch(site: &Site, volts: f64, limit: Option<(f64, Citation)>, at: &mut At<'_>) {
    let (most, citation) = match limit {
        Some((most, citation)) if most < TOUCH_V => (most, citation),
        _ => (TOUCH_V, TOUCH),
    };
    if volts <= most {
        return;
    }
    match site.place.covered {
        Some(true) => {
            at.pass("R19", &format!("{} V, above {} V: live parts are covered", digits(volts), digits(most)));
        }
        Some(false) => at.tell(
            Severity::Danger,
            ("R19", "touch-protection-missing"),
            format!("{} V, above {} V, and live parts are open to touch", digits(volts), digits(most)),
            Some(citation),
            "cover live parts and mark them",
        ),
        None => at.tell(
            Severity::NotChecked,
            ("R19", "touch-protection"),
            format!(
                "check not made: {} V, above {} V: protection against touch is not described; state covered",
                digits(volts),
                digits(most)
            ),
            Some(citation),
            "cover live parts and mark them",
        ),
    }
}
