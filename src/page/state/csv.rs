//! Tables as comma-separated values (RFC 4180): out with the exact fractions beside what is printed, in with errors by row.

use super::entry::read_support_line;
use super::model::{Book, State};
use crate::exact::Rational;
use crate::exchange::NOTICE;
use crate::measure::parse_pitch;
use crate::truss::{Edit, Figure, FigureId, FigureKind, Joint, JointId, Member, MemberId, Role, SupportKind, Truss};
use csv_core::{ReadRecordResult, Reader};

/// A table, as it is saved: a header, a record a row, and the notice.
pub fn csv_text(state: &State, book: Book) -> String {
    let mut records: Vec<Vec<String>> = Vec::new();
    let header = |titles: &[&str]| titles.iter().map(|title| (*title).to_string()).collect::<Vec<String>>();
    let truss = &*state.truss;
    match book {
        Book::Joints => {
            records.push(header(&["joint", "right", "up", "loose", "exact right", "exact up"]));
            records.extend(truss.joints.iter().map(joint_record));
        }
        Book::Members => {
            let titles =
                ["member", "from", "to", "role", "length", "bevel", "degrees", "exact run", "exact rise", "quadrance"];
            records.push(header(&titles));
            records.extend((0..truss.members.len()).map(|index| member_record(state, MemberId::new(index))));
        }
        Book::Figures => {
            let titles = ["figure", "kind", "joints", "printed", "step", "exact value", "places give", "misfit"];
            records.push(header(&titles));
            records.extend((0..truss.figures.len()).map(|index| figure_record(state, FigureId::new(index))));
        }
        Book::Supports => {
            records.push(header(&["joint", "kind", "holds right", "holds up"]));
            records.extend(truss.supports.iter().map(|support| {
                let [x, y] = match &support.kind {
                    SupportKind::Pin => [String::new(), String::new()],
                    SupportKind::Roller { normal } => normal.each_ref().map(|part| part.text.clone()),
                };
                let kind = if support.kind == SupportKind::Pin { "pin" } else { "roller" };
                vec![truss.mark(support.joint).into(), kind.into(), x, y]
            }));
        }
        Book::Schedule => records.extend(schedule_records(state)),
        Book::Pieces => records.extend(super::view::piece_records(state)),
        Book::Strings => {
            records.push(header(&["along", "overall", "values", "joints"]));
            let strings = state.fresh().map(|checked| checked.strings()).unwrap_or_default();
            records.extend(strings.iter().map(|string| {
                let marks: Vec<&str> = string.joints.iter().map(|id| truss.mark(*id)).collect();
                vec![string.along.into(), string.overall.clone(), string.values.join("; "), marks.join("; ")]
            }));
        }
    }
    records.push(vec![NOTICE.into()]);
    records.iter().map(|record| line(record)).collect()
}

fn joint_record(joint: &Joint) -> Vec<String> {
    let loose = if joint.loose { "loose" } else { "" };
    let (x, y) = (&joint.x, &joint.y);
    vec![joint.mark.clone(), x.text.clone(), y.text.clone(), loose.into(), x.value.to_string(), y.value.to_string()]
}

fn member_record(state: &State, id: MemberId) -> Vec<String> {
    let (truss, member) = (&state.truss, state.truss.member(id));
    let mut record = vec![
        member.mark.clone(),
        truss.mark(member.from).into(),
        truss.mark(member.to).into(),
        member.role.name().into(),
    ];
    if let Some(row) = state.fresh().and_then(|checked| checked.report.answers.cut.members.get(id.index())) {
        record.extend([row.length.clone(), row.bevel.clone(), row.degrees.clone()]);
        record.extend([&row.run, &row.rise, &row.quadrance].map(Rational::to_string));
    }
    record
}

fn figure_record(state: &State, id: FigureId) -> Vec<String> {
    let (truss, figure) = (&state.truss, state.truss.figure(id));
    let marks: Vec<&str> = figure.kind.joints().iter().map(|id| truss.mark(*id)).collect();
    let reading = state.fresh().and_then(|checked| checked.report.answers.close.readings.get(id.index()));
    vec![
        figure.mark.clone(),
        figure.kind.name().into(),
        marks.join("; "),
        figure.kind.value_text().unwrap_or_default(),
        figure.step.as_ref().map(|step| step.text.clone()).unwrap_or_default(),
        exact_value(&figure.kind),
        reading.map(|reading| reading.gives.clone()).unwrap_or_default(),
        reading.map(|reading| reading.misfit.clone()).unwrap_or_default(),
    ]
}

