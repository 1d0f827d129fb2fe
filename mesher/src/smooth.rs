//! Moves free vertices so that triangles become rounder, and vertices on arcs onto their circle.
use crate::curve::onto_circle;
use crate::geometry::{Point, cross, distance_squared, minus, orient, sine_squared_of_smallest_angle};
use crate::outline::Arc;
use crate::refine::Refined;
use crate::triangulation::{NEXT, NONE, PREVIOUS, Side, Triangulation, place, side};

/// Square of the sine of 30 degrees: above this smallest angle a move may lower the worst triangle of a fan if it improves the mean.
const GOOD: f64 = 0.25;
/// Shares of the way to the target that are tried in turn.
const STEPS: [f64; 3] = [1.0, 0.5, 0.25];

/// Puts vertices inside chords onto the circles. One that would turn a triangle over stays on its chord. Returns the points moved to.
pub(crate) fn onto_arcs(refined: &mut Refined, arcs: &[Arc]) -> Vec<Point> {
    let body = &mut refined.body;
    let mut moved: Vec<(usize, Point)> = Vec::new();
    for (v, &segment) in body.segment_of.iter().enumerate().filter(|(_, s)| **s != NONE) {
        if let Some(arc) = body.segments[segment as usize].arc {
            moved.push((v, body.triangulation.points[v]));
            body.triangulation.points[v] = onto_circle(body.triangulation.points[v], &arcs[arc as usize]);
        }
    }
    let of = &mut body.triangulation;
    while !moved.is_empty() {
        let is_turned = |t: &usize| {
            let [a, b, c] = of.corner_points(*t);
            orient(a, b, c) <= 0.0
        };
        let turned: Vec<u32> = (0..of.corners.len()).filter(is_turned).flat_map(|t| of.corners[t]).collect();
        let before = moved.len();
        moved.retain(|&(v, back)| {
            let stays = !turned.contains(&(v as u32));
            if !stays {
                of.points[v] = back;
            }
            stays
        });
        if turned.is_empty() || moved.len() == before {
            break;
        }
    }
    moved.iter().map(|&(v, _)| of.points[v]).collect()
}

/// Rounds of guarded Laplace smoothing (Freitag 1997), each followed by flips to Delaunay.
///
/// Every free vertex moves towards the mean of its neighbors, each with the weight `1 / h` so that small elements stay small. A move is kept
/// only if the worst angle around the vertex grows, or stays above 30 degrees while the mean shape improves; no triangle is ever turned over.
pub(crate) fn smooth(refined: &mut Refined, n_rounds: usize) {
    for _ in 0..n_rounds {
        let starts = side_from_free_vertex(&refined.body.triangulation);
        let mut ring = Vec::new();
        for (v, &start) in starts.iter().enumerate() {
            if start != NONE {
                collect_ring(&refined.body.triangulation, start, &mut ring);
                move_vertex(&mut refined.body.triangulation.points, &refined.sizes, v, &ring);
            }
        }
        refined.body.triangulation.restore_delaunay();
    }
}

/// A side that starts at each vertex; [`NONE`] for vertices on a piece.
fn side_from_free_vertex(of: &Triangulation) -> Vec<Side> {
    let mut start = vec![NONE; of.points.len()];
    for t in 0..of.corners.len() {
        for k in 0..3 {
            start[of.corners[t][k] as usize] = side(t as u32, k);
        }
    }
    for t in 0..of.corners.len() {
        for k in (0..3).filter(|&k| of.pieces[t][k] != NONE) {
            start[of.corners[t][k] as usize] = NONE;
            start[of.corners[t][NEXT[k]] as usize] = NONE;
        }
    }
    start
}

/// Neighbors of a free vertex, counterclockwise.
fn collect_ring(of: &Triangulation, start: Side, ring: &mut Vec<u32>) {
    ring.clear();
    let mut at = start;
    loop {
        let (t, k) = place(at);
        ring.push(of.corners[t][NEXT[k]]);
        at = of.twin(side(t as u32, PREVIOUS[k]));
        if at == start {
            return;
        }
    }
}

fn move_vertex(points: &mut [Point], sizes: &[f64], v: usize, ring: &[u32]) {
    let (mut sum, mut weights) = ([0.0, 0.0], 0.0);
    for &w in ring {
        let weight = 1.0 / (sizes[v] + sizes[w as usize]);
        let p = points[w as usize];
        sum = [sum[0] + weight * p[0], sum[1] + weight * p[1]];
        weights += weight;
    }
    let (from, target) = (points[v], sum.map(|s| s / weights));
    let (worst, mean) = quality(points, from, ring);
    for step in STEPS {
        let p = [from[0] + step * (target[0] - from[0]), from[1] + step * (target[1] - from[1])];
        let (new_worst, new_mean) = quality(points, p, ring);
        if worst < new_worst || (GOOD <= new_worst && mean < new_mean) {
            points[v] = p;
            return;
        }
    }
}

/// Worst squared sine of a smallest angle, and sum of the shape measures `A / sum l^2`, in the fan of a vertex at `p`.
fn quality(points: &[Point], p: Point, ring: &[u32]) -> (f64, f64) {
    let (mut worst, mut mean) = (f64::INFINITY, 0.0);
    let mut a = points[ring[ring.len() - 1] as usize];
    for &w in ring {
        let b = points[w as usize];
        worst = worst.min(sine_squared_of_smallest_angle(p, a, b));
        mean += cross(minus(a, p), minus(b, p)) / (distance_squared(p, a) + distance_squared(a, b) + distance_squared(b, p));
        a = b;
    }
    (worst, mean)
}
