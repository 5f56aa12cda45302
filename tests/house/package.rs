//! What is generated or goes out: the C header, the content of the packages.

use std::process::Command;

use crate::{compare_committed, output, root, text};

#[test]
fn the_c_header_is_what_its_source_gives() {
    let member = root().join("bindings-c");
    let config = cbindgen::Config::from_file(member.join("cbindgen.toml")).expect("cbindgen.toml");
    let bindings = cbindgen::Builder::new()
        .with_config(config)
        .with_src(member.join("src/lib.rs"))
        .generate()
        .expect("the header is generated");
    let mut header = Vec::new();
    bindings.write(&mut header);
    compare_committed("bindings-c/include/ampwright.h", &String::from_utf8(header).expect("text"));
}

#[test]
fn every_status_has_a_text() {
    let header = text("bindings-c/include/ampwright.h");
    let names: Vec<_> =
        header.lines().filter_map(|l| l.trim().strip_prefix("AW_STATUS_")?.split_once(" = ")).collect();
    assert!(names.len() > 3, "the header has another form than this test reads: {names:?}");
    // However rustfmt breaks the lines of the table.
    let source = text("bindings-c/src/status.rs").split_whitespace().collect::<String>();
    for (name, _) in names {
        assert!(source.contains(&format!("(Status::AW_STATUS_{name},c\"")), "no text for AW_STATUS_{name}");
    }
}

#[test]
fn packages_hold_what_is_listed() {
    let mut listing =
        String::from("# Made by `tests/run regenerate`: files of the packages that may be published.\n");
    for package in ["ampwright", "ampwright-c"] {
        let mut cargo = Command::new(env!("CARGO"));
        let list = output(cargo.args(["package", "--locked", "--allow-dirty", "--list", "-p", package]));
        // What cargo itself adds to a package is not ours to list.
        let ours = list
            .lines()
            .filter(|file| ![".cargo_vcs_info.json", "Cargo.toml.orig", "Cargo.lock"].contains(file));
        let ours: Vec<_> = ours.collect();
        listing = [listing, format!("\n[{package}]\n{}\n", ours.join("\n"))].concat();
    }
    compare_committed("tests/house/packages.txt", &listing);
}
