//! Keys of the rocks: weight, stiffness, strength, planes of weakness.
use super::super::kinds::{
    Family, Field, Kind, Limits, OneOf, Preset, Quantity, Shape, Suspicion, Unit, default, derived, optional, required,
};
use super::LENGTH;
use super::site::PLANE_DIP;

/// A unit weight of rock. Suspicious ranges: densities typed as unit weights (rocks lie between 11 and 30 kN/m3).
const UNIT_WEIGHT: Quantity = Quantity::new(Unit::KilonewtonPerCubicMeter, Limits::over(0.0).at_most(100_000.0)).suspect(&[
    Suspicion { from: 0.0, to: 5.0, likely: "t/m3 or g/cm3: multiply by 9.81, so that 2.45 t/m3 is 24.0 kN/m3" },
    Suspicion { from: 35.0, to: 10_000.0, likely: "kg/m3: multiply by 0.00981, so that 2450 kg/m3 is 24.0 kN/m3" },
    Suspicion { from: 10_000.0, to: 100_001.0, likely: "N/m3: divide by 1000" },
]);

/// Young's modulus. Rock masses lie between about 50 and 90,000 MPa; what is soft for its rock is looked at with its name and strength.
const MODULUS: Quantity = Quantity::new(Unit::Megapascal, Limits::over(0.0).at_most(1e9)).suspect(&[
    Suspicion { from: 0.0, to: 1.0, likely: "GPa: multiply by 1000" },
    Suspicion { from: 150_000.0, to: 1e9 + 1.0, likely: "kPa: divide by 1000; or Pa: divide by 1,000,000" },
]);

const TENSILE: Quantity = Quantity::new(Unit::Kilopascal, Limits::at_least(0.0).at_most(1e8)).suspect(&[
    Suspicion { from: 1e-9, to: 10.0, likely: "MPa: multiply by 1000, so that 0.5 MPa is 500 kPa" },
    Suspicion { from: 30_000.0, to: 1e8 + 1.0, likely: "Pa: divide by 1000" },
]);

const COHESION: Quantity = Quantity::new(Unit::Kilopascal, Limits::at_least(0.0).at_most(1e8)).suspect(&[
    Suspicion { from: 1e-9, to: 2.0, likely: "MPa: multiply by 1000, so that 0.5 MPa is 500 kPa" },
    Suspicion { from: 60_000.0, to: 1e8 + 1.0, likely: "Pa: divide by 1000" },
]);

const FRICTION: Quantity = Quantity::new(Unit::Degree, Limits::at_least(0.0).under(90.0)).suspect(&[
    Suspicion { from: 1e-9, to: 1.6, likely: "rad, or the tangent: 0.65 rad is 37 degrees, tan 0.65 is 33 degrees" },
    Suspicion { from: 70.0, to: 90.0, likely: "a secant angle at low stress: write the tangent angle over the stresses of the section" },
]);

const UNIAXIAL: Quantity = Quantity::new(Unit::Megapascal, Limits::over(0.0).at_most(1e9)).suspect(&[Suspicion {
    from: 450.0,
    to: 1e9 + 1.0,
    likely: "kPa: divide by 1000",
}]);

const TOUGHNESS: Quantity = Quantity::new(Unit::MegapascalRootMeter, Limits::over(0.0).at_most(10_000.0)).suspect(&[Suspicion {
    from: 6.0,
    to: 10_001.0,
    likely: "MPa mm^0.5: multiply by 0.0316; or kPa m^0.5: divide by 1000",
}]);

const RATIO: Quantity = Quantity::new(Unit::One, Limits::over(0.0).at_most(1.0));

static MASS_FACTOR: Shape = Shape::new(
    "Factors from intact specimen to rock mass",
    &[required("tension", Kind::Number(RATIO), "on tensile strength"), required("cohesion", Kind::Number(RATIO), "on cohesion")],
);

static CORRELATION: Shape = Shape::new(
    "Correlation between strengths of this rock",
    &[required(
        "cohesion_friction",
        Kind::Number(Quantity::new(Unit::One, Limits::over(-1.0).under(1.0))),
        "between cohesion and friction angle, usually negative",
    )],
);

static HOEK_BROWN: Shape = Shape::new(
    "Rock-mass rating for the Hoek-Brown relations of 2002",
    &[
        required(
            "gsi",
            Kind::Uncertain(Quantity::new(Unit::One, Limits::at_least(5.0).at_most(100.0)), Family::Normal),
            "geological strength index",
        ),
        required(
            "mi",
            Kind::Uncertain(Quantity::new(Unit::One, Limits::at_least(1.0).at_most(50.0)), Family::Normal),
            "material constant of the intact rock",
        ),
        required("disturbance", Kind::Number(Quantity::new(Unit::One, Limits::at_least(0.0).at_most(1.0))), "disturbance factor D"),
        required("uniaxial_strength_mpa", Kind::Uncertain(UNIAXIAL, Family::Lognormal), "compressive strength of the intact rock"),
    ],
);

const WEIGHT_FIELDS: [Field; 4] = [
    required("unit_weight_kn_m3", Kind::Uncertain(UNIT_WEIGHT, Family::Normal), "moist unit weight, above water"),
    derived(
        "saturated_unit_weight_kn_m3",
        Kind::Uncertain(UNIT_WEIGHT, Family::Normal),
        "unit_weight_kn_m3",
        "saturated unit weight, below water",
    ),
    required("youngs_modulus_mpa", Kind::Number(MODULUS), "Young's modulus of the rock mass"),
    required("poissons_ratio", Kind::Number(Quantity::new(Unit::One, Limits::at_least(0.0).under(0.5))), "Poisson's ratio"),
];

