//! `soakdown materials`.

use super::arguments::{ConfidenceChoice, MaterialsArguments};
use super::command_line::materials_line;
use super::exit::ExitStatus;
use super::failure::Failure;
use super::printer::Printer;
use super::start::units_of;
use soakdown::case::{Confidence, MaterialCard, material_card, material_cards};
use soakdown::report::{MaterialsDocument, json, material_page, materials_page};

/// Shows one built-in material, or those that pass the filters.
pub fn materials(arguments: &MaterialsArguments, printer: Printer) -> Result<ExitStatus, Failure> {
    let units = units_of(arguments.units);
    let (cards, page) = match &arguments.name {
        Some(name) => {
            let card = material_card(name).map_err(Failure::Refused)?;
            let page = material_page(&card, units);
            (vec![card], page)
        }
        None => {
            let mut cards = material_cards().map_err(Failure::Refused)?;
            let all = cards.len();
            cards.retain(|card| passes(card, arguments));
            let page = materials_page(&cards, all, units);
            (cards, page)
        }
    };
    printer.answer(&if arguments.json {
        json(&MaterialsDocument::new(&materials_line(arguments), &cards))?
    } else {
        page
    })?;
    Ok(ExitStatus::Computed)
}

fn passes(card: &MaterialCard, arguments: &MaterialsArguments) -> bool {
    let least = arguments.confidence.map_or(Confidence::Low, |choice| match choice {
        ConfidenceChoice::High => Confidence::High,
        ConfidenceChoice::Medium => Confidence::Medium,
        ConfidenceChoice::Low => Confidence::Low,
    });
    let hot = |kelvin: f64| card.limit.is_some_and(|(limit, _)| limit >= kelvin);
    card.confidence() >= least
        && arguments.find.as_deref().is_none_or(|word| card.mentions(word))
        && arguments.limit_above.as_ref().is_none_or(|limit| hot(limit.value))
}
