//! Entries in the tables: where they are, what they mean while they are typed, and the edit they make.

use super::entry::{read_figures, read_joint_line, read_member_line, read_support_line};
use crate::checks::Adjustable;
use crate::checks::pieces::Shop;
use crate::exact::Rational;
use crate::measure::{Sheet, Unit, Written, parse_length, parse_pitch, parse_plain};
use crate::truss::{
    Edit, Figure, FigureId, FigureKind, FigureValue, JointId, MemberId, Role, Selection, Support, SupportId,
    SupportKind, Truss,
};

/// One box in a table, or in the head of the sheet.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
pub struct Cell {
    /// The row.
    pub row: Row,
    /// The column.
    pub column: Column,
}

/// A row of a table.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
pub enum Row {
    /// The head of the sheet.
    Sheet,
    /// The limits that the checks go by.
    Limits,
    /// What pieces are cut from.
    Stock,
    /// A joint.
    Joint(JointId),
    /// A member.
    Member(MemberId),
    /// A figure.
    Figure(FigureId),
    /// A support.
    Support(SupportId),
    /// The line in which joints are added.
    NewJoint,
    /// The line in which members are added.
    NewMember,
    /// The line in which supports are added.
    NewSupport,
}

/// A column of a table.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
pub enum Column {
    /// The mark.
    Mark,
    /// The coordinate to the right.
    X,
    /// The coordinate upwards.
    Y,
    /// Whether the joint is loose.
    Loose,
    /// A member's first end.
    From,
    /// A member's second end.
    To,
    /// A member's role.
    Role,
    /// A figure's printed value.
    Value,
    /// A printing step.
    Step,
    /// A support's kind.
    Kind,
    /// A roller's normal, to the right.
    NormalX,
    /// A roller's normal, upwards.
    NormalY,
    /// The title of the sheet.
    Title,
    /// The unit of the sheet.
    Unit,
    /// A limit.
    Limit(Adjustable),
    /// A whole line that adds something.
    Line,
}

impl Cell {
    /// The box at this row and column.
    pub fn new(row: Row, column: Column) -> Cell {
        Cell { row, column }
    }
}

/// The edit that an entry makes, and what to call it; several lines make several edits in one.
///
/// # Errors
///
/// Why the entry is refused and what was expected, in a drafter's words.
pub(super) fn edit_of(truss: &Truss, cell: Cell, text: &str) -> Result<(Edit, String), String> {
    let text = text.trim();
    match cell.row {
        Row::Sheet => sheet_edit(truss, cell.column, text),
        Row::Limits | Row::Stock => Err("this is no part of the truss".into()),
        Row::Joint(id) => joint_edit(truss, id, cell.column, text),
        Row::Member(id) => member_edit(truss, id, cell.column, text),
        Row::Figure(id) => figure_edit(truss, id, cell.column, text),
        Row::Support(id) => support_edit(truss, id, cell.column, text),
        Row::NewJoint => lines_edit(truss, text, "joint", read_joint_line),
        Row::NewMember => lines_edit(truss, text, "member", read_member_line),
        Row::NewSupport => lines_edit(truss, text, "support", read_support_line),
    }
}

/// What an entry is understood as while it is typed: the value as it prints, or what is wrong with it so far.
pub fn understood(truss: &Truss, cell: Cell, text: &str) -> Option<Result<String, String>> {
    let text = text.trim();
    if text.is_empty() {
        return None;
    }
    let sheet = Sheet::of(truss.unit, &truss.step.value);
    let length = |text: &str| parse_length(text, truss.unit).map(|value| sheet.exact_words(&value));
    let plain = |text: &str| parse_plain(text).map(|value| value.to_string());
    let result = match (cell.row, cell.column) {
        (_, Column::X | Column::Y) | (Row::Sheet, Column::Step) => length(text),
        (_, Column::NormalX | Column::NormalY) => plain(text),
        (Row::Stock, _) => {
            let read = super::stock::read_stock(&Shop::usual(truss.unit), truss, text);
            return read.err().map(Err);
        }
        (Row::Limits, Column::Limit(limit)) => {
            let entered = limit.entered(&Default::default(), truss.unit, text);
            return Some(entered.map(|limits| limit.text(&limits, truss.unit)));
        }
        (Row::Figure(id), Column::Value) => match &truss.figures.get(id.index())?.kind {
            FigureKind::Pitch { .. } => parse_pitch(text).map(|(rise, run)| format!("{} : {}", rise.value, run.value)),
            FigureKind::Angle { .. } => parse_plain(text).map(|value| format!("{value} degrees")),
            FigureKind::Spread { .. } => plain(text),
            _ => length(text),
        },
        (Row::Figure(id), Column::Step) => match takes_length_step(&truss.figures.get(id.index())?.kind) {
            true => length(text),
            false => plain(text),
        },
        _ => return edit_of(truss, cell, text).err().map(Err),
    };
    Some(result.map_err(|error| error.to_string()))
}

