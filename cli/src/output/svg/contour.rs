//! Filled contours: one path for each level, made by cancelling the edges that two pieces share.
//!
//! The region where a value is at least a level is the union of clipped triangles. In whole pixel units every inner edge occurs once
//! in each direction and cancels; what is left are the outlines. Painting the levels from low to high fills the bands without gaps.
use std::collections::BTreeMap;
use std::fmt::Write;

use super::frame::Frame;

/// Units of a path in one pixel; paths are drawn in a group scaled by its inverse.
pub const UNITS_PER_PX: f64 = 10.0;
/// Outlines may leave out points that lie closer than this to the line, in units.
const TOLERANCE_UNITS: f64 = 2.5;
/// Longest stretch that is replaced by one line, in points.
const LONGEST_STRETCH: usize = 40;

/// A triangle with a value at each corner.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Piece {
    /// Corners, m, counterclockwise.
    pub at_m: [[f64; 2]; 3],
    /// Values.
    pub values: [f64; 3],
}

type Unit = [i64; 2];

/// The region of `pieces` where the value is at least `level`, as path data in units of a tenth of a pixel.
/// Empty where there is none.
pub fn region_at_least(pieces: &[Piece], level: f64, frame: &Frame) -> String {
    let mut edges = Edges::default();
    for piece in pieces {
        let corners: Vec<Unit> = clip(piece, level).iter().map(|p| to_units(frame.px(*p))).collect();
        edges.add_polygon(&corners);
    }
    path(&edges.loops())
}

/// The outline of `pieces`, as path data.
pub fn outline(pieces: &[Piece], frame: &Frame) -> String {
    region_at_least(pieces, f64::NEG_INFINITY, frame)
}

/// The part of a triangle where the value is at least `level`, m.
fn clip(piece: &Piece, level: f64) -> Vec<[f64; 2]> {
    let mut kept = Vec::with_capacity(4);
    for i in 0..3 {
        let j = (i + 1) % 3;
        if level <= piece.values[i] {
            kept.push(piece.at_m[i]);
        }
        if (level <= piece.values[i]) != (level <= piece.values[j]) {
            kept.push(crossing([piece.at_m[i], piece.at_m[j]], [piece.values[i], piece.values[j]], level));
        }
    }
    kept
}

/// Where the value crosses the level on an edge; the same bits from both sides of the edge.
fn crossing([a, b]: [[f64; 2]; 2], [va, vb]: [f64; 2], level: f64) -> [f64; 2] {
    let ((a, va), (b, vb)) = if a < b { ((a, va), (b, vb)) } else { ((b, vb), (a, va)) };
    let t = (level - va) / (vb - va);
    [a[0] + (b[0] - a[0]) * t, a[1] + (b[1] - a[1]) * t]
}

fn to_units(px: [f64; 2]) -> Unit {
    px.map(|value| (value * UNITS_PER_PX).round() as i64)
}

/// Directed edges with how often each occurs more than its reverse.
#[derive(Debug, Default)]
struct Edges {
    count: BTreeMap<(Unit, Unit), i32>,
}

impl Edges {
    fn add_polygon(&mut self, corners: &[Unit]) {
        for (i, a) in corners.iter().enumerate() {
            let b = corners[(i + 1) % corners.len()];
            if *a < b {
                self.add((*a, b), 1);
            } else if b < *a {
                self.add((b, *a), -1);
            }
        }
    }

    fn add(&mut self, edge: (Unit, Unit), sign: i32) {
        let count = self.count.entry(edge).or_insert(0);
        *count += sign;
        if *count == 0 {
            self.count.remove(&edge);
        }
    }

    /// Closed outlines; the order at points where several meet does not matter for an even-odd fill.
    fn loops(self) -> Vec<Vec<Unit>> {
        let mut next: BTreeMap<Unit, Vec<Unit>> = BTreeMap::new();
        for ((a, b), count) in self.count {
            let (from, to) = if 0 < count { (a, b) } else { (b, a) };
            next.entry(from).or_default().extend(std::iter::repeat_n(to, count.unsigned_abs() as usize));
        }
        let mut loops = Vec::new();
        while let Some(start) = next.keys().next().copied() {
            let mut points = vec![start];
            let mut at = start;
            while let Some(ends) = next.get_mut(&at) {
                let end = ends.pop();
                if ends.is_empty() {
                    next.remove(&at);
                }
                match end {
                    Some(end) if end != start => points.push(end),
                    _ => break,
                }
                at = *points.last().unwrap_or(&start);
            }
            if 3 <= points.len() {
                points.push(start);
                let mut kept = simplified(&points);
                kept.pop();
                loops.push(kept);
            }
        }
        loops
    }
}

