//! The terminal's pages of ready profiles: all of them, and one.

use super::page::{BOLD, Page, styled};
use super::profile_text::phases_text;
use crate::answers;
use crate::case::ReadyProfile;

/// All profiles with their default phases, and how to go on.
pub fn profiles_page(profiles: &[ReadyProfile]) -> String {
    let mut page = Page::default();
    for profile in profiles {
        let phases = phases_text(&answers::phases(&profile.profile));
        page.text(0, &format!("{}  {}: {phases}", styled(BOLD, &profile.name), profile.title));
    }
    page.gap();
    page.text(
        0,
        "One with its values and phases: soakdown profiles NAME. In a case: [profile] use = \"NAME\". One of your own: copy a file from \
         profiles/burns/, or the lines that soakdown profiles NAME --file prints, and use it by its path.",
    );
    page.finish()
}

/// One profile: what it stands for, its phases, and the lines that use it in a case.
pub fn profile_page(profile: &ReadyProfile) -> String {
    let mut page = Page::default();
    page.text(0, &format!("{}  {}", styled(BOLD, &profile.name), profile.title));
    page.text(2, &profile.explanation);
    page.gap();
    page.text(0, &styled(BOLD, "phases, with $name where a value goes"));
    for line in profile.written.lines() {
        page.line(2, line);
    }
    let phases = phases_text(&answers::phases(&profile.profile));
    page.text(0, &format!("{} {phases}", styled(BOLD, "with the defaults:")));
    page.gap();
    page.text(
        0,
        &styled(
            BOLD,
            "in a case, instead of [profile] with phases; a value left out keeps the default shown here",
        ),
    );
    page.line(2, "[profile]");
    page.line(2, &format!("use = \"{}\"", profile.name));
    page.line(2, "[profile.values]");
    let widths = |text: &dyn Fn(&crate::case::ReadyValue) -> usize| profile.values.iter().map(text).max().unwrap_or(0);
    let (names, defaults) = (widths(&|value| value.name.len()), widths(&|value| value.default.len()));
    for value in &profile.values {
        let line = format!("{:names$} = {:defaults$}  # {}", value.name, value.default, value.meaning);
        page.line(2, &line);
    }
    page.gap();
    if let Some(value) = profile.values.first() {
        let setting = format!("profile.values.{}={}", value.name, value.default.trim_matches(['"', '\'']));
        let setting = if setting.contains(' ') { format!("'{setting}'") } else { setting };
        page.text(0, &format!("For one run only: --set {setting}"));
    }
    page.finish()
}
