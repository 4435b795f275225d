//! Conditions as quadratic inequalities that hold for every admissible place in given boxes.
//!
//! A form is a sum of products of leg parts (at most two in each) with a lower and an upper bound. What is not quadratic is
//! relaxed over the box: an offset `|cross| <= h |u|` becomes `|cross| <= h · greatest |u|`; an angle of at least `A` with a
//! known sense becomes `cross cos A - dot sin A >= 0`.

use super::boxes::{Frame, Way, dot, length_span, sign_of};
use super::span::Span;
use crate::checks::close::meaning::{Condition, Function, Sense};
use crate::exact::{Interval, Rational, whole};
use num_traits::{One, Signed, Zero};

/// Part of a leg: from one place to another, along an axis.
pub(crate) type LegPart = ([usize; 2], usize);

/// `coefficient · first · second`, or `coefficient · first`.
#[derive(Clone, Debug)]
pub(crate) struct Term {
    /// The factor.
    pub coefficient: Rational,
    /// One leg's part.
    pub first: LegPart,
    /// The other's, if any.
    pub second: Option<LegPart>,
}

/// A sum of terms with bounds, in units (or square units).
#[derive(Clone, Debug)]
pub(crate) struct Form {
    /// The sum.
    pub terms: Vec<Term>,
    /// Never less.
    pub lo: Option<Rational>,
    /// Never more.
    pub hi: Option<Rational>,
}

/// Binary places of roots.
const BITS: u32 = 80;

/// The forms of a condition over boxes; none where the boxes do not tell enough. Their number and order depend only on
/// the condition and on what the boxes tell.
pub(crate) fn forms(frame: &Frame, condition: &Condition, boxes: &[Way], unit: &Rational) -> Vec<Form> {
    forms_or_none(frame, condition, boxes, unit).unwrap_or_default()
}

/// The form of a side of the sketch: the cross product has its sign.
pub(crate) fn side_form([a, b, c]: [usize; 3], sign: i128) -> Form {
    let terms = cross_terms([a, b], [a, c], &whole(sign));
    Form { terms, lo: Some(Rational::zero()), hi: None }
}

fn forms_or_none(frame: &Frame, condition: &Condition, boxes: &[Way], unit: &Rational) -> Option<Vec<Form>> {
    let place = |id: &crate::truss::JointId| frame.place(*id);
    let range = &condition.possible;
    let square = unit * unit;
    let between = |terms: Vec<Term>, lo: Rational, hi: Rational| Some(vec![Form { terms, lo: Some(lo), hi: Some(hi) }]);
    match &condition.function {
        Function::Along { axis, from, to } => {
            let term =
                Term { coefficient: Rational::one(), first: ([place(from)?, place(to)?], axis.index()), second: None };
            between(vec![term], range.lo() / unit, range.hi() / unit)
        }
        Function::Quadrance { from, to } => {
            let leg = [place(from)?, place(to)?];
            between(dot_terms(leg, leg, &Rational::one()), range.lo() / &square, range.hi() / &square)
        }
        Function::Slope { from, to, small, senses } => {
            slope_forms(frame, boxes, [place(from)?, place(to)?], small.index(), *senses, range)
        }
        Function::Spread { at, from, to } => {
            let corner = [place(at)?, place(from)?, place(to)?];
            let cosines = cosines_of_spread(
                range,
                dot(frame.way(boxes, corner[0], corner[1]), frame.way(boxes, corner[0], corner[2])),
            )?;
            angle_forms(frame, boxes, corner, &cosines)
        }
        Function::Cosine { at, from, to } => angle_forms(frame, boxes, [place(at)?, place(from)?, place(to)?], range),
        Function::OffLine { joint, line } => {
            let (u, v) = ([place(&line[0])?, place(&line[1])?], [place(&line[0])?, place(joint)?]);
            let limit = offset_limit(range, unit, &[frame.way(boxes, u[0], u[1])])?;
            between(cross_terms(u, v, &Rational::one()), -limit.clone(), limit)
        }
        Function::OffSquare { at, from, to } => {
            let (u, v) = ([place(at)?, place(from)?], [place(at)?, place(to)?]);
            let limit = offset_limit(range, unit, &[frame.way(boxes, u[0], u[1]), frame.way(boxes, v[0], v[1])])?;
            between(dot_terms(u, v, &Rational::one()), -limit.clone(), limit)
        }
        Function::OffParallel { first, second } => {
            let (u, v) = ([place(&first[0])?, place(&first[1])?], [place(&second[0])?, place(&second[1])?]);
            let limit = offset_limit(range, unit, &[frame.way(boxes, u[0], u[1]), frame.way(boxes, v[0], v[1])])?;
            between(cross_terms(u, v, &Rational::one()), -limit.clone(), limit)
        }
        Function::LengthDifference { first, second } => {
            let (u, v) = ([place(&first[0])?, place(&first[1])?], [place(&second[0])?, place(&second[1])?]);
            let sum = length_span(frame.way(boxes, u[0], u[1])).plus(length_span(frame.way(boxes, v[0], v[1])));
            if sum.is_unbounded() {
                return None;
            }
            // Q1 - Q2 = (difference of the lengths)(their sum)
            let sum = Interval::new(whole(sum.lo.max(0)), whole(sum.hi))?;
            let product = &range.scaled(&unit.recip()) * &sum;
            let mut terms = dot_terms(u, u, &Rational::one());
            terms.extend(dot_terms(v, v, &-Rational::one()));
            between(terms, product.lo().clone(), product.hi().clone())
        }
    }
}

