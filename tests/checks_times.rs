//! How long the checks take at size; printed, not judged. Run with `--release -- --ignored --nocapture`.

mod trusses;

use std::time::Instant;
use trusses::{bare_lattice, lattice, long_truss, usual};

#[test]
#[ignore = "prints times only"]
fn times() {
    for members in [500, 5_000, 20_000, 50_000, 100_000] {
        let truss = long_truss(members / 4 - 1);
        let start = Instant::now();
        let report = usual(&truss);
        println!("long {members}: {:?} {}", start.elapsed(), report.answers.stands.summary);
    }
    for (name, truss) in [("braced", lattice(80)), ("bare", bare_lattice(98))] {
        let mut truss = truss;
        for what in ["whole", "one out", "two out"] {
            let start = Instant::now();
            let report = usual(&truss);
            let (count, moving) = (truss.members.len(), report.answers.stands.motion.len());
            println!("{name} {count} {what}: {:?} {} ({moving} move)", start.elapsed(), report.answers.stands.summary);
            truss.members.remove(count / 2);
        }
    }
}
