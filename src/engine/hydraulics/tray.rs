//! One sieve tray of a place: jet flood, system limit, pressure drop, weep and downcomers.
//!
//! Area bases: flood on net area (place less the downcomer tops of one tray), aerated liquid on active area, dry drop and weep
//! on hole area, system limit on the whole place.

use super::load::StageLoad;
use super::tray_methods::{LiquidHead, TrayMethods};
use crate::engine::case::{Foaming, Tray};
use crate::engine::correlation::form::downcomer::FoamingClass;
use crate::engine::correlation::range::Outside;
use crate::engine::geometry::{Deck, Pass, TrayLayout};
use crate::engine::units::{Length, STANDARD_GRAVITY_M_S2, Si};

/// Rounds of the weir-crest iteration; each doubles the digits, so the cap is never reached in practice.
const CREST_ROUNDS: usize = 30;
/// Relative change at which the crest iteration has settled.
const CREST_TOLERANCE: f64 = 1e-13;

/// A sieve tray with its correlations, ready to be rated at any load on any layout.
#[derive(Clone, Debug)]
pub(crate) struct SieveTray {
    pub methods: TrayMethods,
    pub spacing_m: f64,
    pub weir_height_m: f64,
    pub hole_diameter_m: f64,
    pub hole_area: f64,
    pub deck_thickness_m: f64,
    pub downcomer_area: f64,
    pub clearance_m: f64,
    pub weir_open: f64,
    pub foaming: FoamingClass,
    pub system_factor: f64,
    orifice_coefficient: f64,
    hole_area_factor: f64,
    /// Bennett's Cb at this weir height.
    crest_coefficient: f64,
}

/// Everything of one tray at one load; the worst of its passes where they differ.
#[derive(Clone, Copy, Debug, Default, PartialEq)]
pub(crate) struct TrayFigures {
    pub drop_pa: f64,
    pub dry_head_m: f64,
    pub liquid_head_m: f64,
    pub residual_head_m: f64,
    pub crest_m: f64,
    pub apron_head_m: f64,
    pub backup_m: f64,
    pub froth: f64,
    pub downcomer_velocity_m_s: f64,
    pub downcomer_residence_s: f64,
    pub apron_velocity_m_s: f64,
    pub weir_load_m2_s: f64,
    pub weep: f64,
    pub hole_velocity_m_s: f64,
    pub hole_velocity_over_onset: f64,
}

/// Heads of one pass.
#[derive(Clone, Copy, Debug, Default)]
struct PassHeads {
    weir_load_m2_s: f64,
    liquid_head_m: f64,
    crest_m: f64,
}

impl SieveTray {
    /// Reads the tray of a checked case.
    pub fn new(tray: &Tray, system_factor: f64, methods: TrayMethods) -> Self {
        let (deck_thickness_m, hole_diameter_m) = (tray.deck_thickness.si(), tray.hole_diameter.si());
        Self {
            orifice_coefficient: methods.orifice.coefficient(deck_thickness_m / hole_diameter_m, tray.hole_area),
            hole_area_factor: methods.hole_area.factor(tray.hole_area),
            crest_coefficient: methods.bennett.crest_coefficient(tray.weir_height.si()),
            spacing_m: tray.spacing.si(),
            weir_height_m: tray.weir_height.si(),
            hole_diameter_m,
            hole_area: tray.hole_area,
            deck_thickness_m,
            downcomer_area: tray.downcomer_area,
            clearance_m: tray.downcomer_clearance.si(),
            weir_open: tray.weir_open,
            foaming: foaming_class(tray.foaming),
            system_factor,
            methods,
        }
    }

    /// Velocity on net area at jet flood, m/s, at the row's L/V.
    pub fn flooding_velocity_m_s(&self, load: &StageLoad) -> f64 {
        let flow_parameter = load.flow_parameter();
        let mut csb_m_s = self.methods.capacity.csb_m_s(self.spacing_m, flow_parameter);
        if flow_parameter < self.methods.low_flow.below_flow_parameter {
            // The default fit keeps rising where the chart turns down, so the lower of the two stands (see the record's notes).
            csb_m_s = csb_m_s.min(self.methods.low_flow.csb_m_s(self.spacing_m, flow_parameter));
        }
        csb_m_s * self.methods.surface_tension.factor(load.sigma_n_m) * self.hole_area_factor * self.system_factor
            / load.capacity_group()
    }

    /// Area of the place at which the row stands at jet flood, m2.
    pub fn flooding_area_m2(&self, load: &StageLoad) -> f64 {
        load.vapour_m3_s() / self.flooding_velocity_m_s(load) / (1.0 - self.downcomer_area)
    }

