//! Means of the stress over a segment or a disc: places and weights fixed once per mesh, applied to every load case.
use crate::crossing::{REACH, pieces};
use crate::elasticity::Elastic;
use crate::element::{element_displacements_m, element_points_m, mapped, strain};
use crate::locate::Locator;
use crate::mesh::Mesh;
use crate::quadrature::gauss_unit;
use crate::recovery::RecoveredLayout;

/// Least number of points on a segment.
const SEGMENT_POINTS: usize = 16;
/// Gauss points on each piece: exact to degree 5, recovered stress is quadratic along a line in a straight element.
const PIECE_POINTS: usize = 3;
/// Rings and rays of points in a disc.
const DISC_RINGS: usize = 6;
const DISC_RAYS: usize = 24;

/// Places and weights of a mean.
#[derive(Debug, Clone, PartialEq)]
pub struct Sampler {
    /// Element, reference coordinates, weight; the weights add up to 1.
    pub points: Vec<(u32, [f64; 2], f64)>,
    /// Share of the segment's length or the disc's area that lies in the accepted elements.
    pub covered: f64,
}

impl Sampler {
    /// Mean over the segment: Gauss points in the piece of every element crossed, at least 16 in all. Parts outside the body or in elements that
    /// `take` refuses are left out of the mean and of [`Sampler::covered`]. `None` when nothing is covered.
    pub fn segment(mesh: &Mesh, locator: &Locator, (from_m, to_m): ([f64; 2], [f64; 2]), take: &dyn Fn(u32) -> bool) -> Option<Self> {
        let reach_m = REACH * (to_m[0] - from_m[0]).hypot(to_m[1] - from_m[1]);
        let inside: Vec<_> = pieces(mesh, locator, (from_m, to_m), take).into_iter().filter(|p| p.element.is_some()).collect();
        let covered: f64 = inside.iter().map(|p| p.end - p.start).sum();
        let rule = gauss_unit(PIECE_POINTS);
        let mut points = Vec::new();
        for piece in &inside {
            // Pieces are split evenly so that there are at least 16 points in all, spread over the length.
            let wanted = SEGMENT_POINTS as f64 * (piece.end - piece.start) / (covered * PIECE_POINTS as f64);
            let n = wanted.ceil().max(1.0) as usize;
            let step = (piece.end - piece.start) / n as f64;
            for k in 0..n {
                for &(x, weight) in &rule {
                    let t = piece.start + (k as f64 + x) * step;
                    let p = [from_m[0] + t * (to_m[0] - from_m[0]), from_m[1] + t * (to_m[1] - from_m[1])];
                    let same = |e: u32| Some(e) == piece.element;
                    // On a curved side the point may just miss its piece's element.
                    let found = locator.locate_where(mesh, p, reach_m, &same).or_else(|| locator.locate_where(mesh, p, reach_m, take))?;
                    points.push((found.element, found.xi, weight * step / covered));
                }
            }
        }
        (!points.is_empty()).then_some(Self { points, covered })
    }

    /// Mean over the disc, clipped to the body and to the elements that `take` accepts. `None` when nothing is covered.
    ///
    /// Polar rule: Gauss in `r²` along rays, equal angles, so that every point stands for the same kind of area.
    pub fn disc(mesh: &Mesh, locator: &Locator, (center_m, radius_m): ([f64; 2], f64), take: &dyn Fn(u32) -> bool) -> Option<Self> {
        let mut points = Vec::with_capacity(DISC_RINGS * DISC_RAYS);
        let mut covered = 0.0;
        for (square, weight) in gauss_unit(DISC_RINGS) {
            for k in 0..DISC_RAYS {
                let angle = std::f64::consts::TAU * (k as f64 + 0.5) / DISC_RAYS as f64;
                let r = radius_m * square.sqrt();
                let w = weight / DISC_RAYS as f64;
                let p = [center_m[0] + r * angle.cos(), center_m[1] + r * angle.sin()];
                if let Some(found) = locator.locate_where(mesh, p, 1e-9 * radius_m, take) {
                    covered += w;
                    points.push((found.element, found.xi, w));
                }
            }
        }
        for point in &mut points {
            point.2 /= covered;
        }
        (!points.is_empty()).then_some(Self { points, covered })
    }

    /// Mean of the recovered stress `[xx, yy, xy]`, Pa.
    pub fn mean(&self, layout: &RecoveredLayout, values_pa: &[[f64; 3]]) -> [f64; 3] {
        self.mean_of(|element, xi| layout.evaluate(values_pa, element, xi))
    }

    /// Mean of the raw stress `D ε(u)`, Pa; [`Sampler::mean`] less this is the crudest estimate of the error of either.
    pub fn raw_mean(&self, mesh: &Mesh, materials: &[Elastic], displacements_m: &[f64]) -> [f64; 3] {
        self.mean_of(|element, xi| crate::stress::raw_stress_pa(mesh, materials, displacements_m, (element, xi)))
    }

    /// Mean of any tensor field given by element and reference coordinates.
    pub fn mean_of(&self, field: impl Fn(usize, [f64; 2]) -> [f64; 3]) -> [f64; 3] {
        let mut sum = [0.0; 3];
        for &(element, xi, weight) in &self.points {
            let value = field(element as usize, xi);
            sum = [sum[0] + weight * value[0], sum[1] + weight * value[1], sum[2] + weight * value[2]];
        }
        sum
    }

    /// Mean of a scalar of the tensor at each point, for means of pointwise principal values.
    pub fn mean_scalar(&self, field: impl Fn(usize, [f64; 2]) -> f64) -> f64 {
        self.points.iter().map(|&(element, xi, weight)| weight * field(element as usize, xi)).sum()
    }

    /// Load vector of the dual problem of the mean of `direction : σ_raw(u)`: `f = Σ w Bᵀ D direction`, shape `[2 * n_nodes]`, so that `f·u` is
    /// that mean in Pa. `direction` has tensor shear: `n ⊗ n` gives the mean normal stress on planes with normal `n`. Source: docs/theory.md eq. (1.15).
    pub fn dual_load(&self, mesh: &Mesh, materials: &[Elastic], direction: [f64; 3]) -> Vec<f64> {
        let mut load = vec![0.0; 2 * mesh.points_m.len()];
        for &(element, xi, weight) in &self.points {
            let element = element as usize;
            let at = mapped(&element_points_m(mesh, element), xi);
            let material = &materials[mesh.regions[element] as usize];
            // direction : D ε with tensor shear in `direction`: the shear stress counts twice.
            let stress = material.stress_pa([direction[0], direction[1], 2.0 * direction[2]]);
            for (&node, g) in mesh.triangles[element].iter().zip(&at.gradients_per_m) {
                load[2 * node as usize] += weight * (g[0] * stress[0] + g[1] * stress[2]);
                load[2 * node as usize + 1] += weight * (g[1] * stress[1] + g[0] * stress[2]);
            }
        }
        load
    }

    /// Mean strain `[ε_x, ε_y, γ_xy]` of a displacement field.
    pub fn mean_strain(&self, mesh: &Mesh, displacements_m: &[f64]) -> [f64; 3] {
        self.mean_of(|element, xi| {
            let at = mapped(&element_points_m(mesh, element), xi);
            strain(&at, &element_displacements_m(mesh, element, displacements_m))
        })
    }
}

#[cfg(test)]
mod tests;
