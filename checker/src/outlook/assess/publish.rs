//! From samples, growth and design points to the published outlook.
use super::scenario::Scenario;
use super::{ALREADY_FALLEN_WARNED, AssessInput, CHANCE_WITHOUT_ASSETS, RECHECKED};
use crate::model::{Asset, Uncertain};
use crate::outcome::{AssetInfo, CrossCheck, EvidenceInfo, Note, OutlookInfo, Quantiles, RateInfo, SamplingInfo, SetbackInfo, Trigger};
use crate::outlook::critical::SampledDepths;
use crate::outlook::form::DesignPoint;
use crate::outlook::growth::{Growth, GrowthParams};
use crate::outlook::modes::{CollapseLimits, Mode};
use crate::outlook::random::Streams;
use crate::outlook::reliability::{EN_1990_TARGETS, index_of};
use crate::outlook::sampling::{Estimate, agreement};
use crate::outlook::setback::{Brow, edge_quantiles, less_favourable, year_passed};
use crate::outlook::triggers::{chance_ahead, day_after, depth_of_chance, next_survey_yr};
use crate::outlook::words::{chance_in_words, chance_with_range};
use crate::outlook::years::{ChanceBy, Cliff, Timeline, time_at_chance};

/// Samples used for the fan of the brow's position: a figure needs no more.
const FAN_SAMPLES: usize = 20_000;
/// With fewer expected collapses among the plain samples the chance is read from importance sampling: its error is 5 % there.
const RARE_HITS: f64 = 400.0;

/// Everything found.
pub(super) struct Found<'a> {
    pub(super) input: &'a AssessInput<'a>,
    pub(super) rate: &'a (GrowthParams, String),
    pub(super) growth: &'a Growth,
    pub(super) timeline: &'a Timeline,
    pub(super) plain: &'a Scenario,
    pub(super) important: &'a Scenario,
    pub(super) coarse: &'a SampledDepths,
    pub(super) limits: &'a CollapseLimits<'a>,
    pub(super) modes: &'a [Mode],
}

/// Year of the calendar, or years from today.
fn calendar(input: &AssessInput, time_yr: f64) -> f64 {
    input.today.map_or(0.0, |d| f64::from(d.year)) + time_yr
}

pub(super) fn publish(found: &Found) -> OutlookInfo {
    let (input, timeline) = (found.input, found.timeline);
    let i_horizon = timeline.index_at(input.outlook.horizon_yr);
    let prior = |scenario: &Scenario| Cliff { likelihood: None, ..scenario.cliff(input) }.chances(timeline);
    let (plain, important) = (prior(found.plain), prior(found.important));
    let check = cross_check(found, &plain[i_horizon], &important[i_horizon]);
    // Rare collapses are read from the samples drawn about the design points.
    let hits = plain[i_horizon].unconditioned.probability * found.plain.depths.depth_m.len() as f64;
    let better = important[i_horizon].unconditioned.standard_error < plain[i_horizon].unconditioned.standard_error;
    let scenario = if hits < RARE_HITS && better { found.important } else { found.plain };
    let cliff = scenario.cliff(input);
    let chances = cliff.chances(timeline);
    let brow = Brow { cliff, cycles: &scenario.cycles };
    let horizon = less_favourable((chances[i_horizon].unconditioned, chances[i_horizon].standing));

    let mut info = OutlookInfo { horizon_years: Some(input.outlook.horizon_yr), ..OutlookInfo::default() };
    by_year(&mut info, found, &chances);
    at_horizon(&mut info, &horizon);
    info.model_says_already_fallen = Some(found.plain.cliff(input).already_fallen().probability);
    info.probability_on_rate = on_rate(found, &cliff);
    info.in_words = Some(in_words(input, horizon.probability, info.probability_on_rate));
    info.targets = EN_1990_TARGETS.iter().map(|t| (t.class, t.one_year, t.fifty_years)).collect();
    info.critical_depth_distribution = distribution(input, &cliff);
    info.interpolation_error = Some(interpolation_error(found, i_horizon));
    info.brow_by_year = fan(input, &brow, timeline);
    setbacks(&mut info, input, &brow, timeline);
    info.assets = input.outlook.assets.iter().filter_map(|asset| asset_info(input, &brow, timeline, asset)).collect();
    triggers(&mut info, found, &cliff, &chances);
    info.importance = importance(found);
    info.cross_check = Some(check);
    info.rate = Some(RateInfo {
        m_per_yr: found.rate.0.mean_m_per_yr,
        uncertainty_cov: found.rate.0.uncertainty_cov,
        year_to_year_cov: found.rate.0.year_to_year_cov,
        basis: found.rate.1.clone(),
    });
    let n_plain = found.plain.depths.depth_m.len() as u64;
    info.sampling = Some(SamplingInfo {
        samples: n_plain,
        seed: input.outlook.seed,
        places: found.plain.depths.n_places,
        places_evaluated: found.plain.depths.n_reached,
        rechecked: RECHECKED.min(n_plain),
    });
    info.evidence = evidence(found, scenario, &chances[i_horizon], &plain[i_horizon]);
    warnings(&mut info, input);
    info
}

