//! Six-node triangles from three-node ones: mid-side nodes, bent onto arcs, and tagged edges.
use fem_core::mesh::{Mesh, NO_ELEMENT, TaggedEdge};

use crate::curve::middle_on_arc;
use crate::geometry::{Point, middle};
use crate::node::Segment;
use crate::outline::Arc;
use crate::pieces::Piece;
use crate::refine::runs_forward;
use crate::snap::Grid;
use crate::triangulation::{NEXT, NONE, Triangulation, place, side};

/// A bent side is kept only if the Jacobian of its triangles stays above this share of that of the straight ones.
const JACOBIAN: f64 = 0.2;

/// What the sides of the triangulation stand for.
#[derive(Debug, Clone, Copy)]
pub(crate) struct Origins<'a> {
    pub(crate) pieces: &'a [Piece],
    pub(crate) segments: &'a [Segment],
    pub(crate) arcs: &'a [Arc],
}

/// Makes the mesh. Returns it with the number of sides on arcs left straight.
pub(crate) fn upgrade(of: &Triangulation, origins: Origins<'_>, grid: &Grid) -> (Mesh, usize) {
    let n_corners = of.points.len();
    let mut points = of.points.clone();
    points.reserve(3 * of.corners.len() / 2 + 64);
    let mut triangles = Vec::with_capacity(of.corners.len());
    let mut bent = Vec::new();
    // Step 1: a node for every side, made by the triangle that comes first.
    for (t, corners) in of.corners.iter().enumerate() {
        let mut nodes = [corners[0], corners[1], corners[2], 0, 0, 0];
        for k in 0..3 {
            let at = side(t as u32, k);
            let twin = of.twin(at);
            if twin != NONE && twin < at {
                let (other, l) = place(twin);
                let made: &[u32; 6] = &triangles[other];
                nodes[3 + k] = made[3 + l];
                continue;
            }
            nodes[3 + k] = points.len() as u32;
            let [a, b] = [corners[k], corners[NEXT[k]]].map(|v| of.points[v as usize]);
            let arc = origins.segment(of.piece(at)).and_then(|s| s.arc);
            if arc.is_some() {
                bent.push((t, k));
            }
            points.push(arc.map_or_else(|| middle(a, b), |i| middle_on_arc(a, b, &origins.arcs[i as usize])));
        }
        triangles.push(nodes);
    }
    // Step 2: bent sides that would fold a triangle are straightened.
    let n_straightened = straighten(of, &triangles, &bent, &mut points);
    // Step 3: the caller's coordinates, tagged edges.
    let edges = tagged_edges(of, origins, &triangles);
    let points_m = points.into_iter().map(|p| grid.global(p)).collect();
    (Mesh { points_m, n_corners, triangles, regions: of.regions.clone(), edges }, n_straightened)
}

impl<'a> Origins<'a> {
    fn segment(&self, piece: u32) -> Option<&'a Segment> {
        self.pieces.get(piece as usize).map(|p| &self.segments[p.segment as usize])
    }
}

fn straighten(of: &Triangulation, triangles: &[[u32; 6]], bent: &[(usize, usize)], points: &mut [Point]) -> usize {
    let mut n = 0;
    for &(t, k) in bent {
        let twin = of.twin(side(t as u32, k));
        let other = if twin == NONE { t } else { place(twin).0 };
        let folds = [t, other].into_iter().any(|t| {
            let p = triangles[t].map(|v| points[v as usize]);
            fem_core::mesh::quality::jacobian_bound_m2(&p) <= JACOBIAN * of.measures(t).0
        });
        if folds {
            let nodes = triangles[t];
            let [a, b] = [nodes[k], nodes[NEXT[k]]].map(|v| points[v as usize]);
            points[nodes[3 + k] as usize] = middle(a, b);
            n += 1;
        }
    }
    n
}

/// One edge a side and tag, ordered by tag; the two faces of a slit have one each.
fn tagged_edges(of: &Triangulation, origins: Origins<'_>, triangles: &[[u32; 6]]) -> Vec<TaggedEdge> {
    let mut edges = Vec::new();
    for (t, nodes) in triangles.iter().enumerate() {
        for k in 0..3 {
            let at = side(t as u32, k);
            let twin = of.twin(at);
            let Some(segment) = origins.segment(of.piece(at)) else { continue };
            if twin != NONE && twin < at {
                continue;
            }
            let [start, end] = segment.ends.map(|v| of.points[v as usize]);
            let along = runs_forward(of, at, start, end);
            let (near, far) = (t as u32, if twin == NONE { NO_ELEMENT } else { twin >> 2 });
            let (a, b, m) = (nodes[k], nodes[NEXT[k]], nodes[3 + k]);
            edges.extend(segment.marks.iter().map(|mark| {
                if mark.forward == along {
                    TaggedEdge { tag: mark.tag, nodes: [a, b, m], left: near, right: far }
                } else {
                    TaggedEdge { tag: mark.tag, nodes: [b, a, m], left: far, right: near }
                }
            }));
        }
    }
    edges.sort_by_key(|e| e.tag);
    edges
}
