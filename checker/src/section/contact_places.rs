//! Places on both sides of the contacts inside the body.
use super::arc::{Point, between, distance, distance_to, left_normal};
use super::body::Section;
use super::extent::SEARCHED_IN_HEIGHTS;
use super::places::{Place, PlaceChain, PlaceKind, SELF_M, available_m, inner_obstacles};

/// Growth of the distance between places with their distance from the hollow.
const GROWTH: f64 = 0.15;
/// Largest distance above the mouth and below it, in cliff heights.
const LARGEST_IN_HEIGHTS: [f64; 2] = [1.0 / 30.0, 0.1];

impl Section {
    /// Places along every contact inside the body, one into each layer, from the face to 2 H behind the brow.
    ///
    /// The distance between them is `spacing_m + 0.15 x` the distance from the stretch between lip and deepest back, at most
    /// `max(spacing_m, H/30)`, below the mouth `max(spacing_m, H/10)`. They stand at the same coordinates at every depth.
    ///
    /// # Panics
    /// If `spacing_m` is not positive.
    pub fn contact_places(&self, spacing_m: f64) -> Vec<Place> {
        assert!(0.0 < spacing_m, "a spacing of {spacing_m} m");
        let points = self.surface().points_m();
        let seaward = points[self.features().lip..=self.features().brow].iter().map(|p| p[0]).fold(f64::INFINITY, f64::min);
        let landward = self.brow_m()[0] + SEARCHED_IN_HEIGHTS * self.cliff_height_m();
        let obstacles = inner_obstacles(self);
        let roof = self.roof_level_m();
        let mut places = Vec::new();
        for contact in 0..self.n_layers() - 1 {
            let stations = self.stations(contact, [seaward, landward], spacing_m);
            for (index, (at_m, normal)) in stations.into_iter().enumerate() {
                let sides = [(PlaceChain::AboveContact(contact), normal), (PlaceChain::BelowContact(contact), [-normal[0], -normal[1]])];
                for (chain, inward) in sides {
                    let inside = [at_m[0] + SELF_M * inward[0], at_m[1] + SELF_M * inward[1]];
                    if self.contains(at_m) && self.contains(inside) {
                        places.push(Place {
                            at_m,
                            inward,
                            layer: self.layer_at(inside),
                            kind: PlaceKind::Contact { contact, above_roof: roof < at_m[1] },
                            available_m: available_m(self, &obstacles, at_m, inward),
                            reentrant: false,
                            chain: (chain, index as u32),
                        });
                    }
                }
            }
        }
        places
    }

    /// Positions along a contact between two x, with the upward normal.
    fn stations(&self, contact: usize, [from_x, to_x]: [f64; 2], spacing_m: f64) -> Vec<(Point, Point)> {
        let mut stations = Vec::new();
        // Half a step, so that no place stands where the contact meets the face.
        let mut ahead = 0.5 * spacing_m;
        for points in self.shared.strata.visible(contact) {
            for pair in points.windows(2) {
                let Some([a, b]) = between_x([pair[0], pair[1]], from_x, to_x) else { continue };
                let (length, normal) = (distance(a, b), left_normal([a, b]));
                while ahead <= length {
                    let p = between(a, b, ahead / length);
                    stations.push((p, normal));
                    ahead += self.contact_step(p, spacing_m);
                }
                ahead -= length;
            }
        }
        stations
    }

    fn contact_step(&self, p: Point, spacing_m: f64) -> f64 {
        let largest = if self.mouth_m()[1] <= p[1] { LARGEST_IN_HEIGHTS[0] } else { LARGEST_IN_HEIGHTS[1] };
        (spacing_m + GROWTH * distance_to(self.shared.dense_m, p)).min(spacing_m.max(largest * self.cliff_height_m()))
    }
}

/// The part of a piece that grows in x between two x.
fn between_x([a, b]: [Point; 2], from_x: f64, to_x: f64) -> Option<[Point; 2]> {
    let share = |x: f64| ((x - a[0]) / (b[0] - a[0])).clamp(0.0, 1.0);
    let (t0, t1) = (share(from_x), share(to_x));
    (a[0] < b[0] && t0 < t1).then(|| [between(a, b, t0), between(a, b, t1)])
}
