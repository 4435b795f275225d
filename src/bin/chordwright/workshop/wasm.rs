//! A compiler for the page: found, or set up, once.
//!
//! Where the compiler at hand already has the target, or rustup can add it, that is the way. Elsewhere Debian's packages
//! hold a compiler for the target and the source of its standard library, from which `wasm-toolchain.sh` makes one.

use std::env;
use std::path::{Path, PathBuf};
use std::process::Command;

use super::machine::{self, During, Failure, Outcome};

/// The target of the page.
pub(crate) const TARGET: &str = "wasm32-unknown-unknown";

/// What makes a toolchain out of Debian's packages.
const DEBIAN_RECIPE: &str = include_str!("../wasm-toolchain.sh");

/// Set to `debian`, it makes this use Debian's compiler where rustup would do as well (to try that way out).
const CHOICE: &str = "CHORDWRIGHT_WASM";

/// A way to build for the page's target.
pub(crate) enum Compiler {
    /// The compiler at hand.
    AtHand,
    /// The one made of Debian's packages, kept in this directory.
    Debian(PathBuf),
}

impl Compiler {
    /// Finds a compiler for the page, setting one up if there is none.
    pub(crate) fn find() -> Outcome<Self> {
        let debian_wanted = env::var(CHOICE).is_ok_and(|choice| choice == "debian");
        if !debian_wanted && (has_target() || rustup_adds_target()) {
            return Ok(Self::AtHand);
        }
        if machine::is_debian() && machine::program("bash").is_some() {
            return debian().map(Self::Debian);
        }
        Err(Failure::new(format!(
            "Rust has no {TARGET} target here, which the page is built for; install it and run this again: \
             rustup target add {TARGET}"
        )))
    }

    /// A cargo command for the page's target, in the project's directory.
    pub(crate) fn cargo(&self, project: &Path, subcommand: &str) -> Command {
        let mut command = match self {
            Self::AtHand => machine::cargo(),
            Self::Debian(directory) => debian_cargo(directory, project),
        };
        command.current_dir(project).args([subcommand, "--profile", "page", "--target", TARGET]);
        command
    }
}

/// Whether the compiler at hand has a standard library for the page's target.
fn has_target() -> bool {
    let compiler = env::var_os("RUSTC").unwrap_or_else(|| "rustc".into());
    let library = machine::answer(compiler, &["--print", "target-libdir", "--target", TARGET]);
    let files = library.and_then(|directory| std::fs::read_dir(directory).ok());
    files.is_some_and(|files| files.flatten().any(|file| file.file_name().to_string_lossy().starts_with("libstd-")))
}

fn rustup_adds_target() -> bool {
    let Some(rustup) = machine::program("rustup") else {
        return false;
    };
    eprintln!("adding the {TARGET} target to Rust ...");
    let mut command = Command::new(rustup);
    command.args(["target", "add", TARGET]).env("RUSTUP_MAX_RETRIES", "1");
    machine::succeeds(&mut command) && has_target()
}

/// Makes the toolchain of Debian's packages, or finds it made, and gives its directory.
fn debian() -> Outcome<PathBuf> {
    let cache = env::var_os("XDG_CACHE_HOME").map(PathBuf::from);
    let cache = cache.or_else(|| env::var_os("HOME").map(|home| Path::new(&home).join(".cache")));
    let cache = cache.ok_or_else(|| Failure::new("HOME is not set, so there is no place to keep a compiler in"))?;
    let directory = cache.join("chordwright").join("wasm-toolchain");
    let mut command = Command::new("bash");
    command.arg("-c").arg(DEBIAN_RECIPE).arg("wasm-toolchain.sh").arg(&directory);
    machine::run(&mut command, "no compiler for the page could be set up from Debian's packages")?;
    Ok(directory)
}

/// Debian's own cargo, with the toolchain's compiler, away from what cargo tells the programs it runs.
fn debian_cargo(directory: &Path, project: &Path) -> Command {
    let mut command = Command::new("/usr/bin/cargo");
    for name in ["RUSTUP_TOOLCHAIN", "CARGO", "CARGO_ENCODED_RUSTFLAGS", "RUSTFLAGS", "LD_LIBRARY_PATH"] {
        command.env_remove(name);
    }
    command
        .env("RUSTC", directory.join("bin").join("rustc"))
        .env("RUSTDOC", directory.join("bin").join("rustdoc"))
        .env("CARGO_TARGET_DIR", project.join("target").join("debian"))
        .env("CARGO_TARGET_WASM32_UNKNOWN_UNKNOWN_LINKER", "wasm-ld-22");
    command
}

/// Builds the page's program and gives its file.
pub(crate) fn build(compiler: &Compiler, project: &Path) -> Outcome<PathBuf> {
    let mut command = compiler.cargo(project, "build");
    command.args(["--bin", "page", "--message-format", "json-render-diagnostics"]);
    command.stdin(std::process::Stdio::null()).stderr(std::process::Stdio::inherit());
    let output = command.output().during("cargo could not be started")?;
    if !output.status.success() {
        return Err(Failure::new("the page's program did not compile"));
    }
    let messages = String::from_utf8_lossy(&output.stdout);
    messages
        .lines()
        .filter_map(program_file)
        .next_back()
        .ok_or_else(|| Failure::new("cargo did not say where it put the page's program"))
}

/// The wasm file that one of cargo's messages is about, if it is about one.
fn program_file(message: &str) -> Option<PathBuf> {
    let message: serde_json::Value = serde_json::from_str(message).ok()?;
    let files = message.get("filenames")?.as_array()?;
    let wasm = files.iter().filter_map(serde_json::Value::as_str).find(|file| file.ends_with(".wasm"))?;
    Some(wasm.into())
}
