//! The case file and the loads table, read as a user writes them.

use approx::assert_relative_eq;
use chordwall::engine::case::{
    Case, Deck, Declared, DeviceLoss, Diameter, End, Extent, InternalsKind, Place, Position, Resistance, Row,
};
use chordwall::engine::units::{Length, Si};
use chordwall::input::{self, Found};
use std::fs;
use std::path::Path;

fn file(name: &str) -> String {
    let path = Path::new(env!("CARGO_MANIFEST_DIR")).join("tests").join(name);
    fs::read_to_string(&path).unwrap_or_else(|error| panic!("{}: {error}", path.display()))
}

fn check(case: &str, table: Option<&str>) -> Result<Case, String> {
    let catalogue = input::builtin::catalogue().expect("the built-in correlations can be read");
    let opened = input::open("case.toml", case).map_err(|diagnostics| diagnostics.to_plain_text())?;
    opened.check(table, &catalogue).map_err(|diagnostics| diagnostics.to_plain_text())
}

fn contract() -> Case {
    check(&file("input/contract.toml"), Some(&file("input/contract.csv"))).unwrap_or_else(|text| panic!("{text}"))
}

fn good() -> (String, String) {
    (file("diagnostics/good.toml"), file("diagnostics/good.csv"))
}

fn kind<'a>(case: &'a Case, name: &str) -> &'a InternalsKind {
    &case.internals.iter().find(|internals| internals.name == name).expect("these internals exist").kind
}

#[test]
fn every_key_of_the_contract_is_read() {
    let case = contract();
    assert_eq!((case.tag.as_str(), case.revision.as_str()), ("C-340", "B"));
    assert_eq!(case.criteria.general.approach_to_flood, Some(0.80));
    assert_eq!(case.criteria.tray.approach_to_flood, Some(0.82));
    assert_relative_eq!(case.criteria.general.weir_load.unwrap().si(), 0.025, max_relative = 1e-14);
    assert_relative_eq!(case.criteria.general.wetting.unwrap().si(), 0.5 / 3600.0, max_relative = 1e-14);
    assert_relative_eq!(case.criteria.general.bed_pressure_drop.unwrap().si(), 300.0, max_relative = 1e-14);
    assert!(!case.shell.one_diameter);
    assert_eq!(case.shell.above, Diameter::Size);
    assert_eq!(case.shell.wall_zone, Diameter::Given(Length::from_si(3.1)));
    assert_eq!(case.wall.bands.len(), 2);
    assert_eq!(case.wall.bands[0].position, Position::EqualPressureDrop);
    assert_eq!(case.wall.bands[1].position, Position::Given(vec![Length::from_si(0.21)]));
    assert_eq!(case.compartments[0].vapour_share_band, Some((0.57, 0.62)));
    assert_eq!(case.compartments[1].vapour_share, None);
    assert_eq!(case.sections[1].extent, Extent::Trays(10.0), "7 stages at 0.7 are 10 trays");
    assert_eq!(case.sections[1].criteria.approach_to_flood, Some(0.78));
    assert_eq!(case.sections[2].band, 1);
    let Extent::Height(height) = case.sections[3].extent else { panic!("packing has a height") };
    assert_relative_eq!(height.si(), 4.2, max_relative = 1e-14);
    assert_eq!(case.sections[3].place, Place::Compartment(1));
    assert_eq!(case.devices[0].loss, DeviceLoss::VelocityHeads { free_area: 0.25, heads: 2.5 });
    assert_eq!((case.devices[0].section, case.devices[0].end), (1, End::Below));
    assert_eq!((case.devices[1].section, case.devices[1].end), (3, End::Above));
    assert_eq!(case.devices[1].place, Place::Compartment(1));
    let names: Vec<&str> = case.points.iter().map(|point| point.name.as_str()).collect();
    assert_eq!(names, ["design", "turndown", "maximum"]);
    assert_eq!(case.points[1].criteria.approach_to_flood, Some(0.9));
    assert_eq!(case.points[0].loads[1].len(), 2);
    assert_relative_eq!(case.points[1].loads[0][0].vapour_flow.si(), 0.55 * 40.0 / 3.6, max_relative = 1e-14);
    assert_relative_eq!(case.points[2].loads[0][0].liquid_flow.si(), 33.0 / 3.6, max_relative = 1e-14);
    assert_relative_eq!(case.points[0].loads[0][0].temperature.unwrap().si(), 353.15, max_relative = 1e-14);
    assert!(case.reading_notes.is_empty());
}

