//! Warnings: what of a run is in doubt, by codes that a spec can acknowledge with a reason.

use std::collections::BTreeMap;

use crate::results::view::{RunView, StationView};
use crate::results::{Figure, Site};
use crate::spec::{Block, ReadWarning, Reported, unknown_name};
use crate::units::{self, Dimension};

/// A radical's lifetime in doubt from this share of the residence time (model page, §8; our choice).
const LIFETIME_SHARE: f64 = 0.01;
/// Laminar flow in a tube is in doubt from this Reynolds number (model page, §8).
const LAMINAR: f64 = 2100.0;
/// Largest velocity over the mean from which a core channels through the rest: five times a parabola's (our choice).
const CHANNEL: f64 = 10.0;
/// Mass, elements and monomer units close to rounding; this is a hundred times what a long run gathers.
const ROUNDING: f64 = 1e-10;
/// The energy balance closes to this many times the relative tolerance.
const ENERGY_FACTOR: f64 = 10.0;

/// A code and what it means.
#[derive(Debug)]
pub struct WarningAbout {
    /// The code.
    pub code: &'static str,
    /// What it means and what to do.
    pub about: &'static str,
}

/// All codes.
pub const CODES: &[WarningAbout] = &[
    WarningAbout {
        code: "law_range",
        about: "a law was used outside the range of temperature it was fitted in, or a table was held beyond its \
                last point: extend the data, or keep the run inside",
    },
    WarningAbout {
        code: "equilibrium_heat",
        about: "an equilibrium shifts with another heat than the reaction sets free: thermodynamics wants one number",
    },
    WarningAbout {
        code: "quasi_steady_radicals",
        about: "a radical lives for more than 1 % of the residence time: the quasi-steady state is in doubt; give \
                the transfer to monomer, or an initiator that lasts",
    },
    WarningAbout {
        code: "hot_spot_at_end",
        about: "the hottest point lies at the end of the reactor: it may be hotter beyond, lengthen the last section",
    },
    WarningAbout {
        code: "not_laminar",
        about: "the Reynolds number passes 2100, where laminar flow in a tube is in doubt: none of the figures holds for \
                turbulent flow",
    },
    WarningAbout {
        code: "channelling",
        about: "the fluid runs as a fast core through a layer that hardly moves: the layer is thinner or thicker by the \
                grid, and so are the figures; use more stream tubes, and doubt the design before the program",
    },
    WarningAbout {
        code: "rising_viscosity",
        about: "the viscosity rises with temperature at the feed, as no simple fluid's does: the law that falls is \
                `andrade`, `arrhenius` rises",
    },
    WarningAbout {
        code: "endothermic_polymerization",
        about: "the heat of polymerization is positive, so the reaction cools: polymerizations set heat free, and \
                their heat is negative",
    },
    WarningAbout {
        code: "balance",
        about: "a balance does not close as it should: tighten `numerics.relative_tolerance`, and report it if that \
                does not help",
    },
];

/// A warning of a run.
#[derive(Clone, Debug, PartialEq)]
pub struct Warning {
    /// Its code.
    pub code: &'static str,
    /// What is in doubt, with figures.
    pub text: String,
    /// Why it is accepted, if the spec acknowledges it.
    pub acknowledged: Option<String>,
}

/// Reads the block `acknowledge`: codes with reasons.
///
/// # Errors
/// A code that does not exist, a reason that is no text.
pub fn read_acknowledged(block: &Block<'_>) -> Result<BTreeMap<String, String>, Reported> {
    let codes: Vec<String> = CODES.iter().map(|about| about.code.to_owned()).collect();
    let mut all = BTreeMap::new();
    let mut failed = block.node().entries().is_none();
    if failed {
        let _ = block.refuse(block.wrong_shape("acknowledge", "a block of warnings with reasons"));
    }
    for (code, location, item) in block.keyed() {
        let at = crate::spec::Place { location, path: item.path().clone() };
        if !codes.iter().any(|known| known == code) {
            let _ = block.refuse(unknown_name(at, "warning", code, &codes));
            failed = true;
        }
        match item.node().text() {
            Some(reason) => {
                item.resolve(reason.to_owned());
                all.insert(code.to_owned(), reason.to_owned());
            }
            None => {
                let _ = block.refuse(item.wrong_shape(code, "a reason"));
                failed = true;
            }
        }
    }
    if failed { Err(Reported) } else { Ok(all) }
}

