//! The surface before the sea cut it: the top of every column of overburden.
use super::arc::Point;
use super::envelope::{PiecewiseLinear, highest};
use crate::diagnostic::Diagnostic;
use crate::model::Model;

/// An original surface this far below the present ground is an error, above it a difference of surveys, m.
const ORIGINAL_BELOW_M: f64 = 0.5;

/// The un-eroded surface: given (level beyond its ends), else level at the brow seaward of it; never below the present ground.
pub(super) fn uneroded(model: &Model, ground: &PiecewiseLinear, brow: Point, findings: &mut Vec<Diagnostic>) -> PiecewiseLinear {
    let ends = ground.breaks();
    let (from, to) = (ends[0], ends[ends.len() - 1]);
    let before: Vec<Point> = match &model.section.original_surface_m {
        None => vec![[from, brow[1]], brow],
        Some(points) if !points.is_empty() => {
            let function = PiecewiseLinear::through(
                &[
                    &[[from.min(points[0][0]) - 1.0, points[0][1]]],
                    points.as_slice(),
                    &[[to.max(points[points.len() - 1][0]) + 1.0, points[points.len() - 1][1]]],
                ]
                .concat(),
            );
            findings.extend(original_below_ground(&function, ground));
            let inner = function.breaks().iter().copied().filter(|x| from < *x && *x < to);
            std::iter::once(from).chain(inner).chain(std::iter::once(to)).map(|x| [x, function.value(x)]).collect()
        }
        Some(_) => Vec::new(),
    };
    let mut all = steps(ground);
    all.extend(pieces(&[&before]));
    highest(&all)
}

fn original_below_ground(original: &PiecewiseLinear, ground: &PiecewiseLinear) -> Option<Diagnostic> {
    let ends = ground.breaks();
    let places = original.breaks().iter().chain(ends).copied().filter(|x| ends[0] <= *x && *x <= ends[ends.len() - 1]);
    let (x, below) = places.map(|x| (x, ground.value(x) - original.value(x))).max_by(|a, b| a.1.total_cmp(&b.1))?;
    let message = format!("the original surface lies {below:.2} m below the present ground at x = {x:.2} m");
    let at = "section.original_surface";
    match below {
        b if ORIGINAL_BELOW_M < b => Some(
            Diagnostic::error("section.original-surface", at, format!("{message}, more than {ORIGINAL_BELOW_M} m"))
                .hint("the ground before the sea cut it was at least as high as today's"),
        ),
        b if 0.01 < b => Some(Diagnostic::warning("section.original-surface", at, format!("{message}; the present ground is used there"))),
        _ => None,
    }
}

pub(super) fn pieces(walks: &[&[Point]]) -> Vec<[Point; 2]> {
    walks.iter().flat_map(|walk| walk.windows(2).map(|pair| [pair[0], pair[1]])).collect()
}

fn steps(function: &PiecewiseLinear) -> Vec<[Point; 2]> {
    function.pieces().map(|(x, z)| [[x[0], z[0]], [x[1], z[1]]]).collect()
}