pub(super) static ROCK: Shape = Shape {
    doc: "One rock; layers and fills refer to it by its name",
    fields: &[
        WEIGHT_FIELDS[0],
        WEIGHT_FIELDS[1],
        WEIGHT_FIELDS[2],
        WEIGHT_FIELDS[3],
        optional(
            "strength_basis",
            Kind::Choice(&["intact", "rock mass", "back-analysed"]),
            "what the strengths describe; required with typed strengths and with lab",
        ),
        optional(
            "mass_factor",
            Kind::Table(&MASS_FACTOR),
            "from intact specimen to rock mass; required with strength_basis = \"intact\", there is no default",
        ),
        optional("tests", Kind::Integer(3, 10_000), "number of tests behind the strengths; sets the cautious value"),
        optional("tensile_strength_kpa", Kind::Uncertain(TENSILE, Family::Lognormal), "tensile strength"),
        optional("cohesion_kpa", Kind::Uncertain(COHESION, Family::Lognormal), "effective cohesion"),
        optional("friction_angle_deg", Kind::Uncertain(FRICTION, Family::Lognormal), "effective friction angle"),
        optional("correlation", Kind::Table(&CORRELATION), "correlation between strengths; left out, none"),
        optional("tested", Kind::Choice(&["dry", "natural", "saturated"]), "state in which the strengths were tested"),
        default(
            "wet_factor",
            Kind::Number(RATIO),
            Preset::Number(1.0),
            "factor on all strengths for wetting; required with tested = \"dry\" in the splash zone or below water",
        ),
        optional("uniaxial_strength_mpa", Kind::Uncertain(UNIAXIAL, Family::Lognormal), "compressive strength of the intact rock"),
        optional(
            "fracture_toughness_mpa_sqrt_m",
            Kind::Uncertain(TOUGHNESS, Family::Lognormal),
            "fracture toughness; informs the averaging length",
        ),
        optional(
            "k0",
            Kind::Uncertain(Quantity::new(Unit::One, Limits::at_least(0.0).at_most(10.0)), Family::Lognormal),
            "in-situ horizontal over vertical effective stress; left out, the worse of two values is taken and said so",
        ),
        optional("lab", Kind::File, "laboratory file, instead of typed strengths"),
        optional("hoek_brown", Kind::Table(&HOEK_BROWN), "rock-mass rating, instead of cohesion, friction and tension"),
    ],
    one_of: &[],
    together: &[],
    mistakes: &[
        ("youngs_modulus_gpa", "write youngs_modulus_mpa: 8 GPa is 8000 MPa"),
        ("youngs_modulus", "write youngs_modulus_mpa, in MPa"),
        ("density_kg_m3", "write unit_weight_kn_m3: 2450 kg/m3 is 24.0 kN/m3"),
        ("density", "write unit_weight_kn_m3: 2450 kg/m3 is 24.0 kN/m3"),
        ("unit_weight", "write unit_weight_kn_m3, in kN/m3"),
        ("tensile_strength_mpa", "write tensile_strength_kpa: 0.5 MPa is 500 kPa"),
        ("cohesion_mpa", "write cohesion_kpa: 0.5 MPa is 500 kPa"),
        ("ucs_mpa", "write uniaxial_strength_mpa"),
        ("poisson", "write poissons_ratio"),
        ("nu", "write poissons_ratio"),
    ],
};

/// Strengths on a plane: zero is common, so only the upper ranges are suspicious.
const ON_PLANE: Quantity = Quantity::new(Unit::Kilopascal, Limits::at_least(0.0).at_most(1e8));

pub(super) static JOINT_SET: Shape = Shape {
    doc: "Planes of weakness of one direction throughout the named rocks",
    fields: &[
        required("name", Kind::Text, "name"),
        default("kind", Kind::Choice(&["joint", "bedding", "fault"]), Preset::Word("joint"), "kind of plane"),
        required("rocks", Kind::Texts, "names of the rocks that hold it"),
        optional("dip_seaward_deg", PLANE_DIP, "dip toward the sea in the section; negative: landward"),
        optional("dip_deg", Kind::Number(Quantity::new(Unit::Degree, Limits::at_least(0.0).at_most(90.0))), "true dip"),
        optional(
            "dip_direction_deg",
            Kind::Number(Quantity::new(Unit::Degree, Limits::at_least(0.0).at_most(360.0))),
            "direction of the true dip, a grid bearing; needs location.landward_grid_bearing_deg",
        ),
        default(
            "persistence",
            Kind::Number(Quantity::new(Unit::One, Limits::at_least(0.0).at_most(1.0))),
            Preset::Number(1.0),
            "share of such a plane that is open; the rest is rock bridge",
        ),
        optional("spacing_m", LENGTH, "spacing"),
        required("cohesion_kpa", Kind::Uncertain(ON_PLANE, Family::Lognormal), "cohesion on the plane"),
        required("friction_angle_deg", Kind::Uncertain(FRICTION, Family::Lognormal), "friction angle on the plane"),
        required("tensile_strength_kpa", Kind::Uncertain(ON_PLANE, Family::Lognormal), "tensile strength across the plane"),
    ],
    one_of: &[OneOf { keys: &["dip_seaward_deg", "dip_deg"], required: true, what: "the dip" }],
    together: &[&["dip_deg", "dip_direction_deg"]],
    mistakes: &[],
};

pub(super) static DISCONTINUITY_SURVEY: Shape = Shape::new(
    "The statement that planes of weakness were looked for and none found; required for an outlook where no joint set is given",
    &[
        required("none_seen_by", Kind::Text, "who looked"),
        required("date", Kind::Date, "when"),
        required("reach_m", LENGTH, "how far along and behind the cliff"),
    ],
);
