//! Patches: areas between lines. Each is labeled once, void is dropped.
use crate::geometry::Point;
use crate::node::{Noded, Segment};
use crate::params::ThinPatch;
use crate::pieces::Pieces;
use crate::snap::Grid;
use crate::triangulation::{NONE, Triangulation, place, side};

/// The body's triangulation and what goes with it.
#[derive(Debug)]
pub(crate) struct Body {
    pub(crate) triangulation: Triangulation,
    /// As in [`Pieces`], for the vertices that are left.
    pub(crate) segment_of: Vec<u32>,
    /// Segments with the numbers of the vertices that are left; [`NONE`] for those that are not.
    pub(crate) segments: Vec<Segment>,
    pub(crate) n_patches: usize,
    pub(crate) thin: Vec<ThinPatch>,
}

/// Labels every patch by a point well inside it (the center of its fattest triangle) and keeps those with a region.
///
/// What can be reached from outside the hull without crossing a piece is void without being asked for. Returns `None` if nothing is left.
pub(crate) fn carve(all: &Triangulation, input: &Noded, cut: &Pieces, tolerance: f64, region: &Region<'_>) -> Option<Body> {
    // Step 1: number the patches; 0 is the outside.
    let (patch, n) = flood(all);
    // Step 2: the fattest triangle of each.
    let mut fattest: Vec<(f64, u32)> = vec![(-1.0, NONE); n as usize];
    for (t, &p) in patch.iter().enumerate() {
        let (twice_area, perimeter) = all.measures(t);
        let inradius = twice_area / perimeter;
        if fattest[p as usize].0 < inradius {
            fattest[p as usize] = (inradius, t as u32);
        }
    }
    // Step 3: ask for their regions.
    let mut label = vec![None; n as usize];
    let (mut n_patches, mut thin) = (0, Vec::new());
    for p in 1..n as usize {
        let (inradius_m, t) = fattest[p];
        let at_m = region.grid.global(all.center(t as usize));
        label[p] = (region.label)(at_m);
        if label[p].is_some() {
            n_patches += 1;
            if inradius_m < tolerance {
                thin.push(ThinPatch { at_m, inradius_m });
            }
        }
    }
    // Step 4: keep the body only.
    let labels: Vec<Option<u32>> = patch.iter().map(|&p| label[p as usize]).collect();
    let (triangulation, vertex) = prune(all, &labels);
    let kept = |&(v, _): &(usize, &u32)| vertex[v] != NONE;
    let segment_of = cut.segment_of.iter().enumerate().filter(kept).map(|(_, &s)| s).collect();
    let renumber = |s: &Segment| Segment { ends: s.ends.map(|v| vertex[v as usize]), ..s.clone() };
    let segments = input.segments.iter().map(renumber).collect();
    (0 < triangulation.n_triangles()).then_some(Body { triangulation, segment_of, segments, n_patches, thin })
}

/// How patches are labeled.
pub(crate) struct Region<'a> {
    /// Label of the patch with a point, `None` = void; the point in the caller's coordinates.
    pub(crate) label: &'a dyn Fn(Point) -> Option<u32>,
    pub(crate) grid: Grid,
}

/// Number of the patch of every triangle, and how many there are with the outside.
fn flood(all: &Triangulation) -> (Vec<u32>, u32) {
    let mut patch = vec![NONE; all.corners.len()];
    let mut stack = Vec::new();
    for t in 0..all.n_triangles() {
        if (0..3).any(|k| all.twin(side(t, k)) == NONE && all.piece(side(t, k)) == NONE) {
            stack.push(t);
        }
    }
    spread(all, &mut patch, stack, 0);
    let mut n = 1;
    for t in 0..all.n_triangles() {
        if patch[t as usize] == NONE {
            spread(all, &mut patch, vec![t], n);
            n += 1;
        }
    }
    (patch, n)
}

fn spread(all: &Triangulation, patch: &mut [u32], mut stack: Vec<u32>, number: u32) {
    while let Some(t) = stack.pop() {
        if patch[t as usize] != NONE {
            continue;
        }
        patch[t as usize] = number;
        for k in 0..3 {
            let twin = all.twin(side(t, k));
            if twin != NONE && all.piece(side(t, k)) == NONE {
                stack.push(twin >> 2);
            }
        }
    }
}

/// The triangles with a label and their vertices; the new number of every vertex, [`NONE`] where it has no triangle left.
fn prune(all: &Triangulation, labels: &[Option<u32>]) -> (Triangulation, Vec<u32>) {
    let mut number = vec![NONE; labels.len()];
    let mut vertex = vec![NONE; all.points.len()];
    for (new, (t, _)) in labels.iter().enumerate().filter(|(_, label)| label.is_some()).enumerate() {
        number[t] = new as u32;
        for &v in &all.corners[t] {
            vertex[v as usize] = 0;
        }
    }
    let mut kept = Triangulation { side_of_piece: vec![NONE; all.side_of_piece.len()], ..Triangulation::default() };
    for (v, new) in vertex.iter_mut().enumerate().filter(|(_, new)| **new == 0) {
        *new = kept.points.len() as u32;
        kept.points.push(all.points[v]);
    }
    for (t, label) in labels.iter().enumerate() {
        let Some(region) = label else { continue };
        let beyond = [0, 1, 2].map(|k| {
            let mut b = all.beyond(side(t as u32, k));
            if b.twin != NONE {
                let (other, l) = place(b.twin);
                b.twin = if number[other] == NONE { NONE } else { side(number[other], l) };
            }
            b
        });
        kept.push(all.corners[t].map(|v| vertex[v as usize]), beyond, *region);
    }
    (kept, vertex)
}
