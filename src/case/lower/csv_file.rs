//! CSV files that a case names.

use super::{CaseFile, Lowering, Node};
use crate::case::csv_table::CsvTable;

impl Lowering<'_> {
    /// Reads the file that a text of the case names; `due`: the column that comes first.
    pub(super) fn read_csv(&mut self, file: &Node, due: &str) -> Option<CsvTable> {
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
        let table = CsvTable::parse(source, &text, due, self.findings)?;
        for (index, column) in table.header.fields.iter().enumerate() {
            if table.header.fields[..index].contains(column) {
                self.error(&table.header.spot, "repeated-name", format!("the column \"{column}\" stands twice"), "");
                return None;
            }
        }
        Some(table)
    }
}
