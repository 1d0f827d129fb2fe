//! Weight against reactions, and three ways to the section forces: statics, nodal forces, integrated stress.
use fem_core::mesh::TaggedEdge;
use fem_core::section::{Cut as FemCut, CutLoads, CutPoint, CutSampler, Resultants, free_body};
use fem_core::stress::raw_stress_pa;

use super::{Context, CutResult, Record, Section, Stress};
use crate::analysis::load_cases::State;
use crate::analysis::loads::{body_force_of_state, ground_edges, sea_ends_m, supports, surcharge_ends_m, surface_edges, traction_of_state};
use crate::depth::{line_value, rupture_line};
use crate::model::Cut;
use fem_core::system::Problem;

/// One state on one mesh: what its loads and its stress are.
struct Loaded<'a> {
    ctx: &'a Context<'a>,
    section: &'a Section,
    stress: &'a Stress,
    coefficients: Vec<f64>,
    water: Option<usize>,
    displacements_m: Vec<f64>,
    recovered_pa: Vec<[f64; 3]>,
}

impl<'a> Loaded<'a> {
    fn new(ctx: &'a Context<'a>, section: &'a Section, stress: &'a Stress, state: &State) -> Self {
        let coefficients = ctx.cases.coefficients(ctx.model, state);
        let displacements_m = stress.displacements_of(&coefficients);
        let recovered_pa = stress.recovered_of(&coefficients);
        let water = ctx.cases.water_of_situation[state.situation];
        Self { ctx, section, stress, coefficients, water, displacements_m, recovered_pa }
    }

    fn layer(&self, element: usize) -> usize {
        self.stress.mesh.regions[element] as usize
    }

    /// Total stress less `D eps(u)`: in-situ effective stress less pore pressure on the diagonal.
    fn given(&self, element: usize, point: [f64; 2]) -> [f64; 3] {
        let column = self.stress.columns.at(self.section, point);
        let [x, z, xz] = column.in_situ_of_state(&self.ctx.cases, &self.coefficients, self.layer(element));
        let pressure = column.pressure_of_pa(self.water);
        [x - pressure, z - pressure, xz]
    }

    /// Sides that carry surcharges or the sea, and where their pressures begin and end.
    fn loaded_edges(&self) -> (Vec<TaggedEdge>, Vec<[f64; 2]>) {
        let sea = self.water.and_then(|w| self.stress.columns.fields[w].sea);
        let mut breaks = surcharge_ends_m(self.ctx.model, self.section);
        let Some((level, _)) = sea else { return (ground_edges(self.section, &self.stress.mesh), breaks) };
        breaks.extend(sea_ends_m(self.section, level));
        (surface_edges(&self.stress.mesh), breaks)
    }

    /// Pressure of surcharges and sea at a point of the surface, Pa.
    fn traction(&self, p: [f64; 2], normal: [f64; 2]) -> [f64; 2] {
        let on_ground = (p[1] - self.section.ground_level_m(p[0])).abs() <= 1e-3;
        let strip = if on_ground { traction_of_state(self.ctx.model, &self.ctx.cases, &self.coefficients, p, normal) } else { [0.0; 2] };
        let sea = self.water.map_or(0.0, |w| self.stress.columns.fields[w].sea_pressure_pa(p[1]));
        [strip[0] - sea * normal[0], strip[1] - sea * normal[1]]
    }

    /// Resultants by consistent nodal forces of the body on the right of the cut; `None` where it does not sever the body.
    fn by_nodes(&self, cut: FemCut) -> Option<Resultants> {
        let body = free_body(&self.stress.mesh, &self.stress.locator, cut).ok()?;
        let (edges, breaks) = self.loaded_edges();
        let (mesh, columns) = (&self.stress.mesh, &self.stress.columns);
        let loads = CutLoads {
            body_force_n_per_m3: &|e, p| body_force_of_state(&self.ctx.cases, columns, &self.coefficients, (self.layer(e), p)),
            kinks: &|e| columns.kinks_of(self.water, &mesh.triangles[e].map(|n| mesh.points_m[n as usize])),
            edges: &edges,
            breaks_m: &breaks,
            traction_pa: &|p, n| self.traction(p, n),
            given_stress_pa: &|e, p| self.given(e, p),
        };
        Some(body.resultants(&self.stress.mesh, &self.stress.materials, &self.displacements_m, &loads))
    }

    /// Resultants by integrating the recovered stress, with their own error.
    fn by_stress(&self, cut: FemCut) -> (Resultants, Resultants) {
        let sampler = CutSampler::new(&self.stress.mesh, &self.stress.locator, cut);
        let with = |p: &CutPoint, change: [f64; 3]| {
            let initial = self.given(p.element as usize, p.point_m);
            [0, 1, 2].map(|k| initial[k] + change[k])
        };
        let recovered = |p: &CutPoint| with(p, self.stress.layout().evaluate(&self.recovered_pa, p.element as usize, p.xi));
        let raw = |p: &CutPoint| {
            with(p, raw_stress_pa(&self.stress.mesh, &self.stress.materials, &self.displacements_m, (p.element as usize, p.xi)))
        };
        sampler.with_error(recovered, raw)
    }
}

