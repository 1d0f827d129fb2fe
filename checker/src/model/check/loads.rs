//! What acts and how the hollow grows: situations, surcharges, undercut, outlook.
use super::super::{DeepeningRate, Groundwater, Headline, Model, SeaLevel, Situation};
use super::surface::LEAST_HEIGHT_M;
use super::{x_range_m, z_range_m};
use crate::diagnostic::{Diagnostic, nth};

/// Largest number of depths of the series.
const MOST_DEPTHS: f64 = 500.0;

pub(super) fn check(model: &Model, findings: &mut Vec<Diagnostic>) {
    for (i, situation) in model.situations.iter().enumerate() {
        self::situation(situation, &nth("situations", i), findings);
    }
    if let Some([x_low, x_high]) = x_range_m(model) {
        for (i, surcharge) in model.surcharges.iter().enumerate() {
            if surcharge.x_m[1] <= x_low || surcharge.x_m[0] >= extent_landward_m(model).unwrap_or(f64::INFINITY) {
                let message = format!(
                    "the surcharge from x = {} to {} m lies outside the section from {x_low} to {x_high} m",
                    surcharge.x_m[0], surcharge.x_m[1]
                );
                let hint = "x of surcharges counts from the same mark as x of the surface";
                findings.push(Diagnostic::error("surcharges.outside", format!("{}.x_m", nth("surcharges", i)), message).hint(hint));
            }
        }
    }
    undercut(model, findings);
    factors(model, findings);
    outlook(model, findings);
}

fn extent_landward_m(model: &Model) -> Option<f64> {
    model.extent.landward_x_m.filter(|x_m| x_m.is_finite())
}

fn situation(situation: &Situation, at: &str, findings: &mut Vec<Diagnostic>) {
    if let Some(Groundwater::Table(points)) = &situation.groundwater
        && let Some(i) = points.windows(2).position(|pair| pair[0][0] >= pair[1][0])
    {
        let message = format!("x does not grow from {} m to {} m along the water table", points[i][0], points[i + 1][0]);
        let hint = "list the points from the sea to the land";
        findings.push(Diagnostic::error("situations.table-order", nth(&format!("{at}.groundwater"), i + 1), message).hint(hint));
    }
    let has_table = matches!(situation.groundwater, Some(Groundwater::Table(_)));
    let is_moist = situation.above_table != super::super::AboveTable::Dry;
    if is_moist && !has_table {
        let message = "suction needs a water table above which it acts";
        findings.push(Diagnostic::error("situations.suction", format!("{at}.above_table"), message).hint("add groundwater = [[x, z], …]"));
    }
    if situation.sea_level == SeaLevel::OffTheFace && !has_table && situation.inertia_seaward < 0.0 {
        let message = "ground motion toward the land helps the overhang";
        let hint = "inertia_seaward is positive toward the sea";
        findings.push(Diagnostic::warning("situations.inertia", format!("{at}.inertia_seaward"), message).hint(hint));
    }
}

fn undercut(model: &Model, findings: &mut Vec<Diagnostic>) {
    let undercut = &model.undercut;
    if undercut.depth_step_m > undercut.search_to_depth_m {
        let message = format!(
            "the step of {} m is larger than the depth of {} m to which is searched",
            undercut.depth_step_m, undercut.search_to_depth_m
        );
        let diagnostic = Diagnostic::error("undercut.step", "undercut.depth_step_m", message).hint("make the step smaller");
        findings.push(diagnostic.also("undercut.search_to_depth_m"));
    }
    if undercut.search_to_depth_m / undercut.depth_step_m > MOST_DEPTHS {
        let message = format!("{:.0} depths are more than the limit of {MOST_DEPTHS}", undercut.search_to_depth_m / undercut.depth_step_m);
        findings.push(
            Diagnostic::error("undercut.step", "undercut.depth_step_m", message)
                .hint("make the step larger; it is refined by itself where needed"),
        );
    }
    let height = z_range_m(model).map(|[low, high]| (low, high, high - low)).filter(|(_, _, height_m)| *height_m >= LEAST_HEIGHT_M);
    if let (Some((z_low, z_high, height_m)), Some([x_low, x_high])) = (height, x_range_m(model)) {
        // The front of the cliff: the first point of the surface above half its height.
        let front = model.section.surface.iter().find(|point| point.z_m > z_low + 0.5 * height_m).map_or(x_high, |point| point.x_m);
        let room_m = extent_landward_m(model).map_or(x_high.max(front + 4.0 * height_m), |x_m| x_m) - front;
        if undercut.search_to_depth_m >= room_m {
            let message = format!(
                "an undercut {} m deep would pass the landward side of the model, {room_m:.1} m behind the face",
                undercut.search_to_depth_m
            );
            findings.push(
                Diagnostic::error("undercut.too-deep", "undercut.search_to_depth_m", message)
                    .hint("search less deep, or move extent.landward_x_m"),
            );
        }
        if let Some(shape) = undercut.start_shape {
            start_levels([shape.floor_level_m, shape.roof_level_m], [z_low, z_high], findings);
        }
        extent(model, [x_low, x_high], [z_low, z_high], findings);
    }
}

