//! What a text that is no unit was probably meant to be.

use super::error::{UnitError, quoted};
use super::expression::Parser;
use super::nearest::{choices, nearest};
use std::ops::Range;

impl Parser<'_> {
    pub(super) fn two_readings(
        &self,
        above: Range<usize>,
        slash: usize,
        below: Range<usize>,
        more: &[Range<usize>],
    ) -> UnitError {
        let piece = |range: Range<usize>| self.text[range].trim();
        let more: Vec<&str> = more.iter().map(|range| piece(range.clone())).collect();
        let more = more.join(" ");
        let head = &self.text[self.start..above.start];
        let tail = closing_what_is_open(head, self.rest());
        let first = piece(above.clone());
        let middle = piece(above.end..slash);
        let last = piece(below);
        let raised = if first == "1" { more.clone() } else { format!("{first} {more}") };
        UnitError::AmbiguousQuotient {
            unit: quoted(&self.text[self.start..]),
            below: quoted(&format!("{head}{first}{middle}/({last} {more}){tail}")),
            above: quoted(&format!("{head}{raised}{middle}/{last}{tail}")),
            bytes: above.start..self.at,
        }
    }

    pub(super) fn unknown(&self, bytes: Range<usize>) -> UnitError {
        let symbol = &self.text[bytes.clone()];
        if let Some(choices) = choices(symbol) {
            return UnitError::AmbiguousUnit { symbol: quoted(symbol), choices, bytes };
        }
        let corrected = nearest(symbol).map(|unit| self.corrected(&bytes, &unit));
        UnitError::UnknownUnit { symbol: quoted(symbol), corrected, bytes }
    }

    /// The whole text with the better unit in place, in parentheses where it must stay together.
    fn corrected(&self, bytes: &Range<usize>, unit: &str) -> String {
        let (before, after) = (&self.text[..bytes.start], &self.text[bytes.end..]);
        // `deg C` was one symbol to its writer
        let before = match before.trim_end().strip_suffix("deg").or_else(|| before.trim_end().strip_suffix('°')) {
            Some(degree) if unit.starts_with("deg") => degree,
            _ => before,
        };
        let raised = after.starts_with(|c: char| c.is_numeric() || matches!(c, '^' | '-' | '⁻'));
        let compound = unit.contains(['/', ' ']);
        let inside = compound && (raised || before.trim_end().ends_with('/'));
        let unit = if inside { format!("({unit})") } else { unit.to_owned() };
        quoted(&format!("{before}{unit}{after}"))
    }

    pub(super) fn not_separated(&self) -> UnitError {
        let (before, after) = (&self.text[self.start..self.at], &self.text[self.at..]);
        let spaced = quoted(&format!("{before} {after}"));
        let length = after.chars().next().map_or(0, char::len_utf8);
        UnitError::NotSeparated { spaced, bytes: self.at..self.at + length }
    }

    pub(super) fn unit_expected(&self, found: Option<char>) -> UnitError {
        let place = match found {
            None => "at the end".to_owned(),
            Some(found) => format!("before `{}`", quoted(&found.to_string())),
        };
        let length = found.map_or(0, char::len_utf8);
        UnitError::UnitExpected { place, bytes: self.at..self.at + length }
    }

    pub(super) fn left_over(&self, found: char) -> UnitError {
        let bytes = self.at..self.at + found.len_utf8();
        match found {
            ')' => UnitError::ParenthesisNotOpened { bytes },
            '0'..='9' => self.not_separated(),
            _ if found.is_control() => UnitError::UnexpectedCharacter { found: char::REPLACEMENT_CHARACTER, bytes },
            _ => UnitError::UnexpectedCharacter { found, bytes },
        }
    }
}

/// What follows, without parentheses that close what neither it nor what stands before opens.
fn closing_what_is_open(before: &str, after: &str) -> String {
    let mut open = before.matches('(').count().saturating_sub(before.matches(')').count());
    let mut kept = String::new();
    for c in after.chars() {
        match c {
            '(' => open += 1,
            ')' if open == 0 => continue,
            ')' => open -= 1,
            _ => {}
        }
        kept.push(c);
    }
    kept
}

#[cfg(test)]
mod tests {
    use super::super::dimension::Dimension;
    use super::super::expression::parse;
    use super::super::read;
    use super::*;

    #[test]
    fn both_readings_of_a_quotient_can_be_read() {
        for (unit, below, above) in [
            ("W/m2 K", "W/(m2 K)", "W K/m2"),
            ("1/s K", "1/(s K)", "K/s"),
            ("J/kg.K", "J/(kg K)", "J K/kg"),
            ("J/kg/m2 K", "J/kg/(m2 K)", "J K/kg/m2"),
            ("kg/(W/m2 K)", "kg/(W/(m2 K))", "kg/(W K/m2)"),
            ("J/mol m s/kg", "J/(mol m s)/kg", "J m s/mol/kg"),
            ("W/m K)", "W/(m K)", "W K/m"),
        ] {
            let error = read(&format!("1 {unit}"), Dimension::RATIO).expect_err(unit);
            let UnitError::AmbiguousQuotient { below: first, above: second, .. } = &error else {
                panic!("{unit}: {error:?}");
            };
            assert_eq!((first.as_str(), second.as_str()), (below, above));
            assert!(parse(first, 0).is_ok() && parse(second, 0).is_ok(), "{unit}");
        }
    }

    #[test]
    fn corrections_keep_what_belongs_together() {
        for (text, better) in [
            ("3 kg/hr", "3 kg/h"),
            ("3 mol/Nm", "3 mol/(N m)"),
            ("3 1/M", "3 1/(mol/L)"),
            ("3 J/(g deg C)", "3 J/(g degC)"),
            ("85 deg F", "85 degF"),
            ("3 kg/(sec m2)", "3 kg/(s m2)"),
        ] {
            let error = parse(text, 2).expect_err(text);
            assert_eq!(error.help(), format!("do you mean `{better}`?"));
        }
    }
}
