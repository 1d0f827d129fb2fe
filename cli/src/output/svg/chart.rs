//! Charts: demand against undercut depth for each check, and what the answer hangs on.
use checker::outcome::{CheckResult, HangsOn, Outcome, PointXz};

use super::draw::{Anchor, Picture, Svg};
use super::frame::{tick_text, ticks};
use crate::output::words;

/// A plot area with its own scale on each axis.
#[derive(Debug, Clone, Copy)]
struct Plot {
    x: [f64; 2],
    y: [f64; 2],
    left: f64,
    top: f64,
    width: f64,
    height: f64,
}

impl Plot {
    fn px(&self, [x, y]: [f64; 2]) -> [f64; 2] {
        let part = |value: f64, [low, high]: [f64; 2]| if low < high { (value - low) / (high - low) } else { 0.5 };
        [self.left + self.width * part(x, self.x), self.top + self.height * (1.0 - part(y, self.y))]
    }

    fn line(&self, svg: &mut Svg, points: &[[f64; 2]], class: &str) {
        if 1 < points.len() {
            let px: Vec<[f64; 2]> = points.iter().map(|p| self.px(*p)).collect();
            svg.polyline(&px, class);
        }
    }

    fn axes(&self, svg: &mut Svg, x_name: &str, y_name: &str) {
        let bottom = self.top + self.height;
        for y in ticks(self.y, 5) {
            let [_, py] = self.px([self.x[0], y]);
            svg.line([[self.left, py], [self.left + self.width, py]], "rule");
            svg.text([self.left - 7.0, py + 4.0], Anchor::End, "tick", &tick_text(y, self.y));
        }
        for x in ticks(self.x, 6) {
            let [px, _] = self.px([x, self.y[0]]);
            svg.line([[px, bottom], [px, bottom + 5.0]], "axis");
            svg.text([px, bottom + 18.0], Anchor::Middle, "tick", &tick_text(x, self.x));
        }
        svg.rect([self.left, self.top, self.width, self.height], "frame");
        svg.text([self.left + 0.5 * self.width, bottom + 35.0], Anchor::Middle, "label", x_name);
        svg.text_up([self.left - 46.0, self.top + 0.5 * self.height], "label", y_name);
    }
}

/// Key to the lines of the demand charts.
pub fn demand_key() -> Picture {
    let rows = [
        ("demand", "demand, cautious inputs"),
        ("demandbest", "demand, best estimate"),
        ("capacity", "capacity, cautious inputs"),
        ("capacitybest", "capacity, best estimate"),
        ("background", "same place at depth 0"),
        ("closed", "closed form of a cantilever"),
    ];
    let mut svg = Svg::default();
    for (i, (class, text)) in rows.iter().enumerate() {
        let (x, y) = (8.0 + 285.0 * (i % 3) as f64, 16.0 + 22.0 * (i / 3) as f64);
        svg.line([[x, y], [x + 40.0, y]], class);
        svg.text([x + 48.0, y + 4.0], Anchor::Start, "label", text);
    }
    Picture {
        width: 860.0,
        height: 52.0,
        title: "Key to the lines of the charts".to_owned(),
        description: "The shaded band is the numerical error of the demand.".to_owned(),
        body: svg.body,
    }
}

/// Checks that occur in the series, in their order of first appearance.
pub fn check_names(outcome: &Outcome) -> Vec<&'static str> {
    let mut names = Vec::new();
    for check in outcome.depths.iter().flat_map(|depth| &depth.checks) {
        if !names.contains(&check.check) {
            names.push(check.check);
        }
    }
    names
}

/// The worst situation of a check with given inputs at every depth.
pub fn worst_by_depth<'a>(outcome: &'a Outcome, name: &str, inputs: &str) -> Vec<(f64, &'a CheckResult)> {
    let of_depth =
        |checks: &'a [CheckResult]| crate::output::text::worst(checks.iter().filter(|check| check.check == name && check.inputs == inputs));
    outcome.depths.iter().filter_map(|depth| of_depth(&depth.checks).map(|check| (depth.depth_m, check))).collect()
}

