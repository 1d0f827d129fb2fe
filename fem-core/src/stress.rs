//! Raw stress `D ε(u)` inside elements and strain energy; what the displacements say before any recovery.
use crate::elasticity::Elastic;
use crate::element::{element_displacements_m, element_points_m, mapped, stiffness_rule, strain};
use crate::mesh::Mesh;

/// Stress `[xx, yy, xy] = D ε(u)` in Pa at reference coordinates `xi` of an element; discontinuous between elements.
///
/// # Panics
/// When the element does not exist, its region has no material or the displacement vector is too short.
pub fn raw_stress_pa(mesh: &Mesh, materials: &[Elastic], displacements_m: &[f64], (element, xi): (usize, [f64; 2])) -> [f64; 3] {
    let at = mapped(&element_points_m(mesh, element), xi);
    let u = element_displacements_m(mesh, element, displacements_m);
    materials[mesh.regions[element] as usize].stress_pa(strain(&at, &u))
}

/// Strain energy `½ ∫ ε : D ε` of each element in J/m, shape `[n_elements]`. Source: docs/theory.md eq. (1.12).
///
/// # Panics
/// When a region has no material or the displacement vector is too short.
pub fn strain_energies_j_per_m(mesh: &Mesh, materials: &[Elastic], displacements_m: &[f64]) -> Vec<f64> {
    let energy = |element: usize| {
        let (points, u) = (element_points_m(mesh, element), element_displacements_m(mesh, element, displacements_m));
        let material = &materials[mesh.regions[element] as usize];
        let density = |xi| {
            let at = mapped(&points, xi);
            let e = strain(&at, &u);
            let s = material.stress_pa(e);
            0.5 * (s[0] * e[0] + s[1] * e[1] + s[2] * e[2]) * at.det_m2
        };
        stiffness_rule(&points).iter().map(|&(xi, weight)| weight * density(xi)).sum()
    };
    (0..mesh.triangles.len()).map(energy).collect()
}
