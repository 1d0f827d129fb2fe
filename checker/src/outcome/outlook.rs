//! The published outlook: when, how likely, how far back. Lengths in m, times in years, chances between 0 and 1.
use serde::ser::SerializeMap;
use serde::{Serialize, Serializer};

/// Years, probability, setback; everything that was refused stands in `refused`, and then nothing else is filled.
#[derive(Debug, Clone, Default, PartialEq, Serialize)]
pub struct OutlookInfo {
    /// Why parts were refused; not empty = no years, probability or setback are given.
    pub refused: Vec<Refusal>,
    /// One sentence for people.
    pub in_words: Option<String>,
    /// Years from today to the critical depth, given that the cliff stands today.
    pub years_to_critical: Option<Quantiles>,
    /// Chance that the model says the cliff has already fallen.
    pub model_says_already_fallen: Option<f64>,
    /// Chance of collapse by the end of each year; the first number is the calendar year, or years from today without a survey date.
    pub probability_by_year: Vec<(i32, f64)>,
    /// The same, given that the cliff stands today.
    pub given_standing_today: Vec<(i32, f64)>,
    /// Standard errors of both, by year.
    pub sampling_error_by_year: Vec<(i32, [f64; 2])>,
    /// Horizon.
    pub horizon_years: Option<f64>,
    /// Chance of collapse by the horizon: the less favourable of the two.
    pub probability_at_horizon: Option<f64>,
    /// Its standard error.
    pub sampling_error: Option<f64>,
    /// Interval that covers it in 95 of 100 runs.
    pub sampling_interval: Option<[f64; 2]>,
    /// `-Phi^-1` of it.
    pub reliability_index: Option<f64>,
    /// The same chance with the rate at its 5 % and at its 95 % value: what is not known about the rate.
    pub probability_on_rate: Option<[f64; 2]>,
    /// Importance sampling and first-order method beside plain sampling.
    pub cross_check: Option<CrossCheck>,
    /// Target reliability indices of EN 1990 Table B2 for buildings, for comparison: `(class, 1 year, 50 years)`.
    pub targets: Vec<(&'static str, f64, f64)>,
    /// Critical depth: chance that it lies at or above each depth of the series.
    pub critical_depth_distribution: Vec<(f64, f64)>,
    /// Largest change of the chance by the horizon when every other depth of the series is left out.
    pub interpolation_error: Option<f64>,
    /// Position of the edge behind today's brow by year: 5 %, median, 95 %, given that the cliff stands today.
    pub brow_by_year: Vec<(i32, [f64; 3])>,
    /// Setback at the smallest accepted chance and its years, allowance included.
    pub setback_m: Option<f64>,
    /// From where it counts.
    pub setback_from: Option<&'static str>,
    /// Setbacks at several accepted chances and years, allowance included.
    pub setbacks: Vec<SetbackInfo>,
    /// What stands on the cliff.
    pub assets: Vec<AssetInfo>,
    /// Depths at which a warden acts.
    pub triggers: Vec<Trigger>,
    /// Day by which to look again, ISO 8601, or `within N months of today` without a survey date.
    pub next_survey_by: Option<String>,
    /// Share of each input in what decides, largest first.
    #[serde(serialize_with = "as_map")]
    pub importance: Vec<(String, f64)>,
    /// Before and after `[[evidence]]`.
    pub evidence: Option<EvidenceInfo>,
    /// Where the rate comes from.
    pub rate: Option<RateInfo>,
    /// Samples and places.
    pub sampling: Option<SamplingInfo>,
    /// Reservations.
    pub warnings: Vec<super::Note>,
}

/// A reason for which the outlook, or a part of it, is refused.
#[derive(Debug, Clone, PartialEq, Eq, Serialize)]
pub struct Refusal {
    /// Stable code.
    pub code: &'static str,
    /// Reason, with what to do.
    pub reason: String,
}

/// Median and 5 and 95 % quantiles; `None` = not within the years looked at.
#[derive(Debug, Clone, Copy, PartialEq, Serialize)]
pub struct Quantiles {
    /// 50 %.
    pub median: Option<f64>,
    /// 5 %.
    pub p05: Option<f64>,
    /// 95 %.
    pub p95: Option<f64>,
}

/// Three ways to the same chance by the horizon.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct CrossCheck {
    /// Plain sampling.
    pub plain: f64,
    /// Its standard error.
    pub plain_error: f64,
    /// Importance sampling.
    pub importance_sampling: f64,
    /// Its standard error.
    pub importance_sampling_error: f64,
    /// Difference over the combined standard error.
    pub difference_in_errors: f64,
    /// First-order probability of the likeliest check.
    pub first_order: Option<f64>,
    /// Reliability index of that check.
    pub first_order_index: Option<f64>,
    /// Check it belongs to.
    pub first_order_check: Option<&'static str>,
    /// First-order probability over that of sampling.
    pub first_order_ratio: Option<f64>,
}

/// A setback.
#[derive(Debug, Clone, Copy, PartialEq, Serialize)]
pub struct SetbackInfo {
    /// Accepted chance.
    pub accepted: f64,
    /// Over years.
    pub over_years: f64,
    /// Distance from today's brow, allowance included.
    pub setback_m: f64,
}

/// What becomes of an asset.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct AssetInfo {
    /// Name.
    pub name: String,
    /// Distance of its seaward edge behind today's brow.
    pub behind_brow_m: f64,
    /// Accepted chance.
    pub accepted: f64,
    /// Over years.
    pub over_years: f64,
    /// Who set it.
    pub accepted_by: String,
    /// Chance that the edge, allowance included, reaches it within those years.
    pub chance: f64,
    /// That chance in words.
    pub chance_in_words: String,
    /// Year in which the chance since today passes the accepted one; `None` = not within the years looked at.
    pub year_passed: Option<f64>,
    /// Year by which to start moving it: the year passed less the lead time.
    pub start_moving_by: Option<f64>,
}

/// A depth at which a warden acts.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct Trigger {
    /// Horizontal undercut depth.
    pub depth_m: f64,
    /// What it means.
    pub means: String,
    /// What to do.
    pub act: String,
}

/// Before and after evidence.
#[derive(Debug, Clone, Copy, PartialEq, Serialize)]
pub struct EvidenceInfo {
    /// Chance by the horizon before.
    pub probability_before: f64,
    /// After.
    pub probability_after: f64,
    /// Samples' worth of information left.
    pub effective_samples: f64,
    /// Mean tensile strength that the evidence mobilises, before and after, model factor included.
    pub mobilised_tensile_strength_kpa: [f64; 2],
}

/// The deepening rate used.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct RateInfo {
    /// Mean.
    pub m_per_yr: f64,
    /// Not knowing it.
    pub uncertainty_cov: f64,
    /// Swings.
    pub year_to_year_cov: f64,
    /// Where it comes from.
    pub basis: String,
}

/// Samples and places.
#[derive(Debug, Clone, Copy, PartialEq, Serialize)]
pub struct SamplingInfo {
    /// Samples.
    pub samples: u64,
    /// Seed.
    pub seed: u64,
    /// Places of all checks at all depths.
    pub places: usize,
    /// Places that a bound never dropped.
    pub places_evaluated: usize,
    /// Samples judged again by every place.
    pub rechecked: u64,
}

/// Serializes pairs as a map in their own order.
fn as_map<S: Serializer>(pairs: &[(String, f64)], serializer: S) -> Result<S::Ok, S::Error> {
    let mut map = serializer.serialize_map(Some(pairs.len()))?;
    for (key, value) in pairs {
        map.serialize_entry(key, value)?;
    }
    map.end()
}
