//! Places named in the model: brow, probes, cuts, cracks, remedies.
use super::super::{Model, RemedyKind};
use super::{x_range_m, z_range_m};
use crate::diagnostic::{Diagnostic, nth};

/// Distance from the surface at which the named brow is still meant to be on it, as a share of the cliff's height.
const BROW_TOLERANCE: f64 = 0.1;

pub(super) fn check(model: &Model, findings: &mut Vec<Diagnostic>) {
    brow(model, findings);
    for (i, cut) in model.cuts.iter().enumerate() {
        let length_m = (cut.to_m[0] - cut.from_m[0]).hypot(cut.to_m[1] - cut.from_m[1]);
        if length_m < 1e-6 {
            findings.push(
                Diagnostic::error("cuts.length", format!("{}.to", nth("cuts", i)), "the cut has no length").hint("from and to must differ"),
            );
        }
    }
    for (i, crack) in model.cracks.iter().enumerate() {
        for (k, pair) in crack.path_m.windows(2).enumerate() {
            if (pair[1][0] - pair[0][0]).hypot(pair[1][1] - pair[0][1]) < 1e-6 {
                let at = nth(&format!("{}.path", nth("cracks", i)), k + 1);
                findings.push(Diagnostic::error("cracks.doubled", at, "two points of the crack are the same").hint("delete one of them"));
            }
        }
    }
    above_ground(model, findings);
    for (i, remedy) in model.remedies.iter().enumerate() {
        if let RemedyKind::Bars { from_m, to_m, .. } = &remedy.kind
            && (to_m[0] - from_m[0]).hypot(to_m[1] - from_m[1]) < 1e-6
        {
            let at = format!("{}.bars.to", nth("remedies", i));
            findings.push(Diagnostic::error("remedies.length", at, "the bar has no length").hint("from is its head, to its toe"));
        }
    }
}

fn brow(model: &Model, findings: &mut Vec<Diagnostic>) {
    let (Some([x, z]), Some([z_low, z_high])) = (model.section.brow_m, z_range_m(model)) else { return };
    let away_m = model.section.surface.windows(2).map(|pair| distance_m([x, z], [pair[0].x_m, pair[0].z_m], [pair[1].x_m, pair[1].z_m]));
    let away_m = away_m.fold(f64::INFINITY, f64::min);
    if away_m > BROW_TOLERANCE * (z_high - z_low) {
        let message = format!("the brow [{x}, {z}] lies {away_m:.2} m away from the surface");
        findings.push(
            Diagnostic::error("section.brow", "section.brow", message).hint("name a point of the surface: the upper edge of the face"),
        );
    }
}

/// Distance of a point from a segment, m.
fn distance_m(point: [f64; 2], from: [f64; 2], to: [f64; 2]) -> f64 {
    let along = [to[0] - from[0], to[1] - from[1]];
    let length2 = along[0] * along[0] + along[1] * along[1];
    let share = if length2 > 0.0 { ((point[0] - from[0]) * along[0] + (point[1] - from[1]) * along[1]) / length2 } else { 0.0 };
    let share = share.clamp(0.0, 1.0);
    (point[0] - from[0] - share * along[0]).hypot(point[1] - from[1] - share * along[1])
}

/// Probes above the highest ground, or seaward of the model, can never be in the rock.
fn above_ground(model: &Model, findings: &mut Vec<Diagnostic>) {
    let (Some([x_low, _]), Some([_, z_high])) = (x_range_m(model), z_range_m(model)) else { return };
    let original = model.section.original_surface_m.iter().flatten().map(|point| point[1]).fold(z_high, f64::max);
    let seaward = model.extent.seaward_x_m.unwrap_or(f64::NEG_INFINITY).min(x_low);
    for (i, probe) in model.probes.iter().enumerate() {
        if probe.at_m[1] > original || (seaward.is_finite() && probe.at_m[0] < seaward) {
            let message = format!("the probe at [{}, {}] lies outside the section", probe.at_m[0], probe.at_m[1]);
            let hint = "x and z count as those of the surface do";
            findings.push(Diagnostic::error("probes.outside", format!("{}.at", nth("probes", i)), message).hint(hint));
        }
    }
}
