//! Shear strength of a rough joint from its roughness and wall strength.

/// Roughness and wall strength of a joint at one length.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct RoughJoint {
    /// Joint roughness coefficient JRC, 0 to 20.
    pub roughness: f64,
    /// Joint wall compressive strength JCS, Pa.
    pub wall_strength_pa: f64,
    /// Residual friction angle, rad.
    pub residual_angle_rad: f64,
}

/// Largest secant friction angle for which the law is used. N. Barton, V. Choubey, Rock Mechanics 10 (1977): 70 degrees (from memory).
const LARGEST_ANGLE_RAD: f64 = 70.0 * std::f64::consts::PI / 180.0;

impl RoughJoint {
    /// Secant friction angle under an effective compression, rad.
    ///
    /// ```text
    /// phi = phi_r + JRC log10(JCS / sigma_n)   (degrees), at most 70 degrees and at least phi_r
    /// ```
    ///
    /// # Panics
    /// Unless `0 < normal_compression_pa`.
    ///
    /// Source: N. Barton, V. Choubey, "The shear strength of rock joints in theory and practice", Rock Mechanics 10 (1977) (from memory).
    pub fn secant_angle_rad(&self, normal_compression_pa: f64) -> f64 {
        assert!(0.0 < normal_compression_pa, "the law needs compression, got {normal_compression_pa} Pa");
        let added_deg = self.roughness * (self.wall_strength_pa / normal_compression_pa).log10();
        (self.residual_angle_rad + added_deg.to_radians().max(0.0)).min(LARGEST_ANGLE_RAD)
    }

    /// Shear strength under an effective compression, Pa.
    ///
    /// # Panics
    /// As [`RoughJoint::secant_angle_rad`].
    pub fn shear_strength_pa(&self, normal_compression_pa: f64) -> f64 {
        normal_compression_pa * self.secant_angle_rad(normal_compression_pa).tan()
    }

    /// The same joint at another length.
    ///
    /// ```text
    /// JRC_n = JRC_0 (L_n/L_0)^(-0.02 JRC_0)      JCS_n = JCS_0 (L_n/L_0)^(-0.03 JRC_0)
    /// ```
    ///
    /// Source: N. Barton, S. Bandis, "Effects of block size on the shear behavior of jointed rock", 23rd US Symp. Rock Mech. 1982 (from memory).
    #[must_use]
    pub fn at_length(&self, measured_m: f64, wanted_m: f64) -> Self {
        let ratio = wanted_m / measured_m;
        Self {
            roughness: self.roughness * ratio.powf(-0.02 * self.roughness),
            wall_strength_pa: self.wall_strength_pa * ratio.powf(-0.03 * self.roughness),
            residual_angle_rad: self.residual_angle_rad,
        }
    }
}
