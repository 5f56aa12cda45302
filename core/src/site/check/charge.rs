//! Charging: what all sources give together, their set points, compensation, sense, data links, load dump (R11, R13).

use alloc::format;
use alloc::string::String;
use alloc::vec;
use alloc::vec::Vec;

use uom::si::electric_charge::ampere_hour;
use uom::si::electric_current::ampere;
use uom::si::electric_potential::volt;
use uom::si::thermodynamic_temperature::degree_celsius;

use super::At;
use crate::battery::{Chemistry, Standing, VoltageRange, cell_set_points, charge_limit, set_points};
use crate::generator::{ChargeSource, Contribution, LoadDump, SourceKind, source_sum};
use crate::protection::End;
use crate::quantity::{ElectricCurrent, ElectricPotential, ThermodynamicTemperature};
use crate::site::complete::bank::temperatures;
use crate::site::finding::{Findings, Severity, digits};
use crate::site::graph::{Graph, Item};
use crate::site::parts::{BankPart, GeneratorKind};
use crate::site::system::{BankEntry, Charger, ChargerKind, FeedKind, Site};

/// Least compensation a cell of lead-acid wants, V/K: handbooks give 3 to 5 mV.
const LEAST_COMPENSATION: f64 = -0.003;
/// How far from 25 °C cells may get while charge without compensation errs little, K. Common practice, no source.
const STEADY_K: f64 = 10.0;
/// Set points are worked out as cells times volts: rounding, as a part.
const HAIR: f64 = 1e-9;
const MILD_DEGC: f64 = 25.0;

/// Greatest voltage that a cell of lithium bears while it is charged, V; beyond it lies damage and fire. Typical cell data
/// sheets, recalled.
const fn greatest_cell_V(chemistry: Chemistry) -> Option<f64> {
    match chemistry {
        Chemistry::Lfp => Some(3.65),
        Chemistry::Nmc => Some(4.2),
        Chemistry::Flooded | Chemistry::Agm | Chemistry::Gel | Chemistry::NickelCadmium => None,
    }
}

const fn dumps(bears: bool) -> LoadDump {
    if bears { LoadDump::Bears } else { LoadDump::DoesNotBear }
}

/// A charger as a source.
pub(in crate::site) fn source_of(site: &Site, charger: &Charger) -> Option<ChargeSource> {
    let limit = charger.limit?;
    Some(match charger.kind {
        ChargerKind::Controller(index) => {
            let rated: f64 = site
                .arrays
                .iter()
                .filter(|a| a.controller == Some(index))
                .map(|a| a.module.power.value * f64::from(a.series) * f64::from(a.strings))
                .sum();
            let volts =
                charger.bank.and_then(|b| site.banks.get(b)).map_or(f64::NAN, |b| b.nominal.get::<volt>());
            let best = ElectricCurrent::new::<ampere>(rated / volts);
            // Its output limits it, in cold bright sun too; for hours it gives what the array is rated for.
            let part = if rated > 0.0 && best < limit { Some(best / limit) } else { None };
            let load_dump = site.controllers.get(index).and_then(|c| c.load_dump).map(dumps);
            ChargeSource { lasting: part, load_dump, ..ChargeSource::new(SourceKind::Array, limit) }
        }
        ChargerKind::Generator(index) => {
            let part = site.generators.get(index)?;
            let kind = match part.kind {
                GeneratorKind::Engine => SourceKind::EngineSet,
                GeneratorKind::Alternator => SourceKind::Alternator,
                GeneratorKind::Shore => SourceKind::Shore,
                GeneratorKind::Wind => SourceKind::Wind,
                GeneratorKind::Hydro => SourceKind::Hydro,
            };
            let load_dump = part.load_dump.map(dumps);
            ChargeSource { lasting: part.hot_output, load_dump, ..ChargeSource::new(kind, limit) }
        }
    })
}

