//! What can be had for a site: from its stock, else standard sizes and plain generic parts.

use alloc::format;
use alloc::string::ToString;
use alloc::vec::Vec;

use uom::si::electric_current::ampere;
use uom::si::electrical_resistance::ohm;
use uom::si::thermodynamic_temperature::degree_celsius;

use super::model::{CircuitEntry, DeviceEntry, Earthing, Pole};
use super::plan::{Draft, Fitted};
use super::read::Problem;
use super::system::Site;
use crate::cable::{
    Class, Coating, Conductor, JointKind, Material, joint_resistance, rated_joint_resistance,
};
use crate::circuit::{Judgement, Outcome, Run, device_need, judge};
use crate::device::{Device, Family, Polarity, Supply};
use crate::protection::{Guard, Offer, choose};
use crate::quantity::{ConductorSize, ElectricCurrent, ElectricalResistance};

/// A stated device, if family and rating are stated.
pub(super) fn complete(stated: &DeviceEntry) -> Option<Guard> {
    let (family, rating) = stated.family.zip(stated.rating)?;
    Some(Guard {
        device: Device {
            family,
            rating,
            // With poles in both conductors, a fault to earth leaves only one conductor's in series.
            supply: match stated.supply.voltage(true) {
                Some(half) if stated.pole == Pole::Both => Supply::Dc(half),
                _ => stated.supply,
            },
            breaking: stated.breaking,
            polarity: stated.polarity,
            full_rated: stated.full_rated,
        },
        let_through_A2s: stated.let_through_A2s,
        terminal_range: stated.terminal_range,
        terminal_degC: stated.terminal.map(|t| t.get::<degree_celsius>()),
    })
}

/// What can be had: from the stock, else standard sizes and plain generic parts.
pub(super) struct Offers {
    /// Conductors, smallest first, and whether they come in a sheath.
    sizes: Vec<(Conductor, bool)>,
    devices: Vec<OwnedOffer>,
    generic_devices: bool,
    generic_cables: bool,
}

struct OwnedOffer {
    family: Family,
    ratings_A: Vec<f64>,
    supply: Supply,
    breaking: Option<ElectricCurrent>,
    polarity: Polarity,
    full_rated: bool,
    let_through_A2s: Option<f64>,
    terminal_range: Option<(ConductorSize, ConductorSize)>,
    terminal_degC: Option<f64>,
}

impl Offers {
    pub fn new(site: &Site) -> Self {
        let mut sizes: Vec<(Conductor, bool)> = site
            .stock
            .cables
            .iter()
            .map(|c| {
                let conductor = Conductor {
                    size: c.size,
                    material: c.material,
                    class: c.class,
                    coating: c.coating,
                    insulation: c.insulation,
                };
                (conductor, c.sheathed)
            })
            .collect();
        let generic_cables = sizes.is_empty();
        if generic_cables {
            // A plain part is bought in a sheath where the circuit asks for one.
            let insulation = site.rules.usual_insulation();
            let plain = |&size: &ConductorSize| (Conductor::flexible_copper(size, insulation), true);
            sizes = site.rules.sizes().iter().map(plain).collect();
        }
        sizes.sort_by(|a, b| a.0.size.area_mm2().total_cmp(&b.0.size.area_mm2()));
        let mut devices: Vec<OwnedOffer> = site
            .stock
            .devices
            .iter()
            .map(|d| {
                let mut ratings: Vec<f64> = d.ratings.iter().map(ElectricCurrent::get::<ampere>).collect();
                ratings.sort_by(f64::total_cmp);
                OwnedOffer {
                    family: d.family,
                    ratings_A: ratings,
                    supply: d.supply,
                    breaking: d.breaking,
                    polarity: d.polarity,
                    full_rated: d.full_rated,
                    let_through_A2s: d.let_through_A2s,
                    terminal_range: d.terminal_range,
                    terminal_degC: d.terminal.map(|t| t.get::<degree_celsius>()),
                }
            })
            .collect();
        let generic_devices = devices.is_empty();
        if generic_devices {
            devices = site
                .rules
                .usual_families()
                .iter()
                .map(|&family| OwnedOffer {
                    family,
                    ratings_A: Vec::new(),
                    supply: Supply::NotStated,
                    breaking: None,
                    polarity: Polarity::None,
                    full_rated: false,
                    let_through_A2s: None,
                    terminal_range: None,
                    terminal_degC: None,
                })
                .collect();
        }
        Self { sizes, devices, generic_devices, generic_cables }
    }

