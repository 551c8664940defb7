//! The known name that was most likely meant.

/// The known name nearest to what was written, if it is near enough to be a guess worth making: a different case, `_` for `-`, or a few letters
/// off. Words of one or two letters are near to everything, so only their case may differ.
pub(super) fn nearest<'a>(written: &str, known: impl IntoIterator<Item = &'a str>) -> Option<&'a str> {
    let plain = |word: &str| word.to_lowercase().replace(['_', ' '], "-");
    let wanted = plain(written);
    let length = wanted.chars().count();
    let allowed = match length {
        0..=2 => 0,
        3..=5 => 1,
        _ => length / 3,
    };
    known
        .into_iter()
        .map(|name| (strsim::osa_distance(&plain(name), &wanted), name))
        .filter(|(distance, _)| *distance <= allowed)
        .min_by_key(|(distance, _)| *distance)
        .map(|(_, name)| name)
}

/// The line of help that names it.
pub(super) fn did_you_mean(name: &str) -> String {
    format!("did you mean \"{name}\"?")
}

/// `did you mean "…"?`, or what holds the word, or the list of what is known where that is short.
pub(super) fn help<'a>(written: &str, known: impl IntoIterator<Item = &'a str>) -> Option<String> {
    let known: Vec<_> = known.into_iter().collect();
    if let Some(name) = nearest(written, known.iter().copied()) {
        return Some(did_you_mean(name));
    }
    let wanted = written.trim().to_lowercase();
    let parts: Vec<_> = known
        .iter()
        .copied()
        .filter(|name| wanted.len() > 2 && name.to_lowercase().contains(&wanted))
        .collect();
    if !parts.is_empty() {
        return Some(format!("known here with \"{wanted}\" in the name: {}", parts.join(", ")));
    }
    (!known.is_empty()).then(|| format!("known here: {}", known.join(", ")))
}

#[cfg(test)]
mod tests {
    use super::{help, nearest};

    #[test]
    fn a_word_that_is_part_of_names_leads_to_them() {
        let known = ["carbon-steel", "ceramic-fibre-felt", "copper"];
        assert_eq!(
            help("Felt", known).as_deref(),
            Some("known here with \"felt\" in the name: ceramic-fibre-felt")
        );
        assert_eq!(
            help("rubber", known).as_deref(),
            Some("known here: carbon-steel, ceramic-fibre-felt, copper")
        );
    }

    #[test]
    fn a_guess_is_made_only_where_it_is_worth_something() {
        let known = ["thickness", "material", "view", "limit", "copper", "stainless-304"];
        assert_eq!(nearest("thicknes", known), Some("thickness"));
        assert_eq!(nearest("Copper", known), Some("copper"));
        assert_eq!(nearest("stainless_304", known), Some("stainless-304"));
        assert_eq!(nearest("veiw", known), Some("view"));
        assert_eq!(nearest("zz", known), None);
        assert_eq!(nearest("conductance", known), None);
    }
}
