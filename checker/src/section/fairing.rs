//! Rounding of an undercut's sharp corners by arcs.
use super::arc::{CircleArc, Point, along, distance, sub, turn_rad, unit};
use super::path::{OnPath, Path};

/// Corners that turn by less than this are left, rad (5 degrees): they carry no stress concentration worth an arc.
const LEAST_TURN_RAD: f64 = 0.087_266_462_599_716_48;
/// Share of a piece that the arc at one of its ends may take.
const LARGEST_SHARE: f64 = 0.5;

/// What fairing did to the hollow.
#[derive(Debug, Clone, Copy, Default, PartialEq)]
pub struct Fairing {
    /// Number of corners that became arcs.
    pub n_corners: usize,
    /// Area between the old outline and the new one, both signs added, m2.
    pub moved_area_m2: f64,
    /// Depth after less depth before, m.
    pub depth_change_m: f64,
    /// Smallest radius used, m: the given one where the points stand far enough apart.
    pub smallest_radius_m: f64,
}

/// The walk with an arc of `radius_m` in each corner between straight pieces, its ends left as they are.
///
/// The arc touches both pieces at `r tan(turn / 2)` from the corner; where that is over half of a piece the radius shrinks.
pub(crate) fn fair(path: &Path, radius_m: f64) -> (Path, Fairing) {
    let mut info = Fairing { smallest_radius_m: radius_m, ..Fairing::default() };
    let points = path.points_m();
    let mut faired = Path::straight(vec![points[0]]);
    for (i, segment) in path.segments().enumerate() {
        let corner = (i + 1 < path.n_segments()).then(|| arc_at(path, i, radius_m)).flatten();
        let Some((touch, circle, moved)) = corner else {
            faired.push(segment.to_m, segment.arc);
            continue;
        };
        if 1e-9 < distance(faired.points_m()[faired.points_m().len() - 1], touch[0]) {
            faired.push(touch[0], None);
        }
        faired.push(touch[1], Some(circle));
        info.n_corners += 1;
        info.moved_area_m2 += moved;
        info.smallest_radius_m = info.smallest_radius_m.min(circle.radius_m);
    }
    info.depth_change_m = faired.largest_x_m() - path.largest_x_m();
    (faired, info)
}

/// Touching points, circle and moved area `r^2 (tan(turn/2) - turn/2)` at the corner that ends piece `i`.
fn arc_at(path: &Path, i: usize, radius_m: f64) -> Option<([Point; 2], CircleArc, f64)> {
    let (before, after) = (path.segment(i), path.segment(i + 1));
    if before.arc.is_some() || after.arc.is_some() {
        return None;
    }
    let corner = before.to_m;
    let (t0, t1) = (unit(sub(corner, before.from_m)), unit(sub(after.to_m, corner)));
    let turn = turn_rad(t0, t1);
    if turn.abs() < LEAST_TURN_RAD {
        return None;
    }
    let half = (0.5 * turn.abs()).tan();
    let room = LARGEST_SHARE * distance(before.from_m, corner).min(distance(corner, after.to_m));
    let touch = (radius_m * half).min(room);
    let radius = touch / half;
    let from = along(corner, t0, -touch);
    let center_m = along(from, [-t0[1], t0[0]], radius * turn.signum());
    Some(([from, along(corner, t1, touch)], CircleArc { center_m, radius_m: radius }, radius * radius * (half - 0.5 * turn.abs())))
}

/// Makes the innermost place of the walk one of its points and returns its index; of equal ones the last.
pub(crate) fn mark_back(path: &mut Path) -> usize {
    let largest = path.largest_x_m();
    let last = path.segments().enumerate().filter(|(_, segment)| largest - 1e-9 <= segment.largest_x().1).last();
    let Some((i, segment)) = last else { return 0 };
    path.insert(OnPath { segment: i, share: segment.largest_x().0 }, 1e-9)
}
