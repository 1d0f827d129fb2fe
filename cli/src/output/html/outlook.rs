//! When, how likely, how far back: the outlook in words and tables, or why it is missing.
use checker::outcome::{Outcome, OutlookInfo, Quantiles};
use checker::outlook::words::chance_in_words;

use super::table::{Cell, Table};
use crate::output::words::{fixed, plain};

/// Largest number of years in the table.
const MOST_YEARS: usize = 12;

/// The outlook, if it was calculated.
pub fn calculated(outcome: &Outcome) -> Option<&OutlookInfo> {
    outcome.outlook.as_ref().filter(|outlook| outlook.refused.is_empty())
}

/// Why there are no years, probabilities or setbacks; empty where there are.
pub fn reasons(outcome: &Outcome) -> Vec<String> {
    match &outcome.outlook {
        None => {
            vec!["not calculated in this run, because it was not asked for (no [outlook] in the model file, or another command)".to_owned()]
        }
        Some(outlook) => outlook.refused.iter().map(|refusal| format!("refused, because {}", refusal.reason)).collect(),
    }
}

/// The reasons in one phrase.
pub fn reason(outcome: &Outcome) -> String {
    reasons(outcome).join("; ")
}

/// The reasons in one phrase; `else_reason` where the outlook itself was calculated.
pub fn reason_for(outcome: &Outcome, else_reason: &str) -> String {
    let reason = reason(outcome);
    if reason.is_empty() { format!("not calculated in this run, because {else_reason}") } else { reason }
}

/// The outlook in sentences.
pub fn sentences(outlook: &OutlookInfo) -> Vec<String> {
    let mut lines: Vec<String> = outlook.in_words.iter().cloned().collect();
    if let Some(years) = &outlook.years_to_critical {
        lines.push(format!("Years from today to the critical depth, given that the cliff stands today: {}.", quantiles(years)));
    }
    if let (Some(chance), Some(horizon)) = (outlook.probability_at_horizon, outlook.horizon_years) {
        let error = outlook.sampling_error.map_or_else(String::new, |error| format!(" (sampling error {error:.1e})"));
        let rate = outlook.probability_on_rate.map_or_else(String::new, |[low, high]| {
            format!("; with the rate at its low and high end {} and {}", chance_in_words(low), chance_in_words(high))
        });
        lines.push(format!("Chance of collapse within {} years: {}{error}{rate}.", plain(horizon), chance_in_words(chance)));
    }
    if let (Some(index), false) = (outlook.reliability_index, outlook.targets.is_empty()) {
        let targets: Vec<String> =
            outlook.targets.iter().map(|(class, one, fifty)| format!("{class}: {one} in 1 year, {fifty} in 50")).collect();
        lines.push(format!("Reliability index {index:.2}; for comparison, targets of EN 1990 for buildings: {}.", targets.join("; ")));
    }
    if let Some(fallen) = outlook.model_says_already_fallen {
        lines.push(format!("Chance by which the model says that the cliff has fallen already: {}.", chance_in_words(fallen)));
    }
    if let Some(rate) = &outlook.rate {
        lines.push(format!(
            "Deepening rate {} m a year ({}); not knowing it: cov {}; swings from year to year: cov {}.",
            plain(rate.m_per_yr),
            rate.basis,
            plain(rate.uncertainty_cov),
            plain(rate.year_to_year_cov)
        ));
    }
    if let Some(evidence) = &outlook.evidence {
        lines.push(format!(
            "What the cliff itself has shown moves the chance from {} to {} (worth {} samples).",
            chance_in_words(evidence.probability_before),
            chance_in_words(evidence.probability_after),
            plain(evidence.effective_samples)
        ));
    }
    if let Some(date) = &outlook.next_survey_by {
        lines.push(format!("Next survey by {date}."));
    }
    lines
}

fn quantiles(years: &Quantiles) -> String {
    let year = |value: Option<f64>| value.map_or_else(|| "beyond the years looked at".to_owned(), |value| fixed(value, 0));
    format!("median {}, 5 % {}, 95 % {}", year(years.median), year(years.p05), year(years.p95))
}

/// All tables of the outlook.
pub fn tables(outlook: &OutlookInfo) -> String {
    [assets(outlook), setbacks(outlook), triggers(outlook), by_year(outlook), importance(outlook), cross_check(outlook)]
        .iter()
        .map(Table::html)
        .collect()
}

fn chance(value: f64) -> Cell {
    Cell::number(value, chance_in_words(value))
}

fn assets(outlook: &OutlookInfo) -> Table {
    let head = [
        "what stands there",
        "behind today's brow (m)",
        "accepted chance",
        "set by",
        "chance in those years",
        "year passed",
        "start moving by",
    ];
    let mut table = Table::new("assets", "What stands on the cliff", &head);
    for asset in &outlook.assets {
        let year = |value: Option<f64>| Cell::optional(value, |year| fixed(year, 0), "not in the years looked at");
        table.row(vec![
            Cell::text(&asset.name),
            Cell::number(asset.behind_brow_m, fixed(asset.behind_brow_m, 1)),
            Cell::number(asset.accepted, format!("{} over {} years", chance_in_words(asset.accepted), plain(asset.over_years))),
            Cell::text(&asset.accepted_by),
            Cell::number(asset.chance, &asset.chance_in_words),
            year(asset.year_passed),
            year(asset.start_moving_by),
        ]);
    }
    table
}

