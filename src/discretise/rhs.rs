//! The equations of one section as a system of ordinary differential equations in z (model page, §2).

use std::cell::RefCell;

use super::cup::cup_state;
use super::flow::{from_viscosity, parabolic, plug};
use super::grid::tube_flows;
use super::layout::{Integral, Layout};
use super::profile::Profile;
use super::terms::{Gains, conduction, diffusion, reaction, viscous_heating, wall_heat};
use super::tubes::{TubeRoom, Tubes};
use crate::model::STANDARD_GRAVITY;
use crate::model::flow::Profile as Shape;
use crate::model::local::Material;
use crate::model::plant::Plant;
use crate::model::section::Section;

/// One section of a plant on its stream tubes.
#[derive(Debug)]
pub struct System<'p> {
    /// The plant.
    pub plant: &'p Plant,
    /// The section.
    pub section: &'p Section,
    /// Offsets of the state.
    pub layout: Layout,
    /// ṁᵢ, in kg/s.
    pub flows: Vec<f64>,
    room: RefCell<Room>,
}

/// What an evaluation needs besides its arguments.
#[derive(Debug)]
struct Room {
    profile: Profile,
    gains: Gains,
    tubes: TubeRoom,
}

impl<'p> System<'p> {
    /// A section with the stream tubes of the plant's feed.
    #[must_use]
    pub fn new(plant: &'p Plant, section: &'p Section) -> Self {
        let layout = Layout::new(&plant.material, plant.numerics.stream_tubes);
        let flows = tube_flows(&plant.numerics, plant.flow.profile, plant.feed.mass_flow);
        let gains = Gains { amounts: vec![0.0; layout.n_tubes * layout.n_amounts], heat: vec![0.0; layout.n_tubes] };
        let profile = Profile::new(&plant.material, &layout);
        let room = RefCell::new(Room { profile, gains, tubes: TubeRoom::new(&plant.material) });
        Self { plant, section, layout, flows, room }
    }

