//! The web page: a pure state with one update function, and components that only place things.

pub mod state;

#[cfg(target_arch = "wasm32")]
pub mod web;

#[cfg(target_arch = "wasm32")]
pub use web::mount;