fn by_year(info: &mut OutlookInfo, found: &Found, chances: &[ChanceBy]) {
    let input = found.input;
    let within = chances.iter().filter(|c| 0.0 < c.time_yr && c.time_yr <= input.outlook.horizon_yr * (1.0 + 1e-9));
    for c in within {
        let year = calendar(input, c.time_yr).round() as i32;
        let standing = c.standing.unwrap_or(c.unconditioned);
        info.probability_by_year.push((year, c.unconditioned.probability));
        info.given_standing_today.push((year, standing.probability));
        info.sampling_error_by_year.push((year, [c.unconditioned.standard_error, standing.standard_error]));
    }
    let curve = standing_curve(chances);
    let at = |p| time_at_chance(&curve, p);
    info.years_to_critical = Some(Quantiles { median: at(0.5), p05: at(0.05), p95: at(0.95) });
}

fn standing_curve(chances: &[ChanceBy]) -> Vec<(f64, f64)> {
    chances.iter().map(|c| (c.time_yr, c.standing.unwrap_or(c.unconditioned).probability)).collect()
}

fn at_horizon(info: &mut OutlookInfo, horizon: &Estimate) {
    info.probability_at_horizon = Some(horizon.probability);
    info.sampling_error = Some(horizon.standard_error);
    info.sampling_interval = Some(horizon.interval);
    // A chance of exactly 0 or 1 has no finite index: none was seen to fall, or to stand.
    info.reliability_index = (0.0 < horizon.probability && horizon.probability < 1.0).then(|| index_of(horizon.probability));
}

/// Chance by the horizon with the rate at its 5 and at its 95 % value; `None` for a known rate.
fn on_rate(found: &Found, cliff: &Cliff) -> Option<[f64; 2]> {
    let params = &found.rate.0;
    if params.uncertainty_cov <= 0.0 {
        return None;
    }
    let zeta = params.uncertainty_cov.powi(2).ln_1p().sqrt();
    let mut ends = [0.0; 2];
    for (end, z) in ends.iter_mut().zip([-1.6448536269514722, 1.6448536269514722]) {
        let mean_m_per_yr = params.mean_m_per_yr * (zeta * z - 0.5 * zeta * zeta).exp();
        let growth = Growth::new(&GrowthParams { mean_m_per_yr, uncertainty_cov: 0.0, ..*params }).ok()?;
        let times: Vec<f64> = (0..=found.timeline.index_at(params.horizon_yr)).map(|i| found.timeline.times_yr[i]).collect();
        let chances = cliff.chances(&Timeline::at(&growth, &times).ok()?);
        let last = chances[chances.len() - 1];
        *end = less_favourable((last.unconditioned, last.standing)).probability;
    }
    Some(ends)
}

fn in_words(input: &AssessInput, chance: f64, range: Option<[f64; 2]>) -> String {
    let words = range.map_or_else(|| chance_in_words(chance), |range| chance_with_range(chance, range));
    format!(
        "Chance that the overhang falls within {} years: {words}, by this model and its inputs; it may still fall before.",
        input.outlook.horizon_yr
    )
}

/// Chance that the critical depth lies at or above each depth.
fn distribution(input: &AssessInput, cliff: &Cliff) -> Vec<(f64, f64)> {
    let depths = &input.demand.depths_m[input.today_index..];
    let estimates = cliff.estimates(depths.len(), |i, out| {
        for (value, depth) in out.iter_mut().zip(depths) {
            *value = f64::from(u8::from(cliff.depths.depth_m[i] <= *depth));
        }
    });
    depths.iter().zip(estimates).map(|(d, e)| (*d, e.0.probability)).collect()
}

