//! What a suspect should read: the range that the other figures leave it, the printed value in it, and the slip.

use super::proposal::{Proposal, printed, proposal};
use super::readings::enclosed_value;
use super::search::rows::Row;
use super::slips;
use super::trial::{Base, Problem, Trial};
use super::words;
use crate::checks::{Slip, Suspect};
use crate::exact::{Interval, Point, Rational, ratio, whole};
use crate::truss::{FigureId, FigureKind, Truss};
use num_bigint::BigInt;
use num_traits::{Signed, ToPrimitive, Zero};

/// Programmes for each end of a range.
const ROUNDS: usize = 24;
/// Ends of ranges are put on this share of the step.
const SHARES: i64 = 8;
/// Readings in a range that are compared with known slips.
const MOST_READINGS: i64 = 512;

/// A suspect with what it should read.
#[derive(Clone, Debug)]
pub(crate) struct Accused {
    /// For the answer.
    pub suspect: Suspect,
    /// The edit that mends it.
    pub proposal: Proposal,
    /// How far the printed value is outside its range, in steps.
    pub outside: f64,
    /// How likely it is to be the wrong one, as a log likelihood: how well the others go together without it, the slip that
    /// explains it, and whether the drawing repeats what it reads or what it should read.
    pub worth: f64,
}

/// What a figure should read when all the others hold, as the trial without it found.
pub(crate) fn accused(problem: &Problem, id: FigureId, others: &[FigureId], trial: &Trial) -> Option<Accused> {
    let layout = trial.layout.clone()?;
    let truss = problem.truss;
    let figure = truss.figure(id);
    let mut disregarded = others.to_vec();
    if !disregarded.contains(&id) {
        disregarded.push(id);
    }
    let step = step_of(truss, id);
    let (range, evidence) = problem.with_base(&disregarded, |base| {
        let range = range(problem, base, id, &disregarded, &layout)?;
        let evidence = base.network.evidence(&base.floats_of(&layout), &|row| base.keeps(row, &disregarded));
        Some((range, evidence))
    })?;
    let range = on_shares(&range, &step, &whole(SHARES));
    let found = reading(problem, id, &range, &step);
    let proposal = proposal(truss, id, &found.value);
    let printed_alike = printed(figure).map_or(0, |v| alike(truss, id, v));
    let worth = evidence + found.worth - REGULARITY * (1.0 + printed_alike as f64).ln();
    let outside =
        printed(figure).map_or(Rational::zero(), |v| (range.lo() - v).max(v - range.hi()).max(Rational::zero()));
    let outside = (outside / step).to_f64().unwrap_or(f64::MAX);
    let suspect =
        Suspect { figure: id, implied: proposal.text.clone(), implied_range: range, slip: found.slip, layout };
    Some(Accused { suspect, proposal, outside, worth })
}

/// The step of a figure's value; a fine one where the figure is exact.
fn step_of(truss: &Truss, id: FigureId) -> Rational {
    let figure = truss.figure(id);
    let own = truss.step_of(figure);
    match figure.kind {
        _ if own.is_positive() => own,
        FigureKind::Angle { .. } | FigureKind::Spread { .. } | FigureKind::Pitch { .. } => ratio(1, 1000),
        _ => words::fine_step(truss),
    }
}

/// The values that the figure takes from the least to the greatest layout, the known layout's among them.
fn range(problem: &Problem, base: &Base, id: FigureId, disregarded: &[FigureId], layout: &[Point]) -> Option<Interval> {
    let mut range: Option<Interval> = None;
    for (index, condition) in problem.conditions[id.index()].iter().enumerate() {
        let value = |places: &[Point]| Some(in_print(problem.truss, id, &enclosed_value(condition, places)?));
        let mut here = value(layout)?;
        let row = base.network.rows.iter().position(|row: &Row| row.figure == id.index() && row.condition == index);
        if let Some(row) = row {
            let start = base.floats_of(layout);
            let keep = |row: usize| base.keeps(row, disregarded);
            for sign in [1.0, -1.0] {
                let end = base.network.extreme(&start, row, sign, ROUNDS, &keep);
                if let Some(end) = base.model.exactly(&end).and_then(|u| value(&base.model.places(&u))) {
                    here = here.hull(&end);
                }
            }
        }
        range = Some(range.map_or(here.clone(), |range| range.hull(&here)));
    }
    range
}

