//! What happens at the two faces: heating, idle, the outside, and the surroundings they share.

use super::{Kelvin, Metres, MetresPerSecond, ModelError, Pascals, Seconds, Table, WattsPerSquareMetre, WattsPerSquareMetreKelvin};
use uom::si::f64::{HeatFluxDensity, HeatTransfer, Length, Pressure, ThermodynamicTemperature, Time, Velocity};

/// What surrounds every station.
#[derive(Clone, Debug, PartialEq)]
pub struct Surroundings {
    pub(crate) air: Kelvin,
    pub(crate) surfaces: Kelvin,
    pub(crate) pressure: Pascals,
    pub(crate) sun: WattsPerSquareMetre,
    pub(crate) wind: MetresPerSecond,
}

impl Surroundings {
    /// Air, radiating surfaces, absolute pressure (0: vacuum) and sun.
    ///
    /// # Errors
    /// When a temperature is not above absolute zero, or pressure or sun is negative.
    pub fn new(
        air: ThermodynamicTemperature,
        surfaces: ThermodynamicTemperature,
        pressure: Pressure,
        sun: HeatFluxDensity,
    ) -> Result<Self, ModelError> {
        Ok(Self {
            air: ModelError::above_zero("air", air.value)?,
            surfaces: ModelError::above_zero("surfaces", surfaces.value)?,
            pressure: ModelError::not_negative("pressure", pressure.value)?,
            sun: ModelError::not_negative("sun", sun.value)?,
            wind: 0.0,
        })
    }

    /// The same surroundings with wind.
    ///
    /// # Errors
    /// When its velocity is negative.
    pub fn with_wind(mut self, wind: Velocity) -> Result<Self, ModelError> {
        self.wind = ModelError::not_negative("wind", wind.value)?;
        Ok(self)
    }
}

/// The hot face while burning.
#[derive(Clone, Debug, PartialEq)]
pub struct Heating {
    pub(crate) model: HeatingModel,
    /// Multiplies the convective heating of any model.
    pub(crate) factor: f64,
    /// Emissivity of the gas; radiation goes with the gas temperature of the model.
    pub(crate) gas_emissivity: f64,
    /// Whether the losses of the idle face go on while burning.
    pub(crate) open: bool,
}

impl Heating {
    /// Heating with factor 1, without gas radiation, on a face that is closed while burning.
    pub fn new(model: HeatingModel) -> Self {
        Self {
            model,
            factor: 1.0,
            gas_emissivity: 0.0,
            open: false,
        }
    }

    /// The same heating with another factor on its convection.
    ///
    /// # Errors
    /// When the factor is negative.
    pub fn times(mut self, factor: f64) -> Result<Self, ModelError> {
        self.factor = ModelError::not_negative("heating factor", factor)?;
        Ok(self)
    }

    /// The same heating with a radiating gas.
    ///
    /// # Errors
    /// When the emissivity is no share.
    pub fn with_gas_emissivity(mut self, emissivity: f64) -> Result<Self, ModelError> {
        self.gas_emissivity = ModelError::share("gas emissivity", emissivity)?;
        Ok(self)
    }

    /// The same heating on a face in the open, whose idle losses go on while burning.
    #[must_use]
    pub fn in_the_open(mut self, open: bool) -> Self {
        self.open = open;
        self
    }
}

/// How the gas heats the hot face.
#[derive(Clone, Debug, PartialEq)]
pub enum HeatingModel {
    /// A coefficient to the recovery temperature, at level 1.
    Film {
        /// Coefficient at level 1.
        coefficient: WattsPerSquareMetreKelvin,
        /// Recovery (adiabatic-wall) temperature.
        gas_temperature: Kelvin,
    },
    /// An absorbed flux, at level 1.
    Flux(WattsPerSquareMetre),
    /// Rows against time from the start of each burn; level, ramp and tail don't act.
    Log(LogRows),
    /// Another station's face, at all times, burn and after; level, ramp and tail don't act, and the idle hot face does not either.
    Wall(super::Followed),
}

impl HeatingModel {
    /// A coefficient to a recovery temperature.
    ///
    /// # Errors
    /// When the coefficient is negative or the temperature not above absolute zero.
    pub fn film(coefficient: HeatTransfer, gas_temperature: ThermodynamicTemperature) -> Result<Self, ModelError> {
        Ok(Self::Film {
            coefficient: ModelError::not_negative("coefficient", coefficient.value)?,
            gas_temperature: ModelError::above_zero("gas temperature", gas_temperature.value)?,
        })
    }

