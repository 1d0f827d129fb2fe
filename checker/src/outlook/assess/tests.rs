use super::{AssessInput, EvidenceInput, assess};
use crate::model::{
    AboveTable, AcceptedChance, Asset, Averaging, Below, Checks, Date, DeepeningRate, DiscontinuitySurvey, Evidence, EvidenceKind, Extent,
    Groundwater, Growth, Headline, Model, Outlook, PartialFactors, ReportIdentity, SeaLevel, Setting, Situation, SurfaceSection, Uncertain,
    Undercut,
};
use crate::outcome::OutlookInfo;
use crate::outlook::cycle::GroundLost;
use crate::outlook::demand_model::DemandModel;
use crate::outlook::demand_model::tests::{demo, fibre};
use crate::outlook::growth::{Growth as GrowthLaw, GrowthParams};
use crate::outlook::normal;
use crate::outlook::refusals::TodaysChecks;
use crate::outlook::variables::Variables;

pub(in crate::outlook) fn outlook() -> Outlook {
    Outlook {
        horizon_yr: 50.0,
        rate: DeepeningRate::Given { mean_m_per_yr: 0.06, uncertainty_cov: 0.5, year_to_year_cov: 0.0 },
        storms: None,
        basis: "edge record".into(),
        record_yr: Some(72.0),
        extrapolated: false,
        sea_level_rise: None,
        model_factor: Uncertain::Exact(1.0),
        allowance_m: 5.0,
        allowance_for: Some("path width".into()),
        samples: 40_000,
        seed: 7,
        assets: vec![Asset {
            name: "coast path".into(),
            x_m: [12.0, 14.0],
            from_brow: true,
            accepted: Some(AcceptedChance { probability: 0.02, over_yr: 50.0, set_by: "its owner".into() }),
            lead_time_yr: 5.0,
        }],
    }
}

pub(in crate::outlook) fn model(outlook: Outlook) -> Model {
    Model {
        title: "Plover Nab".into(),
        report: ReportIdentity::default(),
        section: SurfaceSection {
            surface: vec![],
            vertical_datum: None,
            original_surface_m: None,
            brow_m: None,
            surveyed: None,
            round_corners_m: None,
        },
        layers: vec![],
        rocks: vec![],
        joint_sets: vec![],
        discontinuity_survey: Some(DiscontinuitySurvey {
            none_seen_by: "a geologist".into(),
            date: Date { year: 2026, month: 3, day: 14 },
            reach_m: 60.0,
        }),
        cracks: vec![],
        situations: vec![Situation {
            name: "ordinary".into(),
            groundwater: Some(Groundwater::DryObserved),
            sea_level: SeaLevel::OffTheFace,
            water_unit_weight_n_per_m3: 9810.0,
            sea_unit_weight_n_per_m3: 10050.0,
            above_table: AboveTable::Dry,
            crack_water_above_tip_m: None,
            surcharges: vec![],
            inertia_seaward: 0.0,
            inertia_up: 0.0,
            annual_chance: None,
        }],
        surcharges: vec![],
        undercut: Undercut {
            setting: Setting::StraightCliff,
            width_along_shore_m: None,
            growth: Growth::Advance,
            search_to_depth_m: 20.0,
            depth_step_m: 0.5,
            start_shape: None,
        },
        checks: Checks {
            headline: Headline::Cautious,
            averaging: Averaging::FromThickness,
            partial_factors: PartialFactors { tension: 1.0, cohesion: 1.0, friction: 1.0, unit_weight: 1.0, en_1997_m2: false },
            required_reserve: 1.0,
            target_error: 0.02,
        },
        outlook: Some(outlook),
        evidence: vec![],
        below: Below::default(),
        remedies: vec![],
        probes: vec![],
        cuts: vec![],
        extent: Extent::default(),
        location: None,
        defaults_used: vec![],
    }
}

