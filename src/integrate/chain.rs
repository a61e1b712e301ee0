//! Sections in series: the stream tubes of one pass into the next (model page, §1).

use super::error::NumericsError;
use super::march::{Leg, Station, march};
use super::stop::Limit;
use super::work::Work;
use crate::discretise::layout::{INTEGRALS, Integral};
use crate::discretise::rhs::System;
use crate::model::plant::Plant;

/// Places nearer than this share of a section are one: they differ by the rounding of sums of lengths.
const SAME_PLACE: f64 = 1e-12;

/// A whole run: one leg a section, as far as it came.
#[derive(Debug)]
pub struct Trajectory<'p> {
    /// The sections that were entered, with their systems.
    pub legs: Vec<SectionLeg<'p>>,
    /// What it cost.
    pub work: Work,
}

/// The passage of one section within a run.
#[derive(Debug)]
pub struct SectionLeg<'p> {
    /// The section's system.
    pub system: System<'p>,
    /// z of the section's inlet, in m.
    pub start: f64,
    /// p at the section's inlet, if the feed's is given, in Pa.
    pub pressure: Option<f64>,
    /// What was recorded.
    pub leg: Leg,
}

impl SectionLeg<'_> {
    /// The last station: the outlet, or the place where a limit was left.
    #[must_use]
    pub fn outlet(&self) -> &Station {
        self.leg.stations.last().expect("the inlet is always recorded")
    }

    /// An integral over the section, up to a state.
    #[must_use]
    pub fn integral(&self, which: Integral, state: &[f64]) -> f64 {
        state[self.system.layout.integral(which)]
    }
}

impl Trajectory<'_> {
    /// The limit that ended the run, if one did.
    #[must_use]
    pub fn ended(&self) -> Option<Limit> {
        self.legs.last().and_then(|leg| leg.leg.ended)
    }
}

/// Integrates all sections from the feed on; `places` are recorded besides the plant's stations.
///
/// # Errors
/// The integrator gave up in a section.
pub fn run_sections<'p>(plant: &'p Plant, places: &[f64]) -> Result<Trajectory<'p>, NumericsError> {
    let mut legs: Vec<SectionLeg<'p>> = Vec::new();
    let mut work = Work::default();
    let (mut start, mut pressure) = (0.0, plant.feed.pressure);
    let mut inlet: Option<Vec<f64>> = None;
    for section in &plant.sections {
        let system = System::new(plant, section);
        let state = inlet.take().unwrap_or_else(|| system.layout.uniform(&plant.feed.state));
        let targets = targets(plant, start, section.length, places);
        let limits = Limit::of(&system, pressure);
        let leg =
            march(&system, state, limits, &targets).map_err(|error| NumericsError { z: start + error.z, ..error })?;
        work.add(leg.work);
        let leg = SectionLeg { system, start, pressure, leg };
        let outlet = &leg.outlet().state;
        let lost = leg.integral(Integral::Friction, outlet) + leg.integral(Integral::Gravity, outlet);
        pressure = pressure.map(|pressure| pressure - lost);
        let mut next = outlet.clone();
        let tail = next.len() - INTEGRALS.len();
        next[tail..].fill(0.0);
        inlet = Some(next);
        start += section.length;
        let ended = leg.leg.ended.is_some();
        legs.push(leg);
        if ended {
            break;
        }
    }
    Ok(Trajectory { legs, work })
}

/// Places to record in a section, from its inlet, ascending: stations of the whole length, its ends, `places`.
fn targets(plant: &Plant, start: f64, length: f64, places: &[f64]) -> Vec<f64> {
    let n = plant.output.stations;
    let whole = plant.length();
    #[expect(clippy::cast_precision_loss, reason = "stations are at most 10⁵")]
    let stations = (0..n).map(|k| whole * k as f64 / (n - 1) as f64);
    let inside = stations.chain(places.iter().copied()).map(|z| z - start);
    let mut targets: Vec<f64> = inside.filter(|z| *z > 0.0 && *z < length).collect();
    targets.extend([0.0, length]);
    targets.sort_by(f64::total_cmp);
    targets.dedup_by(|next, kept| *next - *kept < SAME_PLACE * length);
    *targets.last_mut().expect("the outlet is among them") = length;
    targets
}
