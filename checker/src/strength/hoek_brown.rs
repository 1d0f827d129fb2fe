//! Rock-mass strength from a rating: the Hoek-Brown relations of 2002 and the Hoek-Diederichs modulus of 2006.
use super::StrengthError;

/// Rating of one rock mass, as plain numbers.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Rating {
    /// Geological strength index, 5 to 100.
    pub gsi: f64,
    /// Material constant of the intact rock, above 0.
    pub mi: f64,
    /// Disturbance factor D, 0 to 1.
    pub disturbance: f64,
    /// Uniaxial compressive strength of the intact rock, Pa.
    pub uniaxial_strength_pa: f64,
}

/// Parameters of the curved envelope `s1 = s3 + sci (mb s3/sci + s)^a` (compression positive) and what follows from them.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct RockMass {
    /// `mb = mi exp((GSI - 100)/(28 - 14 D))`.
    pub mb: f64,
    /// `s = exp((GSI - 100)/(9 - 3 D))`.
    pub s: f64,
    /// `a = 1/2 + (exp(-GSI/15) - exp(-20/3))/6`.
    pub a: f64,
    /// Uniaxial compressive strength of the intact rock `sci`, Pa.
    pub intact_uniaxial_strength_pa: f64,
    /// Tensile strength `s sci / mb` of the mass, Pa.
    pub tensile_strength_pa: f64,
    /// Uniaxial compressive strength `sci s^a` of the mass, Pa.
    pub uniaxial_strength_pa: f64,
    /// Global strength `scm` of the mass, Pa.
    pub global_strength_pa: f64,
}

/// Straight line through the curved envelope over a range of confining stress.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Equivalent {
    /// Effective cohesion, Pa.
    pub cohesion_pa: f64,
    /// Effective friction angle, rad.
    pub friction_angle_rad: f64,
}

impl Rating {
    /// The envelope of the mass.
    ///
    /// ```text
    /// scm = sci (mb + 4 s - a (mb - 8 s)) (mb/4 + s)^(a-1) / (2 (1 + a)(2 + a))
    /// ```
    ///
    /// # Errors
    /// [`StrengthError::Rating`] where a number is out of its range.
    ///
    /// Source: E. Hoek, C. Carranza-Torres, B. Corkum, "Hoek-Brown failure criterion, 2002 edition", NARMS-TAC 2002, eqs. 2-17 (from memory).
    pub fn rock_mass(&self) -> Result<RockMass, StrengthError> {
        self.check()?;
        let Self { gsi, mi, disturbance: d, uniaxial_strength_pa: sci } = *self;
        let mb = mi * ((gsi - 100.0) / (28.0 - 14.0 * d)).exp();
        let s = ((gsi - 100.0) / (9.0 - 3.0 * d)).exp();
        let a = 0.5 + ((-gsi / 15.0).exp() - (-20.0_f64 / 3.0).exp()) / 6.0;
        let global = sci * (mb + 4.0 * s - a * (mb - 8.0 * s)) * (0.25 * mb + s).powf(a - 1.0) / (2.0 * (1.0 + a) * (2.0 + a));
        Ok(RockMass {
            mb,
            s,
            a,
            intact_uniaxial_strength_pa: sci,
            tensile_strength_pa: s * sci / mb,
            uniaxial_strength_pa: sci * s.powf(a),
            global_strength_pa: global,
        })
    }

    fn check(&self) -> Result<(), StrengthError> {
        let wrong = |what, limit, value| Err(StrengthError::Rating { what, limit, value });
        if !(5.0 <= self.gsi && self.gsi <= 100.0) {
            return wrong("the geological strength index", "5 to 100", self.gsi);
        }
        if !(0.0 < self.mi && self.mi <= 50.0) {
            return wrong("mi", "above 0 and at most 50", self.mi);
        }
        if !(0.0 <= self.disturbance && self.disturbance <= 1.0) {
            return wrong("the disturbance factor", "0 to 1", self.disturbance);
        }
        if !(0.0 < self.uniaxial_strength_pa && self.uniaxial_strength_pa.is_finite()) {
            return wrong("the uniaxial strength in Pa", "a finite number above 0", self.uniaxial_strength_pa);
        }
        Ok(())
    }
}

