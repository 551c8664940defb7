//! What does a test say beside the run: computed readings at the log's own times, and how far they are off.

use super::types::{ComparedReading, LogAnswer};
use crate::model::{Readings, Seconds, Station};
use crate::run::TraceRow;

/// Times of all readings at a station, rising.
pub(super) fn reading_times(log: &[Readings], station: usize) -> Vec<Seconds> {
    let readings = log.iter().filter(|readings| readings.station == station);
    let mut times: Vec<Seconds> = readings.flat_map(|readings| readings.points.iter().map(|point| point.0)).collect();
    times.sort_by(f64::total_cmp);
    times.dedup();
    times
}

/// Every reading of a station beside the computed one; `rows`: the run at [`reading_times`].
pub(super) fn compared(log: &[Readings], index: usize, station: &Station, rows: &[TraceRow]) -> Vec<(LogAnswer, Vec<ComparedReading>)> {
    let readings = log.iter().filter(|readings| readings.station == index);
    let compared = readings.map(|readings| {
        let points: Vec<ComparedReading> = readings
            .points
            .iter()
            .filter_map(|&(time, reading)| {
                let row = rows.binary_search_by(|row| row.time.total_cmp(&time)).ok().and_then(|at| rows.get(at))?;
                Some(ComparedReading {
                    time,
                    reading,
                    computed: row.probes.get(readings.probe)?.0,
                })
            })
            .collect();
        let largest = points.iter().max_by(|a, b| a.difference().abs().total_cmp(&b.difference().abs()));
        let squares: f64 = points.iter().map(|point| point.difference().powi(2)).sum();
        let answer = LogAnswer {
            probe: station.probes.get(readings.probe).map(|probe| probe.name.clone()).unwrap_or_default(),
            noise: readings.noise,
            count: points.len(),
            largest: largest.copied(),
            end: points.last().copied(),
            root_mean_square: (!points.is_empty()).then(|| (squares / points.len() as f64).sqrt()),
        };
        (answer, points)
    });
    compared.collect()
}
