//! One version in every face, one place for it: the workspace's Cargo.toml.

use crate::text;

fn workspace() -> toml::Table {
    text("Cargo.toml").parse().expect("Cargo.toml is TOML")
}

fn version() -> String {
    workspace()["workspace"]["package"]["version"].as_str().expect("a version").to_owned()
}

/// Value of `#define NAME value` in the header.
fn macro_value(header: &str, name: &str) -> String {
    let start = format!("#define {name} ");
    let line = header.lines().find(|l| l.starts_with(&start)).unwrap_or_else(|| panic!("no macro {name}"));
    line[start.len()..].trim().trim_matches('"').to_owned()
}

#[test]
fn every_member_takes_the_workspace_version() {
    for member in ["core", "bindings-c", "bindings-py", "tests", "benches"] {
        let manifest: toml::Table = text(&format!("{member}/Cargo.toml")).parse().expect(member);
        assert_eq!(manifest["package"]["version"]["workspace"].as_bool(), Some(true), "{member}");
    }
    let dependency = &workspace()["workspace"]["dependencies"]["ampwright"]["version"];
    assert_eq!(dependency.as_str(), Some(version().as_str()));
}

#[test]
fn the_header_states_the_version_and_its_parts() {
    let header = text("bindings-c/include/ampwright.h");
    let version = version();
    let parts: Vec<u32> = version.split('.').map(|p| p.parse().expect("a number")).collect();
    let stated =
        ["AW_VERSION_MAJOR", "AW_VERSION_MINOR", "AW_VERSION_PATCH"].map(|n| macro_value(&header, n));
    assert_eq!(stated.join("."), version);
    // The packed number is checked by its value, since a wrong one still looks like a number.
    let packed: u32 = macro_value(&header, "AW_VERSION_NUMBER").parse().expect("a number");
    assert_eq!(packed, parts[0] * 10_000 + parts[1] * 100 + parts[2]);
}

#[test]
fn python_takes_its_version_from_cargo() {
    let project: toml::Table = text("bindings-py/pyproject.toml").parse().expect("pyproject.toml is TOML");
    let dynamic = project["project"]["dynamic"].as_array().expect("dynamic fields");
    assert!(dynamic.iter().any(|d| d.as_str() == Some("version")));
    assert!(project["project"].get("version").is_none());
}
