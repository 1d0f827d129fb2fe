//! Level of the water table along the section, drawn down to free faces.
use fem_core::assembly::KinkLine;

use crate::section::Section;

/// A piecewise straight level; level beyond its ends.
#[derive(Debug, Clone, PartialEq)]
pub struct Table {
    /// Points with growing x, m.
    points_m: Vec<[f64; 2]>,
}

/// Steps of arcs of the surface, rad.
const ARC_STEP_RAD: f64 = 0.02;
/// Points closer than this in x are one, m.
const SAME_X_M: f64 = 1e-9;
/// A bend smaller than this is none, m.
const LEVEL_TOLERANCE_M: f64 = 1e-6;
/// Distance beside a point of the surface at which the surface on that side is read, m.
const BESIDE_M: f64 = 1e-7;

impl Table {
    /// The level through points with growing x.
    pub(super) fn through(points_m: &[[f64; 2]]) -> Self {
        Self { points_m: points_m.to_vec() }
    }

    /// The lower of the given table and of lines that rise at one in one from every point of the free surface.
    ///
    /// ```text
    /// z_t(x) = min( z_given(x),  min over surface points f of  max(z_f, z_sea) + |x - x_f| )
    /// ```
    ///
    /// so that a head difference is lost over a distance equal to it. The second value is how far the given table lies above the
    /// surface landward of `from_x_m`, where it was given, at most, m.
    pub(super) fn drawn_down(section: &Section, given: &[[f64; 2]], from_x_m: f64, sea_level_m: Option<f64>) -> (Self, f64) {
        let given = Self::through(given);
        let floor = sea_level_m.unwrap_or(f64::NEG_INFINITY);
        let (surface, _) = section.surface().flattened(ARC_STEP_RAD);
        let mut drawdown_m = 0.0_f64;
        let mut x_m: Vec<f64> = given.points_m.iter().map(|p| p[0]).collect();
        for pair in surface.windows(2) {
            for p in pieces(pair[0], pair[1], &given, floor) {
                if from_x_m <= p[0] {
                    drawdown_m = drawdown_m.max(given.level_m(p[0]) - p[1].max(floor));
                }
                // on both sides, because the lowest surface may jump at the ends of its pieces
                x_m.extend([p[0] - BESIDE_M, p[0], p[0] + BESIDE_M]);
            }
        }
        x_m.sort_by(f64::total_cmp);
        x_m.dedup_by(|b, a| *b - *a <= SAME_X_M);
        let lowest = lowest_m(&surface, &x_m);
        let marks: Vec<[f64; 2]> = x_m.iter().zip(lowest).map(|(&x, z)| [x, given.level_m(x).min(z.max(floor))]).collect();
        let mirrored = |points: &[[f64; 2]]| points.iter().rev().map(|p| [-p[0], p[1]]).collect::<Vec<_>>();
        let points_m = without_collinear(&mirrored(&limited(&mirrored(&limited(&marks)))));
        (Self { points_m }, drawdown_m)
    }

    /// Level at x, m.
    pub fn level_m(&self, x_m: f64) -> f64 {
        let right = self.points_m.partition_point(|p| p[0] <= x_m);
        if right == 0 {
            return self.points_m[0][1];
        }
        if right == self.points_m.len() {
            return self.points_m[right - 1][1];
        }
        let (a, b) = (self.points_m[right - 1], self.points_m[right]);
        a[1] + (x_m - a[0]) / (b[0] - a[0]) * (b[1] - a[1])
    }

    /// Points of the level with growing x, m.
    pub fn points_m(&self) -> &[[f64; 2]] {
        &self.points_m
    }

