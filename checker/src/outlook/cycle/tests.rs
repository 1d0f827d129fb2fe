use super::{BrowCycle, GroundLost, lay_back_m};

/// E12 (closed form): D0 1.5, Dc 4 m at 0.05 m/yr: first collapse after 50 years, then every 80.
#[test]
fn e12_cycle_of_collapses() {
    let brow = BrowCycle { today_m: 1.5, critical_m: 4.0, lost_m: 5.5, lay_back_m: 2.0 };
    let at = |years: f64| brow.edge_m(0.05 * years);
    assert!(at(49.99) <= 0.0);
    for (years, edge) in [(50.01, 7.5), (129.99, 7.5), (130.01, 11.5), (210.01, 15.5)] {
        assert!((at(years) - edge).abs() < 1e-12, "year {years}: {}", at(years));
    }
    // The way back: the gain that reaches a distance is where the edge first passes it.
    for distance in [0.1, 7.5, 7.6, 11.5, 30.0] {
        let gain = brow.gain_to_reach_m(distance);
        assert!(distance <= brow.edge_m(gain + 1e-9) && brow.edge_m(gain - 1e-6) < distance, "{distance}");
    }
    assert!(brow.first_reaches(7.5) && !brow.first_reaches(7.6));
}

/// Over many collapses the brow retreats at the deepening rate, and the lay-back is not accumulated.
#[test]
fn the_brow_keeps_pace_with_the_undercut() {
    let brow = BrowCycle { today_m: 1.5, critical_m: 4.0, lost_m: 5.5, lay_back_m: 2.0 };
    let rate = (brow.edge_m(10_000.0) - brow.edge_m(2_000.0)) / 8_000.0;
    assert!((rate - 1.0).abs() < 1e-3, "{rate} of the deepening rate");
}

#[test]
fn what_never_breaks_loses_nothing() {
    let brow = BrowCycle { today_m: 1.5, critical_m: f64::INFINITY, lost_m: 5.5, lay_back_m: 2.0 };
    assert!(brow.edge_m(1e6) <= 0.0 && brow.gain_to_reach_m(1.0).is_infinite());
}

#[test]
fn ground_lost_lies_on_straight_lines() {
    let lost = GroundLost { depths_m: vec![2.0, 4.0], lost_m: vec![vec![3.0, 6.0]] };
    for (depth, expected) in [(1.0, 3.0), (2.0, 3.0), (3.0, 4.5), (4.0, 6.0), (9.0, 6.0)] {
        assert!((lost.at_m(0, depth) - expected).abs() < 1e-12);
    }
    // By hand: 3 m of cap at 45 degrees lie back by 3 m.
    assert!((lay_back_m(3.0, std::f64::consts::FRAC_PI_4) - 3.0).abs() < 1e-12);
}