/// Everything that is in doubt about a run.
#[must_use]
pub fn warnings(
    run: &RunView<'_>,
    figures: &[Figure],
    read: &[ReadWarning],
    acknowledged: &BTreeMap<String, String>,
) -> Vec<Warning> {
    let mut found: Vec<(&'static str, String)> = read.iter().map(|w| (w.code, w.text.clone())).collect();
    found.extend(laws_out_of_range(run).into_iter().map(|text| ("law_range", text)));
    found.extend(turbulence(run).map(|text| ("not_laminar", text)));
    found.extend(channelling(run).map(|text| ("channelling", text)));
    found.extend(slow_radicals(run).map(|text| ("quasi_steady_radicals", text)));
    let hot_spot = &run.hot_spot;
    if hot_spot.site == Site::End && run.is_complete() {
        let text = format!("the hottest point lies at the end, z = {:.4} m", hot_spot.z);
        found.push(("hot_spot_at_end", text));
    }
    found.extend(open_balances(run, figures).into_iter().map(|text| ("balance", text)));
    found
        .into_iter()
        .map(|(code, text)| Warning { code, text, acknowledged: acknowledged.get(code).cloned() })
        .collect()
}

/// Laws that some stream tube or the wall's surface used outside their range.
fn laws_out_of_range(run: &RunView<'_>) -> Vec<String> {
    let stations = || run.stations().chain(run.peaks.iter().flatten());
    let low = stations().map(|s| s.profile.lowest_temperature()).fold(f64::INFINITY, f64::min);
    let high = stations().map(|s| s.peak.value).fold(f64::NEG_INFINITY, f64::max);
    let show = |temperature| units::shown(temperature, Dimension::TEMPERATURE, 4);
    let outside = |(path, (from, to)): (String, (f64, f64))| {
        (low < from || high > to).then(|| {
            format!(
                "`{path}` holds from {} to {}, the run went from {} to {}",
                show(from),
                show(to),
                show(low),
                show(high)
            )
        })
    };
    run.plant.material.ranges().into_iter().filter_map(outside).collect()
}

/// The largest Reynolds number, 8 ρ ū²/τ_w, where it passes the laminar bound.
///
/// Source: Metzner and Reed (1955), AIChE J. 1, 434 (from memory); ρūD/η for a Newtonian fluid.
fn turbulence(run: &RunView<'_>) -> Option<String> {
    let reynolds = |station: &StationView<'_>| {
        let velocity = station.profile.mean_velocity();
        let stress = station.wall_shear_stress().filter(|stress| *stress > 0.0)?;
        Some((8.0 * station.profile.mean_density() * velocity * velocity / stress, station.z))
    };
    let (largest, z) = run.stations().filter_map(reynolds).max_by(|a, b| a.0.total_cmp(&b.0))?;
    (largest > LAMINAR).then(|| format!("the Reynolds number is {largest:.0} at z = {z:.4} m, above {LAMINAR}"))
}

/// The largest velocity over the mean, where the fluid runs as a core through a layer at the wall.
fn channelling(run: &RunView<'_>) -> Option<String> {
    let ratio = |station: &StationView<'_>| (station.profile.velocity_ratio(), station.z);
    let (largest, z) = run.stations().map(ratio).max_by(|a, b| a.0.total_cmp(&b.0))?;
    (largest > CHANNEL).then(|| {
        format!(
            "the largest velocity is {largest:.0} times the mean at z = {z:.4} m: the layer at the wall hardly moves"
        )
    })
}

/// The longest lifetime of a radical, where it is a large share of the residence time.
fn slow_radicals(run: &RunView<'_>) -> Option<String> {
    let material = &run.plant.material;
    let lifetime = |station: &StationView<'_>| Some((material.radical_lifetime(&station.cup.state)?, station.z));
    let (longest, z) = run.stations().filter_map(lifetime).max_by(|a, b| a.0.total_cmp(&b.0))?;
    let residence = residence_time(run);
    (residence > 0.0 && longest > LIFETIME_SHARE * residence).then(|| {
        format!(
            "a radical lives up to {longest:.3} s (at z = {z:.4} m), {:.1} % of the residence time of {residence:.4} s",
            100.0 * longest / residence
        )
    })
}

/// Mass held over mass flow, between the stations by the trapezoidal rule, in s.
fn residence_time(run: &RunView<'_>) -> f64 {
    let held = |station: &StationView<'_>| station.profile.mean_density() * station.profile.geometry.area();
    let of_section = |stations: &Vec<StationView<'_>>| -> f64 {
        stations.windows(2).map(|pair| 0.5 * (held(&pair[0]) + held(&pair[1])) * (pair[1].z - pair[0].z)).sum()
    };
    run.sections.iter().map(of_section).sum::<f64>() / run.plant.feed.mass_flow
}

fn open_balances(run: &RunView<'_>, figures: &[Figure]) -> Vec<String> {
    let energy = ENERGY_FACTOR * run.plant.numerics.relative_tolerance;
    let bounds = [
        ("balance.mass", ROUNDING),
        ("balance.elements", ROUNDING),
        ("balance.monomer_units", ROUNDING),
        ("balance.energy", energy),
    ];
    let open = |(name, bound): (&str, f64)| {
        let figure = figures.iter().find(|figure| figure.name == name)?;
        let value = figure.value.number().filter(|value| *value > bound)?;
        Some(format!("`{name}` is open by {value:.1e}, more than {bound:.0e}"))
    };
    bounds.into_iter().filter_map(open).collect()
}
