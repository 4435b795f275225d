//! The rank of random frames, against the singular values of two libraries and an elimination in whole numbers.

#[path = "../../close_help/mod.rs"]
mod close_help;
#[path = "../../trusses/mod.rs"]
mod trusses;

use chordwright::checks::{StandsAnswer, StandsState};
use chordwright::exact::{Rational, Vector};
use chordwright::truss::{SupportKind, Truss};
use close_help::generate::Dice;
use num_bigint::BigInt;
use num_traits::{One, ToPrimitive, Zero};
use std::collections::HashMap;
use trusses::{frame, pinned, rolling, usual};

/// Singular values below this share of the greatest count as zero.
const SMALL: f64 = 1e-9;

/// The rigidity matrix in whole numbers: members, then holds.
fn rows(truss: &Truss) -> Vec<Vec<BigInt>> {
    let points = truss.points();
    let whole = |value: &Rational| {
        assert!(value.denom().is_one(), "these frames are in whole numbers");
        value.numer().clone()
    };
    let empty = || vec![BigInt::zero(); 2 * truss.joints.len()];
    let mut rows = Vec::new();
    for member in &truss.members {
        let [a, b] = member.ends().map(|end| end.index());
        let along = &points[b] - &points[a];
        let mut row = empty();
        for (axis, part) in [whole(&along.x), whole(&along.y)].into_iter().enumerate() {
            row[2 * a + axis] -= &part;
            row[2 * b + axis] += part;
        }
        rows.push(row);
    }
    for support in &truss.supports {
        let holds = match &support.kind {
            SupportKind::Pin => vec![[BigInt::one(), BigInt::zero()], [BigInt::zero(), BigInt::one()]],
            SupportKind::Roller { normal } => vec![normal.each_ref().map(|part| whole(&part.value))],
        };
        for [x, y] in holds {
            let mut row = empty();
            (row[2 * support.joint.index()], row[2 * support.joint.index() + 1]) = (x, y);
            rows.push(row);
        }
    }
    rows
}

/// By elimination without fractions (Bareiss 1968).
fn exact_rank(mut rows: Vec<Vec<BigInt>>) -> usize {
    let columns = rows.first().map_or(0, Vec::len);
    let (mut rank, mut before) = (0, BigInt::one());
    for column in 0..columns {
        let Some(pivot) = (rank..rows.len()).find(|&row| !rows[row][column].is_zero()) else { continue };
        rows.swap(rank, pivot);
        let (done, rest) = rows.split_at_mut(rank + 1);
        let pivot_row = &done[rank];
        for row in rest {
            let factor = std::mem::take(&mut row[column]);
            for other in column + 1..columns {
                row[other] = (&row[other] * &pivot_row[column] - &factor * &pivot_row[other]) / &before;
            }
        }
        before.clone_from(&pivot_row[column]);
        rank += 1;
    }
    rank
}

/// Rows in floating point, each brought to length 1.
fn unit_rows(rows: &[Vec<BigInt>]) -> Vec<Vec<f64>> {
    let numbers =
        |row: &Vec<BigInt>| -> Vec<f64> { row.iter().map(|entry| entry.to_f64().expect("a number")).collect() };
    let unit = |row: Vec<f64>| {
        let length = row.iter().map(|entry| entry * entry).sum::<f64>().sqrt();
        row.into_iter().map(|entry| if length > 0.0 { entry / length } else { 0.0 }).collect()
    };
    rows.iter().map(numbers).map(unit).collect()
}

fn count_large(values: &[f64]) -> usize {
    let greatest = values.iter().copied().fold(0.0, f64::max);
    values.iter().filter(|&&value| value > SMALL * greatest).count()
}

fn rank_by_nalgebra(rows: &[Vec<f64>], columns: usize) -> usize {
    let matrix = nalgebra::DMatrix::from_fn(rows.len(), columns, |row, column| rows[row][column]);
    if rows.is_empty() || columns == 0 { 0 } else { count_large(matrix.singular_values().as_slice()) }
}

fn rank_by_faer(rows: &[Vec<f64>], columns: usize) -> usize {
    let matrix = faer::Mat::from_fn(rows.len(), columns, |row, column| rows[row][column]);
    count_large(&matrix.singular_values().expect("singular values"))
}

