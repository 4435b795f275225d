//! The body of a piece: both ends put together.

use super::Left;
use super::end::{End, Vertex};
use crate::exact::{Interval, Rational, RootSum, ratio, whole};
use num_bigint::BigInt;
use num_traits::Signed;
use std::borrow::Cow;
use std::cmp::Ordering;

/// Fractional bits of a corner's near place.
const NEAR: u32 = 64;

/// A corner: exact, and near enough for most questions.
#[derive(Clone, Debug)]
pub(super) struct Corner {
    exact: [RootSum; 2],
    /// In units of 2^-64, at most two units below the exact place.
    near: [BigInt; 2],
}

/// A piece that is cut at both ends.
#[derive(Clone, Debug)]
pub(super) struct Body {
    /// The left (lower) end first.
    pub(super) ends: [End; 2],
    pub(super) left: Left,
    /// Counter-clockwise; empty unless the piece is whole.
    pub(super) outline: Vec<Corner>,
    /// How many corners of the outline belong to the right end: they follow the first.
    pub(super) at_right_end: usize,
    pub(super) upper: RootSum,
    pub(super) lower: RootSum,
    pub(super) line: RootSum,
    pub(super) long: RootSum,
    pub(super) depth: Rational,
}

impl Body {
    /// The piece between two ends of one member.
    pub(super) fn new(ends: [End; 2]) -> Body {
        let [first, last] = &ends;
        let whole_line = first.times_itself();
        let between = |a: &RootSum, b: &RootSum| &(&whole_line - a) - b;
        let upper = between(first.at_left(), last.at_right());
        let lower = between(first.at_right(), last.at_left());
        let line = between(&first.at_line(), &last.at_line());
        let long = between(first.at_long_point(), last.at_long_point());
        let depth = &first.offsets[1] - &first.offsets[0];
        // How much is left is linear between the edges and the vertices, so that these tell it all.
        let at_vertices = [(first, last), (last, first)].into_iter().filter_map(|(end, other)| {
            let vertex = end.vertex.as_ref()?;
            Some(between(&vertex.along, &other.at(&-&vertex.across)).sign())
        });
        let signs: Vec<Ordering> = [upper.sign(), lower.sign()].into_iter().chain(at_vertices).collect();
        let left = if signs.iter().all(|&sign| sign == Ordering::Greater) {
            Left::Whole
        } else if signs.contains(&Ordering::Greater) {
            Left::Part
        } else {
            Left::Nothing
        };
        let [mut at_left, mut at_right] = [first, last].map(End::corners);
        let at_right_end = at_right.len();
        // Around: the lower left corner, the right end upwards, the left end downwards.
        let corners = at_left.pop().into_iter().chain(at_right.drain(..)).chain(at_left.drain(..));
        let outline = if left == Left::Whole { corners.map(Corner::new).collect() } else { Vec::new() };
        let [upper, lower, line, long] = [upper, lower, line, long].map(|times| first.true_length(&times));
        Body { left, outline, at_right_end, upper, lower, line, long, depth, ends }
    }

