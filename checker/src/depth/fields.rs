//! Fields of one depth for pictures and viewers.
use fem_core::tensor::major;

use super::record::{Context, Record};
use crate::analysis::Stress;
use crate::demand::{Found, InputCase};
use crate::outcome::FieldSnapshot;
use crate::section::Section;
use crate::strength::Strength;
use crate::strength::mohr_coulomb::{LocalShear, local_shear};

/// The stress and displacement fields of the governing situation with mean inputs.
///
/// `zero` is the solution at depth 0, to which displacements refer.
pub fn snapshot(ctx: &Context<'_>, record: &Record, stress: &Stress, zero: (&Section, &Stress)) -> FieldSnapshot {
    let best: Vec<&Found> = record.found.iter().filter(|f| f.inputs == InputCase::BestEstimate).collect();
    let governing = best.iter().max_by(|a, b| a.result.utilization.unwrap_or(0.0).total_cmp(&b.result.utilization.unwrap_or(0.0)));
    let state = governing.map_or_else(|| mean_state(ctx, 0), |f| f.state.clone());
    let coefficients = ctx.cases.coefficients(ctx.model, &state);
    let effective = effective_stress(ctx, record, stress, &coefficients);
    let water = ctx.cases.water_of_situation[state.situation];
    let strengths: Vec<Option<Strength>> = ctx.model.layers.iter().map(|l| ctx.best[l.rock]).collect();
    let utilization = |of: &dyn Fn([f64; 3], &Strength) -> f64| {
        let element = |(t, values): (usize, &[[f64; 4]; 6])| {
            let strength = strengths[stress.mesh.regions[t] as usize];
            values.map(|v| strength.map_or(0.0, |s| of([v[0], v[1], v[2]], &s)))
        };
        effective.iter().enumerate().map(element).collect::<Vec<[f64; 6]>>()
    };
    let tension = |t: [f64; 3], s: &Strength| if 0.0 < s.tensile_strength_pa { (major(t) / s.tensile_strength_pa).max(0.0) } else { 0.0 };
    let shear = |t: [f64; 3], s: &Strength| match local_shear(t, s) {
        LocalShear::Touches(touch) => 1.0 / touch.factor,
        LocalShear::BeyondApex => 0.0,
    };
    FieldSnapshot {
        depth_m: record.section.depth_m(),
        situation: ctx.model.situations[state.situation].name.clone(),
        rock_names: (0..record.section.n_layers()).map(|j| ctx.model.rocks[record.section.rock_of_layer(j)].name.clone()).collect(),
        displacement_m: relative_displacement(stress, &coefficients, zero),
        water_pressure_pa: water_pressure(stress, water),
        tension_utilization: utilization(&tension),
        shear_utilization: utilization(&shear),
        places: best.iter().filter(|f| f.situation == state.situation).map(|f| (f.kind.id(), f.result.at)).collect(),
        mesh: (*stress.mesh).clone(),
        effective_stress_pa: effective,
    }
}

/// Mean weights and the first choice of in-situ stress ratios.
pub fn mean_state(ctx: &Context<'_>, situation: usize) -> crate::analysis::load_cases::State {
    crate::analysis::load_cases::State {
        situation,
        unit_weight_n_per_m3: ctx.model.rocks.iter().map(|r| r.unit_weight_n_per_m3.mean()).collect(),
        k0: ctx.k0_cases[0].k0.clone(),
    }
}

/// Effective stress `[xx, zz, xz, yy]` at the nodes of every element, Pa.
///
/// ```text
/// sigma_yy = sigma0_yy + nu (d sigma_xx + d sigma_zz),   sigma0_yy = sigma0_xx
/// ```
fn effective_stress(ctx: &Context<'_>, record: &Record, stress: &Stress, coefficients: &[f64]) -> Vec<[[f64; 4]; 6]> {
    let change = stress.recovered_of(coefficients);
    let element = |t: usize| {
        let layer = stress.mesh.regions[t] as usize;
        let nu = stress.materials[layer].poissons_ratio();
        [0, 1, 2, 3, 4, 5].map(|k| {
            let column = stress.columns.at(&record.section, stress.mesh.points_m[stress.mesh.triangles[t][k] as usize]);
            let initial = column.in_situ_of_state(&ctx.cases, coefficients, layer);
            let d = change[stress.layout().element_nodes[t][k] as usize];
            [initial[0] + d[0], initial[1] + d[1], initial[2] + d[2], initial[0] + nu * (d[0] + d[1])]
        })
    };
    (0..stress.mesh.triangles.len()).map(element).collect()
}

/// Pore pressure times its area ratio at the nodes of every element, Pa.
fn water_pressure(stress: &Stress, water: Option<usize>) -> Vec<[f64; 6]> {
    let Some(field) = water.map(|w| &stress.columns.fields[w]) else { return vec![[0.0; 6]; stress.mesh.triangles.len()] };
    stress.mesh.triangles.iter().map(|t| t.map(|n| field.pressure_pa(stress.mesh.points_m[n as usize]))).collect()
}

/// Displacement against depth 0 at every node, m.
fn relative_displacement(stress: &Stress, coefficients: &[f64], zero: (&Section, &Stress)) -> Vec<[f64; 2]> {
    let now = stress.displacements_of(coefficients);
    let before = zero.1.displacements_of(coefficients);
    let node = |(i, &p): (usize, &[f64; 2])| {
        let reference = zero.1.displacement_at(&before, p, zero.0.layer_at(p)).unwrap_or([0.0; 2]);
        [now[2 * i] - reference[0], now[2 * i + 1] - reference[1]]
    };
    stress.mesh.points_m.iter().enumerate().map(node).collect()
}
