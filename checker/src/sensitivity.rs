//! What the answer hangs on: one input at a time, low and high, everything else at its mean.
//!
//! Inputs that act linearly on stress and strengths reuse the solutions of the series; stiffness ratios, Poisson's ratio,
//! averaging length and the model's depth are solved again at a few depths around the critical one.
use crate::model::{Averaging, Carries, Cohesive, Model, Rock, RockStrength, Uncertain};

/// A changed model for the low and the high end of one input.
#[derive(Debug, Clone, PartialEq)]
pub struct Variation {
    /// Words for the results.
    pub what: String,
    /// Low and high value in the file's unit.
    pub ends: [f64; 2],
    /// Unit of the ends; empty for a ratio.
    pub unit: &'static str,
    /// Model with the low and the high value.
    pub models: [Model; 2],
    /// Whether the stress has to be solved again.
    pub solve_again: bool,
    /// Whether the in-situ stress ratios stay those of the unchanged model.
    pub k0_held: bool,
}

/// Share by which a strength without stated uncertainty is varied.
const STRENGTH_STEP: f64 = 0.3;
/// Step of k0 without stated uncertainty.
const K0_STEP: f64 = 0.2;
/// Step of Poisson's ratio.
const POISSON_STEP: f64 = 0.05;
/// Model depths below the platform, in cliff heights.
const MODEL_DEPTHS: [f64; 2] = [2.0, 6.0];

/// All variations of a model; `height_m` is the cliff height, `platform_m` the level of the platform at the mouth and
/// `averaging_length_m` the length in use.
pub fn variations(model: &Model, height_m: f64, platform_m: f64, averaging_length_m: f64) -> Vec<Variation> {
    let mut all = Vec::new();
    all.extend(unmeasured_k0(model));
    let used: Vec<usize> = (0..model.rocks.len()).filter(|r| model.layers.iter().any(|l| l.rock == *r)).collect();
    for &r in &used {
        all.extend(rock_variations(model, r));
    }
    all.extend(stiffness_ratio(model));
    all.extend(poisson(model, &used));
    let lengths = [0.5 * averaging_length_m, 2.0 * averaging_length_m];
    let with_length = lengths.map(|l| changed(model, |m| m.checks.averaging = Averaging::Given(l)));
    all.push(Variation {
        what: "averaging length".into(),
        ends: lengths,
        unit: "m",
        models: with_length,
        solve_again: true,
        k0_held: false,
    });
    let bases = MODEL_DEPTHS.map(|n| platform_m - n * height_m);
    let with_base = bases.map(|z| changed(model, |m| m.extent.base_z_m = Some(z)));
    let depths = MODEL_DEPTHS.map(|n| n * height_m);
    all.push(Variation {
        what: "depth of the model below the platform".into(),
        ends: depths,
        unit: "m",
        models: with_base,
        solve_again: true,
        k0_held: false,
    });
    all
}

/// A copy of the model with a change.
fn changed(model: &Model, change: impl FnOnce(&mut Model)) -> Model {
    let mut copy = model.clone();
    change(&mut copy);
    copy
}

/// The two assumptions for k0 where it was not measured.
fn unmeasured_k0(model: &Model) -> Option<Variation> {
    let open: Vec<usize> = model.layers.iter().map(|l| l.rock).filter(|&r| model.rocks[r].k0.is_none()).collect();
    if open.is_empty() {
        return None;
    }
    let elastic = |rock: &Rock| rock.poissons_ratio / (1.0 - rock.poissons_ratio);
    let with = |k0: &dyn Fn(&Rock) -> f64| {
        changed(model, |m| {
            for &r in &open {
                m.rocks[r].k0 = Some(Uncertain::Exact(k0(&m.rocks[r])));
            }
        })
    };
    let models = [with(&elastic), with(&|_| 1.0)];
    let low = open.iter().map(|&r| elastic(&model.rocks[r])).fold(f64::INFINITY, f64::min);
    Some(Variation { what: "k0, not measured".into(), ends: [low, 1.0], unit: "", models, solve_again: false, k0_held: false })
}

/// Standard deviation of an input; 0 for a known one.
fn standard_deviation(value: &Uncertain) -> f64 {
    match *value {
        Uncertain::Exact(_) => 0.0,
        Uncertain::Lognormal { mean, cov } => mean * cov,
        Uncertain::Normal { standard_deviation, .. } | Uncertain::TruncatedNormal { standard_deviation, .. } => standard_deviation,
        Uncertain::Uniform { min, max } => (max - min) / 12.0_f64.sqrt(),
    }
}

/// Mean minus and plus one standard deviation, or the given ends where no uncertainty is stated.
fn low_high(value: &Uncertain, otherwise: [f64; 2]) -> [f64; 2] {
    let sd = standard_deviation(value);
    if 0.0 < sd { [value.mean() - sd, value.mean() + sd] } else { otherwise }
}

