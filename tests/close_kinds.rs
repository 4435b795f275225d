//! Each kind of figure alone: the one that decides where a loose joint lies.

mod close_help;

use chordwright::checks::{CloseAnswer, CloseState, Effort, Finding, Proof, Rule, close};
use chordwright::exact::{Point, Rational, Vector};
use chordwright::truss::{FigureId, FigureKind, JointId, Truss};
use close_help::{Draft, q, r, value, w};
use num_traits::{Signed, Zero};

fn ask(truss: &Truss) -> (CloseAnswer, Vec<Finding>) {
    close(truss, &Effort::default())
}

/// True when a leg's product with another, `product²` over the longer one's quadrance, is within the tolerance.
fn strays_little(product: &Rational, longest: &Rational, half: &Rational) -> bool {
    product * product <= half * half * longest
}

/// Degrees between two legs, in floats: an angle's range is irrational, and no place of these tests lies near its end.
fn degrees(u: &Vector, v: &Vector) -> f64 {
    let float = |v: &Rational| num_traits::ToPrimitive::to_f64(v).expect("a float");
    float(&u.cross(v)).abs().atan2(float(&u.dot(v))).to_degrees()
}

/// True when `|√a - √b| <= half`, by squaring twice.
fn nearly_equal(a: &Rational, b: &Rational, half: &Rational) -> bool {
    let left = a + b - half * half;
    !left.is_positive() || &left * &left <= w(4) * a * b
}

/// What a figure says about the places, by arithmetic of this test's own.
fn agrees(truss: &Truss, figure: usize, places: &[Point]) -> bool {
    let figure = &truss.figures[figure];
    let leg = |from: &JointId, to: &JointId| &places[to.index()] - &places[from.index()];
    let half = figure.step.as_ref().map_or(&truss.step.value, |step| &step.value) / w(2);
    let is_set = |id: &JointId| !truss.joint(*id).loose;
    // Between set joints a relation is exact.
    let relation = if figure.kind.joints().iter().all(is_set) { w(0) } else { half.clone() };
    let near = |found: &Rational, printed: &Rational| (found - printed).abs() <= half;
    match &figure.kind {
        FigureKind::Run { from, to, value } => near(&leg(from, to).x, &value.value),
        FigureKind::Rise { from, to, value } => near(&leg(from, to).y, &value.value),
        FigureKind::Length { from, to, value } => {
            let (least, most) = (&value.value - &half, &value.value + &half);
            let found = leg(from, to).quadrance();
            found >= &least * &least && found <= &most * &most
        }
        FigureKind::Pitch { from, to, rise, run } => {
            let leg = leg(from, to);
            let (x, y) = (leg.x.abs(), leg.y.abs());
            if rise.value <= run.value {
                near(&(y * &run.value / x), &rise.value)
            } else {
                near(&(x * &rise.value / y), &run.value)
            }
        }
        FigureKind::Angle { at, from, to, value } => {
            let printed = num_traits::ToPrimitive::to_f64(&value.value).expect("a float");
            let half = num_traits::ToPrimitive::to_f64(&half).expect("a float");
            (degrees(&leg(at, from), &leg(at, to)) - printed).abs() <= half
        }
        FigureKind::Spread { at, from, to, value } => {
            let (u, v) = (leg(at, from), leg(at, to));
            let cross = u.cross(&v);
            near(&(&cross * &cross / (u.quadrance() * v.quadrance())), &value.value)
        }
        FigureKind::Square { at, from, to } => {
            let (u, v) = (leg(at, from), leg(at, to));
            strays_little(&u.dot(&v), &u.quadrance().max(v.quadrance()), &relation)
        }
        FigureKind::Parallel { first, second } => {
            let (u, v) = (leg(&first[0], &first[1]), leg(&second[0], &second[1]));
            strays_little(&u.cross(&v), &u.quadrance().max(v.quadrance()), &relation)
        }
        FigureKind::Equal { first, second } => {
            let (u, v) = (leg(&first[0], &first[1]), leg(&second[0], &second[1]));
            nearly_equal(&u.quadrance(), &v.quadrance(), &relation)
        }
        FigureKind::InLine { joints } => {
            let line = leg(&joints[0], &joints[joints.len() - 1]);
            let off = |joint: &JointId| line.cross(&leg(&joints[0], joint));
            joints.iter().all(|joint| strays_little(&off(joint), &line.quadrance(), &relation))
        }
        FigureKind::Level { joints } => joints.iter().all(|joint| leg(&joints[0], joint).y.is_zero()),
        FigureKind::Plumb { joints } => joints.iter().all(|joint| leg(&joints[0], joint).x.is_zero()),
    }
}

