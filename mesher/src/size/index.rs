//! Finds the few sources that can govern the size at a point: a quadtree of candidate lists, grown where it is asked.
use super::{SizeField, SizeSource};
use crate::geometry::Point;
use crate::snap::Grid;

/// A box with more candidates than this may be divided.
const CANDIDATES: u32 = 6;
/// A box is divided once it was asked this often: dividing costs as much as four answers, and pays only where many more are to come.
const VISITS: u32 = 6;
/// Most divisions: a box of the last level is 2^-14 of the extent wide.
const LEVELS: u8 = 14;
/// "No child yet".
const NONE: u32 = u32::MAX;

/// Index of a [`SizeField`] in the mesher's local coordinates.
///
/// # Guarantees
/// [`SizeIndex::size`] equals [`SizeField::evaluate_m`] up to the rounding of the change of coordinates. A source is left out of a box only if
/// it cannot govern anywhere in it: with the box's center `c` and half diagonal `r`, every value changes by at most `gradation * r` inside, so
/// one that exceeds the smallest at `c` by more than `2 * gradation * r` stays larger.
#[derive(Debug)]
pub(crate) struct SizeIndex {
    sources: Vec<LocalSource>,
    gradation: f64,
    largest: f64,
    boxes: Vec<Box>,
    lists: Vec<u32>,
    /// Values at the center of the box being divided.
    values: Vec<f64>,
}

#[derive(Debug, Clone, Copy)]
struct LocalSource {
    from: Point,
    along: Point,
    inverse_length_squared: f64,
    within: f64,
    size: f64,
}

#[derive(Debug, Clone, Copy)]
struct Box {
    center: Point,
    half: f64,
    level: u8,
    first_child: u32,
    start: u32,
    len: u32,
    visits: u32,
}

impl SizeIndex {
    /// Index over the whole extent of a grid.
    pub(crate) fn new(field: &SizeField, grid: &Grid) -> Self {
        let sources: Vec<LocalSource> = field.all_sources().map(|s| LocalSource::new(&s, grid)).collect();
        let lists: Vec<u32> = (0..sources.len() as u32).collect();
        let root =
            Box { center: [0.0, 0.0], half: grid.extent_m(), level: 0, first_child: NONE, start: 0, len: sources.len() as u32, visits: 0 };
        Self { sources, gradation: field.gradation, largest: field.largest_m, boxes: vec![root], lists, values: Vec::new() }
    }

    /// Wanted size at a point in local coordinates.
    pub(crate) fn size(&mut self, p: Point) -> f64 {
        let mut at = 0;
        loop {
            let b = self.boxes[at];
            if b.first_child == NONE {
                let inside = (p[0] - b.center[0]).abs() <= b.half && (p[1] - b.center[1]).abs() <= b.half;
                if b.len <= CANDIDATES || LEVELS <= b.level || b.visits < VISITS || !inside {
                    self.boxes[at].visits += 1;
                    return self.smallest(b, p);
                }
                self.divide(at);
            } else {
                let east = usize::from(b.center[0] < p[0]);
                let north = usize::from(b.center[1] < p[1]);
                at = b.first_child as usize + east + 2 * north;
            }
        }
    }

    fn smallest(&self, b: Box, p: Point) -> f64 {
        let list = &self.lists[b.start as usize..(b.start + b.len) as usize];
        list.iter().map(|&s| self.sources[s as usize].size_at(p, self.gradation)).fold(self.largest, f64::min)
    }

    /// Gives a box four children, each with the candidates that can govern in it.
    fn divide(&mut self, at: usize) {
        let parent = self.boxes[at];
        self.boxes[at].first_child = self.boxes.len() as u32;
        let half = 0.5 * parent.half;
        for (dx, dy) in [(-half, -half), (half, -half), (-half, half), (half, half)] {
            let center = [parent.center[0] + dx, parent.center[1] + dy];
            let (start, len) = self.candidates(parent, center, half);
            self.boxes.push(Box { center, half, level: parent.level + 1, first_child: NONE, start, len, visits: 0 });
        }
    }

    fn candidates(&mut self, parent: Box, center: Point, half: f64) -> (u32, u32) {
        self.values.clear();
        let mut smallest = self.largest;
        for i in parent.start..parent.start + parent.len {
            let value = self.sources[self.lists[i as usize] as usize].size_at(center, self.gradation);
            smallest = smallest.min(value);
            self.values.push(value);
        }
        let bound = smallest + 2.0 * self.gradation * half * std::f64::consts::SQRT_2;
        let start = self.lists.len() as u32;
        for k in 0..self.values.len() {
            if self.values[k] <= bound {
                self.lists.push(self.lists[parent.start as usize + k]);
            }
        }
        (start, self.lists.len() as u32 - start)
    }
}

impl LocalSource {
    fn new(source: &SizeSource, grid: &Grid) -> Self {
        let (from, to) = (grid.local(source.from_m), grid.local(source.to_m));
        let along = [to[0] - from[0], to[1] - from[1]];
        let length_squared = along[0] * along[0] + along[1] * along[1];
        let inverse_length_squared = if 0.0 < length_squared { 1.0 / length_squared } else { 0.0 };
        Self { from, along, inverse_length_squared, within: source.within_m, size: source.size_m }
    }

    fn size_at(&self, p: Point, gradation: f64) -> f64 {
        let d = [p[0] - self.from[0], p[1] - self.from[1]];
        let t = ((d[0] * self.along[0] + d[1] * self.along[1]) * self.inverse_length_squared).clamp(0.0, 1.0);
        let (x, y) = (d[0] - t * self.along[0], d[1] - t * self.along[1]);
        self.size + gradation * ((x * x + y * y).sqrt() - self.within).max(0.0)
    }
}
