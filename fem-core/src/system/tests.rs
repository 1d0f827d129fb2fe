//! Refusals and the balance of forces.
use super::*;
use crate::mesh::structured::{BOTTOM, Grid, rectangle};

fn block() -> (Mesh, Supports) {
    let mesh = rectangle(Grid { n_u: 4, n_v: 3, curved: false }, [0.0, 0.0], [4.0, 3.0], 0.2);
    let mut supports = Supports::none(mesh.points_m.len());
    for edge in mesh.edges.iter().filter(|e| e.tag == BOTTOM) {
        edge.nodes.into_iter().for_each(|n| supports.fix(n));
    }
    (mesh, supports)
}

#[test]
fn refuses_what_cannot_be_solved() {
    let (mesh, supports) = block();
    let none = Supports::none(mesh.points_m.len());
    let message = |p: Problem| p.factor().unwrap_err().to_string();
    assert_eq!(message(Problem { mesh: &mesh, materials: &[], supports: &supports }), "region 0 has no material, 0 given");
    let rock = [Elastic::new(1e9, 0.2).unwrap()];
    let floating = message(Problem { mesh: &mesh, materials: &rock, supports: &none });
    assert!(floating.starts_with("1 part(s) of the body are free to move, the first near"), "{floating}");
    let mut all = supports.clone();
    (0..mesh.points_m.len() as u32).for_each(|n| all.fix(n));
    assert_eq!(
        message(Problem { mesh: &mesh, materials: &rock, supports: &all }),
        "every displacement is prescribed, nothing is left to solve"
    );
    let system = Problem { mesh: &mesh, materials: &rock, supports: &supports }.factor().unwrap();
    let mut loads = vec![0.0; 2 * mesh.points_m.len()];
    loads[7] = f64::NAN;
    assert_eq!(system.solve(&[loads]).unwrap_err(), SystemError::NotFinite { case: 0 });
}

#[test]
fn reactions_balance_the_loads_and_cases_superpose() {
    let (mesh, supports) = block();
    let rock = [Elastic::new(1e9, 0.2).unwrap()];
    let problem = Problem { mesh: &mesh, materials: &rock, supports: &supports };
    let system = problem.factor().unwrap();
    let weight = assembly::body_force(&mesh, &|_, _| [0.0, -25e3]);
    let push = assembly::body_force(&mesh, &|_, p| [3e3 * p[1], 0.0]);
    let both: Vec<f64> = weight.iter().zip(&push).map(|(a, b)| 2.0 * a - b).collect();
    let solved = system.solve(&[&weight, &push, &both]).unwrap();
    for k in 0..2 * mesh.points_m.len() {
        let sum = 2.0 * solved[0].displacements_m[k] - solved[1].displacements_m[k];
        assert!((solved[2].displacements_m[k] - sum).abs() < 1e-16, "displacements are of order 1e-4 m");
    }
    assert!(solved.iter().all(|s| s.residual < 1e-14));
    let reactions = problem.reactions_n_per_m(&solved[0].displacements_m, &weight);
    let sum = |d: usize| reactions.iter().skip(d).step_by(2).sum::<f64>();
    assert!(sum(0).abs() < 1e-7 && (sum(1) - 25e3 * 12.0).abs() < 1e-7, "{} {}", sum(0), sum(1));
}

#[test]
fn moved_supports_strain_the_body_as_told() {
    // u = 1e-3 x all round: uniform strain, so u inside is exact.
    let (mesh, _) = block();
    let mut supports = Supports::none(mesh.points_m.len());
    for edge in &mesh.edges {
        for node in edge.nodes {
            supports.prescribe(node, 0, 1e-3 * mesh.points_m[node as usize][0]);
            supports.prescribe(node, 1, 0.0);
        }
    }
    let rock = [Elastic::new(1e9, 0.2).unwrap()];
    let system = Problem { mesh: &mesh, materials: &rock, supports: &supports }.factor().unwrap();
    let u = &system.solve(&[vec![0.0; 2 * mesh.points_m.len()]]).unwrap()[0].displacements_m;
    for (p, u) in mesh.points_m.iter().zip(u.chunks(2)) {
        assert!((u[0] - 1e-3 * p[0]).abs() < 1e-15 && u[1].abs() < 1e-15);
    }
}

#[test]
fn strain_energy_is_half_the_work_of_the_loads() {
    // Source: Clapeyron's theorem.
    let (mesh, supports) = block();
    let rock = [Elastic::new(1e9, 0.2).unwrap()];
    let load = assembly::body_force(&mesh, &|_, p| [2e3 * p[1], -25e3]);
    let u =
        Problem { mesh: &mesh, materials: &rock, supports: &supports }.factor().unwrap().solve(&[&load]).unwrap().remove(0).displacements_m;
    let energy: f64 = crate::stress::strain_energies_j_per_m(&mesh, &rock, &u).iter().sum();
    let work: f64 = load.iter().zip(&u).map(|(f, u)| 0.5 * f * u).sum();
    assert!((energy / work - 1.0).abs() < 1e-10, "{energy} for {work}");
}
