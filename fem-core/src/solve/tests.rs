//! Solutions against closed forms and the matrix itself; what is refused, and by which unknown.
use super::*;
use crate::assembly::{body_force, pattern, stiffness};
use crate::elasticity::Elastic;
use crate::mesh::Mesh;
use crate::mesh::structured::{BOTTOM, Grid, RIGHT, grid};
use crate::ordering::elimination_order;
use crate::supports::Supports;
use std::sync::Arc;

/// Second-difference matrix `tridiag(−1, 2, −1)`.
fn second_difference(n: usize) -> SymmetricCsc {
    let mut matrix = SymmetricCsc { n, column_starts: vec![0], ..SymmetricCsc::default() };
    for i in 0..n {
        matrix.rows.push(i as u32);
        matrix.values.push(2.0);
        if i + 1 < n {
            matrix.rows.push(i as u32 + 1);
            matrix.values.push(-1.0);
        }
        matrix.column_starts.push(matrix.rows.len() as u32);
    }
    matrix
}

/// A permutation that is neither the identity nor its own inverse.
fn scattered(n: usize) -> Vec<u32> {
    let stride = (2..n).find(|k| !(n - 1).is_multiple_of(*k) && gcd(*k, n) == 1).unwrap();
    (0..n).map(|k| (k * stride % n) as u32).collect()
}

fn gcd(a: usize, b: usize) -> usize {
    if b == 0 { a } else { gcd(b, a % b) }
}

/// Stiffness, order and self-weight of a ring sector graded toward its inner arc, held on two sides.
fn sector(n_u: usize, n_v: usize) -> (SymmetricCsc, Vec<u32>, Vec<f64>) {
    let polar = |[u, v]: [f64; 2]| {
        let (r, a) = (0.3 * 200.0_f64.powf(u), 4.7 * v);
        [r * a.cos(), r * a.sin()]
    };
    let mesh = grid(Grid { n_u, n_v, curved: true }, &polar, &|_, _| true);
    let mut supports = Supports::none(mesh.points_m.len());
    for edge in &mesh.edges {
        for node in edge.nodes {
            match edge.tag {
                BOTTOM => supports.fix(node),
                RIGHT => supports.prescribe(node, 0, 0.0),
                _ => {}
            }
        }
    }
    assemble(&mesh, &supports)
}

fn assemble(mesh: &Mesh, supports: &Supports) -> (SymmetricCsc, Vec<u32>, Vec<f64>) {
    let pattern = pattern(mesh, supports);
    let matrix = stiffness(mesh, &[Elastic::new(2e9, 0.3).unwrap()], supports, &pattern);
    let order = elimination_order(mesh, &pattern.dofs);
    let loads = body_force(mesh, &|_, _| [0.0, -22e3]);
    let free = &pattern.dofs.free_of_dof;
    let rhs = loads.iter().zip(free).filter(|(_, f)| **f != crate::assembly::PRESCRIBED).map(|(load, _)| *load).collect();
    (matrix, order, rhs)
}

/// `−x'' = 1` with zero ends has `x_i = i (n + 1 − i) / 2` on the grid, exactly. Source: closed form of the difference equation.
#[test]
fn string_under_uniform_load() {
    for n in [1usize, 2, 7, 500] {
        let matrix = second_difference(n);
        let order = if n < 3 { (0..n as u32).collect() } else { scattered(n) };
        let factorization = factor(matrix.clone(), &order, &SolveParams::default()).unwrap();
        let mut x = vec![1.0; n];
        let info = factorization.solve(&mut x, 1).unwrap();
        for (i, x) in x.iter().enumerate() {
            let want = (i + 1) as f64 * (n - i) as f64 / 2.0;
            // The condition number is about (n + 1)² / 2.5; errors of that times the rounding unit.
            assert!((x - want).abs() <= want * f64::EPSILON * (n + 1).pow(2) as f64, "x[{i}] = {x}, not {want}");
        }
        assert!(info.backward_error <= 8.0 * f64::EPSILON, "{info:?}");
        assert_eq!(info.n_unknowns, n);
    }
}

