//! The pieces of a written value: numbers, fractions, marks, unit words and operators.

use super::Unit;
use super::value::{MAX_CHARACTERS, MAX_DIGITS, ValueError};
use crate::exact::{Rational, ratio, whole};
use num_bigint::BigInt;
use num_traits::Pow;

/// One piece of a written value.
#[derive(Clone, Debug, PartialEq, Eq)]
pub(super) enum Piece {
    /// A number without a sign; `whole` when it has no decimal point.
    Number {
        value: Rational,
        whole: bool,
    },
    /// A fraction that is one sign on paper: `½`, `⁵⁄₁₆`.
    Fraction(Rational),
    /// A unit, by mark or by word.
    Unit(Unit),
    /// The degree mark.
    Degree,
    Plus,
    Minus,
    Times,
    Over,
    Open,
    Close,
    /// The end of the text.
    End,
}

/// A piece and where it stands.
#[derive(Clone, Debug)]
pub(super) struct Token {
    pub(super) piece: Piece,
    /// Its first character, counted from 1.
    pub(super) at: usize,
    /// True when a blank stands before it.
    pub(super) gap: bool,
    /// As it was written, for messages.
    pub(super) text: String,
}

/// Fraction characters of Unicode, with numerator and denominator.
const FRACTIONS: [(char, i64, i64); 19] = [
    ('½', 1, 2),
    ('⅓', 1, 3),
    ('⅔', 2, 3),
    ('¼', 1, 4),
    ('¾', 3, 4),
    ('⅕', 1, 5),
    ('⅖', 2, 5),
    ('⅗', 3, 5),
    ('⅘', 4, 5),
    ('⅙', 1, 6),
    ('⅚', 5, 6),
    ('⅐', 1, 7),
    ('⅛', 1, 8),
    ('⅜', 3, 8),
    ('⅝', 5, 8),
    ('⅞', 7, 8),
    ('⅑', 1, 9),
    ('⅒', 1, 10),
    ('↉', 0, 3),
];

pub(super) const SUPERSCRIPTS: [char; 10] = ['⁰', '¹', '²', '³', '⁴', '⁵', '⁶', '⁷', '⁸', '⁹'];
pub(super) const SUBSCRIPTS: [char; 10] = ['₀', '₁', '₂', '₃', '₄', '₅', '₆', '₇', '₈', '₉'];
pub(super) const FRACTION_SLASH: char = '⁄';

/// Takes a text apart; the last token is [`Piece::End`].
pub(super) fn tokens(text: &str) -> Result<Vec<Token>, ValueError> {
    let characters: Vec<char> = text.chars().take(MAX_CHARACTERS + 1).collect();
    if characters.len() > MAX_CHARACTERS {
        let message = format!("the value is longer than the limit of {MAX_CHARACTERS} characters");
        return Err(ValueError::new(MAX_CHARACTERS + 1, message));
    }
    let mut scanner = Scanner { characters: &characters, next: 0 };
    let mut found = Vec::new();
    loop {
        let gap = scanner.skip_blanks();
        let start = scanner.next;
        let piece = scanner.piece()?;
        let text: String = characters.get(start..scanner.next).unwrap_or_default().iter().collect();
        let end = piece == Piece::End;
        found.push(Token { piece, at: start + 1, gap, text });
        if end {
            return Ok(found);
        }
    }
}

struct Scanner<'a> {
    characters: &'a [char],
    next: usize,
}

