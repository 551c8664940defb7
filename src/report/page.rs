//! Lines of a page: wrapped text and aligned tables within a fixed width, with styles as escape codes.

use anstyle::{AnsiColor, Style};
use textwrap::core::display_width;

/// Columns of every page.
pub(super) const WIDTH: usize = 100;

/// Headings.
pub(super) const BOLD: Style = Style::new().bold();
/// What is kept.
pub(super) const GOOD: Style = AnsiColor::Green.on_default();
/// What is doubtful.
pub(super) const DOUBT: Style = AnsiColor::Yellow.on_default().bold();
/// What is broken.
pub(super) const BAD: Style = AnsiColor::Red.on_default().bold();

/// Stands between a number and its unit while lines are broken; a plain space in the end, so that a person can search for "48 °C".
const BOUND: char = '\u{a0}';
/// Units that stay on their number's line.
const UNITS: [&str; 10] = ["°C", "°F", "K", "s", "min", "h", "%", "mm", "in", "MJ/m²"];

/// `text` in a style.
pub(super) fn styled(style: Style, text: &str) -> String {
    format!("{style}{text}{style:#}")
}

/// The same text, each unit bound to its number.
fn bound(text: &str) -> String {
    let mut bound = String::new();
    let mut words = text.split(' ').peekable();
    while let Some(word) = words.next() {
        bound.push_str(word);
        if let Some(next) = words.peek() {
            let number = word.ends_with(|letter: char| letter.is_ascii_digit());
            let unit = UNITS.contains(&next.trim_end_matches([')', ',', ';', '.', ':']));
            bound.push(if number && unit { BOUND } else { ' ' });
        }
    }
    bound
}

/// Lines under construction.
#[derive(Default)]
pub(super) struct Page {
    lines: Vec<String>,
}

impl Page {
    /// A paragraph, its later lines indented by `indent` too and by two more.
    pub(super) fn text(&mut self, indent: usize, text: &str) {
        let first = " ".repeat(indent);
        let rest = " ".repeat(indent + 2);
        let options = textwrap::Options::new(WIDTH)
            .initial_indent(&first)
            .subsequent_indent(&rest)
            .word_splitter(textwrap::WordSplitter::NoHyphenation);
        let text = bound(text);
        self.lines
            .extend(textwrap::wrap(&text, options).into_iter().map(|line| line.into_owned()));
    }

    /// A line that is to be copied, as it is.
    pub(super) fn line(&mut self, indent: usize, text: &str) {
        self.lines.push(format!("{:indent$}{text}", ""));
    }

    /// An empty line.
    pub(super) fn gap(&mut self) {
        self.lines.push(String::new());
    }

    /// The rows of a table, indented.
    pub(super) fn table(&mut self, indent: usize, table: &Table) {
        self.lines
            .extend(table.lines(WIDTH - indent).into_iter().map(|line| format!("{:indent$}{line}", "")));
    }

    /// The page as text, each line ended.
    pub(super) fn finish(self) -> String {
        let mut text = String::new();
        for line in self.lines {
            text.push_str(&line.trim_end().replace(BOUND, " "));
            text.push('\n');
        }
        text
    }
}

/// To which side a column's cells are pushed.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum Align {
    /// Words.
    Left,
    /// Numbers.
    Right,
}

/// A cell: its text, and how it is styled once it is padded.
pub(super) struct Cell {
    text: String,
    style: Style,
}

impl Cell {
    /// A styled cell.
    pub(super) fn styled(style: Style, text: impl Into<String>) -> Self {
        Self { text: text.into(), style }
    }
}

impl<T: Into<String>> From<T> for Cell {
    fn from(text: T) -> Self {
        Self::styled(Style::new(), text)
    }
}

/// A table without rules; columns are as wide as their widest cell.
pub(super) struct Table {
    columns: Vec<Align>,
    rows: Vec<Vec<Cell>>,
    whole: Option<usize>,
}

impl Table {
    /// An empty table of these columns.
    pub(super) fn new(columns: &[Align]) -> Self {
        Self {
            columns: columns.to_vec(),
            rows: Vec::new(),
            whole: None,
        }
    }

