//! Layers cut from the top down, and the un-eroded surface above them, in vertical columns.
use super::arc::{Point, distance};
use super::envelope::PiecewiseLinear;
use crate::model::ContactLine;

/// Contacts closer together than this are one, m.
const SAME_LEVEL_M: f64 = 1e-9;

/// A straight piece over one column: `z = at_left + slope (x - left)`.
#[derive(Debug, Clone, Copy, PartialEq)]
struct Line {
    at_left: f64,
    slope: f64,
}

/// Contacts and un-eroded surface as functions of x, sorted into columns in which none of them bends or crosses another.
#[derive(Debug, Clone, PartialEq)]
pub(crate) struct Strata {
    n_contacts: usize,
    /// Ends of the columns, growing; beyond the outer ones the outer columns go on.
    x_m: Vec<f64>,
    /// Shape `[n_columns][1 + n_contacts]`: un-eroded surface, then contacts.
    lines: Vec<Line>,
}

impl Strata {
    /// Columns from `from_m` to `to_m` of the contacts from the top down (`None` of the last layer left out).
    ///
    /// Contacts given by points run level beyond their ends, dipping ones go on with their dip.
    pub(crate) fn new(contacts: &[ContactLine], uneroded: &PiecewiseLinear, from_m: f64, to_m: f64) -> Self {
        let contacts: Vec<PiecewiseLinear> = contacts.iter().map(|contact| contact_function(contact, from_m, to_m)).collect();
        let functions: Vec<&PiecewiseLinear> = std::iter::once(uneroded).chain(&contacts).collect();
        let mut x_m: Vec<f64> = functions.iter().flat_map(|f| f.breaks().iter().copied()).filter(|x| from_m < *x && *x < to_m).collect();
        x_m.extend([from_m, to_m]);
        sort_distinct(&mut x_m);
        let crossings = crossings(&contacts, &x_m);
        x_m.extend(crossings);
        sort_distinct(&mut x_m);
        let mut lines = Vec::with_capacity((x_m.len() - 1) * functions.len());
        for pair in x_m.windows(2) {
            let (q1, q3) = (0.75 * pair[0] + 0.25 * pair[1], 0.25 * pair[0] + 0.75 * pair[1]);
            for function in &functions {
                // Two inner points, so that a jump at an end of the column does not matter.
                let slope = (function.value(q3) - function.value(q1)) / (q3 - q1);
                lines.push(Line { at_left: function.value(q1) - slope * (q1 - pair[0]), slope });
            }
        }
        Self { n_contacts: contacts.len(), x_m, lines }
    }

    pub(crate) fn n_layers(&self) -> usize {
        self.n_contacts + 1
    }

    pub(crate) fn n_contacts(&self) -> usize {
        self.n_contacts
    }

    /// Ends of the columns, growing, m.
    pub(crate) fn breaks_m(&self) -> &[f64] {
        &self.x_m
    }

    fn column(&self, x: f64) -> (f64, &[Line]) {
        let i = self.x_m.partition_point(|end| *end <= x).clamp(1, self.x_m.len() - 1) - 1;
        let n = self.n_contacts + 1;
        (x - self.x_m[i], &self.lines[i * n..(i + 1) * n])
    }

    /// Level of the un-eroded surface, m.
    pub(crate) fn uneroded_m(&self, x: f64) -> f64 {
        let (dx, lines) = self.column(x);
        lines[0].at(dx)
    }

    /// Level of a contact as drawn, whether a higher one cuts it or not, m.
    pub(crate) fn contact_m(&self, contact: usize, x: f64) -> f64 {
        let (dx, lines) = self.column(x);
        lines[1 + contact].at(dx)
    }

    /// Level above which only layers `0 ..= layer` lie: the lowest of their contacts, m; minus infinity for the last layer.
    pub(crate) fn base_of_upper_m(&self, layer: usize, x: f64) -> f64 {
        if layer == self.n_contacts {
            return f64::NEG_INFINITY;
        }
        let (dx, lines) = self.column(x);
        lines[1..=1 + layer].iter().map(|line| line.at(dx)).fold(f64::INFINITY, f64::min)
    }

    /// The first layer whose lower contact is not above the point.
    pub(crate) fn layer_at(&self, p: Point) -> usize {
        let (dx, lines) = self.column(p[0]);
        lines[1..].iter().position(|line| line.at(dx) <= p[1]).unwrap_or(self.n_contacts)
    }

