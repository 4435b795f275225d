//! What the page knows, and how it changes: pure, with no browser in it, tested natively.
//!
//! ```text
//! browser event -> Event -> update(&State, Event) -> (State, Vec<Effect>) -> view models -> components
//! ```
//!
//! # Invariants
//!
//! `update` is pure and total: no clock, no storage, no randomness, and no event makes it panic. Floating point is used
//! for pixels only; what is written into the truss is rational.

mod board_events;
mod camera;
mod cells;
mod checked;
mod csv;
mod draw;
mod entry;
mod event;
mod files;
mod history;
mod hit;
mod keys;
mod model;
mod paper;
mod plan;
mod snap;
mod stock;
mod update;
pub mod view;

pub use camera::{Camera, Pixel, Place};
pub use cells::{Cell, Column, Row, understood};
pub use checked::Checked;
pub use csv::csv_text;
pub use event::{Ask, Button, Effect, Event, KeyPress, Modifiers, PointerAct};
pub use files::DEMOS;
pub use history::History;
pub use keys::{KEYS, KeyHelp};
pub use model::{Book, Drag, Message, Pen, Refused, Shown, Source, State, Theme, Thing, Tone};
pub use paper::{OnPaper, Paper, SheetSetup, on_paper, scales};
pub use plan::{Plan, PlanField};
pub use update::update;
