//! Strength laws and design values against published and hand-worked values.
use super::*;
use crate::model::{Cohesive, JointKind, JointSet, MassFactor, PartialFactors, Rock, RockStrength, StrengthBasis, Uncertain};
use approx::assert_relative_eq;

mod design_values;
mod distributions;
mod laws;

const KPA: f64 = 1e3;
const MPA: f64 = 1e6;

fn deg(angle: f64) -> f64 {
    angle.to_radians()
}

/// Compares with a value printed to a number of digits: `tolerance` is half of its last digit.
#[track_caller]
fn printed(got: f64, expected: f64, tolerance: f64) {
    assert!((got - expected).abs() <= tolerance, "got {got}, expected {expected} within {tolerance}");
}

fn strength(cohesion_kpa: f64, friction_deg: f64) -> Strength {
    Strength { tensile_strength_pa: 0.0, cohesion_pa: cohesion_kpa * KPA, tan_friction: deg(friction_deg).tan(), cut_from_pa: None }
}

fn rock(strength: RockStrength) -> Rock {
    Rock {
        name: "sandstone".to_owned(),
        unit_weight_n_per_m3: Uncertain::Exact(25e3),
        saturated_unit_weight_n_per_m3: Uncertain::Exact(25e3),
        youngs_modulus_pa: 5e9,
        poissons_ratio: 0.25,
        k0: None,
        strength_basis: StrengthBasis::RockMass,
        mass_factor: MassFactor { tension: 1.0, cohesion: 1.0 },
        tests: None,
        strength,
        tested: None,
        wet_factor: 1.0,
        uniaxial_strength_pa: None,
        fracture_toughness_pa_sqrt_m: None,
    }
}

fn typed(tension_kpa: f64, cohesion_kpa: f64, friction_deg: f64) -> Rock {
    rock(RockStrength::Typed(Cohesive {
        tensile_strength_pa: Uncertain::Exact(tension_kpa * KPA),
        cohesion_pa: Uncertain::Exact(cohesion_kpa * KPA),
        friction_angle_rad: Uncertain::Exact(deg(friction_deg)),
        cohesion_friction_correlation: 0.0,
    }))
}

const NO_FACTORS: PartialFactors = PartialFactors { tension: 1.0, cohesion: 1.0, friction: 1.0, unit_weight: 1.0, en_1997_m2: false };
const M2: PartialFactors = PartialFactors { en_1997_m2: true, ..NO_FACTORS };

#[track_caller]
fn resists(capacity: RockCapacity) -> Strength {
    match capacity {
        RockCapacity::Resists(strength) => strength,
        RockCapacity::NoStrength => panic!("no strength"),
    }
}
