//! Dimension strings for the drawing, whose printed values add up exactly.
//!
//! Each panel is rounded down to the step, and the steps that are then wanting go to the largest remainders, nearest the
//! middle first (largest remainder method, Hamilton 1792): every value stays within a step of the true one, and the string
//! adds up as printed. Where the panels are symmetric the values are too, as far as the count allows.

use crate::exact::{Point, Rational, order};
use crate::measure::Sheet;
use crate::truss::{JointId, Role, Truss};
use num_bigint::BigInt;
use num_traits::{Signed, ToPrimitive, Zero};

/// A dimension string.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct DimensionString {
    /// What it runs along: `bottom chord`, `top chord`, `heights`.
    pub along: &'static str,
    /// The joints from one end to the other; one of each place.
    pub joints: Vec<JointId>,
    /// The printed values between them.
    pub values: Vec<String>,
    /// The printed overall; the values add up to it exactly.
    pub overall: String,
    /// The string in trade notation: `3 @ 5'-8 9/16", 5'-8 5/8", 3 @ 5'-8 9/16" = 40'-0"`.
    pub text: String,
    /// The places in `values` that had to be printed a step away from their own rounding so that the string adds up.
    pub moved: Vec<usize>,
}

/// The strings of a truss with its joints at these points: along both chords, and of heights.
pub fn dimension_strings(truss: &Truss, points: &[Point]) -> Vec<DimensionString> {
    if points.len() != truss.joints.len() {
        return Vec::new();
    }
    let chord = |role: Role| {
        let ends = truss.members.iter().filter(|member| member.role == role).flat_map(|member| member.ends());
        ends.collect::<Vec<JointId>>()
    };
    let all = truss.members.iter().flat_map(|member| member.ends()).collect();
    [
        string(truss, points, "bottom chord", chord(Role::BottomChord), |p| &p.x),
        string(truss, points, "top chord", chord(Role::TopChord), |p| &p.x),
        string(truss, points, "heights", all, |p| &p.y),
    ]
    .into_iter()
    .flatten()
    .collect()
}

/// A string along one coordinate; `None` when there are not two places.
fn string(
    truss: &Truss,
    points: &[Point],
    along: &'static str,
    mut joints: Vec<JointId>,
    coordinate: fn(&Point) -> &Rational,
) -> Option<DimensionString> {
    let at = |id: &JointId| coordinate(&points[id.index()]);
    order::sort_by(&mut joints, |a, b| at(a).cmp(at(b)).then(a.cmp(b)));
    joints.dedup_by(|b, a| at(a) == at(b));
    let panels: Vec<Rational> = joints.windows(2).map(|pair| at(&pair[1]) - at(&pair[0])).collect();
    if panels.is_empty() {
        return None;
    }
    let step = &truss.step.value;
    let sheet = Sheet::of(truss.unit, step);
    let (printed, overall) = match step.is_positive() {
        true => rounded(&panels, step),
        false => (panels.clone(), panels.iter().sum()),
    };
    let own = |value: &Rational| match step.is_positive() {
        true => crate::exact::nearest_multiple(value, step).map_or_else(Rational::zero, |n| step * whole_of(n)),
        false => value.clone(),
    };
    let moved = (0..panels.len()).filter(|&i| own(&panels[i]) != printed[i]).collect();
    let values: Vec<String> = printed.iter().map(|value| sheet.exact_words(value)).collect();
    let overall = sheet.exact_words(&overall);
    let text = format!("{} = {overall}", grouped(&values));
    Some(DimensionString { along, joints, values, overall, text, moved })
}

fn whole_of(n: BigInt) -> Rational {
    Rational::from_integer(n)
}

/// Panels on the step that add up to the overall on the step.
fn rounded(panels: &[Rational], step: &Rational) -> (Vec<Rational>, Rational) {
    let shares: Vec<Rational> = panels.iter().map(|panel| panel / step).collect();
    let overall = (shares.iter().sum::<Rational>() + crate::exact::ratio(1, 2)).floor().to_integer();
    let mut steps: Vec<BigInt> = shares.iter().map(|share| share.floor().to_integer()).collect();
    let wanting = &overall - steps.iter().sum::<BigInt>();
    for place in takers(&shares, wanting.to_usize().unwrap_or(0)) {
        steps[place] += 1;
    }
    (steps.into_iter().map(|n| step * whole_of(n)).collect(), step * whole_of(overall))
}

