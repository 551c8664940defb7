//! Ctrl-C: asks the run to stop; a second one ends the program at once.

use super::exit::ExitStatus;
use super::failure::Failure;
use std::sync::Arc;
use std::sync::atomic::{AtomicBool, Ordering};

/// A flag that Ctrl-C sets.
///
/// # Errors
/// When the system refuses the handler.
pub fn stop_flag() -> Result<Arc<AtomicBool>, Failure> {
    let stop = Arc::new(AtomicBool::new(false));
    let seen = Arc::clone(&stop);
    ctrlc::set_handler(move || {
        if seen.swap(true, Ordering::Relaxed) {
            #[expect(clippy::exit, reason = "asked twice: the run does not answer, and files are only ever put in place whole")]
            std::process::exit(ExitStatus::Interrupted as i32);
        }
    })?;
    Ok(stop)
}
