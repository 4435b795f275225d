//! The shell: the file starts by itself, asks nothing of anybody, and brings its worker along.

use base64::Engine as _;
use base64::engine::general_purpose::STANDARD as BASE64;
use serde_json::{Value, json};

use crate::support::Page;

#[path = "../../src/bin/chordwright/workshop/pack.rs"]
mod pack;

use pack::pack;

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
fn a_file_that_ends_early_says_so() {
    let page = Page::open_changed("cut", |text| {
        let start = text.find("id=\"wasm\"").expect("the program");
        let end = start + text[start..].find("</script>").expect("its end");
        [&text[..start + (end - start) / 8 * 4], &text[end..]].concat()
    });
    page.wait_for_text("body", "could not start here");
    page.wait_for_text("body", "damaged");
}

#[test]
#[ignore = "needs the built page and Chromium: cargo verify"]
fn its_unpacking_gives_back_what_was_packed() {
    let page = Page::open();
    for sample in samples() {
        let unpacked = page.run(&format!("{UNPACKING} return Array.from(unpack(bytes, arguments[1]));"), &of(&sample));
        assert_eq!(unpacked, json!(sample), "{} bytes", sample.len());
    }
}

#[test]
#[ignore = "needs the built page and Chromium: cargo verify"]
fn its_unpacking_finds_all_damage() {
    let page = Page::open();
    let passed = "const passed = (data, size) => {
            try { return unpack(data, size) && true; }
            catch (error) { if (error.message.includes('damaged')) return false; throw error; }
        };";
    let damages = "const found = [];
        for (let i = 0; i < bytes.length; i++) {
            if (passed(bytes.subarray(0, i), arguments[1])) found.push(`ends at ${i}`);
            for (let bit = 0; bit < 8; bit++) {
                const changed = bytes.slice();
                changed[i] ^= 1 << bit;
                if (i >= 8 && passed(changed, arguments[1])) found.push(`bit ${bit} at ${i}`);
            }
        }
        if (passed(Uint8Array.of(...bytes, 0), arguments[1])) found.push('goes on');
        if (passed(bytes, arguments[1] + 1)) found.push('larger');
        if (passed(bytes, arguments[1] - 1)) found.push('smaller');
        return found;";
    // The first bytes are met with even chances: changed, they may well be other bytes (which are no program then).
    let some = |sample: &Vec<u8>| sample.len() > 1_000 && pack(sample).expect("packed").len() < 2_000;
    for sample in samples().into_iter().filter(some) {
        let found = page.run(&[UNPACKING, passed, damages].concat(), &of(&sample));
        assert_eq!(found, json!([]), "{} bytes", sample.len());
    }
}

/// Makes the first argument the bytes that it stands for.
const UNPACKING: &str = "const bytes = Uint8Array.from(atob(arguments[0]), (letter) => letter.charCodeAt(0));";

/// A sample as it is packed, and how long it is.
fn of(sample: &[u8]) -> [Value; 2] {
    [json!(BASE64.encode(pack(sample).expect("packed"))), json!(sample.len())]
}

/// Bytes of every kind that packing treats differently: none, few, alike, in words, with repeats from near and far, and
/// without any order.
fn samples() -> Vec<Vec<u8>> {
    let without_order: Vec<u8> = (0_u32..70_000).map(|i| (i.wrapping_mul(2_654_435_761) >> 13) as u8).collect();
    let words = "top chord, bottom chord, web, post; ".repeat(900).into_bytes();
    let far = [&without_order[..], &words, &without_order[100..60_000], &words[..5_000]].concat();
    let mixed = (0_u32..400).flat_map(|i| [b"joint ", &without_order[i as usize..][..(i % 7) as usize]].concat());
    vec![vec![], vec![7], b"abcabcabcabd".to_vec(), vec![0; 66_000], words, mixed.collect(), without_order, far]
}
