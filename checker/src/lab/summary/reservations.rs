//! What must be said beside the fits of a laboratory file.
use super::super::{Fit, LabResults, Origin, Point, ShearStage, ShearedAlong, StrengthTest};
use super::{LabSummary, Value, at};
use crate::diagnostic::Diagnostic;

/// Fastest shear displacement taken as drained without a statement, m/s: 0.2 mm/min.
/// ISRM suggested method for direct shear of rock joints (2014) names 0.1 to 0.2 mm/min (from memory).
const FASTEST_DRAINED_M_PER_S: f64 = 0.2e-3 / 60.0;
/// Difference of cohesion, as a share, and of friction angle, rad, at which the laboratory's own fit is named: common practice, no source.
const OWN_FIT_COHESION: f64 = 0.10;
const OWN_FIT_ANGLE_RAD: f64 = 2.0 * std::f64::consts::PI / 180.0;
/// Diameter up to which the size law of uniaxial strength was tested, m (Hoek & Brown 1980, from memory).
const SIZE_LAW_LIMIT_M: f64 = 0.2;
/// Least coefficients of variation within one rock that compilations give.
struct LeastCov {
    tensile: f64,
    uniaxial: f64,
    cohesion: f64,
}

/// K. K. Phoon, F. H. Kulhawy, Can. Geotech. J. 36 (1999) and later compilations: 15-40 % for strengths of rock, 10-50 % for c' (from memory).
const LEAST_PUBLISHED_COV: LeastCov = LeastCov { tensile: 0.15, uniaxial: 0.15, cohesion: 0.10 };
/// Least length over diameter of a uniaxial specimen. ISRM suggested method (1979) asks for 2.5 to 3, ASTM D7012 for 2 to 2.5 (from memory).
const LEAST_SLENDERNESS: f64 = 2.0;

pub(super) fn shear(usable: &[&ShearStage], summary: &LabSummary, warnings: &mut Vec<Diagnostic>) {
    let Some(first) = usable.first() else { return };
    let mut warn = |code, message: String, hint: &str| {
        warnings.push(Diagnostic::warning(code, "direct shear", message).hint(hint));
    };
    let fastest = usable.iter().filter(|s| s.drainage.is_none()).filter_map(|s| s.rate_m_per_s).fold(0.0, f64::max);
    if FASTEST_DRAINED_M_PER_S * (1.0 + 1e-9) < fastest {
        let rate = fastest * 60e3;
        warn(
            "lab.fast-shear",
            format!("sheared at up to {rate:.3} mm/min with no statement of drainage; faster than 0.2 mm/min may be partly undrained"),
            "ask the laboratory; undrained results are not c', phi'",
        );
    } else if usable.iter().any(|s| s.drainage.is_none() && s.rate_m_per_s.is_none()) {
        warn(
            "lab.drainage-not-stated",
            "neither drainage nor rate of shear is stated; c', phi' are effective strengths only if the specimens could drain".to_owned(),
            "ask the laboratory",
        );
    }
    let mut specimens: Vec<&str> = usable.iter().map(|s| s.origin.specimen.as_str()).collect();
    specimens.sort_unstable();
    specimens.dedup();
    if specimens.len() < 3 && specimens.len() < usable.len() {
        warn(
            "lab.few-specimens",
            format!("{} stages come from {} specimens: stages of one specimen are not independent tests", usable.len(), specimens.len()),
            "the scatter between places is not in these results; widen it by judgment",
        );
    }
    if usable.iter().any(|s| s.along == ShearedAlong::NotStated) {
        warn(
            "lab.plane-not-stated",
            format!(
                "the file does not say whether specimen {} was sheared through rock or along a joint; taken as rock",
                first.origin.specimen
            ),
            "strength along a joint belongs to `[[joint_sets]]`, not to the rock",
        );
    }
    if let Some(fit) = &summary.peak {
        let (least, most) = range(fit);
        if 0.5 * most < least {
            warn(
                "lab.narrow-range",
                format!(
                    "normal stresses of {:.0} to {:.0} kPa only: cohesion is carried far beyond them to zero stress",
                    least / 1e3,
                    most / 1e3
                ),
                "add stages at low normal stress, where overhangs break",
            );
        }
    }
}

fn range(fit: &Fit) -> (f64, f64) {
    let normal = fit.points.iter().map(|p| p.normal_pa);
    (normal.clone().fold(f64::INFINITY, f64::min), normal.fold(f64::NEG_INFINITY, f64::max))
}

/// Refits the stages of each specimen that the laboratory fitted itself, and names the differences.
pub(super) fn own_fits(results: &LabResults, warnings: &mut Vec<Diagnostic>) {
    for own in &results.own_fits {
        let of_it = results.shear.iter().filter(|s| s.origin.specimen == own.origin.specimen);
        let points: Vec<Point> =
            of_it.filter_map(|s| s.peak_pa.map(|shear_pa| Point { normal_pa: s.normal_at_peak_pa, shear_pa })).collect();
        if points.len() < 3 {
            continue;
        }
        let Ok(refit) = Fit::free(&points) else { continue };
        let angle = refit.friction_angle_rad();
        let largest = refit.cohesion_pa.abs().max(own.cohesion_pa.abs());
        let differs = OWN_FIT_COHESION * largest < (refit.cohesion_pa - own.cohesion_pa).abs()
            || OWN_FIT_ANGLE_RAD < (angle - own.friction_angle_rad).abs();
        if differs {
            let message = format!(
                "specimen {}: the laboratory states c' {:.1} kPa, phi' {:.1} degrees; its stages give {:.1} kPa, {:.1} degrees, which is used",
                own.origin.specimen,
                own.cohesion_pa / 1e3,
                own.friction_angle_rad.to_degrees(),
                refit.cohesion_pa / 1e3,
                angle.to_degrees()
            );
            let hint = "the stated one may be a fit to the stress at the start of shear, rounded, or drawn by eye";
            warnings.push(Diagnostic::warning("lab.own-fit", at(&own.origin), message).hint(hint));
        }
    }
}