/// Demand of one check against undercut depth, with capacity, error band, background and closed-form partner.
/// `None` where the series does not hold the check.
pub fn demand(outcome: &Outcome, name: &str) -> Option<Picture> {
    let cautious = worst_by_depth(outcome, name, "cautious");
    let best = worst_by_depth(outcome, name, "best estimate");
    let first = cautious.first().or(best.first())?.1;
    let unit = if name == "joint opening" { "m" } else { "kPa" };
    let plot = Plot { x: x_range(&cautious, &best), y: y_range(&cautious, &best), left: 62.0, top: 34.0, width: 340.0, height: 210.0 };
    let mut svg = Svg::default();
    svg.text([plot.left, 20.0], Anchor::Start, "label strong", name);
    plot.axes(&mut svg, "undercut depth (horizontal), m", &format!("demand, {unit}"));
    curves(&mut svg, &plot, &cautious, &best);
    upright(&mut svg, &plot, outcome.surveyed.depth_m, "today");
    if let Some(depth_m) = each_critical(outcome, name) {
        upright(&mut svg, &plot, depth_m, "critical");
    }
    Some(Picture {
        width: 420.0,
        height: 290.0,
        title: format!("{name}: demand against undercut depth (horizontal)"),
        description: format!(
            "Largest over all situations. Capacity {} {unit} at first. {} depths.",
            words::figures(first.capacity_kpa),
            cautious.len().max(best.len())
        ),
        body: svg.body,
    })
}

fn curves(svg: &mut Svg, plot: &Plot, cautious: &[(f64, &CheckResult)], best: &[(f64, &CheckResult)]) {
    let of = |rows: &[(f64, &CheckResult)], value: &dyn Fn(&CheckResult) -> Option<f64>| -> Vec<PointXz> {
        rows.iter().filter_map(|(depth, check)| value(check).map(|value| [*depth, value])).collect()
    };
    let band = |sign: f64| of(cautious, &|check| Some(check.demand_kpa + sign * check.error * check.capacity_kpa.max(0.0)));
    let around: Vec<[f64; 2]> = band(1.0).into_iter().chain(band(-1.0).into_iter().rev()).map(|p| plot.px(p)).collect();
    if 3 < around.len() {
        svg.polygon(&around, "band");
    }
    plot.line(svg, &of(cautious, &|check| check.background_kpa), "background");
    plot.line(svg, &of(cautious, &|check| check.closed_form_demand_kpa), "closed");
    plot.line(svg, &of(best, &|check| Some(check.capacity_kpa)), "capacitybest");
    plot.line(svg, &of(cautious, &|check| Some(check.capacity_kpa)), "capacity");
    plot.line(svg, &of(best, &|check| Some(check.demand_kpa)), "demandbest");
    plot.line(svg, &of(cautious, &|check| Some(check.demand_kpa)), "demand");
    for (depth, check) in cautious {
        let at = plot.px([*depth, check.demand_kpa]);
        svg.circle(at, 2.6, "dot");
        let text = format!(
            "depth {} m: demand {} ({}), utilization {} \u{b1} {}",
            words::fixed(*depth, 2),
            words::demand(check),
            check.situation,
            words::utilization(check),
            words::error(check.error)
        );
        svg.raw(&format!(
            "<circle class=\"hit\" cx=\"{:.1}\" cy=\"{:.1}\" r=\"9\" data-depth=\"{}\" data-demand=\"{}\"><title>{}</title></circle>",
            at[0],
            at[1],
            depth,
            check.demand_kpa,
            super::draw::escape(&text)
        ));
    }
}

fn upright(svg: &mut Svg, plot: &Plot, depth_m: f64, name: &str) {
    if plot.x[0] <= depth_m && depth_m <= plot.x[1] {
        let [x, _] = plot.px([depth_m, plot.y[0]]);
        svg.line([[x, plot.top], [x, plot.top + plot.height]], "mark");
        svg.text([x + 4.0, plot.top + 13.0], Anchor::Start, "halo small", name);
    }
}

