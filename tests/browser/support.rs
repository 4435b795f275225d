//! What a test can do with the page: look at it, point at it, type into it, and see what it asked of the world.
//!
//! Everything here stops the test with plain words when it does not succeed. Whatever looks for an element waits a while
//! for it to come up, so that no test needs to know how long anything takes.
//!
//! ```ignore
//! let page = Page::open();
//! page.click("#open-demo");
//! page.wait_for_text(".answers", "Closes");
//! page.drag((200, 300), (400, 300));
//! page.keys("12' 6\"");
//! page.press(key::ENTER);
//! page.screenshot("drawn", Window::WIDE, Scheme::Dark);
//! page.assert_quiet();
//! ```

// Tests come and go; what they may use stays whole.
#![allow(dead_code)]

use std::env;
use std::fs;
use std::path::{Path, PathBuf};
use std::thread;
use std::time::{Duration, Instant};

use base64::Engine as _;
use base64::engine::general_purpose::STANDARD as BASE64;
use serde_json::{Value, json};

#[path = "../../src/bin/chordwright/webdriver.rs"]
mod webdriver;

use webdriver::{Answer, Driver};

/// How long anything that is waited for may take.
const PATIENCE: Duration = Duration::from_secs(20);

/// A drag is made of this many steps, so that it looks like one of a hand.
const DRAG_STEPS: i64 = 8;

/// The keys that have no letter, for [`Page::press`] and [`Page::chord`].
pub(crate) mod key {
    pub(crate) const BACKSPACE: &str = "\u{E003}";
    pub(crate) const TAB: &str = "\u{E004}";
    pub(crate) const ENTER: &str = "\u{E007}";
    pub(crate) const SHIFT: &str = "\u{E008}";
    pub(crate) const CONTROL: &str = "\u{E009}";
    pub(crate) const ALT: &str = "\u{E00A}";
    pub(crate) const ESCAPE: &str = "\u{E00C}";
    pub(crate) const SPACE: &str = " ";
    pub(crate) const PAGE_UP: &str = "\u{E00E}";
    pub(crate) const PAGE_DOWN: &str = "\u{E00F}";
    pub(crate) const END: &str = "\u{E010}";
    pub(crate) const HOME: &str = "\u{E011}";
    pub(crate) const LEFT: &str = "\u{E012}";
    pub(crate) const UP: &str = "\u{E013}";
    pub(crate) const RIGHT: &str = "\u{E014}";
    pub(crate) const DOWN: &str = "\u{E015}";
    pub(crate) const DELETE: &str = "\u{E017}";
    pub(crate) const F2: &str = "\u{E032}";
}

/// The size of a window, in CSS pixels.
#[derive(Clone, Copy)]
pub(crate) struct Window(pub(crate) u32, pub(crate) u32);

impl Window {
    pub(crate) const WIDE: Self = Self(1440, 900);
    pub(crate) const MIDDLE: Self = Self(1280, 800);
    pub(crate) const NARROW: Self = Self(390, 844);
}

/// Whether the system is light or dark.
#[derive(Clone, Copy)]
pub(crate) enum Scheme {
    Light,
    Dark,
}

/// The built page, opened in a browser of its own.
pub(crate) struct Page {
    driver: Driver,
    address: String,
    downloads: PathBuf,
}

impl Page {
    /// Opens the built page from its file, in a wide and light window, and waits until it has started.
    pub(crate) fn open() -> Self {
        Self::open_at("")
    }

    /// Opens the built page with a link's fragment (what comes after `#`).
    pub(crate) fn open_at(fragment: &str) -> Self {
        let page = Self::new(&built_page());
        page.visit(fragment);
        page
    }

    /// Opens a changed copy of the built page, without waiting for it to start.
    pub(crate) fn open_changed(name: &str, change: impl FnOnce(String) -> String) -> Self {
        let text = fs::read_to_string(built_page()).expect("the built page is text");
        let copy = made(&target().join("changed-pages")).join(format!("{name}.html"));
        fs::write(&copy, change(text)).expect("the copy can be written");
        let page = Self::new(&copy);
        done(page.driver.open(&page.address));
        page
    }

