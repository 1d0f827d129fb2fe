use super::{TodaysChecks, date_warnings, refusals};
use crate::model::{Date, Outlook, Setting};
use crate::outlook::assess::tests::{model, outlook};

#[track_caller]
fn refused(change: impl Fn(&mut Outlook)) -> Vec<(&'static str, String)> {
    let mut changed = outlook();
    change(&mut changed);
    let model = model(changed.clone());
    refusals(&model, &changed, &TodaysChecks::default()).into_iter().map(|r| (r.code, r.reason)).collect()
}

#[test]
fn a_whole_model_is_not_refused() {
    assert_eq!(refused(|_| {}), []);
}

#[test]
fn each_gap_is_named_with_what_to_do() {
    assert_eq!(refused(|o| o.horizon_yr = 0.0), [("outlook.horizon", "the horizon must be positive, got 0 years".to_owned())]);
    assert_eq!(refused(|o| o.basis = "  ".into())[0].0, "outlook.basis");
    assert!(refused(|o| o.horizon_yr = 145.0)[0].1.contains("over twice the record of 72 years"));
    assert_eq!(refused(|o| (o.horizon_yr, o.extrapolated) = (145.0, true)), []);
    assert_eq!(refused(|o| o.record_yr = None)[0].0, "outlook.record");
    assert_eq!(refused(|o| o.assets[0].accepted = None)[0].0, "outlook.accepted");
    for p in [0.0, 1.0, f64::NAN] {
        assert_eq!(refused(|o| o.assets[0].accepted.as_mut().unwrap().probability = p)[0].0, "outlook.accepted", "{p}");
    }
    let all = refused(|o| (o.horizon_yr, o.basis) = (f64::NAN, String::new()));
    assert_eq!(all.len(), 2, "all reasons at once: {all:?}");
}

#[test]
fn todays_state_and_the_setting_count() {
    let outlook = outlook();
    let mut model = model(outlook.clone());
    let over = TodaysChecks { over_today: Some(("roof tension".into(), "ordinary".into())), ..TodaysChecks::default() };
    assert!(refusals(&model, &outlook, &over)[0].reason.contains("treat the overhang as able to fall now"));
    let missed = TodaysChecks { missed_target: Some("local shear".into()), ..TodaysChecks::default() };
    assert_eq!(refusals(&model, &outlook, &missed)[0].code, "outlook.error");
    model.discontinuity_survey = None;
    model.situations[0].groundwater = None;
    model.undercut.setting = Setting::Stack;
    let codes: Vec<&str> = refusals(&model, &outlook, &TodaysChecks::default()).iter().map(|r| r.code).collect();
    assert_eq!(codes, ["outlook.joints", "outlook.groundwater", "outlook.setting"]);
    model.undercut.setting = Setting::Cave;
    model.undercut.width_along_shore_m = Some(40.0);
    let high = TodaysChecks { cliff_height_m: 50.0, ..TodaysChecks::default() };
    assert!(refusals(&model, &outlook, &high).iter().any(|r| r.reason.contains("a cave of 40 m")));
}

#[test]
fn an_old_survey_is_warned_of() {
    let day = |year| Some(Date { year, month: 3, day: 14 });
    assert!(date_warnings(day(2026), day(2027)).is_empty() && date_warnings(None, day(2027)).is_empty());
    assert_eq!(date_warnings(day(2024), day(2027))[0].code, "outlook.survey-age");
}