/// Smallest critical depth of a check with cautious inputs over all situations.
fn each_critical(outcome: &Outcome, name: &str) -> Option<f64> {
    let each = &outcome.critical_depth.as_ref()?.each_check;
    each.iter().filter(|row| row.check == name && row.inputs == "cautious").filter_map(|row| row.depth_m).reduce(f64::min)
}

fn x_range(cautious: &[(f64, &CheckResult)], best: &[(f64, &CheckResult)]) -> [f64; 2] {
    let depths = cautious.iter().chain(best).map(|(depth, _)| *depth);
    let [low, high] = depths.fold([0.0, 0.0], |range, depth| [f64::min(range[0], depth), f64::max(range[1], depth)]);
    [low, if low < high { high } else { low + 1.0 }]
}

/// All demands; capacities and closed forms as far as they do not dwarf them.
fn y_range(cautious: &[(f64, &CheckResult)], best: &[(f64, &CheckResult)]) -> [f64; 2] {
    let rows = || cautious.iter().chain(best).map(|(_, check)| check);
    let demands = rows().fold([0.0_f64, 0.0_f64], |range, check| [range[0].min(check.demand_kpa), range[1].max(check.demand_kpa)]);
    let capacity = rows().map(|check| check.capacity_kpa).fold(0.0, f64::max);
    let closed = rows().filter_map(|check| check.closed_form_demand_kpa).fold(0.0, f64::max);
    let top = demands[1].max(capacity).max(closed.min(1.5 * demands[1].max(capacity))).max(1e-6);
    // Compression is shown down to the size of the capacity: how deep it goes does not matter.
    [demands[0].max(-0.6 * top), 1.16 * top]
}

/// Bars of the critical depth (or, where there is none, of the utilization) from the low to the high value of each quantity.
/// `None` where nothing was varied.
pub fn hangs_on(outcome: &Outcome) -> Option<Picture> {
    if outcome.hangs_on.is_empty() {
        return None;
    }
    let best = outcome.critical_depth.as_ref().map(|critical| &critical.best_estimate);
    let by_depth = outcome.hangs_on.iter().any(|row| row.critical_depth_m.iter().any(Option::is_some));
    let limit = best.map_or(0.0, |critical| critical.searched_to_m);
    let ends = |row: &HangsOn| if by_depth { row.critical_depth_m } else { row.utilization };
    let mut rows: Vec<&HangsOn> = outcome.hangs_on.iter().collect();
    let reach = |row: &&HangsOn| {
        let [a, b] = ends(row).map(|value| value.unwrap_or(limit));
        (b - a).abs()
    };
    rows.sort_by(|a, b| reach(b).total_cmp(&reach(a)));
    let base = if by_depth { best.and_then(|critical| critical.depth_m) } else { governing(outcome) };
    let mut svg = Svg::default();
    let height = 34.0 * rows.len() as f64;
    let known = rows.iter().flat_map(|row| ends(row)).flatten().chain(base);
    let [low, high] = known.fold([f64::INFINITY, f64::NEG_INFINITY], |range, value| [range[0].min(value), range[1].max(value)]);
    let margin = (0.28 * (high - low)).max(0.05 * high.abs()).max(1e-3);
    let plot = Plot { x: [(low - margin).max(0.0), high + margin], y: [0.0, 1.0], left: 300.0, top: 20.0, width: 490.0, height };
    bar_axes(&mut svg, &plot, if by_depth { "critical undercut depth (horizontal), m" } else { "governing utilization as surveyed" });
    for (i, row) in rows.iter().enumerate() {
        bar(&mut svg, &plot, row, ends(row), plot.top + 34.0 * i as f64);
    }
    if let Some(base) = base {
        let [x, _] = plot.px([base, 0.0]);
        svg.line([[x, plot.top - 6.0], [x, plot.top + height]], "capacity");
    }
    Some(Picture {
        width: 900.0,
        height: plot.top + height + 48.0,
        title: "What the answer hangs on, one quantity at a time".to_owned(),
        description: "Longest bar first. The upright line is the answer with mean inputs (best estimate).".to_owned(),
        body: svg.body,
    })
}

