//! Free-radical polymerization with quasi-steady radicals, by the method of moments (model page, §6).
//!
//! Conventions, since factors of 2 are where such models go wrong: each initiation event counts two bound
//! units through R_I = 2 f k_d \[I\] + 2 k_th \[M\]^m; termination consumes radicals at k_t λ₀²; every new chain
//! starts with one bound unit, so that \[M\] + μ₁ is conserved.

use super::gel_effect::GelEffect;
use super::rate_constant::RateConstant;
use crate::model::number::Number;

/// δ of the smooth positive part of R_I, far below any rate that matters, in mol/(m³ s).
const SMALLEST_INITIATION: f64 = 1e-10;
/// ε of φ, as a share of the pure monomer's concentration.
const MONOMER_SHARE: f64 = 1e-4;

/// The scheme, SI.
#[derive(Clone, Debug)]
pub struct FreeRadical {
    /// The monomer.
    pub monomer: usize,
    /// The polymer, as a species of the spec.
    pub polymer: usize,
    /// m0, molar mass of a bound unit, in kg/mol.
    pub unit_mass: f64,
    /// ΔH per mole of monomer bound, negative, in J/mol.
    pub heat: f64,
    /// ε of φ, in mol/m³.
    pub monomer_epsilon: f64,
    pub(super) initiators: Vec<Initiator>,
    pub(super) thermal: Thermal,
    pub(super) propagation: RateConstant,
    /// k_tc and k_td.
    pub(super) termination: [Option<RateConstant>; 2],
    /// Share of k_tc in the first entry of `termination`: 1, or `combination_share` of a total.
    pub(super) combination_share: f64,
    pub(super) transfer: Vec<(usize, Transfer)>,
    pub(super) gel_termination: GelEffect,
    pub(super) gel_propagation: GelEffect,
    pub(super) gel_efficiency: GelEffect,
}

#[derive(Clone, Debug)]
pub(super) struct Initiator {
    pub(super) species: usize,
    pub(super) efficiency: f64,
    pub(super) dissociation: RateConstant,
}

#[derive(Clone, Debug)]
pub(super) enum Thermal {
    None,
    Order { order: f64, rate_constant: RateConstant },
}

#[derive(Clone, Debug)]
pub(super) enum Transfer {
    Rate(RateConstant),
    Ratio(f64),
}

/// Rates of the scheme in one stream tube, before they become changes of amounts.
#[derive(Clone, Copy, Debug)]
pub struct Radicals<N> {
    /// R_I⁺, in mol/(m³ s).
    pub initiation: N,
    /// λ₀, in mol/m³.
    pub live: N,
    /// T_r, in 1/s.
    pub transfer: N,
    /// k_t, in m³/(mol s).
    pub termination: N,
    /// k_tc/k_t.
    pub combination_share: N,
    /// k_p \[M\], in 1/s.
    pub growth: N,
}

impl<N: Number> Radicals<N> {
    /// Lifetime of a radical, 1/(k_t λ₀ + T_r), in s.
    pub fn lifetime(&self) -> N {
        (self.termination * self.live + self.transfer).recip()
    }
}

impl FreeRadical {
    /// Sets ε of φ from the pure monomer's concentration, in mol/m³.
    pub fn set_monomer_scale(&mut self, pure_concentration: f64) {
        self.monomer_epsilon = MONOMER_SHARE * pure_concentration;
    }

