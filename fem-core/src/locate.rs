//! Which element holds a point: a grid of buckets, then the inverse of the curved mapping.
use crate::element::{SIDES, element_points_m, interpolate, is_straight, jacobian_m};
use crate::mesh::Mesh;

/// A point found in the mesh.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Located {
    /// Element number.
    pub element: u32,
    /// Reference coordinates, inside the element also when the point lies a little outside.
    pub xi: [f64; 2],
    /// Distance in m from the point to the place of `xi`; 0 up to round-off inside.
    pub distance_m: f64,
}

/// Area coordinates above minus this count as inside, so that points on sides belong to both elements.
const INSIDE: f64 = 1e-9;

/// Index of a mesh for point location.
#[derive(Debug, Clone, PartialEq)]
pub struct Locator {
    origin_m: [f64; 2],
    cell_m: f64,
    n_x: usize,
    n_y: usize,
    starts: Vec<u32>,
    elements: Vec<u32>,
    boxes_m: Vec<[f64; 4]>,
}

impl Locator {
    /// Buckets of about one element each.
    pub fn new(mesh: &Mesh) -> Self {
        let boxes_m: Vec<[f64; 4]> = (0..mesh.triangles.len()).map(|e| bounding_box_m(&element_points_m(mesh, e))).collect();
        let all = boxes_m.iter().fold([f64::INFINITY, f64::INFINITY, f64::NEG_INFINITY, f64::NEG_INFINITY], |a, b| {
            [a[0].min(b[0]), a[1].min(b[1]), a[2].max(b[2]), a[3].max(b[3])]
        });
        let (width, height) = (all[2] - all[0], all[3] - all[1]);
        let cell_m = (width * height / boxes_m.len().max(1) as f64).sqrt().max(1e-9 * width.max(height));
        let count = |extent: f64| ((extent / cell_m) as usize + 1).min(1 << 14);
        let mut locator = Self {
            origin_m: [all[0], all[1]],
            cell_m,
            n_x: count(width),
            n_y: count(height),
            starts: Vec::new(),
            elements: Vec::new(),
            boxes_m,
        };
        locator.fill();
        locator
    }

    fn fill(&mut self) {
        let mut starts = vec![0u32; self.n_x * self.n_y + 1];
        for b in &self.boxes_m {
            self.for_cells(b, |cell| starts[cell + 1] += 1);
        }
        for i in 1..starts.len() {
            starts[i] += starts[i - 1];
        }
        let mut next = starts.clone();
        let mut elements = vec![0u32; starts[starts.len() - 1] as usize];
        for (e, b) in self.boxes_m.iter().enumerate() {
            self.for_cells(b, |cell| {
                elements[next[cell] as usize] = e as u32;
                next[cell] += 1;
            });
        }
        (self.starts, self.elements) = (starts, elements);
    }

    fn cell_of(&self, [x, y]: [f64; 2]) -> [usize; 2] {
        let index = |v: f64, o: f64, n: usize| ((v - o) / self.cell_m).clamp(0.0, (n - 1) as f64) as usize;
        [index(x, self.origin_m[0], self.n_x), index(y, self.origin_m[1], self.n_y)]
    }

    fn for_cells(&self, b: &[f64; 4], mut visit: impl FnMut(usize)) {
        let ([i0, j0], [i1, j1]) = (self.cell_of([b[0], b[1]]), self.cell_of([b[2], b[3]]));
        for j in j0..=j1 {
            for i in i0..=i1 {
                visit(j * self.n_x + i);
            }
        }
    }

    /// Elements whose boxes may meet the segment, ascending, each once.
    pub(crate) fn near_segment(&self, from_m: [f64; 2], to_m: [f64; 2]) -> Vec<u32> {
        let (low, high) = if from_m[1] <= to_m[1] { (from_m, to_m) } else { (to_m, from_m) };
        let rise = high[1] - low[1];
        let x_at = |y: f64| if rise <= 0.0 { low[0] } else { low[0] + (high[0] - low[0]) * ((y - low[1]) / rise).clamp(0.0, 1.0) };
        let mut found = Vec::new();
        for j in self.cell_of(low)[1]..=self.cell_of(high)[1] {
            // The part of the segment in this row of cells; the outermost rows reach to infinity.
            let bottom = if j == 0 { low[1] } else { self.origin_m[1] + j as f64 * self.cell_m };
            let top = if j + 1 == self.n_y { high[1] } else { self.origin_m[1] + (j + 1) as f64 * self.cell_m };
            let ends = if rise <= 0.0 { [low[0], high[0]] } else { [x_at(bottom), x_at(top)] };
            let (i0, i1) = (self.cell_of([ends[0].min(ends[1]), bottom])[0], self.cell_of([ends[0].max(ends[1]), bottom])[0]);
            for cell in (i0..=i1).map(|i| j * self.n_x + i) {
                found.extend_from_slice(&self.elements[self.starts[cell] as usize..self.starts[cell + 1] as usize]);
            }
        }
        found.sort_unstable();
        found.dedup();
        found
    }

