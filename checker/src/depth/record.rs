//! From a depth to its record: geometry, meshes until the checks' errors are within target, values at all places, checks.
use std::sync::Arc;

use fem_core::mesh::Mesh;
use fem_core::tensor::{major, minor};

use super::adapt::{Budget, first_sizes, make_mesh, next_sizes, same_sizes};
use super::fields::mean_state;
use super::geometry::{Geometry, TargetLine};
use super::line_water::{line_water, thrust};
use crate::analysis::load_cases::{CaseSet, superpose};
use crate::analysis::samples::on_segment;
use crate::analysis::stress::SolveQuality;
use crate::analysis::{AnalysisError, Stress};
use crate::demand::{Evaluation, Found, InputCase, K0Case, LineValue, Piece, PlaceValue, RockEnds, evaluate};
use crate::model::{Carries, Model};
use crate::section::{Section, Site};
use crate::strength::Strength;
use crate::strength::joint_set::JointCapacity;

/// Fewest meshes: an error needs a change between two.
const FEWEST_MESHES: usize = 2;
/// Most meshes.
const MOST_MESHES: usize = 5;

/// A probe's error counts relative to its own stress, but to no less than this share of the weight of the cliff's height.
pub(super) const PROBE_FLOOR: f64 = 0.02;

/// What is the same at every depth.
#[derive(Debug)]
pub struct Context<'a> {
    /// The model.
    pub model: &'a Model,
    /// Its section at all depths.
    pub site: &'a Site,
    /// Unit load cases.
    pub cases: CaseSet,
    /// Strengths for mean inputs.
    pub best: Vec<Option<Strength>>,
    /// Strengths for cautious inputs.
    pub cautious: Vec<Option<Strength>>,
    /// Strengths of the joint sets for mean and for cautious inputs.
    pub joints: [Vec<JointCapacity>; 2],
    /// Ends of the uncertain weights and stress ratios.
    pub ends: Vec<RockEnds>,
    /// Choices of the in-situ stress ratio.
    pub k0_cases: Vec<K0Case>,
    /// Averaging length, m.
    pub averaging_length_m: f64,
    /// Largest mesh.
    pub budget: Budget,
}

impl Context<'_> {
    /// Weight of a column of the cliff's height, Pa: the size that stresses are judged by.
    pub fn overburden_scale_pa(&self) -> f64 {
        let heaviest = self.model.rocks.iter().map(|r| r.unit_weight_n_per_m3.mean()).fold(0.0, f64::max);
        heaviest * self.site.cliff_height_m()
    }
}

/// Everything kept of one depth.
#[derive(Debug, Clone)]
pub struct Record {
    /// Section.
    pub section: Section,
    /// Values at all places.
    pub places: Vec<PlaceValue>,
    /// Area of a disc's cell, m2.
    pub cell_m2: f64,
    /// Rupture lines.
    pub lines: Vec<LineValue>,
    /// Overhang thickness, m, and the share of each layer in it.
    pub thickness: (f64, Vec<f64>),
    /// Last mesh and its smallest angle, rad.
    pub mesh: (Arc<Mesh>, f64),
    /// Quality of the last solution.
    pub quality: SolveQuality,
    /// Checks.
    pub found: Vec<Found>,
    /// Mean tensors of the probes on the last mesh, per unit load case; empty in the hollow.
    pub probes: Vec<Vec<[f64; 3]>>,
    /// Largest change of a probe's stress from the last mesh but one, relative to its greatest principal value.
    pub probe_change: f64,
}

/// Section and first mesh of a depth with its smallest angle in rad, nothing solved.
///
/// # Errors
/// [`AnalysisError`] of geometry or mesh.
pub fn first_mesh(ctx: &Context<'_>, depth_m: f64) -> Result<(Section, Arc<Mesh>, f64), AnalysisError> {
    let section = ctx.site.at_depth(depth_m)?;
    let (mesh, angle) = make_mesh(&section, &first_sizes(&section, ctx.averaging_length_m, &ctx.model.probes))?;
    Ok((section, mesh, angle))
}

