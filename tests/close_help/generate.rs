//! Trusses from seeds: a true geometry, figured to a step, with a rough sketch; and slips of the pen planted in them.

use super::{Draft, q, w};
use chordwright::exact::{Point, Rational, Surd, nearest_multiple};
use chordwright::measure::Written;
use chordwright::truss::{Figure, FigureKind, Joint, JointId, Member, Role, Truss};

/// Numbers from a seed (xorshift64*, Vigna 2016).
#[derive(Clone, Debug)]
pub struct Dice(u64);

impl Dice {
    pub fn new(seed: u64) -> Dice {
        Dice(seed.wrapping_mul(0x9E37_79B9_7F4A_7C15) | 1)
    }

    pub fn next(&mut self) -> u64 {
        self.0 ^= self.0 >> 12;
        self.0 ^= self.0 << 25;
        self.0 ^= self.0 >> 27;
        self.0.wrapping_mul(0x2545_F491_4F6C_DD1D) >> 16
    }

    /// From 0 to n - 1.
    pub fn below(&mut self, n: usize) -> usize {
        (self.next() % n as u64) as usize
    }

    /// From lo to hi, both included.
    pub fn between(&mut self, lo: i64, hi: i64) -> i64 {
        lo + (self.next() % (hi - lo + 1) as u64) as i64
    }
}

#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Shape {
    Parallel,
    Gable,
    Bowed,
    Scissors,
    Irregular,
}

pub const SHAPES: [Shape; 5] = [Shape::Parallel, Shape::Gable, Shape::Bowed, Shape::Scissors, Shape::Irregular];

/// A drawing and the truth it was made from.
#[derive(Clone, Debug)]
pub struct Planted {
    pub truss: Truss,
    pub truth: Vec<Point>,
}

/// A joint's mark and its true place.
type Marked = (String, Point);

/// Two joints that a member joins, and what it is for.
type Joined = (usize, usize, Role);

/// True places: bottom joints L0..Ln, top joints U1..U(n-1) (parallel: U0..Un), in inches.
fn truth(shape: Shape, panels: usize, dice: &mut Dice) -> (Vec<Marked>, Vec<Joined>) {
    let panel = q(dice.between(48 * 64, 84 * 64), 64);
    let height = q(dice.between(60 * 64, 110 * 64), 64);
    let n = panels as i64;
    let mut xs: Vec<Rational> = vec![w(0)];
    for _ in 0..panels {
        let width = if shape == Shape::Irregular { q(dice.between(40 * 64, 90 * 64), 64) } else { panel.clone() };
        let last = xs.last().cloned().unwrap_or_else(|| w(0));
        xs.push(last + width);
    }
    let mut jitter =
        |spread: i64| if shape == Shape::Irregular { q(dice.between(-spread * 64, spread * 64), 64) } else { w(0) };
    let rise = |i: i64| -> Rational {
        let from_end = i.min(n - i);
        match shape {
            Shape::Parallel | Shape::Irregular => height.clone(),
            Shape::Gable => q(20, 1) + w(from_end) * q(28, 1),
            Shape::Bowed => q(40, 1) + &height * q(4 * i * (n - i), n * n),
            Shape::Scissors => q(30, 1) + w(from_end) * q(40, 1),
        }
    };
    let bottom = |i: i64| if shape == Shape::Scissors { w(i.min(n - i)) * q(16, 1) } else { w(0) };
    let mut joints = Vec::new();
    for (i, x) in xs.iter().enumerate() {
        let y = bottom(i as i64) + if i > 0 && i < panels { jitter(8) } else { w(0) };
        joints.push((format!("L{i}"), Point { x: x.clone(), y }));
    }
    let ends = if shape == Shape::Parallel || shape == Shape::Bowed { (0, panels) } else { (1, panels - 1) };
    let top: Vec<usize> = (ends.0..=ends.1).collect();
    for &i in &top {
        let point = Point { x: &xs[i] + jitter(6), y: rise(i as i64) + jitter(10) };
        joints.push((format!("U{i}"), point));
    }
    let u = |i: usize| panels + 1 + i - ends.0;
    let mut members = Vec::new();
    (0..panels).for_each(|i| members.push((i, i + 1, Role::BottomChord)));
    top.windows(2).for_each(|pair| members.push((u(pair[0]), u(pair[1]), Role::TopChord)));
    top.iter().for_each(|&i| members.push((i, u(i), Role::Post)));
    if ends.0 == 1 {
        members.push((0, u(1), Role::TopChord));
        members.push((panels, u(panels - 1), Role::TopChord));
    }
    for i in ends.0..ends.1 {
        let (a, b) = if i < panels / 2 { (u(i), i + 1) } else { (i, u(i + 1)) };
        members.push((a, b, Role::Web));
    }
    (joints, members)
}

