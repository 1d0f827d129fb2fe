//! Fits and statistics against certified and published values.
use super::*;
use crate::model::{RockStrength, Uncertain};
use crate::strength::{fractile_factor, student_t_quantile};
use approx::assert_relative_eq;

mod norris;
mod reservations;

const KPA: f64 = 1e3;
const MPA: f64 = 1e6;

/// Check D08: direct shear, six stages, kPa (worked example, recomputed independently).
const D08: [(f64, f64); 6] = [(50.0, 86.0), (100.0, 118.0), (150.0, 160.0), (200.0, 189.0), (300.0, 262.0), (400.0, 329.0)];

fn points(kpa: &[(f64, f64)]) -> Vec<Point> {
    kpa.iter().map(|(normal, shear)| Point { normal_pa: normal * KPA, shear_pa: shear * KPA }).collect()
}

fn d08() -> Fit {
    Fit::new(&points(&D08)).unwrap()
}

fn origin(line: usize, specimen: &str) -> Origin {
    Origin { line, specimen: specimen.to_owned(), rock: None }
}

fn stage(line: usize, normal_kpa: f64, peak_kpa: f64) -> ShearStage {
    ShearStage {
        origin: origin(line, &format!("S{line}")),
        normal_at_peak_pa: normal_kpa * KPA,
        peak_pa: Some(peak_kpa * KPA),
        normal_at_residual_pa: normal_kpa * KPA,
        residual_pa: None,
        rate_m_per_s: None,
        drainage: Some(Drainage::Drained),
        along: ShearedAlong::Intact,
        remoulded: false,
        state: None,
    }
}

fn strengths(mpa: &[f64]) -> Vec<StrengthTest> {
    let test = |(i, v): (usize, &f64)| StrengthTest {
        origin: origin(i + 2, &format!("T{i}")),
        value_pa: v * MPA,
        diameter_m: Some(0.054),
        length_m: Some(0.027),
        state: None,
    };
    mpa.iter().enumerate().map(test).collect()
}

fn d08_results() -> LabResults {
    LabResults {
        shear: D08.iter().enumerate().map(|(i, (normal, peak))| stage(i + 2, *normal, *peak)).collect(),
        tensile: strengths(&[2.1, 2.4, 1.9, 2.6, 2.2]),
        ..LabResults::default()
    }
}

#[test]
fn direct_shear_with_student_intervals() {
    let fit = d08();
    // 1e-12: the references carry 16 digits; a handful of roundings of sums of six.
    assert_relative_eq!(fit.cohesion_pa / KPA, 51.13725490196077, max_relative = 1e-12);
    assert_relative_eq!(fit.friction_angle_rad().to_degrees(), 34.90144122174903, max_relative = 1e-12);
    assert_relative_eq!(fit.correlation, -0.8593378488473195, max_relative = 1e-12);
    assert!((fit.residual_deviation_pa / KPA - 2.866).abs() < 5e-4);
    let c = fit.cohesion_interval_pa(0.95).unwrap();
    let phi = fit.friction_interval_rad(0.95).unwrap();
    // 1e-11: the t quantile enters.
    assert_relative_eq!(c.low / KPA, 44.78441944316074, max_relative = 1e-11);
    assert_relative_eq!(c.high / KPA, 57.4900903607608, max_relative = 1e-11);
    assert_relative_eq!(phi.low.to_degrees(), 33.83595903329401, max_relative = 1e-11);
    assert_relative_eq!(phi.high.to_degrees(), 35.93997935401903, max_relative = 1e-11);
    // Two decimals in the source.
    assert!((fit.lower_mean_pa(150.0 * KPA, 0.95).unwrap() / KPA - 153.08).abs() < 5e-3);
    assert!((fit.lower_single_pa(150.0 * KPA, 0.95).unwrap() / KPA - 149.10).abs() < 5e-3);
}

