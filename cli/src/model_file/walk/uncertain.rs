//! Numbers that may be uncertain: a plain number, mean with scatter, or two ends.
use super::super::kinds::{Family, Kind, Limits, Quantity, Shape, Unit, optional};
use super::super::tree::Val;
use super::scalar::{plain_number, with_unit};
use super::{At, Walk};
use checker::diagnostic::Diagnostic;
use checker::model::Uncertain;
use toml::Spanned;
use toml::de::{DeTable, DeValue};

/// Largest coefficient of variation; beyond it the mean says nothing.
const LARGEST_COV: f64 = 2.0;

const PLAIN: Kind = Kind::Number(Quantity::new(Unit::One, Limits { min: None, max: None }));

/// Keys of an uncertain number.
pub(in super::super) static UNCERTAIN: Shape = Shape {
    doc: "A number that may be uncertain",
    fields: &[
        optional("mean", PLAIN, "mean"),
        optional("cov", PLAIN, "coefficient of variation: standard deviation over mean, at most 2"),
        optional("standard_deviation", PLAIN, "standard deviation, in the unit of the mean; instead of cov"),
        optional(
            "distribution",
            Kind::Choice(&["lognormal", "normal", "truncated-normal"]),
            "distribution; left out, the default of the key",
        ),
        optional("min", PLAIN, "lower end: alone with max an even distribution, with \"truncated-normal\" a cut"),
        optional("max", PLAIN, "upper end"),
    ],
    one_of: &[],
    together: &[&["min", "max"]],
    mistakes: &[
        ("sd", "write standard_deviation, or cov"),
        ("std", "write standard_deviation, or cov"),
        ("mode", "write mean"),
        ("value", "write mean"),
    ],
};

/// What the table of an uncertain number holds, in the file's unit.
struct Parts {
    mean: Option<f64>,
    cov: Option<f64>,
    standard_deviation: Option<f64>,
    min: Option<f64>,
    max: Option<f64>,
    distribution: Option<String>,
}

impl Walk<'_> {
    pub(super) fn uncertain(&mut self, kind: &Kind, (quantity, family): (&Quantity, Family), at: &At, value: &Spanned<DeValue<'_>>) -> Val {
        let DeValue::Table(table) = value.get_ref() else {
            let number = self.number(kind, quantity, at, value);
            return number.map_or(Val::Bad, |number| Val::Uncertain(Uncertain::Exact(quantity.unit.to_si(number))));
        };
        let Some(parts) = self.parts(quantity, table, at, value) else {
            return Val::Bad;
        };
        match distribution(&parts, family) {
            Ok(number) => {
                if parts.distribution.is_none() && parts.mean.is_some() {
                    self.defaults_used.push(format!("{}.distribution = \"{}\"", at.path, family.word()));
                }
                Val::Uncertain(to_si(number, quantity.unit))
            }
            Err((message, hint)) => {
                self.error(Diagnostic::error("value.uncertain", &at.path, message).hint(hint), value);
                Val::Bad
            }
        }
    }

    /// The parts, each finite and the places each within the limits of the quantity.
    fn parts(&mut self, quantity: &Quantity, table: &DeTable<'_>, at: &At, value: &Spanned<DeValue<'_>>) -> Option<Parts> {
        let read = self.table(&UNCERTAIN, table, at, &value.span());
        let mut good = UNCERTAIN.fields.iter().all(|field| !matches!(read.value(field.key), Some(Val::Bad)));
        good &= table.iter().all(|(key, _)| UNCERTAIN.field(key.get_ref()).is_some());
        let is_cut = read.text_if("distribution") == Some("truncated-normal");
        for key in ["mean", "min", "max"] {
            if let (Some(part), false) = (table.get(key), is_cut && key != "mean") {
                let finite = plain_number(part.get_ref()).is_some_and(f64::is_finite);
                let within = finite && self.number(&PLAIN, quantity, &at.key(key), part).is_some();
                good &= within;
            }
        }
        good &= table.contains_key("min") == table.contains_key("max");
        good.then(|| Parts {
            mean: read.number_if("mean"),
            cov: read.number_if("cov"),
            standard_deviation: read.number_if("standard_deviation"),
            min: read.number_if("min"),
            max: read.number_if("max"),
            distribution: read.owned_if("distribution"),
        })
    }
}

