use super::*;
use checker::model::{
    AboveTable, Averaging, BackShape, Carries, ContactLine, DeepeningRate, EvidenceKind, Growth, Headline, JointKind, RemedyKind,
    RockStrength, Setting, StartsCarrying, StrengthBasis, TestedState, Uncertain,
};
use std::collections::BTreeSet;
use std::path::PathBuf;

fn data(name: &str) -> PathBuf {
    Path::new(env!("CARGO_MANIFEST_DIR")).join("../tests/data").join(name)
}

/// A file of the tests whose only errors are keys that are not built yet.
fn whole(name: &str) -> (Model, Findings) {
    let path = data("full").join(name);
    #[expect(clippy::disallowed_methods, reason = "a test reads its data")]
    let text = std::fs::read_to_string(&path).unwrap();
    let reading = read_all(&text, name, &data("full"));
    let errors: Vec<_> = reading.findings.list.iter().filter(|one| one.diagnostic.severity == Severity::Error).collect();
    assert!(errors.iter().all(|one| one.diagnostic.code == "key.not-available"), "{errors:#?}");
    assert!(reading.findings.sources[0].text == text && !reading.unreadable);
    (reading.model.unwrap(), reading.findings)
}

fn small(extra: &str) -> String {
    format!(
        "format = 1\ntitle = \"Small\"\n[section]\nsurface = [[-30, -0.5], [0, 0.4], [2, 1.0], [0.5, 2.0], [1.0, 12.0], [40, 12.5]]\n[[layers]]\nrock = \"r\"\n\
         [undercut]\nsearch_to_depth_m = 6\n[rocks.r]\nunit_weight_kn_m3 = 24\nyoungs_modulus_mpa = 8000\npoissons_ratio = 0.25\n\
         strength_basis = \"rock mass\"\ntensile_strength_kpa = 400\ncohesion_kpa = 900\nfriction_angle_deg = 38\n{extra}\n"
    )
}

fn close(a: f64, b: f64) -> bool {
    (a - b).abs() <= 1e-12 * b.abs().max(1.0)
}

/// Hand conversions: 1 kN/m3 = 1e3 N/m3, 1 kPa = 1e3 Pa, 1 MPa = 1e6 Pa, 1 MPa m^0.5 = 1e6 Pa m^0.5, 180 degrees = pi.
#[test]
fn rocks_arrive_in_si_units() {
    let (model, _) = whole("full.toml");
    let rock = &model.rocks[1];
    assert_eq!(rock.name, "upper limestone");
    assert_eq!(rock.unit_weight_n_per_m3, Uncertain::Normal { mean: 24_000.0, standard_deviation: 0.03 * 24.0 * 1e3 });
    assert_eq!(rock.saturated_unit_weight_n_per_m3, Uncertain::Normal { mean: 24_800.0, standard_deviation: 500.0 });
    assert!(close(rock.youngs_modulus_pa, 8e9) && close(rock.poissons_ratio, 0.24));
    assert_eq!((rock.strength_basis, rock.tests, rock.tested), (StrengthBasis::Intact, Some(6), Some(TestedState::Dry)));
    assert!(close(rock.mass_factor.tension, 0.2) && close(rock.mass_factor.cohesion, 0.3) && close(rock.wet_factor, 0.8));
    assert_eq!(rock.uniaxial_strength_pa, Some(Uncertain::Exact(18e6)));
    assert_eq!(rock.fracture_toughness_pa_sqrt_m, Some(Uncertain::Exact(0.6e6)));
    assert_eq!(rock.k0, Some(Uncertain::Uniform { min: 0.3, max: 0.8 }));
    let RockStrength::Typed(strength) = &rock.strength else { panic!("{:?}", rock.strength) };
    assert_eq!(strength.tensile_strength_pa, Uncertain::Lognormal { mean: 2.25e6, cov: 0.35 });
    assert_eq!(strength.cohesion_pa, Uncertain::Lognormal { mean: 2.3e6, cov: 0.3 });
    let Uncertain::TruncatedNormal { mean, standard_deviation, min, max } = strength.friction_angle_rad else { panic!() };
    let degree = std::f64::consts::PI / 180.0;
    assert!(
        close(mean, 38.0 * degree) && close(standard_deviation, 3.04 * degree) && close(min, 25.0 * degree) && close(max, 50.0 * degree)
    );
    assert!(close(strength.cohesion_friction_correlation, -0.4));
    assert!(matches!(model.rocks[0].strength, RockStrength::None));
    let RockStrength::HoekBrown(rating) = &model.rocks[2].strength else { panic!() };
    assert_eq!((rating.gsi, rating.uniaxial_strength_pa), (Uncertain::Exact(55.0), Uncertain::Exact(30e6)));
    assert!(matches!(model.rocks[3].strength, RockStrength::Typed(_)), "from the laboratory file");
}

