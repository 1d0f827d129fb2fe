//! Reads the section of a model: from surveyed points to a [`Site`], with every reason why that cannot be.
use std::sync::Arc;

use super::arc::{Point, between, distance};
use super::body::Shared;
use super::crossing::{SectionError, self_crossing};
use super::envelope::{PiecewiseLinear, highest};
use super::extent::{Extents, Marks, extents};
use super::fairing::fair;
use super::growth::Hollow;
use super::path::Path;
use super::site::{Site, SurveyedUndercut};
use super::strata::Strata;
use super::undercut::{self, NAMED_HOLLOW_M, SMALLEST_UNDERCUT_M};
use super::{extent, start};
use crate::diagnostic::{Checked, Diagnostic, Severity, nth};
use crate::model::{ContactLine, Model, StartShape};

/// Survey points nearer together than this are one, m.
const SAME_POINT_M: f64 = 1e-6;
/// An original surface this far below the present ground is an error, above it a difference of surveys, m.
const ORIGINAL_BELOW_M: f64 = 0.5;

/// The surveyed walk taken apart.
struct Walk {
    /// From the sea to the mouth.
    lead: Vec<Point>,
    hollow: Path,
    /// From the lip to the land.
    rest: Vec<Point>,
    /// Index of the brow in `rest`.
    brow: usize,
    surveyed: bool,
}

/// See [`Site::new`].
pub(super) fn site(model: &Model) -> Result<Checked<Site>, Vec<Diagnostic>> {
    let mut findings = Vec::new();
    let walk = surface(model).map_err(|error| vec![error])?;
    let walk = take_apart(model, &walk, &mut findings);
    findings.extend(contact_errors(model));
    let Some(walk) = walk.filter(|_| !has_error(&findings)) else { return Err(findings) };
    let site = assemble(model, walk, &mut findings);
    match site {
        Some(value) if !has_error(&findings) => Ok(Checked { value, warnings: findings }),
        _ => Err(findings),
    }
}

fn has_error(findings: &[Diagnostic]) -> bool {
    findings.iter().any(|finding| finding.severity == Severity::Error)
}

