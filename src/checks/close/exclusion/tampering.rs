//! Real certificates tampered with, field by field and at random: the judge refuses every one.

mod seeds;

use super::judge::{Case, accepts};
use super::{Bound, Branch, Certificate, Link, Part, Source, Stress};
use crate::checks::close::Effort;
use crate::checks::close::meaning::Axis;
use crate::checks::close::trial::Problem;
use crate::checks::close::verify::is_layout;
use crate::exact::{Point, Rational, ratio, whole};
use crate::measure::Written;
use crate::truss::{Figure, FigureId, FigureKind, Joint, JointId, Member, Role, Truss};
use num_bigint::BigInt;
use num_traits::Zero;

/// A truss under construction; joints are named by their order.
struct Sheet(Truss);

impl Sheet {
    fn sixteenths() -> Sheet {
        Sheet(Truss::default())
    }

    fn joint(mut self, x: i64, y: i64, loose: bool) -> Sheet {
        let mark = format!("J{}", self.0.joints.len());
        self.0.joints.push(Joint { mark, x: Written::plain(whole(x)), y: Written::plain(whole(y)), loose });
        self
    }

    fn set(self, x: i64, y: i64) -> Sheet {
        self.joint(x, y, false)
    }

    fn loose(self, x: i64, y: i64) -> Sheet {
        self.joint(x, y, true)
    }

    fn figure(mut self, kind: FigureKind, step: Option<Rational>) -> Sheet {
        let mark = format!("f{}", self.0.figures.len());
        self.0.figures.push(Figure { mark, kind, step: step.map(Written::plain) });
        self
    }

    fn length(self, from: usize, to: usize, value: Rational) -> Sheet {
        self.figure(FigureKind::Length { from: id(from), to: id(to), value: Written::plain(value) }, None)
    }

    fn run(self, from: usize, to: usize, value: Rational) -> Sheet {
        self.figure(FigureKind::Run { from: id(from), to: id(to), value: Written::plain(value) }, None)
    }

    fn rise(self, from: usize, to: usize, value: Rational) -> Sheet {
        self.figure(FigureKind::Rise { from: id(from), to: id(to), value: Written::plain(value) }, None)
    }

    fn angle(self, [at, from, to]: [usize; 3], degrees: i64) -> Sheet {
        let kind = FigureKind::Angle { at: id(at), from: id(from), to: id(to), value: Written::plain(whole(degrees)) };
        self.figure(kind, Some(ratio(1, 10)))
    }

    fn pitch(self, from: usize, to: usize, rise: i64, run: i64) -> Sheet {
        let [rise, run] = [rise, run].map(|v| Written::plain(whole(v)));
        self.figure(FigureKind::Pitch { from: id(from), to: id(to), rise, run }, None)
    }

    fn member(mut self, from: usize, to: usize) -> Sheet {
        let mark = format!("M{}", self.0.members.len());
        self.0.members.push(Member { mark, from: id(from), to: id(to), role: Role::Other });
        self
    }

    fn truss(self) -> Truss {
        assert_eq!(self.0.problems(), Vec::new(), "a truss of the tests is fit to be checked");
        self.0
    }
}

fn id(index: usize) -> JointId {
    JointId::new(index)
}

fn source(figure: usize) -> Source {
    Source { figure: FigureId::new(figure), condition: 0 }
}

/// The proof that the search finds: without the sketch's sides, else with them.
fn proof(problem: &Problem) -> Option<Certificate> {
    let trial = problem.trial(&[], &problem.adjusted(&[]));
    if trial.layout.is_some() {
        return None;
    }
    let best = trial.best.as_ref();
    problem.exclusion(&[], best, false).or_else(|| problem.exclusion(&[], best, true))
}

/// A run between set joints that they contradict, one that they do not, and one to a loose joint.
fn set() -> Truss {
    let sheet = Sheet::sixteenths().set(0, 0).set(100, 0).loose(50, 0);
    sheet.run(0, 1, whole(101)).rise(0, 1, whole(0)).run(0, 2, whole(50)).rise(0, 2, whole(0)).truss()
}