#[test]
fn layers_water_and_loads_arrive() {
    let (model, _) = whole("full.toml");
    assert_eq!(model.layers.iter().map(|layer| layer.rock).collect::<Vec<_>>(), [0, 1, 2, 3]);
    assert_eq!((model.layers[0].carries, model.layers[1].carries), (Carries::LoadOnly, Carries::LoadAndTension));
    assert!(close(model.layers[0].rest_slope_rad.unwrap(), 40f64.to_radians()));
    assert_eq!(model.layers[0].base, Some(ContactLine::Level(27.4)));
    let Some(ContactLine::Dip { z_m, dip_seaward_rad, .. }) = &model.layers[2].base else { panic!() };
    assert!(close(*z_m, 8.4) && close(*dip_seaward_rad, 3f64.to_radians()));
    assert_eq!(model.layers[3].base, None);
    let situation = &model.situations[0];
    assert!(close(situation.water_unit_weight_n_per_m3, 9810.0) && close(situation.sea_unit_weight_n_per_m3, 10_050.0));
    let AboveTable::Suction { suction_limit_pa, .. } = situation.above_table else { panic!() };
    assert!(close(suction_limit_pa, 15_000.0) && close(situation.inertia_seaward, 0.08));
    assert_eq!(
        (situation.crack_water_above_tip_m, situation.annual_chance, situation.surcharges.as_slice()),
        (Some(2.0), Some(0.002), [0].as_slice())
    );
    assert!(close(model.surcharges[0].pressure_pa, 40_000.0) && model.surcharges[0].inertia);
    let set = &model.joint_sets[0];
    // The section's landward bearing is 140 degrees, so a dip direction of 320 degrees is straight toward the sea.
    assert!(close(set.dip_seaward_rad, 85f64.to_radians()) && set.strike_off_cliff_rad.unwrap().abs() < 1e-12);
    assert_eq!((set.kind, set.rocks.as_slice()), (JointKind::Joint, [1].as_slice()));
}