    /// An absorbed flux.
    ///
    /// # Errors
    /// When the flux is no finite number.
    pub fn flux(flux: HeatFluxDensity) -> Result<Self, ModelError> {
        if flux.value.is_finite() {
            Ok(Self::Flux(flux.value))
        } else {
            Err(ModelError::NotAboveZero {
                what: "flux",
                value: flux.value,
            })
        }
    }
}

/// Logged heating, linear between its rows. Times from the start of each burn, rising; the last row is held where the burn is longer, and
/// later rows go on after a shorter burn, until the next one.
#[derive(Clone, Debug, PartialEq)]
pub enum LogRows {
    /// Time, absorbed flux. With `net`, it replaces the idle losses until its last row.
    Flux {
        /// Time and flux.
        rows: Vec<(Seconds, WattsPerSquareMetre)>,
        /// Whether the flux is already net of the idle losses.
        net: bool,
    },
    /// Time, coefficient, gas temperature.
    Film {
        /// Time, coefficient and gas temperature.
        rows: Vec<(Seconds, WattsPerSquareMetreKelvin, Kelvin)>,
    },
}

impl LogRows {
    /// Rows of absorbed flux.
    ///
    /// # Errors
    /// When there is no row, or the times do not rise from 0 or later.
    pub fn flux(rows: &[(Time, HeatFluxDensity)], net: bool) -> Result<Self, ModelError> {
        let rows: Vec<_> = rows.iter().map(|(time, flux)| (time.value, flux.value)).collect();
        rising("heating log", rows.iter().map(|row| row.0))?;
        Ok(Self::Flux { rows, net })
    }

    /// Rows of coefficient and gas temperature.
    ///
    /// # Errors
    /// When there is no row, the times do not rise from 0 or later, a coefficient is negative or a temperature not above absolute zero.
    pub fn film(rows: &[(Time, HeatTransfer, ThermodynamicTemperature)]) -> Result<Self, ModelError> {
        let rows: Vec<_> = rows
            .iter()
            .map(|(time, coefficient, gas)| (time.value, coefficient.value, gas.value))
            .collect();
        rising("heating log", rows.iter().map(|row| row.0))?;
        for row in &rows {
            ModelError::not_negative("coefficient", row.1)?;
            ModelError::above_zero("gas temperature", row.2)?;
        }
        Ok(Self::Film { rows })
    }

    /// Time of the last row, s.
    pub fn end(&self) -> Seconds {
        match self {
            Self::Flux { rows, .. } => rows.last().map_or(0.0, |row| row.0),
            Self::Film { rows } => rows.last().map_or(0.0, |row| row.0),
        }
    }
}

fn rising(what: &'static str, times: impl Iterator<Item = Seconds>) -> Result<(), ModelError> {
    let mut last = None;
    for (row, time) in times.enumerate() {
        ModelError::not_negative("time of a log row", time)?;
        if last.is_some_and(|before| time <= before) {
            return Err(ModelError::NotRising { what, row: row + 1 });
        }
        last = Some(time);
    }
    if last.is_none() {
        Err(ModelError::Missing {
            what: "a row of the heating log",
        })
    } else {
        Ok(())
    }
}

/// The hot face while the gas is off.
#[derive(Clone, Debug, PartialEq)]
pub struct Idle {
    pub(crate) coefficient: WattsPerSquareMetreKelvin,
    pub(crate) temperature: Kelvin,
    pub(crate) emissivity: Table,
    /// What part of the face's view is the surroundings.
    pub(crate) view: f64,
    /// Share of the sun that the face absorbs; acts only where the heated face is in the open.
    pub(crate) solar_absorptivity: f64,
    pub(crate) purge: Option<Purge>,
}

/// The purge stream on the idle hot face, in phases that have it.
#[derive(Clone, Debug, PartialEq)]
pub struct Purge {
    pub(crate) coefficient: WattsPerSquareMetreKelvin,
    pub(crate) temperature: Kelvin,
}

impl Purge {
    /// A purge of this coefficient and temperature.
    ///
    /// # Errors
    /// When the coefficient is negative or the temperature not above absolute zero.
    pub fn new(coefficient: HeatTransfer, temperature: ThermodynamicTemperature) -> Result<Self, ModelError> {
        Ok(Self {
            coefficient: ModelError::not_negative("purge coefficient", coefficient.value)?,
            temperature: ModelError::above_zero("purge temperature", temperature.value)?,
        })
    }
}

