//! Carries out what the page asks of the browser.

use super::checker::Checker;
use crate::exchange::write_truss;
use crate::page::state::{Effect, Event as PageEvent};
use crate::truss::{Limit, Truss};
use gloo::file::futures::read_as_bytes;
use gloo::storage::{LocalStorage, Storage};
use gloo::timers::callback::Timeout;
use gloo::utils::{document, window};
use std::rc::Rc;
use wasm_bindgen::{JsCast, JsValue};
use wasm_bindgen_futures::{JsFuture, spawn_local};
use web_sys::{BlobPropertyBag, HtmlAnchorElement, HtmlElement};
use yew::Callback;

/// Where the work is kept in this browser.
const WORK: &str = "chordwright.work";
/// Where the theme is kept.
const THEME: &str = "chordwright.theme";
/// Where the limits are kept.
const LIMITS: &str = "chordwright.limits";
/// Milliseconds that the work may wait to be kept.
const KEEP_AFTER: u32 = 300;

/// Carries out effects.
pub(super) struct Shell {
    on: Callback<PageEvent>,
    checker: Checker,
    keeping: Option<Timeout>,
}

impl Shell {
    pub(super) fn new(on: Callback<PageEvent>) -> Shell {
        Shell { checker: Checker::new(on.clone()), on, keeping: None }
    }

    pub(super) fn run(&mut self, effect: Effect) {
        match effect {
            Effect::Check(ask) => self.checker.ask(ask),
            Effect::Keep(truss) => self.keep(truss),
            Effect::Save { name, text } => save(&name, &text),
            Effect::SetFragment(link) => set_fragment(&link),
            Effect::Copy(text) => copy(text, self.on.clone()),
            Effect::CopyLink(link) => copy(address_of(&link), self.on.clone()),
            // Once the sheet is on the page.
            Effect::Print => drop(Timeout::new(0, || drop(window().print())).forget()),
            Effect::FocusEntry => focus_soon("#entry"),
            Effect::FocusPlan => focus_soon("#plan-configuration"),
            Effect::FocusBoard => focus_soon("#board"),
            Effect::RevealFinding => {}
            Effect::KeepLimits(text) => drop(LocalStorage::set(LIMITS, text)),
            Effect::KeepTheme(name) => drop(LocalStorage::set(THEME, name)),
            Effect::SetTitle(title) => document().set_title(&window_title(&title)),
        }
    }

    fn keep(&mut self, truss: Rc<Truss>) {
        let on = self.on.clone();
        self.keeping = Some(Timeout::new(KEEP_AFTER, move || {
            if LocalStorage::set(WORK, write_truss(&truss)).is_err() {
                on.emit(PageEvent::KeepFailed);
            }
        }));
    }
}

fn window_title(title: &str) -> String {
    if title.is_empty() { "Chordwright".into() } else { format!("{title} · Chordwright") }
}

/// The work that this browser kept, if any.
pub(super) fn kept_work() -> Option<String> {
    LocalStorage::get(WORK).ok()
}

/// The limits that this browser remembers, if any.
pub(super) fn kept_limits() -> Option<String> {
    LocalStorage::get(LIMITS).ok()
}

/// The theme that this browser remembers, if any.
pub(super) fn kept_theme() -> Option<String> {
    LocalStorage::get(THEME).ok()
}

/// The fragment of the address.
pub(super) fn fragment() -> String {
    window().location().hash().unwrap_or_default()
}

/// True when the reader's system asks for no motion.
pub(super) fn wants_stillness() -> bool {
    let query = window().match_media("(prefers-reduced-motion: reduce)");
    query.ok().flatten().is_some_and(|query| query.matches())
}

/// Reads a file that was chosen or dropped; one that is too large is refused unread.
pub(super) fn read_file(file: web_sys::File, on: Callback<PageEvent>) {
    let name = file.name();
    if file.size() > Limit::FILE_BYTES as f64 {
        return on.emit(PageEvent::FileFailed(name, "it is larger than 16 MiB, the limit of a truss file".into()));
    }
    spawn_local(async move {
        match read_as_bytes(&gloo::file::File::from(file)).await {
            Ok(bytes) => on.emit(PageEvent::FileRead(name, bytes)),
            Err(error) => on.emit(PageEvent::FileFailed(name, error.to_string())),
        }
    });
}

fn save(name: &str, text: &str) {
    let saved = (|| -> Result<(), JsValue> {
        let options = BlobPropertyBag::new();
        options.set_type(match name.rsplit_once('.').map(|(_, end)| end) {
            Some("csv") => "text/csv",
            Some("svg") => "image/svg+xml",
            _ => "application/json",
        });
        let parts = js_sys::Array::of1(&JsValue::from_str(text));
        let blob = web_sys::Blob::new_with_str_sequence_and_options(&parts, &options)?;
        let address = web_sys::Url::create_object_url_with_blob(&blob)?;
        let anchor: HtmlAnchorElement = document().create_element("a")?.unchecked_into();
        anchor.set_href(&address);
        anchor.set_download(name);
        anchor.click();
        Timeout::new(10_000, move || drop(web_sys::Url::revoke_object_url(&address))).forget();
        Ok(())
    })();
    if saved.is_err() {
        document().set_title("The file could not be saved");
    }
}

fn set_fragment(link: &str) {
    if let Ok(history) = window().history() {
        drop(history.replace_state_with_url(&JsValue::NULL, "", Some(&format!("#{link}"))));
    }
}

/// The address that opens a link: this page's own where it is served, else the fragment alone.
fn address_of(link: &str) -> String {
    let location = window().location();
    match (location.protocol(), location.origin(), location.pathname()) {
        (Ok(protocol), Ok(origin), Ok(path)) if protocol.starts_with("http") => format!("{origin}{path}#{link}"),
        _ => format!("#{link}"),
    }
}

fn copy(text: String, on: Callback<PageEvent>) {
    let navigator = window().navigator();
    let has_clipboard = js_sys::Reflect::get(&navigator, &"clipboard".into()).is_ok_and(|value| value.is_object());
    if !has_clipboard {
        return on.emit(PageEvent::LinkCopied(false));
    }
    let promise = navigator.clipboard().write_text(&text);
    spawn_local(async move { on.emit(PageEvent::LinkCopied(JsFuture::from(promise).await.is_ok())) });
}

/// Puts the keyboard into an element once it is on the page.
fn focus_soon(selector: &'static str) {
    Timeout::new(0, move || {
        let element = document().query_selector(selector).ok().flatten();
        if let Some(element) = element.and_then(|element| element.dyn_into::<HtmlElement>().ok()) {
            drop(element.focus());
        }
    })
    .forget();
}
