//! Properties of the mixture from those of its species (model page, §5).
//!
//! Components are the small species in their order, then the polymer where there is one.

use super::number::{Number, Tangent};
use super::property::{self, Property};
use super::rheology::{self, Fluid, Viscosity};
use super::species::{Species, SpeciesList, Which};
use crate::spec::{About, Block, Fields, Key, Need, Reported, SpecError, Takes};
use crate::units::Dimension;

/// Least density and heat capacity in SI: a law that falls below it far outside its range stays finite there, and
/// stop events judge the accepted state. A constant below it is refused when it is read.
const LEAST: f64 = crate::model::property::LEAST;
/// Least conductivity, in W/(m K): next to nothing, so that a conductivity of 0 still divides.
const LEAST_CONDUCTIVITY: f64 = 1e-15;

pub const ABOUT: About = About {
    kind: "mixture",
    summary: "properties of the whole fluid: a law here holds for all of it, else the species' own are mixed",
    equation: "1/ρ = Σ w_k/ρ_k; c_p = Σ w_k c_p,k; λ = Σ w_k λ_k",
    source: "volumes add (common practice)",
    keys: &[
        Key {
            name: "density",
            takes: Takes::Law(Dimension::DENSITY, DENSITY_KINDS),
            need: Need::Optional,
            meaning: "one law for the whole fluid; absent: volumes add",
        },
        Key {
            name: "heat_capacity",
            takes: Takes::Law(Dimension::HEAT_CAPACITY, property::KINDS),
            need: Need::Optional,
            meaning: "one law for the whole fluid; absent: the species' by mass",
        },
        Key {
            name: "conductivity",
            takes: Takes::Law(Dimension::CONDUCTIVITY, CONDUCTIVITY_KINDS),
            need: Need::Optional,
            meaning: "one law for the whole fluid; absent: the species' by mass",
        },
        Key {
            name: "diffusivity",
            takes: Takes::Law(Dimension::DIFFUSIVITY, property::KINDS),
            need: Need::Optional,
            meaning: "one law for all species and the polymer; absent: each its own",
        },
        Key {
            name: "viscosity",
            takes: Takes::Law(Dimension::VISCOSITY, rheology::KINDS),
            need: Need::Optional,
            meaning: "viscosity of the mixture; needed by `from_viscosity`, by viscous heating and for a pressure drop",
        },
        Key {
            name: "closing_species",
            takes: Takes::Name("species"),
            need: Need::Optional,
            meaning: "refused: the mass balance of diffusion closes the same whichever species is named",
        },
    ],
};

/// The rule that volumes add.
pub const VOLUMES_ADD: About = About {
    kind: "volumes_add",
    summary: "volumes of the species add",
    equation: "1/ρ = Σ w_k/ρ_k",
    source: "common practice",
    keys: &[property::KIND],
};

/// The rule that conductivities mix by mass.
pub const BY_MASS: About = About {
    kind: "by_mass",
    summary: "conductivities of the species mix by mass fraction",
    equation: "λ = Σ w_k λ_k",
    source: "common practice",
    keys: &[property::KIND],
};

/// What may stand under `density`.
pub const DENSITY_KINDS: &[&About] = &[
    &VOLUMES_ADD,
    &property::constant::ABOUT,
    &property::linear::ABOUT,
    &property::polynomial::ABOUT,
    &property::table::ABOUT,
    &property::arrhenius::ARRHENIUS,
    &property::arrhenius::ANDRADE,
];

/// What may stand under `conductivity`.
pub const CONDUCTIVITY_KINDS: &[&About] = &[
    &BY_MASS,
    &property::constant::ABOUT,
    &property::linear::ABOUT,
    &property::polynomial::ABOUT,
    &property::table::ABOUT,
    &property::arrhenius::ARRHENIUS,
    &property::arrhenius::ANDRADE,
];

/// Laws that components share: each law is evaluated once for all that have it.
#[derive(Clone, Debug)]
struct Shared {
    groups: Vec<(Property, Vec<usize>)>,
}

impl Shared {
    fn grouped(laws: Vec<Property>) -> Self {
        let mut groups: Vec<(Property, Vec<usize>)> = Vec::new();
        for (k, law) in laws.into_iter().enumerate() {
            match groups.iter_mut().find(|(known, _)| *known == law) {
                Some((_, members)) => members.push(k),
                None => groups.push((law, vec![k])),
            }
        }
        Self { groups }
    }

    /// Σ over the groups of (mass fraction of the group) · f(law).
    #[inline(always)]
    fn sum<N: Number>(&self, fractions: &[N], f: impl Fn(&Property) -> N) -> N {
        if let [(law, _)] = &self.groups[..] {
            return f(law); // mass fractions add up to 1
        }
        let of_group = |(law, members): &(Property, Vec<usize>)| {
            let share = members[1..].iter().fold(fractions[members[0]], |sum, k| sum + fractions[*k]);
            share * f(law)
        };
        let first = of_group(&self.groups[0]);
        self.groups[1..].iter().fold(first, |sum, group| sum + of_group(group))
    }

