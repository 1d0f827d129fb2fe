//! From a field snapshot to the pieces that pictures are made of.
use checker::outcome::{FieldSnapshot, PointXz};

use super::contour::{self, Piece};
use super::frame::Frame;

/// A six-node triangle as four straight ones, in element node numbers.
pub const SPLIT: [[usize; 3]; 4] = [[0, 3, 5], [3, 1, 4], [5, 4, 2], [3, 4, 5]];

/// Pieces of a snapshot that touch the window; `value` is asked by element and element node.
pub fn pieces(snapshot: &FieldSnapshot, frame: &Frame, value: &dyn Fn(usize, usize) -> f64) -> Vec<Piece> {
    let mut pieces = Vec::new();
    for (i_elem, nodes) in snapshot.mesh.triangles.iter().enumerate() {
        let at = nodes.map(|node| snapshot.mesh.points_m[node as usize]);
        if touches(&at, frame) {
            let values: [f64; 6] = std::array::from_fn(|i_local| value(i_elem, i_local));
            pieces.extend(SPLIT.map(|local| Piece { at_m: local.map(|i| at[i]), values: local.map(|i| values[i]) }));
        }
    }
    pieces
}

fn touches(at: &[PointXz; 6], frame: &Frame) -> bool {
    let outside = |axis: usize, range: [f64; 2]| at.iter().all(|p| p[axis] < range[0]) || at.iter().all(|p| range[1] < p[axis]);
    !outside(0, frame.x_m) && !outside(1, frame.z_m)
}

/// Outline of the whole body, as path data in contour units.
pub fn body(snapshot: &FieldSnapshot, frame: &Frame) -> String {
    contour::outline(&pieces(snapshot, frame, &|_, _| 0.0), frame)
}

/// Outline of one rock, as path data in contour units; empty where the window does not show it.
pub fn rock(snapshot: &FieldSnapshot, frame: &Frame, region: u32) -> String {
    let of_region = |i_elem: usize, _: usize| if snapshot.mesh.regions[i_elem] == region { 1.0 } else { 0.0 };
    contour::region_at_least(&pieces(snapshot, frame, &of_region), 0.5, frame)
}

/// Sides of the mesh that only one triangle has, as point pairs.
pub fn free_sides(snapshot: &FieldSnapshot) -> Vec<[PointXz; 2]> {
    let mut sides = std::collections::BTreeSet::new();
    for nodes in &snapshot.mesh.triangles {
        // A side as its two halves, so that curved ones stay curved.
        for [a, m, b] in [[0, 3, 1], [1, 4, 2], [2, 5, 0]] {
            for [from, to] in [[nodes[a], nodes[m]], [nodes[m], nodes[b]]] {
                if !sides.remove(&(to, from)) {
                    sides.insert((from, to));
                }
            }
        }
    }
    let point = |node: u32| snapshot.mesh.points_m[node as usize];
    sides.into_iter().map(|(a, b)| [point(a), point(b)]).collect()
}
