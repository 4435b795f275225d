//! Trusses of the usual configurations, laid out exactly from their span, panels and heights.
//!
//! ```text
//! Profile  where the chords run: parallel, gable, bowstring, cambered, scissors, north light
//! Webs     how they are joined:  Pratt, Howe, Warren with posts
//! ```
//!
//! Warren, K, king post, queen post, Fink and fan have joints of their own. Every place is a fraction of what was given, so a
//! span in seven panels is in exact sevenths. The names are those of the trade (common practice).

use super::{Figure, FigureKind, Joint, JointId, Member, Role, Support, SupportKind, Truss};
use crate::exact::{Point, Rational, Surd, nearest_multiple, ratio, whole};
use crate::measure::{Sheet, Unit, Written};
use num_traits::{Signed, Zero};

/// A usual configuration.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq)]
pub enum Configuration {
    /// Parallel chords, posts, diagonals down towards the middle.
    #[default]
    Pratt,
    /// Parallel chords, posts, diagonals up towards the middle.
    Howe,
    /// Parallel chords and diagonals only.
    Warren,
    /// Parallel chords, diagonals that rise and fall in turn, and posts.
    WarrenWithPosts,
    /// Parallel chords, posts halved by diagonals from both chords.
    K,
    /// A gable with one post.
    KingPost,
    /// A gable with a post and two webs from its foot to the middles of the slopes.
    QueenPost,
    /// A gable with webs like a W.
    Fink,
    /// A gable with three webs fanning out of each third of the bottom chord.
    Fan,
    /// A gable with posts and diagonals down towards the middle.
    PrattGable,
    /// A gable with posts and diagonals up towards the middle.
    HoweGable,
    /// A gable whose bottom chord rises to the middle.
    Scissors,
    /// A top chord on a parabola.
    Bowstring,
    /// Parallel chords, both on a parabola.
    Cambered,
    /// A gable with its ridge to one side.
    NorthLight,
}

impl Configuration {
    /// All of them.
    pub const ALL: [Configuration; 15] = [
        Configuration::Pratt,
        Configuration::Howe,
        Configuration::Warren,
        Configuration::WarrenWithPosts,
        Configuration::K,
        Configuration::KingPost,
        Configuration::QueenPost,
        Configuration::Fink,
        Configuration::Fan,
        Configuration::PrattGable,
        Configuration::HoweGable,
        Configuration::Scissors,
        Configuration::Bowstring,
        Configuration::Cambered,
        Configuration::NorthLight,
    ];

    /// Its name in the trade.
    pub fn name(self) -> &'static str {
        match self {
            Configuration::Pratt => "Pratt",
            Configuration::Howe => "Howe",
            Configuration::Warren => "Warren",
            Configuration::WarrenWithPosts => "Warren with posts",
            Configuration::K => "K",
            Configuration::KingPost => "king post",
            Configuration::QueenPost => "queen post",
            Configuration::Fink => "Fink",
            Configuration::Fan => "fan",
            Configuration::PrattGable => "gable Pratt",
            Configuration::HoweGable => "gable Howe",
            Configuration::Scissors => "scissors",
            Configuration::Bowstring => "bowstring",
            Configuration::Cambered => "cambered Pratt",
            Configuration::NorthLight => "north light",
        }
    }

    /// The configuration of a name.
    pub fn from_name(name: &str) -> Option<Configuration> {
        Configuration::ALL.into_iter().find(|configuration| configuration.name() == name)
    }

    /// True when the number of panels is free.
    pub fn has_panels(self) -> bool {
        !matches!(self, Configuration::KingPost | Configuration::QueenPost | Configuration::Fink | Configuration::Fan)
    }

    /// What the heel height does here: how high the chords are apart over the supports.
    pub fn has_heel(self) -> bool {
        matches!(
            self,
            Configuration::PrattGable | Configuration::HoweGable | Configuration::Bowstring | Configuration::NorthLight
        )
    }

    /// What one more measure is called, for configurations that have one.
    pub fn other(self) -> Option<&'static str> {
        match self {
            Configuration::Scissors => Some("rise of the bottom chord"),
            Configuration::Cambered => Some("camber"),
            Configuration::NorthLight => Some("run to the ridge"),
            _ => None,
        }
    }
}