    fn of(&self, component: usize) -> &Property {
        let group = self.groups.iter().find(|(_, members)| members.contains(&component));
        &group.expect("every component is in a group").0
    }
}

/// Diffusivities of the mixture.
#[derive(Clone, Debug)]
enum Diffusivity {
    /// No species moves: D = 0.
    None,
    /// One for all.
    One(Property),
    /// Each component its own.
    Each(Vec<Property>),
}

/// Properties of the mixture.
#[derive(Clone, Debug)]
pub struct Mixture {
    density: Shared,
    heat_capacity: Shared,
    conductivity: Shared,
    diffusivity: Diffusivity,
    viscosity: Option<Viscosity>,
    ranges: Vec<(String, (f64, f64))>,
}

/// The mixture as read, before it is known which species a run has.
#[derive(Debug)]
pub struct MixtureBlock {
    laws: [(Which, Option<Property>); 4],
    places: [crate::spec::Place; 4],
    /// Viscosity, if given.
    pub viscosity: Option<Viscosity>,
}

impl MixtureBlock {
    /// Reads the block `mixture`.
    ///
    /// # Errors
    /// What is wrong with any of its keys.
    pub fn read(block: &Block<'_>, species: &SpeciesList) -> Result<Self, Reported> {
        let fields = block.open(&ABOUT);
        let which = [Which::Density, Which::HeatCapacity, Which::Conductivity, Which::Diffusivity];
        let laws = which.map(|which| (which, read_law(&fields, which)));
        let viscosity = fields.child("viscosity").and_then(|child| fields.take(Viscosity::read(&child)));
        let _ = fields.child("closing_species"); // refused where the run's species are known
        for (which, law) in &laws {
            let own = species.items.iter().find(|species| species.law(*which).is_some());
            if let (Some(_), Some(own)) = (law, own) {
                fields.problem(SpecError::PropertyTwice {
                    at: own.law_place(*which).clone(),
                    property: which.key(),
                    species: own.name.clone(),
                    first: fields.place_of(which.key()).location,
                });
            }
        }
        let places = which.map(|which| fields.place_of(which.key()));
        fields.finish(Self { laws, places, viscosity })
    }

    /// The mixture of the species that a run has.
    ///
    /// # Errors
    /// A species lacks a property that the run needs.
    pub fn build(&self, block: &Block<'_>, components: &[&Species]) -> Result<Mixture, Reported> {
        let mut failed = false;
        let mut ranges = Vec::new();
        let mut shared = |which: Which| -> Option<Vec<Property>> {
            let (position, law) = self.of(which);
            if let Some(law) = law {
                let path = self.places[position].path.to_string();
                ranges.extend(law.range().map(|range| (path, range)));
                return Some(vec![law.clone(); components.len()]);
            }
            let own: Option<Vec<Property>> = components.iter().map(|species| species.law(which).cloned()).collect();
            if which == Which::Diffusivity && components.len() < 2 && own.is_none() {
                return None;
            }
            let nowhere = components.iter().all(|species| species.law(which).is_none());
            for species in components.iter().take(if nowhere { 1 } else { components.len() }) {
                match species.law(which) {
                    Some(law) => {
                        let path = format!("species.{}.{}", species.name, which.key());
                        ranges.extend(law.range().map(|range| (path, range)));
                    }
                    None => {
                        failed = true;
                        let _ = block.refuse(SpecError::MissingProperty {
                            at: species.place.clone(),
                            species: species.name.clone(),
                            property: which.key(),
                            because: "since `mixture` gives none for all".to_owned(),
                        });
                    }
                }
            }
            own
        };
        let density = shared(Which::Density);
        let heat_capacity = shared(Which::HeatCapacity);
        let conductivity = shared(Which::Conductivity);
        let diffusivity = shared(Which::Diffusivity);
        if failed {
            return Err(Reported);
        }
        let diffusivity = match diffusivity {
            None => Diffusivity::None,
            Some(laws) if laws.windows(2).all(|pair| pair[0] == pair[1]) => Diffusivity::One(laws[0].clone()),
            Some(laws) => Diffusivity::Each(laws),
        };
        let grouped = |laws: Option<Vec<Property>>| laws.map(Shared::grouped).ok_or(Reported);
        let of_viscosity = self.viscosity.as_ref().map(Viscosity::ranges).unwrap_or_default();
        ranges.extend(of_viscosity.into_iter().map(|(key, range)| (format!("mixture.viscosity{key}"), range)));
        Ok(Mixture {
            density: grouped(density)?,
            heat_capacity: grouped(heat_capacity)?,
            conductivity: grouped(conductivity)?,
            diffusivity,
            viscosity: self.viscosity.clone(),
            ranges,
        })
    }

    fn of(&self, which: Which) -> (usize, Option<&Property>) {
        let position = self.laws.iter().position(|(known, _)| *known == which).unwrap_or(0);
        (position, self.laws[position].1.as_ref())
    }
}

