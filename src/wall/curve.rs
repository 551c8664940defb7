//! From a node's enthalpy to its temperature and conduction potentials.

use crate::model::{Kelvin, Material, Metres};

/// Where enthalpies and potentials are anchored: at this temperature they equal it.
pub(crate) const ANCHOR: Kelvin = 300.0;

/// What a node's enthalpy says.
#[derive(Clone, Copy, Debug, Default, PartialEq)]
pub struct Point {
    /// Temperature, K.
    pub temperature: f64,
    /// dT/dy.
    pub by_unknown: f64,
    /// Conduction potential ∫ k dT / k(anchor), K, in the layer on the hot side of the node.
    pub inner: f64,
    /// Its derivative by the unknown.
    pub inner_by_unknown: f64,
    /// The same in the layer on the outer side; equal to `inner` inside a layer.
    pub outer: f64,
    /// Its derivative by the unknown.
    pub outer_by_unknown: f64,
}

/// Between two knots every property is a straight line in T, so that enthalpy and potentials are parabolas: exact, no resampling.
#[derive(Clone, Copy, Debug)]
struct Segment {
    unknown: f64,
    temperature: f64,
    /// Heat capacity over that at the anchor, and its slope.
    capacity: [f64; 2],
    /// Conductivity over that at the anchor, its slope, and the potential at the knot: hot side, outer side.
    inner: [f64; 3],
    outer: [f64; 3],
}

/// The map from enthalpy to temperature and potentials for nodes of one kind: those inside a layer, or the one between two layers in contact.
#[derive(Clone, Debug)]
pub struct Curve {
    segments: Vec<Segment>,
    /// Segment at the start of each of a row of equal bins over the knots' enthalpies, so that no search is needed.
    bins: Vec<u16>,
    first: f64,
    bins_per_unknown: f64,
    constant: bool,
}

/// A material with the volume (per hot-face area) that a node has of it.
#[derive(Clone, Copy, Debug)]
pub(crate) struct Share<'a> {
    pub material: &'a Material,
    pub volume: Metres,
}

/// Curves of no more segments than this are searched by counting.
const FEW: usize = 6;
/// Most bins of a curve; the bins are as narrow as the closest knots, up to this.
const MOST_BINS: f64 = 4096.0;

