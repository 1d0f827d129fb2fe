//! Reference systems of a grid: what is known without a database, how it turns into longitude and latitude, and how well.
//!
//! RFC 7946 knows longitude and latitude on WGS 84 only. Grids on a modern datum turn into it to a few centimetres and the drift of a
//! continent; a national datum of the last century needs a grid of shifts that is not shipped, and is metres out without it: each
//! system says so.
use proj4rs::{Proj, transform::transform};

/// A grid as the model file names it.
#[derive(Debug)]
pub struct Grid {
    projection: Proj,
    longitude_latitude: Proj,
    /// How well positions turn into WGS 84, in words.
    pub accuracy: &'static str,
    /// Number of the EPSG list, if the file names one.
    pub epsg: Option<u32>,
    /// Definition as text.
    pub definition: String,
}

/// Why a grid is refused.
#[derive(Debug, Clone, PartialEq, thiserror::Error)]
#[non_exhaustive]
pub enum GridError {
    /// Not among the systems known by number.
    #[error(
        "`{crs}` is not known by number; known are UTM zones (EPSG:326xx, 327xx, 258xx, 269xx), EPSG:283xx and 7846 to 7859 (MGA), 2154, 2157, 2193, 27700, 3763; any other can be written as a `+proj=…` text"
    )]
    Unknown {
        /// As written.
        crs: String,
    },
    /// A text that the projection library refuses.
    #[error("`{crs}` cannot be used: {reason}")]
    Refused {
        /// As written.
        crs: String,
        /// Why.
        reason: String,
    },
    /// Degrees instead of metres.
    #[error("`{crs}` counts in degrees or not in metres; the section needs a grid in metres")]
    NotMetres {
        /// As written.
        crs: String,
    },
    /// A position that has no longitude and latitude.
    #[error("easting {easting_m} m, northing {northing_m} m lies outside the grid")]
    Outside {
        /// Easting.
        easting_m: f64,
        /// Northing.
        northing_m: f64,
    },
}

const MODERN: &str = "modern datum: WGS 84 to better than about 1 m (drift of the continent), far below that relative to each other";
const OLD: &str = "national datum turned by 7 parameters without its grid of shifts: absolute position to about 5 m, distances unaffected";
const OWN: &str = "grid written as text: accuracy of its datum shift not known";

impl Grid {
    /// The grid of a model file's `crs`: `EPSG:nnnn` or a `+proj=…` text.
    ///
    /// # Errors
    /// A system that is not known, not metric, or refused by the projection library.
    pub fn new(crs: &str) -> Result<Self, GridError> {
        let (definition, accuracy, epsg) = define(crs).ok_or_else(|| GridError::Unknown { crs: crs.to_owned() })?;
        let refused = |e: proj4rs::errors::Error| GridError::Refused { crs: crs.to_owned(), reason: e.to_string() };
        let projection = Proj::from_proj_string(&definition).map_err(refused)?;
        let metric = !projection.is_latlong() && !projection.is_geocent() && (projection.to_meter() - 1.0).abs() < 1e-12;
        if !metric {
            return Err(GridError::NotMetres { crs: crs.to_owned() });
        }
        let longitude_latitude = Proj::from_proj_string("+proj=longlat +datum=WGS84 +no_defs").map_err(refused)?;
        Ok(Self { projection, longitude_latitude, accuracy, epsg, definition })
    }

    /// Longitude and latitude on WGS 84 of a grid position, degrees.
    ///
    /// # Errors
    /// A position outside the grid.
    pub fn longitude_latitude_deg(&self, [easting_m, northing_m]: [f64; 2]) -> Result<[f64; 2], GridError> {
        let outside = || GridError::Outside { easting_m, northing_m };
        let mut point = (easting_m, northing_m, 0.0);
        transform(&self.projection, &self.longitude_latitude, &mut point).map_err(|_| outside())?;
        let degrees = [point.0.to_degrees(), point.1.to_degrees()];
        if degrees.iter().all(|d| d.is_finite()) { Ok(degrees) } else { Err(outside()) }
    }
}

/// Definition, accuracy and number. Parameters are those of the EPSG list, from memory.
fn define(crs: &str) -> Option<(String, &'static str, Option<u32>)> {
    let text = crs.trim();
    if text.starts_with("+proj=") {
        return Some((text.to_owned(), OWN, None));
    }
    let (authority, number) = text.split_once(':')?;
    if !authority.eq_ignore_ascii_case("epsg") {
        return None;
    }
    let code: u32 = number.trim().parse().ok()?;
    let utm = |zone: u32, south: bool, datum: &str| {
        let hemisphere = if south { " +south" } else { "" };
        format!("+proj=utm +zone={zone}{hemisphere} {datum} +units=m +no_defs")
    };
    let grs80 = "+ellps=GRS80 +towgs84=0,0,0";
    let grid = |parameters: &str| format!("{parameters} {grs80} +units=m +no_defs");
    let modern = match code {
        32601..=32660 => utm(code - 32600, false, "+datum=WGS84"),
        32701..=32760 => utm(code - 32700, true, "+datum=WGS84"),
        25828..=25838 => utm(code - 25800, false, grs80),
        26901..=26923 => utm(code - 26900, false, grs80),
        28348..=28358 => utm(code - 28300, true, grs80),
        7846..=7859 => utm(code - 7800, true, grs80),
        2154 => grid("+proj=lcc +lat_0=46.5 +lon_0=3 +lat_1=49 +lat_2=44 +x_0=700000 +y_0=6600000"),
        2157 => grid("+proj=tmerc +lat_0=53.5 +lon_0=-8 +k=0.99982 +x_0=600000 +y_0=750000"),
        2193 => grid("+proj=tmerc +lat_0=0 +lon_0=173 +k=0.9996 +x_0=1600000 +y_0=10000000"),
        3763 => grid("+proj=tmerc +lat_0=39.66825833333333 +lon_0=-8.133108333333334 +k=1 +x_0=0 +y_0=0"),
        27700 => {
            let shift = "+towgs84=446.448,-125.157,542.06,0.15,0.247,0.842,-20.489";
            let grid = "+proj=tmerc +lat_0=49 +lon_0=-2 +k=0.9996012717 +x_0=400000 +y_0=-100000 +ellps=airy";
            return Some((format!("{grid} {shift} +units=m +no_defs"), OLD, Some(code)));
        }
        _ => return None,
    };
    Some((modern, MODERN, Some(code)))
}