/// A law for the whole fluid; none where a mixing rule or nothing is given.
fn read_law(fields: &Fields<'_>, which: Which) -> Option<Property> {
    let child = fields.child(which.key())?;
    let kinds = match which {
        Which::Density => DENSITY_KINDS,
        Which::Conductivity => CONDUCTIVITY_KINDS,
        Which::HeatCapacity | Which::Diffusivity => property::KINDS,
    };
    let about = fields.take(child.kind(which.key(), kinds, Some(&property::constant::ABOUT)))?;
    if *about == VOLUMES_ADD || *about == BY_MASS {
        let rule = child.open(about);
        fields.take(rule.finish(()));
        return None;
    }
    fields.take(Property::read_kind(&child, about, which.dimension()))
}

impl Mixture {
    /// ρ, in kg/m³; 1/ρ = Σ w_k/ρ_k.
    #[inline(always)]
    pub fn density<N: Number>(&self, fractions: &[N], temperature: N) -> N {
        self.density.sum(fractions, |law| law.at(temperature).at_least(LEAST).recip()).at_least(1e-9).recip()
    }

    /// α = −(1/ρ) ∂ρ/∂T at fixed composition, in 1/K; α = ρ Σ w_k d(1/ρ_k)/dT.
    #[inline(always)]
    pub fn expansion<N: Number>(&self, fractions: &[N], temperature: N, density: N) -> N {
        let slope = |law: &Property| law.at(Tangent::variable(temperature)).at_least(LEAST).recip().slope;
        self.density.sum(fractions, slope) * density
    }

    /// 1/ρ_k of a component, in m³/kg.
    #[must_use]
    pub fn specific_volume(&self, component: usize, temperature: f64) -> f64 {
        self.density.of(component).at(temperature).at_least(LEAST).recip()
    }

    /// c_p, in J/(kg K); c_p = Σ w_k c_p,k.
    #[inline(always)]
    pub fn heat_capacity<N: Number>(&self, fractions: &[N], temperature: N) -> N {
        self.heat_capacity.sum(fractions, |law| law.at(temperature)).at_least(LEAST)
    }

    /// c_p,k of one component, in J/(kg K).
    #[inline(always)]
    pub fn component_heat_capacity<N: Number>(&self, component: usize, temperature: N) -> N {
        self.heat_capacity.of(component).at(temperature)
    }

    /// ∫ c_p,k dT of one component from a temperature to another, in J/kg.
    #[must_use]
    pub fn component_enthalpy(&self, component: usize, from: f64, to: f64) -> f64 {
        self.heat_capacity.of(component).integral(from, to)
    }

    /// h = Σ w_k ∫ c_p,k dT from a reference, in J/kg.
    #[must_use]
    pub fn enthalpy(&self, fractions: &[f64], from: f64, to: f64) -> f64 {
        self.heat_capacity.sum(fractions, |law| law.integral(from, to))
    }

    /// Whether all components have one law of heat capacity.
    #[must_use]
    pub fn has_one_heat_capacity(&self) -> bool {
        self.heat_capacity.groups.len() == 1
    }

    /// Whether the heat capacity is one number for all components and temperatures.
    #[must_use]
    pub fn has_constant_heat_capacity(&self) -> bool {
        self.has_one_heat_capacity() && self.heat_capacity.groups[0].0.is_constant()
    }

    /// λ, in W/(m K); λ = Σ w_k λ_k.
    #[inline(always)]
    pub fn conductivity<N: Number>(&self, fractions: &[N], temperature: N) -> N {
        self.conductivity.sum(fractions, |law| law.at(temperature)).at_least(LEAST_CONDUCTIVITY)
    }

    /// Whether every component has the same diffusivity, so that no closing flux is needed.
    #[must_use]
    pub fn has_one_diffusivity(&self) -> bool {
        !matches!(self.diffusivity, Diffusivity::Each(_))
    }

    /// Whether anything diffuses.
    #[must_use]
    pub fn diffuses(&self) -> bool {
        !matches!(self.diffusivity, Diffusivity::None)
    }

    /// D of one component, in m²/s.
    #[inline(always)]
    pub fn diffusivity<N: Number>(&self, component: usize, temperature: N) -> N {
        match &self.diffusivity {
            Diffusivity::None => N::constant(0.0),
            Diffusivity::One(law) => law.at(temperature).at_least(0.0),
            Diffusivity::Each(laws) => laws[component].at(temperature).at_least(0.0),
        }
    }

    /// Whether a viscosity was given.
    #[must_use]
    pub fn has_viscosity(&self) -> bool {
        self.viscosity.is_some()
    }

    /// η at zero shear, in Pa·s; 1 where none was given, which nothing but a shape then uses.
    #[inline(always)]
    pub fn viscosity<N: Number>(&self, fluid: &Fluid<N>) -> N {
        match &self.viscosity {
            Some(law) => law.zero_shear(fluid),
            None => N::constant(1.0),
        }
    }

    /// Whether the viscosity asks for the polymer's content and molar mass.
    #[must_use]
    pub fn viscosity_needs_polymer(&self) -> bool {
        self.viscosity.as_ref().is_some_and(Viscosity::needs_polymer)
    }

    /// Laws with a range of temperature, by path, in K.
    #[must_use]
    pub fn ranges(&self) -> &[(String, (f64, f64))] {
        &self.ranges
    }
}
