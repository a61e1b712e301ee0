//! One section from its inlet to its outlet, or to the place where a limit is left.

use diffsol::{Bdf, DiffsolError, NalgebraVec, OdeBuilder, OdeSolverMethod, OdeSolverStopReason, Vector};

use super::block_thomas::BlockThomas;
use super::equations::Equations;
use super::error::NumericsError;
use super::matrix::BlockTridiagonal;
use super::stop::Limit;
use super::tolerance::absolute_tolerances;
use super::work::Work;
use crate::discretise::rhs::System;

/// First probe of the integrator, as a share of the section's length: its default of 1 m may lie far outside.
const FIRST_PROBE: f64 = 1e-4;
/// Steps after which a section is given up: the tightest tolerance needs some 10⁴, and this many take seconds.
const MOST_STEPS: usize = 150_000;
/// Least step, as a share of the section's length: an explosion at the inlet may be that short.
const LEAST_STEP: f64 = 1e-19;
/// A place along z is found to this share of the section's length.
const PLACE_TOLERANCE: f64 = 1e-7;
/// The golden section's ratio, (√5 − 1)/2.
const GOLDEN: f64 = 0.618_033_988_749_894_9;

/// A state and its place, z counted from the section's inlet, in m.
#[derive(Clone, Debug, PartialEq)]
pub struct Station {
    /// z, in m.
    pub z: f64,
    /// The state there.
    pub state: Vec<f64>,
}

/// The passage of one section.
#[derive(Clone, Debug)]
pub struct Leg {
    /// States at the places asked for, as far as the run came; the inlet first, the end last.
    pub stations: Vec<Station>,
    /// Places where the hottest point of the cross-section is a local maximum along z.
    pub peaks: Vec<Station>,
    /// The limit that was left at the last station, if one was.
    pub ended: Option<Limit>,
    /// What it cost.
    pub work: Work,
}

type Solver<'a, 's, 'p> = Bdf<'a, Equations<'s, 'p>, BlockThomas>;

/// Integrates one section.
///
/// | symbol | here | unit | shape |
/// | --- | --- | --- | --- |
/// | state at the inlet | `inlet` | mol/kg, K, … | `layout` |
/// | places to record, ascending, from 0 to L | `targets` | m | any |
///
/// # Errors
/// The integrator gave up.
pub fn march(system: &System<'_>, inlet: Vec<f64>, limits: Vec<Limit>, targets: &[f64]) -> Result<Leg, NumericsError> {
    let length = system.section.length;
    let relative = system.plant.numerics.relative_tolerance;
    let tolerances = absolute_tolerances(system, &inlet);
    if let Some(limit) = limits.iter().find(|limit| limit.distance(system, &inlet) < 0.0) {
        let stations = vec![Station { z: 0.0, state: inlet }];
        return Ok(Leg { stations, peaks: Vec::new(), ended: Some(*limit), work: Work::default() });
    }
    let failed = |error: &DiffsolError| NumericsError {
        section: system.section.name.clone(),
        z: 0.0,
        step: 0.0,
        temperatures: temperatures(system, &inlet),
        reason: in_words(error),
    };
    let equations = Equations::new(system, inlet.clone(), limits);
    let mut problem = OdeBuilder::<BlockTridiagonal>::new()
        .rtol(relative)
        .atol(tolerances)
        .h0(FIRST_PROBE * length)
        .build_from_eqn(equations)
        .map_err(|error| failed(&error))?;
    let options = &mut problem.ode_options;
    options.max_number_timesteps = MOST_STEPS;
    options.min_timestep = LEAST_STEP * length;
    options.update_rhs_jacobian_after_steps = 20;
    options.update_jacobian_after_steps = 10;
    options.max_timestep_growth = Some(5.0);
    options.min_timestep_growth = Some(1.3);
    let mut solver = problem.bdf::<BlockThomas>().map_err(|error| failed(&error))?;
    solver.set_stop_time(length).map_err(|error| failed(&error))?;
    let mut recorder = Recorder::new(system, targets, inlet.clone(), problem.eqn.limits.clone());
    let ended = loop {
        let stalled = |solver: &Solver<'_, '_, '_>, error: &DiffsolError| NumericsError {
            z: solver.state().t,
            step: solver.state().h,
            temperatures: temperatures(system, solver.state().y.batch_as_slice(0)),
            ..failed(error)
        };
        let reason = solver.step().map_err(|error| stalled(&solver, &error))?;
        if let Some(end) = recorder.record(&solver, &reason).map_err(|error| stalled(&solver, &error))? {
            break end;
        }
    };
    let statistics = solver.get_statistics();
    let work = Work {
        steps: statistics.number_of_steps,
        right_hand_sides: problem.eqn.right_hand_sides.get(),
        jacobians: problem.eqn.jacobians.get(),
        factorisations: statistics.number_of_linear_solver_setups,
        newton_iterations: statistics.number_of_nonlinear_solver_iterations,
        newton_failures: statistics.number_of_nonlinear_solver_fails,
        error_failures: statistics.number_of_error_test_failures,
    };
    Ok(Leg { stations: recorder.stations, peaks: recorder.peaks, ended, work })
}

