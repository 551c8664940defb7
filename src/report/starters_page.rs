//! What `soakdown new` says: which scenarios there are, what was written, and what to do next.

use super::page::{BOLD, Page, styled};
use crate::case::Starter;

/// All scenarios in a line each.
pub fn starters_page(starters: &[Starter]) -> String {
    let mut page = Page::default();
    list(&mut page, 0, starters.iter());
    page.gap();
    page.text(
        0,
        "soakdown new NAME --kind KIND writes one of them to NAME.toml, to be changed into your own case.",
    );
    page.finish()
}

/// What was written to `path`, and what comes next.
pub fn starter_page(starter: &Starter, path: &str, others: &[&Starter]) -> String {
    let mut page = Page::default();
    page.text(0, &format!("wrote {}: {}", styled(BOLD, path), starter.about));
    page.text(
        0,
        "It runs as it is and keeps its limits, but its numbers are invented: replace each by your own. The comments say what each one is.",
    );
    page.gap();
    page.text(0, &styled(BOLD, "next"));
    page.line(2, &format!("soakdown run {path}       how hot, when, how long to wait"));
    page.line(
        2,
        &format!("soakdown check {path}     every number with where it comes from, after each change"),
    );
    if !others.is_empty() {
        page.gap();
        page.text(0, &styled(BOLD, "other scenarios, with --kind"));
        list(&mut page, 2, others.iter().copied());
    }
    page.finish()
}

fn list<'a>(page: &mut Page, indent: usize, starters: impl Iterator<Item = &'a Starter>) {
    for starter in starters {
        page.text(indent, &format!("{:<20} {}", starter.kind, starter.about));
    }
}
