//! Numbers as a person reads them: rounded to the safe side, with no more digits than the error estimate supports.

use crate::model::{Kelvin, KelvinDifference, Metres, Seconds};

/// What the terminal shows; files stay in SI.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq)]
pub enum Units {
    /// °C, mm.
    #[default]
    Si,
    /// °F, in.
    Us,
}

/// Which way a shown number may differ from the computed one.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum Toward {
    /// Peaks, rises, waits.
    Larger,
    /// Margins, limits.
    Smaller,
}

/// The step of shown clocks and waits: from these, the smallest that is not finer than what is known.
const TIME_STEPS: [Seconds; 13] = [0.001, 0.01, 0.1, 1.0, 5.0, 10.0, 30.0, 60.0, 300.0, 600.0, 1800.0, 3600.0, 36_000.0];

/// How the numbers of one station are shown.
#[derive(Clone, Copy, Debug)]
pub(super) struct Figures {
    units: Units,
    /// What the station's temperatures are known to.
    error: KelvinDifference,
}

impl Figures {
    /// Shows temperatures that are known to `error`.
    pub(super) fn new(units: Units, error: KelvinDifference) -> Self {
        Self { units, error }
    }

    /// A computed temperature: never lower than it is.
    pub(super) fn peak(self, temperature: Kelvin) -> String {
        let (value, unit) = self.scale(temperature);
        format!("{} {unit}", self.stepped(value, Toward::Larger))
    }

    /// A margin: never larger than it is. In kelvin or Fahrenheit degrees.
    pub(super) fn margin(self, difference: KelvinDifference) -> String {
        self.difference(difference, Toward::Smaller)
    }

    /// A rise, an excess or an error: never smaller than it is. In kelvin or Fahrenheit degrees.
    pub(super) fn rise(self, difference: KelvinDifference) -> String {
        self.difference(difference, Toward::Larger)
    }

    /// A difference from a reading: its size never smaller than it is, with its sign.
    pub(super) fn off(self, difference: KelvinDifference) -> String {
        let size = self.difference(difference.abs(), Toward::Larger);
        if difference < 0.0 { format!("-{size}") } else { format!("+{size}") }
    }

    /// A temperature that was given, such as a limit: as it was written, to a hundredth, never higher.
    pub(super) fn given(self, temperature: Kelvin) -> String {
        let (value, unit) = self.scale(temperature);
        format!("{} {unit}", trimmed(rounded(value, 0.01, Toward::Smaller), 2))
    }

    /// A limit or a melting point. One that was given in whole kelvin is not known to a hundredth of a degree: it is shown to the degree, never higher.
    pub(super) fn limit(self, temperature: Kelvin) -> String {
        let (value, unit) = self.scale(temperature);
        let whole = |value: f64| (value - value.round()).abs() < 1e-6;
        if whole(temperature) && !whole(value) {
            return format!("{:.0} {unit}", rounded(value, 1.0, Toward::Smaller));
        }
        self.given(temperature)
    }

    /// A temperature at which something was measured, to the nearest degree.
    pub(super) fn near(self, temperature: Kelvin) -> String {
        let (value, unit) = self.scale(temperature);
        format!("{} {unit}", trimmed(value, 0))
    }

    /// A difference that was given or found by counting, to two figures, never smaller: error estimates.
    pub(super) fn estimate(self, difference: KelvinDifference) -> String {
        let (value, unit) = match self.units {
            Units::Si => (difference, "K"),
            Units::Us => (difference * 1.8, "°F"),
        };
        format!("{} {unit}", significant(value, 2))
    }

