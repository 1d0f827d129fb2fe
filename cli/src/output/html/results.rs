//! Tables of results: checks, critical depths, what the answer hangs on, probes and cuts, numerical quality.
use checker::outcome::{CheckResult, Outcome};

use super::table::{Cell, Table};
use crate::output::words::{self, figures, fixed};

const CHECK_HEAD: [&str; 13] = [
    "check",
    "situation",
    "cautious: demand (kPa)",
    "capacity (kPa)",
    "utilization ± error",
    "limit",
    "best estimate: demand (kPa)",
    "capacity (kPa)",
    "utilization ± error",
    "at depth 0 (kPa)",
    "closed form (kPa)",
    "x, z (m), rock",
    "remarks",
];

/// Checks as surveyed.
pub fn surveyed(outcome: &Outcome) -> Table {
    let caption = format!("Checks at the surveyed undercut depth (horizontal) of {}", words::meters(outcome.surveyed.depth_m));
    checks("checks-surveyed", caption, &outcome.surveyed.checks)
}

/// Checks at the depth of the series that is nearest to the critical one; empty where there is none.
pub fn critical(outcome: &Outcome) -> Table {
    let critical_m = outcome.critical_depth.as_ref().and_then(|critical| critical.cautious.depth_m);
    let nearest = critical_m
        .and_then(|depth_m| outcome.depths.iter().min_by(|a, b| (a.depth_m - depth_m).abs().total_cmp(&(b.depth_m - depth_m).abs())));
    let (Some(depth_m), Some(nearest)) = (critical_m, nearest) else { return Table::default() };
    let caption = format!(
        "Checks at {}, the computed depth nearest to the critical one of {} (cautious inputs)",
        words::meters(nearest.depth_m),
        words::meters(depth_m)
    );
    checks("checks-critical", caption, &nearest.checks)
}

/// One row a check and situation: cautious inputs and best estimate side by side.
fn checks(id: &'static str, caption: String, rows: &[CheckResult]) -> Table {
    let mut table = Table::new(id, caption, &CHECK_HEAD);
    let mut keys: Vec<(&str, &str)> = Vec::new();
    for check in rows {
        let key = (check.check, check.situation.as_str());
        if !keys.contains(&key) {
            keys.push(key);
        }
    }
    for (name, situation) in keys {
        let of =
            |inputs: &str| rows.iter().find(|check| (check.check, check.situation.as_str(), check.inputs) == (name, situation, inputs));
        let (cautious, best) = (of("cautious"), of("best estimate"));
        if let Some(shown) = cautious.or(best) {
            let mut cells = vec![Cell::text(name), Cell::text(situation)];
            cells.extend(values(cautious));
            cells.push(Cell::text(cautious.map_or("–", verdict)));
            cells.extend(values(best));
            cells.extend([
                Cell::optional(shown.background_kpa, figures, "–"),
                Cell::optional(shown.closed_form_demand_kpa, figures, "–"),
                Cell::text(format!("{}, {}", words::place(shown.at), shown.rock)),
                Cell::text(remarks(shown)),
            ]);
            table.rows.push((shown.over, cells));
        }
    }
    table
}

/// Demand, capacity and utilization of one kind of inputs.
fn values(check: Option<&CheckResult>) -> [Cell; 3] {
    let Some(check) = check else { return std::array::from_fn(|_| Cell::text("–")) };
    let unit = if check.check == "joint opening" { " m" } else { "" };
    let utilization = words::utilization(check);
    [
        Cell::number(check.demand_kpa, signed(check) + unit),
        Cell::number(check.capacity_kpa, figures(check.capacity_kpa) + unit),
        check.utilization.map_or_else(
            || Cell::text(&utilization),
            |value| Cell::number(value, format!("{utilization} ± {}", words::error(check.error))),
        ),
    ]
}

fn verdict(check: &CheckResult) -> &'static str {
    if check.over { "OVER" } else { "under" }
}