    /// The fluid.
    #[must_use]
    pub fn material(&self) -> &'p Material {
        &self.plant.material
    }

    /// d(state)/dz.
    ///
    /// ṁᵢ dn_k,i/dz = −Δ_f(P J_k) + Aᵢ R_k,i
    /// ṁᵢ c_p,i dTᵢ/dz = Δ_f(P λ ∂T/∂r) − Aᵢ Σ ΔH_j rate_j,i + AᵢΦᵢ − ½ Σ_{its faces} P j_h ΔT
    ///
    /// | symbol | here | unit | shape |
    /// | --- | --- | --- | --- |
    /// | n, μ, T, integrals | `state` | mol/kg, K, … | `layout` |
    /// | their slopes | `slopes` | per metre | `layout` |
    pub fn slopes(&self, state: &[f64], slopes: &mut [f64]) {
        self.with_profile(state, |profile, gains| {
            self.divide(profile, gains, slopes);
            self.integrands(state, profile, slopes);
        });
    }

    /// The cross-section of a state.
    #[must_use]
    pub fn profile(&self, state: &[f64]) -> Profile {
        self.with_profile(state, |profile, _| profile.clone())
    }

    /// Runs `use_profile` on the cross-section of a state and what each tube gains, without copying them.
    pub fn with_profile<T>(&self, state: &[f64], use_profile: impl FnOnce(&Profile, &Gains) -> T) -> T {
        let room = &mut *self.room.borrow_mut();
        let Room { profile, gains, tubes } = room;
        self.balance(state, profile, gains, tubes);
        use_profile(profile, gains)
    }

    /// Everything at one z, and what each term brings to each tube.
    fn balance(&self, state: &[f64], profile: &mut Profile, gains: &mut Gains, tubes: &mut TubeRoom) {
        let tube = &self.section.duct.tube;
        self.evaluate_tubes(state, profile, tubes);
        self.solve_flow(state, profile);
        let gravity = profile.mean_density() * STANDARD_GRAVITY * self.section.duct.inclination.sin();
        profile.gravity_gradient = gravity;
        profile.wall = wall_heat::wall_state(self.section.wall.outside(), profile);
        gains.amounts.fill(0.0);
        gains.heat.fill(0.0);
        diffusion::add(self.material(), &self.layout, state, profile, gains);
        reaction::add(profile, gains);
        conduction::add(profile, gains);
        wall_heat::add(tube.wall_perimeter(), profile.wall, gains);
        if self.plant.flow.viscous_heating {
            let pressure_gradient = profile.geometry.friction_gradient + gravity;
            viscous_heating::add(self.plant.flow.profile, tube, pressure_gradient, profile, gains);
        }
    }

    /// Properties and sources of every stream tube.
    fn evaluate_tubes(&self, state: &[f64], profile: &mut Profile, room: &mut TubeRoom) {
        let material = self.material();
        let tubes = Tubes { material, layout: &self.layout, flows: &self.flows, state };
        tubes.evaluate(room, profile);
        if self.plant.flow.viscous_heating {
            tubes.expand(room, profile);
        }
    }

    fn solve_flow(&self, state: &[f64], profile: &mut Profile) {
        let tube = &self.section.duct.tube;
        let Profile { geometry, volume_flows, viscosities, .. } = profile;
        match self.plant.flow.profile {
            Shape::Plug => {
                let viscosity = if self.material().mixture.has_viscosity() {
                    cup_state(self.material(), &self.layout, &self.flows, state).viscosity(self.material())
                } else {
                    0.0
                };
                plug::solve(tube, volume_flows, viscosity, geometry);
            }
            Shape::Parabolic => parabolic::solve(tube, volume_flows, viscosities, geometry),
            Shape::FromViscosity => from_viscosity::solve(tube, volume_flows, viscosities, geometry),
        }
        if !self.material().mixture.has_viscosity() {
            geometry.friction_gradient = 0.0;
        }
    }

    /// From gains per metre to slopes of amounts and temperatures.
    fn divide(&self, profile: &Profile, gains: &Gains, slopes: &mut [f64]) {
        let n_amounts = self.layout.n_amounts;
        for i in 0..self.layout.n_tubes {
            let per_flow = self.flows[i].recip();
            let tube = &mut slopes[self.layout.tube(i)];
            for (slope, gain) in tube.iter_mut().zip(&gains.amounts[i * n_amounts..(i + 1) * n_amounts]) {
                *slope = gain * per_flow;
            }
            tube[n_amounts] = gains.heat[i] * per_flow / profile.points[i].heat_capacity;
        }
    }

    /// Slopes of the integrals along z.
    fn integrands(&self, state: &[f64], profile: &Profile, slopes: &mut [f64]) {
        let mut set = |which, value| slopes[self.layout.integral(which)] = value;
        let areas = &profile.geometry.areas;
        let reaction_heat = profile.points.iter().zip(areas).map(|(point, area)| point.reaction_heat * area).sum();
        set(Integral::Friction, profile.geometry.friction_gradient);
        set(Integral::Gravity, profile.gravity_gradient);
        set(Integral::WallHeat, self.section.duct.tube.wall_perimeter() * profile.wall.heat_flux);
        set(Integral::ReactionHeat, reaction_heat);
        set(Integral::ViscousHeat, profile.viscous_heat.iter().sum());
        set(Integral::HeatCapacityGap, self.heat_capacity_gap(state, profile));
    }

    /// Σ A Σ_k R_k M_k (h_k(T) − h_k(T_feed)); 0 where all heat capacities are equal, in W/m.
    fn heat_capacity_gap(&self, state: &[f64], profile: &Profile) -> f64 {
        let material = self.material();
        if material.mixture.has_one_heat_capacity() {
            return 0.0;
        }
        let from = self.plant.feed.temperature();
        let n = self.layout.n_species;
        let of_tube = |i: usize| {
            let temperature = state[self.layout.temperature(i)];
            let enthalpy = |k: usize| material.mixture.component_enthalpy(k, from, temperature);
            let (mut mass, mut sum) = (0.0, 0.0);
            for k in 0..n {
                let rate = profile.sources[i * self.layout.n_amounts + k] * material.molar_masses[k];
                mass += rate;
                sum += rate * enthalpy(k);
            }
            if material.has_polymer() {
                sum -= mass * enthalpy(n);
            }
            sum * profile.geometry.areas[i]
        };
        (0..self.layout.n_tubes).map(of_tube).sum()
    }
}