/// The distribution that the parts describe, or what is wrong and what to do.
fn distribution(parts: &Parts, family: Family) -> Result<Uncertain, (String, String)> {
    let fault = |message: &str, hint: &str| Err((message.to_owned(), hint.to_owned()));
    let ends = parts.min.zip(parts.max);
    if let Some((min, max)) = ends
        && min >= max
    {
        return Err((format!("min = {min} is not less than max = {max}"), "swap the two, or write a plain number".into()));
    }
    let Some(mean) = parts.mean else {
        return match ends {
            Some(_) if parts.cov.is_some() || parts.standard_deviation.is_some() => {
                fault("cov or standard_deviation is given without mean", "add mean")
            }
            Some(_) if parts.distribution.is_some() => {
                fault("min and max alone are an even distribution", "leave distribution out, or add mean and cov")
            }
            Some((min, max)) => Ok(Uncertain::Uniform { min, max }),
            None => fault("an uncertain number needs mean, or min and max", "write { mean = …, cov = … } or { min = …, max = … }"),
        };
    };
    let standard_deviation = match (parts.cov, parts.standard_deviation) {
        (Some(_), Some(_)) => return fault("the scatter is given twice, by cov and by standard_deviation", "keep one of them"),
        (None, None) => return fault("mean is given without its scatter", "add cov or standard_deviation, or write a plain number"),
        (Some(cov), None) => cov * mean.abs(),
        (None, Some(deviation)) => deviation,
    };
    let cov = parts.cov.unwrap_or(standard_deviation / mean.abs());
    if standard_deviation < 0.0 || cov < 0.0 {
        return fault("the scatter is negative", "cov and standard_deviation are at least 0");
    }
    if standard_deviation <= 0.0 {
        return Ok(Uncertain::Exact(mean));
    }
    if cov > LARGEST_COV {
        let message = format!("a coefficient of variation of {cov:.3} is over the limit of {LARGEST_COV}: the mean says nothing then");
        return Err((message, "is it in percent? 30 % is 0.30".into()));
    }
    let word = parts.distribution.as_deref().unwrap_or(family.word());
    match (word, ends) {
        ("truncated-normal", Some((min, max))) if min < mean && mean < max => {
            Ok(Uncertain::TruncatedNormal { mean, standard_deviation, min, max })
        }
        ("truncated-normal", Some((min, max))) => {
            Err((format!("the mean {mean} does not lie between min = {min} and max = {max}"), "correct the ends".into()))
        }
        ("truncated-normal", None) => fault("\"truncated-normal\" needs min and max", "add both, or write \"normal\""),
        (_, Some(_)) => {
            fault("min and max beside mean cut a normal distribution", "add distribution = \"truncated-normal\", or leave min and max out")
        }
        ("normal", None) => Ok(Uncertain::Normal { mean, standard_deviation }),
        _ if mean <= 0.0 => Err((
            format!("a lognormal number must have a mean over 0, not {}", with_unit(mean, Unit::One)),
            "write a plain number, or distribution = \"normal\"".into(),
        )),
        _ => Ok(Uncertain::Lognormal { mean, cov }),
    }
}

/// The same distribution in SI units.
fn to_si(number: Uncertain, unit: Unit) -> Uncertain {
    let si = |value: f64| unit.to_si(value);
    match number {
        Uncertain::Exact(value) => Uncertain::Exact(si(value)),
        Uncertain::Lognormal { mean, cov } => Uncertain::Lognormal { mean: si(mean), cov },
        Uncertain::Normal { mean, standard_deviation } => Uncertain::Normal { mean: si(mean), standard_deviation: si(standard_deviation) },
        Uncertain::TruncatedNormal { mean, standard_deviation, min, max } => {
            Uncertain::TruncatedNormal { mean: si(mean), standard_deviation: si(standard_deviation), min: si(min), max: si(max) }
        }
        Uncertain::Uniform { min, max } => Uncertain::Uniform { min: si(min), max: si(max) },
    }
}
