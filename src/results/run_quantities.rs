//! Quantities of a run or of one of its sections (spec page, §8; model page, §7).

use super::balance;
use super::catalogue::{At, Quantity};
use super::figure::Value;
use super::hot_spot::HotSpot;
use super::view::{NO_VISCOSITY, RunView, StationView};
use crate::discretise::layout::Integral;
use crate::units::Dimension;

/// Which sections a quantity covers: one, or all that were entered.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Scope {
    /// The whole run.
    Run,
    /// One section.
    Section(usize),
}

impl Scope {
    /// Positions of the sections.
    fn sections(self, run: &RunView<'_>) -> std::ops::Range<usize> {
        match self {
            Self::Run => 0..run.sections.len(),
            Self::Section(s) => s..s + 1,
        }
    }
}

/// Quantities of a run, in the order of reports.
pub const RUN: &[Quantity] = &[
    Quantity {
        name: "hot_spot.temperature",
        dimension: Dimension::TEMPERATURE,
        about: "largest temperature of the fluid over z and r, wall surface included, between grid points too",
        at: At::Run { value: |run, scope| number(hot_spot(run, scope).temperature), in_sections: true },
    },
    Quantity {
        name: "hot_spot.z",
        dimension: Dimension::LENGTH,
        about: "where along the flow: from the inlet, or from the section's start",
        at: At::Run {
            value: |run, scope| {
                let start = match scope {
                    Scope::Run => 0.0,
                    Scope::Section(s) => run.trajectory.legs[s].start,
                };
                number(hot_spot(run, scope).z - start)
            },
            in_sections: true,
        },
    },
    Quantity {
        name: "hot_spot.r",
        dimension: Dimension::LENGTH,
        about: "distance of the hot spot from the axis",
        at: At::Run { value: |run, scope| number(hot_spot(run, scope).r), in_sections: true },
    },
    Quantity {
        name: "hot_spot.position",
        dimension: Dimension::RATIO,
        about: "r/R of the hot spot: 0 on the axis, 1 at the wall",
        at: At::Run { value: |run, scope| number(hot_spot(run, scope).position), in_sections: true },
    },
    Quantity {
        name: "hot_spot.section",
        dimension: Dimension::RATIO,
        about: "section that the hot spot lies in",
        at: At::Run { value: |run, scope| Value::Word(hot_spot(run, scope).section.clone()), in_sections: false },
    },
    Quantity {
        name: "hot_spot.conversion",
        dimension: Dimension::RATIO,
        about: "local conversion at the hot spot",
        at: At::Run {
            value: |run, scope| Value::number_or(hot_spot(run, scope).conversion, "nothing is consumed"),
            in_sections: true,
        },
    },
    Quantity {
        name: "hot_spot.rise",
        dimension: Dimension::TEMPERATURE_DIFFERENCE,
        about: "hot spot above the coolant or the wall's temperature there",
        at: At::Run {
            value: |run, scope| {
                Value::number_or(hot_spot(run, scope).rise, "the wall there has no temperature of its own")
            },
            in_sections: true,
        },
    },
    Quantity {
        name: "pressure_drop",
        dimension: Dimension::PRESSURE,
        about: "pressure at the inlet less that at the outlet: friction and height",
        at: At::Run {
            value: |run, scope| with_viscosity(run, || lost(run, scope, &[Integral::Friction, Integral::Gravity])),
            in_sections: true,
        },
    },
    Quantity {
        name: "pressure_drop.friction",
        dimension: Dimension::PRESSURE,
        about: "∫ G dz",
        at: At::Run {
            value: |run, scope| with_viscosity(run, || lost(run, scope, &[Integral::Friction])),
            in_sections: true,
        },
    },
    Quantity {
        name: "pressure_drop.gravity",
        dimension: Dimension::PRESSURE,
        about: "∫ ρ̄ g sin θ dz",
        at: At::Run { value: |run, scope| number(lost(run, scope, &[Integral::Gravity])), in_sections: true },
    },
    Quantity {
        name: "wall_heat",
        dimension: Dimension::POWER,
        about: "heat out of the fluid through the wall, ∫ P_w q_w dz",
        at: At::Run { value: |run, scope| number(lost(run, scope, &[Integral::WallHeat])), in_sections: true },
    },
    Quantity {
        name: "reaction_heat",
        dimension: Dimension::POWER,
        about: "heat set free by reactions, ∫ Σ A (−ΔH rate) dz",
        at: At::Run { value: |run, scope| number(lost(run, scope, &[Integral::ReactionHeat])), in_sections: true },
    },
    Quantity {
        name: "viscous_heat",
        dimension: Dimension::POWER,
        about: "heat of shear and pressure work, ∫ Σ A Φ dz",
        at: At::Run {
            value: |run, scope| match run.plant.flow.viscous_heating {
                true => number(lost(run, scope, &[Integral::ViscousHeat])),
                false => Value::Missing("`flow.viscous_heating` is false".to_owned()),
            },
            in_sections: true,
        },
    },
    Quantity {
        name: "wall.highest_temperature",
        dimension: Dimension::TEMPERATURE,
        about: "highest temperature of the wetted surface, at the recorded stations",
        at: At::Run {
            value: |run, scope| extreme(run, scope, f64::max, |s| Some(s.profile.wall.temperature)),
            in_sections: true,
        },
    },
    Quantity {
        name: "wall.lowest_temperature",
        dimension: Dimension::TEMPERATURE,
        about: "lowest temperature of the wetted surface, at the recorded stations",
        at: At::Run {
            value: |run, scope| extreme(run, scope, f64::min, |s| Some(s.profile.wall.temperature)),
            in_sections: true,
        },
    },
    Quantity {
        name: "wall.highest_heat_flux",
        dimension: Dimension::HEAT_FLUX,
        about: "highest heat flux out of the fluid, at the recorded stations",
        at: At::Run {
            value: |run, scope| extreme(run, scope, f64::max, |s| Some(s.profile.wall.heat_flux)),
            in_sections: true,
        },
    },
    Quantity {
        name: "wall.highest_shear_rate",
        dimension: Dimension::SHEAR_RATE,
        about: "highest shear rate at the wall, at the recorded stations",
        at: At::Run { value: |run, scope| extreme(run, scope, f64::max, |s| s.wall_shear_rate()), in_sections: true },
    },
    Quantity {
        name: "wall.highest_shear_stress",
        dimension: Dimension::STRESS,
        about: "highest shear stress at the wall, at the recorded stations",
        at: At::Run { value: |run, scope| extreme(run, scope, f64::max, |s| s.wall_shear_stress()), in_sections: true },
    },
    Quantity {
        name: "balance.mass",
        dimension: Dimension::RATIO,
        about: "what of the mass does not close between feed and end, relative",
        at: At::Run { value: |run, _| balance::mass(run), in_sections: false },
    },
    Quantity {
        name: "balance.elements",
        dimension: Dimension::RATIO,
        about: "what of the worst element does not close, relative",
        at: At::Run { value: |run, _| balance::elements(run), in_sections: false },
    },
    Quantity {
        name: "balance.monomer_units",
        dimension: Dimension::RATIO,
        about: "what of monomer and bound units, n_M + μ₁, does not close, relative",
        at: At::Run { value: |run, _| balance::monomer_units(run), in_sections: false },
    },
    Quantity {
        name: "balance.energy",
        dimension: Dimension::RATIO,
        about: "what of the energy balance does not close, over its largest term",
        at: At::Run { value: |run, _| number(balance::energy(run)), in_sections: false },
    },
];

