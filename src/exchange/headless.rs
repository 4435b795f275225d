//! `chordwright report`: the answers without a page.

use super::document::report_json;
use super::file::read_truss;
use super::words::{on_one_line, report_text};
use crate::checks::{Adjustable, Level, Limits, report};
use crate::measure::Unit;

/// What `chordwright report` says about itself.
pub const REPORT_HELP: &str = "\
Says what the page says about each truss file.

Usage: chordwright report FILE... [--json] [--near STEPS] [--tight SPREAD] [--piece LENGTH]

  FILE            a truss file, or - for standard input
  --json          one JSON document a file, one a line, instead of text
  --near STEPS    nearly straight, square, equal ... is off by at most this many steps (otherwise 4)
  --tight SPREAD  neighbours leave a joint too close together below this spread (otherwise 1/4, which is 30 degrees)
  --piece LENGTH  a longer piece is noted; inches, or with its unit (otherwise 48', see 23 CFR 658)

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
    if arguments.iter().any(|argument| argument == "--help" || argument == "-h") {
        return Outcome { out: REPORT_HELP.into(), ..outcome };
    }
    let asked = match Asked::read(arguments) {
        Ok(asked) => asked,
        Err(error) => return Outcome { err: format!("chordwright report: {error}\n"), status: 2, ..outcome },
    };
    if asked.files.is_empty() {
        return Outcome { err: format!("chordwright report: expected a file\n\n{REPORT_HELP}"), status: 2, ..outcome };
    }
    for file in &asked.files {
        one_file(&mut outcome, file, &asked, read(file));
    }
    outcome
}

/// What the arguments ask for.
#[derive(Default)]
struct Asked<'a> {
    files: Vec<&'a str>,
    json: bool,
    limits: Limits,
}

impl<'a> Asked<'a> {
    fn read(arguments: &'a [String]) -> Result<Asked<'a>, String> {
        let mut asked = Asked::default();
        let mut waiting = arguments.iter();
        while let Some(argument) = waiting.next() {
            let limit = match argument.as_str() {
                "--json" => {
                    asked.json = true;
                    continue;
                }
                "--near" => Adjustable::Near,
                "--tight" => Adjustable::Tight,
                "--piece" => Adjustable::Piece,
                option if option.starts_with('-') && option.len() > 1 => {
                    return Err(format!("there is no option `{}`", on_one_line(option)));
                }
                file => {
                    asked.files.push(file);
                    continue;
                }
            };
            let value = waiting.next().ok_or_else(|| format!("{argument} expects a value"))?;
            asked.limits = limit
                .entered(&asked.limits, Unit::In, value)
                .map_err(|error| format!("{argument}: {}", on_one_line(&error)))?;
        }
        Ok(asked)
    }
}

fn one_file(outcome: &mut Outcome, file: &str, asked: &Asked, bytes: Result<Vec<u8>, String>) {
    let truss = bytes.and_then(|bytes| read_truss(&bytes).map_err(|error| error.to_string()));
    match truss {
        Ok(truss) => {
            let answers = report(&truss, &asked.limits);
            if asked.json {
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
