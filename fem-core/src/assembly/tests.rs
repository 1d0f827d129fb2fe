//! Matrix against internal forces, loads against their resultants.
use super::*;
use crate::mesh::structured::{Grid, LEFT, TOP, grid, rectangle};
use crate::supports::Spring;
use crate::tensor;

fn rock() -> Vec<Elastic> {
    vec![Elastic::new(5e9, 0.25).unwrap(), Elastic::new(1e9, 0.35).unwrap()]
}

fn ring() -> Mesh {
    let polar = |[u, v]: [f64; 2]| {
        let (r, a) = (1.0 + u, std::f64::consts::FRAC_PI_2 * v);
        [r * a.cos(), r * a.sin()]
    };
    let mut mesh = grid(Grid { n_u: 3, n_v: 4, curved: true }, &polar, &|_, _| true);
    for (i, region) in mesh.regions.iter_mut().enumerate() {
        *region = (i % 2) as u32;
    }
    mesh
}

fn some_displacements(n: usize) -> Vec<f64> {
    (0..n).map(|i| 1e-3 * (1.7 * i as f64).sin()).collect()
}

#[track_caller]
fn close(got: f64, want: f64, tolerance: f64) {
    assert!((got - want).abs() <= tolerance, "{got} for {want}");
}

#[test]
fn matrix_times_vector_is_the_internal_force() {
    for mesh in [ring(), rectangle(Grid { n_u: 5, n_v: 4, curved: false }, [0.0, 0.0], [3.0, 2.0], 0.2)] {
        let n = mesh.points_m.len();
        let mut supports = Supports::none(n);
        // Every pattern of free unknowns at a node occurs: both fixed, x fixed, y fixed, free.
        for node in 0..n as u32 {
            match node % 7 {
                0 => supports.fix(node),
                2 => supports.prescribe(node, 0, 0.0),
                5 => supports.prescribe(node, 1, 0.0),
                _ => {}
            }
        }
        supports.add_spring(Spring { node: 1, direction: [0.6, 0.8], stiffness_n_per_m2: 1e9 });
        supports.add_spring(Spring { node: 2, direction: [0.6, 0.8], stiffness_n_per_m2: 2e9 });
        let pattern = pattern(&mesh, &supports);
        let k = stiffness(&mesh, &rock(), &supports, &pattern);
        for c in 0..k.n {
            let rows = &k.rows[k.column_starts[c] as usize..k.column_starts[c + 1] as usize];
            assert!(rows[0] as usize == c && rows.is_sorted_by(|a, b| a < b), "column {c}: {rows:?}");
        }
        let mut u = some_displacements(2 * n);
        for (u, p) in u.iter_mut().zip(supports.prescribed_m()) {
            *u = p.unwrap_or(*u);
        }
        let mut want = internal_forces(&mesh, &rock(), &u);
        supports.add_spring_forces(&u, &mut want);
        let free = &pattern.dofs.free_of_dof;
        let mut x = vec![0.0; k.n];
        for (dof, &f) in free.iter().enumerate().filter(|(_, f)| **f != PRESCRIBED) {
            x[f as usize] = u[dof];
        }
        let got = k.multiply(&x);
        let size = want.iter().fold(0.0, |m: f64, v| m.max(v.abs()));
        for (dof, &f) in free.iter().enumerate().filter(|(_, f)| **f != PRESCRIBED) {
            close(got[f as usize], want[dof], 1e-13 * size);
        }
    }
}

/// Resultant and moment about the origin of a load vector.
fn resultant(mesh: &Mesh, loads: &[f64]) -> [f64; 3] {
    let mut sum = [0.0; 3];
    for (p, f) in mesh.points_m.iter().zip(loads.chunks(2)) {
        sum = [sum[0] + f[0], sum[1] + f[1], sum[2] + p[0] * f[1] - p[1] * f[0]];
    }
    sum
}

#[test]
fn weight_has_the_resultant_of_the_meshed_area() {
    let mesh = ring();
    let area = mesh.region_areas_m2().iter().sum::<f64>();
    let [fx, fy, _] = resultant(&mesh, &body_force(&mesh, &|_, _| [0.0, -25e3]));
    close(fx, 0.0, 1e-9);
    close(fy, -25e3 * area, 1e-9);
}