/// Change of the chance by the horizon, on the same samples, when every other depth is left out.
fn interpolation_error(found: &Found, i_horizon: usize) -> f64 {
    let (input, law) = (found.input, &found.timeline.growth[i_horizon]);
    let n = found.coarse.depth_m.len();
    let mean = |depths: &[f64]| depths[..n].iter().map(|d| law.exceedance(d - input.today_m())).sum::<f64>() / n as f64;
    (mean(&found.coarse.depth_m) - mean(&found.plain.depths.depth_m)).abs()
}

fn fan(input: &AssessInput, brow: &Brow, timeline: &Timeline) -> Vec<(i32, [f64; 3])> {
    let streams = Streams::new(input.outlook.seed ^ 0x5EED_FA11);
    let n = brow.cycles.len().min(FAN_SAMPLES) as u64;
    let draws: Vec<f64> = (0..n).map(|i| streams.stream(i).uniform()).collect();
    (0..=timeline.index_at(input.outlook.horizon_yr))
        .map(|i_time| {
            let edges = edge_quantiles(brow, timeline, i_time, &draws, &[0.05, 0.5, 0.95]);
            (calendar(input, timeline.times_yr[i_time]).round() as i32, [edges[0], edges[1], edges[2]])
        })
        .collect()
}

fn setbacks(info: &mut OutlookInfo, input: &AssessInput, brow: &Brow, timeline: &Timeline) {
    let horizon = input.outlook.horizon_yr;
    let mut asked: Vec<(f64, f64)> = vec![(1e-1, horizon), (1e-2, horizon), (1e-3, horizon)];
    asked.extend(input.outlook.assets.iter().filter_map(|a| a.accepted.as_ref()).map(|a| (a.probability, a.over_yr)));
    let least = input.smallest_accepted().unwrap_or(CHANCE_WITHOUT_ASSETS);
    // What lies beyond the searched depths does not carry a smaller chance than the smallest accepted one.
    asked.retain(|(p, _)| least <= *p);
    asked.sort_by(|a, b| b.0.total_cmp(&a.0).then(a.1.total_cmp(&b.1)));
    asked.dedup();
    for (accepted, over_years) in asked {
        let by = brow.by(timeline, timeline.index_at(over_years));
        let setback_m = by.setback_m(accepted) + input.outlook.allowance_m;
        info.setbacks.push(SetbackInfo { accepted, over_years, setback_m });
    }
    info.setback_m = info.setbacks.last().map(|s| s.setback_m);
    info.setback_from = Some("today's brow");
}

fn asset_info(input: &AssessInput, brow: &Brow, timeline: &Timeline, asset: &Asset) -> Option<AssetInfo> {
    let accepted = asset.accepted.as_ref()?;
    let seaward = asset.x_m[0].min(asset.x_m[1]);
    let behind_brow_m = if asset.from_brow { seaward } else { seaward - input.brow_x_m };
    let reach_m = (behind_brow_m - input.outlook.allowance_m).max(1e-3);
    let chance = brow.by(timeline, timeline.index_at(accepted.over_yr)).chance_beyond(reach_m).probability;
    let passed = year_passed(brow, timeline, reach_m, accepted.probability).map(|t| calendar(input, t));
    Some(AssetInfo {
        name: asset.name.clone(),
        behind_brow_m,
        accepted: accepted.probability,
        over_years: accepted.over_yr,
        accepted_by: accepted.set_by.clone(),
        chance,
        chance_in_words: chance_in_words(chance),
        year_passed: passed,
        start_moving_by: passed.map(|year| year - asset.lead_time_yr),
    })
}

