//! The JavaScript interface: for documents that embed the checks without the page.

use crate::checks;
use crate::exchange::{read_truss_value, report_document};
use serde::Serialize;
use wasm_bindgen::prelude::*;

/// Checks a truss given as a plain JavaScript value in the form of the truss file, and gives the report back as a plain
/// JavaScript value: the same document as `chordwright report --json`, with an empty `file`.
///
/// ```js
/// import init, { report } from "./module/chordwright.js";
/// await init();
/// const answers = report({ chordwright: 1, title: "", unit: "in", step: "1/16", joints: [...], members: [...] }).answers;
/// ```
///
/// # Errors
///
/// Throws an `Error` whose message says where the truss is malformed and what was expected.
#[wasm_bindgen]
pub fn report(truss: JsValue) -> Result<JsValue, JsError> {
    let read = read_truss_value(serde_wasm_bindgen::Deserializer::from(truss))?;
    let answers = checks::report(&read, &Default::default());
    let document = report_document("", &read, &answers);
    Ok(document.serialize(&serde_wasm_bindgen::Serializer::json_compatible())?)
}
