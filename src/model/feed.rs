//! Streams: flow, temperature, composition and the polymer they bring (spec page, §5).

use super::kinetics::Scheme;
use super::species::SpeciesList;
use crate::spec::{About, Block, Bound, Fields, Key, Need, Place, Reported, SpecError, Takes, unknown_name};
use crate::units::Dimension;

/// Fractions that add up to 1 within this are meant to: they are typed with six digits.
const SUM_TOLERANCE: f64 = 1e-6;

pub const ABOUT: About = About {
    kind: "feed",
    summary: "the stream that enters the first section",
    equation: "",
    source: "",
    keys: &[
        Key {
            name: "mass_flow",
            takes: Takes::Quantity(Dimension::MASS_FLOW, Bound::Positive),
            need: Need::OneOf("flow"),
            meaning: "mass flow",
        },
        Key {
            name: "volume_flow",
            takes: Takes::Quantity(Dimension::VOLUME_FLOW, Bound::Positive),
            need: Need::OneOf("flow"),
            meaning: "volume flow, at the feed's own state",
        },
        Key {
            name: "mean_velocity",
            takes: Takes::Quantity(Dimension::VELOCITY, Bound::Positive),
            need: Need::OneOf("flow"),
            meaning: "mean velocity, at the first section's inlet",
        },
        Key {
            name: "temperature",
            takes: Takes::Quantity(Dimension::TEMPERATURE, Bound::Positive),
            need: Need::Required("95 degC"),
            meaning: "temperature",
        },
        Key {
            name: "pressure",
            takes: Takes::Quantity(Dimension::PRESSURE_LEVEL, Bound::Positive),
            need: Need::Optional,
            meaning: "pressure at the inlet; absent: only differences are known",
        },
        Key {
            name: "mass_fractions",
            takes: Takes::Other("species with fractions"),
            need: Need::OneOf("composition"),
            meaning: "species with mass fractions; one may be `rest`",
        },
        Key {
            name: "mole_fractions",
            takes: Takes::Other("species with fractions"),
            need: Need::OneOf("composition"),
            meaning: "species with mole fractions; one may be `rest`",
        },
        Key {
            name: "concentrations",
            takes: Takes::Other("species with concentrations"),
            need: Need::OneOf("composition"),
            meaning: "species with concentrations; one may be `rest`: what is missing in mass",
        },
        Key {
            name: "polymer",
            takes: Takes::Block(&POLYMER),
            need: Need::Optional,
            meaning: "the polymer in this stream, where there is one",
        },
    ],
};

/// The polymer of a stream.
pub const POLYMER: About = About {
    kind: "polymer",
    summary: "the polymer in a stream",
    equation: "μ1 = w_p/m0, μ0 = w_p/M_n, μ2 = (M_w/M_n) μ1²/μ0",
    source: "model page, §6",
    keys: &[
        Key {
            name: "number_average_molar_mass",
            takes: Takes::Quantity(Dimension::MOLAR_MASS, Bound::Positive),
            need: Need::Required("80 kg/mol"),
            meaning: "M_n",
        },
        Key {
            name: "dispersity",
            takes: Takes::Quantity(Dimension::RATIO, Bound::AtLeastOne),
            need: Need::Required("2"),
            meaning: "M_w/M_n",
        },
        Key { name: "ends", takes: Takes::Other("groups"), need: Need::Later, meaning: "end groups" },
        Key {
            name: "composition",
            takes: Takes::Other("monomers"),
            need: Need::Later,
            meaning: "composition of a copolymer",
        },
    ],
};

/// How much flows.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Amount {
    /// By mass, in kg/s.
    MassFlow(f64),
    /// By volume, in m³/s.
    VolumeFlow(f64),
    /// By velocity, in m/s.
    MeanVelocity(f64),
}

/// How a composition is counted.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Basis {
    /// Mass fractions.
    Mass,
    /// Mole fractions.
    Mole,
    /// Concentrations, in mol/m³.
    Concentration,
}

/// The polymer of a stream.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct FedPolymer {
    /// M_n, in kg/mol.
    pub number_average_molar_mass: f64,
    /// M_w/M_n.
    pub dispersity: f64,
}

/// A stream as typed; species are numbered as in the spec.
#[derive(Clone, Debug)]
pub struct Stream {
    /// How much flows.
    pub amount: Amount,
    /// T, in K.
    pub temperature: f64,
    /// p at the inlet, in Pa, if given.
    pub pressure: Option<f64>,
    /// How the composition is counted.
    pub basis: Basis,
    /// Species with their values.
    pub values: Vec<(usize, f64)>,
    /// The species that takes the rest.
    pub rest: Option<usize>,
    /// The polymer, if there is one.
    pub polymer: Option<FedPolymer>,
}

