use super::*;

fn series(points: &[(f64, f64)]) -> Vec<Point> {
    points.iter().map(|&(depth_m, excess)| Point { depth_m, excess, error: 0.01 }).collect()
}

fn label() -> CheckResult {
    CheckResult {
        check: "roof tension",
        situation: "ordinary".into(),
        inputs: "cautious",
        demand_kpa: 1.0,
        capacity_kpa: 2.0,
        utilization: Some(0.5),
        error: 0.0,
        background_kpa: None,
        averaging_length_m: None,
        over: false,
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
    }
}

#[test]
fn a_straight_series_crosses_where_arithmetic_says() {
    let c = first_crossing(&series(&[(0.0, -1.0), (2.0, -0.5), (4.0, 0.0), (6.0, 0.5)]), 0.0).unwrap();
    assert!((c.depth_m - 4.0).abs() < 1e-12, "{c:?}");
    // slope 0.25 a metre, mesh error 0.01: 0.04 m, no curvature
    assert!((c.error_m - 0.04).abs() < 1e-12, "{c:?}");
}

#[test]
fn curvature_is_part_of_the_error() {
    // excess = d^2/16 - 1, root 4 exactly; chord between 3 and 5 gives 3 + 2*(7/16)/(16/16) = 3.875
    let parabola: Vec<_> = [1.0, 3.0, 5.0, 7.0].iter().map(|&d| Point { depth_m: d, excess: d * d / 16.0 - 1.0, error: 0.0 }).collect();
    let c = first_crossing(&parabola, 1.0).unwrap();
    assert!((c.depth_m - 3.875).abs() < 1e-12, "{c:?}");
    assert!((4.0 - c.depth_m).abs() <= c.error_m && c.error_m < 0.2, "{c:?}");
}

#[test]
fn a_peak_before_the_survey_is_an_earlier_stretch() {
    let s = series(&[(0.0, -0.5), (1.0, 0.5), (2.0, -0.5), (3.0, -0.2), (4.0, 0.2)]);
    let c = critical_depth(&s, 3.0, &label());
    assert!((c.depth_m.unwrap() - 3.5).abs() < 1e-12);
    assert_eq!(c.earlier_over, vec![[0.5, 1.5]]);
    assert!(!c.already_over && !c.over_without_undercut);
}

#[test]
fn over_at_zero_and_at_the_survey_is_over_without_undercut() {
    let c = critical_depth(&series(&[(0.0, 0.1), (1.0, 0.2), (2.0, 0.3)]), 1.0, &label());
    assert!(c.already_over && c.over_without_undercut);
    assert_eq!(c.depth_m, Some(1.0));
    assert!(c.earlier_over.is_empty());
}

#[test]
fn not_reached_is_none() {
    let c = critical_depth(&series(&[(0.0, -0.9), (1.0, -0.8), (2.0, -0.7)]), 1.0, &label());
    assert_eq!((c.depth_m, c.already_over), (None, false));
}

#[test]
fn no_utilization_counts_by_its_mark() {
    let mut r = label();
    r.utilization = None;
    r.over = true;
    assert!(0.0 < excess(&r, 1.0));
    r.over = false;
    assert!(excess(&r, 1.0) < 0.0);
}
