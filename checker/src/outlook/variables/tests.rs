use super::{Correlation, Marginal, VariableError, Variables};
use crate::model::Uncertain;
use crate::outlook::normal;

fn named(inputs: &[Uncertain]) -> Vec<(String, Uncertain)> {
    inputs.iter().enumerate().map(|(i, u)| (format!("x{i}"), *u)).collect()
}

#[track_caller]
fn refused(inputs: &[Uncertain], correlations: &[Correlation]) -> String {
    let errors = Variables::new(&named(inputs), correlations).expect_err("must be refused");
    errors.iter().map(ToString::to_string).collect::<Vec<_>>().join("; ")
}

/// F06 (from memory, recomputed): mean 500, cov 0.3 gives lambda 6.171519, zeta 0.293560 and a 5 % fractile of 295.49.
#[test]
fn f06_lognormal_parameters() {
    let Ok(m @ Marginal::Lognormal { lambda, zeta }) = Marginal::new("st", &Uncertain::Lognormal { mean: 500.0, cov: 0.3 }) else {
        unreachable!("a lognormal")
    };
    assert!((lambda - 6.171519).abs() < 5e-7 && (zeta - 0.293560).abs() < 5e-7, "{lambda} {zeta}");
    // The listed fractile lies between the factors 1.6449 (295.497) and 1.645 (295.484); hence 0.01.
    assert!((m.from_standard(normal::quantile(0.05)) - 295.49).abs() < 1e-2);
}

#[test]
fn every_distribution_comes_back_from_its_normal() {
    let all = [
        Uncertain::Lognormal { mean: 2.25e6, cov: 0.35 },
        Uncertain::Normal { mean: -3.0, standard_deviation: 2.0 },
        Uncertain::TruncatedNormal { mean: 1.0, standard_deviation: 0.5, min: 0.2, max: 1.4 },
        Uncertain::Uniform { min: 0.3, max: 0.8 },
        Uncertain::Exact(7.0),
    ];
    let set = Variables::new(&named(&all), &[Correlation { a: 0, b: 1, coefficient: -0.4 }, Correlation { a: 1, b: 3, coefficient: 0.3 }])
        .unwrap();
    assert_eq!((set.n_inputs(), set.n_random()), (5, 4));
    let mut x = vec![0.0; 5];
    for u in [[0.0, 0.0, 0.0, 0.0], [1.3, -2.0, 3.0, -1.1], [-4.0, 0.5, -3.5, 2.2]] {
        set.from_standard(&u, &mut x);
        let back = set.to_standard(&x);
        for (u, back) in u.iter().zip(&back) {
            // Uniform and truncated values pass through a distribution function: digits of 1 - p at 3.5 sd cost 1e-12.
            assert!((u - back).abs() < 1e-10, "{u} came back as {back}");
        }
        assert!((0.2..=1.4).contains(&x[2]) && (0.3..=0.8).contains(&x[3]));
    }
}

/// The mean of a truncated normal has a closed form: m + s (phi(a) - phi(b)) / (Phi(b) - Phi(a)).
#[test]
fn truncated_normal_has_its_closed_form_mean() {
    let m = Marginal::new("x", &Uncertain::TruncatedNormal { mean: 1.0, standard_deviation: 0.5, min: 0.2, max: 1.4 }).unwrap();
    let (a, b) = (-1.6, 0.8);
    let expected = 1.0 + 0.5 * (normal::density(a) - normal::density(b)) / (normal::cdf(b) - normal::cdf(a));
    let n = 4000;
    let mean: f64 = (0..n).map(|i| m.from_standard(normal::quantile((f64::from(i) + 0.5) / f64::from(n)))).sum::<f64>() / f64::from(n);
    // The midpoint rule over 4,000 equal probabilities errs by less than (range / n) = 3e-4, in fact by its square.
    assert!((mean - expected).abs() < 1e-6, "{mean} against {expected}");
}

/// Lognormal pair: rho_z = ln(1 + rho V1 V2) / (zeta1 zeta2), closed form of the Nataf relation (published, Der Kiureghian & Liu 1986).
#[test]
fn correlation_of_lognormals_is_the_closed_form() {
    let inputs = named(&[Uncertain::Lognormal { mean: 3.0, cov: 0.3 }, Uncertain::Lognormal { mean: 9.0, cov: 0.5 }]);
    let set = Variables::new(&inputs, &[Correlation { a: 0, b: 1, coefficient: -0.4 }]).unwrap();
    let zeta = |v: f64| (1.0 + v * v).ln().sqrt();
    let expected = (1.0_f64 - 0.4 * 0.3 * 0.5).ln() / (zeta(0.3) * zeta(0.5));
    assert!((set.factor[1].1[0] - expected).abs() < 1e-9, "{} against {expected}", set.factor[1].1[0]);
}

#[test]
fn nonsense_is_refused_with_its_reason() {
    assert_eq!(refused(&[Uncertain::Lognormal { mean: -2.0, cov: 0.3 }], &[]), "`x0`: a lognormal needs a positive mean, got -2");
    assert_eq!(
        refused(&[Uncertain::Lognormal { mean: 2.0, cov: 2.5 }], &[]),
        "`x0`: coefficient of variation 2.5 is outside 0 to 2 (0 excluded)"
    );
    assert!(refused(&[Uncertain::Lognormal { mean: f64::NAN, cov: 0.3 }], &[]).contains("must be a finite number"));
    assert!(refused(&[Uncertain::Normal { mean: 1.0, standard_deviation: f64::NAN }], &[]).contains("must be positive"));
    assert!(refused(&[Uncertain::Uniform { min: 2.0, max: 1.0 }], &[]).contains("is empty"));
    let both = [Uncertain::Lognormal { mean: -2.0, cov: 0.3 }, Uncertain::Uniform { min: 2.0, max: 1.0 }];
    assert_eq!(Variables::new(&named(&both), &[]).unwrap_err().len(), 2, "all faults at once");
    let far = Uncertain::TruncatedNormal { mean: 0.0, standard_deviation: 1.0, min: 60.0, max: 61.0 };
    assert!(refused(&[far], &[]).contains("holds no probability"));
}

#[test]
fn contradictory_correlations_are_refused() {
    let unit = Uncertain::Normal { mean: 0.0, standard_deviation: 1.0 };
    let pair = |a, b, coefficient| Correlation { a, b, coefficient };
    let message = refused(&[unit, unit, unit], &[pair(0, 1, 0.9), pair(1, 2, 0.9), pair(0, 2, -0.9)]);
    assert_eq!(message, "the correlation matrix is not positive definite (it fails at `x2`)");
    assert!(refused(&[unit, unit], &[pair(0, 1, 1.0)]).contains("must be inside (-1, 1)"));
    // Two lognormals of cov 1.5 cannot be correlated by -0.9.
    let wide = Uncertain::Lognormal { mean: 1.0, cov: 1.5 };
    assert!(matches!(
        Variables::new(&named(&[wide, wide]), &[pair(0, 1, -0.9)]).unwrap_err()[0],
        VariableError::Correlation { lowest, .. } if -0.9 < lowest
    ));
}