fn governing(outcome: &Outcome) -> Option<f64> {
    let best = outcome.surveyed.checks.iter().filter(|check| check.inputs == "best estimate");
    crate::output::text::worst(best).and_then(|check| check.utilization)
}

fn bar_axes(svg: &mut Svg, plot: &Plot, name: &str) {
    let bottom = plot.top + plot.height;
    for x in ticks(plot.x, 8) {
        let [px, _] = plot.px([x, 0.0]);
        svg.line([[px, plot.top], [px, bottom]], "rule");
        svg.text([px, bottom + 18.0], Anchor::Middle, "tick", &tick_text(x, plot.x));
    }
    svg.line([[plot.left, bottom], [plot.left + plot.width, bottom]], "axis");
    svg.text([plot.left + 0.5 * plot.width, bottom + 36.0], Anchor::Middle, "label", name);
}

/// One quantity: the bar runs from its low value (blue end) to its high value (orange end); "not reached" runs to the edge.
fn bar(svg: &mut Svg, plot: &Plot, row: &HangsOn, ends: [Option<f64>; 2], top: f64) {
    let unit = if row.unit.is_empty() { String::new() } else { format!(" {}", row.unit) };
    let name: String =
        if 39 < row.what.chars().count() { row.what.chars().take(38).chain(['\u{2026}']).collect() } else { row.what.clone() };
    svg.text([plot.left - 12.0, top + 14.0], Anchor::End, "label", &name);
    let range = format!("{} to {}{unit}", words::plain(row.low), words::plain(row.high));
    svg.text([plot.left - 12.0, top + 28.0], Anchor::End, "tick", &range);
    let right = plot.left + plot.width;
    let at = ends.map(|value| value.map_or(right, |value| plot.px([value, 0.0])[0]));
    let middle = 0.5 * (at[0] + at[1]);
    for (x, class) in [(at[0], "barlow"), (at[1], "bar")] {
        svg.rect([x.min(middle), top + 8.0, (x - middle).abs().max(0.6), 16.0], class);
    }
    for (i, (x, end)) in at.iter().zip(ends).enumerate() {
        let word = ["low", "high"][i];
        let text = end.map_or_else(|| format!("{word}: not reached"), |value| format!("{word} {}", words::fixed(value, 2)));
        let is_left = if (at[0] - at[1]).abs() < 1e-9 { i == 0 } else { *x <= middle };
        let (dx, anchor) = if is_left { (-5.0, Anchor::End) } else { (5.0, Anchor::Start) };
        svg.text([x + dx, top + 20.0], anchor, "halo small", &text);
    }
}

#[cfg(test)]
mod tests {
    use super::super::super::fixture;
    use super::{check_names, demand, hangs_on};

    #[test]
    fn every_check_has_a_chart_with_the_published_numbers() {
        let outcome = fixture::outcome();
        for name in check_names(&outcome) {
            let picture = demand(&outcome, name).unwrap();
            for (depth, check) in super::worst_by_depth(&outcome, name, "cautious") {
                let mark = format!("data-depth=\"{depth}\" data-demand=\"{}\"", check.demand_kpa);
                assert!(picture.body.contains(&mark), "{name}: {mark}");
            }
            assert!(picture.body.contains("demand, kPa") && picture.body.contains("undercut depth (horizontal), m"));
        }
        assert!(demand(&outcome, "joint slip").is_none());
    }

    #[test]
    fn the_longest_bar_comes_first() {
        let body = hangs_on(&fixture::outcome()).unwrap().body;
        let at = |text: &str| body.find(text).unwrap();
        assert!(at("stiffness of sandstone") < at("tensile strength") && at("tensile strength") < at("averaging length"));
        assert!(body.contains("not reached"));
    }
}
