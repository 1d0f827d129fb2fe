//! The surveyed walk, taken apart into what lies before the hollow, the hollow, and what lies above it.
use super::arc::{Point, between, distance};
use super::crossing::self_crossing;
use super::path::Path;
use super::start;
use super::undercut::{self, NAMED_HOLLOW_M, SMALLEST_UNDERCUT_M};
use crate::diagnostic::Diagnostic;
use crate::model::{Model, StartShape};

/// Survey points nearer together than this are one, m.
const SAME_POINT_M: f64 = 1e-6;

/// The surveyed walk taken apart.
pub(super) struct Walk {
    /// From the sea to the mouth.
    pub(super) lead: Vec<Point>,
    pub(super) hollow: Path,
    /// From the lip to the land.
    pub(super) rest: Vec<Point>,
    /// Index of the brow in `rest`.
    pub(super) brow: usize,
    pub(super) surveyed: bool,
}

/// The surveyed points, carried on level far beyond any side of the model.
pub(super) fn surface(model: &Model) -> Result<Vec<Point>, Diagnostic> {
    let error = |message: String, hint: &str| Diagnostic::error("section.surface", "section.surface", message).hint(hint);
    let mut walk: Vec<Point> = Vec::with_capacity(model.section.surface.len() + 2);
    for (i, p) in model.section.surface.iter().enumerate() {
        let point = [p.x_m, p.z_m];
        if !(point[0].is_finite() && point[1].is_finite()) {
            return Err(error(format!("point {} of the surface is not a number", i + 1), "give x and z in m"));
        }
        if walk.last().is_none_or(|last| SAME_POINT_M < distance(*last, point)) {
            walk.push(point);
        }
    }
    if walk.len() < 3 {
        return Err(error(
            format!("the surface has {} different points, at least 3 are needed", walk.len()),
            "walk the rock surface from the sea to the land",
        ));
    }
    let path = Path::straight(walk.clone());
    if let Some([x, z]) = self_crossing(&path, 0, path.n_segments()) {
        let message = format!("the surface meets itself at x = {x:.3} m, z = {z:.3} m");
        return Err(error(message, "list the points in walking order from the sea to the land and remove doubled stretches"));
    }
    let (first, last) = (walk[0], walk[walk.len() - 1]);
    if last[0] <= first[0] {
        let message = format!("the surface ends at x = {:.2} m, seaward of its start at {:.2} m", last[0], first[0]);
        return Err(error(message, "x grows landward: list the points from the sea to the land"));
    }
    let far =
        |k: usize| walk.iter().map(|p| p[k]).fold(f64::NEG_INFINITY, f64::max) - walk.iter().map(|p| p[k]).fold(f64::INFINITY, f64::min);
    let beyond = 10.0 * (far(0) + far(1)) + model.undercut.search_to_depth_m.abs();
    let given = |x: Option<f64>, or: f64| x.unwrap_or(or);
    walk.insert(0, [(first[0] - beyond).min(given(model.extent.seaward_x_m, first[0]) - 1.0), first[1]]);
    walk.push([(last[0] + beyond).max(given(model.extent.landward_x_m, last[0]) + 1.0), last[1]]);
    Ok(walk)
}

/// Lead, hollow and rest, from the survey's undercut or else from the start shape.
pub(super) fn take_apart(model: &Model, walk: &[Point], findings: &mut Vec<Diagnostic>) -> Option<Walk> {
    let start = model.undercut.start_shape.as_ref();
    let least = if start.is_some() { NAMED_HOLLOW_M } else { SMALLEST_UNDERCUT_M };
    let found = undercut::find(walk, least);
    match (found, start) {
        (Some(found), start) => {
            if start.is_some() {
                let message =
                    format!("a start shape is given, but the survey shows an undercut {:.2} m deep; the survey is used", found.depth_m);
                findings
                    .push(Diagnostic::warning("undercut.start-shape", "undercut.floor_level_m", message).hint("remove the start shape"));
            }
            surveyed_walk(model, walk, found, findings)
        }
        (None, Some(start)) => start_walk(model, walk, start, findings),
        (None, None) => {
            let message = format!("the surface shows no undercut deeper than {SMALLEST_UNDERCUT_M} m and no start shape is given");
            findings.push(
                Diagnostic::error("undercut.none", "undercut.floor_level_m", message)
                    .hint("give `floor_level_m`, `roof_level_m` and `back` of the hollow that would form, or survey the hollow"),
            );
            None
        }
    }
}

fn surveyed_walk(model: &Model, walk: &[Point], found: undercut::Found, findings: &mut Vec<Diagnostic>) -> Option<Walk> {
    let Some((before, mouth)) = undercut::mouth(walk, found) else {
        findings.push(Diagnostic::error(
            "section.surface",
            "section.surface",
            "the surface before the undercut does not reach below the lip",
        ));
        return None;
    };
    let mut lead = walk[..=before].to_vec();
    push_distinct(&mut lead, mouth);
    let mouth = lead[lead.len() - 1];
    let mut hollow = vec![mouth];
    for p in &walk[before + 1..=found.lip] {
        push_distinct(&mut hollow, *p);
    }
    let (rest, brow) = with_brow(model, walk[found.lip..].to_vec(), mouth[1], findings)?;
    Some(Walk { lead, hollow: Path::straight(hollow), rest, brow, surveyed: true })
}