/// Two runs to a joint from set joints that leave no place for it, with a third joint between.
fn chain() -> Truss {
    let sheet = Sheet::sixteenths().set(0, 0).set(100, 0).loose(40, 0).loose(60, 10);
    sheet.run(0, 2, whole(40)).run(2, 3, whole(20)).run(1, 3, whole(-39)).rise(0, 2, whole(-50)).truss()
}

fn polygon() -> Truss {
    let sheet = Sheet::sixteenths().loose(0, 0).loose(30, 40).loose(100, 0);
    sheet.length(0, 1, whole(48)).length(1, 2, whole(62)).length(0, 2, ratio(233, 2)).truss()
}

/// A joint on a run and a rise, but not where its lines to two others are square.
fn combined() -> Truss {
    let sheet = Sheet::sixteenths().set(0, 0).set(25, 0).loose(9, 11).run(0, 2, whole(9)).rise(0, 2, whole(13));
    sheet.figure(FigureKind::Square { at: id(2), from: id(0), to: id(1) }, None).truss()
}

/// A joint roughly placed, with an angle to it at each of three set joints: the lines do not meet.
fn several() -> Truss {
    let sheet = Sheet::sixteenths().set(0, 0).set(14, 0).set(30, 0).loose(6, 10);
    let run = FigureKind::Run { from: id(0), to: id(3), value: Written::plain(whole(5)) };
    let rise = FigureKind::Rise { from: id(0), to: id(3), value: Written::plain(whole(12)) };
    let sheet = sheet.figure(run, Some(whole(4))).figure(rise, Some(whole(4)));
    sheet.angle([0, 1, 3], 67).angle([1, 0, 3], 53).angle([2, 0, 3], 27).truss()
}

/// A joint on two lengths, above or below the line between set joints, and an angle that suits neither.
fn split() -> Truss {
    let sheet = Sheet::sixteenths().set(0, 0).set(14, 0).loose(6, 10);
    sheet.length(0, 2, whole(13)).length(1, 2, whole(15)).angle([0, 1, 2], 70).truss()
}

/// The same with no joint set.
fn turned() -> Truss {
    let sheet = Sheet::sixteenths().loose(0, 0).loose(14, 0).loose(6, 10);
    sheet.length(0, 1, whole(14)).length(0, 2, whole(13)).length(1, 2, whole(15)).angle([0, 1, 2], 70).truss()
}

/// A joint on two lengths lies above or below; a third length suits neither place.
fn split_empty() -> Truss {
    let sheet = Sheet::sixteenths().set(0, 0).set(14, 0).set(7, 1).loose(6, 10);
    sheet.length(0, 3, whole(13)).length(1, 3, whole(15)).length(2, 3, ratio(61, 5)).truss()
}

/// A slope that the run and the rise contradict: narrowing alone leaves nothing.
fn empty() -> Truss {
    let sheet = Sheet::sixteenths().set(0, 0).loose(10, 6);
    sheet.run(0, 1, whole(10)).rise(0, 1, whole(5)).pitch(0, 1, 12, 12).truss()
}

/// A joint that a length and a line to be parallel to put below, where it was sketched above.
fn sided() -> Truss {
    let sheet =
        Sheet::sixteenths().set(0, 0).set(25, 0).set(40, -10).set(60, -30).loose(9, 8).member(0, 1).member(1, 4);
    let run = FigureKind::Run { from: id(0), to: id(4), value: Written::plain(whole(9)) };
    let sheet = sheet.length(0, 4, whole(13)).figure(run, Some(whole(8)));
    sheet.figure(FigureKind::Parallel { first: [id(0), id(4)], second: [id(2), id(3)] }, None).truss()
}

/// A joint roughly on a line to be parallel to, below; the run and the length put it off that line.
fn apart() -> Truss {
    let sheet = Sheet::sixteenths().set(0, 0).set(40, -10).set(60, -30).loose(9, -8);
    let sheet = sheet.length(0, 3, whole(13)).run(0, 3, whole(9));
    sheet.figure(FigureKind::Parallel { first: [id(0), id(3)], second: [id(1), id(2)] }, None).truss()
}

