//! Puts the page into the document that it finds itself in.

use super::app::App;
use web_sys::Element;

/// Where the page goes: the shell's own place for it, so that a document which embeds the module is left alone.
const PLACE: &str = "#app[data-page=chordwright]";

/// Mounts the page in the shell's place for it; does nothing in a worker, or in a document that has no such place.
pub fn mount() {
    if let Some(place) = place() {
        yew::Renderer::<App>::with_root(place).render();
    }
}

fn place() -> Option<Element> {
    let document = web_sys::window()?.document()?;
    document.query_selector(PLACE).ok().flatten()
}