/// Adapts, solves and evaluates one depth. `zero` is the solution at depth 0, for the background values; `None` at depth 0.
///
/// # Errors
/// [`AnalysisError`] of geometry, mesh or solution. A missed target error is no error: it stands in the checks.
pub fn record(ctx: &Context<'_>, depth_m: f64, zero: Option<(&Section, &Stress)>) -> Result<(Record, Stress), AnalysisError> {
    let section = ctx.site.at_depth(depth_m)?;
    let geometry = Geometry::new(&section, ctx.model, ctx.averaging_length_m, &ctx.model.probes);
    let mut mesh = make_mesh(&section, &first_sizes(&section, ctx.averaging_length_m, &ctx.model.probes))?;
    let mut last: Option<(Record, Stress)> = None;
    for round in 0..MOST_MESHES {
        let stress = Stress::solve(ctx.model, &section, mesh.0.clone(), mesh.1, &ctx.cases)?;
        let coarse = last.take();
        let mut record = sampled(ctx, &section, &geometry, &stress, mesh.clone());
        if let Some((coarse, _)) = coarse {
            record.probe_change = probe_change(ctx, &record.probes, &coarse.probes);
            take_coarse(&mut record, coarse);
        }
        add_raw(ctx, &mut record, &geometry, &stress);
        let enough = FEWEST_MESHES <= round + 1 && within_target(ctx, &record);
        let full = ctx.budget.triangles < 2 * stress.mesh.triangles.len();
        if enough || full || round + 1 == MOST_MESHES {
            add_background(&mut record, &geometry, zero);
            record.found = evaluate(&evaluation(ctx, &record, &InputCase::ALL));
            return Ok((record, stress));
        }
        let sizes = next_sizes(ctx, &section, &geometry, &stress, (&evaluation(ctx, &record, &InputCase::ALL), &record.found))?;
        mesh = make_mesh(&section, &sizes)?;
        last = Some((record, stress));
    }
    unreachable!("the last round returns")
}

/// Solves and evaluates one depth once for a changed model with mean inputs: on the mesh of `like` where the body is the same, else on
/// a mesh of the same sizes.
///
/// # Errors
/// [`AnalysisError`] of geometry, mesh or solution.
pub fn record_on(ctx: &Context<'_>, depth_m: f64, like: &Record) -> Result<Record, AnalysisError> {
    let section = ctx.site.at_depth(depth_m)?;
    let geometry = Geometry::new(&section, ctx.model, ctx.averaging_length_m, &[]);
    let same_body = section.extents() == like.section.extents();
    let mesh =
        if same_body { like.mesh.clone() } else { make_mesh(&section, &same_sizes(&section, &like.mesh.0, ctx.averaging_length_m))? };
    let stress = Stress::solve(ctx.model, &section, mesh.0.clone(), mesh.1, &ctx.cases)?;
    let mut record = sampled(ctx, &section, &geometry, &stress, mesh);
    record.found = evaluate_record(ctx, &record, &[InputCase::BestEstimate]);
    Ok(record)
}

/// Evaluates the checks of a record anew, for example with other strengths.
pub fn evaluate_record(ctx: &Context<'_>, record: &Record, inputs: &[InputCase]) -> Vec<Found> {
    evaluate(&evaluation(ctx, record, inputs))
}

fn evaluation<'a>(ctx: &'a Context<'_>, record: &'a Record, inputs: &'a [InputCase]) -> Evaluation<'a> {
    Evaluation {
        model: ctx.model,
        cases: &ctx.cases,
        best: &ctx.best,
        cautious: &ctx.cautious,
        joints: &ctx.joints,
        ends: &ctx.ends,
        k0_cases: &ctx.k0_cases,
        inputs,
        depth_m: record.section.depth_m(),
        thickness_m: record.thickness.0,
        thickness_shares: &record.thickness.1,
        places: &record.places,
        cell_m2: record.cell_m2,
        lines: &record.lines,
    }
}

/// Values at all places and lines on one mesh.
fn sampled(ctx: &Context<'_>, section: &Section, geometry: &Geometry, stress: &Stress, mesh: (Arc<Mesh>, f64)) -> Record {
    let places = geometry.places.iter().map(|t| PlaceValue {
        tension: t.tension,
        at_m: t.at_m,
        layer: t.layer,
        length_m: t.length_m,
        short: t.short,
        fine: stress.mean_pa(section, &t.samples, t.layer),
        raw: Vec::new(),
        coarse: Vec::new(),
        background: Vec::new(),
    });
    let lines = geometry.lines.iter().filter_map(|line| rupture_value(ctx.model, section, stress, line));
    Record {
        section: section.clone(),
        places: places.collect(),
        cell_m2: geometry.cell_m2,
        lines: lines.collect(),
        thickness: thickness_shares(section),
        mesh,
        quality: stress.quality,
        found: Vec::new(),
        probes: geometry.probes.iter().map(|p| p.as_ref().map_or_else(Vec::new, |(s, layer)| stress.mean_pa(section, s, *layer))).collect(),
        probe_change: f64::INFINITY,
    }
}

