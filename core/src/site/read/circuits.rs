//! Circuits with their devices, joints and parts.

use alloc::borrow::ToOwned;
use alloc::collections::BTreeSet;
use alloc::format;
use alloc::string::String;
use alloc::vec::Vec;

use toml::de::DeValue;

use super::entry::{Entry, Found};
use super::keys::{
    AC_ONLY, AMBIENT, BREAKING, BUNDLED, CIRCUIT, CIRCUIT_DEVICE, CIRCUIT_JOINT, CIRCUIT_PART, CLASS,
    CLASS_NUMBERS, COATING, COATING_WORDS, COUNT, CRANKING, CURRENT, DC_VOLTAGE, DEVICE, DIVERSITY, DROP,
    END, END_WORDS, FAMILY, FROM, FROM_LUG, FROM_SOURCE, FULL_RATED, INSTALLED, INSTALLED_WORDS, INSULATION,
    JOINT, JOINT_KIND, JOINT_WORDS, LET_THROUGH_KEY, MATERIAL, MATERIAL_WORDS, MOVING, NAME, NEGATIVE_LENGTH,
    NEGATIVE_SIZE, ONE_WAY, PART_KEY, PART_KIND, PART_WORDS, POLARISED, POLE, POLE_VOLTAGE, POLE_WORDS,
    POLES, POSITIVE_LENGTH, RATING, RESISTANCE, RETURN, RETURN_RESISTANCE, RETURN_WORDS, SHEATHED, SIZE,
    SPACE, SPACE_WORDS, TERMINAL, TERMINAL_RANGE, TO, TO_LUG,
};
use super::log::Log;
use crate::cable::{Class, Coating, Material};
use crate::device::{Polarity, Supply};
use crate::quantity::{ConductorSize, ElectricPotential, Length};
use crate::rules::Space;
use crate::site::model::{CircuitEntry, DeviceEntry, End, JointEntry, Part, Pole, Return};

/// Reads circuits in file order; devices without a name are numbered through the file.
pub(super) struct Circuits<'d> {
    text: &'d str,
    /// Device names that the file states.
    taken: BTreeSet<&'d str>,
    numbered: u32,
}

impl<'d> Circuits<'d> {
    pub(super) fn new(text: &'d str, circuits: &[Found<'d>]) -> Self {
        let devices = circuits.iter().filter_map(|found| found.table.get(DEVICE.name)?.get_ref().as_array());
        let taken = devices
            .flat_map(|list| list.iter())
            .filter_map(|device| device.get_ref().as_table()?.get(NAME.name)?.get_ref().as_str())
            .collect();
        Self { text, taken, numbered: 0 }
    }

    pub(super) fn circuit(&mut self, log: &mut Log, found: Found<'d>) -> Option<CircuitEntry> {
        let entry = &mut Entry::open(self.text, log, &CIRCUIT, found, None);
        let name = entry.name();
        let from = entry.text(&FROM);
        let to = entry.text(&TO);
        let lengths = lengths(entry);
        let size = entry.parsed(&SIZE);
        let negative_size = entry.parsed(&NEGATIVE_SIZE);
        let (material, class, coating) = metal(entry);
        let insulation = entry.parsed(&INSULATION);
        let sheathed = entry.flag(&SHEATHED, false);
        let installed = entry.word(&INSTALLED, INSTALLED_WORDS);
        let space = entry.word(&SPACE, SPACE_WORDS).unwrap_or(Space::Ordinary);
        let bundled = entry.count(&BUNDLED).and_then(|count| u16::try_from(count).ok()).unwrap_or(2);
        let ambient = entry.quantity(&AMBIENT);
        let moving = entry.flag(&MOVING, false);
        let cranking = entry.flag(&CRANKING, false);
        let way_back = way_back(entry);
        let current = entry.quantity(&CURRENT);
        let diversity = entry.number(&DIVERSITY).unwrap_or(1.0);
        let drop = entry.quantity(&DROP);
        let terminal = entry.quantity(&TERMINAL);
        let from_lug = entry.parsed(&FROM_LUG);
        let to_lug = entry.parsed(&TO_LUG);
        let joints = entry.sections(&JOINT, &CIRCUIT_JOINT);
        let parts = entry.sections(&PART_KEY, &CIRCUIT_PART);
        let (no_device, devices) = devices(entry);
        let line = entry.line();

        // Their places name the circuit they belong to.
        let of = found.table.get(NAME.name).and_then(|value| value.get_ref().as_str());
        let devices: Vec<_> =
            devices.into_iter().map(|device| self.device(log, device, of, lengths)).collect();
        let joints: Vec<_> = joints
            .into_iter()
            .map(|found| joint(&mut Entry::open(self.text, log, &CIRCUIT_JOINT, found, of)))
            .collect();
        let parts: Vec<_> = parts
            .into_iter()
            .map(|found| part(&mut Entry::open(self.text, log, &CIRCUIT_PART, found, of)))
            .collect();
        let (positive_length, negative_length) = lengths?;
        Some(CircuitEntry {
            name: name?,
            line,
            from: from?.to_owned(),
            to: to?.to_owned(),
            positive_length,
            negative_length,
            size,
            negative_size,
            material,
            class,
            coating,
            insulation,
            sheathed,
            installed,
            space,
            bundled,
            ambient,
            moving,
            cranking,
            way_back,
            current,
            diversity,
            drop,
            terminal,
            from_lug,
            to_lug,
            devices: devices.into_iter().collect::<Option<_>>()?,
            joints: joints.into_iter().collect::<Option<_>>()?,
            parts: parts.into_iter().collect::<Option<_>>()?,
            no_device,
        })
    }

    fn device(
        &mut self,
        log: &mut Log,
        found: Found<'d>,
        of: Option<&str>,
        lengths: Option<(Length, Length)>,
    ) -> Option<DeviceEntry> {
        let entry = &mut Entry::open(self.text, log, &CIRCUIT_DEVICE, found, of);
        let name = if entry.has(&NAME) { entry.name() } else { Some(self.next_name()) };
        let family = entry.parsed(&FAMILY);
        let rating = entry.quantity(&RATING);
        let supply = device_supply(entry);
        let breaking = entry.quantity(&BREAKING);
        let polarity = polarity(entry);
        let full_rated = entry.flag(&FULL_RATED, false);
        let pole = entry.word(&POLE, POLE_WORDS).unwrap_or(Pole::Positive);
        let end = entry.word(&END, END_WORDS).unwrap_or(End::From);
        let from_source: Option<Length> = entry.quantity(&FROM_SOURCE);
        let let_through = entry.let_through_A2s(&LET_THROUGH_KEY);
        let terminal_range = terminal_range(entry);
        let terminal = entry.quantity(&TERMINAL);

        let run =
            lengths.map(|(positive, negative)| if pole == Pole::Negative { negative } else { positive });
        if let (Some(distance), Some(run)) = (from_source, run)
            && distance > run
        {
            let sentence = format!(
                "{} is longer than the conductor it sits in; state the conductor between the source and the device",
                entry.written(&FROM_SOURCE)
            );
            entry.problem(&FROM_SOURCE, sentence);
        }
        Some(DeviceEntry {
            name: name?,
            line: entry.line(),
            family,
            rating,
            supply,
            breaking,
            polarity,
            full_rated,
            pole,
            end,
            from_source,
            let_through_A2s: let_through,
            terminal_range,
            terminal,
        })
    }

    /// The next of F1, F2 … that the file does not state itself.
    fn next_name(&mut self) -> String {
        loop {
            self.numbered = self.numbered.saturating_add(1);
            let name = format!("F{}", self.numbered);
            if !self.taken.contains(name.as_str()) {
                return name;
            }
        }
    }
}

