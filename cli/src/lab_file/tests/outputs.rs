//! What is printed, pasted and drawn.
use super::csv_files::GOOD;
use super::*;

fn summary_of(text: &str) -> LabSummary {
    summary(&good(text.as_bytes()).value.results, None).unwrap().value
}

#[test]
fn significant_digits() {
    for (value, expected) in
        [(0.0, "0"), (51.13725, "51.14"), (0.0716, "0.0716"), (2240.0, "2240"), (123456.0, "123456"), (2.0, "2"), (-0.859337, "-0.8593")]
    {
        assert_eq!(text::significant(value), expected);
    }
}

#[test]
fn the_rock_table_is_toml_with_the_models_keys() {
    let table = rock_table("upper \"limestone\"", "tern.csv", &summary_of(GOOD));
    let parsed: toml::Table = table.parse().unwrap();
    let rock = &parsed["rocks"]["upper \"limestone\""];
    // Check D08: c' 51.137 kPa, phi' 34.901 degrees.
    assert!((rock["cohesion_kpa"]["mean"].as_float().unwrap() - 51.14).abs() < 1e-9);
    assert!((rock["friction_angle_deg"]["mean"].as_float().unwrap() - 34.9).abs() < 1e-9);
    assert_eq!(rock["strength_basis"].as_str(), Some("intact"));
    assert_eq!(rock["tested"].as_str(), Some("natural"));
    assert_eq!(rock["tests"].as_integer(), Some(3));
    assert!(rock["correlation"]["cohesion_friction"].as_float().unwrap() < 0.0);
    // By hand: 2400 kg/m3 x 9.80665 = 23.536 kN/m3, saturated 9.80665 (2000 + 200) = 21.575.
    assert!((rock["unit_weight_kn_m3"].as_float().unwrap() - 23.54).abs() < 1e-9);
    assert!((rock["saturated_unit_weight_kn_m3"].as_float().unwrap() - 21.57).abs() < 1e-9);
    assert!(table.contains("# mass_factor") && rock.get("mass_factor").is_none());
}

#[test]
fn a_table_without_enough_tests_says_what_is_missing() {
    let table = rock_table("x", "tern.csv", &summary_of("specimen,test,tensile_strength_mpa\nA,tensile,2\n"));
    assert!(table.contains("# strengths: the file lacks tensile tests (3 or more) or a peak shear fit"), "{table}");
    assert!(table.parse::<toml::Table>().unwrap()["rocks"]["x"].get("tensile_strength_kpa").is_none());
}

#[test]
fn the_printed_summary_has_intervals_and_fractiles() {
    let printed = text::summary(&summary_of(GOOD)).unwrap();
    // Check D08.
    assert!(printed.contains("cohesion c'               51.1 kPa   95 % interval 44.8 to 57.5"), "{printed}");
    assert!(printed.contains("friction angle phi'       34.9 deg   95 % interval 33.8 to 35.9"), "{printed}");
    assert!(printed.contains("correlation of c' and tan phi' -0.86, scatter of stages 2.9 kPa"), "{printed}");
    assert!(printed.contains("under 3 tests"), "{printed}");
}

#[test]
fn the_object_carries_the_numbers_unrounded() {
    let file = good(GOOD.as_bytes()).value;
    let summary = summary_of(GOOD);
    let about = json::About { file: "tern.csv", format: &file.format, rock: None, table: "", warnings: &[] };
    let value: serde_json::Value = serde_json::from_str(&json::object(&summary, &about).unwrap()).unwrap();
    let peak = &value["shear"]["direct shear, peak"];
    assert!((peak["cohesion_kpa"].as_f64().unwrap() - 51.13725490196077).abs() < 1e-9);
    assert!((peak["friction_angle_95_percent_deg"][1].as_f64().unwrap() - 35.93997935401903).abs() < 1e-9);
    assert_eq!(value["results"]["tensile strength"]["tests"], 3);
    assert_eq!(value["format"], "CSV");
}

#[test]
fn the_picture_holds_every_stage_and_escapes_its_title() {
    let svg = plot::svg(&summary_of(GOOD), "<Tern> & \"Son\"").unwrap().unwrap();
    assert_eq!(svg.matches("<circle").count(), 6 + 1);
    assert!(svg.contains("&lt;Tern&gt; &amp; &quot;Son&quot;") && !svg.contains("<Tern>"));
    assert!(!svg.contains("NaN") && !svg.contains("inf"));
    assert!(plot::svg(&LabSummary::default(), "x").unwrap().is_none());
}
