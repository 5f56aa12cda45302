//! What a plan is inspected for beyond its single runs: place and pole of devices, path parts, boards, lugs, returns.

use alloc::format;
use alloc::string::{String, ToString};
use alloc::vec::Vec;

use uom::si::electric_current::ampere;
use uom::si::electric_potential::volt;
use uom::si::length::meter;

use super::finding::{Finding, Severity, digits, of_check};
use super::graph::{Item, Tree};
use super::model::{CircuitEntry, Return, Site};
use super::plan::{Fitted, Plan, Planned};
use crate::cable::{Stud, joint_resistance, lug_fits};
use crate::citation::Citation;
use crate::device::{Polarity, Supply};
use crate::protection::{Earthing, End, PoleFault, pole_fault};
use crate::rules::Key;

/// Highest voltage that may be touched without basic protection in dry places, V.
const TOUCH_V: f64 = 60.0;
/// Heat of one joint that deserves a look, W: common practice, no source.
const JOINT_W: f64 = 5.0;
/// Most lugs on one stud (R8).
const LUGS: u32 = 4;

/// Collects findings with their place.
pub(super) struct Findings(pub Vec<Finding>);

impl Findings {
    #[allow(clippy::too_many_arguments)] // the fields of a finding, in its order
    fn add(
        &mut self,
        severity: Severity,
        rule: &'static str,
        slug: &'static str,
        place: impl Into<String>,
        line: u32,
        text: String,
        source: Option<Citation>,
        remedy: &'static str,
    ) {
        let source = source.map_or_else(String::new, |c| c.to_string());
        self.0.push(Finding { severity, rule, slug, place: place.into(), line, text, source, remedy });
    }
}

/// All findings of a plan, gravest first, in the order of the document within.
pub(super) fn findings(site: &Site, plan: &Plan) -> Vec<Finding> {
    let mut found = Findings(Vec::new());
    for (index, circuit) in site.circuits.iter().enumerate() {
        let Some(Some(planned)) = plan.circuits.get(index) else { continue };
        let (parent, child) = ends_of(&plan.trees, index);
        let at = Place { site, circuit, planned, parent, child };
        at.checks(&mut found);
        at.devices(&mut found);
        at.missing_devices(&mut found);
        at.way_back(&mut found);
        at.parts(&mut found);
        at.lugs(&mut found);
        at.joints(&mut found);
        at.start(&mut found);
        if plan.collapsed.contains(&index) {
            found.add(
                Severity::Danger,
                "R3",
                "no-solution",
                at.place(),
                circuit.line,
                "no voltage carries the constant-power loads at this end and beyond: they pull the line down".to_string(),
                None,
                "use larger conductors on the path, less load or a higher voltage",
            );
        }
    }
    boards(site, plan, &mut found);
    consumers(site, plan, &mut found);
    banks(site, plan, &mut found);
    found.0.sort_by_key(|f| f.severity);
    found.0
}

/// Items on the source's side and at the far end of a circuit.
fn ends_of(trees: &[Tree], circuit: usize) -> (Option<Item>, Option<Item>) {
    for tree in trees {
        if let Some(node) = tree.nodes.iter().find(|n| n.circuit == Some(circuit)) {
            return (tree.nodes.get(node.parent).map(|p| p.item), Some(node.item));
        }
    }
    (None, None)
}

struct Place<'a> {
    site: &'a Site,
    circuit: &'a CircuitEntry,
    planned: &'a Planned,
    parent: Option<Item>,
    child: Option<Item>,
}

