//! Reading a truss file: everything that is wrong is told, with where it is and what was expected.

use super::json::{Node, TOO_DEEP, TOO_MANY_KEYS, parse, read};
use crate::measure::{Unit, ValueError, Written, parse_degrees, parse_length, parse_pitch, parse_plain};
use crate::truss::{
    Figure, FigureKind, Joint, JointId, Limit, Member, Role, Support, SupportKind, Truss, mark_problem,
};
use serde::Deserializer;
use std::collections::{HashMap, HashSet};
use std::fmt;

/// The most problems that are told of one file.
const MOST_TOLD: usize = 20;
/// The one version of the file format there is.
const VERSION: &str = "1";

/// Why a truss file could not be read: one problem or several, each with where it is and what was expected.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct ReadError {
    /// The problems, in the order of the file; at most twenty.
    pub problems: Vec<String>,
    /// How many more there are.
    pub more: usize,
}

impl fmt::Display for ReadError {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        f.write_str(&self.problems.join("; "))?;
        if self.more > 0 { write!(f, "; and {} more", self.more) } else { Ok(()) }
    }
}

impl std::error::Error for ReadError {}

impl ReadError {
    fn one(problem: impl Into<String>) -> ReadError {
        ReadError { problems: vec![problem.into()], more: 0 }
    }

    fn of(problems: Vec<String>, more: usize) -> ReadError {
        let more = more + problems.len().saturating_sub(MOST_TOLD);
        ReadError { problems: problems.into_iter().take(MOST_TOLD).collect(), more }
    }
}

/// Reads a truss file.
///
/// # Errors
///
/// When the bytes are not a truss file: too large, not UTF-8, not JSON, another version, unknown or repeated or missing keys,
/// values that cannot be read, more than a limit allows, marks that are used twice or name nothing. Says where and what was
/// expected.
pub fn read_truss(bytes: &[u8]) -> Result<Truss, ReadError> {
    if bytes.len() > Limit::FILE_BYTES {
        return Err(ReadError::one(format!("the file has {} bytes; the limit is 16 MiB of text", bytes.len())));
    }
    let text = std::str::from_utf8(bytes)
        .map_err(|error| ReadError::one(format!("byte {}: not UTF-8 text", error.valid_up_to() + 1)))?;
    let text = text.strip_prefix('\u{feff}').unwrap_or(text);
    truss_of(&parse(text).map_err(|error| ReadError::one(json_words(&error)))?)
}

/// Reads a truss from a value in the form of the truss file, from any source that describes itself (a JavaScript value,
/// say).
///
/// # Errors
///
/// As [`read_truss`]; and when the source cannot be read as such a value.
pub fn read_truss_value<'de, D: Deserializer<'de>>(source: D) -> Result<Truss, ReadError> {
    truss_of(&read(source).map_err(|error| ReadError::one(error.to_string()))?)
}

fn truss_of(node: &Node) -> Result<Truss, ReadError> {
    let mut reader = Reader::default();
    let truss = reader.truss(node);
    match truss.filter(|_| reader.problems.is_empty()) {
        Some(truss) => match truss.problems() {
            problems if problems.is_empty() => Ok(truss),
            problems => Err(ReadError::of(problems.into_iter().map(|problem| problem.text).collect(), 0)),
        },
        None => Err(ReadError::of(reader.problems, reader.more)),
    }
}

/// What is wrong with the text as JSON, in words, with line and column.
fn json_words(error: &serde_json::Error) -> String {
    let at = format!("line {}, column {}", error.line(), error.column());
    let words = error.to_string();
    let words = words.split(" at line ").next().unwrap_or_default();
    match error.classify() {
        serde_json::error::Category::Eof => format!("{at}: the text ends too early"),
        _ if words == TOO_DEEP || words == TOO_MANY_KEYS => format!("{at}: {words}"),
        _ => format!("{at}: not JSON: {words}"),
    }
}

/// Reads nodes, and gathers what is wrong with them.
#[derive(Default)]
struct Reader {
    problems: Vec<String>,
    /// How many more problems there are than are kept.
    more: usize,
    unit: Unit,
    marks: HashMap<String, JointId>,
    /// Marks of joints that could not be read, and whether there are joints of which not even the mark could.
    lost: HashSet<String>,
    nameless: bool,
}

