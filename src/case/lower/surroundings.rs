//! [surroundings].

use super::quantities::{flux, pressure, temperature, velocity};
use super::{Lowering, Spot, Table};
use crate::model::Surroundings;
use crate::units::Kind;

/// What every station needs to know of its surroundings.
pub(super) struct Weather {
    pub surroundings: Option<Surroundings>,
    /// Air temperature, K.
    pub air: Option<f64>,
    /// Whether there is no air at all.
    pub vacuum: bool,
    /// Whether the sun shines.
    pub sun: bool,
    /// Wind, m/s; `None`: not given.
    pub wind: Option<f64>,
}

/// Standard atmosphere, Pa.
const ATMOSPHERE: f64 = 101_325.0;

impl Lowering<'_> {
    pub(super) fn weather(&mut self, case: &Table) -> Weather {
        let table = case.table("surroundings");
        let path = "surroundings";
        let air = table.and_then(|table| table.number("air"));
        let surfaces = match air {
            Some(air) => self.number_or(table, "surfaces", path, air, Kind::Temperature),
            None => None,
        };
        let absolute = self.number_or(table, "pressure", path, ATMOSPHERE, Kind::Pressure);
        let wind = self.number_or(table, "wind", path, 0.0, Kind::Velocity);
        let sun = self.number_or(table, "sun", path, 0.0, Kind::HeatFlux);
        let spot = case.node("surroundings").map(|node| node.spot.clone());
        let parts = air.zip(surfaces).zip(absolute).zip(sun).zip(wind).zip(spot);
        let surroundings = parts.and_then(|(((((air, surfaces), absolute), sun), wind), spot)| {
            let built = Surroundings::new(temperature(air), temperature(surfaces), pressure(absolute), flux(sun));
            self.accept(built.and_then(|built| built.with_wind(velocity(wind))), &spot)
        });
        Weather {
            surroundings,
            air,
            vacuum: absolute == Some(0.0),
            sun: sun.is_some_and(|sun| sun > 0.0),
            wind: wind.filter(|_| table.is_some_and(|table| table.has("wind"))),
        }
    }

    /// Wind that no station could feel is a mistake.
    pub(super) fn wind(&mut self, case: &Table) {
        let Some(wind) = case.table("surroundings").and_then(|table| table.node("wind")) else {
            return;
        };
        let felt = case.list("station").unwrap_or_default().iter().any(|station| {
            let outside = station.table().and_then(|station| station.table("outside"));
            matches!(outside.and_then(|outside| outside.text("convection")), Some("forced" | "mixed"))
        });
        if wind.number().is_some_and(|wind| wind > 0.0) && !felt {
            let spot: Spot = wind.words();
            let message = "no station feels the wind: none has convection \"forced\" or \"mixed\"";
            self.error(&spot, "wind-unused", message, "set it to \"0 m/s\", or let a station feel it");
        }
    }
}
