//! Probes, cuts, rupture traces and the three ways to the section forces at one depth.
use super::{
    CheckKind, Context, CutResult, Feature, Found, InputCase, LineValue, ProbeResult, Record, Section, Stress, StressKpa, Zero,
    line_between, mean_state, rupture_value,
};
use fem_core::tensor::{major, minor, principal};

use crate::analysis::columns::Columns;
use crate::analysis::load_cases::State;
use crate::analysis::samples::on_segment;
use crate::model::Probe;

/// Step of a traced rupture line, in overhang thicknesses.
const TRACE_STEP: f64 = 0.01;

/// What a depth gives beside its checks.
#[derive(Debug, Clone, PartialEq)]
pub(crate) struct Extras {
    pub(crate) probes: Vec<ProbeResult>,
    pub(crate) cuts: Vec<CutResult>,
    /// Rupture lines traced from the governing place of tension under the ground: inputs, situation, line.
    pub(crate) traces: Vec<(InputCase, usize, LineValue)>,
    pub(crate) weight_n_per_m: f64,
    pub(crate) reaction_n_per_m: f64,
    pub(crate) realized_k0: Option<f64>,
    pub(crate) asked_k0: Option<f64>,
    /// Relative difference of consistent nodal forces from statics.
    pub(crate) nodal_difference: f64,
    /// Relative difference of integrated stress from statics.
    pub(crate) stress_difference: f64,
}

/// Evaluates probes, cuts and cross-checks on the solution of a depth.
pub(crate) fn extras(ctx: &Context<'_>, record: &Record, stress: &Stress, zero: &Zero) -> Extras {
    let section = &record.section;
    let states: Vec<State> = (0..ctx.model.situations.len()).map(|s| mean_state(ctx, s)).collect();
    let fields: Vec<(Vec<f64>, Vec<f64>)> = states
        .iter()
        .map(|state| {
            let c = ctx.cases.coefficients(ctx.model, state);
            let before = zero.stress.displacements_of(&c);
            (c, before)
        })
        .collect();
    let probe = |p: &Probe| {
        let each = states.iter().zip(&fields);
        each.map(|(state, (c, before))| probe_result(ctx, (section, stress), p, (state, c), (zero, before))).collect::<Vec<_>>()
    };
    let (weight, reaction) = super::balance::weight_and_reaction(ctx, section, stress, &states[0]);
    let (nodal_difference, stress_difference) = super::balance::three_ways(ctx, record, stress, &states);
    let (realized_k0, asked_k0) = k0_behind_the_brow(ctx, section, stress, &states[0]);
    Extras {
        probes: ctx.model.probes.iter().flat_map(probe).collect(),
        cuts: super::balance::cuts(ctx, section, stress, &states),
        traces: traces(ctx, record, stress),
        weight_n_per_m: weight,
        reaction_n_per_m: reaction,
        realized_k0,
        asked_k0,
        nodal_difference,
        stress_difference,
    }
}

fn probe_result(
    ctx: &Context<'_>,
    (section, stress): (&Section, &Stress),
    probe: &Probe,
    (state, coefficients): (&State, &[f64]),
    (zero, before): (&Zero, &[f64]),
) -> ProbeResult {
    let situation = ctx.model.situations[state.situation].name.clone();
    let mut result =
        ProbeResult { name: probe.name.clone(), situation, at: probe.at_m, displacement_mm: None, stress_kpa: None, mean_of_major: None };
    // a probe on the surface counts as inside
    let inside = section.contains(probe.at_m) || section.boundary().nearest(probe.at_m).1 <= 1e-3;
    if !inside {
        return result;
    }
    let samples = match (probe.toward, probe.over_m) {
        (Some(direction), Some(length)) => on_segment(probe.at_m, direction, length),
        _ => vec![(probe.at_m, 1.0)],
    };
    let middle =
        probe.toward.zip(probe.over_m).map_or(probe.at_m, |(d, l)| [probe.at_m[0] + 0.5 * l * d[0], probe.at_m[1] + 0.5 * l * d[1]]);
    let layer = section.layer_at(middle);
    let tensor = crate::analysis::load_cases::superpose(coefficients, &stress.mean_pa(section, &samples, layer));
    result.stress_kpa = Some(in_kpa(ctx, (section, &stress.columns), tensor, (probe.at_m, layer), state));
    if probe.toward.is_some() {
        let one = |&(p, w): &([f64; 2], f64)| w * major(stress.at_pa(section, coefficients, p, section.layer_at(p)));
        result.mean_of_major = Some(samples.iter().map(one).sum::<f64>() / 1e3);
    }
    let now = stress.displacement_at(&stress.displacements_of(coefficients), probe.at_m, layer);
    let then = zero.stress.displacement_at(before, probe.at_m, zero.section().layer_at(probe.at_m));
    result.displacement_mm = now.zip(then).map(|(a, b)| [1e3 * (a[0] - b[0]), 1e3 * (a[1] - b[1])]);
    result
}

