//! Keys of the outlook: deepening rate, assets, evidence, use below, place on the map.
use super::super::kinds::{Family, Kind, Limits, OneOf, Preset, Quantity, Shape, Unit, default, derived, neutral, optional, required};
use super::COORDINATE;
use super::site::DEPTH;

/// A coefficient of variation.
const COV: Kind = Kind::Number(Quantity::new(Unit::One, Limits::at_least(0.0).at_most(2.0)));

/// A span of years.
const YEARS: Kind = Kind::Number(Quantity::new(Unit::Year, Limits::over(0.0).at_most(1000.0)));

/// A deepening or retreat rate.
const RATE: Kind = Kind::Number(Quantity::new(Unit::MeterPerYear, Limits::over(0.0).at_most(50.0)));

static DEEPENING: Shape = Shape {
    doc: "Deepening rate with two kinds of uncertainty",
    fields: &[
        required("mean", RATE, "mean rate"),
        required("uncertainty_cov", COV, "not knowing the rate: coefficient of variation of the constant rate"),
        required("year_to_year_cov", COV, "its swings from year to year"),
    ],
    one_of: &[],
    together: &[],
    mistakes: &[
        ("cov", "say which: uncertainty_cov is not knowing the rate, year_to_year_cov is its swings; they act very differently"),
        ("standard_deviation", "write uncertainty_cov and year_to_year_cov"),
    ],
};

static DATED_DEPTH: Shape = Shape::new(
    "A depth measured on a day",
    &[
        required("date", Kind::Date, "day"),
        required("depth_m", DEPTH, "horizontal undercut depth"),
        required(
            "accuracy_m",
            Kind::Number(Quantity::new(Unit::Meter, Limits::over(0.0).at_most(10.0))),
            "accuracy, as a standard deviation",
        ),
    ],
);

static EDGE_RETREAT: Shape = Shape::new(
    "Retreat of the cliff edge, which in the long run is the deepening rate",
    &[
        required("m_per_year", RATE, "rate"),
        required("from", Kind::Integer(1500, 2200), "first year"),
        required("to", Kind::Integer(1500, 2200), "last year"),
        required("basis", Kind::Text, "where it comes from"),
    ],
);

static STORMS: Shape = Shape::new(
    "Jumps of depth by storms",
    &[
        required("per_year", Kind::Number(Quantity::new(Unit::PerYear, Limits::over(0.0).at_most(100.0))), "mean number a year"),
        required(
            "jump_m",
            Kind::Uncertain(Quantity::new(Unit::Meter, Limits::over(0.0).at_most(50.0)), Family::Lognormal),
            "depth of one jump",
        ),
    ],
);

/// Sea-level rise, m a year.
const RISE: Kind = Kind::Number(Quantity::new(Unit::MeterPerYear, Limits::over(0.0).at_most(0.1)));

static SEA_LEVEL_RISE: Shape = Shape::new(
    "Scaling of the deepening rate with sea-level rise",
    &[
        required("now", RISE, "rise today"),
        required("horizon", RISE, "rise at the horizon"),
        required("exponent", Kind::Number(Quantity::new(Unit::One, Limits::at_least(0.0).at_most(1.0))), "exponent of the scaling"),
    ],
);