/// What the integrator says, in words of the reactor.
fn in_words(error: &DiffsolError) -> String {
    let said = error.to_string();
    let known = [
        ("Step size is too small", "the steps along z became too small to go on"),
        ("nonlinear solver fail", "the iteration for the next step did not converge"),
        ("error test fail", "no step was small enough for the tolerance"),
        ("number of", "the steps along z became too many"),
        ("timesteps", "the steps along z became too many"),
    ];
    known.iter().find(|(part, _)| said.contains(part)).map_or(said, |(_, words)| (*words).to_owned())
}

/// Lowest and highest temperature of the stream tubes, in K.
fn temperatures(system: &System<'_>, state: &[f64]) -> (f64, f64) {
    let all = (0..system.layout.n_tubes).map(|i| state[system.layout.temperature(i)]);
    all.fold((f64::INFINITY, f64::NEG_INFINITY), |(low, high), t| (low.min(t), high.max(t)))
}

/// How a section ended: at its outlet, or where a limit was left.
type End = Option<Limit>;

/// Follows the integrator and records what was asked for.
struct Recorder<'r, 'p> {
    system: &'r System<'p>,
    limits: Vec<Limit>,
    targets: &'r [f64],
    next: usize,
    stations: Vec<Station>,
    peaks: Vec<Station>,
    /// (z, hottest temperature) at the ends of the last two steps.
    before: [(f64, f64); 2],
    room: NalgebraVec<f64>,
}

impl<'r, 'p> Recorder<'r, 'p> {
    fn new(system: &'r System<'p>, targets: &'r [f64], inlet: Vec<f64>, limits: Vec<Limit>) -> Self {
        let hottest = (0.0, hottest(system, &inlet));
        Self {
            system,
            limits,
            targets,
            next: targets.partition_point(|z| *z <= 0.0),
            room: NalgebraVec::from_vec(inlet.clone(), diffsol::NalgebraContext::default()),
            stations: vec![Station { z: 0.0, state: inlet }],
            peaks: Vec::new(),
            before: [hottest; 2],
        }
    }

    /// Records one step; tells how the section ended, if it did.
    fn record(
        &mut self,
        solver: &Solver<'_, '_, '_>,
        reason: &OdeSolverStopReason<f64>,
    ) -> Result<Option<End>, DiffsolError> {
        let here = solver.state().t;
        let start = self.before[1].0;
        let (found, at_found) = match reason {
            OdeSolverStopReason::RootFound(z, _) => (Some(*z), self.state_at(solver, *z)?),
            OdeSolverStopReason::TstopReached | OdeSolverStopReason::InternalTimestep => {
                let at_end = self.state_at(solver, here)?;
                // an event function that begins at exactly 0 never changes its sign
                if self.is_left(&at_end) {
                    let z = self.crossing(solver, start, here)?;
                    (Some(z), self.state_at(solver, z)?)
                } else {
                    (None, at_end)
                }
            }
        };
        let hottest = hottest(self.system, &at_found);
        let crossed = self.follow_peak(solver, found.unwrap_or(here), hottest)?.or(found);
        let last = crossed.unwrap_or(here);
        while let Some(z) = self.targets.get(self.next).copied().filter(|z| *z <= last) {
            let state = self.state_at(solver, z)?;
            self.stations.push(Station { z, state });
            self.next += 1;
        }
        if crossed.is_some() {
            let state = self.state_at(solver, last)?;
            let limit = self.left(&state);
            self.stations.retain(|station| station.z < last);
            self.peaks.retain(|peak| peak.z <= last);
            self.stations.push(Station { z: last, state });
            return Ok(Some(Some(limit)));
        }
        Ok(matches!(reason, OdeSolverStopReason::TstopReached).then_some(None))
    }

