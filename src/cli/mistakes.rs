//! Mistakes and doubts at their place in the file: line, the very characters underlined, what would fit.

use annotate_snippets::{AnnotationKind, Group, Level, Renderer, Snippet};
use soakdown::diagnostics::{Diagnostic, Diagnostics, Severity};
use std::ops::Range;

/// Everything found, with escape codes.
pub fn rendered(diagnostics: &Diagnostics) -> String {
    let renderer = Renderer::styled();
    let parts: Vec<String> = diagnostics
        .list
        .iter()
        .map(|diagnostic| renderer.render(&[group(diagnostic, diagnostics)]))
        .collect();
    parts.join("\n\n")
}

/// A message without a place.
pub fn plain_error(message: &str) -> String {
    Renderer::styled().render(&[Group::with_title(Level::ERROR.primary_title(message))])
}

/// A note without a place.
pub fn plain_warning(message: &str) -> String {
    Renderer::styled().render(&[Group::with_title(Level::WARNING.primary_title(message))])
}

fn group<'a>(diagnostic: &'a Diagnostic, diagnostics: &'a Diagnostics) -> Group<'a> {
    let level = match diagnostic.severity {
        Severity::Error => Level::ERROR,
        Severity::Warning => Level::WARNING,
    };
    let title = level.primary_title(&diagnostic.message).id(diagnostic.code);
    let mut group = Group::with_title(title);
    if let Some((source, range)) = &diagnostic.place
        && let Some(source) = diagnostics.sources.get(*source)
    {
        let annotation = AnnotationKind::Primary.span(within(range, &source.text)).label(&diagnostic.label);
        group = group.element(Snippet::source(&source.text).path(&source.name).annotation(annotation));
    }
    group.elements(diagnostic.help.iter().map(|help| Level::HELP.message(help)))
}

/// The range on whole characters of the text: the renderer refuses any other.
fn within(range: &Range<usize>, text: &str) -> Range<usize> {
    let start = text.floor_char_boundary(range.start);
    let end = text.ceil_char_boundary(range.end).max(start);
    start..end
}

#[cfg(test)]
mod tests {
    use super::*;
    use soakdown::diagnostics::SourceText;

    fn one(text: &str, range: Range<usize>) -> String {
        let rendered = rendered(&Diagnostics {
            sources: vec![SourceText {
                name: "chamber.toml".into(),
                text: text.into(),
            }],
            list: vec![Diagnostic {
                severity: Severity::Error,
                code: "unknown-key",
                message: "unknown key \"thicknes\"".into(),
                place: Some((0, range)),
                label: "not a key of a layer".into(),
                help: vec!["did you mean \"thickness\"?".into()],
            }],
        });
        anstream::adapter::strip_str(&rendered).to_string()
    }

    #[test]
    fn the_very_characters_are_underlined() {
        let text = one("title = \"µ\"\nthicknes = \"3 mm\"\n", 13..21);
        for part in [
            "error[unknown-key]: unknown key \"thicknes\"",
            "chamber.toml:2:1",
            "^^^^^^^^ not a key of a layer",
            "help: did you mean \"thickness\"?",
        ] {
            assert!(text.contains(part), "no {part} in\n{text}");
        }
        let underline = text.lines().find(|line| line.contains('^')).expect("an underline");
        assert_eq!(underline.matches('^').count(), 8);
    }

    #[test]
    fn odd_ranges_do_not_panic() {
        let text = "µ = 1\r\n\ttab = \"x\"";
        for start in 0..text.len() + 3 {
            for end in 0..text.len() + 3 {
                assert!(one(text, start..end).contains("error[unknown-key]"));
            }
        }
        assert!(one("", 0..0).contains("error"));
    }

    #[test]
    fn a_mistake_without_a_place_is_told_all_the_same() {
        let list = vec![Diagnostic {
            severity: Severity::Error,
            code: "no-such-file",
            message: "there is no file a.toml".into(),
            place: None,
            label: String::new(),
            help: vec!["check the path".into()],
        }];
        let text = rendered(&Diagnostics { sources: vec![], list });
        let text = anstream::adapter::strip_str(&text).to_string();
        assert!(
            text.contains("error[no-such-file]: there is no file a.toml") && text.contains("check the path"),
            "{text}"
        );
    }
}
