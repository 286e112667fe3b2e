//! `size` and `check`: read a case, work it, show and write the answer.

use crate::cli::args::AnswerArgs;
use crate::cli::exit::{Exit, Stop};
use crate::cli::files::{self, Staged};
use crate::cli::output::print;
use crate::engine::case::Case;
use crate::engine::correlation::catalogue::Catalogue;
use crate::engine::design::work;
use crate::engine::result::Answer;
use crate::engine::units::Length;
use crate::input::{Found, Opened, builtin, open, write_back};
use crate::report::model::{Meta, Report, Show};
use crate::report::{csv, json, markdown, terminal};
use sha2::{Digest, Sha256};
use std::io::Write;
use std::path::{Path, PathBuf};

/// Kinds of files that `--out` writes.
#[derive(Clone, Copy)]
enum OutKind {
    Json,
    Csv,
    Markdown,
}

/// Where `--out` writes and what; asked before anything is worked, so that a wrong ending costs nothing.
fn out_kind(args: &AnswerArgs) -> Result<Option<(&Path, OutKind)>, Stop> {
    let Some(path) = args.out.as_deref() else { return Ok(None) };
    let kind = match path.extension().and_then(|e| e.to_str()) {
        Some("json") => OutKind::Json,
        Some("csv") => OutKind::Csv,
        Some("md") => OutKind::Markdown,
        _ => {
            let why = "the ending says what to write: .json, .csv or .md".to_owned();
            return Err(Stop::File { path: path.to_owned(), why });
        }
    };
    Ok(Some((path, kind)))
}

/// The files of a run: what `--out` names, and those that are complete already.
struct Outputs<'a> {
    out: Option<(&'a Path, OutKind)>,
    staged: Staged,
}

/// A case that was read, with what identifies it.
struct Read {
    text: String,
    case: Case,
    catalogue: Catalogue,
    meta: Meta,
    /// Where the table was read, if there is one.
    table: Option<PathBuf>,
}

/// Finds what the case leaves open; writes it into a copy of the case if asked.
pub fn size(args: &AnswerArgs, write: Option<&Path>, colour: bool, stdout: &mut dyn Write) -> Result<Exit, Stop> {
    let out = out_kind(args)?;
    let read = read(args)?;
    if let (Some(path), Some(table)) = (write, &read.table) {
        files::spare(path, table, "the loads table")?;
    }
    let answer = work(&read.case, &read.catalogue)?;
    let mut staged = Staged::default();
    if let Some(path) = write {
        let text = write_back(&read.text, &found(&answer)).map_err(|e| Stop::Usage(e.to_string()))?;
        staged.add(path, text.as_bytes())?;
    }
    show(args, Outputs { out, staged }, &read, &answer, false, colour, stdout)
}

/// Rates the case against every criterion and shows each limit with its origin.
pub fn check(args: &AnswerArgs, colour: bool, stdout: &mut dyn Write) -> Result<Exit, Stop> {
    let out = out_kind(args)?;
    let read = read(args)?;
    let answer = work(&read.case, &read.catalogue)?;
    show(args, Outputs { out, staged: Staged::default() }, &read, &answer, true, colour, stdout)
}

fn read(args: &AnswerArgs) -> Result<Read, Stop> {
    let text = files::read_text(&args.case, files::MOST_CASE_BYTES)?;
    let name = files::name_of(&args.case);
    let opened = open(&name, &text).map_err(Stop::Input)?;
    let place = opened.table().map(|table| files::beside(&args.case, table));
    let table = opened.table().map(|table| files::read_beside(&args.case, table)).transpose()?;
    // A slip of the pen must not cost the loads: an output never replaces what it is made from.
    if let Some(out) = &args.out {
        files::spare(out, &args.case, "the case")?;
        place.as_deref().map_or(Ok(()), |table| files::spare(out, table, "the loads table"))?;
    }
    let (case, catalogue) = checked(&name, &text, opened, table.as_deref(), args.correlations.as_deref())?;
    let mut hash = Sha256::new();
    hash.update(text.as_bytes());
    hash.update(table.as_deref().unwrap_or_default().as_bytes());
    let input_sha256 = hash.finalize().iter().map(|byte| format!("{byte:02x}")).collect();
    let meta = Meta { version: env!("CARGO_PKG_VERSION").to_owned(), input_sha256, file: name };
    Ok(Read { text, case, catalogue, meta, table: place })
}

/// The checked case with the correlations it needs. Only those are read: a message about a name that is not among them is made
/// again with all of them, so that it can say which name would be right.
fn checked(
    name: &str,
    text: &str,
    opened: Opened,
    table: Option<&str>,
    dir: Option<&Path>,
) -> Result<(Case, Catalogue), Stop> {
    if dir.is_none()
        && let Ok(catalogue) = builtin::catalogue_for_case(opened.needs(), &opened.packings())
        && let Ok(case) = opened.check(table, &catalogue)
    {
        return Ok((case, catalogue));
    }
    let catalogue = catalogue(dir)?;
    let case = open(name, text).and_then(|opened| opened.check(table, &catalogue)).map_err(Stop::Input)?;
    Ok((case, catalogue))
}

/// The built-in correlations, and the user's beside them.
pub fn catalogue(dir: Option<&Path>) -> Result<Catalogue, Stop> {
    let unusable = |error: builtin::CatalogueError| Stop::Usage(error.to_string());
    match dir {
        Some(dir) => {
            let files: Vec<(String, String)> =
                files::read_correlations(dir)?.into_iter().map(|s| (s.name, s.text)).collect();
            builtin::catalogue_with(&files).map_err(unusable)
        }
        None => builtin::catalogue().map_err(unusable),
    }
}

fn found(answer: &Answer) -> Found {
    let mut bands: Vec<(&str, Vec<Length>)> = Vec::new();
    for wall in &answer.walls {
        match bands.last_mut() {
            Some((band, positions)) if *band == wall.band => positions.push(wall.position),
            _ => bands.push((&wall.band, vec![wall.position])),
        }
    }
    Found {
        above: answer.shell.above,
        wall_zone: answer.shell.wall_zone,
        below: answer.shell.below,
        positions: bands.into_iter().map(|(_, positions)| positions).collect(),
    }
}

/// Prints the answer and puts the files in their places. All bytes are made and stored beside their targets first, so that a run
/// that ends with 2 has written nothing.
fn show(
    args: &AnswerArgs,
    outputs: Outputs<'_>,
    read: &Read,
    answer: &Answer,
    limits: bool,
    colour: bool,
    stdout: &mut dyn Write,
) -> Result<Exit, Stop> {
    let Outputs { out, mut staged } = outputs;
    let show = Show { display: args.display.into(), stages: args.stages, limits };
    let document = || json::document(&read.case, answer, &read.meta, show);
    let report = || Report::new(&read.case, answer, &read.meta, show);
    let as_json = || json::bytes(&document()).map_err(|e| Stop::Usage(e.to_string()));
    if let Some((path, kind)) = out {
        let bytes = match kind {
            OutKind::Json => as_json()?,
            OutKind::Csv => csv::render(answer, &document(), &read.meta).map_err(|e| Stop::Usage(e.to_string()))?,
            OutKind::Markdown => markdown::render(&report()),
        };
        staged.add(path, &bytes)?;
    }
    let bytes = if args.json { as_json()? } else { terminal::render(&report(), colour).into_bytes() };
    print(stdout, &bytes)?;
    staged.commit()?;
    Ok(answer.verdict.into())
}
