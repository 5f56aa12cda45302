//! The README shows what the programs print, and calls that are tested where they stand.

use ampwright::site::{Problems, Report, inspect, read};

use crate::{compare_committed, text};

/// What is printed of a site file; `LATER against EARLIER` compares two, `SITE as JSON` writes JSON.
fn report(site: &str) -> String {
    let inspected = |site: &str| {
        let report = |text: &str| -> Result<Report, Problems> { inspect(&read(text)?) };
        report(&text(&format!("core/examples/sites/{site}"))).unwrap_or_else(|e| panic!("{site}: {e}"))
    };
    match (site.split_once(" against "), site.strip_suffix(" as JSON")) {
        (Some((later, earlier)), _) => inspected(later).compare(&inspected(earlier)).to_string(),
        (None, Some(site)) => inspected(site).to_json(),
        (None, None) => inspected(site).to_string(),
    }
}

/// `<!-- printed: SITE, from "LINE", COUNT lines -->` as its parts.
fn marker(line: &str) -> Option<(&str, &str, usize)> {
    let inner = line.strip_prefix("<!-- printed: ")?.strip_suffix(" lines -->")?;
    let (site, rest) = inner.split_once(", from \"")?;
    let (start, count) = rest.split_once("\", ")?;
    Some((site, start, count.parse().ok()?))
}

/// The README with the block after each marker filled from the report as it is printed now.
fn filled(readme: &str) -> (String, usize) {
    let (mut lines, mut blocks) = (Vec::new(), 0);
    let mut rest = readme.lines();
    while let Some(line) = rest.next() {
        lines.push(line.to_owned());
        let Some((site, start, count)) = marker(line) else { continue };
        assert_eq!(rest.next(), Some("```text"), "a block follows the marker {line}");
        assert!(rest.by_ref().any(|l| l == "```"), "the block after {line} ends");
        let report = report(site);
        let shown: Vec<_> = report.lines().skip_while(|l| !l.starts_with(start)).take(count).collect();
        assert_eq!(shown.len(), count, "{site} prints so many lines from \"{start}\"");
        lines.push("```text".to_owned());
        lines.extend(shown.into_iter().map(|l| l.trim_end().to_owned()));
        lines.push("```".to_owned());
        blocks += 1;
    }
    (lines.join("\n") + "\n", blocks)
}

#[test]
fn the_readme_shows_what_is_printed() {
    let (readme, blocks) = filled(&text("README.md"));
    assert_eq!(
        blocks,
        readme.matches("<!-- printed:").count(),
        "a marker has another form than this test reads"
    );
    assert!(blocks >= 2, "both demo sites are shown");
    compare_committed("README.md", &readme);
}

#[test]
fn calls_in_other_languages_stand_where_they_are_tested() {
    let readme = text("README.md");
    for (language, tested) in
        [("c", "bindings-c/examples/voltage_drop.c"), ("python", "bindings-py/python/ampwright/arrays.py")]
    {
        let tested = text(tested);
        let block = readme.split_once(&format!("```{language}\n")).and_then(|(_, b)| b.split_once("```"));
        let (block, _) = block.unwrap_or_else(|| panic!("no block of {language}"));
        for line in block.lines() {
            assert!(tested.contains(line.trim()), "{language}: not tested: {line}");
        }
    }
}
