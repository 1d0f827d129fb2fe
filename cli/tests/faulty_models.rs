//! Every faulty model through the program itself: its exit code, nothing on standard output, nothing written. And exit code 1.
#![expect(clippy::unwrap_used, clippy::disallowed_methods, reason = "tests read files and fail by panicking")]
use std::path::{Path, PathBuf};
use std::process::{Command, Output, Stdio};

/// A face of 8 m with a hollow of 1.5 m; what it holds is filled in.
const CLIFF: &str = r#"format = 1
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
tensile_strength_kpa = TENSION
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

struct Scratch(PathBuf);

impl Scratch {
    fn new(name: &str) -> Self {
        let folder = std::env::temp_dir().join(format!("brinkline-faulty-{name}-{}", std::process::id()));
        let _ = std::fs::remove_dir_all(&folder);
        std::fs::create_dir_all(&folder).unwrap();
        Self(folder)
    }

    fn names(&self) -> Vec<String> {
        let mut names: Vec<String> =
            std::fs::read_dir(&self.0).unwrap().map(|entry| entry.unwrap().file_name().to_string_lossy().into_owned()).collect();
        names.sort();
        names
    }
}

impl Drop for Scratch {
    fn drop(&mut self) {
        let _ = std::fs::remove_dir_all(&self.0);
    }
}

fn run(folder: &Path, args: &[&str]) -> Output {
    Command::new(env!("CARGO_BIN_EXE_brinkline")).args(args).current_dir(folder).stdin(Stdio::null()).output().unwrap()
}

#[test]
fn every_faulty_model_ends_with_its_code_and_writes_nothing() {
    let folder = Path::new(env!("CARGO_MANIFEST_DIR")).join("../tests/data/bad");
    let scratch = Scratch::new("all");
    let (mut wrong, mut tried) = (Vec::new(), 0);
    for entry in std::fs::read_dir(folder).unwrap() {
        let path = entry.unwrap().path();
        if path.extension().is_none_or(|extension| extension != "toml") {
            continue;
        }
        tried += 1;
        let text = String::from_utf8_lossy(&std::fs::read(&path).unwrap()).into_owned();
        let promised: i32 = text.lines().next().and_then(|line| line.strip_prefix("# EXIT ")).unwrap().trim().parse().unwrap();
        let output = run(&scratch.0, &["assess", path.to_str().unwrap(), "--out", "results"]);
        let name = path.file_name().unwrap().to_string_lossy().into_owned();
        if output.status.code() != Some(promised) || !(promised == 3 || promised == 4) {
            wrong.push(format!("{name}: exit {:?}, promised {promised}", output.status.code()));
        }
        if !output.stdout.is_empty() {
            wrong.push(format!("{name}: something on standard output"));
        }
        if output.stderr.is_empty() {
            wrong.push(format!("{name}: nothing said"));
        }
        if !scratch.names().is_empty() {
            wrong.push(format!("{name}: left {:?}", scratch.names()));
        }
    }
    assert!(tried >= 40, "{tried} models");
    assert!(wrong.is_empty(), "{}", wrong.join("\n"));
}

#[test]
fn over_the_limit_is_1_only_where_asked_for() {
    let scratch = Scratch::new("over");
    std::fs::write(scratch.0.join("weak.toml"), CLIFF.replace("TENSION", "4")).unwrap();
    std::fs::write(scratch.0.join("strong.toml"), CLIFF.replace("TENSION", "400")).unwrap();
    for (args, code) in [
        (["check", "weak.toml", "--quiet"].as_slice(), 0),
        (&["check", "weak.toml", "--quiet", "--exit-over-limit"], 1),
        (&["check", "strong.toml", "--quiet", "--exit-over-limit"], 0),
    ] {
        let output = run(&scratch.0, args);
        assert_eq!(output.status.code(), Some(code), "{args:?}: {}", String::from_utf8_lossy(&output.stderr));
    }
    // a folder that exists counts before the limit
    std::fs::create_dir(scratch.0.join("weak-results")).unwrap();
    assert_eq!(run(&scratch.0, &["assess", "weak.toml", "--exit-over-limit"]).status.code(), Some(4));
    assert_eq!(scratch.names(), ["strong.toml", "weak-results", "weak.toml"]);
}
