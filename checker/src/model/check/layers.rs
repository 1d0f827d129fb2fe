//! Layers: every contact there and in the section, points in order, layers that appear somewhere.
use super::super::{Carries, ContactLine, Model};
use super::{x_range_m, z_range_m};
use crate::diagnostic::{Diagnostic, nth};

/// Depth below the surveyed surface, in heights of the cliff, beyond which a contact has no place in the model.
const DEEPEST_HEIGHTS: f64 = 20.0;

pub(super) fn check(model: &Model, findings: &mut Vec<Diagnostic>) {
    let n_layers = model.layers.len();
    for (i, layer) in model.layers.iter().enumerate() {
        let at = nth("layers", i);
        let is_last = i + 1 == n_layers;
        match &layer.base {
            None if !is_last => {
                let message = format!("layer {} of {n_layers} has no base", i + 1);
                findings.push(
                    Diagnostic::error("layers.no-base", at.clone(), message)
                        .hint("add the level of its base: base = …; only the last layer has none"),
                );
            }
            Some(_) if is_last => {
                let message = "the last layer has a base, but nothing lies below it";
                findings.push(
                    Diagnostic::error("layers.last-base", format!("{at}.base"), message).hint("leave base out, or add the layer below"),
                );
            }
            _ => {}
        }
        if let Some(base) = &layer.base {
            contact(model, base, &format!("{at}.base"), findings);
        }
        if layer.carries == Carries::LoadAndTension && layer.rest_slope_rad.is_some() {
            let message = "rest_slope_deg has no effect on a layer that carries tension";
            let hint = "write carries = \"load only\", or leave rest_slope_deg out";
            findings.push(Diagnostic::warning("key.no-effect", format!("{at}.rest_slope_deg"), message).hint(hint));
        }
    }
    if n_layers > 0 && model.layers.iter().all(|layer| layer.carries == Carries::LoadOnly) {
        let message = "all layers only load: nothing carries the overhang";
        findings.push(Diagnostic::error("layers.none-carries", "layers", message).hint("at least one layer carries \"load and tension\""));
    }
    never_appearing(model, findings);
}

fn contact(model: &Model, base: &ContactLine, at: &str, findings: &mut Vec<Diagnostic>) {
    if let ContactLine::Points(points) = base {
        for (i, pair) in points.windows(2).enumerate() {
            if pair[0][0] >= pair[1][0] {
                let message = format!("x does not grow from {} m to {} m along this contact", pair[0][0], pair[1][0]);
                findings.push(
                    Diagnostic::error("layers.contact-order", nth(at, i + 1), message).hint("list the points from the sea to the land"),
                );
                return;
            }
        }
    }
    let (Some([x_low, x_high]), Some([z_low, z_high])) = (x_range_m(model), z_range_m(model)) else { return };
    if let ContactLine::Points(points) = base
        && let (Some(first), Some(last)) = (points.first(), points.last())
        && (last[0] < x_low || first[0] > x_high)
    {
        let message = format!("the contact runs from x = {} to {} m, outside the section from {x_low} to {x_high} m", first[0], last[0]);
        findings.push(Diagnostic::error("layers.outside", at, message).hint("x of contacts counts from the same mark as x of the surface"));
        return;
    }
    let levels = [level_m(base, x_low), level_m(base, x_high)];
    let inner = if let ContactLine::Points(points) = base { points.iter().map(|point| point[1]).collect() } else { Vec::new() };
    let all = || levels.iter().chain(&inner).copied();
    if all().all(|z| z > z_high) {
        let message = format!("the base of this layer lies above the highest ground of the section at {z_high} m");
        let hint = "layers are listed from the top down, and each base is a level above the datum";
        findings.push(Diagnostic::error("layers.outside", at, message).hint(hint));
    } else if all().all(|z| z < z_low - DEEPEST_HEIGHTS * (z_high - z_low)) {
        let message = format!(
            "the base of this layer lies more than {DEEPEST_HEIGHTS} cliff heights below the section, whose lowest point is at {z_low} m"
        );
        findings.push(
            Diagnostic::error("layers.outside", at, message).hint("each base is a level above the datum, not a depth or a thickness"),
        );
    }
}

/// Level of a contact at `x_m`, m; NaN where the contact was already reported.
pub(super) fn level_m(base: &ContactLine, x_m: f64) -> f64 {
    match base {
        ContactLine::Level(z_m) => *z_m,
        ContactLine::Dip { x_m: x0_m, z_m: z0_m, dip_seaward_rad } => z0_m + (x_m - x0_m) * dip_seaward_rad.tan(),
        ContactLine::Points(points) => {
            let (Some(first), Some(last)) = (points.first(), points.last()) else { return f64::NAN };
            if x_m <= first[0] {
                return first[1];
            }
            let pair = points.windows(2).find(|pair| x_m <= pair[1][0]);
            pair.map_or(last[1], |pair| pair[0][1] + (pair[1][1] - pair[0][1]) * (x_m - pair[0][0]) / (pair[1][0] - pair[0][0]))
        }
    }
}

/// Layers that are nowhere thicker than zero below the ground of the section.
fn never_appearing(model: &Model, findings: &mut Vec<Diagnostic>) {
    let (Some([x_low, x_high]), Some([_, z_high])) = (x_range_m(model), z_range_m(model)) else { return };
    for (i, layer) in model.layers.iter().enumerate().skip(1) {
        let Some(base) = &layer.base else { continue };
        let mut stations: Vec<f64> = (0..=200).map(|k| x_low + (x_high - x_low) * f64::from(k) / 200.0).collect();
        stations.extend(model.layers[..=i].iter().filter_map(|layer| layer.base.as_ref()).flat_map(corners_x_m));
        let appears = stations.iter().any(|&x_m| {
            // The lowest of the contacts above is the top of this layer, and the ground is above everything.
            let top =
                model.layers[..i].iter().filter_map(|layer| layer.base.as_ref()).map(|above| level_m(above, x_m)).fold(z_high, f64::min);
            let thickness = top - level_m(base, x_m);
            thickness > 0.0 || thickness.is_nan()
        });
        if !appears {
            let message = format!("layer {} appears nowhere in the section: its base is nowhere below the layers above it", i + 1);
            let hint = "layers are listed from the top down; check the levels, or leave the layer out";
            findings.push(Diagnostic::warning("layers.nowhere", format!("{}.base", nth("layers", i)), message).hint(hint));
        }
    }
}

fn corners_x_m(base: &ContactLine) -> Vec<f64> {
    if let ContactLine::Points(points) = base { points.iter().map(|point| point[0]).collect() } else { Vec::new() }
}
