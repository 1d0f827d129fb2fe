//! Shear at a point: how far the Mohr circle is from the straight envelope.
use super::Strength;

/// Outcome of the shear check of one stress state.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum LocalShear {
    /// The circle can be made to touch the envelope by dividing c' and tan phi' by `factor`.
    Touches(Touch),
    /// The circle reaches beyond the apex of the envelope: no divisor makes it touch, tension governs here.
    BeyondApex,
}

/// The plane on which the reduced envelope touches the circle.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Touch {
    /// Divisor F of c' and tan phi'; infinite where there is no shear.
    pub factor: f64,
    /// Shear stress on that plane, Pa.
    pub demand_pa: f64,
    /// Shear strength `c' + sigma_f tan phi'` on that plane, Pa.
    pub capacity_pa: f64,
    /// Effective compression on that plane, Pa.
    pub normal_compression_pa: f64,
}

/// Shear check of an effective stress state in the plane.
///
/// ```text
/// p = -(sigma_x + sigma_y) / 2      R = sqrt(((sigma_x - sigma_y)/2)^2 + tau_xy^2)      t = tan phi'
/// F = sqrt(((c' + p t)/R)^2 - t^2)  only if  c' + p t > t R, else beyond the apex
/// tan phi_m = t / F     demand = R cos phi_m     sigma_f = p - R sin phi_m     capacity = c' + sigma_f t
/// ```
///
/// so that demand / capacity = 1 / F exactly. Source: docs/theory.md eq. (6.4), docs/theory.md eq. (6.5).
///
/// | name        | shape | unit | meaning                                                     |
/// |-------------|-------|------|-------------------------------------------------------------|
/// | `stress_pa` | `[3]` | Pa   | effective `[sigma_x, sigma_y, tau_xy]`, tension positive    |
/// | `strength`  |       |      | design values                                               |
///
/// # Panics
/// If a stress or a design value is not finite: the caller knows the element and must have reported it.
pub fn local_shear(stress_pa: [f64; 3], strength: &Strength) -> LocalShear {
    assert!(stress_pa.iter().all(|s| s.is_finite()), "stress must be finite, got {stress_pa:?}");
    let [sx, sy, txy] = stress_pa;
    let p = -0.5 * (sx + sy);
    let radius = (0.5 * (sx - sy)).hypot(txy);
    let t = strength.tan_friction;
    let at_mean = strength.cohesion_pa + p * t;
    assert!(at_mean.is_finite(), "strength must be finite, got {strength:?}");
    if at_mean <= t * radius {
        return LocalShear::BeyondApex;
    }
    if radius <= 0.0 {
        return LocalShear::Touches(Touch { factor: f64::INFINITY, demand_pa: 0.0, capacity_pa: at_mean, normal_compression_pa: p });
    }
    // Factored, so that nothing is lost where the circle nearly reaches the apex.
    let ratio = at_mean / radius;
    let factor = ((ratio - t) * (ratio + t)).sqrt();
    // sin and cos of phi_m from tan phi_m = t / F, without dividing by a small F.
    let (sin_m, cos_m) = (t / factor.hypot(t), factor / factor.hypot(t));
    let normal_compression_pa = p - radius * sin_m;
    LocalShear::Touches(Touch {
        factor,
        demand_pa: radius * cos_m,
        capacity_pa: strength.cohesion_pa + normal_compression_pa * t,
        normal_compression_pa,
    })
}
