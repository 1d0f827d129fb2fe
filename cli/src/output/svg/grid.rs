//! A field sampled on the points of a regular grid, for hover values and principal-stress crosses.
use super::contour::Piece;
use super::frame::Frame;

/// Values on a grid in a window; not a number where there is no rock.
#[derive(Debug, Clone, PartialEq)]
pub struct Grid {
    /// Number of columns and rows; rows run from the top down.
    pub size: [usize; 2],
    /// Row by row.
    pub values: Vec<f64>,
}

impl Grid {
    /// Samples pieces at the centers of cells of about `cell_px` pixels.
    pub fn sample(pieces: &[Piece], frame: &Frame, cell_px: f64) -> Self {
        let size = [frame.width() / cell_px, frame.height() / cell_px].map(|n| (n.round() as usize).max(1));
        let mut grid = Self { size, values: vec![f64::NAN; size[0] * size[1]] };
        for piece in pieces {
            grid.paint(piece, frame);
        }
        grid
    }

    /// Center of a cell, m.
    pub fn center_m(&self, column: usize, row: usize, frame: &Frame) -> [f64; 2] {
        let part = |i: usize, n: usize| (i as f64 + 0.5) / n as f64;
        [
            frame.x_m[0] + part(column, self.size[0]) * (frame.x_m[1] - frame.x_m[0]),
            frame.z_m[1] - part(row, self.size[1]) * (frame.z_m[1] - frame.z_m[0]),
        ]
    }

    fn paint(&mut self, piece: &Piece, frame: &Frame) {
        let [a, b, c] = piece.at_m;
        let area = cross(a, b, c);
        if area <= 0.0 {
            return;
        }
        let columns = cell_range([a[0], b[0], c[0]].map(|x| (x - frame.x_m[0]) / (frame.x_m[1] - frame.x_m[0])), self.size[0]);
        let rows = cell_range([a[1], b[1], c[1]].map(|z| (frame.z_m[1] - z) / (frame.z_m[1] - frame.z_m[0])), self.size[1]);
        for row in rows {
            for column in columns.clone() {
                let p = self.center_m(column, row, frame);
                let weights = [cross(b, c, p), cross(c, a, p), cross(a, b, p)].map(|part| part / area);
                if weights.iter().all(|weight| -1e-9 <= *weight) {
                    let value = weights.iter().zip(piece.values).map(|(weight, value)| weight * value).sum();
                    self.values[row * self.size[0] + column] = value;
                }
            }
        }
    }
}

/// Twice the area of a triangle.
fn cross(a: [f64; 2], b: [f64; 2], c: [f64; 2]) -> f64 {
    (b[0] - a[0]) * (c[1] - a[1]) - (c[0] - a[0]) * (b[1] - a[1])
}

/// Cells whose center may lie between the least and the largest of `parts` (0 to 1 over `n` cells).
fn cell_range(parts: [f64; 3], n: usize) -> std::ops::Range<usize> {
    let low = parts.iter().fold(f64::INFINITY, |low, part| low.min(*part)) * n as f64;
    let high = parts.iter().fold(f64::NEG_INFINITY, |high, part| high.max(*part)) * n as f64;
    let clamp = |value: f64| value.clamp(0.0, n as f64) as usize;
    clamp((low - 0.5).ceil())..clamp((high + 0.5).floor())
}

#[cfg(test)]
mod tests {
    use super::{Frame, Grid, Piece};

    #[test]
    fn a_linear_field_is_sampled_exactly_and_voids_stay_empty() {
        let frame = Frame { x_m: [0.0, 10.0], z_m: [0.0, 10.0], left: 0.0, top: 0.0, px_per_m: 10.0 };
        let at_m = [[0.0, 0.0], [10.0, 0.0], [10.0, 10.0]];
        let piece = Piece { at_m, values: at_m.map(|p| 3.0 * p[0] - 2.0 * p[1]) };
        let grid = Grid::sample(&[piece], &frame, 10.0);
        assert_eq!(grid.size, [10, 10]);
        for row in 0..10 {
            for column in 0..10 {
                let [x, z] = grid.center_m(column, row, &frame);
                let value = grid.values[row * 10 + column];
                if z <= x { assert!((value - (3.0 * x - 2.0 * z)).abs() < 1e-12) } else { assert!(value.is_nan()) }
            }
        }
    }
}
