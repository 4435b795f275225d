//! The book: joints, members, figures and supports as tables.

use super::evidence::marks;
use crate::checks::{Equal, JointRow, MemberRow, Schedule};
use crate::measure::pretty;
use crate::page::state::{Book, Cell, Checked, Column, Row, State, Thing};
use crate::truss::{FigureId, JointId, MemberId, SupportId, SupportKind, Truss};

/// Rows shown at a time.
pub const PAGE_ROWS: usize = 200;

/// One table.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct BookView {
    /// Which.
    pub book: Book,
    /// How many of each there are, where it is known without working it out.
    pub counts: [Option<usize>; 7],
    /// The rows shown.
    pub rows: Vec<RowView>,
    /// The first row shown.
    pub start: usize,
    /// How many rows there are.
    pub total: usize,
    /// The line in which something is added, where the table has one; its error, if it was refused.
    pub line: Option<CellView>,
    /// What the line expects.
    pub example: &'static str,
}

/// One row.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct RowView {
    /// What it is about; several things where they are taken together.
    pub things: Vec<Thing>,
    /// Whether it stands for something that can be removed here.
    pub can_remove: bool,
    /// Its style: selected, at fault.
    pub class: &'static str,
    /// Its cells.
    pub cells: Vec<CellView>,
}

/// One cell.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct CellView {
    /// Where an entry goes; `None` where nothing can be entered.
    pub cell: Option<Cell>,
    /// What it shows.
    pub text: String,
    /// What it is called, for those who cannot see the table.
    pub label: String,
    /// How it is entered.
    pub kind: CellKind,
    /// Why the last entry was refused.
    pub error: String,
}

/// How a cell is entered.
#[derive(Clone, Debug, PartialEq, Eq)]
pub enum CellKind {
    /// Only shown; as text.
    Words,
    /// Only shown; as text over the whole row.
    Wide,
    /// Only shown; as a number.
    Number,
    /// Typed text.
    Text,
    /// A typed value.
    Value,
    /// Yes or no.
    Check(bool),
    /// One of several.
    Choice(&'static [&'static str]),
}

const ROLES: [&str; 5] = ["top chord", "bottom chord", "web", "post", "other"];
const KINDS: [&str; 2] = ["pin", "roller"];

/// The titles of a table's columns.
pub fn column_titles(book: Book) -> &'static [&'static str] {
    match book {
        Book::Joints => &["joint", "right", "up", "loose", "spreads between neighbours"],
        Book::Members => &["member", "from", "to", "role", "length", "bevel", "degrees", "quadrance"],
        Book::Figures => &["figure", "kind", "between", "printed", "to a step of", "the places give", "misfit"],
        Book::Supports => &["joint", "kind", "holds right", "holds up"],
        Book::Schedule => &["off", "opposite hand", "role", "length", "bevel", "degrees", "quadrance", "members"],
        Book::Pieces => &super::pieces::TITLES,
        Book::Strings => &["along", "string as printed, adding up exactly", "roundings", "joints"],
    }
}

/// The open table.
pub fn book_view(state: &State) -> BookView {
    let truss = &*state.truss;
    let checked = state.fresh();
    let total = match state.book {
        Book::Joints => truss.joints.len(),
        Book::Members => truss.members.len(),
        Book::Figures => truss.figures.len(),
        Book::Supports => truss.supports.len(),
        Book::Schedule => checked.map_or(0, |c| c.schedule().groups.len() + c.schedule().totals.len()),
        Book::Strings => checked.map_or(0, |c| c.strings().len()),
        Book::Pieces => checked.map_or(0, |c| super::pieces::row_count(c)),
    };
    let counts = [truss.joints.len(), truss.members.len(), truss.figures.len(), truss.supports.len()].map(Some);
    let counts = [counts[0], counts[1], counts[2], counts[3], None, None, None];
    let last_start = total.saturating_sub(1) / PAGE_ROWS * PAGE_ROWS;
    let start = (state.book_start / PAGE_ROWS * PAGE_ROWS).min(last_start);
    let page = start..(start + PAGE_ROWS).min(total);
    let maker = Maker { state, truss, checked: state.fresh().map(|checked| &**checked) };
    let (line, example) = maker.line();
    BookView {
        book: state.book,
        counts,
        rows: page.map(|index| maker.row(index)).collect(),
        start,
        total,
        line,
        example,
    }
}

