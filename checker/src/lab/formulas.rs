//! Formulas that turn a test's readings into a strength or a weight.
use std::f64::consts::PI;

/// Standard acceleration of gravity, m/s2. 3rd CGPM (1901).
pub const STANDARD_GRAVITY_M_PER_S2: f64 = 9.80665;

/// Density of fresh water, kg/m3.
const WATER_KG_PER_M3: f64 = 1000.0;

/// Indirect tensile strength of a disc loaded across its diameter, Pa.
///
/// ```text
/// st = 2 P / (pi D t)
/// ```
///
/// Load in N, diameter and thickness in m. Source: ISRM suggested method (1978); ASTM D3967 (from memory).
pub fn disc_tensile_strength_pa(load_n: f64, diameter_m: f64, thickness_m: f64) -> f64 {
    2.0 * load_n / (PI * diameter_m * thickness_m)
}

/// Equivalent core diameter of a block, m.
///
/// ```text
/// De = sqrt(4 W D / pi)
/// ```
///
/// `width_m` across the load, `distance_m` between the points. Source: ISRM suggested method for point load strength (1985) (from memory).
pub fn equivalent_core_diameter_m(width_m: f64, distance_m: f64) -> f64 {
    (4.0 * width_m * distance_m / PI).sqrt()
}

/// Factor that brings a point load index from the equivalent diameter to 50 mm, `(De / 50 mm)^0.45`. Source: ISRM (1985) (from memory).
pub fn point_load_size_factor(equivalent_diameter_m: f64) -> f64 {
    (equivalent_diameter_m / 0.050).powf(0.45)
}

/// Point load index for 50 mm, Pa.
///
/// ```text
/// Is = P / De^2      Is50 = Is (De / 50 mm)^0.45
/// ```
pub fn point_load_index_pa(load_n: f64, equivalent_diameter_m: f64) -> f64 {
    load_n / equivalent_diameter_m.powi(2) * point_load_size_factor(equivalent_diameter_m)
}

/// Uniaxial strength at a diameter over that at 50 mm, `(50 mm / d)^0.18`; tested to about 200 mm.
///
/// Source: E. Hoek, E. T. Brown, "Underground Excavations in Rock" (1980) (from memory).
pub fn uniaxial_size_factor(diameter_m: f64) -> f64 {
    (0.050 / diameter_m).powf(0.18)
}

/// Unit weight with all pores full of fresh water, N/m3.
///
/// ```text
/// gamma_sat = g (rho_dry + n rho_w)
/// ```
pub fn saturated_unit_weight_n_per_m3(dry_kg_per_m3: f64, porosity: f64) -> f64 {
    STANDARD_GRAVITY_M_PER_S2 * (dry_kg_per_m3 + porosity * WATER_KG_PER_M3)
}
