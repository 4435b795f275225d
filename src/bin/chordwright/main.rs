//! The native program: the report without a page, and (feature `workshop`) building, serving and testing the page.

use std::process::ExitCode;

mod report;
#[cfg(feature = "workshop")]
mod webdriver;
#[cfg(feature = "workshop")]
mod workshop;

const HELP: &str = "\
Proves whether the figures on a truss drawing describe one truss that can be built.

Usage: chordwright report FILE... [--json]
       chordwright --help | --version

  report    says what the page says about each truss file: as text, or with --json as one JSON document
            (FILE may be - for standard input)

From a clone of the project:

  cargo page      sets up what is missing, builds dist/chordwright.html and serves it on this machine
  cargo verify    sets up what is missing and runs every test
  cargo picture   takes pictures of the built page

Exit status: 0 no fault, 1 a fault was found, 2 the command or a file could not be read.

Geometry only. A licensed engineer must verify this design, and local codes govern.";

/// The exit status for a command or a file that could not be understood.
const NOT_UNDERSTOOD: u8 = 2;

fn main() -> ExitCode {
    let arguments: Vec<String> = std::env::args().skip(1).collect();
    let Some((command, rest)) = arguments.split_first() else {
        eprintln!("{HELP}");
        return NOT_UNDERSTOOD.into();
    };
    match command.as_str() {
        "--help" | "-h" | "help" => print(HELP),
        "--version" | "-V" => print(concat!("chordwright ", env!("CARGO_PKG_VERSION"))),
        "report" => report::run(rest),
        "page" | "verify" | "picture" | "wasm-tests" => workshop(command, rest),
        _ => {
            eprintln!("chordwright: there is no command `{command}`; `chordwright --help` lists them");
            NOT_UNDERSTOOD.into()
        }
    }
}

fn print(text: &str) -> ExitCode {
    println!("{text}");
    ExitCode::SUCCESS
}

#[cfg(feature = "workshop")]
fn workshop(command: &str, arguments: &[String]) -> ExitCode {
    workshop::run(command, arguments)
}

#[cfg(not(feature = "workshop"))]
fn workshop(command: &str, _arguments: &[String]) -> ExitCode {
    eprintln!(
        "chordwright: `{command}` works from a clone of the project, and this program was built without it; \
         run `cargo {command}` there"
    );
    NOT_UNDERSTOOD.into()
}
