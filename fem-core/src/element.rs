//! The six-node triangle: shape functions, gradients, mapping with curved sides, strains, stiffness.
//!
//! Reference coordinates `xi = [ξ, η]` with area coordinates `L0 = 1 − ξ − η`, `L1 = ξ`, `L2 = η`; nodes: corners 0, 1, 2, then the middles of
//! the sides 01, 12, 20.
use crate::elasticity::Moduli;
use crate::mesh::Mesh;
use crate::quadrature::{TRIANGLE_DEGREE_2, TRIANGLE_DEGREE_4, TrianglePoint};

mod stiffness;

pub(crate) use stiffness::{N_PAIRS, stiffness_blocks};

/// Reference coordinates of the six nodes.
pub const NODE_XI: [[f64; 2]; 6] = [[0.0, 0.0], [1.0, 0.0], [0.0, 1.0], [0.5, 0.0], [0.5, 0.5], [0.0, 0.5]];

/// Local corner, corner and middle node of each side.
pub const SIDES: [[usize; 3]; 3] = [[0, 1, 3], [1, 2, 4], [2, 0, 5]];

/// A side counts as straight when its middle node is this close to the middle of the chord, relative to the chord's length.
const STRAIGHT_TOLERANCE: f64 = 1e-9;

/// Gradients of the shape functions in the plane at one point of an element.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Mapped {
    /// `∂N_a/∂x`, `∂N_a/∂y` in 1/m, shape `[6][2]`.
    pub gradients_per_m: [[f64; 2]; 6],
    /// Determinant of `∂(x, y)/∂(ξ, η)` in m²; twice the area where the sides are straight.
    pub det_m2: f64,
}

/// Shape functions `N_a = L_a (2 L_a − 1)` at corners, `4 L_a L_b` at middles. Source: docs/theory.md eq. (1.7).
pub fn shape(xi: [f64; 2]) -> [f64; 6] {
    let (l0, l1, l2) = (1.0 - xi[0] - xi[1], xi[0], xi[1]);
    [l0 * (2.0 * l0 - 1.0), l1 * (2.0 * l1 - 1.0), l2 * (2.0 * l2 - 1.0), 4.0 * l0 * l1, 4.0 * l1 * l2, 4.0 * l2 * l0]
}

/// `∂N_a/∂ξ`, `∂N_a/∂η`, shape `[6][2]`.
pub fn shape_gradients(xi: [f64; 2]) -> [[f64; 2]; 6] {
    let (l0, l1, l2) = (1.0 - xi[0] - xi[1], xi[0], xi[1]);
    [
        [1.0 - 4.0 * l0, 1.0 - 4.0 * l0],
        [4.0 * l1 - 1.0, 0.0],
        [0.0, 4.0 * l2 - 1.0],
        [4.0 * (l0 - l1), -4.0 * l1],
        [4.0 * l2, 4.0 * l1],
        [-4.0 * l2, 4.0 * (l0 - l2)],
    ]
}

/// Coordinates in m of the six nodes of an element.
pub fn element_points_m(mesh: &Mesh, element: usize) -> [[f64; 2]; 6] {
    mesh.triangles[element].map(|node| mesh.points_m[node as usize])
}

/// `Σ N_a(xi) v_a` for values of any number of components at the six nodes.
pub fn interpolate<const K: usize>(values: &[[f64; K]; 6], xi: [f64; 2]) -> [f64; K] {
    let n = shape(xi);
    let mut sum = [0.0; K];
    for (weight, value) in n.iter().zip(values) {
        for (s, v) in sum.iter_mut().zip(value) {
            *s += weight * v;
        }
    }
    sum
}

/// `∂(x, y)/∂(ξ, η)` in m: `[[∂x/∂ξ, ∂x/∂η], [∂y/∂ξ, ∂y/∂η]]`.
pub fn jacobian_m(points_m: &[[f64; 2]; 6], xi: [f64; 2]) -> [[f64; 2]; 2] {
    let mut j = [[0.0; 2]; 2];
    for (g, p) in shape_gradients(xi).iter().zip(points_m) {
        j[0][0] += g[0] * p[0];
        j[0][1] += g[1] * p[0];
        j[1][0] += g[0] * p[1];
        j[1][1] += g[1] * p[1];
    }
    j
}

