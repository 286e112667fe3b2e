//! Grammar of a unit: symbols, whole and half powers, products (`.`, `*`, `·`, a space) and quotients (`/`), brackets.
//!
//! `m3/m2/h`, `m³/(m² h)`, `lb/ft3`, `1/m`, `Pa^0.5`, `N.m^-1`, `(ft/s)(lb/ft3)^0.5`. A quotient takes the one factor
//! behind it, as is usual in print: `m3/h/m` is m3 over h and over m.

use super::unit_table::{Dimension, REFUSED, UNITS, UnitRow, unit};
use std::ops::Range;

/// A unit as worked out from its text.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(crate) struct Unit {
    /// SI value of one of it.
    pub(crate) si: f64,
    /// Dimension.
    pub(crate) dimension: Dimension,
    /// Added to the number before the factor; only for a temperature that stands alone.
    pub(crate) offset: f64,
}

/// Why a text is no unit.
#[derive(Clone, Debug, PartialEq, Eq)]
pub(crate) struct UnitError {
    /// Bytes of the text that are meant.
    pub(crate) span: Range<usize>,
    /// What is wrong.
    pub(crate) message: String,
    /// What would be right.
    pub(crate) help: Option<String>,
}

/// Brackets within brackets are followed this far.
const DEPTH: usize = 8;

/// Works a unit out. The text must not be blank.
pub(crate) fn parse_unit(text: &str) -> Result<Unit, UnitError> {
    parse_unit_of(text, None)
}

/// The same, where the dimension that is wanted is known: a misspelt unit is then taken for one of that dimension.
pub(crate) fn parse_unit_of(text: &str, wanted: Option<Dimension>) -> Result<Unit, UnitError> {
    let mut parser = Parser { text, at: 0, affine: None, factors: 0, wanted };
    let unit = parser.expression(0)?;
    parser.skip_space();
    if parser.at < text.len() {
        let message = match parser.peek() {
            Some(')') => "this bracket was never opened".to_owned(),
            Some(c) => format!("'{c}' cannot stand in a unit"),
            None => "the unit ends here".to_owned(),
        };
        return Err(parser.error(parser.at..text.len(), message, None));
    }
    match parser.affine {
        Some(row) if parser.factors == 1 && unit.dimension == row.dimension && unit.si == row.si => {
            Ok(Unit { offset: row.offset, ..unit })
        }
        Some(row) => {
            let message = format!("\"{}\" cannot be part of a larger unit", row.symbol);
            Err(parser.error(0..text.len(), message, Some("a temperature stands alone; a difference is in K".into())))
        }
        None => Ok(unit),
    }
}

struct Parser<'a> {
    text: &'a str,
    at: usize,
    affine: Option<&'static UnitRow>,
    factors: usize,
    wanted: Option<Dimension>,
}

