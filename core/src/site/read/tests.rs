//! Every kind of problem by its exact sentence, and limits.

mod any_text;
mod guide;
mod plant;

use alloc::format;
use alloc::string::{String, ToString};
use alloc::vec::Vec;
use core::fmt::Write;

use super::{read, read_bytes};

/// Every section, every key.
const VALID: &str = include_str!("tests/every_key.toml");

/// One of each, wired: bank, board, load.
const SMALL: &str = include_str!("tests/small.toml");

/// Edits of [`SMALL`] with the problems they make.
const EDITS: &str = include_str!("tests/problems.txt");

fn problems(text: &str) -> String {
    read(text).map_or_else(|problems| problems.to_string(), |_| "none".to_string())
}

/// Lines of a block that begin with a mark, without it.
fn marked(block: &str, mark: char) -> String {
    let lines: Vec<&str> = block
        .lines()
        .filter_map(|line| line.strip_prefix(mark))
        .map(|line| line.strip_prefix(' ').unwrap_or(line))
        .collect();
    lines.join("\n")
}

#[test]
fn valid_documents_are_read() {
    assert_eq!(problems(VALID), "none");
    assert_eq!(problems(SMALL), "none");
    assert_eq!(problems(&SMALL.replace('\n', "\r\n")), "none", "line ends of another system");
    assert_eq!(problems(&format!("\u{feff}{SMALL}")), "none", "byte order mark");
}

#[test]
fn each_edit_makes_exactly_its_problems() {
    let blocks = EDITS.split("\n\n").filter(|block| block.contains("\n= "));
    let mut count = 0;
    for block in blocks {
        let (old, new, expected) = (marked(block, '-'), marked(block, '+'), marked(block, '='));
        assert!(SMALL.contains(&old), "{old}");
        assert_eq!(problems(&SMALL.replacen(&old, &new, 1)), expected, "{old}\n→\n{new}");
        count += 1;
    }
    assert!(count > 200, "{count}");
}

#[test]
fn values_arrive_as_stated() {
    use crate::cable::{Class, Coating};
    use crate::device::Supply;
    use crate::site::model::{End, LoadKind, Return};
    use uom::si::thermodynamic_temperature::degree_celsius;
    use uom::si::{electric_charge::ampere_hour, electric_potential::volt, length::meter, ratio::ratio};

    let site = read(VALID).unwrap();
    assert_eq!(site.name, "Heron Point");
    assert!((site.ambient.0.get::<degree_celsius>() + 25.0).abs() < 1e-9);
    let bank = &site.banks[0];
    assert_eq!((bank.line, bank.units, bank.series, bank.strings), (30, Some(4), Some(2), Some(2)));
    assert!((bank.capacity.unwrap().get::<ampere_hour>() - 400.0).abs() < 1e-9);
    assert!((site.inverters[0].efficiency.unwrap().get::<ratio>() - 0.9).abs() < 1e-12);
    let (pump, radio) = (&site.loads[0], &site.loads[1]);
    assert_eq!((pump.kind, pump.count, pump.continuous), (LoadKind::Resistive, 4, false));
    assert_eq!((radio.kind, radio.count, radio.continuous), (LoadKind::Current, 1, true));

    let feeder = &site.circuits[0];
    assert_eq!((feeder.from.as_str(), feeder.to.as_str()), ("house", "main"));
    assert_eq!((feeder.positive_length.get::<meter>(), feeder.negative_length.get::<meter>()), (1.5, 2.0));
    assert_eq!(
        (feeder.class, feeder.coating, feeder.bundled),
        (Some(Class::Flexible), Some(Coating::Tinned), 6)
    );
    let names: Vec<&str> = feeder.devices.iter().map(|device| device.name.as_str()).collect();
    assert_eq!(names, ["F2", "F1", "F3"], "those without a name take the next number that is free");
    assert_eq!(feeder.devices[0].let_through_A2s, Some(12000.0));
    assert_eq!(feeder.devices[1].supply, Supply::AcOnly);
    assert_eq!((feeder.devices[1].end, feeder.devices[2].end), (End::To, End::From));
    assert!(matches!(feeder.parts[0].supply, Supply::Dc(v) if v.get::<volt>() == 80.0));
    assert_eq!((feeder.joints[0].count, feeder.no_device), (2, false));
    let mains = &site.circuits[1];
    assert!(mains.no_device && mains.cranking && matches!(mains.way_back, Return::Chassis(Some(_))));
    let pump = &site.circuits[2];
    assert_eq!((pump.material, pump.bundled, pump.diversity), (None, 2, 1.0));
    assert!((pump.positive_length.get::<meter>() - 39.0 * 0.3048).abs() < 1e-12);
    let stock = &site.stock;
    assert_eq!((stock.cables.len(), stock.devices[0].ratings.len(), stock.lugs.len()), (1, 2, 1));
    assert_eq!(site.rules.overrides().aluminium, Some(true));
}

