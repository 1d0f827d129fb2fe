//! Resultants N, V, M on a straight cut: from node forces of a free body, and from stress along the line.
//!
//! Frame of a cut `from → to` of length `L`: `e` = unit vector from `to` to `from`; `n` = normal to the **left** of `from → to`; `η` = distance along
//! `e` from the middle. The stress on the face is the one that the material on the side of `n` exerts on the other side. A vertical cut
//! taken from the ground down has `e` upward and `n` landward. Source: docs/theory.md eq. (1.16).
use crate::crossing::{Piece, pieces};
use crate::locate::Locator;
use crate::mesh::Mesh;
use crate::quadrature::gauss_unit;

mod free_body;

pub use free_body::{CutLoads, FreeBody, FreeBodyError, free_body};

/// A straight cut.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Cut {
    /// Start, m; the face where a positive moment gives tension.
    pub from_m: [f64; 2],
    /// End, m.
    pub to_m: [f64; 2],
}

/// Forces and moment per metre of thickness on a cut.
#[derive(Debug, Clone, Copy, PartialEq, Default)]
pub struct Resultants {
    /// Normal force `N = ∫ n·σn ds`, N/m, tension positive.
    pub normal_n_per_m: f64,
    /// Shear force `V = ∫ e·σn ds`, N/m; positive where the side of `n` holds the other side up along `e`.
    pub shear_n_per_m: f64,
    /// Moment about the middle, `M = ∫ η n·σn ds`, N (N·m per m); positive with tension at `from`.
    pub moment_n: f64,
}

/// One place on a cut.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct CutPoint {
    /// Element number.
    pub element: u32,
    /// Reference coordinates in it.
    pub xi: [f64; 2],
    /// Coordinates, m.
    pub point_m: [f64; 2],
    /// Length that the point stands for, m.
    pub weight_m: f64,
    /// Distance from the middle toward `from`, m.
    pub eta_m: f64,
}

/// Places on a cut, fixed once per mesh.
#[derive(Debug, Clone, PartialEq)]
pub struct CutSampler {
    /// The cut.
    pub cut: Cut,
    /// Gauss points, three per piece in an element; parts outside the body have none.
    pub points: Vec<CutPoint>,
    /// Length inside the body, m.
    pub covered_m: f64,
}

impl Cut {
    /// Length, m.
    pub fn length_m(&self) -> f64 {
        (self.from_m[0] - self.to_m[0]).hypot(self.from_m[1] - self.to_m[1])
    }

    /// Unit vector from `to` to `from`.
    pub fn axis(&self) -> [f64; 2] {
        let length = self.length_m();
        [(self.from_m[0] - self.to_m[0]) / length, (self.from_m[1] - self.to_m[1]) / length]
    }

    /// Unit normal to the left of `from → to`.
    pub fn normal(&self) -> [f64; 2] {
        let [ex, ey] = self.axis();
        [ey, -ex]
    }

    /// Middle, m.
    pub fn middle_m(&self) -> [f64; 2] {
        [0.5 * (self.from_m[0] + self.to_m[0]), 0.5 * (self.from_m[1] + self.to_m[1])]
    }

    /// Coordinates `(ν, η)` of a point along `n` and `e`, origin in the middle, m.
    pub fn coordinates_m(&self, point_m: [f64; 2]) -> (f64, f64) {
        let (c, e, n) = (self.middle_m(), self.axis(), self.normal());
        let (dx, dy) = (point_m[0] - c[0], point_m[1] - c[1]);
        (dx * n[0] + dy * n[1], dx * e[0] + dy * e[1])
    }
}

impl Resultants {
    /// Resultants of a force `f` in N/m at a point.
    pub fn of_force(cut: &Cut, point_m: [f64; 2], f_n_per_m: [f64; 2]) -> Self {
        let (n, e) = (cut.normal(), cut.axis());
        let (nu, eta) = cut.coordinates_m(point_m);
        let (normal, shear) = (f_n_per_m[0] * n[0] + f_n_per_m[1] * n[1], f_n_per_m[0] * e[0] + f_n_per_m[1] * e[1]);
        Self { normal_n_per_m: normal, shear_n_per_m: shear, moment_n: eta * normal - nu * shear }
    }

    /// `self + factor · other`.
    #[must_use]
    pub fn plus(self, other: Self, factor: f64) -> Self {
        Self {
            normal_n_per_m: self.normal_n_per_m + factor * other.normal_n_per_m,
            shear_n_per_m: self.shear_n_per_m + factor * other.shear_n_per_m,
            moment_n: self.moment_n + factor * other.moment_n,
        }
    }

    /// Linear fibre stresses `N/L ± 6 M/L²` in Pa at `from` and at `to` of a cut of this length.
    pub fn fibre_stresses_pa(&self, length_m: f64) -> [f64; 2] {
        let (mean, bending) = (self.normal_n_per_m / length_m, 6.0 * self.moment_n / (length_m * length_m));
        [mean + bending, mean - bending]
    }
}

impl CutSampler {
    /// Gauss points in the piece of every element that the cut crosses.
    pub fn new(mesh: &Mesh, locator: &Locator, cut: Cut) -> Self {
        let inside = pieces(mesh, locator, (cut.from_m, cut.to_m), &|_| true);
        let length_m = cut.length_m();
        let rule = gauss_unit(3);
        let mut points = Vec::new();
        for Piece { start, end, element } in inside {
            let Some(element) = element else { continue };
            for &(x, weight) in &rule {
                let t = start + x * (end - start);
                let point_m = [0, 1].map(|k| cut.from_m[k] + t * (cut.to_m[k] - cut.from_m[k]));
                let Some(found) = locator.locate_where(mesh, point_m, 1e-2 * length_m, &|e| e == element) else { continue };
                let weight_m = weight * (end - start) * length_m;
                points.push(CutPoint { element, xi: found.xi, point_m, weight_m, eta_m: (0.5 - t) * length_m });
            }
        }
        let covered_m = points.iter().map(|p| p.weight_m).sum();
        Self { cut, points, covered_m }
    }

    /// Resultants of a stress field `[xx, yy, xy]` in Pa given at the points.
    pub fn resultants(&self, stress_pa: impl Fn(&CutPoint) -> [f64; 3]) -> Resultants {
        let (n, e) = (self.cut.normal(), self.cut.axis());
        let mut sum = Resultants::default();
        for point in &self.points {
            let t = crate::tensor::traction(stress_pa(point), n);
            let (normal, shear) = (t[0] * n[0] + t[1] * n[1], t[0] * e[0] + t[1] * e[1]);
            let part = Resultants { normal_n_per_m: normal, shear_n_per_m: shear, moment_n: normal * point.eta_m };
            sum = sum.plus(part, point.weight_m);
        }
        sum
    }

    /// Resultants of the recovered stress and, as their own error estimate, how far those of the raw stress are from them (absolute values).
    pub fn with_error(
        &self,
        recovered_pa: impl Fn(&CutPoint) -> [f64; 3],
        raw_pa: impl Fn(&CutPoint) -> [f64; 3],
    ) -> (Resultants, Resultants) {
        let recovered = self.resultants(recovered_pa);
        let d = recovered.plus(self.resultants(raw_pa), -1.0);
        let error = Resultants { normal_n_per_m: d.normal_n_per_m.abs(), shear_n_per_m: d.shear_n_per_m.abs(), moment_n: d.moment_n.abs() };
        (recovered, error)
    }
}

#[cfg(test)]
mod tests;
