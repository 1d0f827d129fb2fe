//! Consistent node loads, N/m, vectors of length `2 * n_nodes`. Source of all: docs/theory.md eq. (1.10).
use super::forces::scatter;
use super::split::{KinksOf, SMOOTH, rule};
use crate::element::{add_stress_divergence, element_points_m, interpolate, mapped, shape};
use crate::mesh::{Mesh, NO_ELEMENT, TaggedEdge};
use crate::quadrature::gauss_unit;

/// Points of the Gauss rule on a side or a piece of it: exact to degree 7, a quadratic side with quadratic `N` and linear pressure has 5.
const SIDE_POINTS: usize = 4;

/// Loads of a body force, `f = ∫ Nᵀ b`.
///
/// `force_n_per_m3(element, [x, y])` is the force per volume in N/m³. Exact for constant `b`, also with curved sides.
pub fn body_force(mesh: &Mesh, force_n_per_m3: &dyn Fn(usize, [f64; 2]) -> [f64; 2]) -> Vec<f64> {
    body_force_of(mesh, force_n_per_m3, 0..mesh.triangles.len() as u32)
}

/// [`body_force`] of the listed elements only.
pub fn body_force_of(
    mesh: &Mesh,
    force_n_per_m3: &dyn Fn(usize, [f64; 2]) -> [f64; 2],
    elements: impl IntoIterator<Item = u32>,
) -> Vec<f64> {
    body_force_split(mesh, force_n_per_m3, SMOOTH, elements)
}

/// [`body_force_of`] for a force that jumps or kinks on straight lines inside elements; exact on straight-sided elements.
pub fn body_force_split(
    mesh: &Mesh,
    force_n_per_m3: &dyn Fn(usize, [f64; 2]) -> [f64; 2],
    kinks: KinksOf<'_>,
    elements: impl IntoIterator<Item = u32>,
) -> Vec<f64> {
    let mut loads = vec![0.0; 2 * mesh.points_m.len()];
    for element in elements.into_iter().map(|e| e as usize) {
        let points = element_points_m(mesh, element);
        let mut f = [[0.0; 2]; 6];
        for &(xi, weight) in rule([points[0], points[1], points[2]], &kinks(element)).iter() {
            let w = weight * crate::element::determinant_m2(&points, xi);
            let b = force_n_per_m3(element, interpolate(&points, xi));
            for (f, n) in f.iter_mut().zip(shape(xi)) {
                f[0] += w * n * b[0];
                f[1] += w * n * b[1];
            }
        }
        scatter(&mut loads, &mesh.triangles[element], &f);
    }
    loads
}

/// Loads of an initial stress on the right-hand side, `f = −∫ Bᵀ σ0`.
///
/// `stress_pa(element, [x, y])` is `[xx, yy, xy]` in Pa, tension positive. Exact for linear `σ0`, also with curved sides.
pub fn initial_stress(mesh: &Mesh, stress_pa: &dyn Fn(usize, [f64; 2]) -> [f64; 3]) -> Vec<f64> {
    initial_stress_of(mesh, stress_pa, 0..mesh.triangles.len() as u32)
}

/// [`initial_stress`] of the listed elements only.
pub fn initial_stress_of(
    mesh: &Mesh,
    stress_pa: &dyn Fn(usize, [f64; 2]) -> [f64; 3],
    elements: impl IntoIterator<Item = u32>,
) -> Vec<f64> {
    initial_stress_split(mesh, stress_pa, SMOOTH, elements)
}

/// [`initial_stress_of`] for a stress that jumps or kinks on straight lines inside elements; exact on straight-sided elements.
pub fn initial_stress_split(
    mesh: &Mesh,
    stress_pa: &dyn Fn(usize, [f64; 2]) -> [f64; 3],
    kinks: KinksOf<'_>,
    elements: impl IntoIterator<Item = u32>,
) -> Vec<f64> {
    let mut loads = vec![0.0; 2 * mesh.points_m.len()];
    for element in elements.into_iter().map(|e| e as usize) {
        let points = element_points_m(mesh, element);
        let mut f = [[0.0; 2]; 6];
        for &(xi, weight) in rule([points[0], points[1], points[2]], &kinks(element)).iter() {
            let at = mapped(&points, xi);
            let stress = stress_pa(element, interpolate(&points, xi));
            add_stress_divergence(&mut f, &at, stress, -weight * at.det_m2);
        }
        scatter(&mut loads, &mesh.triangles[element], &f);
    }
    loads
}

/// Loads of a pore pressure, `f = +∫ Bᵀ m p`, `m = [1, 1, 0]`, so that `D ε(u)` is the effective stress `σ + m p`.
///
/// `pressure_pa(element, [x, y])` is the pressure in Pa, positive in compression, already times its share α. Exact for linear pressure.
pub fn pore_pressure(mesh: &Mesh, pressure_pa: &dyn Fn(usize, [f64; 2]) -> f64) -> Vec<f64> {
    initial_stress(mesh, &|element, point| {
        let p = pressure_pa(element, point);
        [-p, -p, 0.0]
    })
}

