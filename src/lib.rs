//! Chordwright proves whether the figures on a truss drawing describe one truss that can be built.
//!
//! The rooms of the crate, each standing only on those before it:
//!
//! - [`exact`]: rational numbers, points, quadrance and spread, the laws, predicates, roots, intervals;
//! - [`measure`]: trade notation in and out (feet-inches-sixteenths, metric, bevel, degrees);
//! - [`truss`]: the model: joints, members, supports, figures, and edits on them;
//! - [`checks`]: the five questions, each from a truss to findings with evidence;
//! - [`exchange`]: files, links and reports, in and out, every reader hardened;
//! - [`page`]: the web page.
//!
//! # Invariants
//!
//! `exact` knows nothing of trusses, units or text. `checks` knows nothing of files or screens. Nothing outside `page`
//! names the browser. No floating-point number decides a verdict.

pub mod checks;
pub mod exact;
pub mod exchange;
pub mod measure;
pub mod page;
pub mod truss;