/// A uniform overhang 4 m thick by its fibre `3 gamma L^2 / h`, 2.3 m deep today.
fn overhang(strength_pa: f64) -> (DemandModel, Variables) {
    let strength = Uncertain::Lognormal { mean: strength_pa, cov: 0.3 };
    let depths: Vec<f64> = (0..60).map(|i| 2.3 + 0.3 * f64::from(i)).collect();
    fibre(strength, Uncertain::Lognormal { mean: 25e3, cov: 0.05 }, &depths, |d| 0.75 * d * d)
}

fn run(model: &Model, (demand, variables): &(DemandModel, Variables), evidence: &[EvidenceInput]) -> OutlookInfo {
    let lost_m = vec![demand.depths_m.iter().map(|d| d + 1.0).collect(); demand.limits.len()];
    assess(&AssessInput {
        model,
        outlook: model.outlook.as_ref().unwrap(),
        demand,
        variables,
        today_index: 0,
        ground_lost: &GroundLost { depths_m: demand.depths_m.clone(), lost_m },
        lay_back_m: 1.5,
        brow_x_m: 0.0,
        cautious_critical_m: Some(5.0),
        checks: &TodaysChecks { cliff_height_m: 30.0, ..TodaysChecks::default() },
        today: Some(Date { year: 2026, month: 3, day: 14 }),
        evidence,
    })
}

/// End to end against the closed form: `ln D` of `D = sqrt(st h / (3 gamma))` is normal, the growth lognormal; the chance by the
/// horizon is one integral, here by 4,000 equal probabilities, over all cliffs and over those that stand.
#[test]
fn the_whole_outlook_is_the_closed_form() {
    let info = run(&model(outlook()), &overhang(1500e3), &[]);
    assert!(info.refused.is_empty(), "{:?}", info.refused);
    let zeta = |v: f64| (1.0_f64 + v * v).ln().sqrt();
    let lambda = |m: f64, v: f64| m.ln() - 0.5 * zeta(v).powi(2);
    let middle = 0.5 * (lambda(1500e3, 0.3) - 0.75_f64.ln() - lambda(25e3, 0.05));
    let spread = 0.5 * zeta(0.3).hypot(zeta(0.05));
    let growth = GrowthLaw::new(&GrowthParams {
        mean_m_per_yr: 0.06,
        uncertainty_cov: 0.5,
        year_to_year_cov: 0.0,
        storms: None,
        sea_level_rise: None,
        horizon_yr: 50.0,
    })
    .unwrap();
    let by = growth.by(50.0).unwrap();
    let depths: Vec<f64> = (0..4000).map(|i| (middle + spread * normal::quantile((f64::from(i) + 0.5) / 4000.0)).exp()).collect();
    let all: f64 = depths.iter().map(|d| by.exceedance(d - 2.3)).sum::<f64>() / 4000.0;
    let error = info.sampling_error.unwrap();
    let found = info.probability_at_horizon.unwrap();
    // The margin, quadratic in depth, is taken as straight over steps of 0.3 m: that part of the error is stated.
    let tolerance = 3.5 * error + info.interpolation_error.unwrap();
    assert!((found - all).abs() < tolerance, "{found} against {all}, error {error}");
    assert_eq!(info.probability_by_year.len(), 50);
    assert_eq!(info.probability_by_year[49].0, 2076);
    assert!((info.probability_by_year[49].1 - found).abs() < 1e-12, "the table's horizon is the horizon");
    let check = info.cross_check.as_ref().unwrap();
    assert!(check.difference_in_errors < 3.0, "{check:?}");
    assert!(info.importance.iter().any(|(name, _)| name == "deepening rate"));
    assert!((info.importance.iter().map(|i| i.1).sum::<f64>() - 1.0).abs() < 1e-12);
    let asset = &info.assets[0];
    assert!(asset.start_moving_by.zip(asset.year_passed).is_none_or(|(s, p)| (p - s - 5.0).abs() < 1e-9));
    assert!(info.setbacks.windows(2).all(|s| s[0].setback_m <= s[1].setback_m), "{:?}", info.setbacks);
    assert!(info.next_survey_by.unwrap().starts_with("202"));
    assert!(!info.triggers.is_empty() && info.brow_by_year.len() == 51);
}

