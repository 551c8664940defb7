//! The one place that prints: standard output carries the answer, standard error everything else.

use super::arguments::ColorChoice;
use super::failure::Failure;
use anstream::AutoStream;
use std::io::{self, ErrorKind, Write};

/// Prints with or without colour, and with or without what is not asked for.
#[derive(Clone, Copy, Debug)]
pub struct Printer {
    color: anstream::ColorChoice,
    quiet: bool,
}

impl Printer {
    /// A printer; a quiet one tells nothing but mistakes and JSON.
    pub fn new(color: ColorChoice, quiet: bool) -> Self {
        let color = match color {
            ColorChoice::Auto => anstream::ColorChoice::Auto,
            ColorChoice::Always => anstream::ColorChoice::Always,
            ColorChoice::Never => anstream::ColorChoice::Never,
        };
        Self { color, quiet }
    }

    /// A printer of commands without options for it.
    pub fn plain() -> Self {
        Self::new(ColorChoice::Auto, false)
    }

    /// A page for a person, on standard output.
    pub fn page(&self, text: &str) -> Result<(), Failure> {
        if self.quiet { Ok(()) } else { self.answer(text) }
    }

    /// What a program reads, on standard output.
    pub fn answer(&self, text: &str) -> Result<(), Failure> {
        let mut output = AutoStream::new(io::stdout().lock(), self.color);
        match output.write_all(text.as_bytes()).and_then(|()| output.flush()) {
            // Whoever reads has seen enough.
            Err(error) if error.kind() == ErrorKind::BrokenPipe => Ok(()),
            result => result.map_err(Failure::Print),
        }
    }

    /// A warning or a note, on standard error.
    pub fn note(&self, text: &str) {
        if !self.quiet {
            self.mistake(text);
        }
    }

    /// A mistake, on standard error. If that can't be written, there is nowhere left to say so: the exit status still does.
    pub fn mistake(&self, text: &str) {
        let mut output = AutoStream::new(io::stderr().lock(), self.color);
        let _unheard = writeln!(output, "{text}");
    }
}
