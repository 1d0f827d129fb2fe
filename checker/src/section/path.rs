//! A walk of straight and circular pieces: the surface of a section and every boundary made from it.
use super::arc::{CircleArc, Point, along, between, cross, distance, dot, norm, sub, unit};

/// A walk through points; each piece between neighbors is straight or circular.
#[derive(Debug, Clone, PartialEq)]
pub struct Path {
    points_m: Vec<[f64; 2]>,
    arcs: Vec<Option<CircleArc>>,
}

/// One piece of a [`Path`].
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Segment {
    /// Start, m.
    pub from_m: [f64; 2],
    /// End, m.
    pub to_m: [f64; 2],
    /// Its circle; `None` = straight.
    pub arc: Option<CircleArc>,
}

/// A place on a [`Path`].
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct OnPath {
    /// Index of the piece.
    pub segment: usize,
    /// Share of the piece's length, 0 to 1.
    pub share: f64,
}

impl Path {
    /// A path of straight pieces through `points_m`.
    ///
    /// # Panics
    /// Without a point.
    pub(crate) fn straight(points_m: Vec<Point>) -> Self {
        assert!(!points_m.is_empty(), "a path needs a point");
        let arcs = vec![None; points_m.len() - 1];
        Self { points_m, arcs }
    }

    /// Adds a point and the piece that leads to it.
    pub(crate) fn push(&mut self, point: Point, arc: Option<CircleArc>) {
        self.points_m.push(point);
        self.arcs.push(arc);
    }

    /// Adds the pieces of `other`, whose first point must be this path's last.
    pub(crate) fn extend(&mut self, other: &Self) {
        for segment in other.segments() {
            self.push(segment.to_m, segment.arc);
        }
    }

    /// Points in walking order, m.
    pub fn points_m(&self) -> &[[f64; 2]] {
        &self.points_m
    }

    /// Circle of each piece, one fewer than points.
    pub fn arcs(&self) -> &[Option<CircleArc>] {
        &self.arcs
    }

    /// Number of pieces.
    pub fn n_segments(&self) -> usize {
        self.arcs.len()
    }

    /// Piece `i`.
    ///
    /// # Panics
    /// If there is no such piece.
    pub fn segment(&self, i: usize) -> Segment {
        Segment { from_m: self.points_m[i], to_m: self.points_m[i + 1], arc: self.arcs[i] }
    }

