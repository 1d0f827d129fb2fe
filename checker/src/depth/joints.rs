//! Paths of joint sets: lines of a set's dip from the hollow or the face up to the ground.
use super::geometry::{TargetLine, rupture_line};
use crate::model::{JointSet, Model};
use crate::section::{Feature, Section};

/// Starts of paths along back, roof and face.
const STARTS: usize = 24;
/// Pieces of a path, so that stress may open one part of it and hold another closed.
const PIECES: f64 = 16.0;
/// Flatter sets than this never come up to the ground within the section, rad (about 3 degrees).
const FLATTEST_RAD: f64 = 0.05;
/// Least share of a path's length that must lie in rocks that hold the set.
const LEAST_SHARE: f64 = 0.5;
/// Shortest path, in averaging lengths.
const SHORTEST: f64 = 2.0;

/// Lean from the vertical, landward positive, of the upward direction along a set; `None` for one too flat to reach the ground.
pub fn lean_rad(set: &JointSet) -> Option<f64> {
    let dip = set.dip_seaward_rad;
    if dip.abs() < FLATTEST_RAD {
        return None;
    }
    // a plane that dips seaward rises landward
    Some(dip.signum() * (std::f64::consts::FRAC_PI_2 - dip.abs()))
}

/// The paths of every set of the model at one depth, each with the index of its set.
pub(super) fn joint_paths(section: &Section, model: &Model, averaging_length_m: f64) -> Vec<TargetLine> {
    let starts = starts(section);
    let mut paths = Vec::new();
    for (s, set) in model.joint_sets.iter().enumerate() {
        let Some(lean) = lean_rad(set) else { continue };
        let holds = |layer: usize| set.rocks.contains(&section.rock_of_layer(layer));
        for &start in &starts {
            let Some(line) = rupture_line(section, start, lean) else { continue };
            let length = (line.to_m[0] - line.from_m[0]).hypot(line.to_m[1] - line.from_m[1]);
            let inside: f64 = line.pieces.iter().filter(|p| holds(p.0)).map(|p| p.1[1] - p.1[0]).sum();
            if SHORTEST * averaging_length_m <= length && LEAST_SHARE * length <= inside {
                paths.push(TargetLine { pieces: cut(&line.pieces, length / PIECES), set: Some(s), ..line });
            }
        }
    }
    paths
}

/// Evenly spaced points of back, roof and face, ends left out.
fn starts(section: &Section) -> Vec<[f64; 2]> {
    let features = section.features();
    let first = section.back_m().map_or(*features.points(Feature::Face).start(), |_| features.back.unwrap_or(features.lip));
    let part = section.surface().slice(first, *features.points(Feature::Face).end());
    let lengths = part.lengths_m();
    let total = lengths[lengths.len() - 1];
    (0..STARTS).map(|k| part.point(part.at_length(&lengths, total * (k as f64 + 0.5) / STARTS as f64))).collect()
}

/// Pieces no longer than `longest_m`.
fn cut(pieces: &[(usize, [f64; 2])], longest_m: f64) -> Vec<(usize, [f64; 2])> {
    let split = |&(layer, [from, to]): &(usize, [f64; 2])| {
        let n = ((to - from) / longest_m - 1e-9).ceil().max(1.0);
        let step = (to - from) / n;
        (0..n as usize).map(move |k| (layer, [from + k as f64 * step, if k + 1 == n as usize { to } else { from + (k + 1) as f64 * step }]))
    };
    pieces.iter().flat_map(split).collect()
}