impl Scanner<'_> {
    fn peek(&self) -> Option<char> {
        self.characters.get(self.next).copied()
    }

    fn take(&mut self, wanted: impl Fn(char) -> bool) -> Option<char> {
        let found = self.peek().filter(|&c| wanted(c))?;
        self.next += 1;
        Some(found)
    }

    fn take_while(&mut self, wanted: impl Fn(char) -> bool) -> String {
        let start = self.next;
        while self.take(&wanted).is_some() {}
        self.characters.get(start..self.next).unwrap_or_default().iter().collect()
    }

    fn skip_blanks(&mut self) -> bool {
        !self.take_while(is_blank).is_empty()
    }

    fn piece(&mut self) -> Result<Piece, ValueError> {
        let start = self.next;
        let Some(first) = self.peek() else { return Ok(Piece::End) };
        if first.is_ascii_digit() || first == '.' {
            return self.number();
        }
        if SUPERSCRIPTS.contains(&first) {
            return self.typeset_fraction();
        }
        // Two of the foot and inch marks count as letters.
        if first.is_alphabetic() && !matches!(first, 'ʹ' | 'ʺ') {
            return self.word();
        }
        self.next += 1;
        if let Some(&(_, numerator, denominator)) = FRACTIONS.iter().find(|(c, ..)| *c == first) {
            return Ok(Piece::Fraction(ratio(numerator, denominator)));
        }
        match first {
            '\'' | '′' | '’' | '‘' | 'ʹ' => {
                let twice = self.take(|c| c == first).is_some();
                Ok(Piece::Unit(if twice { Unit::In } else { Unit::Ft }))
            }
            '"' | '″' | '”' | '“' | 'ʺ' => Ok(Piece::Unit(Unit::In)),
            '°' => Ok(Piece::Degree),
            '+' => Ok(Piece::Plus),
            '-' | '−' | '‐' | '‑' | '‒' | '–' => Ok(Piece::Minus),
            '*' | '×' => Ok(Piece::Times),
            '/' | '÷' | '∕' | FRACTION_SLASH => Ok(Piece::Over),
            '(' => Ok(Piece::Open),
            ')' => Ok(Piece::Close),
            ',' => Err(ValueError::new(start + 1, "expected a decimal point or nothing at all, found a comma")),
            other => Err(unknown(start, &other.to_string())),
        }
    }

    /// Digits, with a decimal point or without.
    fn number(&mut self) -> Result<Piece, ValueError> {
        let start = self.next;
        let digits = |c: char| c.is_ascii_digit();
        let integer = self.take_while(digits);
        let point = self.take(|c| c == '.').is_some();
        let decimals = if point { self.take_while(digits) } else { String::new() };
        if point && decimals.is_empty() {
            return Err(ValueError::new(self.next + 1, "expected a digit after the decimal point"));
        }
        check_digits(start, integer.len() + decimals.len())?;
        let numerator = integer_of(&format!("{integer}{decimals}"));
        let denominator = BigInt::from(10).pow(decimals.len());
        Ok(Piece::Number { value: Rational::new(numerator, denominator), whole: !point })
    }

    /// Raised digits, a fraction slash and lowered digits.
    fn typeset_fraction(&mut self) -> Result<Piece, ValueError> {
        let start = self.next;
        let numerator = plain_digits(&self.take_while(|c| SUPERSCRIPTS.contains(&c)), &SUPERSCRIPTS);
        if self.take(|c| c == FRACTION_SLASH || c == '/').is_none() {
            return Err(ValueError::new(self.next + 1, "expected a fraction slash after raised digits"));
        }
        let below = self.next;
        let denominator = plain_digits(&self.take_while(|c| SUBSCRIPTS.contains(&c)), &SUBSCRIPTS);
        check_digits(start, numerator.len().max(denominator.len()))?;
        if denominator.is_empty() {
            return Err(ValueError::new(below + 1, "expected lowered digits after the fraction slash"));
        }
        fraction_of(integer_of(&numerator), integer_of(&denominator), below + 1).map(Piece::Fraction)
    }

    fn word(&mut self) -> Result<Piece, ValueError> {
        let start = self.next;
        let word = self.take_while(|c| c.is_alphabetic() && !matches!(c, 'ʹ' | 'ʺ'));
        let unit = match word.to_ascii_lowercase().as_str() {
            "mm" => Unit::Mm,
            "cm" => Unit::Cm,
            "m" => Unit::M,
            "in" | "inch" | "inches" => Unit::In,
            "ft" | "foot" | "feet" => Unit::Ft,
            // `2x4` is a section of timber, not eight.
            "x" if start > 0 && is_blank(self.characters[start - 1]) && self.peek().is_some_and(is_blank) => {
                return Ok(Piece::Times);
            }
            "x" => {
                return Err(ValueError::new(start + 1, "to multiply, write * or put a blank on both sides of the x"));
            }
            "deg" => return Ok(Piece::Degree),
            _ => return Err(unknown(start, &word)),
        };
        if unit.is_imperial() {
            self.take(|c| c == '.');
        }
        Ok(Piece::Unit(unit))
    }
}

/// The fraction of two whole numbers; `at` is where the denominator stands.
pub(super) fn fraction_of(numerator: BigInt, denominator: BigInt, at: usize) -> Result<Rational, ValueError> {
    if denominator == BigInt::ZERO {
        return Err(ValueError::new(at, "division by zero"));
    }
    Ok(Rational::new(numerator, denominator))
}

fn is_blank(c: char) -> bool {
    matches!(c, ' ' | '\t' | '\u{a0}' | '\u{2009}' | '\u{202f}')
}

fn plain_digits(text: &str, digits: &[char; 10]) -> String {
    let digit = |c| digits.iter().position(|&d| d == c).and_then(|n| char::from_digit(u32::try_from(n).ok()?, 10));
    text.chars().filter_map(digit).collect()
}

fn integer_of(digits: &str) -> BigInt {
    digits.parse().unwrap_or_else(|_| whole(0).to_integer())
}

fn check_digits(start: usize, count: usize) -> Result<(), ValueError> {
    if count > MAX_DIGITS {
        return Err(ValueError::new(start + 1, format!("the number has more than the limit of {MAX_DIGITS} digits")));
    }
    Ok(())
}

fn unknown(start: usize, text: &str) -> ValueError {
    let expected = "expected a number, a mark (' or \"), a unit (in, ft, mm, cm, m) or + - * / ( )";
    ValueError::new(start + 1, format!("{expected}, found `{}`", visible(text)))
}

/// A text with what cannot be seen in it spelt out, for messages.
pub fn visible(text: &str) -> String {
    let spell = |c: char| if c.is_control() { c.escape_default().collect() } else { String::from(c) };
    text.chars().map(spell).collect()
}
