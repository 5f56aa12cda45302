//! Every finding stands in the guide to the rules, with its rule and its severities, and nothing else does.

use std::collections::{BTreeMap, BTreeSet};

use proc_macro2::{Delimiter, TokenStream, TokenTree};

use crate::source::{group, ident, inside, is_punct, string_literals, tokens};
use crate::{rust_files, text};

const GUIDE: &str = "core/guide/rules.md";
const SITE: &str = "core/src/site/";
const CHECKS: &str = "core/src/site/check/";

/// Rule and severities of a finding.
type Kind = (String, BTreeSet<String>);
/// Kinds by slug.
type Kinds = BTreeMap<String, Kind>;

fn note(kinds: &mut Kinds, slug: &str, rule: &str, severity: &str) {
    let kind = kinds.entry(slug.to_owned()).or_insert_with(|| (rule.to_owned(), BTreeSet::new()));
    assert_eq!(kind.0, rule, "{slug} stands under two rules");
    kind.1.insert(severity.to_owned());
}

/// What a literal holds.
fn bare(literal: &str) -> String {
    literal.trim_matches('"').to_owned()
}

/// `Severity::Danger` as the guide writes it.
fn severity(tokens: &[TokenTree]) -> Option<String> {
    let at = tokens.iter().position(|t| ident(Some(t)).as_deref() == Some("Severity"))?;
    Some(ident(tokens.get(at + 3))?.replace("NotChecked", "Not checked"))
}

/// Every severity that an expression may be.
fn severities(tokens: &[TokenTree]) -> BTreeSet<String> {
    let mut all = BTreeSet::new();
    for (i, token) in tokens.iter().enumerate() {
        if ident(Some(token)).as_deref() == Some("Severity") {
            all.extend(ident(tokens.get(i + 3)).map(|s| s.replace("NotChecked", "Not checked")));
        }
        if let TokenTree::Group(inner) = token {
            all.extend(severities(&inside(inner)));
        }
    }
    all
}

/// The expression of `let severity = …;`, wherever it stands.
fn named_severity(tokens: &[TokenTree]) -> BTreeSet<String> {
    let mut all = BTreeSet::new();
    for (i, token) in tokens.iter().enumerate() {
        let named = ident(Some(token)).as_deref() == Some("severity") && is_punct(tokens.get(i + 1), '=');
        if named {
            let end = tokens.iter().skip(i).position(|t| is_punct(Some(t), ';')).unwrap_or(0);
            all.extend(severities(&tokens[i..i + end]));
        }
        if let TokenTree::Group(inner) = token {
            all.extend(named_severity(&inside(inner)));
        }
    }
    all
}

/// Findings of the plant's checks: `at.danger(("R13", "slug"), …)` and its like, and `at.tell(severity, ("R13", "slug"), …)`.
fn told(tokens: &[TokenTree], named: &BTreeSet<String>, kinds: &mut Kinds) {
    for (i, token) in tokens.iter().enumerate() {
        let TokenTree::Group(inner) = token else { continue };
        let inner = inside(inner);
        let arguments: Vec<&[TokenTree]> = inner.split(|t| is_punct(Some(t), ',')).collect();
        let pair = |at: usize| {
            let tuple = arguments.get(at).and_then(|a| group(a.first(), Delimiter::Parenthesis));
            let tuple: Vec<TokenTree> = tuple?.into_iter().collect();
            match string_literals(&tuple).as_slice() {
                [rule, slug] => Some((bare(rule), bare(slug))),
                // The slug comes from elsewhere, and is read there.
                _ => None,
            }
        };
        let own = |word: &str| BTreeSet::from([word.to_owned()]);
        let method = i.checked_sub(1).and_then(|before| ident(tokens.get(before)));
        let found = match method.as_deref() {
            Some("danger") => pair(0).map(|p| (p, own("Danger"))),
            // What an inverter suffices for: always the same severity.
            Some("one") => pair(1).map(|p| (p, own("Nonconforming"))),
            Some("nonconforming") => pair(0).map(|p| (p, own("Nonconforming"))),
            Some("advice") => pair(0).map(|p| (p, own("Advice"))),
            Some("unmade") => pair(0).map(|p| (p, own("Not checked"))),
            Some("tell") => {
                let graves = arguments.first().map(|a| severities(a)).unwrap_or_default();
                pair(1).map(|p| (p, if graves.is_empty() { named.clone() } else { graves }))
            }
            _ => None,
        };
        if let Some(((rule, slug), graves)) = found {
            assert!(!graves.is_empty(), "{slug} without a severity");
            for grave in graves {
                note(kinds, &slug, &rule, &grave);
            }
        }
        told(&inner, named, kinds);
    }
}

