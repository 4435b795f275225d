//! Work off the main thread.
//!
//! The built page runs a second instance of the same module in a web worker. The script around it (`worker.js` of the
//! native program) hands each message's text to [`worker_message`] and posts what comes back under the message's id.

use crate::checks::{Report, report};
use crate::exchange::fingerprint;
use crate::truss::Truss;
use serde::{Deserialize, Serialize};
use wasm_bindgen::prelude::wasm_bindgen;

/// What the worker answers: the report and the fingerprint of the truss it is about.
#[derive(Serialize, Deserialize)]
pub(super) struct Answer {
    pub(super) report: Report,
    pub(super) fingerprint: String,
}

/// Works out the answers for a truss.
pub(super) fn answer(truss: &Truss) -> Answer {
    Answer { report: report(truss, &Default::default()), fingerprint: fingerprint(truss) }
}

/// Answers one message in the worker: the text of a truss in, the text of its answers out.
///
/// Both sides are this same program; a text that is no truss gets an empty answer.
#[wasm_bindgen]
#[must_use]
pub fn worker_message(text: String) -> String {
    let truss: Option<Truss> = serde_json::from_str(&text).ok();
    truss.and_then(|truss| serde_json::to_string(&answer(&truss)).ok()).unwrap_or_default()
}
