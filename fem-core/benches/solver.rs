//! Times from mesh to displacements on fixed graded meshes; prints sizes, seconds (and processor seconds, where the system tells), memory
//! and growth.
//!
//! `cargo bench -p fem-core --bench solver [-- SIZE..]` takes the sizes in unknowns; `-- --write FILE SIZE` writes the mesh for a peer,
//! `-- --once FILE SIZE` makes one run, writes its displacements and prints one line of JSON. Run as a test it takes the smallest size only.
#![expect(clippy::disallowed_methods, clippy::print_stdout, reason = "a bench reads the clock, prints and writes files on request")]
use fem_core::assembly::{PRESCRIBED, body_force, pattern, stiffness};
use fem_core::elasticity::Elastic;
use fem_core::mesh::Mesh;
use fem_core::ordering::elimination_order;
use fem_core::solve::{Buffers, Factorization, SolveInfo, SolveParams, Symbolic};
use fem_core::supports::Supports;
use std::fmt::Write as _;
use std::sync::Arc;
use std::time::Instant;

#[path = "shared/sector.rs"]
mod sector;

/// Sizes in unknowns of a full run.
const SIZES: [usize; 4] = [2_000, 50_000, 400_000, 1_000_000];
/// Runs a size; the fastest of each step counts, because other work on the machine only ever adds.
const N_RUNS: usize = 3;
const N_STEPS: usize = 6;
const STEPS: [&str; N_STEPS] = ["pattern", "stiffness", "order", "symbolic", "numeric", "solve"];

struct Run {
    seconds: [f64; N_STEPS],
    processor_seconds: f64,
    info: SolveInfo,
    displacements_m: Vec<f64>,
    buffers: Buffers,
}

fn run(mesh: &Mesh, supports: &Supports, buffers: Buffers) -> Run {
    let mut seconds = [0.0; N_STEPS];
    let processor_start = processor_seconds();
    let mut start = Instant::now();
    let mut lap = |i: usize| {
        let now = Instant::now();
        seconds[i] = now.duration_since(start).as_secs_f64();
        start = now;
    };
    let rock = [Elastic::new(2e9, 0.3).expect("a valid rock")];
    let pattern = pattern(mesh, supports);
    lap(0);
    let matrix = stiffness(mesh, &rock, supports, &pattern);
    let loads = body_force(mesh, &|_, _| [0.0, -22e3]);
    let free = &pattern.dofs.free_of_dof;
    let mut right: Vec<f64> = loads.iter().zip(free).filter(|(_, f)| **f != PRESCRIBED).map(|(load, _)| *load).collect();
    lap(1);
    let order = elimination_order(mesh, &pattern.dofs);
    lap(2);
    let symbolic = Symbolic::new(&matrix, &order).expect("the factor fits");
    lap(3);
    let factorization = Factorization::new(matrix, Arc::new(symbolic), &SolveParams::default(), buffers).expect("the sector is held");
    lap(4);
    let info = factorization.solve(&mut right, 1).expect("the solution holds");
    lap(5);
    let processor_seconds = processor_seconds() - processor_start;
    let displacements_m = free.iter().map(|&f| if f == PRESCRIBED { 0.0 } else { right[f as usize] }).collect();
    Run { seconds, processor_seconds, info, displacements_m, buffers: factorization.into_buffers() }
}

/// Processor time of all threads in s, 0 where the system does not tell.
fn processor_seconds() -> f64 {
    let Ok(tasks) = std::fs::read_dir("/proc/self/task") else { return 0.0 };
    let of_task = |path: std::path::PathBuf| std::fs::read_to_string(path.join("schedstat")).ok()?.split(' ').next()?.parse::<f64>().ok();
    tasks.flatten().filter_map(|task| of_task(task.path())).sum::<f64>() / 1e9
}

/// Peak resident memory of this process in bytes, 0 where the system does not tell.
fn peak_bytes() -> f64 {
    let status = std::fs::read_to_string("/proc/self/status").unwrap_or_default();
    let kib = status.lines().find_map(|line| line.strip_prefix("VmHWM:")?.trim().strip_suffix(" kB")?.trim().parse::<f64>().ok());
    1024.0 * kib.unwrap_or(0.0)
}

