//! Where the surveyed surface is undercut: back, lip, mouth, other hollows, brow.
use super::arc::{Point, between, distance};

/// A run toward the sea smaller than this is roughness of the survey, not an undercut, m. Common practice, no source.
pub(crate) const SMALLEST_UNDERCUT_M: f64 = 0.1;
/// Hollows deeper than this are named beside the undercut, m.
pub(crate) const NAMED_HOLLOW_M: f64 = 0.5;
/// Slope under which the surface counts as ground and no longer as face: tan 30 degrees.
const GROUND_SLOPE: f64 = 0.577_350_269_189_625_8;

/// An undercut of a walk, by the indices of its points.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(crate) struct Found {
    /// Innermost point; of equal ones the last, nearest to the roof.
    pub(crate) back: usize,
    /// Outer lower edge of the roof.
    pub(crate) lip: usize,
    /// Horizontal, lip to back, m.
    pub(crate) depth_m: f64,
}

/// The undercut of a walk from the sea to the land.
///
/// Back and outermost point are the pair `i < j` with the greatest `x_i - x_j`. The lip is the lowest point after the back
/// within `max(0.1 m, 3 % of that depth)` of the least x there, so that survey noise does not move it up the face (never more
/// than half the depth, for hollows of the size of the noise), see [`lip`]. `None` where no pair differs by `least_m`.
pub(crate) fn find(walk: &[Point], least_m: f64) -> Option<Found> {
    let (mut innermost, mut back, mut depth) = (0, 0, 0.0);
    for (j, p) in walk.iter().enumerate() {
        if walk[innermost][0] - 1e-9 <= p[0] {
            innermost = j;
        }
        if depth < walk[innermost][0] - p[0] {
            (back, depth) = (innermost, walk[innermost][0] - p[0]);
        }
    }
    if depth < least_m {
        return None;
    }
    let tolerance = 0.1_f64.max(0.03 * depth).min(0.5 * depth);
    let lip = lip(walk, back, walk[back][0] - depth, tolerance)?;
    Some(Found { back, lip, depth_m: walk[back][0] - walk[lip][0] })
}

/// The lowest point after the back whose x is within the tolerance of the least, of those that have the whole roof landward
/// of them and no part of the face hanging landward below them: a hook in the noise of the survey is no lip.
fn lip(walk: &[Point], back: usize, least_x: f64, tolerance: f64) -> Option<usize> {
    let hangs = |k: usize| {
        let [x, z] = walk[k];
        walk[k + 1..].iter().any(|p| x < p[0] && p[0] <= x + tolerance && p[1] < z)
    };
    let (mut reached, mut lip) = (f64::INFINITY, None::<usize>);
    for k in back + 1..walk.len() {
        if reached < walk[k][0] {
            continue;
        }
        reached = walk[k][0];
        let lower = lip.is_none_or(|lip| walk[k][1] < walk[lip][1]);
        if reached <= least_x + tolerance && lower && !hangs(k) {
            lip = Some(k);
        }
    }
    lip
}

/// Back point and depth of every hollow deeper than [`NAMED_HOLLOW_M`], the deepest of each stretch first.
pub(crate) fn hollows(walk: &[Point]) -> Vec<(Point, f64)> {
    let Some(found) = find(walk, NAMED_HOLLOW_M) else { return Vec::new() };
    let mut list = vec![(walk[found.back], found.depth_m)];
    let mouth = mouth(walk, found).map_or(0, |(before, _)| before + 1);
    list.extend(hollows(&walk[..mouth]));
    list.extend(hollows(&walk[found.lip..]));
    list
}

/// Where the vertical through the lip meets the walk last before the back: index of the point before it, and the point.
pub(crate) fn mouth(walk: &[Point], found: Found) -> Option<(usize, Point)> {
    let x = walk[found.lip][0];
    (0..found.back).rev().find(|&k| walk[k][0] <= x && x <= walk[k + 1][0]).map(|k| {
        let (a, b) = (walk[k], walk[k + 1]);
        let share = if a[0] < b[0] { (x - a[0]) / (b[0] - a[0]) } else { 1.0 };
        (k, [x, between(a, b, share)[1]])
    })
}

/// The first point after `start` and above it beyond which the walk rises at under 30 degrees on average.
///
/// The average is the rise of the chord over `max(2 m, 0.1 x height of the point above `toe_z_m`)` of the walk. Where the walk
/// never rises steeply after `start`, `start` itself is the brow (an overhang that ends in an edge).
pub(crate) fn brow(walk: &[Point], start: usize, toe_z_m: f64) -> Option<usize> {
    let is_ground = |k: usize| {
        let ahead = ahead(walk, k, 2.0_f64.max(0.1 * (walk[k][1] - toe_z_m)));
        let (dx, dz) = (ahead[0] - walk[k][0], ahead[1] - walk[k][1]);
        0.0 < dx && dz < GROUND_SLOPE * dx
    };
    if (start..walk.len()).all(is_ground_or_end(walk, &is_ground)) {
        return Some(start);
    }
    (start + 1..walk.len()).find(|&k| walk[start][1] < walk[k][1] && is_ground(k))
}

fn is_ground_or_end(walk: &[Point], is_ground: &impl Fn(usize) -> bool) -> impl FnMut(usize) -> bool {
    let n = walk.len();
    move |k| k + 1 == n || is_ground(k)
}

/// The point a length further along the walk, or its end.
fn ahead(walk: &[Point], from: usize, length_m: f64) -> Point {
    let mut left = length_m;
    for pair in walk[from..].windows(2) {
        let length = distance(pair[0], pair[1]);
        if left <= length {
            return between(pair[0], pair[1], left / length);
        }
        left -= length;
    }
    walk[walk.len() - 1]
}
