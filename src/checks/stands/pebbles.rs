//! The most that any places of the joints could hold: counts of members, by the pebble game.
//!
//! Each joint has two pebbles, its two ways to move. A member takes one when its ends can be given all four at once
//! (Jacobs and Hendrickson 1997); a hold of a support then takes one of its joint's (the graded counts of Lee, Streinu and
//! Theran 2007). The rows that took a pebble are those of a maximal set in which no part of k joints has more than 2k - 3 members and
//! no part more than 2k rows: no rigidity matrix of these rows has a greater rank, whatever the places are.

use super::matrix::{Matrix, NOWHERE, Source};

/// No pebble is placed here.
const FREE: u32 = u32::MAX;

struct Game {
    /// Where the two pebbles of each joint lie: on a row to this joint, or free.
    pebbles: Vec<[u32; 2]>,
    seen: Vec<u32>,
    stamp: u32,
    from: Vec<u32>,
    stack: Vec<u32>,
    work: usize,
}

/// A hold that has a pebble: it leads to no joint.
const GROUND: u32 = u32::MAX - 1;

/// An upper bound of the rank of the matrix, at any places of its joints; `None` when the work is beyond the bound.
pub(crate) fn most_rank(matrix: &Matrix, most_work: usize) -> Option<usize> {
    let count = matrix.joints.len();
    let mut game = Game {
        pebbles: vec![[FREE; 2]; count],
        seen: vec![0; count],
        stamp: 0,
        from: vec![FREE; count],
        stack: Vec::new(),
        work: most_work,
    };
    let mut rank = 0;
    for row in matrix.rows.iter().filter(|row| row.source != Source::Ground && row.at[0] != row.at[1]) {
        rank += usize::from(if row.at[1] == NOWHERE { game.hold(row.at[0])? } else { game.member(row.at)? });
    }
    Some(rank)
}

impl Game {
    fn free(&self, joint: u32) -> usize {
        self.pebbles[joint as usize].iter().filter(|&&pebble| pebble == FREE).count()
    }

    /// Takes a pebble for a member if its ends can have four.
    fn member(&mut self, [a, b]: [u32; 2]) -> Option<bool> {
        // What is brought to the second end is not taken from the first, which has both by then.
        for end in [a, b] {
            while self.free(end) < 2 {
                if !self.fetch(end, a)? {
                    return Some(false);
                }
            }
        }
        self.place(a, b);
        Some(true)
    }

    /// Takes a pebble for a hold if its joint can have one.
    fn hold(&mut self, joint: u32) -> Option<bool> {
        if self.free(joint) == 0 && !self.fetch(joint, joint)? {
            return Some(false);
        }
        self.place(joint, GROUND);
        Some(true)
    }

    fn place(&mut self, joint: u32, on: u32) {
        if let Some(pebble) = self.pebbles[joint as usize].iter_mut().find(|pebble| **pebble == FREE) {
            *pebble = on;
        }
    }

    /// Brings one more free pebble to a joint, not from the other; `None` when the work is used up.
    fn fetch(&mut self, joint: u32, other: u32) -> Option<bool> {
        self.stamp += 1;
        self.stack.clear();
        self.stack.push(joint);
        self.seen[joint as usize] = self.stamp;
        self.seen[other as usize] = self.stamp;
        while let Some(at) = self.stack.pop() {
            self.work = self.work.checked_sub(1)?;
            for next in self.pebbles[at as usize] {
                if next >= GROUND || self.seen[next as usize] == self.stamp {
                    continue;
                }
                self.seen[next as usize] = self.stamp;
                self.from[next as usize] = at;
                if self.free(next) > 0 {
                    self.pass_back(next, joint);
                    return Some(true);
                }
                self.stack.push(next);
            }
        }
        Some(false)
    }

    /// Turns every row on the way around, so that the pebble comes to the joint.
    fn pass_back(&mut self, found: u32, joint: u32) {
        let mut at = found;
        while at != joint {
            let before = self.from[at as usize];
            self.place(at, before);
            if let Some(pebble) = self.pebbles[before as usize].iter_mut().find(|pebble| **pebble == at) {
                *pebble = FREE;
            }
            at = before;
        }
    }
}
