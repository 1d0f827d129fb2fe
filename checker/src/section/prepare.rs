//! Reads the section of a model: from surveyed points to a [`Site`], with every reason why that cannot be.
use std::sync::Arc;

use super::arc::{Point, between};
use super::body::Shared;
use super::crossing::SectionError;
use super::envelope::highest;
use super::extent::{self, Extents, Marks, extents};
use super::fairing::fair;
use super::growth::Hollow;
use super::path::Path;
use super::site::{Site, SurveyedUndercut};
use super::strata::Strata;
use super::undercut;
use super::uneroded::{pieces, uneroded};
use super::walk::{Walk, push_distinct, surface, take_apart};
use crate::diagnostic::{Checked, Diagnostic, Severity, nth};
use crate::model::{ContactLine, Model};

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

/// Contacts that are no functions of x.
fn contact_errors(model: &Model) -> Vec<Diagnostic> {
    let at = |j: usize| format!("{}.base", nth("layers", j));
    let n = model.layers.len();
    let mut findings = Vec::new();
    if n == 0 {
        findings.push(Diagnostic::error("layers.none", "layers", "the model has no layer").hint("give at least one"));
    }
    for (j, layer) in model.layers.iter().enumerate() {
        match &layer.base {
            None if j + 1 < n => {
                findings.push(Diagnostic::error("layers.base", at(j), "only the last layer has no base").hint("give its lower contact"));
            }
            Some(_) if j + 1 == n => {
                findings.push(Diagnostic::warning("layers.base", at(j), "the last layer's base is not used; it goes on downward"));
            }
            Some(ContactLine::Points(points)) if points.is_empty() || points.windows(2).any(|p| !p[0][0].total_cmp(&p[1][0]).is_lt()) => {
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
    let rises = 0.0 < height_m;
    if !rises {
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
    let round_corners_m = fairing_radius(model, &hollow).map_err(|error| findings.push(error)).ok()?;
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

/// The radius of fairing, if any.
fn fairing_radius(model: &Model, hollow: &Hollow) -> Result<Option<f64>, Diagnostic> {
    let Some(radius) = model.section.round_corners_m else { return Ok(None) };
    let limit = 0.5 * hollow.height_m();
    if 0.0 < radius && radius <= limit {
        return Ok(Some(radius));
    }
    let message = format!("a corner radius of {radius} m is not between 0 and half the height of the hollow, {limit:.2} m");
    Err(Diagnostic::error("section.round-corners", "section.round_corners_m", message).hint("give a smaller radius or leave it out"))
}

/// Whether the searched depths fit into the section.
fn depth_findings(site: &Site, findings: &mut Vec<Diagnostic>) {
    let (to, surveyed, at) = (site.search_to_depth_m, site.surveyed_depth_m(), "undercut.search_to_depth_m");
    let deepens = surveyed <= to && 0.0 < to;
    if !deepens {
        let message = format!("the search ends at a depth of {to} m, but the undercut is already {surveyed:.2} m deep");
        findings.push(Diagnostic::error("undercut.search-depth", at, message).hint("search to a greater depth"));
        return;
    }
    if let Err(error) = site.at_depth(0.0) {
        let hint = "the state without undercut is needed for comparison: smooth the survey near mouth and lip";
        findings.push(Diagnostic::error("section.surface", "section.surface", error.to_string()).hint(hint));
        return;
    }
    for depth in [surveyed, to] {
        let Err(error) = site.at_depth(depth) else { continue };
        let (mut fits, mut fails) = (0.0, depth);
        for _ in 0..20 {
            let middle = 0.5 * (fits + fails);
            if site.at_depth(middle).is_ok() { fits = middle } else { fails = middle }
        }
        let key = if matches!(error, SectionError::MeetsCrack { .. }) && depth <= surveyed { "cracks" } else { at };
        findings.push(
            Diagnostic::error("undercut.search-depth", key, error.to_string())
                .hint(format!("search to at most {:.2} m", (fits * 100.0).floor() / 100.0)),
        );
        return;
    }
}
