//! Whatever the text, the reader ends with a site or with orderly problems.

use alloc::string::{String, ToString};
use alloc::vec::Vec;

use proptest::prelude::*;

use super::{VALID, read, read_bytes};

/// What every refusal owes its reader, whatever the text was.
fn is_orderly(text: &str) -> Result<(), TestCaseError> {
    let Err(problems) = read(text) else { return Ok(()) };
    prop_assert!(!problems.0.is_empty() && problems.0.len() <= 200);
    let lines = u32::try_from(text.matches('\n').count()).unwrap() + 1;
    for pair in problems.0.windows(2) {
        prop_assert!(pair[0].line <= pair[1].line, "{}", problems);
    }
    for problem in &problems.0 {
        prop_assert!(problem.line <= lines, "{problem}");
        // Without a line are only those of the whole file: what is not there has no line.
        let is_whole = ["there is no ", "the file ", "key 'format' is missing"];
        let has_place = problem.line > 0 || is_whole.iter().any(|begin| problem.text.starts_with(begin));
        prop_assert!(has_place, "{problem}");
        let printed = problem.to_string();
        prop_assert!(printed.len() < 1000 && !printed.chars().any(char::is_control), "{printed:?}");
    }
    Ok(())
}

/// Pieces that a text of this kind is made of.
const PIECES: [&str; 64] = [
    "[",
    "]",
    "[[",
    "]]",
    "{",
    "}",
    "=",
    ".",
    ",",
    "\"",
    "'",
    "\"\"\"",
    "'''",
    "\n",
    "\r\n",
    "\r",
    " ",
    "#",
    "\\",
    "circuit",
    "device",
    "load",
    "site",
    "name",
    "from",
    "to",
    "rules",
    "override",
    "1",
    "1e400",
    "nan",
    "\"5 A\"",
    "\u{0}",
    "é",
    "[[circuit]]\n",
    "[[circuit.device]]\n",
    "name = \"a\"\n",
    "format = 1\n",
    "[weather]\n",
    "[[bank]]\n",
    "[[array]]\n",
    "[[controller]]\n",
    "[[generator]]\n",
    "[[converter]]\n",
    "[[board]]\n",
    "[[inverter]]\n",
    "[[load]]\n",
    "[[reading]]\n",
    "[[stock.battery]]\n",
    "[[stock.module]]\n",
    "[[stock.controller]]\n",
    "[[stock.inverter]]\n",
    "name = \"b\"\n",
    "from = \"a\"\n",
    "to = \"b\"\n",
    "route = \"1 m\"\n",
    "battery = \"a\"\n",
    "controller = \"b\"\n",
    "units = 5\n",
    "series = 2\n",
    "nominal = \"24 V\"\n",
    "unit = \"1e-300 V\"\n",
    "at = [\"18:00-23:00\"]\n",
    "ac = true\n",
];

proptest! {
    #[test]
    fn random_text_never_panics(text in ".{0,400}") {
        is_orderly(&text)?;
    }

    #[test]
    fn random_bytes_never_panic(bytes in prop::collection::vec(any::<u8>(), 0..400)) {
        let _ = read_bytes(&bytes);
        is_orderly(&String::from_utf8_lossy(&bytes))?;
    }

    #[test]
    fn pieces_of_the_syntax_never_panic(
        pieces in prop::collection::vec(prop::sample::select(&PIECES[..]), 0..60)
    ) {
        is_orderly(&pieces.concat())?;
    }

    #[test]
    fn a_cut_document_never_panics(at in 0..VALID.len()) {
        is_orderly(&VALID[..at])?;
        is_orderly(&VALID[at..])?;
    }

    #[test]
    fn a_changed_document_never_panics(
        changes in prop::collection::vec((0..VALID.len(), any::<char>(), 0..3_u8), 1..6)
    ) {
        let mut text: Vec<char> = VALID.chars().collect();
        for (at, c, how) in changes {
            let at = at.min(text.len() - 1);
            match how {
                0 => text[at] = c,
                1 => text.insert(at, c),
                _ => { text.remove(at); }
            }
        }
        is_orderly(&text.into_iter().collect::<String>())?;
    }

    /// Sections of the whole document, some taken out, some doubled, in any order.
    #[test]
    fn shuffled_sections_never_panic(order in prop::collection::vec(0..VALID.matches("\n[").count(), 0..60)) {
        let sections: Vec<&str> = VALID.split("\n\n").collect();
        let shuffled: Vec<&str> =
            order.into_iter().filter_map(|at| sections.get(at)).flat_map(|section| [section, "\n\n"]).collect();
        is_orderly(&shuffled.concat())?;
    }

    /// Every value of the whole document against every other: numbers, units, words and names in the wrong place.
    #[test]
    fn swapped_values_never_panic(
        swaps in prop::collection::vec((0..VALID.lines().count(), 0..VALID.lines().count()), 1..30)
    ) {
        let mut lines: Vec<String> = VALID.lines().map(ToString::to_string).collect();
        for (one, other) in swaps {
            let pair = |at: usize| VALID.lines().nth(at).and_then(|line| line.split_once(" = "));
            if let (Some((key, _)), Some((_, value))) = (pair(one), pair(other)) {
                lines[one] = [key, " = ", value].concat();
            }
        }
        is_orderly(&lines.join("\n"))?;
    }

    /// Any figures of a bank and of an array, however far apart.
    #[test]
    fn any_figures_never_panic(
        numbers in prop::collection::vec(prop::option::of(0_u32..100_001), 6),
        volts in prop::collection::vec(prop::option::of(-2.0..3.0_f64), 4),
    ) {
        let volts: Vec<Option<String>> =
            volts.into_iter().map(|power| power.map(|power| libm::pow(10.0, power).to_string())).collect();
        let mut text = String::from("format = 1\n[[bank]]\nname = \"a\"\nchemistry = \"lfp\"\n");
        let with_unit = [("nominal", "V"), ("unit", "V"), ("capacity", "Ah"), ("unit_capacity", "Ah")];
        for ((key, unit), value) in with_unit.iter().zip(&volts) {
            if let Some(value) = value {
                text.extend([key, " = \"", value.as_str(), " ", unit, "\"\n"]);
            }
        }
        for (at, key) in ["units", "series", "strings", "modules", "series", "strings"].iter().enumerate() {
            if at == 3 {
                text += "[[array]]\nname = \"b\"\n";
            }
            if let Some(number) = numbers[at] {
                text.extend([key, " = ", number.to_string().as_str(), "\n"]);
            }
        }
        is_orderly(&text)?;
    }

    #[test]
    fn shuffled_lines_never_panic(order in prop::collection::vec(0..VALID.lines().count(), 0..80)) {
        let lines: Vec<&str> = VALID.lines().collect();
        let shuffled: Vec<&str> = order.into_iter().flat_map(|at| [lines[at], "\n"]).collect();
        is_orderly(&shuffled.concat())?;
    }
}
