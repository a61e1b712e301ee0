//! The nearest known word to one that is not known.

use strsim::damerau_levenshtein;

/// Longer words are no typing mistakes, and comparing them costs the product of their lengths.
const LONGEST: usize = 64;

/// Shorter beginnings fit too many words to be a proposal.
const SHORTEST_BEGINNING: usize = 3;

/// The known word that `word` most likely stands for: the same but for case and joining signs, else
/// the one with the fewest slips, else the shortest that begins with it.
#[must_use]
pub fn nearest<'a>(word: &str, known: impl IntoIterator<Item = &'a str>) -> Option<&'a str> {
    let word = plain(word);
    let letters = word.chars().count();
    if letters == 0 || letters > LONGEST {
        return None;
    }
    let allowed = slips_allowed(letters);
    let mut fewest: Option<(usize, &'a str)> = None;
    let mut begins: Option<&'a str> = None;
    for candidate in known {
        let other = plain(candidate);
        if other == word {
            return Some(candidate);
        }
        if letters >= SHORTEST_BEGINNING && other.starts_with(&word) && begins.is_none_or(|b| candidate.len() < b.len())
        {
            begins = Some(candidate);
        }
        if other.chars().count().abs_diff(letters) > allowed {
            continue;
        }
        let slips = damerau_levenshtein(&word, &other);
        if slips <= allowed && fewest.is_none_or(|(least, _)| slips < least) {
            fewest = Some((slips, candidate));
        }
    }
    fewest.map(|(_, candidate)| candidate).or(begins)
}

/// Slips that may lie between a word of so many letters and the one meant; fewer than its letters, so
/// that something of it is left.
fn slips_allowed(letters: usize) -> usize {
    match letters {
        0 | 1 => 0,
        2..=4 => 1,
        5..=8 => 2,
        _ => letters / 3,
    }
}

/// Small letters, and `_` for the signs that join words elsewhere.
fn plain(word: &str) -> String {
    word.trim().to_lowercase().replace(['-', ' '], "_")
}

#[cfg(test)]
mod tests {
    use super::*;

    const KEYS: [&str; 6] = ["temperature", "inner_diameter", "tube", "annulus", "slit", "a"];

    #[test]
    fn slips_case_and_joining_signs_find_the_word() {
        assert_eq!(nearest("anulus", KEYS), Some("annulus"));
        assert_eq!(nearest("Inner-Diameter", KEYS), Some("inner_diameter"));
        assert_eq!(nearest("tueb", KEYS), Some("tube"));
        assert_eq!(nearest("temprature", KEYS), Some("temperature"));
    }

    #[test]
    fn a_beginning_finds_the_word_that_goes_on() {
        assert_eq!(nearest("temp", KEYS), Some("temperature"));
        assert_eq!(nearest("te", KEYS), None);
    }

    #[test]
    fn short_words_match_only_what_is_close() {
        assert_eq!(nearest("b", KEYS), None);
        assert_eq!(nearest("pipe", KEYS), None);
        assert_eq!(nearest("slot", KEYS), Some("slit"));
    }

    #[test]
    fn fewest_slips_win_over_order() {
        assert_eq!(nearest("zone_3", ["zone_11", "zone_1", "zone_33"]), Some("zone_1"));
    }

    #[test]
    fn words_beyond_all_keys_cost_nothing() {
        assert_eq!(nearest(&"x".repeat(1_000_000), KEYS), None);
        assert_eq!(nearest("", KEYS), None);
    }
}
