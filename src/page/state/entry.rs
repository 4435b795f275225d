//! Lines that add something: a joint, a member, a support, or figures as they stand on the drawing.
//!
//! ```text
//! joint      L2  40'/7  0  [loose]          separated by blanks, commas or tabs
//! member     L0 U1 [top chord] [T1]
//! support    L0 pin    L7 roller    L7 roller 1 2
//! figure     L0 U1 8'-3 3/8"                a length where a member is, else a run, a rise or a length
//!            L0 L8 run 40'                  with the kind said
//!            L0 U1 6:12                     a pitch
//!            L0 L1 U1 angle 26.6            at the joint in the middle
//!            level L0 L8                    a relation
//!            L0...L8 8 @ 5'-0" = 40'-0"     a string, with its overall
//! ```

use super::cells::{joint_named, length, plain, support_at};
use crate::exact::Rational;
use crate::measure::{Written, parse_length, parse_pitch};
use crate::truss::{Edit, Figure, FigureKind, Joint, JointId, Member, Role, Selection, SupportKind, Truss};
use num_traits::{Signed, Zero};

/// The most panels that one string may have.
const MOST_PANELS: usize = 1000;

const KINDS: [&str; 12] =
    ["length", "run", "rise", "pitch", "angle", "spread", "square", "in line", "parallel", "equal", "level", "plumb"];

/// Splits a line at tabs or semicolons, else at commas, else at blanks.
fn parts(line: &str) -> Vec<&str> {
    let by = |separator: fn(char) -> bool| line.split(separator).map(str::trim).filter(|p| !p.is_empty()).collect();
    match line {
        _ if line.contains(['\t', ';']) => by(|c| matches!(c, '\t' | ';')),
        _ if line.contains(',') => by(|c| c == ','),
        _ => by(char::is_whitespace),
    }
}

/// Reads `MARK X Y [loose]`.
pub(super) fn read_joint_line(truss: &Truss, line: &str) -> Result<Edit, String> {
    let mut parts = parts(line);
    let loose = parts.last().is_some_and(|last| *last == "loose");
    if loose {
        parts.pop();
    }
    let Some((mark, rest)) = parts.split_first().filter(|(_, rest)| rest.len() >= 2) else {
        return Err("expected a mark and two coordinates, such as L2, 40'/7, 0".into());
    };
    let (x, y) = split_in_two(truss, rest)?;
    Ok(Edit::AddJoint(Joint { mark: (*mark).to_string(), x, y, loose }))
}

/// Finds the one way in which the parts are two lengths (a length may hold blanks).
fn split_in_two(truss: &Truss, parts: &[&str]) -> Result<(Written, Written), String> {
    let mut ways = (1..parts.len()).filter_map(|at| {
        Some((length(truss, &parts[..at].join(" ")).ok()?, length(truss, &parts[at..].join(" ")).ok()?))
    });
    match (ways.next(), ways.next()) {
        (Some(way), None) => Ok(way),
        (Some(_), Some(_)) => {
            Err("the two coordinates can be told apart in more than one way; put a comma between them".into())
        }
        _ => {
            length(truss, parts[0])?;
            length(truss, &parts[1..].join(" "))?;
            Err("expected two coordinates with a comma between them".into())
        }
    }
}

/// Reads `FROM TO [role] [mark]`.
pub(super) fn read_member_line(truss: &Truss, line: &str) -> Result<Edit, String> {
    let parts = parts(line);
    let [from, to, rest @ ..] = parts.as_slice() else {
        return Err("expected two joints, such as L0 U1".into());
    };
    let (from, to) = (joint_named(truss, from)?, joint_named(truss, to)?);
    let rest = rest.join(" ");
    let named =
        Role::ALL.into_iter().find(|role| rest == role.name() || rest.starts_with(&format!("{} ", role.name())));
    let mark = named.map_or(rest.as_str(), |role| rest[role.name().len()..].trim());
    let role = named.unwrap_or_else(|| likely_role(truss, from, to));
    let mark = if mark.is_empty() { truss.free_member_mark(role) } else { mark.to_string() };
    Ok(Edit::AddMember(Member { mark, from, to, role }))
}

