//! Where the nodes lie: a value, made once from the nominal case and handed to every study.

use super::system::outside_losses;
use crate::model::{HeatingModel, KelvinDifference, LogRows, Metres, Model, Outside, PhaseKind, Seconds, Station, WattsPerSquareMetre};

/// Node positions in each layer as shares of its thickness, 0 and 1 included: layers stretch with their thickness, the grid stays.
#[derive(Clone, Debug, PartialEq)]
pub struct Grid {
    layers: Vec<Vec<f64>>,
}

/// Cells widen by this share of their distance from where gradients are steepest.
const GROWTH: f64 = 0.10;
/// Fewest cells in a layer.
const FEWEST_CELLS: usize = 8;
/// Most cells in a layer.
const MOST_CELLS: usize = 1200;

impl Grid {
    /// A grid for one station: finest at the hot face and on both sides of each layer boundary, there as fine as the temperature step across
    /// a cell and the diffusion length of the shortest phase that counts ask for. `fineness` multiplies the number of cells.
    pub fn new(model: &Model, station: &Station, fineness: f64) -> Self {
        let promised = first_promised_time(model);
        let flux = strongest_flux(model, station);
        let mut reached: Seconds = promised;
        let mut layers = Vec::with_capacity(station.layers.len());
        let last = station.layers.len() - 1;
        for (index, layer) in station.layers.iter().enumerate() {
            let material = &layer.material;
            let conductivity = material.conductivity.smallest();
            let diffusivity = conductivity / (material.density * material.heat_capacity.largest());
            let length = (diffusivity * reached).sqrt();
            // A boundary that is stepped at once needs cells that are a small share of the diffusion length.
            let mut near = 0.06 * length;
            if index == 0 {
                near = near.min(face_cell(model.tolerance, flux, conductivity, (diffusivity * promised).sqrt()));
            }
            let mut far = if index < last {
                0.06 * length.max(0.2 * layer.thickness)
            } else {
                layer.thickness
            };
            if index == last {
                let length = (diffusivity * promised).sqrt();
                far = far.min(match outer_jump(model, station, flux) {
                    Jump::Temperature => 0.06 * length,
                    Jump::Flux(jump) => face_cell(model.tolerance, jump, conductivity, length),
                });
            }
            // Heat needs this long to cross the layer; what lies behind it is stepped no faster.
            reached = reached.max(0.1 * layer.thickness * layer.thickness / diffusivity);
            layers.push(positions(layer.thickness, near, far, fineness));
        }
        Self { layers }
    }

    /// A grid of equal cells, so many in each layer.
    pub fn uniform(cells: &[usize]) -> Self {
        let shares = |count: &usize| (0..=*count).map(|index| index as f64 / *count as f64).collect();
        Self {
            layers: cells.iter().map(shares).collect(),
        }
    }

    /// Every second node: cells of twice the width, for an estimate of the error.
    #[must_use]
    pub fn halved(&self) -> Self {
        Self {
            layers: self.layers.iter().map(|shares| shares.iter().copied().step_by(2).collect()).collect(),
        }
    }

    /// Node positions in each layer, as shares of its thickness.
    pub fn layers(&self) -> &[Vec<f64>] {
        &self.layers
    }
}

/// The shortest time after a change of phase at which temperatures are promised: a twentieth of its phase, or 1 s.
fn first_promised_time(model: &Model) -> Seconds {
    let phases = model.profile.phases().iter().filter(|phase| phase.duration() > 0.0);
    phases.map(|phase| (phase.duration() / 20.0).min(1.0)).fold(1.0, f64::min)
}

/// The strongest flux into the cold wall that the profile brings, W/m².
fn strongest_flux(model: &Model, station: &Station) -> WattsPerSquareMetre {
    let Some(heating) = &station.heating else { return 1e4 };
    let scale = model
        .profile
        .phases()
        .iter()
        .filter(|phase| phase.kind() == PhaseKind::Burn)
        .map(|phase| phase.scale())
        .fold(0.0, f64::max);
    let convection = match &heating.model {
        HeatingModel::Film {
            coefficient,
            gas_temperature,
        } => scale * coefficient * (gas_temperature - model.start).abs(),
        HeatingModel::Flux(flux) => scale * flux.abs(),
        HeatingModel::Wall(followed) => followed.course.as_ref().map_or(0.0, |course| {
            let outlook = course.to_come(0.0);
            let most = (outlook.hottest - model.start).abs().max((outlook.coolest - model.start).abs());
            followed.conductance * most
        }),
        HeatingModel::Log(LogRows::Flux { rows, .. }) => rows.iter().map(|row| row.1.abs()).fold(0.0, f64::max),
        HeatingModel::Log(LogRows::Film { rows }) => rows.iter().map(|row| row.1 * (row.2 - model.start).abs()).fold(0.0, f64::max),
    };
    heating.factor * convection + 1e4
}

