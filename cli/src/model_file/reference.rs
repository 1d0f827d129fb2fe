//! The key reference of `docs/model-file.md`, from the table of keys.
use super::keys::MODEL;
use super::kinds::{Field, Kind, Need, Shape};
use super::not_yet::NOT_YET_AVAILABLE;
use super::schema::preset_json;
use super::walk::{UNCERTAIN, describe};
use std::fmt::Write;

/// All keys, table by table, in Markdown.
pub fn key_reference() -> String {
    let mut text = String::new();
    table(&mut text, "The top of the file", &MODEL);
    nested(&mut text, "", &MODEL);
    table(&mut text, "A number that may be uncertain", &UNCERTAIN);
    text += "### Not available yet\n\nThese keys are read and checked, and then answered with an error that names them.\n\n| key | asks for |\n|---|---|\n";
    for entry in NOT_YET_AVAILABLE {
        push(&mut text, format_args!("| `{}` | {} |\n", entry.key, entry.what));
    }
    text
}

fn push(text: &mut String, line: std::fmt::Arguments<'_>) {
    // Writing to a string cannot fail.
    let _ = text.write_fmt(line);
}

/// The tables below a table, depth first.
fn nested(text: &mut String, parent: &str, shape: &'static Shape) {
    for field in shape.fields {
        let path = checker::diagnostic::child(parent, field.key);
        for kind in forms(&field.kind) {
            let (heading, below) = match kind {
                Kind::Table(below) if parent.is_empty() => (format!("`[{path}]`"), below),
                Kind::Table(below) => (format!("`{path}`"), below),
                Kind::Tables(below) => (format!("`[[{path}]]`"), below),
                Kind::Named(below) => (format!("`[{path}.\"name\"]`"), below),
                _ => continue,
            };
            table(text, &heading, below);
            nested(text, &path, below);
        }
    }
}

fn forms(kind: &'static Kind) -> Vec<&'static Kind> {
    if let Kind::Either(kinds) = kind { kinds.iter().collect() } else { vec![kind] }
}

fn table(text: &mut String, heading: &str, shape: &'static Shape) {
    push(text, format_args!("### {heading}\n\n{}.\n\n| key | holds | left out | meaning |\n|---|---|---|---|\n", shape.doc));
    for field in shape.fields {
        push(text, format_args!("| `{}` | {} | {} | {} |\n", field.key, holds(&field.kind), left_out(field), field.doc));
    }
    for one_of in shape.one_of {
        let keys: Vec<String> = one_of.keys.iter().map(|key| format!("`{key}`")).collect();
        let how_many = if one_of.required { "Exactly one" } else { "At most one" };
        push(text, format_args!("\n{how_many} of {} gives {}.\n", keys.join(", "), one_of.what));
    }
    for together in shape.together {
        let keys: Vec<String> = together.iter().map(|key| format!("`{key}`")).collect();
        push(text, format_args!("\n{} come together.\n", keys.join(" and ")));
    }
    text.push('\n');
}

fn holds(kind: &'static Kind) -> String {
    let limits = match kind {
        Kind::Number(quantity) | Kind::Uncertain(quantity, _) => quantity.limits.describe(super::kinds::Unit::One),
        Kind::Integer(min, max) if min == max => format!("{min}"),
        Kind::Integer(min, i64::MAX) => format!("at least {min}"),
        Kind::Integer(min, max) => format!("{min} to {max}"),
        Kind::Either(kinds) => return kinds.iter().map(holds).collect::<Vec<_>>().join("; or "),
        _ => String::new(),
    };
    let mut text = match kind {
        Kind::Choice(words) => words.iter().map(|word| format!("`\"{word}\"`")).collect::<Vec<_>>().join(", "),
        Kind::Uncertain(quantity, family) => match quantity.unit.symbol() {
            "" => format!("number, may be uncertain ({})", family.word()),
            unit => format!("number in {unit}, may be uncertain ({})", family.word()),
        },
        _ => describe(kind),
    };
    if !limits.is_empty() {
        text += ", ";
        text += &limits;
    }
    text
}

fn left_out(field: &'static Field) -> String {
    match field.need {
        Need::Required => "**required**".into(),
        Need::Optional => "optional".into(),
        Need::Default(preset) => format!("DEFAULT `{}`", preset_json(preset)),
        Need::Neutral(preset) => format!("`{}`", preset_json(preset)),
        Need::Derived(how) => format!("DEFAULT {how}"),
    }
}
