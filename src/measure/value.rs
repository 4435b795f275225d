//! The value grammar: feet and inches as the trade writes them, decimals, fractions and plain arithmetic, all exact.
//!
//! ```text
//! sum      = product { ("+" | "-") product }
//! product  = signed { ("*" | "/") signed }
//! signed   = ("-" | "+") signed | "(" sum ")" [unit] | measure
//! measure  = mixed feet [ ["-"] mixed [inch] ]  |  mixed [unit]
//! mixed    = whole ["-"] fraction | whole | decimal | fraction
//! fraction = whole "/" whole  (no blanks) | "½" ... | "⁵⁄₁₆"
//! ```
//!
//! # What a hyphen means
//!
//! The trade joins feet and inches with a hyphen, and a minus looks the same. Blanks decide:
//!
//! - **no blank on either side** after a foot mark joins: `10'-4 5/16"` is ten feet and four and five sixteenths inches;
//! - **blanks on both sides** subtract: `40' - 2"` is thirty-nine feet ten;
//! - a blank on **one side only** is refused, since nobody can tell.
//!
//! Behind an inch mark there is nothing left to join, and a hyphen is a minus: `10'-4"-2"` is ten feet two.
//!
//! In the same way `4-5/16"` is four and five sixteenths inches, and `4 - 5/16"` is a difference. Without a mark `4-5/16`
//! could be either, and is refused. The inch mark behind feet may be left out: `10'-4` is `10'-4"`.
//!
//! # What a slash means
//!
//! Two whole numbers around a slash without blanks are a fraction: `40' / 1/2` is eighty feet. Behind a slash without blanks
//! they are not, and arithmetic goes from left to right: `40'/7/2` is half of a seventh.
//!
//! # Units
//!
//! A bare number means the sheet's unit where a length is wanted, also beside one that has a unit: `10' + 4` on a sheet in
//! inches is 124. A length times a length is refused, and so is a length over a length where a length is wanted.

use super::token::{Piece, Token, fraction_of, tokens};
use super::{Unit, Written};
use crate::exact::Rational;
use num_bigint::BigInt;
use num_traits::{Pow, Signed, Zero};
use thiserror::Error;

/// Digits in one number, and in numerator and denominator of a result.
pub const MAX_DIGITS: usize = 40;
/// Depth of nested parentheses and signs.
pub const MAX_DEPTH: usize = 32;
/// Characters in one value: bounds the size of every result.
pub const MAX_CHARACTERS: usize = 200;

/// Why a value cannot be read: where, and what was expected.
#[derive(Clone, Debug, PartialEq, Eq, Error)]
#[error("character {character}: {message}")]
pub struct ValueError {
    /// The character at which reading failed, counted from 1.
    pub character: usize,
    /// What was expected there, and what was found.
    pub message: String,
}

impl ValueError {
    pub(super) fn new(character: usize, message: impl Into<String>) -> ValueError {
        ValueError { character, message: message.into() }
    }

    fn shifted(mut self, by: usize) -> ValueError {
        self.character += by;
        self
    }
}

/// Reads a length, in the unit of the sheet; a bare number means that unit.
///
/// # Errors
///
/// When the text is not a length, or is longer or deeper than the limits; says at which character and what was expected.
pub fn parse_length(text: &str, unit: Unit) -> Result<Rational, ValueError> {
    let found = Parser::new(text, Wanted::Length(unit))?.whole_text()?;
    match found.kind {
        Kind::Length | Kind::Bare => bounded(found.value),
        Kind::Ratio { at } => {
            Err(ValueError::new(at, "a length over a length is a plain number; expected a length on one side only"))
        }
    }
}

/// Reads a plain number (a spread, a direction, one side of a pitch): no unit may stand in it.
///
/// # Errors
///
/// As [`parse_length`].
pub fn parse_plain(text: &str) -> Result<Rational, ValueError> {
    bounded(Parser::new(text, Wanted::Plain)?.whole_text()?.value)
}