/// Has the proof for a truss handed to `tamper`; every certificate that comes back is refused.
fn each_is_refused(truss: &Truss, tamper: impl FnOnce(&Certificate) -> Vec<(String, Certificate)>) {
    let certificate = proof(&Problem::new(truss, &Effort::default())).expect("a proof");
    each_of_this_is_refused(truss, &certificate, tamper);
}

/// The same for a given proof, which the judge accepts.
fn each_of_this_is_refused(
    truss: &Truss,
    certificate: &Certificate,
    tamper: impl FnOnce(&Certificate) -> Vec<(String, Certificate)>,
) {
    let problem = Problem::new(truss, &Effort::default());
    let case = problem.case(&[]);
    assert!(accepts(&case, certificate), "{certificate:?}");
    for (what, tampered) in tamper(certificate) {
        assert_ne!(tampered, *certificate, "{what} changes nothing");
        assert!(!accepts(&case, &tampered), "{what}: {tampered:?}");
    }
    for figure in super::super::explain::figures(certificate) {
        assert!(!accepts(&problem.case(&[figure]), certificate), "{figure:?} is disregarded: {certificate:?}");
    }
}

/// Figures and conditions that are not there.
fn no_sources() -> [Source; 4] {
    let wrong = |figure, condition| Source { figure, condition };
    let figure = FigureId::new;
    [wrong(figure(99), 0), wrong(figure(usize::MAX), 0), wrong(figure(0), 1), wrong(figure(0), usize::MAX)]
}

#[test]
fn a_figure_among_set_joints() {
    each_is_refused(&set(), |certificate| {
        assert_eq!(*certificate, Certificate::Set(source(0)));
        // The second holds; the others have a loose joint.
        let others = (1..4).map(source).chain(no_sources());
        others.map(|other| (format!("{other:?}"), Certificate::Set(other))).collect()
    });
}

/// Every way to spoil one link.
fn spoilt_links(link: Link) -> Vec<(String, Link)> {
    let mut spoilt = vec![
        ("reversed".to_owned(), Link { from: link.to, to: link.from, ..link }),
        ("to itself".to_owned(), Link { to: link.from, ..link }),
    ];
    for joint in [id(2), id(3), id(99), id(usize::MAX)] {
        spoilt.push((format!("from {joint:?}"), Link { from: joint, ..link }));
        spoilt.push((format!("to {joint:?}"), Link { to: joint, ..link }));
        spoilt.push((format!("between {joint:?} and itself"), Link { from: joint, to: joint, ..link }));
    }
    let figures = (0..4).map(source).chain(no_sources()).map(Bound::Figure);
    spoilt.extend(figures.chain([Bound::Set]).map(|bound| (format!("by {bound:?}"), Link { bound, ..link })));
    spoilt.retain(|(_, tampered)| *tampered != link);
    spoilt
}

/// Every way to spoil a row of links: one of them, one too few, one too many, two exchanged, all reversed.
fn spoilt_rows(links: &[Link]) -> Vec<(String, Vec<Link>)> {
    let mut spoilt = vec![("none".to_owned(), Vec::new())];
    for at in 0..links.len() {
        let with = |change: &dyn Fn(&mut Vec<Link>)| {
            let mut links = links.to_vec();
            change(&mut links);
            links
        };
        for (what, link) in spoilt_links(links[at]) {
            spoilt.push((format!("link {at} {what}"), with(&|links| links[at] = link)));
        }
        spoilt.push((format!("link {at} alone"), vec![links[at]]));
        spoilt.push((
            format!("without link {at}"),
            with(&|links| {
                links.remove(at);
            }),
        ));
        spoilt.push((format!("link {at} twice"), with(&|links| links.insert(at, links[at]))));
        spoilt.push((format!("link {at} there and back"), {
            let back = Link { from: links[at].to, to: links[at].from, ..links[at] };
            vec![links[at], back]
        }));
    }
    spoilt.push(("backwards".to_owned(), links.iter().rev().copied().collect()));
    let turned = |link: &Link| Link { from: link.to, to: link.from, ..*link };
    spoilt.push(("the other way round".to_owned(), links.iter().rev().map(turned).collect()));
    spoilt
}

