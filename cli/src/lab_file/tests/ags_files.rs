//! AGS4: files written here in every edition, units, and faults with line and group.
//!
//! Headings, units and types are those of the published dictionaries 4.0.3 to 4.2.
use super::*;

/// One group of a file to write: name, headings with unit and type, data rows.
struct Written {
    name: &'static str,
    headings: Vec<(&'static str, &'static str, &'static str)>,
    rows: Vec<Vec<String>>,
}

/// A transfer in the making.
struct Transfer {
    groups: Vec<Written>,
}

fn texts(row: &[&str]) -> Vec<String> {
    row.iter().map(|field| (*field).to_owned()).collect()
}

const KEYS: [(&str, &str, &str); 7] = [
    ("LOCA_ID", "", "ID"),
    ("SAMP_TOP", "m", "2DP"),
    ("SAMP_REF", "", "X"),
    ("SAMP_TYPE", "", "PA"),
    ("SAMP_ID", "", "ID"),
    ("SPEC_REF", "", "X"),
    ("SPEC_DPTH", "m", "2DP"),
];

/// Key fields of specimen `i` of hole BH1.
fn keys(i: usize) -> Vec<String> {
    texts(&["BH1", "4.00", &format!("R{i}"), "C", "", "1", "4.20"])
}

impl Transfer {
    /// Check D08's stages, tension, compression, point load and density as edition `edition` writes them.
    fn new(edition: &str) -> Self {
        let later = edition.starts_with("4.1") || edition == "4.2";
        let mut groups = vec![
            Written { name: "PROJ", headings: vec![("PROJ_ID", "", "ID")], rows: vec![texts(&["invented"])] },
            Written {
                name: "TRAN",
                headings: vec![("TRAN_ISNO", "", "X"), ("TRAN_DATE", "yyyy-mm-dd", "DT"), ("TRAN_AGS", "", "X")],
                rows: vec![texts(&["1", "2026-03-14", edition])],
            },
        ];
        let stages: Vec<Vec<String>> = [(50, 86), (100, 118), (150, 160), (200, 189), (300, 262), (400, 329)]
            .iter()
            .enumerate()
            .map(|(i, (normal, peak))| {
                let mut row = keys(i);
                row.extend(texts(&[&format!("{}", i + 1), &format!("{normal}"), "0.05", &format!("{peak}.0"), ""]));
                if later {
                    row.extend(texts(&["", ""]));
                }
                row
            })
            .collect();
        let mut shbt = KEYS.to_vec();
        shbt.extend([
            ("SHBT_TESN", "", "X"),
            ("SHBT_NORM", "kPa", "0DP"),
            ("SHBT_DISP", "mm/min", "2SF"),
            ("SHBT_PEAK", "kPa", "1DP"),
            ("SHBT_RES", "kPa", "1DP"),
        ]);
        if later {
            shbt.extend([("SHBT_PVST", "kPa", "0DP"), ("SHBT_RVST", "kPa", "0DP")]);
        }
        groups.push(Written { name: "SHBT", headings: shbt, rows: stages });
        groups.extend(rock_groups(later));
        let mut transfer = Self { groups };
        transfer.list_units();
        transfer
    }

