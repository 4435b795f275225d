//! Printing: lengths, bevels and degrees as the trade writes them, correctly rounded.

use super::{Unit, Written};
use crate::exact::{Rational, Surd, Vector, nearest_degrees, nearest_multiple, ratio, whole};
use num_bigint::BigInt;
use num_integer::Integer;
use num_traits::{One, Signed, Zero};

/// How values print on one sheet: its unit, and the step that lengths are rounded to.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Sheet {
    unit: Unit,
    step: Rational,
}

/// A printed value, and whether nothing was rounded.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Printed {
    /// The text.
    pub text: String,
    /// True when the text is exactly the value.
    pub exact: bool,
}

impl Sheet {
    /// A sheet that prints to `step`, a length in `unit`. A step that is not positive stands for the finest usual one, 1/16
    /// in or 1 mm, where something has to be rounded.
    pub fn of(unit: Unit, step: &Rational) -> Sheet {
        let step = if step.is_positive() {
            step.clone()
        } else if unit.is_imperial() {
            ratio(1, 16) * Unit::In.in_units_of(unit)
        } else {
            Unit::Mm.in_units_of(unit)
        };
        Sheet { unit, step }
    }

    /// The same sheet with another step.
    pub fn to_step(&self, step: &Rational) -> Sheet {
        Sheet::of(self.unit, step)
    }

    /// The printing step, in the sheet's unit; positive.
    pub fn step(&self) -> &Rational {
        &self.step
    }

    /// The unit.
    pub fn unit(&self) -> Unit {
        self.unit
    }

    /// A length rounded to the step: `8'-3 3/8"`, `4 5/16"`, `3810`.
    pub fn length(&self, value: &Rational) -> String {
        let steps = nearest_multiple(value, &self.step).unwrap_or_default();
        self.steps(steps)
    }

    /// A length that is a root, rounded correctly to the step.
    pub fn surd(&self, value: &Surd) -> Printed {
        match value.nearest(&self.step) {
            Some(rounded) => Printed { text: self.steps(rounded.steps), exact: rounded.exact },
            None => Printed { text: value.to_string(), exact: true },
        }
    }

    fn steps(&self, steps: BigInt) -> String {
        let value = &self.step * whole(steps);
        if self.unit.is_imperial() {
            feet_and_inches(&(value * self.unit.in_units_of(Unit::In)))
        } else {
            self.metric(&value)
        }
    }

    /// A metric value to the places of the step; a fraction where the step is no decimal.
    fn metric(&self, value: &Rational) -> String {
        match decimal_places(self.step.denom()) {
            Some(places) => decimal(value, places),
            None => exact_number(value),
        }
    }

    /// A length with nothing rounded: `5'-8 4/7"`, `3810.5`, `2400/7`.
    pub fn exact_words(&self, value: &Rational) -> String {
        if self.unit.is_imperial() {
            feet_and_inches(&(value * self.unit.in_units_of(Unit::In)))
        } else {
            exact_number(value)
        }
    }

    /// A length as it would be typed on this sheet, with nothing rounded.
    pub fn written(&self, value: &Rational) -> Written {
        let text = self.exact_words(value);
        // A value whose text is too long for the grammar is kept as a plain fraction.
        if super::parse_length(&text, self.unit).as_ref() == Ok(value) {
            Written { text, value: value.clone() }
        } else {
            Written::plain(value.clone())
        }
    }

    /// A quadrance with nothing rounded and its unit: `7200 in²`.
    pub fn quadrance(&self, value: &Rational) -> String {
        format!("{value} {}²", self.unit.symbol())
    }

    /// A length that is exact in the sheet's unit as a plain number with the unit: `68 4/7 in`.
    pub fn plain(&self, value: &Rational) -> String {
        format!("{} {}", mixed(value), self.unit.symbol())
    }

    /// The bevel of a working line: its smaller leg in 12 of the larger (in 1000 on metric sheets), to 1/16 (to 1), with
    /// `steep` when the rise is the larger leg: `7 3/16 in 12`, `7 3/16 in 12 steep`. A line without length has none.
    pub fn bevel(&self, run: &Rational, rise: &Rational) -> String {
        let (run, rise) = (run.abs(), rise.abs());
        let (small, large) = if rise > run { (&run, &rise) } else { (&rise, &run) };
        if large.is_zero() {
            return String::new();
        }
        let (base, step) = if self.unit.is_imperial() { (12, ratio(1, 16)) } else { (1000, whole(1)) };
        let steps = nearest_multiple(&(small / large * whole(base)), &step).unwrap_or_default();
        let leg = mixed(&(step * whole(steps)));
        if rise > run { format!("{leg} in {base} steep") } else { format!("{leg} in {base}") }
    }