#[test]
fn pressure_on_a_closed_boundary_is_the_pore_pressure_load() {
    // Divergence theorem: ∫ Bᵀ m p for constant p equals the outward pressure traction ∮ Nᵀ p n on the same curved sides.
    let mesh = ring();
    let pore = pore_pressure(&mesh, &|_, _| 3e3);
    let pulled = edge_traction(&mesh, &mesh.edges, &[], &|_, n| [3e3 * n[0], 3e3 * n[1]]);
    for (a, b) in pore.iter().zip(&pulled) {
        close(*a, *b, 1e-10);
    }
    let stress = initial_stress(&mesh, &|_, _| [1e3, -2e3, 500.0]);
    let tractions = edge_traction(&mesh, &mesh.edges, &[], &|_, n| tensor::traction([1e3, -2e3, 500.0], n));
    for (a, b) in stress.iter().zip(&tractions) {
        close(*a, -*b, 1e-10);
    }
}

#[test]
fn hydrostatic_pressure_all_round_is_the_buoyancy() {
    let mesh = ring();
    let area = mesh.region_areas_m2().iter().sum::<f64>();
    let loads = edge_pressure(&mesh, &mesh.edges, &[], &|p| 10e3 * (5.0 - p[1]));
    let [fx, fy, _] = resultant(&mesh, &loads);
    close(fx, 0.0, 1e-8);
    close(fy, 10e3 * area, 1e-8);
}

#[test]
fn strip_that_ends_inside_a_side_keeps_force_and_moment() {
    let mesh = rectangle(Grid { n_u: 4, n_v: 2, curved: false }, [0.0, 0.0], [4.0, 2.0], 0.0);
    let top: Vec<_> = mesh.edges.iter().copied().filter(|e| e.tag == TOP).collect();
    let strip = |p: [f64; 2]| if 0.7 < p[0] && p[0] < 2.35 { 50e3 } else { 0.0 };
    let [_, fy, m] = resultant(&mesh, &edge_pressure(&mesh, &top, &[[0.7, 2.0], [2.35, 2.0]], &strip));
    close(fy, -50e3 * 1.65, 1e-9);
    close(m, -50e3 * 1.65 * 0.5 * (0.7 + 2.35), 1e-9);
}

#[test]
fn a_side_seen_from_its_right_element_has_the_opposite_normal() {
    let mesh = rectangle(Grid { n_u: 2, n_v: 2, curved: false }, [0.0, 0.0], [1.0, 1.0], 0.0);
    let mut left: Vec<_> = mesh.edges.iter().copied().filter(|e| e.tag == LEFT).collect();
    let before = edge_pressure(&mesh, &left, &[], &|_| 1.0);
    for e in &mut left {
        e.nodes.swap(0, 1);
        std::mem::swap(&mut e.left, &mut e.right);
    }
    for (a, b) in before.iter().zip(edge_pressure(&mesh, &left, &[], &|_| 1.0)) {
        close(b, *a, 1e-15);
    }
}

/// A weight that jumps on a sloping line through the elements and a stress whose divergence balances it: the two loads cancel at every
/// node inside (equilibrium; tolerance: round-off of sums of 1e4 N/m).
#[test]
fn a_jump_inside_elements_is_integrated_exactly() {
    let mesh = rectangle(Grid { n_u: 5, n_v: 4, curved: false }, [0.0, 0.0], [4.0, 2.0], 0.0);
    // level 1.1 + 0.3 x, weight 10 kN/m3 below it
    let depth = |p: [f64; 2]| (1.1 + 0.3 * p[0] - p[1]).max(0.0);
    let kinks: KinksOf<'_> = &|_| vec![[1.1, 0.3, -1.0]];
    let all = || 0..mesh.triangles.len() as u32;
    let weight = body_force_split(&mesh, &|_, p| [0.0, if 0.0 < depth(p) { -10e3 } else { 0.0 }], kinks, all());
    let stress = initial_stress_split(&mesh, &|_, p| [0.0, -10e3 * depth(p), 0.0], kinks, all());
    let mut inside = 0;
    for (node, p) in mesh.points_m.iter().enumerate() {
        if 0.0 < p[0] && p[0] < 4.0 && 0.0 < p[1] && p[1] < 2.0 {
            inside += 1;
            close(weight[2 * node + 1] + stress[2 * node + 1], 0.0, 1e-9);
        }
    }
    assert!(30 < inside, "{inside}");
    let area: f64 = (0..400).map(|k| (1.1 + 0.3 * (f64::from(k) + 0.5) * 0.01_f64).min(2.0) * 0.01).sum();
    let total: f64 = weight.iter().skip(1).step_by(2).sum();
    close(total, -10e3 * area, 1.0);
}
