//! Straight line through shear stages by ordinary least squares, with what its scatter allows to be said.
use super::grubbs::OUTLIER_LEVEL;
use crate::strength::{StrengthError, student_t_quantile};

/// One stage: normal stress and shear stress.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Point {
    /// Normal stress, compression positive, Pa.
    pub normal_pa: f64,
    /// Shear stress, Pa.
    pub shear_pa: f64,
}

/// Two ends around an estimate.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Interval {
    /// Lower end.
    pub low: f64,
    /// Upper end.
    pub high: f64,
}

/// Fitted line `tau = c + sigma tan phi` and its scatter.
#[derive(Debug, Clone, PartialEq)]
pub struct Fit {
    /// Stages, in the order of the file.
    pub points: Vec<Point>,
    /// Cohesion, Pa.
    pub cohesion_pa: f64,
    /// Slope, tangent of the friction angle.
    pub tan_friction: f64,
    /// Standard deviation of stages about the line, Pa.
    pub residual_deviation_pa: f64,
    /// Standard error of the cohesion, Pa; 0 where the line is held at the origin.
    pub cohesion_error_pa: f64,
    /// Standard error of the slope.
    pub tan_friction_error: f64,
    /// Correlation of the two estimates, -1 to 1.
    pub correlation: f64,
    /// Whether cohesion came out negative and the line was held at the origin.
    pub through_origin: bool,
    /// Degrees of freedom.
    pub freedom: u32,
    /// Mean of the normal stresses, Pa, and the sum of squared distances from it, Pa2; of a line through the origin: 0 and the sum of squares.
    center_pa: f64,
    spread_pa2: f64,
}

/// Why no line can be fitted.
#[derive(Debug, Clone, Copy, PartialEq, thiserror::Error)]
#[non_exhaustive]
pub enum FitError {
    /// A line with scatter needs three.
    #[error("a fit of cohesion and friction needs at least 3 stages, got {stages}")]
    TooFew {
        /// Number of stages.
        stages: usize,
    },
    /// No lever arm.
    #[error("all stages have the same normal stress, {normal_pa} Pa")]
    SameNormalStress {
        /// That stress, Pa.
        normal_pa: f64,
    },
    /// Strength that does not grow with normal stress.
    #[error("shear strength does not grow with normal stress: the fitted slope is {slope}")]
    NoFriction {
        /// Fitted slope.
        slope: f64,
    },
    /// A stress that is not a number.
    #[error("stresses must be finite, got {value_pa} Pa")]
    NotFinite {
        /// That stress, Pa.
        value_pa: f64,
    },
}

impl Fit {
    /// Fits a line; one that would have negative cohesion is fitted again through the origin.
    ///
    /// ```text
    /// t = S_xy / S_xx     c = mean(tau) - t mean(sigma)     s^2 = sum(e^2) / (n - 2)
    /// se_t = s / sqrt(S_xx)     se_c = s sqrt(1/n + mean(sigma)^2 / S_xx)     corr = -mean(sigma) / sqrt(S_xx/n + mean(sigma)^2)
    /// ```
    ///
    /// # Errors
    /// [`FitError`]: fewer than three stages, one normal stress only, a slope of 0 or less, stresses that are not finite.
    pub fn new(points: &[Point]) -> Result<Self, FitError> {
        if let Some(bad) = points.iter().flat_map(|p| [p.normal_pa, p.shear_pa]).find(|x| !x.is_finite()) {
            return Err(FitError::NotFinite { value_pa: bad });
        }
        if points.len() < 3 {
            return Err(FitError::TooFew { stages: points.len() });
        }
        let free = Self::free(points)?;
        let fit = if free.cohesion_pa < 0.0 { Self::through_origin(points)? } else { free };
        if fit.tan_friction <= 0.0 {
            return Err(FitError::NoFriction { slope: fit.tan_friction });
        }
        Ok(fit)
    }