/// Adds a figure to a drawing.
type Added = fn(Draft) -> Draft;

/// A joint C that one figure holds one way; the kind in question decides the other way.
struct Case {
    name: &'static str,
    /// The figure that leaves C one way to go.
    companion: Added,
    /// The figure in question.
    deciding: Added,
    /// A figure that it cannot go with.
    contradicting: Added,
    /// Where C lies, to a sixteenth of an inch or two.
    place: [i64; 2],
}

/// How the joints that C is figured from are held.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
enum Held {
    Set,
    Mixed,
    Loose,
}

/// The joints that C is figured from, all about A.
const AROUND: [(&str, i64, i64); 6] =
    [("A", 0, 0), ("B", 100, 0), ("E", 120, 160), ("F", 160, 80), ("G", 30, 80), ("H", 60, 0)];

fn drawing(held: Held) -> Draft {
    let mut draft = Draft::step("1/16");
    for (index, (mark, x, y)) in AROUND.into_iter().enumerate() {
        let loose = match held {
            Held::Set => false,
            Held::Mixed => index % 2 == 1,
            Held::Loose => true,
        };
        // A loose joint is sketched a little off.
        let off = i64::from(loose && index > 0);
        let (x, y) = ((x + 2 * off).to_string(), (y - off).to_string());
        draft = if loose { draft.loose(mark, &x, &y) } else { draft.set(mark, &x, &y) };
    }
    draft = draft.loose("C", "58", "75").member("A", "C").member("B", "C");
    for (index, (mark, x, y)) in AROUND.into_iter().enumerate().skip(1) {
        if held == Held::Loose || (held == Held::Mixed && index % 2 == 1) {
            draft = draft.run("A", mark, &x.to_string()).rise("A", mark, &y.to_string());
        }
    }
    draft
}

fn along(draft: Draft) -> Draft {
    draft.run("A", "C", "60")
}

fn up(draft: Draft) -> Draft {
    draft.rise("A", "C", "80")
}

fn too_low(draft: Draft) -> Draft {
    draft.rise("A", "C", "70")
}

fn too_short(draft: Draft) -> Draft {
    draft.length("A", "C", "90")
}

const CASES: [Case; 12] = [
    Case {
        name: "length",
        companion: along,
        deciding: |d| d.length("A", "C", "100"),
        contradicting: too_low,
        place: [60, 80],
    },
    Case { name: "run", companion: up, deciding: along, contradicting: too_short, place: [60, 80] },
    Case { name: "rise", companion: along, deciding: up, contradicting: too_short, place: [60, 80] },
    Case {
        name: "pitch",
        companion: along,
        deciding: |d| d.pitch("A", "C", "16", "12"),
        contradicting: too_low,
        place: [60, 80],
    },
    Case {
        name: "angle",
        companion: along,
        deciding: |d| d.angle("A", "B", "C", "531/10", "1/10"),
        contradicting: too_low,
        place: [60, 80],
    },
    Case {
        name: "spread",
        companion: along,
        deciding: |d| d.spread("A", "B", "C", "16/25", "1/1000"),
        contradicting: too_low,
        place: [60, 80],
    },
    Case {
        name: "square",
        companion: along,
        deciding: |d| d.square("C", "A", "B"),
        contradicting: too_low,
        place: [60, 49],
    },
    Case {
        name: "in line",
        companion: along,
        deciding: |d| d.in_line(&["A", "C", "E"]),
        contradicting: too_low,
        place: [60, 80],
    },
    Case {
        name: "parallel",
        companion: along,
        deciding: |d| d.parallel("A", "C", "B", "F"),
        contradicting: too_low,
        place: [60, 80],
    },
    Case {
        name: "equal",
        companion: along,
        deciding: |d| d.equal("A", "C", "A", "B"),
        contradicting: too_low,
        place: [60, 80],
    },
    Case {
        name: "level",
        companion: along,
        deciding: |d| d.level(&["G", "C"]),
        contradicting: too_short,
        place: [60, 80],
    },
    Case {
        name: "plumb",
        companion: up,
        deciding: |d| d.plumb(&["H", "C"]),
        contradicting: too_short,
        place: [60, 80],
    },
];

