//! The limits that the checks go by: adjustable, each with its source.

use crate::exact::{Rational, fraction, ratio, whole};
use crate::measure::{Sheet, Unit, parse_length, parse_plain};
use crate::truss::Truss;
use num_traits::Zero;
use serde::{Deserialize, Serialize};

/// What counts as near, tight, long and too much.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[serde(default, deny_unknown_fields)]
pub struct Limits {
    /// Something is *nearly* so when it is off by at most this many printing steps of the sheet. Four sixteenths are a
    /// quarter of an inch: more than rounding leaves, less than anybody draws on purpose (own choice).
    pub near_steps: u32,
    /// Neighbours at a joint leave it too close together below this spread: 1/4 is exactly 30 degrees (EN
    /// 1993-1-8:2005, 7.1.2(3), for welded hollow sections; quoted from memory).
    #[serde(with = "fraction")]
    pub tight_spread: Rational,
    /// A longer piece is noted, in millimetres: 48 ft, the semitrailer length that every state of the US has to admit
    /// (23 CFR 658).
    #[serde(with = "fraction")]
    pub longest_piece: Rational,
    /// Findings of one rule that are told one by one; what is beyond is told in one more.
    pub most_findings: usize,
    /// Steps of work that a check may spend where the work is not bounded by the size of the truss alone.
    pub most_work: usize,
}

impl Default for Limits {
    fn default() -> Limits {
        Limits {
            near_steps: 4,
            tight_spread: ratio(1, 4),
            longest_piece: ratio(146_304, 10),
            most_findings: 1000,
            most_work: 2_000_000_000,
        }
    }
}

/// A limit that its users may change.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
pub enum Adjustable {
    /// How many steps count as near.
    Near,
    /// The spread below which neighbours are too close together.
    Tight,
    /// The longest piece.
    Piece,
}

/// The most steps that can count as near.
const MOST_NEAR: u32 = 1000;

impl Adjustable {
    /// All of them.
    pub const ALL: [Adjustable; 3] = [Adjustable::Near, Adjustable::Tight, Adjustable::Piece];

    /// What it is called.
    pub fn name(self) -> &'static str {
        match self {
            Adjustable::Near => "near, in steps",
            Adjustable::Tight => "tight below spread",
            Adjustable::Piece => "longest piece",
        }
    }

    /// Where its default comes from, and what it defers to.
    pub fn source(self) -> &'static str {
        match self {
            Adjustable::Near => "own choice: more than rounding leaves, less than anybody draws on purpose",
            Adjustable::Tight => {
                "1/4 is 30 degrees: EN 1993-1-8:2005, 7.1.2(3), for welded hollow sections, from memory; local codes govern"
            }
            Adjustable::Piece => {
                "48 ft: the semitrailer length that every state of the US admits (23 CFR 658); local rules govern"
            }
        }
    }

    /// How it reads, in a unit's notation; it can be typed in again.
    pub fn text(self, limits: &Limits, unit: Unit) -> String {
        match self {
            Adjustable::Near => limits.near_steps.to_string(),
            Adjustable::Tight => limits.tight_spread.to_string(),
            Adjustable::Piece => Sheet::of(unit, &Rational::zero()).exact_words(&limits.longest_piece_in(unit)),
        }
    }

    /// The limits with this one read from text: whole steps, a plain number, or a length in trade notation.
    ///
    /// # Errors
    ///
    /// What was expected, when the text is no such value or the value means nothing.
    pub fn entered(self, limits: &Limits, unit: Unit, text: &str) -> Result<Limits, String> {
        let mut next = limits.clone();
        match self {
            Adjustable::Near => {
                let steps = text.trim().parse().ok().filter(|steps| (1..=MOST_NEAR).contains(steps));
                next.near_steps =
                    steps.ok_or_else(|| format!("`{text}` is not a number of steps; expected 1 to {MOST_NEAR}"))?;
            }
            Adjustable::Tight => {
                let spread = parse_plain(text).map_err(|error| error.to_string())?;
                if spread < whole(0) || spread > whole(1) {
                    return Err(format!("`{text}` is not a spread; expected 0 to 1 (1/4 is 30 degrees)"));
                }
                next.tight_spread = spread;
            }
            Adjustable::Piece => {
                let length = parse_length(text, unit).map_err(|error| error.to_string())?;
                if length <= whole(0) {
                    return Err(format!("`{text}` is not a length of a piece; expected more than 0"));
                }
                next.longest_piece = length * unit.in_millimetres();
            }
        }
        Ok(next)
    }
}

impl Limits {
    /// The step that nearness is measured in, in the sheet's unit: the sheet's own, or 1/16 in (metric: 1 mm) where the
    /// sheet is exact.
    pub fn near_step(&self, truss: &Truss) -> Rational {
        if !truss.step.value.is_zero() {
            return truss.step.value.clone();
        }
        let millimetres = if truss.unit.is_imperial() { ratio(254, 160) } else { whole(1) };
        millimetres / truss.unit.in_millimetres()
    }

    /// The greatest deviation that counts as near, in the sheet's unit.
    pub fn near(&self, truss: &Truss) -> Rational {
        self.near_step(truss) * whole(self.near_steps)
    }

    /// The longest piece in a unit.
    pub fn longest_piece_in(&self, unit: Unit) -> Rational {
        &self.longest_piece / unit.in_millimetres()
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::measure::Written;

    #[test]
    fn limits_are_read_as_they_are_written() {
        let limits = Limits::default();
        for (adjustable, text, unit) in [
            (Adjustable::Near, "4", Unit::In),
            (Adjustable::Tight, "1/4", Unit::Mm),
            (Adjustable::Piece, "48'-0\"", Unit::In),
        ] {
            assert_eq!(adjustable.text(&limits, unit), text);
            assert_eq!(adjustable.entered(&limits, unit, text), Ok(limits.clone()), "{text}");
        }
        assert_eq!(Adjustable::Near.entered(&limits, Unit::In, "8").map(|l| l.near_steps), Ok(8));
        assert_eq!(Adjustable::Piece.entered(&limits, Unit::M, "12").map(|l| l.longest_piece), Ok(whole(12_000)));
        for (adjustable, text) in [
            (Adjustable::Near, "0"),
            (Adjustable::Near, "-3"),
            (Adjustable::Near, "half"),
            (Adjustable::Tight, "5/4"),
            (Adjustable::Tight, "-1/4"),
            (Adjustable::Piece, "0"),
            (Adjustable::Piece, "long"),
        ] {
            assert!(adjustable.entered(&limits, Unit::In, text).is_err(), "{text}");
        }
    }

    #[test]
    fn near_follows_the_step_of_the_sheet() {
        let mut truss = Truss::default();
        assert_eq!(Limits::default().near(&truss), ratio(1, 4));
        truss.step = Written::plain(whole(0));
        assert_eq!(Limits::default().near(&truss), ratio(1, 4), "an exact sheet in inches is taken in sixteenths");
        truss.unit = Unit::M;
        assert_eq!(Limits::default().near(&truss), ratio(4, 1000));
    }
}