pub(super) fn outliers(summary: &LabSummary, warnings: &mut Vec<Diagnostic>) {
    const HINT: &str = "kept in the fit; take the row out only if the test itself failed, and say so in the report";
    let values: [(&str, &Option<Value>, f64, &str); 4] = [
        ("tensile strength", &summary.tensile, 1e6, "MPa"),
        ("uniaxial strength", &summary.uniaxial, 1e6, "MPa"),
        ("point load index", &summary.point_load, 1e6, "MPa"),
        ("unit weight", &summary.unit_weight, 1e3, "kN/m3"),
    ];
    for (what, value, unit, unit_name) in values {
        let Some((value, i)) = value.as_ref().and_then(|v| v.sample.outlier.map(|i| (v, i))) else { continue };
        let origin = &value.origins[i];
        let got = value.sample.values[i] / unit;
        let message = format!("{what} {got:.3} {unit_name} of specimen {} is an outlier (Grubbs' test, 5 %)", origin.specimen);
        warnings.push(Diagnostic::warning("lab.outlier", at(origin), message).hint(HINT));
    }
    let fits = [
        ("peak", &summary.peak),
        ("residual", &summary.residual),
        ("joint peak", &summary.joint_peak),
        ("joint residual", &summary.joint_residual),
    ];
    for (what, fit) in fits {
        let Some(fit) = fit else { continue };
        for i in fit.outliers() {
            let p = fit.points[i];
            let message = format!(
                "{what} stage {:.1} kPa at {:.1} kPa normal stress is an outlier (studentized residual, 5 % over all stages)",
                p.shear_pa / 1e3,
                p.normal_pa / 1e3
            );
            warnings.push(Diagnostic::warning("lab.outlier", "direct shear", message).hint(HINT));
        }
    }
}

/// Names strengths that scatter less than half of the least published coefficient of variation.
pub(super) fn scatter(summary: &LabSummary, warnings: &mut Vec<Diagnostic>) {
    let cov_of = |v: &Option<Value>| v.as_ref().and_then(|v| v.sample.cov());
    let cohesion = summary.peak.as_ref().filter(|f| 0.0 < f.cohesion_pa).map(|f| f.predictive().0 / f.cohesion_pa);
    let found = [
        ("tensile strength", cov_of(&summary.tensile), LEAST_PUBLISHED_COV.tensile),
        ("uniaxial strength", cov_of(&summary.uniaxial), LEAST_PUBLISHED_COV.uniaxial),
        ("cohesion", cohesion, LEAST_PUBLISHED_COV.cohesion),
    ];
    for (what, cov, published) in found {
        let Some(cov) = cov.filter(|cov| *cov < 0.5 * published) else { continue };
        let message = format!("{what} scatters by {:.1} % only; published values start at {:.0} %", 100.0 * cov, 100.0 * published);
        let hint = "specimens of one block do not show how the rock varies along the cliff; widen `cov` by judgment";
        warnings.push(Diagnostic::warning("lab.small-scatter", "the file", message).hint(hint));
    }
}

pub(super) fn size(results: &LabResults, summary: &LabSummary, warnings: &mut Vec<Diagnostic>) {
    if let Some(large) = results.uniaxial.iter().find(|t| t.diameter_m.is_some_and(|d| SIZE_LAW_LIMIT_M < d)) {
        let message =
            format!("specimen {} is larger than 0.2 m: beyond the sizes for which the size law was tested", large.origin.specimen);
        warnings.push(Diagnostic::warning("lab.size-law", at(&large.origin), message));
    }
    let squat: Vec<&StrengthTest> = results
        .uniaxial
        .iter()
        .filter(|t| t.diameter_m.zip(t.length_m).is_some_and(|(d, l)| l < LEAST_SLENDERNESS * d * (1.0 - 1e-9)))
        .collect();
    if let Some(first) = squat.first() {
        let message = format!(
            "{} uniaxial specimens are shorter than twice their diameter (first: {}): end friction makes them look stronger",
            squat.len(),
            first.origin.specimen
        );
        warnings.push(Diagnostic::warning("lab.squat-specimen", at(&first.origin), message));
    }
    if summary.tensile.is_some() || summary.peak.is_some() {
        let message = "these are strengths of specimens; documented collapses mobilized 5-30 % of the tensile strength of specimens";
        let hint = "state `mass_factor` by judgment of joints, blocks and back-analysis; no test gives it";
        warnings.push(Diagnostic::warning("lab.size-effect", "the file", message).hint(hint));
    }
    for (what, value) in [("tensile", &summary.tensile), ("uniaxial", &summary.uniaxial)] {
        let Some(value) = value else { continue };
        let n = value.sample.tests();
        if n < 3 {
            let message = format!("{n} {what} tests: a 5 % fractile by number of tests needs at least 3");
            warnings.push(Diagnostic::warning("lab.few-tests", first_place(&value.origins), message));
        }
    }
}

fn first_place(origins: &[Origin]) -> String {
    origins.first().map_or_else(|| "the file".to_owned(), at)
}
