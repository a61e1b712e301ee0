//! Reading the scheme `free_radical` from a spec; its equations are in `free_radical.rs`.

use super::free_radical::{FreeRadical, Initiator, Thermal, Transfer};
use super::gel_effect::{self, GelEffect};
use super::heat::{HEAT, read_heat};
use super::rate_constant::{self, RateConstant};
use crate::model::property::KIND;
use crate::model::species::SpeciesList;
use crate::spec::{
    About, Block, Bound, Fields, Key, Need, Node, Place, ReadWarning, Reported, SpecError, Takes, unknown_name,
};
use crate::units::{self, Dimension};

pub const ABOUT: About = About {
    kind: "free_radical",
    summary: "free-radical polymerization of one monomer, quasi-steady radicals, moments of the dead chains",
    equation: "R_I = φ (Σ 2 f k_d [I] + 2 k_th [M]^m), λ₀ = √(R_I/k_t), R_p = k_p [M] λ₀, T_r = k_trM [M] + φ Σ k_trS [S]; \
               −d[M]/dt = R_p + R_I + T_r λ₀",
    source: "method of moments (common practice); Odian, Principles of Polymerization (from memory)",
    keys: &[
        Key {
            name: "scheme",
            takes: Takes::Text,
            need: Need::Required("free_radical"),
            meaning: "which scheme this is",
        },
        Key { name: "monomer", takes: Takes::Name("species"), need: Need::Required("styrene"), meaning: "the monomer" },
        Key {
            name: "polymer",
            takes: Takes::Name("species"),
            need: Need::Required("polystyrene"),
            meaning: "the polymer",
        },
        Key {
            name: "initiators",
            takes: Takes::Named(&INITIATOR),
            need: Need::Optional,
            meaning: "species that decompose into two radicals",
        },
        Key {
            name: "thermal_initiation",
            takes: Takes::Block(&THERMAL),
            need: Need::Optional,
            meaning: "initiation by the monomer alone, R_I = 2 k [M]^order",
        },
        Key {
            name: "propagation",
            takes: Takes::Rate(rate_constant::KINDS),
            need: Need::Required("{prefactor: 1.051e4 m3/(mol s), activation_temperature: 3557 K}"),
            meaning: "k_p",
        },
        Key {
            name: "termination",
            takes: Takes::Block(&TERMINATION),
            need: Need::Required("{by_combination: {prefactor: 1.255e6 m3/(mol s), activation_temperature: 844 K}}"),
            meaning: "termination, used as −dλ₀/dt = k_t λ₀²: double what was printed for 2 k_t",
        },
        Key {
            name: "transfer",
            takes: Takes::Other("species with rate constants"),
            need: Need::Optional,
            meaning: "chain transfer to monomer, solvent or agent: a rate constant, or {ratio: to propagation}",
        },
        Key {
            name: "gel_effect",
            takes: Takes::Block(&GEL_EFFECT),
            need: Need::Optional,
            meaning: "factors on termination, propagation and efficiency as the polymer's content grows",
        },
        Key {
            name: "radicals",
            takes: Takes::Word(&["quasi_steady"]),
            need: Need::Default("quasi_steady"),
            meaning: "how live chains are treated",
        },
        Key {
            name: "heat",
            takes: Takes::Block(&HEAT),
            need: Need::Required("-69.9 kJ/mol"),
            meaning: "heat per mole of monomer bound, negative",
        },
    ],
};

/// One initiator.
pub const INITIATOR: About = About {
    kind: "initiator",
    summary: "a species that decomposes into two radicals",
    equation: "R_I = 2 f k_d [I]",
    source: "",
    keys: &[
        Key {
            name: "efficiency",
            takes: Takes::Quantity(Dimension::RATIO, Bound::Fraction),
            need: Need::Required("60 %"),
            meaning: "share f of the radicals that start a chain",
        },
        Key {
            name: "dissociation",
            takes: Takes::Rate(rate_constant::KINDS),
            need: Need::Required("{prefactor: 1.58e15 1/s, activation_energy: 128.9 kJ/mol}"),
            meaning: "k_d",
        },
    ],
};

