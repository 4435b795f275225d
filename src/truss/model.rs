//! Joints, members, supports, figures and the truss that holds them.

use super::ids::{FigureId, JointId, MemberId};
use crate::exact::{Point, Rational, ratio};
use crate::measure::{Unit, Written};
use serde::{Deserialize, Serialize};

/// One truss drawing: the sheet's unit and printing step, and what is drawn and figured on it.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
pub struct Truss {
    /// The title of the sheet.
    pub title: String,
    /// What a bare number means.
    pub unit: Unit,
    /// The printing step of the sheet, a length in `unit`; 0 means that every figure is exact.
    pub step: Written,
    /// The working points.
    pub joints: Vec<Joint>,
    /// The pieces between them.
    pub members: Vec<Member>,
    /// Where it is held.
    pub supports: Vec<Support>,
    /// The values printed on the drawing.
    pub figures: Vec<Figure>,
}

/// A working point.
#[derive(Clone, Debug, PartialEq, Eq, Hash, Serialize, Deserialize)]
pub struct Joint {
    /// Its mark on the drawing (`L0`, `U1` ...).
    pub mark: String,
    /// Distance to the right of the origin, in the sheet's unit.
    pub x: Written,
    /// Distance above the origin, in the sheet's unit.
    pub y: Written,
    /// True when the coordinates are only the sketch, and its place has to come from the figures.
    pub loose: bool,
}

/// A straight piece between two joints.
#[derive(Clone, Debug, PartialEq, Eq, Hash, Serialize, Deserialize)]
pub struct Member {
    /// Its mark on the drawing (`B1`, `T1` ...).
    pub mark: String,
    /// One end.
    pub from: JointId,
    /// The other end.
    pub to: JointId,
    /// What it is for.
    pub role: Role,
}

/// What a member is for.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq, PartialOrd, Ord, Hash, Serialize, Deserialize)]
pub enum Role {
    /// A piece of the top chord.
    #[serde(rename = "top chord")]
    TopChord,
    /// A piece of the bottom chord.
    #[serde(rename = "bottom chord")]
    BottomChord,
    /// A sloping piece between the chords.
    #[serde(rename = "web")]
    Web,
    /// An upright piece between the chords.
    #[serde(rename = "post")]
    Post,
    /// Anything else.
    #[default]
    #[serde(rename = "other")]
    Other,
}

/// What holds a joint.
#[derive(Clone, Debug, PartialEq, Eq, Hash, Serialize, Deserialize)]
pub struct Support {
    /// The joint that is held.
    pub joint: JointId,
    /// In which directions.
    pub kind: SupportKind,
}

/// In which directions a support holds.
#[derive(Clone, Debug, PartialEq, Eq, Hash, Serialize, Deserialize)]
pub enum SupportKind {
    /// Held in every direction.
    Pin,
    /// Held along the normal only; free to roll square to it.
    Roller {
        /// The direction in which it holds; plain numbers, not both zero.
        normal: [Written; 2],
    },
}

/// A value printed on the drawing.
#[derive(Clone, Debug, PartialEq, Eq, Hash, Serialize, Deserialize)]
pub struct Figure {
    /// Its mark (`f1` ...), `id` in files.
    pub mark: String,
    /// What it says.
    pub kind: FigureKind,
    /// Its own printing step, where it differs from the sheet's; a length, degrees or a plain number like the value.
    pub step: Option<Written>,
}

