//! Keys of the site: report identity, section, layers, cracks, undercut, probes, cuts, extent.
use super::super::kinds::{Field, Kind, Limits, OneOf, Preset, Quantity, Shape, Unit, default, derived, optional, required};
use super::{COORDINATE, DIP_SEAWARD, LENGTH, LENGTH_OR_ZERO};

static PERSON: Shape =
    Shape::new("A person", &[required("name", Kind::Text, "name"), optional("qualification", Kind::Text, "qualification or registration")]);

pub(super) static REPORT: Shape = Shape::new(
    "Who, what and when; all of it optional and printed in the report",
    &[
        optional("project", Kind::Text, "project"),
        optional("client", Kind::Text, "client"),
        optional("section", Kind::Text, "name of the section"),
        optional("revision", Kind::Text, "revision letter"),
        optional("date", Kind::Date, "date of the report"),
        optional("prepared_by", Kind::Table(&PERSON), "author"),
        optional("checked_by", Kind::Table(&PERSON), "checker; without one every page says that it is a draft"),
        optional("purpose", Kind::Text, "purpose of the report"),
        optional("relied_on", Kind::Texts, "documents relied on"),
        optional("not_investigated", Kind::Texts, "what was not investigated"),
        optional("recommendations", Kind::File, "file with the geologist's own recommendations, as text"),
        optional("valid_until", Kind::Date, "last day on which the report may be used"),
    ],
);

static SURVEYED: Shape = Shape::new(
    "When and how the section was surveyed",
    &[
        optional("date", Kind::Date, "day of the survey"),
        optional("method", Kind::Text, "method, for example \"laser scan\""),
        optional("accuracy_m", Kind::Number(Quantity::new(Unit::Meter, Limits::over(0.0).at_most(10.0))), "accuracy of a point"),
    ],
);

pub(super) static SECTION: Shape = Shape {
    doc: "The rock surface walked from the sea to the land: platform, undercut floor, back, roof, lip, face, brow, plateau",
    fields: &[
        optional("surface", Kind::Points(4), "the surface as a list of points"),
        optional(
            "surface_csv",
            Kind::File,
            "the surface as a CSV file with the columns x_m, z_m and, optionally, how (measured or inferred)",
        ),
        optional("vertical_datum", Kind::Text, "what the levels count from"),
        optional("original_surface", Kind::Points(2), "the ground before the sea cut it; left out, it is level at the brow, seaward of it"),
        optional("brow", Kind::Point, "the brow, where the one that is found is not the one meant"),
        optional("surveyed", Kind::Table(&SURVEYED), "when and how the section was surveyed"),
        optional(
            "round_corners_m",
            Kind::Number(Quantity::new(Unit::Meter, Limits::over(0.0).at_most(5.0))),
            "radius by which sharp corners of the undercut are faired; the change is reported",
        ),
    ],
    one_of: &[OneOf { keys: &["surface", "surface_csv"], required: true, what: "the surface" }],
    together: &[],
    mistakes: &[
        ("profile", "the surface is written as surface = [[x, z], …] or surface_csv = \"file.csv\""),
        ("points", "the surface is written as surface = [[x, z], …] or surface_csv = \"file.csv\""),
    ],
};

static DIPPING: Shape = Shape::new(
    "A straight contact through a point",
    &[
        required("x_m", COORDINATE, "a point on it"),
        required("z_m", COORDINATE, "a point on it"),
        required(
            "dip_seaward_deg",
            Kind::Number(Quantity::new(Unit::Degree, Limits::over(-80.0).under(80.0))),
            "dip toward the sea; negative: landward",
        ),
    ],
);

