//! Arcs: chords for noding before the mesh is made, nodes back onto the circle after.
use std::f64::consts::PI;

use crate::geometry::{Point, cross, distance, middle, minus};
use crate::outline::{Arc, Outline};
use crate::size::SizeIndex;
use crate::snap::Grid;

/// Widest angle of a chord in rad: a chord's sagitta is then under 3.3 % of its length.
const CHORD_RAD: f64 = PI / 12.0;
/// Shortest chord in tolerances, so that noding does not merge its ends.
const CHORD_TOLERANCES: f64 = 3.0;

/// A straight segment of the input in local coordinates, before noding.
#[derive(Debug, Clone, Copy)]
pub(crate) struct Strand {
    pub(crate) from: Point,
    pub(crate) to: Point,
    pub(crate) tag: u32,
    pub(crate) open: bool,
    /// Place in the list of arcs of the circle that the strand is a chord of.
    pub(crate) arc: Option<u32>,
}

/// Straight segments and chords of all lines, and the circles of the chords, in local coordinates.
///
/// An arc is broken where another line starts, ends or crosses it, so that both meet in a point of the circle; in between, its chords have
/// the wanted size. Arcs with the same ends and circle get the same chords in either direction. `breaks_at` are further points of circles at
/// which to break arcs.
pub(crate) fn strands(outline: &Outline, grid: &Grid, size: &SizeIndex, tolerance: f64, breaks_at: &[Point]) -> (Vec<Strand>, Vec<Arc>) {
    let mut straight = Vec::new();
    let mut curved = Vec::new();
    for line in &outline.lines {
        for i in 0..line.n_segments() {
            let (from, to, arc) = line.segment(i);
            let arc = arc.map(|a| Arc { center_m: grid.local(a.center_m), ..a });
            let strand = Strand { from: grid.local(from), to: grid.local(to), tag: line.tag, open: line.open, arc: None };
            match arc {
                Some(arc) => curved.push((strand, arc)),
                None => straight.push(strand),
            }
        }
    }
    let mut strands = straight.clone();
    let mut arcs = Vec::new();
    for (strand, arc) in &curved {
        let reversed = strand.to < strand.from;
        let (from, to) = if reversed { (strand.to, strand.from) } else { (strand.from, strand.to) };
        let sweep = Sweep::new(from, to, *arc);
        let ends = straight.iter().chain(curved.iter().map(|(s, _)| s)).flat_map(|s| [s.from, s.to]);
        let breaks = breaks(&sweep, ends.chain(breaks_at.iter().copied()), &straight, tolerance);
        let mut points = vec![from];
        for span in breaks.windows(2) {
            let n = n_chords(&sweep, span[0], span[1], size, tolerance);
            points.extend((1..=n).map(|k| sweep.point(span[0] + (span[1] - span[0]) * k as f64 / n as f64)));
        }
        if let Some(last) = points.last_mut() {
            *last = to;
        }
        let number = arcs.len() as u32;
        arcs.push(*arc);
        for pair in points.windows(2) {
            let (from, to) = if reversed { (pair[1], pair[0]) } else { (pair[0], pair[1]) };
            strands.push(Strand { from, to, arc: Some(number), ..*strand });
        }
    }
    (strands, arcs)
}

/// An arc by its angle from the start.
#[derive(Debug, Clone, Copy)]
struct Sweep {
    arc: Arc,
    start_rad: f64,
    turn_rad: f64,
    radii: [f64; 2],
}

impl Sweep {
    fn new(from: Point, to: Point, arc: Arc) -> Self {
        let (u, v) = (minus(from, arc.center_m), minus(to, arc.center_m));
        let turn_rad = cross(u, v).atan2(u[0] * v[0] + u[1] * v[1]);
        Self { arc, start_rad: u[1].atan2(u[0]), turn_rad, radii: [u[0].hypot(u[1]), v[0].hypot(v[1])] }
    }

    fn length(&self) -> f64 {
        (self.turn_rad * self.arc.radius_m).abs()
    }

