//! Who may know whom. One package has no crate walls, so this test reads the imports and holds the edges of DEVELOPERS.md.

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

/// Source files below src, as (path from src, text without what is compiled for tests only).
fn sources() -> Vec<(String, String)> {
    let src = root().join("src");
    let mut files = Vec::new();
    rust_files(&src, &mut files);
    files.sort();
    assert!(files.len() > 40, "only {} files found", files.len());
    let named: Vec<(String, String)> = files
        .into_iter()
        .map(|path| {
            let name = path.strip_prefix(&src).unwrap().to_string_lossy().replace('\\', "/");
            (name, std::fs::read_to_string(&path).unwrap())
        })
        .collect();
    let tests: BTreeSet<String> = named.iter().flat_map(|(name, text)| without_tests(name, text).1).collect();
    for test in &tests {
        assert!(named.iter().any(|(name, _)| name == test), "{test} is declared as a test module, but is not there");
    }
    named
        .into_iter()
        .filter(|(name, _)| !tests.contains(name))
        .map(|(name, text)| {
            let code = without_tests(&name, &text).0;
            (name, code)
        })
        .collect()
}

/// Text without the items under `#[cfg(test)]`, and the files that such items name as modules. Relies on rustfmt's shape: an item
/// ends with a line that ends in `;`, or with a closing brace as far to the right as its attribute.
fn without_tests(name: &str, text: &str) -> (String, Vec<String>) {
    let (mut code, mut modules) = (String::new(), Vec::new());
    let mut lines = text.lines();
    while let Some(line) = lines.next() {
        if line.trim_start() != "#[cfg(test)]" {
            code.push_str(line);
            code.push('\n');
            continue;
        }
        let indent = line.len() - line.trim_start().len();
        let mut path = None;
        for line in lines.by_ref() {
            let item = line.trim();
            if let Some(given) = item.strip_prefix("#[path = \"").and_then(|rest| rest.strip_suffix("\"]")) {
                path = Some(given.to_owned());
            } else if item.starts_with("#[") {
                continue;
            } else if let Some(module) = item.strip_prefix("mod ").and_then(|rest| rest.strip_suffix(';')) {
                modules.push(module_file(name, module, path));
                break;
            } else if (item.ends_with(';') || item == "}") && line.len() - line.trim_start().len() == indent {
                break;
            }
        }
    }
    (code, modules)
}

