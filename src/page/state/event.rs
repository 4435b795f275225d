//! What can happen to the page, and what the page asks of the browser in turn.

use super::camera::Pixel;
use super::cells::Cell;
use super::model::{Book, Thing};
use super::paper::SheetSetup;
use super::plan::PlanField;
use crate::checks::{Limits, Progress, Question, Report, Stage};
use crate::truss::{Configuration, Role, Truss};
use std::rc::Rc;

/// Something that happened.
#[derive(Clone, Debug, PartialEq)]
pub enum Event {
    /// A demonstration was chosen, by its place in the list.
    DemoChosen(usize),
    /// A new sheet was asked for.
    NewSheet,
    /// A file was read: its name and its bytes.
    FileRead(String, Vec<u8>),
    /// A file could not be read: its name and why.
    FileFailed(String, String),
    /// The page was opened or the address changed, with this fragment.
    LinkArrived(String),
    /// Work of an earlier time was found in this browser.
    KeptFound(String),
    /// Limits of an earlier time were found in this browser.
    LimitsFound(String),
    /// The kept work was taken up again.
    KeptTaken,
    /// The work could not be kept in this browser.
    KeepFailed,
    /// The first screen was asked for.
    StartAsked,
    /// Answers came back for a revision.
    Answered(u64, Rc<Report>, String),
    /// The work on a revision has come so far.
    Progressed(u64, Progress),
    /// The search that is under way was to be stopped.
    StopAsked,
    /// The checks failed to run.
    CheckFailed(String),
    /// A question was chosen.
    QuestionChosen(Question),
    /// A finding was opened or closed, by its place in the report.
    FindingChosen(usize),
    /// A suspect was opened or closed.
    SuspectChosen(usize),
    /// The mend of a finding was taken.
    MendTaken(usize),
    /// The implied value of a suspect was taken.
    ImpliedTaken(usize),
    /// The layout without a suspect was asked for.
    WithoutShown(usize),
    /// Sketch and layout were switched.
    ShownToggled,
    /// Something is pointed at, in a table or in the evidence.
    PointedAt(Option<Thing>),
    /// Something was chosen in a table or in the evidence.
    ThingChosen(Thing, bool),
    /// A pointer acted on the board.
    Pointer(PointerAct),
    /// The wheel turned over the board: where, and how far (positive: away).
    Wheel(Pixel, f64),
    /// A zoom button: the factor.
    ZoomAsked(f64),
    /// The whole truss was asked for.
    FitAsked,
    /// The board has this size now.
    BoardResized(f64, f64),
    /// A key was pressed outside any text box.
    Key(KeyPress),
    /// The pen was put down or taken up.
    PenToggled,
    /// A table was chosen.
    BookChosen(Book),
    /// Other rows of a long table were asked for, from this one.
    BookMoved(usize),
    /// An entry in a table was made.
    CellEntered(Cell, String),
    /// An entry that was refused is being typed anew or given up.
    CellCleared,
    /// A yes or no in a table was switched.
    CellSwitched(Cell),
    /// The role of the selected members was chosen.
    RoleChosen(Role),
    /// The supports of the selected joints were chosen: `pin`, `roller` or none.
    SupportChosen(Option<&'static str>),
    /// The selected joints were made loose or set.
    LooseChosen(bool),
    /// The text of the figure entry changed.
    EntryTyped(String),
    /// The figure entry was made.
    EntryMade,
    /// What is selected was to be removed.
    RemoveAsked,
    /// Undo.
    UndoAsked,
    /// Redo.
    RedoAsked,
    /// A file was asked for, to be saved.
    SaveAsked,
    /// The open table was to be saved as comma-separated values.
    TableSaveAsked,
    /// The drawing was to be saved alone.
    DrawingSaveAsked,
    /// A link was asked for.
    LinkAsked,
    /// The link was copied, or could not be.
    LinkCopied(bool),
    /// The panel with the link was put away.
    LinkClosed,
    /// A print was asked for.
    PrintAsked,
    /// A layout was to be planned.
    PlanOpened,
    /// The configuration of the plan was chosen.
    PlanConfigured(Configuration),
    /// A measure of the plan was typed.
    PlanTyped(PlanField, String),
    /// The figures of the plan were switched on or off.
    PlanFigured,
    /// The planned truss was to be put on the sheet.
    PlanTaken,
    /// The plan was put away.
    PlanClosed,
    /// The choice of paper and scale was opened or put away.
    PrintPanelToggled,
    /// Paper and scale were chosen.
    SheetChosen(SheetSetup),
    /// The browser begins to print, or has done so.
    Printing(bool),
    /// Another theme was asked for.
    ThemeAsked,
    /// The reader's system asks for no motion on the screen.
    MotionAsked(bool),
    /// The list of keys was opened or closed.
    HelpToggled,
    /// The message was put away.
    MessageClosed,
}

/// What a pointer did on the board.
#[derive(Clone, Debug, PartialEq)]
pub enum PointerAct {
    /// Pressed.
    Down {
        /// The pointer's id.
        id: i32,
        /// Where.
        at: Pixel,
        /// With which button.
        button: Button,
        /// With which keys held.
        held: Modifiers,
        /// Whether it is a finger, which needs a wider reach.
        finger: bool,
    },
    /// Moved.
    Move {
        /// The pointer's id.
        id: i32,
        /// Where it is now.
        at: Pixel,
        /// With which keys held.
        held: Modifiers,
    },
    /// Let go.
    Up {
        /// The pointer's id.
        id: i32,
        /// Where.
        at: Pixel,
    },
    /// Taken away by the system: everything is as before it was pressed.
    Cancel {
        /// The pointer's id.
        id: i32,
    },
    /// Left the board.
    Leave,
}

/// A pointer's button.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Button {
    /// The main one, a touch or a pen.
    Main,
    /// The middle one, or the main one with the space bar.
    Middle,
    /// Any other.
    Other,
}

