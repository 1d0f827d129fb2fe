//! What each verb of the command line does: reads, calls `checker`, writes, and says how it ended.
mod analysis;
mod lab;
mod load;
mod new;
mod schema;
mod section;
mod write;

use crate::args::{Cli, Command};
use crate::exit::Exit;
use crate::interrupt::Interrupt;
use crate::progress::say;

pub use analysis::Scope;
pub use new::STARTER;

/// Carries out one command.
pub fn run(cli: &Cli) -> Exit {
    let interrupt = Interrupt::default();
    if let Err(error) = interrupt.install() {
        say(&format!("warning: ctrl-C cannot be caught ({error}); an interrupted run may leave a hidden folder behind"));
    }
    match &cli.command {
        Command::Assess(args) => section::run(Scope::Assess, args, &interrupt),
        Command::Check(args) => section::run(Scope::Check, args, &interrupt),
        Command::Deepen(args) => section::run(Scope::Deepen, args, &interrupt),
        Command::Mesh(args) => section::run(Scope::Mesh, args, &interrupt),
        Command::New(args) => new::run(&args.file),
        Command::Schema => schema::run(),
        Command::Lab(args) => lab::run(args),
    }
}

/// Prints data on standard output; a reader that went away is no fault.
pub(crate) fn print(text: &str) -> Exit {
    use std::io::Write;
    let mut stdout = std::io::stdout().lock();
    match stdout.write_all(text.as_bytes()).and_then(|()| stdout.flush()) {
        Err(error) if error.kind() != std::io::ErrorKind::BrokenPipe => {
            say(&format!("error: cannot write to standard output: {error}"));
            Exit::File
        }
        _ => Exit::Done,
    }
}
