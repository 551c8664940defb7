//! A mistake or a doubt about a place in a file.

use std::ops::Range;

/// How grave it is.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Severity {
    /// The case can't be accepted.
    Error,
    /// Odd but possible.
    Warning,
}

/// A file that diagnostics point into.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct SourceText {
    /// Its name as the person gave it.
    pub name: String,
    /// Its whole text.
    pub text: String,
}

/// One thing to tell about a place in a file.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Diagnostic {
    /// How grave it is.
    pub severity: Severity,
    /// A short fixed name, such as `unknown-key`.
    pub code: &'static str,
    /// What is wrong, in one line.
    pub message: String,
    /// Where: index into [`Diagnostics::sources`] and byte range there; `None` where no file is to blame.
    pub place: Option<(usize, Range<usize>)>,
    /// What is said at the underlined characters.
    pub label: String,
    /// What would fit, and what to do next.
    pub help: Vec<String>,
}

/// Everything found in one go, with the texts it points into.
#[derive(Clone, Debug, Default, PartialEq, Eq)]
pub struct Diagnostics {
    /// The files.
    pub sources: Vec<SourceText>,
    /// What was found, in the order of the files.
    pub list: Vec<Diagnostic>,
}

impl Diagnostic {
    /// A mistake for which no file is to blame, until [`Diagnostic::at`] says otherwise.
    pub fn error(code: &'static str, message: impl Into<String>) -> Self {
        Self {
            severity: Severity::Error,
            code,
            message: message.into(),
            place: None,
            label: String::new(),
            help: Vec::new(),
        }
    }

    /// A doubt for which no file is to blame, until [`Diagnostic::at`] says otherwise.
    pub fn warning(code: &'static str, message: impl Into<String>) -> Self {
        Self {
            severity: Severity::Warning,
            ..Self::error(code, message)
        }
    }

    /// The same, at these bytes of this source.
    #[must_use]
    pub fn at(mut self, source: usize, range: Range<usize>) -> Self {
        self.place = Some((source, range));
        self
    }

    /// The same, with what is said at the underlined characters.
    #[must_use]
    pub fn label(mut self, label: impl Into<String>) -> Self {
        self.label = label.into();
        self
    }

    /// The same, with one more line of help.
    #[must_use]
    pub fn help(mut self, help: impl Into<String>) -> Self {
        self.help.push(help.into());
        self
    }
}

impl Diagnostics {
    /// Whether anything forbids going on.
    pub fn has_errors(&self) -> bool {
        self.list.iter().any(|diagnostic| diagnostic.severity == Severity::Error)
    }
}
