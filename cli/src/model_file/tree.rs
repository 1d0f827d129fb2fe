//! What was read: values of the kinds that the table of keys promises, in SI units.
use super::kinds::Shape;
use checker::model::{Date, Uncertain};
use std::collections::BTreeMap;

/// A value of a key.
#[derive(Debug, Clone)]
pub(super) enum Val {
    Number(f64),
    Uncertain(Uncertain),
    Integer(i64),
    Text(String),
    Flag(bool),
    Date(Date),
    Pair([f64; 2]),
    Points(Vec<[f64; 2]>),
    Texts(Vec<String>),
    Table(Tab),
    Tables(Vec<Tab>),
    Named(Vec<(String, Tab)>),
    /// Wrong and already reported; reads as not a number, as empty text or as an empty list.
    Bad,
}

/// A table that was read.
///
/// Values that are missing or wrong read as neutral stand-ins (NaN, empty). They never leave the reader: a model is only
/// handed out when there was no error.
#[derive(Debug, Clone)]
pub(super) struct Tab {
    /// Its key path.
    pub(super) path: String,
    shape: &'static Shape,
    entries: BTreeMap<&'static str, Val>,
}

impl Tab {
    pub(super) fn new(shape: &'static Shape, path: String) -> Self {
        Self { path, shape, entries: BTreeMap::new() }
    }

    pub(super) fn set(&mut self, key: &'static str, value: Val) {
        self.entries.insert(key, value);
    }

    /// Key path of a key of this table.
    pub(super) fn at(&self, key: &str) -> String {
        checker::diagnostic::child(&self.path, key)
    }

    /// Whether the key is there, right or wrong.
    pub(super) fn has(&self, key: &str) -> bool {
        self.value(key).is_some()
    }

    /// The value of a key.
    pub(super) fn value(&self, key: &str) -> Option<&Val> {
        assert!(self.shape.field(key).is_some(), "the table of keys has no {key:?} in {:?}", self.shape.doc);
        self.entries.get(key)
    }

    pub(super) fn number(&self, key: &str) -> f64 {
        self.number_if(key).unwrap_or(f64::NAN)
    }

    pub(super) fn number_if(&self, key: &str) -> Option<f64> {
        self.value(key).map(|value| if let Val::Number(number) = value { *number } else { f64::NAN })
    }

    pub(super) fn uncertain(&self, key: &str) -> Uncertain {
        self.uncertain_if(key).unwrap_or(Uncertain::Exact(f64::NAN))
    }

    pub(super) fn uncertain_if(&self, key: &str) -> Option<Uncertain> {
        self.value(key).map(|value| if let Val::Uncertain(number) = value { *number } else { Uncertain::Exact(f64::NAN) })
    }

    pub(super) fn integer_if(&self, key: &str) -> Option<i64> {
        self.value(key).map(|value| if let Val::Integer(number) = value { *number } else { 0 })
    }

    pub(super) fn integer(&self, key: &str) -> i64 {
        self.integer_if(key).unwrap_or(0)
    }

    pub(super) fn text(&self, key: &str) -> &str {
        self.text_if(key).unwrap_or_default()
    }

    pub(super) fn text_if(&self, key: &str) -> Option<&str> {
        self.value(key).map(|value| if let Val::Text(text) = value { text.as_str() } else { "" })
    }

    pub(super) fn owned_if(&self, key: &str) -> Option<String> {
        self.text_if(key).map(str::to_owned)
    }

    pub(super) fn flag(&self, key: &str) -> bool {
        matches!(self.value(key), Some(Val::Flag(true)))
    }

    pub(super) fn date_if(&self, key: &str) -> Option<Date> {
        self.value(key).and_then(|value| if let Val::Date(date) = value { Some(*date) } else { None })
    }

    pub(super) fn date(&self, key: &str) -> Date {
        self.date_if(key).unwrap_or(Date { year: 0, month: 1, day: 1 })
    }

    pub(super) fn pair(&self, key: &str) -> [f64; 2] {
        self.pair_if(key).unwrap_or([f64::NAN; 2])
    }

    pub(super) fn pair_if(&self, key: &str) -> Option<[f64; 2]> {
        self.value(key).map(|value| if let Val::Pair(pair) = value { *pair } else { [f64::NAN; 2] })
    }

    pub(super) fn points(&self, key: &str) -> Vec<[f64; 2]> {
        self.points_if(key).unwrap_or_default()
    }

    pub(super) fn points_if(&self, key: &str) -> Option<Vec<[f64; 2]>> {
        self.value(key).map(|value| if let Val::Points(points) = value { points.clone() } else { Vec::new() })
    }

    pub(super) fn texts(&self, key: &str) -> &[String] {
        self.texts_if(key).unwrap_or_default()
    }

    pub(super) fn texts_if(&self, key: &str) -> Option<&[String]> {
        self.value(key).map(|value| if let Val::Texts(texts) = value { texts.as_slice() } else { &[] })
    }

    pub(super) fn table(&self, key: &str) -> Option<&Tab> {
        self.value(key).and_then(|value| if let Val::Table(table) = value { Some(table) } else { None })
    }

    pub(super) fn tables(&self, key: &str) -> &[Tab] {
        if let Some(Val::Tables(tables)) = self.value(key) { tables } else { &[] }
    }

    pub(super) fn named(&self, key: &str) -> &[(String, Tab)] {
        if let Some(Val::Named(tables)) = self.value(key) { tables } else { &[] }
    }
}
