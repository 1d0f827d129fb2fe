//! The path from a stated rock to its design values.
use super::*;
use crate::model::HoekBrown;

#[test]
fn m2_factors_of_the_standard() {
    // Check F04, EN 1997-1:2004 table A.4 (from memory, recomputed): c 50 kPa, phi 35 degrees -> 40 kPa, 29.256 degrees.
    let rock = typed(30.0, 50.0, 35.0);
    let got = design(&rock, Inputs::Cautious, &M2, 30.0).unwrap().value;
    let strength = resists(got.capacity);
    assert_relative_eq!(strength.cohesion_pa, 40.0 * KPA, max_relative = 1e-14);
    printed(strength.tan_friction.atan().to_degrees(), 29.256, 5e-4);
    assert_relative_eq!(strength.tensile_strength_pa, 24.0 * KPA, max_relative = 1e-14);
    assert!(got.notes.iter().any(|n| n.contains("no code set exists for rock in tension") && n.contains("own choice")), "{:?}", got.notes);
    // They act on cautious values only.
    let best = design(&rock, Inputs::BestEstimate, &M2, 30.0).unwrap().value;
    assert_relative_eq!(resists(best.capacity).cohesion_pa, 50.0 * KPA);
    assert!(best.notes.iter().any(|n| n.contains("acts on cautious values only")), "{:?}", best.notes);
}

#[test]
fn own_factors_act_on_both_kinds_of_inputs() {
    let own = PartialFactors { tension: 2.0, cohesion: 1.6, friction: 1.2, ..NO_FACTORS };
    for inputs in [Inputs::BestEstimate, Inputs::Cautious] {
        let strength = resists(design(&typed(30.0, 50.0, 35.0), inputs, &own, 30.0).unwrap().value.capacity);
        assert_relative_eq!(strength.tensile_strength_pa, 15.0 * KPA, max_relative = 1e-14);
        assert_relative_eq!(strength.cohesion_pa, 31.25 * KPA, max_relative = 1e-14);
        assert_relative_eq!(strength.tan_friction, deg(35.0).tan() / 1.2, max_relative = 1e-14);
    }
}

#[test]
fn tension_beyond_the_apex_is_cut_before_and_after_the_factors() {
    // Apex c/tan phi = 71.41 kPa (check D06, closed form).
    let got = design(&typed(100.0, 50.0, 35.0), Inputs::BestEstimate, &NO_FACTORS, 30.0).unwrap();
    let strength = resists(got.value.capacity);
    printed(strength.tensile_strength_pa / KPA, 71.41, 5e-3);
    assert_eq!(strength.cut_from_pa, Some(100.0 * KPA));
    assert_eq!(got.warnings[0].code, "rock.tension-cut");
    assert_eq!(
        got.warnings[0].message,
        "tensile strength 100.0 kPa lies beyond the apex c'/tan phi' of the shear strength and is cut to 71.4 kPa"
    );
    // Cut first, then divided: 71.41 / 1.25, not 100 / 1.25 cut to 71.41.
    let factored = resists(design(&typed(100.0, 50.0, 35.0), Inputs::Cautious, &M2, 30.0).unwrap().value.capacity);
    printed(factored.tensile_strength_pa / KPA, 71.41 / 1.25, 5e-3);
    // A factor on cohesion alone moves the apex: 60 kPa was inside 71.41 and is outside 35.7.
    let cohesion_only = PartialFactors { cohesion: 2.0, ..NO_FACTORS };
    let moved = resists(design(&typed(60.0, 50.0, 35.0), Inputs::BestEstimate, &cohesion_only, 30.0).unwrap().value.capacity);
    printed(moved.tensile_strength_pa / KPA, 0.5 * 71.407, 5e-3);
    // No friction: no apex, no cut.
    let frictionless = resists(design(&typed(60.0, 50.0, 0.0), Inputs::BestEstimate, &NO_FACTORS, 30.0).unwrap().value.capacity);
    assert_relative_eq!(frictionless.tensile_strength_pa, 60.0 * KPA);
}

