//! Every point of every element is found where it is.
use super::*;
use crate::mesh::structured::{Grid, grid, rectangle};

fn ring() -> Mesh {
    let polar = |[u, v]: [f64; 2]| {
        let (r, a) = (1.0 + u, std::f64::consts::FRAC_PI_2 * v);
        [r * a.cos(), r * a.sin()]
    };
    grid(Grid { n_u: 4, n_v: 5, curved: true }, &polar, &|_, _| true)
}

#[test]
fn points_of_elements_are_found_again() {
    for mesh in [ring(), rectangle(Grid { n_u: 7, n_v: 5, curved: false }, [1e5, -40.0], [30.0, 20.0], 0.3)] {
        let locator = Locator::new(&mesh);
        for element in 0..mesh.triangles.len() {
            let points = element_points_m(&mesh, element);
            for xi in [[0.2, 0.3], [1e-3, 0.5], [0.9, 0.05], [0.0, 0.4], [0.5, 0.5], [1.0, 0.0]] {
                let p = interpolate(&points, xi);
                let found = locator.locate(&mesh, p, 0.0).expect("a point of the body");
                // 1e5 m away from the origin round-off is 1.5e-11 m.
                assert!(found.distance_m < 1e-9 && -1e-12 <= least_area_coordinate(found.xi), "{found:?}");
                if least_area_coordinate(xi) > 1e-6 {
                    assert_eq!(found.element as usize, element);
                    assert!((found.xi[0] - xi[0]).abs() + (found.xi[1] - xi[1]).abs() < 1e-9);
                }
            }
        }
    }
}

#[test]
fn points_outside_go_to_the_nearest_element_within_reach() {
    let mesh = ring();
    let locator = Locator::new(&mesh);
    assert_eq!(locator.locate(&mesh, [0.5, 0.5], 0.2), None, "0.29 m inside the hole");
    assert_eq!(locator.locate(&mesh, [f64::NAN, 0.5], 10.0), None);
    let found = locator.locate(&mesh, [0.5, 0.5], 0.3).unwrap();
    // Distance to the circle 1 − √0.5; parabola sides of this mesh follow it to 1e-4.
    assert!((found.distance_m - (1.0 - 0.5f64.sqrt())).abs() < 1e-4, "{found:?}");
    let found = locator.locate(&mesh, [50.0, 0.0], 100.0).unwrap();
    assert!((found.distance_m - 48.0).abs() < 1e-9, "{found:?}");
}

#[test]
fn regions_choose_the_side_of_a_contact() {
    let mut mesh = rectangle(Grid { n_u: 4, n_v: 4, curved: false }, [0.0, 0.0], [1.0, 1.0], 0.0);
    for e in 0..mesh.triangles.len() {
        mesh.regions[e] = u32::from(mesh.corner_mean_m(e)[1] > 0.5);
    }
    let locator = Locator::new(&mesh);
    for region in [0, 1] {
        let found = locator.locate_in_regions(&mesh, [0.3, 0.5 + 1e-10], 1e-6, &[region]).unwrap();
        assert_eq!(mesh.regions[found.element as usize], region);
    }
    let found = locator.locate_in_regions(&mesh, [0.3, 0.9], 1.0, &[0]).unwrap();
    assert!((found.distance_m - 0.4).abs() < 1e-9, "{found:?}");
}