fn start_levels([floor_m, roof_m]: [f64; 2], [z_low, z_high]: [f64; 2], findings: &mut Vec<Diagnostic>) {
    if floor_m >= roof_m {
        let message = format!("the floor of the first hollow, {floor_m} m, is not below its roof, {roof_m} m");
        let diagnostic = Diagnostic::error("undercut.levels", "undercut.roof_level_m", message).hint("swap the two");
        findings.push(diagnostic.also("undercut.floor_level_m"));
    } else if floor_m < z_low || roof_m >= z_high {
        let message = format!("the first hollow from {floor_m} to {roof_m} m does not lie within the face from {z_low} to {z_high} m");
        findings.push(
            Diagnostic::error("undercut.levels", "undercut.roof_level_m", message).hint("levels count from the same datum as the surface"),
        );
    }
}

fn extent(model: &Model, [x_low, x_high]: [f64; 2], [z_low, _]: [f64; 2], findings: &mut Vec<Diagnostic>) {
    let sides = [
        (model.extent.seaward_x_m, "seaward_x_m", x_high, "seaward of the landward end of the surface", true),
        (model.extent.landward_x_m, "landward_x_m", x_low, "landward of the seaward end of the surface", false),
        (model.extent.base_z_m, "base_z_m", z_low, "below the lowest point of the surface", true),
    ];
    for (value, key, limit, words, below) in sides {
        if let Some(value) = value
            && (if below { value >= limit } else { value <= limit })
        {
            let message = format!("{key} = {value} m does not lie {words}, {limit} m");
            findings.push(Diagnostic::error("extent.inside", format!("extent.{key}"), message).hint("the model must hold the whole cliff"));
        }
    }
    if let (Some(seaward), Some(landward)) = (model.extent.seaward_x_m, model.extent.landward_x_m)
        && seaward >= landward
    {
        let message = format!("the seaward side, x = {seaward} m, is not seaward of the landward one, x = {landward} m");
        findings
            .push(Diagnostic::error("extent.inside", "extent.seaward_x_m", message).hint("x grows landward").also("extent.landward_x_m"));
    }
}

/// The set of EN 1997-1:2004 annex A goes with characteristic values, not with means.
fn factors(model: &Model, findings: &mut Vec<Diagnostic>) {
    if model.checks.partial_factors.en_1997_m2 && model.checks.headline == Headline::BestEstimate {
        let message = "the partial factors of EN 1997-1 go with cautious values, but the headline is the best estimate";
        let diagnostic = Diagnostic::warning("checks.partial-factors", "checks.partial_factors", message);
        findings.push(diagnostic.hint("write headline = \"cautious\"").also("checks.headline"));
    }
}

fn outlook(model: &Model, findings: &mut Vec<Diagnostic>) {
    let Some(outlook) = &model.outlook else { return };
    match &outlook.rate {
        DeepeningRate::Surveys(surveys) => {
            if surveys.len() < 3 && !surveys.is_empty() {
                let message = format!("a rate cannot be fitted from {} dated depths; at least 3 are needed", surveys.len());
                findings.push(
                    Diagnostic::error("outlook.surveys", "outlook.surveys", message).hint("add surveys, or write deepening_m_per_year"),
                );
            }
            if let Some(i) = surveys.windows(2).position(|pair| pair[0].date >= pair[1].date) {
                let diagnostic =
                    Diagnostic::error("outlook.surveys", nth("outlook.surveys", i + 1), "the dates of the surveys do not grow");
                findings.push(diagnostic.hint("list them from the oldest to the latest, each day once"));
            }
        }
        DeepeningRate::EdgeRetreat(edge) => {
            if edge.from >= edge.to {
                let message = format!("the record from {} to {} has no length", edge.from, edge.to);
                findings.push(Diagnostic::error("outlook.record", "outlook.edge_retreat", message).hint("swap the two years"));
            }
        }
        DeepeningRate::Given { .. } => {}
    }
    if outlook.allowance_m > 0.0 && outlook.allowance_for.is_none() {
        let message = "the allowance has no reason beside it";
        findings.push(Diagnostic::warning("outlook.allowance", "outlook.allowance_m", message).hint("add allowance_for"));
    }
}