    /// Area of the place at which the row stands at the system limit, m2.
    pub fn system_limit_area_m2(&self, load: &StageLoad) -> f64 {
        // L/V is constant, so the liquid velocity stays in proportion to the capacity factor while the area changes.
        let liquid_over_c = load.liquid_m3_s() / load.vapour_load_m3_s();
        let capacity_m_s = self.methods.system_limit.capacity_at_constant_ratio_m_s(
            load.rho_v_kg_m3,
            load.rho_l_kg_m3,
            load.sigma_n_m,
            liquid_over_c,
        );
        load.vapour_load_m3_s() / capacity_m_s
    }

    /// Entrained fraction at a fraction of flood.
    pub fn entrainment(&self, load: &StageLoad, flood: f64) -> f64 {
        self.methods.entrainment.psi(flood, load.flow_parameter())
    }

    /// Pressure drop of one tray, Pa: the mean of the alternate trays.
    pub fn drop_pa(&self, layout: &TrayLayout, load: &StageLoad) -> f64 {
        let head_m = match layout.decks() {
            // Alternate decks mostly have one active area, and then one froth density and one dry head.
            [first, second] if first.active_area == second.active_area => {
                let froth_density = self.froth_density(first, load);
                let wet = self.wet_head_m(first, load, froth_density) + self.wet_head_m(second, load, froth_density);
                self.dry_head_m(first, load) + 0.5 * wet + self.residual_head_m(load)
            }
            decks => decks.iter().map(|deck| self.deck_head_m(deck, load)).sum::<f64>() / decks.len() as f64,
        };
        head_m * load.rho_l_kg_m3 * STANDARD_GRAVITY_M_S2
    }

    /// Total head of one deck, m of its liquid; the mean of its passes, which share one vapour space.
    fn deck_head_m(&self, deck: &Deck, load: &StageLoad) -> f64 {
        let wet_m = self.wet_head_m(deck, load, self.froth_density(deck, load));
        self.dry_head_m(deck, load) + wet_m + self.residual_head_m(load)
    }

    /// Clear liquid on a deck, m: the mean of its passes.
    fn wet_head_m(&self, deck: &Deck, load: &StageLoad, froth_density: f64) -> f64 {
        let passes = deck.passes();
        let sum: f64 = passes.iter().map(|pass| self.liquid_head_m(deck, pass, load, froth_density)).sum();
        sum / passes.len() as f64
    }

    /// Relative froth density on a deck by Bennett, Agrawal and Cook.
    fn froth_density(&self, deck: &Deck, load: &StageLoad) -> f64 {
        self.methods.bennett.froth_density(load.vapour_m3_s() / deck.active_area.si() * load.capacity_group())
    }

    fn dry_head_m(&self, deck: &Deck, load: &StageLoad) -> f64 {
        self.methods.dry.head_m(
            self.orifice_coefficient,
            load.rho_v_kg_m3,
            load.rho_l_kg_m3,
            load.vapour_m3_s() / deck.hole_area.si(),
        )
    }

    fn residual_head_m(&self, load: &StageLoad) -> f64 {
        self.methods.residual.head_m(load.sigma_n_m, load.rho_l_kg_m3, self.hole_diameter_m)
    }

    fn weir_load_m2_s(&self, pass: &Pass, load: &StageLoad) -> f64 {
        load.liquid_m3_s() * pass.liquid_fraction / (pass.weir.length().si() * self.weir_open)
    }

    /// Clear liquid on one pass by the chosen model, m.
    fn liquid_head_m(&self, deck: &Deck, pass: &Pass, load: &StageLoad, froth_density: f64) -> f64 {
        match &self.methods.liquid_head {
            LiquidHead::Bennett => self.bennett_head_m(self.weir_load_m2_s(pass, load), froth_density),
            LiquidHead::Aeration(fair) => {
                let velocity_m_s = load.vapour_m3_s() / deck.active_area.si();
                let beta = fair.beta(velocity_m_s * load.rho_v_kg_m3.sqrt());
                beta * (self.weir_height_m + self.crest_m(pass, load))
            }
        }
    }

    /// Clear liquid by Bennett, Agrawal and Cook, which the weep rate takes whatever model gives the pressure drop.
    fn bennett_head_m(&self, weir_load_m2_s: f64, froth_density: f64) -> f64 {
        self.methods.bennett.head_at_density_m(
            froth_density,
            self.crest_coefficient,
            self.weir_height_m,
            weir_load_m2_s,
        )
    }