fn exact_value(kind: &FigureKind) -> String {
    match kind {
        FigureKind::Length { value, .. }
        | FigureKind::Run { value, .. }
        | FigureKind::Rise { value, .. }
        | FigureKind::Angle { value, .. }
        | FigureKind::Spread { value, .. } => value.value.to_string(),
        FigureKind::Pitch { rise, run, .. } => format!("{}:{}", rise.value, run.value),
        _ => String::new(),
    }
}

fn schedule_records(state: &State) -> Vec<Vec<String>> {
    let titles = ["off", "role", "length", "bevel", "degrees", "quadrance", "one hand", "other hand", "members"];
    let mut records = vec![titles.map(String::from).to_vec()];
    let Some(checked) = state.fresh() else { return records };
    let schedule = checked.schedule();
    for group in &schedule.groups {
        let marks: Vec<&str> = group.members.iter().map(|id| state.truss.member(*id).mark.as_str()).collect();
        let [right, left] = group.hands.map(|count| count.to_string());
        records.push(vec![
            group.members.len().to_string(),
            group.role.name().into(),
            group.length.clone(),
            group.bevel.clone(),
            group.degrees.clone(),
            group.quadrance.to_string(),
            right,
            left,
            marks.join("; "),
        ]);
    }
    for total in &schedule.totals {
        records.push(vec![total.count.to_string(), format!("{} in all", total.role.name()), total.length.clone()]);
    }
    records
}

/// A record as a line. What a spreadsheet would take for a formula is kept from being one by an apostrophe.
fn line(record: &[String]) -> String {
    let field = |text: &String| {
        let text = if is_formula(text) { format!("'{text}") } else { text.clone() };
        let has_to_be_quoted =
            text.contains([',', '"', '\n', '\r', ';']) || text.starts_with(' ') || text.ends_with(' ');
        if has_to_be_quoted { format!("\"{}\"", text.replace('"', "\"\"")) } else { text }
    };
    let mut line = record.iter().map(field).collect::<Vec<String>>().join(",");
    line.push_str("\r\n");
    line
}

fn is_formula(text: &str) -> bool {
    let mut letters = text.chars();
    match letters.next() {
        Some('=' | '@' | '\t' | '\r') => true,
        // A value may be negative.
        Some('+' | '-') => !letters.next().is_some_and(|c| c.is_ascii_digit() || matches!(c, '.' | '(' | ' ')),
        _ => false,
    }
}

/// The most records of one file.
const MOST_RECORDS: usize = 200_000;

/// The records of a text, each with its fields, trimmed.
///
/// # Errors
///
/// When there are too many.
fn records(text: &str) -> Result<Vec<Vec<String>>, String> {
    let mut reader = Reader::new();
    let mut input = text.trim_start_matches('\u{feff}').as_bytes();
    let (mut output, mut ends) = (vec![0; 4096], vec![0; 64]);
    let (mut written, mut ended) = (0, 0);
    let mut records = Vec::new();
    loop {
        let (result, read, wrote, fields) = reader.read_record(input, &mut output[written..], &mut ends[ended..]);
        input = &input[read..];
        written += wrote;
        ended += fields;
        match result {
            ReadRecordResult::InputEmpty => {}
            ReadRecordResult::OutputFull => output.resize(output.len() * 2, 0),
            ReadRecordResult::OutputEndsFull => ends.resize(ends.len() * 2, 0),
            ReadRecordResult::Record => {
                let starts = std::iter::once(0).chain(ends[..ended].iter().copied());
                let field =
                    |(from, to): (usize, &usize)| String::from_utf8_lossy(&output[from..*to]).trim().to_string();
                records.push(starts.zip(&ends[..ended]).map(field).collect());
                (written, ended) = (0, 0);
                if records.len() > MOST_RECORDS {
                    return Err(format!("there are more than {MOST_RECORDS} rows"));
                }
            }
            ReadRecordResult::End => return Ok(records),
        }
    }
}

