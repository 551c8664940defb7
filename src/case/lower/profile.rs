//! [profile]: phases written out.

use super::quantities::time;
use super::{Lowering, Node, Table};
use crate::case::keys::{Expect, is_phase_key};
use crate::case::ready::{self, Filled, Wanted};
use crate::diagnostics::Diagnostic;
use crate::model::{Phase, PhaseKind, Profile};

/// A profile of more phases than this is a mistake.
const MOST_PHASES: u64 = 100_000;

/// The profile, and what the rest of the case must know of it.
pub(in crate::case) struct LoweredProfile {
    pub profile: Profile,
    /// What is expected of each value of a ready profile.
    pub values: Vec<(String, &'static Expect)>,
    /// Length of the longest burn, s.
    pub longest_burn: f64,
    /// Whether a burn has a level, ramp or tail of its own.
    pub shaped: bool,
    /// Whether any phase asks for the purge.
    pub purged: bool,
    /// Whether any burn switches the coolant off.
    pub coolant_off: bool,
}

const KINDS: [&str; 4] = ["burn", "hold", "shutdown", "repeat"];

impl Lowering<'_> {
    pub(super) fn profile(&mut self, case: &Table) -> Option<LoweredProfile> {
        let node = case.node("profile")?;
        let table = node.table()?;
        self.exclude(table, &["phases", "log", "use"]);
        if let Some(log) = table.node("log") {
            self.not_built_yet(&log.spot, "a profile from a pressure log");
            return None;
        }
        if let Some(ready) = table.node("use") {
            let filled = self.ready(ready, table.node("values"))?;
            return self.written_out(&filled.phases, filled.expects);
        }
        self.misfits(table, &["values"], "without \"use\"");
        let Some(list) = table.node("phases") else {
            self.missing(
                &node.spot,
                "phases",
                "in [profile]: what happens when; or \"use\", with the name of a ready profile",
            );
            return None;
        };
        self.written_out(list, Vec::new())
    }

    fn ready(&mut self, name: &Node, values: Option<&Node>) -> Option<Filled> {
        let wanted = Wanted {
            text: name.text()?,
            spot: Some(name.words()),
            folder: self.folder,
        };
        let ready = ready::read(&wanted, self.findings, self.files)?;
        ready::fill(&ready, values, self.findings, self.inputs)
    }