fn number(value: f64) -> Value {
    Value::number_or(Some(value), "it is not finite")
}

fn with_viscosity(run: &RunView<'_>, value: impl FnOnce() -> f64) -> Value {
    let given = run.plant.material.mixture.has_viscosity();
    Value::number_or(given.then(value), NO_VISCOSITY)
}

/// Sum of integrals over the sections of a scope.
fn lost(run: &RunView<'_>, scope: Scope, integrals: &[Integral]) -> f64 {
    let of_section = |s: usize| {
        let end = run.sections[s].last();
        end.map_or(0.0, |end| integrals.iter().map(|which| end.integral(*which)).sum::<f64>())
    };
    scope.sections(run).map(of_section).sum()
}

/// Extreme of a value over the stations of a scope.
fn extreme(
    run: &RunView<'_>,
    scope: Scope,
    pick: fn(f64, f64) -> f64,
    value: impl Fn(&StationView<'_>) -> Option<f64>,
) -> Value {
    let values = scope.sections(run).flat_map(|s| run.sections[s].iter()).filter_map(value);
    Value::number_or(values.reduce(pick), "the profile has no shear, or no viscosity is given")
}

fn hot_spot<'r>(run: &'r RunView<'_>, scope: Scope) -> &'r HotSpot {
    match scope {
        Scope::Run => &run.hot_spot,
        Scope::Section(s) => &run.section_hot_spots[s],
    }
}
