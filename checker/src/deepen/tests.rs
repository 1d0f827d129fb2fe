use super::*;

/// A made-up cliff: one check whose utilization is a given function of depth.
fn solver(utilization: impl Fn(f64) -> f64) -> impl Fn(&[f64]) -> Result<Vec<DepthPoint>, String> {
    move |depths| {
        let one = |&depth_m: &f64| {
            let u = utilization(depth_m);
            let check = CheckResult {
                check: "cliff-top tension",
                situation: "ordinary".into(),
                inputs: "cautious",
                demand_kpa: u,
                capacity_kpa: 1.0,
                utilization: Some(u),
                error: 0.0,
                background_kpa: None,
                averaging_length_m: None,
                over: 1.0 < u,
                at: [0.0, 0.0],
                rock: "rock".into(),
                closed_form_demand_kpa: None,
                k0_case: None,
                demand_kn_per_m: None,
                capacity_kn_per_m: None,
                beyond_apex: false,
                short_segment: false,
                zone_m2: None,
                line: None,
            };
            DepthPoint { depth_m, checks: vec![check], probes: Vec::new(), cuts: Vec::new() }
        };
        Ok(depths.iter().map(one).collect())
    }
}

fn params() -> DeepenParams {
    DeepenParams { surveyed_m: 2.34, search_to_m: 10.0, step_m: 0.5, required_reserve: 1.0, averaging_length_m: 1.0 }
}

#[test]
fn first_depths_hold_zero_the_survey_and_the_end() {
    let depths = first_depths(&params());
    assert_eq!(depths.len(), 22);
    for d in [0.0, 2.34, 10.0] {
        assert!(depths.iter().any(|x| (x - d).abs() < 1e-12), "{d} in {depths:?}");
    }
    assert!(depths.windows(2).all(|w| w[0] < w[1]));
}

#[test]
fn the_root_of_a_known_curve_is_found_to_two_grid_steps() {
    // u = (d / 5.4321)^2 passes 1 at 5.4321 m
    let points = series(&params(), &solver(|d| (d / 5.4321_f64).powi(2))).unwrap();
    let key = keys(&points).remove(0);
    let c = first_crossing(&excess_series(&points, &key, 1.0), 2.34).unwrap();
    assert!(c.over_m - c.under_m <= 0.0201, "{c:?}");
    assert!((c.depth_m - 5.4321).abs() < 2e-4, "{c:?}");
    assert!((c.depth_m - 5.4321).abs() <= c.error_m.max(1e-5), "{c:?}");
}

#[test]
fn a_bump_between_two_steps_near_the_limit_is_resolved() {
    // a smooth hump that is over 1 between about 4.0 and 4.6 m
    let hump = |d: f64| 0.8 + 0.25 * (-((d - 4.3) / 0.6_f64).powi(2)).exp();
    let points = series(&params(), &solver(hump)).unwrap();
    let key = keys(&points).remove(0);
    let c = first_crossing(&excess_series(&points, &key, 1.0), 2.34).unwrap();
    let root = 4.3 - 0.6 * (0.25_f64 / 0.2).ln().sqrt();
    assert!((c.depth_m - root).abs() < 0.02, "{c:?} against {root}");
}

#[test]
fn a_flat_series_asks_for_nothing_more() {
    let points = series(&params(), &solver(|d| 0.02 * d)).unwrap();
    assert_eq!(points.len(), first_depths(&params()).len());
}