/// Unit weight, k0 and strengths of one rock.
fn rock_variations(model: &Model, r: usize) -> Vec<Variation> {
    let rock = &model.rocks[r];
    let mut all = Vec::new();
    let mut add = |what: &str, si: [f64; 2], scale: f64, unit: &'static str, set: &dyn Fn(&mut Rock, f64)| {
        let models = si.map(|v| changed(model, |m| set(&mut m.rocks[r], v)));
        let ends = si.map(|v| v * scale);
        all.push(Variation { what: format!("{what}, {}", rock.name), ends, unit, models, solve_again: false, k0_held: false });
    };
    let gamma = &rock.unit_weight_n_per_m3;
    if 0.0 < standard_deviation(gamma) {
        add("unit weight", low_high(gamma, [0.0; 2]), 1e-3, "kN/m3", &set_unit_weight);
    }
    if let Some(k0) = &rock.k0 {
        let mean = k0.mean();
        let ends = low_high(k0, [(mean - K0_STEP).max(0.0), mean + K0_STEP]);
        add("k0", ends, 1.0, "", &|k, v| k.k0 = Some(Uncertain::Exact(v)));
    }
    if let RockStrength::Typed(strength) = rock.strength {
        let around = |u: &Uncertain| low_high(u, [(1.0 - STRENGTH_STEP) * u.mean(), (1.0 + STRENGTH_STEP) * u.mean()]);
        let with = |rock: &mut Rock, change: &dyn Fn(&mut Cohesive)| {
            if let RockStrength::Typed(c) = &mut rock.strength {
                change(c);
            }
        };
        add("tensile strength", around(&strength.tensile_strength_pa), 1e-3, "kPa", &|k, v| {
            with(k, &|c| c.tensile_strength_pa = Uncertain::Exact(v));
        });
        add("cohesion", around(&strength.cohesion_pa), 1e-3, "kPa", &|k, v| with(k, &|c| c.cohesion_pa = Uncertain::Exact(v)));
        let friction = friction_ends(&strength.friction_angle_rad);
        add("friction angle", friction, 180.0 / std::f64::consts::PI, "deg", &|k, v| {
            with(k, &|c| c.friction_angle_rad = Uncertain::Exact(v));
        });
    }
    all
}

/// Sets a rock's moist unit weight; the saturated one keeps its ratio to it.
fn set_unit_weight(rock: &mut Rock, n_per_m3: f64) {
    let ratio = rock.saturated_unit_weight_n_per_m3.mean() / rock.unit_weight_n_per_m3.mean();
    rock.unit_weight_n_per_m3 = Uncertain::Exact(n_per_m3);
    rock.saturated_unit_weight_n_per_m3 = Uncertain::Exact(ratio * n_per_m3);
}

/// Ends of a friction angle: one standard deviation, else its tangent times 0.7 and 1.3.
fn friction_ends(angle_rad: &Uncertain) -> [f64; 2] {
    let tan = angle_rad.mean().tan();
    low_high(angle_rad, [((1.0 - STRENGTH_STEP) * tan).atan(), ((1.0 + STRENGTH_STEP) * tan).atan()])
}

/// Stiffness of the stiffest layer that carries tension, times 1/2 and 2 against the rest.
fn stiffness_ratio(model: &Model) -> Option<Variation> {
    let carrying = model.layers.iter().filter(|l| l.carries == Carries::LoadAndTension).map(|l| l.rock);
    let stiffest = carrying.max_by(|&a, &b| model.rocks[a].youngs_modulus_pa.total_cmp(&model.rocks[b].youngs_modulus_pa))?;
    if model.layers.iter().all(|l| l.rock == stiffest) {
        return None;
    }
    let models = [0.5, 2.0].map(|f| changed(model, |m| m.rocks[stiffest].youngs_modulus_pa *= f));
    let what = format!("stiffness of {} against the rest, times", model.rocks[stiffest].name);
    Some(Variation { what, ends: [0.5, 2.0], unit: "", models, solve_again: true, k0_held: false })
}

/// Poisson's ratio of all rocks, with k0 held.
fn poisson(model: &Model, used: &[usize]) -> Option<Variation> {
    let shown = *used.first()?;
    let with = |step: f64| {
        changed(model, |m| {
            for &r in used {
                m.rocks[r].poissons_ratio = (m.rocks[r].poissons_ratio + step).clamp(0.01, 0.49);
            }
        })
    };
    let models = [with(-POISSON_STEP), with(POISSON_STEP)];
    let ends = [0, 1].map(|i| models[i].rocks[shown].poissons_ratio);
    let what = format!("Poisson's ratio of all rocks ({} shown)", model.rocks[shown].name);
    Some(Variation { what, ends, unit: "", models, solve_again: true, k0_held: true })
}