pub(super) static LAYER: Shape = Shape {
    doc: "One layer; layers are listed from the top down and the last one has no base",
    fields: &[
        required("rock", Kind::Text, "name of its rock"),
        optional(
            "base",
            Kind::Either(&[COORDINATE, Kind::Table(&DIPPING), Kind::Points(2)]),
            "its lower contact: a level, a dipping line, or points with growing x, level beyond the ends; not for the last layer",
        ),
        optional(
            "carries",
            Kind::Choice(&["load and tension", "load only"]),
            "\"load only\": the layer weighs, holds no tension and lies back after a break; left out, \"load and tension\", but \"load only\" where \
             the rock is under 100 MPa stiff and has no tensile strength",
        ),
        optional(
            "rest_slope_deg",
            Kind::Number(Quantity::new(Unit::Degree, Limits::over(0.0).under(90.0))),
            "slope at which a layer that only loads comes to rest; left out, its friction angle",
        ),
    ],
    one_of: &[],
    together: &[],
    mistakes: &[
        ("top", "a layer is described by its base; the top of the first layer is the ground"),
        ("thickness_m", "write the level of its base: base = …"),
        ("thickness", "write the level of its base: base = …"),
    ],
};

pub(super) static CRACK: Shape =
    Shape::new("One seen crack", &[required("path", Kind::Points(2), "its path, from the ground or the face inward")]);

pub(super) static UNDERCUT: Shape = Shape {
    doc: "The undercut and how it deepens; depths are horizontal, from the lip to the back",
    fields: &[
        default(
            "setting",
            Kind::Choice(&["straight cliff", "cave", "headland corner", "stack", "arch"]),
            Preset::Word("straight cliff"),
            "kind of coast; plane strain describes only the first",
        ),
        optional("width_along_shore_m", LENGTH, "width of the hollow along the shore"),
        default(
            "growth",
            Kind::Choice(&["advance", "stretch"]),
            Preset::Word("advance"),
            "\"advance\": the back moves landward, roof and floor lengthen; \"stretch\": the hollow is scaled",
        ),
        required(
            "search_to_depth_m",
            Kind::Number(Quantity::new(Unit::Meter, Limits::over(0.0).at_most(200.0))),
            "undercut depth down to which is searched",
        ),
        default(
            "depth_step_m",
            Kind::Number(Quantity::new(Unit::Meter, Limits::at_least(0.01).at_most(50.0))),
            Preset::Number(0.5),
            "step between the depths of the series",
        ),
        optional("floor_level_m", COORDINATE, "floor of the first hollow, only where the survey shows none"),
        optional("roof_level_m", COORDINATE, "roof of the first hollow, only where the survey shows none"),
        START_BACK,
    ],
    one_of: &[],
    together: &[&["floor_level_m", "roof_level_m"]],
    mistakes: &[
        ("depth_m", "the depth today is taken from the surface; the search limit is search_to_depth_m"),
        ("max_depth_m", "the search limit is search_to_depth_m"),
    ],
};

const START_BACK: Field =
    optional("back", Kind::Choice(&["round", "square", "wedge"]), "shape of the back of the first hollow; left out, \"round\"");

pub(super) static PROBE: Shape = Shape {
    doc: "A place whose values are wanted at every depth",
    fields: &[
        required("name", Kind::Text, "name"),
        required("at", Kind::Point, "the place"),
        optional("toward", Kind::Direction, "direction of a mean that starts there"),
        optional("over_m", LENGTH, "length of that mean"),
    ],
    one_of: &[],
    together: &[&["toward", "over_m"]],
    mistakes: &[],
};

pub(super) static CUT: Shape = Shape::new(
    "A line whose resultants are wanted at every depth",
    &[required("name", Kind::Text, "name"), required("from", Kind::Point, "start"), required("to", Kind::Point, "end")],
);

pub(super) static EXTENT: Shape = Shape::new(
    "Sides and base of the model, in section coordinates",
    &[
        derived("seaward_x_m", COORDINATE, "from the cliff height", "seaward side"),
        derived("landward_x_m", COORDINATE, "from the cliff height", "landward side"),
        derived("base_z_m", COORDINATE, "from the cliff height", "base"),
    ],
);

/// A depth or distance that may be zero, for other parts of the table.
pub(super) const DEPTH: Kind = LENGTH_OR_ZERO;

/// Dip of planes in the section.
pub(super) const PLANE_DIP: Kind = DIP_SEAWARD;