/// In natural order `tridiag(−1, 2, −1)` has pivots `(k + 1) / k`, two entries in each column but the last. Source: hand elimination.
#[test]
fn figures_of_the_factor() {
    let matrix = second_difference(3);
    let info = factor(matrix.clone(), &[0, 1, 2], &SolveParams::default()).unwrap().solve(&mut [1.0; 3], 1).unwrap();
    assert!((info.pivot_ratio - (4.0 / 3.0) / 2.0).abs() < 1e-15, "{info:?}");
    // Merged columns hold one zero: 3 + 2 + 1 entries, 9 + 4 + 1 operations; unmerged 2 + 2 + 1 and 4 + 4 + 1.
    assert!((5..=6).contains(&info.n_factor_entries) && (9.0..=14.0).contains(&info.flops), "{info:?}");
}

#[test]
fn nothing_to_solve() {
    let matrix = SymmetricCsc { column_starts: vec![0], ..SymmetricCsc::default() };
    let info = factor(matrix.clone(), &[], &SolveParams::default()).unwrap().solve(&mut [], 4).unwrap();
    assert_eq!((info.n_unknowns, info.n_factor_entries), (0, 0));
}

/// Backward error of a Cholesky solve: a small multiple of the rounding unit, at most about `n` times it. Source: Higham (2002), "Accuracy
/// and Stability of Numerical Algorithms", section 10.1, from memory.
#[test]
fn stiffness_matrix_is_solved_to_rounding() {
    let (matrix, order, loads) = sector(24, 36);
    let factorization = factor(matrix.clone(), &order, &SolveParams::default()).unwrap();
    let mut x = loads.clone();
    let info = factorization.solve(&mut x, 1).unwrap();
    assert!(info.backward_error < 64.0 * f64::EPSILON, "{info:?}");
    assert!(info.relative_residual < matrix.n as f64 * f64::EPSILON, "{info:?}");
    assert!(0.0 < info.pivot_ratio && info.pivot_ratio < 1.0, "{info:?}");
}

#[test]
fn many_loads_at_once_are_as_good_as_one_by_one() {
    let (matrix, order, loads) = sector(8, 12);
    let n = matrix.n;
    let factorization = factor(matrix.clone(), &order, &SolveParams::default()).unwrap();
    let load = |k: usize| -> Vec<f64> { loads.iter().enumerate().map(|(i, b)| b * (1.0 + (i * k) as f64).cos()).collect() };
    let mut together: Vec<f64> = (0..19).flat_map(load).collect();
    factorization.solve(&mut together, 19).unwrap();
    for k in 0..19 {
        let mut alone = load(k);
        factorization.solve(&mut alone, 1).unwrap();
        let largest = alone.iter().fold(0.0f64, |m, x| m.max(x.abs()));
        for (a, t) in alone.iter().zip(&together[k * n..]) {
            assert!((a - t).abs() <= 1e-9 * largest, "load {k}: {a} alone, {t} among others");
        }
    }
}

#[test]
fn zero_load_gives_zero() {
    let matrix = second_difference(5);
    let mut x = [0.0; 5];
    let info = factor(matrix.clone(), &scattered(5), &SolveParams::default()).unwrap().solve(&mut x, 1).unwrap();
    assert!(x.iter().all(|x| x.abs() <= 0.0) && info.relative_residual <= 0.0);
}

#[test]
fn same_bits_again_and_in_used_memory() {
    let (large, large_order, _) = sector(12, 12);
    let (matrix, order, loads) = sector(8, 12);
    let params = SolveParams::default();
    let mut fresh = loads.clone();
    factor(matrix.clone(), &order, &params).unwrap().solve(&mut fresh, 1).unwrap();
    let buffers = factor(large, &large_order, &params).unwrap().into_buffers();
    let symbolic = Arc::new(Symbolic::new(&matrix, &order).unwrap());
    let mut used = loads.clone();
    let factorization = Factorization::new(matrix.clone(), symbolic.clone(), &params, buffers).unwrap();
    factorization.solve(&mut used, 1).unwrap();
    assert_eq!(fresh, used);
    // Four times the stiffness, a quarter of the displacement: exact, because four is a power of two with an exact root.
    let stiffer = SymmetricCsc { values: matrix.values.iter().map(|v| 4.0 * v).collect(), ..matrix.clone() };
    let mut quarter = loads.clone();
    Factorization::new(stiffer, symbolic, &params, factorization.into_buffers()).unwrap().solve(&mut quarter, 1).unwrap();
    assert!(fresh.iter().zip(&quarter).all(|(x, q)| (4.0 * q).to_bits() == x.to_bits()));
}

