//! A truss in the fragment of an address: versioned, compact, bounded, checked against damage.
//!
//! ```text
//! link    = "1" base64url( packed, check )      version; the check is the first 3 bytes of the SHA-256 of packed
//! packed  = mode, content                       0: the content as it is, 1: deflated
//! content = title, unit, step, joints, members, supports, figures     column by column
//! ```
//!
//! Columns of like things pack well: marks are runs that count (`L0` to `L8`), coordinates are differences on a common
//! lattice, typed text is stored only where it differs from a usual way of writing the value.

use super::link_bytes::{Damaged, Reader, Writer};
use crate::exact::{Rational, parse_fraction, whole};
use crate::measure::{Sheet, Unit, Written, parse_degrees, parse_length, parse_plain, within_digits};
use crate::truss::{Figure, FigureKind, Joint, JointId, Limit, Member, Role, Support, SupportKind, Truss};
use base64::{Engine, engine::general_purpose::URL_SAFE_NO_PAD};
use miniz_oxide::deflate::compress_to_vec;
use miniz_oxide::inflate::TINFLStatus;
use miniz_oxide::inflate::core::{DecompressorOxide, decompress, inflate_flags};
use num_bigint::BigInt;
use num_integer::Integer;
use num_traits::{One, ToPrimitive};
use sha2::{Digest, Sha256};
use thiserror::Error;

/// The longest link that is made or taken.
pub const MAX_LINK_CHARACTERS: usize = 64 * 1024;
/// The most bytes that a link may unpack to.
const MAX_BYTES: usize = 1024 * 1024;
/// The version that is written; older ones are read for ever.
const VERSION: char = '1';
/// Bytes of the checksum.
const CHECK: usize = 3;
/// Units and roles in the order of their codes, which never changes.
const UNITS: [Unit; 5] = [Unit::In, Unit::Ft, Unit::Mm, Unit::Cm, Unit::M];
const ROLES: [Role; 5] = [Role::TopChord, Role::BottomChord, Role::Web, Role::Post, Role::Other];

/// Why a link could not be made or read.
#[derive(Clone, Debug, PartialEq, Eq, Error)]
pub enum LinkError {
    /// It would be, or is, longer than the limit.
    #[error("the link has {0} characters; the limit is {MAX_LINK_CHARACTERS}.")]
    TooLong(usize),
    /// It was made by a version that is not known here.
    #[error("its version {0:?} is not known to this page; expected {VERSION}.")]
    Version(char),
    /// A part of it was lost or changed on the way.
    #[error("it is damaged: a part of it was lost or changed on the way.")]
    Damaged,
    /// It holds a truss that is unfit to be checked.
    #[error("it holds no proper truss: {0}.")]
    Unfit(String),
}

impl From<Damaged> for LinkError {
    fn from(_: Damaged) -> LinkError {
        LinkError::Damaged
    }
}

/// The link for a truss: what goes behind the `#` of the page's address.
///
/// # Errors
///
/// When it would be longer than [`MAX_LINK_CHARACTERS`].
pub fn to_link(truss: &Truss) -> Result<String, LinkError> {
    let mut writer = Writer::default();
    write_content(&mut writer, truss);
    let content = writer.bytes;
    let deflated = compress_to_vec(&content, 10);
    let (mode, bytes) = if deflated.len() < content.len() { (1, deflated) } else { (0, content) };
    let mut packed: Vec<u8> = std::iter::once(mode).chain(bytes).collect();
    let check = Sha256::digest(&packed);
    packed.extend_from_slice(&check[..CHECK]);
    let link = format!("{VERSION}{}", URL_SAFE_NO_PAD.encode(packed));
    if link.len() > MAX_LINK_CHARACTERS { Err(LinkError::TooLong(link.len())) } else { Ok(link) }
}

