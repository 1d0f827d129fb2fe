//! Superconvergent patch recovery of the stress (Zienkiewicz & Zhu 1992) for six-node triangles.
//!
//! Around every corner node a complete quadratic is fitted to the raw stress at the three optimal points of each element of the patch; its value
//! is the recovered stress at the node, middle nodes take the mean of the patches at both ends. Source: docs/theory.md section 1.5.
use crate::elasticity::Elastic;
use crate::element::{Mapped, element_displacements_m, element_points_m, interpolate, mapped, strain};
use crate::mesh::Mesh;
use crate::quadrature::TRIANGLE_DEGREE_2;

mod build;
mod patch;
mod singular;

pub use singular::{SINGULAR_ANGLE_RAD, singular_nodes};

/// What patches must not cross.
#[derive(Debug, Clone, Copy)]
pub struct RecoveryParams<'a> {
    /// Group number of each element, shape `[n_elements]`: patches stay within a group, contact nodes get a value per group.
    pub groups: &'a [u32],
    /// Nodes at which the stress is singular (see [`singular_nodes`]): no patch is centered there and no patch is widened past them.
    pub singular_nodes: &'a [u32],
}

/// Where recovered values live: like the mesh's nodes, but several at one place where the stress jumps.
#[derive(Debug, Clone, PartialEq)]
pub struct RecoveredLayout {
    /// Recovered node of each element node, shape `[n_elements][6]`.
    pub element_nodes: Vec<[u32; 6]>,
    /// Number of recovered nodes.
    pub n: usize,
}

/// The recovery operator of a mesh: built once, applied to any number of displacement fields.
#[derive(Debug, Clone, PartialEq)]
pub struct Recovery {
    layout: RecoveredLayout,
    /// Weights on the three samples of elements in compressed rows, one row per recovered node.
    row_starts: Vec<u32>,
    elements: Vec<u32>,
    weights: Vec<[f64; 3]>,
}

impl RecoveredLayout {
    /// Recovered stress `[xx, yy, xy]` in Pa at `xi` of an element, by its shape functions from values of shape `[n]`.
    pub fn evaluate(&self, values_pa: &[[f64; 3]], element: usize, xi: [f64; 2]) -> [f64; 3] {
        interpolate(&self.element_nodes[element].map(|node| values_pa[node as usize]), xi)
    }
}

impl Recovery {
    /// Builds the operator.
    ///
    /// # Panics
    /// When `groups` does not have an entry for each element.
    pub fn new(mesh: &Mesh, params: &RecoveryParams) -> Self {
        assert_eq!(params.groups.len(), mesh.triangles.len(), "{} groups for {} elements", params.groups.len(), mesh.triangles.len());
        build::build(mesh, params)
    }

    /// Where the recovered values live.
    pub fn layout(&self) -> &RecoveredLayout {
        &self.layout
    }

    /// Recovered stresses `[xx, yy, xy]` in Pa, shape `[n_fields][layout.n]`, of displacement fields of length `2 * n_nodes`.
    ///
    /// # Panics
    /// When a region has no material or a field is too short.
    pub fn recover<U: AsRef<[f64]>>(&self, mesh: &Mesh, materials: &[Elastic], fields_m: &[U]) -> Vec<Vec<[f64; 3]>> {
        let mut samples = vec![vec![[0.0; 3]; 3 * mesh.triangles.len()]; fields_m.len()];
        for element in 0..mesh.triangles.len() {
            let at = sample_gradients(mesh, element);
            let moduli = materials[mesh.regions[element] as usize].moduli();
            for (field, samples) in fields_m.iter().zip(&mut samples) {
                let u = element_displacements_m(mesh, element, field.as_ref());
                for k in 0..3 {
                    samples[3 * element + k] = moduli.stress_pa(strain(&at[k], &u));
                }
            }
        }
        samples.iter().map(|s| self.apply(s)).collect()
    }

    /// Fits any tensor field given at the samples ([`sample_places_m`]), shape `[3 * n_elements]`; returns shape `[layout.n]`.
    ///
    /// # Panics
    /// When the number of samples is wrong.
    pub fn apply(&self, samples_pa: &[[f64; 3]]) -> Vec<[f64; 3]> {
        assert_eq!(samples_pa.len(), 3 * self.layout.element_nodes.len(), "{} samples", samples_pa.len());
        let row = |range: &[u32]| {
            let range = range[0] as usize..range[1] as usize;
            let mut sum = [0.0; 3];
            for (&element, weights) in self.elements[range.clone()].iter().zip(&self.weights[range]) {
                let samples = &samples_pa[3 * element as usize..3 * element as usize + 3];
                for (value, &weight) in samples.iter().zip(weights) {
                    sum = [sum[0] + weight * value[0], sum[1] + weight * value[1], sum[2] + weight * value[2]];
                }
            }
            sum
        };
        self.row_starts.windows(2).map(row).collect()
    }
}

/// Places of the samples in m: the three points of the degree-2 rule in each element, shape `[3 * n_elements]`.
pub fn sample_places_m(mesh: &Mesh) -> Vec<[f64; 2]> {
    (0..mesh.triangles.len())
        .flat_map(|element| {
            let points = element_points_m(mesh, element);
            TRIANGLE_DEGREE_2.map(|(xi, _)| interpolate(&points, xi))
        })
        .collect()
}

fn sample_gradients(mesh: &Mesh, element: usize) -> [Mapped; 3] {
    let points = element_points_m(mesh, element);
    TRIANGLE_DEGREE_2.map(|(xi, _)| mapped(&points, xi))
}

#[cfg(test)]
mod tests;
