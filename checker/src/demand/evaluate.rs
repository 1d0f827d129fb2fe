//! All checks at one depth: the worst place or line of every check in every situation for cautious and mean inputs.
use super::CheckKind;
use super::joint::Held;
use super::line::LineValue;
use super::place::{Pair, PlaceValue, shear, tension};
use super::states::{InputCase, K0Case};
use crate::analysis::load_cases::{CaseSet, State};
use crate::model::{Model, Rock, Uncertain};
use crate::outcome::CheckResult;
use crate::strength::joint_set::JointCapacity;
use crate::strength::{Strength, StrengthError, quantile};

/// Chance below which the low end and above which the high end of an input lies.
const LOW_END: f64 = 0.05;

/// What the checks of one depth are evaluated from.
#[derive(Debug)]
pub struct Evaluation<'a> {
    /// The model.
    pub model: &'a Model,
    /// Unit load cases of the tensors.
    pub cases: &'a CaseSet,
    /// Strengths of each rock for mean inputs; `None` = holds nothing.
    pub best: &'a [Option<Strength>],
    /// Strengths of each rock for cautious inputs.
    pub cautious: &'a [Option<Strength>],
    /// Strengths of the joint sets for mean and for cautious inputs.
    pub joints: &'a [Vec<JointCapacity>; 2],
    /// Ends of each rock's uncertain weights and stress ratios.
    pub ends: &'a [RockEnds],
    /// Choices of the in-situ stress ratio, of which the worse counts.
    pub k0_cases: &'a [K0Case],
    /// Which inputs are evaluated.
    pub inputs: &'a [InputCase],
    /// Undercut depth, m.
    pub depth_m: f64,
    /// Overhang thickness at this depth, m.
    pub thickness_m: f64,
    /// Share of each layer in that thickness.
    pub thickness_shares: &'a [f64],
    /// Surface, contact and inside places.
    pub places: &'a [PlaceValue],
    /// Area that an inside place stands for, m2.
    pub cell_m2: f64,
    /// Rupture lines.
    pub lines: &'a [LineValue],
}

/// The worst place or line of a check.
#[derive(Debug, Clone, PartialEq)]
pub struct Found {
    /// Check.
    pub kind: CheckKind,
    /// Situation.
    pub situation: usize,
    /// Inputs.
    pub inputs: InputCase,
    /// Weights and in-situ stress of the result.
    pub state: State,
    /// Index of the place or line.
    pub index: usize,
    /// Published result.
    pub result: CheckResult,
}

/// Worst place or line for one state.
#[derive(Debug, Clone, Copy)]
struct Worst {
    index: usize,
    pair: Pair,
    at_m: [f64; 2],
    layer: usize,
    zone_m2: f64,
}

/// Evaluates every check in every situation for both inputs; checks without any place are left out.
pub fn evaluate(e: &Evaluation<'_>) -> Vec<Found> {
    let mut found = Vec::new();
    for situation in 0..e.model.situations.len() {
        for &inputs in e.inputs {
            for kind in CheckKind::ALL {
                found.extend(check(e, kind, situation, inputs));
            }
        }
    }
    found
}

