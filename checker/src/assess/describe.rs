//! From solved depths to the published results.
use super::critical_depths::critical_depths;
use super::{AssessError, Assessment, Run, Scope, Solved, Zero};
use crate::analysis::Stress;
use crate::demand::{CheckKind, Found, InputCase, LineValue};
use crate::depth::{Context, Record, line_between, mean_state, rupture_value};
use crate::model::{Date, Headline, Model, Person};
use crate::outcome::{
    BelowInfo, CheckResult, CriticalDepths, CutResult, DepthResult, ExtentInfo, Governing, ModelInfo, Numerics, Outcome, PersonInfo,
    ProbeResult, Program, ReportInfo, SectionInfo, Status, StressKpa, SurveyedState,
};
use crate::section::{Feature, Section};
use crate::words::{CAUTIONS, critical, headline, today};

mod balance;
mod extras;
mod notes;

pub(crate) use extras::{Extras, extras};

impl Run<'_> {
    /// The published results of a solved series.
    pub(super) fn describe(&self, mut solved: Vec<Solved>) -> Result<Assessment, AssessError> {
        let model: &Model = &self.prepared.model;
        let surveyed_m = self.prepared.site.surveyed_depth_m();
        let critical_depths = matches!(self.scope, Scope::Deepen | Scope::Assess)
            .then(|| critical_depths(model, &solved, surveyed_m, self.prepared.averaging_length_m));
        let hangs_on = match (&critical_depths, self.scope) {
            (Some(c), Scope::Assess) => self.hangs_on(&solved, c.best_estimate.depth_m)?,
            _ => Vec::new(),
        };
        let surveyed = surveyed_state(model, &solved, surveyed_m);
        let numerics = self.numerics(&solved, surveyed_m);
        let warnings = notes::warnings(self.prepared, &solved, &numerics, critical_depths.as_ref());
        let missed = numerics.target_error < numerics.reached_error;
        let outlook = match (&critical_depths, self.scope) {
            (Some(critical), Scope::Assess) => self.outlook(&solved, critical, &surveyed, missed),
            _ => None,
        };
        let part_refused = outlook.as_ref().is_some_and(|o| !o.refused.is_empty());
        let outcome = Outcome {
            program: Program::default(),
            status: match (missed, part_refused) {
                (true, _) => Status::TargetMissed,
                (false, true) => Status::PartRefused,
                (false, false) => Status::Complete,
            },
            headline: self.headline(&surveyed, critical_depths.as_ref()),
            model: ModelInfo { title: model.title.clone(), defaults_used: model.defaults_used.clone(), ..ModelInfo::default() },
            report: report_info(model),
            section: self.section_info(),
            numerics,
            surveyed,
            critical_depth: critical_depths,
            depths: solved.iter().map(depth_result).collect(),
            hangs_on,
            below: self.below(),
            outlook,
            warnings,
            cautions: CAUTIONS.iter().map(|c| (*c).to_owned()).collect(),
        };
        let fields = solved.iter_mut().filter_map(|s| s.field.take()).collect();
        Ok(Assessment { outcome, fields, warnings: self.prepared.warnings.clone() })
    }

    fn headline(&self, surveyed: &SurveyedState, depths: Option<&CriticalDepths>) -> String {
        let model = &self.prepared.model;
        let inputs = headline_inputs(model);
        let now = today(surveyed.depth_m, worst(&surveyed.checks, inputs), model.checks.required_reserve);
        let overall = depths.map(|d| if inputs == InputCase::Cautious { &d.cautious } else { &d.best_estimate });
        headline(&now, overall.map(|c| critical(c, inputs.id())).as_deref())
    }

    fn section_info(&self) -> SectionInfo {
        let site = &self.prepared.site;
        let surveyed = site.surveyed();
        let (section, depth) = match site.at_depth(site.surveyed_depth_m()) {
            Ok(section) => (Some(section), site.surveyed_depth_m()),
            Err(_) => (None, site.surveyed_depth_m()),
        };
        let points = |s: &Section| s.surface().flattened(0.1).0;
        SectionInfo {
            cliff_height_m: site.cliff_height_m(),
            overhang_thickness_m: section.as_ref().map_or(0.0, Section::thickness_m),
            surveyed_depth_m: depth,
            brow: site.brow_m(),
            lip: surveyed.map(|u| u.lip_m),
            back: surveyed.map(|u| u.back_m),
            mouth: surveyed.map(|u| u.mouth_m),
            surface: section.as_ref().map(points).unwrap_or_default(),
            contacts: section.as_ref().map(|s| s.contact_lines().into_iter().map(|c| c.points_m).collect()).unwrap_or_default(),
            layer_rocks: self.prepared.model.layers.iter().map(|l| self.prepared.model.rocks[l.rock].name.clone()).collect(),
            other_hollows: site.other_hollows().to_vec(),
        }
    }

    fn numerics(&self, solved: &[Solved], surveyed_m: f64) -> Numerics {
        let extents = self.prepared.site.extents();
        let largest = |f: &dyn Fn(&Solved) -> f64| solved.iter().map(f).fold(0.0, f64::max);
        let smallest = |f: &dyn Fn(&Solved) -> f64| solved.iter().map(f).fold(f64::INFINITY, f64::min);
        let surveyed = solved.iter().find(|s| s.record.section.depth_m().total_cmp(&surveyed_m).is_eq());
        let reached = |s: &Solved| {
            let errors = s.record.found.iter().map(|f| f.result.error / f.result.utilization.unwrap_or(1.0).max(1.0));
            errors.fold(0.0, f64::max)
        };
        Numerics {
            unknowns: solved.iter().map(|s| s.record.quality.unknowns).max().unwrap_or(0),
            elements: solved.iter().map(|s| s.record.quality.elements).max().unwrap_or(0),
            smallest_angle_deg: smallest(&|s| s.record.quality.smallest_angle_rad.to_degrees()),
            extent: ExtentInfo { seaward_x_m: extents.seaward_x_m, landward_x_m: extents.landward_x_m, base_z_m: extents.base_z_m },
            equilibrium_residual: largest(&|s| s.record.quality.residual),
            weight_kn_per_m: surveyed.map_or(0.0, |s| s.extras.weight_n_per_m / 1e3),
            reaction_kn_per_m: surveyed.map_or(0.0, |s| s.extras.reaction_n_per_m / 1e3),
            smallest_pivot_ratio: smallest(&|s| s.record.quality.pivot_ratio),
            target_error: self.prepared.model.checks.target_error,
            reached_error: largest(&reached),
            realized_k0: surveyed.and_then(|s| s.extras.realized_k0),
            asked_k0: surveyed.and_then(|s| s.extras.asked_k0),
            statics_nodal_difference: largest(&|s| s.extras.nodal_difference),
            statics_stress_difference: largest(&|s| s.extras.stress_difference),
        }
    }

    fn below(&self) -> BelowInfo {
        let below = &self.prepared.model.below;
        let height = self.prepared.site.cliff_height_m();
        BelowInfo {
            use_of_ground: below.use_of_ground.clone(),
            keep_out_m: below.keep_out_m.unwrap_or(1.5 * height),
            basis: below.basis.clone().unwrap_or_else(|| match below.keep_out_m {
                Some(_) => "given in the model without a basis".to_owned(),
                None => "DEFAULT: 1.5 x cliff height, a width used by a coastal agency for falls of soft limestone; not calculated here"
                    .to_owned(),
            }),
        }
    }
}

