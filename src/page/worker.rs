//! Work off the main thread.
//!
//! The built page runs a second instance of the same module in a web worker. The script around it (`worker.js` of the
//! native program) hands each message's text to [`worker_message`] and posts what comes back under the message's id.

use wasm_bindgen::prelude::wasm_bindgen;

/// Answers one message in the worker. Text in, text out: neither side shares anything else with the other.
#[wasm_bindgen]
#[must_use]
pub fn worker_message(text: String) -> String {
    text
}
