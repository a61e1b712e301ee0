//! The number at the head of a quantity: decimal, with a point, an exponent, a sign.

use super::dimension::Dimension;
use super::error::{UnitError, quoted};
use std::ops::Range;

/// A number as typed. It becomes a value only with the power of ten of its unit, so that `9 mm`
/// is the number nearest to 0.009.
#[derive(Debug)]
pub(super) struct Number<'a> {
    /// As typed.
    pub(super) text: &'a str,
    pub(super) bytes: Range<usize>,
    mantissa: &'a str,
    exponent: i32,
}

impl Number<'_> {
    /// The number times a power of ten, rounded once.
    pub(super) fn value(&self, decade: i32) -> f64 {
        let exponent = self.exponent.saturating_add(decade);
        format!("{}e{exponent}", self.mantissa).parse().expect("digits with a point and an exponent are a number")
    }

    /// Whether it is zero as typed, however small its exponent.
    pub(super) fn is_zero(&self) -> bool {
        !self.mantissa.contains(|c: char| ('1'..='9').contains(&c))
    }
}

/// Finds the number at the head of the text.
///
/// # Errors
/// Everything that is no plain decimal number, each mistake with its own message.
pub(super) fn scan(text: &str, wanted: Dimension) -> Result<Number<'_>, UnitError> {
    let body = text.trim();
    let start = text.len() - text.trim_start().len();
    if body.is_empty() {
        return Err(UnitError::Empty { wanted, bytes: 0..text.len() });
    }
    let sign = usize::from(body.starts_with(['+', '-']));
    let whole = digits(body, sign);
    let mantissa = match body.get(whole..) {
        Some(rest) if rest.starts_with('.') => digits(body, whole + 1),
        _ => whole,
    };
    if !body[sign..mantissa].contains(|c: char| c.is_ascii_digit()) {
        return Err(not_a_number(body, start, wanted));
    }
    let (end, exponent) = exponent(body, mantissa);
    refuse_what_sticks(body, start, end)?;
    Ok(Number { text: &body[..end], bytes: start..start + end, mantissa: &body[..mantissa], exponent })
}

/// Where the digits that begin at `from` end.
fn digits(text: &str, from: usize) -> usize {
    let rest = text.get(from..).unwrap_or_default();
    from + rest.find(|c: char| !c.is_ascii_digit()).unwrap_or(rest.len())
}

/// Where the exponent ends and what it is; none where no digit follows the `e`.
fn exponent(text: &str, from: usize) -> (usize, i32) {
    let rest = text.get(from..).unwrap_or_default();
    if !rest.starts_with(['e', 'E']) {
        return (from, 0);
    }
    let sign = usize::from(rest[1..].starts_with(['+', '-']));
    let first = from + 1 + sign;
    let end = digits(text, first);
    if end == first {
        return (from, 0);
    }
    let size = text[first..end].parse().unwrap_or(i32::MAX);
    (end, if rest[1..].starts_with('-') { -size } else { size })
}

/// Names the mistake in a text that begins with no digit.
fn not_a_number(body: &str, start: usize, wanted: Dimension) -> UnitError {
    let word = body.split_whitespace().next().unwrap_or(body);
    let bytes = start..start + word.len();
    let bare = word.trim_start_matches(['+', '-']);
    let lower = bare.trim_start_matches('.').to_ascii_lowercase();
    if matches!(lower.as_str(), "nan" | "inf" | "infinity" | "∞") {
        return UnitError::NotFinite { text: quoted(word), bytes };
    }
    // ½, ٣, the minus sign and the dashes that stand for it
    let foreign = |c: char| c.is_numeric() || matches!(c, '−' | '–' | '—' | '＋' | '－');
    if let Some(found) = bare.chars().next().filter(|&c| foreign(c) && !c.is_ascii()) {
        let at = start + word.len() - bare.len();
        return UnitError::ForeignCharacter { found, bytes: at..at + found.len_utf8() };
    }
    if word.starts_with(['+', '-', '.']) {
        return UnitError::MalformedNumber { text: quoted(word), bytes };
    }
    UnitError::NumberMissing { text: quoted(body), wanted, bytes }
}

