//! What a user must not miss: one line each, nothing when all is well.

use super::verdict::{bound, bound_of, value};
use crate::judge::accept::{Judged, Verdict};
use crate::simulate::{Run, Spec};
use crate::units::{self, Dimension};

/// An early end, limits of `accept` that do not pass, and warnings that are not acknowledged.
#[must_use]
pub fn brief(spec: &Spec, run: &Run) -> Vec<String> {
    let mut lines = Vec::new();
    if let Some(limit) = run.end.limit {
        let (z, unit) = units::show(run.end.z, Dimension::LENGTH, 5);
        let bound = bound_of(&spec.plant.limits, limit).map(|bound| format!(" ({bound})")).unwrap_or_default();
        lines.push(format!("ended at z = {z} {unit} in section `{}`: `{limit}`{bound} was left", run.end.section));
    }
    lines.extend(run.accept.iter().filter_map(not_passed));
    let open = run.warnings.iter().filter(|warning| warning.acknowledged.is_none());
    lines.extend(open.map(|warning| format!("warning {}: {}", warning.code, warning.text)));
    lines
}

fn not_passed(judged: &Judged) -> Option<String> {
    let quantity = &judged.limit.quantity;
    let because = judged.limit.because.as_ref().map(|why| format!(" ({why})")).unwrap_or_default();
    match &judged.verdict {
        Verdict::Holds => None,
        Verdict::Broken => {
            Some(format!("broken: {quantity} is {}, asked is {}{because}", value(judged), bound(judged)))
        }
        Verdict::NotJudged(reason) => {
            Some(format!("not judged: {quantity}, asked is {}{because}: {reason}", bound(judged)))
        }
    }
}
