//! Either/or: the keys that take each other's place.
//!
//! Where the format joins keys with `|`, a value set by path or beside `like` replaces the one that
//! stood there under another of them. One table serves `override`, `--set`, studies and `like`.

use super::node::Entry;

/// One of several ways to say the same.
struct Choice {
    /// The keys that make this choice when they are set.
    keys: &'static [&'static str],
    /// The keys that go when another choice is made, but make none themselves: elsewhere in the same
    /// block they mean something of their own.
    with: &'static [&'static str],
}

/// Choices of which one holds.
struct Group {
    scope: Scope,
    choices: &'static [Choice],
}

/// The blocks in which keys of these names exclude each other.
#[derive(Clone, Copy, PartialEq)]
enum Scope {
    /// All that have them.
    Everywhere,
    /// Items of a list `layers`: elsewhere `kind` and `coefficient` stand together.
    Layer,
    /// What stands under `transfer`, where a ratio may replace a whole rate law.
    Transfer,
    /// The block `cross_termination`.
    CrossTermination,
}

const fn keys(keys: &'static [&'static str]) -> Choice {
    Choice { keys, with: &[] }
}

const RATE_LAW: &[&str] =
    &["value", "at", "prefactor", "activation_energy", "activation_temperature", "e_fold", "kind"];

const GROUPS: &[Group] = &[
    Group {
        scope: Scope::Everywhere,
        choices: &[keys(&["mass_flow"]), keys(&["volume_flow"]), keys(&["mean_velocity"]), keys(&["share_of_feed"])],
    },
    Group {
        scope: Scope::Everywhere,
        choices: &[keys(&["mass_fractions"]), keys(&["mole_fractions"]), keys(&["concentrations"])],
    },
    Group { scope: Scope::Everywhere, choices: &[keys(&["coefficient"]), keys(&["layers"])] },
    Group { scope: Scope::Everywhere, choices: &[keys(&["formula"]), keys(&["molar_mass"])] },
    Group { scope: Scope::Everywhere, choices: &[keys(&["value", "at"]), keys(&["prefactor"])] },
    Group { scope: Scope::Everywhere, choices: &[keys(&["activation_energy"]), keys(&["activation_temperature"])] },
    Group {
        scope: Scope::Everywhere,
        choices: &[
            keys(&["pressure_drop"]),
            keys(&["loss_coefficient"]),
            Choice { keys: &["loss_ratio"], with: &["length"] }, // a section has a length too
        ],
    },
    Group { scope: Scope::Everywhere, choices: &[keys(&["orders"]), keys(&["rate"])] },
    Group { scope: Scope::Everywhere, choices: &[keys(&["time"]), keys(&["critical_stress"])] },
    Group {
        scope: Scope::Layer,
        choices: &[
            keys(&["thickness", "conductivity"]),
            keys(&["resistance"]),
            keys(&["coefficient"]),
            keys(&["kind"]),
        ],
    },
    Group {
        scope: Scope::Everywhere,
        choices: &[keys(&["total", "combination_share"]), keys(&["by_combination", "by_disproportionation"])],
    },
    Group { scope: Scope::Transfer, choices: &[keys(&["ratio"]), keys(RATE_LAW)] },
    Group {
        scope: Scope::CrossTermination,
        choices: &[keys(&["ratio"]), keys(&["total", "combination_share", "by_combination", "by_disproportionation"])],
    },
];

/// Removes from a block at this path the keys whose place `key` takes.
pub(super) fn make_room(entries: &mut Vec<Entry>, path: &[String], key: &str) {
    for group in GROUPS.iter().filter(|group| group.scope.holds(path)) {
        let Some(made) = group.choices.iter().position(|choice| choice.keys.contains(&key)) else { continue };
        for (_, other) in group.choices.iter().enumerate().filter(|(choice, _)| *choice != made) {
            // What only goes along with a choice goes where that choice stands.
            let stands = entries.iter().any(|entry| other.keys.contains(&entry.key.as_str()));
            entries.retain(|entry| {
                let name = entry.key.as_str();
                !(other.keys.contains(&name) || stands && other.with.contains(&name))
            });
        }
    }
}

