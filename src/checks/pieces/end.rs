//! The shape of one end of a piece: how far from the joint its cuts are, across its depth.
//!
//! Distances along a member are kept times its length, distances across it as well, so that every corner is a sum of
//! rational multiples of the lengths of the members that meet there.

use super::meet::{Meeting, Stick, Stop};
use crate::exact::{Point, Rational, RootSum, Vector};
use num_traits::{One, Signed, Zero};
use std::cmp::Ordering;

/// One straight cut.
#[derive(Clone, Debug)]
pub(super) struct Slice {
    /// How far from the joint it meets the right edge, times the member's length.
    pub(super) right: RootSum,
    /// How far from the joint it meets the left edge, times the member's length.
    pub(super) left: RootSum,
    /// The member it is cut against.
    pub(super) against: Option<usize>,
    /// The corner with another member.
    pub(super) is_mitre: bool,
}

/// Where two cuts meet inside the depth.
#[derive(Clone, Debug)]
pub(super) struct Vertex {
    /// Along the member from the joint, times its length.
    pub(super) along: RootSum,
    /// Across it to the left of the working line, times its length.
    pub(super) across: RootSum,
}

/// One end of a piece, seen from its joint along the member.
#[derive(Clone, Debug)]
pub(super) struct End {
    /// One cut, or two that meet at the vertex: the one at the right edge first.
    pub(super) slices: Vec<Slice>,
    /// Where two cuts meet.
    pub(super) vertex: Option<Vertex>,
    /// The two cuts leave a notch, not a point.
    pub(super) is_notch: bool,
    point: Point,
    along: Vector,
    quadrance: Rational,
    length: RootSum,
    pub(super) offsets: [Rational; 2],
}

impl End {
    /// The end of the member at this place around the joint.
    pub(super) fn new(meeting: &Meeting, place: usize, point: &Point, gap: &Rational) -> End {
        let stick = &meeting.sticks[place];
        let mut end = End {
            slices: Vec::new(),
            vertex: None,
            is_notch: false,
            point: point.clone(),
            along: stick.along.clone(),
            quadrance: stick.quadrance.clone(),
            length: stick.length.clone(),
            offsets: [stick.right.clone(), stick.left.clone()],
        };
        let level = |along: RootSum, against| Slice { right: along.clone(), left: along, against, is_mitre: false };
        match meeting.stops[place] {
            Stop::Free => {}
            Stop::Butt(other) => {
                end.slices.push(level(stick.length.scaled(gap), Some(meeting.sticks[other].member)));
            }
            Stop::Mitre(other) => end.slices.extend(mitre(stick, &meeting.sticks[other])),
            Stop::Against { left, right } => {
                let left = left.map(|place| &meeting.sticks[place]);
                let right = right.map(|place| &meeting.sticks[place]);
                end.stop_against(stick, left, right, gap);
            }
        }
        if end.slices.is_empty() {
            end.slices.push(level(RootSum::default(), None));
        }
        end
    }

    fn stop_against(&mut self, stick: &Stick, left: Option<&Stick>, right: Option<&Stick>, gap: &Rational) {
        // The near edge of what runs through to the left is its right one, moved back towards this member.
        let near_left = left.map(|other| (other, &other.right - gap));
        let near_right = right.map(|other| (other, &other.left + gap));
        let cut = |near: &Option<(&Stick, Rational)>| {
            let (other, edge) = near.as_ref()?;
            slice(stick, other, [edge, edge], false)
        };
        match (cut(&near_left), cut(&near_right)) {
            (Some(by_left), Some(by_right)) => {
                // Less than half a turn from one to the other: both have to be cleared; more: either is enough.
                let turn = right.zip(left).map(|(right, left)| right.along.cross(&left.along));
                let is_notch = turn.is_some_and(|turn| turn.is_negative());
                let corner = near_left.zip(near_right).and_then(|(left, right)| corner(stick, left, right));
                self.put_both(by_left, by_right, is_notch, corner);
            }
            (one, other) => self.slices.extend(one.or(other)),
        }
    }

    /// Keeps what counts of two cuts.
    fn put_both(&mut self, by_left: Slice, by_right: Slice, is_notch: bool, corner: Option<Vertex>) {
        let wanted = if is_notch { Ordering::Less } else { Ordering::Greater };
        // At an edge the cut further from the joint counts, or in a notch the nearer.
        let at_right = by_left.right.compare(&by_right.right);
        let at_left = by_left.left.compare(&by_right.left);
        let by_left_counts = |order: Ordering| order == wanted;
        let by_right_counts = |order: Ordering| order == wanted.reverse();
        match corner {
            Some(vertex) if by_left_counts(at_right) && by_right_counts(at_left) => {
                (self.slices, self.vertex, self.is_notch) = (vec![by_left, by_right], Some(vertex), is_notch);
            }
            Some(vertex) if by_right_counts(at_right) && by_left_counts(at_left) => {
                (self.slices, self.vertex, self.is_notch) = (vec![by_right, by_left], Some(vertex), is_notch);
            }
            _ if by_left_counts(at_right) || by_left_counts(at_left) => self.slices.push(by_left),
            _ => self.slices.push(by_right),
        }
    }

