//! The judge of exclusions: accepts a certificate only when, in exact arithmetic, no layout can exist.
//!
//! # Invariants
//!
//! It knows nothing of how certificates are found, and trusts nothing in them: indices, ends, signs and bounds are all
//! checked. Disregarded figures may not be used.

use super::boxes::{Frame, Way, condition_of};
use super::forms::{Form, LegPart, forms, side_form};
use super::span::Span;
use super::{Bound, Branch, Certificate, Link, Part, Source, Stress};
use crate::checks::close::meaning::{Axis, Condition, Function};
use crate::checks::close::sides::Side;
use crate::exact::{Interval, Rational, whole};
use crate::truss::{FigureId, Truss};
use num_traits::{Signed, Zero};

/// What a certificate speaks about.
pub(crate) struct Case<'a> {
    /// The truss.
    pub truss: &'a Truss,
    /// The conditions of every figure.
    pub conditions: &'a [Vec<Condition>],
    /// The sides that the sketch tells.
    pub sides: &'a [Side],
    /// Figures that may not be used.
    pub disregarded: &'a [FigureId],
}

/// Roots are enclosed to this many binary places.
const BITS: u32 = 64;

/// True when the certificate proves that no layout agrees with the figures that are not disregarded.
pub(crate) fn accepts(case: &Case, certificate: &Certificate) -> bool {
    match certificate {
        Certificate::Set(source) => set_fails(case, *source),
        Certificate::Chain { axis, links } => chain_cannot_close(case, *axis, links),
        Certificate::Polygon { links } => polygon_cannot_close(case, links),
        Certificate::Stress(stress) => stress_cannot_be_met(case, stress),
    }
}

impl Case<'_> {
    fn condition(&self, source: Source) -> Option<&Condition> {
        if self.disregarded.contains(&source.figure) {
            return None;
        }
        condition_of(self.conditions, source)
    }
}

fn set_fails(case: &Case, source: Source) -> bool {
    case.condition(source).is_some_and(|condition| {
        let set = condition.function.joints().iter().all(|id| !case.truss.joint(*id).loose);
        set && condition.fails(&case.truss.points())
    })
}

fn chain_cannot_close(case: &Case, axis: Axis, links: &[Link]) -> bool {
    let closed = !links.is_empty() && (0..links.len()).all(|i| links[i].to == links[(i + 1) % links.len()].from);
    let bounds: Option<Rational> = links.iter().map(|link| greatest_step(case, axis, link)).sum();
    closed && bounds.is_some_and(|sum| sum.is_negative())
}

/// The most by which the coordinate can grow along a link; `None` when the link does not bound it.
pub(crate) fn greatest_step(case: &Case, axis: Axis, link: &Link) -> Option<Rational> {
    match link.bound {
        Bound::Set => set_leg(case, link).map(|leg| axis.part(&leg).clone()),
        Bound::Figure(source) => {
            let condition = case.condition(source)?;
            let range = &condition.possible;
            match condition.function {
                Function::Along { axis: a, from, to } if a == axis && (from, to) == (link.from, link.to) => {
                    Some(range.hi().clone())
                }
                Function::Along { axis: a, from, to } if a == axis && (to, from) == (link.from, link.to) => {
                    Some(-range.lo())
                }
                Function::Quadrance { .. } => lengths(case, link).map(|lengths| lengths.hi().clone()),
                _ => None,
            }
        }
    }
}

fn set_leg(case: &Case, link: &Link) -> Option<crate::exact::Vector> {
    let joint = |id: crate::truss::JointId| case.truss.joints.get(id.index()).filter(|joint| !joint.loose);
    Some(&joint(link.to)?.point() - &joint(link.from)?.point())
}

/// An enclosure of the lengths that a link allows; `None` when it bounds none.
pub(crate) fn lengths(case: &Case, link: &Link) -> Option<Interval> {
    let squares = match link.bound {
        Bound::Set => Interval::exactly(set_leg(case, link)?.quadrance()),
        Bound::Figure(source) => {
            let condition = case.condition(source)?;
            match condition.function {
                Function::Quadrance { from, to } if [[from, to], [to, from]].contains(&[link.from, link.to]) => {
                    condition.possible.clone()
                }
                _ => return None,
            }
        }
    };
    let exact = |end: &Rational| crate::exact::Surd::of_quadrance(end).and_then(|surd| surd.rational().cloned());
    match (exact(squares.lo()), exact(squares.hi())) {
        (Some(lo), Some(hi)) => Interval::new(lo, hi),
        _ => squares.sqrt(BITS),
    }
}

fn polygon_cannot_close(case: &Case, links: &[Link]) -> bool {
    let [longest, others @ ..] = links else { return false };
    let mut at = longest.from;
    for link in others {
        if link.from != at {
            return false;
        }
        at = link.to;
    }
    let reach: Option<Rational> = others.iter().map(|link| Some(lengths(case, link)?.hi().clone())).sum();
    at == longest.to && lengths(case, longest).zip(reach).is_some_and(|(longest, reach)| *longest.lo() > reach)
}

fn stress_cannot_be_met(case: &Case, stress: &Stress) -> bool {
    if stress.conditions.iter().any(|source| case.condition(*source).is_none()) {
        return false;
    }
    let Some(frame) = Frame::new(case.truss, case.conditions, case.sides, stress) else { return false };
    let whole_box = frame.narrowed_start();
    branch_cannot_be_met(case, stress, &frame, whole_box, &stress.branch)
}

