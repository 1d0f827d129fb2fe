//! Local origin and dyadic grid, so that points that split a segment lie exactly on it.
use crate::geometry::Point;

/// Number of steps of the lattice on a segment: `2^20`.
pub(crate) const STEPS: u32 = 1 << 20;

/// Grid of the coordinates that the mesher works in, m.
///
/// # Guarantees
/// With coordinates within `e` of the origin, `2^(k-1) < e <= 2^k`, the unit is `2^(k-32)`: coordinates are whole numbers of at most 32 bits.
/// A difference of two then has 33 bits, times `j < 2^20` it has 53, so `a + (b - a) j / 2^20` has no rounding error and the point is exactly
/// collinear with `a` and `b`.
#[derive(Debug, Clone, Copy)]
pub(crate) struct Grid {
    origin: Point,
    unit: f64,
    extent: f64,
}

impl Grid {
    /// Grid over all points; they must be finite and not all equal.
    pub(crate) fn over(points_m: impl Iterator<Item = Point> + Clone) -> Self {
        let low = points_m.clone().fold([f64::INFINITY; 2], |m, p| [m[0].min(p[0]), m[1].min(p[1])]);
        let high = points_m.fold([f64::NEG_INFINITY; 2], |m, p| [m[0].max(p[0]), m[1].max(p[1])]);
        let extent = (high[0] - low[0]).max(high[1] - low[1]);
        // Room for the origin's own rounding below, which moves it by at most a sixteenth of the extent.
        let k = (0.75 * extent).log2().ceil();
        let coarse = (k - 3.0).exp2();
        let origin = [0, 1].map(|i| (0.5 * (low[i] + high[i]) / coarse).round() * coarse);
        Self { origin, unit: (k - 32.0).exp2(), extent }
    }

    /// Larger side of the box around all points, m.
    pub(crate) fn extent_m(&self) -> f64 {
        self.extent
    }

    /// Grid step in m.
    pub(crate) fn unit_m(&self) -> f64 {
        self.unit
    }

    /// Rounds local coordinates to the grid.
    pub(crate) fn round(&self, p: Point) -> Point {
        p.map(|v| (v / self.unit).round() * self.unit)
    }

    /// To local coordinates, not rounded.
    pub(crate) fn local(&self, p_m: Point) -> Point {
        [p_m[0] - self.origin[0], p_m[1] - self.origin[1]]
    }

    /// From local coordinates.
    pub(crate) fn global(&self, p: Point) -> Point {
        [p[0] + self.origin[0], p[1] + self.origin[1]]
    }
}

/// Point `j` of the lattice from `a` (0) to `b` ([`STEPS`]); exactly on the segment if both ends are on the grid.
pub(crate) fn lattice(a: Point, b: Point, j: u32) -> Point {
    let t = f64::from(j) / f64::from(STEPS);
    [a[0] + (b[0] - a[0]) * t, a[1] + (b[1] - a[1]) * t]
}

#[cfg(test)]
mod tests;
