//! Stresses and section resultants against independent finite-element results, through the model file.
//!
//! Source: `tests/data/reference/` (independent code, not published). Tolerance of each file: the larger of twice its error bar
//! and 0.1 % of the value (0.5 % on lines that start at the back), because that is how well the reference is known; entries whose own
//! error bar exceeds 2 % of the case's largest stress are left out, and at least 90 % must be used.
use std::fmt::Write;
use std::path::Path;

use brinkline::model_file;
use checker::assess::{self, Scope, Unwatched};
use checker::outcome::DepthResult;
use serde_json::Value;

/// The model file of a reference case: a plain vertical face with a round slot of the case's depth.
pub(super) fn model_text(case: &Value, target_error: f64) -> String {
    let spec = &case["spec"];
    let (height, slot) = (spec["H"].as_f64().unwrap(), spec["slot_height"].as_f64().unwrap());
    let (depth, domain) = (spec["depth"].as_f64().unwrap(), &spec["domain"]);
    let (sea, land, below) =
        (domain["seaward"].as_f64().unwrap(), domain["landward"].as_f64().unwrap(), domain["below_platform"].as_f64().unwrap());
    let mut t = String::from("format = 1\ntitle = \"reference case\"\n[section]\n");
    writeln!(t, "surface = [[-{sea}, 0.0], [0.0, 0.0], [0.0, {height}], [{land}, {height}]]").unwrap();
    let layers = spec["layers"].as_array().unwrap();
    for (i, layer) in layers.iter().enumerate() {
        writeln!(t, "[[layers]]\nrock = {}", layer["name"]).unwrap();
        if i + 1 < layers.len() {
            writeln!(t, "base = {}", layer["base"][0][1]).unwrap();
        }
    }
    for layer in layers {
        let (e, nu, gamma) = (layer["E"].as_f64().unwrap(), layer["nu"].as_f64().unwrap(), layer["gamma"].as_f64().unwrap());
        let k0 = spec["K0"]["K0"].as_f64().unwrap_or(nu / (1.0 - nu));
        writeln!(t, "[rocks.{}]\nunit_weight_kn_m3 = {gamma}\nyoungs_modulus_mpa = {}\npoissons_ratio = {nu}", layer["name"], e / 1e3)
            .unwrap();
        writeln!(t, "k0 = {k0}\nstrength_basis = \"rock mass\"\ntensile_strength_kpa = 500\ncohesion_kpa = 900\nfriction_angle_deg = 35")
            .unwrap();
    }
    situation(&mut t, spec);
    writeln!(t, "[undercut]\nsetting = \"straight cliff\"\ngrowth = \"advance\"").unwrap();
    writeln!(t, "search_to_depth_m = {depth:?}\ndepth_step_m = {depth:?}\nfloor_level_m = 0.0\nroof_level_m = {slot:?}\nback = \"round\"")
        .unwrap();
    writeln!(t, "[checks]\naveraging_length_m = 0.5\ntarget_error = {target_error}").unwrap();
    writeln!(t, "[extent]\nseaward_x_m = -{sea}\nlandward_x_m = {land}\nbase_z_m = -{below}").unwrap();
    for (name, point) in spec["points_s"].as_object().unwrap() {
        writeln!(t, "[[probes]]\nname = \"{name}\"\nat = {point}").unwrap();
    }
    for (name, line) in spec["lines"].as_object().unwrap() {
        for over in ["0.1", "0.25", "0.5", "1.0"] {
            if case["expected"].get(format!("line.{name}.{over}")).is_some() {
                writeln!(t, "[[probes]]\nname = \"{name}.{over}\"\nat = {}\ntoward = {}\nover_m = {over}", line["p"], line["t"]).unwrap();
            }
        }
    }
    writeln!(t, "[[cuts]]\nname = \"back\"\nfrom = [{depth:?}, {:?}]\nto = [{depth:?}, {height:?}]", 0.5 * slot).unwrap();
    t
}

/// Surcharge and ground motion of a case.
fn situation(t: &mut String, spec: &Value) {
    let kh = spec["kh"].as_f64().unwrap_or(0.0);
    let table = spec.get("water_table").map_or("\"dry, observed\"".to_owned(), Value::to_string);
    writeln!(t, "[[situations]]\nname = \"the case\"\ngroundwater = {table}").unwrap();
    if 0.0 < kh {
        writeln!(t, "inertia_seaward = {kh}").unwrap();
    }
    if let Some(load) = spec["surcharge"].get(0) {
        writeln!(
            t,
            "[[surcharges]]\nname = \"strip\"\nx_m = [{:?}, {:?}]\npressure_kpa = {}",
            load["x0"].as_f64().unwrap(),
            load["x1"].as_f64().unwrap(),
            load["q"]
        )
        .unwrap();
    }
}

