//! Short ways to ask a correlation, and to compare with a printed figure.

use chordwall::engine::correlation::catalogue::Catalogue;
use chordwall::input::builtin;
use std::sync::OnceLock;

fn catalogue() -> &'static Catalogue {
    static ALL: OnceLock<Catalogue> = OnceLock::new();
    ALL.get_or_init(|| builtin::catalogue().unwrap_or_else(|error| panic!("{error}")))
}

/// A packing of the table.
pub fn packing(name: &str) -> &'static chordwall::engine::correlation::packing::Packing {
    catalogue().packing(name).unwrap()
}

/// A named output at arguments in SI, in SI.
pub fn si(id: &str, output: &str, at: &[(&str, f64)]) -> f64 {
    try_si(id, output, at).unwrap_or_else(|error| panic!("{error}"))
}

/// The same where there may be no answer.
pub fn try_si(id: &str, output: &str, at: &[(&str, f64)]) -> Result<f64, String> {
    let record = catalogue().record(id).unwrap();
    let published: Vec<(&str, f64)> =
        at.iter().map(|(name, value)| (*name, value / record.input_unit(name).unwrap())).collect();
    let (value, _) = record.evaluate_output(output, &published).map_err(|error| error.to_string())?;
    Ok(value * record.output_unit(output).unwrap())
}

/// `got` agrees with a figure printed to a last place of `place`: half a unit of it.
#[track_caller]
pub fn printed(got: f64, printed: f64, place: f64) {
    assert!((got - printed).abs() <= 0.5 * place * (1.0 + 1e-9), "{got} against {printed} to the nearest {place}");
}

/// `got` lies within a stated relative band of `expected`.
#[track_caller]
pub fn within(got: f64, expected: f64, band: f64) {
    assert!((got / expected - 1.0).abs() <= band, "{got} against {expected} within {band}");
}