/// What a figure says, about which joints.
#[derive(Clone, Debug, PartialEq, Eq, Hash, Serialize, Deserialize)]
pub enum FigureKind {
    /// The distance between two joints.
    Length {
        /// One end.
        from: JointId,
        /// The other end.
        to: JointId,
        /// A length, not negative.
        value: Written,
    },
    /// How far `to` lies to the right of `from` (negative: to the left).
    Run {
        /// Measured from here.
        from: JointId,
        /// Measured to here.
        to: JointId,
        /// A signed length.
        value: Written,
    },
    /// How far `to` lies above `from` (negative: below).
    Rise {
        /// Measured from here.
        from: JointId,
        /// Measured to here.
        to: JointId,
        /// A signed length.
        value: Written,
    },
    /// The slope of the line between two joints as rise : run, unsigned.
    Pitch {
        /// One end.
        from: JointId,
        /// The other end.
        to: JointId,
        /// The rise, a plain number that is not negative.
        rise: Written,
        /// The run, a plain number that is not negative.
        run: Written,
    },
    /// The angle at a joint between the lines to two others.
    Angle {
        /// The joint at which it is measured.
        at: JointId,
        /// On one line.
        from: JointId,
        /// On the other line.
        to: JointId,
        /// Degrees, from 0 to 180.
        value: Written,
    },
    /// The spread at a joint between the lines to two others.
    Spread {
        /// The joint at which it is measured.
        at: JointId,
        /// On one line.
        from: JointId,
        /// On the other line.
        to: JointId,
        /// A plain number from 0 to 1.
        value: Written,
    },
    /// The lines from a joint to two others are square.
    Square {
        /// The corner.
        at: JointId,
        /// On one line.
        from: JointId,
        /// On the other line.
        to: JointId,
    },
    /// Three or more joints lie on one line.
    InLine {
        /// The joints, three or more.
        joints: Vec<JointId>,
    },
    /// Two lines are parallel.
    Parallel {
        /// The ends of one line.
        first: [JointId; 2],
        /// The ends of the other.
        second: [JointId; 2],
    },
    /// Two distances are equal.
    Equal {
        /// The ends of one line.
        first: [JointId; 2],
        /// The ends of the other.
        second: [JointId; 2],
    },
    /// Two or more joints lie at one height.
    Level {
        /// The joints, two or more.
        joints: Vec<JointId>,
    },
    /// Two or more joints lie one above the other.
    Plumb {
        /// The joints, two or more.
        joints: Vec<JointId>,
    },
}

impl Default for Truss {
    /// An empty sheet in inches, printed to sixteenths.
    fn default() -> Self {
        Truss {
            title: String::new(),
            unit: Unit::In,
            step: Written::plain(ratio(1, 16)),
            joints: Vec::new(),
            members: Vec::new(),
            supports: Vec::new(),
            figures: Vec::new(),
        }
    }
}

impl Truss {
    /// The joint with this id.
    pub fn joint(&self, id: JointId) -> &Joint {
        &self.joints[id.index()]
    }

    /// The member with this id.
    pub fn member(&self, id: MemberId) -> &Member {
        &self.members[id.index()]
    }

    /// The figure with this id.
    pub fn figure(&self, id: FigureId) -> &Figure {
        &self.figures[id.index()]
    }

    /// The mark of a joint.
    pub fn mark(&self, id: JointId) -> &str {
        &self.joint(id).mark
    }

    /// The joint with this mark.
    pub fn joint_marked(&self, mark: &str) -> Option<JointId> {
        self.joints.iter().position(|joint| joint.mark == mark).map(JointId::new)
    }

    /// The coordinates of every joint as given: exact for set joints, the sketch for loose ones.
    pub fn points(&self) -> Vec<Point> {
        self.joints.iter().map(Joint::point).collect()
    }

    /// The printing step of a figure: its own, or the sheet's. Level and plumb are always exact (step 0), and so are the
    /// relations without a value, whose step here is the sheet's (see [`FigureKind::is_relation`]).
    pub fn step_of(&self, figure: &Figure) -> Rational {
        match (&figure.step, &figure.kind) {
            (_, FigureKind::Level { .. } | FigureKind::Plumb { .. }) => ratio(0, 1),
            (Some(step), _) => step.value.clone(),
            (None, _) => self.step.value.clone(),
        }
    }
}

impl Joint {
    /// Its coordinates as given.
    pub fn point(&self) -> Point {
        Point { x: self.x.value.clone(), y: self.y.value.clone() }
    }
}

impl Member {
    /// Both ends.
    pub fn ends(&self) -> [JointId; 2] {
        [self.from, self.to]
    }
}

impl Role {
    /// Every role, in the order of schedules.
    pub const ALL: [Role; 5] = [Role::TopChord, Role::BottomChord, Role::Web, Role::Post, Role::Other];