#[test]
fn constants_of_the_case_win_over_those_of_the_entry() {
    let case = contract();
    let InternalsKind::Packing(packing) = kind(&case, "sheet") else { panic!("sheet is a packing") };
    let catalogue = input::builtin::catalogue().expect("the built-in correlations can be read");
    let entry = catalogue.packing("sheet 250/45").expect("the entry exists");
    assert_eq!(packing.entry.as_deref(), Some("sheet 250/45"));
    assert_eq!(packing.specific_area.unwrap().si(), 252.0);
    assert_eq!(packing.stichlmair, Some([5.0, 3.0, 0.45]));
    assert_relative_eq!(packing.corrugation_angle_rad.unwrap(), std::f64::consts::FRAC_PI_4, max_relative = 1e-15);
    assert!(packing.stated_in_case.contains(&"stichlmair".to_owned()));
    assert!(packing.from_memory.iter().all(|key| !packing.stated_in_case.contains(key)));
    let (case, table) = good();
    let plain = check(&case, Some(&table)).unwrap_or_else(|text| panic!("{text}"));
    let InternalsKind::Packing(plain) = kind(&plain, "bed") else { panic!("bed is a packing") };
    assert_eq!(plain, entry, "an entry without constants of the case is taken as it is");
}

#[test]
fn trays_and_declared_internals_are_read() {
    let case = contract();
    let InternalsKind::Tray(deck) = kind(&case, "deck") else { panic!("deck is a tray") };
    assert_eq!((deck.deck.clone(), deck.passes, deck.downcomer_bottom_area), (Deck::Sieve, 1, 0.10));
    let InternalsKind::Tray(valves) = kind(&case, "valves") else { panic!("valves are trays") };
    assert_eq!((valves.passes, valves.downcomer_bottom_area, valves.weir_open), (2, 0.12, 1.0));
    assert!(matches!(valves.deck, Deck::Valve { venturi: true, movable: true, legs: Some(3), .. }));
    let InternalsKind::Declared(Declared { capacity, resistance }) = kind(&case, "test-data") else { panic!() };
    assert_eq!((capacity.len(), capacity[0].1.si()), (1, 0.09));
    let Some(Resistance::Power { coefficient, exponent }) = resistance else { panic!("a power law") };
    assert_eq!((coefficient.si(), *exponent), (80.0, 2.0));
    let InternalsKind::Declared(Declared { capacity, resistance }) = kind(&case, "test-points") else { panic!() };
    assert_eq!(capacity.len(), 2);
    let Some(Resistance::Points(points)) = resistance else { panic!("measured points") };
    assert_eq!(points.len(), 3);
    assert_relative_eq!(points[1].1.si(), 190.0, max_relative = 1e-14);
}

#[test]
fn three_compartments_have_two_walls() {
    let (case, table) = good();
    let case = case
        .replace("position = \"equal flood\"", "position = [\"-0.5 m\", \"1.6 ft\"]")
        .replace(
            "[[compartment]]\nname = \"draw side\"",
            "[[compartment]]\nname = \"middle\"\n\n[[compartment]]\nname = \"draw side\"",
        )
        .replace(
            "[loads]",
            "[[section]]\nname = \"mid\"\nplace = \"middle\"\ninternals = \"bed\"\nheight = \"4 m\"\n\n[loads]",
        )
        .replace("vapour_share = 0.6", "vapour_share = 0.5");
    let table = table.replace("bottom,design,7", "mid,design,6a,8,6,2.7,737,0.0086,0.24,18.2\nbottom,design,7");
    let case = check(&case, Some(&table)).unwrap_or_else(|text| panic!("{text}"));
    assert_eq!(case.compartments.len(), 3);
    let Position::Given(positions) = &case.wall.bands[0].position else { panic!("given") };
    assert_eq!(positions[0].si(), -0.5, "the sign is kept");
    assert_relative_eq!(positions[1].si(), 1.6 * 0.3048, max_relative = 1e-15);
}

