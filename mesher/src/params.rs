//! What the mesher is told besides the geometry, and what it tells about its mesh.

/// Settings of the mesher.
#[derive(Debug, Clone, PartialEq)]
pub struct MeshParams {
    /// Smallest corner angle in rad away from sharp input corners; at most 30 degrees.
    pub smallest_angle_rad: f64,
    /// Points closer than this, and points this close to a line, become one; in m. `None` = 4e-6 of the larger extent, which is 1 mm on 250 m.
    pub tolerance_m: Option<f64>,
    /// Most corner nodes; beyond it meshing ends with [`crate::MeshError::TooManyVertices`].
    pub n_vertices_max: usize,
    /// Rounds of smoothing.
    pub n_smoothing_rounds: usize,
}

/// 28 degrees, tolerance from the extent, a million corner nodes, two rounds of smoothing.
///
/// 28 degrees is the largest angle at which refinement ended on every one of thousands of random sections; 30 is the ceiling of use.
impl Default for MeshParams {
    fn default() -> Self {
        Self { smallest_angle_rad: 28_f64.to_radians(), tolerance_m: None, n_vertices_max: 1_000_000, n_smoothing_rounds: 2 }
    }
}

/// Facts about a mesh.
#[derive(Debug, Clone, Default, PartialEq)]
pub struct MeshInfo {
    /// Smallest corner angle in rad over all triangles.
    pub smallest_angle_rad: f64,
    /// Smallest corner angle in rad over the triangles that do not fill a sharp input corner (under 60 degrees).
    pub smallest_angle_away_rad: f64,
    /// Number of triangles.
    pub n_triangles: usize,
    /// Number of corner nodes.
    pub n_corners: usize,
    /// Number of all nodes.
    pub n_nodes: usize,
    /// Number of patches of the body, that is of areas between lines.
    pub n_patches: usize,
    /// Nodes added by opening slits.
    pub n_slit_nodes: usize,
    /// Sides on an arc left straight because bending them would fold a triangle.
    pub n_straightened: usize,
    /// Triangles that stayed under the angle or over the size because no point could be placed.
    pub n_unimproved: usize,
    /// Patches whose widest inscribed triangle has an inradius under the tolerance.
    pub thin_patches: Vec<ThinPatch>,
    /// Largest distance in m by which an input point was moved onto another or onto the grid.
    pub snapped_m: f64,
    /// The tolerance used, m.
    pub tolerance_m: f64,
}

/// A patch so thin that it is likely an accident of the input.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct ThinPatch {
    /// A point in the patch, m.
    pub at_m: [f64; 2],
    /// Inradius of its fattest triangle, m.
    pub inradius_m: f64,
}
