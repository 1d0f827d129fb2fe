//! Jumps of depth by storms: a compound Poisson sum.
use super::{ByLaw, TABLE, normal};
use crate::outlook::variables::Marginal;

/// Largest expected number of storms by the time asked for: more are no jumps but swings, and `exp(-n)` would vanish.
pub const LARGEST_STORM_COUNT: f64 = 600.0;

/// Intervals of the table with jumps; its sums cost the square of it.
const JUMP_TABLE: usize = TABLE / 2;

/// Depth gained without jumps plus the sum of a Poisson number of jumps, both independent.
///
/// ```text
/// p_0 = exp(-n (1 - f_0)),   p_k = (n / k) sum_j j f_j p_(k-j)          (recursion of Panjer 1981, eq. (7.15))
/// ```
///
/// with `f_j` the chance of one jump in the step about `j`, and `p_k` that of their sum. The greatest depth so far of the smooth
/// part plus all jumps is never less than the greatest depth so far of both together, so the result is on the cautious side.
/// `None` when too many storms are expected.
pub(super) fn with_jumps(smooth: &ByLaw, n_storms: f64, jump: &Marginal) -> Option<ByLaw> {
    if LARGEST_STORM_COUNT < n_storms {
        return None;
    }
    // Jump quantiles at equal steps give mean and scatter for the table's end.
    let quantiles: Vec<f64> = (0..200).map(|i| jump.from_standard(normal::quantile((f64::from(i) + 0.5) / 200.0)).max(0.0)).collect();
    let mean = quantiles.iter().sum::<f64>() / 200.0;
    let square = quantiles.iter().map(|q| q * q).sum::<f64>() / 200.0;
    let farthest = n_storms * mean + 8.0 * (n_storms * square).sqrt() + 4.0 * quantiles[199];
    let smooth_end = end_of(smooth);
    let step_m = (farthest + smooth_end) / JUMP_TABLE as f64;

    let one: Vec<f64> = (0..=JUMP_TABLE)
        .map(|j| {
            let (low, high) = ((j as f64 - 0.5) * step_m, (j as f64 + 0.5) * step_m);
            // Everything below half a step, negative draws too, counts as no jump.
            if j == 0 { jump.cdf(high) } else { jump.cdf(high) - jump.cdf(low) }
        })
        .collect();
    let mut sum = vec![0.0; JUMP_TABLE + 1];
    sum[0] = (-n_storms * (1.0 - one[0])).exp();
    for k in 1..=JUMP_TABLE {
        let terms: f64 = (1..=k).map(|j| j as f64 * one[j] * sum[k - j]).sum();
        sum[k] = n_storms / k as f64 * terms;
    }
    let beyond = (1.0 - sum.iter().sum::<f64>()).max(0.0);
    let mut least = 1.0_f64;
    let exceedance = (0..=JUMP_TABLE)
        .map(|i| {
            let a = i as f64 * step_m;
            let chance: f64 = sum.iter().enumerate().map(|(k, p)| p * smooth.exceedance(a - k as f64 * step_m)).sum();
            least = least.min(chance + beyond);
            least
        })
        .collect();
    Some(ByLaw::Table { step_m, exceedance })
}

fn end_of(law: &ByLaw) -> f64 {
    match law {
        ByLaw::Known { reach_m } => *reach_m,
        ByLaw::Lognormal { lambda, zeta } => (lambda + 7.0 * zeta).exp(),
        ByLaw::Table { step_m, exceedance } => step_m * (exceedance.len() - 1) as f64,
    }
}
