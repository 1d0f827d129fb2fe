//! Numbers of a group in SI units, by the group's own UNIT row.
use checker::diagnostic::Diagnostic;
use checker::lab::Origin;

use super::super::units::Quantity;
use super::groups::{Group, Row};

/// One number heading: name, what it measures, and its unit in the dictionaries.
pub(super) type Heading = (&'static str, Quantity, &'static str);

/// A group whose numbers are wanted.
pub(super) struct Table<'a> {
    pub group: &'a Group,
    /// Headings with their column and factor to SI.
    factors: Vec<(&'static str, usize, f64)>,
    /// Rocks by hole and depth.
    strata: &'a [Stratum],
}

/// One described stratum of a hole.
#[derive(Debug, Clone, PartialEq)]
pub(super) struct Stratum {
    pub hole: String,
    pub top_m: f64,
    pub base_m: f64,
    pub rock: String,
}

impl<'a> Table<'a> {
    /// Checks the units of the wanted headings; a heading that the edition lacks is simply absent.
    pub(super) fn new(group: &'a Group, wanted: &[Heading], strata: &'a [Stratum], findings: &mut Vec<Diagnostic>) -> Self {
        let mut factors = Vec::new();
        for (heading, quantity, usual) in wanted {
            let Some(i) = group.position(heading) else { continue };
            // A group without UNIT row has its own fault.
            let Some(unit) = group.units.get(i) else { continue };
            let at = format!("line {}, group {}, heading {heading}", group.unit_line, group.name);
            let Some(factor) = quantity.factor(unit) else {
                let got = if unit.is_empty() { "no unit".to_owned() } else { format!("unit `{unit}`") };
                let message = format!("{got} for {}", quantity.name());
                findings.push(Diagnostic::error("lab.unit", at, message).hint(format!("the AGS4 dictionaries have `{usual}` here")));
                continue;
            };
            if quantity.factor(usual).is_some_and(|expected| 1e-6 < (factor / expected - 1.0).abs()) {
                let message = format!("unit `{unit}` where the AGS4 dictionaries have `{usual}`; values are read in `{unit}`");
                findings.push(Diagnostic::warning("lab.unit-unusual", at, message).hint("check that the values were converted too"));
            }
            factors.push((*heading, i, factor));
        }
        Self { group, factors, strata }
    }

    /// Whether the group has the heading.
    pub(super) fn has(&self, heading: &str) -> bool {
        self.group.position(heading).is_some()
    }

    /// Text, trimmed; `None` where empty or absent.
    pub(super) fn text<'r>(&self, row: &'r Row, heading: &str) -> Option<&'r str> {
        self.group.field(row, heading).map(str::trim).filter(|text| !text.is_empty())
    }

    /// Number in SI units; `None` where empty, absent or wrong, the latter with a fault. It must be above 0, or 0 or more with `zero`.
    pub(super) fn number(&self, row: &Row, heading: &str, zero: bool, findings: &mut Vec<Diagnostic>) -> Option<f64> {
        let (_, i, factor) = self.factors.iter().find(|(name, ..)| *name == heading)?;
        let text = row.fields.get(*i).map(|text| text.trim()).filter(|text| !text.is_empty())?;
        let parsed = text.parse::<f64>().ok().filter(|value| value.is_finite() && (0.0 < *value || (zero && 0.0 <= *value)));
        if parsed.is_none() {
            let lowest = if zero { "0 or more" } else { "above 0" };
            let message = format!("a number {lowest} is needed, got `{text}`");
            let hint = if text.contains(',') { "write a decimal point, not a comma" } else { "leave a value that was not measured empty" };
            let at = format!("line {}, group {}, heading {heading}", row.line, self.group.name);
            findings.push(Diagnostic::error("lab.value", at, message).hint(hint));
        }
        parsed.map(|value| value * factor)
    }

    /// First of several headings that holds a number.
    pub(super) fn first(&self, row: &Row, headings: &[&str], zero: bool, findings: &mut Vec<Diagnostic>) -> Option<f64> {
        headings.iter().find_map(|heading| self.number(row, heading, zero, findings))
    }

    /// Hole, sample, specimen and depth as one name, the same in every group.
    pub(super) fn origin(&self, row: &Row) -> Origin {
        let named = ["LOCA_ID", "SAMP_REF", "SAMP_ID", "SPEC_REF"].iter().filter_map(|heading| self.text(row, heading));
        let mut parts: Vec<String> = named.map(str::to_owned).collect();
        let depth = self.text(row, "SPEC_DPTH").or_else(|| self.text(row, "SAMP_TOP"));
        parts.extend(depth.map(|depth| format!("at {depth} m")));
        let specimen = parts.join(" ");
        let depth_m = depth.and_then(|d| d.parse::<f64>().ok());
        let hole = self.text(row, "LOCA_ID");
        let rock = hole.zip(depth_m).and_then(|(hole, z)| self.strata.iter().find(|s| s.hole == hole && s.top_m <= z && z < s.base_m));
        Origin { line: row.line, specimen, rock: rock.map(|s| s.rock.clone()) }
    }
}
