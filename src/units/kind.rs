//! What may be due at a place.

use super::Dimension;

/// What kind of quantity is due.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Kind {
    /// A duration or a point in time.
    Time,
    /// A length, depth or thickness.
    Length,
    /// An area.
    Area,
    /// A temperature: a lone degC or degF counts from its own zero.
    Temperature,
    /// A temperature difference: a lone degC or degF is a step of its scale.
    TemperatureDifference,
    /// An absolute pressure.
    Pressure,
    /// Heat per area and time.
    HeatFlux,
    /// Heat per area, time and kelvin: a film coefficient or a joint's conductance.
    HeatTransferCoefficient,
    /// Thermal resistance of an area.
    Resistance,
    /// Thermal conductivity.
    Conductivity,
    /// Specific heat capacity.
    HeatCapacity,
    /// Mass per volume.
    Density,
    /// A speed.
    Velocity,
    /// An angle.
    Angle,
    /// Mass per amount of substance.
    MolarMass,
    /// Dynamic viscosity.
    Viscosity,
    /// A pure number.
    Number,
}

impl Kind {
    /// All of them.
    pub const ALL: [Self; 17] = [
        Self::Time,
        Self::Length,
        Self::Area,
        Self::Temperature,
        Self::TemperatureDifference,
        Self::Pressure,
        Self::HeatFlux,
        Self::HeatTransferCoefficient,
        Self::Resistance,
        Self::Conductivity,
        Self::HeatCapacity,
        Self::Density,
        Self::Velocity,
        Self::Angle,
        Self::MolarMass,
        Self::Viscosity,
        Self::Number,
    ];

    /// Its dimension.
    pub const fn dimension(self) -> Dimension {
        Dimension::new(match self {
            Self::Time => [0, 0, 1, 0, 0, 0],
            Self::Length => [1, 0, 0, 0, 0, 0],
            Self::Area => [2, 0, 0, 0, 0, 0],
            Self::Temperature | Self::TemperatureDifference => [0, 0, 0, 1, 0, 0],
            Self::Pressure => [-1, 1, -2, 0, 0, 0],
            Self::HeatFlux => [0, 1, -3, 0, 0, 0],
            Self::HeatTransferCoefficient => [0, 1, -3, -1, 0, 0],
            Self::Resistance => [0, -1, 3, 1, 0, 0],
            Self::Conductivity => [1, 1, -3, -1, 0, 0],
            Self::HeatCapacity => [2, 0, -2, -1, 0, 0],
            Self::Density => [-3, 1, 0, 0, 0, 0],
            Self::Velocity => [1, 0, -1, 0, 0, 0],
            Self::Angle => [0, 0, 0, 0, 0, 1],
            Self::MolarMass => [0, 1, 0, 0, -1, 0],
            Self::Viscosity => [-1, 1, -1, 0, 0, 0],
            Self::Number => [0; 6],
        })
    }

    /// In words, with its article.
    pub const fn words(self) -> &'static str {
        match self {
            Self::Time => "a time",
            Self::Length => "a length",
            Self::Area => "an area",
            Self::Temperature => "a temperature",
            Self::TemperatureDifference => "a temperature difference",
            Self::Pressure => "an absolute pressure",
            Self::HeatFlux => "a heat flux",
            Self::HeatTransferCoefficient => "a heat transfer coefficient",
            Self::Resistance => "a thermal resistance of an area",
            Self::Conductivity => "a thermal conductivity",
            Self::HeatCapacity => "a specific heat capacity",
            Self::Density => "a density",
            Self::Velocity => "a velocity",
            Self::Angle => "an angle",
            Self::MolarMass => "a molar mass",
            Self::Viscosity => "a dynamic viscosity",
            Self::Number => "a pure number",
        }
    }

    /// Units that fit, the metric ones first.
    pub const fn examples(self) -> &'static [&'static str] {
        match self {
            Self::Time => &["s", "ms", "min", "h"],
            Self::Length => &["mm", "m", "in", "mil"],
            Self::Area => &["mm2", "cm2", "m2", "in2"],
            Self::Temperature => &["degC", "K", "degF"],
            Self::TemperatureDifference => &["K", "degF"],
            Self::Pressure => &["bar", "kPa", "atm", "psia"],
            Self::HeatFlux => &["MW/m2", "W/m2", "Btu/in2/s"],
            Self::HeatTransferCoefficient => &["W/m2/K", "kW/m2/K", "Btu/h/ft2/degF"],
            Self::Resistance => &["m2.K/W", "cm2.K/W", "h.ft2.degF/Btu"],
            Self::Conductivity => &["W/m/K", "Btu/h/ft/degF"],
            Self::HeatCapacity => &["J/kg/K", "kJ/kg/K", "Btu/lb/degF"],
            Self::Density => &["kg/m3", "g/cm3", "lb/ft3"],
            Self::Velocity => &["m/s", "ft/s", "mph", "knot"],
            Self::Angle => &["deg"],
            Self::MolarMass => &["g/mol", "kg/kmol"],
            Self::Viscosity => &["Pa.s"],
            Self::Number => &[],
        }
    }

    /// Its SI unit, in the case file's grammar; empty for a pure number.
    pub const fn si(self) -> &'static str {
        match self {
            Self::Time => "s",
            Self::Length => "m",
            Self::Area => "m2",
            Self::Temperature | Self::TemperatureDifference => "K",
            Self::Pressure => "Pa",
            Self::HeatFlux => "W/m2",
            Self::HeatTransferCoefficient => "W/m2/K",
            Self::Resistance => "m2.K/W",
            Self::Conductivity => "W/m/K",
            Self::HeatCapacity => "J/kg/K",
            Self::Density => "kg/m3",
            Self::Velocity => "m/s",
            Self::Angle => "rad",
            Self::MolarMass => "kg/mol",
            Self::Viscosity => "Pa.s",
            Self::Number => "",
        }
    }

    /// `units that fit: mm, m, in, mil`.
    pub fn units_that_fit(self) -> String {
        format!("units that fit: {}", self.examples().join(", "))
    }

    /// What a dimension is called, or the dimension itself in SI base units.
    pub(super) fn of(dimension: Dimension) -> String {
        Self::ALL
            .into_iter()
            .find(|kind| kind.dimension() == dimension)
            .map_or_else(|| format!("a quantity in {dimension}"), |kind| kind.words().to_owned())
    }
}