impl Curve {
    /// The curve of a node that lies between two materials (the same twice: inside a layer).
    pub(crate) fn new(inner: Share<'_>, outer: Share<'_>) -> Self {
        let tables = [
            &inner.material.heat_capacity,
            &outer.material.heat_capacity,
            &inner.material.conductivity,
            &outer.material.conductivity,
        ];
        let mut knots: Vec<Kelvin> = tables
            .iter()
            .filter(|table| table.range().is_some())
            .flat_map(|table| table.points().iter().map(|point| point.0))
            .collect();
        knots.sort_by(f64::total_cmp);
        knots.dedup();
        let heat = |share: Share<'_>, temperature: Kelvin| {
            let (value, slope) = share.material.heat_capacity.value_and_slope(temperature);
            let mass = share.volume * share.material.density;
            [value * mass, slope * mass]
        };
        let capacity = heat(inner, ANCHOR)[0] + heat(outer, ANCHOR)[0];
        let mut segments: Vec<Segment> = Vec::with_capacity(knots.len() + 1);
        for start in std::iter::once(0.0).chain(knots.iter().copied().filter(|knot| *knot > 0.0)) {
            let [a, b] = [heat(inner, start), heat(outer, start)];
            let conduction = |share: Share<'_>| {
                let (value, slope) = share.material.conductivity.value_and_slope(start);
                let anchor = share.material.conductivity.value(ANCHOR);
                [value / anchor, slope / anchor, 0.0]
            };
            let mut segment = Segment {
                unknown: 0.0,
                temperature: start,
                capacity: [(a[0] + b[0]) / capacity, (a[1] + b[1]) / capacity],
                inner: conduction(inner),
                outer: conduction(outer),
            };
            if let Some(before) = segments.last() {
                let end = before.at(start - before.temperature);
                segment.unknown = end.0;
                segment.inner[2] = end.1;
                segment.outer[2] = end.2;
            }
            segments.push(segment);
        }
        // Anchor: shift so that unknown and potentials equal the temperature at ANCHOR.
        let holder = segments.partition_point(|segment| segment.temperature <= ANCHOR).saturating_sub(1);
        let (unknown, inner_potential, outer_potential) = segments[holder].at(ANCHOR - segments[holder].temperature);
        for segment in &mut segments {
            segment.unknown += ANCHOR - unknown;
            segment.inner[2] += ANCHOR - inner_potential;
            segment.outer[2] += ANCHOR - outer_potential;
        }
        let constant = segments.len() == 1;
        let first = segments.get(1).map_or(0.0, |segment| segment.unknown);
        let last = segments.last().map_or(0.0, |segment| segment.unknown);
        let narrowest = segments
            .windows(2)
            .skip(1)
            .map(|pair| pair[1].unknown - pair[0].unknown)
            .fold(f64::INFINITY, f64::min);
        let count = ((last - first) / narrowest).ceil().clamp(1.0, MOST_BINS);
        let bins_per_unknown = if last > first { count / (last - first) } else { 0.0 };
        let bins = (0..=count as usize)
            .map(|bin| {
                let start = first + bin as f64 / bins_per_unknown.max(f64::MIN_POSITIVE);
                let index = segments.partition_point(|segment| segment.unknown <= start).saturating_sub(1);
                u16::try_from(index).unwrap_or(u16::MAX)
            })
            .collect();
        Self {
            segments,
            bins,
            first,
            bins_per_unknown,
            constant,
        }
    }

    /// Whether temperature, unknown and both potentials are one and the same.
    pub fn is_constant(&self) -> bool {
        self.constant
    }

    /// What an unknown says.
    #[inline]
    pub fn point(&self, unknown: f64) -> Point {
        let (segment, x) = self.place(unknown);
        let by_unknown = 1.0 / (segment.capacity[0] + segment.capacity[1] * x);
        Point {
            temperature: segment.temperature + x,
            by_unknown,
            inner: segment.potential(segment.inner, x),
            inner_by_unknown: (segment.inner[0] + segment.inner[1] * x) * by_unknown,
            outer: segment.potential(segment.outer, x),
            outer_by_unknown: (segment.outer[0] + segment.outer[1] * x) * by_unknown,
        }
    }

    /// Temperature and both potentials that an unknown says.
    #[inline]
    pub fn values(&self, unknown: f64) -> [f64; 3] {
        let (segment, x) = self.place(unknown);
        [
            segment.temperature + x,
            segment.potential(segment.inner, x),
            segment.potential(segment.outer, x),
        ]
    }

    /// The segment that an unknown lies in, and how many kelvin from its start.
    #[inline]
    fn place(&self, unknown: f64) -> (&Segment, f64) {
        let segment = self.segment(unknown);
        let along = unknown - segment.unknown;
        let x = if segment.capacity[1] == 0.0 {
            along / segment.capacity[0]
        } else {
            // The root of along = x (c₀ + c₁ x / 2) that does not cancel.
            2.0 * along
                / (segment.capacity[0]
                    + (segment.capacity[0] * segment.capacity[0] + 2.0 * segment.capacity[1] * along)
                        .max(0.0)
                        .sqrt())
        };
        (segment, x)
    }

    /// The temperature that an unknown says.
    pub fn temperature(&self, unknown: f64) -> Kelvin {
        let (segment, x) = self.place(unknown);
        segment.temperature + x
    }

    /// The unknown at a temperature.
    pub fn unknown(&self, temperature: Kelvin) -> f64 {
        let holder = self
            .segments
            .partition_point(|segment| segment.temperature <= temperature)
            .saturating_sub(1);
        let segment = &self.segments[holder];
        segment.at(temperature - segment.temperature).0
    }

    #[inline]
    fn segment(&self, unknown: f64) -> &Segment {
        if self.segments.len() <= FEW {
            // Counting is quicker than looking up where there is little to count.
            let passed = self.segments[1..].iter().filter(|segment| unknown >= segment.unknown).count();
            return &self.segments[passed];
        }
        if unknown < self.first {
            return &self.segments[0];
        }
        let bin = ((unknown - self.first) * self.bins_per_unknown) as usize;
        let mut index = usize::from(self.bins[bin.min(self.bins.len() - 1)]);
        while index + 1 < self.segments.len() && unknown >= self.segments[index + 1].unknown {
            index += 1;
        }
        &self.segments[index]
    }
}

