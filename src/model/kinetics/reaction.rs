//! Reactions of any stoichiometry and order, reversible or not (model page, §6).

use super::heat::{HEAT, read_heat};
use super::rate_constant::{self, RateConstant};
use crate::model::GAS_CONSTANT;
use crate::model::number::Number;
use crate::model::species::SpeciesList;
use crate::spec::{
    About, Block, Bound, Fields, Key, Need, Place, ReadWarning, Reported, SpecError, Takes, unknown_name,
};
use crate::units::{self, Dimension};

/// Mass that a reaction with molar masses may lose or gain, relative (contract: 0.1 %).
const MASS_TOLERANCE: f64 = 1e-3;
/// Atoms that a reaction with formulas may lose or gain: stoichiometric amounts typed to six digits.
const ATOM_TOLERANCE: f64 = 1e-6;
/// The heat in the equilibrium may differ from the reaction's by this share before it is warned of.
const HEAT_TOLERANCE: f64 = 0.05;
/// The highest sum of orders whose rate constant still has a readable unit; each order is held below 10.
const HIGHEST_ORDER: f64 = 30.0;
/// e²⁰⁰ lies far beyond any equilibrium.
const MAX_EXPONENT: f64 = 200.0;
/// Stoichiometric amounts and orders within this of a whole number are that number.
const WHOLE: f64 = 1e-9;

pub const ABOUT: About = About {
    kind: "reaction",
    summary: "a reaction; one that consumes and makes nothing is a source of heat alone",
    equation: "rate = k Π c^a; reversible: k (Π c^a − (1/K) Π_made c^ν Π c^{a−ν})",
    source: "law of mass action (common practice)",
    keys: &[
        Key { name: "name", takes: Takes::Text, need: Need::Required("hydrolysis"), meaning: "the reaction's name" },
        Key {
            name: "consumes",
            takes: Takes::Other("species with stoichiometric amounts"),
            need: Need::Optional,
            meaning: "species with stoichiometric amounts",
        },
        Key {
            name: "makes",
            takes: Takes::Other("species with stoichiometric amounts"),
            need: Need::Optional,
            meaning: "species with stoichiometric amounts",
        },
        Key {
            name: "orders",
            takes: Takes::Other("species with orders"),
            need: Need::Optional,
            meaning: "orders of the rate; absent: first order in all that is consumed",
        },
        Key { name: "rate", takes: Takes::Text, need: Need::Later, meaning: "an expression for the rate" },
        Key {
            name: "rate_constant",
            takes: Takes::Rate(rate_constant::KINDS),
            need: Need::Required("{prefactor: 5e9 1/s, activation_energy: 75 kJ/mol}"),
            meaning: "the rate constant, in mol, m3, s to the order",
        },
        Key {
            name: "constants",
            takes: Takes::Other("numbers"),
            need: Need::Later,
            meaning: "constants of the expression",
        },
        Key {
            name: "equilibrium_constant",
            takes: Takes::Block(&EQUILIBRIUM),
            need: Need::Optional,
            meaning: "makes the reaction reversible; in concentrations",
        },
        Key {
            name: "heat",
            takes: Takes::Block(&HEAT),
            need: Need::Required("-85 kJ/mol"),
            meaning: "heat per mole of extent, negative for an exothermic reaction",
        },
    ],
};

/// An equilibrium constant.
pub const EQUILIBRIUM: About = About {
    kind: "equilibrium_constant",
    summary: "equilibrium constant in concentrations",
    equation: "K = value · exp(−(ΔH/R_g)(1/T − 1/at))",
    source: "van 't Hoff (common practice)",
    keys: &[
        Key {
            name: "value",
            takes: Takes::Subject(0.0, Bound::Positive),
            need: Need::Required("4.1"),
            meaning: "the constant, in mol/m3 to the number of moles made less those consumed",
        },
        Key {
            name: "at",
            takes: Takes::Quantity(Dimension::TEMPERATURE, Bound::Positive),
            need: Need::Optional,
            meaning: "the temperature it belongs to; absent only where the heat is 0",
        },
        Key {
            name: "heat",
            takes: Takes::Quantity(Dimension::MOLAR_ENERGY, Bound::Any),
            need: Need::Optional,
            meaning: "the heat it shifts with; absent: the reaction's own",
        },
    ],
};

