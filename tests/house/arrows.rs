//! Who may call whom among core's rooms, after the floors of the design.

use proc_macro2::{Delimiter, TokenTree};

use crate::source::{group, ident, inside, is_punct, tokens};
use crate::{rust_files, text};

/// Rooms by floor, lowest first; a room uses only floors below.
const FLOORS: [&[&str]; 8] = [
    &["quantity", "error", "citation"],
    &["law", "catalogue"],
    &["cable", "device", "battery", "array", "converter", "generator", "load", "sky"],
    &["rules"],
    &["network", "protection", "circuit"],
    &["year"],
    &["site"],
    &["prelude"],
];
/// Floors whose rooms may use each other.
const SHARED: [usize; 2] = [0, 1];
/// Floor whose rooms may use those that stand before them in the row.
const ROW: usize = 4;
/// The firmware runtime stands beside the floors.
const MONITOR: &str = "monitor";
const MONITOR_USES: [&str; 3] = ["error", "battery", "cable"];
/// Names at the crate's root that stand for a room.
const AT_ROOT: [(&str, &str); 2] = [("Error", "error"), ("calculations", "catalogue")];

fn place(room: &str) -> Option<(usize, usize)> {
    FLOORS.iter().enumerate().find_map(|(floor, rooms)| Some((floor, rooms.iter().position(|r| *r == room)?)))
}

/// Why an arrow is forbidden, if it is.
fn forbidden(from: &str, to: &str) -> Option<String> {
    if from == to || (from == MONITOR && MONITOR_USES.contains(&to)) || (from == "site" && to == MONITOR) {
        return None;
    }
    if from == MONITOR || to == MONITOR {
        return Some(
            "the monitor uses only error, battery and cable, and only site uses the monitor".to_owned(),
        );
    }
    let Some((from_floor, from_place)) = place(from) else { return Some(format!("'{from}' is on no floor")) };
    let Some((to_floor, to_place)) = place(to) else { return Some(format!("'{to}' is on no floor")) };
    let allowed = to_floor < from_floor
        || (to_floor == from_floor && SHARED.contains(&to_floor))
        || (to_floor == from_floor && to_floor == ROW && to_place < from_place);
    (!allowed).then(|| format!("floor {from_floor} may not use floor {to_floor}"))
}

/// Rooms that the tokens name: `crate::room`, `crate::{room, …}`, and `super::room` from as deep as `depth` modules.
fn rooms_used(tokens: &[TokenTree], depth: usize) -> Vec<String> {
    let mut found = Vec::new();
    let mut i = 0;
    while i < tokens.len() {
        let here = ident(tokens.get(i));
        let start = match here.as_deref() {
            Some("crate") => path_after(tokens, i),
            Some("super") => {
                let mut ups = 1;
                let mut next = path_after(tokens, i);
                while let Some(n) = next.filter(|n| ident(tokens.get(*n)).as_deref() == Some("super")) {
                    ups += 1;
                    i = n;
                    next = path_after(tokens, n);
                }
                next.filter(|_| ups >= depth)
            }
            _ => None,
        };
        if let Some(start) = start {
            found.extend(first_names(tokens.get(start)));
        }
        if let Some(TokenTree::Group(g)) = tokens.get(i) {
            let module = i >= 2 && ident(tokens.get(i - 2)).as_deref() == Some("mod");
            found.extend(rooms_used(&inside(g), depth + usize::from(module)));
        }
        i += 1;
    }
    found
}

/// Place of what follows `name::`.
fn path_after(tokens: &[TokenTree], i: usize) -> Option<usize> {
    (is_punct(tokens.get(i + 1), ':') && is_punct(tokens.get(i + 2), ':')).then_some(i + 3)
}

/// The name, or the first name of every path in braces.
fn first_names(token: Option<&TokenTree>) -> Vec<String> {
    if let Some(name) = ident(token) {
        return vec![name];
    }
    let Some(list) = group(token, Delimiter::Brace) else { return Vec::new() };
    let list: Vec<_> = list.into_iter().collect();
    list.split(|t| is_punct(Some(t), ',')).filter_map(|path| ident(path.first())).collect()
}

/// Every forbidden arrow of one file.
fn arrows_refused(path: &str, source: &str) -> Vec<String> {
    let modules: Vec<_> = path.trim_end_matches(".rs").split('/').filter(|part| *part != "mod").collect();
    let Some(from) = modules.first() else { return Vec::new() };
    let mut used = rooms_used(&tokens(path, source), modules.len());
    used.sort();
    used.dedup();
    used.iter()
        .filter_map(|name| {
            let to = AT_ROOT.iter().find(|(root, _)| root == name).map_or(name.as_str(), |(_, room)| room);
            forbidden(from, to).map(|why| format!("core/src/{path}: {from} -> {to}: {why}"))
        })
        .collect()
}

#[test]
fn rooms_use_only_the_floors_below() {
    let mut seen = 0;
    let mut refused = Vec::new();
    for file in rust_files("core/src/") {
        let path = file.trim_start_matches("core/src/");
        // The root lists the rooms.
        if path == "lib.rs" {
            continue;
        }
        seen += 1;
        refused.extend(arrows_refused(path, &text(&file)));
    }
    assert!(seen > 20, "only {seen} files of core were found");
    assert!(refused.is_empty(), "arrows that the design does not allow:\n{}", refused.join("\n"));
}

#[test]
fn a_forbidden_arrow_is_found_however_it_is_written() {
    let upward = [
        "use crate::rules::Rules;",
        "use crate::{error::Error, rules};",
        "use super::super::rules::Rules;",
        "fn f() { crate::rules::f() }",
        "calculations! { fn f(a: crate::rules::T) { a } }",
        "mod inner { use super::super::super::rules; }",
    ];
    for source in upward {
        assert_eq!(arrows_refused("cable/size.rs", source).len(), 1, "{source}");
    }
    for source in
        ["use crate::error::Error;", "use super::Conductor;", "use crate::Error;", "pub(crate) fn f() {}"]
    {
        assert_eq!(arrows_refused("cable/size.rs", source), Vec::<String>::new(), "{source}");
    }
    assert_eq!(arrows_refused("cable/mod.rs", "use super::battery::B;").len(), 1, "between rooms of floor 2");
    assert_eq!(arrows_refused("cable/mod.rs", "#[cfg(test)] mod tests { use crate::rules; }").len(), 0);
    assert_eq!(arrows_refused("network/mod.rs", "use crate::circuit;").len(), 1, "against the row");
    assert_eq!(arrows_refused("circuit/mod.rs", "use crate::network;").len(), 0, "along the row");
    assert_eq!(arrows_refused("monitor/mod.rs", "use crate::quantity;").len(), 1);
    assert_eq!(arrows_refused("monitor/mod.rs", "use crate::battery;").len(), 0);
    assert_eq!(arrows_refused("attic/mod.rs", "use crate::error;").len(), 1, "a room on no floor");
}