/// The columns of a table by their titles.
struct Table {
    titles: Vec<String>,
}

impl Table {
    fn place(&self, title: &str) -> Option<usize> {
        self.titles.iter().position(|other| other == title)
    }

    fn has(&self, titles: &[&str]) -> bool {
        titles.iter().all(|title| self.place(title).is_some())
    }

    /// The text under a title; an apostrophe that kept it from being a formula is taken off.
    fn text<'r>(&self, record: &'r [String], title: &str) -> &'r str {
        let text = self.place(title).and_then(|place| record.get(place)).map_or("", String::as_str);
        match text.strip_prefix('\'') {
            Some(rest) if is_formula(rest) => rest,
            _ => text,
        }
    }
}

/// The edit that takes a table in, and what to call it. Rows whose mark is there already change what has it; others add.
///
/// # Errors
///
/// What was expected, with the row, counted as a spreadsheet counts.
pub(super) fn csv_edit(truss: &Truss, text: &str) -> Result<(Edit, String), String> {
    let records = records(text)?;
    let Some((header, rows)) = records.split_first() else { return Err("it is empty".into()) };
    let table = Table { titles: header.iter().map(|title| title.to_lowercase()).collect() };
    type ReadRow = fn(&Truss, &Table, &[String]) -> Result<Edit, String>;
    let (what, read): (&str, ReadRow) = match () {
        () if table.has(&["joint", "right", "up"]) => ("joint", joint_row),
        () if table.has(&["member", "from", "to"]) => ("member", member_row),
        () if table.has(&["kind", "joints", "printed"]) => ("figure", figure_row),
        () if table.has(&["joint", "kind"]) => ("support", support_row),
        () => {
            return Err("row 1: expected titles of columns: joint, right, up; or member, from, to; or kind, joints, \
                        printed; or joint, kind"
                .into());
        }
    };
    let mut so_far = truss.clone();
    let mut edits = Vec::new();
    for (index, row) in rows.iter().enumerate() {
        let is_notice = row.first().is_some_and(|text| text.as_str() == NOTICE);
        if is_notice || row.iter().all(String::is_empty) {
            continue;
        }
        let placed = |error: String| format!("row {}: {error}", index + 2);
        let edit = read(&so_far, &table, row).map_err(placed)?;
        so_far = so_far.edited(&edit).map_err(|error| placed(error.to_string()))?;
        edits.push(edit);
    }
    match edits.len() {
        0 => Err(format!("there is no row with a {what} in it")),
        1 => Ok((Edit::All(edits), format!("took in a {what}"))),
        n => Ok((Edit::All(edits), format!("took in {n} {what}s"))),
    }
}

fn joint_row(truss: &Truss, table: &Table, row: &[String]) -> Result<Edit, String> {
    let value = |title: &str| super::cells::length(truss, table.text(row, title)).map_err(|e| format!("{title}: {e}"));
    let loose = match table.text(row, "loose") {
        "" | "no" | "set" | "false" => false,
        "loose" | "yes" | "true" => true,
        other => return Err(format!("loose: `{other}` is neither `loose` nor empty")),
    };
    let joint = Joint { mark: table.text(row, "joint").into(), x: value("right")?, y: value("up")?, loose };
    Ok(match truss.joint_marked(&joint.mark) {
        Some(id) => Edit::SetJoint(id, joint),
        None => Edit::AddJoint(joint),
    })
}

fn named(truss: &Truss, table: &Table, row: &[String], title: &str) -> Result<JointId, String> {
    super::cells::joint_named(truss, table.text(row, title)).map_err(|error| format!("{title}: {error}"))
}

fn member_row(truss: &Truss, table: &Table, row: &[String]) -> Result<Edit, String> {
    let (from, to) = (named(truss, table, row, "from")?, named(truss, table, row, "to")?);
    let role = match table.text(row, "role") {
        "" => super::entry::likely_role(truss, from, to),
        name => Role::from_name(name).ok_or_else(|| format!("role: `{name}` is not a role"))?,
    };
    let mark = match table.text(row, "member") {
        "" => truss.free_member_mark(role),
        mark => mark.into(),
    };
    let member = Member { mark, from, to, role };
    Ok(match truss.members.iter().position(|other| other.mark == member.mark) {
        Some(index) => Edit::SetMember(MemberId::new(index), member),
        None => Edit::AddMember(member),
    })
}