impl Idle {
    /// An idle hot face that absorbs no sun and has no purge.
    ///
    /// # Errors
    /// When the coefficient is negative, the temperature not above absolute zero, or view or emissivity no share.
    pub fn new(coefficient: HeatTransfer, temperature: ThermodynamicTemperature, emissivity: Table, view: f64) -> Result<Self, ModelError> {
        for point in emissivity.points() {
            ModelError::share("emissivity", point.1)?;
        }
        Ok(Self {
            coefficient: ModelError::not_negative("idle coefficient", coefficient.value)?,
            temperature: ModelError::above_zero("idle temperature", temperature.value)?,
            emissivity,
            view: ModelError::share("view", view)?,
            solar_absorptivity: 0.0,
            purge: None,
        })
    }

    /// A hot end that never idles, since it follows another wall at all times.
    pub fn never() -> Self {
        Self {
            coefficient: 0.0,
            temperature: super::ROOM,
            emissivity: Table::constant(uom::si::f64::Ratio::new::<uom::si::ratio::ratio>(0.0)),
            view: 0.0,
            solar_absorptivity: 0.0,
            purge: None,
        }
    }

    /// The same face absorbing this share of the sun.
    ///
    /// # Errors
    /// When it is no share.
    pub fn with_solar_absorptivity(mut self, absorptivity: f64) -> Result<Self, ModelError> {
        self.solar_absorptivity = ModelError::share("solar absorptivity", absorptivity)?;
        Ok(self)
    }

    /// The same face with a purge.
    #[must_use]
    pub fn with_purge(mut self, purge: Option<Purge>) -> Self {
        self.purge = purge;
        self
    }
}

/// The face away from the heat.
#[derive(Clone, Debug, PartialEq)]
pub struct OuterFace {
    pub(crate) outside: Outside,
    pub(crate) limit: Option<super::Limit>,
}

impl OuterFace {
    /// An outer face, with or without a limit.
    pub fn new(outside: Outside, limit: Option<super::Limit>) -> Self {
        Self { outside, limit }
    }
}

/// What takes heat away from the outer face.
#[derive(Clone, Debug, PartialEq)]
pub enum Outside {
    /// The face is held at a temperature.
    Fixed(Kelvin),
    /// No heat leaves.
    Adiabatic,
    /// Convection, radiation, sun, and perhaps a coolant in some phases.
    Open(Losses),
}

impl Outside {
    /// A face held at a temperature.
    ///
    /// # Errors
    /// When it is not above absolute zero.
    pub fn fixed(temperature: ThermodynamicTemperature) -> Result<Self, ModelError> {
        Ok(Self::Fixed(ModelError::above_zero("fixed temperature", temperature.value)?))
    }
}

/// Losses of an outer face.
#[derive(Clone, Debug, PartialEq)]
pub struct Losses {
    /// Emissivity against temperature; `None` where radiation is switched off.
    pub(crate) emissivity: Option<Table>,
    pub(crate) solar_absorptivity: f64,
    pub(crate) convection: Convection,
    pub(crate) coolant: Option<Coolant>,
}

impl Losses {
    /// Losses by convection, and by radiation where an emissivity is given; no sun, no coolant.
    ///
    /// # Errors
    /// When an emissivity is no share.
    pub fn new(convection: Convection, emissivity: Option<Table>) -> Result<Self, ModelError> {
        for point in emissivity.iter().flat_map(|table| table.points()) {
            ModelError::share("emissivity", point.1)?;
        }
        Ok(Self {
            emissivity,
            solar_absorptivity: 0.0,
            convection,
            coolant: None,
        })
    }

    /// The same losses, absorbing this share of the sun.
    ///
    /// # Errors
    /// When it is no share.
    pub fn with_solar_absorptivity(mut self, absorptivity: f64) -> Result<Self, ModelError> {
        self.solar_absorptivity = ModelError::share("solar absorptivity", absorptivity)?;
        Ok(self)
    }

    /// The same losses, replaced by a coolant in its phases.
    #[must_use]
    pub fn with_coolant(mut self, coolant: Option<Coolant>) -> Self {
        self.coolant = coolant;
        self
    }
}

/// Convection on an outer face, to the air.
#[derive(Clone, Debug, PartialEq)]
pub enum Convection {
    /// None.
    None,
    /// A given coefficient.
    Coefficient(WattsPerSquareMetreKelvin),
    /// Natural convection.
    Natural(NaturalSurface),
    /// The wind of the surroundings.
    Forced(ForcedSurface),
    /// Both together.
    Mixed {
        /// How the air rises.
        natural: NaturalSurface,
        /// How the wind meets the face.
        forced: ForcedSurface,
    },
}