/// The keys of an object, each to be taken once.
struct Keys<'a> {
    path: String,
    entries: Vec<(&'a str, &'a Node)>,
}

impl<'a> Keys<'a> {
    fn take(&mut self, key: &str) -> Option<&'a Node> {
        let at = self.entries.iter().position(|(name, _)| *name == key)?;
        Some(self.entries.remove(at).1)
    }

    fn place(&self, key: &str) -> String {
        if self.path.is_empty() { key.to_string() } else { format!("{}.{key}", self.path) }
    }
}

/// A text as it stands in the file, shortened; what cannot be seen is escaped, foot and inch marks are not.
fn quoted(text: &str) -> String {
    let short: String = text.chars().take(60).collect();
    let dots = if short.len() < text.len() { "…" } else { "" };
    let shown = |c: char| if matches!(c, '\'' | '"' | '\\') { c.to_string() } else { c.escape_debug().to_string() };
    format!("`{}{dots}`", short.chars().map(shown).collect::<String>())
}

impl Reader {
    fn wrong<T>(&mut self, place: &str, what: impl fmt::Display) -> Option<T> {
        if self.problems.len() < MOST_TOLD {
            self.problems.push(if place.is_empty() { what.to_string() } else { format!("{place}: {what}") });
        } else {
            self.more += 1;
        }
        None
    }

