//! Mohr-Coulomb, Hoek-Brown, joints and pore water.
use super::*;
use crate::strength::barton_bandis::RoughJoint;
use crate::strength::hoek_brown::{Rating, intact_strength_ratio, modulus_ratio, simplified_modulus_pa};
use crate::strength::joint_set::{JointCapacity, PlaneStress, plane_stress, slip};
use crate::strength::mohr_coulomb::{LocalShear, Touch, local_shear};

#[track_caller]
fn touch(stress_pa: [f64; 3], strength: &Strength) -> Touch {
    match local_shear(stress_pa, strength) {
        LocalShear::Touches(touch) => touch,
        LocalShear::BeyondApex => panic!("beyond the apex"),
    }
}

#[test]
fn uniaxial_compression_at_failure_has_factor_one() {
    // Closed form: uniaxial compressive strength 2 c cos phi / (1 - sin phi); demand = capacity there.
    let s = strength(50.0, 35.0);
    let phi = deg(35.0);
    let ucs = 2.0 * s.cohesion_pa * phi.cos() / (1.0 - phi.sin());
    let at_failure = touch([0.0, -ucs, 0.0], &s);
    assert_relative_eq!(at_failure.factor, 1.0, max_relative = 1e-13);
    assert_relative_eq!(at_failure.demand_pa, 0.5 * ucs * phi.cos(), max_relative = 1e-13);
    assert_relative_eq!(at_failure.demand_pa, at_failure.capacity_pa, max_relative = 1e-13);
}

#[test]
fn purely_cohesive_rock_compares_the_radius_with_cohesion() {
    let got = touch([-100.0 * KPA, -20.0 * KPA, 30.0 * KPA], &strength(80.0, 0.0));
    // Radius sqrt(40^2 + 30^2) = 50 kPa by hand.
    assert_relative_eq!(got.demand_pa, 50.0 * KPA, max_relative = 1e-14);
    assert_relative_eq!(got.factor, 1.6, max_relative = 1e-14);
}

#[test]
fn demand_over_capacity_is_one_over_the_factor_and_the_reduced_envelope_touches() {
    let s = strength(120.0, 38.0);
    for stress in [[-400.0, -900.0, 130.0], [20.0, -50.0, 60.0], [60.0, 55.0, 1.0], [-1e4, -3.9e4, 10.0], [100.0, 20.0, 0.0]] {
        let stress = stress.map(|kpa| kpa * KPA);
        let got = touch(stress, &s);
        // 1e-9: where the circle nearly reaches the apex, F is a difference of nearly equal numbers.
        assert_relative_eq!(got.demand_pa / got.capacity_pa, 1.0 / got.factor, max_relative = 1e-9);
        let (c, t) = (s.cohesion_pa / got.factor, s.tan_friction / got.factor);
        let p = -0.5 * (stress[0] + stress[1]);
        let radius = (0.5 * (stress[0] - stress[1])).hypot(stress[2]);
        // Distance of the circle's center from the reduced line is its radius.
        assert_relative_eq!((c + p * t) / 1.0_f64.hypot(t), radius, max_relative = 1e-9);
    }
}

#[test]
fn the_circle_beyond_the_apex_has_no_factor() {
    // Apex of c 50 kPa, phi 35 degrees at 71.41 kPa of tension (check D06, closed form): isotropic tension either side of it.
    let s = strength(50.0, 35.0);
    let isotropic = |kpa: f64| local_shear([kpa * KPA, kpa * KPA, 0.0], &s);
    assert!(matches!(isotropic(71.40), LocalShear::Touches(Touch { factor, demand_pa, .. }) if factor.is_infinite() && demand_pa < 1e-12));
    assert_eq!(isotropic(71.42), LocalShear::BeyondApex);
    // Center inside the apex, but so large a circle that its rightmost point is beyond every reduced line.
    assert_eq!(local_shear([120.0 * KPA, -20.0 * KPA, 0.0], &s), LocalShear::BeyondApex);
}

#[test]
fn a_stress_that_is_not_finite_is_never_a_number() {
    let outcome = std::panic::catch_unwind(|| local_shear([f64::NAN, 0.0, 0.0], &strength(50.0, 35.0)));
    assert!(outcome.unwrap_err().downcast_ref::<String>().unwrap().contains("stress must be finite"));
}

