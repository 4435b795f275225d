//! Which members may meet: a scan from left to right in strips one above the other.
//!
//! Members are dealt into strips about as high as the members are, in the order of their left ends, and in each strip those
//! that follow are compared for as long as they begin before the present one ends. In a truss or a lattice every member meets
//! a handful of others there, so the time is near linear. Where members are long and lie across each other it is not: then
//! the scan gives up, and [`super::sweep`] does the work.
//!
//! Members at one joint can only overlap, and that is seen from the order around the joint.

use super::super::frame::{Frame, Spoke};
use crate::exact::Orientation;
use std::cmp::Ordering;

/// What the scan found.
#[derive(Debug, Default)]
pub(crate) struct Scanned {
    /// Pairs of members that cross, overlap, or touch in a joint of one of them; each once.
    pub(crate) pairs: Vec<[u32; 2]>,
    /// A joint strictly inside a member; perhaps more than once.
    pub(crate) on_member: Vec<(u32, u32)>,
}

/// Comparisons for each member beyond which the scan gives up.
const MOST_EACH: usize = 96;

/// A member in a strip.
#[derive(Clone, Copy, Debug)]
struct Entry {
    left: i64,
    right: i64,
    low: i64,
    high: i64,
    member: u32,
    ends: [u32; 2],
}

/// Scans members that have a length, no two between the same joints, given as a mask over all members. `None` when it would
/// take long, or finds more than `most` pairs.
pub(crate) fn scan(frame: &Frame, is_in: &[bool], most: usize) -> Option<Scanned> {
    let entries = from_the_left(frame, is_in);
    let mut found = Scanned::default();
    let strips = Strips::new(&entries);
    let mut left = MOST_EACH * entries.len();
    let (starts, dealt) = strips.deal(entries);
    for strip in 0..strips.count {
        let there = &dealt[starts[strip]..starts[strip + 1]];
        // A pair is seen in every strip that both are in, and counts in the lowest of them.
        let base = if strip == 0 { i64::MIN } else { strips.base(strip) };
        for (place, s) in there.iter().enumerate() {
            for t in &there[place + 1..] {
                if t.left > s.right {
                    break;
                }
                left = left.checked_sub(1)?;
                if t.low > s.high || s.low > t.high || s.low.max(t.low) < base {
                    continue;
                }
                compare(frame, s, t, &mut found);
            }
            if found.pairs.len() > most {
                return None;
            }
        }
    }
    at_joints(frame, is_in, most, &mut found).then_some(found)
}

/// The members in the order of their left ends.
fn from_the_left(frame: &Frame, is_in: &[bool]) -> Vec<Entry> {
    let mut entries = Vec::with_capacity(is_in.len());
    for &joint in &frame.by_rank {
        let [left, y] = frame.lattice.coarse(joint as usize);
        for spoke in frame.around(joint as usize) {
            if !is_in[spoke.member as usize] || frame.rank[spoke.far as usize] < frame.rank[joint as usize] {
                continue;
            }
            let [right, other] = frame.lattice.coarse(spoke.far as usize);
            let (low, high) = (y.min(other), y.max(other));
            entries.push(Entry { left, right, low, high, member: spoke.member, ends: [joint, spoke.far] });
        }
    }
    entries
}

/// Strips of one height, a power of two.
#[derive(Debug)]
struct Strips {
    low: i64,
    shift: u32,
    count: usize,
}

impl Strips {
    /// Strips up to four times as high as the members are on average.
    fn new(entries: &[Entry]) -> Strips {
        let low = entries.iter().map(|e| e.low).min().unwrap_or(0);
        let high = entries.iter().map(|e| e.high).max().unwrap_or(0);
        let heights: i128 = entries.iter().map(|e| i128::from(e.high - e.low)).sum();
        let mean = (heights / entries.len().max(1) as i128) as i64;
        let most = entries.len().max(1) as i64;
        let height = (2 * mean).max((high - low) / most).max(1) as u64;
        let shift = height.next_power_of_two().trailing_zeros();
        Strips { low, shift, count: ((high - low) >> shift) as usize + 1 }
    }

    fn of(&self, y: i64) -> usize {
        ((y - self.low) >> self.shift) as usize
    }

    fn base(&self, strip: usize) -> i64 {
        self.low + ((strip as i64) << self.shift)
    }

    /// The members of each strip, in the order of the list: where each strip's begin, and all of them.
    fn deal(&self, entries: Vec<Entry>) -> (Vec<usize>, Vec<Entry>) {
        if self.count == 1 {
            return (vec![0, entries.len()], entries);
        }
        let mut starts = vec![0; self.count + 1];
        for entry in &entries {
            starts[self.of(entry.low) + 1..=self.of(entry.high) + 1].iter_mut().for_each(|count| *count += 1);
        }
        for strip in 1..starts.len() {
            starts[strip] += starts[strip - 1];
        }
        let Some(&first) = entries.first() else { return (starts, Vec::new()) };
        let mut dealt = vec![first; starts[self.count]];
        let mut next = starts.clone();
        for entry in &entries {
            for next in &mut next[self.of(entry.low)..=self.of(entry.high)] {
                dealt[*next] = *entry;
                *next += 1;
            }
        }
        (starts, dealt)
    }
}

/// Compares two members whose boxes touch, unless they are joined.
fn compare(frame: &Frame, s: &Entry, t: &Entry, found: &mut Scanned) {
    let side = |line: &Entry, joint: u32| {
        let [a, b] = line.ends.map(|end| end as usize);
        frame.lattice.orientation(a, b, joint as usize)
    };
    if s.ends[0] == t.ends[0] || s.ends[0] == t.ends[1] || s.ends[1] == t.ends[0] || s.ends[1] == t.ends[1] {
        return;
    }
    let of_t = t.ends.map(|end| side(s, end));
    if of_t[0] == of_t[1] && of_t[0] != Orientation::On {
        return;
    }
    let of_s = s.ends.map(|end| side(t, end));
    if of_s[0] == of_s[1] && of_s[0] != Orientation::On {
        return;
    }
    found.pairs.push([s.member.min(t.member), s.member.max(t.member)]);
    for (line, other, sides) in [(s, t, of_t), (t, s, of_s)] {
        for (joint, side) in other.ends.into_iter().zip(sides) {
            let rank = |joint: u32| frame.rank[joint as usize];
            if side == Orientation::On && rank(line.ends[0]) < rank(joint) && rank(joint) < rank(line.ends[1]) {
                found.on_member.push((joint, line.member));
            }
        }
    }
}

/// Members that leave a joint in one direction overlap, and the shorter one's end is inside the longer one. False when there
/// are more than `most` pairs.
fn at_joints(frame: &Frame, is_in: &[bool], most: usize, found: &mut Scanned) -> bool {
    for (joint, run) in frame.same_way() {
        let run: Vec<Spoke> = run.iter().copied().filter(|spoke| is_in[spoke.member as usize]).collect();
        for (place, first) in run.iter().enumerate() {
            for other in &run[place + 1..] {
                found.pairs.push([first.member.min(other.member), first.member.max(other.member)]);
                let [one, two] = [first, other].map(|spoke| [joint, spoke.far as usize]);
                match frame.lattice.compare_quadrances(one, two) {
                    Ordering::Less => found.on_member.push((first.far, other.member)),
                    Ordering::Greater => found.on_member.push((other.far, first.member)),
                    Ordering::Equal => {}
                }
            }
            if found.pairs.len() > most {
                return false;
            }
        }
    }
    true
}
