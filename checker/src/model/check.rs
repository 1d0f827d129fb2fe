//! Checks of one part of the model against another: surface, layers, rocks, loads, places. All problems at once.
//!
//! `Model` in, findings out. A value that is not a number stands for one that was already reported and draws no finding here.
mod layers;
mod loads;
mod places;
mod rocks;
mod surface;
mod typical;

use super::Model;
use crate::diagnostic::Diagnostic;

/// All findings about a model, errors and warnings.
pub fn check(model: &Model) -> Vec<Diagnostic> {
    let mut findings = Vec::new();
    surface::check(model, &mut findings);
    layers::check(model, &mut findings);
    rocks::check(model, &mut findings);
    loads::check(model, &mut findings);
    places::check(model, &mut findings);
    findings
}

/// Smallest and largest x of the surveyed surface, m; `None` without points.
fn x_range_m(model: &Model) -> Option<[f64; 2]> {
    range(model.section.surface.iter().map(|point| point.x_m))
}

/// Smallest and largest z of the surveyed surface, m; `None` without points.
fn z_range_m(model: &Model) -> Option<[f64; 2]> {
    range(model.section.surface.iter().map(|point| point.z_m))
}

fn range(values: impl Iterator<Item = f64>) -> Option<[f64; 2]> {
    values.fold(None, |range, value| match range {
        None => Some([value, value]),
        Some([low, high]) => Some([f64::min(low, value), f64::max(high, value)]),
    })
}
