//! CSV: columns, units, faults with their line.
use super::*;

/// Check D08's stages with three moisture-stated tension tests, in the documented columns.
pub(super) const GOOD: &str = "\
# invented site, invented laboratory
specimen,test,state,drainage,sheared_along,normal_stress_kpa,peak_shear_stress_kpa,residual_shear_stress_kpa,shear_rate_mm_per_min,tensile_strength_mpa,load_kn,diameter_mm,length_mm,uniaxial_strength_mpa,bulk_density_kg_m3,dry_density_mg_m3,porosity_percent,remarks
A1,direct shear,natural,drained,rock,50,86,40,0.1,,,,,,,,,\"first, low stress\"
A2,direct shear,natural,drained,rock,100,118,,0.1,,,,,,,,,
A3,direct shear,natural,drained,rock,150,160,,0.1,,,,,,,,,
A4,direct shear,natural,drained,rock,200,189,,0.1,,,,,,,,,
A5,direct shear,natural,drained,rock,300,262,,0.1,,,,,,,,,
A6,direct shear,natural,drained,rock,400,329,,0.1,,,,,,,,,

B1,tensile,natural,,,,,,,2.1,,,,,,,,
B2,tensile,natural,,,,,,,2.4,,,,,,,,
B3,disc,natural,,,,,,,,15,54,27,,,,,
C1,uniaxial,,,,,,,,,,54,135,31.5,,,,
D1,density,,,,,,,,,,,,,2400,2.0,20,
";

#[test]
fn every_kind_of_row_arrives_in_si() {
    let file = good(GOOD.as_bytes());
    assert_eq!(lines(&file.warnings), Vec::<String>::new());
    let LabFile { format, results } = file.value;
    assert_eq!(format, Format::Csv);
    assert_eq!((results.shear.len(), results.tensile.len(), results.uniaxial.len(), results.density.len()), (6, 3, 1, 1));
    let first = &results.shear[0];
    assert_eq!((first.origin.line, first.origin.specimen.as_str()), (3, "A1"));
    near(first.normal_at_peak_pa, 50e3);
    near(first.peak_pa.unwrap(), 86e3);
    near(first.residual_pa.unwrap(), 40e3);
    near(first.rate_m_per_s.unwrap(), 1e-4 / 60.0);
    // Check D04: 15 kN on a disc of 54 by 27 mm (from memory, recomputed).
    assert!((results.tensile[2].value_pa - 6.549586135468944e6).abs() < 1e-5);
    assert_eq!(results.tensile[2].origin.line, 12);
    near(results.density[0].dry_kg_per_m3.unwrap(), 2000.0);
    near(results.density[0].porosity.unwrap(), 0.2);
}

#[test]
fn a_rock_of_a_model_takes_its_strengths_from_the_file() {
    let rock = rock_strength(GOOD.as_bytes(), "upper limestone").unwrap();
    // Check D08: c' 51.137 kPa, phi' 34.901 degrees.
    let Uncertain::Lognormal { mean: cohesion_pa, .. } = rock.value.cohesive.cohesion_pa else { panic!("{rock:?}") };
    assert!((cohesion_pa / 1e3 - 51.13725490196077).abs() < 1e-9);
    assert_eq!(rock.value.tests, 3);
    assert_eq!(rock.value.tested, Some(TestedState::Natural));
    assert!(rock.warnings.iter().any(|w| w.code == "lab.size-effect"));
}

#[test]
fn units_in_column_names_are_honored() {
    let in_mpa = "specimen,test,normal_stress_mpa,peak_shear_stress_pa\nA,direct shear,0.05,86000\n";
    let results = good(in_mpa.as_bytes()).value.results;
    near(results.shear[0].normal_at_peak_pa, 50e3);
    near(results.shear[0].peak_pa.unwrap(), 86e3);
    for (column, value) in
        [("bulk_density_kg_m3", "2400"), ("bulk_density_mg_m3", "2.4"), ("bulk_density_t_m3", "2.4"), ("bulk_density_g_cm3", "2.4")]
    {
        let text = format!("specimen,test,{column}\nA,density,{value}\n");
        near(good(text.as_bytes()).value.results.density[0].bulk_kg_per_m3.unwrap(), 2400.0);
    }
}

#[test]
fn a_size_that_suggests_another_unit_is_named() {
    let cases = [
        ("tensile_strength_mpa", "tensile", "2250", "1000 times smaller"),
        ("tensile_strength_kpa", "tensile", "1.9", "1000 times larger"),
        ("uniaxial_strength_kpa", "uniaxial", "18", "1000 times larger"),
        ("bulk_density_mg_m3", "density", "2400", "1000 times smaller"),
        ("bulk_density_kg_m3", "density", "2.4", "1000 times larger"),
    ];
    for (column, test, value, likely) in cases {
        let text = format!("specimen,test,{column}\nA,{test},{value}\n");
        let warnings = lines(&good(text.as_bytes()).warnings);
        assert!(warnings.len() == 1 && warnings[0].starts_with("line 2: specimen A") && warnings[0].ends_with(likely), "{warnings:?}");
    }
}

