//! Which command writes which files.
use std::path::Path;

use checker::assess::{Assessment, Scope};

use crate::exit::Exit;
use crate::model_file::LoadedModel;
use crate::output::figures::Figures;
use crate::output::folder::{FolderError, Staging};
use crate::output::map::{crs::Grid, features};
use crate::output::svg::field::Quantity;
use crate::output::{Provenance, csv, geojson, html, is_output_name, json, svg, vtk};
use crate::progress::Reporter;

/// Everything the files are made from.
#[derive(Debug)]
pub(crate) struct Job<'a> {
    /// Command.
    pub scope: Scope,
    /// Results with fields.
    pub results: &'a Assessment,
    /// Model with the files it came from.
    pub loaded: &'a LoadedModel,
    /// Provenance.
    pub provenance: &'a Provenance,
    /// A firm's own letterhead template.
    pub letterhead: Option<String>,
    /// Three-node triangles in fields files.
    pub linear_triangles: bool,
    /// Number of threads, at least 1.
    pub threads: usize,
}

/// Why nothing was written.
#[derive(Debug, thiserror::Error)]
pub(crate) enum WriteError {
    /// The folder.
    #[error(transparent)]
    Folder(#[from] FolderError),
    /// A number that is none.
    #[error(transparent)]
    NotFinite(#[from] json::NotFinite),
    /// The fields.
    #[error(transparent)]
    Field(#[from] vtk::FieldError),
    /// The report.
    #[error("cannot write `report.html`: {0}")]
    Template(#[from] html::TemplateError),
    /// The map layer.
    #[error("cannot write `map.geojson`: {0}")]
    Map(#[from] geojson::MapError),
    /// The table.
    #[error("cannot write `depths.csv`: {0}")]
    Csv(#[from] ::csv::Error),
}

impl WriteError {
    /// Exit code of the run.
    pub(crate) fn exit(&self) -> Exit {
        match self {
            Self::NotFinite(_) | Self::Field(_) | Self::Map(_) => Exit::Analysis,
            Self::Folder(_) | Self::Csv(_) | Self::Template(_) => Exit::File,
        }
    }
}

/// Writes all files of the command and makes them appear. Returns a line that says what was written.
pub(crate) fn all(job: &Job<'_>, mut staging: Staging, reporter: &Reporter) -> Result<String, WriteError> {
    let outcome = &job.results.outcome;
    if job.scope != Scope::Mesh {
        staging.write("summary.json", json::summary(outcome, job.provenance)?.as_bytes())?;
        staging.write("depths.csv", &csv::depths(outcome)?)?;
    }
    if matches!(job.scope, Scope::Assess | Scope::Mesh) {
        fields(job, &mut staging, reporter)?;
    }
    let figures = Figures::new(outcome, &job.loaded.model, &job.results.fields);
    for (name, text) in pictures(job.scope, &figures) {
        staging.write(name, text.as_bytes())?;
    }
    if job.scope == Scope::Assess {
        if let Some(map) = map(job)? {
            staging.write("map.geojson", map.as_bytes())?;
        }
        reporter.show("writing the report", 0, 1);
        staging.write("report.html", report(job, &figures)?.as_bytes())?;
    }
    for (name, bytes) in model_files(job.loaded) {
        staging.write(&name, bytes)?;
    }
    let shown = staging.target().display().to_string();
    let names = staging.commit()?;
    Ok(format!("wrote {} files to {shown}", names.len()))
}

/// The map layer, where the model says where on the map it stands.
fn map(job: &Job<'_>) -> Result<Option<String>, geojson::MapError> {
    let outcome = &job.results.outcome;
    let Some(location) = &job.loaded.model.location else { return Ok(None) };
    let grid = Grid::new(&location.crs)?;
    geojson::write(&features(outcome, outcome.outlook.as_ref(), location), &grid, &outcome.program, job.provenance).map(Some)
}

/// The model file and what it names, under names that no output has.
fn model_files(loaded: &LoadedModel) -> Vec<(String, &[u8])> {
    let mut files = vec![(loaded.file_name.clone(), loaded.text.as_bytes())];
    files.extend(loaded.extra_files.iter().map(|file| {
        let inside = Path::new(&file.name).components().all(|part| matches!(part, std::path::Component::Normal(_)));
        (if inside { file.name.clone() } else { file.file_name() }, file.bytes.as_slice())
    }));
    for (name, _) in &mut files {
        if is_output_name(name) {
            *name = format!("model-{name}");
        }
    }
    files
}

/// One file a depth and the series.
fn fields(job: &Job<'_>, staging: &mut Staging, reporter: &Reporter) -> Result<(), WriteError> {
    let fields = &job.results.fields;
    let Some(first) = fields.first() else { return Ok(()) };
    let depths_m: Vec<f64> = fields.iter().map(|field| field.depth_m).collect();
    staging.write("fields/series.pvd", vtk::series(&depths_m, &first.rock_names).as_bytes())?;
    let names = vtk::file_names(&depths_m);
    // As many at a time as there are threads: the texts are large.
    for (i_batch, batch) in fields.chunks(job.threads).enumerate() {
        let first = i_batch * job.threads;
        reporter.show("writing fields", first, fields.len());
        let texts: Vec<_> = std::thread::scope(|scope| {
            let started: Vec<_> = batch.iter().map(|snapshot| scope.spawn(|| vtk::field(snapshot, job.linear_triangles))).collect();
            started.into_iter().map(|thread| thread.join().unwrap_or_else(|panic| std::panic::resume_unwind(panic))).collect()
        });
        for (text, name) in texts.into_iter().zip(&names[first..]) {
            staging.write(&format!("fields/{name}"), &text?)?;
        }
    }
    Ok(())
}

/// The pictures that the command writes as files.
fn pictures(scope: Scope, figures: &Figures<'_>) -> Vec<(&'static str, String)> {
    let mut pictures = Vec::new();
    let Some(surveyed) = figures.surveyed else { return pictures };
    pictures.push(("mesh.svg", svg::mesh::picture(surveyed, figures.outcome, "mesh").file()));
    if scope == Scope::Mesh {
        return pictures;
    }
    pictures.extend(figures.section().map(|picture| ("section.svg", picture.file())));
    pictures.push(("stress-surveyed.svg", figures.field(Quantity::MajorStress, surveyed, "stress").file()));
    if let Some(critical) = figures.critical {
        pictures.push(("stress-critical.svg", figures.field(Quantity::MajorStress, critical, "stress").file()));
    }
    pictures
}

fn report(job: &Job<'_>, figures: &Figures<'_>) -> Result<String, html::TemplateError> {
    html::report(&html::Report {
        outcome: &job.results.outcome,
        model: &job.loaded.model,
        model_text: &job.loaded.text,
        figures,
        provenance: job.provenance,
        letterhead: job.letterhead.as_deref(),
    })
}

/// Reads the letterhead template and tries it; the error is a sentence for people.
#[expect(clippy::disallowed_methods, reason = "the boundary reads files")]
pub(crate) fn letterhead(path: Option<&Path>) -> Result<Option<String>, String> {
    let Some(path) = path else { return Ok(None) };
    let text = std::fs::read_to_string(path).map_err(|error| format!("cannot read the letterhead `{}`: {error}", path.display()))?;
    html::check_letterhead(&text).map_err(|error| format!("the letterhead `{}` cannot be used: {error}", path.display()))?;
    Ok(Some(text))
}

#[cfg(test)]
mod tests;
