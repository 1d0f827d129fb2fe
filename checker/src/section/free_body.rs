//! The body that a straight line from the hollow to the ground cuts off: what statics needs of it.
use super::arc::{Point, between, sub};
use super::body::Section;
use super::features::Feature;
use super::path::{OnPath, Path, Segment};
use super::strata::Strata;

/// The cut-off body.
#[derive(Debug, Clone, PartialEq)]
pub struct FreeBody {
    /// Area of each layer in it, m2.
    pub areas_m2: Vec<f64>,
    /// Centroid of each layer in it, m; the start of the line for layers that are not in it.
    pub centroids_m: Vec<[f64; 2]>,
    /// Least x of it, m.
    pub seaward_x_m: f64,
    /// Its surface, from the end of the line in the hollow to that on the ground: where water and loads act.
    pub surface: Path,
    /// The part of the section's surface of each piece of it.
    pub features: Vec<Feature>,
}

impl FreeBody {
    /// Whole area, m2.
    pub fn area_m2(&self) -> f64 {
        self.areas_m2.iter().sum()
    }
}

/// Points and weights of the Gauss-Legendre rule of degree 5 on 0 to 1; from memory: `1/2 -+ sqrt(3/5)/2`, weights 5/18, 8/18, 5/18.
const GAUSS: [(f64, f64); 3] = [(0.112_701_665_379_258_3, 5.0 / 18.0), (0.5, 8.0 / 18.0), (0.887_298_334_620_741_7, 5.0 / 18.0)];
/// Arcs are integrated in pieces of this angle, rad.
const ARC_STEP_RAD: f64 = 0.02;

/// Area and first moments about the body's reference point.
#[derive(Debug, Clone, Copy, Default)]
struct Moments {
    area: f64,
    x: f64,
    z: f64,
}

impl Section {
    /// The body between a straight line and the surface from one end of it to the other.
    ///
    /// ```text
    /// A = oint (z - m)+ dx,   S_x = oint x (z - m)+ dx,   S_z = oint (z^2 - m^2)+ / 2 dx   (clockwise)
    /// ```
    ///
    /// with `m(x)` the lowest of the contacts of layers `0 ..= j` gives the share of these layers together; differences give
    /// each layer: docs/theory.md eq. (3.9).
    /// Straight pieces are integrated exactly (they are split where a contact bends or is crossed), arcs in steps of
    /// 0.02 rad by a rule of degree 5. The ends of `line` are moved to the nearest points of the surface.
    pub fn free_body(&self, line: [[f64; 2]; 2]) -> FreeBody {
        let surface = self.surface();
        let ends = line.map(|end| surface.nearest(end).0);
        let later = |a: OnPath, b: OnPath| (b.segment, b.share) < (a.segment, a.share);
        let [from, to] = if later(ends[0], ends[1]) { [ends[1], ends[0]] } else { ends };
        let (part, origins) = surface.part(from, to);
        let features = origins.into_iter().map(|piece| self.feature_of(piece)).collect();
        let (start, end) = (surface.point(from), surface.point(to));
        let chord = Segment { from_m: end, to_m: start, arc: None };
        let (points, _) = part.flattened(0.1);
        let floor = points.iter().map(|p| p[1]).fold(f64::INFINITY, f64::min);
        let strata = &self.shared.strata;
        let (mut before, mut areas_m2, mut centroids_m) = (Moments::default(), Vec::new(), Vec::new());
        for layer in 0..strata.n_layers() {
            let is_last = layer + 1 == strata.n_layers();
            let base = |x: f64| if is_last { floor } else { strata.base_of_upper_m(layer, x) };
            let mut upper = Moments::default();
            for piece in part.segments().chain(std::iter::once(chord)) {
                add_piece(&mut upper, &piece, &base, strata, start);
            }
            let own = Moments { area: upper.area - before.area, x: upper.x - before.x, z: upper.z - before.z };
            let here = 1e-12 * upper.area.abs() < own.area;
            areas_m2.push(own.area.max(0.0));
            centroids_m.push(if here { [start[0] + own.x / own.area, start[1] + own.z / own.area] } else { start });
            before = upper;
        }
        let seaward_x_m = points.iter().map(|p| p[0]).fold(f64::INFINITY, f64::min);
        FreeBody { areas_m2, centroids_m, seaward_x_m, surface: part, features }
    }
}

