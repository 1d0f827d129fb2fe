//! Fractiles, moments and the factor by number of tests.
use super::*;

#[test]
fn normal_quantile_inverts_the_published_pf_beta_table() {
    // EN 1990:2002 Annex C, table C1 (from memory, recomputed): pf against beta, 4 decimals.
    let table = [(1e-1, 1.2816), (1e-2, 2.3263), (1e-3, 3.0902), (1e-4, 3.7190), (1e-5, 4.2649), (1e-6, 4.7534), (1e-7, 5.1993)];
    for (pf, beta) in table {
        printed(-normal_quantile(pf).unwrap(), beta, 6e-5);
    }
}

#[test]
fn normal_quantile_and_cdf_are_inverse_from_far_tail_to_far_tail() {
    for p in [1e-280, 1e-100, 1e-15, 1e-6, 0.02, 0.3, 0.5] {
        // One rounding of x moves p by |x| eps in relative terms where the tail is thin: 36^2 eps at 1e-280.
        assert_relative_eq!(normal_cdf(normal_quantile(p).unwrap()), p, max_relative = 1e-12);
    }
    for p in [0.5, 0.75, 0.999, 1.0 - 1e-12] {
        assert_relative_eq!(normal_cdf(normal_quantile(p).unwrap()), p, max_relative = 1e-15);
    }
}

#[test]
fn five_percent_fractile_of_a_lognormal_strength() {
    // Check F06 (closed form): mean 500, cov 0.3 -> 295.49.
    let number = Uncertain::Lognormal { mean: 500.0, cov: 0.3 };
    // The reference is cut, not rounded, to two decimals.
    printed(quantile(number, 0.05).unwrap(), 295.49, 1e-2);
    let (lambda, zeta) = lognormal_parameters(500.0, 0.3);
    printed(lambda, 6.171519, 5e-7);
    printed(zeta, 0.293560, 5e-7);
}

#[test]
fn fractiles_of_the_other_distributions_by_hand() {
    // z_0.95 = 1.6448536269514722 (published tables).
    let normal = Uncertain::Normal { mean: 10.0, standard_deviation: 2.0 };
    assert_relative_eq!(quantile(normal, 0.05).unwrap(), 10.0 - 2.0 * 1.6448536269514722, max_relative = 1e-14);
    assert_relative_eq!(quantile(Uncertain::Uniform { min: 2.0, max: 6.0 }, 0.05).unwrap(), 2.2, max_relative = 1e-15);
    assert_relative_eq!(quantile(Uncertain::Exact(7.0), 0.05).unwrap(), 7.0);
    // Half-normal: P(|Z| < x) = p at x = Phi^-1((1 + p)/2), mean sqrt(2/pi), variance 1 - 2/pi.
    let half = Uncertain::TruncatedNormal { mean: 0.0, standard_deviation: 1.0, min: 0.0, max: 40.0 };
    assert_relative_eq!(quantile(half, 0.9).unwrap(), 1.6448536269514722, max_relative = 1e-14);
    assert_relative_eq!(mean(half).unwrap(), (2.0 / std::f64::consts::PI).sqrt(), max_relative = 1e-14);
    assert_relative_eq!(standard_deviation(half).unwrap(), (1.0 - 2.0 / std::f64::consts::PI).sqrt(), max_relative = 1e-14);
}

#[test]
fn truncation_far_above_the_mean_mirrors_truncation_far_below() {
    let above = Uncertain::TruncatedNormal { mean: 0.0, standard_deviation: 1.0, min: 8.0, max: 9.0 };
    let below = Uncertain::TruncatedNormal { mean: 0.0, standard_deviation: 1.0, min: -9.0, max: -8.0 };
    for p in [0.05, 0.5, 0.95] {
        assert_relative_eq!(quantile(above, p).unwrap(), -quantile(below, 1.0 - p).unwrap(), max_relative = 1e-14);
    }
    assert_relative_eq!(mean(above).unwrap(), -mean(below).unwrap(), max_relative = 1e-14);
    assert!(8.0 < mean(above).unwrap() && mean(above).unwrap() < 8.2);
}

#[test]
fn impossible_distributions_are_refused_and_nan_with_them() {
    for number in [
        Uncertain::Exact(f64::NAN),
        Uncertain::Lognormal { mean: -1.0, cov: 0.2 },
        Uncertain::Lognormal { mean: 1.0, cov: f64::NAN },
        Uncertain::Normal { mean: 1.0, standard_deviation: 0.0 },
        Uncertain::Uniform { min: 2.0, max: 2.0 },
        Uncertain::TruncatedNormal { mean: 0.0, standard_deviation: 1.0, min: 90.0, max: 91.0 },
    ] {
        assert!(matches!(quantile(number, 0.5), Err(StrengthError::Distribution { .. })), "{number:?}");
    }
    assert_eq!(
        quantile(Uncertain::Uniform { min: 2.0, max: 1.0 }, 0.5).unwrap_err().to_string(),
        "the upper end must be above the lower end, got 1"
    );
    assert!(matches!(quantile(Uncertain::Exact(1.0), 1.0), Err(StrengthError::Probability { .. })));
}

#[test]
fn factor_by_number_of_tests_matches_the_published_table() {
    // Check F05, EN 1990:2002 Annex D, table D1, "V_X unknown" (from memory, recomputed), two decimals.
    let table = [(3, 3.37), (4, 2.63), (5, 2.33), (6, 2.18), (8, 2.01), (10, 1.92), (20, 1.77), (30, 1.73)];
    for (tests, k_n) in table {
        printed(fractile_factor(tests).unwrap(), k_n, 6e-3);
    }
    assert_eq!(fractile_factor(2).unwrap_err().to_string(), "a 5 % fractile by number of tests needs at least 3 tests, got 2");
}

#[test]
fn student_quantile_matches_its_closed_form_for_two_degrees_of_freedom() {
    // t = (2p - 1) / sqrt(2 p (1 - p)) for 2 degrees of freedom (closed form).
    for p in [0.9, 0.95, 0.975, 0.995_f64] {
        let exact = (2.0 * p - 1.0) / (2.0 * p * (1.0 - p)).sqrt();
        assert_relative_eq!(student_t_quantile(p, 2.0).unwrap(), exact, max_relative = 1e-12);
    }
    // Published table value t_0.975,4 = 2.776.
    printed(student_t_quantile(0.975, 4.0).unwrap(), 2.776, 5e-4);
}

#[test]
fn characteristic_values_by_number_of_tests() {
    let k_6 = fractile_factor(6).unwrap();
    let normal = Uncertain::Normal { mean: 100.0, standard_deviation: 10.0 };
    assert_relative_eq!(characteristic(normal, Some(6), End::Low).unwrap(), 100.0 - 10.0 * k_6);
    assert_relative_eq!(characteristic(normal, Some(6), End::High).unwrap(), 100.0 + 10.0 * k_6);
    let lognormal = Uncertain::Lognormal { mean: 500.0, cov: 0.3 };
    let (lambda, zeta) = lognormal_parameters(500.0, 0.3);
    assert_relative_eq!(characteristic(lognormal, Some(6), End::Low).unwrap(), (lambda - k_6 * zeta).exp());
    assert_relative_eq!(characteristic(lognormal, None, End::Low).unwrap(), quantile(lognormal, 0.05).unwrap());
    let uniform = Uncertain::Uniform { min: 9.0, max: 11.0 };
    assert_relative_eq!(characteristic(uniform, Some(3), End::Low).unwrap(), 9.0);
}
