//! Cut-off bodies against independent statics, and outlines that a mesher accepts.
use proptest::prelude::*;

use super::super::{FreeBody, Section, tags};
use super::{layer, model, near, near_point, plain_face, section, square_slot};
use crate::model::{BackShape, ContactLine, Crack};

/// Shear, moment about the middle of the vertical section at the back, both of the weight, kN and kNm per m.
fn resultants(section: &Section, gamma_kn_m3: &[f64]) -> (f64, f64, f64) {
    let back = section.back_m().unwrap();
    let top = [back[0], section.ground_level_m(back[0])];
    let body = section.free_body([back, top]);
    let middle = 0.5 * (back[1] + top[1]);
    let sums = body.areas_m2.iter().zip(&body.centroids_m).zip(gamma_kn_m3).map(|((area, center), gamma)| {
        let weight = area * gamma;
        [weight, weight * (back[0] - center[0]), weight * (center[1] - middle)]
    });
    let total = sums.fold([0.0; 3], |s, t| [s[0] + t[0], s[1] + t[1], s[2] + t[2]]);
    (total[0], total[1], total[2])
}

#[test]
fn weight_and_moment_of_round_slots_are_those_of_the_reference_set() {
    // Source: independent finite-element reference set, statics by polygon; brow, roof, depth, V in kN/m, M in kNm/m.
    let cases = [
        (30.0, 2.0, 1.0, 677.1504460163535, 337.15044478265304),
        (30.0, 2.0, 2.0, 1349.1504460163535, 1345.150444782653),
        (30.0, 2.0, 4.0, 2693.1504460163533, 5377.150444782652),
        (30.0, 2.0, 6.0, 4037.1504460163533, 12097.150444782654),
        (30.0, 2.0, 8.0, 5381.150446016353, 21505.150444782656),
        (4.5, 1.5, 1.0, 74.89712588419886, 36.485343892681755),
        (4.5, 1.5, 4.0, 290.8971258841988, 576.4853438926816),
        (4.5, 1.5, 6.0, 434.8971258841989, 1296.4853438926818),
    ];
    for (brow, roof, depth, shear, moment) in cases {
        let (v, m, _) = resultants(&section(&plain_face(brow, roof, BackShape::Round), depth), &[24.0]);
        // The reference took its quarter circles as fine polygons: 1e-6 of the value.
        near(v, shear, 1e-6 * shear);
        near(m, moment, 1e-6 * moment);
    }
}

#[test]
fn layers_and_height_of_the_weight_are_those_of_the_reference_set() {
    // Source: independent finite-element reference set, layered case at depth 4 m.
    let mut model = plain_face(30.0, 2.0, BackShape::Round);
    model.layers = [Some(27.0), Some(15.0), Some(3.0), None].map(|z| layer(z.map(ContactLine::Level))).to_vec();
    let (v, m, _) = resultants(&section(&model, 4.0), &[19.0, 25.0, 23.0, 22.0]);
    near(v, 2624.7212421816575, 3e-3);
    near(m, 5241.0545743840985, 6e-3);
    // Same source, seaward inertia of 0.1: M grows by 0.1 W (z_c - z_middle), from 12097.150444782654 to 12291.68229818231.
    let (_, _, lift) = resultants(&section(&plain_face(30.0, 2.0, BackShape::Round), 6.0), &[24.0]);
    near(0.1 * lift, 12291.68229818231 - 12097.150444782654, 1e-3);
}

#[test]
fn leaning_lines_cut_the_polygons_of_the_hand() {
    let mut model = square_slot();
    model.layers = vec![layer(Some(ContactLine::Level(6.0))), layer(None)];
    let section = section(&model, 4.0);
    // 45 degrees landward from the back at (4, 2) to (12, 10); contact at 6 m met at x = 8.
    let body = section.free_body([[4.0, 2.0], [12.0, 10.0]]);
    near(body.areas_m2[0], 4.0 * (8.0 + 12.0) / 2.0, 1e-10);
    near(body.areas_m2[1], 4.0 * (4.0 + 8.0) / 2.0, 1e-10);
    near(body.area_m2(), 64.0, 1e-10);
    // Trapezoid of widths 8 (bottom) and 12 (top): x_c = (8^2 + 8 12 + 12^2) / (3 (8 + 12)).
    near_point(body.centroids_m[0], [(64.0 + 96.0 + 144.0) / 60.0, 6.0 + 4.0 / 3.0 * (8.0 + 24.0) / 20.0], 1e-10);
    near(body.seaward_x_m, 0.0, 1e-12);
    assert_eq!(body.surface.points_m().first(), Some(&[4.0, 2.0]));
    assert_eq!(body.surface.points_m().last(), Some(&[12.0, 10.0]));
    assert_eq!(body.features.len(), body.surface.n_segments());
    // Seaward to the brow: a triangle without the lower right half; ends may be given in either order.
    let body = section.free_body([[0.0, 10.0], [4.0, 2.0]]);
    near(body.area_m2(), 16.0, 1e-10);
    near_point(weighted_center(&body), [4.0 / 3.0, 2.0 + 8.0 / 3.0], 1e-9);
}

fn weighted_center(body: &FreeBody) -> [f64; 2] {
    let sum = |k: usize| body.areas_m2.iter().zip(&body.centroids_m).map(|(a, c)| a * c[k]).sum::<f64>() / body.area_m2();
    [sum(0), sum(1)]
}

