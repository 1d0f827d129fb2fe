//! The named parts of the surface, as index ranges of its points.
use std::ops::RangeInclusive;

use super::path::{OnPath, Path};

/// A named part of the surface, in walking order.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub enum Feature {
    /// From the model's seaward side to the mouth.
    Platform,
    /// From the mouth to the back.
    Floor,
    /// The innermost tenth of the hollow.
    Back,
    /// From the back to the lip.
    Roof,
    /// From the lip (without a hollow: from the mouth) to the brow.
    Face,
    /// From the brow to the model's landward side.
    Ground,
}

/// All features in walking order.
pub(crate) const FEATURES: [Feature; 6] = [Feature::Platform, Feature::Floor, Feature::Back, Feature::Roof, Feature::Face, Feature::Ground];

/// Share of the smaller of depth and hollow height that counts as the back.
const BACK_SHARE: f64 = 0.1;

/// Indices of the surface's marked points.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub struct Features {
    /// Where the vertical through the lip meets the platform or floor.
    pub mouth: usize,
    /// Innermost point; `None` without a hollow.
    pub back: Option<usize>,
    /// Outer lower edge of the roof; without a hollow the point at which it would be.
    pub lip: usize,
    /// Edge of the ground.
    pub brow: usize,
    /// Last point.
    pub end: usize,
    /// Where the back begins and ends.
    back_part: [usize; 2],
}

impl Features {
    /// Marks of a surface whose hollow runs from `mouth` to `lip`; adds points where the back begins and ends.
    pub(crate) fn new(surface: &mut Path, [mouth, lip, brow]: [usize; 3], back: Option<usize>) -> Self {
        let mut marks = Self { mouth, back, lip, brow, end: surface.n_segments(), back_part: [mouth; 2] };
        let Some(back) = back else { return marks };
        let hollow = surface.slice(mouth, lip);
        let levels = || hollow.points_m().iter().map(|p| p[1]);
        let height = levels().fold(f64::NEG_INFINITY, f64::max) - levels().fold(f64::INFINITY, f64::min);
        let innermost = surface.points_m()[back][0];
        let width = BACK_SHARE * height.min(innermost - surface.points_m()[lip][0]);
        let crossing = |i: usize| {
            let hits = surface.segment(i).line_hits([innermost - width, 0.0], [0.0, 1.0]);
            hits.into_iter().map(|(_, share)| OnPath { segment: i, share }).next()
        };
        let roof = (back..lip).find_map(crossing).unwrap_or(OnPath { segment: lip - 1, share: 1.0 });
        let floor = (mouth..back).rev().find_map(crossing).unwrap_or(OnPath { segment: mouth, share: 0.0 });
        let mut insert = |at: OnPath| {
            let before = surface.n_segments();
            let index = surface.insert(at, 0.25 * width);
            (index, surface.n_segments() - before)
        };
        let (roof_start, added) = insert(roof);
        marks.back_part[1] = roof_start.max(back);
        marks.lip += added;
        let (floor_end, shift) = insert(floor);
        marks.back_part = [floor_end.min(back + shift), marks.back_part[1] + shift];
        marks.back = Some(back + shift);
        marks.lip += shift;
        marks.brow = brow + added + shift;
        marks.end = surface.n_segments();
        marks
    }

    /// Indices of the first and last point of a feature; a feature that is not there has one point.
    pub fn points(&self, feature: Feature) -> RangeInclusive<usize> {
        let [floor_end, roof_start] = self.back_part;
        let face = if self.back.is_some() { self.lip } else { self.mouth };
        match feature {
            Feature::Platform => 0..=self.mouth,
            Feature::Floor => self.mouth..=floor_end,
            Feature::Back => floor_end..=roof_start,
            Feature::Roof if self.back.is_some() => roof_start..=self.lip,
            Feature::Roof => self.mouth..=self.mouth,
            Feature::Face => face..=self.brow,
            Feature::Ground => self.brow..=self.end,
        }
    }

    /// The feature of a piece of the surface.
    pub fn of_segment(&self, segment: usize) -> Feature {
        let found = FEATURES.into_iter().find(|feature| segment < *self.points(*feature).end());
        found.unwrap_or(Feature::Ground)
    }
}