/// Overhang thickness and the share of each layer in it, m.
fn thickness_shares(section: &Section) -> (f64, Vec<f64>) {
    let thickness = section.thickness_m();
    let x = section.back_m().unwrap_or(section.lip_m())[0];
    let top = section.ground_level_m(x);
    let mut below = section.overburden_m([x, top - thickness]);
    for (b, above) in below.iter_mut().zip(section.overburden_m([x, top])) {
        *b = (*b - above) / thickness;
    }
    (thickness, below)
}

/// Body, surcharges and normal stress of a rupture line.
pub fn line_value(model: &Model, section: &Section, stress: &Stress, line: &TargetLine) -> LineValue {
    let body = &line.body;
    let length = (line.to_m[0] - line.from_m[0]).hypot(line.to_m[1] - line.from_m[1]);
    let e = [0, 1].map(|k| (line.to_m[k] - line.from_m[k]) / length);
    let n = [e[1], -e[0]];
    let normal = |t: &[f64; 3]| t[0] * n[0] * n[0] + t[1] * n[1] * n[1] + 2.0 * t[2] * n[0] * n[1];
    let piece = |&(layer, [from, to]): &(usize, [f64; 2])| {
        let start = [line.from_m[0] + from * e[0], line.from_m[1] + from * e[1]];
        let tensors = stress.mean_pa(section, &on_segment(start, e, to - from), layer);
        let normal_pa: Vec<f64> = tensors.iter().map(normal).collect();
        Piece { layer, along_m: [from, to], normal_coarse_pa: normal_pa.clone(), normal_pa }
    };
    let strip = |x: [f64; 2]| {
        let (from, to) = (x[0].max(body.seaward_x_m), x[1].min(line.to_m[0]));
        let middle = 0.5 * (from + to);
        ((to - from).max(0.0), [middle, section.ground_level_m(middle)])
    };
    LineValue {
        from_m: line.from_m,
        to_m: line.to_m,
        areas_m2: body.areas_m2.clone(),
        centroids_m: body.centroids_m.clone(),
        surcharges: model.surcharges.iter().map(|s| strip(s.x_m)).collect(),
        pieces: line.pieces.iter().map(piece).collect(),
        loose_m: Vec::new(),
        set: line.set,
        waters: stress.columns.fields.iter().map(|f| line_water(section, f, line, body, stress.columns.has_saturated())).collect(),
        water_of_situation: stress.cases.water_of_situation.clone(),
    }
}