#[test]
fn mass_and_wet_factors_multiply_before_all_else() {
    let mut rock = typed(2000.0, 2300.0, 38.0);
    rock.strength_basis = StrengthBasis::Intact;
    rock.mass_factor = MassFactor { tension: 0.2, cohesion: 0.3 };
    rock.wet_factor = 0.8;
    let got = design(&rock, Inputs::BestEstimate, &NO_FACTORS, 30.0).unwrap();
    let strength = resists(got.value.capacity);
    assert_relative_eq!(strength.tensile_strength_pa, 320.0 * KPA, max_relative = 1e-14);
    assert_relative_eq!(strength.cohesion_pa, 552.0 * KPA, max_relative = 1e-14);
    assert_relative_eq!(strength.tan_friction, deg(38.0).tan(), max_relative = 1e-14);
    assert!(got.warnings.is_empty(), "{:?}", got.warnings);
    // Not intact: the mass factor is not used, whatever it says.
    rock.strength_basis = StrengthBasis::BackAnalysed;
    let back = resists(design(&rock, Inputs::BestEstimate, &NO_FACTORS, 30.0).unwrap().value.capacity);
    assert_relative_eq!(back.tensile_strength_pa, 1600.0 * KPA, max_relative = 1e-14);
}

#[test]
fn intact_strength_used_nearly_whole_draws_the_warning() {
    let mut rock = typed(2000.0, 2300.0, 38.0);
    rock.strength_basis = StrengthBasis::Intact;
    rock.mass_factor = MassFactor { tension: 0.5, cohesion: 0.5 };
    let got = design(&rock, Inputs::BestEstimate, &NO_FACTORS, 30.0).unwrap();
    assert_eq!(got.warnings[0].code, "rock.mass-factor");
    assert_eq!(got.warnings[0].at, "rocks.sandstone");
}

#[test]
fn cautious_values_know_the_number_of_tests() {
    let mut rock = rock(RockStrength::Typed(Cohesive {
        tensile_strength_pa: Uncertain::Lognormal { mean: 300.0 * KPA, cov: 0.35 },
        cohesion_pa: Uncertain::Normal { mean: 400.0 * KPA, standard_deviation: 80.0 * KPA },
        friction_angle_rad: Uncertain::Exact(deg(38.0)),
        cohesion_friction_correlation: 0.0,
    }));
    let cautious = |rock: &Rock| design(rock, Inputs::Cautious, &NO_FACTORS, 30.0);
    let by_distribution = resists(cautious(&rock).unwrap().value.capacity);
    assert_relative_eq!(by_distribution.cohesion_pa, (400.0 - 1.6448536269514722 * 80.0) * KPA, max_relative = 1e-12);
    rock.tests = Some(6);
    let by_tests = resists(cautious(&rock).unwrap().value.capacity);
    // k_6 = 2.18 (published, two decimals).
    printed(by_tests.cohesion_pa / KPA, 400.0 - 2.18 * 80.0, 0.5);
    assert!(by_tests.tensile_strength_pa < by_distribution.tensile_strength_pa);
    // So few tests and so much scatter that the fractile is negative: 0, with a warning.
    rock.tests = Some(3);
    if let RockStrength::Typed(typed) = &mut rock.strength {
        typed.cohesion_pa = Uncertain::Normal { mean: 400.0 * KPA, standard_deviation: 150.0 * KPA };
    }
    let floor = cautious(&rock).unwrap();
    assert_relative_eq!(resists(floor.value.capacity).cohesion_pa, 0.0);
    assert_eq!(floor.warnings[0].code, "rock.fractile-below-zero");
    rock.tests = Some(2);
    let refused = cautious(&rock).unwrap_err();
    assert_eq!(refused[0].code, "rock.tests");
    assert_eq!(refused[0].at, "rocks.sandstone.tests");
}

