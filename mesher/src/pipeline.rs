//! The steps in order: `Outline` -> `Mesh` + [`MeshInfo`].
use fem_core::mesh::Mesh;

use crate::curve::strands;
use crate::error::MeshError;
use crate::geometry::{Point, sine_squared_of_smallest_angle};
use crate::node::node;
use crate::outline::{Arc, Outline};
use crate::params::{MeshInfo, MeshParams};
use crate::patch::{Region, carve};
use crate::pieces::cut;
use crate::quadratic::{Origins, upgrade};
use crate::refine::{Refined, refine};
use crate::sharp::Corners;
use crate::size::{SizeField, SizeIndex};
use crate::slit::open_slits;
use crate::smooth::{onto_arcs, smooth};
use crate::snap::Grid;
use crate::triangulation::Triangulation;
use crate::validate::validate;

/// Share of the extent that is the tolerance unless given: 1 mm on 250 m.
const TOLERANCE: f64 = 4e-6;
/// The tolerance is at least this many steps of the grid.
const TOLERANCE_STEPS: f64 = 4.0;
/// Further tries where moving vertices onto arcs made angles too small; one is needed in about one of 300 random cliffs.
const RETRIES: usize = 2;

/// Meshes an outline with six-node triangles.
///
/// | name      | meaning                                                                                                   |
/// |-----------|-----------------------------------------------------------------------------------------------------------|
/// | `outline` | tagged lines; they may cross, touch, overlap, come close, stick out of the body                           |
/// | `region`  | number of the region at a point well inside a patch, `None` = void; asked once a patch                    |
/// | `size`    | wanted edge lengths                                                                                       |
///
/// # Guarantees
/// - everything [`Mesh`] promises; an edge on several lines appears once for each tag, in the direction of its line;
/// - corner nodes on straight lines lie on them to rounding, all nodes on arcs lie on their circle; *exception:* input points moved by at most
///   `snapped_m`, and sides counted in `n_straightened`;
/// - no corner angle under `smallest_angle_rad` away from sharp input corners; *exceptions:* triangles counted in `n_unimproved`, and a few beside
///   arcs if two retries did not help. [`MeshInfo::smallest_angle_away_rad`] tells of the finished mesh;
/// - the same input gives the same mesh, bit by bit.
///
/// # Errors
/// [`MeshError`]: input without meaning, no body, more corner nodes than allowed.
///
/// ```
/// use mesher::{Line, MeshParams, Outline, SizeField, mesh};
/// let square = Line::ring(vec![[0.0, 0.0], [1.0, 0.0], [1.0, 1.0], [0.0, 1.0]], 1);
/// let (mesh, info) = mesh(&Outline { lines: vec![square] }, &|_| Some(0), &SizeField::uniform(0.25), &MeshParams::default())?;
/// assert!((mesh.region_areas_m2()[0] - 1.0).abs() < 1e-12);
/// assert!(info.smallest_angle_rad.to_degrees() > 28.0);
/// # Ok::<(), mesher::MeshError>(())
/// ```
pub fn mesh(
    outline: &Outline,
    region: &dyn Fn([f64; 2]) -> Option<u32>,
    size: &SizeField,
    params: &MeshParams,
) -> Result<(Mesh, MeshInfo), MeshError> {
    validate(outline, size, params)?;
    // Step 1: local coordinates.
    let grid = Grid::over(outline.lines.iter().flat_map(|line| line.points_m.iter().copied()));
    let tolerance = params.tolerance_m.unwrap_or(TOLERANCE * grid.extent_m()).max(TOLERANCE_STEPS * grid.unit_m());
    let sizes = SizeIndex::new(size, &grid);
    // Step 2: triangles. Vertices that refinement put inside chords move onto the circle; where that costs too much angle, the arcs are broken
    // there from the start.
    let input = Input { outline, grid, tolerance, label: region, params };
    let mut draft = input.draft(&sizes, &[])?;
    for _ in 0..RETRIES {
        if draft.moved.is_empty() || params.smallest_angle_rad <= draft.info.smallest_angle_away_rad {
            break;
        }
        draft = input.draft(&sizes, &draft.moved)?;
    }
    // Step 3: slits, six nodes, facts.
    let Draft { refined: Refined { mut body, pieces, .. }, arcs, mut info, .. } = draft;
    info.n_slit_nodes = open_slits(&mut body.triangulation, &pieces, &body.segments);
    let origins = Origins { pieces: &pieces, segments: &body.segments, arcs: &arcs };
    let (mesh, n_straightened) = upgrade(&body.triangulation, origins, &grid);
    info.n_straightened = n_straightened;
    (info.n_triangles, info.n_corners, info.n_nodes) = (mesh.triangles.len(), mesh.n_corners, mesh.points_m.len());
    Ok((mesh, info))
}

struct Input<'a> {
    outline: &'a Outline,
    grid: Grid,
    tolerance: f64,
    label: &'a dyn Fn([f64; 2]) -> Option<u32>,
    params: &'a MeshParams,
}

/// A smoothed triangulation, not yet opened.
struct Draft {
    refined: Refined,
    arcs: Vec<Arc>,
    /// Where vertices were moved onto an arc, in local coordinates.
    moved: Vec<Point>,
    info: MeshInfo,
}

impl Input<'_> {
    fn draft(&self, sizes: &SizeIndex, breaks_at: &[Point]) -> Result<Draft, MeshError> {
        let Self { outline, grid, tolerance, label, params } = self;
        // Step 1: lines split at each other and into pieces of the wanted size.
        let (strands, arcs) = strands(outline, grid, sizes, *tolerance, breaks_at);
        let noded = node(&strands, grid, *tolerance)?;
        let cut = cut(&noded, sizes);
        // Step 2: the triangulation of the body.
        let [x_m, y_m] = grid.global(noded.points[0]);
        let all = Triangulation::of(&cut).ok_or(MeshError::Noding { tolerance_m: *tolerance, x_m, y_m })?;
        let body = carve(&all, &noded, &cut, *tolerance, &Region { label: *label, grid: *grid }).ok_or(MeshError::NoBody)?;
        // Step 3: sizes, angles, shapes.
        let mut refined = refine(body, cut.parts, sizes, grid, params)?;
        let moved = onto_arcs(&mut refined, &arcs);
        smooth(&mut refined, params.n_smoothing_rounds);
        let info = MeshInfo { snapped_m: noded.snapped_m, tolerance_m: *tolerance, ..facts(&refined) };
        Ok(Draft { refined, arcs, moved, info })
    }
}

/// Angles and counts of a refined body.
fn facts(refined: &Refined) -> MeshInfo {
    let of = &refined.body.triangulation;
    let corners = Corners { segments: &refined.body.segments, segment_of: &refined.body.segment_of, sharp: &refined.sharp };
    let (mut overall, mut away) = (1.0_f64, 1.0_f64);
    for t in 0..of.corners.len() {
        let [a, b, c] = of.corner_points(t);
        let sine_squared = sine_squared_of_smallest_angle(a, b, c);
        overall = overall.min(sine_squared);
        if sine_squared < away && !corners.fills_a_corner(of, t) {
            away = sine_squared;
        }
    }
    MeshInfo {
        smallest_angle_rad: overall.sqrt().asin(),
        smallest_angle_away_rad: away.sqrt().asin(),
        n_patches: refined.body.n_patches,
        thin_patches: refined.body.thin.clone(),
        n_unimproved: refined.n_unimproved,
        ..MeshInfo::default()
    }
}
