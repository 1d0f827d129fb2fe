//! The summary on the terminal: a table for people, with the cautions.
use std::fmt::Write;

use checker::outcome::{CheckResult, Outcome};

use super::Provenance;
use super::words;

/// What a summary shows.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub struct TextParts {
    /// Tables; left out with `--quiet`. Cautions, refusals and the headline always stay.
    pub tables: bool,
    /// Whether only today's shape was looked at.
    pub today_only: bool,
}

/// Last line of `check`.
pub const TODAY_ONLY: &str = "This looks at today's shape only; it says nothing about tomorrow.";

/// The whole summary, ended by a line feed.
pub fn summary(outcome: &Outcome, provenance: &Provenance, parts: TextParts) -> String {
    let mut out = String::new();
    if parts.tables {
        heading(&mut out, outcome);
        checks(&mut out, outcome);
        if !parts.today_only {
            series(&mut out, outcome);
            each_critical(&mut out, outcome);
            hangs_on(&mut out, outcome);
        }
        numerics(&mut out, outcome);
    }
    answer(&mut out, outcome, parts);
    reservations(&mut out, outcome);
    if parts.tables {
        defaults(&mut out, outcome);
        line(&mut out, "");
        line(&mut out, &format!("{} {}, {}", outcome.program.name, outcome.program.version, provenance.command));
        line(&mut out, &format!("model {} (sha256 {})", printable(&outcome.model.file), outcome.model.sha256));
    }
    if parts.today_only {
        line(&mut out, "");
        line(&mut out, TODAY_ONLY);
    }
    out
}

fn line(out: &mut String, text: &str) {
    out.push_str(text);
    out.push('\n');
}

/// Names from files without characters that would steer a terminal.
fn printable(text: &str) -> String {
    text.chars().map(|c| if c.is_control() { ' ' } else { c }).collect()
}

fn heading(out: &mut String, outcome: &Outcome) {
    let section = &outcome.section;
    let title = printable(&outcome.model.title);
    line(out, &title);
    line(out, &"=".repeat(title.chars().count().min(100)));
    if words::is_draft(outcome) {
        line(out, "DRAFT, NOT CHECKED");
    }
    line(
        out,
        &format!(
            "cliff height {}, overhang thickness {}, {} as surveyed {}",
            words::meters(section.cliff_height_m),
            words::meters(section.overhang_thickness_m),
            words::DEPTH_NAME,
            words::meters(section.surveyed_depth_m)
        ),
    );
}

fn checks(out: &mut String, outcome: &Outcome) {
    line(out, "");
    line(out, &format!("Checks at {} (compression where tension is asked counts as 0)", words::meters(outcome.surveyed.depth_m)));
    let mut table = Table::new(&[
        "check",
        "situation",
        "inputs",
        "demand",
        "capacity",
        "utilization",
        "± error",
        "at depth 0",
        "beam or statics",
        "limit",
        "at x, z (m)",
        "rock",
    ]);
    for check in &outcome.surveyed.checks {
        table.row(vec![
            check.check.to_owned(),
            printable(&check.situation),
            check.inputs.to_owned(),
            words::demand(check),
            capacity(check),
            words::utilization(check),
            words::error(check.error),
            check.background_kpa.map_or_else(|| "-".into(), |value| format!("{} kPa", words::figures(value))),
            check.closed_form_demand_kpa.map_or_else(|| "-".into(), |value| format!("{} kPa", words::figures(value))),
            if check.over { "OVER".into() } else { "under".to_owned() },
            words::place(check.at),
            printable(&check.rock),
        ]);
    }
    table.write(out);
}

fn capacity(check: &CheckResult) -> String {
    let unit = if check.check == "joint opening" { "m" } else { "kPa" };
    format!("{} {unit}", words::figures(check.capacity_kpa))
}

/// The worst utilization of each check over the situations, by depth, with cautious inputs.
fn series(out: &mut String, outcome: &Outcome) {
    if outcome.depths.is_empty() {
        return;
    }
    let mut names: Vec<&str> = Vec::new();
    for check in outcome.depths.iter().flat_map(|depth| &depth.checks) {
        if !names.contains(&check.check) {
            names.push(check.check);
        }
    }
    line(out, "");
    line(out, "Largest utilization over all situations by undercut depth, cautious inputs (over 1 / required reserve: marked !)");
    let mut head = vec!["depth (m)"];
    head.extend(&names);
    let mut table = Table::new(&head);
    for depth in &outcome.depths {
        let mut row = vec![words::fixed(depth.depth_m, 2)];
        for name in &names {
            let of_name = depth.checks.iter().filter(|check| check.check == *name && check.inputs == "cautious");
            row.push(worst(of_name).map_or_else(|| "-".into(), |c| format!("{}{}", words::utilization(c), if c.over { " !" } else { "" })));
        }
        table.row(row);
    }
    table.write(out);
}

/// The check with the largest utilization; one without capacity counts as largest.
pub(crate) fn worst<'a>(checks: impl Iterator<Item = &'a CheckResult>) -> Option<&'a CheckResult> {
    let rank = |check: &CheckResult| (check.over, check.utilization.unwrap_or(if check.over { f64::INFINITY } else { 0.0 }));
    checks.reduce(|a, b| {
        let (over_a, value_a) = rank(a);
        let (over_b, value_b) = rank(b);
        if (over_a, value_a) < (over_b, value_b) { b } else { a }
    })
}

