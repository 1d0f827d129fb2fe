//! The overhang by statics, node forces and stress (check C06), on meshes that follow the cut and that do not.
use super::*;
use crate::assembly::{body_force, edge_pressure};
use crate::elasticity::Elastic;
use crate::mesh::structured::{BOTTOM, Grid, LEFT, RIGHT, TOP, distorted, grid};
use crate::recovery::{Recovery, RecoveryParams, SINGULAR_ANGLE_RAD, singular_nodes};
use crate::supports::Supports;
use crate::system::Problem;

const GAMMA: f64 = 25e3;
/// Overhang of 5 m by 4 m over a slot 1 m high; back at x = 0, sea on the left; ground 15 m behind, 5 m below the slot. y = 0 at the roof.
const OVERHANG: f64 = 5.0;
const THICKNESS: f64 = 4.0;

fn overhang(fine: usize, distortion: f64) -> (Mesh, Supports) {
    let cells = Grid { n_u: 20 * fine, n_v: 10 * fine, curved: false };
    let map = |uv: [f64; 2]| {
        // Distortion vanishes on the slot: its two horizontal grid lines and its back.
        let [u, v] = uv;
        let keep = (std::f64::consts::PI * 20.0 * u).sin().abs() * (std::f64::consts::PI * 10.0 * v).sin().abs();
        let on_slot = u <= 0.25 + 1e-9 && 0.5 - 1e-9 <= v && v <= 0.6 + 1e-9;
        let [u, v] = if on_slot { [u, v] } else { distorted(cells, uv, distortion * keep.max(0.3)) };
        [20.0 * u - 5.0, 10.0 * v - 6.0]
    };
    let mesh = grid(cells, &map, &|i, j| !(i < 5 * fine && 5 * fine <= j && j < 6 * fine));
    let mut supports = Supports::none(mesh.points_m.len());
    for edge in &mesh.edges {
        for node in edge.nodes {
            let is_platform = mesh.points_m[node as usize][1] < -0.5;
            match edge.tag {
                BOTTOM => supports.fix(node),
                RIGHT => supports.prescribe(node, 0, 0.0),
                LEFT if is_platform => supports.prescribe(node, 0, 0.0),
                _ => {}
            }
        }
    }
    (mesh, supports)
}

fn rock() -> Vec<Elastic> {
    vec![Elastic::new(5e9, 0.25).unwrap()]
}

#[track_caller]
fn close(got: f64, want: f64, tolerance: f64, what: &str) {
    assert!((got - want).abs() <= tolerance, "{what}: {got} for {want}");
}

#[test]
fn frame_and_fibre_stresses() {
    // Ground to roof, 4 m: e up, n landward. N = 0, M = 1250 kN: ±6·1250/16 = ±468.75 kPa (closed form C01).
    let cut = Cut { from_m: [0.0, 4.0], to_m: [0.0, 0.0] };
    assert_eq!((cut.axis(), cut.normal(), cut.middle_m()), ([0.0, 1.0], [1.0, 0.0], [0.0, 2.0]));
    let r = Resultants { normal_n_per_m: 0.0, shear_n_per_m: 500e3, moment_n: 1250e3 };
    let [top, bottom] = r.fibre_stresses_pa(4.0);
    close(top, 468.75e3, 1e-9, "fibre at from");
    close(bottom, -468.75e3, 1e-9, "fibre at to");
    // A pull at the top gives tension there.
    let pull = Resultants::of_force(&cut, [0.0, 4.0], [1.0, 0.0]);
    assert_eq!(pull, Resultants { normal_n_per_m: 1.0, shear_n_per_m: 0.0, moment_n: 2.0 });
}

