//! One wall section.

use super::{CrossSection, Heating, Idle, Layer, Losses, Metres, ModelError, OuterFace, Place, Resistance, Seconds, StartProfile};
use uom::si::f64::{Length, Time};

/// How heat spreads through the wall.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Shape {
    /// Flat: the same area at every depth.
    Plane,
    /// Round, heated on the inside.
    Cylinder {
        /// Radius of the hot face.
        inner_radius: Metres,
    },
    /// A bar heated at one end: each layer is a length of it, with a cross-section of its own, and may lose heat from its sides.
    Bar,
}

impl Shape {
    /// A round wall of this inner diameter.
    ///
    /// # Errors
    /// When it is not above zero.
    pub fn cylinder(inner_diameter: Length) -> Result<Self, ModelError> {
        Ok(Self::Cylinder {
            inner_radius: ModelError::above_zero("inner diameter", inner_diameter.value)? / 2.0,
        })
    }
}

/// A thermocouple, or any point of interest.
#[derive(Clone, Debug, PartialEq)]
pub struct Probe {
    pub(crate) name: String,
    /// Depth from the hot face.
    pub(crate) depth: Metres,
    /// The layer whose side it lies on, where the depth is a boundary.
    pub(crate) layer: usize,
    /// First-order time constant; 0: it reads the wall at once.
    pub(crate) lag: Seconds,
}

/// One wall section: layers from the hot face outwards, and what happens at its faces.
#[derive(Clone, Debug)]
pub struct Station {
    pub(crate) name: String,
    pub(crate) shape: Shape,
    pub(crate) layers: Vec<Layer>,
    /// `None` only where nothing burns.
    pub(crate) heating: Option<Heating>,
    pub(crate) idle: Idle,
    pub(crate) outer: OuterFace,
    pub(crate) probes: Vec<Probe>,
    /// What takes heat from the sides of a bar, layer by layer; empty: nothing does.
    pub(crate) sides: Vec<Losses>,
    /// Where it starts; `None`: at the model's start temperature.
    pub(crate) start: Option<StartProfile>,
}

/// The parts of a [`Station`], for [`Station::new`].
#[derive(Clone, Debug)]
pub struct StationValues {
    /// Its name, unique in the model.
    pub name: String,
    /// Flat or round.
    pub shape: Shape,
    /// Layers from the hot face outwards; at least one.
    pub layers: Vec<Layer>,
    /// The hot face while burning; `None` only where nothing burns.
    pub heating: Option<Heating>,
    /// The hot face while the gas is off.
    pub idle: Idle,
    /// The outer face.
    pub outer: OuterFace,
}

impl Station {
    /// A wall section without probes.
    ///
    /// # Errors
    /// When it has no layer, two layers share a name, the outermost layer has a joint, or a layer of a bar has no cross-section.
    pub fn new(values: StationValues) -> Result<Self, ModelError> {
        let Some(outermost) = values.layers.last() else {
            return Err(ModelError::Missing { what: "a layer" });
        };
        if outermost.joint.is_some() {
            return Err(ModelError::Missing {
                what: "a layer outside the last joint",
            });
        }
        for (index, layer) in values.layers.iter().enumerate() {
            if values.layers[..index].iter().any(|earlier| earlier.name == layer.name) {
                return Err(ModelError::Repeated { name: layer.name.clone() });
            }
        }
        if values.shape == Shape::Bar && values.layers.iter().any(|layer| layer.cross_section.is_none()) {
            return Err(ModelError::Missing {
                what: "the cross-section of a layer of a bar",
            });
        }
        let StationValues {
            name,
            shape,
            layers,
            heating,
            idle,
            outer,
        } = values;
        Ok(Self {
            name,
            shape,
            layers,
            heating,
            idle,
            outer,
            probes: Vec::new(),
            sides: Vec::new(),
            start: None,
        })
    }

    /// The same bar losing heat from its sides: one entry for each layer, all per area of that side (a round bar broadside to the sun catches 1/π of it).
    /// A coolant in them is not counted.
    ///
    /// # Errors
    /// When it is no bar, or there are not as many entries as layers.
    pub fn with_sides(mut self, sides: Vec<Losses>) -> Result<Self, ModelError> {
        if self.shape != Shape::Bar || sides.len() != self.layers.len() {
            return Err(ModelError::Missing {
                what: "a bar with an entry of side losses for each layer",
            });
        }
        self.sides = sides;
        Ok(self)
    }

    /// The same station starting from a profile of its own, such as an earlier run left. Its layers are those of the station: a caller's promise.
    #[must_use]
    pub fn with_start(mut self, start: StartProfile) -> Self {
        self.start = Some(start);
        self
    }

    /// Area at a distance from the hot face, m, in a layer, over the area of the hot face (of a bar: its section at the heated end).
    pub fn area_ratio(&self, layer: usize, distance: Metres) -> f64 {
        match self.shape {
            Shape::Plane => 1.0,
            Shape::Cylinder { inner_radius } => (inner_radius + distance) / inner_radius,
            Shape::Bar => match (self.layers[0].cross_section, self.layers[layer].cross_section) {
                (Some(first), Some(own)) => own.area / first.area,
                _ => 1.0,
            },
        }
    }

    /// Volume of a layer between two distances from the hot face, m, per area of the hot face, m.
    pub fn volume(&self, layer: usize, from: Metres, to: Metres) -> Metres {
        (to - from) * self.area_ratio(layer, 0.5 * (from + to))
    }