struct Maker<'a> {
    state: &'a State,
    truss: &'a Truss,
    checked: Option<&'a Checked>,
}

impl Maker<'_> {
    fn line(&self) -> (Option<CellView>, &'static str) {
        let (row, example) = match self.state.book {
            Book::Joints => (Row::NewJoint, "L2  13'-4\"  0"),
            Book::Members => (Row::NewMember, "L0 U1 top chord"),
            Book::Supports => (Row::NewSupport, "L0 pin"),
            Book::Pieces => (Row::Stock, "web 3 1/2\"   ·   top chord 5 1/2\" top   ·   all 90 mm   ·   gap 1/8\""),
            Book::Figures | Book::Schedule | Book::Strings => return (None, ""),
        };
        let view = self.entered(row, Column::Line, String::new(), CellKind::Text, "add a line".into());
        (Some(view), example)
    }

    fn row(&self, index: usize) -> RowView {
        match self.state.book {
            Book::Joints => self.joint(JointId::new(index)),
            Book::Members => self.member(MemberId::new(index)),
            Book::Figures => self.figure(FigureId::new(index)),
            Book::Supports => self.support(SupportId::new(index)),
            Book::Schedule => self.scheduled(index),
            Book::Strings => self.string(index),
            Book::Pieces => match self.checked {
                Some(checked) => super::pieces::row(checked, index),
                None => RowView { things: Vec::new(), can_remove: false, class: "row", cells: Vec::new() },
            },
        }
    }

    /// A group of equal members, or, after these, the total of a role.
    fn scheduled(&self, index: usize) -> RowView {
        let empty = Schedule::default();
        let schedule = self.checked.map_or(&empty, Checked::schedule);
        let shown = |text: String, kind: CellKind| self.shown(text, kind);
        match (schedule.groups.get(index), schedule.totals.get(index.wrapping_sub(schedule.groups.len()))) {
            (Some(group), _) => RowView {
                things: group.members.iter().map(|&id| Thing::Member(id)).collect(),
                can_remove: false,
                class: "row",
                cells: vec![
                    shown(group.members.len().to_string(), CellKind::Words),
                    shown(hand_words(group), CellKind::Words),
                    shown(group.role.name().into(), CellKind::Words),
                    shown(group.length.clone(), CellKind::Number),
                    shown(group.bevel.clone(), CellKind::Number),
                    shown(group.degrees.clone(), CellKind::Number),
                    shown(group.quadrance.to_string(), CellKind::Number),
                    shown(member_marks(self.truss, &group.members), CellKind::Words),
                ],
            },
            (None, Some(total)) => RowView {
                things: Vec::new(),
                can_remove: false,
                class: "row total",
                cells: vec![
                    shown(total.count.to_string(), CellKind::Words),
                    shown(String::new(), CellKind::Words),
                    shown(format!("{} in all", total.role.name()), CellKind::Words),
                    shown(total.length.clone(), CellKind::Number),
                ],
            },
            _ => RowView { things: Vec::new(), can_remove: false, class: "row", cells: Vec::new() },
        }
    }

    fn string(&self, index: usize) -> RowView {
        let Some(string) = self.checked.and_then(|checked| checked.strings().get(index)) else {
            return RowView { things: Vec::new(), can_remove: false, class: "row", cells: Vec::new() };
        };
        let roundings = match string.moved.len() {
            0 => "each value rounds to itself".to_string(),
            1 => "1 value is printed a step off so that it adds up".to_string(),
            n => format!("{n} values are printed a step off so that it adds up"),
        };
        RowView {
            things: string.joints.iter().map(|&id| Thing::Joint(id)).collect(),
            can_remove: false,
            class: "row",
            cells: vec![
                self.shown(string.along.into(), CellKind::Words),
                self.shown(string.text.clone(), CellKind::Number),
                self.shown(roundings, CellKind::Words),
                self.shown(chain_words(self.truss, &string.joints), CellKind::Words),
            ],
        }
    }

    fn entered(&self, row: Row, column: Column, text: String, kind: CellKind, label: String) -> CellView {
        let cell = Cell::new(row, column);
        let refused = self.state.refused.as_ref().filter(|refused| refused.cell == cell);
        CellView {
            cell: Some(cell),
            text: refused.map_or(text, |refused| refused.text.clone()),
            label,
            kind,
            error: refused.map(|refused| pretty(&refused.error)).unwrap_or_default(),
        }
    }

    fn shown(&self, text: String, kind: CellKind) -> CellView {
        CellView { cell: None, text: pretty(&text), label: String::new(), kind, error: String::new() }
    }

    fn class(&self, thing: Thing, fault: bool) -> &'static str {
        match (self.state.is_selected(thing), fault) {
            (true, true) => "row selected fault",
            (true, false) => "row selected",
            (false, true) => "row fault",
            (false, false) => "row",
        }
    }

    fn joint(&self, id: JointId) -> RowView {
        let joint = self.truss.joint(id);
        let (row, mark) = (Row::Joint(id), &joint.mark);
        let spreads =
            self.checked.and_then(|c| c.report.answers.cut.joints.get(id.index())).map(|row| spread_words(row));
        RowView {
            things: vec![Thing::Joint(id)],
            can_remove: true,
            class: self.class(Thing::Joint(id), false),
            cells: vec![
                self.entered(row, Column::Mark, mark.clone(), CellKind::Text, format!("mark of joint {mark}")),
                self.entered(row, Column::X, joint.x.text.clone(), CellKind::Value, format!("{mark}, distance right")),
                self.entered(row, Column::Y, joint.y.text.clone(), CellKind::Value, format!("{mark}, distance up")),
                self.entered(
                    row,
                    Column::Loose,
                    String::new(),
                    CellKind::Check(joint.loose),
                    format!("{mark} is loose"),
                ),
                self.shown(spreads.unwrap_or_default(), CellKind::Words),
            ],
        }
    }

    fn member(&self, id: MemberId) -> RowView {
        let member = self.truss.member(id);
        let (row, mark) = (Row::Member(id), &member.mark);
        let cut = self.checked.and_then(|c| c.report.answers.cut.members.get(id.index()));
        let number =
            |text: fn(&MemberRow) -> String| self.shown(cut.map(|row| text(row)).unwrap_or_default(), CellKind::Number);
        let end = |id| self.truss.mark(id).to_string();
        RowView {
            things: vec![Thing::Member(id)],
            can_remove: true,
            class: self.class(Thing::Member(id), false),
            cells: vec![
                self.entered(row, Column::Mark, mark.clone(), CellKind::Text, format!("mark of member {mark}")),
                self.entered(row, Column::From, end(member.from), CellKind::Text, format!("{mark} from")),
                self.entered(row, Column::To, end(member.to), CellKind::Text, format!("{mark} to")),
                self.entered(
                    row,
                    Column::Role,
                    member.role.name().into(),
                    CellKind::Choice(&ROLES),
                    format!("role of {mark}"),
                ),
                number(|row| if row.exact { row.length.clone() } else { format!("~ {}", row.length) }),
                number(|row| row.bevel.clone()),
                number(|row| row.degrees.clone()),
                number(|row| row.quadrance.to_string()),
            ],
        }
    }

    fn figure(&self, id: FigureId) -> RowView {
        let figure = self.truss.figure(id);
        let (row, mark) = (Row::Figure(id), &figure.mark);
        let close = self.checked.map(|checked| &checked.report.answers.close);
        let reading = close.and_then(|close| close.readings.get(id.index()));
        let suspect = close.is_some_and(|close| close.blamed().iter().any(|suspect| suspect.figure == id));
        let value = match figure.kind.value_text() {
            Some(text) => self.entered(row, Column::Value, text, CellKind::Value, format!("value of {mark}")),
            None => self.shown("–".into(), CellKind::Number),
        };
        let step = figure.step.as_ref().map(|step| step.text.clone()).unwrap_or_default();
        RowView {
            things: vec![Thing::Figure(id)],
            can_remove: true,
            class: self.class(Thing::Figure(id), suspect || reading.is_some_and(|reading| !reading.holds)),
            cells: vec![
                self.entered(row, Column::Mark, mark.clone(), CellKind::Text, format!("mark of figure {mark}")),
                self.shown(figure.kind.name().into(), CellKind::Words),
                self.shown(marks(self.truss, &figure.kind.joints()), CellKind::Words),
                value,
                self.entered(row, Column::Step, step, CellKind::Value, format!("step of {mark}")),
                self.shown(reading.map(|r| r.gives.clone()).unwrap_or_default(), CellKind::Number),
                self.shown(reading.map(|r| r.misfit.clone()).unwrap_or_default(), CellKind::Number),
            ],
        }
    }

    fn support(&self, id: SupportId) -> RowView {
        let support = &self.truss.supports[id.index()];
        let row = Row::Support(id);
        let mark = self.truss.mark(support.joint).to_string();
        let normals = match &support.kind {
            SupportKind::Pin => [self.shown("–".into(), CellKind::Number), self.shown("–".into(), CellKind::Number)],
            SupportKind::Roller { normal: [x, y] } => [
                self.entered(row, Column::NormalX, x.text.clone(), CellKind::Value, format!("roller at {mark}, right")),
                self.entered(row, Column::NormalY, y.text.clone(), CellKind::Value, format!("roller at {mark}, up")),
            ],
        };
        let kind = if support.kind == SupportKind::Pin { "pin" } else { "roller" };
        let kind = self.entered(row, Column::Kind, kind.into(), CellKind::Choice(&KINDS), format!("support at {mark}"));
        RowView {
            things: vec![Thing::Support(id)],
            can_remove: true,
            class: self.class(Thing::Support(id), false),
            cells: [self.shown(mark, CellKind::Words), kind].into_iter().chain(normals).collect(),
        }
    }
}

