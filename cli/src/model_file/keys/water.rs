//! Keys of what acts: situations with water and ground motion, surcharges.
use super::super::kinds::{Kind, Limits, Preset, Quantity, Shape, Unit, default, derived, neutral, optional, required};
use super::{COORDINATE, LENGTH_OR_ZERO};

/// A unit weight of water.
const WATER_WEIGHT: Kind = Kind::Number(Quantity::new(Unit::KilonewtonPerCubicMeter, Limits::at_least(9.0).at_most(13.0)));

/// A pseudo-static coefficient.
const INERTIA: Kind = Kind::Number(Quantity::new(Unit::One, Limits::over(-1.0).under(1.0)));

static ABOVE_TABLE: Shape = Shape::new(
    "Moisture above the water table",
    &[
        required(
            "saturation",
            Kind::Number(Quantity::new(Unit::One, Limits::at_least(0.0).at_most(1.0))),
            "degree of saturation, taken as the water area ratio",
        ),
        required(
            "suction_limit_kpa",
            Kind::Number(Quantity::new(Unit::Kilopascal, Limits::at_least(0.0).at_most(10_000.0))),
            "largest suction",
        ),
        required("basis", Kind::Text, "where the figures come from"),
    ],
);

pub(super) static SITUATION: Shape = Shape {
    doc: "What may act together; the worst situation governs and is named at every number",
    fields: &[
        required("name", Kind::Text, "name"),
        optional(
            "groundwater",
            Kind::Either(&[Kind::Choice(&["dry, observed"]), Kind::Points(2)]),
            "the water table as points with growing x, or \"dry, observed\"; left out, the ground is dry and nothing was said",
        ),
        default(
            "sea_level_m",
            Kind::Either(&[Kind::Choice(&["off the face"]), COORDINATE]),
            Preset::Word("off the face"),
            "level of the sea on the face, or \"off the face\"; water on the face helps, so it is off unless given",
        ),
        default("water_unit_weight_kn_m3", WATER_WEIGHT, Preset::Number(9.81), "unit weight of the ground's water"),
        default("sea_unit_weight_kn_m3", WATER_WEIGHT, Preset::Number(10.05), "unit weight of the sea"),
        default(
            "above_table",
            Kind::Either(&[Kind::Choice(&["dry"]), Kind::Table(&ABOVE_TABLE)]),
            Preset::Word("dry"),
            "moisture above the water table: \"dry\", or suction with its limit",
        ),
        optional("crack_water_above_tip_m", LENGTH_OR_ZERO, "height of the water standing in each crack above its tip"),
        derived("surcharges", Kind::Texts, "all of them", "names of the surcharges that act"),
        neutral("inertia_seaward", INERTIA, Preset::Number(0.0), "pseudo-static coefficient toward the sea"),
        neutral("inertia_up", INERTIA, Preset::Number(0.0), "pseudo-static coefficient upward"),
        optional(
            "annual_chance",
            Kind::Number(Quantity::new(Unit::One, Limits::over(0.0).at_most(1.0))),
            "chance a year that it occurs; only with it does the outlook count a ground motion",
        ),
    ],
    one_of: &[],
    together: &[],
    mistakes: &[("water_table", "write groundwater = [[x, z], …]"), ("kh", "write inertia_seaward"), ("kv", "write inertia_up")],
};

pub(super) static SURCHARGE: Shape = Shape::new(
    "A strip load on the ground; it acts in every situation that names none",
    &[
        required("name", Kind::Text, "name"),
        required("x_m", Kind::Range, "from and to"),
        required(
            "pressure_kpa",
            Kind::Number(Quantity::new(Unit::Kilopascal, Limits::at_least(0.0).at_most(10_000.0))),
            "pressure, downward",
        ),
        neutral("inertia", Kind::Flag, Preset::Flag(false), "whether its mass shakes too"),
    ],
);