/// Every bank.
pub(super) fn banks(site: &Site, found: &mut Findings) {
    for (index, bank) in site.banks.iter().enumerate() {
        let (Some(chemistry), Some(part)) = (bank.chemistry(), bank.part.as_ref()) else { continue };
        let chargers: Vec<&Charger> = site.chargers.iter().filter(|c| c.bank == Some(index)).collect();
        let mut at = At::new(found, format!("bank \"{}\"", bank.name), bank.line);
        if chargers.is_empty() {
            if let Some(other) = charged_through(site, index) {
                at.unmade(
                    ("R11", "charging-not-checked"),
                    &format!("it is charged through \"{other}\"; current and set points from there"),
                );
                continue;
            }
            at.nonconforming(
                ("R11", "bank-without-charge"),
                "nothing charges it: no controller, generator or converter".into(),
                "state what charges it, or write [weather] and let an array be designed",
            );
            continue;
        }
        sum(site, bank, chemistry, part, &chargers, &mut at);
        for charger in chargers {
            let mut at = At::new(found, format!("\"{}\" into \"{}\"", charger.name, bank.name), charger.line);
            one(site, bank, chemistry, part, charger, &mut at);
            own_end(site, charger, &mut at);
        }
    }
}

/// What charges a bank that no charger names: a converter that feeds its network, or a bank joined to it that is charged.
fn charged_through(site: &Site, bank: usize) -> Option<&str> {
    let trees = Graph::new(site).trees();
    let tree = trees.iter().find(|t| t.nodes.iter().any(|n| n.item == Item::Bank(bank)))?;
    tree.nodes.iter().find_map(|node| {
        let Item::Bank(other) = node.item else { return None };
        let entry = site.banks.get(other)?;
        let charges = match entry.kind {
            FeedKind::Converter(_) => true,
            FeedKind::Battery(_) => site.chargers.iter().any(|c| c.bank == Some(other)),
            FeedKind::Array(_) => false,
        };
        (other != bank && charges).then_some(entry.name.as_str())
    })
}

/// A machine that does not limit itself wants a device at its own end too (R7).
fn own_end(site: &Site, charger: &Charger, at: &mut At<'_>) {
    let ChargerKind::Generator(index) = charger.kind else { return };
    let Some(part) = site.generators.get(index) else { return };
    if part.kind != GeneratorKind::Alternator {
        return;
    }
    let guarded = site
        .circuits
        .iter()
        .filter(|c| c.from == charger.name)
        .any(|c| c.devices.iter().any(|d| d.end == End::From));
    if part.self_limiting {
        at.pass("R7", "limits itself: its circuit is guarded at the bank's end");
    } else if guarded {
        at.pass("R7", "its circuit is guarded at its own end too");
    } else {
        at.unmade(
            ("R7", "source-limit-not-stated"),
            "whether it limits itself; state self_limiting = true, or a device at its own end",
        );
    }
}

/// All sources together against what the bank takes.
fn sum(
    site: &Site,
    bank: &BankEntry,
    chemistry: Chemistry,
    part: &BankPart,
    chargers: &[&Charger],
    at: &mut At<'_>,
) {
    let sources: Vec<ChargeSource> = chargers.iter().filter_map(|c| source_of(site, c)).collect();
    if sources.len() < chargers.len() {
        let names: Vec<&str> =
            chargers.iter().filter(|c| c.limit.is_none()).map(|c| c.name.as_str()).collect();
        at.unmade(
            ("R11", "charger-limit-not-stated"),
            &format!("charge current: {} states no output; state output", names.join(", ")),
        );
        return;
    }
    let mut each = vec![
        Contribution {
            place: 0,
            kind: SourceKind::Array,
            greatest: ElectricCurrent::default(),
            greatest_by: crate::generator::LimitedBy::Nameplate,
            lasting: ElectricCurrent::default(),
            lasting_by: crate::generator::LimitedBy::Nameplate,
            load_dump: LoadDump::Unknown,
        };
        sources.len()
    ];
    let Ok(sum) = source_sum(&sources, &mut each) else { return };
    let greatest = sum.greatest.get::<ampere>();
    let capacity = bank.capacity.get::<ampere_hour>();
    let mild = ThermodynamicTemperature::new::<degree_celsius>(MILD_DEGC);
    let Ok(limit) = charge_limit(chemistry, mild) else { return };
    let (usual, ceiling) = (limit.usual.get() * capacity, limit.ceiling.get() * capacity);
    match part.greatest_charge.map(|a| a.get::<ampere>()) {
        Some(own) if greatest > own => at.nonconforming(
            ("R11", "charge-above-limit"),
            format!("{} A of all sources, at most {} A by its maker", digits(greatest), digits(own)),
            "limit the sources at their outputs, or use a larger bank",
        ),
        Some(own) => at.pass(
            "R11",
            &format!("{} A of all sources, at most {} A by its maker", digits(greatest), digits(own)),
        ),
        None if greatest > ceiling => at.tell(
            Severity::Danger,
            ("R11", "charge-above-ceiling"),
            format!(
                "{} A of all sources, {} /h; at most {} A even by a maker's word, {} A without",
                digits(greatest),
                digits(greatest / capacity),
                digits(ceiling),
                digits(usual)
            ),
            Some(limit.citation),
            "limit the sources at their outputs, or use a larger bank",
        ),
        None if greatest > usual => at.tell(
            Severity::Nonconforming,
            ("R11", "charge-above-limit"),
            format!(
                "{} A of all sources, at most {} A ({} /h)",
                digits(greatest),
                digits(usual),
                digits(limit.usual.get())
            ),
            Some(limit.citation),
            "limit the sources at their outputs, state the maker's greatest_charge, or use a larger bank",
        ),
        None => at.pass(
            "R11",
            &format!(
                "{} A of all sources, at most {} A ({} /h)",
                digits(greatest),
                digits(usual),
                digits(limit.usual.get())
            ),
        ),
    }
    if let Some(least) = limit.least
        && sum.lasting.get::<ampere>() < least.get() * capacity
    {
        at.tell(
            Severity::Advice,
            ("R11", "charge-rate-low"),
            format!(
                "{} A of all sources for hours, {} A mix and fill its cells ({} /h)",
                digits(sum.lasting.get::<ampere>()),
                digits(least.get() * capacity),
                digits(least.get())
            ),
            Some(limit.citation),
            "charge it from a stronger source now and then, or use a smaller bank",
        );
    }
    cold(site, chemistry, part, (greatest, capacity), at);
    if part.data_link {
        let text = "its charge limit reaches the sources over a data link only: a limit that rests on it is no protection";
        let allowed = part.greatest_charge.map_or(usual, |a| a.get::<ampere>());
        if greatest > allowed {
            at.nonconforming(
                ("R11", "limit-by-data-link"),
                text.into(),
                "limit the sources at their outputs",
            );
        } else {
            at.pass("R11", "the sources keep to its limit without the data link");
        }
    }
    dump(site, chemistry, part, chargers, &each, at);
}

