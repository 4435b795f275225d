//! `chordwright report FILE... [--json]`: the answers without a page.

use std::process::ExitCode;

/// Reports on the truss files that are named in the arguments.
pub(crate) fn run(_arguments: &[String]) -> ExitCode {
    // The one call into `chordwright::exchange` goes here.
    eprintln!("chordwright: `report` is not part of this build");
    crate::NOT_UNDERSTOOD.into()
}
