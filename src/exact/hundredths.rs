//! Directions in hundredths of a degree, quickly: machine integers with a proved bound of error.
//!
//! The same reduction and series as for the certified enclosures of any precision, in 60 fractional bits. Where the bound of error
//! leaves two answers open there is none, and the slower way has to be taken; that is one direction in a thousand million.

use num_bigint::BigInt;
use num_traits::ToPrimitive;
use std::sync::OnceLock;

/// Fractional bits.
const BITS: u32 = 60;
/// Units in the last place that all errors together stay far below: some 14 for each of the 32 steps of the table, and
/// 16 more.
const SLACK: i128 = 1 << 16;
/// The table holds the arc tangents of k/32.
const TABLE: i128 = 32;
/// Hundredths of a degree in an eighth of a turn.
const EIGHTH: i128 = 4500;

/// The direction of a vector, counter-clockwise from the right, to the nearest hundredth of a degree: from 0 to 36000.
///
/// `None` for a null vector, and where rounding is not certain.
pub fn hundredths_of(x: i64, y: i64) -> Option<u32> {
    let (along, up) = (x.unsigned_abs().into(), y.unsigned_abs().into());
    let first = if along >= up { octant(up, along)? } else { 2 * EIGHTH - octant(along, up)? };
    let turned = match (x < 0, y < 0) {
        (false, false) => first,
        (true, false) => 4 * EIGHTH - first,
        (true, true) => 4 * EIGHTH + first,
        (false, true) => 8 * EIGHTH - first,
    };
    u32::try_from(turned).ok()
}

/// The same for numbers of any size: only their leading bits are looked at, which moves the direction by less than the
/// bound of error allows for.
pub fn hundredths_of_large(x: &BigInt, y: &BigInt) -> Option<u32> {
    let beyond = x.bits().max(y.bits()).saturating_sub(62);
    let lead = |part: &BigInt| (part >> beyond).to_i64();
    hundredths_of(lead(x)?, lead(y)?)
}

/// The angle whose tangent is `small / large`, for 0 <= small <= large.
fn octant(small: u128, large: u128) -> Option<i128> {
    if large == 0 {
        return None;
    }
    let table = table();
    let tangent = ((small << BITS) / large) as i128;
    let k = ((tangent * TABLE + (1 << (BITS - 1))) >> BITS).min(TABLE);
    let node = (k << BITS) / TABLE;
    let rest = ((tangent - node) << BITS).div_euclid((1 << BITS) + ((tangent * node) >> BITS));
    let arc = table[k as usize] + small_arc(rest);
    let nearest = |arc: i128, eighth: i128| (2 * EIGHTH * arc + eighth).div_euclid(2 * eighth);
    let eighth = table[TABLE as usize];
    let low = nearest(arc - SLACK, eighth + SLACK);
    (low == nearest(arc + SLACK, eighth - SLACK)).then_some(low)
}

fn table() -> &'static [i128] {
    static ARCS: OnceLock<Vec<i128>> = OnceLock::new();
    ARCS.get_or_init(|| {
        let mut arcs = vec![0];
        for k in 0..TABLE {
            // atan((k+1)/32) - atan(k/32) = atan(32 / (1024 + k(k+1)))
            let next = small_arc((TABLE << BITS) / (TABLE * TABLE + k * (k + 1)));
            arcs.push(arcs[k as usize] + next);
        }
        arcs
    })
}

/// The alternating series of the arc tangent for an argument of at most 1/30 in size.
fn small_arc(x: i128) -> i128 {
    let square = (x * x) >> BITS;
    let (mut power, mut sum, mut n) = (x, 0, 1);
    while power != 0 && power != -1 {
        sum += if n % 4 == 1 { power / n } else { -(power / n) };
        power = (power * square) >> BITS;
        n += 2;
    }
    sum
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::exact::modular::Scatter;
    use crate::exact::{Vector, nearest_degrees, ratio, whole};

    #[test]
    fn quick_and_certified_degrees_agree() {
        let mut scatter = Scatter::new(1);
        let mut draw = |bits: u64| (scatter.draw() >> (64 - bits)) as i64 - (1i64 << (bits - 1));
        let around =
            [(1, 0), (0, 1), (-1, 0), (0, -1), (1, 1), (-1, 1), (-1, -1), (1, -1), (i64::MAX, 1), (i64::MIN, i64::MIN)];
        let drawn: Vec<_> = [3, 8, 20, 40, 63]
            .into_iter()
            .flat_map(|bits| (0..60).map(move |_| bits))
            .map(|b| (draw(b), draw(b)))
            .collect();
        for (x, y) in around.into_iter().chain(drawn) {
            let certified = nearest_degrees(&Vector { x: whole(x), y: whole(y) }, &ratio(1, 100));
            let certified = certified.and_then(|(steps, _)| steps.to_u32());
            assert_eq!(hundredths_of(x, y), certified, "{x} {y}");
            let large = |part: i64| BigInt::from(part) * (BigInt::from(1) << 300u32) + 12345;
            if x.unsigned_abs() > 1 << 40 && y.unsigned_abs() > 1 << 40 {
                assert_eq!(hundredths_of_large(&large(x), &large(y)), certified, "{x} {y}");
            }
        }
    }
}
