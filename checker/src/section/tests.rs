//! Models and shapes that the tests of this module share.
mod bodies;
mod growth;
mod hand;
mod places;

use super::{Section, Site};
use crate::diagnostic::Diagnostic;
use crate::model::{
    Averaging, BackShape, Below, Checks, ContactLine, Extent, Growth, Headline, Layer, Model, PartialFactors, ReportIdentity, Setting,
    StartShape, SurfacePoint, SurfaceSection, Undercut,
};

/// A model of one layer with a surveyed surface, everything else left out.
pub(super) fn model(surface: &[[f64; 2]]) -> Model {
    let surface = surface.iter().map(|p| SurfacePoint { x_m: p[0], z_m: p[1], inferred: false }).collect();
    let section =
        SurfaceSection { surface, vertical_datum: None, original_surface_m: None, brow_m: None, surveyed: None, round_corners_m: None };
    let undercut = Undercut {
        setting: Setting::StraightCliff,
        width_along_shore_m: None,
        growth: Growth::Advance,
        search_to_depth_m: 8.0,
        depth_step_m: 0.5,
        start_shape: None,
    };
    let factors = PartialFactors { tension: 1.0, cohesion: 1.0, friction: 1.0, unit_weight: 1.0, en_1997_m2: false };
    let checks = Checks {
        headline: Headline::Cautious,
        averaging: Averaging::FromThickness,
        partial_factors: factors,
        required_reserve: 1.0,
        target_error: 0.02,
    };
    Model {
        title: "hand".to_owned(),
        report: ReportIdentity::default(),
        section,
        layers: vec![layer(None)],
        rocks: Vec::new(),
        joint_sets: Vec::new(),
        discontinuity_survey: None,
        cracks: Vec::new(),
        situations: Vec::new(),
        surcharges: Vec::new(),
        undercut,
        checks,
        outlook: None,
        evidence: Vec::new(),
        below: Below::default(),
        remedies: Vec::new(),
        probes: Vec::new(),
        cuts: Vec::new(),
        extent: Extent::default(),
        location: None,
        defaults_used: Vec::new(),
    }
}

pub(super) fn layer(base: Option<ContactLine>) -> Layer {
    Layer { rock: 0, base, carries: crate::model::Carries::LoadAndTension, rest_slope_rad: None }
}

/// A vertical face from level 0 to `brow_m` at x = 0 with a start shape between the levels 0 and `roof_m`.
pub(super) fn plain_face(brow_m: f64, roof_m: f64, back: BackShape) -> Model {
    let mut model = model(&[[-100.0, 0.0], [0.0, 0.0], [0.0, brow_m], [100.0, brow_m]]);
    model.undercut.start_shape = Some(StartShape { floor_level_m: 0.0, roof_level_m: roof_m, back });
    model
}

/// A square slot 2 m high and 4 m deep under a vertical face 10 m high.
pub(super) fn square_slot() -> Model {
    model(&[[-60.0, 0.0], [4.0, 0.0], [4.0, 2.0], [0.0, 2.0], [0.0, 10.0], [60.0, 10.0]])
}

#[track_caller]
pub(super) fn site(model: &Model) -> Site {
    Site::new(model).unwrap_or_else(|findings| panic!("{findings:#?}")).value
}

#[track_caller]
pub(super) fn section(model: &Model, depth_m: f64) -> Section {
    site(model).at_depth(depth_m).unwrap()
}

#[track_caller]
pub(super) fn refusal(model: &Model) -> Diagnostic {
    let findings = Site::new(model).map(|_| ()).expect_err("this model must be refused");
    findings.into_iter().find(|finding| finding.severity == crate::diagnostic::Severity::Error).unwrap()
}

#[track_caller]
pub(super) fn near(value: f64, expected: f64, tolerance: f64) {
    assert!((value - expected).abs() <= tolerance, "{value} is not {expected} within {tolerance}");
}

#[track_caller]
pub(super) fn near_point(value: [f64; 2], expected: [f64; 2], tolerance: f64) {
    assert!(
        (value[0] - expected[0]).abs() <= tolerance && (value[1] - expected[1]).abs() <= tolerance,
        "{value:?} is not {expected:?} within {tolerance}"
    );
}
