//! The section at one depth and what can be asked of it.
use std::sync::Arc;

use super::arc::{Point, between, distance};
use super::envelope::PiecewiseLinear;
use super::extent::Extents;
use super::features::{Feature, Features};
use super::path::{Path, Segment, contains};
use super::strata::Strata;

/// What does not change with the depth.
#[derive(Debug)]
pub(crate) struct Shared {
    pub(crate) extents: Extents,
    pub(crate) strata: Strata,
    /// Highest present surface at every x.
    pub(crate) ground: PiecewiseLinear,
    /// Rock of each layer.
    pub(crate) rocks: Vec<usize>,
    pub(crate) cracks: Vec<Vec<Point>>,
    pub(crate) brow_m: Point,
    pub(crate) cliff_height_m: f64,
    /// Lip and back at the greatest searched depth: the stretch around which places stand densest at every depth.
    pub(crate) dense_m: [Point; 2],
}

/// What belongs to one depth.
#[derive(Debug, Clone)]
pub(crate) struct Parts {
    pub(crate) depth_m: f64,
    pub(crate) surface: Path,
    pub(crate) features: Features,
}

/// The section of the cliff at one undercut depth.
#[derive(Debug, Clone)]
pub struct Section {
    pub(crate) shared: Arc<Shared>,
    pub(crate) parts: Parts,
    boundary: Path,
}

/// A stretch of a contact inside the body.
#[derive(Debug, Clone, PartialEq)]
pub struct ContactPiece {
    /// Index of the contact = index of the layer above it.
    pub contact: usize,
    /// Its points with growing x, m.
    pub points_m: Vec<[f64; 2]>,
}

impl Section {
    pub(crate) fn new(shared: Arc<Shared>, parts: Parts) -> Self {
        let mut boundary = parts.surface.clone();
        let Extents { seaward_x_m, landward_x_m, base_z_m } = shared.extents;
        boundary.push([landward_x_m, base_z_m], None);
        boundary.push([seaward_x_m, base_z_m], None);
        boundary.push(parts.surface.points_m()[0], None);
        Self { shared, parts, boundary }
    }

    /// Undercut depth, m.
    pub fn depth_m(&self) -> f64 {
        self.parts.depth_m
    }

    /// The surface from the seaward to the landward side; rock lies on its right.
    pub fn surface(&self) -> &Path {
        &self.parts.surface
    }

    /// Indices of mouth, back, lip, brow and of the parts between them.
    pub fn features(&self) -> &Features {
        &self.parts.features
    }

    /// A point of the surface by its index, m.
    fn surface_point(&self, i: usize) -> Point {
        self.parts.surface.points_m()[i]
    }

    /// Back, m; `None` without a hollow.
    pub fn back_m(&self) -> Option<[f64; 2]> {
        self.parts.features.back.map(|back| self.surface_point(back))
    }

    /// Lip, m.
    pub fn lip_m(&self) -> [f64; 2] {
        self.surface_point(self.parts.features.lip)
    }

    /// Mouth, m.
    pub fn mouth_m(&self) -> [f64; 2] {
        self.surface_point(self.parts.features.mouth)
    }

    /// Brow, m.
    pub fn brow_m(&self) -> [f64; 2] {
        self.shared.brow_m
    }

    /// Brow minus mouth, m.
    pub fn cliff_height_m(&self) -> f64 {
        self.shared.cliff_height_m
    }

    /// Sides and base of the model.
    pub fn extents(&self) -> Extents {
        self.shared.extents
    }

    /// The body's closed boundary, clockwise: surface, landward side, base, seaward side; its last point is its first.
    pub fn boundary(&self) -> &Path {
        &self.boundary
    }

    /// Whether a point lies in the body.
    pub fn contains(&self, p: [f64; 2]) -> bool {
        contains(&self.boundary, p)
    }

    /// Highest level of the roof between two x, m; the lip's level without a hollow.
    fn highest_roof_m(&self, from_x_m: f64) -> f64 {
        let Some(back) = self.parts.features.back else { return self.lip_m()[1] };
        let (points, _) = self.parts.surface.slice(back, self.parts.features.lip).flattened(0.02);
        let mut highest = self.surface_point(back)[1];
        for pair in points.windows(2) {
            let (a, b) = (pair[0], pair[1]);
            let at_limit = (a[0] < from_x_m) != (b[0] < from_x_m);
            let cut = at_limit.then(|| between(a, b, (from_x_m - a[0]) / (b[0] - a[0])));
            highest =
                [Some(a), Some(b), cut].into_iter().flatten().filter(|p| from_x_m - 1e-12 <= p[0]).map(|p| p[1]).fold(highest, f64::max);
        }
        highest
    }

    /// Overhang thickness `h` at this depth, m: ground above the back less the highest roof point of the back half.
    ///
    /// Without a hollow: ground just landward of the lip less the lip.
    pub fn thickness_m(&self) -> f64 {
        let lip = self.lip_m();
        let Some(back) = self.back_m() else { return self.brow_m()[1].max(self.ground_level_m(lip[0])) - lip[1] };
        self.ground_level_m(back[0]) - self.highest_roof_m(lip[0] + 0.5 * self.parts.depth_m)
    }

