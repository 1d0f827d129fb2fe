//! Pore pressure, in-situ stress and loads of water against hand values and closed forms.
use std::sync::Arc;

use super::*;
use crate::analysis::Stress;
use crate::analysis::load_cases::{CaseSet, State};
use crate::model::{BackShape, StartShape, SurfacePoint, Uncertain};
use crate::section::Site;
use crate::testing::{layer, model, rock};

/// A 20 m face at x = 0 with a square slot 0 to 2 m high, one rock: 24 moist, 25 saturated, k0 0.5.
fn cliff(table: &[[f64; 2]]) -> Model {
    let mut stone = rock("stone", 24.0, 5e3, 0.25);
    stone.saturated_unit_weight_n_per_m3 = Uncertain::Exact(25e3);
    stone.k0 = Some(Uncertain::Exact(0.5));
    let mut m = model(vec![stone], vec![layer(0, None)]);
    let surface = [[-100.0, 0.0], [0.0, 0.0], [0.0, 20.0], [100.0, 20.0]];
    m.section.surface = surface.iter().map(|p| SurfacePoint { x_m: p[0], z_m: p[1], inferred: false }).collect();
    m.undercut.start_shape = Some(StartShape { floor_level_m: 0.0, roof_level_m: 2.0, back: BackShape::Square });
    if !table.is_empty() {
        m.situations[0].groundwater = Some(Groundwater::Table(table.to_vec()));
    }
    m
}

fn section(m: &Model, depth_m: f64) -> Section {
    Site::new(m).unwrap().value.at_depth(depth_m).unwrap()
}

fn field(m: &Model, depth_m: f64) -> WaterField {
    WaterField::new(&section(m, depth_m), &m.situations[0]).unwrap()
}

#[track_caller]
fn close(got: f64, want: f64, tolerance: f64) {
    assert!((got - want).abs() <= tolerance, "{got} for {want}");
}

/// Level table at 5 m, 15 m of moist rock above it. By hand at z = 5, 0, -10: total 360, 485, 735 kPa, pore 0, 49.05, 147.15,
/// effective 360, 435.95, 587.85, horizontal effective half of it.
#[test]
fn level_column_with_k0_at_three_depths() {
    let m = cliff(&[[-100.0, 5.0], [100.0, 5.0]]);
    let (section, cases) = (section(&m, 2.0), CaseSet::new(&m));
    let columns = crate::analysis::columns::Columns::new(&m, &section, &cases);
    let state = State { situation: 0, unit_weight_n_per_m3: vec![24e3], k0: vec![0.5] };
    let coefficients = cases.coefficients(&m, &state);
    for (z, pore, effective) in [(5.0, 0.0, 360.0), (0.0, 49.05, 435.95), (-10.0, 147.15, 587.85)] {
        let column = columns.at(&section, [60.0, z]);
        let [xx, zz, xz] = column.in_situ_of_state(&cases, &coefficients, 0);
        close(column.pressure_pa[0], 1e3 * pore, 1e-6);
        close(zz, -1e3 * effective, 1e-6);
        close(xx, -0.5e3 * effective, 1e-6);
        close(xz, 0.0, 0.0);
    }
}

/// Where ground and table are level the in-situ stress is in equilibrium: all loads together cancel at every node inside, though the
/// table runs through the elements. Tolerance: round-off of node loads of about 1e6 N/m.
#[test]
fn a_saturated_level_column_keeps_its_in_situ_stress_exactly() {
    let m = cliff(&[[-100.0, 5.0], [100.0, 5.0]]);
    let (section, cases) = (section(&m, 2.0), CaseSet::new(&m));
    let mesh = coarse_mesh(&section);
    let columns = crate::analysis::columns::Columns::new(&m, &section, &cases);
    let loads = crate::analysis::loads::unit_loads(&m, &section, &mesh, &cases, &columns);
    let state = State { situation: 0, unit_weight_n_per_m3: vec![24e3], k0: vec![0.5] };
    let coefficients = cases.coefficients(&m, &state);
    let boundary: Vec<u32> = mesh.edges.iter().flat_map(|e| e.nodes).collect();
    let mut n = 0;
    for (node, p) in mesh.points_m.iter().enumerate() {
        // the drawn-down part of the table ends 5 m behind the back, at 7 m; elements are up to 9 m wide
        let near_slope = p[0] < 25.0;
        if near_slope || boundary.contains(&(node as u32)) {
            continue;
        }
        n += 1;
        for k in 0..2 {
            let sum: f64 = coefficients.iter().zip(&loads).map(|(c, load)| c * load[2 * node + k]).sum();
            close(sum, 0.0, 1e-4);
        }
    }
    assert!(100 < n, "{n}");
}

