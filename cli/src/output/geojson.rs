//! `map.geojson`: the map layer for display, longitude and latitude on WGS 84 (RFC 7946).
use geojson::{Feature, FeatureCollection, Geometry, GeometryValue, JsonObject, Position};
use serde_json::json;

use super::Provenance;
use super::map::crs::{Grid, GridError};
use super::map::{MapFeature, MapShape};
use checker::outcome::Program;

/// Decimals of a degree: a centimetre at the equator needs seven.
const DECIMALS: f64 = 1e8;

/// Why no map is written.
#[derive(Debug, Clone, PartialEq, thiserror::Error)]
#[non_exhaustive]
pub enum MapError {
    /// The grid.
    #[error(transparent)]
    Grid(#[from] GridError),
    /// A section on the line where longitudes jump.
    #[error("the section crosses 180 degrees of longitude, where this file would have to be cut")]
    CrossesDateLine,
}

/// The file's text.
///
/// Coordinates are `[longitude, latitude]`, rings closed and counterclockwise, no `crs` member, a `bbox` on the whole. Datum notes stand
/// as attributes of every feature.
///
/// # Errors
/// A position outside the grid, or a section on the 180th meridian.
pub fn write(features: &[MapFeature], grid: &Grid, program: &Program, provenance: &Provenance) -> Result<String, MapError> {
    let mut bounds = [f64::INFINITY, f64::INFINITY, f64::NEG_INFINITY, f64::NEG_INFINITY];
    let mut written = Vec::with_capacity(features.len());
    for feature in features {
        let mut points = Vec::new();
        for point in feature.shape.points_m() {
            let [longitude, latitude] = grid.longitude_latitude_deg(*point)?.map(|d| (d * DECIMALS).round() / DECIMALS);
            bounds = [bounds[0].min(longitude), bounds[1].min(latitude), bounds[2].max(longitude), bounds[3].max(latitude)];
            points.push(Position::from([longitude, latitude]));
        }
        let value = match feature.shape {
            MapShape::Line(_) => GeometryValue::new_line_string(points),
            MapShape::Area(_) => GeometryValue::new_polygon([points]),
        };
        let mut properties: JsonObject = feature.properties.clone();
        properties.insert("position_accuracy".into(), json!(grid.accuracy));
        written.push(Feature {
            bbox: None,
            geometry: Some(Geometry::new(value)),
            id: None,
            properties: Some(properties),
            foreign_members: None,
        });
    }
    if 180.0 < bounds[2] - bounds[0] {
        return Err(MapError::CrossesDateLine);
    }
    let mut about = JsonObject::new();
    let command = json!({"name": program.name, "version": program.version, "command": provenance.command, "seed": provenance.seed});
    about.insert("program".into(), command);
    let mut collection = FeatureCollection::new(written);
    collection.bbox = bounds[0].is_finite().then(|| bounds.to_vec());
    collection.foreign_members = Some(about);
    let mut text = collection.to_string();
    text.push('\n');
    Ok(text)
}

#[cfg(test)]
mod tests;