/// The file, as a path from src, of a module that the file `name` declares.
fn module_file(name: &str, module: &str, path: Option<String>) -> String {
    let (folder, file) = name.rsplit_once('/').unwrap_or(("", name));
    let own = match file.trim_end_matches(".rs") {
        "mod" | "lib" | "main" => folder.to_owned(),
        stem => format!("{folder}/{stem}"),
    };
    let file = path.map_or_else(|| format!("{own}/{module}.rs"), |path| format!("{folder}/{path}"));
    file.trim_start_matches('/').to_owned()
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

/// Layers that a file's paths reach, whether they start at the crate or climb by `super`.
fn reached(name: &str, code: &str) -> BTreeSet<String> {
    let mut own: Vec<&str> = name.trim_end_matches(".rs").split('/').collect();
    if own.last() == Some(&"mod") {
        own.pop();
    }
    let mut out = BTreeSet::new();
    for start in ["crate::", "super::"] {
        for (at, _) in code.match_indices(start) {
            let before = code[..at].chars().next_back();
            // The rest of a longer word or of a path that was already read from its start.
            if before.is_some_and(|c| c.is_alphanumeric() || c == '_' || c == ':') {
                continue;
            }
            let path: String =
                code[at..].chars().take_while(|c| c.is_alphanumeric() || *c == '_' || *c == ':').collect();
            let parts: Vec<&str> = path.split("::").collect();
            let climbs = parts.iter().take_while(|part| **part == "super").count();
            let from = if start == "crate::" { &[][..] } else { &own[..own.len().saturating_sub(climbs)] };
            let rest = &parts[if start == "crate::" { 1 } else { climbs }..];
            let mut full = from.iter().chain(rest).copied();
            match (full.next(), full.next()) {
                (Some("engine"), Some(second)) if !second.is_empty() => out.insert(format!("engine/{second}")),
                (Some("engine"), _) => out.insert("engine/*".to_owned()),
                (first, _) => out.insert(first.unwrap_or_default().to_owned()),
            };
        }
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
        for to in reached(&name, &code) {
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

/// Elsewhere than in engine/units.rs uom may only name a unit: `uom::si::<quantity>::<unit>`.
#[test]
fn quantities_come_from_one_file() {
    for (name, code) in sources().into_iter().filter(|(name, _)| name != "engine/units.rs") {
        for (at, _) in code.match_indices("uom::") {
            let path: String =
                code[at..].chars().take_while(|c| c.is_alphanumeric() || *c == '_' || *c == ':').collect();
            let parts: Vec<&str> = path.split("::").collect();
            let names_a_unit = matches!(parts.as_slice(), ["uom", "si", quantity, _]
                if !["f64", "f32"].contains(quantity) && quantity.starts_with(|c: char| c.is_ascii_lowercase()));
            assert!(names_a_unit, "{name} takes {path} past engine/units.rs");
        }
    }
}

#[test]
fn engine_knows_no_file_format_and_no_argument_parser() {
    for (name, code) in sources().into_iter().filter(|(name, _)| name.starts_with("engine/")) {
        for krate in ["serde", "serde_json", "toml", "toml_edit", "csv", "schemars", "clap", "miette", "prettytable"] {
            assert!(!code.contains(&format!("{krate}::")), "{name} uses {krate}");
        }
    }
}

#[test]
fn numerics_know_no_physics_and_no_units() {
    let units = ["_kg_s", "_kg_m3", "_pa", "_m", "_mm", "_m2", "_m_s", "_m3_s", "_pa_s", "_n_m"];
    let quantities = ["Length", "Area", "Pressure", "Velocity", "MassRate", "MassDensity", "Si"];
    for (name, code) in sources().into_iter().filter(|(name, _)| name.starts_with("engine/solve/")) {
        for word in code.split(|c: char| !c.is_alphanumeric() && c != '_') {
            let physics = quantities.contains(&word) || units.iter().any(|unit| word.ends_with(unit));
            assert!(!physics, "{name} contains {word}");
        }
    }
}

#[test]
fn mod_files_declare_and_re_export_only() {
    let all = sources();
    let mods: Vec<_> = all.iter().filter(|(name, _)| name.ends_with("/mod.rs")).collect();
    assert!(mods.len() > 5, "only {} found", mods.len());
    for (name, code) in mods {
        let logic = code.lines().find(|l| ["fn ", "impl ", "impl<", "macro_rules!"].iter().any(|w| l.contains(w)));
        assert!(logic.is_none(), "{name}: {logic:?}");
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

/// Every text file that is part of the project.
fn texts() -> Vec<(String, String)> {
    fn walk(dir: &Path, out: &mut Vec<PathBuf>) {
        for entry in std::fs::read_dir(dir).unwrap() {
            let path = entry.unwrap().path();
            let name = path.file_name().unwrap_or_default().to_string_lossy().into_owned();
            match path.is_dir() {
                true if [".git", "target", "__pycache__"].contains(&name.as_str()) => {}
                true => walk(&path, out),
                // A worktree's .git is a file, and Cargo.lock is written by cargo.
                false if [".git", "Cargo.lock"].contains(&name.as_str()) => {}
                false => out.push(path),
            }
        }
    }
    let mut files = Vec::new();
    walk(&root(), &mut files);
    files.sort();
    files
        .into_iter()
        .filter_map(|path| {
            let text = String::from_utf8(std::fs::read(&path).unwrap()).ok()?;
            Some((path.strip_prefix(root()).unwrap().to_string_lossy().into_owned(), text))
        })
        .collect()
}

#[test]
fn texts_name_no_path_of_one_machine_and_no_teaching_material() {
    // In two halves, so that this file does not hold what it looks for.
    let paths = [("/wo", "rk/"), ("/ro", "ot/"), ("/ho", "me/"), ("/tm", "p/"), ("/Use", "rs/")];
    let words = [("lect", "ure"), ("transc", "ript")];
    let all = texts();
    assert!(all.len() > 100, "only {} texts found", all.len());
    let mut wrong = Vec::new();
    for (name, text) in &all {
        for (number, line) in text.lines().enumerate() {
            let lower = line.to_lowercase();
            // A path of one machine starts where it stands; "solve/root.rs" and the like go on from something.
            let starts = |at: usize| !line[..at].ends_with(|c: char| c.is_alphanumeric() || c == '_' || c == '.');
            let path = paths.iter().any(|(a, b)| line.match_indices(&[*a, *b].concat()).any(|(at, _)| starts(at)));
            let word = words.iter().any(|(a, b)| lower.contains(&[*a, *b].concat()));
            if path || word {
                wrong.push(format!("{name}:{}: {}", number + 1, line.chars().take(100).collect::<String>()));
            }
        }
    }
    assert!(wrong.is_empty(), "{}", wrong.join("\n"));
}

// ---------------------------------------------------------------- the reading itself

#[test]
fn the_reader_sees_edges_however_they_are_written() {
    let edges = |name: &str, code: &str| reached(name, code).into_iter().collect::<Vec<_>>();
    assert_eq!(edges("engine/solve/root.rs", "use crate::engine::units::Si;"), ["engine/units"]);
    assert_eq!(edges("engine/solve/root.rs", "use crate::engine::{case, units};"), ["engine/*"]);
    assert_eq!(edges("engine/solve/root.rs", "let x = crate::report::text::f();"), ["report"]);
    assert_eq!(edges("engine/solve/root.rs", "use super::optimise::design_root;"), ["engine/solve"]);
    assert_eq!(edges("engine/solve/root.rs", "use super::super::design::work;"), ["engine/design"]);
    assert_eq!(edges("engine/solve/mod.rs", "use super::design::work;"), ["engine/design"]);
    assert_eq!(edges("engine/solve/root.rs", "use super::super::super::report::x;"), ["report"]);
    assert_eq!(edges("report/text.rs", "/* my_crate::input::x */"), [""; 0]);
}

#[test]
fn the_reader_leaves_out_what_is_compiled_for_tests_only() {
    let text = "use a;\n#[cfg(test)]\nmod tests {\n    fn f() {\n    }\n}\nuse b;\n\
                #[cfg(test)]\n#[path = \"c_test.rs\"]\nmod c;\n#[cfg(test)]\nmod d;\nuse e;\n";
    let (code, modules) = without_tests("engine/solve/deep.rs", text);
    assert_eq!(code, "use a;\nuse b;\nuse e;\n");
    assert_eq!(modules, ["engine/solve/c_test.rs", "engine/solve/deep/d.rs"]);
}
