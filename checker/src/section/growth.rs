//! How the hollow deepens: one continuous family of shapes from the straight line mouth to lip, through the surveyed hollow, to
//! any greater depth.
use super::arc::{CircleArc, Point, Stretch, between, stretched};
use super::path::Path;
use crate::model::Growth;

/// Depths closer together than this are the same, m.
pub(crate) const SAME_DEPTH_M: f64 = 1e-9;
/// Pieces shorter than this vanish, m.
const SAME_POINT_M: f64 = 1e-9;
/// Share of its surveyed width to which the seaward part shrinks before everything shrinks together, where the walk from mouth
/// to lip goes down anywhere: shrinking it to nothing would fold the roof against the face or itself.
const LEAST_SEAWARD_SHARE: f64 = 0.1;

/// The reference hollow, walked from mouth to lip, and its way of growing.
#[derive(Debug, Clone)]
pub(crate) struct Hollow {
    reference: Path,
    growth: Growth,
    depth_m: f64,
    height_m: f64,
    /// Width of the landward part that "advance" moves as it is.
    moved_m: f64,
    /// Whether the walk from mouth to lip goes down anywhere: shrinking its seaward part to nothing would fold it.
    folds: bool,
}

impl Hollow {
    /// A hollow from its walk, mouth first, lip last.
    pub(crate) fn new(reference: Path, growth: Growth) -> Self {
        let points = reference.points_m();
        let lip = points[points.len() - 1];
        let levels = || points.iter().map(|p| p[1]);
        let (low, high) = (levels().fold(f64::INFINITY, f64::min), levels().fold(f64::NEG_INFINITY, f64::max));
        let depth_m = reference.largest_x_m() - lip[0];
        let folds = points.windows(2).any(|pair| pair[1][1] + 1e-9 < pair[0][1]);
        Self { growth, depth_m, height_m: high - low, moved_m: (high - low).min(0.5 * depth_m), folds, reference }
    }

    /// The reference hollow.
    pub(crate) fn reference(&self) -> &Path {
        &self.reference
    }

    /// Highest less lowest level of the reference hollow, m.
    pub(crate) fn height_m(&self) -> f64 {
        self.height_m
    }

    /// Depth of the reference hollow, m.
    pub(crate) fn depth_m(&self) -> f64 {
        self.depth_m
    }

    fn mouth(&self) -> Point {
        self.reference.points_m()[0]
    }

    fn lip(&self) -> Point {
        let points = self.reference.points_m();
        points[points.len() - 1]
    }

    /// The hollow at a depth, walked from mouth to lip.
    ///
    /// Source: docs/theory.md eq. (3.6), docs/theory.md eq. (3.7).
    ///
    /// Every shape is the reference under a map that grows in x and grows in z, so that it cannot cross itself.
    /// "Advance": points landward of `x_back - w` are moved, those between the lip and there are scaled horizontally about the
    /// lip; `w = min(hollow height, half the reference depth)`. When the seaward part is used up the rest is scaled toward the
    /// line mouth to lip. "Stretch": all is scaled. At less than the reference depth, what lies above the lip or below the mouth
    /// is lowered or raised in the same ratio, so that slopes stay and depth 0 is the straight line.
    pub(crate) fn at_depth(&self, depth_m: f64) -> Path {
        if (depth_m - self.depth_m).abs() <= SAME_DEPTH_M {
            return self.reference.clone();
        }
        if depth_m <= SAME_DEPTH_M {
            return Path::straight(vec![self.mouth(), self.lip()]);
        }
        let seaward = self.depth_m - self.moved_m;
        let least = match self.growth {
            Growth::Stretch => return if self.depth_m < depth_m { self.stretch(depth_m) } else { self.shrunk(&self.reference, depth_m) },
            Growth::Advance if self.folds => LEAST_SEAWARD_SHARE,
            Growth::Advance => 0.0,
        };
        let smallest = self.moved_m + least * seaward;
        if smallest <= depth_m { self.advance(depth_m) } else { self.shrunk(&self.advance(smallest), depth_m) }
    }

    fn stretch(&self, depth_m: f64) -> Path {
        let (lip, ratio) = (self.lip()[0], depth_m / self.depth_m);
        self.mapped(&[lip], 1.0, &|x| if x <= lip { (1.0, 0.0) } else { (ratio, lip * (1.0 - ratio)) })
    }

    fn advance(&self, depth_m: f64) -> Path {
        let (lip, split) = (self.lip()[0], self.lip()[0] + self.depth_m - self.moved_m);
        let ratio = (depth_m - self.moved_m) / (self.depth_m - self.moved_m);
        let moved = depth_m - self.depth_m;
        self.mapped(&[lip, split], ratio.min(1.0), &|x| match x {
            x if x <= lip => (1.0, 0.0),
            x if x <= split => (ratio, lip * (1.0 - ratio)),
            _ => (1.0, moved),
        })
    }

