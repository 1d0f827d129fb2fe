//! The model file: text to the checked model, every fault of it in one pass, each with its place.
//!
//! ```text
//! path ──► files: bytes, text ──► syntax: tree with places ──► walk: by the table of keys ──► build: Model ──► checker::model::check, checker::section
//! ```
//!
//! `keys` is the one table of all keys; reading, `schema` and `reference` follow it.
mod build;
pub(crate) mod collect;
mod files;
pub(crate) mod keys;
mod kinds;
mod not_yet;
mod reference;
mod schema;
mod syntax;
mod tree;
mod walk;

pub use build::ExtraFile;
pub use reference::key_reference;
pub use schema::json_schema;

use crate::diagnostics::{Findings, Source};
use build::Build;
use checker::diagnostic::{Diagnostic, Severity};
use checker::model::{Groundwater, Model, SeaLevel};
use collect::{Collector, Places};
use files::FileFault;
use sha2::{Digest, Sha256};
use std::path::Path;
use std::sync::Arc;
use toml::de::DeTable;
use walk::Walk;

/// A model that was read and checked, with what came with it.
#[derive(Debug, Clone)]
pub struct LoadedModel {
    /// The model in SI units.
    pub model: Model,
    /// Findings that do not prevent a result.
    pub warnings: Findings,
    /// The model file as read.
    pub text: String,
    /// SHA-256 of the file's bytes, hexadecimal.
    pub sha256: String,
    /// Name of the file without folders.
    pub file_name: String,
    /// Files that the model names and that were read.
    pub extra_files: Vec<ExtraFile>,
    places: Places,
}

impl LoadedModel {
    /// Findings of a later stage with their places in the model file.
    pub fn locate(&self, diagnostics: &[Diagnostic]) -> Findings {
        collect::locate(diagnostics, &self.places, &self.warnings.sources)
    }
}

/// Why there is no model.
#[derive(Debug, Clone)]
pub struct Failure {
    /// All findings, errors and warnings.
    pub findings: Findings,
    /// Whether a file could not be read.
    pub unreadable: bool,
}

impl Failure {
    /// 4 where a file cannot be read, else 3.
    pub fn exit_code(&self) -> u8 {
        if self.unreadable { 4 } else { 3 }
    }
}

/// Reads and checks a model file.
///
/// # Errors
/// The file, or a file that it names, cannot be read; or the model is wrong. All faults are listed at once.
pub fn read(path: &Path) -> Result<LoadedModel, Failure> {
    let file_name = path.file_name().map_or_else(|| files::shown(path), |name| crate::diagnostics::clip(&name.to_string_lossy(), 200));
    let bytes = files::bytes(path, files::LARGEST_MODEL_BYTES).map_err(|fault| failure(&fault, &files::shown(path)))?;
    let text = files::text(&bytes, &file_name).map_err(|fault| failure(&fault, &files::shown(path)))?;
    let folder = path.parent().filter(|folder| !folder.as_os_str().is_empty()).unwrap_or(Path::new("."));
    let mut loaded = from_text(text, &files::shown(path), folder)?;
    loaded.file_name = file_name;
    loaded.sha256 = hexadecimal(&Sha256::digest(&bytes));
    Ok(loaded)
}

/// Reads and checks the text of a model file; files that it names are looked for in `folder`.
///
/// # Errors
/// As [`read`].
pub fn from_text(text: String, name: &str, folder: &Path) -> Result<LoadedModel, Failure> {
    let Reading { model, findings, places, extra_files, unreadable } = read_all(&text, name, folder);
    match model {
        Some(model) if findings.n_errors() == 0 => {
            let sha256 = hexadecimal(&Sha256::digest(text.as_bytes()));
            Ok(LoadedModel { model, warnings: findings, text, sha256, file_name: name.to_owned(), extra_files, places })
        }
        _ => Err(Failure { findings, unreadable }),
    }
}

/// What one pass over a text gives; with errors among the findings the model holds stand-ins.
struct Reading {
    model: Option<Model>,
    findings: Findings,
    places: Places,
    extra_files: Vec<ExtraFile>,
    unreadable: bool,
}

fn read_all(text: &str, name: &str, folder: &Path) -> Reading {
    let mut collector = Collector::default();
    collector.sources.push(Source { name: name.to_owned(), text: text.to_owned() });
    if text.trim().is_empty() {
        let diagnostic = Diagnostic::error("file.empty", "", "the model file is empty").hint("`brinkline new FILE` writes a starter model");
        collector.add_at(diagnostic, 0, 0..0);
        return without_model(collector);
    }
    let Some(readable) = syntax::check(text, &mut collector) else {
        return without_model(collector);
    };
    let (table, _) = DeTable::parse_recoverable(&readable);
    let mut walk = Walk { collector: &mut collector, defaults_used: Vec::new() };
    let file = walk.file(table.get_ref(), &table.span());
    let defaults_used = walk.defaults_used;
    let mut build = Build { collector: &mut collector, folder, defaults_used, extra_files: Vec::new(), unreadable: false };
    let mut model = build.model(&file);
    let Build { defaults_used, extra_files, unreadable, .. } = build;
    model.defaults_used = with_effect(defaults_used, &model);
    for diagnostic in checker::model::check(&model) {
        collector.add(diagnostic);
    }
    if !collector.has_faults() {
        // The section is only tried on a sound model. Its warnings come with the analysis.
        let faults = checker::section::Site::new(&model).err().unwrap_or_default();
        faults.into_iter().filter(|fault| fault.severity == Severity::Error).for_each(|fault| collector.add(fault));
    }
    let (findings, places) = collector.finish();
    Reading { model: Some(model), findings, places, extra_files, unreadable }
}

fn without_model(collector: Collector) -> Reading {
    let (findings, places) = collector.finish();
    Reading { model: None, findings, places, extra_files: Vec::new(), unreadable: false }
}

/// The defaults that matter: those about water only where there is water, those about surcharges only where there are any.
fn with_effect(mut defaults_used: Vec<String>, model: &Model) -> Vec<String> {
    let has_table = model.situations.iter().any(|situation| matches!(situation.groundwater, Some(Groundwater::Table(_))));
    let has_sea = model.situations.iter().any(|situation| situation.sea_level != SeaLevel::OffTheFace);
    defaults_used.retain(|line| {
        let key = line.split(" = ").next().and_then(|path| path.rsplit('.').next()).unwrap_or_default();
        match key {
            "saturated_unit_weight_kn_m3" | "water_unit_weight_kn_m3" | "above_table" => has_table,
            "sea_unit_weight_kn_m3" => has_sea,
            "surcharges" => !model.surcharges.is_empty(),
            _ => true,
        }
    });
    defaults_used
}

fn failure(fault: &FileFault, name: &str) -> Failure {
    let sources = Arc::new(vec![Source { name: name.to_owned(), text: String::new() }]);
    let list = vec![crate::diagnostics::Located { diagnostic: fault.diagnostic(""), place: None, also: Vec::new() }];
    Failure { findings: Findings { sources, list }, unreadable: matches!(fault, FileFault::Unreadable(_)) }
}

fn hexadecimal(bytes: &[u8]) -> String {
    const DIGITS: &[u8; 16] = b"0123456789abcdef";
    bytes.iter().flat_map(|byte| [byte >> 4, byte & 15]).map(|half| char::from(DIGITS[usize::from(half)])).collect()
}

#[cfg(test)]
mod tests;
