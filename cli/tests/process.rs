//! The program as a process: exit codes, what stands on which stream, and that nothing half-written is ever left behind.
#![expect(clippy::unwrap_used, clippy::disallowed_methods, reason = "tests read files and the clock, and fail by panicking")]
use std::path::{Path, PathBuf};
use std::process::{Child, Command, Output, Stdio};
use std::time::{Duration, Instant};

/// A model that takes little time.
const MODEL: &str = r#"format = 1
title = "Small cliff"

[section]
surface = [[-20.0, 0.0], [0.0, 0.0], [1.5, 0.0], [1.5, 1.0], [0.0, 1.0], [0.0, 8.0], [40.0, 8.0]]

[[layers]]
rock = "stone"

[rocks.stone]
unit_weight_kn_m3 = 22
youngs_modulus_mpa = 2000
poissons_ratio = 0.25
strength_basis = "rock mass"
tensile_strength_kpa = 400
cohesion_kpa = 600
friction_angle_deg = 35
k0 = 0.4

[[situations]]
name = "ordinary"
groundwater = "dry, observed"

[undercut]
setting = "straight cliff"
growth = "advance"
search_to_depth_m = 2.5
depth_step_m = 1.0

[checks]
target_error = 0.05
"#;

/// A fresh working folder with a model in it.
struct Scratch {
    folder: PathBuf,
}

impl Scratch {
    fn new(name: &str) -> Self {
        let folder = std::env::temp_dir().join(format!("brinkline-process-{name}-{}", std::process::id()));
        let _ = std::fs::remove_dir_all(&folder);
        std::fs::create_dir_all(&folder).unwrap();
        std::fs::write(folder.join("model.toml"), MODEL).unwrap();
        Self { folder }
    }

    fn command(&self, args: &[&str]) -> Command {
        let mut command = Command::new(env!("CARGO_BIN_EXE_brinkline"));
        command.args(args).current_dir(&self.folder).stdin(Stdio::null());
        command
    }

    fn run(&self, args: &[&str]) -> Output {
        self.command(args).output().unwrap()
    }

    fn start(&self, args: &[&str]) -> Child {
        self.command(args).stdout(Stdio::null()).stderr(Stdio::null()).spawn().unwrap()
    }

    fn names(&self) -> Vec<String> {
        let mut names: Vec<String> =
            std::fs::read_dir(&self.folder).unwrap().map(|entry| entry.unwrap().file_name().to_string_lossy().into_owned()).collect();
        names.sort();
        names
    }

    /// Waits until a run has opened its hidden folder.
    fn wait_for(&self, name: &str) {
        let start = Instant::now();
        while !self.folder.join(name).exists() {
            assert!(start.elapsed() < Duration::from_secs(30), "{name} never appeared: {:?}", self.names());
            std::thread::sleep(Duration::from_millis(2));
        }
    }
}

impl Drop for Scratch {
    fn drop(&mut self) {
        let _ = std::fs::remove_dir_all(&self.folder);
    }
}

#[track_caller]
fn code(output: &Output) -> i32 {
    output.status.code().unwrap_or_else(|| panic!("ended by a signal: {}", error_text(output)))
}

fn text(output: &Output) -> String {
    String::from_utf8_lossy(&output.stdout).into_owned()
}

fn error_text(output: &Output) -> String {
    String::from_utf8_lossy(&output.stderr).into_owned()
}

/// All files of a folder with their bytes.
fn bytes(folder: &Path) -> Vec<(PathBuf, Vec<u8>)> {
    let mut all = Vec::new();
    for entry in std::fs::read_dir(folder).unwrap() {
        let path = entry.unwrap().path();
        if path.is_dir() { all.extend(bytes(&path)) } else { all.push((path.clone(), std::fs::read(&path).unwrap())) }
    }
    all.sort();
    all
}

#[test]
fn wrong_use_is_2_and_unreadable_is_4_and_wrong_model_is_3() {
    let scratch = Scratch::new("codes");
    assert_eq!(code(&scratch.run(&["asess", "model.toml"])), 2);
    assert_eq!(code(&scratch.run(&["check"])), 2);
    assert_eq!(code(&scratch.run(&["check", "no-such-file.toml"])), 4);
    std::fs::write(scratch.folder.join("wrong.toml"), "format = 1\n").unwrap();
    let wrong = scratch.run(&["assess", "wrong.toml"]);
    assert_eq!(code(&wrong), 3);
    assert_eq!(text(&wrong), "", "stdout is data");
    assert_eq!(scratch.names(), ["model.toml", "wrong.toml"], "nothing is written for a wrong model");
    // Where several apply, a file that cannot be written counts before a wrong model.
    std::fs::create_dir(scratch.folder.join("wrong-results")).unwrap();
    assert_eq!(code(&scratch.run(&["assess", "wrong.toml"])), 4);
}

#[test]
fn check_prints_a_table_and_writes_nothing() {
    let scratch = Scratch::new("check");
    let output = scratch.run(&["check", "model.toml"]);
    assert_eq!(code(&output), 0, "{}", error_text(&output));
    let printed = text(&output);
    assert_eq!(printed.lines().last(), Some("This looks at today's shape only; it says nothing about tomorrow."));
    assert!(printed.contains("undercut depth (horizontal)") && printed.contains("Cautions"), "{printed}");
    assert_eq!(scratch.names(), ["model.toml"]);
    let quiet = scratch.run(&["check", "model.toml", "--quiet"]);
    assert!(text(&quiet).contains("Cautions") && !text(&quiet).contains("Numerical quality"));
}