/// True when a figure's step is a length.
fn takes_length_step(kind: &FigureKind) -> bool {
    !matches!(kind, FigureKind::Pitch { .. } | FigureKind::Angle { .. } | FigureKind::Spread { .. })
}

fn written(text: &str, value: Result<Rational, crate::measure::ValueError>) -> Result<Written, String> {
    value.map(|value| Written { text: text.to_string(), value }).map_err(|error| error.to_string())
}

pub(super) fn length(truss: &Truss, text: &str) -> Result<Written, String> {
    written(text, parse_length(text, truss.unit))
}

pub(super) fn plain(text: &str) -> Result<Written, String> {
    written(text, parse_plain(text))
}

fn sheet_edit(truss: &Truss, column: Column, text: &str) -> Result<(Edit, String), String> {
    match column {
        Column::Step => Ok((Edit::Step(length(truss, text)?), "changed the step".into())),
        Column::Unit => {
            let unit = Unit::from_symbol(text)
                .ok_or_else(|| format!("`{text}` is not a unit; expected in, ft, mm, cm or m"))?;
            Ok((Edit::Unit(unit), format!("changed the unit to {}", unit.symbol())))
        }
        _ => Ok((Edit::Title(text.chars().filter(|c| !c.is_control()).collect()), "changed the title".into())),
    }
}

fn joint_edit(truss: &Truss, id: JointId, column: Column, text: &str) -> Result<(Edit, String), String> {
    let mut joint = truss.joints.get(id.index()).ok_or("that joint is not there any more")?.clone();
    let label = match column {
        Column::X => {
            joint.x = length(truss, text)?;
            format!("moved {}", joint.mark)
        }
        Column::Y => {
            joint.y = length(truss, text)?;
            format!("moved {}", joint.mark)
        }
        Column::Loose => {
            joint.loose = !joint.loose;
            format!("made {} {}", joint.mark, if joint.loose { "loose" } else { "set" })
        }
        _ => {
            let old = std::mem::replace(&mut joint.mark, text.to_string());
            format!("renamed {old}")
        }
    };
    Ok((Edit::SetJoint(id, joint), label))
}

pub(super) fn joint_named(truss: &Truss, mark: &str) -> Result<JointId, String> {
    let mark = mark.trim();
    truss.joint_marked(mark).ok_or_else(|| format!("there is no joint `{mark}`"))
}

fn member_edit(truss: &Truss, id: MemberId, column: Column, text: &str) -> Result<(Edit, String), String> {
    let mut member = truss.members.get(id.index()).ok_or("that member is not there any more")?.clone();
    let old = member.mark.clone();
    match column {
        Column::From => member.from = joint_named(truss, text)?,
        Column::To => member.to = joint_named(truss, text)?,
        Column::Role => {
            member.role = Role::from_name(text).ok_or_else(|| format!("`{text}` is not a role"))?;
        }
        _ => member.mark = text.to_string(),
    }
    Ok((Edit::SetMember(id, member), format!("changed {old}")))
}

fn figure_edit(truss: &Truss, id: FigureId, column: Column, text: &str) -> Result<(Edit, String), String> {
    let figure = truss.figures.get(id.index()).ok_or("that figure is not there any more")?;
    match column {
        Column::Value => {
            Ok((Edit::FigureReads(id, figure_value(truss, &figure.kind, text)?), format!("changed {}", figure.mark)))
        }
        Column::Step => {
            let step = match text {
                "" => None,
                _ if takes_length_step(&figure.kind) => Some(length(truss, text)?),
                _ => Some(plain(text)?),
            };
            Ok((Edit::SetFigure(id, Figure { step, ..figure.clone() }), format!("changed the step of {}", figure.mark)))
        }
        _ => Ok((
            Edit::SetFigure(id, Figure { mark: text.to_string(), ..figure.clone() }),
            format!("renamed {}", figure.mark),
        )),
    }
}

