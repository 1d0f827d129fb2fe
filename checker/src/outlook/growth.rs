//! How far the undercut may have grown by a year: not knowing the rate and its swings from year to year are different things.
//!
//! A rate that is not known is wrong in the same sense every year and its error grows with time; swings average out. With a rate
//! `r` (lognormal, constant over time), swings of standard deviation `v r` a year and storm jumps, the depth gained by time `t` is
//! the greatest value so far of `r tau + v r W(tau)`, plus the jumps; `W` is a Wiener process and `tau(t)` the time stretched by
//! the rise of the sea. For given `r` the chance to have gained `a` is the first-passage law (eq. (7.13)):
//!
//! ```text
//! G(a) = Phi((r tau - a) / s) + exp(2 a / (v^2 r)) Phi(-(r tau + a) / s),   s = v r sqrt(tau)
//! ```
//!
//! Source: Schrödinger 1915, Wald 1947 (inverse Gaussian law), from memory; checked by simulation.
mod sea_level;
mod storms;

pub use sea_level::{SeaLevel, scaled_rate};
pub use storms::LARGEST_STORM_COUNT;

use super::normal;
use crate::model::{SeaLevelRise, Storms};
use crate::outlook::variables::{LARGEST_COV, Marginal, VariableError};

/// Intervals of a table over the depth gained: over 37 e-foldings of a tail, straight lines between them err by 4e-5 of the value.
const TABLE: usize = 2048;

/// Why a law of growth is refused.
#[derive(Debug, Clone, PartialEq, thiserror::Error)]
#[non_exhaustive]
pub enum GrowthError {
    /// A rate of zero or less, or not a number.
    #[error("the deepening rate must be positive, got {value} m/yr")]
    Rate {
        /// Value.
        value: f64,
    },
    /// A scatter out of range.
    #[error("{what} must be within 0 to {LARGEST_COV}, got {value}")]
    Scatter {
        /// Which.
        what: &'static str,
        /// Value.
        value: f64,
    },
    /// A horizon of zero or less.
    #[error("the horizon must be positive, got {value} years")]
    Horizon {
        /// Value.
        value: f64,
    },
    /// Sea-level rise that cannot be scaled.
    #[error("sea-level scaling needs rises above zero and an exponent within 0 to 1, got {now} and {horizon} m/yr, exponent {exponent}")]
    SeaLevel {
        /// Now.
        now: f64,
        /// At the horizon.
        horizon: f64,
        /// Exponent.
        exponent: f64,
    },
    /// Storm numbers out of range.
    #[error("storms a year must be above 0 and at most {LARGEST_STORM_COUNT} over the time asked for, got {per_yr} a year")]
    StormNumber {
        /// Number a year.
        per_yr: f64,
    },
    /// The distribution of a jump.
    #[error(transparent)]
    Jump(#[from] VariableError),
}

/// Parameters of the growth.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct GrowthParams {
    /// Mean rate, m/yr.
    pub mean_m_per_yr: f64,
    /// Not knowing the rate: coefficient of variation of the constant rate.
    pub uncertainty_cov: f64,
    /// Swings: standard deviation of one year over the rate.
    pub year_to_year_cov: f64,
    /// Jumps.
    pub storms: Option<Storms>,
    /// Scaling with the rise of the sea.
    pub sea_level_rise: Option<SeaLevelRise>,
    /// Year at which the sea's rise at the horizon is reached.
    pub horizon_yr: f64,
}

/// A checked law of growth.
#[derive(Debug, Clone, PartialEq)]
pub struct Growth {
    mean_m_per_yr: f64,
    /// `ln` of the rate; `None` = known.
    rate: Option<[f64; 2]>,
    swings: f64,
    storms: Option<(f64, Marginal)>,
    sea_level: SeaLevel,
}