/// The loads of `good.csv` as rows in the case.
fn inline(case: &str, table: &str) -> String {
    let mut case = case.replace("table = \"loads.csv\"\n", "");
    let units = [" t/h", " t/h", " kg/m3", " kg/m3", " mPa.s", " mPa.s", " mN/m"];
    let keys = [
        "vapour_flow",
        "liquid_flow",
        "vapour_density",
        "liquid_density",
        "vapour_viscosity",
        "liquid_viscosity",
        "surface_tension",
    ];
    for section in ["top", "feed", "draw", "bottom"] {
        let mut rows = String::new();
        for line in table.lines().filter(|line| line.starts_with(&format!("{section},"))) {
            let fields: Vec<&str> = line.split(',').collect();
            rows.push_str(&format!("[[section.load]]\nstage = {}\n", fields[2]));
            for ((key, unit), value) in keys.iter().zip(units).zip(&fields[3..]) {
                rows.push_str(&format!("{key} = \"{value}{unit}\"\n"));
            }
        }
        let at = case.find(&format!("name = \"{section}\"")).expect("the section exists");
        let end = case[at..].find("\n\n").expect("a blank line follows") + at + 1;
        case.insert_str(end, &rows);
    }
    case
}

#[test]
fn rows_in_the_case_are_the_same_as_a_table() {
    let (case, table) = good();
    let by_table = check(&case, Some(&table)).unwrap_or_else(|text| panic!("{text}"));
    let by_rows = check(&inline(&case, &table), None).unwrap_or_else(|text| panic!("{text}"));
    assert_eq!(by_table, by_rows);
}

#[test]
fn columns_in_any_order_with_semicolons_quotes_a_mark_and_other_line_ends_give_the_same_case() {
    let (case, table) = good();
    let plain = check(&case, Some(&table)).unwrap_or_else(|text| panic!("{text}"));
    let turned: String = table
        .lines()
        .map(|line| line.split(',').rev().map(|field| format!("\"{field}\"")).collect::<Vec<_>>().join("; "))
        .map(|line| line.replace("; ", ";"))
        .collect::<Vec<_>>()
        .join("\r\n\r\n");
    let again =
        check(&case.replace('\n', "\r\n"), Some(&format!("\u{FEFF}{turned}"))).unwrap_or_else(|text| panic!("{text}"));
    assert_eq!(plain, again);
    let bytes = format!("\u{FEFF}{table}");
    assert_eq!(input::decode("loads.csv", bytes.as_bytes()).unwrap(), table);
}

#[test]
fn other_encodings_are_refused_with_what_to_do() {
    for bytes in [&b"\xff\xfes\0e\0"[..], b"section,stage\nS\xe9paration,1"] {
        let text = input::decode("loads.csv", bytes).unwrap_err().to_plain_text();
        assert!(text.contains("UTF-8") && text.contains("help: save it again"), "{text}");
    }
}

/// Relative difference of two cases' rows and lengths.
fn same_rows(one: &Row, other: &Row) {
    let numbers = |row: &Row| {
        [
            row.vapour_flow.si(),
            row.liquid_flow.si(),
            row.vapour_density.si(),
            row.liquid_density.si(),
            row.vapour_viscosity.si(),
            row.liquid_viscosity.si(),
            row.surface_tension.si(),
            row.temperature.map_or(1.0, Si::si),
            row.pressure.map_or(1.0, Si::si),
        ]
    };
    for (a, b) in numbers(one).into_iter().zip(numbers(other)) {
        assert_relative_eq!(a, b, max_relative = 1e-12);
    }
}