/// A clean drawing: strings with an overall, rises and all member lengths, each rounded to `step`.
pub fn clean(shape: Shape, panels: usize, seed: u64) -> Planted {
    let mut dice = Dice::new(seed.wrapping_mul(31).wrapping_add(panels as u64));
    let step = q(1, 16);
    let (joints, members) = truth(shape, panels, &mut dice);
    let mut draft = Draft::step("1/16");
    for (index, (mark, point)) in joints.iter().enumerate() {
        let off = |dice: &mut Dice| if index == 0 { w(0) } else { w(dice.between(-6, 6)) };
        let (x, y) = (&point.x + off(&mut dice), &point.y + off(&mut dice));
        let rough = |v: Rational| Written::plain(if index == 0 { v } else { v.round() });
        draft.0.joints.push(Joint { mark: mark.clone(), x: rough(x), y: rough(y), loose: index != 0 });
    }
    for (index, (from, to, role)) in members.iter().enumerate() {
        let (from, to) = (JointId::new(*from), JointId::new(*to));
        draft.0.members.push(Member { mark: format!("M{index}"), from, to, role: *role });
    }
    let truth: Vec<Point> = joints.into_iter().map(|(_, point)| point).collect();
    figure_it(&mut draft.0, &truth, panels, &step);
    Planted { truss: draft.truss(), truth }
}

fn figure_it(truss: &mut Truss, truth: &[Point], panels: usize, step: &Rational) {
    let printed =
        |v: Rational| Written::plain(step * Rational::from_integer(nearest_multiple(&v, step).expect("a step")));
    let mut add = |kind: FigureKind| {
        let mark = format!("f{}", truss.figures.len() + 1);
        truss.figures.push(Figure { mark, kind, step: None });
    };
    let id = JointId::new;
    for i in 0..panels {
        add(FigureKind::Run { from: id(i), to: id(i + 1), value: printed(&truth[i + 1].x - &truth[i].x) });
    }
    add(FigureKind::Run { from: id(0), to: id(panels), value: printed(&truth[panels].x - &truth[0].x) });
    for (i, point) in truth.iter().enumerate().skip(1) {
        add(FigureKind::Rise { from: id(0), to: id(i), value: printed(&point.y - &truth[0].y) });
    }
    let ends: Vec<[JointId; 2]> = truss.members.iter().map(Member::ends).collect();
    for [from, to] in ends {
        let leg = &truth[to.index()] - &truth[from.index()];
        let length = Surd::of_quadrance(&leg.quadrance()).expect("not negative").nearest(step).expect("a step");
        let value = Written::plain(step * Rational::from_integer(length.steps));
        let mark = format!("f{}", truss.figures.len() + 1);
        truss.figures.push(Figure { mark, kind: FigureKind::Length { from, to, value }, step: None });
    }
}

/// Changes the value of a figure by `by`.
pub fn slip(truss: &Truss, figure: usize, by: &Rational) -> Truss {
    let mut slipped = truss.clone();
    if let FigureKind::Length { value, .. } | FigureKind::Run { value, .. } | FigureKind::Rise { value, .. } =
        &mut slipped.figures[figure].kind
    {
        *value = Written::plain(&value.value + by);
    }
    slipped
}

/// Changes a figure of any kind by a plain slip of its size: an eighth of an inch to four, half a degree to five, a
/// fiftieth of a spread, an inch of pitch. `None` where the value would leave what the kind allows, or the figure is a
/// relation.
pub fn slip_of_any_kind(truss: &Truss, figure: usize, dice: &mut Dice) -> Option<Truss> {
    use num_traits::Signed;
    let sign = if dice.below(2) == 0 { 1 } else { -1 };
    let mut slipped = truss.clone();
    let (value, by, most) = match &mut slipped.figures[figure].kind {
        FigureKind::Run { value, .. } | FigureKind::Rise { value, .. } => {
            *value = Written::plain(&value.value + q(dice.between(2, 64) * sign, 16));
            return Some(slipped);
        }
        FigureKind::Length { value, .. } => (value, q(dice.between(2, 64) * sign, 16), None),
        FigureKind::Angle { value, .. } => (value, q(dice.between(5, 50) * sign, 10), Some(w(180))),
        FigureKind::Spread { value, .. } => (value, q(dice.between(20, 100) * sign, 1000), Some(w(1))),
        FigureKind::Pitch { rise, run, .. } => {
            let small = if rise.value < run.value { rise } else { run };
            (small, q(dice.between(4, 32) * sign, 16), Some(w(12)))
        }
        _ => return None,
    };
    let changed = &value.value + by;
    let is_allowed = changed.is_positive() && most.is_none_or(|most| changed < most);
    *value = Written::plain(changed);
    is_allowed.then_some(slipped)
}

