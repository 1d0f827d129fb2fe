//! Geometry cases worked out by hand.
use super::super::Feature;
use super::{layer, model, near, near_point, plain_face, refusal, section, site, square_slot};
use crate::model::{BackShape, ContactLine, Crack, Growth};

#[test]
fn a_square_slot_has_its_marks_where_the_hand_puts_them() {
    let model = square_slot();
    let site = site(&model);
    let found = site.surveyed().unwrap();
    near_point(found.back_m, [4.0, 2.0], 1e-9);
    near_point(found.lip_m, [0.0, 2.0], 1e-9);
    near_point(found.mouth_m, [0.0, 0.0], 1e-9);
    near(found.depth_m, 4.0, 1e-9);
    near_point(site.brow_m(), [0.0, 10.0], 1e-9);
    near(site.cliff_height_m(), 10.0, 1e-9);
    let extents = site.extents();
    near(extents.seaward_x_m, -40.0, 1e-9);
    near(extents.landward_x_m, 40.0, 1e-9);
    near(extents.base_z_m, -30.0, 1e-9);
    let section = site.at_depth(4.0).unwrap();
    near(section.thickness_m(), 8.0, 1e-9);
    near(section.roof_level_m(), 2.0, 1e-9);
}

#[test]
fn the_round_slot_of_the_finite_element_reference_set_is_met_point_for_point() {
    // Source: independent finite-element reference set, outline of the 30 m cliff with a slot 2 m high at depth 6 and 1 m.
    for (depth, corners) in
        [(6.0, vec![[0.0, 0.0], [5.0, 0.0], [6.0, 1.0], [5.0, 2.0], [0.0, 2.0]]), (1.0, vec![[0.0, 0.0], [1.0, 1.0], [0.0, 2.0]])]
    {
        let section = section(&plain_face(30.0, 2.0, BackShape::Round), depth);
        for corner in corners {
            near(section.surface().nearest(corner).1, 0.0, 1e-9);
            assert!(
                section.surface().points_m().iter().any(|p| (p[0] - corner[0]).hypot(p[1] - corner[1]) < 1e-9),
                "{corner:?} is no point at {depth}"
            );
        }
        let arcs: Vec<_> = section.surface().arcs().iter().flatten().collect();
        assert!(!arcs.is_empty());
        for arc in arcs {
            near_point(arc.center_m, [depth - 1.0, 1.0], 1e-9);
            near(arc.radius_m, 1.0, 1e-9);
        }
        near_point(section.back_m().unwrap(), [depth, 1.0], 1e-9);
        let extents = section.extents();
        near(extents.landward_x_m, 120.0, 1e-9);
        near(extents.seaward_x_m, -120.0, 1e-9);
    }
}

#[test]
fn a_round_back_shallower_than_its_radius_is_a_half_ellipse() {
    let section = section(&plain_face(30.0, 2.0, BackShape::Round), 0.3);
    // Points of x = 0.3 sqrt(1 - (z - 1)^2); tolerance 0.5 % of the depth for arcs in its place.
    for z in [0.05_f64, 0.3, 0.7, 1.0, 1.4, 1.9] {
        let x = 0.3 * (1.0 - (z - 1.0).powi(2)).sqrt();
        near(section.surface().nearest([x, z]).1, 0.0, 0.0015);
    }
    let arcs = section.surface().arcs().iter().flatten().count();
    assert!(arcs > 8, "{arcs} arcs");
    near(section.back_m().unwrap()[0], 0.3, 1e-9);
}

#[test]
fn survey_noise_does_not_move_the_lip_up_the_face() {
    // The face runs 2 cm further seaward at 6 m than at the lip.
    let site =
        site(&model(&[[-60.0, 0.0], [3.0, 0.1], [3.2, 1.0], [2.9, 1.8], [0.03, 2.0], [0.02, 4.0], [0.0, 6.0], [0.05, 10.0], [60.0, 10.5]]));
    near_point(site.surveyed().unwrap().lip_m, [0.03, 2.0], 1e-9);
    near_point(site.brow_m(), [0.05, 10.0], 1e-9);
}