#[test]
fn us_customary_units_give_the_same_case_as_si() {
    let (case, table) = good();
    // One of each unit, by its exact definition (international foot and pound 1959; gallon of 231 in3).
    let factors = [
        (3, "lb/h", 1000.0 / 0.453_592_37),
        (4, "lb/h", 1000.0 / 0.453_592_37),
        (5, "lb/ft3", 0.3048_f64.powi(3) / 0.453_592_37),
        (6, "lb/ft3", 0.3048_f64.powi(3) / 0.453_592_37),
        (7, "cP", 1.0),
        (8, "cP", 1.0),
        (9, "dyn/cm", 1.0),
    ];
    let mut lines = Vec::new();
    for (number, line) in table.lines().enumerate() {
        let mut fields: Vec<String> = line.split(',').map(str::to_owned).collect();
        for (index, unit, factor) in factors {
            fields[index] = if number == 0 {
                format!("{} [{unit}]", fields[index].split(' ').next().unwrap())
            } else {
                format!("{}", fields[index].parse::<f64>().unwrap() * factor)
            };
        }
        if number == 0 {
            fields.extend(["temperature [degF]".to_owned(), "pressure [psi]".to_owned()]);
        } else {
            fields.extend(["212".to_owned(), format!("{}", 14.5)]);
        }
        lines.push(fields.join(","));
    }
    let us_case = case
        .replace("\"3.0 m\"", &format!("\"{} ft\"", 3.0 / 0.3048))
        .replace("\"10 mm\"", &format!("\"{} in\"", 10.0 / 25.4));
    let us = check(&us_case, Some(&lines.join("\n"))).unwrap_or_else(|text| panic!("{text}"));
    let mut si_table: Vec<String> = table.lines().map(str::to_owned).collect();
    // 212 degF is 100 degC; 14.5 psi by pound-force and inch.
    let pascal = 14.5 * 0.453_592_37 * 9.806_65 / (0.0254 * 0.0254);
    for (number, line) in si_table.iter_mut().enumerate() {
        line.push_str(&if number == 0 {
            ",temperature [K],pressure [Pa]".to_owned()
        } else {
            format!(",373.15,{pascal}")
        });
    }
    let si = check(&case, Some(&si_table.join("\n"))).unwrap_or_else(|text| panic!("{text}"));
    for (a, b) in si.points[0].loads.iter().flatten().zip(us.points[0].loads.iter().flatten()) {
        same_rows(a, b);
    }
    let Diameter::Given(diameter) = us.shell.above else { panic!("given") };
    assert_relative_eq!(diameter.si(), 3.0, max_relative = 1e-12);
    assert_relative_eq!(us.wall.thickness.si(), 0.010, max_relative = 1e-12);
}

