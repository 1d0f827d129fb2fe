//! Effective stress and section resultants under a sloping water table against independent finite-element results.
//!
//! Source: `tests/data/reference/case8_low.json` (independent code, not published). There the effective stress is all of `D eps(u)`: gravity and
//! pore pressure switched on in ground without in-situ stress. So the loads are put together here, from the program's own pore pressure, on
//! the program's own mesh. Tolerance as in `reference_cases.rs`.
use std::path::Path;

use brinkline::model_file;
use checker::analysis::samples::on_segment;
use checker::analysis::water::WaterField;
use checker::assess::{self, Scope, Unwatched};
use checker::model::{AboveTable, Groundwater, SeaLevel, Uncertain};
use fem_core::assembly::{body_force, initial_stress_split};
use fem_core::mesh::Mesh;
use fem_core::tensor::{major, minor};
use serde_json::Value;

use crate::reference_cases::{TARGET, model_text, resultants};

fn pair(value: &Value) -> [f64; 2] {
    [value[0].as_f64().unwrap(), value[1].as_f64().unwrap()]
}

/// Loads of the reference: total unit weight everywhere and pore pressure, nothing in situ.
fn gravity_and_pore_pressure(mesh: &Mesh, water: &WaterField) -> Vec<f64> {
    let kinks = |t: usize| water.kinks(&mesh.triangles[t].map(|n| mesh.points_m[n as usize]));
    let pressure = |_: usize, p: [f64; 2]| [-water.pressure_pa(p), -water.pressure_pa(p), 0.0];
    let mut load = body_force(mesh, &|_, _| [0.0, -24e3]);
    let pore = initial_stress_split(mesh, &pressure, &kinks, 0..mesh.triangles.len() as u32);
    load.iter_mut().zip(pore).for_each(|(sum, add)| *sum += add);
    load
}

#[test]
fn case8_low() {
    let folder = Path::new(env!("CARGO_MANIFEST_DIR")).join("data/reference");
    let case: Value = serde_json::from_str(&std::fs::read_to_string(folder.join("case8_low.json")).unwrap()).unwrap();
    let loaded = model_file::from_text(model_text(&case, TARGET), "case.toml", &folder).map_err(|f| format!("{:?}", f.findings)).unwrap();
    let depth_m = case["spec"]["depth"].as_f64().unwrap();
    let prepared = assess::prepare(&loaded.model).unwrap();
    let (record, stress) = checker::depth::record(&prepared.context(), depth_m, None).unwrap();
    let (mesh, water) = (&stress.mesh, &stress.columns.fields[0]);
    assert!(water.drawdown_m <= 0.0, "the table runs below every free face: {}", water.drawdown_m);
    let load = gravity_and_pore_pressure(mesh, water);
    let displacements = stress.solve_loads(&[load]).unwrap().remove(0);
    let recovered = stress.recover(&displacements);
    let at = |p: [f64; 2]| {
        let (element, xi) = stress.locate(p, record.section.layer_at(p)).unwrap();
        stress.layout().evaluate(&recovered, element as usize, xi).map(|s| s / 1e3)
    };
    let expected = case["expected"].as_object().unwrap();
    let largest = expected.iter().filter(|(k, _)| k.starts_with("s.")).map(|(_, v)| v["value"].as_f64().unwrap().abs()).fold(0.0, f64::max);
    let (mut used, mut misses) = (0, Vec::new());
    for (key, entry) in expected.iter().filter(|(k, _)| k.starts_with("s.") || k.starts_with("line.")) {
        let (value, err) = (entry["value"].as_f64().unwrap(), entry["err"].as_f64().unwrap());
        if 0.02 * largest < err {
            continue;
        }
        let (kind, rest) = key.split_once('.').unwrap();
        let got = if kind == "s" {
            let (name, component) = rest.rsplit_once('.').unwrap();
            let s = at(pair(&case["spec"]["points_s"][name]));
            match component {
                "xx" => s[0],
                "zz" => s[1],
                "xz" => s[2],
                "s1" => major(s),
                _ => minor(s),
            }
        } else {
            let (name, over) = rest.split_once('.').unwrap();
            let line = &case["spec"]["lines"][name];
            on_segment(pair(&line["p"]), pair(&line["t"]), over.parse().unwrap()).iter().map(|&(p, w)| w * major(at(p))).sum()
        };
        let share = if key.starts_with("line.apex") { 5e-3 } else { 1e-3 };
        let allowed = (2.0 * err).max(share * value.abs());
        used += 1;
        if !((got - value).abs() <= allowed) {
            misses.push(format!("{key}: expected {value:.4}, allowed {allowed:.4}, got {got:.4}"));
        }
    }
    assert!(40 <= used, "{used}");
    assert!(misses.is_empty(), "{} unknowns, {} of {used}:\n{}", record.quality.unknowns, misses.len(), misses.join("\n"));
    let result = assess::run(&loaded.model, Scope::Deepen, &Unwatched).unwrap();
    let solved = result.outcome.depths.iter().find(|d| (d.depth_m - depth_m).abs() < 1e-9).unwrap();
    resultants("case8_low", &case["statics"], solved);
}

/// Section forces by statics, nodal forces and integrated stress with a table through the overhang's back, the sea in the hollow and suction.
///
/// Source: equilibrium. Nodal forces 1e-7 where saturated rock weighs no more: exact in the discrete balance. Where it does, its jump inside
/// elements that the line crosses is taken at their middle: 1e-3.
#[test]
fn three_ways_to_the_section_forces_agree_under_water() {
    let path = Path::new(env!("CARGO_MANIFEST_DIR")).join("../demo-models/ostrel-head/ostrel-head.toml");
    let mut model = model_file::read(&path).map_err(|f| format!("{:?}", f.findings)).unwrap().model;
    let wet = &mut model.situations[0];
    wet.groundwater = Some(Groundwater::Table(vec![[10.0, 6.0], [60.0, 14.0]]));
    wet.sea_level = SeaLevel::Level(4.2);
    wet.above_table = AboveTable::Suction { saturation: 0.5, suction_limit_pa: 20e3, basis: "invented".into() };
    model.situations.truncate(1);
    model.undercut.depth_step_m = model.undercut.search_to_depth_m;
    for (surplus, allowed) in [(1.0, 1e-7), (1.05, 1e-3)] {
        for rock in &mut model.rocks {
            rock.saturated_unit_weight_n_per_m3 = Uncertain::Exact(surplus * rock.unit_weight_n_per_m3.mean());
        }
        let n = assess::run(&model, Scope::Check, &Unwatched).unwrap().outcome.numerics;
        assert!(n.statics_nodal_difference < allowed, "{surplus}: nodal forces off by {:e}", n.statics_nodal_difference);
        assert!(n.statics_stress_difference < 1e-2, "{surplus}: integrated stress off by {:e}", n.statics_stress_difference);
        assert!((n.weight_kn_per_m - n.reaction_kn_per_m).abs() < 1e-8 * n.weight_kn_per_m, "{n:?}");
    }
}
