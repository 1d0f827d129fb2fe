//! The whole outlook of one section: refusals, rate, samples, years, setback, assets, triggers, cross-check.
mod publish;
mod scenario;

use super::critical::{SearchParams, critical_depths, one_critical_depth};
use super::cycle::GroundLost;
use super::demand_model::{DemandModel, Sample};
use super::form::FORM_PARAMS;
use super::growth::{Growth, GrowthParams};
use super::modes::{CollapseLimits, Mode};
use super::rates::{Rate, fit_surveys, rate_from_edge};
use super::refusals::{TodaysChecks, refusals};
use super::sampling::{Draws, Mixture};
use super::variables::Variables;
use super::years::Timeline;
use crate::model::{Date, DeepeningRate, Evidence, Model, Outlook};
use crate::outcome::{OutlookInfo, Refusal};
use publish::Found;
use scenario::Scenario;

/// Chance of having already fallen over which the inputs contradict the standing cliff so much that no outlook is given.
pub const ALREADY_FALLEN_REFUSED: f64 = 0.30;
/// Chance of having already fallen over which the contradiction is warned of.
pub const ALREADY_FALLEN_WARNED: f64 = 0.05;
/// Share of the smallest accepted chance with which the undercut may grow beyond the depths searched.
pub const BEYOND_SHARE: f64 = 0.1;
/// Accepted chance that stands in where no asset has one.
pub const CHANCE_WITHOUT_ASSETS: f64 = 1e-2;
/// Samples that are judged again by every place.
const RECHECKED: u64 = 1000;

/// Evidence with the inputs that it speaks about.
#[derive(Debug, Clone, Copy)]
pub struct EvidenceInput<'a> {
    /// What was seen.
    pub evidence: &'a Evidence,
    /// Strength entry of its rock in the demand model.
    pub strength: usize,
    /// Input of its unit weight.
    pub unit_weight: usize,
    /// Its own section where it was solved; without one the closed form of a uniform overhang stands in.
    pub section: Option<&'a DemandModel>,
}

/// Everything the outlook is made from.
#[derive(Debug, Clone, Copy)]
pub struct AssessInput<'a> {
    /// The model.
    pub model: &'a Model,
    /// Its outlook.
    pub outlook: &'a Outlook,
    /// Demands and strengths at the depths of the series.
    pub demand: &'a DemandModel,
    /// Inputs.
    pub variables: &'a Variables,
    /// Index of today's depth in the series.
    pub today_index: usize,
    /// Ground lost by a first collapse, by limit and depth.
    pub ground_lost: &'a GroundLost,
    /// Lay-back of the loose cap, m.
    pub lay_back_m: f64,
    /// Place of today's brow, m.
    pub brow_x_m: f64,
    /// Critical depth with cautious inputs, m.
    pub cautious_critical_m: Option<f64>,
    /// What the checks of today say.
    pub checks: &'a TodaysChecks,
    /// Day from which years count: that of the survey.
    pub today: Option<Date>,
    /// Evidence.
    pub evidence: &'a [EvidenceInput<'a>],
}

impl AssessInput<'_> {
    /// Undercut depth today, m.
    pub fn today_m(&self) -> f64 {
        self.demand.depths_m[self.today_index]
    }

    /// Smallest accepted chance of the assets.
    pub fn smallest_accepted(&self) -> Option<f64> {
        self.outlook.assets.iter().filter_map(|a| a.accepted.as_ref()).map(|a| a.probability).min_by(f64::total_cmp)
    }
}

/// The outlook; what is refused is said in `refused`, and then no years, probability or setback are given.
pub fn assess(input: &AssessInput) -> OutlookInfo {
    let refused = refusals(input.model, input.outlook, input.checks);
    if !refused.is_empty() {
        return OutlookInfo { refused, ..OutlookInfo::default() };
    }
    match sampled(input) {
        Ok(info) => info,
        Err(refusal) => OutlookInfo { refused: vec![refusal], ..OutlookInfo::default() },
    }
}