impl Place<'_> {
    fn place(&self) -> String {
        format!("circuit \"{}\"", self.circuit.name)
    }

    fn of_device(&self, fitted: &Fitted) -> (String, u32) {
        let line = fitted
            .entry
            .and_then(|e| self.circuit.devices.get(e))
            .map_or(self.circuit.line, |d| d.line);
        (format!("circuit \"{}\", {}", self.circuit.name, fitted.name), line)
    }

    /// Conductors of engine starting: exempt from devices under craft rules (R7).
    fn is_exempt(&self) -> bool {
        self.circuit.cranking && matches!(self.site.rules.set().key, Key::CraftIso | Key::CraftUs)
    }

    /// The checks of the run itself.
    fn checks(&self, found: &mut Findings) {
        use crate::rules::Check::{
            Breaking, DeviceCarries, DeviceProtects, DeviceSupply, LeastFault, OpensLate, Termination, Withstand,
        };
        let of_device = |check| {
            matches!(
                check,
                Breaking | DeviceCarries | DeviceProtects | DeviceSupply | LeastFault | OpensLate | Termination | Withstand
            )
        };
        let required = self.circuit.drop.is_some()
            || self.site.rules.drop_limit(self.planned.run.usage).required;
        let material = self.planned.positive.material;
        let first = self.planned.fitted.first().map(|f| self.of_device(f));
        for checked in &self.planned.judgement.checks {
            let (place, line) = match &first {
                Some(device) if of_device(checked.check) => device.clone(),
                _ => (self.place(), self.circuit.line),
            };
            found.0.extend(of_check(checked, &place, line, material, required));
        }
        for (fitted, judgement) in self.planned.fitted.iter().skip(1).zip(&self.planned.further) {
            let (place, line) = self.of_device(fitted);
            for checked in judgement.checks.iter().filter(|c| of_device(c.check)) {
                found.0.extend(of_check(checked, &place, line, material, required));
            }
        }
    }

    /// Pole, polarity and distance of each device.
    fn devices(&self, found: &mut Findings) {
        for fitted in &self.planned.fitted {
            let (place, line) = self.of_device(fitted);
            let entry = fitted.entry.and_then(|e| self.circuit.devices.get(e));
            // A device that is designed goes into every unearthed pole.
            if let Some(entry) = entry {
                match pole_fault(self.site.earthing, entry.pole) {
                    None => {}
                    Some(PoleFault::EarthedPoleAlone) => found.add(
                        Severity::Danger, "R7", "device-in-earthed-pole", place.clone(), line,
                        "the device opens the earthed pole alone: a fault from the other pole to earth is not interrupted".to_string(),
                        None, "move it to the unearthed pole",
                    ),
                    Some(PoleFault::OnePoleOfFloating) => found.add(
                        Severity::Danger, "R7", "one-pole-of-floating-system", place.clone(), line,
                        "the system floats and only one pole has a device".to_string(),
                        None, "put a device into both poles",
                    ),
                }
            }
            let both = self.planned.feeds.from && self.planned.feeds.to;
            if both && fitted.guard.device.polarity == Polarity::Marked {
                found.add(
                    Severity::Danger, "R6", "polarity-reversible", place.clone(), line,
                    "the device is marked for one polarity, but both ends can feed: the current can reverse".to_string(),
                    None, "use a device without polarity",
                );
            }
            if let Some(entry) = entry {
                self.distance(found, fitted.end, entry.from_source.map(|l| l.get::<meter>()), &place, line);
            }
        }
    }

    /// Unprotected length between source and device (R7).
    fn distance(&self, found: &mut Findings, end: End, stated_m: Option<f64>, place: &str, line: u32) {
        if self.is_exempt() {
            return;
        }
        let item = self.item_at(end);
        let from_post = matches!(item, Some(Item::Bank(_)));
        let limit = self.site.rules.unfused_length(self.circuit.sheathed, from_post);
        match (stated_m, limit) {
            (Some(actual), Some(limit)) if actual > limit.value.get::<meter>() => found.add(
                Severity::Danger, "R7", "device-too-far-from-source", place, line,
                format!("{} m of conductor without protection, at most {} m", digits(actual), digits(limit.value.get::<meter>())),
                Some(limit.citation), "move the device towards the source",
            ),
            (Some(_), Some(_)) => {}
            (Some(actual), None) if actual > 0.0 => found.add(
                Severity::NotChecked, "R7", "device-distance-not-limited", place, line,
                format!("check not made: {} m of conductor without protection, and the rule set holds no length for this case", digits(actual)),
                None, "",
            ),
            // At a board the device sits in the board.
            (None, _) if !from_post => {}
            (None, _) => found.add(
                Severity::NotChecked, "R7", "device-distance-not-stated", place, line,
                "check not made: conductor length between the bank and the device; state from_source".to_string(),
                None, "",
            ),
            (Some(_), None) => {}
        }
    }

    fn item_at(&self, end: End) -> Option<Item> {
        let name = if end == End::From { &self.circuit.from } else { &self.circuit.to };
        [self.parent, self.child].into_iter().flatten().find(|&item| name_of(self.site, item) == name)
    }

    /// A device at every end that can feed (R7).
    fn missing_devices(&self, found: &mut Findings) {
        if self.is_exempt() {
            return;
        }
        for (end, feeding, name) in [
            (End::From, self.planned.feeds.from, &self.circuit.from),
            (End::To, self.planned.feeds.to, &self.circuit.to),
        ] {
            if !feeding || self.planned.fitted.iter().any(|f| f.end == end) {
                continue;
            }
            let far = matches!(self.item_at(end), item if item == self.child);
            let text = match (far, self.planned.guarded_by) {
                // Guarded from further up: the checks say whether that device does protect it.
                (false, Some(_)) => continue,
                (true, _) => format!("no device at the end \"{name}\", which can feed a fault on this circuit too"),
                (false, None) => format!("no device between \"{name}\" and this circuit"),
            };
            found.add(
                Severity::Danger, "R7", if far { "second-feeding-end-unprotected" } else { "device-missing" },
                self.place(), self.circuit.line, text, None,
                "fit a device at this end, close to the source",
            );
        }
    }

    /// Chassis and hull as a return (R9).
    fn way_back(&self, found: &mut Findings) {
        let Return::Chassis(resistance) = self.circuit.way_back else { return };
        let craft = matches!(self.site.rules.set().key, Key::CraftIso | Key::CraftUs);
        if craft && !self.circuit.cranking {
            found.add(
                Severity::Danger, "R9", "chassis-return", self.place(), self.circuit.line,
                "hull or chassis carries the return current; under craft rules only the engine block may, for cranking and alternator".to_string(),
                None, "run a return conductor",
            );
        } else if resistance.is_none() {
            found.add(
                Severity::Danger, "R9", "chassis-return", self.place(), self.circuit.line,
                "the chassis carries the return current and its resistance is not stated".to_string(),
                None, "run a return conductor, or measure and state return_resistance",
            );
        }
    }

    /// Every part of the path carries at least its device (R8).
    fn parts(&self, found: &mut Findings) {
        let device = self
            .planned
            .fitted
            .iter()
            .map(|f| f.guard.device.rating.get::<ampere>())
            .fold(None, |most: Option<f64>, r| Some(most.map_or(r, |m| m.max(r))));
        let need = device.unwrap_or_else(|| self.planned.judgement.current.get::<ampere>());
        for part in &self.circuit.parts {
            let place = format!("circuit \"{}\", {}", self.circuit.name, part.name);
            match part.rating.map(|r| r.get::<ampere>()) {
                None => found.add(
                    Severity::NotChecked, "R8", "part-rating-not-stated", place.clone(), part.line,
                    "check not made: rated current of the part".to_string(), None, "",
                ),
                Some(rating) if rating < need => found.add(
                    Severity::Danger, "R8", "part-below-device", place.clone(), part.line,
                    format!("rated {} A, but its device lets {} A pass for hours", digits(rating), digits(need)),
                    None, "use a part rated for at least its device",
                ),
                Some(_) => {}
            }
            let highest = self.planned.run.highest.get::<volt>();
            match part.supply {
                Supply::AcOnly => found.add(
                    Severity::Danger, "R6", "part-not-for-dc", place, part.line,
                    "the part is rated for AC only; on DC its arc need not go out".to_string(), None, "use a part rated for DC",
                ),
                Supply::Dc(rated) if rated.get::<volt>() < highest => found.add(
                    Severity::Danger, "R6", "part-voltage-too-low", place, part.line,
                    format!("rated {} V DC, at least {} V", digits(rated.get::<volt>()), digits(highest)),
                    None, "use a part rated for the highest voltage",
                ),
                Supply::NotStated => found.add(
                    Severity::NotChecked, "R6", "part-voltage-not-stated", place, part.line,
                    "check not made: voltage rating of the part on DC".to_string(), None, "",
                ),
                Supply::Dc(_) => {}
            }
        }
    }

    /// Lugs fit their studs.
    fn lugs(&self, found: &mut Findings) {
        for (name, lug) in [(&self.circuit.from, self.circuit.from_lug), (&self.circuit.to, self.circuit.to_lug)] {
            let item = [self.parent, self.child].into_iter().flatten().find(|&i| name_of(self.site, i) == name);
            let Some(stud) = item.and_then(|i| stud_of(self.site, i)) else { continue };
            match lug {
                Some(lug) if !lug_fits(lug, stud) => found.add(
                    Severity::Nonconforming, "R8",
                    if lug < stud { "lug-too-small" } else { "lug-too-large" },
                    self.place(), self.circuit.line,
                    format!("lug for {lug} on the {stud} terminal of \"{name}\""),
                    None, "use a lug made for that stud and conductor; never drill it out",
                ),
                // A circuit that is designed gets the lug that fits.
                None if !self.planned.designed() => found.add(
                    Severity::NotChecked, "R8", "lug-not-stated", self.place(), self.circuit.line,
                    format!("check not made: lug on the {stud} terminal of \"{name}\""), None, "",
                ),
                _ => {}
            }
        }
    }

    /// Heat in single joints (R9).
    fn joints(&self, found: &mut Findings) {
        let amps = self.planned.judgement.current.get::<ampere>();
        for joint in &self.circuit.joints {
            let each = joint.resistance.unwrap_or_else(|| joint_resistance(joint.kind));
            let heat = amps * amps * each.value;
            if heat > JOINT_W {
                found.add(
                    Severity::Advice, "R9", "joint-heat", self.place(), self.circuit.line,
                    format!("a joint of {} mΩ turns {} W into heat at {} A; no fuse sees that", digits(each.value * 1e3), digits(heat), digits(amps)),
                    None, "remake the joint, and measure it under load",
                );
            }
        }
    }

    /// Volts at the load while it starts (R16).
    fn start(&self, found: &mut Findings) {
        if let (Some(volts), Some(least)) = (self.planned.flow.start, self.planned.flow.least_voltage)
            && volts < least
        {
            found.add(
                Severity::Nonconforming, "R16", "start-voltage-too-low", self.place(), self.circuit.line,
                format!("{} V at the load while it starts, at least {} V", digits(volts), digits(least)),
                None, "use larger conductors on its path",
            );
        }
    }
}

