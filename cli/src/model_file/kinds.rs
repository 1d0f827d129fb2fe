//! What a key of the model file may hold: kind, unit, limits, need. The words in which `keys` is written.

/// Unit in which a number stands in the file.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(crate) enum Unit {
    /// A ratio or a count.
    One,
    /// Metres.
    Meter,
    /// Degrees.
    Degree,
    /// Kilopascal.
    Kilopascal,
    /// Megapascal.
    Megapascal,
    /// Kilonewton per cubic metre.
    KilonewtonPerCubicMeter,
    /// Kilonewton.
    Kilonewton,
    /// Kilonewton per millimetre.
    KilonewtonPerMillimeter,
    /// Megapascal times square root of a metre.
    MegapascalRootMeter,
    /// Metres a year.
    MeterPerYear,
    /// Years.
    Year,
    /// Events a year.
    PerYear,
}

impl Unit {
    /// The unit as people write it; empty for a ratio.
    pub(crate) const fn symbol(self) -> &'static str {
        match self {
            Self::One => "",
            Self::Meter => "m",
            Self::Degree => "degrees",
            Self::Kilopascal => "kPa",
            Self::Megapascal => "MPa",
            Self::KilonewtonPerCubicMeter => "kN/m3",
            Self::Kilonewton => "kN",
            Self::KilonewtonPerMillimeter => "kN/mm",
            Self::MegapascalRootMeter => "MPa m^0.5",
            Self::MeterPerYear => "m a year",
            Self::Year => "years",
            Self::PerYear => "a year",
        }
    }

    /// The value in SI units (angles in rad; years stay years).
    pub(crate) fn to_si(self, value: f64) -> f64 {
        match self {
            Self::One | Self::Meter | Self::MeterPerYear | Self::Year | Self::PerYear => value,
            Self::Degree => value.to_radians(),
            Self::Kilopascal | Self::KilonewtonPerCubicMeter | Self::Kilonewton => value * 1e3,
            Self::Megapascal | Self::KilonewtonPerMillimeter | Self::MegapascalRootMeter => value * 1e6,
        }
    }
}

/// Limits of a number, in the file's unit.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(crate) struct Limits {
    /// Lower limit and whether it is allowed itself.
    pub(crate) min: Option<(f64, bool)>,
    /// Upper limit and whether it is allowed itself.
    pub(crate) max: Option<(f64, bool)>,
}

impl Limits {
    /// Above `min`, which is not allowed itself.
    pub(crate) const fn over(min: f64) -> Self {
        Self { min: Some((min, false)), max: None }
    }

    /// `min` or more.
    pub(crate) const fn at_least(min: f64) -> Self {
        Self { min: Some((min, true)), max: None }
    }

    /// And below `max`, which is not allowed itself.
    pub(crate) const fn under(self, max: f64) -> Self {
        Self { min: self.min, max: Some((max, false)) }
    }

    /// And `max` or less.
    pub(crate) const fn at_most(self, max: f64) -> Self {
        Self { min: self.min, max: Some((max, true)) }
    }

    /// Whether a finite value keeps the limits.
    pub(crate) fn allow(self, value: f64) -> bool {
        let above = self.min.is_none_or(|(min, included)| value > min || (included && value >= min));
        let below = self.max.is_none_or(|(max, included)| value < max || (included && value <= max));
        above && below
    }

    /// "over 0 and at most 90 degrees".
    pub(crate) fn describe(self, unit: Unit) -> String {
        let low = self.min.map(|(min, included)| format!("{} {min}", if included { "at least" } else { "over" }));
        let high = self.max.map(|(max, included)| format!("{} {max}", if included { "at most" } else { "under" }));
        let text = [low, high].into_iter().flatten().collect::<Vec<_>>().join(" and ");
        if unit.symbol().is_empty() { text } else { format!("{text} {}", unit.symbol()) }
    }
}

/// A value that is allowed but looks as if it were in another unit.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(crate) struct Suspicion {
    /// Values from here (included), in the file's unit.
    pub(crate) from: f64,
    /// To here (excluded).
    pub(crate) to: f64,
    /// What it may have been meant to be.
    pub(crate) likely: &'static str,
}

/// Distribution that an uncertain number has when none is named.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(crate) enum Family {
    /// Lognormal: strengths and other positive quantities.
    Lognormal,
    /// Normal: unit weights, ratings.
    Normal,
}

impl Family {
    /// The word of the file.
    pub(crate) const fn word(self) -> &'static str {
        match self {
            Self::Lognormal => "lognormal",
            Self::Normal => "normal",
        }
    }
}

/// A number's unit, limits and suspicious ranges.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(crate) struct Quantity {
    /// Unit in the file.
    pub(crate) unit: Unit,
    /// Limits in that unit.
    pub(crate) limits: Limits,
    /// Ranges that draw a warning.
    pub(crate) suspicions: &'static [Suspicion],
}

