//! Estimated errors: in the energy norm per element (Zienkiewicz & Zhu), and of a mean by the dual problem.
use crate::elasticity::Elastic;
use crate::element::{element_displacements_m, element_points_m, mapped, strain};
use crate::mesh::Mesh;
use crate::quadrature::TRIANGLE_DEGREE_4;
use crate::recovery::RecoveredLayout;

/// Displacements in m, shape `[2 * n_nodes]`, with the stress recovered from them in Pa, shape `[layout.n]`.
#[derive(Debug, Clone, Copy)]
pub struct Field<'a> {
    /// Displacements in m.
    pub displacements_m: &'a [f64],
    /// Recovered stress in Pa.
    pub recovered_pa: &'a [[f64; 3]],
}

/// Error of each element in the energy norm, `η_e = sqrt(∫_e (σ* − σ_h) : D⁻¹ (σ* − σ_h))`, sqrt(J/m). Source: docs/theory.md eq. (1.14).
pub fn energy_errors(mesh: &Mesh, materials: &[Elastic], layout: &RecoveredLayout, field: Field) -> Vec<f64> {
    products(mesh, materials, layout, (field, field)).into_iter().map(|square| square.max(0.0).sqrt()).collect()
}

/// Error over energy norm of the solution, `sqrt(Σ η² / (2 U + Σ η²))` with the strain energy `U` in J/m; dimensionless.
pub fn relative_energy_error(errors: &[f64], strain_energy_j_per_m: f64) -> f64 {
    let square: f64 = errors.iter().map(|e| e * e).sum();
    let whole = 2.0 * strain_energy_j_per_m + square;
    if 0.0 < whole { (square / whole).sqrt() } else { 0.0 }
}

/// Share of each element in the error of a goal, `∫_e (σ* − σ_h) : D⁻¹ (z* − z_h)`, where `z` is the stress of the dual solution, in the unit of
/// the goal. The sum estimates goal(exact) − goal(raw), the sum of absolute values is a cautious bound of it and serves to refine.
/// Source: docs/theory.md eq. (1.15).
pub fn goal_errors(mesh: &Mesh, materials: &[Elastic], layout: &RecoveredLayout, (primal, dual): (Field, Field)) -> Vec<f64> {
    products(mesh, materials, layout, (primal, dual))
}

/// Product of the energy errors of primal and dual, element by element: bounds [`goal_errors`] by Cauchy–Schwarz.
///
/// # Panics
/// When the lists differ in length.
pub fn dual_weighted(primal: &[f64], dual: &[f64]) -> Vec<f64> {
    assert_eq!(primal.len(), dual.len(), "{} primal and {} dual indicators", primal.len(), dual.len());
    primal.iter().zip(dual).map(|(a, b)| a * b).collect()
}

/// `∫_e (σ*_a − σ_a) : D⁻¹ (σ*_b − σ_b)` of each element by the degree-4 rule: exact with straight sides, where recovered stress is quadratic.
fn products(mesh: &Mesh, materials: &[Elastic], layout: &RecoveredLayout, (a, b): (Field, Field)) -> Vec<f64> {
    let of_element = |element: usize| {
        let points = element_points_m(mesh, element);
        let material = &materials[mesh.regions[element] as usize];
        let (u, v) = (element_displacements_m(mesh, element, a.displacements_m), element_displacements_m(mesh, element, b.displacements_m));
        let mut sum = 0.0;
        for (xi, weight) in TRIANGLE_DEGREE_4 {
            let at = mapped(&points, xi);
            let difference = |recovered: &[[f64; 3]], u| {
                let (smooth, raw) = (layout.evaluate(recovered, element, xi), material.stress_pa(strain(&at, u)));
                [smooth[0] - raw[0], smooth[1] - raw[1], smooth[2] - raw[2]]
            };
            let (s, e) = (difference(a.recovered_pa, &u), material.strain(difference(b.recovered_pa, &v)));
            sum += weight * at.det_m2 * (s[0] * e[0] + s[1] * e[1] + s[2] * e[2]);
        }
        sum
    };
    (0..mesh.triangles.len()).map(of_element).collect()
}
