//! The depth series: which depths are solved, how densely, and the critical depths that come out of it.
//!
//! Takes a function that evaluates one depth (mesh, solve, checks) and returns all evaluated depths in growing order. The
//! depths asked for are solved in parallel batches; what is asked for next depends only on results, never on timing, so
//! the series is the same for any number of threads.
use std::collections::BTreeMap;

use crate::critical::{Crossing, Point, excess, first_crossing};
use crate::outcome::{CheckResult, CutResult, ProbeResult};

/// Depths are solved on a grid of one centimetre; the surveyed depth is kept as it is.
const DEPTH_GRID_M: f64 = 0.01;
/// An interval is not halved below this width, m (methods: critical depth).
const NARROWEST_M: f64 = 0.05;
/// Deviation from a straight line, in utilization, that asks for a midpoint.
const STRAIGHT_WITHIN: f64 = 0.02;
/// Share of the limit above which a check can matter for an interval.
const NEAR_LIMIT: f64 = 0.75;
/// Rounds of adding depths; a series that still asks for more is reported with the error it has.
const MOST_ROUNDS: usize = 8;

/// Everything evaluated at one depth.
#[derive(Debug, Clone, PartialEq)]
pub struct DepthPoint {
    /// Horizontal undercut depth, m.
    pub depth_m: f64,
    /// Checks of all situations and both inputs.
    pub checks: Vec<CheckResult>,
    /// Probes.
    pub probes: Vec<ProbeResult>,
    /// Cuts.
    pub cuts: Vec<CutResult>,
}

/// Evaluates a batch of depths, in any order, and returns them in the order asked for.
pub type Solve<'a, E> = dyn Fn(&[f64]) -> Result<Vec<DepthPoint>, E> + 'a;

/// Check, situation and inputs: what a series is followed for.
pub type Key = (&'static str, String, &'static str);

/// What the series is made for.
#[derive(Debug, Clone, PartialEq)]
pub struct DeepenParams {
    /// Surveyed depth, m.
    pub surveyed_m: f64,
    /// Last depth, m.
    pub search_to_m: f64,
    /// Step, m.
    pub step_m: f64,
    /// Limit is 1 / this.
    pub required_reserve: f64,
    /// Averaging length, beyond which a governing place has jumped, m.
    pub averaging_length_m: f64,
}

/// Depths of the first batch: 0, the multiples of the step, the surveyed and the last depth, m.
pub fn first_depths(params: &DeepenParams) -> Vec<f64> {
    let n = (params.search_to_m / params.step_m + 1e-9).floor() as usize;
    let mut depths: Vec<f64> = (0..=n).map(|k| on_grid(k as f64 * params.step_m)).collect();
    depths.push(on_grid(params.search_to_m));
    depths.retain(|d| DEPTH_GRID_M <= (d - params.surveyed_m).abs());
    depths.push(params.surveyed_m);
    depths.sort_by(f64::total_cmp);
    depths.dedup_by(|a, b| (*a - *b).abs() < 0.5 * DEPTH_GRID_M);
    depths
}

/// Nearest depth of the one-centimetre grid.
fn on_grid(depth_m: f64) -> f64 {
    (depth_m / DEPTH_GRID_M).round() / (1.0 / DEPTH_GRID_M)
}

/// Solves the first batch, then adds depths where a check near its limit bends or its place jumps, and around the critical depths.
///
/// # Errors
/// The first error of `solve`.
pub fn series<E>(params: &DeepenParams, solve: &Solve<'_, E>) -> Result<Vec<DepthPoint>, E> {
    let mut points = solve(&first_depths(params))?;
    for _ in 0..MOST_ROUNDS {
        let wanted = next_depths(params, &points);
        if wanted.is_empty() {
            break;
        }
        points.extend(solve(&wanted)?);
        points.sort_by(|a, b| a.depth_m.total_cmp(&b.depth_m));
    }
    Ok(points)
}

/// All keys of the series, in a fixed order.
pub fn keys(points: &[DepthPoint]) -> Vec<Key> {
    let mut seen = BTreeMap::new();
    for (i, check) in points.iter().flat_map(|p| &p.checks).enumerate() {
        seen.entry((check.check, check.situation.clone(), check.inputs)).or_insert(i);
    }
    let mut keys: Vec<(usize, Key)> = seen.into_iter().map(|(key, i)| (i, key)).collect();
    keys.sort();
    keys.into_iter().map(|(_, key)| key).collect()
}

/// The result of a key at a depth.
pub fn find<'a>(point: &'a DepthPoint, key: &Key) -> Option<&'a CheckResult> {
    point.checks.iter().find(|c| c.check == key.0 && c.situation == key.1 && c.inputs == key.2)
}

/// Excess of one key over the depths.
pub fn excess_series(points: &[DepthPoint], key: &Key, required_reserve: f64) -> Vec<Point> {
    let point = |p: &DepthPoint| {
        find(p, key).map(|c| Point { depth_m: p.depth_m, excess: excess(c, required_reserve), error: c.error * required_reserve })
    };
    points.iter().filter_map(point).collect()
}

