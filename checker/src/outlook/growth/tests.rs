use super::{Growth, GrowthError, GrowthParams, first_passage, scaled_rate};
use crate::model::{SeaLevelRise, Storms, Uncertain};
use crate::outlook::normal;
use crate::outlook::random::Streams;

fn params(uncertainty_cov: f64, year_to_year_cov: f64) -> GrowthParams {
    GrowthParams { mean_m_per_yr: 0.06, uncertainty_cov, year_to_year_cov, storms: None, sea_level_rise: None, horizon_yr: 50.0 }
}

#[track_caller]
fn close(value: f64, expected: f64, tolerance: f64) {
    assert!((value - expected).abs() <= tolerance, "{value} against {expected}");
}

/// The worked example of the method: from 2.3 to 6.42 m at 0.06 m/yr in 50 years, cov 0.5 of the one kind and of the other.
/// By hand: lognormal, z = (ln 0.0824 - ln 0.06 + 0.1116) / 0.4724 = 0.9075; swings: (4.12 - 3) / (0.03 sqrt 50) = 5.28.
#[test]
fn not_knowing_and_swinging_are_different_things() {
    let not_knowing = Growth::new(&params(0.5, 0.0)).unwrap().by(50.0).unwrap().exceedance(4.12);
    close(not_knowing, 0.182, 5e-4);
    let swings = Growth::new(&params(0.0, 0.5)).unwrap().by(50.0).unwrap().exceedance(4.12);
    let at_the_end = normal::cdf(-(4.12 - 3.0) / (0.03 * 50.0_f64.sqrt()));
    close(at_the_end, 6.5e-8, 1e-9);
    // To have been there at any time before is a little likelier than to be there at the end.
    assert!(at_the_end < swings && swings < 1.25 * at_the_end, "{swings:e} against {at_the_end:e}");
}

/// The first-passage law against 4,000 walks of 4,000 steps; a walk in steps looks less often than always, which moves
/// the bar by 0.5826 of a step's deviation (continuity correction of Chernoff 1965, from memory).
#[test]
fn first_passage_is_what_walks_do() {
    let (a, rate, cov, years) = (2.0, 0.06, 3.0, 20.0);
    let n_steps = 4000;
    let step_yr = years / f64::from(n_steps);
    let streams = Streams::new(5);
    let n_walks = 4000_u64;
    let hits = (0..n_walks)
        .filter(|&i| {
            let mut stream = streams.stream(i);
            let mut depth = 0.0;
            (0..n_steps).any(|_| {
                depth += rate * step_yr + cov * rate * step_yr.sqrt() * stream.normal();
                a <= depth
            })
        })
        .count();
    let shifted = a + 0.5826 * cov * rate * step_yr.sqrt();
    let expected = first_passage(shifted, rate, cov, years);
    let found = hits as f64 / n_walks as f64;
    let error = (expected * (1.0 - expected) / n_walks as f64).sqrt();
    close(found, expected, 3.5 * error);
}

/// Both kinds together: the mean over rates of the first-passage law, by 200,000 drawn rates.
#[test]
fn both_kinds_mix() {
    let growth = Growth::new(&params(0.5, 0.8)).unwrap().by(30.0).unwrap();
    let zeta = 1.25_f64.ln().sqrt();
    let streams = Streams::new(9);
    let n = 200_000_u64;
    for a in [0.8, 1.8, 4.0] {
        let draws: Vec<f64> =
            (0..n).map(|i| first_passage(a, 0.06 * (zeta * streams.stream(i).normal() - 0.5 * zeta * zeta).exp(), 0.8, 30.0)).collect();
        let mean = draws.iter().sum::<f64>() / n as f64;
        let error = (draws.iter().map(|d| (d - mean).powi(2)).sum::<f64>()).sqrt() / n as f64;
        close(growth.exceedance(a), mean, 3.5 * error);
        close(growth.exceeded_with(growth.exceedance(a)), a, 1e-9);
    }
}

