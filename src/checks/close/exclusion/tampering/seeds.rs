//! Certificates of trusses with a planted slip, judged for the truss without it, as they are and changed at random.

use super::{id, proof};
use crate::checks::close::Effort;
use crate::checks::close::exclusion::judge::{Case, accepts};
use crate::checks::close::exclusion::{Bound, Branch, Certificate, Link, Part, Source, Stress};
use crate::checks::close::meaning::{Axis, conditions};
use crate::checks::close::trial::Problem;
use crate::checks::close::verify::is_layout;
use crate::exact::{Point, Rational, Surd, nearest_degrees_of_spread, nearest_multiple, ratio, spread_between, whole};
use crate::measure::Written;
use crate::truss::{Figure, FigureId, FigureKind, Joint, JointId, Truss};
use num_bigint::BigInt;
use num_traits::{Signed, Zero};

/// Numbers from a seed (xorshift64*, Vigna 2016).
struct Dice(u64);

impl Dice {
    fn new(seed: u64) -> Dice {
        Dice(seed.wrapping_mul(0x9E37_79B9_7F4A_7C15) | 1)
    }

    fn next(&mut self) -> u64 {
        self.0 ^= self.0 >> 12;
        self.0 ^= self.0 << 25;
        self.0 ^= self.0 >> 27;
        self.0.wrapping_mul(0x2545_F491_4F6C_DD1D) >> 16
    }

    /// From 0 to n - 1.
    fn below(&mut self, n: usize) -> usize {
        (self.next() % n.max(1) as u64) as usize
    }

    /// From lo to hi, both included.
    fn between(&mut self, lo: i64, hi: i64) -> i64 {
        lo + (self.next() % (hi - lo + 1) as u64) as i64
    }
}

/// A truss whose figures are printed from true places, and these.
fn planted(dice: &mut Dice) -> (Truss, Vec<Point>) {
    let count = 3 + dice.below(4);
    let set = dice.below(3);
    let grid = dice.below(2) == 0;
    let jitter = |dice: &mut Dice| if grid { whole(0) } else { ratio(dice.between(-160, 160), 16) };
    let truth: Vec<Point> = (0..count as i64)
        .map(|i| Point { x: whole(i / 2 * 60) + jitter(dice), y: whole(i % 2 * 70) + jitter(dice) })
        .collect();
    let mut truss = Truss::default();
    for (index, point) in truth.iter().enumerate() {
        let loose = index >= set;
        let [x, y] = [&point.x, &point.y]
            .map(|v| Written::plain(if loose { (v + whole(dice.between(-3, 3))).round() } else { v.clone() }));
        truss.joints.push(Joint { mark: format!("J{index}"), x, y, loose });
    }
    for from in 0..count {
        for to in from + 1..(from + 3).min(count) {
            add(&mut truss, &truth, length(&truth, from, to), None);
        }
    }
    for _ in 0..count + dice.below(count) {
        let (kind, step) = any_kind(&truth, dice);
        add(&mut truss, &truth, kind, step);
    }
    assert_eq!(truss.problems(), Vec::new(), "a planted truss is fit to be checked");
    (truss, truth)
}