/// Reads an angle in degrees: a plain number, with the degree mark or without.
///
/// # Errors
///
/// As [`parse_length`].
pub fn parse_degrees(text: &str) -> Result<Rational, ValueError> {
    bounded(Parser::new(text, Wanted::Degrees)?.whole_text()?.value)
}

/// Reads a pitch `rise:run` (`6:12`), or as it is said (`6 in 12`): two plain numbers.
///
/// # Errors
///
/// As [`parse_length`], and when there are not two numbers.
pub fn parse_pitch(text: &str) -> Result<(Written, Written), ValueError> {
    let (rise, run) = split_pitch(text)?;
    let side = |(start, side): (usize, &str)| {
        let value = parse_plain(side).map_err(|error| error.shifted(start))?;
        Ok(Written { value, text: side.to_owned() })
    };
    Ok((side(rise)?, side(run)?))
}

/// A part of a text, and how many characters stand before it.
type Side<'a> = (usize, &'a str);

/// The two sides of a pitch.
fn split_pitch(text: &str) -> Result<(Side<'_>, Side<'_>), ValueError> {
    // What stands behind a side has this many bytes.
    let side = |side: &'_ str, behind: usize| {
        let before = text.get(..text.len() - behind - side.len()).unwrap_or_default();
        before.chars().count()
    };
    if let Some((rise, run)) = text.split_once(':') {
        return Ok(((0, rise), (side(run, 0), run)));
    }
    if let Some((rise, run)) = text.split_once(" in ") {
        let (rise_start, run_start) = (rise.trim_start(), run.trim_start());
        let behind_rise = text.len() - rise.len();
        return Ok((
            (side(rise_start, behind_rise), rise_start.trim_end()),
            (side(run_start, 0), run_start.trim_end()),
        ));
    }
    parse_plain(text)?;
    Err(ValueError::new(text.chars().count() + 1, "expected rise and run such as 6:12"))
}

impl Written {
    /// A length as it was typed, in the unit of the sheet.
    ///
    /// # Errors
    ///
    /// As [`parse_length`].
    pub fn length(text: &str, unit: Unit) -> Result<Written, ValueError> {
        Ok(Written { value: parse_length(text, unit)?, text: text.to_owned() })
    }

    /// A plain number as it was typed.
    ///
    /// # Errors
    ///
    /// As [`parse_plain`].
    pub fn number(text: &str) -> Result<Written, ValueError> {
        Ok(Written { value: parse_plain(text)?, text: text.to_owned() })
    }

    /// An angle in degrees as it was typed.
    ///
    /// # Errors
    ///
    /// As [`parse_degrees`].
    pub fn degrees(text: &str) -> Result<Written, ValueError> {
        Ok(Written { value: parse_degrees(text)?, text: text.to_owned() })
    }
}

/// True when numerator and denominator have no more than [`MAX_DIGITS`] digits, so that the value can be written and read.
pub fn within_digits(value: &Rational) -> bool {
    // 10^40 lies between 2^132 and 2^133.
    let short = |n: &BigInt| n.bits() <= 132 || n.abs() < BigInt::from(10).pow(MAX_DIGITS);
    short(value.numer()) && short(value.denom())
}

fn bounded(value: Rational) -> Result<Rational, ValueError> {
    if within_digits(&value) {
        return Ok(value);
    }
    Err(ValueError::new(1, format!("the value comes to more than the limit of {MAX_DIGITS} digits")))
}

/// What the text is read as.
#[derive(Clone, Copy, PartialEq, Eq)]
enum Wanted {
    Length(Unit),
    Plain,
    Degrees,
}

/// What a part of the text has turned out to be.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
enum Kind {
    /// A number without a unit, which may take the sheet's.
    Bare,
    /// A length in the sheet's unit.
    Length,
    /// A length over a length: a plain number that may not take a unit.
    Ratio {
        /// Where it was divided.
        at: usize,
    },
}

struct Quantity {
    value: Rational,
    kind: Kind,
}

/// A number with its fraction, before any unit.
struct Mixed {
    value: Rational,
    /// No fraction and no decimal point.
    whole: bool,
}