/// Rare: the plain samples hardly see it, and importance sampling resolves it to far better than 20 %.
#[test]
fn rare_collapses_are_resolved() {
    let mut rare = outlook();
    rare.rate = DeepeningRate::Given { mean_m_per_yr: 0.01, uncertainty_cov: 0.3, year_to_year_cov: 0.5 };
    let info = run(&model(rare), &overhang(900e3), &[]);
    let check = info.cross_check.unwrap();
    assert!(check.importance_sampling < 1e-4 && 1e-9 < check.importance_sampling, "{check:?}");
    assert!(check.importance_sampling_error < 0.2 * check.importance_sampling, "{check:?}");
    assert!(check.difference_in_errors < 3.0, "{check:?}");
    assert!((info.probability_at_horizon.unwrap() / check.importance_sampling - 1.0).abs() < 0.3);
    assert!(info.in_words.unwrap().contains("less than 1 in 10,000 by this model; other causes dominate"));
}

#[test]
fn the_same_seed_gives_the_same_outlook_for_any_number_of_threads() {
    let mut small = outlook();
    small.samples = 10_000;
    let (model, parts) = (model(small), demo(12, 4));
    let with = |threads| {
        let pool = rayon::ThreadPoolBuilder::new().num_threads(threads).build().unwrap();
        pool.install(|| run(&model, &parts, &[]))
    };
    assert_eq!(with(1), with(2));
}

/// A stand at a greater depth than today's makes collapse less likely, a fall at today's depth more likely.
#[test]
fn evidence_moves_the_answer() {
    let parts = overhang(1500e3);
    let seen = |what, depth| Evidence {
        what,
        date: None,
        undercut_depth_m: Uncertain::Uniform { min: depth - 0.1, max: depth + 0.1 },
        overhang_thickness_m: Uncertain::Exact(4.0),
        rock: 0,
    };
    let with =
        |evidence: &Evidence, section| run(&model(outlook()), &parts, &[EvidenceInput { evidence, strength: 0, unit_weight: 1, section }]);
    let stood = with(&seen(EvidenceKind::Stood, 8.0), None).evidence.unwrap();
    assert!(stood.probability_after < stood.probability_before, "{stood:?}");
    assert!(stood.mobilised_tensile_strength_kpa[0] < stood.mobilised_tensile_strength_kpa[1]);
    // On its own section, here the same one: the fibre of the demand lacks gamma h / 5, so answers are near but not equal.
    let own = with(&seen(EvidenceKind::Stood, 8.0), Some(&parts.0)).evidence.unwrap();
    assert!((own.probability_after / stood.probability_after - 1.0).abs() < 0.1, "{own:?} {stood:?}");
    let fell = with(&seen(EvidenceKind::Fell, 6.0), None).evidence.unwrap();
    assert!(fell.probability_before < fell.probability_after);
    let refused = with(&seen(EvidenceKind::Fell, 1.0), None).refused;
    assert_eq!(refused[0].code, "outlook.evidence");
}

#[test]
fn what_contradicts_the_cliff_is_refused() {
    let refused = run(&model(outlook()), &overhang(80e3), &[]).refused;
    assert_eq!(refused[0].code, "outlook.already-fallen");
    let mut fast = outlook();
    fast.rate = DeepeningRate::Given { mean_m_per_yr: 0.5, uncertainty_cov: 0.5, year_to_year_cov: 0.0 };
    let info = run(&model(fast), &overhang(1500e3), &[]);
    assert_eq!(info.refused[0].code, "outlook.search-depth");
    assert!(info.refused[0].reason.contains("set search_to_depth_m to"), "{}", info.refused[0].reason);
    assert!(info.probability_by_year.is_empty() && info.setback_m.is_none());
}