#[test]
fn c06_node_forces_give_the_section_forces_of_an_overhang() {
    // Source: statics of the cut-off body. Vertical cut at the back: N = 0, V = γ h L = 500 kN/m, M = γ h L²/2 = 1250 kN.
    for distortion in [0.0, 0.25] {
        let (mesh, supports) = overhang(2, distortion);
        mesh.check().unwrap();
        let rock = rock();
        let system = Problem { mesh: &mesh, materials: &rock, supports: &supports }.factor().unwrap();
        let weight = body_force(&mesh, &|_, _| [0.0, -GAMMA]);
        let top: Vec<_> = mesh.edges.iter().copied().filter(|e| e.tag == TOP).collect();
        let breaks = [[-3.3, THICKNESS], [1.4, THICKNESS]];
        let strip = |p: [f64; 2]| if breaks[0][0] < p[0] && p[0] < breaks[1][0] { 20e3 + 1e3 * p[0] } else { 0.0 };
        let load = edge_pressure(&mesh, &top, &breaks, &strip);
        let solved = system.solve(&[&weight, &load]).unwrap();
        let locator = Locator::new(&mesh);
        // From ground points landward and seaward of the back: the free body is a trapezoid, first moments by hand.
        for lean in [0.0, -1.3, 0.77, 2.1] {
            let cut = Cut { from_m: [lean, THICKNESS], to_m: [0.0, 0.0] };
            let body = free_body(&mesh, &locator, cut).unwrap();
            let none = CutLoads {
                body_force_n_per_m3: &|_, _| [0.0, -GAMMA],
                kinks: crate::assembly::SMOOTH,
                edges: &[],
                breaks_m: &[],
                traction_pa: &|_, _| [0.0, 0.0],
                given_stress_pa: &|_, _| [0.0; 3],
            };
            let got = body.resultants(&mesh, &rock, &solved[0].displacements_m, &none);
            let parts = [(OVERHANG * THICKNESS, [-2.5, 2.0]), (0.5 * lean * THICKNESS, [lean / 3.0, 8.0 / 3.0])];
            let want = parts
                .iter()
                .fold(Resultants::default(), |sum, &(area, at)| sum.plus(Resultants::of_force(&cut, at, [0.0, GAMMA * area]), 1.0));
            let size = GAMMA * OVERHANG * THICKNESS;
            close(got.normal_n_per_m, want.normal_n_per_m, 1e-8 * size, "N");
            close(got.shear_n_per_m, want.shear_n_per_m, 1e-8 * size, "V");
            close(got.moment_n, want.moment_n, 1e-8 * size * OVERHANG, "M");
            if lean.abs() < 1e-12 {
                close(got.shear_n_per_m, 500e3, 1e-3, "V of C06");
                close(got.moment_n, 1250e3, 1e-2, "M of C06");
            }
            // The strip load: total and moment of 20 kPa + 1 kPa/m x from −3.3 m to the cut.
            let end = lean.min(1.4);
            let integral = |f: &dyn Fn(f64) -> f64| {
                let (a, b) = (-3.3, end);
                (b - a) / 6.0 * (f(a) + 4.0 * f(0.5 * (a + b)) + f(b))
            };
            let total = integral(&|x| 20e3 + 1e3 * x);
            let first = integral(&|x| (20e3 + 1e3 * x) * x);
            let strip_loads = CutLoads {
                body_force_n_per_m3: &|_, _| [0.0; 2],
                kinks: crate::assembly::SMOOTH,
                edges: &top,
                breaks_m: &breaks,
                traction_pa: &|p, n| [-strip(p) * n[0], -strip(p) * n[1]],
                given_stress_pa: &|_, _| [0.0; 3],
            };
            let got = body.resultants(&mesh, &rock, &solved[1].displacements_m, &strip_loads);
            let want = Resultants::of_force(&cut, [first / total, THICKNESS], [0.0, total]);
            close(got.normal_n_per_m, want.normal_n_per_m, 1e-8 * size, "N of the strip");
            close(got.shear_n_per_m, want.shear_n_per_m, 1e-8 * size, "V of the strip");
            close(got.moment_n, want.moment_n, 1e-8 * size * OVERHANG, "M of the strip");
        }
    }
}

#[test]
fn stress_along_the_line_agrees_within_its_own_error() {
    let (mut last, rock) = (f64::INFINITY, rock());
    for fine in [2, 4] {
        let (mesh, supports) = overhang(fine, 0.0);
        let problem = Problem { mesh: &mesh, materials: &rock, supports: &supports };
        let u = problem.factor().unwrap().solve(&[body_force(&mesh, &|_, _| [0.0, -GAMMA])]).unwrap().remove(0).displacements_m;
        let groups = vec![0; mesh.triangles.len()];
        let singular = singular_nodes(&mesh, SINGULAR_ANGLE_RAD);
        assert_eq!(singular.len(), 2, "both corners of the slot's back");
        let recovery = Recovery::new(&mesh, &RecoveryParams { groups: &groups, singular_nodes: &singular });
        let values = recovery.recover(&mesh, &rock, &[&u]).remove(0);
        let locator = Locator::new(&mesh);
        // Mid-overhang, off the mesh lines: V = γ h x, M = γ h x²/2 with x = 2.63 m from the free end.
        let x = 2.63;
        let cut = CutSampler::new(&mesh, &locator, Cut { from_m: [x - OVERHANG, THICKNESS], to_m: [x - OVERHANG, 0.0] });
        close(cut.covered_m, THICKNESS, 1e-9, "length inside");
        let recovered = |p: &CutPoint| recovery.layout().evaluate(&values, p.element as usize, p.xi);
        let raw = |p: &CutPoint| crate::stress::raw_stress_pa(&mesh, &rock, &u, (p.element as usize, p.xi));
        let (got, error) = cut.with_error(recovered, raw);
        let (v, m) = (GAMMA * THICKNESS * x, 0.5 * GAMMA * THICKNESS * x * x);
        let off = ((got.moment_n - m).abs() / m).max((got.shear_n_per_m - v).abs() / v);
        // Reference tolerance of C06 by stress integration: 1 %.
        assert!(off < 0.01 && off < 0.5 * last.max(1e-4), "relative error {off}, before {last}");
        assert!(error.moment_n < 0.05 * m && error.shear_n_per_m < 0.05 * v, "{error:?}");
        last = off;
    }
}

