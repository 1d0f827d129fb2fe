//! `assess`, `check`, `deepen` and `mesh`: one model, one section.
use std::path::PathBuf;

use checker::model::{Headline, Model};
use checker::outcome::{Outcome, Program, Status};

use super::analysis::{self, Scope};
use super::load;
use super::{print, write};
use crate::args::RunArgs;
use crate::exit::Exit;
use crate::interrupt::Interrupt;
use crate::model_file::LoadedModel;
use crate::output::folder::{self, Staging};
use crate::output::text::{self, TextParts};
use crate::output::{Provenance, json};
use crate::progress::{Reporter, say};

/// From the model file to everything asked for.
pub(crate) fn run(scope: Scope, args: &RunArgs, interrupt: &Interrupt) -> Exit {
    let target = target(scope, args);
    // Step 1: what can fail before any work, all of it said at once.
    let folder = target.as_ref().map_or(Ok(()), |target| folder::examine(target, args.overwrite));
    if let Err(error) = &folder {
        say(&format!("error: {error}"));
    }
    let letterhead = write::letterhead(args.letterhead.as_deref());
    if let Err(message) = &letterhead {
        say(&format!("error: {message}"));
    }
    let outputs_fail = if folder.is_ok() && letterhead.is_ok() { Exit::Done } else { Exit::File };
    let loaded = match load::load(&args.model, args.diagnostics) {
        Ok(loaded) if outputs_fail == Exit::Done => loaded,
        Ok(_) => return outputs_fail,
        Err(exit) => return exit.worst(outputs_fail),
    };
    let staging = match target.map(|target| Staging::open(&target, args.overwrite, interrupt)).transpose() {
        Ok(staging) => staging,
        Err(error) => return fail(Exit::File, &error),
    };
    // Step 2: the analysis.
    let reporter = Reporter::new(args.quiet);
    let threads = args.threads.map_or_else(all_threads, usize::from);
    let mut results = match analysis::run(&loaded, scope, threads, args.diagnostics, &reporter) {
        Ok(results) => results,
        Err(exit) => return exit,
    };
    let provenance = identify(&mut results.outcome, &loaded, scope, args);
    // Step 3: files, then the summary, so that it only claims what was written.
    let job = write::Job {
        scope,
        results: &results,
        loaded: &loaded,
        provenance: &provenance,
        letterhead: letterhead.ok().flatten(),
        linear_triangles: args.linear_triangles,
        threads,
    };
    let written = match staging.map(|staging| write::all(&job, staging, &reporter)).transpose() {
        Ok(written) => written,
        Err(error) => return fail(error.exit(), &error),
    };
    if let (Some(written), false) = (written, args.quiet) {
        say(&written);
    }
    tell(&results.outcome, &provenance, scope, args).worst(verdict(&results.outcome, &loaded.model, args.exit_over_limit))
}

fn fail(exit: Exit, message: &dyn std::fmt::Display) -> Exit {
    say(&format!("error: {message}"));
    exit
}

fn all_threads() -> usize {
    std::thread::available_parallelism().map_or(1, std::num::NonZero::get)
}

/// `assess` and `mesh` always write; `check` and `deepen` where a folder is named.
fn target(scope: Scope, args: &RunArgs) -> Option<PathBuf> {
    let stem = args.model.file_stem().map_or_else(|| "model".to_owned(), |stem| stem.to_string_lossy().into_owned());
    match (scope, &args.out) {
        (_, Some(out)) => Some(out.clone()),
        (Scope::Assess | Scope::Mesh, None) => Some(PathBuf::from(format!("{stem}-results"))),
        (Scope::Check | Scope::Deepen, None) => None,
    }
}

/// Fills in program, file and hash. The command leaves out what does not change a result, so that results are the same bytes
/// for any number of threads and in any folder.
fn identify(outcome: &mut Outcome, loaded: &LoadedModel, scope: Scope, args: &RunArgs) -> Provenance {
    outcome.program = Program { name: env!("CARGO_PKG_NAME").to_owned(), version: env!("CARGO_PKG_VERSION").to_owned() };
    outcome.model.file.clone_from(&loaded.file_name);
    outcome.model.sha256.clone_from(&loaded.sha256);
    let verb = match scope {
        Scope::Assess => "assess",
        Scope::Check => "check",
        Scope::Deepen => "deepen",
        Scope::Mesh => "mesh",
    };
    let mut command = format!("{} {verb} {}", outcome.program.name, outcome.model.file);
    if args.linear_triangles {
        command.push_str(" --linear-triangles");
    }
    if args.letterhead.is_some() {
        command.push_str(" --letterhead");
    }
    Provenance { command, seed: loaded.model.outlook.as_ref().map(|outlook| outlook.seed) }
}

fn tell(outcome: &Outcome, provenance: &Provenance, scope: Scope, args: &RunArgs) -> Exit {
    if args.json {
        return match json::summary(outcome, provenance) {
            Ok(text) => print(&text),
            Err(error) => fail(Exit::Analysis, &error),
        };
    }
    print(&text::summary(outcome, provenance, TextParts { tables: !args.quiet, today_only: scope == Scope::Check }))
}

/// How the run ends, from what was found.
fn verdict(outcome: &Outcome, model: &Model, exit_over_limit: bool) -> Exit {
    let inputs = match model.checks.headline {
        Headline::Cautious => "cautious",
        Headline::BestEstimate => "best estimate",
    };
    let over = outcome.surveyed.checks.iter().any(|check| check.over && check.inputs == inputs);
    let missed = if outcome.status == Status::TargetMissed { Exit::Analysis } else { Exit::Done };
    let limit = if exit_over_limit && (over || outcome.status == Status::PartRefused) { Exit::OverLimit } else { Exit::Done };
    missed.worst(limit)
}