    /// The same table with one column that is never shortened: what a person copies.
    pub(super) fn keeping(mut self, column: usize) -> Self {
        self.whole = Some(column);
        self
    }

    /// One more row; missing cells are empty.
    pub(super) fn row<const N: usize>(&mut self, cells: [Cell; N]) {
        self.rows.push(cells.into_iter().collect());
    }

    /// Rows within `width`: where they don't fit, the widest column is shortened, its cells ending in `…`.
    fn lines(&self, width: usize) -> Vec<String> {
        const BETWEEN: usize = 2;
        // Below this a cell says nothing: better a line that is too long.
        const NARROWEST: usize = 8;
        let cell_width = |row: &Vec<Cell>, column: usize| row.get(column).map_or(0, |cell| display_width(&cell.text));
        let mut widths: Vec<usize> = (0..self.columns.len())
            .map(|column| self.rows.iter().map(|row| cell_width(row, column)).max().unwrap_or(0))
            .collect();
        let used = widths.iter().filter(|&&width| width > 0).count();
        while widths.iter().sum::<usize>() + BETWEEN * used.saturating_sub(1) > width {
            let mut candidates: Vec<&mut usize> = widths
                .iter_mut()
                .enumerate()
                .filter(|(column, _)| Some(*column) != self.whole)
                .map(|(_, width)| width)
                .collect();
            match candidates.iter_mut().max() {
                Some(widest) if **widest > NARROWEST => **widest -= 1,
                _ => break,
            }
        }
        let mut lines = Vec::new();
        for row in &self.rows {
            let mut cells = Vec::new();
            for ((cell, &align), &width) in row.iter().zip(&self.columns).zip(&widths) {
                if width > 0 {
                    cells.push(padded(cell, align, width));
                }
            }
            lines.push(cells.join(&" ".repeat(BETWEEN)));
        }
        lines
    }
}

fn padded(cell: &Cell, align: Align, width: usize) -> String {
    let text = shortened(&cell.text, width);
    let padding = " ".repeat(width.saturating_sub(display_width(&text)));
    let text = if cell.style == Style::new() { text } else { styled(cell.style, &text) };
    match align {
        Align::Left => text + &padding,
        Align::Right => padding + &text,
    }
}

/// `text` cut to a width; a cut one ends in `…`.
fn shortened(text: &str, width: usize) -> String {
    if display_width(text) <= width {
        return text.to_owned();
    }
    let mut cut = String::new();
    for letter in text.chars() {
        let mut longer = cut.clone();
        longer.push(letter);
        if display_width(&longer) + 1 > width {
            break;
        }
        cut = longer;
    }
    cut.push('…');
    cut
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::report::sample::plain;

    #[test]
    fn columns_line_up_whatever_the_style() {
        let mut table = Table::new(&[Align::Left, Align::Right]);
        table.row(["name".into(), "°C".into()]);
        table.row([Cell::styled(BAD, "x"), "1000.0".into()]);
        let lines: Vec<String> = table.lines(40).iter().map(|line| plain(line)).collect();
        assert_eq!(lines, ["name      °C", "x     1000.0"]);
    }

    #[test]
    fn a_long_cell_is_cut_to_the_width_and_says_so() {
        let mut table = Table::new(&[Align::Left, Align::Right]);
        table.row(["é".repeat(200).into(), "12 K".into()]);
        let line = &table.lines(40)[0];
        assert_eq!(display_width(line), 40);
        assert!(line.contains('…') && line.ends_with("12 K"));
    }

    #[test]
    fn a_number_is_not_parted_from_its_unit() {
        for filling in 0..12 {
            let mut page = Page::default();
            page.text(0, &format!("{} until 1 h 28 min (below 48 °C), 2 % there", "x".repeat(70 + filling)));
            let text = page.finish();
            assert!(text.lines().all(|line| !line.ends_with(|letter: char| letter.is_ascii_digit())), "{text}");
            assert!(!text.contains(BOUND));
        }
    }

    #[test]
    fn text_stays_within_the_page() {
        let mut page = Page::default();
        page.text(2, &"heat flows outwards ".repeat(20));
        let text = page.finish();
        assert!(text.lines().all(|line| display_width(line) <= WIDTH));
        assert!(text.lines().skip(1).all(|line| line.starts_with("    ")));
    }
}