/// A slope is printed as the smaller part of its pitch.
fn in_print(truss: &Truss, id: FigureId, value: &Interval) -> Interval {
    match &truss.figure(id).kind {
        FigureKind::Pitch { rise, run, .. } => value.scaled((&rise.value).max(&run.value)),
        _ => value.clone(),
    }
}

/// Ends moved outward to shares of the step; one within a thousandth of a share is taken to be on it.
fn on_shares(range: &Interval, step: &Rational, shares: &Rational) -> Interval {
    if range.is_exact() {
        return range.clone();
    }
    let share = step / shares;
    let hair = ratio(1, 1000);
    let lo = (range.lo() / &share + &hair).floor() * &share;
    let hi = (range.hi() / &share - &hair).ceil() * &share;
    Interval::between(lo.clone().min(hi.clone()), hi.max(lo))
}

/// A value that a figure may read, and how much speaks for it.
struct ReadingFound {
    value: Rational,
    slip: Option<Slip>,
    worth: f64,
}

/// The reading in the range that most speaks for: a known slip, other figures that read the same, nearness to the middle.
fn reading(problem: &Problem, id: FigureId, range: &Interval, step: &Rational) -> ReadingFound {
    let figure = problem.truss.figure(id);
    if range.is_exact() && problem.truss.step_of(figure).is_zero() {
        return weighed(problem, id, range.lo().clone(), 1);
    }
    let middle = words::rounded(&range.middle(), step);
    let half = step / whole(2);
    let first = ((range.lo() - &half) / step).ceil().to_integer();
    let last = ((range.hi() + &half) / step).floor().to_integer();
    let count = (&last - &first).to_i64().map_or(i64::MAX, |n| n.saturating_add(1));
    let mut best = weighed(problem, id, middle.clone(), count);
    if count > MOST_READINGS {
        return best;
    }
    for k in 0..count {
        let value = step * Rational::from_integer(&first + BigInt::from(k));
        let off = ((&value - &middle).abs() / step).to_f64().unwrap_or(0.0);
        let mut found = weighed(problem, id, value, count);
        found.worth -= 0.1 * off;
        if found.worth > best.worth {
            best = found;
        }
    }
    best
}

/// How much speaks for a reading among `count` that would do.
fn weighed(problem: &Problem, id: FigureId, value: Rational, count: i64) -> ReadingFound {
    let slip = explained(problem.truss, id, &value);
    let chance = (count.max(1) as f64).ln();
    let by_slip = slip.map_or(0.0, |slip| (slips::weight(slip) - chance).max(0.1));
    let like = (1.0 + alike(problem.truss, id, &value) as f64).ln();
    ReadingFound { value, slip, worth: by_slip + REGULARITY * like }
}

/// Weight of figures that read alike: drawings repeat their panels and posts.
const REGULARITY: f64 = 1.5;

/// How many other figures of the same kind read this value.
fn alike(truss: &Truss, id: FigureId, value: &Rational) -> usize {
    let kind = std::mem::discriminant(&truss.figure(id).kind);
    let same = |(index, other): &(usize, &crate::truss::Figure)| {
        *index != id.index()
            && std::mem::discriminant(&other.kind) == kind
            && printed(other).is_some_and(|v| v.abs() == value.abs())
    };
    truss.figures.iter().enumerate().filter(same).count()
}

/// The slip that explains the printed value if the right one is `right`.
pub(super) fn explained(truss: &Truss, id: FigureId, right: &Rational) -> Option<Slip> {
    let figure = truss.figure(id);
    let printed = printed(figure)?;
    let is_length = matches!(figure.kind, FigureKind::Length { .. } | FigureKind::Run { .. } | FigureKind::Rise { .. });
    slips::slip(printed, right, is_length.then_some(truss.unit)).or_else(|| copied(truss, id, printed, right))
}

/// A value that a figure at one of the same joints reads as well.
fn copied(truss: &Truss, id: FigureId, printed: &Rational, right: &Rational) -> Option<Slip> {
    let figure = truss.figure(id);
    let joints = figure.kind.joints();
    let near = |other: &crate::truss::Figure| {
        std::mem::discriminant(&other.kind) == std::mem::discriminant(&figure.kind)
            && other.mark != figure.mark
            && super::proposal::printed(other) == Some(printed)
            && other.kind.joints().iter().any(|joint| joints.contains(joint))
    };
    (printed != right && !printed.is_zero() && truss.figures.iter().any(near)).then_some(Slip::Neighbour)
}