struct Parser {
    tokens: Vec<Token>,
    next: usize,
    depth: usize,
    wanted: Wanted,
    /// A slash without blanks was just read: what stands behind it is no fraction of whole numbers.
    behind_slash: bool,
}

impl Parser {
    fn new(text: &str, wanted: Wanted) -> Result<Parser, ValueError> {
        Ok(Parser { tokens: tokens(text)?, next: 0, depth: 0, wanted, behind_slash: false })
    }

    /// The token `ahead` of the next one; the end repeats for ever.
    fn look(&self, ahead: usize) -> &Token {
        static END: Token = Token { piece: Piece::End, at: 0, gap: false, text: String::new() };
        self.tokens.get(self.next + ahead).or(self.tokens.last()).unwrap_or(&END)
    }

    fn piece(&self, ahead: usize) -> &Piece {
        &self.look(ahead).piece
    }

    fn whole_text(mut self) -> Result<Quantity, ValueError> {
        let found = self.sum()?;
        if self.wanted == Wanted::Degrees && *self.piece(0) == Piece::Degree {
            self.next += 1;
        }
        if *self.piece(0) == Piece::End { Ok(found) } else { Err(self.expected("an operator or the end")) }
    }

    fn sum(&mut self) -> Result<Quantity, ValueError> {
        let mut total = self.product()?;
        loop {
            let at = self.look(0).at;
            let negate = match self.piece(0) {
                Piece::Plus => false,
                Piece::Minus => true,
                _ => return Ok(total),
            };
            self.next += 1;
            let next = self.product()?;
            total.kind = sum_kind(total.kind, next.kind, at)?;
            total.value = if negate { total.value - next.value } else { total.value + next.value };
        }
    }

    fn product(&mut self) -> Result<Quantity, ValueError> {
        let mut total = self.signed()?;
        loop {
            let at = self.look(0).at;
            let divide = match self.piece(0) {
                Piece::Times => false,
                Piece::Over => true,
                _ => return Ok(total),
            };
            self.behind_slash = divide && !self.look(0).gap && !self.look(1).gap;
            self.next += 1;
            let second = self.look(0).at;
            let next = self.signed()?;
            if divide && next.value.is_zero() {
                return Err(ValueError::new(second, "division by zero"));
            }
            let kind =
                if divide { quotient_kind(total.kind, next.kind, at) } else { product_kind(total.kind, next.kind) };
            total.kind = kind.ok_or_else(|| ValueError::new(second, "expected a plain number, found a length"))?;
            total.value = if divide { total.value / next.value } else { total.value * next.value };
        }
    }

    fn signed(&mut self) -> Result<Quantity, ValueError> {
        self.deeper()?;
        let negate = *self.piece(0) == Piece::Minus;
        let found = match self.piece(0) {
            Piece::Minus | Piece::Plus => {
                self.next += 1;
                let inner = self.signed()?;
                Quantity { value: if negate { -inner.value } else { inner.value }, kind: inner.kind }
            }
            Piece::Open => self.parenthesis()?,
            _ => self.measure()?,
        };
        self.depth -= 1;
        Ok(found)
    }

    fn deeper(&mut self) -> Result<(), ValueError> {
        self.depth += 1;
        // The value itself is at depth 1; each sign or parenthesis is one more.
        if self.depth > MAX_DEPTH + 1 {
            let message = format!("nested deeper than the limit of {MAX_DEPTH}");
            return Err(ValueError::new(self.look(0).at, message));
        }
        Ok(())
    }

    fn parenthesis(&mut self) -> Result<Quantity, ValueError> {
        self.behind_slash = false;
        self.next += 1;
        let inner = self.sum()?;
        if *self.piece(0) != Piece::Close {
            return Err(self.expected("`)`"));
        }
        self.next += 1;
        match (self.piece(0), inner.kind) {
            (Piece::Unit(_), Kind::Length) => Err(self.expected("an operator or the end after a length")),
            (Piece::Unit(_), Kind::Ratio { .. }) => {
                Err(self.expected("an operator or the end after a ratio of lengths"))
            }
            (&Piece::Unit(unit), Kind::Bare) => {
                let found = self.in_unit(inner.value, unit)?;
                if unit == Unit::Ft && self.hyphen_joins_inches()? {
                    return Err(self.unclear(0, "10'-4\"", "10' - 4\""));
                }
                Ok(found)
            }
            _ => Ok(inner),
        }
    }