#[test]
fn a_chain() {
    each_is_refused(&chain(), |certificate| {
        let Certificate::Chain { axis: Axis::X, links } = certificate else { panic!("{certificate:?}") };
        assert!(links.iter().any(|link| link.bound == Bound::Set), "one link is between set joints: {links:?}");
        let mut tampered: Vec<(String, Certificate)> = spoilt_rows(links)
            .into_iter()
            .map(|(what, links)| (what, Certificate::Chain { axis: Axis::X, links }))
            .collect();
        let mut exchanged = links.clone();
        exchanged.swap(0, 2);
        tampered.push(("two links exchanged".into(), Certificate::Chain { axis: Axis::X, links: exchanged }));
        tampered.push(("the other axis".into(), Certificate::Chain { axis: Axis::Y, links: links.clone() }));
        tampered.push(("taken for a polygon".into(), Certificate::Polygon { links: links.clone() }));
        tampered
    });
}

#[test]
fn a_polygon() {
    each_is_refused(&polygon(), |certificate| {
        let Certificate::Polygon { links } = certificate else { panic!("{certificate:?}") };
        // Either way along the longest is as good when the others go the same way; here they do not.
        let rows = spoilt_rows(links).into_iter().filter(|(what, _)| what != "the other way round");
        let mut tampered: Vec<(String, Certificate)> =
            rows.map(|(what, links)| (what, Certificate::Polygon { links })).collect();
        for other in 1..links.len() {
            let mut exchanged = links.clone();
            (exchanged[0].bound, exchanged[other].bound) = (exchanged[other].bound, exchanged[0].bound);
            tampered
                .push((format!("the bounds of 0 and {other} exchanged"), Certificate::Polygon { links: exchanged }));
            let mut exchanged = links.clone();
            exchanged.swap(0, other);
            tampered.push((format!("the links 0 and {other} exchanged"), Certificate::Polygon { links: exchanged }));
        }
        // In order and closed, with another side as the longest.
        let [longest, a, b] = [links[0], links[1], links[2]];
        let back = |link: Link| Link { from: link.to, to: link.from, ..link };
        let links_of = |links: [Link; 3]| Certificate::Polygon { links: links.to_vec() };
        tampered.push(("another is the longest".into(), links_of([a, longest, back(b)])));
        tampered.push(("the last is the longest".into(), links_of([b, back(a), longest])));
        for axis in [Axis::X, Axis::Y] {
            tampered.push(("taken for a chain".into(), Certificate::Chain { axis, links: links.clone() }));
        }
        tampered
    });
}

/// What a branch of a stress is changed to.
type Changes = Vec<(String, Branch)>;

/// Applies `spoil` to each branch of a tree in turn.
fn everywhere(branch: &Branch, spoil: &dyn Fn(&Branch) -> Changes) -> Changes {
    let mut changes = spoil(branch);
    if let Branch::Split { joint, axis, at, halves } = branch {
        for half in 0..2 {
            for (what, changed) in everywhere(&halves[half], spoil) {
                let mut halves = halves.clone();
                halves[half] = changed;
                changes.push((
                    format!("half {half}: {what}"),
                    Branch::Split { joint: *joint, axis: *axis, at: *at, halves },
                ));
            }
        }
    }
    changes
}

/// A part of a combination, with its multiplier.
type Weight = (Part, i128);