    /// The reference under `x' = a x + c` with `(a, c)` chosen by x between `breaks`, and the excess in z scaled by `excess`.
    fn mapped(&self, breaks: &[f64], excess: f64, map: &dyn Fn(f64) -> (f64, f64)) -> Path {
        let level = |z: f64| self.squeezed_level(z, excess);
        let image = |p: Point, piece: (f64, f64)| [piece.0 * p[0] + piece.1, level(p[1])];
        let first = self.mouth();
        let mut path = Path::straight(vec![image(first, map(first[0]))]);
        for segment in self.reference.segments() {
            if let Some(arc) = segment.arc {
                let (scale, shift) = map(segment.point(0.5)[0]);
                push_arc(&mut path, &segment, &arc, &Stretch { a: scale, b: 0.0, c: shift });
                continue;
            }
            let mut stops = self.stops(segment.from_m, segment.to_m, breaks, excess);
            stops.push(segment.to_m);
            for p in stops {
                path.push(image(p, map(p[0])), None);
            }
        }
        path.without_repeats(SAME_POINT_M)
    }

    /// Points inside a straight piece at which the map bends.
    fn stops(&self, a: Point, b: Point, breaks: &[f64], excess: f64) -> Vec<Point> {
        let levels = if excess < 1.0 { vec![self.mouth()[1], self.lip()[1]] } else { Vec::new() };
        let in_x = breaks.iter().map(|x| (x - a[0]) / (b[0] - a[0]));
        let in_z = levels.iter().map(|z| (z - a[1]) / (b[1] - a[1]));
        let mut shares: Vec<f64> = in_x.chain(in_z).filter(|share| 1e-9 < *share && *share < 1.0 - 1e-9).collect();
        shares.sort_by(f64::total_cmp);
        shares.dedup_by(|p, q| (*p - *q).abs() < 1e-9);
        shares.into_iter().map(|share| between(a, b, share)).collect()
    }

    fn squeezed_level(&self, z: f64, ratio: f64) -> f64 {
        let (low, high) = (self.mouth()[1], self.lip()[1]);
        z.clamp(low.min(high), high) + ratio * ((z - high).max(0.0) + (z - low.min(high)).min(0.0))
    }

    /// A shape scaled toward the line mouth to lip until it is `depth_m` deep.
    fn shrunk(&self, shape: &Path, depth_m: f64) -> Path {
        let lip = self.lip();
        let vertical = (self.mouth()[0] - lip[0]).abs() <= 1e-9;
        let whole = shape.largest_x_m() - lip[0];
        if vertical {
            return self.toward_line(shape, depth_m / whole);
        }
        // A face that leans landward is passed before the hollow is deeper than its lip: find the share by halving.
        let (mut low, mut high) = (0.0, 1.0);
        for _ in 0..60 {
            let middle = 0.5 * (low + high);
            if self.toward_line(shape, middle).largest_x_m() - lip[0] < depth_m { low = middle } else { high = middle }
        }
        self.toward_line(shape, high)
    }

    fn toward_line(&self, shape: &Path, share: f64) -> Path {
        let (mouth, lip) = (self.mouth(), self.lip());
        let lean = if (lip[1] - mouth[1]).abs() <= 1e-9 { 0.0 } else { (lip[0] - mouth[0]) / (lip[1] - mouth[1]) };
        let line = |z: f64| mouth[0] + lean * (z.clamp(mouth[1].min(lip[1]), lip[1].max(mouth[1])) - mouth[1]);
        let image = |p: Point| {
            let z = self.squeezed_level(p[1], share);
            [line(z) + share * (p[0] - line(p[1])), z]
        };
        let map = Stretch { a: share, b: (1.0 - share) * lean, c: (1.0 - share) * (mouth[0] - lean * mouth[1]) };
        let mut path = Path::straight(vec![image(shape.points_m()[0])]);
        for segment in shape.segments() {
            if let Some(arc) = segment.arc {
                push_arc(&mut path, &segment, &arc, &map);
                continue;
            }
            let mut stops = self.stops(segment.from_m, segment.to_m, &[], share);
            stops.push(segment.to_m);
            for p in stops {
                path.push(image(p), None);
            }
        }
        path.without_repeats(SAME_POINT_M)
    }
}

/// Adds the image of an arc: an arc where it is only moved, a chain of arcs where it is stretched.
fn push_arc(path: &mut Path, segment: &super::path::Segment, arc: &CircleArc, map: &Stretch) {
    if (map.a - 1.0).abs() <= 1e-12 && map.b.abs() <= 1e-12 {
        path.push(map.point(segment.to_m), Some(arc.moved(map.c)));
        return;
    }
    for (point, arc) in stretched(segment.from_m, segment.to_m, arc, map) {
        path.push(point, arc);
    }
}
