//! The plant: what is designed, what contradicts itself, and networks of every kind.

use alloc::format;
use alloc::string::String;

use super::{SMALL, problems, read};

/// A circuit of a metre.
fn wire(name: &str, from: &str, to: &str) -> String {
    format!("[[circuit]]\nname = \"{name}\"\nfrom = \"{from}\"\nto = \"{to}\"\none_way = \"1 m\"\n")
}

#[test]
fn contradictions_are_told_together() {
    let text = SMALL
        .replace("rules = \"iec\"", "rules = \"iec\"\nlatitude = \"91 deg\"")
        .replace("chemistry = \"lfp\"", "chemistry = \"flooded\"\nunit = \"6 V\"\nunits = 5")
        + "[[array]]\nname = \"roof\"\nmodules = 5\nseries = 2\n\
           [[controller]]\nname = \"a\"\nroute = \"1 m\"\n[[controller]]\nname = \"b\"\nroute = \"1 m\"\n"
        + &wire("one", "roof", "a")
        + &wire("two", "roof", "b")
        + "[weather]\nin_plane = [\"1 kWh/m2\"]\n";
    let expected = [
        r#"line 5, [site] "Heron Point", latitude: '91 deg' is out of range; it must be between -90 and 90 deg"#,
        r#"line 12, [[bank]] "house", units: 5 batteries do not make whole strings of 4 (24 V of 6 V each); 4 or 8 do"#,
        r#"line 34, [[array]] "roof", modules: 5 modules do not divide into strings of 2; 4 or 6 do"#,
        r#"line 47, [[circuit]] "two": array "roof" leads to circuit "one" already: one array feeds one controller; state an array for each"#,
        r#"line 53, [weather], in_plane: the list has 1 month; twelve are needed, January first: ["0.6 kWh/m2", "1.4 kWh/m2", …]"#,
    ];
    assert_eq!(problems(&text), expected.join("\n"));
}

#[test]
fn what_is_left_out_is_designed() {
    let head = SMALL.split("[[bank]]").next().unwrap();
    let load = "[[load]]\nname = \"lamp\"\npower = \"5 W\"\nroute = \"8 m\"\n";
    let alone = format!("{head}{load}");
    let named = format!("{head}[[bank]]\nname = \"house\"\n{load}");
    let kettle = "[[load]]\nname = \"kettle\"\npower = \"900 W\"\nac = true\n";
    let sun =
        "[[array]]\nname = \"roof\"\nroute = \"8 m\"\n[[controller]]\nname = \"mppt\"\nroute = \"1 m\"\n";
    for text in [
        alone.clone(),
        named.clone(),
        format!("{alone}{kettle}"),
        format!("{alone}{kettle}[[inverter]]\nname = \"ac\"\nroute = \"1 m\"\n"),
        format!("{named}{sun}"),
        format!("{named}[[controller]]\nname = \"mppt\"\nroute = \"1 m\"\n"),
        format!("{named}[[generator]]\nname = \"set\"\nkind = \"engine\"\nroute = \"4 m\"\n"),
        format!("{alone}[[board]]\nname = \"main\"\n"),
    ] {
        assert_eq!(problems(&text), "none", "{text}");
    }
    let document = read(&named).unwrap();
    assert!(document.banks[0].nominal.is_none() && document.banks[0].chemistry.is_none());
    assert_eq!((document.banks[0].line, document.loads[0].line), (7, 9));
}

/// Networks that look odd and are none the worse for it.
#[test]
fn networks_of_every_kind_are_read() {
    let board = |name: &str| format!("[[board]]\nname = \"{name}\"\n");
    let load = |name: &str| format!("[[load]]\nname = \"{name}\"\npower = \"5 W\"\n");
    let array = |name: &str| format!("[[array]]\nname = \"{name}\"\n");
    let controller = |name: &str| format!("[[controller]]\nname = \"{name}\"\n");
    let converter = |name: &str| {
        format!("[[converter]]\nname = \"{name}\"\noutput = \"24 V\"\nlimit = \"20 A\"\nefficiency = 0.9\n")
    };
    let more = [
        // Two arrays meet on a board before their one controller.
        [
            array("roof"),
            array("wall"),
            board("pv"),
            controller("c"),
            wire("1", "roof", "pv"),
            wire("2", "wall", "pv"),
            wire("3", "pv", "c"),
            wire("4", "c", "main"),
        ]
        .concat(),
        // A load on the board that a controller feeds, from which a circuit runs to the bank's board.
        [
            array("roof"),
            board("sun"),
            controller("c"),
            load("fan"),
            wire("1", "roof", "c"),
            wire("2", "c", "sun"),
            wire("3", "sun", "main"),
            wire("4", "sun", "fan"),
        ]
        .concat(),
        // A controller right at the bank.
        [array("roof"), controller("c"), wire("1", "roof", "c"), wire("2", "c", "house")].concat(),
        // A converter that charges a second bank, and one behind another.
        [
            "[[bank]]\nname = \"start\"\n".into(),
            converter("x"),
            converter("y"),
            load("fan"),
            wire("1", "main", "x"),
            wire("2", "x", "start"),
            wire("3", "start", "y"),
            wire("4", "y", "fan"),
        ]
        .concat(),
    ];
    for more in more {
        assert_eq!(problems(&format!("{SMALL}{more}")), "none", "{more}");
    }
}

