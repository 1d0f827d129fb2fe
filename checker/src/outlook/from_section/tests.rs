use super::{SectionValues, counts, demand_model, inputs_of};
use crate::analysis::load_cases::{CaseSet, State, superpose};
use crate::demand::{CheckKind, LineValue, Piece, PlaceValue};
use crate::model::{Model, RockStrength, Situation, Surcharge, Uncertain};
use crate::outlook::demand_model::{Sample, margin_of};
use crate::strength::Strength;
use crate::testing::{layer, model, rock};

/// Two rocks in three layers, a surcharge, a ground motion with a yearly chance and one without.
fn section() -> Model {
    let mut m = model(
        vec![rock("lime", 25.0, 8e3, 0.25), rock("marl", 22.0, 1e3, 0.3)],
        vec![layer(0, Some(6.0)), layer(1, Some(3.0)), layer(0, None)],
    );
    m.rocks[0].k0 = Some(Uncertain::Exact(0.6));
    m.rocks[1].k0 = Some(Uncertain::Exact(0.8));
    m.surcharges.push(Surcharge { name: "hut".into(), x_m: [1.0, 3.0], pressure_pa: 40e3, inertia: true });
    m.situations[0].surcharges = vec![0];
    let shaking = |annual_chance| Situation {
        name: "ground motion".into(),
        inertia_seaward: 0.08,
        inertia_up: 0.03,
        annual_chance,
        ..m.situations[0].clone()
    };
    let more = [shaking(Some(0.002)), shaking(None)];
    m.situations.extend(more);
    m
}

fn place(layer: usize, tension: Option<CheckKind>, n_cases: usize, seed: f64) -> PlaceValue {
    let fine = (0..n_cases).map(|k| [0.0, 1.0, 2.0].map(|c: f64| (seed + 1.3 * k as f64 + 0.7 * c).sin())).collect();
    PlaceValue { tension, at_m: [seed, 0.0], layer, length_m: 0.4, short: false, fine, raw: vec![], coarse: vec![], background: vec![] }
}

fn line(n_cases: usize) -> LineValue {
    let normal = |layer: usize| (0..n_cases).map(|k| -1.0 + 0.3 * (k as f64 + layer as f64).cos()).collect::<Vec<f64>>();
    let piece = |layer, from, to| Piece { layer, along_m: [from, to], normal_pa: normal(layer), normal_coarse_pa: vec![] };
    LineValue {
        from_m: [5.0, 0.0],
        to_m: [6.0, 8.0],
        areas_m2: vec![9.0, 14.0, 11.0],
        centroids_m: vec![[2.5, 7.0], [2.6, 4.5], [2.4, 1.6]],
        surcharges: vec![(2.0, [2.0, 8.0])],
        pieces: vec![piece(2, 0.0, 3.0), piece(1, 3.0, 6.0), piece(0, 6.0, 65.0_f64.sqrt())],
        loose_m: Vec::new(),
        set: None,
        waters: vec![],
        water_of_situation: vec![],
    }
}

/// Margin of one limit by the laws that the checks themselves use.
fn by_the_checks(m: &Model, (places, line): (&[PlaceValue], &LineValue), check: &str, situation: usize, at: [f64; 2]) -> f64 {
    let cases = CaseSet::new(m);
    let state = State { situation, unit_weight_n_per_m3: vec![25e3, 22e3], k0: vec![0.6, 0.8] };
    let coefficients = cases.coefficients(m, &state);
    let strength = Strength { tensile_strength_pa: 500e3, cohesion_pa: 1000e3, tan_friction: 35_f64.to_radians().tan(), cut_from_pa: None };
    let limits = [Some(strength), Some(strength)];
    let forces = line.effective_forces(m, &state);
    if check == "section shear" {
        let pair = line.shear(m, &forces, &coefficients, &limits);
        return pair.capacity_pa - pair.demand_pa.abs();
    }
    if check == "section bending" {
        let (.., pair) = line.bending(m, &forces, &limits).unwrap();
        return pair.capacity_pa - pair.demand_pa;
    }
    let place = places.iter().find(|p| (p.at_m[0] - at[0]).abs() < 1e-12).unwrap();
    let [xx, zz, xz] = superpose(&coefficients, &place.fine);
    let (center, radius) = (0.5 * (xx + zz), (0.5 * (xx - zz)).hypot(xz));
    if check == "local shear" {
        strength.cohesion_pa - center * strength.tan_friction - radius * strength.tan_friction.hypot(1.0)
    } else {
        strength.tensile_strength_pa - center - radius
    }
}

