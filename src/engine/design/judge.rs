//! Findings: every criterion at every point, at the required and at the actual shares; the worse figure stands and says which.

use super::arrangement::Arrangement;
use super::column::{ends_drop_pa, required_drop_pa};
use super::limits::{Limit, amount};
use super::model::{CompiledSection, Model};
use super::rate::{AT_LIMIT, Judged, SectionRating, rate};
use super::state::{PointState, absent_because, no_answer_at};
use super::zone::{Beyond, Exponents, Zone};
use crate::engine::case::{Case, InternalsKind, Place, Reach};
use crate::engine::correlation::packing::PackingKind;
use crate::engine::error::EngineResult;
use crate::engine::findings::{Amount, Criterion, Finding, Shares, Status};
use crate::engine::hydraulics::section::SectionGeometry;
use crate::engine::units::{Pressure, Si};

/// A total response exponent below this is "not met", whatever the limit says (product contract).
const HARDLY_RESPONDS: f64 = 0.2;
/// Vapour less liquid may miss by this part of the vapour: tables are printed with six digits, flows shift with rounding.
const LOADS_AGREE: f64 = 0.005;
/// Below this part of the least liquid load a sheet-metal packing is certainly dry in places (product contract).
const HALF_WETTED: f64 = 0.5;

/// What everything is judged from.
pub(crate) struct Bench<'m, 'a> {
    pub model: &'m Model<'a>,
    pub arrangement: &'m Arrangement,
    /// By point.
    pub states: &'m [PointState],
    /// By point, sections in the order of the stacks: at the required shares, and at the actual ones if there are any.
    ratings: Vec<Vec<BothRatings<'m>>>,
}

/// A section's rating at the required and, if there is a balance, at the actual shares.
pub(crate) type BothRatings<'m> = (SectionRating<'m>, Option<SectionRating<'m>>);

impl<'m, 'a> Bench<'m, 'a> {
    /// Rates every section at every point.
    ///
    /// # Errors
    /// A row beyond flood.
    pub fn new(model: &'m Model<'a>, arrangement: &'m Arrangement, states: &'m [PointState]) -> EngineResult<Self> {
        let mut bench = Self { model, arrangement, states, ratings: Vec::with_capacity(states.len()) };
        for point in 0..states.len() {
            let of_point = bench.rate_point(point)?;
            bench.ratings.push(of_point);
        }
        Ok(bench)
    }

