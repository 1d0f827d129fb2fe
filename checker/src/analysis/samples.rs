//! Mean tensors over segments and discs: where the sample points lie and how their values are added up.

/// Points of the four-point Gauss rule on `0..1` with weights that add up to 1 (Abramowitz & Stegun, table 25.4).
const GAUSS_4: [(f64, f64); 4] = [
    (0.06943184420297371, 0.17392742256872693),
    (0.33000947820757187, 0.32607257743127307),
    (0.6699905217924281, 0.32607257743127307),
    (0.9305681557970263, 0.17392742256872693),
];

/// Panels of a segment, finest where it leaves the surface, because the stress varies fastest there.
const PANELS: [[f64; 2]; 4] = [[0.0, 0.125], [0.125, 0.25], [0.25, 0.5], [0.5, 1.0]];

/// Rings of a disc: radius as a share of the disc's and number of points. With equal weights for all points the rings stand
/// for equal areas each point.
const RINGS: [(f64, usize); 3] = [(0.0, 1), (0.5, 4), (0.85, 8)];

/// A sample point with its weight; weights of one mean add up to 1.
pub type Weighted = ([f64; 2], f64);

/// Sample points of the mean over a straight segment; 16 points, exact for a polynomial of degree 7 on each panel.
pub fn on_segment(start_m: [f64; 2], direction: [f64; 2], length_m: f64) -> Vec<Weighted> {
    let mut points = Vec::with_capacity(4 * PANELS.len());
    for [from, to] in PANELS {
        for (t, w) in GAUSS_4 {
            let s = length_m * (from + (to - from) * t);
            points.push(([start_m[0] + s * direction[0], start_m[1] + s * direction[1]], w * (to - from)));
        }
    }
    points
}

/// Sample points of the mean over a disc; a point that falls outside `inside` is left out, the rest weigh more.
pub fn on_disc(center_m: [f64; 2], diameter_m: f64, inside: &dyn Fn([f64; 2]) -> bool) -> Vec<Weighted> {
    let mut points = Vec::new();
    for (ring, (share, n)) in RINGS.into_iter().enumerate() {
        for k in 0..n {
            let angle = std::f64::consts::TAU * (k as f64 + 0.5 * ring as f64) / n as f64;
            let r = 0.5 * diameter_m * share;
            let p = [center_m[0] + r * angle.cos(), center_m[1] + r * angle.sin()];
            if inside(p) {
                points.push(p);
            }
        }
    }
    let weight = 1.0 / points.len().max(1) as f64;
    points.into_iter().map(|p| (p, weight)).collect()
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn segment_mean_of_a_cubic_is_exact() {
        // mean of s^3 over 0..2 is 2 (by hand)
        let mean: f64 = on_segment([0.0, 0.0], [1.0, 0.0], 2.0).iter().map(|(p, w)| w * p[0].powi(3)).sum();
        assert!((mean - 2.0).abs() < 1e-12, "{mean}");
    }

    #[test]
    fn disc_mean_of_a_plane_is_its_value_at_the_center() {
        let points = on_disc([3.0, 4.0], 1.0, &|_| true);
        let mean: f64 = points.iter().map(|(p, w)| w * (2.0 * p[0] - p[1])).sum();
        assert!((mean - 2.0).abs() < 1e-12 && points.len() == 13, "{mean}");
    }

    #[test]
    fn disc_mean_of_a_parabola_is_within_a_tenth_of_the_exact() {
        // mean of r^2 over a disc of radius 1 is 1/2 (by hand)
        let mean: f64 = on_disc([0.0, 0.0], 2.0, &|_| true).iter().map(|(p, w)| w * (p[0] * p[0] + p[1] * p[1])).sum();
        assert!((mean - 0.5).abs() < 0.05, "{mean}");
    }
}
