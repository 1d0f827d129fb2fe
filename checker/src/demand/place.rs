//! Averaged stress at one place: tension and local shear.
use super::CheckKind;
use crate::analysis::load_cases::superpose;
use crate::strength::Strength;
use crate::strength::mohr_coulomb::{LocalShear, local_shear};
use fem_core::tensor::major;

/// Mean effective stress tensors over one averaging segment or disc, `[xx, zz, xz]` in Pa for every unit load case.
#[derive(Debug, Clone, PartialEq)]
pub struct PlaceValue {
    /// Tension check that this place belongs to; `None` for discs inside the rock, which only serve local shear.
    pub tension: Option<CheckKind>,
    /// Start of the segment or center of the disc, m.
    pub at_m: [f64; 2],
    /// Layer.
    pub layer: usize,
    /// Length averaged over, m.
    pub length_m: f64,
    /// Whether the segment was cut below half the averaging length.
    pub short: bool,
    /// From recovered stress on the last mesh.
    pub fine: Vec<[f64; 3]>,
    /// From unrecovered stress on the last mesh.
    pub raw: Vec<[f64; 3]>,
    /// From recovered stress on the last mesh but one.
    pub coarse: Vec<[f64; 3]>,
    /// At the same place at depth 0; empty at depth 0 itself.
    pub background: Vec<[f64; 3]>,
}

/// Demand and capacity at one place.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Pair {
    /// Demand, Pa, signed.
    pub demand_pa: f64,
    /// Capacity, Pa.
    pub capacity_pa: f64,
    /// Whether the stress lies beyond the apex of the shear law.
    pub beyond_apex: bool,
}

impl Pair {
    /// Demand / capacity: 0 for a demand that does not act, none without a positive capacity or beyond the apex.
    pub fn utilization(&self) -> Option<f64> {
        if self.beyond_apex || !(0.0 < self.capacity_pa) {
            return if self.demand_pa <= 0.0 && !self.beyond_apex { Some(0.0) } else { None };
        }
        Some((self.demand_pa / self.capacity_pa).max(0.0))
    }
}

/// Tension at a place: largest principal value of the averaged tensor against the tensile strength.
pub(super) fn tension(coefficients: &[f64], tensors: &[[f64; 3]], strength: &Strength) -> Pair {
    Pair { demand_pa: major(superpose(coefficients, tensors)), capacity_pa: strength.tensile_strength_pa, beyond_apex: false }
}

/// Local shear at a place: the averaged tensor by [`local_shear`].
pub(super) fn shear(coefficients: &[f64], tensors: &[[f64; 3]], strength: &Strength) -> Pair {
    let stress = superpose(coefficients, tensors);
    match local_shear(stress, strength) {
        LocalShear::Touches(touch) => Pair { demand_pa: touch.demand_pa, capacity_pa: touch.capacity_pa, beyond_apex: false },
        LocalShear::BeyondApex => {
            let radius = (0.5 * (stress[0] - stress[1])).hypot(stress[2]);
            Pair { demand_pa: radius, capacity_pa: 0.0, beyond_apex: true }
        }
    }
}