/// The sources against what the bank takes at its coldest, and whether it takes any at its warmest.
fn cold(
    site: &Site,
    chemistry: Chemistry,
    part: &BankPart,
    (greatest, capacity): (f64, f64),
    at: &mut At<'_>,
) {
    let (coldest, warmest) = temperatures(site, part);
    if charge_limit(chemistry, warmest).is_ok_and(|limit| limit.ceiling.get() <= 0.0)
        && charge_limit(chemistry, coldest).is_ok_and(|limit| limit.ceiling.get() > 0.0)
    {
        at.nonconforming(
            ("R11", "charge-blocked-by-heat"),
            format!("at {} °C, its warmest, it takes no charge", digits(warmest.get::<degree_celsius>())),
            "keep the bank cooler",
        );
    }
    let Ok(limit) = charge_limit(chemistry, coldest) else { return };
    let celsius = coldest.get::<degree_celsius>();
    let from = part.charge_from.map(|t| t.get::<degree_celsius>());
    let by_pack = from.is_some_and(|from| celsius >= from);
    // Where it takes none at all it is told by the case of its own (R13); by the pack's own word it takes its own limit.
    let blocked = if from.is_some() { !by_pack } else { limit.ceiling.get() <= 0.0 };
    let most = limit.usual.get() * capacity;
    let mild = ThermodynamicTemperature::new::<degree_celsius>(MILD_DEGC);
    let as_warm = charge_limit(chemistry, mild).is_ok_and(|mild| mild.usual.get() <= limit.usual.get());
    if blocked || as_warm || greatest <= most || (by_pack && part.greatest_charge.is_some()) {
        return;
    }
    if part.greatest_charge.is_some() || limit.ceiling.get() <= 0.0 {
        at.unmade(
            ("R11", "charge-limit-in-cold-not-stated"),
            &format!(
                "{} A of all sources at {} °C, its coldest; state greatest_charge and charge_from, down to which it holds",
                digits(greatest),
                digits(celsius)
            ),
        );
        return;
    }
    at.tell(
        Severity::Nonconforming,
        ("R11", "charge-above-limit-in-cold"),
        format!(
            "{} A of all sources at {} °C, its coldest, at most {} A there ({} /h)",
            digits(greatest),
            digits(celsius),
            digits(most),
            digits(limit.usual.get())
        ),
        Some(limit.citation),
        "limit the sources by temperature, keep the bank milder, or state the maker's greatest_charge and charge_from",
    );
}

