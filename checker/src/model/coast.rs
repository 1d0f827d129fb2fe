//! Outlook, evidence, remedies, use below, extents, place on the map.
use super::{Date, Uncertain};

/// Years, probability, setback.
#[derive(Debug, Clone, PartialEq)]
pub struct Outlook {
    /// Horizon, years.
    pub horizon_yr: f64,
    /// How fast the undercut deepens.
    pub rate: DeepeningRate,
    /// Jumps by storms on top.
    pub storms: Option<Storms>,
    /// Where the rate comes from.
    pub basis: String,
    /// Length of the record behind it, years.
    pub record_yr: Option<f64>,
    /// Whether a horizon over twice the record is accepted.
    pub extrapolated: bool,
    /// Sea-level scaling.
    pub sea_level_rise: Option<SeaLevelRise>,
    /// Model factor on capacity / demand.
    pub model_factor: Uncertain,
    /// Allowance added to the setback, m.
    pub allowance_m: f64,
    /// What the allowance is for.
    pub allowance_for: Option<String>,
    /// Number of samples.
    pub samples: u64,
    /// Seed of the random numbers.
    pub seed: u64,
    /// What stands on the cliff.
    pub assets: Vec<Asset>,
}

/// Deepening of the undercut.
#[derive(Debug, Clone, PartialEq)]
pub enum DeepeningRate {
    /// Mean with two kinds of uncertainty.
    Given {
        /// Mean, m a year.
        mean_m_per_yr: f64,
        /// Not knowing the rate: coefficient of variation of the constant rate.
        uncertainty_cov: f64,
        /// Its swings from year to year.
        year_to_year_cov: f64,
    },
    /// Fitted from dated depths.
    Surveys(Vec<DatedDepth>),
    /// From the retreat of the cliff edge.
    EdgeRetreat(EdgeRetreat),
}

/// A depth measured on a day.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct DatedDepth {
    /// Day.
    pub date: Date,
    /// Horizontal depth, m.
    pub depth_m: f64,
    /// Accuracy (standard deviation), m.
    pub accuracy_m: f64,
}

/// Retreat of the cliff edge.
#[derive(Debug, Clone, PartialEq)]
pub struct EdgeRetreat {
    /// Rate, m a year.
    pub m_per_yr: f64,
    /// From year.
    pub from: i32,
    /// To year.
    pub to: i32,
    /// Where it comes from.
    pub basis: String,
}

/// Jumps of depth by storms.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Storms {
    /// Mean number a year.
    pub per_yr: f64,
    /// Depth of one jump, m.
    pub jump_m: Uncertain,
}

/// Sea-level rise now and at the horizon.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct SeaLevelRise {
    /// Now, m a year.
    pub now_m_per_yr: f64,
    /// At the horizon, m a year.
    pub horizon_m_per_yr: f64,
    /// Exponent of the scaling.
    pub exponent: f64,
}

/// Something that stands on the cliff.
#[derive(Debug, Clone, PartialEq)]
pub struct Asset {
    /// Name.
    pub name: String,
    /// Distance behind the brow, m, or from-to on the x axis.
    pub x_m: [f64; 2],
    /// Whether `x_m` counts from the brow.
    pub from_brow: bool,
    /// Chance its owner accepts.
    pub accepted: Option<AcceptedChance>,
    /// Time needed to move it, years.
    pub lead_time_yr: f64,
}

/// An accepted chance.
#[derive(Debug, Clone, PartialEq)]
pub struct AcceptedChance {
    /// Probability, 0 to 1, both excluded.
    pub probability: f64,
    /// Over years.
    pub over_yr: f64,
    /// Who set it.
    pub set_by: String,
}

/// What an overhang of the same rock did.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum EvidenceKind {
    /// It stood.
    Stood,
    /// It fell.
    Fell,
}

/// What the cliff itself has shown.
#[derive(Debug, Clone, PartialEq)]
pub struct Evidence {
    /// Stood or fell.
    pub what: EvidenceKind,
    /// When.
    pub date: Option<Date>,
    /// Undercut depth, m.
    pub undercut_depth_m: Uncertain,
    /// Overhang thickness, m.
    pub overhang_thickness_m: Uncertain,
    /// Index of the rock.
    pub rock: usize,
}

/// Use of the ground below.
#[derive(Debug, Clone, Default, PartialEq)]
pub struct Below {
    /// Use.
    pub use_of_ground: Option<String>,
    /// Keep-out width from the cliff foot, m; `None` = 1.5 x cliff height.
    pub keep_out_m: Option<f64>,
    /// Where it comes from.
    pub basis: Option<String>,
}

/// One measure or a combination.
#[derive(Debug, Clone, PartialEq)]
pub struct Remedy {
    /// Name.
    pub name: String,
    /// What it does.
    pub kind: RemedyKind,
}

/// When a fill takes load.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum StartsCarrying {
    /// At once.
    AtOnce,
    /// Only later changes.
    LaterChanges,
}

/// What a measure does.
#[derive(Debug, Clone, PartialEq)]
pub enum RemedyKind {
    /// Fills the undercut.
    Fill {
        /// Index of its material.
        rock: usize,
        /// Depth left open, m.
        remaining_depth_m: f64,
        /// When it takes load.
        starts_carrying: StartsCarrying,
    },
    /// Bars across the rupture line.
    Bars {
        /// Head, m.
        from_m: [f64; 2],
        /// Toe, m.
        to_m: [f64; 2],
        /// Force of one bar, N.
        force_n: f64,
        /// What limits it.
        basis: String,
        /// Spacing along the cliff, m.
        spacing_along_cliff_m: f64,
    },
    /// Props under the roof.
    Props {
        /// Distance behind the lip, m.
        behind_lip_m: f64,
        /// Stiffness of one prop, N/m.
        stiffness_n_per_m: f64,
        /// Capacity of one prop, N.
        capacity_n: f64,
        /// Spacing along the cliff, m.
        spacing_along_cliff_m: f64,
    },
    /// Piles that carry a surcharge below the overhang.
    Piles {
        /// Index of the surcharge.
        surcharge: usize,
        /// Level of the pile toes, m.
        founded_z_m: f64,
        /// Capacity of one pile, N.
        capacity_n: f64,
        /// Spacing along the cliff, m.
        spacing_along_cliff_m: f64,
    },
    /// Several measures together, by index.
    Combination(Vec<usize>),
}

/// Sides and base of the model where given, m.
#[derive(Debug, Clone, Copy, Default, PartialEq)]
pub struct Extent {
    /// Seaward side.
    pub seaward_x_m: Option<f64>,
    /// Landward side.
    pub landward_x_m: Option<f64>,
    /// Base.
    pub base_z_m: Option<f64>,
}

/// Place on a map.
#[derive(Debug, Clone, PartialEq)]
pub struct CrsLocation {
    /// Coordinate reference system, for example `EPSG:32630`.
    pub crs: String,
    /// Easting of the mark where x = 0, m.
    pub origin_easting_m: f64,
    /// Northing of it, m.
    pub origin_northing_m: f64,
    /// Grid bearing of the landward direction, rad.
    pub landward_grid_bearing_rad: f64,
    /// Length of cliff that the section stands for, left and right seen from the sea, m.
    pub represents_m: Option<[f64; 2]>,
}
