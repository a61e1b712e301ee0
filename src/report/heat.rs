//! The hot spot, pressure and heat, the wall, and what the balances leave open.

use super::figures::{of_run, range, reason, shown};
use super::page::{Page, glued};
use crate::model::wall::Wall;
use crate::results::{HotSpot, Site};
use crate::simulate::{Run, Spec};
use crate::units::Dimension;

/// r/R below this is the axis.
const AXIS: f64 = 1e-6;

/// Balances and what a reader calls them.
const BALANCES: [(&str, &str); 4] = [
    ("balance.mass", "mass"),
    ("balance.elements", "elements"),
    ("balance.monomer_units", "monomer units"),
    ("balance.energy", "energy"),
];

/// The hottest point in one sentence.
pub fn hot_spot(page: &mut Page, spec: &Spec, run: &Run) {
    page.heading("Hot spot");
    page.paragraph(&hot_spot_sentence(spec, &run.hot_spot));
}

fn hot_spot_sentence(spec: &Spec, spot: &HotSpot) -> String {
    let length = |value: f64| glued(&shown("", value, Dimension::LENGTH));
    let temperature = glued(&shown("", spot.temperature, Dimension::TEMPERATURE));
    let across = match spot.position {
        position if position < AXIS => "on the axis".to_owned(),
        _ if spot.site == Site::Wall => format!("at the wall (r = {})", length(spot.r)),
        position => {
            let position = shown("hot_spot.position", position, Dimension::RATIO);
            format!("at r = {} (r/R = {position})", length(spot.r))
        }
    };
    let of_several =
        if spec.plant.sections.len() > 1 { format!(" in section `{}`", spot.section) } else { String::new() };
    let mut sentence = format!("{temperature}, {} from the inlet{of_several}, {across}", length(spot.z));
    let wall = spec.plant.sections.iter().find(|section| section.name == spot.section).map(|section| &section.wall);
    if let (Some(rise), Some(what)) = (spot.rise, wall.and_then(reference)) {
        let (size, side) = if rise < 0.0 { (-rise, "below") } else { (rise, "above") };
        let size = glued(&shown("", size, Dimension::TEMPERATURE_DIFFERENCE));
        sentence.push_str(&format!("; {size} {side} {what} there"));
    }
    if let Some(conversion) = spot.conversion {
        sentence.push_str(&format!("; local conversion {}", glued(&shown("", conversion, Dimension::RATIO))));
    }
    sentence.push('.');
    match spot.site {
        Site::Inside | Site::Wall => {}
        Site::Inlet => sentence.push_str(" It lies at the inlet."),
        Site::End => sentence.push_str(" It lies at the end: it may be hotter beyond."),
    }
    sentence
}

/// What the rise of a hot spot is counted from.
fn reference(wall: &Wall) -> Option<&'static str> {
    match wall {
        Wall::Insulated => None,
        Wall::WallTemperature(_) => Some("the wall"),
        Wall::Jacket(_) => Some("the coolant"),
    }
}

/// Pressure drop and heats, and the wall.
pub fn flow_and_heat(page: &mut Page, run: &Run) {
    page.heading("Pressure, heat and wall");
    let mut items = vec![("pressure drop", pressure(run))];
    items.push(("heat of reaction", heat(run, "reaction_heat", "set free", "taken up")));
    items.push(("heat through the wall", heat(run, "wall_heat", "out of the fluid", "into the fluid")));
    if reason(run, "viscous_heat").is_none() {
        items.push(("heat of friction", heat(run, "viscous_heat", "set free", "taken up")));
    }
    items.extend(wall(run));
    let items: Vec<(String, String)> = items.into_iter().map(|(label, words)| (label.to_owned(), words)).collect();
    page.labelled(&items);
}

fn pressure(run: &Run) -> String {
    let Some(drop) = of_run(run, "pressure_drop") else {
        let reason = reason(run, "pressure_drop").unwrap_or_default();
        return format!("not computed: {reason}");
    };
    let shares = [("pressure_drop.friction", "friction"), ("pressure_drop.gravity", "height")];
    let has_height = run.number("pressure_drop.gravity").is_some_and(|gravity| gravity != 0.0);
    let share = |(name, words): (&str, &str)| Some(format!("{words} {}", of_run(run, name)?));
    let shares: Vec<String> = shares.into_iter().filter_map(share).collect();
    let shares = if has_height { shares.join(", ") } else { "all of it friction".to_owned() };
    format!("{drop} ({shares})")
}

/// A heat without its sign, and in words where it goes.
fn heat(run: &Run, name: &str, positive: &str, negative: &str) -> String {
    let Some(value) = run.number(name) else {
        return format!("not computed: {}", reason(run, name).unwrap_or_default());
    };
    let words = if value < 0.0 { negative } else { positive };
    let size = shown(name, value.abs(), Dimension::POWER);
    if value == 0.0 { "none".to_owned() } else { format!("{size} {words}") }
}

fn wall(run: &Run) -> Vec<(&'static str, String)> {
    let mut items = Vec::new();
    let ends = (run.number("wall.lowest_temperature"), run.number("wall.highest_temperature"));
    if let (Some(low), Some(high)) = ends {
        let same = shown("", low, Dimension::TEMPERATURE) == shown("", high, Dimension::TEMPERATURE);
        let text =
            if same { shown("", low, Dimension::TEMPERATURE) } else { range("", low, high, Dimension::TEMPERATURE) };
        items.push(("wall, temperature", text));
    }
    let highest = [
        ("wall.highest_heat_flux", "wall, highest heat flux"),
        ("wall.highest_shear_rate", "wall, highest shear rate"),
        ("wall.highest_shear_stress", "wall, highest stress"),
    ];
    items.extend(highest.into_iter().filter_map(|(name, label)| Some((label, of_run(run, name)?))));
    items
}

/// What the balances leave open, relative.
pub fn balances(page: &mut Page, run: &Run) {
    page.heading("What the balances leave open, relative");
    let item = |(name, label): (&str, &str)| Some((label.to_owned(), of_run(run, name)?));
    page.labelled(&BALANCES.into_iter().filter_map(item).collect::<Vec<(String, String)>>());
}

/// Whether reactions set heat free anywhere in the run.
#[must_use]
pub fn is_exothermic(run: &Run) -> bool {
    run.number("reaction_heat").is_some_and(|heat| heat > 0.0)
}
