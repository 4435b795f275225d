//! A value together with the way it was written.

use crate::exact::{Rational, fraction};
use serde::{Deserialize, Serialize};

/// An exact value and the text it was read from, which is kept so that a drafter sees what was typed.
///
/// The text always reads as the value in the unit of the sheet it belongs to.
#[derive(Clone, Debug, PartialEq, Eq, Hash, Serialize, Deserialize)]
pub struct Written {
    /// What was typed.
    pub text: String,
    /// What it means, in the unit of the sheet (a length), in degrees (an angle) or as a plain number.
    #[serde(with = "fraction")]
    pub value: Rational,
}

impl Written {
    /// A value written in the plainest way: an integer or a fraction `p/q` in the unit of the sheet.
    pub fn plain(value: Rational) -> Written {
        Written { text: value.to_string(), value }
    }
}
