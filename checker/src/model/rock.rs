//! Rocks, their strengths and the planes of weakness in them.
use super::Date;

/// A number that may be uncertain.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum Uncertain {
    /// Known.
    Exact(f64),
    /// Lognormal with mean and coefficient of variation (both positive).
    Lognormal {
        /// Mean, in the quantity's SI unit.
        mean: f64,
        /// Standard deviation over mean.
        cov: f64,
    },
    /// Normal.
    Normal {
        /// Mean, in the quantity's SI unit.
        mean: f64,
        /// Standard deviation, same unit.
        standard_deviation: f64,
    },
    /// Normal, cut off at both ends; mean and deviation are those before the cut.
    TruncatedNormal {
        /// Mean before the cut.
        mean: f64,
        /// Standard deviation before the cut.
        standard_deviation: f64,
        /// Lower end.
        min: f64,
        /// Upper end.
        max: f64,
    },
    /// Equally likely between two ends.
    Uniform {
        /// Lower end.
        min: f64,
        /// Upper end.
        max: f64,
    },
}

/// One rock: weight, stiffness, strength.
#[derive(Debug, Clone, PartialEq)]
pub struct Rock {
    /// Name as the layers use it.
    pub name: String,
    /// Moist unit weight above water, N/m3.
    pub unit_weight_n_per_m3: Uncertain,
    /// Saturated unit weight below water, N/m3.
    pub saturated_unit_weight_n_per_m3: Uncertain,
    /// Young's modulus of the rock mass, Pa.
    pub youngs_modulus_pa: f64,
    /// Poisson's ratio.
    pub poissons_ratio: f64,
    /// In-situ horizontal over vertical effective stress; `None` = not measured.
    pub k0: Option<Uncertain>,
    /// What the typed strengths describe.
    pub strength_basis: StrengthBasis,
    /// Factors from intact specimen to rock mass (1 each unless the basis is intact).
    pub mass_factor: MassFactor,
    /// Number of tests behind the strengths; sets the cautious value.
    pub tests: Option<u32>,
    /// Where the strengths come from.
    pub strength: RockStrength,
    /// State in which the strengths were tested.
    pub tested: Option<TestedState>,
    /// Factor on all strengths for wetting (1 unless given).
    pub wet_factor: f64,
    /// Uniaxial compressive strength of the intact rock, Pa.
    pub uniaxial_strength_pa: Option<Uncertain>,
    /// Fracture toughness, Pa m^0.5.
    pub fracture_toughness_pa_sqrt_m: Option<Uncertain>,
}

/// What the typed strengths describe.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum StrengthBasis {
    /// Specimens of intact rock; `mass_factor` is then required.
    Intact,
    /// The rock mass.
    RockMass,
    /// Back-analysed from falls or standing overhangs.
    BackAnalysed,
}

/// Factors from intact specimen to rock mass.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct MassFactor {
    /// On tensile strength.
    pub tension: f64,
    /// On cohesion.
    pub cohesion: f64,
}

/// Where a rock's strengths come from.
#[derive(Debug, Clone, PartialEq)]
pub enum RockStrength {
    /// Typed strengths.
    Typed(Cohesive),
    /// Laboratory file, relative to the model file.
    Lab(String),
    /// Rock-mass rating.
    HoekBrown(HoekBrown),
    /// No strength at all: a layer that only loads.
    None,
}

/// Tension cut-off and Mohr-Coulomb strength.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Cohesive {
    /// Tensile strength, Pa.
    pub tensile_strength_pa: Uncertain,
    /// Effective cohesion, Pa.
    pub cohesion_pa: Uncertain,
    /// Effective friction angle, rad.
    pub friction_angle_rad: Uncertain,
    /// Correlation between cohesion and friction.
    pub cohesion_friction_correlation: f64,
}

/// Rock-mass rating for the Hoek-Brown relations of 2002.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct HoekBrown {
    /// Geological strength index, 5 to 100.
    pub gsi: Uncertain,
    /// Material constant of the intact rock.
    pub mi: Uncertain,
    /// Disturbance factor D, 0 to 1.
    pub disturbance: f64,
    /// Uniaxial compressive strength of the intact rock, Pa.
    pub uniaxial_strength_pa: Uncertain,
}

/// State in which strengths were tested.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum TestedState {
    /// Oven- or air-dried.
    Dry,
    /// At natural moisture.
    Natural,
    /// Saturated.
    Saturated,
}

/// Kind of a set of planes.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum JointKind {
    /// Joint.
    Joint,
    /// Bedding plane.
    Bedding,
    /// Fault.
    Fault,
}

/// Planes of weakness of one direction throughout the named rocks.
#[derive(Debug, Clone, PartialEq)]
pub struct JointSet {
    /// Name.
    pub name: String,
    /// Joint, bedding or fault.
    pub kind: JointKind,
    /// Indices of the rocks that hold it.
    pub rocks: Vec<usize>,
    /// Dip toward the sea in the section, rad (negative: landward), -pi/2 to pi/2.
    pub dip_seaward_rad: f64,
    /// Angle between the planes' strike and the cliff line where a true dip was given, rad.
    pub strike_off_cliff_rad: Option<f64>,
    /// Share of such a plane that is open, 0 to 1.
    pub persistence: f64,
    /// Spacing, m.
    pub spacing_m: Option<f64>,
    /// Cohesion on the plane, Pa.
    pub cohesion_pa: Uncertain,
    /// Friction angle on the plane, rad.
    pub friction_angle_rad: Uncertain,
    /// Tensile strength across the plane, Pa.
    pub tensile_strength_pa: Uncertain,
}

/// The statement that planes of weakness were looked for and none found.
#[derive(Debug, Clone, PartialEq)]
pub struct DiscontinuitySurvey {
    /// Who looked.
    pub none_seen_by: String,
    /// When.
    pub date: Date,
    /// How far along and behind the cliff, m.
    pub reach_m: f64,
}
