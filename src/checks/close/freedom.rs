//! Which joints can still move at a layout without changing a figure, and how weakly the others are held.
//!
//! The exact derivative of every condition at (a little beside) the layout, over the unknowns; its rank by elimination modulo a prime. A full
//! rank modulo a prime is a proof. A short one is taken from two primes that agree.

use super::meaning::{Axis, Condition, Function, leg};
use super::search::model::Model;
use super::trial::Problem;
use crate::exact::modular::{Field, PRIMES, Scatter};
use crate::exact::{Point, Rational, Surd, Vector, order, whole};
use crate::truss::JointId;
use num_traits::{Signed, Zero};
use std::collections::BTreeMap;

/// What can still move.
#[derive(Clone, Debug, Default)]
pub(crate) struct Freedom {
    /// The joints that can move, in the order of the truss.
    pub joints: Vec<JointId>,
    /// Coordinates that, once figured, leave nothing free within the parts.
    pub wanting: Vec<(JointId, Axis)>,
    /// First joints of parts that no figure ties to the rest.
    pub untied: Vec<JointId>,
}

impl Freedom {
    /// True when every joint is held.
    pub(crate) fn is_none(&self) -> bool {
        self.joints.is_empty()
    }
}

/// Unknowns free at once beyond which only those are told that no condition touches.
const MOST_FREE: usize = 400;

/// What can move at a layout.
pub(crate) fn freedom(problem: &Problem, places: &[Point]) -> Freedom {
    problem.with_base(&[], |base| {
        let model = &base.model;
        // A layout may happen to be one where small changes cancel (a chord exactly straight); a little beside it they do
        // not, and a joint that is held there is held, if weakly.
        let beside = beside(problem, model, places);
        let rows: Vec<BTreeMap<usize, Rational>> =
            problem.conditions.iter().flatten().filter_map(|condition| derivative(model, condition, &beside)).collect();
        let moving = PRIMES[..2].iter().map(|prime| moving_unknowns(model.unknowns, &rows, Field::new(*prime)));
        let moving = moving.min_by_key(|(free, _)| free.len()).unwrap_or_default();
        told(problem, model, &moving.0, &moving.1)
    })
}

/// Places a few thousandths of a step beside a layout, without a pattern, that keep the exact ties.
fn beside(problem: &Problem, model: &Model, places: &[Point]) -> Vec<Point> {
    let mut scatter = Scatter::new(1);
    let share = &problem.step / whole(1 << 20);
    let mut unknowns = vec![Rational::zero(); model.unknowns];
    for (coordinates, place) in model.coordinates.iter().zip(places) {
        for (coordinate, value) in coordinates.iter().zip([&place.x, &place.y]) {
            if let Some(unknown) = coordinate.unknown {
                unknowns[unknown] = value - &coordinate.offset;
            }
        }
    }
    for value in &mut unknowns {
        *value += &share * whole(scatter.draw() % 4096);
    }
    model.places(&unknowns)
}

fn told(problem: &Problem, model: &Model, free: &[usize], moving: &[bool]) -> Freedom {
    let reference = reference_part(model);
    let mut freedom = Freedom::default();
    let has_set = problem.truss.joints.iter().any(|joint| !joint.loose);
    for joint in 0..model.coordinates.len() {
        let apart = model.parts[joint] != reference && problem.truss.joints[joint].loose;
        let moves = model.coordinates[joint].iter().any(|c| c.unknown.is_some_and(|unknown| moving[unknown]));
        if apart || moves {
            freedom.joints.push(JointId::new(joint));
        }
        if apart && model.parts[joint] == joint && (has_set || joint != reference) {
            freedom.untied.push(JointId::new(joint));
        }
    }
    for &unknown in free {
        let depends = |joint: &usize| {
            model.parts[*joint] == reference
                && model.coordinates[*joint][model.axes[unknown].index()].unknown == Some(unknown)
        };
        if let Some(joint) = (0..model.coordinates.len()).find(depends) {
            freedom.wanting.push((JointId::new(joint), model.axes[unknown]));
        }
    }
    freedom
}

