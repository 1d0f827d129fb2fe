//! Where demands are taken at one depth: surface and contact segments, discs inside the rock, rupture lines.
use super::joints::{joint_paths, lean_rad};
use crate::analysis::samples::{Weighted, on_disc, on_segment};
use crate::demand::CheckKind;
use crate::model::{Model, Probe};
use crate::section::{Feature, FreeBody, Place, PlaceKind, Section};

/// Spacing of places on the surface, in averaging lengths.
const PLACE_SPACING: f64 = 0.5;
/// Most discs inside the rock.
const MOST_DISCS: f64 = 1500.0;
/// Lean of the rupture lines from the vertical, landward positive, degrees: first, last, step.
const LEANS_DEG: (f64, f64, f64) = (-15.0, 50.0, 2.5);
/// Starts of rupture lines: the back and roof points at these shares of the depth seaward of it.
const STARTS: [f64; 5] = [0.0, 0.05, 0.1, 0.15, 0.2];
/// A segment shorter than this share of the averaging length is flagged.
const SHORT: f64 = 0.5;

/// One place: what is averaged there and for which check.
#[derive(Debug, Clone, PartialEq)]
pub struct Target {
    /// Tension check; `None` for discs inside the rock.
    pub tension: Option<CheckKind>,
    /// Start of the segment or center of the disc, m.
    pub at_m: [f64; 2],
    /// Layer.
    pub layer: usize,
    /// Length averaged over, m.
    pub length_m: f64,
    /// Cut below half the averaging length.
    pub short: bool,
    /// Sample points.
    pub samples: Vec<Weighted>,
}

/// A rupture line and its pieces in the layers.
#[derive(Debug, Clone, PartialEq)]
pub struct TargetLine {
    /// End at the hollow, m.
    pub from_m: [f64; 2],
    /// End at the ground, m.
    pub to_m: [f64; 2],
    /// Layer and ends along the line of each piece, m.
    pub pieces: Vec<(usize, [f64; 2])>,
    /// Joint set whose path it is.
    pub set: Option<usize>,
    /// The body that it cuts off.
    pub body: FreeBody,
}

/// All targets of one depth.
#[derive(Debug, Clone, PartialEq)]
pub struct Geometry {
    /// Places.
    pub places: Vec<Target>,
    /// Area that a disc stands for, m2.
    pub cell_m2: f64,
    /// Rupture lines.
    pub lines: Vec<TargetLine>,
    /// Sample points and layer of each of the model's probes; `None` for one that lies in the hollow at this depth.
    pub probes: Vec<Option<(Vec<Weighted>, usize)>>,
}

impl Geometry {
    /// Targets of a section with a given averaging length, and the model's probes.
    pub fn new(section: &Section, model: &Model, averaging_length_m: f64, probes: &[Probe]) -> Self {
        let spacing = PLACE_SPACING * averaging_length_m;
        let mut places: Vec<Target> =
            section.surface_places(spacing).iter().filter_map(|p| surface_target(section, p, averaging_length_m)).collect();
        places.extend(section.contact_places(spacing).iter().filter_map(|p| surface_target(section, p, averaging_length_m)));
        let (discs, cell_m2) = discs(section, averaging_length_m);
        places.extend(discs);
        let probes = probes.iter().map(|p| probe_samples(section, p)).collect();
        let mut lines = rupture_lines(section, model);
        lines.extend(joint_paths(section, model, averaging_length_m));
        Self { places, cell_m2, lines, probes }
    }
}

/// Sample points of a probe: its point, or the segment that it averages over. A probe on the surface counts as inside.
fn probe_samples(section: &Section, probe: &Probe) -> Option<(Vec<Weighted>, usize)> {
    let on_surface = || section.boundary().nearest(probe.at_m).1 <= 1e-3;
    if !section.contains(probe.at_m) && !on_surface() {
        return None;
    }
    let Some((direction, length)) = probe.toward.zip(probe.over_m) else {
        return Some((vec![(probe.at_m, 1.0)], section.layer_at(probe.at_m)));
    };
    let middle = [0, 1].map(|k| probe.at_m[k] + 0.5 * length * direction[k]);
    Some((on_segment(probe.at_m, direction, length), section.layer_at(middle)))
}

