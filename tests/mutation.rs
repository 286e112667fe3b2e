//! Thousands of damaged cases and tables through the whole program: no run panics, prints a figure that is none, or leaves a
//! partial file. Seeded, so that a failure can be repeated.
#![allow(missing_docs)]

use chordwall::cli::{Exit, Terminal, run};
use std::ffi::OsString;
use std::panic::{AssertUnwindSafe, catch_unwind};
use std::path::Path;

/// Variants of each shipped case.
const VARIANTS: u64 = 700;

/// A small generator with a seed (xorshift64*): the sequence is the same on every machine.
struct Dice(u64);

impl Dice {
    fn roll(&mut self, below: usize) -> usize {
        self.0 ^= self.0 >> 12;
        self.0 ^= self.0 << 25;
        self.0 ^= self.0 >> 27;
        (self.0.wrapping_mul(0x2545_f491_4f6c_dd1d) >> 33) as usize % below.max(1)
    }
}

const NUMBERS: [&str; 16] = [
    "0", "-1", "1e300", "1e-300", "NaN", "inf", "1e9", "0.0001", "99999", "1.0.0", "", "0x10", "1_000", "-0.0", "3",
    "0.999999",
];

/// Replaces one number of a text by another, or scales it.
fn change_number(text: &str, dice: &mut Dice) -> String {
    let starts: Vec<usize> = text
        .char_indices()
        .filter(|(i, c)| c.is_ascii_digit() && !text[..*i].ends_with(|p: char| p.is_ascii_alphanumeric() || p == '.'))
        .map(|(i, _)| i)
        .collect();
    if starts.is_empty() {
        return text.to_owned();
    }
    let start = starts[dice.roll(starts.len())];
    let length = text[start..].find(|c: char| !c.is_ascii_digit() && c != '.').unwrap_or(text.len() - start);
    let old = &text[start..start + length];
    let new = match (dice.roll(3), old.parse::<f64>()) {
        (0, _) | (_, Err(_)) => NUMBERS[dice.roll(NUMBERS.len())].to_owned(),
        (_, Ok(value)) => format!("{}", value * [0.1, 0.5, 0.9, 1.1, 2.0, 10.0][dice.roll(6)]),
    };
    format!("{}{new}{}", &text[..start], &text[start + length..])
}

fn change_lines(text: &str, dice: &mut Dice) -> String {
    let mut lines: Vec<&str> = text.lines().collect();
    let (a, b) = (dice.roll(lines.len()), dice.roll(lines.len()));
    match dice.roll(3) {
        0 => drop(lines.remove(a)),
        1 => lines.insert(b, lines[a]),
        _ => lines.swap(a, b),
    }
    lines.join("\n") + "\n"
}

fn change_bytes(text: &str, dice: &mut Dice) -> String {
    let mut bytes = text.as_bytes().to_vec();
    match dice.roll(3) {
        0 => {
            let at = dice.roll(bytes.len());
            bytes[at] ^= 1 << dice.roll(7);
        }
        1 => bytes.truncate(dice.roll(bytes.len())),
        _ => {
            let at = dice.roll(bytes.len());
            bytes.insert(at, b"\"[]=,.#\n-"[dice.roll(9)]);
        }
    }
    String::from_utf8_lossy(&bytes).into_owned()
}

fn damage(text: &str, dice: &mut Dice) -> String {
    let mut text = text.to_owned();
    for _ in 0..=dice.roll(3) {
        text = match dice.roll(6) {
            0 => change_lines(&text, dice),
            1 => change_bytes(&text, dice),
            _ => change_number(&text, dice),
        };
        if text.is_empty() {
            break;
        }
    }
    text
}

/// A word that stands in the input may be a label (a stage called "NaN") and is no figure of ours.
fn no_figure_that_is_none(text: &str, inputs: [&str; 2], what: &str) {
    for word in text.split(|c: char| !c.is_ascii_alphanumeric()) {
        let false_figure = matches!(word, "NaN" | "inf" | "Infinity");
        assert!(!false_figure || inputs.iter().any(|input| input.contains(word)), "{what} prints {word}:\n{text}");
    }
}

fn run_one(folder: &Path, case: &str, table_name: &str, table: &str, seed: u64) -> Exit {
    let (case_path, out) = (folder.join("case.toml"), folder.join("out.json"));
    std::fs::write(&case_path, case).unwrap();
    std::fs::write(folder.join(table_name), table).unwrap();
    let _ = std::fs::remove_file(&out);
    let args = ["chordwall", "check", case_path.to_str().unwrap(), "--stages", "--out", out.to_str().unwrap()];
    let (mut stdout, mut stderr) = (Vec::new(), Vec::new());
    let exit = run(args.map(OsString::from), Terminal::default(), &mut stdout, &mut stderr);
    let (stdout, stderr) = (String::from_utf8(stdout).unwrap(), String::from_utf8(stderr).unwrap());
    match exit {
        Exit::Met | Exit::NotMet => {
            no_figure_that_is_none(&stdout, [case, table], &format!("variant {seed}"));
            let written = std::fs::read_to_string(&out).unwrap();
            let document: serde_json::Value = serde_json::from_str(&written).unwrap();
            assert!(document["verdict"].is_string(), "variant {seed}");
            assert!(stderr.is_empty(), "variant {seed}: {stderr}");
        }
        Exit::BadInput | Exit::NoAnswer => {
            assert!(!out.exists(), "variant {seed} left a file");
            assert!(stdout.is_empty() && !stderr.trim().is_empty(), "variant {seed}");
        }
    }
    let names: Vec<_> = std::fs::read_dir(folder).unwrap().map(|e| e.unwrap().file_name()).collect();
    assert!(names.len() <= 3, "variant {seed} left {names:?}");
    exit
}

#[test]
fn damaged_input_never_panics_prints_no_false_figure_and_leaves_no_partial_file() {
    let mut ends = [0_usize; 4];
    for (number, name) in ["ketone", "alcohol", "hydrocarbon"].into_iter().enumerate() {
        let folder = tempfile::tempdir().unwrap();
        let read =
            |file: &str| std::fs::read_to_string(format!("{}/cases/{file}", env!("CARGO_MANIFEST_DIR"))).unwrap();
        let (case, table_name) = (read(&format!("{name}.toml")), format!("{name}-loads.csv"));
        let table = read(&table_name);
        for variant in 0..VARIANTS {
            let seed = 1 + variant + 1_000_000 * number as u64;
            let mut dice = Dice(seed.wrapping_mul(0x9e37_79b9_7f4a_7c15) | 1);
            // Damage mostly one of the two, so that the other lets the run go on.
            let (case, table) = match dice.roll(4) {
                0 => (damage(&case, &mut dice), damage(&table, &mut dice)),
                1 => (case.clone(), damage(&table, &mut dice)),
                _ => (damage(&case, &mut dice), table.clone()),
            };
            let outcome = catch_unwind(AssertUnwindSafe(|| run_one(folder.path(), &case, &table_name, &table, seed)));
            match outcome {
                Ok(exit) => ends[exit as usize] += 1,
                Err(_) => panic!("{name}, variant {seed} failed; its case:\n{case}"),
            }
        }
    }
    let [met, not_met, bad, _] = ends;
    assert!(met > 50 && not_met > 50 && bad > 300, "the damage is of too few kinds: {ends:?}");
}