/// A few joints with figures of every kind between them, each printed from the truth; two joints are set.
pub fn mixed(seed: u64) -> Planted {
    let mut dice = Dice::new(seed.wrapping_add(77));
    let count = 4 + dice.below(4);
    let grid = 3;
    let truth: Vec<Point> = (0..count)
        .map(|i| {
            let (column, row) = ((i as i64) / 2, (i as i64) % 2);
            let jitter = |dice: &mut Dice| q(dice.between(-15 * 16, 15 * 16), 16);
            Point { x: w(column * 60) + jitter(&mut dice), y: w(row * 70) + jitter(&mut dice) }
        })
        .collect();
    let mut draft = Draft::step("1/16");
    for (i, point) in truth.iter().enumerate() {
        let loose = i >= 2;
        let rough = |v: &Rational, dice: &mut Dice| {
            Written::plain(if loose { (v + w(dice.between(-4, 4))).round() / w(grid) * w(grid) } else { v.clone() })
        };
        let (x, y) = (rough(&point.x, &mut dice), rough(&point.y, &mut dice));
        draft.0.joints.push(Joint { mark: format!("J{i}"), x, y, loose });
    }
    let figures = 2 * count + dice.below(count);
    for _ in 0..figures {
        let kind = random_kind(&truth, &mut dice);
        let own = match kind {
            FigureKind::Angle { .. } => Some(Written::plain(q(1, 10))),
            FigureKind::Spread { .. } => Some(Written::plain(q(1, 1000))),
            _ => None,
        };
        let mark = format!("f{}", draft.0.figures.len() + 1);
        draft.0.figures.push(Figure { mark, kind, step: own });
    }
    // Enough to hold every joint, whatever the others say.
    for i in 2..count {
        draft = draft.member(&format!("J{}", i - 2), &format!("J{i}")).member(&format!("J{}", i - 1), &format!("J{i}"));
        for k in [i - 2, i - 1] {
            let kind = length_kind(&truth, k, i);
            let mark = format!("f{}", draft.0.figures.len() + 1);
            draft.0.figures.push(Figure { mark, kind, step: None });
        }
    }
    Planted { truss: draft.truss(), truth }
}

fn to_step(v: Rational, step: Rational) -> Written {
    Written::plain(&step * Rational::from_integer(nearest_multiple(&v, &step).expect("a step")))
}

fn length_kind(truth: &[Point], a: usize, b: usize) -> FigureKind {
    let leg = &truth[b] - &truth[a];
    let length = Surd::of_quadrance(&leg.quadrance()).expect("not negative").nearest(&q(1, 16)).expect("a step");
    let value = Written::plain(q(1, 16) * Rational::from_integer(length.steps));
    FigureKind::Length { from: JointId::new(a), to: JointId::new(b), value }
}

fn random_kind(truth: &[Point], dice: &mut Dice) -> FigureKind {
    use chordwright::exact::{nearest_degrees_of_spread, spread_between};
    use num_traits::{Signed, Zero};
    let n = truth.len();
    let a = dice.below(n);
    let b = (a + 1 + dice.below(n - 1)) % n;
    let mut c = (b + 1 + dice.below(n - 1)) % n;
    if c == a || c == b {
        c = (0..n).find(|k| *k != a && *k != b).expect("three joints");
    }
    let (from, to, at) = (JointId::new(a), JointId::new(b), JointId::new(c));
    let leg = &truth[b] - &truth[a];
    let (u, v) = (&truth[a] - &truth[c], &truth[b] - &truth[c]);
    let sixteenth = || q(1, 16);
    match dice.below(6) {
        0 => FigureKind::Run { from, to, value: to_step(leg.x, sixteenth()) },
        1 => FigureKind::Rise { from, to, value: to_step(leg.y, sixteenth()) },
        2 if !leg.x.is_zero() && !leg.y.is_zero() => {
            let (x, y) = (leg.x.abs(), leg.y.abs());
            let twelve = Written::plain(w(12));
            let (rise, run) = if y <= x {
                (to_step(&y * w(12) / &x, sixteenth()), twelve)
            } else {
                (twelve, to_step(&x * w(12) / &y, sixteenth()))
            };
            FigureKind::Pitch { from, to, rise, run }
        }
        3 => {
            let spread = spread_between(&u, &v).expect("apart");
            let steps = nearest_degrees_of_spread(&spread, &q(1, 10)).expect("a step").0;
            let acute = q(1, 10) * Rational::from_integer(steps);
            let degrees = if u.dot(&v).is_negative() { w(180) - acute } else { acute };
            FigureKind::Angle { at, from, to, value: Written::plain(degrees) }
        }
        4 => {
            let spread = spread_between(&u, &v).expect("apart");
            FigureKind::Spread { at, from, to, value: to_step(spread, q(1, 1000)) }
        }
        _ => length_kind(truth, a, b),
    }
}
