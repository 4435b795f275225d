//! What crosses, overlaps and stands on what, against robust predicates in floating point, geo, and fractions.

#[path = "../../close_help/mod.rs"]
mod close_help;
#[path = "../../trusses/mod.rs"]
mod trusses;

use chordwright::checks::{Limits, Rule, report};
use chordwright::exact::{Rational, ratio, whole};
use chordwright::truss::Truss;
use close_help::generate::Dice;
use geo::line_intersection::LineIntersection;
use geo::sweep::{Cross, Intersections};
use num_traits::{ToPrimitive, Zero};
use std::cmp::Ordering;
use std::collections::BTreeSet;

/// A place: compared from left to right, then upwards.
type Place = (Rational, Rational);

/// Pairs of members, the earlier first.
type Pairs = BTreeSet<(usize, usize)>;

/// What meets where it should not.
#[derive(Debug, Default, PartialEq, Eq)]
struct Met {
    crossings: Pairs,
    overlaps: Pairs,
    /// Places inside members, by a joint that stands there.
    on_member: BTreeSet<(Place, usize)>,
}

/// The side of a line on which a place is.
type Side = fn([&Place; 3]) -> Ordering;

/// By an adaptive predicate, which is exact for places that floating point holds.
fn side_by_robust(places: [&Place; 3]) -> Ordering {
    let coordinate = |value: &Rational| {
        let number = value.to_f64().expect("a number");
        assert_eq!(Rational::from_float(number).as_ref(), Some(value), "floating point holds it");
        number
    };
    let [a, b, c] = places.map(|(x, y)| robust::Coord { x: coordinate(x), y: coordinate(y) });
    robust::orient2d(a, b, c).partial_cmp(&0.0).expect("a number")
}

/// In fractions of any size.
fn side_by_fractions([a, b, c]: [&Place; 3]) -> Ordering {
    let cross = (&b.0 - &a.0) * (&c.1 - &a.1) - (&b.1 - &a.1) * (&c.0 - &a.0);
    cross.cmp(&Rational::zero())
}

/// Members with their places, without those that have no length or join what an earlier one joins.
struct Drawn {
    places: Vec<Place>,
    members: Vec<(usize, [usize; 2])>,
}

impl Drawn {
    fn of(truss: &Truss) -> Drawn {
        let places: Vec<Place> = truss.points().into_iter().map(|point| (point.x, point.y)).collect();
        let mut joined = BTreeSet::new();
        let mut members = Vec::new();
        for (index, member) in truss.members.iter().enumerate() {
            let [a, b] = member.ends().map(|joint| joint.index());
            if places[a] != places[b] && joined.insert([a.min(b), a.max(b)]) {
                members.push((index, if places[a] < places[b] { [a, b] } else { [b, a] }));
            }
        }
        Drawn { places, members }
    }

    /// Every pair looked at, and every joint with every member.
    fn met(&self, side: Side) -> Met {
        let mut met = Met::default();
        for (i, &(s, [a, b])) in self.members.iter().enumerate() {
            let inside = |place: &Place| self.is_inside(place, [a, b], side);
            let on: Vec<&Place> = self.places.iter().filter(|place| inside(place)).collect();
            met.on_member.extend(on.iter().map(|&place| (place.clone(), s)));
            for &(t, [c, d]) in &self.members[i + 1..] {
                let sides = [[a, b, c], [a, b, d], [c, d, a], [c, d, b]];
                let [c_side, d_side, a_side, b_side] =
                    sides.map(|joints| side(joints.map(|joint| &self.places[joint])));
                let parted = |p: Ordering, q: Ordering| p != Ordering::Equal && p == q.reverse();
                if parted(c_side, d_side) && parted(a_side, b_side) {
                    if !on.iter().any(|place| self.is_inside(place, [c, d], side)) {
                        met.crossings.insert((s, t));
                    }
                } else if c_side.is_eq() && d_side.is_eq() {
                    let [a, b, c, d] = [a, b, c, d].map(|joint| &self.places[joint]);
                    if a.max(c) < b.min(d) {
                        met.overlaps.insert((s, t));
                    }
                }
            }
        }
        met
    }