/// Prints a size; returns unknowns and cost, given those of the size before.
fn bench(size: usize, before: Option<(f64, f64)>) -> (f64, f64) {
    let mesh = sector::sector(size);
    let supports = sector::supports(&mesh);
    let mut buffers = Buffers::default();
    let mut best = [f64::INFINITY; N_STEPS];
    let (mut cold, mut processor) = (0.0, f64::INFINITY);
    let mut info = None;
    for i in 0..N_RUNS {
        let done = run(&mesh, &supports, buffers);
        buffers = done.buffers;
        if i == 0 {
            cold = done.seconds.iter().sum();
        }
        for (best, seconds) in best.iter_mut().zip(done.seconds) {
            *best = best.min(seconds);
        }
        processor = processor.min(done.processor_seconds);
        info = Some(done.info);
    }
    let info = info.expect("there is at least one run");
    let (n, total) = (info.n_unknowns as f64, best.iter().sum::<f64>());
    let steps: String = STEPS.iter().zip(best).fold(String::new(), |mut text, (name, seconds)| {
        let _ = write!(text, " {name} {seconds:.3}");
        text
    });
    println!(
        "{n:>9} unknowns |{steps} | total {total:.3} s, cold {cold:.3} s, processor {processor:.3} s | factor {:.1} M entries, {:.2} Gflop | peak {:.2} kB an unknown",
        info.n_factor_entries as f64 / 1e6,
        info.flops / 1e9,
        peak_bytes() / n / 1e3
    );
    println!(
        "          residual {:.1e}, backward error {:.1e}, pivot ratio {:.1e}",
        info.relative_residual, info.backward_error, info.pivot_ratio
    );
    let cost = if processor > 0.0 { processor } else { total };
    if let Some((n0, cost0)) = before {
        println!("          grows as n^{:.2} from {n0} unknowns", (cost / cost0).ln() / (n / n0).ln());
    }
    (n, cost)
}

/// Plain text: counts, then a line per node `x y fixed_x fixed_y`, then a line per triangle of six node numbers.
fn mesh_text(mesh: &Mesh) -> String {
    let prescribed = sector::supports(mesh);
    let mut text = format!("{} {} {}\n", mesh.points_m.len(), mesh.n_corners, mesh.triangles.len());
    for (point, fixed) in mesh.points_m.iter().zip(prescribed.prescribed_m().chunks(2)) {
        let _ = writeln!(text, "{:?} {:?} {} {}", point[0], point[1], u8::from(fixed[0].is_some()), u8::from(fixed[1].is_some()));
    }
    for [a, b, c, d, e, f] in &mesh.triangles {
        let _ = writeln!(text, "{a} {b} {c} {d} {e} {f}");
    }
    text
}

/// One run in fresh memory, figures as JSON, displacements into a file.
fn once(file: &str, size: usize) {
    let mesh = sector::sector(size);
    let supports = sector::supports(&mesh);
    let done = run(&mesh, &supports, Buffers::default());
    println!(
        "{{\"seconds\": {}, \"processor_seconds\": {}, \"solve_seconds\": {}, \"unknowns\": {}, \"peak_bytes\": {}}}",
        done.seconds.iter().sum::<f64>(),
        done.processor_seconds,
        done.seconds[2..].iter().sum::<f64>(),
        done.info.n_unknowns,
        peak_bytes()
    );
    let text = done.displacements_m.chunks(2).fold(String::new(), |mut text, u| {
        let _ = writeln!(text, "{:?} {:?}", u[0], u[1]);
        text
    });
    std::fs::write(file, text).expect("the file can be written");
}

fn main() {
    let arguments: Vec<String> = std::env::args().skip(1).filter(|a| a != "--bench").collect();
    let is_bench = std::env::args().any(|a| a == "--bench");
    let size = |text: &String| text.parse::<usize>().expect("a size in unknowns");
    match arguments.as_slice() {
        [mode, file, n] if mode == "--write" => std::fs::write(file, mesh_text(&sector::sector(size(n)))).expect("the file can be written"),
        [mode, file, n] if mode == "--once" => once(file, size(n)),
        sizes => {
            let given: Vec<usize> = sizes.iter().map(size).collect();
            let sizes = if !given.is_empty() {
                &given[..]
            } else if is_bench {
                &SIZES[..]
            } else {
                &SIZES[..1]
            };
            sizes.iter().fold(None, |before, &size| Some(bench(size, before)));
        }
    }
}
