//! A01: patch test. Source: MacNeal & Harder 1985 (from memory, recomputed); stresses by D ε.
use crate::setup::{Solved, absolute, prescribe};
use fem_core::elasticity::Elastic;
use fem_core::mesh::structured::{BOTTOM, Grid, LEFT, RIGHT, TOP, distorted, grid, rectangle};
use fem_core::quadrature::TRIANGLE_DEGREE_6;
use fem_core::supports::Supports;

const SIDES: [u32; 4] = [BOTTOM, RIGHT, TOP, LEFT];

#[test]
fn a01_constant_strain_is_reproduced_on_distorted_and_curved_meshes() {
    let field = |[x, y]: [f64; 2]| [1e-3 * (x + 0.5 * y), 1e-3 * (y + 0.5 * x)];
    let cells = Grid { n_u: 4, n_v: 3, curved: false };
    let curved = Grid { curved: true, ..cells };
    let bent = |uv: [f64; 2]| {
        let [u, v] = distorted(curved, uv, 0.2);
        [0.24 * u + 0.02 * (6.0 * v).sin(), 0.12 * v + 0.02 * (5.0 * u).cos()]
    };
    for mesh in [rectangle(cells, [0.0, 0.0], [0.24, 0.12], 0.3), grid(curved, &bent, &|_, _| true)] {
        let mut supports = Supports::none(mesh.points_m.len());
        prescribe(&mut supports, &mesh, &SIDES, &|p| field(p).map(Some));
        let load = vec![0.0; 2 * mesh.points_m.len()];
        let s = Solved::new(mesh, vec![Elastic::new(1e6, 0.25).unwrap()], &supports, &load);
        for element in 0..s.mesh.triangles.len() {
            for (xi, _) in TRIANGLE_DEGREE_6 {
                let [xx, yy, xy] = s.raw(element, xi);
                // 1e-9 relative: the condition number of this mesh times round-off is below it.
                absolute(xx, 1600.0, 1.6e-6, "σ_xx");
                absolute(yy, 1600.0, 1.6e-6, "σ_yy");
                absolute(xy, 400.0, 0.4e-6, "σ_xy");
                absolute(s.rock[0].out_of_plane_stress_pa([xx, yy, xy]), 800.0, 0.8e-6, "σ_zz");
            }
        }
        assert!(s.values.iter().all(|v| (v[0] - 1600.0).abs() < 1e-5 && (v[2] - 400.0).abs() < 1e-5), "recovered");
    }
}