/// One reaction.
#[derive(Clone, Debug)]
pub struct Reaction {
    /// The user's name.
    pub name: String,
    /// (species, amount made less consumed), in mol per mol of extent.
    pub stoichiometry: Vec<(usize, f64)>,
    /// Species that the reaction consumes.
    pub consumes: Vec<usize>,
    forward: Vec<Factor>,
    reverse: Reverse,
    /// The rate constant, in mol, m³, s to the order.
    pub rate_constant: RateConstant,
    /// ΔH, negative for an exothermic reaction, in J per mol of extent.
    pub heat: f64,
}

#[derive(Clone, Debug)]
enum Reverse {
    /// The reaction runs one way.
    Never,
    /// 1/K = exp(−ln_k + (ΔH/R_g)(1/T − inverse)), and the product of the reverse rate.
    Equilibrium { ln_k: f64, heat_over_r: f64, inverse: f64, factors: Vec<Factor> },
}

/// A concentration to a power.
#[derive(Clone, Debug, PartialEq)]
struct Factor {
    species: usize,
    power: Power,
}

#[derive(Clone, Copy, Debug, PartialEq)]
enum Power {
    /// cⁿ.
    Whole(u32),
    /// c (c² + ε²)^h with h = (a − 1)/2: smooth and odd.
    Smooth(f64),
}

impl Factor {
    fn new(species: usize, order: f64, is_consumed: bool) -> Option<Self> {
        let nearest = order.round();
        let power = if (order - nearest).abs() < WHOLE && (nearest > 0.0 || !is_consumed) {
            if nearest == 0.0 {
                return None;
            }
            #[expect(clippy::cast_possible_truncation, clippy::cast_sign_loss, reason = "orders are held below 10")]
            Power::Whole(nearest as u32)
        } else {
            Power::Smooth(0.5 * (order - 1.0))
        };
        Some(Self { species, power })
    }

    #[inline(always)]
    fn of<N: Number>(&self, concentrations: &[N], epsilon: f64) -> N {
        let c = concentrations[self.species];
        match self.power {
            Power::Whole(n) => c.power(n),
            Power::Smooth(h) => c * (c * c + epsilon * epsilon).real_power(h),
        }
    }
}

#[inline(always)]
fn product<N: Number>(factors: &[Factor], concentrations: &[N], epsilon: f64) -> Option<N> {
    let mut factors = factors.iter().map(|factor| factor.of(concentrations, epsilon));
    let first = factors.next()?;
    Some(factors.fold(first, |product, factor| product * factor))
}

impl Reaction {
    /// Reads the list `reactions`.
    ///
    /// # Errors
    /// What is wrong with any reaction.
    pub fn read_list(block: &Block<'_>, species: &SpeciesList, polymer: Option<usize>) -> Result<Vec<Self>, Reported> {
        if block.node().items().is_none() {
            return Err(block.refuse(block.wrong_shape("reactions", "a list, one reaction an item")));
        }
        let mut reactions: Vec<Self> = Vec::new();
        let mut names: Vec<(String, Place)> = Vec::new();
        let mut failed = false;
        for item in block.items() {
            let Ok(reaction) = Self::read(&item, species, polymer) else {
                failed = true;
                continue;
            };
            let at = item.child_of("name").map_or(item.place(), |name| name.place());
            if let Some((name, first)) = names.iter().find(|(name, _)| *name == reaction.name) {
                let (name, first) = (name.clone(), first.location.clone());
                let _ = block.refuse(SpecError::NameTaken { at, name, first });
                failed = true;
                continue;
            }
            names.push((reaction.name.clone(), at));
            reactions.push(reaction);
        }
        if failed { Err(Reported) } else { Ok(reactions) }
    }