/// What a failed check of an array means: `("slug", Severity::…, "remedy")` in the function `meaning`.
fn meanings(tokens: &[TokenTree], rule: &str, kinds: &mut Kinds) {
    for token in tokens {
        let TokenTree::Group(inner) = token else { continue };
        let tuple = inside(inner);
        let literals = string_literals(&tuple);
        match (severity(&tuple), literals.as_slice()) {
            (Some(grave), [slug, _remedy]) if inner.delimiter() == Delimiter::Parenthesis => {
                note(kinds, &bare(slug), rule, &grave);
            }
            _ => meanings(&tuple, rule, kinds),
        }
    }
}

/// Arguments of every `found.add(…)`, however deep.
fn additions(tokens: &[TokenTree], found: &mut Vec<Vec<Vec<TokenTree>>>) {
    for (i, token) in tokens.iter().enumerate() {
        let TokenTree::Group(inner) = token else { continue };
        let inner = inside(inner);
        let called = i >= 3
            && ident(tokens.get(i - 3)).as_deref() == Some("found")
            && is_punct(tokens.get(i - 2), '.')
            && ident(tokens.get(i - 1)).as_deref() == Some("add");
        if called {
            found.push(inner.split(|t| is_punct(Some(t), ',')).map(<[_]>::to_vec).collect());
        }
        additions(&inner, found);
    }
}

/// Body of a function of a file.
fn body(tokens: &[TokenTree], name: &str) -> Vec<TokenTree> {
    let at = (1..tokens.len()).find(|&i| {
        ident(tokens.get(i - 1)).as_deref() == Some("fn") && ident(tokens.get(i)).as_deref() == Some(name)
    });
    let at = at.unwrap_or_else(|| panic!("no function {name}"));
    let body = tokens.iter().skip(at).find_map(|t| group(Some(t), Delimiter::Brace));
    body.unwrap_or_else(|| panic!("{name} has no body")).into_iter().collect()
}

/// `Check::Name => VALUE` of the match that is a function's body.
fn arms(tokens: &[TokenTree], function: &str) -> Vec<(String, TokenTree)> {
    let body = body(tokens, function);
    let arms = body.iter().find_map(|t| group(Some(t), Delimiter::Brace));
    let arms: Vec<_> = arms.unwrap_or_else(|| panic!("{function} is no match")).into_iter().collect();
    let check = |i: usize| ident(arms.get(i)).as_deref() == Some("Check");
    let starts = (0..arms.len()).filter(|&i| check(i));
    starts
        .map(|i| {
            assert!(
                is_punct(arms.get(i + 4), '=') && is_punct(arms.get(i + 5), '>'),
                "{function}: one name an arm"
            );
            (ident(arms.get(i + 3)).expect("the name of a check"), arms[i + 6].clone())
        })
        .collect()
}

/// The findings that the source can make.
fn made() -> Kinds {
    let mut kinds = Kinds::new();
    for path in rust_files(SITE) {
        if path.starts_with(CHECKS) {
            let here = tokens(&path, &text(&path));
            if path != format!("{CHECKS}mod.rs") {
                told(&here, &named_severity(&here), &mut kinds);
            }
            if path == format!("{CHECKS}array.rs") {
                meanings(&body(&here, "meaning"), "R10", &mut kinds);
            }
            continue;
        }
        let mut additions_here = Vec::new();
        additions(&tokens(&path, &text(&path)), &mut additions_here);
        for arguments in additions_here {
            let grave = arguments.first().and_then(|a| severity(a));
            let rule = arguments.get(1).map(|a| string_literals(a)).unwrap_or_default();
            let slugs = arguments.get(2).map(|a| string_literals(a)).unwrap_or_default();
            let (Some(grave), [rule], false) = (grave, rule.as_slice(), slugs.is_empty()) else {
                panic!("{path}: a finding is added in another form than this test reads: {arguments:?}");
            };
            for slug in slugs {
                note(&mut kinds, &bare(&slug), &bare(rule), &grave);
            }
        }
    }
    let path = format!("{SITE}finding.rs");
    let finding = tokens(&path, &text(&path));
    let mut rules = BTreeMap::new();
    for (check, value) in arms(&finding, "meaning") {
        let literals = string_literals(std::slice::from_ref(&value));
        let TokenTree::Group(value) = value else { panic!("{check} means a tuple") };
        let value = inside(&value);
        // rustfmt puts braces around a long tuple.
        let value = match group(value.first(), Delimiter::Parenthesis) {
            Some(tuple) if value.len() == 1 => tuple.into_iter().collect(),
            _ => value,
        };
        let [rule, slug, _remedy] = literals.as_slice() else { panic!("{check}: {literals:?}") };
        note(&mut kinds, &bare(slug), &bare(rule), &severity(&value).expect("a severity"));
        rules.insert(check, bare(rule));
    }
    for (check, value) in arms(&finding, "unmade") {
        let literals = string_literals(&[value]);
        let [slug] = literals.as_slice() else { panic!("{check}: {literals:?}") };
        note(&mut kinds, &bare(slug), &rules[&check], "Not checked");
    }
    // What `of_check` makes of two of them, by rule set and by metal; with a third this test would miss it.
    let other: TokenStream = body(&finding, "of_check").into_iter().collect();
    let other = other.to_string();
    assert_eq!(other.matches("=> Severity ::").count(), 2, "{other}");
    for (from, slug, rule, to) in
        [("Drop", "drop-exceeded", "R17", "Advice"), ("Conductor", "conductor-refused", "R18", "Danger")]
    {
        let arm = other.split("Check :: ").find(|arm| arm.starts_with(from) && arm.contains("=>"));
        assert!(arm.is_some_and(|arm| arm.contains(&format!("=> Severity :: {to}"))), "{from}: {other}");
        note(&mut kinds, slug, rule, to);
    }
    kinds
}

