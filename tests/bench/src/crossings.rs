//! Crossings beside geo's sweep.

use crate::close_help::generate::Dice;
use crate::table::Row;
use crate::timing::{in_turn, milliseconds, ratio};
use chordwright::checks::steps::Prepared;
use chordwright::checks::{Limits, Placed};
use chordwright::truss::{JointId, Member, Role, Truss};
use chordwright_bench::{Plain, braced_lattice, long_truss, sticks};
use geo::line_intersection::LineIntersection;
use geo::sweep::{Cross, Intersections};
use geo::{Coord, Line};

const ROUNDS: usize = 11;
const GOAL: f64 = 3.0;

/// The sweep alone, on a truss that is prepared as for any question, and with the preparation.
pub(crate) fn measure() -> Result<Vec<Row>, String> {
    let mut rows = Vec::new();
    for (name, truss) in cases() {
        let segments = segments(&truss);
        let limits = Limits { most_findings: 1_000_000, ..Limits::default() };
        let placed = Placed::as_given(&truss);
        let prepared = Prepared::new(&placed, &limits);
        let found = prepared.crossings();
        if found != geo_pairs(&segments) {
            return Err(format!("{name}: other pairs than geo's"));
        }
        let alone = in_turn(ROUNDS, || geo_pairs(&segments), || prepared.crossings());
        let whole = in_turn(ROUNDS, || geo_pairs(&segments), || Prepared::new(&placed, &limits).crossings());
        let name = format!("{name}, {} pairs", found.len());
        for (what, times) in [("", alone), (", with the preparation", whole)] {
            let told = times.map(milliseconds);
            let row = Row::at_least(format!("{name}{what}"), ratio(times), GOAL, "x");
            rows.push(row.with(format!("geo {}, ours {}", told[0], told[1])));
        }
    }
    Ok(rows)
}

fn cases() -> [(&'static str, Truss); 4] {
    [
        ("long truss of 20,000", with_braces(long_truss(20_000), 0)),
        ("the same with stray braces", with_braces(long_truss(20_000), 40)),
        ("lattice of 19,360 with stray braces", with_braces(braced_lattice(80), 40)),
        ("20,000 loose sticks", sticks(&scattered(20_000))),
    ]
}

/// The truss with braces between joints some way apart, no two between the same and none where a member is.
fn with_braces(mut truss: Truss, count: usize) -> Truss {
    let mut dice = Dice::new(5);
    let apart = truss.joints.len() / (count + 1);
    for i in 0..count {
        let from = i * apart + dice.below(apart / 2);
        let to = from + 5 + 2 * dice.below(4);
        let (from, to) = (JointId::new(from), JointId::new(to));
        truss.members.push(Member { mark: format!("X{i}"), from, to, role: Role::Other });
    }
    truss
}

/// Short sticks all over a square.
fn scattered(count: usize) -> Vec<[i64; 4]> {
    let mut dice = Dice::new(9);
    let mut stick = || {
        let (x, y) = (dice.between(0, 1 << 20), dice.between(0, 1 << 20));
        [x, y, x + dice.between(-6000, 6000), y + dice.between(-6000, 6000)]
    };
    (0..count).map(|_| stick()).collect()
}

/// A member as geo takes it.
#[derive(Clone, Debug)]
struct Segment {
    member: u32,
    line: Line<f64>,
}

impl Cross for Segment {
    type Scalar = f64;

    fn line(&self) -> Line<f64> {
        self.line
    }
}

fn segments(truss: &Truss) -> Vec<Segment> {
    let plain = Plain::of(&Placed::as_given(truss));
    let at = |joint: usize| Coord { x: plain.places[joint][0], y: plain.places[joint][1] };
    let segment =
        |(member, &[a, b]): (usize, &[usize; 2])| Segment { member: member as u32, line: Line::new(at(a), at(b)) };
    plain.ends.iter().enumerate().map(segment).collect()
}

/// The pairs that cross inside both, or share a piece.
fn geo_pairs(segments: &[Segment]) -> Vec<[u32; 2]> {
    let met = |(s, t, how): (&Segment, &Segment, LineIntersection<f64>)| {
        let is_met = match how {
            LineIntersection::SinglePoint { is_proper, .. } => is_proper,
            LineIntersection::Collinear { intersection } => intersection.start != intersection.end,
        };
        is_met.then(|| [s.member.min(t.member), s.member.max(t.member)])
    };
    let mut pairs: Vec<[u32; 2]> = Intersections::from_iter(segments).filter_map(met).collect();
    pairs.sort_unstable();
    pairs
}