/// What a configuration is laid out from; lengths in the unit of the sheet.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Measures {
    /// Between the supports.
    pub span: Rational,
    /// Panels of the bottom chord.
    pub panels: usize,
    /// From the bottom chord's ends to the highest joint; between the chords where they are parallel.
    pub height: Rational,
    /// Between the chords over the supports.
    pub heel: Rational,
    /// What [`Configuration::other`] names.
    pub other: Rational,
    /// Whether every figure of a shop drawing is added: strings with their overalls, heights and all lengths.
    pub figured: bool,
}

/// The most panels that are laid out.
const MOST_PANELS: usize = 400;

/// A truss of this configuration, on a pin at the left and a roller at the right.
///
/// # Errors
///
/// What was expected of which measure.
pub fn configured(
    configuration: Configuration,
    measures: &Measures,
    unit: Unit,
    step: &Written,
) -> Result<Truss, String> {
    checked(configuration, measures)?;
    let mut draft = Draft { truss: Truss { unit, step: step.clone(), ..Truss::default() }, sheet_unit: unit };
    match configuration {
        Configuration::Warren => warren(&mut draft, measures),
        Configuration::KingPost => king_post(&mut draft, measures),
        Configuration::QueenPost => queen_post(&mut draft, measures),
        Configuration::Fink => slopes(&mut draft, measures, 2, &[(0, 0), (1, 0), (1, 1), (2, 1)]),
        Configuration::Fan => slopes(&mut draft, measures, 3, &[(0, 0), (1, 0), (2, 0), (2, 1), (3, 1), (4, 1)]),
        Configuration::K => k_webs(&mut draft, measures),
        _ => profiled(&mut draft, configuration, measures),
    }
    let mut name = configuration.name().chars();
    let first = name.next().map(|letter| letter.to_ascii_uppercase());
    draft.truss.title = format!("{}{} truss", first.map_or_else(String::new, String::from), name.as_str());
    supports(&mut draft.truss);
    if measures.figured {
        figures(&mut draft.truss);
    }
    Ok(draft.truss)
}

fn checked(configuration: Configuration, m: &Measures) -> Result<(), String> {
    if !m.span.is_positive() {
        return Err("the span: expected a length of more than 0".into());
    }
    if !m.height.is_positive() {
        return Err("the height: expected a length of more than 0".into());
    }
    if m.heel.is_negative() || (configuration.has_heel() && m.heel >= m.height) {
        return Err("the heel height: expected 0 or more, and less than the height".into());
    }
    if configuration.has_panels() {
        let least = if configuration == Configuration::K { 4 } else { 2 };
        if !(least..=MOST_PANELS).contains(&m.panels) {
            return Err(format!("the panels: expected {least} to {MOST_PANELS}"));
        }
        let has_odd =
            matches!(configuration, Configuration::Warren | Configuration::WarrenWithPosts | Configuration::NorthLight);
        if m.panels % 2 == 1 && !has_odd {
            return Err("the panels: expected an even number, so that the halves are alike".into());
        }
    }
    match configuration {
        Configuration::Scissors if !m.other.is_positive() || m.other >= m.height => {
            Err("the rise of the bottom chord: expected more than 0 and less than the height".into())
        }
        Configuration::Cambered if !m.other.is_positive() => Err("the camber: expected more than 0".into()),
        Configuration::NorthLight => match ridge_panel(m) {
            Some(_) => Ok(()),
            None => Err("the run to the ridge: expected a whole number of panels, inside the span".into()),
        },
        _ => Ok(()),
    }
}

/// The panel point below the ridge of a north light.
fn ridge_panel(m: &Measures) -> Option<usize> {
    (1..m.panels).find(|&i| &m.span * ratio(i as i64, m.panels as i64) == m.other)
}