impl Growth {
    /// Checks the parameters.
    ///
    /// # Errors
    /// [`GrowthError`] for the first parameter out of range.
    pub fn new(params: &GrowthParams) -> Result<Self, GrowthError> {
        let mean = params.mean_m_per_yr;
        if !(mean.is_finite() && 0.0 < mean) {
            return Err(GrowthError::Rate { value: mean });
        }
        if !(params.horizon_yr.is_finite() && 0.0 < params.horizon_yr) {
            return Err(GrowthError::Horizon { value: params.horizon_yr });
        }
        for (what, value) in [("uncertainty_cov", params.uncertainty_cov), ("year_to_year_cov", params.year_to_year_cov)] {
            if !(0.0..=LARGEST_COV).contains(&value) {
                return Err(GrowthError::Scatter { what, value });
            }
        }
        let rate = if 0.0 < params.uncertainty_cov {
            let zeta_squared = params.uncertainty_cov.powi(2).ln_1p();
            Some([mean.ln() - 0.5 * zeta_squared, zeta_squared.sqrt()])
        } else {
            None
        };
        let storms = params.storms.as_ref().map(Self::storms).transpose()?;
        let sea_level = SeaLevel::new(params.sea_level_rise.as_ref(), params.horizon_yr)?;
        Ok(Self { mean_m_per_yr: mean, rate, swings: params.year_to_year_cov, storms, sea_level })
    }

    fn storms(storms: &Storms) -> Result<(f64, Marginal), GrowthError> {
        if storms.per_yr.is_finite() && 0.0 < storms.per_yr {
            Ok((storms.per_yr, Marginal::new("storm jump", &storms.jump_m)?))
        } else {
            Err(GrowthError::StormNumber { per_yr: storms.per_yr })
        }
    }

    /// Mean rate today without storms, m/yr.
    pub fn mean_m_per_yr(&self) -> f64 {
        self.mean_m_per_yr
    }

    /// The law of the depth gained by a time.
    ///
    /// # Errors
    /// When more storms are expected by then than can be summed.
    pub fn by(&self, time_yr: f64) -> Result<GrowthBy, GrowthError> {
        let tau = self.sea_level.stretched_yr(time_yr);
        if time_yr <= 0.0 {
            return Ok(GrowthBy { law: ByLaw::Known { reach_m: 0.0 } });
        }
        let smooth = self.without_storms(tau);
        match &self.storms {
            None => Ok(GrowthBy { law: smooth }),
            Some((per_yr, jump)) => storms::with_jumps(&smooth, per_yr * time_yr, jump)
                .map(|law| GrowthBy { law })
                .ok_or(GrowthError::StormNumber { per_yr: *per_yr }),
        }
    }

    fn without_storms(&self, tau: f64) -> ByLaw {
        // Width of the first passage in standard deviations of ln rate: below 0.004 the swings are lost in not knowing the rate.
        let width = |zeta: f64| self.swings / (tau.sqrt() * zeta);
        match self.rate {
            None if self.swings <= 0.0 => ByLaw::Known { reach_m: self.mean_m_per_yr * tau },
            None => table_of(&|a| first_passage(a, self.mean_m_per_yr, self.swings, tau), self.mean_m_per_yr * tau),
            Some([lambda, zeta]) if width(zeta) < 0.004 => ByLaw::Lognormal { lambda: lambda + tau.ln(), zeta },
            Some([lambda, zeta]) => {
                // Trapezoidal rule over the normal behind the rate, finer where the passage is sharp.
                let n = ((32.0 / width(zeta)) as usize).clamp(64, 2048);
                let step = 16.0 / n as f64;
                let rates: Vec<(f64, f64)> =
                    (0..=n).map(|i| -8.0 + step * i as f64).map(|z| (step * normal::density(z), (lambda + zeta * z).exp())).collect();
                let chance = |a: f64| rates.iter().map(|(weight, rate)| weight * first_passage(a, *rate, self.swings, tau)).sum::<f64>();
                table_of(&|a| chance(a).min(1.0), self.mean_m_per_yr * tau)
            }
        }
    }
}

