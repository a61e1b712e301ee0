//! The verdict: what of `accept` holds, and how the run ended.

use super::figures::{DIGITS, difference, parts, shown};
use super::page::{Edge, NARROW, Page, WIDTH, aligned, glued, length};
use crate::judge::accept::{Bar, Judged, Verdict};
use crate::model::limits::Limits;
use crate::results::Value;
use crate::simulate::{Run, Spec};
use crate::units::{self, Dimension};

/// The column of a row that holds its reason.
const REASON: usize = 5;
const EDGES: [Edge; 6] = [Edge::Left, Edge::Left, Edge::Right, Edge::Left, Edge::Right, Edge::Left];

/// The limits of `accept`, a line each: with the reason beside it, else below it; in words where both are too wide.
pub fn accept(page: &mut Page, run: &Run) {
    if run.accept.is_empty() {
        page.heading("Limits of the design: none are asked for (`accept`)");
        return;
    }
    page.heading(&format!("Limits of the design: {}", count(&run.accept)));
    let header = ["", "quantity", "value", "bound", "slack", "because"].map(str::to_owned).to_vec();
    let rows: Vec<Vec<String>> = std::iter::once(header).chain(run.accept.iter().map(row)).collect();
    let without_reasons: Vec<Vec<String>> = rows.iter().map(|row| row[..REASON].to_vec()).collect();
    let fit = |lines: &[String]| lines.iter().all(|line| length(line) <= WIDTH);
    let (whole, short) = (aligned(&EDGES, &rows, NARROW), aligned(&EDGES, &without_reasons, NARROW));
    if fit(&whole) {
        whole.iter().for_each(|line| page.line(line));
    } else if fit(&short) {
        for (k, (line, row)) in short.iter().zip(&rows).enumerate() {
            page.line(line);
            if k > 0 && !row[REASON].is_empty() {
                page.remark(&format!("because: {}", row[REASON]));
            }
        }
    } else {
        let items = run.accept.iter().map(|judged| (verdict(judged).to_owned(), in_words(judged)));
        page.labelled(&items.collect::<Vec<(String, String)>>());
    }
    reasons(page, &run.accept);
}

/// Why limits are not judged, each reason once.
fn reasons(page: &mut Page, accept: &[Judged]) {
    let mut known: Vec<(&str, Vec<&str>)> = Vec::new();
    for judged in accept {
        let (Verdict::NotJudged(reason), name) = (&judged.verdict, judged.limit.quantity.as_str()) else { continue };
        match known.iter_mut().find(|(other, _)| other == reason) {
            Some((_, names)) if names.contains(&name) => {}
            Some((_, names)) => names.push(name),
            None => known.push((reason, vec![name])),
        }
    }
    for (reason, names) in known {
        page.paragraph(&format!("Not judged, {}: {reason}.", names.join(", ")));
    }
}

/// `2 hold, 1 is broken`.
fn count(accept: &[Judged]) -> String {
    let of = |is: fn(&Verdict) -> bool| accept.iter().filter(|judged| is(&judged.verdict)).count();
    let holds = of(|verdict| matches!(verdict, Verdict::Holds));
    let broken = of(|verdict| matches!(verdict, Verdict::Broken));
    let open = of(|verdict| matches!(verdict, Verdict::NotJudged(_)));
    if broken + open == 0 {
        return if holds == 1 { "it holds".to_owned() } else { format!("all {holds} hold") };
    }
    let words = [
        (holds, if holds == 1 { "1 holds".to_owned() } else { format!("{holds} hold") }),
        (broken, if broken == 1 { "1 is BROKEN".to_owned() } else { format!("{broken} are BROKEN") }),
        (open, if open == 1 { "1 is not judged".to_owned() } else { format!("{open} are not judged") }),
    ];
    let said: Vec<String> = words.into_iter().filter(|(count, _)| *count > 0).map(|(_, words)| words).collect();
    said.join(", ")
}

fn row(judged: &Judged) -> Vec<String> {
    let because = judged.limit.because.clone().unwrap_or_default();
    let slack = slack(judged).unwrap_or_default();
    let quantity = judged.limit.quantity.clone();
    vec![verdict(judged).to_owned(), quantity, value(judged), bound(judged), slack, because]
}

fn verdict(judged: &Judged) -> &'static str {
    match &judged.verdict {
        Verdict::Holds => "holds",
        Verdict::Broken => "BROKEN",
        Verdict::NotJudged(_) => "not judged",
    }
}

