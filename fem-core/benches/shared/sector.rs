//! Fixed graded meshes for the benches: a ring sector around an undercut back, finest there.
use fem_core::mesh::Mesh;
use fem_core::mesh::structured::{BOTTOM, Grid, RIGHT, grid};
use fem_core::supports::Supports;

/// Radius of the undercut back in m.
const INNER_RADIUS_M: f64 = 0.3;
/// Outer radius over inner radius.
const RADIUS_RATIO: f64 = 200.0;
/// Opening angle of the sector in rad.
const ANGLE_RAD: f64 = 4.7;

/// Mesh of about `n_unknowns` unknowns: circles spaced evenly in the logarithm of the radius, so that cells are near squares of every size.
pub(crate) fn sector(n_unknowns: usize) -> Mesh {
    let aspect = RADIUS_RATIO.ln() / ANGLE_RAD;
    // A cell brings four nodes.
    let n_v = (n_unknowns as f64 / 8.0 / aspect).sqrt();
    let cells = Grid { n_u: (aspect * n_v).round() as usize, n_v: n_v.round() as usize, curved: true };
    let polar = |[u, v]: [f64; 2]| {
        let (radius, angle) = (INNER_RADIUS_M * RADIUS_RATIO.powf(u), ANGLE_RAD * v);
        [radius * angle.cos(), radius * angle.sin()]
    };
    grid(cells, &polar, &|_, _| true)
}

/// The outer circle held across, one straight side held both ways.
pub(crate) fn supports(mesh: &Mesh) -> Supports {
    let mut supports = Supports::none(mesh.points_m.len());
    for edge in &mesh.edges {
        for node in edge.nodes {
            match edge.tag {
                BOTTOM => supports.fix(node),
                RIGHT => supports.prescribe(node, 0, 0.0),
                _ => {}
            }
        }
    }
    supports
}
