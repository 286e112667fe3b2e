//! Broken files and what is said of them.

use super::*;

const GOOD: &str = r#"id = "own"
title = "Own factor"
form = "surface_tension_factor"
equation = "factor = (sigma/reference)^exponent"

[source]
key = "Own"
read_in = "Own"
location = "eq. 1"
standing = "read"

[[input]]
name = "surface_tension"
unit = "mN/m"
range_note = "none stated"

[[output]]
name = "factor"
unit = "1"

[coefficients]
reference = 20
exponent = 0.2

[[check]]
at = { surface_tension = "20 dyn/cm" }
expect = 1.000
digits = 4
origin = "recomputed"
source = "by definition"
"#;

fn message(text: &str) -> String {
    read("own.toml", "own", text).map(|_| "no error".to_owned()).unwrap_or_else(|error| error.to_string())
}

fn changed(from: &str, to: &str) -> String {
    assert_eq!(GOOD.matches(from).count(), 1, "{from}");
    message(&GOOD.replace(from, to))
}

#[test]
fn a_good_file_reads() {
    let Content::Record(record) = read("own.toml", "own", GOOD).unwrap() else { panic!("no record") };
    assert_eq!(record.checks.len(), 1);
    assert_eq!(record.checks[0].at, [("surface_tension".to_owned(), 20.0)]);
    assert_eq!(record.checks[0].tolerance, 0.0005);
    assert!(record.run_checks().iter().all(|outcome| outcome.passed));
    assert!(read_head("own.toml", "own", GOOD).unwrap().checks.is_empty());
}

#[test]
fn each_fault_is_named_with_its_line_text_reason_and_cure() {
    let cases = [
        (
            r#"id = "own""#,
            r#"id = "onw""#,
            r#"own.toml:1: `"onw"`: the id is not the file's name; name it "own", or rename the file"#,
        ),
        (
            "surface_tension_factor",
            "surface_tension_facto",
            "own.toml:3: `\"surface_tension_facto\"`: there is no form \"surface_tension_facto\"; did you mean \"surface_tension_factor\"?",
        ),
        (
            "standing = \"read\"",
            "standing = \"rad\"",
            "own.toml:10: `\"rad\"`: there is no standing \"rad\"; did you mean \"read\"?",
        ),
        (
            "unit = \"mN/m\"",
            "unit = \"mm\"",
            "own.toml:14: `\"mm\"`: \"mm\" is no unit for this; did you mean \"N/m\"?",
        ),
        (
            "range_note = \"none stated\"\n",
            "",
            "own.toml:12: `[[input]]`: no range and no word on it; add min, max, or range_note = \"none stated\"",
        ),
        (
            "range_note = \"none stated\"",
            "min = 30\nmax = 10",
            "own.toml:12: `[[input]]`: its range runs from 30 to 10; min must be less than max",
        ),
        (
            "exponent = 0.2",
            "exponnt = 0.2",
            "own.toml:21: `[coefficients]`: coefficient \"exponent\" is missing; add exponent = ...\n\
             own.toml:23: `exponnt`: the form has no coefficient \"exponnt\"; did you mean \"exponent\"?",
        ),
        (
            "exponent = 0.2",
            "exponent = nan",
            "own.toml:23: `nan`: it is not a finite number; write a decimal number without quotes or unit\nown.toml:23: `nan`: 0 values; this form takes 1\nown.toml:21: `[coefficients]`: coefficient \"exponent\" is missing; add exponent = ...",
        ),
        ("exponent = 0.2", "exponent = [0.2, 0.3]", "own.toml:23: `[0.2, 0.3]`: 2 values; this form takes 1"),
        (
            "digits = 4",
            "",
            "own.toml:25: `[[check]]`: no tolerance follows; add digits = the number of significant digits printed",
        ),
        (
            "\"recomputed\"",
            "\"read-from-figure\"",
            "own.toml:25: `[[check]]`: a reading from a figure needs its reading error, and has no digits; add reading_error = 0.03 (relative)",
        ),
        (
            "\"20 dyn/cm\"",
            "\"20 mm\"",
            "own.toml:26: `\"20 mm\"`: no figure with a unit for this; a number, a space and one of: N/m, mN/m, dyn/cm",
        ),
        ("surface_tension = \"20", "sigma = \"20", "own.toml:26: `sigma`: it is no input; one of: surface_tension"),
        ("location = \"eq. 1\"\n", "", "own.toml:6: `[source]`: the source lacks \"location\"; add location = ..."),
        ("title = \"Own factor\"", "title = \"\"", "own.toml:2: `\"\"`: it is empty; write a text"),
        ("title = \"Own factor\"", "title = 3", "own.toml:2: `3`: it is of type integer; write a text in quotes"),
        (
            "[coefficients]",
            "[uncertainty]\nvalue = 1\n\n[coefficients]",
            "own.toml:21: `uncertainty`: the file has no key \"uncertainty\"; one of: id, title, form, serves, source, input, output, from_memory, coefficients, equation, notes",
        ),
        (
            "digits = 4",
            "digits = 4\nband = 1",
            "own.toml:29: `band`: a check has no key \"band\"; one of: output, at, expect, origin, digits, reading_error, source",
        ),
    ];
    for (from, to, expected) in cases {
        let got = changed(from, to);
        for line in expected.lines() {
            assert!(got.lines().any(|said| said == line), "for {to}:\n{got}\nwithout\n{line}");
        }
    }
}

