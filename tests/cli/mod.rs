//! What a person types and sees.

mod door;
mod run_and_check;
