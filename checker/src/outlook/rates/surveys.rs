//! A rate fitted to dated depths.
use super::{Rate, RateError};
use crate::model::{Date, DatedDepth};

/// A straight line through dated depths, each weighed by its accuracy.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct SurveyFit {
    /// Rate with its uncertainty.
    pub rate: Rate,
    /// Standard error of the rate, m/yr.
    pub error_m_per_yr: f64,
    /// Scatter about the line over what the accuracies explain (1 = just that); over 1 the errors were widened by it.
    pub scatter_ratio: f64,
    /// Years from the first to the last day.
    pub record_yr: f64,
}

/// Weighted least squares `depth = d0 + r t`, weights `1 / accuracy^2` (eq. (7.18)).
///
/// ```text
/// r = S_ty / S_tt,   se^2 = max(1, chi^2 / (n - 2)) / S_tt,   chi^2 = sum ((d - d0 - r t) / accuracy)^2
/// ```
///
/// with sums about the weighted means. With two days `se` follows from the accuracies alone.
///
/// # Errors
/// Fewer than two days, an accuracy that is not positive, or no deepening.
pub fn fit_surveys(surveys: &[DatedDepth]) -> Result<SurveyFit, RateError> {
    for s in surveys {
        if !(s.depth_m.is_finite() && 0.0 < s.accuracy_m && s.accuracy_m.is_finite()) {
            return Err(RateError::Accuracy { depth_m: s.depth_m, accuracy_m: s.accuracy_m });
        }
    }
    let mut days: Vec<Date> = surveys.iter().map(|s| s.date).collect();
    days.sort_unstable();
    days.dedup();
    let (Some(&first), Some(&last)) = (days.first(), days.last()) else { return Err(RateError::TooFewDays { days: 0 }) };
    if days.len() < 2 {
        return Err(RateError::TooFewDays { days: days.len() });
    }
    let points: Vec<(f64, f64, f64)> = surveys.iter().map(|s| (years_between(first, s.date), s.depth_m, s.accuracy_m.powi(-2))).collect();
    let weight: f64 = points.iter().map(|p| p.2).sum();
    let mean = |f: &dyn Fn(&(f64, f64, f64)) -> f64| points.iter().map(|p| p.2 * f(p)).sum::<f64>() / weight;
    let (mean_t, mean_d) = (mean(&|p| p.0), mean(&|p| p.1));
    let s_tt: f64 = points.iter().map(|(t, _, w)| w * (t - mean_t).powi(2)).sum();
    let s_td: f64 = points.iter().map(|(t, d, w)| w * (t - mean_t) * (d - mean_d)).sum();
    let rate = s_td / s_tt;
    let chi_squared: f64 = points.iter().map(|(t, d, w)| w * (d - mean_d - rate * (t - mean_t)).powi(2)).sum();
    let scatter_ratio = if 2 < points.len() { (chi_squared / (points.len() - 2) as f64).sqrt() } else { 1.0 };
    let error_m_per_yr = scatter_ratio.max(1.0) / s_tt.sqrt();
    if rate <= 0.0 {
        return Err(RateError::NoDeepening { rate_m_per_yr: rate, error_m_per_yr });
    }
    Ok(SurveyFit {
        rate: Rate { mean_m_per_yr: rate, uncertainty_cov: error_m_per_yr / rate },
        error_m_per_yr,
        scatter_ratio,
        record_yr: years_between(first, last),
    })
}

/// Years of 365.2425 days from one day to another in the Gregorian calendar.
pub fn years_between(from: Date, to: Date) -> f64 {
    (day_number(to) - day_number(from)) as f64 / 365.2425
}

/// Days since 1 March of the year 0 (proleptic Gregorian); the year is counted from March, so that the leap day comes last.
fn day_number(date: Date) -> i64 {
    let shifted = i64::from(date.month <= 2);
    let year = i64::from(date.year) - shifted;
    let month = i64::from(date.month) - 3 + 12 * shifted;
    365 * year + year.div_euclid(4) - year.div_euclid(100) + year.div_euclid(400) + (153 * month + 2) / 5 + i64::from(date.day) - 1
}
