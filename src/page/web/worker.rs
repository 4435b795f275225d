//! Work off the main thread.
//!
//! The built page runs a second instance of the same module in a web worker. The script around it (`worker.js` of the
//! native program) hands what each message carries to [`worker_message`] and posts what comes back under the message's id.

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

/// Answers one message in the worker: the bytes of a truss in, the bytes of its answers out.
///
/// Both sides are this same program, so the bytes need no version; bytes that are no truss get an empty answer.
#[wasm_bindgen]
#[must_use]
pub fn worker_message(truss: Vec<u8>) -> Vec<u8> {
    let truss: Option<Truss> = postcard::from_bytes(&truss).ok();
    truss.and_then(|truss| postcard::to_allocvec(&answer(&truss)).ok()).unwrap_or_default()
}
