//! `core/reference.md`: every calculation of the catalogue on one page.

use std::fmt::Write;

use crate::{catalogue, committed};

#[test]
fn the_reference_page_is_current() {
    committed("core/reference.md", &page());
}

fn page() -> String {
    let mut page = String::from(
        "<!-- Made by `tests/run regenerate` from the catalogue; edits here are lost. -->\n\n# Calculations\n\n\
         Every calculation that all faces offer: name, inputs with unit, range and default, outputs, formula, source.\n\
         In Python, C and spreadsheets a plain number carries its unit in its name: `one_way_m`.\n\n",
    );
    for entry in catalogue() {
        writeln!(page, "- [`{0}`](#{0}): {1}", entry.name, entry.summary).unwrap();
    }
    for entry in catalogue() {
        writeln!(page, "\n## {}\n\n{}\n", entry.name, entry.summary).unwrap();
        page.push_str("| input | unit | valid | default | |\n| --- | --- | --- | --- | --- |\n");
        for input in entry.inputs {
            let name = suffixed(input.name, input.suffix);
            let default = input.default.map_or(String::new(), |value| value.to_string());
            let words = if input.choices.is_empty() {
                String::new()
            } else {
                format!(" In the order of the codes: {}.", input.choices.join(", "))
            };
            writeln!(
                page,
                "| `{name}` | {} | {} | {default} | {}{words} |",
                input.unit, input.range, input.doc
            )
            .unwrap();
        }
        page.push_str("\n| output | unit | |\n| --- | --- | --- |\n");
        for output in entry.outputs {
            let name = suffixed(output.name, output.suffix);
            writeln!(page, "| `{name}` | {} | {} |", output.unit, output.doc).unwrap();
        }
        for condition in entry.conditions {
            writeln!(page, "\nRefused unless `{condition}`.").unwrap();
        }
        if let Some(refusal) = entry.refusal {
            writeln!(page, "\nRefused where {refusal}.").unwrap();
        }
        writeln!(page, "\nFormula: {}\n\nSource: {}", entry.formula, entry.source).unwrap();
    }
    page
}

fn suffixed(name: &str, suffix: &str) -> String {
    if suffix.is_empty() { name.to_owned() } else { format!("{name}_{suffix}") }
}