fn figure_row(truss: &Truss, table: &Table, row: &[String]) -> Result<Edit, String> {
    let marks = table.text(row, "joints").split([';', ',']).map(str::trim).filter(|mark| !mark.is_empty());
    let joints: Result<Vec<JointId>, String> = marks.map(|mark| super::cells::joint_named(truss, mark)).collect();
    let joints = joints.map_err(|error| format!("joints: {error}"))?;
    let kind = figure_kind(truss, table.text(row, "kind"), &joints, table.text(row, "printed"))?;
    let step = match (table.text(row, "step"), &kind) {
        ("", _) => None,
        (text, FigureKind::Pitch { .. } | FigureKind::Angle { .. } | FigureKind::Spread { .. }) => {
            Some(super::cells::plain(text).map_err(|error| format!("step: {error}"))?)
        }
        (text, _) => Some(super::cells::length(truss, text).map_err(|error| format!("step: {error}"))?),
    };
    let mark = match table.text(row, "figure") {
        "" => truss.free_figure_mark(),
        mark => mark.into(),
    };
    let figure = Figure { mark, kind, step };
    Ok(match truss.figures.iter().position(|other| other.mark == figure.mark) {
        Some(index) => Edit::SetFigure(FigureId::new(index), figure),
        None => Edit::AddFigure(figure),
    })
}

/// A figure of a kind, with its joints in the order in which they are written out.
fn figure_kind(truss: &Truss, kind: &str, joints: &[JointId], printed: &str) -> Result<FigureKind, String> {
    let value = || super::cells::length(truss, printed).map_err(|error| format!("printed: {error}"));
    let number = || super::cells::plain(printed).map_err(|error| format!("printed: {error}"));
    let many = joints.to_vec();
    Ok(match (kind, joints) {
        ("length", &[from, to]) => FigureKind::Length { from, to, value: value()? },
        ("run", &[from, to]) => FigureKind::Run { from, to, value: value()? },
        ("rise", &[from, to]) => FigureKind::Rise { from, to, value: value()? },
        ("pitch", &[from, to]) => {
            let (rise, run) = parse_pitch(printed).map_err(|error| format!("printed: {error}"))?;
            FigureKind::Pitch { from, to, rise, run }
        }
        ("angle", &[at, from, to]) => FigureKind::Angle { at, from, to, value: number()? },
        ("spread", &[at, from, to]) => FigureKind::Spread { at, from, to, value: number()? },
        ("square", &[at, from, to]) => FigureKind::Square { at, from, to },
        ("parallel", &[a, b, c, d]) => FigureKind::Parallel { first: [a, b], second: [c, d] },
        ("equal", &[a, b, c, d]) => FigureKind::Equal { first: [a, b], second: [c, d] },
        ("in line", [_, _, _, ..]) => FigureKind::InLine { joints: many },
        ("level", [_, _, ..]) => FigureKind::Level { joints: many },
        ("plumb", [_, _, ..]) => FigureKind::Plumb { joints: many },
        ("length" | "run" | "rise" | "pitch", _) => return Err(wanted(kind, "two", joints)),
        ("angle" | "spread" | "square", _) => return Err(wanted(kind, "three (the corner first)", joints)),
        ("parallel" | "equal", _) => return Err(wanted(kind, "four", joints)),
        ("in line", _) => return Err(wanted(kind, "three or more", joints)),
        ("level" | "plumb", _) => return Err(wanted(kind, "two or more", joints)),
        _ => return Err(format!("kind: `{kind}` is no kind of figure; expected length, run, rise, pitch, angle ...")),
    })
}

fn wanted(kind: &str, count: &str, joints: &[JointId]) -> String {
    format!("joints: {kind} takes {count} joints with semicolons between them; there are {}", joints.len())
}

fn support_row(truss: &Truss, table: &Table, row: &[String]) -> Result<Edit, String> {
    let text = |title: &str| table.text(row, title);
    read_support_line(
        truss,
        &format!("{};{};{};{}", text("joint"), text("kind"), text("holds right"), text("holds up")),
    )
}
