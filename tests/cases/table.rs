//! Rows of the tables: a figure by its short name, the converged value, the errors at N = 40 and N = 80.
//!
//! `T@0.25,0.9` is the temperature at z = 0.25 m and r/R = 0.9, `X@…` the local conversion there; `Xcup@0.25` and
//! the like belong to the mixing cup or the wall at z = 0.25 m, a name alone to the outlet or the run.

use crate::support::{Case, Checks, Ran};

/// One row.
#[derive(Clone, Debug)]
pub struct Row {
    name: &'static str,
    converged: f64,
    errors: [f64; 2],
}

/// Reads rows of four words a line.
pub fn rows(text: &'static str) -> Vec<Row> {
    let row = |line: &'static str| {
        let words: Vec<&'static str> = line.split_whitespace().collect();
        let number = |k: usize| -> f64 { words[k].parse().unwrap_or_else(|_| panic!("no number in `{line}`")) };
        Row { name: words[0], converged: number(1), errors: [number(2), number(3)] }
    };
    text.lines().filter(|line| !line.trim().is_empty()).map(row).collect()
}

impl Row {
    /// z, and r/R where the row is local.
    fn place(&self) -> Option<(f64, Option<f64>)> {
        let (_, place) = self.name.split_once('@')?;
        let number = |text: &str| -> f64 { text.parse().unwrap_or_else(|_| panic!("no number in `{}`", self.name)) };
        Some(match place.split_once(',') {
            Some((z, x)) => (number(z), Some(number(x))),
            None => (number(place), None),
        })
    }

    /// The name of the place in the spec.
    fn place_name(&self) -> String {
        let (_, place) = self.name.split_once('@').expect("only rows with a place are asked");
        format!("at_{}", place.replace('.', "_").replace(',', "_r_"))
    }

    fn is_temperature(&self) -> bool {
        self.name.starts_with('T')
    }

    /// The value of the row in a run, in the table's unit.
    pub fn value(&self, run: &Ran) -> f64 {
        let kind = self.name.split('@').next().unwrap_or_default();
        let quantity = match kind {
            "X" | "Xcup" => "conversion",
            "T" | "Tcup" => "temperature",
            "Twall" => "wall_temperature",
            "qwall" => "wall_heat_flux",
            "vratio" => "velocity_ratio",
            "G" | "G_exit" => "pressure_gradient",
            "Mn" => "number_average_molar_mass",
            "Mw" => "weight_average_molar_mass",
            "PDI" => "dispersity",
            "dp" => return run.number("pressure_drop.friction"),
            "z_hot" => return run.number("hot_spot.z"),
            "T_hot" => return run.number("hot_spot.temperature"),
            _ => panic!("no quantity belongs to `{}`", self.name),
        };
        let unit = if matches!(kind, "Mn" | "Mw") { 1e3 } else { 1.0 }; // the table has g/mol
        match self.place() {
            Some(_) => unit * run.number(&format!("place.{}.{quantity}", self.place_name())),
            None => unit * run.number(&format!("outlet.{quantity}")),
        }
    }
}

/// The case with every place of a table recorded.
pub fn with_places(mut case: Case, rows: &[Row]) -> Case {
    for row in rows {
        case = match row.place() {
            Some((z, Some(x))) => case.point_at(&row.place_name(), z, x),
            Some((z, None)) => case.cup_at(&row.place_name(), z),
            None => case,
        };
    }
    case
}

/// Holds a run on 40 or 80 tubes against the table.
pub fn check_grid(run: &Ran, rows: &[Row], n: usize) {
    let mut checks = Checks::default();
    for row in rows {
        let error = row.errors[usize::from(n == 80)].abs();
        let factor = if row.name.contains(',') { 3.0 } else { 1.2 };
        let rounding = if row.is_temperature() { 1e-4 } else { 1e-6 * row.converged.abs() };
        let what = format!("{} at N = {n}", row.name);
        checks.within(&what, row.value(run), row.converged, factor * error + rounding);
    }
    checks.end();
}

/// Holds (4 v₁₆₀ − v₈₀)/3 against the converged values: relative, and in kelvin for temperatures.
///
/// Local values are left out: their interpolation has an error of its own order.
pub fn check_extrapolated(at_80: &Ran, at_160: &Ran, rows: &[Row], relative: f64, kelvin: f64) {
    let mut checks = Checks::default();
    for row in rows.iter().filter(|row| !row.name.contains(',')) {
        let value = (4.0 * row.value(at_160) - row.value(at_80)) / 3.0;
        let allowed = if row.is_temperature() { kelvin } else { relative * row.converged.abs() };
        checks.within(&format!("{} from N = 80 and 160", row.name), value, row.converged, allowed);
    }
    checks.end();
}
