//! A11 and A12: orders of convergence and sizes of the errors, recovery, estimated error of energy and of a goal.
use crate::setup::{Solved, prescribe, relative};
use fem_core::assembly::body_force;
use fem_core::elasticity::Elastic;
use fem_core::error::{Field, energy_errors, goal_errors};
use fem_core::locate::Locator;
use fem_core::mesh::structured::{BOTTOM, Grid, HOLE, LEFT, RIGHT, TOP, grid, rectangle};
use fem_core::norms::{displacement_error, energy_error, stress_error};
use fem_core::quadrature::{TRIANGLE_DEGREE_4, TRIANGLE_DEGREE_6};
use fem_core::sample::Sampler;
use fem_core::supports::Supports;
use fem_core::system::Problem;
use fem_core::tensor;
use std::f64::consts::PI;

const ALL: [u32; 5] = [BOTTOM, RIGHT, TOP, LEFT, HOLE];

fn rock() -> Elastic {
    Elastic::new(1.0, 0.3).unwrap()
}

/// A11: u = 0.1 sin(πx) e^y, v = 0.1 x² cos(πy) on the unit square, E = 1, ν = 0.3.
fn field([x, y]: [f64; 2]) -> [f64; 2] {
    [0.1 * (PI * x).sin() * y.exp(), 0.1 * x * x * (PI * y).cos()]
}

fn stress([x, y]: [f64; 2]) -> [f64; 3] {
    let (ux, uy) = (0.1 * PI * (PI * x).cos() * y.exp(), 0.1 * (PI * x).sin() * y.exp());
    let (vx, vy) = (0.2 * x * (PI * y).cos(), -0.1 * PI * x * x * (PI * y).sin());
    rock().stress_pa([ux, vy, uy + vx])
}

fn force([x, y]: [f64; 2]) -> [f64; 2] {
    let (sy, cy, sx, cx, e) = ((PI * y).sin(), (PI * y).cos(), (PI * x).sin(), (PI * x).cos(), y.exp());
    let bx = 5.0 * PI * x * sy / 26.0 - e * sx / 26.0 + 7.0 * PI * PI * e * sx / 52.0;
    let by = 7.0 * PI * PI * x * x * cy / 52.0 - 5.0 * PI * e * cx / 52.0 - cy / 13.0;
    [bx, by]
}

fn manufactured(n: usize, distortion: f64) -> Solved {
    let mesh = rectangle(Grid { n_u: n, n_v: n, curved: false }, [0.0, 0.0], [1.0, 1.0], distortion);
    let mut supports = Supports::none(mesh.points_m.len());
    prescribe(&mut supports, &mesh, &ALL, &|p| field(p).map(Some));
    let load = body_force(&mesh, &|_, p| force(p));
    Solved::new(mesh, vec![rock()], &supports, &load)
}

/// Errors of displacement (L2), raw stress and recovered stress (energy norm).
fn errors(s: &Solved) -> [f64; 3] {
    let recovered = stress_error(&s.mesh, &s.rock, &|e, xi| s.recovery.layout().evaluate(&s.values, e, xi), &stress);
    [displacement_error(&s.mesh, &s.u, &field, &TRIANGLE_DEGREE_6), energy_error(&s.mesh, &s.rock, &s.u, &stress), recovered]
}

