//! Demands of every place at every depth as exact sums of unit load cases, and the strengths they meet.
//!
//! Linear elasticity makes the mean stress of a place the sum over load cases of `coefficient x unit stress`; coefficients are
//! constants, inputs, or products of two inputs (unit weight, k0 x unit weight, …). No surrogate is fitted. Theory: eq. (7.6).
mod evaluate;

pub use evaluate::{Sample, margin_of};
pub(super) use evaluate::{circle, place_margin};

use crate::strength::Reductions;

/// Coefficient of one load case.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Coefficient {
    /// A constant load: water, sea, surcharge.
    One,
    /// An input, for example a unit weight.
    Input(usize),
    /// A product of two inputs, for example k0 x unit weight.
    Product(usize, usize),
}

/// A strength as an input times a fixed factor (mass factor, wet factor).
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Factored {
    /// Index of the input.
    pub input: usize,
    /// Factor.
    pub factor: f64,
}

/// Strengths of one rock or one joint set; numbers are indices of inputs. Partial factors have no place in a probability.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum StrengthInputs {
    /// Typed or measured strengths.
    Typed {
        /// Tensile strength, Pa.
        tensile_pa: Factored,
        /// Effective cohesion, Pa.
        cohesion_pa: Factored,
        /// Effective friction angle, rad.
        friction_angle_rad: usize,
    },
    /// Rock-mass rating.
    Rating {
        /// Geological strength index.
        gsi: usize,
        /// Material constant.
        mi: usize,
        /// Uniaxial strength of the intact rock, Pa.
        uniaxial_strength_pa: usize,
        /// Disturbance factor.
        disturbance: f64,
        /// Wet factor and stress range.
        reductions: Reductions,
    },
}

/// How a demand meets its strength. Indices count in [`DemandModel::strengths`].
#[derive(Debug, Clone, PartialEq, Eq)]
pub enum Law {
    /// Largest in-plane principal stress against tensile strength; places hold `[xx, yy, xy]`.
    Tension {
        /// Strength.
        strength: usize,
    },
    /// Mohr circle of the mean tensor against cohesion and friction; places hold `[xx, yy, xy]`.
    Shear {
        /// Strength.
        strength: usize,
    },
    /// A fibre stress against tensile strength; places hold one number.
    Fibre {
        /// Strength.
        strength: usize,
    },
    /// Mean shear over a line against the mean of cohesion and friction of what it crosses.
    /// Places hold `[shear, share-weighted normal stress of each strength (compression positive)]`.
    Sliding {
        /// Strengths on the line.
        strengths: Vec<usize>,
    },
}

impl Law {
    /// Numbers a place holds for each load case.
    pub fn n_components(&self) -> usize {
        match self {
            Self::Tension { .. } | Self::Shear { .. } => 3,
            Self::Fibre { .. } => 1,
            Self::Sliding { strengths } => 1 + strengths.len(),
        }
    }
}

/// One check in one situation with one strength: places under the same limit are judged together.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Limit {
    /// Id of the check, for example `cliff-top tension`.
    pub check: &'static str,
    /// Index in [`DemandModel::situations`].
    pub situation: usize,
    /// Law and strength.
    pub law: Law,
}

/// A situation of the outlook.
#[derive(Debug, Clone, PartialEq)]
pub struct SituationChance {
    /// Name.
    pub name: String,
    /// Chance a year that it occurs; `None` = it acts all the time.
    pub annual_chance: Option<f64>,
}

/// Places of one limit at one depth.
#[derive(Debug, Clone, Default, PartialEq)]
pub struct Places {
    /// Where, m.
    pub at_m: Vec<[f64; 2]>,
    /// Unit values, shape `[n_places][n_components][n_cases]` (Pa for a coefficient of 1).
    pub unit: Vec<f64>,
    /// For sliding: share of the line in each strength that resists by cohesion, shape `[n_places][n_strengths]`; else empty.
    pub share: Vec<f64>,
}

/// Everything that is needed to judge any sample at the depths of the series.
#[derive(Debug, Clone, PartialEq)]
pub struct DemandModel {
    /// Depths of the series, growing, m.
    pub depths_m: Vec<f64>,
    /// Coefficient of each load case.
    pub coefficients: Vec<Coefficient>,
    /// Strengths of rocks and joint sets.
    pub strengths: Vec<StrengthInputs>,
    /// Situations.
    pub situations: Vec<SituationChance>,
    /// Limits.
    pub limits: Vec<Limit>,
    /// Places, shape `[n_depths][n_limits]`.
    pub places: Vec<Vec<Places>>,
    /// Input that multiplies every capacity (capacity over demand); `None` = 1.
    pub model_factor: Option<usize>,
}

impl DemandModel {
    /// Checks that the pieces fit together; called by everything that samples.
    ///
    /// # Panics
    /// With both lengths when two of them differ, or when depths do not grow: the caller built it wrong.
    pub fn sanity_check(&self) {
        let n_cases = self.coefficients.len();
        assert!(self.depths_m.windows(2).all(|d| d[0] < d[1]), "depths must grow: {:?}", self.depths_m);
        assert_eq!(self.places.len(), self.depths_m.len(), "places by depth");
        for at_depth in &self.places {
            assert_eq!(at_depth.len(), self.limits.len(), "places by limit");
            for (places, limit) in at_depth.iter().zip(&self.limits) {
                let n = places.at_m.len();
                assert_eq!(places.unit.len(), n * limit.law.n_components() * n_cases, "unit values of {}", limit.check);
                let n_shares = if let Law::Sliding { strengths } = &limit.law { n * strengths.len() } else { 0 };
                assert_eq!(places.share.len(), n_shares, "shares of {}", limit.check);
            }
        }
    }

    /// Number of places over all limits and depths.
    pub fn n_places(&self) -> usize {
        self.places.iter().flatten().map(|p| p.at_m.len()).sum()
    }
}

#[cfg(test)]
pub(super) mod tests;