fn sampled(input: &AssessInput) -> Result<OutlookInfo, Refusal> {
    let outlook = input.outlook;
    let refuse = |code, reason: String| Refusal { code, reason };
    let rate = rate_of(input)?;
    let growth = Growth::new(&rate.0).map_err(|e| refuse("outlook.rate", e.to_string()))?;
    let latest = outlook.assets.iter().filter_map(|a| a.accepted.as_ref()).map(|a| a.over_yr).fold(outlook.horizon_yr, f64::max);
    let timeline = Timeline::new(&growth, latest).map_err(|e| refuse("outlook.storms", e.to_string()))?;
    searched_far_enough(input, &timeline, latest)?;

    let depth_indices: Vec<usize> = (input.today_index..input.demand.depths_m.len()).collect();
    let draws = Draws::plain(outlook.seed);
    let plain = Scenario::new(input, &draws, outlook.samples.max(2), &depth_indices)?;
    recheck(input, &draws, &plain, &depth_indices);
    let fallen = plain.cliff(input).already_fallen();
    if ALREADY_FALLEN_REFUSED < fallen.probability {
        let share = 100.0 * fallen.probability;
        let reason = format!("the inputs contradict the standing cliff: by them it has already fallen with a chance of {share:.0} %");
        return Err(refuse("outlook.already-fallen", reason));
    }

    let horizon = &timeline.growth[timeline.index_at(outlook.horizon_yr)];
    let limits = CollapseLimits { model: input.demand, variables: input.variables, depth_indices: &depth_indices, growth: horizon };
    let modes: Vec<Mode> = limits.modes(&FORM_PARAMS);
    let points: Vec<_> = modes.iter().map(|m| m.point.clone()).collect();
    let mixture = Mixture::about(&points, input.variables.n_random());
    let n_important = (outlook.samples / 4).clamp(2_000, 40_000);
    let important = Scenario::new(input, &Draws::mixture(outlook.seed, mixture), n_important, &depth_indices)?;
    let last = depth_indices.len() - 1;
    let coarse_indices: Vec<usize> = depth_indices.iter().enumerate().filter(|(k, _)| k % 2 == 0 || *k == last).map(|(_, i)| *i).collect();
    let coarse = critical_depths(
        input.demand,
        input.variables,
        &draws,
        &SearchParams { n_samples: outlook.samples.clamp(2, 20_000), depth_indices: &coarse_indices },
    );
    Ok(publish::publish(&Found {
        input,
        rate: &rate,
        growth: &growth,
        timeline: &timeline,
        plain: &plain,
        important: &important,
        coarse: &coarse,
        limits: &limits,
        modes: &modes,
    }))
}

/// Mean, not knowing and swings of the rate, and words for its basis.
fn rate_of(input: &AssessInput) -> Result<(GrowthParams, String), Refusal> {
    let outlook = input.outlook;
    let refuse = |reason: String| Refusal { code: "outlook.rate", reason };
    let (rate, year_to_year_cov, basis) = match &outlook.rate {
        DeepeningRate::Given { mean_m_per_yr, uncertainty_cov, year_to_year_cov } => {
            let rate = Rate { mean_m_per_yr: *mean_m_per_yr, uncertainty_cov: *uncertainty_cov };
            (rate, *year_to_year_cov, outlook.basis.clone())
        }
        DeepeningRate::Surveys(surveys) => {
            let fit = fit_surveys(surveys).map_err(|e| refuse(e.to_string()))?;
            let words = format!("{}; fitted to {} dated depths over {:.1} years", outlook.basis, surveys.len(), fit.record_yr);
            (fit.rate, 0.0, words)
        }
        DeepeningRate::EdgeRetreat(edge) => {
            let years = f64::from(edge.to - edge.from);
            let block_m = input.ground_lost.lost_m.iter().flatten().copied().fold(0.0, f64::max);
            let rate = rate_from_edge(edge.m_per_yr, years, block_m).map_err(|e| refuse(e.to_string()))?;
            let words = format!("{}; retreat of the edge {} to {} ({})", outlook.basis, edge.from, edge.to, edge.basis);
            (rate, 0.0, words)
        }
    };
    let params = GrowthParams {
        mean_m_per_yr: rate.mean_m_per_yr,
        uncertainty_cov: rate.uncertainty_cov,
        year_to_year_cov,
        storms: outlook.storms,
        sea_level_rise: outlook.sea_level_rise,
        horizon_yr: outlook.horizon_yr,
    };
    Ok((params, basis))
}

/// Refuses when the undercut may grow beyond the depths searched more often than a tenth of the smallest accepted chance.
fn searched_far_enough(input: &AssessInput, timeline: &Timeline, latest_yr: f64) -> Result<(), Refusal> {
    let last_m = input.demand.depths_m[input.demand.depths_m.len() - 1];
    let horizon = &timeline.growth[timeline.index_at(latest_yr)];
    let allowed = BEYOND_SHARE * input.smallest_accepted().unwrap_or(CHANCE_WITHOUT_ASSETS);
    let beyond = horizon.exceedance(last_m - input.today_m());
    if allowed < beyond {
        let needed = input.today_m() + horizon.exceeded_with(allowed);
        let reason = format!(
            "in {latest_yr} years the undercut lies beyond the searched {last_m:.1} m with a chance of {beyond:.1e}, more than {allowed:.1e}: \
             set search_to_depth_m to {needed:.1} or more, or shorten the horizon"
        );
        return Err(Refusal { code: "outlook.search-depth", reason });
    }
    Ok(())
}

/// Judges the first samples again by every place: the proof of the bounds, run beside every outlook.
///
/// # Panics
/// If one of them differs, which would be a fault of this program.
fn recheck(input: &AssessInput, draws: &Draws, plain: &Scenario, depth_indices: &[usize]) {
    use rayon::prelude::*;
    let n = RECHECKED.min(plain.depths.depth_m.len() as u64);
    (0..n).into_par_iter().for_each(|i| {
        let (mut u, mut x) = (vec![0.0; input.variables.n_random()], vec![0.0; input.variables.n_inputs()]);
        draws.draw(i, &mut u);
        input.variables.from_standard(&u, &mut x);
        let slow = one_critical_depth(input.demand, &Sample::new(input.demand, &x), depth_indices)[0];
        let fast = plain.depths.depth_m[i as usize];
        assert!(slow.to_bits() == fast.to_bits(), "sample {i}: critical depth {fast} m with bounds, {slow} m by every place");
    });
}

#[cfg(test)]
pub(super) mod tests;
