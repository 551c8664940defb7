//! CSV files beside the case: every field with its place.

use super::{CaseFile, Lowering, Node, Spot};

/// A file as read, each row with its place.
pub(super) struct CsvFile {
    pub header: Vec<String>,
    pub header_spot: Spot,
    pub rows: Vec<CsvRow>,
}

/// A row, with its place.
pub(super) struct CsvRow {
    pub spot: Spot,
    pub fields: Vec<String>,
}

impl Lowering<'_> {
    pub(super) fn read_csv(&mut self, file: &Node) -> Option<CsvFile> {
        let written = file.text()?;
        let path = self.folder.join(written);
        let bytes = match std::fs::read(&path) {
            Ok(bytes) => bytes,
            Err(error) => {
                let message = format!("can't read {}: {error}", path.display());
                self.error(&file.words(), "cannot-read", message, "paths count from the folder of the case file");
                return None;
            }
        };
        let digest = crate::case::digest::of(&[&bytes]);
        let Ok(text) = String::from_utf8(bytes) else {
            self.error(
                &file.words(),
                "not-text",
                format!("{} is no UTF-8 text", path.display()),
                "a CSV file is due",
            );
            return None;
        };
        let used = CaseFile {
            path: written.to_owned(),
            digest,
        };
        if !self.files.contains(&used) {
            self.files.push(used);
        }
        let source = self.findings.add_source(path.display().to_string(), text.clone());
        self.parse_csv(source, &text)
    }

    fn parse_csv(&mut self, source: usize, text: &str) -> Option<CsvFile> {
        let mut reader = csv::ReaderBuilder::new()
            .has_headers(false)
            .trim(csv::Trim::All)
            .flexible(true)
            .from_reader(text.as_bytes());
        let mut rows = Vec::new();
        for record in reader.records() {
            match record {
                Ok(record) => {
                    let start = record
                        .position()
                        .map_or(0, |position| usize::try_from(position.byte()).unwrap_or(usize::MAX));
                    rows.push(CsvRow {
                        spot: line_at(source, text, start),
                        fields: record.iter().map(|field| field.trim_start_matches('\u{feff}').to_owned()).collect(),
                    });
                }
                Err(error) => {
                    let start = error
                        .position()
                        .map_or(0, |position| usize::try_from(position.byte()).unwrap_or(usize::MAX));
                    self.error(&line_at(source, text, start), "syntax", format!("not readable as CSV: {error}"), "");
                    return None;
                }
            }
        }
        if rows.len() < 2 {
            let spot = line_at(source, text, 0);
            self.error(
                &spot,
                "empty-list",
                "the file has no rows",
                "a line of column names is due, then at least one row",
            );
            return None;
        }
        let header = rows.remove(0);
        for (index, column) in header.fields.iter().enumerate() {
            if header.fields[..index].contains(column) {
                self.error(&header.spot, "repeated-name", format!("the column \"{column}\" stands twice"), "");
                return None;
            }
        }
        Some(CsvFile {
            header: header.fields,
            header_spot: header.spot,
            rows,
        })
    }

    /// The characters of one field of a line; the whole line where it can't be told.
    pub(super) fn field_spot(&self, line: &Spot, index: usize, field: &str) -> Spot {
        let source = self.findings.diagnostics.sources.get(line.source);
        let text = source.and_then(|source| source.text.get(line.range.clone())).unwrap_or_default();
        let before: usize = text.split(',').take(index).map(|part| part.len() + 1).sum();
        let found = text.get(before..).filter(|_| !field.is_empty()).and_then(|rest| rest.find(field));
        match found {
            Some(offset) => {
                let start = line.range.start + before + offset;
                Spot {
                    source: line.source,
                    range: start..start + field.len(),
                }
            }
            None => line.clone(),
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
