//! Every rule against the exact integrals of monomials.
use super::*;

/// `∫ x^a y^b` over the reference triangle `= a! b! / (a + b + 2)!`.
fn exact(a: u32, b: u32) -> f64 {
    let factorial = |n: u32| (1..=n).map(f64::from).product::<f64>();
    factorial(a) * factorial(b) / factorial(a + b + 2)
}

#[track_caller]
fn check(rule: &[TrianglePoint], degree: i32) {
    for a in 0..=degree {
        for b in 0..=degree - a {
            let sum: f64 = rule.iter().map(|(p, w)| w * p[0].powi(a) * p[1].powi(b)).sum();
            let want = exact(a.unsigned_abs(), b.unsigned_abs());
            // 15 printed digits of the table, weights adding to 1/2.
            assert!((sum - want).abs() < 2e-16, "x^{a} y^{b}: {sum} for {want}");
        }
    }
    let wrong: f64 = rule.iter().map(|(p, w)| w * p[0].powi(degree + 1)).sum();
    assert!((wrong - exact(degree.unsigned_abs() + 1, 0)).abs() > 1e-9, "the stated degree is the highest");
}

#[test]
fn triangle_rules_have_their_degree() {
    check(&TRIANGLE_DEGREE_2, 2);
    check(&TRIANGLE_DEGREE_4, 4);
    check(&TRIANGLE_DEGREE_6, 6);
}

#[test]
fn gauss_rules_have_their_degree() {
    for n in 1..=20 {
        let rule = gauss_unit(n);
        for degree in 0..2 * n {
            let sum: f64 = rule.iter().map(|(x, w)| w * x.powi(i32::try_from(degree).unwrap())).sum();
            assert!((sum - 1.0 / (degree as f64 + 1.0)).abs() < 1e-14, "n = {n}, degree {degree}: {sum}");
        }
        assert!(rule.is_sorted_by(|a, b| a.0 < b.0));
    }
}
