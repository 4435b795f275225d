//! Boxes that hold every admissible place, narrowed by the conditions.
//!
//! Kept for the way between each pair of joints that a condition names, and from the origin to every joint; so neighbours
//! keep a narrow box between them even where both are far from the origin. Forward and backward narrowing over the
//! conditions (hull consistency, Benhamou and others 1999) and over triangles of ways.

use super::span::{Span, span_of, squares_of};
use super::{Source, Stress};
use crate::checks::close::meaning::{Axis, Condition, Function, Sense};
use crate::checks::close::sides::Side;
use crate::exact::order;
use crate::exact::{Interval, Orientation, Point, Rational, whole};
use crate::truss::{JointId, Truss};
use num_traits::{One, Signed};
use std::collections::BTreeMap;

/// The box of the way between two joints: along x and along y.
pub(crate) type Way = [Span; 2];

/// Sweeps over all conditions before narrowing is left as it is.
const MOST_SWEEPS: usize = 40;

/// The layout of boxes: which joints, which ways, and what narrows them.
#[derive(Clone, Debug)]
pub(crate) struct Frame {
    /// The joints, the origin first.
    pub joints: Vec<JointId>,
    places: BTreeMap<JointId, usize>,
    /// Ways between joints (by their places in `joints`), the lower place first; those from the origin come first.
    pub ways: Vec<[usize; 2]>,
    by_ends: BTreeMap<[usize; 2], usize>,
    triangles: Vec<[usize; 3]>,
    narrowings: Vec<Narrowing>,
    sides: Vec<([usize; 3], i128)>,
    start: Vec<Way>,
}

#[derive(Clone, Debug)]
enum Narrowing {
    Along { ends: [usize; 2], axis: usize, span: Span },
    Length { ends: [usize; 2], squares: (i128, Option<i128>) },
    Slope { ends: [usize; 2], small: usize, senses: [Sense; 2], lo: i128, hi: i128 },
    Difference { first: [usize; 2], second: [usize; 2], span: Span },
}

/// Slopes are kept in units of 2^-SLOPE_BITS.
const SLOPE_BITS: u32 = 40;

/// The condition a source names; `None` when there is no such.
pub(crate) fn condition_of(conditions: &[Vec<Condition>], source: Source) -> Option<&Condition> {
    conditions.get(source.figure.index())?.get(source.condition)
}

impl Frame {
    /// The frame of a stress; `None` when the stress is not well formed or turns what it may not.
    pub(crate) fn new(truss: &Truss, conditions: &[Vec<Condition>], sides: &[Side], stress: &Stress) -> Option<Frame> {
        let used: Vec<&Condition> =
            stress.conditions.iter().map(|s| condition_of(conditions, *s)).collect::<Option<_>>()?;
        let sides: Vec<&Side> = stress.sides.iter().map(|index| sides.get(*index)).collect::<Option<_>>()?;
        let joints = joints_of(stress, &used, &sides);
        let is_there = |joint: JointId| joint.index() < truss.joints.len();
        if !stress.unit.is_positive() || !is_there(stress.origin) || !stress.turned.is_none_or(is_there) {
            return None;
        }
        let mut places: BTreeMap<JointId, usize> = BTreeMap::new();
        places.extend(joints.iter().enumerate().map(|(place, id)| (*id, place)));
        let mut frame = Frame {
            ways: (1..joints.len()).map(|place| [0, place]).collect(),
            joints,
            places,
            by_ends: BTreeMap::new(),
            triangles: Vec::new(),
            narrowings: Vec::new(),
            sides: Vec::new(),
            start: Vec::new(),
        };
        for condition in &used {
            let joints = condition.function.joints();
            frame.add_ways(&legs(&condition.function, &joints));
            frame.narrowings.extend(frame.narrowing(condition, &stress.unit));
        }
        for side in sides {
            let [a, b, c] = side.joints.map(|id| frame.places.get(&id).copied().unwrap_or(0));
            frame.add_ways(&[[side.joints[0], side.joints[1]], [side.joints[0], side.joints[2]]]);
            frame.sides.push(([a, b, c], if side.orientation == Orientation::Left { 1 } else { -1 }));
        }
        order::sort(&mut frame.ways);
        frame.ways.dedup();
        frame.by_ends.extend(frame.ways.iter().enumerate().map(|(way, ends)| (*ends, way)));
        frame.find_triangles();
        frame.start = frame.starting(truss, stress, &used)?;
        Some(frame)
    }