/// Reads `JOINT pin` or `JOINT roller [normal]`.
pub(super) fn read_support_line(truss: &Truss, line: &str) -> Result<Edit, String> {
    let parts = parts(line);
    let [joint, kind, normal @ ..] = parts.as_slice() else {
        return Err("expected a joint and pin or roller, such as L0 pin".into());
    };
    let mut support = support_at(joint_named(truss, joint)?, kind)?;
    match (normal, &mut support.kind) {
        ([], _) => {}
        ([x, y], SupportKind::Roller { normal }) => *normal = [plain(x)?, plain(y)?],
        (_, SupportKind::Roller { .. }) => return Err("expected two numbers for the normal, such as 0 1".into()),
        (_, SupportKind::Pin) => return Err("a pin holds in every direction; expected nothing after it".into()),
    }
    Ok(Edit::SetSupport(support))
}

/// The role a new member most likely has, by the marks of its ends and its direction.
pub(super) fn likely_role(truss: &Truss, from: JointId, to: JointId) -> Role {
    let (a, b) = (truss.joint(from), truss.joint(to));
    let both = |letters: &[char]| a.mark.starts_with(letters) && b.mark.starts_with(letters);
    match () {
        () if both(&['U', 'T']) => Role::TopChord,
        () if both(&['L', 'B']) => Role::BottomChord,
        () if a.x.value == b.x.value => Role::Post,
        () => Role::Web,
    }
}

/// Reads one line of the figure entry. The figures come without marks.
pub(super) fn read_figures(truss: &Truss, selection: &Selection, line: &str) -> Result<Vec<Figure>, String> {
    let (line, step) = split_step(line);
    let words = Words::read(truss, line)?;
    let joints = if words.joints.is_empty() { selected_joints(truss, selection) } else { words.joints.clone() };
    let mut figures = match words.kind {
        Some(kind @ ("in line" | "square" | "parallel" | "equal" | "level" | "plumb")) => {
            vec![relation(kind, &joints)?]
        }
        kind if words.is_chain || words.value.contains(['@', '=']) => string(truss, kind, &joints, &words.value)?,
        kind => vec![valued(truss, kind, &joints, &words.value)?],
    };
    if let Some(step) = step {
        let is_length = |kind: &FigureKind| {
            !matches!(kind, FigureKind::Pitch { .. } | FigureKind::Angle { .. } | FigureKind::Spread { .. })
        };
        for figure in &mut figures {
            figure.step = Some(if is_length(&figure.kind) { length(truss, step)? } else { plain(step)? });
        }
    }
    Ok(figures)
}

/// Takes ` step VALUE` off the end.
fn split_step(line: &str) -> (&str, Option<&str>) {
    match line.rfind(" step ") {
        Some(at) => (line[..at].trim(), Some(line[at + 6..].trim())),
        None => (line, None),
    }
}

/// A line taken apart: joints, the kind if it is said, and the rest, which is the value.
struct Words {
    joints: Vec<JointId>,
    is_chain: bool,
    kind: Option<&'static str>,
    value: String,
}

impl Words {
    fn read(truss: &Truss, line: &str) -> Result<Words, String> {
        let mut words = Words { joints: Vec::new(), is_chain: false, kind: None, value: String::new() };
        let mut rest = line.trim();
        while !rest.is_empty() {
            let (head, tail) = rest.split_once([' ', '\t', ',']).unwrap_or((rest, ""));
            if let Some(kind) = KINDS.into_iter().find(|kind| words.kind.is_none() && is_first_word(rest, kind)) {
                words.kind = Some(kind);
                rest = rest[kind.len()..].trim_start();
            } else if let Some(joint) = truss.joint_marked(head) {
                words.joints.push(joint);
                rest = tail.trim_start();
            } else if let Some(chain) = chain_of(truss, head)? {
                words.joints.extend(chain);
                words.is_chain = true;
                rest = tail.trim_start();
            } else if let Some(pair) = pair_of(truss, head) {
                words.joints.extend(pair);
                rest = tail.trim_start();
            } else {
                break;
            }
        }
        words.value = rest.trim().to_string();
        match words.value.as_str() {
            "" => Ok(words),
            value if value.starts_with(char::is_alphabetic) => {
                let head = value.split_whitespace().next().unwrap_or(value);
                Err(format!("`{head}` is neither a joint nor a kind of figure ({})", KINDS.join(", ")))
            }
            _ => Ok(words),
        }
    }
}

fn is_first_word(text: &str, word: &str) -> bool {
    text.strip_prefix(word).is_some_and(|rest| rest.is_empty() || rest.starts_with([' ', '\t', ',']))
}

/// `L0-U1`: two joints in one word.
fn pair_of(truss: &Truss, word: &str) -> Option<[JointId; 2]> {
    word.char_indices().filter(|(_, c)| matches!(c, '-' | '–')).find_map(|(at, dash)| {
        Some([truss.joint_marked(&word[..at])?, truss.joint_marked(&word[at + dash.len_utf8()..])?])
    })
}

