//! Regular expressions of quantities, for the schema: what an editor can see of the grammar.

use super::factors::{FACTORS, READ_AS};
use super::{Factor, Kind};

/// Which numbers may stand before a unit.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Sign {
    /// Any.
    Any,
    /// None with a minus.
    NotNegative,
}

impl Kind {
    /// A regular expression (in the part of the syntax that all dialects share) that every text of this kind matches. It knows the numbers and
    /// the names of the units, and the dimension of a unit of one factor; it can't add up the dimensions of a unit of several.
    pub fn pattern(self, sign: Sign) -> String {
        let names = |fits: &dyn Fn(&Factor) -> bool| {
            let read_as = READ_AS.iter().filter_map(|(written, name)| Some((*written, Factor::named(name)?)));
            let named = FACTORS.iter().map(|factor| (factor.name, factor)).chain(read_as);
            let fitting: Vec<_> = named.filter(|(_, factor)| fits(factor)).map(|(name, _)| name).collect();
            fitting.join("|")
        };
        let all = format!("({})", names(&|_| true));
        let exponent = "-?[1-9]";
        let more = format!(r"(\s*[./]\s*{all}({exponent})?)");
        let compound = format!("{all}({exponent}{more}*|{more}+)");
        let alone = names(&|factor| factor.dimension == self.dimension());
        let unit = if alone.is_empty() { compound } else { format!("({alone}|{compound})") };
        let sign = match sign {
            Sign::Any => "[+-]?",
            Sign::NotNegative => r"\+?",
        };
        format!(r"^\s*{sign}([0-9]+(\.[0-9]+)?|\.[0-9]+)([eE][+-]?[0-9]+)?\s*{unit}\s*$")
    }
}