    /// Highest level of the roof, m; the lip's without a hollow. Contacts above it belong to the cliff top.
    pub fn roof_level_m(&self) -> f64 {
        self.highest_roof_m(f64::NEG_INFINITY)
    }

    /// Highest present surface at x, m.
    pub fn ground_level_m(&self, x_m: f64) -> f64 {
        self.shared.ground.value(x_m)
    }

    /// Un-eroded surface at x, m: given, else the surveyed ground and level at the brow seaward of it; never below the present ground.
    pub fn uneroded_level_m(&self, x_m: f64) -> f64 {
        self.shared.strata.uneroded_m(x_m)
    }

    /// Number of layers of the model.
    pub fn n_layers(&self) -> usize {
        self.shared.strata.n_layers()
    }

    /// Layer at a point: the first, from the top down, whose lower contact is not above it.
    pub fn layer_at(&self, p: [f64; 2]) -> usize {
        self.shared.strata.layer_at(p)
    }

    /// Rock of a layer, as an index into the model's rocks.
    ///
    /// # Panics
    /// If there is no such layer.
    pub fn rock_of_layer(&self, layer: usize) -> usize {
        self.shared.rocks[layer]
    }

    /// Rock at a point.
    pub fn rock_at(&self, p: [f64; 2]) -> usize {
        self.rock_of_layer(self.layer_at(p))
    }

    /// Lowest of the contacts that bound a layer from below at x, m: where this layer and those above it end; `None` for the last.
    pub(crate) fn layer_base_m(&self, layer: usize, x_m: f64) -> Option<f64> {
        (layer + 1 < self.n_layers()).then(|| self.shared.strata.base_of_upper_m(layer, x_m))
    }

    /// Level of contact `contact` (the base of that layer) as drawn, whether a higher layer cuts it or not, m.
    pub fn contact_level_m(&self, contact: usize, x_m: f64) -> f64 {
        self.shared.strata.contact_m(contact, x_m)
    }

    /// Thickness of each layer in the vertical column between a point and the un-eroded surface, m, shape `[n_layers]`.
    ///
    /// Exact for the piecewise linear contacts, which are taken on through the eroded air. Zero above the un-eroded surface.
    pub fn overburden_m(&self, p: [f64; 2]) -> Vec<f64> {
        let mut thickness = vec![0.0; self.n_layers()];
        self.overburden_into(p, &mut thickness);
        thickness
    }

    /// [`Self::overburden_m`] without an allocation.
    ///
    /// # Panics
    /// If `thickness_m` has not one entry a layer.
    pub fn overburden_into(&self, p: [f64; 2], thickness_m: &mut [f64]) {
        assert!(thickness_m.len() == self.n_layers(), "{} entries for {} layers", thickness_m.len(), self.n_layers());
        self.shared.strata.overburden_into(p, thickness_m);
    }

    /// The feature on which a piece of the surface lies.
    pub fn feature_of(&self, segment: usize) -> Feature {
        self.parts.features.of_segment(segment)
    }

    /// The contacts that separate two layers, clipped to the body, from the top down and from sea to land.
    pub fn contact_lines(&self) -> Vec<ContactPiece> {
        let strata = &self.shared.strata;
        let pieces = (0..strata.n_contacts()).flat_map(|contact| strata.visible(contact).into_iter().map(move |points| (contact, points)));
        pieces
            .flat_map(|(contact, points)| self.inside_parts(&points).into_iter().map(move |points_m| ContactPiece { contact, points_m }))
            .collect()
    }

    /// The parts of a polyline inside the body.
    fn inside_parts(&self, points: &[Point]) -> Vec<Vec<Point>> {
        let mut parts: Vec<Vec<Point>> = Vec::new();
        for pair in points.windows(2) {
            for ends in self.cut_by_boundary(pair[0], pair[1]).windows(2) {
                if !self.contains(between(ends[0], ends[1], 0.5)) {
                    continue;
                }
                match parts.last_mut() {
                    Some(part) if part.last() == Some(&ends[0]) => part.push(ends[1]),
                    _ => parts.push(vec![ends[0], ends[1]]),
                }
            }
        }
        parts
    }

    /// A straight piece with the points in which it meets the boundary.
    fn cut_by_boundary(&self, a: Point, b: Point) -> Vec<Point> {
        let length = distance(a, b);
        let direction = [(b[0] - a[0]) / length, (b[1] - a[1]) / length];
        let hits = self.boundary.segments().flat_map(|segment: Segment| segment.line_hits(a, direction));
        let mut shares: Vec<f64> = hits.map(|(d, _)| d / length).filter(|t| 1e-12 < *t && *t < 1.0 - 1e-12).collect();
        shares.sort_by(f64::total_cmp);
        shares.dedup_by(|p, q| (*p - *q).abs() * length <= 1e-9);
        let inner = shares.into_iter().map(|t| between(a, b, t));
        std::iter::once(a).chain(inner).chain(std::iter::once(b)).collect()
    }
}
