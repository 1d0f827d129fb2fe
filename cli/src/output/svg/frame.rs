//! The window of a picture: which metres are shown, at which scale, and the axes around them.
use checker::outcome::{Outcome, PointXz};

use super::draw::{Anchor, Svg};

/// An equal-scale window. Pixels run right and down.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Frame {
    /// Shown from and to, m.
    pub x_m: [f64; 2],
    /// Shown levels from and to, m.
    pub z_m: [f64; 2],
    /// Left edge of the window, px.
    pub left: f64,
    /// Top edge, px.
    pub top: f64,
    /// Scale, px per m.
    pub px_per_m: f64,
}

impl Frame {
    /// The window around the cliff that shows everything an outcome tells about, `width` px wide.
    pub fn around_cliff(outcome: &Outcome, left: f64, top: f64, width: f64) -> Self {
        let section = &outcome.section;
        let height_m = section.cliff_height_m.max(1.0);
        let brow = section.brow;
        let lowest_m = section.mouth.map_or(brow[1] - height_m, |mouth| mouth[1]);
        let mut right_m = brow[0] + 1.25 * height_m;
        let critical = outcome.critical_depth.iter().flat_map(|critical| [&critical.cautious, &critical.best_estimate]);
        for depth in critical {
            right_m = depth.rupture_line.iter().flatten().fold(right_m, |right, p| right.max(p[0] + 0.25 * height_m));
        }
        let far_m = outcome.numerics.extent.landward_x_m;
        let near_m = outcome.numerics.extent.seaward_x_m;
        let seaward_m = [section.lip, section.mouth].iter().flatten().fold(brow[0], |least, p| least.min(p[0]));
        let x_m = [(seaward_m - 0.6 * height_m).max(near_m), right_m.min(far_m)];
        let top_m = section.surface.iter().filter(|p| p[0] <= x_m[1]).fold(brow[1], |top, p| top.max(p[1]));
        let z_m = [(lowest_m - 0.22 * height_m).max(outcome.numerics.extent.base_z_m), top_m + 0.14 * height_m];
        Self { x_m, z_m, left, top, px_per_m: width / (x_m[1] - x_m[0]) }
    }

    /// Width of the window, px.
    pub fn width(&self) -> f64 {
        (self.x_m[1] - self.x_m[0]) * self.px_per_m
    }

    /// Height of the window, px.
    pub fn height(&self) -> f64 {
        (self.z_m[1] - self.z_m[0]) * self.px_per_m
    }

    /// A place on the picture, px.
    pub fn px(&self, at: PointXz) -> [f64; 2] {
        [self.left + (at[0] - self.x_m[0]) * self.px_per_m, self.top + (self.z_m[1] - at[1]) * self.px_per_m]
    }

    /// Whether a place lies in the window.
    pub fn shows(&self, at: PointXz) -> bool {
        self.x_m[0] <= at[0] && at[0] <= self.x_m[1] && self.z_m[0] <= at[1] && at[1] <= self.z_m[1]
    }

    /// Axes in m on the left and below.
    pub fn axes(&self, svg: &mut Svg) {
        let (right, bottom) = (self.left + self.width(), self.top + self.height());
        svg.rect([self.left, self.top, self.width(), self.height()], "frame");
        for x in ticks(self.x_m, 8) {
            let [px, _] = self.px([x, 0.0]);
            svg.line([[px, bottom], [px, bottom + 5.0]], "axis");
            svg.text([px, bottom + 18.0], Anchor::Middle, "tick", &tick_text(x, self.x_m));
        }
        for z in ticks(self.z_m, 8) {
            let [_, py] = self.px([0.0, z]);
            svg.line([[self.left - 5.0, py], [self.left, py]], "axis");
            svg.text([self.left - 8.0, py + 4.0], Anchor::End, "tick", &tick_text(z, self.z_m));
        }
        svg.text([0.5 * (self.left + right), bottom + 35.0], Anchor::Middle, "label", "distance x, landward (m)");
        svg.text_up([self.left - 42.0, 0.5 * (self.top + bottom)], "label", "level z (m)");
    }
}

/// Round numbers inside a range, at most about `wanted` of them.
pub fn ticks(range: [f64; 2], wanted: u32) -> Vec<f64> {
    let step = nice_step((range[1] - range[0]) / f64::from(wanted.max(1)));
    let first = (range[0] / step - 1e-9).ceil() as i64;
    let last = (range[1] / step + 1e-9).floor() as i64;
    (first..=last).map(|i| i as f64 * step).collect()
}

/// The next of 1, 2, 5, 10, ... that is at least `least`.
pub fn nice_step(least: f64) -> f64 {
    if !(least.is_finite() && 0.0 < least) {
        return 1.0;
    }
    let power = 10_f64.powf(least.log10().floor());
    [1.0, 2.0, 5.0, 10.0].into_iter().map(|factor| factor * power).find(|step| least <= step * (1.0 + 1e-9)).unwrap_or(10.0 * power)
}

/// A tick as text, with as many decimals as its range needs.
pub fn tick_text(value: f64, range: [f64; 2]) -> String {
    let step = nice_step((range[1] - range[0]) / 8.0);
    let decimals = (-step.log10().floor()).clamp(0.0, 6.0) as usize;
    crate::output::words::fixed(value, decimals).replace('-', "\u{2212}")
}

#[cfg(test)]
mod tests {
    use super::{nice_step, tick_text, ticks};

    #[test]
    fn ticks_are_round_and_inside() {
        assert_eq!(ticks([-3.0, 11.0], 5), [0.0, 5.0, 10.0]);
        assert_eq!(ticks([0.0, 1.0], 5), [0.0, 0.2, 0.4, 0.6000000000000001, 0.8, 1.0]);
        assert!((nice_step(0.03) - 0.05).abs() < 1e-12 && (nice_step(2.0) - 2.0).abs() < 1e-12);
        assert_eq!(tick_text(-0.4, [-1.0, 1.0]), "\u{2212}0.4");
    }
}
