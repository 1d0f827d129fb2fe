use super::line::{LineValue, Piece};
use super::place::{shear, tension};
use super::*;
use crate::analysis::load_cases::State;
use crate::model::Model;
use crate::strength::Strength;
use crate::testing::{layer, model, rock};

/// A cantilever of one layer: depth 5 m, thickness 4 m, cut at its root.
fn cantilever(depth: f64, h: f64) -> LineValue {
    LineValue {
        from_m: [depth, 0.0],
        to_m: [depth, h],
        areas_m2: vec![depth * h],
        centroids_m: vec![[0.5 * depth, 0.5 * h]],
        surcharges: Vec::new(),
        pieces: vec![Piece { layer: 0, along_m: [0.0, h], normal_pa: vec![0.0], normal_coarse_pa: vec![0.0] }],
        loose_m: Vec::new(),
        set: None,
        waters: Vec::new(),
        water_of_situation: Vec::new(),
    }
}

fn state(model: &Model) -> State {
    State {
        situation: 0,
        unit_weight_n_per_m3: model.rocks.iter().map(|r| r.unit_weight_n_per_m3.mean()).collect(),
        k0: vec![0.5; model.rocks.len()],
    }
}

fn limits(tension_kpa: f64, cohesion_kpa: f64, friction_deg: f64) -> Strength {
    Strength {
        tensile_strength_pa: 1e3 * tension_kpa,
        cohesion_pa: 1e3 * cohesion_kpa,
        tan_friction: friction_deg.to_radians().tan(),
        cut_from_pa: None,
    }
}

/// Beam formulas for an overhang, worked values gamma 25, L 5, h 4: M 1250, V 500, top fibre 468.75 kPa, shear gamma L
/// (used by several coastal authors; value recomputed; from memory).
#[test]
fn cantilever_under_its_own_weight() {
    let m = model(vec![rock("rock", 25.0, 5e3, 0.25)], vec![layer(0, None)]);
    let line = cantilever(5.0, 4.0);
    let f = line.forces(&m, &state(&m));
    assert!((f.axial_n_per_m).abs() < 1e-6 && (f.shear_n_per_m - 500e3).abs() < 1e-6 && (f.moment_n - 1250e3).abs() < 1e-6, "{f:?}");
    let (along, layer, pair) = line.bending(&m, &f, &[Some(limits(500.0, 100.0, 35.0))]).unwrap();
    assert_eq!((along, layer), (4.0, 0));
    assert!((pair.demand_pa - 468.75e3).abs() < 1e-3, "{pair:?}");
    let shear = line.shear(&m, &f, &[0.0], &[Some(limits(500.0, 100.0, 35.0))]);
    assert!((shear.demand_pa - 125e3).abs() < 1e-6 && (shear.capacity_pa - 100e3).abs() < 1e-6, "{shear:?}");
}

/// Two bonded layers of equal thickness, stiffness ratio n = 2 in the upper one: transformed section by hand.
/// h = 2 m, E' 2:1, neutral axis at 7/6 m above the base, I' = 1/12 + (2/3)^2 + 2 (1/12 + (1/3)^2) = 11/12.
#[test]
fn transformed_section_of_two_layers() {
    let m = model(vec![rock("stiff", 20.0, 2e3, 0.0), rock("soft", 20.0, 1e3, 0.0)], vec![layer(0, Some(1.0)), layer(1, None)]);
    let mut line = cantilever(3.0, 2.0);
    line.areas_m2 = vec![3.0, 3.0];
    line.centroids_m = vec![[1.5, 1.5], [1.5, 0.5]];
    line.pieces = vec![
        Piece { layer: 1, along_m: [0.0, 1.0], normal_pa: vec![0.0], normal_coarse_pa: vec![0.0] },
        Piece { layer: 0, along_m: [1.0, 2.0], normal_pa: vec![0.0], normal_coarse_pa: vec![0.0] },
    ];
    let f = line.forces(&m, &state(&m));
    assert!((f.moment_n - 180e3).abs() < 1e-6, "{f:?}");
    let limits = [Some(limits(500.0, 100.0, 35.0)), Some(limits(500.0, 100.0, 35.0))];
    let (along, layer, pair) = line.bending(&m, &f, &limits).unwrap();
    let by_hand = 2.0 * 180e3 * (2.0 - 7.0 / 6.0) / (11.0 / 12.0);
    assert_eq!((along, layer), (2.0, 0));
    assert!((pair.demand_pa - by_hand).abs() < 1e-6 * by_hand, "{pair:?} against {by_hand}");
}

/// Ground motion 0.1 seaward on a 1 m cube of 20 kN/m3 cut on a vertical line: N = 2 kN/m in tension, its arm gives no moment
/// about the middle; weight gives M = 20 * 0.5 (hand statics).
#[test]
fn ground_motion_pulls_on_the_section() {
    let mut m = model(vec![rock("rock", 20.0, 5e3, 0.25)], vec![layer(0, None)]);
    m.situations[0].inertia_seaward = 0.1;
    let f = cantilever(1.0, 1.0).forces(&m, &state(&m));
    assert!((f.axial_n_per_m - 2e3).abs() < 1e-9 && (f.shear_n_per_m - 20e3).abs() < 1e-9 && (f.moment_n - 10e3).abs() < 1e-9, "{f:?}");
}

/// Uniaxial tension of the Mohr-Coulomb envelope: 2 c tan(45 - phi/2) = 52.06 kPa for c 50, phi 35 (handbook form, recomputed).
#[test]
fn uniaxial_tension_on_the_envelope_is_fully_used() {
    let strength = 2.0 * 50e3 * (std::f64::consts::FRAC_PI_4 - 0.5 * 35_f64.to_radians()).tan();
    assert!((strength - 52.06e3).abs() < 5.0);
    let pair = shear(&[1.0], &[[strength, 0.0, 0.0]], &limits(500.0, 50.0, 35.0));
    assert!((pair.utilization().unwrap() - 1.0).abs() < 1e-9, "{pair:?}");
}

/// Beyond c / tan phi there is no shear strength left to speak of: no utilization, tension governs.
#[test]
fn beyond_the_apex_has_no_utilization() {
    let pair = shear(&[1.0], &[[200e3, 0.0, 0.0]], &limits(500.0, 50.0, 35.0));
    assert!(pair.beyond_apex && pair.utilization().is_none(), "{pair:?}");
}

#[test]
fn tension_is_the_largest_principal_value_of_the_superposed_mean() {
    let pair = tension(&[2.0, 1.0], &[[1e3, 0.0, 0.0], [0.0, -1e3, 2e3]], &limits(10.0, 5.0, 30.0));
    let by_hand = 0.5 * (2.0 - 1.0) + (1.5_f64.powi(2) + 4.0).sqrt();
    assert!((pair.demand_pa - 1e3 * by_hand).abs() < 1e-9, "{pair:?}");
}

#[test]
fn unmeasured_k0_gives_two_cases_and_measured_one() {
    let mut m = model(vec![rock("rock", 25.0, 5e3, 0.25)], vec![layer(0, None)]);
    let cases = k0_cases(&m);
    assert_eq!(cases.len(), 2);
    assert!((cases[0].k0[0] - 1.0 / 3.0).abs() < 1e-12 && (cases[1].k0[0] - 1.0).abs() < 1e-12);
    m.rocks[0].k0 = Some(crate::model::Uncertain::Exact(0.7));
    assert_eq!(k0_cases(&m), vec![K0Case { label: None, k0: vec![0.7] }]);
}
