use super::{Cliff, Timeline, time_at_chance};
use crate::model::{Storms, Uncertain};
use crate::outlook::critical::{SampledDepths, SearchParams, critical_depths};
use crate::outlook::demand_model::tests::fibre;
use crate::outlook::growth::{Growth, GrowthParams};
use crate::outlook::normal;
use crate::outlook::sampling::Draws;

fn growth(mean: f64, uncertainty_cov: f64, year_to_year_cov: f64) -> Growth {
    Growth::new(&GrowthParams {
        mean_m_per_yr: mean,
        uncertainty_cov,
        year_to_year_cov,
        storms: None,
        sea_level_rise: None,
        horizon_yr: 50.0,
    })
    .unwrap()
}

fn depths(depth_m: &[f64]) -> SampledDepths {
    let n = depth_m.len();
    SampledDepths {
        depth_m: depth_m.to_vec(),
        by_chance_m: vec![],
        annual_chances: vec![],
        governor: vec![None; n],
        weight: vec![1.0; n],
        n_reached: 1,
        n_places: 1,
    }
}

/// Closed form: demand k d x unit weight, lognormal strength, unit weight and rate. The undercut of 2 m today reaches D = st / (k gamma):
/// ln(D) is normal, and P(t) = E[Phi-law of the rate at D - 2], here by a midpoint rule over ln D.
#[test]
fn chance_by_year_is_the_closed_form() {
    let (strength, weight) = (Uncertain::Lognormal { mean: 500e3, cov: 0.2 }, Uncertain::Lognormal { mean: 25e3, cov: 0.05 });
    let series: Vec<f64> = (0..40).map(|i| 2.0 + 0.5 * f64::from(i)).collect();
    let (model, variables) = fibre(strength, weight, &series, |d| 4.0 * d);
    let depth_indices: Vec<usize> = (0..40).collect();
    let found = critical_depths(&model, &variables, &Draws::plain(2), &SearchParams { n_samples: 100_000, depth_indices: &depth_indices });
    let cliff = Cliff { depths: &found, likelihood: None, today_m: 2.0 };
    let law = growth(0.06, 0.5, 0.0);
    let timeline = Timeline::new(&law, 50.0).unwrap();
    let chances = cliff.chances(&timeline);

    let zeta = |v: f64| (1.0 + v * v).ln().sqrt();
    let lambda = |m: f64, v: f64| m.ln() - 0.5 * zeta(v).powi(2);
    let (mean_ln, sd_ln) = (lambda(500e3, 0.2) - 4.0_f64.ln() - lambda(25e3, 0.05), zeta(0.2).hypot(zeta(0.05)));
    for i_time in [10, 25, 50] {
        let by = &timeline.growth[i_time];
        let exact: f64 = (0..2000)
            .map(|i| mean_ln + sd_ln * normal::quantile((f64::from(i) + 0.5) / 2000.0))
            .map(|ln_d| by.exceedance(ln_d.exp() - 2.0) / 2000.0)
            .sum();
        let estimate = chances[i_time].unconditioned;
        let off = (estimate.probability - exact).abs() / estimate.standard_error;
        assert!(off < 3.5, "year {i_time}: {estimate:?} against {exact}, {off:.1} errors");
    }
    assert!(chances.windows(2).all(|c| c[0].unconditioned.probability <= c[1].unconditioned.probability), "must rise with time");
    let curve: Vec<(f64, f64)> = chances.iter().map(|c| (c.time_yr, c.standing.unwrap().probability)).collect();
    let p05 = time_at_chance(&curve, 0.05).unwrap();
    let i = curve.iter().position(|(t, _)| p05 <= *t).unwrap();
    let back = curve[i - 1].1 + (curve[i].1 - curve[i - 1].1) * (p05 - curve[i - 1].0) / (curve[i].0 - curve[i - 1].0);
    assert!((back - 0.05).abs() < 1e-12, "P(t <= p05) = {back}");
    assert_eq!(time_at_chance(&curve, 1.0), None, "never beyond the last time");
}

