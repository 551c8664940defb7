//! `trace.csv` and `depths.csv`: RFC 4180, SI, full precision.

use super::error::ReportError;
use crate::answers::{ComparedReading, StationHistory};
use crate::model::{Kelvin, Station};

/// `trace.csv`: one row a time, the stations side by side.
///
/// # Errors
/// When the stations' rows do not fall on the same times.
pub fn trace_csv(stations: &[Station], histories: &[StationHistory]) -> Result<Vec<u8>, ReportError> {
    let mut writer = writer();
    let mut header = vec!["time_s".to_owned(), "phase".to_owned()];
    header.extend(stations.iter().flat_map(trace_columns));
    writer.write_record(&header)?;
    let Some(first) = histories.first() else {
        return bytes(writer);
    };
    for (station, history) in stations.iter().zip(histories) {
        let same = |(row, other): (&crate::answers::TraceRow, &crate::answers::TraceRow)| row.time == other.time && row.phase == other.phase;
        if history.trace.len() != first.trace.len() || !history.trace.iter().zip(&first.trace).all(same) {
            return Err(ReportError::UnevenRows {
                station: station.name().to_owned(),
            });
        }
    }
    for (index, row) in first.trace.iter().enumerate() {
        let mut record = vec![row.time.to_string(), row.phase.word().to_owned()];
        for (station, history) in stations.iter().zip(histories) {
            let row = &history.trace[index];
            record.extend(shown_faces(station, &row.faces).map(|value| value.to_string()));
            for (probe, &(reading, wall)) in station.probes().iter().zip(&row.probes) {
                record.push(reading.to_string());
                if probe.lag > 0.0 {
                    record.push(wall.to_string());
                }
            }
            record.push(row.flux_in.to_string());
            record.push(row.flux_out.to_string());
        }
        writer.write_record(&record)?;
    }
    bytes(writer)
}

fn trace_columns(station: &Station) -> Vec<String> {
    let name = station.name();
    let mut columns = vec![format!("{name}/hot-face_K")];
    for (index, pair) in station.layers().windows(2).enumerate() {
        let boundary = format!("{name}/{}|{}", pair[0].name(), pair[1].name());
        if station.resistance(index).is_some() {
            columns.push(format!("{boundary}:inner_K"));
            columns.push(format!("{boundary}:outer_K"));
        } else {
            columns.push(format!("{boundary}_K"));
        }
    }
    columns.push(format!("{name}/outer-face_K"));
    for probe in station.probes() {
        columns.push(format!("{name}/{}_K", probe.name));
        if probe.lag > 0.0 {
            columns.push(format!("{name}/{}:true_K", probe.name));
        }
    }
    columns.push(format!("{name}/flux_in_W_m2"));
    columns.push(format!("{name}/flux_out_W_m2"));
    columns
}

/// The face temperatures that have a column: at a perfect joint one of the two equal sides.
fn shown_faces<'a>(station: &'a Station, faces: &'a [Kelvin]) -> impl Iterator<Item = Kelvin> + 'a {
    let last = faces.len().saturating_sub(1);
    faces.iter().enumerate().filter_map(move |(index, &value)| {
        let outer_side = index > 0 && index < last && index % 2 == 0;
        (!outer_side || station.resistance(index / 2 - 1).is_some()).then_some(value)
    })
}

/// `depths.csv`: profiles through the walls, one row a point.
///
/// # Errors
/// When the table can't be put together.
pub fn depths_csv(stations: &[Station], histories: &[StationHistory]) -> Result<Vec<u8>, ReportError> {
    let mut writer = writer();
    writer.write_record(["station", "time_s", "depth_m", "temperature_K"])?;
    for (station, history) in stations.iter().zip(histories) {
        for profile in &history.depths {
            for &(depth, temperature) in &profile.points {
                writer.write_record([station.name(), &profile.time.to_string(), &depth.to_string(), &temperature.to_string()])?;
            }
        }
    }
    bytes(writer)
}

/// `log.csv`: every reading of a test beside the computed one; the difference is computed − read.
///
/// # Errors
/// When the table can't be put together.
pub fn log_csv(stations: &[Station], compared: &[(usize, String, Vec<ComparedReading>)]) -> Result<Vec<u8>, ReportError> {
    let mut writer = writer();
    writer.write_record(["station", "probe", "time_s", "reading_K", "computed_K", "difference_K"])?;
    for (station, probe, points) in compared {
        let station = stations.get(*station).map_or("", Station::name);
        for point in points {
            let numbers = [point.time, point.reading, point.computed, point.difference()].map(|number| number.to_string());
            writer.write_record([station, probe].into_iter().chain(numbers.iter().map(String::as_str)))?;
        }
    }
    bytes(writer)
}

