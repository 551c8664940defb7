//! `soakdown run`.

use super::arguments::RunArguments;
use super::command_line::run_line;
use super::exit::ExitStatus;
use super::failure::Failure;
use super::files::{OutputFile, write_files};
use super::interrupt::stop_flag;
use super::mistakes::{plain_warning, rendered};
use super::printer::Printer;
use super::progress::Progress;
use super::start::units;
use soakdown::answers::{RunOptions, RunOutcome, Verdict};
use soakdown::case::Case;
use soakdown::model::Readings;
use soakdown::report::{ResultDocument, depths_csv, json, log_csv, run_page, trace_csv};
use soakdown::{answers, case};

/// Reads the case, runs it, shows and writes the answers.
pub fn run(arguments: &RunArguments, printer: Printer) -> Result<ExitStatus, Failure> {
    let common = &arguments.common;
    let mut case = case::load(&arguments.case, &common.set).map_err(Failure::Refused)?;
    if !case.doubts.list.is_empty() {
        printer.note(&rendered(&case.doubts));
    }
    if !arguments.times.is_empty() && common.out.is_none() {
        printer.note(&plain_warning(
            "--times is for trace.csv and depths.csv, which are written only with --out DIR",
        ));
    }
    let log = match &arguments.log {
        Some(path) => case::read_log(&mut case, path).map_err(Failure::Refused)?,
        None => Vec::new(),
    };
    let outcome = computed(arguments, &case, &log)?;
    let command = run_line(arguments);
    let document = ResultDocument::new(&case, &command, &outcome.answers);
    if common.json {
        printer.answer(&json(&document)?)?;
    } else {
        printer.page(&run_page(&case, &outcome.answers, units(common)))?;
    }
    if let Some(folder) = &common.out {
        let stations = case.model.stations();
        let file = |name, bytes| OutputFile { name, bytes };
        let mut files = vec![
            file("result.json", json(&document)?.into_bytes()),
            file("trace.csv", trace_csv(stations, &outcome.histories)?),
            file("depths.csv", depths_csv(stations, &outcome.histories)?),
        ];
        if arguments.log.is_some() {
            files.push(file("log.csv", log_csv(stations, &outcome.compared)?));
        }
        write_files(folder, &files)?;
    }
    let amiss = common.strict && outcome.answers.verdict != Verdict::WithinLimits;
    Ok(if amiss { ExitStatus::Amiss } else { ExitStatus::Computed })
}

fn computed(arguments: &RunArguments, case: &Case, log: &[Readings]) -> Result<RunOutcome, Failure> {
    let stop = stop_flag()?;
    let progress = Progress::start(!arguments.common.quiet);
    let tell = |share| progress.tell(share);
    let options = RunOptions {
        history: arguments.common.out.is_some(),
        times: arguments.times.iter().map(|time| time.value).collect(),
        log,
        stop: Some(&stop),
        progress: Some(&tell),
    };
    Ok(answers::run(&case.model, &options)?)
}
