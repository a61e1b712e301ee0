//! Profiles for files: along z, and over z and r.

use super::catalogue::{At, place_figures};
use super::figure::Value;
use super::state_quantities::STATE;
use super::view::RunView;
use crate::units::Dimension;

/// A table with one row a station or a stream tube.
#[derive(Clone, Debug, PartialEq)]
pub struct Table {
    /// Columns: name and dimension; the section's name stands apart, before them.
    pub columns: Vec<(String, Dimension)>,
    /// Rows: the section, and a value for each column, empty where not computed.
    pub rows: Vec<(String, Vec<Option<f64>>)>,
}

/// Quantities of places along z: one row a recorded station, z from the inlet.
#[must_use]
pub fn along_z(run: &RunView<'_>) -> Table {
    let mut columns = vec![("z".to_owned(), Dimension::LENGTH)];
    columns.extend(place_figures(run.end()).into_iter().map(|figure| (figure.name, figure.dimension)));
    let mut rows = Vec::new();
    for station in run.stations() {
        let mut row = vec![Some(station.z)];
        row.extend(place_figures(station).iter().map(|figure| figure.value.number()));
        rows.push((station.leg.system.section.name.clone(), row));
    }
    Table { columns, rows }
}

/// Local quantities over z and r: one row a stream tube of a station.
///
/// `r` is √⟨r²⟩ of the tube, `r_inner` and `r_outer` its faces.
#[must_use]
pub fn over_z_and_r(run: &RunView<'_>) -> Table {
    let length = Dimension::LENGTH;
    let mut columns: Vec<(String, Dimension)> = [
        ("z", length),
        ("tube", Dimension::RATIO),
        ("r", length),
        ("r_inner", length),
        ("r_outer", length),
        ("velocity", Dimension::VELOCITY),
    ]
    .map(|(name, dimension)| (name.to_owned(), dimension))
    .into();
    let locals: Vec<_> = STATE
        .iter()
        .filter_map(|quantity| match quantity.at {
            At::Place { local: Some(local), .. } => Some((quantity, local)),
            At::Place { local: None, .. } | At::Run { .. } => None,
        })
        .flat_map(|(quantity, local)| {
            quantity.names(run.plant).into_iter().map(move |(name, species)| (name, quantity.dimension, local, species))
        })
        .collect();
    columns.extend(locals.iter().map(|(name, dimension, ..)| (name.clone(), *dimension)));
    let mut rows = Vec::new();
    for station in run.stations() {
        let geometry = &station.profile.geometry;
        for i in 0..station.n_tubes() {
            let velocity = station.profile.volume_flows[i] / geometry.areas[i];
            #[expect(clippy::cast_precision_loss, reason = "tubes are at most a few thousand")]
            let tube = i as f64;
            let mut row = vec![
                Some(station.z),
                Some(tube),
                Some(geometry.mean_square(i).sqrt()),
                Some(geometry.squares[i].sqrt()),
                Some(geometry.squares[i + 1].sqrt()),
                Some(velocity),
            ];
            let local = locals.iter().map(|(_, _, local, species)| local(station, i, *species));
            row.extend(local.map(|value| Value::number_or(value, "").number()));
            rows.push((station.leg.system.section.name.clone(), row));
        }
    }
    Table { columns, rows }
}