    pub(in crate::case) fn written_out(&mut self, list: &Node, values: Vec<(String, &'static Expect)>) -> Option<LoweredProfile> {
        let phases = self.phases(list.list()?, true)?;
        let burns = || phases.iter().filter(|phase| phase.kind() == PhaseKind::Burn);
        let longest_burn = burns().map(Phase::duration).fold(0.0, f64::max);
        if phases.last().is_none_or(|phase| phase.kind() != PhaseKind::Shutdown) {
            let path = format!("profile.phases.{}.shutdown", list.list()?.len());
            self.default_number(path, 0.0, crate::units::Kind::Time);
        }
        Some(LoweredProfile {
            longest_burn,
            shaped: any(list, &|phase| ["level", "ramp", "tail"].into_iter().any(|key| phase.has(key))),
            purged: any(list, &|phase| phase.switch("purge") == Some(true)),
            values,
            coolant_off: any(list, &|phase| phase.switch("coolant") == Some(false)),
            profile: Profile::new(phases),
        })
    }

    /// A list of phases, written out. `outermost`: not within a repeat, so that a shutdown may end it.
    fn phases(&mut self, list: &[Node], outermost: bool) -> Option<Vec<Phase>> {
        let mut phases = Some(Vec::new());
        for (index, node) in list.iter().enumerate() {
            let last = outermost && index + 1 == list.len();
            let lowered = self.phase(node, last);
            phases = phases.zip(lowered).and_then(|(mut phases, lowered)| {
                if (phases.len() + lowered.len()) as u64 > MOST_PHASES {
                    self.too_many(node, phases.len() as u64 + lowered.len() as u64);
                    return None;
                }
                phases.extend(lowered);
                Some(phases)
            });
        }
        phases
    }

    fn too_many(&mut self, node: &Node, count: u64) {
        let spot = node
            .table()
            .and_then(|table| table.node("repeat"))
            .map_or(&node.spot, |repeat| &repeat.spot);
        let message = format!("the profile has {count} phases when written out, and {MOST_PHASES} is the most");
        self.error(spot, "too-many-phases", message, "repeat less");
    }

    /// One entry of the list: a phase, or a repeated list of phases.
    fn phase(&mut self, node: &Node, may_shut_down: bool) -> Option<Vec<Phase>> {
        let table = node.table()?;
        let mut kinds = table.entries.iter().filter(|entry| KINDS.contains(&entry.key.as_str()));
        let Some(kind) = kinds.next() else {
            // A misspelt kind is an unknown key, and reported as such.
            if table.entries.iter().all(|entry| is_phase_key(&entry.key)) {
                self.error(
                    &node.spot,
                    "phase-kind",
                    "this phase doesn't say what it is",
                    format!("one of these is due: {}", KINDS.join(", ")),
                );
            }
            return None;
        };
        if let Some(second) = kinds.next() {
            let message = format!("a phase is one thing: \"{}\" or \"{}\"", kind.key, second.key);
            self.error(&second.key_spot, "phase-kind", message, "make it a phase of its own");
            return None;
        }
        let why = |word: &str| format!("in a {word}");
        match kind.key.as_str() {
            "burn" => self.misfits(table, &["purge", "phases"], &why("burn")),
            "repeat" => self.misfits(table, &["level", "ramp", "tail", "purge", "coolant", "film", "keep"], &why("repeat")),
            word => self.misfits(table, &["level", "ramp", "tail", "coolant", "film", "keep", "phases"], &why(word)),
        }
        if kind.key == "repeat" {
            return self.repeated(node, table, &kind.node);
        }
        if kind.key == "shutdown" && !may_shut_down {
            let message = "the shutdown is the last phase, and stands once, outside any repeat";
            self.error(&kind.key_spot, "shutdown-not-last", message, "a pause between burns is a \"hold\"");
            return None;
        }
        let duration = time(kind.node.number()?);
        let phase = match kind.key.as_str() {
            "burn" => self.burn(node, table, duration)?,
            "hold" => self
                .accept(Phase::hold(duration), &node.spot)?
                .with_purge(table.switch("purge").unwrap_or(false)),
            _ => self
                .accept(Phase::shutdown(duration), &node.spot)?
                .with_purge(table.switch("purge").unwrap_or(false)),
        };
        Some(vec![phase])
    }

    fn burn(&mut self, node: &Node, table: &Table, duration: uom::si::f64::Time) -> Option<Phase> {
        let or = |key: &str, default: f64| table.node(key).map_or(Some(default), Node::number);
        let (level, ramp, tail) = (or("level", 1.0)?, or("ramp", 0.0)?, or("tail", 0.0)?);
        if ramp > duration.value
            && let Some(node) = table.node("ramp")
        {
            let found = Diagnostic::warning("odd-value", "the ramp is longer than its burn").label("this burn ends on the way up");
            self.findings.doubt(&node.words(), found);
        }
        let burn = Phase::burn(duration).and_then(|burn| burn.at_level(level));
        let burn = burn.and_then(|burn| burn.with_ramp_and_tail(time(ramp), time(tail)));
        let burn = self.accept(burn, &node.spot)?;
        Some(burn.with_coolant(table.switch("coolant").unwrap_or(true)))
    }

    fn repeated(&mut self, node: &Node, table: &Table, count: &Node) -> Option<Vec<Phase>> {
        let Some(list) = table.node("phases") else {
            self.missing(&node.spot, "phases", "in a repeat: what is repeated");
            return None;
        };
        let phases = self.phases(list.list()?, false)?;
        let count_written = count.number()?;
        #[expect(clippy::cast_precision_loss, reason = "at most 100,000")]
        let total = count_written * phases.len() as f64;
        #[expect(clippy::cast_precision_loss, reason = "100,000")]
        if total > MOST_PHASES as f64 {
            let message = format!("the profile has at least {total:.0} phases when written out, and {MOST_PHASES} is the most");
            self.error(&count.spot, "too-many-phases", message, "repeat less");
            return None;
        }
        #[expect(clippy::cast_possible_truncation, clippy::cast_sign_loss, reason = "a whole number from 1 to 100,000")]
        let count = count_written as usize;
        Some(std::iter::repeat_n(phases, count).flatten().collect())
    }
}

/// Whether any written phase is such a one.
fn any(list: &Node, wanted: &dyn Fn(&Table) -> bool) -> bool {
    list.list()
        .unwrap_or_default()
        .iter()
        .filter_map(Node::table)
        .any(|phase| wanted(phase) || phase.node("phases").is_some_and(|inner| any(inner, wanted)))
}
