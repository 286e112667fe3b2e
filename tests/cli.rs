//! The program as a whole: statuses, files, JSON, what people read.
#![allow(missing_docs)]

#[path = "cli/correlations.rs"]
mod correlations;
#[path = "cli/figures.rs"]
mod figures;
#[path = "cli/files.rs"]
mod files;
#[path = "cli/json.rs"]
mod json;
#[path = "cli/outputs.rs"]
mod outputs;
#[path = "cli/screens.rs"]
mod screens;
#[path = "cli/statuses.rs"]
mod statuses;

use assert_cmd::Command;
use std::path::{Path, PathBuf};

/// The program, without colour variables of the outside.
fn chordwall(args: &[&str]) -> Command {
    let mut command = Command::cargo_bin("chordwall").unwrap();
    command.env_remove("NO_COLOR").env_remove("CLICOLOR_FORCE").env_remove("CLICOLOR").args(args);
    command
}

struct Run {
    status: i32,
    out: String,
    err: String,
}

fn run(args: &[&str]) -> Run {
    let output = chordwall(args).output().unwrap();
    Run {
        status: output.status.code().unwrap(),
        out: String::from_utf8(output.stdout).unwrap(),
        err: String::from_utf8(output.stderr).unwrap(),
    }
}

fn shipped(name: &str) -> String {
    format!("{}/cases/{name}.toml", env!("CARGO_MANIFEST_DIR"))
}

const SHIPPED: [&str; 3] = ["ketone", "alcohol", "hydrocarbon"];

/// A copy of a shipped case and its table in a folder of its own, the case's text edited.
fn copy(name: &str, folder: &Path, edit: impl Fn(&str) -> String) -> PathBuf {
    let text = std::fs::read_to_string(shipped(name)).unwrap();
    let case = folder.join(format!("{name}.toml"));
    std::fs::write(&case, edit(&text)).unwrap();
    let table = format!("{}/cases/{name}-loads.csv", env!("CARGO_MANIFEST_DIR"));
    std::fs::copy(table, folder.join(format!("{name}-loads.csv"))).unwrap();
    case
}

fn path(path: &Path) -> &str {
    path.to_str().unwrap()
}

/// Names of the files of a folder, sorted.
fn listing(folder: &Path) -> Vec<String> {
    let mut names: Vec<String> =
        std::fs::read_dir(folder).unwrap().map(|e| e.unwrap().file_name().to_string_lossy().into_owned()).collect();
    names.sort();
    names
}
