//! The JavaScript interface: for documents that embed the checks without the page.

use crate::checks;
use crate::exchange::{read_truss, report_json};
use js_sys::JSON;
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
    let text = JSON::stringify(&truss).ok().and_then(|text| text.as_string());
    let text = text.ok_or_else(|| JsError::new("the truss is not a plain value"))?;
    let read = read_truss(text.as_bytes()).map_err(|error| JsError::new(&error.to_string()))?;
    let answers = checks::report(&read, &Default::default());
    JSON::parse(&report_json("", &read, &answers)).map_err(|_| JsError::new("the report cannot be given as a value"))
}