/// The truss of a link: exactly the one it was made from.
///
/// # Errors
///
/// When it is too long, of another version, damaged, or holds no proper truss.
pub fn from_link(link: &str) -> Result<Truss, LinkError> {
    if link.len() > MAX_LINK_CHARACTERS {
        return Err(LinkError::TooLong(link.len()));
    }
    let mut characters = link.chars();
    match characters.next() {
        Some(VERSION) => {}
        Some(other) => return Err(LinkError::Version(other)),
        None => return Err(LinkError::Damaged),
    }
    let packed = URL_SAFE_NO_PAD.decode(characters.as_str()).map_err(|_| LinkError::Damaged)?;
    let (packed, check) = packed.split_at_checked(packed.len().wrapping_sub(CHECK)).ok_or(LinkError::Damaged)?;
    if Sha256::digest(packed)[..CHECK] != *check {
        return Err(LinkError::Damaged);
    }
    let content = match packed.split_first() {
        Some((0, bytes)) => bytes.to_vec(),
        Some((1, bytes)) => inflated(bytes)?,
        _ => return Err(LinkError::Damaged),
    };
    let mut reader = Reader::new(&content);
    let truss = read_content(&mut reader)?;
    if !reader.is_done() {
        return Err(LinkError::Damaged);
    }
    match truss.problems().into_iter().next() {
        None => Ok(truss),
        Some(problem) => Err(LinkError::Unfit(problem.text)),
    }
}

/// The content of a deflated link: bounded, and with nothing behind its end.
fn inflated(bytes: &[u8]) -> Result<Vec<u8>, Damaged> {
    let mut content = vec![0; MAX_BYTES];
    let flags = inflate_flags::TINFL_FLAG_USING_NON_WRAPPING_OUTPUT_BUF;
    let (status, consumed, length) = decompress(&mut DecompressorOxide::new(), bytes, &mut content, 0, flags);
    if status != TINFLStatus::Done || consumed != bytes.len() {
        return Err(Damaged);
    }
    content.truncate(length);
    Ok(content)
}

/// How a value is read, and so how it is usually written.
#[derive(Clone, Copy)]
enum Grammar {
    Length(Unit),
    Plain,
    Degrees,
}

impl Grammar {
    fn parse(self, text: &str) -> Option<Rational> {
        match self {
            Grammar::Length(unit) => parse_length(text, unit).ok(),
            Grammar::Plain => parse_plain(text).ok(),
            Grammar::Degrees => parse_degrees(text).ok(),
        }
    }

    /// The usual ways of writing a value; a text that is one of them is stored as its number in this list.
    fn usual(self, value: &Rational) -> [String; 3] {
        let zero = whole(0);
        match self {
            Grammar::Length(unit) => {
                let feet = value * unit.in_units_of(Unit::Ft);
                [Sheet::of(unit, &zero).exact_words(value), value.to_string(), format!("{feet}'")]
            }
            Grammar::Plain | Grammar::Degrees => {
                let decimal = Sheet::of(Unit::Mm, &zero).exact_words(value);
                [value.to_string(), decimal.clone(), decimal]
            }
        }
    }
}

/// The code of a text that is stored as it is.
const AS_TYPED: u64 = 3;

fn write_values(writer: &mut Writer, values: &[(&Written, Grammar)]) {
    let form = |(written, grammar): &(&Written, Grammar)| {
        let usual = grammar.usual(&written.value);
        let found = usual.iter().position(|text| *text == written.text);
        // Only what reads back to the very value may be left out.
        found.filter(|_| grammar.parse(&written.text).as_ref() == Some(&written.value)).map_or(AS_TYPED, |i| i as u64)
    };
    let forms: Vec<u64> = values.iter().map(form).collect();
    writer.runs(&forms);
    let usual: Vec<&Rational> =
        values.iter().zip(&forms).filter(|(_, form)| **form != AS_TYPED).map(|((w, _), _)| &w.value).collect();
    write_numbers(writer, &usual);
    for ((written, _), _) in values.iter().zip(&forms).filter(|(_, form)| **form == AS_TYPED) {
        writer.text(&written.text);
    }
}

