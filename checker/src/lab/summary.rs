//! All fits of one file, and the reservations that go with them.
use super::{
    Drainage, Fit, LabResults, Origin, Point, STANDARD_GRAVITY_M_PER_S2, Sample, ShearStage, ShearedAlong, StrengthTest,
    saturated_unit_weight_n_per_m3, uniaxial_size_factor,
};
use crate::diagnostic::{Checked, Diagnostic};
use crate::model::TestedState;

mod reservations;

/// A sample with the places of its results.
#[derive(Debug, Clone, PartialEq)]
pub struct Value {
    /// Statistics.
    pub sample: Sample,
    /// Place of each result.
    pub origins: Vec<Origin>,
}

/// What a laboratory file says about a rock.
#[derive(Debug, Clone, PartialEq, Default)]
pub struct LabSummary {
    /// Peak strength through the rock.
    pub peak: Option<Fit>,
    /// Residual strength of the same tests.
    pub residual: Option<Fit>,
    /// Peak strength along joints.
    pub joint_peak: Option<Fit>,
    /// Residual strength along joints.
    pub joint_residual: Option<Fit>,
    /// Tensile strength, Pa.
    pub tensile: Option<Value>,
    /// Uniaxial compressive strength, Pa.
    pub uniaxial: Option<Value>,
    /// Uniaxial compressive strength reduced to 50 mm, Pa, where every diameter is known.
    pub uniaxial_at_50_mm: Option<Sample>,
    /// Point load index for 50 mm, Pa.
    pub point_load: Option<Value>,
    /// Moist unit weight, N/m3.
    pub unit_weight: Option<Value>,
    /// Saturated unit weight, N/m3.
    pub saturated_unit_weight: Option<Sample>,
    /// Young's modulus of specimens, Pa.
    pub youngs_modulus: Option<Sample>,
    /// Poisson's ratio of specimens.
    pub poissons_ratio: Option<Sample>,
    /// Moisture state, where all strengths that state one state the same.
    pub tested: Option<TestedState>,
}

/// Fits everything and says what is doubtful.
///
/// Undrained and remade specimens are left out of the fits, with a warning. Outliers are named and kept: only the person who saw the test
/// can say that it failed. Warnings stand at `line N` of the file.
pub fn summarize(results: &LabResults) -> Checked<LabSummary> {
    let mut warnings = Vec::new();
    let usable: Vec<&ShearStage> = results.shear.iter().filter(|stage| is_usable(stage, &mut warnings)).collect();
    let (joint, rock): (Vec<&ShearStage>, Vec<&ShearStage>) = usable.iter().partition(|stage| stage.along == ShearedAlong::Joint);
    let mut fit =
        |stages: &[&ShearStage], what: &str, point: fn(&ShearStage) -> Option<Point>| fit_stages(stages, what, point, &mut warnings);
    let summary = LabSummary {
        peak: fit(&rock, "peak strength", peak_point),
        residual: fit(&rock, "residual strength", residual_point),
        joint_peak: fit(&joint, "peak strength along joints", peak_point),
        joint_residual: fit(&joint, "residual strength along joints", residual_point),
        tensile: value_of(&results.tensile),
        uniaxial: value_of(&results.uniaxial),
        uniaxial_at_50_mm: at_50_mm(&results.uniaxial),
        point_load: value_of(&results.point_load),
        unit_weight: unit_weight(results),
        saturated_unit_weight: saturated(results),
        youngs_modulus: Sample::new(results.modulus.iter().map(|m| m.youngs_modulus_pa).collect()),
        poissons_ratio: Sample::new(results.modulus.iter().filter_map(|m| m.poissons_ratio).collect()),
        tested: common_state(results, &mut warnings),
    };
    reservations::shear(&usable, &summary, &mut warnings);
    reservations::own_fits(results, &mut warnings);
    reservations::outliers(&summary, &mut warnings);
    reservations::scatter(&summary, &mut warnings);
    reservations::size(results, &summary, &mut warnings);
    Checked { value: summary, warnings }
}

