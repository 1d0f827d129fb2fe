//! A08, A13 and pore pressure: columns whose exact displacements are quadratic, so that the elements carry them without error.
use crate::setup::{Solved, absolute, prescribe, relative};
use fem_core::assembly::{body_force, initial_stress, pore_pressure};
use fem_core::elasticity::Elastic;
use fem_core::mesh::Mesh;
use fem_core::mesh::structured::{BOTTOM, Grid, LEFT, RIGHT, rectangle};
use fem_core::supports::Supports;

const H: f64 = 20.0;
const GAMMA: f64 = 25e3;

fn column() -> (Mesh, Supports) {
    let mesh = rectangle(Grid { n_u: 3, n_v: 8, curved: false }, [0.0, 0.0], [6.0, H], 0.25);
    let mut supports = Supports::none(mesh.points_m.len());
    prescribe(&mut supports, &mesh, &[LEFT, RIGHT], &|_| [Some(0.0), None]);
    prescribe(&mut supports, &mesh, &[BOTTOM], &|_| [None, Some(0.0)]);
    (mesh, supports)
}

#[test]
fn a08_gravity_column() {
    // Source: one-dimensional compression (from memory, recomputed): σ_v = γ z, σ_h = ν/(1−ν) σ_v, top settlement γ H²/(2M), M = 6 GPa.
    let (mesh, supports) = column();
    let load = body_force(&mesh, &|_, _| [0.0, -GAMMA]);
    let s = Solved::new(mesh, vec![Elastic::new(5e9, 0.25).unwrap()], &supports, &load);
    // 1e-8: exact in the element, round-off only.
    relative(s.displacement_at([6.0, H])[1], -0.833333333333e-3, 1e-8, "settlement");
    relative(s.stress_at([2.2, 0.0])[1], -500e3, 1e-8, "vertical stress at the base");
    relative(s.stress_at([4.1, 0.0])[0], -500e3 / 3.0, 1e-8, "horizontal stress at the base");
    relative(s.stress_at([1.3, 12.5])[1], -GAMMA * 7.5, 1e-8, "vertical stress inside");
}

#[test]
fn pore_pressure_in_a_column() {
    // Source: Terzaghi's effective stress (closed form): saturated to the ground, σ'_v = (γ − γ_w) z, settlement (γ − γ_w) H²/(2M).
    let (mesh, supports) = column();
    let water = 9.81e3;
    let weight = body_force(&mesh, &|_, _| [0.0, -GAMMA]);
    let pore = pore_pressure(&mesh, &|_, [_, y]| water * (H - y));
    let load: Vec<f64> = weight.iter().zip(&pore).map(|(a, b)| a + b).collect();
    let s = Solved::new(mesh, vec![Elastic::new(5e9, 0.25).unwrap()], &supports, &load);
    relative(s.stress_at([2.2, 0.0])[1], -(GAMMA - water) * H, 1e-8, "effective vertical stress at the base");
    relative(s.displacement_at([0.0, H])[1], -(GAMMA - water) * H * H / 12e9, 1e-8, "settlement");
}

#[test]
fn a13_initial_stress_in_equilibrium_moves_nothing() {
    // Source: statics. Layers of different weight and stiffness, σ_h = 0.7 σ_v: the initial stress balances the weight, u = 0.
    let (mut mesh, supports) = column();
    for e in 0..mesh.triangles.len() {
        mesh.regions[e] = u32::from(mesh.corner_mean_m(e)[1] > 10.0);
    }
    // Contact exactly at y = 10: undo the distortion there by using straight rows only.
    let rows = rectangle(Grid { n_u: 3, n_v: 8, curved: false }, [0.0, 0.0], [6.0, H], 0.0);
    let mesh = Mesh { points_m: rows.points_m, ..mesh };
    let gamma = [GAMMA, 18e3];
    let vertical = |y: f64| if y > 10.0 { -gamma[1] * (H - y) } else { -gamma[1] * 10.0 - gamma[0] * (10.0 - y) };
    let regions = mesh.regions.clone();
    let weight = body_force(&mesh, &|e, _| [0.0, -gamma[regions[e] as usize]]);
    let given = initial_stress(&mesh, &|_, [_, y]| [0.7 * vertical(y), vertical(y), 0.0]);
    let load: Vec<f64> = weight.iter().zip(&given).map(|(a, b)| a + b).collect();
    let s = Solved::new(mesh, vec![Elastic::new(5e9, 0.25).unwrap(), Elastic::new(1e8, 0.35).unwrap()], &supports, &load);
    let largest = s.u.iter().fold(0.0, |m: f64, u| m.max(u.abs()));
    // Round-off of 500 kPa loads over 0.1 GPa on 20 m: 1e-16 · 0.1 m.
    assert!(largest < 1e-15, "largest displacement {largest:e} m");
    let stress = s.values.iter().flatten().fold(0.0, |m: f64, v| m.max(v.abs()));
    absolute(stress, 0.0, 1e-10 * 500e3, "stress change");
}
