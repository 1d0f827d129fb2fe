//! The one table of all keys of the model file, format 1. It drives reading, the JSON Schema and the key reference.
mod coast;
mod remedies;
mod rocks;
mod site;
mod water;

use super::kinds::{Field, Preset};
use super::kinds::{Kind, Limits, Quantity, Shape, Unit, default, optional, required};

/// Largest distance of any point from the origin: coordinates count from a mark near the cliff, not from a country's grid.
pub(crate) const LARGEST_COORDINATE_M: f64 = 100_000.0;

/// A level or an abscissa.
pub(super) const COORDINATE: Kind =
    Kind::Number(Quantity::new(Unit::Meter, Limits::at_least(-LARGEST_COORDINATE_M).at_most(LARGEST_COORDINATE_M)));

/// A length over zero.
pub(super) const LENGTH: Kind = Kind::Number(Quantity::new(Unit::Meter, Limits::over(0.0).at_most(10_000.0)));

/// A length that may be zero.
pub(super) const LENGTH_OR_ZERO: Kind = Kind::Number(Quantity::new(Unit::Meter, Limits::at_least(0.0).at_most(10_000.0)));

/// A dip in the section.
pub(super) const DIP_SEAWARD: Kind = Kind::Number(Quantity::new(Unit::Degree, Limits::at_least(-90.0).at_most(90.0)));

/// The whole file.
pub(crate) static MODEL: Shape = Shape {
    doc: "One cliff section",
    fields: &[
        required("format", Kind::Integer(1, 1), "version of this file format"),
        required("title", Kind::Text, "title of the section"),
        optional("report", Kind::Table(&site::REPORT), "who, what and when, printed in the report"),
        required("section", Kind::Table(&site::SECTION), "the surveyed surface"),
        required("layers", Kind::Tables(&site::LAYER), "layers from the top down"),
        required("rocks", Kind::Named(&rocks::ROCK), "rocks by name"),
        optional("joint_sets", Kind::Tables(&rocks::JOINT_SET), "planes of weakness throughout the named rocks"),
        optional("discontinuity_survey", Kind::Table(&rocks::DISCONTINUITY_SURVEY), "the statement that no such plane was found"),
        optional("cracks", Kind::Tables(&site::CRACK), "seen cracks, each with its own place"),
        optional(
            "situations",
            Kind::Tables(&water::SITUATION),
            "what may act together; left out, one dry situation named \"ordinary\" is taken",
        ),
        optional("surcharges", Kind::Tables(&water::SURCHARGE), "strip loads on the ground"),
        required("undercut", Kind::Table(&site::UNDERCUT), "the undercut and how it deepens"),
        CHECKS,
        optional("outlook", Kind::Table(&coast::OUTLOOK), "years, probability and setback"),
        optional("assets", Kind::Tables(&coast::ASSET), "what stands on the cliff"),
        optional("evidence", Kind::Tables(&coast::EVIDENCE), "overhangs of the same rock that stood or fell"),
        optional("below", Kind::Table(&coast::BELOW), "use of the ground below the cliff"),
        optional("remedies", Kind::Tables(&remedies::REMEDY), "measures to compare"),
        optional("probes", Kind::Tables(&site::PROBE), "places whose values are wanted at every depth"),
        optional("cuts", Kind::Tables(&site::CUT), "lines whose resultants are wanted at every depth"),
        optional("extent", Kind::Table(&site::EXTENT), "sides and base of the model"),
        optional("location", Kind::Table(&coast::LOCATION), "place on a map"),
    ],
    one_of: &[],
    together: &[],
    mistakes: &[("rock", "write [rocks.\"name\"]"), ("layer", "write [[layers]]"), ("profile", "the surface stands in [section]")],
};

const CHECKS: Field = optional("checks", Kind::Table(&CHECKS_TABLE), "how demands are taken and compared");

static CHECKS_TABLE: Shape = Shape::new(
    "How demands are taken and compared",
    &[
        default(
            "headline",
            Kind::Choice(&["cautious", "best estimate"]),
            Preset::Word("cautious"),
            "which of the two answers stands in the headline; both are always reported",
        ),
        super::kinds::derived(
            "averaging_length_m",
            Kind::Number(Quantity::new(Unit::Meter, Limits::over(0.0).at_most(20.0))),
            "0.1 x overhang thickness, at most 1.0 m",
            "length over which stresses are averaged along the inward normal",
        ),
        default(
            "partial_factors",
            Kind::Either(&[Kind::Choice(&["EN 1997-1 M2", "none"]), Kind::Table(&PARTIAL_FACTORS)]),
            Preset::Word("none"),
            "factors by which strengths are divided and unit weight is multiplied",
        ),
        default(
            "required_reserve",
            Kind::Number(Quantity::new(Unit::One, Limits::at_least(1.0).at_most(20.0))),
            Preset::Number(1.0),
            "the limit stands at utilization 1 / this",
        ),
        default(
            "target_error",
            Kind::Number(Quantity::new(Unit::One, Limits::at_least(0.001).at_most(0.5))),
            Preset::Number(0.02),
            "target of the numerical error of every utilization",
        ),
    ],
);

/// A partial factor.
const FACTOR: Kind = Kind::Number(Quantity::new(Unit::One, Limits::at_least(0.5).at_most(10.0)));

static PARTIAL_FACTORS: Shape = Shape::new(
    "Own partial factors",
    &[
        default("tension", FACTOR, Preset::Number(1.0), "divides tensile strength"),
        default("cohesion", FACTOR, Preset::Number(1.0), "divides effective cohesion"),
        default("friction", FACTOR, Preset::Number(1.0), "divides the tangent of the friction angle"),
        default("unit_weight", FACTOR, Preset::Number(1.0), "multiplies unit weight"),
    ],
);
