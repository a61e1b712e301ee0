//! Rate constants in the units that they are printed in. AIBN: Polymer Handbook; styrene: Buback et al. (1995),
//! Macromol. Chem. Phys. 196, 3267; methyl methacrylate: Beuermann et al. (1997), Macromol. Chem. Phys. 198, 1545,
//! all from memory. The values were computed anew from the formulas.

use super::ALONG;
use crate::support::{Case, Checks};

/// c₀ of every species of the spec [mol/m³].
const FED: f64 = 1000.0;

/// The constant that a conversion over a length gives: first order −ln(1 − X)/t, second X/((1 − X) c₀ t).
fn constant(species: &str, celsius: f64, time: f64) -> (f64, f64) {
    let run = Case::file("checks/rate_constants.yaml")
        .set("feed.temperature", format_args!("{celsius:?} degC"))
        .set("sections.tube.length", format_args!("{:?} m", 1e-3 * time))
        .run();
    let x = run.number(&format!("outlet.conversion_of.{species}"));
    (-(1.0 - x).ln() / time, x / ((1.0 - x) * FED * time))
}

#[test]
fn aibn_falls_apart_at_the_rate_of_its_constants() {
    let mut checks = Checks::default();
    for (celsius, expected) in [(60.0, 9.745425e-6), (80.0, 1.359405e-4)] {
        let (first, _) = constant("aibn", celsius, 0.7 / expected);
        checks.relative(&format!("k_d at {celsius} °C"), first, expected, ALONG);
    }
    // Half of it is left after ten hours at 64.947 °C; half of that last digit is 7e-5 of the rate.
    let (first, _) = constant("aibn", 64.947, 36_000.0);
    checks.relative("half-life", 2.0_f64.ln() / first, 36_000.0, 7e-5);
    checks.end();
}

#[test]
fn radicals_grow_at_the_rate_that_pulsed_lasers_found() {
    let mut checks = Checks::default();
    for (species, values) in [
        ("styrene", [(25.0, 85.999), (60.0, 341.076), (120.0, 2045.245)]),
        ("methyl_methacrylate", [(25.0, 323.368), (60.0, 834.143), (90.0, 1624.999)]),
    ] {
        for (celsius, litres) in values {
            let (_, second) = constant(species, celsius, 1e3 / (litres * FED));
            // The printed value has three decimals: up to 6e-6.
            let printed = 5e-4 / litres;
            checks.relative(&format!("k_p of {species} at {celsius} °C"), 1e3 * second, litres, ALONG + printed);
        }
    }
    checks.end();
}