/// Turns the rows of a "below stage" table into what a simulator prints: the vapour that leaves each stage. The vapour
/// leaving stage j is what arrives at stage j - 1, so this is the shift read backwards, written independently of it.
#[test]
fn loads_leaving_the_stage_are_shifted_to_below_the_stage() {
    let (case, _) = good();
    // Molar-overflow-free invention: vapour leaving each stage top to bottom, liquid leaving it.
    let table = "section,stage,vapour_flow [kg/s],liquid_flow [kg/s],vapour_density [kg/m3],liquid_density [kg/m3],vapour_viscosity [mPa.s],liquid_viscosity [mPa.s],surface_tension [mN/m]
top,1,10,7,2.0,740,0.008,0.2,18
top,2,11,8,2.1,740,0.008,0.2,18
feed upper,3,7,3,2.2,740,0.009,0.2,18
feed upper,4,7.5,3.5,2.3,740,0.009,0.2,18
feed lower,5,6,9,2.4,740,0.009,0.2,18
feed lower,6,6.2,9.2,2.5,740,0.009,0.2,18
draw,7,4.5,5.5,2.25,740,0.010,0.2,18
draw,8,4.6,5.6,2.35,740,0.010,0.2,18
bottom,9,11,15,2.7,740,0.011,0.2,18
bottom,10,12,16,2.8,740,0.011,0.2,18
";
    let case = case
        .replace("rows = \"below stage\"", "rows = \"leaving stage\"\n\n[[stream]]\nname = \"feed\"\nkind = \"feed\"\nplace = \"feed side\"\nbelow = \"feed upper\"\nflow = \"8 kg/s\"\nvapour_flow = \"1.7 kg/s\"")
        .replace("name = \"feed\"\nplace", "name = \"feed upper\"\nplace")
        .replace(
            "[[section]]\nname = \"draw\"",
            "[[section]]\nname = \"feed lower\"\nplace = \"feed side\"\ninternals = \"bed\"\nheight = \"4.0 m\"\n\n[[section]]\nname = \"draw\"",
        );
    let case = check(&case, Some(table)).unwrap_or_else(|text| panic!("{text}"));
    let vapour: Vec<Vec<f64>> =
        case.points[0].loads.iter().map(|rows| rows.iter().map(|row| row.vapour_flow.si()).collect()).collect();
    let density: Vec<Vec<f64>> =
        case.points[0].loads.iter().map(|rows| rows.iter().map(|row| row.vapour_density.si()).collect()).collect();
    let expected = [
        vec![11.0, 7.0 + 4.5],          // top: next row; then the compartments' first rows together
        vec![7.5, 6.0 + 1.7],           // feed upper: next row; then the first row below the feed and the feed's vapour
        vec![6.2, 0.6 * 11.0],          // feed lower: vapour_share of the first row below the wall
        vec![4.6, 0.4 * 11.0],          // draw
        vec![12.0, 12.0 + 16.0 - 15.0], // bottom: the stage's mass balance
    ];
    for (found, expected) in vapour.iter().flatten().zip(expected.iter().flatten()) {
        assert_relative_eq!(*found, *expected, max_relative = 1e-13);
    }
    let united = 11.5 / (7.0 / 2.2 + 4.5 / 2.25);
    let expected = [[2.1, united], [2.3, 2.4], [2.5, 2.7], [2.35, 2.7], [2.8, 2.8]];
    for (found, expected) in density.iter().flatten().zip(expected.iter().flatten()) {
        assert_relative_eq!(*found, *expected, max_relative = 1e-13);
    }
    let liquid: Vec<f64> = case.points[0].loads[0].iter().map(|row| row.liquid_flow.si()).collect();
    assert_relative_eq!(liquid[0], 7.0, max_relative = 1e-14);
    assert_relative_eq!(liquid[1], 8.0, max_relative = 1e-14);
    assert!(case.reading_notes[0].contains("moved down by one stage"), "{:?}", case.reading_notes);
    assert!(case.reading_notes[1].contains("1.7000 kg/s"), "{:?}", case.reading_notes);
}

/// A wall that is closed at the bottom has nothing below it: each compartment then closes its own mass balance.
#[test]
fn a_wall_closed_at_a_head_has_sections_at_the_other_end_only() {
    let (case, table) = good();
    let without = |text: &str, name: &str| -> String {
        let from = text.find(&format!("[[section]]\nname = \"{name}\"")).expect("the section exists");
        let end = text[from..].find("\n\n").expect("a blank line follows") + from + 2;
        format!("{}{}", &text[..from], &text[end..])
    };
    let rows =
        |name: &str| -> String { table.lines().filter(|line| !line.starts_with(name)).collect::<Vec<_>>().join("\n") };
    let closed = |reach: &str| case.replace("[wall]", &format!("[wall]\nreach = \"{reach}\""));
    let top = check(&without(&closed("top"), "top"), Some(&rows("top"))).unwrap_or_else(|text| panic!("{text}"));
    assert!(top.sections.iter().all(|section| section.place != Place::Above));
    let leaving = without(&closed("bottom"), "bottom").replace("below stage", "leaving stage");
    let bottom = check(&leaving.replace("vapour_share = 0.6", ""), Some(&rows("bottom")))
        .unwrap_or_else(|text| panic!("{text}"));
    // Feed side, last stage: vapour in = vapour out + liquid out - liquid from the stage above, t/h of the table.
    let last = bottom.points[0].loads[1].last().unwrap().vapour_flow.si();
    assert_relative_eq!(last, (24.0 + 39.0 - 20.0) / 3.6, max_relative = 1e-13);
}

