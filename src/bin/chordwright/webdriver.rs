//! Drives a headless Chromium through chromedriver: the W3C WebDriver protocol, plain HTTP and JSON on this machine.
//!
//! The workshop and the browser tests share this file, so it uses nothing of either. Everything here gives an error in
//! plain words; how long to wait and what to make of a failure is for the caller.

use std::env;
use std::fmt::Write as _;
use std::io::{BufRead as _, BufReader, Read as _, Write as _};
use std::net::{Ipv4Addr, TcpStream};
use std::path::{Path, PathBuf};
use std::process::{Child, Command, Stdio};
use std::thread;
use std::time::{Duration, Instant};

use serde_json::{Value, json};

/// The names that Chromium goes by.
const CHROMIUM: [&str; 4] = ["chromium", "chromium-browser", "google-chrome", "google-chrome-stable"];

/// Keeps Chromium to itself: no window, no updates, no traffic of its own.
const CHROMIUM_ARGUMENTS: [&str; 13] = [
    "--headless",
    "--no-sandbox",
    "--disable-gpu",
    "--disable-dev-shm-usage",
    "--no-first-run",
    "--disable-background-networking",
    "--disable-component-update",
    "--disable-default-apps",
    "--disable-sync",
    "--disable-quic",
    "--hide-scrollbars",
    "--force-color-profile=srgb",
    "--font-render-hinting=none",
];

/// How long chromedriver may take for one command.
const PATIENCE: Duration = Duration::from_secs(120);

/// How often something that is waited for is looked at.
const GLANCE: Duration = Duration::from_millis(25);

/// The member of a JSON object under which WebDriver names an element.
const ELEMENT: &str = "element-6066-11e4-a52e-4f735466cecf";

/// What a step in the browser gives, or what went wrong.
pub(crate) type Answer<T> = Result<T, String>;

/// The browser and the driver, where both are installed.
pub(crate) fn programs() -> Option<(PathBuf, PathBuf)> {
    let chromium = named("CHROMIUM").or_else(|| CHROMIUM.iter().find_map(|name| on_path(name)))?;
    let driver = named("CHROMEDRIVER").or_else(|| on_path("chromedriver"))?;
    Some((chromium, driver))
}

fn named(variable: &str) -> Option<PathBuf> {
    env::var_os(variable).map(PathBuf::from).filter(|file| file.is_file())
}

fn on_path(name: &str) -> Option<PathBuf> {
    let file = format!("{name}{}", env::consts::EXE_SUFFIX);
    env::split_paths(&env::var_os("PATH")?).map(|directory| directory.join(&file)).find(|file| file.is_file())
}

/// The address of a file on this machine. The path has to be a whole one.
pub(crate) fn file_address(file: &Path) -> String {
    let mut address = String::from("file://");
    for byte in file.to_string_lossy().bytes() {
        match byte {
            b'/' | b'-' | b'_' | b'.' | b'~' | b':' => address.push(char::from(byte)),
            _ if byte.is_ascii_alphanumeric() => address.push(char::from(byte)),
            // Writing to a string cannot fail.
            _ => _ = write!(address, "%{byte:02X}"),
        }
    }
    address
}

/// A chromedriver and the one browser that it has open. Both end with it, also when a test fails half way.
pub(crate) struct Driver {
    process: Child,
    port: u16,
    session: String,
}

impl Driver {
    /// Starts a browser with an empty profile.
    pub(crate) fn start() -> Answer<Self> {
        let missing = "Chromium and its chromedriver are needed, and are not on the search path (Debian has them as \
                       chromium and chromium-driver; CHROMIUM and CHROMEDRIVER may name them)";
        let (chromium, driver) = programs().ok_or(missing)?;
        let mut command = Command::new(driver);
        let silent = command.arg("--port=0").stdin(Stdio::null()).stdout(Stdio::piped()).stderr(Stdio::null());
        let mut process = silent.spawn().map_err(|error| format!("chromedriver could not be started: {error}"))?;
        let port = match chosen_port(&mut process) {
            Ok(port) => port,
            Err(error) => {
                // It is of no use, and whether it could be ended changes nothing.
                _ = process.kill();
                return Err(error);
            }
        };
        let mut driver = Self { process, port, session: String::new() };
        driver.session = driver.new_session(&chromium)?;
        Ok(driver)
    }

    fn new_session(&self, chromium: &Path) -> Answer<String> {
        let capabilities = json!({ "capabilities": { "alwaysMatch": {
            "goog:chromeOptions": { "binary": chromium, "args": CHROMIUM_ARGUMENTS },
            "goog:loggingPrefs": { "performance": "ALL", "browser": "ALL" },
        } } });
        let answer = self.ask("POST", "/session", Some(&capabilities))?;
        let id = answer["sessionId"].as_str().ok_or("chromedriver opened no session")?;
        Ok(id.to_owned())
    }