struct Draft {
    truss: Truss,
    sheet_unit: Unit,
}

impl Draft {
    fn joint(&mut self, mark: String, x: Rational, y: Rational) -> JointId {
        let sheet = Sheet::of(self.sheet_unit, &Rational::zero());
        let written = |value: &Rational| match value.is_zero() {
            true => Written { text: "0".into(), value: value.clone() },
            false => sheet.written(value),
        };
        let (x, y) = (written(&x), written(&y));
        self.truss.joints.push(Joint { mark, x, y, loose: false });
        JointId::new(self.truss.joints.len() - 1)
    }

    fn member(&mut self, from: JointId, to: JointId, role: Role) {
        let mark = self.truss.free_member_mark(role);
        self.truss.members.push(Member { mark, from, to, role });
    }

    fn chain(&mut self, joints: &[JointId], role: Role) {
        joints.windows(2).for_each(|pair| self.member(pair[0], pair[1], role));
    }
}

/// The bottom chord's height and the top chord's at each panel point.
fn profile(configuration: Configuration, m: &Measures, i: usize) -> [Rational; 2] {
    let n = m.panels as i64;
    let i = i as i64;
    // 0 at the ends, 1 at the middle: along straight slopes, and along a parabola.
    let slope = ratio(2 * i.min(n - i), n);
    let bow = ratio(4 * i * (n - i), n * n);
    let rise = &m.height - &m.heel;
    match configuration {
        Configuration::PrattGable | Configuration::HoweGable => [whole(0), &m.heel + rise * slope],
        Configuration::Scissors => [&m.other * &slope, &m.height * slope],
        Configuration::Bowstring => [whole(0), &m.heel + rise * bow],
        Configuration::Cambered => [&m.other * &bow, &m.height + &m.other * bow],
        Configuration::NorthLight => {
            let ridge = ridge_panel(m).unwrap_or(1) as i64;
            let share = if i <= ridge { ratio(i, ridge) } else { ratio(n - i, n - ridge) };
            [whole(0), &m.heel + rise * share]
        }
        _ => [whole(0), m.height.clone()],
    }
}

/// Chords along profiles, a post at each panel point, a diagonal in each panel.
fn profiled(draft: &mut Draft, configuration: Configuration, m: &Measures) {
    let n = m.panels;
    let heights: Vec<[Rational; 2]> = (0..=n).map(|i| profile(configuration, m, i)).collect();
    let at = |i: usize| &m.span * ratio(i as i64, n as i64);
    let low: Vec<JointId> = (0..=n).map(|i| draft.joint(format!("L{i}"), at(i), heights[i][0].clone())).collect();
    let high: Vec<JointId> = (0..=n)
        .map(|i| match heights[i][0] == heights[i][1] {
            true => low[i],
            false => draft.joint(format!("U{i}"), at(i), heights[i][1].clone()),
        })
        .collect();
    draft.chain(&low, Role::BottomChord);
    draft.chain(&high, Role::TopChord);
    for i in 0..=n {
        if low[i] != high[i] {
            draft.member(low[i], high[i], Role::Post);
        }
    }
    let middle = ridge_of(configuration, m);
    for i in 0..n {
        let is_left = i < middle;
        let falls = match configuration {
            Configuration::Howe | Configuration::HoweGable | Configuration::Scissors | Configuration::NorthLight => {
                !is_left
            }
            Configuration::WarrenWithPosts => i % 2 == 1,
            _ => is_left,
        };
        let (from, to) = if falls { (high[i], low[i + 1]) } else { (low[i], high[i + 1]) };
        let is_drawn = draft.truss.members.iter().any(|member| {
            let ends = member.ends();
            ends == [from, to] || ends == [to, from]
        });
        if from != to && !is_drawn && low[i] != high[i] && low[i + 1] != high[i + 1] {
            draft.member(from, to, Role::Web);
        }
    }
}

/// The panel point about which diagonals turn.
fn ridge_of(configuration: Configuration, m: &Measures) -> usize {
    match configuration {
        Configuration::NorthLight => ridge_panel(m).unwrap_or(1),
        _ => m.panels / 2,
    }
}