fn coarse_mesh(section: &Section) -> fem_core::mesh::Mesh {
    let size = mesher::SizeField { largest_m: 9.0, gradation: 0.4, sources: Vec::new(), background: Vec::new() };
    mesher::mesh(&section.outline(), &|p| section.region(p), &size, &mesher::MeshParams::default()).unwrap().0
}

/// A table hanging over a free face comes down to it over a distance equal to the head difference: from the foot of the square back at
/// (4, 0) one in one up to 9 m (closed form); the floor itself is dry.
#[test]
fn drawdown_to_the_back() {
    let f = field(&cliff(&[[-100.0, 9.0], [100.0, 9.0]]), 4.0);
    close(f.drawdown_m, 9.0, 1e-9);
    for (x, level) in [(-20.0, 0.0), (2.0, 0.0), (4.0, 0.0), (5.5, 1.5), (10.0, 6.0), (13.0, 9.0), (40.0, 9.0)] {
        close(f.table.level_m(x), level, 1e-5);
    }
    close(f.pressure_pa([10.0, 1.0]), 9810.0 * 5.0, 0.1);
    close(f.pressure_pa([2.0, -3.0]), 9810.0 * 3.0, 0.1);
    close(f.pressure_pa([2.0, 6.0]), 0.0, 0.0);
}

/// A table that begins behind the back is joined straight to it where it lies higher; one that begins lower goes on level.
#[test]
fn the_seaward_end_is_joined_to_the_back() {
    let f = field(&cliff(&[[24.0, 10.0], [80.0, 12.0]]), 4.0);
    // back of a square hollow: the point at which the walk is farthest landward
    let back = section(&cliff(&[]), 4.0).back_m().unwrap();
    let middle = 0.5 * (back[1] + 10.0);
    close(f.table.level_m(14.0), middle, 1e-5);
    close(f.table.level_m(90.0), 12.0, 1e-9);
    assert!(f.drawdown_m <= 0.0, "{}", f.drawdown_m);
    let low = field(&cliff(&[[24.0, -3.0], [80.0, -1.0]]), 4.0);
    close(low.table.level_m(0.0), -3.0, 1e-6);
}

/// The sea at 6 m: pressure of the sea on the face equals that in the rock behind it, and the table joins the sea at the face.
#[test]
fn the_table_is_joined_to_the_sea() {
    let mut m = cliff(&[[30.0, 9.0], [80.0, 12.0]]);
    m.situations[0].sea_level = SeaLevel::Level(6.0);
    let f = field(&m, 4.0);
    for z in [-5.0, 1.0, 5.0] {
        close(f.pressure_pa([0.0, z]), 10_050.0 * (6.0 - z), 0.1);
        close(f.sea_pressure_pa(z), 10_050.0 * (6.0 - z), 1e-9);
    }
    close(f.table.level_m(4.0), 6.0, 1e-5);
    close(f.table.level_m(30.0), 9.0, 1e-5);
    close(f.sea_pressure_pa(7.0), 0.0, 0.0);
}

/// Suction above the table: -S times the smaller of gamma_w height and the limit. S 0.6, limit 15 kPa: 1 m up -5.886, 4 m up -9 kPa.
#[test]
fn suction_is_limited_and_acts_on_its_share() {
    let mut m = cliff(&[[-100.0, -5.0], [100.0, -5.0]]);
    m.situations[0].above_table = AboveTable::Suction { saturation: 0.6, suction_limit_pa: 15e3, basis: "measured".into() };
    let f = field(&m, 4.0);
    close(f.pressure_pa([50.0, -4.0]), -5886.0, 1e-6);
    close(f.pressure_pa([50.0, -1.0]), -9000.0, 1e-6);
}