/// `L0...L8`: the joints whose marks count from the first to the last.
fn chain_of(truss: &Truss, word: &str) -> Result<Option<Vec<JointId>>, String> {
    let Some((first, last)) = ["...", "…", ".."].into_iter().find_map(|dots| word.split_once(dots)) else {
        return Ok(None);
    };
    let split = |mark: &str| {
        let at = mark.trim_end_matches(|c: char| c.is_ascii_digit()).len();
        Some((mark[..at].to_string(), mark[at..].parse::<usize>().ok()?))
    };
    let (Some((letters, from)), Some((others, to))) = (split(first), split(last)) else {
        return Err(format!("`{word}`: expected marks that count, such as L0...L8"));
    };
    if letters != others || from.abs_diff(to) > MOST_PANELS {
        return Err(format!("`{word}`: expected marks with the same letters, such as L0...L8"));
    }
    let numbers: Vec<usize> = if from <= to { (from..=to).collect() } else { (to..=from).rev().collect() };
    numbers.into_iter().map(|n| joint_named(truss, &format!("{letters}{n}"))).collect::<Result<_, _>>().map(Some)
}

/// The joints that stand in where none are named: those selected, else the ends of one selected member.
fn selected_joints(truss: &Truss, selection: &Selection) -> Vec<JointId> {
    match (selection.joints.as_slice(), selection.members.as_slice()) {
        ([], [member]) => truss.members.get(member.index()).map_or_else(Vec::new, |member| member.ends().to_vec()),
        ([], [one, other]) => [one, other]
            .into_iter()
            .filter_map(|id| truss.members.get(id.index()))
            .flat_map(|member| member.ends())
            .collect(),
        (joints, _) => joints.to_vec(),
    }
}

fn figure(kind: FigureKind) -> Figure {
    Figure { mark: String::new(), kind, step: None }
}

fn relation(kind: &str, joints: &[JointId]) -> Result<Figure, String> {
    Ok(figure(match (kind, joints) {
        ("in line", [_, _, _, ..]) => FigureKind::InLine { joints: joints.to_vec() },
        ("in line", _) => return Err("in line takes three joints or more".into()),
        ("level", [_, _, ..]) => FigureKind::Level { joints: joints.to_vec() },
        ("plumb", [_, _, ..]) => FigureKind::Plumb { joints: joints.to_vec() },
        ("level" | "plumb", _) => return Err(format!("{kind} takes two joints or more")),
        ("square", &[from, at, to]) => FigureKind::Square { at, from, to },
        ("square", _) => return Err("square takes three joints, the corner in the middle".into()),
        ("parallel", &[a, b, c, d]) => FigureKind::Parallel { first: [a, b], second: [c, d] },
        ("equal", &[a, b, c, d]) => FigureKind::Equal { first: [a, b], second: [c, d] },
        _ => return Err(format!("{kind} takes four joints: the ends of one line, then of the other")),
    }))
}

fn valued(truss: &Truss, kind: Option<&str>, joints: &[JointId], value: &str) -> Result<Figure, String> {
    if value.is_empty() {
        return Err("a value is missing, such as 8'-3 3/8\"".into());
    }
    match *joints {
        [from, to] => pair_figure(truss, kind, from, to, value),
        [from, at, to] => corner_figure(kind, from, at, to, value),
        [] => Err("say between which joints, such as L0 U1 8'-3 3/8\", or select them first".into()),
        _ => Err("a value stands between two joints, or at a corner of three".into()),
    }
}

fn corner_figure(kind: Option<&str>, from: JointId, at: JointId, to: JointId, value: &str) -> Result<Figure, String> {
    let number = plain(value.trim_end_matches('°').trim_end())?;
    match kind {
        Some("spread") => Ok(figure(FigureKind::Spread { at, from, to, value: number })),
        Some("angle") => Ok(figure(FigureKind::Angle { at, from, to, value: number })),
        None if value.ends_with('°') => Ok(figure(FigureKind::Angle { at, from, to, value: number })),
        None => Err("say angle or spread, such as L0 L1 U1 angle 26.6".into()),
        Some(other) => Err(format!("a {other} stands between two joints")),
    }
}