#[test]
fn a_table_elsewhere_is_never_named_to_the_caller() {
    let (case, table) = good();
    for name in ["../loads.csv", "/etc/loads.csv", "sub/loads.csv", "sub\\\\loads.csv", "..", ".", "", "C:x.csv"] {
        let case = case.replace("table = \"loads.csv\"", &format!("table = \"{name}\""));
        let opened = input::open("case.toml", &case).expect("the case is TOML");
        assert_eq!(opened.table(), None, "{name}");
        let text = check(&case, Some(&table)).unwrap_err();
        assert!(text.contains("not a plain file name"), "{name}: {text}");
    }
    assert_eq!(input::open("case.toml", &case).unwrap().table(), Some("loads.csv"));
    assert!(check(&case, None).unwrap_err().contains("could not be read"));
}

#[test]
fn a_table_that_is_too_large_is_refused() {
    let (case, table) = good();
    let header = table.lines().next().unwrap();
    let row = table.lines().nth(1).unwrap();
    let rows = std::iter::repeat_n(row, 20_001).collect::<Vec<_>>().join("\n");
    assert!(check(&case, Some(&format!("{header}\n{rows}"))).unwrap_err().contains("more than 20000 rows"));
    let large = " ".repeat(input::MAX_FILE_BYTES + 1);
    assert!(check(&case, Some(&large)).unwrap_err().contains("at most"));
    assert!(input::open("case.toml", &large).is_err());
}

/// Sizes at which a careless search would take minutes or all memory; the run of the tests itself is the check.
#[test]
fn large_hostile_files_are_answered_soon() {
    let (case, table) = good();
    let long = "x".repeat(1_000_000);
    for text in [format!("{long} = 1\n{case}"), case.replace("\"3.0 m\"", &format!("\"3.0 {long}\""))] {
        assert!(check(&text, Some(&table)).unwrap_err().len() < 10_000);
    }
    let header = table.lines().next().unwrap();
    let points: String = (0..19_000).map(|n| format!("top,p{n},1\",40,30,2.4,740,0.0085,0.23,18.5\n")).collect();
    let text = check(&case, Some(&format!("{header}\n{points}"))).unwrap_err();
    assert!(text.contains("more than 100 operating points"), "{text}");
    let sections: String = (0..30_000).map(|n| format!("[[section]]\nname = \"s{n}\"\n")).collect();
    assert!(check(&format!("{case}\n{sections}"), Some(&table)).is_err());
}

#[test]
fn found_numbers_are_written_back_and_everything_else_stays() {
    let text = file("input/contract.toml");
    let found = Found {
        above: Length::from_si(3.1),
        wall_zone: Length::from_si(9.9),
        below: Length::from_si(2.95),
        positions: vec![vec![Length::from_si(0.208_123_456_78)], vec![Length::from_si(0.5)]],
    };
    let written = input::write_back(&text, &found).unwrap();
    let changed: Vec<(&str, &str)> =
        text.lines().zip(written.lines()).filter(|(before, after)| before != after).collect();
    assert_eq!(
        changed,
        [
            (
                "diameter = { above = \"size\", wall_zone = \"3.10 m\", below = \"size\" }",
                "diameter = { above = \"3.10 m\", wall_zone = \"3.10 m\", below = \"2.95 m\" }"
            ),
            ("position = \"equal pressure drop\"", "position = \"0.2081235 m\""),
        ]
    );
    assert_eq!(text.lines().count(), written.lines().count());
    check(&written, Some(&file("input/contract.csv"))).unwrap_or_else(|text| panic!("{text}"));
}

