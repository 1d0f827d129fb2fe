use super::{chance_ahead, day_after, depth_of_chance, next_survey_yr};
use crate::model::Date;
use crate::outlook::critical::SampledDepths;
use crate::outlook::growth::{Growth, GrowthParams};
use crate::outlook::years::Cliff;

/// By hand: critical depths evenly from 2 to 6 m, known growth of 0.4 m ahead: at depth d the chance is 0.4 / (6 - d).
#[test]
fn the_chance_ahead_counts_only_what_still_stands() {
    let n = 4000;
    let depths = SampledDepths {
        depth_m: (0..n).map(|i| 2.0 + 4.0 * (f64::from(i) + 0.5) / f64::from(n)).collect(),
        by_chance_m: vec![],
        annual_chances: vec![],
        governor: vec![None; n as usize],
        weight: vec![1.0; n as usize],
        n_reached: 1,
        n_places: 1,
    };
    let cliff = Cliff { depths: &depths, likelihood: None, today_m: 2.0 };
    let growth = Growth::new(&GrowthParams {
        mean_m_per_yr: 0.2,
        uncertainty_cov: 0.0,
        year_to_year_cov: 0.0,
        storms: None,
        sea_level_rise: None,
        horizon_yr: 50.0,
    })
    .unwrap()
    .by(2.0)
    .unwrap();
    for depth in [2.0, 4.0, 5.0] {
        let expected = 0.4 / (6.0 - depth);
        assert!((chance_ahead(&cliff, &growth, depth) - expected).abs() < 1e-3, "{depth}");
    }
    // 0.2 is passed at 6 - 0.4 / 0.2 = 4 m; the walk is to a centimetre and the samples lie a millimetre apart.
    assert!((depth_of_chance(&cliff, &growth, 0.2, 6.0).unwrap() - 4.0).abs() < 0.02);
    assert!((depth_of_chance(&cliff, &growth, 0.05, 6.0).unwrap() - 2.0).abs() < 1e-12, "already passed today");
    assert!((chance_ahead(&cliff, &growth, 7.0) - 1.0).abs() < 1e-15);
}

#[test]
fn look_again_in_time() {
    let chances = [(0.0, 0.0), (1.0, 1e-4), (2.0, 3e-4), (10.0, 2e-2)];
    assert!((next_survey_yr(&chances, Some(1e-3)) - 1.0).abs() < 1e-12, "a tenth of the accepted chance is reached after a year");
    assert!((next_survey_yr(&chances, Some(0.1)) - 2.0).abs() < 1e-12);
    assert!((next_survey_yr(&chances, Some(1e-6)) - 1.0 / 12.0).abs() < 1e-12);
    assert!((next_survey_yr(&chances, None) - 2.0).abs() < 1e-12);
    let day = |year, month, day| Date { year, month, day };
    assert_eq!(day_after(day(2026, 3, 14), 2.0), "2028-03-14");
    assert_eq!(day_after(day(2026, 11, 30), 0.25), "2027-02-28");
    assert_eq!(day_after(day(2027, 11, 30), 0.26), "2028-02-29");
}