fn peak_point(stage: &ShearStage) -> Option<Point> {
    stage.peak_pa.map(|shear_pa| Point { normal_pa: stage.normal_at_peak_pa, shear_pa })
}

fn residual_point(stage: &ShearStage) -> Option<Point> {
    stage.residual_pa.map(|shear_pa| Point { normal_pa: stage.normal_at_residual_pa, shear_pa })
}

fn at(origin: &Origin) -> String {
    format!("line {}", origin.line)
}

fn is_usable(stage: &ShearStage, warnings: &mut Vec<Diagnostic>) -> bool {
    let name = &stage.origin.specimen;
    let (code, message) = if stage.drainage == Some(Drainage::Undrained) {
        ("lab.undrained", format!("specimen {name} was sheared undrained; it does not measure c', phi' and is left out of the fit"))
    } else if stage.remoulded {
        ("lab.remoulded", format!("specimen {name} was remade; it is not the rock and is left out of the fit"))
    } else {
        return true;
    };
    warnings.push(Diagnostic::warning(code, at(&stage.origin), message));
    false
}

fn fit_stages(stages: &[&ShearStage], what: &str, point: fn(&ShearStage) -> Option<Point>, warnings: &mut Vec<Diagnostic>) -> Option<Fit> {
    let points: Vec<Point> = stages.iter().filter_map(|stage| point(stage)).collect();
    if points.is_empty() {
        return None;
    }
    match Fit::new(&points) {
        Ok(fit) => {
            if fit.through_origin {
                let message = format!("{what}: the free fit has negative cohesion; the line is held at the origin, cohesion 0");
                warnings.push(Diagnostic::warning("lab.negative-cohesion", "direct shear", message));
            }
            Some(fit)
        }
        Err(error) => {
            warnings.push(Diagnostic::warning("lab.no-fit", "direct shear", format!("{what}: {error}")));
            None
        }
    }
}

fn value_of(tests: &[StrengthTest]) -> Option<Value> {
    let sample = Sample::new(tests.iter().map(|t| t.value_pa).collect())?;
    Some(Value { sample, origins: tests.iter().map(|t| t.origin.clone()).collect() })
}

fn at_50_mm(tests: &[StrengthTest]) -> Option<Sample> {
    Sample::new(tests.iter().map(|t| t.diameter_m.map(|d| t.value_pa / uniaxial_size_factor(d))).collect::<Option<Vec<f64>>>()?)
}

fn unit_weight(results: &LabResults) -> Option<Value> {
    let bulk = |d: &super::DensityTest| d.bulk_kg_per_m3.map(|rho| (rho * STANDARD_GRAVITY_M_PER_S2, d.origin.clone()));
    let (values, origins) = results.density.iter().filter_map(bulk).unzip();
    Sample::new(values).map(|sample| Value { sample, origins })
}

fn saturated(results: &LabResults) -> Option<Sample> {
    let weight =
        |d: &super::DensityTest| d.dry_kg_per_m3.zip(d.porosity).map(|(dry, porosity)| saturated_unit_weight_n_per_m3(dry, porosity));
    Sample::new(results.density.iter().filter_map(weight).collect())
}

fn common_state(results: &LabResults, warnings: &mut Vec<Diagnostic>) -> Option<TestedState> {
    let shear = results.shear.iter().map(|s| s.state);
    let mut states = results.tensile.iter().map(|t| t.state).chain(shear).flatten();
    let first = states.next()?;
    if states.any(|state| state != first) {
        let message = "tensile and shear tests were made in different moisture states; `tested` is left to you";
        let hint = "fit each state from its own file: strength falls on wetting";
        warnings.push(Diagnostic::warning("lab.mixed-states", "the file", message).hint(hint));
        return None;
    }
    Some(first)
}
