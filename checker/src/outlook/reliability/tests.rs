use super::{EN_1990_TARGETS, index_of, index_over_years, probability_of, series_bounds, two_point_estimate};

#[track_caller]
fn close(value: f64, expected: f64, tolerance: f64) {
    assert!((value - expected).abs() <= tolerance, "{value} against {expected}");
}

/// F01: EN 1990 Annex C, Table C1 with more digits (from memory, recomputed); tolerance half a digit.
#[test]
fn f01_index_of_probability() {
    let table = [(1e-1, 1.2816), (1e-2, 2.3263), (1e-3, 3.0902), (1e-4, 3.7190), (1e-5, 4.2649), (1e-6, 4.7534), (1e-7, 5.1993)];
    for (p, expected) in table {
        close(index_of(p), expected, 5e-5);
        close(probability_of(index_of(p)) / p, 1.0, 1e-12);
    }
}

/// F02 and F02b: EN 1990 Table B2 (published) and its conversion between one and fifty years (recomputed).
#[test]
fn f02_targets_and_years() {
    for (one, fifty) in [(4.2, 3.209), (4.7, 3.826), (5.2, 4.418)] {
        close(index_over_years(one, 1.0, 50.0), fifty, 5e-4);
        close(index_over_years(index_over_years(one, 1.0, 50.0), 50.0, 1.0), one, 1e-10);
    }
    for (fifty, one) in [(3.3, 4.272), (3.8, 4.678), (4.3, 5.099)] {
        close(index_over_years(fifty, 50.0, 1.0), one, 5e-4);
    }
    // The table's own two columns agree to its one decimal place.
    for target in EN_1990_TARGETS {
        close(index_over_years(target.one_year, 1.0, 50.0), target.fifty_years, 0.15);
    }
}

/// F09: Rosenblueth 1975 (from memory, recomputed).
#[test]
fn f09_two_point_estimate() {
    let [mean, deviation] = two_point_estimate(&|x| x[0] * x[0], &[[10.0, 2.0]]);
    close(mean, 104.0, 1e-12);
    close(deviation, 40.0, 1e-12);
    let inputs = [[500.0, 150.0], [4.0, 0.2], [25.0, 1.25], [4.0, 0.4]];
    let [mean, deviation] = two_point_estimate(&|x| x[0] * x[1] / (3.0 * x[2] * x[3] * x[3]), &inputs);
    close(mean, 1.72182, 5e-6);
    close(deviation, 0.64058, 5e-6);
}

/// F10: three limits at 0.01 (closed form).
#[test]
fn f10_series_of_three() {
    let [dependent, independent] = series_bounds(&[0.01; 3]);
    close(dependent, 0.01, 1e-15);
    close(independent, 0.029701, 5e-13);
}
