//! Values that are not tables: numbers, words, dates, points.
use super::super::keys::LARGEST_COORDINATE_M;
use super::super::kinds::{Kind, Limits, Quantity, Unit};
use super::super::tree::Val;
use super::{At, Walk, describe, found, nearest_of};
use crate::diagnostics::{clean, clip};
use checker::diagnostic::{Diagnostic, nth};
use checker::model::Date;
use toml::Spanned;
use toml::de::{DeArray, DeValue};

/// Longest text of a key, characters.
const LONGEST_TEXT: usize = 10_000;

impl Walk<'_> {
    pub(super) fn scalar(&mut self, kind: &'static Kind, at: &At, value: &Spanned<DeValue<'_>>) -> Val {
        match kind {
            Kind::Number(quantity) => {
                self.number(kind, quantity, at, value).map_or(Val::Bad, |number| Val::Number(quantity.unit.to_si(number)))
            }
            Kind::Uncertain(quantity, family) => self.uncertain(kind, (quantity, *family), at, value),
            Kind::Integer(min, max) => self.integer(kind, [*min, *max], at, value),
            Kind::Text | Kind::File => self.text(kind, at, value).map_or(Val::Bad, Val::Text),
            Kind::Choice(words) => self.choice(kind, words, at, value),
            Kind::Flag => match value.get_ref() {
                DeValue::Boolean(flag) => Val::Flag(*flag),
                _ => self.wrong_kind(kind, at, value, None),
            },
            Kind::Date => self.date(kind, at, value),
            Kind::Texts => self.texts(kind, at, value),
            Kind::Points(n_least) => self.points(kind, *n_least, at, value),
            Kind::Point | Kind::Direction | Kind::Range | Kind::Pair => self.pair(kind, at, value),
            Kind::Table(_) | Kind::Tables(_) | Kind::Named(_) | Kind::Either(_) => self.wrong_kind(kind, at, value, None),
        }
    }

    /// A number in the file's unit that keeps its limits; `None` after an error.
    pub(super) fn number(&mut self, kind: &Kind, quantity: &Quantity, at: &At, value: &Spanned<DeValue<'_>>) -> Option<f64> {
        let Some(number) = plain_number(value.get_ref()) else {
            self.wrong_kind(kind, at, value, number_in_text(value.get_ref()));
            return None;
        };
        if !number.is_finite() {
            let message = format!("{} is not a number that can be used", found(value.get_ref()).trim_start_matches("the number "));
            self.error(Diagnostic::error("value.not-finite", &at.path, message).hint("write a number, or leave the key out"), value);
            return None;
        }
        if !quantity.limits.allow(number) {
            let message = format!(
                "{} is outside the limits: it must be {}",
                with_unit(number, quantity.unit),
                quantity.limits.describe(quantity.unit)
            );
            self.error(Diagnostic::error("value.limit", &at.path, message).hint(limit_hint(number, quantity)), value);
            return None;
        }
        if let Some(suspicion) = quantity.suspicions.iter().find(|range| range.from <= number && number < range.to) {
            let message = format!("{} is an unusual value here; was another unit meant?", with_unit(number, quantity.unit));
            self.error(Diagnostic::warning("value.unit", &at.path, message).hint(format!("likely {}", suspicion.likely)), value);
        }
        Some(number)
    }

    fn integer(&mut self, kind: &Kind, [min, max]: [i64; 2], at: &At, value: &Spanned<DeValue<'_>>) -> Val {
        let DeValue::Integer(_) = value.get_ref() else {
            return self.wrong_kind(kind, at, value, None);
        };
        let number = whole_number(value.get_ref());
        if let Some(number) = number.filter(|number| (min..=max).contains(number)) {
            return Val::Integer(number);
        }
        let limit = match (min, max) {
            (1, 1) => "this program reads format 1".to_owned(),
            (_, i64::MAX) => format!("it must be at least {min}"),
            _ => format!("it must be from {min} to {max}"),
        };
        let message = format!("{} is outside the limits: {limit}", found(value.get_ref()).trim_start_matches("the number "));
        self.error(Diagnostic::error("value.limit", &at.path, message).hint("correct the number"), value);
        Val::Bad
    }

    pub(super) fn text(&mut self, kind: &Kind, at: &At, value: &Spanned<DeValue<'_>>) -> Option<String> {
        let DeValue::String(text) = value.get_ref() else {
            self.wrong_kind(kind, at, value, Some("text stands in quotes".into()));
            return None;
        };
        let text = clean(text);
        let problem = if text.trim().is_empty() {
            "the text is empty"
        } else if text.chars().nth(LONGEST_TEXT).is_some() {
            "the text is longer than 10,000 characters"
        } else {
            return Some(text.trim().to_owned());
        };
        self.error(Diagnostic::error("value.empty", &at.path, problem).hint("write a text, or leave the key out"), value);
        None
    }

    fn choice(&mut self, kind: &Kind, words: &'static [&'static str], at: &At, value: &Spanned<DeValue<'_>>) -> Val {
        let DeValue::String(text) = value.get_ref() else {
            return self.wrong_kind(kind, at, value, None);
        };
        if words.contains(&text.as_ref()) {
            return Val::Text(text.to_string());
        }
        let message =
            format!("{:?} is none of the words that are known here: {}", clip(text, 40), describe(kind).trim_start_matches("one of "));
        let hint = match nearest_of(text, words.iter().copied()) {
            Some(word) => format!("did you mean \"{word}\"?"),
            None => number_in_text(value.get_ref()).unwrap_or_else(|| "write one of them".into()),
        };
        self.error(Diagnostic::error("value.word", &at.path, message).hint(hint), value);
        Val::Bad
    }

    fn date(&mut self, kind: &Kind, at: &At, value: &Spanned<DeValue<'_>>) -> Val {
        match value.get_ref() {
            DeValue::Datetime(toml::value::Datetime { date: Some(date), time: None, offset: None }) => {
                Val::Date(Date { year: i32::from(date.year), month: date.month, day: date.day })
            }
            DeValue::Datetime(_) => self.wrong_kind(kind, at, value, Some("write the day only".into())),
            DeValue::String(_) => self.wrong_kind(kind, at, value, Some("a date stands without quotes, year-month-day".into())),
            _ => self.wrong_kind(kind, at, value, None),
        }
    }

    fn texts(&mut self, kind: &Kind, at: &At, value: &Spanned<DeValue<'_>>) -> Val {
        let DeValue::Array(entries) = value.get_ref() else {
            let hint = matches!(value.get_ref(), DeValue::String(_)).then(|| "put it into square brackets: [\"…\"]".into());
            return self.wrong_kind(kind, at, value, hint);
        };
        let mut texts = Vec::with_capacity(entries.len());
        for (i_entry, entry) in entries.iter().enumerate() {
            let at = at.entry(i_entry);
            self.collector.places.insert(&at.path, 0, entry.span());
            match self.text(&Kind::Text, &at, entry) {
                Some(text) => texts.push(text),
                None => return Val::Bad,
            }
        }
        Val::Texts(texts)
    }

    fn points(&mut self, kind: &Kind, n_least: usize, at: &At, value: &Spanned<DeValue<'_>>) -> Val {
        let DeValue::Array(entries) = value.get_ref() else {
            return self.wrong_kind(kind, at, value, None);
        };
        if entries.len() == 2 && entries.iter().all(|entry| plain_number(entry.get_ref()).is_some()) {
            return self.wrong_kind(
                kind,
                at,
                value,
                Some("one point is not enough, and points stand in double brackets: [[x, z], [x, z]]".into()),
            );
        }
        let mut points = Vec::with_capacity(entries.len());
        for (i_entry, entry) in entries.iter().enumerate() {
            let at = At { path: nth(&at.path, i_entry), ..At::default() };
            self.collector.places.insert(&at.path, 0, entry.span());
            match self.pair(&Kind::Point, &at, entry) {
                Val::Pair(point) => points.push(point),
                _ => points.push([f64::NAN; 2]),
            }
        }
        if points.iter().flatten().any(|coordinate| coordinate.is_nan()) {
            return Val::Bad;
        }
        if points.len() < n_least {
            let message = format!("there {} here, but at least {n_least} are needed", count(points.len()));
            self.error(
                Diagnostic::error("value.few-points", &at.path, message).hint("add points, or leave the key out if it is optional"),
                value,
            );
            return Val::Bad;
        }
        Val::Points(points)
    }

    fn pair(&mut self, kind: &Kind, at: &At, value: &Spanned<DeValue<'_>>) -> Val {
        let DeValue::Array(entries) = value.get_ref() else {
            return self.wrong_kind(kind, at, value, None);
        };
        if entries.len() != 2 {
            let hint = pair_hint(entries);
            return self.wrong_kind(kind, at, value, hint);
        }
        let quantity = Quantity::new(Unit::Meter, Limits::at_least(-LARGEST_COORDINATE_M).at_most(LARGEST_COORDINATE_M));
        let of_number = Kind::Number(quantity);
        let numbers: Vec<Option<f64>> = entries.iter().map(|entry| self.number(&of_number, &quantity, at, entry)).collect();
        let &[Some(first), Some(second)] = numbers.as_slice() else {
            return Val::Bad;
        };
        let (problem, hint) = match kind {
            Kind::Range if first >= second => ("the first value must be less than the second", "x grows landward: write [from, to]"),
            Kind::Pair if first < 0.0 || second < 0.0 => ("both lengths must be at least 0", "write them without a sign"),
            Kind::Direction if first.hypot(second) < 1e-9 => {
                ("a direction of length zero points nowhere", "for example [0, -1] is downward")
            }
            _ => return Val::Pair([first, second]),
        };
        self.error(Diagnostic::error("value.limit", &at.path, problem).hint(hint), value);
        Val::Bad
    }
}

