//! The published results: plain data in the engineer's units (kPa, kN, m, mm), tension positive. Keys are stable: add, never rename.
//!
//! `cli` serializes [`Outcome`] as `summary.json` and draws tables, pictures and fields from it and from [`FieldSnapshot`].
mod derived;
mod outlook;

pub use derived::{Principal, principal};
pub use outlook::{AssetInfo, CrossCheck, EvidenceInfo, OutlookInfo, Quantiles, RateInfo, Refusal, SamplingInfo, SetbackInfo, Trigger};
use serde::Serialize;

/// A point as `[x, z]` in m.
pub type PointXz = [f64; 2];

/// Whether everything asked for was answered.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Serialize)]
pub enum Status {
    /// Everything.
    #[serde(rename = "complete")]
    Complete,
    /// Parts were refused, with reasons.
    #[serde(rename = "part refused")]
    PartRefused,
    /// A check missed its target error.
    #[serde(rename = "target missed")]
    TargetMissed,
}

/// The results of one section.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct Outcome {
    /// Name and version; filled by the boundary.
    pub program: Program,
    /// Whether everything was answered.
    pub status: Status,
    /// One sentence for people, never without its reservation.
    pub headline: String,
    /// The model; file name and hash are filled by the boundary.
    pub model: ModelInfo,
    /// Report identity as carried through from the file.
    pub report: ReportInfo,
    /// Section measures.
    pub section: SectionInfo,
    /// Numerical quality.
    pub numerics: Numerics,
    /// The state as surveyed.
    pub surveyed: SurveyedState,
    /// Critical undercut depth; `None` for `check` alone.
    pub critical_depth: Option<CriticalDepths>,
    /// The depth series.
    pub depths: Vec<DepthResult>,
    /// One-at-a-time list.
    pub hangs_on: Vec<HangsOn>,
    /// Use below.
    pub below: BelowInfo,
    /// Years, probability, setback; `None` where they were not asked for.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub outlook: Option<OutlookInfo>,
    /// Reservations.
    pub warnings: Vec<Note>,
    /// The usual cautions.
    pub cautions: Vec<String>,
}

/// Name and version of the program.
#[derive(Debug, Clone, Default, PartialEq, Serialize)]
pub struct Program {
    /// Name.
    pub name: String,
    /// Version.
    pub version: String,
}

/// Where the results come from.
#[derive(Debug, Clone, Default, PartialEq, Serialize)]
pub struct ModelInfo {
    /// Title.
    pub title: String,
    /// File name.
    pub file: String,
    /// Hash of the file.
    pub sha256: String,
    /// Defaults used, each as `key = value`.
    pub defaults_used: Vec<String>,
}

/// Who, what, when.
#[derive(Debug, Clone, Default, PartialEq, Serialize)]
pub struct ReportInfo {
    /// Project.
    pub project: Option<String>,
    /// Client.
    pub client: Option<String>,
    /// Section.
    pub section: Option<String>,
    /// Revision.
    pub revision: Option<String>,
    /// Date, ISO 8601.
    pub date: Option<String>,
    /// Author: name, qualification.
    pub prepared_by: Option<PersonInfo>,
    /// Checker; without one the report is a draft.
    pub checked_by: Option<PersonInfo>,
    /// Purpose.
    pub purpose: Option<String>,
    /// Documents relied on.
    pub relied_on: Vec<String>,
    /// Not investigated.
    pub not_investigated: Vec<String>,
    /// The geologist's own recommendations.
    pub recommendations: Option<String>,
    /// Last day of validity, ISO 8601.
    pub valid_until: Option<String>,
    /// Date of the survey, ISO 8601.
    pub surveyed_on: Option<String>,
    /// How it was surveyed.
    pub survey_method: Option<String>,
    /// Accuracy of the survey, m.
    pub survey_accuracy_m: Option<f64>,
}

/// A person.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct PersonInfo {
    /// Name.
    pub name: String,
    /// Qualification.
    pub qualification: Option<String>,
}

