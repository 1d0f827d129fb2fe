//! Shear strength on a plane with water in the pores, all of it or part.
use super::Strength;

/// Shear strength with the water pressure acting on the share `water_area_ratio` of the plane, Pa.
///
/// ```text
/// s = c' + (sigma - alpha u_w) tan phi'
/// ```
///
/// Total normal stress and water pressure are compression positive; suction is a negative `water_pressure_pa`. With alpha = 1 it
/// is Terzaghi's effective stress, with alpha = degree of saturation and suction it is Bishop's with chi = S.
pub fn shear_strength_pa(strength: &Strength, total_compression_pa: f64, water_pressure_pa: f64, water_area_ratio: f64) -> f64 {
    strength.shear_strength_pa(total_compression_pa - water_area_ratio * water_pressure_pa)
}

/// Water area ratio `Theta^kappa` from normalized water content and a fitted exponent.
///
/// Source: S. K. Vanapalli et al., "Model for the prediction of shear strength with respect to soil suction", Can. Geotech. J. 33 (1996) (from memory).
pub fn water_area_ratio(normalized_water_content: f64, exponent: f64) -> f64 {
    normalized_water_content.powf(exponent)
}
