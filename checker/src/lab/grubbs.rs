//! Grubbs' test for one outlier among results of one kind.
use crate::strength::{StrengthError, student_t_quantile};

/// Chance of calling a result an outlier where there is none.
pub(super) const OUTLIER_LEVEL: f64 = 0.05;

/// Largest distance from the mean in standard deviations, and the index of the result it belongs to.
///
/// ```text
/// G = max |x_i - mean| / s
/// ```
///
/// `None` under three results or where all are equal.
pub fn grubbs_statistic(values: &[f64]) -> Option<(f64, usize)> {
    if values.len() < 3 {
        return None;
    }
    let n = values.len() as f64;
    let mean = values.iter().sum::<f64>() / n;
    let deviation = (values.iter().map(|x| (x - mean).powi(2)).sum::<f64>() / (n - 1.0)).sqrt();
    let far = |i: &usize, j: &usize| (values[*i] - mean).abs().total_cmp(&(values[*j] - mean).abs());
    let worst = (0..values.len()).max_by(far)?;
    (0.0 < deviation).then(|| ((values[worst] - mean).abs() / deviation, worst))
}

/// Value that `G` exceeds with probability `level` in a normal sample, both sides tested.
///
/// ```text
/// G_crit = (n - 1)/sqrt(n) sqrt(t^2 / (n - 2 + t^2))      t = t_(1 - level/(2n)), n - 2
/// ```
///
/// # Errors
/// [`StrengthError::TooFewTests`] under three results.
///
/// Source: F. E. Grubbs, Technometrics 11 (1969); NIST/SEMATECH e-Handbook of Statistical Methods, 1.3.5.17.1 (from memory).
pub fn grubbs_critical(tests: u32, level: f64) -> Result<f64, StrengthError> {
    if tests < 3 {
        return Err(StrengthError::TooFewTests { tests });
    }
    let n = f64::from(tests);
    let t = student_t_quantile(1.0 - level / (2.0 * n), n - 2.0)?;
    Ok((n - 1.0) / n.sqrt() * (t * t / (n - 2.0 + t * t)).sqrt())
}

/// Index of the result that Grubbs' test names, if it names one.
pub(super) fn outlier(values: &[f64]) -> Option<usize> {
    let (statistic, i) = grubbs_statistic(values)?;
    let critical = grubbs_critical(u32::try_from(values.len()).ok()?, OUTLIER_LEVEL).ok()?;
    (critical < statistic).then_some(i)
}