/// A truss of 4 to 8 panels, all joints but the first loose: strings along the bottom with their overall, rises, and the
/// length of every chord, post and diagonal, printed from true places. Every other one has no direction: lengths alone.
fn panelled(dice: &mut Dice) -> (Truss, Vec<Point>) {
    let panels = 4 + dice.below(5);
    let is_turning = dice.below(2) == 0;
    let mut jitter = |by: i64| ratio(dice.between(-16 * by, 16 * by), 16);
    let column = |i: usize| whole(64 * i as i64);
    let bottom: Vec<Point> = (0..=panels).map(|i| Point { x: column(i) + jitter(9), y: jitter(5) }).collect();
    let top = (0..=panels).map(|i| Point { x: column(i) + jitter(6), y: whole(90) + jitter(12) });
    let truth: Vec<Point> = bottom.into_iter().chain(top).collect();
    let mut truss = Truss::default();
    for (index, point) in truth.iter().enumerate() {
        let loose = index > 0;
        let [x, y] =
            [&point.x, &point.y].map(|v| Written::plain(if loose { (v + jitter(3)).round() } else { v.clone() }));
        truss.joints.push(Joint { mark: format!("J{index}"), x, y, loose });
    }
    let up = |i: usize| panels + 1 + i;
    let run = |from: usize, to: usize| FigureKind::Run {
        from: id(from),
        to: id(to),
        value: to_step(&(&truth[to].x - &truth[from].x), &ratio(1, 16)),
    };
    let rise = |to: usize| FigureKind::Rise {
        from: id(0),
        to: id(to),
        value: to_step(&(&truth[to].y - &truth[0].y), &ratio(1, 16)),
    };
    let mut figures: Vec<FigureKind> = Vec::new();
    if !is_turning {
        figures.extend((0..panels).map(|i| run(i, i + 1)));
        figures.push(run(0, panels));
        figures.extend((1..truth.len()).map(rise));
    }
    for i in 0..=panels {
        figures.push(length(&truth, i, up(i)));
        if i < panels {
            let both = if is_turning { vec![(i, up(i + 1)), (up(i), i + 1)] } else { vec![(i, up(i + 1))] };
            let sides = [(i, i + 1), (up(i), up(i + 1))].into_iter().chain(both);
            figures.extend(sides.map(|(from, to)| length(&truth, from, to)));
        }
    }
    figures.into_iter().for_each(|kind| add(&mut truss, &truth, kind, None));
    assert_eq!(truss.problems(), Vec::new(), "a planted truss is fit to be checked");
    (truss, truth)
}

/// Adds a figure that the truth agrees with.
fn add(truss: &mut Truss, truth: &[Point], kind: FigureKind, step: Option<Rational>) {
    let figure = Figure { mark: format!("f{}", truss.figures.len()), kind, step: step.map(Written::plain) };
    if conditions(truss, &figure).iter().all(|condition| condition.holds(truth)) {
        truss.figures.push(figure);
    }
}

fn to_step(value: &Rational, step: &Rational) -> Written {
    Written::plain(step * Rational::from_integer(nearest_multiple(value, step).expect("a step")))
}

fn length(truth: &[Point], from: usize, to: usize) -> FigureKind {
    let quadrance = (&truth[to] - &truth[from]).quadrance();
    let steps = Surd::of_quadrance(&quadrance).expect("not negative").nearest(&ratio(1, 16)).expect("a step").steps;
    let value = Written::plain(ratio(1, 16) * Rational::from_integer(steps));
    FigureKind::Length { from: id(from), to: id(to), value }
}