    fn rate_point(&self, point: usize) -> EngineResult<Vec<BothRatings<'m>>> {
        let mut out = Vec::new();
        for (stack, (geometry, _)) in self.model.stacks().zip(self.arrangement.stacks()) {
            let state = self.states.get(point);
            let bottom = match stack.place {
                Place::Compartment(side) => state.and_then(|s| s.actual_factor(self.model, point, side)),
                // Above and below the wall nothing depends on the shares.
                _ => state.and_then(|s| s.actual.as_ref()).map(|_| 1.0),
            };
            for (section, geometry) in stack.sections.iter().zip(geometry) {
                let rated = |factor: f64| {
                    rate(section, geometry, point, factor).map_err(|beyond| {
                        let beyond = Beyond { section: section.index, row: beyond.row };
                        no_answer_at(self.model, point, beyond, geometry.area_m2, factor)
                    })
                };
                let actual = bottom.map(|bottom| section.factor(point, bottom));
                let required = rated(1.0)?;
                let actual = match actual {
                    Some(1.0) => Some(required.clone()),
                    other => other.map(rated).transpose()?,
                };
                out.push((required, actual));
            }
        }
        Ok(out)
    }

    /// Ratings of one point, sections in the order of the stacks.
    pub fn ratings(&self, point: usize) -> &[BothRatings<'m>] {
        self.ratings.get(point).map_or(&[], Vec::as_slice)
    }

    /// All findings, worst first, otherwise in the order of the case.
    pub fn findings(&self) -> EngineResult<Vec<Finding>> {
        let mut out = Vec::new();
        for point in 0..self.model.points.len() {
            self.sections(point, &mut out);
            self.split(point, &mut out)?;
            self.column(point, &mut out);
            self.loads_agree(point, &mut out);
        }
        self.clear_depth(&mut out);
        out.sort_by_key(|finding| std::cmp::Reverse(finding.status));
        Ok(out)
    }

    fn point_name(&self, point: usize) -> String {
        self.model.points.get(point).map_or_else(String::new, |p| p.name.to_owned())
    }

    fn stage(&self, section: usize, point: usize, row: usize) -> &str {
        let rows = self.model.case.points.get(point).and_then(|p| p.loads.get(section));
        rows.and_then(|rows| rows.get(row)).map_or("", |row| row.stage.as_str())
    }

    fn sections(&self, point: usize, out: &mut Vec<Finding>) {
        let sections = self.model.stacks().zip(self.arrangement.stacks());
        let sections = sections.flat_map(|(stack, (geometry, _))| stack.sections.iter().zip(geometry));
        for ((section, geometry), (required, actual)) in sections.zip(self.ratings(point)) {
            for judged in &required.judged {
                // The layout does not change with the point.
                if judged.criterion == Criterion::FlowPath && point != 0 {
                    continue;
                }
                let other = actual.as_ref().and_then(|rating| same(rating, judged.criterion));
                let (judged, shares) = match other {
                    // Where both are the same but for rounding, the required shares stand.
                    Some(other) if other.severity > judged.severity * (1.0 + AT_LIMIT) => (other, Shares::Actual),
                    _ => (judged, Shares::Required),
                };
                out.push(self.of_section(section, point, judged, shares));
            }
            self.ranges(section, geometry, point, out);
        }
    }

    fn of_section(&self, section: &CompiledSection<'_>, point: usize, judged: &Judged<'_>, shares: Shares) -> Finding {
        let status = section_status(self.model.case, section, judged);
        let mut because = String::new();
        if let Some(row) = judged.row {
            because = format!("stage {}; ", self.stage(section.index, point, row));
        }
        if judged.criterion == Criterion::ApproachToFlood {
            because += &format!("by {}; ", section.model.flood_method());
        }
        because += &format!("limit: {}", judged.limit.origin);
        if status != Status::Met {
            because += &format!("; cure: {}", cure(judged.criterion));
        }
        Finding {
            criterion: judged.criterion,
            subject: section.section.name.clone(),
            point: self.point_name(point),
            shares,
            value: Some(amount(judged.criterion, judged.si)),
            limit: Some(judged.limit.amount()),
            status,
            because,
        }
    }

    /// One finding for each argument of each correlation that is outside its published range, at the first such row.
    fn ranges(&self, section: &CompiledSection<'_>, geometry: &SectionGeometry, point: usize, out: &mut Vec<Finding>) {
        let mut known: Vec<(String, String)> = Vec::new();
        for (row, load) in section.loads_at(point).iter().enumerate() {
            let (mut correlations, mut points) = (Vec::new(), Vec::new());
            section.model.outside(geometry, load, &mut correlations, &mut points);
            let stage = self.stage(section.index, point, row);
            let sentences = correlations
                .iter()
                .map(|o| ((o.correlation.clone(), o.input.clone()), o.to_string(), o.value))
                .chain(points.iter().map(|p| {
                    let text =
                        format!("declared points: {} {:.4} is outside {:.4} to {:.4}", p.what, p.value, p.min, p.max);
                    (("declared".to_owned(), p.what.to_owned()), text, p.value)
                }));
            for (key, text, value) in sentences {
                if known.contains(&key) {
                    continue;
                }
                known.push(key);
                out.push(Finding {
                    criterion: Criterion::Range,
                    subject: section.section.name.clone(),
                    point: self.point_name(point),
                    shares: Shares::Required,
                    value: Some(Amount::Fraction(value)).filter(|_| text.contains("flow parameter")),
                    limit: None,
                    status: Status::Attention,
                    because: format!("first at stage {stage}: {text}"),
                });
            }
        }
    }

    /// The share of each compartment, the balance itself, and how firmly the pressure drop fixes it.
    fn split(&self, point: usize, out: &mut Vec<Finding>) -> EngineResult<()> {
        if absent_because(self.model).is_some() {
            return Ok(());
        }
        let (Some(state), Some(limits)) = (self.states.get(point), self.model.column_limits.get(point)) else {
            return Ok(());
        };
        out.push(self.balance(point, state));
        for (side, compartment) in self.model.case.compartments.iter().enumerate() {
            let required = self.model.required(point).get(side).copied().unwrap_or(f64::NAN);
            if let Some(actual) = state.actual.as_ref().and_then(|shares| shares.get(side)).copied() {
                out.push(share_finding(compartment, required, actual, &limits.share_within, self.point_name(point)));
            }
            let at = |list: &[Option<Exponents>]| list.get(side).copied().flatten();
            let (required, actual) = (at(&state.required_exponents), at(&state.actual_exponents));
            out.extend(self.exponent(&compartment.name, point, required, actual, &limits.response_exponent, ""));
        }
        self.other_liquid_head(point, state, &limits.response_exponent, out)
    }

    fn balance(&self, point: usize, state: &PointState) -> Finding {
        let all = &state.balances.all;
        let stable = state.balances.stable_count();
        let (status, because) = match (all.len(), stable) {
            (0, _) => (
                Status::NotMet,
                "no division of the vapour makes the pressure drops equal; value: the least imbalance met on the way"
                    .to_owned(),
            ),
            (_, 0) => {
                (Status::NotMet, "the pressure drops are equal somewhere, but no such state is stable".to_owned())
            }
            (1, 1) => (Status::Met, "one division balances, and it is stable".to_owned()),
            (n, 1) => (
                Status::Attention,
                format!(
                    "{n} divisions balance; one of them is stable, the others are not: start-up may pass an unstable one"
                ),
            ),
            (n, s) => (
                Status::NotMet,
                format!(
                    "{n} divisions balance and {s} of them are stable: nothing tells which one the column will take"
                ),
            ),
        };
        let value = match all.is_empty() {
            true => state.balances.least_imbalance_pa,
            false => state.imbalance_pa(),
        };
        Finding {
            criterion: Criterion::Balance,
            subject: "wall".to_owned(),
            point: self.point_name(point),
            shares: Shares::Required,
            value: value.map(|pa| Amount::Pressure(Pressure::from_si(pa))),
            limit: None,
            status,
            because: if all.is_empty() {
                because
            } else {
                format!("{because}; value: imbalance at the required shares")
            },
        }
    }

    fn exponent(
        &self,
        subject: &str,
        point: usize,
        required: Option<Exponents>,
        actual: Option<Exponents>,
        limit: &Limit,
        by: &str,
    ) -> Option<Finding> {
        let (value, shares) = match (required, actual) {
            (Some(r), Some(a)) if a.total < r.total => (a, Shares::Actual),
            (Some(r), _) => (r, Shares::Required),
            (None, Some(a)) => (a, Shares::Actual),
            (None, None) => return None,
        };
        let status = if value.total < HARDLY_RESPONDS {
            Status::NotMet
        } else if value.total < limit.si * (1.0 - AT_LIMIT) {
            Status::Attention
        } else {
            Status::Met
        };
        let mut because = format!("friction alone {:.2}{by}; limit: {}", value.friction, limit.origin);
        if status != Status::Met {
            because += "; the pressure drop hardly fixes the split here: more dry resistance (smaller hole area, a restriction) \
                        or less aerated liquid firms it";
        }
        Some(Finding {
            criterion: Criterion::ResponseExponent,
            subject: subject.to_owned(),
            point: self.point_name(point),
            shares,
            value: Some(Amount::Fraction(value.total)),
            limit: Some(limit.amount()),
            status,
            because,
        })
    }

    /// Trays: the exponents by the other liquid-head model too, since the two differ most just here.
    fn other_liquid_head(
        &self,
        point: usize,
        state: &PointState,
        limit: &Limit,
        out: &mut Vec<Finding>,
    ) -> EngineResult<()> {
        let mut other = Vec::new();
        for (index, side) in self.model.sides.iter().enumerate() {
            for section in &side.sections {
                if let Some(swapped) = section.model.with_other_liquid_head(self.model.catalogue)? {
                    other.push((index, section.index, swapped));
                }
            }
        }
        if other.is_empty() {
            return Ok(());
        }
        let mut zone = Zone::new(self.model, &self.arrangement.zone, point);
        for (side, section, swapped) in &other {
            if let Some(side) = zone.sides.get_mut(*side) {
                side.replace(*section, swapped);
            }
        }
        for (index, (side, compartment)) in zone.sides.iter().zip(&self.model.case.compartments).enumerate() {
            let Some(name) = other.iter().find(|(i, _, _)| *i == index).and_then(|(_, _, m)| m.drop_method()) else {
                continue;
            };
            let required = side.exponents(1.0).ok();
            let actual = state.actual_factor(self.model, point, index).and_then(|bottom| side.exponents(bottom).ok());
            let by = format!(", liquid head by {name}");
            out.extend(self.exponent(&compartment.name, point, required, actual, limit, &by));
        }
        Ok(())
    }

    fn column(&self, point: usize, out: &mut Vec<Finding>) {
        let Some(limit) = self.model.column_limits.get(point).and_then(|l| l.pressure_drop.as_ref()) else { return };
        let required = required_drop_pa(self.model, self.arrangement, point);
        let actual = self.actual_drop_pa(point);
        let (value, shares) = match (required, actual) {
            (Some(r), Some(a)) if a > r => (Some(a), Shares::Actual),
            (None, Some(a)) => (Some(a), Shares::Actual),
            (r, _) => (r, Shares::Required),
        };
        let status = match value {
            Some(value) if value <= limit.si * (1.0 + AT_LIMIT) => Status::Met,
            Some(_) => Status::NotMet,
            None => Status::Attention,
        };
        let mut because = format!("limit: {}", limit.origin);
        if value.is_none() {
            because = "not worked out: some internals have no declared resistance".to_owned();
        } else if status == Status::NotMet {
            because += &format!("; cure: {}", cure(Criterion::PressureDrop));
        }
        out.push(Finding {
            criterion: Criterion::PressureDrop,
            subject: "column".to_owned(),
            point: self.point_name(point),
            shares,
            value: value.map(|pa| amount(Criterion::PressureDrop, pa)),
            limit: Some(limit.amount()),
            status,
            because,
        });
    }

    /// Pressure drop of the column at the actual shares, Pa.
    pub fn actual_drop_pa(&self, point: usize) -> Option<f64> {
        let zone_pa = self.states.get(point)?.actual_drop_pa?;
        Some(ends_drop_pa(self.model, self.arrangement, point)? + zone_pa)
    }

    /// Definition 9: vapour less liquid agrees across both ends of the wall.
    fn loads_agree(&self, point: usize, out: &mut Vec<Finding>) {
        let model = self.model;
        let net = |load: Option<&crate::engine::hydraulics::load::StageLoad>| {
            load.map(|l| (l.vapour_kg_s - l.liquid_kg_s, l.vapour_kg_s))
        };
        let lower: Option<Vec<_>> = model.sides.iter().map(|side| net(side.bottom(point))).collect();
        let upper: Option<Vec<_>> = model.sides.iter().map(|side| net(side.top(point))).collect();
        let ends = [
            (
                "lower edge",
                lower,
                net(model.below.top(point)),
                Reach::Bottom,
                "the compartments' last rows",
                "the first row below the wall",
            ),
            (
                "upper edge",
                upper,
                net(model.above.bottom(point)),
                Reach::Top,
                "the compartments' first rows",
                "the last row above the wall",
            ),
        ];
        for (edge, sides, end, closed, of_sides, of_end) in ends {
            let (Some(sides), Some((end_net, end_vapour))) = (sides, end) else { continue };
            if model.case.wall.reach == closed {
                continue;
            }
            let sum: f64 = sides.iter().map(|(net, _)| net).sum();
            let miss = (sum - end_net).abs() / end_vapour;
            out.push(Finding {
                criterion: Criterion::LoadsAgree,
                subject: format!("wall, {edge}"),
                point: self.point_name(point),
                shares: Shares::Required,
                value: Some(Amount::Fraction(miss)),
                limit: Some(Amount::Fraction(LOADS_AGREE)),
                status: if miss <= LOADS_AGREE { Status::Met } else { Status::Attention },
                because: format!(
                    "vapour less liquid: {sum:.4} kg/s in {of_sides}, {end_net:.4} kg/s in {of_end}; value: the difference over the \
                     vapour there"
                ),
            });
        }
    }

    fn clear_depth(&self, out: &mut Vec<Finding>) {
        let Some(limit) = self.model.column_limits.first().map(|l| &l.clear_depth) else { return };
        let sides = self.arrangement.zone.sides.iter().zip(&self.model.case.compartments);
        let Some((side, compartment)) = sides.min_by(|(a, _), (b, _)| a.clear_depth_m.total_cmp(&b.clear_depth_m))
        else {
            return;
        };
        let met = side.clear_depth_m >= limit.si * (1.0 - AT_LIMIT);
        out.push(Finding {
            criterion: Criterion::ClearDepth,
            subject: compartment.name.clone(),
            point: self.point_name(0),
            shares: Shares::Required,
            value: Some(amount(Criterion::ClearDepth, side.clear_depth_m)),
            limit: Some(limit.amount()),
            status: match (met, limit.stated) {
                (true, _) => Status::Met,
                (false, true) => Status::NotMet,
                (false, false) => Status::Attention,
            },
            because: format!("the shallowest compartment; limit: {}", limit.origin),
        });
    }
}

