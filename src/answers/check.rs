//! Is the case sound: the grid, the phases, what heats the wall now.

use super::follow::resolve_all;
use super::pass::PassSettings;
use crate::model::{HeatingModel, Kelvin, LogRows, Model, PhaseKind, Profile, STEFAN_BOLTZMANN, Seconds};
use crate::run::RunError;

/// What `check` shows of a model.
#[derive(Clone, Debug)]
pub struct CheckAnswers {
    /// One for each station.
    pub stations: Vec<StationCheck>,
    /// The profile, written out.
    pub phases: Vec<PhaseCheck>,
}

/// One station.
#[derive(Clone, Debug)]
pub struct StationCheck {
    /// Its name.
    pub name: String,
    /// Unknown temperatures through the wall.
    pub nodes: usize,
    /// What heats it; `None` where nothing burns.
    pub heating: Option<HeatingCheck>,
}

/// What heats a wall of one temperature, at level 1; a heating log as at its first row, a followed face at its hottest.
#[derive(Clone, Debug)]
pub struct HeatingCheck {
    /// The wall's temperature.
    pub wall: Kelvin,
    /// Coefficient from the gas, the factor in it, W/(m²·K).
    pub coefficient: Option<f64>,
    /// Recovery temperature of the gas.
    pub gas_temperature: Option<Kelvin>,
    /// All heat into the wall, W/m².
    pub flux: f64,
    /// Its parts, W/m².
    pub parts: Vec<(&'static str, f64)>,
}

/// One phase.
#[derive(Clone, Debug, PartialEq)]
pub struct PhaseCheck {
    /// Its kind.
    pub kind: PhaseKind,
    /// Clock at its start.
    pub start: Seconds,
    /// How long it lasts.
    pub duration: Seconds,
    /// Chamber pressure over its design value (burns).
    pub level: f64,
    /// Rise at the start of a burn.
    pub ramp: Seconds,
    /// Fall after the end of a burn.
    pub tail: Seconds,
    /// Whether the purge is on.
    pub purge: bool,
}

/// Looks at a model; `wall`: the wall temperature at which the heating is shown, the start temperature unless given.
///
/// # Errors
/// When the trial run that makes the grid fails.
pub fn check(model: &Model, wall: Option<Kelvin>) -> Result<CheckAnswers, RunError> {
    let mut stations = Vec::new();
    let walls = resolve_all(model, |_| PassSettings::default())?;
    for (index, station) in model.stations.iter().enumerate() {
        let resolved = &walls[index].resolved;
        let own_start = station.start.as_ref().and_then(|start| start.hot_face());
        let wall = wall.or(own_start).unwrap_or(model.start);
        let heating = station.heating.as_ref().map(|heating| {
            let (coefficient, gas_temperature, flux) = match &heating.model {
                HeatingModel::Film {
                    coefficient,
                    gas_temperature,
                } => (Some(*coefficient), Some(*gas_temperature), None),
                HeatingModel::Wall(followed) => {
                    let hottest = walls[index].hottest_followed().unwrap_or(model.start);
                    (Some(followed.conductance), Some(hottest), None)
                }
                HeatingModel::Flux(flux) => (None, None, Some(*flux)),
                HeatingModel::Log(LogRows::Flux { rows, .. }) => (None, None, rows.first().map(|row| row.1)),
                HeatingModel::Log(LogRows::Film { rows }) => (rows.first().map(|row| row.1), rows.first().map(|row| row.2), None),
            };
            let coefficient = coefficient.map(|coefficient| heating.factor * coefficient);
            let mut parts = Vec::new();
            if let (Some(coefficient), Some(gas)) = (coefficient, gas_temperature) {
                parts.push(("convection", coefficient * (gas - wall)));
                if heating.gas_emissivity > 0.0 {
                    parts.push(("gas radiation", heating.gas_emissivity * STEFAN_BOLTZMANN * (gas.powi(4) - wall.powi(4))));
                }
            }
            if let Some(flux) = flux {
                parts.push(("absorbed flux", heating.factor * flux));
            }
            if heating.open {
                let idle = &station.idle;
                let surfaces = model.surroundings.surfaces;
                parts.push(("idle convection", idle.coefficient * (idle.temperature - wall)));
                let emitted = STEFAN_BOLTZMANN * (surfaces.powi(4) - wall.powi(4));
                parts.push(("idle radiation", idle.view * idle.emissivity.value(wall) * emitted));
                parts.push(("sun", idle.solar_absorptivity * model.surroundings.sun));
            }
            HeatingCheck {
                wall,
                coefficient,
                gas_temperature,
                flux: parts.iter().map(|part| part.1).sum(),
                parts,
            }
        });
        stations.push(StationCheck {
            name: station.name.clone(),
            nodes: resolved.pass.map.len(),
            heating,
        });
    }
    Ok(CheckAnswers {
        stations,
        phases: phases(&model.profile),
    })
}

/// The phases of a profile with their clocks.
pub fn phases(profile: &Profile) -> Vec<PhaseCheck> {
    let with_start = profile.phases().iter().zip(profile.starts());
    with_start
        .map(|(phase, start)| PhaseCheck {
            kind: phase.kind(),
            start,
            duration: phase.duration(),
            level: phase.level,
            ramp: phase.ramp,
            tail: phase.tail,
            purge: phase.purge,
        })
        .collect()
}
