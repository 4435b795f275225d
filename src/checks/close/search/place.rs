//! From floats to exact places: on the coarsest lattice that agrees with the figures, or as exact fractions.

use super::adjust::Network;
use super::model::{Model, to_float};
use crate::checks::close::meaning::Condition;
use crate::exact::{Point, Rational, nearest_multiple, whole};
use num_bigint::BigInt;
use num_integer::Integer;
use num_traits::{One, Signed, Zero};

/// The lattice is halved this often before it is given up.
const FINEST: usize = 30;
/// In floats a row may seem to be off by this much and still be tried exactly.
const FLOAT_DOUBT: f64 = 1e-12;

/// Places that may be a layout, coarsest lattice first: those that pass in floats and lie on lattices of `step` halved
/// over and over.
pub(crate) fn on_lattices<'a>(
    model: &'a Model,
    network: &'a Network,
    floats: &'a [f64],
    step: &'a Rational,
    keep: &'a dyn Fn(usize) -> bool,
) -> impl Iterator<Item = Vec<Point>> + 'a {
    let exact = model.exactly(floats);
    (0..=FINEST).filter_map(move |halvings| {
        let lattice = step / Rational::from_integer(BigInt::one() << halvings);
        let round = |value: &Rational| Some(&lattice * Rational::from_integer(nearest_multiple(value, &lattice)?));
        let unknowns: Vec<Rational> = exact.as_ref()?.iter().map(round).collect::<Option<_>>()?;
        let back = |(unknown, value): (usize, &Rational)| {
            to_float(&((value - model.axes[unknown].of(&model.origin)) / &model.scale))
        };
        let rounded: Vec<f64> = unknowns.iter().enumerate().map(back).collect();
        let worst = network.worst(&network.linearised(&rounded), keep);
        (worst <= FLOAT_DOUBT).then(|| model.places(&unknowns))
    })
}

/// Rounds of refinement of exact unknowns; each gains about ten digits.
const REFINEMENTS: usize = 12;
/// Binary places kept while exact unknowns are refined.
const REFINED_BITS: u32 = 256;
/// Denominators of exact unknowns up to this many bits are recognised.
const DENOMINATOR_BITS: u32 = 100;

/// Places where the exact rows hold exactly, as fractions: Gauss-Newton steps in floats on residuals taken exactly, then
/// each unknown's simplest fraction within the accuracy reached.
pub(crate) fn as_fractions(
    model: &Model,
    network: &Network,
    conditions: &[Vec<Condition>],
    floats: &[f64],
    keep: &dyn Fn(usize) -> bool,
) -> Option<Vec<Point>> {
    let mut unknowns = model.exactly(floats)?;
    let exact_row = |row: usize| keep(row) && network.rows[row].exact;
    let scale = to_float(&model.scale);
    let mut matrix = network.pattern.zeros();
    let lines = network.linearised(floats);
    for (row, line) in lines.iter().enumerate().filter(|(row, _)| exact_row(*row)) {
        network.pattern.add_row(&mut matrix, row, &line.gradient, 1.0);
    }
    (0..network.unknowns).for_each(|u| network.pattern.add_diagonal(&mut matrix, u, 1e-12));
    let factor = network.pattern.factor(matrix);
    for _ in 0..REFINEMENTS {
        let places = model.places(&unknowns);
        let mut rhs = vec![Rational::zero(); network.unknowns];
        let mut size = Rational::zero();
        for (row, line) in lines.iter().enumerate().filter(|(row, _)| exact_row(*row)) {
            let source = &network.rows[row];
            let residual = exact_residual(&conditions[source.figure][source.condition], &places)?;
            size = size.max(residual.abs());
            for (&unknown, g) in network.touched[row].iter().zip(&line.gradient) {
                rhs[unknown] -= &residual * Rational::from_float(*g)?;
            }
        }
        if size.is_zero() {
            break;
        }
        // The step is solved in floats around 1 and brought back to its true size exactly.
        let scaled: Vec<f64> = rhs.iter().map(|r| to_float(&(r / &size))).collect();
        let step = factor.solve(&scaled);
        if !step.iter().all(|s| s.is_finite() && s.abs() < 1e9 * scale.max(1.0)) {
            return None;
        }
        for (value, s) in unknowns.iter_mut().zip(&step) {
            *value += Rational::from_float(*s)? * &size;
            *value = trimmed(value);
        }
    }
    let short: Vec<Rational> = unknowns.iter().map(|value| simplest_near(value, DENOMINATOR_BITS)).collect();
    Some(model.places(&short))
}