fn same<'r>(rating: &'r SectionRating<'_>, criterion: Criterion) -> Option<&'r Judged<'r>> {
    rating.judged.iter().find(|j| j.criterion == criterion)
}

fn section_status(case: &Case, section: &CompiledSection<'_>, judged: &Judged<'_>) -> Status {
    if judged.severity <= 1.0 + AT_LIMIT {
        return Status::Met;
    }
    if judged.criterion == Criterion::Wetting {
        let sheet = matches!(
            case.internals.get(section.section.internals).map(|i| &i.kind),
            Some(InternalsKind::Packing(packing)) if packing.kind == PackingKind::Structured
        );
        let dry = judged.si < HALF_WETTED * judged.limit.si;
        return if sheet && dry { Status::NotMet } else { Status::Attention };
    }
    Status::NotMet
}

fn share_finding(
    compartment: &crate::engine::case::Compartment,
    required: f64,
    actual: f64,
    within: &Limit,
    point: String,
) -> Finding {
    let (value, limit, met, because) = match compartment.vapour_share_band {
        Some((low, high)) => {
            let limit = if actual < low { low } else { high };
            let met = (low..=high).contains(&actual);
            (
                actual,
                limit,
                met,
                format!("share {actual:.4}, required {required:.4}; band {low} to {high}: case, [[compartment]]"),
            )
        }
        None => {
            let miss = (actual - required).abs();
            let met = miss <= within.si * (1.0 + AT_LIMIT);
            (miss, within.si, met, format!("share {actual:.4}, required {required:.4}; limit: {}", within.origin))
        }
    };
    Finding {
        criterion: Criterion::VapourShareWithin,
        subject: compartment.name.clone(),
        point,
        shares: Shares::Actual,
        value: Some(Amount::Fraction(value)),
        limit: Some(Amount::Fraction(limit)),
        status: if met { Status::Met } else { Status::NotMet },
        because,
    }
}

/// What cures a miss, in the trade's words.
fn cure(criterion: Criterion) -> &'static str {
    match criterion {
        Criterion::ApproachToFlood => "a larger shell, the wall moved, or internals of greater capacity",
        Criterion::SystemLimit => "a larger shell: no internals and no spacing cure it",
        Criterion::Entrainment => "a larger shell or greater tray spacing",
        Criterion::DowncomerFroth => "larger downcomers or clearance, more hole area, lower weirs or greater spacing",
        Criterion::DowncomerVelocity => "larger downcomers",
        Criterion::DowncomerResidence => "larger downcomers or greater tray spacing",
        Criterion::ApronVelocity => "greater clearance under the apron",
        Criterion::WeirLoad => "more passes, or liquid across the wall for longer weirs",
        Criterion::WeirLoadLeast => "a picket-fence weir (weir_open) or fewer passes",
        Criterion::FlowPath => "fewer passes or smaller downcomers",
        Criterion::Weep => "smaller hole area, or a higher least load",
        Criterion::Wetting => "a packing of less surface, or more liquid at this point",
        Criterion::BedPressureDrop => "a larger shell or a more open packing",
        Criterion::PressureDrop => "larger shell, shorter beds or more open internals",
        _ => "see the remedies",
    }
}