/// Chance that the depth gained has reached `a_m` by the stretched time `tau`, for a known rate with swings (eq. (7.13)).
///
/// The second term is written as `phi((a - r tau) / s) M((a + r tau) / s)` with Mills' ratio `M`, which neither overflows nor cancels.
pub fn first_passage(a_m: f64, rate_m_per_yr: f64, year_to_year_cov: f64, tau: f64) -> f64 {
    if a_m <= 0.0 {
        return 1.0;
    }
    let spread = year_to_year_cov * rate_m_per_yr * tau.sqrt();
    let mean = rate_m_per_yr * tau;
    let short = (a_m - mean) / spread;
    (normal::cdf(-short) + normal::density(short) * mills((a_m + mean) / spread)).min(1.0)
}

/// Mills' ratio `Phi(-b) / phi(b)` for `b >= 0`; from 20 on by its asymptotic series, whose first term left out is 3e-9 of it there.
fn mills(b: f64) -> f64 {
    if b < 20.0 {
        normal::cdf(-b) / normal::density(b)
    } else {
        let q = 1.0 / (b * b);
        (1.0 - q * (1.0 - 3.0 * q * (1.0 - 5.0 * q * (1.0 - 7.0 * q)))) / b
    }
}

/// The depth gained by one time: its chance to exceed, and its quantiles.
#[derive(Debug, Clone, PartialEq)]
pub struct GrowthBy {
    law: ByLaw,
}

#[derive(Debug, Clone, PartialEq)]
enum ByLaw {
    /// Exactly this.
    Known { reach_m: f64 },
    /// Lognormal.
    Lognormal { lambda: f64, zeta: f64 },
    /// Chance to exceed at equal steps from 0, falling.
    Table { step_m: f64, exceedance: Vec<f64> },
}

impl GrowthBy {
    /// Chance that at least `a_m` has been gained; 1 for `a_m <= 0`, 0 for infinite `a_m`.
    pub fn exceedance(&self, a_m: f64) -> f64 {
        self.law.exceedance(a_m)
    }

    /// Depth gained that is exceeded with the chance `p`, m.
    pub fn exceeded_with(&self, p: f64) -> f64 {
        match &self.law {
            ByLaw::Known { reach_m } => *reach_m,
            ByLaw::Lognormal { lambda, zeta } => (lambda - zeta * normal::quantile(p)).exp(),
            ByLaw::Table { step_m, exceedance } => {
                let i = exceedance.partition_point(|e| p < *e);
                if i == 0 || i == exceedance.len() {
                    return step_m * i as f64;
                }
                let share = (exceedance[i - 1] - p) / (exceedance[i - 1] - exceedance[i]);
                step_m * ((i - 1) as f64 + share)
            }
        }
    }
}

impl ByLaw {
    fn exceedance(&self, a_m: f64) -> f64 {
        if a_m <= 0.0 {
            return 1.0;
        }
        match self {
            Self::Known { reach_m } => f64::from(u8::from(a_m <= *reach_m)),
            Self::Lognormal { lambda, zeta } => {
                let z = (a_m.ln() - lambda) / zeta;
                // Beyond 39 standard deviations the chance is below the smallest number.
                if z < 39.0 { normal::cdf(-z) } else { 0.0 }
            }
            Self::Table { step_m, exceedance } => {
                let place = a_m / step_m;
                let last = exceedance.len() - 1;
                if (last as f64) <= place {
                    // Never less than what is known to lie beyond the table: zero to working accuracy, or the mass of far jumps.
                    return if a_m.is_finite() { exceedance[last] } else { 0.0 };
                }
                let i = place as usize;
                let share = place - i as f64;
                exceedance[i] * (1.0 - share) + exceedance[i + 1] * share
            }
        }
    }
}

/// Tabulates a falling chance out to where it is below 1e-17, looking from `about_m` on.
fn table_of(chance: &dyn Fn(f64) -> f64, about_m: f64) -> ByLaw {
    let mut end = 2.0 * about_m;
    while 1e-17 < chance(end) && end < 1e4 * about_m {
        end *= 1.25;
    }
    let step_m = end / TABLE as f64;
    let mut least = 1.0_f64;
    let exceedance = (0..=TABLE)
        .map(|i| {
            // Rounding must not make a falling chance rise.
            least = least.min(chance(step_m * i as f64));
            least
        })
        .collect();
    ByLaw::Table { step_m, exceedance }
}

#[cfg(test)]
mod tests;
