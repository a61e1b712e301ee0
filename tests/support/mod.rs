//! Running specs from tests: from a file below `specs/` or from a text, with values set by path.

pub mod passage;

use std::fmt::Write as _;
use std::path::{Path, PathBuf};

use axirad::discretise::rhs::System;
use axirad::simulate::{self, Run, Spec};

/// A spec with the values that a test sets.
#[derive(Clone, Debug)]
pub struct Case {
    name: String,
    text: String,
    sets: Vec<String>,
}

/// The folder of the specs.
pub fn specs() -> PathBuf {
    Path::new(env!("CARGO_MANIFEST_DIR")).join("specs")
}

impl Case {
    /// A spec by its place below `specs/`.
    pub fn file(path: &str) -> Self {
        let full = specs().join(path);
        let text = std::fs::read_to_string(&full).unwrap_or_else(|error| panic!("specs/{path}: {error}"));
        Self { name: full.display().to_string(), text, sets: Vec::new() }
    }

    /// A spec written in the test.
    pub fn text(text: &str) -> Self {
        Self { name: specs().join("of_a_test.yaml").display().to_string(), text: text.to_owned(), sets: Vec::new() }
    }

    /// The same with `path=value`.
    pub fn set(mut self, path: &str, value: impl std::fmt::Display) -> Self {
        self.sets.push(format!("{path}={value}"));
        self
    }

    /// The same on N stream tubes.
    pub fn tubes(self, n: usize) -> Self {
        self.set("numerics.stream_tubes", n)
    }

    /// The same at a relative tolerance.
    pub fn tolerance(self, relative: f64) -> Self {
        self.set("numerics.relative_tolerance", relative)
    }

    /// The same with a place whose mixing cup is recorded, z in metres.
    pub fn cup_at(self, name: &str, z: f64) -> Self {
        self.set(&format!("output.places.{name}"), format_args!("{{z: {z:?} m}}"))
    }

    /// The same with a place whose local values are recorded, z in metres, x = r/R.
    pub fn point_at(self, name: &str, z: f64, x: f64) -> Self {
        self.set(&format!("output.places.{name}"), format_args!("{{z: {z:?} m, position: {x:?}}}"))
    }

    /// The spec as it is read.
    pub fn spec(&self) -> Spec {
        let mut read = |path: &str| std::fs::read(path).map_err(|error| error.to_string());
        match simulate::read_spec(&self.name, self.text.as_bytes(), &mut read, &self.sets) {
            Ok(spec) => spec,
            Err(errors) => {
                let errors: Vec<String> = errors.iter().map(ToString::to_string).collect();
                panic!("{} with {:?} is refused: {errors:#?}", self.name, self.sets);
            }
        }
    }

    /// A run of it.
    pub fn run(&self) -> Ran {
        match simulate::run(&self.spec(), false) {
            Ok(run) => Ran(run),
            Err(error) => panic!("{} with {:?} failed: {error:?}", self.name, self.sets),
        }
    }

    /// A run of it with its tables.
    pub fn run_with_tables(&self) -> Ran {
        match simulate::run(&self.spec(), true) {
            Ok(run) => Ran(run),
            Err(error) => panic!("{} with {:?} failed: {error:?}", self.name, self.sets),
        }
    }
}

/// A run whose numbers are asked for by name.
#[derive(Debug)]
pub struct Ran(pub Run);

impl Ran {
    /// The number of a quantity; a quantity without one fails the test with its reason.
    pub fn number(&self, name: &str) -> f64 {
        let figure = self.0.figure(name).unwrap_or_else(|| panic!("there is no quantity `{name}`"));
        figure.value.number().unwrap_or_else(|| panic!("`{name}`: {:?}", figure.value))
    }

    /// Whether the outlet was reached.
    pub fn reached_the_outlet(&self) -> bool {
        self.0.end.limit.is_none()
    }
}

/// Comparisons that are all made before a test fails.
#[derive(Debug, Default)]
pub struct Checks {
    made: usize,
    failed: String,
}

impl Checks {
    /// |value − expected| ≤ allowed.
    pub fn within(&mut self, what: &str, value: f64, expected: f64, allowed: f64) {
        self.made += 1;
        let error = value - expected;
        if error.abs() > allowed || error.is_nan() {
            let share = error.abs() / allowed;
            writeln!(
                self.failed,
                "{what}: {value:.10e}, expected {expected:.10e}: error {error:.2e} where {allowed:.2e} is allowed ({share:.2} times)"
            )
            .expect("a text takes what is written to it");
        }
    }

    /// |value − expected| ≤ tolerance |expected|.
    pub fn relative(&mut self, what: &str, value: f64, expected: f64, tolerance: f64) {
        self.within(what, value, expected, tolerance * expected.abs());
    }

    /// low ≤ value ≤ high.
    pub fn between(&mut self, what: &str, value: f64, low: f64, high: f64) {
        self.within(what, value, 0.5 * (low + high), 0.5 * (high - low));
    }

    /// Fails with every comparison that did not hold.
    pub fn end(self) {
        assert!(self.made > 0, "nothing was compared");
        let failed = self.failed.lines().count();
        assert!(self.failed.is_empty(), "{failed} of {} comparisons do not hold:\n{}", self.made, self.failed);
    }
}

/// The order at which values on grids of N, 2N and 4N tubes approach their limit.
pub fn order(of_n: f64, of_2n: f64, of_4n: f64) -> f64 {
    ((of_2n - of_n) / (of_4n - of_2n)).abs().log2()
}

/// What is formed and used up at the inlet: the slopes of the amounts of the first stream tube over z, species
/// first, the three moments last [mol/(kg m)].
pub fn inlet_slopes(spec: &Spec) -> Vec<f64> {
    let system = System::new(&spec.plant, &spec.plant.sections[0]);
    let inlet = system.layout.uniform(&spec.plant.feed.state);
    let mut slopes = vec![0.0; inlet.len()];
    system.slopes(&inlet, &mut slopes);
    slopes[..system.layout.n_amounts].to_vec()
}
