//! The mesh that the solver works on: nodes, six-node triangles with a region each, tagged edges.

/// "No element on that side" in [`TaggedEdge::left`] and [`TaggedEdge::right`].
pub const NO_ELEMENT: u32 = u32::MAX;

/// A plane mesh of six-node triangles.
///
/// # Guarantees
/// - every triangle runs counterclockwise: corners 0, 1, 2, then the nodes on the sides 01, 12, 20;
/// - nodes `0 .. n_corners` are corner nodes, the rest mid-side nodes; every node belongs to a triangle;
/// - two triangles that share a side share its three nodes, except across an opened slit;
/// - every boundary side carries at least one [`TaggedEdge`].
#[derive(Debug, Clone, Default, PartialEq)]
pub struct Mesh {
    /// Node coordinates in m, shape `[n_nodes][2]`.
    pub points_m: Vec<[f64; 2]>,
    /// Number of corner nodes; they come first.
    pub n_corners: usize,
    /// Node numbers of the triangles, shape `[n_elements][6]`.
    pub triangles: Vec<[u32; 6]>,
    /// Region number of each triangle, shape `[n_elements]`.
    pub regions: Vec<u32>,
    /// Sides that lie on an input line; a side on two lines appears once for each tag.
    pub edges: Vec<TaggedEdge>,
}

/// A side of the mesh that lies on an input line.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord)]
pub struct TaggedEdge {
    /// Tag of the input line.
    pub tag: u32,
    /// Start, end and mid-side node; runs in the direction of the input line.
    pub nodes: [u32; 3],
    /// Element on the left of start to end, or [`NO_ELEMENT`].
    pub left: u32,
    /// Element on the right of start to end, or [`NO_ELEMENT`].
    pub right: u32,
}