/// One check: the worse of the k0 cases.
fn check(e: &Evaluation<'_>, kind: CheckKind, situation: usize, inputs: InputCase) -> Option<Found> {
    let mut best: Option<(Worst, State, &'static str)> = None;
    for case in e.k0_cases {
        let state = worst_state(e, kind, situation, inputs, case);
        let Some(worst) = worst_at(e, kind, &state, inputs) else { continue };
        if best.as_ref().is_none_or(|b| rank(&b.0.pair) < rank(&worst.pair)) {
            best = Some((worst, state, case.label.unwrap_or("")));
        }
    }
    let (worst, state, label) = best?;
    let result = publish(e, (kind, inputs), &worst, &state, label);
    Some(Found { kind, situation, inputs, state, index: worst.index, result })
}

/// Mean weights and k0, or for cautious inputs the ends that raise the check's utilization, chosen one input at a time.
fn worst_state(e: &Evaluation<'_>, kind: CheckKind, situation: usize, inputs: InputCase, case: &K0Case) -> State {
    let mean = State {
        situation,
        unit_weight_n_per_m3: e.model.rocks.iter().map(|r| r.unit_weight_n_per_m3.mean()).collect(),
        k0: case.k0.clone(),
    };
    if inputs == InputCase::BestEstimate {
        return mean;
    }
    let mut chosen = mean.clone();
    let value = |state: &State| worst_at(e, kind, state, inputs).map_or(f64::NEG_INFINITY, |w| rank(&w.pair));
    for (r, rock) in e.ends.iter().enumerate() {
        if let Some(ends) = rock.unit_weight_n_per_m3 {
            let with = |v: f64| State { unit_weight_n_per_m3: replaced(&mean.unit_weight_n_per_m3, r, v), ..mean.clone() };
            chosen.unit_weight_n_per_m3[r] = if value(&with(ends[0])) <= value(&with(ends[1])) { ends[1] } else { ends[0] };
        }
        if let Some(ends) = rock.k0 {
            let with = |v: f64| State { k0: replaced(&mean.k0, r, v), ..mean.clone() };
            chosen.k0[r] = if value(&with(ends[0])) <= value(&with(ends[1])) { ends[1] } else { ends[0] };
        }
        chosen.unit_weight_n_per_m3[r] *= e.model.checks.partial_factors.unit_weight;
    }
    chosen
}

/// A copy with one value replaced.
fn replaced(values: &[f64], index: usize, value: f64) -> Vec<f64> {
    let mut copy = values.to_vec();
    copy[index] = value;
    copy
}

/// The 5 % and 95 % ends of a rock's uncertain unit weight and in-situ stress ratio; none for a known one.
#[derive(Debug, Clone, Copy, Default, PartialEq)]
pub struct RockEnds {
    /// Unit weight, N/m3.
    pub unit_weight_n_per_m3: Option<[f64; 2]>,
    /// In-situ stress ratio.
    pub k0: Option<[f64; 2]>,
}

/// Ends of a rock's uncertain inputs.
///
/// # Errors
/// A distribution that cannot exist.
pub fn rock_ends(rock: &Rock) -> Result<RockEnds, StrengthError> {
    let ends = |value: &Uncertain| match value {
        Uncertain::Exact(_) => Ok(None),
        uncertain => Ok(Some([quantile(*uncertain, LOW_END)?, quantile(*uncertain, 1.0 - LOW_END)?])),
    };
    Ok(RockEnds { unit_weight_n_per_m3: ends(&rock.unit_weight_n_per_m3)?, k0: rock.k0.as_ref().map_or(Ok(None), ends)? })
}

/// Order of pairs from harmless to worst: signed ratio, infinite where nothing is left to carry.
fn rank(pair: &Pair) -> f64 {
    if pair.beyond_apex {
        f64::NEG_INFINITY
    } else if 0.0 < pair.capacity_pa {
        pair.demand_pa / pair.capacity_pa
    } else if 0.0 < pair.demand_pa {
        f64::INFINITY
    } else {
        f64::MIN
    }
}

/// Worst place or line of a check in a state.
fn worst_at(e: &Evaluation<'_>, kind: CheckKind, state: &State, inputs: InputCase) -> Option<Worst> {
    let coefficients = e.cases.coefficients(e.model, state);
    match kind {
        CheckKind::CliffTopTension | CheckKind::RoofTension | CheckKind::LocalShear => worst_place(e, kind, &coefficients, inputs),
        _ => worst_line(e, kind, state, &coefficients, inputs),
    }
}

fn limits<'a>(e: &Evaluation<'a>, inputs: InputCase) -> &'a [Option<Strength>] {
    match inputs {
        InputCase::Cautious => e.cautious,
        InputCase::BestEstimate => e.best,
    }
}

fn worst_place(e: &Evaluation<'_>, kind: CheckKind, coefficients: &[f64], inputs: InputCase) -> Option<Worst> {
    let limits = limits(e, inputs);
    let mut worst: Option<Worst> = None;
    let (mut zone_m2, mut apex) = (0.0, None);
    for (index, place) in e.places.iter().enumerate() {
        let Some(limit) = limits[e.model.layers[place.layer].rock] else { continue };
        let pair = match kind {
            CheckKind::LocalShear => shear(coefficients, &place.fine, &limit),
            _ if place.tension == Some(kind) => tension(coefficients, &place.fine, &limit),
            _ => continue,
        };
        let candidate = Worst { index, pair, at_m: place.at_m, layer: place.layer, zone_m2: 0.0 };
        let over = pair.beyond_apex || 1.0 < rank(&pair) * e.model.checks.required_reserve;
        if place.tension.is_none() && over {
            zone_m2 += e.cell_m2;
        }
        if pair.beyond_apex {
            apex.get_or_insert(candidate);
        } else if worst.as_ref().is_none_or(|w| rank(&w.pair) < rank(&pair)) {
            worst = Some(candidate);
        }
    }
    worst.or(apex).map(|w| Worst { zone_m2, ..w })
}

