//! From the depth series of the checks to each check's critical undercut depth.
//!
//! A series holds, for every combination of check, situation and inputs, its result at growing depths. The critical depth
//! is the smallest depth at or beyond the surveyed one at which demand passes the limit, found between two depths of the
//! series by linear interpolation of the excess; [`crate::deepen`] makes the two depths close enough.
use crate::outcome::{CheckCriticalDepth, CheckResult};

/// How far a check is over (positive) or under (negative) its limit, as a share of the limit.
///
/// ```text
/// excess = utilization * required_reserve - 1
/// ```
///
/// Where there is no utilization (capacity not positive, or beyond the apex) the check counts as over by the whole limit if
/// it is marked `over`, and as not acting otherwise.
pub fn excess(result: &CheckResult, required_reserve: f64) -> f64 {
    match (result.utilization, result.over) {
        (Some(utilization), _) => utilization * required_reserve - 1.0,
        (None, true) => 1.0,
        (None, false) => -1.0,
    }
}

/// One check's result at one depth, reduced to what the search needs.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Point {
    /// Undercut depth, m.
    pub depth_m: f64,
    /// Share of the limit by which the check is over.
    pub excess: f64,
    /// Numerical error of the excess.
    pub error: f64,
}

/// The crossing of a limit between two depths.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Crossing {
    /// Depth at which the limit is passed, m.
    pub depth_m: f64,
    /// Numerical error of that depth, m.
    pub error_m: f64,
    /// Depth under the limit, m.
    pub under_m: f64,
    /// Depth over the limit, m.
    pub over_m: f64,
}

/// First crossing from under to over at or beyond `from_m`.
///
/// ```text
/// d*      = d0 + (d1 - d0) * (-e0) / (e1 - e0)
/// error_m = max(err0, err1) / slope + curvature,   slope = (e1 - e0) / (d1 - d0)
/// ```
///
/// `curvature` is how far the parabola through the nearest third point moves the root. The error never exceeds what the
/// bracket leaves open plus the mesh error over the slope. Source: docs/theory.md eq. (6.13), docs/theory.md eq. (6.14).
pub fn first_crossing(series: &[Point], from_m: f64) -> Option<Crossing> {
    let start = series.iter().position(|p| from_m <= p.depth_m)?;
    let i = (start + 1..series.len()).find(|&i| series[i - 1].excess <= 0.0 && 0.0 < series[i].excess)?;
    let (p0, p1) = (series[i - 1], series[i]);
    let width = p1.depth_m - p0.depth_m;
    let rise = p1.excess - p0.excess;
    let depth_m = p0.depth_m + width * (-p0.excess) / rise;
    let third = if i + 1 < series.len() { Some(series[i + 1]) } else { (2 <= i).then(|| series[i - 2]) };
    let curvature_m = third.map_or(0.5 * width, |p2| parabola_shift(p0, p1, p2, depth_m)).min(width);
    let mesh_m = p0.error.max(p1.error) * width / rise;
    Some(Crossing { depth_m, error_m: mesh_m + curvature_m, under_m: p0.depth_m, over_m: p1.depth_m })
}

/// Margin on the shift of the root, which is taken to first order only.
const FIRST_ORDER_MARGIN: f64 = 1.5;

/// How far the parabola through three points moves the root of the chord through the first two.
fn parabola_shift(p0: Point, p1: Point, p2: Point, root_m: f64) -> f64 {
    let slope = (p1.excess - p0.excess) / (p1.depth_m - p0.depth_m);
    let slope_beyond = (p2.excess - p1.excess) / (p2.depth_m - p1.depth_m);
    let second = (slope_beyond - slope) / (p2.depth_m - p0.depth_m);
    FIRST_ORDER_MARGIN * (second * (root_m - p0.depth_m) * (root_m - p1.depth_m) / slope).abs()
}

/// Stretches of depths below `to_m` at which the check is over its limit, ends by interpolation, `[from, to]` in m.
pub fn stretches_over(series: &[Point], to_m: f64) -> Vec<[f64; 2]> {
    let mut stretches: Vec<[f64; 2]> = Vec::new();
    for pair in series.windows(2) {
        let (a, b) = (pair[0], pair[1]);
        if to_m <= a.depth_m || (a.excess <= 0.0 && b.excess <= 0.0) {
            continue;
        }
        let root = a.depth_m + (b.depth_m - a.depth_m) * (-a.excess) / (b.excess - a.excess);
        let from = if 0.0 < a.excess { a.depth_m } else { root };
        let to = if 0.0 < b.excess { b.depth_m.min(to_m) } else { root };
        match stretches.last_mut() {
            Some(last) if from <= last[1] => last[1] = to,
            _ => stretches.push([from, to]),
        }
    }
    stretches
}

/// Critical depth of one check from its series; `surveyed_m` is where the search starts.
///
/// `label` names the check, its situation and its inputs.
pub fn critical_depth(series: &[Point], surveyed_m: f64, label: &CheckResult) -> CheckCriticalDepth {
    let at = |depth_m: f64| series.iter().find(|p| p.depth_m.total_cmp(&depth_m).is_eq());
    let already_over = at(surveyed_m).is_some_and(|p| 0.0 < p.excess);
    let over_without_undercut = already_over && at(0.0).is_some_and(|p| 0.0 < p.excess);
    let crossing = if already_over { None } else { first_crossing(series, surveyed_m) };
    let mut earlier_over = stretches_over(series, surveyed_m);
    if already_over && earlier_over.last().is_some_and(|s| surveyed_m <= s[1]) {
        earlier_over.pop();
    }
    CheckCriticalDepth {
        check: label.check,
        situation: label.situation.clone(),
        inputs: label.inputs,
        depth_m: if already_over { Some(surveyed_m) } else { crossing.map(|c| c.depth_m) },
        error_m: crossing.map(|c| c.error_m),
        already_over,
        over_without_undercut,
        earlier_over,
    }
}

#[cfg(test)]
mod tests;
