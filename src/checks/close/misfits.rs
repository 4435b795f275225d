//! Figures that joints with exact places disagree with.

use super::meaning::{Condition, Function, conditions, leg};
use super::proposal::{Proposal, name_of, printed, proposal};
use super::readings::reading;
use super::words;
use crate::checks::{Finding, Law, Level, Rule};
use crate::exact::{Interval, Point, Rational};
use crate::truss::{Figure, FigureId, FigureKind, Truss};
use num_traits::{Signed, Zero};

/// The finding for one figure among set joints that does not hold.
pub(crate) fn misfit(truss: &Truss, id: FigureId, places: &[Point]) -> Finding {
    let figure = truss.figure(id);
    let reading = reading(truss, figure, places);
    let text = match figure.kind.value_text() {
        Some(value) => format!("{} reads {value}, but the set joints give {}", name_of(truss, id), reading.gives),
        None => format!("{} does not hold: the set joints are {}", name_of(truss, id), reading.gives),
    };
    let mut finding = Finding::new(Rule::FigureMisfit, Level::Fault, text).joints(figure.kind.joints()).figures([id]);
    for condition in conditions(truss, figure).iter().filter(|condition| !condition.holds(places)) {
        finding = evidence(finding, truss, condition, places);
    }
    match implied(truss, id, places) {
        Some(proposal) => finding.mend(format!("let {} read {}", figure.mark, proposal.text), Some(proposal.edit)),
        None => finding,
    }
}

/// The law with the numbers in it, and the range that the figure allows.
fn evidence(finding: Finding, truss: &Truss, condition: &Condition, places: &[Point]) -> Finding {
    let mark = |id: crate::truss::JointId| truss.mark(id);
    let range = in_words(&condition.possible);
    match &condition.function {
        Function::Along { axis, from, to } => {
            let (a, b) = (axis.of(&places[from.index()]), axis.of(&places[to.index()]));
            let text = format!("{}-{}: {b} − {} = {}, allowed is {range}", mark(*from), mark(*to), bracketed(a), b - a);
            finding.formula(Law::Sum, text)
        }
        Function::Quadrance { from, to } => {
            let leg = leg(places, *from, *to);
            let text =
                format!("{}² + {}² = {}, allowed is {range}", bracketed(&leg.x), bracketed(&leg.y), leg.quadrance());
            finding.formula(Law::Quadrance, text)
        }
        Function::Slope { from, to, .. } => {
            let leg = leg(places, *from, *to);
            finding.value("run", &leg.x).value("rise", &leg.y).words(format!("the ratio of the legs may be {range}"))
        }
        Function::Spread { at, from, to }
        | Function::Cosine { at, from, to }
        | Function::OffSquare { at, from, to } => {
            let (u, v) = (leg(places, *at, *from), leg(places, *at, *to));
            let text =
                format!("s = ({})² / ({} · {}), dot product {}", u.cross(&v), u.quadrance(), v.quadrance(), u.dot(&v));
            finding.formula(Law::Spread, text)
        }
        Function::OffLine { joint, line } => {
            let cross = leg(places, line[0], line[1]).cross(&leg(places, line[0], *joint));
            finding.formula(Law::Orientation, format!("the cross product at {} is {cross}, not 0", mark(*joint)))
        }
        Function::OffParallel { first, second } => {
            let cross = leg(places, first[0], first[1]).cross(&leg(places, second[0], second[1]));
            finding.formula(Law::Spread, format!("the cross product of the two lines is {cross}, not 0"))
        }
        Function::LengthDifference { first, second } => {
            let (p, q) = (leg(places, first[0], first[1]).quadrance(), leg(places, second[0], second[1]).quadrance());
            finding.formula(Law::Quadrance, format!("the quadrances are {p} and {q}"))
        }
    }
}

/// `7200`, or `[719, 721]`.
fn in_words(range: &Interval) -> String {
    if range.is_exact() { range.lo().to_string() } else { format!("{} to {}", range.lo(), range.hi()) }
}

fn bracketed(value: &Rational) -> String {
    if value.is_negative() || !value.is_integer() { format!("({value})") } else { value.to_string() }
}

/// What the figure should read at these places, rounded to its step; `None` where nothing can be read, or where the
/// rounded value would not hold either.
pub(crate) fn implied(truss: &Truss, id: FigureId, places: &[Point]) -> Option<Proposal> {
    let figure = truss.figure(id);
    if figure.kind.is_relation() {
        return Some(proposal(truss, id, &Rational::zero()));
    }
    let proposal = proposal(truss, id, &reads(truss, figure, places)?);
    let mended = truss.edited(&proposal.edit).ok()?;
    conditions(&mended, mended.figure(id)).iter().all(|condition| condition.holds(places)).then_some(proposal)
}

/// The value that places give for a figure, to the nearest step, in the unit of its printed value.
fn reads(truss: &Truss, figure: &Figure, places: &[Point]) -> Option<Rational> {
    let value = conditions(truss, figure).first()?.function.value(places)?;
    let step = words::length_step(truss, figure);
    Some(match &figure.kind {
        FigureKind::Length { .. } => exact_root(&value, &truss.step_of(figure), &step),
        FigureKind::Run { .. } | FigureKind::Rise { .. } => words::rounded(&value, &truss.step_of(figure)),
        FigureKind::Angle { .. } => words::degrees_of(&value, &truss.step_of(figure)),
        FigureKind::Spread { .. } => words::rounded(&value, &truss.step_of(figure)),
        FigureKind::Pitch { rise, run, .. } => {
            words::rounded(&(value * (&rise.value).max(&run.value)), &truss.step_of(figure))
        }
        _ => printed(figure)?.clone(),
    })
}

/// The root of a quadrance: itself where the figure is exact and it is rational, else rounded.
fn exact_root(quadrance: &Rational, own: &Rational, fallback: &Rational) -> Rational {
    let exact = crate::exact::Surd::of_quadrance(quadrance).and_then(|surd| surd.rational().cloned());
    match exact {
        Some(root) if own.is_zero() => root,
        _ => words::rounded_root(quadrance, fallback),
    }
}
