//! What `lab` prints: fits, samples, and the rock table.
use std::fmt::Write;

use checker::lab::{Fit, LabSummary, Sample};
use checker::strength::StrengthError;

/// Confidence of all intervals.
const LEVEL: f64 = 0.95;

/// Four significant digits, plain, without trailing zeros behind the point.
pub fn significant(value: f64) -> String {
    if value == 0.0 || !value.is_finite() {
        return format!("{value}");
    }
    let magnitude = value.abs().log10().floor() as i32;
    let decimals = usize::try_from(3 - magnitude).unwrap_or(0);
    let text = format!("{value:.decimals$}");
    if text.contains('.') { text.trim_end_matches('0').trim_end_matches('.').to_owned() } else { text }
}

/// Fits and samples as lines of text.
///
/// # Errors
/// [`StrengthError`] never for a summary that was made by the program: the confidence level is fixed.
pub fn summary(summary: &LabSummary) -> Result<String, StrengthError> {
    let mut out = String::new();
    for (what, fit) in fits(summary) {
        fit_lines(&mut out, what, fit)?;
    }
    let samples = samples(summary);
    if !samples.is_empty() {
        let _ = writeln!(out, "{:<34}{:>5}{:>11}{:>8}{:>14}  unit", "results", "tests", "mean", "cov", "5 % fractile");
        for (what, sample, unit, unit_name) in samples {
            sample_line(&mut out, what, sample, (unit, unit_name));
        }
        out.push('\n');
    }
    if let Some(line) = point_load_line(summary) {
        out.push_str(&line);
    }
    Ok(out)
}

/// Fits that exist, with their names.
pub(super) fn fits(summary: &LabSummary) -> Vec<(&'static str, &Fit)> {
    [
        ("direct shear, peak", &summary.peak),
        ("direct shear, residual", &summary.residual),
        ("direct shear along joints, peak", &summary.joint_peak),
        ("direct shear along joints, residual", &summary.joint_residual),
    ]
    .into_iter()
    .filter_map(|(what, fit)| fit.as_ref().map(|fit| (what, fit)))
    .collect()
}

/// Samples that exist: name, sample, unit in SI, unit's name.
pub(super) fn samples(summary: &LabSummary) -> Vec<(&'static str, &Sample, f64, &'static str)> {
    let value = |v: &'_ Option<checker::lab::Value>| v.is_some();
    let mut all = Vec::new();
    let of_values = [
        ("tensile strength", &summary.tensile, 1e6, "MPa"),
        ("uniaxial strength", &summary.uniaxial, 1e6, "MPa"),
        ("point load index for 50 mm", &summary.point_load, 1e6, "MPa"),
        ("unit weight", &summary.unit_weight, 1e3, "kN/m3"),
    ];
    for (what, v, unit, unit_name) in of_values.into_iter().filter(|(_, v, ..)| value(v)) {
        all.extend(v.as_ref().map(|v| (what, &v.sample, unit, unit_name)));
    }
    let plain = [
        ("uniaxial strength reduced to 50 mm", &summary.uniaxial_at_50_mm, 1e6, "MPa"),
        ("saturated unit weight", &summary.saturated_unit_weight, 1e3, "kN/m3"),
        ("Young's modulus of specimens", &summary.youngs_modulus, 1e9, "GPa"),
        ("Poisson's ratio", &summary.poissons_ratio, 1.0, ""),
    ];
    for (what, sample, unit, unit_name) in plain {
        all.extend(sample.as_ref().map(|s| (what, s, unit, unit_name)));
    }
    all
}

fn fit_lines(out: &mut String, what: &str, fit: &Fit) -> Result<(), StrengthError> {
    let (low, high) = normal_range(fit);
    let c = fit.cohesion_interval_pa(LEVEL)?;
    let phi = fit.friction_interval_rad(LEVEL)?;
    let middle = 0.5 * (low + high);
    let held = if fit.through_origin { "   line held at the origin" } else { "" };
    let _ = writeln!(out, "{what}: {} stages, normal stress {} to {} kPa{held}", fit.points.len(), kpa(low), kpa(high));
    let _ = writeln!(out, "  cohesion c'          {:>9} kPa   95 % interval {} to {}", kpa(fit.cohesion_pa), kpa(c.low), kpa(c.high));
    let degrees = |angle: f64| format!("{:.1}", angle.to_degrees());
    let angle = degrees(fit.friction_angle_rad());
    let _ = writeln!(out, "  friction angle phi'  {angle:>9} deg   95 % interval {} to {}", degrees(phi.low), degrees(phi.high));
    let _ =
        writeln!(out, "  correlation of c' and tan phi' {:.2}, scatter of stages {} kPa", fit.correlation, kpa(fit.residual_deviation_pa));
    let (line, mean, single) = (fit.line_pa(middle), fit.lower_mean_pa(middle, LEVEL)?, fit.lower_single_pa(middle, LEVEL)?);
    let _ = writeln!(
        out,
        "  at {} kPa: line {} kPa; with 95 % the mean is above {}, one more stage above {}\n",
        kpa(middle),
        kpa(line),
        kpa(mean),
        kpa(single)
    );
    Ok(())
}

pub(super) fn normal_range(fit: &Fit) -> (f64, f64) {
    let normal = fit.points.iter().map(|p| p.normal_pa);
    (normal.clone().fold(f64::INFINITY, f64::min), normal.fold(f64::NEG_INFINITY, f64::max))
}

fn kpa(pa: f64) -> String {
    // Adding 0.0 turns the -0.0 of a rounded small negative number into 0.0.
    format!("{:.1}", (pa / 1e2).round() / 10.0 + 0.0)
}

fn sample_line(out: &mut String, what: &str, sample: &Sample, (unit, unit_name): (f64, &str)) {
    let cov = sample.cov().map_or_else(|| "-".to_owned(), |cov| format!("{cov:.2}"));
    let fractile = sample.characteristic.map_or_else(|| "under 3 tests".to_owned(), |x| significant(x / unit));
    let _ = writeln!(out, "{what:<34}{:>5}{:>11}{cov:>8}{fractile:>14}  {unit_name}", sample.tests(), significant(sample.mean / unit));
}

/// Uniaxial strength that a point load index stands for, as a range: ISRM (1985) names 22 to 24 for hard rock, 14 is proposed under 20 MPa
/// (Agustawijaya 2007), 5 to 14 occurs in weak rock (from memory).
fn point_load_line(summary: &LabSummary) -> Option<String> {
    let index = summary.point_load.as_ref()?.sample.mean / 1e6;
    let measured = summary.uniaxial.as_ref().map(|v| v.sample.mean / 1e6 / index);
    let ratio = measured.map_or_else(String::new, |r| format!("; uniaxial tests of this file give {r:.0}"));
    Some(format!(
        "point load: times 14 (weak rock) to 24 (hard rock) is {} to {} MPa uniaxial strength{ratio}; not used for the rock table\n\n",
        significant(14.0 * index),
        significant(24.0 * index)
    ))
}