#[test]
fn undercut_checks_outlook_and_remedies_arrive() {
    let (model, _) = whole("full.toml");
    let undercut = &model.undercut;
    assert_eq!(
        (undercut.setting, undercut.growth, undercut.start_shape.unwrap().back),
        (Setting::HeadlandCorner, Growth::Stretch, BackShape::Wedge)
    );
    assert_eq!((model.checks.headline, model.checks.averaging), (Headline::BestEstimate, Averaging::Given(0.4)));
    assert!(close(model.checks.partial_factors.cohesion, 1.1) && !model.checks.partial_factors.en_1997_m2);
    let outlook = model.outlook.as_ref().unwrap();
    assert!(matches!(outlook.rate, DeepeningRate::Given { .. }));
    assert_eq!((outlook.samples, outlook.seed, outlook.assets.len()), (200_000, 7, 2));
    assert!(outlook.assets[0].from_brow && !outlook.assets[1].from_brow);
    assert_eq!((model.evidence[0].what, model.evidence[0].rock), (EvidenceKind::Stood, 1));
    let kinds: Vec<&RemedyKind> = model.remedies.iter().map(|remedy| &remedy.kind).collect();
    assert!(matches!(kinds[0], RemedyKind::Fill { rock: 4, starts_carrying: StartsCarrying::AtOnce, .. }));
    assert!(matches!(kinds[1], RemedyKind::Bars { force_n, .. } if close(*force_n, 240_000.0)));
    // 1 kN/mm = 1e6 N/m.
    assert!(matches!(kinds[2], RemedyKind::Props { stiffness_n_per_m, .. } if close(*stiffness_n_per_m, 400e6)));
    assert!(matches!(kinds[3], RemedyKind::Piles { surcharge: 0, .. }));
    assert_eq!(kinds[4], &RemedyKind::Combination(vec![0, 3]));
    let toward = model.probes[0].toward.unwrap();
    assert!(toward[0].abs() < 1e-12 && close(toward[1], -1.0));
    assert!(close(model.location.as_ref().unwrap().landward_grid_bearing_rad, 140f64.to_radians()));
    assert_eq!(model.report.recommendations.as_deref(), Some("Close the path.\nFence the [31mbrow."));
    assert!(model.section.surface[0].inferred && !model.section.surface[4].inferred);
    let (other, _) = whole("other-forms.toml");
    assert!(other.checks.partial_factors.en_1997_m2 && close(other.checks.partial_factors.friction, 1.25));
    assert!(matches!(&other.outlook.unwrap().rate, DeepeningRate::Surveys(surveys) if surveys.len() == 3));
    assert!(matches!(whole("edge-retreat.toml").0.outlook.unwrap().rate, DeepeningRate::EdgeRetreat(_)));
}

/// Apparent dip by hand: dip 45 degrees, direction 60 degrees off the seaward direction: atan(tan 45 cos 60) = 26.565 degrees.
#[test]
fn a_true_dip_becomes_an_apparent_one() {
    let text = std::borrow::Cow::from(small(
        "[location]\ncrs = \"EPSG:1\"\norigin_easting_m = 0\norigin_northing_m = 0\nlandward_grid_bearing_deg = 30\n[[joint_sets]]\nname = \"J\"\nrocks = [\"r\"]\n\
         dip_deg = 45\ndip_direction_deg = 270\ncohesion_kpa = 0\nfriction_angle_deg = 30\ntensile_strength_kpa = 0\n",
    ));
    let set = read_all(&text, "a", Path::new(".")).model.unwrap().joint_sets[0].clone();
    assert!((set.dip_seaward_rad.to_degrees() - 26.565_051_177).abs() < 1e-8);
    assert!((set.strike_off_cliff_rad.unwrap().to_degrees() - 60.0).abs() < 1e-9);
}

#[test]
fn every_default_used_is_listed() {
    let loaded = from_text(small(""), "a.toml", Path::new(".")).unwrap();
    let mut listed = loaded.model.defaults_used.clone();
    listed.sort();
    assert_eq!(
        listed,
        [
            "below.keep_out_m = 1.5 x cliff height",
            "checks.averaging_length_m = 0.1 x overhang thickness, at most 1.0 m",
            "checks.headline = \"cautious\"",
            "checks.partial_factors = \"none\"",
            "checks.required_reserve = 1",
            "checks.target_error = 0.02",
            "extent.base_z_m = from the cliff height",
            "extent.landward_x_m = from the cliff height",
            "extent.seaward_x_m = from the cliff height",
            "layers[1].carries = \"load and tension\"",
            "rocks.r.wet_factor = 1",
            "situations = one, \"ordinary\": no groundwater, all surcharges, no ground motion",
            "undercut.depth_step_m = 0.5",
            "undercut.growth = \"advance\"",
            "undercut.setting = \"straight cliff\"",
        ]
    );
    let uncertain = small("k0 = { mean = 0.5, cov = 0.1 }");
    let loaded = from_text(uncertain, "a.toml", Path::new(".")).unwrap();
    assert!(loaded.model.defaults_used.contains(&"rocks.r.k0.distribution = \"lognormal\"".to_owned()));
}

