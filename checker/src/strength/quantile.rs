//! Means, deviations and fractiles of the distributions a model may state.
use super::StrengthError;
use crate::model::Uncertain;
use statrs::function::erf::erfc_inv;
use std::f64::consts::{PI, SQRT_2};

/// Standard normal distribution function `Phi(x) = erfc(-x / sqrt 2) / 2`, accurate in relative terms in the lower tail.
pub fn normal_cdf(x: f64) -> f64 {
    0.5 * libm::erfc(-x / SQRT_2)
}

/// Standard normal density.
fn normal_density(x: f64) -> f64 {
    (-0.5 * x * x).exp() / (2.0 * PI).sqrt()
}

/// Standard normal quantile, the `x` with `Phi(x) = p`.
///
/// # Errors
/// [`StrengthError::Probability`] unless `0 < p < 1`.
pub fn normal_quantile(p: f64) -> Result<f64, StrengthError> {
    if !(0.0 < p && p < 1.0) {
        return Err(StrengthError::Probability { value: p });
    }
    // `1 - p` is exact for p in [0.5, 1), so the lower tail carries both halves.
    if 0.5 < p {
        return normal_quantile(1.0 - p).map(|x| -x);
    }
    let start = -SQRT_2 * erfc_inv(2.0 * p);
    let density = normal_density(start);
    // One Newton step makes up for the rational approximation; under 1e-300 the density has no digits left to divide by.
    Ok(if 1e-300 < density { start - (normal_cdf(start) - p) / density } else { start })
}

/// Mean and deviation `(lambda, zeta)` of the logarithm of a lognormal number.
///
/// ```text
/// zeta^2 = ln(1 + V^2)      lambda = ln(mean) - zeta^2 / 2
/// ```
pub fn lognormal_parameters(mean: f64, cov: f64) -> (f64, f64) {
    let variance = (cov * cov).ln_1p();
    (mean.ln() - 0.5 * variance, variance.sqrt())
}

/// Standardized ends of a truncated normal number, mirrored into the lower tail where both lie above the mean.
struct Truncation {
    lower: f64,
    upper: f64,
    mirrored: bool,
}

impl Truncation {
    fn new(mean: f64, standard_deviation: f64, min: f64, max: f64) -> Self {
        let (lower, upper) = ((min - mean) / standard_deviation, (max - mean) / standard_deviation);
        if 0.0 < lower { Self { lower: -upper, upper: -lower, mirrored: true } } else { Self { lower, upper, mirrored: false } }
    }

    fn sign(&self) -> f64 {
        if self.mirrored { -1.0 } else { 1.0 }
    }

    /// Probability of the untruncated number between the ends.
    fn share(&self) -> f64 {
        normal_cdf(self.upper) - normal_cdf(self.lower)
    }

    /// `(phi(a) - phi(b)) / Z`.
    fn shift(&self) -> f64 {
        (normal_density(self.lower) - normal_density(self.upper)) / self.share()
    }

    fn quantile(&self, p: f64) -> Result<f64, StrengthError> {
        let p = if self.mirrored { 1.0 - p } else { p };
        let below = normal_cdf(self.lower) + p * self.share();
        let above = normal_cdf(-self.upper) + (1.0 - p) * self.share();
        let x = if below < above { normal_quantile(below)? } else { -normal_quantile(above)? };
        Ok(self.sign() * x)
    }
}

/// Fractile: the value that the number stays below with probability `p`.
///
/// # Errors
/// [`StrengthError::Probability`] unless `0 < p < 1`; [`StrengthError::Distribution`] where the distribution cannot exist.
pub fn quantile(number: Uncertain, p: f64) -> Result<f64, StrengthError> {
    check(number)?;
    if !(0.0 < p && p < 1.0) {
        return Err(StrengthError::Probability { value: p });
    }
    Ok(match number {
        Uncertain::Exact(value) => value,
        Uncertain::Lognormal { mean, cov } => {
            let (lambda, zeta) = lognormal_parameters(mean, cov);
            (lambda + zeta * normal_quantile(p)?).exp()
        }
        Uncertain::Normal { mean, standard_deviation } => mean + standard_deviation * normal_quantile(p)?,
        Uncertain::TruncatedNormal { mean, standard_deviation, min, max } => {
            let x = Truncation::new(mean, standard_deviation, min, max).quantile(p)?;
            (mean + standard_deviation * x).clamp(min, max)
        }
        Uncertain::Uniform { min, max } => min + p * (max - min),
    })
}

/// Mean of the number (of a truncated normal one after the cut).
///
/// # Errors
/// [`StrengthError::Distribution`] where the distribution cannot exist.
pub fn mean(number: Uncertain) -> Result<f64, StrengthError> {
    check(number)?;
    Ok(match number {
        Uncertain::Exact(value) => value,
        Uncertain::Lognormal { mean, .. } | Uncertain::Normal { mean, .. } => mean,
        Uncertain::TruncatedNormal { mean, standard_deviation, min, max } => {
            let cut = Truncation::new(mean, standard_deviation, min, max);
            (mean + cut.sign() * standard_deviation * cut.shift()).clamp(min, max)
        }
        Uncertain::Uniform { min, max } => 0.5 * (min + max),
    })
}

/// Standard deviation of the number (of a truncated normal one after the cut).
///
/// # Errors
/// [`StrengthError::Distribution`] where the distribution cannot exist.
pub fn standard_deviation(number: Uncertain) -> Result<f64, StrengthError> {
    check(number)?;
    Ok(match number {
        Uncertain::Exact(_) => 0.0,
        Uncertain::Lognormal { mean, cov } => mean * cov,
        Uncertain::Normal { standard_deviation, .. } => standard_deviation,
        Uncertain::TruncatedNormal { mean, standard_deviation, min, max } => {
            let cut = Truncation::new(mean, standard_deviation, min, max);
            let ends = (cut.lower * normal_density(cut.lower) - cut.upper * normal_density(cut.upper)) / cut.share();
            standard_deviation * (1.0 + ends - cut.shift().powi(2)).max(0.0).sqrt()
        }
        Uncertain::Uniform { min, max } => (max - min) / 12.0_f64.sqrt(),
    })
}

fn check(number: Uncertain) -> Result<(), StrengthError> {
    let finite = |what, value: f64| require(value.is_finite(), what, "a finite number", value);
    let positive = |what, value: f64| require(0.0 < value && value.is_finite(), what, "a finite number above 0", value);
    let ordered = |min: f64, max: f64| {
        finite("the lower end", min)?;
        finite("the upper end", max)?;
        require(min < max, "the upper end", "above the lower end", max)
    };
    match number {
        Uncertain::Exact(value) => finite("the value", value),
        Uncertain::Lognormal { mean, cov } => {
            positive("the mean of a lognormal number", mean)?;
            positive("the coefficient of variation", cov)
        }
        Uncertain::Normal { mean, standard_deviation } => {
            finite("the mean", mean)?;
            positive("the standard deviation", standard_deviation)
        }
        Uncertain::TruncatedNormal { mean, standard_deviation, min, max } => {
            finite("the mean", mean)?;
            positive("the standard deviation", standard_deviation)?;
            ordered(min, max)?;
            let share = Truncation::new(mean, standard_deviation, min, max).share();
            require(1e-290 < share, "the probability between the ends of the cut", "above 1e-290", share)
        }
        Uncertain::Uniform { min, max } => ordered(min, max),
    }
}

fn require(holds: bool, what: &'static str, limit: &'static str, value: f64) -> Result<(), StrengthError> {
    if holds { Ok(()) } else { Err(StrengthError::Distribution { what, limit, value }) }
}