/// Overhang of 4 m by 18 m under the sea up to 8 m, cut by the vertical at the back. Closed forms: push on the face
/// `gamma 6^2 / 2` landward (N), uplift on the roof `gamma 6 * 4`, thrust on the line the same head down to 6 m over the roof.
/// The effective normal force is 0: what pushes from outside stands in the pores too.
#[test]
fn buoyancy_of_an_overhang_under_the_sea() {
    let mut m = cliff(&[]);
    m.rocks[0].saturated_unit_weight_n_per_m3 = Uncertain::Exact(24e3);
    m.situations[0].sea_level = SeaLevel::Level(8.0);
    let (section, cases) = (section(&m, 4.0), CaseSet::new(&m));
    let stress = Stress::solve(&m, &section, Arc::new(coarse_mesh(&section)), 0.3, &cases).unwrap();
    let line = crate::depth::line_between(&section, [4.0, 2.0], [4.0, 20.0]).unwrap();
    let value = crate::depth::line_value(&m, &section, &stress, &line);
    let state = State { situation: 0, unit_weight_n_per_m3: vec![24e3], k0: vec![0.5] };
    let total = value.forces(&m, &state);
    let sea = 10_050.0;
    close(total.axial_n_per_m, -sea * 18.0, 1e-6 * sea);
    close(total.shear_n_per_m, 24e3 * 72.0 - sea * 24.0, 1e-6 * sea);
    // push at 4 m above the datum, 7 m below the middle; uplift 2 m seaward of the line; weight at the same arm
    close(total.moment_n, 24e3 * 72.0 * 2.0 - sea * 24.0 * 2.0 + sea * 18.0 * 7.0, 1e-5 * sea);
    let effective = value.effective_forces(&m, &state);
    close(effective.axial_n_per_m, 0.0, 1e-6 * sea);
    close(effective.moment_n, 24e3 * 72.0 * 2.0 - sea * 24.0 * 2.0, 1e-5 * sea);
}

/// At fixed total stress a pore pressure higher by D lowers the strength on the plane by exactly `alpha D tan phi'` (law of the shear
/// strength, methods above); here on a horizontal section without a water of its own.
#[test]
fn pore_pressure_lowers_the_strength_by_its_friction() {
    let m = cliff(&[[-100.0, 5.0], [100.0, 5.0]]);
    let strength = crate::strength::Strength { tensile_strength_pa: 0.0, cohesion_pa: 20e3, tan_friction: 0.7, cut_from_pa: None };
    // no water: c + sigma t; table at the surface of a 10 m column: c + (sigma - 98.1) t; suction 15 kPa on 0.6: c + (sigma + 9) t
    let by_hand = [(0.0, 20.0 + 240.0 * 0.7), (98.1, 20.0 + (240.0 - 98.1) * 0.7), (-9.0, 20.0 + 249.0 * 0.7)];
    let state = State { situation: 0, unit_weight_n_per_m3: vec![24e3], k0: vec![0.5] };
    for (pore_kpa, want_kpa) in by_hand {
        let piece = crate::demand::Piece { layer: 0, along_m: [0.0, 2.0], normal_pa: vec![0.0], normal_coarse_pa: vec![0.0] };
        let line = crate::demand::LineValue {
            from_m: [0.0, 0.0],
            to_m: [2.0, 0.0],
            areas_m2: vec![20.0],
            centroids_m: vec![[1.0, 5.0]],
            surcharges: Vec::new(),
            pieces: vec![piece],
            loose_m: Vec::new(),
            set: None,
            waters: vec![crate::demand::LineWater { thrust: [2e3 * pore_kpa, 0.0], ..Default::default() }],
            water_of_situation: vec![Some(0)],
        };
        let forces = line.effective_forces(&m, &state);
        let pair = line.shear(&m, &forces, &[0.0], &[Some(strength)]);
        close(pair.capacity_pa, 1e3 * want_kpa, 1e-6);
    }
}
