//! All five questions at size.

use crate::table::Row;
use crate::timing::{alone, exponent, milliseconds};
use chordwright::checks::{Limits, StandsState, report};
use chordwright::truss::Truss;
use chordwright_bench::{bare_lattice, braced_lattice, long_truss};
use std::time::Duration;

/// Milliseconds of a long truss, and how they grow.
pub(crate) fn long() -> Result<Vec<Row>, String> {
    let mut rows = Vec::new();
    let mut times: Vec<(usize, Duration)> = Vec::new();
    for (members, guide) in
        [(500, Some(1.0)), (5_000, Some(11.0)), (20_000, Some(50.0)), (50_000, None), (100_000, None)]
    {
        let truss = long_truss(members);
        let rounds = (200_000 / members).clamp(5, 101);
        let time = alone(rounds, || report(&truss, &Limits::default()));
        let name = format!("{members} members");
        rows.push(match guide {
            Some(guide) => Row::at_most(name, time.as_secs_f64() * 1000.0, guide, " ms"),
            None => Row::plain(name, milliseconds(time)),
        });
        times.push((members, time));
    }
    let power = |from: usize, to: usize| {
        let [a, b] = [from, to].map(|i| times[i]);
        exponent([a.0, b.0], [a.1, b.1])
    };
    rows.push(Row::at_most("power of growth, 500 to 50,000", power(0, 3), 1.15, ""));
    rows.push(Row::plain("power of growth, 20,000 to 100,000", format!("{:.2}", power(2, 4))));
    Ok(rows)
}

/// Lattices whole, and with a member taken out.
pub(crate) fn lattices() -> Result<Vec<Row>, String> {
    let mut rows = Vec::new();
    for (name, truss) in [("just enough to stand", bare_lattice(98)), ("every field braced", braced_lattice(80))] {
        let middle = truss.members.len() / 2;
        let mut less = truss.clone();
        less.members.remove(middle);
        for (what, truss) in [("whole", &truss), ("one member out", &less)] {
            rows.push(lattice_row(&format!("{name}, {} members, {what}", truss.members.len()), truss)?);
        }
    }
    Ok(rows)
}

fn lattice_row(name: &str, truss: &Truss) -> Result<Row, String> {
    let stands = report(truss, &Limits::default()).answers.stands;
    let short = stands.unknowns - stands.rank;
    let is_told = match stands.state {
        StandsState::Rigid => short == 0 && stands.motion.is_empty(),
        StandsState::Mechanism => short > 0 && !stands.motion.is_empty(),
        _ => false,
    };
    if !is_told {
        return Err(format!("{name}: {}", stands.summary));
    }
    let time = alone(5, || report(truss, &Limits::default()));
    let moving = stands.motion.len();
    Ok(Row::at_most(name, time.as_secs_f64(), 2.0, " s").with(format!("rank short by {short}, {moving} joints move")))
}
