//! Burn thresholds of skin on hot surfaces.

/// A threshold and what it stands for.
#[derive(Clone, Debug, PartialEq)]
pub(super) struct Threshold {
    pub kelvin: f64,
    pub meaning: String,
}

/// The default wait comes below this, K: 48 °C, the threshold for contacts up to 10 min, the same for every surface (ISO 13732-1:2006, Table 1).
pub(super) const DEFAULT_BELOW: f64 = 48.0 + 273.15;
/// What it stands for.
pub(super) const DEFAULT_MEANING: &str = "bare skin up to 10 min, ISO 13732-1";

/// Contact times of the table, s, and their names.
const CONTACTS: [(f64, &str); 5] = [(1.0, "1 s"), (10.0, "10 s"), (60.0, "1 min"), (600.0, "10 min"), (28_800.0, "8 h")];

/// Burn thresholds in °C, lower ends, after ISO 13732-1:2006: Table 1 for 1 min and longer, the curves for 1 s and 10 s. All FROM MEMORY of the
/// standard (the curves are known to ± 3 K); mend them by a copy of it. For coated metal at 1 s the standard adds some 2 K for a thin lacquer and
/// more for thicker coats; the bare metal's value stands here, on the safe side.
const THRESHOLDS: [(&str, &str, [f64; 5]); 5] = [
    ("bare-metal", "bare metal", [65.0, 55.0, 51.0, 48.0, 43.0]),
    ("coated-metal", "coated metal", [65.0, 55.0, 51.0, 48.0, 43.0]),
    ("ceramic", "ceramic", [80.0, 66.0, 56.0, 48.0, 43.0]),
    ("plastic", "plastic", [85.0, 71.0, 60.0, 48.0, 43.0]),
    ("wood", "wood", [110.0, 89.0, 60.0, 48.0, 43.0]),
];

/// The threshold for a contact of so many seconds; between two times of the table the longer one's. `None` outside 1 s … 8 h or for an unknown surface.
pub(super) fn threshold(contact: f64, surface: &str) -> Option<Threshold> {
    // A hair of grace, for times that are written in other units.
    let grace = 1.0 - 1e-9;
    if contact < CONTACTS[0].0 * grace {
        return None;
    }
    let index = CONTACTS.iter().position(|(seconds, _)| contact * grace <= *seconds)?;
    let (_, words, values) = THRESHOLDS.iter().find(|row| row.0 == surface)?;
    Some(Threshold {
        kelvin: values.get(index)? + 273.15,
        meaning: format!("bare skin up to {} on {words}, ISO 13732-1", CONTACTS.get(index)?.1),
    })
}

#[cfg(test)]
mod tests {
    use super::*;

    /// IEC 62368-1 touch limits TS1, which that standard derives from ISO 13732-1 (metal 51 for 10 s to 1 min, 48 above; glass 56, plastic 60).
    #[test]
    fn long_contacts_agree_with_iec_62368_1() {
        for (surface, celsius) in [("bare-metal", 51.0), ("ceramic", 56.0), ("plastic", 60.0), ("wood", 60.0)] {
            assert_eq!(threshold(30.0, surface).map(|found| found.kelvin), Some(celsius + 273.15), "{surface}");
            assert_eq!(threshold(600.0, surface).map(|found| found.kelvin), Some(48.0 + 273.15), "{surface}");
        }
        // For short contacts its limits lie above: ours are lower ends.
        for (surface, celsius) in [("bare-metal", 70.0), ("ceramic", 85.0), ("plastic", 94.0), ("wood", 140.0)] {
            assert!(threshold(1.0, surface).is_some_and(|found| found.kelvin < celsius + 273.15), "{surface}");
        }
    }

    #[test]
    fn between_two_times_the_longer_one_counts() {
        let celsius = |contact| threshold(contact, "bare-metal").map(|found| found.kelvin - 273.15).map(f64::round);
        assert_eq!(celsius(1.0), Some(65.0));
        assert_eq!(celsius(1.01), Some(55.0));
        assert_eq!(celsius(61.0), Some(48.0));
        assert_eq!(celsius(28_800.0), Some(43.0));
        // Long contacts are alike on every surface: heat has time to come through (ISO 13732-1:2006, Table 1, from memory).
        for surface in crate::case::keys::TOUCH_SURFACES {
            let long = |contact| threshold(contact, surface).map(|found| (found.kelvin - 273.15).round());
            assert_eq!((long(600.0), long(28_800.0)), (Some(48.0), Some(43.0)), "{surface}");
            assert!(long(1.0) > long(10.0) && long(10.0) > long(60.0) && long(60.0) > long(600.0), "{surface}");
        }
        assert_eq!(celsius(0.5), None);
        assert_eq!(celsius(30_000.0), None);
    }
}