fn each(check: impl Fn(&Case, Draft, &str)) {
    for held in [Held::Set, Held::Mixed, Held::Loose] {
        for case in &CASES {
            let what = format!("{}, the others {held:?}", case.name);
            check(case, (case.companion)(drawing(held)), &what);
        }
    }
}

#[test]
fn the_kinds_are_all_there_are() {
    let mut names: Vec<String> = CASES
        .iter()
        .map(|case| {
            let truss = (case.deciding)(drawing(Held::Set)).truss();
            let kind = &truss.figures.last().expect("the figure in question").kind;
            assert_eq!(kind.name(), case.name);
            format!("{:?}", std::mem::discriminant(kind))
        })
        .collect();
    names.sort();
    names.dedup();
    assert_eq!(names.len(), 12);
}

#[test]
fn each_kind_alone_decides() {
    each(|case, draft, what| {
        let truss = (case.deciding)(draft).truss();
        let (answer, findings) = ask(&truss);
        let what = format!("{what}: {} {findings:?}", answer.summary);
        assert_eq!((answer.state, answer.proof), (CloseState::Closes, Proof::Layout), "{what}");
        let places = answer.layout.expect("a layout");
        for figure in 0..truss.figures.len() {
            assert!(agrees(&truss, figure, &places), "{what}: {} does not agree", truss.figures[figure].mark);
        }
        for (joint, place) in truss.joints.iter().zip(&places).filter(|(joint, _)| !joint.loose) {
            assert_eq!(joint.point(), *place, "{what}: {} is set", joint.mark);
        }
        let place = &places[truss.joint_marked("C").expect("C").index()] - &places[0];
        let off = [place.x - w(case.place[0]), place.y - w(case.place[1])];
        assert!(off.iter().all(|by| by.abs() < q(1, 2)), "{what}: off by {off:?}");
    });
}

#[test]
fn each_kind_is_contradicted_by_proof() {
    each(|case, draft, what| {
        let truss = (case.contradicting)((case.deciding)(draft)).truss();
        let (answer, findings) = ask(&truss);
        let what = format!("{what}: {} {findings:?}", answer.summary);
        assert_eq!((answer.state, answer.proof), (CloseState::DoesNotClose, Proof::Exclusion), "{what}");
        assert!(findings.iter().any(|finding| finding.rule == Rule::Excluded), "{what}");
        let last = truss.figures.len() - 1;
        let suspects: Vec<usize> = answer.suspects.iter().map(|suspect| suspect.figure.index()).collect();
        assert!(suspects.contains(&last), "{what}: the one that contradicts is no suspect");
        assert!(suspects.contains(&(last - 1)), "{what}: the one in question is no suspect");
        for suspect in &answer.suspects {
            let others = (0..truss.figures.len()).filter(|figure| FigureId::new(*figure) != suspect.figure);
            for figure in others {
                let mark = &truss.figures[figure].mark;
                assert!(agrees(&truss, figure, &suspect.layout), "{what}: {mark} without {:?}", suspect.figure);
            }
        }
    });
}