/// Relations are asked for whether they hold or not; those that do not are not added.
fn any_kind(truth: &[Point], dice: &mut Dice) -> (FigureKind, Option<Rational>) {
    let mut order: Vec<usize> = (0..truth.len()).collect();
    (0..order.len()).for_each(|at| order.swap(at, at + dice.below(truth.len() - at)));
    let (a, b, c, d) = (order[0], order[1], order[2], order[order.len() - 1]);
    let (from, to, at) = (id(a), id(b), id(c));
    let leg = &truth[b] - &truth[a];
    let (u, v) = (&truth[a] - &truth[c], &truth[b] - &truth[c]);
    let spread = spread_between(&u, &v).expect("joints apart");
    let (sixteenth, tenth, thousandth) = (ratio(1, 16), ratio(1, 10), ratio(1, 1000));
    match dice.below(12) {
        0 => (FigureKind::Run { from, to, value: to_step(&leg.x, &sixteenth) }, None),
        1 => (FigureKind::Rise { from, to, value: to_step(&leg.y, &sixteenth) }, None),
        2 if !leg.x.is_zero() && leg.y.abs() <= leg.x.abs() => {
            let rise = to_step(&(leg.y.abs() * whole(12) / leg.x.abs()), &sixteenth);
            (FigureKind::Pitch { from, to, rise, run: Written::plain(whole(12)) }, None)
        }
        3 | 4 => {
            let steps = nearest_degrees_of_spread(&spread, &tenth).expect("a step").0;
            let acute = &tenth * Rational::from_integer(steps);
            let degrees = if u.dot(&v).is_negative() { whole(180) - acute } else { acute };
            (FigureKind::Angle { at, from, to, value: Written::plain(degrees) }, Some(tenth))
        }
        5 => (FigureKind::Spread { at, from, to, value: to_step(&spread, &thousandth) }, Some(thousandth)),
        6 => (FigureKind::Square { at, from, to }, None),
        7 => (FigureKind::InLine { joints: vec![from, to, at] }, None),
        8 => (FigureKind::Parallel { first: [from, to], second: [at, id(d)] }, None).apart(c, d, length(truth, a, b)),
        9 => (FigureKind::Equal { first: [from, to], second: [at, id(d)] }, None).apart(c, d, length(truth, a, b)),
        10 => (FigureKind::Level { joints: vec![from, to] }, None),
        11 => (FigureKind::Plumb { joints: vec![from, to] }, None),
        _ => (length(truth, a, b), None),
    }
}

trait Apart {
    fn apart(self, a: usize, b: usize, otherwise: FigureKind) -> Self;
}

impl Apart for (FigureKind, Option<Rational>) {
    /// Itself where two joints are not the same.
    fn apart(self, a: usize, b: usize, otherwise: FigureKind) -> Self {
        if a == b { (otherwise, None) } else { self }
    }
}

/// The truss with one figure changed by a plain slip; `None` where the figure has no value or may not have that one.
fn slipped(truss: &Truss, dice: &mut Dice) -> Option<Truss> {
    let mut slipped = truss.clone();
    let figure = dice.below(truss.figures.len());
    let by = |lo: i64, hi: i64, of: i64, dice: &mut Dice| {
        ratio(dice.between(lo, hi) * if dice.below(2) == 0 { 1 } else { -1 }, of)
    };
    let (value, by) = match &mut slipped.figures[figure].kind {
        FigureKind::Run { value, .. } | FigureKind::Rise { value, .. } | FigureKind::Length { value, .. } => {
            (value, by(2, 64, 16, dice))
        }
        FigureKind::Pitch { rise, .. } => (rise, by(4, 32, 16, dice)),
        FigureKind::Angle { value, .. } => (value, by(5, 50, 10, dice)),
        FigureKind::Spread { value, .. } => (value, by(20, 100, 1000, dice)),
        _ => return None,
    };
    *value = Written::plain(&value.value + by);
    slipped.problems().is_empty().then_some(slipped)
}

/// Trusses that close, each with the certificate of a slip in it: what a judge of the truss without it must refuse.
fn cases(seeds: u64, plant: fn(&mut Dice) -> (Truss, Vec<Point>)) -> Vec<(u64, Truss, Vec<Point>, Certificate)> {
    let mut found = Vec::new();
    for seed in 0..seeds {
        let mut dice = Dice::new(seed + 1);
        let (truss, truth) = plant(&mut dice);
        let Some(slipped) = slipped(&truss, &mut dice) else { continue };
        let problem = Problem::new(&slipped, &Effort::default());
        if let Some(certificate) = proof(&problem) {
            assert!(accepts(&problem.case(&[]), &certificate), "seed {seed}");
            found.push((seed, truss, truth, certificate));
        }
    }
    found
}

