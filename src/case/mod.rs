//! Case files: the only room that knows TOML. Text and path in; a checked [`Case`] out, or every mistake of the file at once.
//!
//! text → tree (every value with its place) → settings put on it → form check (names, kinds, sizes; values in SI) → lowering (references and rules).

mod checked;
mod csv_table;
mod digest;
mod findings;
mod form;
mod keys;
mod library;
mod load;
mod lower;
mod material_card;
mod names;
mod paths;
mod ready;
mod schema;
mod settings;
mod shipped;
mod suggest;
mod test_log;
mod touch;
mod tree;

#[cfg(test)]
mod tests;

pub use checked::{Case, CaseFile, Input, InputValue, LogColumn, LogFormat};
pub use load::load;
pub use material_card::{Confidence, MaterialCard, Said, material_card, material_cards};
pub use schema::{Schema, schema};
pub use shipped::{ReadyProfile, ReadyValue, STARTERS, Starter, ready_profile, ready_profiles};
pub use test_log::read_log;