    /// Lines of the level raised by each offset, and vertical lines below its bends, that pass through a box.
    pub(super) fn lines_in(&self, x: [f64; 2], z: [f64; 2], offsets_m: &[f64]) -> Vec<KinkLine> {
        let first = self.points_m.partition_point(|p| p[0] <= x[0]).saturating_sub(1);
        let last = self.points_m.partition_point(|p| p[0] < x[1]).min(self.points_m.len() - 1);
        let inside = &self.points_m[first..=last];
        let mut lines = Vec::new();
        for p in inside {
            let highest = p[1] + offsets_m.iter().copied().fold(0.0, f64::max);
            if x[0] < p[0] && p[0] < x[1] && z[0] < highest {
                lines.push([p[0], -1.0, 0.0]);
            }
        }
        let mut level = |z0: f64, slope: f64, x0: f64| {
            for offset in offsets_m {
                let ends = x.map(|at| z0 + offset + slope * (at - x0));
                if z[0] < ends[0].max(ends[1]) && ends[0].min(ends[1]) < z[1] {
                    lines.push([z0 + offset - slope * x0, slope, -1.0]);
                }
            }
        };
        for pair in inside.windows(2) {
            level(pair[0][1], (pair[1][1] - pair[0][1]) / (pair[1][0] - pair[0][0]), pair[0][0]);
        }
        let n = self.points_m.len();
        if first == 0 && x[0] < self.points_m[0][0] {
            level(self.points_m[0][1], 0.0, 0.0);
        }
        if self.points_m[n - 1][0] < x[1] {
            level(self.points_m[n - 1][1], 0.0, 0.0);
        }
        lines
    }
}

/// The ends of a piece of the surface, and where it meets the given table, passes one of its bends or reaches the sea.
fn pieces(a: [f64; 2], b: [f64; 2], given: &Table, floor: f64) -> Vec<[f64; 2]> {
    let mut shares = vec![0.0, 1.0];
    let (width, rise) = (b[0] - a[0], b[1] - a[1]);
    let inside = |t: &f64| 0.0 < *t && *t < 1.0;
    shares.extend(given.points_m.iter().map(|p| (p[0] - a[0]) / width).filter(inside));
    shares.extend(Some((floor - a[1]) / rise).filter(inside));
    shares.sort_by(f64::total_cmp);
    let at = |t: f64| [a[0] + t * width, a[1] + t * rise];
    let gap = |t: f64| at(t)[1] - given.level_m(at(t)[0]);
    let meets = |s: &[f64]| {
        let (g, h) = (gap(s[0]), gap(s[1]));
        (g * h < 0.0).then(|| s[0] + (s[1] - s[0]) * g / (g - h))
    };
    let meetings: Vec<f64> = shares.windows(2).filter_map(meets).collect();
    shares.extend(meetings);
    shares.into_iter().map(at).collect()
}

/// Lowest level of a walk at each of the growing x, m; infinite beside it.
fn lowest_m(walk: &[[f64; 2]], x_m: &[f64]) -> Vec<f64> {
    let mut lowest = vec![f64::INFINITY; x_m.len()];
    for pair in walk.windows(2) {
        let [a, b] = if pair[0][0] <= pair[1][0] { [pair[0], pair[1]] } else { [pair[1], pair[0]] };
        let first = x_m.partition_point(|x| *x < a[0]);
        for (low, &x) in lowest[first..].iter_mut().zip(&x_m[first..]).take_while(|(_, x)| **x <= b[0]) {
            let z = if SAME_X_M < b[0] - a[0] { a[1] + (x - a[0]) / (b[0] - a[0]) * (b[1] - a[1]) } else { a[1].min(b[1]) };
            *low = low.min(z);
        }
    }
    lowest
}

/// The highest level that is nowhere above the straight pieces through the points and rises landward at most one in one.
fn limited(points: &[[f64; 2]]) -> Vec<[f64; 2]> {
    let mut result = vec![points[0]];
    let mut level = points[0][1];
    for pair in points.windows(2) {
        let (a, b) = (pair[0], pair[1]);
        let risen = level + b[0] - a[0];
        if risen <= b[1] {
            level = risen;
        } else {
            if level < a[1] {
                let width = b[0] - a[0];
                let run = (a[1] - level) / (1.0 - (b[1] - a[1]) / width);
                result.push([a[0] + run, level + run]);
            }
            level = b[1];
        }
        result.push([b[0], level]);
    }
    result
}

/// The same level without points on the straight line between their neighbors.
fn without_collinear(points: &[[f64; 2]]) -> Vec<[f64; 2]> {
    let mut kept: Vec<[f64; 2]> = Vec::with_capacity(points.len());
    for &p in points {
        if kept.last().is_some_and(|last| p[0] - last[0] <= BESIDE_M) {
            continue;
        }
        while 2 <= kept.len() {
            let (a, b) = (kept[kept.len() - 2], kept[kept.len() - 1]);
            let straight = a[1] + (b[0] - a[0]) / (p[0] - a[0]) * (p[1] - a[1]);
            if LEVEL_TOLERANCE_M < (straight - b[1]).abs() {
                break;
            }
            kept.pop();
        }
        kept.push(p);
    }
    kept
}
