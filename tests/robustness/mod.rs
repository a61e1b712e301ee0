//! Every run ends at its outlet or at a limit that the spec states, never in an error of the numerics; all at default
//! numerics.

use crate::support::{Case, Checks, Ran};

/// Rise of case A if nothing is cooled: 84 670 · 4/3900 [K].
const ADIABATIC_RISE: f64 = 86.84;

/// What every run must show, however wild: balances that hold, conversions that exist, no temperature from nowhere.
fn hold_sound(what: &str, run: &Ran) {
    let mut checks = Checks::default();
    checks.within(&format!("mass, {what}"), run.number("balance.mass"), 0.0, 1e-12);
    checks.within(&format!("energy, {what}"), run.number("balance.energy"), 0.0, 1e-5); // ten times the default 1e-6
    // A reactant that is used up ends within its absolute tolerance, 1e-8 of what was fed.
    checks.between(&format!("conversion, {what}"), run.number("outlet.conversion"), -1e-7, 1.0 + 1e-7);
    checks.between(&format!("conversion at the hot spot, {what}"), run.number("hot_spot.conversion"), -0.05, 1.05);
    checks.end();
}

/// Case A with feed and wall at a temperature.
fn case_a(temperature: f64) -> Case {
    Case::file("cases/case_a.yaml")
        .set("numerics", "{}")
        .set("feed.temperature", format_args!("{temperature:?} K"))
        .set("sections.tube.wall.temperature", format_args!("{temperature:?} K"))
}

/// Steps of 2 K from 314 K to 400 K.
fn temperatures() -> impl Iterator<Item = f64> {
    (0..=43).map(|step| 314.0 + 2.0 * f64::from(step))
}

#[test]
fn case_a_can_be_heated_through_runaway_and_far_beyond() {
    let mut rises = Vec::new();
    for temperature in temperatures() {
        let run = case_a(temperature).run();
        assert!(run.reached_the_outlet(), "nothing limits this run, at {temperature} K");
        hold_sound(&format!("{temperature} K"), &run);
        rises.push(run.number("hot_spot.rise"));
    }
    let until_it_ran_away: Vec<f64> = rises.iter().copied().take_while(|rise| *rise < 0.9 * ADIABATIC_RISE).collect();
    assert!(until_it_ran_away.is_sorted(), "until it has run away, hotter is hotter: {rises:?}");
    assert!(until_it_ran_away.len() > 3 && until_it_ran_away[0] < 10.0, "it begins far from runaway: {rises:?}");
    // Heat spreads a hundred times faster than reactant: it goes ahead into the fresh core, which then adds its own,
    // so that the hot spot may pass the adiabatic rise. Far beyond, the reaction is over before heat has moved.
    assert!(rises.iter().all(|rise| *rise < 1.25 * ADIABATIC_RISE), "{rises:?}");
    let last = rises.last().expect("runs were made");
    assert!((last / ADIABATIC_RISE - 1.0).abs() < 0.03, "{last} K at 400 K");
}

#[test]
fn a_run_of_case_a_through_runaway_agrees_with_a_finer_one() {
    let mut checks = Checks::default();
    for temperature in [330.0, 350.0, 370.0] {
        let fine = case_a(temperature).tubes(160).tolerance(1e-8).run();
        let run = case_a(temperature).run();
        let what = |name: &str| format!("{name} at {temperature} K");
        // Second order at N = 40 in a thin front: 5e-3, as beside an inlet; its place is that of a flat maximum.
        checks.relative(&what("hot spot"), run.number("hot_spot.rise"), fine.number("hot_spot.rise"), 5e-3);
        checks.relative(&what("its place"), run.number("hot_spot.z"), fine.number("hot_spot.z"), 2e-2);
        checks.relative(&what("X"), run.number("outlet.conversion"), fine.number("outlet.conversion"), 1e-3);
    }
    checks.end();
}

#[test]
fn a_limit_of_temperature_ends_every_run_of_case_a_that_passes_it() {
    let mut ended = 0;
    for temperature in temperatures() {
        let highest = temperature + 30.0;
        let run = case_a(temperature).set("limits.temperature.highest", format_args!("{highest:?} K")).run();
        let hottest = run.number("hot_spot.temperature");
        match run.0.end.limit {
            Some(limit) => {
                ended += 1;
                assert_eq!(limit, "limits.temperature.highest");
                // The hottest tube is at the limit; its axis may be above it by the curvature of a tube.
                assert!((0.0..1.0).contains(&(hottest - highest)), "{hottest} K where {highest} K is the limit");
                assert!(run.0.figure("outlet.conversion").is_some_and(|figure| figure.value.number().is_none()));
            }
            None => assert!(hottest < highest + 1.0, "{hottest} K where {highest} K is the limit"),
        }
    }
    assert!(ended > 30, "most of these runs are beyond runaway: {ended}");
}

/// Styrene with the gel effect of its part, the wall and the feed at a temperature.
fn gel(profile: &str, celsius: f64) -> Case {
    Case::file("cases/case_b.yaml")
        .set("numerics", "{}")
        .set("flow.profile", profile)
        .set("feed.temperature", format_args!("{celsius:?} degC"))
        .set("sections.tube.wall", format_args!("{{kind: wall_temperature, temperature: {celsius:?} degC}}"))
        .set("sections.tube.length", "400 m")
}

