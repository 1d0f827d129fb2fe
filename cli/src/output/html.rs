//! `report.html`: what a geologist signs and a manager reads. One self-contained file, no outside request, prints to paper.
//!
//! The page is a template with automatic escaping; tables and pictures come as finished markup from [`table`] and
//! [`super::svg`]. A content policy in the page lets only its own script run and forbids every request.
pub mod explorer;
pub mod front;
pub mod inputs;
pub mod outlook;
pub mod results;
pub mod table;

use checker::model::Model;
use checker::outcome::{Outcome, ReportInfo};
use minijinja::value::Serde;
use minijinja::{AutoEscape, Environment, Value, context};
use sha2::{Digest, Sha256};

use super::figures::Figures;
use super::folder::CHECKED_MARK;
use super::svg::field::Quantity;
use super::svg::{chart, draw, mesh};
use super::{Provenance, words};

const PAGE: &str = include_str!("html/report.html");
const LETTERHEAD: &str = include_str!("html/letterhead.html");
const STYLE: &str = include_str!("html/report.css");
const SCRIPT: &str = include_str!("html/report.js");
const METHOD: &str = include_str!("html/method.html");
/// Largest picture of the mesh that is set into the page, bytes.
const LARGEST_MESH_BYTES: usize = 200_000;

/// Everything the report is made from.
#[derive(Debug)]
pub struct Report<'a> {
    /// Results.
    pub outcome: &'a Outcome,
    /// Model in SI units.
    pub model: &'a Model,
    /// Model file as read.
    pub model_text: &'a str,
    /// Pictures.
    pub figures: &'a Figures<'a>,
    /// Command and seed.
    pub provenance: &'a Provenance,
    /// A firm's own letterhead template.
    pub letterhead: Option<&'a str>,
}

/// A template that cannot be used.
#[derive(Debug, thiserror::Error)]
#[error("{0}")]
pub struct TemplateError(String);

impl From<minijinja::Error> for TemplateError {
    fn from(error: minijinja::Error) -> Self {
        Self(error.detail().map_or_else(|| error.to_string(), |detail| format!("{}: {detail}", error.kind())))
    }
}

/// The page as text.
///
/// # Errors
/// [`TemplateError`] where a letterhead does not work.
pub fn report(report: &Report<'_>) -> Result<String, TemplateError> {
    let environment = environment();
    let outcome = report.outcome;
    let letterhead = environment.render_named_str("letterhead.html", report.letterhead.unwrap_or(LETTERHEAD), identity(outcome))?;
    let script_hash = explorer::base64(&Sha256::digest(SCRIPT.as_bytes()));
    let figures = pictures(report);
    let tables = tables(report);
    let context = context! {
        title => outcome.model.title.clone(),
        draft => words::is_draft(outcome),
        checked_mark => if words::is_draft(outcome) { "" } else { CHECKED_MARK },
        running => running_text(outcome),
        style => STYLE,
        picture_style => draw::STYLE,
        script => SCRIPT,
        script_hash,
        letterhead,
        report => Value::from(Serde(&outcome.report)),
        manager_box => Value::from(Serde(front::manager_box(outcome))),
        sentences => front::sentences(outcome, report.model),
        status => words::status(outcome.status),
        cautions => outcome.cautions.clone(),
        warnings => Value::from(Serde(&outcome.warnings)),
        defaults => outcome.model.defaults_used.clone(),
        recommendations => paragraphs(outcome.report.recommendations.as_deref()),
        no_outlook => outlook::reasons(outcome),
        outlook_sentences => outlook::calculated(outcome).map(outlook::sentences),
        outlook_tables => outlook::calculated(outcome).map(outlook::tables),
        no_remedies => front::NO_REMEDIES,
        below => Value::from(Serde(&outcome.below)),
        surveyed_m => words::meters(outcome.surveyed.depth_m),
        hollows => Value::from(Serde(&outcome.section.other_hollows)),
        figures,
        tables,
        explorer => explorer_part(report),
        method => METHOD,
        model_text => report.model_text,
        model_file => outcome.model.file.clone(),
        sha256 => outcome.model.sha256.clone(),
        program => format!("{} {}", outcome.program.name, outcome.program.version),
        command => report.provenance.command.clone(),
        seed => report.provenance.seed,
    };
    Ok(environment.render_named_str("report.html", PAGE, context)?)
}