    fn read(block: &Block<'_>, species: &SpeciesList, polymer: Option<usize>) -> Result<Self, Reported> {
        let fields = block.open(&ABOUT);
        let name = block.item_name().unwrap_or_default();
        let _ = fields.text("name");
        let consumed = amounts(&fields, "consumes", species, polymer, Bound::Positive);
        let made = amounts(&fields, "makes", species, polymer, Bound::Positive);
        let orders = amounts(&fields, "orders", species, polymer, Bound::NotNegative);
        let (Some(consumed), Some(made), Some(mut orders)) = (consumed, made, orders) else {
            // neither mass nor the dimension of the rate constant is known; the heat can be read
            let _ = fields.child("heat").map(|child| read_heat(&child));
            return Err(Reported);
        };
        if !fields.has("orders") {
            orders = consumed.iter().map(|(k, _)| (*k, 1.0)).collect();
        }
        for (k, _) in &consumed {
            if !orders.iter().any(|(other, _)| other == k) {
                orders.push((*k, 0.0));
            }
        }
        let order: f64 = orders.iter().map(|(_, order)| order).sum();
        check_molar_masses(&fields, &name, &orders, species);
        check_mass(&fields, &name, &consumed, &made, species);
        let rate_constant = fields
            .child("rate_constant")
            .filter(|_| (0.0..=HIGHEST_ORDER).contains(&order))
            .and_then(|child| fields.take(RateConstant::read(&child, Dimension::rate_constant(order))));
        let heat = fields.child("heat").map_or(f64::NAN, |child| fields.take(read_heat(&child)).unwrap_or(f64::NAN));
        let reverse = read_equilibrium(&fields, &name, &consumed, &made, &orders, heat);
        let is_consumed = |k: usize| consumed.iter().any(|(other, _)| *other == k);
        let forward = orders.iter().filter_map(|(k, order)| Factor::new(*k, *order, is_consumed(*k))).collect();
        let mut stoichiometry: Vec<(usize, f64)> = consumed.iter().map(|(k, amount)| (*k, -amount)).collect();
        for (k, amount) in &made {
            match stoichiometry.iter_mut().find(|(other, _)| other == k) {
                Some((_, net)) => *net += amount,
                None => stoichiometry.push((*k, *amount)),
            }
        }
        let consumes = consumed.iter().map(|(k, _)| *k).collect();
        fields.finish(())?;
        let rate_constant = rate_constant.ok_or(Reported)?;
        Ok(Self { name, stoichiometry, consumes, forward, reverse, rate_constant, heat })
    }

    /// The rate in one stream tube.
    ///
    /// rate = k Π c^a; reversible: rate = k (Π c^a − (1/K) Π_made c^ν Π c^{a−ν})
    ///
    /// | symbol | here | unit | shape |
    /// | --- | --- | --- | --- |
    /// | c | `concentrations` | mol/m³ | per species, one stream tube |
    /// | T, 1/T | `temperature`, `inverse` | K, 1/K | one stream tube |
    /// | ε | `epsilon` | mol/m³ | whole run |
    /// | rate | returned | mol/(m³ s) | one stream tube |
    ///
    /// Slightly below zero a whole power keeps its sign rule; any other is c (c² + ε²)^((a−1)/2), smooth and
    /// odd, so that a reaction of order 0 stops where its reactant is gone.
    #[inline(always)]
    pub fn rate<N: Number>(&self, concentrations: &[N], temperature: N, inverse: N, epsilon: f64) -> N {
        let k = self.rate_constant.at(temperature, inverse);
        let forward = match product(&self.forward, concentrations, epsilon) {
            Some(product) => k * product,
            None => k,
        };
        match &self.reverse {
            Reverse::Never => forward,
            Reverse::Equilibrium { ln_k, heat_over_r, inverse: reference, factors } => {
                let exponent = (inverse - *reference) * *heat_over_r - *ln_k;
                let one_over_k = exponent.at_least(-MAX_EXPONENT).at_most(MAX_EXPONENT).exp();
                let product = product(factors, concentrations, epsilon).unwrap_or(N::constant(1.0));
                forward - k * one_over_k * product
            }
        }
    }

