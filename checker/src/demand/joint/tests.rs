//! Slip of a wedge and opening of a path against hand values.
use super::*;
use crate::analysis::load_cases::State;
use crate::demand::Piece;
use crate::model::{JointKind, JointSet, Uncertain};
use crate::strength::StrengthFactors;
use crate::testing::{layer, model, rock};

const HEIGHT_M: f64 = 10.0;

/// A vertical face of 10 m, 25 kN/m3, with a set through its foot; the plane holds 10 kPa and 30 degrees.
fn wedge(dip_deg: f64, persistence: f64) -> (Model, LineValue, JointCapacity) {
    let mut m = model(vec![rock("rock", 25.0, 5e3, 0.25)], vec![layer(0, None)]);
    m.joint_sets.push(JointSet {
        name: "J".into(),
        kind: JointKind::Joint,
        rocks: vec![0],
        dip_seaward_rad: dip_deg.to_radians(),
        strike_off_cliff_rad: None,
        persistence,
        spacing_m: None,
        cohesion_pa: Uncertain::Exact(10e3),
        friction_angle_rad: Uncertain::Exact(30_f64.to_radians()),
        tensile_strength_pa: Uncertain::Exact(0.0),
    });
    let width = HEIGHT_M / dip_deg.to_radians().tan();
    let length = HEIGHT_M.hypot(width);
    let half = |from: f64| Piece { layer: 0, along_m: [from, from + 0.5 * length], normal_pa: vec![0.0], normal_coarse_pa: vec![0.0] };
    let line = LineValue {
        from_m: [0.0, 0.0],
        to_m: [width, HEIGHT_M],
        areas_m2: vec![0.5 * width * HEIGHT_M],
        centroids_m: vec![[width / 3.0, 2.0 * HEIGHT_M / 3.0]],
        surcharges: Vec::new(),
        pieces: vec![half(0.0), half(0.5 * length)],
        loose_m: Vec::new(),
        set: Some(0),
        waters: Vec::new(),
        water_of_situation: Vec::new(),
    };
    let joint = JointCapacity::new(&m.joint_sets[0], false, &StrengthFactors::NONE).unwrap();
    (m, line, joint)
}

fn slip_of(dip_deg: f64, persistence: f64) -> Pair {
    let (m, line, joint) = wedge(dip_deg, persistence);
    let intact = Strength { tensile_strength_pa: 0.0, cohesion_pa: 500e3, tan_friction: 0.8, cut_from_pa: None };
    let held = Held { model: &m, limits: &[Some(intact)], joints: &[joint] };
    let forces = line.effective_forces(&m, &State { situation: 0, unit_weight_n_per_m3: vec![25e3], k0: vec![0.5] });
    line.slip(&held, &forces, &[1.0]).unwrap()
}

/// Wedge on a plane (limit equilibrium, common practice): `W sin d / (c l + W cos d tan phi)` with `W = gamma H^2 / (2 tan d)`. By hand at 60
/// degrees: W 721.69, l 11.547, shear 625.00, strength 115.47 + 208.33 kN/m, utilization 1.9302.
#[test]
fn wedges_of_six_dips_slip_as_in_limit_equilibrium() {
    for dip_deg in [35.0, 45.0, 55.0, 60.0, 70.0, 82.0_f64] {
        let d = dip_deg.to_radians();
        let weight = 0.5 * 25e3 * HEIGHT_M * HEIGHT_M / d.tan();
        let length = HEIGHT_M / d.sin();
        let expected = weight * d.sin() / (10e3 * length + weight * d.cos() * 30_f64.to_radians().tan());
        let got = slip_of(dip_deg, 1.0).utilization().unwrap();
        assert!((got - expected).abs() < 1e-12 * expected, "{dip_deg}: {got} for {expected}");
    }
    assert!((slip_of(60.0, 1.0).utilization().unwrap() - 1.9302).abs() < 5e-5);
}

/// Half of the plane bridged by rock of 500 kPa and tan phi 0.8: capacity at 60 degrees by hand
/// 0.5 (323.80 + 5773.5 + 288.68) / 11.547 = 276.52 kPa.
#[test]
fn a_bridge_carries_its_share() {
    let pair = slip_of(60.0, 0.5);
    assert!((pair.capacity_pa - 276.52e3).abs() < 10.0, "{pair:?}");
}

/// A plane opened on its upper half by 40 kPa of tension and pressed by 100 kPa below: middles at a quarter and three quarters of the
/// length, straight between them: 0 at 0.25 + 0.5 * 100 / 140 of the length; the rest above is open.
#[test]
fn tension_opens_the_upper_part() {
    let (m, mut line, joint) = wedge(60.0, 1.0);
    line.pieces[0].normal_pa = vec![-100e3];
    line.pieces[1].normal_pa = vec![40e3];
    let length = line.length_m();
    let forces = SectionForces { axial_n_per_m: -30e3 * length, shear_n_per_m: 0.0, moment_n: 0.0 };
    let held = Held { model: &m, limits: &[None], joints: &[joint] };
    let pair = line.opening(&held, &forces, &[1.0]).unwrap();
    let by_hand = (1.0 - 0.25 - 0.5 * 100.0 / 140.0) * length;
    assert!((pair.demand_pa - by_hand).abs() < 1e-9, "{pair:?} for {by_hand}");
}

/// By hand: excess 30 at 0.5 m and 10 at 1.5 m falls to 0 at 2.0 m; an end that holds opens nothing.
#[test]
fn opening_ends_where_the_excess_is_used_up() {
    assert!((opened_m(&[(0.5, 30.0), (1.5, 10.0), (2.5, -10.0)], 3.0) - 2.0).abs() < 1e-12);
    assert!(opened_m(&[(0.5, -1.0), (1.5, 10.0), (2.5, 10.0)], 3.0).abs() <= 0.0);
    assert!((opened_m(&[(0.5, 1.0), (1.5, 1.0)], 2.0) - 2.0).abs() < 1e-12);
}
