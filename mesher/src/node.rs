//! Noding: all strands are split where they cross, touch or come closer than the tolerance, until they meet in common ends only.
use std::collections::{BTreeMap, HashMap};

use crate::curve::Strand;
use crate::error::MeshError;
use crate::geometry::{Point, between, distance, foot, orient};
use crate::snap::Grid;

/// Rounds after which noding gives up; two or three are usual.
const ROUNDS: usize = 60;

/// A line that runs along a segment.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord)]
pub(crate) struct Mark {
    pub(crate) tag: u32,
    /// Whether the line runs from the segment's first end to its second.
    pub(crate) forward: bool,
}

/// A segment that meets others in its ends only.
#[derive(Debug, Clone, PartialEq)]
pub(crate) struct Segment {
    /// First end has the smaller number.
    pub(crate) ends: [u32; 2],
    /// Lines on the segment, each tag once, in order of tags.
    pub(crate) marks: Vec<Mark>,
    pub(crate) open: bool,
    /// Circle that the segment is a chord of.
    pub(crate) arc: Option<u32>,
}

/// Result of noding, in local coordinates on the grid.
#[derive(Debug)]
pub(crate) struct Noded {
    pub(crate) points: Vec<Point>,
    pub(crate) segments: Vec<Segment>,
    /// Largest distance by which an end of a strand was moved.
    pub(crate) snapped_m: f64,
}

/// Splits strands at each other.
///
/// # Guarantees
/// - two segments share at most one end and nothing else; no point lies within the tolerance of a segment that it does not belong to;
/// - the union of the segments is that of the strands, moved by about a tolerance at most per round;
/// - the result depends on the order of the lines only through the numbering and the choice between points closer than the tolerance.
///
/// # Errors
/// [`MeshError::Noding`] if that is not reached in [`ROUNDS`] rounds.
pub(crate) fn node(strands: &[Strand], grid: &Grid, tolerance: f64) -> Result<Noded, MeshError> {
    let mut pool = Pool { grid: *grid, tolerance, points: Vec::new(), cells: HashMap::new() };
    let mut segments: Segments = BTreeMap::new();
    let mut snapped_m: f64 = 0.0;
    for strand in strands {
        let [a, b] = [strand.from, strand.to].map(|p| {
            let i = pool.vertex(p);
            snapped_m = snapped_m.max(distance(pool.points[i as usize], p));
            i
        });
        let mark = Mark { tag: strand.tag, forward: a < b };
        add(&mut segments, [a, b], &Traits { marks: vec![mark], open: strand.open, arc: strand.arc });
    }
    for _ in 0..ROUNDS {
        let list: Vec<([u32; 2], Traits)> = segments.into_iter().collect();
        let splits = find_splits(&list, &mut pool);
        if splits.iter().all(Vec::is_empty) {
            return Ok(compact(list, &pool.points, snapped_m));
        }
        segments = apply_splits(&list, splits, &pool.points);
    }
    let place = segments.keys().next().map_or([0.0, 0.0], |ends| grid.global(pool.points[ends[0] as usize]));
    Err(MeshError::Noding { tolerance_m: tolerance, x_m: place[0], y_m: place[1] })
}

type Segments = BTreeMap<[u32; 2], Traits>;

#[derive(Debug, Clone)]
struct Traits {
    marks: Vec<Mark>,
    open: bool,
    arc: Option<u32>,
}

/// Points on the grid, found by cells of one tolerance.
struct Pool {
    grid: Grid,
    tolerance: f64,
    points: Vec<Point>,
    cells: HashMap<[i64; 2], Vec<u32>>,
}

impl Pool {
    /// The nearest point within the tolerance, or a new one.
    fn vertex(&mut self, p: Point) -> u32 {
        let p = self.grid.round(p);
        let cell = p.map(|v| (v / self.tolerance).floor() as i64);
        let mut best: Option<(f64, u32)> = None;
        for dx in -1..=1 {
            for dy in -1..=1 {
                for &i in self.cells.get(&[cell[0] + dx, cell[1] + dy]).into_iter().flatten() {
                    let d = distance(self.points[i as usize], p);
                    if d <= self.tolerance && best.is_none_or(|b| (d, i) < b) {
                        best = Some((d, i));
                    }
                }
            }
        }
        best.map_or_else(
            || {
                self.points.push(p);
                let i = self.points.len() as u32 - 1;
                self.cells.entry(cell).or_default().push(i);
                i
            },
            |(_, i)| i,
        )
    }
}

/// Adds a segment, or its lines to the segment already there. `ends` in the direction of the marks with `forward` set for `ends[0] < ends[1]`.
fn add(segments: &mut Segments, ends: [u32; 2], traits: &Traits) {
    if ends[0] == ends[1] {
        return;
    }
    let key = [ends[0].min(ends[1]), ends[0].max(ends[1])];
    let Some(there) = segments.get_mut(&key) else {
        segments.insert(key, traits.clone());
        return;
    };
    for mark in &traits.marks {
        if there.marks.iter().all(|m| m.tag != mark.tag) {
            there.marks.push(*mark);
        }
    }
    there.marks.sort_unstable();
    there.open |= traits.open;
    there.arc = there.arc.or(traits.arc);
}