#[test]
fn a_face_that_leans_out_is_an_overhang_up_to_its_edge() {
    let site = site(&model(&[[-60.0, 0.0], [3.0, 0.0], [0.0, 9.0], [60.0, 10.0]]));
    let found = site.surveyed().unwrap();
    near_point(found.lip_m, [0.0, 9.0], 1e-9);
    near_point(found.back_m, [3.0, 0.0], 1e-9);
    near_point(found.mouth_m, [0.0, 0.0], 1e-9);
    near_point(site.brow_m(), [0.0, 9.0], 1e-9);
}

#[test]
fn the_second_hollow_is_named_and_not_taken() {
    let points =
        [[-60.0, 0.0], [4.0, 0.0], [4.0, 2.0], [0.0, 2.0], [0.0, 5.0], [1.2, 5.0], [1.2, 6.0], [0.0, 6.0], [0.0, 12.0], [60.0, 12.0]];
    let site = site(&model(&points));
    near(site.surveyed_depth_m(), 4.0, 1e-9);
    assert_eq!(site.other_hollows().len(), 1);
    near_point(site.other_hollows()[0].0, [1.2, 6.0], 1e-9);
    near(site.other_hollows()[0].1, 1.2, 1e-9);
}

#[test]
fn a_bench_in_the_face_is_no_brow_and_sloping_ground_is_ground() {
    let points = [[-60.0, 0.0], [3.0, 0.0], [3.0, 2.0], [0.0, 2.0], [0.0, 8.0], [0.8, 8.1], [0.9, 16.0], [20.0, 22.0], [80.0, 30.0]];
    let site = site(&model(&points));
    near_point(site.brow_m(), [0.9, 16.0], 1e-9);
    let section = site.at_depth(3.0).unwrap();
    // Ground above the back: 16 + 2.1 * 6 / 19.1.
    near(section.ground_level_m(3.0), 16.0 + 2.1 * 6.0 / 19.1, 1e-9);
    near(section.thickness_m(), 14.0 + 2.1 * 6.0 / 19.1, 1e-9);
    near(section.uneroded_level_m(-20.0), 16.0, 1e-9);
    near(section.uneroded_level_m(10.0), section.ground_level_m(10.0), 1e-12);
}

#[test]
fn a_given_brow_overrides_and_must_lie_on_the_surface() {
    let mut model = square_slot();
    model.section.brow_m = Some([6.0, 10.2]);
    near_point(site(&model).brow_m(), [6.0, 10.0], 1e-9);
    model.section.brow_m = Some([6.0, 14.0]);
    let finding = refusal(&model);
    assert_eq!(finding.at, "section.brow");
    assert_eq!(finding.message, "the brow [6, 14] lies 4.00 m off the surface above the undercut, more than 1 m");
}

#[test]
fn without_undercut_and_start_shape_the_model_is_refused() {
    let finding = refusal(&model(&[[-60.0, 0.0], [0.0, 0.0], [0.5, 10.0], [60.0, 10.0]]));
    assert_eq!(finding.at, "undercut.floor_level_m");
    assert_eq!(finding.message, "the surface shows no undercut deeper than 0.1 m and no start shape is given");
    assert!(finding.hint.is_some());
}

#[test]
fn impossible_sections_are_refused_at_their_key() {
    let check = |change: &dyn Fn(&mut crate::model::Model), at: &str, part: &str| {
        let mut model = square_slot();
        change(&mut model);
        let finding = refusal(&model);
        assert_eq!(finding.at, at, "{finding:?}");
        assert!(finding.message.contains(part), "{finding:?}");
        assert!(finding.hint.is_some(), "{finding:?}");
    };
    check(&|m| m.undercut.search_to_depth_m = 3.0, "undercut.search_to_depth_m", "already 4.00 m deep");
    check(&|m| m.extent.landward_x_m = Some(7.0), "extent.landward_x_m", "8.00 m");
    check(&|m| m.extent.seaward_x_m = Some(1.0), "extent.seaward_x_m", "0.00 m");
    check(&|m| m.extent.base_z_m = Some(0.5), "extent.base_z_m", "0.00 m");
    check(&|m| m.section.original_surface_m = Some(vec![[-20.0, 8.0], [60.0, 8.0]]), "section.original_surface", "2.00 m below");
    check(&|m| m.section.round_corners_m = Some(1.5), "section.round_corners_m", "1.00 m");
    check(&|m| m.section.surface[2].z_m = f64::NAN, "section.surface", "point 3");
    check(&|m| m.section.surface.swap(0, 5), "section.surface", "");
    check(&|m| m.layers.insert(0, layer(Some(ContactLine::Points(vec![[0.0, 1.0], [0.0, 2.0]])))), "layers[1].base", "growing x");
}

