//! Free-radical polymerization: Tobolsky (1958), J. Am. Chem. Soc. 80, 5927; Schulz (1939); Flory (1953);
//! Mayo (1943), J. Am. Chem. Soc. 65, 2324. Values computed anew from the equations, with termination as k_t λ₀² and
//! a monomer bound by every chain start, as on the model page, §6.

use super::{ALGEBRA, ALONG};
use crate::support::{Case, Checks, Ran, inlet_slopes};

/// m0 of the specs [kg/mol].
const UNIT: f64 = 0.1;
/// Radicals start with a share φ = 1/(1 + ε²/[M]²) that ends initiation with the monomer: ε is 1e-4 of the pure
/// monomer's concentration, here 1 mol/m³ against 8000, so that ν is off by 8e-9; after conversion a little more.
const OF_PHI: f64 = 2e-8;

fn degrees(run: &Ran) -> (f64, f64) {
    let number = |name: &str| run.number(&format!("outlet.{name}_average_molar_mass")) / UNIT;
    (number("number"), number("weight"))
}

#[test]
fn a_dead_end_polymerization_stops_where_its_initiator_does() {
    let mut checks = Checks::default();
    // X is the same, as both terminations use up radicals alike.
    for (termination, n, w, dispersity) in [
        ("by_disproportionation", 274.2136609, 560.1224000, 2.04264951),
        ("by_combination", 548.4273218, 840.6835999, 1.53289883),
    ] {
        let case = Case::file("checks/dead_end.yaml");
        let run = case.set("polymerization.termination", format_args!("{{{termination}: 1e5 m3/(mol s)}}")).run();
        let (dp_n, dp_w) = degrees(&run);
        checks.relative(&format!("X at 2000 s, {termination}"), run.number("outlet.conversion"), 0.3556543161, ALONG);
        checks.relative(&format!("DP_n, {termination}"), dp_n, n, ALONG);
        checks.relative(&format!("DP_w, {termination}"), dp_w, w, ALONG);
        checks.relative(&format!("M_w/M_n, {termination}"), run.number("outlet.dispersity"), dispersity, ALONG);
        // k_d t = 2.
        let left = 1.0 - run.number("outlet.conversion_of.initiator");
        checks.relative(&format!("initiator left, {termination}"), left, (-2.0_f64).exp(), ALONG);
        // μ₁ = [M]₀ − [M]: what is bound is what is gone, to rounding.
        checks.within(&format!("units, {termination}"), run.number("balance.monomer_units"), 0.0, 1e-12);
    }
    checks.end();
}

/// The case at a chain length ν = 1/√(2 k_th k_t), and its shares of termination.
fn alike(nu: f64, combination_share: f64) -> Case {
    let rate = 1.0 / (nu * nu * 2e5);
    Case::file("checks/constant_chain_length.yaml")
        .set("polymerization.thermal_initiation.rate_constant", format_args!("{rate:e} m3/(mol s)"))
        .set("polymerization.termination.combination_share", combination_share)
}

#[test]
fn chains_at_an_instant_are_as_long_as_schulz_and_flory_found() {
    let mut checks = Checks::default();
    // Disproportionation DP_n = 1 + ν, DP_w = 1 + 2ν; combination 2(1 + ν), 2 + 3ν.
    for (nu, share, n, w, dispersity) in [
        (100.0, 0.0, 101.0, 201.0, 1.990099010),
        (1000.0, 0.0, 1001.0, 2001.0, 1.999000999),
        (100.0, 1.0, 202.0, 302.0, 1.495049505),
        (1000.0, 1.0, 2002.0, 3002.0, 1.499500500),
        (1000.0, 0.5, 1334.66666667, 2501.5, 1.874250749),
    ] {
        let what = |name: &str| format!("{name} at ν = {nu}, combination {share}");
        // Short enough that a part of the monomer is left: the rate goes with 1/ν.
        let run = alike(nu, share).set("sections.tube.length", format_args!("{:?} m", 2e-3 * nu)).run();
        let (dp_n, dp_w) = degrees(&run);
        checks.relative(&what("DP_n"), dp_n, n, OF_PHI);
        checks.relative(&what("DP_w"), dp_w, w, OF_PHI);
        checks.relative(&what("M_w/M_n"), run.number("outlet.dispersity"), dispersity, OF_PHI);
        assert!(run.number("outlet.conversion") > 0.1, "the chains stay alike while the monomer is used up");
        // At the inlet it is algebra, once φ is taken into account: half of its 1/8000² in λ₀.
        let with_phi = nu * (1.0 + 1.0 / 8000.0_f64.powi(2)).sqrt();
        let (n, w) = match share {
            0.0 => (1.0 + with_phi, 1.0 + 2.0 * with_phi),
            1.0 => (2.0 + 2.0 * with_phi, 2.0 + 3.0 * with_phi),
            _ => ((1.0 + with_phi) / 0.75, 1.5 + 2.5 * with_phi),
        };
        let [.., mu_0, mu_1, mu_2] = inlet_slopes(&alike(nu, share).spec())[..] else { panic!("there are moments") };
        checks.relative(&what("DP_n at the inlet"), mu_1 / mu_0, n, ALGEBRA);
        checks.relative(&what("DP_w at the inlet"), mu_2 / mu_1, w, ALGEBRA);
    }
    checks.end();
}

