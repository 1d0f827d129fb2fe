//! Finds the size at a point without trying every source: a tree of boxes around sources, searched with a bound.
use super::{SizeField, SizeSource};
use crate::geometry::Point;
use crate::snap::Grid;

/// Most sources of a box without children.
const LEAF: usize = 6;

/// Index of a [`SizeField`] in the mesher's local coordinates.
///
/// # Guarantees
/// [`SizeIndex::size`] equals [`SizeField::evaluate_m`] up to the rounding of the change of coordinates. A box is passed over only if no source
/// in it can be smaller than what was found: a source at the distance `d` or more gives at least its size, and at least
/// `size - gradation * within + gradation * d`.
#[derive(Debug)]
pub(crate) struct SizeIndex {
    /// In the order of the leaves.
    sources: Vec<LocalSource>,
    /// The first is the root; children follow their parent.
    boxes: Vec<Box>,
    gradation: f64,
    largest: f64,
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
    low: Point,
    high: Point,
    /// Smallest size of a source inside.
    size: f64,
    /// Smallest `size - gradation * within`.
    floor: f64,
    start: u32,
    end: u32,
    /// Second child; the first is the next box. 0 for a leaf.
    second: u32,
}

impl SizeIndex {
    pub(crate) fn new(field: &SizeField, grid: &Grid) -> Self {
        let sources: Vec<LocalSource> = field.all_sources().map(|s| LocalSource::new(&s, grid)).collect();
        let mut index = Self { boxes: Vec::new(), gradation: field.gradation, largest: field.largest_m, sources };
        if !index.sources.is_empty() {
            index.build(0, index.sources.len());
        }
        index
    }

    /// Wanted size at a point in local coordinates.
    pub(crate) fn size(&self, p: Point) -> f64 {
        let mut best = self.largest;
        // A tree over 2^32 sources, halved at every level, is 32 deep.
        let mut stack = [(0_u32, 0.0_f64); 40];
        let mut depth = 0;
        if let Some(root) = self.boxes.first() {
            stack[0] = (0, self.bound(root, p));
            depth = 1;
        }
        while 0 < depth {
            depth -= 1;
            let (i, bound) = stack[depth];
            if best <= bound {
                continue;
            }
            let b = &self.boxes[i as usize];
            if b.second == 0 {
                for source in &self.sources[b.start as usize..b.end as usize] {
                    best = best.min(source.size_at(p, self.gradation));
                }
                continue;
            }
            let (first, second) = (i + 1, b.second);
            let bounds = [first, second].map(|c| (c, self.bound(&self.boxes[c as usize], p)));
            // The lower bound is searched first, so it goes on the stack last.
            let order = if bounds[0].1 < bounds[1].1 { [bounds[1], bounds[0]] } else { bounds };
            for child in order {
                stack[depth] = child;
                depth += 1;
            }
        }
        best
    }

    /// Least size that a source in the box can give at `p`.
    fn bound(&self, b: &Box, p: Point) -> f64 {
        let off = |k: usize| (b.low[k] - p[k]).max(p[k] - b.high[k]).max(0.0);
        let (x, y) = (off(0), off(1));
        b.size.max(b.floor + self.gradation * (x * x + y * y).sqrt())
    }

    /// Adds the box around sources `start..end` and its children, halving along the longer side.
    fn build(&mut self, start: usize, end: usize) {
        let own = self.boxes.len();
        self.boxes.push(Box::around(&self.sources[start..end], self.gradation, start));
        if end - start <= LEAF {
            return;
        }
        let b = &self.boxes[own];
        let axis = usize::from(b.high[0] - b.low[0] < b.high[1] - b.low[1]);
        let center = |s: &LocalSource| s.from[axis] + 0.5 * s.along[axis];
        let half = (end - start) / 2;
        self.sources[start..end].select_nth_unstable_by(half, |s, t| center(s).total_cmp(&center(t)));
        self.build(start, start + half);
        self.boxes[own].second = self.boxes.len() as u32;
        self.build(start + half, end);
    }
}

impl Box {
    fn around(sources: &[LocalSource], gradation: f64, start: usize) -> Self {
        let empty = Self {
            low: [f64::INFINITY; 2],
            high: [f64::NEG_INFINITY; 2],
            size: f64::INFINITY,
            floor: f64::INFINITY,
            start: start as u32,
            end: (start + sources.len()) as u32,
            second: 0,
        };
        sources.iter().fold(empty, |b, s| {
            let to = [s.from[0] + s.along[0], s.from[1] + s.along[1]];
            Self {
                low: [0, 1].map(|k| b.low[k].min(s.from[k]).min(to[k])),
                high: [0, 1].map(|k| b.high[k].max(s.from[k]).max(to[k])),
                size: b.size.min(s.size),
                floor: b.floor.min(s.size - gradation * s.within),
                ..b
            }
        })
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