impl Stream {
    /// Reads the block `feed`.
    ///
    /// # Errors
    /// What is wrong with any of its keys.
    pub fn read(block: &Block<'_>, species: &SpeciesList, scheme: &Scheme) -> Result<Self, Reported> {
        let fields = block.open(&ABOUT);
        let flow = |key: &'static str| fields.optional_quantity(key);
        let amount = flow("mass_flow")
            .map(Amount::MassFlow)
            .or_else(|| flow("volume_flow").map(Amount::VolumeFlow))
            .or_else(|| flow("mean_velocity").map(Amount::MeanVelocity));
        let temperature = fields.quantity("temperature");
        let pressure = fields.optional_quantity("pressure");
        let bases = [
            ("mass_fractions", Basis::Mass),
            ("mole_fractions", Basis::Mole),
            ("concentrations", Basis::Concentration),
        ];
        let given = bases.iter().find_map(|(key, basis)| Some((*key, fields.child(key)?, *basis)));
        let composition = given.and_then(|(key, child, basis)| {
            let values = read_values(&fields, &child, key, basis, species, scheme);
            values.map(|(values, rest)| (basis, values, rest))
        });
        let polymer = fields.child("polymer").and_then(|child| {
            let open = child.open(&POLYMER);
            let polymer = FedPolymer {
                number_average_molar_mass: open.quantity("number_average_molar_mass"),
                dispersity: open.quantity("dispersity"),
            };
            child.trace();
            fields.take(open.finish(polymer))
        });
        let fed = composition.as_ref().is_some_and(|(_, values, rest)| {
            let fed = |k: usize| *rest == Some(k) || values.iter().any(|(other, value)| *other == k && *value > 0.0);
            scheme.polymer().is_some_and(fed)
        });
        if fed && !fields.has("polymer") {
            let (at, block) = (block.place(), block.name());
            let example = "{number_average_molar_mass: 80 kg/mol, dispersity: 2}";
            fields.problem(SpecError::MissingKey { at, block, key: "polymer", example });
        }
        let listed = composition.as_ref().is_some_and(|(_, values, rest)| {
            scheme.polymer().is_some_and(|p| *rest == Some(p) || values.iter().any(|(k, _)| *k == p))
        });
        if !listed && fields.has("polymer") && composition.is_some() {
            let (at, key) = (fields.place_of("polymer"), "polymer".to_owned());
            let with = "a stream that has none: give the polymer's mass fraction, or leave the block out".to_owned();
            fields.problem(SpecError::DoesNotGoWith { at, key, with });
        }
        fields.finish(())?;
        let (basis, values, rest) = composition.ok_or(Reported)?;
        Ok(Self { amount: amount.ok_or(Reported)?, temperature, pressure, basis, values, rest, polymer })
    }

    /// Whether a species is in the stream.
    #[must_use]
    pub fn has(&self, species: usize) -> bool {
        self.rest == Some(species) || self.values.iter().any(|(k, value)| *k == species && *value > 0.0)
    }
}

type Values = (Vec<(usize, f64)>, Option<usize>);

fn read_values(
    fields: &Fields<'_>,
    block: &Block<'_>,
    key: &'static str,
    basis: Basis,
    species: &SpeciesList,
    scheme: &Scheme,
) -> Option<Values> {
    if block.node().entries().is_none() {
        fields.problem(block.wrong_shape(key, "a block of species with values, such as `{styrene: rest}`"));
        return None;
    }
    let (dimension, bound) = match basis {
        Basis::Mass | Basis::Mole => (Dimension::RATIO, Bound::Fraction),
        Basis::Concentration => (Dimension::CONCENTRATION, Bound::NotNegative),
    };
    let (mut values, mut rest, mut failed) = (Vec::new(), None, false);
    for (name, location, item) in block.keyed() {
        let known = species.names.iter().position(|known| known == name);
        let Some(k) = known else {
            fields.problem(unknown_name(
                Place { location, path: item.path().clone() },
                "species",
                name,
                &species.names,
            ));
            failed = true;
            continue;
        };
        let is_rest = item.node().text() == Some("rest");
        if basis == Basis::Mole || basis == Basis::Concentration && !is_rest {
            failed |= !counts_in_moles(fields, k, key, species, scheme);
        }
        if is_rest {
            item.resolve("rest".to_owned());
            if rest.replace(k).is_some() {
                fields.problem(SpecError::TwoRests { at: item.place(), key: key.to_owned() });
                failed = true;
            }
            continue;
        }
        match fields.take(item.measure(name, dimension, bound)) {
            Some(value) => values.push((k, value)),
            None => failed = true,
        }
    }
    if !failed && basis != Basis::Concentration {
        failed = !check_sum(fields, block, key, &values, rest);
    }
    (!failed).then_some((values, rest))
}

fn counts_in_moles(fields: &Fields<'_>, k: usize, key: &'static str, species: &SpeciesList, scheme: &Scheme) -> bool {
    let of = &species.items[k];
    if scheme.polymer() == Some(k) {
        let with = format!("`{key}`: a polymer has no single molar mass, give `mass_fractions`");
        fields.problem(SpecError::DoesNotGoWith { at: fields.place_of(key), key: of.name.clone(), with });
        return false;
    }
    if of.molar_mass.is_none() {
        fields.problem(SpecError::MissingProperty {
            at: of.place.clone(),
            species: of.name.clone(),
            property: "molar_mass",
            because: format!("since the feed gives `{key}`"),
        });
        return false;
    }
    true
}

fn check_sum(fields: &Fields<'_>, block: &Block<'_>, key: &str, values: &[(usize, f64)], rest: Option<usize>) -> bool {
    let sum: f64 = values.iter().map(|(_, value)| value).sum();
    let (at, key) = (block.place(), key.to_owned());
    if rest.is_none() && (sum - 1.0).abs() > SUM_TOLERANCE {
        fields.problem(SpecError::SumNotOne { at, key, sum });
        return false;
    }
    if rest.is_some() && sum > 1.0 + SUM_TOLERANCE {
        fields.problem(SpecError::NoRest { at, key, sum });
        return false;
    }
    true
}