#[test]
fn headers_that_cannot_be_understood_say_what_is_meant() {
    let header = |text: &str| {
        let faults = read(format!("{text}\nA,tensile,1\n").as_bytes()).unwrap_err();
        format!("{} | {}", faults[0].message, faults[0].hint.clone().unwrap_or_default())
    };
    assert_eq!(header("specimen,test,tensile_strenght_mpa"), "column `tensile_strenght_mpa` is not known | `tensile_strength_mpa`?");
    assert!(header("specimen,test,tensile_strength").starts_with("column `tensile_strength` needs the unit of a stress in its name"));
    assert!(header("specimen,test,length_kpa").starts_with("column `length_kpa` needs the unit of a length in its name"));
    assert!(header("specimen,test,tensile_strength_mpa,tensile_strength_kpa").contains("give the same quantity"));
    assert!(header("specimen,tensile_strength_mpa").starts_with("column `test` is missing"));
}

#[test]
fn every_wrong_row_is_named_at_once() {
    let text = "specimen,test,normal_stress_kpa,peak_shear_stress_kpa,tensile_strength_mpa,sheared_along\n\
        ,direct shear,50,86,,\n\
        A2,shear box,50,86,,\n\
        A3,direct shear,50,,,\n\
        A4,direct shear,,86,,\n\
        A5,tensile,,,-2,\n\
        A6,tensile,,,nan,\n\
        A7,tensile,,,two,\n\
        A8,direct shear,50,86,,slope\n\
        A9,direct shear,50,86\n";
    assert_eq!(
        faults(text.as_bytes()),
        [
            "line 2: column `specimen` is empty",
            "line 3: test `shear box` is not known",
            "line 4: this test needs peak_shear_stress or residual_shear_stress",
            "line 5: this test needs normal_stress",
            "line 6: `tensile_strength_mpa` must be a finite number above 0, got -2",
            "line 7: `tensile_strength_mpa` must be a finite number above 0, got NaN",
            "line 8: `tensile_strength_mpa` must be a number, got `two`",
            "line 9: sheared_along `slope` is not known",
            "line 10: 4 fields where the header has 6",
        ]
    );
}

#[test]
fn semicolons_are_read_and_decimal_commas_explained() {
    let semicolons = "specimen;test;tensile_strength_mpa\nA;tensile;2.1\n";
    near(good(semicolons.as_bytes()).value.results.tensile[0].value_pa, 2.1e6);
    let comma = read(b"specimen;test;tensile_strength_mpa\nA;tensile;2,1\n").unwrap_err();
    assert_eq!(comma[0].hint.as_deref(), Some("write a decimal point, not a comma"));
}

#[test]
fn an_open_quote_is_named_with_its_line() {
    let text = "specimen,test,tensile_strength_mpa\nA,tensile,2\n\"B,tensile,2\nC,tensile,2\n";
    assert_eq!(faults(text.as_bytes()), ["line 3: a quote that is opened in this row is not closed on its line"]);
}

#[test]
fn byte_order_mark_and_encodings() {
    let with_mark = [b"\xEF\xBB\xBF".as_slice(), GOOD.as_bytes()].concat();
    assert_eq!(good(&with_mark).value, good(GOOD.as_bytes()).value);
    let latin = b"specimen,test,tensile_strength_mpa,remarks\nGr\xE8s 1,tensile,2,35\xB0\n";
    assert_eq!(good(latin).value.results.tensile[0].origin.specimen, "Grès 1");
    assert_eq!(faults(b"\xFF\xFEs\0p\0"), ["the file: the file is UTF-16"]);
    assert_eq!(faults(b"specimen,test\nA\0,tensile\n"), ["line 2: a zero byte: this is no text file"]);
    assert_eq!(faults(b""), ["the file: no laboratory result was found"]);
    assert_eq!(faults(b"specimen,test\n"), ["the file: no laboratory result was found"]);
}

#[test]
fn rocks_of_one_file_are_chosen_by_name() {
    let text = "specimen,test,rock,tensile_strength_mpa\nA,tensile,marl,1\nB,tensile,limestone,4\nC,tensile,,9\n";
    let results = good(text.as_bytes()).value.results;
    let marl = select(&results, Some("marl")).unwrap();
    assert_eq!(marl.value.tensile.len(), 1);
    assert_eq!(lines(&marl.warnings), ["the file: 1 results name no rock and are left out beside those of `marl`"]);
    let refused = select(&results, Some("slate")).unwrap_err();
    assert_eq!(refused.message, "the file holds results of several rocks: `marl`, `limestone`; none of them is `slate`");
    assert!(select(&results, None).is_err());
    assert_eq!(select(&good(GOOD.as_bytes()).value.results, Some("anything")).unwrap().value.tensile.len(), 3);
    assert_eq!(split_reference("tern.csv#marl", "upper"), ("tern.csv", "marl"));
    assert_eq!(split_reference("tern.csv", "upper"), ("tern.csv", "upper"));
}
