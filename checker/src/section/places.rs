//! Places on the surface at which demands are taken. They follow from the geometry alone, never from a mesh.
use super::arc::{Point, distance, turn_rad, unit};
use super::body::Section;
use super::extent::SEARCHED_IN_HEIGHTS;
use super::features::Feature;
use super::path::{OnPath, Segment};

/// A corner that turns by more than this has the bisector as its normal, rad (20 degrees).
const CORNER_RAD: f64 = 0.349_065_850_398_865_9;
/// Growth of the distance between places from one to the next, as a share of the smallest distance.
const GROWTH: f64 = 0.15;
/// Largest distance between places of face and ground, in cliff heights.
const LARGEST_IN_HEIGHTS: f64 = 1.0 / 40.0;
/// Largest distance between places of the roof, in smallest distances.
const LARGEST_ON_ROOF: f64 = 3.0;
/// Crossings nearer than this belong to the place itself, m.
pub(crate) const SELF_M: f64 = 1e-6;

/// What a place lies on.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum PlaceKind {
    /// The surface.
    Surface(Feature),
    /// One side of a contact.
    Contact {
        /// Index of the contact.
        contact: usize,
        /// Whether it lies above the highest point of the roof.
        above_roof: bool,
    },
}

/// The chain of places to which a place belongs; the same chain and index name the same place at every depth, on face, ground
/// and contacts with the same coordinates, on the roof with the same distance from the lip or from the back.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub enum PlaceChain {
    /// From the brow landward.
    Ground,
    /// From the lip up to the brow.
    Face,
    /// Without a hollow: from where the lip would be down to the mouth.
    Foot,
    /// From the lip inward.
    FromLip,
    /// From the back seaward along the roof.
    FromBack,
    /// From the back seaward along the floor, as far as the back reaches.
    BelowBack,
    /// Upper side of a contact.
    AboveContact(usize),
    /// Lower side of a contact.
    BelowContact(usize),
}

/// A place at which stress is averaged from the surface or contact inward.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Place {
    /// Position, m.
    pub at_m: [f64; 2],
    /// Unit normal into the rock, at a corner the bisector.
    pub inward: [f64; 2],
    /// Layer into which the normal leads.
    pub layer: usize,
    /// What it lies on.
    pub kind: PlaceKind,
    /// Length along the normal up to the next contact, crack, surface or side, m.
    pub available_m: f64,
    /// Whether it is a sharp corner with more than 180 degrees of rock, where point stresses have no limit.
    pub reentrant: bool,
    /// Chain and index in it.
    pub chain: (PlaceChain, u32),
}

/// Straight pieces that end an averaging segment besides the boundary.
pub(crate) fn inner_obstacles(section: &Section) -> Vec<[Point; 2]> {
    let contacts = section.contact_lines().into_iter().map(|piece| piece.points_m);
    let all = contacts.chain(section.shared.cracks.iter().cloned());
    all.flat_map(|points| points.windows(2).map(|pair| [pair[0], pair[1]]).collect::<Vec<_>>()).collect()
}

/// Length from `p` along `inward` up to the boundary or an obstacle, m.
pub(crate) fn available_m(section: &Section, obstacles: &[[Point; 2]], p: Point, inward: Point) -> f64 {
    let inner = obstacles.iter().map(|&[from_m, to_m]| Segment { from_m, to_m, arc: None });
    let hits = section.boundary().segments().chain(inner).flat_map(|piece| piece.line_hits(p, inward));
    hits.map(|(d, _)| d).filter(|d| SELF_M < *d).fold(f64::INFINITY, f64::min)
}

/// A range of the surface to be covered: from one length to another, measured along the surface.
struct Chain {
    name: PlaceChain,
    from_m: f64,
    to_m: f64,
    largest_m: f64,
}

impl Section {
    /// Places on ground (from the brow to 2 H behind it), face, lip, roof and back, at most about `spacing_m` apart where it matters.
    ///
    /// The distance is `spacing_m` at brow, lip and back and grows by 15 % of it from place to place, on the roof up to
    /// 3 `spacing_m`, on face and ground up to `max(spacing_m, H/40)`. A corner of more than 20 degrees within half a step of a
    /// place takes its part.
    ///
    /// # Panics
    /// If `spacing_m` is not positive.
    pub fn surface_places(&self, spacing_m: f64) -> Vec<Place> {
        assert!(0.0 < spacing_m, "a spacing of {spacing_m} m");
        let lengths = self.surface().lengths_m();
        let obstacles = inner_obstacles(self);
        let corners = self.corners();
        let mut places = Vec::new();
        for chain in self.chains(&lengths, spacing_m) {
            let sign = (chain.to_m - chain.from_m).signum();
            let (mut done, mut index) = (0.0, 0_u32);
            while done <= (chain.to_m - chain.from_m).abs() {
                let step = (spacing_m * (1.0 + GROWTH * f64::from(index))).min(chain.largest_m);
                let at = self.surface().at_length(&lengths, chain.from_m + sign * done);
                let at = snapped(&corners, &lengths, chain.from_m + sign * done, 0.5 * step)
                    .map_or(at, |vertex| OnPath { segment: vertex, share: 0.0 });
                if let Some(place) = self.surface_place(at, (chain.name, index), &obstacles) {
                    places.push(place);
                }
                done += step;
                index += 1;
            }
        }
        let mut distinct: Vec<Place> = Vec::with_capacity(places.len());
        for place in places {
            if distinct.iter().all(|other| SELF_M < distance(other.at_m, place.at_m)) {
                distinct.push(place);
            }
        }
        distinct
    }