/// The same as a row in a sentence: `hot_spot.temperature: 133 degC, at most 160 degC, slack 27 K; because: colour`.
fn in_words(judged: &Judged) -> String {
    let slack = slack(judged).map(|slack| format!(", slack {}", glued(&slack)));
    let because = judged.limit.because.as_ref().map(|because| format!("; because: {because}"));
    format!(
        "{}: {}, {}{}{}",
        judged.limit.quantity,
        glued(&value(judged)),
        glued(&bound(judged)),
        slack.unwrap_or_default(),
        because.unwrap_or_default()
    )
}

/// What the quantity came to, `-` where it is missing.
#[must_use]
pub fn value(judged: &Judged) -> String {
    match &judged.value {
        Value::Number(value) => shown(&judged.limit.quantity, *value, judged.limit.dimension),
        Value::Word(word) => word.clone(),
        Value::Missing(_) => "-".to_owned(),
    }
}

/// The bound in words: `at least 40 %`.
#[must_use]
pub fn bound(judged: &Judged) -> String {
    let show = |value: f64| shown(&judged.limit.quantity, value, judged.limit.dimension);
    match &judged.limit.bound {
        Bar::AtLeast(value) => format!("at least {}", show(*value)),
        Bar::AtMost(value) => format!("at most {}", show(*value)),
        Bar::Is(word) => format!("is {word}"),
    }
}

/// How far inside its bound a quantity is, negative beyond it; shares differ by points of a per cent.
fn slack(judged: &Judged) -> Option<String> {
    if matches!(judged.verdict, Verdict::NotJudged(_)) {
        return None;
    }
    let value = judged.value.number()?;
    let slack = match &judged.limit.bound {
        Bar::AtLeast(bound) => value - bound,
        Bar::AtMost(bound) => bound - value,
        Bar::Is(_) => return None,
    };
    let (_, unit) = parts(&judged.limit.quantity, value, judged.limit.dimension);
    if unit == "%" {
        return Some(format!("{} points", units::show_number(100.0 * slack, DIGITS)));
    }
    Some(shown(&judged.limit.quantity, slack, difference(judged.limit.dimension)))
}

/// How the run ended, and where.
pub fn end(page: &mut Page, spec: &Spec, run: &Run) {
    let length = spec.plant.length();
    let place = |z: f64| glued(&shown("z", z, Dimension::LENGTH));
    let Some(limit) = run.end.limit else {
        page.heading(&format!("The run reached the outlet, {} from the inlet", place(length)));
        return;
    };
    page.heading("THE RUN ENDED BEFORE THE OUTLET");
    let share = units::show_number(100.0 * run.end.z / length, 3);
    page.paragraph(&format!(
        "`{limit}`{} was left in section `{}`, {} from the inlet: {share} % of the {} to the outlet. What lies beyond \
         was not computed; figures of the run cover it up to there.",
        bound_in_words(&spec.plant.limits, limit),
        run.end.section,
        place(run.end.z),
        place(length),
    ));
}

/// The value of a limit and what it holds for.
fn bound_in_words(limits: &Limits, path: &str) -> String {
    let Some(bound) = bound_of(limits, path) else { return String::new() };
    // the figures below include the wall's surface, which may lie beyond
    let everywhere = if path.starts_with("limits.pressure") { "" } else { " in any stream tube" };
    format!(" ({}{everywhere})", glued(&bound))
}

/// The value of a limit by its path.
#[must_use]
pub fn bound_of(limits: &Limits, path: &str) -> Option<String> {
    let (value, dimension) = match path {
        "limits.temperature.lowest" => (limits.lowest_temperature, Dimension::TEMPERATURE),
        "limits.temperature.highest" => (limits.highest_temperature, Dimension::TEMPERATURE),
        "limits.pressure.lowest" => (limits.lowest_pressure, Dimension::PRESSURE_LEVEL),
        "limits.viscosity.highest" => (limits.highest_viscosity, Dimension::VISCOSITY),
        "limits.polymer_fraction.highest" => (limits.highest_polymer_fraction, Dimension::RATIO),
        "limits.dispersity.highest" => return Some(units::show_number(limits.highest_dispersity, DIGITS)),
        _ => return None,
    };
    Some(shown("", value, dimension))
}
