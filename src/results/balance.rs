//! Balances between the feed and the end of a run (model page, §7).

use super::figure::Value;
use super::view::{RunView, StationView};
use crate::discretise::cup::enthalpy_flow;
use crate::discretise::layout::Integral;
use crate::model::kinetics::Scheme;

/// What of the mass does not close, relative.
///
/// Without a polymer: |Σ M n − 1| of the worst stream tube at the end. With one, whose mass is what the small
/// species leave: |M_M n_M + m0 μ₁ − the same of the feed|, bound fragments counted where they came from.
#[must_use]
pub fn mass(run: &RunView<'_>) -> Value {
    let end = run.end();
    let material = end.material();
    match &material.chemistry.scheme {
        Scheme::None => {
            let of_tube = |i: usize| {
                let tube = end.tube(i);
                let total: f64 = tube.iter().zip(&material.molar_masses).map(|(n, mass)| n * mass).sum();
                (total - 1.0).abs()
            };
            Value::Number((0..end.n_tubes()).map(of_tube).fold(0.0, f64::max))
        }
        Scheme::FreeRadical(scheme) => match monomer_units(run) {
            Value::Number(open) => {
                let units = run.plant.feed.state[scheme.monomer] + run.plant.feed.state[material.n_species() + 1];
                Value::Number(open * units * scheme.unit_mass)
            }
            missing => missing,
        },
    }
}

/// What of the worst element does not close, relative.
#[must_use]
pub fn elements(run: &RunView<'_>) -> Value {
    let end = run.end();
    let material = end.material();
    if material.has_polymer() {
        return Value::Missing("the polymer is not counted by elements; see `balance.monomer_units`".to_owned());
    }
    let of_element = |atoms: &Vec<f64>| {
        let total = |state: &[f64]| state.iter().zip(atoms).map(|(n, atoms)| n * atoms).sum::<f64>();
        let fed = total(&run.plant.feed.state);
        ((total(&end.cup.state) - fed) / fed.abs().max(f64::MIN_POSITIVE)).abs()
    };
    let worst = material.elements.iter().map(|(_, atoms)| of_element(atoms)).reduce(f64::max);
    Value::number_or(worst, "not every species has a `formula`")
}

/// What of monomer and bound units does not close, relative.
#[must_use]
pub fn monomer_units(run: &RunView<'_>) -> Value {
    let end = run.end();
    let material = end.material();
    let Scheme::FreeRadical(scheme) = &material.chemistry.scheme else {
        return Value::Missing("nothing polymerizes".to_owned());
    };
    let reactions = &material.chemistry.reactions;
    if reactions.iter().any(|reaction| reaction.stoichiometry.iter().any(|(k, _)| *k == scheme.monomer)) {
        return Value::Missing("the monomer also takes part in `reactions`".to_owned());
    }
    let units = |state: &[f64]| state[scheme.monomer] + state[material.n_species() + 1];
    let fed = units(&run.plant.feed.state);
    Value::number_or(Some(((units(&end.cup.state) - fed) / fed).abs()), "no monomer is fed")
}

/// What of the energy balance does not close, over its largest term.
///
/// H_end − H_fed + heat removed − reaction heat − viscous heat − ∫ Σ A Σ_k R_k M_k (h_k(T) − h_k(T_feed)) dz,
/// H = Σ ṁᵢ h counted from the feed's temperature
#[must_use]
pub fn energy(run: &RunView<'_>) -> f64 {
    let end = run.end();
    let from = run.plant.feed.temperature();
    let enthalpy = |station: &StationView<'_>| {
        let system = &station.leg.system;
        enthalpy_flow(station.material(), &system.layout, &system.flows, station.state, from)
    };
    let total = |which: Integral| -> f64 {
        run.sections.iter().filter_map(|stations| stations.last()).map(|end| end.integral(which)).sum()
    };
    let terms = [
        enthalpy(end),
        total(Integral::WallHeat),
        -total(Integral::ReactionHeat),
        -total(Integral::ViscousHeat),
        -total(Integral::HeatCapacityGap),
    ];
    // The heat that the stream itself carries, as if it changed by a kelvin, keeps an idle run from 0/0.
    let idle = run.sections[0][0].profile.points[0].heat_capacity * run.plant.feed.mass_flow;
    let largest = terms.iter().map(|term| term.abs()).fold(idle, f64::max);
    (terms.iter().sum::<f64>() / largest).abs()
}