    fn add_ways(&mut self, legs: &[[JointId; 2]]) {
        for leg in legs {
            if let [Some(&a), Some(&b)] = leg.map(|id| self.places.get(&id))
                && a != b
            {
                self.ways.push([a.min(b), a.max(b)]);
            }
        }
    }

    /// The place of a joint among the joints of the boxes.
    pub(crate) fn place(&self, joint: JointId) -> Option<usize> {
        self.places.get(&joint).copied()
    }

    fn narrowing(&self, condition: &Condition, unit: &Rational) -> Option<Narrowing> {
        let ends = |from: &JointId, to: &JointId| Some([self.place(*from)?, self.place(*to)?]);
        let range = &condition.possible;
        Some(match &condition.function {
            Function::Along { axis, from, to } => {
                Narrowing::Along { ends: ends(from, to)?, axis: axis.index(), span: span_of(range, unit) }
            }
            Function::Quadrance { from, to } => {
                Narrowing::Length { ends: ends(from, to)?, squares: squares_of(range, unit) }
            }
            Function::Slope { from, to, small, senses } => {
                let fine = Rational::one() / whole(1i64 << SLOPE_BITS);
                let span = span_of(range, &fine);
                Narrowing::Slope {
                    ends: ends(from, to)?,
                    small: small.index(),
                    senses: *senses,
                    lo: span.lo.max(0),
                    hi: span.hi,
                }
            }
            Function::LengthDifference { first, second } => Narrowing::Difference {
                first: ends(&first[0], &first[1])?,
                second: ends(&second[0], &second[1])?,
                span: span_of(range, unit),
            },
            _ => return None,
        })
    }

    /// Triangles of ways, so that each way is no more than the two others together.
    fn find_triangles(&mut self) {
        let mut after: Vec<Vec<usize>> = vec![Vec::new(); self.joints.len()];
        for [a, b] in &self.ways {
            after[*a].push(*b);
        }
        for way in &self.ways {
            let [a, b] = *way;
            for &c in &after[b] {
                if let (Some(&ab), Some(&bc), Some(&ac)) =
                    (self.by_ends.get(&[a, b]), self.by_ends.get(&[b, c]), self.by_ends.get(&[a, c]))
                {
                    self.triangles.push([ab, bc, ac]);
                }
            }
        }
    }

    /// Boxes before narrowing: between set joints the exact way; `None` when the stress turns what may not be turned.
    fn starting(&self, truss: &Truss, stress: &Stress, used: &[&Condition]) -> Option<Vec<Way>> {
        let set = |place: usize| !truss.joint(self.joints[place]).loose;
        let exact = |a: &Point, b: &Point| {
            let leg = b - a;
            [leg.x, leg.y].map(|part| span_of(&Interval::exactly(part), &stress.unit))
        };
        let mut start: Vec<Way> = Vec::with_capacity(self.ways.len());
        for [a, b] in &self.ways {
            let both_set = set(*a) && set(*b);
            let points = [*a, *b].map(|place| truss.joint(self.joints[place]).point());
            start.push(if both_set { exact(&points[0], &points[1]) } else { [Span::ALL; 2] });
        }
        if let Some(turned) = stress.turned {
            let directed = used.iter().any(|c| matches!(c.function, Function::Along { .. } | Function::Slope { .. }));
            let set_count = (0..self.joints.len()).filter(|place| set(*place)).count();
            let place = self.place(turned).filter(|place| *place > 0)?;
            if directed || set_count > 1 {
                return None;
            }
            let way = *self.by_ends.get(&[0, place])?;
            start[way] = [Span { lo: 0, hi: Span::ALL.hi }, Span::at(0)];
        }
        Some(start)
    }