/// `3 and 3`, where a group has both hands.
fn hand_words(group: &Equal) -> String {
    match group.hands {
        [right, left] if right > 0 && left > 0 => format!("{right} and {left}"),
        _ => String::new(),
    }
}

/// Members named before it is said how many more there are.
const MOST_MARKS: usize = 40;

fn member_marks(truss: &Truss, members: &[MemberId]) -> String {
    let named: Vec<&str> = members.iter().take(MOST_MARKS).map(|id| truss.member(*id).mark.as_str()).collect();
    match members.len().saturating_sub(MOST_MARKS) {
        0 => named.join(" "),
        more => format!("{} and {more} more", named.join(" ")),
    }
}

fn chain_words(truss: &Truss, joints: &[JointId]) -> String {
    match joints {
        [first, .., last] if joints.len() > 12 => format!("{} … {}", truss.mark(*first), truss.mark(*last)),
        _ => joints.iter().map(|id| truss.mark(*id)).collect::<Vec<_>>().join(" "),
    }
}

fn spread_words(row: &JointRow) -> String {
    row.spreads.iter().map(|s| s.spread.to_string()).collect::<Vec<_>>().join("  ")
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::truss::Role;

    #[test]
    fn the_choices_are_the_names_of_the_model() {
        assert_eq!(ROLES.map(Some), Role::ALL.map(|role| Some(role.name())));
    }
}