fn triggers(info: &mut OutlookInfo, found: &Found, cliff: &Cliff, chances: &[ChanceBy]) {
    let input = found.input;
    let accepted = input.smallest_accepted();
    let next_yr = next_survey_yr(&standing_curve(chances), accepted);
    info.next_survey_by = Some(match input.today {
        Some(day) => day_after(day, next_yr),
        None => format!("within {:.0} months of today", (12.0 * next_yr).floor().max(1.0)),
    });
    let today_m = input.today_m();
    let rounded = |depth: f64| (depth * 100.0).round() / 100.0;
    if let Ok(by_next) = found.growth.by(next_yr) {
        let high = today_m + by_next.exceeded_with(0.05);
        info.triggers.push(Trigger {
            depth_m: rounded(high),
            means: format!(
                "the undercut deepens faster than its band: reached before the next survey with a chance of 5 % (in {next_yr:.1} years)"
            ),
            act: "survey at once and run the outlook again with the new rate".into(),
        });
    }
    if let Ok(ahead) = found.growth.by(2.0) {
        let limit = accepted.unwrap_or(CHANCE_WITHOUT_ASSETS);
        let last_m = input.demand.depths_m[input.demand.depths_m.len() - 1];
        if let Some(depth) = depth_of_chance(cliff, &ahead, limit, last_m) {
            let chance = chance_in_words(chance_ahead(cliff, &ahead, depth));
            info.triggers.push(Trigger {
                depth_m: rounded(depth),
                means: format!("the chance of collapse over the next 2 years passes the smallest accepted one ({chance})"),
                act: "close the ground within the setback and below, and call the geologist".into(),
            });
        }
    }
    if let Some(depth) = input.cautious_critical_m {
        info.triggers.push(Trigger {
            depth_m: rounded(depth),
            means: "critical depth with cautious inputs".into(),
            act: "treat the overhang as able to fall now: close the ground above and below".into(),
        });
    }
    info.triggers.sort_by(|a, b| a.depth_m.total_cmp(&b.depth_m));
}

fn likeliest<'a>(found: &Found<'a>) -> Option<&'a Mode> {
    found.modes.iter().min_by(|a, b| a.point.beta.total_cmp(&b.point.beta))
}

fn importance(found: &Found) -> Vec<(String, f64)> {
    likeliest(found).map(|mode| found.limits.importance(mode, "deepening rate")).unwrap_or_default()
}

fn cross_check(found: &Found, plain: &ChanceBy, important: &ChanceBy) -> CrossCheck {
    let (p, i) = (&plain.unconditioned, &important.unconditioned);
    let mode = likeliest(found);
    let first_order = mode.map(|m| DesignPoint::probability(&m.point));
    let best = if i.standard_error < p.standard_error { i.probability } else { p.probability };
    CrossCheck {
        plain: p.probability,
        plain_error: p.standard_error,
        importance_sampling: i.probability,
        importance_sampling_error: i.standard_error,
        difference_in_errors: agreement(p, found.plain.depths.depth_m.len() as f64, i),
        first_order,
        first_order_index: mode.map(|m| m.point.beta),
        first_order_check: mode.map(|m| found.input.demand.limits[m.limit].check),
        first_order_ratio: first_order.filter(|_| 0.0 < best).map(|f| f / best),
    }
}

fn evidence(found: &Found, scenario: &Scenario, after: &ChanceBy, before: &ChanceBy) -> Option<EvidenceInfo> {
    let weighed = scenario.evidence.as_ref()?;
    let of = |c: &ChanceBy| less_favourable((c.unconditioned, c.standing)).probability;
    let mobilised = found.plain.mobilised_pa?;
    Some(EvidenceInfo {
        probability_before: of(before),
        probability_after: of(after),
        effective_samples: weighed.effective_size,
        mobilised_tensile_strength_kpa: mobilised.map(|pa| pa / 1e3),
    })
}

fn warnings(info: &mut OutlookInfo, input: &AssessInput) {
    let mut warn = |code: &str, message: String| info.warnings.push(Note { code: code.into(), message });
    let fallen = info.model_says_already_fallen.unwrap_or(0.0);
    if ALREADY_FALLEN_WARNED < fallen {
        let message =
            format!("inputs contradict the standing cliff: by them it has already fallen with a chance of {:.0} %", 100.0 * fallen);
        warn("outlook.already-fallen", message);
    }
    if let Some(check) = &info.cross_check {
        if 3.0 < check.difference_in_errors {
            let off = check.difference_in_errors;
            warn("outlook.sampling", format!("importance and plain sampling differ by {off:.1} combined standard errors"));
        }
        if let Some(ratio) = check.first_order_ratio.filter(|r| !(0.8..=1.25).contains(r)) {
            let message =
                format!("the first-order probability of the likeliest check alone is {ratio:.2} times that of sampling; sampling counts");
            warn("outlook.first-order", message);
        }
    }
    if let Uncertain::Lognormal { mean, cov } = input.outlook.model_factor {
        let message = format!("model factor on capacity / demand: mean {mean}, cov {cov}; common practice, no source");
        warn("outlook.model-factor", message);
    }
}
