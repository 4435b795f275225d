//! The rank of a rigidity matrix, and what proves it.

use super::super::frame::Frame;
use super::bodies::full_rank;
use super::factor::{Factor, Pattern, TooMuch};
use super::lift::{NotLifted, Velocities, lift};
use super::matrix::{Matrix, NOWHERE};
use super::pebbles::most_rank;
use crate::exact::modular::{Field, PRIMES, Scatter};

/// What the rank rests on.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(crate) enum Certainty {
    /// It is full modulo a prime, so it is full.
    Full,
    /// Fewer are counted than would be needed: no places of the joints could give more.
    Counted,
    /// As many independent motions were verified exactly as columns are free.
    Motions,
    /// The same modulo several primes; not proved within the bound of work.
    Agreed,
}

/// What was found of a matrix.
#[derive(Debug)]
pub(crate) struct Judged {
    /// The rank of members and holds, without the ground.
    pub(crate) rank: usize,
    /// The independent ways to move.
    pub(crate) ways: usize,
    /// What the rank rests on.
    pub(crate) certainty: Certainty,
    /// True when joints anywhere else would have a full rank.
    pub(crate) is_generic: bool,
    /// One motion, where there is any and it was found within the bound of work.
    pub(crate) motion: Option<Velocities>,
    /// Of each row, whether it takes part in a self-stress.
    pub(crate) stressed: Vec<bool>,
}

/// So many ways to move are proved one by one.
const MOST_MOTIONS: usize = 48;
/// Seeds of the weights that are tried with each prime.
const SEEDS: u64 = 4;
/// Free columns among which the motion with the fewest moving joints is looked for.
const TRIED: usize = 16;

/// Finds the rank, a motion and the self-stress.
///
/// # Errors
///
/// [`TooMuch`] when the elimination would be beyond the bound of work.
pub(crate) fn judge(frame: &Frame, matrix: &Matrix) -> Result<Judged, TooMuch> {
    if let Some(rank) = full_rank(frame).filter(|rank| rank + matrix.ground == matrix.rows.len()) {
        let stressed = vec![false; matrix.rows.len()];
        return Ok(Judged { rank, ways: 0, certainty: Certainty::Full, is_generic: false, motion: None, stressed });
    }
    let work = frame.limits.most_work;
    let pattern = Pattern::new(matrix, &places(frame, matrix), work)?;
    let mut best: Option<(Factor, Option<Velocities>)> = None;
    for prime in PRIMES {
        let field = Field::new(prime);
        let Some(factor) = eliminated(matrix, &pattern, field, &|| matrix.residues(field)) else { continue };
        let motion = nicest(&factor).map(|free| lift(matrix, &factor, free, work));
        let is_settled = !matches!(motion, Some(Err(NotLifted::Unlucky)));
        let motion = motion.and_then(Result::ok);
        if best.as_ref().is_none_or(|(other, _)| factor.rank() > other.rank() || is_settled) {
            best = Some((factor, motion));
        }
        if is_settled {
            break;
        }
    }
    let (factor, motion) = best.ok_or(TooMuch)?;
    let rank = factor.rank() - matrix.ground;
    let most = if factor.free.is_empty() { None } else { most_rank(matrix, work) };
    let is_generic = !factor.free.is_empty()
        && most.is_none_or(|most| most >= rank + factor.free.len())
        && generic(matrix, &pattern);
    Ok(Judged {
        rank,
        ways: factor.free.len(),
        certainty: certainty(matrix, &factor, rank, most, work),
        is_generic,
        motion,
        stressed: if matrix.rows.len() > factor.rank() {
            stressed(matrix, &factor)
        } else {
            vec![false; matrix.rows.len()]
        },
    })
}

fn places(frame: &Frame, matrix: &Matrix) -> Vec<[i64; 2]> {
    matrix.joints.iter().map(|&joint| frame.lattice.coarse(joint as usize)).collect()
}