fn writer() -> csv::Writer<Vec<u8>> {
    csv::WriterBuilder::new().terminator(csv::Terminator::CRLF).from_writer(Vec::new())
}

fn bytes(writer: csv::Writer<Vec<u8>>) -> Result<Vec<u8>, ReportError> {
    writer.into_inner().map_err(|error| ReportError::Csv(error.into_error().into()))
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::answers::{DepthProfile, RunOptions, TraceRow, run};
    use crate::model::PhaseKind;
    use crate::report::sample;

    fn row(time: f64, phase: PhaseKind) -> TraceRow {
        TraceRow {
            time,
            phase,
            // hot face, coating|liner twice, liner|jacket inner and outer, outer face
            faces: vec![300.5, 301.0, 301.0, 302.0, 303.0, 304.0],
            probes: vec![(310.0, 311.0), (312.0, 312.0)],
            flux_in: 1e6 / 3.0,
            flux_out: 1e-7,
        }
    }

    #[test]
    fn columns_stand_as_the_contract_names_them() {
        let case = sample::case();
        let history = StationHistory {
            trace: vec![row(2.0, PhaseKind::Burn), row(2.0, PhaseKind::Shutdown)],
            depths: vec![],
        };
        let text = String::from_utf8(trace_csv(case.model.stations(), &[history]).expect("a table")).expect("text");
        let lines: Vec<&str> = text.split("\r\n").collect();
        assert_eq!(
            lines[0],
            "time_s,phase,throat/hot-face_K,throat/coating|liner_K,throat/liner|jacket:inner_K,throat/liner|jacket:outer_K,throat/outer-face_K,\
             throat/TC1_K,throat/TC1:true_K,throat/TC2_K,throat/flux_in_W_m2,throat/flux_out_W_m2"
        );
        assert_eq!(lines[1], "2,burn,300.5,301,302,303,304,310,311,312,333333.3333333333,0.0000001");
        assert!(lines[2].starts_with("2,shutdown,"));
        assert_eq!(lines[3..], [""]);
    }

    #[test]
    fn stations_with_other_rows_are_refused() {
        let case = sample::case();
        let station = case.model.stations()[0].clone();
        let history = |time| StationHistory {
            trace: vec![row(time, PhaseKind::Burn)],
            depths: vec![],
        };
        let error = trace_csv(&[station.clone(), station], &[history(1.0), history(2.0)]);
        assert!(matches!(error, Err(ReportError::UnevenRows { .. })));
    }

    #[test]
    fn depths_have_a_row_for_each_point() {
        let case = sample::case();
        let history = StationHistory {
            trace: vec![],
            depths: vec![DepthProfile {
                time: 2.0,
                points: vec![(0.0, 900.0), (0.008, 400.0), (0.008, 390.0)],
            }],
        };
        let text = String::from_utf8(depths_csv(case.model.stations(), &[history]).expect("a table")).expect("text");
        assert_eq!(
            text,
            "station,time_s,depth_m,temperature_K\r\nthroat,2,0,900\r\nthroat,2,0.008,400\r\nthroat,2,0.008,390\r\n"
        );
    }

    /// What the answers room hands over fits the columns.
    #[test]
    fn the_history_of_a_real_run_fills_every_column() {
        let case = sample::case();
        let options = RunOptions {
            history: true,
            times: vec![1.0, 2.0, 10.0],
            ..RunOptions::default()
        };
        let outcome = run(&case.model, &options).expect("a run");
        let trace = trace_csv(case.model.stations(), &outcome.histories).expect("a table");
        // The reader refuses a row of another length than the header.
        let mut reader = csv::Reader::from_reader(trace.as_slice());
        let rows: Vec<csv::StringRecord> = reader.records().collect::<Result<_, _>>().expect("rows");
        let times: Vec<&str> = rows.iter().map(|row| &row[0]).collect();
        assert_eq!(times, ["1", "2", "10"]);
        assert_eq!(&rows[1][1], "burn");
        let depths = depths_csv(case.model.stations(), &outcome.histories).expect("a table");
        assert!(csv::Reader::from_reader(depths.as_slice()).records().all(|row| row.is_ok()));
    }
}