    fn keys<'a>(&mut self, node: &'a Node, path: &str) -> Option<Keys<'a>> {
        let Node::Map(entries) = node else {
            return self.wrong(path, format!("expected an object, found {}", node.words()));
        };
        let mut keys: Keys<'a> = Keys { path: path.to_string(), entries: Vec::with_capacity(entries.len()) };
        let mut seen = HashSet::with_capacity(entries.len());
        for (key, value) in entries {
            if !seen.insert(key.as_str()) {
                self.wrong::<()>(path, format!("the key {} stands twice", quoted(key)));
            } else {
                keys.entries.push((key, value));
            }
        }
        Some(keys)
    }

    fn no_more(&mut self, keys: Keys) {
        for (key, _) in &keys.entries {
            self.wrong::<()>(&keys.path, format!("unknown key {}", quoted(key)));
        }
    }

    fn need<'a>(&mut self, keys: &mut Keys<'a>, key: &str) -> Option<&'a Node> {
        match keys.take(key) {
            Some(node) => Some(node),
            None => self.wrong(&keys.path, format!("the key `{key}` is missing")),
        }
    }

    fn text<'a>(&mut self, node: &'a Node, place: &str) -> Option<&'a str> {
        match node {
            Node::Text(text) => Some(text),
            other => self.wrong(place, format!("expected a text, found {}", other.words())),
        }
    }

    fn needed_text<'a>(&mut self, keys: &mut Keys<'a>, key: &str) -> Option<&'a str> {
        let place = keys.place(key);
        let node = self.need(keys, key)?;
        self.text(node, &place)
    }

    /// A list under a key, or nothing when the key is left out; more items than the limit are refused unread.
    fn list<'a>(&mut self, keys: &mut Keys<'a>, key: &str, limit: usize) -> Option<&'a [Node]> {
        match keys.take(key) {
            None => Some(&[]),
            Some(Node::List(items)) if items.len() > limit => {
                self.wrong(key, format!("more than the limit of {limit} {key}"))
            }
            Some(Node::List(items)) => Some(items),
            Some(other) => self.wrong(key, format!("expected a list, found {}", other.words())),
        }
    }

    fn truss(&mut self, node: &Node) -> Option<Truss> {
        let mut keys = self.keys(node, "")?;
        self.version(&mut keys)?;
        let title = match keys.take("title") {
            None => Some(""),
            Some(node) => self.text(node, "title"),
        };
        self.unit = self.unit(&mut keys)?;
        let step = self.need(&mut keys, "step").and_then(|node| self.length(node, "step"));
        let joints = self.list(&mut keys, "joints", Limit::JOINTS)?;
        let members = self.list(&mut keys, "members", Limit::MEMBERS)?;
        let supports = self.list(&mut keys, "supports", Limit::JOINTS)?;
        let figures = self.list(&mut keys, "figures", Limit::FIGURES)?;
        self.no_more(keys);
        let joints = self.each(joints, "joints", Reader::joint);
        self.name_joints(&joints);
        Some(Truss {
            title: title?.to_string(),
            unit: self.unit,
            step: step?,
            members: self.each(members, "members", Reader::member),
            supports: self.each(supports, "supports", Reader::support),
            figures: self.each(figures, "figures", Reader::figure),
            joints,
        })
    }

    /// Remembers which joint has which mark. A mark that is used twice is told here, before anything that names it.
    fn name_joints(&mut self, joints: &[Joint]) {
        for (index, joint) in joints.iter().enumerate() {
            if self.marks.insert(joint.mark.clone(), JointId::new(index)).is_some() {
                let text = format!("joint mark {} is used twice; expected each mark once", quoted(&joint.mark));
                self.wrong::<()>("", text);
            }
        }
    }

    fn version(&mut self, keys: &mut Keys) -> Option<()> {
        match self.need(keys, "chordwright")? {
            node @ (Node::Whole(_) | Node::Text(_)) => match node.written() {
                version if version == VERSION => Some(()),
                version => {
                    let text = format!("version {} is not known here; expected {VERSION}", quoted(&version));
                    self.wrong("chordwright", text)
                }
            },
            other => self.wrong("chordwright", format!("expected {VERSION}, found {}", other.words())),
        }
    }

    fn unit(&mut self, keys: &mut Keys) -> Option<Unit> {
        let symbol = self.needed_text(keys, "unit")?;
        match Unit::from_symbol(symbol) {
            Some(unit) => Some(unit),
            None => self.wrong("unit", format!("{} is not a unit; expected in, ft, mm, cm or m", quoted(symbol))),
        }
    }

    /// Reads every item, also after one that is wrong, so that all problems are told at once.
    fn each<T>(&mut self, items: &[Node], name: &str, read: fn(&mut Reader, &Node, &str) -> Option<T>) -> Vec<T> {
        let mut list = Vec::with_capacity(items.len());
        for (index, node) in items.iter().enumerate() {
            list.extend(read(self, node, &format!("{name}[{index}]")));
        }
        list
    }

    fn value(
        &mut self,
        node: &Node,
        place: &str,
        parse: impl Fn(&str) -> Result<Written, ValueError>,
    ) -> Option<Written> {
        let text = match node {
            Node::Text(_) | Node::Whole(_) => node.written(),
            Node::Fraction => {
                return self
                    .wrong(place, "a JSON number with a fraction is not exact; write it as a text, such as \"10.5\"");
            }
            other => {
                return self
                    .wrong(place, format!("expected a value such as \"8'-3 3/8\\\"\", found {}", other.words()));
            }
        };
        match parse(&text) {
            Ok(written) => Some(written),
            Err(error) => self.wrong(place, format!("{error} (in {})", quoted(&text))),
        }
    }

    fn length(&mut self, node: &Node, place: &str) -> Option<Written> {
        let unit = self.unit;
        self.value(node, place, |text| Ok(Written { value: parse_length(text, unit)?, text: text.to_string() }))
    }

    fn plain(&mut self, node: &Node, place: &str) -> Option<Written> {
        self.value(node, place, |text| Ok(Written { value: parse_plain(text)?, text: text.to_string() }))
    }

    fn degrees(&mut self, node: &Node, place: &str) -> Option<Written> {
        self.value(node, place, |text| Ok(Written { value: parse_degrees(text)?, text: text.to_string() }))
    }

    fn needed_length(&mut self, keys: &mut Keys, key: &str) -> Option<Written> {
        let place = keys.place(key);
        let node = self.need(keys, key)?;
        self.length(node, &place)
    }

    fn mark(&mut self, keys: &mut Keys, key: &str) -> Option<String> {
        let place = keys.place(key);
        let mark = self.needed_text(keys, key)?;
        match mark_problem(mark) {
            Some(problem) => self.wrong(&place, format!("the mark {} {problem}", quoted(mark))),
            None => Some(mark.to_string()),
        }
    }

    fn joint(&mut self, node: &Node, path: &str) -> Option<Joint> {
        let mut keys = self.keys(node, path);
        let mark = keys.as_mut().and_then(|keys| self.mark(keys, "mark"));
        let joint = keys.and_then(|keys| self.joint_marked(mark.clone(), keys, path));
        if joint.is_none() {
            self.nameless |= mark.is_none();
            self.lost.extend(mark);
        }
        joint
    }

    fn joint_marked(&mut self, mark: Option<String>, mut keys: Keys, path: &str) -> Option<Joint> {
        let (x, y) = (self.needed_length(&mut keys, "x"), self.needed_length(&mut keys, "y"));
        let loose = match keys.take("loose") {
            None => Some(false),
            Some(Node::Bool(loose)) => Some(*loose),
            Some(other) => {
                self.wrong(&format!("{path}.loose"), format!("expected true or false, found {}", other.words()))
            }
        };
        self.no_more(keys);
        Some(Joint { mark: mark?, x: x?, y: y?, loose: loose? })
    }

    fn joint_named(&mut self, node: &Node, place: &str) -> Option<JointId> {
        let mark = self.text(node, place)?;
        match self.marks.get(mark) {
            Some(id) => Some(*id),
            // A joint that could not be read has been told already; naming it is no second problem.
            None if self.nameless || self.lost.contains(mark) => None,
            None => self.wrong(place, format!("there is no joint {}", quoted(mark))),
        }
    }

    fn needed_joint(&mut self, keys: &mut Keys, key: &str) -> Option<JointId> {
        let place = keys.place(key);
        let node = self.need(keys, key)?;
        self.joint_named(node, &place)
    }

    fn member(&mut self, node: &Node, path: &str) -> Option<Member> {
        let mut keys = self.keys(node, path)?;
        let mark = self.mark(&mut keys, "mark");
        let (from, to) = (self.needed_joint(&mut keys, "from"), self.needed_joint(&mut keys, "to"));
        let role = match keys.take("role") {
            None => Some(Role::Other),
            Some(node) => self.role(node, &format!("{path}.role")),
        };
        self.no_more(keys);
        Some(Member { mark: mark?, from: from?, to: to?, role: role? })
    }

    fn role(&mut self, node: &Node, place: &str) -> Option<Role> {
        let name = self.text(node, place)?;
        match Role::from_name(name) {
            Some(role) => Some(role),
            None => {
                let names = Role::ALL.map(Role::name).join(", ");
                self.wrong(place, format!("{} is not a role; expected one of {names}", quoted(name)))
            }
        }
    }

    fn support(&mut self, node: &Node, path: &str) -> Option<Support> {
        let mut keys = self.keys(node, path)?;
        let joint = self.needed_joint(&mut keys, "joint");
        let kind = match self.needed_text(&mut keys, "kind") {
            Some("pin") => Some(SupportKind::Pin),
            Some("roller") => self.normal(&mut keys).map(|normal| SupportKind::Roller { normal }),
            Some(other) => self
                .wrong(&format!("{path}.kind"), format!("{} is not a support; expected pin or roller", quoted(other))),
            None => None,
        };
        self.no_more(keys);
        Some(Support { joint: joint?, kind: kind? })
    }

    /// A roller's normal: upwards when it is left out.
    fn normal(&mut self, keys: &mut Keys) -> Option<[Written; 2]> {
        let place = keys.place("normal");
        match keys.take("normal") {
            None => Some([0, 1].map(|n| Written::plain(crate::exact::whole(n)))),
            Some(Node::List(parts)) if parts.len() == 2 => {
                let mut part = |index: usize| self.plain(&parts[index], &format!("{place}[{index}]"));
                let (x, y) = (part(0), part(1));
                Some([x?, y?])
            }
            Some(_) => self.wrong(&place, "expected two numbers, such as [\"0\", \"1\"]"),
        }
    }

    fn figure(&mut self, node: &Node, path: &str) -> Option<Figure> {
        let mut keys = self.keys(node, path)?;
        let mark = self.mark(&mut keys, "id");
        let name = self.needed_text(&mut keys, "kind");
        let step = keys.take("step");
        let kind = name.and_then(|name| self.figure_kind(name, &mut keys));
        if name.is_some() && (kind.is_some() || !keys.entries.is_empty()) {
            self.no_more(keys);
        }
        let kind = kind?;
        let step = match (step, &kind) {
            (None, _) => None,
            (Some(node), FigureKind::Pitch { .. } | FigureKind::Spread { .. }) => {
                Some(self.plain(node, &format!("{path}.step"))?)
            }
            (Some(node), FigureKind::Angle { .. }) => Some(self.degrees(node, &format!("{path}.step"))?),
            (Some(node), _) => Some(self.length(node, &format!("{path}.step"))?),
        };
        Some(Figure { mark: mark?, kind, step })
    }

    fn figure_kind(&mut self, name: &str, keys: &mut Keys) -> Option<FigureKind> {
        match name {
            "length" | "run" | "rise" | "pitch" => self.pair_figure(name, keys),
            "angle" | "spread" | "square" => self.corner_figure(name, keys),
            "in line" => Some(FigureKind::InLine { joints: self.joints(keys, "joints")? }),
            "level" => Some(FigureKind::Level { joints: self.joints(keys, "joints")? }),
            "plumb" => Some(FigureKind::Plumb { joints: self.joints(keys, "joints")? }),
            "parallel" | "equal" => {
                let (first, second) = (self.ends(keys, "first"), self.ends(keys, "second"));
                let (first, second) = (first?, second?);
                Some(match name {
                    "parallel" => FigureKind::Parallel { first, second },
                    _ => FigureKind::Equal { first, second },
                })
            }
            _ => {
                let place = keys.place("kind");
                keys.entries.clear();
                self.wrong(&place, format!("{} is not a kind of figure; expected length, run, rise, pitch, angle, spread, square, in line, parallel, equal, level or plumb", quoted(name)))
            }
        }
    }

    fn pair_figure(&mut self, name: &str, keys: &mut Keys) -> Option<FigureKind> {
        let (from, to) = (self.needed_joint(keys, "from"), self.needed_joint(keys, "to"));
        if name == "pitch" {
            let (rise, run) = self.pitch(keys)?;
            return Some(FigureKind::Pitch { from: from?, to: to?, rise, run });
        }
        let value = self.needed_length(keys, "value");
        let (from, to, value) = (from?, to?, value?);
        Some(match name {
            "length" => FigureKind::Length { from, to, value },
            "run" => FigureKind::Run { from, to, value },
            _ => FigureKind::Rise { from, to, value },
        })
    }

    fn pitch(&mut self, keys: &mut Keys) -> Option<(Written, Written)> {
        let place = keys.place("value");
        let text = self.needed_text(keys, "value")?;
        match parse_pitch(text) {
            Ok(pitch) => Some(pitch),
            Err(error) => self.wrong(&place, format!("{error} (in {})", quoted(text))),
        }
    }

    fn corner_figure(&mut self, name: &str, keys: &mut Keys) -> Option<FigureKind> {
        let at = self.needed_joint(keys, "at");
        let (from, to) = (self.needed_joint(keys, "from"), self.needed_joint(keys, "to"));
        if name == "square" {
            return Some(FigureKind::Square { at: at?, from: from?, to: to? });
        }
        let place = keys.place("value");
        let node = self.need(keys, "value")?;
        let value = if name == "angle" { self.degrees(node, &place) } else { self.plain(node, &place) };
        let (at, from, to, value) = (at?, from?, to?, value?);
        Some(match name {
            "angle" => FigureKind::Angle { at, from, to, value },
            _ => FigureKind::Spread { at, from, to, value },
        })
    }

    fn joints(&mut self, keys: &mut Keys, key: &str) -> Option<Vec<JointId>> {
        let place = keys.place(key);
        match self.need(keys, key)? {
            Node::List(items) => {
                let named = |(index, item): (usize, &Node)| self.joint_named(item, &format!("{place}[{index}]"));
                items.iter().enumerate().map(named).collect()
            }
            other => self.wrong(&place, format!("expected a list of joints, found {}", other.words())),
        }
    }

    fn ends(&mut self, keys: &mut Keys, key: &str) -> Option<[JointId; 2]> {
        let place = keys.place(key);
        let joints = self.joints(keys, key)?;
        match joints[..] {
            [a, b] => Some([a, b]),
            _ => self.wrong(&place, format!("expected two joints, found {}", joints.len())),
        }
    }
}
