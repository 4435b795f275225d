//! Tests of the built page: the one file, opened from file:// in headless Chromium.
//!
//! `cargo verify` builds the page and runs these. They are passed over by a plain `cargo test`, so that it stays quick; to
//! run them alone, build the page with `cargo page --no-serve`, then `cargo test --test browser -- --ignored`.
//!
//! What a test can do with the page is in [`support`].

#![cfg(not(target_arch = "wasm32"))]

mod big;
#[path = "../close_help/mod.rs"]
mod close_help;
mod long_work;
mod main_path;
mod shell;
mod support;
#[path = "../trusses/mod.rs"]
mod trusses;
