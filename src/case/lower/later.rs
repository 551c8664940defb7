//! Sections that later commands use: their names, units, ranges and paths are checked; then they say that nothing uses them yet.

use super::profile::LoweredProfile;
use super::station::LoweredStation;
use super::{Input, InputValue, Lowering, Node, Table, Value};
use crate::case::checked::{LogColumn, LogFormat};
use crate::case::form::{Form, unit_mistake};
use crate::case::keys::{Expect, NOT_NEGATIVE, POSITIVE};
use crate::case::names;
use crate::case::paths::{self, PathError, Segment, Step, Target};
use crate::case::settings::path_mistake;
use crate::case::suggest;
use crate::case::tree::Spot;
use crate::diagnostics::Diagnostic;
use crate::units::{self, Kind};

/// What an input is measured in, where it is a number or a table of them.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
enum Measure {
    One(Kind),
    Table,
}

/// What paths may name.
#[derive(Clone, Copy)]
struct Known<'a> {
    root: &'a Node,
    /// What is expected of each value of a ready profile; `None` where the profile has mistakes of its own.
    values: Option<&'a [(String, &'static Expect)]>,
}

impl Known<'_> {
    /// The same targets, those in `profile.values` with what the ready profile expects of the value.
    fn values_of(&self, mut targets: Vec<Target>, segments: &[Segment]) -> Result<Vec<Target>, PathError> {
        let Some(known) = self.values else { return Ok(targets) };
        for target in &mut targets {
            let [Step::Key(profile), Step::Key(values), Step::Key(name)] = target.steps.as_slice() else {
                continue;
            };
            if profile != "profile" || values != "values" {
                continue;
            }
            match known.iter().find(|value| value.0 == *name) {
                Some(value) => target.expect = value.1,
                None => {
                    return Err(PathError {
                        range: segments.last().map(|segment| segment.range.clone()).unwrap_or_default(),
                        message: format!("the profile of this case has no value \"{name}\""),
                        help: suggest::help(name, known.iter().map(|value| value.0.as_str())),
                    });
                }
            }
        }
        Ok(targets)
    }
}

