//! The units of a sheet.

use crate::exact::{Rational, ratio, whole};
use serde::{Deserialize, Serialize};

/// The unit of a sheet: what a bare number means, and how values print.
///
/// One inch is exactly 25.4 mm (the international yard and pound agreement, effective 1 July 1959; Addendum to NBS
/// Circular 572).
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq, Hash, Serialize, Deserialize)]
#[serde(rename_all = "lowercase")]
pub enum Unit {
    /// Inches; lengths print in feet, inches and fractions.
    #[default]
    In,
    /// Feet; lengths print in feet, inches and fractions.
    Ft,
    /// Millimetres.
    Mm,
    /// Centimetres.
    Cm,
    /// Metres.
    M,
}

impl Unit {
    /// Every unit, in the order they are offered.
    pub const ALL: [Unit; 5] = [Unit::In, Unit::Ft, Unit::Mm, Unit::Cm, Unit::M];

    /// The symbol, as in files: `in`, `ft`, `mm`, `cm`, `m`.
    pub fn symbol(self) -> &'static str {
        match self {
            Unit::In => "in",
            Unit::Ft => "ft",
            Unit::Mm => "mm",
            Unit::Cm => "cm",
            Unit::M => "m",
        }
    }

    /// The unit with this symbol.
    pub fn from_symbol(symbol: &str) -> Option<Unit> {
        Unit::ALL.into_iter().find(|unit| unit.symbol() == symbol)
    }

    /// Its exact length in millimetres.
    pub fn in_millimetres(self) -> Rational {
        match self {
            Unit::In => ratio(254, 10),
            Unit::Ft => ratio(3048, 10),
            Unit::Mm => whole(1),
            Unit::Cm => whole(10),
            Unit::M => whole(1000),
        }
    }

    /// How many of `other` make one of this unit, exactly.
    pub fn in_units_of(self, other: Unit) -> Rational {
        self.in_millimetres() / other.in_millimetres()
    }

    /// True for inches and feet.
    pub fn is_imperial(self) -> bool {
        matches!(self, Unit::In | Unit::Ft)
    }
}
