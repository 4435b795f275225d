//! A report together with the truss it is about.

use crate::checks::pieces::{Pieces, Shop, pieces};
use crate::checks::{DimensionString, Limits, Placed, Report, Schedule, dimension_strings, schedule};
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
    shop: Shop,
    pieces: OnceCell<Option<Pieces>>,
}

/// Pieces are cut here for trusses of at most so many members.
const MOST_CUT: usize = 300;

impl Checked {
    /// Answers about a truss.
    pub fn new(truss: Rc<Truss>, report: Rc<Report>, fingerprint: String, shop: Shop) -> Checked {
        let (schedule, strings, pieces) = (OnceCell::new(), OnceCell::new(), OnceCell::new());
        Checked { truss, report, fingerprint, schedule, strings, shop, pieces }
    }

    /// The same answers, with pieces cut from other stock.
    pub fn with_shop(&self, shop: Shop) -> Checked {
        Checked { shop, pieces: OnceCell::new(), ..self.clone() }
    }

    /// What the pieces are cut from.
    pub fn shop(&self) -> &Shop {
        &self.shop
    }

    /// The pieces, cut when they are first asked for; `None` where there are too many members.
    pub fn pieces(&self) -> Option<&Pieces> {
        let cut = || {
            let placed = Placed::at_layout(&self.truss, self.report.points.clone());
            pieces(&placed, &self.shop, &Limits::default())
        };
        self.pieces.get_or_init(|| (self.truss.members.len() <= MOST_CUT).then(cut)).as_ref()
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
