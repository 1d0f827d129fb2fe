//! A probability with its sampling error.

/// Two-sided 95 % point of the standard normal.
const Z_95: f64 = 1.959963984540054;

/// A probability estimated from samples.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Estimate {
    /// Estimate.
    pub probability: f64,
    /// Its standard error.
    pub standard_error: f64,
    /// Interval that covers the true value in 95 of 100 runs.
    pub interval: [f64; 2],
}

/// Wilson's interval (1927) for `p` found in `n` samples: never empty, never below zero, true also when nothing was hit.
///
/// `(p + z^2/2n +- z sqrt(p (1 - p)/n + z^2/4n^2)) / (1 + z^2/n)`, eq. (7.9).
pub fn wilson_interval(p: f64, n: f64) -> [f64; 2] {
    let z2 = Z_95 * Z_95;
    let center = p + z2 / (2.0 * n);
    let half = Z_95 * (p * (1.0 - p) / n + z2 / (4.0 * n * n)).sqrt();
    // The ends at p = 0 and p = 1 are exactly 0 and 1; rounding must not move them.
    let low = if p <= 0.0 { 0.0 } else { (center - half) / (1.0 + z2 / n) };
    let high = if 1.0 <= p { 1.0 } else { (center + half) / (1.0 + z2 / n) };
    [low.max(0.0), high.min(1.0)]
}

/// Mean of `weight x value`, the values being chances between 0 and 1; sums in index order.
///
/// `p = sum w v / n`, `se^2 = sum (w v - p)^2 / (n (n - 1))`. With equal weights the interval is Wilson's, which is never too
/// narrow for values between 0 and 1; with unequal weights it is `p +- 1.96 se`.
///
/// # Panics
/// If the lengths differ or there are fewer than two samples.
pub fn weighted_estimate(values: &[f64], weights: &[f64]) -> Estimate {
    assert_eq!(values.len(), weights.len(), "values and weights");
    assert!(2 <= values.len(), "an error needs two samples");
    let n = values.len() as f64;
    let probability = values.iter().zip(weights).map(|(v, w)| v * w).sum::<f64>() / n;
    let scatter: f64 = values.iter().zip(weights).map(|(v, w)| (v * w - probability).powi(2)).sum();
    let standard_error = (scatter / (n * (n - 1.0))).sqrt();
    let plain = weights.windows(2).all(|w| (w[0] - w[1]).abs() <= 0.0);
    let interval = if plain { wilson_interval(probability.clamp(0.0, 1.0), n) } else { around(probability, standard_error) };
    Estimate { probability, standard_error, interval }
}

/// Mean of the values among samples with a known chance of belonging: `p = sum w m v / sum w m`, for what is given (it stands, it fell).
///
/// Error by the delta method, `se^2 = sum (w m (v - p))^2 / (sum w m)^2`; an interval from the effective sample size by Wilson.
///
/// `None` when no sample belongs.
///
/// # Panics
/// If the lengths differ.
pub fn ratio_estimate(values: &[f64], membership: &[f64], weights: &[f64]) -> Option<Estimate> {
    assert_eq!(values.len(), weights.len(), "values and weights");
    assert_eq!(values.len(), membership.len(), "values and membership");
    let total: f64 = membership.iter().zip(weights).map(|(m, w)| m * w).sum();
    if total <= 0.0 {
        return None;
    }
    let probability = values.iter().zip(membership).zip(weights).map(|((v, m), w)| v * m * w).sum::<f64>() / total;
    let scatter: f64 = values.iter().zip(membership).zip(weights).map(|((v, m), w)| (w * m * (v - probability)).powi(2)).sum();
    let standard_error = scatter.sqrt() / total;
    let own: Vec<f64> = membership.iter().zip(weights).map(|(m, w)| m * w).collect();
    let interval = if weights.windows(2).all(|w| (w[0] - w[1]).abs() <= 0.0) {
        wilson_interval(probability.clamp(0.0, 1.0), effective_sample_size(&own))
    } else {
        around(probability, standard_error)
    };
    Some(Estimate { probability, standard_error, interval })
}

/// Kish's effective sample size, `(sum w)^2 / sum w^2`.
pub fn effective_sample_size(weights: &[f64]) -> f64 {
    let sum: f64 = weights.iter().sum();
    let squares: f64 = weights.iter().map(|w| w * w).sum();
    if 0.0 < squares { sum * sum / squares } else { 0.0 }
}

/// Difference of two estimates over their combined standard error; at most 3 is agreement.
///
/// A plain estimate with few or no hits understates its own error; `n_plain` samples at the other's probability give the error
/// it must have, `sqrt(p (1 - p) / n)`, and the larger of the two counts.
pub fn agreement(plain: &Estimate, n_plain: f64, other: &Estimate) -> f64 {
    let p = other.probability.clamp(0.0, 1.0);
    let expected = (p * (1.0 - p) / n_plain).sqrt();
    let own = if plain.standard_error < expected && plain.probability * n_plain < 10.0 { expected } else { plain.standard_error };
    let combined = (own * own + other.standard_error * other.standard_error).sqrt();
    let difference = (plain.probability - other.probability).abs();
    if 0.0 < combined { difference / combined } else { difference * f64::INFINITY.min(1e300) }
}

fn around(p: f64, standard_error: f64) -> [f64; 2] {
    [(p - Z_95 * standard_error).max(0.0), (p + Z_95 * standard_error).min(1.0)]
}
