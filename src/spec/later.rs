//! Words of the format that this version refuses, so that a message can say so.

/// Kinds and words of a later version.
const LATER: [&str; 18] = [
    "mixed",
    "power_law",
    "slit",
    "annulus",
    "wall_flux",
    "logarithmic",
    "falling_with_polymer",
    "polymer_melt",
    "williams_landel_ferry",
    "cross",
    "carreau_yasuda",
    "free_volume",
    "full",
    "copolymerization",
    "step_growth",
    "living",
    "static_mixer",
    "side_feed",
];

/// Whether the format knows a word that this version does not.
#[must_use]
pub fn is_later(word: &str) -> bool {
    LATER.contains(&word)
}