/// Weight of the section and its vertical reaction, N/m.
pub(super) fn weight_and_reaction(ctx: &Context<'_>, section: &Section, stress: &Stress, state: &State) -> (f64, f64) {
    let loaded = Loaded::new(ctx, section, stress, state);
    let mut load = vec![0.0; loaded.displacements_m.len()];
    for (c, unit) in loaded.coefficients.iter().zip(&stress.loads_n_per_m) {
        for (sum, f) in load.iter_mut().zip(unit) {
            *sum += c * f;
        }
    }
    let supports = supports(&stress.mesh);
    let problem = Problem { mesh: &stress.mesh, materials: &stress.materials, supports: &supports };
    // the in-situ part of the load is in equilibrium with itself but for its share on the supports, which belongs to the reaction
    let reactions = problem.reactions_n_per_m(&loaded.displacements_m, &load);
    let reaction: f64 = reactions.iter().skip(1).step_by(2).sum();
    let weight = -load.iter().skip(1).step_by(2).sum::<f64>();
    (weight, reaction)
}

/// Largest relative differences of nodal forces and of integrated stress from statics over all situations, on a vertical line
/// from the middle of the roof to the ground.
pub(super) fn three_ways(ctx: &Context<'_>, record: &Record, stress: &Stress, states: &[State]) -> (f64, f64) {
    let section = &record.section;
    let Some(line) = middle_line(section) else { return (0.0, 0.0) };
    let value = line_value(ctx.model, section, stress, &line);
    let cut = FemCut { from_m: line.to_m, to_m: line.from_m };
    let mut worst = (0.0_f64, 0.0_f64);
    for state in states {
        let statics = value.forces(ctx.model, state);
        let loaded = Loaded::new(ctx, section, stress, state);
        let force = statics.axial_n_per_m.hypot(statics.shear_n_per_m);
        let off = |r: &Resultants| {
            let moment = (r.moment_n - statics.moment_n).abs() / (force * value.length_m()).max(statics.moment_n.abs());
            let direct = (r.normal_n_per_m - statics.axial_n_per_m).hypot(r.shear_n_per_m - statics.shear_n_per_m) / force;
            moment.max(direct)
        };
        if let Some(nodes) = loaded.by_nodes(cut) {
            worst.0 = worst.0.max(off(&nodes));
        }
        worst.1 = worst.1.max(off(&loaded.by_stress(cut).0));
    }
    worst
}

/// Vertical line from the middle of the roof to the ground.
fn middle_line(section: &Section) -> Option<crate::depth::TargetLine> {
    let (back, lip) = (section.back_m()?, section.lip_m());
    let start = crate::depth::roof_point(section, 0.5 * (back[0] + lip[0]))?;
    rupture_line(section, start, 0.0)
}

/// Resultants on the model's cuts in every situation.
pub(super) fn cuts(ctx: &Context<'_>, section: &Section, stress: &Stress, states: &[State]) -> Vec<CutResult> {
    let mut results = Vec::new();
    for cut in &ctx.model.cuts {
        for state in states {
            results.extend(cut_result(ctx, section, stress, cut, state));
        }
    }
    results
}

fn cut_result(ctx: &Context<'_>, section: &Section, stress: &Stress, cut: &Cut, state: &State) -> Option<CutResult> {
    // the upper end is where a positive moment opens
    let from_is_upper = cut.to_m[1] <= cut.from_m[1];
    let (upper, lower) = if from_is_upper { (cut.from_m, cut.to_m) } else { (cut.to_m, cut.from_m) };
    let inside = crate::depth::clip_to_body(section, upper, lower)?;
    let fem = FemCut { from_m: inside[0], to_m: inside[1] };
    let loaded = Loaded::new(ctx, section, stress, state);
    let r = loaded.by_nodes(fem).unwrap_or_else(|| loaded.by_stress(fem).0);
    let [at_upper, at_lower] = r.fibre_stresses_pa(fem.length_m());
    let (from, to) = if from_is_upper { (at_upper, at_lower) } else { (at_lower, at_upper) };
    Some(CutResult {
        name: cut.name.clone(),
        situation: ctx.model.situations[state.situation].name.clone(),
        axial_kn_per_m: r.normal_n_per_m / 1e3,
        shear_kn_per_m: r.shear_n_per_m / 1e3,
        moment_knm_per_m: r.moment_n / 1e3,
        fibre_from_kpa: from / 1e3,
        fibre_to_kpa: to / 1e3,
    })
}
