//! The physics at one point: from the state of a stream tube to its properties and sources.
//!
//! The state of a stream tube is the amounts of the species, in mol/kg, the moments of the polymer in mol/kg and
//! the temperature in K, in this order (model page, §2). A species without a molar mass counts in kilograms.

use super::kinetics::free_radical::Local;
use super::kinetics::{Chemistry, Scheme};
use super::mixture::Mixture;
use super::number::Number;
use super::property::inverse;
use super::rheology::Fluid;

/// Polymer below this mass fraction has no molar mass (model page, §7).
pub const LEAST_POLYMER: f64 = 1e-9;
/// Reference of enthalpies, in K; it drops out of every balance.
pub const ENTHALPY_REFERENCE: f64 = 298.15;
/// Added to μ₂ and μ₁ inside a viscosity law, so that M_w is finite without polymer in mol/kg (model page, §5).
const MOMENT_FLOORS: (f64, f64) = (2e-6, 1e-9);
/// δ of the smooth positive parts of μ₂ and μ₁ there, a thousandth of the floors, in mol/kg.
const MOMENT_DELTAS: (f64, f64) = (2e-9, 1e-12);

/// The fluid: which amounts a stream tube has and what follows from them.
#[derive(Clone, Debug)]
pub struct Material {
    /// Names of the species that the run has.
    pub species: Vec<String>,
    /// M_k; 1 where none is given, so that amounts count kilograms, in kg/mol.
    pub molar_masses: Vec<f64>,
    /// Whether a molar mass was given.
    pub has_molar_mass: Vec<bool>,
    /// Atoms of each element per molecule, where every species has a formula and nothing polymerizes.
    pub elements: Vec<(&'static str, Vec<f64>)>,
    /// Properties.
    pub mixture: Mixture,
    /// Reactions and polymerization.
    pub chemistry: Chemistry,
    /// The reactant that `conversion` means.
    pub conversion_of: Option<usize>,
}

/// What one stream tube is like.
#[derive(Clone, Copy, Debug)]
pub struct Point<N> {
    /// ρ, in kg/m³.
    pub density: N,
    /// c_p, in J/(kg K).
    pub heat_capacity: N,
    /// λ, in W/(m K).
    pub conductivity: N,
    /// η at zero shear, in Pa·s.
    pub viscosity: N,
    /// −Σ ΔH rate, in W/m³.
    pub reaction_heat: N,
}

/// Room for the local evaluation of one stream tube.
#[derive(Clone, Debug)]
pub struct Workspace<N> {
    /// w of each component, the polymer last.
    pub fractions: Vec<N>,
    /// c_k, in mol/m³, per species.
    concentrations: Vec<N>,
    /// R_k, per amount, in mol/(m³ s).
    pub sources: Vec<N>,
}

impl Material {
    /// Number of species.
    #[must_use]
    pub fn n_species(&self) -> usize {
        self.species.len()
    }

    /// Number of moments.
    #[must_use]
    pub fn n_moments(&self) -> usize {
        self.chemistry.scheme.moments().len()
    }

    /// Number of amounts: species and moments.
    #[must_use]
    pub fn n_amounts(&self) -> usize {
        self.n_species() + self.n_moments()
    }

    /// Number of unknowns of a stream tube: amounts and temperature.
    #[must_use]
    pub fn n_vars(&self) -> usize {
        self.n_amounts() + 1
    }

    /// Whether there is a polymer, of the mass that the small species leave.
    #[must_use]
    pub fn has_polymer(&self) -> bool {
        match self.chemistry.scheme {
            Scheme::None => false,
            Scheme::FreeRadical(_) => true,
        }
    }

    /// Number of components of the mixture: species, and the polymer.
    #[must_use]
    pub fn n_components(&self) -> usize {
        self.n_species() + usize::from(self.has_polymer())
    }

    /// m0, molar mass of a bound unit; 1 without polymer, in kg/mol.
    #[must_use]
    pub fn unit_mass(&self) -> f64 {
        match &self.chemistry.scheme {
            Scheme::None => 1.0,
            Scheme::FreeRadical(scheme) => scheme.unit_mass,
        }
    }

    /// Room for the evaluation of one stream tube.
    #[must_use]
    #[inline(always)]
    pub fn workspace<N: Number>(&self) -> Workspace<N> {
        let zero = N::constant(0.0);
        Workspace {
            fractions: vec![zero; self.n_components()],
            concentrations: vec![zero; self.n_species()],
            sources: vec![zero; self.n_amounts()],
        }
    }

    /// Mass fractions of the components; the polymer is what the small species leave.
    ///
    /// w_k = M_k n_k, w_p = 1 − Σ_k w_k
    #[inline(always)]
    pub fn fractions<N: Number>(&self, state: &[N], fractions: &mut [N]) {
        let mut rest = N::constant(1.0);
        for ((w, n), mass) in fractions.iter_mut().zip(state).zip(&self.molar_masses) {
            *w = *n * *mass;
            rest = rest - *w;
        }
        if self.has_polymer() {
            fractions[self.n_species()] = rest;
        }
    }

    /// The weight-average molar mass in its smooth form, for viscosity laws, in kg/mol.
    ///
    /// M_w = m0 (μ₂⁺ + 2e-6)/(μ₁⁺ + 1e-9)
    #[inline(always)]
    fn smooth_molar_mass<N: Number>(&self, state: &[N]) -> N {
        match &self.chemistry.scheme {
            Scheme::None => N::constant(1.0),
            Scheme::FreeRadical(scheme) => {
                let n = self.n_species();
                let top = state[n + 2].smooth_positive(MOMENT_DELTAS.0) + MOMENT_FLOORS.0;
                let bottom = state[n + 1].smooth_positive(MOMENT_DELTAS.1) + MOMENT_FLOORS.1;
                top / bottom * scheme.unit_mass
            }
        }
    }