/// The surveyed points, carried on level far beyond any side of the model.
fn surface(model: &Model) -> Result<Vec<Point>, Diagnostic> {
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
    if let Some(at) = self_crossing(&path, 0, path.n_segments()) {
        let message = format!("the surface meets itself at x = {:.3} m, z = {:.3} m", at[0], at[1]);
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
fn take_apart(model: &Model, walk: &[Point], findings: &mut Vec<Diagnostic>) -> Option<Walk> {
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
    if !(floor < roof) {
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

fn push_distinct(points: &mut Vec<Point>, p: Point) {
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
    if !(off <= limit) {
        let message =
            format!("the brow [{}, {}] lies {off:.2} m off the surface above the undercut, more than {limit} m", given[0], given[1]);
        findings.push(Diagnostic::error("section.brow", "section.brow", message).hint("give a point of the surface landward of the lip"));
        return None;
    }
    let brow = path.insert(at, SAME_POINT_M);
    Some((path.points_m().to_vec(), brow))
}

/// Contacts that are no functions of x.
fn contact_errors(model: &Model) -> Vec<Diagnostic> {
    let at = |j: usize| format!("{}.base", nth("layers", j));
    let n = model.layers.len();
    let mut findings = Vec::new();
    for (j, layer) in model.layers.iter().enumerate() {
        match &layer.base {
            None if j + 1 < n => {
                findings.push(Diagnostic::error("layers.base", at(j), "only the last layer has no base").hint("give its lower contact"))
            }
            Some(_) if j + 1 == n => {
                findings.push(Diagnostic::warning("layers.base", at(j), "the last layer's base is not used; it goes on downward"))
            }
            Some(ContactLine::Points(points)) if points.is_empty() || points.windows(2).any(|p| !(p[0][0] < p[1][0])) => {
                findings.push(
                    Diagnostic::error("layers.base", at(j), "the points of a contact must have growing x")
                        .hint("list them from the sea to the land"),
                );
            }
            _ => {}
        }
    }
    findings
}

/// The site from the walk, with the checks that need all of it.
fn assemble(model: &Model, walk: Walk, findings: &mut Vec<Diagnostic>) -> Option<Site> {
    let (mouth, lip, brow) = (walk.lead[walk.lead.len() - 1], walk.rest[0], walk.rest[walk.brow]);
    let height_m = brow[1] - mouth[1];
    let search_to_depth_m = model.undercut.search_to_depth_m;
    if !(0.0 < height_m) {
        let message = format!("the brow at {:.2} m is not above the mouth at {:.2} m", brow[1], mouth[1]);
        findings.push(Diagnostic::error("section.brow", "section.brow", message).hint("give `brow = [x, z]`"));
        return None;
    }
    let marks = Marks { mouth, brow, deepest_x_m: lip[0] + search_to_depth_m, height_m };
    let all: Vec<Point> = walk.lead.iter().chain(&walk.rest).copied().collect();
    let lowest = |from: f64, to: f64| all.iter().filter(|p| from <= p[0] && p[0] <= to).map(|p| p[1]).fold(mouth[1], f64::min);
    let (extents, doubts) = extents(&model.extent, &marks, &lowest);
    findings.extend(doubts);
    findings.extend(short_survey(model, brow, height_m));
    if has_error(findings) {
        return None;
    }
    let (lead, rest) = clip(&walk, &extents);
    let other_hollows = [&lead, &rest].into_iter().flat_map(|part| undercut::hollows(part)).collect();
    let ground = highest(&pieces(&[&lead, &[mouth, lip], &rest]));
    let uneroded = uneroded(model, &ground, brow, findings);
    let contacts: Vec<ContactLine> = model.layers.iter().take(model.layers.len() - 1).filter_map(|layer| layer.base.clone()).collect();
    let strata = Strata::new(&contacts, &uneroded, extents.seaward_x_m, extents.landward_x_m);
    let hollow = Hollow::new(walk.hollow, model.undercut.growth);
    let round_corners_m = fairing_radius(model, &hollow, findings)?;
    let deepest = hollow.at_depth(search_to_depth_m.max(0.0));
    let shared = Shared {
        extents,
        strata,
        ground,
        rocks: model.layers.iter().map(|layer| layer.rock).collect(),
        cracks: model.cracks.iter().map(|crack| crack.path_m.clone()).collect(),
        brow_m: brow,
        cliff_height_m: height_m,
        dense_m: [lip, [deepest.largest_x_m(), lip[1]]],
    };
    let mut site = Site {
        shared: Arc::new(shared),
        lead: Path::straight(lead),
        rest: Path::straight(rest),
        brow: walk.brow,
        fairing: round_corners_m.map(|radius| fair(if walk.surveyed { hollow.reference() } else { &deepest }, radius).1),
        round_corners_m,
        hollow,
        surveyed: None,
        other_hollows,
        search_to_depth_m,
    };
    if walk.surveyed {
        site.surveyed = Some(surveyed(&site, mouth, lip));
    }
    depth_findings(&site, findings);
    Some(site)
}

fn surveyed(site: &Site, mouth_m: Point, lip_m: Point) -> SurveyedUndercut {
    let depth_m = site.hollow.depth_m() + site.fairing.map_or(0.0, |fairing| fairing.depth_change_m);
    let back_m = site.at_depth(depth_m).ok().and_then(|section| section.back_m());
    SurveyedUndercut { back_m: back_m.unwrap_or([lip_m[0] + depth_m, lip_m[1]]), lip_m, mouth_m, depth_m }
}

/// A survey that ends before the ground that is searched.
fn short_survey(model: &Model, brow: Point, height_m: f64) -> Option<Diagnostic> {
    let last = model.section.surface.last()?;
    let limit = brow[0] + extent::SEARCHED_IN_HEIGHTS * height_m;
    (last.x_m < limit).then(|| {
        let message =
            format!("the surface ends at x = {:.2} m and is carried on level; the searched ground ends at {limit:.2} m", last.x_m);
        Diagnostic::warning("section.carried-on-level", "section.surface", message)
            .hint("survey the ground to twice the cliff height behind the brow")
    })
}

/// Lead from the seaward side, rest to the landward side.
fn clip(walk: &Walk, extents: &Extents) -> (Vec<Point>, Vec<Point>) {
    let at_x = |a: Point, b: Point, x: f64| [x, between(a, b, (x - a[0]) / (b[0] - a[0]))[1]];
    let (from, to) = (extents.seaward_x_m, extents.landward_x_m);
    let first = walk.lead.windows(2).rposition(|p| p[0][0] <= from && from < p[1][0]).unwrap_or(0);
    let mut lead = vec![at_x(walk.lead[first], walk.lead[first + 1], from)];
    walk.lead[first + 1..].iter().for_each(|p| push_distinct(&mut lead, *p));
    let last = (walk.brow..walk.rest.len() - 1).find(|&k| walk.rest[k][0] < to && to <= walk.rest[k + 1][0]).unwrap_or(walk.rest.len() - 2);
    let mut rest = walk.rest[..=last].to_vec();
    push_distinct(&mut rest, at_x(walk.rest[last], walk.rest[last + 1], to));
    (lead, rest)
}

fn pieces(walks: &[&[Point]]) -> Vec<[Point; 2]> {
    walks.iter().flat_map(|walk| walk.windows(2).map(|pair| [pair[0], pair[1]])).collect()
}

fn steps(function: &PiecewiseLinear) -> Vec<[Point; 2]> {
    function.pieces().map(|(x, z)| [[x[0], z[0]], [x[1], z[1]]]).collect()
}

/// The un-eroded surface: given (level beyond its ends), else level at the brow seaward of it; never below the present ground.
fn uneroded(model: &Model, ground: &PiecewiseLinear, brow: Point, findings: &mut Vec<Diagnostic>) -> PiecewiseLinear {
    let ends = ground.breaks();
    let (from, to) = (ends[0], ends[ends.len() - 1]);
    let before: Vec<Point> = match &model.section.original_surface_m {
        None => vec![[from, brow[1]], brow],
        Some(points) if !points.is_empty() => {
            let function = PiecewiseLinear::through(
                &[
                    &[[from.min(points[0][0]) - 1.0, points[0][1]]],
                    points.as_slice(),
                    &[[to.max(points[points.len() - 1][0]) + 1.0, points[points.len() - 1][1]]],
                ]
                .concat(),
            );
            findings.extend(original_below_ground(&function, ground));
            let inner = function.breaks().iter().copied().filter(|x| from < *x && *x < to);
            std::iter::once(from).chain(inner).chain(std::iter::once(to)).map(|x| [x, function.value(x)]).collect()
        }
        Some(_) => Vec::new(),
    };
    let mut all = steps(ground);
    all.extend(pieces(&[&before]));
    highest(&all)
}

fn original_below_ground(original: &PiecewiseLinear, ground: &PiecewiseLinear) -> Option<Diagnostic> {
    let ends = ground.breaks();
    let places = original.breaks().iter().chain(ends).copied().filter(|x| ends[0] <= *x && *x <= ends[ends.len() - 1]);
    let (x, below) = places.map(|x| (x, ground.value(x) - original.value(x))).max_by(|a, b| a.1.total_cmp(&b.1))?;
    let message = format!("the original surface lies {below:.2} m below the present ground at x = {x:.2} m");
    let at = "section.original_surface";
    match below {
        b if ORIGINAL_BELOW_M < b => Some(
            Diagnostic::error("section.original-surface", at, format!("{message}, more than {ORIGINAL_BELOW_M} m"))
                .hint("the ground before the sea cut it was at least as high as today's"),
        ),
        b if 0.01 < b => Some(Diagnostic::warning("section.original-surface", at, format!("{message}; the present ground is used there"))),
        _ => None,
    }
}

/// The radius of fairing, refused where it is not one; the outer `None` says that there is no site.
fn fairing_radius(model: &Model, hollow: &Hollow, findings: &mut Vec<Diagnostic>) -> Option<Option<f64>> {
    let Some(radius) = model.section.round_corners_m else { return Some(None) };
    let limit = 0.5 * hollow.height_m();
    if 0.0 < radius && radius <= limit {
        return Some(Some(radius));
    }
    let message = format!("a corner radius of {radius} m is not between 0 and half the height of the hollow, {limit:.2} m");
    findings
        .push(Diagnostic::error("section.round-corners", "section.round_corners_m", message).hint("give a smaller radius or leave it out"));
    None
}

/// Whether the searched depths fit into the section.
fn depth_findings(site: &Site, findings: &mut Vec<Diagnostic>) {
    let (to, surveyed, at) = (site.search_to_depth_m, site.surveyed_depth_m(), "undercut.search_to_depth_m");
    if !(surveyed <= to && 0.0 < to) {
        let message = format!("the search ends at a depth of {to} m, but the undercut is already {surveyed:.2} m deep");
        findings.push(Diagnostic::error("undercut.search-depth", at, message).hint("search to a greater depth"));
        return;
    }
    for depth in [0.0, surveyed, to] {
        let Err(error) = site.at_depth(depth) else { continue };
        let (mut fits, mut fails) = (0.0, depth);
        for _ in 0..20 {
            let middle = 0.5 * (fits + fails);
            if site.at_depth(middle).is_ok() { fits = middle } else { fails = middle }
        }
        let key = if matches!(error, SectionError::MeetsCrack { .. }) && depth == surveyed { "cracks" } else { at };
        findings.push(
            Diagnostic::error("undercut.search-depth", key, error.to_string())
                .hint(format!("search to at most {:.2} m", (fits * 100.0).floor() / 100.0)),
        );
        return;
    }
}