    /// Groups UNIT and TYPE from what the others use.
    fn list_units(&mut self) {
        let listed = |pick: fn(&(&'static str, &'static str, &'static str)) -> &'static str| {
            let mut all: Vec<&str> = self.groups.iter().flat_map(|g| g.headings.iter().map(pick)).filter(|x| !x.is_empty()).collect();
            all.sort_unstable();
            all.dedup();
            all.into_iter().map(|x| texts(&[x, x])).collect::<Vec<_>>()
        };
        let (units, types) = (listed(|h| h.1), listed(|h| h.2));
        self.groups.push(Written { name: "UNIT", headings: vec![("UNIT_UNIT", "", "X"), ("UNIT_DESC", "", "X")], rows: units });
        self.groups.push(Written { name: "TYPE", headings: vec![("TYPE_TYPE", "", "X"), ("TYPE_DESC", "", "X")], rows: types });
    }

    fn group(&mut self, name: &str) -> &mut Written {
        self.groups.iter_mut().find(|g| g.name == name).unwrap()
    }

    fn unit(&mut self, heading: &str, unit: &'static str) {
        let headings = self.groups.iter_mut().flat_map(|g| &mut g.headings);
        headings.filter(|h| h.0 == heading).for_each(|h| h.1 = unit);
    }

    fn values(&mut self, heading: &str, change: impl Fn(&str) -> String) {
        for group in &mut self.groups {
            if let Some(i) = group.headings.iter().position(|h| h.0 == heading) {
                group.rows.iter_mut().for_each(|row| row[i] = change(&row[i]));
            }
        }
    }

    fn text(&self) -> String {
        let mut out = String::new();
        for group in &self.groups {
            let mut row = |descriptor: &str, fields: Vec<&str>| {
                let quoted: Vec<String> =
                    std::iter::once(descriptor).chain(fields).map(|f| format!("\"{}\"", f.replace('"', "\"\""))).collect();
                out.push_str(&quoted.join(","));
                out.push_str("\r\n");
            };
            row("GROUP", vec![group.name]);
            row("HEADING", group.headings.iter().map(|h| h.0).collect());
            row("UNIT", group.headings.iter().map(|h| h.1).collect());
            row("TYPE", group.headings.iter().map(|h| h.2).collect());
            group.rows.iter().for_each(|fields| row("DATA", fields.iter().map(String::as_str).collect()));
            out.push_str("\r\n");
        }
        out
    }

    /// Line of a group's row: 0 is its GROUP row, 1 HEADING, 2 UNIT, 3 TYPE, 4 the first DATA row.
    fn line(&self, name: &str, row: usize) -> usize {
        let i = self.groups.iter().position(|g| g.name == name).unwrap();
        1 + row + self.groups[..i].iter().map(|g| g.rows.len() + 5).sum::<usize>()
    }
}

/// A sound file of the newest edition.
pub(super) fn good_text() -> String {
    Transfer::new("4.2").text()
}

fn with_keys(more: &[(&'static str, &'static str, &'static str)]) -> Vec<(&'static str, &'static str, &'static str)> {
    KEYS.iter().chain(more).copied().collect()
}

fn row(i: usize, more: &[&str]) -> Vec<String> {
    keys(i).into_iter().chain(texts(more)).collect()
}

/// Rock tests; compression moduli have other headings in later editions.
fn rock_groups(later: bool) -> Vec<Written> {
    let (modulus, ratio) = if later { ("RUCS_EAVG", "RUCS_MUAV") } else { ("RUCS_E", "RUCS_MU") };
    let rucs = [
        ("RUCS_SDIA", "mm", "1DP"),
        ("RUCS_LEN", "mm", "1DP"),
        ("RUCS_COND", "", "X"),
        ("RUCS_UCS", "MPa", "3SF"),
        (modulus, "GPa", "3SF"),
        (ratio, "", "2DP"),
    ];
    let rten = [("RTEN_SDIA", "mm", "1DP"), ("RTEN_LEN", "mm", "1DP"), ("RTEN_COND", "", "X"), ("RTEN_TENS", "MPa", "3SF")];
    let tension = ["2.10", "2.40", "1.90", "2.20"];
    vec![
        Written { name: "RUCS", headings: with_keys(&rucs), rows: vec![row(1, &["54.0", "135.0", "as received", "31.5", "12.0", "0.24"])] },
        Written {
            name: "RTEN",
            headings: with_keys(&rten),
            rows: tension.iter().enumerate().map(|(i, v)| row(i, &["54.0", "27.0", "as received", v])).collect(),
        },
        Written {
            name: "RPLT",
            headings: with_keys(&[("RPLT_PLS", "MPa", "2DP"), ("RPLT_PLSI", "MPa", "2DP"), ("RPLT_PLTF", "", "PA")]),
            rows: vec![row(1, &["1.71", "1.78", "A+L"])],
        },
        Written {
            name: "RDEN",
            headings: with_keys(&[
                ("RDEN_BDEN", "kg/m3", "0DP"),
                ("RDEN_DDEN", "kg/m3", "0DP"),
                ("RDEN_PORO", "%", "1DP"),
                ("RDEN_IDEN", "Mg/m3", "2DP"),
            ]),
            rows: vec![row(1, &["2400", "2000", "20.0", "2.65"])],
        },
    ]
}

/// Numbers only: lines and names differ where a file was changed around them.
fn numbers(file: &LabFile) -> Vec<f64> {
    let r = &file.results;
    let mut all: Vec<f64> = r.shear.iter().flat_map(|s| [s.normal_at_peak_pa, s.peak_pa.unwrap(), s.rate_m_per_s.unwrap()]).collect();
    all.extend(r.uniaxial.iter().chain(&r.tensile).chain(&r.point_load).map(|t| t.value_pa));
    all.extend(r.modulus.iter().flat_map(|m| [m.youngs_modulus_pa, m.poissons_ratio.unwrap()]));
    all.extend(r.density.iter().flat_map(|d| [d.bulk_kg_per_m3.unwrap(), d.dry_kg_per_m3.unwrap(), d.porosity.unwrap()]));
    all
}

#[track_caller]
fn same_numbers(file: &LabFile, expected: &LabFile) {
    let (got, expected) = (numbers(file), numbers(expected));
    assert_eq!(got.len(), expected.len());
    got.iter().zip(&expected).for_each(|(g, e)| near(*g, *e));
}

#[test]
fn every_edition_gives_the_same_strengths() {
    let newest = good(Transfer::new("4.2").text().as_bytes());
    assert_eq!(lines(&newest.warnings), Vec::<String>::new());
    near(newest.value.results.tensile[0].value_pa, 2.1e6);
    near(newest.value.results.shear[5].peak_pa.unwrap(), 329e3);
    near(newest.value.results.modulus[0].youngs_modulus_pa, 12e9);
    assert_eq!(newest.value.results.uniaxial[0].state, Some(TestedState::Natural));
    for edition in ["4.0.3", "4.0.4", "4.1", "4.1.1", "4.2"] {
        let file = good(Transfer::new(edition).text().as_bytes());
        assert_eq!(file.value.format, Format::Ags4(edition.to_owned()));
        same_numbers(&file.value, &newest.value);
        let rock = rock_strength(Transfer::new(edition).text().as_bytes(), "limestone").unwrap().value;
        assert_eq!(rock, rock_strength(Transfer::new("4.2").text().as_bytes(), "limestone").unwrap().value);
        assert_eq!(rock.tests, 4);
    }
}

#[test]
fn both_encodings_both_line_ends_and_a_mark_give_the_same() {
    let mut transfer = Transfer::new("4.0.4");
    transfer.group("PROJ").rows[0][0] = "Grès \"du\" cap, 35°".to_owned();
    let text = transfer.text();
    let utf8 = good(text.as_bytes());
    let latin: Vec<u8> = text.chars().map(|c| u8::try_from(u32::from(c)).unwrap()).collect();
    assert_eq!(good(&latin).value, utf8.value);
    assert_eq!(good(text.replace("\r\n", "\n").as_bytes()).value, utf8.value);
    assert_eq!(good(format!("\u{feff}{text}").as_bytes()).value, utf8.value);
}

#[test]
fn the_unit_row_is_honored_and_an_unusual_unit_named() {
    let expected = good(Transfer::new("4.2").text().as_bytes()).value;
    let mut transfer = Transfer::new("4.2");
    let scaled = |times: f64| move |v: &str| v.parse::<f64>().map_or_else(|_| v.to_owned(), |x| format!("{}", x * times));
    transfer.unit("SHBT_PEAK", "MPa");
    transfer.values("SHBT_PEAK", scaled(1e-3));
    transfer.unit("RTEN_TENS", "kPa");
    transfer.values("RTEN_TENS", scaled(1e3));
    transfer.unit("RDEN_BDEN", "Mg/m3");
    transfer.values("RDEN_BDEN", scaled(1e-3));
    let file = good(transfer.text().as_bytes());
    same_numbers(&file.value, &expected);
    let unusual = |name: &str, heading: &str, unit: &str, usual: &str| {
        let line = transfer.line(name, 2);
        format!(
            "line {line}, group {name}, heading {heading}: unit `{unit}` where the AGS4 dictionaries have `{usual}`; values are read in `{unit}`"
        )
    };
    assert_eq!(
        lines(&file.warnings),
        [
            unusual("SHBT", "SHBT_PEAK", "MPa", "kPa"),
            unusual("RTEN", "RTEN_TENS", "kPa", "MPa"),
            unusual("RDEN", "RDEN_BDEN", "Mg/m3", "kg/m3"),
        ]
    );
}

#[test]
fn values_in_another_unit_than_their_unit_row_are_doubted() {
    let cases: [(&str, f64, &str); 4] = [
        ("RTEN_TENS", 1e3, "tensile strength"),
        ("RDEN_BDEN", 1e-3, "density"),
        ("RUCS_UCS", 1e3, "uniaxial strength"),
        ("SHBT_PEAK", 1e3, "stress of a shear stage"),
    ];
    for (heading, times, what) in cases {
        let mut transfer = Transfer::new("4.1");
        transfer.values(heading, |v| format!("{}", v.parse::<f64>().unwrap() * times));
        let warnings = good(transfer.text().as_bytes()).warnings;
        assert!(warnings.iter().any(|w| w.code == "lab.unit-doubt" && w.message.contains(what)), "{heading}: {:?}", lines(&warnings));
    }
}

#[test]
fn a_wrong_unit_is_named_with_line_group_and_heading() {
    for (unit, said) in [("kg", "unit `kg` for a stress"), ("", "no unit for a stress")] {
        let mut transfer = Transfer::new("4.2");
        transfer.unit("RTEN_TENS", unit);
        let expected = format!("line {}, group RTEN, heading RTEN_TENS: {said}", transfer.line("RTEN", 2));
        assert_eq!(faults(transfer.text().as_bytes()), [expected]);
    }
}

#[test]
fn a_missing_group_is_named() {
    for name in ["PROJ", "TRAN", "UNIT", "TYPE"] {
        let mut transfer = Transfer::new("4.2");
        transfer.groups.retain(|g| g.name != name);
        let text = transfer.text();
        let end = text.lines().count();
        let expected = format!("line {end} (end of file), group {name}: group {name} is missing; every AGS4 transfer must hold it");
        assert_eq!(faults(text.as_bytes()), [expected]);
    }
    let mut transfer = Transfer::new("4.2");
    let shbg = with_keys(&[("SHBG_PCOH", "kPa", "2SF"), ("SHBG_PHI", "deg", "1DP")]);
    transfer.groups.push(Written { name: "SHBG", headings: shbg, rows: vec![row(0, &["50", "35.0"])] });
    transfer.groups.retain(|g| g.name != "SHBT");
    let said = faults(transfer.text().as_bytes());
    assert!(said.iter().any(|f| f.contains("group SHBT with the stages behind them is missing")), "{said:?}");
}

#[test]
fn an_unbalanced_quote_is_named_with_line_and_group() {
    let transfer = Transfer::new("4.2");
    let line = transfer.line("RTEN", 5);
    let text: Vec<String> = transfer.text().lines().map(str::to_owned).collect();
    let broken = |change: fn(&str) -> String| {
        let mut text = text.clone();
        text[line - 1] = change(&text[line - 1]);
        faults(text.join("\r\n").as_bytes())
    };
    assert_eq!(broken(|l| l[..l.len() - 1].to_owned()), [format!("line {line}, group RTEN: a quote is not closed")]);
    assert_eq!(
        broken(|l| l.replacen("\"54.0\"", "54.0\"", 1)),
        [format!("line {line}, group RTEN: a quote inside a field that has none at its start")]
    );
    assert_eq!(
        broken(|l| l.replacen("\"54.0\"", "\"54\"0\"", 1)),
        [format!("line {line}, group RTEN: text after the closing quote of a field")]
    );
    assert_eq!(
        broken(|l| l.replacen("\"54.0\",", "", 1)),
        [format!("line {line}, group RTEN: a DATA row with 10 fields where the HEADING row has 11")]
    );
}

#[test]
fn broken_structure_is_named() {
    let text = Transfer::new("4.2").text();
    let without = |start: &str, group: &str| {
        let mut inside = false;
        let kept = text.lines().filter(|l| {
            if l.starts_with("\"GROUP\"") {
                inside = l.contains(group);
            }
            !(inside && l.starts_with(start))
        });
        faults(kept.collect::<Vec<_>>().join("\r\n").as_bytes())
    };
    let line = Transfer::new("4.2").line("RTEN", 0);
    assert_eq!(without("\"UNIT\"", "RTEN"), [format!("line {line}, group RTEN: group RTEN has no UNIT row")]);
    assert_eq!(without("\"TYPE\"", "RTEN"), [format!("line {line}, group RTEN: group RTEN has no TYPE row")]);
    assert!(without("\"HEADING\"", "RTEN").contains(&format!("line {line}, group RTEN: group RTEN has no HEADING row")));
    let twice = format!("{text}{text}");
    assert!(faults(twice.as_bytes()).iter().any(|f| f.contains("group RTEN stands in the file twice, first in line")));
    assert_eq!(faults(b"\"**PROJ\"\r\n"), ["line 1: this is an AGS3 file, an older format"]);
    let word = text.replacen("\"2.40\"", "\"n/a\"", 1);
    assert_eq!(
        faults(word.as_bytes()),
        [format!("line {}, group RTEN, heading RTEN_TENS: a number above 0 is needed, got `n/a`", line + 5)]
    );
}

#[test]
fn stress_at_the_event_counts_before_the_stress_applied() {
    let mut transfer = Transfer::new("4.1.1");
    transfer.values("SHBT_PVST", |_| "55".to_owned());
    near(good(transfer.text().as_bytes()).value.results.shear[2].normal_at_peak_pa, 55e3);
}

#[test]
fn remade_specimens_joints_and_own_fits_come_from_the_general_group() {
    let mut transfer = Transfer::new("4.2");
    let shbg = with_keys(&[("SHBG_COND", "", "PA"), ("SHBG_PCOH", "kPa", "2SF"), ("SHBG_PHI", "deg", "1DP"), ("SHBG_REM", "", "X")]);
    let rows = vec![row(0, &["REMOULDED", "50", "35.0", ""]), row(1, &["UNDISTURBED", "", "", "along a natural joint"])];
    transfer.groups.push(Written { name: "SHBG", headings: shbg, rows });
    let results = good(transfer.text().as_bytes()).value.results;
    assert!(results.shear[0].remoulded && !results.shear[1].remoulded);
    assert_eq!(results.shear[1].along, checker::lab::ShearedAlong::Joint);
    assert_eq!(results.own_fits.len(), 1);
    near(results.own_fits[0].friction_angle_rad, 35.0_f64.to_radians());
    assert_eq!(results.own_fits[0].origin.specimen, results.shear[0].origin.specimen);
}

#[test]
fn strata_name_the_rock_of_a_specimen() {
    let mut transfer = Transfer::new("4.2");
    let geol = vec![("LOCA_ID", "", "ID"), ("GEOL_TOP", "m", "2DP"), ("GEOL_BASE", "m", "2DP"), ("GEOL_LEG", "", "PU")];
    let rows = vec![texts(&["BH1", "0.00", "3.50", "CLAY"]), texts(&["BH1", "3.50", "12.00", "LST"])];
    transfer.groups.push(Written { name: "GEOL", headings: geol, rows });
    let results = good(transfer.text().as_bytes()).value.results;
    assert_eq!(results.rocks(), ["LST"]);
    assert_eq!(results.of_rock("LST").tensile.len(), 4);
}

#[test]
fn unknown_editions_and_unlisted_units_are_read_with_a_warning() {
    let mut transfer = Transfer::new("4.9");
    transfer.group("UNIT").rows.retain(|r| r[0] != "GPa");
    let warnings = lines(&good(transfer.text().as_bytes()).warnings);
    assert_eq!(warnings.len(), 2);
    assert!(warnings[0].contains("heading TRAN_AGS: edition `4.9` is not one of 4.0.3"), "{warnings:?}");
    assert!(warnings[1].ends_with("group RUCS: units not listed in group UNIT: GPa"), "{warnings:?}");
}
