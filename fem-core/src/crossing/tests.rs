//! Pieces of segments through straight and curved meshes.
use super::*;
use crate::mesh::structured::{Grid, grid, rectangle};

#[test]
fn a_segment_through_squares_is_cut_at_every_side() {
    let mesh = rectangle(Grid { n_u: 4, n_v: 2, curved: false }, [0.0, 0.0], [4.0, 2.0], 0.0);
    let locator = Locator::new(&mesh);
    // From 1 m left of the body at y = 0.25 to its right side: each cell of 1 m is crossed by one diagonal.
    let found = pieces(&mesh, &locator, ([-1.0, 0.25], [4.0, 0.25]), &|_| true);
    assert_eq!(found.len(), 9, "{found:?}");
    assert!(found[0].element.is_none() && (found[0].end - 0.2).abs() < 1e-14);
    assert!(found[1..].iter().all(|p| p.element.is_some()));
    assert!(found.windows(2).all(|w| w[0].end.total_cmp(&w[1].start).is_eq()));
}

#[test]
fn a_ray_through_a_ring_meets_its_curved_sides() {
    let polar = |[u, v]: [f64; 2]| {
        let (r, a) = (1.0 + u, std::f64::consts::FRAC_PI_2 * v);
        [r * a.cos(), r * a.sin()]
    };
    let mesh = grid(Grid { n_u: 8, n_v: 12, curved: true }, &polar, &|_, _| true);
    let locator = Locator::new(&mesh);
    for k in 1..40 {
        let a = f64::from(k) * 0.039;
        let found = pieces(&mesh, &locator, ([0.0, 0.0], [2.5 * a.cos(), 2.5 * a.sin()]), &|_| true);
        let inside: f64 = found.iter().filter(|p| p.element.is_some()).map(|p| p.end - p.start).sum();
        // Parabolas over 7.5 degrees of the unit circle leave it by about 1e-6 (sagitta error θ⁴/128).
        assert!((2.5 * inside - 1.0).abs() < 1e-5, "ray {k}: {}", 2.5 * inside);
        assert!(found.iter().filter(|p| p.element.is_some()).all(|p| p.end - p.start > SHORTEST));
    }
}

#[test]
fn a_segment_along_a_contact_takes_the_side_it_is_told() {
    let mesh = rectangle(Grid { n_u: 3, n_v: 2, curved: false }, [0.0, 0.0], [3.0, 2.0], 0.0);
    let locator = Locator::new(&mesh);
    for above in [false, true] {
        let take = |e: u32| (mesh.corner_mean_m(e as usize)[1] > 1.0) == above;
        let found = pieces(&mesh, &locator, ([0.2, 1.0], [2.8, 1.0]), &take);
        assert_eq!(found.len(), 3);
        assert!(found.iter().all(|p| p.element.is_some_and(take)));
    }
}

#[test]
fn a_parabola_is_crossed_where_its_equation_says() {
    // Side (0,0) to (2,0) with its middle at (1,1): y = 4s(1−s), equal to 0.75 at s = 1/4 and 3/4.
    let roots = crossings(&[[0.0, 0.0], [2.0, 0.0], [1.0, 1.0]], [-5.0, 0.75], [3.0, 0.0]);
    assert!(roots.len() == 2 && (roots[0] - 0.25).abs() < 1e-15 && (roots[1] - 0.75).abs() < 1e-15, "{roots:?}");
}