/// Every way to spoil a combination.
fn spoilt_combination(branch: &Branch) -> Changes {
    let Branch::Combined { around, multipliers } = branch else { return Vec::new() };
    let mut changes: Changes = vec![("empty".into(), Branch::Empty)];
    let mut places = |what: String, change: &dyn Fn(&mut Vec<[i128; 2]>)| {
        let mut around = around.clone();
        change(&mut around);
        changes.push((what, Branch::Combined { around, multipliers: multipliers.clone() }));
    };
    places("no places".into(), &Vec::clear);
    places("a place too few".into(), &|around| {
        around.pop();
    });
    places("a place too many".into(), &|around| around.push([0, 0]));
    for end in [i128::MIN, i128::MAX, 1 << 59, -(1 << 59), 1 << 100] {
        for place in 0..around.len() {
            for axis in 0..2 {
                places(format!("place {place} at {end} along {axis}"), &|around| around[place][axis] = end);
            }
        }
    }
    let mut weights = |what: String, change: &dyn Fn(&mut Vec<Weight>)| {
        let mut multipliers = multipliers.clone();
        change(&mut multipliers);
        changes.push((what, Branch::Combined { around: around.clone(), multipliers }));
    };
    weights("no multipliers".into(), &Vec::clear);
    weights("all turned".into(), &|multipliers| multipliers.iter_mut().for_each(|(_, m)| *m = -*m));
    let no_sides = [Part::Side(9), Part::Side(usize::MAX)];
    for part in no_sources().map(|source| Part::Condition(source, 0)).into_iter().chain(no_sides) {
        // Whatever it is multiplied with, what is not there may not be used.
        weights(format!("{part:?} as well"), &|multipliers| multipliers.push((part, 0)));
    }
    // A light one may be there for nothing but a better bound.
    let heaviest = multipliers.iter().map(|(_, multiplier)| multiplier.abs()).max().unwrap_or_default();
    let is_heavy = |(_, multiplier): &Weight| multiplier.abs() > heaviest / 4;
    let several = multipliers.iter().filter(|entry| is_heavy(entry)).count() > 1;
    for (at, (part, multiplier)) in multipliers.iter().enumerate().filter(|(_, entry)| is_heavy(entry)) {
        weights(format!("{at} turned"), &|multipliers| multipliers[at].1 = -multiplier);
        weights(format!("{at} dropped"), &|multipliers| {
            multipliers.remove(at);
        });
        weights(format!("{at} nothing"), &|multipliers| multipliers[at].1 = 0);
        let (same, opposite) = if *multiplier > 0 { (i128::MAX, i128::MIN) } else { (i128::MIN, i128::MAX) };
        weights(format!("{at} turned and greatest"), &|multipliers| multipliers[at].1 = opposite);
        if several {
            weights(format!("{at} greatest"), &|multipliers| multipliers[at].1 = same);
            weights(format!("{at} a thousandth"), &|multipliers| multipliers[at].1 = multiplier / 1000);
        }
        if let Part::Condition(source, _) = part {
            for form in [2, usize::MAX] {
                weights(format!("form {form}"), &|multipliers| multipliers[at].0 = Part::Condition(*source, form));
            }
        }
        for part in no_sources().map(|source| Part::Condition(source, 0)).into_iter().chain([Part::Side(9)]) {
            weights(format!("{at} of {part:?}"), &|multipliers| multipliers[at].0 = part);
        }
    }
    changes
}

/// Every way to spoil a split.
fn spoilt_split(branch: &Branch) -> Changes {
    let Branch::Split { joint, axis, at, halves } = branch else { return Vec::new() };
    let with = |joint: JointId, axis: Axis, at: i128| Branch::Split { joint, axis, at, halves: halves.clone() };
    let mut changes: Changes =
        vec![("empty".into(), Branch::Empty), ("across".into(), with(*joint, axis.other(), *at))];
    for joint in [id(0), id(1), id(99), id(usize::MAX)] {
        changes.push((format!("split at {joint:?}"), with(joint, *axis, *at)));
    }
    for at in [i128::MIN, i128::MAX, -(1 << 60), 1 << 60, -(15 << 40), 15 << 40] {
        changes.push((format!("split at {at}"), with(*joint, *axis, at)));
    }
    changes
}

fn spoilt_branches(branch: &Branch) -> Changes {
    let mut changes = everywhere(branch, &spoilt_combination);
    changes.extend(everywhere(branch, &spoilt_split));
    changes
}