/// A surface in still air, with the length of its correlation.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum NaturalSurface {
    /// A vertical plate or a tall vertical cylinder, of this height.
    Vertical(Metres),
    /// A plate that faces up, of this area over its perimeter.
    FacingUp(Metres),
    /// A plate that faces down, of this area over its perimeter.
    FacingDown(Metres),
    /// A horizontal cylinder of this outer diameter.
    HorizontalCylinder(Metres),
}

/// A surface in the wind, with the length of its correlation.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum ForcedSurface {
    /// A plate, along this length.
    AlongPlate(Metres),
    /// A cylinder of this outer diameter, across its axis.
    AcrossCylinder(Metres),
}

impl NaturalSurface {
    /// A vertical face of this height.
    ///
    /// # Errors
    /// When it is not above zero.
    pub fn vertical(height: Length) -> Result<Self, ModelError> {
        Ok(Self::Vertical(ModelError::above_zero("length", height.value)?))
    }

    /// A face that looks up, of this area over its perimeter.
    ///
    /// # Errors
    /// When it is not above zero.
    pub fn facing_up(area_over_perimeter: Length) -> Result<Self, ModelError> {
        Ok(Self::FacingUp(ModelError::above_zero("length", area_over_perimeter.value)?))
    }

    /// A face that looks down, of this area over its perimeter.
    ///
    /// # Errors
    /// When it is not above zero.
    pub fn facing_down(area_over_perimeter: Length) -> Result<Self, ModelError> {
        Ok(Self::FacingDown(ModelError::above_zero("length", area_over_perimeter.value)?))
    }

    /// A horizontal cylinder of this outer diameter.
    ///
    /// # Errors
    /// When it is not above zero.
    pub fn horizontal_cylinder(diameter: Length) -> Result<Self, ModelError> {
        Ok(Self::HorizontalCylinder(ModelError::above_zero("diameter", diameter.value)?))
    }
}

impl ForcedSurface {
    /// A plate of this length along the wind.
    ///
    /// # Errors
    /// When it is not above zero.
    pub fn along_plate(length: Length) -> Result<Self, ModelError> {
        Ok(Self::AlongPlate(ModelError::above_zero("length", length.value)?))
    }

    /// A cylinder of this outer diameter, across the wind.
    ///
    /// # Errors
    /// When it is not above zero.
    pub fn across_cylinder(diameter: Length) -> Result<Self, ModelError> {
        Ok(Self::AcrossCylinder(ModelError::above_zero("diameter", diameter.value)?))
    }
}

impl Convection {
    /// A given coefficient.
    ///
    /// # Errors
    /// When it is negative.
    pub fn coefficient(coefficient: HeatTransfer) -> Result<Self, ModelError> {
        Ok(Self::Coefficient(ModelError::not_negative("convection coefficient", coefficient.value)?))
    }

    /// Natural convection on a vertical face of this height.
    ///
    /// # Errors
    /// When it is not above zero.
    pub fn natural_vertical(height: Length) -> Result<Self, ModelError> {
        Ok(Self::Natural(NaturalSurface::vertical(height)?))
    }

    /// Natural convection around a horizontal cylinder of this outer diameter.
    ///
    /// # Errors
    /// When it is not above zero.
    pub fn natural_horizontal_cylinder(diameter: Length) -> Result<Self, ModelError> {
        Ok(Self::Natural(NaturalSurface::horizontal_cylinder(diameter)?))
    }
}

/// A coolant of given coefficient, which replaces convection, radiation and sun on the outer face in its phases.
#[derive(Clone, Debug, PartialEq)]
pub struct Coolant {
    pub(crate) coefficient: WattsPerSquareMetreKelvin,
    pub(crate) temperature: Kelvin,
    pub(crate) phases: CoolantPhases,
}

/// In which kinds of phases a coolant flows.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct CoolantPhases {
    /// In burns.
    pub burn: bool,
    /// In holds.
    pub hold: bool,
    /// In the shutdown.
    pub shutdown: bool,
}

impl Coolant {
    /// A coolant of this coefficient and temperature.
    ///
    /// # Errors
    /// When the coefficient is negative or the temperature not above absolute zero.
    pub fn new(coefficient: HeatTransfer, temperature: ThermodynamicTemperature, phases: CoolantPhases) -> Result<Self, ModelError> {
        Ok(Self {
            coefficient: ModelError::not_negative("coolant coefficient", coefficient.value)?,
            temperature: ModelError::above_zero("coolant temperature", temperature.value)?,
            phases,
        })
    }
}