/// Positive and negative conductor.
fn lengths(entry: &mut Entry<'_, '_>) -> Option<(Length, Length)> {
    let one_way: Option<Length> = entry.quantity(&ONE_WAY);
    let positive: Option<Length> = entry.quantity(&POSITIVE_LENGTH);
    let negative: Option<Length> = entry.quantity(&NEGATIVE_LENGTH);
    match (entry.has(&ONE_WAY), entry.has(&POSITIVE_LENGTH), entry.has(&NEGATIVE_LENGTH)) {
        (true, false, false) => return one_way.map(|length| (length, length)),
        (false, true, true) => return positive.zip(negative),
        (true, _, _) => {
            let key = if entry.has(&POSITIVE_LENGTH) { &POSITIVE_LENGTH } else { &NEGATIVE_LENGTH };
            entry.problem(
                key,
                "one_way is stated too; state the route once, or both conductors, not both ways".to_owned(),
            );
        }
        (false, true, false) => entry.missing(&NEGATIVE_LENGTH),
        (false, false, true) => entry.missing(&POSITIVE_LENGTH),
        (false, false, false) => {
            if !entry.is_excused(&[&ONE_WAY, &POSITIVE_LENGTH, &NEGATIVE_LENGTH]) {
                entry.missing(&ONE_WAY);
            }
        }
    }
    None
}

/// Metal, stranding and coating of a conductor, as far as they are stated.
pub(super) fn metal(entry: &mut Entry<'_, '_>) -> (Option<Material>, Option<Class>, Option<Coating>) {
    (entry.word(&MATERIAL, MATERIAL_WORDS), class(entry), entry.word(&COATING, COATING_WORDS))
}

fn class(entry: &mut Entry<'_, '_>) -> Option<Class> {
    let number = entry.count(&CLASS)?;
    let class = CLASS_NUMBERS.iter().find(|&&(known, _)| known == number).map(|&(_, class)| class);
    if class.is_none() {
        let sentence = format!("there is no class {number}; it must be 1, 2, 5 or 6 (IEC 60228)");
        entry.problem(&CLASS, sentence);
    }
    class
}

