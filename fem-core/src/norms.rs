//! Errors against exact fields, for verification.
use crate::elasticity::Elastic;
use crate::element::{element_displacements_m, element_points_m, interpolate, mapped, strain};
use crate::mesh::Mesh;
use crate::quadrature::{TRIANGLE_DEGREE_6, TrianglePoint};

/// `‖u − u_h‖ = sqrt(∫ |u − u_h|²)` in m², sampled at the points of a rule. The square of the leading error has degree 6: rules below that
/// see only a part of it.
pub fn displacement_error(mesh: &Mesh, displacements_m: &[f64], exact_m: &dyn Fn([f64; 2]) -> [f64; 2], rule: &[TrianglePoint]) -> f64 {
    let mut sum = 0.0;
    for element in 0..mesh.triangles.len() {
        let points = element_points_m(mesh, element);
        let u = element_displacements_m(mesh, element, displacements_m);
        for &(xi, weight) in rule {
            let w = weight * crate::element::determinant_m2(&points, xi);
            let (got, want) = (interpolate(&u, xi), exact_m(interpolate(&points, xi)));
            sum += w * ((got[0] - want[0]).powi(2) + (got[1] - want[1]).powi(2));
        }
    }
    sum.sqrt()
}

/// `sqrt(∫ (σ − σ_h) : D⁻¹ (σ − σ_h))` in sqrt(J/m) for a stress given by element and reference coordinates, degree-6 rule.
/// Source: docs/theory.md eq. (1.13).
pub fn stress_error(
    mesh: &Mesh,
    materials: &[Elastic],
    got_pa: &dyn Fn(usize, [f64; 2]) -> [f64; 3],
    exact_pa: &dyn Fn([f64; 2]) -> [f64; 3],
) -> f64 {
    let mut sum = 0.0;
    for element in 0..mesh.triangles.len() {
        let points = element_points_m(mesh, element);
        let material = &materials[mesh.regions[element] as usize];
        for (xi, weight) in TRIANGLE_DEGREE_6 {
            let w = weight * crate::element::determinant_m2(&points, xi);
            let (got, want) = (got_pa(element, xi), exact_pa(interpolate(&points, xi)));
            let difference = [got[0] - want[0], got[1] - want[1], got[2] - want[2]];
            sum += w * 2.0 * material.energy_density_j_per_m3(difference);
        }
    }
    sum.sqrt()
}

/// [`stress_error`] of the raw stress `D ε(u_h)`: the error in the energy norm.
pub fn energy_error(mesh: &Mesh, materials: &[Elastic], displacements_m: &[f64], exact_pa: &dyn Fn([f64; 2]) -> [f64; 3]) -> f64 {
    let raw = |element: usize, xi: [f64; 2]| {
        let at = mapped(&element_points_m(mesh, element), xi);
        let u = element_displacements_m(mesh, element, displacements_m);
        materials[mesh.regions[element] as usize].stress_pa(strain(&at, &u))
    };
    stress_error(mesh, materials, &raw, exact_pa)
}
