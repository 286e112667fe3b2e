//! Which limit holds where, and who set it: the narrowest statement wins (point, section, kind, general, default).

use crate::engine::case::{Case, Criteria, Foaming, InternalsKind, Section};
use crate::engine::correlation::catalogue::Catalogue;
use crate::engine::correlation::form::wetting::WettingMinimum;
use crate::engine::correlation::form::{Evaluator, Form};
use crate::engine::correlation::packing::{Packing, PackingKind};
use crate::engine::error::EngineResult;
use crate::engine::findings::{Amount, Criterion};
use crate::engine::hydraulics::packing::first_of;
use crate::engine::hydraulics::section::SectionModel;
use crate::engine::units::{Length, Pressure, PressureGradient, Si, Time, Velocity, WeirLoad};

/// Rows below this pressure make a vacuum section, with its narrower defaults (product contract).
const VACUUM_PA: f64 = 0.2e5;

/// A limit in SI and who set it.
#[derive(Clone, Debug, PartialEq)]
pub(crate) struct Limit {
    pub criterion: Criterion,
    pub si: f64,
    pub origin: String,
    /// True if the case states it.
    pub stated: bool,
}

impl Limit {
    /// The limit as a quantity.
    pub fn amount(&self) -> Amount {
        amount(self.criterion, self.si)
    }
}

/// A figure of a criterion as a quantity.
pub(crate) fn amount(criterion: Criterion, si: f64) -> Amount {
    match criterion {
        Criterion::PressureDrop | Criterion::Balance => Amount::Pressure(Pressure::from_si(si)),
        Criterion::BedPressureDrop => Amount::Gradient(PressureGradient::from_si(si)),
        Criterion::DowncomerVelocity | Criterion::ApronVelocity | Criterion::Wetting => {
            Amount::Velocity(Velocity::from_si(si))
        }
        Criterion::DowncomerResidence => Amount::Time(Time::from_si(si)),
        Criterion::WeirLoad | Criterion::WeirLoadLeast => Amount::WeirLoad(WeirLoad::from_si(si)),
        Criterion::FlowPath | Criterion::ClearDepth => Amount::Length(Length::from_si(si)),
        Criterion::ApproachToFlood
        | Criterion::SystemLimit
        | Criterion::Entrainment
        | Criterion::VapourShareWithin
        | Criterion::ResponseExponent
        | Criterion::DowncomerFroth
        | Criterion::Weep
        | Criterion::LoadsAgree
        | Criterion::Range => Amount::Fraction(si),
    }
}

/// Limits of one section at one point.
#[derive(Clone, Debug)]
pub(crate) struct SectionLimits {
    pub flood: Limit,
    pub entrainment: Limit,
    pub froth: Limit,
    pub downcomer_velocity: Limit,
    pub residence: Limit,
    pub apron_velocity: Limit,
    pub weir_load: Limit,
    pub weir_load_least: Limit,
    pub flow_path: Limit,
    pub weep: Limit,
    pub wetting: Option<Limit>,
    pub bed_pressure_drop: Option<Limit>,
}

/// The statements that may set a limit of one section at one point, narrowest first.
struct Statements<'a> {
    list: Vec<(&'a Criteria, String)>,
}

impl<'a> Statements<'a> {
    fn new(case: &'a Case, section: Option<&'a Section>, point: usize) -> Self {
        let mut list = Vec::with_capacity(4);
        if let Some(point) = case.points.get(point) {
            list.push((&point.criteria, format!("case, [[point]] \"{}\"", point.name)));
        }
        if let Some(section) = section {
            list.push((&section.criteria, format!("case, [[section]] \"{}\"", section.name)));
            match case.internals.get(section.internals).map(|i| &i.kind) {
                Some(InternalsKind::Tray(_)) => list.push((&case.criteria.tray, "case, [criteria.tray]".to_owned())),
                Some(InternalsKind::Packing(_)) => {
                    list.push((&case.criteria.packing, "case, [criteria.packing]".to_owned()));
                }
                _ => {}
            }
        }
        list.push((&case.criteria.general, "case, [criteria]".to_owned()));
        Self { list }
    }