/// Area and centroid of the part of a convex-or-not polygon above a straight line, by clipping at the line (independent way).
fn clipped(polygon: &[[f64; 2]], above: impl Fn([f64; 2]) -> f64) -> (f64, [f64; 2]) {
    let mut kept = Vec::new();
    for (i, a) in polygon.iter().enumerate() {
        let b = &polygon[(i + 1) % polygon.len()];
        let (ga, gb) = (above(*a), above(*b));
        if 0.0 <= ga {
            kept.push(*a);
        }
        if (ga < 0.0) != (gb < 0.0) {
            let t = ga / (ga - gb);
            kept.push([a[0] + t * (b[0] - a[0]), a[1] + t * (b[1] - a[1])]);
        }
    }
    let (mut area, mut s) = (0.0, [0.0; 2]);
    for (i, a) in kept.iter().enumerate() {
        let b = kept[(i + 1) % kept.len()];
        let c = a[0] * b[1] - a[1] * b[0];
        area += 0.5 * c;
        s = [s[0] + c * (a[0] + b[0]) / 6.0, s[1] + c * (a[1] + b[1]) / 6.0];
    }
    (area.abs(), [s[0] / area, s[1] / area])
}

proptest! {
    #![proptest_config(ProptestConfig { cases: 100, ..ProptestConfig::default() })]

    #[test]
    fn layers_of_cut_off_bodies_are_those_of_a_polygon_clipper(
        lean_deg in -15.0..50.0f64,
        depth in 1.0..7.0f64,
        z in 0.0..12.0f64,
        slope in -0.4..0.4f64,
        roof in 0.6..3.0f64,
        rising in -0.5..0.5f64,
    ) {
        let surface = [[-60.0, 0.0], [depth, 0.0], [depth, roof], [0.6 * depth, roof + rising], [0.0, roof], [0.3, 8.0], [1.0, 12.0], [20.0, 13.0], [60.0, 14.0]];
        let mut model = model(&surface);
        model.layers = vec![layer(Some(ContactLine::Dip { x_m: 0.0, z_m: z, dip_seaward_rad: slope.atan() })), layer(None)];
        let section = section(&model, depth);
        let tan = lean_deg.to_radians().tan();
        // Where the line meets the ground 12 + (x - 1) / 19 (first 20 m).
        let x = (12.0 - 1.0 / 19.0 - roof + depth / tan) / (1.0 / tan - 1.0 / 19.0);
        prop_assume!(1.0 < x && x < 20.0);
        let top = [x, 12.0 + (x - 1.0) / 19.0];
        let body = section.free_body([[depth, roof], top]);
        let polygon = [[depth, roof], [0.6 * depth, roof + rising], [0.0, roof], [0.3, 8.0], [1.0, 12.0], top];
        let (upper, center) = clipped(&polygon, |p| p[1] - z - slope * p[0]);
        let (whole, _) = clipped(&polygon, |_| 1.0);
        prop_assert!((body.area_m2() - whole).abs() < 1e-9 * whole, "{} {whole}", body.area_m2());
        prop_assert!((body.areas_m2[0] - upper).abs() < 1e-9 * whole, "{} {upper}", body.areas_m2[0]);
        if 1e-3 < upper {
            prop_assert!((body.centroids_m[0][0] - center[0]).abs() + (body.centroids_m[0][1] - center[1]).abs() < 1e-6);
        }
    }
}

#[test]
fn outlines_mesh_with_the_right_weight_and_tags() {
    let mut layered = plain_face(30.0, 2.0, BackShape::Round);
    layered.layers = [Some(27.0), Some(15.0), Some(3.0), None].map(|z| layer(z.map(ContactLine::Level))).to_vec();
    layered.cracks.push(Crack { path_m: vec![[10.0, 29.97], [10.0, 25.0]] });
    let mut faired = square_slot();
    faired.section.round_corners_m = Some(0.3);
    let cases = [(layered, vec![0.0, 0.4, 4.0]), (plain_face(30.0, 2.0, BackShape::Round), vec![6.0]), (faired, vec![2.0, 4.0, 8.0])];
    for (model, depths) in cases {
        for depth in depths {
            let section = section(&model, depth);
            let size = mesher::SizeField::uniform(8.0);
            let region = |p: [f64; 2]| section.region(p);
            let (mesh, _) = mesher::mesh(&section.outline(), &region, &size, &mesher::MeshParams::default()).unwrap();
            let tagged: std::collections::BTreeSet<u32> = mesh.edges.iter().map(|edge| edge.tag).collect();
            for tag in [tags::BASE, tags::SEAWARD_SIDE, tags::LANDWARD_SIDE, 0, 4, 5] {
                assert!(tagged.contains(&tag), "tag {tag} is missing at {depth}: {tagged:?}");
            }
            assert_eq!(tagged.contains(&3), 0.0 < depth);
            assert_eq!(tagged.contains(&tags::CRACK), !model.cracks.is_empty());
            let area: f64 = mesh
                .triangles
                .iter()
                .map(|t| {
                    let [a, b, c] = [t[0], t[1], t[2]].map(|i| mesh.points_m[i as usize]);
                    0.5 * ((b[0] - a[0]) * (c[1] - a[1]) - (c[0] - a[0]) * (b[1] - a[1]))
                })
                .sum();
            let (points, _) = section.boundary().flattened(0.01);
            let exact = 0.5 * points.windows(2).map(|p| p[1][0] * p[0][1] - p[0][0] * p[1][1]).sum::<f64>();
            // The corner triangles leave out what lies between arcs and their chords: under 0.2 m2.
            near(area, exact, 0.2);
            assert!(mesh.regions.iter().all(|region| (*region as usize) < section.n_layers()));
        }
    }
}
