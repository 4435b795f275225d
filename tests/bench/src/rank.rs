//! Proof of full rank beside a floating-point LU.

use crate::close_help::generate::Dice;
use crate::table::Row;
use crate::timing::{in_turn, milliseconds, ratio};
use chordwright::checks::steps::Prepared;
use chordwright::checks::{Limits, Placed};
use chordwright::exact::whole;
use chordwright::measure::Written;
use chordwright::truss::{SupportKind, Truss};
use chordwright_bench::{Plain, bare_lattice, braced_lattice, long_truss};
use faer::Mat;
use faer::linalg::solvers::Solve;
use faer::sparse::{SparseColMat, Triplet};
use num_traits::ToPrimitive;

const ROUNDS: usize = 7;
const GOAL: f64 = 3.0;

/// Trusses with just enough members, so that the matrix is square, and one with spare members.
pub(crate) fn measure() -> Result<Vec<Row>, String> {
    let mut rows = Vec::new();
    let cases = [
        ("long truss of 5,000", long_truss(5_000)),
        ("long truss of 20,000", long_truss(20_000)),
        ("long truss of 100,000", long_truss(100_000)),
        ("square lattice of 19,600", bare_lattice(98)),
        ("the same out of square", out_of_square(bare_lattice(98))),
        ("braced lattice of 19,360 (faer: augmented)", braced_lattice(80)),
    ];
    for (name, truss) in cases {
        let (placed, limits) = (Placed::as_given(&truss), Limits::default());
        let prepared = Prepared::new(&placed, &limits);
        let stands = prepared.stands();
        let (rows_of_truss, matrix) = matrix(&truss);
        let joints = truss.joints.len();
        if stands.rank != 2 * joints {
            return Err(format!("{name}: rank {} of {} columns and {rows_of_truss} rows", stands.rank, 2 * joints));
        }
        let error = solution_error(&matrix)?;
        let times = in_turn(ROUNDS, || matrix.sp_lu().is_ok(), || prepared.is_held());
        let told = times.map(milliseconds);
        let row = Row::at_least(name, ratio(times), GOAL, "x");
        rows.push(row.with(format!("faer {}, ours {}; faer's error {error:.0e}", told[0], told[1])));
    }
    Ok(rows)
}

/// The truss with every joint moved a little, so that no entry of the matrix is zero.
fn out_of_square(mut truss: Truss) -> Truss {
    let mut dice = Dice::new(4);
    for joint in &mut truss.joints {
        for place in [&mut joint.x, &mut joint.y] {
            *place = Written::plain(&place.value + whole(dice.between(-9, 9)));
        }
    }
    truss
}

/// How many rows the rigidity matrix R has (one for each member and each hold, two columns for each joint), and a square
/// matrix that is regular when its rank is full: R itself where it is square, else (1 R; Rᵀ 0).
fn matrix(truss: &Truss) -> (usize, SparseColMat<usize, f64>) {
    let plain = Plain::of(&Placed::as_given(truss));
    let mut entries = Vec::new();
    for (row, &[a, b]) in plain.ends.iter().enumerate() {
        for axis in [0, 1] {
            let along = plain.places[b][axis] - plain.places[a][axis];
            entries.push(Triplet::new(row, 2 * a + axis, -along));
            entries.push(Triplet::new(row, 2 * b + axis, along));
        }
    }
    let mut rows = plain.ends.len();
    for support in &truss.supports {
        let holds = match &support.kind {
            SupportKind::Pin => vec![[1.0, 0.0], [0.0, 1.0]],
            SupportKind::Roller { normal } => vec![normal.each_ref().map(|part| part.value.to_f64().unwrap_or(0.0))],
        };
        for hold in holds {
            for axis in [0, 1] {
                entries.push(Triplet::new(rows, 2 * support.joint.index() + axis, hold[axis]));
            }
            rows += 1;
        }
    }
    entries.retain(|entry| entry.val != 0.0);
    let columns = 2 * truss.joints.len();
    if rows == columns {
        return (rows, SparseColMat::try_new_from_triplets(rows, columns, &entries).expect("entries in their places"));
    }
    let beside = entries.iter().map(|entry| Triplet::new(entry.row, rows + entry.col, entry.val));
    let below = entries.iter().map(|entry| Triplet::new(rows + entry.col, entry.row, entry.val));
    let unit = (0..rows).map(|row| Triplet::new(row, row, 1.0));
    let all: Vec<_> = unit.chain(beside).chain(below).collect();
    let size = rows + columns;
    (rows, SparseColMat::try_new_from_triplets(size, size, &all).expect("entries in their places"))
}

/// How far from the known solution faer's is, beside the largest entry: small only when it found the matrix regular.
fn solution_error(matrix: &SparseColMat<usize, f64>) -> Result<f64, String> {
    let factors = matrix.sp_lu().map_err(|error| format!("faer: {error:?}"))?;
    let known = Mat::from_fn(matrix.ncols(), 1, |row, _| 1.0 + (row % 7) as f64);
    let solution = factors.solve(matrix * &known);
    let error = (0..matrix.ncols()).map(|row| (solution[(row, 0)] - known[(row, 0)]).abs()).fold(0.0, f64::max);
    if error < 1e-3 { Ok(error) } else { Err(format!("faer's solution is off by {error}")) }
}
