//! The answers to the five questions, and the report that holds them.

use super::findings::Finding;
use super::placed::Places;
use crate::exact::{Interval, Point, Rational, Vector, fraction};
use crate::truss::{FigureId, JointId, MemberId};
use serde::{Deserialize, Serialize};
use std::rc::Rc;

/// Everything that was asked of one truss and answered.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
pub struct Report {
    /// The five answers.
    pub answers: Answers,
    /// All findings: by question, worst first, then in the order of the lists.
    pub findings: Vec<Finding>,
    /// Where the answers to the geometric questions take the joints to be.
    pub places: Places,
    /// The place of each joint, in the order of the truss.
    pub points: Vec<Point>,
}

/// The five answers.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
pub struct Answers {
    /// Do the figures close?
    pub close: CloseAnswer,
    /// Is every line true?
    #[serde(rename = "true")]
    pub lines: TrueAnswer,
    /// Is it clear?
    pub clear: ClearAnswer,
    /// Does it stand?
    pub stands: StandsAnswer,
    /// What is cut?
    pub cut: CutAnswer,
}

macro_rules! states {
    ($(#[$enum_doc:meta])* $enum:ident { $($(#[$doc:meta])* $name:ident = $text:literal,)* }) => {
        $(#[$enum_doc])*
        #[derive(Clone, Copy, Debug, PartialEq, Eq, Hash, Serialize, Deserialize)]
        pub enum $enum {
            $($(#[$doc])* #[serde(rename = $text)] $name,)*
        }

        impl $enum {
            /// Its name in reports.
            pub fn name(self) -> &'static str {
                match self { $($enum::$name => $text,)* }
            }
        }
    };
}

states! {
    /// The answer to "do the figures close?".
    CloseState {
        /// A layout agrees with every figure.
        Closes = "closes",
        /// No layout does.
        DoesNotClose = "does not close",
        /// Neither was proved within the bound of work.
        NotSettled = "not settled",
        /// A layout agrees with every figure, and some joints can still move.
        TooFewFigures = "too few figures",
        /// There is no figure to ask about.
        NoFigures = "no figures",
    }
}

states! {
    /// What an answer about closing rests on.
    Proof {
        /// A layout that was checked exactly.
        Layout = "layout",
        /// A certificate that no layout exists, checked exactly.
        Exclusion = "exclusion",
        /// A bounded search that proves nothing.
        Search = "search",
        /// Nothing was asked.
        None = "none",
    }
}

states! {
    /// The answer to "is every line true?".
    TrueState {
        /// Nothing is nearly or falsely so.
        True = "true",
        /// Something is almost so.
        Almost = "almost",
        /// A declared relation fails.
        NotTrue = "not true",
    }
}

states! {
    /// The answer to "is it clear?".
    ClearState {
        /// No fault.
        Clear = "clear",
        /// At least one fault.
        NotClear = "not clear",
    }
}

states! {
    /// The answer to "does it stand?".
    StandsState {
        /// Rigid, by exact rank.
        Rigid = "rigid",
        /// It moves.
        Mechanism = "mechanism",
        /// The count is right, and this very geometry lets it move.
        CriticalForm = "critical form",
        /// Judged as a free body.
        NoSupports = "no supports",
        /// So many members are tangled that the rank was not found within the bound of work.
        NotSettled = "not settled",
    }
}

states! {
    /// A slip of the pen that explains a wrong figure.
    Slip {
        /// Two neighbouring digits changed places.
        DigitsSwapped = "digits swapped",
        /// One digit misread (6 and 9, 1 and 7, 3 and 8, 5 and 6).
        DigitMisread = "digit misread",
        /// One foot more or less.
        OneFoot = "one foot",
        /// One inch more or less.
        OneInch = "one inch",
        /// The fraction was dropped.
        FractionDropped = "fraction dropped",
        /// The fraction was misread.
        FractionMisread = "fraction misread",
        /// Feet read as inches, or inches as feet.
        FeetAsInches = "feet as inches",
        /// The sign is the other way.
        Sign = "sign",
        /// The value belongs to a neighbour.
        Neighbour = "copied from a neighbour",
        /// A decimal point or a zero too many or too few.
        Decimal = "decimal place",
    }
}

/// The answer to "do the figures close?".
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
pub struct CloseAnswer {
    /// The answer.
    pub state: CloseState,
    /// What it rests on.
    pub proof: Proof,
    /// One line under the answer: `61 figures, every one checked`.
    pub summary: String,
    /// The place of each joint in the layout that proves it, in the order of the truss.
    pub layout: Option<Vec<Point>>,
    /// The joints that can still move without changing a figure.
    pub free_joints: Vec<JointId>,
    /// The figures each of which alone may be to blame, likeliest first.
    pub suspects: Vec<Suspect>,
    /// What the places give for each figure, in the order of the truss.
    pub readings: Vec<Reading>,
    /// Where no single figure is to blame: the two that together are, each with the layout without both; else empty.
    pub pair: Vec<Suspect>,
    /// Where no layout and no suspect was found: the places that come nearest to the figures, to be looked at only.
    pub nearest: Option<Vec<Point>>,
}

impl CloseAnswer {
    /// The figures that may be to blame: the suspects, else the two that are together.
    pub fn blamed(&self) -> &[Suspect] {
        if self.suspects.is_empty() { &self.pair } else { &self.suspects }
    }
}

/// A figure whose removal alone lets all the others close.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
pub struct Suspect {
    /// The figure.
    pub figure: FigureId,
    /// What it should read, printed as the trade writes it; the text can be typed in.
    pub implied: String,
    /// The range of what it may read: lengths in the sheet's unit, degrees, or plain numbers.
    pub implied_range: Interval,
    /// The slip of the pen that explains it, if one is known.
    pub slip: Option<Slip>,
    /// A layout that agrees with all the other figures, in the order of the joints.
    pub layout: Vec<Point>,
}

/// What the places of the joints give for a figure.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
pub struct Reading {
    /// The value that the places give, printed to the figure's step as the trade writes it.
    pub gives: String,
    /// How far the printed value is from it, printed likewise; empty when the figure holds.
    pub misfit: String,
    /// True when the places agree with the figure.
    pub holds: bool,
}

/// The answer to "is every line true?".
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
pub struct TrueAnswer {
    /// The answer.
    pub state: TrueState,
    /// One line under the answer.
    pub summary: String,
}

/// The answer to "is it clear?".
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
pub struct ClearAnswer {
    /// The answer.
    pub state: ClearState,
    /// One line under the answer: `least spread 49/149 at L0`.
    pub summary: String,
    /// The enclosed panels, each by its joints counter-clockwise.
    pub panels: Vec<Vec<JointId>>,
    /// The outline, by its joints clockwise; several when the truss is in parts.
    pub outline: Vec<Vec<JointId>>,
}

/// The velocity of one joint in a motion.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
pub struct Motion {
    /// The joint.
    pub joint: JointId,
    /// Its velocity, up to a common factor.
    pub velocity: Vector,
}

/// The answer to "does it stand?".
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
pub struct StandsAnswer {
    /// The answer.
    pub state: StandsState,
    /// One line under the answer.
    pub summary: String,
    /// The exact rank of the rigidity matrix; without supports that of the free body.
    pub rank: usize,
    /// Twice the joints; without supports less 3.
    pub unknowns: usize,
    /// Members (and holds of supports) more than are needed.
    pub spare_members: usize,
    /// A motion that keeps every member's length to first order, checked exactly; only the joints that move. Empty when
    /// it stands.
    pub motion: Vec<Motion>,
}

/// The answer to "what is cut?".
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
pub struct CutAnswer {
    /// The answer in words: `29 pieces`.
    pub state: String,
    /// One line under the answer: `8 lengths, 164'-3 5/16" in all`.
    pub summary: String,
    /// One row for each member, in the order of the truss.
    pub members: Vec<Rc<MemberRow>>,
    /// One row for each joint, in the order of the truss.
    pub joints: Vec<Rc<JointRow>>,
}

/// A member's row in the schedule.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
pub struct MemberRow {
    /// The member.
    pub member: MemberId,
    /// From its first end to its second, to the right, in the sheet's unit.
    #[serde(with = "fraction")]
    pub run: Rational,
    /// From its first end to its second, upwards, in the sheet's unit.
    #[serde(with = "fraction")]
    pub rise: Rational,
    /// The squared working length, in the sheet's unit squared.
    #[serde(with = "fraction")]
    pub quadrance: Rational,
    /// The working length, printed to the sheet's step.
    pub length: String,
    /// True when the printed length is exact.
    pub exact: bool,
    /// The smaller leg in 12 of the larger (metric: in 1000), printed; with its sense.
    pub bevel: String,
    /// The slope of the working line, in degrees from 0 to 90, printed.
    pub degrees: String,
}

/// A joint's row in the schedule.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
pub struct JointRow {
    /// The joint.
    pub joint: JointId,
    /// Its place.
    pub point: Point,
    /// The spreads between neighbouring members, counter-clockwise.
    pub spreads: Vec<NeighbourSpread>,
}

/// The spread between two members that are neighbours around a joint.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
pub struct NeighbourSpread {
    /// The two members, counter-clockwise.
    pub between: [MemberId; 2],
    /// The spread between their lines.
    #[serde(with = "fraction")]
    pub spread: Rational,
    /// The angle from the first to the second, counter-clockwise, in degrees from 0 to 360, printed.
    pub degrees: String,
}