/// The inputs of the headline.
pub(crate) fn headline_inputs(model: &Model) -> InputCase {
    match model.checks.headline {
        Headline::Cautious => InputCase::Cautious,
        Headline::BestEstimate => InputCase::BestEstimate,
    }
}

/// The check with the greatest utilization; one without capacity comes first.
pub(crate) fn worst(checks: &[CheckResult], inputs: InputCase) -> Option<&CheckResult> {
    let rank = |c: &CheckResult| match c.utilization {
        Some(u) => u,
        None if c.over => f64::INFINITY,
        None => f64::NEG_INFINITY,
    };
    checks.iter().filter(|c| c.inputs == inputs.id()).max_by(|a, b| rank(a).total_cmp(&rank(b)))
}

fn surveyed_state(model: &Model, solved: &[Solved], surveyed_m: f64) -> SurveyedState {
    let result = solved.iter().find(|s| s.record.section.depth_m().total_cmp(&surveyed_m).is_eq()).map(depth_result);
    let result = result.unwrap_or(DepthResult { depth_m: surveyed_m, checks: Vec::new(), probes: Vec::new(), cuts: Vec::new() });
    let governing = worst(&result.checks, headline_inputs(model)).map(|c| Governing {
        check: c.check,
        situation: c.situation.clone(),
        utilization: c.utilization,
    });
    SurveyedState { depth_m: surveyed_m, governing, checks: result.checks, probes: result.probes, cuts: result.cuts }
}

fn depth_result(solved: &Solved) -> DepthResult {
    let point = solved.point();
    DepthResult { depth_m: point.depth_m, checks: point.checks, probes: point.probes, cuts: point.cuts }
}

fn report_info(model: &Model) -> ReportInfo {
    let r = &model.report;
    let person = |p: &Option<Person>| p.as_ref().map(|p| PersonInfo { name: p.name.clone(), qualification: p.qualification.clone() });
    let survey = model.section.surveyed.as_ref();
    ReportInfo {
        project: r.project.clone(),
        client: r.client.clone(),
        section: r.section.clone(),
        revision: r.revision.clone(),
        date: r.date.map(iso),
        prepared_by: person(&r.prepared_by),
        checked_by: person(&r.checked_by),
        purpose: r.purpose.clone(),
        relied_on: r.relied_on.clone(),
        not_investigated: r.not_investigated.clone(),
        recommendations: r.recommendations.clone(),
        valid_until: r.valid_until.map(iso),
        surveyed_on: survey.and_then(|s| s.date).map(iso),
        survey_method: survey.and_then(|s| s.method.clone()),
        survey_accuracy_m: survey.and_then(|s| s.accuracy_m),
    }
}

/// ISO 8601.
fn iso(date: Date) -> String {
    format!("{:04}-{:02}-{:02}", date.year, date.month, date.day)
}
