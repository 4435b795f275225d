//! Short ways to write trusses in the tests of closing.
#![allow(dead_code, unreachable_pub, missing_docs)]

pub mod generate;

use chordwright::exact::{Point, Rational, parse_fraction, ratio, whole};
use chordwright::measure::{Unit, Written};
use chordwright::truss::{Figure, FigureKind, Joint, JointId, Member, Role, Truss};

/// A value of the tests: an integer or `p/q`.
pub fn value(text: &str) -> Written {
    Written { text: text.into(), value: parse_fraction(text).expect("an integer or p/q") }
}

/// A truss under construction; joints are named by their marks.
#[derive(Clone, Debug, Default)]
pub struct Draft(pub Truss);

impl Draft {
    pub fn step(step: &str) -> Draft {
        Draft(Truss { step: value(step), unit: Unit::In, ..Truss::default() })
    }

    pub fn set(self, mark: &str, x: &str, y: &str) -> Draft {
        self.joint(mark, x, y, false)
    }

    pub fn loose(self, mark: &str, x: &str, y: &str) -> Draft {
        self.joint(mark, x, y, true)
    }

    fn joint(mut self, mark: &str, x: &str, y: &str, loose: bool) -> Draft {
        self.0.joints.push(Joint { mark: mark.into(), x: value(x), y: value(y), loose });
        self
    }

    pub fn id(&self, mark: &str) -> JointId {
        self.0.joint_marked(mark).unwrap_or_else(|| panic!("no joint {mark}"))
    }

    pub fn member(mut self, from: &str, to: &str) -> Draft {
        let (from, to) = (self.id(from), self.id(to));
        let mark = format!("M{}", self.0.members.len());
        self.0.members.push(Member { mark, from, to, role: Role::Other });
        self
    }

    pub fn figure(mut self, kind: FigureKind, step: Option<&str>) -> Draft {
        let mark = format!("f{}", self.0.figures.len() + 1);
        self.0.figures.push(Figure { mark, kind, step: step.map(value) });
        self
    }

    pub fn length(self, from: &str, to: &str, v: &str) -> Draft {
        let (from, to) = (self.id(from), self.id(to));
        self.figure(FigureKind::Length { from, to, value: value(v) }, None)
    }

    pub fn run(self, from: &str, to: &str, v: &str) -> Draft {
        let (from, to) = (self.id(from), self.id(to));
        self.figure(FigureKind::Run { from, to, value: value(v) }, None)
    }

    pub fn rise(self, from: &str, to: &str, v: &str) -> Draft {
        let (from, to) = (self.id(from), self.id(to));
        self.figure(FigureKind::Rise { from, to, value: value(v) }, None)
    }

    pub fn pitch(self, from: &str, to: &str, rise: &str, run: &str) -> Draft {
        let (from, to) = (self.id(from), self.id(to));
        self.figure(FigureKind::Pitch { from, to, rise: value(rise), run: value(run) }, None)
    }

    pub fn angle(self, at: &str, from: &str, to: &str, v: &str, step: &str) -> Draft {
        let (at, from, to) = (self.id(at), self.id(from), self.id(to));
        self.figure(FigureKind::Angle { at, from, to, value: value(v) }, Some(step))
    }

    pub fn spread(self, at: &str, from: &str, to: &str, v: &str, step: &str) -> Draft {
        let (at, from, to) = (self.id(at), self.id(from), self.id(to));
        self.figure(FigureKind::Spread { at, from, to, value: value(v) }, Some(step))
    }

    pub fn square(self, at: &str, from: &str, to: &str) -> Draft {
        let (at, from, to) = (self.id(at), self.id(from), self.id(to));
        self.figure(FigureKind::Square { at, from, to }, None)
    }

    pub fn parallel(self, a: &str, b: &str, c: &str, d: &str) -> Draft {
        let (first, second) = ([self.id(a), self.id(b)], [self.id(c), self.id(d)]);
        self.figure(FigureKind::Parallel { first, second }, None)
    }

    pub fn equal(self, a: &str, b: &str, c: &str, d: &str) -> Draft {
        let (first, second) = ([self.id(a), self.id(b)], [self.id(c), self.id(d)]);
        self.figure(FigureKind::Equal { first, second }, None)
    }

    pub fn in_line(self, marks: &[&str]) -> Draft {
        let joints = marks.iter().map(|mark| self.id(mark)).collect();
        self.figure(FigureKind::InLine { joints }, None)
    }

    pub fn level(self, marks: &[&str]) -> Draft {
        let joints = marks.iter().map(|mark| self.id(mark)).collect();
        self.figure(FigureKind::Level { joints }, None)
    }

    pub fn plumb(self, marks: &[&str]) -> Draft {
        let joints = marks.iter().map(|mark| self.id(mark)).collect();
        self.figure(FigureKind::Plumb { joints }, None)
    }

    pub fn truss(self) -> Truss {
        assert_eq!(self.0.problems(), Vec::new(), "a test truss is fit to be checked");
        self.0
    }
}

/// A rational from `p/q`.
pub fn r(text: &str) -> Rational {
    parse_fraction(text).expect("an integer or p/q")
}

/// The number `n/d`.
pub fn q(n: i64, d: i64) -> Rational {
    ratio(n, d)
}

/// The whole number `n`.
pub fn w(n: i64) -> Rational {
    whole(n)
}

/// True when places agree with every figure but those left out, by arithmetic of the tests' own: runs, rises and lengths, with
/// the intervals of the file format's contract.
pub fn agrees(truss: &Truss, places: &[Point], left_out: &[usize]) -> bool {
    let leg = |from: JointId, to: JointId| &places[to.index()] - &places[from.index()];
    truss.figures.iter().enumerate().filter(|(index, _)| !left_out.contains(index)).all(|(_, figure)| {
        let half = truss.step_of(figure) / whole(2);
        let within = |found: &Rational, printed: &Rational| *found >= printed - &half && *found <= printed + &half;
        match &figure.kind {
            FigureKind::Run { from, to, value } => within(&leg(*from, *to).x, &value.value),
            FigureKind::Rise { from, to, value } => within(&leg(*from, *to).y, &value.value),
            FigureKind::Length { from, to, value } => {
                let (least, most) = ((&value.value - &half).max(whole(0)), &value.value + &half);
                let found = leg(*from, *to).quadrance();
                found >= &least * &least && found <= &most * &most
            }
            other => panic!("no {} is planted", other.name()),
        }
    })
}
