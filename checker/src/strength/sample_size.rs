//! Fractiles that know how few tests stand behind a number.
use super::{StrengthError, lognormal_parameters, mean, quantile, standard_deviation};
use crate::model::Uncertain;
use statrs::distribution::{ContinuousCDF, StudentsT};

/// Which end of a number's range is wanted.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum End {
    /// 5 % fractile.
    Low,
    /// 95 % fractile.
    High,
}

/// Probability of the low end. EN 1990:2002, 4.2(3): a low characteristic value is the 5 % fractile.
const LOW: f64 = 0.05;

/// Quantile of Student's t distribution with `freedom` degrees of freedom.
///
/// # Errors
/// [`StrengthError::Probability`] unless `0 < p < 1`; [`StrengthError::Distribution`] unless `0 < freedom`.
pub fn student_t_quantile(p: f64, freedom: f64) -> Result<f64, StrengthError> {
    if !(0.0 < p && p < 1.0) {
        return Err(StrengthError::Probability { value: p });
    }
    let wrong = StrengthError::Distribution { what: "the degrees of freedom", limit: "a finite number above 0", value: freedom };
    if !(0.0 < freedom && freedom.is_finite()) {
        return Err(wrong);
    }
    Ok(StudentsT::new(0.0, 1.0, freedom).map_err(|_| wrong)?.inverse_cdf(p))
}

/// Factor on the standard deviation for the 5 % fractile predicted from `tests` tests, deviation unknown beforehand.
///
/// ```text
/// k_n = t_0.95,n-1 sqrt(1 + 1/n)
/// ```
///
/// # Errors
/// [`StrengthError::TooFewTests`] under 3 tests.
///
/// Source: EN 1990:2002 Annex D, D.7.2, table D1, row "V_X unknown".
pub fn fractile_factor(tests: u32) -> Result<f64, StrengthError> {
    if tests < 3 {
        return Err(StrengthError::TooFewTests { tests });
    }
    let n = f64::from(tests);
    Ok(student_t_quantile(1.0 - LOW, n - 1.0)? * (1.0 + 1.0 / n).sqrt())
}

/// Low or high end of a number: by [`fractile_factor`] where the number of tests is known, else the fractile of the stated distribution.
///
/// ```text
/// normal:     mean -+ k_n s                 lognormal:   exp(lambda -+ k_n zeta)
/// with ends:  mean -+ k_n s, kept inside the stated ends
/// ```
///
/// Mean and deviation are taken as those of the tests. A number without scatter is its own fractile.
///
/// # Errors
/// As [`quantile()`] and [`fractile_factor`].
pub fn characteristic(number: Uncertain, tests: Option<u32>, end: End) -> Result<f64, StrengthError> {
    let sign = if end == End::Low { -1.0 } else { 1.0 };
    let Some(tests) = tests else {
        return quantile(number, if end == End::Low { LOW } else { 1.0 - LOW });
    };
    let k_n = fractile_factor(tests)?;
    let middle = mean(number)?;
    Ok(match number {
        Uncertain::Exact(value) => value,
        Uncertain::Lognormal { mean, cov } => {
            let (lambda, zeta) = lognormal_parameters(mean, cov);
            (lambda + sign * k_n * zeta).exp()
        }
        Uncertain::Normal { standard_deviation, .. } => middle + sign * k_n * standard_deviation,
        Uncertain::TruncatedNormal { min, max, .. } | Uncertain::Uniform { min, max } => {
            (middle + sign * k_n * standard_deviation(number)?).clamp(min, max)
        }
    })
}
