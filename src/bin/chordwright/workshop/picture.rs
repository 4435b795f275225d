//! `picture`: pictures of the built page, to look at.

use std::path::{Path, PathBuf};
use std::time::Duration;

use base64::Engine as _;
use base64::engine::general_purpose::STANDARD as BASE64;
use serde_json::{Value, json};

use super::bundle;
use super::machine::{self, During, Failure, Outcome};
use crate::webdriver::Driver;

const HELP: &str = "\
Takes pictures of the built page (dist/chordwright.html; cargo page --no-serve builds it).

Usage: cargo picture [--out DIR] [--name NAME] [--size WxH]... [--light | --dark] [--hash FRAGMENT] [STEP]...

  --out DIR         where they go (otherwise target/screenshots)
  --name NAME       what their names start with (otherwise page)
  --size WxH        the size of the window (otherwise 1440x900 and 390x844)
  --light, --dark   only so (otherwise both)
  --whole           the whole length of the page, not just the window
  --print           also what is printed, as PDF
  --hash FRAGMENT   what comes after # in the address
Steps are taken in order before each picture:
  --click CSS       presses the first element that the selector finds
  --type TEXT       types into what has the focus
  --run SCRIPT      runs a line of JavaScript
  --wait MS         waits";

/// How long the page may take to start, and an element to come up.
const PATIENCE: Duration = Duration::from_secs(20);

/// How long the page may take to settle after the last step.
const SETTLING: Duration = Duration::from_millis(400);

/// What is to be done in the page before the picture.
enum Step {
    Click(String),
    Type(String),
    Run(String),
    Wait(Duration),
}

/// What pictures are wanted.
struct Wish {
    out: PathBuf,
    name: String,
    sizes: Vec<(u32, u32)>,
    dark: Vec<bool>,
    whole: bool,
    print: bool,
    hash: String,
    steps: Vec<Step>,
}

/// Takes the pictures and prints where they are.
pub(crate) fn run(arguments: &[String]) -> Outcome<()> {
    if arguments.iter().any(|word| word == "--help" || word == "-h") {
        println!("{HELP}");
        return Ok(());
    }
    let project = machine::project()?;
    let wish = Wish::of(arguments, project.join("target").join("screenshots"))?;
    let address = machine::file_address(&bundle::single_file(&project))
        .map_err(|failure| Failure::new(format!("{failure}; build it first: cargo page --no-serve")))?;
    let driver = Driver::start()?;
    for &(width, height) in &wish.sizes {
        for &dark in &wish.dark {
            look(&driver, width, height, dark)?;
            arrive(&driver, &address, &wish)?;
            let file = wish.file(&format!("{width}x{height}-{}.png", if dark { "dark" } else { "light" }));
            save(&file, &photograph(&driver, wish.whole)?)?;
        }
    }
    if wish.print {
        arrive(&driver, &address, &wish)?;
        save(&wish.file("print.pdf"), &driver.post("/print", &json!({}))?)?;
    }
    Ok(())
}

impl Wish {
    fn of(arguments: &[String], out: PathBuf) -> Outcome<Self> {
        let (sizes, dark, steps) = (Vec::new(), Vec::new(), Vec::new());
        let (name, hash) = ("page".to_owned(), String::new());
        let mut wish = Self { out, name, sizes, dark, whole: false, print: false, hash, steps };
        let mut words = arguments.iter();
        while let Some(word) = words.next() {
            let mut value = || words.next().cloned().ok_or_else(|| Failure::new(format!("`{word}` needs a value")));
            match word.as_str() {
                "--out" => wish.out = value()?.into(),
                "--name" => wish.name = value()?,
                "--size" => wish.sizes.push(size(&value()?)?),
                "--light" => wish.dark.push(false),
                "--dark" => wish.dark.push(true),
                "--whole" => wish.whole = true,
                "--print" => wish.print = true,
                "--hash" => wish.hash = value()?,
                "--click" => wish.steps.push(Step::Click(value()?)),
                "--type" => wish.steps.push(Step::Type(value()?)),
                "--run" => wish.steps.push(Step::Run(value()?)),
                "--wait" => wish.steps.push(Step::Wait(milliseconds(&value()?)?)),
                _ => return Err(Failure::new(format!("`{word}` is not understood\n\n{HELP}"))),
            }
        }
        Ok(wish.completed())
    }

