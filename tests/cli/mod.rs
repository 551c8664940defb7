//! What a person types and sees.

mod door;
mod materials;
mod run_and_check;
mod schema;
mod shapes;
