//! What must hold for every hollow at every depth.
use proptest::prelude::*;

use super::super::path::contains;
use super::super::{Path, Section};
use super::{model, near, near_point, plain_face, section, site, square_slot};
use crate::model::{BackShape, ContactLine, Growth, Model};

/// Area of the body below the surface, m2, arcs as chords of 0.01 rad.
fn area_m2(section: &Section) -> f64 {
    let (points, _) = section.boundary().flattened(0.01);
    0.5 * points.windows(2).map(|p| p[1][0] * p[0][1] - p[0][0] * p[1][1]).sum::<f64>()
}

fn simple_models() -> Vec<Model> {
    let rounded = model(&[[-60.0, 0.0], [4.0, 0.2], [4.4, 1.0], [4.0, 1.9], [0.0, 2.0], [0.0, 10.0], [60.0, 10.0]]);
    let rising = model(&[[-60.0, 0.0], [3.0, -0.5], [3.5, 1.0], [3.0, 3.0], [0.0, 2.0], [0.0, 10.0], [60.0, 10.0]]);
    let mut models = vec![square_slot(), rounded, rising];
    models.extend([BackShape::Round, BackShape::Square, BackShape::Wedge].map(|back| plain_face(12.0, 2.0, back)));
    models
}

#[test]
fn hollows_are_nested_and_reach_the_asked_depth() {
    for base in simple_models() {
        for growth in [Growth::Advance, Growth::Stretch] {
            let mut model = base.clone();
            model.undercut.growth = growth;
            let site = site(&model);
            let mut before: Option<Section> = None;
            for step in 0..=40 {
                let depth = 0.2 * f64::from(step);
                let section = site.at_depth(depth).unwrap();
                near(section.back_m().map_or(0.0, |back| back[0] - section.lip_m()[0]), depth, 1e-8);
                // "Advance" flattens a roof that rises inward, so that rock stands lower there than before: only up to the survey.
                let rises = section.roof_level_m() > section.lip_m()[1] + 1e-9;
                if rises && growth == Growth::Advance && site.surveyed_depth_m() < depth {
                    break;
                }
                if let Some(before) = &before {
                    assert!(area_m2(&section) < area_m2(before), "rock must be lost from {} to {depth}", before.depth_m());
                    let (points, _) = section.surface().flattened(0.05);
                    // Chord error of the arcs that stand for ellipses: 2 mm.
                    let outside = points.iter().find(|p| !contains(before.boundary(), **p) && 2e-3 < before.boundary().nearest(**p).1);
                    assert_eq!(outside, None, "at {depth}, {growth:?}: a point outside the body of the smaller depth");
                }
                before = Some(section);
            }
        }
    }
}

#[test]
fn depth_zero_is_the_straight_line_and_the_surveyed_depth_the_survey() {
    let survey = [[-36.0, 0.0], [4.0, 0.2], [4.4, 1.0], [4.0, 1.9], [0.0, 2.0], [0.0, 10.0], [36.0, 10.0]];
    let model = model(&survey);
    let site = site(&model);
    let points = |section: &Section| section.surface().points_m().to_vec();
    let zero = site.at_depth(0.0).unwrap();
    assert_eq!(zero.back_m(), None);
    near(zero.thickness_m(), 8.0, 1e-12);
    assert_eq!(points(&zero).len(), 7, "{:?}", points(&zero));
    near_point(zero.mouth_m(), [0.0, 36.0 / 40.0 * 0.2], 1e-12);
    let surveyed = site.at_depth(site.surveyed_depth_m()).unwrap();
    for p in survey {
        assert!(points(&surveyed).iter().any(|q| (p[0] - q[0]).abs() + (p[1] - q[1]).abs() <= 1e-12), "{p:?} is missing");
    }
}

#[test]
fn the_shape_changes_continuously_with_the_depth() {
    for base in simple_models() {
        let site = site(&base);
        for step in 1..400 {
            let depth = 0.02 * f64::from(step);
            let (a, b) = (site.at_depth(depth - 1e-4).unwrap(), site.at_depth(depth + 1e-4).unwrap());
            // A hollow under 10 m high cannot lose more than 10 m2 a metre of depth.
            assert!((area_m2(&a) - area_m2(&b)).abs() < 4e-3, "jump at {depth}: {} {}", area_m2(&a), area_m2(&b));
        }
    }
}

/// A rough surface that a laser scan could show: jittered platform, hollow, face and ground.
fn rough_surface(seed: &[f64], depth: f64, height: f64) -> Vec<[f64; 2]> {
    let mut next = seed.iter().cycle().copied();
    let mut jitter = |size: f64| size * next.next().unwrap_or(0.0);
    let mut points = vec![[-20.0, -0.5]];
    let mut line = |to: [f64; 2], n: usize, size: f64, points: &mut Vec<[f64; 2]>| {
        let from: [f64; 2] = points[points.len() - 1];
        for k in 1..=n {
            let t = k as f64 / n as f64;
            points.push([from[0] + t * (to[0] - from[0]) + jitter(size), from[1] + t * (to[1] - from[1]) + jitter(size)]);
        }
    };
    line([0.0, 0.0], 10, 0.05, &mut points);
    line([depth, 0.4], 12, 0.03, &mut points);
    line([depth + 0.3, 1.0], 5, 0.03, &mut points);
    line([depth - 0.2, 1.8], 5, 0.03, &mut points);
    line([0.0, 1.5 + jitter_of(seed)], 14, 0.03, &mut points);
    line([0.2, height], 15, 0.05, &mut points);
    points.push([30.0, height + 1.0]);
    points
}

