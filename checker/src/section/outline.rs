//! The body of a section as tagged lines for the mesher.
use mesher::{Arc, Line, Outline};

use super::arc::{Point, along, sub, unit};
use super::body::Section;
use super::crossing::CRACK_AT_SURFACE_M;
use super::features::{FEATURES, Feature};
use super::path::Path;

/// Numbers that the sides of a mesh carry.
pub mod tags {
    use super::Feature;

    /// Base of the model.
    pub const BASE: u32 = 10;
    /// Seaward side of the model.
    pub const SEAWARD_SIDE: u32 = 11;
    /// Landward side of the model.
    pub const LANDWARD_SIDE: u32 = 12;
    /// Contact 0; contact `j` is the base of layer `j` and has `CONTACT + j`.
    pub const CONTACT: u32 = 100;
    /// Crack 0; crack `k` has `CRACK + k`.
    pub const CRACK: u32 = 1000;

    /// Tag of a part of the surface.
    pub fn surface(feature: Feature) -> u32 {
        match feature {
            Feature::Platform => 0,
            Feature::Floor => 1,
            Feature::Back => 2,
            Feature::Roof => 3,
            Feature::Face => 4,
            Feature::Ground => 5,
        }
    }

    /// Whether a tag belongs to the surface of the rock.
    pub fn is_surface(tag: u32) -> bool {
        tag < BASE
    }
}

/// How far a crack that reaches the surface is drawn beyond it, m: the mesher drops what lies outside the body.
const CRACK_BEYOND_M: f64 = 2.0 * CRACK_AT_SURFACE_M;

impl Section {
    /// Lines of the body: one a part of the surface, sides, base, contacts, cracks (as slits), with the numbers of [`tags`].
    ///
    /// Contacts run from side to side and may stick out of the body.
    pub fn outline(&self) -> Outline {
        let mut lines = Vec::new();
        for feature in FEATURES {
            let range = self.features().points(feature);
            if range.start() < range.end() {
                lines.push(line(&self.surface().slice(*range.start(), *range.end()), tags::surface(feature)));
            }
        }
        let n = self.surface().n_segments();
        for (i, tag) in [tags::LANDWARD_SIDE, tags::BASE, tags::SEAWARD_SIDE].into_iter().enumerate() {
            lines.push(line(&self.boundary().slice(n + i, n + i + 1), tag));
        }
        for contact in 0..self.n_layers() - 1 {
            for points in self.shared.strata.visible(contact) {
                lines.push(Line::chain(points, tags::CONTACT + contact as u32));
            }
        }
        for (k, path) in self.shared.cracks.iter().enumerate() {
            lines.push(Line::slit(self.through_surface(path), tags::CRACK + k as u32));
        }
        Outline { lines }
    }

    /// Layer of a point of the body, as the region of a mesh; `None` outside.
    pub fn region(&self, p: [f64; 2]) -> Option<u32> {
        self.contains(p).then(|| self.layer_at(p) as u32)
    }

    /// A crack whose ends near the surface are drawn through it.
    fn through_surface(&self, crack: &[Point]) -> Vec<Point> {
        let mut path = crack.to_vec();
        for _ in 0..2 {
            path.reverse();
            let n = path.len();
            if 1 < n && self.surface().nearest(path[n - 1]).1 <= CRACK_AT_SURFACE_M {
                path[n - 1] = along(path[n - 1], unit(sub(path[n - 1], path[n - 2])), CRACK_BEYOND_M);
            }
        }
        path
    }
}

fn line(path: &Path, tag: u32) -> Line {
    let arcs = path.arcs().iter().map(|arc| arc.map(|arc| Arc { center_m: arc.center_m, radius_m: arc.radius_m })).collect();
    Line { arcs, ..Line::chain(path.points_m().to_vec(), tag) }
}