impl Parser<'_> {
    fn rest(&self) -> &str {
        self.text.get(self.at..).unwrap_or_default()
    }

    fn peek(&self) -> Option<char> {
        self.rest().chars().next()
    }

    fn take(&mut self, wanted: char) -> bool {
        let found = self.peek() == Some(wanted);
        if found {
            self.at += wanted.len_utf8();
        }
        found
    }

    fn skip_space(&mut self) -> bool {
        let before = self.at;
        while let Some(c) = self.peek().filter(|c| c.is_whitespace()) {
            self.at += c.len_utf8();
        }
        self.at > before
    }

    fn error(&self, span: Range<usize>, message: String, help: Option<String>) -> UnitError {
        UnitError { span, message, help }
    }

    fn expression(&mut self, depth: usize) -> Result<Unit, UnitError> {
        self.skip_space();
        let mut unit = self.factor(depth)?;
        loop {
            let spaced = self.skip_space();
            let product = ['.', '*', '·', '⋅', '×'].into_iter().any(|sign| self.take(sign))
                || self.peek() == Some('(')
                || (spaced && self.peek().is_some_and(starts_symbol));
            let halves = if product {
                2
            } else if self.take('/') {
                -2
            } else {
                return Ok(unit);
            };
            self.skip_space();
            let from = self.at;
            let next = self.factor(depth)?;
            unit = self.multiply(unit, next, halves, from)?;
        }
    }

    /// One symbol or bracket with its power.
    fn factor(&mut self, depth: usize) -> Result<Unit, UnitError> {
        self.factors += 1;
        let from = self.at;
        let base = if self.take('(') {
            if depth >= DEPTH {
                return Err(self.error(from..self.text.len(), "too many brackets".to_owned(), None));
            }
            let inner = self.expression(depth + 1)?;
            self.skip_space();
            if !self.take(')') {
                return Err(self.error(from..self.text.len(), "this bracket is never closed".to_owned(), None));
            }
            inner
        } else if self.rest().starts_with('1') {
            // Only "1" itself, as in "1/m"; a digit behind it is refused by the caller as no operator.
            self.at += 1;
            return Ok(Unit { si: 1.0, dimension: Dimension::NONE, offset: 0.0 });
        } else {
            let row = self.symbol()?;
            if row.offset != 0.0 {
                self.affine = Some(row);
            }
            Unit { si: row.si, dimension: row.dimension, offset: 0.0 }
        };
        match self.power()? {
            None => Ok(base),
            Some(halves) => {
                self.factors += 1;
                let one = Unit { si: 1.0, dimension: Dimension::NONE, offset: 0.0 };
                self.multiply(one, base, halves, from)
            }
        }
    }

    fn multiply(&self, unit: Unit, by: Unit, halves: i16, from: usize) -> Result<Unit, UnitError> {
        let refuse = || self.error(from..self.at, "this power cannot be worked with".to_owned(), None);
        let dimension = unit.dimension.times(by.dimension, halves).ok_or_else(refuse)?;
        let factor = if halves % 2 == 0 { by.si.powi(i32::from(halves / 2)) } else { by.si.powi(halves.into()).sqrt() };
        // Division instead of a product with the inverse: one rounding less.
        let si = if halves == -2 { unit.si / by.si } else { unit.si * factor };
        if !si.is_finite() || si <= 0.0 {
            return Err(refuse());
        }
        Ok(Unit { si, dimension, offset: 0.0 })
    }

    /// The longest known symbol here, so that "inH2O" is not "inH" squared.
    fn symbol(&mut self) -> Result<&'static UnitRow, UnitError> {
        let word: String = {
            let rest = self.rest();
            let end = rest.find(|c: char| !starts_symbol(c)).unwrap_or(rest.len());
            let with_digits = UNITS.iter().filter(|row| row.symbol.contains('2') && rest.starts_with(row.symbol));
            let longest = with_digits.map(|row| row.symbol).max_by_key(|symbol| symbol.len());
            longest.unwrap_or_else(|| rest.get(..end).unwrap_or_default()).to_owned()
        };
        let span = self.at..self.at + word.len();
        if word.is_empty() {
            let (span, message) = match self.peek() {
                Some(c) => (self.at..self.at + c.len_utf8(), format!("a unit cannot begin with '{c}' here")),
                None => (self.text.len()..self.text.len(), "a unit is missing here".to_owned()),
            };
            return Err(self.error(span, message, None));
        }
        if let Some(row) = unit(&word) {
            self.at = span.end;
            return Ok(row);
        }
        let refused = REFUSED.iter().find(|(symbol, _)| *symbol == word).map(|(_, why)| (*why).to_owned());
        let alone = self.text.trim() == word;
        let wanted = self.wanted.filter(|_| alone);
        let help = refused.or_else(|| nearest_unit(&word, wanted).map(|near| format!("did you mean \"{near}\"?")));
        Err(self.error(span, format!("\"{word}\" is not a unit that is known here"), help))
    }

    /// Twice the exponent, if one stands here.
    fn power(&mut self) -> Result<Option<i16>, UnitError> {
        let from = self.at;
        let bad = |parser: &Self| {
            let help = Some("powers are whole or half: m2, m^2, m², Pa^0.5, m^-1".to_owned());
            parser.error(from..parser.at.max(from), "this power cannot be worked with".to_owned(), help)
        };
        let superscript: String = self.rest().chars().map_while(plain_digit).collect();
        if !superscript.is_empty() {
            let width: usize = self.rest().chars().take_while(|c| plain_digit(*c).is_some()).map(char::len_utf8).sum();
            self.at += width;
            return superscript.parse::<i16>().ok().and_then(doubled).map(Some).ok_or_else(|| bad(self));
        }
        let caret = self.take('^');
        let sign = self.rest().starts_with('-') && (caret || self.digit_after_sign());
        if sign {
            self.at += 1;
        } else if caret {
            let _ = self.take('+');
        }
        let whole = self.digits();
        if whole.is_empty() {
            return if caret { Err(bad(self)) } else { Ok(None) };
        }
        let mut halves = whole.parse::<i16>().ok().and_then(doubled).ok_or_else(|| bad(self))?;
        let fraction = self.rest().strip_prefix('.').is_some_and(|rest| rest.starts_with(|c: char| c.is_ascii_digit()));
        if caret && fraction {
            self.at += 1;
            let digits = self.digits();
            halves += match digits.trim_end_matches('0') {
                "" => 0,
                "5" => 1,
                _ => return Err(bad(self)),
            };
        }
        Ok(Some(if sign { -halves } else { halves }))
    }

    fn digit_after_sign(&self) -> bool {
        self.rest().chars().nth(1).is_some_and(|c| c.is_ascii_digit())
    }

    fn digits(&mut self) -> String {
        let digits: String = self.rest().chars().take_while(char::is_ascii_digit).collect();
        self.at += digits.len();
        digits
    }
}

fn doubled(exponent: i16) -> Option<i16> {
    (exponent.abs() <= 9).then_some(exponent * 2)
}

fn starts_symbol(c: char) -> bool {
    (c.is_alphabetic() && plain_digit(c).is_none()) || c == '°' || c == '%'
}

fn plain_digit(c: char) -> Option<char> {
    Some(match c {
        '⁻' => '-',
        '⁰' => '0',
        '¹' => '1',
        '²' => '2',
        '³' => '3',
        '⁴' => '4',
        '⁵' => '5',
        '⁶' => '6',
        '⁷' => '7',
        '⁸' => '8',
        '⁹' => '9',
        _ => return None,
    })
}

/// The known unit nearest to a mistyped one, if any is near.
fn nearest_unit(word: &str, wanted: Option<Dimension>) -> Option<&'static str> {
    if word.len() > 20 {
        return None;
    }
    let lower = word.to_lowercase();
    let fitting = |row: &&UnitRow| wanted.is_none_or(|dimension| row.dimension == dimension);
    if let Some(row) = UNITS.iter().filter(fitting).find(|row| row.symbol.to_lowercase() == lower) {
        return Some(row.symbol);
    }
    let far = if word.chars().count() <= 2 { 1 } else { 2 };
    let near = UNITS.iter().filter(fitting).map(|row| (strsim::damerau_levenshtein(row.symbol, word), row.symbol));
    near.filter(|(distance, symbol)| *distance <= far && symbol.len() > *distance)
        .min_by_key(|(distance, _)| *distance)
        .map(|(_, symbol)| symbol)
}
