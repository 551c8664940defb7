//! Text to SI numbers.

use super::{Dimension, Factor, Kind, UnitError, UnitProblem, nearest_factor};
use std::ops::Range;

/// Reads a number and its unit: `"12 mm"`, `"250degC"`, `"3.5 Btu/in2/s/degF"`; the SI value.
///
/// # Errors
/// When it is no number, has no unit, an unknown one, or one of something else than is due.
pub fn read(text: &str, due: Kind) -> Result<f64, UnitError> {
    let fail = |problem, range| Err(UnitError { problem, range, due });
    let (number, rest) = number(text, due)?;
    let unit = trimmed(text, rest..text.len());
    if unit.is_empty() {
        return if due == Kind::Number {
            Ok(number)
        } else {
            fail(UnitProblem::NoUnit(due), trimmed(text, 0..text.len()))
        };
    }
    let parsed = parse_unit(text, unit.clone(), due)?;
    if parsed.dimension != due.dimension() {
        return fail(
            UnitProblem::OtherDimension {
                unit: text[unit.clone()].to_owned(),
                found: Kind::of(parsed.dimension),
                due,
            },
            unit,
        );
    }
    let offset = if due == Kind::Temperature { parsed.lone_offset } else { 0.0 };
    let value = (number + offset) * parsed.scale;
    if value.is_finite() {
        Ok(value)
    } else {
        fail(UnitProblem::TooLarge(text[..rest].trim().to_owned()), trimmed(text, 0..rest))
    }
}

/// Reads how far an input may stray: a share of it in per cent, or an absolute value in its own unit. `true`: a share.
///
/// # Errors
/// As [`read`].
pub fn read_spread(text: &str, due: Kind) -> Result<(f64, bool), UnitError> {
    let (value, rest) = number(text, due)?;
    if text[rest..].trim() == "%" {
        return Ok((value / 100.0, true));
    }
    read(text, due).map(|value| (value, false))
}

/// The number that a text begins with, and where it ends.
fn number(text: &str, due: Kind) -> Result<(f64, usize), UnitError> {
    let start = text.len() - text.trim_start().len();
    let bytes = text.as_bytes();
    let digits = |mut at: usize| {
        while bytes.get(at).is_some_and(u8::is_ascii_digit) {
            at += 1;
        }
        at
    };
    let sign = |at: usize| if matches!(bytes.get(at), Some(b'+' | b'-')) { at + 1 } else { at };
    let mut end = digits(sign(start));
    if bytes.get(end) == Some(&b'.') && bytes.get(end + 1).is_some_and(u8::is_ascii_digit) {
        end = digits(end + 1);
    }
    if matches!(bytes.get(end), Some(b'e' | b'E')) && bytes.get(sign(end + 1)).is_some_and(u8::is_ascii_digit) {
        end = digits(sign(end + 1));
    }
    let blamed = || {
        let word = text[start..].find(char::is_whitespace).map_or(text.len(), |length| start + length);
        start..word
    };
    // A comma, a second point or an underscore right after the digits belongs to the number, wrongly written.
    let goes_on = matches!(bytes.get(end), Some(b',' | b'.' | b'_'));
    match text[start..end].parse::<f64>() {
        Ok(value) if !goes_on && value.is_finite() => Ok((value, end)),
        Ok(_) if !goes_on => Err(UnitError {
            problem: UnitProblem::TooLarge(text[start..end].to_owned()),
            range: start..end,
            due,
        }),
        _ => Err(UnitError {
            problem: UnitProblem::NoNumber(text[blamed()].to_owned()),
            range: blamed(),
            due,
        }),
    }
}

struct Unit {
    scale: f64,
    dimension: Dimension,
    /// The offset of a lone degC or degF.
    lone_offset: f64,
}

fn parse_unit(text: &str, range: Range<usize>, due: Kind) -> Result<Unit, UnitError> {
    let mut unit = Unit {
        scale: 1.0,
        dimension: Dimension::default(),
        lone_offset: 0.0,
    };
    let mut start = range.start;
    let mut direction = 1;
    let mut factors = 0;
    loop {
        let end = text[start..range.end].find(['.', '/']).map_or(range.end, |length| start + length);
        let (factor, exponent) = parse_factor(text, start..end, &range, due)?;
        let power = direction * exponent;
        unit.scale *= factor.scale.powi(power);
        unit.dimension = unit.dimension.times(factor.dimension, power);
        factors += 1;
        unit.lone_offset = if factors == 1 && power == 1 { factor.offset } else { 0.0 };
        if end == range.end {
            return Ok(unit);
        }
        direction = if text.as_bytes()[end] == b'/' { -1 } else { 1 };
        start = end + 1;
    }
}

fn parse_factor(text: &str, range: Range<usize>, whole: &Range<usize>, due: Kind) -> Result<(&'static Factor, i32), UnitError> {
    let fail = |problem, range| Err(UnitError { problem, range, due });
    let spelling = |range: Range<usize>| {
        let range = if range.is_empty() { whole.clone() } else { range };
        fail(UnitProblem::Spelling(text[range.clone()].to_owned()), range)
    };
    let part = trimmed(text, range);
    let word = &text[part.clone()];
    let name_length = word
        .find(|letter: char| !(letter.is_alphabetic() || letter == '%' || letter == '°'))
        .unwrap_or(word.len());
    let (name, exponent) = word.split_at(name_length);
    if name.is_empty() {
        return spelling(part);
    }
    let named = part.start..part.start + name_length;
    if name.eq_ignore_ascii_case("psig") || name.eq_ignore_ascii_case("barg") {
        return fail(UnitProblem::Gauge, named);
    }
    let Some(factor) = Factor::named(name) else {
        return fail(
            UnitProblem::UnknownUnit {
                name: name.to_owned(),
                nearest: nearest_factor(name),
            },
            named,
        );
    };
    if exponent.is_empty() {
        return Ok((factor, 1));
    }
    match exponent.parse::<i32>() {
        Ok(power) if (1..=9).contains(&power.abs()) && !exponent.starts_with('+') => Ok((factor, power)),
        _ => spelling(part),
    }
}