    /// Every species that the rate law, the reverse rate or the stoichiometry names.
    pub fn species(&self) -> impl Iterator<Item = usize> + '_ {
        let reverse = match &self.reverse {
            Reverse::Never => &[][..],
            Reverse::Equilibrium { factors, .. } => factors,
        };
        let named = self.forward.iter().chain(reverse).map(|factor| factor.species);
        named.chain(self.stoichiometry.iter().map(|(k, _)| *k))
    }

    /// Species that the forward rate needs.
    pub fn needs(&self) -> impl Iterator<Item = usize> + '_ {
        self.forward.iter().map(|factor| factor.species)
    }

    /// Species that the reverse rate needs; none where the reaction runs one way.
    pub fn reverse_needs(&self) -> Option<impl Iterator<Item = usize> + '_> {
        match &self.reverse {
            Reverse::Never => None,
            Reverse::Equilibrium { factors, .. } => Some(factors.iter().map(|factor| factor.species)),
        }
    }

    /// The reaction with its species renumbered.
    #[must_use]
    pub fn renumbered(mut self, new: impl Fn(usize) -> usize) -> Self {
        let renumber = |factors: &mut Vec<Factor>| factors.iter_mut().for_each(|f| f.species = new(f.species));
        renumber(&mut self.forward);
        if let Reverse::Equilibrium { factors, .. } = &mut self.reverse {
            renumber(factors);
        }
        self.stoichiometry.iter_mut().for_each(|(k, _)| *k = new(*k));
        self.consumes.iter_mut().for_each(|k| *k = new(*k));
        self
    }
}

/// Species with amounts or orders; none where something is wrong with them, which is noted.
fn amounts(
    fields: &Fields<'_>,
    key: &'static str,
    species: &SpeciesList,
    polymer: Option<usize>,
    bound: Bound,
) -> Option<Vec<(usize, f64)>> {
    let Some(child) = fields.child(key) else { return Some(Vec::new()) };
    if child.node().entries().is_none() {
        fields.problem(child.wrong_shape(key, "a block of species with numbers, such as `{acid: 1}`"));
        return None;
    }
    let items = child.keyed();
    let mut amounts = Vec::new();
    for (name, location, block) in &items {
        let amount = fields.take(block.measure(name, Dimension::RATIO, bound));
        if amount.is_some_and(|amount| amount > 9.0) {
            let (at, key) = (block.place(), (*name).to_owned());
            let text = block.node().text().unwrap_or_default().to_owned();
            fields.problem(SpecError::OutOfBounds { at, key, text, bound: "at most 9".to_owned() });
            continue;
        }
        let at = Place { location: location.clone(), path: block.path().clone() };
        match species.names.iter().position(|known| known == name) {
            Some(k) if polymer == Some(k) => {
                let with = "`reactions`: a polymer changes by its scheme alone".to_owned();
                fields.problem(SpecError::DoesNotGoWith { at, key: (*name).to_owned(), with });
            }
            Some(k) => amounts.extend(amount.map(|amount| (k, amount))),
            None => fields.problem(unknown_name(at, "species", name, &species.names)),
        }
    }
    (amounts.len() == items.len()).then_some(amounts)
}

/// Every species of a rate law is counted in moles, a catalyst's too.
fn check_molar_masses(fields: &Fields<'_>, name: &str, orders: &[(usize, f64)], species: &SpeciesList) {
    for (k, order) in orders {
        let of = &species.items[*k];
        if of.molar_mass.is_none() && *order != 0.0 {
            fields.problem(SpecError::MissingProperty {
                at: of.place.clone(),
                species: of.name.clone(),
                property: "molar_mass",
                because: format!("for reaction `{name}`"),
            });
        }
    }
}

