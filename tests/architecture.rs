//! Who may know whom. One package has no crate walls, so this test reads the imports and holds the edges of DEVELOPERS.md.
#![allow(missing_docs)]

use std::collections::BTreeSet;
use std::path::{Path, PathBuf};

/// Most lines of a source file; a longer one has more than one purpose.
const MOST_LINES: usize = 600;

fn root() -> PathBuf {
    PathBuf::from(env!("CARGO_MANIFEST_DIR"))
}

fn rust_files(dir: &Path, out: &mut Vec<PathBuf>) {
    for entry in std::fs::read_dir(dir).unwrap() {
        let path = entry.unwrap().path();
        if path.is_dir() {
            rust_files(&path, out);
        } else if path.extension().is_some_and(|e| e == "rs") {
            out.push(path);
        }
    }
}

/// Source files below src, as (path from src, text without its test module).
fn sources() -> Vec<(String, String)> {
    let src = root().join("src");
    let mut files = Vec::new();
    rust_files(&src, &mut files);
    files.sort();
    assert!(files.len() > 40, "only {} files found", files.len());
    files
        .into_iter()
        .map(|path| {
            let name = path.strip_prefix(&src).unwrap().to_string_lossy().replace('\\', "/");
            let text = std::fs::read_to_string(&path).unwrap();
            let code = text.split("#[cfg(test)]").next().unwrap_or_default().to_owned();
            (name, code)
        })
        .collect()
}

/// The layer a file belongs to: "engine/design", "input", "report", "cli", "" for lib.rs and main.rs.
fn layer(name: &str) -> String {
    let parts: Vec<&str> = name.split('/').collect();
    match parts.as_slice() {
        ["engine", file] => format!("engine/{}", file.trim_end_matches(".rs")),
        ["engine", folder, ..] => format!("engine/{folder}"),
        [folder, _, ..] => (*folder).to_owned(),
        _ => String::new(),
    }
}

/// Layers that a file's `crate::` paths reach.
fn reached(code: &str) -> BTreeSet<String> {
    let mut out = BTreeSet::new();
    for (at, _) in code.match_indices("crate::") {
        let rest = &code[at + "crate::".len()..];
        let path: String = rest.chars().take_while(|c| c.is_alphanumeric() || *c == '_' || *c == ':').collect();
        let mut parts = path.split("::");
        match (parts.next(), parts.next()) {
            (Some("engine"), Some(second)) if !second.is_empty() => out.insert(format!("engine/{second}")),
            (Some("engine"), _) => out.insert("engine/*".to_owned()),
            (Some(first), _) => out.insert(first.to_owned()),
            _ => false,
        };
    }
    out
}

/// The allowed edges: a layer, and what it may import beside itself.
const ALLOWED: &[(&str, &[&str])] = &[
    ("", &["cli", "engine/*", "input", "report"]),
    (
        "cli",
        &[
            "input",
            "report",
            "engine/case",
            "engine/correlation",
            "engine/design",
            "engine/error",
            "engine/findings",
            "engine/result",
            "engine/units",
        ],
    ),
    ("report", &["engine/case", "engine/findings", "engine/result", "engine/units"]),
    ("input", &["engine/case", "engine/correlation", "engine/error", "engine/units"]),
    ("engine/mod", &[]),
    ("engine/units", &[]),
    ("engine/error", &[]),
    ("engine/findings", &["engine/units"]),
    ("engine/result", &["engine/findings", "engine/units"]),
    ("engine/case", &["engine/correlation", "engine/units"]),
    ("engine/solve", &["engine/error"]),
    ("engine/geometry", &["engine/case", "engine/error", "engine/units"]),
    ("engine/correlation", &["engine/error", "engine/units"]),
    (
        "engine/hydraulics",
        &["engine/case", "engine/correlation", "engine/error", "engine/geometry", "engine/solve", "engine/units"],
    ),
    (
        "engine/design",
        &[
            "engine/case",
            "engine/correlation",
            "engine/error",
            "engine/findings",
            "engine/geometry",
            "engine/hydraulics",
            "engine/result",
            "engine/solve",
            "engine/units",
        ],
    ),
];

#[test]
fn imports_follow_the_allowed_edges() {
    let mut wrong = Vec::new();
    for (name, code) in sources() {
        let from = layer(&name);
        let allowed = ALLOWED.iter().find(|(layer, _)| *layer == from);
        let Some((_, allowed)) = allowed else { panic!("{name}: layer {from} is not in the list of edges") };
        for to in reached(&code) {
            let own = to == from || (from.is_empty());
            if !own && !allowed.contains(&to.as_str()) {
                wrong.push(format!("{name} -> {to}"));
            }
        }
    }
    assert!(wrong.is_empty(), "forbidden imports:\n{}", wrong.join("\n"));
}

#[test]
fn foreign_crates_that_may_be_replaced_are_known_to_one_file_each() {
    let one_place = [
        ("argmin", "engine/solve/optimise.rs"),
        ("prettytable", "report/terminal.rs"),
        ("miette", "cli/render.rs"),
        ("tempfile", "cli/files.rs"),
        ("sha2", "cli/commands/answer.rs"),
        ("clap_complete", "cli/commands/generate.rs"),
        ("clap_mangen", "cli/commands/generate.rs"),
        ("toml_edit", "input/write_back.rs"),
    ];
    let all = sources();
    for (krate, place) in one_place {
        let path = format!("{krate}::");
        let users: Vec<&str> = all
            .iter()
            .filter(|(_, code)| code.lines().any(|l| !l.trim_start().starts_with("//") && l.contains(&path)))
            .map(|(name, _)| name.as_str())
            .collect();
        assert_eq!(users, [place], "{krate}");
    }
}

#[test]
fn quantities_come_from_one_file() {
    for (name, code) in sources() {
        if name != "engine/units.rs" {
            assert!(!code.contains("uom::si::f64"), "{name} takes quantities past engine/units.rs");
        }
    }
}

#[test]
fn engine_and_input_touch_no_file_clock_or_screen() {
    let forbidden =
        ["std::fs", "std::env", "std::time", "std::process", "println!", "eprintln!", "print!(", "dbg!(", "std::io"];
    for (name, code) in
        sources().into_iter().filter(|(name, _)| name.starts_with("engine/") || name.starts_with("input/"))
    {
        for word in forbidden {
            assert!(!code.contains(word), "{name} contains {word}");
        }
    }
}

#[test]
fn only_cli_opens_files() {
    for (name, code) in sources() {
        if code.contains("std::fs::") {
            assert_eq!(name, "cli/files.rs");
        }
    }
}

#[test]
fn no_lint_is_allowed_without_being_expected() {
    for (name, code) in sources() {
        assert!(
            !code.contains("#[allow(") && !code.contains("#![allow("),
            "{name} allows a lint; expect it with a reason"
        );
    }
}

#[test]
fn no_source_file_is_longer_than_the_ceiling() {
    let src = root().join("src");
    for (name, _) in sources() {
        let lines = std::fs::read_to_string(src.join(&name)).unwrap().lines().count();
        assert!(lines <= MOST_LINES, "{name} has {lines} lines; split it by purpose");
    }
}

#[test]
fn top_level_holds_exactly_what_the_layout_names() {
    let allowed =
        ["Cargo.toml", "Cargo.lock", "README.md", "DEVELOPERS.md", "src", "correlations", "tests", "cases", "target"];
    for entry in std::fs::read_dir(root()).unwrap() {
        let name = entry.unwrap().file_name().to_string_lossy().into_owned();
        assert!(name.starts_with('.') || allowed.contains(&name.as_str()), "{name} has no place at the top level");
    }
}