fn branch_cannot_be_met(case: &Case, stress: &Stress, frame: &Frame, boxes: Option<Vec<Way>>, branch: &Branch) -> bool {
    let Some(boxes) = boxes else { return true };
    match branch {
        Branch::Empty => false,
        Branch::Combined { around, multipliers } => cannot_be_reached(case, stress, frame, &boxes, around, multipliers),
        Branch::Split { joint, axis, at, halves } => {
            let spans = [Span { lo: Span::ALL.lo, hi: *at }, Span { lo: *at, hi: Span::ALL.hi }];
            spans.into_iter().zip(halves.iter()).all(|(span, half)| {
                let Some(place) = frame.place(*joint) else { return false };
                place != 0 && branch_cannot_be_met(case, stress, frame, frame.halved(&boxes, *joint, *axis, span), half)
            })
        }
    }
}

/// True when the combination of forms lies wholly beyond the combination of their bounds.
pub(crate) fn cannot_be_reached(
    case: &Case,
    stress: &Stress,
    frame: &Frame,
    boxes: &[Way],
    around: &[[i128; 2]],
    multipliers: &[(Part, i128)],
) -> bool {
    let too_far = |place: &[i128; 2]| place.iter().any(|c| *c <= Span::ALL.lo / 2 || *c >= Span::ALL.hi / 2);
    if around.len() != frame.joints.len() || around.iter().any(too_far) {
        return false;
    }
    // The combination is constant + Σ slope · (place - around) + rest.
    let mut sum = Combination {
        constant: Rational::zero(),
        least_rest: Rational::zero(),
        slopes: vec![[Rational::zero(), Rational::zero()]; around.len()],
    };
    let mut bound = Rational::zero();
    for (part, multiplier) in multipliers {
        let Some(form) = form_of(case, stress, frame, boxes, *part) else { return false };
        let factor = whole(*multiplier);
        let Some(end) = (if *multiplier > 0 { form.hi.clone() } else { form.lo.clone() }) else { return false };
        bound += &factor * end;
        if !sum.add(frame, boxes, around, &form, &factor) {
            return false;
        }
    }
    sum.least(frame, boxes, around).is_some_and(|least| least > bound)
}

/// The form of a part; `None` when the stress does not hold it or the boxes do not give it.
pub(crate) fn form_of(case: &Case, stress: &Stress, frame: &Frame, boxes: &[Way], part: Part) -> Option<Form> {
    match part {
        Part::Side(index) => {
            let place = stress.sides.iter().position(|side| *side == index)?;
            let (corners, sign) = frame.sides().get(place)?;
            Some(side_form(*corners, *sign))
        }
        Part::Condition(source, index) => {
            if !stress.conditions.contains(&source) {
                return None;
            }
            forms(frame, case.condition(source)?, boxes, &stress.unit).into_iter().nth(index)
        }
    }
}

struct Combination {
    constant: Rational,
    least_rest: Rational,
    slopes: Vec<[Rational; 2]>,
}

impl Combination {
    /// Adds a form: its value around the centre, its slopes there, and the least of the second-order rest over the boxes.
    fn add(&mut self, frame: &Frame, boxes: &[Way], around: &[[i128; 2]], form: &Form, factor: &Rational) -> bool {
        let centre = |(ends, axis): LegPart| whole(around[ends[1]][axis] - around[ends[0]][axis]);
        let strayed = |(ends, axis): LegPart| {
            let centre = around[ends[1]][axis] - around[ends[0]][axis];
            frame.way(boxes, ends[0], ends[1])[axis].minus(Span::at(centre))
        };
        for term in &form.terms {
            let coefficient = factor * &term.coefficient;
            let first = centre(term.first);
            let Some(part) = term.second else {
                self.constant += &coefficient * first;
                self.slope(term.first, &coefficient);
                continue;
            };
            let second = centre(part);
            self.constant += &coefficient * &first * &second;
            self.slope(term.first, &(&coefficient * &second));
            self.slope(part, &(&coefficient * &first));
            let (a, b) = (strayed(term.first), strayed(part));
            let rest = if term.first == part {
                let (lo, hi) = a.squares();
                hi.map(|hi| Span { lo, hi })
            } else {
                a.times(b)
            };
            let Some(rest) = rest else { return false };
            let ends = [&coefficient * whole(rest.lo), &coefficient * whole(rest.hi)];
            let [lo, hi] = ends;
            self.least_rest += lo.min(hi);
        }
        true
    }

    fn slope(&mut self, (ends, axis): LegPart, by: &Rational) {
        self.slopes[ends[1]][axis] += by;
        self.slopes[ends[0]][axis] -= by;
    }

    /// The least value over the boxes; `None` when a slope meets an unbounded box.
    fn least(&self, frame: &Frame, boxes: &[Way], around: &[[i128; 2]]) -> Option<Rational> {
        let mut least = &self.constant + &self.least_rest;
        for (place, slopes) in self.slopes.iter().enumerate().skip(1) {
            for (axis, slope) in slopes.iter().enumerate().filter(|(_, slope)| !slope.is_zero()) {
                let centre = around[place][axis] - around[0][axis];
                let strayed = frame.way(boxes, 0, place)[axis].minus(Span::at(centre));
                if strayed.is_unbounded() {
                    return None;
                }
                least += (slope * whole(strayed.lo)).min(slope * whole(strayed.hi));
            }
        }
        Some(least)
    }
}
