//! Refuses outlines, sizes and settings that have no meaning: `Outline` -> `Outline` or [`MeshError`].
use crate::error::MeshError;
use crate::geometry::distance;
use crate::outline::{Line, Outline};
use crate::params::MeshParams;
use crate::size::SizeField;

/// An end of an arc may be this share of its radius off the circle (or the tolerance, if that is more).
const OFF_CIRCLE: f64 = 1e-3;

/// Checks all input.
///
/// # Errors
/// The first fault found.
pub(crate) fn validate(outline: &Outline, size: &SizeField, params: &MeshParams) -> Result<(), MeshError> {
    if outline.lines.iter().all(|line| line.n_segments() == 0) {
        return Err(MeshError::NoLine);
    }
    for (i_line, line) in outline.lines.iter().enumerate() {
        finite_points(i_line, line)?;
        arcs_fit(i_line, line, params.tolerance_m.unwrap_or(0.0))?;
    }
    let first = outline.lines.iter().flat_map(|line| &line.points_m).next();
    if outline.lines.iter().flat_map(|line| &line.points_m).all(|p| Some(p) == first) {
        return Err(MeshError::NoLine);
    }
    size.validate()?;
    settings(params)
}

fn finite_points(line: usize, of: &Line) -> Result<(), MeshError> {
    match of.points_m.iter().position(|p| !(p[0].is_finite() && p[1].is_finite())) {
        Some(point) => {
            let [x_m, y_m] = of.points_m[point];
            Err(MeshError::NotFinite { line, tag: of.tag, point, x_m, y_m })
        }
        None => Ok(()),
    }
}

fn arcs_fit(line: usize, of: &Line, tolerance_m: f64) -> Result<(), MeshError> {
    let (arcs, segments, tag) = (of.arcs.len(), of.n_segments(), of.tag);
    if arcs != 0 && arcs != segments && arcs != of.points_m.len() {
        return Err(MeshError::ArcCount { line, tag, arcs, segments });
    }
    for segment in 0..segments {
        let (from, to, Some(arc)) = of.segment(segment) else { continue };
        let off = |p| (distance(p, arc.center_m) - arc.radius_m).abs();
        let off_m = off(from).max(off(to));
        let fits = 0.0 < arc.radius_m && off_m <= (OFF_CIRCLE * arc.radius_m).max(tolerance_m);
        if !fits {
            return Err(MeshError::OffCircle { line, tag, segment, off_m, radius_m: arc.radius_m });
        }
    }
    Ok(())
}

fn settings(params: &MeshParams) -> Result<(), MeshError> {
    let degrees = params.smallest_angle_rad.to_degrees();
    let angle_fits = 0.0 <= degrees && degrees <= 30.0 + 1e-9;
    if !angle_fits {
        return Err(MeshError::Setting { what: "the smallest angle in degrees", limit: "from 0 to 30", value: degrees });
    }
    if let Some(tolerance_m) = params.tolerance_m {
        let fits = 0.0 < tolerance_m && tolerance_m.is_finite();
        if !fits {
            return Err(MeshError::Setting { what: "the tolerance in m", limit: "positive", value: tolerance_m });
        }
    }
    Ok(())
}

#[cfg(test)]
mod tests;
