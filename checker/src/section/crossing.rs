//! Whether a deepened hollow still fits into the section.
use super::arc::{Point, along, cross, distance_to, sub};
use super::path::Path;

/// Why there is no section at a depth, or no line in it.
#[derive(Debug, Clone, PartialEq, thiserror::Error)]
#[non_exhaustive]
pub enum SectionError {
    /// The depth is negative, not a number, or beyond the model.
    #[error("an undercut depth of {depth_m} m is outside 0 to {limit_m:.2} m, where the model ends")]
    Depth {
        /// Depth asked for, m.
        depth_m: f64,
        /// Largest depth the model has room for, m.
        limit_m: f64,
    },
    /// The hollow reaches the ground, the face or itself.
    #[error("at an undercut depth of {depth_m:.3} m the hollow breaks through the surface at x = {:.2} m, z = {:.2} m", at_m[0], at_m[1])]
    BreaksThrough {
        /// Depth, m.
        depth_m: f64,
        /// Where, m.
        at_m: [f64; 2],
    },
    /// A crack leads from the hollow to the ground.
    #[error("at an undercut depth of {depth_m:.3} m the hollow meets crack {} at x = {:.2} m, z = {:.2} m, which reaches the surface: the overhang is cut off", crack + 1, at_m[0], at_m[1])]
    MeetsCrack {
        /// Depth, m.
        depth_m: f64,
        /// Index of the crack.
        crack: usize,
        /// Where, m.
        at_m: [f64; 2],
    },
    /// A rupture line does not run through rock from the hollow to the ground.
    #[error("the line from x = {:.2} m, z = {:.2} m does not run through rock to the ground", from_m[0], from_m[1])]
    NoLine {
        /// Start of the line, m.
        from_m: [f64; 2],
    },
}

/// Arcs are checked as chords of this angle, rad.
const CHORD_RAD: f64 = 0.05;
/// Nearer than this is touching, m.
const TOUCHING_M: f64 = 1e-7;
/// Neighboring pieces that touch with less walk between them than this are short, not in contact, m.
const TOUCHING_APART_M: f64 = 1e-3;
/// A crack that starts this near to the surface reaches it, m: the accuracy of a hand-drawn crack.
pub(crate) const CRACK_AT_SURFACE_M: f64 = 0.05;

/// Where the surface meets itself, looking only at its pieces `first .. last` against all others.
pub(crate) fn self_crossing(surface: &Path, first: usize, last: usize) -> Option<Point> {
    let (points, origin) = surface.flattened(CHORD_RAD);
    let piece = |i: usize| [points[i], points[i + 1]];
    let lengths = Path::straight(points.clone()).lengths_m();
    for i in (0..origin.len()).filter(|&i| first <= origin[i] && origin[i] < last) {
        for j in (0..origin.len()).filter(|j| i.abs_diff(*j) >= 2) {
            let other_is_also_checked = first <= origin[j] && origin[j] < last;
            if other_is_also_checked && j < i {
                continue;
            }
            let apart = lengths[i.max(j)] - lengths[i.min(j) + 1];
            let at = crossing(piece(i), piece(j)).or_else(|| touching(piece(i), piece(j)).filter(|_| TOUCHING_APART_M < apart));
            if at.is_some() {
                return at;
            }
        }
    }
    None
}

/// The first crack that the pieces `first .. last` of the surface meet and that also reaches the rest of the surface.
pub(crate) fn crack_to_surface(surface: &Path, first: usize, last: usize, cracks: &[Vec<Point>]) -> Option<(usize, Point)> {
    let hollow = surface.slice(first, last).flattened(CHORD_RAD).0;
    let rest = surface.slice(last, surface.n_segments());
    cracks.iter().enumerate().find_map(|(k, crack)| {
        let at = crack.windows(2).find_map(|a| hollow.windows(2).find_map(|b| meeting([a[0], a[1]], [b[0], b[1]])))?;
        let ends = [crack.first(), crack.last()];
        let reaches = ends.into_iter().flatten().any(|end| rest.nearest(*end).1 <= CRACK_AT_SURFACE_M);
        let crosses = || crack.windows(2).any(|a| rest.segments().any(|b| meeting([a[0], a[1]], [b.from_m, b.to_m]).is_some()));
        (reaches || crosses()).then_some((k, at))
    })
}

/// A point in which two straight pieces cross or touch.
fn meeting(a: [Point; 2], b: [Point; 2]) -> Option<Point> {
    crossing(a, b).or_else(|| touching(a, b))
}

fn are_apart(a: [Point; 2], b: [Point; 2]) -> bool {
    (0..2).any(|k| {
        let (low, high) = (a[0][k].min(a[1][k]), a[0][k].max(a[1][k]));
        high + TOUCHING_M < b[0][k].min(b[1][k]) || b[0][k].max(b[1][k]) < low - TOUCHING_M
    })
}

/// The point in which two straight pieces cross, each with its ends on both sides of the other.
fn crossing(a: [Point; 2], b: [Point; 2]) -> Option<Point> {
    if are_apart(a, b) {
        return None;
    }
    let (v, w) = (sub(a[1], a[0]), sub(b[1], b[0]));
    let sides = |from: Point, v: Point, ends: [Point; 2]| [cross(v, sub(ends[0], from)), cross(v, sub(ends[1], from))];
    let (of_b, of_a) = (sides(a[0], v, b), sides(b[0], w, a));
    let t = of_a[0] / (of_a[0] - of_a[1]);
    (of_b[0] * of_b[1] < 0.0 && of_a[0] * of_a[1] < 0.0).then(|| along(a[0], v, t))
}

/// The end of one straight piece that lies on the other.
fn touching(a: [Point; 2], b: [Point; 2]) -> Option<Point> {
    if are_apart(a, b) {
        return None;
    }
    let on = |p: Point, piece: [Point; 2]| (distance_to(piece, p) <= TOUCHING_M).then_some(p);
    on(a[0], b).or_else(|| on(a[1], b)).or_else(|| on(b[0], a)).or_else(|| on(b[1], a))
}
