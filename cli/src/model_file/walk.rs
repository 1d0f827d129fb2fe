//! Reads the parsed file by the table of keys: every key, kind, limit and default, all findings in one pass.
mod scalar;
mod uncertain;

pub(super) use uncertain::UNCERTAIN;

use super::collect::Collector;
use super::keys::MODEL;
use super::kinds::{Field, Kind, Need, Preset, Shape};
use super::not_yet;
use super::tree::{Tab, Val};
use crate::diagnostics::{clean, clip};
use checker::diagnostic::{Diagnostic, child, nth};
use std::ops::Range;
use toml::Spanned;
use toml::de::{DeTable, DeValue};

/// Largest number of unknown keys that are reported in one table.
const MOST_UNKNOWN: usize = 200;

/// A key path with its pattern: `rocks.sandstone.k0` and `rocks.*.k0`.
#[derive(Debug, Clone, Default)]
pub(super) struct At {
    pub(super) path: String,
    pattern: String,
}

impl At {
    fn key(&self, key: &str) -> Self {
        Self { path: child(&self.path, key), pattern: child(&self.pattern, key) }
    }

    fn entry(&self, i_entry: usize) -> Self {
        Self { path: nth(&self.path, i_entry), pattern: format!("{}[]", self.pattern) }
    }

    fn name(&self, name: &str) -> Self {
        Self { path: child(&self.path, name), pattern: format!("{}.*", self.pattern) }
    }
}

/// The reading on its way.
#[derive(Debug)]
pub(super) struct Walk<'c> {
    pub(super) collector: &'c mut Collector,
    /// Defaults used, as `key = value`.
    pub(super) defaults_used: Vec<String>,
}