#[test]
fn a_hollow_that_breaks_through_the_ground_names_the_depth() {
    // The ground falls inland below the roof's level at x = 8.
    let mut model = model(&[[-60.0, 0.0], [3.0, 0.0], [3.0, 2.0], [0.0, 2.0], [0.0, 6.0], [6.0, 6.0], [9.0, -3.0], [60.0, -3.0]]);
    model.undercut.search_to_depth_m = 10.0;
    let finding = refusal(&model);
    assert_eq!(finding.at, "undercut.search_to_depth_m");
    assert!(finding.message.starts_with("at an undercut depth of 10.000 m the hollow breaks through the surface"), "{finding:?}");
    // The ground is at 2 m where x = 6 + 4/3, so that far the slot fits.
    assert_eq!(finding.hint.as_deref(), Some("search to at most 7.33 m"));
}

#[test]
fn a_crack_from_ground_to_hollow_cuts_the_overhang_off() {
    let mut model = square_slot();
    model.cracks.push(Crack { path_m: vec![[6.0, 10.0], [6.0, 1.0]] });
    let site = super::super::Site::new(&model);
    assert!(site.unwrap_err()[0].message.contains("meets crack 1"));
    model.undercut.search_to_depth_m = 5.5;
    super::site(&model);
    // A crack that does not reach the ground may be met.
    model.cracks[0].path_m[0] = [6.0, 5.0];
    model.undercut.search_to_depth_m = 8.0;
    super::site(&model);
}

#[test]
fn a_survey_is_carried_on_level_and_clipped_to_given_extents() {
    let mut short = square_slot();
    short.section.surface[0].x_m = -5.0;
    short.section.surface[5].x_m = 8.0;
    let checked = super::super::Site::new(&short).unwrap();
    assert_eq!(checked.warnings.len(), 1);
    assert_eq!(checked.warnings[0].code, "section.carried-on-level");
    let section = checked.value.at_depth(4.0).unwrap();
    near_point(section.surface().points_m()[0], [-40.0, 0.0], 1e-9);
    near_point(*section.surface().points_m().last().unwrap(), [40.0, 10.0], 1e-9);
    let mut given = square_slot();
    given.extent.seaward_x_m = Some(-30.0);
    given.extent.landward_x_m = Some(35.0);
    let section = super::section(&given, 4.0);
    near_point(section.surface().points_m()[0], [-30.0, 0.0], 1e-9);
    near_point(*section.surface().points_m().last().unwrap(), [35.0, 10.0], 1e-9);
}

#[test]
fn features_follow_each_other_and_the_innermost_tenth_is_the_back() {
    let section = section(&square_slot(), 4.0);
    let features = section.features();
    let points = section.surface().points_m();
    let at = |feature: Feature| (points[*features.points(feature).start()], points[*features.points(feature).end()]);
    assert_eq!(at(Feature::Platform), ([-40.0, 0.0], [0.0, 0.0]));
    // A tenth of the height of 2 m.
    near_point(at(Feature::Back).0, [3.8, 0.0], 1e-9);
    near_point(at(Feature::Back).1, [3.8, 2.0], 1e-9);
    near_point(at(Feature::Roof).1, [0.0, 2.0], 1e-9);
    near_point(at(Feature::Face).1, [0.0, 10.0], 1e-9);
    near_point(at(Feature::Ground).1, [40.0, 10.0], 1e-9);
    let order: Vec<Feature> = (0..section.surface().n_segments()).map(|i| section.feature_of(i)).collect();
    assert!(order.windows(2).all(|pair| pair[0] <= pair[1]), "{order:?}");
}

