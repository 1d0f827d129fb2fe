//! `lab = "file"` and `hoek_brown` in a model, from the files to the strengths.
use super::csv_files::GOOD;
use super::*;
use checker::model::{PartialFactors, Rock, RockStrength};
use checker::strength::{Inputs, RockCapacity, Strength, design};

/// The starter model with the strengths of its first typed rock replaced by `source`.
fn model(source: &str) -> String {
    let starter = crate::commands::STARTER;
    let is_strength = |line: &str| {
        ["tensile_strength_kpa", "cohesion_kpa", "friction_angle_deg", "correlation", "tests", "tested", "strength_basis", "mass_factor"]
            .iter()
            .any(|key| line.trim_start().starts_with(key))
    };
    let (mut replaced, mut left) = (false, false);
    let mut out = String::new();
    for line in starter.lines() {
        left |= replaced && line.starts_with('[');
        let text = match (left || !is_strength(line), replaced) {
            (true, _) => line,
            (false, true) => continue,
            (false, false) => source,
        };
        replaced |= text == source;
        out.push_str(text);
        out.push('\n');
    }
    out
}

/// A folder of this test's own, removed at the end.
struct Folder(std::path::PathBuf);

impl Folder {
    fn new(name: &str) -> Self {
        let path = std::env::temp_dir().join(format!("brinkline-lab-{name}-{}", std::process::id()));
        std::fs::create_dir_all(&path).unwrap();
        Self(path)
    }

    #[expect(clippy::disallowed_methods, reason = "tests of the boundary")]
    fn write(&self, name: &str, text: &str) {
        std::fs::write(self.0.join(name), text).unwrap();
    }
}

impl Drop for Folder {
    fn drop(&mut self) {
        let _ = std::fs::remove_dir_all(&self.0);
    }
}

#[track_caller]
fn rock_of(source: &str, folder: &Folder) -> Rock {
    let loaded = match crate::model_file::from_text(model(source), "model.toml", &folder.0) {
        Ok(loaded) => loaded,
        Err(failure) => panic!("{}", crate::diagnostics::render(&failure.findings, crate::args::DiagnosticsForm::Short, false)),
    };
    let strong = loaded.model.rocks.into_iter().find(|rock| rock.strength != RockStrength::None);
    strong.expect("the starter model has a rock with strength")
}

#[track_caller]
fn best(rock: &Rock) -> Strength {
    let none = PartialFactors { tension: 1.0, cohesion: 1.0, friction: 1.0, unit_weight: 1.0, en_1997_m2: false };
    match design(rock, Inputs::BestEstimate, &none, 20.0).unwrap().value.capacity {
        RockCapacity::Resists(strength) => strength,
        RockCapacity::NoStrength => panic!("no strength"),
    }
}

#[test]
fn a_laboratory_file_gives_the_strengths_of_a_rock() {
    let folder = Folder::new("csv");
    folder.write("tern.csv", GOOD);
    let rock = rock_of("strength_basis = \"intact\"\nmass_factor = { tension = 0.2, cohesion = 0.3 }\nlab = \"tern.csv\"", &folder);
    assert_eq!((rock.tests, rock.tested), (Some(3), Some(TestedState::Natural)));
    let strength = best(&rock);
    // Check D08: c' 51.137 kPa, phi' 34.901 degrees; times 0.3 for the mass.
    assert!((strength.cohesion_pa / 1e3 - 0.3 * 51.13725490196077).abs() < 1e-9);
    assert!((strength.tan_friction.atan().to_degrees() - 34.90144122174903).abs() < 1e-9);
    // A stated number of tests counts before that of the file.
    let stated = rock_of("strength_basis = \"rock mass\"\ntests = 4\nlab = \"tern.csv\"", &folder);
    assert_eq!(stated.tests, Some(4));
}

#[test]
fn a_rating_gives_the_strengths_of_a_rock() {
    let folder = Folder::new("rating");
    let rock = rock_of("hoek_brown = { gsi = 55, mi = 9, disturbance = 0.7, uniaxial_strength_mpa = 30 }", &folder);
    // Check D01 (from memory, recomputed): tensile strength 0.0581204 MPa.
    assert!((best(&rock).tensile_strength_pa / 1e6 - 0.0581204).abs() < 5e-7);
}
