//! What is said beside the fits.
use super::*;
use crate::diagnostic::Diagnostic;

fn warnings(results: &LabResults) -> Vec<Diagnostic> {
    summarize(results).warnings
}

#[track_caller]
fn said(results: &LabResults, code: &str) -> Diagnostic {
    let all = warnings(results);
    all.iter().find(|w| w.code == code).cloned().unwrap_or_else(|| panic!("{code} not among {all:?}"))
}

#[track_caller]
fn not_said(results: &LabResults, code: &str) {
    assert!(warnings(results).iter().all(|w| w.code != code), "{code}");
}

#[test]
fn clean_results_draw_only_the_size_effect() {
    let codes: Vec<&str> = warnings(&d08_results()).iter().map(|w| w.code).collect();
    assert_eq!(codes, ["lab.size-effect"]);
}

#[test]
fn scatter_of_one_block_is_not_that_of_the_rock() {
    let mut results = d08_results();
    not_said(&results, "lab.small-scatter");
    results.tensile = strengths(&[2.1, 2.12, 2.08, 2.11]);
    let found = said(&results, "lab.small-scatter");
    // Mean 2.1025, squares 0.00000625 + 0.00030625 + 0.00050625 + 0.00005625 by hand: s = 0.01708, 0.8 %.
    assert_eq!(found.message, "tensile strength scatters by 0.8 % only; published values start at 15 %");
}

#[test]
fn undrained_and_remade_specimens_stay_out_of_the_fit() {
    let mut results = d08_results();
    let mut undrained = stage(20, 100.0, 300.0);
    undrained.drainage = Some(Drainage::Undrained);
    let mut remade = stage(21, 100.0, 20.0);
    remade.remoulded = true;
    results.shear.extend([undrained, remade]);
    let summary = summarize(&results);
    assert_eq!(summary.value.peak.unwrap().points.len(), 6);
    assert_eq!(said(&results, "lab.undrained").at, "line 20");
    assert_eq!(said(&results, "lab.remoulded").at, "line 21");
}

#[test]
fn drainage_that_nobody_states_is_doubted_and_fast_shear_more_so() {
    let mut results = d08_results();
    results.shear.iter_mut().for_each(|s| s.drainage = None);
    said(&results, "lab.drainage-not-stated");
    results.shear.iter_mut().for_each(|s| s.rate_m_per_s = Some(0.1e-3 / 60.0));
    not_said(&results, "lab.drainage-not-stated");
    not_said(&results, "lab.fast-shear");
    results.shear[0].rate_m_per_s = Some(0.5e-3 / 60.0);
    assert!(said(&results, "lab.fast-shear").message.contains("0.500 mm/min"));
}

#[test]
fn stages_of_one_specimen_are_not_independent() {
    let mut results = d08_results();
    results.shear.iter_mut().for_each(|s| s.origin.specimen = "B1".to_owned());
    assert!(said(&results, "lab.few-specimens").message.starts_with("6 stages come from 1 specimens"));
}

#[test]
fn the_laboratorys_own_fit_is_compared_with_its_stages() {
    let mut results = d08_results();
    results.shear.iter_mut().for_each(|s| s.origin.specimen = "B1".to_owned());
    let own = |cohesion_kpa: f64, friction_deg: f64| OwnFit {
        origin: origin(40, "B1"),
        cohesion_pa: cohesion_kpa * KPA,
        friction_angle_rad: friction_deg.to_radians(),
    };
    results.own_fits = vec![own(51.0, 34.9)];
    not_said(&results, "lab.own-fit");
    results.own_fits = vec![own(70.0, 34.9)];
    assert_eq!(said(&results, "lab.own-fit").at, "line 40");
    results.own_fits = vec![own(51.0, 38.0)];
    said(&results, "lab.own-fit");
}