    /// The boxes before any split, narrowed; `None` when nothing is left.
    pub(crate) fn narrowed_start(&self) -> Option<Vec<Way>> {
        self.narrowed(self.start.clone())
    }

    /// The way between two places, turned as asked.
    pub(crate) fn way(&self, boxes: &[Way], from: usize, to: usize) -> Way {
        if from == to {
            return [Span::at(0); 2];
        }
        match self.by_ends.get(&[from.min(to), from.max(to)]) {
            Some(&way) if from < to => boxes[way],
            Some(&way) => boxes[way].map(|span| Span { lo: -span.hi, hi: -span.lo }),
            None => [Span::ALL; 2],
        }
    }

    /// Meets the way between two places with a box; false when nothing is left.
    fn meet(&self, boxes: &mut [Way], from: usize, to: usize, with: Way) -> bool {
        let Some(&way) = self.by_ends.get(&[from.min(to), from.max(to)]) else { return true };
        let turned = if from < to { with } else { with.map(|span| Span { lo: -span.hi, hi: -span.lo }) };
        for axis in 0..2 {
            match boxes[way][axis].meet(turned[axis]) {
                Some(met) => boxes[way][axis] = met,
                None => return false,
            }
        }
        true
    }

    /// Cuts the box of a joint to one half.
    pub(crate) fn halved(&self, boxes: &[Way], joint: JointId, axis: Axis, half: Span) -> Option<Vec<Way>> {
        let place = self.place(joint)?;
        let mut boxes = boxes.to_vec();
        let mut with = [Span::ALL; 2];
        with[axis.index()] = half;
        if !self.meet(&mut boxes, 0, place, with) {
            return None;
        }
        self.narrowed(boxes)
    }

    /// Sweeps over the conditions and triangles until little changes; `None` when a box is empty.
    pub(crate) fn narrowed(&self, mut boxes: Vec<Way>) -> Option<Vec<Way>> {
        for sweep in 0..MOST_SWEEPS {
            let before = boxes.clone();
            let alive = if sweep % 2 == 0 {
                self.narrowings.iter().all(|n| self.apply(n, &mut boxes))
            } else {
                self.narrowings.iter().rev().all(|n| self.apply(n, &mut boxes))
            };
            let alive = alive && self.triangles.iter().all(|t| triangle(&mut boxes, *t)) && self.sides_alive(&boxes);
            if !alive {
                return None;
            }
            if !boxes.iter().zip(&before).any(|(new, old)| (0..2).any(|axis| much_narrower(new[axis], old[axis]))) {
                break;
            }
        }
        Some(boxes)
    }

    fn apply(&self, narrowing: &Narrowing, boxes: &mut [Way]) -> bool {
        match narrowing {
            Narrowing::Along { ends: [a, b], axis, span } => {
                let mut with = [Span::ALL; 2];
                with[*axis] = *span;
                self.meet(boxes, *a, *b, with)
            }
            Narrowing::Length { ends: [a, b], squares } => self.apply_length(boxes, *a, *b, *squares),
            Narrowing::Slope { ends: [a, b], small, senses, lo, hi } => {
                let Some(way) = slope(self.way(boxes, *a, *b), *small, *senses, *lo, *hi) else { return false };
                self.meet(boxes, *a, *b, way)
            }
            Narrowing::Difference { first, second, span } => {
                let reach = |ends: &[usize; 2], boxes: &[Way]| length_span(self.way(boxes, ends[0], ends[1]));
                let first_reach = reach(second, boxes).plus(*span);
                let second_reach = reach(first, boxes).minus(*span);
                self.apply_length(boxes, first[0], first[1], squares_between(first_reach))
                    && self.apply_length(boxes, second[0], second[1], squares_between(second_reach))
            }
        }
    }