#[test]
fn a_rating_gives_strengths_and_its_cautious_ends_are_lower() {
    let rating = HoekBrown {
        gsi: Uncertain::Exact(55.0),
        mi: Uncertain::Exact(9.0),
        disturbance: 0.7,
        uniaxial_strength_pa: Uncertain::Exact(30.0 * MPA),
    };
    // Checks D01, D01b (from memory, recomputed): gamma 25 kN/m3, H 20 m.
    let plain = rock(RockStrength::HoekBrown(rating));
    let best = resists(design(&plain, Inputs::BestEstimate, &NO_FACTORS, 20.0).unwrap().value.capacity);
    printed(best.tensile_strength_pa / MPA, 0.0581204, 5e-7);
    printed(best.cohesion_pa / MPA, 0.2324, 5e-5);
    printed(best.tan_friction.atan().to_degrees(), 46.85, 5e-3);
    let uncertain = rock(RockStrength::HoekBrown(HoekBrown {
        gsi: Uncertain::Normal { mean: 55.0, standard_deviation: 5.0 },
        mi: Uncertain::Uniform { min: 7.0, max: 11.0 },
        ..rating
    }));
    let cautious = resists(design(&uncertain, Inputs::Cautious, &NO_FACTORS, 20.0).unwrap().value.capacity);
    // By hand with gsi 46.776 and mi 10.8 at the tension's end: s sci / mb = exp(-53.224/6.9) 30 / (10.8 exp(-53.224/18.2)).
    let gsi = 55.0 - 5.0 * 1.6448536269514722;
    let by_hand = ((gsi - 100.0) / 6.9_f64).exp() * 30.0 / (10.8 * ((gsi - 100.0) / 18.2_f64).exp());
    assert_relative_eq!(cautious.tensile_strength_pa / MPA, by_hand, max_relative = 1e-12);
    assert!(cautious.shear_strength_pa(250.0 * KPA) < best.shear_strength_pa(250.0 * KPA));
    // Wetting acts on the uniaxial strength: tension is proportional to it.
    let wet = Rock { wet_factor: 0.5, ..plain };
    let halved = resists(design(&wet, Inputs::BestEstimate, &NO_FACTORS, 20.0).unwrap().value.capacity);
    assert_relative_eq!(halved.tensile_strength_pa, 0.5 * best.tensile_strength_pa, max_relative = 1e-13);
}

#[test]
fn a_layer_that_only_loads_has_no_capacity() {
    let got = design(&rock(RockStrength::None), Inputs::Cautious, &M2, 30.0).unwrap().value;
    assert_eq!(got.capacity, RockCapacity::NoStrength);
    assert_relative_eq!(got.capacity.tensile_strength_pa(), 0.0);
}

#[test]
fn what_has_no_strength_is_refused_with_its_place() {
    let lab = design(&rock(RockStrength::Lab("tern.csv".to_owned())), Inputs::Cautious, &NO_FACTORS, 30.0).unwrap_err();
    assert_eq!((lab[0].code, lab[0].at.as_str()), ("rock.lab", "rocks.sandstone.lab"));
    for bad in [typed(-1.0, 50.0, 35.0), typed(1.0, f64::NAN, 35.0), typed(1.0, 50.0, 90.0), typed(1.0, -50.0, 35.0)] {
        let refused = design(&bad, Inputs::BestEstimate, &NO_FACTORS, 30.0).unwrap_err();
        assert_eq!(refused[0].code, "rock.strength", "{refused:?}");
    }
}

#[test]
fn a_sample_takes_the_same_path_as_the_best_estimate() {
    let rock = typed(300.0, 400.0, 38.0);
    let stated = PartialFactors { tension: 1.3, ..NO_FACTORS };
    let best = design(&rock, Inputs::BestEstimate, &stated, 30.0).unwrap().value.capacity;
    let sample = StrengthValues::MohrCoulomb { tensile_strength_pa: 300.0 * KPA, cohesion_pa: 400.0 * KPA, friction_angle_rad: deg(38.0) };
    let reductions = reductions(&rock, strength_factors(&stated, false), 30.0).unwrap();
    assert_eq!(sample.capacity(&reductions).unwrap(), best);
}