/// Every margin of the demand model against the laws of the checks, in each situation that counts, with known inputs.
#[test]
fn margins_are_those_of_the_checks() {
    let m = section();
    let cases = CaseSet::new(&m);
    let n = cases.cases.len();
    let places = [
        place(0, Some(CheckKind::CliffTopTension), n, 0.1),
        place(1, Some(CheckKind::RoofTension), n, 0.9),
        place(2, Some(CheckKind::RoofTension), n, 1.7),
        place(2, None, n, 2.4),
    ];
    let lines = [line(n)];
    let inputs = inputs_of(&m, Uncertain::Exact(1.0), 30.0).unwrap();
    let series = [SectionValues { depth_m: 2.0, places: &places, lines: &lines }];
    let demand = demand_model(&m, &inputs, &cases, &series, &|_, _| false);
    demand.sanity_check();
    assert_eq!(demand.situations.len(), 2, "a ground motion without a chance never counts");
    let sample = Sample::new(&demand, &inputs.variables.medians());
    // The worst fibre of all rocks belongs to one of them: the least margin of a check over its limits.
    let mut least: std::collections::BTreeMap<(usize, &str), (f64, [f64; 2])> = std::collections::BTreeMap::new();
    for (i, limit) in demand.limits.iter().enumerate() {
        let Some((margin, i_place)) = margin_of(&demand, 0, i, &sample) else { continue };
        let entry = least.entry((limit.situation, limit.check)).or_insert((f64::INFINITY, [0.0; 2]));
        if margin < entry.0 {
            *entry = (margin, demand.places[0][i].at_m[i_place]);
        }
    }
    assert_eq!(least.len(), 10, "all five checks in both situations: {least:?}");
    for ((situation, check), (margin, at)) in least {
        let expected = by_the_checks(&m, (&places, &lines[0]), check, situation, at);
        // Sums of a dozen terms of 1e5 Pa in another order.
        assert!((margin - expected).abs() < 1e-4, "{check} in situation {situation}: {margin} against {expected}");
    }
}

#[test]
fn inputs_carry_names_and_gaps() {
    let mut m = section();
    m.rocks[1].k0 = None;
    m.rocks[1].strength = RockStrength::None;
    m.rocks[0].unit_weight_n_per_m3 = Uncertain::Lognormal { mean: 25e3, cov: 0.05 };
    let inputs = inputs_of(&m, Uncertain::Lognormal { mean: 1.0, cov: 0.3 }, 30.0).unwrap();
    assert_eq!(inputs.k0_not_measured, ["marl"]);
    assert!(inputs.strengths[0].is_some() && inputs.strengths[1].is_none());
    let names: Vec<&str> = inputs.variables.random().iter().map(|&i| inputs.variables.name(i)).collect();
    assert_eq!(names, ["unit weight lime", "k0 marl", "model factor"]);
    m.rocks[0].unit_weight_n_per_m3 = Uncertain::Lognormal { mean: -1.0, cov: 0.05 };
    assert!(inputs_of(&m, Uncertain::Exact(1.0), 30.0).unwrap_err()[0].to_string().contains("positive mean"));
    assert_eq!(m.situations.iter().map(counts).collect::<Vec<_>>(), [true, true, false]);
}