    fn apply_length(&self, boxes: &mut [Way], a: usize, b: usize, (lo, hi): (i128, Option<i128>)) -> bool {
        let mut way = self.way(boxes, a, b);
        for axis in 0..2 {
            let (least, greatest) = way[1 - axis].squares();
            let low = greatest.map_or(0, |greatest| lo - greatest);
            match way[axis].with_square_in(low, hi.map(|hi| hi - least)) {
                Some(span) => way[axis] = span,
                None => return false,
            }
        }
        self.meet(boxes, a, b, way)
    }

    /// False when a joint certainly lies on the wrong side.
    fn sides_alive(&self, boxes: &[Way]) -> bool {
        self.sides.iter().all(|([a, b, c], sign)| {
            let (u, v) = (self.way(boxes, *a, *b), self.way(boxes, *a, *c));
            match cross(u, v) {
                Some(span) => {
                    if *sign > 0 {
                        span.hi > 0
                    } else {
                        span.lo < 0
                    }
                }
                None => true,
            }
        })
    }

    /// The sign that the sketch or the boxes give to the cross product of two ways, if any; the product may still be 0.
    pub(crate) fn turn_sign(&self, boxes: &[Way], at: usize, from: usize, to: usize) -> Option<i128> {
        let sketched = self.sides.iter().find_map(|([a, b, c], sign)| {
            let even = [[*a, *b, *c], [*b, *c, *a], [*c, *a, *b]].contains(&[at, from, to]);
            let odd = [[*a, *c, *b], [*c, *b, *a], [*b, *a, *c]].contains(&[at, from, to]);
            if even { Some(*sign) } else { odd.then_some(-sign) }
        });
        sketched.or_else(|| {
            let cross = cross(self.way(boxes, at, from), self.way(boxes, at, to))?;
            if cross.lo >= 0 { Some(1) } else { (cross.hi <= 0).then_some(-1) }
        })
    }

    /// The side conditions, by places, each with its sign.
    pub(crate) fn sides(&self) -> &[([usize; 3], i128)] {
        &self.sides
    }
}

/// The cross product of two ways, in square units.
pub(crate) fn cross(u: Way, v: Way) -> Option<Span> {
    let (a, b) = (u[0].times(v[1])?, u[1].times(v[0])?);
    Some(Span { lo: a.lo - b.hi, hi: a.hi - b.lo })
}

/// The dot product of two ways, in square units.
pub(crate) fn dot(u: Way, v: Way) -> Option<Span> {
    let (a, b) = (u[0].times(v[0])?, u[1].times(v[1])?);
    Some(Span { lo: a.lo + b.lo, hi: a.hi + b.hi })
}

/// The sign of a span that does not hold 0.
pub(crate) fn sign_of(span: Span) -> Option<i128> {
    if span.lo > 0 { Some(1) } else { (span.hi < 0).then_some(-1) }
}

/// The lengths of a way.
pub(crate) fn length_span(way: Way) -> Span {
    let ((lx, hx), (ly, hy)) = (way[0].squares(), way[1].squares());
    let lo = super::span::floor_root(lx + ly);
    let hi = hx.zip(hy).map_or(Span::ALL.hi, |(x, y)| super::span::floor_root(x + y) + 1);
    Span { lo, hi }
}

fn squares_between(lengths: Span) -> (i128, Option<i128>) {
    let lo = lengths.lo.max(0);
    let hi =
        if lengths.is_unbounded() { None } else { Some(if lengths.hi < 0 { -1 } else { lengths.hi * lengths.hi }) };
    (lo * lo, hi)
}

fn triangle(boxes: &mut [Way], ways: [usize; 3]) -> bool {
    [0, 1].into_iter().all(|axis| triangle_along(boxes, ways, axis))
}

