//! A bar on a terminal for work that takes longer than a moment.

use std::io::{IsTerminal, Write, stderr};
use std::time::{Duration, Instant};

/// Shorter work shows nothing.
const PATIENCE: Duration = Duration::from_secs(1);
/// Between two drawings.
const INTERVAL: Duration = Duration::from_millis(100);
/// Characters of the bar.
const LENGTH: u64 = 40;

/// The bar; it draws only where standard error is a terminal, and wipes itself out when it goes.
pub struct Bar {
    label: &'static str,
    started: Instant,
    drawn: Option<Instant>,
    terminal: bool,
}

impl Bar {
    /// A bar that begins now.
    pub fn new(label: &'static str) -> Self {
        Self { label, started: Instant::now(), drawn: None, terminal: stderr().is_terminal() }
    }

    /// Draws how far the work has got, if it is time to. What cannot be drawn is not worth a failure.
    pub fn show(&mut self, done: u64, of: u64) {
        if !self.terminal || self.started.elapsed() < PATIENCE || self.drawn.is_some_and(|drawn| drawn.elapsed() < INTERVAL) {
            return;
        }
        self.drawn = Some(Instant::now());
        let filled = (done.saturating_mul(LENGTH) / of.max(1)).min(LENGTH);
        let bar: String = (0..LENGTH).map(|at| if at < filled { '=' } else { ' ' }).collect();
        let _ = write!(stderr(), "\r{} [{bar}] {done} of at most {of}", self.label);
    }
}

impl Drop for Bar {
    fn drop(&mut self) {
        if self.drawn.is_some() {
            // Back to the start of the line, and clear it.
            let _ = write!(stderr(), "\r\x1b[K");
        }
    }
}