fn worst_line(e: &Evaluation<'_>, kind: CheckKind, state: &State, coefficients: &[f64], inputs: InputCase) -> Option<Worst> {
    let mut worst: Option<Worst> = None;
    for (index, line) in e.lines.iter().enumerate().filter(|(_, l)| l.set.is_some() == kind.is_of_joints()) {
        let Some((along, layer, pair)) = line_pair(e, kind, line, (state, coefficients), inputs) else { continue };
        if worst.as_ref().is_none_or(|w| rank(&w.pair) < rank(&pair)) {
            let t = along / line.length_m();
            let at_m = [0, 1].map(|k| line.from_m[k] + t * (line.to_m[k] - line.from_m[k]));
            worst = Some(Worst { index, pair, at_m, layer, zone_m2: 0.0 });
        }
    }
    worst
}

/// Place along the line, layer there, demand and capacity of a check on a line.
fn line_pair(
    e: &Evaluation<'_>,
    kind: CheckKind,
    line: &LineValue,
    (state, coefficients): (&State, &[f64]),
    inputs: InputCase,
) -> Option<(f64, usize, Pair)> {
    let (limits, forces) = (limits(e, inputs), line.effective_forces(e.model, state));
    let held = Held { model: e.model, limits, joints: &e.joints[usize::from(inputs == InputCase::Cautious)] };
    let (along, pair) = match kind {
        CheckKind::SectionBending => return line.bending(e.model, &forces, limits),
        CheckKind::JointOpening => (line.length_m(), line.opening(&held, &forces, coefficients)?),
        CheckKind::JointSlip => (0.5 * line.length_m(), line.slip(&held, &forces, coefficients)?),
        _ => (0.5 * line.length_m(), line.shear(e.model, &forces, coefficients, limits)),
    };
    let layer = line.pieces.iter().find(|p| along <= p.along_m[1]).or(line.pieces.last())?.layer;
    Some((along, layer, pair))
}

/// The published result with background, closed-form partner and numerical error.
fn publish(e: &Evaluation<'_>, (kind, inputs): (CheckKind, InputCase), worst: &Worst, state: &State, label: &str) -> CheckResult {
    let reserve = e.model.checks.required_reserve;
    let coefficients = e.cases.coefficients(e.model, state);
    let utilization = worst.pair.utilization();
    let (background_pa, error, place) = match kind {
        CheckKind::SectionBending => (None, 0.0, None),
        CheckKind::SectionShear | CheckKind::JointOpening | CheckKind::JointSlip => {
            (None, line_error(e, kind, worst, (state, &coefficients), inputs), None)
        }
        _ => {
            let place = &e.places[worst.index];
            (background(e, kind, place, &coefficients, inputs), place_error(e, kind, place, &coefficients, inputs), Some(place))
        }
    };
    let line = (!kind.is_local()).then(|| &e.lines[worst.index]);
    let sheared = matches!(kind, CheckKind::SectionShear | CheckKind::JointSlip);
    let per_m = |pa: f64| line.filter(|_| sheared).map(|l| pa * l.length_m() / 1e3);
    // an opening is a length in m
    let unit = if kind == CheckKind::JointOpening { 1.0 } else { 1e3 };
    let rock = &e.model.rocks[e.model.layers[worst.layer].rock].name;
    let set = line.and_then(|l| l.set).map(|s| &e.model.joint_sets[s].name);
    CheckResult {
        check: kind.id(),
        situation: e.model.situations[state.situation].name.clone(),
        inputs: inputs.id(),
        demand_kpa: worst.pair.demand_pa / unit,
        capacity_kpa: worst.pair.capacity_pa / unit,
        utilization,
        error,
        background_kpa: background_pa.map(|b| b / 1e3),
        averaging_length_m: place.map(|p| p.length_m),
        over: utilization.map_or(!worst.pair.beyond_apex && 0.0 < worst.pair.demand_pa, |u| 1.0 < u * reserve),
        at: worst.at_m,
        rock: set.map_or_else(|| rock.clone(), |set| format!("{set} in {rock}")),
        closed_form_demand_kpa: closed_form_pa(e, kind, state).map(|p| p / 1e3),
        k0_case: (!label.is_empty() && kind != CheckKind::SectionBending).then(|| label.to_owned()),
        demand_kn_per_m: per_m(worst.pair.demand_pa),
        capacity_kn_per_m: per_m(worst.pair.capacity_pa),
        beyond_apex: worst.pair.beyond_apex,
        short_segment: place.is_some_and(|p| p.short),
        zone_m2: (kind == CheckKind::LocalShear).then_some(worst.zone_m2),
        line: line.map(|l| [l.from_m, l.to_m]),
    }
}

