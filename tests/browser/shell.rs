//! The shell: the file starts by itself, asks nothing of anybody, and brings its worker along.

use base64::Engine as _;
use base64::engine::general_purpose::STANDARD as BASE64;
use serde_json::json;

use crate::support::Page;

const NOTICE: &str = "Geometry only. A licensed engineer must verify this design, and local codes govern.";

#[test]
#[ignore = "needs the built page and Chromium: cargo verify"]
fn starts_from_a_file_and_asks_nothing_of_anybody() {
    let page = Page::open();
    assert!(page.text("#app").contains("Chordwright"));
    assert!(page.text("body").contains(NOTICE));
    page.assert_quiet();
}

#[test]
#[ignore = "needs the built page and Chromium: cargo verify"]
fn its_worker_answers_under_the_number_of_the_question() {
    let page = Page::open();
    let answer = page.run(
        "const worker = chordwrightWorker();
         const answer = new Promise((resolve) => { worker.onmessage = ({ data }) => resolve(data); });
         worker.postMessage({ id: 7, data: Uint8Array.of(255, 255, 255) });
         return answer.then(({ id, data }) => ({ id, length: data.length }));",
        &[],
    );
    assert_eq!(answer, json!({ "id": 7, "length": 0 }), "bytes that are no truss get an empty answer");
    page.assert_quiet();
}

#[test]
#[ignore = "needs the built page and Chromium: cargo verify"]
fn its_policy_stops_what_it_does_not_name() {
    let page = Page::open();
    let fetched = page.run("return fetch('data:text/plain,x').then(() => 'fetched', () => 'stopped')", &[]);
    assert_eq!(fetched, "stopped");
    page.run(
        "document.body.append(Object.assign(document.createElement('script'), { text: 'globalThis.ran = 1' }))",
        &[],
    );
    assert!(page.run("return globalThis.ran ?? null", &[]).is_null(), "a script from elsewhere ran");
}

#[test]
#[ignore = "needs the built page and Chromium: cargo verify"]
fn a_file_that_is_damaged_says_so_and_keeps_the_notice() {
    let page = Page::open_changed("damaged", |text| text.replace("data-size=\"", "data-size=\"1"));
    page.wait_for_text("body", "could not start here");
    assert!(page.text("body").contains(NOTICE));
}

#[test]
#[ignore = "needs the built page and Chromium: cargo verify"]
fn a_request_that_left_the_page_would_be_seen() {
    let page = Page::open_changed("asking", |text| {
        text.replace("Content-Security-Policy", "none")
            .replace("</body>", "<img src=\"http://127.0.0.1:9/asked\"></body>")
    });
    page.wait_for_text("#app", NOTICE);
    assert_eq!(page.requests(), ["http://127.0.0.1:9/asked"]);
    assert!(!page.complaints().is_empty());
}

#[test]
#[ignore = "needs the built page and Chromium: cargo verify"]
fn a_document_that_embeds_the_module_stays_as_it_was() {
    let page = Page::embedding("host", "<div id=\"app\">a place of its own</div>");
    assert_eq!(page.text("#app"), "a place of its own");
    page.assert_quiet();
}

#[test]
#[ignore = "needs the built page and Chromium: cargo verify"]
fn its_unpacking_gives_back_what_was_packed() {
    let page = Page::open();
    for sample in samples() {
        for level in [0, 1, 6, 10] {
            let packed = BASE64.encode(miniz_oxide::deflate::compress_to_vec(&sample, level));
            let unpacked = page.run(
                "const bytes = Uint8Array.from(atob(arguments[0]), (letter) => letter.charCodeAt(0));
                 return Array.from(inflate(bytes, arguments[1]));",
                &[json!(packed), json!(sample.len())],
            );
            assert_eq!(unpacked, json!(sample), "{} bytes at level {level}", sample.len());
        }
    }
}

/// Bytes of every kind that packing treats differently: none, few, alike, in words, and without any order.
fn samples() -> Vec<Vec<u8>> {
    let without_order = (0_u32..70_000).map(|i| (i.wrapping_mul(2_654_435_761) >> 13) as u8).collect();
    let words = "top chord, bottom chord, web, post; ".repeat(900).into_bytes();
    vec![vec![], vec![7], b"abcabcabcabd".to_vec(), vec![0; 66_000], words, without_order]
}
