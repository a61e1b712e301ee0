//! The Jacobian of the right-hand side, block tridiagonal, with the geometry held (`docs/design/jacobian.md`).
//!
//! Held while differentiating: areas, faces, friction gradient, and on a face ρD, λ and n̄ of the closing
//! flux. What is held is held in both neighbours and for all species alike, so that every linear balance
//! keeps to rounding through any Newton iteration.

use super::blocks::{Blocks, Coupling, Shape};
use super::layout::{INTEGRALS, Integral};
use super::profile::Profile;
use super::rhs::System;
use super::terms::conduction::face_conductivity;
use super::terms::viscous_heating::friction_heat;
use crate::model::flow;
use crate::model::local::{Point, Workspace};
use crate::model::number::Dual;

/// Variables differentiated in one pass.
const PASS: usize = 8;

/// Room for one stream tube in dual numbers.
struct DualRoom {
    tube: Vec<Dual<PASS>>,
    work: Workspace<Dual<PASS>>,
}

impl System<'_> {
    /// Shape of the Jacobian.
    #[must_use]
    pub fn shape(&self) -> Shape {
        let coupling = if self.material().mixture.has_one_diffusivity() { Coupling::Diagonal } else { Coupling::Full };
        Shape { n_tubes: self.layout.n_tubes, n_vars: self.layout.n_vars(), n_tail: INTEGRALS.len(), coupling }
    }

    /// Writes ∂(slopes)/∂(state).
    ///
    /// | symbol | here | unit | shape |
    /// | --- | --- | --- | --- |
    /// | state | `state` | mol/kg, K | `layout` |
    /// | blocks | `blocks` | per metre | block tridiagonal |
    pub fn jacobian(&self, state: &[f64], blocks: &mut Blocks) {
        blocks.clear();
        let work = self.material().workspace();
        let mut room = DualRoom { tube: vec![Dual::variable(0.0, None); self.layout.n_vars()], work };
        self.with_profile(state, |profile, gains| {
            for i in 0..self.layout.n_tubes {
                self.local(state, profile, gains.heat[i], i, &mut room, blocks);
            }
            for i in 0..self.layout.n_tubes - 1 {
                self.across_face(state, profile, i, blocks);
            }
            self.at_wall(profile, blocks);
        });
    }

    /// Derivatives of what happens inside one stream tube.
    fn local(
        &self,
        state: &[f64],
        profile: &Profile,
        heat_gain: f64,
        i: usize,
        DualRoom { tube, work }: &mut DualRoom,
        blocks: &mut Blocks,
    ) {
        let n_vars = self.layout.n_vars();
        let values = &state[self.layout.tube(i)];
        let area = profile.geometry.areas[i];
        let per_flow = self.flows[i].recip();
        for first in (0..n_vars).step_by(PASS) {
            for (k, (dual, value)) in tube.iter_mut().zip(values).enumerate() {
                *dual = Dual::variable(*value, k.checked_sub(first));
            }
            let point = self.material().evaluate(tube, work);
            let heat = self.heat_slopes(profile, heat_gain, i, &point);
            for column in first..n_vars.min(first + PASS) {
                let slope = column - first;
                let block = &mut blocks.diagonal_block_mut(i)[column * n_vars..(column + 1) * n_vars];
                for (row, source) in block.iter_mut().zip(&work.sources) {
                    *row = area * source.slopes[slope] * per_flow;
                }
                block[n_vars - 1] = heat[slope] * per_flow;
                let by_reaction = area * point.reaction_heat.slopes[slope];
                self.set_tail(blocks, Integral::ReactionHeat, i, column, by_reaction);
                if self.plant.flow.viscous_heating {
                    let by_shear = self.friction_slope(profile, i) * point.viscosity.slopes[slope];
                    self.set_tail(blocks, Integral::ViscousHeat, i, column, by_shear);
                }
            }
        }
    }

    /// ∂(c_p dT/dz · ṁ)/∂y divided by c_p, with the geometry held, in W/(m J/(kg K)).
    fn heat_slopes(&self, profile: &Profile, heat_gain: f64, i: usize, point: &Point<Dual<PASS>>) -> [f64; PASS] {
        let area = profile.geometry.areas[i];
        let heat_capacity = profile.points[i].heat_capacity;
        let friction = self.friction_slope(profile, i);
        let total = heat_gain / heat_capacity;
        std::array::from_fn(|slope| {
            let gain = area * point.reaction_heat.slopes[slope] + friction * point.viscosity.slopes[slope];
            (gain - total * point.heat_capacity.slopes[slope]) / heat_capacity
        })
    }

    /// ∂(AᵢΦᵢ)/∂ηᵢ with the geometry held, in W/(m Pa s); 0 without viscous heating.
    fn friction_slope(&self, profile: &Profile, i: usize) -> f64 {
        if !self.plant.flow.viscous_heating {
            return 0.0;
        }
        let heat = friction_heat(self.plant.flow.profile, &self.section.duct.tube, profile, i);
        let sign = match self.plant.flow.profile {
            flow::Profile::Plug => 0.0,
            flow::Profile::Parabolic => 1.0,
            flow::Profile::FromViscosity => -1.0,
        };
        sign * heat / profile.viscosities[i]
    }

    /// Diffusion and conduction between two stream tubes.
    fn across_face(&self, state: &[f64], profile: &Profile, i: usize, blocks: &mut Blocks) {
        let gradient = profile.geometry.face_gradient(i);
        let conductivity = face_conductivity(profile.points[i].conductivity, profile.points[i + 1].conductivity);
        let row = self.layout.n_vars() - 1;
        self.exchange(blocks, i, row, row, |j| {
            gradient * conductivity / (self.flows[j] * profile.points[j].heat_capacity)
        });
        if !self.material().mixture.diffuses() {
            return;
        }
        if self.material().mixture.has_one_diffusivity() {
            let conductance = gradient * 0.5 * (profile.transport[i] + profile.transport[i + 1]);
            for k in 0..self.layout.n_amounts {
                self.exchange(blocks, i, k, k, |j| conductance / self.flows[j]);
            }
        } else {
            self.closed_exchange(state, profile, i, gradient, blocks);
        }
    }

    /// The derivative of a flux c (yᵢ₊₁ − yᵢ) that enters tube `i` and leaves tube `i + 1`; c/ṁ of each.
    fn exchange(&self, blocks: &mut Blocks, i: usize, row: usize, column: usize, weight: impl Fn(usize) -> f64) {
        let n_vars = self.layout.n_vars();
        let diagonal = column * n_vars + row;
        let aside = match self.shape().coupling {
            Coupling::Diagonal => row,
            Coupling::Full => diagonal,
        };
        blocks.diagonal_block_mut(i)[diagonal] -= weight(i);
        blocks.upper_mut(i)[aside] += weight(i);
        blocks.diagonal_block_mut(i + 1)[diagonal] -= weight(i + 1);
        blocks.lower_mut(i + 1)[aside] += weight(i + 1);
    }

    /// Diffusion closed on mass: P J_k = −g (ρD_k Δn_k − n̄_k Σ_j ρ(D_j − D_p) M_j Δn_j), n̄ held.
    fn closed_exchange(&self, state: &[f64], profile: &Profile, i: usize, gradient: f64, blocks: &mut Blocks) {
        let material = self.material();
        let n = material.n_components();
        let mobility = |k: usize| 0.5 * (profile.transport[i * n + k] + profile.transport[(i + 1) * n + k]);
        let of_closing = mobility(n - 1);
        for k in 0..self.layout.n_amounts {
            let own = mobility(if k < self.layout.n_species { k } else { n - 1 });
            let mean = 0.5 * (state[self.layout.amount(i, k)] + state[self.layout.amount(i + 1, k)]);
            self.exchange(blocks, i, k, k, |j| gradient * own / self.flows[j]);
            for other in 0..self.layout.n_species {
                let shift = -mean * (mobility(other) - of_closing) * material.molar_masses[other];
                if shift != 0.0 {
                    self.exchange(blocks, i, k, other, |j| gradient * shift / self.flows[j]);
                }
            }
        }
    }

    /// Heat through the wall.
    fn at_wall(&self, profile: &Profile, blocks: &mut Blocks) {
        let last = self.layout.n_tubes - 1;
        let n_vars = self.layout.n_vars();
        let film = profile.points[last].conductivity * profile.geometry.wall_gradient();
        let resistance = self.section.wall.outside().resistance + film.recip();
        let slope = self.section.duct.tube.wall_perimeter() / resistance;
        let row = n_vars - 1;
        blocks.diagonal_block_mut(last)[row * n_vars + row] -=
            slope / (self.flows[last] * profile.points[last].heat_capacity);
        self.set_tail(blocks, Integral::WallHeat, last, row, slope);
    }

    fn set_tail(&self, blocks: &mut Blocks, which: Integral, i: usize, variable: usize, value: f64) {
        let first = self.layout.n_tubes * self.layout.n_vars();
        let row = self.layout.integral(which) - first;
        blocks.tail_tube_mut(row, i)[variable] = value;
    }
}
