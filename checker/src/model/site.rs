//! The site: surface, layers, water, loads, growth of the undercut, checks, places of interest.
use super::{Date, Uncertain};

/// Who made the report and for whom.
#[derive(Debug, Clone, Default, PartialEq)]
pub struct ReportIdentity {
    /// Project.
    pub project: Option<String>,
    /// Client.
    pub client: Option<String>,
    /// Section name.
    pub section: Option<String>,
    /// Revision letter.
    pub revision: Option<String>,
    /// Date of the report.
    pub date: Option<Date>,
    /// Author.
    pub prepared_by: Option<Person>,
    /// Checker; without one the report is a draft.
    pub checked_by: Option<Person>,
    /// Purpose.
    pub purpose: Option<String>,
    /// Documents relied on.
    pub relied_on: Vec<String>,
    /// What was not investigated.
    pub not_investigated: Vec<String>,
    /// The geologist's own recommendations (the text itself, already read from its file).
    pub recommendations: Option<String>,
    /// Last day on which the report may be used.
    pub valid_until: Option<Date>,
}

/// A person with a qualification.
#[derive(Debug, Clone, PartialEq)]
pub struct Person {
    /// Name.
    pub name: String,
    /// Qualification.
    pub qualification: Option<String>,
}

/// A point of the surveyed surface.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct SurfacePoint {
    /// Distance from the fixed mark, growing landward, m.
    pub x_m: f64,
    /// Level above the datum, m.
    pub z_m: f64,
    /// Whether the stretch that ends here is inferred rather than measured.
    pub inferred: bool,
}

/// The rock surface walked from the sea to the land.
#[derive(Debug, Clone, PartialEq)]
pub struct SurfaceSection {
    /// Platform, floor, back, roof, lip, face, brow, plateau.
    pub surface: Vec<SurfacePoint>,
    /// Level datum.
    pub vertical_datum: Option<String>,
    /// The ground before the sea cut it, shape `[n][2]` in m, x growing.
    pub original_surface_m: Option<Vec<[f64; 2]>>,
    /// Brow where the found one is not the meant one, m.
    pub brow_m: Option<[f64; 2]>,
    /// When and how it was surveyed.
    pub surveyed: Option<Survey>,
    /// Radius by which sharp corners of the undercut are faired, m.
    pub round_corners_m: Option<f64>,
}

/// When and how the section was surveyed.
#[derive(Debug, Clone, PartialEq)]
pub struct Survey {
    /// Date.
    pub date: Option<Date>,
    /// Method.
    pub method: Option<String>,
    /// Accuracy, m.
    pub accuracy_m: Option<f64>,
}

/// One layer; layers are listed from the top down.
#[derive(Debug, Clone, PartialEq)]
pub struct Layer {
    /// Index of its rock.
    pub rock: usize,
    /// Its lower contact; `None` for the last layer.
    pub base: Option<ContactLine>,
    /// Whether it carries tension.
    pub carries: Carries,
    /// Slope at which it comes to rest after a break, rad.
    pub rest_slope_rad: Option<f64>,
}

/// What a layer does.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Carries {
    /// Weighs and carries tension up to its strength.
    LoadAndTension,
    /// Weighs, holds no tension, lies back after a break.
    LoadOnly,
}

/// A contact between two layers.
#[derive(Debug, Clone, PartialEq)]
pub enum ContactLine {
    /// Level at z, m.
    Level(f64),
    /// Through a point with a dip toward the sea (negative: landward).
    Dip {
        /// Point on it, m.
        x_m: f64,
        /// Point on it, m.
        z_m: f64,
        /// Dip toward the sea, rad.
        dip_seaward_rad: f64,
    },
    /// Through points with growing x, level beyond its ends, shape `[n][2]` in m.
    Points(Vec<[f64; 2]>),
}

/// One seen crack.
#[derive(Debug, Clone, PartialEq)]
pub struct Crack {
    /// Its path, shape `[n][2]` in m.
    pub path_m: Vec<[f64; 2]>,
}

/// What may act together.
#[derive(Debug, Clone, PartialEq)]
pub struct Situation {
    /// Name.
    pub name: String,
    /// Water in the ground; `None` = nothing was said.
    pub groundwater: Option<Groundwater>,
    /// Sea on the face.
    pub sea_level: SeaLevel,
    /// Unit weight of the ground's water, N/m3.
    pub water_unit_weight_n_per_m3: f64,
    /// Unit weight of the sea, N/m3.
    pub sea_unit_weight_n_per_m3: f64,
    /// Moisture above the table.
    pub above_table: AboveTable,
    /// Height of the water standing in each crack above its tip, m.
    pub crack_water_above_tip_m: Option<f64>,
    /// Indices of the surcharges that act.
    pub surcharges: Vec<usize>,
    /// Pseudo-static coefficient toward the sea.
    pub inertia_seaward: f64,
    /// Pseudo-static coefficient upward.
    pub inertia_up: f64,
    /// Chance a year that it occurs; `None` = always counts (ordinary) or never in the outlook (ground motion).
    pub annual_chance: Option<f64>,
}

