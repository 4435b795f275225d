//! In and out: files, links and reports. Every byte from outside enters here, and is bounded here.

mod document;
mod file;
mod fingerprint;
mod headless;
mod json;
mod link;
mod link_bytes;
#[cfg(feature = "schema")]
mod schema;
mod words;
mod write;

pub use document::{ReportDocument, report_document, report_json};
pub use file::{ReadError, read_truss, read_truss_value};
pub use fingerprint::fingerprint;
pub use headless::{Outcome, REPORT_HELP, run_report};
pub use link::{LinkError, MAX_LINK_CHARACTERS, from_link, to_link};
#[cfg(feature = "schema")]
pub use schema::truss_schema;
pub use words::report_text;
pub use write::write_truss;

/// The notice that goes out with everything.
pub const NOTICE: &str = "Geometry only. A licensed engineer must verify this design, and local codes govern.";
