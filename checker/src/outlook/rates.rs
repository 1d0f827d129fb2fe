//! Where the deepening rate comes from: dated surveys, retreat of the cliff edge, or waves against rock strength.
mod surveys;

pub use surveys::{SurveyFit, fit_surveys, years_between};

/// A rate with the part of its uncertainty that stays the same over time.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Rate {
    /// Mean, m/yr.
    pub mean_m_per_yr: f64,
    /// Coefficient of variation of not knowing it.
    pub uncertainty_cov: f64,
}

/// Why no rate can be taken.
#[derive(Debug, Clone, Copy, PartialEq, thiserror::Error)]
#[non_exhaustive]
pub enum RateError {
    /// Too few dates.
    #[error("a rate needs depths on at least 2 different days, got {days}")]
    TooFewDays {
        /// Different days.
        days: usize,
    },
    /// An accuracy that is not positive, or a depth that is not a number.
    #[error("every surveyed depth needs a finite depth and an accuracy above 0, got {depth_m} m with {accuracy_m} m")]
    Accuracy {
        /// Depth.
        depth_m: f64,
        /// Accuracy.
        accuracy_m: f64,
    },
    /// The surveys show no deepening.
    #[error("the surveys show no deepening: {rate_m_per_yr:.4} m/yr with a standard error of {error_m_per_yr:.4} m/yr")]
    NoDeepening {
        /// Fitted rate.
        rate_m_per_yr: f64,
        /// Its standard error.
        error_m_per_yr: f64,
    },
    /// The edge did not retreat, or the years run backward.
    #[error("edge retreat needs a positive rate over a positive span of years, got {rate_m_per_yr} m/yr over {years} years")]
    Edge {
        /// Rate.
        rate_m_per_yr: f64,
        /// Years.
        years: f64,
    },
}

/// Least coefficient of variation of a rate read from the edge: judgement, common practice without a source, printed so.
pub const LEAST_EDGE_COV: f64 = 0.3;

/// Rate from the retreat of the cliff edge over `years`.
///
/// Over many collapses the edge retreats as fast as the undercut deepens. Over a few it moves in blocks of about `block_m`: the
/// record may hold up to half a block too much or too little, so that `cov = max(0.3, block / (2 r years))` (eq. (7.16)).
///
/// # Errors
/// A rate or span that is not positive.
pub fn rate_from_edge(rate_m_per_yr: f64, years: f64, block_m: f64) -> Result<Rate, RateError> {
    if 0.0 < rate_m_per_yr && rate_m_per_yr.is_finite() && 0.0 < years {
        let block_cov = block_m / (2.0 * rate_m_per_yr * years);
        Ok(Rate { mean_m_per_yr: rate_m_per_yr, uncertainty_cov: LEAST_EDGE_COV.max(block_cov) })
    } else {
        Err(RateError::Edge { rate_m_per_yr, years })
    }
}

/// Site constants of Sunamura's law.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct SunamuraSite {
    /// Rate constant `k`, m/yr: calibrated at the site.
    pub rate_constant_m_per_yr: f64,
    /// Constant `C`: calibrated at the site.
    pub constant: f64,
    /// Uniaxial compressive strength of the rock, Pa.
    pub uniaxial_strength_pa: f64,
    /// Density of sea water, kg/m3.
    pub water_density_kg_per_m3: f64,
}

/// Acceleration of gravity, m/s2, rounded as for the unit weight of water (9.81 kN/m3).
const GRAVITY_M_PER_S2: f64 = 9.81;

impl SunamuraSite {
    /// Deepening rate under waves of height `wave_height_m` at the foot of the cliff, m/yr; zero below the threshold.
    ///
    /// `dx/dt = k (C + ln(rho g H / S_c))`, zero if negative (eq. (7.17)). Source: Sunamura 1977, 1992.
    pub fn rate_m_per_yr(&self, wave_height_m: f64) -> f64 {
        let pressure_pa = self.water_density_kg_per_m3 * GRAVITY_M_PER_S2 * wave_height_m;
        let rate = self.rate_constant_m_per_yr * (self.constant + (pressure_pa / self.uniaxial_strength_pa).ln());
        rate.max(0.0)
    }

    /// Wave height below which nothing is eroded, `S_c exp(-C) / (rho g)`, m.
    pub fn threshold_height_m(&self) -> f64 {
        self.uniaxial_strength_pa * (-self.constant).exp() / (self.water_density_kg_per_m3 * GRAVITY_M_PER_S2)
    }
}

#[cfg(test)]
mod tests;
