//! What water does on a rupture line: sea on the cut-off body, pore thrust on the line, weight below the table.
use crate::analysis::water::WaterField;
use crate::demand::LineWater;
use crate::section::{FreeBody, Section};

use super::geometry::TargetLine;

/// Points and weights of the Gauss-Legendre rule of degree 5 on 0 to 1, `1/2 -+ sqrt(3/5)/2`; weights 5/18, 8/18, 5/18 (from memory).
const GAUSS: [(f64, f64); 3] = [(0.112_701_665_379_258_3, 5.0 / 18.0), (0.5, 8.0 / 18.0), (0.887_298_334_620_741_7, 5.0 / 18.0)];
/// Arcs are taken in steps of this angle, rad.
const ARC_STEP_RAD: f64 = 0.01;
/// Pieces of the body's boundary are cut to this share of its height where the table may bend inside them.
const STEP: f64 = 0.01;

/// Water on a line; the submerged areas only where saturated rock weighs more.
pub(super) fn line_water(section: &Section, field: &WaterField, line: &TargetLine, body: &FreeBody, saturated: bool) -> LineWater {
    let (submerged_m2, submerged_centroids_m) = if saturated { submerged(section, field, line, body) } else { (Vec::new(), Vec::new()) };
    LineWater { sea: sea(field, body), thrust: thrust(field, [line.from_m, line.to_m]), submerged_m2, submerged_centroids_m }
}

/// Forces of the sea on pieces of the cut-off body's surface: force in N/m and point.
///
/// On the walk from the hollow to the ground the rock lies on the right, so the pressure pushes to the right.
fn sea(field: &WaterField, body: &FreeBody) -> Vec<([f64; 2], [f64; 2])> {
    let Some((level, _)) = field.sea else { return Vec::new() };
    let (points, _) = body.surface.flattened(ARC_STEP_RAD);
    let mut forces = Vec::new();
    for pair in points.windows(2) {
        let (mut a, mut b) = (pair[0], pair[1]);
        if level <= a[1] && level <= b[1] {
            continue;
        }
        let at_level = |a: [f64; 2], b: [f64; 2]| [a[0] + (level - a[1]) / (b[1] - a[1]) * (b[0] - a[0]), level];
        if level < a[1] {
            a = at_level(a, b);
        } else if level < b[1] {
            b = at_level(a, b);
        }
        for (t, weight) in GAUSS {
            let p = [a[0] + t * (b[0] - a[0]), a[1] + t * (b[1] - a[1])];
            let pressure = weight * field.sea_pressure_pa(p[1]);
            forces.push(([pressure * (b[1] - a[1]), -pressure * (b[0] - a[0])], p));
        }
    }
    forces
}

/// Resultant of `alpha u_w` along the line, N/m, and its moment about the middle with arms up the line, N.
pub(super) fn thrust(field: &WaterField, [from_m, to_m]: [[f64; 2]; 2]) -> [f64; 2] {
    let d = [to_m[0] - from_m[0], to_m[1] - from_m[1]];
    let length = d[0].hypot(d[1]);
    let at = |t: f64| [from_m[0] + t * d[0], from_m[1] + t * d[1]];
    let mut shares = vec![0.0, 1.0];
    for [a, b, c] in field.kinks(&[from_m, to_m]) {
        let share = -(a + b * from_m[0] + c * from_m[1]) / (b * d[0] + c * d[1]);
        if 0.0 < share && share < 1.0 {
            shares.push(share);
        }
    }
    shares.sort_by(f64::total_cmp);
    let mut sum = [0.0; 2];
    for pair in shares.windows(2) {
        for (x, weight) in GAUSS {
            let t = pair[0] + x * (pair[1] - pair[0]);
            let force = weight * (pair[1] - pair[0]) * length * field.pressure_pa(at(t));
            sum = [sum[0] + force, sum[1] + force * (t - 0.5) * length];
        }
    }
    sum
}

/// Area of each layer below the table in the cut-off body and its centroid.
///
/// ```text
/// A_j = oint (min(z, z_t, top_j) - base_j)+ dx      (clockwise)
/// ```
fn submerged(section: &Section, field: &WaterField, line: &TargetLine, body: &FreeBody) -> (Vec<f64>, Vec<[f64; 2]>) {
    let (mut walk, _) = body.surface.flattened(ARC_STEP_RAD);
    walk.push(walk[0]);
    let floor = walk.iter().map(|p| p[1]).fold(f64::INFINITY, f64::min);
    let step_m = STEP * section.cliff_height_m();
    let n = section.n_layers();
    let mut moments = vec![[0.0; 3]; n];
    for pair in walk.windows(2) {
        let (a, b) = (pair[0], pair[1]);
        let steps = ((b[0] - a[0]).hypot(b[1] - a[1]) / step_m).ceil().max(1.0);
        for k in 0..steps as usize {
            for (t, weight) in GAUSS {
                let share = (k as f64 + t) / steps;
                let p = [a[0] + share * (b[0] - a[0]), a[1] + share * (b[1] - a[1])];
                let dx = weight * (b[0] - a[0]) / steps;
                let highest = p[1].min(field.table.level_m(p[0]));
                let mut top = f64::INFINITY;
                for (layer, sum) in moments.iter_mut().enumerate() {
                    let base = section.layer_base_m(layer, p[0]).unwrap_or(floor).max(floor);
                    let high = highest.min(top);
                    if base < high {
                        sum[0] += (high - base) * dx;
                        sum[1] += p[0] * (high - base) * dx;
                        sum[2] += 0.5 * (high * high - base * base) * dx;
                    }
                    top = base;
                }
            }
        }
    }
    let least = 1e-9 * section.cliff_height_m().powi(2);
    let centroid = |m: &[f64; 3]| if least < m[0] { [m[1] / m[0], m[2] / m[0]] } else { line.from_m };
    (moments.iter().map(|m| if least < m[0] { m[0] } else { 0.0 }).collect(), moments.iter().map(centroid).collect())
}
