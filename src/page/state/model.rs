//! The state of the page.

use super::camera::{Camera, Pixel, Place, place_of};
use super::cells::Cell;
use super::checked::Checked;
use super::history::History;
use super::paper::SheetSetup;
use super::plan::Plan;
use crate::checks::pieces::Shop;
use crate::checks::{Limits, Places, Progress, Question};
use crate::exact::Point;
use crate::measure::Unit;
use crate::truss::{FigureId, JointId, MemberId, Selection, SupportId, Truss};
use std::rc::Rc;

/// Everything the page knows. Cheap to clone: large parts are shared.
#[derive(Clone, Debug, PartialEq, Default)]
pub struct State {
    /// The truss that is being worked on.
    pub truss: Rc<Truss>,
    /// Counts the changes of the truss, so that answers can be matched to it.
    pub revision: u64,
    /// What can be undone and redone.
    pub history: History,
    /// The last answers that came back, with the truss they are about.
    pub checked: Option<Rc<Checked>>,
    /// How far the answers to the truss as it is now have come, when that takes long.
    pub progress: Option<Progress>,
    /// The limits that the checks go by.
    pub limits: Rc<Limits>,
    /// What pieces are cut from, in the unit it was typed for; `None`, and on a sheet of another unit, what is usual there.
    pub shop: Option<(Unit, Rc<Shop>)>,
    /// Where the truss came from; `None` on the first screen.
    pub source: Option<Source>,
    /// The question whose evidence is shown.
    pub question: Question,
    /// The finding that is open, by its place in the report.
    pub open_finding: Option<usize>,
    /// The suspect that is open, by its place among the suspects.
    pub open_suspect: Option<usize>,
    /// Whether the board shows the sketch or a layout.
    pub shown: Shown,
    /// What is selected.
    pub selection: Selection,
    /// What the pointer or the focus is on.
    pub pointed: Option<Thing>,
    /// The table that is open.
    pub book: Book,
    /// The first row of the table that is shown, for long tables.
    pub book_start: usize,
    /// Whether the pen draws or the hand looks, selects and moves.
    pub pen: Pen,
    /// Which part of the plane the board shows, and how large.
    pub camera: Camera,
    /// Where the joints are shown, in units of the sheet: what [`State::points`] says, near enough for pixels. Kept by
    /// `update`, so that a pointer that moves over a large truss costs little.
    pub places: Rc<Vec<Place>>,
    /// The size of the board in pixels.
    pub board_size: (f64, f64),
    /// True while the board shows the whole truss, and is to go on doing so when its size changes.
    pub fitted: bool,
    /// What the pointer is doing on the board.
    pub drag: Drag,
    /// Where the pointer is over the board.
    pub pointer: Option<Pixel>,
    /// Light, dark, or as the system has it.
    pub theme: Theme,
    /// Whether motion on the screen is to be kept still.
    pub still: bool,
    /// The layout that is being planned.
    pub plan: Option<Plan>,
    /// How the sheet is to be printed.
    pub setup: SheetSetup,
    /// Whether paper and scale are being chosen.
    pub print_panel: bool,
    /// True while the sheet is laid out for a print.
    pub printing: bool,
    /// The last thing worth saying.
    pub message: Option<Message>,
    /// An entry in a table that was refused; what was typed is kept.
    pub refused: Option<Refused>,
    /// The text in the figure entry, while it is being typed.
    pub entry: String,
    /// Why the figure entry was refused.
    pub entry_error: Option<String>,
    /// Whether the list of keys is open.
    pub help: bool,
    /// The last link made, shown so that it can be copied by hand.
    pub link: Option<String>,
    /// Work kept in this browser that can be taken up again.
    pub kept: Option<Rc<Truss>>,
}