fn setbacks(outlook: &OutlookInfo) -> Table {
    let from = outlook.setback_from.unwrap_or("today's brow");
    let caption = format!("Setback from {from}, allowance included");
    let mut table = Table::new("setbacks", caption, &["accepted chance", "over (years)", "setback (m)"]);
    for row in &outlook.setbacks {
        table.row(vec![
            chance(row.accepted),
            Cell::number(row.over_years, plain(row.over_years)),
            Cell::number(row.setback_m, fixed(row.setback_m, 1)),
        ]);
    }
    table
}

fn triggers(outlook: &OutlookInfo) -> Table {
    let caption = "Field card: undercut depths (horizontal) at which a warden acts";
    let mut table = Table::new("triggers", caption, &["depth (m)", "what it means", "what to do"]);
    for trigger in &outlook.triggers {
        table.row(vec![Cell::number(trigger.depth_m, fixed(trigger.depth_m, 2)), Cell::text(&trigger.means), Cell::text(&trigger.act)]);
    }
    table
}

fn by_year(outlook: &OutlookInfo) -> Table {
    let head = ["year", "chance of collapse", "given that it stands today", "edge behind today's brow: 5 % (m)", "median (m)", "95 % (m)"];
    let mut table = Table::new("by-year", "Chance of collapse by the end of a year, and where the edge is then", &head);
    let years = &outlook.probability_by_year;
    let step = years.len().div_ceil(MOST_YEARS).max(1);
    for (i, (year, all)) in years.iter().enumerate().filter(|(i, _)| i % step == 0 || i + 1 == years.len()) {
        let standing = outlook.given_standing_today.get(i).map(|(_, value)| *value);
        let brow = outlook.brow_by_year.iter().find(|(of, _)| of == year).map(|(_, at)| *at);
        let edge = |k: usize| Cell::optional(brow.map(|at| at[k]), |value| fixed(value, 1), "–");
        table.row(vec![
            Cell::number(f64::from(*year), year.to_string()),
            chance(*all),
            Cell::optional(standing, chance_in_words, "–"),
            edge(0),
            edge(1),
            edge(2),
        ]);
    }
    table
}

fn importance(outlook: &OutlookInfo) -> Table {
    let mut table = Table::new("importance", "Share of each uncertain input in what decides", &["input", "share (%)"]);
    for (name, share) in &outlook.importance {
        table.row(vec![Cell::text(name), Cell::number(*share, fixed(100.0 * share, 0))]);
    }
    table
}

fn cross_check(outlook: &OutlookInfo) -> Table {
    let mut table = Table::new("cross-check", "Three ways to the chance by the horizon", &["way", "chance", "standard error"]);
    if let Some(check) = &outlook.cross_check {
        let error = |value: f64| Cell::number(value, format!("{value:.1e}"));
        let number = |value: f64| Cell::number(value, format!("{value:.2e}"));
        table.row(vec![Cell::text("plain sampling"), number(check.plain), error(check.plain_error)]);
        table.row(vec![Cell::text("importance sampling"), number(check.importance_sampling), error(check.importance_sampling_error)]);
        if let Some(first_order) = check.first_order {
            let name = format!("first-order method, {}", check.first_order_check.unwrap_or("likeliest check"));
            table.row(vec![Cell::text(name), number(first_order), Cell::text("not an unbiased estimate")]);
        }
    }
    table
}

#[cfg(test)]
mod tests {
    use super::{reason, sentences, tables};
    use crate::output::fixture;
    use checker::outcome::{OutlookInfo, Quantiles, Refusal, SetbackInfo, Trigger};

    #[test]
    fn refusals_say_why() {
        let mut outcome = fixture::outcome();
        assert!(reason(&outcome).starts_with("not calculated in this run, because"));
        let refused = vec![Refusal { code: "outlook.over-limit", reason: "a check is over its limit today".into() }];
        outcome.outlook = Some(OutlookInfo { refused, ..OutlookInfo::default() });
        assert_eq!(reason(&outcome), "refused, because a check is over its limit today");
    }

    #[test]
    fn years_chances_and_setbacks_are_shown() {
        let outlook = OutlookInfo {
            years_to_critical: Some(Quantiles { median: Some(42.0), p05: Some(17.0), p95: None }),
            probability_at_horizon: Some(0.004),
            horizon_years: Some(50.0),
            probability_by_year: (2027..2077).map(|year| (year, 1e-4 * f64::from(year - 2026))).collect(),
            setbacks: vec![SetbackInfo { accepted: 1e-3, over_years: 50.0, setback_m: 17.2 }],
            triggers: vec![Trigger { depth_m: 3.0, means: "faster than foreseen".into(), act: "survey again".into() }],
            ..OutlookInfo::default()
        };
        let text = sentences(&outlook).join(" ");
        assert!(text.contains("median 42, 5 % 17, 95 % beyond the years looked at") && text.contains("within 50 years"), "{text}");
        let html = tables(&outlook);
        assert!(html.contains("17.2") && html.contains("survey again") && html.contains(">2076<"));
        assert!(html.matches("<tr").count() < 30);
    }
}
