//! The whole reactor as a spec describes it, in SI, ready to be discretised.

use super::coherence::{
    check_closing, check_feed_viscosity, check_feed_within_limits, check_limits_apply, check_size, check_viscosity,
};
use super::duct::{self, Duct};
use super::feed::{self, Amount, Basis, Stream};
use super::flow::{self, Flow};
use super::kinetics::reaction::{self, Reaction};
use super::kinetics::{Chemistry, SCHEMES, Scheme};
use super::limits::{self, Limits};
use super::local::Material;
use super::mixture::{self, MixtureBlock};
use super::numerics::{self, Numerics};
use super::output::{self, Output};
use super::section::{self, Section};
use super::species::{self, Species, SpeciesList};
use super::wall::{self, coolant, coolant::Coolants};
use crate::spec::{Block, Fields, Key, Need, Reported, SpecError, Takes};

/// ε of a concentration to a power that is not whole, as a share of the feed's total (model page, §6).
const POWER_SHARE: f64 = 1e-6;
/// Species given by concentration fill the volume to within this: they are typed with six digits.
const VOLUME_TOLERANCE: f64 = 1e-6;

/// Keys of the spec that describe the plant; the judgement's keys join them in `simulate.rs`.
pub const KEYS: [Key; 13] = [
    Key {
        name: "duct",
        takes: Takes::Block(&duct::ABOUT),
        need: Need::Required("{shape: tube, inner_diameter: 20 mm}"),
        meaning: "the cross-section",
    },
    Key {
        name: "feed",
        takes: Takes::Block(&feed::ABOUT),
        need: Need::Required("{mass_flow: 1 kg/h, temperature: 95 degC, mass_fractions: {styrene: 1}}"),
        meaning: "what enters",
    },
    Key {
        name: "flow",
        takes: Takes::Block(&flow::ABOUT),
        need: Need::Required("{profile: from_viscosity}"),
        meaning: "how it flows",
    },
    Key {
        name: "coolants",
        takes: Takes::Named(&coolant::ABOUT),
        need: Need::Optional,
        meaning: "coolants used by several walls",
    },
    Key {
        name: "walls",
        takes: Takes::Kinds(wall::KINDS),
        need: Need::Optional,
        meaning: "walls used by several sections, under names of the user's",
    },
    Key {
        name: "sections",
        takes: Takes::Listed(&section::ABOUT),
        need: Need::Required("[{name: tube, length: 4 m, wall: {kind: insulated}}]"),
        meaning: "lengths of duct, in the direction of flow",
    },
    Key {
        name: "species",
        takes: Takes::Named(&species::ABOUT),
        need: Need::Required("{styrene: {formula: C8H8}}"),
        meaning: "substances",
    },
    Key {
        name: "mixture",
        takes: Takes::Block(&mixture::ABOUT),
        need: Need::Optional,
        meaning: "properties of the whole fluid",
    },
    Key { name: "reactions", takes: Takes::Listed(&reaction::ABOUT), need: Need::Optional, meaning: "reactions" },
    Key {
        name: "polymerization",
        takes: Takes::Kinds(SCHEMES),
        need: Need::Optional,
        meaning: "a polymerization scheme",
    },
    Key { name: "limits", takes: Takes::Block(&limits::ABOUT), need: Need::Optional, meaning: "where a run ends" },
    Key {
        name: "numerics",
        takes: Takes::Block(&numerics::ABOUT),
        need: Need::Optional,
        meaning: "grid and tolerances",
    },
    Key { name: "output", takes: Takes::Block(&output::ABOUT), need: Need::Optional, meaning: "what is recorded" },
];

/// A reactor, its fluid and its feed, SI.
#[derive(Clone, Debug)]
pub struct Plant {
    /// The fluid.
    pub material: Material,
    /// The stream that enters.
    pub feed: Feed,
    /// How it flows.
    pub flow: Flow,
    /// Lengths of duct, in the direction of flow.
    pub sections: Vec<Section>,
    /// Where a run ends.
    pub limits: Limits,
    /// Grid and tolerances.
    pub numerics: Numerics,
    /// What is recorded.
    pub output: Output,
}

