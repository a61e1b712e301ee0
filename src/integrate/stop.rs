//! Limits of the spec as functions that are positive inside (spec page, §5, `limits`).

use crate::discretise::layout::Integral;
use crate::discretise::rhs::System;

/// A limit that a run may leave.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Limit {
    /// T of any stream tube below, in K.
    LowestTemperature(f64),
    /// T of any stream tube above, in K.
    HighestTemperature(f64),
    /// p below; the pressure at the section's inlet and the bound, in Pa.
    LowestPressure { at_inlet: f64, lowest: f64 },
    /// η of any stream tube above, in Pa·s.
    HighestViscosity(f64),
    /// w_p of any stream tube above.
    HighestPolymerFraction(f64),
    /// M_w/M_n of any stream tube above.
    HighestDispersity(f64),
}

impl Limit {
    /// The limits of a plant that can be left in a section that begins at a pressure.
    #[must_use]
    pub fn of(system: &System<'_>, pressure: Option<f64>) -> Vec<Self> {
        let limits = &system.plant.limits;
        let mut all = vec![
            Self::LowestTemperature(limits.lowest_temperature),
            Self::HighestTemperature(limits.highest_temperature),
        ];
        if let Some(at_inlet) = pressure
            && system.material().mixture.has_viscosity()
        {
            all.push(Self::LowestPressure { at_inlet, lowest: limits.lowest_pressure });
        }
        if limits.highest_viscosity.is_finite() && system.material().mixture.has_viscosity() {
            all.push(Self::HighestViscosity(limits.highest_viscosity));
        }
        if system.material().has_polymer() {
            if limits.highest_polymer_fraction.is_finite() {
                all.push(Self::HighestPolymerFraction(limits.highest_polymer_fraction));
            }
            if limits.highest_dispersity.is_finite() {
                all.push(Self::HighestDispersity(limits.highest_dispersity));
            }
        }
        all
    }

    /// The limit's path in a spec.
    #[must_use]
    pub fn path(&self) -> &'static str {
        match self {
            Self::LowestTemperature(_) => "limits.temperature.lowest",
            Self::HighestTemperature(_) => "limits.temperature.highest",
            Self::LowestPressure { .. } => "limits.pressure.lowest",
            Self::HighestViscosity(_) => "limits.viscosity.highest",
            Self::HighestPolymerFraction(_) => "limits.polymer_fraction.highest",
            Self::HighestDispersity(_) => "limits.dispersity.highest",
        }
    }

    /// How far inside the limit a state is; 0 at the limit, negative beyond, relative to the bound.
    #[must_use]
    pub fn distance(&self, system: &System<'_>, state: &[f64]) -> f64 {
        let layout = &system.layout;
        let temperatures = || (0..layout.n_tubes).map(|i| state[layout.temperature(i)]);
        let tubes = || (0..layout.n_tubes).map(|i| &state[layout.tube(i)]);
        let below = |values: &mut dyn Iterator<Item = f64>, bound: f64| 1.0 - values.fold(0.0, f64::max) / bound;
        match *self {
            Self::LowestTemperature(bound) => temperatures().fold(f64::INFINITY, f64::min) / bound - 1.0,
            Self::HighestTemperature(bound) => below(&mut temperatures(), bound),
            Self::LowestPressure { at_inlet, lowest } => {
                let lost = state[layout.integral(Integral::Friction)] + state[layout.integral(Integral::Gravity)];
                (at_inlet - lost - lowest) / at_inlet
            }
            Self::HighestViscosity(bound) => {
                system.with_profile(state, |profile, _| below(&mut profile.viscosities.iter().copied(), bound))
            }
            Self::HighestPolymerFraction(bound) => {
                below(&mut tubes().filter_map(|tube| system.material().polymer_fraction(tube)), bound)
            }
            Self::HighestDispersity(bound) => {
                below(&mut tubes().filter_map(|tube| system.material().dispersity(tube)), bound)
            }
        }
    }
}
