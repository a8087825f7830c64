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
        if self.terminal && is_due(self.started.elapsed(), self.drawn.map(|drawn| drawn.elapsed())) {
            self.drawn = Some(Instant::now());
            let _ = write!(stderr(), "{}", drawing(self.label, done, of));
        }
    }
}

/// Not in the first moment, and not too often.
fn is_due(since_start: Duration, since_drawing: Option<Duration>) -> bool {
    since_start >= PATIENCE && since_drawing.is_none_or(|since| since >= INTERVAL)
}

/// The line, over the one before.
fn drawing(label: &str, done: u64, of: u64) -> String {
    let filled = (done.saturating_mul(LENGTH) / of.max(1)).min(LENGTH);
    let bar: String = (0..LENGTH).map(|at| if at < filled { '=' } else { ' ' }).collect();
    format!("\r{label} [{bar}] {done} of at most {of}")
}

impl Drop for Bar {
    fn drop(&mut self) {
        if self.drawn.is_some() {
            // Back to the start of the line, and clear it.
            let _ = write!(stderr(), "\r\x1b[K");
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn short_work_shows_nothing() {
        let millis = Duration::from_millis;
        assert!(!is_due(millis(999), None));
        assert!(is_due(millis(1000), None));
        assert!(!is_due(millis(5000), Some(millis(99))));
        assert!(is_due(millis(5000), Some(millis(100))));
    }

    #[test]
    fn the_bar_fills() {
        let filled = |done, of| drawing("rows", done, of).matches('=').count();
        assert_eq!([filled(0, 10), filled(5, 10), filled(10, 10), filled(11, 10), filled(0, 0)], [0, 20, 40, 40, 0]);
        assert!(drawing("rows", 5, 10).starts_with("\rrows [") && drawing("rows", 5, 10).ends_with("] 5 of at most 10"));
    }
}