/// The findings that the guide lists: `| slug | rule | severity; severity in a case | meaning | remedy |`.
fn listed(guide: &str) -> Kinds {
    let mut kinds = Kinds::new();
    for row in guide.lines().filter(|l| l.starts_with("| `")) {
        let cells: Vec<_> = row.trim_matches('|').split('|').map(str::trim).collect();
        let [slug, rule, severities, meaning, remedy] = cells.as_slice() else { panic!("five cells: {row}") };
        assert!(!meaning.is_empty() && !remedy.is_empty(), "{row}");
        let slug = slug.trim_matches('`');
        assert!(!kinds.contains_key(slug), "{slug} is listed twice");
        let known = ["Danger", "Nonconforming", "Not checked", "Advice"];
        for one in severities.split("; ") {
            let word =
                known.iter().find(|k| one.starts_with(**k)).unwrap_or_else(|| panic!("severity: {row}"));
            note(&mut kinds, slug, rule, word);
        }
    }
    kinds
}

#[test]
fn the_guide_lists_every_finding_and_no_other() {
    let (made, listed) = (made(), listed(&text(GUIDE)));
    assert!(made.len() > 140, "only {} findings were found in the source", made.len());
    let of = |kinds: &Kinds, other: &Kinds| -> Vec<String> {
        kinds.iter().filter(|(slug, kind)| other.get(*slug) != Some(kind)).map(|k| format!("{k:?}")).collect()
    };
    let (missing, superfluous) = (of(&made, &listed), of(&listed, &made));
    assert!(
        missing.is_empty() && superfluous.is_empty(),
        "{GUIDE}: in the source but not listed so:\n{}\nlisted, but not so in the source:\n{}",
        missing.join("\n"),
        superfluous.join("\n")
    );
}

#[test]
fn the_guide_explains_every_rule_that_is_cited() {
    let guide = text(GUIDE);
    let explained: BTreeSet<_> =
        guide.lines().filter_map(|l| l.strip_prefix("## R")?.split_once(' ')).map(|(n, _)| n).collect();
    assert_eq!(explained.len(), 22, "{explained:?}");
    for path in rust_files("core/src/") {
        for literal in string_literals(&tokens(&path, &text(&path))) {
            let cited = bare(&literal);
            let cited = cited.strip_prefix("rule ").unwrap_or(&cited);
            if let Some(number) = cited.strip_prefix('R').filter(|n| n.parse::<u32>().is_ok()) {
                assert!(explained.contains(number), "{path}: R{number} stands on no page");
            }
        }
    }
}

#[test]
fn findings_are_read_however_they_are_broken_into_lines() {
    let source = r#"fn f(found: &mut F) { if a { found.add(Severity::Danger, "R7", if far { "one" } else { "other" },
        place(a, b), 1, format!("x, {y}"), None, "do") } }"#;
    let mut found = Vec::new();
    additions(&tokens("sample", source), &mut found);
    assert_eq!(found.len(), 1);
    assert_eq!(found[0].len(), 8);
    assert_eq!(severity(&found[0][0]).as_deref(), Some("Danger"));
    assert_eq!(string_literals(&found[0][2]), [r#""one""#, r#""other""#]);
}
