//! How far a long run is, on a terminal.

use std::io::{self, IsTerminal, Write};
use std::sync::Mutex;
use std::time::{Duration, Instant};

/// Runs shorter than this show nothing.
const PATIENCE: Duration = Duration::from_millis(500);
/// Between two updates.
const PAUSE: Duration = Duration::from_millis(100);

/// A line on standard error that says how far a run is; it wipes itself away at the end.
pub struct Progress {
    /// When the next update is due, and whether one was shown; `None`: never.
    line: Option<Mutex<Line>>,
}

struct Line {
    due: Instant,
    shown: bool,
}

impl Progress {
    /// Progress of a run that begins now; silent unless `wanted` and standard error is a terminal.
    pub fn start(wanted: bool) -> Self {
        let line = (wanted && io::stderr().is_terminal()).then(|| {
            Mutex::new(Line {
                due: Instant::now() + PATIENCE,
                shown: false,
            })
        });
        Self { line }
    }

    /// Tells the share of the work that is done.
    pub fn tell(&self, share: f64) {
        // An update that meets another one is skipped.
        let Some(Ok(mut line)) = self.line.as_ref().map(Mutex::try_lock) else {
            return;
        };
        let now = Instant::now();
        if now >= line.due {
            line.due = now + PAUSE;
            line.shown = true;
            let _unheard = write!(io::stderr(), "\r{:3.0} %", (share * 100.0).clamp(0.0, 100.0).floor());
        }
    }
}

impl Drop for Progress {
    fn drop(&mut self) {
        if let Some(Ok(line)) = self.line.as_ref().map(Mutex::try_lock)
            && line.shown
        {
            let _unheard = write!(io::stderr(), "\r     \r");
        }
    }
}