/// Thermal initiation.
pub const THERMAL: About = About {
    kind: "thermal_initiation",
    summary: "initiation by the monomer alone",
    equation: "R_I = 2 k [M]^order",
    source: "",
    keys: &[
        Key {
            name: "order",
            takes: Takes::Quantity(Dimension::RATIO, Bound::Positive),
            need: Need::Required("3"),
            meaning: "order in monomer",
        },
        Key {
            name: "rate_constant",
            takes: Takes::Rate(rate_constant::KINDS),
            need: Need::Required("{prefactor: 0.219 m6/(mol2 s), activation_temperature: 13810 K}"),
            meaning: "k",
        },
    ],
};

/// Termination.
pub const TERMINATION: About = About {
    kind: "termination",
    summary: "termination of two radicals",
    equation: "−dλ₀/dt = k_t λ₀²",
    source: "",
    keys: &[
        Key {
            name: "by_combination",
            takes: Takes::Rate(rate_constant::KINDS),
            need: Need::Optional,
            meaning: "k_tc: two radicals make one chain",
        },
        Key {
            name: "by_disproportionation",
            takes: Takes::Rate(rate_constant::KINDS),
            need: Need::Optional,
            meaning: "k_td: two radicals make two chains",
        },
        Key {
            name: "total",
            takes: Takes::Rate(rate_constant::KINDS),
            need: Need::Optional,
            meaning: "k_t, with `combination_share`, in place of the two",
        },
        Key {
            name: "combination_share",
            takes: Takes::Quantity(Dimension::RATIO, Bound::Fraction),
            need: Need::Optional,
            meaning: "share of `total` that is combination",
        },
    ],
};

/// Gel effects by the rate they change.
pub const GEL_EFFECT: About = About {
    kind: "gel_effect",
    summary: "factors on rate constants as the polymer's content grows",
    equation: "",
    source: "",
    keys: &[
        Key {
            name: "termination",
            takes: Takes::Kinds(gel_effect::KINDS),
            need: Need::Optional,
            meaning: "factor on k_t",
        },
        Key {
            name: "propagation",
            takes: Takes::Kinds(gel_effect::KINDS),
            need: Need::Optional,
            meaning: "factor on k_p",
        },
        Key {
            name: "efficiency",
            takes: Takes::Kinds(gel_effect::KINDS),
            need: Need::Optional,
            meaning: "factor on every f",
        },
    ],
};

/// A transfer constant as a ratio.
pub const RATIO: About = About {
    kind: "transfer",
    summary: "a transfer constant as a ratio to propagation without its gel effect",
    equation: "k_tr = ratio · k_p",
    source: "Mayo (1943), J. Am. Chem. Soc. 65, 2324 (from memory)",
    keys: &[
        KIND,
        Key {
            name: "ratio",
            takes: Takes::Quantity(Dimension::RATIO, Bound::NotNegative),
            need: Need::Required("4e-5"),
            meaning: "k_tr/k_p",
        },
    ],
};

