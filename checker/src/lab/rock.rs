//! From fits to the strengths of a rock in a model.
use super::LabSummary;
use crate::diagnostic::Diagnostic;
use crate::model::{Cohesive, RockStrength, TestedState, Uncertain};

/// What a laboratory file gives to a rock that names it.
#[derive(Debug, Clone, PartialEq)]
pub struct LabRock {
    /// Always [`RockStrength::Typed`].
    pub strength: RockStrength,
    /// The same strengths, without unpacking.
    pub cohesive: Cohesive,
    /// The smaller of the numbers of tensile tests and shear stages.
    pub tests: u32,
    /// Moisture state, where the file states one.
    pub tested: Option<TestedState>,
    /// Uniaxial strength, Pa.
    pub uniaxial_strength_pa: Option<Uncertain>,
    /// Moist unit weight, N/m3.
    pub unit_weight_n_per_m3: Option<Uncertain>,
    /// Saturated unit weight, N/m3.
    pub saturated_unit_weight_n_per_m3: Option<Uncertain>,
}

/// Strengths of a rock from the fits of its laboratory file.
///
/// Cohesion and friction angle get the scatter of a single stage ([`super::Fit::predictive`]); the angle's deviation is
/// `sd_phi = sd_t cos^2 phi`. All are lognormal, or known where there is no scatter.
///
/// # Errors
/// One [`Diagnostic`] for each missing part: a peak fit, three tensile tests.
pub fn rock_strength(summary: &LabSummary) -> Result<LabRock, Vec<Diagnostic>> {
    let mut faults = Vec::new();
    let mut missing = |what: &str, hint: &str| {
        faults.push(Diagnostic::error("lab.missing", "the file", format!("the laboratory file gives no {what}")).hint(hint));
    };
    if summary.peak.is_none() {
        missing("peak cohesion and friction angle", "give at least 3 drained direct shear stages, or type the strengths instead of `lab`");
    }
    let enough = summary.tensile.as_ref().filter(|v| 3 <= v.sample.tests());
    if enough.is_none() {
        missing("tensile strength by at least 3 tests", "give at least 3 tensile tests, or type the strengths instead of `lab`");
    }
    let (Some(peak), Some(tensile)) = (&summary.peak, enough) else {
        return Err(faults);
    };
    let (cohesion_sd_pa, tan_sd, correlation) = peak.predictive();
    let angle_rad = peak.friction_angle_rad();
    let cohesive = Cohesive {
        tensile_strength_pa: tensile.sample.uncertain(),
        cohesion_pa: uncertain(peak.cohesion_pa, cohesion_sd_pa),
        friction_angle_rad: uncertain(angle_rad, tan_sd * angle_rad.cos().powi(2)),
        cohesion_friction_correlation: correlation,
    };
    let stages = u32::try_from(peak.points.len()).unwrap_or(u32::MAX);
    Ok(LabRock {
        strength: RockStrength::Typed(cohesive),
        cohesive,
        tests: tensile.sample.tests().min(stages),
        tested: summary.tested,
        uniaxial_strength_pa: summary.uniaxial.as_ref().map(|v| v.sample.uncertain()),
        unit_weight_n_per_m3: summary.unit_weight.as_ref().map(|v| v.sample.uncertain()),
        saturated_unit_weight_n_per_m3: summary.saturated_unit_weight.as_ref().map(super::Sample::uncertain),
    })
}

fn uncertain(mean: f64, deviation: f64) -> Uncertain {
    // Scatter at rounding level is none: a lognormal number needs a cov that means something.
    if 0.0 < mean && 1e-9 * mean < deviation { Uncertain::Lognormal { mean, cov: deviation / mean } } else { Uncertain::Exact(mean) }
}