#[test]
fn hoek_brown_parameters_of_four_rock_masses() {
    // Check D01: handbook rock masses and one limestone (from memory, recomputed to 6 digits): mb, s, a, st, sc, scm in MPa.
    let cases = [
        ((150.0, 25.0, 75.0, 0.0), [10.2371, 0.0621765, 0.500911, 0.911047, 37.3083, 69.2558]),
        ((80.0, 12.0, 50.0, 0.0), [2.01213, 0.00386592, 0.505734, 0.153705, 4.81818, 15.2131]),
        ((20.0, 8.0, 30.0, 0.0), [0.65668, 0.000418942, 0.522344, 0.0127594, 0.344059, 1.95507]),
        ((30.0, 9.0, 55.0, 0.7), [0.759342, 0.00147111, 0.504048, 0.0581204, 1.12067, 3.51325]),
    ];
    for ((sci_mpa, mi, gsi, disturbance), [mb, s, a, st, sc, scm]) in cases {
        let mass = Rating { gsi, mi, disturbance, uniaxial_strength_pa: sci_mpa * MPA }.rock_mass().unwrap();
        // 1e-5: the references carry six digits.
        assert_relative_eq!(mass.mb, mb, max_relative = 1e-5);
        assert_relative_eq!(mass.s, s, max_relative = 1e-5);
        assert_relative_eq!(mass.a, a, max_relative = 1e-5);
        assert_relative_eq!(mass.tensile_strength_pa, st * MPA, max_relative = 1e-5);
        assert_relative_eq!(mass.uniaxial_strength_pa, sc * MPA, max_relative = 1e-5);
        assert_relative_eq!(mass.global_strength_pa, scm * MPA, max_relative = 1e-5);
    }
}

#[test]
fn hoek_brown_equivalent_line_over_the_stress_range_of_a_cliff() {
    // Check D01b (from memory, recomputed): gamma 25 kN/m3, H 20 m.
    let mass = Rating { gsi: 55.0, mi: 9.0, disturbance: 0.7, uniaxial_strength_pa: 30.0 * MPA }.rock_mass().unwrap();
    let s3max = mass.largest_confining_stress_pa(25.0 * KPA * 20.0).unwrap();
    printed(s3max / MPA, 0.4291, 5e-5);
    let line = mass.equivalent_mohr_coulomb(s3max).unwrap();
    printed(line.friction_angle_rad.to_degrees(), 46.85, 5e-3);
    printed(line.cohesion_pa / MPA, 0.2324, 5e-5);
    // Check D01c (from memory, recomputed).
    printed(intact_strength_ratio(9.0), 14.29, 5e-3);
}

#[test]
fn hoek_brown_equivalent_line_balances_the_areas_above_and_below_the_curve() {
    // The defining property of the fit: equal areas under line and curve (s1 against s3) from -st to s3max, by Simpson's rule here.
    let mass = Rating { gsi: 55.0, mi: 9.0, disturbance: 0.7, uniaxial_strength_pa: 30.0 * MPA }.rock_mass().unwrap();
    let s3max = 0.4291 * MPA;
    let line = mass.equivalent_mohr_coulomb(s3max).unwrap();
    let (sin, cos) = line.friction_angle_rad.sin_cos();
    let sci = mass.intact_uniaxial_strength_pa;
    let gap = |s3: f64| {
        let curve = sci * (mass.mb * s3 / sci + mass.s).max(0.0).powf(mass.a);
        let straight = (2.0 * line.cohesion_pa * cos + 2.0 * s3 * sin) / (1.0 - sin);
        (curve, curve - straight)
    };
    let n = 200_000;
    let step = (s3max + mass.tensile_strength_pa) / f64::from(n);
    let (mut area, mut balance) = (0.0, 0.0);
    for i in 0..=n {
        let weight = if i == 0 || i == n { 1.0 } else { 2.0 + 2.0 * f64::from(i % 2) };
        let (curve, difference) = gap(-mass.tensile_strength_pa + step * f64::from(i));
        area += weight * curve;
        balance += weight * difference;
    }
    // 1e-8: Simpson's rule loses order where the curve starts steeply at the tensile strength (1.3e-9 with this step).
    assert!((balance / area).abs() < 1e-8, "areas differ by {}", balance / area);
}