    fn completed(mut self) -> Self {
        if self.sizes.is_empty() {
            self.sizes = vec![(1440, 900), (390, 844)];
        }
        if self.dark.is_empty() {
            self.dark = vec![false, true];
        }
        self
    }

    fn file(&self, ending: &str) -> PathBuf {
        self.out.join(format!("{}-{ending}", self.name))
    }
}

fn size(word: &str) -> Outcome<(u32, u32)> {
    let sides = word.split_once('x').and_then(|(w, h)| Some((w.parse().ok()?, h.parse().ok()?)));
    sides.ok_or_else(|| Failure::new(format!("`{word}` is no size; one is written 1440x900")))
}

fn milliseconds(word: &str) -> Outcome<Duration> {
    word.parse().map(Duration::from_millis).during(format!("`{word}` is no number of milliseconds"))
}

/// Sets the size of the window and whether the system is dark.
fn look(driver: &Driver, width: u32, height: u32, dark: bool) -> Outcome<()> {
    let size = json!({ "width": width, "height": height, "deviceScaleFactor": 1, "mobile": false });
    driver.devtools("Emulation.setDeviceMetricsOverride", &size)?;
    let scheme = if dark { "dark" } else { "light" };
    let media = json!({ "features": [{ "name": "prefers-color-scheme", "value": scheme }] });
    driver.devtools("Emulation.setEmulatedMedia", &media)?;
    Ok(())
}

/// Opens the page afresh and takes all steps.
fn arrive(driver: &Driver, address: &str, wish: &Wish) -> Outcome<()> {
    driver.open("about:blank")?;
    let hash = if wish.hash.is_empty() { String::new() } else { format!("#{}", wish.hash.trim_start_matches('#')) };
    driver.open(&format!("{address}{hash}"))?;
    driver.wait("return !document.getElementById('starting')", &[], PATIENCE)?;
    for step in &wish.steps {
        take(driver, step)?;
    }
    std::thread::sleep(SETTLING);
    Ok(())
}

fn take(driver: &Driver, step: &Step) -> Outcome<()> {
    match step {
        Step::Click(css) => {
            driver.wait("return document.querySelector(arguments[0]) !== null", &[json!(css)], PATIENCE)?;
            let element = driver.element(css)?;
            driver.post(&format!("/element/{element}/click"), &json!({}))?;
        }
        Step::Type(text) => {
            let keys: Vec<Value> = text
                .chars()
                .flat_map(|key| ["keyDown", "keyUp"].map(|kind| json!({ "type": kind, "value": key })))
                .collect();
            let actions = json!({ "actions": [{ "type": "key", "id": "keys", "actions": keys }] });
            driver.post("/actions", &actions)?;
        }
        Step::Run(script) => _ = driver.run(script, &[])?,
        Step::Wait(time) => std::thread::sleep(*time),
    }
    Ok(())
}

/// A picture of the window, or of the whole length of the page.
fn photograph(driver: &Driver, whole: bool) -> Outcome<Value> {
    let wanted = json!({ "format": "png", "captureBeyondViewport": whole });
    Ok(driver.devtools("Page.captureScreenshot", &wanted)?["data"].take())
}

fn save(file: &Path, data: &Value) -> Outcome<()> {
    let data = data.as_str().ok_or_else(|| Failure::new("the browser gave no picture"))?;
    machine::write(file, BASE64.decode(data).during("the browser's picture cannot be read")?)?;
    println!("{}", file.display());
    Ok(())
}