#[test]
fn the_predictive_line_has_the_variance_of_a_single_stage_at_every_stress() {
    let fit = d08();
    let (sd_c, sd_t, correlation) = fit.predictive();
    let t95 = student_t_quantile(0.95, 4.0).unwrap();
    for normal_kpa in [0.0, 80.0, 200.0, 900.0] {
        let normal = normal_kpa * KPA;
        let sd = (sd_c * sd_c + (normal * sd_t).powi(2) + 2.0 * correlation * sd_c * sd_t * normal).sqrt();
        let single = (fit.line_pa(normal) - fit.lower_single_pa(normal, 0.95).unwrap()) / t95;
        assert_relative_eq!(sd, single, max_relative = 1e-12);
    }
}

#[test]
fn an_exact_line_is_found_exactly_and_has_no_outlier() {
    let fit = Fit::new(&points(&[(10.0, 27.0), (20.0, 34.0), (40.0, 48.0), (80.0, 76.0)])).unwrap();
    assert_relative_eq!(fit.cohesion_pa, 20.0 * KPA, max_relative = 1e-13);
    assert_relative_eq!(fit.tan_friction, 0.7, max_relative = 1e-13);
    assert!(fit.residual_deviation_pa < 1e-9 * KPA);
    assert!(fit.outliers().is_empty());
}

#[test]
fn negative_cohesion_holds_the_line_at_the_origin() {
    let fit = Fit::new(&points(&[(100.0, 55.0), (200.0, 130.0), (400.0, 270.0)])).unwrap();
    assert!(fit.through_origin);
    assert_relative_eq!(fit.cohesion_pa, 0.0);
    // By hand: sum(x y)/sum(x^2) = (5500 + 26000 + 108000) / (10000 + 40000 + 160000).
    assert_relative_eq!(fit.tan_friction, 139500.0 / 210000.0, max_relative = 1e-14);
    assert_eq!(fit.freedom, 2);
}

#[test]
fn what_cannot_be_fitted_is_refused() {
    assert_eq!(
        Fit::new(&points(&[(1.0, 2.0), (2.0, 3.0)])).unwrap_err().to_string(),
        "a fit of cohesion and friction needs at least 3 stages, got 2"
    );
    let same = Fit::new(&points(&[(100.0, 80.0), (100.0, 90.0), (100.0, 85.0)])).unwrap_err();
    assert!(matches!(same, FitError::SameNormalStress { .. }));
    let falling = Fit::new(&points(&[(100.0, 90.0), (200.0, 80.0), (300.0, 70.0)])).unwrap_err();
    assert!(matches!(falling, FitError::NoFriction { .. }));
    let nan = Fit::new(&points(&[(100.0, 90.0), (200.0, f64::NAN), (300.0, 70.0)])).unwrap_err();
    assert!(matches!(nan, FitError::NotFinite { .. }));
}

#[test]
fn a_stage_far_off_the_line_is_named() {
    let mut stages = D08.to_vec();
    stages[3].1 = 260.0;
    assert_eq!(Fit::new(&points(&stages)).unwrap().outliers(), vec![3]);
    assert!(d08().outliers().is_empty());
}

#[test]
fn grubbs_test_of_the_handbook_example() {
    // NIST/SEMATECH e-Handbook 1.3.5.17.1, uranium isotope readings (from memory): G = 2.468765, one-sided 5 % limit 2.032 for n = 8.
    let readings = [199.31, 199.53, 200.19, 200.82, 201.92, 201.95, 202.18, 245.57];
    let (statistic, i) = grubbs_statistic(&readings).unwrap();
    assert!((statistic - 2.468765).abs() < 5e-7, "{statistic}");
    assert_eq!(i, 7);
    // The two-sided limit at 10 % is the one-sided limit at 5 %.
    assert!((grubbs_critical(8, 0.10).unwrap() - 2.032).abs() < 5e-4);
    assert_eq!(Sample::new(readings.to_vec()).unwrap().outlier, Some(7));
    assert_eq!(Sample::new(readings[..7].to_vec()).unwrap().outlier, None);
    assert!(grubbs_statistic(&[5.0, 5.0, 5.0]).is_none());
}

