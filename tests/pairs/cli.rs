//! The main program as a process: exit status, what stands on which stream, and a clear sentence for bad input.

use std::fs;
use std::path::{Path, PathBuf};
use std::process::Command;
use std::sync::OnceLock;

use crate::badly_built::{BADLY_BUILT, CABIN, HERON_POINT};

/// The example, built once in the way the tests are.
fn program() -> &'static Path {
    static PROGRAM: OnceLock<PathBuf> = OnceLock::new();
    PROGRAM.get_or_init(|| {
        let mut cargo = Command::new(env!("CARGO"));
        cargo.args(["build", "--quiet", "--package", "ampwright", "--example", "design_site"]);
        cargo.args(["--message-format", "json"]).current_dir(env!("CARGO_MANIFEST_DIR"));
        if !cfg!(debug_assertions) {
            cargo.arg("--release");
        }
        let built = cargo.output().expect("cargo runs");
        assert!(built.status.success(), "{}", String::from_utf8_lossy(&built.stderr));
        let messages = String::from_utf8_lossy(&built.stdout);
        let path = messages
            .lines()
            .filter(|line| line.contains("design_site"))
            .find_map(|line| line.split_once(r#""executable":""#)?.1.split('"').next())
            .expect("cargo names the program it built");
        PathBuf::from(path)
    })
}

/// Exit status, standard output, standard error.
fn run<I: IntoIterator<Item = P>, P: AsRef<std::ffi::OsStr>>(arguments: I) -> (i32, String, String) {
    let output = Command::new(program()).args(arguments).output().expect("the program runs");
    let text = |bytes: &[u8]| String::from_utf8(bytes.to_vec()).expect("it prints text");
    (output.status.code().expect("it ends by itself"), text(&output.stdout), text(&output.stderr))
}

/// A file of this content, under a name of its own: tests run side by side.
fn file(name: &str, content: &[u8]) -> PathBuf {
    let path = Path::new(env!("CARGO_TARGET_TMPDIR")).join(name);
    fs::write(&path, content).expect("a file can be written");
    path
}

fn example(name: &str) -> PathBuf {
    Path::new(env!("CARGO_MANIFEST_DIR")).join("../core/examples/sites").join(name)
}

fn cabin() -> PathBuf {
    Path::new(env!("CARGO_MANIFEST_DIR")).join("pairs/cabin.toml")
}

/// Refused: status 2, nothing on standard output, and these sentences, one a line.
fn is_refused(arguments: &[PathBuf], sentences: &[&[&str]]) {
    let (status, out, err) = run(arguments);
    assert_eq!(status, 2, "{arguments:?}: {err}");
    assert_eq!(out, "", "{arguments:?}");
    let lines: Vec<&str> = err.lines().collect();
    assert_eq!(lines.len(), sentences.len(), "{arguments:?}: {err}");
    for (line, words) in lines.iter().zip(sentences) {
        for word in *words {
            assert!(line.contains(word), "{arguments:?}: '{word}' is not in: {line}");
        }
        for noise in ["panicked", "unwrap", "Error(", "TOML parse error"] {
            assert!(!line.contains(noise), "{line}");
        }
    }
}

#[test]
fn without_argument_it_reports_heron_point() {
    let (status, out, err) = run::<_, &str>([]);
    assert!(status < 2 && err.is_empty(), "{status}: {err}");
    assert!(out.starts_with("Heron Point fisheries cabin\n"), "{out}");
    assert_eq!(run([example("heron_point.toml")]), (status, out, err));
}

#[test]
fn a_site_with_faults_is_status_1() {
    let (status, out, err) = run([example("badly_built.toml")]);
    assert_eq!((status, err.as_str()), (1, ""));
    assert!(out.contains("DANGER"), "{out}");
}

/// A check that is not made is no pass: one missing datum is enough for status 1.
#[test]
fn one_check_that_is_not_made_is_status_1() {
    let text = CABIN.replacen("internal_resistance = \"7.2 mohm\"", "short_circuit = \"3.7 kA\"", 1);
    let (status, ..) = run([file("known.toml", text.as_bytes())]);
    assert_eq!(status, 0);
    let text = CABIN.replacen("from_source = \"0.4 m\"\n", "", 1);
    let (status, out, _) = run([file("not_stated.toml", text.as_bytes())]);
    assert_eq!(status, 1);
    assert!(out.contains("0 danger, 0 nonconforming, 1 not checked"), "{out}");
}

#[test]
fn what_is_no_site_file_is_refused_in_one_sentence() {
    let missing = Path::new(env!("CARGO_TARGET_TMPDIR")).join("no such file.toml");
    is_refused(&[missing], &[&["no such file.toml", "cannot be read"]]);
    is_refused(&[PathBuf::from(env!("CARGO_TARGET_TMPDIR"))], &[&["is a directory"]]);
    is_refused(&[PathBuf::from("")], &[&["cannot be read"]]);
    is_refused(&[file("empty.toml", b"")], &[&["states nothing", "format = 1", "[site]"]]);
    is_refused(&[file("blank.toml", b"\n \n# nothing\n")], &[&["states nothing"]]);
    is_refused(&[file("zeros.bin", &[0; 1000])], &[&["not a text file", "UTF-8"]]);
    is_refused(&[file("latin.toml", b"# caf\xe9\nformat = 1\n")], &[&["not a text file", "UTF-8"]]);
    is_refused(&[file("large.toml", &vec![b'#'; 9_000_000])], &[&["bytes", "at most 8388608"]]);
    is_refused(&[example("heron_point.toml"), example("badly_built.toml")], &[&["one site file at a time"]]);
}

#[test]
fn two_files_are_compared() {
    let same = [PathBuf::from("--compare"), cabin(), cabin()];
    assert_eq!(run(&same), (0, "nothing differs\n".to_string(), String::new()));
    let (larger, _) = changed("larger_pump.toml", "power = \"110 W\"", "power = \"220 W\"");
    let (status, out, err) = run([PathBuf::from("--compare"), cabin(), larger.clone()]);
    assert_eq!((status, err.as_str()), (1, ""));
    assert!(out.contains("~ circuit \"pump\", current: "), "{out}");
    is_refused(&[PathBuf::from("--compare"), larger.clone()], &[&["two site files to compare"]]);
    let bad = file("compare_bad.toml", b"format = 1\n");
    let (status, out, err) = run([PathBuf::from("--compare"), larger, bad]);
    assert_eq!((status, out.as_str()), (2, ""));
    assert!(err.lines().all(|line| line.contains("compare_bad.toml: ")), "{err}");
}

#[cfg(unix)]
#[test]
fn files_without_an_end_or_a_content_are_refused() {
    is_refused(&[PathBuf::from("/dev/null")], &[&["states nothing"]]);
    is_refused(&[PathBuf::from("/dev/zero")], &[&["at most 8388608"]]);
}

#[test]
fn deep_nesting_is_refused() {
    let text = format!("format = 1\na = {}{}\n", "[".repeat(100_000), "]".repeat(100_000));
    let (status, out, err) = run([file("deep.toml", text.as_bytes())]);
    assert_eq!((status, out.as_str()), (2, ""), "{err}");
    assert!(err.starts_with("line "), "{err}");
}

/// The cabin with one change; the number of the line that was changed stands at the beginning of the sentence.
fn changed(name: &str, before: &str, after: &str) -> (PathBuf, String) {
    assert_eq!(CABIN.matches(before).count(), 1, "{before}");
    let at = CABIN.lines().position(|line| line.contains(before.trim_end())).expect("it is there");
    (file(name, CABIN.replacen(before, after, 1).as_bytes()), format!("line {}, ", at + 1))
}

#[test]
fn a_bad_value_is_one_sentence_with_its_line_and_a_remedy() {
    let length = "one_way = \"9 m\"";
    let power = "power = \"65 W\"";
    for (name, before, after, words) in [
        ("area", "size = \"70 mm2\"", "size = \"16 A\"", ["'16 A' is a current", "size is needed", "16 mm2"]),
        ("negative", length, "one_way = \"-9 m\"", ["one_way", "'-9 m' is out of range", "greater than 0"]),
        ("zero", length, "one_way = \"0 m\"", ["one_way", "'0 m' is out of range", "greater than 0"]),
        ("minus_zero", length, "one_way = \"-0 m\"", ["one_way", "out of range", "greater than 0"]),
        ("nan", length, "one_way = \"NaN m\"", ["one_way", "'NaN m' is not a finite number", "12 m"]),
        ("bare_nan", length, "one_way = nan", ["one_way", "is not a finite number", "12 m"]),
        ("inf", length, "one_way = \"inf m\"", ["one_way", "'inf m' is not a finite number", "12 m"]),
        ("huge", power, "power = \"1e400 W\"", ["power", "'1e400 W' is not a finite number", "800 W"]),
        ("bare", length, "one_way = 9", ["one_way", "'9' has no unit", "12 m"]),
        ("unit", power, "power = \"65 V\"", ["power", "'65 V' is a voltage", "power is needed"]),
        ("length", length, "length = \"9 m\"", ["\"cabin feed\"", "no key 'length'", "one_way"]),
        ("end", "to = \"water pump\"", "to = \"watr pump\"", ["to", "nothing is named", "'water pump'"]),
        ("family", "family = \"miniature B\"", "family = \"miniature\"", ["family", "'miniature'", "gG"]),
        ("set", "rules = \"iec\"", "rules = \"eic\"", ["rules", "'eic'", "iec"]),
    ] {
        let (path, line) = changed(&format!("bad_{name}.toml"), before, after);
        is_refused(&[path], &[&[&line, words[0], words[1], words[2]]]);
    }
}

#[test]
fn names_that_stand_twice_are_refused() {
    let (path, _) = changed("twice.toml", "name = \"lights\"", "name = \"pump\"");
    is_refused(&[path], &[&["[[circuit]] \"pump\"", "the name is taken", "rename one"]]);
    let double = format!("{CABIN}\n[[load]]\nname = \"house\"\ncurrent = \"1 A\"\n");
    let (status, _, err) = run([file("twice_load.toml", double.as_bytes())]);
    assert_eq!(status, 2);
    assert!(err.contains("[[load]] \"house\": the name is taken by the bank of line"), "{err}");
}

#[test]
fn a_loop_is_named_by_the_circuit_that_closes_it() {
    let ring = format!(
        "{CABIN}\n[[circuit]]\nname = \"ring\"\nfrom = \"cabin\"\nto = \"house\"\none_way = \"9 m\"\n"
    );
    let (status, out, err) = run([file("ring.toml", ring.as_bytes())]);
    assert_eq!((status, out.as_str()), (2, ""));
    assert!(err.contains("[[circuit]] \"ring\": it closes a loop"), "{err}");
}

#[test]
fn no_load_is_an_error_for_design() {
    let head = "format = 1\n[site]\nname = \"a\"\nrules = \"us\"\nearthing = \"negative\"\n\
                ambient = [\"0 degC\", \"30 degC\"]\n[[bank]]\nname = \"bank\"\nchemistry = \"agm\"\n\
                nominal = \"12 V\"\ncapacity = \"100 Ah\"\ncut_off = \"10.5 V\"\nhighest = \"15 V\"\n\
                internal_resistance = \"5 mohm\"\n[[board]]\nname = \"board\"\nbusbar = \"100 A\"\n[[circuit]]\n\
                name = \"feeder\"\nfrom = \"bank\"\nto = \"board\"\none_way = \"1 m\"\n";
    let design = file("no_load_design.toml", head.as_bytes());
    is_refused(&[design], &[&["line 18, ", "[[circuit]] \"feeder\"", "no [[load]] is stated"]]);
}

#[test]
fn a_stock_that_cannot_serve_is_told_for_every_circuit() {
    let cut = CABIN.find("[[stock.cable]]").expect("the demo has a stock");
    let text =
        format!("{}[[stock.cable]]\nsize = \"1.5 mm2\"\ninsulation = \"PVC 70 degC\"\n", &CABIN[..cut]);
    let (status, out, err) = run([file("poor_stock.toml", text.as_bytes())]);
    assert_eq!((status, out.as_str()), (2, ""));
    for circuit in ["inverter feed", "cabin feed", "lights", "pump", "radio", "aerator", "gauge"] {
        let line = err.lines().find(|line| line.contains(&format!("[[circuit]] \"{circuit}\"")));
        let line = line.unwrap_or_else(|| panic!("{circuit} is not in:\n{err}"));
        assert!(line.starts_with("line ") && line.contains("add larger [[stock.cable]]"), "{line}");
    }
}

#[test]
fn all_problems_of_a_file_are_told_at_once_in_its_order() {
    let text = BADLY_BUILT
        .replacen("rules = \"us\"", "rules = \"usa\"", 1)
        .replacen("capacity = \"400 Ah\"", "capacity = \"400 A\"", 1)
        .replacen("size = \"4/0 AWG\"", "size = \"5/0 AWG\"", 1)
        .replacen("one_way = \"40 m\"", "one_way = \"40 V\"", 1);
    let (status, out, err) = run([file("several.toml", text.as_bytes())]);
    assert_eq!((status, out.as_str()), (2, ""));
    let numbers: Vec<u32> =
        err.lines().filter_map(|line| line.strip_prefix("line ")?.split(',').next()?.parse().ok()).collect();
    assert_eq!(numbers.len(), 3, "{err}");
    assert!(numbers.is_sorted(), "{err}");
}

#[test]
fn json_is_printed_with_the_same_status() {
    let json = PathBuf::from("--json");
    let of = |text: &str| {
        let site = ampwright::site::read(text).unwrap_or_else(|problems| panic!("{problems}"));
        ampwright::site::inspect(&site).unwrap_or_else(|problems| panic!("{problems}"))
    };
    let (heron, bad) = (of(HERON_POINT), of(BADLY_BUILT));
    let status = i32::from(heron.exit_code());
    assert_eq!(run([json.clone()]), (status, heron.to_json(), String::new()));
    assert_eq!(run([json.clone(), example("heron_point.toml")]), (status, heron.to_json(), String::new()));
    assert_eq!(run([json.clone(), example("badly_built.toml")]), (1, bad.to_json(), String::new()));
    let compare = PathBuf::from("--compare");
    let sites = [json.clone(), compare.clone(), example("heron_point.toml"), example("badly_built.toml")];
    assert_eq!(run(&sites), (1, bad.compare(&heron).to_json(), String::new()));
    let same = [json, compare, example("badly_built.toml"), example("badly_built.toml")];
    assert_eq!(run(&same), (0, bad.compare(&bad).to_json(), String::new()));
}

#[test]
fn wrong_arguments_beside_json_are_told_in_a_sentence() {
    let [json, compare] = ["--json", "--compare"].map(PathBuf::from);
    let site = example("heron_point.toml");
    is_refused(&[json.clone(), site.clone(), site.clone()], &[&["one site file at a time"]]);
    is_refused(&[json.clone(), compare.clone(), site.clone()], &[&["two site files to compare", "--json"]]);
    is_refused(&[json.clone(), json.clone()], &[&["'--json' is no option here", "--compare"]]);
    is_refused(&[json.clone(), PathBuf::from("--yaml")], &[&["'--yaml' is no option here"]]);
    is_refused(&[PathBuf::from("--yaml"), site.clone()], &[&["'--yaml' is no option here", "--json"]]);
    is_refused(&[site.clone(), json.clone()], &[&["--json comes first"]]);
    is_refused(&[compare, site.clone(), site, json.clone()], &[&["two site files to compare", "[--json]"]]);
    is_refused(&[json.clone(), PathBuf::from("")], &[&["cannot be read"]]);
    let bad = file("json_bad.toml", b"format = 1\n");
    let (status, out, err) = run([json, bad]);
    assert_eq!((status, out.as_str()), (2, ""));
    assert!(!err.is_empty() && !err.contains('{'), "{err}");
}
