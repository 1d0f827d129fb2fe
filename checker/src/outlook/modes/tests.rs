use super::CollapseLimits;
use crate::model::Uncertain;
use crate::outlook::critical::{SearchParams, critical_depths};
use crate::outlook::demand_model::tests::{demo, fibre};
use crate::outlook::form::FORM_PARAMS;
use crate::outlook::growth::{Growth, GrowthParams};
use crate::outlook::sampling::{Draws, Mixture, agreement};
use crate::outlook::variables::{Correlation, Variables};
use crate::outlook::years::{Cliff, Timeline};

fn growth(mean: f64) -> Growth {
    Growth::new(&GrowthParams {
        mean_m_per_yr: mean,
        uncertainty_cov: 0.5,
        year_to_year_cov: 0.0,
        storms: None,
        sea_level_rise: None,
        horizon_yr: 50.0,
    })
    .unwrap()
}

/// Closed form: demand k d^0 x gamma at every depth does not grow, so beta = (lambda_st - ln k - lambda_gamma) / sqrt(z_st^2 + z_g^2)
/// with k the model's own unit demand, whatever the rate; with demand k d the depth of 2 m + growth enters through the rate.
#[test]
fn thickness_and_depth_fixed_is_the_closed_form() {
    let (strength, weight) = (Uncertain::Lognormal { mean: 500e3, cov: 0.3 }, Uncertain::Lognormal { mean: 25e3, cov: 0.05 });
    let (model, variables) = fibre(strength, weight, &[2.0, 8.0], |_| 7.0);
    let by = growth(0.06).by(50.0).unwrap();
    let limits = CollapseLimits { model: &model, variables: &variables, depth_indices: &[0, 1], growth: &by };
    let modes = limits.modes(&FORM_PARAMS);
    let zeta = |v: f64| (1.0_f64 + v * v).ln().sqrt();
    let lambda = |m: f64, v: f64| m.ln() - 0.5 * zeta(v).powi(2);
    let beta = (lambda(500e3, 0.3) - 7.0_f64.ln() - lambda(25e3, 0.05)) / zeta(0.3).hypot(zeta(0.05));
    assert!((modes[0].point.beta - beta).abs() < 1e-6, "{} against {beta}", modes[0].point.beta);
    let importance = limits.importance(&modes[0], "deepening of the undercut");
    let share = zeta(0.3).powi(2) / (zeta(0.3).powi(2) + zeta(0.05).powi(2));
    assert_eq!(importance[0].0, "tensile strength");
    assert!((importance[0].1 - share).abs() < 1e-6 && importance[2].1 < 1e-9, "{importance:?}");
}

/// Importance and plain sampling of the invented cliff over all its limits within 3 combined standard errors, by the horizon and sooner.
#[test]
fn importance_and_plain_sampling_agree() {
    let (model, variables) = demo(10, 4);
    let depth_indices: Vec<usize> = (0..10).collect();
    let law = growth(0.03);
    let timeline = Timeline::at(&law, &[0.0, 10.0, 50.0]).unwrap();
    let by = law.by(50.0).unwrap();
    let limits = CollapseLimits { model: &model, variables: &variables, depth_indices: &depth_indices, growth: &by };
    let points: Vec<_> = limits.modes(&FORM_PARAMS).into_iter().map(|m| m.point).collect();
    assert!(5 <= points.len(), "{} design points", points.len());
    let mixture = Mixture::about(&points, variables.n_random());
    let run = |draws: &Draws, n_samples| {
        let found = critical_depths(&model, &variables, draws, &SearchParams { n_samples, depth_indices: &depth_indices });
        Cliff { depths: &found, likelihood: None, today_m: 2.0 }.chances(&timeline)
    };
    let (plain, important) = (run(&Draws::plain(1), 100_000), run(&Draws::mixture(2, mixture), 20_000));
    for (p, i) in plain.iter().zip(&important) {
        let off = agreement(&p.unconditioned, 1e5, &i.unconditioned);
        assert!(off < 3.0, "{p:?} against {i:?}: {off:.1} errors");
    }
}

/// Two correlated inputs: gamma L = alpha, by hand for rho = 0.6 and alpha = (0.6, 0.8): gamma_2 = 1, gamma_1 = 0.6 - 0.6 x 1 = 0.
#[test]
fn correlated_inputs_share_by_their_own_direction() {
    let unit = |name: &str| (name.to_owned(), Uncertain::Normal { mean: 0.0, standard_deviation: 1.0 });
    let set = Variables::new(&[unit("a"), unit("b")], &[Correlation { a: 0, b: 1, coefficient: 0.6 }]).unwrap();
    let gamma = set.undo_correlation(&[0.6, 0.8]);
    // The correlation of two normals comes back from its quadrature to 1e-12.
    assert!(gamma[0].1.abs() < 1e-9 && (gamma[1].1 - 1.0).abs() < 1e-9, "{gamma:?}");
}