    /// The stretches of the surface that carry places at this depth.
    fn chains(&self, lengths: &[f64], spacing_m: f64) -> Vec<Chain> {
        let marks = *self.features();
        let large = spacing_m.max(LARGEST_IN_HEIGHTS * self.cliff_height_m());
        let behind = self.brow_m()[0] + SEARCHED_IN_HEIGHTS * self.cliff_height_m();
        let points = self.surface().points_m();
        let last = (marks.brow..marks.end).find(|&i| behind <= points[i + 1][0]);
        let ground_end = last.map_or(lengths[marks.end], |i| {
            let share = (behind - points[i][0]) / (points[i + 1][0] - points[i][0]);
            lengths[i] + share * (lengths[i + 1] - lengths[i])
        });
        let chain = |name, from_m, to_m, largest_m| Chain { name, from_m, to_m, largest_m };
        let mut chains = vec![
            chain(PlaceChain::Ground, lengths[marks.brow], ground_end, large),
            chain(PlaceChain::Face, lengths[marks.lip], lengths[marks.brow], large),
        ];
        let Some(back) = marks.back else {
            chains.push(chain(PlaceChain::Foot, lengths[marks.lip], lengths[marks.mouth], large));
            return chains;
        };
        let middle = 0.5 * (lengths[back] + lengths[marks.lip]);
        let roof = LARGEST_ON_ROOF * spacing_m;
        chains.push(chain(PlaceChain::FromLip, lengths[marks.lip], middle, roof));
        chains.push(chain(PlaceChain::FromBack, lengths[back], middle, roof));
        chains.push(chain(PlaceChain::BelowBack, lengths[back], lengths[*marks.points(Feature::Back).start()], roof));
        chains
    }

    /// Points of the surface that turn by more than [`CORNER_RAD`].
    fn corners(&self) -> Vec<usize> {
        (1..self.surface().n_segments()).filter(|&i| CORNER_RAD < self.turn_at(i).abs()).collect()
    }

    /// Turn of the walk at a point, rad; positive = more than 180 degrees of rock.
    fn turn_at(&self, i: usize) -> f64 {
        turn_rad(self.surface().segment(i - 1).direction(1.0), self.surface().segment(i).direction(0.0))
    }

    fn surface_place(&self, at: OnPath, chain: (PlaceChain, u32), obstacles: &[[Point; 2]]) -> Option<Place> {
        let (i, n) = (at.segment, self.surface().n_segments());
        let at_point = at.share <= 0.0 && 0 < i && i < n;
        let into = |direction: Point| [direction[1], -direction[0]];
        let inward = if at_point {
            let (before, after) = (self.surface().segment(i - 1).direction(1.0), self.surface().segment(i).direction(0.0));
            into(unit([before[0] + after[0], before[1] + after[1]]))
        } else {
            into(self.surface().segment(i).direction(at.share))
        };
        let at_m = self.surface().point(at);
        let inside = [at_m[0] + SELF_M * inward[0], at_m[1] + SELF_M * inward[1]];
        self.contains(inside).then(|| Place {
            at_m,
            inward,
            layer: self.layer_at(inside),
            kind: PlaceKind::Surface(self.place_feature(at)),
            available_m: available_m(self, obstacles, at_m, inward),
            reentrant: at_point && CORNER_RAD < self.turn_at(i),
            chain,
        })
    }

    /// The feature of a place: brow to the ground, lip to the roof.
    fn place_feature(&self, at: OnPath) -> Feature {
        let marks = self.features();
        let is_lip = at.share <= 0.0 && at.segment == marks.lip && marks.back.is_some();
        if is_lip { Feature::Roof } else { self.feature_of(at.segment) }
    }
}

/// The corner that turns nearest to a length, within `reach_m`.
fn snapped(corners: &[usize], lengths: &[f64], at_m: f64, reach_m: f64) -> Option<usize> {
    let off = |i: usize| (lengths[i] - at_m).abs();
    corners.iter().copied().filter(|&i| off(i) <= reach_m).min_by(|&a, &b| off(a).total_cmp(&off(b)))
}
