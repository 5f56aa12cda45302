//! A short site file, built from keys: one bank, one circuit with its device, one load, and what a test changes.

use std::fmt;

/// A site file whose keys can be replaced one by one.
///
/// Keys are given as lines of TOML joined by `; `, with texts in single quotes: `size = '10 AWG'; class = 2`.
/// A key that is given as `none` is taken out.
#[derive(Clone)]
pub struct Document(Vec<(&'static str, Vec<String>)>);

/// The sections that stand once; the others are lists.
const SINGLE: [&str; 3] = ["site", "weather", "rules.override"];

fn lines(keys: &str) -> Vec<String> {
    keys.split("; ").map(str::trim).filter(|line| !line.is_empty()).map(str::to_string).collect()
}

fn name(line: &str) -> &str {
    line.split(" = ").next().unwrap_or(line)
}

impl Document {
    /// One bank, one run of ordinary length, size and device under a rule set, and a load of 10 A.
    ///
    /// Every value the checks ask for is stated, so that no check fails and few are not made.
    pub fn run(rules: &str) -> Self {
        let (conductor, family) = match rules {
            "us" => {
                ("size = '10 AWG'; class = 2; insulation = 'PVC 75 degC'; installed = 'conduit'", "class T")
            }
            "iec" => ("size = '2.5 mm2'; insulation = 'PVC 70 degC'; installed = 'clipped'", "gG"),
            "craft_iso" => ("size = '2.5 mm2'; insulation = 'PVC 105 degC'", "class T"),
            _ => ("size = '10 AWG'; insulation = 'PVC 105 degC'", "class T"),
        };
        Self(Vec::new())
            .add(
                "site",
                &format!(
                    "name = 'pair'; rules = '{rules}'; earthing = 'negative'; ambient = ['20 degC', '30 degC']"
                ),
            )
            .add(
                "bank",
                "name = 'bank'; chemistry = 'agm'; nominal = '12 V'; capacity = '100 Ah'; cut_off = '10.5 V'; \
                 highest = '15 V'; internal_resistance = '5 mohm'",
            )
            .add("load", "name = 'load'; current = '10 A'; least = '1 V'; greatest = '100 V'")
            .add("circuit", &format!("name = 'run'; from = 'bank'; to = 'load'; one_way = '1 m'; {conductor}"))
            .add("circuit.device", &device(family, "20 A"))
    }

    /// As [`Document::run`], but from a board that a fuse of 30 A and a short feeder join to the bank.
    pub fn run_from_board(rules: &str) -> Self {
        let size = if rules.ends_with("us") { "10 AWG" } else { "6 mm2" };
        Self::run(rules)
            .with("circuit", "from = 'board'")
            .add("board", "name = 'board'; busbar = '100 A'")
            .add(
                "circuit",
                &format!(
                    "name = 'feeder'; from = 'bank'; to = 'board'; one_way = '0.5 m'; size = '{size}'; \
                     insulation = 'PVC 90 degC'"
                ),
            )
            .add("circuit.device", &device("class T", "30 A"))
    }

    /// Two banks and a board between them, each behind a fuse at its own end, 1 m of 50 mm² from each: as
    /// [`Document::run`] from the board, the second bank as the first but for these keys.
    pub fn two_banks(reserve: &str) -> Self {
        let conductor =
            "one_way = '0.5 m'; size = '50 mm2'; insulation = 'PVC 70 degC'; installed = 'clipped'";
        let fuse = device("gG", "63 A");
        let mut site = Self::run("iec").with("circuit", "from = 'board'");
        let bank = site.section("bank").clone();
        site.0.push(("reserve", bank));
        let mut site = site.with("reserve", "name = 'reserve'").with("reserve", reserve);
        for (header, _) in site.0.iter_mut().filter(|(header, _)| *header == "reserve") {
            *header = "bank";
        }
        site.add("board", "name = 'board'; busbar = '250 A'")
            .add("circuit", &format!("name = 'feeder'; from = 'bank'; to = 'board'; {conductor}"))
            .add("circuit.device", &fuse)
            .add("circuit", &format!("name = 'link'; from = 'board'; to = 'reserve'; {conductor}"))
            .add("circuit.device", &format!("{fuse}; end = 'to'"))
    }

    /// A whole plant whose wiring is left to the design: a bank, a charger, a load for an hour a day and one that stands.
    ///
    /// Every value that the checks of the plant ask for is stated.
    pub fn plant(rules: &str) -> Self {
        Self(Vec::new())
            .add(
                "site",
                &format!(
                    "name = 'pair'; rules = '{rules}'; earthing = 'negative'; ambient = ['20 degC', '30 degC']; \
                     autonomy = '1 d'; bonds = 1"
                ),
            )
            .add(
                "bank",
                "name = 'bank'; chemistry = 'agm'; nominal = '12 V'; capacity = '100 Ah'; cut_off = '10.5 V'; \
                 highest = '15 V'; internal_resistance = '5 mohm'; greatest_discharge = '50 A'; disconnect = '11.8 V'; \
                 reconnect = '12.9 V'; space = 'room'; air = '5 m3/h'; temperature = ['25 degC', '30 degC']",
            )
            .add(
                "generator",
                "name = 'charger'; kind = 'shore'; output = '15 A'; absorption = '14.4 V'; float = '13.6 V'; \
                 compensation = '0 mV/K'; sense = 'bank'; route = '1 m'",
            )
            .add(
                "load",
                "name = 'load'; current = '10 A'; hours = '1 h'; least = '1 V'; greatest = '100 V'; route = '1 m'",
            )
            .add(
                "load",
                "name = 'clock'; current = '10 mA'; standing = true; least = '1 V'; greatest = '100 V'; route = '1 m'",
            )
    }

    /// As [`Document::plant`], with an LFP bank of four cells: 13.8 to 14.4 V of absorption.
    pub fn lithium(rules: &str) -> Self {
        Self::plant(rules)
            .with(
                "bank",
                "chemistry = 'lfp'; nominal = '12.8 V'; disconnect = '12.6 V'; reconnect = '13.4 V'; air = none",
            )
            .with("generator", "absorption = '14.2 V'; float = '13.5 V'")
    }

    /// As [`Document::plant`], with an array in place of the charger: one string of so many modules behind a tracking
    /// controller that bears all of them.
    ///
    /// A module of 100 W: 22 V and 6 A at its ends, 18 V and 5.6 A at most power, −0.3 %/K of voltage, −0.4 %/K of power,
    /// NOCT 45 °C. From 20 to 30 °C of air: 22·(1 + 0.003·5) = 22.33 V cold; cells of 30 + 25/0.8 = 61.25 °C.
    pub fn array(rules: &str, series: u32, strings: u32) -> Self {
        Self::plant(rules)
            .without("generator")
            .add(
                "controller",
                "name = 'regulator'; kind = 'mppt'; greatest_input = '150 V'; input_current = '40 A'; start_margin = '1 V'; \
                 output = '20 A'; idle = '0.1 W'; absorption = '14.4 V'; float = '13.6 V'; compensation = '0 mV/K'; \
                 sense = 'bank'; route = '1 m'",
            )
            .add(
                "array",
                &format!(
                    "name = 'array'; power = '100 W'; voc = '22 V'; isc = '6 A'; vmp = '18 V'; imp = '5.6 A'; \
                     voc_coefficient = '-0.3 %/K'; isc_coefficient = '0.05 %/K'; power_coefficient = '-0.4 %/K'; noct = '45 degC'; \
                     series_fuse = '15 A'; greatest_voltage = '600 V'; series = {series}; strings = {strings}; \
                     controller = 'regulator'; isolator = '150 V'; isolator_current = '40 A'; load_break = true; \
                     route = '2 m'"
                ),
            )
    }

    fn section(&mut self, header: &str) -> &mut Vec<String> {
        self.0
            .iter_mut()
            .find(|(own, _)| *own == header)
            .map_or_else(|| panic!("no section {header}"), |(_, section)| section)
    }

    /// Adds a section with these keys behind the others; what belongs to a circuit follows its circuit.
    pub fn add(mut self, header: &'static str, keys: &str) -> Self {
        self.0.push((header, lines(keys)));
        self
    }

    /// Replaces, adds or takes out keys of the first section of this name.
    pub fn with(mut self, header: &str, keys: &str) -> Self {
        let section = self.section(header);
        for line in lines(keys) {
            let place = section.iter().position(|own| name(own) == name(&line));
            match (place, line.ends_with(" = none")) {
                (Some(place), true) => drop(section.remove(place)),
                (Some(place), false) => section[place] = line,
                (None, true) => panic!("{header} has no {line}"),
                (None, false) => section.push(line),
            }
        }
        self
    }

    /// Takes out the sections of this name.
    pub fn without(mut self, header: &str) -> Self {
        self.0.retain(|(own, _)| *own != header);
        self
    }

    /// The rule set's word.
    pub fn rules(&self) -> &str {
        let site = self.0.iter().find(|(header, _)| *header == "site").map(|(_, lines)| lines);
        let line = site.and_then(|lines| lines.iter().find(|line| name(line) == "rules"));
        line.and_then(|line| line.split('\'').nth(1)).unwrap_or("")
    }
}

/// Keys of a device with all that its checks ask for.
pub fn device(family: &str, rating: &str) -> String {
    format!(
        "family = '{family}'; rating = '{rating}'; dc_voltage = '125 V'; breaking = '20 kA'; \
         from_source = '100 mm'"
    )
}

impl fmt::Display for Document {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        writeln!(f, "format = 1")?;
        for (header, lines) in &self.0 {
            if SINGLE.contains(header) {
                writeln!(f, "\n[{header}]")?;
            } else {
                writeln!(f, "\n[[{header}]]")?;
            }
            for line in lines {
                writeln!(f, "{line}")?;
            }
        }
        Ok(())
    }
}
