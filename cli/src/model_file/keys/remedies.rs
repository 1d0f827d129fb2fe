//! Keys of the remedies.
use super::super::kinds::{Kind, Limits, OneOf, Preset, Quantity, Shape, Unit, default, optional, required};
use super::LENGTH;
use super::coast::LEVEL;
use super::site::DEPTH;

/// A force of one bar, prop or pile.
const FORCE: Kind = Kind::Number(Quantity::new(Unit::Kilonewton, Limits::over(0.0).at_most(1e6)));

static FILL: Shape = Shape::new(
    "Fills the undercut",
    &[
        required("rock", Kind::Text, "name of its material"),
        default("remaining_depth_m", DEPTH, Preset::Number(0.0), "depth left open"),
        default(
            "starts_carrying",
            Kind::Choice(&["later changes", "at once"]),
            Preset::Word("later changes"),
            "when it takes load; both bounds are shown",
        ),
    ],
);

static BARS: Shape = Shape::new(
    "Bars across the rupture line",
    &[
        required("from", Kind::Point, "head"),
        required("to", Kind::Point, "toe"),
        required("force_kn", FORCE, "force of one bar"),
        required("basis", Kind::Text, "what limits that force"),
        required("spacing_along_cliff_m", LENGTH, "spacing along the cliff"),
    ],
);

static PROPS: Shape = Shape::new(
    "Props under the roof",
    &[
        required("behind_lip_m", DEPTH, "distance behind the lip"),
        required(
            "stiffness_kn_per_mm",
            Kind::Number(Quantity::new(Unit::KilonewtonPerMillimeter, Limits::over(0.0).at_most(1e6))),
            "stiffness of one prop",
        ),
        required("capacity_kn", FORCE, "capacity of one prop"),
        required("spacing_along_cliff_m", LENGTH, "spacing along the cliff"),
    ],
);

static PILES: Shape = Shape::new(
    "Piles that carry a surcharge below the overhang",
    &[
        required("surcharge", Kind::Text, "name of the surcharge"),
        required("founded_z_m", LEVEL, "level of the pile toes"),
        required("capacity_kn", FORCE, "capacity of one pile"),
        required("spacing_along_cliff_m", LENGTH, "spacing along the cliff"),
    ],
);

pub(super) static REMEDY: Shape = Shape {
    doc: "One measure, or several together",
    fields: &[
        required("name", Kind::Text, "name"),
        optional("fill", Kind::Table(&FILL), "fills the undercut"),
        optional("bars", Kind::Table(&BARS), "bars across the rupture line"),
        optional("props", Kind::Table(&PROPS), "props under the roof"),
        optional("piles", Kind::Table(&PILES), "piles that carry a surcharge below the overhang"),
        optional("uses", Kind::Texts, "names of measures that act together"),
    ],
    one_of: &[OneOf { keys: &["fill", "bars", "props", "piles", "uses"], required: true, what: "what the measure does" }],
    together: &[],
    mistakes: &[],
};