/// Busbars and studs (R8).
fn boards(site: &Site, plan: &Plan, found: &mut Findings) {
    for board in &site.boards {
        let place = format!("board \"{}\"", board.name);
        let mut drawn = 0.0;
        let mut fed = 0.0;
        for (circuit, planned) in site.circuits.iter().zip(&plan.circuits) {
            let Some(planned) = planned else { continue };
            if circuit.from != board.name && circuit.to != board.name {
                continue;
            }
            let towards = if circuit.to == board.name { planned.feeds.from } else { planned.feeds.to };
            if towards {
                fed += planned.fitted.first().map_or_else(
                    || planned.judgement.current.get::<ampere>(),
                    |f| f.guard.device.rating.get::<ampere>(),
                );
            } else {
                drawn += planned.judgement.current.get::<ampere>();
            }
        }
        let (need, what) = if fed >= drawn { (fed, "the devices that feed it") } else { (drawn, "its loads") };
        match board.busbar.map(|b| b.get::<ampere>()) {
            None => found.add(
                Severity::NotChecked, "R8", "busbar-rating-not-stated", place.clone(), board.line,
                "check not made: rated current of the busbar; state busbar".to_string(), None, "",
            ),
            Some(rating) if rating < need => found.add(
                Severity::Danger, "R8", "busbar-below-sum", place.clone(), board.line,
                format!("busbar rated {} A, but {what} let {} A pass", digits(rating), digits(need)),
                None, "use a busbar rated for the sum of its sources or loads, whichever is greater",
            ),
            Some(_) => {}
        }
        if let Some(lugs) = board.lugs_on_stud.filter(|&l| l > LUGS) {
            found.add(
                Severity::Nonconforming, "R8", "too-many-lugs", place, board.line,
                format!("{lugs} lugs on one stud, at most {LUGS}, the heaviest at the base"),
                None, "spread them over more studs or a busbar",
            );
        }
    }
}

