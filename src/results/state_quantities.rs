//! Quantities of a place: the mixing cup, the cross-section, the wall (spec page, §8; model page, §7).

use super::catalogue::{At, Local, Quantity};
use super::figure::Value;
use super::spread::percentile;
use super::view::{NO_VISCOSITY, StationView};
use crate::model::local::LEAST_POLYMER;
use crate::units::Dimension;

const NO_REACTANT: &str = "no reactant is named and nothing is consumed";
const NOT_FED: &str = "the species is not fed";
const NO_POLYMER: &str = "there is no polymer here (below a mass fraction of 1e-9)";
const NO_SHEAR: &str = "a flat profile has no shear";
const NO_MOLES: &str = "the species has no molar mass";

/// Quantities of a place, in the order of reports.
pub const STATE: &[Quantity] = &[
    Quantity {
        name: "temperature",
        dimension: Dimension::TEMPERATURE,
        about: "temperature of the mixing cup: Σ ṁᵢ h(Tᵢ, nᵢ) = ṁ h(T, n); local with a `position`",
        at: At::Place {
            cup: |s, _| number(s.cup.temperature()),
            local: Some(|s, i, _| Some(s.profile.temperatures[i])),
            spread: true,
        },
    },
    Quantity {
        name: "highest_temperature",
        dimension: Dimension::TEMPERATURE,
        about: "highest temperature over the cross-section, wall surface included, between stream tubes too",
        at: At::Place { cup: |s, _| number(s.peak.value), local: None, spread: false },
    },
    Quantity {
        name: "lowest_temperature",
        dimension: Dimension::TEMPERATURE,
        about: "lowest temperature over the cross-section, wall surface included",
        at: At::Place { cup: |s, _| number(s.profile.lowest_temperature()), local: None, spread: false },
    },
    Quantity {
        name: "conversion",
        dimension: Dimension::RATIO,
        about: "1 − F/F_fed of the reactant named by `output.conversion_of` (else the monomer, else the first \
                consumed); polymer fed does not count",
        at: At::Place { cup: |s, _| conversion(s), local: Some(local_conversion), spread: true },
    },
    Quantity {
        name: "conversion_of.SPECIES",
        dimension: Dimension::RATIO,
        about: "1 − F/F_fed of a species",
        at: At::Place {
            cup: |s, k| Value::number_or(s.conversion(k, &s.cup.state), NOT_FED),
            local: Some(|s, i, k| s.conversion(k, s.tube(i))),
            spread: false,
        },
    },
    Quantity {
        name: "mass_fraction.SPECIES",
        dimension: Dimension::RATIO,
        about: "mass fraction of a species",
        at: At::Place {
            cup: |s, k| number(s.cup.fractions[k]),
            local: Some(|s, i, k| Some(s.tube(i)[k] * s.material().molar_masses[k])),
            spread: false,
        },
    },
    Quantity {
        name: "concentration.SPECIES",
        dimension: Dimension::CONCENTRATION,
        about: "concentration of a species, ρ n",
        at: At::Place {
            cup: |s, k| {
                let known = s.material().has_molar_mass[k];
                Value::number_or(known.then(|| s.cup.density(s.material()) * s.cup.state[k]), NO_MOLES)
            },
            local: Some(|s, i, k| s.material().has_molar_mass[k].then(|| s.profile.points[i].density * s.tube(i)[k])),
            spread: false,
        },
    },
    Quantity {
        name: "polymer_mass_fraction",
        dimension: Dimension::RATIO,
        about: "mass fraction of the polymer: what the small species leave, initiator's fragments included",
        at: At::Place {
            cup: |s, _| Value::number_or(s.material().polymer_fraction(&s.cup.state), "nothing polymerizes"),
            local: Some(|s, i, _| s.material().polymer_fraction(s.tube(i))),
            spread: false,
        },
    },
    Quantity {
        name: "number_average_molar_mass",
        dimension: Dimension::MOLAR_MASS,
        about: "M_n = m0 Σ ṁ μ₁/Σ ṁ μ₀ of the mixing cup, fed polymer included",
        at: At::Place {
            cup: |s, _| Value::number_or(number_average(s, &s.cup.state), NO_POLYMER),
            local: Some(|s, i, _| number_average(s, s.tube(i))),
            spread: true,
        },
    },
    Quantity {
        name: "weight_average_molar_mass",
        dimension: Dimension::MOLAR_MASS,
        about: "M_w = m0 Σ ṁ μ₂/Σ ṁ μ₁ of the mixing cup, fed polymer included",
        at: At::Place {
            cup: |s, _| Value::number_or(weight_average(s, &s.cup.state), NO_POLYMER),
            local: Some(|s, i, _| weight_average(s, s.tube(i))),
            spread: true,
        },
    },
    Quantity {
        name: "dispersity",
        dimension: Dimension::RATIO,
        about: "M_w/M_n",
        at: At::Place {
            cup: |s, _| Value::number_or(s.material().dispersity(&s.cup.state), NO_POLYMER),
            local: Some(|s, i, _| s.material().dispersity(s.tube(i))),
            spread: true,
        },
    },
    Quantity {
        name: "mass_flow",
        dimension: Dimension::MASS_FLOW,
        about: "ṁ = Σ ṁᵢ",
        at: At::Place { cup: |s, _| number(s.leg.system.flows.iter().sum()), local: None, spread: false },
    },
    Quantity {
        name: "polymer_mass_flow",
        dimension: Dimension::MASS_FLOW,
        about: "ṁ w_p",
        at: At::Place {
            cup: |s, _| {
                let flow: f64 = s.leg.system.flows.iter().sum();
                Value::number_or(s.material().polymer_fraction(&s.cup.state).map(|w| w * flow), "nothing polymerizes")
            },
            local: None,
            spread: false,
        },
    },
    Quantity {
        name: "pressure",
        dimension: Dimension::PRESSURE_LEVEL,
        about: "pressure: that of the feed less what friction and height took",
        at: At::Place { cup: |s, _| s.pressure(), local: None, spread: false },
    },
    Quantity {
        name: "density",
        dimension: Dimension::DENSITY,
        about: "density of the mixing cup",
        at: At::Place {
            cup: |s, _| number(s.cup.density(s.material())),
            local: Some(|s, i, _| Some(s.profile.points[i].density)),
            spread: false,
        },
    },
    Quantity {
        name: "viscosity",
        dimension: Dimension::VISCOSITY,
        about: "viscosity of the mixing cup at zero shear",
        at: At::Place {
            cup: |s, _| Value::number_or(s.has_viscosity().then(|| s.cup.viscosity(s.material())), NO_VISCOSITY),
            local: Some(|s, i, _| s.has_viscosity().then(|| s.profile.viscosities[i])),
            spread: false,
        },
    },
    Quantity {
        name: "mean_velocity",
        dimension: Dimension::VELOCITY,
        about: "volume flow over the cross-section",
        at: At::Place { cup: |s, _| number(s.profile.mean_velocity()), local: None, spread: false },
    },
    Quantity {
        name: "velocity_ratio",
        dimension: Dimension::RATIO,
        about: "largest velocity over the mean",
        at: At::Place { cup: |s, _| number(s.profile.velocity_ratio()), local: None, spread: false },
    },
    Quantity {
        name: "pressure_gradient",
        dimension: Dimension::PRESSURE_GRADIENT,
        about: "G, pressure lost to friction per length",
        at: At::Place {
            cup: |s, _| {
                let gradient = s.profile.geometry.friction_gradient;
                Value::number_or(s.has_viscosity().then_some(gradient), NO_VISCOSITY)
            },
            local: None,
            spread: false,
        },
    },
    Quantity {
        name: "wall_temperature",
        dimension: Dimension::TEMPERATURE,
        about: "temperature of the wetted surface of the wall",
        at: At::Place { cup: |s, _| number(s.profile.wall.temperature), local: None, spread: false },
    },
    Quantity {
        name: "wall_heat_flux",
        dimension: Dimension::HEAT_FLUX,
        about: "heat flux through the wall, positive out of the fluid",
        at: At::Place { cup: |s, _| number(s.profile.wall.heat_flux), local: None, spread: false },
    },
    Quantity {
        name: "wall_shear_rate",
        dimension: Dimension::SHEAR_RATE,
        about: "shear rate at the wall: of the shape, or G R/(2 η) of the outermost stream tube",
        at: At::Place { cup: |s, _| Value::number_or(s.wall_shear_rate(), NO_SHEAR), local: None, spread: false },
    },
    Quantity {
        name: "wall_shear_stress",
        dimension: Dimension::STRESS,
        about: "shear stress at the wall, G R/2",
        at: At::Place { cup: |s, _| Value::number_or(s.wall_shear_stress(), NO_VISCOSITY), local: None, spread: false },
    },
];

