//! What only the whole spec shows: blocks that are each right and do not fit together.

use super::flow::{Flow, Profile};
use super::limits::Limits;
use super::local::Material;
use super::plant::Feed;
use crate::spec::{Block, Fields, ReadWarning, Reported, SpecError};
use crate::units::{self, Dimension};

/// Viscosities of fluids, in Pa s: from next to nothing, as tests need it, to rock that creeps.
const FLUID: (f64, f64) = (1e-12, 1e15);

/// A profile or a heat that needs a viscosity, and a viscosity that needs a polymer.
pub(super) fn check_viscosity(fields: &Fields<'_>, material: &Material, flow: Flow) {
    let missing = |key: &str, what: &str| {
        let (at, key) = (fields.place_in("flow", key), what.to_owned());
        fields.problem(SpecError::Needs { at, key, needs: "`mixture.viscosity`".to_owned() });
    };
    if !material.mixture.has_viscosity() {
        if flow.profile == Profile::FromViscosity {
            missing("profile", "profile: from_viscosity");
        }
        if flow.viscous_heating {
            missing("viscous_heating", "viscous_heating: true");
        }
    }
    if material.mixture.viscosity_needs_polymer() && !material.has_polymer() {
        let (at, key) = (fields.place_in("mixture", "viscosity"), "mixture.viscosity".to_owned());
        let needs = "a `polymerization` that says which species is the polymer".to_owned();
        fields.problem(SpecError::Needs { at, key, needs });
    }
}

/// The closing flux is the same whichever species closes it, since Σ M_k ∂n_k/∂r = 0 without a polymer; with
/// one, the polymer closes it. A key that cannot change anything is refused.
pub(super) fn check_closing(block: &Block<'_>) -> Result<(), Reported> {
    let Some(child) = block.child_of("closing_species") else { return Ok(()) };
    let (at, key) = (child.place(), "closing_species".to_owned());
    let with = "any mixture: the balance closes the same whichever species is named; leave it out".to_owned();
    Err(block.refuse(SpecError::DoesNotGoWith { at, key, with }))
}

/// A viscosity that no fluid has at the feed, or that rises with temperature, is a slip of the pen.
pub(super) fn check_feed_viscosity(fields: &Fields<'_>, material: &Material, feed: &Feed) {
    if !material.mixture.has_viscosity() {
        return;
    }
    let mut fractions = vec![0.0; material.n_components()];
    let mut at = |warmer: f64| {
        let mut state = feed.state.clone();
        state[material.n_amounts()] += warmer;
        material.fractions(&state, &mut fractions);
        material.mixture.viscosity(&material.fluid(&state, &fractions))
    };
    let (here, warmer) = (at(0.0), at(10.0));
    let place = || fields.place_in("mixture", "viscosity");
    let show = |value| units::write(value, Dimension::VISCOSITY);
    if !(FLUID.0..=FLUID.1).contains(&here) {
        let needs =
            format!("a law that gives a fluid: at the feed it comes to {here:.3e} Pa s; look at its units and powers");
        fields.problem(SpecError::Needs { at: place(), key: "mixture.viscosity".to_owned(), needs });
    } else if warmer > here {
        let text = format!("the viscosity rises from {} at the feed to {} 10 K above it", show(here), show(warmer));
        fields.block().reader().warn(ReadWarning { code: "rising_viscosity", text, at: place() });
    }
}

/// A limit on what the run does not have would be read and ignored.
pub(super) fn check_limits_apply(fields: &Fields<'_>, material: &Material, feed: &Feed) {
    let Some(limits) = fields.child("limits") else { return };
    let refuse = |key: &'static str, applies: bool, needs: &str| {
        if let Some(child) = limits.child_of(key)
            && !applies
        {
            let (at, key) = (child.place(), format!("limits.{key}"));
            fields.problem(SpecError::Needs { at, key, needs: needs.to_owned() });
        }
    };
    let flows = feed.pressure.is_some() && material.mixture.has_viscosity();
    refuse("pressure", flows, "`feed.pressure` and `mixture.viscosity`");
    refuse("viscosity", material.mixture.has_viscosity(), "`mixture.viscosity`");
    refuse("polymer_fraction", material.has_polymer(), "a `polymerization`");
    refuse("dispersity", material.has_polymer(), "a `polymerization`");
}

/// A feed beyond a limit would end the run before it begins.
pub(super) fn check_feed_within_limits(fields: &Fields<'_>, feed: &Feed, limits: &Limits) {
    let temperature = feed.temperature();
    let outside = temperature < limits.lowest_temperature || temperature > limits.highest_temperature;
    if outside {
        let show = |value| units::write(value, Dimension::TEMPERATURE);
        let needs = format!(
            "to lie within `limits.temperature`, {} to {}, but is {}",
            show(limits.lowest_temperature),
            show(limits.highest_temperature),
            show(temperature)
        );
        let at = fields.place_in("feed", "temperature");
        fields.problem(SpecError::Needs { at, key: "feed.temperature".to_owned(), needs });
    }
    if let Some(pressure) = feed.pressure
        && pressure < limits.lowest_pressure
    {
        let (at, key) = (fields.place_in("feed", "pressure"), "feed.pressure".to_owned());
        fields.problem(SpecError::Needs { at, key, needs: "to lie above `limits.pressure.lowest`".to_owned() });
    }
}

/// Stations times unknowns that a run keeps in memory; each takes some hundred bytes with what follows from it.
const MOST_KEPT: usize = 10_000_000;

/// A run that would not fit in memory is refused before it begins.
pub(super) fn check_size(fields: &Fields<'_>, material: &Material, tubes: usize, stations: usize) {
    let unknowns = tubes * material.n_vars();
    if stations * unknowns <= MOST_KEPT {
        return;
    }
    let at = fields.place_in("output", "stations");
    let bound = format!("at most {} with {unknowns} unknowns", MOST_KEPT / unknowns);
    let (key, text) = ("output.stations".to_owned(), stations.to_string());
    fields.problem(SpecError::OutOfBounds { at, key, text, bound });
}