/// A new value for a figure of this kind, read from text.
pub(super) fn figure_value(truss: &Truss, kind: &FigureKind, text: &str) -> Result<FigureValue, String> {
    match kind {
        FigureKind::Pitch { .. } => {
            let (rise, run) = parse_pitch(text).map_err(|error| error.to_string())?;
            Ok(FigureValue::Pitch { rise, run })
        }
        FigureKind::Angle { .. } => plain(text.trim_end_matches('°').trim_end()).map(FigureValue::One),
        FigureKind::Spread { .. } => plain(text).map(FigureValue::One),
        kind if kind.is_relation() => Err("this figure has no value".into()),
        _ => length(truss, text).map(FigureValue::One),
    }
}

fn support_edit(truss: &Truss, id: SupportId, column: Column, text: &str) -> Result<(Edit, String), String> {
    let mut support = truss.supports.get(id.index()).ok_or("that support is not there any more")?.clone();
    match (column, &mut support.kind) {
        (Column::NormalX, SupportKind::Roller { normal }) => normal[0] = plain(text)?,
        (Column::NormalY, SupportKind::Roller { normal }) => normal[1] = plain(text)?,
        (Column::NormalX | Column::NormalY, SupportKind::Pin) => return Err("a pin holds in every direction".into()),
        _ => support.kind = support_kind(text)?,
    }
    let label = format!("changed the support at {}", truss.mark(support.joint));
    Ok((Edit::SetSupport(support), label))
}

/// A support kind by its name; a roller holds upwards unless it is told otherwise.
pub(super) fn support_kind(name: &str) -> Result<SupportKind, String> {
    match name {
        "pin" => Ok(SupportKind::Pin),
        "roller" => Ok(SupportKind::Roller { normal: [0, 1].map(|n| Written::plain(crate::exact::whole(n))) }),
        _ => Err(format!("`{name}` is not a support; expected pin or roller")),
    }
}

/// Reads lines that each add something; each line is read with what the lines before it added.
fn lines_edit(
    truss: &Truss,
    text: &str,
    what: &str,
    read: fn(&Truss, &str) -> Result<Edit, String>,
) -> Result<(Edit, String), String> {
    let lines: Vec<&str> = text.lines().map(str::trim).filter(|line| !line.is_empty()).collect();
    if lines.is_empty() {
        return Err(format!("nothing was typed; expected a {what}"));
    }
    let mut so_far = truss.clone();
    let mut edits = Vec::new();
    for (index, line) in lines.iter().enumerate() {
        let place = |error: String| if lines.len() > 1 { format!("line {}: {error}", index + 1) } else { error };
        let edit = read(&so_far, line).map_err(place)?;
        so_far = so_far.edited(&edit).map_err(|error| place(error.to_string()))?;
        edits.push(edit);
    }
    let label = if edits.len() == 1 { format!("added a {what}") } else { format!("added {} {what}s", edits.len()) };
    Ok((Edit::All(edits), label))
}

/// The edit that the figure entry makes, with the joints that are selected standing in where none are named.
pub(super) fn entry_edit(truss: &Truss, selection: &Selection, text: &str) -> Result<(Edit, String), String> {
    let lines: Vec<&str> = text.lines().map(str::trim).filter(|line| !line.is_empty()).collect();
    let mut so_far = truss.clone();
    let mut edits = Vec::new();
    for (index, line) in lines.iter().enumerate() {
        let place = |error: String| if lines.len() > 1 { format!("line {}: {error}", index + 1) } else { error };
        for figure in read_figures(&so_far, selection, line).map_err(place)? {
            let edit = Edit::AddFigure(Figure { mark: so_far.free_figure_mark(), ..figure });
            so_far = so_far.edited(&edit).map_err(|error| place(error.to_string()))?;
            edits.push(edit);
        }
    }
    match edits.len() {
        0 => Err("nothing was typed; expected joints and a value, such as L0 U1 8'-3 3/8\"".into()),
        1 => Ok((Edit::All(edits), "added a figure".into())),
        n => Ok((Edit::All(edits), format!("added {n} figures"))),
    }
}

/// A new support at a joint.
pub(super) fn support_at(joint: JointId, name: &str) -> Result<Support, String> {
    Ok(Support { joint, kind: support_kind(name)? })
}
