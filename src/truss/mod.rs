//! The model: what is on the drawing.
//!
//! A [`Truss`] is plain data. Joints, members, supports and figures are lists; they name each other by typed ids
//! ([`JointId`], [`MemberId`], [`FigureId`]), which are places in those lists and go stale when an item before them is
//! removed. [`Truss::problems`] lists everything that makes a truss unfit to be checked; readers refuse such a truss, and
//! edits never make one.

mod configure;
mod edit;
mod ids;
mod model;
mod validate;

pub use configure::{Configuration, Measures, configured};
pub use edit::{Edit, EditError, FigureValue, Selection};
pub use ids::{FigureId, JointId, MemberId, SupportId};
pub use model::{Figure, FigureKind, Joint, Member, Role, Support, SupportKind, Truss};
pub use validate::{Limit, Place, Problem, mark_problem};