#[test]
fn both_sides_of_a_cut_through_a_curved_body_agree() {
    // Source: action and reaction. An arch leg with curved sides under weight, pore pressure, initial stress and pressure on its curved back:
    // the part above and the part below the cut must give the same N and V, and M with the other sign.
    let polar = |[u, v]: [f64; 2]| {
        let (r, a) = (2.0 + u, std::f64::consts::FRAC_PI_2 * v);
        [r * a.cos(), r * a.sin()]
    };
    let mesh = grid(Grid { n_u: 3, n_v: 7, curved: true }, &polar, &|_, _| true);
    let mut supports = Supports::none(mesh.points_m.len());
    for edge in mesh.edges.iter().filter(|e| e.tag == BOTTOM) {
        edge.nodes.into_iter().for_each(|n| supports.fix(n));
    }
    let given = |_: usize, [x, y]: [f64; 2]| [3e3 * y - 9.81e3 * (4.0 - y), 2e3 * x - 9.81e3 * (4.0 - y), 1e3 * (x - y)];
    let pressure = |p: [f64; 2]| 9.81e3 * (4.0 - p[1]);
    let back: Vec<_> = mesh.edges.iter().copied().filter(|e| e.tag == RIGHT).collect();
    let parts = [
        body_force(&mesh, &|_, _| [1e3, -GAMMA]),
        edge_pressure(&mesh, &back, &[], &pressure),
        crate::assembly::initial_stress(&mesh, &given),
    ];
    let load: Vec<f64> = (0..parts[0].len()).map(|i| parts.iter().map(|p| p[i]).sum()).collect();
    let rock = rock();
    let u =
        Problem { mesh: &mesh, materials: &rock, supports: &supports }.factor().unwrap().solve(&[load]).unwrap().remove(0).displacements_m;
    let loads = CutLoads {
        body_force_n_per_m3: &|_, _| [1e3, -GAMMA],
        kinks: crate::assembly::SMOOTH,
        edges: &back,
        breaks_m: &[],
        traction_pa: &|p, n| [-pressure(p) * n[0], -pressure(p) * n[1]],
        given_stress_pa: &given,
    };
    let locator = Locator::new(&mesh);
    for (outside, inside) in [(0.71, 0.83), (0.4, 0.22), (1.1, 1.3)] {
        // The ends overshoot the body a little; beyond it there is nothing.
        let ends = ([3.02 * f64::cos(outside), 3.02 * f64::sin(outside)], [1.98 * f64::cos(inside), 1.98 * f64::sin(inside)]);
        let [a, b] = [Cut { from_m: ends.0, to_m: ends.1 }, Cut { from_m: ends.1, to_m: ends.0 }]
            .map(|cut| free_body(&mesh, &locator, cut).unwrap().resultants(&mesh, &rock, &u, &loads));
        let size = 1e5;
        close(a.normal_n_per_m, b.normal_n_per_m, 1e-8 * size, "N");
        close(a.shear_n_per_m, b.shear_n_per_m, 1e-8 * size, "V");
        close(a.moment_n, -b.moment_n, 1e-8 * size, "M");
        assert!(a.shear_n_per_m.abs() > 1e3 && a.moment_n.abs() > 1e3, "{a:?}");
    }
}

#[test]
fn a_cut_that_does_not_sever_is_refused() {
    let (mesh, _) = overhang(2, 0.0);
    let locator = Locator::new(&mesh);
    let inside = Cut { from_m: [6.1, 3.0], to_m: [6.2, -3.0] };
    assert!(matches!(free_body(&mesh, &locator, inside), Err(FreeBodyError::NotSevered { .. })));
    let outside = Cut { from_m: [-8.0, 3.0], to_m: [-8.0, -3.0] };
    let message = free_body(&mesh, &locator, outside).unwrap_err().to_string();
    assert_eq!(message, "no element lies to the right of the cut from (-8.000, 3.000) to (-8.000, -3.000) m");
}
