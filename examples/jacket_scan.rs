//! axirad as a library: how the jacket's temperature moves conversion, hot spot and pressure drop.
//!
//! Run it from the project's root: `cargo run --release --example jacket_scan`. The plant is that of
//! `specs/cases/case_c.yaml`; every value is set by the path of its key, as with `--set`.

use std::error::Error;

use axirad::simulate::{read_spec, run};

/// Runs the scan and prints a line a temperature.
///
/// # Errors
/// The spec cannot be read, or a run fails.
pub fn main() -> Result<(), Box<dyn Error>> {
    let name = "specs/cases/case_c.yaml";
    let bytes = std::fs::read(name)?;
    println!("{:>12} {:>12} {:>14} {:>16}", "jacket", "conversion", "hot spot", "pressure drop");
    for jacket in [100, 105, 110, 115, 120] {
        let set = format!("sections.tube.wall.coolant.temperature={jacket} degC");
        let mut part = |path: &str| std::fs::read(path).map_err(|error| error.to_string());
        let spec = read_spec(name, &bytes, &mut part, &[set]).map_err(|errors| errors[0].to_string())?;
        let done = run(&spec, false)?;
        let number = |quantity: &str| done.number(quantity).unwrap_or(f64::NAN);
        println!(
            "{jacket:>7} degC {:>10.2} % {:>9.1} degC {:>11.1} mbar",
            100.0 * number("outlet.conversion"),
            number("hot_spot.temperature") - 273.15,
            0.01 * number("pressure_drop"),
        );
    }
    Ok(())
}
