//! A small curve as text, in dots of two by four to a letter (Braille patterns, Unicode block 2800).

use crate::model::{Kelvin, Table};

/// Letters across.
const COLUMNS: usize = 48;
/// Letters up.
const ROWS: usize = 5;
/// Dots of a letter, left and right, from the top.
const DOTS: [[u32; 4]; 2] = [[0x01, 0x02, 0x04, 0x40], [0x08, 0x10, 0x20, 0x80]];
const EMPTY: u32 = 0x2800;

/// The lines of a curve between two temperatures, from zero at the bottom to `top`.
pub(super) fn curve(table: &Table, (from, to): (Kelvin, Kelvin), top: f64) -> Vec<String> {
    let mut letters = [[EMPTY; COLUMNS]; ROWS];
    let (across, up) = (COLUMNS * 2, ROWS * 4);
    for column in 0..across {
        let kelvin = |column: usize| from + (to - from) * column as f64 / across as f64;
        let (low, high) = reach(table, kelvin(column), kelvin(column + 1));
        for dot in height(low, top, up)..=height(high, top, up) {
            let row = up - 1 - dot;
            letters[row / 4][column / 2] |= DOTS[column % 2][row % 4];
        }
    }
    letters
        .iter()
        .map(|row| row.iter().map(|&letter| char::from_u32(letter).unwrap_or(' ')).collect())
        .collect()
}

/// The lowest and highest value between two temperatures.
fn reach(table: &Table, from: Kelvin, to: Kelvin) -> (f64, f64) {
    let inside = table.points().iter().filter(|point| (from..=to).contains(&point.0)).map(|point| point.1);
    let ends = [table.value(from), table.value(to)];
    let values = inside.chain(ends);
    values.fold((f64::INFINITY, f64::NEG_INFINITY), |(low, high), value| (low.min(value), high.max(value)))
}

#[expect(
    clippy::cast_possible_truncation,
    clippy::cast_sign_loss,
    reason = "a share of a few dots, held between the first and the last"
)]
fn height(value: f64, top: f64, up: usize) -> usize {
    let share = (value / top).clamp(0.0, 1.0);
    (share * (up - 1) as f64).round() as usize
}

#[cfg(test)]
mod tests {
    use super::*;
    use uom::si::f64::{Ratio, ThermodynamicTemperature};
    use uom::si::ratio::ratio;
    use uom::si::thermodynamic_temperature::kelvin;

    #[test]
    fn a_rise_goes_from_the_lower_left_to_the_upper_right_and_a_spike_is_not_missed() {
        let at = |temperature: f64, value: f64| (ThermodynamicTemperature::new::<kelvin>(temperature), Ratio::new::<ratio>(value));
        let table = Table::new(&[at(300.0, 0.0), at(900.0, 10.0)]).expect("a table");
        let lines = curve(&table, (300.0, 900.0), 10.0);
        assert_eq!((lines.len(), lines[0].chars().count()), (ROWS, COLUMNS));
        assert!(lines[ROWS - 1].starts_with('⡠') || lines[ROWS - 1].starts_with('⣀'), "{lines:#?}");
        assert!(lines[0].ends_with(['⠉', '⠊', '⠁', '⠋']), "{lines:#?}");
        assert!(lines[0].starts_with('\u{2800}'));
        let spike = Table::new(&[at(300.0, 1.0), at(600.0, 1.0), at(600.5, 10.0), at(601.0, 1.0), at(900.0, 1.0)]).expect("a table");
        let lines = curve(&spike, (300.0, 900.0), 10.0);
        assert!(lines[0].chars().any(|letter| letter != '\u{2800}'), "{lines:#?}");
    }
}