impl RockMass {
    /// Largest confining stress `s3max` that matters in a slope.
    ///
    /// ```text
    /// s3max = 0.72 scm (scm / (gamma H))^-0.91
    /// ```
    ///
    /// `overburden_pa` is unit weight times cliff height.
    ///
    /// # Errors
    /// [`StrengthError::Rating`] unless `overburden_pa` is a finite number above 0.
    ///
    /// Source: as [`Rating::rock_mass`], eq. 19 (from memory).
    pub fn largest_confining_stress_pa(&self, overburden_pa: f64) -> Result<f64, StrengthError> {
        if !(0.0 < overburden_pa && overburden_pa.is_finite()) {
            let limit = "a finite number above 0";
            return Err(StrengthError::Rating { what: "unit weight times cliff height in Pa", limit, value: overburden_pa });
        }
        let scm = self.global_strength_pa;
        Ok(0.72 * scm * (scm / overburden_pa).powf(-0.91))
    }

    /// Cohesion and friction angle that balance the curved envelope between the tensile strength and `s3max_pa`.
    ///
    /// ```text
    /// x = s3max / sci     g = (s + mb x)^(a-1)     q = (1 + a)(2 + a)
    /// sin phi' = 6 a mb g / (2 q + 6 a mb g)
    /// c' = sci ((1 + 2a) s + (1 - a) mb x) g / (q sqrt(1 + 6 a mb g / q))
    /// ```
    ///
    /// # Errors
    /// [`StrengthError::Rating`] unless `s3max_pa` is a finite number, 0 or more.
    ///
    /// Source: as [`Rating::rock_mass`], eqs. 12-13 (from memory).
    pub fn equivalent_mohr_coulomb(&self, s3max_pa: f64) -> Result<Equivalent, StrengthError> {
        if !(0.0 <= s3max_pa && s3max_pa.is_finite()) {
            return Err(StrengthError::Rating { what: "the confining stress in Pa", limit: "a finite number, 0 or more", value: s3max_pa });
        }
        let Self { mb, s, a, intact_uniaxial_strength_pa: sci, .. } = *self;
        let x = s3max_pa / sci;
        let g = (s + mb * x).powf(a - 1.0);
        let q = (1.0 + a) * (2.0 + a);
        let slope = 6.0 * a * mb * g;
        let cohesion_pa = sci * ((1.0 + 2.0 * a) * s + (1.0 - a) * mb * x) * g / (q * (1.0 + slope / q).sqrt());
        Ok(Equivalent { cohesion_pa, friction_angle_rad: (slope / (2.0 * q + slope)).asin() })
    }
}

/// Young's modulus of the mass as a share of the intact one.
///
/// ```text
/// Erm / Ei = 0.02 + (1 - D/2) / (1 + exp((60 + 15 D - GSI)/11))
/// ```
///
/// Source: E. Hoek, M. S. Diederichs, "Empirical estimation of rock mass modulus", IJRMMS 43 (2006), eq. 4 (from memory).
pub fn modulus_ratio(gsi: f64, disturbance: f64) -> f64 {
    0.02 + (1.0 - 0.5 * disturbance) / (1.0 + ((60.0 + 15.0 * disturbance - gsi) / 11.0).exp())
}

/// Young's modulus of the mass where no intact modulus is known, Pa.
///
/// ```text
/// Erm = 1e5 MPa (1 - D/2) / (1 + exp((75 + 25 D - GSI)/11))
/// ```
///
/// Source: as [`modulus_ratio`], eq. 2 (from memory).
pub fn simplified_modulus_pa(gsi: f64, disturbance: f64) -> f64 {
    1e11 * (1.0 - 0.5 * disturbance) / (1.0 + ((75.0 + 25.0 * disturbance - gsi) / 11.0).exp())
}

/// Intact compressive over tensile strength, `0.81 mi + 7`.
///
/// Source: E. Hoek, E. T. Brown, "The Hoek-Brown failure criterion and GSI, 2018 edition", JRMGE 11 (2019) (from memory).
pub fn intact_strength_ratio(mi: f64) -> f64 {
    0.81 * mi + 7.0
}