/// Holds the reaction's mass, or its elements where all species have formulas.
fn check_mass(
    fields: &Fields<'_>,
    name: &str,
    consumed: &[(usize, f64)],
    made: &[(usize, f64)],
    species: &SpeciesList,
) {
    let all = || consumed.iter().chain(made);
    for (k, _) in all() {
        let of = &species.items[*k];
        if of.molar_mass.is_none() {
            fields.problem(SpecError::MissingProperty {
                at: of.place.clone(),
                species: of.name.clone(),
                property: "molar_mass",
                because: format!("for reaction `{name}`"),
            });
            return;
        }
    }
    let at = fields.block().place();
    let total = |side: &[(usize, f64)], of: &dyn Fn(usize) -> f64| side.iter().map(|(k, n)| n * of(*k)).sum::<f64>();
    if all().all(|(k, _)| species.items[*k].formula.is_some()) {
        let mut elements: Vec<&'static str> = all()
            .filter_map(|(k, _)| species.items[*k].formula.as_ref())
            .flat_map(|formula| formula.0.keys().copied())
            .collect();
        elements.sort_unstable();
        elements.dedup();
        for element in elements {
            let atoms = |k: usize| species.items[k].formula.as_ref().map_or(0.0, |formula| formula.atoms(element));
            let (consumed, made) = (total(consumed, &atoms), total(made, &atoms));
            if (consumed - made).abs() > ATOM_TOLERANCE {
                let (reaction, element) = (name.to_owned(), element.to_owned());
                fields.problem(SpecError::ElementNotBalanced { at, reaction, element, consumed, made });
                return; // one slip in an amount leaves several elements wrong
            }
        }
        return;
    }
    let mass = |k: usize| species.items[k].molar_mass.unwrap_or(0.0);
    let (consumed, made) = (total(consumed, &mass), total(made, &mass));
    if (consumed - made).abs() > MASS_TOLERANCE * consumed.max(made) {
        let show = |mass| units::write(mass, Dimension::MOLAR_MASS);
        let reaction = name.to_owned();
        fields.problem(SpecError::MassNotBalanced { at, reaction, consumed: show(consumed), made: show(made) });
    }
}

fn read_equilibrium(
    fields: &Fields<'_>,
    name: &str,
    consumed: &[(usize, f64)],
    made: &[(usize, f64)],
    orders: &[(usize, f64)],
    own_heat: f64,
) -> Reverse {
    let Some(child) = fields.child("equilibrium_constant") else { return Reverse::Never };
    let moles = |side: &[(usize, f64)]| side.iter().map(|(_, amount)| amount).sum::<f64>();
    let subject = Dimension::CONCENTRATION.to_power(moles(made) - moles(consumed));
    let block = child.open_for(&EQUILIBRIUM, subject);
    child.trace();
    let value = block.quantity("value");
    let at = block.optional_quantity("at");
    let given = block.optional_quantity("heat");
    let heat = given.unwrap_or(own_heat);
    if at.is_none() && heat != 0.0 {
        let (at, key) = (child.place(), "equilibrium_constant".to_owned());
        let needs = "the temperature it belongs to, such as `at: 80 degC`, since its heat is not 0".to_owned();
        block.problem(SpecError::Needs { at, key, needs });
    }
    if (heat - own_heat).abs() > HEAT_TOLERANCE * own_heat.abs() {
        let show = |heat| units::write(heat, Dimension::MOLAR_ENERGY);
        let text = format!(
            "the equilibrium of reaction `{name}` shifts with {}, but the reaction's own heat is {}",
            show(heat),
            show(own_heat)
        );
        fields.block().reader().warn(ReadWarning { code: "equilibrium_heat", text, at: child.place() });
    }
    let mut factors = Vec::new();
    for (k, order) in orders {
        let consumed = consumed.iter().find(|(other, _)| other == k).map_or(0.0, |(_, amount)| *amount);
        if *order < consumed - WHOLE {
            let (at, key) = (fields.place_of("orders"), "orders".to_owned());
            let needs = "an order of at least the amount consumed, where the reaction is reversible".to_owned();
            block.problem(SpecError::Needs { at, key, needs });
        }
        factors.extend(Factor::new(*k, order - consumed, false));
    }
    factors.extend(made.iter().filter_map(|(k, amount)| Factor::new(*k, *amount, false)));
    let read = block.finish(Reverse::Equilibrium {
        ln_k: value.ln(),
        heat_over_r: heat / GAS_CONSTANT,
        inverse: at.map_or(0.0, f64::recip),
        factors,
    });
    fields.take(read).unwrap_or(Reverse::Never)
}
