//! Means against closed forms.
use super::*;
use crate::mesh::structured::{Grid, rectangle};
use crate::recovery::{Recovery, RecoveryParams, sample_places_m};

fn setup() -> (Mesh, Locator, Recovery, Vec<[f64; 3]>) {
    let mesh = rectangle(Grid { n_u: 6, n_v: 5, curved: false }, [0.0, 0.0], [3.0, 2.0], 0.2);
    let recovery = Recovery::new(&mesh, &RecoveryParams { groups: &[0; 60], singular_nodes: &[] });
    let samples: Vec<[f64; 3]> = sample_places_m(&mesh).iter().map(|&[x, y]| [x * x, x * y, 1.0 + y]).collect();
    let values = recovery.apply(&samples);
    (mesh.clone(), Locator::new(&mesh), recovery, values)
}

#[test]
fn segment_mean_of_a_quadratic_is_exact() {
    let (mesh, locator, recovery, values) = setup();
    // From (0.5, 2) on the top down to (1.1, 0.4). Means by hand: x = 0.5 + 0.6 t, y = 2 − 1.6 t.
    let s = Sampler::segment(&mesh, &locator, ([0.5, 2.0], [1.1, 0.4]), &|_| true).unwrap();
    let got = s.mean(recovery.layout(), &values);
    let want = [0.25 + 0.3 + 0.12, 1.0 + 0.5 * (1.2 - 0.8) - 0.96 / 3.0, 3.0 - 0.8];
    for k in 0..3 {
        assert!((got[k] - want[k]).abs() < 1e-10, "{got:?} for {want:?}");
    }
    assert!((s.covered - 1.0).abs() < 1e-12 && s.points.len() >= 16);
    assert!((s.points.iter().map(|p| p.2).sum::<f64>() - 1.0).abs() < 1e-13);
    let half = Sampler::segment(&mesh, &locator, ([0.5, 3.0], [0.5, 1.0]), &|_| true).unwrap();
    assert!((half.covered - 0.5).abs() < 1e-12);
    assert!(Sampler::segment(&mesh, &locator, ([0.5, 3.0], [0.5, 2.5]), &|_| true).is_none());
}

#[test]
fn disc_mean_of_a_quadratic_is_exact_inside() {
    let (mesh, locator, recovery, values) = setup();
    // Mean of x² over a disc is x_c² + r²/4; the points lie inside elements, the field is one polynomial.
    let s = Sampler::disc(&mesh, &locator, ([1.4, 1.0], 0.6), &|_| true).unwrap();
    let got = s.mean(recovery.layout(), &values);
    for (g, w) in got.into_iter().zip([1.96 + 0.09, 1.4, 2.0]) {
        assert!((g - w).abs() < 1e-9, "{got:?}");
    }
    // Centered on a straight surface: half the disc, by symmetry of the rays exactly.
    let half = Sampler::disc(&mesh, &locator, ([1.4, 0.0], 0.6), &|_| true).unwrap();
    assert!((half.covered - 0.5).abs() < 1e-12);
    let depth = half.mean(recovery.layout(), &values)[2] - 1.0;
    // Center of gravity of a half disc: 4r/(3π); 24 rays and Gauss in r² carry √ to about 1 %.
    assert!((depth / (4.0 * 0.6 / (3.0 * std::f64::consts::PI)) - 1.0).abs() < 0.01, "{depth}");
}

#[test]
fn dual_load_gives_the_mean_stress() {
    let (mesh, locator, ..) = setup();
    let rock = [Elastic::new(2e9, 0.3).unwrap()];
    let u: Vec<f64> = (0..2 * mesh.points_m.len()).map(|i| 1e-3 * (1.3 * i as f64).sin()).collect();
    let s = Sampler::segment(&mesh, &locator, ([0.5, 2.0], [1.1, 0.4]), &|_| true).unwrap();
    let direction = [0.36, 0.64, 0.48];
    let got: f64 = s.dual_load(&mesh, &rock, direction).iter().zip(&u).map(|(f, u)| f * u).sum();
    let want = crate::tensor::double_dot(direction, s.raw_mean(&mesh, &rock, &u));
    assert!((got / want - 1.0).abs() < 1e-12, "{got} for {want}");
    let by_strain = rock[0].stress_pa(s.mean_strain(&mesh, &u));
    assert!((by_strain[0] / s.raw_mean(&mesh, &rock, &u)[0] - 1.0).abs() < 1e-12);
}