    /// The element that holds the point, or the nearest one within `reach_m`; `None` farther away or at a point that is not finite.
    /// On a side the lowest element number wins.
    pub fn locate(&self, mesh: &Mesh, point_m: [f64; 2], reach_m: f64) -> Option<Located> {
        self.locate_where(mesh, point_m, reach_m, &|_| true)
    }

    /// The same among the elements of the listed regions only: which side of a contact a point is taken on.
    pub fn locate_in_regions(&self, mesh: &Mesh, point_m: [f64; 2], reach_m: f64, regions: &[u32]) -> Option<Located> {
        self.locate_where(mesh, point_m, reach_m, &|e| regions.contains(&mesh.regions[e as usize]))
    }

    /// The same among the elements that `take` accepts.
    pub fn locate_where(&self, mesh: &Mesh, point_m: [f64; 2], reach_m: f64, take: &dyn Fn(u32) -> bool) -> Option<Located> {
        if !(point_m[0].is_finite() && point_m[1].is_finite()) {
            return None;
        }
        let [i, j] = self.cell_of(point_m);
        let cell = j * self.n_x + i;
        for &e in &self.elements[self.starts[cell] as usize..self.starts[cell + 1] as usize] {
            if box_distance_m(&self.boxes_m[e as usize], point_m) <= 0.0 && take(e) {
                let points = element_points_m(mesh, e as usize);
                if let Some(xi) = inverse(&points, point_m).filter(|&xi| -INSIDE <= least_area_coordinate(xi)) {
                    return Some(clamped(e, &points, xi, point_m));
                }
            }
        }
        self.nearest(mesh, point_m, reach_m, take)
    }

    /// Nearest accepted element within `reach_m`, by the distance to its sides.
    fn nearest(&self, mesh: &Mesh, point_m: [f64; 2], reach_m: f64, take: &dyn Fn(u32) -> bool) -> Option<Located> {
        let mut best: Option<Located> = None;
        let mut radius_m = self.cell_m.min(reach_m);
        loop {
            let around = [point_m[0] - radius_m, point_m[1] - radius_m, point_m[0] + radius_m, point_m[1] + radius_m];
            let mut candidates = Vec::new();
            self.for_cells(&around, |cell| {
                candidates.extend_from_slice(&self.elements[self.starts[cell] as usize..self.starts[cell + 1] as usize]);
            });
            candidates.sort_unstable();
            candidates.dedup();
            for e in candidates.into_iter().filter(|&e| take(e)) {
                let limit = best.map_or(radius_m, |b| b.distance_m);
                if box_distance_m(&self.boxes_m[e as usize], point_m) <= limit {
                    let found = nearest_in_element(e, &element_points_m(mesh, e as usize), point_m);
                    let is_better = best.is_none_or(|b| found.distance_m < b.distance_m);
                    if found.distance_m <= radius_m && is_better {
                        best = Some(found);
                    }
                }
            }
            if best.is_some() || reach_m <= radius_m {
                return best;
            }
            radius_m = (2.0 * radius_m).min(reach_m);
        }
    }
}

/// Box of the Bézier control points, which holds the curved element: `[x_min, y_min, x_max, y_max]`.
fn bounding_box_m(points_m: &[[f64; 2]; 6]) -> [f64; 4] {
    let mut b = [f64::INFINITY, f64::INFINITY, f64::NEG_INFINITY, f64::NEG_INFINITY];
    let mut add = |p: [f64; 2]| b = [b[0].min(p[0]), b[1].min(p[1]), b[2].max(p[0]), b[3].max(p[1])];
    for [i, j, m] in SIDES {
        add(points_m[i]);
        add([0, 1].map(|k| 2.0 * points_m[m][k] - 0.5 * (points_m[i][k] + points_m[j][k])));
    }
    // Room for round-off of points on the sides.
    let room = 1e-9 * (b[2] - b[0]).max(b[3] - b[1]);
    [b[0] - room, b[1] - room, b[2] + room, b[3] + room]
}

