//! A rate that follows the rise of the sea.
use super::GrowthError;
use crate::model::SeaLevelRise;

/// Rate under another sea-level rise, `R2 = R1 (S2 / S1)^m` (eq. (7.14)).
///
/// `m = 0`: no feedback; 0.5: equilibrium of soft rock with a thin beach (Walkden & Dickson 2008); 1: instant response
/// (the frame of Ashton et al. 2011).
pub fn scaled_rate(rate: f64, rise_now: f64, rise_then: f64, exponent: f64) -> f64 {
    rate * (rise_then / rise_now).powf(exponent)
}

/// Time stretched by the rise of the sea.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct SeaLevel {
    /// Rise now, change of it a year, exponent; `None` = no scaling.
    rise: Option<(f64, f64, f64)>,
    horizon_yr: f64,
}

impl SeaLevel {
    /// Rise growing in a straight line from now to the horizon and staying there.
    ///
    /// # Errors
    /// Rises that are not positive or an exponent outside 0 to 1.
    pub fn new(rise: Option<&SeaLevelRise>, horizon_yr: f64) -> Result<Self, GrowthError> {
        let Some(r) = rise else { return Ok(Self { rise: None, horizon_yr }) };
        let (now, horizon, exponent) = (r.now_m_per_yr, r.horizon_m_per_yr, r.exponent);
        let valid = 0.0 < now && now.is_finite() && 0.0 < horizon && horizon.is_finite() && (0.0..=1.0).contains(&exponent);
        if valid {
            Ok(Self { rise: Some((now, (horizon - now) / horizon_yr, exponent)), horizon_yr })
        } else {
            Err(GrowthError::SeaLevel { now, horizon, exponent })
        }
    }

    /// `tau(t)`, the years at today's rate that gain as much as `t` years of the rising sea:
    /// the integral of `(S(t) / S_now)^m`, `S` linear (eq. (7.14)).
    pub fn stretched_yr(&self, time_yr: f64) -> f64 {
        let Some((now, change, m)) = self.rise else { return time_yr };
        let within = time_yr.min(self.horizon_yr);
        let relative = change / now;
        let grown = 1.0 + relative * within;
        let during = if relative.abs() * within < 1e-9 { within } else { (grown.powf(m + 1.0) - 1.0) / (relative * (m + 1.0)) };
        during + (time_yr - within) * grown.powf(m)
    }
}
