//! The invariants of the sources: which room may name which, and what is not to be found anywhere.

#![cfg(not(target_arch = "wasm32"))]

use std::fs;
use std::path::{Path, PathBuf};

/// The rooms, each standing only on those before it.
const ROOMS: [&str; 6] = ["exact", "measure", "truss", "checks", "exchange", "page"];

/// What names the browser.
const BROWSER: [&str; 6] = ["yew", "gloo", "web_sys", "js_sys", "wasm_bindgen", "serde_wasm_bindgen"];

/// What cargo understands by itself, of what the documents tell people to type.
const CARGO: [&str; 10] = ["run", "build", "test", "check", "clippy", "fmt", "doc", "bench", "fuzz", "install"];

const NOTICE: &str = "Geometry only. A licensed engineer must verify this design, and local codes govern.";

#[test]
fn each_room_stands_only_on_those_before_it() {
    for (index, room) in ROOMS.iter().enumerate() {
        let later = &ROOMS[index + 1..];
        for file in sources(&format!("src/{room}")) {
            for named in rooms_named(&code(&file)) {
                assert!(!later.contains(&named.as_str()), "{} names the room {named}", file.display());
            }
        }
    }
}

#[test]
fn only_the_page_names_the_browser() {
    let rooms = ROOMS.iter().filter(|room| **room != "page");
    for file in rooms.flat_map(|room| sources(&format!("src/{room}"))) {
        assert_no_words(&file, &BROWSER);
    }
}

#[test]
fn exact_numbers_and_the_model_know_no_floating_point() {
    for file in sources("src/exact").into_iter().chain(sources("src/truss")) {
        assert_no_words(&file, &["f32", "f64"]);
    }
}

#[test]
fn every_source_says_first_what_it_is() {
    for file in sources("src").into_iter().chain(sources("tests")) {
        assert!(read(&file).starts_with("//! "), "{} does not start with a line that says what it is", file.display());
    }
}

#[test]
fn nothing_is_left_to_be_done() {
    for file in sources("src") {
        assert_no_words(&file, &["todo", "unimplemented", "dbg"]);
    }
}

#[test]
fn nothing_names_the_machine_it_was_made_on() {
    // Put together here, so that this file does not find itself.
    let homes = [["/ho", "me/"], ["/Us", "ers/"], ["/ro", "ot/"]].map(|parts| parts.concat());
    for file in files(&project(), &|_| true) {
        // What is no text names nothing.
        let text = fs::read_to_string(&file).unwrap_or_default();
        for home in &homes {
            assert!(!text.contains(home), "{} holds a path of a home directory", file.display());
        }
    }
}

#[test]
fn the_notice_is_on_screen_before_the_program_starts() {
    assert!(read(&project().join("index.html")).contains(NOTICE));
}

#[test]
fn the_documents_tell_people_to_type_what_there_is() {
    let config = read(&project().join(".cargo/config.toml"));
    let aliases: Vec<&str> = config.lines().filter_map(|line| Some(line.split_once(" = [")?.0)).collect();
    let known = |command: &str| aliases.contains(&command) || CARGO.contains(&command);
    for document in ["README.md", "DEVELOPERS.md", ".ci/run"] {
        // A document that is not there tells nobody anything.
        let text = fs::read_to_string(project().join(document)).unwrap_or_default();
        for command in commands(&text) {
            assert!(known(&command), "{document} says `cargo {command}`, and there is no such command");
        }
    }
    for wanted in ["page", "verify"] {
        assert!(
            commands(&read(&project().join("README.md"))).contains(&wanted.to_owned()),
            "README.md: cargo {wanted}"
        );
    }
    assert_eq!(commands(&read(&project().join(".ci/run"))), ["verify"]);
}

/// What follows `cargo` wherever a command is written: in code marks, or at the start of a line.
fn commands(text: &str) -> Vec<String> {
    let starts = text.lines().flat_map(|line| {
        let in_marks = line.split('`').skip(1).step_by(2);
        in_marks.chain([line.trim_start_matches(['$', ' '])])
    });
    let words = starts.filter_map(|start| start.strip_prefix("cargo ")?.split_whitespace().next());
    words.filter(|word| !word.starts_with('-')).map(str::to_owned).collect()
}

/// The rooms that code names by a path from the root of the crate.
fn rooms_named(code: &str) -> Vec<String> {
    let paths = code.split("crate::").skip(1);
    paths.flat_map(heads).filter(|head| ROOMS.contains(&head.as_str())).collect()
}

/// The first names of a path, or of each path of a group: `exact::Point` and `{exact::{Point, Surd}, truss}`.
fn heads(path: &str) -> Vec<String> {
    let Some(group) = path.strip_prefix('{') else {
        return words(path).into_iter().take(1).map(str::to_owned).collect();
    };
    let mut depth = 0;
    let mut outer = String::new();
    for letter in group.chars() {
        match letter {
            '{' => depth += 1,
            '}' if depth == 0 => break,
            '}' => depth -= 1,
            _ if depth == 0 => outer.push(letter),
            _ => {}
        }
    }
    outer.split(',').filter_map(|part| words(part).first().map(|head| (*head).to_owned())).collect()
}

fn assert_no_words(file: &Path, unwanted: &[&str]) {
    let code = code(file);
    for word in words(&code) {
        assert!(!unwanted.contains(&word), "{} names {word}", file.display());
    }
}

fn words(text: &str) -> Vec<&str> {
    text.split(|letter: char| letter != '_' && !letter.is_alphanumeric()).filter(|word| !word.is_empty()).collect()
}

/// The lines of a source that are no comments.
fn code(file: &Path) -> String {
    let text = read(file);
    text.lines().filter(|line| !line.trim_start().starts_with("//")).collect::<Vec<_>>().join("\n")
}

fn sources(directory: &str) -> Vec<PathBuf> {
    let found = files(&project().join(directory), &|file| file.extension().is_some_and(|extension| extension == "rs"));
    assert!(!found.is_empty(), "{directory} has no sources");
    found
}

/// The files below a directory, but for what is built and what belongs to git.
fn files(directory: &Path, wanted: &dyn Fn(&Path) -> bool) -> Vec<PathBuf> {
    let entries = fs::read_dir(directory).unwrap_or_else(|error| panic!("{}: {error}", directory.display()));
    let mut found = Vec::new();
    for path in entries.flatten().map(|entry| entry.path()) {
        let passed_over = ["target", "dist", ".git"].iter().any(|name| path.ends_with(name));
        if path.is_dir() && !passed_over {
            found.extend(files(&path, wanted));
        } else if path.is_file() && wanted(&path) && !passed_over {
            found.push(path);
        }
    }
    found
}

fn read(file: &Path) -> String {
    fs::read_to_string(file).unwrap_or_else(|error| panic!("{}: {error}", file.display()))
}

fn project() -> PathBuf {
    PathBuf::from(env!("CARGO_MANIFEST_DIR"))
}

#[test]
fn the_reading_of_paths_and_commands_is_right() {
    assert_eq!(rooms_named("use crate::exact::Point; crate::page"), ["exact", "page"]);
    assert_eq!(rooms_named("use crate::{exact::{Point, truss}, checks, other::page};"), ["exact", "checks"]);
    assert_eq!(commands("run `cargo page --port 1` or\n    cargo verify\nnot cargo cults"), ["page", "verify"]);
}
