//! What the cliff itself has shown: falls and standing overhangs reweight the samples by Bayes' rule.
use super::demand_model::DemandModel;
use super::sampling::effective_sample_size;
use super::variables::{Marginal, VariableError};
use crate::model::{Evidence, EvidenceKind};

/// Fewest samples' worth of information after reweighting; with fewer the tail is a handful of samples.
pub const LEAST_EFFECTIVE_SIZE: f64 = 200.0;

/// Equally likely values by which an uncertain thickness is stood for.
const THICKNESSES: usize = 9;

/// How well samples agree with one overhang of known fate, from each sample's critical depth in that overhang's own section.
///
/// `stood`: `P(L < D)`; `fell`: `P(L >= D)`, with `L` the uncertain undercut depth and `D` the sample's critical depth there
/// (eq. (7.22)). A fall is taken to say only that the critical depth had been reached, not when: the weaker and the cautious reading.
pub fn likelihood_of(what: EvidenceKind, depth_m: &Marginal, critical_m: &[f64]) -> Vec<f64> {
    critical_m.iter().map(|d| agreement(what, depth_m, *d)).collect()
}

fn agreement(what: EvidenceKind, depth_m: &Marginal, critical_m: f64) -> f64 {
    let reached = if critical_m.is_infinite() { 0.0 } else { chance_at_least(depth_m, critical_m) };
    match what {
        EvidenceKind::Stood => 1.0 - reached,
        EvidenceKind::Fell => reached,
    }
}

/// `P(L >= x)`.
fn chance_at_least(depth_m: &Marginal, x: f64) -> f64 {
    match depth_m {
        Marginal::Exact(depth) => f64::from(u8::from(x <= *depth)),
        other => 1.0 - other.cdf(x),
    }
}

/// Where an overhang of the evidence has no section of its own: critical depth of a uniform overhang by its fibre at the root,
///
/// ```text
/// 3 gamma L^2 / h - gamma h / 5 = theta s_t   =>   L = sqrt(h (theta s_t / gamma + h / 5) / 3)        (eq. (7.23))
/// ```
///
/// the exact plane solution of the self-weight cantilever. It is on the unsafe side for overhangs shorter than about their
/// thickness, where a section of its own is needed.
pub fn fibre_critical_depth_m(tensile_strength_pa: f64, unit_weight_n_per_m3: f64, thickness_m: f64) -> f64 {
    (thickness_m * (tensile_strength_pa / unit_weight_n_per_m3 + thickness_m / 5.0) / 3.0).max(0.0).sqrt()
}

/// Strength and weight of one sample, as the evidence needs them.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct SampleStrength {
    /// Tensile strength of the rock times the model factor, Pa.
    pub tensile_strength_pa: f64,
    /// Unit weight of the rock, N/m3.
    pub unit_weight_n_per_m3: f64,
}

/// How well samples agree with one overhang by the closed form, the thickness averaged over its distribution.
///
/// # Errors
/// A depth or thickness whose distribution is out of range.
pub fn closed_form_likelihood(evidence: &Evidence, samples: &[SampleStrength]) -> Result<Vec<f64>, VariableError> {
    let depth_m = Marginal::new("undercut_depth_m", &evidence.undercut_depth_m)?;
    let thickness = Marginal::new("overhang_thickness_m", &evidence.overhang_thickness_m)?;
    let n = if thickness.is_random() { THICKNESSES } else { 1 };
    let thicknesses: Vec<f64> = (0..n).map(|i| thickness.from_standard(super::normal::quantile((i as f64 + 0.5) / n as f64))).collect();
    let of = |s: &SampleStrength| {
        let sum: f64 = thicknesses
            .iter()
            .map(|h| agreement(evidence.what, &depth_m, fibre_critical_depth_m(s.tensile_strength_pa, s.unit_weight_n_per_m3, *h)))
            .sum();
        sum / n as f64
    };
    Ok(samples.iter().map(of).collect())
}

/// Samples after evidence.
#[derive(Debug, Clone, PartialEq)]
pub struct Reweighted {
    /// Product of all agreements, one a sample.
    pub likelihood: Vec<f64>,
    /// Samples' worth of information left.
    pub effective_size: f64,
}

/// Joins the agreements with several overhangs, which are independent given the sample.
///
/// # Errors
/// The effective sample size when it is below 200: the evidence contradicts the inputs, or there are too few samples.
pub fn reweight(agreements: &[Vec<f64>], weights: &[f64]) -> Result<Reweighted, f64> {
    let likelihood: Vec<f64> = (0..weights.len()).map(|i| agreements.iter().map(|a| a[i]).product()).collect();
    let joined: Vec<f64> = likelihood.iter().zip(weights).map(|(l, w)| l * w).collect();
    let effective_size = effective_sample_size(&joined);
    if LEAST_EFFECTIVE_SIZE <= effective_size { Ok(Reweighted { likelihood, effective_size }) } else { Err(effective_size) }
}

/// Mean of a quantity before and after evidence.
pub fn before_and_after(values: &[f64], weights: &[f64], likelihood: &[f64]) -> [f64; 2] {
    let mean = |member: &dyn Fn(usize) -> f64| {
        let sum: f64 = (0..values.len()).map(|i| weights[i] * member(i)).sum();
        (0..values.len()).map(|i| values[i] * weights[i] * member(i)).sum::<f64>() / sum
    };
    [mean(&|_| 1.0), mean(&|i| likelihood[i])]
}

/// Tensile strength of one strength entry in each sample, model factor included, Pa: what evidence mobilises.
pub fn mobilised_strength_pa(model: &DemandModel, strength: usize, x: &[f64]) -> f64 {
    let sample = super::demand_model::Sample::new(model, x);
    sample.model_factor * sample.strengths[strength][0]
}

#[cfg(test)]
mod tests;
