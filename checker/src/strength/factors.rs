//! Factors between a stated strength and its design value.
use crate::model::PartialFactors;

/// Partial factor on effective cohesion in set M2. EN 1997-1:2004, table A.4.
pub const EN_1997_M2_COHESION: f64 = 1.25;
/// Partial factor on the tangent of the effective friction angle in set M2. EN 1997-1:2004, table A.4.
pub const EN_1997_M2_TAN_FRICTION: f64 = 1.25;
/// Partial factor on tensile strength beside set M2. No code gives one for rock in tension: this program's own choice.
pub const OWN_CHOICE_TENSION_WITH_M2: f64 = 1.25;

/// Divisors of the three strengths.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct StrengthFactors {
    /// Of tensile strength.
    pub tension: f64,
    /// Of effective cohesion.
    pub cohesion: f64,
    /// Of the tangent of the effective friction angle.
    pub friction: f64,
}

impl StrengthFactors {
    /// Factors of 1.
    pub const NONE: Self = Self { tension: 1.0, cohesion: 1.0, friction: 1.0 };
}

/// Everything that stands between a stated strength and its capacity.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Reductions {
    /// From intact specimen to rock mass, on tensile strength.
    pub mass_tension: f64,
    /// From intact specimen to rock mass, on cohesion.
    pub mass_cohesion: f64,
    /// For wetting, on tensile strength, cohesion and (with a rating) uniaxial strength; friction keeps its angle.
    pub wet: f64,
    /// Partial factors.
    pub factors: StrengthFactors,
    /// Unit weight times cliff height, the stress range of a rating's straight-line fit, Pa.
    pub overburden_pa: f64,
}

/// The divisors that apply to cautious or to best-estimate values.
///
/// Set M2 acts on cautious values only; own factors act on both, since the person who states them means the figure they read.
pub fn strength_factors(stated: &PartialFactors, cautious: bool) -> StrengthFactors {
    match (stated.en_1997_m2, cautious) {
        (true, true) => {
            StrengthFactors { tension: OWN_CHOICE_TENSION_WITH_M2, cohesion: EN_1997_M2_COHESION, friction: EN_1997_M2_TAN_FRICTION }
        }
        (true, false) => StrengthFactors::NONE,
        (false, _) => StrengthFactors { tension: stated.tension, cohesion: stated.cohesion, friction: stated.friction },
    }
}