/// Measures of the surveyed section.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct SectionInfo {
    /// Brow minus mouth.
    pub cliff_height_m: f64,
    /// Ground above the back minus the highest roof point of the back half.
    pub overhang_thickness_m: f64,
    /// Horizontal, lip to back.
    pub surveyed_depth_m: f64,
    /// Brow.
    pub brow: PointXz,
    /// Lip; `None` without undercut.
    pub lip: Option<PointXz>,
    /// Back; `None` without undercut.
    pub back: Option<PointXz>,
    /// Mouth; `None` without undercut.
    pub mouth: Option<PointXz>,
    /// Surveyed surface inside the model, walked from the sea.
    pub surface: Vec<PointXz>,
    /// Contacts inside the body, top down: polyline pieces.
    pub contacts: Vec<Vec<PointXz>>,
    /// Rock names of the layers, top down.
    pub layer_rocks: Vec<String>,
    /// Other hollows deeper than 0.5 m: back point and depth.
    pub other_hollows: Vec<(PointXz, f64)>,
}

/// Extents of the model.
#[derive(Debug, Clone, Copy, PartialEq, Serialize)]
pub struct ExtentInfo {
    /// Seaward side.
    pub seaward_x_m: f64,
    /// Landward side.
    pub landward_x_m: f64,
    /// Base.
    pub base_z_m: f64,
}

/// Numerical quality; extremes over all meshes of the run unless said otherwise.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct Numerics {
    /// Unknowns of the largest system.
    pub unknowns: usize,
    /// Triangles of the largest mesh.
    pub elements: usize,
    /// Smallest angle of any triangle away from sharp input corners.
    pub smallest_angle_deg: f64,
    /// Extents.
    pub extent: ExtentInfo,
    /// Largest relative residual of the solutions.
    pub equilibrium_residual: f64,
    /// Weight of the surveyed section.
    pub weight_kn_per_m: f64,
    /// Vertical reaction of the surveyed section.
    pub reaction_kn_per_m: f64,
    /// Ratio of smallest to largest pivot of the factorization.
    pub smallest_pivot_ratio: f64,
    /// Target of the error of every utilization.
    pub target_error: f64,
    /// Largest error reached by a check that governs somewhere.
    pub reached_error: f64,
    /// Realized horizontal over vertical stress 1 H behind the brow at half height, beside the asked one.
    pub realized_k0: Option<f64>,
    /// Asked k0 there.
    pub asked_k0: Option<f64>,
    /// Largest relative difference between polygon statics and consistent nodal forces on the section above the back.
    pub statics_nodal_difference: f64,
    /// Largest relative difference between polygon statics and stress integration on that section.
    pub statics_stress_difference: f64,
}

/// A check at one depth.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct CheckResult {
    /// Id of the check, for example `cliff-top tension`.
    pub check: &'static str,
    /// Situation.
    pub situation: String,
    /// `cautious` or `best estimate`.
    pub inputs: &'static str,
    /// Demand, signed (negative: compression where tension is asked).
    pub demand_kpa: f64,
    /// Capacity.
    pub capacity_kpa: f64,
    /// Demand / capacity, 0 where the demand is not positive; `None` where capacity is not positive or beyond the apex.
    pub utilization: Option<f64>,
    /// Absolute numerical error of the utilization.
    pub error: f64,
    /// Demand at the same place at depth 0.
    pub background_kpa: Option<f64>,
    /// Averaging length of this value.
    pub averaging_length_m: Option<f64>,
    /// Whether the utilization exceeds 1 / required_reserve (or capacity is not positive with a positive demand).
    pub over: bool,
    /// Place.
    pub at: PointXz,
    /// Rock at the place.
    pub rock: String,
    /// Closed-form partner.
    pub closed_form_demand_kpa: Option<f64>,
    /// The k0 case that gave this value, for example `k0 = 1.0 (not measured)`; `None` where k0 is given.
    pub k0_case: Option<String>,
    /// Resultant demand on the line, for section shear and joint slip.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub demand_kn_per_m: Option<f64>,
    /// Resultant capacity on the line.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub capacity_kn_per_m: Option<f64>,
    /// Whether the stress lies beyond the apex of the shear law.
    #[serde(skip_serializing_if = "std::ops::Not::not")]
    pub beyond_apex: bool,
    /// Whether the segment was cut below half its length.
    #[serde(skip_serializing_if = "std::ops::Not::not")]
    pub short_segment: bool,
    /// Area over the limit, for local shear.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub zone_m2: Option<f64>,
    /// Line on which the check was taken, for section checks and joints.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub line: Option<[PointXz; 2]>,
}

