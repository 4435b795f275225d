//! The JavaScript interface: for documents that embed the checks without the page.

use crate::checks;
use crate::exchange::{read_truss, report_document};
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
    let value: serde_json::Value = serde_wasm_bindgen::from_value(truss)
        .map_err(|error| JsError::new(&format!("the truss is not a plain value: {error}")))?;
    let read = read_truss(value.to_string().as_bytes()).map_err(|error| JsError::new(&error.to_string()))?;
    let answers = checks::report(&read, &Default::default());
    let document = report_document("", &read, &answers);
    let serializer = serde_wasm_bindgen::Serializer::json_compatible();
    document.serialize(&serializer).map_err(|error| JsError::new(&error.to_string()))
}