    /// Whether a state is beyond some limit.
    fn is_left(&self, state: &[f64]) -> bool {
        self.limits.iter().any(|limit| limit.distance(self.system, state) < 0.0)
    }

    /// The limit that a state is nearest to, or farthest beyond.
    fn left(&self, state: &[f64]) -> Limit {
        let distance = |limit: &Limit| limit.distance(self.system, state);
        let nearest = self.limits.iter().min_by(|a, b| distance(a).total_cmp(&distance(b)));
        *nearest.expect("temperature limits are always there")
    }

    fn state_at(&mut self, solver: &Solver<'_, '_, '_>, z: f64) -> Result<Vec<f64>, DiffsolError> {
        solver.interpolate_inplace(z.min(solver.state().t), &mut self.room)?;
        Ok(self.room.batch_as_slice(0).to_vec())
    }

    /// Finds a local maximum along z of the hottest temperature between the ends of the last three steps.
    /// Tells where a limit was left, if it was between two steps that both keep it.
    fn follow_peak(&mut self, solver: &Solver<'_, '_, '_>, z: f64, value: f64) -> Result<Option<f64>, DiffsolError> {
        let [first, middle] = self.before;
        self.before = [middle, (z, value)];
        if !(middle.1 > first.1 && middle.1 >= value) {
            return Ok(None);
        }
        let tolerance = PLACE_TOLERANCE * self.system.section.length;
        let mut warmth = |z: f64| -> Result<f64, DiffsolError> {
            let state = self.state_at(solver, z)?;
            Ok(self.system.with_profile(&state, |profile, _| profile.peak_temperature().value))
        };
        let (mut low, mut high) = (first.0, z);
        let (mut a, mut b) = (high - GOLDEN * (high - low), low + GOLDEN * (high - low));
        let (mut at_a, mut at_b) = (warmth(a)?, warmth(b)?);
        while high - low > tolerance {
            if at_a > at_b {
                (high, b, at_b) = (b, a, at_a);
                a = high - GOLDEN * (high - low);
                at_a = warmth(a)?;
            } else {
                (low, a, at_a) = (a, b, at_b);
                b = low + GOLDEN * (high - low);
                at_b = warmth(b)?;
            }
        }
        let top = 0.5 * (low + high);
        let state = self.state_at(solver, top)?;
        let crossed = if self.is_left(&state) { Some(self.crossing(solver, first.0, top)?) } else { None };
        self.peaks.push(Station { z: top, state });
        Ok(crossed)
    }

    /// The place between one inside all limits and one beyond some at which the first was left, by bisection.
    fn crossing(
        &mut self,
        solver: &Solver<'_, '_, '_>,
        mut inside: f64,
        mut outside: f64,
    ) -> Result<f64, DiffsolError> {
        let tolerance = PLACE_TOLERANCE * self.system.section.length;
        while outside - inside > tolerance {
            let middle = 0.5 * (inside + outside);
            let state = self.state_at(solver, middle)?;
            if self.is_left(&state) {
                outside = middle;
            } else {
                inside = middle;
            }
        }
        Ok(inside)
    }
}

/// The hottest of the stream tubes, and of the wall's surface where that may be hotter, in K.
fn hottest(system: &System<'_>, state: &[f64]) -> f64 {
    let (_, hottest) = temperatures(system, state);
    let outside = system.section.wall.outside();
    if outside.resistance.is_finite() && outside.temperature > hottest {
        return system.with_profile(state, |profile, _| hottest.max(profile.wall.temperature));
    }
    hottest
}
