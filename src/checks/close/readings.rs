//! What places give for each figure, and how far the printed value is from it.

use super::meaning::{Condition, Function, conditions};
use super::words;
use crate::checks::Reading;
use crate::exact::{Interval, Point, Rational, Surd, ratio, whole};
use crate::truss::{Figure, FigureKind, Truss};
use num_traits::{Signed, Zero};

/// The reading of every figure, in the order of the truss.
pub(crate) fn readings(truss: &Truss, places: &[Point]) -> Vec<Reading> {
    truss.figures.iter().map(|figure| reading(truss, figure, places)).collect()
}

/// What the places give for one figure.
pub(crate) fn reading(truss: &Truss, figure: &Figure, places: &[Point]) -> Reading {
    let holds = conditions(truss, figure).iter().all(|condition| condition.holds(places));
    let (gives, misfit) =
        given(truss, figure, places).unwrap_or_else(|| (String::from("nothing: no direction"), String::from("?")));
    Reading { gives, misfit: if holds { String::new() } else { misfit }, holds }
}

fn given(truss: &Truss, figure: &Figure, places: &[Point]) -> Option<(String, String)> {
    let step = words::length_step(truss, figure);
    let conditions = conditions(truss, figure);
    let value = conditions.first()?.function.value(places);
    let length = |size: &Rational| words::length(truss, size, &step);
    Some(match &figure.kind {
        FigureKind::Run { value: printed, .. } | FigureKind::Rise { value: printed, .. } => {
            let value = value?;
            (length(&value), length(&(&printed.value - &value).abs()))
        }
        FigureKind::Length { value: printed, .. } => {
            let value = value?;
            let given = words::rounded_root(&value, &step);
            // The misfit of the rounded values, unless rounding hides it.
            let off = (&printed.value - &given).abs();
            let off = if off.is_zero() { words::fine_step(truss) } else { off };
            (words::exact_length(truss, &given), words::exact_length(truss, &off))
        }
        FigureKind::Pitch { rise, run, .. } => pitch(truss, figure, &rise.value, &run.value, &value?),
        FigureKind::Angle { value: printed, .. } => {
            let given = words::degrees_of(&value?, &truss.step_of(figure));
            (words::plain(&given), words::plain(&(&printed.value - given).abs()))
        }
        FigureKind::Spread { value: printed, .. } => {
            let value = words::rounded(&value?, &truss.step_of(figure));
            (words::plain(&value), words::plain(&(&printed.value - value).abs()))
        }
        _ => relation(truss, figure, &conditions, places)?,
    })
}

fn pitch(truss: &Truss, figure: &Figure, rise: &Rational, run: &Rational, slope: &Rational) -> (String, String) {
    let step = truss.step_of(figure);
    let (small, large) = if rise <= run { (rise, run) } else { (run, rise) };
    let given = words::rounded(&(slope * large), &step);
    let text = if rise <= run {
        format!("{}:{}", words::plain_fraction(&given), words::plain_fraction(run))
    } else {
        format!("{}:{}", words::plain_fraction(rise), words::plain_fraction(&given))
    };
    (text, words::plain_fraction(&(small - given).abs()))
}

/// A relation gives its name when it holds, else how far off it is.
fn relation(truss: &Truss, figure: &Figure, conditions: &[Condition], places: &[Point]) -> Option<(String, String)> {
    let fine = words::fine_step(truss);
    let step = words::length_step(truss, figure);
    let mut worst = Rational::zero();
    for condition in conditions {
        worst = worst.max(off_by(&condition.function, places, &fine)?);
    }
    let step = if worst < step { fine } else { step };
    let off = words::length(truss, &worst, &step);
    let holds = conditions.iter().all(|condition| condition.holds(places));
    Some(if holds { (figure.kind.name().to_string(), String::new()) } else { (format!("off by {off}"), off) })
}

/// How far a relation is from holding, as a length rounded to `fine`.
fn off_by(function: &Function, places: &[Point], fine: &Rational) -> Option<Rational> {
    match function {
        Function::LengthDifference { first, second } => {
            let length = |ends: &[crate::truss::JointId; 2]| {
                words::rounded_root(&super::meaning::leg(places, ends[0], ends[1]).quadrance(), fine)
            };
            Some((length(first) - length(second)).abs())
        }
        Function::Along { .. } => function.value(places).map(|value| value.abs()),
        _ => function.value(places).map(|value| words::rounded_root(&value, fine)),
    }
}

/// The value of a figure's function at places in the unit of `implied_range`: lengths in the sheet's unit, degrees, or
/// plain numbers; enclosed to 2^-40 where it is irrational. `None` where it has no value.
pub(crate) fn enclosed_value(condition: &Condition, places: &[Point]) -> Option<Interval> {
    let value = condition.function.value(places);
    match &condition.function {
        Function::Quadrance { .. }
        | Function::OffLine { .. }
        | Function::OffSquare { .. }
        | Function::OffParallel { .. } => {
            let value = value?;
            match Surd::of_quadrance(&value)?.rational() {
                Some(exact) => Some(Interval::exactly(exact.clone())),
                None => Interval::exactly(value).sqrt(40),
            }
        }
        Function::Cosine { .. } => {
            let step = ratio(1, 1 << 30);
            let near = words::degrees_of(&value?, &step);
            Some(Interval::between((&near - &step).max(whole(0)), (near + step).min(whole(180))))
        }
        Function::LengthDifference { first, second } => {
            let root = |ends: &[crate::truss::JointId; 2]| {
                Interval::exactly(super::meaning::leg(places, ends[0], ends[1]).quadrance()).sqrt(40)
            };
            Some(&root(first)? - &root(second)?)
        }
        _ => value.map(Interval::exactly),
    }
}
