//! Trusses for tests: built from short lists, or generated.
#![allow(dead_code, reason = "each test program uses a part")]

use chordwright::checks::{Finding, Limits, Report, Rule, report};
use chordwright::exact::{Rational, parse_fraction, whole};
use chordwright::measure::Written;
use chordwright::truss::{Figure, FigureKind, Joint, JointId, Member, Role, Support, SupportKind, Truss};

/// A truss with joints at these places, marked `J0`, `J1` ..., and members between them, marked `M0`, `M1` ...
pub(crate) fn frame(places: &[(i64, i64)], members: &[(usize, usize)]) -> Truss {
    let joints: Vec<_> = places.iter().map(|&(x, y)| (whole(x), whole(y))).collect();
    rational_frame(&joints, members)
}

/// The same with rational places.
pub(crate) fn rational_frame(places: &[(Rational, Rational)], members: &[(usize, usize)]) -> Truss {
    let joint = |(i, (x, y)): (usize, &(Rational, Rational))| Joint {
        mark: format!("J{i}"),
        x: Written::plain(x.clone()),
        y: Written::plain(y.clone()),
        loose: false,
    };
    let member = |(i, &(a, b)): (usize, &(usize, usize))| Member {
        mark: format!("M{i}"),
        from: JointId::new(a),
        to: JointId::new(b),
        role: Role::Other,
    };
    Truss {
        joints: places.iter().enumerate().map(joint).collect(),
        members: members.iter().enumerate().map(member).collect(),
        ..Truss::default()
    }
}

/// The truss with a pin at a joint.
pub(crate) fn pinned(mut truss: Truss, joint: usize) -> Truss {
    truss.supports.push(Support { joint: JointId::new(joint), kind: SupportKind::Pin });
    truss
}

/// The truss with a roller at a joint that holds along a normal.
pub(crate) fn rolling(mut truss: Truss, joint: usize, normal: (i64, i64)) -> Truss {
    let normal = [whole(normal.0), whole(normal.1)].map(Written::plain);
    truss.supports.push(Support { joint: JointId::new(joint), kind: SupportKind::Roller { normal } });
    truss
}

/// The truss with one more figure.
pub(crate) fn figured(mut truss: Truss, kind: FigureKind) -> Truss {
    let mark = format!("f{}", truss.figures.len() + 1);
    truss.figures.push(Figure { mark, kind, step: None });
    truss
}

/// The report with the usual limits.
pub(crate) fn usual(truss: &Truss) -> Report {
    report(truss, &Limits::default())
}

/// The findings of a rule.
pub(crate) fn of_rule(report: &Report, rule: Rule) -> Vec<&Finding> {
    report.findings.iter().filter(|finding| finding.rule == rule).collect()
}

/// The only finding of a rule.
pub(crate) fn only(report: &Report, rule: Rule) -> &Finding {
    let found = of_rule(report, rule);
    assert_eq!(found.len(), 1, "{}: {:?}", rule.name(), report.findings.iter().map(|f| &f.text).collect::<Vec<_>>());
    found[0]
}

/// A fraction from its text.
pub(crate) fn fraction(text: &str) -> Rational {
    parse_fraction(text).expect("a fraction")
}

/// A long truss with parallel chords and posts: two panels' worth of joints for each panel, pin and roller at the ends.
/// Four members a panel.
pub(crate) fn long_truss(panels: usize) -> Truss {
    let mut places = Vec::new();
    let mut members = Vec::new();
    let mut roles = Vec::new();
    let mut add = |member, role| {
        members.push(member);
        roles.push(role);
    };
    for panel in 0..=panels {
        places.push((whole(60 * panel as i64), whole(0)));
        places.push((whole(60 * panel as i64), whole(72)));
        let (low, high) = (2 * panel, 2 * panel + 1);
        add((low, high), Role::Post);
        if panel < panels {
            add((low, low + 2), Role::BottomChord);
            add((high, high + 2), Role::TopChord);
            if panel < panels / 2 { add((high, low + 2), Role::Web) } else { add((low, high + 2), Role::Web) }
        }
    }
    let mut truss = rational_frame(&places, &members);
    truss.members.iter_mut().zip(roles).for_each(|(member, role)| member.role = role);
    rolling(pinned(truss, 0), 2 * panels, (0, 1))
}

/// A square lattice of fields with one diagonal each, held at one side by pins at its ends.
pub(crate) fn lattice(side: usize) -> Truss {
    let at = |x: usize, y: usize| x * (side + 1) + y;
    let mut places = Vec::new();
    let mut members = Vec::new();
    for x in 0..=side {
        for y in 0..=side {
            // A little out of the straight, so that nothing is degenerate.
            places
                .push((100 * x as i64 + ((x * 7 + y * 13) % 11) as i64, 100 * y as i64 + ((x * 5 + y * 3) % 7) as i64));
            if x < side {
                members.push((at(x, y), at(x + 1, y)));
            }
            if y < side {
                members.push((at(x, y), at(x, y + 1)));
            }
            if x < side && y < side {
                members.push((at(x, y), at(x + 1, y + 1)));
            }
        }
    }
    rolling(pinned(frame(&places, &members), 0), at(side, 0), (0, 1))
}

/// A square lattice of straight lines with diagonals in the first row and column of fields only: just enough to stand, on
/// a pin and a roller.
pub(crate) fn bare_lattice(side: usize) -> Truss {
    let at = |x: usize, y: usize| x * (side + 1) + y;
    let mut places = Vec::new();
    let mut members = Vec::new();
    for x in 0..=side {
        for y in 0..=side {
            places.push((100 * x as i64, 80 * y as i64));
            if x < side {
                members.push((at(x, y), at(x + 1, y)));
            }
            if y < side {
                members.push((at(x, y), at(x, y + 1)));
            }
            if x < side && y < side && (x == 0 || y == 0) {
                members.push((at(x, y), at(x + 1, y + 1)));
            }
        }
    }
    rolling(pinned(frame(&places, &members), 0), at(side, 0), (0, 1))
}

/// Numbers without a pattern, always the same for the same seed.
pub(crate) struct Scatter(chordwright::exact::modular::Scatter);

impl Scatter {
    pub(crate) fn new(seed: u64) -> Scatter {
        Scatter(chordwright::exact::modular::Scatter::new(seed))
    }

    /// From 0 to `end` - 1.
    pub(crate) fn below(&mut self, end: u64) -> u64 {
        self.0.draw() % end
    }
}
