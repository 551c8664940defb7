//! Heating model "wall": a hot end that follows a face of another station.

use super::quantities::transfer;
use super::station::Section;
use super::{Lowering, Node, Table};
use crate::model::{Followed, FollowedFace, Heating, HeatingModel};
use crate::units::Kind;

/// What means nothing where another wall is followed.
const WITHOUT_GAS: [&str; 5] = ["gas_emissivity", "open", "soot_resistance", "film_effectiveness", "film_temperature"];

impl Lowering<'_> {
    pub(super) fn following(&mut self, section: &Section<'_>, table: &Table, node: &Node) -> Option<Heating> {
        self.misfits(table, &WITHOUT_GAS, "with model \"wall\", where no gas meets the hot end");
        let factor = self.number_or(Some(table), "factor", &section.path_of("heating"), 1.0, Kind::Number);
        for key in ["station", "face", "conductance"] {
            if !table.has(key) {
                self.missing(&node.spot, key, "with model \"wall\"");
            }
        }
        let (station, face) = (table.text("station")?, table.text("face")?);
        let face = if face == "outer-face" { FollowedFace::Outer } else { FollowedFace::Hot };
        let followed = Followed::new(station, face, transfer(table.number("conductance")?));
        let text = format!(
            "its hot end follows the {} of {station} at all times, burn and after, one way: what it draws is not taken from that wall; level, ramp, tail and \
             purge act on that wall only",
            face.word()
        );
        self.findings.notice("follows-one-way", text, Some(section.name), None);
        let followed = self.accept(followed, &node.spot)?;
        self.accept(Heating::new(HeatingModel::Wall(followed)).times(factor?), &node.spot)
    }

    /// Whom the stations follow: another station of the case, and by no way themselves.
    pub(super) fn followed_stations(&mut self, case: &Table) {
        let list = case.list("station").unwrap_or_default();
        let lone = list.len() == 1;
        let name = |node: &Node| -> Option<String> {
            let table = node.table()?;
            Some(table.text("name").or(lone.then_some("wall"))?.to_owned())
        };
        let names: Vec<Option<String>> = list.iter().map(name).collect();
        let followed: Vec<Option<&Node>> = list
            .iter()
            .map(|station| {
                let heating = station.table()?.table("heating")?;
                if heating.text("model") != Some("wall") {
                    return None;
                }
                heating.node("station")
            })
            .collect();
        let find = |node: &Node| {
            names
                .iter()
                .position(|name| name.as_deref().is_some_and(|name| node.text() == Some(name)))
        };
        for (index, node) in followed.iter().enumerate() {
            let Some(node) = node else { continue };
            let Some(mut at) = find(node) else {
                let others = names.iter().enumerate().filter(|(other, _)| *other != index);
                let others: Vec<&str> = others.filter_map(|(_, name)| name.as_deref()).collect();
                self.unknown(node, "unknown-station", "the station", others);
                continue;
            };
            let mut links = 1;
            while let (true, Some(next)) = (at != index && links <= list.len(), followed[at].and_then(find)) {
                at = next;
                links += 1;
            }
            if at == index {
                let message = if links == 1 {
                    "a station can't follow itself".to_owned()
                } else {
                    format!(
                        "this station follows itself, by way of {} other{}",
                        links - 1,
                        if links == 2 { "" } else { "s" }
                    )
                };
                self.error(&node.words(), "follows-itself", message, "one of them must be heated by something else");
            }
        }
    }
}
