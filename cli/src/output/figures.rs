//! Which snapshot goes into which picture: one frame and one scale for all, so that pictures can be compared.
use checker::model::Model;
use checker::outcome::{CheckResult, FieldSnapshot, Outcome};

use super::svg::field::{self, Marks, Quantity, Scale};
use super::svg::frame::Frame;
use super::svg::{Picture, section};
use super::{text, words};

/// Depths that differ by less count as the same, m.
const SAME_DEPTH_M: f64 = 1e-6;

/// Pictures of one section.
#[derive(Debug)]
pub struct Figures<'a> {
    /// Results.
    pub outcome: &'a Outcome,
    /// Model.
    pub model: &'a Model,
    /// Fields at the surveyed depth.
    pub surveyed: Option<&'a FieldSnapshot>,
    /// Fields nearest to the critical depth of the cautious inputs.
    pub critical: Option<&'a FieldSnapshot>,
    /// All fields by depth.
    pub fields: &'a [FieldSnapshot],
    /// Window of the contour figures.
    pub frame: Frame,
    stress: Scale,
    utilization: Scale,
}

impl<'a> Figures<'a> {
    /// Picks snapshots, window and scales.
    pub fn new(outcome: &'a Outcome, model: &'a Model, fields: &'a [FieldSnapshot]) -> Self {
        let frame = Frame::around_cliff(outcome, field::WINDOW[0], 14.0, field::WINDOW[1]);
        let surveyed = nearest(fields, outcome.surveyed.depth_m);
        let critical_m = outcome.critical_depth.as_ref().and_then(|critical| critical.cautious.depth_m);
        let critical = critical_m.and_then(|depth_m| nearest(fields, depth_m));
        let shown: Vec<&FieldSnapshot> = surveyed.into_iter().chain(critical).collect();
        let scale = |quantity| Scale::new(quantity, &shown, &frame);
        let (stress, utilization) = (scale(Quantity::MajorStress), scale(Quantity::Utilization));
        Self { outcome, model, surveyed, critical, fields, frame, stress, utilization }
    }

    /// The section drawing; `None` where the surveyed depth has no fields.
    pub fn section(&self) -> Option<Picture> {
        let surveyed = self.surveyed?;
        let drawing = section::Drawing { outcome: self.outcome, model: self.model, surveyed, critical: self.critical, id: "section" };
        Some(section::picture(&drawing))
    }

    /// A contour figure; `id` is unique on the page.
    pub fn field(&self, quantity: Quantity, snapshot: &FieldSnapshot, id: &str) -> Picture {
        let governing = self.governing(snapshot.depth_m);
        let value = governing.map(|check| format!("{} \u{b1} {}", words::utilization(check), words::error(check.error)));
        let is_critical = self.critical.is_some_and(|critical| (critical.depth_m - snapshot.depth_m).abs() < SAME_DEPTH_M);
        let line = self.outcome.critical_depth.as_ref().and_then(|critical| critical.cautious.rupture_line);
        let marks = Marks {
            id,
            governing: governing.zip(value.as_deref()).map(|(check, value)| (check.check, value)),
            rupture_line: line.filter(|_| is_critical),
            crosses: quantity == Quantity::MajorStress,
        };
        field::picture(snapshot, self.scale(quantity), &self.frame, &marks)
    }

    /// The scale of a quantity.
    pub fn scale(&self, quantity: Quantity) -> &Scale {
        match quantity {
            Quantity::MajorStress => &self.stress,
            Quantity::Utilization => &self.utilization,
        }
    }

    /// The check that governs at a depth with best-estimate inputs, as the fields are; `None` where the depth is not in the series.
    pub fn governing(&self, depth_m: f64) -> Option<&'a CheckResult> {
        let in_series = self.outcome.depths.iter().find(|depth| (depth.depth_m - depth_m).abs() < SAME_DEPTH_M).map(|depth| &depth.checks);
        let surveyed = Some(&self.outcome.surveyed.checks).filter(|_| (self.outcome.surveyed.depth_m - depth_m).abs() < SAME_DEPTH_M);
        text::worst(in_series.or(surveyed)?.iter().filter(|check| check.inputs == "best estimate"))
    }
}

fn nearest(fields: &[FieldSnapshot], depth_m: f64) -> Option<&FieldSnapshot> {
    fields.iter().min_by(|a, b| (a.depth_m - depth_m).abs().total_cmp(&(b.depth_m - depth_m).abs()))
}
