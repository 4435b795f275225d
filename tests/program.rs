//! The native program as people start it: what it says, and its exit status.

#![cfg(not(target_arch = "wasm32"))]

use std::process::{Command, Output};

fn chordwright(arguments: &[&str]) -> Output {
    Command::new(env!("CARGO_BIN_EXE_chordwright")).args(arguments).output().expect("the program starts")
}

fn text(bytes: &[u8]) -> String {
    String::from_utf8_lossy(bytes).into_owned()
}

#[test]
fn it_says_what_it_does_and_carries_the_notice() {
    let help = chordwright(&["--help"]);
    assert_eq!(help.status.code(), Some(0));
    let help = text(&help.stdout);
    assert!(help.contains("chordwright report FILE"), "{help}");
    assert!(help.contains("Geometry only."), "{help}");
}

#[test]
fn it_says_its_version() {
    let version = chordwright(&["--version"]);
    assert_eq!(version.status.code(), Some(0));
    assert_eq!(text(&version.stdout).trim(), concat!("chordwright ", env!("CARGO_PKG_VERSION")));
}

#[test]
fn a_command_that_there_is_not_ends_with_status_2_and_says_where_to_look() {
    let unknown = chordwright(&["frobnicate"]);
    assert_eq!(unknown.status.code(), Some(2));
    assert!(text(&unknown.stderr).contains("no command `frobnicate`"), "{unknown:?}");
    assert_eq!(chordwright(&[]).status.code(), Some(2));
}

#[test]
fn options_of_the_workshop_are_read_before_anything_is_built() {
    for arguments in [["page", "--frob"], ["verify", "--frob"], ["picture", "--frob"]] {
        let refused = chordwright(&arguments);
        assert!(!refused.status.success(), "{arguments:?}");
        assert!(refused.stdout.is_empty(), "{arguments:?}");
    }
}