/// The panels that take a step more: largest remainders first, then nearest the middle; symmetric where the panels are.
fn takers(shares: &[Rational], count: usize) -> Vec<usize> {
    let n = shares.len();
    let remainder = |i: usize| &shares[i] - shares[i].floor();
    let from_middle = |i: usize| (2 * i + 1).abs_diff(n);
    let mut order: Vec<usize> = (0..n).collect();
    order::sort_by(&mut order, |&i, &k| {
        remainder(k).cmp(&remainder(i)).then(from_middle(i).cmp(&from_middle(k))).then(i.cmp(&k))
    });
    let is_symmetric = (0..n).all(|i| shares[i] == shares[n - 1 - i]);
    if is_symmetric && n % 2 == 1 && !remainder(n / 2).is_zero() {
        // Pairs take two; an odd step can only go to the middle.
        order.retain(|&i| i != n / 2);
        order.insert(if count % 2 == 1 { 0 } else { n - 1 }, n / 2);
    }
    order.truncate(count);
    order
}

/// `3 @ 5'-8 9/16", 5'-8 5/8"`: equal values in a row together.
fn grouped(values: &[String]) -> String {
    let runs = values.chunk_by(|a, b| a == b).map(|run| match run {
        [one] => one.clone(),
        many => format!("{} @ {}", many.len(), many[0]),
    });
    runs.collect::<Vec<String>>().join(", ")
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::exact::{ratio, whole};
    use crate::measure::Written;
    use crate::truss::{Joint, Member};

    /// A bottom chord with joints at these places, printed to sixteenths.
    fn chord(places: &[Rational]) -> (Truss, Vec<Point>) {
        let mut truss = Truss { step: Written::plain(ratio(1, 16)), ..Truss::default() };
        let points: Vec<Point> = places.iter().map(|x| Point::new(x.clone(), whole(0))).collect();
        for (index, x) in places.iter().enumerate() {
            let (x, y) = (Written::plain(x.clone()), Written::plain(whole(0)));
            truss.joints.push(Joint { mark: format!("L{index}"), x, y, loose: false });
            if index > 0 {
                let (from, to) = (JointId::new(index - 1), JointId::new(index));
                truss.members.push(Member { mark: format!("B{index}"), from, to, role: Role::BottomChord });
            }
        }
        (truss, points)
    }

    #[test]
    fn seven_panels_of_forty_feet_add_up_with_the_sixteenth_in_the_middle() {
        let places: Vec<Rational> = (0..8).map(|i| ratio(480 * i, 7)).collect();
        let (truss, points) = chord(&places);
        let strings = dimension_strings(&truss, &points);
        assert_eq!(strings.len(), 1, "one chord, and all on one level");
        assert_eq!(strings[0].text, "3 @ 5'-8 9/16\", 5'-8 5/8\", 3 @ 5'-8 9/16\" = 40'-0\"");
        assert_eq!(strings[0].moved, vec![3], "the middle panel is printed a sixteenth more than it rounds to");
    }

    #[test]
    fn any_panels_add_up_within_a_step_and_symmetric_ones_stay_so() {
        for seed in 1..200i64 {
            let count = 2 + seed % 9;
            let half: Vec<Rational> =
                (0..count).map(|i| ratio(700 + (seed * 37 + i * 101) % 300, 1 + (seed + i) % 13)).collect();
            let panels: Vec<Rational> =
                half.iter().chain(half.iter().rev().skip((seed % 2) as usize)).cloned().collect();
            let step = ratio(1, 16);
            let (printed, overall) = rounded(&panels, &step);
            assert_eq!(printed.iter().sum::<Rational>(), overall, "seed {seed}");
            assert!((overall - panels.iter().sum::<Rational>()).abs() * whole(2) <= step, "seed {seed}");
            let mut lone = 0;
            for (i, (value, true_one)) in printed.iter().zip(&panels).enumerate() {
                assert!((value - true_one).abs() <= step, "seed {seed}, panel {i}");
                lone += usize::from(printed[i] != printed[panels.len() - 1 - i]);
            }
            // One pair at most is parted, where an odd step has no middle to go to.
            assert!(lone <= 2, "seed {seed}: {lone}");
        }
    }
}
