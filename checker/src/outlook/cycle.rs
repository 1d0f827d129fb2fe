//! The cycle of break, lay-back and new undercut, and where the brow stands after it.
//!
//! The first collapse takes the ground back to the rupture line; the new face is that line, and a new undercut starts at 0 where the
//! old back was. Every later collapse comes when the undercut has grown by the critical depth again and moves the brow by that depth,
//! so that over many collapses the brow retreats as fast as the undercut deepens. The loose cap lies back from the brow of the day;
//! this does not add up. Theory: eq. (7.24).

/// How one sample's brow moves.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct BrowCycle {
    /// Undercut depth today, m.
    pub today_m: f64,
    /// Critical depth, m; infinite = it never breaks within the depths searched.
    pub critical_m: f64,
    /// Ground lost behind the brow by the first collapse, m.
    pub lost_m: f64,
    /// Lay-back of the loose cap behind the brow of the day, m.
    pub lay_back_m: f64,
}

impl BrowCycle {
    /// Distance behind today's brow at which the ground ends after the undercut has gained `gained_m`, m.
    ///
    /// `0` before the first collapse, then `lost + n D + lay-back` with `n = floor((gained - (D - D_today)) / D)` further collapses.
    pub fn edge_m(&self, gained_m: f64) -> f64 {
        let since_first = gained_m - (self.critical_m - self.today_m);
        if since_first < 0.0 || self.critical_m.is_infinite() {
            return 0.0;
        }
        self.lost_m + self.lay_back_m + self.critical_m * (since_first / self.critical_m).floor()
    }

    /// Depth that must be gained before the edge reaches `distance_m` behind today's brow, m; infinite when it never does.
    pub fn gain_to_reach_m(&self, distance_m: f64) -> f64 {
        if self.critical_m.is_infinite() {
            return f64::INFINITY;
        }
        let further = ((distance_m - self.lost_m - self.lay_back_m) / self.critical_m).ceil().max(0.0);
        self.critical_m - self.today_m + further * self.critical_m
    }

    /// Whether the first collapse alone reaches `distance_m` behind today's brow.
    pub fn first_reaches(&self, distance_m: f64) -> bool {
        distance_m <= self.lost_m + self.lay_back_m
    }
}

/// Ground lost behind the brow by a first collapse, by limit and depth, from the rupture lines.
#[derive(Debug, Clone, PartialEq)]
pub struct GroundLost {
    /// Depths, growing, m.
    pub depths_m: Vec<f64>,
    /// Ground lost, shape `[n_limits][n_depths]`, m.
    pub lost_m: Vec<Vec<f64>>,
}

impl GroundLost {
    /// Ground lost when a limit breaks at a depth, on straight lines between the depths, held beyond the ends, m.
    ///
    /// # Panics
    /// If the limit has no row.
    pub fn at_m(&self, i_limit: usize, depth_m: f64) -> f64 {
        let row = &self.lost_m[i_limit];
        let i = self.depths_m.partition_point(|d| *d < depth_m);
        if i == 0 {
            return row[0];
        }
        if i == self.depths_m.len() {
            return row[i - 1];
        }
        let share = (depth_m - self.depths_m[i - 1]) / (self.depths_m[i] - self.depths_m[i - 1]);
        row[i - 1] + share * (row[i] - row[i - 1])
    }
}

/// Lay-back of a loose cap of the given thickness that comes to rest at a slope, `thickness / tan(slope)`, m.
pub fn lay_back_m(thickness_m: f64, rest_slope_rad: f64) -> f64 {
    thickness_m / rest_slope_rad.tan()
}

#[cfg(test)]
mod tests;
