//! Structured six-node meshes for verification: a mapped grid of cells, two triangles each, diagonals alternating.
use super::{Mesh, NO_ELEMENT, TaggedEdge};
use crate::element::SIDES;
use std::collections::HashMap;

/// Tags of the sides of a grid.
pub const BOTTOM: u32 = 1;
/// Side `u = 1`.
pub const RIGHT: u32 = 2;
/// Side `v = 1`.
pub const TOP: u32 = 3;
/// Side `u = 0`.
pub const LEFT: u32 = 4;
/// Boundary of cells left out.
pub const HOLE: u32 = 5;

/// Grid of cells on the unit square `(u, v)` before mapping.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub struct Grid {
    /// Cells along u.
    pub n_u: usize,
    /// Cells along v.
    pub n_v: usize,
    /// Whether mid-side nodes are mapped too (curved sides) or put in the middle of the chord.
    pub curved: bool,
}

/// Mesh of a grid, each point `(u, v)` mapped to meters.
///
/// `keep(i, j)` says whether cell `(i, j)` is part of the body; `map` must keep the orientation. All regions are 0. Diagonals alternate with
/// `i + j`. Boundary sides carry [`BOTTOM`], [`RIGHT`], [`TOP`], [`LEFT`] or [`HOLE`] and run with the body on their left.
pub fn grid(grid: Grid, map: &dyn Fn([f64; 2]) -> [f64; 2], keep: &dyn Fn(usize, usize) -> bool) -> Mesh {
    let uv = |(i, j): (usize, usize)| [i as f64 / (2 * grid.n_u) as f64, j as f64 / (2 * grid.n_v) as f64];
    // Step 1: triangles over the points of the twice finer grid.
    let mut fine: Vec<[(usize, usize); 6]> = Vec::new();
    for j in 0..grid.n_v {
        for i in (0..grid.n_u).filter(|&i| keep(i, j)) {
            let [a, b, c, d] = [(2 * i, 2 * j), (2 * i + 2, 2 * j), (2 * i + 2, 2 * j + 2), (2 * i, 2 * j + 2)];
            let corners = if (i + j) % 2 == 0 { [[a, b, c], [a, c, d]] } else { [[a, b, d], [b, c, d]] };
            fine.extend(corners.map(|[p, q, r]| [p, q, r, middle(p, q), middle(q, r), middle(r, p)]));
        }
    }
    // Step 2: number corners first, both in the order of first use.
    let (mut number, mut points_m, mut n_corners) = (HashMap::new(), Vec::new(), 0);
    for range in [0..3, 3..6] {
        for t in &fine {
            for k in range.clone() {
                number.entry(t[k]).or_insert_with(|| {
                    let straight = SIDES[k.max(3) - 3].map(|i| map(uv(t[i])));
                    let chord = [0.5 * (straight[0][0] + straight[1][0]), 0.5 * (straight[0][1] + straight[1][1])];
                    points_m.push(if k < 3 || grid.curved { map(uv(t[k])) } else { chord });
                    points_m.len() as u32 - 1
                });
            }
        }
        if range.start == 0 {
            n_corners = points_m.len();
        }
    }
    let triangles: Vec<[u32; 6]> = fine.iter().map(|t| t.map(|p| number[&p])).collect();
    let regions = vec![0; triangles.len()];
    let mut mesh = Mesh { points_m, n_corners, triangles, regions, edges: Vec::new() };
    // Step 3: tags of the boundary sides.
    for side in mesh.boundary_sides() {
        let at = fine[side.element as usize][SIDES[side.side as usize][2]];
        let tag = match at {
            (_, 0) => BOTTOM,
            (i, _) if i == 2 * grid.n_u => RIGHT,
            (_, j) if j == 2 * grid.n_v => TOP,
            (0, _) => LEFT,
            _ => HOLE,
        };
        mesh.edges.push(TaggedEdge { tag, nodes: side.nodes, left: side.element, right: NO_ELEMENT });
    }
    mesh
}

/// Rectangle `[x0, x0 + width] × [y0, y0 + height]` with straight sides; `distortion` moves inner corners by up to that share of a cell.
pub fn rectangle(grid_cells: Grid, origin_m: [f64; 2], size_m: [f64; 2], distortion: f64) -> Mesh {
    let map = |uv: [f64; 2]| {
        let [u, v] = distorted(grid_cells, uv, distortion);
        [origin_m[0] + size_m[0] * u, origin_m[1] + size_m[1] * v]
    };
    grid(grid_cells, &map, &|_, _| true)
}

/// Moves points inside the unit square by a smooth, irregular-looking field that vanishes on the square's sides.
pub fn distorted(grid: Grid, [u, v]: [f64; 2], distortion: f64) -> [f64; 2] {
    let inside = (16.0 * u * (1.0 - u) * v * (1.0 - v)).powf(0.25).min(1.0);
    let shift = |phase: f64| distortion * inside * (37.0 * u + 61.0 * v + 23.0 * u * v + phase).sin();
    if inside <= 0.0 { [u, v] } else { [u + shift(0.0) / grid.n_u as f64, v + shift(1.7) / grid.n_v as f64] }
}

fn middle(a: (usize, usize), b: (usize, usize)) -> (usize, usize) {
    (usize::midpoint(a.0, b.0), usize::midpoint(a.1, b.1))
}
