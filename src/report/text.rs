//! The report as a page: the verdict first, then what a design is decided on, then what stands behind it.

use super::page::Page;
use super::{heat, key_figures, sources, verdict};
use crate::integrate::work::Work;
use crate::judge::warning::Warning;
use crate::simulate::{Run, Spec};

/// Said with every run in which reactions set heat free.
const CAUTION: &str = "A screening aid: it does not replace calorimetry, a hazard review, local codes or licensed \
                       practice. A hot spot is as good as the kinetics, properties and wall that were given.";

/// The whole report; `name` heads it where the spec has no title, `verbose` adds the work and all quantities.
#[must_use]
pub fn text(spec: &Spec, run: &Run, name: &str, verbose: bool) -> String {
    let mut page = Page::default();
    page.title(spec.title.as_deref().unwrap_or(name));
    verdict::accept(&mut page, run);
    verdict::end(&mut page, spec, run);
    key_figures::key_figures(&mut page, spec, run);
    heat::hot_spot(&mut page, spec, run);
    heat::flow_and_heat(&mut page, run);
    key_figures::sections(&mut page, spec, run);
    key_figures::places(&mut page, spec, run);
    heat::balances(&mut page, run);
    warnings(&mut page, &run.warnings);
    sources::sources(&mut page, spec);
    if verbose {
        work(&mut page, &run.work);
        key_figures::all_quantities(&mut page, run);
    }
    if heat::is_exothermic(run) {
        page.heading(CAUTION);
    }
    page.into_text()
}

/// Warnings by code; those acknowledged last, with the reason.
fn warnings(page: &mut Page, warnings: &[Warning]) {
    let (accepted, open): (Vec<&Warning>, Vec<&Warning>) =
        warnings.iter().partition(|warning| warning.acknowledged.is_some());
    match (open.len(), accepted.len()) {
        (0, 0) => return page.heading("Warnings: none"),
        (n, 0) => page.heading(&format!("Warnings: {n}")),
        (n, m) => page.heading(&format!("Warnings: {n}, and {m} acknowledged")),
    }
    for warning in open.into_iter().chain(accepted) {
        page.item(warning.code, &warning.text);
        if let Some(reason) = &warning.acknowledged {
            page.remark(&format!("acknowledged: {reason}"));
        }
    }
}

/// What the run cost, without a clock.
fn work(page: &mut Page, work: &Work) {
    page.heading("Work of the integrator");
    page.paragraph(&format!(
        "{} steps, {} right-hand sides, {} Jacobians, {} factorisations, {} Newton iterations; given up and tried \
         again: {} for Newton, {} for the error.",
        work.steps,
        work.right_hand_sides,
        work.jacobians,
        work.factorisations,
        work.newton_iterations,
        work.newton_failures,
        work.error_failures
    ));
}
