//! The web page: its state, which is pure and tested natively, and the components that place things in the browser.

#[cfg(target_arch = "wasm32")]
mod mount;
#[cfg(target_arch = "wasm32")]
pub mod worker;

#[cfg(target_arch = "wasm32")]
pub use mount::mount;