    fn stated(&self, criterion: Criterion, pick: impl Fn(&Criteria) -> Option<f64>) -> Option<Limit> {
        self.list.iter().find_map(|(criteria, origin)| {
            pick(criteria).map(|si| Limit { criterion, si, origin: origin.clone(), stated: true })
        })
    }

    fn or_default(
        &self,
        criterion: Criterion,
        pick: impl Fn(&Criteria) -> Option<f64>,
        default: f64,
        origin: &str,
    ) -> Limit {
        self.stated(criterion, pick).unwrap_or_else(|| Limit {
            criterion,
            si: default,
            origin: format!("default: {origin}"),
            stated: false,
        })
    }
}

impl SectionLimits {
    /// Resolves every limit of a section at a point.
    pub fn new(
        case: &Case,
        catalogue: &Catalogue,
        section: &Section,
        model: &SectionModel,
        point: usize,
    ) -> EngineResult<Self> {
        let statements = Statements::new(case, Some(section), point);
        let kind = case.internals.get(section.internals).map(|i| &i.kind);
        let is_tray = matches!(kind, Some(InternalsKind::Tray(_)));
        let vacuum = is_vacuum(case, section, point);
        let (flood, flood_origin) = match (is_tray, vacuum) {
            (true, false) => {
                (0.80, "trays; 80 to 85 % in practice (textbooks: Benitez 80 %, Coulson and Richardson vol. 6 85 %)")
            }
            (true, true) => (0.75, "trays below 0.2 bar; 75 to 80 % in practice (from memory)"),
            (false, _) => (0.75, "packing; 70 to 80 % in practice (from memory)"),
        };
        let (weep, weep_origin) = if vacuum {
            (0.03, "weepage allowed at turndown in vacuum (design notes, restated)")
        } else {
            (0.07, "weepage allowed at turndown under pressure (design notes, restated)")
        };
        let foaming = match kind {
            Some(InternalsKind::Tray(tray)) => tray.foaming,
            _ => None,
        };
        let class = match foaming {
            None => "foaming class not stated, taken as low",
            Some(Foaming::Low) => "low foaming",
            Some(Foaming::Moderate) => "moderate foaming",
            Some(Foaming::High) => "high foaming",
        };
        let (velocity_m_s, residence_s) = model.tray().map_or((f64::NAN, f64::NAN), |tray| {
            let practice = &tray.methods.downcomer;
            (
                practice.velocity_m_s(tray.foaming, tray.spacing_m) * section.system_factor,
                practice.residence_s(tray.foaming),
            )
        });
        let packing = match kind {
            Some(InternalsKind::Packing(packing)) => Some(packing),
            _ => None,
        };
        let wetting = packing.map(|packing| wetting(&statements, catalogue, packing)).transpose()?;
        let bed_pressure_drop = packing.and_then(|_| {
            let stated = statements.stated(Criterion::BedPressureDrop, |c| c.bed_pressure_drop.map(|g| g.si()));
            let default = vacuum.then(|| Limit {
                criterion: Criterion::BedPressureDrop,
                si: 200.0,
                origin: "default: 2 mbar/m below 0.2 bar (common practice)".to_owned(),
                stated: false,
            });
            stated.or(default)
        });
        let s = &statements;
        Ok(Self {
            flood: s.or_default(Criterion::ApproachToFlood, |c| c.approach_to_flood, flood, flood_origin),
            entrainment: s.or_default(
                Criterion::Entrainment,
                |c| c.entrainment,
                0.10,
                "design limit restated in design notes of Fair's method",
            ),
            froth: s.or_default(
                Criterion::DowncomerFroth,
                |c| c.downcomer_froth,
                0.80,
                "80 % of spacing and weir where the froth density reflects foaming (Kister)",
            ),
            downcomer_velocity: s.or_default(
                Criterion::DowncomerVelocity,
                |c| c.downcomer_velocity.map(|v| v.si()),
                velocity_m_s,
                &format!("by spacing and class ({class}), times the system factor (from memory)"),
            ),
            residence: s.or_default(
                Criterion::DowncomerResidence,
                |c| c.downcomer_residence.map(|t| t.si()),
                residence_s,
                &format!("by class ({class}) (from memory)"),
            ),
            apron_velocity: s.or_default(
                Criterion::ApronVelocity,
                |c| c.apron_velocity.map(|v| v.si()),
                0.45,
                "velocity under the apron (from memory)",
            ),
            weir_load: s.or_default(
                Criterion::WeirLoad,
                |c| c.weir_load.map(|w| w.si()),
                90.0 / 3600.0,
                "90 m3/(h m), within the 63 to 116 at which more passes are taken (Kister)",
            ),
            weir_load_least: s.or_default(
                Criterion::WeirLoadLeast,
                |c| c.weir_load_least.map(|w| w.si()),
                4.5 / 3600.0,
                "4.5 m3/(h m) for a flat weir (from memory)",
            ),
            flow_path: s.or_default(
                Criterion::FlowPath,
                |c| c.flow_path.map(|l| l.si()),
                0.4,
                "shorter paths are to be avoided (Kister, Distillation Design: 0.40 to 0.46 m)",
            ),
            weep: s.or_default(Criterion::Weep, |c| c.weep, weep, weep_origin),
            wetting,
            bed_pressure_drop,
        })
    }