impl Lowering<'_> {
    pub(super) fn later(&mut self, root: &Node, stations: &[LoweredStation], profile: Option<&LoweredProfile>) -> Option<LogFormat> {
        let case = root.table()?;
        let known = Known {
            root,
            values: profile.map(|profile| profile.values.as_slice()),
        };
        self.engine(case);
        self.variants(known, case);
        for (index, spread) in case.list("spread").unwrap_or_default().iter().enumerate() {
            if let Some(table) = spread.table() {
                self.spread(known, table, &format!("spread.{index}"));
            }
        }
        let log_format = case.table("fit").and_then(|fit| {
            self.fit(known, fit);
            self.log_format(fit, stations)
        });
        let bartz = case.list("station").unwrap_or_default().iter().any(|station| {
            let heating = station.table().and_then(|station| station.table("heating"));
            heating.and_then(|heating| heating.text("model")) == Some("bartz")
        });
        let used_by = [
            ("engine", "no heating model of this case uses it"),
            ("cut_off", "plan and redline, which are not built yet, use it; burns run as written"),
            ("variant", "compare and plan, which are not built yet, use it; the case runs as written"),
            ("spread", "spread and redline, which are not built yet, use it; the case runs as written"),
            ("abort", "redline, which is not built yet, uses it"),
            ("fit", "run uses it with --log, and fit, which is not built yet"),
        ];
        for (name, who) in used_by {
            if case.has(name) && !(name == "engine" && bartz) {
                let brackets = if matches!(name, "variant" | "spread") {
                    format!("[[{name}]]")
                } else {
                    format!("[{name}]")
                };
                self.findings.notice(
                    "section-unused",
                    format!("{brackets} is checked and has no effect on this answer: {who}"),
                    None,
                    None,
                );
            }
        }
        log_format
    }

    fn engine(&mut self, case: &Table) {
        let Some(engine) = case.table("engine") else { return };
        self.exclude(engine, &["propellants", "gas"]);
        if let (Some(propellants), false) = (engine.entry("propellants"), engine.has("mixture_ratio")) {
            self.missing(&propellants.key_spot, "mixture_ratio", "with \"propellants\"");
        }
        if !engine.has("propellants") {
            self.misfits(engine, &["mixture_ratio"], "without \"propellants\"");
        }
    }

    /// The targets of a path written in a text of the case.
    fn targets(&mut self, known: Known<'_>, node: &Node) -> Option<Vec<Target>> {
        let text = node.text()?;
        let split = paths::split(text);
        match split.and_then(|segments| paths::resolve(known.root, &segments).and_then(|targets| known.values_of(targets, &segments))) {
            Ok(targets) => Some(targets),
            Err(error) => {
                let spot = node.inside(error.range.clone());
                self.findings.at(&spot, path_mistake(error));
                None
            }
        }
    }

    fn variants(&mut self, known: Known<'_>, case: &Table) {
        for variant in case.list("variant").unwrap_or_default() {
            let Some(set) = variant.table().and_then(|table| table.node("set")) else {
                continue;
            };
            let Some(table) = set.table() else {
                if !matches!(set.value, Value::Bad) {
                    let due = "a table of paths and values is due, { \"surroundings.air\" = \"40 degC\" }";
                    self.error(&set.spot, "wrong-type", "this is no table", due);
                }
                continue;
            };
            let name = variant.table().and_then(|table| table.text("name")).unwrap_or_default();
            let prefix = names::join(&names::join("variant", name), "set");
            for entry in &table.entries {
                let key = Node {
                    spot: entry.key_spot.clone(),
                    value: Value::Text(entry.key.clone()),
                    text_range: self.key_range(&entry.key, &entry.key_spot),
                };
                let Some(targets) = self.targets(known, &key) else { continue };
                let Some(target) = targets.first() else { continue };
                let mut value = entry.node.clone();
                let mut form = Form {
                    findings: &mut *self.findings,
                    inputs: &mut *self.inputs,
                };
                form.node(&mut value, target.expect, &names::join(&prefix, &entry.key));
            }
        }
    }

    /// The bytes of a key between its quotes.
    fn key_range(&self, key: &str, spot: &Spot) -> Option<std::ops::Range<usize>> {
        let text = self.findings.diagnostics.sources.get(spot.source)?.text.get(spot.range.clone())?;
        let start = spot.range.start + text.find(key).filter(|_| !key.is_empty())?;
        Some(start..start + key.len())
    }

    /// What the input that a path names is measured in.
    fn measure(&mut self, known: Known<'_>, node: &Node) -> Option<Measure> {
        let targets = self.targets(known, node)?;
        let target = targets.first()?;
        let now = paths::value(known.root, target).map(|value| &value.value);
        let measure = measure_of(target.expect, now);
        if measure.is_none() {
            let message = "this path names no number";
            self.error(&node.words(), "unknown-path", message, "a number, a quantity or a property table is due");
        }
        measure
    }

    fn spread(&mut self, known: Known<'_>, table: &Table, path: &str) {
        let measure = table.node("input").and_then(|input| self.measure(known, input));
        let shape = table.text("shape");
        let needs_sigmas = matches!(shape, Some("normal" | "log-normal"));
        if let (true, false, Some(entry)) = (needs_sigmas, table.has("sigmas"), table.entry("shape")) {
            let why = "with this shape: how many standard deviations \"by\" is";
            self.missing(&entry.node.words(), "sigmas", why);
        }
        if shape.is_some() && !needs_sigmas {
            self.misfits(table, &["sigmas"], "with this shape, where \"by\" is the bound");
        }
        if let Some(by) = table.node("by") {
            self.spread_by(by, measure, shape, path);
        }
        let Some(with) = table.node("with") else { return };
        let Some(correlations) = with.table() else {
            self.error(&with.spot, "wrong-type", "this is no table", "a table of paths and correlations is due");
            return;
        };
        for entry in &correlations.entries {
            let key = Node {
                spot: entry.key_spot.clone(),
                value: Value::Text(entry.key.clone()),
                text_range: self.key_range(&entry.key, &entry.key_spot),
            };
            self.targets(known, &key);
            let correlation = match entry.node.value {
                #[expect(clippy::cast_precision_loss, reason = "checked against −1 … 1")]
                Value::Integer(number) => number as f64,
                Value::Float(number) => number,
                _ => f64::NAN,
            };
            if !(-1.0..=1.0).contains(&correlation) {
                self.error(
                    &entry.node.spot,
                    "out-of-range",
                    "this is no correlation",
                    "a bare number from -1 to 1 is due",
                );
            }
        }
    }

    /// How far an input strays: `"20 %"`, `"0.1 mm"`, `"factor 2"`, or a bare number for a pure number.
    fn spread_by(&mut self, by: &Node, measure: Option<Measure>, shape: Option<&str>, path: &str) {
        let (value, unit) = match &by.value {
            Value::Text(text) => {
                if let Some(factor) = text.trim().strip_prefix("factor") {
                    let factor = factor.trim().parse::<f64>().ok().filter(|factor| factor.is_finite() && *factor > 1.0);
                    let Some(factor) = factor else {
                        return self.error(&by.words(), "bad-number", "a factor above 1 is due", "written \"factor 2\"");
                    };
                    if shape.is_some_and(|shape| shape != "log-normal") {
                        self.error(
                            &by.words(),
                            "key-does-not-fit",
                            "\"factor\" goes with the shape \"log-normal\"",
                            "give a share or an absolute value",
                        );
                    }
                    (factor, "")
                } else {
                    let due = match measure {
                        Some(Measure::One(kind)) => as_difference(kind),
                        Some(Measure::Table) => Kind::Number,
                        None => return,
                    };
                    match units::read_spread(text, due) {
                        Ok((value, is_share)) => {
                            if measure == Some(Measure::Table) && !is_share {
                                return self.error(&by.words(), "wrong-unit", "a whole table strays by a share", "written \"10 %\"");
                            }
                            (value, if is_share { "" } else { due.si() })
                        }
                        Err(error) => {
                            let spot = if error.range.is_empty() {
                                by.spot.clone()
                            } else {
                                by.inside(error.range.clone())
                            };
                            return self.findings.at(&spot, unit_mistake(&error).help("or a share of the value: \"20 %\""));
                        }
                    }
                }
            }
            #[expect(clippy::cast_precision_loss, reason = "a spread is no exact number")]
            Value::Integer(number) => (*number as f64, ""),
            Value::Float(number) => (*number, ""),
            Value::Bad => return,
            _ => return self.error(&by.spot, "wrong-type", "this is no spread", "\"20 %\", \"0.1 mm\" or \"factor 2\" is due"),
        };
        let bare = !matches!(by.value, Value::Text(_));
        if bare && measure.is_some_and(|measure| measure != Measure::One(Kind::Number)) {
            return self.error(
                &by.spot,
                "missing-unit",
                "a bare number",
                "a share, \"20 %\", or a value with its unit is due",
            );
        }
        if !(value.is_finite() && value > 0.0) {
            return self.error(
                &by.words(),
                "out-of-range",
                "a spread must be above 0",
                "leave the input out where it is certain",
            );
        }
        self.inputs.push(Input {
            path: format!("{path}.by"),
            value: InputValue::Number(value),
            unit,
            from: self.findings.origin(&by.spot).to_owned(),
        });
    }

    fn fit(&mut self, known: Known<'_>, fit: &Table) {
        for (index, free) in fit.list("free").unwrap_or_default().iter().enumerate() {
            let Some(table) = free.table() else { continue };
            let Some(measure) = table.node("input").and_then(|input| self.measure(known, input)) else {
                continue;
            };
            let expect = match measure {
                Measure::One(Kind::Number) => Expect::Number(NOT_NEGATIVE),
                Measure::One(kind) => Expect::Quantity(kind, super::super::keys::ANY),
                Measure::Table => Expect::Number(POSITIVE),
            };
            let mut bounds = [None; 2];
            for (bound, key) in bounds.iter_mut().zip(["from", "to"]) {
                let Some(node) = table.node(key) else { continue };
                let mut node = node.clone();
                let mut form = Form {
                    findings: &mut *self.findings,
                    inputs: &mut *self.inputs,
                };
                form.node(&mut node, &expect, &format!("fit.free.{index}.{key}"));
                *bound = node.number();
            }
            if let ([Some(from), Some(to)], Some(node)) = (bounds, table.node("to"))
                && to <= from
            {
                self.error(&node.words(), "out-of-range", "\"to\" must lie above \"from\"", "the range is empty");
            }
        }
    }

    /// How a log is read; `None` when something is wrong with it.
    fn log_format(&mut self, fit: &Table, stations: &[LoweredStation]) -> Option<LogFormat> {
        let columns: Vec<_> = fit
            .list("columns")?
            .iter()
            .filter_map(Node::table)
            .map(|column| self.log_column(column, stations))
            .collect();
        for (index, column) in fit.list("columns")?.iter().enumerate() {
            let name = column.table().and_then(|column| column.node("column"));
            let earlier = columns
                .iter()
                .take(index)
                .flatten()
                .any(|other| name.and_then(Node::text) == Some(&other.column));
            if let (true, Some(name)) = (earlier, name) {
                let found = Diagnostic::warning("repeated-name", "this column of the log is named twice");
                self.findings.doubt(&name.words(), found.label("is it meant for two probes?"));
            }
        }
        Some(LogFormat {
            time: fit.text("time")?.to_owned(),
            offset: fit.node("offset").map_or(Some(0.0), Node::number)?,
            columns: columns.into_iter().collect::<Option<_>>()?,
        })
    }

    fn log_column(&mut self, column: &Table, stations: &[LoweredStation]) -> Option<LogColumn> {
        let node = column.node("probe")?;
        let name = node.text()?;
        let probes = |station: &LoweredStation| -> Vec<String> { station.probes.iter().map(|probe| format!("{}/{probe}", station.name)).collect() };
        let place = stations
            .iter()
            .enumerate()
            .find_map(|(index, station)| Some((index, probes(station).iter().position(|known| known == name)?)));
        let Some((station, probe)) = place else {
            let known: Vec<_> = stations.iter().flat_map(probes).collect();
            self.unknown(node, "unknown-place", "the probe", known.iter().map(String::as_str));
            return None;
        };
        Some(LogColumn {
            station,
            probe,
            column: column.text("column")?.to_owned(),
            unit: column.text("unit")?.to_owned(),
            noise: column.number("noise")?,
        })
    }
}

/// A spread of a temperature is a difference.
fn as_difference(kind: Kind) -> Kind {
    if kind == Kind::Temperature { Kind::TemperatureDifference } else { kind }
}

fn measure_of(expect: &Expect, now: Option<&Value>) -> Option<Measure> {
    match expect {
        Expect::Quantity(kind, _) => Some(Measure::One(*kind)),
        Expect::Number(_) | Expect::Whole(..) => Some(Measure::One(Kind::Number)),
        Expect::Property(kind, _) => Some(match now {
            Some(Value::Number(_)) => Measure::One(*kind),
            _ => Measure::Table,
        }),
        Expect::OneOf(choices) => choices.iter().find_map(|choice| measure_of(choice, now)),
        _ => None,
    }
}
