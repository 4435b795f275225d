//! `chordwright report FILE... [--json]`: the answers without a page.

use chordwright::exchange::run_report;
use chordwright::truss::Limit;
use std::fs::File;
use std::io::{Read, Write, stdin};
use std::process::ExitCode;

/// Reports on the truss files that are named in the arguments.
pub(crate) fn run(arguments: &[String]) -> ExitCode {
    let outcome = run_report(arguments, |file| read(file).map_err(|error| error.to_string()));
    // A reader that went away early (`| head`) is no fault of ours.
    drop(std::io::stdout().write_all(outcome.out.as_bytes()));
    drop(std::io::stderr().write_all(outcome.err.as_bytes()));
    outcome.status.into()
}

/// The bytes of a file: one more than the limit at most, so that a longer one is noticed and not read whole.
fn read(file: &str) -> std::io::Result<Vec<u8>> {
    let mut bytes = Vec::new();
    let limit = Limit::FILE_BYTES as u64 + 1;
    if file == "-" {
        stdin().lock().take(limit).read_to_end(&mut bytes)?
    } else {
        File::open(file)?.take(limit).read_to_end(&mut bytes)?
    };
    Ok(bytes)
}