/// Places where each exact length holds exactly although its joint is otherwise only rounded: the joint is put on a
/// rational point of the circle about the other end, near where floats have it. One for each fineness, coarse first.
///
/// Rational points of a circle with a rational centre and radius are `((1 - t²), 2t) / (1 + t²)` for rational `t`.
pub(crate) fn on_circles<'a>(
    model: &'a Model,
    network: &'a Network,
    conditions: &'a [Vec<Condition>],
    floats: &'a [f64],
    step: &'a Rational,
    keep: &'a dyn Fn(usize) -> bool,
) -> impl Iterator<Item = Vec<Point>> + 'a {
    let exact = model.exactly(floats);
    CIRCLE_BITS.into_iter().filter_map(move |bits| {
        let lattice = step / Rational::from_integer(BigInt::one() << (bits / 2));
        let round = |value: &Rational| Some(&lattice * Rational::from_integer(nearest_multiple(value, &lattice)?));
        let mut unknowns: Vec<Rational> = exact.as_ref()?.iter().map(round).collect::<Option<_>>()?;
        let mut settled = vec![false; unknowns.len()];
        for row in network.rows.iter().enumerate().filter(|(row, r)| keep(*row) && r.exact).map(|(_, r)| r) {
            put_on_circle(model, &conditions[row.figure][row.condition], &mut unknowns, &mut settled, bits)?;
        }
        Some(model.places(&unknowns))
    })
}

/// Fineness of the parameter of circles, in binary places.
const CIRCLE_BITS: [u32; 5] = [8, 12, 18, 26, 36];

/// Moves one end of an exact length onto its circle; `None` when both ends are settled already or it is no such length.
fn put_on_circle(
    model: &Model,
    condition: &Condition,
    unknowns: &mut [Rational],
    settled: &mut [bool],
    bits: u32,
) -> Option<()> {
    use crate::checks::close::meaning::Function;
    let Function::Quadrance { from, to } = condition.function else { return None };
    let radius = crate::exact::Surd::of_quadrance(condition.possible.lo())?.rational()?.clone();
    let free = |joint: crate::truss::JointId, settled: &[bool]| {
        let [x, y] = [0, 1].map(|axis| model.coordinates[joint.index()][axis].unknown.filter(|u| !settled[*u]));
        Some([x?, y?])
    };
    let (moving, centre, slots) = match (free(to, settled), free(from, settled)) {
        (Some(slots), _) => (to, from, slots),
        (None, Some(slots)) => (from, to, slots),
        (None, None) => return None,
    };
    let places = model.places(unknowns);
    let (centre, place) = (places[centre.index()].clone(), &places[moving.index()]);
    let (dx, dy) = (to_float(&(&place.x - &centre.x)), to_float(&(&place.y - &centre.y)));
    let tangent = dy / (dx.hypot(dy) + dx.abs());
    let unit = BigInt::one() << bits;
    let t =
        (Rational::from_float(tangent)? * Rational::from_integer(unit.clone())).round() / Rational::from_integer(unit);
    let below = Rational::one() + &t * &t;
    let along = (Rational::one() - &t * &t) / &below * &radius;
    let target = [if dx < 0.0 { -along } else { along }, whole(2) * &t / &below * &radius];
    for (axis, (slot, offset)) in slots.into_iter().zip(target).enumerate() {
        let base = if axis == 0 { &centre.x } else { &centre.y };
        unknowns[slot] = base + offset - &model.coordinates[moving.index()][axis].offset;
        settled[slot] = true;
    }
    // The other end stays where it is from now on.
    for coordinate in &model.coordinates[if moving == to { from } else { to }.index()] {
        if let Some(unknown) = coordinate.unknown {
            settled[unknown] = true;
        }
    }
    Some(())
}

/// How far a condition is off, about as a length; `None` where it has no value.
fn exact_residual(condition: &Condition, places: &[Point]) -> Option<Rational> {
    use crate::checks::close::meaning::Function;
    let target = condition.possible.middle();
    match &condition.function {
        Function::Quadrance { .. } => {
            let value = condition.function.value(places)?;
            let root = Rational::from_float(to_float(&target).sqrt().max(1e-6))?;
            Some((value - target) / (whole(2) * root))
        }
        Function::Along { .. } => Some(condition.function.value(places)? - target),
        _ => None,
    }
}

fn trimmed(value: &Rational) -> Rational {
    let unit = BigInt::one() << REFINED_BITS;
    Rational::new((value * Rational::from_integer(unit.clone())).round().to_integer(), unit)
}

/// The simplest fraction near a number: the convergent of its continued fraction before the first very large quotient.
pub(crate) fn simplest_near(value: &Rational, bits: u32) -> Rational {
    let (mut numerator, mut denominator) = (value.numer().clone(), value.denom().clone());
    let (mut p, mut q) = ([BigInt::zero(), BigInt::one()], [BigInt::one(), BigInt::zero()]);
    while !denominator.is_zero() {
        let (quotient, rest) = numerator.div_mod_floor(&denominator);
        if !q[1].is_zero() && quotient.bits() > 40 && q[1].bits() <= u64::from(bits) {
            break;
        }
        let next = [&quotient * &p[1] + &p[0], &quotient * &q[1] + &q[0]];
        let [np, nq] = next;
        p = [p[1].clone(), np];
        q = [q[1].clone(), nq];
        (numerator, denominator) = (denominator, rest);
    }
    Rational::new(p[1].clone(), q[1].clone())
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::exact::ratio;

    #[test]
    fn fractions_are_recognised_through_noise() {
        for value in [ratio(5, 13), ratio(-1234, 77), whole(0), whole(12), ratio(480, 7)] {
            let noise = Rational::new(1.into(), BigInt::one() << 150);
            assert_eq!(simplest_near(&(&value + &noise), 100), value);
            assert_eq!(simplest_near(&(&value - &noise), 100), value);
        }
    }
}
