//! Sizes of the mesh: first from the geometry, then from the errors of the checks.
//!
//! The second and later meshes follow a dual-weighted estimate: an element matters as far as its own stress error meets the
//! influence of the governing checks on it.
//!
//! ```text
//! e_K = eta_K(u) * sum_checks eta_K(z_check),      K z_check = dU/du       h_new = h_K (tau / e_K)^(1/6)
//! ```
//!
//! with `eta` the energy norm of recovered minus unrecovered stress (Zienkiewicz & Zhu 1992) and `tau` chosen so that the new
//! mesh has the wanted number of triangles. The exponent is that of quadratic triangles in the plane, `1/(2p + 2)` with p = 2.
use std::sync::Arc;

use fem_core::error::{Field, energy_errors};
use fem_core::mesh::Mesh;
use fem_core::tensor::{major, minor};
use mesher::{MeshParams, SizeField, SizeSource};

use super::geometry::Geometry;
use super::record::{Context, PROBE_FLOOR};
use crate::analysis::samples::Weighted;
use crate::analysis::{AnalysisError, Stress};
use crate::demand::{Evaluation, Found, InputCase, place_utilization};
use crate::model::{Headline, Probe};
use crate::section::{Feature, Section};

/// Gradation of element size: growth per distance.
const GRADATION: f64 = 0.3;
/// Triangles of the next mesh, times those of the last.
const GROWTH: f64 = 2.5;
/// Limits of the change of size from one mesh to the next.
const SIZE_CHANGE: [f64; 2] = [0.25, 1.5];

/// Size at a corner that points into the rock, in averaging lengths.
const CORNER_SIZE: f64 = 0.12;
/// Turn of the surface beyond which a corner counts as sharp, rad (45 degrees).
const SHARP_RAD: f64 = std::f64::consts::FRAC_PI_4;

/// How far a mesh may go.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub struct Budget {
    /// Most triangles of the last mesh.
    pub triangles: usize,
}

/// Size field of the first mesh, from averaging length and geometry.
pub(super) fn first_sizes(section: &Section, averaging_length_m: f64, probes: &[Probe]) -> SizeField {
    let l = averaging_length_m;
    let h = section.cliff_height_m();
    let mut sources = Vec::new();
    let reach = section.brow_m()[0] + 2.0 * h;
    for i in 0..section.surface().n_segments() {
        let segment = section.surface().segment(i);
        let size_m = match section.feature_of(i) {
            Feature::Back | Feature::Roof => 0.4 * l,
            Feature::Floor | Feature::Face => 0.8 * l,
            Feature::Ground if segment.point(0.0)[0] < reach => 1.5 * l,
            Feature::Ground | Feature::Platform => continue,
        };
        let to = segment.point(1.0);
        sources.push(SizeSource::segment(segment.point(0.0), [to[0].min(reach), to[1]], size_m));
    }
    sources.push(SizeSource::point(section.lip_m(), 0.25 * l));
    sources.extend(sharp_corners(section).into_iter().map(|corner| SizeSource::point(corner, CORNER_SIZE * l)));
    sources.extend(contact_ends(section).into_iter().map(|end| SizeSource::point(end, CORNER_SIZE * l)));
    for probe in probes {
        sources.push(SizeSource::point(probe.at_m, probe.over_m.unwrap_or(l).max(0.25 * l)));
    }
    SizeField { largest_m: 0.35 * h, gradation: GRADATION, sources, background: Vec::new() }
}

/// Corners of the hollow and the face that point into the rock by more than [`SHARP_RAD`]: the stress is singular there.
fn sharp_corners(section: &Section) -> Vec<[f64; 2]> {
    let surface = section.surface();
    let watched = |i: usize| !matches!(section.feature_of(i), Feature::Ground | Feature::Platform);
    let corner = |i: usize| {
        let (a, b) = (surface.segment(i - 1).direction(1.0), surface.segment(i).direction(0.0));
        // the rock lies on the right of the walk: a turn to the right cuts into it
        let turn = (a[0] * b[1] - a[1] * b[0]).atan2(a[0] * b[0] + a[1] * b[1]);
        (turn < -SHARP_RAD).then(|| surface.segment(i).point(0.0))
    };
    (1..surface.n_segments()).filter(|&i| watched(i - 1) || watched(i)).filter_map(corner).collect()
}

