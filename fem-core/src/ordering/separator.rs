//! From a graph with coordinates to a first separator: the best of cuts along lines and circles.
use super::graph::{Graph, Side};

/// The smaller part keeps at least about this share of the vertices.
pub(super) const SMALLEST_SHARE: f64 = 0.36;

/// Directions of the cutting lines, evenly over half a turn.
const N_DIRECTIONS: usize = 4;

/// Positions tried along each direction.
const N_POSITIONS: usize = 48;

/// Weight of unequal parts against the number of cut edges.
const IMBALANCE_WEIGHT: f64 = 2.5;

/// What a cut is made along; the level of a point is compared with a threshold.
#[derive(Debug, Clone, Copy)]
enum Shape {
    Line { normal: [f64; 2] },
    Circle { center_m: [f64; 2] },
}

impl Shape {
    fn level(self, [x, y]: [f64; 2]) -> f64 {
        match self {
            Self::Line { normal } => x * normal[0] + y * normal[1],
            Self::Circle { center_m } => (x - center_m[0]).hypot(y - center_m[1]),
        }
    }
}

/// Divides the vertices by the best cut and takes the smaller of its two shores as separator.
///
/// Circles are tried besides lines because a mesh graded toward one point is cut most cheaply around that point.
///
/// # Guarantees
/// Both parts together with the separator are all vertices; at least one vertex lies outside the larger part, so a recursion ends.
pub(super) fn separate(graph: &Graph) -> Vec<Side> {
    let mut levels = vec![0.0; graph.len()];
    let mut best: Option<(f64, Vec<bool>)> = None;
    for shape in shapes(graph) {
        for (level, &point) in levels.iter_mut().zip(&graph.points_m) {
            *level = shape.level(point);
        }
        let (score, threshold) = best_threshold(graph, &levels);
        if best.as_ref().is_none_or(|(lowest, _)| score < *lowest) {
            best = Some((score, levels.iter().map(|&level| level < threshold).collect()));
        }
    }
    let first = best.filter(|(score, _)| score.is_finite()).map_or_else(|| halves(graph), |(_, first)| first);
    shore_as_separator(graph, &first)
}

/// The lines and the circle around the middle of the vertices, by coordinate medians: where a graded mesh is finest.
fn shapes(graph: &Graph) -> impl Iterator<Item = Shape> {
    let step = (graph.len() / 512).max(1);
    let center_m = [0, 1].map(|axis| {
        let mut values: Vec<f64> = graph.points_m.iter().step_by(step).map(|p| p[axis]).collect();
        let middle = values.len() / 2;
        *values.select_nth_unstable_by(middle, f64::total_cmp).1
    });
    let lines = (0..N_DIRECTIONS).map(|i| {
        let (sin, cos) = (std::f64::consts::PI * i as f64 / N_DIRECTIONS as f64).sin_cos();
        Shape::Line { normal: [cos, sin] }
    });
    lines.chain([Shape::Circle { center_m }])
}

/// Score and threshold of the cheapest cut; the score is infinite when no threshold has vertices on both sides.
///
/// The profile of cut edges over all thresholds comes from one sweep: an edge adds one where its lower end is passed and takes it off
/// where its upper end is.
fn best_threshold(graph: &Graph, levels: &[f64]) -> (f64, f64) {
    let thresholds = thresholds(levels);
    let n = thresholds.len();
    let bins: Vec<u8> = levels.iter().map(|level| thresholds.partition_point(|t| t <= level) as u8).collect();
    let (mut change_of_cut, mut n_in_bin) = (vec![0i32; n + 1], vec![0usize; n + 1]);
    for (v, &bin) in bins.iter().enumerate() {
        n_in_bin[bin as usize] += 1;
        for &w in graph.neighbors(v) {
            let other = bins[w as usize];
            if bin < other {
                change_of_cut[bin as usize] += 1;
                change_of_cut[other as usize] -= 1;
            }
        }
    }
    let (mut n_cut, mut n_below, mut best) = (0, 0, (f64::INFINITY, 0.0));
    for (k, &threshold) in thresholds.iter().enumerate() {
        n_cut += change_of_cut[k];
        n_below += n_in_bin[k];
        let score = score(n_cut, n_below, levels.len());
        if score < best.0 {
            best = (score, threshold);
        }
    }
    best
}

/// Quantiles of the levels from [`SMALLEST_SHARE`] to its complement, from a sample.
fn thresholds(levels: &[f64]) -> Vec<f64> {
    let step = (levels.len() / 2048).max(1);
    let mut sample: Vec<f64> = levels.iter().step_by(step).copied().collect();
    sample.sort_unstable_by(f64::total_cmp);
    let n = N_POSITIONS.min(levels.len() / 4).max(3);
    let share = |k: usize| SMALLEST_SHARE + (1.0 - 2.0 * SMALLEST_SHARE) * k as f64 / (n - 1) as f64;
    (0..n).map(|k| sample[((sample.len() - 1) as f64 * share(k)) as usize]).collect()
}

/// Cut edges, weighted up for unequal parts; strongly so beyond the share asked for, which ties between levels can cause.
fn score(n_cut: i32, n_below: usize, n: usize) -> f64 {
    if n_below == 0 || n_below == n {
        return f64::INFINITY;
    }
    let imbalance = (n_below as f64 / n as f64 - 0.5).abs();
    let beyond = if 0.5 - 0.9 * SMALLEST_SHARE < imbalance { 4.0 } else { 0.0 };
    (f64::from(n_cut) + 1.0) * (1.0 + IMBALANCE_WEIGHT * imbalance * imbalance + beyond)
}

/// First half by number, for vertices that no line tells apart.
fn halves(graph: &Graph) -> Vec<bool> {
    (0..graph.len()).map(|v| v < graph.len() / 2).collect()
}

/// Moves the vertices of one part that touch the other into the separator; of the two parts, the one with fewer such vertices.
fn shore_as_separator(graph: &Graph, first: &[bool]) -> Vec<Side> {
    let on_shore: Vec<bool> = (0..graph.len()).map(|v| graph.neighbors(v).iter().any(|&w| first[w as usize] != first[v])).collect();
    let n_shore = |part: bool| first.iter().zip(&on_shore).filter(|(f, shore)| **f == part && **shore).count();
    let moved = n_shore(true) <= n_shore(false);
    let side = |(&is_first, &shore): (&bool, &bool)| match (is_first, shore && is_first == moved) {
        (_, true) => Side::Separator,
        (true, false) => Side::First,
        (false, false) => Side::Second,
    };
    first.iter().zip(&on_shore).map(side).collect()
}
