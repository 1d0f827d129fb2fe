//! A straight segment cut into pieces, one for each element that it crosses, curved sides included.
use crate::assembly::side_point;
use crate::element::SIDES;
use crate::locate::Locator;
use crate::mesh::Mesh;

/// Piece of a segment, parameters 0 at its start and 1 at its end.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Piece {
    /// Parameter at which the piece starts.
    pub start: f64,
    /// Parameter at which it ends.
    pub end: f64,
    /// Element that holds its middle; `None` outside the body.
    pub element: Option<u32>,
}

/// Pieces shorter than this share of the segment are merged with the next one.
const SHORTEST: f64 = 1e-10;

/// How far outside the body a piece may lie and still count to the nearest element, as a share of the segment: where a curved boundary
/// is a chain of parabolas, points taken on the true curve may lie outside by that little.
pub(crate) const REACH: f64 = 1e-3;

/// Pieces of the segment between its crossings with element sides, in order, together the whole segment.
///
/// `take` restricts the elements that count: on a segment along a contact it chooses the side. A crossing is a root of the signed distance from
/// the line, a quadratic of the parameter along a side.
pub fn pieces(mesh: &Mesh, locator: &Locator, (from_m, to_m): ([f64; 2], [f64; 2]), take: &dyn Fn(u32) -> bool) -> Vec<Piece> {
    let (dx, dy) = (to_m[0] - from_m[0], to_m[1] - from_m[1]);
    let square = dx * dx + dy * dy;
    let mut cuts = vec![0.0, 1.0];
    for element in locator.near_segment(from_m, to_m) {
        let triangle = &mesh.triangles[element as usize];
        for [i, j, m] in SIDES {
            let side = [triangle[i], triangle[j], triangle[m]].map(|n| mesh.points_m[n as usize]);
            for s in crossings(&side, from_m, [dx, dy]) {
                let p = side_point(&side, s);
                let t = ((p[0] - from_m[0]) * dx + (p[1] - from_m[1]) * dy) / square;
                if SHORTEST < t && t < 1.0 - SHORTEST {
                    cuts.push(t);
                }
            }
        }
    }
    cuts.sort_by(f64::total_cmp);
    cuts.dedup_by(|b, a| *b - *a < SHORTEST);
    let reach_m = REACH * square.sqrt();
    let piece = |w: &[f64]| {
        let t = 0.5 * (w[0] + w[1]);
        let found = locator.locate_where(mesh, [from_m[0] + t * dx, from_m[1] + t * dy], reach_m, take);
        Piece { start: w[0], end: w[1], element: found.map(|f| f.element) }
    };
    cuts.windows(2).map(piece).collect()
}

/// Parameters in [0, 1], at most two, at which a side (start, end, middle) crosses the line through `from` along `along`.
pub(crate) fn crossings(side_m: &[[f64; 2]; 3], from_m: [f64; 2], along_m: [f64; 2]) -> Vec<f64> {
    let length = along_m[0].hypot(along_m[1]);
    let distance = |p: [f64; 2]| ((p[1] - from_m[1]) * along_m[0] - (p[0] - from_m[0]) * along_m[1]) / length;
    let [d0, d1, dm] = side_m.map(distance);
    // distance(s) = a s² + b s + c
    let (a, b, c) = (2.0 * (d0 + d1 - 2.0 * dm), 4.0 * dm - 3.0 * d0 - d1, d0);
    let size = d0.abs().max(d1.abs()).max(dm.abs());
    let chord = (side_m[1][0] - side_m[0][0]).hypot(side_m[1][1] - side_m[0][1]);
    if size <= 1e-13 * chord {
        return Vec::new();
    }
    let mut roots = Vec::new();
    if a.abs() <= 1e-12 * size {
        if b.abs() > 0.0 {
            roots.push(-c / b);
        }
    } else {
        let discriminant = b * b - 4.0 * a * c;
        if 0.0 <= discriminant {
            let q = -0.5 * (b + discriminant.sqrt().copysign(b));
            roots.push(q / a);
            if q.abs() > 0.0 {
                roots.push(c / q);
            }
        }
    }
    roots.retain(|s| 0.0 <= *s && *s <= 1.0);
    roots.sort_by(f64::total_cmp);
    roots
}

#[cfg(test)]
mod tests;