fn remarks(check: &CheckResult) -> String {
    let mut remarks: Vec<String> = check.k0_case.iter().cloned().collect();
    if let (Some(demand), Some(capacity)) = (check.demand_kn_per_m, check.capacity_kn_per_m) {
        remarks.push(format!("{} of {} kN/m", figures(demand), figures(capacity)));
    }
    if let Some(length_m) = check.averaging_length_m {
        remarks.push(format!("mean over {} m", words::plain(length_m)));
    }
    if check.short_segment {
        remarks.push("segment cut below half its length".to_owned());
    }
    if let Some(area) = check.zone_m2.filter(|area| 0.0 < *area) {
        remarks.push(format!("{} m\u{b2} over the limit", figures(area)));
    }
    remarks.join("; ")
}

/// A demand; compression is said in words.
fn signed(check: &CheckResult) -> String {
    if check.demand_kpa < 0.0 { format!("{} compression", figures(-check.demand_kpa)) } else { figures(check.demand_kpa) }
}

/// Critical depth of each check.
pub fn each_critical(outcome: &Outcome) -> Table {
    let mut table = Table::new(
        "critical-depths",
        "Critical undercut depth (horizontal) of each check",
        &["check", "situation", "inputs", "critical depth (m)", "± error (m)", "remarks"],
    );
    for each in outcome.critical_depth.iter().flat_map(|critical| &critical.each_check) {
        let mut remarks = Vec::new();
        if each.already_over {
            remarks.push("over its limit as surveyed".to_owned());
        }
        if each.over_without_undercut {
            remarks.push("over its limit without any undercut: left out of the overall figure".to_owned());
        }
        remarks.extend(each.earlier_over.iter().map(|[from, to]| format!("also over from {from:.2} to {to:.2} m")));
        table.row(vec![
            Cell::text(each.check),
            Cell::text(&each.situation),
            Cell::text(each.inputs),
            Cell::optional(each.depth_m, |value| fixed(value, 2), "not reached"),
            Cell::optional(each.error_m, |value| fixed(value, 2), "–"),
            Cell::text(remarks.join("; ")),
        ]);
    }
    table
}

/// What the answer hangs on.
pub fn hangs_on(outcome: &Outcome) -> Table {
    let head = ["quantity", "low", "high", "utilization at low", "at high", "critical depth at low (m)", "at high (m)"];
    let mut table =
        Table::new("hangs-on", "What the answer hangs on: one quantity at a time, the others at their mean (best estimate)", &head);
    for row in &outcome.hangs_on {
        let unit = |value: f64| format!("{} {}", words::plain(value), row.unit).trim_end().to_owned();
        let two = |value: f64| fixed(value, 2);
        table.row(vec![
            Cell::text(&row.what),
            Cell::number(row.low, unit(row.low)),
            Cell::number(row.high, unit(row.high)),
            Cell::optional(row.utilization[0], two, "no value"),
            Cell::optional(row.utilization[1], two, "no value"),
            Cell::optional(row.critical_depth_m[0], two, "not reached"),
            Cell::optional(row.critical_depth_m[1], two, "not reached"),
        ]);
    }
    table
}

/// Probes at the surveyed depth.
pub fn probes(outcome: &Outcome) -> Table {
    let head = [
        "probe",
        "situation",
        "x, z (m)",
        "u_x (mm)",
        "u_z (mm)",
        "xx (kPa)",
        "zz (kPa)",
        "xz (kPa)",
        "yy (kPa)",
        "major (kPa)",
        "minor (kPa)",
    ];
    let caption = "Places asked for, as surveyed: displacement since depth 0 and effective stress, best estimate, tension positive";
    let mut table = Table::new("probes", caption, &head);
    for probe in &outcome.surveyed.probes {
        let stress =
            |value: fn(&checker::outcome::StressKpa) -> f64| Cell::optional(probe.stress_kpa.as_ref().map(value), figures, "no rock");
        let moved = |i: usize| Cell::optional(probe.displacement_mm.map(|mm| mm[i]), |value| fixed(value, 3), "–");
        table.row(vec![
            Cell::text(&probe.name),
            Cell::text(&probe.situation),
            Cell::text(words::place(probe.at)),
            moved(0),
            moved(1),
            stress(|s| s.xx),
            stress(|s| s.zz),
            stress(|s| s.xz),
            stress(|s| s.yy),
            stress(|s| s.major),
            stress(|s| s.minor),
        ]);
    }
    table
}