/// The worst check.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct Governing {
    /// Check.
    pub check: &'static str,
    /// Situation.
    pub situation: String,
    /// Utilization.
    pub utilization: Option<f64>,
}

/// Values at a probe (best estimate, effective stress).
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct ProbeResult {
    /// Name.
    pub name: String,
    /// Situation.
    pub situation: String,
    /// Place.
    pub at: PointXz,
    /// Displacement relative to depth 0; `None` where depth 0 has no rock there or it was not computed.
    pub displacement_mm: Option<[f64; 2]>,
    /// Stress; `None` in the hollow.
    pub stress_kpa: Option<StressKpa>,
    /// Mean of pointwise major stresses, for probes with a direction.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub mean_of_major: Option<f64>,
}

/// Stress components and principal values, kPa.
#[derive(Debug, Clone, Copy, PartialEq, Serialize)]
pub struct StressKpa {
    /// Horizontal.
    pub xx: f64,
    /// Vertical.
    pub zz: f64,
    /// Shear.
    pub xz: f64,
    /// Along the cliff.
    pub yy: f64,
    /// Major in-plane principal.
    pub major: f64,
    /// Minor in-plane principal.
    pub minor: f64,
}

/// Resultants of the total stress on a cut (best estimate).
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct CutResult {
    /// Name.
    pub name: String,
    /// Situation.
    pub situation: String,
    /// Positive in tension.
    pub axial_kn_per_m: f64,
    /// Positive when it carries the seaward side's weight.
    pub shear_kn_per_m: f64,
    /// Positive when it opens the upper end.
    pub moment_knm_per_m: f64,
    /// Linear fibre stress at `from`.
    pub fibre_from_kpa: f64,
    /// Linear fibre stress at `to`.
    pub fibre_to_kpa: f64,
}

/// The state as surveyed.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct SurveyedState {
    /// Depth.
    pub depth_m: f64,
    /// Worst check of the headline inputs.
    pub governing: Option<Governing>,
    /// All checks, situations and both inputs.
    pub checks: Vec<CheckResult>,
    /// Probes.
    pub probes: Vec<ProbeResult>,
    /// Cuts.
    pub cuts: Vec<CutResult>,
}

/// One depth of the series.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct DepthResult {
    /// Horizontal undercut depth.
    pub depth_m: f64,
    /// All checks, situations and both inputs.
    pub checks: Vec<CheckResult>,
    /// Probes.
    pub probes: Vec<ProbeResult>,
    /// Cuts.
    pub cuts: Vec<CutResult>,
}

/// Critical depths.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct CriticalDepths {
    /// With cautious inputs.
    pub cautious: CriticalDepth,
    /// With mean inputs.
    pub best_estimate: CriticalDepth,
    /// Each check, situation and inputs.
    pub each_check: Vec<CheckCriticalDepth>,
}

