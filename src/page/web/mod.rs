//! The page in the browser: components place what the view models say, the shell carries out effects.

mod answers;
mod app;
mod board;
mod book;
mod checker;
mod embed;
mod evidence;
mod field;
mod head;
mod mount;
mod plan;
mod sheet;
mod shell;
mod start;
mod worker;

pub use embed::report;
pub use mount::mount;
pub use worker::worker_message;