fn read_values(reader: &mut Reader, grammars: &[Grammar]) -> Result<Vec<Written>, Damaged> {
    let forms = reader.runs(grammars.len())?;
    let usual = forms.iter().filter(|form| **form != AS_TYPED).count();
    let mut numbers = read_numbers(reader, usual)?.into_iter();
    let mut values = Vec::with_capacity(grammars.len());
    for (form, grammar) in forms.into_iter().zip(grammars) {
        values.push(match form {
            AS_TYPED => {
                let text = reader.text()?;
                Written { value: grammar.parse(text).ok_or(Damaged)?, text: text.to_string() }
            }
            form => {
                let value = numbers.next().ok_or(Damaged)?;
                let text = grammar.usual(&value).into_iter().nth(form as usize).ok_or(Damaged)?;
                if grammar.parse(&text).as_ref() != Some(&value) {
                    return Err(Damaged);
                }
                Written { text, value }
            }
        });
    }
    Ok(values)
}

/// Numbers on a common lattice as differences; where they have none that is small, each as its own text.
fn write_numbers(writer: &mut Writer, values: &[&Rational]) {
    match on_lattice(values) {
        Some((denominator, numerators)) => {
            writer.number(denominator);
            let mut before = 0i64;
            for numerator in numerators {
                writer.signed(numerator - before);
                before = numerator;
            }
        }
        None => {
            writer.number(0);
            values.iter().for_each(|value| writer.text(&value.to_string()));
        }
    }
}

/// The largest denominator and numerator of a lattice in a link; differences of such numerators cannot overflow.
const LARGEST: i64 = 1 << 50;

fn on_lattice(values: &[&Rational]) -> Option<(u64, Vec<i64>)> {
    let mut denominator = BigInt::one();
    for value in values {
        denominator = denominator.lcm(value.denom());
        if denominator > BigInt::from(LARGEST) {
            return None;
        }
    }
    let scale = whole(denominator.clone());
    let small = |value: &&Rational| (*value * &scale).to_integer().to_i64().filter(|n| n.abs() <= LARGEST);
    Some((denominator.to_u64()?, values.iter().map(small).collect::<Option<_>>()?))
}

fn read_numbers(reader: &mut Reader, count: usize) -> Result<Vec<Rational>, Damaged> {
    let denominator = reader.number()?;
    let mut values = Vec::new();
    let mut before = 0i64;
    for _ in 0..count {
        let value = if denominator == 0 {
            parse_fraction(reader.text()?).filter(within_digits).ok_or(Damaged)?
        } else {
            before = before.checked_add(reader.signed()?).ok_or(Damaged)?;
            Rational::new(before.into(), denominator.into())
        };
        values.push(value);
    }
    Ok(values)
}

/// Marks that count on, as one run: letters, first number, how many. Others one by one.
fn write_marks(writer: &mut Writer, marks: &[&str]) {
    let mut rest = marks;
    while let Some(first) = rest.first() {
        let run = counted(first).map_or(0, |(letters, from)| {
            let counts_on = |(i, mark): &(usize, &&str)| **mark == format!("{letters}{}", from + *i as u64);
            rest.iter().enumerate().take_while(counts_on).count()
        });
        match counted(first).filter(|_| run > 1) {
            Some((letters, from)) => {
                writer.number(run as u64);
                writer.text(letters);
                writer.number(from);
                rest = &rest[run..];
            }
            None => {
                writer.number(0);
                writer.text(first);
                rest = &rest[1..];
            }
        }
    }
}

/// A mark as letters and a number without leading zeros.
fn counted(mark: &str) -> Option<(&str, u64)> {
    let at = mark.trim_end_matches(|c: char| c.is_ascii_digit()).len();
    let number: u64 = mark[at..].parse().ok().filter(|n| *n < LARGEST as u64)?;
    (number.to_string() == mark[at..]).then_some((&mark[..at], number))
}