    /// Species that take part, the monomer first.
    pub fn species(&self) -> impl Iterator<Item = usize> + '_ {
        let initiators = self.initiators.iter().map(|initiator| initiator.species);
        std::iter::once(self.monomer).chain(initiators).chain(self.transfer.iter().map(|(k, _)| *k))
    }

    /// The scheme without species that are never there, and with the others renumbered.
    #[must_use]
    pub fn renumbered(mut self, new: impl Fn(usize) -> Option<usize>) -> Self {
        self.monomer = new(self.monomer).unwrap_or(self.monomer);
        self.initiators.retain_mut(|initiator| match new(initiator.species) {
            Some(k) => {
                initiator.species = k;
                true
            }
            None => false,
        });
        self.transfer.retain_mut(|(species, _)| match new(*species) {
            Some(k) => {
                *species = k;
                true
            }
            None => false,
        });
        self
    }

    /// Rate constants with the ranges they were stated for, by their keys.
    pub fn ranges(&self) -> impl Iterator<Item = (&'static str, (f64, f64))> + '_ {
        let termination = self.termination.iter().flatten().map(|k| ("termination", k.range()));
        let thermal = match &self.thermal {
            Thermal::None => None,
            Thermal::Order { rate_constant, .. } => Some(("thermal_initiation", rate_constant.range())),
        };
        let initiators = self.initiators.iter().map(|initiator| ("initiators", initiator.dissociation.range()));
        let transfer = self.transfer.iter().filter_map(|(_, transfer)| match transfer {
            Transfer::Rate(k) => Some(("transfer", k.range())),
            Transfer::Ratio(_) => None,
        });
        std::iter::once(("propagation", self.propagation.range()))
            .chain(termination)
            .chain(thermal)
            .chain(initiators)
            .chain(transfer)
            .filter_map(|(key, range)| Some((key, range?)))
    }

    /// Radicals in one stream tube.
    ///
    /// R_I = φ (Σ 2 f k_d \[I\] + 2 k_th \[M\]^m),  R_I⁺ = ½(R_I + √(R_I² + δ²)),  λ₀ = √(R_I⁺/k_t),
    /// T_r = k_trM \[M\] + φ Σ k_trS \[S\],  φ = \[M\]²/(\[M\]² + ε²), 0 for \[M\] ≤ 0
    ///
    /// | symbol | here | unit | shape |
    /// | --- | --- | --- | --- |
    /// | \[I\], \[M\], \[S\] | `concentrations` | mol/m³ | per species, one stream tube |
    /// | T, 1/T | `temperature`, `inverse` | K, 1/K | one stream tube |
    /// | w_p, w_M | `polymer_fraction`, `monomer_fraction` | 1 | one stream tube |
    ///
    /// `sources` receives the changes of the initiators, −k_d \[I\], and of the transfer agents later.
    #[inline(always)]
    pub fn radicals<N: Number>(&self, local: &Local<'_, N>, sources: &mut [N]) -> Radicals<N> {
        let (temperature, inverse) = (local.temperature, local.inverse);
        let share = self.share(local);
        let k_p = self.propagation.at(temperature, inverse);
        let monomer = local.concentrations[self.monomer];
        let phi = self.phi(monomer);
        let gel_efficiency = self.gel_efficiency.factor(temperature, share);
        let mut initiation = match &self.thermal {
            Thermal::None => N::constant(0.0),
            Thermal::Order { order, rate_constant } => {
                rate_constant.at(temperature, inverse) * self.monomer_power(monomer, *order) * 2.0
            }
        };
        for initiator in &self.initiators {
            let decay = initiator.dissociation.at(temperature, inverse) * local.concentrations[initiator.species];
            sources[initiator.species] = sources[initiator.species] - decay;
            initiation = initiation + decay * gel_efficiency * (2.0 * initiator.efficiency);
        }
        let initiation = (initiation * phi).smooth_positive(SMALLEST_INITIATION);
        let (termination, combination_share) = self.termination(temperature, inverse, share);
        let live = (initiation / termination).sqrt();
        let mut transfer = N::constant(0.0);
        for (species, law) in &self.transfer {
            let k = match law {
                Transfer::Rate(k) => k.at(temperature, inverse),
                Transfer::Ratio(ratio) => k_p * *ratio,
            };
            let frequency = k * local.concentrations[*species];
            if *species == self.monomer {
                transfer = transfer + frequency;
            } else {
                transfer = transfer + frequency * phi;
                sources[*species] = sources[*species] - frequency * phi * live;
            }
        }
        let growth = k_p * self.gel_propagation.factor(temperature, share) * monomer;
        Radicals { initiation, live, transfer, termination, combination_share, growth }
    }

    /// Changes of monomer, agents and dead moments in one stream tube; returns the monomer bound.
    ///
    /// λ₁ = (R_I + R_p + T_r λ₀)/(T_r + k_t λ₀),
    /// dμ₀/dt = T_r λ₀ + (k_td + k_tc/2) λ₀²,  dμ₁/dt = R_p + R_I + T_r λ₀,
    /// dμ₂/dt = R_I + T_r λ₀ + k_p\[M\](2λ₁ + λ₀) + k_tc λ₁²,  −d\[M\]/dt = dμ₁/dt
    ///
    /// | symbol | here | unit | shape |
    /// | --- | --- | --- | --- |
    /// | changes | added to `sources`, the three moments last | mol/(m³ s) | per amount, one stream tube |
    /// | −d\[M\]/dt | returned | mol/(m³ s) | one stream tube |
    #[inline(always)]
    pub fn changes<N: Number>(&self, local: &Local<'_, N>, sources: &mut [N]) -> N {
        let r = self.radicals(local, sources);
        let starts = r.initiation + r.transfer * r.live;
        let bound = r.growth * r.live + starts;
        let terminated = r.termination * r.live;
        let lambda_1 = bound / (r.transfer + terminated);
        let combined = r.combination_share * r.termination;
        sources[self.monomer] = sources[self.monomer] - bound;
        let [.., mu_0, mu_1, mu_2] = sources else { unreachable!("the moments are transported") };
        *mu_0 = r.transfer * r.live + terminated * r.live * (-r.combination_share * 0.5 + 1.0);
        *mu_1 = bound;
        *mu_2 = starts + r.growth * (lambda_1 * 2.0 + r.live) + combined * lambda_1 * lambda_1;
        bound
    }

    /// x = w_p/(w_p + w_M), the share of polymer, smooth where both are near 0.
    #[inline(always)]
    fn share<N: Number>(&self, local: &Local<'_, N>) -> N {
        /// Mass fraction below which the share is no longer told from 0.
        const LEAST: f64 = 1e-12;
        let polymer = local.polymer_fraction;
        polymer / (polymer + local.monomer_fraction).at_least(LEAST)
    }

    /// φ = \[M\]²/(\[M\]² + ε²), 0 for \[M\] ≤ 0: initiation ends with the monomer.
    #[inline(always)]
    fn phi<N: Number>(&self, monomer: N) -> N {
        let square = monomer * monomer;
        monomer.select(square / (square + self.monomer_epsilon * self.monomer_epsilon), N::constant(0.0))
    }

    /// \[M\]^m; for an m that is not whole, smooth and odd through 0.
    #[inline(always)]
    fn monomer_power<N: Number>(&self, monomer: N, order: f64) -> N {
        if order.fract() == 0.0 && order <= 9.0 {
            #[expect(clippy::cast_possible_truncation, clippy::cast_sign_loss, reason = "a whole number from 1 to 9")]
            return monomer.power(order as u32);
        }
        let square = monomer * monomer + self.monomer_epsilon * self.monomer_epsilon;
        monomer * square.real_power(0.5 * (order - 1.0))
    }

    /// k_t with its gel effect, and k_tc/k_t.
    #[inline(always)]
    fn termination<N: Number>(&self, temperature: N, inverse: N, share: N) -> (N, N) {
        let gel = self.gel_termination.factor(temperature, share);
        match &self.termination {
            [Some(combination), Some(other)] => {
                let (k_tc, k_td) = (combination.at(temperature, inverse), other.at(temperature, inverse));
                let total = k_tc + k_td;
                (total * gel, k_tc / total)
            }
            [Some(one), None] | [None, Some(one)] => {
                (one.at(temperature, inverse) * gel, N::constant(self.combination_share))
            }
            [None, None] => unreachable!("the reader asks for a termination"),
        }
    }
}

/// What the scheme sees of one stream tube.
#[derive(Clone, Copy, Debug)]
pub struct Local<'a, N> {
    /// c_k, in mol/m³, per species.
    pub concentrations: &'a [N],
    /// T, in K.
    pub temperature: N,
    /// 1/T, in 1/K.
    pub inverse: N,
    /// w_p.
    pub polymer_fraction: N,
    /// w_M.
    pub monomer_fraction: N,
}
