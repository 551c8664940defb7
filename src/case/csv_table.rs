//! CSV files beside a case: rows of fields that know their places, so that a mistake is shown at its line.

use super::findings::Findings;
use super::tree::Spot;
use crate::diagnostics::Diagnostic;

/// A file as read: the line of column names, and the rows.
pub(super) struct CsvTable {
    pub header: CsvRow,
    pub rows: Vec<CsvRow>,
}

/// One line.
pub(super) struct CsvRow {
    pub spot: Spot,
    pub fields: Vec<String>,
}

impl CsvTable {
    /// Reads a text that stands among the sources; `due` says which columns are due first.
    pub fn parse(source: usize, text: &str, due: &str, findings: &mut Findings) -> Option<Self> {
        let mut reader = csv::ReaderBuilder::new()
            .has_headers(false)
            .trim(csv::Trim::All)
            .flexible(true)
            .from_reader(text.as_bytes());
        let start = |position: Option<&csv::Position>| position.map_or(0, |position| usize::try_from(position.byte()).unwrap_or(usize::MAX));
        let mut rows = Vec::new();
        for record in reader.records() {
            match record {
                Ok(record) => rows.push(CsvRow {
                    spot: line_at(source, text, start(record.position())),
                    fields: record.iter().map(|field| field.trim_start_matches('\u{feff}').to_owned()).collect(),
                }),
                Err(error) => {
                    let found = Diagnostic::error("syntax", format!("not readable as CSV: {error}"));
                    findings.at(&line_at(source, text, start(error.position())), found);
                    return None;
                }
            }
        }
        if rows.len() < 2 {
            let found = Diagnostic::error("empty-list", "the file has no rows");
            let label = format!("a line of column names is due ({due}, …), then at least one row");
            findings.at(&line_at(source, text, 0), found.label(label));
            return None;
        }
        let header = rows.remove(0);
        Some(Self { header, rows })
    }

    /// Where a column stands, if it is there.
    pub fn column(&self, name: &str) -> Option<usize> {
        self.header.fields.iter().position(|column| column == name)
    }

    /// Whether a row has as many fields as there are columns; if not, that is reported.
    pub fn is_even(&self, row: &CsvRow, findings: &mut Findings) -> bool {
        let (fields, columns) = (row.fields.len(), self.header.fields.len());
        if fields != columns {
            let message = format!("this row has {fields} values, and there are {columns} columns");
            findings.at(&row.spot, Diagnostic::error("uneven-row", message));
        }
        fields == columns
    }
}

impl CsvRow {
    /// A field; empty where the row is too short.
    pub fn field(&self, index: usize) -> &str {
        self.fields.get(index).map_or("", String::as_str)
    }

    /// The characters of a field; the whole line where it can't be told.
    pub fn field_spot(&self, index: usize, findings: &Findings) -> Spot {
        let source = findings.diagnostics.sources.get(self.spot.source);
        let line = source.and_then(|source| source.text.get(self.spot.range.clone())).unwrap_or_default();
        let mut quoted = false;
        let commas = line.char_indices().filter(|(_, letter)| {
            quoted ^= *letter == '"';
            *letter == ',' && !quoted
        });
        let starts = std::iter::once(0).chain(commas.map(|(at, _)| at + 1));
        let field = self.field(index);
        let found = starts
            .skip(index)
            .map(|start| (start, line.get(start..).and_then(|rest| rest.find(field))))
            .next()
            .filter(|_| !field.is_empty());
        match found {
            Some((before, Some(offset))) => {
                let start = self.spot.range.start + before + offset;
                Spot {
                    source: self.spot.source,
                    range: start..start + field.len(),
                }
            }
            _ => self.spot.clone(),
        }
    }
}

/// The line that holds a byte, without its end.
fn line_at(source: usize, text: &str, byte: usize) -> Spot {
    let mut start = byte.min(text.len());
    while !text.is_char_boundary(start) {
        start -= 1;
    }
    // A record is said to start at the end of the line before it, where lines are blank.
    let skipped = text[start..].len() - text[start..].trim_start_matches(['\r', '\n']).len();
    start += skipped;
    let length = text[start..].find(['\r', '\n']).unwrap_or(text.len() - start);
    Spot {
        source,
        range: start..start + length,
    }
}
