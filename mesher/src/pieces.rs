//! Cuts segments into pieces of the wanted size before the triangulation.
use crate::geometry::{Point, distance};
use crate::node::{Noded, Segment};
use crate::size::SizeIndex;
use crate::snap::{STEPS, lattice};

/// Step of the integral along a segment in local sizes: a field that grows by 0.5 per distance is followed to 2 %.
const STEP: f64 = 0.5;

/// A part of a segment that is a side of the triangulation; it reaches from lattice point `from` to `to` of the segment.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(crate) struct Piece {
    pub(crate) segment: u32,
    pub(crate) from: u32,
    pub(crate) to: u32,
}

/// Points and pieces ready to be triangulated.
#[derive(Debug)]
pub(crate) struct Pieces {
    /// The noded points, then the points inside segments.
    pub(crate) points: Vec<Point>,
    /// Segment of each point inside one; [`u32::MAX`] for noded points.
    pub(crate) segment_of: Vec<u32>,
    pub(crate) parts: Vec<Piece>,
    /// Point numbers of the ends of each piece, in the direction of its segment.
    pub(crate) ends: Vec<[u32; 2]>,
}

/// Cuts every segment so that pieces have the wanted size; a slit of a single segment gets two pieces, else it could not open.
pub(crate) fn cut(noded: &Noded, size: &SizeIndex) -> Pieces {
    let mut out =
        Pieces { points: noded.points.clone(), segment_of: vec![u32::MAX; noded.points.len()], parts: Vec::new(), ends: Vec::new() };
    let lonely = lonely_slits(noded);
    for (i, segment) in noded.segments.iter().enumerate() {
        let [a, b] = segment.ends.map(|v| noded.points[v as usize]);
        let mut cuts = cuts_by_size(a, b, size);
        if cuts.is_empty() && lonely[i] {
            cuts.push(STEPS / 2);
        }
        let (mut from, mut start) = (0, segment.ends[0]);
        for j in cuts {
            let end = out.points.len() as u32;
            out.points.push(lattice(a, b, j));
            out.segment_of.push(i as u32);
            out.push(i, [from, j], [start, end]);
            (from, start) = (j, end);
        }
        out.push(i, [from, STEPS], [start, segment.ends[1]]);
    }
    out
}

impl Pieces {
    fn push(&mut self, segment: usize, [from, to]: [u32; 2], ends: [u32; 2]) {
        self.parts.push(Piece { segment: segment as u32, from, to });
        self.ends.push(ends);
    }
}

/// Open segments that no other open segment continues at either end.
fn lonely_slits(noded: &Noded) -> Vec<bool> {
    let mut n_open = vec![0u32; noded.points.len()];
    for segment in noded.segments.iter().filter(|s| s.open) {
        for &v in &segment.ends {
            n_open[v as usize] += 1;
        }
    }
    let is_lonely = |s: &Segment| s.open && s.ends.iter().all(|&v| n_open[v as usize] == 1);
    noded.segments.iter().map(is_lonely).collect()
}

/// Lattice points inside a segment that share the integral of `1 / h` along it evenly (docs/theory.md eq. (2.2)).
fn cuts_by_size(a: Point, b: Point, size: &SizeIndex) -> Vec<u32> {
    let length = distance(a, b);
    let mut h = size.size(a);
    if length <= h.min(size.size(b)) {
        return Vec::new();
    }
    // Step 1: the integral as a table over the parameter.
    let mut table = vec![(0.0, 0.0)];
    let (mut t, mut sum) = (0.0, 0.0);
    while t < 1.0 {
        let step = (STEP * h / length).min(1.0 - t);
        let next = if 1.0 - t - step < 1e-9 { 1.0 } else { t + step };
        let h_next = size.size([a[0] + next * (b[0] - a[0]), a[1] + next * (b[1] - a[1])]);
        sum += 0.5 * (next - t) * length * (1.0 / h + 1.0 / h_next);
        (t, h) = (next, h_next);
        table.push((t, sum));
    }
    // Step 2: even shares of it.
    let n = sum.round().max(1.0);
    let mut cuts = Vec::new();
    let mut k = 0;
    for i in 1..n as usize {
        let target = sum * i as f64 / n;
        while table[k + 1].1 < target {
            k += 1;
        }
        let ((t0, s0), (t1, s1)) = (table[k], table[k + 1]);
        let at = t0 + (t1 - t0) * (target - s0) / (s1 - s0);
        cuts.push((at * f64::from(STEPS)).round() as u32);
    }
    cuts.dedup();
    cuts.retain(|&j| 0 < j && j < STEPS);
    cuts
}