/// Diagonals only: the top joints stand over the middles of the panels.
fn warren(draft: &mut Draft, m: &Measures) {
    let n = m.panels as i64;
    let low: Vec<JointId> = (0..=n).map(|i| draft.joint(format!("L{i}"), &m.span * ratio(i, n), whole(0))).collect();
    let high: Vec<JointId> = (0..n)
        .map(|i| draft.joint(format!("U{}", i + 1), &m.span * ratio(2 * i + 1, 2 * n), m.height.clone()))
        .collect();
    draft.chain(&low, Role::BottomChord);
    draft.chain(&high, Role::TopChord);
    for i in 0..high.len() {
        draft.member(low[i], high[i], Role::Web);
        draft.member(high[i], low[i + 1], Role::Web);
    }
}

/// Posts halved; their middles are joined to both chords one panel nearer the support.
fn k_webs(draft: &mut Draft, m: &Measures) {
    let n = m.panels;
    let at = |i: usize| &m.span * ratio(i as i64, n as i64);
    let low: Vec<JointId> = (0..=n).map(|i| draft.joint(format!("L{i}"), at(i), whole(0))).collect();
    let high: Vec<JointId> = (0..=n).map(|i| draft.joint(format!("U{i}"), at(i), m.height.clone())).collect();
    let half = &m.height / whole(2);
    let middle: Vec<JointId> = (1..n).map(|i| draft.joint(format!("M{i}"), at(i), half.clone())).collect();
    draft.chain(&low, Role::BottomChord);
    draft.chain(&high, Role::TopChord);
    for end in [0, n] {
        draft.member(low[end], high[end], Role::Post);
    }
    for i in 1..n {
        let at = middle[i - 1];
        draft.member(low[i], at, Role::Post);
        draft.member(at, high[i], Role::Post);
        let outer = |draft: &mut Draft, beside: usize| {
            draft.member(low[beside], at, Role::Web);
            draft.member(at, high[beside], Role::Web);
        };
        if i <= n / 2 {
            outer(draft, i - 1);
        }
        if i >= n / 2 {
            outer(draft, i + 1);
        }
    }
}

fn king_post(draft: &mut Draft, m: &Measures) {
    let half = &m.span / whole(2);
    let low = [
        draft.joint("L0".into(), whole(0), whole(0)),
        draft.joint("L1".into(), half.clone(), whole(0)),
        draft.joint("L2".into(), m.span.clone(), whole(0)),
    ];
    let ridge = draft.joint("U1".into(), half, m.height.clone());
    draft.chain(&low, Role::BottomChord);
    draft.chain(&[low[0], ridge, low[2]], Role::TopChord);
    draft.member(low[1], ridge, Role::Post);
}

fn queen_post(draft: &mut Draft, m: &Measures) {
    king_post(draft, m);
    draft.truss.joints[3].mark = "U2".into();
    draft.truss.members.retain(|member| member.role != Role::TopChord);
    let (left, foot, right, ridge) = (JointId::new(0), JointId::new(1), JointId::new(2), JointId::new(3));
    let half = &m.height / whole(2);
    let first = draft.joint("U1".into(), &m.span / whole(4), half.clone());
    let second = draft.joint("U3".into(), &m.span * ratio(3, 4), half);
    draft.chain(&[left, first, ridge, second, right], Role::TopChord);
    draft.member(first, foot, Role::Web);
    draft.member(second, foot, Role::Web);
}

/// A gable with so many panels on each slope and a bottom chord in thirds; webs join top joints (from the left, the first
/// after the support is 0) with the bottom joints at the thirds.
fn slopes(draft: &mut Draft, m: &Measures, each: i64, webs: &[(usize, usize)]) {
    let low: Vec<JointId> = (0..=3).map(|i| draft.joint(format!("L{i}"), &m.span * ratio(i, 3), whole(0))).collect();
    let high: Vec<JointId> = (1..2 * each)
        .map(|i| {
            let rise = &m.height * ratio(i.min(2 * each - i), each);
            draft.joint(format!("U{i}"), &m.span * ratio(i, 2 * each), rise)
        })
        .collect();
    draft.chain(&low, Role::BottomChord);
    let top: Vec<JointId> = [&low[..1], &high[..], &low[3..]].concat();
    draft.chain(&top, Role::TopChord);
    for &(top, bottom) in webs {
        draft.member(high[top], low[bottom + 1], Role::Web);
    }
}