/// The figures that are suspected.
fn suspects(truss: &Truss) -> Vec<usize> {
    let (answer, _) = ask(truss);
    assert_eq!(answer.state, CloseState::DoesNotClose, "{}", answer.summary);
    answer.suspects.iter().map(|suspect| suspect.figure.index()).collect()
}

#[test]
fn an_exact_tie_is_suspected_like_any_other() {
    // Without any one of the three the two others close.
    let draft = || Draft::step("1/16").set("A", "0", "0").set("G", "30", "80").loose("C", "58", "75");
    let level = draft().run("A", "C", "60").level(&["G", "C"]).length("A", "C", "90").truss();
    let found = suspects(&level);
    assert!([0, 1, 2].iter().all(|figure| found.contains(figure)), "level: {found:?}");
    let plumb = draft().rise("A", "C", "80").plumb(&["G", "C"]).length("A", "C", "95").truss();
    let found = suspects(&plumb);
    assert!([0, 1, 2].iter().all(|figure| found.contains(figure)), "plumb: {found:?}");
}

#[test]
fn an_exact_tie_between_loose_joints_is_suspected_like_any_other() {
    // Both ends of the tie share a coordinate. Without any one of the named ones the others close.
    let draft = || Draft::step("1/16").set("A", "0", "0").loose("H", "62", "-1").loose("C", "58", "75");
    let plumb = draft().run("A", "H", "60").rise("A", "H", "0").rise("A", "C", "80").plumb(&["H", "C"]);
    let found = suspects(&plumb.length("A", "C", "90").truss());
    assert!([0, 2, 3, 4].iter().all(|figure| found.contains(figure)), "plumb: {found:?}");
    // H may stand at any height: its rise is not to blame.
    assert!(!found.contains(&1), "{found:?}");
    let level = draft().run("A", "H", "62").rise("A", "H", "80").run("A", "C", "60").level(&["H", "C"]);
    let found = suspects(&level.length("A", "C", "90").truss());
    assert!([1, 2, 3, 4].iter().all(|figure| found.contains(figure)), "level: {found:?}");
    assert!(!found.contains(&0), "{found:?}");
}

#[test]
fn exact_figures_that_leave_nothing_open_are_contradicted_by_proof() {
    // 65² = 16² + 63² = 33² + 56², so that without any one of the three the others meet at whole numbers.
    let exact = Draft::step("0").set("A", "0", "0").loose("C", "20", "40").run("A", "C", "16").rise("A", "C", "33");
    let found = suspects(&exact.length("A", "C", "65").truss());
    assert!([0, 1, 2].iter().all(|figure| found.contains(figure)), "{found:?}");
}

#[test]
fn without_the_kind_the_joint_is_named() {
    each(|_, draft, what| {
        let truss = draft.truss();
        let (answer, findings) = ask(&truss);
        let what = format!("{what}: {} {findings:?}", answer.summary);
        assert_eq!((answer.state, answer.proof), (CloseState::TooFewFigures, Proof::Layout), "{what}");
        let joint = truss.joint_marked("C").expect("C");
        assert_eq!(answer.free_joints, vec![joint], "{what}");
        let wanting: Vec<&Finding> = findings.iter().filter(|f| f.rule == Rule::NeedsAFigure).collect();
        assert_eq!(wanting.len(), 1, "{what}");
        assert_eq!(wanting[0].joints, vec![joint], "{what}");
        assert!(wanting[0].text.starts_with("C can still move"), "{what}");
    });
}

/// A figure alone with its own step, beside figures that put C at (60, 80) to a sixteenth.
fn own_step(kind: fn(&Draft) -> FigureKind, step: &str) -> CloseState {
    let draft = up(along(drawing(Held::Set)));
    let kind = kind(&draft);
    ask(&draft.figure(kind, Some(step)).truss()).0.state
}

