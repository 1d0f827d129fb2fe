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

/// Sums of weighted samples, to be added to in index order.
///
/// Each sample brings a value (a chance between 0 and 1), a weight (how it was drawn) and a membership (0 to 1: how far it belongs
/// to what is given, for example that the cliff stands).
#[derive(Debug, Clone, Copy, Default, PartialEq)]
pub struct Tally {
    n: f64,
    /// Smallest and largest weight.
    weights: Option<[f64; 2]>,
    wv: f64,
    wv2: f64,
    wm: f64,
    wmv: f64,
    wm2: f64,
    wm2v: f64,
    wm2v2: f64,
}

impl Tally {
    /// Adds one sample.
    pub fn add(&mut self, value: f64, membership: f64, weight: f64) {
        let (wv, wm) = (weight * value, weight * membership);
        self.n += 1.0;
        self.weights = Some(self.weights.map_or([weight; 2], |[low, high]| [low.min(weight), high.max(weight)]));
        self.wv += wv;
        self.wv2 += wv * wv;
        self.wm += wm;
        self.wmv += wm * value;
        self.wm2 += wm * wm;
        self.wm2v += wm * wm * value;
        self.wm2v2 += wm * wm * value * value;
    }

    /// Adds the sums of further samples.
    pub fn merge(&mut self, other: &Self) {
        self.n += other.n;
        self.weights = match (self.weights, other.weights) {
            (Some(a), Some(b)) => Some([a[0].min(b[0]), a[1].max(b[1])]),
            (a, b) => a.or(b),
        };
        self.wv += other.wv;
        self.wv2 += other.wv2;
        self.wm += other.wm;
        self.wmv += other.wmv;
        self.wm2 += other.wm2;
        self.wm2v += other.wm2v;
        self.wm2v2 += other.wm2v2;
    }

    /// Mean of `weight x value` over all samples, membership left aside.
    ///
    /// `p = sum w v / n`, `se^2 = (sum (w v)^2 - n p^2) / (n (n - 1))`. With equal weights the interval is Wilson's, which is never
    /// too narrow for values between 0 and 1; with unequal weights it is `p +- 1.96 se`.
    ///
    /// # Panics
    /// If there are fewer than two samples.
    pub fn mean(&self) -> Estimate {
        assert!(2.0 <= self.n, "an error needs two samples, got {}", self.n);
        let probability = self.wv / self.n;
        let scatter = (self.wv2 - self.n * probability * probability).max(0.0);
        let standard_error = (scatter / (self.n * (self.n - 1.0))).sqrt();
        let interval =
            if self.plain() { wilson_interval(probability.clamp(0.0, 1.0), self.n) } else { around(probability, standard_error) };
        Estimate { probability, standard_error, interval }
    }

    /// Mean of the values among the members, `p = sum w m v / sum w m`; `None` when nobody belongs.
    ///
    /// Error by the delta method, `se^2 = sum (w m (v - p))^2 / (sum w m)^2`; with equal weights the interval is Wilson's for the
    /// effective number of members (eq. (7.10)).
    pub fn ratio(&self) -> Option<Estimate> {
        if self.wm <= 0.0 {
            return None;
        }
        let p = self.wmv / self.wm;
        let scatter = (self.wm2v2 - 2.0 * p * self.wm2v + p * p * self.wm2).max(0.0);
        let standard_error = scatter.sqrt() / self.wm;
        let interval = if self.plain() { wilson_interval(p.clamp(0.0, 1.0), self.effective_members()) } else { around(p, standard_error) };
        Some(Estimate { probability: p, standard_error, interval })
    }

    /// Kish's effective number of members, `(sum w m)^2 / sum (w m)^2`.
    pub fn effective_members(&self) -> f64 {
        if 0.0 < self.wm2 { self.wm * self.wm / self.wm2 } else { 0.0 }
    }

    fn plain(&self) -> bool {
        self.weights.is_none_or(|[low, high]| high <= low)
    }
}

/// [`Tally::mean`] of slices.
///
/// # Panics
/// If the lengths differ or there are fewer than two samples.
pub fn weighted_estimate(values: &[f64], weights: &[f64]) -> Estimate {
    assert_eq!(values.len(), weights.len(), "values and weights");
    let mut tally = Tally::default();
    for (value, weight) in values.iter().zip(weights) {
        tally.add(*value, 1.0, *weight);
    }
    tally.mean()
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