/// Supply range of loads and inverters against the highest voltage (R3).
fn consumers(site: &Site, plan: &Plan, found: &mut Findings) {
    for tree in &plan.trees {
        for node in &tree.nodes {
            let Some(Some(planned)) = node.circuit.and_then(|c| plan.circuits.get(c)) else { continue };
            let (place, line, least, greatest) = match node.item {
                Item::Load(i) => match site.loads.get(i) {
                    Some(l) => (format!("load \"{}\"", l.name), l.line, l.least, l.greatest),
                    None => continue,
                },
                Item::Inverter(i) => match site.inverters.get(i) {
                    Some(v) => (format!("inverter \"{}\"", v.name), v.line, v.least, v.greatest),
                    None => continue,
                },
                Item::Bank(_) | Item::Board(_) => continue,
            };
            let highest = planned.flow.highest;
            match greatest.map(|g| g.get::<volt>()) {
                Some(greatest) if greatest < highest => found.add(
                    Severity::Nonconforming, "R3", "voltage-too-high-at-load", place.clone(), line,
                    format!("bears {} V, but the bank reaches {} V while it is charged cold", digits(greatest), digits(highest)),
                    None, "use a load for the full range, a converter, or disconnect it while equalising",
                ),
                Some(_) => {}
                None => found.add(
                    Severity::NotChecked, "R3", "greatest-voltage-not-stated", place.clone(), line,
                    format!("check not made: greatest supply voltage against {} V; state greatest", digits(highest)), None, "",
                ),
            }
            if least.is_none() {
                found.add(
                    Severity::NotChecked, "R3", "least-voltage-not-stated", place, line,
                    format!(
                        "check not made: least supply voltage against {} V at cut-off; state least",
                        digits(planned.judgement.end_voltage.get::<volt>())
                    ),
                    None, "",
                );
            }
        }
    }
}

