//! The workshop: what a clone of the project needs to build the page, show it and test it.

use std::process::ExitCode;

mod bundle;
mod machine;
mod pack;
mod picture;
mod serve;
mod verify;
mod wasm;
mod wasm_tests;

pub(crate) use machine::{Failure, Outcome};

/// Runs one command of the workshop and says in plain words what went wrong, if anything did.
pub(crate) fn run(command: &str, arguments: &[String]) -> ExitCode {
    let outcome = match command {
        "page" => page(arguments),
        "verify" => verify::run(arguments),
        "picture" => picture::run(arguments),
        _ => wasm_tests::run(arguments),
    };
    match outcome {
        Ok(()) => ExitCode::SUCCESS,
        Err(failure) => {
            eprintln!("chordwright: {failure}");
            ExitCode::FAILURE
        }
    }
}

const PAGE_HELP: &str = "\
Sets up what is missing, builds dist/chordwright.html and serves it on this machine.

Usage: cargo page [--no-serve] [--port N]

  --no-serve   only builds
  --port N     serves on this port and no other (otherwise a free one is found)";

/// `page`: builds the single file and serves it.
fn page(arguments: &[String]) -> Outcome<()> {
    let mut serve = true;
    let mut port = None;
    let mut words = arguments.iter();
    while let Some(word) = words.next() {
        match word.as_str() {
            "--help" | "-h" => {
                println!("{PAGE_HELP}");
                return Ok(());
            }
            "--no-serve" => serve = false,
            "--port" => port = Some(port_number(words.next())?),
            _ => return Err(Failure::new(format!("`{word}` is not understood\n\n{PAGE_HELP}"))),
        }
    }
    let built = bundle::build()?;
    println!("{built}");
    if serve { serve::run(&built.dist, port) } else { Ok(()) }
}

fn port_number(word: Option<&String>) -> Outcome<u16> {
    let number = word.and_then(|word| word.parse().ok()).filter(|&port| port != 0);
    number.ok_or_else(|| Failure::new("`--port` needs a number from 1 to 65535"))
}
