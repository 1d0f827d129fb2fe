//! Sides and base of the model.
use super::arc::Point;
use crate::diagnostic::Diagnostic;
use crate::model::Extent;

/// Default distance of the sides from brow and mouth, in cliff heights.
const SIDES_IN_HEIGHTS: f64 = 4.0;
/// Default depth of the base below the mouth, in cliff heights.
const BASE_IN_HEIGHTS: f64 = 3.0;
/// Distance behind the brow within which demands are searched, in cliff heights.
pub(crate) const SEARCHED_IN_HEIGHTS: f64 = 2.0;

/// Sides and base of the model.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Extents {
    /// Seaward side, m.
    pub seaward_x_m: f64,
    /// Landward side, m.
    pub landward_x_m: f64,
    /// Base, m.
    pub base_z_m: f64,
}

/// What the extents depend on.
pub(crate) struct Marks {
    pub(crate) mouth: Point,
    pub(crate) brow: Point,
    /// x of the back at the greatest searched depth, m.
    pub(crate) deepest_x_m: f64,
    /// Brow minus mouth, m.
    pub(crate) height_m: f64,
}

/// Extents as given, else 4 H landward of the brow, 4 H seaward of the mouth, 3 H below it; findings for given ones too near.
///
/// `lowest` is the level of the lowest surface point between two x.
pub(crate) fn extents(given: &Extent, marks: &Marks, lowest: &dyn Fn(f64, f64) -> f64) -> (Extents, Vec<Diagnostic>) {
    let height = marks.height_m;
    let search_end = marks.brow[0].max(marks.deepest_x_m) + SEARCHED_IN_HEIGHTS * height;
    let seaward_x_m = given.seaward_x_m.unwrap_or(marks.mouth[0].min(marks.brow[0]) - SIDES_IN_HEIGHTS * height);
    let landward_x_m = given.landward_x_m.unwrap_or((marks.brow[0] + SIDES_IN_HEIGHTS * height).max(search_end));
    let floor = lowest(seaward_x_m, landward_x_m);
    let base_z_m = given.base_z_m.unwrap_or((marks.mouth[1] - BASE_IN_HEIGHTS * height).min(floor - height));
    let extents = Extents { seaward_x_m, landward_x_m, base_z_m };
    let mut findings = Vec::new();
    let mut too_near = |key: &str, value: f64, limit: f64, what: &str| {
        findings.push(
            Diagnostic::error("extent.too-near", format!("extent.{key}"), format!("the model ends at {value:.2} m, {what} {limit:.2} m"))
                .hint(format!("move it beyond {limit:.2} m, best by twice the cliff height of {height:.1} m, or leave it out")),
        );
    };
    let seaward_limit = marks.mouth[0].min(marks.brow[0]);
    if seaward_limit <= seaward_x_m {
        too_near("seaward_x_m", seaward_x_m, seaward_limit, "but the mouth of the undercut is at");
    }
    if landward_x_m <= marks.deepest_x_m.max(marks.brow[0]) {
        let limit = marks.deepest_x_m.max(marks.brow[0]);
        too_near("landward_x_m", landward_x_m, limit, "but the undercut at the greatest searched depth (or the brow) reaches");
    }
    if floor <= base_z_m {
        too_near("base_z_m", base_z_m, floor, "not below the lowest point of the surface at");
    }
    if findings.is_empty() {
        findings = doubts(&extents, marks, search_end);
    }
    (extents, findings)
}

/// Warnings for extents that are possible but near.
fn doubts(extents: &Extents, marks: &Marks, search_end: f64) -> Vec<Diagnostic> {
    let height = marks.height_m;
    let near = |key: &str, message: String| {
        Diagnostic::warning("extent.near", format!("extent.{key}"), message)
            .hint("stresses then depend on the model's sides; leave the key out for the default")
    };
    let mut findings = Vec::new();
    if marks.mouth[0] - 2.0 * height < extents.seaward_x_m {
        findings.push(near(
            "seaward_x_m",
            format!(
                "the model's seaward side is only {:.2} m from the mouth, under twice the cliff height",
                marks.mouth[0] - extents.seaward_x_m
            ),
        ));
    }
    if extents.landward_x_m < search_end - 1e-9 {
        findings.push(near(
            "landward_x_m",
            format!("the model's landward side at {:.2} m cuts the searched ground, which ends at {search_end:.2} m", extents.landward_x_m),
        ));
    }
    if marks.mouth[1] - height < extents.base_z_m {
        findings.push(near(
            "base_z_m",
            format!("the model's base is only {:.2} m below the mouth, under the cliff height", marks.mouth[1] - extents.base_z_m),
        ));
    }
    findings
}