/// Every way of a bank's figures to agree: voltage, batteries, strings, capacity.
#[test]
fn figures_of_a_bank_agree_or_not() {
    let said = |chemistry: &str, figures: &str| {
        let text = SMALL.replace("chemistry = \"lfp\"", &format!("chemistry = \"{chemistry}\"")).replace(
            "nominal = \"24 V\"\ncapacity = \"400 Ah\"\ncut_off = \"21 V\"\nhighest = \"29.2 V\"",
            figures,
        );
        problems(&text)
    };
    for (chemistry, figures) in [
        (
            "flooded",
            "nominal = '24 V'\nunit = '6 V'\nunits = 8\nunit_capacity = '225 Ah'\ncapacity = '450 Ah'",
        ),
        ("flooded", "unit = '2 V'\nseries = 12\nunit_capacity = '500 Ah'"),
        ("lfp", "nominal = '48 V'\nunit = '3.2 V'\nunits = 16"),
        ("lfp", "nominal = '48 V'\nunit = '3.2 V'\nunits = 15"),
        ("lfp", "nominal = '12 V'\nunit = '3.2 V'\nunits = 8\nstrings = 2"),
        (
            "lfp",
            "nominal = '51.2 V'\nunit = '51.2 V'\nunits = 3\nunit_capacity = '100 Ah'\ncapacity = '300 Ah'",
        ),
        ("nicd", "nominal = '24 V'\nunit = '1.2 V'\nunits = 19"),
        ("agm", "nominal = '24 V'\nunit = '12 V'\nstrings = 3\nunits = 6"),
    ] {
        assert_eq!(said(chemistry, figures), "none", "{chemistry}: {figures}");
    }
    for (chemistry, figures) in [
        (
            "flooded",
            "nominal = '24 V'\nunit = '6 V'\nunits = 8\nunit_capacity = '225 Ah'\ncapacity = '225 Ah'",
        ),
        ("flooded", "nominal = '24 V'\nunit = '48 V'"),
        ("flooded", "nominal = '26 V'\nunit = '2 V'\nseries = 12"),
        ("lfp", "nominal = '48 V'\nunit = '3.2 V'\nunits = 18"),
        ("lfp", "nominal = '12 V'\nunit = '3.2 V'\nunits = 8\nstrings = 3"),
        ("agm", "nominal = '24 V'\nunit = '12 V'\nunits = 3"),
        ("agm", "nominal = '24 V'\nseries = 2\nunits = 3"),
    ] {
        let found = said(chemistry, figures);
        assert_eq!(found.lines().count(), 1, "{chemistry}: {figures}: {found}");
        assert!(found.starts_with("line 1"), "{found}");
    }
}

/// A voltage that no whole number of cells has.
#[test]
fn a_chemistry_has_voltages_of_its_own() {
    let bank = |figures: &str| {
        problems(&SMALL.replace(
            "chemistry = \"lfp\"\nnominal = \"24 V\"\ncapacity = \"400 Ah\"\ncut_off = \"21 V\"\nhighest = \"29.2 V\"",
            figures,
        ))
    };
    for (figures, begin) in [
        (
            "chemistry = 'nmc'\nnominal = '24 V'",
            "line 10, [[bank]] \"house\", nominal: nominal voltage is 24 V; NMC",
        ),
        (
            "chemistry = 'agm'\nnominal = '13 V'",
            "line 10, [[bank]] \"house\", nominal: nominal voltage is 13 V; lead",
        ),
        (
            "chemistry = 'gel'\nunit = '3 V'",
            "line 10, [[bank]] \"house\", unit: nominal voltage is 3 V; lead",
        ),
    ] {
        let found = bank(figures);
        assert!(found.starts_with(begin) && found.lines().count() == 1, "{found}");
    }
    let stock =
        "[[stock.battery]]\nname = \"a\"\nchemistry = \"lfp\"\nnominal = \"13 V\"\ncapacity = \"100 Ah\"\n";
    let found = problems(&format!("{SMALL}{stock}"));
    assert!(
        found.starts_with("line 32, [[stock.battery]] \"a\", nominal: nominal voltage is 13 V; LFP"),
        "{found}"
    );
    assert_eq!(bank("chemistry = 'lfp'\nnominal = '48 V'"), "none");
}
