//! What a plan is inspected for beyond its single runs: place and pole of devices, path parts, boards, lugs, returns.

use alloc::format;
use alloc::string::{String, ToString};
use alloc::vec;
use alloc::vec::Vec;

use uom::si::electric_current::ampere;
use uom::si::electric_potential::volt;
use uom::si::length::meter;

use super::check;
use super::finding::{Findings, Severity, digits, of_check};
use super::graph::{Item, Tree};
use super::joints::joints;
use super::model::{CircuitEntry, Return};
use super::overrides::overrides;
use super::plan::{Fitted, Plan, Planned};
use super::plant::{banks, boards, consumers};
use super::reach::Reach;
use super::system::Site;
use super::trust::{chassis, cooler, diversity, let_through};
use crate::cable::{Stud, lug_fits};
use crate::circuit::{Demand, Judgement, Outcome, Run, capacity, judge};
use crate::device::{Polarity, Supply};
use crate::protection::{End, Pole, PoleFault, pole_fault};
use crate::quantity::ElectricCurrent;
use crate::rules::Key;

/// All findings of a plan, gravest first, in the order of the document within.
pub(super) fn findings(site: &Site, plan: &Plan, demands: &[super::energy::Demand]) -> Findings {
    let mut found = Findings::default();
    let reach = Reach::new(site, &plan.trees, &plan.circuits);
    let ends = ends(&plan.trees, site.circuits.len());
    for (index, circuit) in site.circuits.iter().enumerate() {
        let Some(Some(planned)) = plan.circuits.get(index) else { continue };
        let (parent, child) = ends.get(index).copied().unwrap_or((None, None));
        let reach = reach.far.get(index).copied().zip(reach.near.get(index).copied()).unwrap_or((0.0, 0.0));
        let at = Place { site, circuit, planned, parent, child, reach };
        at.checks(&mut found);
        at.devices(&mut found);
        at.missing_devices(&mut found);
        at.way_back(&mut found);
        at.parts(&mut found);
        at.lugs(&mut found);
        joints(circuit, &at.place(), planned.judgement.current, at.starts_engine(), &mut found);
        cooler(site, circuit, planned, &mut found);
        chassis(site, circuit, planned, &mut found);
        at.sized_at_nominal(&mut found);
        if plan.collapsed.contains(&index) {
            found.add(
                Severity::Danger,
                "R3",
                "no-solution",
                at.place(),
                circuit.line,
                "no voltage carries the constant-power loads at this end and beyond: they pull the \
                     line down"
                    .to_string(),
                None,
                "use larger conductors on the path, less load or a higher voltage",
            );
        }
    }
    diversity(site, plan, &mut found);
    overrides(site, plan, &mut found);
    boards(site, plan, &mut found);
    consumers(site, plan, &mut found);
    banks(site, plan, &mut found);
    check::plant(site, plan, demands, &mut found);
    found.list.sort_by_key(|f| f.severity);
    found
}

/// Items on the source's side and at the far end of each circuit.
fn ends(trees: &[Tree], circuits: usize) -> Vec<(Option<Item>, Option<Item>)> {
    let mut ends = vec![(None, None); circuits];
    for tree in trees {
        for node in &tree.nodes {
            if let Some(slot) = node.circuit.and_then(|c| ends.get_mut(c)) {
                *slot = (tree.nodes.get(node.parent).map(|p| p.item), Some(node.item));
            }
        }
    }
    ends
}

struct Place<'a> {
    site: &'a Site,
    circuit: &'a CircuitEntry,
    planned: &'a Planned,
    parent: Option<Item>,
    child: Option<Item>,
    /// What devices further away let pass from the far side and from the source's side, A.
    reach: (f64, f64),
}