/// Cuts at the surveyed depth.
pub fn cuts(outcome: &Outcome) -> Table {
    let head = ["cut", "situation", "axial (kN/m)", "shear (kN/m)", "moment (kNm/m)", "fibre at start (kPa)", "fibre at end (kPa)"];
    let caption = "Lines asked for, as surveyed: resultants, best estimate; axial force positive in tension, shear positive when it carries \
                   the seaward side's weight, moment positive when it opens the upper end";
    let mut table = Table::new("cuts", caption, &head);
    for cut in &outcome.surveyed.cuts {
        let number = |value: f64| Cell::number(value, figures(value));
        table.row(vec![
            Cell::text(&cut.name),
            Cell::text(&cut.situation),
            number(cut.axial_kn_per_m),
            number(cut.shear_kn_per_m),
            number(cut.moment_knm_per_m),
            number(cut.fibre_from_kpa),
            number(cut.fibre_to_kpa),
        ]);
    }
    table
}

/// Numerical quality.
pub fn numerics(outcome: &Outcome) -> Table {
    let n = &outcome.numerics;
    let mut table =
        Table::new("numerics", "Numerical quality: extremes over all meshes of this run", &["quantity", "value", "what it tells"]);
    let mut row = |name: &str, value: f64, text: String, tells: &str| {
        table.row(vec![Cell::text(name), Cell::number(value, text), Cell::text(tells)]);
    };
    let small = |value: f64| format!("{value:.1e}");
    row("unknowns of the largest system", n.unknowns as f64, n.unknowns.to_string(), "size of the computation");
    row("triangles of the largest mesh", n.elements as f64, n.elements.to_string(), "six-node triangles");
    row(
        "smallest angle",
        n.smallest_angle_deg,
        format!("{:.1}°", n.smallest_angle_deg),
        "away from sharp corners of the survey; 28° is aimed at",
    );
    row("equilibrium residual", n.equilibrium_residual, small(n.equilibrium_residual), "what the solution leaves unbalanced, relative");
    row("weight of the model", n.weight_kn_per_m, format!("{} kN/m", figures(n.weight_kn_per_m)), "as surveyed");
    row("vertical reaction", n.reaction_kn_per_m, format!("{} kN/m", figures(n.reaction_kn_per_m)), "must balance the weight");
    row(
        "smallest over largest pivot",
        n.smallest_pivot_ratio,
        small(n.smallest_pivot_ratio),
        "conditioning; tiny values would show loose parts",
    );
    row("target of the error", n.target_error, fixed(n.target_error, 3), "of every utilization");
    row("error reached", n.reached_error, fixed(n.reached_error, 3), "largest of a check that governs somewhere");
    row(
        "statics against nodal forces",
        n.statics_nodal_difference,
        small(n.statics_nodal_difference),
        "relative, on the section above the back",
    );
    row(
        "statics against stress",
        n.statics_stress_difference,
        format!("{} %", figures(100.0 * n.statics_stress_difference)),
        "relative, stress integrated over the same section",
    );
    if let (Some(realized), Some(asked)) = (n.realized_k0, n.asked_k0) {
        let tells = format!("{} was asked; one cliff height behind the brow at half height", fixed(asked, 2));
        row("realized horizontal / vertical stress", realized, fixed(realized, 2), &tells);
    }
    let e = &n.extent;
    let extent = format!("x {} to {} m, base at z {} m", fixed(e.seaward_x_m, 0), fixed(e.landward_x_m, 0), fixed(e.base_z_m, 0));
    table.row(vec![Cell::text("extent of the model"), Cell::text(extent), Cell::text("base fixed, sides on rollers")]);
    table
}
