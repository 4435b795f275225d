//! Random trusses for round trips: every kind of figure and support, marks of all sorts, values typed in every way.
#![allow(dead_code, reason = "each test program uses a part")]

use chordwright::exact::{Rational, ratio, whole};
use chordwright::measure::{Sheet, Unit, Written};
use chordwright::truss::{Figure, FigureKind, Joint, JointId, Member, Role, Support, SupportKind, Truss};
use num_traits::{Signed, Zero};
use proptest::collection::vec;
use proptest::prelude::*;
use proptest::sample::{Index, select};
use std::collections::HashSet;

/// Any truss that is fit to be checked.
pub(crate) fn trusses() -> impl Strategy<Value = Truss> {
    let lists = (vec(joints(), 0..12), vec(members(), 0..16), vec(supports(), 0..4), vec(figures(), 0..16));
    (titles(), select(Unit::ALL.to_vec()), typed(), lists).prop_map(|(title, unit, step, lists)| {
        let (joints, members, supports, figures) = lists;
        let count = joints.len();
        let mut marks = Marks::default();
        let joints: Vec<Joint> = joints.into_iter().map(|joint| joint.build(unit, &mut marks)).collect();
        let mut marks = Marks::default();
        let members = members.into_iter().filter_map(|member| member.build(count, &mut marks)).collect();
        let supports = supports.into_iter().filter_map(|support| support.build(count)).collect();
        let mut marks = Marks::default();
        let figures = figures.into_iter().filter_map(|figure| figure.build(count, unit, &mut marks)).collect();
        Truss { title, unit, step: not_negative(step.length(unit)), joints, members, supports, figures }
    })
}

/// A truss as a drafter would draw it: a flat truss of so many panels, its bottom chord on `L0`, `L1` ..., every length
/// figured when `figures` are asked for.
pub(crate) fn flat_truss(panels: usize, figures: usize) -> Truss {
    let unit = Unit::In;
    let length = |value: Rational| Sheet::of(unit, &whole(0)).written(&value);
    // A span of 80 feet, and a depth that rises to the middle by 3/4 in 12.
    let panel = ratio(960, panels as i64);
    let depth = |i: usize| whole(72) + &panel * ratio(1, 16) * whole(i.min(panels - i));
    let joint = |letter: &str, i: usize, y: Rational| Joint {
        mark: format!("{letter}{i}"),
        x: length(&panel * whole(i)),
        y: length(y),
        loose: false,
    };
    let mut joints: Vec<Joint> = (0..=panels).map(|i| joint("L", i, whole(0))).collect();
    joints.extend((1..panels).map(|i| joint("U", i, depth(i))));
    let (low, high) = (JointId::new, |i: usize| JointId::new(panels + i));
    let mut members = Vec::new();
    let mut add = |letter: &str, number: usize, from: JointId, to: JointId, role: Role| {
        members.push(Member { mark: format!("{letter}{number}"), from, to, role });
    };
    (0..panels).for_each(|i| add("B", i + 1, low(i), low(i + 1), Role::BottomChord));
    add("T", 1, low(0), high(1), Role::TopChord);
    (1..panels - 1).for_each(|i| add("T", i + 1, high(i), high(i + 1), Role::TopChord));
    add("T", panels, high(panels - 1), low(panels), Role::TopChord);
    (1..panels).for_each(|i| add("P", i, low(i), high(i), Role::Post));
    for i in 1..panels - 1 {
        let (from, to) = if 2 * i < panels { (high(i), low(i + 1)) } else { (low(i), high(i + 1)) };
        add("W", i, from, to, Role::Web);
    }
    let normal = [0, 1].map(|n| Written::plain(whole(n)));
    let supports = vec![
        Support { joint: low(0), kind: SupportKind::Pin },
        Support { joint: low(panels), kind: SupportKind::Roller { normal } },
    ];
    let mut truss = Truss { title: "Warehouse roof, truss T1".into(), joints, members, supports, ..Truss::default() };
    truss.figures = (0..figures).map(|i| drawn_figure(&truss, i)).collect();
    truss
}

/// A figure of a member as a drafter would print it: its length, or its run, or its rise.
fn drawn_figure(truss: &Truss, i: usize) -> Figure {
    let member = &truss.members[i % truss.members.len()];
    let (from, to) = (member.from, member.to);
    let along = &truss.joint(to).point() - &truss.joint(from).point();
    let sheet = Sheet::of(truss.unit, &truss.step.value);
    let written = |text: String| Written::length(&text, truss.unit).expect("what a sheet prints reads back");
    let kind = if i < truss.members.len() {
        let length = chordwright::exact::Surd::of_quadrance(&along.quadrance()).expect("a length");
        FigureKind::Length { from, to, value: written(sheet.surd(&length).text) }
    } else if along.x.is_zero() {
        FigureKind::Rise { from, to, value: written(sheet.length(&along.y)) }
    } else {
        FigureKind::Run { from, to, value: written(sheet.length(&along.x)) }
    };
    Figure { mark: format!("f{}", i + 1), kind, step: None }
}