    /// A number with its unit, or feet and inches.
    fn measure(&mut self) -> Result<Quantity, ValueError> {
        let first = self.mixed(false)?;
        let &Piece::Unit(unit) = self.piece(0) else { return Ok(Quantity { value: first.value, kind: Kind::Bare }) };
        let feet = self.in_unit(first.value, unit)?;
        if unit != Unit::Ft || !self.inches_follow()? {
            return Ok(feet);
        }
        if !first.whole {
            return Err(self.expected("whole feet before inches, or an operator"));
        }
        let inches = self.inches()?;
        Ok(Quantity { value: feet.value + inches, kind: Kind::Length })
    }

    /// The number in the unit that stands next.
    fn in_unit(&mut self, value: Rational, unit: Unit) -> Result<Quantity, ValueError> {
        let Wanted::Length(sheet) = self.wanted else { return Err(self.expected("a plain number without a unit")) };
        self.next += 1;
        Ok(Quantity { value: value * unit.in_units_of(sheet), kind: Kind::Length })
    }

    /// Whether inches stand behind the feet just read; steps over the hyphen that joins them.
    fn inches_follow(&mut self) -> Result<bool, ValueError> {
        if self.starts_number(0) {
            return Ok(true);
        }
        let joined = self.hyphen_joins_inches()?;
        self.next += usize::from(joined);
        Ok(joined)
    }

    fn hyphen_joins_inches(&self) -> Result<bool, ValueError> {
        Ok(*self.piece(0) == Piece::Minus && self.starts_number(1) && self.is_tight(0, "10'-4\"", "10' - 4\"")?)
    }

    fn inches(&mut self) -> Result<Rational, ValueError> {
        let Wanted::Length(sheet) = self.wanted else { return Err(self.expected("a plain number without a unit")) };
        let inches = self.mixed(true)?;
        match self.piece(0) {
            Piece::Unit(Unit::In) => self.next += 1,
            Piece::Unit(_) => {
                return Err(self.expected("inches after feet; to subtract, put a blank on both sides of the minus"));
            }
            // The trade also writes 10'-4-5 for five sixteenths.
            Piece::Minus if self.starts_number(1) && self.is_tight(0, "4 5/16", "4\" - 5/16\"")? => {
                return Err(self.unclear(0, "4 5/16", "4\" - 5/16\""));
            }
            _ => {}
        }
        Ok(inches.value * Unit::In.in_units_of(sheet))
    }

    /// A number, a fraction, or both. Behind feet a hyphen may join them in any case.
    fn mixed(&mut self, behind_feet: bool) -> Result<Mixed, ValueError> {
        let behind_slash = std::mem::take(&mut self.behind_slash);
        if let Some(value) = self.fraction(0)?.filter(|_| !behind_slash || self.fraction_length(0) == 1) {
            return Ok(Mixed { value: self.skip_fraction(value), whole: false });
        }
        let Piece::Number { value, whole } = self.piece(0).clone() else {
            return Err(self.expected("a number"));
        };
        self.next += 1;
        if !whole {
            return Ok(Mixed { value, whole });
        }
        let hyphen = usize::from(self.hyphen_joins_fraction(behind_feet)?);
        match self.fraction(hyphen)? {
            Some(part) => {
                self.next += hyphen;
                Ok(Mixed { value: value + self.skip_fraction(part), whole: false })
            }
            None => Ok(Mixed { value, whole }),
        }
    }

