//! Pore pressure of one situation at one depth: `Section` + water table + sea -> pressure at any point.
use fem_core::assembly::KinkLine;

use crate::model::{AboveTable, Groundwater, Model, SeaLevel, Situation};
use crate::section::Section;

mod table;

pub use table::Table;

/// Least distance by which a free face must lie below the table for a warning, m.
const DRAWDOWN_WORTH_SAYING_M: f64 = 0.1;

/// Water of one situation in a section.
#[derive(Debug, Clone, PartialEq)]
pub struct WaterField {
    /// The table after joining it to the sea or the back and after drawing it down to free faces.
    pub table: Table,
    /// How far the given table lies above the free face that draws it down most, m; 0 where it does not.
    pub drawdown_m: f64,
    /// Level of the sea on the face, m, and its unit weight, N/m3.
    pub sea: Option<(f64, f64)>,
    /// Unit weight of the ground's water, N/m3.
    water_n_per_m3: f64,
    /// Between these x the unit weight passes from the sea's to the ground's, m.
    mixing_x_m: [f64; 2],
    /// Water area ratio and largest suction above the table, Pa.
    suction: Option<(f64, f64)>,
}

/// Index of the water of each situation and one situation for each different water.
///
/// Situations that differ in nothing but their loads share one water; a situation without table and sea has none.
pub fn waters(model: &Model) -> (Vec<Option<usize>>, Vec<usize>) {
    let mut of_situation = Vec::with_capacity(model.situations.len());
    let mut first: Vec<usize> = Vec::new();
    for (s, situation) in model.situations.iter().enumerate() {
        if !is_wet(situation) {
            of_situation.push(None);
            continue;
        }
        let known = first.iter().position(|&f| same_water(&model.situations[f], situation));
        of_situation.push(Some(known.unwrap_or(first.len())));
        if known.is_none() {
            first.push(s);
        }
    }
    (of_situation, first)
}

fn is_wet(situation: &Situation) -> bool {
    matches!(situation.groundwater, Some(Groundwater::Table(_))) || matches!(situation.sea_level, SeaLevel::Level(_))
}

fn same_water(a: &Situation, b: &Situation) -> bool {
    let key = |s: &Situation| {
        (s.groundwater.clone(), s.sea_level, [s.water_unit_weight_n_per_m3, s.sea_unit_weight_n_per_m3], s.above_table.clone())
    };
    key(a) == key(b)
}

impl WaterField {
    /// Water of a situation; `None` where it is dry and off the face.
    ///
    /// The table goes on level beyond its landward end. At its seaward end it is joined straight to where the sea meets the rock,
    /// or to the back of the undercut where that is higher; a table that ends below the back goes on level instead of rising to
    /// it. Where the sea stands on the face and no table is given, the ground below sea level is full. Source: docs/theory.md,
    /// section 5.2.
    pub fn new(section: &Section, situation: &Situation) -> Option<Self> {
        if !is_wet(situation) {
            return None;
        }
        let sea = match situation.sea_level {
            SeaLevel::Level(z_m) => Some((z_m, situation.sea_unit_weight_n_per_m3)),
            SeaLevel::OffTheFace => None,
        };
        let shore = shore(section, sea.map(|s| s.0));
        let (given, from_x_m) = match &situation.groundwater {
            Some(Groundwater::Table(points)) => (joined(points, shore, sea.map(|s| s.0)), points[0][0]),
            _ => (vec![[shore[0], sea.map_or(shore[1], |s| s.0)]], shore[0]),
        };
        let (table, drawdown_m) = Table::drawn_down(section, &given, from_x_m.max(shore[0]), sea.map(|s| s.0));
        let suction = match &situation.above_table {
            AboveTable::Dry => None,
            AboveTable::Suction { saturation, suction_limit_pa, .. } => Some((*saturation, *suction_limit_pa)),
        };
        let mixing = (from_x_m - shore[0]).max(section.cliff_height_m());
        Some(Self {
            table,
            drawdown_m: if DRAWDOWN_WORTH_SAYING_M < drawdown_m { drawdown_m } else { 0.0 },
            sea,
            water_n_per_m3: situation.water_unit_weight_n_per_m3,
            mixing_x_m: [shore[0], shore[0] + mixing],
            suction,
        })
    }