    /// Its name, as in files.
    pub fn name(self) -> &'static str {
        match self {
            Role::TopChord => "top chord",
            Role::BottomChord => "bottom chord",
            Role::Web => "web",
            Role::Post => "post",
            Role::Other => "other",
        }
    }

    /// The role with this name.
    pub fn from_name(name: &str) -> Option<Role> {
        Role::ALL.into_iter().find(|role| role.name() == name)
    }
}

impl FigureKind {
    /// Its name, as in files: `length`, `run`, `in line` ...
    pub fn name(&self) -> &'static str {
        match self {
            FigureKind::Length { .. } => "length",
            FigureKind::Run { .. } => "run",
            FigureKind::Rise { .. } => "rise",
            FigureKind::Pitch { .. } => "pitch",
            FigureKind::Angle { .. } => "angle",
            FigureKind::Spread { .. } => "spread",
            FigureKind::Square { .. } => "square",
            FigureKind::InLine { .. } => "in line",
            FigureKind::Parallel { .. } => "parallel",
            FigureKind::Equal { .. } => "equal",
            FigureKind::Level { .. } => "level",
            FigureKind::Plumb { .. } => "plumb",
        }
    }

    /// True for the kinds that print no value: a declared relation between joints.
    pub fn is_relation(&self) -> bool {
        self.value_text().is_none()
    }

    /// The value as it was written (`6:12` for a pitch); `None` for a relation.
    pub fn value_text(&self) -> Option<String> {
        match self {
            FigureKind::Length { value, .. }
            | FigureKind::Run { value, .. }
            | FigureKind::Rise { value, .. }
            | FigureKind::Angle { value, .. }
            | FigureKind::Spread { value, .. } => Some(value.text.clone()),
            FigureKind::Pitch { rise, run, .. } => Some(format!("{}:{}", rise.text, run.text)),
            _ => None,
        }
    }

    /// The values that are printed: none, one, or rise and run of a pitch.
    pub fn values(&self) -> Vec<&Written> {
        match self {
            FigureKind::Length { value, .. }
            | FigureKind::Run { value, .. }
            | FigureKind::Rise { value, .. }
            | FigureKind::Angle { value, .. }
            | FigureKind::Spread { value, .. } => vec![value],
            FigureKind::Pitch { rise, run, .. } => vec![rise, run],
            _ => Vec::new(),
        }
    }

    /// The joints it is about, in the order they are written.
    pub fn joints(&self) -> Vec<JointId> {
        match self {
            FigureKind::Length { from, to, .. }
            | FigureKind::Run { from, to, .. }
            | FigureKind::Rise { from, to, .. }
            | FigureKind::Pitch { from, to, .. } => vec![*from, *to],
            FigureKind::Angle { at, from, to, .. }
            | FigureKind::Spread { at, from, to, .. }
            | FigureKind::Square { at, from, to } => vec![*at, *from, *to],
            FigureKind::Parallel { first, second } | FigureKind::Equal { first, second } => [*first, *second].concat(),
            FigureKind::InLine { joints } | FigureKind::Level { joints } | FigureKind::Plumb { joints } => {
                joints.clone()
            }
        }
    }

    /// Mutable access to the same joints, for renumbering.
    pub fn joints_mut(&mut self) -> Vec<&mut JointId> {
        match self {
            FigureKind::Length { from, to, .. }
            | FigureKind::Run { from, to, .. }
            | FigureKind::Rise { from, to, .. }
            | FigureKind::Pitch { from, to, .. } => vec![from, to],
            FigureKind::Angle { at, from, to, .. }
            | FigureKind::Spread { at, from, to, .. }
            | FigureKind::Square { at, from, to } => vec![at, from, to],
            FigureKind::Parallel { first, second } | FigureKind::Equal { first, second } => {
                first.iter_mut().chain(second).collect()
            }
            FigureKind::InLine { joints } | FigureKind::Level { joints } | FigureKind::Plumb { joints } => {
                joints.iter_mut().collect()
            }
        }
    }
}