fn check(truss: &Truss, name: &str) -> StandsAnswer {
    let stands = usual(truss).answers.stands;
    let rows = rows(truss);
    let (unit, columns) = (unit_rows(&rows), 2 * truss.joints.len());
    let all = [exact_rank(rows), rank_by_nalgebra(&unit, columns), rank_by_faer(&unit, columns)];
    assert_eq!([stands.rank; 3], all, "{name}: {truss:?}");
    let used = (0..truss.joints.len()).filter(|&joint| is_used(truss, joint)).count();
    let free_body = if truss.supports.is_empty() { 3 } else { 0 };
    assert_eq!(stands.unknowns, (2 * used).saturating_sub(free_body), "{name}: {truss:?}");
    assert_eq!(stands.motion.is_empty(), stands.rank == stands.unknowns, "{name}: a motion exactly when it moves");
    assert_motion(truss, &stands, name);
    stands
}

fn is_used(truss: &Truss, joint: usize) -> bool {
    truss.members.iter().any(|member| member.ends().iter().any(|end| end.index() == joint))
        || truss.supports.iter().any(|support| support.joint.index() == joint)
}

/// The motion changes no member's length and moves against no hold.
fn assert_motion(truss: &Truss, stands: &StandsAnswer, name: &str) {
    let known: HashMap<usize, &Vector> =
        stands.motion.iter().map(|moved| (moved.joint.index(), &moved.velocity)).collect();
    let velocity = |joint: usize| known.get(&joint).map_or_else(Default::default, |v| [v.x.clone(), v.y.clone()]);
    let points = truss.points();
    for member in &truss.members {
        let [a, b] = member.ends().map(|end| end.index());
        let along = &points[b] - &points[a];
        let ([ax, ay], [bx, by]): ([Rational; 2], [Rational; 2]) = (velocity(a), velocity(b));
        assert!((along.x * (bx - ax) + along.y * (by - ay)).is_zero(), "{name}: a member grows: {truss:?}");
    }
    for support in &truss.supports {
        let [x, y]: [Rational; 2] = velocity(support.joint.index());
        match &support.kind {
            SupportKind::Pin => assert!(x.is_zero() && y.is_zero(), "{name}: a pin moves"),
            SupportKind::Roller { normal: [nx, ny] } => {
                assert!((x * &nx.value + y * &ny.value).is_zero(), "{name}: a roller lifts");
            }
        }
    }
}

/// A frame in which each joint after the second is tied to two earlier ones, then some members more and some less.
fn tied(joints: usize, side: i64, more: usize, less: usize, dice: &mut Dice) -> Truss {
    let places: Vec<(i64, i64)> = (0..joints).map(|_| (dice.between(-side, side), dice.between(-side, side))).collect();
    let mut members = vec![(0, 1)];
    for joint in 2..joints {
        let first = dice.below(joint);
        let second = (first + 1 + dice.below(joint - 1)) % joint;
        members.extend([(first, joint), (second, joint)]);
    }
    for _ in 0..more {
        let a = dice.below(joints);
        members.push((a, (a + 1 + dice.below(joints - 1)) % joints));
    }
    for _ in 0..less {
        members.swap_remove(dice.below(members.len()));
    }
    frame(&places, &members)
}

/// The frame with supports of some kind, or none.
fn supported(truss: Truss, dice: &mut Dice) -> Truss {
    let count = truss.joints.len();
    let normal = (dice.between(-3, 3), dice.between(1, 3));
    match dice.below(4) {
        0 => truss,
        1 => rolling(pinned(truss, 0), 1, normal),
        2 => pinned(pinned(truss, 0), dice.below(count)),
        _ => (0..3).fold(truss, |truss, _| {
            let joint = dice.below(count);
            rolling(truss, joint, (dice.between(-2, 2), dice.between(1, 2)))
        }),
    }
}

#[test]
fn the_rank_of_random_frames_is_what_others_find() {
    let mut dice = Dice::new(21);
    let mut states: HashMap<&str, usize> = HashMap::new();
    for round in 0..900 {
        let (joints, side) = (3 + round % 14, [3, 8, 1000][round % 3]);
        let (more, less) = (dice.below(4), dice.below(3));
        let truss = tied(joints, side, more, less, &mut dice);
        let stands = check(&supported(truss, &mut dice), &format!("round {round}"));
        *states.entry(stands.state.name()).or_default() += 1;
    }
    let kinds = [StandsState::Rigid, StandsState::Mechanism, StandsState::CriticalForm, StandsState::NoSupports];
    for state in kinds {
        assert!(states.get(state.name()).is_some_and(|&count| count >= 20), "too few of {}: {states:?}", state.name());
    }
}

#[test]
fn larger_frames_too() {
    let mut dice = Dice::new(22);
    for round in 0..24 {
        let truss = tied(40 + round, 500, dice.below(3), round % 3, &mut dice);
        check(&supported(truss, &mut dice), &format!("round {round}"));
    }
}
