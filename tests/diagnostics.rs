//! Every broken file under `tests/diagnostics` gives the message text beside it, and nothing that is mutated panics.
//!
//! `case/NAME.toml` is a broken case, checked with `good.csv`; `table/NAME.csv` is a broken table, checked with
//! `good.toml`. The expected text is `NAME.txt`. With the environment variable `REWRITE_DIAGNOSTICS` set, the texts are
//! written instead of compared: read every one of them before committing it.

use chordwall::engine::correlation::catalogue::Catalogue;
use chordwall::input;
use std::fs;
use std::path::{Path, PathBuf};

fn folder() -> PathBuf {
    Path::new(env!("CARGO_MANIFEST_DIR")).join("tests/diagnostics")
}

fn good(name: &str) -> String {
    fs::read_to_string(folder().join(name)).expect("the good files exist")
}

fn catalogue() -> Catalogue {
    input::builtin::catalogue().expect("the built-in correlations can be read")
}

/// The messages of a case with its table; None if nothing is wrong.
fn messages(case: &str, table: &str, catalogue: &Catalogue) -> Option<String> {
    let opened = match input::open("case.toml", case) {
        Ok(opened) => opened,
        Err(diagnostics) => return Some(diagnostics.to_plain_text()),
    };
    let table = opened.table().is_some().then_some(table);
    opened.check(table, catalogue).err().map(|diagnostics| diagnostics.to_plain_text())
}

fn files(kind: &str, ending: &str) -> Vec<PathBuf> {
    let entries = fs::read_dir(folder().join(kind)).expect("the folder exists");
    let paths = entries.map(|entry| entry.expect("an entry can be read").path());
    let mut files: Vec<PathBuf> = paths.filter(|path| path.extension().is_some_and(|found| found == ending)).collect();
    files.sort();
    files
}

/// Compares (or rewrites) the text beside a file; what differs is returned.
fn compare(path: &Path, found: &str) -> Option<String> {
    let expected_path = path.with_extension("txt");
    if std::env::var_os("REWRITE_DIAGNOSTICS").is_some() {
        fs::write(&expected_path, found).expect("the text can be written");
        return None;
    }
    let expected = fs::read_to_string(&expected_path).unwrap_or_default();
    (expected != found).then(|| format!("{}\n--- expected\n{expected}\n--- found\n{found}", path.display()))
}

#[test]
fn every_broken_file_gives_its_message() {
    let catalogue = catalogue();
    let cases = files("case", "toml");
    let tables = files("table", "csv");
    assert!(cases.len() + tables.len() >= 40, "only {} + {} broken files", cases.len(), tables.len());
    let mut differing = Vec::new();
    for path in &cases {
        let text = fs::read_to_string(path).expect("the case can be read");
        let found = messages(&text, &good("good.csv"), &catalogue);
        differing.extend(compare(path, &found.unwrap_or_else(|| panic!("{} is not broken", path.display()))));
    }
    for path in &tables {
        let text = fs::read_to_string(path).expect("the table can be read");
        let found = messages(&good("good.toml"), &text, &catalogue);
        differing.extend(compare(path, &found.unwrap_or_else(|| panic!("{} is not broken", path.display()))));
    }
    assert!(differing.is_empty(), "{}", differing.join("\n\n"));
}

#[test]
fn the_good_files_are_good() {
    assert_eq!(messages(&good("good.toml"), &good("good.csv"), &catalogue()), None);
}

#[test]
fn every_message_marks_something_and_says_what_would_be_right_or_why() {
    for (kind, _) in [("case", "toml"), ("table", "csv")] {
        for path in files(kind, "txt") {
            let text = fs::read_to_string(&path).expect("the text can be read");
            for item in text.split("\n\n") {
                assert!(item.contains('^'), "{}: no mark in\n{item}", path.display());
                assert!(
                    item.contains("help:")
                        || item.contains("must be")
                        || item.contains("cannot be")
                        || item.contains("beyond"),
                    "{}: no help in\n{item}",
                    path.display()
                );
            }
        }
    }
}

/// A small generator of known sequence (xorshift64*), so that a failure can be run again.
struct Dice(u64);

impl Dice {
    fn next(&mut self) -> u64 {
        self.0 ^= self.0 >> 12;
        self.0 ^= self.0 << 25;
        self.0 ^= self.0 >> 27;
        self.0.wrapping_mul(0x2545_F491_4F6C_DD1D) >> 11
    }
    fn below(&mut self, limit: usize) -> usize {
        (self.next() % limit.max(1) as u64) as usize
    }
    fn pick<'a>(&mut self, from: &[&'a str]) -> &'a str {
        from[self.below(from.len())]
    }
}