/// Gradients in the plane, `∇N = J⁻ᵀ ∇_ξ N`, and the determinant of `J`. Source: docs/theory.md eq. (1.8).
pub fn mapped(points_m: &[[f64; 2]; 6], xi: [f64; 2]) -> Mapped {
    let reference = shape_gradients(xi);
    let [[xu, xv], [yu, yv]] = jacobian_m(points_m, xi);
    let det_m2 = xu * yv - xv * yu;
    let inverse = 1.0 / det_m2;
    let gradients_per_m = reference.map(|[u, v]| [(yv * u - yu * v) * inverse, (xu * v - xv * u) * inverse]);
    Mapped { gradients_per_m, det_m2 }
}

/// Whether all three sides are straight with their middle nodes in the middle, so that the Jacobian is constant.
pub fn is_straight(points_m: &[[f64; 2]; 6]) -> bool {
    SIDES.iter().all(|&[i, j, m]| {
        let (a, b, c) = (points_m[i], points_m[j], points_m[m]);
        let deviation = (c[0] - 0.5 * (a[0] + b[0])).abs() + (c[1] - 0.5 * (a[1] + b[1])).abs();
        deviation <= STRAIGHT_TOLERANCE * ((b[0] - a[0]).abs() + (b[1] - a[1]).abs())
    })
}

/// Rule for `∫ BᵀDB`: degree 2 is exact on straight sides, degree 4 on curved ones. The same points serve the internal forces, so that
/// `K u` and `∫ Bᵀ D ε(u)` agree to round-off.
pub fn stiffness_rule(points_m: &[[f64; 2]; 6]) -> &'static [TrianglePoint] {
    if is_straight(points_m) { &TRIANGLE_DEGREE_2 } else { &TRIANGLE_DEGREE_4 }
}

/// Strain `[ε_x, ε_y, γ_xy] = B u` for node displacements in m, shape `[6][2]`. Source: docs/theory.md eq. (1.2).
pub fn strain(mapped: &Mapped, displacements_m: &[[f64; 2]; 6]) -> [f64; 3] {
    let mut e = [0.0; 3];
    for (g, u) in mapped.gradients_per_m.iter().zip(displacements_m) {
        e[0] += g[0] * u[0];
        e[1] += g[1] * u[1];
        e[2] += g[1] * u[0] + g[0] * u[1];
    }
    e
}

/// Displacements in m of the six nodes of an element from a global vector of length `2 * n_nodes`.
pub fn element_displacements_m(mesh: &Mesh, element: usize, displacements_m: &[f64]) -> [[f64; 2]; 6] {
    mesh.triangles[element].map(|node| [displacements_m[2 * node as usize], displacements_m[2 * node as usize + 1]])
}

/// Area in m² by the degree-4 rule, exact for curved sides (the determinant has degree 2).
pub fn area_m2(points_m: &[[f64; 2]; 6]) -> f64 {
    TRIANGLE_DEGREE_4.iter().map(|(xi, w)| w * determinant_m2(points_m, *xi)).sum()
}

/// Determinant of the Jacobian in m².
pub fn determinant_m2(points_m: &[[f64; 2]; 6], xi: [f64; 2]) -> f64 {
    let [[xu, xv], [yu, yv]] = jacobian_m(points_m, xi);
    xu * yv - xv * yu
}

/// Node forces `∫ Bᵀ D B u` of one element in N/m, shape `[6][2]`.
pub fn internal_forces(points_m: &[[f64; 2]; 6], moduli: &Moduli, displacements_m: &[[f64; 2]; 6]) -> [[f64; 2]; 6] {
    let mut forces = [[0.0; 2]; 6];
    for &(xi, weight) in stiffness_rule(points_m) {
        let at = mapped(points_m, xi);
        let stress = moduli.stress_pa(strain(&at, displacements_m));
        add_stress_divergence(&mut forces, &at, stress, weight * at.det_m2);
    }
    forces
}

/// Adds `weight · Bᵀ σ` to node forces.
pub fn add_stress_divergence(forces: &mut [[f64; 2]; 6], at: &Mapped, stress_pa: [f64; 3], weight_m2: f64) {
    let [xx, yy, xy] = stress_pa;
    for (f, g) in forces.iter_mut().zip(&at.gradients_per_m) {
        f[0] += weight_m2 * (g[0] * xx + g[1] * xy);
        f[1] += weight_m2 * (g[1] * yy + g[0] * xy);
    }
}

#[cfg(test)]
mod tests;
