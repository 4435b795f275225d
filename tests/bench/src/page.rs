//! The same work in WebAssembly, in the browser that the page is tested in.

use crate::machine::{self, Failure};
use crate::table::Row;
use crate::timing::{median, milliseconds, ratio, time};
use crate::wasm::{Compiler, TARGET};
use crate::webdriver::Driver;
use base64::Engine as _;
use base64::engine::general_purpose::STANDARD as BASE64;
use chordwright_bench::{Work, Workload};
use serde_json::{Value, json};
use std::path::{Path, PathBuf};
use std::time::Duration;

const ROUNDS: usize = 9;
const GOAL: f64 = 2.5;

/// Imports that are there for the page only are stood in for; nothing that is timed calls them.
const SCRIPT: &str = "
const packed = atob(document.getElementById('wasm').textContent);
const bytes = Uint8Array.from(packed, (letter) => letter.charCodeAt(0));
const start = async () => {
  const module = await WebAssembly.compile(bytes);
  const imports = {};
  for (const { module: room, name } of WebAssembly.Module.imports(module)) (imports[room] ??= {})[name] = () => 0;
  const exports = (await WebAssembly.instantiate(module, imports)).exports;
  // The names in the module end in a hash.
  const called = (name) => exports[Object.keys(exports).find((key) => new RegExp(`^${name}(_[0-9a-f]+)?$`).test(key))];
  globalThis.bench = { prepare: called('prepare'), work: called('work') };
  return true;
};
start().then((ready) => { globalThis.ready = ready; }, (error) => { globalThis.ready = String(error); });
";

const TIMED: &str = "
const [work, times] = arguments;
const start = performance.now();
bench.work(work, times);
return performance.now() - start;
";

/// Built for speed, and as the page is built.
pub(crate) fn measure() -> Result<Vec<Row>, String> {
    let compiler = Compiler::find().map_err(|failure| failure.to_string())?;
    let mut rows = Vec::new();
    for (name, level) in [("opt-level 3", "3"), ("as the page is built", "z")] {
        let program = build(&compiler, level).map_err(|failure| failure.to_string())?;
        let driver = open(&program)?;
        for (members, repeat) in [(500, 40), (5_000, 4), (20_000, 1)] {
            rows.push(row(
                &driver,
                &format!("{name}, all questions, {members} members"),
                members,
                Work::Report,
                repeat,
            )?);
        }
        for (what, work, repeat) in [
            ("values in steps", Work::Steps, 4),
            ("values as fractions", Work::Fractions, 1),
            ("the f64 loop", Work::Floats, 40),
        ] {
            rows.push(row(&driver, &format!("{name}, {what}, 20000 members"), 20_000, work, repeat)?);
        }
    }
    Ok(rows)
}

/// In the browser and natively, in turn.
fn row(driver: &Driver, name: &str, members: usize, work: Work, repeat: u32) -> Result<Row, String> {
    driver.run("bench.prepare(arguments[0])", &[json!(members)])?;
    let load = Workload::long(members);
    let in_browser = || -> Result<Duration, String> {
        let ms = driver.run(TIMED, &[json!(work.number()), json!(repeat)])?.as_f64().ok_or("no time was given")?;
        Ok(Duration::from_secs_f64(ms / 1000.0 / f64::from(repeat)))
    };
    // The browser compiles what runs often once more, and better.
    for _ in 0..ROUNDS {
        in_browser()?;
    }
    let (mut there, mut here) = (Vec::new(), Vec::new());
    for _ in 0..ROUNDS {
        there.push(in_browser()?);
        here.push(time(|| (0..repeat).for_each(|_| load.run(work))) / repeat);
    }
    let times = [median(there), median(here)];
    let told = times.map(milliseconds);
    let row = if work == Work::Floats {
        Row::plain(name, format!("{:.2}x", ratio(times)))
    } else {
        Row::at_most(name, ratio(times), GOAL, "x")
    };
    Ok(row.with(format!("{} to {}", told[0], told[1])))
}

/// The package's library as a WebAssembly module.
fn build(compiler: &Compiler, level: &str) -> Result<PathBuf, Failure> {
    let package = Path::new(env!("CARGO_MANIFEST_DIR"));
    let mut command = compiler.cargo(package, "rustc");
    command.args(["--quiet", "--lib", "--crate-type", "cdylib"]).env("CARGO_PROFILE_PAGE_OPT_LEVEL", level);
    let target = package.join("target").join("wasm");
    command.env("CARGO_TARGET_DIR", &target);
    machine::run(&mut command, "the WebAssembly module did not compile")?;
    Ok(target.join(TARGET).join("page").join("chordwright_bench.wasm"))
}

fn open(program: &Path) -> Result<Driver, String> {
    let bytes = std::fs::read(program).map_err(|error| format!("{}: {error}", program.display()))?;
    let page = program.with_extension("html");
    let text = format!(
        "<!doctype html><meta charset=\"utf-8\"><title>Bench</title>\n\
         <script type=\"text/plain\" id=\"wasm\">{}</script>\n<script>{SCRIPT}</script>\n",
        BASE64.encode(bytes)
    );
    machine::write(&page, text).map_err(|failure| failure.to_string())?;
    let driver = Driver::start()?;
    driver.open(&machine::file_address(&page).map_err(|failure| failure.to_string())?)?;
    match driver.wait("return globalThis.ready ?? null", &[], Duration::from_secs(60))? {
        Value::Bool(true) => Ok(driver),
        error => Err(format!("the module did not start: {error}")),
    }
}
