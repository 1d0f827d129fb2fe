//! Hand values and invariance.
use super::*;
use std::f64::consts::PI;

#[test]
fn principal_values_of_a_hand_case() {
    // σ_x = 50, σ_y = −10, τ = 40: center 20, radius 50 (3-4-5 triangle), 2θ = atan2(80, 60). Closed form.
    let p = principal([50.0, -10.0, 40.0]);
    assert!((p.major - 70.0).abs() < 1e-12 && (p.minor + 30.0).abs() < 1e-12);
    assert!((p.direction_rad - 0.5 * 80f64.atan2(60.0)).abs() < 1e-15);
    let normal = [p.direction_rad.cos(), p.direction_rad.sin()];
    let (sigma, tau) = normal_and_shear([50.0, -10.0, 40.0], normal);
    assert!((sigma - 70.0).abs() < 1e-12 && tau.abs() < 1e-12, "no shear on the principal plane: {tau}");
}

#[test]
fn turning_the_axes_keeps_the_invariants_and_turns_the_direction() {
    let t = [3.0, -1.0, 2.5];
    for k in 0..24 {
        let angle = f64::from(k) * PI / 12.0;
        let turned = in_turned_axes(t, angle);
        let (c0, r0) = mohr_circle(t);
        let (c1, r1) = mohr_circle(turned);
        assert!((c0 - c1).abs() < 1e-14 * 10.0 && (r0 - r1).abs() < 1e-13);
        assert!((double_dot(t, t) - double_dot(turned, turned)).abs() < 1e-12);
        let difference = principal(t).direction_rad - principal(turned).direction_rad - angle;
        assert!((difference / PI - (difference / PI).round()).abs() < 1e-13, "direction off by {difference}");
    }
}
