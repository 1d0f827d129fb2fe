//! `lab`: strengths from laboratory results.
use std::io::Write;
use std::path::Path;

use checker::diagnostic::{Diagnostic, Severity};

use crate::args::LabArgs;
use crate::exit::Exit;
use crate::lab_file::{self, Format};
use crate::progress::say;

/// Carries out `lab`.
pub(super) fn run(args: &LabArgs) -> Exit {
    match carry_out(args) {
        Ok(exit) | Err(exit) => exit,
    }
}

fn carry_out(args: &LabArgs) -> Result<Exit, Exit> {
    let shown = args.file.display().to_string();
    let bytes = read(&args.file).map_err(|error| {
        say(&format!("error: cannot read `{shown}`: {error}"));
        Exit::File
    })?;
    let fail = |faults: Vec<Diagnostic>| {
        for fault in &faults {
            say_finding(&shown, fault);
        }
        Exit::ModelWrong
    };
    let file = lab_file::read(&bytes).map_err(fail)?;
    let summary = lab_file::summary(&file.value.results, args.rock.as_deref()).map_err(|fault| fail(vec![fault]))?;
    let mut warnings = file.warnings;
    warnings.extend(summary.warnings);
    for warning in &warnings {
        say_finding(&shown, warning);
    }

    let name = args.file.file_name().map_or_else(|| shown.clone(), |name| name.to_string_lossy().into_owned());
    let named = file.value.results.rocks();
    let rock = args.rock.clone().or_else(|| (named.len() == 1).then(|| named[0].to_owned()));
    let table = lab_file::rock_table(rock.as_deref().unwrap_or("rock"), &name, &summary.value);
    let about =
        lab_file::json::About { file: &name, format: &file.value.format, rock: rock.as_deref(), table: &table, warnings: &warnings };
    let internal = |error| {
        say(&format!("error: {error}"));
        Exit::Analysis
    };
    if let Some(path) = &args.plot {
        let title = rock.as_ref().map_or_else(|| name.clone(), |rock| format!("{rock}, {name}"));
        let picture = lab_file::plot::svg(&summary.value, &title).map_err(internal)?;
        write_plot(path, picture.as_deref())?;
    }
    let text = if args.json {
        lab_file::json::object(&summary.value, &about).map_err(internal)?
    } else {
        let format = match about.format {
            Format::Csv => "CSV".to_owned(),
            Format::Ags4(edition) => format!("AGS4 {edition}"),
        };
        let head = rock.as_ref().map_or_else(|| format!("{name} ({format})"), |rock| format!("{name} ({format}), {rock}"));
        let body = lab_file::text::summary(&summary.value).map_err(internal)?;
        format!("{head}\n\n{body}rock table for a model file:\n\n{table}")
    };
    Ok(super::print(&text))
}

fn say_finding(file: &str, finding: &Diagnostic) {
    let severity = match finding.severity {
        Severity::Error => "error",
        Severity::Warning => "warning",
    };
    let text = format!("{severity}: {file}: {}: {}", finding.at, finding.message);
    // A file may hold anything: nothing of it may steer the terminal.
    say(&text.replace(char::is_control, "?"));
    if let Some(hint) = &finding.hint {
        say(&format!("  hint: {}", hint.replace(char::is_control, "?")));
    }
}

#[expect(clippy::disallowed_methods, reason = "the boundary reads files")]
fn read(path: &Path) -> std::io::Result<Vec<u8>> {
    std::fs::read(path)
}

/// Writes the picture under a name that does not exist yet: nothing is ever replaced.
fn write_plot(path: &Path, picture: Option<&str>) -> Result<(), Exit> {
    let fault = |what: &str| {
        say(&format!("error: cannot write `{}`: {what}", path.display()));
        Exit::File
    };
    let Some(picture) = picture else {
        return Err(fault("the file gives no shear fit to draw"));
    };
    let mut file = std::fs::OpenOptions::new().write(true).create_new(true).open(path).map_err(|error| fault(&error.to_string()))?;
    if let Err(error) = file.write_all(picture.as_bytes()).and_then(|()| file.sync_all()) {
        // Half a picture is worse than none; the first fault is the one to report.
        let _ = std::fs::remove_file(path);
        return Err(fault(&error.to_string()));
    }
    say(&format!("wrote {}", path.display()));
    Ok(())
}