#[test]
fn every_capability_that_is_not_built_yet_is_named() {
    let keys: BTreeSet<String> =
        ["full.toml", "other-forms.toml"].iter().flat_map(|name| whole(name).1.list).map(|one| one.diagnostic.at).collect();
    for entry in not_yet::NOT_YET_AVAILABLE {
        let pattern = |at: &str| {
            let rock = if entry.key.contains('*') { at.replace(".marl.", ".*.").replace(".sandstone.", ".*.") } else { at.to_owned() };
            rock.replace("[1]", "[]")
        };
        assert!(keys.iter().any(|at| pattern(at) == entry.key), "{} in {keys:?}", entry.key);
    }
}

/// The full models together hold every key, so that no key is left without a reading.
#[test]
fn the_full_models_hold_every_key() {
    #[expect(clippy::disallowed_methods, reason = "a test reads its data")]
    let text: String = ["full.toml", "other-forms.toml", "edge-retreat.toml"]
        .map(|name| std::fs::read_to_string(data("full").join(name)).unwrap())
        .concat();
    let mut words: BTreeSet<&str> = text.split(|c: char| !(c.is_alphanumeric() || c == '_')).collect();
    words.insert("surface");
    let missing: Vec<String> = keys_of(&json_schema()).into_iter().filter(|key| !words.contains(key.as_str())).collect();
    assert!(missing.is_empty(), "{missing:?}");
}

fn keys_of(schema: &serde_json::Value) -> BTreeSet<String> {
    let mut keys = BTreeSet::new();
    if let Some(map) = schema.as_object() {
        if let Some(properties) = map.get("properties").and_then(|properties| properties.as_object()) {
            keys.extend(properties.keys().cloned());
        }
        keys.extend(map.values().flat_map(keys_of));
    }
    keys.extend(schema.as_array().into_iter().flatten().flat_map(keys_of));
    keys
}

#[test]
fn names_of_keys_carry_their_unit() {
    fn check(shape: &'static kinds::Shape) {
        for field in shape.fields {
            let suffix = match field.kind {
                kinds::Kind::Number(quantity) | kinds::Kind::Uncertain(quantity, _) => match quantity.unit {
                    kinds::Unit::Kilopascal => "_kpa",
                    kinds::Unit::Megapascal => "_mpa",
                    kinds::Unit::KilonewtonPerCubicMeter => "_kn_m3",
                    kinds::Unit::Degree => "_deg",
                    kinds::Unit::Kilonewton => "_kn",
                    kinds::Unit::KilonewtonPerMillimeter => "_kn_per_mm",
                    kinds::Unit::MegapascalRootMeter => "_mpa_sqrt_m",
                    kinds::Unit::Meter => "_m",
                    kinds::Unit::Year => "_years",
                    kinds::Unit::One | kinds::Unit::MeterPerYear | kinds::Unit::PerYear => "",
                },
                kinds::Kind::Table(below) | kinds::Kind::Tables(below) | kinds::Kind::Named(below) => {
                    check(below);
                    ""
                }
                _ => "",
            };
            assert!(field.key.ends_with(suffix), "{} lacks {suffix}", field.key);
            assert!(!field.doc.ends_with('.') && !field.doc.is_empty(), "{}", field.key);
        }
        for one_of in shape.one_of {
            assert!(one_of.keys.iter().all(|key| shape.field(key).is_some()));
        }
        assert!(shape.together.iter().copied().flatten().all(|key| shape.field(key).is_some()));
        assert!(shape.mistakes.iter().all(|(wrong, _)| shape.field(wrong).is_none()), "a mistake that is a key");
    }
    check(&keys::MODEL);
}