impl FreeRadical {
    /// Reads the scheme.
    ///
    /// # Errors
    /// What is wrong with any of its keys.
    pub fn read(block: &Block<'_>, species: &SpeciesList) -> Result<Self, Reported> {
        let fields = block.open(&ABOUT);
        block.trace();
        let _ = fields.text("scheme");
        let _ = fields.word("radicals");
        let name = |key: &'static str| {
            let child = fields.child(key)?;
            fields.take(child.choose("species", &species.names))
        };
        let (monomer, polymer) = (name("monomer"), name("polymer"));
        let second_order = Dimension::rate_constant(2.0);
        let propagation =
            fields.child("propagation").and_then(|child| fields.take(RateConstant::read(&child, second_order)));
        let (termination, combination_share) = read_termination(&fields);
        let gel = fields.child("gel_effect").map(|child| child.open(&GEL_EFFECT));
        let gel_factor = |key: &'static str| {
            let child = gel.as_ref().and_then(|gel| gel.child(key));
            child.map_or(Some(GelEffect::None), |child| fields.take(GelEffect::read(&child)))
        };
        let (gel_termination, gel_propagation) = (gel_factor("termination"), gel_factor("propagation"));
        let gel_efficiency = gel_factor("efficiency");
        if let Some(gel) = gel {
            fields.take(gel.finish(()));
        }
        let thermal =
            fields.child("thermal_initiation").map_or(Some(Thermal::None), |child| fields.take(read_thermal(&child)));
        let initiators = read_initiators(&fields, species);
        let transfer = read_transfer(&fields, species, polymer);
        let heat = fields.child("heat").and_then(|child| fields.take(read_heat(&child)));
        if let Some(k) = polymer
            && species.items[k].molar_mass.is_some_and(|mass| !mass.is_nan())
            && monomer != polymer
        {
            let (at, key) = (species.items[k].place.clone(), "molar_mass".to_owned());
            let with = format!("the polymer `{}`: it has a distribution", species.names[k]);
            fields.problem(SpecError::DoesNotGoWith { at, key, with });
        }
        if let (Some(m), Some(p)) = (monomer, polymer)
            && m == p
        {
            let (at, key) = (fields.place_of("polymer"), "polymer".to_owned());
            let with = format!("`monomer: {}`: they are two species", species.names[m]);
            fields.problem(SpecError::DoesNotGoWith { at, key, with });
        }
        let unit_mass = monomer.map(|m| {
            species.items[m].molar_mass.unwrap_or_else(|| {
                let of = &species.items[m];
                fields.problem(SpecError::MissingProperty {
                    at: of.place.clone(),
                    species: of.name.clone(),
                    property: "molar_mass",
                    because: "as the monomer".to_owned(),
                });
                f64::NAN
            })
        });
        if let Some(heat) = heat.filter(|heat| *heat > 0.0) {
            let text =
                format!("the heat of polymerization is {}, so it cools", units::write(heat, Dimension::MOLAR_ENERGY));
            let code = "endothermic_polymerization";
            block.reader().warn(ReadWarning { code, text, at: fields.place_of("heat") });
        }
        fields.finish(())?;
        Ok(Self {
            monomer: monomer.ok_or(Reported)?,
            polymer: polymer.ok_or(Reported)?,
            unit_mass: unit_mass.ok_or(Reported)?,
            heat: heat.ok_or(Reported)?,
            monomer_epsilon: f64::NAN,
            initiators,
            thermal: thermal.ok_or(Reported)?,
            propagation: propagation.ok_or(Reported)?,
            termination,
            combination_share,
            transfer,
            gel_termination: gel_termination.ok_or(Reported)?,
            gel_propagation: gel_propagation.ok_or(Reported)?,
            gel_efficiency: gel_efficiency.ok_or(Reported)?,
        })
    }
}

/// No rate law in use has a higher order.
const HIGHEST_ORDER: f64 = 9.0;

fn read_thermal(block: &Block<'_>) -> Result<Thermal, Reported> {
    let fields = block.open(&THERMAL);
    let order = fields.quantity("order");
    if order > HIGHEST_ORDER {
        let (at, key) = (fields.place_of("order"), "order".to_owned());
        let text = at.location.text().to_owned();
        fields.problem(SpecError::OutOfBounds { at, key, text, bound: format!("at most {HIGHEST_ORDER}") });
    }
    let rate_constant = fields
        .child("rate_constant")
        .filter(|_| order <= HIGHEST_ORDER)
        .and_then(|child| fields.take(RateConstant::read(&child, Dimension::rate_constant(order))));
    fields.finish(())?;
    Ok(Thermal::Order { order, rate_constant: rate_constant.ok_or(Reported)? })
}