/// One critical depth with what goes.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct CriticalDepth {
    /// Whether it lies within the searched depths.
    pub found: bool,
    /// Depth at which the first check passes its limit.
    pub depth_m: Option<f64>,
    /// Its numerical error: mesh and root tolerance.
    pub error_m: Option<f64>,
    /// Governing check.
    pub check: Option<&'static str>,
    /// Governing situation.
    pub situation: Option<String>,
    /// Rupture line, from the hollow to the ground.
    pub rupture_line: Option<[PointXz; 2]>,
    /// Ground lost behind the brow along that line, lay-back of loose layers included.
    pub ground_lost_m: Option<f64>,
    /// Ground lost over all lines within 5 % of the worst.
    pub ground_lost_range_m: Option<[f64; 2]>,
    /// Volume of the block per metre of cliff.
    pub block_m3_per_m: Option<f64>,
    /// Depth down to which was searched.
    pub searched_to_m: f64,
    /// "not reached down to 10.0 m; nothing is known beyond" and the like.
    pub note: Option<String>,
}

/// Critical depth of one check.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct CheckCriticalDepth {
    /// Check.
    pub check: &'static str,
    /// Situation.
    pub situation: String,
    /// `cautious` or `best estimate`.
    pub inputs: &'static str,
    /// Depth; `None` if not reached.
    pub depth_m: Option<f64>,
    /// Its error.
    pub error_m: Option<f64>,
    /// Over its limit at the surveyed depth.
    #[serde(skip_serializing_if = "std::ops::Not::not")]
    pub already_over: bool,
    /// Over also at depth 0: left out of the overall figure.
    #[serde(skip_serializing_if = "std::ops::Not::not")]
    pub over_without_undercut: bool,
    /// Stretches of smaller depths at which it is over.
    #[serde(skip_serializing_if = "Vec::is_empty")]
    pub earlier_over: Vec<[f64; 2]>,
}

/// One line of the list of what the answer hangs on.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct HangsOn {
    /// Quantity.
    pub what: String,
    /// Low value, in the file's unit.
    pub low: f64,
    /// High value.
    pub high: f64,
    /// Unit of low and high; empty for a ratio.
    pub unit: &'static str,
    /// Governing utilization at the surveyed depth at the low and the high value.
    pub utilization: [Option<f64>; 2],
    /// Critical depth at the low and the high value; `None` = not reached.
    pub critical_depth_m: [Option<f64>; 2],
}

/// Use below the cliff.
#[derive(Debug, Clone, Default, PartialEq, Serialize)]
pub struct BelowInfo {
    /// Use.
    pub use_of_ground: Option<String>,
    /// Keep-out width from the cliff foot.
    pub keep_out_m: f64,
    /// Where it comes from.
    pub basis: String,
}

/// A reservation.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct Note {
    /// Stable code.
    pub code: String,
    /// Message.
    pub message: String,
}

/// Fields of one depth for pictures and viewers (governing situation, best estimate). Not part of `summary.json`.
#[derive(Debug, Clone, PartialEq)]
pub struct FieldSnapshot {
    /// Depth.
    pub depth_m: f64,
    /// Situation.
    pub situation: String,
    /// Mesh in section coordinates.
    pub mesh: fem_core::mesh::Mesh,
    /// Rock of each region, by name.
    pub rock_names: Vec<String>,
    /// Displacement relative to depth 0 per node, m.
    pub displacement_m: Vec<[f64; 2]>,
    /// Effective stress per element and element node `[xx, zz, xz, yy]`, Pa, shape `[n_elements][6]`: each layer has its own value at a contact.
    pub effective_stress_pa: Vec<[[f64; 4]; 6]>,
    /// Water pressure per element and element node, Pa (positive in compression), already times alpha.
    pub water_pressure_pa: Vec<[f64; 6]>,
    /// Tension utilization (major effective principal over tensile strength) per element and element node; not a check: point values.
    pub tension_utilization: Vec<[f64; 6]>,
    /// Shear utilization by the Mohr-Coulomb law of the element's rock; 0 beyond the apex.
    pub shear_utilization: Vec<[f64; 6]>,
    /// The governing place of each check at this depth.
    pub places: Vec<(&'static str, PointXz)>,
}
