//! Averaged stress at one place: tension and local shear.
use super::{CheckKind, RockLimits};
use crate::analysis::load_cases::superpose;

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

/// Largest in-plane principal value of `[xx, zz, xz]`.
///
/// ```text
/// s1 = (xx + zz)/2 + sqrt(((xx - zz)/2)^2 + xz^2)
/// ```
pub fn major(t: [f64; 3]) -> f64 {
    0.5 * (t[0] + t[1]) + (0.5 * (t[0] - t[1])).hypot(t[2])
}

/// Tension at a place: largest principal value of the averaged tensor against the tensile strength.
pub fn tension(coefficients: &[f64], tensors: &[[f64; 3]], limits: &RockLimits) -> Pair {
    Pair { demand_pa: major(superpose(coefficients, tensors)), capacity_pa: limits.tensile_strength_pa, beyond_apex: false }
}

/// Local shear at a place by the factor on strength.
///
/// With `p` the compressive mean, `R` the radius of Mohr's circle of the averaged tensor and `t = tan phi'`:
///
/// ```text
/// F       = sqrt(((c + p t) / R)^2 - t^2)     if c + p t > t R, else beyond the apex
/// phi_m   = atan(t / F)
/// demand  = R cos phi_m,   capacity = c + (p - R sin phi_m) t,   demand / capacity = 1 / F
/// ```
pub fn shear(coefficients: &[f64], tensors: &[[f64; 3]], limits: &RockLimits) -> Pair {
    let s = superpose(coefficients, tensors);
    let (c, t) = (limits.cohesion_pa, limits.tan_friction);
    let p = -0.5 * (s[0] + s[1]);
    let radius = (0.5 * (s[0] - s[1])).hypot(s[2]);
    if radius <= f64::EPSILON * (p.abs() + c) {
        return Pair { demand_pa: 0.0, capacity_pa: c + p * t, beyond_apex: c + p * t <= 0.0 };
    }
    if c + p * t <= t * radius {
        return Pair { demand_pa: radius, capacity_pa: 0.0, beyond_apex: true };
    }
    let factor = (((c + p * t) / radius).powi(2) - t * t).sqrt();
    let phi_m = (t / factor).atan();
    Pair { demand_pa: radius * phi_m.cos(), capacity_pa: c + (p - radius * phi_m.sin()) * t, beyond_apex: false }
}
