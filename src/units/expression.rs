//! The unit behind the number: symbols, exponents, products, quotients, parentheses.

use super::dimension::Dimension;
use super::error::{UnitError, quoted};
use super::exponent::exponent_text;
use super::size::Size;
use super::table::{Kind, Unit, find};
use std::ops::Range;

/// Parentheses within parentheses.
const DEEPEST: usize = 8;
/// Size of an exponent; m6/(mol2 s) is the largest in use, fourth powers of a diameter occur.
const LARGEST_EXPONENT: f64 = 20.0;
/// A power of ten this close to a whole number is one.
const WHOLE: f64 = 1e-9;

/// A unit as a whole: its size is numerator/denominator × 10^decade SI units.
#[derive(Clone, Copy, Debug)]
pub(super) struct Expression {
    pub(super) dimension: Dimension,
    pub(super) numerator: f64,
    pub(super) denominator: f64,
    pub(super) decade: i32,
    /// The unit, where it is a single one to the power 1.
    pub(super) alone: Option<&'static Unit>,
    /// Whether a degC or degF is part of it.
    pub(super) has_point: bool,
}

/// Reads the unit that stands from `start` to the end of the text.
///
/// # Errors
/// Everything that is no unit; bytes count in the whole text.
pub(super) fn parse(text: &str, start: usize) -> Result<Expression, UnitError> {
    let end = text.trim_end().len();
    let mut parser = Parser { text: &text[..end], start, at: start, single: None, factors: 0, has_point: false };
    let size = parser.quotient(0)?;
    if let Some(found) = parser.next() {
        return Err(parser.left_over(found));
    }
    let alone = parser.alone();
    let whole = size.decade.round();
    let rest = if (size.decade - whole).abs() < WHOLE { 0.0 } else { size.decade - whole };
    Ok(Expression {
        dimension: size.dimension,
        numerator: size.numerator * 10_f64.powf(rest),
        denominator: size.denominator,
        decade: nearest_integer(whole),
        alone,
        has_point: parser.has_point,
    })
}

#[expect(clippy::cast_possible_truncation, reason = "a text of 200 bytes cannot leave the range")]
fn nearest_integer(whole: f64) -> i32 {
    whole as i32
}

/// A place in a text, and what was seen up to there.
pub(super) struct Parser<'a> {
    pub(super) text: &'a str,
    /// Where the unit begins.
    pub(super) start: usize,
    pub(super) at: usize,
    /// The last unit seen and its exponent.
    single: Option<(&'static Unit, f64)>,
    factors: usize,
    has_point: bool,
}

