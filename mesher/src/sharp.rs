//! Sharp corners: noded points at which two segments enclose less than 60 degrees of the body.
//!
//! No mesh can keep a smallest angle above the input's own. Around such a corner pieces end on circles whose radii are powers of two, so that
//! pieces of all its segments end at the same distance and do not disturb each other (Ruppert 1995; Shewchuk 2002).
use std::f64::consts::{FRAC_PI_3, TAU};

use crate::geometry::{distance, distance_squared, minus};
use crate::node::Segment;
use crate::snap::STEPS;
use crate::triangulation::{NEXT, NONE, PREVIOUS, Triangulation, side};

/// Relative difference of two distances from a corner that still counts as the same circle, beside the steps of the lattice.
const SAME_CIRCLE: f64 = 1e-3;

/// Whether each vertex of the body is a sharp corner.
pub(crate) fn sharp_corners(body: &Triangulation, segment_of: &[u32]) -> Vec<bool> {
    // Step 1: for every noded point the directions of its pieces, and whether the body lies on their left.
    let mut directions: Vec<(u32, f64, bool)> = Vec::new();
    for &at in body.side_of_piece.iter().filter(|&&at| at != NONE) {
        let [a, b] = body.ends(at);
        for (from, to, body_on_left) in [(a, b, true), (b, a, body.twin(at) != NONE)] {
            if segment_of[from as usize] == NONE {
                let u = minus(body.points[to as usize], body.points[from as usize]);
                directions.push((from, u[1].atan2(u[0]), body_on_left));
            }
        }
    }
    directions.sort_by(|x, y| x.0.cmp(&y.0).then(x.1.total_cmp(&y.1)));
    // Step 2: the wedges between one direction and the next.
    let mut sharp = vec![false; body.points.len()];
    for fan in directions.chunk_by(|x, y| x.0 == y.0).filter(|fan| 1 < fan.len()) {
        for (i, (vertex, angle, body_on_left)) in fan.iter().enumerate() {
            let next = fan[(i + 1) % fan.len()].1;
            let wedge = if next <= *angle { next - angle + TAU } else { next - angle };
            if *body_on_left && wedge < FRAC_PI_3 - 1e-9 {
                sharp[*vertex as usize] = true;
            }
        }
    }
    sharp
}

/// What is needed to tell whether a triangle fills a sharp corner.
#[derive(Debug, Clone, Copy)]
pub(crate) struct Corners<'a> {
    pub(crate) segments: &'a [Segment],
    /// Segment that each vertex lies inside of, [`NONE`] for others.
    pub(crate) segment_of: &'a [u32],
    pub(crate) sharp: &'a [bool],
}

impl Corners<'_> {
    /// Whether a small angle of this triangle is owed to a sharp input corner: it is the corner's own angle, or the shortest side joins two
    /// segments of the corner on the same circle around it.
    pub(crate) fn fills_a_corner(&self, of: &Triangulation, triangle: usize) -> bool {
        let points = of.corner_points(triangle);
        let length = |k: usize| distance_squared(points[k], points[NEXT[k]]);
        let shortest = if length(0) <= length(1) && length(0) <= length(2) {
            0
        } else if length(1) <= length(2) {
            1
        } else {
            2
        };
        let t = triangle as u32;
        let opposite = of.corners[triangle][PREVIOUS[shortest]];
        let between_pieces = of.piece(side(t, NEXT[shortest])) != NONE && of.piece(side(t, PREVIOUS[shortest])) != NONE;
        if between_pieces && self.is_sharp(opposite) {
            return true;
        }
        let [u, v] = of.ends(side(t, shortest));
        self.on_one_circle(of, u, v)
    }

    fn is_sharp(&self, v: u32) -> bool {
        self.sharp.get(v as usize).copied().unwrap_or(false)
    }

    fn on_one_circle(&self, of: &Triangulation, u: u32, v: u32) -> bool {
        let (first, second) = (self.segment_of[u as usize], self.segment_of[v as usize]);
        if first == NONE || second == NONE || first == second {
            return false;
        }
        let (first, second) = (&self.segments[first as usize], &self.segments[second as usize]);
        let Some(&corner) = first.ends.iter().find(|end| second.ends.contains(end) && self.is_sharp(**end)) else { return false };
        let [o, p, q] = [corner, u, v].map(|i| of.points[i as usize]);
        let (r, s) = (distance(o, p), distance(o, q));
        let step = |segment: &Segment| {
            let [a, b] = segment.ends.map(|i| of.points[i as usize]);
            distance(a, b) / f64::from(STEPS)
        };
        (r - s).abs() <= SAME_CIRCLE * r + step(first) + step(second)
    }
}