#[test]
fn many_problems_are_reported_at_once_in_file_order() {
    let text = SMALL
        .replace("name = \"Heron Point\"", "nmae = \"Heron Point\"")
        .replace("rules = \"iec\"", "rules")
        .replace("\"30 degC\"]", "\"30 W\"]")
        .replace("chemistry = \"lfp\"", "chemistry = \"tin\"")
        .replace("capacity = \"400 Ah\"", "capacity = 400")
        .replace("cut_off = \"21 V\"", "cut_off = \"25 V\"")
        .replace("power = \"60 W\"", "power = 60 W")
        .replace("one_way = \"2 m\"", "length = \"2 m\"")
        .replace("one_way = \"12 m\"", "one_way = \"-12 m\"\nclass = 4")
        + "[weather]\nin_plane = [\"1 kWh/m2\", \"2 kWh/m2\"]\n[[reading]]\nname = \"volts\"\nat = \"Pump\"\n";
    let expected = [
        r"line 3, [site]: no key 'nmae'; did you mean 'name'?",
        r"line 4: 'rules' is no line of a site file; write key = value, [section] or # comment",
        r"line 6, [site], ambient: '30 W' is a power; a temperature is needed, such as '25 degC' or '77 degF'",
        r#"line 9, [[bank]] "house", chemistry: 'tin' is not known here; it must be one of flooded, agm, gel, lfp, nmc, nicd"#,
        r#"line 11, [[bank]] "house", capacity: '400' has no unit; write '100 Ah'"#,
        r#"line 12, [[bank]] "house", cut_off: '25 V' is above nominal = '24 V'; mend the one that is wrong"#,
        r#"line 18: '60 W' must stand in quotation marks: "60 W""#,
        r#"line 23, [[circuit]] "feeder": no key 'length'; did you mean 'one_way'?"#,
        r#"line 28, [[circuit]] "pump", one_way: '-12 m' is out of range; it must be greater than 0 and at most 10000 m"#,
        r#"line 29, [[circuit]] "pump", class: there is no class 4; it must be 1, 2, 5 or 6 (IEC 60228)"#,
        r#"line 31, [weather], in_plane: the list has 2 months; twelve are needed, January first: ["0.6 kWh/m2", "1.4 kWh/m2", …]"#,
        r#"line 32, [[reading]] "volts": nothing was read; state volts, drop, amps, temperature, density or delivered"#,
    ];
    assert_eq!(problems(&text), expected.join("\n"));
}

#[test]
fn an_empty_file_gets_one_sentence() {
    let sentence = "the file states nothing; a site file begins with 'format = 1' and a section [site]";
    for text in ["", "\n\n", "# nothing yet\n", "\u{feff}"] {
        assert_eq!(problems(text), sentence);
    }
}

#[test]
fn a_site_needs_a_bank_and_something_to_do() {
    let head = SMALL.split("[[bank]]").next().unwrap();
    assert_eq!(
        problems(head),
        "there is no [[bank]]; write the one that feeds the site\n\
         there is no [[load]] and no [[circuit]]; write what is to be fed, or what is built"
    );
}

#[test]
fn what_is_built_is_read_without_a_load() {
    let built = SMALL
        .replace("[[load]]\nname = \"pump\"\npower = \"60 W\"", "[[board]]\nname = \"pump\"")
        .replace("one_way = \"2 m\"", "one_way = \"2 m\"\nsize = \"16 mm2\"\ndevice = \"none\"")
        .replace(
            "one_way = \"12 m\"",
            "one_way = \"12 m\"\nsize = \"6 AWG\"\n[[circuit.device]]\nfamily = \"gG\"",
        );
    assert_eq!(problems(&built), "none");
}

#[test]
fn names_have_limits() {
    let named = |name: &str| problems(&SMALL.replacen("\"Heron Point\"", &format!("\"{name}\""), 1));
    assert_eq!(named(&"é".repeat(100)), "none", "200 bytes");
    let begin = "a".repeat(60);
    assert_eq!(
        named(&"a".repeat(201)),
        format!("line 3, [site] \"{begin}…\", name: the name has 201 bytes; at most 200 are admitted")
    );
    assert!(named("a\\u001b[31m").contains("holds a control character"));
    assert!(!named("a\\u001b[31m").contains('\u{1b}'), "none reaches the terminal");
}

