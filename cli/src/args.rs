//! The command line: one verb a command, the same options everywhere.
use std::path::PathBuf;

use clap::{Args, Parser, Subcommand, ValueEnum};

/// Undercut sea cliffs: how close an overhang is to breaking, and how much deeper the sea may cut before it breaks.
#[derive(Debug, Clone, Parser)]
#[command(name = "brinkline", version, about, max_term_width = 100, after_help = EXIT_CODES)]
pub struct Cli {
    /// What to do.
    #[command(subcommand)]
    pub command: Command,
}

const EXIT_CODES: &str = "Exit codes: 0 done; 1 over a limit or part refused (only with --exit-over-limit); 2 wrong use of the command \
line; 3 the model is wrong; 4 a file cannot be read or written; 5 the analysis was not completed or missed its target error; 6 some \
sections failed; 130 interrupted.";

/// The commands.
#[derive(Debug, Clone, Subcommand)]
pub enum Command {
    /// Check the surveyed state, deepen the undercut to its critical depth and write every output
    Assess(RunArgs),
    /// Check the surveyed state only: a table on standard output
    Check(RunArgs),
    /// The depth series and the critical undercut depth only
    Deepen(RunArgs),
    /// Geometry and mesh only: picture and fields file, nothing is solved
    Mesh(RunArgs),
    /// Strengths from laboratory results (CSV or AGS4): fits, scatter, 5 % fractiles and a rock table to paste
    Lab(LabArgs),
    /// Write a commented starter model that runs as it is
    New(NewArgs),
    /// Print the JSON Schema of the model file
    Schema,
}

/// Options of every command that reads a model.
#[expect(clippy::struct_excessive_bools, reason = "each is a switch of its own on the command line")]
#[derive(Debug, Clone, Args)]
pub struct RunArgs {
    /// Model file
    #[arg(value_name = "MODEL")]
    pub model: PathBuf,
    /// Folder for the results [default for assess and mesh: MODEL-results; check and deepen write files only if this is given]
    #[arg(long, value_name = "DIR")]
    pub out: Option<PathBuf>,
    /// Print the results object on standard output and nothing else
    #[arg(long)]
    pub json: bool,
    /// No progress and no tables; cautions and refusals are still shown
    #[arg(long, short)]
    pub quiet: bool,
    /// Number of threads [default: all cores]; results do not depend on it
    #[arg(long, value_name = "N", value_parser = clap::value_parser!(u16).range(1..=1024))]
    pub threads: Option<u16>,
    /// End with exit code 1 if a check is over its limit or a part was refused
    #[arg(long)]
    pub exit_over_limit: bool,
    /// Replace the results of an earlier run (never those of a checked report)
    #[arg(long)]
    pub overwrite: bool,
    /// How findings about the model are shown
    #[arg(long, value_name = "FORM", value_enum, default_value_t = DiagnosticsForm::Human)]
    pub diagnostics: DiagnosticsForm,
    /// Write three-node triangles (four for each element) to the fields files
    #[arg(long)]
    pub linear_triangles: bool,
    /// Template with a firm's own letterhead for the top of the report
    #[arg(long, value_name = "FILE")]
    pub letterhead: Option<PathBuf>,
}

/// Options of `lab`.
#[derive(Debug, Clone, Args)]
pub struct LabArgs {
    /// Laboratory file
    #[arg(value_name = "FILE")]
    pub file: PathBuf,
    /// Rock of the file, where it holds several
    #[arg(long, value_name = "NAME")]
    pub rock: Option<String>,
    /// Draw the shear fits into this SVG file; it must not exist yet
    #[arg(long, value_name = "FILE")]
    pub plot: Option<PathBuf>,
    /// Print the results object on standard output and nothing else
    #[arg(long)]
    pub json: bool,
}

/// Options of `new`.
#[derive(Debug, Clone, Args)]
pub struct NewArgs {
    /// File to write; it must not exist yet
    #[arg(value_name = "FILE")]
    pub file: PathBuf,
}

/// How findings about the model are shown.
#[derive(Debug, Clone, Copy, PartialEq, Eq, ValueEnum)]
pub enum DiagnosticsForm {
    /// With source excerpt and remedy
    Human,
    /// One line each: file:line:column: severity: text
    Short,
    /// As data
    Json,
}

#[cfg(test)]
mod tests {
    use super::{Cli, Command, DiagnosticsForm};
    use clap::{CommandFactory, Parser};

    #[test]
    fn the_definition_is_consistent() {
        Cli::command().debug_assert();
    }

    #[test]
    fn options_arrive_where_they_belong() {
        let line = "brinkline assess a.toml --out r --json --quiet --threads 2 --exit-over-limit --overwrite --diagnostics short";
        let cli = Cli::try_parse_from(line.split(' ')).unwrap();
        let Command::Assess(run) = cli.command else { panic!("assess expected") };
        assert_eq!(run.model.to_str(), Some("a.toml"));
        assert_eq!(run.out.unwrap().to_str(), Some("r"));
        assert!(run.json && run.quiet && run.exit_over_limit && run.overwrite && !run.linear_triangles);
        assert_eq!((run.threads, run.diagnostics), (Some(2), DiagnosticsForm::Short));
    }

    #[test]
    fn wrong_use_is_exit_code_2() {
        for line in ["brinkline", "brinkline asess a.toml", "brinkline assess", "brinkline check a.toml --threads 0"] {
            assert_eq!(Cli::try_parse_from(line.split(' ')).unwrap_err().exit_code(), 2, "{line}");
        }
    }
}