#[test]
fn rock_mass_modulus() {
    // Check D02 (from memory, recomputed), four decimals and whole MPa.
    for (gsi, disturbance, ratio, simplified) in
        [(75.0, 0.0, 0.8164, 50000.0), (55.0, 0.7, 0.1476, 2081.0), (50.0, 0.0, 0.3072, 9341.0), (30.0, 0.0, 0.0814, 1645.0)]
    {
        printed(modulus_ratio(gsi, disturbance), ratio, 6e-5);
        printed(simplified_modulus_pa(gsi, disturbance) / MPA, simplified, 0.6);
    }
}

#[test]
fn ratings_out_of_range_are_refused() {
    let good = Rating { gsi: 55.0, mi: 9.0, disturbance: 0.7, uniaxial_strength_pa: 30.0 * MPA };
    assert_eq!(Rating { gsi: 4.0, ..good }.rock_mass().unwrap_err().to_string(), "the geological strength index must be 5 to 100, got 4");
    for bad in [
        Rating { mi: 0.0, ..good },
        Rating { disturbance: 1.1, ..good },
        Rating { uniaxial_strength_pa: f64::NAN, ..good },
        Rating { gsi: f64::NAN, ..good },
    ] {
        assert!(matches!(bad.rock_mass(), Err(StrengthError::Rating { .. })), "{bad:?}");
    }
}

#[test]
fn barton_bandis_strength_and_its_scale() {
    // Check D03 (from memory, recomputed).
    let lab = RoughJoint { roughness: 10.0, wall_strength_pa: 50.0 * MPA, residual_angle_rad: deg(28.0) };
    let s_n = 0.5 * MPA;
    assert_relative_eq!(lab.secant_angle_rad(s_n).to_degrees(), 48.0, max_relative = 1e-12);
    assert_relative_eq!(lab.shear_strength_pa(s_n) / MPA, 0.5553062574145965, max_relative = 1e-12);
    let field = lab.at_length(0.1, 2.0);
    assert_relative_eq!(field.roughness, 5.492802716530588, max_relative = 1e-12);
    assert_relative_eq!(field.wall_strength_pa / MPA, 20.35452657684522, max_relative = 1e-12);
    printed(field.shear_strength_pa(s_n) / MPA, 0.3746, 5e-5);
}

#[test]
fn pore_water_takes_its_share_of_the_friction() {
    // Checks D06, D06b, D06c (recomputed): c 50 kPa, phi 35 degrees, sigma 100 kPa.
    let s = strength(50.0, 35.0);
    let got = |u: f64, alpha: f64| unsaturated::shear_strength_pa(&s, 100.0 * KPA, u * KPA, alpha) / KPA;
    assert_relative_eq!(got(30.0, 1.0), 99.01452767467967, max_relative = 1e-12);
    assert_relative_eq!(got(30.0, 0.8), 103.21577290393793, max_relative = 1e-12);
    assert_relative_eq!(got(-60.0, unsaturated::water_area_ratio(0.5, 1.8)), 132.08566253044123, max_relative = 1e-12);
    printed(got(-60.0, 0.5), 141.027, 5e-4);
    // Raising u_w by D lowers the strength by exactly alpha D tan phi'.
    assert_relative_eq!(got(12.0, 0.7) - got(22.0, 0.7), 0.7 * 10.0 * deg(35.0).tan(), max_relative = 1e-12);
}

fn bare_joint(cohesion_kpa: f64, friction_deg: f64, persistence: f64) -> JointCapacity {
    JointCapacity::from_values(persistence, [0.0, cohesion_kpa * KPA], deg(friction_deg), &StrengthFactors::NONE).unwrap()
}

