//! What a check finds, and the evidence for it.

use crate::exact::Point;
use crate::truss::{Edit, FigureId, JointId, MemberId};
use serde::{Deserialize, Serialize};

/// The five questions a checker asks.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq, PartialOrd, Ord, Hash, Serialize, Deserialize)]
pub enum Question {
    /// Do the figures close?
    #[default]
    Close,
    /// Is every line true?
    True,
    /// Is it clear?
    Clear,
    /// Does it stand?
    Stands,
    /// What is cut?
    Cut,
}

/// How much a finding matters.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash, Serialize, Deserialize)]
#[serde(rename_all = "lowercase")]
pub enum Level {
    /// It cannot be built as figured, or is a mechanism.
    Fault,
    /// It can be built, and somebody should look.
    Caution,
    /// Worth knowing.
    Note,
}

macro_rules! rules {
    ($($(#[$doc:meta])* $name:ident = $text:literal in $question:ident;)*) => {
        /// The rule that a finding rests on; its name is part of the report's contract.
        #[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash, Serialize, Deserialize)]
        pub enum Rule {
            $($(#[$doc])* #[serde(rename = $text)] $name,)*
        }

        impl Rule {
            /// Every rule.
            pub const ALL: &[Rule] = &[$(Rule::$name,)*];

            /// Its name in reports.
            pub fn name(self) -> &'static str {
                match self { $(Rule::$name => $text,)* }
            }

            /// The question it belongs to.
            pub fn question(self) -> Question {
                match self { $(Rule::$name => Question::$question,)* }
            }
        }
    };
}

rules! {
    /// Set joints disagree with a figure.
    FigureMisfit = "figure misfit" in Close;
    /// The figures cannot close: proved.
    Excluded = "excluded" in Close;
    /// Neither proved nor excluded; the best that was found.
    BestMisfit = "best misfit" in Close;
    /// A string does not add up to its overall as printed.
    StringShort = "string short" in Close;
    /// A joint is held so weakly that small errors grow large.
    WeaklyFixed = "weakly fixed" in Close;
    /// A joint still needs a figure.
    NeedsAFigure = "needs a figure" in Close;
    /// Joints declared in line are not.
    NotStraight = "not straight" in True;
    /// A corner declared square is not.
    NotSquare = "not square" in True;
    /// Lines declared parallel are not.
    NotParallel = "not parallel" in True;
    /// Distances declared equal are not.
    NotEqual = "not equal" in True;
    /// Joints of a chord lie almost, but not exactly, in line.
    NearlyStraight = "nearly straight" in True;
    /// A corner is almost square.
    NearlySquare = "nearly square" in True;
    /// Two lines are almost parallel.
    NearlyParallel = "nearly parallel" in True;
    /// A member is almost level.
    NearlyLevel = "nearly level" in True;
    /// A member is almost plumb.
    NearlyPlumb = "nearly plumb" in True;
    /// Two lengths are almost equal.
    NearlyEqual = "nearly equal" in True;
    /// The halves are almost mirror images.
    NearlyAlike = "nearly alike" in True;
    /// Two joints stand in one place.
    SamePlace = "same place" in Clear;
    /// A member has no length.
    NoLength = "no length" in Clear;
    /// Two members join the same two joints.
    Doubled = "doubled" in Clear;
    /// Two members share a piece of their lines.
    Overlap = "overlap" in Clear;
    /// Two members meet inside both where no joint is.
    Crossing = "crossing" in Clear;
    /// A joint stands on a member that it is not part of.
    JointOnMember = "joint on member" in Clear;
    /// A joint almost touches a member or a joint.
    NearlyMeeting = "nearly meeting" in Clear;
    /// Two neighbours leave a joint too close together.
    TightSpread = "tight spread" in Clear;
    /// A joint with one member and no support.
    LooseEnd = "loose end" in Clear;
    /// Parts that are not connected.
    Apart = "apart" in Clear;
    /// A joint without a member.
    UnusedJoint = "unused joint" in Clear;
    /// The supports alone let it move, or are missing.
    Supports = "supports" in Stands;
    /// Members are missing: it moves.
    Mechanism = "mechanism" in Stands;
    /// The count is right, and this very geometry lets it move.
    CriticalForm = "critical form" in Stands;
    /// A member more than is needed.
    SpareMember = "spare member" in Stands;
    /// A piece longer than the stock or the load.
    TooLong = "too long" in Cut;
    /// Rounded lengths that add up to something else.
    Rounding = "rounding" in Cut;
    /// Pieces that collide at a joint.
    TightEnd = "tight end" in Cut;
}

/// The published law that evidence rests on.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash, Serialize, Deserialize)]
pub enum Law {
    /// Quadrance: the squared distance.
    Quadrance,
    /// Spread: the squared sine of the angle between two lines.
    Spread,
    /// Pythagoras: Q1 + Q2 = Q3 when the lines of Q1 and Q2 are square.
    Pythagoras,
    /// Triple quad formula: (Q1 + Q2 + Q3)² = 2(Q1² + Q2² + Q3²) when three points are in line.
    TripleQuad,
    /// Spread law: s1/Q1 = s2/Q2 = s3/Q3.
    SpreadLaw,
    /// Cross law: (Q1 + Q2 - Q3)² = 4 Q1 Q2 (1 - s3).
    CrossLaw,
    /// Triple spread formula.
    TripleSpread,
    /// Archimedes' function: 4 Q1 Q2 - (Q1 + Q2 - Q3)² is negative for no triangle.
    Archimedes,
    /// Runs and rises add along any way round.
    Sum,
    /// Which side of a line a point lies on.
    Orientation,
    /// The rank of the rigidity matrix (Maxwell 1864).
    RigidityRank,
    /// Laman's count of members (Laman 1970).
    LamanCount,
}

/// One line of evidence.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
pub enum Evidence {
    /// A sentence.
    Words(String),
    /// A quantity and its exact value: `quadrance L0-U1`, `7200 in²`.
    Value {
        /// What it is.
        name: String,
        /// Its exact value, with the unit.
        value: String,
    },
    /// A law with the numbers substituted.
    Formula {
        /// Which law.
        law: Law,
        /// The numbers in it, ready to be read: `60² + 60² = 7200`.
        text: String,
    },
}

/// How a finding can be put right.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
pub struct Mend {
    /// What to do, in words.
    pub text: String,
    /// The edit that does it, where there is one.
    pub edit: Option<Edit>,
}

/// What a check found.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
pub struct Finding {
    /// The rule it rests on.
    pub rule: Rule,
    /// How much it matters.
    pub level: Level,
    /// The joints it is about.
    pub joints: Vec<JointId>,
    /// The members it is about.
    pub members: Vec<MemberId>,
    /// The figures it is about.
    pub figures: Vec<FigureId>,
    /// Points of the board it is about that are no joints (where two members cross, say).
    pub points: Vec<Point>,
    /// One sentence in a drafter's words.
    pub text: String,
    /// The exact numbers and the law.
    pub evidence: Vec<Evidence>,
    /// How to put it right, where that is known.
    pub mend: Option<Mend>,
}

impl Finding {
    /// A finding of a rule, about nothing yet.
    pub fn new(rule: Rule, level: Level, text: impl Into<String>) -> Finding {
        Finding {
            rule,
            level,
            joints: Vec::new(),
            members: Vec::new(),
            figures: Vec::new(),
            points: Vec::new(),
            text: text.into(),
            evidence: Vec::new(),
            mend: None,
        }
    }

    /// The same, about these joints too.
    pub fn joints(mut self, joints: impl IntoIterator<Item = JointId>) -> Finding {
        self.joints.extend(joints);
        self
    }

    /// The same, about these members too.
    pub fn members(mut self, members: impl IntoIterator<Item = MemberId>) -> Finding {
        self.members.extend(members);
        self
    }

    /// The same, about these figures too.
    pub fn figures(mut self, figures: impl IntoIterator<Item = FigureId>) -> Finding {
        self.figures.extend(figures);
        self
    }

    /// The same, about this point of the board too.
    pub fn point(mut self, point: Point) -> Finding {
        self.points.push(point);
        self
    }

    /// The same, with a sentence of evidence.
    pub fn words(mut self, text: impl Into<String>) -> Finding {
        self.evidence.push(Evidence::Words(text.into()));
        self
    }

    /// The same, with a named exact value.
    pub fn value(mut self, name: impl Into<String>, value: impl ToString) -> Finding {
        self.evidence.push(Evidence::Value { name: name.into(), value: value.to_string() });
        self
    }

    /// The same, with a law and the numbers in it.
    pub fn formula(mut self, law: Law, text: impl Into<String>) -> Finding {
        self.evidence.push(Evidence::Formula { law, text: text.into() });
        self
    }

    /// The same, with what to do about it.
    pub fn mend(mut self, text: impl Into<String>, edit: Option<Edit>) -> Finding {
        self.mend = Some(Mend { text: text.into(), edit });
        self
    }
}

impl Question {
    /// All five, in their order.
    pub const ALL: [Question; 5] = [Question::Close, Question::True, Question::Clear, Question::Stands, Question::Cut];

    /// The question as it is asked.
    pub fn text(self) -> &'static str {
        match self {
            Question::Close => "Do the figures close?",
            Question::True => "Is every line true?",
            Question::Clear => "Is it clear?",
            Question::Stands => "Does it stand?",
            Question::Cut => "What is cut?",
        }
    }
}

impl Level {
    /// Its name in reports.
    pub fn name(self) -> &'static str {
        match self {
            Level::Fault => "fault",
            Level::Caution => "caution",
            Level::Note => "note",
        }
    }
}

impl Law {
    /// Its usual name.
    pub fn name(self) -> &'static str {
        match self {
            Law::Quadrance => "Quadrance",
            Law::Spread => "Spread",
            Law::Pythagoras => "Pythagoras",
            Law::TripleQuad => "Triple quad formula",
            Law::SpreadLaw => "Spread law",
            Law::CrossLaw => "Cross law",
            Law::TripleSpread => "Triple spread formula",
            Law::Archimedes => "Archimedes' function",
            Law::Sum => "Sums of runs and rises",
            Law::Orientation => "Orientation",
            Law::RigidityRank => "Rank of the rigidity matrix",
            Law::LamanCount => "Laman's count",
        }
    }

    /// The law itself.
    pub fn statement(self) -> &'static str {
        match self {
            Law::Quadrance => "Q = run² + rise²",
            Law::Spread => "s = (cross product)² / (Q₁ Q₂)",
            Law::Pythagoras => "Q₁ + Q₂ = Q₃ exactly when the lines of Q₁ and Q₂ are square",
            Law::TripleQuad => "(Q₁ + Q₂ + Q₃)² = 2(Q₁² + Q₂² + Q₃²) exactly when three points are in line",
            Law::SpreadLaw => "s₁/Q₁ = s₂/Q₂ = s₃/Q₃",
            Law::CrossLaw => "(Q₁ + Q₂ − Q₃)² = 4 Q₁ Q₂ (1 − s₃)",
            Law::TripleSpread => "(s₁ + s₂ + s₃)² = 2(s₁² + s₂² + s₃²) + 4 s₁ s₂ s₃",
            Law::Archimedes => "4 Q₁ Q₂ − (Q₁ + Q₂ − Q₃)² is sixteen times the squared area, so never negative",
            Law::Sum => "runs (and rises) along a chain add up to the overall",
            Law::Orientation => "the sign of the cross product tells the side of the line",
            Law::RigidityRank => "a frame of j joints stands when its rigidity matrix has rank 2j",
            Law::LamanCount => "2j − 3 members, and no part of k joints with more than 2k − 3",
        }
    }
}