/// By hand: four samples, one already over; deterministic growth of 0.1 m/yr reaches 1 m in 10 years.
#[test]
fn given_that_it_stands() {
    let found = depths(&[2.0, 2.5, 3.5, f64::INFINITY]);
    let cliff = Cliff { depths: &found, likelihood: None, today_m: 2.0 };
    assert!((cliff.already_fallen().probability - 0.25).abs() < 1e-15);
    let timeline = Timeline::at(&growth(0.1, 0.0, 0.0), &[0.0, 4.9, 10.0, 20.0]).unwrap();
    let chances = cliff.chances(&timeline);
    let of = |i: usize| (chances[i].unconditioned.probability, chances[i].standing.unwrap().probability);
    for (i, (all, standing)) in [(0, (0.25, 0.0)), (1, (0.25, 0.0)), (2, (0.5, 1.0 / 3.0)), (3, (0.75, 2.0 / 3.0))] {
        assert!((of(i).0 - all).abs() < 1e-15 && (of(i).1 - standing).abs() < 1e-15, "time {i}: {:?}", of(i));
    }
    // Evidence that rules out the second sample: of the two standing ones left, one is reached in 20 years.
    let likelihood = [1.0, 0.0, 1.0, 1.0];
    let after = Cliff { likelihood: Some(&likelihood), ..cliff }.chances(&timeline);
    assert!((after[3].standing.unwrap().probability - 0.5).abs() < 1e-15);
    assert!((after[3].unconditioned.probability - 2.0 / 3.0).abs() < 1e-15);
}

/// By hand: the rare situation's depth is reached after 10 years; from then on 0.01 a year, ten years later 1 - 0.99^10 at least
/// and, as arrival within a year counts for all of it, 1 - 0.99^11 at most.
#[test]
fn a_rare_situation_waits_for_its_chance() {
    let mut found = depths(&[f64::INFINITY; 2]);
    found.by_chance_m = vec![vec![2.95; 2]];
    found.annual_chances = vec![0.01];
    let cliff = Cliff { depths: &found, likelihood: None, today_m: 2.0 };
    let timeline = Timeline::new(&growth(0.1, 0.0, 0.0), 50.0).unwrap();
    let chances = cliff.chances(&timeline);
    assert!(chances[9].unconditioned.probability <= 0.0);
    let at = chances[20].unconditioned.probability;
    assert!((1.0 - 0.99_f64.powi(10)..=1.0 - 0.99_f64.powi(11) + 1e-12).contains(&at), "{at}");
    // Already there today: exactly the years from today.
    found.by_chance_m = vec![vec![1.5; 2]];
    let cliff = Cliff { depths: &found, likelihood: None, today_m: 2.0 };
    let at = cliff.chances(&timeline)[20].unconditioned.probability;
    assert!((at - (1.0 - 0.99_f64.powi(20))).abs() < 1e-12, "{at}");
}

/// Frequent storms can be summed over the horizon but not over twenty of them: the timeline then ends sooner.
#[test]
fn frequent_storms_shorten_the_look_ahead() {
    let storms = Some(Storms { per_yr: 3.0, jump_m: Uncertain::Lognormal { mean: 0.01, cov: 0.5 } });
    let law = Growth::new(&GrowthParams {
        mean_m_per_yr: 0.03,
        uncertainty_cov: 0.3,
        year_to_year_cov: 0.0,
        storms,
        sea_level_rise: None,
        horizon_yr: 50.0,
    })
    .unwrap();
    let timeline = Timeline::new(&law, 50.0).unwrap();
    let last = timeline.times_yr[timeline.times_yr.len() - 1];
    assert!(180.0 < last && last <= 200.0, "{last}");
    assert!(Timeline::new(&law, 300.0).is_err());
}
