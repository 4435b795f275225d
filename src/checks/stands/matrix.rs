//! The rigidity matrix: one row for each member and each hold of a support, two columns for each joint in use.
//!
//! A member between p and q has the row (p - q) at p and (q - p) at q: it keeps its length, to first order, when the row
//! times the velocities is zero. Rows are in lowest terms, which changes no rank and no motion.

use super::super::frame::Frame;
use crate::exact::modular::{Field, Scatter};
use crate::exact::{Direction, Vector};
use crate::truss::SupportKind;

/// What a row stands for.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(crate) enum Source {
    /// A member.
    Member(u32),
    /// A hold of a support.
    Support(u32),
    /// A hold that stands in for supports, so that a free body can be judged.
    Ground,
}

/// No second joint: the row is a hold.
pub(crate) const NOWHERE: u32 = u32::MAX;

/// One row: `direction` at the first column pair, its opposite at the second.
#[derive(Clone, Debug)]
pub(crate) struct Row {
    /// The column pairs; the second is [`NOWHERE`] for a hold.
    pub(crate) at: [u32; 2],
    /// The entries.
    pub(crate) direction: Direction,
    /// Where it comes from.
    pub(crate) source: Source,
}

/// The matrix, by rows.
#[derive(Debug)]
pub(crate) struct Matrix {
    /// The joints in use, in order: the column pairs.
    pub(crate) joints: Vec<u32>,
    /// The rows: members, then holds, then ground.
    pub(crate) rows: Vec<Row>,
    /// How many rows are ground.
    pub(crate) ground: usize,
}

impl Matrix {
    /// The matrix of a frame. Joints that no member reaches and no support holds have no columns. Without a support,
    /// three holds of a member's ends are added: they stop exactly the three ways in which a free body moves whole.
    pub(crate) fn new(frame: &Frame) -> Matrix {
        let mut used = super::super::clear::has_member(frame);
        frame.truss.supports.iter().for_each(|support| used[support.joint.index()] = true);
        let joints: Vec<u32> = (0..frame.joint_count() as u32).filter(|&joint| used[joint as usize]).collect();
        let mut column = vec![NOWHERE; frame.joint_count()];
        joints.iter().enumerate().for_each(|(i, &joint)| column[joint as usize] = i as u32);
        let mut rows: Vec<Row> = Vec::with_capacity(frame.ends.len() + 2 * frame.truss.supports.len() + 3);
        for (member, &[a, b]) in frame.ends.iter().enumerate() {
            let direction = frame.lattice.direction([b, a]);
            rows.push(Row { at: [column[a], column[b]], direction, source: Source::Member(member as u32) });
        }
        push_holds(frame, &column, &mut rows);
        let before = rows.len();
        if frame.truss.supports.is_empty() {
            push_ground(frame, &column, &mut rows);
        }
        Matrix { joints, ground: rows.len() - before, rows }
    }

    /// The residues of every row's direction.
    pub(crate) fn residues(&self, field: Field) -> Vec<[u64; 2]> {
        self.rows.iter().map(|row| residue(&row.direction, field)).collect()
    }

    /// The residues as they would be with the joints anywhere, the holds in their own directions.
    pub(crate) fn scattered_residues(&self, field: Field, seed: u64) -> Vec<[u64; 2]> {
        let mut scatter = Scatter::new(seed);
        let places: Vec<[u64; 2]> =
            self.joints.iter().map(|_| [scatter.residue(field), scatter.residue(field)]).collect();
        let between = |[a, b]: [u32; 2]| {
            let (p, q) = (places[a as usize], places[b as usize]);
            [field.plus(p[0], field.minus(q[0])), field.plus(p[1], field.minus(q[1]))]
        };
        let row = |row: &Row| match row.source {
            Source::Member(_) if row.at[0] == row.at[1] => [0, 0],
            Source::Member(_) => between(row.at),
            Source::Support(_) => residue(&row.direction, field),
            Source::Ground => [0, 0],
        };
        let mut rows: Vec<[u64; 2]> = self.rows.iter().map(row).collect();
        if self.ground == 3 {
            // Two holds at one joint and one at another stop a free body, in general in any direction.
            let first = rows.len() - 3;
            rows[first..].copy_from_slice(&[[1, 0], [0, 1], [scatter.residue(field), scatter.residue(field)]]);
        }
        rows
    }
}

fn residue(direction: &Direction, field: Field) -> [u64; 2] {
    match direction {
        Direction::Short(parts) => parts.map(|part| field.of(part)),
        Direction::Long(parts) => [field.of_big(&parts[0]), field.of_big(&parts[1])],
    }
}

fn push_holds(frame: &Frame, column: &[u32], rows: &mut Vec<Row>) {
    for (index, support) in frame.truss.supports.iter().enumerate() {
        let mut hold = |direction| {
            let at = [column[support.joint.index()], NOWHERE];
            rows.push(Row { at, direction, source: Source::Support(index as u32) });
        };
        match &support.kind {
            SupportKind::Pin => {
                hold(Direction::Short([1, 0]));
                hold(Direction::Short([0, 1]));
            }
            SupportKind::Roller { normal: [x, y] } => {
                hold(Direction::of(&Vector { x: x.value.clone(), y: y.value.clone() }));
            }
        }
    }
}

/// Holds one end of the first member with a length wholly, and the other square to the member.
fn push_ground(frame: &Frame, column: &[u32], rows: &mut Vec<Row>) {
    let Some(member) = (0..frame.ends.len()).find(|&member| !frame.has_no_length(member)) else { return };
    let [a, b] = frame.ends[member];
    let along = frame.lattice.displacement([a, b]);
    let across = Direction::of(&Vector { x: -along.y, y: along.x });
    for (joint, direction) in [(a, Direction::Short([1, 0])), (a, Direction::Short([0, 1])), (b, across)] {
        rows.push(Row { at: [column[joint], NOWHERE], direction, source: Source::Ground });
    }
}