/// Adds the integrals along one piece of the boundary of what lies between it and `base`, about `origin`.
fn add_piece(sum: &mut Moments, piece: &Segment, base: &dyn Fn(f64) -> f64, strata: &Strata, origin: Point) {
    let Some(arc) = piece.arc else {
        for pair in stops(piece, base, strata).windows(2) {
            let (a, b) = (between(piece.from_m, piece.to_m, pair[0]), between(piece.from_m, piece.to_m, pair[1]));
            for (t, weight) in GAUSS {
                add_column(sum, sub(between(a, b, t), origin), weight * (b[0] - a[0]), &|x| base(x + origin[0]) - origin[1]);
            }
        }
        return;
    };
    let sweep = arc.sweep_rad(piece.from_m, piece.to_m);
    let n = (sweep.abs() / ARC_STEP_RAD).ceil().max(1.0);
    for k in 0..n as usize {
        for (t, weight) in GAUSS {
            let p = arc.turned(piece.from_m, sweep * (k as f64 + t) / n);
            let dx = -(p[1] - arc.center_m[1]) * sweep / n * weight;
            add_column(sum, sub(p, origin), dx, &|x| base(x + origin[0]) - origin[1]);
        }
    }
}

/// Adds the column of width `dx` between `base` and the point.
fn add_column(sum: &mut Moments, p: Point, dx: f64, base: &dyn Fn(f64) -> f64) {
    let foot = base(p[0]);
    if foot < p[1] {
        sum.area += (p[1] - foot) * dx;
        sum.x += p[0] * (p[1] - foot) * dx;
        sum.z += 0.5 * (p[1] * p[1] - foot * foot) * dx;
    }
}

/// Shares of a straight piece between which `base` is straight and is not crossed.
fn stops(piece: &Segment, base: &dyn Fn(f64) -> f64, strata: &Strata) -> Vec<f64> {
    let (a, b) = (piece.from_m, piece.to_m);
    let width = b[0] - a[0];
    if width.abs() <= 0.0 {
        return Vec::new();
    }
    let (low, high) = (a[0].min(b[0]), a[0].max(b[0]));
    let breaks = strata.breaks_m();
    let inner = &breaks[breaks.partition_point(|x| *x <= low)..breaks.partition_point(|x| *x < high)];
    let mut shares: Vec<f64> = std::iter::once(0.0).chain(inner.iter().map(|x| (x - a[0]) / width)).chain(std::iter::once(1.0)).collect();
    shares.sort_by(f64::total_cmp);
    let mut all = vec![0.0];
    for pair in shares.windows(2) {
        all.extend(crossing(pair, &|t| between(a, b, t), base));
        all.push(pair[1]);
    }
    all
}

/// Share inside `pair` at which the piece crosses the base; both are straight there.
fn crossing(pair: &[f64], point: &dyn Fn(f64) -> Point, base: &dyn Fn(f64) -> f64) -> Option<f64> {
    let gap = |t: f64| {
        let p = point(t);
        p[1] - base(p[0])
    };
    // Two inner points, so that the side on which a column begins does not matter.
    let (t0, t1) = (0.75 * pair[0] + 0.25 * pair[1], 0.25 * pair[0] + 0.75 * pair[1]);
    let (g0, g1) = (gap(t0), gap(t1));
    let share = t0 + (t1 - t0) * g0 / (g0 - g1);
    (pair[0] < share && share < pair[1]).then_some(share)
}
