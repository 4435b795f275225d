//! `chordwright report`: the answers without a page.

use super::document::report_json;
use super::file::read_truss;
use super::words::{on_one_line, report_text};
use crate::checks::{Level, Limits, report};

/// What `chordwright report` says about itself.
pub const REPORT_HELP: &str = "\
Says what the page says about each truss file.

Usage: chordwright report FILE... [--json]

  FILE      a truss file, or - for standard input
  --json    one JSON document a file, one a line, instead of text

Exit status: 0 no fault, 1 a fault was found, 2 a file could not be read (the others are still reported).

Geometry only. A licensed engineer must verify this design, and local codes govern.
";

/// What a run of the report came to.
#[derive(Clone, Debug, Default, PartialEq, Eq)]
pub struct Outcome {
    /// For standard output.
    pub out: String,
    /// For standard error.
    pub err: String,
    /// The exit status.
    pub status: u8,
}

/// Runs the report over the files named in the arguments. `read` gives the bytes of a file (`-` is standard input), or why
/// they cannot be had.
pub fn run_report(arguments: &[String], mut read: impl FnMut(&str) -> Result<Vec<u8>, String>) -> Outcome {
    let mut outcome = Outcome::default();
    let is_option = |argument: &&String| argument.starts_with('-') && argument.len() > 1;
    if arguments.iter().any(|argument| argument == "--help" || argument == "-h") {
        return Outcome { out: REPORT_HELP.into(), ..outcome };
    }
    if let Some(unknown) = arguments.iter().filter(is_option).find(|argument| *argument != "--json") {
        return Outcome {
            err: format!("chordwright report: there is no option `{}`\n", on_one_line(unknown)),
            status: 2,
            ..outcome
        };
    }
    let json = arguments.iter().any(|argument| argument == "--json");
    let files: Vec<&String> = arguments.iter().filter(|argument| !is_option(argument)).collect();
    if files.is_empty() {
        return Outcome { err: format!("chordwright report: expected a file\n\n{REPORT_HELP}"), status: 2, ..outcome };
    }
    for file in files {
        one_file(&mut outcome, file, json, read(file));
    }
    outcome
}

fn one_file(outcome: &mut Outcome, file: &str, json: bool, bytes: Result<Vec<u8>, String>) {
    let truss = bytes.and_then(|bytes| read_truss(&bytes).map_err(|error| error.to_string()));
    match truss {
        Ok(truss) => {
            let answers = report(&truss, &Limits::default());
            if json {
                outcome.out.push_str(&report_json(file, &truss, &answers));
                outcome.out.push('\n');
            } else {
                let blank_line = if outcome.out.is_empty() { "" } else { "\n" };
                outcome.out.push_str(blank_line);
                outcome.out.push_str(&report_text(file, &truss, &answers));
            }
            if answers.findings.iter().any(|finding| finding.level == Level::Fault) {
                outcome.status = outcome.status.max(1);
            }
        }
        Err(error) => {
            outcome.err.push_str(&format!("{}: {error}\n", on_one_line(file)));
            outcome.status = 2;
        }
    }
}
