//! The report as a document for programs: the same content, SI, failures included (spec page, §7).
//!
//! Keys stand in a fixed order, quantities in that of the catalogue; numbers have the digits it takes to read
//! them back. New keys may join, those that are there keep their meaning.

use serde::ser::SerializeMap;
use serde::{Serialize, Serializer};
use serde_json::Value as Json;

use crate::judge::accept::{Bar, Judged, Verdict};
use crate::results::{Figure, Value};
use crate::simulate::{Run, Spec};
use crate::spec::ResolvedLine;
use crate::units;

/// The format of the document.
pub const FORMAT: &str = "axirad-results/1";
/// How every document of ours begins, by which a file is known again.
pub const BEGINNING: &str = "{\n  \"format\": \"axirad-results/1\",\n  \"axirad\": ";

/// What became of one spec.
#[derive(Debug, Default, Serialize)]
pub struct Outcome {
    title: Option<String>,
    quantities: Quantities,
    ended: Option<&'static str>,
    end: Option<End>,
    accept: Vec<Limit>,
    warnings: Vec<Warning>,
    diagnostics: Vec<Json>,
    #[serde(skip_serializing_if = "Option::is_none")]
    checked: Option<Json>,
    #[serde(skip_serializing_if = "Option::is_none")]
    resolved: Option<Vec<Resolved>>,
}

#[derive(Debug, Serialize)]
struct End {
    section: String,
    z_m: f64,
    quantities: Quantities,
}

#[derive(Debug, Serialize)]
struct Limit {
    quantity: String,
    bound: Bound,
    value: Json,
    unit: String,
    verdict: &'static str,
    because: Option<String>,
    #[serde(skip_serializing_if = "Option::is_none")]
    reason: Option<String>,
}

#[derive(Debug, Serialize)]
#[serde(rename_all = "snake_case")]
enum Bound {
    AtLeast(f64),
    AtMost(f64),
    Is(String),
}

#[derive(Debug, Serialize)]
struct Warning {
    code: &'static str,
    text: String,
    acknowledged: Option<String>,
}

#[derive(Debug, Serialize)]
struct Resolved {
    path: String,
    value: String,
    origin: String,
}

/// Figures under their names, in the order they come.
#[derive(Debug, Default)]
struct Quantities(Vec<Figure>);

#[derive(Serialize)]
struct Quantity<'a> {
    value: Json,
    unit: String,
    #[serde(skip_serializing_if = "Option::is_none")]
    reason: Option<&'a str>,
}

impl Serialize for Quantities {
    fn serialize<S: Serializer>(&self, serializer: S) -> Result<S::Ok, S::Error> {
        let mut map = serializer.serialize_map(Some(self.0.len()))?;
        for figure in &self.0 {
            let reason = match &figure.value {
                Value::Missing(reason) => Some(reason.as_str()),
                Value::Number(_) | Value::Word(_) => None,
            };
            let (value, unit) = (value(&figure.value), units::symbol(figure.dimension));
            map.serialize_entry(&figure.name, &Quantity { value, unit, reason })?;
        }
        map.end()
    }
}

/// A value, `null` where it is missing.
fn value(value: &Value) -> Json {
    match value {
        Value::Number(number) => serde_json::Number::from_f64(*number).map_or(Json::Null, Json::Number),
        Value::Word(word) => Json::String(word.clone()),
        Value::Missing(_) => Json::Null,
    }
}

impl Outcome {
    /// Of a run, finished or ended by a limit.
    #[must_use]
    pub fn of_run(spec: &Spec, run: &Run) -> Self {
        let warning = |warning: &crate::judge::warning::Warning| Warning {
            code: warning.code,
            text: warning.text.clone(),
            acknowledged: warning.acknowledged.clone(),
        };
        Self {
            title: spec.title.clone(),
            quantities: Quantities(run.figures.clone()),
            ended: Some(run.end.limit.unwrap_or("outlet")),
            end: Some(End {
                section: run.end.section.clone(),
                z_m: run.end.z,
                quantities: Quantities(run.end.figures.clone()),
            }),
            accept: run.accept.iter().map(Limit::of).collect(),
            warnings: run.warnings.iter().map(warning).collect(),
            ..Self::default()
        }
    }

    /// Of something that yielded no figures: what was wrong.
    #[must_use]
    pub fn of_failure(title: Option<String>, diagnostics: Vec<Json>) -> Self {
        Self { title, diagnostics, ..Self::default() }
    }

    /// Of a file that was checked and not run: what it is, and what its reading warns of.
    #[must_use]
    pub fn of_check(spec: Option<&Spec>, checked: Json) -> Self {
        let warnings = spec.map(|spec| {
            spec.gathered.warnings.iter().map(|found| Warning {
                code: found.code,
                text: found.text.clone(),
                acknowledged: spec.acknowledged.get(found.code).cloned(),
            })
        });
        Self {
            title: spec.and_then(|spec| spec.title.clone()),
            warnings: warnings.into_iter().flatten().collect(),
            checked: Some(checked),
            ..Self::default()
        }
    }

    /// The same with the resolved spec, line by line.
    #[must_use]
    pub fn with_resolved(self, lines: &[ResolvedLine]) -> Self {
        let line = |line: &ResolvedLine| Resolved {
            path: line.path.to_string(),
            value: line.value.clone(),
            origin: line.origin.clone(),
        };
        Self { resolved: Some(lines.iter().map(line).collect()), ..self }
    }
}

impl Limit {
    fn of(judged: &Judged) -> Self {
        let (verdict, reason) = match &judged.verdict {
            Verdict::Holds => ("holds", None),
            Verdict::Broken => ("broken", None),
            Verdict::NotJudged(reason) => ("not_judged", Some(reason.clone())),
        };
        let bound = match &judged.limit.bound {
            Bar::AtLeast(bound) => Bound::AtLeast(*bound),
            Bar::AtMost(bound) => Bound::AtMost(*bound),
            Bar::Is(word) => Bound::Is(word.clone()),
        };
        Self {
            quantity: judged.limit.quantity.clone(),
            bound,
            value: value(&judged.value),
            unit: units::symbol(judged.limit.dimension),
            verdict,
            because: judged.limit.because.clone(),
            reason,
        }
    }
}

/// The one document of a command: of one spec, or of several under `runs`, by their files.
#[must_use]
pub fn document(outcomes: &[(String, Outcome)], several: bool) -> String {
    let (format, axirad) = (FORMAT, env!("CARGO_PKG_VERSION"));
    let text = match outcomes {
        [(_, outcome)] if !several => serde_json::to_string_pretty(&One { format, axirad, outcome }),
        _ => serde_json::to_string_pretty(&Several { format, axirad, runs: Runs(outcomes) }),
    };
    text.expect("names are texts and numbers finite") + "\n"
}

/// Format and version before what became of one spec.
#[derive(Serialize)]
struct One<'a> {
    format: &'static str,
    axirad: &'static str,
    #[serde(flatten)]
    outcome: &'a Outcome,
}

#[derive(Serialize)]
struct Several<'a> {
    format: &'static str,
    axirad: &'static str,
    runs: Runs<'a>,
}

struct Runs<'a>(&'a [(String, Outcome)]);

impl Serialize for Runs<'_> {
    fn serialize<S: Serializer>(&self, serializer: S) -> Result<S::Ok, S::Error> {
        serializer.collect_map(self.0.iter().map(|(file, outcome)| (file, outcome)))
    }
}
