//! Which line the ground breaks on, and what goes with it.
//!
//! The line belongs to the governing check: for tension under the ground it follows the direction across the major principal
//! stress from the governing place down to the hollow; for the others it is the worst section line that passes within one
//! averaging length of the place.
use crate::demand::{Found, LineValue};
use crate::model::Model;

/// Share of the worst line's bending demand above which a line counts for the range of ground lost.
const NEARLY_WORST: f64 = 0.95;

/// A rupture line with what it takes along.
#[derive(Debug, Clone, PartialEq)]
pub struct Rupture {
    /// End at the hollow and end at the ground, m.
    pub line_m: [[f64; 2]; 2],
    /// Ground lost behind the brow, lay-back of loose layers included, m.
    pub ground_lost_m: f64,
    /// The same over all lines that are nearly as bad, m.
    pub range_m: [f64; 2],
    /// Area of the block, m2 (volume per meter of cliff).
    pub block_m2: f64,
}

/// Distance of a point from a segment.
fn distance_m(point: [f64; 2], line: &LineValue) -> f64 {
    let d = [line.to_m[0] - line.from_m[0], line.to_m[1] - line.from_m[1]];
    let r = [point[0] - line.from_m[0], point[1] - line.from_m[1]];
    let t = ((r[0] * d[0] + r[1] * d[1]) / (d[0] * d[0] + d[1] * d[1])).clamp(0.0, 1.0);
    (r[0] - t * d[0]).hypot(r[1] - t * d[1])
}

/// Index of the line that the block breaks on, for checks other than tension under the ground: the greatest bending demand among
/// the lines within one averaging length of the place, or else the nearest line.
pub fn nearest_worst_line(found: &Found, lines: &[LineValue], bending_pa: &[f64], averaging_length_m: f64) -> Option<usize> {
    if !found.kind.is_local() {
        return Some(found.index);
    }
    let distances: Vec<f64> = lines.iter().map(|l| distance_m(found.result.at, l)).collect();
    let near = (0..lines.len()).filter(|&i| distances[i] <= averaging_length_m);
    near.max_by(|&a, &b| bending_pa[a].total_cmp(&bending_pa[b]))
        .or_else(|| (0..lines.len()).min_by(|&a, &b| distances[a].total_cmp(&distances[b])))
}

/// Ground lost behind the brow when the block breaks on a line: its upper end, and the lay-back of the loose layers above it.
///
/// ```text
/// x_edge = x_top + sum over loose layers of thickness / tan(rest slope)
/// ```
pub fn ground_lost_m(model: &Model, line: &LineValue, brow_x_m: f64) -> f64 {
    let lay_back = |&(layer, thickness): &(usize, f64)| model.layers[layer].rest_slope_rad.map_or(0.0, |slope| thickness / slope.tan());
    line.to_m[0] + line.loose_m.iter().map(lay_back).sum::<f64>() - brow_x_m
}

/// Range of ground lost over all lines whose bending demand is within 5 % of the greatest.
pub fn range_m(model: &Model, lines: &[LineValue], bending_pa: &[f64], brow_x_m: f64) -> Option<[f64; 2]> {
    let worst = bending_pa.iter().copied().fold(f64::NEG_INFINITY, f64::max);
    let nearly = (0..lines.len()).filter(|&i| 0.0 < bending_pa[i] && NEARLY_WORST * worst <= bending_pa[i]);
    let lost: Vec<f64> = nearly.map(|i| ground_lost_m(model, &lines[i], brow_x_m)).collect();
    let low = lost.iter().copied().reduce(f64::min)?;
    let high = lost.iter().copied().reduce(f64::max)?;
    Some([low, high])
}