    /// Crest over the weir, m, with the constriction of the converging deck: the sheet contracts to the line that lies one
    /// first crest farther along the flow (the meaning of Treybal's Eq. 6.34 for a chord, kept for half-moons).
    fn crest_m(&self, pass: &Pass, load: &StageLoad) -> f64 {
        let open_m = pass.weir.length().si() * self.weir_open;
        let flow_m3_s = load.liquid_m3_s() * pass.liquid_fraction;
        // A weir so short that the sheet would vanish has no crest by this formula; half its length is already absurd.
        let least_m = 0.5 * open_m;
        let contracted = |effective_m: f64| {
            let first_crest_m = self.methods.weir.first_crest_m(flow_m3_s / effective_m);
            (pass.weir.length_moved(Length::from_si(first_crest_m)).si() * self.weir_open).max(least_m)
        };
        let mut effective_m = open_m;
        for _ in 0..CREST_ROUNDS {
            // Aitken's step: two plain ones, and the limit of the geometric series that they begin.
            let once_m = contracted(effective_m);
            let twice_m = contracted(once_m);
            let bend_m = twice_m - 2.0 * once_m + effective_m;
            let limit_m = effective_m - (once_m - effective_m).powi(2) / bend_m;
            let next_m = if limit_m.is_finite() && limit_m >= least_m && limit_m <= open_m { limit_m } else { twice_m };
            let settled = (twice_m - once_m).abs() <= CREST_TOLERANCE * open_m;
            effective_m = if settled { twice_m } else { next_m };
            if settled {
                break;
            }
        }
        let constriction = (open_m / effective_m).powf(2.0 / 3.0);
        self.methods.weir.crest_m(flow_m3_s / open_m, constriction)
    }

    /// Crests of a deck's passes; the second is zero where there is one pass.
    fn crests_m(&self, deck: &Deck, load: &StageLoad) -> [f64; 2] {
        let mut crests_m = [0.0; 2];
        for (crest_m, pass) in crests_m.iter_mut().zip(deck.passes()) {
            *crest_m = self.crest_m(pass, load);
        }
        crests_m
    }

    /// Everything of one tray at one load, the worst of the alternate trays figure by figure; the drop is their mean.
    pub fn figures(&self, layout: &TrayLayout, load: &StageLoad) -> TrayFigures {
        match layout.decks() {
            // The downcomers of one tray discharge on the other one of the pair.
            [first, second] => {
                let crests_m = [self.crests_m(first, load), self.crests_m(second, load)];
                let [of_first, of_second] = crests_m;
                let a = self.deck_figures(first, of_first, of_second, load);
                let b = self.deck_figures(second, of_second, of_first, load);
                TrayFigures { drop_pa: 0.5 * (a.drop_pa + b.drop_pa), ..a.worse(&b) }
            }
            [deck, ..] => {
                let crests_m = self.crests_m(deck, load);
                self.deck_figures(deck, crests_m, crests_m, load)
            }
            [] => TrayFigures::default(),
        }
    }

    /// Everything of one deck, from the crests of its own passes and of those of the tray on which its downcomers discharge.
    fn deck_figures(&self, deck: &Deck, crests_m: [f64; 2], crests_below_m: [f64; 2], load: &StageLoad) -> TrayFigures {
        let froth_density = self.froth_density(deck, load);
        let dry_head_m = self.dry_head_m(deck, load);
        let residual_head_m = self.residual_head_m(load);
        let total_head_m = self.deck_head_m(deck, load);
        let crest_below_m = crests_below_m.into_iter().fold(0.0, f64::max);
        let hole_velocity_m_s = load.vapour_m3_s() / deck.hole_area.si();
        let liquid_m3_s = load.liquid_m3_s();

        let mut out = TrayFigures {
            drop_pa: total_head_m * load.rho_l_kg_m3 * STANDARD_GRAVITY_M_S2,
            dry_head_m,
            residual_head_m,
            hole_velocity_m_s,
            downcomer_residence_s: f64::INFINITY,
            hole_velocity_over_onset: f64::INFINITY,
            ..TrayFigures::default()
        };
        let mut weep_m3_s = 0.0;
        for (pass, crest_m) in deck.passes().iter().zip(crests_m) {
            let heads = PassHeads {
                weir_load_m2_s: self.weir_load_m2_s(pass, load),
                liquid_head_m: self.liquid_head_m(deck, pass, load, froth_density),
                crest_m,
            };
            let flow_m3_s = liquid_m3_s * pass.liquid_fraction;
            let top_m2 = pass.downcomer_top_area.si();
            let bottom_m2 = pass.downcomer_bottom_area.si();
            let under_apron_m2 = pass.apron_length.si() * self.clearance_m;
            let apron_head_m = self.methods.apron.head_m(flow_m3_s, top_m2.min(under_apron_m2));
            let backup_m = total_head_m + self.weir_height_m + crest_below_m + apron_head_m;
            let froth_m = backup_m / self.methods.downcomer.froth_density(self.foaming);
            let onset_m_s = self.methods.onset.least_hole_velocity_m_s(
                self.weir_height_m + heads.crest_m,
                self.hole_diameter_m,
                load.rho_v_kg_m3,
            );
            let weep_head_m = self.bennett_head_m(heads.weir_load_m2_s, froth_density);
            weep_m3_s += self.methods.weep.rate_m_s(hole_velocity_m_s, weep_head_m, load.rho_v_kg_m3, load.rho_l_kg_m3)
                * deck.hole_area.si()
                / deck.passes().len() as f64;

            out.liquid_head_m = out.liquid_head_m.max(heads.liquid_head_m);
            out.crest_m = out.crest_m.max(heads.crest_m);
            out.weir_load_m2_s = out.weir_load_m2_s.max(heads.weir_load_m2_s);
            out.apron_head_m = out.apron_head_m.max(apron_head_m);
            out.backup_m = out.backup_m.max(backup_m);
            out.froth = out.froth.max(froth_m / (self.spacing_m + self.weir_height_m));
            out.downcomer_velocity_m_s = out.downcomer_velocity_m_s.max(flow_m3_s / top_m2);
            if flow_m3_s > 0.0 {
                let residence_s = 0.5 * (top_m2 + bottom_m2) * self.spacing_m / flow_m3_s;
                out.downcomer_residence_s = out.downcomer_residence_s.min(residence_s);
            }
            out.apron_velocity_m_s = out.apron_velocity_m_s.max(flow_m3_s / under_apron_m2);
            if onset_m_s > 0.0 {
                out.hole_velocity_over_onset = out.hole_velocity_over_onset.min(hole_velocity_m_s / onset_m_s);
            }
        }
        if liquid_m3_s > 0.0 {
            out.weep = weep_m3_s / liquid_m3_s;
        }
        out
    }