    /// The plain line, whatever the sign of its coefficients. At least three points.
    pub(super) fn free(points: &[Point]) -> Result<Self, FitError> {
        let n = points.len() as f64;
        let center_pa = points.iter().map(|p| p.normal_pa).sum::<f64>() / n;
        let shear_mean = points.iter().map(|p| p.shear_pa).sum::<f64>() / n;
        // Sums about the means: raw sums of squares would lose the digits that the standard errors live on.
        let spread_pa2 = points.iter().map(|p| (p.normal_pa - center_pa).powi(2)).sum::<f64>();
        if spread_pa2 <= (1e-9 * center_pa).powi(2) {
            return Err(FitError::SameNormalStress { normal_pa: center_pa });
        }
        let product = points.iter().map(|p| (p.normal_pa - center_pa) * (p.shear_pa - shear_mean)).sum::<f64>();
        let tan_friction = product / spread_pa2;
        let cohesion_pa = shear_mean - tan_friction * center_pa;
        let freedom = n - 2.0;
        let squares = points.iter().map(|p| (p.shear_pa - shear_mean - tan_friction * (p.normal_pa - center_pa)).powi(2)).sum::<f64>();
        let residual_deviation_pa = (squares / freedom).sqrt();
        Ok(Self {
            points: points.to_vec(),
            cohesion_pa,
            tan_friction,
            residual_deviation_pa,
            cohesion_error_pa: residual_deviation_pa * (1.0 / n + center_pa * center_pa / spread_pa2).sqrt(),
            tan_friction_error: residual_deviation_pa / spread_pa2.sqrt(),
            correlation: -center_pa / (spread_pa2 / n + center_pa * center_pa).sqrt(),
            through_origin: false,
            freedom: freedom as u32,
            center_pa,
            spread_pa2,
        })
    }

    fn through_origin(points: &[Point]) -> Result<Self, FitError> {
        let spread_pa2 = points.iter().map(|p| p.normal_pa.powi(2)).sum::<f64>();
        if spread_pa2 <= 0.0 {
            return Err(FitError::SameNormalStress { normal_pa: 0.0 });
        }
        let tan_friction = points.iter().map(|p| p.normal_pa * p.shear_pa).sum::<f64>() / spread_pa2;
        let freedom = points.len() as f64 - 1.0;
        let squares = points.iter().map(|p| (p.shear_pa - tan_friction * p.normal_pa).powi(2)).sum::<f64>();
        let residual_deviation_pa = (squares / freedom).sqrt();
        Ok(Self {
            points: points.to_vec(),
            cohesion_pa: 0.0,
            tan_friction,
            residual_deviation_pa,
            cohesion_error_pa: 0.0,
            tan_friction_error: residual_deviation_pa / spread_pa2.sqrt(),
            correlation: 0.0,
            through_origin: true,
            freedom: freedom as u32,
            center_pa: 0.0,
            spread_pa2,
        })
    }

    /// Friction angle, rad.
    pub fn friction_angle_rad(&self) -> f64 {
        self.tan_friction.atan()
    }

    /// Two-sided interval of the cohesion with confidence `level`, for example 0.95, Pa.
    ///
    /// # Errors
    /// [`StrengthError::Probability`] unless `0 < level < 1`.
    pub fn cohesion_interval_pa(&self, level: f64) -> Result<Interval, StrengthError> {
        let reach = self.student(0.5 + 0.5 * level)? * self.cohesion_error_pa;
        Ok(Interval { low: self.cohesion_pa - reach, high: self.cohesion_pa + reach })
    }

    /// Two-sided interval of the friction angle: the ends of that of its tangent, rad.
    ///
    /// # Errors
    /// [`StrengthError::Probability`] unless `0 < level < 1`.
    pub fn friction_interval_rad(&self, level: f64) -> Result<Interval, StrengthError> {
        let reach = self.student(0.5 + 0.5 * level)? * self.tan_friction_error;
        Ok(Interval { low: (self.tan_friction - reach).atan(), high: (self.tan_friction + reach).atan() })
    }

    /// Shear strength on the fitted line, Pa.
    pub fn line_pa(&self, normal_pa: f64) -> f64 {
        self.cohesion_pa + normal_pa * self.tan_friction
    }