/// A pin under the first joint of the bottom chord, a roller under its last.
fn supports(truss: &mut Truss) {
    let bottom = truss.members.iter().filter(|member| member.role == Role::BottomChord);
    let (Some(first), Some(last)) = (bottom.clone().next(), bottom.clone().next_back()) else { return };
    let (from, to) = (first.from, last.to);
    let up = [whole(0), whole(1)].map(Written::plain);
    truss.supports.push(Support { joint: from, kind: SupportKind::Pin });
    truss.supports.push(Support { joint: to, kind: SupportKind::Roller { normal: up } });
}

/// Every figure of a shop drawing: the bottom string with its overall, level where it is, the height and the heel, and the
/// lengths that the string does not say.
fn figures(truss: &mut Truss) {
    let points: Vec<Point> = truss.joints.iter().map(Joint::point).collect();
    let step = truss.step.value.clone();
    let sheet = Sheet::of(truss.unit, &Rational::zero());
    let to_step = |value: &Rational| match nearest_multiple(value, &step) {
        Some(n) => sheet.written(&(&step * Rational::from_integer(n))),
        None => sheet.written(value),
    };
    let mut kinds = Vec::new();
    let bottom: Vec<[JointId; 2]> =
        truss.members.iter().filter(|m| m.role == Role::BottomChord).map(Member::ends).collect();
    let run = |from: JointId, to: JointId| {
        let value = to_step(&(&points[to.index()].x - &points[from.index()].x));
        FigureKind::Run { from, to, value }
    };
    kinds.extend(bottom.iter().map(|&[from, to]| run(from, to)));
    let ends = bottom.first().zip(bottom.last()).map(|(first, last)| (first[0], last[1]));
    if let Some((first, last)) = ends {
        kinds.push(run(first, last));
        let string = std::iter::once(first).chain(bottom.iter().map(|ends| ends[1]));
        let level: Vec<JointId> = string.filter(|id| points[id.index()].y.is_zero()).collect();
        kinds.push(FigureKind::Level { joints: level });
        let highest = (0..points.len()).max_by(|&a, &b| points[a].y.cmp(&points[b].y).then(b.cmp(&a)));
        let heel = (0..points.len()).find(|&i| points[i].x.is_zero() && !points[i].y.is_zero());
        let mut heights: Vec<usize> = heel.into_iter().chain(highest).collect();
        heights.dedup_by(|b, a| points[*a].y == points[*b].y);
        for index in heights {
            let value = to_step(&points[index].y);
            kinds.push(FigureKind::Rise { from: first, to: JointId::new(index), value });
        }
    }
    let is_said = |member: &&Member| {
        let [from, to] = member.ends().map(|id| &points[id.index()]);
        member.role == Role::BottomChord && from.y == to.y
    };
    for [from, to] in truss.members.iter().filter(|member| !is_said(member)).map(Member::ends) {
        let quadrance = (&points[to.index()] - &points[from.index()]).quadrance();
        let steps = Surd::of_quadrance(&quadrance).and_then(|root| root.nearest(&step));
        let exact = || Surd::of_quadrance(&quadrance).and_then(|root| root.rational().cloned());
        let value = match steps {
            Some(nearest) => Some(&step * Rational::from_integer(nearest.steps)),
            None => exact(),
        };
        if let Some(value) = value {
            kinds.push(FigureKind::Length { from, to, value: sheet.written(&value) });
        }
    }
    for kind in kinds {
        let mark = format!("f{}", truss.figures.len() + 1);
        truss.figures.push(Figure { mark, kind, step: None });
    }
}