fn box_distance_m(b: &[f64; 4], [x, y]: [f64; 2]) -> f64 {
    let (dx, dy) = ((b[0] - x).max(x - b[2]).max(0.0), (b[1] - y).max(y - b[3]).max(0.0));
    dx.hypot(dy)
}

fn least_area_coordinate(xi: [f64; 2]) -> f64 {
    xi[0].min(xi[1]).min(1.0 - xi[0] - xi[1])
}

/// Reference coordinates of a point by Newton's method, one step on straight sides; `None` when it leaves the neighborhood of the element.
fn inverse(points_m: &[[f64; 2]; 6], point_m: [f64; 2]) -> Option<[f64; 2]> {
    let straight = is_straight(points_m);
    let mut xi = [1.0 / 3.0, 1.0 / 3.0];
    for _ in 0..if straight { 1 } else { 25 } {
        let at = interpolate(points_m, xi);
        let (dx, dy) = (point_m[0] - at[0], point_m[1] - at[1]);
        let [[a, b], [c, d]] = jacobian_m(points_m, xi);
        let det = a * d - b * c;
        let step = [(d * dx - b * dy) / det, (a * dy - c * dx) / det];
        xi = [xi[0] + step[0], xi[1] + step[1]];
        let near = xi[0].abs() < 4.0 && xi[1].abs() < 4.0;
        if !near {
            return None;
        }
        if step[0].abs() + step[1].abs() < 1e-14 {
            break;
        }
    }
    Some(xi)
}

/// A point found inside up to round-off, with its coordinates put inside.
fn clamped(element: u32, points_m: &[[f64; 2]; 6], xi: [f64; 2], point_m: [f64; 2]) -> Located {
    let xi = [xi[0].clamp(0.0, 1.0), xi[1].clamp(0.0, 1.0)];
    let over = (xi[0] + xi[1] - 1.0).max(0.0);
    let xi = [xi[0] - 0.5 * over, xi[1] - 0.5 * over];
    Located { element, xi, distance_m: distance_m(points_m, xi, point_m) }
}

fn distance_m(points_m: &[[f64; 2]; 6], xi: [f64; 2], point_m: [f64; 2]) -> f64 {
    let at = interpolate(points_m, xi);
    (at[0] - point_m[0]).hypot(at[1] - point_m[1])
}

/// Nearest place of an element to a point: itself when inside, else the nearest point of a side.
fn nearest_in_element(element: u32, points_m: &[[f64; 2]; 6], point_m: [f64; 2]) -> Located {
    if let Some(xi) = inverse(points_m, point_m).filter(|&xi| -INSIDE <= least_area_coordinate(xi)) {
        return clamped(element, points_m, xi, point_m);
    }
    let on_side = |side: usize, s: f64| [[s, 0.0], [1.0 - s, s], [0.0, 1.0 - s]][side];
    let mut best = Located { element, xi: [0.0, 0.0], distance_m: f64::INFINITY };
    for side in 0..3 {
        let distance = |s: f64| distance_m(points_m, on_side(side, s), point_m);
        // The distance along a parabola has at most two minima: bracket by samples, then ternary search.
        let start = (0..=8).min_by(|&a, &b| distance(f64::from(a) / 8.0).total_cmp(&distance(f64::from(b) / 8.0))).unwrap_or(0);
        let (mut low, mut high) = ((f64::from(start) - 1.0).max(0.0) / 8.0, (f64::from(start) + 1.0).min(8.0) / 8.0);
        for _ in 0..60 {
            let (a, b) = (low + (high - low) / 3.0, high - (high - low) / 3.0);
            if distance(a) <= distance(b) { high = b } else { low = a }
        }
        let xi = on_side(side, 0.5 * (low + high));
        let d = distance_m(points_m, xi, point_m);
        if d < best.distance_m {
            best = Located { element, xi, distance_m: d };
        }
    }
    best
}

#[cfg(test)]
mod tests;
