//! The work as WebAssembly exports it: plain numbers in, so that a page needs no glue to call it.

use crate::work::{Work, Workload};
use std::cell::RefCell;
use wasm_bindgen::prelude::wasm_bindgen;

thread_local! {
    static WORKLOAD: RefCell<Option<Workload>> = const { RefCell::new(None) };
}

/// Prepares a long truss of so many members.
#[wasm_bindgen]
pub fn prepare(members: u32) {
    WORKLOAD.set(Some(Workload::long(members as usize)));
}

/// Does the work with this number so many times.
#[wasm_bindgen]
pub fn work(number: u32, times: u32) {
    WORKLOAD.with_borrow(|workload| {
        if let (Some(workload), Some(&work)) = (workload, Work::ALL.get(number as usize)) {
            (0..times).for_each(|_| workload.run(work));
        }
    });
}
