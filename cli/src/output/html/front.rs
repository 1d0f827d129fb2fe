//! The first page in words: the manager's box and the answer in three sentences.
use checker::model::{Headline, Model};
use checker::outcome::{CheckResult, CriticalDepth, HangsOn, Outcome};
use serde::Serialize;

use super::outlook;
use crate::output::{text, words};

/// Why measures are missing.
pub const NO_REMEDIES: &str = "not calculated in this run, because this version compares no measures";

/// One line of the manager's box.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct BoxLine {
    /// The question.
    pub what: &'static str,
    /// The answer.
    pub answer: String,
}

/// The manager's box.
pub fn manager_box(outcome: &Outcome) -> Vec<BoxLine> {
    let break_m = outcome.critical_depth.as_ref().and_then(|critical| critical.cautious.ground_lost_m);
    let takes = break_m.map_or_else(String::new, |lost_m| {
        format!(" The break itself takes about {lost_m:.1} m of ground behind the edge; a setback must be wider than that.")
    });
    let outlook = outlook::calculated(outcome);
    let above = match outlook.and_then(|outlook| outlook.setback_m.zip(outlook.horizon_years)) {
        Some((setback_m, years)) => {
            format!("Keep behind {setback_m:.0} m from today's edge for the coming {} years.{takes}", words::plain(years))
        }
        None => format!(
            "Distance to keep behind today's edge, and until when: {}.{takes}",
            outlook::reason_for(outcome, "no chance is accepted by an owner")
        ),
    };
    let below = &outcome.below;
    let using = below.use_of_ground.as_ref().map_or_else(String::new, |used| format!(" The ground below is used as {used}."));
    let ends = outcome.report.valid_until.as_ref().map_or_else(String::new, |date| format!(" This report ends on {date}."));
    let again = match outlook.and_then(|outlook| outlook.next_survey_by.as_ref()) {
        Some(date) => format!("By {date}, and after every storm or fall.{ends}"),
        None => format!(
            "After every winter, and after every storm or fall.{ends} Date from the rate: {}.",
            outlook::reason_for(outcome, "no date was found")
        ),
    };
    vec![
        BoxLine { what: "Above", answer: above },
        BoxLine { what: "Below", answer: format!("Keep out {:.0} m from the cliff foot ({}).{using}", below.keep_out_m, below.basis) },
        BoxLine { what: "Look again", answer: again },
        BoxLine { what: "How sure", answer: how_sure(outcome) },
        BoxLine { what: "Would change it most", answer: widest(outcome).map_or_else(|| "Not computed in this run.".to_owned(), swing) },
    ]
}

fn how_sure(outcome: &Outcome) -> String {
    let n = &outcome.numerics;
    let numeric = format!(
        "The arithmetic is good to {} of a utilization ({} was asked); what is put in is known far less well.",
        words::fixed(n.reached_error, 3),
        words::fixed(n.target_error, 3)
    );
    let weakest = widest(outcome).map_or_else(String::new, |row| format!(" Weakest datum: {}.", row.what));
    let defaults = outcome.model.defaults_used.len();
    format!("{numeric}{weakest} {defaults} values are DEFAULT, not from the file.")
}

/// The quantity that moves the answer most.
fn widest(outcome: &Outcome) -> Option<&HangsOn> {
    let searched = outcome.critical_depth.as_ref().map_or(0.0, |critical| critical.cautious.searched_to_m);
    let reach = |row: &HangsOn| {
        let any_depth = row.critical_depth_m.iter().any(Option::is_some);
        let [a, b] =
            if any_depth { row.critical_depth_m.map(|depth| depth.unwrap_or(searched)) } else { row.utilization.map(|u| u.unwrap_or(0.0)) };
        (any_depth, (b - a).abs())
    };
    outcome.hangs_on.iter().reduce(|a, b| {
        let ((any_a, reach_a), (any_b, reach_b)) = (reach(a), reach(b));
        if (any_a, reach_a) < (any_b, reach_b) { b } else { a }
    })
}

fn swing(row: &HangsOn) -> String {
    let unit = if row.unit.is_empty() { String::new() } else { format!(" {}", row.unit) };
    let depth = |depth: Option<f64>| depth.map_or_else(|| "not reached".to_owned(), |depth_m| format!("{depth_m:.1} m"));
    let range = format!("{}: from {} to {}{unit}", row.what, words::plain(row.low), words::plain(row.high));
    if row.critical_depth_m.iter().any(Option::is_some) {
        format!("{range} the critical depth goes from {} to {}.", depth(row.critical_depth_m[0]), depth(row.critical_depth_m[1]))
    } else {
        let value = |value: Option<f64>| value.map_or_else(|| "no value".to_owned(), |value| words::fixed(value, 2));
        format!("{range} today's utilization goes from {} to {}.", value(row.utilization[0]), value(row.utilization[1]))
    }
}

/// The answer in three sentences: today, critical depth, ground that goes.
pub fn sentences(outcome: &Outcome, model: &Model) -> Vec<String> {
    let mut sentences = vec![today(outcome, model)];
    let Some(critical) = &outcome.critical_depth else {
        sentences.push("The critical undercut depth was not asked for in this run.".to_owned());
        return sentences;
    };
    sentences.push(format!(
        "Critical undercut depth (horizontal), where the first check goes over its limit: with cautious inputs {}; with best-estimate inputs {}.",
        words::critical(&critical.cautious),
        words::critical(&critical.best_estimate)
    ));
    sentences.push(ground(&critical.cautious));
    sentences
}

fn today(outcome: &Outcome, model: &Model) -> String {
    let inputs = headline_inputs(model);
    let governing = text::worst(outcome.surveyed.checks.iter().filter(|check| check.inputs == inputs));
    let depth = words::meters(outcome.surveyed.depth_m);
    let Some(check) = governing else {
        return format!("Today, at an undercut depth (horizontal) of {depth}, no check could be made.");
    };
    let end = if check.over {
        "OVER its limit by this model: treat the overhang as able to fall now".to_owned()
    } else {
        words::UNDER.to_owned()
    };
    format!(
        "Today, at an undercut depth (horizontal) of {depth}, {} governs ({}, {inputs} inputs): utilization {}; {end}.",
        check.check,
        check.situation,
        with_error(check)
    )
}

fn with_error(check: &CheckResult) -> String {
    match check.utilization {
        Some(_) => format!("{} \u{b1} {}", words::utilization(check), words::error(check.error)),
        None => words::utilization(check),
    }
}

fn ground(cautious: &CriticalDepth) -> String {
    match cautious.ground_lost_m {
        Some(lost_m) => {
            let range = cautious
                .ground_lost_range_m
                .map_or_else(String::new, |[low, high]| format!(" ({low:.1} to {high:.1} m over all lines nearly as bad)"));
            let block = cautious
                .block_m3_per_m
                .map_or_else(String::new, |volume| format!(", {} m³ of rock per metre of cliff", words::figures(volume)));
            format!("The break then takes {lost_m:.1} m of ground behind the brow{range}{block}.")
        }
        None => "No break was found in the searched depths, so no ground loss is given; that does not mean that none can come.".to_owned(),
    }
}

/// Which inputs stand in the headline.
pub fn headline_inputs(model: &Model) -> &'static str {
    match model.checks.headline {
        Headline::Cautious => "cautious",
        Headline::BestEstimate => "best estimate",
    }
}