#[test]
fn outliers_are_named_with_their_line_and_kept() {
    let mut results = d08_results();
    results.tensile = strengths(&[2.1, 2.2, 2.15, 2.05, 2.1, 6.0]);
    let found = said(&results, "lab.outlier");
    assert_eq!(found.at, "line 7");
    assert_eq!(found.message, "tensile strength 6.000 MPa of specimen T5 is an outlier (Grubbs' test, 5 %)");
    assert_eq!(summarize(&results).value.tensile.unwrap().sample.tests(), 6);
    results.shear[3].peak_pa = Some(260.0 * KPA);
    assert!(warnings(&results).iter().any(|w| w.at == "direct shear" && w.message.starts_with("peak stage 260.0 kPa at 200.0 kPa")));
}

#[test]
fn size_shape_and_number_of_specimens() {
    let mut results = d08_results();
    results.uniaxial = strengths(&[30.0, 32.0]);
    said(&results, "lab.squat-specimen");
    assert!(said(&results, "lab.few-tests").message.starts_with("2 uniaxial tests"));
    results.uniaxial[0].diameter_m = Some(0.3);
    said(&results, "lab.size-law");
    results.uniaxial.iter_mut().for_each(|t| (t.diameter_m, t.length_m) = (Some(0.1), Some(0.2)));
    not_said(&results, "lab.squat-specimen");
    // Check D09: 100 mm to 50 mm divides by 0.8827.
    let at_50 = summarize(&results).value.uniaxial_at_50_mm.unwrap();
    assert_relative_eq!(at_50.mean, 31.0 * MPA / 0.8827029962906549, max_relative = 1e-12);
}

#[test]
fn joints_are_fitted_apart_and_unknown_planes_are_named() {
    let mut results = d08_results();
    results.shear[5].along = ShearedAlong::NotStated;
    said(&results, "lab.plane-not-stated");
    let joint = |line, normal, peak| ShearStage { along: ShearedAlong::Joint, ..stage(line, normal, peak) };
    results.shear.extend([joint(10, 100.0, 60.0), joint(11, 200.0, 120.0), joint(12, 300.0, 180.0)]);
    let summary = summarize(&results).value;
    assert_eq!(summary.peak.unwrap().points.len(), 6);
    assert_relative_eq!(summary.joint_peak.unwrap().tan_friction, 0.6, max_relative = 1e-12);
}

#[test]
fn moisture_states_must_agree_to_be_used() {
    let mut results = d08_results();
    results.tensile.iter_mut().for_each(|t| t.state = Some(TestedState::Dry));
    assert_eq!(summarize(&results).value.tested, Some(TestedState::Dry));
    results.shear[0].state = Some(TestedState::Saturated);
    assert_eq!(summarize(&results).value.tested, None);
    said(&results, "lab.mixed-states");
}

#[test]
fn cohesion_carried_far_is_doubted_and_weights_are_computed() {
    let mut results = d08_results();
    results.shear.retain(|s| 200.0 * KPA <= s.normal_at_peak_pa);
    results.shear[0].normal_at_peak_pa = 250.0 * KPA;
    said(&results, "lab.narrow-range");
    results.density =
        vec![DensityTest { origin: origin(3, "D"), bulk_kg_per_m3: Some(2400.0), dry_kg_per_m3: Some(2000.0), porosity: Some(0.2) }];
    let summary = summarize(&results).value;
    assert_relative_eq!(summary.unit_weight.unwrap().sample.mean, 2400.0 * 9.80665, max_relative = 1e-14);
    assert_relative_eq!(summary.saturated_unit_weight.unwrap().mean, 21574.63, max_relative = 1e-14);
}

#[test]
fn too_few_stages_or_negative_cohesion_are_said() {
    let mut results = d08_results();
    results.shear.truncate(2);
    assert_eq!(said(&results, "lab.no-fit").message, "peak strength: a fit of cohesion and friction needs at least 3 stages, got 2");
    results.shear = vec![stage(2, 100.0, 55.0), stage(3, 200.0, 130.0), stage(4, 400.0, 270.0)];
    said(&results, "lab.negative-cohesion");
}