/// The walk around a hollow that starts on the face between two levels.
fn start_walk(model: &Model, walk: &[Point], start: &StartShape, findings: &mut Vec<Diagnostic>) -> Option<Walk> {
    let (floor, roof) = (start.floor_level_m, start.roof_level_m);
    let in_order = floor < roof;
    if !in_order {
        let message = format!("the roof level of {roof} m is not above the floor level of {floor} m");
        findings.push(
            Diagnostic::error("undercut.levels", "undercut.roof_level_m", message).hint("give the roof of the hollow above its floor"),
        );
        return None;
    }
    // The face is where the walk rises through the roof level to the highest brow.
    let rising = |level: f64, k: usize| walk[k][1] <= level + 1e-9 && level + 1e-9 < walk[k + 1][1];
    let mut best: Option<(usize, Vec<Point>, usize)> = None;
    for k in (0..walk.len() - 1).filter(|&k| rising(roof, k)) {
        let rest = rest_from(walk, k, roof);
        let brow = undercut::brow(&rest, 0, floor);
        let height = |rest: &[Point], brow: usize| rest[brow][1];
        if let Some(brow) = brow.filter(|&brow| best.as_ref().is_none_or(|(_, other, b)| height(other, *b) < height(&rest, brow))) {
            best = Some((k, rest, brow));
        }
    }
    let Some((k_roof, rest, _)) = best else {
        let message = format!("the surface does not rise through the roof level of {roof} m to a brow above it");
        findings.push(Diagnostic::error("undercut.levels", "undercut.roof_level_m", message).hint("give a level on the face"));
        return None;
    };
    let Some(k_floor) = (0..=k_roof).rev().find(|&k| walk[k][1] <= floor + 1e-9) else {
        let message = format!("the surface in front of the face is nowhere as low as the floor level of {floor} m");
        findings
            .push(Diagnostic::error("undercut.levels", "undercut.floor_level_m", message).hint("give the level of the platform or above"));
        return None;
    };
    let mut lead = walk[..=k_floor].to_vec();
    push_distinct(&mut lead, at_level(walk, k_floor, floor));
    let (mouth, lip) = (lead[lead.len() - 1], rest[0]);
    if roof - floor < (lip[0] - mouth[0]).abs() {
        let message = format!(
            "between floor and roof level the surface runs {:.2} m horizontally, more than the height of {:.2} m: that is no face",
            lip[0] - mouth[0],
            roof - floor
        );
        findings.push(
            Diagnostic::error("undercut.levels", "undercut.floor_level_m", message)
                .hint("give levels between which the face is steeper than 45 degrees"),
        );
        return None;
    }
    let (rest, brow) = with_brow(model, rest, floor, findings)?;
    Some(Walk { lead, hollow: start::hollow(mouth, lip, start.back, model.undercut.growth), rest, brow, surveyed: false })
}

/// The walk from the point at a level on piece `k`.
fn rest_from(walk: &[Point], k: usize, level: f64) -> Vec<Point> {
    let mut rest = vec![at_level(walk, k, level)];
    for p in &walk[k + 1..] {
        push_distinct(&mut rest, *p);
    }
    rest
}

fn at_level(walk: &[Point], k: usize, level: f64) -> Point {
    let (a, b) = (walk[k], walk[k + 1]);
    if (b[1] - a[1]).abs() <= 1e-12 { a } else { [between(a, b, ((level - a[1]) / (b[1] - a[1])).clamp(0.0, 1.0))[0], level] }
}

pub(super) fn push_distinct(points: &mut Vec<Point>, p: Point) {
    if points.last().is_none_or(|last| SAME_POINT_M < distance(*last, p)) {
        points.push(p);
    }
}

/// The rest of the walk and the index of its brow: the given one, else the found one.
fn with_brow(model: &Model, rest: Vec<Point>, toe_z_m: f64, findings: &mut Vec<Diagnostic>) -> Option<(Vec<Point>, usize)> {
    let Some(given) = model.section.brow_m else {
        let found = undercut::brow(&rest, 0, toe_z_m).filter(|&brow| brow + 1 < rest.len());
        if found.is_none() {
            findings.push(
                Diagnostic::error(
                    "section.brow",
                    "section.brow",
                    "no brow was found: the surface above the lip never rises at under 30 degrees",
                )
                .hint("survey further inland, or give `brow = [x, z]`"),
            );
        }
        return found.map(|brow| (rest, brow));
    };
    let mut path = Path::straight(rest);
    let (at, off) = path.nearest(given);
    let limit = 1.0;
    let on_surface = off <= limit;
    if !on_surface {
        let message =
            format!("the brow [{}, {}] lies {off:.2} m off the surface above the undercut, more than {limit} m", given[0], given[1]);
        findings.push(Diagnostic::error("section.brow", "section.brow", message).hint("give a point of the surface landward of the lip"));
        return None;
    }
    let brow = path.insert(at, SAME_POINT_M);
    Some((path.points_m().to_vec(), brow))
}
