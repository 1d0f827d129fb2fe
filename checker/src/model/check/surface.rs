//! The surveyed surface: enough points, from the sea to the land, no doubled point, no crossing.
use super::super::{Date, Model, SurfacePoint};
use super::z_range_m;
use crate::diagnostic::{Diagnostic, nth};

/// Points closer than this are the same point, m.
const SAME_POINT_M: f64 = 1e-6;

/// Smallest height of a cliff, m.
pub(super) const LEAST_HEIGHT_M: f64 = 0.5;

/// Crossings after which the search stops.
const MOST_CROSSINGS: usize = 10;

pub(super) fn check(model: &Model, findings: &mut Vec<Diagnostic>) {
    let surface = &model.section.surface;
    if !surface.is_empty() && surface.len() < 4 {
        let message = format!("the surface has {} points, but at least 4 are needed", surface.len());
        let hint = "walk from the platform over floor, back, roof, face and brow to the plateau";
        findings.push(Diagnostic::error("surface.few-points", "section", message).hint(hint));
        return;
    }
    if let (Some(first), Some(last)) = (surface.first(), surface.last()) {
        let runs_the_right_way = direction(first, last, findings);
        if runs_the_right_way && height(model, findings) {
            doubled(surface, findings);
            crossings(surface, findings);
        }
    }
    original_surface(model, findings);
    dates(model, findings);
}

/// The surface must run from the sea (low x, low z) to the land; whether it does.
fn direction(first: &SurfacePoint, last: &SurfacePoint, findings: &mut Vec<Diagnostic>) -> bool {
    if first.x_m >= last.x_m {
        let message = format!("the surface runs from x = {} m to x = {} m, but x must grow landward", first.x_m, last.x_m);
        let hint = "list the points from the sea to the land; if x grows toward the sea, change the sign of every x";
        findings.push(Diagnostic::error("surface.land-to-sea", nth("section.surface", 0), message).hint(hint));
        return false;
    }
    if first.z_m > last.z_m {
        let message = format!(
            "the surface starts at z = {} m and ends lower, at z = {} m: it seems to run from the land to the sea",
            first.z_m, last.z_m
        );
        let hint = "x grows landward and z upward: reverse the order of the points and change the sign of every x";
        findings.push(Diagnostic::error("surface.land-to-sea", nth("section.surface", 0), message).hint(hint));
        return false;
    }
    true
}

fn height(model: &Model, findings: &mut Vec<Diagnostic>) -> bool {
    let Some([low, high]) = z_range_m(model) else { return false };
    if high - low < LEAST_HEIGHT_M {
        let message = format!("the surface rises by {} m only; there is no cliff of at least {LEAST_HEIGHT_M} m", high - low);
        findings
            .push(Diagnostic::error("surface.flat", "section.surface", message).hint("levels are in m; check the columns of the survey"));
        return false;
    }
    true
}

fn doubled(surface: &[SurfacePoint], findings: &mut Vec<Diagnostic>) {
    for (i, pair) in surface.windows(2).enumerate() {
        if distance_m(&pair[0], &pair[1]) < SAME_POINT_M {
            let message = format!("points {} and {} of the surface are the same, [{}, {}]", i + 1, i + 2, pair[1].x_m, pair[1].z_m);
            let diagnostic = Diagnostic::error("surface.doubled", nth("section.surface", i + 1), message).hint("delete one of them");
            findings.push(diagnostic.also(nth("section.surface", i)));
        }
    }
}

fn distance_m(a: &SurfacePoint, b: &SurfacePoint) -> f64 {
    (b.x_m - a.x_m).hypot(b.z_m - a.z_m)
}