    /// The slope of a working line in degrees, from 0 to 90, to a hundredth: `26.57`. A line without length has none.
    pub fn slope_degrees(&self, run: &Rational, rise: &Rational) -> String {
        degrees(&Vector { x: run.abs(), y: rise.abs() }, 2)
    }

    /// The angle from one direction counter-clockwise to another in degrees, from 0 to 360, to a hundredth.
    pub fn turn_degrees(&self, from: &Vector, to: &Vector) -> String {
        degrees(&Vector { x: from.dot(to), y: from.cross(to) }, 2)
    }
}

/// A direction in degrees to some places, correctly rounded; empty when there is no direction.
fn degrees(direction: &Vector, places: u32) -> String {
    let scale = BigInt::from(10).pow(places);
    let rounded = nearest_degrees(direction, &Rational::new(BigInt::one(), scale.clone()));
    rounded.map_or_else(String::new, |(steps, _)| decimal(&Rational::new(steps, scale), places))
}

/// A value in inches as feet, inches and a fraction, whole: `8'-3 3/8"`, `40'-0"`, `4 5/16"`, `-6"`.
fn feet_and_inches(value: &Rational) -> String {
    let sign = if value.is_negative() { "-" } else { "" };
    let value = value.abs();
    let feet = (&value / whole(12)).floor().to_integer();
    let inches = value - whole(&feet * 12);
    if feet.is_zero() {
        format!("{sign}{}\"", mixed(&inches))
    } else {
        format!("{sign}{feet}'-{}\"", with_zero(&inches))
    }
}

/// As [`mixed`], with the 0 that the trade writes between feet and a bare fraction: `8'-0 3/8"`.
fn with_zero(value: &Rational) -> String {
    let text = mixed(value);
    if text.contains('/') && !text.contains(' ') { format!("0 {text}") } else { text }
}

/// A number as whole and fraction: `3 3/8`, `5/16`, `-2 1/2`, `7`.
fn mixed(value: &Rational) -> String {
    let sign = if value.is_negative() { "-" } else { "" };
    let (whole_part, rest) = value.numer().abs().div_rem(value.denom());
    match (whole_part.is_zero(), rest.is_zero()) {
        (_, true) => format!("{sign}{whole_part}"),
        (true, false) => format!("{sign}{rest}/{}", value.denom()),
        (false, false) => format!("{sign}{whole_part} {rest}/{}", value.denom()),
    }
}

/// A number with nothing rounded: a decimal where it ends within six places, else `p/q`.
fn exact_number(value: &Rational) -> String {
    match decimal_places(value.denom()).filter(|&places| places <= 6) {
        Some(places) => decimal(value, places),
        None => value.to_string(),
    }
}

/// How many decimal places a number with this denominator needs; `None` when it does not end.
fn decimal_places(denominator: &BigInt) -> Option<u32> {
    let (twos, rest) = count_factor(denominator.clone(), 2);
    let (fives, rest) = count_factor(rest, 5);
    rest.is_one().then(|| twos.max(fives))
}

fn count_factor(mut number: BigInt, factor: u32) -> (u32, BigInt) {
    let mut count = 0;
    loop {
        let (quotient, remainder) = number.div_rem(&BigInt::from(factor));
        if !remainder.is_zero() || quotient.is_zero() {
            return (count, number);
        }
        number = quotient;
        count += 1;
    }
}

/// A decimal with this many places, correctly rounded; a tie goes away from zero.
pub fn decimal(value: &Rational, places: u32) -> String {
    let scale = BigInt::from(10).pow(places);
    let steps = nearest_multiple(value, &Rational::new(BigInt::one(), scale.clone())).unwrap_or_default();
    let sign = if steps.is_negative() { "-" } else { "" };
    let (whole_part, rest) = steps.abs().div_rem(&scale);
    match places {
        0 => format!("{sign}{whole_part}"),
        _ => format!("{sign}{whole_part}.{:0>width$}", rest.to_string(), width = places as usize),
    }
}