    /// A circuit's conductors: as stated, or the smallest on offer.
    pub fn draft(&self, site: &Site, circuit: &CircuitEntry) -> Result<Draft, Problem> {
        let stated = |size| Conductor {
            size,
            material: circuit.material.unwrap_or(Material::Copper),
            class: circuit.class.unwrap_or(Class::Flexible),
            coating: circuit.coating.unwrap_or(Coating::Plain),
            insulation: circuit.insulation.unwrap_or_else(|| site.rules.usual_insulation()),
        };
        let sizes = self.suiting(circuit);
        let (positive, negative, offered) = if let Some(size) = circuit.size {
            (stated(size), stated(circuit.negative_size.unwrap_or(size)), None)
        } else if let Some(first) = sizes.first() {
            (*first, *first, Some(0))
        } else {
            return Err(Problem {
                line: circuit.line,
                place: format!("[[circuit]] \"{}\"", circuit.name),
                text: "no conductor on offer is of the stated insulation, class, coating and material; add such a \
                       [[stock.cable]], or state size"
                    .to_string(),
            });
        };
        Ok(Draft { positive, negative, offered, sizes, joints: joints(site, circuit, &[]) })
    }

    /// Conductors on offer that are what a circuit states of its own, smallest first.
    fn suiting(&self, circuit: &CircuitEntry) -> Vec<Conductor> {
        if circuit.size.is_some() {
            return Vec::new();
        }
        let wanted = |c: &Conductor| Conductor {
            material: circuit.material.unwrap_or(c.material),
            class: circuit.class.unwrap_or(c.class),
            coating: circuit.coating.unwrap_or(c.coating),
            insulation: circuit.insulation.unwrap_or(c.insulation),
            ..*c
        };
        let sheathed = self.sizes.iter().filter(|(_, sheath)| *sheath || !circuit.sheathed).map(|(c, _)| c);
        if self.generic_cables {
            return sheathed.map(wanted).collect();
        }
        sheathed.filter(|c| wanted(c) == **c).copied().collect()
    }

    /// Whether devices are plain parts to be bought for their place, not ones on the shelf.
    pub fn specifies(&self) -> bool {
        self.generic_devices
    }

