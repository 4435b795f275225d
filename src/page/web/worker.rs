//! Work off the main thread.
//!
//! The built page runs a second instance of the same module in a web worker. The script around it (`worker.js` of the
//! native program) hands what each message carries to [`worker_message`] and posts what comes back under the message's id.

use crate::checks::{Changes, Limits, Progress, Report, Stage, report_watched};
use crate::exchange::fingerprint;
use crate::truss::Truss;
use js_sys::Function;
use serde::{Deserialize, Serialize};
use std::cell::RefCell;
use std::rc::Rc;
use wasm_bindgen::JsValue;
use wasm_bindgen::prelude::wasm_bindgen;

/// What the worker is asked.
#[derive(Serialize, Deserialize)]
pub(super) struct Asked {
    pub(super) revision: u64,
    pub(super) truss: Rc<Truss>,
    pub(super) limits: Rc<Limits>,
    pub(super) until: Option<Stage>,
    /// The revision whose report the page has: if the worker still has it too, it answers with what changed.
    pub(super) known: Option<u64>,
}

/// What the worker answers: the report, and the fingerprint of the truss it is about.
#[derive(Serialize, Deserialize)]
pub(super) struct Answer {
    pub(super) told: Told,
    pub(super) fingerprint: String,
}

/// A report, or what changed in it.
#[derive(Serialize, Deserialize)]
pub(super) enum Told {
    /// All of it.
    Whole(Rc<Report>),
    /// What differs from the report that the page has.
    Changed(Box<Changes>),
}

/// Works out the answers, telling how far it is.
pub(super) fn answer(asked: &Asked, tell: &mut dyn FnMut(Progress)) -> (Rc<Report>, String) {
    let mut watch = |progress: Progress| {
        tell(progress);
        asked.until.is_none_or(|until| progress.stage < until)
    };
    let report = report_watched(&asked.truss, &asked.limits, &mut watch);
    (Rc::new(report), fingerprint(&asked.truss))
}

thread_local! {
    /// The last report that this worker answered with, and its revision.
    static LAST: RefCell<Option<(u64, Rc<Report>)>> = const { RefCell::new(None) };
}

/// The answer to what is asked, as short as what the page knows allows.
fn reply(asked: &Asked, tell: &mut dyn FnMut(Progress)) -> Answer {
    let (report, fingerprint) = answer(asked, tell);
    let last = LAST.replace(Some((asked.revision, report.clone())));
    let old = last.filter(|(revision, _)| Some(*revision) == asked.known);
    let changes = old.and_then(|(_, old)| Changes::between(&old, &report));
    Answer { told: changes.map_or(Told::Whole(report), |changes| Told::Changed(Box::new(changes))), fingerprint }
}

/// Answers one message in the worker: the bytes of what is asked in, the bytes of the answers out. Meanwhile `tell` is
/// called with how far it is: the number of the stage, the steps done and the steps there are.
///
/// Both sides are this same program, so the bytes need no version; bytes that ask nothing get an empty answer.
#[wasm_bindgen]
#[must_use]
pub fn worker_message(asked: Vec<u8>, tell: &Function) -> Vec<u8> {
    let mut tell = |Progress { stage, done, of }: Progress| {
        let [stage, done, of] = [stage as usize, done, of].map(|n| JsValue::from_f64(n as f64));
        drop(tell.call3(&JsValue::NULL, &stage, &done, &of));
    };
    let asked: Option<Asked> = postcard::from_bytes(&asked).ok();
    asked.and_then(|asked| postcard::to_allocvec(&reply(&asked, &mut tell)).ok()).unwrap_or_default()
}

/// How far the work is, from the numbers that [`worker_message`] tells.
pub(super) fn told(numbers: [f64; 3]) -> Option<Progress> {
    let [stage, done, of] = numbers.map(|n| n as usize);
    let stage = *[Stage::Layout, Stage::Exclusion, Stage::Suspects].get(stage)?;
    Some(Progress { stage, done, of })
}
