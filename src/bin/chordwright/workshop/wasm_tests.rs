//! `wasm-tests PROGRAM [FILTER...]`: what cargo calls to run a test program that was compiled for the browser.
//!
//! It makes one page of the program and its tests, opens it in headless Chromium, and prints what the tests print. No
//! server, and no test runner to be installed.

use std::path::{Path, PathBuf};
use std::time::Duration;

use base64::Engine as _;
use base64::engine::general_purpose::STANDARD as BASE64;
use serde_json::{Value, json};
use wasm_bindgen_cli_support::Bindgen;

use super::machine::{self, During, Failure, Outcome};
use crate::webdriver::Driver;

const SCRIPT: &str = include_str!("../shell/wasm-tests.js");

/// How long all tests of one program may take.
const PATIENCE: Duration = Duration::from_secs(300);

/// Runs the tests of one program.
pub(crate) fn run(arguments: &[String]) -> Outcome<()> {
    let (program, rest) = arguments.split_first().ok_or_else(|| Failure::new("which test program is to be run?"))?;
    let page = write_page(Path::new(program), &choice(rest))?;
    let driver = Driver::start()?;
    driver.open(&machine::file_address(&page)?)?;
    let done = driver.wait("return globalThis.testsDone ?? null", &[], PATIENCE);
    let lines = driver.run("return document.getElementById('output').textContent", &[])?;
    println!("{}", lines.as_str().unwrap_or_default().trim());
    let done = done.map_err(|error| format!("{error}\n{}", console(&driver)))?;
    if done["passed"] == Value::Bool(true) {
        return Ok(());
    }
    // A test that failed has said why by itself; only when all of them stopped is there more to be told.
    Err(match done["error"].as_str() {
        Some(error) => Failure::new(format!("the tests did not run to their end: {error}\n{}", console(&driver))),
        None => Failure::new("tests in the browser failed"),
    })
}

/// Which tests are to be run, out of the arguments that a test program understands.
fn choice(arguments: &[String]) -> Value {
    let has = |name: &str| arguments.iter().any(|argument| argument == name);
    let filters: Vec<&String> = arguments.iter().filter(|argument| !argument.starts_with('-')).collect();
    json!({
        "filters": filters,
        "exact": has("--exact"),
        "includeIgnored": has("--include-ignored") || has("--ignored"),
    })
}

fn write_page(program: &Path, choice: &Value) -> Outcome<PathBuf> {
    let failed = "the test program could not be joined to its script";
    let mut bindgen = Bindgen::new();
    bindgen.input_path(program).out_name("tests").emit_start(false);
    let mut output = bindgen.no_modules(true).during(failed)?.generate_output().during(failed)?;
    let wasm = BASE64.encode(output.wasm_mut().emit_wasm());
    let glue = output.js();
    let page = program.with_extension("html");
    let text = format!(
        "<!doctype html><meta charset=\"utf-8\"><title>Tests</title><pre id=\"output\"></pre>\n\
         <script type=\"text/plain\" id=\"wasm\">{wasm}</script>\n\
         <script type=\"application/json\" id=\"choice\">{choice}</script>\n\
         <script>{glue}</script>\n<script>{SCRIPT}</script>\n"
    );
    machine::write(&page, text)?;
    Ok(page)
}

/// What was written to the console, for the one who looks for the cause.
fn console(driver: &Driver) -> String {
    let entries = driver.log("browser").unwrap_or_default();
    let lines = entries.iter().filter_map(|entry| entry["message"].as_str());
    lines.map(|line| line.replace("\\n", "\n")).collect::<Vec<_>>().join("\n")
}