    /// What the viscosity law sees of a state whose mass fractions are known.
    #[inline(always)]
    pub fn fluid<N: Number>(&self, state: &[N], fractions: &[N]) -> Fluid<N> {
        let polymer_fraction = if self.has_polymer() { fractions[self.n_species()] } else { N::constant(0.0) };
        Fluid { temperature: state[self.n_amounts()], polymer_fraction, molar_mass: self.smooth_molar_mass(state) }
    }

    /// What the chemistry sees of a state whose mass fractions and concentrations are known.
    #[inline(always)]
    fn local<'w, N: Number>(&self, state: &[N], fractions: &[N], concentrations: &'w [N]) -> Local<'w, N> {
        let temperature = state[self.n_amounts()];
        let (polymer_fraction, monomer_fraction) = match &self.chemistry.scheme {
            Scheme::None => (N::constant(0.0), N::constant(0.0)),
            Scheme::FreeRadical(scheme) => (fractions[self.n_species()], fractions[scheme.monomer]),
        };
        Local { concentrations, temperature, inverse: inverse(temperature), polymer_fraction, monomer_fraction }
    }

    /// w_p of a stream tube or a mixing cup, where there is a polymer.
    #[must_use]
    pub fn polymer_fraction(&self, amounts: &[f64]) -> Option<f64> {
        let small = amounts.iter().zip(&self.molar_masses).map(|(n, mass)| n * mass);
        self.has_polymer().then(|| 1.0 - small.sum::<f64>())
    }

    /// μ₀, μ₁, μ₂ of a stream tube or a mixing cup, where there is polymer enough to speak of, in mol/kg.
    #[must_use]
    pub fn moments<'s>(&self, amounts: &'s [f64]) -> Option<&'s [f64]> {
        let enough = self.polymer_fraction(amounts)? >= LEAST_POLYMER;
        enough.then(|| &amounts[self.n_species()..self.n_amounts()])
    }

    /// M_w/M_n = μ₂ μ₀/μ₁² of a stream tube or a mixing cup, where there is polymer enough to speak of.
    #[must_use]
    pub fn dispersity(&self, amounts: &[f64]) -> Option<f64> {
        let moments = self.moments(amounts)?;
        Some(moments[2] * moments[0] / (moments[1] * moments[1]))
    }

    /// α = −(1/ρ) ∂ρ/∂T of a stream tube at fixed composition, in 1/K.
    pub fn expansion(&self, state: &[f64], fractions: &mut [f64]) -> f64 {
        self.fractions(state, fractions);
        let temperature = state[self.n_amounts()];
        self.mixture.expansion(fractions, temperature, self.mixture.density(fractions, temperature))
    }

    /// Lifetime of a radical where radicals are quasi-steady, 1/(k_t λ₀ + T_r), in s.
    #[must_use]
    pub fn radical_lifetime(&self, state: &[f64]) -> Option<f64> {
        let Scheme::FreeRadical(scheme) = &self.chemistry.scheme else { return None };
        let mut work = self.workspace();
        self.evaluate(state, &mut work);
        let mut sources = vec![0.0; self.n_amounts()];
        let local = self.local(state, &work.fractions, &work.concentrations);
        Some(scheme.radicals(&local, &mut sources).lifetime())
    }

    /// Every law with a range of temperature that was stated or that a table has, by its path, in K.
    #[must_use]
    pub fn ranges(&self) -> Vec<(String, (f64, f64))> {
        let mut all = self.mixture.ranges().to_vec();
        let reactions = self.chemistry.reactions.iter();
        all.extend(reactions.filter_map(|reaction| {
            Some((format!("reactions.{}.rate_constant", reaction.name), reaction.rate_constant.range()?))
        }));
        if let Scheme::FreeRadical(scheme) = &self.chemistry.scheme {
            all.extend(scheme.ranges().map(|(key, range)| (format!("polymerization.{key}"), range)));
        }
        all
    }

    /// Properties and sources of one stream tube.
    ///
    /// | symbol | here | unit | shape |
    /// | --- | --- | --- | --- |
    /// | n, μ, T | `state` | mol/kg, K | per unknown, one stream tube |
    /// | c = ρ n, R | `work` | mol/m³, mol/(m³ s) | per amount, one stream tube |
    /// | ρ, c_p, λ, η, heat | returned | SI | one stream tube |
    #[inline(always)]
    pub fn evaluate<N: Number>(&self, state: &[N], work: &mut Workspace<N>) -> Point<N> {
        let temperature = state[self.n_amounts()];
        self.fractions(state, &mut work.fractions);
        let density = self.mixture.density(&work.fractions, temperature);
        for (c, n) in work.concentrations.iter_mut().zip(state) {
            *c = density * *n;
        }
        let fluid = self.fluid(state, &work.fractions);
        let local = self.local(state, &work.fractions, &work.concentrations);
        let reaction_heat = self.chemistry.changes(&local, &mut work.sources);
        Point {
            density,
            heat_capacity: self.mixture.heat_capacity(&work.fractions, temperature),
            conductivity: self.mixture.conductivity(&work.fractions, temperature),
            viscosity: self.mixture.viscosity(&fluid),
            reaction_heat,
        }
    }
}
