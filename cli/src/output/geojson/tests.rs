use checker::model::CrsLocation;
use checker::outcome::{OutlookInfo, SetbackInfo};
use geojson::{FeatureCollection, GeoJson, GeometryValue};

use super::super::fixture;
use super::super::map::crs::{Grid, GridError};
use super::super::map::{MapShape, features, to_grid};
use super::write;

fn location(crs: &str, easting_m: f64, northing_m: f64, bearing_deg: f64) -> CrsLocation {
    CrsLocation {
        crs: crs.into(),
        origin_easting_m: easting_m,
        origin_northing_m: northing_m,
        landward_grid_bearing_rad: bearing_deg.to_radians(),
        represents_m: Some([30.0, 20.0]),
    }
}

fn outlook() -> OutlookInfo {
    let setback = |accepted, setback_m| SetbackInfo { accepted, over_years: 50.0, setback_m };
    OutlookInfo { setbacks: vec![setback(1e-2, 14.0), setback(1e-3, 21.5)], setback_m: Some(21.5), ..OutlookInfo::default() }
}

fn read(location: &CrsLocation) -> FeatureCollection {
    let outcome = fixture::outcome();
    let features = features(&outcome, Some(&outlook()), location);
    let grid = Grid::new(&location.crs).unwrap();
    let text = write(&features, &grid, &outcome.program, &fixture::provenance()).unwrap();
    match text.parse::<GeoJson>().unwrap() {
        GeoJson::FeatureCollection(collection) => collection,
        other => unreachable!("{other:?}"),
    }
}

/// Positions computed with an independent projection library (version 9.5.1): six grids, two hemispheres. 1e-8 degrees is a millimetre.
#[test]
fn grids_turn_into_the_right_place() {
    for (crs, at, [longitude, latitude]) in [
        ("EPSG:32630", [401234.5, 5604321.25], [-4.395068054, 50.582439628]),
        ("EPSG:32760", [512345.0, 5012345.0], [177.156747252, -45.042242740]),
        ("EPSG:2154", [612345.6, 6856789.1], [1.806502513, 48.805214875]),
        ("EPSG:2157", [612345.6, 756789.1], [-7.813656984, 53.560866110]),
        ("EPSG:2193", [1612345.6, 5312345.6], [173.149872648, -42.341048016]),
        ("EPSG:3763", [-81234.5, -112345.6], [-9.066309561, 38.652582822]),
        ("epsg:28356", [334567.8, 6252345.6], [151.211715027, -33.856235412]),
        ("EPSG:25832", [461344.0, 5983219.0], [8.410333795, 53.995833357]),
        ("+proj=utm +zone=30 +datum=WGS84 +units=m", [401234.5, 5604321.25], [-4.395068054, 50.582439628]),
    ] {
        let found = Grid::new(crs).unwrap().longitude_latitude_deg(at).unwrap();
        let off = (found[0] - longitude).abs().max((found[1] - latitude).abs());
        assert!(off < 1e-8, "{crs}: {found:?}");
    }
    // The worked point of the national guide to 27700 (published: 651409.903, 313177.270); turned by seven parameters as that library does.
    let found = Grid::new("EPSG:27700").unwrap().longitude_latitude_deg([651409.903, 313177.270]).unwrap();
    assert!((found[0] - 1.716051990).abs() < 1e-7 && (found[1] - 52.657978599).abs() < 1e-7, "{found:?}");
    assert!(Grid::new("EPSG:27700").unwrap().accuracy.contains("5 m"));
}

#[test]
fn what_is_no_grid_is_refused() {
    let refused = |crs: &str| Grid::new(crs).unwrap_err();
    assert!(matches!(refused("EPSG:31467"), GridError::Unknown { .. }));
    assert!(matches!(refused("somewhere"), GridError::Unknown { .. }));
    assert!(matches!(refused("+proj=longlat +datum=WGS84"), GridError::NotMetres { .. }));
    assert!(matches!(refused("+proj=utm +zone=30 +datum=WGS84 +units=us-ft"), GridError::NotMetres { .. }));
    assert!(matches!(refused("+proj=nothing"), GridError::Refused { .. }));
    assert!(refused("EPSG:31467").to_string().contains("+proj="), "says what to do");
}

