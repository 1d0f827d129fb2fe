//! What a person sees while waiting: a bar on a terminal, else a line from time to time. Everything here goes to standard error.
use std::io::{IsTerminal, Write};
use std::sync::{Mutex, PoisonError};
use std::time::{Duration, Instant};

use checker::assess::Progress;
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
    stage: Mutex<Stage>,
}

/// What is being done, and how far it is.
#[derive(Debug, Default)]
struct Stage {
    name: String,
    done: usize,
    total: usize,
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
            return Self::of(Kind::Silent);
        }
        if !std::io::stderr().is_terminal() {
            return Self::of(Kind::Lines(Mutex::new(None)));
        }
        let bar = ProgressBar::with_draw_target(None, ProgressDrawTarget::stderr_with_hz(10));
        let style = ProgressStyle::with_template("{msg:<36} [{bar:30}] {pos}/{len} {elapsed}");
        bar.set_style(style.unwrap_or_else(|_| ProgressStyle::default_bar()).progress_chars("=> "));
        Self::of(Kind::Bar(bar))
    }

    fn of(kind: Kind) -> Self {
        Self { kind, stage: Mutex::default() }
    }

    /// `done` of `total` steps of `what` are done.
    pub fn show(&self, what: &str, done: usize, total: usize) {
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

impl Progress for Reporter {
    fn begin(&self, stage: &str, total: usize) {
        let mut now = self.stage.lock().unwrap_or_else(PoisonError::into_inner);
        // A stage that begins again goes on where it was, with a new total.
        let done = if now.name == stage { now.done } else { 0 };
        *now = Stage { name: stage.to_owned(), done, total };
        self.show(stage, done, total);
    }

    fn step(&self) {
        let mut now = self.stage.lock().unwrap_or_else(PoisonError::into_inner);
        now.done += 1;
        self.show(&now.name, now.done, now.total.max(now.done));
    }

    /// Never: an interruption ends the process, see [`crate::interrupt`].
    fn cancelled(&self) -> bool {
        false
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