#[test]
fn sample_statistics_and_fractile_by_hand() {
    // Mean 2.0, squares 0.04 + 0.01 + 0.01 + 0.04 = 0.10 by hand, s = sqrt(0.10 / 3).
    let sample = Sample::new(vec![1.8, 1.9, 2.1, 2.2]).unwrap();
    assert_relative_eq!(sample.mean, 2.0, max_relative = 1e-14);
    let s = (0.10_f64 / 3.0).sqrt();
    assert_relative_eq!(sample.standard_deviation.unwrap(), s, max_relative = 1e-13);
    let zeta2 = (s * s / 4.0).ln_1p();
    let by_hand = (2.0_f64.ln() - 0.5 * zeta2 - fractile_factor(4).unwrap() * zeta2.sqrt()).exp();
    assert_relative_eq!(sample.characteristic.unwrap(), by_hand, max_relative = 1e-12);
    assert!(Sample::new(vec![1.0, 1.1]).unwrap().characteristic.is_none());
    assert!(Sample::new(vec![1.0, f64::NAN]).is_none());
    assert!(Sample::new(Vec::new()).is_none());
    assert_eq!(Sample::new(vec![3.0]).unwrap().uncertain(), Uncertain::Exact(3.0));
}

#[test]
fn disc_point_load_and_size_formulas() {
    // Checks D04, D05, D09 (from memory, recomputed).
    assert_relative_eq!(disc_tensile_strength_pa(15e3, 0.054, 0.027) / MPA, 6.549586135468944, max_relative = 1e-12);
    assert_relative_eq!(point_load_size_factor(0.054), 1.035239155883151, max_relative = 1e-12);
    assert_relative_eq!(point_load_index_pa(5e3, 0.054) / MPA, 1.7751014332701491, max_relative = 1e-12);
    let block = point_load_index_pa(6e3, equivalent_core_diameter_m(0.060, 0.040)) / MPA;
    assert!((block - 2.0542).abs() < 5e-5, "{block}");
    assert_relative_eq!(uniaxial_size_factor(0.1), 0.8827029962906549, max_relative = 1e-12);
    assert_relative_eq!(uniaxial_size_factor(1.0), 0.583196086185909, max_relative = 1e-12);
    // By hand: 9.80665 (2000 + 0.2 x 1000).
    assert_relative_eq!(saturated_unit_weight_n_per_m3(2000.0, 0.2), 21574.63, max_relative = 1e-14);
}

#[test]
fn a_rock_gets_its_strengths_from_the_fits() {
    let summary = summarize(&d08_results()).value;
    let rock = rock_strength(&summary).unwrap();
    assert_eq!(rock.tests, 5);
    assert_eq!(rock.strength, RockStrength::Typed(rock.cohesive));
    let Uncertain::Lognormal { mean, cov } = rock.cohesive.cohesion_pa else { panic!("{:?}", rock.cohesive) };
    assert_relative_eq!(mean / KPA, 51.13725490196077, max_relative = 1e-12);
    let (sd_c, _, correlation) = d08().predictive();
    assert_relative_eq!(cov * mean, sd_c, max_relative = 1e-12);
    assert_relative_eq!(rock.cohesive.cohesion_friction_correlation, correlation);
    // (2.1 + 2.4 + 1.9 + 2.6 + 2.2) / 5 by hand.
    assert_relative_eq!(crate::strength::mean(rock.cohesive.tensile_strength_pa).unwrap() / MPA, 2.24, max_relative = 1e-14);
}

#[test]
fn a_rock_without_shear_or_tension_tests_is_refused_with_every_missing_part() {
    let faults = rock_strength(&LabSummary::default()).unwrap_err();
    let said: Vec<&str> = faults.iter().map(|f| f.message.as_str()).collect();
    assert_eq!(
        said,
        [
            "the laboratory file gives no peak cohesion and friction angle",
            "the laboratory file gives no tensile strength by at least 3 tests"
        ]
    );
}

#[test]
fn rocks_are_told_apart_by_name() {
    let mut results = d08_results();
    results.shear[0].origin.rock = Some("marl".to_owned());
    results.tensile[0].origin.rock = Some("limestone".to_owned());
    results.tensile[1].origin.rock = Some("marl".to_owned());
    assert_eq!(results.rocks(), ["marl", "limestone"]);
    assert_eq!(results.of_rock("marl").len(), 2);
    assert!(results.of_rock("slate").is_empty());
}