#[test]
fn a_proof_of_a_slip_is_none_when_it_is_mended() {
    let mut kinds = [0usize; 5];
    for (seed, truss, truth, certificate) in cases(160, planted) {
        let problem = Problem::new(&truss, &Effort::default());
        assert!(is_layout(&truss, &problem.sides, &truth, &[]), "seed {seed}: the truth is a layout");
        assert!(!accepts(&problem.case(&[]), &certificate), "seed {seed}: {certificate:?}");
        kinds[match &certificate {
            Certificate::Set(_) => 0,
            Certificate::Chain { .. } => 1,
            Certificate::Polygon { .. } => 2,
            Certificate::Stress(Stress { branch: Branch::Empty, .. }) => 3,
            Certificate::Stress(_) => 4,
        }] += 1;
    }
    println!("{kinds:?}");
    assert!(kinds.iter().all(|count| *count >= 3), "proofs of every kind: {kinds:?}");
}

#[test]
fn no_random_change_is_accepted_where_there_is_a_layout() {
    let (mut changed, mut stresses) = (0, 0);
    for (seed, truss, truth, certificate) in cases(60, planted) {
        let problem = Problem::new(&truss, &Effort::default());
        assert!(is_layout(&truss, &problem.sides, &truth, &[]), "seed {seed}: the truth is a layout");
        let case = problem.case(&[]);
        let mut dice = Dice::new(seed + 1001);
        for _ in 0..24 {
            let mut tampered = certificate.clone();
            for _ in 0..=dice.below(4) {
                change(&mut tampered, &case, &mut dice);
            }
            assert!(!accepts(&case, &tampered), "seed {seed}: {tampered:?}");
            changed += 1;
            stresses += usize::from(matches!(tampered, Certificate::Stress(_)));
        }
    }
    println!("{changed} {stresses}");
    assert!(changed >= 600 && stresses >= 300, "{changed} of which {stresses} stresses");
}

#[test]
fn neither_a_mended_nor_a_changed_proof_is_accepted_of_middling_trusses() {
    let (mut stresses, mut splits, mut turned, mut changed) = (0, 0, 0, 0);
    let cases = cases(48, panelled);
    for (seed, truss, truth, certificate) in &cases {
        let problem = Problem::new(truss, &Effort::default());
        assert!(is_layout(truss, &problem.sides, truth, &[]), "seed {seed}: the truth is a layout");
        let case = problem.case(&[]);
        assert!(!accepts(&case, certificate), "seed {seed}: {certificate:?}");
        if let Certificate::Stress(stress) = certificate {
            stresses += 1;
            splits += usize::from(matches!(stress.branch, Branch::Split { .. }));
            turned += usize::from(stress.turned.is_some());
        }
        let mut dice = Dice::new(seed + 9001);
        for _ in 0..12 {
            let mut tampered = certificate.clone();
            for _ in 0..=dice.below(4) {
                change(&mut tampered, &case, &mut dice);
            }
            assert!(!accepts(&case, &tampered), "seed {seed}: {tampered:?}");
            changed += 1;
        }
    }
    println!("{} proofs, {stresses} stresses: {splits} split, {turned} turned; {changed} changed", cases.len());
    assert!(
        cases.len() >= 36 && stresses >= 24 && splits >= 4 && turned >= 8,
        "{} {stresses} {splits} {turned}",
        cases.len()
    );
}

#[test]
fn a_proof_of_a_middling_truss_needs_the_slip_in_it() {
    let mut needed = 0;
    for seed in 0..48 {
        let mut dice = Dice::new(seed + 1);
        let (truss, truth) = panelled(&mut dice);
        let Some(slipped) = slipped(&truss, &mut dice) else { continue };
        let wrong =
            FigureId::new((0..truss.figures.len()).find(|&at| truss.figures[at] != slipped.figures[at]).expect("one"));
        let problem = Problem::new(&slipped, &Effort::default());
        let Some(certificate) = proof(&problem) else { continue };
        assert!(accepts(&problem.case(&[]), &certificate), "seed {seed}");
        // Without the wrong figure the truth is a layout, so that no proof may be one; without a figure that is used the
        // proof is none, whatever could be proved.
        assert!(is_layout(&slipped, &problem.sides, &truth, &[wrong]), "seed {seed}");
        let used = crate::checks::close::explain::figures(&certificate);
        assert!(used.contains(&wrong), "seed {seed}: {certificate:?}");
        for figure in used {
            assert!(!accepts(&problem.case(&[figure]), &certificate), "seed {seed}: without {figure:?}");
        }
        needed += 1;
    }
    assert!(needed >= 36, "{needed}");
}