#[test]
fn fairing_keeps_the_asked_depth_and_says_what_it_moved() {
    let mut model = square_slot();
    model.section.round_corners_m = Some(0.4);
    let site = site(&model);
    let fairing = site.fairing().unwrap();
    assert_eq!(fairing.n_corners, 2);
    // Each square corner loses (1 - pi/4) r^2.
    near(fairing.moved_area_m2, 2.0 * (1.0 - std::f64::consts::FRAC_PI_4) * 0.16, 1e-12);
    near(fairing.depth_change_m, 0.0, 1e-12);
    near(fairing.smallest_radius_m, 0.4, 1e-12);
    // A wedge loses depth: r (1 / sin(half angle) - 1) with a right angle at its tip.
    let mut wedge = plain_face(10.0, 2.0, BackShape::Wedge);
    wedge.section.round_corners_m = Some(0.2);
    let site = super::site(&wedge);
    near(site.fairing().unwrap().depth_change_m, -0.2 * (2.0_f64.sqrt() - 1.0), 1e-9);
    for depth in [0.4, 1.0, 3.0, 7.9] {
        near(site.at_depth(depth).unwrap().back_m().unwrap()[0], depth, 1e-8);
    }
}

#[test]
fn layers_are_cut_from_the_top_down() {
    let mut model = square_slot();
    model.layers = vec![
        layer(Some(ContactLine::Level(8.0))),
        // Rises through the first contact at x = 10 and falls back below it at x = 30.
        layer(Some(ContactLine::Points(vec![[0.0, 6.0], [20.0, 10.0], [40.0, 6.0]]))),
        layer(Some(ContactLine::Dip { x_m: 0.0, z_m: 3.0, dip_seaward_rad: 0.1_f64.atan() })),
        layer(None),
    ];
    let section = section(&model, 4.0);
    for (p, expected) in
        [([5.0, 9.0], 0), ([5.0, 7.5], 1), ([20.0, 7.9], 2), ([20.0, 9.0], 0), ([5.0, 3.6], 2), ([5.0, 3.4], 3), ([-10.0, -1.0], 3)]
    {
        assert_eq!(section.layer_at(p), expected, "{p:?}");
    }
    let lines = section.contact_lines();
    let of = |contact: usize| lines.iter().filter(|line| line.contact == contact).map(|line| line.points_m.clone()).collect::<Vec<_>>();
    assert_eq!(of(0).len(), 1, "{lines:?}");
    near_point(of(0)[0][0], [0.0, 8.0], 1e-9);
    assert_eq!(of(1).len(), 2, "the second layer pinches out between 10 and 30 m: {lines:?}");
    near_point(*of(1)[0].last().unwrap(), [10.0, 8.0], 1e-9);
    near_point(of(1)[1][0], [30.0, 8.0], 1e-9);
    // Out of the face at 3 m, and into the second contact 6 + 0.2 (40 - x) = 3 + 0.1 x.
    near_point(of(2).last().unwrap()[0], [0.0, 3.0], 1e-9);
    near_point(*of(2).last().unwrap().last().unwrap(), [110.0 / 3.0, 20.0 / 3.0], 1e-9);
}

#[test]
fn growth_kinds_differ_as_written() {
    let mut model = model(&[[-60.0, 0.0], [4.0, 0.2], [4.4, 1.0], [4.0, 1.9], [0.0, 2.0], [0.0, 10.0], [60.0, 10.0]]);
    let advance = section(&model, 6.0);
    // Landward of 4.4 - 2.0 m moved by 1.6 m, the rest scaled by 4 / 2.4: the corner of roof and back keeps its distance to the back.
    near(advance.surface().nearest([5.6, 1.9]).1, 0.0, 1e-9);
    near_point(advance.back_m().unwrap(), [6.0, 1.0], 1e-9);
    model.undercut.growth = Growth::Stretch;
    let stretch = section(&model, 6.0);
    near(stretch.surface().nearest([4.0 * 6.0 / 4.4, 1.9]).1, 0.0, 1e-9);
    near_point(stretch.back_m().unwrap(), [6.0, 1.0], 1e-9);
}

#[test]
fn a_start_shape_on_a_landward_leaning_face_reaches_its_depth() {
    let mut model = model(&[[-60.0, 0.0], [0.0, 0.0], [1.0, 10.0], [60.0, 10.0]]);
    model.undercut.start_shape = Some(crate::model::StartShape { floor_level_m: 0.5, roof_level_m: 2.5, back: BackShape::Round });
    let site = site(&model);
    near_point(site.lip_m(), [0.25, 2.5], 1e-9);
    near_point(site.mouth_m(), [0.05, 0.5], 1e-9);
    for depth in [0.2, 0.7, 1.0, 3.0] {
        near(site.at_depth(depth).unwrap().back_m().unwrap()[0], 0.25 + depth, 1e-6);
    }
    assert_eq!(site.at_depth(0.0).unwrap().back_m(), None);
}
