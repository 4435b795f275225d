//! Work that lasts: told, stopped, and never in the way.

use crate::close_help::generate::{Shape, clean, slip};
use crate::close_help::q;
use crate::support::Page;
use chordwright::exchange::write_truss;

const CLOSE: &str = "[data-question=close]";

/// A sketched truss of many panels with all its figures, two of them wrong: long to search.
fn long_search() -> String {
    let truth = clean(Shape::Parallel, 100, 7).truss;
    let figures = truth.figures.len();
    let once = slip(&truth, figures / 3, &q(9, 16));
    write_truss(&slip(&once, 2 * figures / 3, &q(-17, 16)))
}

#[test]
#[ignore = "needs the built page and Chromium: cargo verify"]
fn a_long_search_is_told_leaves_the_page_awake_and_can_be_stopped() {
    let page = Page::open();
    page.drop_file(".page", "long.truss.json", &long_search());
    page.wait_for("#stop");
    // The page goes on listening meanwhile.
    page.click("[data-question=stands]");
    page.wait_for("[data-question=stands].chosen");
    page.click(CLOSE);
    page.click("#stop");
    page.wait_for_none("#stop");
    page.wait_for_none(".sign.waiting");
    page.wait_for_none(".answer.stale");
    let answer = page.text(CLOSE);
    assert!(answer.contains("They do not") || answer.contains("Not settled"), "{answer}");
    page.assert_quiet();
}