/// The stream that enters, SI.
#[derive(Clone, Debug, PartialEq)]
pub struct Feed {
    /// ṁ, in kg/s.
    pub mass_flow: f64,
    /// n_k, moments, T: the state of every stream tube at the inlet, in mol/kg, K.
    pub state: Vec<f64>,
    /// p, in Pa, if given.
    pub pressure: Option<f64>,
}

impl Feed {
    /// T, in K.
    #[must_use]
    pub fn temperature(&self) -> f64 {
        self.state[self.state.len() - 1]
    }
}

impl Plant {
    /// Reads the plant from the opened top of a spec.
    ///
    /// # Errors
    /// All that is wrong with it, noted with the reader.
    pub fn read(fields: &Fields<'_>) -> Result<Self, Reported> {
        let top = fields.block();
        let species = fields.child("species").map(|child| SpeciesList::read(&child));
        let duct = fields.child("duct").and_then(|child| fields.take(Duct::read(&child)));
        let flow = fields.child("flow").and_then(|child| fields.take(Flow::read(&child)));
        let coolants =
            fields.child("coolants").map_or(Some(Coolants::default()), |child| fields.take(Coolants::read(&child)));
        let walls = fields.child("walls").map(|child| child.named()).unwrap_or_default();
        let sections = match (fields.child("sections"), &duct, &coolants) {
            (Some(child), Some(duct), Some(coolants)) => {
                fields.take(Section::read_list(&child, duct, &walls, coolants))
            }
            _ => None,
        };
        let limits = fields.take(Limits::read(&fields.child_or_absent("limits")));
        let numerics = fields.take(Numerics::read(&fields.child_or_absent("numerics")));
        let (species, sound) = species.ok_or(Reported)?;
        let scheme = fields
            .child("polymerization")
            .map_or(Some(Scheme::None), |child| fields.take(Scheme::read(&child, &species)));
        let polymer = scheme.as_ref().and_then(Scheme::polymer);
        let reactions = fields
            .child("reactions")
            .map_or(Some(Vec::new()), |child| fields.take(Reaction::read_list(&child, &species, polymer)));
        let mixture_block = fields.child_or_absent("mixture");
        let mixture = fields.take(MixtureBlock::read(&mixture_block, &species));
        let stream = match (&scheme, fields.child("feed")) {
            (Some(scheme), Some(child)) => fields.take(Stream::read(&child, &species, scheme)),
            _ => None,
        };
        let output = sections
            .as_ref()
            .and_then(|sections| fields.take(Output::read(&fields.child_or_absent("output"), &species, sections)));
        let (Some(scheme), Some(reactions), Some(mixture), Some(stream), Some(flow)) =
            (scheme, reactions, mixture, stream, flow)
        else {
            return Err(Reported);
        };
        fields.take(sound).ok_or(Reported)?;
        let parts = Parts { species: &species, scheme, reactions, mixture: &mixture, stream: &stream };
        let output = output.ok_or(Reported)?;
        let material = fields.take(parts.material(fields, &mixture_block, &output)).ok_or(Reported)?;
        let sections = sections.ok_or(Reported)?;
        check_viscosity(fields, &material, flow);
        let feed = fields.take(build_feed(fields, &material, &species, &stream, &sections)).ok_or(Reported)?;
        let mut material = material;
        material.set_scales(&feed);
        let (limits, numerics) = (limits.ok_or(Reported)?, numerics.ok_or(Reported)?);
        check_feed_within_limits(fields, &feed, &limits);
        check_limits_apply(fields, &material, &feed);
        check_feed_viscosity(fields, &material, &feed);
        check_size(fields, &material, numerics.stream_tubes, output.stations);
        if !top.reader().is_clean() {
            return Err(Reported);
        }
        Ok(Self { material, feed, flow, sections, limits, numerics, output })
    }

    /// L, the whole length, in m.
    #[must_use]
    pub fn length(&self) -> f64 {
        self.sections.iter().map(|section| section.length).sum()
    }
}

/// What was read, before it is known which species the run has.
struct Parts<'a> {
    species: &'a SpeciesList,
    scheme: Scheme,
    reactions: Vec<Reaction>,
    mixture: &'a MixtureBlock,
    stream: &'a Stream,
}

