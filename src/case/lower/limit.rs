//! Limits.

use super::quantities::{temperature, time};
use super::{Lowering, Node};
use crate::case::tree::Value;
use crate::model::{Limit, LimitKind, LimitOrigin};

impl Lowering<'_> {
    /// A limit: a temperature, or a table of value, kind and time.
    pub(super) fn limit(&mut self, node: &Node, origin: LimitOrigin) -> Option<Limit> {
        let (value, kind, allowed_over) = match &node.value {
            Value::Number(value) => (*value, LimitKind::Service, 0.0),
            Value::Table(table) => {
                if !table.has("value") {
                    self.missing(&node.spot, "value", "in a limit: the temperature");
                }
                let kind = match table.node("kind") {
                    Some(word) => kind_of(word.text()?),
                    None => LimitKind::Service,
                };
                let allowed_over = table.node("for").map_or(Some(0.0), Node::number)?;
                (table.number("value")?, kind, allowed_over)
            }
            _ => return None,
        };
        self.accept(Limit::new(temperature(value), kind, origin, time(allowed_over)), &node.spot)
    }
}

/// The kind of a limit by its word; the form check let only these pass.
pub(in crate::case) fn kind_of(word: &str) -> LimitKind {
    match word {
        "strength" => LimitKind::Strength,
        "melting" => LimitKind::Melting,
        "bond" => LimitKind::Bond,
        "seal" => LimitKind::Seal,
        "propellant" => LimitKind::Propellant,
        _ => LimitKind::Service,
    }
}