/// A pack that opens while it is charged.
fn dump(
    site: &Site,
    chemistry: Chemistry,
    part: &BankPart,
    chargers: &[&Charger],
    each: &[Contribution],
    at: &mut At<'_>,
) {
    for (charger, contribution) in chargers.iter().zip(each) {
        let (stated, key) = match charger.kind {
            ChargerKind::Generator(i) => {
                (site.generators.get(i).and_then(|g| g.load_dump), "; state load_dump")
            }
            ChargerKind::Controller(i) => {
                (site.controllers.get(i).and_then(|c| c.load_dump), "; state load_dump")
            }
        };
        let name = &charger.name;
        if !part.opens_under_charge {
            // Packs of lithium open by themselves more often than not, and machines that turn do not bear it.
            if stated.is_none()
                && contribution.load_dump == LoadDump::DoesNotBear
                && greatest_cell_V(chemistry).is_some()
            {
                at.unmade(
                    ("R11", "load-dump-not-stated"),
                    &format!(
                        "whether the pack may open under charge, and \"{name}\" bears it; state opens_under_charge and \
                         load_dump"
                    ),
                );
            }
            continue;
        }
        match contribution.load_dump {
            LoadDump::Bears => at.pass("R11", &format!("\"{name}\" bears that the pack opens under charge")),
            LoadDump::DoesNotBear => at.danger(
                ("R11", "load-dump"),
                format!(
                    "the pack may open under charge, and \"{name}\" {} bear it: its voltage runs away into every load",
                    if stated.is_some() { "does not" } else { "is not known to" }
                ),
                "use a source or a clamp made for it, or a pack that keeps its terminals closed",
            ),
            LoadDump::Unknown => at.unmade(
                ("R11", "load-dump-not-stated"),
                &format!("what \"{name}\" does when the pack opens under charge{key}"),
            ),
        }
    }
}

/// Set points of one charger.
fn one(
    site: &Site,
    bank: &BankEntry,
    chemistry: Chemistry,
    part: &BankPart,
    charger: &Charger,
    at: &mut At<'_>,
) {
    let mild = ThermodynamicTemperature::new::<degree_celsius>(MILD_DEGC);
    let Ok(points) = set_points(chemistry, bank.cells, mild) else { return };
    if charger.line == 0 {
        at.pass(
            "R11",
            &format!(
                "to be set to absorption {} V{}{} at 25 °C",
                digits(points.absorption.usual().get::<volt>()),
                points
                    .float
                    .map_or_else(String::new, |f| format!(", float {} V", digits(f.usual().get::<volt>()))),
                points.equalise.map_or_else(String::new, |e| format!(
                    ", equalising {} V",
                    digits(e.usual().get::<volt>())
                ))
            ),
        );
        return;
    }
    let charging = charger.charging;
    if charging.absorption.is_none() {
        at.unmade(
            ("R11", "set-points-not-stated"),
            &format!(
                "set points against {}; state absorption, float and equalise (absorption {} to {} V at 25 °C)",
                chemistry.word(),
                digits(points.absorption.low.get::<volt>()),
                digits(points.absorption.high.get::<volt>())
            ),
        );
    }
    let danger = greatest_cell_V(chemistry).map(|cell| cell * f64::from(bank.cells));
    let mut hold = |name: &str, low: &str, stated: Option<ElectricPotential>, range: Option<VoltageRange>| {
        let Some(stated) = stated else { return };
        let volts = digits(stated.get::<volt>());
        let severity = if danger.is_some_and(|most| stated.get::<volt>() > most * (1.0 + HAIR)) {
            Severity::Danger
        } else {
            Severity::Nonconforming
        };
        let Some(range) = range else {
            at.tell(
                severity,
                ("R11", "set-point-not-for-chemistry"),
                format!("{name} {volts} V is set, and {} takes none", chemistry.word()),
                Some(points.citation),
                "switch that stage off",
            );
            return;
        };
        let span = format!("{} to {} V", digits(range.low.get::<volt>()), digits(range.high.get::<volt>()));
        let wide = VoltageRange { low: range.low * (1.0 - HAIR), high: range.high * (1.0 + HAIR) };
        match wide.standing(stated) {
            // Lithium that is let fall after its charge is none the worse.
            Standing::Below if danger.is_some() && name == "float" => {
                at.pass(
                    "R11",
                    &format!("{name} {volts} V, below the usual {span} at 25 °C: it spares the cells"),
                );
            }
            Standing::Within => at.pass("R11", &format!("{name} {volts} V, usual {span} at 25 °C")),
            Standing::Below => at.tell(
                Severity::Nonconforming,
                ("R11", "set-point-low"),
                format!("{name} {volts} V, usual {span} at 25 °C for {}: {low}", chemistry.word()),
                Some(points.citation),
                "set it by the maker's figure",
            ),
            Standing::Above | Standing::NotANumber => at.tell(
                severity,
                ("R11", "set-point-high"),
                format!("{name} {volts} V, usual {span} at 25 °C for {}", chemistry.word()),
                Some(points.citation),
                "set it by the maker's figure",
            ),
        }
    };
    hold("absorption", "it is never full", charging.absorption, Some(points.absorption));
    hold("float", "it is not kept full", charging.float, points.float);
    hold("equalising", "it does not mix the acid", charging.equalise, points.equalise);
    compensation(site, chemistry, part, charger, at);
    reaches(site, bank, chemistry, part, charger, at);
}