/// Where contacts meet the hollow or the face: two stiffnesses at a free surface, a weak singularity.
fn contact_ends(section: &Section) -> Vec<[f64; 2]> {
    let near = 1e-3 * section.cliff_height_m();
    let watched = |p: &[f64; 2]| {
        let (at, distance) = section.surface().nearest(*p);
        distance <= near && !matches!(section.feature_of(at.segment), Feature::Ground | Feature::Platform)
    };
    section.contact_lines().iter().flat_map(|c| [c.points_m[0], c.points_m[c.points_m.len() - 1]]).filter(watched).collect()
}

/// Makes the mesh of a section for a size field.
///
/// # Errors
/// [`AnalysisError::Mesh`] with the mesher's own words.
pub(super) fn make_mesh(section: &Section, size: &SizeField) -> Result<(Arc<Mesh>, f64), AnalysisError> {
    let region = |p: [f64; 2]| section.region(p);
    let (mesh, info) = mesher::mesh(&section.outline(), &region, size, &MeshParams::default())
        .map_err(|e| AnalysisError::Mesh { depth_m: section.depth_m(), reason: e.to_string() })?;
    Ok((Arc::new(mesh), info.smallest_angle_away_rad))
}

/// Sizes of the next mesh from the errors of the last one.
pub(super) fn next_sizes(
    ctx: &Context<'_>,
    section: &Section,
    geometry: &Geometry,
    stress: &Stress,
    (evaluation, found): (&Evaluation<'_>, &[Found]),
) -> Result<SizeField, AnalysisError> {
    let inputs = match ctx.model.checks.headline {
        Headline::Cautious => InputCase::Cautious,
        Headline::BestEstimate => InputCase::BestEstimate,
    };
    let headline: Vec<&Found> =
        found.iter().filter(|f| f.inputs == inputs && f.index < geometry.places.len() && f.kind.is_local()).collect();
    let mut errors = vec![0.0; stress.mesh.triangles.len()];
    if let Some(worst) = headline.iter().max_by(|a, b| a.result.utilization.unwrap_or(0.0).total_cmp(&b.result.utilization.unwrap_or(0.0)))
    {
        let coefficients = stress.cases.coefficients(ctx.model, &worst.state);
        let primal = energy_error(stress, &stress.displacements_of(&coefficients), &stress.recovered_of(&coefficients));
        let mut duals = dual_loads(stress, geometry, evaluation, &headline);
        duals.extend(probe_loads(ctx, stress, geometry, (&coefficients, section)));
        for z in stress.solve_loads(&duals)? {
            let dual = energy_error(stress, &z, &stress.recover(&z));
            for ((e, p), d) in errors.iter_mut().zip(&primal).zip(dual) {
                *e += p * d;
            }
        }
    }
    let first = first_sizes(section, ctx.averaging_length_m, &[]);
    Ok(SizeField { background: wanted_sizes(stress, &errors), sources: Vec::new(), ..first })
}

fn energy_error(stress: &Stress, displacements: &[f64], recovered: &[[f64; 3]]) -> Vec<f64> {
    energy_errors(&stress.mesh, &stress.materials, stress.layout(), Field { displacements_m: displacements, recovered_pa: recovered })
}

/// Load vectors whose solutions are the influence of the stress field on each check, scaled to the check's own size.
fn dual_loads(stress: &Stress, geometry: &Geometry, evaluation: &Evaluation<'_>, found: &[&Found]) -> Vec<Vec<f64>> {
    let mut seen: Vec<usize> = Vec::new();
    let mut loads = Vec::new();
    for f in found {
        if seen.contains(&f.index) {
            continue;
        }
        seen.push(f.index);
        let coefficients = stress.cases.coefficients(evaluation.model, &f.state);
        let tensor = crate::analysis::load_cases::superpose(&coefficients, &evaluation.places[f.index].fine);
        let Some(gradient) = gradient(evaluation, f, tensor) else { continue };
        let scale = 1.0 / f.result.utilization.unwrap_or(1.0).max(1.0);
        let place = &geometry.places[f.index];
        loads.push(functional(stress, &place.samples, place.layer, gradient.map(|g| scale * g)));
    }
    loads
}

/// One load vector a probe: all components of its stress together, relative to its size.
fn probe_loads(ctx: &Context<'_>, stress: &Stress, geometry: &Geometry, (coefficients, section): (&[f64], &Section)) -> Vec<Vec<f64>> {
    let load = |(samples, layer): &(Vec<Weighted>, usize)| {
        let tensor = crate::analysis::load_cases::superpose(coefficients, &stress.mean_pa(section, samples, *layer));
        let size = major(tensor).abs().max(minor(tensor).abs()).max(PROBE_FLOOR * ctx.overburden_scale_pa());
        functional(stress, samples, *layer, [1.0 / size; 3])
    };
    geometry.probes.iter().flatten().map(load).collect()
}

/// Change of a check's utilization with the three components of its averaged tensor, per Pa, by central differences.
fn gradient(evaluation: &Evaluation<'_>, found: &Found, tensor: [f64; 3]) -> Option<[f64; 3]> {
    let size = tensor.iter().map(|t| t.abs()).fold(1.0, f64::max);
    let step = 1e-4 * size;
    let mut gradient = [0.0; 3];
    for k in 0..3 {
        let moved = |by: f64| {
            let mut t = tensor;
            t[k] += by;
            place_utilization(evaluation, found, t)
        };
        gradient[k] = (moved(step)? - moved(-step)?) / (2.0 * step);
    }
    Some(gradient)
}

/// Load vector of the functional `mean over the samples of gradient : D eps(u)`.
fn functional(stress: &Stress, samples: &[Weighted], layer: usize, gradient: [f64; 3]) -> Vec<f64> {
    let mut load = vec![0.0; 2 * stress.mesh.points_m.len()];
    for at in stress.place(samples, layer) {
        stress.add_stress_functional(at, gradient, &mut load);
    }
    load
}

/// Centroid and size (side of the equilateral triangle of the same area) of every triangle, m.
fn sizes(mesh: &Mesh) -> Vec<([f64; 2], f64)> {
    let size = |t: &[u32; 6]| {
        let [a, b, c] = [0, 1, 2].map(|k| mesh.points_m[t[k] as usize]);
        let area = 0.5 * ((b[0] - a[0]) * (c[1] - a[1]) - (b[1] - a[1]) * (c[0] - a[0]));
        ([(a[0] + b[0] + c[0]) / 3.0, (a[1] + b[1] + c[1]) / 3.0], (4.0 * area / 3.0_f64.sqrt()).sqrt())
    };
    mesh.triangles.iter().map(size).collect()
}

/// Size field of a mesh like a given one.
pub(super) fn same_sizes(section: &Section, mesh: &Mesh, averaging_length_m: f64) -> SizeField {
    SizeField { background: sizes(mesh), sources: Vec::new(), ..first_sizes(section, averaging_length_m, &[]) }
}

/// Wanted size at the centroid of every triangle, m.
fn wanted_sizes(stress: &Stress, errors: &[f64]) -> Vec<([f64; 2], f64)> {
    let largest = errors.iter().copied().fold(0.0, f64::max);
    let change = |error: f64, tau: f64| {
        if 0.0 < error { (tau / error).powf(1.0 / 6.0).clamp(SIZE_CHANGE[0], SIZE_CHANGE[1]) } else { SIZE_CHANGE[1] }
    };
    let count = |tau: f64| errors.iter().map(|&e| change(e, tau).powi(-2)).sum::<f64>();
    // tau by bisection on its logarithm: the count falls as tau grows
    let target = GROWTH * errors.len() as f64;
    let (mut low, mut high) = (1e-30_f64.ln(), 1e3_f64.ln());
    for _ in 0..60 {
        let middle = 0.5 * (low + high);
        if target < count(largest * middle.exp()) { low = middle } else { high = middle }
    }
    let tau = largest * (0.5 * (low + high)).exp();
    sizes(&stress.mesh).into_iter().zip(errors).map(|((at, h), &e)| (at, h * change(e, tau))).collect()
}
