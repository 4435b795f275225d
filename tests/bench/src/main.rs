//! What the checks cost beside the same work done by other libraries, in ratios that hold on any machine.
//!
//! `cargo run --release --manifest-path tests/bench/Cargo.toml [-- NAME...]`; without names all are run.

use std::process::ExitCode;
use table::Row;

#[path = "../../close_help/mod.rs"]
mod close_help;
mod closing;
mod crossings;
#[allow(dead_code, reason = "shared with the native program")]
#[path = "../../../src/bin/chordwright/workshop/machine.rs"]
mod machine;
mod page;
mod rank;
mod spreads;
mod table;
mod timing;
#[allow(dead_code, reason = "shared with the native program")]
#[path = "../../../src/bin/chordwright/workshop/wasm.rs"]
mod wasm;
#[allow(dead_code, reason = "shared with the native program")]
#[path = "../../../src/bin/chordwright/webdriver.rs"]
mod webdriver;
mod whole;

/// A name to ask for it by, a heading, and what measures it.
type Measurement = (&'static str, &'static str, fn() -> Result<Vec<Row>, String>);

const ALL: [Measurement; 7] = [
    ("values", "exact order, quadrances and spreads, beside a plain f64 loop without the order", spreads::measure),
    ("crossings", "crossings, beside geo's sweep on the same segments", crossings::measure),
    ("rank", "proof of full rank, beside faer's sparse LU of the same matrix", rank::measure),
    ("long", "all five questions on long trusses with all joints set", whole::long),
    ("lattice", "all five questions on square lattices", whole::lattices),
    ("closing", "closing with all joints loose: strings, rises and all lengths to 1/16 in", closing::measure),
    ("page", "in WebAssembly, beside native", page::measure),
];

fn main() -> ExitCode {
    let wanted: Vec<String> = std::env::args().skip(1).collect();
    let is_known = |name: &String| ALL.iter().any(|(known, ..)| known == name);
    if let Some(name) = wanted.iter().find(|name| !is_known(name)) {
        let names = ALL.map(|(name, ..)| name).join(", ");
        eprintln!("`{name}` is not measured here; there are: {names}");
        return ExitCode::FAILURE;
    }
    let mut is_well = true;
    for (_, heading, measure) in ALL.iter().filter(|(name, ..)| wanted.is_empty() || wanted.iter().any(|w| w == name)) {
        match measure() {
            Ok(rows) => table::print(heading, &rows),
            Err(error) => {
                eprintln!("{heading}: {error}");
                is_well = false;
            }
        }
    }
    if is_well { ExitCode::SUCCESS } else { ExitCode::FAILURE }
}
