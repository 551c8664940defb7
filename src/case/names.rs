//! Names that people give, and paths made of them.

use super::keys::PLACES;

/// Why a name can't be used; `None` when it can.
pub(super) fn fault(name: &str) -> Option<(&'static str, String)> {
    if name.trim().is_empty() {
        return Some(("bad-name", "a name may not be empty".to_owned()));
    }
    if let Some(letter) = name.chars().find(|letter| ['/', '|', ':'].contains(letter)) {
        return Some(("bad-name", format!("a name may not hold \"{letter}\"")));
    }
    if name.chars().any(char::is_control) {
        return Some(("bad-name", "a name may not hold line breaks or other control characters".to_owned()));
    }
    if PLACES.contains(&name) {
        return Some(("reserved-name", format!("\"{name}\" is the name of a place that every station has")));
    }
    (name == "*").then(|| ("reserved-name", "\"*\" stands for every station in a path".to_owned()))
}

/// A name as a path writes it: in quotes if it is more than letters, digits, `-`, `_`.
pub(super) fn in_path(name: &str) -> String {
    let plain = !name.is_empty()
        && name
            .chars()
            .all(|letter| letter.is_ascii_alphanumeric() || letter == '-' || letter == '_');
    if plain {
        name.to_owned()
    } else {
        format!("\"{}\"", name.replace('\\', "\\\\").replace('"', "\\\""))
    }
}

/// A path and one more name or key.
pub(super) fn join(path: &str, name: &str) -> String {
    if path.is_empty() {
        in_path(name)
    } else {
        format!("{path}.{}", in_path(name))
    }
}
