//! The whole results folder, made from invented results.
use std::path::PathBuf;

use super::{Job, all};
use crate::interrupt::Interrupt;
use crate::output::fixture;
use crate::output::folder::Staging;
use crate::progress::Reporter;
use checker::assess::{Assessment, Scope};

/// Where the folder is written: a scratch place, or the one named in the environment for looking at it.
fn place() -> PathBuf {
    std::env::var_os("BRINKLINE_FIXTURE_RESULTS")
        .map_or_else(|| std::env::temp_dir().join(format!("brinkline-fixture-{}", std::process::id())), PathBuf::from)
}

#[test]
fn assess_writes_every_file_of_the_contract() {
    let target = place();
    let mut fields = fixture::fields();
    fields.sort_by(|a, b| a.depth_m.total_cmp(&b.depth_m));
    let results = Assessment { outcome: fixture::outcome(), fields, warnings: Vec::new() };
    let starter = std::path::Path::new(env!("CARGO_MANIFEST_DIR")).join("../demo-models/ostrel-head/ostrel-head.toml");
    let mut loaded = crate::model_file::read(&starter).unwrap();
    (loaded.model, loaded.text, loaded.file_name) = (fixture::model(), fixture::MODEL_TEXT.into(), "gannet-ledge.toml".into());
    let job = Job {
        scope: Scope::Assess,
        results: &results,
        loaded: &loaded,
        provenance: &fixture::provenance(),
        letterhead: None,
        linear_triangles: false,
        threads: 2,
    };
    let staging = Staging::open(&target, true, &Interrupt::default()).unwrap();
    let told = all(&job, staging, &Reporter::new(true)).unwrap();
    assert!(told.starts_with("wrote "), "{told}");
    for name in [
        "summary.json",
        "depths.csv",
        "fields/series.pvd",
        "fields/depth-2.30.vtu",
        "gannet-ledge.toml",
        "report.html",
        "section.svg",
        "mesh.svg",
        "stress-surveyed.svg",
        "stress-critical.svg",
    ] {
        assert!(target.join(name).is_file(), "{name}");
    }
    if std::env::var_os("BRINKLINE_FIXTURE_RESULTS").is_none() {
        std::fs::remove_dir_all(&target).unwrap();
    }
}
