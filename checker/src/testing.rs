//! Small models for the crate's own tests.
use crate::model::{
    AboveTable, Averaging, Below, Carries, Checks, Cohesive, ContactLine, Extent, Groundwater, Growth, Headline, Layer, MassFactor, Model,
    PartialFactors, ReportIdentity, Rock, RockStrength, SeaLevel, Setting, Situation, StrengthBasis, SurfaceSection, Uncertain, Undercut,
};

/// A rock with unit weight in kN/m3 and modulus in MPa, strong enough to stay out of the way.
pub(crate) fn rock(name: &str, unit_weight_kn_m3: f64, youngs_modulus_mpa: f64, poissons_ratio: f64) -> Rock {
    let strength = Cohesive {
        tensile_strength_pa: Uncertain::Exact(500e3),
        cohesion_pa: Uncertain::Exact(1000e3),
        friction_angle_rad: Uncertain::Exact(35_f64.to_radians()),
        cohesion_friction_correlation: 0.0,
    };
    Rock {
        name: name.into(),
        unit_weight_n_per_m3: Uncertain::Exact(1e3 * unit_weight_kn_m3),
        saturated_unit_weight_n_per_m3: Uncertain::Exact(1e3 * unit_weight_kn_m3),
        youngs_modulus_pa: 1e6 * youngs_modulus_mpa,
        poissons_ratio,
        k0: None,
        strength_basis: StrengthBasis::RockMass,
        mass_factor: MassFactor { tension: 1.0, cohesion: 1.0 },
        tests: None,
        strength: RockStrength::Typed(strength),
        tested: None,
        wet_factor: 1.0,
        uniaxial_strength_pa: None,
        fracture_toughness_pa_sqrt_m: None,
    }
}

/// A layer of a rock down to a level.
pub(crate) fn layer(rock: usize, base_m: Option<f64>) -> Layer {
    Layer { rock, base: base_m.map(ContactLine::Level), carries: Carries::LoadAndTension, rest_slope_rad: None }
}

/// A model of given rocks and layers, dry, without a surface.
pub(crate) fn model(rocks: Vec<Rock>, layers: Vec<Layer>) -> Model {
    let situation = Situation {
        name: "ordinary".into(),
        groundwater: Some(Groundwater::DryObserved),
        sea_level: SeaLevel::OffTheFace,
        water_unit_weight_n_per_m3: 9810.0,
        sea_unit_weight_n_per_m3: 10050.0,
        above_table: AboveTable::Dry,
        crack_water_above_tip_m: None,
        surcharges: Vec::new(),
        inertia_seaward: 0.0,
        inertia_up: 0.0,
        annual_chance: None,
    };
    let factors = PartialFactors { tension: 1.0, cohesion: 1.0, friction: 1.0, unit_weight: 1.0, en_1997_m2: false };
    Model {
        title: "test".into(),
        report: ReportIdentity::default(),
        section: SurfaceSection {
            surface: Vec::new(),
            vertical_datum: None,
            original_surface_m: None,
            brow_m: None,
            surveyed: None,
            round_corners_m: None,
        },
        layers,
        rocks,
        joint_sets: Vec::new(),
        discontinuity_survey: None,
        cracks: Vec::new(),
        situations: vec![situation],
        surcharges: Vec::new(),
        undercut: Undercut {
            setting: Setting::StraightCliff,
            width_along_shore_m: None,
            growth: Growth::Advance,
            search_to_depth_m: 10.0,
            depth_step_m: 0.5,
            start_shape: None,
        },
        checks: Checks {
            headline: Headline::Cautious,
            averaging: Averaging::FromThickness,
            partial_factors: factors,
            required_reserve: 1.0,
            target_error: 0.02,
        },
        outlook: None,
        evidence: Vec::new(),
        below: Below::default(),
        remedies: Vec::new(),
        probes: Vec::new(),
        cuts: Vec::new(),
        extent: Extent::default(),
        location: None,
        defaults_used: Vec::new(),
    }
}