/// The part that the others are free against: that of the set joints, else the one with the most joints.
fn reference_part(model: &Model) -> usize {
    let mut counts: BTreeMap<usize, usize> = BTreeMap::new();
    model.parts.iter().for_each(|part| *counts.entry(*part).or_default() += 1);
    let pinned = |part: usize| model.pins.iter().any(|pin| model.parts[pin.joint.index()] == part && !pin.is_set);
    let worth = |(part, count): (&usize, &usize)| (!pinned(*part), *count, std::cmp::Reverse(*part));
    counts.iter().max_by_key(|entry| worth(*entry)).map_or(0, |(part, _)| *part)
}

/// The derivative of a condition by the unknowns, up to a factor; `None` when it touches none.
fn derivative(model: &Model, condition: &Condition, places: &[Point]) -> Option<BTreeMap<usize, Rational>> {
    let mut row: BTreeMap<usize, Rational> = BTreeMap::new();
    for (from, to, slope) in slopes(&condition.function, places)? {
        for (joint, sign) in [(to, whole(1)), (from, whole(-1))] {
            for axis in [Axis::X, Axis::Y] {
                if let Some(unknown) = model.coordinates[joint.index()][axis.index()].unknown {
                    *row.entry(unknown).or_insert_with(Rational::zero) += &sign * axis.part(&slope);
                }
            }
        }
    }
    row.retain(|_, slope| !slope.is_zero());
    (!row.is_empty()).then_some(row)
}

/// The slopes of a function by its legs, up to one common factor. Where the function itself has a double root (an offset
/// of nothing) the slopes are those of its root.
fn slopes(function: &Function, places: &[Point]) -> Option<Vec<(JointId, JointId, Vector)>> {
    let cross_slopes =
        |u: &Vector, v: &Vector| (Vector { x: v.y.clone(), y: -&v.x }, Vector { x: -&u.y, y: u.x.clone() });
    Some(match function {
        Function::Along { axis, from, to } => {
            let one = |a: Axis| if a == *axis { whole(1) } else { whole(0) };
            vec![(*from, *to, Vector { x: one(Axis::X), y: one(Axis::Y) })]
        }
        Function::Quadrance { from, to } => vec![(*from, *to, leg(places, *from, *to))],
        Function::Slope { from, to, .. } => {
            let leg = leg(places, *from, *to);
            vec![(*from, *to, Vector { x: -&leg.y, y: leg.x.clone() })]
        }
        Function::Spread { at, from, to } | Function::Cosine { at, from, to } => {
            let turn = |leg: &Vector| {
                let q = leg.quadrance();
                (!q.is_zero()).then(|| Vector { x: -&leg.y / &q, y: &leg.x / &q })
            };
            let (u, v) = (leg(places, *at, *from), leg(places, *at, *to));
            vec![(*at, *to, turn(&v)?), (*at, *from, -&turn(&u)?)]
        }
        Function::OffLine { joint, line } => {
            let (u, v) = (leg(places, line[0], line[1]), leg(places, line[0], *joint));
            let (by_u, by_v) = cross_slopes(&u, &v);
            let stretch = u.scaled(&(-u.cross(&v) / u.quadrance()));
            vec![(line[0], line[1], plus(&by_u, &stretch)), (line[0], *joint, by_v)]
        }
        Function::OffSquare { at, from, to } => {
            let (u, v) = (leg(places, *at, *from), leg(places, *at, *to));
            vec![(*at, *from, v), (*at, *to, u)]
        }
        Function::OffParallel { first, second } => {
            let (u, v) = (leg(places, first[0], first[1]), leg(places, second[0], second[1]));
            let (by_u, by_v) = cross_slopes(&u, &v);
            vec![(first[0], first[1], by_u), (second[0], second[1], by_v)]
        }
        Function::LengthDifference { first, second } => {
            let (u, v) = (leg(places, first[0], first[1]), leg(places, second[0], second[1]));
            // u/|u| - v/|v|, up to a factor: the ratio of the lengths to 40 places is near enough.
            let ratio = Surd::of_quadrance(&(u.quadrance() / v.quadrance()))?;
            let fine = crate::exact::ratio(1, 1 << 40);
            let ratio = whole(ratio.nearest(&fine)?.steps) * fine;
            vec![(first[0], first[1], u), (second[0], second[1], v.scaled(&-ratio))]
        }
    })
}

fn plus(u: &Vector, v: &Vector) -> Vector {
    Vector { x: &u.x + &v.x, y: &u.y + &v.y }
}

