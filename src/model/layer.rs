//! Layers, the joints between them, and limits.

use super::{Kelvin, Material, Metres, ModelError, Seconds, WattsPerSquareMetreKelvin};
use std::sync::Arc;
use uom::si::f64::{Area, HeatTransfer, Length, ThermodynamicTemperature, Time};

/// One layer of a wall.
#[derive(Clone, Debug)]
pub struct Layer {
    pub(crate) name: String,
    pub(crate) material: Arc<Material>,
    pub(crate) thickness: Metres,
    pub(crate) limit: Option<Limit>,
    /// What lies between this layer and the next; `None`: perfect contact without a limit.
    pub(crate) joint: Option<Joint>,
    /// In a bar: its cross-section.
    pub(crate) cross_section: Option<CrossSection>,
}

/// Cross-section of a layer of a bar.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct CrossSection {
    /// Area, m².
    pub(crate) area: f64,
    /// Perimeter.
    pub(crate) perimeter: Metres,
}

impl CrossSection {
    /// A cross-section of this area and perimeter.
    ///
    /// # Errors
    /// When either is not above zero.
    pub fn new(area: Area, perimeter: Length) -> Result<Self, ModelError> {
        Ok(Self {
            area: ModelError::above_zero("section", area.value)?,
            perimeter: ModelError::above_zero("perimeter", perimeter.value)?,
        })
    }
}

impl Layer {
    /// A layer in perfect contact with the next, without a limit.
    ///
    /// # Errors
    /// When the thickness is not above zero.
    pub fn new(name: impl Into<String>, material: Arc<Material>, thickness: Length) -> Result<Self, ModelError> {
        Ok(Self {
            name: name.into(),
            material,
            thickness: ModelError::above_zero("thickness", thickness.value)?,
            limit: None,
            joint: None,
            cross_section: None,
        })
    }

    /// The same layer with a limit.
    #[must_use]
    pub fn with_limit(mut self, limit: Option<Limit>) -> Self {
        self.limit = limit;
        self
    }

    /// The same layer with a joint to the next.
    #[must_use]
    pub fn with_joint(mut self, joint: Option<Joint>) -> Self {
        self.joint = joint;
        self
    }

    /// The same layer as a length of a bar.
    #[must_use]
    pub fn with_cross_section(mut self, cross_section: CrossSection) -> Self {
        self.cross_section = Some(cross_section);
        self
    }

    /// Its name.
    pub fn name(&self) -> &str {
        &self.name
    }

    /// Its material.
    pub fn material(&self) -> &Material {
        &self.material
    }

    /// Its thickness, m.
    pub fn thickness(&self) -> Metres {
        self.thickness
    }
}

/// What lies between two layers.
#[derive(Clone, Debug)]
pub struct Joint {
    pub(crate) resistance: Option<Resistance>,
    pub(crate) limit: Option<Limit>,
}

impl Joint {
    /// A joint; without a resistance it is a perfect contact that only carries a limit.
    pub fn new(resistance: Option<Resistance>, limit: Option<Limit>) -> Self {
        Self { resistance, limit }
    }

    /// Whether the two sides have temperatures of their own.
    pub fn resists(&self) -> bool {
        self.resistance.is_some()
    }
}

/// What resists the heat in a joint.
#[derive(Clone, Debug)]
pub enum Resistance {
    /// A contact of fixed conductance.
    Contact(WattsPerSquareMetreKelvin),
    /// A gap: conduction through its gas, and radiation across.
    Gap(Gap),
}

impl Resistance {
    /// A contact of this conductance.
    ///
    /// # Errors
    /// When the conductance is not above zero.
    pub fn contact(conductance: HeatTransfer) -> Result<Self, ModelError> {
        Ok(Self::Contact(ModelError::above_zero("joint conductance", conductance.value)?))
    }
}

/// A gap between two layers.
#[derive(Clone, Debug)]
pub struct Gap {
    pub(crate) width: Metres,
    pub(crate) gas: GapGas,
    /// Emissivities of the two sides, hot side first.
    pub(crate) emissivity: [f64; 2],
}

impl Gap {
    /// A gap; emissivities of the two sides, hot side first.
    ///
    /// # Errors
    /// When the width is not above zero or an emissivity is no share.
    pub fn new(width: Length, gas: GapGas, emissivity: [f64; 2]) -> Result<Self, ModelError> {
        for value in emissivity {
            ModelError::share("gap emissivity", value)?;
        }
        Ok(Self {
            width: ModelError::above_zero("gap", width.value)?,
            gas,
            emissivity,
        })
    }
}

/// What fills a gap.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum GapGas {
    /// Dry air.
    Air,
    /// Nitrogen.
    Nitrogen,
    /// Helium.
    Helium,
    /// Hydrogen.
    Hydrogen,
    /// A vacuum: radiation alone crosses.
    None,
}

/// A temperature that must not be passed.
#[derive(Clone, Debug, PartialEq)]
pub struct Limit {
    pub(crate) temperature: Kelvin,
    pub(crate) kind: LimitKind,
    pub(crate) origin: LimitOrigin,
    /// Total time allowed above it.
    pub(crate) allowed_over: Seconds,
}

impl Limit {
    /// A limit that holds at ≤, with a total time allowed above it.
    ///
    /// # Errors
    /// When the temperature is not above absolute zero or the time is negative.
    pub fn new(temperature: ThermodynamicTemperature, kind: LimitKind, origin: LimitOrigin, allowed_over: Time) -> Result<Self, ModelError> {
        Ok(Self {
            temperature: ModelError::above_zero("limit", temperature.value)?,
            kind,
            origin,
            allowed_over: ModelError::not_negative("time over the limit", allowed_over.value)?,
        })
    }
}

/// What a limit protects.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum LimitKind {
    /// Usual service temperature.
    Service,
    /// Strength of the part.
    Strength,
    /// Melting.
    Melting,
    /// A bond line.
    Bond,
    /// A seal.
    Seal,
    /// Propellant in contact (decomposition, boiling, coking).
    Propellant,
}

/// Whose limit it is.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum LimitOrigin {
    /// Written in the case, at the place or at a material of its own.
    Case,
    /// The built-in material's: no design margin.
    Library,
}