/// Water in the ground.
#[derive(Debug, Clone, PartialEq)]
pub enum Groundwater {
    /// Observed to be dry.
    DryObserved,
    /// Water table, shape `[n][2]` in m, x growing.
    Table(Vec<[f64; 2]>),
}

/// Sea on the face.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum SeaLevel {
    /// Not on the face.
    OffTheFace,
    /// Level, m.
    Level(f64),
}

/// Moisture above the table.
#[derive(Debug, Clone, PartialEq)]
pub enum AboveTable {
    /// No suction.
    Dry,
    /// Suction with a water area ratio.
    Suction {
        /// Degree of saturation, 0 to 1.
        saturation: f64,
        /// Largest suction, Pa.
        suction_limit_pa: f64,
        /// Where the figures come from.
        basis: String,
    },
}

/// A strip load on the ground.
#[derive(Debug, Clone, PartialEq)]
pub struct Surcharge {
    /// Name.
    pub name: String,
    /// From and to, m.
    pub x_m: [f64; 2],
    /// Pressure, Pa.
    pub pressure_pa: f64,
    /// Whether its mass shakes too.
    pub inertia: bool,
}

/// Kind of coast, for the limits of plane strain.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Setting {
    /// Straight cliff.
    StraightCliff,
    /// Cave.
    Cave,
    /// Headland corner.
    HeadlandCorner,
    /// Stack.
    Stack,
    /// Arch.
    Arch,
}

/// How the hollow deepens.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Growth {
    /// The back moves landward, roof and floor lengthen.
    Advance,
    /// The hollow is scaled.
    Stretch,
}

/// Shape of the back of a start hollow.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum BackShape {
    /// Two quarter circles of half the height.
    Round,
    /// Vertical back with two sharp corners.
    Square,
    /// One sharp point at half height.
    Wedge,
}

/// Shape of the hollow where the survey shows none.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct StartShape {
    /// Level of its floor, m.
    pub floor_level_m: f64,
    /// Level of its roof, m.
    pub roof_level_m: f64,
    /// Shape of its back.
    pub back: BackShape,
}

/// The undercut and its growth.
#[derive(Debug, Clone, PartialEq)]
pub struct Undercut {
    /// Kind of coast.
    pub setting: Setting,
    /// Width along the shore, m.
    pub width_along_shore_m: Option<f64>,
    /// Way of growing.
    pub growth: Growth,
    /// Depth (horizontal, lip to back) down to which is searched, m.
    pub search_to_depth_m: f64,
    /// Step between depths, m.
    pub depth_step_m: f64,
    /// Start shape where the survey shows no undercut.
    pub start_shape: Option<StartShape>,
}

/// Which of the two answers stands in the headline.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Headline {
    /// The end of each input that raises utilization.
    Cautious,
    /// Mean values.
    BestEstimate,
}

/// Factors by which strengths are divided and unit weight multiplied.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct PartialFactors {
    /// On tensile strength.
    pub tension: f64,
    /// On effective cohesion.
    pub cohesion: f64,
    /// On the tangent of the friction angle.
    pub friction: f64,
    /// On unit weight.
    pub unit_weight: f64,
    /// Whether the set "EN 1997-1 M2" was named.
    pub en_1997_m2: bool,
}

/// Averaging length.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum Averaging {
    /// Given, m.
    Given(f64),
    /// 0.1 x overhang thickness, at most 1.0 m.
    FromThickness,
}

/// How demands are taken and compared.
#[derive(Debug, Clone, PartialEq)]
pub struct Checks {
    /// Headline.
    pub headline: Headline,
    /// Averaging length.
    pub averaging: Averaging,
    /// Partial factors.
    pub partial_factors: PartialFactors,
    /// The limit stands at utilization 1 / this.
    pub required_reserve: f64,
    /// Target of the numerical error of every utilization.
    pub target_error: f64,
}

/// A place whose values are wanted at every depth.
#[derive(Debug, Clone, PartialEq)]
pub struct Probe {
    /// Name.
    pub name: String,
    /// Place, m.
    pub at_m: [f64; 2],
    /// Unit direction of the mean; `None` = point value.
    pub toward: Option<[f64; 2]>,
    /// Length of the mean, m.
    pub over_m: Option<f64>,
}

/// A line whose resultants are wanted at every depth.
#[derive(Debug, Clone, PartialEq)]
pub struct Cut {
    /// Name.
    pub name: String,
    /// Start, m.
    pub from_m: [f64; 2],
    /// End, m.
    pub to_m: [f64; 2],
}

impl Uncertain {
    /// Mean (of a truncated normal: before the cut).
    pub fn mean(&self) -> f64 {
        match *self {
            Self::Exact(value) => value,
            Self::Lognormal { mean, .. } | Self::Normal { mean, .. } | Self::TruncatedNormal { mean, .. } => mean,
            Self::Uniform { min, max } => 0.5 * (min + max),
        }
    }
}
