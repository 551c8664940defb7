//! What a person types and sees.

mod run_and_check;
mod shapes;