impl Place<'_> {
    fn place(&self) -> String {
        format!("circuit \"{}\"", self.circuit.name)
    }

    fn of_device(&self, fitted: &Fitted) -> (String, u32) {
        let line =
            fitted.entry.and_then(|e| self.circuit.devices.get(e)).map_or(self.circuit.line, |d| d.line);
        (format!("circuit \"{}\", {}", self.circuit.name, fitted.name), line)
    }

    fn starts_engine(&self) -> bool {
        let load = match self.child {
            Some(Item::Load(i)) => self.site.loads.get(i),
            _ => None,
        };
        self.circuit.starts_engine(load)
    }

    /// Conductors of engine starting: exempt from devices under craft rules (R7).
    fn is_exempt(&self) -> bool {
        self.starts_engine() && self.site.rules.exempts_cranking()
    }

    /// The checks of the run itself.
    fn checks(&self, found: &mut Findings) {
        use crate::rules::Check::{
            Ampacity, Breaking, DeviceCarries, DeviceProtects, DeviceSupply, LeastFault, OpensLate,
            Termination, Withstand,
        };
        let of_device = |check| {
            matches!(
                check,
                Breaking
                    | DeviceCarries
                    | DeviceProtects
                    | DeviceSupply
                    | LeastFault
                    | OpensLate
                    | Termination
                    | Withstand
            )
        };
        let required =
            self.circuit.drop.is_some() || self.site.rules.drop_limit(self.planned.run.usage).required;
        let material = self.planned.positive.material;
        let first = match (self.planned.fitted.first(), self.planned.guarded_by) {
            (Some(first), _) => Some(self.of_device(first)),
            (None, Some(above)) => self.site.circuits.get(above).map(|c| {
                (format!("{}, guarded only by the device of \"{}\"", self.place(), c.name), self.circuit.line)
            }),
            (None, None) => None,
        };
        for checked in &self.planned.judgement.checks {
            let (place, line) = match &first {
                Some(device) if of_device(checked.check) => device.clone(),
                _ => (self.place(), self.circuit.line),
            };
            let mut finding = of_check(checked, &place, line, material, required);
            if let Some(finding) = &mut finding
                && checked.check == Ampacity
                && checked.outcome == Outcome::NotChecked
                && !self.is_exempt()
                && let Err(error) = capacity(&self.planned.run, &self.planned.positive, None)
            {
                finding.text = format!("check not made: {error}");
                finding.source.clear();
            }
            found.list.extend(finding);
        }
        for (fitted, judgement) in self.planned.fitted.iter().skip(1).zip(&self.planned.further) {
            let (place, line) = self.of_device(fitted);
            for checked in judgement.checks.iter().filter(|c| of_device(c.check)) {
                found.list.extend(of_check(checked, &place, line, material, required));
            }
        }
    }

    /// Pole, polarity and distance of each device.
    fn devices(&self, found: &mut Findings) {
        for fitted in &self.planned.fitted {
            let (place, line) = self.of_device(fitted);
            let_through(fitted, &place, line, found);
            let entry = fitted.entry.and_then(|e| self.circuit.devices.get(e));
            // A device that is designed goes into every unearthed pole; single ones at one end add up.
            if let Some(entry) = entry {
                let others = self.planned.fitted.iter().filter(|f| f.end == fitted.end);
                let mut poles = others.filter_map(|f| self.circuit.devices.get(f.entry?)).map(|d| d.pole);
                let pole = if poles.all(|p| p == entry.pole) { entry.pole } else { Pole::Both };
                match pole_fault(self.site.earthing, pole) {
                    None => {}
                    Some(PoleFault::EarthedPoleAlone) => found.add(
                        Severity::Danger,
                        "R7",
                        "device-in-earthed-pole",
                        place.clone(),
                        line,
                        "the device opens the earthed pole alone: a fault from the other pole to earth is not \
                         interrupted"
                            .to_string(),
                        None,
                        "move it to the unearthed pole",
                    ),
                    Some(PoleFault::OnePoleOfFloating) => found.add(
                        Severity::Danger,
                        "R7",
                        "one-pole-of-floating-system",
                        place.clone(),
                        line,
                        "the system floats and only one pole has a device".to_string(),
                        None,
                        "put a device into both poles",
                    ),
                }
            }
            let both = self.planned.feeds.from && self.planned.feeds.to;
            if both && fitted.guard.device.polarity == Polarity::Marked {
                found.add(
                    Severity::Danger,
                    "R6",
                    "polarity-reversible",
                    place.clone(),
                    line,
                    "the device is marked for one polarity, but both ends can feed: the current can reverse"
                        .to_string(),
                    None,
                    "use a device without polarity",
                );
            }
            let feeding =
                if fitted.end == End::From { self.planned.feeds.from } else { self.planned.feeds.to };
            if let Some(entry) = entry.filter(|_| feeding) {
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
                Severity::Danger,
                "R7",
                "device-too-far-from-source",
                place,
                line,
                format!(
                    "{} m of conductor without protection, at most {} m",
                    digits(actual),
                    digits(limit.value.get::<meter>())
                ),
                Some(limit.citation),
                "move the device towards the source",
            ),
            (Some(actual), None) if actual > 0.0 => found.add(
                Severity::NotChecked,
                "R7",
                "device-distance-not-limited",
                place,
                line,
                format!(
                    "check not made: {} m of conductor without protection, and the rule set holds no \
                     length for this case",
                    digits(actual)
                ),
                None,
                if !self.circuit.sheathed && self.site.rules.unfused_length(true, from_post).is_some() {
                    "where a sheath or enclosure guards it throughout and nothing combustible is \
                         near, state sheathed = true"
                } else {
                    ""
                },
            ),
            // At a board the device sits in the board.
            (None, _) if !from_post => {}
            (None, _) => found.add(
                Severity::NotChecked,
                "R7",
                "device-distance-not-stated",
                place,
                line,
                "check not made: conductor length between the bank and the device; state \
                     from_source"
                    .to_string(),
                None,
                "",
            ),
            (Some(_), _) => {}
        }
    }

    fn item_at(&self, end: End) -> Option<Item> {
        let name = if end == End::From { &self.circuit.from } else { &self.circuit.to };
        [self.parent, self.child].into_iter().flatten().find(|&item| name_of(self.site, item) == name)
    }

    /// A device at every end that can feed, or devices further away that let no more pass than the conductor may
    /// have (R7).
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
            let far = self.item_at(end) == self.child;
            // Guarded from further up by one device: the checks have judged it.
            if !far && self.planned.guarded_by.is_some() && !self.planned.feeds.to {
                continue;
            }
            let passed = if far { self.reach.0 } else { self.reach.1 };
            let limit = self.planned.judgement.device_limit.map(|l| l.most.get::<ampere>());
            let text = match limit {
                _ if passed.is_infinite() => {
                    format!("no device between a source at \"{name}\" or beyond and this circuit")
                }
                Some(limit) if passed <= limit => continue,
                Some(limit) => format!(
                    "no device at \"{name}\"; those further away let {} A pass, at most {} A",
                    digits(passed),
                    digits(limit)
                ),
                None => {
                    found.add(
                        Severity::NotChecked,
                        "R7",
                        "feeding-end-not-checked",
                        self.place(),
                        self.circuit.line,
                        format!(
                            "check not made: no device at \"{name}\", and the conductor has no \
                             tabulated capacity"
                        ),
                        None,
                        "",
                    );
                    continue;
                }
            };
            found.add(
                Severity::Danger,
                "R7",
                if far { "second-feeding-end-unprotected" } else { "device-missing" },
                self.place(),
                self.circuit.line,
                text,
                None,
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
                Severity::Danger,
                "R9",
                "chassis-return",
                self.place(),
                self.circuit.line,
                "hull or chassis carries the return current; under craft rules only the engine \
                     block may, for cranking and alternator"
                    .to_string(),
                None,
                "run a return conductor",
            );
        } else if resistance.is_none() {
            found.add(
                Severity::Danger,
                "R9",
                "chassis-return",
                self.place(),
                self.circuit.line,
                "the chassis carries the return current and its resistance is not stated".to_string(),
                None,
                "run a return conductor, or measure and state return_resistance",
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
                    Severity::NotChecked,
                    "R8",
                    "part-rating-not-stated",
                    place.clone(),
                    part.line,
                    "check not made: rated current of the part".to_string(),
                    None,
                    "",
                ),
                Some(rating) if rating < need => found.add(
                    Severity::Danger,
                    "R8",
                    "part-below-device",
                    place.clone(),
                    part.line,
                    format!(
                        "rated {} A, but its device lets {} A pass for hours",
                        digits(rating),
                        digits(need)
                    ),
                    None,
                    "use a part rated for at least its device",
                ),
                Some(rating) => found.pass(
                    "R8",
                    &place,
                    &format!("rated {} A, at least {} A", digits(rating), digits(need)),
                ),
            }
            let highest = self.planned.run.highest.get::<volt>();
            match part.supply {
                Supply::AcOnly => found.add(
                    Severity::Danger,
                    "R6",
                    "part-not-for-dc",
                    place.clone(),
                    part.line,
                    "the part is rated for AC only; on DC its arc need not go out".to_string(),
                    None,
                    "use a part rated for DC",
                ),
                Supply::Dc(rated) | Supply::PerPole(rated, _) if rated.get::<volt>() < highest => found.add(
                    Severity::Danger,
                    "R6",
                    "part-voltage-too-low",
                    place.clone(),
                    part.line,
                    format!("rated {} V DC, at least {} V", digits(rated.get::<volt>()), digits(highest)),
                    None,
                    "use a part rated for the highest voltage",
                ),
                Supply::NotStated => found.add(
                    Severity::NotChecked,
                    "R6",
                    "part-voltage-not-stated",
                    place,
                    part.line,
                    "check not made: voltage rating of the part on DC".to_string(),
                    None,
                    "",
                ),
                Supply::Dc(rated) | Supply::PerPole(rated, _) => found.pass(
                    "R6",
                    &place,
                    &format!("rated {} V DC, at least {} V", digits(rated.get::<volt>()), digits(highest)),
                ),
            }
        }
    }

    /// Lugs fit their studs.
    fn lugs(&self, found: &mut Findings) {
        for (name, lug) in
            [(&self.circuit.from, self.circuit.from_lug), (&self.circuit.to, self.circuit.to_lug)]
        {
            let item =
                [self.parent, self.child].into_iter().flatten().find(|&i| name_of(self.site, i) == name);
            let Some(stud) = item.and_then(|i| stud_of(self.site, i)) else { continue };
            match lug {
                Some(lug) if !lug_fits(lug, stud) => found.add(
                    Severity::Nonconforming,
                    "R8",
                    if lug < stud { "lug-too-small" } else { "lug-too-large" },
                    self.place(),
                    self.circuit.line,
                    format!("lug for {lug} on the {stud} terminal of \"{name}\""),
                    None,
                    "use a lug made for that stud and conductor; never drill it out",
                ),
                // A circuit that is designed gets the lug that fits.
                None if !self.planned.designed() => found.add(
                    Severity::NotChecked,
                    "R8",
                    "lug-not-stated",
                    self.place(),
                    self.circuit.line,
                    format!("check not made: lug on the {stud} terminal of \"{name}\""),
                    None,
                    "",
                ),
                Some(lug) => found.pass(
                    "R8",
                    &self.place(),
                    &format!("lug {lug} on the {stud} terminal of \"{name}\""),
                ),
                None => {}
            }
        }
    }

    /// An inverter's feed that would do for its power over nominal voltage, but not in the worst hour (R3).
    fn sized_at_nominal(&self, found: &mut Findings) {
        use crate::rules::Check::{Ampacity, DeviceCarries, TerminalColumn};
        let Some(Item::Inverter(index)) = self.child else { return };
        let Some(inverter) = self.site.inverters.get(index) else { return };
        let sized = |judged: &Judgement| {
            !judged.checks.iter().any(|c| {
                c.outcome == Outcome::Failed && matches!(c.check, Ampacity | DeviceCarries | TerminalColumn)
            })
        };
        let Planned { run, positive, negative, fitted, judgement, .. } = self.planned;
        let nominal = inverter.power / run.nominal;
        if sized(judgement) || self.planned.designed() {
            return;
        }
        let demand = Demand::Current { continuous: nominal, other: ElectricCurrent::default() };
        let at_nominal = judge(&Run { demand, ..*run }, positive, negative, fitted.first().map(|f| &f.guard));
        if at_nominal.is_ok_and(|j| sized(&j)) {
            found.add(
                Severity::Danger,
                "R3",
                "feed-sized-at-nominal",
                self.place(),
                self.circuit.line,
                format!(
                    "conductor and device suit {} A, power over nominal voltage; at cut-off, with \
                         its efficiency, the inverter draws {} A",
                    digits(nominal.get::<ampere>()),
                    digits(judgement.current.get::<ampere>())
                ),
                None,
                "size the feed for the lowest voltage at the inverter's terminals",
            );
        }
    }
}

/// Name of an item in the document.
pub(super) fn name_of(site: &Site, item: Item) -> &str {
    match item {
        Item::Bank(i) => site.banks.get(i).map(|x| x.name.as_str()),
        Item::Board(i) => site.boards.get(i).map(|x| x.name.as_str()),
        Item::Load(i) => site.loads.get(i).map(|x| x.name.as_str()),
        Item::Inverter(i) => site.inverters.get(i).map(|x| x.name.as_str()),
        Item::Charger(i) => site.chargers.get(i).map(|x| x.name.as_str()),
        Item::ControllerInput(i) => site.controllers.get(i).map(|x| x.name.as_str()),
        Item::ConverterInput(i) => site.converters.get(i).map(|x| x.name.as_str()),
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
        Item::Charger(i) => site.chargers.get(i)?.stud,
        Item::ControllerInput(i) => site.controllers.get(i)?.stud,
        Item::ConverterInput(i) => site.converters.get(i)?.stud,
    }
}
