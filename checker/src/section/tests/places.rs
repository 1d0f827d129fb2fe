//! Places of averaging.
use std::collections::BTreeMap;

use super::super::{Feature, Place, PlaceChain, PlaceKind, Site};
use super::{layer, near, near_point, plain_face, section, site, square_slot};
use crate::model::{BackShape, ContactLine, Crack};

fn at(places: &[Place], point: [f64; 2]) -> Place {
    *places
        .iter()
        .find(|place| (place.at_m[0] - point[0]).hypot(place.at_m[1] - point[1]) < 1e-9)
        .unwrap_or_else(|| panic!("no place at {point:?}"))
}

#[test]
fn corners_have_bisectors_and_only_reentrant_ones_are_singular() {
    let places = section(&square_slot(), 4.0).surface_places(0.4);
    let diagonal = std::f64::consts::FRAC_1_SQRT_2;
    let lip = at(&places, [0.0, 2.0]);
    near_point(lip.inward, [diagonal, diagonal], 1e-12);
    assert!(!lip.reentrant);
    assert_eq!(lip.kind, PlaceKind::Surface(Feature::Roof));
    let back = at(&places, [4.0, 2.0]);
    near_point(back.inward, [diagonal, diagonal], 1e-12);
    assert!(back.reentrant);
    let brow = at(&places, [0.0, 10.0]);
    near_point(brow.inward, [diagonal, -diagonal], 1e-12);
    assert_eq!(brow.kind, PlaceKind::Surface(Feature::Ground));
    // Along the bisector of the lip up to the ground: 8 m by sqrt 2.
    near(lip.available_m, 8.0 * 2.0_f64.sqrt(), 1e-9);
    assert!(places.iter().all(|p| p.at_m[0] <= 20.0 + 1e-9), "the ground is searched to 2 H behind the brow");
    assert!(places.iter().any(|p| 19.5 < p.at_m[0]));
}

#[test]
fn normals_point_into_rock_and_segments_end_at_contacts_and_cracks() {
    let mut model = square_slot();
    model.layers = vec![layer(Some(ContactLine::Level(9.7))), layer(Some(ContactLine::Level(2.3))), layer(None)];
    model.cracks.push(Crack { path_m: vec![[2.0, 10.0], [2.0, 9.0]] });
    let section = section(&model, 4.0);
    let places = section.surface_places(0.3);
    for place in &places {
        let inside = [place.at_m[0] + 1e-3 * place.inward[0], place.at_m[1] + 1e-3 * place.inward[1]];
        assert!(section.contains(inside), "{place:?}");
        assert_eq!(section.layer_at(inside), place.layer, "{place:?}");
        near(place.inward[0].hypot(place.inward[1]), 1.0, 1e-12);
        match place.kind {
            PlaceKind::Surface(Feature::Ground) if 0.1 < place.at_m[0] => near(place.available_m, 0.3, 1e-9),
            PlaceKind::Surface(Feature::Roof) if 0.1 < place.at_m[0] && place.at_m[0] < 3.9 => near(place.available_m, 0.3, 1e-9),
            PlaceKind::Surface(Feature::Face) if 9.1 < place.at_m[1] && place.at_m[1] < 9.65 => near(place.available_m, 2.0, 1e-9),
            _ => {}
        }
    }
    let contacts = section.contact_places(0.3);
    let upper: Vec<&Place> = contacts.iter().filter(|p| p.chain.0 == PlaceChain::BelowContact(0)).collect();
    assert!(upper.len() > 20);
    for place in &contacts {
        let inside = [place.at_m[0] + 1e-3 * place.inward[0], place.at_m[1] + 1e-3 * place.inward[1]];
        assert_eq!(section.layer_at(inside), place.layer, "{place:?}");
        near(place.inward[1].abs(), 1.0, 1e-12);
        let PlaceKind::Contact { above_roof, contact } = place.kind else { panic!("{place:?}") };
        assert!(above_roof, "both contacts lie above the roof at 2 m");
        let room = match (contact, place.inward[1] > 0.0) {
            (0, true) | (1, false) if place.at_m[0] < 4.0 => 0.3,
            (0, true) => 0.3,
            (1, false) => 32.3,
            _ => 7.4,
        };
        near(place.available_m, room, 1e-9);
    }
}

/// Positions by chain and index.
fn named(site: &Site, depth_m: f64) -> BTreeMap<(PlaceChain, u32), [f64; 2]> {
    let section = site.at_depth(depth_m).unwrap();
    let mut all = section.surface_places(0.3);
    all.extend(section.contact_places(0.3));
    let n = all.len();
    let map: BTreeMap<_, _> = all.into_iter().map(|place| (place.chain, place.at_m)).collect();
    assert_eq!(map.len(), n, "every name stands for one place");
    map
}

#[test]
fn places_keep_name_and_position_over_the_depths() {
    let mut model = plain_face(30.0, 2.0, BackShape::Round);
    model.layers = [Some(27.0), Some(15.0), Some(1.2), None].map(|z| layer(z.map(ContactLine::Level))).to_vec();
    let site = site(&model);
    let deep = named(&site, 6.0);
    for depth in [0.0, 0.7, 2.0, 5.99] {
        let other = named(&site, depth);
        for (name, position) in &other {
            let moves = matches!(name.0, PlaceChain::FromLip | PlaceChain::FromBack | PlaceChain::BelowBack | PlaceChain::Foot);
            if let Some(then) = deep.get(name).filter(|_| !moves) {
                near_point(*position, *then, 1e-9);
            }
        }
        let count = |map: &BTreeMap<(PlaceChain, u32), [f64; 2]>, chain| map.keys().filter(|name| name.0 == chain).count();
        for chain in [PlaceChain::Ground, PlaceChain::Face, PlaceChain::AboveContact(0), PlaceChain::BelowContact(1)] {
            assert_eq!(count(&other, chain), count(&deep, chain), "{chain:?} at {depth}");
        }
        // The third contact is cut by the hollow: its places there are gone, the others keep their names.
        assert!(count(&deep, PlaceChain::BelowContact(2)) < count(&other, PlaceChain::BelowContact(2)) || depth > 5.0);
    }
}

#[test]
fn places_are_dense_at_the_hollow_and_few_in_all() {
    let section = section(&plain_face(30.0, 2.0, BackShape::Round), 6.0);
    let places = section.surface_places(0.5);
    assert!(places.len() < 250, "{} places", places.len());
    let roof: Vec<f64> = places.iter().filter(|p| p.kind == PlaceKind::Surface(Feature::Roof)).map(|p| p.at_m[0]).collect();
    let mut sorted = roof.clone();
    sorted.sort_by(f64::total_cmp);
    assert!(sorted.windows(2).all(|pair| pair[1] - pair[0] < 1.5 + 1e-9), "{sorted:?}");
    near(sorted[0], 0.0, 1e-12);
    assert!(sorted[1] < 0.5 + 1e-9);
}