    /// How far from the joint the end is at the right edge, times the member's length.
    pub(super) fn at_right(&self) -> &RootSum {
        &self.slices[0].right
    }

    /// The same at the left edge.
    pub(super) fn at_left(&self) -> &RootSum {
        &self.slices[self.slices.len() - 1].left
    }

    /// The same at the long point: the corner nearest to the joint.
    pub(super) fn at_long_point(&self) -> &RootSum {
        let corners = [self.at_left()].into_iter().chain(self.vertex.as_ref().map(|vertex| &vertex.along));
        corners.fold(self.at_right(), |long, at| if at.compare(long) == Ordering::Less { at } else { long })
    }

    /// The same at the working line.
    pub(super) fn at_line(&self) -> RootSum {
        self.at(&RootSum::default())
    }

    /// The same at a distance to the left of the working line, which is given times the member's length as well. Outside the
    /// depth the cuts are prolonged.
    pub(super) fn at(&self, across: &RootSum) -> RootSum {
        let [right, left] = &self.offsets;
        let depth = left - right;
        if depth.is_zero() {
            return self.at_right().clone();
        }
        // The share of the depth from the right edge.
        let offset = (across * &self.length).scaled(&self.quadrance.recip());
        let share = (&offset - &RootSum::from(right.clone())).scaled(&depth.recip());
        let place = |slice: &Slice| &slice.right + &(&share * &(&slice.left - &slice.right));
        match self.slices.as_slice() {
            [first, second] => {
                let (first, second) = (place(first), place(second));
                let further = first.compare(&second) == Ordering::Greater;
                if further == self.is_notch { second } else { first }
            }
            slices => slices.first().map(place).unwrap_or_default(),
        }
    }

    /// The two edges, times the member's length: the right one first.
    pub(super) fn edges(&self) -> [RootSum; 2] {
        [0, 1].map(|side| self.length.scaled(&self.offsets[side]))
    }

    /// The place on the board of something along and across the member, both times its length.
    pub(super) fn place(&self, along: &RootSum, across: &RootSum) -> [RootSum; 2] {
        let share = self.quadrance.recip();
        let (x, y) = (&self.along.x * &share, &self.along.y * &share);
        let place = |from: &Rational, a: &Rational, b: &Rational| {
            &(&along.scaled(a) + &across.scaled(b)) + &RootSum::from(from.clone())
        };
        [place(&self.point.x, &x, &-&y), place(&self.point.y, &y, &x)]
    }

    /// The corners from the left edge to the right one.
    pub(super) fn corners(&self) -> Vec<[RootSum; 2]> {
        let [right, left] = self.edges();
        let mut corners = vec![self.place(self.at_left(), &left)];
        corners.extend(self.vertex.iter().map(|vertex| self.place(&vertex.along, &vertex.across)));
        corners.push(self.place(self.at_right(), &right));
        corners
    }

    /// A distance that is kept times the member's length, as a length.
    pub(super) fn true_length(&self, times: &RootSum) -> RootSum {
        (times * &self.length).scaled(&self.quadrance.recip())
    }

    /// The length of the member, times itself.
    pub(super) fn times_itself(&self) -> RootSum {
        RootSum::from(self.quadrance.clone())
    }

    /// How far a cut runs along the member for each unit of depth: 0 for a square cut. Not negative. `None` without depth.
    pub(super) fn skew(&self, slice: &Slice) -> Option<RootSum> {
        let depth = &self.offsets[1] - &self.offsets[0];
        if depth.is_zero() {
            return None;
        }
        Some(self.true_length(&(&slice.left - &slice.right).abs()).scaled(&(Rational::one() / depth)))
    }
}

/// The cut of `stick` by two offsets of another: where its right edge meets the first, and its left edge the second.
fn slice(stick: &Stick, other: &Stick, [at_right, at_left]: [&Rational; 2], is_mitre: bool) -> Option<Slice> {
    Some(Slice {
        right: stick.meet(&stick.right, other, at_right)?,
        left: stick.meet(&stick.left, other, at_left)?,
        against: Some(other.member),
        is_mitre,
    })
}

/// Through the meetings of the outer and of the inner edges: the right edge of each with the left edge of the other.
fn mitre(stick: &Stick, other: &Stick) -> Option<Slice> {
    slice(stick, other, [&other.left, &other.right], true)
}

/// Where two edges meet, seen along a member.
fn corner(stick: &Stick, (a, at_a): (&Stick, Rational), (b, at_b): (&Stick, Rational)) -> Option<Vertex> {
    let turn = a.across.cross(&b.across);
    if turn.is_zero() {
        return None;
    }
    let (a_reach, b_reach) = (a.length.scaled(&(at_a / &turn)), b.length.scaled(&(at_b / &turn)));
    let x = &a_reach.scaled(&b.across.y) - &b_reach.scaled(&a.across.y);
    let y = &b_reach.scaled(&a.across.x) - &a_reach.scaled(&b.across.x);
    let seen = |v: &Vector| &x.scaled(&v.x) + &y.scaled(&v.y);
    Some(Vertex { along: seen(&stick.along), across: seen(&stick.across) })
}
