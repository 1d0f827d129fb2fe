//! Circular pieces of a section's outline, and smooth chains of them for an arc that was stretched into an ellipse.

/// A point `[x, z]` in m.
pub(crate) type Point = [f64; 2];

/// The circle on which a piece of the surface lies; the piece is always the shorter of the two arcs between its ends.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct CircleArc {
    /// Center, m.
    pub center_m: [f64; 2],
    /// Radius, m.
    pub radius_m: f64,
}

pub(crate) fn sub(a: Point, b: Point) -> Point {
    [a[0] - b[0], a[1] - b[1]]
}

pub(crate) fn along(a: Point, direction: Point, distance: f64) -> Point {
    [a[0] + distance * direction[0], a[1] + distance * direction[1]]
}

pub(crate) fn between(a: Point, b: Point, t: f64) -> Point {
    [a[0] + t * (b[0] - a[0]), a[1] + t * (b[1] - a[1])]
}

pub(crate) fn dot(a: Point, b: Point) -> f64 {
    a[0] * b[0] + a[1] * b[1]
}

/// z component of the cross product: positive where `b` lies counterclockwise of `a`.
pub(crate) fn cross(a: Point, b: Point) -> f64 {
    a[0] * b[1] - a[1] * b[0]
}

pub(crate) fn norm(a: Point) -> f64 {
    a[0].hypot(a[1])
}

pub(crate) fn distance(a: Point, b: Point) -> f64 {
    norm(sub(a, b))
}

/// Unit vector along `a`; zero stays zero.
pub(crate) fn unit(a: Point) -> Point {
    let length = norm(a);
    if 0.0 < length { [a[0] / length, a[1] / length] } else { [0.0, 0.0] }
}

/// A unit normal to the left of a straight piece.
pub(crate) fn left_normal(piece: [Point; 2]) -> Point {
    let t = unit(sub(piece[1], piece[0]));
    [-t[1], t[0]]
}

/// Distance of a point from a straight piece, m.
pub(crate) fn distance_to(piece: [Point; 2], p: Point) -> f64 {
    let (v, w) = (sub(piece[1], piece[0]), sub(p, piece[0]));
    let length = distance(piece[0], piece[1]);
    if length <= 0.0 {
        return distance(piece[0], p);
    }
    let along = (v[0] * w[0] + v[1] * w[1]) / (length * length);
    if 0.0 <= along && along <= 1.0 { cross(v, w).abs() / length } else { distance(p, between(piece[0], piece[1], along.clamp(0.0, 1.0))) }
}

impl CircleArc {
    /// Signed angle from `from` to `to` about the center in rad, positive counterclockwise.
    pub(crate) fn sweep_rad(&self, from: Point, to: Point) -> f64 {
        let (a, b) = (sub(from, self.center_m), sub(to, self.center_m));
        cross(a, b).atan2(dot(a, b))
    }

    /// The point reached from `from` by turning through `angle_rad` about the center.
    pub(crate) fn turned(&self, from: Point, angle_rad: f64) -> Point {
        let (sin, cos) = angle_rad.sin_cos();
        let r = sub(from, self.center_m);
        [self.center_m[0] + r[0] * cos - r[1] * sin, self.center_m[1] + r[0] * sin + r[1] * cos]
    }

    /// The same circle moved by `dx` m.
    pub(crate) fn moved(&self, dx: f64) -> Self {
        Self { center_m: [self.center_m[0] + dx, self.center_m[1]], ..*self }
    }
}

/// The map `x' = a x + b z + c`, `z' = z`: the horizontal stretch and shear that growth applies.
#[derive(Debug, Clone, Copy)]
pub(crate) struct Stretch {
    pub(crate) a: f64,
    pub(crate) b: f64,
    pub(crate) c: f64,
}

impl Stretch {
    pub(crate) fn point(&self, p: Point) -> Point {
        [self.a * p[0] + self.b * p[1] + self.c, p[1]]
    }

    fn direction(&self, d: Point) -> Point {
        unit([self.a * d[0] + self.b * d[1], d[1]])
    }
}

/// Largest turn of the tangent, and of the parameter, covered by one pair of arcs of [`stretched`].
const PIECE_RAD: f64 = std::f64::consts::PI / 12.0;

/// The image of an arc under a stretch as a chain of circular arcs with a common tangent at every joint.
///
/// The image is an ellipse. It is interpolated in position and tangent at parameter steps of at most 15 degrees and tangent
/// steps of at most 15 degrees, with two circular arcs between neighbors (biarcs, of equal tangent lengths).
/// Returns the points after the first, each with the arc that ends in it. Where an arc would be flat, `None` = straight.
pub(crate) fn stretched(from: Point, to: Point, arc: &CircleArc, map: &Stretch) -> Vec<(Point, Option<CircleArc>)> {
    let sweep = arc.sweep_rad(from, to);
    let sign = sweep.signum();
    let at = |angle: f64| {
        let p = arc.turned(from, angle);
        let r = sub(p, arc.center_m);
        (map.point(p), map.direction([-sign * r[1], sign * r[0]]))
    };
    let mut chain = Vec::new();
    let mut angle = 0.0_f64;
    let mut start = at(0.0);
    while angle.abs() < sweep.abs() {
        let mut step = PIECE_RAD.min(sweep.abs() - angle.abs());
        let mut end = at(angle + sign * step);
        while PIECE_RAD < turn_rad(start.1, end.1).abs() && 1e-9 < step {
            step *= 0.5;
            end = at(angle + sign * step);
        }
        angle += sign * step;
        if sweep.abs() - angle.abs() < 1e-9 {
            angle = sweep;
            end = (map.point(to), at(sweep).1);
        }
        chain.extend(biarc(start, end));
        start = end;
    }
    chain
}

/// Signed angle from direction `a` to direction `b`, rad.
pub(crate) fn turn_rad(a: Point, b: Point) -> f64 {
    cross(a, b).atan2(dot(a, b))
}

/// Two arcs that join `start` to `end`, each given as point and unit tangent.
fn biarc(start: (Point, Point), end: (Point, Point)) -> Vec<(Point, Option<CircleArc>)> {
    let ((p0, t0), (p1, t1)) = (start, end);
    let v = sub(p1, p0);
    let open = 1.0 - dot(t0, t1);
    let vt = dot(v, [t0[0] + t1[0], t0[1] + t1[1]]);
    // Both tangent lengths d follow from |v|^2 = 2 d v.(t0 + t1) + 2 d^2 (1 - t0.t1) for two circles that touch.
    let d = if open < 1e-12 { dot(v, v) / (2.0 * vt) } else { ((vt * vt + 2.0 * open * dot(v, v)).sqrt() - vt) / (2.0 * open) };
    let joint = between(along(p0, t0, d), along(p1, t1, -d), 0.5);
    vec![(joint, tangent_circle(p0, t0, joint)), (p1, tangent_circle(p1, t1, joint))]
}

/// The circle through `p` with tangent `t` there and through `q`; `None` where it is flat over that distance.
fn tangent_circle(p: Point, t: Point, q: Point) -> Option<CircleArc> {
    let (normal, chord) = ([-t[1], t[0]], sub(q, p));
    let rise = dot(normal, chord);
    if rise.abs() <= 1e-9 * norm(chord) {
        return None;
    }
    let signed_radius = dot(chord, chord) / (2.0 * rise);
    Some(CircleArc { center_m: along(p, normal, signed_radius), radius_m: signed_radius.abs() })
}