impl Parts<'_> {
    /// Species that are fed or can form; the polymer is not among them.
    fn present(&self) -> Vec<usize> {
        let n = self.species.items.len();
        let mut there: Vec<bool> = (0..n).map(|k| self.stream.has(k)).collect();
        loop {
            let before = there.clone();
            for reaction in &self.reactions {
                let forward = reaction.needs().all(|k| before[k]);
                let backward = reaction.reverse_needs().is_some_and(|mut needs| needs.all(|k| before[k]));
                for (k, amount) in &reaction.stoichiometry {
                    there[*k] |= (forward && *amount > 0.0) || (backward && *amount < 0.0);
                }
            }
            if before == there {
                break;
            }
        }
        let polymer = self.scheme.polymer();
        (0..n).filter(|k| there[*k] && Some(*k) != polymer).collect()
    }

    fn material(self, fields: &Fields<'_>, mixture_block: &Block<'_>, output: &Output) -> Result<Material, Reported> {
        let present = self.present();
        let new = |k: usize| present.iter().position(|other| *other == k);
        let polymer = self.scheme.polymer();
        let scheme = match self.scheme {
            Scheme::FreeRadical(scheme) if new(scheme.monomer).is_none() => {
                let (at, key) = (fields.place_of("feed"), "feed".to_owned());
                let needs = format!("the monomer `{}`", self.species.names[scheme.monomer]);
                fields.problem(SpecError::Needs { at, key, needs });
                return Err(Reported);
            }
            Scheme::FreeRadical(scheme) => Scheme::FreeRadical(Box::new(scheme.renumbered(new))),
            Scheme::None => Scheme::None,
        };
        let reactions: Vec<Reaction> = self
            .reactions
            .into_iter()
            .filter(|reaction| reaction.species().all(|k| new(k).is_some()))
            .map(|reaction| reaction.renumbered(|k| new(k).expect("held by the filter above")))
            .collect();
        let mut components: Vec<&Species> = present.iter().map(|k| &self.species.items[*k]).collect();
        components.extend(polymer.map(|k| &self.species.items[k]));
        let mixture = self.mixture.build(mixture_block, &components)?;
        check_closing(mixture_block)?;
        let small: Vec<&Species> = present.iter().map(|k| &self.species.items[*k]).collect();
        let conversion_of = match output.conversion_of {
            Some(k) if new(k).is_none() => {
                let (at, key) = (fields.place_in("output", "conversion_of"), "conversion_of".to_owned());
                let needs = format!("a species that is fed: `{}` is not there", self.species.names[k]);
                fields.problem(SpecError::Needs { at, key, needs });
                return Err(Reported);
            }
            Some(k) => new(k),
            None => match &scheme {
                Scheme::FreeRadical(scheme) => Some(scheme.monomer),
                Scheme::None => reactions.iter().find_map(|reaction| reaction.consumes.first().copied()),
            },
        };
        Ok(Material {
            species: small.iter().map(|species| species.name.clone()).collect(),
            molar_masses: small.iter().map(|species| species.molar_mass.unwrap_or(1.0)).collect(),
            has_molar_mass: small.iter().map(|species| species.molar_mass.is_some()).collect(),
            elements: elements(&small, polymer.is_some()),
            mixture,
            chemistry: Chemistry { reactions, scheme, power_epsilon: f64::NAN },
            conversion_of,
        })
    }
}

fn elements(species: &[&Species], polymer: bool) -> Vec<(&'static str, Vec<f64>)> {
    if polymer || species.iter().any(|species| species.formula.is_none()) {
        return Vec::new();
    }
    let mut all: Vec<&'static str> =
        species.iter().filter_map(|species| species.formula.as_ref()).flat_map(|f| f.0.keys().copied()).collect();
    all.sort_unstable();
    all.dedup();
    let atoms = |element| species.iter().map(|s| s.formula.as_ref().map_or(0.0, |f| f.atoms(element))).collect();
    all.into_iter().map(|element| (element, atoms(element))).collect()
}