/// Keys held during an act.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq)]
pub struct Modifiers {
    /// Shift.
    pub shift: bool,
    /// Control, or command.
    pub control: bool,
    /// Alt, or option.
    pub alt: bool,
}

/// A key with the keys held.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct KeyPress {
    /// Its name, as browsers give it: `a`, `Delete`, `ArrowLeft` ...
    pub key: String,
    /// With which keys held.
    pub held: Modifiers,
}

/// What is to be worked out.
#[derive(Clone, Debug, PartialEq)]
pub struct Ask {
    /// The revision of the truss; the answers come back with it.
    pub revision: u64,
    /// The truss.
    pub truss: Rc<Truss>,
    /// The limits to go by.
    pub limits: Rc<Limits>,
    /// Where the search for a layout, a proof and suspects is to stop; `None` lets it come to its end.
    pub until: Option<Stage>,
}

/// Something the page asks of the browser.
#[derive(Clone, Debug, PartialEq)]
pub enum Effect {
    /// Work out answers.
    Check(Ask),
    /// Keep the work in this browser.
    Keep(Rc<Truss>),
    /// Save a file.
    Save {
        /// Its name.
        name: String,
        /// Its text.
        text: String,
    },
    /// Put this fragment into the address, without a new entry in the browser's history.
    SetFragment(String),
    /// Put this text on the clipboard.
    Copy(String),
    /// Put the link made of this fragment on the clipboard: with the page's address where it has one.
    CopyLink(String),
    /// Print the page.
    Print,
    /// Put the keyboard into the figure entry.
    FocusEntry,
    /// Put the keyboard into the plan.
    FocusPlan,
    /// Put the keyboard onto the board.
    FocusBoard,
    /// Bring the open finding into view.
    RevealFinding,
    /// Remember the limits, as this text.
    KeepLimits(String),
    /// Remember the theme.
    KeepTheme(&'static str),
    /// Set the title of the window.
    SetTitle(String),
}
