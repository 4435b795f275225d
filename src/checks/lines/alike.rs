//! Halves that are almost mirror images.

use super::super::findings::{Finding, Level, Rule};
use super::super::frame::{Frame, joint_ids};
use super::{Doubts, deviation};
use crate::exact::order;
use crate::exact::{Rational, Tier, quadrance, whole};
use num_bigint::BigInt;
use std::collections::{BTreeMap, HashMap};

/// Of the places of a truss that is meant to be alike at least three in so many mirror each other exactly.
const EXACT_OF: [usize; 2] = [3, 4];

/// The finding that names the joints that break a mirror image, if there is one.
///
/// A plumb axis is looked for, then a level one: the one about which the outermost joints of most heights mirror each other.
/// Asked of trusses on a lattice only; others have no axis that a drafter means.
pub(crate) fn nearly_alike(frame: &Frame, doubts: &mut Doubts) -> Vec<Finding> {
    if frame.lattice.tier() == Tier::Fractions || frame.joint_count() < 4 {
        return Vec::new();
    }
    for axis in 0..2 {
        match Mirror::new(frame, axis).answer(frame) {
            Alike::Exactly => return Vec::new(),
            Alike::Nearly(broken) => return tell(frame, axis, &broken, doubts).into_iter().collect(),
            Alike::No => {}
        }
    }
    Vec::new()
}

/// The places of the joints that members use, seen across an axis.
struct Mirror {
    /// Which coordinate is mirrored.
    axis: usize,
    /// The places, and the first joint at each.
    joints: HashMap<[i64; 2], usize>,
    /// In a fixed order.
    places: Vec<[i64; 2]>,
    /// Twice the coordinate of the axis.
    twice: i64,
}

/// Joints and their counterparts, which may be themselves.
struct Broken {
    pairs: Vec<[usize; 2]>,
    twice: i64,
    places: usize,
}

enum Alike {
    Exactly,
    Nearly(Broken),
    No,
}

impl Mirror {
    fn new(frame: &Frame, axis: usize) -> Mirror {
        let mut joints: HashMap<[i64; 2], usize> = HashMap::new();
        let mut places = Vec::new();
        for joint in (0..frame.joint_count()).filter(|&joint| !frame.around(joint).is_empty()) {
            joints.entry(frame.lattice.coarse(joint)).or_insert_with(|| {
                places.push(frame.lattice.coarse(joint));
                joint
            });
        }
        // Each height votes for the middle of its outermost joints.
        let mut outer: BTreeMap<i64, [i64; 2]> = BTreeMap::new();
        for place in &places {
            let ends = outer.entry(place[1 - axis]).or_insert([place[axis]; 2]);
            *ends = [ends[0].min(place[axis]), ends[1].max(place[axis])];
        }
        let mut votes: BTreeMap<i64, usize> = BTreeMap::new();
        outer.values().for_each(|ends| *votes.entry(ends[0] + ends[1]).or_default() += 1);
        let twice =
            votes.iter().max_by_key(|&(twice, votes)| (votes, std::cmp::Reverse(twice))).map_or(0, |(twice, _)| *twice);
        Mirror { axis, joints, places, twice }
    }

    fn image(&self, place: [i64; 2]) -> [i64; 2] {
        let mut image = place;
        image[self.axis] = self.twice - place[self.axis];
        image
    }

    fn answer(&self, frame: &Frame) -> Alike {
        let broken: Vec<[i64; 2]> =
            self.places.iter().copied().filter(|&place| !self.joints.contains_key(&self.image(place))).collect();
        let exact = self.places.len() - broken.len();
        if broken.is_empty() {
            return if self.places.len() < 4 { Alike::No } else { Alike::Exactly };
        }
        if exact < 3 || exact * EXACT_OF[1] < self.places.len() * EXACT_OF[0] {
            return Alike::No;
        }
        let reach = frame.reach.steps();
        let mut pairs = Vec::new();
        for &place in &broken {
            let image = self.image(place);
            let near = |other: &&[i64; 2]| other.iter().zip(image).all(|(a, b)| (a - b).abs() <= reach);
            let Some(partner) =
                broken.iter().filter(near).min_by_key(|o| (o[0] - image[0]).abs() + (o[1] - image[1]).abs())
            else {
                return Alike::No;
            };
            let (a, b) = (self.joints[&place], self.joints[partner]);
            pairs.push([a.min(b), a.max(b)]);
            if pairs.len() > MOST_BROKEN {
                return Alike::No;
            }
        }
        order::sort(&mut pairs);
        pairs.dedup();
        Alike::Nearly(Broken { pairs, twice: self.twice, places: self.places.len() })
    }
}

/// With more broken joints than this the halves are not meant to be alike.
const MOST_BROKEN: usize = 64;

fn tell(frame: &Frame, axis: usize, broken: &Broken, doubts: &mut Doubts) -> Option<Finding> {
    let half_steps = Rational::new(BigInt::from(broken.twice), BigInt::from(2));
    let low = lowest(frame, axis) + half_steps / frame.lattice.scale();
    let across = |joint: usize| {
        let mut point = frame.lattice.point(joint).clone();
        let coordinate = if axis == 0 { &mut point.x } else { &mut point.y };
        *coordinate = whole(2) * &low - &*coordinate;
        point
    };
    let square = |[a, b]: &[usize; 2]| quadrance(&across(*a), frame.lattice.point(*b));
    let means = |pair: &&[usize; 2]| frame.is_near(&square(pair), &pair[..]) && !doubts.any(&pair[..]);
    let pairs: Vec<&[usize; 2]> = broken.pairs.iter().filter(means).collect();
    let worst = pairs.iter().map(|pair| square(pair)).max()?;
    let mut joints: Vec<usize> = pairs.iter().flat_map(|pair| **pair).collect();
    joints.dedup();
    let name = if axis == 0 { "x" } else { "y" };
    let break_it = if joints.len() == 1 { "breaks it" } else { "break it" };
    let text = format!(
        "the halves are almost mirror images about {name} = {}: {} {break_it}, by {}",
        frame.print.length(&low),
        frame.print.joints(joints.iter().copied()),
        deviation(frame, &worst)
    );
    let mut finding = Finding::new(Rule::NearlyAlike, Level::Caution, text)
        .joints(joint_ids(joints.iter().copied()))
        .value("axis", format!("{name} = {low}"))
        .words(format!("{} of {} places mirror each other exactly.", broken.places - joints.len(), broken.places));
    for pair in pairs.iter().take(8) {
        let name = format!("image of {} from {}", frame.print.joint(pair[0]), frame.print.joint(pair[1]));
        finding = finding.value(name, format!("{}, off² {}", frame.print.place(&across(pair[0])), square(pair)));
    }
    doubts.mark(joints);
    Some(finding)
}

fn lowest(frame: &Frame, axis: usize) -> Rational {
    let steps = Rational::from_integer(frame.lattice.coarse(0)[axis].into());
    let value = if axis == 0 { &frame.lattice.point(0).x } else { &frame.lattice.point(0).y };
    value - steps / frame.lattice.scale()
}