    /// The device that suits a run: the first offer, in the order of the stock, whose smallest sufficient rating
    /// fails no check; else the one that fails fewest. With the judgement of the run behind it.
    pub fn best(
        &self,
        run: &Run,
        draft: &Draft,
        bare: &Judgement,
        stated: Option<&DeviceEntry>,
    ) -> Option<(Guard, Judgement)> {
        let mut fallback: Option<(usize, Guard, Judgement)> = None;
        // What is on the shelf of a stated family comes before the rest.
        let of_family = |o: &&OwnedOffer| stated.and_then(|s| s.family).is_none_or(|f| f == o.family);
        let shelf = self.devices.iter();
        for owned in shelf.clone().filter(of_family).chain(shelf.filter(|o| !of_family(o))) {
            let family = stated.and_then(|s| s.family).unwrap_or(owned.family);
            let fixed = stated.and_then(|s| s.rating).map(|r| [r.get::<ampere>()]);
            let fixed = fixed.as_ref().map(<[f64; 1]>::as_slice);
            let mut offer = Offer {
                family,
                ratings_A: fixed.unwrap_or(if family == owned.family { &owned.ratings_A } else { &[] }),
                supply: owned.supply,
                breaking: owned.breaking,
                polarity: owned.polarity,
                full_rated: owned.full_rated,
                let_through_A2s: owned.let_through_A2s,
                terminal_range: owned.terminal_range,
                terminal_degC: owned.terminal_degC,
            };
            if self.generic_devices {
                // A part to be bought is bought for its place: the requirement becomes the specification.
                offer.supply = Supply::Dc(run.highest);
                offer.breaking = run.greatest_fault;
            } else if family != owned.family {
                // Nothing on the shelf is of the stated family: only what the document says is known of it.
                offer = Offer {
                    supply: Supply::NotStated,
                    breaking: None,
                    polarity: Polarity::None,
                    full_rated: false,
                    let_through_A2s: None,
                    terminal_range: None,
                    terminal_degC: None,
                    ..offer
                };
            }
            if let Some(stated) = stated {
                offer.supply = if stated.supply == Supply::NotStated { offer.supply } else { stated.supply };
                offer.breaking = stated.breaking.or(offer.breaking);
                offer.terminal_range = stated.terminal_range.or(offer.terminal_range);
                offer.let_through_A2s = stated.let_through_A2s.or(offer.let_through_A2s);
                offer.full_rated |= stated.full_rated;
                if stated.polarity == Polarity::Marked {
                    offer.polarity = Polarity::Marked;
                }
            }
            let need = device_need(run, bare, family, offer.full_rated);
            let Ok(guard) =
                choose(&offer, |_| if fixed.is_some() { ElectricCurrent::default() } else { need })
            else {
                continue;
            };
            let Ok(judged) = judge(run, &draft.positive, &draft.negative, Some(&guard)) else { continue };
            let failures = judged.checks.iter().filter(|c| c.outcome == Outcome::Failed).count();
            if failures == 0 {
                return Some((guard, judged));
            }
            if fallback.as_ref().is_none_or(|(fewest, ..)| failures < *fewest) {
                fallback = Some((failures, guard, judged));
            }
        }
        fallback.map(|(_, guard, judged)| (guard, judged))
    }
}

/// All joints of a circuit: stated ones, else a lug at each of four conductor ends; its parts; its devices as fitted.
pub(super) fn joints(site: &Site, circuit: &CircuitEntry, fitted: &[Fitted]) -> ElectricalResistance {
    let mut sum = ElectricalResistance::new::<ohm>(0.0);
    if circuit.joints.is_empty() {
        sum += 4.0 * joint_resistance(JointKind::Lug);
    }
    for joint in &circuit.joints {
        sum += f64::from(joint.count) * joint.resistance.unwrap_or_else(|| joint_resistance(joint.kind));
    }
    for part in &circuit.parts {
        sum += part.resistance.unwrap_or_else(|| rated(part.kind.joint(), part.rating));
    }
    for fitted in fitted {
        let device = fitted.guard.device;
        // A device in both poles stands in the loop twice.
        let pole = fitted.entry.and_then(|e| circuit.devices.get(e)).map(|d| d.pole);
        let poles = match pole {
            Some(Pole::Both) => 2.0,
            None if site.earthing == Earthing::Floating => 2.0,
            Some(Pole::Positive | Pole::Negative) | None => 1.0,
        };
        let kind = if device.family.data().is_fuse { JointKind::Fuse } else { JointKind::Breaker };
        sum += poles * rated(kind, Some(device.rating));
    }
    sum
}

/// Generic resistance of a part, by its rating where that is known.
pub(super) fn rated(kind: JointKind, rating: Option<ElectricCurrent>) -> ElectricalResistance {
    rating
        .and_then(|rating| rated_joint_resistance(kind, rating).ok())
        .unwrap_or_else(|| joint_resistance(kind))
}