    /// Whether a hyphen stands next that joins the whole number just read to its fraction.
    fn hyphen_joins_fraction(&self, behind_feet: bool) -> Result<bool, ValueError> {
        if *self.piece(0) != Piece::Minus || self.fraction(1)?.is_none() {
            return Ok(false);
        }
        if !self.is_tight(0, "4 5/16", "4 - 5/16")? {
            return Ok(false);
        }
        let behind = 1 + self.fraction_length(1);
        let marked = matches!(self.piece(behind), Piece::Unit(unit) if unit.is_imperial());
        if behind_feet || marked { Ok(true) } else { Err(self.unclear(0, "4 5/16", "4 - 5/16")) }
    }

    /// The fraction that stands `ahead`, if one does.
    fn fraction(&self, ahead: usize) -> Result<Option<Rational>, ValueError> {
        if let Piece::Fraction(value) = self.piece(ahead) {
            return Ok(Some(value.clone()));
        }
        let tight = !self.look(ahead + 1).gap && !self.look(ahead + 2).gap;
        match (self.piece(ahead), self.piece(ahead + 1), self.piece(ahead + 2)) {
            (Piece::Number { value: above, whole: true }, Piece::Over, Piece::Number { value: below, whole: true })
                if tight =>
            {
                let at = self.look(ahead + 2).at;
                fraction_of(above.to_integer(), below.to_integer(), at).map(Some)
            }
            _ => Ok(None),
        }
    }

    fn fraction_length(&self, ahead: usize) -> usize {
        if matches!(self.piece(ahead), Piece::Fraction(_)) { 1 } else { 3 }
    }

    fn skip_fraction(&mut self, value: Rational) -> Rational {
        self.next += self.fraction_length(0);
        value
    }

    fn starts_number(&self, ahead: usize) -> bool {
        matches!(self.piece(ahead), Piece::Number { .. } | Piece::Fraction(_))
    }

    /// True when the sign `ahead` has no blank on either side, false when it has one on both; refused otherwise.
    fn is_tight(&self, ahead: usize, joined: &str, subtracted: &str) -> Result<bool, ValueError> {
        match (self.look(ahead).gap, self.look(ahead + 1).gap) {
            (false, false) => Ok(true),
            (true, true) => Ok(false),
            _ => Err(self.unclear(ahead, joined, subtracted)),
        }
    }

    fn unclear(&self, ahead: usize, joined: &str, subtracted: &str) -> ValueError {
        let message = format!("a hyphen or a minus? expected {joined} (joined) or {subtracted} (subtracted)");
        ValueError::new(self.look(ahead).at, message)
    }

    fn expected(&self, what: &str) -> ValueError {
        let token = self.look(0);
        let found = if token.piece == Piece::End { "the end".into() } else { format!("`{}`", token.text) };
        ValueError::new(token.at, format!("expected {what}, found {found}"))
    }
}

fn sum_kind(first: Kind, second: Kind, at: usize) -> Result<Kind, ValueError> {
    match (first, second) {
        (Kind::Length, Kind::Ratio { .. }) | (Kind::Ratio { .. }, Kind::Length) => {
            Err(ValueError::new(at, "a length and a plain number do not add; expected two of a kind"))
        }
        (Kind::Bare, Kind::Bare) => Ok(Kind::Bare),
        (Kind::Ratio { at }, _) | (_, Kind::Ratio { at }) => Ok(Kind::Ratio { at }),
        _ => Ok(Kind::Length),
    }
}

/// `None` when both are lengths.
fn product_kind(first: Kind, second: Kind) -> Option<Kind> {
    match (first, second) {
        (Kind::Length, Kind::Length) => None,
        (Kind::Length, _) | (_, Kind::Length) => Some(Kind::Length),
        (Kind::Ratio { at }, _) | (_, Kind::Ratio { at }) => Some(Kind::Ratio { at }),
        (Kind::Bare, Kind::Bare) => Some(Kind::Bare),
    }
}

/// `None` when a plain number is divided by a length.
fn quotient_kind(first: Kind, second: Kind, at: usize) -> Option<Kind> {
    match (first, second) {
        (Kind::Length, Kind::Length) => Some(Kind::Ratio { at }),
        (_, Kind::Length) => None,
        _ => product_kind(first, second),
    }
}