    /// All of them that concern this section, for the list of limits.
    pub fn all(&self, is_tray: bool) -> Vec<&Limit> {
        let mut list = vec![&self.flood];
        if is_tray {
            list.extend([
                &self.entrainment,
                &self.froth,
                &self.downcomer_velocity,
                &self.residence,
                &self.apron_velocity,
                &self.weir_load,
                &self.weir_load_least,
                &self.flow_path,
                &self.weep,
            ]);
        }
        list.extend(self.wetting.iter().chain(&self.bed_pressure_drop));
        list
    }
}

fn wetting(statements: &Statements<'_>, catalogue: &Catalogue, packing: &Packing) -> EngineResult<Limit> {
    let minimum = WettingMinimum::from_record(first_of(catalogue, Form::WettingMinimum)?)?;
    let kind = match packing.kind {
        PackingKind::Structured => "structured packing",
        PackingKind::Random => "random packing",
    };
    Ok(statements.or_default(
        Criterion::Wetting,
        |c| c.wetting.map(|w| w.si()),
        minimum.least_m_s(packing.kind, packing.material),
        &format!("least liquid load by kind and material, {kind} (from memory)"),
    ))
}

/// True if any row of the section at the point is below 0.2 bar.
fn is_vacuum(case: &Case, section: &Section, point: usize) -> bool {
    let index = case.sections.iter().position(|s| std::ptr::eq(s, section));
    let rows = index.zip(case.points.get(point)).and_then(|(i, p)| p.loads.get(i));
    rows.is_some_and(|rows| rows.iter().any(|row| row.pressure.is_some_and(|p| p.si() < VACUUM_PA)))
}

/// Limits of the column and the wall at one point.
#[derive(Clone, Debug)]
pub(crate) struct ColumnLimits {
    pub pressure_drop: Option<Limit>,
    pub share_within: Limit,
    pub response_exponent: Limit,
    pub clear_depth: Limit,
}

impl ColumnLimits {
    /// Resolves them.
    pub fn new(case: &Case, point: usize) -> Self {
        let s = Statements::new(case, None, point);
        Self {
            pressure_drop: s.stated(Criterion::PressureDrop, |c| c.pressure_drop.map(|p| p.si())),
            share_within: s.or_default(
                Criterion::VapourShareWithin,
                |c| c.vapour_share_within,
                0.02,
                "absolute deviation of a compartment without a band of its own",
            ),
            response_exponent: s.or_default(
                Criterion::ResponseExponent,
                |c| c.response_exponent,
                0.5,
                "least total exponent; below 0.2 not met",
            ),
            clear_depth: s.or_default(
                Criterion::ClearDepth,
                |c| c.clear_depth.map(|l| l.si()),
                0.6,
                "workable depth of a half-moon (from memory)",
            ),
        }
    }

    /// All of them, for the list of limits.
    pub fn all(&self) -> Vec<&Limit> {
        self.pressure_drop.iter().chain([&self.share_within, &self.response_exponent, &self.clear_depth]).collect()
    }
}