    /// Every published range that this load leaves.
    pub fn outside(&self, layout: &TrayLayout, load: &StageLoad, flood: f64, found: &mut Vec<Outside>) {
        let m = &self.methods;
        let flow_parameter = load.flow_parameter();
        m.capacity.outside(self.spacing_m, flow_parameter, found);
        if flow_parameter < m.low_flow.below_flow_parameter {
            m.low_flow.outside(self.spacing_m, flow_parameter, found);
        }
        m.hole_area.outside(self.hole_area, found);
        m.entrainment.outside(flood, flow_parameter, found);
        m.orifice.outside(self.deck_thickness_m / self.hole_diameter_m, self.hole_area, found);
        for pass in layout.decks().iter().flat_map(Deck::passes) {
            // The crest lies between none and that of half the weir; where both are in range it need not be worked out.
            let half_m = 0.5 * pass.weir.length().si() * self.weir_open;
            let most_m = m.weir.crest_m(load.liquid_m3_s() * pass.liquid_fraction / half_m, 1.0);
            let mut doubts = Vec::new();
            for head_m in [self.weir_height_m, self.weir_height_m + most_m] {
                m.onset.outside(head_m, self.hole_diameter_m, load.rho_v_kg_m3, &mut doubts);
            }
            if !doubts.is_empty() {
                let head_m = self.weir_height_m + self.crest_m(pass, load);
                m.onset.outside(head_m, self.hole_diameter_m, load.rho_v_kg_m3, found);
            }
        }
        m.downcomer.outside(self.spacing_m, found);
    }
}

fn foaming_class(stated: Option<Foaming>) -> FoamingClass {
    match stated {
        None => FoamingClass::Unstated,
        Some(Foaming::Low) => FoamingClass::Low,
        Some(Foaming::Moderate) => FoamingClass::Moderate,
        Some(Foaming::High) => FoamingClass::High,
    }
}

impl TrayFigures {
    /// The worse of two trays, figure by figure.
    fn worse(&self, other: &Self) -> Self {
        Self {
            drop_pa: self.drop_pa.max(other.drop_pa),
            dry_head_m: self.dry_head_m.max(other.dry_head_m),
            liquid_head_m: self.liquid_head_m.max(other.liquid_head_m),
            residual_head_m: self.residual_head_m.max(other.residual_head_m),
            crest_m: self.crest_m.max(other.crest_m),
            apron_head_m: self.apron_head_m.max(other.apron_head_m),
            backup_m: self.backup_m.max(other.backup_m),
            froth: self.froth.max(other.froth),
            downcomer_velocity_m_s: self.downcomer_velocity_m_s.max(other.downcomer_velocity_m_s),
            downcomer_residence_s: self.downcomer_residence_s.min(other.downcomer_residence_s),
            apron_velocity_m_s: self.apron_velocity_m_s.max(other.apron_velocity_m_s),
            weir_load_m2_s: self.weir_load_m2_s.max(other.weir_load_m2_s),
            weep: self.weep.max(other.weep),
            hole_velocity_m_s: self.hole_velocity_m_s.min(other.hole_velocity_m_s),
            hole_velocity_over_onset: self.hole_velocity_over_onset.min(other.hole_velocity_over_onset),
        }
    }
}

#[cfg(test)]
#[path = "half_moon_test.rs"]
mod half_moon_test;