    /// Thickness of each layer between the point and the un-eroded surface into `thickness_m`, m.
    pub(crate) fn overburden_into(&self, p: Point, thickness_m: &mut [f64]) {
        let (dx, lines) = self.column(p[0]);
        let mut top = lines[0].at(dx);
        for (j, thickness) in thickness_m.iter_mut().enumerate() {
            let base = if j < self.n_contacts { lines[1 + j].at(dx).max(p[1]) } else { p[1] };
            *thickness = (top - base).max(0.0);
            top = top.min(base);
        }
    }

    /// The parts of a contact that separate two layers, as polylines inside the columns.
    pub(crate) fn visible(&self, contact: usize) -> Vec<Vec<Point>> {
        let n = self.n_contacts + 1;
        let mut pieces: Vec<Vec<Point>> = Vec::new();
        for (i, ends) in self.x_m.windows(2).enumerate() {
            let (lines, width) = (&self.lines[i * n..(i + 1) * n], ends[1] - ends[0]);
            let (here, middle) = (lines[1 + contact], 0.5 * width);
            let above = lines[1..=contact].iter().map(|line| line.at(middle)).fold(f64::INFINITY, f64::min);
            if above - SAME_LEVEL_M <= here.at(middle) {
                continue;
            }
            let (a, b) = ([ends[0], here.at_left], [ends[1], here.at(width)]);
            match pieces.last_mut() {
                Some(piece) if piece.last().is_some_and(|last| distance(*last, a) <= SAME_LEVEL_M) => piece.push(b),
                _ => pieces.push(vec![a, b]),
            }
        }
        pieces.iter().map(|piece| without_collinear(piece)).collect()
    }
}

impl Line {
    fn at(&self, dx: f64) -> f64 {
        self.at_left + self.slope * dx
    }
}

/// The contact as a function over at least `from_m` to `to_m`.
fn contact_function(contact: &ContactLine, from_m: f64, to_m: f64) -> PiecewiseLinear {
    match contact {
        ContactLine::Level(z) => PiecewiseLinear::through(&[[from_m, *z], [to_m, *z]]),
        ContactLine::Dip { x_m, z_m, dip_seaward_rad } => {
            // Dipping toward the sea: the level falls with falling x.
            let at = |x: f64| [x, z_m + (x - x_m) * dip_seaward_rad.tan()];
            PiecewiseLinear::through(&[at(from_m), at(to_m)])
        }
        ContactLine::Points(points) => {
            let (first, last) = (points[0], points[points.len() - 1]);
            let mut all = points.clone();
            all.insert(0, [from_m.min(first[0]) - 1.0, first[1]]);
            all.push([to_m.max(last[0]) + 1.0, last[1]]);
            PiecewiseLinear::through(&all)
        }
    }
}

/// Places between neighbors of `x_m` at which two contacts cross.
fn crossings(contacts: &[PiecewiseLinear], x_m: &[f64]) -> Vec<f64> {
    let mut list = Vec::new();
    for ends in x_m.windows(2) {
        let levels: Vec<[f64; 2]> = contacts.iter().map(|c| [c.value(ends[0]), c.value(ends[1])]).collect();
        for (j, upper) in levels.iter().enumerate() {
            for lower in &levels[..j] {
                let gap = [upper[0] - lower[0], upper[1] - lower[1]];
                if gap[0] * gap[1] < 0.0 {
                    list.push(ends[0] + gap[0] / (gap[0] - gap[1]) * (ends[1] - ends[0]));
                }
            }
        }
    }
    list
}

fn sort_distinct(x: &mut Vec<f64>) {
    x.sort_by(f64::total_cmp);
    x.dedup_by(|a, b| (*a - *b).abs() <= 1e-9);
}

fn without_collinear(piece: &[Point]) -> Vec<Point> {
    let mut kept = vec![piece[0]];
    for triple in piece.windows(3) {
        let (a, b, c) = (kept[kept.len() - 1], triple[1], triple[2]);
        let on_chord = a[1] + (b[0] - a[0]) / (c[0] - a[0]) * (c[1] - a[1]);
        if SAME_LEVEL_M < (on_chord - b[1]).abs() {
            kept.push(b);
        }
    }
    kept.push(piece[piece.len() - 1]);
    kept
}
