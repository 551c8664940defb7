//! A coolant on the outer face.

use super::quantities::{temperature, transfer};
use super::{InputValue, Lowering, Node};
use crate::case::names;
use crate::model::{Coolant, CoolantPhases};

impl Lowering<'_> {
    /// A coolant of given coefficient; one by its fluid is not built yet.
    pub(super) fn coolant(&mut self, node: &Node, path: &str) -> Option<Coolant> {
        let table = node.table()?;
        self.exclude(table, &["coefficient", "fluid"]);
        if let Some(fluid) = table.node("fluid") {
            self.not_built_yet(&fluid.spot, "a coolant by its fluid");
            return None;
        }
        self.misfits(table, &["velocity", "passage", "pressure", "entrance"], "without \"fluid\"");
        let Some(coefficient) = table.node("coefficient") else {
            self.missing(&node.spot, "coefficient", "for a coolant, or \"fluid\"");
            return None;
        };
        let phases = self.coolant_phases(table.node("phases"), path)?;
        let coolant = Coolant::new(transfer(coefficient.number()?), temperature(table.number("temperature")?), phases);
        self.accept(coolant, &node.spot)
    }

    fn coolant_phases(&mut self, node: Option<&Node>, path: &str) -> Option<CoolantPhases> {
        let mut phases = CoolantPhases {
            burn: false,
            hold: false,
            shutdown: false,
        };
        let Some(node) = node else {
            phases.burn = true;
            self.default(names::join(&names::join(path, "phases"), "0"), InputValue::Word("burn".to_owned()), "");
            return Some(phases);
        };
        let list = node.list()?;
        if list.is_empty() {
            self.error(
                &node.spot,
                "empty-list",
                "this coolant never flows",
                "name the phases: \"burn\", \"hold\", \"shutdown\"",
            );
            return None;
        }
        for word in list {
            match word.text()? {
                "burn" => phases.burn = true,
                "hold" => phases.hold = true,
                _ => phases.shutdown = true,
            }
        }
        Some(phases)
    }
}