/// Text for the page: foot and inch marks, minus signs and common fractions as type has them. For reading only; files and
/// reports keep plain characters.
pub fn pretty(text: &str) -> String {
    let mut out = String::with_capacity(text.len() + 8);
    let characters: Vec<char> = text.chars().collect();
    for (index, &c) in characters.iter().enumerate() {
        let before = index.checked_sub(1).and_then(|i| characters.get(i)).copied().unwrap_or(' ');
        let after = characters.get(index + 1).copied().unwrap_or(' ');
        out.push(match c {
            '\'' if before.is_ascii_digit() || before == '½' => '′',
            '"' if before.is_ascii_digit() || before == '½' => '″',
            '-' if after.is_ascii_digit() && !before.is_alphanumeric() && !matches!(before, '\'' | '"' | '′' | '″') => {
                '−'
            }
            '*' => '×',
            c => c,
        });
    }
    out
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::measure::parse_length;

    fn imperial(step: Rational) -> Sheet {
        Sheet::of(Unit::In, &step)
    }

    #[test]
    fn feet_and_inches_as_the_trade_writes_them() {
        let sheet = imperial(ratio(1, 16));
        for (value, expected) in [
            (whole(0), "0\""),
            (ratio(5, 16), "5/16\""),
            (ratio(69, 16), "4 5/16\""),
            (whole(12), "1'-0\""),
            (ratio(795, 8), "8'-3 3/8\""),
            (ratio(195, 16), "1'-0 3/16\""),
            (whole(480), "40'-0\""),
            (ratio(-69, 16), "-4 5/16\""),
            (whole(-100), "-8'-4\""),
            (ratio(480, 7), "5'-8 9/16\""),
        ] {
            assert_eq!(sheet.length(&value), expected, "{value}");
        }
        assert_eq!(sheet.exact_words(&ratio(480, 7)), "5'-8 4/7\"");
    }

    #[test]
    fn metric_prints_to_the_places_of_the_step() {
        let print = |step: Rational, value: Rational| Sheet::of(Unit::Mm, &step).length(&value);
        assert_eq!(print(whole(1), ratio(7621, 2)), "3811", "a tie goes up");
        assert_eq!(print(ratio(1, 2), ratio(7621, 2)), "3810.5");
        assert_eq!(print(ratio(1, 100), ratio(1, 3)), "0.33");
        assert_eq!(print(whole(5), whole(3812)), "3810");
        assert_eq!(print(ratio(1, 3), ratio(1, 3)), "1/3");
    }

    #[test]
    fn what_is_printed_reads_back() {
        for unit in Unit::ALL {
            for step in [ratio(1, 16), ratio(1, 3), ratio(1, 10), whole(1)] {
                let sheet = Sheet::of(unit, &step);
                for n in [-999i64, -17, -1, 0, 1, 5, 12, 13, 191, 192, 193, 4001] {
                    let value = &step * whole(n);
                    let text = sheet.length(&value);
                    assert_eq!(parse_length(&text, unit), Ok(value.clone()), "{text} in {}", unit.symbol());
                    assert_eq!(parse_length(&sheet.exact_words(&value), unit), Ok(value), "exact, {}", unit.symbol());
                }
            }
        }
    }

    #[test]
    fn bevels_have_the_smaller_leg_first_and_say_when_they_are_steep() {
        let sheet = imperial(ratio(1, 16));
        for (run, rise, expected) in [
            (240, 144, "7 3/16 in 12"),
            (144, -240, "7 3/16 in 12 steep"),
            (90, 90, "12 in 12"),
            (7, 0, "0 in 12"),
            (0, 7, "0 in 12 steep"),
            (0, 0, ""),
        ] {
            assert_eq!(sheet.bevel(&whole(run), &whole(rise)), expected, "{run} {rise}");
        }
        assert_eq!(Sheet::of(Unit::Mm, &whole(1)).bevel(&whole(2400), &whole(1800)), "750 in 1000");
    }

    #[test]
    fn degrees_are_correctly_rounded() {
        let sheet = imperial(ratio(1, 16));
        assert_eq!(sheet.slope_degrees(&whole(12), &whole(-6)), "26.57");
        assert_eq!(sheet.slope_degrees(&whole(-1), &whole(1)), "45.00");
        let (right, up_left) = (Vector { x: whole(1), y: whole(0) }, Vector { x: whole(-3), y: whole(4) });
        assert_eq!(sheet.turn_degrees(&right, &up_left), "126.87");
        assert_eq!(sheet.turn_degrees(&up_left, &right), "233.13");
    }

    #[test]
    fn decimals_round_ties_away_from_zero() {
        for (value, places, expected) in [
            (ratio(1, 8), 2, "0.13"),
            (ratio(-1, 8), 2, "-0.13"),
            (ratio(1, 3), 3, "0.333"),
            (whole(7), 0, "7"),
            (ratio(2999, 1000), 2, "3.00"),
        ] {
            assert_eq!(decimal(&value, places), expected);
        }
    }

    #[test]
    fn type_has_its_own_marks() {
        assert_eq!(pretty("8'-3 3/8\""), "8′-3 3/8″");
        assert_eq!(pretty("-4\" and U1-L2"), "−4″ and U1-L2");
    }
}