#[test]
fn refinement_does_not_raise_the_error() {
    let (matrix, order, loads) = sector(16, 24);
    let solve = |refine_above| {
        let params = SolveParams { refine_above, ..SolveParams::default() };
        factor(matrix.clone(), &order, &params).unwrap().solve(&mut loads.clone(), 1).unwrap()
    };
    let (plain, refined) = (solve(1.0), solve(0.0));
    assert_eq!((plain.n_refined, refined.n_refined), (0, 1));
    assert!(refined.backward_error <= plain.backward_error, "{plain:?} {refined:?}");
}

#[test]
fn refusals_name_the_unknown_of_the_matrix() {
    let n = 60;
    let order = scattered(n);
    let params = SolveParams::default();
    for unknown in [0, 17, n - 1] {
        let mut matrix = SymmetricCsc { n, column_starts: (0..=n as u32).collect(), rows: (0..n as u32).collect(), values: vec![3.0; n] };
        for value in [-1.0, 0.0] {
            matrix.values[unknown] = value;
            assert_eq!(factor(matrix.clone(), &order, &params).unwrap_err(), SolveError::NotPositiveDefinite { unknown });
        }
        for value in [f64::NAN, f64::INFINITY] {
            matrix.values[unknown] = value;
            assert_eq!(factor(matrix.clone(), &order, &params).unwrap_err(), SolveError::MatrixNotFinite { unknown });
        }
        matrix.values[unknown] = 3.0;
        let mut loads = vec![1.0; 2 * n];
        loads[n + unknown] = f64::NAN;
        let error = factor(matrix.clone(), &order, &params).unwrap().solve(&mut loads, 2).unwrap_err();
        assert_eq!(error, SolveError::LoadNotFinite { rhs: 1, unknown });
    }
    assert_eq!(
        SolveError::NotPositiveDefinite { unknown: 17 }.to_string(),
        "the stiffness matrix is not positive definite at free unknown 17: a part of the body is not held, or an element is turned over"
    );
}

#[test]
fn body_without_supports_is_refused() {
    let mesh = grid(Grid { n_u: 6, n_v: 5, curved: false }, &|[u, v]| [3.0 * u, 2.0 * v], &|_, _| true);
    for held in 0..3usize {
        // Rigid motions left: three, two, one.
        let mut supports = Supports::none(mesh.points_m.len());
        (0..held).for_each(|direction| supports.prescribe(0, direction, 0.0));
        let (matrix, order, _) = assemble(&mesh, &supports);
        let error = factor(matrix.clone(), &order, &SolveParams::default()).unwrap_err();
        assert!(matches!(error, SolveError::NotPositiveDefinite { .. } | SolveError::NotHeld { .. }), "{held} held: {error}");
    }
}

/// `[[1, 1], [1, 1 + e]]` has the pivots 1 and `e`. Source: hand elimination.
#[test]
fn pivot_of_rounding_size_is_refused() {
    let with = |e: f64| SymmetricCsc { n: 2, column_starts: vec![0, 2, 3], rows: vec![0, 1, 1], values: vec![1.0, 1.0, 1.0 + e] };
    let share = 4.0 * f64::EPSILON;
    let error = factor(with(share), &[0, 1], &SolveParams::default()).unwrap_err();
    let SolveError::NotHeld { unknown: 1, pivot_share } = error else { panic!("{error}") };
    assert!((pivot_share / share - 1.0).abs() < 1e-9, "{pivot_share}");
    assert!(factor(with(1e-9), &[0, 1], &SolveParams::default()).is_ok());
}

#[test]
fn inaccurate_solutions_are_refused() {
    let (matrix, order, mut loads) = sector(8, 12);
    let params = SolveParams { refine_above: 0.0, refuse_above: 0.0, ..SolveParams::default() };
    let error = factor(matrix.clone(), &order, &params).unwrap().solve(&mut loads, 1).unwrap_err();
    assert!(matches!(error, SolveError::Inaccurate { rhs: 0, backward_error } if backward_error > 0.0), "{error}");
}
