//! Reactions: Aᵢ R_k,i, and their heat −Aᵢ Σ ΔH rate (model page, §2).

use super::Gains;
use crate::discretise::profile::Profile;

/// Adds the changes of amounts by reactions and the heat they set free.
///
/// | symbol | here | unit | shape |
/// | --- | --- | --- | --- |
/// | R, −Σ ΔH rate | `profile` | mol/(m³ s), W/m³ | per amount and tube, per tube |
/// | A | `profile` | m² | per tube |
/// | amounts, heat | `gains` | mol/(s m), W/m | per tube |
pub fn add(profile: &Profile, gains: &mut Gains) {
    let n_amounts = profile.sources.len() / profile.n_tubes();
    for i in 0..profile.n_tubes() {
        let area = profile.geometry.areas[i];
        let tube = i * n_amounts..(i + 1) * n_amounts;
        for (gain, source) in gains.amounts[tube.clone()].iter_mut().zip(&profile.sources[tube]) {
            *gain += area * source;
        }
        gains.heat[i] += area * profile.points[i].reaction_heat;
    }
}