#[test]
fn a_gel_effect_can_be_followed_to_95_percent() {
    for profile in ["plug", "parabolic"] {
        for celsius in [80.0, 100.0, 120.0, 150.0, 180.0] {
            let run = gel(profile, celsius).run();
            let what = format!("gel effect, {profile}, {celsius} °C");
            assert!(run.reached_the_outlet(), "{what}");
            hold_sound(&what, &run);
            assert!(run.number("outlet.conversion") > 0.95, "{what}: {}", run.number("outlet.conversion"));
            assert!(run.number("balance.monomer_units") < 1e-12, "{what}");
        }
    }
}

#[test]
fn a_gel_effect_may_thicken_the_fluid_until_a_jet_shoots_through_it() {
    // Viscosity grows by ten decades and more; what is left is a jet far faster than the mean.
    for celsius in [80.0, 100.0, 120.0, 150.0] {
        let run = gel("from_viscosity", celsius).run();
        let what = format!("jet, {celsius} °C");
        assert!(run.reached_the_outlet(), "{what}");
        hold_sound(&what, &run);
        // No temperature from nowhere: far less than the adiabatic rise of 358 K is left at these walls.
        assert!(run.number("hot_spot.rise") < 100.0, "{what}: {}", run.number("hot_spot.rise"));
    }
}

#[test]
fn a_limit_of_viscosity_ends_a_run_before_the_jet() {
    let run = gel("from_viscosity", 100.0).set("limits.viscosity.highest", "1000 Pa.s").run();
    assert_eq!(run.0.end.limit, Some("limits.viscosity.highest"));
    hold_sound_up_to(&run);
}

#[test]
fn other_limits_end_runs_where_they_are_left() {
    for (path, value, name) in [
        ("limits.polymer_fraction.highest", "30 %", "limits.polymer_fraction.highest"),
        ("limits.dispersity.highest", "2.2", "limits.dispersity.highest"),
        ("limits.temperature.highest", "365 K", "limits.temperature.highest"),
    ] {
        let run = Case::file("cases/case_b.yaml").set("numerics", "{}").set(path, value).run();
        assert_eq!(run.0.end.limit, Some(name));
        hold_sound_up_to(&run);
    }
    let run = Case::file("cases/case_c.yaml").set("feed.pressure", "2000 Pa").run();
    assert_eq!(run.0.end.limit, Some("limits.pressure.lowest"), "a pressure of nothing ends a run");
    hold_sound_up_to(&run);
}

/// Balances up to the place where a limit ended the run.
fn hold_sound_up_to(run: &Ran) {
    let mut checks = Checks::default();
    checks.within("mass", run.number("balance.mass"), 0.0, 1e-12);
    checks.within("monomer units", run.number("balance.monomer_units"), 0.0, 1e-12);
    checks.within("energy", run.number("balance.energy"), 0.0, 1e-5);
    checks.end();
    assert!(run.0.end.z > 0.0);
}

#[test]
fn an_initiator_may_be_used_up() {
    // Twenty-nine half-lives; nothing else starts chains.
    for profile in ["plug", "parabolic"] {
        let run = Case::file("checks/dead_end.yaml")
            .set("numerics", "{}")
            .set("flow.profile", profile)
            .set("mixture.diffusivity", "0 m2/s")
            .set("sections.tube.length", "20 m")
            .run();
        assert!(run.reached_the_outlet());
        hold_sound(&format!("initiator used up, {profile}"), &run);
        let left = 1.0 - run.number("outlet.conversion_of.initiator");
        let mut checks = Checks::default();
        checks.within("initiator left", left, 0.0, 1e-5); // 2e-9, and the integrator's tolerance
        // −ln(1 − X) = 0.6928 + starts: 0.4998 with propagation alone, a little more with chain starts.
        checks.between("X", run.number("outlet.conversion"), 0.4998, 0.505);
        checks.end();
        // Without radicals to end it a chain would grow for ever: the run says that it is in doubt. It looks at the
        // mixing cup, in which the core of a parabola still brings initiator.
        let in_doubt = run.0.warnings.iter().any(|warning| warning.code == "quasi_steady_radicals");
        assert!(in_doubt || profile == "parabolic");
    }
}

#[test]
fn nothing_happens_without_an_initiator() {
    for path in ["checks/dead_end.yaml", "cases/case_b.yaml"] {
        let case = Case::file(path).set("numerics", "{}");
        let case = if path.starts_with("checks") {
            case.set("feed.concentrations.initiator", "0 mol/m3")
        } else {
            case.set("feed.mass_fractions.aibn", "0 %").set("polymerization.initiators.aibn.efficiency", "0 %")
        };
        let run = case.run();
        assert!(run.reached_the_outlet());
        hold_sound(path, &run);
        if path.starts_with("checks") {
            // A trace of chains stands in for none: R_I is 1e-10 mol/(m³ s) at least.
            assert!(run.number("outlet.conversion") < 1e-3, "{}", run.number("outlet.conversion"));
        }
    }
}

#[test]
fn a_monomer_may_be_used_up() {
    // Five times the initiator, long enough: initiation ends with the monomer, and the conversion does not pass 1.
    for profile in ["plug", "parabolic"] {
        let run = Case::file("checks/dead_end.yaml")
            .set("numerics", "{}")
            .set("flow.profile", profile)
            .set("polymerization.propagation", "200 m3/(mol s)")
            .set("sections.tube.length", "20 m")
            .run();
        assert!(run.reached_the_outlet());
        hold_sound(&format!("monomer used up, {profile}"), &run);
        assert!(run.number("outlet.conversion") > 0.9999, "{}", run.number("outlet.conversion"));
    }
}
