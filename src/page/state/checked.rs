//! A report together with the truss it is about.

use crate::checks::{DimensionString, Report, Schedule, dimension_strings, schedule};
use crate::truss::Truss;
use std::cell::OnceCell;
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
    schedule: OnceCell<Schedule>,
    strings: OnceCell<Vec<DimensionString>>,
}

impl Checked {
    /// Answers about a truss.
    pub fn new(truss: Rc<Truss>, report: Rc<Report>, fingerprint: String) -> Checked {
        Checked { truss, report, fingerprint, schedule: OnceCell::new(), strings: OnceCell::new() }
    }

    /// The schedule of equal members, made when it is first asked for.
    pub fn schedule(&self) -> &Schedule {
        self.schedule.get_or_init(|| schedule(&self.truss, &self.report.answers.cut))
    }

    /// The dimension strings, made when they are first asked for.
    pub fn strings(&self) -> &[DimensionString] {
        self.strings.get_or_init(|| dimension_strings(&self.truss, &self.report.points))
    }
}