/// For every segment the points that split it, found by a sweep in x over boxes widened by the tolerance.
fn find_splits(list: &[([u32; 2], Traits)], pool: &mut Pool) -> Vec<Vec<u32>> {
    let tolerance = pool.tolerance;
    let boxes: Vec<[f64; 4]> = list
        .iter()
        .map(|(ends, _)| {
            let [p, q] = ends.map(|i| pool.points[i as usize]);
            let (low, high) = ([p[0].min(q[0]), p[1].min(q[1])], [p[0].max(q[0]), p[1].max(q[1])]);
            [low[0] - tolerance, low[1] - tolerance, high[0] + tolerance, high[1] + tolerance]
        })
        .collect();
    let mut order: Vec<usize> = (0..list.len()).collect();
    order.sort_by(|&i, &j| boxes[i][0].total_cmp(&boxes[j][0]).then(i.cmp(&j)));
    let mut splits = vec![Vec::new(); list.len()];
    for (rank, &i) in order.iter().enumerate() {
        for &j in &order[rank + 1..] {
            if boxes[i][2] < boxes[j][0] {
                break;
            }
            if boxes[j][1] <= boxes[i][3] && boxes[i][1] <= boxes[j][3] {
                let (of_i, of_j) = meet(list[i].0, list[j].0, pool);
                splits[i].extend(of_i.into_iter().flatten());
                splits[j].extend(of_j.into_iter().flatten());
            }
        }
    }
    splits
}

type Splits = [Option<u32>; 2];

/// Points in which two segments split each other: ends close to the other segment, else their crossing.
fn meet(first: [u32; 2], second: [u32; 2], pool: &mut Pool) -> (Splits, Splits) {
    let touching = |ends: [u32; 2], of: [u32; 2], pool: &Pool| {
        of.map(|v| {
            if ends.contains(&v) {
                return None;
            }
            let (t, off) = foot(pool.points[v as usize], pool.points[ends[0] as usize], pool.points[ends[1] as usize]);
            (0.0 < t && t < 1.0 && off <= pool.tolerance).then_some(v)
        })
    };
    let (of_first, of_second) = (touching(first, second, pool), touching(second, first, pool));
    let share_an_end = first.iter().any(|v| second.contains(v));
    if share_an_end || of_first.iter().chain(&of_second).any(Option::is_some) {
        return (of_first, of_second);
    }
    let ([a, b], [c, d]) = (first.map(|i| pool.points[i as usize]), second.map(|i| pool.points[i as usize]));
    let (c_side, d_side, a_side, b_side) = (orient(a, b, c), orient(a, b, d), orient(c, d, a), orient(c, d, b));
    let crosses = (c_side < 0.0) != (d_side < 0.0) && (a_side < 0.0) != (b_side < 0.0);
    if !crosses {
        return (of_first, of_second);
    }
    let x = pool.vertex(between(a, b, a_side / (a_side - b_side)));
    ([(!first.contains(&x)).then_some(x), None], [(!second.contains(&x)).then_some(x), None])
}

fn apply_splits(list: &[([u32; 2], Traits)], splits: Vec<Vec<u32>>, points: &[Point]) -> Segments {
    let mut out = Segments::new();
    for ((ends, traits), mut on) in list.iter().zip(splits) {
        let [a, b] = ends.map(|i| points[i as usize]);
        let at = |v: u32| foot(points[v as usize], a, b).0;
        on.sort_by(|&v, &w| at(v).total_cmp(&at(w)).then(v.cmp(&w)));
        on.dedup();
        on.push(ends[1]);
        let mut from = ends[0];
        for to in on {
            // Marks are relative to the order of the numbers of the ends.
            let turned = to < from;
            let marks = traits.marks.iter().map(|m| Mark { tag: m.tag, forward: m.forward != turned }).collect();
            add(&mut out, [from, to], &Traits { marks, ..traits.clone() });
            from = to;
        }
    }
    out
}

/// Numbers only the points that are still in use.
fn compact(list: Vec<([u32; 2], Traits)>, points: &[Point], snapped_m: f64) -> Noded {
    let mut used = vec![false; points.len()];
    for (ends, _) in &list {
        for &i in ends {
            used[i as usize] = true;
        }
    }
    let mut number = vec![0; points.len()];
    let mut kept = Vec::new();
    for (i, p) in points.iter().enumerate().filter(|(i, _)| used[*i]) {
        number[i] = kept.len() as u32;
        kept.push(*p);
    }
    let renumber =
        |(ends, t): ([u32; 2], Traits)| Segment { ends: ends.map(|i| number[i as usize]), marks: t.marks, open: t.open, arc: t.arc };
    Noded { points: kept, segments: list.into_iter().map(renumber).collect(), snapped_m }
}