/// A kind, and a step that is too fine for it beside one that is just coarse enough.
type Stepped = (&'static str, fn(&Draft) -> FigureKind, &'static str, &'static str);

#[test]
fn a_figure_keeps_to_its_own_step() {
    let cases: [Stepped; 10] = [
        ("length", |d| FigureKind::Length { from: d.id("A"), to: d.id("C"), value: value("102") }, "3", "4"),
        ("run", |d| FigureKind::Run { from: d.id("B"), to: d.id("C"), value: value("-38") }, "3", "4"),
        ("rise", |d| FigureKind::Rise { from: d.id("E"), to: d.id("C"), value: value("-78") }, "3", "4"),
        (
            "pitch",
            |d| FigureKind::Pitch { from: d.id("A"), to: d.id("C"), rise: value("16"), run: value("11") },
            "1",
            "2",
        ),
        (
            "angle",
            |d| FigureKind::Angle { at: d.id("A"), from: d.id("B"), to: d.id("C"), value: value("55") },
            "3",
            "4",
        ),
        (
            "spread",
            |d| FigureKind::Spread { at: d.id("A"), from: d.id("B"), to: d.id("C"), value: value("7/10") },
            "1/10",
            "1/8",
        ),
        ("square", |d| FigureKind::Square { at: d.id("A"), from: d.id("G"), to: d.id("C") }, "1/16", "200"),
        // C is √2000 off the line from A to F.
        ("in line", |d| FigureKind::InLine { joints: vec![d.id("A"), d.id("C"), d.id("F")] }, "89", "90"),
        (
            "parallel",
            |d| FigureKind::Parallel { first: [d.id("A"), d.id("C")], second: [d.id("G"), d.id("F")] },
            "159",
            "161",
        ),
        // 100 against √26000.
        (
            "equal",
            |d| FigureKind::Equal { first: [d.id("A"), d.id("C")], second: [d.id("B"), d.id("E")] },
            "122",
            "123",
        ),
    ];
    for (name, kind, fine, coarse) in cases {
        assert_eq!(own_step(kind, fine), CloseState::DoesNotClose, "{name} to {fine}");
        assert_eq!(own_step(kind, coarse), CloseState::Closes, "{name} to {coarse}");
    }
}

#[test]
fn a_step_of_its_own_does_not_loosen_a_level_or_a_plumb_line() {
    let exact: [fn(&Draft) -> FigureKind; 2] = [
        |d| FigureKind::Level { joints: vec![d.id("C"), d.id("X")] },
        |d| FigureKind::Plumb { joints: vec![d.id("C"), d.id("Y")] },
    ];
    for kind in exact {
        for (off, expected) in [("0", CloseState::Closes), ("1", CloseState::DoesNotClose)] {
            let [x, y] = [w(60) + r(off), w(80) + r(off)].map(|v| v.to_string());
            let draft = up(along(drawing(Held::Set).set("X", "200", &y).set("Y", &x, "200")));
            let kind = kind(&draft);
            let (answer, _) = ask(&draft.figure(kind, Some("10")).truss());
            assert_eq!(answer.state, expected, "{off} off: {}", answer.summary);
        }
    }
}

#[test]
fn two_fixed_frames_with_a_loose_joint_between() {
    let frames = |reach: &str| {
        let frames = [("A", "0", "0"), ("B", "0", "50"), ("P", "300", "0"), ("Q", "300", "50")];
        let draft = frames.into_iter().fold(Draft::step("1/16"), |draft, (mark, x, y)| draft.set(mark, x, y));
        draft.loose("C", "120", "70").length("B", "C", "130").length("C", "Q", reach)
    };
    // From (0, 50) and (300, 50): 120 and 180 along, 50 up.
    let truss = frames("2989/16").truss();
    let (answer, _) = ask(&truss);
    assert_eq!((answer.state, answer.proof), (CloseState::Closes, Proof::Layout), "{}", answer.summary);
    let places = answer.layout.expect("a layout");
    assert!((0..2).all(|figure| agrees(&truss, figure, &places)));
    let by = &places[4] - &Point::whole(120, 100);
    assert!(by.x.abs() < q(1, 2) && by.y.abs() < q(1, 2), "{by:?}");

    let (answer, _) = ask(&frames("150").truss());
    assert_eq!((answer.state, answer.proof), (CloseState::DoesNotClose, Proof::Exclusion), "{}", answer.summary);
    let suspects: Vec<usize> = answer.suspects.iter().map(|suspect| suspect.figure.index()).collect();
    assert!(suspects.contains(&0) && suspects.contains(&1), "{suspects:?}");

    let (answer, _) = ask(&frames("2989/16").rise("P", "C", "90").truss());
    assert_eq!((answer.state, answer.proof), (CloseState::DoesNotClose, Proof::Exclusion), "{}", answer.summary);
    assert!(answer.suspects.iter().any(|suspect| suspect.figure.index() == 2), "{}", answer.summary);

    let mut one = frames("150");
    one.0.figures.pop();
    let (answer, _) = ask(&one.truss());
    assert_eq!((answer.state, answer.free_joints), (CloseState::TooFewFigures, vec![JointId::new(4)]));
}

#[test]
fn shapes_without_a_set_joint_and_without_a_direction() {
    let two_sides = || {
        let draft = Draft::step("1/16").loose("A", "3", "4").loose("B", "100", "9").loose("C", "40", "60");
        draft.length("A", "B", "100").length("A", "C", "75")
    };
    let deciding: [(&str, Added); 5] = [
        ("length", |d| d.length("B", "C", "95")),
        ("angle", |d| d.angle("A", "B", "C", "60", "1/10")),
        ("spread", |d| d.spread("A", "B", "C", "3/4", "1/1000")),
        ("square", |d| d.square("C", "A", "B")),
        ("equal", |d| d.equal("A", "B", "B", "C")),
    ];
    for (name, decide) in deciding {
        let truss = decide(two_sides()).truss();
        let (answer, findings) = ask(&truss);
        assert_eq!(answer.state, CloseState::Closes, "{name}: {} {findings:?}", answer.summary);
        let places = answer.layout.expect("a layout");
        assert!((0..3).all(|figure| agrees(&truss, figure, &places)), "{name}");
        assert_eq!(places[0], Point::whole(0, 0), "{name}: the first joint sits at the origin");

        let (answer, findings) = ask(&decide(two_sides()).length("B", "C", "55").truss());
        let what = format!("{name}: {} {findings:?}", answer.summary);
        assert_eq!((answer.state, answer.proof), (CloseState::DoesNotClose, Proof::Exclusion), "{what}");
        assert!(answer.suspects.iter().any(|suspect| suspect.figure.index() == 3), "{what}");
    }
    let (answer, findings) = ask(&two_sides().truss());
    assert_eq!(answer.state, CloseState::TooFewFigures, "{}", answer.summary);
    assert!(!answer.free_joints.is_empty(), "{findings:?}");
    assert_eq!(findings.iter().filter(|f| f.rule == Rule::NeedsAFigure).count(), 1, "{findings:?}");
}

#[test]
fn a_joint_very_far_away_is_not_excluded() {
    for run in ["1000000", "10000000", "1000000000"] {
        let draft = Draft::step("1/16").set("A", "0", "0").loose("B", "10", "100").rise("A", "B", "100");
        let kind = FigureKind::Pitch { from: draft.id("A"), to: draft.id("B"), rise: value("1"), run: value(run) };
        let truss = draft.figure(kind, Some("0")).truss();
        let far = Point { x: w(100) * r(run), y: w(100) };
        assert!((0..2).all(|figure| agrees(&truss, figure, &[Point::whole(0, 0), far.clone()])));
        let (answer, _) = ask(&truss);
        assert_ne!(answer.state, CloseState::DoesNotClose, "1:{run}: {}", answer.summary);
    }
}