/// Where the truss on the page came from.
#[derive(Clone, Debug, PartialEq, Eq)]
pub enum Source {
    /// Drawn here.
    Own,
    /// A demonstration.
    Demo(&'static str),
    /// A file of this name.
    File(String),
    /// A link.
    Link,
    /// Kept by this browser.
    Kept,
}

/// What the board shows where sketch and layout differ.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq)]
pub enum Shown {
    /// The joints as they are entered.
    #[default]
    Sketch,
    /// The places that the answers are about: the layout, where there is one.
    Layout,
    /// The layout without one suspect, by its place among the suspects.
    Without(usize),
    /// Where there is neither: the places that come nearest to the figures.
    Nearest,
}

/// One thing on the drawing.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
pub enum Thing {
    /// A joint.
    Joint(JointId),
    /// A member.
    Member(MemberId),
    /// A figure.
    Figure(FigureId),
    /// A support.
    Support(SupportId),
}

/// The tables of the book.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq, Hash)]
pub enum Book {
    /// Joints and their coordinates.
    #[default]
    Joints,
    /// Members and what is cut.
    Members,
    /// Figures and what the places give.
    Figures,
    /// Supports.
    Supports,
    /// Equal members together, with totals.
    Schedule,
    /// Dimension strings that add up.
    Strings,
    /// What is cut for each member, with its depth.
    Pieces,
}

/// Whether pressing the board draws.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq)]
pub enum Pen {
    /// Look, select and move.
    #[default]
    Up,
    /// Draw joints and members.
    Down,
}

/// What the pointer is doing on the board.
#[derive(Clone, Debug, Default, PartialEq)]
pub enum Drag {
    /// Nothing.
    #[default]
    None,
    /// Pressed on something or nothing, not moved yet.
    Pressed {
        /// The pointer that was pressed.
        id: i32,
        /// Where.
        at: Pixel,
        /// On what.
        on: Option<Thing>,
        /// Whether the selection is to be extended.
        extend: bool,
    },
    /// The paper is moved.
    Pan {
        /// The pointer that moves it.
        id: i32,
        /// Where it was last.
        last: Pixel,
    },
    /// Joints are moved.
    Move {
        /// The pointer that moves them.
        id: i32,
        /// The joint that was taken hold of.
        joint: JointId,
        /// Where it would be put down.
        to: Point,
        /// What it was snapped to, in words.
        snapped: String,
    },
    /// A member is drawn.
    Member {
        /// The pointer that draws it.
        id: i32,
        /// Its first end.
        from: JointId,
        /// Where it would end.
        to: Point,
        /// The joint it would end at, if it is over one.
        onto: Option<JointId>,
        /// What the end was snapped to, in words.
        snapped: String,
    },
    /// A frame is drawn around what is to be selected.
    Frame {
        /// The pointer that draws it.
        id: i32,
        /// The first corner.
        from: Pixel,
        /// The corner under the pointer.
        to: Pixel,
    },
    /// Two fingers spread or close over the board.
    Pinch {
        /// The two pointers and where they are.
        fingers: [(i32, Pixel); 2],
    },
}

/// Light, dark, or as the system has it.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq)]
pub enum Theme {
    /// As the system has it.
    #[default]
    System,
    /// Ink on paper.
    Light,
    /// Chalk on slate.
    Dark,
}

/// How a message is meant.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Tone {
    /// Something was done.
    Done,
    /// Something could not be done.
    Refused,
}

/// The last thing worth saying.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Message {
    /// The words.
    pub text: String,
    /// How it is meant.
    pub tone: Tone,
}

/// An entry in a table that was refused.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Refused {
    /// Where.
    pub cell: Cell,
    /// What was typed.
    pub text: String,
    /// Why, and what was expected.
    pub error: String,
}

impl State {
    /// What pieces are cut from.
    pub fn shop(&self) -> Shop {
        match &self.shop {
            Some((unit, shop)) if *unit == self.truss.unit => (**shop).clone(),
            _ => Shop::usual(self.truss.unit),
        }
    }

    /// The answers, when they are about the truss as it is now.
    pub fn fresh(&self) -> Option<&Rc<Checked>> {
        self.checked.as_ref().filter(|checked| Rc::ptr_eq(&checked.truss, &self.truss))
    }