/// Marks, each once.
#[derive(Default)]
struct Marks(HashSet<String>);

impl Marks {
    fn once(&mut self, mark: String) -> String {
        let short = |n: usize| mark.chars().take(n).collect::<String>();
        let mut fresh = mark.clone();
        let mut count = 0;
        while !self.0.insert(fresh.clone()) {
            count += 1;
            fresh = format!("{}{count}", short(20));
        }
        fresh
    }
}

fn titles() -> impl Strategy<Value = String> {
    prop_oneof![
        Just(String::new()),
        Just("Boathouse roof, truss T3".to_string()),
        Just("</script><img src=x onerror=alert(1)> \"quoted\" \\ \u{0} \u{feff} 🪵".to_string()),
        any::<String>(),
    ]
}

fn marks() -> impl Strategy<Value = String> {
    let hostile = [
        "<img onerror=alert(1)>",
        "\"",
        "\\",
        "'",
        "{}",
        "a b",
        " ",
        "null",
        "L0\u{200f}",
        "é🪵",
        "0",
        "-1",
        "L007",
        "99999999999999999999",
    ];
    prop_oneof![
        3 => (select(vec!["L", "U", "", "B-"]), 0..30u32).prop_map(|(letters, n)| format!("{letters}{n}")),
        1 => select(hostile.to_vec()).prop_map(str::to_string),
        1 => "\\PC{1,24}",
    ]
}

/// What a value is typed from: a way of writing, and numbers.
#[derive(Clone, Debug)]
struct Typed {
    form: u8,
    minus: bool,
    a: u32,
    b: u32,
    c: u32,
}

fn typed() -> impl Strategy<Value = Typed> {
    (0..16u8, any::<bool>(), 0..100_000u32, 0..1000u32, 1..100u32).prop_map(|(form, minus, a, b, c)| Typed {
        form,
        minus,
        a,
        b,
        c,
    })
}

impl Typed {
    fn length(&self, unit: Unit) -> Written {
        let Typed { form, minus, a, b, c } = *self;
        let sheet = Sheet::of(unit, &whole(0));
        let value = Rational::new(a.into(), c.into());
        let text = match form {
            0 => format!("{a}'-{} {}/16\"", b % 12, c % 16),
            1 => format!("{a}'"),
            2 => format!("{a}.{b:03}"),
            3 => format!("{a}/{c}"),
            4 => format!("{a}'/{c}"),
            5 => format!("{} * {a}'-{}\"", c % 9 + 1, b % 12),
            6 => format!("({a}' - {b}\")/{c}"),
            7 => format!("{a} {}", unit.symbol()),
            8 => format!("{a}′ {}½″", b % 12),
            9 => sheet.exact_words(&value),
            10 => format!("  {a}  "),
            11 => format!("{a}.{b:03} m"),
            12 => format!("1/{}", "7".repeat(36)),
            13 => format!("{a} mm + {b} × 1/{c}\""),
            14 => format!("{}", a % 10),
            _ => return if minus { Written::plain(-value) } else { Written::plain(value) },
        };
        let text = if minus && !text.starts_with(' ') { format!("-{text}") } else { text };
        Written::length(&text, unit).unwrap_or_else(|error| panic!("`{text}`: {error}"))
    }

    fn number(&self) -> Written {
        let Typed { form, minus, a, b, c } = *self;
        let text = match form % 6 {
            0 => format!("{a}"),
            1 => format!("{a}/{c}"),
            2 => format!("{a}.{b:03}"),
            3 => format!("{a} {}/{c}", c - 1),
            4 => format!("({a} - {b}) * ½"),
            _ => Rational::new(a.into(), c.into()).to_string(),
        };
        let text = if minus { format!("-{text}") } else { text };
        Written::number(&text).unwrap_or_else(|error| panic!("`{text}`: {error}"))
    }

    fn degrees(&self) -> Written {
        let Typed { form, a, b, c, .. } = *self;
        let text = match form % 4 {
            0 => format!("{}.{}", a % 180, b),
            1 => format!("{}°", a % 181),
            2 => format!("180/{c} deg"),
            _ => format!("{} 1/{c}", a % 179),
        };
        Written::degrees(&text).unwrap_or_else(|error| panic!("`{text}`: {error}"))
    }

    fn spread(&self) -> Written {
        let Typed { form, a, b, c, .. } = *self;
        let text = match form % 4 {
            0 => format!("0.{b:03}"),
            1 => format!("{a}/{}", a + c),
            2 => "½".to_string(),
            _ => format!("1 - {b}/1000"),
        };
        Written::number(&text).unwrap_or_else(|error| panic!("`{text}`: {error}"))
    }
}

fn not_negative(written: Written) -> Written {
    if written.value.is_negative() { Written::plain(-written.value) } else { written }
}

#[derive(Clone, Debug)]
struct AnyJoint {
    mark: String,
    x: Typed,
    y: Typed,
    loose: bool,
}