/// Segments that meet other than at their common end. Sweep along x over segments sorted by their smallest x.
fn crossings(surface: &[SurfacePoint], findings: &mut Vec<Diagnostic>) {
    // Doubled points were reported; here they count once. `first[i]` is the index of the point where segment i starts.
    let is_new = |&i: &usize| i == 0 || distance_m(&surface[i - 1], &surface[i]) >= SAME_POINT_M;
    let first: Vec<usize> = (0..surface.len()).filter(is_new).collect();
    let at = |i: usize| [surface[i].x_m, surface[i].z_m];
    let segments: Vec<[[f64; 2]; 2]> = first.windows(2).map(|pair| [at(pair[0]), at(pair[1])]).collect();
    let low = |i: usize| segments[i][0][0].min(segments[i][1][0]);
    let high = |i: usize| segments[i][0][0].max(segments[i][1][0]);
    let mut order: Vec<usize> = (0..segments.len()).collect();
    order.sort_by(|&a, &b| low(a).total_cmp(&low(b)).then(a.cmp(&b)));
    let mut active: Vec<usize> = Vec::new();
    let mut found: Vec<[usize; 2]> = Vec::new();
    for i in order {
        active.retain(|&other| high(other) >= low(i));
        for &other in &active {
            let [a, b] = [i.min(other), i.max(other)];
            if meets(&segments, a, b) {
                found.push([a, b]);
            }
        }
        active.push(i);
        if found.len() > MOST_CROSSINGS {
            break;
        }
    }
    found.sort_unstable();
    for [a, b] in found.into_iter().take(MOST_CROSSINGS) {
        let [a, b] = [first[a], first[b]];
        let message =
            format!("the surface crosses or touches itself: from point {} to {}, and from point {} to {}", a + 1, a + 2, b + 1, b + 2);
        let hint = "the surface is one line from the sea to the land without loops; check the order and the coordinates of these points";
        findings.push(
            Diagnostic::error("surface.crossing", nth("section.surface", b + 1), message).hint(hint).also(nth("section.surface", a + 1)),
        );
    }
}

/// Whether segments `a < b` of a line meet; neighbors only where one folds back onto the other.
fn meets(segments: &[[[f64; 2]; 2]], a: usize, b: usize) -> bool {
    let ([p, q], [r, s]) = (segments[a], segments[b]);
    let length_a = (q[0] - p[0]).hypot(q[1] - p[1]);
    let length_b = (s[0] - r[0]).hypot(s[1] - r[1]);
    if b == a + 1 {
        let turn = cross(p, q, s);
        let dot = (q[0] - p[0]) * (s[0] - r[0]) + (q[1] - p[1]) * (s[1] - r[1]);
        return dot < 0.0 && turn.abs() <= 1e-9 * length_a * length_b;
    }
    let (first, second) = (cross(r, s, p), cross(r, s, q));
    let (third, fourth) = (cross(p, q, r), cross(p, q, s));
    let opposite = |a: f64, b: f64| (a > 0.0 && b < 0.0) || (a < 0.0 && b > 0.0);
    if opposite(first, second) && opposite(third, fourth) {
        return true;
    }
    let touches = |turn: f64, end: [f64; 2], from: [f64; 2], to: [f64; 2], length: f64| {
        let along = ((end[0] - from[0]) * (to[0] - from[0]) + (end[1] - from[1]) * (to[1] - from[1])) / (length * length);
        turn.abs() <= SAME_POINT_M * length && along >= 0.0 && along <= 1.0
    };
    touches(first, p, r, s, length_b)
        || touches(second, q, r, s, length_b)
        || touches(third, r, p, q, length_a)
        || touches(fourth, s, p, q, length_a)
}

/// Twice the area of the triangle `a b c`, positive counterclockwise.
fn cross(a: [f64; 2], b: [f64; 2], c: [f64; 2]) -> f64 {
    (b[0] - a[0]) * (c[1] - a[1]) - (b[1] - a[1]) * (c[0] - a[0])
}

fn original_surface(model: &Model, findings: &mut Vec<Diagnostic>) {
    let Some(original) = &model.section.original_surface_m else { return };
    for (i, pair) in original.windows(2).enumerate() {
        if pair[0][0] >= pair[1][0] {
            let message = format!("x does not grow from {} m to {} m", pair[0][0], pair[1][0]);
            let hint = "list the ground before the sea cut it from the sea to the land";
            findings.push(Diagnostic::error("surface.original-order", nth("section.original_surface", i + 1), message).hint(hint));
        }
    }
}

fn dates(model: &Model, findings: &mut Vec<Diagnostic>) {
    let show = |date: Date| format!("{}-{:02}-{:02}", date.year, date.month, date.day);
    if let (Some(date), Some(until)) = (model.report.date, model.report.valid_until)
        && until < date
    {
        let message = format!("the report is valid until {}, before its own date {}", show(until), show(date));
        findings.push(
            Diagnostic::error("report.valid-until", "report.valid_until", message).hint("correct one of the dates").also("report.date"),
        );
    }
    let surveyed = model.section.surveyed.as_ref().and_then(|survey| survey.date);
    if let (Some(surveyed), Some(date)) = (surveyed, model.report.date)
        && date < surveyed
    {
        let message = format!("the survey of {} is later than the report of {}", show(surveyed), show(date));
        findings.push(Diagnostic::warning("report.survey-date", "section.surveyed", message).hint("check both dates").also("report.date"));
    }
}