const WEIRD: [&str; 24] = [
    "0",
    "-1",
    "1e308",
    "1e-308",
    "-0.0",
    "nan",
    "inf",
    "-inf",
    "1e999",
    "99999999999999999999",
    "\"\"",
    "\"-3 m\"",
    "\"NaN m\"",
    "\"1e12 m\"",
    "\"5 kg/m3\"",
    "\"0 t/h\"",
    "[]",
    "{}",
    "true",
    "1979-05-27",
    "0x7fffffffffffffff",
    "1e12",
    "\"\\u0000 m\"",
    "\"1e-12 Pa\"",
];

/// One to three changes to a text: a byte, a line, a number, the end.
fn mutated(text: &str, dice: &mut Dice) -> String {
    let mut text = text.to_owned();
    for _ in 0..=dice.below(3) {
        let mut lines: Vec<String> = text.split('\n').map(str::to_owned).collect();
        let line = dice.below(lines.len());
        match dice.below(8) {
            0 => {
                let mut bytes = text.into_bytes();
                if !bytes.is_empty() {
                    let at = dice.below(bytes.len());
                    bytes[at] ^= 1 << dice.below(8);
                }
                text = String::from_utf8_lossy(&bytes).into_owned();
                continue;
            }
            1 => drop(lines.remove(line)),
            2 => lines.insert(line, lines[line].clone()),
            3 => {
                let other = dice.below(lines.len());
                lines.swap(line, other);
            }
            4 | 5 => {
                // A value of the case, or a field of the table.
                if let Some((key, _)) = lines[line].split_once(" = ") {
                    lines[line] = format!("{key} = {}", dice.pick(&WEIRD));
                } else {
                    let separator = if lines[line].contains(';') { ";" } else { "," };
                    let mut fields: Vec<&str> = lines[line].split(separator).collect();
                    let field = dice.below(fields.len());
                    fields[field] = dice.pick(&WEIRD).trim_matches('"');
                    lines[line] = fields.join(separator);
                }
            }
            6 => {
                let from = dice.below(lines[line].chars().count() + 1);
                let kept: String = lines[line].chars().take(from).collect();
                lines[line] =
                    kept + dice.pick(&["\u{2212}", "é", "\"", "]", "[[", "\u{0}", "=", "#", ",", ";", "^0.5", "\r"]);
            }
            _ => lines.truncate(line),
        }
        text = lines.join("\n");
    }
    text
}

/// True if the debug text of a case shows a number that is not finite.
fn shows_no_finite_number(case: &chordwall::engine::case::Case) -> bool {
    let text = format!("{case:?}");
    let mut words = text.split(|c: char| !(c.is_alphanumeric() || c == '-' || c == '_' || c == '"'));
    words.any(|word| matches!(word, "NaN" | "inf" | "-inf"))
}

#[test]
fn no_mutation_panics_or_brings_a_number_that_is_not_finite_into_a_case() {
    let catalogue = catalogue();
    let read = |name: &str| {
        fs::read_to_string(Path::new(env!("CARGO_MANIFEST_DIR")).join("tests").join(name)).expect("the file exists")
    };
    let leaving = good("good.toml").replace("\"below stage\"", "\"leaving stage\"");
    let pairs = [
        (good("good.toml"), good("good.csv")),
        (leaving, good("good.csv")),
        (read("input/contract.toml"), read("input/contract.csv")),
    ];
    let mut dice = Dice(0x00C0_FFEE_0000_0001);
    let (mut passed, mut refused) = (0, 0);
    for round in 0..6000 {
        let (case, table) = &pairs[round % pairs.len()];
        let case = if round % 2 == 0 { mutated(case, &mut dice) } else { case.clone() };
        let table = if round % 2 == 1 { mutated(table, &mut dice) } else { table.clone() };
        let outcome = input::open("case.toml", &case).and_then(|opened| {
            let named = opened.table().is_some();
            opened.check(named.then_some(&table), &catalogue)
        });
        match outcome {
            Ok(case) => {
                passed += 1;
                assert!(!shows_no_finite_number(&case), "round {round}: {case:?}");
                for row in case.points.iter().flat_map(|point| &point.loads).flatten() {
                    assert!(row.vapour_density < row.liquid_density, "round {round}");
                }
            }
            Err(diagnostics) => {
                refused += 1;
                assert!(!diagnostics.items.is_empty(), "round {round}: refused without a reason");
                for item in &diagnostics.items {
                    let source = &diagnostics.sources[item.source];
                    assert!(source.text.get(item.span.clone()).is_some(), "round {round}: {item:?}");
                }
                assert!(!diagnostics.to_plain_text().is_empty());
            }
        }
    }
    assert!(passed > 100 && refused > 1000, "the mutations are worth something: {passed} passed, {refused} refused");
}