fn each_critical(out: &mut String, outcome: &Outcome) {
    let Some(critical) = &outcome.critical_depth else { return };
    line(out, "");
    line(out, "Critical undercut depth of each check");
    let mut table = Table::new(&["check", "situation", "inputs", "critical depth", "remarks"]);
    for each in &critical.each_check {
        let mut remarks = Vec::new();
        if each.already_over {
            remarks.push("over its limit as surveyed".to_owned());
        }
        if each.over_without_undercut {
            remarks.push("over without any undercut: left out of the overall figure".to_owned());
        }
        for [from, to] in &each.earlier_over {
            remarks.push(format!("also over from {from:.2} to {to:.2} m"));
        }
        let depth = each.depth_m.map(|depth| format!("{depth:.2} ± {:.2} m", each.error_m.unwrap_or(0.0)));
        table.row(vec![
            each.check.to_owned(),
            printable(&each.situation),
            each.inputs.to_owned(),
            depth.unwrap_or_else(|| "not reached".into()),
            remarks.join("; "),
        ]);
    }
    table.write(out);
}

fn hangs_on(out: &mut String, outcome: &Outcome) {
    if outcome.hangs_on.is_empty() {
        return;
    }
    line(out, "");
    line(out, "What the answer hangs on (one at a time, the others at their mean)");
    let mut table = Table::new(&["quantity", "low", "high", "utilization today", "critical depth (m)"]);
    for row in &outcome.hangs_on {
        let number = |value: f64| format!("{} {}", words::plain(value), row.unit).trim_end().to_owned();
        let pair = |values: [Option<f64>; 2], none: &str| {
            let text = values.map(|value| value.map_or_else(|| none.to_owned(), |value| words::fixed(value, 2)));
            format!("{} to {}", text[0], text[1])
        };
        table.row(vec![
            printable(&row.what),
            number(row.low),
            number(row.high),
            pair(row.utilization, "no value"),
            pair(row.critical_depth_m, "not reached"),
        ]);
    }
    table.write(out);
}

fn numerics(out: &mut String, outcome: &Outcome) {
    let n = &outcome.numerics;
    line(out, "");
    line(
        out,
        &format!(
            "Numerical quality: {} unknowns, smallest angle {:.1} degrees, residual {:.0e}, weight {} and reaction {} kN/m, error reached {} \
             of {} asked",
            n.unknowns,
            n.smallest_angle_deg,
            n.equilibrium_residual,
            words::figures(n.weight_kn_per_m),
            words::figures(n.reaction_kn_per_m),
            words::fixed(n.reached_error, 3),
            words::fixed(n.target_error, 3)
        ),
    );
}

fn answer(out: &mut String, outcome: &Outcome, parts: TextParts) {
    line(out, "");
    line(out, &printable(&outcome.headline));
    line(out, &format!("Status: {}", words::status(outcome.status)));
    if parts.today_only {
        return;
    }
    if let Some(critical) = &outcome.critical_depth {
        line(out, &format!("Critical {}:", words::DEPTH_NAME));
        for (name, depth) in [("cautious inputs", &critical.cautious), ("best estimate  ", &critical.best_estimate)] {
            let lost =
                depth.ground_lost_m.map_or_else(String::new, |lost| format!("; ground lost behind the brow {}", words::meters(lost)));
            line(out, &format!("  {name}  {}{lost}", printable(&words::critical(depth))));
        }
    }
    match &outcome.outlook {
        None => {}
        Some(outlook) if outlook.refused.is_empty() => {
            for sentence in super::html::outlook::sentences(outlook) {
                line(out, &printable(&sentence));
            }
            if let Some(setback_m) = outlook.setback_m {
                line(out, &format!("Setback from {}: {setback_m:.1} m", outlook.setback_from.unwrap_or("today's brow")));
            }
        }
        Some(outlook) => {
            for refusal in &outlook.refused {
                line(out, &format!("Outlook refused[{}]: {}", refusal.code, printable(&refusal.reason)));
            }
        }
    }
    line(out, &format!("Below: keep out {:.0} m from the cliff foot ({})", outcome.below.keep_out_m, printable(&outcome.below.basis)));
}

fn reservations(out: &mut String, outcome: &Outcome) {
    for warning in &outcome.warnings {
        line(out, &format!("warning[{}]: {}", warning.code, printable(&warning.message)));
    }
    if !outcome.cautions.is_empty() {
        line(out, "");
        line(out, "Cautions");
        for caution in &outcome.cautions {
            line(out, &format!("- {}", printable(caution)));
        }
    }
}

fn defaults(out: &mut String, outcome: &Outcome) {
    let defaults = &outcome.model.defaults_used;
    if !defaults.is_empty() {
        line(out, "");
        line(out, &format!("{} values are DEFAULT, not from the file:", defaults.len()));
        for default in defaults {
            line(out, &format!("  DEFAULT {}", printable(default)));
        }
    }
}

/// Left-aligned columns, two blanks apart.
struct Table {
    rows: Vec<Vec<String>>,
}

impl Table {
    fn new(head: &[&str]) -> Self {
        Self { rows: vec![head.iter().map(|cell| (*cell).to_owned()).collect()] }
    }

    fn row(&mut self, cells: Vec<String>) {
        self.rows.push(cells);
    }

    fn write(&self, out: &mut String) {
        let n_columns = self.rows[0].len();
        let width = |i: usize| self.rows.iter().map(|row| row[i].chars().count()).max().unwrap_or(0);
        let widths: Vec<usize> = (0..n_columns).map(width).collect();
        for (i_row, row) in self.rows.iter().enumerate() {
            let cells: Vec<String> = row.iter().zip(&widths).map(|(cell, width)| format!("{cell:<width$}")).collect();
            line(out, cells.join("  ").trim_end());
            if i_row == 0 {
                let _ = writeln!(out, "{}", widths.iter().map(|width| "-".repeat(*width)).collect::<Vec<_>>().join("  "));
            }
        }
    }
}

#[cfg(test)]
mod tests;