fn read_marks(reader: &mut Reader, count: usize) -> Result<Vec<String>, Damaged> {
    let mut marks = Vec::new();
    while marks.len() < count {
        match reader.count(count - marks.len())? {
            0 => marks.push(reader.text()?.to_string()),
            run => {
                let letters = reader.text()?;
                if letters.len() > 4 * Limit::MARK_CHARACTERS {
                    return Err(Damaged);
                }
                let from = reader.number()?;
                let last = from.checked_add(run as u64).ok_or(Damaged)?;
                marks.extend((from..last).map(|n| format!("{letters}{n}")));
            }
        }
    }
    Ok(marks)
}

/// Joints by their places, each as the difference from the one before.
fn write_joints(writer: &mut Writer, joints: &[JointId]) {
    let mut before = 0i64;
    for id in joints {
        writer.signed(i64::from(id.0) - before);
        before = i64::from(id.0);
    }
}

fn read_joints(reader: &mut Reader, count: usize) -> Result<Vec<JointId>, Damaged> {
    let mut before = 0i64;
    let mut joints = Vec::new();
    for _ in 0..count {
        before = before.checked_add(reader.signed()?).ok_or(Damaged)?;
        joints.push(JointId(u32::try_from(before).map_err(|_| Damaged)?));
    }
    Ok(joints)
}

fn write_content(writer: &mut Writer, truss: &Truss) {
    let length = Grammar::Length(truss.unit);
    writer.text(&truss.title);
    writer.number(position(&UNITS, &truss.unit));
    write_values(writer, &[(&truss.step, length)]);
    writer.number(truss.joints.len() as u64);
    write_marks(writer, &truss.joints.iter().map(|joint| joint.mark.as_str()).collect::<Vec<_>>());
    write_values(writer, &truss.joints.iter().map(|joint| (&joint.x, length)).collect::<Vec<_>>());
    write_values(writer, &truss.joints.iter().map(|joint| (&joint.y, length)).collect::<Vec<_>>());
    writer.runs(&truss.joints.iter().map(|joint| u64::from(joint.loose)).collect::<Vec<_>>());
    writer.number(truss.members.len() as u64);
    write_marks(writer, &truss.members.iter().map(|member| member.mark.as_str()).collect::<Vec<_>>());
    writer.runs(&truss.members.iter().map(|member| position(&ROLES, &member.role)).collect::<Vec<_>>());
    write_joints(writer, &truss.members.iter().map(|member| member.from).collect::<Vec<_>>());
    // The second end is told from the first: along a chord it is always the next joint.
    truss.members.iter().for_each(|member| writer.signed(i64::from(member.to.0) - i64::from(member.from.0)));
    write_supports(writer, &truss.supports);
    write_figures(writer, truss);
}

fn position<T: PartialEq>(all: &[T], one: &T) -> u64 {
    all.iter().position(|other| other == one).unwrap_or_default() as u64
}

fn nth<T: Copy>(all: &[T], index: u64) -> Result<T, Damaged> {
    usize::try_from(index).ok().and_then(|index| all.get(index)).copied().ok_or(Damaged)
}

fn read_content(reader: &mut Reader) -> Result<Truss, Damaged> {
    let title = reader.text()?.to_string();
    let unit = nth(&UNITS, reader.number()?)?;
    let step = read_values(reader, &[Grammar::Length(unit)])?.pop().ok_or(Damaged)?;
    let joints = read_joint_columns(reader, unit)?;
    let members = read_members(reader)?;
    let supports = read_supports(reader)?;
    let figures = read_figures(reader, unit)?;
    Ok(Truss { title, unit, step, joints, members, supports, figures })
}

fn read_joint_columns(reader: &mut Reader, unit: Unit) -> Result<Vec<Joint>, Damaged> {
    let count = reader.count(Limit::JOINTS)?;
    let marks = read_marks(reader, count)?;
    let grammars = vec![Grammar::Length(unit); count];
    let (xs, ys) = (read_values(reader, &grammars)?, read_values(reader, &grammars)?);
    let loose = reader.runs(count)?;
    let columns = marks.into_iter().zip(xs).zip(ys).zip(loose);
    Ok(columns.map(|(((mark, x), y), loose)| Joint { mark, x, y, loose: loose == 1 }).collect())
}

