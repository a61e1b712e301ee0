//! The one catalogue of quantities: names, dimensions, definitions, and how each is computed.
//!
//! Reports, `accept`, exports and messages read it; nothing about a quantity is written twice.

use super::figure::{Figure, Value};
use super::run_quantities::{RUN, Scope};
use super::state_quantities::{STATE, at_place, spread};
use super::view::{RunView, StationView};
use crate::discretise::layout::Integral;
use crate::model::plant::Plant;
use crate::model::section::Section;
use crate::model::wall::Wall;
use crate::units::Dimension;

/// A quantity of the catalogue.
#[derive(Debug)]
pub struct Quantity {
    /// Its name; `SPECIES` stands for the name of a species.
    pub name: &'static str,
    /// Its dimension.
    pub dimension: Dimension,
    /// Its definition.
    pub about: &'static str,
    /// What it belongs to, and how it is computed.
    pub at: At,
}

/// A value of one stream tube: tube, species.
pub type Local = fn(&StationView<'_>, usize, usize) -> Option<f64>;

/// What a quantity belongs to, and how it is computed.
#[derive(Debug)]
pub enum At {
    /// A place: `outlet.…`, `section.NAME.outlet.…`, `place.NAME.…`.
    Place {
        /// Of the mixing cup or the cross-section; the number of a species where the name asks for one.
        cup: fn(&StationView<'_>, usize) -> Value,
        /// Of one stream tube, where it is local: tube, species.
        local: Option<Local>,
        /// Whether `….percentile_10`, `_50`, `_90` exist.
        spread: bool,
    },
    /// The run: bare, and `section.NAME.…` where it makes sense there.
    Run {
        /// Of a run or one section.
        value: fn(&RunView<'_>, Scope) -> Value,
        /// Whether sections have it too.
        in_sections: bool,
    },
}

/// Where a name's part for a species stands.
const SPECIES: &str = "SPECIES";
/// Percentiles of the spread over the stream tubes.
const PERCENTILES: [(&str, f64); 3] = [("percentile_10", 0.1), ("percentile_50", 0.5), ("percentile_90", 0.9)];

/// Quantities of a coolant.
const COOLANT: [(&str, Dimension); 2] = [("outlet_temperature", Dimension::TEMPERATURE), ("heat", Dimension::POWER)];

/// A quantity as a plant has it: its full name, and what it takes to compute it.
#[derive(Clone, Debug)]
pub struct Slot {
    /// The full name, such as `section.zone_1.outlet.conversion`.
    pub name: String,
    /// Its dimension.
    pub dimension: Dimension,
    kind: SlotKind,
}

#[derive(Clone, Debug)]
enum SlotKind {
    /// A quantity of a place: which, of what species, at what share of the spread.
    State { place: PlaceKind, quantity: &'static Quantity, species: usize, share: Option<f64> },
    /// A quantity of the run or of a section.
    Run { quantity: &'static Quantity, scope: Scope },
    /// Outlet temperature of a coolant.
    CoolantTemperature(String),
    /// Heat into a coolant.
    CoolantHeat(String),
    /// How the run ended.
    Ended,
}

#[derive(Clone, Copy, Debug)]
enum PlaceKind {
    Outlet,
    Section(usize),
    Place(usize),
}

/// Everything that a run of a plant reports, in the order of reports.
#[must_use]
pub fn slots(plant: &Plant) -> Vec<Slot> {
    let mut all = Vec::new();
    state_slots("outlet.", PlaceKind::Outlet, plant, &mut all);
    run_slots("", Scope::Run, &mut all);
    for name in coolants(plant) {
        let kinds = [SlotKind::CoolantTemperature(name.clone()), SlotKind::CoolantHeat(name.clone())];
        for ((suffix, dimension), kind) in COOLANT.into_iter().zip(kinds) {
            all.push(Slot { name: format!("coolant.{name}.{suffix}"), dimension, kind });
        }
    }
    for (s, section) in plant.sections.iter().enumerate() {
        state_slots(&format!("section.{}.outlet.", section.name), PlaceKind::Section(s), plant, &mut all);
        run_slots(&format!("section.{}.", section.name), Scope::Section(s), &mut all);
    }
    for (p, place) in plant.output.places.iter().enumerate() {
        state_slots(&format!("place.{}.", place.name), PlaceKind::Place(p), plant, &mut all);
    }
    all.push(Slot { name: "ended".to_owned(), dimension: Dimension::RATIO, kind: SlotKind::Ended });
    all
}

/// Every figure of a run, in the order of reports.
#[must_use]
pub fn figures(run: &RunView<'_>) -> Vec<Figure> {
    let figure = |slot: Slot| {
        let value = slot.value(run);
        Figure { name: slot.name, dimension: slot.dimension, value }
    };
    slots(run.plant).into_iter().map(figure).collect()
}

/// Figures of one place of a run, without a prefix to their names.
#[must_use]
pub fn place_figures(station: &StationView<'_>) -> Vec<Figure> {
    let figure = |quantity: &'static Quantity| {
        quantity.names(station.plant).into_iter().map(move |(name, species)| {
            let value = at_place(quantity, station, species, None);
            Figure { name, dimension: quantity.dimension, value }
        })
    };
    STATE.iter().flat_map(figure).collect()
}

impl Quantity {
    /// The names it has for a plant, with the number of the species each stands for.
    pub(super) fn names(&self, plant: &Plant) -> Vec<(String, usize)> {
        if !self.name.contains(SPECIES) {
            return vec![(self.name.to_owned(), 0)];
        }
        let species = plant.material.species.iter().enumerate();
        species.map(|(k, species)| (self.name.replace(SPECIES, species), k)).collect()
    }
}

fn state_slots(prefix: &str, place: PlaceKind, plant: &Plant, all: &mut Vec<Slot>) {
    for quantity in STATE {
        let dimension = quantity.dimension;
        for (name, species) in quantity.names(plant) {
            let kind = SlotKind::State { place, quantity, species, share: None };
            all.push(Slot { name: format!("{prefix}{name}"), dimension, kind });
        }
        if !matches!(quantity.at, At::Place { spread: true, .. }) {
            continue;
        }
        for (suffix, share) in PERCENTILES {
            let kind = SlotKind::State { place, quantity, species: 0, share: Some(share) };
            all.push(Slot { name: format!("{prefix}{}.{suffix}", quantity.name), dimension, kind });
        }
    }
}

fn run_slots(prefix: &str, scope: Scope, all: &mut Vec<Slot>) {
    for quantity in RUN {
        if scope == Scope::Run || matches!(quantity.at, At::Run { in_sections: true, .. }) {
            let kind = SlotKind::Run { quantity, scope };
            all.push(Slot { name: format!("{prefix}{}", quantity.name), dimension: quantity.dimension, kind });
        }
    }
}

/// Names of the coolants: lines of `coolants` in use, and sections with a coolant of their own.
fn coolants(plant: &Plant) -> Vec<String> {
    let mut names: Vec<String> = plant.sections.iter().filter_map(coolant_of).collect();
    let mut seen = Vec::new();
    names.retain(|name| {
        let first = !seen.contains(name);
        seen.push(name.clone());
        first
    });
    names
}

fn coolant_of(section: &Section) -> Option<String> {
    match &section.wall {
        Wall::Jacket(jacket) => Some(jacket.coolant.clone().unwrap_or_else(|| section.name.clone())),
        Wall::Insulated | Wall::WallTemperature(_) => None,
    }
}

impl Slot {
    /// Its value in a run.
    #[must_use]
    pub fn value(&self, run: &RunView<'_>) -> Value {
        match &self.kind {
            SlotKind::State { place, quantity, species, share } => {
                let (station, position) = match station_of(run, *place) {
                    Some(found) => found,
                    None => return Value::Missing(run.not_reached()),
                };
                match share {
                    None => at_place(quantity, station, *species, position),
                    Some(_) if position.is_some() => Value::Missing("a position has no spread".to_owned()),
                    Some(share) => spread(quantity, station, *share),
                }
            }
            SlotKind::Run { scope: Scope::Section(s), .. } if *s >= run.sections.len() => {
                Value::Missing(run.not_reached())
            }
            SlotKind::Run { quantity, scope } => match &quantity.at {
                At::Run { value, .. } => value(run, *scope),
                At::Place { .. } => Value::Missing("not a quantity of a run".to_owned()),
            },
            SlotKind::CoolantTemperature(name) => {
                let section = run.plant.sections.iter().find(|section| coolant_of(section).as_ref() == Some(name));
                let temperature = section.and_then(|section| section.wall.reference_temperature());
                Value::number_or(temperature, "no section has the coolant")
            }
            SlotKind::CoolantHeat(name) => {
                let of = |stations: &Vec<StationView<'_>>| {
                    let end = stations.last()?;
                    let serves = coolant_of(end.leg.system.section).as_ref() == Some(name);
                    serves.then(|| end.integral(Integral::WallHeat))
                };
                let heat = run.sections.iter().filter_map(of).reduce(|sum, heat| sum + heat);
                heat.map_or_else(|| Value::Missing(run.not_reached()), Value::Number)
            }
            SlotKind::Ended => Value::Word(run.trajectory.ended().map_or("outlet", |limit| limit.path()).to_owned()),
        }
    }

    /// Whether its value lies between 0 and 1.
    #[must_use]
    pub fn is_fraction(&self) -> bool {
        const FRACTIONS: [&str; 4] = ["conversion", "mass_fraction", "polymer_mass_fraction", "hot_spot.position"];
        let quantity = match &self.kind {
            SlotKind::State { quantity, .. } | SlotKind::Run { quantity, .. } => quantity,
            SlotKind::CoolantTemperature(_) | SlotKind::CoolantHeat(_) | SlotKind::Ended => return false,
        };
        FRACTIONS.iter().any(|fraction| quantity.name.starts_with(fraction)) || quantity.name == "hot_spot.conversion"
    }

    /// Whether its value is a word.
    #[must_use]
    pub fn is_word(&self) -> bool {
        match &self.kind {
            SlotKind::Ended => true,
            SlotKind::Run { quantity, .. } => quantity.name == "hot_spot.section",
            SlotKind::State { .. } | SlotKind::CoolantTemperature(_) | SlotKind::CoolantHeat(_) => false,
        }
    }

    /// Whether the figure is final only if the run reached the outlet.
    #[must_use]
    pub fn needs_whole_run(&self) -> bool {
        match self.kind {
            SlotKind::Run { scope: Scope::Run, .. } | SlotKind::CoolantHeat(_) => true,
            SlotKind::Run { .. } | SlotKind::State { .. } | SlotKind::CoolantTemperature(_) | SlotKind::Ended => false,
        }
    }
}

/// The station of a place, if the run came that far, and the position asked for there.
fn station_of<'r, 'a>(run: &'r RunView<'a>, place: PlaceKind) -> Option<(&'r StationView<'a>, Option<f64>)> {
    match place {
        PlaceKind::Outlet => run.is_complete().then(|| (run.end(), None)),
        PlaceKind::Section(s) => {
            let complete = run.trajectory.legs.get(s)?.leg.ended.is_none();
            let last = run.sections.get(s)?.last()?;
            complete.then_some((last, None))
        }
        PlaceKind::Place(p) => {
            let place = &run.plant.output.places[p];
            nearest(run, place.z, place.section).map(|station| (station, place.position))
        }
    }
}

/// The station recorded at a z, if the run came that far.
fn nearest<'r, 'a>(run: &'r RunView<'a>, z: f64, section: Option<usize>) -> Option<&'r StationView<'a>> {
    let tolerance = 1e-9 * run.plant.length();
    let distance = |station: &&StationView<'_>| (station.z - z).abs();
    let of_section = |s: usize| section.is_none_or(|wanted| wanted == s);
    let sections = run.sections.iter().enumerate().filter(|(s, _)| of_section(*s));
    let station = sections.flat_map(|(_, all)| all).min_by(|a, b| distance(a).total_cmp(&distance(b)))?;
    (distance(&station) <= tolerance).then_some(station)
}
