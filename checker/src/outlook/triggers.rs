//! Depths at which a warden acts, and when to look again.
use super::growth::GrowthBy;
use super::years::Cliff;
use crate::model::Date;

/// A survey older than this does not carry an outlook without a warning, yr.
pub const SURVEY_HOLDS_YR: f64 = 2.0;

/// Chance of collapse over a coming time if the cliff still stands when the undercut has reached `depth_m`.
///
/// `sum w G(D - depth) / sum w` over the samples whose critical depth lies beyond `depth_m`; 1 when none is left (eq. (7.25)).
pub fn chance_ahead(cliff: &Cliff, ahead: &GrowthBy, depth_m: f64) -> f64 {
    let (mut sum, mut all) = (0.0, 0.0);
    for (i, critical) in cliff.depths.depth_m.iter().enumerate() {
        if depth_m < *critical {
            let weight = cliff.depths.weight[i] * cliff.likelihood(i);
            sum += weight * ahead.exceedance(critical - depth_m);
            all += weight;
        }
    }
    if 0.0 < all { sum / all } else { 1.0 }
}

/// Smallest depth from today's on at which the chance ahead passes `accepted`, m, to a centimetre; `None` if not before `to_m`.
///
/// The chance ahead need not rise everywhere with depth (a cliff that has stood through a weak stretch is a strong one), so depths
/// are walked through, not bisected.
pub fn depth_of_chance(cliff: &Cliff, ahead: &GrowthBy, accepted: f64, to_m: f64) -> Option<f64> {
    let n = 60;
    let step = (to_m - cliff.today_m) / f64::from(n);
    let at = |i: i32| cliff.today_m + step * f64::from(i);
    let first = (0..=n).find(|&i| accepted < chance_ahead(cliff, ahead, at(i)))?;
    if first == 0 {
        return Some(cliff.today_m);
    }
    let (mut low, mut high) = (at(first - 1), at(first));
    while 0.01 < high - low {
        let middle = 0.5 * (low + high);
        if accepted < chance_ahead(cliff, ahead, middle) {
            high = middle;
        } else {
            low = middle;
        }
    }
    Some(high)
}

/// Time to the next survey, yr: two years, or sooner when the chance of collapse since today would by then have passed a tenth of
/// the smallest accepted chance; at least a month. `chances` are times and chances given that the cliff stands today.
pub fn next_survey_yr(chances: &[(f64, f64)], smallest_accepted: Option<f64>) -> f64 {
    let sooner = smallest_accepted.and_then(|accepted| super::years::time_at_chance(chances, 0.1 * accepted));
    sooner.map_or(SURVEY_HOLDS_YR, |t| t.clamp(1.0 / 12.0, SURVEY_HOLDS_YR))
}

/// The day `years` after a day, in whole months rounded down, as `YYYY-MM-DD`; a day that the month does not have becomes its last.
pub fn day_after(date: Date, years: f64) -> String {
    let months = i64::from(date.year) * 12 + i64::from(date.month) - 1 + (years * 12.0 + 1e-9).floor() as i64;
    let (year, month) = (months.div_euclid(12), months.rem_euclid(12) + 1);
    let leap = year % 4 == 0 && (year % 100 != 0 || year % 400 == 0);
    let days = match month {
        2 => 28 + i64::from(leap),
        4 | 6 | 9 | 11 => 30,
        _ => 31,
    };
    format!("{year:04}-{month:02}-{:02}", i64::from(date.day).min(days))
}

#[cfg(test)]
mod tests;