    /// The points at which the board shows the joints.
    pub fn points(&self) -> Vec<Point> {
        let layout = self.fresh().and_then(|checked| match self.shown {
            Shown::Sketch => None,
            Shown::Layout => Some(checked.report.points.clone()),
            Shown::Nearest => checked.report.answers.close.nearest.clone(),
            Shown::Without(index) => checked.report.answers.close.blamed().get(index).map(|s| s.layout.clone()),
        });
        layout.filter(|points| points.len() == self.truss.joints.len()).unwrap_or_else(|| self.truss.points())
    }

    /// Brings [`State::places`] to what is shown now.
    pub(super) fn find_places(&mut self) {
        self.places = Rc::new(self.points().iter().map(place_of).collect());
    }

    /// True when both show their joints at the same places.
    pub(super) fn shows_the_same_places(&self, other: &State) -> bool {
        Rc::ptr_eq(&self.truss, &other.truss) && self.checked == other.checked && self.shown == other.shown
    }

    /// True when the board shows the layout without this suspect: asked for, or because it is the only one.
    pub fn shows_without(&self, suspect: usize) -> bool {
        let is_only = |checked: &Rc<Checked>| {
            let close = &checked.report.answers.close;
            close.layout.is_none() && close.suspects.len() == 1
        };
        self.shown == Shown::Without(suspect)
            || (self.shown == Shown::Layout && suspect == 0 && self.fresh().is_some_and(is_only))
    }

    /// True when the layout differs from the sketch, so that there is something to switch between.
    pub fn has_layout(&self) -> bool {
        self.fresh().is_some_and(|checked| checked.report.places == Places::Layout)
    }

    /// What the board can show beside the sketch: the layout, else the layout without the first suspect, else the places
    /// that come nearest.
    pub fn other_places(&self) -> Option<Shown> {
        let close = &self.fresh()?.report.answers.close;
        match () {
            () if self.has_layout() => Some(Shown::Layout),
            () if !close.blamed().is_empty() => Some(Shown::Without(0)),
            () => close.nearest.as_ref().map(|_| Shown::Nearest),
        }
    }

    /// True on the first screen.
    pub fn is_first_screen(&self) -> bool {
        self.source.is_none()
    }

    /// True while the answers to the truss as it is now are being worked out.
    pub fn is_checking(&self) -> bool {
        self.source.is_some() && self.fresh().is_none()
    }

    /// True when everything that can be selected of this thing's kind is.
    pub fn is_selected(&self, thing: Thing) -> bool {
        match thing {
            Thing::Joint(id) => self.selection.joints.contains(&id),
            Thing::Member(id) => self.selection.members.contains(&id),
            Thing::Figure(id) => self.selection.figures.contains(&id),
            Thing::Support(id) => self.selection.supports.contains(&id),
        }
    }
}

impl Book {
    /// Every table, in order.
    pub const ALL: [Book; 7] =
        [Book::Joints, Book::Members, Book::Figures, Book::Supports, Book::Schedule, Book::Strings, Book::Pieces];

    /// Its title.
    pub fn title(self) -> &'static str {
        match self {
            Book::Joints => "Joints",
            Book::Members => "Members",
            Book::Figures => "Figures",
            Book::Supports => "Supports",
            Book::Schedule => "Schedule",
            Book::Strings => "Strings",
            Book::Pieces => "Pieces",
        }
    }
}

impl Theme {
    /// The name used in the page's markup.
    pub fn name(self) -> &'static str {
        match self {
            Theme::System => "system",
            Theme::Light => "light",
            Theme::Dark => "dark",
        }
    }

    /// The next one, when the reader asks for another.
    pub fn next(self) -> Theme {
        match self {
            Theme::System => Theme::Light,
            Theme::Light => Theme::Dark,
            Theme::Dark => Theme::System,
        }
    }
}