fn compensation(site: &Site, chemistry: Chemistry, part: &BankPart, charger: &Charger, at: &mut At<'_>) {
    let usual = cell_set_points(chemistry);
    let (coldest, warmest) = temperatures(site, part);
    // Set points are stated at 25 °C: what counts is how far the cells get from there.
    let away = (MILD_DEGC - coldest.get::<degree_celsius>()).max(warmest.get::<degree_celsius>() - MILD_DEGC);
    let stated = charger.charging.compensation.map(|c| c.value);
    let wants = usual.compensation_V_per_K < 0.0;
    match stated {
        None if wants && away > STEADY_K => at.unmade(
            ("R11", "compensation-not-stated"),
            "compensation of the charge voltage for temperature; state compensation, 0 where there is none",
        ),
        Some(own) if wants && away > STEADY_K && own > LEAST_COMPENSATION => at.tell(
            Severity::Nonconforming,
            ("R11", "compensation-missing"),
            format!(
                "{} mV/K a cell between {} and {} °C; {} wants {} mV/K",
                digits(own * 1e3),
                digits(coldest.get::<degree_celsius>()),
                digits(warmest.get::<degree_celsius>()),
                chemistry.word(),
                digits(usual.compensation_V_per_K * 1e3)
            ),
            Some(usual.compensation_citation),
            "fit a sensor at the bank, and set the compensation",
        ),
        Some(own) if !wants && own < 0.0 => at.tell(
            Severity::Nonconforming,
            ("R11", "compensation-not-for-chemistry"),
            format!(
                "{} mV/K a cell; {} wants none: it is overcharged in the cold",
                digits(own * 1e3),
                chemistry.word()
            ),
            Some(usual.compensation_citation),
            "set the compensation to 0",
        ),
        Some(own) if wants => at.pass("R11", &format!("compensated by {} mV/K a cell", digits(own * 1e3))),
        _ => {}
    }
}

/// A bank's stated highest voltage against what a charger reaches in the cold (R3).
fn reaches(
    site: &Site,
    bank: &BankEntry,
    chemistry: Chemistry,
    part: &BankPart,
    charger: &Charger,
    at: &mut At<'_>,
) {
    let charging = charger.charging;
    let top = [charging.absorption, charging.equalise]
        .into_iter()
        .flatten()
        .map(|v| v.get::<volt>())
        .fold(f64::NEG_INFINITY, f64::max);
    if part.highest.is_none() || !top.is_finite() {
        return;
    }
    let cell = cell_set_points(chemistry);
    let (least, greatest) = cell.compensated_degC;
    let cold = temperatures(site, part).0.get::<degree_celsius>().max(least).min(greatest);
    let slope = charging.compensation.map_or(cell.compensation_V_per_K, |c| c.value);
    let reached = top + (slope * (cold - MILD_DEGC) * f64::from(bank.cells)).max(0.0);
    let highest = bank.highest.get::<volt>();
    // A tenth of a volt is the last digit of a setting.
    if reached > highest + 0.1 {
        at.nonconforming(
            ("R3", "highest-below-charging"),
            format!(
                "it reaches {} V at {} °C, and the bank's highest is stated as {} V: every part is held against too little",
                digits(reached),
                digits(cold),
                digits(highest)
            ),
            "state the highest voltage that charging reaches, cold, or lower the set points",
        );
    } else {
        at.pass(
            "R3",
            &format!("reaches {} V cold, at most {} V as stated", digits(reached), digits(highest)),
        );
    }
}