impl Walk<'_> {
    /// Reads the whole file.
    pub(super) fn file(&mut self, table: &DeTable<'_>, span: &Range<usize>) -> Tab {
        let mut file = self.table(&MODEL, table, &At::default(), span);
        // The defaults of a table that is left out hold as if it were there and empty.
        for key in ["checks", "extent", "below"] {
            if let (Some(Field { kind: Kind::Table(shape), key, .. }), false) = (MODEL.field(key), file.has(key)) {
                let empty = self.table(shape, &DeTable::new(), &At::default().key(key), span);
                file.set(key, Val::Table(empty));
            }
        }
        file
    }

    /// Reads one table by its shape; `span` is where the table stands.
    pub(super) fn table(&mut self, shape: &'static Shape, table: &DeTable<'_>, at: &At, span: &Range<usize>) -> Tab {
        if !at.path.is_empty() {
            self.collector.places.insert(&at.path, 0, span.clone());
        }
        let mut read = Tab::new(shape, at.path.clone());
        self.unknown_keys(shape, table, at);
        for field in shape.fields {
            match table.get(field.key) {
                Some(value) => {
                    let at = at.key(field.key);
                    self.collector.places.insert(&at.path, 0, value.span());
                    let value = self.field(field, &at, value);
                    read.set(field.key, value);
                }
                None => self.absent(field, at, span, &mut read),
            }
        }
        self.relations(shape, table, at, span);
        read
    }

    fn field(&mut self, field: &'static Field, at: &At, value: &Spanned<DeValue<'_>>) -> Val {
        let read = self.value(&field.kind, at, value);
        if let Some(entry) = not_yet::find(&at.pattern) {
            let message = format!("{} is not available yet: this version cannot handle {}", field.key, entry.what);
            self.error(Diagnostic::error("key.not-available", &at.path, message).hint("leave this key out for now"), value);
        }
        read
    }

    /// Reads a value of one kind.
    pub(super) fn value(&mut self, kind: &'static Kind, at: &At, value: &Spanned<DeValue<'_>>) -> Val {
        match kind {
            Kind::Table(shape) => match value.get_ref() {
                DeValue::Table(table) => Val::Table(self.table(shape, table, at, &value.span())),
                DeValue::Array(_) => self.wrong_kind(kind, at, value, Some("a single table is written [name], not [[name]]".into())),
                _ => self.wrong_kind(kind, at, value, None),
            },
            Kind::Tables(shape) => self.tables(shape, kind, at, value),
            Kind::Named(shape) => self.named(shape, kind, at, value),
            Kind::Either(kinds) => match kinds.iter().find(|kind| fits(kind, value.get_ref())) {
                Some(kind) => self.value(kind, at, value),
                None => self.wrong_kind(kind, at, value, scalar::number_in_text(value.get_ref())),
            },
            _ => self.scalar(kind, at, value),
        }
    }

    fn tables(&mut self, shape: &'static Shape, kind: &Kind, at: &At, value: &Spanned<DeValue<'_>>) -> Val {
        let entries = match value.get_ref() {
            DeValue::Array(entries) => entries,
            DeValue::Table(_) => {
                let hint = format!("a list of tables is written with double brackets: [[{}]]", at.path);
                return self.wrong_kind(kind, at, value, Some(hint));
            }
            _ => return self.wrong_kind(kind, at, value, None),
        };
        if entries.is_empty() {
            self.error(Diagnostic::error("value.empty", &at.path, "the list is empty").hint("leave the key out, or write an entry"), value);
            return Val::Bad;
        }
        let mut read = Vec::with_capacity(entries.len());
        for (i_entry, entry) in entries.iter().enumerate() {
            let at = at.entry(i_entry);
            match entry.get_ref() {
                DeValue::Table(table) => read.push(self.table(shape, table, &at, &entry.span())),
                _ => {
                    self.wrong_kind(kind, &at, entry, None);
                }
            }
        }
        if read.len() == entries.len() { Val::Tables(read) } else { Val::Bad }
    }

    fn named(&mut self, shape: &'static Shape, kind: &Kind, at: &At, value: &Spanned<DeValue<'_>>) -> Val {
        let DeValue::Table(tables) = value.get_ref() else {
            return self.wrong_kind(kind, at, value, Some(format!("write [{}.\"name\"]", at.path)));
        };
        let mut read = Vec::new();
        for (name, entry) in tables {
            let clean_name = clean(name.get_ref());
            let at = at.name(&clean_name);
            let DeValue::Table(table) = entry.get_ref() else {
                let hint = format!("every rock has a table of its own with its name: [{}]", at.path);
                self.wrong_kind(kind, &at, entry, Some(hint));
                continue;
            };
            let span = if entry.span().is_empty() { name.span() } else { entry.span() };
            let table = self.table(shape, table, &at, &span);
            read.push((clean_name, table));
        }
        Val::Named(read)
    }

    /// A key that is not there: an error, a default, or nothing.
    fn absent(&mut self, field: &'static Field, at: &At, span: &Range<usize>, read: &mut Tab) {
        let at = at.key(field.key);
        match field.need {
            Need::Required => self.missing(field.key, field.doc, &at, span),
            Need::Optional => {}
            Need::Neutral(preset) => read.set(field.key, preset_value(preset, &field.kind).0),
            Need::Derived(how) => self.defaults_used.push(format!("{} = {how}", at.path)),
            Need::Default(preset) => {
                let (value, text) = preset_value(preset, &field.kind);
                self.defaults_used.push(format!("{} = {text}", at.path));
                read.set(field.key, value);
            }
        }
    }

    fn missing(&mut self, key: &str, doc: &str, at: &At, span: &Range<usize>) {
        if self.collector.key_is_on_broken_line(key) {
            return;
        }
        let table = at.path.strip_suffix(key).map_or("", |head| head.trim_end_matches('.'));
        let place = if table.is_empty() { "the file".to_owned() } else { format!("[{table}]") };
        let diagnostic = Diagnostic::error("key.missing", &at.path, format!("{place} has no {key}")).hint(format!("add {key}: {doc}"));
        self.collector.add_at(diagnostic, 0, self.header(span));
    }

    fn unknown_keys(&mut self, shape: &'static Shape, table: &DeTable<'_>, at: &At) {
        let unknown = table.keys().filter(|key| shape.field(key.get_ref()).is_none());
        for key in unknown.take(MOST_UNKNOWN) {
            let name = key.get_ref();
            let shown = clip(name, 60);
            let at = at.key(&shown);
            let diagnostic = Diagnostic::error("key.unknown", &at.path, format!("there is no key {shown:?} here"));
            let mistake = shape.mistakes.iter().find(|(wrong, _)| *wrong == name.as_ref());
            let hint = match (mistake, nearest(name, shape)) {
                (Some((_, instead)), _) => (*instead).to_owned(),
                (None, Some(key)) => format!("did you mean {key}?"),
                (None, None) => format!("the keys here are {}", list(shape.fields.iter().map(|field| field.key))),
            };
            self.collector.add_at(diagnostic.hint(hint), 0, key.span());
        }
    }

    /// Keys that exclude each other, or must come together.
    fn relations(&mut self, shape: &'static Shape, table: &DeTable<'_>, at: &At, span: &Range<usize>) {
        for one_of in shape.one_of {
            let given: Vec<&str> = one_of.keys.iter().copied().filter(|key| table.contains_key(*key)).collect();
            let broken = one_of.keys.iter().any(|key| self.collector.key_is_on_broken_line(key));
            if let [first, rest @ ..] = given.as_slice()
                && let Some(second) = rest.first()
            {
                let message = format!("{} is given twice, by {first} and by {second}", one_of.what);
                let diagnostic = Diagnostic::error("key.two-sources", at.key(second).path, message).hint("keep one of them");
                self.collector.add(diagnostic.also(at.key(first).path));
            } else if given.is_empty() && one_of.required && !broken {
                let message = format!("{} is not given", one_of.what);
                let hint = format!("write one of {}", list(one_of.keys.iter().copied()));
                self.collector.add_at(Diagnostic::error("key.missing", &at.path, message).hint(hint), 0, self.header(span));
            }
        }
        for together in shape.together {
            let given = together.iter().find(|key| table.contains_key(**key));
            for key in *together {
                if let (Some(given), false) = (given, table.contains_key(*key)) {
                    let message = format!("{given} is given without {key}");
                    let diagnostic =
                        Diagnostic::error("key.missing", at.key(key).path, message).hint(format!("add {key}, or leave {given} out"));
                    let place = table.get(*given).map_or_else(|| self.header(span), Spanned::span);
                    self.collector.add_at(diagnostic, 0, place);
                }
            }
        }
    }

    /// An error at a value.
    pub(super) fn error(&mut self, diagnostic: Diagnostic, value: &Spanned<DeValue<'_>>) {
        self.collector.add_at(diagnostic, 0, value.span());
    }

    /// The first line of a table.
    fn header(&self, span: &Range<usize>) -> Range<usize> {
        let text = self.collector.sources.first().map_or("", |source| source.text.as_str());
        let line_end = text.get(span.clone()).and_then(|table| table.find('\n')).map_or(span.end, |i| span.start + i);
        span.start..line_end
    }

    pub(super) fn wrong_kind(&mut self, kind: &Kind, at: &At, value: &Spanned<DeValue<'_>>, hint: Option<String>) -> Val {
        let message = format!("this must be {}, but it is {}", describe(kind), found(value.get_ref()));
        let diagnostic = Diagnostic::error("value.kind", &at.path, message);
        self.error(diagnostic.hint(hint.unwrap_or_else(|| example(kind))), value);
        Val::Bad
    }
}

