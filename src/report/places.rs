//! The places of a station's answers, under the names of the case file.

use crate::answers::{PlaceAnswer, RunAnswers, StationAnswers};

/// The heated face.
pub(super) const HOT_FACE: &str = "hot-face";
/// The face away from the heat.
pub(super) const OUTER_FACE: &str = "outer-face";

/// Every place that has a peak, from the hot side outwards.
pub(super) fn places(station: &StationAnswers) -> Vec<(String, &PlaceAnswer)> {
    let mut list = vec![(HOT_FACE.to_owned(), &station.hot_face)];
    for (index, layer) in station.layers.iter().enumerate() {
        list.push((layer.name.clone(), &layer.at));
        if let Some(joint) = station.joints.get(index) {
            list.push((joint.between.join("|"), &joint.at));
        }
    }
    list.push((OUTER_FACE.to_owned(), &station.outer_face));
    list
}

/// A place by its names, with its station.
pub(super) fn find<'a>(answers: &'a RunAnswers, station: &str, place: &str) -> Option<(&'a StationAnswers, &'a PlaceAnswer)> {
    let station = answers.stations.iter().find(|candidate| candidate.name == station)?;
    let (_, answer) = places(station).into_iter().find(|(name, _)| name == place)?;
    Some((station, answer))
}