/// Every way to spoil what a stress says beside its branches.
fn spoilt_frame(stress: &Stress, truss: &Truss) -> Vec<(String, Stress)> {
    let mut changes: Vec<(String, Stress)> = Vec::new();
    let mut with = |what: String, change: &dyn Fn(&mut Stress)| {
        let mut stress = stress.clone();
        change(&mut stress);
        changes.push((what, stress));
    };
    let last = id(truss.joints.len() - 1);
    for joint in [id(truss.joints.len()), id(usize::MAX)] {
        with(format!("from {joint:?}"), &|stress| stress.origin = joint);
        with(format!("turned to {joint:?}"), &|stress| stress.turned = Some(joint));
    }
    with("turned to the origin".into(), &|stress| stress.turned = Some(stress.origin));
    match stress.turned {
        None => with("turned".into(), &|stress| stress.turned = Some(last)),
        Some(_) => with("not turned".into(), &|stress| stress.turned = None),
    }
    with("no unit".into(), &|stress| stress.unit = Rational::zero());
    with("the unit turned".into(), &|stress| stress.unit = -&stress.unit);
    with("the unit too large".into(), &|stress| stress.unit = whole(1_000_000_000));
    with("the unit too small".into(), &|stress| stress.unit = Rational::new(1.into(), BigInt::from(1) << 90));
    with("no conditions".into(), &|stress| stress.conditions.clear());
    for at in 0..stress.conditions.len() {
        with(format!("without condition {at}"), &|stress| {
            stress.conditions.remove(at);
        });
        for source in no_sources() {
            with(format!("condition {at} is {source:?}"), &|stress| stress.conditions[at] = source);
        }
    }
    for source in no_sources() {
        with(format!("{source:?} as well"), &|stress| stress.conditions.push(source));
    }
    for side in [9, usize::MAX] {
        with(format!("side {side} as well"), &|stress| stress.sides.push(side));
    }
    changes
}

fn stress_of(certificate: &Certificate) -> &Stress {
    let Certificate::Stress(stress) = certificate else { panic!("{certificate:?}") };
    stress
}

fn each_stress_is_refused(truss: &Truss, more: impl FnOnce(&Stress) -> Vec<(String, Stress)>) {
    each_is_refused(truss, |certificate| spoilt_stresses(truss, certificate, more));
}

fn spoilt_stresses(
    truss: &Truss,
    certificate: &Certificate,
    more: impl FnOnce(&Stress) -> Vec<(String, Stress)>,
) -> Vec<(String, Certificate)> {
    let stress = stress_of(certificate);
    let branches = spoilt_branches(&stress.branch).into_iter();
    let branches = branches.map(|(what, branch)| (what, Stress { branch, ..stress.clone() }));
    let all = branches.chain(spoilt_frame(stress, truss)).chain(more(stress));
    all.map(|(what, stress)| (what, Certificate::Stress(stress))).collect()
}

/// The place of the loose joint, which is the last, moved by a few times the extent of the drawing.
fn moved(branch: &Branch) -> Changes {
    let Branch::Combined { around, multipliers } = branch else { return Vec::new() };
    let move_to = |axis: usize, by: i128| {
        let mut around = around.clone();
        let last = around.len() - 1;
        around[last][axis] += by;
        (format!("the place by {by} along {axis}"), Branch::Combined { around, multipliers: multipliers.clone() })
    };
    [(0, 1 << 50), (0, -(1 << 50)), (1, 1 << 50), (1, -(1 << 50))].map(|(axis, by)| move_to(axis, by)).to_vec()
}

fn with_branches(stress: &Stress, changes: Changes) -> Vec<(String, Stress)> {
    changes.into_iter().map(|(what, branch)| (what, Stress { branch, ..stress.clone() })).collect()
}

#[test]
fn a_stress_of_one_combination() {
    each_stress_is_refused(&combined(), |stress| {
        assert!(matches!(stress.branch, Branch::Combined { .. }), "{stress:?}");
        vec![("from another joint".into(), Stress { origin: id(2), ..stress.clone() })]
    });
}

#[test]
fn a_stress_of_several_figures() {
    each_stress_is_refused(&several(), |stress| {
        let Branch::Combined { multipliers, .. } = &stress.branch else { panic!("{stress:?}") };
        assert_eq!(multipliers.len(), 3, "{stress:?}");
        Vec::new()
    });
}

#[test]
fn a_stress_with_a_split() {
    each_stress_is_refused(&split(), |stress| {
        assert!(matches!(stress.branch, Branch::Split { .. }), "{stress:?}");
        vec![("from another joint".into(), Stress { origin: id(2), ..stress.clone() })]
    });
}

#[test]
fn a_stress_with_different_halves() {
    each_stress_is_refused(&apart(), |stress| with_branches(stress, everywhere(&stress.branch, &exchanged)));
}