fn number(value: f64) -> Value {
    Value::number_or(Some(value), "it is not finite")
}

fn conversion(station: &StationView<'_>) -> Value {
    match station.material().conversion_of {
        Some(k) => Value::number_or(station.conversion(k, &station.cup.state), NOT_FED),
        None => Value::Missing(NO_REACTANT.to_owned()),
    }
}

fn local_conversion(station: &StationView<'_>, i: usize, _: usize) -> Option<f64> {
    station.conversion(station.material().conversion_of?, station.tube(i))
}

/// M_n = m0 μ₁/μ₀, in kg/mol.
fn number_average(station: &StationView<'_>, amounts: &[f64]) -> Option<f64> {
    let moments = station.material().moments(amounts)?;
    Some(station.material().unit_mass() * moments[1] / moments[0])
}

/// M_w = m0 μ₂/μ₁, in kg/mol.
fn weight_average(station: &StationView<'_>, amounts: &[f64]) -> Option<f64> {
    let moments = station.material().moments(amounts)?;
    Some(station.material().unit_mass() * moments[2] / moments[1])
}

/// A quantity at one place: of the mixing cup, or local where a position is given.
///
/// `position` is r/R; the temperature between the outermost tube and the wall follows the wall's own.
#[must_use]
pub fn at_place(quantity: &Quantity, station: &StationView<'_>, parameter: usize, position: Option<f64>) -> Value {
    let At::Place { cup, local, .. } = &quantity.at else {
        return Value::Missing("not a quantity of a place".to_owned());
    };
    match (position, local) {
        (Some(position), Some(_)) if quantity.name == "temperature" => number(station.profile.temperature_at(position)),
        (Some(position), Some(local)) => {
            match (local_value(station, *local, parameter, position), cup(station, parameter)) {
                (Value::Missing(_), Value::Missing(reason)) => Value::Missing(reason),
                (value, _) => value,
            }
        }
        _ => cup(station, parameter),
    }
}

fn local_value(station: &StationView<'_>, local: Local, parameter: usize, position: f64) -> Value {
    let values: Option<Vec<f64>> = (0..station.n_tubes()).map(|i| local(station, i, parameter)).collect();
    match values {
        Some(values) => number(station.profile.value_at(position, |i| values[i])),
        None => Value::Missing(NO_POLYMER.to_owned()),
    }
}

/// The value below which a share of the mass flow lies, over the stream tubes.
#[must_use]
pub fn spread(quantity: &Quantity, station: &StationView<'_>, share: f64) -> Value {
    let At::Place { local: Some(local), .. } = &quantity.at else {
        return Value::Missing("not a quantity of stream tubes".to_owned());
    };
    let values: Option<Vec<f64>> = (0..station.n_tubes()).map(|i| local(station, i, 0)).collect();
    match values {
        Some(values) => number(percentile(&values, &station.leg.system.flows, share)),
        None => Value::Missing(format!("not defined in every stream tube (polymer below {LEAST_POLYMER:e})")),
    }
}