#[test]
fn a11_manufactured_solution_orders_and_sizes() {
    // Source: closed form; sizes measured with an independent code on structured alternating triangles, n = 16.
    let s = stress([0.5, 0.5]);
    relative(s[0], -0.0453114, 1e-5, "σ_xx of the field");
    relative(s[1], -0.1057267, 1e-5, "σ_yy of the field");
    let [coarse, fine] = [16, 32].map(|n| errors(&manufactured(n, 0.0)));
    // The reference sampled the L2 error at the six points of the degree-4 rule, which see 8 % less than there is (the square has degree 6).
    let sampled = |s: &Solved| displacement_error(&s.mesh, &s.u, &field, &TRIANGLE_DEGREE_4);
    relative(sampled(&manufactured(16, 0.0)), 7.164e-6, 1e-3, "L2 error at n = 16, sampled");
    relative(coarse[0], 7.800e-6, 1e-3, "L2 error at n = 16 (regression pin)");
    relative(coarse[1], 7.372e-4, 1e-3, "energy error at n = 16");
    let order = |k: usize| (coarse[k] / fine[k]).log2();
    assert!((order(0) - 3.0).abs() < 0.1 && (order(1) - 2.0).abs() < 0.1, "orders {} {}", order(0), order(1));
}

#[test]
fn recovered_stress_is_much_better_than_raw() {
    // Source: Zienkiewicz & Zhu 1992 report recovered stress an order or more better on regular patches. Alternating diagonals and distortion are
    // not regular: there the gain is a factor, asked to be 8 at least and not to shrink with refinement.
    for distortion in [0.0, 0.2] {
        let [coarse, fine] = [16, 32].map(|n| errors(&manufactured(n, distortion)));
        let gain = [coarse[1] / coarse[2], fine[1] / fine[2]];
        assert!(gain[0] > 8.0 && gain[1] > gain[0], "gain over raw stress {gain:?}");
    }
}

#[test]
fn estimated_energy_error_is_near_the_true_one() {
    // Effectivity tends to 1 where the recovery is superconvergent; 5 % at n = 16.
    let s = manufactured(16, 0.2);
    let field = Field { displacements_m: &s.u, recovered_pa: &s.values };
    let estimate = energy_errors(&s.mesh, &s.rock, s.recovery.layout(), field).iter().map(|e| e * e).sum::<f64>().sqrt();
    relative(estimate, errors(&s)[1], 0.05, "estimated energy error");
}

#[test]
fn goal_error_of_a_mean_stress_is_near_the_true_one() {
    let s = manufactured(6, 0.2);
    let locator = Locator::new(&s.mesh);
    let (from, to) = ([0.31, 0.27], [0.52, 0.71]);
    let sampler = Sampler::segment(&s.mesh, &locator, (from, to), &|_| true).unwrap();
    let direction = [0.0, 1.0, 0.0];
    let mut held = Supports::none(s.mesh.points_m.len());
    prescribe(&mut held, &s.mesh, &ALL, &|_| [Some(0.0); 2]);
    let dual_load = sampler.dual_load(&s.mesh, &s.rock, direction);
    let z = Problem { mesh: &s.mesh, materials: &s.rock, supports: &held }
        .factor()
        .unwrap()
        .solve(&[dual_load])
        .unwrap()
        .remove(0)
        .displacements_m;
    let dual = s.recovery.recover(&s.mesh, &s.rock, &[&z]).remove(0);
    let fields = (Field { displacements_m: &s.u, recovered_pa: &s.values }, Field { displacements_m: &z, recovered_pa: &dual });
    let shares = goal_errors(&s.mesh, &s.rock, s.recovery.layout(), fields);
    let exact = fem_core::quadrature::gauss_unit(20)
        .into_iter()
        .map(|(t, w)| w * tensor::double_dot(direction, stress([from[0] + t * (to[0] - from[0]), from[1] + t * (to[1] - from[1])])));
    let (want, got) = (exact.sum::<f64>(), tensor::double_dot(direction, sampler.raw_mean(&s.mesh, &s.rock, &s.u)));
    let bound: f64 = shares.iter().map(|e| e.abs()).sum();
    assert!((want - got).abs() < bound, "true error {:e}, bound {bound:e}", want - got);
    assert!(bound < 30.0 * (want - got).abs(), "true error {:e}, bound {bound:e}, signed {:e}", want - got, shares.iter().sum::<f64>());
}