/// What an outer face is met with at once.
enum Jump {
    /// A temperature.
    Temperature,
    /// A flux, W/m².
    Flux(WattsPerSquareMetre),
}

/// What the outer face is met with at the start, and where a coolant starts or stops.
fn outer_jump(model: &Model, station: &Station, through_the_wall: WattsPerSquareMetre) -> Jump {
    let Outside::Open(losses) = &station.outer.outside else {
        return if matches!(station.outer.outside, Outside::Adiabatic) {
            Jump::Flux(1.0)
        } else {
            Jump::Temperature
        };
    };
    let face = station
        .start
        .as_ref()
        .and_then(|start| start.layers().last()?.last().map(|point| point.1));
    let at_start = outside_losses(losses, &model.surroundings, None, face.unwrap_or(model.start)).0.abs();
    let coolant = losses.coolant.as_ref().map_or(0.0, |coolant| {
        through_the_wall + coolant.coefficient * (model.start - coolant.temperature).abs()
    });
    Jump::Flux(at_start.max(coolant).max(1.0))
}

/// The widest face cell that keeps the face temperature: with a flux q into the half cell at a face, node-centred volumes are off by
/// q Δx²/(8 k √(π α t)) at a time t after its start (from the Laplace transform of the semi-discrete half space; own derivation).
fn face_cell(tolerance: KelvinDifference, flux: f64, conductivity: f64, diffusion_length: Metres) -> Metres {
    let allowed = 0.5 * tolerance;
    (8.0 * allowed * conductivity * std::f64::consts::PI.sqrt() * diffusion_length / flux).sqrt()
}

/// Cells of `near` and `far` at the two ends, widening towards the middle by [`GROWTH`]; an even number of them.
fn positions(thickness: Metres, near: Metres, far: Metres, fineness: f64) -> Vec<f64> {
    let widest = thickness / FEWEST_CELLS as f64;
    // Widths as shares of the thickness; number of cells up to a share from either end, were the other end not there.
    let [near, far] = [near, far].map(|width| width.min(widest) / thickness);
    let widest = widest / thickness;
    let cells = |width: f64, share: f64| {
        let straight = (share - (widest - width) / GROWTH).max(0.0);
        (1.0 + GROWTH * (share - straight) / width).ln() / GROWTH + straight / widest
    };
    // Both sides meet where their cells are equally wide.
    let meet = ((far - near + GROWTH) / (2.0 * GROWTH)).clamp(0.0, 1.0);
    let (from_near, from_far) = (cells(near, meet), cells(far, 1.0 - meet));
    let total = from_near + from_far;
    let half = (total * fineness / 2.0).ceil().clamp((FEWEST_CELLS / 2) as f64, (MOST_CELLS / 2) as f64);
    let count = 2 * half as usize;
    let share_at = |target: f64| {
        let end = |width: f64, wanted: f64| {
            let curved = (widest / width).ln() / GROWTH;
            if wanted <= curved {
                width * ((GROWTH * wanted).exp() - 1.0) / GROWTH
            } else {
                (widest - width) / GROWTH + (wanted - curved) * widest
            }
        };
        if target <= from_near {
            end(near, target)
        } else {
            1.0 - end(far, total - target)
        }
    };
    let mut shares: Vec<f64> = (0..=count).map(|index| share_at(total * index as f64 / count as f64)).collect();
    shares[0] = 0.0;
    shares[count] = 1.0;
    shares
}

#[cfg(test)]
mod tests {
    use super::positions;

    #[test]
    fn positions_rise_from_face_to_face_and_are_finest_where_asked() {
        for (near, far) in [(1e-6, 1.0), (1e-5, 1e-4), (1e-3, 1e-6), (1e-3, 1e-3), (1.0, 1.0)] {
            for fineness in [0.5, 1.0, 3.0] {
                let shares = positions(0.01, near, far, fineness);
                assert_eq!((shares[0], shares[shares.len() - 1], shares.len() % 2), (0.0, 1.0, 1));
                assert!(shares.windows(2).all(|pair| pair[1] > pair[0]), "{near} {far} {fineness}: {shares:?}");
                let widths: Vec<f64> = shares.windows(2).map(|pair| pair[1] - pair[0]).collect();
                assert!(
                    widths.windows(2).all(|pair| pair[1] / pair[0] < 1.4 && pair[0] / pair[1] < 1.4),
                    "{near} {far} {fineness}: {widths:?}"
                );
            }
        }
    }
}