/// The segment at a place of the surface or a contact.
fn surface_target(section: &Section, place: &Place, averaging_length_m: f64) -> Option<Target> {
    let length_m = averaging_length_m.min(place.available_m);
    if !(1e-3 * averaging_length_m < length_m) {
        return None;
    }
    let tension = match place.kind {
        PlaceKind::Surface(Feature::Ground) => CheckKind::CliffTopTension,
        PlaceKind::Surface(Feature::Platform | Feature::Floor) => return None,
        PlaceKind::Contact { above_roof: true, .. } if section.brow_m()[0] <= place.at_m[0] => CheckKind::CliffTopTension,
        PlaceKind::Surface(_) | PlaceKind::Contact { .. } => CheckKind::RoofTension,
    };
    let samples = on_segment(place.at_m, place.inward, length_m);
    let short = length_m < SHORT * averaging_length_m;
    Some(Target { tension: Some(tension), at_m: place.at_m, layer: place.layer, length_m, short, samples })
}

/// Discs on a grid around the hollow and through the overhang.
fn discs(section: &Section, diameter_m: f64) -> (Vec<Target>, f64) {
    let (lip, brow) = (section.lip_m(), section.brow_m());
    let back = section.back_m().unwrap_or(lip);
    let h = section.thickness_m();
    let low = section.mouth_m()[1].min(lip[1]) - 0.25 * h;
    let (x0, x1) = (lip[0].min(brow[0]) - 0.05 * h, back[0].max(brow[0]) + h);
    let high = section.ground_level_m(x1).max(brow[1]);
    let spacing = diameter_m.max(((x1 - x0) * (high - low) / MOST_DISCS).sqrt());
    let (nx, nz) = (((x1 - x0) / spacing).ceil() as usize, ((high - low) / spacing).ceil() as usize);
    let mut targets = Vec::new();
    for i in 0..nx {
        for k in 0..nz {
            let center = [x0 + (i as f64 + 0.5) * spacing, low + (k as f64 + 0.5) * spacing];
            if !section.contains(center) {
                continue;
            }
            let layer = section.layer_at(center);
            let inside = |p: [f64; 2]| section.contains(p) && section.layer_at(p) == layer;
            let samples = on_disc(center, diameter_m, &inside);
            // a disc that loses a quarter of its points is a surface place's business
            if 10 <= samples.len() {
                targets.push(Target { tension: None, at_m: center, layer, length_m: diameter_m, short: false, samples });
            }
        }
    }
    (targets, spacing * spacing)
}

/// Straight lines from the back and the innermost fifth of the roof to the ground: evenly spread leans and those of the joint sets.
fn rupture_lines(section: &Section, model: &Model) -> Vec<TargetLine> {
    let Some(back) = section.back_m() else { return Vec::new() };
    let starts =
        STARTS.iter().filter_map(|share| if *share <= 0.0 { Some(back) } else { roof_point(section, back[0] - share * section.depth_m()) });
    let n = ((LEANS_DEG.1 - LEANS_DEG.0) / LEANS_DEG.2).round() as usize;
    let mut leans: Vec<f64> = (0..=n).map(|k| (LEANS_DEG.0 + k as f64 * LEANS_DEG.2).to_radians()).collect();
    leans.extend(model.joint_sets.iter().filter_map(lean_rad));
    starts.flat_map(|start| leans.iter().filter_map(move |&lean| rupture_line(section, start, lean)).collect::<Vec<_>>()).collect()
}

/// The roof at an x, m.
pub fn roof_point(section: &Section, x_m: f64) -> Option<[f64; 2]> {
    let roof = section.features().points(Feature::Roof);
    let pieces = (*roof.start()..*roof.end()).map(|i| section.surface().segment(i));
    pieces.flat_map(|s| s.line_hits([x_m, 0.0], [0.0, 1.0])).map(|(z, _)| [x_m, z]).max_by(|a, b| a[1].total_cmp(&b[1]))
}

