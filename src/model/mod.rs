//! What is planned, as checked numbers: stations of layered walls, the engine's profile, the surroundings, the questions.
//!
//! Constructors take `uom` quantities, so that a caller can't pass millimetres for metres or a difference for a temperature; inside, every field
//! is a plain SI `f64`. The model knows no file, no solver and no time step.

mod error;
mod faces;
mod follow;
mod layer;
mod material;
mod profile;
mod question;
mod readings;
mod si;
mod start;
mod station;
mod table;

pub use error::ModelError;
pub use faces::{
    Convection, Coolant, CoolantPhases, ForcedSurface, Heating, HeatingModel, Idle, LogRows, Losses, NaturalSurface, OuterFace, Outside, Purge,
    Surroundings,
};
pub use follow::{FaceCourse, Followed, FollowedFace, Outlook};
pub use layer::{CrossSection, Gap, GapGas, Joint, Layer, Limit, LimitKind, LimitOrigin, Resistance};
pub use material::{Material, MaterialValues};
pub use profile::{Phase, PhaseKind, Profile};
pub use question::{Allowance, Place, Wait};
pub use readings::Readings;
pub use si::*;
pub use start::StartProfile;
pub use station::{Probe, Shape, Station, StationValues};
pub use table::{Table, TablePoint};

/// One planning question, ready to be run: everything that the case file says, checked.
#[derive(Clone, Debug)]
pub struct Model {
    /// The case's title.
    pub(crate) title: String,
    /// Air, surfaces, pressure, wind and sun around every station.
    pub(crate) surroundings: Surroundings,
    /// Uniform temperature of every wall at time 0, of those that do not start from a profile of their own.
    pub(crate) start: Kelvin,
    /// What the engine does, phase by phase.
    pub(crate) profile: Profile,
    /// The wall sections, in file order; at least one.
    pub(crate) stations: Vec<Station>,
    /// The cool-down questions, each at one place of one station.
    pub(crate) waits: Vec<Wait>,
    /// What is taken off every limit and put on every heating.
    pub(crate) allowance: Allowance,
    /// The promised accuracy of temperatures.
    pub(crate) tolerance: KelvinDifference,
}

/// The parts of a [`Model`], for [`Model::new`].
#[derive(Clone, Debug)]
pub struct ModelParts {
    /// The case's title.
    pub title: String,
    /// Air, surfaces, pressure, wind and sun.
    pub surroundings: Surroundings,
    /// Uniform temperature of every wall at time 0, of those that do not start from a profile of their own.
    pub start: uom::si::f64::ThermodynamicTemperature,
    /// What the engine does.
    pub profile: Profile,
    /// The wall sections.
    pub stations: Vec<Station>,
    /// The cool-down questions.
    pub waits: Vec<Wait>,
    /// What is taken off limits and put on heating.
    pub allowance: Allowance,
    /// The promised accuracy; 0.05 K unless the case says otherwise.
    pub tolerance: uom::si::f64::TemperatureInterval,
}

impl Model {
    /// Puts a model together.
    ///
    /// # Errors
    /// When there is no station, two have one name, one follows a station that is not there or (by whatever way) itself, the start or the tolerance is not above zero, a wait names a place that its station
    /// does not have, or a burn meets a station without heating.
    pub fn new(parts: ModelParts) -> Result<Self, ModelError> {
        if parts.stations.is_empty() {
            return Err(ModelError::Missing { what: "a station" });
        }
        ModelError::above_zero("start temperature", parts.start.value)?;
        ModelError::above_zero("tolerance", parts.tolerance.value)?;
        for (index, station) in parts.stations.iter().enumerate() {
            if parts.stations[..index].iter().any(|earlier| earlier.name == station.name) {
                return Err(ModelError::Repeated { name: station.name.clone() });
            }
            if station.heating.is_none() && parts.profile.last_burn().is_some() {
                return Err(ModelError::Missing {
                    what: "heating, while the profile has a burn",
                });
            }
        }
        for (index, station) in parts.stations.iter().enumerate() {
            // A chain of followed stations that is longer than there are stations comes back to itself.
            let mut at = station;
            let mut links = 0;
            while let Some(followed) = at.followed() {
                let next = parts.stations.iter().find(|other| other.name == followed.station);
                links += 1;
                match next {
                    Some(next) if links <= parts.stations.len() => at = next,
                    _ => {
                        return Err(ModelError::FollowsNothing {
                            station: parts.stations[index].name.clone(),
                        });
                    }
                }
            }
        }
        for wait in &parts.waits {
            let known = parts.stations.get(wait.station).is_some_and(|station| station.has(wait.place));
            if !known {
                return Err(ModelError::NoSuchPlace { wait: wait.name.clone() });
            }
        }
        Ok(Self {
            title: parts.title,
            surroundings: parts.surroundings,
            start: parts.start.value,
            profile: parts.profile,
            stations: parts.stations,
            waits: parts.waits,
            allowance: parts.allowance,
            tolerance: parts.tolerance.value,
        })
    }

    /// The case's title.
    pub fn title(&self) -> &str {
        &self.title
    }

    /// The wall sections, in file order.
    pub fn stations(&self) -> &[Station] {
        &self.stations
    }

    /// What the engine does.
    pub fn profile(&self) -> &Profile {
        &self.profile
    }

    /// The cool-down questions.
    pub fn waits(&self) -> &[Wait] {
        &self.waits
    }

    /// Air, surfaces, pressure, wind and sun.
    pub fn surroundings(&self) -> &Surroundings {
        &self.surroundings
    }

    /// What is taken off limits and put on heating.
    pub fn allowance(&self) -> &Allowance {
        &self.allowance
    }

    /// Index of the station that a station's hot end follows.
    pub fn followed_by(&self, station: usize) -> Option<usize> {
        let followed = self.stations.get(station)?.followed()?;
        self.stations.iter().position(|other| other.name == followed.station)
    }

    /// The same model with the hot end of one station, which follows another's face, told how that face goes.
    #[must_use]
    pub fn with_face_course(&self, station: usize, course: FaceCourse) -> Self {
        let mut other = self.clone();
        if let Some(heating) = &mut other.stations[station].heating
            && let HeatingModel::Wall(followed) = &mut heating.model
        {
            followed.course = Some(std::sync::Arc::new(course));
        }
        other
    }

    /// The same model with every heating factor multiplied: the second run by which the allowance judges.
    pub fn with_heating_times(&self, factor: f64) -> Self {
        let mut other = self.clone();
        for station in &mut other.stations {
            if let Some(heating) = &mut station.heating {
                heating.factor *= factor;
            }
        }
        other
    }
}
