//! What is to be meshed: tagged lines of straight and circular pieces.

/// The lines of a section. They may cross, touch, overlap and stick out of the body.
#[derive(Debug, Clone, Default, PartialEq)]
pub struct Outline {
    /// All lines; where two overlap, the sides of the mesh there carry both tags.
    pub lines: Vec<Line>,
}

/// A chain of segments with one tag.
#[derive(Debug, Clone, PartialEq)]
pub struct Line {
    /// Corners in m, shape `[n_points][2]`; coincident neighbors are allowed.
    pub points_m: Vec<[f64; 2]>,
    /// Whether a last segment runs from the last point to the first.
    pub closed: bool,
    /// Number that the sides of the mesh on this line carry.
    pub tag: u32,
    /// Circle of the segment that starts at each point, `None` = straight. Empty = all straight; otherwise one entry a segment or a point.
    pub arcs: Vec<Option<Arc>>,
    /// Whether the line is a slit: the mesh is opened along it and both faces are free.
    pub open: bool,
}

/// The circle on which a segment lies. The segment is the shorter of the two arcs between its ends, so a sweep must stay under 180 degrees.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Arc {
    /// Center in m.
    pub center_m: [f64; 2],
    /// Radius in m.
    pub radius_m: f64,
}

impl Line {
    /// A chain of straight segments from the first point to the last.
    pub fn chain(points_m: Vec<[f64; 2]>, tag: u32) -> Self {
        Self { points_m, closed: false, tag, arcs: Vec::new(), open: false }
    }

    /// A chain of straight segments that returns to its first point.
    pub fn ring(points_m: Vec<[f64; 2]>, tag: u32) -> Self {
        Self { closed: true, ..Self::chain(points_m, tag) }
    }

    /// A chain of straight segments along which the mesh is opened.
    pub fn slit(points_m: Vec<[f64; 2]>, tag: u32) -> Self {
        Self { open: true, ..Self::chain(points_m, tag) }
    }

    /// Number of segments.
    pub fn n_segments(&self) -> usize {
        if self.closed { self.points_m.len() } else { self.points_m.len().saturating_sub(1) }
    }

    /// Start, end and circle of a segment.
    pub(crate) fn segment(&self, i: usize) -> ([f64; 2], [f64; 2], Option<Arc>) {
        let n = self.points_m.len();
        (self.points_m[i], self.points_m[(i + 1) % n], self.arcs.get(i).copied().flatten())
    }
}