/// By hand: landward due east (bearing 90 degrees), 10 m landward and 4 m to the right is 10 m east and 4 m south.
#[test]
fn the_section_turns_with_its_bearing() {
    let [e, n] = to_grid(&location("EPSG:32630", 1000.0, 2000.0, 90.0), 10.0, 4.0);
    assert!((e - 1010.0).abs() < 1e-9 && (n - 1996.0).abs() < 1e-9);
    let [e, n] = to_grid(&location("EPSG:32630", 1000.0, 2000.0, 0.0), 10.0, 4.0);
    assert!((e - 1004.0).abs() < 1e-9 && (n - 2010.0).abs() < 1e-9, "landward north, right is east");
}

/// Rings closed and counterclockwise, longitude before latitude, no crs member, a box around everything (RFC 7946, published).
#[test]
fn the_file_keeps_to_its_standard() {
    for bearing in [0.0, 37.0, 145.0, 260.0] {
        let collection = read(&location("EPSG:32630", 401234.5, 5604321.25, bearing));
        let bbox = collection.bbox.clone().unwrap();
        assert!((bbox[0] + 4.395).abs() < 0.01 && (bbox[1] - 50.582).abs() < 0.01, "{bbox:?}");
        assert!(collection.foreign_members.as_ref().unwrap().get("crs").is_none());
        let mut areas = 0;
        for feature in &collection.features {
            assert!(feature.property("position_accuracy").is_some() && feature.property("kind").is_some());
            if let GeometryValue::Polygon { coordinates } = &feature.geometry.as_ref().unwrap().value {
                areas += 1;
                let ring: Vec<[f64; 2]> = coordinates[0].iter().map(|p| [p.as_slice()[0], p.as_slice()[1]]).collect();
                assert_eq!(ring.first(), ring.last());
                // Relative to its first corner: the ring is tiny beside its distance from the origin.
                let from = |p: [f64; 2]| [p[0] - ring[0][0], p[1] - ring[0][1]];
                let twice: f64 = ring.windows(2).map(|p| (from(p[0]), from(p[1]))).map(|(a, b)| a[0] * b[1] - b[0] * a[1]).sum();
                assert!(0.0 < twice, "bearing {bearing}: the ring runs clockwise");
            }
        }
        assert_eq!(areas, 2, "setback strip and keep-out");
    }
}

/// Lengths on the ellipsoid: the setback line lies 21.5 m behind the brow and both are 50 m long, within the grid's 0.04 % and a
/// millimetre of rounding. Metres a degree from the radii of curvature of WGS 84 (published values of its axes).
#[test]
fn distances_are_those_of_the_section() {
    let collection = read(&location("EPSG:32630", 401234.5, 5604321.25, 145.0));
    let line = |kind: &str, accepted: Option<f64>| {
        let own = |f: &&geojson::Feature| {
            f.property("kind").and_then(|k| k.as_str()) == Some(kind)
                && accepted.is_none_or(|p| f.property("accepted").and_then(serde_json::Value::as_f64) == Some(p))
        };
        let feature = collection.features.iter().find(own).unwrap();
        let GeometryValue::LineString { coordinates } = &feature.geometry.as_ref().unwrap().value else { unreachable!("a line") };
        coordinates.iter().map(|p| [p.as_slice()[0], p.as_slice()[1]]).collect::<Vec<_>>()
    };
    let metres = |a: [f64; 2], b: [f64; 2]| {
        let (major, e2) = (6378137.0_f64, 0.00669437999014);
        let latitude = a[1].to_radians();
        let w = (1.0 - e2 * latitude.sin().powi(2)).sqrt();
        let east = (b[0] - a[0]).to_radians() * major / w * latitude.cos();
        let north = (b[1] - a[1]).to_radians() * major * (1.0 - e2) / w.powi(3);
        east.hypot(north)
    };
    let (brow, setback) = (line("brow today", None), line("setback line", Some(1e-3)));
    for (length, expected) in
        [(metres(brow[0], brow[1]), 50.0), (metres(setback[0], setback[1]), 50.0), (metres(brow[0], setback[0]), 21.5)]
    {
        assert!((length - expected).abs() < 4e-4 * expected + 2e-3, "{length} m against {expected} m");
    }
}

#[test]
fn without_a_length_it_says_that_one_was_assumed() {
    let unknown = CrsLocation { represents_m: None, ..location("EPSG:32630", 401234.5, 5604321.25, 0.0) };
    let found = features(&fixture::outcome(), None, &unknown);
    assert!(found.iter().all(|f| f.properties["length_assumed"] == true));
    assert!(found.iter().any(|f| f.kind == "edge after collapse") && found.iter().all(|f| f.kind != "setback line"));
    let brow = found.iter().find(|f| f.kind == "brow today").unwrap();
    assert!(matches!(&brow.shape, MapShape::Line(points) if points.len() == 2));
}
