use super::{Coefficient, DemandModel, Factored, Law, Limit, Places, Sample, SituationChance, StrengthInputs, margin_of};
use crate::model::Uncertain;
use crate::outlook::variables::{Correlation, Variables};

include!("../../../benches/shared/outlook_model.rs");

pub(in crate::outlook) fn demo(n_depths: usize, density: usize) -> (DemandModel, Variables) {
    four_layers(n_depths, density)
}

/// One fibre whose demand is `k(depth) x unit weight`, against tensile strength: closed forms exist for everything.
pub(in crate::outlook) fn fibre(
    strength: Uncertain,
    unit_weight: Uncertain,
    depths_m: &[f64],
    k: impl Fn(f64) -> f64,
) -> (DemandModel, Variables) {
    let inputs = [
        ("tensile strength".to_owned(), strength),
        ("unit weight".to_owned(), unit_weight),
        ("cohesion".to_owned(), Uncertain::Exact(1e9)),
        ("friction angle".to_owned(), Uncertain::Exact(0.6)),
    ];
    let whole = |input| Factored { input, factor: 1.0 };
    let model = DemandModel {
        depths_m: depths_m.to_vec(),
        coefficients: vec![Coefficient::Input(1)],
        strengths: vec![StrengthInputs::Typed { tensile_pa: whole(0), cohesion_pa: whole(2), friction_angle_rad: 3 }],
        situations: vec![SituationChance { name: "ordinary".into(), annual_chance: None }],
        limits: vec![Limit { check: "section bending", situation: 0, law: Law::Fibre { strength: 0 } }],
        places: depths_m.iter().map(|d| vec![Places { at_m: vec![[0.0, 0.0]], unit: vec![k(*d)], share: vec![] }]).collect(),
        model_factor: None,
    };
    (model, Variables::new(&inputs, &[]).unwrap())
}

/// Closed forms of each law at one place: circle of (xx, yy, xy) = (300, -100, 150) kPa has centre 100, radius 250, major 350.
#[test]
fn margins_are_their_laws() {
    let strengths = vec![[400.0, 500.0, 0.75]];
    let sample = Sample { coefficients: vec![1.0], strengths, model_factor: 1.0 };
    let margin = |law: Law, unit: Vec<f64>, share: Vec<f64>, sample: &Sample| {
        let model = DemandModel {
            depths_m: vec![1.0],
            coefficients: vec![Coefficient::One],
            strengths: vec![],
            situations: vec![],
            limits: vec![Limit { check: "local shear", situation: 0, law }],
            places: vec![vec![Places { at_m: vec![[0.0, 0.0]], unit, share }]],
            model_factor: None,
        };
        margin_of(&model, 0, 0, sample).unwrap().0
    };
    let tensor = vec![300.0, -100.0, 150.0];
    assert!((margin(Law::Tension { strength: 0 }, tensor.clone(), vec![], &sample) - 50.0).abs() < 1e-9);
    assert!((margin(Law::Fibre { strength: 0 }, vec![410.0], vec![], &sample) + 10.0).abs() < 1e-9);
    // c + p t - R sqrt(1 + t^2) = 500 - 100 x 0.75 - 250 x 1.25 = 112.5.
    assert!((margin(Law::Shear { strength: 0 }, tensor.clone(), vec![], &sample) - 112.5).abs() < 1e-9);
    // Half of the line holds by cohesion, normal part 40: 250 + 30 - 200 = 80.
    assert!((margin(Law::Sliding { strengths: vec![0] }, vec![-200.0, 40.0], vec![0.5], &sample) - 80.0).abs() < 1e-9);
    // The reserve F = sqrt(((c + p t) / R)^2 - t^2) of the same circle: a model factor of exactly 1 / F leaves no margin.
    let reserve = (425.0_f64 / 250.0).hypot(0.0).powi(2) - 0.75 * 0.75;
    let at_limit = Sample { model_factor: 1.0 / reserve.sqrt(), ..sample };
    assert!(margin(Law::Shear { strength: 0 }, tensor, vec![], &at_limit).abs() < 1e-9);
}

#[test]
fn tensile_strength_is_cut_at_the_apex() {
    let (model, variables) = fibre(Uncertain::Exact(9e9), Uncertain::Exact(25e3), &[1.0], |d| d);
    let sample = Sample::new(&model, &variables.medians());
    assert!((sample.strengths[0][0] - 1e9 / 0.6_f64.tan()).abs() < 1.0);
}