/// E09: R1 0.3, S1 2, S2 8 mm/yr gives 0.3, 0.6, 1.2 m/yr for m = 0, 0.5, 1 (published formula, recomputed).
#[test]
fn e09_sea_level_scaling() {
    for (m, expected) in [(0.0, 0.3), (0.5, 0.6), (1.0, 1.2)] {
        close(scaled_rate(0.3, 2.0, 8.0, m), expected, 1e-12);
        let rise = SeaLevelRise { now_m_per_yr: 0.002, horizon_m_per_yr: 0.008, exponent: m };
        let growth = Growth::new(&GrowthParams { mean_m_per_yr: 0.3, sea_level_rise: Some(rise), ..params(0.0, 0.0) }).unwrap();
        let gained = |t: f64| growth.by(t).unwrap().exceeded_with(0.5);
        // At and after the horizon the rate is the scaled one.
        close((gained(50.001) - gained(50.0)) / 0.001, expected, 1e-9);
        // In between the integral of sqrt(1 + 3 s / 50) and the like: trapezoid over 5,000 steps.
        let by_hand: f64 = (0..5000).map(|i| 0.3 * (1.0 + 3.0 * (f64::from(i) + 0.5) / 5000.0).powf(m) * 0.01).sum();
        close(gained(50.0), by_hand, 1e-6);
    }
}

/// Storm jumps: with one known jump size the sum is Poisson, so the chance of at least three jumps is a closed form.
#[test]
fn storms_are_a_poisson_number_of_jumps() {
    let storms = Some(Storms { per_yr: 0.1, jump_m: Uncertain::Normal { mean: 0.5, standard_deviation: 1e-4 } });
    let growth = Growth::new(&GrowthParams { mean_m_per_yr: 1e-4, storms, ..params(0.0, 0.0) }).unwrap().by(20.0).unwrap();
    let n: f64 = 2.0;
    let at_least_three = 1.0 - (-n).exp() * (1.0 + n + n * n / 2.0);
    // Halfway between two and three jumps the steps of the table do not matter.
    close(growth.exceedance(1.25), at_least_three, 1e-9);
}

#[test]
fn chances_fall_with_depth_and_rise_with_time() {
    for p in [params(0.0, 0.0), params(0.5, 0.0), params(0.0, 0.8), params(0.4, 0.8)] {
        for storms in [None, Some(Storms { per_yr: 0.2, jump_m: Uncertain::Lognormal { mean: 0.3, cov: 0.5 } })] {
            let growth = Growth::new(&GrowthParams { storms, ..p }).unwrap();
            let chances: Vec<Vec<f64>> = [1.0, 5.0, 20.0, 50.0]
                .iter()
                .map(|&t| growth.by(t).unwrap())
                .map(|by| (0..60).map(|i| by.exceedance(0.1 * f64::from(i))).collect())
                .collect();
            assert!(chances.iter().all(|row| row.windows(2).all(|c| c[1] <= c[0])), "{p:?}");
            // Tables of different years round differently: 1e-6.
            assert!(chances.windows(2).all(|rows| rows[0].iter().zip(&rows[1]).all(|(a, b)| *a <= b + 1e-6)), "{p:?}");
        }
    }
}

#[test]
fn nonsense_is_refused() {
    let refused = |p: GrowthParams| Growth::new(&p).unwrap_err();
    assert_eq!(refused(GrowthParams { horizon_yr: 0.0, ..params(0.1, 0.1) }), GrowthError::Horizon { value: 0.0 });
    assert_eq!(refused(GrowthParams { mean_m_per_yr: -0.1, ..params(0.1, 0.1) }), GrowthError::Rate { value: -0.1 });
    assert_eq!(refused(params(2.5, 0.0)).to_string(), "uncertainty_cov must be within 0 to 2, got 2.5");
    assert!(matches!(refused(params(0.0, f64::NAN)), GrowthError::Scatter { .. }));
    let rise = SeaLevelRise { now_m_per_yr: 0.0, horizon_m_per_yr: 0.008, exponent: 0.5 };
    assert!(matches!(refused(GrowthParams { sea_level_rise: Some(rise), ..params(0.1, 0.1) }), GrowthError::SeaLevel { .. }));
}
