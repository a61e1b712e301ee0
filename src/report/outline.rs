//! What a spec describes, without solving it: for a reader who wants to know whether axirad understood.

use super::figures::shown;
use super::page::{Edge, Page, glued};
use crate::model::flow::Profile;
use crate::model::kinetics::Scheme;
use crate::model::plant::Plant;
use crate::model::section::Section;
use crate::model::wall::Wall;
use crate::simulate::Spec;
use crate::units::{self, Dimension};

/// Digits of a dimensionless group.
const GROUP_DIGITS: usize = 3;

/// What a spec describes: duct, feed, species, chemistry, sections, size of the problem, groups at the inlet.
#[must_use]
pub fn outline(spec: &Spec) -> String {
    let plant = &spec.plant;
    let mut page = Page::default();
    if let Some(title) = &spec.title {
        page.paragraph(title);
    }
    let items: Vec<(String, String)> = [
        ("feed", feed(plant)),
        ("flow", flow(plant)),
        ("species", species(plant)),
        ("chemistry", chemistry(plant)),
        ("limits asked for", accept(spec)),
        ("unknowns", unknowns(plant)),
        ("groups at the inlet", groups(plant)),
    ]
    .into_iter()
    .filter(|(_, words)| !words.is_empty())
    .map(|(label, words)| (label.to_owned(), words))
    .collect();
    page.labelled(&items);
    page.blank();
    page.table(&[Edge::Left, Edge::Right, Edge::Right, Edge::Left], &sections(plant));
    page.into_text()
}

/// What is said of a part.
#[must_use]
pub fn part(name: &str, checked: &str) -> String {
    let mut page = Page::default();
    page.line(&format!("{name}: a part"));
    page.paragraph(checked);
    page.into_text()
}

fn feed(plant: &Plant) -> String {
    let feed = &plant.feed;
    let pressure = feed.pressure.map(|pressure| format!(", {}", shown("", pressure, Dimension::PRESSURE_LEVEL)));
    format!(
        "{} at {}{}",
        shown("", feed.mass_flow, Dimension::MASS_FLOW),
        shown("", feed.temperature(), Dimension::TEMPERATURE),
        pressure.unwrap_or_default()
    )
}

fn flow(plant: &Plant) -> String {
    let profile = match plant.flow.profile {
        Profile::Plug => "plug",
        Profile::Parabolic => "parabolic",
        Profile::FromViscosity => "from_viscosity",
    };
    let heating = if plant.flow.viscous_heating { ", with viscous heating" } else { "" };
    format!("{profile}{heating}")
}

/// Species that the run has, and the mass fraction of each in the feed.
fn species(plant: &Plant) -> String {
    let material = &plant.material;
    let mut fractions = vec![0.0; material.n_components()];
    material.fractions(&plant.feed.state, &mut fractions);
    let names = material.species.iter().map(String::as_str).chain(material.has_polymer().then_some("polymer"));
    let said = names.zip(&fractions).map(|(name, fraction)| {
        let present = *fraction > 1e-15;
        if present { glued(&format!("{name} {}", shown("", *fraction, Dimension::RATIO))) } else { name.to_owned() }
    });
    said.collect::<Vec<String>>().join(", ")
}

fn chemistry(plant: &Plant) -> String {
    let chemistry = &plant.material.chemistry;
    let scheme = match &chemistry.scheme {
        Scheme::None => None,
        Scheme::FreeRadical(scheme) => Some(format!("free_radical of {}", plant.material.species[scheme.monomer])),
    };
    let names: Vec<&str> = chemistry.reactions.iter().map(|reaction| reaction.name.as_str()).collect();
    let reactions = (!names.is_empty()).then(|| format!("reactions {}", names.join(", ")));
    let all: Vec<String> = scheme.into_iter().chain(reactions).collect();
    if all.is_empty() { "none".to_owned() } else { all.join("; ") }
}

fn accept(spec: &Spec) -> String {
    match spec.accept.len() {
        0 => "none (`accept`)".to_owned(),
        n => format!("{n} (`accept`)"),
    }
}

fn unknowns(plant: &Plant) -> String {
    let (n_tubes, n_vars) = (plant.numerics.stream_tubes, plant.material.n_vars());
    let what = match plant.material.n_moments() {
        0 => "amounts and temperature".to_owned(),
        n => format!("amounts, {n} moments and temperature"),
    };
    format!("{} = {n_tubes} stream tubes x {n_vars} ({what})", n_tubes * n_vars)
}

/// Re = ρūD/η, Pe = ρc_pūD/λ, Gz = ṁc_p/(λL) of the feed in the first section's bore.
fn groups(plant: &Plant) -> String {
    let mut work = plant.material.workspace::<f64>();
    let point = plant.material.evaluate(&plant.feed.state, &mut work);
    let tube = plant.sections[0].duct.tube;
    let flux = plant.feed.mass_flow / tube.area();
    let diameter = 2.0 * tube.radius;
    let reynolds = plant.material.mixture.has_viscosity().then(|| flux * diameter / point.viscosity);
    let peclet = flux * point.heat_capacity * diameter / point.conductivity;
    let graetz = plant.feed.mass_flow * point.heat_capacity / (point.conductivity * plant.length());
    let all = [("Reynolds", reynolds), ("Peclet of heat", Some(peclet)), ("Graetz", Some(graetz))];
    let finite = all.into_iter().filter_map(|(name, value)| Some((name, value.filter(|value| value.is_finite())?)));
    let said = finite.map(|(name, value)| glued(&format!("{name} {}", units::show_number(value, GROUP_DIGITS))));
    said.collect::<Vec<String>>().join(", ")
}

/// A table of the sections: length, bore, wall.
fn sections(plant: &Plant) -> Vec<Vec<String>> {
    let mut rows = vec![["section", "length", "inner diameter", "wall"].map(str::to_owned).to_vec()];
    let length = |value: f64| shown("", value, Dimension::LENGTH);
    let row = |section: &Section| {
        let diameter = 2.0 * section.duct.tube.radius;
        vec![section.name.clone(), length(section.length), length(diameter), wall(&section.wall)]
    };
    rows.extend(plant.sections.iter().map(row));
    rows
}

fn wall(wall: &Wall) -> String {
    let temperature = |value: f64| shown("", value, Dimension::TEMPERATURE);
    match wall {
        Wall::Insulated => "insulated".to_owned(),
        Wall::WallTemperature(value) => format!("wall_temperature {}", temperature(*value)),
        Wall::Jacket(jacket) => {
            let coefficient = shown("", jacket.coefficient, Dimension::HEAT_TRANSFER_COEFFICIENT);
            format!("jacket {coefficient}, coolant {}", temperature(jacket.coolant_temperature))
        }
    }
}
