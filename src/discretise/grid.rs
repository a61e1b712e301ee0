//! The stream tubes: fixed mass flows between faces set once at the inlet (model page, §2).

use crate::model::flow::Profile;
use crate::model::numerics::Numerics;

/// ṁᵢ of each stream tube: the exact flow of the inlet's uniform state between its faces, in kg/s.
///
/// The faces x = r/R come from the spacing; the share of the flow between the axis and x is x² for a flat
/// profile and 2x² − x⁴ for Poiseuille's, which is also that of `from_viscosity` with a uniform viscosity.
///
/// Between two faces a < b the shares are (x_b² − x_a²) and (x_b² − x_a²)(2 − x_a² − x_b²); both are taken from
/// 1 − x, so that thin tubes at the wall keep all their digits.
#[must_use]
pub fn tube_flows(numerics: &Numerics, profile: Profile, mass_flow: f64) -> Vec<f64> {
    let n = numerics.stream_tubes;
    #[expect(clippy::cast_precision_loss, reason = "tubes are at most a few thousand")]
    let from_wall = |f: usize| numerics.spacing.from_wall(f as f64 / n as f64);
    let share = |f: usize| {
        let (a, b) = (from_wall(f), from_wall(f + 1)); // 1 − x, falling towards the wall
        let area = (a - b) * (2.0 - a - b);
        match profile {
            Profile::Plug => area,
            Profile::Parabolic | Profile::FromViscosity => area * (a * (2.0 - a) + b * (2.0 - b)),
        }
    };
    (0..n).map(|f| mass_flow * share(f)).collect()
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

    #[test]
    fn thin_tubes_at_the_wall_keep_their_digits() {
        let numerics = Numerics { stream_tubes: 1000, spacing: Spacing::TowardsWall(3.0), relative_tolerance: 1e-6 };
        let last = tube_flows(&numerics, Profile::Parabolic, 1.0)[999];
        // the last tube lies between 1 − x = 1e-9 and the wall: its share is (1 − y)² = (2e-9 − 1e-18)²
        assert_relative_eq!(last, 4e-18, max_relative = 1e-8);
    }
}