fn place_pair(e: &Evaluation<'_>, kind: CheckKind, place: &PlaceValue, tensors: &[[f64; 3]], input: (&[f64], InputCase)) -> Option<Pair> {
    let limit = limits(e, input.1)[e.model.layers[place.layer].rock]?;
    Some(if kind == CheckKind::LocalShear { shear(input.0, tensors, &limit) } else { tension(input.0, tensors, &limit) })
}

fn background(e: &Evaluation<'_>, kind: CheckKind, place: &PlaceValue, coefficients: &[f64], inputs: InputCase) -> Option<f64> {
    let tensors = if place.background.is_empty() { &place.fine } else { &place.background };
    place_pair(e, kind, place, tensors, (coefficients, inputs)).map(|p| p.demand_pa)
}

/// Numerical error of a place's utilization: the larger of its change between the last two meshes and half the difference
/// between recovered and unrecovered stress on its own segment.
fn place_error(e: &Evaluation<'_>, kind: CheckKind, place: &PlaceValue, coefficients: &[f64], inputs: InputCase) -> f64 {
    let value = |tensors: &[[f64; 3]]| {
        let pair = place_pair(e, kind, place, tensors, (coefficients, inputs));
        pair.and_then(|p| if 0.0 < p.capacity_pa { Some(p.demand_pa / p.capacity_pa) } else { None })
    };
    let Some(fine) = value(&place.fine) else { return 0.0 };
    let change = |tensors: &[[f64; 3]]| if tensors.is_empty() { 0.0 } else { value(tensors).map_or(0.0, |v| (fine - v).abs()) };
    change(&place.coarse).max(0.5 * change(&place.raw))
}

/// Change of a line's utilization between the last two meshes.
fn line_error(e: &Evaluation<'_>, kind: CheckKind, worst: &Worst, at: (&State, &[f64]), inputs: InputCase) -> f64 {
    let line = &e.lines[worst.index];
    let [fine, coarse] = [line.clone(), line.on_coarse_mesh()].map(|l| line_pair(e, kind, &l, at, inputs).and_then(|p| p.2.utilization()));
    fine.zip(coarse).map_or(0.0, |(a, b)| (a - b).abs())
}

/// Closed-form partner of a check, with the depth `L`, the thickness `h` and the mean unit weight over it.
///
/// ```text
/// cliff-top tension, section bending   3 gamma L^2 / h        (cantilever of constant thickness)
/// section shear                        gamma L
/// ```
fn closed_form_pa(e: &Evaluation<'_>, kind: CheckKind, state: &State) -> Option<f64> {
    let (depth, h) = (e.depth_m, e.thickness_m);
    let weighed = e.thickness_shares.iter().zip(&e.model.layers).map(|(share, layer)| share * state.unit_weight_n_per_m3[layer.rock]);
    let gamma: f64 = weighed.sum();
    match kind {
        CheckKind::CliffTopTension | CheckKind::SectionBending => Some(3.0 * gamma * depth * depth / h),
        CheckKind::SectionShear => Some(gamma * depth),
        _ => None,
    }
}

/// Signed utilization of a place by a check for given tensors; what the mesh is adapted to.
pub fn place_utilization(e: &Evaluation<'_>, found: &Found, tensor: [f64; 3]) -> Option<f64> {
    let place = e.places.get(found.index)?;
    let pair = place_pair(e, found.kind, place, &[tensor], (&[1.0], found.inputs))?;
    if 0.0 < pair.capacity_pa { Some(pair.demand_pa / pair.capacity_pa) } else { None }
}
