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
