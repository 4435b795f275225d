//! Tests of what touches the browser, run in headless Chromium by `cargo verify`.

#![cfg(target_arch = "wasm32")]

use chordwright::page;
use wasm_bindgen_test::{wasm_bindgen_test, wasm_bindgen_test_configure};

wasm_bindgen_test_configure!(run_in_browser);

#[wasm_bindgen_test]
fn a_document_without_a_place_for_the_page_is_left_alone() {
    let before = body();
    page::mount();
    assert_eq!(body(), before);
}

#[wasm_bindgen_test]
async fn the_page_mounts_in_the_place_that_the_shell_keeps_for_it() {
    let document = web_sys::window().and_then(|window| window.document()).expect("a document");
    let place = document.create_element("div").expect("a place");
    place.set_id("app");
    place.set_attribute("data-page", "chordwright").expect("a mark");
    document.body().expect("a body").append_child(&place).expect("it fits");
    page::mount();
    gloo::timers::future::TimeoutFuture::new(0).await;
    assert!(place.text_content().expect("text").contains("Geometry only."));
    place.remove();
}

fn body() -> String {
    let document = web_sys::window().and_then(|window| window.document()).expect("a document");
    document.body().expect("a body").inner_html()
}

/// A plain JavaScript value from its JSON.
fn value(json: &str) -> wasm_bindgen::JsValue {
    js_sys::JSON::parse(json).expect("JSON")
}

const FOOTBRIDGE: &str = include_str!("../demo/mill-footbridge.truss.json");

#[wasm_bindgen_test]
fn a_report_is_the_same_document_as_natively() {
    let document = page::web::report(value(FOOTBRIDGE)).unwrap_or_default();
    let text: String = js_sys::JSON::stringify(&document).map(Into::into).expect("a plain value");
    let truss = chordwright::exchange::read_truss(FOOTBRIDGE.as_bytes()).expect("a truss");
    let answers = chordwright::checks::report(&truss, &chordwright::checks::Limits::default());
    assert_eq!(text, chordwright::exchange::report_json("", &truss, &answers));
}

#[wasm_bindgen_test]
fn a_truss_that_cannot_be_read_is_refused_in_words() {
    let refused = page::web::report(value("{\"chordwright\": 1, \"unit\": \"ell\", \"step\": \"1\"}"));
    let error = wasm_bindgen::JsValue::from(refused.expect_err("an ell is no unit"));
    let message = js_sys::Reflect::get(&error, &"message".into()).ok().and_then(|text| text.as_string());
    assert!(message.is_some_and(|text| text.contains("ell") && text.contains("expected in, ft, mm, cm or m")));
}

#[wasm_bindgen_test]
fn the_worker_answers_nothing_to_bytes_that_are_no_truss() {
    let tell = js_sys::Function::new_no_args("");
    assert!(page::web::worker_message(vec![255; 9], &tell).is_empty());
    assert!(page::web::worker_message(Vec::new(), &tell).is_empty());
}

#[wasm_bindgen_test]
fn a_link_made_in_the_browser_is_the_one_made_natively() {
    let truss = chordwright::exchange::read_truss(FOOTBRIDGE.as_bytes()).expect("a truss");
    let link = chordwright::exchange::to_link(&truss).expect("a link");
    assert_eq!(chordwright::exchange::from_link(&link), Ok(truss));
}