    fn is_inside(&self, place: &Place, [a, b]: [usize; 2], side: Side) -> bool {
        let (low, high) = (&self.places[a], &self.places[b]);
        low < place && place < high && side([low, high, place]).is_eq()
    }

    /// What geo's sweep finds, without what crosses just where a joint is.
    fn met_by_geo(&self) -> [Pairs; 2] {
        let number = |value: &Rational| value.to_f64().expect("a number");
        let at = |joint: usize| geo::Coord { x: number(&self.places[joint].0), y: number(&self.places[joint].1) };
        let segments =
            self.members.iter().map(|&(member, [a, b])| Segment { member, line: geo::Line::new(at(a), at(b)) });
        let [mut crossings, mut overlaps] = [Pairs::new(), Pairs::new()];
        for (s, t, how) in Intersections::from_iter(segments) {
            let pair = (s.member.min(t.member), s.member.max(t.member));
            match how {
                LineIntersection::SinglePoint { is_proper: true, .. } if !self.cross_at_joint(pair) => {
                    crossings.insert(pair);
                }
                LineIntersection::Collinear { intersection } if intersection.start != intersection.end => {
                    overlaps.insert(pair);
                }
                _ => {}
            }
        }
        [crossings, overlaps]
    }

    fn cross_at_joint(&self, (s, t): (usize, usize)) -> bool {
        let ends = |member: usize| self.members.iter().find(|(index, _)| *index == member).expect("a member").1;
        let [a, b] = [ends(s), ends(t)];
        let in_both =
            |place: &Place| self.is_inside(place, a, side_by_robust) && self.is_inside(place, b, side_by_robust);
        self.places.iter().any(in_both)
    }
}

#[derive(Clone, Debug)]
struct Segment {
    member: usize,
    line: geo::Line<f64>,
}

impl Cross for Segment {
    type Scalar = f64;

    fn line(&self) -> geo::Line<f64> {
        self.line
    }
}

/// What the report says.
fn reported(truss: &Truss) -> Met {
    let limits = Limits { most_findings: 100_000, ..Limits::default() };
    let mut met = Met::default();
    for finding in report(truss, &limits).findings {
        let members: Vec<usize> = finding.members.iter().map(|member| member.index()).collect();
        match (finding.rule, members.as_slice()) {
            (Rule::Crossing, &[s, t]) => _ = met.crossings.insert((s, t)),
            (Rule::Overlap, &[s, t]) => _ = met.overlaps.insert((s, t)),
            (Rule::JointOnMember, &[member]) => {
                let point = truss.joint(finding.joints[0]).point();
                met.on_member.insert(((point.x, point.y), member));
            }
            (Rule::Crossing | Rule::Overlap | Rule::JointOnMember, other) => panic!("{:?}: {other:?}", finding.rule),
            _ => {}
        }
    }
    met
}

/// Joints at these places, and members between random ones of them.
fn joined(places: &[Place], members: usize, dice: &mut Dice) -> Truss {
    let count = places.len();
    let ends: Vec<(usize, usize)> =
        (0..members).map(|_| (dice.below(count), dice.below(count))).filter(|(a, b)| a != b).collect();
    trusses::rational_frame(places, &ends)
}

/// Every member with two joints of its own.
fn loose(places: &[Place]) -> Truss {
    let ends: Vec<(usize, usize)> = (0..places.len() / 2).map(|i| (2 * i, 2 * i + 1)).collect();
    trusses::rational_frame(places, &ends)
}

/// Random places, each part below `side`, times a step and moved.
fn scattered(count: usize, side: i64, dice: &mut Dice, part: impl Fn(i64, &mut Dice) -> Rational) -> Vec<Place> {
    let mut one = || {
        let value = dice.between(-side, side);
        part(value, dice)
    };
    (0..count).map(|_| (one(), one())).collect()
}