/// True when elimination modulo a prime proves a full rank.
pub(crate) fn is_full(frame: &Frame, matrix: &Matrix) -> bool {
    let Ok(pattern) = Pattern::new(matrix, &places(frame, matrix), frame.limits.most_work) else { return false };
    let field = Field::new(PRIMES[0]);
    let factor = eliminated(matrix, &pattern, field, &|| matrix.residues(field));
    factor.is_some_and(|factor| factor.free.is_empty())
}

fn eliminated<'p>(
    matrix: &Matrix,
    pattern: &'p Pattern,
    field: Field,
    residues: &dyn Fn() -> Vec<[u64; 2]>,
) -> Option<Factor<'p>> {
    (0..SEEDS).find_map(|seed| Factor::new(matrix, pattern, field, residues(), seed).ok())
}

/// The free column whose motion moves the fewest joints, of the first ones.
fn nicest(factor: &Factor) -> Option<usize> {
    let moving = |free: usize| factor.motion(free).iter().filter(|velocity| **velocity != [0, 0]).count();
    factor.free.iter().copied().take(TRIED).min_by_key(|&free| moving(free))
}

/// True when joints at scattered places have a full rank: then joints in general have.
fn generic(matrix: &Matrix, pattern: &Pattern) -> bool {
    let field = Field::new(PRIMES[0]);
    (1..=2).any(|seed| {
        let residues = || matrix.scattered_residues(field, seed);
        eliminated(matrix, pattern, field, &residues).is_some_and(|factor| factor.free.is_empty())
    })
}

fn certainty(matrix: &Matrix, factor: &Factor, rank: usize, most: Option<usize>, work: usize) -> Certainty {
    if factor.free.is_empty() {
        return Certainty::Full;
    }
    if most == Some(rank) {
        return Certainty::Counted;
    }
    let few = factor.free.len() <= MOST_MOTIONS;
    // Each motion is 1 in its own free column and 0 in the others: together they are independent.
    if few && factor.free.iter().all(|&free| lift(matrix, factor, free, work / factor.free.len()).is_ok()) {
        return Certainty::Motions;
    }
    Certainty::Agreed
}

/// Which rows take part in a self-stress: those that a scattered one does not miss.
///
/// With z scattered and G x = Rᵀ D z, the vector y = D (z - R x) has Rᵀ y = 0. A row where it is not zero is certainly
/// stressed when the rank modulo the prime is the true one; one where it is zero is missed with a chance of 2^-31.
fn stressed(matrix: &Matrix, factor: &Factor) -> Vec<bool> {
    let field = factor.field;
    let mut scatter = Scatter::new(11);
    let z: Vec<u64> = matrix.rows.iter().map(|_| scatter.residue(field)).collect();
    let mut right = vec![[0u64; 2]; matrix.joints.len()];
    for (index, row) in matrix.rows.iter().enumerate().filter(|(_, row)| row.at[0] != row.at[1]) {
        let weighted = field.times(factor.weights[index], z[index]);
        let [x, y] = factor.residues[index].map(|entry| field.times(weighted, entry));
        let first = &mut right[row.at[0] as usize];
        *first = [field.plus(first[0], x), field.plus(first[1], y)];
        if row.at[1] != NOWHERE {
            let second = &mut right[row.at[1] as usize];
            *second = [field.plus(second[0], field.minus(x)), field.plus(second[1], field.minus(y))];
        }
    }
    let x = factor.solve(&right);
    let velocity = |at: u32| if at == NOWHERE { [0, 0] } else { x[at as usize] };
    let is_stressed = |(index, row): (usize, &super::matrix::Row)| {
        if row.direction.is_null() || row.at[0] == row.at[1] {
            return false;
        }
        let (v, w) = (velocity(row.at[0]), velocity(row.at[1]));
        let part = |axis: usize| {
            let difference = field.plus(v[axis], field.minus(w[axis]));
            field.times(factor.residues[index][axis], difference)
        };
        field.plus(part(0), part(1)) != z[index]
    };
    matrix.rows.iter().enumerate().map(is_stressed).collect()
}