fn exchanged(branch: &Branch) -> Changes {
    let Branch::Split { joint, axis, at, halves } = branch else { return Vec::new() };
    let [below, above] = halves.as_ref().clone();
    let halves = Box::new([above, below]);
    vec![("halves exchanged".into(), Branch::Split { joint: *joint, axis: *axis, at: *at, halves })]
}

#[test]
fn a_turned_stress() {
    each_stress_is_refused(&turned(), |stress| {
        assert_eq!(stress.turned, Some(id(1)), "{stress:?}");
        let mut changes = with_branches(stress, everywhere(&stress.branch, &moved));
        changes.push(("turned to another joint".into(), Stress { turned: Some(id(2)), ..stress.clone() }));
        changes.push(("from another joint".into(), Stress { origin: id(2), ..stress.clone() }));
        changes
    });
}

#[test]
fn a_stress_whose_halves_are_empty() {
    each_stress_is_refused(&split_empty(), |stress| {
        let Branch::Split { halves, .. } = &stress.branch else { panic!("{stress:?}") };
        assert_eq!(**halves, [Branch::Empty, Branch::Empty]);
        vec![("from another joint".into(), Stress { origin: id(3), ..stress.clone() })]
    });
}

#[test]
fn a_stress_that_leaves_no_place() {
    each_stress_is_refused(&empty(), |stress| {
        assert_eq!(stress.branch, Branch::Empty);
        Vec::new()
    });
}

#[test]
fn a_stress_with_a_side() {
    let truss = sided();
    // With (x, y) the loose joint's place, 5 times -20 x - 20 y, which is near to 0, and 4 times 25 y, which is not
    // negative, would be -100 x; but x is at least 5.
    let one = 1i128 << 40;
    let places = [[0, 0], [25, 0], [40, -10], [60, -30], [9, -9]];
    let branch = Branch::Combined {
        around: places.map(|place| place.map(|coordinate| coordinate * one)).to_vec(),
        multipliers: vec![(Part::Condition(source(2), 0), -5), (Part::Side(0), -4)],
    };
    let unit = Rational::new(1.into(), BigInt::from(one));
    let conditions = (0..3).map(source).collect();
    let stress = Stress { origin: id(0), turned: None, unit, conditions, sides: vec![0], branch };
    let certificate = Certificate::Stress(stress);
    each_of_this_is_refused(&truss, &certificate, |certificate| {
        spoilt_stresses(&truss, certificate, |stress| {
            vec![
                ("no sides".into(), Stress { sides: Vec::new(), ..stress.clone() }),
                ("another side".into(), Stress { sides: vec![1], ..stress.clone() }),
            ]
        })
    });
    let problem = Problem::new(&truss, &Effort::default());
    let mut other_side = problem.sides.clone();
    other_side[0].joints.swap(0, 1);
    for sides in [&[], other_side.as_slice()] {
        assert!(!accepts(&Case { sides, ..problem.case(&[]) }, &certificate), "{sides:?}");
    }
}

#[test]
fn a_place_beyond_all_boxes_is_not_excluded() {
    // The rise is 100 and the slope one in ten million: in units of a drawing of that height the joint lies beyond 2^60.
    let sheet = Sheet::sixteenths().set(0, 0).loose(10, 100).rise(0, 1, whole(100));
    let [rise, run] = [1, 10_000_000].map(|v| Written::plain(whole(v)));
    let truss = sheet.figure(FigureKind::Pitch { from: id(0), to: id(1), rise, run }, Some(Rational::zero())).truss();
    let problem = Problem::new(&truss, &Effort::default());
    let places = [Point::whole(0, 0), Point::whole(1_000_000_000, 100)];
    assert!(is_layout(&truss, &problem.sides, &places, &[]));
    for bits in [40, 44, 48, 60] {
        let unit = Rational::new(100.into(), BigInt::from(1) << bits);
        let conditions = vec![source(0), source(1)];
        let stress = Stress { origin: id(0), turned: None, unit, conditions, sides: Vec::new(), branch: Branch::Empty };
        assert!(!accepts(&problem.case(&[]), &Certificate::Stress(stress)), "2^{bits} units");
    }
}