/// Whether a value has the form of a kind.
fn fits(kind: &Kind, value: &DeValue<'_>) -> bool {
    match kind {
        Kind::Number(_) | Kind::Integer(..) => matches!(value, DeValue::Integer(_) | DeValue::Float(_)),
        Kind::Text | Kind::Choice(_) | Kind::File => matches!(value, DeValue::String(_)),
        Kind::Table(_) => matches!(value, DeValue::Table(_)),
        Kind::Points(_) | Kind::Tables(_) | Kind::Texts => matches!(value, DeValue::Array(_)),
        _ => false,
    }
}

fn preset_value(preset: Preset, kind: &Kind) -> (Val, String) {
    match preset {
        Preset::Number(number) => {
            let value = if let Kind::Number(quantity) = kind { quantity.unit.to_si(number) } else { number };
            (Val::Number(value), format!("{number}"))
        }
        Preset::Integer(number) => (Val::Integer(number), format!("{number}")),
        Preset::Word(word) => (Val::Text(word.to_owned()), format!("\"{word}\"")),
        Preset::Flag(flag) => (Val::Flag(flag), format!("{flag}")),
    }
}

/// The valid key that is most like a wrong one, if any is.
fn nearest(key: &str, shape: &'static Shape) -> Option<&'static str> {
    nearest_of(key, shape.fields.iter().map(|field| field.key))
}

/// The word that is most like a wrong one, if any is.
pub(super) fn nearest_of<'w>(wrong: &str, words: impl Iterator<Item = &'w str>) -> Option<&'w str> {
    let wrong: String = wrong.chars().take(80).collect::<String>().to_lowercase();
    words
        .map(|word| (strsim::jaro_winkler(&wrong, &word.to_lowercase()), word))
        .filter(|(likeness, _)| *likeness > 0.82)
        .max_by(|a, b| a.0.total_cmp(&b.0))
        .map(|(_, word)| word)
}