/// A number ends at a blank or at the end; a unit that touches it is told later, when it is known
/// to be one.
fn refuse_what_sticks(body: &str, start: usize, end: usize) -> Result<(), UnitError> {
    let rest = &body[end..];
    let Some(next) = rest.chars().next() else {
        return Ok(());
    };
    let word = body.split_whitespace().next().unwrap_or(body);
    let bytes = start..start + word.len();
    if next.is_whitespace() {
        return in_groups(body, start, end);
    }
    if next.is_numeric() {
        let at = start + end;
        return Err(UnitError::ForeignCharacter { found: next, bytes: at..at + next.len_utf8() });
    }
    let malformed = UnitError::MalformedNumber { text: quoted(word), bytes: bytes.clone() };
    let second = rest.chars().nth(1);
    match next {
        'x' | 'X' | 'b' | 'B' | 'o' | 'O'
            if body[..end].ends_with('0') && second.is_some_and(|c| c.is_ascii_hexdigit()) =>
        {
            let decimal = other_base(word);
            Err(UnitError::NotDecimal { text: quoted(word), decimal, bytes })
        }
        ',' | '_' | '\'' | '’' => Err(separated(body, start).unwrap_or(malformed)),
        '.' => match separated(body, start) {
            Some(error) if word.contains(',') => Err(error),
            _ => Err(malformed),
        },
        'e' | 'E' if matches!(second, None | Some(' ' | '+' | '-')) => Err(malformed),
        'd' | 'D' if second.is_some_and(|c| c.is_ascii_digit() || c == '-' || c == '+') => Err(malformed),
        '*' | '×' | '^' | '+' | '-' | '·' => Err(malformed),
        '/' if second.is_some_and(|c| c.is_ascii_digit()) => Err(malformed),
        _ => Ok(()),
    }
}

/// `1 500`: what follows the blank may be the rest of the number.
fn in_groups(body: &str, start: usize, end: usize) -> Result<(), UnitError> {
    let next = body[end..].trim_start();
    let group = digits(next, 0);
    let after = next[group..].chars().next();
    let unit_one = next[group..].trim_start().starts_with('/') && &next[..group] == "1";
    if group == 0 || unit_one {
        return Ok(());
    }
    let until = body.len() - next.len() + group;
    let text = quoted(&body[..until]);
    let bytes = start..start + until;
    let whole = body[..end].trim_start_matches(['+', '-']).chars().all(|c| c.is_ascii_digit());
    let ends = after.is_none_or(|c| c.is_whitespace() || c == '.');
    if whole && group == 3 && ends {
        let joined = format!("{}{}", &body[..end], &next[..group]);
        return Err(UnitError::ThousandsSeparator { text, joined, bytes });
    }
    Err(UnitError::SecondNumber { text, bytes })
}

/// A comma, an underscore or an apostrophe between digits, with the number that was meant.
fn separated(body: &str, start: usize) -> Option<UnitError> {
    let in_number = |c: char| c.is_ascii_digit() || matches!(c, '.' | ',' | '_' | '\'' | '’');
    let sign = usize::from(body.starts_with(['+', '-']));
    let end = body[sign..].find(|c| !in_number(c)).map_or(body.len(), |at| sign + at);
    let word = body[..end].trim_end_matches([',', '.']);
    let bytes = start..start + word.len();
    let text = quoted(word);
    let plain: String = word.chars().filter(|c| !matches!(c, '_' | '\'' | '’')).collect();
    let commas = plain.matches(',').count();
    let without = plain.replace(',', "");
    if commas == 1 && plain.len() == word.len() && !plain.contains('.') {
        let pointed = plain.replace(',', ".");
        let three = plain.find(',').is_some_and(|at| plain.len() - at == 4);
        let joined = three.then_some(without);
        return Some(UnitError::DecimalComma { text, pointed, joined, bytes });
    }
    // 1.234,5: the comma is the point
    let joined = match (plain.find('.'), plain.find(',')) {
        (Some(point), Some(comma)) if point < comma && commas == 1 => plain.replace('.', "").replace(',', "."),
        _ => without,
    };
    (joined != word && joined.parse::<f64>().is_ok()).then_some(UnitError::ThousandsSeparator { text, joined, bytes })
}

