//! Small checked cases built directly, for tests of the engine.
#![allow(dead_code, missing_docs)]

use chordwall::engine::case::*;
use chordwall::engine::units::*;

/// A row of declared-internals loads: vapour kg/s, liquid kg/s, vapour density, liquid density.
pub fn row(vapour: f64, liquid: f64, rho_v: f64, rho_l: f64) -> Row {
    Row {
        stage: "1".into(),
        vapour_flow: MassRate::from_si(vapour),
        liquid_flow: MassRate::from_si(liquid),
        vapour_density: MassDensity::from_si(rho_v),
        liquid_density: MassDensity::from_si(rho_l),
        vapour_viscosity: DynamicViscosity::from_si(8e-6),
        liquid_viscosity: DynamicViscosity::from_si(3e-4),
        surface_tension: SurfaceTension::from_si(0.018),
        temperature: None,
        pressure: None,
    }
}

/// Declared internals with a capacity factor and, if given, a friction k F^n per metre.
pub fn declared(name: &str, capacity: f64, resistance: Option<(f64, f64)>) -> Internals {
    Internals {
        name: name.into(),
        kind: InternalsKind::Declared(Declared {
            capacity: vec![(0.1, Velocity::from_si(capacity))],
            resistance: resistance
                .map(|(k, exponent)| Resistance::Power { coefficient: PressureGradient::from_si(k), exponent }),
        }),
    }
}

pub fn section(name: &str, place: Place, internals: usize, height: f64) -> Section {
    Section {
        name: name.into(),
        place,
        internals,
        band: 0,
        extent: Extent::Height(Length::from_si(height)),
        system_factor: 1.0,
        criteria: Criteria::default(),
    }
}

pub fn compartment(name: &str) -> Compartment {
    Compartment {
        name: name.into(),
        vapour_share: None,
        vapour_share_band: None,
        liquid_share: None,
        liquid_share_range: None,
        liquid_share_accuracy: None,
    }
}

/// A case from its sections and, for each, the rows at design.
pub fn case(
    internals: Vec<Internals>,
    compartments: &[&str],
    sections: Vec<(Section, Vec<Row>)>,
    diameter: Diameter,
    position: Position,
    thickness: f64,
) -> Case {
    let (sections, loads): (Vec<_>, Vec<_>) = sections.into_iter().unzip();
    Case {
        tag: "T-1".into(),
        title: "constructed".into(),
        revision: String::new(),
        basis: String::new(),
        criteria: CriteriaTable::default(),
        shell: Shell {
            above: diameter,
            wall_zone: diameter,
            below: diameter,
            one_diameter: true,
            step: Length::from_si(0.05),
        },
        wall: Wall {
            reach: Reach::Middle,
            thickness: Length::from_si(thickness),
            bands: vec![Band { name: String::new(), position }],
        },
        compartments: compartments.iter().map(|name| compartment(name)).collect(),
        internals,
        sections,
        devices: Vec::new(),
        points: vec![Point { name: "design".into(), criteria: Criteria::default(), loads }],
        methods: Methods {
            tray_flood: "fair".into(),
            packing_flood: "generalized pressure drop".into(),
            packing_pressure_drop: None,
            aerated_liquid: "bennett".into(),
        },
        reading_notes: Vec::new(),
    }
}
