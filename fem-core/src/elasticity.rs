//! Isotropic linear elasticity in plane strain.

/// Why a pair of elastic constants is refused.
#[derive(Debug, Clone, Copy, PartialEq, thiserror::Error)]
#[non_exhaustive]
pub enum ElasticError {
    /// Young's modulus is not a positive finite number.
    #[error("Young's modulus must be positive and finite, got {value_pa} Pa")]
    YoungsModulus {
        /// Value given, Pa.
        value_pa: f64,
    },
    /// Poisson's ratio is outside the open interval (−1, 0.5), where plane strain is singular.
    #[error("Poisson's ratio must be inside (-1, 0.5), got {value}")]
    PoissonsRatio {
        /// Value given.
        value: f64,
    },
}

/// Isotropic elastic constants, checked.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Elastic {
    youngs_modulus_pa: f64,
    poissons_ratio: f64,
}

/// The three different entries of the plane-strain matrix in Pa: `D = [[a, b, 0], [b, a, 0], [0, 0, g]]`.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Moduli {
    /// `a = E(1−ν)/((1+ν)(1−2ν))`, the one-dimensional compression modulus, Pa.
    pub a_pa: f64,
    /// `b = Eν/((1+ν)(1−2ν))`, Lamé's first constant, Pa.
    pub b_pa: f64,
    /// `g = E/(2(1+ν))`, the shear modulus, Pa.
    pub g_pa: f64,
}

impl Elastic {
    /// Checked constants.
    ///
    /// # Errors
    /// [`ElasticError`] unless `0 < E < ∞` and `−1 < ν < 0.5`; NaN is refused.
    pub fn new(youngs_modulus_pa: f64, poissons_ratio: f64) -> Result<Self, ElasticError> {
        if !(0.0 < youngs_modulus_pa && youngs_modulus_pa < f64::INFINITY) {
            return Err(ElasticError::YoungsModulus { value_pa: youngs_modulus_pa });
        }
        if !(-1.0 < poissons_ratio && poissons_ratio < 0.5) {
            return Err(ElasticError::PoissonsRatio { value: poissons_ratio });
        }
        Ok(Self { youngs_modulus_pa, poissons_ratio })
    }

    /// Young's modulus in Pa.
    pub fn youngs_modulus_pa(&self) -> f64 {
        self.youngs_modulus_pa
    }

    /// Poisson's ratio.
    pub fn poissons_ratio(&self) -> f64 {
        self.poissons_ratio
    }

    /// Modulus `E' = E/(1 − ν²)` of a plate strip in plane strain, Pa.
    pub fn plate_modulus_pa(&self) -> f64 {
        self.youngs_modulus_pa / (1.0 - self.poissons_ratio * self.poissons_ratio)
    }

    /// The three different entries of [`Elastic::plane_strain_matrix_pa`]. Source: docs/theory.md eq. (1.3).
    #[expect(non_snake_case, reason = "E is the formula's symbol")]
    pub fn moduli(&self) -> Moduli {
        let (E, nu) = (self.youngs_modulus_pa, self.poissons_ratio);
        let c = E / ((1.0 + nu) * (1.0 - 2.0 * nu));
        Moduli { a_pa: c * (1.0 - nu), b_pa: c * nu, g_pa: c * 0.5 * (1.0 - 2.0 * nu) }
    }

    /// Plane-strain elasticity matrix `D` of `σ = D ε`.
    ///
    /// ```text
    ///            E        | 1−ν   ν      0     |
    /// D = ------------- * |  ν   1−ν     0     |
    ///     (1+ν)(1−2ν)     |  0    0   (1−2ν)/2 |
    /// ```
    ///
    /// | name     | shape    | unit | meaning                                      |
    /// |----------|----------|------|----------------------------------------------|
    /// | returned | `[3][3]` | Pa   | acts on `[ε_x, ε_y, γ_xy]`, tension positive |
    ///
    /// `γ_xy = 2 ε_xy` is the engineering shear strain. Source: docs/theory.md eq. (1.3).
    pub fn plane_strain_matrix_pa(&self) -> [[f64; 3]; 3] {
        let Moduli { a_pa, b_pa, g_pa } = self.moduli();
        [[a_pa, b_pa, 0.0], [b_pa, a_pa, 0.0], [0.0, 0.0, g_pa]]
    }

    /// Stress `[xx, yy, xy]` in Pa of the strain `[ε_x, ε_y, γ_xy]`. Source: docs/theory.md eq. (1.3).
    pub fn stress_pa(&self, strain: [f64; 3]) -> [f64; 3] {
        self.moduli().stress_pa(strain)
    }

    /// Strain `[ε_x, ε_y, γ_xy]` of the stress `[xx, yy, xy]` in Pa, the inverse of [`Elastic::stress_pa`].
    pub fn strain(&self, stress_pa: [f64; 3]) -> [f64; 3] {
        let nu = self.poissons_ratio;
        let c = (1.0 + nu) / self.youngs_modulus_pa;
        let [xx, yy, xy] = stress_pa;
        [c * ((1.0 - nu) * xx - nu * yy), c * ((1.0 - nu) * yy - nu * xx), 2.0 * c * xy]
    }

    /// Change of the stress out of the plane, `Δσ_zz = ν (Δσ_xx + Δσ_yy)`, Pa. Source: docs/theory.md eq. (1.4).
    pub fn out_of_plane_stress_pa(&self, stress_pa: [f64; 3]) -> f64 {
        self.poissons_ratio * (stress_pa[0] + stress_pa[1])
    }

    /// Complementary energy density `½ σ : D⁻¹ σ` in J/m³.
    pub fn energy_density_j_per_m3(&self, stress_pa: [f64; 3]) -> f64 {
        let e = self.strain(stress_pa);
        0.5 * (stress_pa[0] * e[0] + stress_pa[1] * e[1] + stress_pa[2] * e[2])
    }
}

impl Moduli {
    /// `σ = D ε` for `[ε_x, ε_y, γ_xy]`, Pa.
    pub fn stress_pa(&self, strain: [f64; 3]) -> [f64; 3] {
        let [ex, ey, gxy] = strain;
        [self.a_pa * ex + self.b_pa * ey, self.b_pa * ex + self.a_pa * ey, self.g_pa * gxy]
    }
}

#[cfg(test)]
mod tests;