/// "a, b and c".
pub(super) fn list<'w>(words: impl Iterator<Item = &'w str>) -> String {
    let words: Vec<&str> = words.collect();
    match words.as_slice() {
        [] => String::new(),
        [one] => (*one).to_owned(),
        [head @ .., last] => format!("{} and {last}", head.join(", ")),
    }
}

/// A kind in words: "this must be …".
pub(super) fn describe(kind: &Kind) -> String {
    match kind {
        Kind::Number(quantity) => match quantity.unit.symbol() {
            "" => "a number".into(),
            unit => format!("a number in {unit}"),
        },
        Kind::Uncertain(quantity, _) => match quantity.unit.symbol() {
            "" => "a number, or { mean, cov } or { min, max }".into(),
            unit => format!("a number in {unit}, or {{ mean, cov }} or {{ min, max }}"),
        },
        Kind::Integer(..) => "a whole number".into(),
        Kind::Text => "text in quotes".into(),
        Kind::Choice(words) => format!("one of {}", words.iter().map(|word| format!("\"{word}\"")).collect::<Vec<_>>().join(", ")),
        Kind::Flag => "true or false".into(),
        Kind::Date => "a date such as 2026-03-14, without quotes".into(),
        Kind::Point => "a point [x, z] in m".into(),
        Kind::Direction => "a direction [x, z]".into(),
        Kind::Range => "[from, to] in m".into(),
        Kind::Pair => "[left, right] in m".into(),
        Kind::Points(n) => format!("a list of {n} or more points [[x, z], …] in m"),
        Kind::Texts => "a list of texts [\"…\", \"…\"]".into(),
        Kind::File => "a path in quotes, relative to the model file".into(),
        Kind::Table(_) => "a table".into(),
        Kind::Tables(_) => "a list of tables".into(),
        Kind::Named(_) => "tables by name".into(),
        Kind::Either(kinds) => kinds.iter().map(describe).collect::<Vec<_>>().join(", or "),
    }
}

/// How a value of a kind is written.
fn example(kind: &Kind) -> String {
    match kind {
        Kind::Number(_) => "write a plain number, for example 24.5".into(),
        Kind::Uncertain(..) => "write a plain number, or { mean = 24.5, cov = 0.05 }".into(),
        Kind::Integer(..) => "write a number without a decimal point".into(),
        Kind::Text | Kind::File => "write \"…\"".into(),
        Kind::Choice(_) => "write one of them, in quotes".into(),
        Kind::Flag => "write true or false, without quotes".into(),
        Kind::Date => "write 2026-03-14".into(),
        Kind::Point | Kind::Direction | Kind::Range | Kind::Pair => "write two numbers: [4.1, 31.2]".into(),
        Kind::Points(_) => "write [[-40.0, 31.0], [20.0, 31.2]]".into(),
        Kind::Texts => "write [\"…\", \"…\"]".into(),
        Kind::Table(_) | Kind::Tables(_) | Kind::Named(_) => "its keys are listed in docs/model-file.md".into(),
        Kind::Either(kinds) => kinds.iter().map(example).collect::<Vec<_>>().join("; or "),
    }
}

/// What a value is, in words, with the value where it is short.
pub(super) fn found(value: &DeValue<'_>) -> String {
    match value {
        DeValue::String(text) => format!("the text {:?}", clip(text, 40)),
        DeValue::Integer(number) => format!("the number {}", clip(number.as_str(), 30)),
        DeValue::Float(number) => format!("the number {}", clip(number.as_str(), 30)),
        DeValue::Boolean(flag) => format!("{flag}"),
        DeValue::Datetime(date) => format!("the date {date}"),
        DeValue::Array(entries) => match entries.len() {
            0 => "an empty list".into(),
            1 => "a list with 1 entry".into(),
            n => format!("a list with {n} entries"),
        },
        DeValue::Table(_) => "a table".into(),
    }
}
