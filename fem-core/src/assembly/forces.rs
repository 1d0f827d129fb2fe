//! Internal node forces `∫ Bᵀ D ε(u)`: for residuals, reactions and cuts.
use crate::elasticity::Elastic;
use crate::element::{element_displacements_m, element_points_m, internal_forces as element_forces};
use crate::mesh::Mesh;

/// Node forces `f = Σ_e ∫ Bᵀ D B u` of all elements, N/m, shape `[2 * n_nodes]`; equals `K u` before supports. Source: docs/theory.md eq. (1.9).
///
/// # Panics
/// When the displacement vector has another length than `2 * n_nodes` or a region has no material.
pub fn internal_forces(mesh: &Mesh, materials: &[Elastic], displacements_m: &[f64]) -> Vec<f64> {
    internal_forces_of(mesh, materials, displacements_m, 0..mesh.triangles.len() as u32)
}

/// The same, summed over the listed elements only: the forces that hold this part of the body where it is.
///
/// # Panics
/// When the displacement vector has another length than `2 * n_nodes` or a region has no material.
pub fn internal_forces_of(
    mesh: &Mesh,
    materials: &[Elastic],
    displacements_m: &[f64],
    elements: impl IntoIterator<Item = u32>,
) -> Vec<f64> {
    assert_eq!(displacements_m.len(), 2 * mesh.points_m.len(), "displacements of {} unknowns", displacements_m.len());
    let moduli: Vec<_> = materials.iter().map(Elastic::moduli).collect();
    let mut forces = vec![0.0; displacements_m.len()];
    for element in elements.into_iter().map(|e| e as usize) {
        let u = element_displacements_m(mesh, element, displacements_m);
        let f = element_forces(&element_points_m(mesh, element), &moduli[mesh.regions[element] as usize], &u);
        scatter(&mut forces, &mesh.triangles[element], &f);
    }
    forces
}

/// Adds the node forces of an element to a global vector.
pub(crate) fn scatter(global: &mut [f64], triangle: &[u32; 6], forces: &[[f64; 2]; 6]) {
    for (&node, f) in triangle.iter().zip(forces) {
        global[2 * node as usize] += f[0];
        global[2 * node as usize + 1] += f[1];
    }
}