#[test]
fn no_made_up_stress_is_accepted_where_there_is_a_layout() {
    for seed in 0..40 {
        let mut dice = Dice::new(seed + 5001);
        let (truss, truth) = planted(&mut dice);
        let problem = Problem::new(&truss, &Effort::default());
        assert!(is_layout(&truss, &problem.sides, &truth, &[]), "seed {seed}: the truth is a layout");
        let case = problem.case(&[]);
        for _ in 0..12 {
            let stress = made_up(&case, &mut dice);
            assert!(!accepts(&case, &Certificate::Stress(stress.clone())), "seed {seed}: {stress:?}");
        }
    }
}

/// Every condition and side, around any joint, in units from far too large to far too small.
fn made_up(case: &Case, dice: &mut Dice) -> Stress {
    let every = |figure: usize| (0..case.conditions[figure].len()).map(move |c| (figure, c));
    let conditions = (0..case.conditions.len()).flat_map(every);
    let conditions =
        conditions.map(|(figure, condition)| Source { figure: FigureId::new(figure), condition }).collect();
    let mut stress = Stress {
        origin: id(dice.below(case.truss.joints.len())),
        turned: None,
        unit: unit(dice),
        conditions,
        sides: (0..case.sides.len()).collect(),
        branch: Branch::Empty,
    };
    if dice.below(2) == 0 {
        let directed = |source: &Source| {
            use crate::checks::close::meaning::Function;
            let function = &case.conditions[source.figure.index()][source.condition].function;
            matches!(function, Function::Along { .. } | Function::Slope { .. })
        };
        stress.conditions.retain(|source| !directed(source));
        stress.turned = Some(id(dice.below(case.truss.joints.len())));
    }
    for _ in 0..dice.below(4) {
        change_branch(&mut stress.branch, case, dice);
    }
    stress
}

/// A power of 2 from 2^-140 to 2^20.
fn unit(dice: &mut Dice) -> Rational {
    let bits = dice.below(160);
    Rational::new(BigInt::from(1) << 20, BigInt::from(1) << bits)
}

fn number(dice: &mut Dice) -> i128 {
    let size = i128::from(dice.next()) << dice.below(80);
    match dice.below(12) {
        0 => i128::MAX,
        1 => i128::MIN,
        2 => 0,
        3 => 1 << 60,
        4 => -(1 << 60),
        5..8 => -size,
        _ => size,
    }
}

fn joint(case: &Case, dice: &mut Dice) -> JointId {
    if dice.below(16) == 0 { id(usize::MAX) } else { id(dice.below(case.truss.joints.len() + 1)) }
}

fn source(case: &Case, dice: &mut Dice) -> Source {
    Source { figure: FigureId::new(dice.below(case.conditions.len() + 1)), condition: dice.below(8) / 7 }
}

fn part(case: &Case, dice: &mut Dice) -> Part {
    match dice.below(4) {
        0 => Part::Side(dice.below(case.sides.len() + 1)),
        _ => Part::Condition(source(case, dice), dice.below(3)),
    }
}

fn axis(dice: &mut Dice) -> Axis {
    if dice.below(2) == 0 { Axis::X } else { Axis::Y }
}