#[test]
fn separate_terminations_are_the_same_as_a_total_with_its_share() {
    let of = |termination: &str| {
        let run = alike(1000.0, 0.5).set("polymerization.termination", termination).run();
        (degrees(&run), run.number("outlet.conversion"))
    };
    let separate = of("{by_combination: 0.5e5 m3/(mol s), by_disproportionation: 0.5e5 m3/(mol s)}");
    let total = of("{total: 1e5 m3/(mol s), combination_share: 50 %}");
    let mut checks = Checks::default();
    checks.relative("DP_n", separate.0.0, total.0.0, 1e-12); // the same arithmetic but for rounding
    checks.relative("DP_w", separate.0.1, total.0.1, 1e-12);
    checks.relative("X", separate.1, total.1, 1e-12);
    checks.end();
}

#[test]
fn transfer_shortens_chains_as_mayo_found() {
    // 1/(DP_n − 1) = 1/ν + C_M + C_S [S]/[M], exact with these moments and disproportionation.
    let to_monomer = alike(1000.0, 0.0).set("polymerization.transfer", "{monomer: {ratio: 6e-5}}");
    let to_both = to_monomer
        .clone()
        .set("feed.concentrations.agent", "4000 mol/m3")
        .set("feed.concentrations.monomer", "7000 mol/m3")
        .set("feed.concentrations.agent", "3500 mol/m3")
        .set("polymerization.transfer", "{monomer: {ratio: 6e-5}, agent: {ratio: 1e-3}}");
    let mut checks = Checks::default();
    for (name, case, expected) in
        [("monomer", &to_monomer, 944.396226415), ("monomer and agent", &to_both, 642.025641026)]
    {
        let [.., mu_0, mu_1, _] = inlet_slopes(&case.spec())[..] else { panic!("there are moments") };
        checks.relative(&format!("DP_n at the inlet, transfer to {name}"), mu_1 / mu_0, expected, OF_PHI);
    }
    // Transfer to monomer alone keeps the chains alike while the monomer is used up.
    checks.relative("DP_n, transfer to monomer", degrees(&to_monomer.run()).0, 944.396226415, OF_PHI);
    checks.end();
}

#[test]
fn an_agent_is_used_up_in_the_ratio_of_its_constant() {
    // d ln [S]/d ln [M] = C_S k_p λ₀/(k_p λ₀ (1 + 1/ν)) for long chains: [S] = [S]₀ (1 − X)^(C_S/(1 + starts)).
    let run = alike(1000.0, 0.0)
        .set("feed.concentrations.agent", "10 mol/m3")
        .set("polymerization.transfer", "{agent: {ratio: 0.8}}")
        .run();
    // Starts: R_I/R_p = 1/ν, and T_r λ₀/R_p = 0.8 [S]/[M] of monomer bound, 0.001 at the inlet.
    let (x, gone) = (run.number("outlet.conversion"), run.number("outlet.conversion_of.agent"));
    let exponent = (1.0 - gone).ln() / (1.0 - x).ln();
    let mut checks = Checks::default();
    // Between no starts at all and the largest share of starts, at the outlet.
    let [low, high] = [0.8 / (1.0 + 1e-3 + 0.8 * 10.0 / 8000.0 * 1.05), 0.8 / (1.0 + 1e-3)];
    checks.between("ln [S]/ln [M]", exponent, low, high);
    checks.end();
}