fn read_members(reader: &mut Reader) -> Result<Vec<Member>, Damaged> {
    let count = reader.count(Limit::MEMBERS)?;
    let marks = read_marks(reader, count)?;
    let roles = reader.runs(count)?;
    let from = read_joints(reader, count)?;
    let mut members = Vec::with_capacity(marks.len());
    for ((mark, role), from) in marks.into_iter().zip(roles).zip(from) {
        let to =
            i64::from(from.0).checked_add(reader.signed()?).and_then(|to| u32::try_from(to).ok()).ok_or(Damaged)?;
        members.push(Member { mark, from, to: JointId(to), role: nth(&ROLES, role)? });
    }
    Ok(members)
}

fn write_supports(writer: &mut Writer, supports: &[Support]) {
    writer.number(supports.len() as u64);
    write_joints(writer, &supports.iter().map(|support| support.joint).collect::<Vec<_>>());
    let normals = |support: &Support| match &support.kind {
        SupportKind::Pin => Vec::new(),
        SupportKind::Roller { normal } => normal.to_vec(),
    };
    writer.runs(&supports.iter().map(|support| u64::from(support.kind != SupportKind::Pin)).collect::<Vec<_>>());
    let parts: Vec<Written> = supports.iter().flat_map(normals).collect();
    write_values(writer, &parts.iter().map(|part| (part, Grammar::Plain)).collect::<Vec<_>>());
}

fn read_supports(reader: &mut Reader) -> Result<Vec<Support>, Damaged> {
    let count = reader.count(Limit::JOINTS)?;
    let joints = read_joints(reader, count)?;
    let kinds = reader.runs(count)?;
    let rollers = kinds.iter().filter(|kind| **kind == 1).count();
    let mut parts = read_values(reader, &vec![Grammar::Plain; 2 * rollers])?.into_iter();
    let mut supports = Vec::with_capacity(joints.len());
    for (joint, kind) in joints.into_iter().zip(kinds) {
        let kind = match kind {
            0 => SupportKind::Pin,
            1 => SupportKind::Roller { normal: [parts.next().ok_or(Damaged)?, parts.next().ok_or(Damaged)?] },
            _ => return Err(Damaged),
        };
        supports.push(Support { joint, kind });
    }
    Ok(supports)
}

/// The kinds of figures in the order of their codes.
const KINDS: [&str; 12] =
    ["length", "run", "rise", "pitch", "angle", "spread", "square", "in line", "parallel", "equal", "level", "plumb"];

/// How the values of a figure of this kind are read.
fn value_grammars(kind: u64, unit: Unit) -> &'static [fn(Unit) -> Grammar] {
    let _ = unit;
    match kind {
        0..=2 => &[Grammar::Length],
        3 => &[|_| Grammar::Plain, |_| Grammar::Plain],
        4 => &[|_| Grammar::Degrees],
        5 => &[|_| Grammar::Plain],
        _ => &[],
    }
}

fn step_grammar(kind: u64, unit: Unit) -> Grammar {
    match kind {
        3 | 5 => Grammar::Plain,
        4 => Grammar::Degrees,
        _ => Grammar::Length(unit),
    }
}

fn write_figures(writer: &mut Writer, truss: &Truss) {
    let figures = &truss.figures;
    let kinds: Vec<u64> = figures.iter().map(|f| position(&KINDS, &f.kind.name())).collect();
    writer.number(figures.len() as u64);
    write_marks(writer, &figures.iter().map(|figure| figure.mark.as_str()).collect::<Vec<_>>());
    writer.runs(&kinds);
    for figure in figures.iter().filter(|f| matches!(f.kind.name(), "in line" | "level" | "plumb")) {
        writer.number(figure.kind.joints().len() as u64);
    }
    write_joints(writer, &figures.iter().flat_map(|figure| figure.kind.joints()).collect::<Vec<_>>());
    let values: Vec<(&Written, Grammar)> =
        figures.iter().zip(&kinds).flat_map(|(figure, kind)| values_of(figure, *kind, truss.unit)).collect();
    write_values(writer, &values);
    writer.runs(&figures.iter().map(|figure| u64::from(figure.step.is_some())).collect::<Vec<_>>());
    let steps = figures.iter().zip(&kinds);
    let steps = steps.filter_map(|(figure, kind)| Some((figure.step.as_ref()?, step_grammar(*kind, truss.unit))));
    write_values(writer, &steps.collect::<Vec<_>>());
}