/// The value of a number, whole or not; NaN and infinity are returned as they are.
pub(super) fn plain_number(value: &DeValue<'_>) -> Option<f64> {
    match value {
        DeValue::Integer(number) => {
            i128::from_str_radix(number.as_str(), number.radix()).ok().map(|number| number as f64).or(Some(f64::INFINITY))
        }
        DeValue::Float(number) => number.as_str().parse().ok(),
        _ => None,
    }
}

fn whole_number(value: &DeValue<'_>) -> Option<i64> {
    match value {
        DeValue::Integer(number) => i64::from_str_radix(number.as_str(), number.radix()).ok(),
        _ => None,
    }
}

/// The remedy where a text holds a number.
pub(super) fn number_in_text(value: &DeValue<'_>) -> Option<String> {
    let DeValue::String(text) = value else { return None };
    let with_point = text.trim().replace(',', ".");
    with_point.parse::<f64>().ok().filter(|number| number.is_finite())?;
    Some(format!("write the number without quotes{}: {with_point}", if text.contains(',') { " and with a decimal point" } else { "" }))
}

fn pair_hint(entries: &DeArray<'_>) -> Option<String> {
    let n_numbers = entries.iter().filter(|entry| plain_number(entry.get_ref()).is_some()).count();
    let all = n_numbers == entries.len();
    (all && n_numbers > 2).then(|| "two numbers are expected; if these are decimal commas, write points: [4.1, 31.2]".into())
}

fn count(n_points: usize) -> String {
    match n_points {
        0 => "are no points".into(),
        1 => "is 1 point".into(),
        n => format!("are {n} points"),
    }
}

/// A number with its unit.
pub(super) fn with_unit(number: f64, unit: Unit) -> String {
    match unit.symbol() {
        "" => format!("{number}"),
        symbol => format!("{number} {symbol}"),
    }
}

fn limit_hint(number: f64, quantity: &Quantity) -> String {
    if quantity.unit == Unit::Meter && number.abs() > LARGEST_COORDINATE_M {
        return "coordinates count from a fixed mark near the cliff; grid coordinates belong in [location]".into();
    }
    match quantity.suspicions.iter().find(|range| number > 0.0 && range.from <= number && number < range.to) {
        Some(suspicion) => format!("likely {}", suspicion.likely),
        None => "check the value and its unit, which is in the name of the key".into(),
    }
}