    /// Opens an address and waits until it is loaded.
    pub(crate) fn open(&self, address: &str) -> Answer<()> {
        self.post("/url", &json!({ "url": address })).map(drop)
    }

    /// Runs the body of a JavaScript function with these arguments and gives what it returns (awaited, if a promise).
    pub(crate) fn run(&self, body: &str, arguments: &[Value]) -> Answer<Value> {
        self.post("/execute/sync", &json!({ "script": body, "args": arguments }))
    }

    /// Sends a command of the Chrome DevTools Protocol.
    pub(crate) fn devtools(&self, command: &str, parameters: &Value) -> Answer<Value> {
        self.post("/goog/cdp/execute", &json!({ "cmd": command, "params": parameters }))
    }

    /// What a log (`browser` or `performance`) holds since it was read last.
    pub(crate) fn log(&self, kind: &str) -> Answer<Vec<Value>> {
        let entries = self.post("/se/log", &json!({ "type": kind }))?;
        Ok(entries.as_array().cloned().unwrap_or_default())
    }

    /// Runs a JavaScript function body until it gives something that is not null or false.
    pub(crate) fn wait(&self, body: &str, arguments: &[Value], patience: Duration) -> Answer<Value> {
        let start = Instant::now();
        loop {
            let value = self.run(body, arguments)?;
            if !matches!(value, Value::Null | Value::Bool(false)) {
                return Ok(value);
            }
            if start.elapsed() > patience {
                return Err(format!("waited {} s in vain for: {body} {arguments:?}", patience.as_secs()));
            }
            thread::sleep(GLANCE);
        }
    }

    /// The element that a CSS selector finds first, as WebDriver names it.
    pub(crate) fn element(&self, css: &str) -> Answer<String> {
        let found = self.post("/element", &json!({ "using": "css selector", "value": css }))?;
        let id = found[ELEMENT].as_str().ok_or_else(|| format!("there is no {css}"))?;
        Ok(id.to_owned())
    }

    /// Sends a command of the session, and gives what it answers.
    pub(crate) fn post(&self, command: &str, body: &Value) -> Answer<Value> {
        let path = format!("/session/{}{command}", self.session);
        self.ask("POST", &path, Some(body)).map_err(|error| format!("{command}: {error}"))
    }

    fn ask(&self, method: &str, path: &str, body: Option<&Value>) -> Answer<Value> {
        let body = body.map(Value::to_string).unwrap_or_default();
        let text = exchange(self.port, method, path, &body).map_err(|error| format!("chromedriver: {error}"))?;
        let answer: Value = serde_json::from_str(&text).map_err(|_| format!("chromedriver answered {text:?}"))?;
        let value = &answer["value"];
        match value["error"].as_str() {
            Some(error) => Err(format!("{error}: {}", value["message"].as_str().unwrap_or_default())),
            None => Ok(value.clone()),
        }
    }
}

impl Drop for Driver {
    fn drop(&mut self) {
        // Asked to shut down, chromedriver takes its browser with it; only a deaf one is killed. Errors have nowhere to
        // go from here.
        if !self.session.is_empty() {
            _ = exchange(self.port, "DELETE", &format!("/session/{}", self.session), "");
        }
        if exchange(self.port, "GET", "/shutdown", "").is_err() {
            _ = self.process.kill();
        }
        _ = self.process.wait();
    }
}

/// Reads from chromedriver's first lines which port it listens on.
fn chosen_port(process: &mut Child) -> Answer<u16> {
    let output = process.stdout.take().ok_or("chromedriver has no output")?;
    let mut lines = BufReader::new(output).lines().map_while(Result::ok);
    let port = lines.find_map(|line| line.rsplit_once("successfully on port ")?.1.trim_end_matches('.').parse().ok());
    // It goes on printing, and must always find a reader.
    thread::spawn(move || lines.for_each(drop));
    port.ok_or_else(|| "chromedriver did not say which port it listens on".to_owned())
}

/// One HTTP request to this machine and its answer's body.
fn exchange(port: u16, method: &str, path: &str, body: &str) -> std::io::Result<String> {
    let mut stream = TcpStream::connect((Ipv4Addr::LOCALHOST, port))?;
    stream.set_read_timeout(Some(PATIENCE))?;
    write!(
        stream,
        "{method} {path} HTTP/1.1\r\nHost: 127.0.0.1:{port}\r\nContent-Type: application/json\r\n\
         Content-Length: {}\r\nConnection: close\r\n\r\n{body}",
        body.len()
    )?;
    let mut answer = BufReader::new(stream);
    let mut length = 0;
    loop {
        let mut line = String::new();
        answer.read_line(&mut line)?;
        if line.trim().is_empty() {
            break;
        }
        if let Some((_, value)) = line.split_once(':').filter(|(name, _)| name.eq_ignore_ascii_case("content-length")) {
            length = value.trim().parse().unwrap_or(0);
        }
    }
    let mut text = String::new();
    answer.take(length).read_to_string(&mut text)?;
    Ok(text)
}