/// Loads of a traction on sides, `f = ∫ Nᵀ t ds`, along the curved side.
///
/// | name | unit | meaning |
/// |---|---|---|
/// | `edges` | | sides to load; a side between two elements is taken as the boundary of its left one |
/// | `traction_pa([x, y], outward normal)` | Pa | force per area |
/// | `breaks_m` | m | points where the traction jumps or kinks; a side is split where it passes nearest to one that lies on it |
///
/// Each piece is integrated by a Gauss rule of degree 7.
pub fn edge_traction(
    mesh: &Mesh,
    edges: &[TaggedEdge],
    breaks_m: &[[f64; 2]],
    traction_pa: &dyn Fn([f64; 2], [f64; 2]) -> [f64; 2],
) -> Vec<f64> {
    let mut loads = vec![0.0; 2 * mesh.points_m.len()];
    for edge in edges {
        let points = edge.nodes.map(|node| mesh.points_m[node as usize]);
        walk_edge(mesh, edge, &pieces(&points, breaks_m), &mut |at| {
            let force = traction_pa(at.point_m, at.normal);
            for (&node, n) in edge.nodes.iter().zip(side_shape(at.s)) {
                loads[2 * node as usize] += at.weight_m * n * force[0];
                loads[2 * node as usize + 1] += at.weight_m * n * force[1];
            }
        });
    }
    loads
}

/// An integration point on a side.
pub(crate) struct EdgePoint {
    /// Parameter along the side.
    pub(crate) s: f64,
    /// Coordinates, m.
    pub(crate) point_m: [f64; 2],
    /// Unit normal out of the element that the side counts to.
    pub(crate) normal: [f64; 2],
    /// Length that the point stands for, m.
    pub(crate) weight_m: f64,
}

/// Visits the Gauss points of a side, piece by piece between ascending parameters.
pub(crate) fn walk_edge(mesh: &Mesh, edge: &TaggedEdge, parameters: &[f64], visit: &mut dyn FnMut(EdgePoint)) {
    let outward = if edge.left == NO_ELEMENT { -1.0 } else { 1.0 };
    let points = edge.nodes.map(|node| mesh.points_m[node as usize]);
    let rule = gauss_unit(SIDE_POINTS);
    for piece in parameters.windows(2) {
        for &(t, weight) in &rule {
            let s = piece[0] + (piece[1] - piece[0]) * t;
            let slope = side_slope(&points, s);
            let length = slope[0].hypot(slope[1]);
            let normal = [outward * slope[1] / length, -outward * slope[0] / length];
            visit(EdgePoint { s, point_m: side_point(&points, s), normal, weight_m: weight * (piece[1] - piece[0]) * length });
        }
    }
}

/// Loads of a normal pressure in Pa on sides, positive in compression: traction `−p n`. See [`edge_traction`].
pub fn edge_pressure(mesh: &Mesh, edges: &[TaggedEdge], breaks_m: &[[f64; 2]], pressure_pa: &dyn Fn([f64; 2]) -> f64) -> Vec<f64> {
    edge_traction(mesh, edges, breaks_m, &|point, normal| {
        let p = pressure_pa(point);
        [-p * normal[0], -p * normal[1]]
    })
}

/// Quadratic shape functions on a side, parameter 0 at the start, 1 at the end; order start, end, middle.
pub(crate) fn side_shape(s: f64) -> [f64; 3] {
    [(1.0 - s) * (1.0 - 2.0 * s), s * (2.0 * s - 1.0), 4.0 * s * (1.0 - s)]
}

/// Point in m at parameter `s` of a side given by start, end, middle.
pub(crate) fn side_point(points_m: &[[f64; 2]; 3], s: f64) -> [f64; 2] {
    let n = side_shape(s);
    [0, 1].map(|k| n[0] * points_m[0][k] + n[1] * points_m[1][k] + n[2] * points_m[2][k])
}

/// Derivative of [`side_point`] in m.
pub(crate) fn side_slope(points_m: &[[f64; 2]; 3], s: f64) -> [f64; 2] {
    let d = [4.0 * s - 3.0, 4.0 * s - 1.0, 4.0 - 8.0 * s];
    [0, 1].map(|k| d[0] * points_m[0][k] + d[1] * points_m[1][k] + d[2] * points_m[2][k])
}

/// Parameters 0, those of the breaks on the side, 1, ascending.
pub(crate) fn pieces(points_m: &[[f64; 2]; 3], breaks_m: &[[f64; 2]]) -> Vec<f64> {
    let mut cuts = vec![0.0];
    cuts.extend(breaks_m.iter().filter_map(|&b| parameter_on_side(points_m, b)));
    cuts.push(1.0);
    cuts.sort_by(f64::total_cmp);
    cuts
}

/// Parameter of a point that lies on the side within 1e-6 of its length, by Newton's method on the distance; `None` off the side or at its ends.
fn parameter_on_side(points_m: &[[f64; 2]; 3], point_m: [f64; 2]) -> Option<f64> {
    let chord = [points_m[1][0] - points_m[0][0], points_m[1][1] - points_m[0][1]];
    let square = chord[0] * chord[0] + chord[1] * chord[1];
    let mut s = ((point_m[0] - points_m[0][0]) * chord[0] + (point_m[1] - points_m[0][1]) * chord[1]) / square;
    for _ in 0..8 {
        let (at, slope) = (side_point(points_m, s), side_slope(points_m, s));
        s += ((point_m[0] - at[0]) * slope[0] + (point_m[1] - at[1]) * slope[1]) / (slope[0] * slope[0] + slope[1] * slope[1]);
        s = s.clamp(-0.1, 1.1);
    }
    let at = side_point(points_m, s);
    let distance = (point_m[0] - at[0]).hypot(point_m[1] - at[1]);
    (0.0 < s && s < 1.0 && distance <= 1e-6 * square.sqrt()).then_some(s)
}