fn pair_figure(truss: &Truss, kind: Option<&str>, from: JointId, to: JointId, value: &str) -> Result<Figure, String> {
    if kind == Some("pitch") || (kind.is_none() && value.contains(':')) {
        let (rise, run) = parse_pitch(value).map_err(|error| error.to_string())?;
        return Ok(figure(FigureKind::Pitch { from, to, rise, run }));
    }
    let value = length(truss, value)?;
    match kind.unwrap_or_else(|| likely_kind(truss, from, to)) {
        "length" => Ok(figure(FigureKind::Length { from, to, value })),
        "run" => {
            let [from, to] = along(from, to, &delta(truss, from, to).0, &value);
            Ok(figure(FigureKind::Run { from, to, value }))
        }
        "rise" => {
            let [from, to] = along(from, to, &delta(truss, from, to).1, &value);
            Ok(figure(FigureKind::Rise { from, to, value }))
        }
        other => {
            Err(format!("{} {other} stands at a corner of three joints", if other == "angle" { "an" } else { "a" }))
        }
    }
}

fn delta(truss: &Truss, from: JointId, to: JointId) -> (Rational, Rational) {
    let (a, b) = (truss.joint(from), truss.joint(to));
    (&b.x.value - &a.x.value, &b.y.value - &a.y.value)
}

/// Turns the pair round where the sketch shows that a positive value must go the other way.
fn along(from: JointId, to: JointId, sketched: &Rational, value: &Written) -> [JointId; 2] {
    if sketched.is_negative() && value.value.is_positive() { [to, from] } else { [from, to] }
}

/// What a bare value between two joints most likely is: a length where a member is, else a run or a rise where the
/// sketch is almost level or plumb, else a length.
pub(super) fn likely_kind(truss: &Truss, from: JointId, to: JointId) -> &'static str {
    let joined = |member: &Member| member.ends() == [from, to] || member.ends() == [to, from];
    if truss.members.iter().any(joined) {
        return "length";
    }
    let (dx, dy) = delta(truss, from, to);
    let much_less = |a: &Rational, b: &Rational| a.abs() * crate::exact::whole(20) <= b.abs();
    match () {
        () if !dx.is_zero() && much_less(&dy, &dx) => "run",
        () if !dy.is_zero() && much_less(&dx, &dy) => "rise",
        () => "length",
    }
}

/// `8 @ 5'-0" = 40'-0"`, or values with commas between them, along a chain of joints.
fn string(truss: &Truss, kind: Option<&str>, joints: &[JointId], text: &str) -> Result<Vec<Figure>, String> {
    let (panels, overall) = match text.split_once('=') {
        Some((panels, overall)) => (panels.trim(), Some(overall.trim())),
        None => (text, None),
    };
    let values = panel_values(truss, panels, joints.len().saturating_sub(1))?;
    if joints.len() < 2 || values.len() != joints.len() - 1 {
        return Err(format!("{} values for {} joints; expected one for each panel", values.len(), joints.len()));
    }
    let (first, last) = (joints[0], joints[joints.len() - 1]);
    let kind = kind.unwrap_or_else(|| {
        let (dx, dy) = delta(truss, first, last);
        if dx.abs() >= dy.abs() { "run" } else { "rise" }
    });
    let mut figures = Vec::with_capacity(joints.len());
    for (pair, value) in joints.windows(2).zip(&values) {
        figures.push(pair_figure(truss, Some(kind), pair[0], pair[1], value)?);
    }
    if let Some(overall) = overall.filter(|_| joints.len() > 2) {
        figures.push(pair_figure(truss, Some(kind), first, last, overall)?);
    }
    Ok(figures)
}

fn panel_values(truss: &Truss, text: &str, panels: usize) -> Result<Vec<String>, String> {
    let mut values = Vec::new();
    for part in text.split([',', ';', '\t']).map(str::trim).filter(|part| !part.is_empty()) {
        let (count, value) = match part.split_once('@') {
            Some((count, value)) => (panel_count(count.trim())?, value.trim()),
            None => (1, part),
        };
        parse_length(value, truss.unit).map_err(|error| error.to_string())?;
        values.extend(std::iter::repeat_n(value.to_string(), count));
        if values.len() > MOST_PANELS {
            return Err(format!("more than {MOST_PANELS} panels in one string"));
        }
    }
    if values.is_empty() && panels == 0 {
        return Err("expected a string such as L0...L8 8 @ 5'-0\" = 40'-0\"".into());
    }
    Ok(values)
}

fn panel_count(text: &str) -> Result<usize, String> {
    match text.parse() {
        Ok(count) if (1..=MOST_PANELS).contains(&count) => Ok(count),
        _ => Err(format!("`{text}` is not a number of panels; expected 1 to {MOST_PANELS} before @")),
    }
}