/// Whether a letterhead template works, tried with an empty identity.
///
/// # Errors
/// [`TemplateError`] with what is wrong in it.
pub fn check_letterhead(template: &str) -> Result<(), TemplateError> {
    let empty = context! { report => Value::from(Serde(ReportInfo::default())), title => "", draft => true };
    environment().render_named_str("letterhead.html", template, empty)?;
    Ok(())
}

fn environment() -> Environment<'static> {
    let mut environment = Environment::new();
    environment.set_auto_escape_callback(|_| AutoEscape::Html);
    environment
}

fn identity(outcome: &Outcome) -> Value {
    context! { report => Value::from(Serde(&outcome.report)), title => outcome.model.title.clone(), draft => words::is_draft(outcome) }
}

/// Text of the running head in print: nothing in it can end the string of a style sheet.
fn running_text(outcome: &Outcome) -> String {
    let parts = [outcome.report.project.as_deref(), Some(outcome.model.title.as_str()), outcome.report.date.as_deref()];
    let text = parts.into_iter().flatten().collect::<Vec<_>>().join(", ");
    let keep = |c: char| c.is_alphanumeric() || " ,.:()-\u{2013}/".contains(c);
    text.chars().map(|c| if keep(c) { c } else { ' ' }).take(120).collect()
}

fn paragraphs(text: Option<&str>) -> Vec<String> {
    text.map_or_else(Vec::new, |text| {
        text.replace("\r\n", "\n").split("\n\n").map(|part| part.trim().to_owned()).filter(|part| !part.is_empty()).collect()
    })
}

/// Finished pictures by name.
fn pictures(report: &Report<'_>) -> Value {
    let figures = report.figures;
    let field =
        |quantity, snapshot: Option<&checker::outcome::FieldSnapshot>, id| snapshot.map(|one| figures.field(quantity, one, id).inline());
    let index = |snapshot: Option<&checker::outcome::FieldSnapshot>| {
        snapshot.and_then(|one| figures.fields.iter().position(|field| std::ptr::eq(field, one)))
    };
    let charts: Vec<String> =
        chart::check_names(report.outcome).into_iter().filter_map(|name| chart::demand(report.outcome, name)).map(|p| p.inline()).collect();
    let mesh = figures.surveyed.map(|surveyed| mesh::near(surveyed, report.outcome, "mesh").inline());
    context! {
        section => figures.section().map(|picture| picture.inline()),
        stress_surveyed => field(Quantity::MajorStress, figures.surveyed, "stress-surveyed"),
        stress_critical => field(Quantity::MajorStress, figures.critical, "stress-critical"),
        utilization_surveyed => field(Quantity::Utilization, figures.surveyed, "utilization-surveyed"),
        utilization_critical => field(Quantity::Utilization, figures.critical, "utilization-critical"),
        index_surveyed => index(figures.surveyed),
        index_critical => index(figures.critical),
        critical_m => figures.critical.map(|critical| words::meters(critical.depth_m)),
        charts,
        chart_key => chart::demand_key().inline(),
        hangs_on => chart::hangs_on(report.outcome).map(|picture| picture.inline()),
        mesh => mesh.filter(|picture| picture.len() < LARGEST_MESH_BYTES),
    }
}

/// Finished tables by name.
fn tables(report: &Report<'_>) -> Value {
    let (outcome, model) = (report.outcome, report.model);
    context! {
        surveyed => results::surveyed(outcome).html(),
        critical => results::critical(outcome).html(),
        each_critical => results::each_critical(outcome).html(),
        hangs_on => results::hangs_on(outcome).html(),
        probes => results::probes(outcome).html(),
        cuts => results::cuts(outcome).html(),
        numerics => results::numerics(outcome).html(),
        rocks => inputs::rocks(model).html(),
        layers => inputs::layers(model).html(),
        situations => inputs::situations(model).html(),
        settings => inputs::settings(model).html(),
        joints => inputs::joints(model).html(),
    }
}

/// The slider with its figures; nothing where there are no fields.
fn explorer_part(report: &Report<'_>) -> Value {
    let fields = report.figures.fields;
    if fields.is_empty() {
        return Value::from(());
    }
    context! {
        data => explorer::data(report.figures),
        templates => explorer::templates(report.figures),
        last => fields.len() - 1,
        depths => fields.iter().map(|field| words::fixed(field.depth_m, 2)).collect::<Vec<_>>(),
    }
}

#[cfg(test)]
mod tests;
