//! What lies in the path of one circuit: its joints by name, its devices and switches as the crew works them.

use alloc::format;
use alloc::string::{String, ToString};
use alloc::vec::Vec;

use uom::si::electrical_resistance::ohm;
use uom::si::thermodynamic_temperature::degree_celsius;

use crate::cable::{Conductor, JointKind, joint_resistance, least_linear_resistance, linear_resistance};
use crate::error::Error;
use crate::quantity::{ElectricalResistance, Length, LinearResistance, ThermodynamicTemperature};
use crate::site::model::{CircuitEntry, Earthing, PartKind, Pole, Return};
use crate::site::offers::rated;
use crate::site::plan::{Fitted, Planned};
use crate::site::system::Site;

/// Like joints of one circuit.
#[derive(Clone, Debug)]
pub(super) struct PathJoint {
    /// Its kind, or the name of the device or part.
    pub name: String,
    pub kind: JointKind,
    pub count: u32,
    pub each: ElectricalResistance,
    pub stated: bool,
}

/// Poles that a device sits in.
pub(super) fn poles(site: &Site, circuit: &CircuitEntry, fitted: &Fitted) -> u32 {
    match fitted.entry.and_then(|e| circuit.devices.get(e)).map(|d| d.pole) {
        Some(Pole::Both) => 2,
        None if site.earthing == Earthing::Floating => 2,
        Some(Pole::Positive | Pole::Negative) | None => 1,
    }
}

pub(super) const fn joint_word(kind: JointKind) -> &'static str {
    match kind {
        JointKind::Lug => "lug",
        JointKind::Terminal => "terminal",
        JointKind::Switch => "switch",
        JointKind::Relay => "relay",
        JointKind::Fuse => "fuse",
        JointKind::Breaker => "breaker",
        JointKind::Shunt => "shunt",
        JointKind::Busbar => "busbar",
        JointKind::Connector => "connector",
    }
}

/// The joints that the plan counts in a circuit, one entry a kind or part.
pub(super) fn joints(site: &Site, circuit: &CircuitEntry, fitted: &[Fitted]) -> Vec<PathJoint> {
    let mut list = Vec::new();
    if circuit.joints.is_empty() {
        list.push(PathJoint {
            name: joint_word(JointKind::Lug).to_string(),
            kind: JointKind::Lug,
            count: 4,
            each: joint_resistance(JointKind::Lug),
            stated: false,
        });
    }
    for joint in circuit.joints.iter().filter(|j| j.count > 0) {
        list.push(PathJoint {
            name: joint_word(joint.kind).to_string(),
            kind: joint.kind,
            count: joint.count,
            each: joint.resistance.unwrap_or_else(|| joint_resistance(joint.kind)),
            stated: joint.resistance.is_some(),
        });
    }
    for part in &circuit.parts {
        list.push(PathJoint {
            name: part.name.clone(),
            kind: part.kind.joint(),
            count: 1,
            each: part.resistance.unwrap_or_else(|| rated(part.kind.joint(), part.rating)),
            stated: part.resistance.is_some(),
        });
    }
    for fitted in fitted {
        let device = fitted.guard.device;
        let kind = if device.family.data().is_fuse { JointKind::Fuse } else { JointKind::Breaker };
        list.push(PathJoint {
            name: fitted.name.clone(),
            kind,
            count: poles(site, circuit, fitted),
            each: rated(kind, Some(device.rating)),
            stated: false,
        });
    }
    list
}

/// Loop resistance of a circuit as it may be measured.
#[derive(Clone, Copy, Debug)]
pub(super) struct Loop {
    /// Conductors of full metal area at the least ambient, joints nothing.
    pub least: f64,
    /// Conductors at 20 °C with their joints.
    pub expected: f64,
    /// As designed: conductors at the temperature of the worst hour, at least 20 °C, with their joints.
    pub greatest: f64,
}

/// `None` where the return is not known or a conductor has no resistance in the tables.
pub(super) fn loop_of(site: &Site, circuit: &CircuitEntry, planned: &Planned) -> Option<Loop> {
    const REFERENCE: f64 = 20.0;
    let joints: f64 =
        joints(site, circuit, &planned.fitted).iter().map(|j| f64::from(j.count) * j.each.get::<ohm>()).sum();
    let conductors = |of: &dyn Fn(&Conductor) -> Result<LinearResistance, Error>| -> Option<f64> {
        let run = |conductor: &Conductor, length: Length| -> Option<f64> {
            let whole: ElectricalResistance = of(conductor).ok()? * length;
            Some(whole.get::<ohm>())
        };
        let back = match circuit.way_back {
            Return::Chassis(stated) => stated?.get::<ohm>(),
            Return::Conductor => run(&planned.negative, circuit.negative_length)?,
        };
        Some(run(&planned.positive, circuit.positive_length)? + back)
    };
    let at = ThermodynamicTemperature::new::<degree_celsius>;
    let hot = planned.judgement.temperature.get::<degree_celsius>().max(REFERENCE);
    let cold = site.ambient.0.get::<degree_celsius>().min(REFERENCE);
    Some(Loop {
        least: conductors(&|c| least_linear_resistance(c, at(cold)).map(|(r, _)| r))?,
        expected: conductors(&|c| linear_resistance(c, at(REFERENCE)))? + joints,
        greatest: conductors(&|c| linear_resistance(c, at(hot)))? + joints,
    })
}

/// What opens and closes a circuit.
#[derive(Clone, Debug, Default)]
pub(super) struct Gear {
    /// Switches, relays and breakers, by name.
    pub switches: Vec<String>,
    /// Fuses, by name: they are put in and taken out without current.
    pub fuses: Vec<String>,
}

impl Gear {
    pub fn of(circuit: &CircuitEntry, planned: &Planned) -> Self {
        let mut gear = Self::default();
        for fitted in &planned.fitted {
            let list =
                if fitted.guard.device.family.data().is_fuse { &mut gear.fuses } else { &mut gear.switches };
            list.push(fitted.name.clone());
        }
        let parts = circuit.parts.iter();
        for part in
            parts.filter(|p| matches!(p.kind, PartKind::Switch | PartKind::Selector | PartKind::Relay))
        {
            gear.switches.push(part.name.clone());
        }
        gear
    }

    pub fn is_empty(&self) -> bool {
        self.switches.is_empty() && self.fuses.is_empty()
    }

    /// `put in F1, then close bank switch`.
    pub fn closing(&self) -> String {
        match (self.fuses.is_empty(), self.switches.is_empty()) {
            (false, false) => {
                format!("put in {}, then close {}", self.fuses.join(", "), self.switches.join(", "))
            }
            (false, true) => format!("put in {}", self.fuses.join(", ")),
            (true, false) => format!("close {}", self.switches.join(", ")),
            (true, true) => "no device of its own".to_string(),
        }
    }

    /// `open bank switch, then take out F1 without current`.
    pub fn opening(&self) -> String {
        match (self.fuses.is_empty(), self.switches.is_empty()) {
            (false, false) => {
                format!("open {}, then take out {}", self.switches.join(", "), self.fuses.join(", "))
            }
            (false, true) => format!("take out {} without current", self.fuses.join(", ")),
            (true, false) => format!("open {}", self.switches.join(", ")),
            (true, true) => "no device of its own".to_string(),
        }
    }
}