/// Depths that the series still lacks.
fn next_depths(params: &DeepenParams, points: &[DepthPoint]) -> Vec<f64> {
    let mut wanted: Vec<f64> = Vec::new();
    let keys = keys(points);
    for inputs in ["cautious", "best estimate"] {
        wanted.extend(toward_root(params, points, keys.iter().filter(|k| k.2 == inputs)));
    }
    for key in &keys {
        // beyond the overall critical depth of its inputs no check can change the answer
        let horizon_m = overall_crossing(params, points, keys.iter().filter(|k| k.2 == key.2)).map_or(params.search_to_m, |c| c.over_m);
        wanted.extend(bends(params, points, key, horizon_m));
    }
    let new = |d: &f64| points.iter().all(|p| 0.999 * DEPTH_GRID_M <= (p.depth_m - d).abs());
    wanted = wanted.into_iter().map(on_grid).filter(new).collect();
    wanted.sort_by(f64::total_cmp);
    wanted.dedup_by(|a, b| (*a - *b).abs() < 0.5 * DEPTH_GRID_M);
    wanted
}

/// The first crossing among `keys`, checks that are over at the surveyed depth left out.
fn overall_crossing<'a>(params: &DeepenParams, points: &[DepthPoint], keys: impl Iterator<Item = &'a Key>) -> Option<Crossing> {
    keys.filter_map(|key| {
        let series = excess_series(points, key, params.required_reserve);
        let over_at = |d: f64| series.iter().any(|p| p.depth_m.total_cmp(&d).is_eq() && 0.0 < p.excess);
        if over_at(params.surveyed_m) { None } else { first_crossing(&series, params.surveyed_m) }
    })
    .min_by(|a, b| a.depth_m.total_cmp(&b.depth_m))
}

/// The next depth toward the smallest critical depth among `keys`, while its bracket is wider than twice the grid.
fn toward_root<'a>(params: &DeepenParams, points: &[DepthPoint], keys: impl Iterator<Item = &'a Key>) -> Option<f64> {
    let crossing = overall_crossing(params, points, keys)?;
    let width = crossing.over_m - crossing.under_m;
    if width <= 2.0 * DEPTH_GRID_M {
        return None;
    }
    // keep away from the ends by a twentieth of the bracket, so that it shrinks from both sides
    let inset = (0.05 * width).max(DEPTH_GRID_M);
    Some(crossing.depth_m.clamp(crossing.under_m + inset, crossing.over_m - inset))
}

/// Midpoints of the intervals before `horizon_m` in which a check near its limit bends by more than allowed or its place jumps.
///
/// `horizon_m` is the overall critical depth of the key's inputs.
fn bends(params: &DeepenParams, points: &[DepthPoint], key: &Key, horizon_m: f64) -> Vec<f64> {
    let rows: Vec<(&DepthPoint, &CheckResult)> = points.iter().filter_map(|p| find(p, key).map(|c| (p, c))).collect();
    let value = |i: usize| excess(rows[i].1, params.required_reserve);
    let mut middles = Vec::new();
    for i in 1..rows.len() {
        let (d0, d1) = (rows[i - 1].0.depth_m, rows[i].0.depth_m);
        let near = NEAR_LIMIT - 1.0 < value(i - 1).max(value(i));
        let both_over = 0.0 < value(i - 1) && 0.0 < value(i);
        if d1 - d0 <= NARROWEST_M || d1 <= params.surveyed_m || horizon_m <= d0 || !near || both_over {
            continue;
        }
        let (a, b) = (rows[i - 1].1.at, rows[i].1.at);
        let moved = (a[0] - b[0]).hypot(a[1] - b[1]);
        let jumped = params.averaging_length_m + 1.5 * (d1 - d0) < moved;
        let bend = [i.checked_sub(2), Some(i + 1)]
            .into_iter()
            .flatten()
            .filter(|&k| k < rows.len())
            .map(|k| sag(&[(d0, value(i - 1)), (d1, value(i)), (rows[k].0.depth_m, value(k))]))
            .fold(0.0, f64::max);
        let limit = STRAIGHT_WITHIN * params.required_reserve;
        if limit < bend || (jumped && 0.2 < d1 - d0) {
            middles.push(0.5 * (d0 + d1));
        }
    }
    middles
}

/// How far the parabola through three points leaves the chord through the first two at its middle.
fn sag(p: &[(f64, f64); 3]) -> f64 {
    let slope = |a: (f64, f64), b: (f64, f64)| (b.1 - a.1) / (b.0 - a.0);
    let second = (slope(p[1], p[2]) - slope(p[0], p[1])) / (p[2].0 - p[0].0);
    (second * 0.25 * (p[1].0 - p[0].0).powi(2)).abs()
}

#[cfg(test)]
mod tests;
