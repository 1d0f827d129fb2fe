//! Units of laboratory files and their factors to SI.

/// What a number measures.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(super) enum Quantity {
    Stress,
    Length,
    Density,
    Force,
    Rate,
    Angle,
    Share,
    Plain,
}

/// Units of one quantity: as AGS4 writes them, as a CSV column ends, factor to SI.
type Units = &'static [(&'static [&'static str], &'static str, f64)];

const STRESS: Units = &[
    (&["Pa", "N/m2"], "pa", 1.0),
    (&["kPa", "kN/m2", "KPa", "kpa"], "kpa", 1e3),
    (&["MPa", "MN/m2", "N/mm2", "Mpa"], "mpa", 1e6),
    (&["GPa", "GN/m2", "kN/mm2"], "gpa", 1e9),
];
const LENGTH: Units = &[(&["mm"], "mm", 1e-3), (&["cm"], "cm", 1e-2), (&["m"], "m", 1.0)];
const DENSITY: Units = &[
    (&["kg/m3"], "kg_m3", 1.0),
    (&["Mg/m3", "t/m3", "g/cm3", "g/cc"], "mg_m3", 1e3),
    (&["t/m3"], "t_m3", 1e3),
    (&["g/cm3"], "g_cm3", 1e3),
];
const FORCE: Units = &[(&["N"], "n", 1.0), (&["kN"], "kn", 1e3), (&["MN"], "mn", 1e6)];
const RATE: Units = &[
    (&["mm/min"], "mm_per_min", 1e-3 / 60.0),
    (&["mm/s"], "mm_per_s", 1e-3),
    (&["mm/hr", "mm/h"], "mm_per_h", 1e-3 / 3600.0),
    (&["um/min"], "um_per_min", 1e-6 / 60.0),
];
const ANGLE: Units = &[(&["deg", "°", "degrees"], "deg", std::f64::consts::PI / 180.0), (&["rad"], "rad", 1.0)];
const SHARE: Units = &[(&["%"], "percent", 0.01)];

impl Quantity {
    fn units(self) -> Units {
        match self {
            Self::Stress => STRESS,
            Self::Length => LENGTH,
            Self::Density => DENSITY,
            Self::Force => FORCE,
            Self::Rate => RATE,
            Self::Angle => ANGLE,
            Self::Share => SHARE,
            Self::Plain => &[],
        }
    }

    /// What it is, with its article.
    pub(super) fn name(self) -> &'static str {
        match self {
            Self::Stress => "a stress",
            Self::Length => "a length",
            Self::Density => "a density",
            Self::Force => "a force",
            Self::Rate => "a rate of displacement",
            Self::Angle => "an angle",
            Self::Share => "a percentage",
            Self::Plain => "a plain number",
        }
    }

    /// Factor to SI of a unit as AGS4 writes it, superscripts and blanks forgiven.
    pub(super) fn factor(self, unit: &str) -> Option<f64> {
        let unit: String = unit.chars().filter(|c| !c.is_whitespace()).map(|c| if c == '²' { '2' } else { c }).collect();
        let unit = unit.replace('³', "3").replace('^', "");
        if self == Self::Plain {
            return unit.is_empty().then_some(1.0);
        }
        self.units().iter().find(|(names, ..)| names.contains(&unit.as_str())).map(|(.., factor)| *factor)
    }

    /// Factor to SI of the end of a CSV column's name.
    pub(super) fn suffix_factor(self, suffix: &str) -> Option<f64> {
        if self == Self::Plain {
            return suffix.is_empty().then_some(1.0);
        }
        self.units().iter().find(|(_, ending, _)| *ending == suffix).map(|(.., factor)| *factor)
    }

    /// Endings of CSV columns, for messages.
    pub(super) fn suffixes(self) -> Vec<&'static str> {
        self.units().iter().map(|(_, ending, _)| *ending).collect()
    }
}
