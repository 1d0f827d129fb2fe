//! Reservations that the results carry.
use super::{Solved, headline_inputs};
use crate::assess::Prepared;
use crate::demand::CheckKind;
use crate::model::{Model, Setting, StrengthBasis};
use crate::outcome::{CriticalDepths, Note, Numerics};

/// Cavern width over depth below which plane strain says little.
const NARROW: f64 = 3.0;

/// All reservations of a run.
pub(super) fn warnings(prepared: &Prepared<'_>, solved: &[Solved], numerics: &Numerics, critical: Option<&CriticalDepths>) -> Vec<Note> {
    let model: &Model = &prepared.model;
    let mut notes: Vec<Note> = prepared.warnings.iter().map(|w| note(w.code, w.message.clone())).collect();
    notes.extend(prepared.strength_notes.iter().map(|n| note("strength.used", n.clone())));
    if 1 < prepared.k0_cases().len() {
        notes.push(note("k0.not-measured", "k0 was not measured: every check is taken at nu/(1-nu) and at 1.0 and the worse counts"));
    }
    if numerics.target_error < numerics.reached_error {
        let (reached, target) = (numerics.reached_error, numerics.target_error);
        notes.push(note(
            "numerics.target-missed",
            format!("the numerical error reached is {reached:.3} of a utilization, above the target of {target:.3}"),
        ));
    }
    notes.extend(setting(model, prepared));
    notes.extend(cliffs_own_tension(prepared, solved));
    notes.extend(discontinuities(model));
    notes.extend(joints_not_sampled(model));
    notes.extend(already(critical));
    notes.extend(rating(model));
    notes
}

fn note(code: &str, message: impl Into<String>) -> Note {
    Note { code: code.to_owned(), message: message.into() }
}

/// Where plane strain is doubtful.
fn setting(model: &Model, prepared: &Prepared<'_>) -> Vec<Note> {
    let mut notes = Vec::new();
    let kind = match model.undercut.setting {
        Setting::StraightCliff => None,
        Setting::Cave => Some("a cave arches between its side walls: plane strain overstates the demand"),
        Setting::HeadlandCorner => Some("a headland corner is free on two sides: plane strain understates the demand"),
        Setting::Stack => Some("a stack is free on all sides: plane strain says little about it"),
        Setting::Arch => Some("an arch stands on two piers: plane strain says little about it"),
    };
    notes.extend(kind.map(|text| note("setting.plane-strain", text)));
    let depth = prepared.site.surveyed_depth_m();
    if let Some(width) = model.undercut.width_along_shore_m.filter(|w| *w < NARROW * depth) {
        let text = format!(
            "the undercut is {width:.1} m wide along the shore and {depth:.1} m deep: a cavern narrower than {NARROW:.0} times its depth arches \
             between its side walls, and plane strain overstates the demand"
        );
        notes.push(note("setting.narrow", text));
    }
    notes
}

/// Tension under the ground that belongs to the cliff rather than to the undercut.
fn cliffs_own_tension(prepared: &Prepared<'_>, solved: &[Solved]) -> Option<Note> {
    let inputs = headline_inputs(&prepared.model);
    let at = solved.iter().find(|s| s.record.section.depth_m().total_cmp(&prepared.site.surveyed_depth_m()).is_eq())?;
    let limit = prepared.site.brow_m()[0] + prepared.site.cliff_height_m();
    let tops = at.record.found.iter().filter(|f| f.kind == CheckKind::CliffTopTension && f.inputs == inputs);
    let own = tops.map(|f| &f.result).find(|r| limit < r.at[0] && r.background_kpa.is_some_and(|b| 0.5 * r.demand_kpa < b))?;
    let text = format!(
        "tension under the ground at x = {:.1} m lies more than one cliff height behind the brow and {:.0} of its {:.0} kPa are there without any \
         undercut: it belongs to the cliff and to the in-situ stress assumed",
        own.at[0],
        own.background_kpa.unwrap_or(0.0),
        own.demand_kpa
    );
    Some(note("cliff-top.background", text))
}

/// What is known of joints.
fn discontinuities(model: &Model) -> Option<Note> {
    let silent = model.joint_sets.is_empty() && model.discontinuity_survey.is_none();
    silent
        .then(|| note("joints.unknown", "no joint set is given and nobody states that none was seen: unseen joints govern many collapses"))
}

/// Years and probability without the paths of the joint sets.
fn joints_not_sampled(model: &Model) -> Option<Note> {
    let text = "the outlook samples no paths of joint sets: its years, probabilities and setbacks hold for the other checks only";
    (model.outlook.is_some() && !model.joint_sets.is_empty()).then(|| note("joints.not-sampled", text))
}

/// Checks over their limit today or without any undercut.
fn already(critical: Option<&CriticalDepths>) -> Vec<Note> {
    let Some(critical) = critical else { return Vec::new() };
    let mut notes = Vec::new();
    for c in critical.each_check.iter().filter(|c| c.already_over) {
        let when = if c.over_without_undercut { "without any undercut" } else { "at the surveyed depth" };
        notes.push(note("check.already-over", format!("{} ({}, {} inputs) is over its limit {when}", c.check, c.situation, c.inputs)));
    }
    notes
}

/// Intact strengths.
fn rating(model: &Model) -> Vec<Note> {
    let intact = model.layers.iter().map(|l| &model.rocks[l.rock]).filter(|r| r.strength_basis == StrengthBasis::Intact);
    let mut names: Vec<&str> = intact.map(|r| r.name.as_str()).collect();
    names.dedup();
    let text = |name: &str| format!("strengths of `{name}` come from intact specimens, times the mass factor stated");
    names.into_iter().map(|name| note("strength.intact", text(name))).collect()
}
