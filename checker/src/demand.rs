//! Demands against capacities: from unit-case tensors at places and lines to one result a check.
//!
//! A demand is never a raw peak: it is the average of the effective stress tensor over a stated length or disc, or a
//! section quantity from equilibrium. Tensors are stored per unit load case, so that any weights and in-situ stresses are
//! an exact superposition.
mod evaluate;
mod joint;
mod line;
mod place;
mod states;

pub use evaluate::{Evaluation, Found, RockEnds, evaluate, place_utilization, rock_ends};
pub use line::{LineValue, LineWater, Piece, SectionForces};
pub use place::{Pair, PlaceValue};
pub use states::{InputCase, K0Case, k0_cases};

/// A check, by its published id.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord)]
pub enum CheckKind {
    /// Tension under the ground behind the brow.
    CliffTopTension,
    /// Tension on back, roof, lip and face.
    RoofTension,
    /// Shear at a place.
    LocalShear,
    /// Fibre tension of a rupture line from equilibrium.
    SectionBending,
    /// Mean shear on a rupture line from equilibrium.
    SectionShear,
    /// Length of a joint path that tension opens.
    JointOpening,
    /// Mean shear on a joint path.
    JointSlip,
}

impl CheckKind {
    /// All checks, in the order of the results.
    pub const ALL: [Self; 7] = [
        Self::CliffTopTension,
        Self::RoofTension,
        Self::LocalShear,
        Self::SectionBending,
        Self::SectionShear,
        Self::JointOpening,
        Self::JointSlip,
    ];

    /// Whether the check is taken at a place of the stress field, not on a line.
    pub fn is_local(self) -> bool {
        matches!(self, Self::CliffTopTension | Self::RoofTension | Self::LocalShear)
    }

    /// Whether the check is taken on the paths of joint sets.
    pub fn is_of_joints(self) -> bool {
        matches!(self, Self::JointOpening | Self::JointSlip)
    }

    /// Published id.
    pub fn id(self) -> &'static str {
        match self {
            Self::CliffTopTension => "cliff-top tension",
            Self::RoofTension => "roof tension",
            Self::LocalShear => "local shear",
            Self::SectionBending => "section bending",
            Self::SectionShear => "section shear",
            Self::JointOpening => "joint opening",
            Self::JointSlip => "joint slip",
        }
    }
}

#[cfg(test)]
mod tests;
