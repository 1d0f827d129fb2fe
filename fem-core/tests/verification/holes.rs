//! A06 Kirsch, A07 Lamé, A09 strip load: curved sides, symmetry rollers, a load that ends inside a side.
use crate::setup::{Solved, absolute, edges, prescribe, relative};
use fem_core::assembly::{edge_pressure, edge_traction};
use fem_core::elasticity::Elastic;
use fem_core::mesh::Mesh;
use fem_core::mesh::structured::{BOTTOM, Grid, LEFT, RIGHT, TOP, grid};
use fem_core::supports::Supports;
use fem_core::tensor;
use std::f64::consts::PI;

/// Quarter of a ring, radii 1 and `outer`, graded toward the hole. BOTTOM lies on the x axis, TOP on the y axis, LEFT is the hole.
fn quarter_ring(n: usize, outer: f64) -> (Mesh, Supports) {
    let polar = |[u, v]: [f64; 2]| {
        let (r, a) = (outer.powf(u), std::f64::consts::FRAC_PI_2 * v);
        [r * a.cos(), r * a.sin()]
    };
    let mesh = grid(Grid { n_u: n, n_v: n, curved: true }, &polar, &|_, _| true);
    let mut supports = Supports::none(mesh.points_m.len());
    prescribe(&mut supports, &mesh, &[BOTTOM], &|_| [None, Some(0.0)]);
    prescribe(&mut supports, &mesh, &[TOP], &|_| [Some(0.0), None]);
    (mesh, supports)
}

#[test]
fn a06_kirsch_hole() {
    // Source: Kirsch 1898 (from memory, recomputed). Pull S along x; exact tractions on the outer circle r = 6.
    let pull = 1e6;
    let exact = move |[x, y]: [f64; 2]| {
        let (r2, a) = (1.0 / (x * x + y * y), y.atan2(x));
        let (c, s) = ((2.0 * a).cos(), (2.0 * a).sin());
        let rr = 0.5 * pull * ((1.0 - r2) + (1.0 - 4.0 * r2 + 3.0 * r2 * r2) * c);
        let tt = 0.5 * pull * ((1.0 + r2) - (1.0 + 3.0 * r2 * r2) * c);
        let rt = -0.5 * pull * (1.0 + 2.0 * r2 - 3.0 * r2 * r2) * s;
        tensor::in_turned_axes([rr, tt, rt], -a)
    };
    let (mesh, supports) = quarter_ring(16, 6.0);
    let load = edge_traction(&mesh, &edges(&mesh, RIGHT), &[], &|p, n| tensor::traction(exact(p), n));
    let s = Solved::new(mesh, vec![Elastic::new(5e9, 0.25).unwrap()], &supports, &load);
    // 1 % as in the reference.
    for (r, factor) in [(1.0, 3.0), (1.25, 1.9344), (1.5, 1.51852), (2.0, 1.21875), (3.0, 1.07407)] {
        relative(s.stress_at([0.0, r])[0], factor * pull, 1e-2, "hoop stress on the transverse axis");
    }
    relative(s.stress_at([1.0, 0.0])[1], -pull, 1e-2, "hoop stress at the loaded pole");
}

#[test]
fn a07_lame_ring() {
    // Source: Lamé, plane strain (from memory, recomputed): a = 1, b = 2, p = 100, E = 1000, ν = 0.25.
    let (mesh, supports) = quarter_ring(12, 2.0);
    let load = edge_pressure(&mesh, &edges(&mesh, LEFT), &[], &|_| 100.0);
    let s = Solved::new(mesh, vec![Elastic::new(1000.0, 0.25).unwrap()], &supports, &load);
    // 0.5 % as in the reference; displacements are one order better.
    relative(s.displacement_at([1.0, 0.0])[0], 0.1875, 1e-4, "u at the inside");
    relative(s.displacement_at([0.0, 2.0])[1], 0.125, 1e-4, "u at the outside");
    relative(s.stress_at([1.0, 0.0])[1], 166.667, 5e-3, "hoop inside");
    relative(s.stress_at([0.0, 2.0])[0], 66.667, 5e-3, "hoop outside");
    relative(s.stress_at([1.0, 0.0])[0], -100.0, 1e-2, "radial inside");
    let at = s.stress_at([1.5 * 0.6, 1.5 * 0.8]);
    relative(s.rock[0].out_of_plane_stress_pa(at), 16.667, 5e-3, "out of plane");
}

#[test]
fn a09_strip_load_on_a_half_plane() {
    // Source: Poulos & Davis 1974 (Flamant integrated; from memory, recomputed). B = 1, right half, 10 B wide and deep with the exact tractions
    // on the far sides: rollers there would shift the small horizontal stress by 0.02 even at 20 B.
    let exact = |[x, y]: [f64; 2]| {
        let (far, near) = ((x + 0.5).atan2(-y), (x - 0.5).atan2(-y));
        let (a, sum) = (far - near, far + near);
        [-(a - a.sin() * sum.cos()) / PI, -(a + a.sin() * sum.cos()) / PI, a.sin() * sum.sin() / PI]
    };
    let map = |[u, v]: [f64; 2]| [10.0 * u * u, -10.0 * (1.0 - v) * (1.0 - v)];
    let mesh = grid(Grid { n_u: 30, n_v: 30, curved: false }, &map, &|_, _| true);
    let mut supports = Supports::none(mesh.points_m.len());
    prescribe(&mut supports, &mesh, &[LEFT], &|p| [Some(0.0), (p[1] < -9.999).then_some(0.0)]);
    let strip = edge_pressure(&mesh, &edges(&mesh, TOP), &[[0.5, 0.0]], &|p| if p[0] < 0.5 { 1.0 } else { 0.0 });
    let far = [edges(&mesh, RIGHT), edges(&mesh, BOTTOM)].concat();
    let held = edge_traction(&mesh, &far, &[], &|p, n| tensor::traction(exact(p), n));
    let load: Vec<f64> = strip.iter().zip(&held).map(|(a, b)| a + b).collect();
    let s = Solved::new(mesh, vec![Elastic::new(1e3, 0.25).unwrap()], &supports, &load);
    for (z, center, edge) in [(0.5, 0.8183, 0.4797), (1.0, 0.5498, 0.4092), (2.0, 0.3058, 0.2749)] {
        // 2 % as in the reference.
        relative(s.stress_at([0.0, -z])[1], -center, 2e-2, "below the middle");
        relative(s.stress_at([0.5, -z])[1], -edge, 2e-2, "below the end");
    }
    for (z, horizontal) in [(0.5, 0.1817), (1.0, 0.0405), (2.0, 0.0062)] {
        // 0.5 % of the load: below 2 B the value itself is nearly nothing.
        absolute(s.stress_at([0.0, -z])[0], -horizontal, 5e-3, "horizontal below the middle");
    }
}
