//! What a rock can carry: from a [`Rock`](crate::model::Rock) as the model states it to design values and the laws that use them.
//!
//! ```text
//! Rock ──► design()                    fractile or mean, mass and wet factor, tension cut, partial factors ──► RockCapacity
//! one sample ──► StrengthValues::capacity(reductions())   the same path for plain numbers                  ──► RockCapacity
//! RockCapacity + stress ──► mohr_coulomb::local_shear, joint_set::slip
//! ```
//!
//! Stresses are tension positive unless a parameter says "compression".
pub mod barton_bandis;
mod design;
mod factors;
pub mod hoek_brown;
pub mod joint_set;
pub mod mohr_coulomb;
mod quantile;
mod sample_size;
pub mod unsaturated;

pub use design::{Inputs, Resolved, design, reductions};
pub use factors::{
    EN_1997_M2_COHESION, EN_1997_M2_TAN_FRICTION, OWN_CHOICE_TENSION_WITH_M2, Reductions, StrengthFactors, strength_factors,
};
pub use quantile::{lognormal_parameters, mean, normal_cdf, normal_quantile, quantile, standard_deviation};
pub use sample_size::{End, characteristic, fractile_factor, student_t_quantile};

/// What a rock resists with, after all factors.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum RockCapacity {
    /// Tension cut-off and Mohr-Coulomb strength.
    Resists(Strength),
    /// A layer that only loads: no capacity in tension or shear.
    NoStrength,
}

impl RockCapacity {
    /// Tensile strength, Pa; 0 for a rock without strength.
    pub fn tensile_strength_pa(&self) -> f64 {
        match self {
            Self::Resists(strength) => strength.tensile_strength_pa,
            Self::NoStrength => 0.0,
        }
    }
}

/// Design values of one rock.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Strength {
    /// Tensile strength, never above `cohesion_pa / tan_friction`, Pa.
    pub tensile_strength_pa: f64,
    /// Effective cohesion c', Pa.
    pub cohesion_pa: f64,
    /// Tangent of the effective friction angle, tan phi'.
    pub tan_friction: f64,
    /// Tensile strength before it was cut to the apex c'/tan phi', where it was, Pa.
    pub cut_from_pa: Option<f64>,
}

impl Strength {
    /// Shear strength `c' + sigma' tan phi'` on a plane under the effective compression `normal_compression_pa`, never negative, Pa.
    pub fn shear_strength_pa(&self, normal_compression_pa: f64) -> f64 {
        (self.cohesion_pa + normal_compression_pa * self.tan_friction).max(0.0)
    }
}

/// One set of numbers for a rock's strength, before any factor.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum StrengthValues {
    /// Typed or measured strengths.
    MohrCoulomb {
        /// Tensile strength, Pa.
        tensile_strength_pa: f64,
        /// Effective cohesion, Pa.
        cohesion_pa: f64,
        /// Effective friction angle, rad.
        friction_angle_rad: f64,
    },
    /// Rock-mass rating.
    HoekBrown(hoek_brown::Rating),
    /// None.
    NoStrength,
}

impl StrengthValues {
    /// The rock's capacity with these numbers.
    ///
    /// Order: wet and mass factor, cut of the tensile strength to `c'/tan phi'`, partial factors, the same cut again.
    /// With a rating the wet factor multiplies the uniaxial strength; mass factors do not apply, the rating is of the mass.
    ///
    /// # Errors
    /// [`StrengthError`] where a number is not finite, negative, or a rating or friction angle is out of its range.
    pub fn capacity(self, reductions: &Reductions) -> Result<RockCapacity, StrengthError> {
        let (tension, cohesion, tan_friction) = match self {
            Self::NoStrength => return Ok(RockCapacity::NoStrength),
            Self::MohrCoulomb { tensile_strength_pa, cohesion_pa, friction_angle_rad } => {
                if !(0.0 <= friction_angle_rad && friction_angle_rad < std::f64::consts::FRAC_PI_2) {
                    return Err(StrengthError::FrictionAngle { angle_rad: friction_angle_rad });
                }
                (
                    tensile_strength_pa * reductions.wet * reductions.mass_tension,
                    cohesion_pa * reductions.wet * reductions.mass_cohesion,
                    friction_angle_rad.tan(),
                )
            }
            Self::HoekBrown(rating) => {
                let wet = hoek_brown::Rating { uniaxial_strength_pa: rating.uniaxial_strength_pa * reductions.wet, ..rating };
                let mass = wet.rock_mass()?;
                let equivalent = mass.equivalent_mohr_coulomb(mass.largest_confining_stress_pa(reductions.overburden_pa)?)?;
                (mass.tensile_strength_pa, equivalent.cohesion_pa, equivalent.friction_angle_rad.tan())
            }
        };
        for (what, value) in [("tensile strength", tension), ("cohesion", cohesion)] {
            if !(0.0 <= value && value.is_finite()) {
                return Err(StrengthError::Negative { what, value_pa: value });
            }
        }
        let factors = &reductions.factors;
        let (cut_tension, cut_first) = cut_to_apex(tension, cohesion, tan_friction);
        let (cohesion, tan_friction) = (cohesion / factors.cohesion, tan_friction / factors.friction);
        let (tensile_strength_pa, cut_last) = cut_to_apex(cut_tension / factors.tension, cohesion, tan_friction);
        let cut_from_pa = (cut_first || cut_last).then_some(tension / factors.tension);
        Ok(RockCapacity::Resists(Strength { tensile_strength_pa, cohesion_pa: cohesion, tan_friction, cut_from_pa }))
    }
}

/// Tensile strength cut to the apex `c'/tan phi'` of the shear envelope, and whether it had to be.
fn cut_to_apex(tension_pa: f64, cohesion_pa: f64, tan_friction: f64) -> (f64, bool) {
    if cohesion_pa < tension_pa * tan_friction { (cohesion_pa / tan_friction, true) } else { (tension_pa, false) }
}

/// Why no strength can be given.
#[derive(Debug, Clone, Copy, PartialEq, thiserror::Error)]
#[non_exhaustive]
pub enum StrengthError {
    /// The distribution cannot exist.
    #[error("{what} must be {limit}, got {value}")]
    Distribution {
        /// Which parameter.
        what: &'static str,
        /// What it must be.
        limit: &'static str,
        /// What it is.
        value: f64,
    },
    /// A probability outside the open interval 0 to 1.
    #[error("a fractile needs a probability inside (0, 1), got {value}")]
    Probability {
        /// What it is.
        value: f64,
    },
    /// Under three tests there is no fractile by number of tests.
    #[error("a 5 % fractile by number of tests needs at least 3 tests, got {tests}")]
    TooFewTests {
        /// Number of tests.
        tests: u32,
    },
    /// Negative or not finite.
    #[error("{what} must be a finite number, 0 or more, got {value_pa} Pa")]
    Negative {
        /// Which strength.
        what: &'static str,
        /// What it is, Pa.
        value_pa: f64,
    },
    /// Friction angle outside 0 to 90 degrees.
    #[error("the friction angle must be at least 0 and under 90 degrees, got {} degrees", angle_rad.to_degrees())]
    FrictionAngle {
        /// What it is, rad.
        angle_rad: f64,
    },
    /// A rating outside the range of the relations.
    #[error("{what} must be {limit}, got {value}")]
    Rating {
        /// Which number of the rating.
        what: &'static str,
        /// Its range in words.
        limit: &'static str,
        /// What it is.
        value: f64,
    },
    /// The laboratory file has not been read by the boundary.
    #[error("the laboratory file of this rock was not read")]
    LabNotRead,
}

#[cfg(test)]
mod tests;
