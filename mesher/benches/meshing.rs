//! Times the mesher on a graded section with layers and a rounded undercut; prints triangles, seconds and angles.
//!
//! `cargo bench -p mesher` runs the sizes of daily use; `cargo bench -p mesher -- large` adds a million triangles. Each figure is the least of
//! several runs, on one thread.
#![expect(clippy::print_stdout, clippy::disallowed_methods, clippy::unwrap_used, reason = "a benchmark reads the clock and prints")]
use std::time::Instant;

use fem_core::mesh::Mesh;
use mesher::{Arc, Line, MeshInfo, MeshParams, Outline, SizeField, SizeSource, mesh};

const HEIGHT_M: f64 = 30.0;
const DEPTH_M: f64 = 6.0;
const RADIUS_M: f64 = 0.5;

fn main() {
    let large = std::env::args().any(|a| a == "large");
    // `cargo test` starts benches with no argument of their own to show that they run.
    let is_bench = std::env::args().any(|a| a == "--bench");
    println!("{:>10} {:>10} {:>10} {:>8} {:>8} {:>8}", "size", "triangles", "seconds", "us/tri", "min deg", "p5 deg");
    for (scale, n_runs) in [(1.0, 20), (0.62, 20), (0.28, 20)] {
        report(scale, if is_bench { n_runs } else { 1 });
        if !is_bench {
            return;
        }
    }
    background();
    if large {
        report(0.022, 3);
    }
}

fn report(scale: f64, n_runs: usize) {
    let (outline, size) = (outline(), sizes(scale));
    let (seconds, (mesh, info)) = least(n_runs, || run(&outline, &size));
    line(&format!("x {scale}"), seconds, &mesh, &info);
}

/// A size at every corner node of a former mesh, as error control asks for it: 0.8 of the mean side around the node.
fn background() {
    let (old, _) = run(&outline(), &sizes(0.62));
    let mut sums = vec![(0.0, 0.0); old.n_corners];
    for t in 0..old.triangles.len() {
        for &v in &old.triangles[t][..3] {
            sums[v as usize].0 += (4.0 / 3.0_f64.sqrt() * old.area_m2(t)).sqrt();
            sums[v as usize].1 += 1.0;
        }
    }
    let points = old.points_m.iter().zip(&sums).map(|(&p, (sum, n))| (p, 0.8 * sum / n)).collect();
    let size = SizeField { background: points, ..SizeField::uniform(10.0) };
    let outline = outline();
    let (seconds, (mesh, info)) = least(20, || run(&outline, &size));
    line("background", seconds, &mesh, &info);
}

fn run(outline: &Outline, size: &SizeField) -> (Mesh, MeshInfo) {
    mesh(outline, &|p| Some(region(p)), size, &MeshParams::default()).unwrap()
}

fn least<T>(n_runs: usize, mut f: impl FnMut() -> T) -> (f64, T) {
    let mut best: Option<(f64, T)> = None;
    for _ in 0..n_runs {
        let start = Instant::now();
        let value = f();
        let seconds = start.elapsed().as_secs_f64();
        if best.as_ref().is_none_or(|b| seconds < b.0) {
            best = Some((seconds, value));
        }
    }
    best.unwrap()
}

fn line(name: &str, seconds: f64, mesh: &Mesh, info: &MeshInfo) {
    let corners = |t: &[u32; 6]| [0, 1, 2].map(|i| mesh.points_m[t[i] as usize]);
    let mut angles: Vec<f64> =
        mesh.triangles.iter().map(|t| fem_core::mesh::quality::smallest_angle_rad(corners(t)).to_degrees()).collect();
    angles.sort_by(f64::total_cmp);
    let n = mesh.triangles.len();
    let (least, p5) = (info.smallest_angle_away_rad.to_degrees(), angles[n / 20]);
    println!("{name:>10} {n:>10} {seconds:>10.4} {:>8.3} {least:>8.2} {p5:>8.2}", 1e6 * seconds / n as f64);
}

fn region(p: [f64; 2]) -> u32 {
    if p[1] < 2.0 + 0.05 * p[0] { 0 } else { u32::from(p[1] < 24.0 - 0.02 * p[0]) + 1 }
}

/// A cliff with a rough face, an undercut with a rounded back, and two dipping contacts.
fn outline() -> Outline {
    let (sea, land, base) = (-60.0, 120.0, -60.0);
    let mut points = vec![[sea, base], [land, base], [land, HEIGHT_M + 2.0]];
    points.extend((0..=20).rev().map(|k| {
        let z = 2.0 + (HEIGHT_M - 2.0) * f64::from(k) / 20.0;
        [0.04 * z + 0.15 * (7.0 * z).sin(), z]
    }));
    let start = points.len();
    points.extend([[DEPTH_M - RADIUS_M, 1.6], [DEPTH_M, 1.1], [DEPTH_M - RADIUS_M, 0.6], [0.0, 0.0], [sea, -1.5]]);
    let mut arcs = vec![None; points.len()];
    for arc in &mut arcs[start..start + 2] {
        *arc = Some(Arc { center_m: [DEPTH_M - RADIUS_M, 1.1], radius_m: RADIUS_M });
    }
    let ground = Line { arcs, ..Line::ring(points, 1) };
    let contact =
        |at: f64, slope: f64, tag| Line::chain(vec![[sea - 5.0, at + slope * (sea - 5.0)], [land + 5.0, at + slope * (land + 5.0)]], tag);
    Outline { lines: vec![ground, contact(2.0, 0.05, 10), contact(24.0, -0.02, 11)] }
}

fn sizes(scale: f64) -> SizeField {
    let back = [DEPTH_M - RADIUS_M, 1.1];
    let sources = vec![
        SizeSource::point(back, 0.08 * scale).within(RADIUS_M),
        SizeSource::segment([0.0, 2.0], back, 0.25 * scale),
        SizeSource::segment([0.0, 2.0], [1.2, HEIGHT_M], 0.6 * scale),
        SizeSource::segment([1.2, HEIGHT_M], [60.0, HEIGHT_M + 1.0], 0.7 * scale),
    ];
    SizeField { largest_m: 10.0 * scale, gradation: 0.3, sources, background: Vec::new() }
}