impl Quantity {
    /// A quantity without suspicious ranges.
    pub(crate) const fn new(unit: Unit, limits: Limits) -> Self {
        Self { unit, limits, suspicions: &[] }
    }

    /// The same with suspicious ranges.
    pub(crate) const fn suspect(self, suspicions: &'static [Suspicion]) -> Self {
        Self { unit: self.unit, limits: self.limits, suspicions }
    }
}

/// What a key may hold.
#[derive(Debug, Clone, Copy)]
pub(crate) enum Kind {
    /// A number.
    Number(Quantity),
    /// A number that may be uncertain.
    Uncertain(Quantity, Family),
    /// A whole number from the first to the second.
    Integer(i64, i64),
    /// Text that is not blank.
    Text,
    /// One of these words.
    Choice(&'static [&'static str]),
    /// true or false.
    Flag,
    /// A day.
    Date,
    /// `[x, z]` in m.
    Point,
    /// `[x, z]`, a direction.
    Direction,
    /// `[from, to]` in m, growing.
    Range,
    /// Two lengths in m, each at least 0.
    Pair,
    /// `[[x, z], …]` in m with at least so many points.
    Points(usize),
    /// A list of texts.
    Texts,
    /// A path relative to the model file.
    File,
    /// A table.
    Table(&'static Shape),
    /// A list of tables.
    Tables(&'static Shape),
    /// Tables by name.
    Named(&'static Shape),
    /// The first of these whose form fits.
    Either(&'static [Kind]),
}

/// Whether a key must be there, and what holds if it is not.
#[derive(Debug, Clone, Copy)]
pub(crate) enum Need {
    /// Must be there.
    Required,
    /// May be left out, with a meaning of its own; nothing is assumed in its place.
    Optional,
    /// Left out, it is this value, written as in the file.
    Default(Preset),
    /// Left out, it is this value, which adds nothing to the model; not listed among the defaults used.
    Neutral(Preset),
    /// Left out, it follows from other data in this way.
    Derived(&'static str),
}

/// A default value in the file's unit.
#[derive(Debug, Clone, Copy)]
pub(crate) enum Preset {
    /// A number.
    Number(f64),
    /// A whole number.
    Integer(i64),
    /// A word.
    Word(&'static str),
    /// true or false.
    Flag(bool),
}

/// One key.
#[derive(Debug, Clone, Copy)]
pub(crate) struct Field {
    /// The key.
    pub(crate) key: &'static str,
    /// What it may hold.
    pub(crate) kind: Kind,
    /// Whether it must be there.
    pub(crate) need: Need,
    /// One line for the reference and the schema, without a full stop.
    pub(crate) doc: &'static str,
}

/// Keys of which exactly one (or at most one) may be there.
#[derive(Debug, Clone, Copy)]
pub(crate) struct OneOf {
    /// The keys.
    pub(crate) keys: &'static [&'static str],
    /// Whether one of them must be there.
    pub(crate) required: bool,
    /// What they are sources of.
    pub(crate) what: &'static str,
}

/// Keys of one table.
#[derive(Debug)]
pub(crate) struct Shape {
    /// What the table is, one line without a full stop.
    pub(crate) doc: &'static str,
    /// Its keys, in the order of the reference.
    pub(crate) fields: &'static [Field],
    /// Keys that exclude each other.
    pub(crate) one_of: &'static [OneOf],
    /// Keys that must come together.
    pub(crate) together: &'static [&'static [&'static str]],
    /// Frequent wrong keys, each with what to write instead.
    pub(crate) mistakes: &'static [(&'static str, &'static str)],
}

impl Shape {
    /// A table without rules among its keys.
    pub(crate) const fn new(doc: &'static str, fields: &'static [Field]) -> Self {
        Self { doc, fields, one_of: &[], together: &[], mistakes: &[] }
    }

    /// The field of that key.
    pub(crate) fn field(&self, key: &str) -> Option<&'static Field> {
        self.fields.iter().find(|field| field.key == key)
    }
}

/// A key that must be there.
pub(crate) const fn required(key: &'static str, kind: Kind, doc: &'static str) -> Field {
    Field { key, kind, need: Need::Required, doc }
}

/// A key that may be left out.
pub(crate) const fn optional(key: &'static str, kind: Kind, doc: &'static str) -> Field {
    Field { key, kind, need: Need::Optional, doc }
}

/// A key with a default value.
pub(crate) const fn default(key: &'static str, kind: Kind, preset: Preset, doc: &'static str) -> Field {
    Field { key, kind, need: Need::Default(preset), doc }
}

/// A key that adds nothing where it is left out.
pub(crate) const fn neutral(key: &'static str, kind: Kind, preset: Preset, doc: &'static str) -> Field {
    Field { key, kind, need: Need::Neutral(preset), doc }
}

/// A key whose default follows from other data.
pub(crate) const fn derived(key: &'static str, kind: Kind, how: &'static str, doc: &'static str) -> Field {
    Field { key, kind, need: Need::Derived(how), doc }
}