fn joints() -> impl Strategy<Value = AnyJoint> {
    (marks(), typed(), typed(), any::<bool>()).prop_map(|(mark, x, y, loose)| AnyJoint { mark, x, y, loose })
}

impl AnyJoint {
    fn build(self, unit: Unit, marks: &mut Marks) -> Joint {
        Joint { mark: marks.once(self.mark), x: self.x.length(unit), y: self.y.length(unit), loose: self.loose }
    }
}

#[derive(Clone, Debug)]
struct AnyMember {
    mark: String,
    ends: [Index; 2],
    role: Role,
}

fn members() -> impl Strategy<Value = AnyMember> {
    (marks(), any::<[Index; 2]>(), select(Role::ALL.to_vec())).prop_map(|(mark, ends, role)| AnyMember {
        mark,
        ends,
        role,
    })
}

impl AnyMember {
    fn build(self, joints: usize, marks: &mut Marks) -> Option<Member> {
        if joints == 0 {
            return None;
        }
        let [from, to] = self.ends.map(|end| JointId::new(end.index(joints)));
        Some(Member { mark: marks.once(self.mark), from, to, role: self.role })
    }
}

#[derive(Clone, Debug)]
struct AnySupport {
    joint: Index,
    normal: Option<[Typed; 2]>,
}

fn supports() -> impl Strategy<Value = AnySupport> {
    let normal = proptest::option::of([typed(), typed()]);
    (any::<Index>(), normal).prop_map(|(joint, normal)| AnySupport { joint, normal })
}

impl AnySupport {
    fn build(self, joints: usize) -> Option<Support> {
        if joints == 0 {
            return None;
        }
        let normal = self.normal.map(|parts| parts.map(|part| part.number()));
        let kind = match normal.filter(|parts| parts.iter().any(|part| !part.value.is_zero())) {
            Some(normal) => SupportKind::Roller { normal },
            None => SupportKind::Pin,
        };
        Some(Support { joint: JointId::new(self.joint.index(joints)), kind })
    }
}

#[derive(Clone, Debug)]
struct AnyFigure {
    mark: String,
    kind: usize,
    joints: Vec<Index>,
    values: [Typed; 2],
    step: Option<Typed>,
}

fn figures() -> impl Strategy<Value = AnyFigure> {
    (marks(), 0..12usize, vec(any::<Index>(), 4..7), [typed(), typed()], proptest::option::of(typed()))
        .prop_map(|(mark, kind, joints, values, step)| AnyFigure { mark, kind, joints, values, step })
}

impl AnyFigure {
    fn build(self, count: usize, unit: Unit, marks: &mut Marks) -> Option<Figure> {
        let named = distinct(count, &self.joints);
        let needed = [2, 2, 2, 2, 3, 3, 3, 3, 2, 2, 2, 2][self.kind];
        if named.len() < needed {
            return None;
        }
        let kind = self.kind(&named, unit);
        let step = self.step.as_ref().map(|step| {
            not_negative(match kind {
                FigureKind::Pitch { .. } | FigureKind::Spread { .. } => step.number(),
                FigureKind::Angle { .. } => step.degrees(),
                _ => step.length(unit),
            })
        });
        Some(Figure { mark: marks.once(self.mark), kind, step })
    }

    fn kind(&self, named: &[JointId], unit: Unit) -> FigureKind {
        let [first, second] = &self.values;
        let (a, b) = (named[0], named[1]);
        let third = || named[2];
        // The second line may share an end with the first.
        let other = [named[named.len() - 1], named[named.len() - 2]];
        match self.kind {
            0 => FigureKind::Length { from: a, to: b, value: not_negative(first.length(unit)) },
            1 => FigureKind::Run { from: a, to: b, value: first.length(unit) },
            2 => FigureKind::Rise { from: a, to: b, value: first.length(unit) },
            3 => {
                let (rise, run) = (not_negative(first.number()), not_negative(second.number()));
                let none = rise.value.is_zero() && run.value.is_zero();
                FigureKind::Pitch { from: a, to: b, rise, run: if none { Written::plain(whole(12)) } else { run } }
            }
            4 => FigureKind::Angle { at: a, from: b, to: third(), value: first.degrees() },
            5 => FigureKind::Spread { at: a, from: b, to: third(), value: first.spread() },
            6 => FigureKind::Square { at: a, from: b, to: third() },
            7 => FigureKind::InLine { joints: named.to_vec() },
            8 => FigureKind::Parallel { first: [a, b], second: other },
            9 => FigureKind::Equal { first: [a, b], second: other },
            10 => FigureKind::Level { joints: named.to_vec() },
            _ => FigureKind::Plumb { joints: named.to_vec() },
        }
    }
}

/// Joints, no two the same.
fn distinct(count: usize, indices: &[Index]) -> Vec<JointId> {
    let mut rest: Vec<usize> = (0..count).collect();
    let mut named = Vec::new();
    for index in indices {
        if !rest.is_empty() {
            named.push(JointId::new(rest.remove(index.index(rest.len()))));
        }
    }
    named
}
