//! The machine this runs on: its programs, its packages, and running a command with plain words when it fails.

use std::env;
use std::ffi::OsStr;
use std::fmt;
use std::fs;
use std::path::{Path, PathBuf};
use std::process::{Command, Stdio};

/// Why a command of the workshop stopped, in words for the person who ran it.
#[derive(Debug)]
pub(crate) struct Failure(String);

/// What a step of the workshop gives, or why it stopped.
pub(crate) type Outcome<T> = Result<T, Failure>;

impl Failure {
    pub(crate) fn new(words: impl Into<String>) -> Self {
        Self(words.into())
    }
}

impl fmt::Display for Failure {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        f.write_str(&self.0)
    }
}

impl From<String> for Failure {
    fn from(words: String) -> Self {
        Self(words)
    }
}

/// Says what was being done when an error came up.
pub(crate) trait During<T> {
    /// Turns the error into a failure that starts with `what`.
    fn during(self, what: impl fmt::Display) -> Outcome<T>;
}

impl<T, E: fmt::Display> During<T> for Result<T, E> {
    fn during(self, what: impl fmt::Display) -> Outcome<T> {
        self.map_err(|error| Failure(format!("{what}: {error:#}")))
    }
}

/// The directory of the project: where `cargo run` says the package is, or the nearest one upwards from here.
pub(crate) fn project() -> Outcome<PathBuf> {
    if let Some(directory) = env::var_os("CARGO_MANIFEST_DIR") {
        return Ok(directory.into());
    }
    let here = env::current_dir().during("the present directory cannot be read")?;
    let found = here.ancestors().find(|directory| directory.join("Cargo.toml").is_file());
    found
        .map(Path::to_path_buf)
        .ok_or_else(|| Failure::new("this works from a clone of the project, and there is no Cargo.toml here"))
}

/// The file of a program that is on the search path.
pub(crate) fn program(name: &str) -> Option<PathBuf> {
    let file = format!("{name}{}", env::consts::EXE_SUFFIX);
    let path = env::var_os("PATH")?;
    env::split_paths(&path).map(|directory| directory.join(&file)).find(|candidate| candidate.is_file())
}

/// The cargo that runs this program.
pub(crate) fn cargo() -> Command {
    Command::new(env::var_os("CARGO").unwrap_or_else(|| "cargo".into()))
}

/// Runs a command to its end, its output going where ours goes. `what` is what failed, if it fails.
pub(crate) fn run(command: &mut Command, what: &str) -> Outcome<()> {
    let status = command.stdin(Stdio::null()).status().during(format!("{what}: it could not be started"))?;
    if status.success() { Ok(()) } else { Err(Failure(format!("{what} ({status})"))) }
}

/// Whether a command runs and says that all is well; its output is not shown.
pub(crate) fn succeeds(command: &mut Command) -> bool {
    let quiet = command.stdin(Stdio::null()).stdout(Stdio::null()).stderr(Stdio::null());
    quiet.status().is_ok_and(|status| status.success())
}

/// What a command prints, where it succeeds.
pub(crate) fn answer(program: impl AsRef<OsStr>, arguments: &[&str]) -> Option<String> {
    let output = Command::new(program).args(arguments).stdin(Stdio::null()).stderr(Stdio::null()).output().ok()?;
    output.status.success().then(|| String::from_utf8_lossy(&output.stdout).trim().to_owned())
}

/// Whether this is Debian or a descendant of it.
pub(crate) fn is_debian() -> bool {
    Path::new("/etc/debian_version").is_file() && program("apt-get").is_some()
}

/// Whether packages may be installed without asking.
fn is_root() -> bool {
    answer("id", &["-u"]).as_deref() == Some("0")
}

/// Installs Debian packages where that may be done without asking, and otherwise says how to do it.
pub(crate) fn install(packages: &[&str], reason: &str) -> Outcome<()> {
    let list = packages.join(" ");
    if !is_debian() {
        return Err(Failure(format!("{reason}; install them and run this again")));
    }
    if !is_root() {
        let by_hand = format!("sudo apt-get install --no-install-recommends {list}");
        return Err(Failure(format!("{reason}; install them and run this again: {by_hand}")));
    }
    eprintln!("{reason}; installing {list} ...");
    let apt = |arguments: &[&str]| {
        let mut command = Command::new("apt-get");
        command.args(arguments).env("DEBIAN_FRONTEND", "noninteractive").stdout(Stdio::null());
        run(&mut command, &format!("{list} could not be installed: apt-get {} failed", arguments[0]))
    };
    apt(&["update", "-qq"])?;
    apt(&[&["install", "-y", "-qq", "--no-install-recommends"], packages].concat())
}

/// Writes a file, and the directory it is to be in.
pub(crate) fn write(file: &Path, contents: impl AsRef<[u8]>) -> Outcome<()> {
    if let Some(directory) = file.parent() {
        fs::create_dir_all(directory).during(format!("{} cannot be made", directory.display()))?;
    }
    fs::write(file, contents).during(format!("{} cannot be written", file.display()))
}

/// Reads a text file.
pub(crate) fn read(file: &Path) -> Outcome<String> {
    fs::read_to_string(file).during(format!("{} cannot be read", file.display()))
}

/// The address of a file on this machine, for a browser.
pub(crate) fn file_address(file: &Path) -> Outcome<String> {
    let whole = fs::canonicalize(file).during(format!("{} cannot be found", file.display()))?;
    Ok(crate::webdriver::file_address(&whole))
}
