//! The page's entry: mounts it in the document, where there is a place for it.

/// Mounts the page (in the browser only; natively there is nothing to mount).
fn main() {
    #[cfg(target_arch = "wasm32")]
    chordwright::page::mount();
}
