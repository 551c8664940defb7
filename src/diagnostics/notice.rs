//! A warning or a caution that travels with an answer into every document.

/// A warning or a caution.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Notice {
    /// A fixed name, such as `property-table-left`.
    pub code: &'static str,
    /// What a person should know.
    pub text: String,
    /// The station it is about.
    pub station: Option<String>,
    /// The place in that station.
    pub place: Option<String>,
}