/// The range without white space at its ends.
fn trimmed(text: &str, range: Range<usize>) -> Range<usize> {
    let part = &text[range.clone()];
    let start = range.start + (part.len() - part.trim_start().len());
    start..start + part.trim().len()
}

#[cfg(test)]
mod tests {
    use super::*;

    fn close(text: &str, due: Kind, expected: f64) {
        match read(text, due) {
            Ok(value) => assert!((value - expected).abs() <= 1e-6 * expected.abs(), "{text}: {value}, not {expected}"),
            Err(error) => panic!("{text}: {error}"),
        }
    }

    /// NIST SP 811 (2008), Appendix B.8 and B.9: the factors as printed there (seven digits).
    #[test]
    fn factors_of_nist_sp_811() {
        close("1 Btu/h/ft2", Kind::HeatFlux, 3.154_591);
        close("1 Btu/s/ft2", Kind::HeatFlux, 1.135_653e4);
        close("1 Btu/h/ft2/degF", Kind::HeatTransferCoefficient, 5.678_263);
        close("1 Btu/s/ft2/degF", Kind::HeatTransferCoefficient, 2.044_175e4);
        close("1 Btu/h/ft/degF", Kind::Conductivity, 1.730_735);
        close("1 Btu.in/h/ft2/degF", Kind::Conductivity, 1.442_279e-1);
        close("1 Btu/lb/degF", Kind::HeatCapacity, 4186.8);
        close("1 Btu/lb/degR", Kind::HeatCapacity, 4186.8);
        close("1 lb/ft3", Kind::Density, 1.601_846e1);
        close("1 lbm/in3", Kind::Density, 2.767_990e4);
        close("1 psi", Kind::Pressure, 6.894_757e3);
        close("1 torr", Kind::Pressure, 1.333_224e2);
        close("1 mph", Kind::Velocity, 4.4704e-1);
        close("1 knot", Kind::Velocity, 5.144_444e-1);
        close("1 mil", Kind::Length, 2.54e-5);
        close("1 h.ft2.degF/Btu", Kind::Resistance, 1.761_102e-1);
    }

    #[test]
    fn temperatures_and_differences() {
        close("250 degC", Kind::Temperature, 523.15);
        close("-40F", Kind::Temperature, 233.15);
        close("-40 °C", Kind::Temperature, 233.15);
        close("491.67 degR", Kind::Temperature, 273.15);
        close("32 degF", Kind::Temperature, 273.15);
        close("18 degF", Kind::TemperatureDifference, 10.0);
        close("2.2 C", Kind::TemperatureDifference, 2.2);
    }

    #[test]
    fn the_space_is_optional_and_exponents_count() {
        close("3mm", Kind::Length, 3e-3);
        close(" 3.5e-2 m ", Kind::Length, 3.5e-2);
        close("2 cm2.K/W", Kind::Resistance, 2e-4);
        close("5 N/mm2", Kind::Pressure, 5e6);
        close("1 kg.m-3", Kind::Density, 1.0);
        close("20 %", Kind::Number, 0.2);
    }

    #[test]
    fn mistakes_point_at_their_characters() {
        let cases = [
            ("12", Kind::Length, "missing-unit", "12"),
            ("12 mn", Kind::Length, "unknown-unit", "mn"),
            ("12 inch", Kind::Length, "unknown-unit", "inch"),
            ("12 s", Kind::Length, "wrong-unit", "s"),
            ("5 W/m2/K", Kind::HeatFlux, "wrong-unit", "W/m2/K"),
            ("5 W/mm2/Kelvin", Kind::HeatTransferCoefficient, "unknown-unit", "Kelvin"),
            ("300 psig", Kind::Pressure, "gauge-pressure", "psig"),
            ("0,5 mm", Kind::Length, "bad-number", "0,5"),
            ("fast", Kind::Time, "bad-number", "fast"),
            ("", Kind::Time, "bad-number", ""),
            ("1e999 s", Kind::Time, "out-of-range", "1e999"),
            ("1e308 d", Kind::Time, "out-of-range", "1e308"),
            ("5 W/(m2.K)", Kind::HeatTransferCoefficient, "unknown-unit", "(m2"),
            ("5 W//m2", Kind::HeatFlux, "unknown-unit", "W//m2"),
            ("5 m²", Kind::Area, "unknown-unit", "m²"),
            ("5 m99999999999", Kind::Area, "unknown-unit", "m99999999999"),
            ("5 µm", Kind::Length, "unknown-unit", "µm"),
            ("5 日本", Kind::Length, "unknown-unit", "日本"),
        ];
        for (text, due, code, blamed) in cases {
            match read(text, due) {
                Ok(value) => panic!("{text} is read as {value}"),
                Err(error) => assert_eq!((error.code(), &text[error.range.clone()]), (code, blamed), "{text}"),
            }
        }
    }

    #[test]
    fn the_nearest_unit_is_named() {
        for (written, meant) in [
            ("inch", "in"),
            ("sec", "s"),
            ("MM", "mm"),
            ("kw", "kW"),
            ("BTU", "Btu"),
            ("degCC", "degC"),
            ("psib", "psi"),
        ] {
            assert_eq!(nearest_factor(written), Some(meant), "{written}");
        }
        assert_eq!(nearest_factor("xy"), None);
    }
}
