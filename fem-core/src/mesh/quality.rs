//! How good an element is: smallest angle, bound on the Jacobian of curved elements.
use super::Mesh;
use crate::element::{NODE_XI, SIDES, determinant_m2, element_points_m};

/// Smallest corner angle in rad of the straight triangle through three points.
pub fn smallest_angle_rad(corners_m: [[f64; 2]; 3]) -> f64 {
    let angle = |at: usize| {
        let (p, q, r) = (corners_m[at], corners_m[(at + 1) % 3], corners_m[(at + 2) % 3]);
        let (u, v) = ([q[0] - p[0], q[1] - p[1]], [r[0] - p[0], r[1] - p[1]]);
        (u[0] * v[1] - u[1] * v[0]).abs().atan2(u[0] * v[0] + u[1] * v[1])
    };
    angle(0).min(angle(1)).min(angle(2))
}

/// Smallest corner angle in rad of the whole mesh, measured on the corners.
pub fn smallest_angle_of_mesh_rad(mesh: &Mesh) -> f64 {
    let angle = |t: &[u32; 6]| smallest_angle_rad([0, 1, 2].map(|i| mesh.points_m[t[i] as usize]));
    mesh.triangles.iter().map(angle).fold(std::f64::consts::PI, f64::min)
}

/// Lower bound in m² of the Jacobian determinant over a six-node triangle.
///
/// The determinant is a quadratic of the reference coordinates, so it lies in the convex hull of its Bernstein coefficients: the values at the
/// corners and, for each side, twice the value in the middle less the mean of both ends.
pub fn jacobian_bound_m2(points_m: &[[f64; 2]; 6]) -> f64 {
    let at = NODE_XI.map(|xi| determinant_m2(points_m, xi));
    let corners = at[0].min(at[1]).min(at[2]);
    SIDES.iter().map(|&[i, j, m]| 2.0 * at[m] - 0.5 * (at[i] + at[j])).fold(corners, f64::min)
}

/// [`jacobian_bound_m2`] of an element over twice the area of its corner triangle: 1 with straight sides, not above 0 when it may fold over.
pub fn scaled_jacobian_bound(mesh: &Mesh, element: usize) -> f64 {
    let p = element_points_m(mesh, element);
    let twice = (p[1][0] - p[0][0]) * (p[2][1] - p[0][1]) - (p[2][0] - p[0][0]) * (p[1][1] - p[0][1]);
    jacobian_bound_m2(&p) / twice
}