fn jitter_of(seed: &[f64]) -> f64 {
    0.4 * seed[0]
}

proptest! {
    #![proptest_config(ProptestConfig { cases: 60, ..ProptestConfig::default() })]

    #[test]
    fn rough_hollows_never_cross_themselves(
        seed in prop::collection::vec(-1.0..1.0f64, 97),
        depth in 1.0..4.0f64,
        height in 5.0..20.0f64,
        stretch in any::<bool>(),
        fair in prop::option::of(0.02..0.2f64),
    ) {
        let mut model = model(&rough_surface(&seed, depth, height));
        model.undercut.growth = if stretch { Growth::Stretch } else { Growth::Advance };
        model.section.round_corners_m = fair;
        let site = site(&model);
        for share in [0.02, 0.1, 0.3, 0.5, 0.8, 0.95, 1.0] {
            let depth = share * site.search_to_depth_m();
            let section = site.at_depth(depth);
            prop_assert!(section.is_ok(), "{:?}", section.err());
            let section = section.unwrap();
            prop_assert!((section.back_m().unwrap()[0] - section.lip_m()[0] - depth).abs() < 1e-8);
        }
    }

    #[test]
    fn overburden_is_the_count_of_layers_in_the_column(
        levels in prop::collection::vec(prop::collection::vec(-5.0..14.0f64, 6), 1..5),
        x in -35.0..35.0f64,
        z in -25.0..12.0f64,
    ) {
        let mut model = square_slot();
        model.section.original_surface_m = Some(vec![[-30.0, 11.0], [0.0, 12.5], [30.0, 10.5]]);
        model.layers = levels.iter().map(|level| {
            super::layer(Some(ContactLine::Points(level.iter().enumerate().map(|(k, z)| [-30.0 + 12.0 * k as f64, *z]).collect())))
        }).collect();
        model.layers.push(super::layer(None));
        let section = section(&model, 4.0);
        let thickness = section.overburden_m([x, z]);
        let top = section.uneroded_level_m(x);
        let n = 20_000;
        let mut counted = vec![0.0; thickness.len()];
        let step = (top - z).max(0.0) / f64::from(n);
        for k in 0..n {
            counted[section.layer_at([x, z + (f64::from(k) + 0.5) * step])] += step;
        }
        for (exact, counted) in thickness.iter().zip(&counted) {
            // Midpoint counting errs by one step at each of two ends.
            prop_assert!((exact - counted).abs() <= 2.0 * step + 1e-9, "{thickness:?} {counted:?}");
        }
    }

    #[test]
    fn the_layer_of_a_point_does_not_depend_on_how_columns_are_cut(
        levels in prop::collection::vec(prop::collection::vec(-5.0..14.0f64, 6), 1..5),
        x in -35.0..35.0f64,
        z in -25.0..12.0f64,
    ) {
        let mut model = square_slot();
        let points = |level: &[f64]| -> Vec<[f64; 2]> { level.iter().enumerate().map(|(k, z)| [-30.0 + 12.0 * k as f64, *z]).collect() };
        model.layers = levels.iter().map(|level| super::layer(Some(ContactLine::Points(points(level))))).collect();
        model.layers.push(super::layer(None));
        let section = section(&model, 4.0);
        let level_at = |level: &[f64]| {
            let points = points(level);
            let k = points.partition_point(|p| p[0] <= x);
            if k == 0 { return points[0][1] }
            if k == points.len() { return points[k - 1][1] }
            let t = (x - points[k - 1][0]) / 12.0;
            points[k - 1][1] + t * (points[k][1] - points[k - 1][1])
        };
        let expected = levels.iter().position(|level| level_at(level) <= z).unwrap_or(levels.len());
        prop_assert_eq!(section.layer_at([x, z]), expected);
    }
}

#[test]
fn a_point_between_chord_and_arc_is_told_apart() {
    let section = section(&plain_face(30.0, 2.0, BackShape::Round), 6.0);
    // The chord from (5, 0) to (6, 1) passes (5.5, 0.5); the arc passes 0.707 from (5, 1).
    assert!(!section.contains([5.6, 0.4]));
    assert!(section.contains([5.75, 0.25]));
    let square = Path::straight(vec![[0.0, 0.0], [1.0, 0.0], [1.0, 1.0], [0.0, 1.0]]);
    assert!(contains(&square, [0.5, 0.5]) && !contains(&square, [1.5, 0.5]));
}
