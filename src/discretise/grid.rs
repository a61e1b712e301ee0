//! The stream tubes: fixed mass flows between faces set once at the inlet (model page, §2).

use crate::model::duct::tube::Tube;
use crate::model::flow::Profile;
use crate::model::numerics::Numerics;

/// ṁᵢ of each stream tube: the exact flow of the inlet's uniform state between its faces, in kg/s.
///
/// The faces x = r/R come from the spacing; the share of the flow between the axis and x is x² for a flat
/// profile and 2x² − x⁴ for Poiseuille's, which is also that of `from_viscosity` with a uniform viscosity.
#[must_use]
pub fn tube_flows(numerics: &Numerics, profile: Profile, mass_flow: f64) -> Vec<f64> {
    let n = numerics.stream_tubes;
    let share = |x: f64| match profile {
        Profile::Plug => x * x,
        Profile::Parabolic | Profile::FromViscosity => Tube::parabolic_share(x),
    };
    #[expect(clippy::cast_precision_loss, reason = "tubes are at most a few thousand")]
    let face = |f: usize| if f == n { 1.0 } else { numerics.spacing.face(f as f64 / n as f64) };
    let shares: Vec<f64> = (0..=n).map(|f| share(face(f))).collect();
    shares.windows(2).map(|pair| mass_flow * (pair[1] - pair[0])).collect()
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::model::numerics::Spacing;
    use approx::assert_relative_eq;

    #[test]
    fn tube_flows_add_up_to_the_feed() {
        for spacing in [Spacing::Uniform, Spacing::EqualArea, Spacing::TowardsWall(1.5), Spacing::BothEnds(2.0)] {
            for profile in [Profile::Plug, Profile::Parabolic, Profile::FromViscosity] {
                let numerics = Numerics { stream_tubes: 40, spacing, relative_tolerance: 1e-6 };
                let flows = tube_flows(&numerics, profile, 0.3);
                assert!(flows.iter().all(|flow| *flow > 0.0));
                assert_relative_eq!(flows.iter().sum::<f64>(), 0.3, max_relative = 1e-14);
            }
        }
    }
}
