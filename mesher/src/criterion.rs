//! When a triangle is refined and where the new vertex goes.
use crate::geometry::{Point, circumcenter, cross, distance_squared, middle, minus};

/// Share of `h / sqrt(3)` (an equilateral triangle's circumradius) that a circumradius may reach.
const LARGEST: f64 = 1.2;
/// Share of the exact off-center distance at which a new vertex goes, so that rounding cannot leave the angle just too small.
const OFF_CENTER: f64 = 0.95;
/// A new side is at least this share of the side it stands on.
const SMALLEST_STEP: f64 = 0.75;

/// Bounds on angle and size.
#[derive(Debug, Clone, Copy)]
pub(crate) struct Criterion {
    /// Largest circumradius over shortest side, squared: `1 / (2 sin angle)^2`.
    ratio_squared: f64,
    half_tangent: f64,
    /// Square of the cosine that the ends of a piece may subtend at a vertex in its lens.
    lens_cosine_squared: f64,
}

/// What is wrong with a triangle.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(crate) enum Fault {
    /// Its smallest angle is too small, its size is fine.
    Angle,
    /// It is too large.
    Size,
}

impl Criterion {
    pub(crate) fn new(smallest_angle_rad: f64) -> Self {
        let sine = smallest_angle_rad.sin();
        let lens_cosine = (2.0 * smallest_angle_rad).cos();
        Self {
            ratio_squared: 0.25 / (sine * sine),
            half_tangent: (0.5 * smallest_angle_rad).tan(),
            lens_cosine_squared: lens_cosine * lens_cosine,
        }
    }

    /// Judges a triangle against the size wanted there: circumradius `R <= 1.2 h / sqrt(3)`, `R / shortest <= 1 / (2 sin angle)`.
    pub(crate) fn fault(&self, [a, b, c]: [Point; 3], h: f64) -> Option<Fault> {
        let (x, y, z) = (distance_squared(b, c), distance_squared(c, a), distance_squared(a, b));
        let twice_area = cross(minus(b, a), minus(c, a));
        // R = x y z / (4 A)
        let radius_squared = x * y * z / (4.0 * twice_area * twice_area);
        if LARGEST * LARGEST / 3.0 * h * h < radius_squared {
            Some(Fault::Size)
        } else if self.ratio_squared * x.min(y).min(z) < radius_squared {
            Some(Fault::Angle)
        } else {
            None
        }
    }

    /// New vertex for a triangle: on the bisector of the shortest side, as far out as the wanted size (frontal placement) or the angle bound
    /// allows (off-center, Üngör 2004), at most at the circumcenter.
    pub(crate) fn new_vertex(&self, corners: [Point; 3], h: f64) -> Point {
        let [a, b, c] = shortest_first(corners);
        let center = circumcenter(a, b, c);
        let length_squared = distance_squared(a, b);
        let length = length_squared.sqrt();
        let m = middle(a, b);
        // Corners run counterclockwise, so the triangle lies on the left of a to b.
        let normal = [-(b[1] - a[1]) / length, (b[0] - a[0]) / length];
        let to_center = (center[0] - m[0]) * normal[0] + (center[1] - m[1]) * normal[1];
        let by_angle = OFF_CENTER * 0.5 * length / self.half_tangent;
        let side = h.max(SMALLEST_STEP * length);
        let by_size = (side * side - 0.25 * length_squared).max(0.75 * length_squared).sqrt();
        let off = by_angle.min(by_size);
        if off < to_center { [m[0] + off * normal[0], m[1] + off * normal[1]] } else { center }
    }

    /// Whether `p` lies in the diametral lens of a piece: the piece is seen from it under `180 degrees - 2 angle` or more (Shewchuk 2002).
    pub(crate) fn encroaches(&self, p: Point, a: Point, b: Point) -> bool {
        let (u, v) = (minus(a, p), minus(b, p));
        let dot = u[0] * v[0] + u[1] * v[1];
        dot < 0.0 && self.lens_cosine_squared * distance_squared(a, p) * distance_squared(b, p) <= dot * dot
    }
}

fn shortest_first([a, b, c]: [Point; 3]) -> [Point; 3] {
    let (ab, bc, ca) = (distance_squared(a, b), distance_squared(b, c), distance_squared(c, a));
    if ab <= bc && ab <= ca {
        [a, b, c]
    } else if bc <= ca {
        [b, c, a]
    } else {
        [c, a, b]
    }
}
