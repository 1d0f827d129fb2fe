//! One distribution, tied to a standard normal.
use super::VariableError;
use crate::model::Uncertain;
use crate::outlook::normal;

/// Largest coefficient of variation taken for real: beyond it the "mean" says nothing.
pub const LARGEST_COV: f64 = 2.0;

/// A checked distribution. Parameters in the quantity's SI unit.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum Marginal {
    /// Known.
    Exact(f64),
    /// `ln x` is normal: `zeta^2 = ln(1 + cov^2)`, `lambda = ln mean - zeta^2 / 2`.
    Lognormal {
        /// Mean of `ln x`.
        lambda: f64,
        /// Standard deviation of `ln x`.
        zeta: f64,
    },
    /// Normal.
    Normal {
        /// Mean.
        mean: f64,
        /// Standard deviation.
        deviation: f64,
    },
    /// Normal cut off at both ends.
    Truncated {
        /// Mean before the cut.
        mean: f64,
        /// Standard deviation before the cut.
        deviation: f64,
        /// Ends in standard deviations from the mean.
        ends: [f64; 2],
    },
    /// Uniform.
    Uniform {
        /// Lower end.
        min: f64,
        /// Upper end.
        max: f64,
    },
}

impl Marginal {
    /// Checks the parameters of one input.
    ///
    /// # Errors
    /// Non-finite numbers, a lognormal with a mean of zero or less, a cov outside (0, 2], a deviation of zero or less, an empty range.
    pub fn new(name: &str, uncertain: &Uncertain) -> Result<Self, VariableError> {
        let finite = |what, value: f64| {
            if value.is_finite() { Ok(value) } else { Err(VariableError::NotFinite { name: name.to_owned(), what, value }) }
        };
        let positive = |value: f64| {
            if 0.0 < value && value.is_finite() {
                Ok(value)
            } else {
                Err(VariableError::StandardDeviation { name: name.to_owned(), value })
            }
        };
        match *uncertain {
            Uncertain::Exact(value) => finite("value", value).map(Self::Exact),
            Uncertain::Lognormal { mean, cov } => {
                if finite("mean", mean)? <= 0.0 {
                    return Err(VariableError::LognormalMean { name: name.to_owned(), mean });
                }
                let zeta_squared = if 0.0 < cov && cov <= LARGEST_COV {
                    (cov * cov).ln_1p()
                } else {
                    return Err(VariableError::Cov { name: name.to_owned(), cov });
                };
                Ok(Self::Lognormal { lambda: mean.ln() - 0.5 * zeta_squared, zeta: zeta_squared.sqrt() })
            }
            Uncertain::Normal { mean, standard_deviation } => {
                Ok(Self::Normal { mean: finite("mean", mean)?, deviation: positive(standard_deviation)? })
            }
            Uncertain::TruncatedNormal { mean, standard_deviation, min, max } => {
                let (mean, deviation) = (finite("mean", mean)?, positive(standard_deviation)?);
                let ends = [(min - mean) / deviation, (max - mean) / deviation];
                // Both tails are asked, so that a cut far out on either side is told from an empty one.
                let inside = (normal::cdf(ends[1]) - normal::cdf(ends[0])).max(normal::cdf(-ends[0]) - normal::cdf(-ends[1]));
                if min < max && 0.0 < inside {
                    Ok(Self::Truncated { mean, deviation, ends })
                } else {
                    Err(VariableError::Range { name: name.to_owned(), min, max })
                }
            }
            Uncertain::Uniform { min, max } => {
                if min < max && min.is_finite() && max.is_finite() {
                    Ok(Self::Uniform { min, max })
                } else {
                    Err(VariableError::Range { name: name.to_owned(), min, max })
                }
            }
        }
    }

    /// Whether it takes more than one value.
    pub fn is_random(&self) -> bool {
        !matches!(self, Self::Exact(_))
    }

    /// Value at a standard normal: `F^-1(Phi(z))`.
    pub fn from_standard(&self, z: f64) -> f64 {
        match *self {
            Self::Exact(value) => value,
            Self::Lognormal { lambda, zeta } => (lambda + zeta * z).exp(),
            Self::Normal { mean, deviation } => mean + deviation * z,
            Self::Truncated { mean, deviation, ends: [low, high] } => {
                // The smaller tail is interpolated, so that neither end loses digits.
                let q = if z <= 0.0 {
                    let p = normal::cdf(z);
                    normal::quantile((1.0 - p) * normal::cdf(low) + p * normal::cdf(high))
                } else {
                    let s = normal::cdf(-z);
                    -normal::quantile(s * normal::cdf(-low) + (1.0 - s) * normal::cdf(-high))
                };
                mean + deviation * q.clamp(low, high)
            }
            Self::Uniform { min, max } => min + (max - min) * normal::cdf(z),
        }
    }

    /// Standard normal of a value: `Phi^-1(F(x))`; infinite at or beyond the ends of the distribution, NaN for a known input.
    pub fn to_standard(&self, x: f64) -> f64 {
        match *self {
            Self::Exact(_) => f64::NAN,
            Self::Lognormal { lambda, zeta } => {
                if 0.0 < x {
                    (x.ln() - lambda) / zeta
                } else {
                    f64::NEG_INFINITY
                }
            }
            Self::Normal { mean, deviation } => (x - mean) / deviation,
            Self::Truncated { mean, deviation, ends: [low, high] } => {
                let q = (x - mean) / deviation;
                let below = (normal::cdf(q) - normal::cdf(low)) / (normal::cdf(high) - normal::cdf(low));
                if below <= 0.5 {
                    normal::quantile(below.max(0.0))
                } else {
                    let above = (normal::cdf(-q) - normal::cdf(-high)) / (normal::cdf(-low) - normal::cdf(-high));
                    -normal::quantile(above.max(0.0))
                }
            }
            Self::Uniform { min, max } => {
                let p = ((x - min) / (max - min)).clamp(0.0, 1.0);
                if p <= 0.5 { normal::quantile(p) } else { -normal::quantile(((max - x) / (max - min)).max(0.0)) }
            }
        }
    }

    /// Distribution function `P(X <= x)`.
    pub fn cdf(&self, x: f64) -> f64 {
        match *self {
            Self::Exact(value) => f64::from(u8::from(value <= x)),
            _ => normal::cdf(self.to_standard(x)),
        }
    }
}
