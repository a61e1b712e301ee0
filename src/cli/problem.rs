//! What goes wrong outside the specs, in one shape: said to the user, counted, and written into `--json`.

use std::io;

use serde_json::{Value as Json, json};

use super::exit_code::ExitCode;
use crate::integrate::error::NumericsError;
use crate::units::{self, Dimension};

/// Something that went wrong.
#[derive(Clone, Debug, PartialEq)]
pub struct Problem {
    /// The exit code it asks for.
    pub code: ExitCode,
    /// What is wrong.
    pub message: String,
    /// What to do instead.
    pub help: Option<String>,
    /// Further figures for `--json`.
    more: Vec<(&'static str, Json)>,
}

impl Problem {
    /// The command line is wrong.
    #[must_use]
    pub fn of_command(message: String, help: &str) -> Self {
        Self { code: ExitCode::WrongInput, message, help: Some(help.to_owned()), more: Vec::new() }
    }

    /// Something outside refuses.
    #[must_use]
    pub fn of_outside(message: String, help: Option<&str>) -> Self {
        Self { code: ExitCode::OutsideFailed, message, help: help.map(str::to_owned), more: Vec::new() }
    }

    /// A file cannot be read or written, in the words of the system.
    #[must_use]
    pub fn of_file(what: &str, name: &str, error: &io::Error) -> Self {
        Self::of_outside(format!("cannot {what} `{name}`: {}", reason(error)), None)
    }

    /// The numerics failed.
    #[must_use]
    pub fn of_numerics(error: &NumericsError) -> Self {
        let show = |value: f64, dimension| units::shown(value, dimension, 5);
        let (low, high) = error.temperatures;
        let message = format!(
            "the integration of section `{}` failed at z = {}: {} (last step {}, fluid from {} to {})",
            error.section,
            show(error.z, Dimension::LENGTH),
            error.reason,
            show(error.step, Dimension::LENGTH),
            show(low, Dimension::TEMPERATURE),
            show(high, Dimension::TEMPERATURE),
        );
        let more = vec![
            ("section", json!(error.section)),
            ("z_m", json!(error.z)),
            ("step_m", json!(error.step)),
            ("lowest_temperature_K", json!(low)),
            ("highest_temperature_K", json!(high)),
        ];
        Self { code: ExitCode::NumericsFailed, message, help: Some(error.help().to_owned()), more }
    }

    /// The lines for a reader.
    #[must_use]
    pub fn draw(&self) -> String {
        let help = self.help.as_ref().map(|help| format!("  help: {help}\n"));
        format!("error: {}\n{}", self.message, help.unwrap_or_default())
    }

    /// The entry under `diagnostics`.
    #[must_use]
    pub fn to_json(&self) -> Json {
        let mut entry = json!({ "message": self.message, "help": self.help });
        if let Some(entry) = entry.as_object_mut() {
            entry.extend(self.more.iter().map(|(key, value)| ((*key).to_owned(), value.clone())));
        }
        entry
    }
}

/// What the system says, without the number that only some systems give.
#[must_use]
pub fn reason(error: &io::Error) -> String {
    let text = error.to_string();
    text.split(" (os error").next().unwrap_or_default().to_owned()
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn failed_numerics_say_place_step_state_and_advice() {
        let error = NumericsError {
            section: "zone_2".to_owned(),
            z: 1.25,
            step: 1e-6,
            temperatures: (358.15, 473.15),
            reason: "the step became too small".to_owned(),
        };
        let problem = Problem::of_numerics(&error);
        assert_eq!(problem.code, ExitCode::NumericsFailed);
        let drawn = problem.draw();
        for part in ["zone_2", "z = 1.25 m", "the step became too small", "1 um", "85 degC to 200 degC", "  help: "] {
            assert!(drawn.contains(part), "{part}: {drawn}");
        }
        let entry = problem.to_json();
        assert_eq!((&entry["z_m"], &entry["lowest_temperature_K"]), (&json!(1.25), &json!(358.15)));
    }

    #[test]
    fn the_words_of_the_system_come_without_its_number() {
        let error = io::Error::from_raw_os_error(2);
        assert!(!reason(&error).contains("os error"), "{}", reason(&error));
    }
}
