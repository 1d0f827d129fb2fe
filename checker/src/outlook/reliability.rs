//! Reliability index and probability, target values of standards, and the two-point estimate.
use super::normal;

/// Reliability index of a probability, `beta = -Phi^-1(p)`.
pub fn index_of(probability: f64) -> f64 {
    -normal::quantile(probability)
}

/// Probability of a reliability index, `p = Phi(-beta)`.
pub fn probability_of(index: f64) -> f64 {
    normal::cdf(-index)
}

/// Index over another span of years when the years are independent: `Phi(beta_n) = Phi(beta_1)^n` (EN 1990 eq. (C.3)).
///
/// Worked with the small side, `p_n = 1 - (1 - p_1)^(n / m)`, which keeps the digits of tiny probabilities.
pub fn index_over_years(index: f64, from_yr: f64, to_yr: f64) -> f64 {
    index_of(-((-normal::cdf(-index)).ln_1p() * to_yr / from_yr).exp_m1())
}

/// A target reliability of a standard, for buildings; printed for comparison only: no standard sets one for a natural cliff.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct TargetIndex {
    /// Reliability class.
    pub class: &'static str,
    /// Index over one year.
    pub one_year: f64,
    /// Index over fifty years.
    pub fifty_years: f64,
}

/// EN 1990:2002 Table B2, minimum reliability indices for ultimate limit states.
pub const EN_1990_TARGETS: [TargetIndex; 3] = [
    TargetIndex { class: "RC3", one_year: 5.2, fifty_years: 4.3 },
    TargetIndex { class: "RC2", one_year: 4.7, fifty_years: 3.8 },
    TargetIndex { class: "RC1", one_year: 4.2, fifty_years: 3.3 },
];

/// Mean and standard deviation of `f` by the two-point estimate of Rosenblueth 1975: equal weight on all `2^n` corners mean +- deviation.
///
/// | name | shape    | meaning                                   |
/// |------|----------|-------------------------------------------|
/// | x    | `[n][2]` | mean and standard deviation of each input |
///
/// # Panics
/// If there are more than 20 inputs: a million corners is not what the method is for.
pub fn two_point_estimate(f: &dyn Fn(&[f64]) -> f64, x: &[[f64; 2]]) -> [f64; 2] {
    assert!(x.len() <= 20, "two-point estimate of {} inputs", x.len());
    let n_corners = 1_usize << x.len();
    let values: Vec<f64> = (0..n_corners)
        .map(|corner| {
            let at: Vec<f64> = x
                .iter()
                .enumerate()
                .map(|(i, [mean, deviation])| if corner >> i & 1 == 1 { mean + deviation } else { mean - deviation })
                .collect();
            f(&at)
        })
        .collect();
    let mean = values.iter().sum::<f64>() / n_corners as f64;
    let variance = values.iter().map(|v| (v - mean).powi(2)).sum::<f64>() / n_corners as f64;
    [mean, variance.sqrt()]
}

/// Probability that at least one of several limits is passed: independent limits give the upper value, fully dependent ones the lower.
///
/// `[max p_i, 1 - prod (1 - p_i)]` (simple bounds of a series system with limits that do not work against each other).
pub fn series_bounds(probabilities: &[f64]) -> [f64; 2] {
    let largest = probabilities.iter().copied().fold(0.0, f64::max);
    let none: f64 = probabilities.iter().map(|p| (-p).ln_1p()).sum();
    [largest, -none.exp_m1()]
}

#[cfg(test)]
mod tests;
