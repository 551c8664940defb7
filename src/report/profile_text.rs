//! The phases of a profile in a few words, however many they are.

use super::figures::{given_duration, trimmed};
use crate::answers::PhaseCheck;

/// Groups longer than this are not looked for.
const LONGEST_GROUP: usize = 8;

/// The phases in order; groups that repeat are written once, with their count.
pub(super) fn phases_text(phases: &[PhaseCheck]) -> String {
    let words: Vec<String> = phases.iter().map(phase_text).collect();
    let mut parts = Vec::new();
    let mut at = 0;
    while at < words.len() {
        let (group, count) = repeated(&words[at..]);
        let text = words[at..at + group].join(", ");
        parts.push(match count {
            1 => text,
            _ if group == 1 => format!("{count} × {text}"),
            _ => format!("{count} × ({text})"),
        });
        at += group * count;
    }
    parts.join(", ")
}

/// The group at the start that, repeated, covers most: its length and count; a single phase where nothing repeats.
fn repeated(words: &[String]) -> (usize, usize) {
    let mut best = (1, 1);
    for group in 1..=LONGEST_GROUP.min(words.len() / 2) {
        let count = words.chunks_exact(group).take_while(|chunk| *chunk == &words[..group]).count();
        if count > 1 && group * count > best.0 * best.1 {
            best = (group, count);
        }
    }
    best
}

fn phase_text(phase: &PhaseCheck) -> String {
    let mut text = format!("{} {}", phase.kind.word(), given_duration(phase.duration));
    let mut extra = Vec::new();
    if phase.level != 1.0 {
        extra.push(format!("level {}", trimmed(phase.level, 4)));
    }
    if phase.ramp > 0.0 {
        extra.push(format!("ramp {}", given_duration(phase.ramp)));
    }
    if phase.tail > 0.0 {
        extra.push(format!("tail {}", given_duration(phase.tail)));
    }
    if phase.purge {
        extra.push("purge".into());
    }
    if !extra.is_empty() {
        text.push_str(&format!(" ({})", extra.join(", ")));
    }
    text
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::report::sample;

    #[test]
    fn repeats_are_written_once() {
        assert_eq!(
            phases_text(&sample::check().phases),
            "burn 2 s (ramp 0.1 s, tail 0.1 s), 40 × (hold 4 s, burn 1 s), shutdown 2 h (purge)"
        );
    }

    #[test]
    fn a_profile_without_repeats_is_listed() {
        let phases = sample::check().phases;
        assert_eq!(phases_text(&phases[..2]), "burn 2 s (ramp 0.1 s, tail 0.1 s), hold 4 s");
        assert_eq!(phases_text(&[]), "");
    }
}