#[test]
fn writing_back_keeps_the_comment_on_the_line() {
    let text = "[shell]\ndiameter = \"size\"   # found by size\n[wall]\nposition = \"equal flood\" # rule\n";
    let found = Found {
        above: Length::from_si(3.0),
        wall_zone: Length::from_si(3.0),
        below: Length::from_si(3.0),
        positions: vec![vec![Length::from_si(-0.000_000_001), Length::from_si(0.25)]],
    };
    let written = input::write_back(text, &found).unwrap();
    assert_eq!(
        written,
        "[shell]\ndiameter = \"3.00 m\"   # found by size\n[wall]\nposition = [\"0.00 m\", \"0.25 m\"] # rule\n"
    );
    assert!(input::write_back("[shell]\n", &found).is_err());
    assert!(input::write_back("not toml", &found).is_err());
}

fn as_json(text: &str) -> serde_json::Value {
    serde_json::to_value(text.parse::<toml::Table>().expect("TOML")).expect("JSON")
}

#[test]
fn the_schema_accepts_the_contract_and_refuses_unknown_keys_and_bare_lengths() {
    let schema = input::case_schema();
    assert_eq!(schema["$schema"], "https://json-schema.org/draft/2020-12/schema");
    let validator = jsonschema::validator_for(&schema).expect("the schema is one");
    let text = file("input/contract.toml");
    let errors: Vec<String> =
        validator.iter_errors(&as_json(&text)).map(|error| format!("{error} at {}", error.instance_path())).collect();
    assert!(errors.is_empty(), "{errors:#?}");
    let (good, table) = good();
    assert!(validator.is_valid(&as_json(&good)));
    assert!(validator.is_valid(&as_json(&inline(&good, &table))));
    for (before, after) in [
        ("height = \"4.2 m\"", "heigth = \"4.2 m\""),
        ("thickness = \"10 mm\"", "thickness = 10"),
        ("tag = \"C-340\"\n", ""),
        ("kind = \"sieve tray\"", "kind = \"sieve\""),
        ("[criteria.tray]", "[criteria.trays]"),
        ("\"0.8 mbar/m\"]", "0.8]"),
    ] {
        assert!(text.contains(before), "{before}");
        assert!(!validator.is_valid(&as_json(&text.replacen(before, after, 1))), "{after} should be refused");
    }
    assert!(!schema.to_string().contains("\"null\""), "TOML has no null");
}

#[test]
fn every_key_of_the_schema_has_a_description() {
    fn walk(value: &serde_json::Value, path: &str, lacking: &mut Vec<String>) {
        if let Some(properties) = value.get("properties").and_then(|properties| properties.as_object()) {
            for (key, property) in properties {
                if property.get("description").is_none() {
                    lacking.push(format!("{path}/{key}"));
                }
            }
        }
        if let Some(object) = value.as_object() {
            object.iter().for_each(|(key, inner)| walk(inner, &format!("{path}/{key}"), lacking));
        }
    }
    for schema in [input::case_schema(), input::bid_schema()] {
        let mut lacking = Vec::new();
        walk(&schema, "", &mut lacking);
        assert!(lacking.is_empty(), "{lacking:?}");
    }
}

#[test]
fn the_schema_of_a_bid_accepts_the_contract_s_example() {
    let validator = jsonschema::validator_for(&input::bid_schema()).expect("the schema is one");
    let bid = "format = 1\nturndown = 0.5\n[bid]\nbidder = \"Bidder A\"\nreference = \"Q-1187 rev 2\"\ncurrency = \"EUR\"\nprice = 412000\nweight = \"18.2 t\"\ndelivery = \"26 weeks\"\nexceptions = [\"Wall seals by others\"]\n[internals.x]\nkind = \"structured packing\"\npacking = \"sheet 250/45\"\n[[offer]]\nsection = \"rectifying\"\ninternals = \"x\"\nheight = \"4.0 m\"\nclaimed_pressure_drop = \"14 mbar\"\nclaimed_flood = 0.78\nguaranteed_within = 0.08\nsheet_thickness = \"0.15 mm\"\n[wall]\nposition = \"0.2 m\"\nthickness = \"8 mm\"\n";
    let errors: Vec<String> = validator.iter_errors(&as_json(bid)).map(|error| error.to_string()).collect();
    assert!(errors.is_empty(), "{errors:?}");
    assert!(!validator.is_valid(&as_json(&bid.replace("claimed_flood", "claimed_floods"))));
}