fn way_back(entry: &mut Entry<'_, '_>) -> Return {
    let resistance = entry.quantity(&RETURN_RESISTANCE);
    let is_chassis = entry.word(&RETURN, RETURN_WORDS).unwrap_or(false);
    if is_chassis {
        for key in [&NEGATIVE_LENGTH, &NEGATIVE_SIZE] {
            if entry.has(key) {
                let sentence = "the way back is the chassis: there is no negative conductor; take this out, and \
                                state one_way";
                entry.problem(key, sentence.to_owned());
            }
        }
        return Return::Chassis(resistance);
    }
    if resistance.is_some() {
        entry.problem(
            &RETURN_RESISTANCE,
            "the way back is a conductor, whose resistance is computed; write return = \"chassis\", or take it out"
                .to_owned(),
        );
    }
    Return::Conductor
}

/// `device = "none"`, or the sections of the devices.
fn devices<'d>(entry: &mut Entry<'d, '_>) -> (bool, Vec<Found<'d>>) {
    let Some(value) = entry.value(&DEVICE) else { return (false, Vec::new()) };
    if let DeValue::String(word) = value.get_ref() {
        if word != "none" {
            let sentence = format!(
                "{} is not known here; write device = \"none\", or a section [[circuit.device]] with the family",
                entry.written(&DEVICE)
            );
            entry.problem(&DEVICE, sentence);
        }
        return (true, Vec::new());
    }
    (false, entry.sections(&DEVICE, &CIRCUIT_DEVICE))
}

/// What supply a device is rated for: as a part is, or by the pole.
pub(super) fn device_supply(entry: &mut Entry<'_, '_>) -> Supply {
    let whole = supply(entry);
    let each: Option<ElectricPotential> = entry.quantity(&POLE_VOLTAGE);
    let poles = entry.count(&POLES);
    match (each, poles) {
        (None, None) => whole,
        (Some(each), Some(poles)) if whole == Supply::NotStated => {
            // The range of the key ends at 4.
            Supply::PerPole(each, u8::try_from(poles).unwrap_or(1))
        }
        (Some(_), Some(_)) => {
            let sentence =
                "pole_voltage stands beside dc_voltage or ac_only; keep the one on the label".to_owned();
            entry.problem(&POLE_VOLTAGE, sentence);
            Supply::NotStated
        }
        (Some(_), None) => {
            // A value that was refused has its problem already.
            if !entry.has(&POLES) {
                entry.problem(
                    &POLE_VOLTAGE,
                    "pole_voltage needs poles beside it, such as poles = 2".to_owned(),
                );
            }
            Supply::NotStated
        }
        (None, Some(_)) => {
            if !entry.has(&POLE_VOLTAGE) {
                let sentence =
                    "poles needs pole_voltage beside it, such as pole_voltage = \"60 V\"".to_owned();
                entry.problem(&POLES, sentence);
            }
            whole
        }
    }
}

/// What supply a device or part is rated for.
pub(super) fn supply(entry: &mut Entry<'_, '_>) -> Supply {
    let voltage = entry.quantity(&DC_VOLTAGE);
    let ac_only = entry.flag(&AC_ONLY, false);
    match voltage {
        Some(_) if ac_only => {
            let sentence = format!(
                "ac_only = true contradicts dc_voltage {}; keep the one on the label",
                entry.written(&DC_VOLTAGE)
            );
            entry.problem(&AC_ONLY, sentence);
            Supply::NotStated
        }
        Some(voltage) => Supply::Dc(voltage),
        None if ac_only => Supply::AcOnly,
        None => Supply::NotStated,
    }
}

pub(super) fn polarity(entry: &mut Entry<'_, '_>) -> Polarity {
    if entry.flag(&POLARISED, false) { Polarity::Marked } else { Polarity::None }
}

pub(super) fn terminal_range(entry: &mut Entry<'_, '_>) -> Option<(ConductorSize, ConductorSize)> {
    let (least, greatest): (ConductorSize, ConductorSize) = entry.two_parsed(&TERMINAL_RANGE)?;
    if least.area() > greatest.area() {
        entry.problem(
            &TERMINAL_RANGE,
            format!("{least} is larger than {greatest}; write the smaller size first"),
        );
        return None;
    }
    Some((least, greatest))
}

fn joint(entry: &mut Entry<'_, '_>) -> Option<JointEntry> {
    let kind = entry.word(&JOINT_KIND, JOINT_WORDS);
    let count = entry.count(&COUNT).unwrap_or(1);
    let resistance = entry.quantity(&RESISTANCE);
    Some(JointEntry { kind: kind?, count, resistance })
}

fn part(entry: &mut Entry<'_, '_>) -> Option<Part> {
    let name = entry.name();
    let kind = entry.word(&PART_KIND, PART_WORDS);
    let rating = entry.quantity(&RATING);
    let resistance = entry.quantity(&RESISTANCE);
    let supply = supply(entry);
    Some(Part { name: name?, line: entry.line(), kind: kind?, rating, resistance, supply })
}