/// The feed's amounts per mass, and its flow.
fn build_feed(
    fields: &Fields<'_>,
    material: &Material,
    species: &SpeciesList,
    stream: &Stream,
    sections: &[Section],
) -> Result<Feed, Reported> {
    let n = material.n_species();
    let polymer = material.chemistry.scheme.polymer();
    let component = |k: usize| {
        if Some(k) == polymer {
            n
        } else {
            material.species.iter().position(|name| *name == species.names[k]).unwrap_or(n)
        }
    };
    let mut fractions = vec![0.0; material.n_components()];
    for (k, value) in stream.values.iter().filter(|(_, value)| *value > 0.0) {
        let k = component(*k);
        fractions[k] = match stream.basis {
            Basis::Mass => *value,
            Basis::Mole | Basis::Concentration => value * material.molar_masses[k],
        };
    }
    if let Some(rest) = stream.rest.map(component) {
        let given: f64 = stream.values.iter().map(|(_, value)| value).sum();
        fractions[rest] += match stream.basis {
            Basis::Mass => (1.0 - given).max(0.0),
            Basis::Mole => (1.0 - given).max(0.0) * material.molar_masses[rest],
            Basis::Concentration => missing_mass(fields, material, &fractions, rest, stream.temperature)?,
        };
    } else if stream.basis == Basis::Concentration {
        check_volume(fields, material, &fractions, stream.temperature)?;
    }
    let sum: f64 = fractions.iter().sum();
    fractions.iter_mut().for_each(|w| *w /= sum);
    let mut state: Vec<f64> = fractions.iter().zip(&material.molar_masses).map(|(w, mass)| w / mass).collect();
    if material.has_polymer() {
        let w_p = fractions[n];
        let mu_1 = w_p / material.unit_mass();
        let (mu_0, mu_2) = match stream.polymer {
            Some(fed) if w_p > 0.0 => {
                let mu_0 = w_p / fed.number_average_molar_mass;
                (mu_0, fed.dispersity * mu_1 * mu_1 / mu_0)
            }
            _ => (0.0, 0.0),
        };
        state.extend([mu_0, mu_1, mu_2]);
    }
    state.push(stream.temperature);
    let density = material.mixture.density(&fractions, stream.temperature);
    let area = sections.first().map_or(0.0, |section| section.duct.tube.area());
    let mass_flow = match stream.amount {
        Amount::MassFlow(flow) => flow,
        Amount::VolumeFlow(flow) => flow * density,
        Amount::MeanVelocity(velocity) => velocity * area * density,
    };
    Ok(Feed { mass_flow, state, pressure: stream.pressure })
}

/// Volume that concentrations leave free, as a share.
fn free_volume(material: &Material, masses: &[f64], temperature: f64) -> f64 {
    let taken = |(k, mass): (usize, &f64)| mass * material.mixture.specific_volume(k, temperature);
    1.0 - masses.iter().enumerate().map(taken).sum::<f64>()
}

/// Mass per volume of the species that takes the rest, in kg/m³.
fn missing_mass(
    fields: &Fields<'_>,
    material: &Material,
    masses: &[f64],
    rest: usize,
    temperature: f64,
) -> Result<f64, Reported> {
    let free = free_volume(material, masses, temperature);
    if free < -VOLUME_TOLERANCE {
        let (at, key) = (fields.place_in("feed", "concentrations"), "concentrations".to_owned());
        fields.problem(SpecError::NoRest { at, key, sum: 1.0 - free });
        return Err(Reported);
    }
    Ok(free.max(0.0) / material.mixture.specific_volume(rest, temperature))
}

fn check_volume(fields: &Fields<'_>, material: &Material, masses: &[f64], temperature: f64) -> Result<(), Reported> {
    let free = free_volume(material, masses, temperature);
    if free.abs() > VOLUME_TOLERANCE {
        let (at, key) = (fields.place_in("feed", "concentrations"), "concentrations".to_owned());
        fields.problem(SpecError::SumNotOne { at, key, sum: 1.0 - free });
        return Err(Reported);
    }
    Ok(())
}

impl Material {
    /// Sets the scales that rate laws take from the feed.
    fn set_scales(&mut self, feed: &Feed) {
        let mut work = self.workspace();
        let density = self.evaluate(&feed.state, &mut work).density;
        let amounts = &feed.state[..self.n_species()];
        self.chemistry.power_epsilon = POWER_SHARE * density * amounts.iter().sum::<f64>();
        if let Scheme::FreeRadical(scheme) = &mut self.chemistry.scheme {
            let volume = self.mixture.specific_volume(scheme.monomer, feed.temperature());
            scheme.set_monomer_scale(1.0 / (volume * scheme.unit_mass));
        }
    }
}
