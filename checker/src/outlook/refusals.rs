//! What an outlook is refused for, and what it is warned of, before anything is sampled.
use super::rates::years_between;
use super::triggers::SURVEY_HOLDS_YR;
use crate::model::{Date, DeepeningRate, Model, Outlook, Setting};
use crate::outcome::{Note, Refusal};

/// Facts from the checks of today's state.
#[derive(Debug, Clone, Default, PartialEq)]
pub struct TodaysChecks {
    /// A check that is over its limit today, best estimate or cautious, with its situation.
    pub over_today: Option<(String, String)>,
    /// A governing check whose error missed the target.
    pub missed_target: Option<String>,
    /// Height of the cliff, m.
    pub cliff_height_m: f64,
}

/// Longest horizon as a multiple of the record behind the rate.
const RECORD_MULTIPLE: f64 = 2.0;

/// All reasons for which the outlook is refused before sampling.
pub fn refusals(model: &Model, outlook: &Outlook, today: &TodaysChecks) -> Vec<Refusal> {
    let mut all = Vec::new();
    let mut refuse = |code, reason: String| all.push(Refusal { code, reason });
    let horizon = outlook.horizon_yr;
    if !(horizon.is_finite() && 0.0 < horizon) {
        refuse("outlook.horizon", format!("the horizon must be positive, got {horizon} years"));
    }
    if model.joint_sets.is_empty() && model.discontinuity_survey.is_none() {
        let reason = "no joint set is given and nobody states that none was found; unseen joints govern";
        refuse("outlook.joints", format!("{reason}: give [[joint_sets]] or [discontinuity_survey]"));
    }
    for situation in model.situations.iter().filter(|s| s.groundwater.is_none()) {
        let reason = format!("nothing is said about groundwater in `{}`: give the water table, or \"dry, observed\"", situation.name);
        refuse("outlook.groundwater", reason);
    }
    if outlook.basis.trim().is_empty() {
        refuse("outlook.basis", "the deepening rate has no basis: say where it comes from".into());
    }
    match record_yr(outlook) {
        Some(record) if RECORD_MULTIPLE * record < horizon && !outlook.extrapolated => refuse(
            "outlook.record",
            format!("a horizon of {horizon} years is over twice the record of {record} years: shorten it, or set extrapolated = true"),
        ),
        None if !outlook.extrapolated => {
            refuse(
                "outlook.record",
                "the length of the record behind the rate is not given: give record_years, or set extrapolated = true".into(),
            );
        }
        _ => {}
    }
    if let Some((check, situation)) = &today.over_today {
        let reason = format!("{check} is over its limit today ({situation}): treat the overhang as able to fall now");
        refuse("outlook.over-today", reason);
    }
    if let Some(check) = &today.missed_target {
        refuse("outlook.error", format!("{check}, which governs, missed its target error: no outlook is built on it"));
    }
    if let Some(what) = setting_refused(model, today.cliff_height_m) {
        refuse("outlook.setting", format!("{what}: plane strain does not describe it"));
    }
    for (code, reason) in accepted_chances(outlook) {
        refuse(code, reason);
    }
    all
}

/// Length of the record behind the rate: as given, else the span of the surveys or of the edge's retreat, yr.
fn record_yr(outlook: &Outlook) -> Option<f64> {
    outlook.record_yr.or(match &outlook.rate {
        DeepeningRate::Given { .. } => None,
        DeepeningRate::Surveys(surveys) => {
            let first = surveys.iter().map(|s| s.date).min()?;
            let last = surveys.iter().map(|s| s.date).max()?;
            Some(years_between(first, last))
        }
        DeepeningRate::EdgeRetreat(edge) => Some(f64::from(edge.to - edge.from)),
    })
}

fn setting_refused(model: &Model, cliff_height_m: f64) -> Option<String> {
    match (model.undercut.setting, model.undercut.width_along_shore_m) {
        (Setting::Stack, _) => Some("a stack".into()),
        (Setting::Arch, _) => Some("an arch".into()),
        (Setting::Cave, None) => Some("a cave of unknown width along the shore".into()),
        (Setting::Cave, Some(width)) if width < cliff_height_m => {
            Some(format!("a cave of {width} m along the shore under a cliff of {cliff_height_m:.1} m"))
        }
        _ => None,
    }
}

fn accepted_chances(outlook: &Outlook) -> Vec<(&'static str, String)> {
    let mut all = Vec::new();
    for asset in &outlook.assets {
        match &asset.accepted {
            None => all.push(("outlook.accepted", format!("`{}` has no chance accepted by its owner: this tool sets none", asset.name))),
            Some(accepted) => {
                if !(0.0 < accepted.probability && accepted.probability < 1.0) {
                    let value = accepted.probability;
                    all.push((
                        "outlook.accepted",
                        format!("`{}`: the accepted chance must lie between 0 and 1, both excluded, got {value}", asset.name),
                    ));
                }
                if !(accepted.over_yr.is_finite() && 0.0 < accepted.over_yr) {
                    all.push(("outlook.accepted", format!("`{}`: the accepted chance needs a positive span of years", asset.name)));
                }
            }
        }
    }
    all
}

/// Warnings about dates: a survey that is old on the day of the report.
pub fn date_warnings(surveyed: Option<Date>, report: Option<Date>) -> Vec<Note> {
    let (Some(surveyed), Some(report)) = (surveyed, report) else { return Vec::new() };
    let age = years_between(surveyed, report);
    if SURVEY_HOLDS_YR < age {
        let message = format!("the survey is {age:.1} years older than the report; survey again, also after every storm");
        vec![Note { code: "outlook.survey-age".into(), message }]
    } else {
        Vec::new()
    }
}

#[cfg(test)]
mod tests;
