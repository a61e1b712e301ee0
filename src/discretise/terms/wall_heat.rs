//! Heat through the wall of the outermost stream tube (model page, §2 and §4).

use super::Gains;
use crate::discretise::profile::Profile;
use crate::model::wall::Outside;

/// The wall at one z.
#[derive(Clone, Copy, Debug, Default, PartialEq)]
pub struct WallState {
    /// q_w, positive out of the fluid, in W/m².
    pub heat_flux: f64,
    /// Temperature of the wetted surface, in K.
    pub temperature: f64,
}

/// Flux and surface temperature of the wall.
///
/// q_w = (T_N − T_c)/(1/U + 1/(λ_N g_w)),  T_wall = T_N − q_w/(λ_N g_w)
///
/// | symbol | here | unit | shape |
/// | --- | --- | --- | --- |
/// | 1/U, T_c | `outside` | m² K/W, K | wall |
/// | λ_N, T_N, g_w | `profile` | W/(m K), K, 1/m | outermost tube |
#[must_use]
pub fn wall_state(outside: Outside, profile: &Profile) -> WallState {
    let last = profile.n_tubes() - 1;
    let film = profile.points[last].conductivity * profile.geometry.wall_gradient();
    let difference = profile.temperatures[last] - outside.temperature;
    let heat_flux = difference / (outside.resistance + film.recip());
    WallState { heat_flux, temperature: profile.temperatures[last] - heat_flux / film }
}

/// Takes the heat through the wall from the outermost stream tube.
pub fn add(wall_perimeter: f64, wall: WallState, gains: &mut Gains) {
    let last = gains.heat.len() - 1;
    gains.heat[last] -= wall_perimeter * wall.heat_flux;
}