    /// Pore pressure times its area ratio `alpha u_w` at a point, Pa, positive in compression; negative for suction.
    ///
    /// ```text
    /// below the table   gamma_w (z_t - z)                  alpha = 1
    /// above it          - S min(gamma_w (z - z_t), limit)    alpha = S
    /// ```
    pub fn pressure_pa(&self, p: [f64; 2]) -> f64 {
        let head = self.table.level_m(p[0]) - p[1];
        let full = self.unit_weight_n_per_m3(p[0]) * head;
        match self.suction {
            _ if 0.0 <= head => full,
            Some((ratio, limit)) => -ratio * (-full).min(limit),
            None => 0.0,
        }
    }

    /// Unit weight of the water in the ground at x, N/m3: the sea's as far as the sea reaches, then passing evenly to the ground's.
    fn unit_weight_n_per_m3(&self, x_m: f64) -> f64 {
        let Some((_, sea)) = self.sea else { return self.water_n_per_m3 };
        let [from, to] = self.mixing_x_m;
        sea + ((x_m - from) / (to - from)).clamp(0.0, 1.0) * (self.water_n_per_m3 - sea)
    }

    /// Pressure of the sea on the rock's surface at a level, Pa.
    pub fn sea_pressure_pa(&self, z_m: f64) -> f64 {
        self.sea.map_or(0.0, |(level, unit_weight)| unit_weight * (level - z_m).max(0.0))
    }

    /// Straight lines on which the pressure kinks inside a box of points.
    pub fn kinks(&self, points_m: &[[f64; 2]]) -> Vec<KinkLine> {
        let span = |k: usize| points_m.iter().fold([f64::INFINITY, f64::NEG_INFINITY], |s, p| [s[0].min(p[k]), s[1].max(p[k])]);
        let (x, z) = (span(0), span(1));
        let mut offsets = vec![0.0];
        offsets.extend(self.suction.map(|(_, limit)| limit / self.water_n_per_m3));
        let mut lines = self.table.lines_in(x, z, &offsets);
        if self.sea.is_some() {
            lines.extend(self.mixing_x_m.into_iter().filter(|m| x[0] < *m && *m < x[1]).map(|m| [m, -1.0, 0.0]));
        }
        lines
    }
}

/// Where the sea meets the rock farthest inland, or the back of the undercut (without one: the mouth) where that is higher, m.
fn shore(section: &Section, sea_level_m: Option<f64>) -> [f64; 2] {
    let back = section.back_m().unwrap_or(section.mouth_m());
    let Some(level) = sea_level_m.filter(|z| back[1] <= *z) else { return back };
    let brow = section.brow_m();
    let mut x_m = back[0];
    for segment in section.surface().segments() {
        for (x, _) in segment.line_hits([0.0, level], [1.0, 0.0]) {
            if level <= brow[1] {
                x_m = x_m.max(x);
            }
        }
    }
    [x_m, level]
}

/// The given table from the shore on: what lies seaward of the shore is not asked for where the sea stands, and a piece joins the
/// seaward end of a table that begins landward of it.
fn joined(points: &[[f64; 2]], shore: [f64; 2], sea_level_m: Option<f64>) -> Vec<[f64; 2]> {
    let first = points[0];
    if first[0] <= shore[0] {
        let Some(sea) = sea_level_m else { return points.to_vec() };
        let at_shore = [shore[0], Table::through(points).level_m(shore[0]).max(sea)];
        return std::iter::once(at_shore).chain(points.iter().copied().filter(|p| shore[0] < p[0])).collect();
    }
    let ends_at_sea = sea_level_m.is_some_and(|z| shore[1] <= z);
    if !ends_at_sea && first[1] < shore[1] {
        return points.to_vec();
    }
    std::iter::once(shore).chain(points.iter().copied()).collect()
}

#[cfg(test)]
mod tests;
