//! Piecewise linear functions of x that may jump, and the highest of many straight pieces at every x.
use super::arc::Point;

/// A piecewise linear function of x; its outer pieces go on level.
#[derive(Debug, Clone, PartialEq)]
pub(crate) struct PiecewiseLinear {
    /// Ends of the pieces, growing, one more than pieces.
    x: Vec<f64>,
    /// Values at the two ends of each piece.
    ends: Vec<[f64; 2]>,
}

impl PiecewiseLinear {
    /// Through points with growing x.
    pub(crate) fn through(points: &[Point]) -> Self {
        Self { x: points.iter().map(|p| p[0]).collect(), ends: points.windows(2).map(|pair| [pair[0][1], pair[1][1]]).collect() }
    }

    /// Ends of the pieces, growing.
    pub(crate) fn breaks(&self) -> &[f64] {
        &self.x
    }

    /// Ends in x and in value of each piece.
    pub(crate) fn pieces(&self) -> impl Iterator<Item = ([f64; 2], [f64; 2])> + '_ {
        self.x.windows(2).zip(&self.ends).map(|(x, ends)| ([x[0], x[1]], *ends))
    }

    /// Value at `x`; at a jump the higher one.
    pub(crate) fn value(&self, x: f64) -> f64 {
        let right = self.x.partition_point(|end| *end <= x);
        let n = self.ends.len();
        if right == 0 {
            return self.ends[0][0];
        }
        if n < right {
            return self.ends[n - 1][1];
        }
        let (a, b) = (self.x[right - 1], self.x[right]);
        let t = (x - a) / (b - a);
        let here = self.ends[right - 1][0] + t * (self.ends[right - 1][1] - self.ends[right - 1][0]);
        if 1 < right && x <= a { here.max(self.ends[right - 2][1]) } else { here }
    }
}

/// The highest of straight pieces at every x that any of them covers; the pieces must cover one interval without a gap.
///
/// Vertical pieces do not count. Breaks are the ends of all pieces and the crossings of pieces that lie highest somewhere
/// between two ends.
pub(crate) fn highest(pieces: &[[Point; 2]]) -> PiecewiseLinear {
    let mut ordered: Vec<[Point; 2]> =
        pieces.iter().map(|&[a, b]| if a[0] <= b[0] { [a, b] } else { [b, a] }).filter(|[a, b]| a[0] < b[0]).collect();
    ordered.sort_by(|p, q| p[0][0].total_cmp(&q[0][0]));
    let mut stops: Vec<f64> = ordered.iter().flat_map(|[a, b]| [a[0], b[0]]).collect();
    stops.sort_by(f64::total_cmp);
    stops.dedup();
    let (mut result, mut active, mut next) = (PiecewiseLinear { x: vec![stops[0]], ends: Vec::new() }, Vec::<[Point; 2]>::new(), 0);
    for pair in stops.windows(2) {
        active.retain(|piece| pair[0] < piece[1][0]);
        while next < ordered.len() && ordered[next][0][0] <= pair[0] {
            active.push(ordered[next]);
            next += 1;
        }
        push_highest(&mut result, &active, pair[0], pair[1]);
    }
    result
}

/// Adds the highest of pieces that all cover `from` to `to`, walking from crossing to crossing.
fn push_highest(result: &mut PiecewiseLinear, active: &[[Point; 2]], from: f64, to: f64) {
    let value = |piece: &[Point; 2], x: f64| piece[0][1] + (x - piece[0][0]) / (piece[1][0] - piece[0][0]) * (piece[1][1] - piece[0][1]);
    let slope = |piece: &[Point; 2]| (piece[1][1] - piece[0][1]) / (piece[1][0] - piece[0][0]);
    let mut x = from;
    while x < to {
        // The highest just landward of x: of equal ones the steepest.
        let top = active.iter().max_by(|p, q| {
            let (a, b) = (value(p, x), value(q, x));
            if (a - b).abs() <= 1e-12 * (1.0 + a.abs()) { slope(p).total_cmp(&slope(q)) } else { a.total_cmp(&b) }
        });
        let Some(top) = top else { return };
        let crossing = |piece: &[Point; 2]| {
            let gain = slope(piece) - slope(top);
            let at = x + (value(top, x) - value(piece, x)) / gain;
            (0.0 < gain && x + 1e-9 < at && at < to - 1e-9).then_some(at)
        };
        let end = active.iter().filter_map(crossing).fold(to, f64::min);
        result.x.push(end);
        result.ends.push([value(top, x), value(top, end)]);
        x = end;
    }
}