/// One axis of a triangle of ways: the first two add up to the third. False when nothing is left.
fn triangle_along(boxes: &mut [Way], [ab, bc, ac]: [usize; 3], axis: usize) -> bool {
    let [x, y, z] = [ab, bc, ac].map(|way| boxes[way][axis]);
    let (Some(z), Some(x), Some(y)) = (z.meet(x.plus(y)), x.meet(z.minus(y)), y.meet(z.minus(x))) else {
        return false;
    };
    (boxes[ab][axis], boxes[bc][axis], boxes[ac][axis]) = (x, y, z);
    true
}

/// Narrowed by an eighth or more, or bounded at last.
fn much_narrower(new: Span, old: Span) -> bool {
    old.width() - new.width() > old.width() / 8 + 4
}

/// A way whose smaller leg is `lo` to `hi` (in fine units) of the larger, in the sketched senses.
fn slope(way: Way, small: usize, senses: [Sense; 2], lo: i128, hi: i128) -> Option<Way> {
    let mut way = way;
    for axis in 0..2 {
        let half = match senses[axis] {
            Sense::Plus => Span { lo: 0, hi: Span::ALL.hi },
            Sense::Minus => Span { lo: Span::ALL.lo, hi: 0 },
            Sense::Either => Span::ALL,
        };
        way[axis] = way[axis].meet(half)?;
    }
    let size = |span: Span| Span { lo: if span.lo > 0 { span.lo } else { (-span.hi).max(0) }, hi: span.reach() };
    let (short, long) = (size(way[small]), size(way[1 - small]));
    if !long.is_unbounded() && hi < Span::ALL.hi {
        let limits = Span { lo: mul_down(long.lo, lo), hi: mul_up(long.hi, hi) };
        way[small] = sized(way[small], limits)?;
    }
    if !short.is_unbounded() && lo > 0 && hi < Span::ALL.hi {
        let limits = Span { lo: div_down(short.lo, hi), hi: div_up(short.hi, lo) };
        way[1 - small] = sized(way[1 - small], limits)?;
    }
    Some(way)
}

fn mul_down(a: i128, slope: i128) -> i128 {
    (a * slope) >> SLOPE_BITS
}

fn mul_up(a: i128, slope: i128) -> i128 {
    mul_down(a, slope) + 1
}

fn div_down(a: i128, slope: i128) -> i128 {
    (a << SLOPE_BITS) / slope
}

fn div_up(a: i128, slope: i128) -> i128 {
    div_down(a, slope) + 1
}

/// Narrows a span to numbers of these sizes.
fn sized(span: Span, sizes: Span) -> Option<Span> {
    // An end of a span at its bound stands for all that lies beyond.
    let sizes = Span { lo: sizes.lo.min(Span::ALL.hi), hi: sizes.hi.min(Span::ALL.hi) };
    let mut met = span.meet(Span { lo: -sizes.hi, hi: sizes.hi })?;
    if met.lo > -sizes.lo {
        met.lo = met.lo.max(sizes.lo);
    }
    if met.hi < sizes.lo {
        met.hi = met.hi.min(-sizes.lo);
    }
    (met.lo <= met.hi).then_some(met)
}

fn joints_of(stress: &Stress, used: &[&Condition], sides: &[&Side]) -> Vec<JointId> {
    let mut joints: Vec<JointId> = used.iter().flat_map(|c| c.function.joints()).collect();
    joints.extend(sides.iter().flat_map(|side| side.joints));
    joints.extend(stress.turned);
    joints.retain(|joint| *joint != stress.origin);
    order::sort(&mut joints);
    joints.dedup();
    joints.insert(0, stress.origin);
    joints
}

/// The legs whose boxes a function needs.
fn legs(function: &Function, joints: &[JointId]) -> Vec<[JointId; 2]> {
    match function {
        Function::OffLine { joint, line } => vec![*line, [line[0], *joint]],
        Function::OffParallel { first, second } | Function::LengthDifference { first, second } => vec![*first, *second],
        _ => joints[1..].iter().map(|end| [joints[0], *end]).collect(),
    }
}
