//! Nodes at which the boundary turns in so far that the stress is singular.
use crate::assembly::elements_of_nodes;
use crate::element::{NODE_XI, element_points_m, jacobian_m};
use crate::mesh::Mesh;

/// Angle of the body at a boundary corner above which it counts as re-entrant: 200 degrees.
///
/// Williams' exponent is below 1 above 180 degrees; the 20 degrees keep polygons that stand for a rounded boundary out (there it is above 0.9).
pub const SINGULAR_ANGLE_RAD: f64 = 200.0 / 180.0 * std::f64::consts::PI;

/// Boundary corner nodes where the body fills more than `angle_rad`, slit tips included; ascending. Angles are those of the curved sides.
pub fn singular_nodes(mesh: &Mesh, angle_rad: f64) -> Vec<u32> {
    let mut on_boundary = vec![false; mesh.points_m.len()];
    for side in mesh.boundary_sides() {
        on_boundary[side.nodes[0] as usize] = true;
        on_boundary[side.nodes[1] as usize] = true;
    }
    let (starts, elements) = elements_of_nodes(mesh);
    let filled = |node: usize| -> f64 {
        let around = &elements[starts[node] as usize..starts[node + 1] as usize];
        around.iter().map(|&e| corner_angle_rad(mesh, e as usize, node as u32)).sum()
    };
    (0..mesh.n_corners).filter(|&n| on_boundary[n] && filled(n) > angle_rad).map(|n| n as u32).collect()
}

/// Angle of an element at one of its corners between the tangents of its sides.
fn corner_angle_rad(mesh: &Mesh, element: usize, node: u32) -> f64 {
    let Some(corner) = mesh.triangles[element][..3].iter().position(|&n| n == node) else { return 0.0 };
    let j = jacobian_m(&element_points_m(mesh, element), NODE_XI[corner]);
    // Directions of the two sides in reference coordinates: corner 0 along +ξ and +η, corner 1 along −ξ+η and −ξ, corner 2 along −η and ξ−η.
    let [a, b] = [[[1.0, 0.0], [0.0, 1.0]], [[-1.0, 1.0], [-1.0, 0.0]], [[0.0, -1.0], [1.0, -1.0]]][corner];
    let turned = |d: [f64; 2]| [j[0][0] * d[0] + j[0][1] * d[1], j[1][0] * d[0] + j[1][1] * d[1]];
    let (p, q) = (turned(a), turned(b));
    (p[0] * q[1] - p[1] * q[0]).atan2(p[0] * q[0] + p[1] * q[1])
}