#[test]
fn stress_on_planes_of_seven_dips_by_hand() {
    // Principal stresses 400 kPa vertical and 100 kPa horizontal compression: normal = -(250 + 150 cos 2d), shear = 150 sin 2d.
    for dip in [-45.0, 0.0, 20.0, 35.0, 45.0, 60.0, 90.0_f64] {
        let got = plane_stress([-100.0 * KPA, -400.0 * KPA, 0.0], deg(dip));
        printed(got.normal_pa / KPA, -(250.0 + 150.0 * deg(2.0 * dip).cos()), 1e-9);
        printed(got.shear_pa / KPA, 150.0 * deg(2.0 * dip).sin(), 1e-9);
    }
    // tau_xy on a level plane: a positive one pulls the ground above landward, so its seaward drive is negative.
    let level = plane_stress([0.0, 0.0, 10.0], 0.0);
    printed(level.shear_pa, -10.0, 1e-12);
    printed(plane_stress([0.0, 0.0, 10.0], deg(45.0)).normal_pa, -10.0, 1e-12);
}

#[test]
fn slip_utilization_of_six_dips_by_hand() {
    // Same stresses, persistence 1, c 10 kPa, phi 30 degrees: tau / (10 + (250 + 150 cos 2d) tan 30).
    let joint = bare_joint(10.0, 30.0, 1.0);
    let by_hand = [(10.0, 0.217646), (20.0, 0.436916), (30.0, 0.657279), (45.0, 0.971896), (60.0, 1.169922), (75.0, 0.945328)];
    for (dip, expected) in by_hand {
        let got = slip(plane_stress([-100.0 * KPA, -400.0 * KPA, 0.0], deg(dip)), &joint, &RockCapacity::NoStrength);
        printed(got.utilization.unwrap(), expected, 6e-7);
    }
}

#[test]
fn persistence_shares_the_plane_between_joint_and_rock() {
    let rock = RockCapacity::Resists(strength(500.0, 40.0));
    let on_plane = PlaneStress { normal_pa: -100.0 * KPA, shear_pa: -30.0 * KPA };
    let joint = bare_joint(0.0, 30.0, 0.6);
    let by_hand = 0.6 * 100.0 * deg(30.0).tan() + 0.4 * (500.0 + 100.0 * deg(40.0).tan());
    let got = slip(on_plane, &joint, &rock);
    assert_relative_eq!(got.capacity_pa / KPA, by_hand, max_relative = 1e-13);
    assert_relative_eq!(got.demand_pa / KPA, 30.0, max_relative = 1e-13);
    // Pulled open: the open share carries nothing and takes nothing away from the bridge.
    let opened = PlaneStress { normal_pa: 100.0 * KPA, shear_pa: 30.0 * KPA };
    let bridge = 0.4 * (500.0 - 100.0 * deg(40.0).tan());
    assert_relative_eq!(slip(opened, &joint, &rock).capacity_pa / KPA, bridge, max_relative = 1e-13);
    assert_eq!(slip(opened, &bare_joint(0.0, 30.0, 1.0), &rock).utilization, None);
    assert_eq!(slip(PlaneStress { normal_pa: 1.0, shear_pa: 0.0 }, &joint, &RockCapacity::NoStrength).utilization, Some(0.0));
}

#[test]
fn joint_sets_take_means_or_fractiles_and_factors() {
    let set = JointSet {
        name: "J1".to_owned(),
        kind: JointKind::Joint,
        rocks: vec![0],
        dip_seaward_rad: deg(60.0),
        strike_off_cliff_rad: None,
        persistence: 0.7,
        spacing_m: None,
        cohesion_pa: Uncertain::Lognormal { mean: 40.0 * KPA, cov: 0.5 },
        friction_angle_rad: Uncertain::Exact(deg(30.0)),
        tensile_strength_pa: Uncertain::Exact(500.0 * KPA),
    };
    let best = JointCapacity::new(&set, false, &StrengthFactors::NONE).unwrap();
    assert_relative_eq!(best.cohesion_pa, 40.0 * KPA);
    assert_relative_eq!(best.tensile_strength_pa, 40.0 * KPA / deg(30.0).tan(), max_relative = 1e-13);
    let cautious = JointCapacity::new(&set, true, &strength_factors(&M2, true)).unwrap();
    assert_relative_eq!(cautious.cohesion_pa, quantile(set.cohesion_pa, 0.05).unwrap() / 1.25, max_relative = 1e-13);
    assert_relative_eq!(cautious.tan_friction, deg(30.0).tan() / 1.25, max_relative = 1e-13);
    let open = JointSet { persistence: 1.5, ..set };
    assert!(JointCapacity::new(&open, false, &StrengthFactors::NONE).is_err());
}