    /// All pieces in walking order.
    pub fn segments(&self) -> impl DoubleEndedIterator<Item = Segment> + '_ {
        (0..self.n_segments()).map(|i| self.segment(i))
    }

    /// The part between two of its points, both included.
    pub(crate) fn slice(&self, first: usize, last: usize) -> Self {
        Self { points_m: self.points_m[first..=last].to_vec(), arcs: self.arcs[first..last].to_vec() }
    }

    /// The part between two places on it without pieces of no length, and the piece from which each of its pieces comes.
    pub(crate) fn part(&self, from: OnPath, to: OnPath) -> (Self, Vec<usize>) {
        let (mut part, mut origins) = (Self::straight(vec![self.point(from)]), Vec::new());
        for i in from.segment..=to.segment {
            let end = if i < to.segment { self.points_m[i + 1] } else { self.point(to) };
            if 0.0 < distance(part.points_m[part.points_m.len() - 1], end) {
                part.push(end, self.arcs[i]);
                origins.push(i);
            }
        }
        (part, origins)
    }

    /// The point at a place on it, m.
    pub fn point(&self, at: OnPath) -> [f64; 2] {
        self.segment(at.segment).point(at.share)
    }

    /// Length up to each point, m; as many as points, starting at 0.
    pub fn lengths_m(&self) -> Vec<f64> {
        let mut total = 0.0;
        std::iter::once(0.0)
            .chain(self.segments().map(|segment| {
                total += segment.length_m();
                total
            }))
            .collect()
    }

    /// The place at a length from the start; `lengths_m` as given by [`Self::lengths_m`].
    pub(crate) fn at_length(&self, lengths_m: &[f64], at_m: f64) -> OnPath {
        let segment = lengths_m.partition_point(|length| *length <= at_m).clamp(1, self.n_segments()) - 1;
        let length = lengths_m[segment + 1] - lengths_m[segment];
        OnPath { segment, share: if 0.0 < length { ((at_m - lengths_m[segment]) / length).clamp(0.0, 1.0) } else { 0.0 } }
    }

    /// The place nearest to `p` and its distance in m.
    pub fn nearest(&self, p: [f64; 2]) -> (OnPath, f64) {
        let mut best = (OnPath { segment: 0, share: 0.0 }, f64::INFINITY);
        for (i, segment) in self.segments().enumerate() {
            let share = segment.nearest(p);
            let d = distance(segment.point(share), p);
            if d < best.1 {
                best = (OnPath { segment: i, share }, d);
            }
        }
        best
    }

    /// Makes the place a point of the path and returns its index; a place within `tolerance_m` of a point is that point.
    pub(crate) fn insert(&mut self, at: OnPath, tolerance_m: f64) -> usize {
        let segment = self.segment(at.segment);
        let length = segment.length_m();
        if at.share * length <= tolerance_m {
            return at.segment;
        }
        if (1.0 - at.share) * length <= tolerance_m {
            return at.segment + 1;
        }
        self.points_m.insert(at.segment + 1, segment.point(at.share));
        self.arcs.insert(at.segment + 1, segment.arc);
        at.segment + 1
    }

    /// The same walk as straight pieces, each covering at most `step_rad` of an arc; the second list is the piece it came from.
    pub(crate) fn flattened(&self, step_rad: f64) -> (Vec<Point>, Vec<usize>) {
        let (mut points, mut origin) = (vec![self.points_m[0]], Vec::new());
        for (i, segment) in self.segments().enumerate() {
            let n = segment.arc.map_or(1, |arc| (arc.sweep_rad(segment.from_m, segment.to_m).abs() / step_rad).ceil().max(1.0) as usize);
            for k in 1..=n {
                points.push(segment.point(k as f64 / n as f64));
                origin.push(i);
            }
        }
        (points, origin)
    }

    /// Largest x of the walk, arcs included, m.
    pub(crate) fn largest_x_m(&self) -> f64 {
        self.segments().map(|segment| segment.largest_x().1).fold(self.points_m[0][0], f64::max)
    }

    /// The same walk without pieces whose ends are at most `shortest_m` apart.
    pub(crate) fn without_repeats(self, shortest_m: f64) -> Self {
        let mut path = Self::straight(vec![self.points_m[0]]);
        for segment in self.segments() {
            if shortest_m < distance(segment.from_m, segment.to_m) {
                path.push(segment.to_m, segment.arc);
            }
        }
        path
    }
}

impl Segment {
    /// Length, m.
    pub fn length_m(&self) -> f64 {
        self.arc.map_or_else(|| distance(self.from_m, self.to_m), |arc| arc.radius_m * arc.sweep_rad(self.from_m, self.to_m).abs())
    }

    /// Point at a share of the length, m; the ends are met exactly.
    pub fn point(&self, share: f64) -> [f64; 2] {
        if share <= 0.0 {
            return self.from_m;
        }
        if 1.0 <= share {
            return self.to_m;
        }
        match self.arc {
            None => between(self.from_m, self.to_m, share),
            Some(arc) => arc.turned(self.from_m, share * arc.sweep_rad(self.from_m, self.to_m)),
        }
    }

    /// Unit direction of the walk at a share of the length.
    pub fn direction(&self, share: f64) -> [f64; 2] {
        let Some(arc) = self.arc else { return unit(sub(self.to_m, self.from_m)) };
        let sign = arc.sweep_rad(self.from_m, self.to_m).signum();
        let r = sub(self.point(share), arc.center_m);
        unit([-sign * r[1], sign * r[0]])
    }