/// Banks: discharge limit, touch voltage, what is known of the fault current.
fn banks(site: &Site, plan: &Plan, found: &mut Findings) {
    for (index, bank) in site.banks.iter().enumerate() {
        let place = format!("bank \"{}\"", bank.name);
        let drawn: f64 = site
            .circuits
            .iter()
            .zip(&plan.circuits)
            .filter(|(c, _)| c.from == bank.name || c.to == bank.name)
            .filter_map(|(_, p)| p.as_ref().map(|p| p.judgement.current.get::<ampere>()))
            .sum();
        if let Some(limit) = bank.greatest_discharge.map(|a| a.get::<ampere>())
            && drawn > limit
        {
            found.add(
                Severity::Nonconforming, "R11", "discharge-above-limit", place.clone(), bank.line,
                format!("{} A in the worst hour, at most {} A", digits(drawn), digits(limit)),
                None, "less load at a time, a larger bank or another pack",
            );
        }
        let highest = bank.highest.get::<volt>();
        if highest > TOUCH_V {
            found.add(
                Severity::NotChecked, "R19", "touch-protection", place.clone(), bank.line,
                format!("the bank reaches {} V, above {} V: protection against touch is not described in the document", digits(highest), digits(TOUCH_V)),
                Some(Citation::new("IEC 60364-4-41:2005", "extra-low voltage limits", crate::citation::Seen::Page)),
                "cover live parts and mark them",
            );
        }
        let known = super::plan::sources(site);
        if known.get(index).is_some_and(|e| e.by_thumb) {
            found.add(
                Severity::Advice, "R6", "fault-current-by-rule-of-thumb", place, bank.line,
                "prospective currents rest on a rule of thumb from capacity: known to a factor at best".to_string(),
                None, "state short_circuit or internal_resistance from the maker's sheet or a measurement",
            );
        }
    }
    if site.earthing == Earthing::Floating {
        found.add(
            Severity::Advice, "R19", "floating-system", "site", 0,
            "neither pole is earthed: a first earth fault shows nowhere".to_string(),
            None, "fit insulation monitoring",
        );
    }
}

/// Name of an item in the document.
pub(super) fn name_of(site: &Site, item: Item) -> &str {
    match item {
        Item::Bank(i) => site.banks.get(i).map(|x| x.name.as_str()),
        Item::Board(i) => site.boards.get(i).map(|x| x.name.as_str()),
        Item::Load(i) => site.loads.get(i).map(|x| x.name.as_str()),
        Item::Inverter(i) => site.inverters.get(i).map(|x| x.name.as_str()),
    }
    .unwrap_or("")
}

/// Stud of an item's terminals, where stated.
pub(super) fn stud_of(site: &Site, item: Item) -> Option<Stud> {
    match item {
        Item::Bank(i) => site.banks.get(i)?.stud,
        Item::Board(i) => site.boards.get(i)?.stud,
        Item::Load(i) => site.loads.get(i)?.stud,
        Item::Inverter(i) => site.inverters.get(i)?.stud,
    }
}
