//! Where the numbers come from: sources, what was not confirmed, and how much has none.

use super::page::Page;
use crate::simulate::Spec;
use crate::spec::Provenance;

/// Paths of a list that are named; what is left is counted.
const MOST_NAMED: usize = 12;

/// Sources in the order of the spec, each with the values that stand on it.
pub fn sources(page: &mut Page, spec: &Spec) {
    let all = &spec.gathered.provenance;
    if all.is_empty() {
        return;
    }
    page.heading("Sources of the numbers");
    let mut known: Vec<&str> = Vec::new();
    for source in all.iter().filter_map(|value| value.source.as_deref()) {
        if !known.contains(&source) {
            known.push(source);
        }
    }
    for source in known {
        let mine: Vec<&Provenance> = all.iter().filter(|value| value.source.as_deref() == Some(source)).collect();
        page.paragraph(source);
        let (confirmed, open): (Vec<&Provenance>, Vec<&Provenance>) =
            mine.into_iter().partition(|value| value.confirmed);
        if !confirmed.is_empty() {
            page.remark(&named(&confirmed));
        }
        if !open.is_empty() {
            page.remark(&format!("NOT CONFIRMED: {}", named(&open)));
        }
    }
    let without: Vec<&Provenance> = all.iter().filter(|value| value.source.is_none()).collect();
    match without.len() {
        0 => page.paragraph("Every value and law has a source."),
        1 => page.paragraph(&format!("No source is given for {}.", named(&without))),
        n => {
            page.paragraph(&format!("No source is given for {n} values and laws:"));
            page.remark(&named(&without));
        }
    }
}

/// The paths of values, as many as a reader wants to see.
fn named(values: &[&Provenance]) -> String {
    let mut names: Vec<String> = values.iter().take(MOST_NAMED).map(|value| value.path.to_string()).collect();
    if values.len() > MOST_NAMED {
        names.push(format!("and {} more", values.len() - MOST_NAMED));
    }
    names.join(", ")
}
