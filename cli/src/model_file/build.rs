//! Turns what was read into the model: words to choices, names to indices, files to texts.
mod coast;
mod lab;
mod rock;
mod site;
mod water;

use super::collect::Collector;
use super::files::{self, FileFault};
use super::tree::Tab;
use super::walk::nearest_of;
use crate::diagnostics::clip;
use checker::diagnostic::{Diagnostic, nth};
use checker::model::{CrsLocation, Model};
use std::path::{Path, PathBuf};

/// A file that the model file names.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct ExtraFile {
    /// Path as written in the model file.
    pub name: String,
    /// Where it was found.
    pub path: PathBuf,
    /// Its bytes.
    pub bytes: Vec<u8>,
}

impl ExtraFile {
    /// Its name without folders.
    pub fn file_name(&self) -> String {
        self.path.file_name().map_or_else(|| self.name.clone(), |name| name.to_string_lossy().into_owned())
    }
}

/// The building on its way.
#[derive(Debug)]
pub(super) struct Build<'c> {
    pub(super) collector: &'c mut Collector,
    /// Folder of the model file.
    pub(super) folder: &'c Path,
    pub(super) defaults_used: Vec<String>,
    pub(super) extra_files: Vec<ExtraFile>,
    /// Whether a file could not be read.
    pub(super) unreadable: bool,
}

impl Build<'_> {
    /// The model; where something was wrong it holds stand-ins and must not be handed out.
    pub(super) fn model(&mut self, file: &Tab) -> Model {
        let rock_names: Vec<String> = file.named("rocks").iter().map(|(name, _)| name.clone()).collect();
        let rocks: Vec<_> = file.named("rocks").iter().map(|(name, table)| self.rock(name, table)).collect();
        let layers = file.tables("layers").iter().map(|table| self.layer(table, &rock_names, &rocks)).collect();
        self.unique_names(file);
        let surcharges: Vec<_> = file.tables("surcharges").iter().map(water::surcharge).collect();
        let situations = self.situations(file);
        let location = file.table("location").map(coast::location);
        let joint_sets = file.tables("joint_sets").iter().map(|table| self.joint_set(table, &rock_names, location.as_ref())).collect();
        Model {
            title: file.text("title").to_owned(),
            report: self.report(file.table("report")),
            section: self.section(file.table("section")),
            layers,
            rocks,
            joint_sets,
            discontinuity_survey: file.table("discontinuity_survey").map(rock::discontinuity_survey),
            cracks: file.tables("cracks").iter().map(site::crack).collect(),
            situations,
            surcharges,
            undercut: self.undercut(file.table("undercut")),
            checks: site::checks(file.table("checks")),
            outlook: self.outlook(file),
            evidence: file.tables("evidence").iter().map(|table| self.evidence(table, &rock_names)).collect(),
            below: coast::below(file.table("below")),
            remedies: self.remedies(file, &rock_names),
            probes: file.tables("probes").iter().map(site::probe).collect(),
            cuts: file.tables("cuts").iter().map(site::cut).collect(),
            extent: site::extent(file.table("extent")),
            location,
            defaults_used: Vec::new(),
        }
    }

    /// The index of a name, or `usize::MAX` after an error.
    fn reference(&mut self, what: &str, name: &str, names: &[String], at: String) -> usize {
        if let Some(index) = names.iter().position(|known| known == name) {
            return index;
        }
        if name.is_empty() || self.collector.key_is_on_broken_line(name) {
            return usize::MAX;
        }
        let diagnostic = Diagnostic::error("name.unknown", at, format!("there is no {what} named {:?}", clip(name, 60)));
        let hint = match nearest_of(name, names.iter().map(String::as_str)) {
            Some(known) => format!("did you mean {known:?}?"),
            None if names.is_empty() => format!("the file has no {what}"),
            None => {
                let shown: Vec<String> = names.iter().take(20).map(|known| format!("{:?}", clip(known, 60))).collect();
                format!("the file has {}", shown.join(", "))
            }
        };
        self.collector.add(diagnostic.hint(hint));
        usize::MAX
    }

    /// Names within each list must differ.
    fn unique_names(&mut self, file: &Tab) {
        for list in ["joint_sets", "situations", "surcharges", "assets", "remedies", "probes", "cuts"] {
            let tables = file.tables(list);
            for (i_later, later) in tables.iter().enumerate() {
                let name = later.text("name");
                let earlier = tables[..i_later].iter().position(|earlier| earlier.text("name") == name);
                if let (Some(i_earlier), false) = (earlier, name.is_empty()) {
                    let message = format!("the name {:?} is used twice in [[{list}]]", clip(name, 60));
                    let diagnostic = Diagnostic::error("name.twice", later.at("name"), message).hint("give every entry a name of its own");
                    self.collector.add(diagnostic.also(format!("{}.name", nth(list, i_earlier))));
                }
            }
        }
    }

    /// The text of a file that the model names; `None` after an error.
    fn extra_text(&mut self, name: &str, at: &str) -> Option<String> {
        let read = files::inside(self.folder, name).and_then(|path| {
            let bytes = files::bytes(&path, files::LARGEST_EXTRA_BYTES)?;
            let text = files::text(&bytes, &format!("{:?}", clip(name, 120)))?;
            self.extra_files.push(ExtraFile { name: name.to_owned(), path, bytes });
            Ok(text)
        });
        match read {
            Ok(text) => Some(text),
            Err(fault) => {
                self.unreadable |= matches!(fault, FileFault::Unreadable(_));
                self.collector.add(fault.diagnostic(at));
                None
            }
        }
    }

    fn default_used(&mut self, line: impl Into<String>) {
        self.defaults_used.push(line.into());
    }
}

/// Angle between a plane's strike and the cliff line, and its apparent dip in the section, from dip and dip direction.
///
/// ```text
/// tan(apparent) = tan(dip) cos(direction − seaward bearing)      strike off cliff = |direction − seaward bearing| folded to [0, 90]
/// ```
///
/// All in rad; the seaward bearing is the landward one turned by 180 degrees. Source: descriptive geometry of an apparent dip.
fn apparent_dip(dip_rad: f64, direction_rad: f64, location: &CrsLocation) -> (f64, f64) {
    let between = direction_rad - (location.landward_grid_bearing_rad + std::f64::consts::PI);
    let apparent = (dip_rad.sin() * between.cos()).atan2(dip_rad.cos());
    let strike_off = between.sin().abs().asin();
    (apparent, strike_off)
}