/// Changes something of a certificate.
fn change(certificate: &mut Certificate, case: &Case, dice: &mut Dice) {
    match certificate {
        Certificate::Set(of) => *of = source(case, dice),
        Certificate::Chain { axis: along, .. } if dice.below(8) == 0 => *along = axis(dice),
        Certificate::Chain { links, .. } | Certificate::Polygon { links } => change_links(links, case, dice),
        Certificate::Stress(stress) => change_stress(stress, case, dice),
    }
}

fn change_links(links: &mut Vec<Link>, case: &Case, dice: &mut Dice) {
    let at = dice.below(links.len());
    let Some(link) = links.get(at).copied() else { return };
    match dice.below(8) {
        0 => {
            links.remove(at);
        }
        1 => links.insert(at, link),
        2 => links[at].from = joint(case, dice),
        3 => links[at].to = joint(case, dice),
        4 => links[at].bound = Bound::Set,
        5 => links[at].bound = Bound::Figure(source(case, dice)),
        6 => (links[at].from, links[at].to) = (link.to, link.from),
        _ => {
            let other = dice.below(links.len());
            links.swap(at, other);
        }
    }
}

fn change_stress(stress: &mut Stress, case: &Case, dice: &mut Dice) {
    let at = dice.below(stress.conditions.len());
    match dice.below(16) {
        0 => stress.origin = joint(case, dice),
        1 => stress.turned = Some(joint(case, dice)),
        2 => stress.turned = None,
        3 => stress.unit = unit(dice),
        4 => stress.unit = ratio(dice.between(-1, 1), 1000),
        5 if !stress.conditions.is_empty() => {
            stress.conditions.remove(at);
        }
        6 => stress.conditions.push(source(case, dice)),
        7 => stress.sides.push(dice.below(case.sides.len() + 1)),
        8 => {
            stress.sides.pop();
        }
        _ => change_branch(&mut stress.branch, case, dice),
    }
}

fn change_branch(branch: &mut Branch, case: &Case, dice: &mut Dice) {
    match branch {
        Branch::Empty if dice.below(2) == 0 => {
            let around = case.truss.joints.iter().map(|_| [number(dice) >> 70, number(dice) >> 70]).collect();
            *branch = Branch::Combined { around, multipliers: vec![(part(case, dice), number(dice))] };
        }
        Branch::Split { halves, .. } if dice.below(3) > 0 => change_branch(&mut halves[dice.below(2)], case, dice),
        Branch::Split { halves, .. } if dice.below(3) == 0 => halves.swap(0, 1),
        Branch::Split { joint: of, .. } if dice.below(3) == 0 => *of = joint(case, dice),
        Branch::Split { axis: along, .. } if dice.below(3) == 0 => *along = axis(dice),
        Branch::Split { at, .. } => *at = number(dice),
        Branch::Combined { around, multipliers } if dice.below(4) > 0 => {
            change_combination(around, multipliers, case, dice);
        }
        _ => {
            let half = branch.clone();
            let halves = Box::new([half.clone(), half]);
            *branch = Branch::Split { joint: joint(case, dice), axis: axis(dice), at: number(dice) >> 70, halves };
        }
    }
}

fn change_combination(around: &mut Vec<[i128; 2]>, multipliers: &mut Vec<(Part, i128)>, case: &Case, dice: &mut Dice) {
    let (place, at) = (dice.below(around.len()), dice.below(multipliers.len()));
    match dice.below(9) {
        0 => {
            around.pop();
        }
        1 => around.push([number(dice), number(dice)]),
        2 | 3 if !around.is_empty() => around[place][dice.below(2)] = number(dice) >> dice.below(90),
        4 if !multipliers.is_empty() => {
            multipliers.remove(at);
        }
        5 if !multipliers.is_empty() => multipliers[at].1 = number(dice),
        6 if !multipliers.is_empty() => multipliers[at].1 = multipliers[at].1.wrapping_neg(),
        7 if !multipliers.is_empty() => multipliers[at].0 = part(case, dice),
        _ => multipliers.push((part(case, dice), number(dice))),
    }
}