#[test]
fn sizes_and_depths_have_limits() {
    let large = "#".repeat(8 * 1024 * 1024 + 1);
    let sentence =
        "the file has 8388609 bytes; at most 8388608 are read: a site file lists circuits, not measurements";
    assert_eq!(problems(&large), sentence);
    assert_eq!(read_bytes(large.as_bytes()).unwrap_err().to_string(), sentence);

    let nested = |levels: usize| {
        let list = format!("name = {}{}", "[".repeat(levels), "]".repeat(levels));
        problems(&SMALL.replacen("name = \"Heron Point\"", &list, 1))
    };
    let too_deep = "line 3: nested deeper than 32 levels; no section of a site file needs more than 4";
    assert!(nested(4).contains("a list stands here"), "{}", nested(4));
    assert_eq!(nested(40), too_deep);
    assert!(nested(100_000).contains(too_deep));
    assert!(problems(&"[".repeat(100_000)).starts_with("line 1: "));
    assert!(problems(&format!("{}=1", "a.".repeat(100_000))).starts_with("line 1: "));

    let mut many = String::from("format = 1\n");
    for number in 0..200_001 {
        let _ = writeln!(many, "a{number}=1");
    }
    assert!(problems(&many).ends_with("at most 200000 are read: split the site"));
}

#[test]
fn a_large_file_with_a_syntax_error_is_still_refused_with_its_line() {
    let text = format!("{SMALL}{}power 60 W\n", "# a long story\n".repeat(80_000));
    assert_eq!(
        problems(&text),
        "the file is over 1 MiB: mend its syntax first, then the rest is checked\n\
         line 80029: 'power 60 W' is no line of a site file; write key = value, [section] or # comment"
    );
}

#[test]
fn at_most_200_problems_are_kept_and_the_rest_counted() {
    let mut text = String::from(SMALL);
    for number in 0..1000 {
        let _ = write!(text, "[[board]]\nname = \"b{number}\"\ncolour = 5\n");
    }
    let problems = read(&text).unwrap_err();
    assert_eq!((problems.0.len(), problems.1), (200, 800));
    assert_eq!(problems.0[199].line, 28 + 3 * 200);
    assert!(problems.to_string().ends_with("\nand 800 more"));
}

#[test]
fn bytes_that_are_no_text_are_named() {
    assert_eq!(
        read_bytes(b"format = 1\n\xff\xfe").unwrap_err().to_string(),
        "not a text file: byte 12 is not UTF-8; save the site file as plain text in UTF-8"
    );
    assert_eq!(
        read_bytes(b"\x7fELF\0\0").unwrap_err().to_string(),
        "not a text file: byte 5 is zero; a site file is plain text in UTF-8"
    );
    assert!(read_bytes(SMALL.as_bytes()).is_ok());
}

/// A document of ten thousand circuits more.
fn large() -> String {
    let mut text = String::from(SMALL);
    for number in 0..10_000 {
        let _ = write!(
            text,
            "[[load]]\nname = \"l{number}\"\npower = \"5 W\"\n[[circuit]]\nname = \"c{number}\"\n"
        );
        let _ = write!(text, "from = \"main\"\nto = \"l{number}\"\none_way = \"3 m\"\n");
    }
    text
}

#[test]
fn a_site_of_ten_thousand_circuits_is_read() {
    assert_eq!(read(&large()).unwrap().circuits.len(), 10_002);
}

#[test]
fn ten_thousand_wrong_ends_are_refused_in_good_time() {
    let wrong = large().replace("from = \"main\"", "from = \"mian\"");
    let problems = read(&wrong).unwrap_err();
    assert_eq!((problems.0.len(), problems.1), (200, 9801));
}

#[test]
fn a_long_loop_is_named_in_part() {
    let mut text = String::from(SMALL);
    for number in 0..20 {
        let from = if number == 0 { String::from("main") } else { format!("b{}", number - 1) };
        let _ = write!(text, "[[board]]\nname = \"b{number}\"\n[[circuit]]\nname = \"c{number}\"\n");
        let _ = write!(text, "one_way = \"1 m\"\nfrom = \"{from}\"\nto = \"b{number}\"\n");
    }
    text.push_str("[[circuit]]\nname = \"last\"\none_way = \"1 m\"\nfrom = \"b19\"\nto = \"main\"\n");
    let problem = problems(&text);
    assert!(problem.contains("with circuits \"c19\", \"c18\""), "{problem}");
    assert!(problem.contains("\"c12\", 12 more: there are two ways to board \"main\""), "{problem}");
}