    /// Value that the mean strength at `normal_pa` exceeds with confidence `level`, one-sided, Pa.
    ///
    /// ```text
    /// c + sigma t - t_level,n-2 s sqrt(1/n + (sigma - mean(sigma))^2 / S_xx)
    /// ```
    ///
    /// # Errors
    /// [`StrengthError::Probability`] unless `0 < level < 1`.
    pub fn lower_mean_pa(&self, normal_pa: f64, level: f64) -> Result<f64, StrengthError> {
        Ok(self.line_pa(normal_pa) - self.student(level)? * self.residual_deviation_pa * self.leverage(normal_pa).sqrt())
    }

    /// Value that one further stage at `normal_pa` exceeds with probability `level`, one-sided, Pa.
    ///
    /// As [`Fit::lower_mean_pa`] with `1 + 1/n` for `1/n`.
    ///
    /// # Errors
    /// [`StrengthError::Probability`] unless `0 < level < 1`.
    pub fn lower_single_pa(&self, normal_pa: f64, level: f64) -> Result<f64, StrengthError> {
        Ok(self.line_pa(normal_pa) - self.student(level)? * self.residual_deviation_pa * (1.0 + self.leverage(normal_pa)).sqrt())
    }

    /// Standard deviations of cohesion (Pa) and slope, and their correlation, of a line drawn for one further stage.
    ///
    /// The scatter of stages is given to the cohesion, so that the variance of `c + sigma t` is that of a single stage at every sigma:
    ///
    /// ```text
    /// sd_c = sqrt(se_c^2 + s^2)     sd_t = se_t     corr' = corr se_c / sd_c
    /// ```
    pub fn predictive(&self) -> (f64, f64, f64) {
        let cohesion = self.cohesion_error_pa.hypot(self.residual_deviation_pa);
        let correlation = if 0.0 < cohesion { self.correlation * self.cohesion_error_pa / cohesion } else { 0.0 };
        (cohesion, self.tan_friction_error, correlation)
    }

    /// Indices of the stages whose distance from the line through the others is beyond chance.
    ///
    /// ```text
    /// r_i = e_i / (s_without_i sqrt(1 - h_i))      beyond t_(1 - 0.05/(2n)), one degree of freedom fewer
    /// ```
    ///
    /// Source: externally studentized residual with Bonferroni's bound, R. D. Cook, S. Weisberg, "Residuals and Influence in
    /// Regression" (1982), 2.2.2 (from memory).
    pub fn outliers(&self) -> Vec<usize> {
        if self.freedom < 2 {
            return Vec::new();
        }
        let (n, freedom) = (self.points.len() as f64, f64::from(self.freedom));
        let Ok(limit) = student_t_quantile(1.0 - OUTLIER_LEVEL / (2.0 * n), freedom - 1.0) else { return Vec::new() };
        let is_outlier = |p: &Point| {
            let error = p.shear_pa - self.line_pa(p.normal_pa);
            let free = (1.0 - self.leverage(p.normal_pa)).max(1e-12);
            let rest = (freedom * self.residual_deviation_pa.powi(2) - error * error / free).max(0.0);
            // Residuals at rounding level of an exact line are no finding.
            let beyond_rounding = 1e-9 * p.shear_pa.abs() < error.abs();
            beyond_rounding && limit * (rest / (freedom - 1.0) * free).sqrt() < error.abs()
        };
        (0..self.points.len()).filter(|i| is_outlier(&self.points[*i])).collect()
    }

    /// `1/n + (sigma - mean)^2 / S_xx`; without the first term for a line through the origin.
    fn leverage(&self, normal_pa: f64) -> f64 {
        let at_center = if self.through_origin { 0.0 } else { 1.0 / self.points.len() as f64 };
        at_center + (normal_pa - self.center_pa).powi(2) / self.spread_pa2
    }

    fn student(&self, p: f64) -> Result<f64, StrengthError> {
        student_t_quantile(p, f64::from(self.freedom))
    }
}
