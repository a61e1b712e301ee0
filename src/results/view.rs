//! A run seen place by place: the cross-section, the mixing cup and the wall at each recorded station.

use super::figure::Value;
use super::hot_spot::HotSpot;
use crate::discretise::cup::{CupState, cup_state};
use crate::discretise::layout::Integral;
use crate::discretise::point_values::Peak;
use crate::discretise::profile::Profile;
use crate::integrate::chain::{SectionLeg, Trajectory};
use crate::integrate::march::Station;
use crate::model::flow;
use crate::model::local::Material;
use crate::model::plant::Plant;

/// One place along a run.
#[derive(Debug)]
pub struct StationView<'a> {
    /// The plant.
    pub plant: &'a Plant,
    /// The section's passage.
    pub leg: &'a SectionLeg<'a>,
    /// z from the inlet, in m.
    pub z: f64,
    /// The state.
    pub state: &'a [f64],
    /// The cross-section.
    pub profile: Profile,
    /// The hottest point of the cross-section.
    pub peak: Peak,
    /// The mixing cup.
    pub cup: CupState,
}

impl<'a> StationView<'a> {
    /// A recorded state with what follows from it.
    #[must_use]
    pub fn new(plant: &'a Plant, leg: &'a SectionLeg<'a>, station: &'a Station) -> Self {
        let system = &leg.system;
        let profile = system.profile(&station.state);
        Self {
            plant,
            leg,
            z: leg.start + station.z,
            state: &station.state,
            peak: profile.peak_temperature(),
            profile,
            cup: cup_state(&plant.material, &system.layout, &system.flows, &station.state),
        }
    }

    /// The fluid.
    #[must_use]
    pub fn material(&self) -> &'a Material {
        &self.plant.material
    }

    /// N.
    #[must_use]
    pub fn n_tubes(&self) -> usize {
        self.leg.system.layout.n_tubes
    }

    /// n, μ, T of stream tube `i`, in mol/kg, K.
    #[must_use]
    pub fn tube(&self, i: usize) -> &'a [f64] {
        &self.state[self.leg.system.layout.tube(i)]
    }

    /// An integral from the section's inlet to here.
    #[must_use]
    pub fn integral(&self, which: Integral) -> f64 {
        self.leg.integral(which, self.state)
    }

    /// Fraction of a reactant that is gone: 1 − n/n_fed, in a state of one tube or of the cup.
    #[must_use]
    pub fn conversion(&self, species: usize, amounts: &[f64]) -> Option<f64> {
        let fed = self.plant.feed.state[species];
        (fed > 0.0).then(|| 1.0 - amounts[species] / fed)
    }

    /// The stress at the wall, GR/2, where there is a viscosity, in Pa.
    #[must_use]
    pub fn wall_shear_stress(&self) -> Option<f64> {
        let radius = self.leg.system.section.duct.tube.radius;
        self.has_viscosity().then_some(0.5 * self.profile.geometry.friction_gradient * radius)
    }

    /// The shear rate at the wall: of the shape, or GR/(2 η_N), in 1/s.
    #[must_use]
    pub fn wall_shear_rate(&self) -> Option<f64> {
        let radius = self.leg.system.section.duct.tube.radius;
        match self.plant.flow.profile {
            flow::Profile::Plug => None,
            flow::Profile::Parabolic => Some(4.0 * self.profile.mean_velocity() / radius),
            flow::Profile::FromViscosity => {
                let viscosity = self.profile.viscosities[self.n_tubes() - 1];
                self.wall_shear_stress().map(|stress| stress / viscosity)
            }
        }
    }

    /// Whether a viscosity was given.
    #[must_use]
    pub fn has_viscosity(&self) -> bool {
        self.material().mixture.has_viscosity()
    }

    /// p here, in Pa.
    #[must_use]
    pub fn pressure(&self) -> Value {
        let lost = self.integral(Integral::Friction) + self.integral(Integral::Gravity);
        match self.leg.pressure {
            None => Value::Missing("`feed.pressure` is not given: only differences are known".to_owned()),
            Some(_) if !self.has_viscosity() => Value::Missing(NO_VISCOSITY.to_owned()),
            Some(pressure) => Value::Number(pressure - lost),
        }
    }
}

/// Why there is no friction.
pub const NO_VISCOSITY: &str = "no `mixture.viscosity` is given";

/// A whole run, place by place.
#[derive(Debug)]
pub struct RunView<'a> {
    /// The plant.
    pub plant: &'a Plant,
    /// The run.
    pub trajectory: &'a Trajectory<'a>,
    /// Stations of each section that was entered, in order.
    pub sections: Vec<Vec<StationView<'a>>>,
    /// Local maxima along z of the hottest point, of each section that was entered.
    pub peaks: Vec<Vec<StationView<'a>>>,
    /// The hottest point of the run.
    pub hot_spot: HotSpot,
    /// The hottest point of each section that was entered.
    pub section_hot_spots: Vec<HotSpot>,
}

impl<'a> RunView<'a> {
    /// Evaluates every recorded state.
    #[must_use]
    pub fn new(plant: &'a Plant, trajectory: &'a Trajectory<'a>) -> Self {
        let views = |leg: &'a SectionLeg<'a>, stations: &'a [Station]| -> Vec<StationView<'a>> {
            stations.iter().map(|station| StationView::new(plant, leg, station)).collect()
        };
        let sections: Vec<Vec<StationView<'a>>> =
            trajectory.legs.iter().map(|leg| views(leg, &leg.leg.stations)).collect();
        let peaks: Vec<Vec<StationView<'a>>> = trajectory.legs.iter().map(|leg| views(leg, &leg.leg.peaks)).collect();
        let hot_spot = HotSpot::of(&sections, &peaks);
        let of_section = |s: usize| HotSpot::of(&sections[s..=s], &peaks[s..=s]);
        let section_hot_spots = (0..sections.len()).map(of_section).collect();
        Self { plant, trajectory, sections, peaks, hot_spot, section_hot_spots }
    }

    /// All stations, inlet first.
    pub fn stations(&self) -> impl Iterator<Item = &StationView<'a>> {
        self.sections.iter().flatten()
    }

    /// The last station: the outlet, or the place where a limit was left.
    #[must_use]
    pub fn end(&self) -> &StationView<'a> {
        self.stations().last().expect("the inlet is always recorded")
    }

    /// Whether the run reached the outlet.
    #[must_use]
    pub fn is_complete(&self) -> bool {
        self.trajectory.ended().is_none()
    }

    /// Why what lies beyond the end was not computed.
    #[must_use]
    pub fn not_reached(&self) -> String {
        let path = self.trajectory.ended().map_or("", |limit| limit.path());
        format!("the run ended before, at z = {:.6} m, by `{path}`", self.end().z)
    }
}