    /// The difference that counts as level.
    pub(super) fn one_kelvin(self) -> &'static str {
        match self.units {
            Units::Si => "1 K",
            Units::Us => "1.8 °F",
        }
    }

    /// A depth or thickness, to a hundredth of a millimetre or a ten-thousandth of an inch.
    pub(super) fn length(self, length: Metres) -> String {
        match self.units {
            Units::Si => format!("{} mm", trimmed(length * 1e3, 3)),
            Units::Us => format!("{} in", trimmed(length / 0.0254, 4)),
        }
    }

    /// A wait: never shorter than it is, and no finer than the temperature error allows, at `slope` s per K.
    pub(super) fn wait(self, wait: Seconds, slope: f64) -> String {
        let known = (self.error * slope).abs().max(wait.abs() * 1e-3);
        duration(wait, if known.is_finite() { known } else { wait })
    }

    /// How much longer for each degree lower.
    pub(super) fn slope(self, slope: f64) -> String {
        match self.units {
            Units::Si => format!("{} for each K lower", duration(slope, slope * 1e-2)),
            Units::Us => format!("{} for each °F lower", duration(slope / 1.8, slope * 1e-2)),
        }
    }

    fn difference(self, difference: KelvinDifference, toward: Toward) -> String {
        let (value, unit) = match self.units {
            Units::Si => (difference, "K"),
            Units::Us => (difference * 1.8, "°F"),
        };
        format!("{} {unit}", self.stepped(value, toward))
    }

    fn scale(self, temperature: Kelvin) -> (f64, &'static str) {
        match self.units {
            Units::Si => (temperature - 273.15, "°C"),
            Units::Us => (temperature * 1.8 - 459.67, "°F"),
        }
    }

    /// A temperature or difference in shown degrees, with tenths at most and with fewer digits where the error is larger.
    fn stepped(self, value: f64, toward: Toward) -> String {
        let error = match self.units {
            Units::Si => self.error,
            Units::Us => self.error * 1.8,
        };
        // A small grace, so that an estimate of 0.1 K less a rounding error of the machine still shows tenths.
        let power = if error.is_finite() && error > 0.1 {
            (error.log10() - 1e-9).ceil()
        } else {
            -1.0
        };
        let decimals = if power < 0.0 { 1 } else { 0 };
        format!("{:.decimals$}", rounded(value, 10f64.powf(power), toward))
    }
}

/// `value` on a multiple of `step`, toward one side. A billionth of a step is forgiven: conversions of units leave that much behind.
pub(super) fn rounded(value: f64, step: f64, toward: Toward) -> f64 {
    let count = value / step;
    let grace = 1e-9 * count.abs().max(1.0);
    let count = match toward {
        Toward::Larger => (count - grace).ceil(),
        Toward::Smaller => (count + grace).floor(),
    };
    // Adding zero turns −0 into 0.
    if step < 1.0 {
        count / (1.0 / step).round() + 0.0
    } else {
        count * step + 0.0
    }
}

/// A number to so many decimals at most, without trailing zeros.
pub(super) fn trimmed(value: f64, decimals: usize) -> String {
    let text = format!("{value:.decimals$}");
    if !text.contains('.') {
        return text;
    }
    let text = text.trim_end_matches('0').trim_end_matches('.');
    if text == "-0" { "0".to_owned() } else { text.to_owned() }
}

/// A number to so many significant figures, away from zero.
pub(super) fn significant(value: f64, figures: i32) -> String {
    if value == 0.0 || !value.is_finite() {
        return format!("{value}");
    }
    let power = value.abs().log10().floor() as i32 - (figures - 1);
    let step = 10f64.powi(power);
    let shown = rounded(value.abs(), step, Toward::Larger).copysign(value);
    if (1e-4..1e7).contains(&value.abs()) {
        trimmed(shown, usize::try_from(-power).unwrap_or(0))
    } else {
        format!("{value:.0e}")
    }
}

/// A number to so many significant figures, to nearest: an input is shown, not judged.
pub(super) fn nearest(value: f64, figures: usize) -> String {
    let magnitude = value.abs();
    let last = figures.saturating_sub(1);
    if magnitude != 0.0 && !(1e-4..1e7).contains(&magnitude) {
        let text = format!("{value:.last$e}");
        let (digits, power) = text.split_once('e').unwrap_or((&text, "0"));
        return format!("{}e{power}", digits.trim_end_matches('0').trim_end_matches('.'));
    }
    // The power of ten of the first digit, after rounding.
    let power = format!("{value:.last$e}")
        .split_once('e')
        .and_then(|(_, power)| power.parse::<i32>().ok());
    let decimals = i32::try_from(last).unwrap_or(i32::MAX).saturating_sub(power.unwrap_or(0));
    trimmed(value, usize::try_from(decimals).unwrap_or(0))
}

