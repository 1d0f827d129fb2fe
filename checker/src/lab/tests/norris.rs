//! Check D07: NIST Statistical Reference Datasets, linear regression, set Norris (calibration of ozone monitors), certified values.
use super::*;

/// Predictor and response, 36 pairs, in the order of the set.
const NORRIS: [(f64, f64); 36] = [
    (0.2, 0.1),
    (337.4, 338.8),
    (118.2, 118.1),
    (884.6, 888.0),
    (10.1, 9.2),
    (226.5, 228.1),
    (666.3, 668.5),
    (996.3, 998.5),
    (448.6, 449.1),
    (777.0, 778.9),
    (558.2, 559.2),
    (0.4, 0.3),
    (0.6, 0.1),
    (775.5, 778.1),
    (666.9, 668.8),
    (338.0, 339.3),
    (447.5, 448.9),
    (11.6, 10.8),
    (556.0, 557.7),
    (228.1, 228.3),
    (995.8, 998.0),
    (887.6, 888.8),
    (120.2, 119.6),
    (0.3, 0.3),
    (0.3, 0.6),
    (556.8, 557.6),
    (339.1, 339.3),
    (887.2, 888.0),
    (999.0, 998.5),
    (779.0, 778.9),
    (11.1, 10.2),
    (118.3, 117.6),
    (229.2, 228.9),
    (669.1, 668.4),
    (448.9, 449.2),
    (0.5, 0.2),
];

#[test]
fn certified_values_to_eleven_digits() {
    let points: Vec<Point> = NORRIS.iter().map(|(x, y)| Point { normal_pa: *x, shear_pa: *y }).collect();
    let fit = Fit::free(&points).unwrap();
    // 1e-11: certified to 15 digits; the intercept is a difference 1600 times smaller than the means it comes from.
    assert_relative_eq!(fit.cohesion_pa, -0.262323073774029, max_relative = 1e-11);
    assert_relative_eq!(fit.tan_friction, 1.00211681802045, max_relative = 1e-13);
    assert_relative_eq!(fit.residual_deviation_pa, 0.884796396144373, max_relative = 1e-11);
    assert_relative_eq!(fit.cohesion_error_pa, 0.232818234301152, max_relative = 1e-11);
    assert_relative_eq!(fit.tan_friction_error, 0.000429796848199937, max_relative = 1e-11);
}
