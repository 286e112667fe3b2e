//! Findings in words.

use super::model::Table;
use super::number::Display;
use super::text::inert;
use crate::engine::findings::{Amount, Criterion, Finding, Status};
use crate::engine::result::Answer;
use crate::engine::units::Si;

/// A finding as a headline and its reasons.
#[derive(Clone, Debug, PartialEq)]
pub struct FindingText {
    /// How it came out.
    pub status: Status,
    /// What, where, value and limit.
    pub headline: String,
    /// Because of what.
    pub because: String,
}

/// A finding in words.
pub fn in_words(finding: &Finding, display: Display) -> FindingText {
    let mut headline =
        format!("{} of \"{}\" at \"{}\"", finding.criterion.name(), inert(&finding.subject), inert(&finding.point));
    if let Some(value) = finding.value {
        headline += &format!(", {} shares: {}", finding.shares.name(), display.amount(finding.criterion, value));
    }
    if let Some(limit) = finding.limit {
        let word = if finding.criterion.is_least() { "least" } else { "limit" };
        headline += &format!(", {word} {}", display.amount(finding.criterion, limit));
    }
    FindingText { status: finding.status, headline, because: inert(&finding.because) }
}

/// Those that are not met, then those that ask for attention; equal ones at several points are one line each.
pub fn not_met_or_attention(answer: &Answer, display: Display) -> Vec<FindingText> {
    answer.findings.iter().filter(|f| f.status != Status::Met).map(|f| in_words(f, display)).collect()
}

/// One line for each criterion that is met everywhere or somewhere: its worst figure and where.
pub fn met(answer: &Answer, display: Display) -> Table {
    let mut worst: Vec<(&Finding, f64, usize)> = Vec::new();
    for finding in answer.findings.iter().filter(|f| f.status == Status::Met) {
        let severity = severity(finding);
        match worst.iter_mut().find(|(known, _, _)| known.criterion == finding.criterion) {
            Some(entry) => {
                entry.2 += 1;
                if severity > entry.1 {
                    (entry.0, entry.1) = (finding, severity);
                }
            }
            None => worst.push((finding, severity, 1)),
        }
    }
    worst.sort_by_key(|(finding, _, _)| finding.criterion);
    let rows = worst
        .into_iter()
        .map(|(f, _, count)| {
            let show = |amount: Option<Amount>| amount.map_or_else(String::new, |a| display.amount(f.criterion, a));
            vec![
                f.criterion.name().to_owned(),
                format!("{} at {}", inert(&f.subject), inert(&f.point)),
                f.shares.name().to_owned(),
                count.to_string(),
                show(f.value),
                show(f.limit),
            ]
        })
        .collect();
    Table {
        title: "Met (the worst figure of each criterion)".to_owned(),
        heads: ["criterion", "worst at", "shares", "places", "figure", "limit"].map(str::to_owned).to_vec(),
        rows,
        words: 3,
    }
}

/// The number behind an amount, in SI.
pub fn si(amount: Amount) -> f64 {
    match amount {
        Amount::Fraction(value) => value,
        Amount::Pressure(value) => value.si(),
        Amount::Gradient(value) => value.si(),
        Amount::Velocity(value) => value.si(),
        Amount::Time(value) => value.si(),
        Amount::Length(value) => value.si(),
        Amount::WeirLoad(value) => value.si(),
    }
}

/// The unit of [`si`]; "" for a fraction.
pub fn unit(amount: Amount) -> &'static str {
    match amount {
        Amount::Fraction(_) => "",
        Amount::Pressure(_) => "Pa",
        Amount::Gradient(_) => "Pa/m",
        Amount::Velocity(_) => "m/s",
        Amount::Time(_) => "s",
        Amount::Length(_) => "m",
        Amount::WeirLoad(_) => "m3/s/m",
    }
}

/// How near the limit, for choosing the worst; findings without value or limit come last.
fn severity(finding: &Finding) -> f64 {
    match (finding.value.map(si), finding.limit.map(si)) {
        (Some(value), Some(limit)) if finding.criterion.is_least() => limit / value,
        (Some(value), Some(limit)) => value / limit,
        (Some(value), None) if finding.criterion == Criterion::Balance => value.abs(),
        _ => f64::NEG_INFINITY,
    }
}
