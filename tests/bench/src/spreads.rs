//! Exact values beside a plain loop.

use crate::table::Row;
use crate::timing::{alone, in_turn, milliseconds, ratio};
use chordwright::checks::steps::Prepared;
use chordwright::checks::{Limits, Placed};
use chordwright_bench::{Work, Workload, braced_lattice, long_truss};

const ROUNDS: usize = 21;
const GOAL: f64 = 9.0;

/// Both exact ways on a regular and on an irregular truss.
pub(crate) fn measure() -> Result<Vec<Row>, String> {
    let mut rows = Vec::new();
    for (name, truss) in
        [("long truss, 20,000 members", long_truss(20_000)), ("lattice, 19,360 members", braced_lattice(80))]
    {
        let load = Workload::of(truss.clone());
        for (way, work) in [("in lattice steps", Work::Steps), ("as fractions", Work::Fractions)] {
            let times = in_turn(ROUNDS, || load.run(work), || load.run(Work::Floats));
            let told = times.map(milliseconds);
            let row = Row::at_most(format!("{name}, {way}"), ratio(times), GOAL, "x");
            rows.push(row.with(format!("{} to {}", told[0], told[1])));
        }
        let (placed, limits) = (Placed::as_given(&truss), Limits::default());
        let prepare = alone(ROUNDS, || Prepared::new(&placed, &limits));
        rows.push(Row::plain(format!("{name}, of which lattice and order"), milliseconds(prepare)));
    }
    Ok(rows)
}