    /// Opens a document of somebody else's (this is its body) that embeds the built module. When this returns, the module
    /// has started and its exports are in `globalThis.chordwright`: `page.run("return chordwright.report(..)", &[])`.
    pub(crate) fn embedding(name: &str, body: &str) -> Self {
        let module = built_page().with_file_name("module");
        let read = |file| BASE64.encode(fs::read(module.join(file)).expect("the module is built with the page"));
        let (script, program) = (read("chordwright.js"), read("chordwright_bg.wasm"));
        let text = format!(
            "<!doctype html><meta charset=\"utf-8\"><title>Host</title><body>{body}</body>
             <script type=\"module\">
             import * as chordwright from \"data:text/javascript;base64,{script}\";
             const bytes = Uint8Array.from(atob(\"{program}\"), (letter) => letter.charCodeAt(0));
             await chordwright.default({{ module_or_path: bytes }});
             globalThis.chordwright = chordwright;
             </script>"
        );
        let file = made(&target().join("changed-pages")).join(format!("{name}.html"));
        fs::write(&file, text).expect("the document can be written");
        let page = Self::new(&file);
        done(page.driver.open(&page.address));
        page.wait("the module", "return globalThis.chordwright !== undefined", &[]);
        page
    }

    fn new(file: &Path) -> Self {
        let driver = done(Driver::start());
        let address = webdriver::file_address(&whole(file));
        let downloads = made(&target().join("downloads").join(format!("{}-{}", std::process::id(), driver_number())));
        let behaviour = json!({ "behavior": "allow", "downloadPath": downloads });
        done(driver.devtools("Browser.setDownloadBehavior", &behaviour));
        let page = Self { driver, address, downloads };
        page.window(Window::WIDE, Scheme::Light);
        page
    }

    /// Opens the page afresh in the same browser (its storage stays), with a link's fragment or none.
    pub(crate) fn visit(&self, fragment: &str) {
        let hash = if fragment.is_empty() { "" } else { "#" };
        // A change of the fragment alone would not load the page again.
        done(self.driver.open("about:blank"));
        done(self.driver.open(&format!("{}{hash}{fragment}", self.address)));
        self.wait("the page to start", "return !document.getElementById('starting')", &[]);
    }

    /// What comes after `#` in the address now.
    pub(crate) fn fragment(&self) -> String {
        text_of(&self.run("return location.hash.slice(1)", &[]))
    }

    // Looking.

    /// The visible text of the first element that the selector finds.
    pub(crate) fn text(&self, css: &str) -> String {
        text_of(&self.of(css, "innerText ?? element.textContent"))
    }

    /// The visible texts of all elements that the selector finds now, which may be none.
    pub(crate) fn texts(&self, css: &str) -> Vec<String> {
        let script = "return [...document.querySelectorAll(arguments[0])].map((e) => e.innerText ?? e.textContent)";
        let texts = self.run(script, &[json!(css)]);
        texts.as_array().into_iter().flatten().map(text_of).collect()
    }

    /// How many elements the selector finds now.
    pub(crate) fn count(&self, css: &str) -> usize {
        self.texts(css).len()
    }

    /// What a box holds.
    pub(crate) fn value(&self, css: &str) -> String {
        text_of(&self.of(css, "value"))
    }

    /// An attribute of an element, if it has it.
    pub(crate) fn attribute(&self, css: &str, name: &str) -> Option<String> {
        let value = self.of(css, &format!("getAttribute({})", json!(name)));
        value.as_str().map(str::to_owned)
    }

    /// The middle of an element in the window, as [`Page::click_at`] and [`Page::drag`] take it.
    pub(crate) fn middle(&self, css: &str) -> (i64, i64) {
        let script = "const box = document.querySelector(arguments[0]).getBoundingClientRect();
                      return [Math.round(box.x + box.width / 2), Math.round(box.y + box.height / 2)]";
        self.wait_for(css);
        let at = self.run(script, &[json!(css)]);
        (at[0].as_i64().expect("a place"), at[1].as_i64().expect("a place"))
    }

    /// Waits until the selector finds an element.
    pub(crate) fn wait_for(&self, css: &str) {
        self.wait(css, "return document.querySelector(arguments[0]) !== null", &[json!(css)]);
    }

    /// Waits until the selector finds no element any more.
    pub(crate) fn wait_for_none(&self, css: &str) {
        self.wait(&format!("no {css}"), "return document.querySelector(arguments[0]) === null", &[json!(css)]);
    }

    /// Waits until the visible text of an element has this in it.
    pub(crate) fn wait_for_text(&self, css: &str, part: &str) {
        let script = "return document.querySelector(arguments[0])?.innerText.includes(arguments[1]) ?? false";
        if self.driver.wait(script, &[json!(css), json!(part)], PATIENCE).is_err() {
            panic!("{css} never said {part:?}; it says:\n{}", self.texts(css).join("\n"));
        }
    }

    // Pointing and typing.

    /// Presses the middle of the first element that the selector finds, as a pointer does.
    pub(crate) fn click(&self, css: &str) {
        self.wait_for(css);
        let element = done(self.driver.element(css));
        done(self.driver.post(&format!("/element/{element}/click"), &json!({})));
    }

    /// Presses a place in the window.
    pub(crate) fn click_at(&self, at: (i64, i64)) {
        self.pointer(&[move_to(at, 0), pointer_down(), pointer_up()]);
    }

    /// Presses a place twice.
    pub(crate) fn double_click_at(&self, at: (i64, i64)) {
        self.pointer(&[move_to(at, 0), pointer_down(), pointer_up(), pointer_down(), pointer_up()]);
    }

    /// Moves the pointer to a place, pressing nothing.
    pub(crate) fn hover(&self, at: (i64, i64)) {
        self.pointer(&[move_to(at, 40)]);
    }

    /// Presses, moves and lets go.
    pub(crate) fn drag(&self, from: (i64, i64), to: (i64, i64)) {
        let between = (1..=DRAG_STEPS).map(|step| {
            let part = |a: i64, b: i64| a + (b - a) * step / DRAG_STEPS;
            move_to((part(from.0, to.0), part(from.1, to.1)), 16)
        });
        let mut actions = vec![move_to(from, 0), pointer_down()];
        actions.extend(between);
        actions.push(pointer_up());
        self.pointer(&actions);
    }

    /// Turns the wheel at a place; down is positive.
    pub(crate) fn wheel(&self, at: (i64, i64), down: i64) {
        let turn = json!({ "type": "scroll", "x": at.0, "y": at.1, "deltaX": 0, "deltaY": down, "duration": 0 });
        self.act(&json!({ "type": "wheel", "id": "wheel", "actions": [turn] }));
    }

    /// Types text into what has the focus.
    pub(crate) fn keys(&self, text: &str) {
        let strokes = text.chars().flat_map(|letter| [key_down(&letter.to_string()), key_up(&letter.to_string())]);
        self.act(&json!({ "type": "key", "id": "keys", "actions": strokes.collect::<Vec<_>>() }));
    }

    /// Presses one key (see [`key`]).
    pub(crate) fn press(&self, name: &str) {
        self.chord(&[name]);
    }

    /// Presses keys together: `page.chord(&[key::CONTROL, "z"])`.
    pub(crate) fn chord(&self, names: &[&str]) {
        let down = names.iter().map(|name| key_down(name));
        let up = names.iter().rev().map(|name| key_up(name));
        self.act(&json!({ "type": "key", "id": "keys", "actions": down.chain(up).collect::<Vec<_>>() }));
    }

    /// Puts text into a box in the place of what is there, key by key, and leaves it with the tabulator.
    pub(crate) fn fill(&self, css: &str, text: &str) {
        self.click(css);
        self.chord(&[key::CONTROL, "a"]);
        self.keys(text);
        self.press(key::TAB);
    }

    /// Chooses an option of a list by its value.
    pub(crate) fn choose(&self, css: &str, value: &str) {
        self.click(&format!("{css} option[value={}]", json!(value)));
    }

    // Files.

    /// Gives a file to a file box, which may be hidden.
    pub(crate) fn upload(&self, css: &str, file: &Path) {
        self.wait_for(css);
        let element = done(self.driver.element(css));
        let body = json!({ "text": whole(file) });
        done(self.driver.post(&format!("/element/{element}/value"), &body));
    }

    /// Drops a file with this name and text on an element.
    pub(crate) fn drop_file(&self, css: &str, name: &str, text: &str) {
        let script = "const [css, name, text] = arguments;
                      const files = new DataTransfer();
                      files.items.add(new File([text], name));
                      for (const kind of ['dragenter', 'dragover', 'drop']) {
                        const event = new DragEvent(kind, { dataTransfer: files, bubbles: true, cancelable: true });
                        document.querySelector(css).dispatchEvent(event);
                      }";
        self.wait_for(css);
        self.run(script, &[json!(css), json!(name), json!(text)]);
    }

    /// Waits for a file that the page saves under this name, and gives its text.
    pub(crate) fn saved(&self, name: &str) -> String {
        let file = self.downloads.join(name);
        let start = Instant::now();
        while !file.is_file() {
            assert!(start.elapsed() < PATIENCE, "no file {name} was saved");
            thread::sleep(Duration::from_millis(25));
        }
        fs::read_to_string(&file).expect("the saved file is text")
    }

    // The window, pictures and paper.

    /// Sets the size of the window and whether the system is dark.
    pub(crate) fn window(&self, Window(width, height): Window, scheme: Scheme) {
        let size = json!({ "width": width, "height": height, "deviceScaleFactor": 1, "mobile": false });
        done(self.driver.devtools("Emulation.setDeviceMetricsOverride", &size));
        let scheme = if matches!(scheme, Scheme::Dark) { "dark" } else { "light" };
        let media = json!({ "features": [{ "name": "prefers-color-scheme", "value": scheme }] });
        done(self.driver.devtools("Emulation.setEmulatedMedia", &media));
    }

    /// Takes a picture into `target/screenshots`; the window stays as it is set for it.
    pub(crate) fn screenshot(&self, name: &str, window: Window, scheme: Scheme) -> PathBuf {
        self.window(window, scheme);
        let picture = done(self.driver.devtools("Page.captureScreenshot", &json!({ "format": "png" })));
        keep(&format!("{name}.png"), &picture["data"])
    }

    /// Prints the page as PDF into `target/screenshots`.
    pub(crate) fn print(&self, name: &str) -> PathBuf {
        keep(&format!("{name}.pdf"), &done(self.driver.post("/print", &json!({}))))
    }

    // What it asked of the world.

    /// Every address that the browser asked for since this was read last, but for the page itself and what it made.
    pub(crate) fn requests(&self) -> Vec<String> {
        let entries = done(self.driver.log("performance"));
        let own = |address: &String| {
            address.split('#').next() == Some(&self.address)
                || ["data:", "blob:", "about:"].iter().any(|scheme| address.starts_with(scheme))
        };
        entries.iter().filter_map(requested).filter(|address| !own(address)).collect()
    }

    /// What the browser complained of since this was read last: errors, warnings, and what the policy stopped.
    pub(crate) fn complaints(&self) -> Vec<String> {
        let entries = done(self.driver.log("browser"));
        let loud = entries.iter().filter(|entry| matches!(entry["level"].as_str(), Some("SEVERE" | "WARNING")));
        loud.filter_map(|entry| Some(entry["message"].as_str()?.to_owned())).collect()
    }

    /// No request left the page, and nothing was complained of.
    pub(crate) fn assert_quiet(&self) {
        let (requests, complaints) = (self.requests(), self.complaints());
        assert!(requests.is_empty(), "the page asked for {requests:#?}");
        assert!(complaints.is_empty(), "the browser complained of {complaints:#?}");
    }

    // The ground floor.

    /// Runs the body of a JavaScript function and gives what it returns (awaited, if a promise).
    pub(crate) fn run(&self, body: &str, arguments: &[Value]) -> Value {
        done(self.driver.run(body, arguments))
    }

    fn of(&self, css: &str, what: &str) -> Value {
        self.wait_for(css);
        let script = format!("const element = document.querySelector(arguments[0]); return element.{what}");
        self.run(&script, &[json!(css)])
    }

    fn wait(&self, what: &str, script: &str, arguments: &[Value]) {
        if let Err(error) = self.driver.wait(script, arguments, PATIENCE) {
            panic!("{what} did not come up ({error}); the page says:\n{}", self.texts("body").join("\n"));
        }
    }

    fn pointer(&self, actions: &[Value]) {
        let kind = json!({ "pointerType": "mouse" });
        self.act(&json!({ "type": "pointer", "id": "pointer", "parameters": kind, "actions": actions }));
    }

    fn act(&self, source: &Value) {
        done(self.driver.post("/actions", &json!({ "actions": [source] })));
    }
}

fn move_to((x, y): (i64, i64), milliseconds: u32) -> Value {
    json!({ "type": "pointerMove", "origin": "viewport", "x": x, "y": y, "duration": milliseconds })
}

fn pointer_down() -> Value {
    json!({ "type": "pointerDown", "button": 0 })
}

fn pointer_up() -> Value {
    json!({ "type": "pointerUp", "button": 0 })
}

fn key_down(name: &str) -> Value {
    json!({ "type": "keyDown", "value": name })
}

fn key_up(name: &str) -> Value {
    json!({ "type": "keyUp", "value": name })
}

/// The address in an entry of the performance log, if it is about a request.
fn requested(entry: &Value) -> Option<String> {
    let message: Value = serde_json::from_str(entry["message"].as_str()?).ok()?;
    let event = &message["message"];
    let address = match event["method"].as_str()? {
        "Network.requestWillBeSent" => &event["params"]["request"]["url"],
        "Network.webSocketCreated" => &event["params"]["url"],
        _ => return None,
    };
    address.as_str().map(str::to_owned)
}

/// The built page: the file that `CHORDWRIGHT_PAGE` names, or the one that `cargo page --no-serve` makes.
fn built_page() -> PathBuf {
    let usual = project().join("dist").join("chordwright.html");
    let file = env::var_os("CHORDWRIGHT_PAGE").map_or(usual, PathBuf::from);
    assert!(file.is_file(), "{} is not there; build it: cargo page --no-serve", file.display());
    file
}

fn project() -> PathBuf {
    PathBuf::from(env!("CARGO_MANIFEST_DIR"))
}

fn target() -> PathBuf {
    project().join("target")
}

/// A directory, made if it is not there.
fn made(directory: &Path) -> PathBuf {
    fs::create_dir_all(directory).expect("the directory can be made");
    directory.to_path_buf()
}

fn whole(file: &Path) -> PathBuf {
    fs::canonicalize(file).unwrap_or_else(|error| panic!("{}: {error}", file.display()))
}

/// A number of its own for each browser of this process.
fn driver_number() -> usize {
    static COUNT: std::sync::atomic::AtomicUsize = std::sync::atomic::AtomicUsize::new(0);
    COUNT.fetch_add(1, std::sync::atomic::Ordering::Relaxed)
}

fn keep(name: &str, data: &Value) -> PathBuf {
    let file = made(&target().join("screenshots")).join(name);
    let bytes = BASE64.decode(data.as_str().expect("a picture")).expect("a picture");
    fs::write(&file, bytes).expect("the picture can be written");
    file
}

fn text_of(value: &Value) -> String {
    value.as_str().unwrap_or_default().to_owned()
}

fn done<T>(answer: Answer<T>) -> T {
    answer.unwrap_or_else(|error| panic!("{error}"))
}