    /// The convex parts of the outline: itself, unless there is a notch.
    pub(super) fn parts(&self) -> Vec<Cow<'_, [Corner]>> {
        let [first, last] = &self.ends;
        if !first.is_notch && !last.is_notch {
            return vec![Cow::Borrowed(self.outline.as_slice())];
        }
        let [lower, upper] = first.edges();
        let mut borders = vec![lower];
        // Seen from the first end.
        let mut notches: Vec<RootSum> = [(first, false), (last, true)]
            .into_iter()
            .filter(|(end, _)| end.is_notch)
            .filter_map(|(end, is_back)| Some(seen(end.vertex.as_ref()?, is_back)))
            .collect();
        notches.sort_by(|a, b| a.compare(b));
        notches.dedup_by(|a, b| a.compare(b) == Ordering::Equal);
        borders.extend(notches);
        borders.push(upper);
        borders.windows(2).map(|between| Cow::Owned(self.part([&between[0], &between[1]]))).collect()
    }

    /// The part between two lines along the member.
    fn part(&self, [low, high]: [&RootSum; 2]) -> Vec<Corner> {
        let [first, last] = &self.ends;
        let vertex = |end: &End, is_back: bool| {
            let vertex = end.vertex.as_ref().filter(|_| !end.is_notch)?;
            let across = seen(vertex, is_back);
            let is_within = across.compare(low) == Ordering::Greater && across.compare(high) == Ordering::Less;
            is_within.then(|| end.place(&vertex.along, &vertex.across))
        };
        let at_first = |across: &RootSum| first.place(&first.at(across), across);
        let at_last = |across: &RootSum| last.place(&last.at(&-across), &-across);
        let corners = [
            Some(at_first(low)),
            Some(at_last(low)),
            vertex(last, true),
            Some(at_last(high)),
            Some(at_first(high)),
            vertex(first, false),
        ];
        corners.into_iter().flatten().map(Corner::new).collect()
    }

    /// The corners that belong to the left end, or to the right one, by their places in the outline.
    pub(super) fn corners_of(&self, side: usize) -> Vec<usize> {
        let right = 1..1 + self.at_right_end;
        (0..self.outline.len()).filter(|place| right.contains(place) == (side == 1)).collect()
    }
}

fn seen(vertex: &Vertex, is_back: bool) -> RootSum {
    if is_back { -&vertex.across } else { vertex.across.clone() }
}

impl Corner {
    fn new(exact: [RootSum; 2]) -> Corner {
        let near = [0, 1].map(|axis| exact[axis].units_below(NEAR));
        Corner { exact, near }
    }

    /// Enclosures of both coordinates, at most 2^-bits wide.
    pub(super) fn enclosures(&self, bits: u32) -> [Interval; 2] {
        [0, 1].map(|axis| self.exact[axis].enclosure(bits))
    }

    /// Whether the way from `self` over `middle` to `end` turns left (greater) or right (less); certain.
    pub(super) fn turn(&self, middle: &Corner, end: &Corner) -> Ordering {
        let (v, w) = (self.near_to(middle), self.near_to(end));
        let near = &v[0] * &w[1] - &v[1] * &w[0];
        if near.abs() > margin(&v, &w) {
            return near.cmp(&BigInt::from(0));
        }
        let (v, w) = (self.exactly_to(middle), self.exactly_to(end));
        (&v[0] * &w[1]).compare(&(&v[1] * &w[0]))
    }

    /// True when the corner between its neighbours, which are given clockwise and counter-clockwise of its inside, is an acute
    /// point below 15 degrees, whose tangent is 2 - √3.
    pub(super) fn is_sharp(&self, after: &Corner, before: &Corner) -> bool {
        let (v, w) = (self.near_to(after), self.near_to(before));
        let (cross, dot) = (&v[0] * &w[1] - &v[1] * &w[0], &v[0] * &w[0] + &v[1] * &w[1]);
        let margin = margin(&v, &w);
        let is_far = (&cross - &margin) * 100 > (&dot + &margin) * 27 && cross > margin;
        if is_far || dot < -&margin {
            return false;
        }
        let (v, w) = (self.exactly_to(after), self.exactly_to(before));
        let cross = &(&v[0] * &w[1]) - &(&v[1] * &w[0]);
        let dot = &(&v[0] * &w[0]) + &(&v[1] * &w[1]);
        let root = RootSum::root(&whole(3)).unwrap_or_default();
        let tangent = &RootSum::from(ratio(2, 1)) - &root;
        cross.is_positive() && dot.is_positive() && cross.compare(&(&tangent * &dot)) == Ordering::Less
    }

    fn near_to(&self, other: &Corner) -> [BigInt; 2] {
        [0, 1].map(|axis| &other.near[axis] - &self.near[axis])
    }

    fn exactly_to(&self, other: &Corner) -> [RootSum; 2] {
        [0, 1].map(|axis| &other.exact[axis] - &self.exact[axis])
    }
}

/// What a product of two near displacements may be wrong by: each part is within two units.
fn margin(v: &[BigInt; 2], w: &[BigInt; 2]) -> BigInt {
    let size: BigInt = v.iter().chain(w).map(|part| part.abs()).sum();
    size * 2 + 8
}