fn values_of(figure: &Figure, kind: u64, unit: Unit) -> Vec<(&Written, Grammar)> {
    figure
        .kind
        .values()
        .into_iter()
        .zip(value_grammars(kind, unit))
        .map(|(value, grammar)| (value, grammar(unit)))
        .collect()
}

fn read_figures(reader: &mut Reader, unit: Unit) -> Result<Vec<Figure>, Damaged> {
    let count = reader.count(Limit::FIGURES)?;
    let marks = read_marks(reader, count)?;
    let kinds = reader.runs(count)?;
    let mut sizes = Vec::with_capacity(kinds.len());
    for kind in &kinds {
        sizes.push(match kind {
            0..=3 => 2,
            4..=6 => 3,
            8 | 9 => 4,
            7 | 10 | 11 => reader.count(Limit::JOINTS)?,
            _ => return Err(Damaged),
        });
    }
    // Each joint takes at least a byte, so a longer list cannot be in the link.
    let mentions = sizes.iter().try_fold(0usize, |sum, size| sum.checked_add(*size)).ok_or(Damaged)?;
    let mut joints = read_joints(reader, mentions)?.into_iter();
    let grammars: Vec<Grammar> =
        kinds.iter().flat_map(|kind| value_grammars(*kind, unit)).map(|grammar| grammar(unit)).collect();
    let mut values = read_values(reader, &grammars)?.into_iter();
    let has_step = reader.runs(count)?;
    let stepped = kinds.iter().zip(&has_step).filter(|(_, has)| **has == 1);
    let mut steps =
        read_values(reader, &stepped.map(|(kind, _)| step_grammar(*kind, unit)).collect::<Vec<_>>())?.into_iter();
    let mut figures = Vec::with_capacity(marks.len());
    for (((mark, kind), size), has_step) in marks.into_iter().zip(kinds).zip(sizes).zip(has_step) {
        let named: Vec<JointId> = joints.by_ref().take(size).collect();
        let kind = figure_kind(kind, &named, &mut values).ok_or(Damaged)?;
        let step = if has_step == 1 { Some(steps.next().ok_or(Damaged)?) } else { None };
        figures.push(Figure { mark, kind, step });
    }
    Ok(figures)
}

fn figure_kind(kind: u64, joints: &[JointId], values: &mut impl Iterator<Item = Written>) -> Option<FigureKind> {
    let name = nth(&KINDS, kind).ok()?;
    Some(match (name, joints) {
        ("length", &[from, to]) => FigureKind::Length { from, to, value: values.next()? },
        ("run", &[from, to]) => FigureKind::Run { from, to, value: values.next()? },
        ("rise", &[from, to]) => FigureKind::Rise { from, to, value: values.next()? },
        ("pitch", &[from, to]) => FigureKind::Pitch { from, to, rise: values.next()?, run: values.next()? },
        ("angle", &[at, from, to]) => FigureKind::Angle { at, from, to, value: values.next()? },
        ("spread", &[at, from, to]) => FigureKind::Spread { at, from, to, value: values.next()? },
        ("square", &[at, from, to]) => FigureKind::Square { at, from, to },
        ("parallel", &[a, b, c, d]) => FigureKind::Parallel { first: [a, b], second: [c, d] },
        ("equal", &[a, b, c, d]) => FigureKind::Equal { first: [a, b], second: [c, d] },
        ("in line", joints) => FigureKind::InLine { joints: joints.to_vec() },
        ("level", joints) => FigureKind::Level { joints: joints.to_vec() },
        ("plumb", joints) => FigureKind::Plumb { joints: joints.to_vec() },
        _ => return None,
    })
}
