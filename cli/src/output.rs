//! Everything that leaves the program: [`checker::outcome::Outcome`] in, text, tables, pictures, fields and the report out.
pub mod csv;
pub mod figures;
pub mod folder;
pub mod geojson;
pub mod html;
pub mod json;
pub mod map;
pub mod svg;
pub mod text;
pub mod vtk;
pub mod words;

#[cfg(test)]
pub(crate) mod fixture;

/// Whether a file name (relative to the results folder, `/` between parts) is one that this program writes.
pub fn is_output_name(name: &str) -> bool {
    const FIXED: [&str; 9] = [
        "report.html",
        "summary.json",
        "depths.csv",
        "section.svg",
        "mesh.svg",
        "stress-surveyed.svg",
        "stress-critical.svg",
        "map.geojson",
        "fields/series.pvd",
    ];
    let is_field = name.strip_prefix("fields/depth-").and_then(|rest| rest.strip_suffix(".vtu"));
    FIXED.contains(&name) || is_field.is_some_and(|depth| depth.parse::<f64>().is_ok())
}

/// Where results come from, printed in every output beside version and model hash.
#[derive(Debug, Clone, Default, PartialEq, Eq)]
pub struct Provenance {
    /// Command line as typed, without paths outside the model's own name.
    pub command: String,
    /// Seed of the random numbers; `None` where none are drawn.
    pub seed: Option<u64>,
}
