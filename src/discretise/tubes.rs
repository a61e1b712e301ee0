//! Properties and sources of all stream tubes, several at once.
//!
//! The laws are chosen at run time, once for `WIDTH` stream tubes, on processors that have 256-bit vectors; on
//! others one by one, which agrees to rounding.

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
    lanes: Workspace<Lane<WIDTH>>,
    single: Workspace<f64>,
}

impl TubeRoom {
    /// Room for a material.
    #[must_use]
    pub fn new(material: &Material) -> Self {
        let state = vec![Lane([0.0; WIDTH]); material.n_vars()];
        Self { state, lanes: material.workspace(), single: material.workspace() }
    }
}

/// The stream tubes to evaluate.
#[derive(Clone, Copy, Debug)]
pub struct Tubes<'a> {
    /// The fluid.
    pub material: &'a Material,
    /// Offsets of the state.
    pub layout: &'a Layout,
    /// ṁᵢ, in kg/s.
    pub flows: &'a [f64],
    /// n, μ, T of all of them, in mol/kg and K.
    pub state: &'a [f64],
}

impl Tubes<'_> {
    /// Evaluates every stream tube into a profile: properties, sources, ρD, ṁ/ρ.
    pub fn evaluate(&self, room: &mut TubeRoom, profile: &mut Profile) {
        #[cfg(target_arch = "x86_64")]
        if std::arch::is_x86_feature_detected!("avx2") {
            #[expect(unsafe_code, reason = "the processor was asked for the feature on the line above")]
            // SAFETY: `side_by_side_avx2` needs nothing but a processor that has AVX2
            unsafe {
                self.side_by_side_avx2(room, profile);
            }
            return;
        }
        self.one_by_one(room, profile);
    }

    /// The laws compiled for 256-bit vectors.
    #[cfg(target_arch = "x86_64")]
    #[target_feature(enable = "avx2")]
    fn side_by_side_avx2(&self, room: &mut TubeRoom, profile: &mut Profile) {
        let Self { material, layout, state, .. } = *self;
        let n = layout.n_tubes;
        for first in (0..n).step_by(WIDTH) {
            // lanes beyond the last stream tube repeat it
            let tubes: [usize; WIDTH] = std::array::from_fn(|lane| (first + lane).min(n - 1));
            for (k, value) in room.state.iter_mut().enumerate() {
                *value = Lane(tubes.map(|i| state[i * layout.n_vars() + k]));
            }
            let point = material.evaluate(&room.state, &mut room.lanes);
            let temperature = room.state[layout.n_amounts];
            for (lane, i) in tubes.iter().enumerate().take(WIDTH.min(n - first)) {
                let single = Point {
                    density: point.density.0[lane],
                    heat_capacity: point.heat_capacity.0[lane],
                    conductivity: point.conductivity.0[lane],
                    viscosity: point.viscosity.0[lane],
                    reaction_heat: point.reaction_heat.0[lane],
                };
                let sources = room.lanes.sources.iter().map(|source| source.0[lane]);
                self.store(*i, temperature.0[lane], single, sources, profile);
            }
            for k in 0..profile.transport.len() / n {
                let transport = point.density * material.mixture.diffusivity(k, temperature);
                for (lane, i) in tubes.iter().enumerate() {
                    self.store_transport(*i, k, transport.0[lane], profile);
                }
            }
        }
    }

    /// The laws as the standard library's functions compute them: on processors without such vectors.
    pub fn one_by_one(&self, room: &mut TubeRoom, profile: &mut Profile) {
        let Self { material, layout, state, .. } = *self;
        for i in 0..layout.n_tubes {
            let tube = &state[layout.tube(i)];
            let temperature = tube[layout.n_amounts];
            let point = material.evaluate(tube, &mut room.single);
            for k in 0..profile.transport.len() / layout.n_tubes {
                let transport = point.density * material.mixture.diffusivity(k, temperature);
                self.store_transport(i, k, transport, profile);
            }
            self.store(i, temperature, point, room.single.sources.iter().copied(), profile);
        }
    }

    /// αᵢ of every stream tube into a profile.
    pub fn expand(&self, room: &mut TubeRoom, profile: &mut Profile) {
        for (i, expansion) in profile.expansions.iter_mut().enumerate() {
            let tube = &self.state[self.layout.tube(i)];
            *expansion = self.material.expansion(tube, &mut room.single.fractions);
        }
    }

    #[inline(always)]
    fn store(
        &self,
        i: usize,
        temperature: f64,
        point: Point<f64>,
        sources: impl Iterator<Item = f64>,
        profile: &mut Profile,
    ) {
        let n_amounts = self.layout.n_amounts;
        profile.temperatures[i] = temperature;
        profile.volume_flows[i] = self.flows[i] / point.density;
        profile.viscosities[i] = point.viscosity;
        profile.points[i] = point;
        for (stored, source) in profile.sources[i * n_amounts..(i + 1) * n_amounts].iter_mut().zip(sources) {
            *stored = source;
        }
    }

    #[inline(always)]
    fn store_transport(&self, i: usize, k: usize, transport: f64, profile: &mut Profile) {
        let mobilities = profile.transport.len() / self.layout.n_tubes;
        profile.transport[i * mobilities + k] = transport;
    }
}
