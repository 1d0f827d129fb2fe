//! Critical depths of all checks and the overall ones, with what goes.
use super::Solved;
use crate::critical::critical_depth;
use crate::deepen::{DepthPoint, excess_series, find, keys};
use crate::demand::{CheckKind, Found, InputCase};
use crate::model::Model;
use crate::outcome::{CheckCriticalDepth, CriticalDepth, CriticalDepths};
use crate::rupture::{Rupture, ground_lost_m, nearest_worst_line, range_m};
use crate::words::not_reached;

/// Critical depths from the solved series.
pub(super) fn critical_depths(model: &Model, solved: &[Solved], surveyed_m: f64, averaging_length_m: f64) -> CriticalDepths {
    let points: Vec<DepthPoint> = solved.iter().map(Solved::point).collect();
    let reserve = model.checks.required_reserve;
    let each_check: Vec<CheckCriticalDepth> = keys(&points)
        .iter()
        .filter_map(|key| {
            let label = points.iter().find_map(|p| find(p, key))?;
            Some(critical_depth(&excess_series(&points, key, reserve), surveyed_m, label))
        })
        .collect();
    let overall = |inputs: InputCase| overall(model, solved, &each_check, inputs, averaging_length_m);
    CriticalDepths { cautious: overall(InputCase::Cautious), best_estimate: overall(InputCase::BestEstimate), each_check }
}

/// The smallest critical depth over all checks that are not over without any undercut.
fn overall(model: &Model, solved: &[Solved], each: &[CheckCriticalDepth], inputs: InputCase, averaging_length_m: f64) -> CriticalDepth {
    let searched_to_m = model.undercut.search_to_depth_m;
    let candidates = each.iter().filter(|c| c.inputs == inputs.id() && !c.over_without_undercut && c.depth_m.is_some());
    let first = candidates.min_by(|a, b| a.depth_m.unwrap_or(f64::INFINITY).total_cmp(&b.depth_m.unwrap_or(f64::INFINITY)));
    let left_out = left_out_note(each, inputs);
    let Some(first) = first else {
        let note = [Some(not_reached(searched_to_m)), left_out].into_iter().flatten().collect::<Vec<_>>().join("; ");
        return CriticalDepth {
            found: false,
            depth_m: None,
            error_m: None,
            check: None,
            situation: None,
            rupture_line: None,
            ground_lost_m: None,
            ground_lost_range_m: None,
            block_m3_per_m: None,
            searched_to_m,
            note: Some(note),
        };
    };
    let depth_m = first.depth_m.unwrap_or(0.0);
    let at = solved.iter().min_by(|a, b| {
        let off = |s: &Solved| (s.record.section.depth_m() - depth_m).abs();
        off(a).total_cmp(&off(b))
    });
    let rupture = at.and_then(|solved| {
        let matches = |f: &&Found| f.kind.id() == first.check && f.inputs == inputs && f.result.situation == first.situation;
        solved.record.found.iter().find(matches).and_then(|f| rupture(model, solved, f, averaging_length_m))
    });
    let already = first.already_over.then(|| "over its limit at the surveyed depth already; treat as able to fall now".to_owned());
    let note = [already, left_out].into_iter().flatten().collect::<Vec<_>>().join("; ");
    CriticalDepth {
        found: true,
        depth_m: Some(depth_m),
        error_m: first.error_m,
        check: Some(first.check),
        situation: Some(first.situation.clone()),
        rupture_line: rupture.as_ref().map(|r| r.line_m),
        ground_lost_m: rupture.as_ref().map(|r| r.ground_lost_m),
        ground_lost_range_m: rupture.as_ref().map(|r| r.range_m),
        block_m3_per_m: rupture.as_ref().map(|r| r.block_m2),
        searched_to_m,
        note: (!note.is_empty()).then_some(note),
    }
}

/// Names the checks that are over their limit without any undercut.
fn left_out_note(each: &[CheckCriticalDepth], inputs: InputCase) -> Option<String> {
    let mut names: Vec<String> = Vec::new();
    for c in each.iter().filter(|c| c.inputs == inputs.id() && c.over_without_undercut) {
        let name = format!("{} ({})", c.check, c.situation);
        if !names.contains(&name) {
            names.push(name);
        }
    }
    (!names.is_empty()).then(|| format!("left out because over its limit without any undercut: {}", names.join(", ")))
}

/// The rupture line of a governing check at a solved depth.
pub(super) fn rupture(model: &Model, solved: &Solved, found: &Found, averaging_length_m: f64) -> Option<Rupture> {
    let record = &solved.record;
    let bending_pa: Vec<f64> = record
        .lines
        .iter()
        .map(|line| {
            // paths of joints break only by their own checks
            if line.set.is_some() {
                return f64::NEG_INFINITY;
            }
            let forces = line.effective_forces(model, &found.state);
            let length = line.length_m();
            forces.axial_n_per_m / length + 6.0 * forces.moment_n / (length * length)
        })
        .collect();
    let brow_x = record.section.brow_m()[0];
    let traced =
        solved.extras.traces.iter().find(|t| t.0 == found.inputs && t.1 == found.situation && found.kind == CheckKind::CliffTopTension);
    let line = match traced {
        Some((_, _, line)) => line.clone(),
        None => record.lines[nearest_worst_line(found, &record.lines, &bending_pa, averaging_length_m)?].clone(),
    };
    let lost = ground_lost_m(model, &line, brow_x);
    let range = range_m(model, &record.lines, &bending_pa, brow_x).unwrap_or([lost, lost]);
    Some(Rupture {
        line_m: [line.from_m, line.to_m],
        ground_lost_m: lost,
        range_m: [range[0].min(lost), range[1].max(lost)],
        block_m2: line.areas_m2.iter().sum(),
    })
}