fn check(truss: &Truss, side: Side, name: &str) -> usize {
    let (drawn, reported) = (Drawn::of(truss), reported(truss));
    assert_eq!(reported, drawn.met(side), "{name}: {truss:?}");
    reported.crossings.len() + reported.overlaps.len() + reported.on_member.len()
}

fn check_with_geo(truss: &Truss, name: &str) -> usize {
    let [crossings, overlaps] = Drawn::of(truss).met_by_geo();
    let reported = reported(truss);
    assert_eq!([&reported.crossings, &reported.overlaps], [&crossings, &overlaps], "{name}: {truss:?}");
    check(truss, side_by_robust, name)
}

/// Coarse places: nearly everything is in line, shared or touching.
#[test]
fn on_few_places_as_robust_and_geo_say() {
    let mut dice = Dice::new(1);
    let mut met = 0;
    for round in 0..600 {
        let side = 1 + (round % 6) as i64;
        let places = scattered(4 + round % 12, side, &mut dice, |value, _| whole(value));
        met += check_with_geo(&joined(&places, 4 + round % 16, &mut dice), &format!("joined, round {round}"));
        met += check_with_geo(&loose(&places), &format!("loose, round {round}"));
    }
    assert!(met > 4_000, "only {met} meetings were tried");
}

/// Places all over, in sixteenths and in halves of the finest step that floating point has there.
#[test]
fn all_over_as_robust_and_geo_say() {
    let mut dice = Dice::new(2);
    let mut met = 0;
    for round in 0..70 {
        let places = scattered(60, 1 << 20, &mut dice, |value, _| ratio(value, 16));
        met += check_with_geo(&loose(&places), &format!("sixteenths, round {round}"));
        let places = scattered(24, 1 << 46, &mut dice, |value, _| whole(value));
        met += check_with_geo(&joined(&places, 30, &mut dice), &format!("large, round {round}"));
    }
    assert!(met > 4_000, "only {met} meetings were tried");
}

/// Places along a few lines, some off by the finest step of a floating-point number: rounded arithmetic goes wrong here.
#[test]
fn almost_in_line_as_robust_says() {
    let mut dice = Dice::new(3);
    let mut met = 0;
    for round in 0..300 {
        let [dx, dy] = [dice.between(1, 1 << 20), dice.between(-(1 << 20), 1 << 20)];
        let mut place = || {
            let along = dice.between(0, 1 << 28);
            let mut part = |slope: i64| whole(slope * along + if dice.below(3) == 0 { dice.between(-1, 1) } else { 0 });
            (part(dx), part(dy))
        };
        let places: Vec<Place> = (0..16).map(|_| place()).collect();
        met += check(&loose(&places), side_by_robust, &format!("round {round}"));
    }
    assert!(met > 1_000, "only {met} meetings were tried");
}

/// Places beyond what floating point tells apart: whole numbers of up to 100 bits, also with odd denominators.
#[test]
fn at_huge_places_as_fractions_say() {
    let mut dice = Dice::new(4);
    let mut met = 0;
    for round in 0..300 {
        let far = whole(1) * Rational::from_integer(num_bigint::BigInt::from(1) << (54 + round % 47));
        let over = whole([1, 1, 7, 16, 3 * 5 * 11 * 13][round % 5]);
        let side = [2, 3, 1 << 40][round % 3];
        let part = |value: i64, dice: &mut Dice| {
            let near = if dice.below(4) == 0 { dice.between(-1, 1) } else { 0 };
            &far + (&far * whole(value) + whole(near)) / &over
        };
        let places = scattered(14, side, &mut dice, part);
        met += check(&joined(&places, 14, &mut dice), side_by_fractions, &format!("joined, round {round}"));
        met += check(&loose(&places), side_by_fractions, &format!("loose, round {round}"));
    }
    assert!(met > 4_000, "only {met} meetings were tried");
}