/// A share as a percentage, to the next whole one: nearer to the end than it is.
pub(super) fn percent(share: f64) -> String {
    format!("{:.0} %", rounded(share * 100.0, 1.0, Toward::Larger))
}

/// A clock, to three figures, never earlier than it is.
pub(super) fn clock(time: Seconds) -> String {
    duration(time, time.abs() * 1e-3)
}

/// A duration that was given: as it was written.
pub(super) fn given_duration(time: Seconds) -> String {
    in_parts(time, 0.001)
}

/// A duration or a clock, never smaller than it is, on a step that is not finer than `known`.
pub(super) fn duration(time: Seconds, known: Seconds) -> String {
    let step = step_for(known);
    in_parts(rounded(time, step, Toward::Larger), step)
}

/// A duration that is bad when short, never larger than it is, to three figures.
pub(super) fn duration_down(time: Seconds) -> String {
    let step = step_for(time.abs() * 1e-3);
    in_parts(rounded(time, step, Toward::Smaller), step)
}

fn step_for(known: Seconds) -> Seconds {
    let last = TIME_STEPS[TIME_STEPS.len() - 1];
    TIME_STEPS.into_iter().find(|&step| step >= known * (1.0 - 1e-9)).unwrap_or(last)
}

/// Seconds below two minutes; above, hours, minutes and whole seconds without the parts that are zero.
fn in_parts(time: Seconds, step: Seconds) -> String {
    if !time.is_finite() || time.abs() < 120.0 {
        return format!("{} s", trimmed(time, if step < 1.0 { 3 } else { 0 }));
    }
    let hours = (time / 3600.0).trunc();
    let minutes = ((time - hours * 3600.0) / 60.0).trunc();
    let seconds = time - hours * 3600.0 - minutes * 60.0;
    let seconds = trimmed(seconds, if step < 1.0 { 3 } else { 0 });
    let mut parts = Vec::new();
    if hours != 0.0 {
        parts.push(format!("{hours:.0} h"));
    }
    if minutes != 0.0 {
        parts.push(format!("{minutes:.0} min"));
    }
    if seconds != "0" {
        parts.push(format!("{seconds} s"));
    }
    parts.join(" ")
}

#[cfg(test)]
mod tests {
    use super::*;

    fn si(error: f64) -> Figures {
        Figures::new(Units::Si, error)
    }

    #[test]
    fn peaks_go_up_and_margins_down() {
        assert_eq!(si(0.03).peak(273.15 + 225.91), "226.0 °C");
        assert_eq!(si(0.03).margin(24.09), "24.0 K");
        assert_eq!(si(0.03).margin(-0.01), "-0.1 K");
        assert_eq!(si(0.03).margin(0.04), "0.0 K");
        assert_eq!(si(0.03).rise(0.04), "0.1 K");
        assert_eq!(si(0.03).peak(273.15 - 10.04), "-10.0 °C");
    }

    #[test]
    fn a_value_on_a_step_stays_there() {
        for tenths in 0..20_000 {
            let celsius = f64::from(tenths) / 10.0;
            assert_eq!(si(0.03).peak(celsius + 273.15), format!("{celsius:.1} °C"));
            assert_eq!(si(0.03).margin(celsius), format!("{celsius:.1} K"));
        }
    }

    #[test]
    fn digits_follow_the_error() {
        assert_eq!(si(0.1).peak(300.0), "26.9 °C");
        assert_eq!(si(0.11).peak(300.0), "27 °C");
        assert_eq!(si(1.5).peak(300.0), "30 °C");
        assert_eq!(si(1.5).margin(24.1), "20 K");
        assert_eq!(Figures::new(Units::Us, 0.08).peak(300.0), "81 °F");
    }

    #[test]
    fn us_units_convert_temperatures_and_differences() {
        let us = Figures::new(Units::Us, 0.01);
        assert_eq!(us.peak(273.15 + 100.0), "212.0 °F");
        assert_eq!(us.margin(10.0), "18.0 °F");
        assert_eq!(us.given(273.15 + 48.0), "118.4 °F");
        assert_eq!(us.length(0.0254), "1 in");
    }