    /// Point at a share `t` of the sweep. The radius runs from that of one end to that of the other, so the chain meets both ends.
    fn point(&self, t: f64) -> Point {
        let radius = self.radii[0] + t * (self.radii[1] - self.radii[0]);
        let (sin, cos) = (self.start_rad + t * self.turn_rad).sin_cos();
        [self.arc.center_m[0] + radius * cos, self.arc.center_m[1] + radius * sin]
    }

    /// Share of the sweep at which the ray from the center to `p` meets the arc.
    fn share(&self, p: Point) -> f64 {
        let d = minus(p, self.arc.center_m);
        let mut turn = d[1].atan2(d[0]) - self.start_rad;
        let middle = 0.5 * self.turn_rad;
        while turn < middle - PI {
            turn += 2.0 * PI;
        }
        while middle + PI < turn {
            turn -= 2.0 * PI;
        }
        turn / self.turn_rad
    }
}

/// Shares of the sweep, 0 and 1 included, at which other lines start, end or cross the arc.
fn breaks(sweep: &Sweep, points: impl Iterator<Item = Point>, straight: &[Strand], tolerance: f64) -> Vec<f64> {
    let (center, radius) = (sweep.arc.center_m, sweep.arc.radius_m);
    let near = |p: Point| (distance(p, center) - radius).abs() <= tolerance;
    let mut shares: Vec<f64> = points.filter(|&p| near(p)).map(|p| sweep.share(p)).collect();
    for strand in straight {
        // |from + t d - center|^2 = radius^2
        let (d, f) = (minus(strand.to, strand.from), minus(strand.from, center));
        let (a, b, c) = (d[0] * d[0] + d[1] * d[1], f[0] * d[0] + f[1] * d[1], f[0] * f[0] + f[1] * f[1] - radius * radius);
        let discriminant = b * b - a * c;
        if 0.0 < discriminant && 0.0 < a {
            let root = discriminant.sqrt();
            let meets = [(-b - root) / a, (-b + root) / a].into_iter().filter(|t| 0.0 < *t && *t < 1.0);
            shares.extend(meets.map(|t| sweep.share([strand.from[0] + t * d[0], strand.from[1] + t * d[1]])));
        }
    }
    let gap = 2.0 * tolerance / sweep.length().max(tolerance);
    shares.retain(|t| gap < *t && *t < 1.0 - gap);
    shares.sort_by(f64::total_cmp);
    let mut kept = vec![0.0];
    for t in shares {
        if kept[kept.len() - 1] + gap < t {
            kept.push(t);
        }
    }
    kept.push(1.0);
    kept
}

/// Number of chords between two shares: of the wanted size, no wider than [`CHORD_RAD`], no shorter than a few tolerances.
fn n_chords(sweep: &Sweep, from: f64, to: f64, size: &SizeIndex, tolerance: f64) -> usize {
    let length = (to - from) * sweep.length();
    let wanted = size.size(sweep.point(from)).min(size.size(sweep.point(to))).min(size.size(sweep.point(0.5 * (from + to))));
    let by_size = (length / wanted).round();
    let by_angle = ((to - from) * sweep.turn_rad.abs() / CHORD_RAD - 1e-9).ceil();
    let most = (length / (CHORD_TOLERANCES * tolerance)).floor();
    by_size.max(by_angle).min(most).max(1.0) as usize
}

/// The point of the circle next to the middle of a chord whose ends are near it, at the mean of their distances from the center.
pub(crate) fn middle_on_arc(a: Point, b: Point, arc: &Arc) -> Point {
    let radius = 0.5 * (distance(a, arc.center_m) + distance(b, arc.center_m));
    onto(middle(a, b), arc.center_m, radius)
}

/// Moves a point along its ray from the center onto the circle.
pub(crate) fn onto_circle(p: Point, arc: &Arc) -> Point {
    onto(p, arc.center_m, arc.radius_m)
}

fn onto(p: Point, center: Point, radius: f64) -> Point {
    let d = minus(p, center);
    let scale = radius / d[0].hypot(d[1]);
    [center[0] + scale * d[0], center[1] + scale * d[1]]
}
