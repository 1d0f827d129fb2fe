use super::{
    LEAST_EFFECTIVE_SIZE, SampleStrength, before_and_after, closed_form_likelihood, fibre_critical_depth_m, likelihood_of, reweight,
};
use crate::model::{Evidence, EvidenceKind, Uncertain};
use crate::outlook::normal;
use crate::outlook::random::Streams;
use crate::outlook::variables::Marginal;

/// A05 turned round (closed form, derived): gamma 25, h 4, L 8 gives a fibre of 1180 kPa, so 1180 kPa is reached at 8 m.
#[test]
fn the_fibre_gives_its_depth_back() {
    assert!((fibre_critical_depth_m(1180e3, 25e3, 4.0) - 8.0).abs() < 1e-12);
}

/// By hand: a depth uniform from 2 to 3 m; a critical depth of 2.25 m lets three quarters fall.
#[test]
fn stood_and_fell_share_the_chance() {
    let depth = Marginal::new("d", &Uncertain::Uniform { min: 2.0, max: 3.0 }).unwrap();
    let critical = [1.0, 2.25, 5.0, f64::INFINITY];
    let near = |found: Vec<f64>, expected: [f64; 4]| found.iter().zip(expected).all(|(f, e)| (f - e).abs() < 1e-12);
    assert!(near(likelihood_of(EvidenceKind::Stood, &depth, &critical), [0.0, 0.25, 1.0, 1.0]));
    assert!(near(likelihood_of(EvidenceKind::Fell, &depth, &critical), [1.0, 0.75, 0.0, 0.0]));
    let exact = Marginal::Exact(2.25);
    assert!(near(likelihood_of(EvidenceKind::Fell, &exact, &critical), [1.0, 1.0, 0.0, 0.0]), "a fall at the depth itself");
}

/// Closed form: with strength lognormal and a stand at known depth, the strength after is lognormal cut off below; its mean is
/// m Phi(zeta - z) / Phi(-z) with z the cut in standard normals of ln strength.
#[test]
fn a_stand_cuts_the_weak_tail() {
    let (mean, zeta) = (500e3_f64, (1.0_f64 + 0.09).ln().sqrt());
    let lambda = mean.ln() - 0.5 * zeta * zeta;
    let streams = Streams::new(4);
    let n = 50_000_u64;
    let strengths: Vec<f64> = (0..n).map(|i| (lambda + zeta * streams.stream(i).normal()).exp()).collect();
    let samples: Vec<SampleStrength> =
        strengths.iter().map(|s| SampleStrength { tensile_strength_pa: *s, unit_weight_n_per_m3: 25e3 }).collect();
    let evidence = Evidence {
        what: EvidenceKind::Stood,
        date: None,
        undercut_depth_m: Uncertain::Exact(4.5),
        overhang_thickness_m: Uncertain::Exact(4.0),
        rock: 0,
    };
    let cut = 25e3 * (3.0 * 4.5 * 4.5 / 4.0 - 4.0 / 5.0);
    let weights = vec![1.0; n as usize];
    let after = reweight(&[closed_form_likelihood(&evidence, &samples).unwrap()], &weights).unwrap();
    let z = (f64::ln(cut) - lambda) / zeta;
    let expected = mean * normal::cdf(zeta - z) / normal::cdf(-z);
    let [before, posterior] = before_and_after(&strengths, &weights, &after.likelihood);
    // Standard error of a mean of 50,000 draws of 150 kPa: 0.7 kPa; three of them and a little.
    assert!((before - mean).abs() < 2.5e3 && (posterior - expected).abs() < 2.5e3, "{before} {posterior} against {expected}");
    assert!((after.effective_size - normal::cdf(-z) * n as f64).abs() < 500.0, "{}", after.effective_size);
}

#[test]
fn evidence_that_contradicts_the_inputs_is_refused() {
    let weights = vec![1.0; 1000];
    let rare: Vec<f64> = (0..1000).map(|i| f64::from(u8::from(i < 150))).collect();
    assert_eq!(reweight(&[rare], &weights), Err(150.0));
    assert!(reweight(&[vec![0.0; 1000]], &weights).unwrap_err() < LEAST_EFFECTIVE_SIZE);
    assert!(reweight(&[], &weights).is_ok());
}
