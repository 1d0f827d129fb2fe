use super::{FORM_PARAMS, FormError, design_point};
use crate::model::Uncertain;
use crate::outlook::variables::Variables;

/// Reliability index of a limit function of physical inputs.
fn beta(inputs: &[Uncertain], g: impl Fn(&[f64]) -> f64) -> (f64, Vec<f64>, Vec<f64>) {
    let named: Vec<(String, Uncertain)> = inputs.iter().map(|u| (String::new(), *u)).collect();
    let set = Variables::new(&named, &[]).unwrap();
    let limit = |u: &[f64]| {
        let mut x = vec![0.0; inputs.len()];
        set.from_standard(u, &mut x);
        g(&x)
    };
    let found = design_point(&limit, &vec![0.0; inputs.len()], &FORM_PARAMS).unwrap();
    let mut x = vec![0.0; inputs.len()];
    set.from_standard(&found.u, &mut x);
    (found.beta, found.alpha, x)
}

fn normal(mean: f64, standard_deviation: f64) -> Uncertain {
    Uncertain::Normal { mean, standard_deviation }
}

#[track_caller]
fn close(value: f64, expected: f64, tolerance: f64) {
    assert!((value - expected).abs() <= tolerance, "{value} against {expected}");
}

/// F08 (published examples of the method, Hasofer & Lind 1974 and later textbooks; from memory, recomputed). Printed digits are the tolerance.
#[test]
fn f08_published_examples() {
    close(beta(&[normal(40.0, 5.0), normal(50.0, 2.5), normal(1000.0, 200.0)], |x| x[0] * x[1] - x[2]).0, 3.04907, 5e-6);
    close(beta(&[normal(10.0, 5.0), normal(10.0, 5.0)], |x| x[0].powi(3) + x[1].powi(3) - 18.0).0, 2.24009, 5e-6);
    close(beta(&[normal(10.0, 5.0), normal(9.9, 5.0)], |x| x[0].powi(3) + x[1].powi(3) - 18.0).0, 2.22599, 5e-6);
    close(beta(&[normal(0.0, 1.0), normal(0.0, 1.0)], |x| (0.2 * x[0] + 1.4).exp() - x[1]).0, 3.34969, 5e-6);
    let (linear, ..) = beta(&[normal(200.0, 20.0), normal(100.0, 30.0)], |x| x[0] - x[1]);
    close(linear, 2.77350, 5e-6);
    close(crate::outlook::normal::cdf(-linear), 2.7728e-3, 5e-8);
}

fn overhang(mean_depth_m: f64) -> [Uncertain; 4] {
    let lognormal = |mean, cov| Uncertain::Lognormal { mean, cov };
    [lognormal(500.0, 0.3), lognormal(4.0, 0.05), lognormal(25.0, 0.05), lognormal(mean_depth_m, 0.1)]
}

/// F07 (closed form): g = st h - 3 gamma L^2 with all inputs lognormal is linear in the normals, so the method is exact.
#[test]
fn f07_exact_overhang() {
    for (mean_depth_m, expected) in [(3.0, 2.90977), (4.0, 1.31994), (5.0, 0.08676), (6.0, -0.92081)] {
        let g = |x: &[f64]| x[0] * x[1] - 3.0 * x[2] * x[3] * x[3];
        let (found, alpha, x) = beta(&overhang(mean_depth_m), g);
        close(found, expected, 5e-6);
        // The closed form itself, to the accuracy the method is asked for.
        let zeta = |v: f64| (1.0 + v * v).ln().sqrt();
        let lambda = |m: f64, v: f64| m.ln() - 0.5 * zeta(v).powi(2);
        let spread = (zeta(0.3).powi(2) + 2.0 * zeta(0.05).powi(2) + 4.0 * zeta(0.1).powi(2)).sqrt();
        let middle = lambda(500.0, 0.3) + lambda(4.0, 0.05) - 3.0_f64.ln() - lambda(25.0, 0.05) - 2.0 * lambda(mean_depth_m, 0.1);
        close(found, middle / spread, 1e-8);
        if (mean_depth_m - 4.0).abs() < 1e-9 {
            for (a, e) in alpha.iter().zip([0.8112, 0.1381, -0.1381, -0.5513]) {
                close(*a, e, 5e-5);
            }
            for (x, (e, half_digit)) in x.iter().zip([(349.75, 5e-3), (3.9588, 5e-5), (25.197, 5e-4), (4.2798, 5e-5)]) {
                close(*x, e, half_digit);
            }
        }
    }
}

#[test]
fn what_cannot_be_reached_is_said() {
    let params = FORM_PARAMS;
    assert_eq!(design_point(&|_| 1.0, &[0.0, 0.0], &params), Err(FormError::Flat { distance: 0.0 }));
    assert!(design_point(&|u| u[0] * u[0] + 1.0 + u[1] * u[1] * 0.5 + u[0], &[0.0, 0.0], &params).is_err());
    assert!(matches!(design_point(&|u| 25.0 - u[0], &[0.0], &params), Err(FormError::OutOfReach { .. })));
    assert!(matches!(design_point(&|_| f64::NAN, &[0.0], &params), Err(FormError::NotFinite { .. })));
}