impl<'a> Parser<'a> {
    pub(super) fn rest(&self) -> &'a str {
        &self.text[self.at..]
    }

    fn next(&self) -> Option<char> {
        self.rest().chars().next()
    }

    fn skip_blanks(&mut self) {
        self.at = self.text.len() - self.rest().trim_start().len();
    }

    /// Steps over the character if it is the next one but for blanks.
    fn take(&mut self, wanted: &[char]) -> bool {
        let rest = self.rest().trim_start();
        match rest.chars().next() {
            Some(found) if wanted.contains(&found) => {
                self.at = self.text.len() - rest.len() + found.len_utf8();
                true
            }
            _ => false,
        }
    }

    /// product { "/" factor }
    fn quotient(&mut self, depth: usize) -> Result<Size, UnitError> {
        self.skip_blanks();
        let start = self.at;
        let mut size = if self.is_one() { self.one() } else { self.product(depth)? };
        let first_slash = self.at;
        loop {
            let slash = self.at;
            if !self.take(&['/']) {
                break;
            }
            self.skip_blanks();
            let below = self.at;
            size = size.times(self.factor(depth)?.inverse());
            let below = below..self.at;
            if let Some(more) = self.more_factors(depth)? {
                return Err(self.two_readings(start..first_slash, slash, below, &more));
            }
        }
        self.skip_blanks();
        Ok(size)
    }

    /// The 1 of `1/s`.
    fn is_one(&self) -> bool {
        self.rest().strip_prefix('1').is_some_and(|rest| rest.trim_start().starts_with('/'))
    }

    fn one(&mut self) -> Size {
        self.at += 1;
        self.factors += 1; // so that `1/degC` is no lone degree
        Size::ONE
    }

    /// factor { sign factor }
    fn product(&mut self, depth: usize) -> Result<Size, UnitError> {
        let mut size = self.factor(depth)?;
        while self.another() {
            size = size.times(self.factor(depth)?);
        }
        Ok(size)
    }

    /// Steps over a sign of multiplication, or over blanks before a unit.
    fn another(&mut self) -> bool {
        if self.take(&['.', '·', '⋅', '*']) {
            self.skip_blanks();
            return true;
        }
        let rest = self.rest().trim_start();
        let begins = rest.len() < self.rest().len() && rest.chars().next().is_some_and(|c| in_symbol(c) || c == '(');
        if begins {
            self.skip_blanks();
        }
        begins
    }

    /// Factors behind the one under a slash, which could belong above or below it.
    fn more_factors(&mut self, depth: usize) -> Result<Option<Vec<Range<usize>>>, UnitError> {
        let mut more = Vec::new();
        while self.another() {
            let from = self.at;
            self.factor(depth)?;
            more.push(from..self.at);
        }
        Ok((!more.is_empty()).then_some(more))
    }

    /// A symbol with its exponent, or a parenthesis.
    fn factor(&mut self, depth: usize) -> Result<Size, UnitError> {
        let size = match self.next() {
            Some('(') => self.parenthesis(depth)?,
            Some(c) if in_symbol(c) => self.symbol()?,
            other => return Err(self.unit_expected(other)),
        };
        match self.next() {
            Some(c) if in_symbol(c) || c == '(' || c.is_numeric() => Err(self.not_separated()),
            _ => Ok(size),
        }
    }

    fn parenthesis(&mut self, depth: usize) -> Result<Size, UnitError> {
        let open = self.at;
        if depth == DEEPEST {
            return Err(UnitError::TooDeep { deepest: DEEPEST, bytes: open..self.text.len() });
        }
        self.at += 1;
        let size = self.quotient(depth + 1)?;
        match self.next() {
            Some(')') => {
                self.at += 1;
                Ok(size)
            }
            None => {
                let closed = format!("{})", quoted(&self.text[self.start..]));
                Err(UnitError::ParenthesisNotClosed { closed, bytes: open..open + 1 })
            }
            Some(found) => Err(self.left_over(found)),
        }
    }

    fn symbol(&mut self) -> Result<Size, UnitError> {
        let from = self.at;
        let length = self.rest().find(|c| !in_symbol(c)).unwrap_or(self.rest().len());
        self.at += length;
        let bytes = from..self.at;
        let symbol = &self.text[bytes.clone()];
        let Some((unit, decade)) = find(symbol) else {
            return Err(self.unknown(bytes));
        };
        let exponent = self.exponent(from)?;
        self.single = Some((unit, exponent));
        self.factors += 1;
        self.has_point |= matches!(unit.kind, Kind::Point { .. });
        if matches!(unit.kind, Kind::Gauge | Kind::Ratio) {
            self.alone_so_far(symbol, exponent, &bytes)?;
        }
        let size = Size {
            dimension: unit.dimension.plain(),
            numerator: unit.numerator,
            denominator: unit.denominator,
            decade: f64::from(unit.decade + decade),
        };
        Ok(size.to_power(exponent))
    }

    /// Units with an offset and parts of one have no meaning in a product.
    fn alone_so_far(&self, symbol: &str, exponent: f64, bytes: &Range<usize>) -> Result<(), UnitError> {
        let first = self.text[self.start..bytes.start].trim().is_empty();
        let last = self.rest().trim().is_empty();
        if first && last && is_one(exponent) {
            return Ok(());
        }
        Err(UnitError::StandsAlone { symbol: quoted(symbol), bytes: bytes.clone() })
    }

    /// The exponent that follows a symbol directly; 1 where there is none.
    fn exponent(&mut self, symbol: usize) -> Result<f64, UnitError> {
        let caret = self.rest().starts_with('^');
        let digits = &self.rest()[usize::from(caret)..];
        let (length, plain) = exponent_text(digits);
        if length == 0 && !caret && !digits.starts_with('-') {
            return Ok(1.0);
        }
        self.at += usize::from(caret) + length;
        match plain.parse::<f64>() {
            Ok(exponent) if exponent.abs() <= LARGEST_EXPONENT => Ok(exponent),
            _ => Err(UnitError::BadExponent { text: quoted(&self.text[symbol..self.at]), bytes: symbol..self.at }),
        }
    }

    fn alone(&self) -> Option<&'static Unit> {
        match self.single {
            Some((unit, exponent)) if self.factors == 1 && is_one(exponent) => Some(unit),
            _ => None,
        }
    }
}

fn is_one(exponent: f64) -> bool {
    (exponent - 1.0).abs() < WHOLE
}

fn in_symbol(c: char) -> bool {
    c.is_alphabetic() || matches!(c, '_' | '%' | '‰' | '°' | '℃' | '℉' | '#' | '"')
}

#[cfg(test)]
mod tests {
    use super::super::read;
    use super::*;

    #[test]
    fn products_may_be_written_with_any_sign() {
        for text in ["2 Pa s", "2 Pa.s", "2 Pa·s", "2 Pa⋅s", "2 Pa*s", "2 Pa . s", "2 s Pa", "2 (Pa s)"] {
            assert_eq!(read(text, Dimension::VISCOSITY), Ok(2.0), "{text}");
        }
        assert_eq!(read("12 kPa.s", Dimension::VISCOSITY), Ok(12_000.0));
    }

    #[test]
    fn quotients_may_be_written_in_several_ways() {
        for text in [
            "300 W/(m2 K)",
            "300 W/m2/K",
            "300 W / ( m2 K )",
            "300 W m-2 K-1",
            "300 W/(m²·K)",
            "300 W m⁻² K⁻¹",
            "300 W/(m^2 degC)",
            "300 W/(m2 °C)",
            "300 (W/m2)/K",
            "300 1/(m2 K/W)",
            "300 kg s-3 K^-1",
            "300 J/(s m2 delta_degC)",
        ] {
            assert_eq!(read(text, Dimension::HEAT_TRANSFER_COEFFICIENT), Ok(300.0), "{text}");
        }
        assert_eq!(read("2 1/s", Dimension::FREQUENCY), Ok(2.0));
        assert_eq!(read("2 1 / h", Dimension::FREQUENCY), Ok(2.0 / 3600.0));
        assert_eq!(read("2 s-1", Dimension::FREQUENCY), Ok(2.0));
    }

    #[test]
    fn micro_has_three_letters() {
        for text in ["5 um", "5 µm", "5 μm"] {
            assert_eq!(read(text, Dimension::LENGTH), Ok(5e-6), "{text}");
        }
    }

    #[test]
    fn eight_parentheses_are_read_and_nine_refused() {
        let nested = |depth| format!("1 {}m{}", "(".repeat(depth), ")".repeat(depth));
        assert_eq!(read(&nested(8), Dimension::LENGTH), Ok(1.0));
        let error = read(&nested(9), Dimension::LENGTH);
        assert!(matches!(error, Err(UnitError::TooDeep { .. })), "{error:?}");
    }
}
