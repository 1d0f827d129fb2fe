//! Why a mesh could not be made.

/// Reasons for which [`crate::mesh`] gives up.
#[derive(Debug, Clone, PartialEq, thiserror::Error)]
#[non_exhaustive]
pub enum MeshError {
    /// There is no line with a segment.
    #[error("the outline has no segment")]
    NoLine,
    /// A coordinate is nan or infinite.
    #[error("line {line} (tag {tag}): point {point} is at ({x_m}, {y_m}) m")]
    NotFinite {
        /// Place of the line in the outline.
        line: usize,
        /// Its tag.
        tag: u32,
        /// Place of the point in the line.
        point: usize,
        /// x in m.
        x_m: f64,
        /// y in m.
        y_m: f64,
    },
    /// The list of arcs is neither empty nor as long as the list of segments or points.
    #[error("line {line} (tag {tag}) has {arcs} entries for arcs and {segments} segments")]
    ArcCount {
        /// Place of the line in the outline.
        line: usize,
        /// Its tag.
        tag: u32,
        /// Entries in the list of arcs.
        arcs: usize,
        /// Number of segments.
        segments: usize,
    },
    /// An end of an arc does not lie on its circle, or its radius is not positive.
    #[error("line {line} (tag {tag}): segment {segment} ends {off_m} m off its circle of radius {radius_m} m")]
    OffCircle {
        /// Place of the line in the outline.
        line: usize,
        /// Its tag.
        tag: u32,
        /// Place of the segment in the line.
        segment: usize,
        /// Distance of the worse end from the circle, m.
        off_m: f64,
        /// Radius, m.
        radius_m: f64,
    },
    /// A size, gradation or setting is out of its range.
    #[error("{what} must be {limit}, got {value}")]
    Setting {
        /// Which one.
        what: &'static str,
        /// Its range in words.
        limit: &'static str,
        /// The value given.
        value: f64,
    },
    /// No patch of the outline belongs to the body.
    #[error("no part of the outline belongs to the body: its lines do not enclose any, or the region is void everywhere")]
    NoBody,
    /// Splitting lines at each other did not come to an end.
    #[error("lines cross each other in too many places closer than the tolerance of {tolerance_m} m near ({x_m:.3}, {y_m:.3}) m")]
    Noding {
        /// The tolerance, m.
        tolerance_m: f64,
        /// x of a place, m.
        x_m: f64,
        /// y of a place, m.
        y_m: f64,
    },
    /// The wanted sizes or nearly touching lines ask for more corner nodes than allowed.
    #[error("the mesh needs more than {limit} corner nodes, the last ones near ({x_m:.3}, {y_m:.3}) m; ask for larger elements there")]
    TooManyVertices {
        /// The limit.
        limit: usize,
        /// x of the last triangle to be refined, m.
        x_m: f64,
        /// y of the last triangle to be refined, m.
        y_m: f64,
    },
}
