//! Shape functions, mapping and element stiffness.
use super::*;
use crate::elasticity::Elastic;

const POINTS: [[f64; 2]; 5] = [[0.1, 0.2], [0.3, 0.3], [0.7, 0.1], [0.05, 0.9], [1.0 / 3.0, 1.0 / 3.0]];

fn curved() -> [[f64; 2]; 6] {
    [[0.0, 0.0], [2.0, 0.3], [0.4, 1.5], [1.0, 0.0], [1.3, 1.0], [0.1, 0.8]]
}

fn straight() -> [[f64; 2]; 6] {
    let mut p = curved();
    for [i, j, m] in SIDES {
        p[m] = [0.5 * (p[i][0] + p[j][0]), 0.5 * (p[i][1] + p[j][1])];
    }
    p
}

#[test]
fn shape_functions_are_nodal_and_sum_to_one() {
    for (a, xi) in NODE_XI.into_iter().enumerate() {
        for (b, n) in shape(xi).into_iter().enumerate() {
            assert!((n - f64::from(u8::from(a == b))).abs() < 1e-15, "N_{b} at node {a} is {n}");
        }
    }
    for xi in POINTS {
        assert!((shape(xi).iter().sum::<f64>() - 1.0).abs() < 1e-15);
        for k in 0..2 {
            assert!(shape_gradients(xi).iter().map(|g| g[k]).sum::<f64>().abs() < 1e-14);
        }
    }
}

#[test]
fn gradients_are_differences() {
    let h = 1e-6;
    for xi in POINTS {
        for k in 0..2 {
            let (mut up, mut down) = (xi, xi);
            up[k] += h;
            down[k] -= h;
            for a in 0..6 {
                let difference = (shape(up)[a] - shape(down)[a]) / (2.0 * h);
                assert!((shape_gradients(xi)[a][k] - difference).abs() < 1e-9, "central difference, round-off 1e-16/h");
            }
        }
    }
}

#[test]
fn mapped_gradients_reproduce_linear_fields_on_curved_sides() {
    let p = curved();
    for xi in POINTS {
        let at = mapped(&p, xi);
        let u = p.map(|[x, y]| [3.0 + 2.0 * x - y, 0.5 * x + 4.0 * y]);
        let e = strain(&at, &u);
        for (got, want) in e.into_iter().zip([2.0, 4.0, -0.5]) {
            assert!((got - want).abs() < 1e-13, "{e:?}");
        }
    }
    assert!(is_straight(&straight()) && !is_straight(&curved()));
    // Parabola segments over a chord of length c with sagitta s add 2/3 c s: the area follows by hand.
    let corner_area = 0.5 * (2.0 * 1.5 - 0.4 * 0.3);
    let bulge = |i: usize, j: usize, m: usize| {
        let (a, b, c) = (p[i], p[j], p[m]);
        let d = [c[0] - 0.5 * (a[0] + b[0]), c[1] - 0.5 * (a[1] + b[1])];
        2.0 / 3.0 * (d[0] * (b[1] - a[1]) - d[1] * (b[0] - a[0]))
    };
    let want = corner_area + SIDES.iter().map(|&[i, j, m]| bulge(i, j, m)).sum::<f64>();
    assert!((area_m2(&p) - want).abs() < 1e-14, "{} for {want}", area_m2(&p));
}

#[test]
fn stiffness_blocks_act_like_internal_forces() {
    let moduli = Elastic::new(2e9, 0.3).unwrap().moduli();
    let u: [[f64; 2]; 6] = std::array::from_fn(|a| [(1.3 * a as f64).sin() * 1e-3, (0.7 + 2.1 * a as f64).cos() * 1e-3]);
    for p in [straight(), curved()] {
        let blocks = stiffness_blocks(&p, &moduli);
        let mut f = [[0.0; 2]; 6];
        let mut pair = 0;
        for i in 0..6 {
            for j in i..6 {
                let [xx, xy, yx, yy] = blocks[pair];
                f[i] = [f[i][0] + xx * u[j][0] + xy * u[j][1], f[i][1] + yx * u[j][0] + yy * u[j][1]];
                if i != j {
                    f[j] = [f[j][0] + xx * u[i][0] + yx * u[i][1], f[j][1] + xy * u[i][0] + yy * u[i][1]];
                }
                pair += 1;
            }
        }
        let want = internal_forces(&p, &moduli, &u);
        let size = want.iter().flatten().fold(0.0, |m: f64, v| m.max(v.abs()));
        for (got, want) in f.iter().flatten().zip(want.iter().flatten()) {
            assert!((got - want).abs() < 1e-13 * size, "{got} for {want}");
        }
    }
}