fn product(coefficient: &Rational, first: LegPart, second: LegPart) -> Term {
    Term { coefficient: coefficient.clone(), first, second: Some(second) }
}

fn dot_terms(u: [usize; 2], v: [usize; 2], factor: &Rational) -> Vec<Term> {
    vec![product(factor, (u, 0), (v, 0)), product(factor, (u, 1), (v, 1))]
}

fn cross_terms(u: [usize; 2], v: [usize; 2], factor: &Rational) -> Vec<Term> {
    vec![product(factor, (u, 0), (v, 1)), product(&-factor, (u, 1), (v, 0))]
}

/// The greatest product of the offset and the longest of the legs.
fn offset_limit(range: &Interval, unit: &Rational, legs: &[Way]) -> Option<Rational> {
    let offset = (range.scaled(&(unit * unit).recip())).sqrt(BITS)?.hi().clone();
    let longest = legs.iter().map(|leg| length_span(*leg)).max_by_key(|span| span.hi)?;
    (!longest.is_unbounded()).then(|| offset * whole(longest.hi))
}

/// The smaller leg lies between two multiples of the larger, once both senses are known.
fn slope_forms(
    frame: &Frame,
    boxes: &[Way],
    leg: [usize; 2],
    small: usize,
    senses: [Sense; 2],
    range: &Interval,
) -> Option<Vec<Form>> {
    let way = frame.way(boxes, leg[0], leg[1]);
    let sign = |axis: usize| match senses[axis] {
        Sense::Plus => Some(whole(1)),
        Sense::Minus => Some(whole(-1)),
        Sense::Either => sign_of(way[axis]).map(whole),
    };
    let large_sign = sign(1 - small)?;
    // Without a sense the smaller leg may lie to either side of level: |small| <= hi · large.
    let (small_sign, least) = match sign(small) {
        Some(sign) => (sign, range.lo().clone()),
        None => (whole(1), -range.hi()),
    };
    let form = |slope: &Rational| {
        vec![
            Term { coefficient: small_sign.clone(), first: (leg, small), second: None },
            Term { coefficient: -(slope * &large_sign), first: (leg, 1 - small), second: None },
        ]
    };
    let zero = Rational::zero();
    Some(vec![
        Form { terms: form(&least), lo: Some(zero.clone()), hi: None },
        Form { terms: form(range.hi()), lo: None, hi: Some(zero) },
    ])
}

/// The signed squared cosines that a spread allows, given what is known of the dot product's sign.
fn cosines_of_spread(range: &Interval, dot: Option<Span>) -> Option<Interval> {
    let squares = &Interval::exactly(Rational::one()) - range;
    let (lo, hi) = (squares.lo().max(&Rational::zero()).clone(), squares.hi().clone());
    match dot.and_then(sign_of) {
        Some(1) => Interval::new(lo, hi),
        Some(_) => Interval::new(-hi, -lo),
        None if lo.is_zero() => Interval::new(-hi.clone(), hi),
        None => None,
    }
}

/// An angle between those of two signed squared cosines, once its sense is known.
fn angle_forms(frame: &Frame, boxes: &[Way], [at, from, to]: [usize; 3], cosines: &Interval) -> Option<Vec<Form>> {
    let (u, v) = (frame.way(boxes, at, from), frame.way(boxes, at, to));
    let (lu, lv) = (length_span(u), length_span(v));
    if lu.is_unbounded() || lv.is_unbounded() {
        return None;
    }
    let reach = whole(lu.hi) * whole(lv.hi);
    let sense = whole(frame.turn_sign(boxes, at, from, to)?);
    let form = |cosine: &Rational| -> Option<(Vec<Term>, Rational)> {
        let square = cosine.abs().min(Rational::one());
        let c = Interval::exactly(square.clone()).sqrt(BITS)?;
        let s = Interval::exactly(Rational::one() - square).sqrt(BITS)?;
        let c = if cosine.is_negative() { -&c } else { c };
        let slack = (c.width() + s.width()) * &reach;
        let mut terms = cross_terms([at, from], [at, to], &(c.middle() * &sense));
        terms.extend(dot_terms([at, from], [at, to], &-s.middle()));
        Some((terms, slack))
    };
    let ((least, least_slack), (most, most_slack)) = (form(cosines.hi())?, form(cosines.lo())?);
    Some(vec![
        Form { terms: least, lo: Some(-least_slack), hi: None },
        Form { terms: most, lo: None, hi: Some(most_slack) },
    ])
}