/// Components and principal values in kPa; `yy` by plane strain of the change from the in-situ state.
fn in_kpa(
    ctx: &Context<'_>,
    (section, columns): (&Section, &Columns),
    tensor: [f64; 3],
    (at, layer): ([f64; 2], usize),
    state: &State,
) -> StressKpa {
    let rock = &ctx.model.rocks[section.rock_of_layer(layer)];
    let coefficients = ctx.cases.coefficients(ctx.model, state);
    let [horizontal, vertical, _] = columns.at(section, at).in_situ_of_state(&ctx.cases, &coefficients, layer);
    let yy = horizontal + rock.poissons_ratio * (tensor[0] - horizontal + tensor[1] - vertical);
    let [xx, zz, xz] = tensor.map(|t| t / 1e3);
    StressKpa { xx, zz, xz, yy: yy / 1e3, major: major(tensor) / 1e3, minor: minor(tensor) / 1e3 }
}

/// Horizontal over vertical effective stress one cliff height behind the brow at half height, realized and asked.
fn k0_behind_the_brow(ctx: &Context<'_>, section: &Section, stress: &Stress, state: &State) -> (Option<f64>, Option<f64>) {
    let (brow, height) = (section.brow_m(), section.cliff_height_m());
    let at = [brow[0] + height, brow[1] - 0.5 * height];
    if !section.contains(at) {
        return (None, None);
    }
    let layer = section.layer_at(at);
    let coefficients = ctx.cases.coefficients(ctx.model, state);
    let tensor = stress.at_pa(section, &coefficients, at, layer);
    (Some(tensor[0] / tensor[1]), Some(state.k0[section.rock_of_layer(layer)]))
}

/// Rupture lines of tension under the ground, traced across the major principal stress.
fn traces(ctx: &Context<'_>, record: &Record, stress: &Stress) -> Vec<(InputCase, usize, LineValue)> {
    let tops = record.found.iter().filter(|f| f.kind == CheckKind::CliffTopTension && 0.0 < f.result.demand_kpa);
    tops.filter_map(|f| {
        let line = trace(ctx, record, stress, f)?;
        Some((f.inputs, f.situation, rupture_value(ctx.model, &record.section, stress, &line)?))
    })
    .collect()
}

/// From the governing place down to the hollow; straight to the back if the trace misses it.
fn trace(ctx: &Context<'_>, record: &Record, stress: &Stress, found: &Found) -> Option<crate::depth::TargetLine> {
    let section = &record.section;
    let back = section.back_m()?;
    let coefficients = ctx.cases.coefficients(ctx.model, &found.state);
    let top = [found.result.at[0], section.ground_level_m(found.result.at[0])];
    let step = TRACE_STEP * record.thickness.0;
    let mut at = [found.result.at[0], found.result.at[1] - 0.1 * step];
    let mut heading = [0.0, -1.0];
    for _ in 0..(4.0 / TRACE_STEP) as usize {
        if !section.contains(at) {
            break;
        }
        let p = principal(stress.at_pa(section, &coefficients, at, section.layer_at(at)));
        let across = [-p.direction_rad.sin(), p.direction_rad.cos()];
        let sign = (across[0] * heading[0] + across[1] * heading[1]).signum();
        heading = [sign * across[0], sign * across[1]];
        at = [at[0] + step * heading[0], at[1] + step * heading[1]];
        if at[1] < back[1] - record.thickness.0 {
            break;
        }
    }
    let (on_surface, distance) = section.surface().nearest(at);
    let hollow = matches!(section.feature_of(on_surface.segment), Feature::Roof | Feature::Back);
    let end = if hollow && distance <= 2.0 * step { section.surface().point(on_surface) } else { back };
    line_between(section, end, top)
}
