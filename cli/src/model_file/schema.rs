//! The JSON Schema (draft 2020-12) of the model file, from the table of keys.
use super::keys::{LARGEST_COORDINATE_M, MODEL};
use super::kinds::{Field, Kind, Limits, Need, Preset, Quantity, Shape};
use super::not_yet;
use super::walk::UNCERTAIN;
use serde_json::{Map, Value, json};

/// The schema as a JSON value. A date of the file is a string of the form `2026-03-14` in JSON.
pub fn json_schema() -> Value {
    let mut schema = object(&MODEL, "");
    let mut uncertain = object(&UNCERTAIN, "");
    let forms = json!([{ "required": ["mean", "cov"] }, { "required": ["mean", "standard_deviation"] }, { "required": ["min", "max"] }]);
    uncertain.insert("anyOf".into(), forms);
    schema.insert("$defs".into(), json!({ "uncertain": Value::Object(uncertain) }));
    let mut whole = Map::new();
    whole.insert("$schema".into(), "https://json-schema.org/draft/2020-12/schema".into());
    whole.insert("title".into(), "Brinkline model file, format 1".into());
    whole.extend(schema);
    Value::Object(whole)
}

fn object(shape: &'static Shape, pattern: &str) -> Map<String, Value> {
    let mut schema = Map::new();
    schema.insert("description".into(), shape.doc.into());
    schema.insert("type".into(), "object".into());
    let properties: Map<String, Value> = shape.fields.iter().map(|field| (field.key.to_owned(), property(field, pattern))).collect();
    schema.insert("properties".into(), Value::Object(properties));
    let required: Vec<&str> = shape.fields.iter().filter(|field| matches!(field.need, Need::Required)).map(|field| field.key).collect();
    if !required.is_empty() {
        schema.insert("required".into(), json!(required));
    }
    schema.insert("additionalProperties".into(), Value::Bool(false));
    let choices: Vec<Value> = shape
        .one_of
        .iter()
        .filter(|one_of| one_of.required)
        .map(|one_of| json!({ "oneOf": one_of.keys.iter().map(|key| json!({ "required": [key] })).collect::<Vec<_>>() }))
        .collect();
    if !choices.is_empty() {
        schema.insert("allOf".into(), Value::Array(choices));
    }
    let mut dependent = Map::new();
    for keys in shape.together {
        for key in *keys {
            let others: Vec<&&str> = keys.iter().filter(|other| *other != key).collect();
            dependent.insert((*key).to_owned(), json!(others));
        }
    }
    if !dependent.is_empty() {
        schema.insert("dependentRequired".into(), Value::Object(dependent));
    }
    schema
}

fn property(field: &'static Field, parent: &str) -> Value {
    let pattern = checker::diagnostic::child(parent, field.key);
    let mut schema = kind(&field.kind, &pattern);
    let mut description = field.doc.to_owned();
    if let Need::Derived(how) = field.need {
        description += &["; left out: ", how].concat();
    }
    if not_yet::find(&pattern).is_some() {
        description += "; not available yet";
    }
    schema.insert("description".into(), description.into());
    if let Need::Default(preset) | Need::Neutral(preset) = field.need {
        schema.insert("default".into(), preset_json(preset));
    }
    Value::Object(schema)
}

pub(super) fn preset_json(preset: Preset) -> Value {
    match preset {
        Preset::Number(number) => json!(number),
        Preset::Integer(number) => json!(number),
        Preset::Word(word) => json!(word),
        Preset::Flag(flag) => json!(flag),
    }
}

fn kind(kind: &'static Kind, pattern: &str) -> Map<String, Value> {
    let value = match kind {
        Kind::Number(quantity) => return number(quantity),
        Kind::Uncertain(quantity, _) => json!({ "anyOf": [Value::Object(number(quantity)), { "$ref": "#/$defs/uncertain" }] }),
        Kind::Integer(min, i64::MAX) => json!({ "type": "integer", "minimum": min }),
        Kind::Integer(min, max) => json!({ "type": "integer", "minimum": min, "maximum": max }),
        Kind::Text | Kind::File => json!({ "type": "string", "minLength": 1 }),
        Kind::Choice(words) => json!({ "enum": words }),
        Kind::Flag => json!({ "type": "boolean" }),
        Kind::Date => json!({ "type": "string", "format": "date" }),
        Kind::Point | Kind::Direction | Kind::Range => pair(),
        Kind::Pair => json!({ "type": "array", "items": { "type": "number", "minimum": 0 }, "minItems": 2, "maxItems": 2 }),
        Kind::Points(n_least) => json!({ "type": "array", "items": pair(), "minItems": n_least }),
        Kind::Texts => json!({ "type": "array", "items": { "type": "string", "minLength": 1 } }),
        Kind::Table(shape) => return object(shape, pattern),
        Kind::Tables(shape) => json!({ "type": "array", "minItems": 1, "items": object(shape, &[pattern, "[]"].concat()) }),
        Kind::Named(shape) => {
            json!({ "type": "object", "minProperties": 1, "additionalProperties": object(shape, &[pattern, ".*"].concat()) })
        }
        Kind::Either(kinds) => {
            let forms: Vec<Value> = kinds.iter().map(|form| Value::Object(self::kind(form, pattern))).collect();
            json!({ "anyOf": forms })
        }
    };
    if let Value::Object(map) = value { map } else { Map::new() }
}

fn pair() -> Value {
    let coordinate = json!({ "type": "number", "minimum": -LARGEST_COORDINATE_M, "maximum": LARGEST_COORDINATE_M });
    json!({ "type": "array", "items": coordinate, "minItems": 2, "maxItems": 2 })
}

fn number(quantity: &Quantity) -> Map<String, Value> {
    let Limits { min, max } = quantity.limits;
    let mut schema = Map::new();
    schema.insert("type".into(), "number".into());
    if let Some((min, included)) = min {
        schema.insert(if included { "minimum" } else { "exclusiveMinimum" }.into(), json!(min));
    }
    if let Some((max, included)) = max {
        schema.insert(if included { "maximum" } else { "exclusiveMaximum" }.into(), json!(max));
    }
    schema
}