    /// Share of the point nearest to `p`.
    fn nearest(&self, p: Point) -> f64 {
        if let Some(arc) = self.arc {
            let (sweep, angle) = (arc.sweep_rad(self.from_m, self.to_m), arc.sweep_rad(self.from_m, p));
            let share = angle / sweep;
            if 0.0 <= share && share <= 1.0 {
                return share;
            }
            return if distance(p, self.from_m) <= distance(p, self.to_m) { 0.0 } else { 1.0 };
        }
        let v = sub(self.to_m, self.from_m);
        let square = dot(v, v);
        if 0.0 < square { (dot(sub(p, self.from_m), v) / square).clamp(0.0, 1.0) } else { 0.0 }
    }

    /// Share and value of the largest x.
    pub(crate) fn largest_x(&self) -> (f64, f64) {
        let ends = if self.from_m[0] <= self.to_m[0] { (1.0, self.to_m[0]) } else { (0.0, self.from_m[0]) };
        let Some(arc) = self.arc else { return ends };
        let extreme = [arc.center_m[0] + arc.radius_m, arc.center_m[1]];
        let share = arc.sweep_rad(self.from_m, extreme) / arc.sweep_rad(self.from_m, self.to_m);
        if 0.0 < share && share < 1.0 && ends.1 < extreme[0] { (share, extreme[0]) } else { ends }
    }

    /// Where the line from `origin` along the unit `direction` meets the piece: signed distances in m and shares.
    pub(crate) fn line_hits(&self, origin: Point, direction: Point) -> Vec<(f64, f64)> {
        match self.arc {
            None => {
                let (v, w) = (sub(self.to_m, self.from_m), sub(self.from_m, origin));
                let det = cross(direction, v);
                if det.abs() <= 1e-14 * norm(v) {
                    return Vec::new();
                }
                let share = cross(w, direction) / det;
                let ok = -1e-12 <= share && share <= 1.0 + 1e-12;
                if ok { vec![(cross(w, v) / det, share.clamp(0.0, 1.0))] } else { Vec::new() }
            }
            Some(arc) => {
                let w = sub(origin, arc.center_m);
                let (half, rest) = (dot(w, direction), dot(w, w) - arc.radius_m * arc.radius_m);
                let root = half * half - rest;
                if root < 0.0 {
                    return Vec::new();
                }
                let sweep = arc.sweep_rad(self.from_m, self.to_m);
                let hit = |d: f64| {
                    let share = arc.sweep_rad(self.from_m, along(origin, direction, d)) / sweep;
                    (-1e-12 <= share && share <= 1.0 + 1e-12).then_some((d, share.clamp(0.0, 1.0)))
                };
                [hit(-half - root.sqrt()), hit(-half + root.sqrt())].into_iter().flatten().collect()
            }
        }
    }

    /// Whether `p` lies between the arc and its chord.
    pub(crate) fn holds_between_arc_and_chord(&self, p: Point) -> bool {
        let Some(arc) = self.arc else { return false };
        let chord = sub(self.to_m, self.from_m);
        let side = cross(chord, sub(p, self.from_m));
        let far = cross(chord, sub(self.point(0.5), self.from_m));
        distance(p, arc.center_m) < arc.radius_m && 0.0 < side * far
    }
}

/// Whether `p` is inside the closed walk (its last point joins its first), arcs taken exactly.
pub(crate) fn contains(boundary: &Path, p: Point) -> bool {
    let closing = Segment { from_m: *boundary.points_m.last().expect("a path has a point"), to_m: boundary.points_m[0], arc: None };
    let mut inside = false;
    for segment in boundary.segments().chain(std::iter::once(closing)) {
        let (a, b) = (segment.from_m, segment.to_m);
        if (a[1] <= p[1]) != (b[1] <= p[1]) && p[0] < a[0] + (p[1] - a[1]) / (b[1] - a[1]) * (b[0] - a[0]) {
            inside = !inside;
        }
        if segment.holds_between_arc_and_chord(p) {
            inside = !inside;
        }
    }
    inside
}
