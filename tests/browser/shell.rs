//! The shell: the file starts by itself, asks nothing of anybody, and brings its worker along.

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
         worker.postMessage({ id: 7, text: arguments[0] });
         return answer;",
        &[json!("any text")],
    );
    assert_eq!(answer["id"], 7, "{answer}");
    assert!(answer["text"].is_string(), "{answer}");
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
