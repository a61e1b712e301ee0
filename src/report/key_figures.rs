//! The figures a reader looks for first: at the outlet, section by section, and at the places asked for.

use super::figures::{of, range, shown};
use super::page::{Edge, Page};
use crate::results::{Figure, Value};
use crate::simulate::{Run, Spec};
use crate::units::Dimension;

/// State quantities of the key list, and what a reader calls them.
const KEY: [(&str, &str); 11] = [
    ("conversion", "conversion"),
    ("number_average_molar_mass", "M_n"),
    ("weight_average_molar_mass", "M_w"),
    ("dispersity", "dispersity, M_w/M_n"),
    ("polymer_mass_fraction", "polymer content, by mass"),
    ("temperature", "temperature"),
    ("highest_temperature", "  highest across the duct"),
    ("lowest_temperature", "  lowest across the duct"),
    ("pressure", "pressure"),
    ("viscosity", "viscosity at zero shear"),
    ("velocity_ratio", "largest over mean velocity"),
];

/// Quantities of a place or a section in a table that compares them.
const COMPARED: [(&str, &str); 4] = [
    ("temperature", "temperature"),
    ("conversion", "conversion"),
    ("weight_average_molar_mass", "M_w"),
    ("dispersity", "dispersity"),
];

/// In place of a figure that lies beyond the end of the run.
const NOT_REACHED: &str = "not reached";

/// Key figures of the outlet, or of the place where the run ended.
pub fn key_figures(page: &mut Page, spec: &Spec, run: &Run) {
    let complete = run.end.limit.is_none();
    page.heading(if complete { "At the outlet" } else { "Where the run ended" });
    let header = ["", "mixing cup", if complete { "10 to 90 % of the flow" } else { "" }];
    let mut rows = vec![header.map(str::to_owned).to_vec()];
    for (name, label) in KEY {
        let Some(figure) = run.end.figures.iter().find(|figure| figure.name == name) else { continue };
        let Some(value) = of(figure) else { continue };
        let spread = if complete { spread(run, &format!("outlet.{name}"), figure.dimension) } else { None };
        let label = match (name, spec.plant.material.conversion_of) {
            ("conversion", Some(k)) => format!("conversion of {}", spec.plant.material.species[k]),
            _ => label.to_owned(),
        };
        rows.push(vec![label, value, spread.unwrap_or_default()]);
    }
    rows.extend(flow_rows(run));
    page.table(&[Edge::Left, Edge::Right, Edge::Right], &rows);
}

/// The mass flow, and how much of it is polymer.
fn flow_rows(run: &Run) -> Vec<Vec<String>> {
    let figure = |name: &str| run.end.figures.iter().find(|figure| figure.name == name).and_then(of);
    let rows = [("mass_flow", "mass flow"), ("polymer_mass_flow", "  of it polymer")];
    rows.into_iter().filter_map(|(name, label)| Some(vec![label.to_owned(), figure(name)?])).collect()
}

/// The spread over the cross-section, where a quantity has one.
fn spread(run: &Run, name: &str, dimension: Dimension) -> Option<String> {
    let low = run.number(&format!("{name}.percentile_10"))?;
    let high = run.number(&format!("{name}.percentile_90"))?;
    Some(range(name, low, high, dimension))
}

/// One row a section, where there are several.
pub fn sections(page: &mut Page, spec: &Spec, run: &Run) {
    let sections = &spec.plant.sections;
    if sections.len() < 2 {
        return;
    }
    page.heading("Section by section, at the outlet of each");
    let mut header = vec!["section".to_owned()];
    header.extend(COMPARED.map(|(_, label)| label.to_owned()));
    header.extend(["hottest", "pressure drop", "wall heat"].map(str::to_owned));
    let mut rows = vec![header];
    for section in sections {
        let figure = |name: &str| run.figure(&format!("section.{}.{name}", section.name));
        let mut row = vec![section.name.clone()];
        row.extend(COMPARED.map(|(name, _)| cell(figure(&format!("outlet.{name}")))));
        row.extend(["hot_spot.temperature", "pressure_drop", "wall_heat"].map(|name| cell(figure(name))));
        rows.push(row);
    }
    let entered =
        |name: &str| run.figure(&format!("section.{name}.wall_heat")).is_some_and(|figure| of(figure).is_some());
    for (row, section) in rows.iter_mut().skip(1).zip(sections) {
        if !entered(&section.name) {
            row[1] = NOT_REACHED.to_owned();
        }
    }
    table_without_empty_columns(page, rows);
}

/// One row a place of `output.places`.
pub fn places(page: &mut Page, spec: &Spec, run: &Run) {
    let places = &spec.plant.output.places;
    if places.is_empty() {
        return;
    }
    page.heading("At the places asked for");
    let mut rows = vec![["place", "z", "r/R"].map(str::to_owned).to_vec()];
    rows[0].extend(COMPARED.map(|(_, label)| label.to_owned()));
    for place in places {
        let position =
            place.position.map_or("cup".to_owned(), |position| shown("hot_spot.position", position, Dimension::RATIO));
        let mut row = vec![place.name.clone(), shown("z", place.z, Dimension::LENGTH), position];
        row.extend(COMPARED.map(|(name, _)| cell(run.figure(&format!("place.{}.{name}", place.name)))));
        if place.z > run.end.z {
            row[3] = NOT_REACHED.to_owned();
        }
        rows.push(row);
    }
    table_without_empty_columns(page, rows);
}

/// A figure in a table, `-` where it is missing.
fn cell(figure: Option<&Figure>) -> String {
    figure.and_then(of).unwrap_or_else(|| "-".to_owned())
}

/// A table of names and numbers; a column that has no number at all is left out.
fn table_without_empty_columns(page: &mut Page, rows: Vec<Vec<String>>) {
    let columns = rows.first().map_or(0, Vec::len);
    let kept: Vec<usize> = (0..columns).filter(|k| rows.iter().skip(1).any(|row| row[*k] != "-")).collect();
    let rows: Vec<Vec<String>> = rows.iter().map(|row| kept.iter().map(|k| row[*k].clone()).collect()).collect();
    let mut edges = vec![Edge::Right; kept.len()];
    edges[0] = Edge::Left;
    page.table(&edges, &rows);
}

/// Every quantity of the run, with the reason where one is missing.
pub fn all_quantities(page: &mut Page, run: &Run) {
    page.heading("All quantities");
    let item = |figure: &Figure| match &figure.value {
        Value::Missing(reason) => (figure.name.clone(), format!("- ({reason})")),
        Value::Number(_) | Value::Word(_) => (figure.name.clone(), cell(Some(figure))),
    };
    page.labelled(&run.figures.iter().map(item).collect::<Vec<(String, String)>>());
}