/// The free unknowns (one for each lost rank), and for each unknown whether it can move.
fn moving_unknowns(unknowns: usize, rows: &[BTreeMap<usize, Rational>], field: Field) -> (Vec<usize>, Vec<bool>) {
    let mut pivots: Vec<Option<BTreeMap<usize, u64>>> = vec![None; unknowns];
    for row in rows {
        let Some(mut row) = residues(row, field) else { continue };
        while let Some((&column, &value)) = row.first_key_value() {
            match &pivots[column] {
                Some(pivot) => take_from(&mut row, pivot, value, field),
                None => {
                    let inverse = field.reciprocal(value);
                    row.values_mut().for_each(|v| *v = field.times(*v, inverse));
                    pivots[column] = Some(row);
                    break;
                }
            }
        }
    }
    let free: Vec<usize> = (0..unknowns).filter(|&column| pivots[column].is_none()).collect();
    let mut moving = vec![false; unknowns];
    for &column in free.iter().take(MOST_FREE) {
        let mut motion = vec![0u64; unknowns];
        motion[column] = 1;
        for at in (0..column).rev() {
            let Some(pivot) = &pivots[at] else { continue };
            let sum = pivot.range(at + 1..).fold(0, |sum, (c, v)| field.plus(sum, field.times(*v, motion[*c])));
            motion[at] = field.minus(sum);
        }
        moving.iter_mut().zip(&motion).for_each(|(moves, speed)| *moves |= *speed != 0);
    }
    free.iter().for_each(|&column| moving[column] = true);
    (free, moving)
}

/// The row modulo the prime; `None` when a denominator is a multiple of it.
fn residues(row: &BTreeMap<usize, Rational>, field: Field) -> Option<BTreeMap<usize, u64>> {
    let mut reduced = BTreeMap::new();
    for (column, value) in row {
        let denominator = field.of_big(value.denom());
        if denominator == 0 {
            return None;
        }
        let residue = field.times(field.of_big(value.numer()), field.reciprocal(denominator));
        if residue != 0 {
            reduced.insert(*column, residue);
        }
    }
    Some(reduced)
}

/// Takes `factor` times the pivot row, whose first entry is 1, from a row.
fn take_from(row: &mut BTreeMap<usize, u64>, pivot: &BTreeMap<usize, u64>, factor: u64, field: Field) {
    let less = field.minus(factor);
    for (column, value) in pivot {
        let sum = field.plus(row.get(column).copied().unwrap_or(0), field.times(less, *value));
        if sum == 0 {
            row.remove(column);
        } else {
            row.insert(*column, sum);
        }
    }
}

/// A joint that is held, but so weakly that the rounding of the figures lets it wander.
#[derive(Clone, Debug)]
pub(crate) struct Weak {
    /// The joint.
    pub joint: JointId,
    /// The way it wanders.
    pub axis: Axis,
    /// How far, about, in the sheet's unit.
    pub by: Rational,
}

/// A joint wanders when it may stray more than this many steps, and this many times as far as most.
const WEAK_STEPS: i64 = 24;
const WEAK_TIMES: f64 = 8.0;

/// The weakly held joints at a layout, by the standard deviations of the adjustment.
pub(crate) fn weak(problem: &Problem, places: &[Point]) -> Vec<Weak> {
    problem.with_base(&[], |base| {
        let model = &base.model;
        let deviations = base.network.deviations(&base.floats_of(places));
        let mut sorted: Vec<f64> = deviations.iter().copied().filter(|d| d.is_finite()).collect();
        order::sort_by(&mut sorted, f64::total_cmp);
        let usual = sorted.get(sorted.len().saturating_sub(1) / 2).copied().unwrap_or(0.0) * WEAK_TIMES;
        let least = problem.step.abs() * whole(WEAK_STEPS);
        let mut found: Vec<Weak> = Vec::new();
        for (joint, coordinates) in model.coordinates.iter().enumerate() {
            for (axis, coordinate) in [Axis::X, Axis::Y].into_iter().zip(coordinates) {
                let Some(deviation) = coordinate.unknown.map(|unknown| deviations[unknown]) else { continue };
                let Some(by) = Rational::from_float(deviation).map(|d| d * &model.scale) else { continue };
                if deviation > usual && by > least && found.iter().all(|weak| weak.joint.index() != joint) {
                    found.push(Weak { joint: JointId::new(joint), axis, by });
                }
            }
        }
        found
    })
}