impl Segment {
    /// A potential (conductivity, its slope, potential at the knot) at `x` kelvin from its start.
    #[inline]
    fn potential(&self, [value, slope, start]: [f64; 3], x: f64) -> f64 {
        start + x * (value + 0.5 * slope * x)
    }

    /// Unknown and both potentials at `x` kelvin from its start.
    fn at(&self, x: f64) -> (f64, f64, f64) {
        (
            self.potential([self.capacity[0], self.capacity[1], self.unknown], x),
            self.potential(self.inner, x),
            self.potential(self.outer, x),
        )
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::model::{MaterialValues, ModelError, Table};
    use uom::si::f64::{MassDensity, SpecificHeatCapacity, ThermalConductivity, ThermodynamicTemperature};
    use uom::si::{
        mass_density::kilogram_per_cubic_meter, specific_heat_capacity::joule_per_kilogram_kelvin, thermal_conductivity::watt_per_meter_kelvin,
        thermodynamic_temperature::kelvin,
    };

    fn material(heat: &[(f64, f64)], conduction: &[(f64, f64)]) -> Result<Material, ModelError> {
        let at = ThermodynamicTemperature::new::<kelvin>;
        let heat: Vec<_> = heat
            .iter()
            .map(|row| (at(row.0), SpecificHeatCapacity::new::<joule_per_kilogram_kelvin>(row.1)))
            .collect();
        let conduction: Vec<_> = conduction
            .iter()
            .map(|row| (at(row.0), ThermalConductivity::new::<watt_per_meter_kelvin>(row.1)))
            .collect();
        Material::new(MaterialValues {
            name: "test".into(),
            density: MassDensity::new::<kilogram_per_cubic_meter>(8000.0),
            heat_capacity: Table::new(&heat)?,
            conductivity: Table::new(&conduction)?,
            melts: None,
            decomposes: None,
        })
    }

    #[test]
    fn there_and_back_with_the_slopes_of_the_tables() -> Result<(), ModelError> {
        let steel = material(
            &[(293.0, 450.0), (900.0, 700.0), (1008.0, 5000.0), (1010.0, 900.0)],
            &[(273.0, 54.0), (1073.0, 27.0)],
        )?;
        let felt = material(&[(20.0, 10.0), (300.0, 900.0)], &[(500.0, 0.05), (900.0, 0.2)])?;
        for (inner, outer) in [(&steel, &steel), (&steel, &felt), (&felt, &felt)] {
            let curve = Curve::new(
                Share {
                    material: inner,
                    volume: 0.001,
                },
                Share {
                    material: outer,
                    volume: 0.002,
                },
            );
            assert!((curve.unknown(ANCHOR) - ANCHOR).abs() < 1e-9);
            for temperature in [5.0, 150.0, 299.0, 301.0, 450.0, 899.9, 1007.0, 1009.0, 1500.0, 4000.0] {
                let unknown = curve.unknown(temperature);
                let point = curve.point(unknown);
                assert!((point.temperature - temperature).abs() < 1e-9, "{} for {temperature}", point.temperature);
                let step = 1e-4;
                let (up, down) = (curve.point(unknown + step), curve.point(unknown - step));
                assert!(((up.temperature - down.temperature) / (2.0 * step) - point.by_unknown).abs() < 1e-5 * point.by_unknown);
                assert!(((up.inner - down.inner) / (2.0 * step) - point.inner_by_unknown).abs() < 1e-4 * point.inner_by_unknown);
                assert!(((up.outer - down.outer) / (2.0 * step) - point.outer_by_unknown).abs() < 1e-4 * point.outer_by_unknown);
            }
        }
        Ok(())
    }
}
