//! What runs through at a joint, and what stops against what.

use super::shop::Shop;
use crate::checks::frame::Frame;
use crate::exact::{Rational, RootSum, Vector, compare_directions};
use crate::truss::Role;
use num_traits::{Signed, Zero};
use std::cmp::Ordering;

/// A member as seen from one of its ends.
pub(super) struct Stick {
    /// The member.
    pub(super) member: usize,
    /// From this joint to the one at its other end.
    pub(super) along: Vector,
    /// `along` turned a quarter to the left.
    pub(super) across: Vector,
    /// The quadrance of `along`.
    pub(super) quadrance: Rational,
    /// The length of `along`.
    pub(super) length: RootSum,
    /// How far its right edge lies to the left of the working line.
    pub(super) right: Rational,
    /// How far its left edge lies to the left of the working line.
    pub(super) left: Rational,
    /// What has a smaller one runs through before it.
    order: u8,
}

/// What an end is cut by, by the places of the sticks around the joint.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum Stop {
    /// Nothing: square, at the working point.
    Free,
    /// Square, against the end of what comes from the opposite direction.
    Butt(usize),
    /// The corner with its partner.
    Mitre(usize),
    /// The near edges of what runs through to the left and to the right of it.
    Against {
        /// Counter-clockwise of it, by less than half a turn.
        left: Option<usize>,
        /// Clockwise of it, by less than half a turn.
        right: Option<usize>,
    },
}

/// Everything that meets at a joint, counter-clockwise from the right, with what stops it.
pub(super) struct Meeting {
    pub(super) sticks: Vec<Stick>,
    pub(super) stops: Vec<Stop>,
}

/// Chords run through before posts, posts before webs, webs before others.
fn rank(role: Role) -> u8 {
    match role {
        Role::TopChord | Role::BottomChord => 1,
        Role::Post => 2,
        Role::Web => 3,
        Role::Other => 4,
    }
}

impl Stick {
    /// Where a line `offset` to the left of this working line meets a line `edge` to the left of the other's: how far along
    /// this one from the joint, times its length. `None` when the two are parallel.
    pub(super) fn meet(&self, offset: &Rational, other: &Stick, edge: &Rational) -> Option<RootSum> {
        let closing = other.across.dot(&self.along);
        if closing.is_zero() {
            return None;
        }
        let theirs = other.length.scaled(&(&self.quadrance * edge / &closing));
        let own = self.length.scaled(&(other.across.dot(&self.across) * offset / closing));
        Some(&theirs - &own)
    }

    fn turn(&self, other: &Stick) -> Ordering {
        self.along.cross(&other.along).cmp(&Rational::zero())
    }

    fn is_opposite(&self, other: &Stick) -> bool {
        self.turn(other) == Ordering::Equal && self.along.dot(&other.along).is_negative()
    }

    fn is_same_way(&self, other: &Stick) -> bool {
        self.turn(other) == Ordering::Equal && self.along.dot(&other.along).is_positive()
    }
}

impl Meeting {
    /// Looks at a joint. Quadratic in the members there at worst.
    pub(super) fn at(frame: &Frame, shop: &Shop, joint: usize) -> Meeting {
        let mut sticks: Vec<Stick> = frame
            .around(joint)
            .iter()
            .map(|spoke| {
                let member = spoke.member as usize;
                let along = frame.lattice.displacement([joint, spoke.far as usize]);
                let quadrance = along.quadrance();
                let [lower, upper] = shop.stock(frame.role(member)).edges();
                let outward = frame.left_to_right(member)[0] == joint;
                let (right, left) = if outward { (lower, upper) } else { (-upper, -lower) };
                Stick {
                    member,
                    across: Vector { x: -&along.y, y: along.x.clone() },
                    length: RootSum::root(&quadrance).unwrap_or_default(),
                    along,
                    quadrance,
                    right,
                    left,
                    order: rank(frame.role(member)),
                }
            })
            .collect();
        let through = through(&sticks);
        let pair = match through.as_slice() {
            [a, b] => Some([*a, *b]),
            _ => None,
        };
        through.iter().for_each(|&place| sticks[place].order = 0);
        let stops = (0..sticks.len()).map(|place| stop(&sticks, pair, place)).collect();
        Meeting { sticks, stops }
    }
}

/// What runs through: two of the best rank, or the only one of it, or none where all of them lie in one direction.
fn through(sticks: &[Stick]) -> Vec<usize> {
    let best = sticks.iter().map(|stick| stick.order).min();
    let best: Vec<usize> = (0..sticks.len()).filter(|&place| Some(sticks[place].order) == best).collect();
    if best.len() < 2 {
        return best;
    }
    straight(sticks, &best).or_else(|| widest(sticks, &best)).map_or_else(Vec::new, Vec::from)
}

/// The two in line with each other; of more than one such pair the one with the first member of the list.
fn straight(sticks: &[Stick], best: &[usize]) -> Option<[usize; 2]> {
    let opposite = |&place: &usize| {
        let back = -&sticks[place].along;
        let at = best.partition_point(|&other| compare_directions(&sticks[other].along, &back) == Ordering::Less);
        let other = *best.get(at)?;
        sticks[place].is_opposite(&sticks[other]).then_some([place, other])
    };
    best.iter().filter_map(opposite).min_by_key(|pair| {
        let mut members = pair.map(|place| sticks[place].member);
        members.sort_unstable();
        members
    })
}

/// The two on either side of the widest open sector.
fn widest(sticks: &[Stick], best: &[usize]) -> Option<[usize; 2]> {
    let sector = |i: usize| {
        let (a, b) = (&sticks[best[i]], &sticks[best[(i + 1) % best.len()]]);
        Vector { x: a.along.dot(&b.along), y: a.along.cross(&b.along) }
    };
    let sectors: Vec<Vector> = (0..best.len()).map(sector).collect();
    let members = |i: usize| {
        let mut members = [i, (i + 1) % best.len()].map(|i| sticks[best[i]].member);
        members.sort_unstable();
        members
    };
    let widest = (0..best.len())
        .max_by(|&i, &j| compare_directions(&sectors[i], &sectors[j]).then_with(|| members(j).cmp(&members(i))))?;
    let pair = [best[widest], best[(widest + 1) % best.len()]];
    (sticks[pair[0]].turn(&sticks[pair[1]]) != Ordering::Equal).then_some(pair)
}

fn stop(sticks: &[Stick], pair: Option<[usize; 2]>, place: usize) -> Stop {
    let stick = &sticks[place];
    let partner = pair.and_then(|[a, b]| if place == a { Some(b) } else { (place == b).then_some(a) });
    if let Some(partner) = partner {
        return match stick.turn(&sticks[partner]) {
            Ordering::Equal => Stop::Free,
            _ => Stop::Mitre(partner),
        };
    }
    let count = sticks.len();
    let runs_before = |&other: &usize| sticks[other].order < stick.order && !stick.is_same_way(&sticks[other]);
    let left = (1..count).map(|i| (place + i) % count).find(runs_before);
    let right = (1..count).map(|i| (place + count - i) % count).find(runs_before);
    let faces = |other: Option<usize>, turn| other.filter(|&other| stick.turn(&sticks[other]) == turn);
    match (faces(left, Ordering::Greater), faces(right, Ordering::Less)) {
        (None, None) => left.filter(|&other| stick.is_opposite(&sticks[other])).map_or(Stop::Free, Stop::Butt),
        (left, right) => Stop::Against { left, right },
    }
}
