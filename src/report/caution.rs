//! The caution that stands on everything a person reads.

/// What the figures are, and what they are not.
pub const CAUTION: &str = "Caution: a process sizing aid. Its figures come from published correlations, which differ among \
themselves by 15 to 30 % at flood. Local codes and licensed engineering practice decide; parts that contain pressure need a code \
calculation by a qualified person, and internals need their supplier's own rating. Nothing here states compliance with any code.";

/// The constants from memory on which a verdict rests, as a sentence.
pub fn from_memory(constants: &[String]) -> String {
    if constants.is_empty() {
        return "No constant from memory is in use.".to_owned();
    }
    format!(
        "The verdict rests on these constants from memory, not confirmed in a publication: {}.",
        constants.join("; ")
    )
}