    #[test]
    fn given_values_come_back_as_written() {
        assert_eq!(si(0.03).given(523.15), "250 °C");
        // 200 °F
        assert_eq!(si(0.03).given((200.0 + 459.67) / 1.8), "93.33 °C");
        assert_eq!(Figures::new(Units::Us, 0.03).given((200.0 + 459.67) / 1.8), "200 °F");
        assert_eq!(given_duration(0.1), "0.1 s");
        assert_eq!(given_duration(7200.0), "2 h");
        assert_eq!(given_duration(130.25), "2 min 10.25 s");
    }

    #[test]
    fn a_limit_in_whole_kelvin_shows_whole_degrees_and_never_higher() {
        assert_eq!(si(0.0).limit(1473.0), "1199 °C");
        assert_eq!(Figures::new(Units::Us, 0.0).limit(1473.0), "2191 °F");
        assert_eq!(si(0.0).limit(523.15), "250 °C");
        assert_eq!(si(0.0).limit(1357.77), "1084.62 °C");
        // 200 °F and 480 °F
        assert_eq!(si(0.0).limit((200.0 + 459.67) / 1.8), "93.33 °C");
        assert_eq!(Figures::new(Units::Us, 0.0).limit((480.0 + 459.67) / 1.8), "480 °F");
    }

    #[test]
    fn inputs_keep_their_figures() {
        for (value, text) in [
            (101_325.0, "101325"),
            (0.3, "0.3"),
            (5.2e7, "5.2e7"),
            (1.0, "1"),
            (2.5e-6, "2.5e-6"),
            (0.0, "0"),
            (1234.5678, "1234.57"),
            (1.0 / 11.0, "0.0909091"),
            (0.99999999, "1"),
        ] {
            assert_eq!(nearest(value, 6), text);
        }
        assert_eq!((nearest(53.334, 3), nearest(8933.4, 3)), ("53.3".to_owned(), "8933".to_owned()));
    }

    #[test]
    fn waits_go_up_on_a_step_that_the_error_supports() {
        // 0.03 K × 310 s/K = 9.3 s: tens of seconds.
        assert_eq!(si(0.03).wait(5312.0, 310.0), "1 h 28 min 40 s");
        assert_eq!(si(0.03).wait(5310.0, 310.0), "1 h 28 min 30 s");
        assert_eq!(si(0.03).wait(5312.0, f64::NAN), "1 h 28 min 40 s");
        assert_eq!(si(0.03).wait(5312.0, f64::INFINITY), "10 h");
        assert_eq!(si(0.03).wait(3599.5, 1.0), "1 h");
        assert_eq!(si(0.03).wait(0.0, 1.0), "0 s");
    }

    #[test]
    fn shown_waits_are_never_shorter_and_margins_never_larger() {
        for index in 1..5000 {
            let wait = 0.37 * f64::from(index).powf(1.4);
            let shown = si(0.03).wait(wait, 100.0);
            assert!(seconds(&shown) >= wait * (1.0 - 1e-8), "{shown} for {wait}");
            let down = duration_down(wait);
            assert!(seconds(&down) <= wait * (1.0 + 1e-8), "{down} for {wait}");
        }
    }

    fn seconds(text: &str) -> f64 {
        let words: Vec<&str> = text.split(' ').collect();
        words
            .chunks(2)
            .map(|pair| {
                let scale = match pair[1] {
                    "h" => 3600.0,
                    "min" => 60.0,
                    _ => 1.0,
                };
                pair[0].parse::<f64>().expect("a number") * scale
            })
            .sum()
    }

    #[test]
    fn clocks_and_shares() {
        assert_eq!(clock(2.0), "2 s");
        assert_eq!(clock(2.0004), "2.01 s");
        assert_eq!(clock(500.2), "8 min 21 s");
        assert_eq!(duration_down(41.29), "41.2 s");
        assert_eq!(percent(0.8301), "84 %");
        assert_eq!(significant(0.0312, 2), "0.032");
        assert_eq!(significant(96.91, 3), "97");
        assert_eq!(significant(2.1e-12, 1), "2e-12");
        assert_eq!(trimmed(-0.0001, 2), "0");
    }
}