/// A warning about the unit, with the likely one.
#[test]
fn values_of_another_unit_are_remarked_on() {
    let cases = [
        ("unit_weight_kn_m3 = 24\n", "unit_weight_kn_m3 = 2450\n", "kg/m3"),
        ("unit_weight_kn_m3 = 24\n", "unit_weight_kn_m3 = 2.45\n", "t/m3"),
        ("youngs_modulus_mpa = 8000", "youngs_modulus_mpa = 8", "GPa"),
        ("youngs_modulus_mpa = 8000", "youngs_modulus_mpa = 8000000", "kPa"),
        ("tensile_strength_kpa = 400", "tensile_strength_kpa = 0.4", "MPa"),
        ("cohesion_kpa = 900", "cohesion_kpa = 0.9", "MPa"),
        ("friction_angle_deg = 38", "friction_angle_deg = 0.66", "rad"),
    ];
    for (good, bad, likely) in cases {
        let text = small("");
        assert!(text.contains(good));
        let loaded = from_text(text.replace(good, bad), "a.toml", Path::new(".")).unwrap();
        let hints: Vec<&str> = loaded
            .warnings
            .list
            .iter()
            .filter(|one| one.diagnostic.code == "value.unit")
            .filter_map(|one| one.diagnostic.hint.as_deref())
            .collect();
        assert!(hints.iter().any(|hint| hint.starts_with("likely") && hint.contains(likely)), "{bad}: {:?}", loaded.warnings.list);
    }
    let named = small("").replace("[rocks.r]", "[rocks.limestone]").replace("\"r\"", "\"limestone\"").replace("= 8000", "= 40");
    let loaded = from_text(named, "a.toml", Path::new(".")).unwrap();
    let unusual = loaded.warnings.list.iter().find(|one| one.diagnostic.code == "value.unusual").unwrap();
    assert!(unusual.diagnostic.message.contains("unusual for limestone"), "{unusual:?}");
}

/// A soft layer without tensile strength loads only, with a note.
#[test]
fn a_soft_cap_loads_only_by_default() {
    let text = small("[rocks.sand]\nunit_weight_kn_m3 = 18\nyoungs_modulus_mpa = 30\npoissons_ratio = 0.3\n")
        .replace("[[layers]]\nrock = \"r\"", "[[layers]]\nrock = \"sand\"\nbase = 11\nrest_slope_deg = 33\n[[layers]]\nrock = \"r\"");
    let loaded = from_text(text, "a.toml", Path::new(".")).unwrap();
    assert_eq!(loaded.model.layers[0].carries, Carries::LoadOnly);
    assert!(loaded.model.defaults_used.contains(&"layers[1].carries = \"load only\"".to_owned()));
    assert!(loaded.warnings.list.iter().any(|one| one.diagnostic.code == "layers.load-only"));
}

/// Findings of later stages are placed by their key path, or by the nearest key above it.
#[test]
fn later_findings_are_placed_in_the_file() {
    let loaded = from_text(small(""), "a.toml", Path::new(".")).unwrap();
    let line = |at: &str| {
        let findings = loaded.locate(&[Diagnostic::error("x.y", at, "m")]);
        findings.list[0].place.as_ref().and_then(|place| findings.position(place)).map(|at| at.line)
    };
    assert_eq!(line("rocks.r.cohesion_kpa"), Some(15));
    assert_eq!(line("rocks.r.k0"), Some(9));
    assert_eq!(line("section.surface[3]"), Some(4));
    assert_eq!(line("layers[1].base"), Some(5));
    assert_eq!(line(""), None);
}

/// The hash of the bytes as they are; expected value by an independent tool (`printf 'abc' | sha256sum`, FIPS 180-2 example).
#[test]
fn the_hash_is_that_of_the_bytes() {
    assert_eq!(hexadecimal(&Sha256::digest(b"abc")), "ba7816bf8f01cfea414140de5dae2223b00361a396177a9cb410ff61f20015ad");
}