/// Leaves out points that lie within the tolerance of the line between those kept.
fn simplified(points: &[Unit]) -> Vec<Unit> {
    let mut kept = vec![points[0]];
    let mut from = 0;
    while from + 1 < points.len() {
        let mut to = from + 1;
        while to + 1 < points.len() && to - from < LONGEST_STRETCH && is_straight(&points[from..=to + 1]) {
            to += 1;
        }
        kept.push(points[to]);
        from = to;
    }
    kept
}

fn is_straight(stretch: &[Unit]) -> bool {
    let (a, b) = (stretch[0], stretch[stretch.len() - 1]);
    let d = [(b[0] - a[0]) as f64, (b[1] - a[1]) as f64];
    let length = d[0].hypot(d[1]);
    stretch.iter().all(|p| {
        let q = [(p[0] - a[0]) as f64, (p[1] - a[1]) as f64];
        let along = (q[0] * d[0] + q[1] * d[1]) / length.max(1e-9);
        let off = if length < 1e-9 { q[0].hypot(q[1]) } else { (q[0] * d[1] - q[1] * d[0]).abs() / length };
        off <= TOLERANCE_UNITS && -TOLERANCE_UNITS <= along && along <= length + TOLERANCE_UNITS
    })
}

fn path(loops: &[Vec<Unit>]) -> String {
    let mut out = String::new();
    for points in loops.iter().filter(|points| 3 <= points.len()) {
        let mut at = points[0];
        let _ = write!(out, "M{} {}l", at[0], at[1]);
        for (i, point) in points[1..].iter().enumerate() {
            let [dx, dy] = [point[0] - at[0], point[1] - at[1]];
            let gap = if i == 0 || dx < 0 { "" } else { " " };
            let between = if dy < 0 { "" } else { " " };
            let _ = write!(out, "{gap}{dx}{between}{dy}");
            at = *point;
        }
        out.push('z');
    }
    out
}

#[cfg(test)]
mod tests {
    use super::{Frame, Piece, outline, region_at_least};

    /// One pixel a metre, 100 px high.
    fn frame() -> Frame {
        Frame { x_m: [0.0, 100.0], z_m: [0.0, 100.0], left: 0.0, top: 0.0, px_per_m: 1.0 }
    }

    /// A square of n x n cells whose value is x.
    fn square(n: u32) -> Vec<Piece> {
        let side = 100.0 / f64::from(n);
        let mut pieces = Vec::new();
        for i in 0..n {
            for j in 0..n {
                let at = |di: u32, dj: u32| [f64::from(i + di) * side, f64::from(j + dj) * side];
                for corners in [[at(0, 0), at(1, 0), at(1, 1)], [at(0, 0), at(1, 1), at(0, 1)]] {
                    pieces.push(Piece { at_m: corners, values: corners.map(|p| p[0]) });
                }
            }
        }
        pieces
    }

    #[test]
    fn inner_edges_cancel_and_the_outline_stays() {
        assert_eq!(outline(&square(7), &frame()), "M0 0l0 1000 1000 0 0-1000z");
    }

    #[test]
    fn the_level_cuts_where_the_value_is() {
        // 33.3 m lies inside a column of cells; the region runs from there to the right edge.
        assert_eq!(region_at_least(&square(7), 33.3, &frame()), "M333 0l0 1000 667 0 0-1000z");
        assert_eq!(region_at_least(&square(7), 101.0, &frame()), "");
    }

    #[test]
    fn two_layers_keep_their_own_values_at_a_contact() {
        let mut pieces = square(2);
        for piece in &mut pieces {
            let above = piece.at_m.iter().map(|p| p[1]).sum::<f64>() > 150.0;
            piece.values = [if above { 1.0 } else { 0.0 }; 3];
        }
        assert_eq!(region_at_least(&pieces, 0.5, &frame()), "M0 0l0 500 1000 0 0-500z");
    }
}
