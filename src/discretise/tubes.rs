//! Properties and sources of all stream tubes, several at once.
//!
//! The laws are chosen at run time, once for [`WIDTH`] stream tubes. On processors with 256-bit vectors the same
//! code is compiled a second time for them; it gives the same numbers.

use super::layout::Layout;
use super::profile::Profile;
use crate::model::lane::Lane;
use crate::model::local::{Material, Point, Workspace};

/// Stream tubes evaluated at once.
const WIDTH: usize = 8;

/// Room for the evaluation.
#[derive(Debug)]
pub struct TubeRoom {
    state: Vec<Lane<WIDTH>>,
    work: Workspace<Lane<WIDTH>>,
}

impl TubeRoom {
    /// Room for a material.
    #[must_use]
    pub fn new(material: &Material) -> Self {
        Self { state: vec![Lane([0.0; WIDTH]); material.n_vars()], work: material.workspace() }
    }
}

/// Evaluates every stream tube of a state into a profile.
///
/// | symbol | here | unit | shape |
/// | --- | --- | --- | --- |
/// | ṁ | `flows` | kg/s | per stream tube |
/// | n, μ, T | `state` | mol/kg, K | `layout` |
/// | properties, sources, ρD, ṁ/ρ | `profile` | SI | per stream tube |
pub fn evaluate(
    material: &Material,
    layout: &Layout,
    flows: &[f64],
    state: &[f64],
    room: &mut TubeRoom,
    profile: &mut Profile,
) {
    #[cfg(target_arch = "x86_64")]
    if std::arch::is_x86_feature_detected!("avx2") {
        #[expect(unsafe_code, reason = "the processor was asked for the feature on the line above")]
        // SAFETY: `with_avx2` needs nothing but a processor that has AVX2
        unsafe {
            with_avx2(material, layout, flows, state, room, profile);
        }
        return;
    }
    body(material, layout, flows, state, room, profile);
}

#[cfg(target_arch = "x86_64")]
#[target_feature(enable = "avx2")]
fn with_avx2(
    material: &Material,
    layout: &Layout,
    flows: &[f64],
    state: &[f64],
    room: &mut TubeRoom,
    profile: &mut Profile,
) {
    body(material, layout, flows, state, room, profile);
}

#[inline(always)]
fn body(
    material: &Material,
    layout: &Layout,
    flows: &[f64],
    state: &[f64],
    room: &mut TubeRoom,
    profile: &mut Profile,
) {
    let n = layout.n_tubes;
    for first in (0..n).step_by(WIDTH) {
        // lanes beyond the last stream tube repeat it
        let tubes: [usize; WIDTH] = std::array::from_fn(|lane| (first + lane).min(n - 1));
        for (k, value) in room.state.iter_mut().enumerate() {
            *value = Lane(tubes.map(|i| state[i * layout.n_vars() + k]));
        }
        let point = material.evaluate(&room.state, &mut room.work);
        let temperature = room.state[layout.n_amounts];
        for (lane, i) in tubes.iter().enumerate().take(WIDTH.min(n - first)) {
            scatter(layout, flows, &point, temperature, &room.work, lane, *i, profile);
        }
        let mobilities = profile.transport.len() / n;
        for k in 0..mobilities {
            let transport = point.density * material.mixture.diffusivity(k, temperature);
            for (lane, i) in tubes.iter().enumerate() {
                profile.transport[i * mobilities + k] = transport.0[lane];
            }
        }
    }
}

#[inline(always)]
#[expect(clippy::too_many_arguments, reason = "one loop body, kept apart to be read")]
fn scatter(
    layout: &Layout,
    flows: &[f64],
    point: &Point<Lane<WIDTH>>,
    temperature: Lane<WIDTH>,
    work: &Workspace<Lane<WIDTH>>,
    lane: usize,
    i: usize,
    profile: &mut Profile,
) {
    let density = point.density.0[lane];
    profile.temperatures[i] = temperature.0[lane];
    profile.volume_flows[i] = flows[i] / density;
    profile.viscosities[i] = point.viscosity.0[lane];
    profile.points[i] = Point {
        density,
        heat_capacity: point.heat_capacity.0[lane],
        conductivity: point.conductivity.0[lane],
        viscosity: point.viscosity.0[lane],
        reaction_heat: point.reaction_heat.0[lane],
    };
    let sources = &mut profile.sources[i * layout.n_amounts..(i + 1) * layout.n_amounts];
    for (source, lanes) in sources.iter_mut().zip(&work.sources) {
        *source = lanes.0[lane];
    }
}