#[test]
fn json_is_the_only_thing_on_standard_output() {
    let scratch = Scratch::new("json");
    let output = scratch.run(&["check", "model.toml", "--json"]);
    let value: serde_json::Value = serde_json::from_slice(&output.stdout).unwrap();
    assert_eq!(value["program"]["name"], "brinkline");
    assert_eq!(value["model"]["file"], "model.toml");
    assert!(value["surveyed"]["checks"].as_array().is_some_and(|checks| !checks.is_empty()));
}

#[test]
fn assess_writes_the_same_bytes_for_any_number_of_threads_and_never_overwrites_unasked() {
    let scratch = Scratch::new("assess");
    let first = scratch.run(&["assess", "model.toml", "--threads", "1"]);
    assert_eq!(code(&first), 0, "{}", error_text(&first));
    let results = scratch.folder.join("model-results");
    let written = bytes(&results);
    for name in ["report.html", "summary.json", "depths.csv", "section.svg", "model.toml", "fields/series.pvd"] {
        assert!(results.join(name).is_file(), "{name}");
    }
    assert_eq!(code(&scratch.run(&["assess", "model.toml"])), 4);
    assert_eq!(bytes(&results), written, "an existing folder is not touched");
    assert_eq!(code(&scratch.run(&["assess", "model.toml", "--overwrite", "--threads", "2"])), 0);
    assert_eq!(bytes(&results), written, "the results do not depend on the number of threads");
    assert_eq!(scratch.names(), ["model-results", "model.toml"]);
}

#[cfg(unix)]
fn signal(child: &Child, name: &str) {
    assert!(Command::new("kill").args([name, &child.id().to_string()]).status().unwrap().success());
}

#[cfg(unix)]
#[test]
fn ctrl_c_is_130_and_leaves_nothing() {
    let scratch = Scratch::new("interrupt");
    let mut child = scratch.start(&["assess", "model.toml"]);
    scratch.wait_for(".model-results.writing");
    signal(&child, "-INT");
    assert_eq!(child.wait().unwrap().code(), Some(130));
    assert_eq!(scratch.names(), ["model.toml"]);
}

#[cfg(unix)]
#[test]
fn a_killed_run_leaves_no_results_and_the_next_one_is_clean() {
    let scratch = Scratch::new("killed");
    let mut child = scratch.start(&["assess", "model.toml"]);
    scratch.wait_for(".model-results.writing");
    signal(&child, "-KILL");
    child.wait().unwrap();
    assert!(!scratch.folder.join("model-results").exists());
    assert_eq!(code(&scratch.run(&["assess", "model.toml"])), 0);
    assert_eq!(scratch.names(), ["model-results", "model.toml"]);
}

#[cfg(unix)]
#[test]
fn two_runs_do_not_share_a_folder() {
    let scratch = Scratch::new("two");
    let mut first = scratch.start(&["assess", "model.toml"]);
    scratch.wait_for(".model-results.writing");
    let second = scratch.run(&["assess", "model.toml"]);
    assert_eq!(code(&second), 4);
    assert!(error_text(&second).contains("another run is writing to `model-results`"), "{}", error_text(&second));
    assert_eq!(first.wait().unwrap().code(), Some(0));
    assert_eq!(scratch.names(), ["model-results", "model.toml"]);
}

/// Needs the right to mount a small file system; says so where it is missing.
#[cfg(target_os = "linux")]
#[test]
fn a_full_disk_is_4_and_leaves_nothing() {
    let scratch = Scratch::new("full");
    let small = scratch.folder.join("small");
    std::fs::create_dir(&small).unwrap();
    let mounted = Command::new("mount").args(["-t", "tmpfs", "-o", "size=300k", "tmpfs"]).arg(&small).output();
    if !mounted.is_ok_and(|output| output.status.success()) {
        println!("SKIPPED, LOUDLY: no right to mount a small file system; the full disk was NOT tried");
        return;
    }
    let output = scratch.run(&["assess", "model.toml", "--out", "small/results"]);
    let left: Vec<_> = std::fs::read_dir(&small).unwrap().map(|entry| entry.unwrap().file_name()).collect();
    assert!(Command::new("umount").arg(&small).status().unwrap().success());
    assert_eq!(code(&output), 4, "{}", error_text(&output));
    assert!(error_text(&output).contains("cannot write `small/results/"), "{}", error_text(&output));
    assert!(left.is_empty(), "{left:?}");
}

#[test]
fn a_letterhead_that_does_not_work_is_said_before_any_work() {
    let scratch = Scratch::new("letterhead");
    std::fs::write(scratch.folder.join("firm.html"), "<h1>{{ title </h1>").unwrap();
    let output = scratch.run(&["assess", "model.toml", "--letterhead", "firm.html"]);
    assert_eq!(code(&output), 4);
    assert!(error_text(&output).contains("the letterhead `firm.html` cannot be used"), "{}", error_text(&output));
    assert_eq!(scratch.names(), ["firm.html", "model.toml"]);
}
