//! The command line: arguments, exit statuses, progress, wiring. No arithmetic, no wording of answers.

mod arguments;
mod check;
mod command_line;
mod completions;
mod exit;
mod failure;
mod files;
mod interrupt;
mod man;
mod materials;
mod mistakes;
mod new;
mod printer;
mod profiles;
mod progress;
mod run;
mod schema;
mod start;

pub use start::start;