/// A rupture line through the rock that carries: layers above it that only load break off upright at its upper end.
///
/// The body loses the wedge of the loose layers between the upright and the straight line (gains it where the line leans seaward). `None` where
/// no layer on the line carries.
pub fn rupture_value(model: &Model, section: &Section, stress: &Stress, line: &TargetLine) -> Option<LineValue> {
    let loose = |piece: &&(usize, [f64; 2])| model.layers[piece.0].carries == Carries::LoadOnly;
    let n_loose = line.pieces.iter().rev().take_while(loose).count();
    if n_loose == line.pieces.len() {
        return None;
    }
    if n_loose == 0 {
        return Some(line_value(model, section, stress, line));
    }
    let kept = &line.pieces[..line.pieces.len() - n_loose];
    let length = (line.to_m[0] - line.from_m[0]).hypot(line.to_m[1] - line.from_m[1]);
    let share = kept[kept.len() - 1].1[1] / length;
    let entry = [0, 1].map(|k| line.from_m[k] + share * (line.to_m[k] - line.from_m[k]));
    let ground = [entry[0], section.ground_level_m(entry[0])];
    let whole = line_value(model, section, stress, line);
    let mut value = LineValue { to_m: entry, pieces: whole.pieces[..kept.len()].to_vec(), ..whole };
    for (strip, surcharge) in value.surcharges.iter_mut().zip(&model.surcharges) {
        let from = strip.1[0] - 0.5 * strip.0;
        let width = (surcharge.x_m[1].min(entry[0]) - from).max(0.0);
        let middle = from + 0.5 * width;
        *strip = (width, [middle, section.ground_level_m(middle)]);
    }
    for (water, field) in value.waters.iter_mut().zip(&stress.columns.fields) {
        water.thrust = thrust(field, [line.from_m, entry]);
    }
    let area = 0.5 * (line.to_m[0] - entry[0]) * (ground[1] - entry[1]);
    let centroid = [0, 1].map(|k| (entry[k] + ground[k] + line.to_m[k]) / 3.0);
    let layer = section.layer_at(centroid);
    let (old, new) = (value.areas_m2[layer], value.areas_m2[layer] - area);
    if 0.0 < new {
        value.centroids_m[layer] = [0, 1].map(|k| (old * value.centroids_m[layer][k] - area * centroid[k]) / new);
    }
    value.areas_m2[layer] = new.max(0.0);
    let above = section.overburden_m(entry);
    let loose_layer = |&(j, t): &(usize, f64)| 0.0 < t && model.layers[j].carries == Carries::LoadOnly;
    value.loose_m = above.into_iter().enumerate().filter(loose_layer).collect();
    Some(value)
}

/// Keeps the values of the last mesh but one beside those of the last.
fn take_coarse(record: &mut Record, coarse: Record) {
    for (place, old) in record.places.iter_mut().zip(coarse.places) {
        place.coarse = old.fine;
    }
    for (line, old) in record.lines.iter_mut().zip(coarse.lines) {
        for (piece, old) in line.pieces.iter_mut().zip(old.pieces) {
            piece.normal_coarse_pa = old.normal_pa;
        }
    }
}

/// Evaluates, then adds the unrecovered means at the governing places and evaluates again, now with both parts of the error.
fn add_raw(ctx: &Context<'_>, record: &mut Record, geometry: &Geometry, stress: &Stress) {
    let found = evaluate_record(ctx, record, &InputCase::ALL);
    for f in found.iter().filter(|f| f.kind.is_local()) {
        let target = &geometry.places[f.index];
        if record.places[f.index].raw.is_empty() {
            record.places[f.index].raw = stress.raw_mean_pa(&record.section, &target.samples, target.layer);
        }
    }
    record.found = evaluate_record(ctx, record, &InputCase::ALL);
}

/// Whether every check's error is within target (absolute in utilization up to 1, relative above), and every probe's change.
fn within_target(ctx: &Context<'_>, record: &Record) -> bool {
    let target = ctx.model.checks.target_error;
    let checks = record.found.iter().all(|f| f.result.error <= target * f.result.utilization.unwrap_or(1.0).max(1.0));
    checks && (record.probes.is_empty() || record.probe_change <= target)
}

/// Largest relative change of the probes' stress in any situation.
fn probe_change(ctx: &Context<'_>, now: &[Vec<[f64; 3]>], before: &[Vec<[f64; 3]>]) -> f64 {
    let mut worst = 0.0_f64;
    for situation in 0..ctx.model.situations.len() {
        let c = ctx.cases.coefficients(ctx.model, &mean_state(ctx, situation));
        for (a, b) in now.iter().zip(before).filter(|(a, _)| !a.is_empty()) {
            let (a, b) = (superpose(&c, a), superpose(&c, b));
            let size = major(a).abs().max(minor(a).abs()).max(PROBE_FLOOR * ctx.overburden_scale_pa());
            let change = (0..3).map(|k| (a[k] - b[k]).abs()).fold(0.0, f64::max);
            worst = worst.max(change / size);
        }
    }
    worst
}

/// Adds the values at depth 0 at the governing places.
fn add_background(record: &mut Record, geometry: &Geometry, zero: Option<(&Section, &Stress)>) {
    let Some((section, stress)) = zero else { return };
    let wanted: Vec<usize> = record.found.iter().filter(|f| f.kind.is_local()).map(|f| f.index).collect();
    for index in wanted {
        let target = &geometry.places[index];
        if record.places[index].background.is_empty() {
            record.places[index].background = stress.mean_pa(section, &target.samples, target.layer);
        }
    }
}
