//! What was found while running, in words.

use super::figures::{Figures, Units, clock, duration};
use crate::answers::{Finding, RunAnswers};
use crate::diagnostics::Notice;

/// The warnings of a run, in these units.
pub fn warnings_of_run(answers: &RunAnswers, units: Units) -> Vec<Notice> {
    answers.findings.iter().map(|finding| notice(finding, Figures::new(units, 0.0))).collect()
}

fn notice(finding: &Finding, figures: Figures) -> Notice {
    let of = |code, text, station: &str, layer: Option<&str>| Notice {
        code,
        text,
        station: Some(station.to_owned()),
        place: layer.map(str::to_owned),
    };
    match finding {
        Finding::TableLeft {
            station,
            layer,
            property,
            hot_end,
            by,
            lasting,
        } => {
            let property = property.replace('_', " ");
            let end = if *hot_end { "hot" } else { "cold" };
            let by = figures.rise(*by);
            let lasting = duration(*lasting, lasting * 1e-2);
            let text = format!("the table of {property} was left at its {end} end by up to {by}, for {lasting}; its last value was held there");
            of("property-table-left", text, station, Some(layer))
        }
        Finding::Melts { station, layer, at, first } => {
            let text = format!(
                "the melting point of {} is passed from {} on; nothing after that describes the wall",
                figures.limit(*at),
                clock(*first)
            );
            of("melts", text, station, Some(layer))
        }
        Finding::Decomposes { station, layer, at, first } => {
            let text = format!(
                "decomposes above {}, passed from {} on; its heat, its gas and its loss of substance are not in this model",
                figures.limit(*at),
                clock(*first)
            );
            of("decomposes", text, station, Some(layer))
        }
        Finding::LogHeld { station, lasting } => {
            let text = format!(
                "a burn is longer than the heating log: its last row was held for {}",
                duration(*lasting, lasting * 1e-2)
            );
            of("log-held", text, station, None)
        }
        Finding::Sideways { station, diffusion_length } => {
            let text = format!(
                "heat spreads sideways over {} by the end of the last burn, more than half the diameter: one-dimensional flow is doubtful beside a throat",
                figures.length(*diffusion_length)
            );
            of("sideways-heat", text, station, None)
        }
        Finding::Inaccurate { station, estimated_error } => {
            let text = format!(
                "the estimated numerical error of {} is above the promised tolerance",
                figures.estimate(*estimated_error)
            );
            of("inaccurate", text, station, None)
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_table_that_was_left_says_which_end_how_far_and_how_long() {
        let finding = Finding::TableLeft {
            station: "throat".into(),
            layer: "liner".into(),
            property: "heat_capacity",
            hot_end: true,
            by: 31.04,
            lasting: 2.5,
        };
        let notice = notice(&finding, Figures::new(Units::Si, 0.0));
        assert_eq!(notice.code, "property-table-left");
        assert_eq!((notice.station.as_deref(), notice.place.as_deref()), (Some("throat"), Some("liner")));
        assert_eq!(
            notice.text,
            "the table of heat capacity was left at its hot end by up to 31.1 K, for 2.5 s; its last value was held there"
        );
    }

    #[test]
    fn a_melting_point_reads_in_the_asked_units() {
        let finding = Finding::Melts {
            station: "throat".into(),
            layer: "liner".into(),
            at: 1357.77,
            first: 3.2,
        };
        assert!(
            notice(&finding, Figures::new(Units::Si, 0.0))
                .text
                .contains("1084.62 °C is passed from 3.2 s on")
        );
        assert!(notice(&finding, Figures::new(Units::Us, 0.0)).text.contains("1984.31 °F"));
    }
}
