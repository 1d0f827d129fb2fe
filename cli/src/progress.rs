//! What a person sees while waiting: a bar on a terminal, else a line from time to time. Everything here goes to standard error.
use std::io::{IsTerminal, Write};
use std::sync::{Mutex, PoisonError};
use std::time::{Duration, Instant};

use indicatif::{ProgressBar, ProgressDrawTarget, ProgressStyle};

/// Least time between two lines off a terminal.
const LINE_INTERVAL: Duration = Duration::from_secs(5);

/// Writes one line to standard error.
pub fn say(line: &str) {
    // A closed standard error is no reason to stop.
    let _ = writeln!(anstream::stderr().lock(), "{line}");
}

/// Shows how far a run is.
#[derive(Debug)]
pub struct Reporter {
    kind: Kind,
}

#[derive(Debug)]
enum Kind {
    Silent,
    Bar(ProgressBar),
    Lines(Mutex<Option<Instant>>),
}

impl Reporter {
    /// A bar if standard error is a terminal, lines if not, nothing if `quiet`.
    pub fn new(quiet: bool) -> Self {
        if quiet {
            return Self { kind: Kind::Silent };
        }
        if !std::io::stderr().is_terminal() {
            return Self { kind: Kind::Lines(Mutex::new(None)) };
        }
        let bar = ProgressBar::with_draw_target(None, ProgressDrawTarget::stderr_with_hz(10));
        let style = ProgressStyle::with_template("{msg:<36} [{bar:30}] {pos}/{len} {elapsed}");
        bar.set_style(style.unwrap_or_else(|_| ProgressStyle::default_bar()).progress_chars("=> "));
        Self { kind: Kind::Bar(bar) }
    }

    /// `done` of `total` steps of `what` are done.
    pub fn step(&self, what: &str, done: usize, total: usize) {
        match &self.kind {
            Kind::Silent => {}
            Kind::Bar(bar) => {
                bar.set_length(total as u64);
                bar.set_position(done as u64);
                bar.set_message(what.to_owned());
            }
            Kind::Lines(last) => say_at_intervals(last, &format!("{what} {done}/{total}")),
        }
    }

    /// Takes the bar away.
    pub fn finish(&self) {
        if let Kind::Bar(bar) = &self.kind {
            bar.finish_and_clear();
        }
    }
}

#[expect(clippy::disallowed_methods, reason = "the boundary may read the clock; no result depends on it")]
fn say_at_intervals(last: &Mutex<Option<Instant>>, line: &str) {
    let mut last = last.lock().unwrap_or_else(PoisonError::into_inner);
    let now = Instant::now();
    if last.is_none_or(|before| LINE_INTERVAL <= now.duration_since(before)) {
        *last = Some(now);
        say(line);
    }
}
