//! Answers off the main thread: one worker, one question at a time, the newest truss first.

use super::worker::{Answer, Asked, Told, answer, told};
use crate::checks::Report;
use crate::page::state::{Ask, Event as PageEvent};
use gloo::events::EventListener;
use gloo::timers::callback::Timeout;
use js_sys::{Function, Object, Reflect};
use std::cell::RefCell;
use std::rc::Rc;
use wasm_bindgen::{JsCast, JsValue};
use web_sys::{MessageEvent, Worker};
use yew::Callback;

/// Milliseconds that older work is let run when newer is waiting: most is done by then, and a worker that is ended has to be
/// made anew.
const PATIENCE: u32 = 250;

/// Asks for answers and hands them back as events.
#[derive(Clone)]
pub(super) struct Checker {
    inner: Rc<RefCell<Inner>>,
}

struct Inner {
    on: Callback<PageEvent>,
    worker: Option<(Worker, [EventListener; 2])>,
    /// The revision that is being worked on.
    busy: Option<u64>,
    /// What is to be worked on next.
    next: Option<Ask>,
    /// Ends what is being worked on, when it takes too long while other work waits.
    impatience: Option<Timeout>,
    /// The last report that came back from this worker, and its revision.
    known: Option<(u64, Rc<Report>)>,
}

impl Checker {
    pub(super) fn new(on: Callback<PageEvent>) -> Checker {
        let inner = Inner { on, worker: None, busy: None, next: None, impatience: None, known: None };
        Checker { inner: Rc::new(RefCell::new(inner)) }
    }

    /// Asks for answers to a revision. An older one that is still being worked on is given up, at once where a search is to
    /// be stopped, else soon.
    pub(super) fn ask(&self, ask: Ask) {
        let is_stop = ask.until.is_some();
        let is_busy = {
            let mut inner = self.inner.borrow_mut();
            inner.next = Some(ask);
            inner.busy.is_some()
        };
        match (is_busy, is_stop) {
            (false, _) => self.send(),
            (true, true) => self.give_up(),
            (true, false) => {
                let later = self.clone();
                let mut inner = self.inner.borrow_mut();
                inner.impatience.get_or_insert_with(|| Timeout::new(PATIENCE, move || later.give_up()));
            }
        }
    }

    /// Ends what is being worked on, and goes on with what is next.
    fn give_up(&self) {
        {
            let mut inner = self.inner.borrow_mut();
            // Not dropped here: this may run inside it.
            if let Some(timeout) = inner.impatience.take() {
                timeout.forget();
            }
            if inner.next.is_none() {
                return;
            }
            let was_busy = inner.busy.take().is_some();
            if let Some((worker, _)) = inner.worker.take_if(|_| was_busy) {
                worker.terminate();
                inner.known = None;
            }
        }
        self.send();
    }

    fn send(&self) {
        let Some(Ask { revision, truss, limits, until }) = self.inner.borrow_mut().next.take() else { return };
        let known = self.inner.borrow().known.as_ref().map(|(revision, _)| *revision);
        let asked = Asked { revision, truss, limits, until, known };
        if self.worker_ready() && self.post(revision, &asked) {
            self.inner.borrow_mut().busy = Some(revision);
        } else {
            let (report, fingerprint) = answer(&asked, &mut |_| ());
            let on = self.inner.borrow().on.clone();
            on.emit(PageEvent::Answered(revision, report, fingerprint));
        }
    }

    fn post(&self, revision: u64, asked: &Asked) -> bool {
        let Ok(bytes) = postcard::to_allocvec(asked) else { return false };
        let message = Object::new();
        let set = |key: &str, value: JsValue| Reflect::set(&message, &key.into(), &value).is_ok();
        if !set("id", JsValue::from_f64(revision as f64))
            || !set("data", js_sys::Uint8Array::from(bytes.as_slice()).into())
        {
            return false;
        }
        let inner = self.inner.borrow();
        inner.worker.as_ref().is_some_and(|(worker, _)| worker.post_message(&message).is_ok())
    }

    /// Makes the worker if there is none; false where there can be none, and the work is done on the spot.
    fn worker_ready(&self) -> bool {
        if self.inner.borrow().worker.is_none()
            && let Some(worker) = make_worker()
        {
            let (heard, failed) = (self.clone(), self.clone());
            let listeners = [
                EventListener::new(&worker, "message", move |event| heard.receive(event)),
                EventListener::new(&worker, "error", move |_| failed.failed("the worker stopped")),
            ];
            self.inner.borrow_mut().worker = Some((worker, listeners));
        }
        self.inner.borrow().worker.is_some()
    }

    fn receive(&self, event: &web_sys::Event) {
        let Some(data) = event.dyn_ref::<MessageEvent>().map(MessageEvent::data) else { return };
        let get = |key: &str| Reflect::get(&data, &key.into()).ok();
        let Some(revision) = get("id").and_then(|id| id.as_f64()).map(|id| id as u64) else { return };
        if let Some(numbers) = get("progress").and_then(|numbers| numbers.dyn_into::<js_sys::Array>().ok()) {
            let number = |index| numbers.get(index).as_f64().unwrap_or(0.0);
            if let Some(progress) = told([0, 1, 2].map(number)) {
                let on = self.inner.borrow().on.clone();
                on.emit(PageEvent::Progressed(revision, progress));
            }
            return;
        }
        let read = get("data")
            .and_then(|bytes| bytes.dyn_into::<js_sys::Uint8Array>().ok())
            .and_then(|bytes| postcard::from_bytes(&bytes.to_vec()).ok());
        let whole = |told: Told| match told {
            Told::Whole(report) => Some(report),
            Told::Changed(changes) => {
                let known = self.inner.borrow().known.clone();
                known.and_then(|(_, old)| changes.applied(&old)).map(Rc::new)
            }
        };
        match read.and_then(|Answer { told, fingerprint }| Some((whole(told)?, fingerprint))) {
            Some((report, fingerprint)) => {
                let on = {
                    let mut inner = self.inner.borrow_mut();
                    inner.busy = None;
                    inner.impatience = None;
                    inner.known = Some((revision, report.clone()));
                    inner.on.clone()
                };
                on.emit(PageEvent::Answered(revision, report, fingerprint));
                self.send();
            }
            None => self.failed("the worker gave no answer"),
        }
    }

    fn failed(&self, why: &str) {
        let on = {
            let mut inner = self.inner.borrow_mut();
            inner.busy = None;
            inner.known = None;
            // Dropped later than now: this may run inside one of its listeners.
            if let Some((worker, listeners)) = inner.worker.take() {
                worker.terminate();
                Timeout::new(0, move || drop(listeners)).forget();
            }
            inner.on.clone()
        };
        on.emit(PageEvent::CheckFailed(why.into()));
    }
}

/// A new worker with the same program, where the document provides them.
fn make_worker() -> Option<Worker> {
    let make = Reflect::get(&js_sys::global(), &"chordwrightWorker".into()).ok()?;
    make.dyn_into::<Function>().ok()?.call0(&JsValue::NULL).ok()?.dyn_into().ok()
}
