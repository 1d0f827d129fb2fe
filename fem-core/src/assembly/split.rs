//! Integration over elements that straight lines of kinks or jumps of the integrand cross.
use std::borrow::Cow;

use crate::quadrature::{TRIANGLE_DEGREE_4, TrianglePoint};

/// A straight line `a + b x + c y = 0` given by `[a, b, c]`, x and y in m.
pub type KinkLine = [f64; 3];

/// Lines on which the integrand kinks or jumps inside an element.
pub type KinksOf<'a> = &'a dyn Fn(usize) -> Vec<KinkLine>;

/// No kink anywhere.
pub const SMOOTH: KinksOf<'static> = &|_| Vec::new();

/// Parts of the reference triangle smaller than this share of it are dropped.
const SMALLEST_PART: f64 = 1e-14;

/// The rule of degree 4 on each part into which the lines cut the reference triangle; without a crossing line the rule itself.
///
/// On straight-sided elements the lines are straight in reference coordinates too and the cut is exact; on curved ones it follows the
/// chord of the corners.
pub(super) fn rule(corners_m: [[f64; 2]; 3], kinks: &[KinkLine]) -> Cow<'static, [TrianglePoint]> {
    let reference = vec![[0.0, 0.0], [1.0, 0.0], [0.0, 1.0]];
    let mut parts = vec![reference];
    for line in kinks {
        let at = corners_m.map(|p| line[0] + line[1] * p[0] + line[2] * p[1]);
        if at.iter().all(|v| 0.0 <= *v) || at.iter().all(|v| *v <= 0.0) {
            continue;
        }
        let value = |xi: [f64; 2]| at[0] + (at[1] - at[0]) * xi[0] + (at[2] - at[0]) * xi[1];
        parts = parts.iter().flat_map(|part| [1.0, -1.0].map(|side| clipped(part, &|xi| side * value(xi)))).collect();
    }
    if parts.len() == 1 {
        return Cow::Borrowed(&TRIANGLE_DEGREE_4);
    }
    Cow::Owned(parts.iter().flat_map(|part| of_polygon(part)).collect())
}

/// The part of a convex polygon on which a linear function is not negative.
fn clipped(polygon: &[[f64; 2]], value: &dyn Fn([f64; 2]) -> f64) -> Vec<[f64; 2]> {
    let mut kept = Vec::with_capacity(polygon.len() + 1);
    for (k, &p) in polygon.iter().enumerate() {
        let q = polygon[(k + 1) % polygon.len()];
        let (at_p, at_q) = (value(p), value(q));
        if 0.0 <= at_p {
            kept.push(p);
        }
        if (0.0 < at_p && at_q < 0.0) || (at_p < 0.0 && 0.0 < at_q) {
            let t = at_p / (at_p - at_q);
            kept.push([p[0] + t * (q[0] - p[0]), p[1] + t * (q[1] - p[1])]);
        }
    }
    kept
}

/// The rule of degree 4 on each triangle of a fan of the polygon.
fn of_polygon(polygon: &[[f64; 2]]) -> Vec<TrianglePoint> {
    let mut points = Vec::new();
    for k in 2..polygon.len() {
        let (a, b, c) = (polygon[0], polygon[k - 1], polygon[k]);
        let (u, v) = ([b[0] - a[0], b[1] - a[1]], [c[0] - a[0], c[1] - a[1]]);
        let twice_area = u[0] * v[1] - u[1] * v[0];
        if SMALLEST_PART < twice_area {
            points.extend(
                TRIANGLE_DEGREE_4.map(|(xi, w)| ([a[0] + xi[0] * u[0] + xi[1] * v[0], a[1] + xi[0] * u[1] + xi[1] * v[1]], w * twice_area)),
            );
        }
    }
    points
}