/// k_tc and k_td, or a total with its share of combination.
fn read_termination(fields: &Fields<'_>) -> ([Option<RateConstant>; 2], f64) {
    let Some(child) = fields.child("termination") else { return ([None, None], f64::NAN) };
    let block = child.open(&TERMINATION);
    let rate = |key: &'static str| {
        let child = block.child(key)?;
        block.take(RateConstant::read(&child, Dimension::rate_constant(2.0)))
    };
    let (combination, disproportionation, total) =
        (rate("by_combination"), rate("by_disproportionation"), rate("total"));
    let share = block.optional_quantity("combination_share");
    let place = || child.place();
    let both = |one, other| SpecError::BothOf { at: block.place_of(other), block: child.name(), one, other };
    if block.has("total") {
        if block.has("by_combination") {
            block.problem(both("total", "by_combination"));
        }
        if block.has("by_disproportionation") {
            block.problem(both("total", "by_disproportionation"));
        }
        if share.is_none() && !block.has("combination_share") {
            let (at, block_name) = (place(), child.name());
            let example = "50 %";
            block.problem(SpecError::MissingKey { at, block: block_name, key: "combination_share", example });
        }
    } else if !block.has("by_combination") && !block.has("by_disproportionation") {
        let keys = vec!["by_combination", "by_disproportionation", "total"];
        block.problem(SpecError::NoneOf { at: place(), block: child.name(), keys });
    } else if block.has("combination_share") {
        let (at, key) = (block.place_of("combination_share"), "combination_share".to_owned());
        block.problem(SpecError::DoesNotGoWith {
            at,
            key,
            with: "`by_combination` and `by_disproportionation`".to_owned(),
        });
    }
    let _ = fields.take(block.finish(()));
    match total {
        Some(total) => ([Some(total), None], share.unwrap_or(f64::NAN)),
        None if combination.is_some() => ([combination, disproportionation], 1.0),
        None => ([None, disproportionation], 0.0),
    }
}

fn read_initiators(fields: &Fields<'_>, species: &SpeciesList) -> Vec<Initiator> {
    let Some(child) = fields.child("initiators") else { return Vec::new() };
    let mut initiators = Vec::new();
    for (name, item) in child.named() {
        let block = item.open(&INITIATOR);
        item.trace();
        let efficiency = block.quantity("efficiency");
        let dissociation = block
            .child("dissociation")
            .and_then(|child| block.take(RateConstant::read(&child, Dimension::rate_constant(1.0))));
        let known = known_species(fields, "initiators", &item, name, species);
        let read = fields.take(block.finish(()));
        if let (Some(()), Some(species), Some(dissociation)) = (read, known, dissociation) {
            initiators.push(Initiator { species, efficiency, dissociation });
        }
    }
    initiators
}

fn read_transfer(fields: &Fields<'_>, species: &SpeciesList, polymer: Option<usize>) -> Vec<(usize, Transfer)> {
    let Some(child) = fields.child("transfer") else { return Vec::new() };
    let mut all = Vec::new();
    for (name, item) in child.named() {
        if polymer.is_some_and(|p| species.names[p] == name) {
            let what = item.path().to_string();
            fields.problem(SpecError::NotInThisVersion { at: item.place(), what });
            continue;
        }
        let known = known_species(fields, "transfer", &item, name, species);
        if item.node().number().is_some() {
            let (at, key) = (item.place(), name.to_owned());
            let needs =
                "a unit, such as `0.3 m3/(mol s)`, or `{ratio: 4e-5}` where it is a ratio to propagation".to_owned();
            fields.problem(SpecError::Needs { at, key, needs });
            continue;
        }
        let law = if item.node().get("ratio").is_some() {
            let ratio = item.open(&RATIO);
            let value = ratio.quantity("ratio");
            fields.take(ratio.finish(Transfer::Ratio(value)))
        } else {
            fields.take(RateConstant::read(&item, Dimension::rate_constant(2.0)).map(Transfer::Rate))
        };
        if let (Some(species), Some(law)) = (known, law) {
            all.push((species, law));
        }
    }
    all
}

/// The species that an item of a block is named after.
fn known_species(
    fields: &Fields<'_>,
    block: &str,
    item: &Block<'_>,
    name: &str,
    species: &SpeciesList,
) -> Option<usize> {
    let known = species.names.iter().position(|known| known == name);
    match known {
        Some(k) if species.items[k].molar_mass.is_none() => {
            let of = &species.items[k];
            fields.problem(SpecError::MissingProperty {
                at: of.place.clone(),
                species: of.name.clone(),
                property: "molar_mass",
                because: "since it reacts".to_owned(),
            });
        }
        Some(_) => {}
        None => {
            let typed = fields.block().node().get(block).and_then(Node::entries).unwrap_or_default();
            let entry = typed.iter().find(|entry| entry.key == name);
            let location = entry.map_or(item.node().location.clone(), |entry| entry.key_location.clone());
            let at = Place { location, path: item.path().clone() };
            fields.problem(unknown_name(at, "species", name, &species.names));
        }
    }
    known
}