/// What a number of another base is in decimal digits.
fn other_base(word: &str) -> Option<String> {
    let (sign, bare) = match word.strip_prefix('-') {
        Some(bare) => ("-", bare),
        None => ("", word.strip_prefix('+').unwrap_or(word)),
    };
    let radix = match bare.get(..2)? {
        "0x" | "0X" => 16,
        "0o" | "0O" => 8,
        "0b" | "0B" => 2,
        _ => return None,
    };
    let value = u64::from_str_radix(bare.get(2..)?, radix).ok()?;
    Some(format!("{sign}{value}"))
}

#[cfg(test)]
mod tests {
    use super::super::read;
    use super::*;

    #[test]
    fn numbers_are_read_as_engineers_write_them() {
        for (text, value) in [
            ("1.2e-3", 1.2e-3),
            (".5", 0.5),
            ("5.", 5.0),
            ("+3", 3.0),
            ("-4", -4.0),
            ("  7  ", 7.0),
            ("1E3", 1000.0),
            ("5.e2", 500.0),
            ("0", 0.0),
            ("0e999999999999", 0.0),
            ("007", 7.0),
        ] {
            assert_eq!(read(text, Dimension::RATIO), Ok(value), "{text}");
        }
    }

    #[test]
    fn powers_of_ten_are_rounded_once() {
        assert_eq!(read("9 mm", Dimension::LENGTH), Ok(0.009));
        assert_eq!(read("1.06 g/cm3", Dimension::DENSITY), Ok(1060.0));
        assert_eq!(read("300 ppm", Dimension::RATIO), Ok(3e-4));
        assert_eq!(read("0.05 %", Dimension::RATIO), Ok(5e-4));
        assert_eq!(read("104.15 g/mol", Dimension::MOLAR_MASS), Ok(0.104_15));
    }

    #[test]
    fn grouped_digits_show_the_number_that_was_meant() {
        for (text, joined) in [
            ("1_000", "1000"),
            ("1'000'000", "1000000"),
            ("1,000,000", "1000000"),
            ("1,234.5", "1234.5"),
            ("1.234,5", "1234.5"),
            ("12 500 Pa", "12500"),
            ("-1 500", "-1500"),
        ] {
            match read(text, Dimension::PRESSURE) {
                Err(UnitError::ThousandsSeparator { joined: said, .. }) => assert_eq!(said, joined),
                other => panic!("{text}: {other:?}"),
            }
        }
    }

    #[test]
    fn other_scripts_are_pointed_at() {
        for (text, found, bytes) in
            [("５ m", '５', 0..3), ("−5 m", '−', 0..3), ("5½ in", '½', 1..3), ("-٣ m", '٣', 1..3)]
        {
            let error = UnitError::ForeignCharacter { found, bytes };
            assert_eq!(read(text, Dimension::LENGTH), Err(error));
        }
    }

    #[test]
    fn other_bases_and_no_numbers_have_their_own_messages() {
        let not_decimal = |text| matches!(read(text, Dimension::RATIO), Err(UnitError::NotDecimal { .. }));
        assert!(not_decimal("0x1f") && not_decimal("0b101") && not_decimal("0o17"));
        for text in ["nan", ".nan", "NaN", "inf", "-inf", "+Infinity", ".inf", "-.INF"] {
            let read = read(text, Dimension::RATIO);
            assert!(matches!(read, Err(UnitError::NotFinite { .. })), "{text}: {read:?}");
        }
        for text in ["1e", "1e+", "1.2.3", "--4", "5..", "1e5.2", "1/2", "10-20", "1d5", "3*10^4", "."] {
            let read = read(text, Dimension::RATIO);
            assert!(matches!(read, Err(UnitError::MalformedNumber { .. })), "{text}: {read:?}");
        }
    }
}
