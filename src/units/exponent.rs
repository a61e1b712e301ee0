//! The exponent that follows a symbol: digits, a sign, a point, or raised digits.

/// Length of the exponent at the head of a text, and the same in plain digits.
pub(super) fn exponent_text(text: &str) -> (usize, String) {
    let mut plain = String::new();
    let mut length = 0;
    let mut rest = text.chars().peekable();
    while let Some(c) = rest.next() {
        let digit = match c {
            '0'..='9' => c,
            '-' | '⁻' | '−' if plain.is_empty() => '-',
            // a point is part of the exponent only between digits: `m2.s` is a product
            '.' if plain.ends_with(|c: char| c.is_ascii_digit())
                && !plain.contains('.')
                && rest.peek().is_some_and(char::is_ascii_digit) =>
            {
                c
            }
            _ => match superscript(c) {
                Some(digit) => digit,
                None => break,
            },
        };
        plain.push(digit);
        length += c.len_utf8();
    }
    (length, plain)
}

fn superscript(c: char) -> Option<char> {
    let digits = ['⁰', '¹', '²', '³', '⁴', '⁵', '⁶', '⁷', '⁸', '⁹'];
    ('0'..='9').zip(digits).find(|&(_, raised)| raised == c).map(|(digit, _)| digit)
}

#[cfg(test)]
mod tests {
    use super::super::dimension::Dimension;
    use super::super::error::UnitError;
    use super::super::expression::parse;
    use super::super::read;

    #[test]
    fn exponents_may_be_decimal_and_negative() {
        let wanted = Dimension::rate_constant(1.5);
        for text in ["2 m1.5/(mol0.5 s)", "2 m^1.5 mol^-0.5 s^-1", "2 m1.5.mol-0.5.s-1"] {
            assert_eq!(read(text, wanted), Ok(2.0), "{text}");
        }
        let litres = read("2 L0.5/(mol0.5 s)", wanted).expect("a rate constant of order 1.5");
        assert!((litres / (2.0 * 1e-3_f64.sqrt()) - 1.0).abs() < 1e-15);
    }

    #[test]
    fn exponents_out_of_reach_are_refused() {
        for text in ["m^", "m-", "m^(2)", "m99", "m^-", "m^2.x", "m-s"] {
            let error = parse(text, 0).expect_err(text);
            let bad = matches!(
                error,
                UnitError::BadExponent { .. } | UnitError::UnitExpected { .. } | UnitError::UnknownUnit { .. }
            );
            assert!(bad, "{text}: {error:?}");
        }
    }
}
