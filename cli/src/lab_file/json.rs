//! The laboratory summary as a JSON object, in the units of the model file.
use checker::diagnostic::{Diagnostic, Severity};
use checker::lab::{Fit, LabSummary, Sample};
use checker::strength::StrengthError;
use serde_json::{Map, Value, json};

use super::{Format, text};

/// What stands beside the summary in the object.
pub struct About<'a> {
    /// File as given.
    pub file: &'a str,
    /// Format.
    pub format: &'a Format,
    /// Rock, where one was chosen.
    pub rock: Option<&'a str>,
    /// Rock table.
    pub table: &'a str,
    /// Findings.
    pub warnings: &'a [Diagnostic],
}

/// The object as text, ended by a line feed.
///
/// # Errors
/// [`StrengthError`] never for a summary that was made by the program: the confidence level is fixed.
pub fn object(summary: &LabSummary, about: &About<'_>) -> Result<String, StrengthError> {
    let mut shear = Map::new();
    for (what, fit) in text::fits(summary) {
        shear.insert(what.to_owned(), fit_value(fit)?);
    }
    let samples: Map<String, Value> =
        text::samples(summary).into_iter().map(|(what, sample, unit, name)| (what.to_owned(), sample_value(sample, unit, name))).collect();
    let format = match about.format {
        Format::Csv => "CSV".to_owned(),
        Format::Ags4(edition) => format!("AGS4 {edition}"),
    };
    let value = json!({
        "program": { "name": "brinkline", "version": env!("CARGO_PKG_VERSION") },
        "file": about.file,
        "format": format,
        "rock": about.rock,
        "shear": shear,
        "results": samples,
        "rock_table": about.table,
        "warnings": about.warnings.iter().map(finding).collect::<Vec<_>>(),
    });
    Ok(format!("{value:#}\n"))
}

fn fit_value(fit: &Fit) -> Result<Value, StrengthError> {
    let c = fit.cohesion_interval_pa(0.95)?;
    let phi = fit.friction_interval_rad(0.95)?;
    let (predictive_pa, predictive_tan, predictive_correlation) = fit.predictive();
    Ok(json!({
        "stages": fit.points.iter().map(|p| json!({ "normal_kpa": p.normal_pa / 1e3, "shear_kpa": p.shear_pa / 1e3 })).collect::<Vec<_>>(),
        "cohesion_kpa": fit.cohesion_pa / 1e3,
        "cohesion_95_percent_kpa": [c.low / 1e3, c.high / 1e3],
        "cohesion_standard_error_kpa": fit.cohesion_error_pa / 1e3,
        "friction_angle_deg": fit.friction_angle_rad().to_degrees(),
        "friction_angle_95_percent_deg": [phi.low.to_degrees(), phi.high.to_degrees()],
        "tan_friction": fit.tan_friction,
        "tan_friction_standard_error": fit.tan_friction_error,
        "correlation_cohesion_tan_friction": fit.correlation,
        "scatter_kpa": fit.residual_deviation_pa / 1e3,
        "single_stage": {
            "cohesion_standard_deviation_kpa": predictive_pa / 1e3,
            "tan_friction_standard_deviation": predictive_tan,
            "correlation": predictive_correlation,
        },
        "line_held_at_origin": fit.through_origin,
        "outliers": fit.outliers(),
    }))
}

fn sample_value(sample: &Sample, unit: f64, unit_name: &str) -> Value {
    json!({
        "unit": unit_name,
        "values": sample.values.iter().map(|v| v / unit).collect::<Vec<_>>(),
        "tests": sample.tests(),
        "mean": sample.mean / unit,
        "cov": sample.cov(),
        "fractile_5_percent": sample.characteristic.map(|x| x / unit),
        "outlier": sample.outlier,
    })
}

fn finding(finding: &Diagnostic) -> Value {
    let severity = match finding.severity {
        Severity::Error => "error",
        Severity::Warning => "warning",
    };
    json!({ "severity": severity, "code": finding.code, "at": finding.at, "message": finding.message, "hint": finding.hint })
}
