//! A material as the wall sees it.

use super::{Kelvin, ModelError, Table};
use uom::si::f64::{MassDensity, ThermodynamicTemperature};

/// A material: density and two properties against temperature, and the temperatures at which it ceases to be what it was.
#[derive(Clone, Debug, PartialEq)]
pub struct Material {
    pub(crate) name: String,
    pub(crate) density: f64,
    pub(crate) heat_capacity: Table,
    pub(crate) conductivity: Table,
    pub(crate) melts: Option<Kelvin>,
    pub(crate) decomposes: Option<Kelvin>,
}

/// The values of a [`Material`], for [`Material::new`].
#[derive(Clone, Debug)]
pub struct MaterialValues {
    /// Name in the case file or the library.
    pub name: String,
    /// Density.
    pub density: MassDensity,
    /// Specific heat capacity against temperature, J/(kg·K).
    pub heat_capacity: Table,
    /// Thermal conductivity against temperature, W/(m·K).
    pub conductivity: Table,
    /// Melting point: above it the run is outside the model.
    pub melts: Option<ThermodynamicTemperature>,
    /// Decomposition: above it a warning.
    pub decomposes: Option<ThermodynamicTemperature>,
}

impl Material {
    /// A material of these values.
    ///
    /// # Errors
    /// When density, heat capacity or conductivity is not above zero throughout.
    pub fn new(values: MaterialValues) -> Result<Self, ModelError> {
        Ok(Self {
            density: ModelError::above_zero("density", values.density.value)?,
            heat_capacity: positive("heat capacity", values.heat_capacity)?,
            conductivity: positive("conductivity", values.conductivity)?,
            name: values.name,
            melts: values.melts.map(|temperature| temperature.value),
            decomposes: values.decomposes.map(|temperature| temperature.value),
        })
    }

    /// Name in the case file or the library.
    pub fn name(&self) -> &str {
        &self.name
    }
}

fn positive(what: &'static str, table: Table) -> Result<Table, ModelError> {
    for point in table.points() {
        ModelError::above_zero(what, point.1)?;
    }
    Ok(table)
}
