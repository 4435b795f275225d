//! The five questions: each takes a truss and gives an answer and findings, with evidence.
//!
//! ```text
//! Truss -> close (places the joints) -> Placed -> lines, clear, stands, cut -> Report
//! ```
//!
//! # Invariants
//!
//! Checks know nothing of files or screens. Each is a function of the truss and the limits only: no state, no clock, no
//! randomness; the same truss gives the same report everywhere.

mod answers;
mod chains;
mod changes;
mod clear;
mod close;
mod cut;
mod findings;
mod frame;
mod limits;
mod lines;
pub mod pieces;
mod placed;
mod print;
mod report;
mod stands;
#[doc(hidden)]
pub mod steps;

pub use answers::{
    Answers, ClearAnswer, ClearState, CloseAnswer, CloseState, CutAnswer, JointRow, MemberRow, Motion, NeighbourSpread,
    Proof, Reading, Report, Slip, StandsAnswer, StandsState, Suspect, TrueAnswer, TrueState,
};
pub use changes::Changes;
pub use close::{Effort, Progress, Stage, close, close_watched};
pub use cut::{DimensionString, Equal, Schedule, Total, dimension_strings, schedule};
pub use findings::{Evidence, Finding, Law, Level, Mend, Question, Rule};
pub use limits::{Adjustable, Limits};
pub use placed::{Placed, Places};
pub use report::{report, report_watched};