pub(super) static OUTLOOK: Shape = Shape {
    doc: "Years, probability and setback; only run when asked",
    fields: &[
        required("horizon_years", YEARS, "planning horizon"),
        optional("deepening_m_per_year", Kind::Table(&DEEPENING), "deepening rate"),
        optional("surveys", Kind::Tables(&DATED_DEPTH), "dated depths from which the rate is fitted, at least three"),
        optional("edge_retreat", Kind::Table(&EDGE_RETREAT), "retreat of the cliff edge"),
        optional("storms", Kind::Table(&STORMS), "jumps by storms on top of the rate"),
        required("basis", Kind::Text, "where the rate comes from"),
        optional("record_years", YEARS, "length of the record behind the rate"),
        neutral("extrapolated", Kind::Flag, Preset::Flag(false), "whether a horizon over twice the record is accepted"),
        optional("sea_level_rise_m_per_year", Kind::Table(&SEA_LEVEL_RISE), "scaling of the rate with sea-level rise"),
        derived(
            "model_factor",
            Kind::Uncertain(Quantity::new(Unit::One, Limits::over(0.0).at_most(10.0)), Family::Lognormal),
            "{ mean = 1.0, cov = 0.3 }, which is judgement",
            "factor on capacity over demand",
        ),
        neutral("allowance_m", DEPTH, Preset::Number(0.0), "allowance added to the setback"),
        optional("allowance_for", Kind::Text, "what the allowance is for"),
        default("samples", Kind::Integer(1000, 10_000_000), Preset::Integer(100_000), "number of samples"),
        default("seed", Kind::Integer(0, i64::MAX), Preset::Integer(1), "seed of the random numbers"),
    ],
    one_of: &[OneOf { keys: &["deepening_m_per_year", "surveys", "edge_retreat"], required: true, what: "the deepening rate" }],
    together: &[],
    mistakes: &[],
};

/// A probability, both ends excluded.
const PROBABILITY: Kind = Kind::Number(Quantity::new(Unit::One, Limits::over(0.0).under(1.0)));

static ACCEPTED: Shape = Shape::new(
    "A chance that the owner accepts; there is no default",
    &[
        required("probability", PROBABILITY, "probability"),
        required("over_years", YEARS, "over so many years"),
        required("set_by", Kind::Text, "who set it"),
    ],
);

pub(super) static ASSET: Shape = Shape {
    doc: "Something that stands on the cliff",
    fields: &[
        required("name", Kind::Text, "name"),
        optional("back_from_brow_m", DEPTH, "distance behind the brow"),
        optional("x_m", Kind::Range, "from and to"),
        optional("accepted", Kind::Table(&ACCEPTED), "chance that its owner accepts"),
        default(
            "lead_time_years",
            Kind::Number(Quantity::new(Unit::Year, Limits::at_least(0.0).at_most(1000.0))),
            Preset::Number(0.0),
            "time needed to move it",
        ),
    ],
    one_of: &[OneOf { keys: &["back_from_brow_m", "x_m"], required: true, what: "its place" }],
    together: &[],
    mistakes: &[],
};

/// A measured length that may be uncertain.
const MEASURED: Kind = Kind::Uncertain(Quantity::new(Unit::Meter, Limits::over(0.0).at_most(1000.0)), Family::Lognormal);

pub(super) static EVIDENCE: Shape = Shape::new(
    "An overhang of the same rock that stood or fell",
    &[
        required("what", Kind::Choice(&["stood", "fell"]), "what it did"),
        optional("date", Kind::Date, "when"),
        required("undercut_depth_m", MEASURED, "its undercut depth"),
        required("overhang_thickness_m", MEASURED, "its overhang thickness"),
        required("same_rock_as", Kind::Text, "name of the rock"),
    ],
);

pub(super) static BELOW: Shape = Shape::new(
    "Use of the ground below the cliff",
    &[
        optional("use", Kind::Text, "use of the ground"),
        derived("keep_out_m", DEPTH, "1.5 x cliff height", "keep-out width from the cliff foot"),
        optional("basis", Kind::Text, "where that width comes from"),
    ],
);

pub(super) static LOCATION: Shape = Shape::new(
    "Place on a map",
    &[
        required("crs", Kind::Text, "coordinate reference system, for example \"EPSG:32630\""),
        required(
            "origin_easting_m",
            Kind::Number(Quantity::new(Unit::Meter, Limits::at_least(-1e8).at_most(1e8))),
            "easting of the fixed mark where x = 0",
        ),
        required("origin_northing_m", Kind::Number(Quantity::new(Unit::Meter, Limits::at_least(-1e8).at_most(1e8))), "northing of it"),
        required(
            "landward_grid_bearing_deg",
            Kind::Number(Quantity::new(Unit::Degree, Limits::at_least(0.0).at_most(360.0))),
            "grid bearing of the landward direction",
        ),
        optional("represents_m", Kind::Pair, "length of cliff that the section stands for, left and right seen from the sea"),
    ],
);

/// A level, for the remedies.
pub(super) const LEVEL: Kind = COORDINATE;
