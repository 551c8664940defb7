//! What a person types and sees.

mod materials;
mod run_and_check;
mod schema;