#[test]
fn all_faults_come_in_one_go_in_order_of_lines() {
    let text = GOOD
        .replace("standing = \"read\"", "standing = \"rad\"")
        .replace("exponent = 0.2", "exponent = \"high\"")
        .replace("digits = 4", "digits = 0.5");
    let error = read("own.toml", "own", &text).unwrap_err();
    let lines: Vec<usize> = error.problems.iter().map(|problem| problem.line).collect();
    assert!(lines.is_sorted(), "{lines:?}");
    for line in [10, 23] {
        assert!(lines.contains(&line), "{lines:?}");
    }
}

#[test]
fn broken_toml_is_an_error_with_its_line() {
    let got = changed("reference = 20", "reference = = 20");
    assert!(got.starts_with("own.toml:22: "), "{got}");
    assert!(got.contains("not TOML"), "{got}");
}

#[test]
fn every_prefix_of_a_file_and_every_deleted_line_is_read_or_refused_without_panic() {
    for (end, _) in GOOD.char_indices() {
        let _ = read("own.toml", "own", &GOOD[..end]);
    }
    let lines: Vec<&str> = GOOD.lines().collect();
    for left_out in 0..lines.len() {
        let text: Vec<&str> = lines.iter().enumerate().filter(|(n, _)| *n != left_out).map(|(_, l)| *l).collect();
        let _ = read("own.toml", "own", &text.join("\n"));
    }
}

const PACKING: &str = r#"id = "mine"
title = "Own packings"

[sources]
test = "own measurement, 2019"

[[packing]]
name = "own sheet"
kind = "structured"
material = "metal"
specific_area = { value = 200, unit = "1/m", standing = "read", source = "test" }
packing_factor = { value = 15, unit = "1/ft", standing = "doubtful", source = "test" }
"#;

#[test]
fn a_packing_table_reads_into_si_and_names_what_is_doubtful() {
    use crate::engine::units::Si;
    let Content::Packings(packings) = read("mine.toml", "mine", PACKING).unwrap() else { panic!("no packings") };
    let [entry] = packings.as_slice() else { panic!("{packings:?}") };
    assert_eq!(entry.packing.factor_later.unwrap().si(), 15.0 / 0.3048);
    assert_eq!(entry.packing.from_memory, ["packing_factor"]);
    assert_eq!(entry.constants[0].source, "own measurement, 2019");
}

#[test]
fn faults_of_a_packing_are_named() {
    let cases = [
        (
            "kind = \"structured\"",
            "kind = \"sheet\"",
            "mine.toml:9: `\"sheet\"`: \"sheet\" will not do; one of: random, structured",
        ),
        (
            "value = 200",
            "value = -200",
            "mine.toml:11: `{ value = -200, unit = \"1/m\", standing = \"read\", source = \"test\" }`: its value will not do; 1 positive number(s)",
        ),
        (
            "packing_factor =",
            "packing_facto =",
            "mine.toml:12: `packing_facto`: a packing has no key \"packing_facto\"; did you mean \"packing_factor\"?",
        ),
    ];
    for (from, to, expected) in cases {
        let got = read("mine.toml", "mine", &PACKING.replace(from, to)).unwrap_err().to_string();
        assert!(got.lines().any(|said| said == expected), "{got}\nwithout\n{expected}");
    }
}
