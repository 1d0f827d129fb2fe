//! The model: everything a section's file says, in SI units, with defaults filled in.
//!
//! `ModelInput` (what the file says) and `Model` (what passed [`check()`]) share these types: a field that a file may leave
//! out and that has a default is filled by the reader, which lists the key in [`Model::defaults_used`]; an `Option` stays
//! `None` where leaving the key out has a meaning of its own.
mod check;
mod coast;
mod rock;
mod site;

pub use check::check;
pub use coast::{
    AcceptedChance, Asset, Below, CrsLocation, DatedDepth, DeepeningRate, EdgeRetreat, Evidence, EvidenceKind, Extent, Outlook, Remedy,
    RemedyKind, SeaLevelRise, StartsCarrying, Storms,
};
pub use rock::{
    Cohesive, DiscontinuitySurvey, HoekBrown, JointKind, JointSet, MassFactor, Rock, RockStrength, StrengthBasis, TestedState, Uncertain,
};
pub use site::{
    AboveTable, Averaging, BackShape, Carries, Checks, ContactLine, Crack, Cut, Groundwater, Growth, Headline, Layer, PartialFactors,
    Person, Probe, ReportIdentity, SeaLevel, Setting, Situation, StartShape, Surcharge, SurfacePoint, SurfaceSection, Survey, Undercut,
};

/// Calendar date as written in the file.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord)]
pub struct Date {
    /// Year, for example 2026.
    pub year: i32,
    /// Month, 1 to 12.
    pub month: u8,
    /// Day of the month, 1 to 31.
    pub day: u8,
}

/// One cliff section with everything that is known about it.
#[derive(Debug, Clone, PartialEq)]
pub struct Model {
    /// Title of the section.
    pub title: String,
    /// Who, what and when, printed in the report.
    pub report: ReportIdentity,
    /// Surveyed surface.
    pub section: SurfaceSection,
    /// Layers from the top down; the last one has no base. At least one.
    pub layers: Vec<Layer>,
    /// Rocks; layers and remedies refer to them by index.
    pub rocks: Vec<Rock>,
    /// Planes of weakness.
    pub joint_sets: Vec<JointSet>,
    /// The statement that no such plane was found.
    pub discontinuity_survey: Option<DiscontinuitySurvey>,
    /// Seen cracks.
    pub cracks: Vec<Crack>,
    /// What may act together; at least one (a nameless dry one, called "ordinary", if the file names none).
    pub situations: Vec<Situation>,
    /// Loads on the ground.
    pub surcharges: Vec<Surcharge>,
    /// How the undercut deepens.
    pub undercut: Undercut,
    /// How demands are taken and compared.
    pub checks: Checks,
    /// Years, probability and setback, if asked for.
    pub outlook: Option<Outlook>,
    /// What the cliff itself has shown.
    pub evidence: Vec<Evidence>,
    /// Use of the ground below the cliff.
    pub below: Below,
    /// Measures to compare.
    pub remedies: Vec<Remedy>,
    /// Places whose values are wanted.
    pub probes: Vec<Probe>,
    /// Lines whose resultants are wanted.
    pub cuts: Vec<Cut>,
    /// Sides and base of the model where given.
    pub extent: Extent,
    /// Place on a map.
    pub location: Option<CrsLocation>,
    /// Key paths whose default was used, each with the value as printed, for example `checks.target_error = 0.02`.
    pub defaults_used: Vec<String>,
}
