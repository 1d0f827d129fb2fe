use super::{cdf, quantile};

/// Tail values from a 50-digit evaluation of erfc (published tables agree to their last digit).
#[test]
fn the_tails_keep_their_digits() {
    for (z, expected) in [(-3.0, 1.3498980316300946e-3), (-6.0, 9.86587645037698e-10), (-10.0, 7.619853024160525e-24)] {
        let error = (cdf(z) / expected - 1.0).abs();
        assert!(error < 1e-13, "Phi({z}) is out by {error:e}");
    }
    // The 97.5 % point, from memory of every table: 1.959963984540054.
    assert!((quantile(0.975) - 1.959963984540054).abs() < 1e-14);
    assert!(quantile(1.5).is_nan() && quantile(f64::NAN).is_nan());
}

/// The quantile undoes the distribution function over the whole range used by samples (5.5e-17 is the smallest draw).
#[test]
fn quantile_inverts_cdf() {
    for p in [5.5e-17, 1e-12, 1e-7, 1e-3, 0.2, 0.5, 0.9, 1.0 - 1e-9] {
        let error = (cdf(quantile(p)) / p - 1.0).abs();
        // erfc amplifies a relative error e of z by z^2: 8.4^2 x 8e-15 = 6e-13.
        assert!(error < 1e-12, "p = {p:e} comes back with a relative error of {error:e}");
    }
}