    /// Side area of a length of a layer, m, per area of the hot face; 0 except in a bar.
    pub fn side_area(&self, layer: usize, length: Metres) -> f64 {
        match (self.layers[0].cross_section, self.layers[layer].cross_section) {
            (Some(CrossSection { area, .. }), Some(own)) if self.shape == Shape::Bar => own.perimeter * length / area,
            _ => 0.0,
        }
    }

    /// Area of the outer face over that of the hot face.
    pub fn outer_area(&self) -> f64 {
        self.area_ratio(self.layers.len() - 1, self.outer_distance())
    }

    /// Area through which a joint passes heat, over that of the hot face: where two lengths of a bar differ, the smaller one touches.
    pub fn joint_area(&self, joint: usize) -> f64 {
        let distance = self.distances()[joint] + self.layers[joint].thickness;
        let inner = self.area_ratio(joint, distance);
        match self.shape {
            Shape::Bar => inner.min(self.area_ratio(joint + 1, distance)),
            Shape::Plane | Shape::Cylinder { .. } => inner,
        }
    }

    /// The same station with one more probe, at a depth from the hot face. On a boundary it lies on the hot side, unless `layer` says otherwise.
    ///
    /// # Errors
    /// When the depth lies outside the wall or the named layer, or the lag is negative.
    pub fn with_probe(mut self, name: impl Into<String>, depth: Length, layer: Option<usize>, lag: Time) -> Result<Self, ModelError> {
        let name = name.into();
        let depth = depth.value;
        let outside = || ModelError::OutsideTheWall { probe: name.clone(), depth };
        // A micrometre of grace: depths are sums of thicknesses written in other units.
        let grace = 1e-6 * self.thickness();
        let boundaries = self.boundaries();
        let holds = |index: usize| depth >= boundaries[index] - grace && depth <= boundaries[index + 1] + grace;
        let layer = match layer {
            Some(index) if index < self.layers.len() && holds(index) => index,
            Some(_) => return Err(outside()),
            None => (0..self.layers.len()).find(|&index| holds(index)).ok_or_else(outside)?,
        };
        let depth = depth.clamp(boundaries[layer], boundaries[layer + 1]);
        let lag = ModelError::not_negative("lag", lag.value)?;
        self.probes.push(Probe { name, depth, layer, lag });
        Ok(self)
    }

    /// Its name.
    pub fn name(&self) -> &str {
        &self.name
    }

    /// Its layers, from the hot face outwards.
    pub fn layers(&self) -> &[Layer] {
        &self.layers
    }

    /// Its probes.
    pub fn probes(&self) -> &[Probe] {
        &self.probes
    }

    /// Depths of the boundaries: 0, each layer boundary, the thickness, m.
    pub fn boundaries(&self) -> Vec<Metres> {
        let mut depth = 0.0;
        let mut depths = vec![0.0];
        for layer in &self.layers {
            depth += layer.thickness;
            depths.push(depth);
        }
        depths
    }

    /// Thickness of the whole wall, m.
    pub fn thickness(&self) -> Metres {
        self.layers.iter().map(|layer| layer.thickness).sum()
    }

    /// Distance of each layer's hot side from the hot face, m: its depth, and in a cylinder the gaps before it, which push the outer layers out.
    pub(crate) fn distances(&self) -> Vec<Metres> {
        let boundaries = self.boundaries();
        let mut gaps = 0.0;
        (0..self.layers.len())
            .map(|index| {
                let distance = boundaries[index] + gaps;
                if let Some(Resistance::Gap(gap)) = self.resistance(index) {
                    gaps += gap.width;
                }
                distance
            })
            .collect()
    }

    /// Mass per area of the hot face, kg/m².
    pub fn mass(&self) -> f64 {
        let part = |(index, from): (usize, Metres)| {
            let layer = &self.layers[index];
            layer.material.density * self.volume(index, from, from + layer.thickness)
        };
        self.distances().into_iter().enumerate().map(part).sum()
    }

    /// Distance of the outer face from the hot face, m, gaps included.
    pub fn outer_distance(&self) -> Metres {
        self.distances().last().copied().unwrap_or(0.0) + self.layers.last().map_or(0.0, |layer| layer.thickness)
    }

    /// The face of another station that the hot end follows, if it does.
    pub fn followed(&self) -> Option<&super::Followed> {
        match &self.heating.as_ref()?.model {
            super::HeatingModel::Wall(followed) => Some(followed),
            _ => None,
        }
    }

    /// What resists the heat between layer `index` and the next; `None`: perfect contact.
    pub(crate) fn resistance(&self, index: usize) -> Option<&Resistance> {
        self.layers[index].joint.as_ref().and_then(|joint| joint.resistance.as_ref())
    }

    /// Whether the station has such a place.
    pub fn has(&self, place: Place) -> bool {
        match place {
            Place::HotFace | Place::OuterFace | Place::Everywhere => true,
            Place::Layer(index) => index < self.layers.len(),
            Place::Joint(index) => index + 1 < self.layers.len(),
            Place::Probe(index) => index < self.probes.len(),
        }
    }

    /// The name of a place, as the case file writes it.
    pub fn place_name(&self, place: Place) -> String {
        match place {
            Place::HotFace => "hot-face".to_owned(),
            Place::OuterFace => "outer-face".to_owned(),
            Place::Everywhere => "everywhere".to_owned(),
            Place::Layer(index) => self.layers[index].name.clone(),
            Place::Joint(index) => format!("{}|{}", self.layers[index].name, self.layers[index + 1].name),
            Place::Probe(index) => self.probes[index].name.clone(),
        }
    }
}
