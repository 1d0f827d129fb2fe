//! The outlook of a solved series: demand model, ground lost, evidence and today's facts in, published outlook out.
use super::critical_depths::rupture;
use super::describe::{headline_inputs, worst};
use super::{Run, Solved};
use crate::demand::{CheckKind, InputCase};
use crate::model::{Evidence, Model};
use crate::outcome::{CriticalDepths, Note, OutlookInfo, Refusal, SurveyedState};
use crate::outlook::assess::{AssessInput, EvidenceInput, assess};
use crate::outlook::cycle::GroundLost;
use crate::outlook::demand_model::DemandModel;
use crate::outlook::from_section::{ModelInputs, SectionValues, demand_model, inputs_of};
use crate::outlook::refusals::{TodaysChecks, date_warnings};

/// Overhangs whose thickness differs by no more than this share are taken for the section itself: its own solution judges the evidence.
const SAME_THICKNESS: f64 = 0.1;

impl Run<'_> {
    /// Years, probability, setback, where the model asks for them.
    pub(super) fn outlook(
        &self,
        solved: &[Solved],
        critical: &CriticalDepths,
        surveyed: &SurveyedState,
        missed: bool,
    ) -> Option<OutlookInfo> {
        let model: &Model = &self.prepared.model;
        let asked = model.outlook.as_ref()?;
        let today_index = (0..solved.len()).min_by(|&a, &b| {
            let off = |i: usize| (solved[i].record.section.depth_m() - surveyed.depth_m).abs();
            off(a).total_cmp(&off(b))
        })?;
        let section = &solved[today_index].record.section;
        let inputs = match inputs_of(model, asked.model_factor, section.cliff_height_m()) {
            Ok(inputs) => inputs,
            Err(errors) => {
                let refused = errors.iter().map(|e| Refusal { code: "outlook.inputs", reason: e.to_string() }).collect();
                return Some(OutlookInfo { refused, ..OutlookInfo::default() });
            }
        };
        let demand = self.demand_model(solved, critical, &inputs);
        let evidence = evidence(model, &inputs, &demand, section.thickness_m());
        let report_day = model.report.date;
        let survey_day = model.section.surveyed.as_ref().and_then(|s| s.date);
        let mut info = assess(&AssessInput {
            model,
            outlook: asked,
            demand: &demand,
            variables: &inputs.variables,
            today_index,
            ground_lost: &self.ground_lost(solved, &demand),
            // The rupture lines carry the lay-back of loose layers already.
            lay_back_m: 0.0,
            brow_x_m: section.brow_m()[0],
            cautious_critical_m: critical.cautious.depth_m,
            checks: &todays_checks(model, surveyed, missed, section.cliff_height_m()),
            today: survey_day.or(report_day),
            evidence: &evidence,
        });
        info.warnings.extend(date_warnings(survey_day, report_day));
        info.warnings.extend(inputs.k0_not_measured.iter().map(|rock| Note {
            code: "outlook.k0".into(),
            message: format!("k0 of `{rock}` was not measured: the outlook takes it as equally likely between nu / (1 - nu) and 1"),
        }));
        info.warnings.extend(evidence.iter().filter(|e| e.section.is_none()).map(|_| Note {
            code: "outlook.evidence".into(),
            message:
                "an overhang of the evidence differs in thickness from this section: a uniform overhang by closed form judges it".into(),
        }));
        Some(info)
    }

    fn demand_model(&self, solved: &[Solved], critical: &CriticalDepths, inputs: &ModelInputs) -> DemandModel {
        let model: &Model = &self.prepared.model;
        let series: Vec<SectionValues> = solved
            .iter()
            .map(|s| SectionValues { depth_m: s.record.section.depth_m(), places: &s.record.places, lines: &s.record.lines })
            .collect();
        let left_out = |kind: CheckKind, situation: usize| {
            critical.each_check.iter().any(|c| {
                c.over_without_undercut
                    && c.inputs == InputCase::BestEstimate.id()
                    && c.check == kind.id()
                    && c.situation == model.situations[situation].name
            })
        };
        demand_model(model, inputs, &self.prepared.context().cases, &series, &left_out)
    }

    /// Ground lost by every limit at every depth: along the rupture line of that check there, with mean inputs.
    fn ground_lost(&self, solved: &[Solved], demand: &DemandModel) -> GroundLost {
        let model: &Model = &self.prepared.model;
        let lost = |check: &str, situation: &str, s: &Solved| -> f64 {
            let own = s
                .record
                .found
                .iter()
                .find(|f| f.kind.id() == check && f.inputs == InputCase::BestEstimate && f.result.situation == situation);
            let line = own.and_then(|f| rupture(model, s, f, self.prepared.averaging_length_m));
            // Without a line of its own the ground above the back goes at least.
            let back = s.record.section.back_m().map_or(0.0, |back| back[0] - s.record.section.brow_m()[0]);
            line.map_or(back, |l| l.ground_lost_m).max(0.0)
        };
        let row = |limit: &crate::outlook::demand_model::Limit| {
            let situation = &demand.situations[limit.situation].name;
            solved.iter().map(|s| lost(limit.check, situation, s)).collect()
        };
        GroundLost { depths_m: demand.depths_m.clone(), lost_m: demand.limits.iter().map(row).collect() }
    }
}

fn todays_checks(model: &Model, surveyed: &SurveyedState, missed: bool, cliff_height_m: f64) -> TodaysChecks {
    let inputs = headline_inputs(model);
    let over = surveyed.checks.iter().find(|c| c.over && c.inputs == inputs.id());
    TodaysChecks {
        over_today: over.map(|c| (c.check.to_owned(), c.situation.clone())),
        missed_target: worst(&surveyed.checks, inputs).filter(|_| missed).map(|c| c.check.to_owned()),
        cliff_height_m,
    }
}

fn evidence<'a>(model: &'a Model, inputs: &ModelInputs, demand: &'a DemandModel, thickness_m: f64) -> Vec<EvidenceInput<'a>> {
    let same = |e: &Evidence| (e.overhang_thickness_m.mean() / thickness_m - 1.0).abs() <= SAME_THICKNESS;
    let of = |e: &'a Evidence| {
        Some(EvidenceInput {
            evidence: e,
            strength: inputs.strength_entry(e.rock)?,
            unit_weight: inputs.unit_weight_input(e.rock)?,
            section: same(e).then_some(demand),
        })
    };
    model.evidence.iter().filter_map(of).collect()
}
