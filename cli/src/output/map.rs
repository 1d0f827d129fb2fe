//! What goes on a map: the section's results as lines and areas in the user's own grid.
//!
//! [`Outcome`] and place of the mark in, [`MapFeature`]s in grid coordinates out; [`super::geojson`] turns them into longitude and
//! latitude, a GeoPackage keeps them as they are.
pub mod crs;

use checker::model::CrsLocation;
use checker::outcome::{Outcome, OutlookInfo};
use serde_json::{Map, Value, json};

/// Half length of cliff drawn where the file does not say what the section stands for, m.
const ASSUMED_HALF_LENGTH_M: f64 = 5.0;

/// A line or an area.
#[derive(Debug, Clone, PartialEq)]
pub enum MapShape {
    /// Points of a line, `[easting, northing]`, m.
    Line(Vec<[f64; 2]>),
    /// Outer ring of an area, counterclockwise and closed, `[easting, northing]`, m.
    Area(Vec<[f64; 2]>),
}

impl MapShape {
    /// Its points.
    pub fn points_m(&self) -> &[[f64; 2]] {
        match self {
            Self::Line(points) | Self::Area(points) => points,
        }
    }
}

/// One feature with its attributes.
#[derive(Debug, Clone, PartialEq)]
pub struct MapFeature {
    /// What it is, a stable word: `section line`, `brow today`, …
    pub kind: &'static str,
    /// Geometry.
    pub shape: MapShape,
    /// Attributes.
    pub properties: Map<String, Value>,
}

/// Section coordinates to grid coordinates.
///
/// ```text
/// E = E_0 + x sin b + s cos b,   N = N_0 + x cos b - s sin b
/// ```
///
/// with `b` the grid bearing of the landward direction, `x` the distance from the mark and `s` that to the right, seen from the sea.
/// Grid lengths are taken as ground lengths: a grid's scale factor (0.9996 in UTM) is 2 cm over 50 m.
pub fn to_grid(location: &CrsLocation, x_m: f64, right_m: f64) -> [f64; 2] {
    let (sin, cos) = location.landward_grid_bearing_rad.sin_cos();
    [location.origin_easting_m + x_m * sin + right_m * cos, location.origin_northing_m + x_m * cos - right_m * sin]
}

/// All features of one section's results.
pub fn features(outcome: &Outcome, outlook: Option<&OutlookInfo>, location: &CrsLocation) -> Vec<MapFeature> {
    let [left, right] = location.represents_m.unwrap_or([ASSUMED_HALF_LENGTH_M; 2]);
    let section = &outcome.section;
    let brow_x = section.brow[0];
    let foot_x = section.mouth.map_or(brow_x, |mouth| mouth[0]);
    let across = |x: f64| vec![to_grid(location, x, -left), to_grid(location, x, right)];
    // Seen from above with x landward and s to the right, seaward-left, seaward-right, landward-right, landward-left runs
    // counterclockwise: right of a landward view is clockwise from it.
    let strip = |from: f64, to: f64| {
        let corners = [(from, -left), (from, right), (to, right), (to, -left), (from, -left)];
        MapShape::Area(corners.iter().map(|&(x, s)| to_grid(location, x, s)).collect())
    };
    let mut base = Map::new();
    base.insert("section".into(), json!(outcome.model.title));
    base.insert("length_assumed".into(), json!(location.represents_m.is_none()));
    let mut all = Vec::new();
    let mut add = |kind, shape, own: Value| {
        let mut properties = base.clone();
        properties.insert("kind".into(), json!(kind));
        if let Value::Object(own) = own {
            properties.extend(own);
        }
        all.push(MapFeature { kind, shape, properties });
    };

    let keep_out_m = outcome.below.keep_out_m;
    let ends = section_ends(outcome, outlook, foot_x - keep_out_m);
    add("section line", MapShape::Line(ends.map(|x| to_grid(location, x, 0.0)).to_vec()), json!({}));
    add("brow today", MapShape::Line(across(brow_x)), json!({}));
    if let Some(depths) = &outcome.critical_depth {
        for (inputs, depth) in [("cautious", &depths.cautious), ("best estimate", &depths.best_estimate)] {
            if let Some(lost) = depth.ground_lost_m {
                let own = json!({"inputs": inputs, "ground_lost_m": lost, "critical_depth_m": depth.depth_m, "check": depth.check});
                add("edge after collapse", MapShape::Line(across(brow_x + lost)), own);
            }
        }
    }
    for setback in outlook.iter().flat_map(|o| &o.setbacks) {
        let own = json!({"setback_m": setback.setback_m, "accepted": setback.accepted, "over_years": setback.over_years});
        add("setback line", MapShape::Line(across(brow_x + setback.setback_m)), own);
    }
    if let Some(setback_m) = outlook.and_then(|o| o.setback_m).filter(|s| 0.0 < *s) {
        add("setback strip", strip(brow_x, brow_x + setback_m), json!({"setback_m": setback_m}));
    }
    if 0.0 < keep_out_m {
        let own = json!({"keep_out_m": keep_out_m, "basis": outcome.below.basis});
        add("keep-out below", strip(foot_x - keep_out_m, foot_x), own);
    }
    all
}

/// Ends of the section line: from the keep-out below to the farthest line behind the brow.
fn section_ends(outcome: &Outcome, outlook: Option<&OutlookInfo>, seaward_x: f64) -> [f64; 2] {
    let brow_x = outcome.section.brow[0];
    let lost = outcome.critical_depth.iter().flat_map(|d| [d.cautious.ground_lost_m, d.best_estimate.ground_lost_m]).flatten();
    let setbacks = outlook.iter().flat_map(|o| &o.setbacks).map(|s| s.setback_m);
    let farthest = lost.chain(setbacks).fold(0.0, f64::max);
    [seaward_x.min(brow_x), brow_x + farthest.max(outcome.section.cliff_height_m)]
}