/// Exponent and coefficient of the symmetric corner field at 270 degrees. Source: Williams 1952; the exponent is recomputed in A10.
const LAMBDA: f64 = 0.544_483_736_782_464;
const Q: f64 = 0.543_075_578_836_737;

/// A12: displacement and stress of the corner field with the bisector along x, amplitude 1. Source: Szabó & Babuška 1991 (from memory); that
/// its strain and stress belong together and its faces are free is tested below.
fn corner([x, y]: [f64; 2]) -> ([f64; 2], [f64; 3]) {
    let (r, t, kappa) = (x.hypot(y), y.atan2(x), 3.0 - 4.0 * 0.3);
    let shear = 1.0 / 2.6;
    let (a, b) = (LAMBDA, Q * (LAMBDA + 1.0));
    let u = r.powf(a) / (2.0 * shear);
    let s = a * r.powf(a - 1.0);
    let displacement =
        [u * ((kappa - b) * (a * t).cos() - a * ((a - 2.0) * t).cos()), u * ((kappa + b) * (a * t).sin() + a * ((a - 2.0) * t).sin())];
    let stress = [
        s * ((2.0 - b) * ((a - 1.0) * t).cos() - (a - 1.0) * ((a - 3.0) * t).cos()),
        s * ((2.0 + b) * ((a - 1.0) * t).cos() + (a - 1.0) * ((a - 3.0) * t).cos()),
        s * ((a - 1.0) * ((a - 3.0) * t).sin() + b * ((a - 1.0) * t).sin()),
    ];
    (displacement, stress)
}

#[test]
fn a12_corner_field_limits_the_order() {
    // The field first: free faces at ±135 degrees, strain by differences gives the stress.
    let face = [(0.75 * PI).cos(), (0.75 * PI).sin()];
    let on_face = tensor::traction(corner(face).1, [-face[1], face[0]]);
    assert!(on_face[0].abs() + on_face[1].abs() < 1e-9, "{on_face:?}");
    let (p, h) = ([0.4, 0.7], 1e-6);
    let d = |k: usize, c: usize| {
        let (mut a, mut b) = (p, p);
        a[k] += h;
        b[k] -= h;
        (corner(a).0[c] - corner(b).0[c]) / (2.0 * h)
    };
    let by_strain = rock().stress_pa([d(0, 0), d(1, 1), d(1, 0) + d(0, 1)]);
    assert!((0..3).all(|k| (by_strain[k] - corner(p).1[k]).abs() < 1e-8), "{by_strain:?} {:?}", corner(p).1);
    // The body fills all but the quadrant x > 0, y < 0: its bisector points along 135 degrees.
    let angle = 0.75 * PI;
    let (s, c) = angle.sin_cos();
    let local = move |[x, y]: [f64; 2]| [c * x + s * y, -s * x + c * y];
    let exact_u = move |p: [f64; 2]| {
        let [u, v] = corner(local(p)).0;
        [c * u - s * v, s * u + c * v]
    };
    let exact_s = move |p: [f64; 2]| tensor::in_turned_axes(corner(local(p)).1, -angle);
    let energy = |n: usize| {
        let mesh = grid(Grid { n_u: 2 * n, n_v: 2 * n, curved: false }, &|[u, v]| [2.0 * u - 1.0, 2.0 * v - 1.0], &|i, j| i < n || n <= j);
        let mut supports = Supports::none(mesh.points_m.len());
        prescribe(&mut supports, &mesh, &ALL, &|p| if p[0].hypot(p[1]) < 1e-12 { [Some(0.0); 2] } else { exact_u(p).map(Some) });
        let load = vec![0.0; 2 * mesh.points_m.len()];
        let s = Solved::new(mesh, vec![rock()], &supports, &load);
        energy_error(&s.mesh, &s.rock, &s.u, &exact_s)
    };
    let order = (energy(8) / energy(16)).log2();
    // 0.02 as in the reference.
    assert!((order - 0.5445).abs() < 0.02, "order {order}");
}
