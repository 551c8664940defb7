//! Regular expressions of quantities, for the schema: what an editor can see of the grammar.

use super::Kind;
use super::factors::{FACTORS, READ_AS};

/// Which numbers may stand before a unit.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Sign {
    /// Any.
    Any,
    /// None with a minus.
    NotNegative,
}

impl Kind {
    /// A regular expression, in the part of the syntax that all dialects share, that every text of this kind matches: a number, then a unit of one
    /// factor that fits, or anything made of several. It is kept short because editors show it.
    pub fn pattern(self, sign: Sign) -> String {
        let fits = |name: &str| FACTORS.iter().any(|factor| factor.name == name && factor.dimension == self.dimension());
        let other_spellings = READ_AS.iter().filter(|pair| fits(pair.1)).map(|pair| pair.0);
        let mut units: Vec<&str> = FACTORS.iter().map(|factor| factor.name).filter(|name| fits(name)).collect();
        units.extend(other_spellings);
        units.push(r"[A-Za-z°%]+(-?[1-9]|\s*[./]\s*[A-Za-z°%]+)+");
        let sign = match sign {
            Sign::Any => "[+-]?",
            Sign::NotNegative => r"\+?",
        };
        format!(r"^\s*{sign}[0-9]*\.?[0-9]+([eE][+-]?[0-9]+)?\s*({})\s*$", units.join("|"))
    }
}
