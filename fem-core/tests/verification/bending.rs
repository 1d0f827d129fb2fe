//! A03 Cook's membrane and A05 the cantilever under its own weight; both must not depend on the axes.
use crate::setup::{Solved, edges, prescribe, relative};
use fem_core::assembly::{body_force, edge_traction};
use fem_core::elasticity::Elastic;
use fem_core::mesh::structured::{Grid, LEFT, RIGHT, grid, rectangle};
use fem_core::supports::Supports;
use fem_core::tensor;

/// Constants that make plane strain act like plane stress: `ν* = ν/(1+ν)`, `E* = E (1+2ν)/(1+ν)²`.
fn plane_stress(youngs_modulus_pa: f64, nu: f64) -> Elastic {
    Elastic::new(youngs_modulus_pa * (1.0 + 2.0 * nu) / (1.0 + nu).powi(2), nu / (1.0 + nu)).unwrap()
}

/// Cook's membrane with `n` cells a side, turned about the origin by an angle.
fn cook(n: usize, angle_rad: f64) -> Solved {
    let (s, c) = angle_rad.sin_cos();
    let turn = |[x, y]: [f64; 2]| [c * x - s * y, s * x + c * y];
    let map = |[u, v]: [f64; 2]| turn([48.0 * u, 44.0 * u + v * (44.0 * (1.0 - u) + 16.0 * u)]);
    let mesh = grid(Grid { n_u: n, n_v: n, curved: false }, &map, &|_, _| true);
    let mut supports = Supports::none(mesh.points_m.len());
    prescribe(&mut supports, &mesh, &[LEFT], &|_| [Some(0.0); 2]);
    let load = edge_traction(&mesh, &edges(&mesh, RIGHT), &[], &|_, _| turn([0.0, 1.0 / 16.0]));
    Solved::new(mesh, vec![plane_stress(1.0, 1.0 / 3.0)], &supports, &load)
}

#[test]
fn a03_cooks_membrane() {
    // Source: Cook 1974; converged values from memory, recomputed. Tolerances as in the reference: 0.2 % at 16 × 16, stresses 1 %.
    let s = cook(16, 0.0);
    relative(s.displacement_at([48.0, 52.0])[1], 23.966, 2e-3, "deflection in the middle of the right side");
    relative(tensor::major(s.stress_at([24.0, 22.0])), 0.2369, 1e-2, "major stress in the middle of the lower side");
    relative(tensor::minor(s.stress_at([24.0, 52.0])), -0.2035, 1e-2, "minor stress in the middle of the upper side");
}

#[test]
fn results_do_not_depend_on_the_axes() {
    let (straight, turned) = (cook(6, 0.0), cook(6, 0.9));
    let (s, c) = 0.9f64.sin_cos();
    for (a, b) in straight.u.chunks(2).zip(turned.u.chunks(2)) {
        let back = [c * b[0] + s * b[1], -s * b[0] + c * b[1]];
        // Round-off times the condition number, displacements up to 24.
        assert!((a[0] - back[0]).abs() + (a[1] - back[1]).abs() < 1e-9, "{a:?} {back:?}");
    }
    for (a, b) in straight.values.iter().zip(&turned.values) {
        assert!((tensor::major(*a) - tensor::major(*b)).abs() < 1e-10, "recovered stress");
    }
}

#[test]
fn a05_cantilever_under_its_own_weight() {
    // Source: polynomial stress function, derived and checked symbolically (closed form): x from the free end, y from mid-depth, c = h/2.
    let (gamma, l, c) = (25e3, 8.0f64, 2.0f64);
    let rock = Elastic::new(1e10, 0.25).unwrap();
    let (e1, nu) = (rock.plate_modulus_pa(), 0.25 / 0.75);
    let exact = move |[x, y]: [f64; 2]| {
        let turn = -gamma * (l.powi(3) / (2.0 * c * c) + 0.6 * l + 0.5 * nu * l);
        let axis = |x: f64| gamma * (x * x * (1.2 + 1.25 * nu) - x.powi(4) / (8.0 * c * c)) - turn * x;
        let u = gamma * (x.powi(3) * y / (2.0 * c * c) + x * (0.6 * y - y.powi(3) / (c * c)) - 0.5 * nu * x * y * (y * y / (c * c) - 1.0))
            + turn * y;
        let v = gamma
            * (0.5 * (y.powi(4) / (4.0 * c * c) - 0.5 * y * y)
                - nu * (0.75 * x * x * y * y / (c * c) + 0.3 * y * y - y.powi(4) / (4.0 * c * c)));
        [u / e1, (v + axis(x) - axis(l)) / e1]
    };
    let mesh = rectangle(Grid { n_u: 32, n_v: 16, curved: false }, [0.0, -c], [l, 2.0 * c], 0.0);
    let mut supports = Supports::none(mesh.points_m.len());
    prescribe(&mut supports, &mesh, &[RIGHT], &|p| exact(p).map(Some));
    let end = edge_traction(&mesh, &edges(&mesh, LEFT), &[], &|[_, y], n| [n[0] * gamma * (0.6 * y - y.powi(3) / (c * c)), 0.0]);
    let load: Vec<f64> = body_force(&mesh, &|_, _| [0.0, -gamma]).iter().zip(&end).map(|(a, b)| a + b).collect();
    let s = Solved::new(mesh, vec![rock], &supports, &load);
    // 0.1 % at 16 × 32 as in the reference; the field is a quartic, the element third order in displacement.
    relative(s.displacement_at([0.0, 0.0])[1], -1.25750e-3, 1e-3, "tip");
    relative(s.stress_at([l, c])[0], 1180e3, 1e-3, "top fibre at the root");
    relative(s.stress_at([4.0, 1.0])[0], 3.0 * gamma * 16.0 / 8.0 + gamma * (0.6 - 0.25), 1e-3, "fibre stress inside");
}