impl Scope {
    fn holds(self, path: &[String]) -> bool {
        let step = |back: usize| path.len().checked_sub(back).and_then(|at| path.get(at)).map(String::as_str);
        match self {
            Self::Everywhere => true,
            Self::Layer => step(2) == Some("layers"),
            // Directly by species, or by radical and then species.
            Self::Transfer => step(2) == Some("transfer") || step(3) == Some("transfer"),
            Self::CrossTermination => step(1) == Some("cross_termination"),
        }
    }
}

#[cfg(test)]
mod tests {
    use super::super::document::read_document;
    use super::super::node::{Origin, Value};
    use super::*;

    fn left(block: &str, path: &[&str], key: &str) -> Vec<String> {
        let node = read_document("block", block.as_bytes(), Origin::File).expect("the block parses");
        let Value::Map(mut entries) = node.value else { panic!("a block of keys was typed") };
        let path: Vec<String> = path.iter().map(|step| (*step).to_owned()).collect();
        make_room(&mut entries, &path, key);
        entries.into_iter().map(|entry| entry.key).collect()
    }

    #[test]
    fn a_flow_replaces_any_other_flow() {
        let feed = "{mass_flow: 1 kg/h, temperature: 3 K, volume_flow: 1 L/h}";
        assert_eq!(left(feed, &["feed"], "mean_velocity"), ["temperature"]);
    }

    #[test]
    fn a_prefactor_replaces_value_and_its_temperature() {
        let law = "{value: 1 1/s, at: 80 degC, activation_energy: 5 kJ/mol}";
        assert_eq!(left(law, &["x"], "prefactor"), ["activation_energy"]);
        assert_eq!(left("{prefactor: 1 1/s}", &["x"], "at"), [""; 0]);
        assert_eq!(left("{value: 1 1/s}", &["x"], "at"), ["value"]);
    }

    #[test]
    fn the_length_goes_only_with_the_loss_ratio() {
        assert_eq!(left("{name: m, loss_ratio: 6, length: 1 m}", &["sections", "m"], "pressure_drop"), ["name"]);
        assert_eq!(left("{name: s, length: 1 m}", &["sections", "s"], "pressure_drop"), ["name", "length"]);
        assert_eq!(left("{name: s, loss_coefficient: 1}", &["sections", "s"], "length"), ["name", "loss_coefficient"]);
    }

    #[test]
    fn a_wall_keeps_its_kind_but_a_layer_does_not() {
        let wall = "{kind: jacket, layers: []}";
        assert_eq!(left(wall, &["walls", "jacket"], "coefficient"), ["kind"]);
        let layer = "{name: steel, thickness: 2 mm, conductivity: 16 W/(m K)}";
        assert_eq!(left(layer, &["walls", "jacket", "layers", "steel"], "resistance"), ["name"]);
        assert_eq!(left("{name: film, kind: gnielinski}", &["layers", "film"], "coefficient"), ["name"]);
        assert_eq!(left(layer, &["layers", "steel"], "thickness"), ["name", "thickness", "conductivity"]);
        assert_eq!(left("{conductivity: 1, coefficient: 2}", &["mixture"], "conductivity").len(), 2);
    }

    #[test]
    fn a_ratio_of_transfer_replaces_a_rate_law() {
        let law = "{prefactor: 1 1/s, activation_temperature: 300 K, source: x}";
        assert_eq!(left(law, &["polymerization", "transfer", "toluene"], "ratio"), ["source"]);
        assert_eq!(left("{ratio: 1}", &["polymerization", "transfer", "a", "b"], "value"), [""; 0]);
        assert_eq!(left(law, &["polymerization", "propagation"], "ratio").len(), 3);
    }

    #[test]
    fn a_total_replaces_the_two_ways_of_ending() {
        let ways = "{by_combination: 1, by_disproportionation: 2}";
        assert_eq!(left(ways, &["termination"], "total"), [""; 0]);
        assert_eq!(left(ways, &["termination"], "by_combination").len(), 2);
    }
}
