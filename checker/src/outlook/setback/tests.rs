use super::{Brow, edge_quantiles, year_passed};
use crate::outlook::critical::SampledDepths;
use crate::outlook::cycle::BrowCycle;
use crate::outlook::growth::{Growth, GrowthParams};
use crate::outlook::years::{Cliff, Timeline};

fn growth(mean: f64, uncertainty_cov: f64) -> Growth {
    Growth::new(&GrowthParams {
        mean_m_per_yr: mean,
        uncertainty_cov,
        year_to_year_cov: 0.0,
        storms: None,
        sea_level_rise: None,
        horizon_yr: 75.0,
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

fn cycles(depth_m: &[f64], today_m: f64, lost_m: f64) -> Vec<BrowCycle> {
    depth_m.iter().map(|&critical_m| BrowCycle { today_m, critical_m, lost_m, lay_back_m: 0.0 }).collect()
}

/// F14 (published form: width of the failure + rate x life + buffer; the example 0.10 x 75 + 8 + 3 = 18.5 m is worked by hand). With a
/// vanishing critical depth the brow follows the undercut without steps, so the tool gives the same sum.
#[test]
fn f14_setback_is_width_plus_rate_times_life() {
    let critical = [1e-4; 2];
    let found = depths(&critical);
    let cycles = cycles(&critical, 0.0, 8.0);
    let brow = Brow { cliff: Cliff { depths: &found, likelihood: None, today_m: 0.0 }, cycles: &cycles };
    let timeline = Timeline::at(&growth(0.10, 0.0), &[0.0, 75.0]).unwrap();
    let setback = brow.by(&timeline, 1).setback_m(0.5) + 3.0;
    assert!((setback - 18.5).abs() < 0.011, "{setback}");
}

/// Closed form: one critical depth, lognormal rate; the edge passes lost + n D when the rate exceeds (D - D0 + n D) / t.
#[test]
fn setback_steps_with_the_collapses() {
    let critical = [4.0; 100];
    let found = depths(&critical);
    let cycles = cycles(&critical, 2.0, 5.0);
    let brow = Brow { cliff: Cliff { depths: &found, likelihood: None, today_m: 2.0 }, cycles: &cycles };
    let law = growth(0.06, 0.5);
    let timeline = Timeline::new(&law, 75.0).unwrap();
    let by = brow.by(&timeline, timeline.index_at(75.0));
    let reach = |gain: f64| law.by(75.0).unwrap().exceedance(gain);
    assert!((by.chance_beyond(5.0).probability - reach(2.0)).abs() < 1e-12);
    assert!((by.chance_beyond(5.1).probability - reach(6.0)).abs() < 1e-12);
    // Accepting what lies between those chances, one collapse has to be allowed for; above, none.
    assert!((by.setback_m(0.5 * (reach(2.0) + reach(6.0))) - 5.0).abs() < 0.011);
    assert!(by.setback_m(reach(2.0) + 1e-6) <= 0.0);
    assert!((by.setback_m(0.5 * (reach(6.0) + reach(10.0))) - 9.0).abs() < 0.011);
    // The year at which 5 m behind the brow is passed with 10 %: rate x t = 2 m at the 90 % rate.
    let zeta = 1.25_f64.ln().sqrt();
    let exact = 2.0 / (0.06 * (1.2815515655446004 * zeta - 0.5 * zeta * zeta).exp());
    let year = year_passed(&brow, &timeline, 5.0, 0.1).unwrap();
    // Straight lines between whole years.
    assert!((year - exact).abs() < 0.05, "{year} against {exact}");
    assert_eq!(year_passed(&brow, &Timeline::at(&law, &[0.0, 1.0]).unwrap(), 5.0, 0.1), None);
}

#[test]
fn the_fan_never_moves_back() {
    let critical: Vec<f64> = (0..500).map(|i| 3.0 + 0.01 * f64::from(i)).collect();
    let found = depths(&critical);
    let cycles = cycles(&critical, 2.0, 5.0);
    let brow = Brow { cliff: Cliff { depths: &found, likelihood: None, today_m: 2.0 }, cycles: &cycles };
    let timeline = Timeline::new(&growth(0.1, 0.4), 75.0).unwrap();
    let draws: Vec<f64> = (0..500).map(|i| (f64::from(i * 7 % 500) + 0.5) / 500.0).collect();
    let fans: Vec<Vec<f64>> = (0..=75).map(|i| edge_quantiles(&brow, &timeline, i, &draws, &[0.05, 0.5, 0.95])).collect();
    assert!(fans.iter().all(|f| f[0] <= f[1] && f[1] <= f[2]));
    assert!(fans.windows(2).all(|f| (0..3).all(|k| f[0][k] <= f[1][k])));
    assert!(0.0 < fans[75][1]);
}
