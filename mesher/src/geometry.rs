//! Plane geometry shared by all steps: exact orientation and in-circle tests, circumcenter, measures of a triangle.
use robust::Coord;

/// A point in m.
pub(crate) type Point = [f64; 2];

fn coord(p: Point) -> Coord<f64> {
    Coord { x: p[0], y: p[1] }
}

/// Twice the signed area of `a b c`, positive counterclockwise; the sign is exact.
pub(crate) fn orient(a: Point, b: Point, c: Point) -> f64 {
    robust::orient2d(coord(a), coord(b), coord(c))
}

/// Positive where `d` lies inside the circle through `a b c` (counterclockwise); the sign is exact.
pub(crate) fn in_circle(a: Point, b: Point, c: Point, d: Point) -> f64 {
    robust::incircle(coord(a), coord(b), coord(c), coord(d))
}

pub(crate) fn distance_squared(a: Point, b: Point) -> f64 {
    let (dx, dy) = (a[0] - b[0], a[1] - b[1]);
    dx * dx + dy * dy
}

pub(crate) fn distance(a: Point, b: Point) -> f64 {
    distance_squared(a, b).sqrt()
}

pub(crate) fn middle(a: Point, b: Point) -> Point {
    [0.5 * (a[0] + b[0]), 0.5 * (a[1] + b[1])]
}

pub(crate) fn between(a: Point, b: Point, t: f64) -> Point {
    [a[0] + t * (b[0] - a[0]), a[1] + t * (b[1] - a[1])]
}

pub(crate) fn cross(u: Point, v: Point) -> f64 {
    u[0] * v[1] - u[1] * v[0]
}

pub(crate) fn minus(a: Point, b: Point) -> Point {
    [a[0] - b[0], a[1] - b[1]]
}

/// Parameter of the foot of `p` on `a + t (b - a)`, and the distance of `p` from that foot.
pub(crate) fn foot(p: Point, a: Point, b: Point) -> (f64, f64) {
    let d = minus(b, a);
    let t = ((p[0] - a[0]) * d[0] + (p[1] - a[1]) * d[1]) / (d[0] * d[0] + d[1] * d[1]);
    (t, distance(p, between(a, b, t)))
}

/// Center of the circle through three points that are not in line.
pub(crate) fn circumcenter(a: Point, b: Point, c: Point) -> Point {
    let (u, v) = (minus(b, a), minus(c, a));
    let twice = 2.0 * cross(u, v);
    let (uu, vv) = (u[0] * u[0] + u[1] * u[1], v[0] * v[0] + v[1] * v[1]);
    [a[0] + (v[1] * uu - u[1] * vv) / twice, a[1] + (u[0] * vv - v[0] * uu) / twice]
}

/// Square of the sine of the smallest angle of `a b c`, 0 where the corners do not run counterclockwise.
///
/// ```text
/// sin(smallest) = 2 A / (l_2 l_3)      l_2, l_3: the two longer sides
/// ```
pub(crate) fn sine_squared_of_smallest_angle(a: Point, b: Point, c: Point) -> f64 {
    let twice_area = cross(minus(b, a), minus(c, a));
    if twice_area <= 0.0 {
        return 0.0;
    }
    let (x, y, z) = (distance_squared(a, b), distance_squared(b, c), distance_squared(c, a));
    let shortest = x.min(y).min(z);
    twice_area * twice_area * shortest / (x * y * z)
}
