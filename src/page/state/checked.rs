//! A report together with the truss it is about.

use crate::checks::Report;
use crate::truss::Truss;
use std::rc::Rc;

/// Answers, and the truss they are about: ids in the report are places in this truss only.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Checked {
    /// The truss that was checked.
    pub truss: Rc<Truss>,
    /// The answers.
    pub report: Rc<Report>,
    /// The fingerprint of the truss.
    pub fingerprint: String,
}