/// Everything compared of one case: name, expected, allowed, got.
fn compare(case: &Value, at: &DepthResult) -> (Vec<(String, f64, f64, f64)>, usize) {
    let expected = case["expected"].as_object().unwrap();
    let stresses = expected.iter().filter(|(k, _)| k.starts_with("s.") || k.starts_with("line."));
    let largest = stresses.clone().map(|(_, v)| v["value"].as_f64().unwrap().abs()).fold(0.0, f64::max);
    let (mut rows, mut total) = (Vec::new(), 0);
    for (key, entry) in stresses {
        total += 1;
        let (value, err) = (entry["value"].as_f64().unwrap(), entry["err"].as_f64().unwrap());
        if 0.02 * largest < err {
            continue;
        }
        let parts: Vec<&str> = key.splitn(2, '.').collect();
        let share = if key.starts_with("line.apex") { 5e-3 } else { 1e-3 };
        let got = if parts[0] == "line" {
            at.probes.iter().find(|p| p.name == parts[1]).unwrap().mean_of_major.unwrap()
        } else {
            let (name, component) = parts[1].rsplit_once('.').unwrap();
            let s = at.probes.iter().find(|p| p.name == name).unwrap().stress_kpa.unwrap();
            match component {
                "xx" => s.xx,
                "zz" => s.zz,
                "xz" => s.xz,
                "s1" => s.major,
                _ => s.minor,
            }
        };
        rows.push((key.clone(), value, (2.0 * err).max(share * value.abs()), got));
    }
    (rows, total)
}

/// Largest miss of a case in units of its tolerance; panics with the list of misses.
#[track_caller]
fn check(name: &str) {
    let folder = Path::new(env!("CARGO_MANIFEST_DIR")).join("data/reference");
    let case: Value = serde_json::from_str(&std::fs::read_to_string(folder.join(name)).unwrap()).unwrap();
    let loaded = model_file::from_text(model_text(&case, TARGET), "case.toml", &folder).map_err(|f| format!("{:?}", f.findings)).unwrap();
    let result = assess::run(&loaded.model, Scope::Deepen, &Unwatched).unwrap();
    let depth = case["spec"]["depth"].as_f64().unwrap();
    let at = result.outcome.depths.iter().find(|d| (d.depth_m - depth).abs() < 1e-9).unwrap();
    let (rows, total) = compare(&case, at);
    assert!(9 * total <= 10 * rows.len(), "{name}: only {} of {total} entries used", rows.len());
    let misses: Vec<String> = rows
        .iter()
        .filter(|(_, value, allowed, got)| !((got - value).abs() <= *allowed))
        .map(|(key, value, allowed, got)| format!("{key}: expected {value:.4}, allowed {allowed:.4}, got {got:.4}"))
        .collect();
    let unknowns = result.outcome.numerics.unknowns;
    assert!(misses.is_empty(), "{name} ({unknowns} unknowns), {} of {} entries:\n{}", misses.len(), rows.len(), misses.join("\n"));
    resultants(name, &case["statics"], at);
}

/// Section resultants at the back against exact statics. Tolerance 1e-6: the slot's circle is meshed by parabolas.
#[track_caller]
pub(super) fn resultants(name: &str, statics: &Value, at: &DepthResult) {
    let cut = &at.cuts[0];
    let size = statics["V"].as_f64().unwrap();
    let length = statics["h"].as_f64().unwrap();
    let off = [
        (cut.axial_kn_per_m - statics["N"].as_f64().unwrap()) / size,
        (cut.shear_kn_per_m - size) / size,
        (cut.moment_knm_per_m - statics["M"].as_f64().unwrap()) / (size * length),
    ];
    assert!(off.iter().all(|d| d.abs() < 1e-6), "{name}: N, V, M off by {off:?} of V and V h: {cut:?}");
}

/// Target of utilizations and probes in these runs.
pub(super) const TARGET: f64 = 0.001;

macro_rules! cases {
    ($($name:ident),*) => { $(#[test] fn $name() { check(concat!(stringify!($name), ".json")); })* };
}
cases!(
    case1_d1,
    case1_d2,
    case1_d4,
    case1_d6,
    case1_d8,
    case1k_d6,
    case2_d4,
    case3_d1,
    case3_d2,
    case3_d3,
    case3_d4,
    case3_d5,
    case3_d6,
    case7_both,
    case7_seismic,
    case7_surcharge
);
