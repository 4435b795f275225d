//! `verify`: every test there is, in one command.

use std::env;
use std::process::Command;

use super::bundle;
use super::machine::{self, During, Failure, Outcome};
use super::wasm::{Compiler, TARGET};
use crate::webdriver;

const HELP: &str = "\
Sets up what is missing and runs every test: natively, in the browser, and of the built page.

Usage: cargo verify";

/// What the native tests are built with.
const FEATURES: [&str; 2] = ["--features", "schema,workshop"];

/// One step: its heading, and what it does.
type Step = (&'static str, fn() -> Outcome<()>);

/// Runs all steps, also after one has failed, and says at the end which did.
pub(crate) fn run(arguments: &[String]) -> Outcome<()> {
    if let Some(word) = arguments.first() {
        return help(word);
    }
    browser()?;
    let steps: [Step; 6] = [
        ("how the sources are set", formatting),
        ("what the compiler advises", advice),
        ("native tests", native_tests),
        ("tests in the browser", wasm_tests),
        ("the page builds", page),
        ("tests of the built page", page_tests),
    ];
    let mut failed = Vec::new();
    for (name, step) in steps {
        println!("\n== {name} ==");
        if let Err(failure) = step() {
            eprintln!("chordwright: {failure}");
            failed.push(name);
        }
    }
    if failed.is_empty() {
        println!("\nverified: all {} steps are well", steps.len());
        return Ok(());
    }
    Err(Failure::new(format!("not verified; these steps failed: {}", failed.join(", "))))
}

fn help(word: &str) -> Outcome<()> {
    if word != "--help" && word != "-h" {
        return Err(Failure::new(format!("`{word}` is not understood\n\n{HELP}")));
    }
    println!("{HELP}");
    Ok(())
}

/// Sees to it that there is a browser to test in.
fn browser() -> Outcome<()> {
    if webdriver::programs().is_some() {
        return Ok(());
    }
    machine::install(&["chromium", "chromium-driver"], "Chromium and its chromedriver are needed for the tests")
}

fn cargo(arguments: &[&str]) -> Outcome<Command> {
    let mut command = machine::cargo();
    command.current_dir(machine::project()?).args(arguments);
    Ok(command)
}

/// Whether cargo has this subcommand here; not every installation of Rust does.
fn has(subcommand: &str) -> Outcome<bool> {
    let there = machine::succeeds(&mut cargo(&[subcommand, "--version"])?);
    if !there {
        println!("passed over: cargo {subcommand} is not installed");
    }
    Ok(there)
}

fn formatting() -> Outcome<()> {
    if !has("fmt")? {
        return Ok(());
    }
    machine::run(&mut cargo(&["fmt", "--check"])?, "the sources are not set as `cargo fmt` sets them")
}

fn advice() -> Outcome<()> {
    if !has("clippy")? {
        return Ok(());
    }
    let mut command = cargo(&["clippy", "--quiet", "--all-targets"])?;
    command.args(FEATURES).args(["--", "-D", "warnings"]);
    machine::run(&mut command, "the compiler has something to say about the sources")?;
    // What is compiled for the browser only. Debian's compiler brings no clippy.
    let compiler = Compiler::find()?;
    if matches!(compiler, Compiler::Debian(_)) {
        return Ok(());
    }
    let mut command = compiler.cargo(&machine::project()?, "clippy");
    command.args(["--quiet", "--lib", "--bin", "page", "--test", "web", "--", "-D", "warnings"]);
    machine::run(&mut command, "the compiler has something to say about what is made for the browser")
}

fn native_tests() -> Outcome<()> {
    let mut command = cargo(&["test", "--no-fail-fast"])?;
    machine::run(command.args(FEATURES), "native tests failed")
}

fn wasm_tests() -> Outcome<()> {
    let this = env::current_exe().during("the file of this program cannot be found")?;
    let runner = serde_json::json!([this, "wasm-tests"]);
    let mut command = Compiler::find()?.cargo(&machine::project()?, "test");
    command.args(["--test", "web", "--config", &format!("target.{TARGET}.runner={runner}")]);
    machine::run(&mut command, "tests in the browser failed")
}

fn page() -> Outcome<()> {
    println!("{}", bundle::build()?);
    Ok(())
}

fn page_tests() -> Outcome<()> {
    let mut command = cargo(&["test", "--test", "browser"])?;
    command.args(FEATURES).args(["--", "--include-ignored"]);
    command.env("CHORDWRIGHT_PAGE", bundle::single_file(&machine::project()?));
    machine::run(&mut command, "tests of the built page failed")
}