/// The straight line from a point of the hollow to the ground at a lean; `None` where it leaves the rock elsewhere.
pub fn rupture_line(section: &Section, start: [f64; 2], lean_rad: f64) -> Option<TargetLine> {
    let direction = [lean_rad.sin(), lean_rad.cos()];
    let clear = 1e-6 * section.cliff_height_m();
    let surface = section.surface();
    let hits = (0..surface.n_segments()).flat_map(|i| surface.segment(i).line_hits(start, direction).into_iter().map(move |(d, _)| (d, i)));
    let (distance, segment) = hits.filter(|(d, _)| clear < *d).min_by(|a, b| a.0.total_cmp(&b.0))?;
    let exits_on_top = matches!(section.feature_of(segment), Feature::Ground | Feature::Face);
    let middle = [start[0] + 0.5 * clear.max(1e-3 * distance) * direction[0], start[1] + 0.5 * clear.max(1e-3 * distance) * direction[1]];
    if !exits_on_top || !section.contains(middle) {
        return None;
    }
    line_between(section, start, [start[0] + distance * direction[0], start[1] + distance * direction[1]])
}

/// A line between two points of the surface, cut into its pieces in the layers.
pub fn line_between(section: &Section, from_m: [f64; 2], to_m: [f64; 2]) -> Option<TargetLine> {
    let length = (to_m[0] - from_m[0]).hypot(to_m[1] - from_m[1]);
    if !(0.0 < length) {
        return None;
    }
    let at = |s: f64| [from_m[0] + s / length * (to_m[0] - from_m[0]), from_m[1] + s / length * (to_m[1] - from_m[1])];
    let mut cuts = vec![0.0];
    cuts.extend(contact_crossings(section, from_m, to_m));
    cuts.push(length);
    cuts.sort_by(f64::total_cmp);
    cuts.dedup_by(|a, b| (*a - *b).abs() < 1e-6 * length);
    let mut pieces: Vec<(usize, [f64; 2])> = Vec::new();
    for pair in cuts.windows(2) {
        let layer = section.layer_at(at(0.5 * (pair[0] + pair[1])));
        match pieces.last_mut() {
            Some(last) if last.0 == layer => last.1[1] = pair[1],
            _ => pieces.push((layer, [pair[0], pair[1]])),
        }
    }
    Some(TargetLine { from_m, to_m, pieces, set: None, body: section.free_body([from_m, to_m]) })
}

/// Distances along a line at which it crosses a contact.
fn contact_crossings(section: &Section, from_m: [f64; 2], to_m: [f64; 2]) -> Vec<f64> {
    let d = [to_m[0] - from_m[0], to_m[1] - from_m[1]];
    let length = d[0].hypot(d[1]);
    let mut crossings = Vec::new();
    for piece in section.contact_lines() {
        for ends in piece.points_m.windows(2) {
            let e = [ends[1][0] - ends[0][0], ends[1][1] - ends[0][1]];
            let r = [ends[0][0] - from_m[0], ends[0][1] - from_m[1]];
            let det = d[0] * e[1] - d[1] * e[0];
            let (t, u) = ((r[0] * e[1] - r[1] * e[0]) / det, (r[0] * d[1] - r[1] * d[0]) / det);
            if 0.0 < t && t < 1.0 && 0.0 <= u && u <= 1.0 {
                crossings.push(t * length);
            }
        }
    }
    crossings
}

/// The longest part of a straight line inside the body, both ends in m; ends close to the surface are moved onto it.
pub fn clip_to_body(section: &Section, from_m: [f64; 2], to_m: [f64; 2]) -> Option<[[f64; 2]; 2]> {
    let length = (to_m[0] - from_m[0]).hypot(to_m[1] - from_m[1]);
    let direction = [0, 1].map(|k| (to_m[k] - from_m[k]) / length);
    // an end within a hundredth of the cliff height of the surface is meant to be on it
    let reach = 0.01 * section.cliff_height_m();
    let hits = section.boundary().segments().flat_map(|s| s.line_hits(from_m, direction)).map(|(d, _)| d);
    let mut cuts: Vec<f64> = hits.filter(|d| -reach <= *d && *d <= length + reach).collect();
    let near = |cuts: &[f64], d: f64| cuts.iter().any(|c| (c - d).abs() <= reach);
    for end in [0.0, length] {
        if !near(&cuts, end) {
            cuts.push(end);
        }
    }
    cuts.sort_by(f64::total_cmp);
    let at = |d: f64| [from_m[0] + d * direction[0], from_m[1] + d * direction[1]];
    let inside = cuts.windows(2).filter(|w| section.contains(at(0.5 * (w[0] + w[1]))));
    let longest = inside.max_by(|a, b| (a[1] - a[0]).total_cmp(&(b[1] - b[0])))?;
    (1e-9 < longest[1] - longest[0]).then(|| [at(longest[0]), at(longest[1])])
}
