//! The evidence for the chosen question: findings, worst first; one opened.

use super::answers::Sign;
use super::book::{CellKind, CellView};
use crate::checks::{Adjustable, CloseState, Evidence, Finding, Places, Question, Report, StandsState, Suspect};
use crate::measure::{Sheet, pretty};
use crate::page::state::{Cell, Checked, Column, Row, Shown, State, Thing};
use crate::truss::Truss;

/// The evidence for one question.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct EvidenceView {
    /// The question.
    pub question: Question,
    /// The answer in a sentence.
    pub sentence: String,
    /// Names and exact values that bear it out.
    pub numbers: Vec<(String, String)>,
    /// The figures that may be to blame.
    pub suspects: Vec<SuspectView>,
    /// The findings.
    pub findings: Vec<FindingView>,
    /// The limits that the answer goes by.
    pub limits: Vec<LimitView>,
    /// How many findings more there are than are shown.
    pub more: usize,
    /// True when sketch and layout can be switched.
    pub has_layout: bool,
    /// True when the layout is shown.
    pub layout_shown: bool,
    /// True while the answers are worked out anew.
    pub waiting: bool,
}

/// A limit that the answer goes by, to be changed here.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct LimitView {
    /// What it is called.
    pub name: &'static str,
    /// Its value.
    pub cell: CellView,
    /// What it comes to on this sheet.
    pub means: String,
    /// Where its default comes from.
    pub source: &'static str,
}

/// A figure that may be to blame.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct SuspectView {
    /// Its place among the suspects.
    pub index: usize,
    /// Its mark.
    pub mark: String,
    /// What is said of it: that it is wrong when it alone can be, that it may be otherwise.
    pub words: String,
    /// The figure, to point at.
    pub thing: Thing,
    /// Between which joints.
    pub between: String,
    /// What it reads.
    pub printed: String,
    /// What it should read.
    pub implied: String,
    /// The range it may be in.
    pub range: String,
    /// The slip that explains it.
    pub slip: String,
    /// Whether it is open.
    pub open: bool,
    /// Whether the layout without it is shown.
    pub shown: bool,
}

/// A finding.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct FindingView {
    /// Its place in the report.
    pub index: usize,
    /// How it is signed.
    pub sign: Sign,
    /// The name of its rule.
    pub rule: &'static str,
    /// What was found.
    pub text: String,
    /// The marks it is about.
    pub marks: String,
    /// The first thing it is about, to point at.
    pub thing: Option<Thing>,
    /// Whether it is open.
    pub open: bool,
    /// The evidence, when it is open.
    pub lines: Vec<EvidenceLine>,
    /// What to do about it, when it is open.
    pub mend: Option<MendView>,
}

/// One line of evidence.
#[derive(Clone, Debug, PartialEq, Eq)]
pub enum EvidenceLine {
    /// A sentence.
    Words(String),
    /// A name and its exact value.
    Value(String, String),
    /// A law: its name, its statement, and the numbers in it.
    Law(&'static str, &'static str, String),
}

/// What to do about a finding.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct MendView {
    /// What to do.
    pub text: String,
    /// Whether the page can do it.
    pub can: bool,
}

/// The most findings shown at once.
const MOST: usize = 100;
/// The most marks named in the margin of a finding.
const MOST_MARKS: usize = 4;

/// The evidence for the chosen question; `None` before there are answers.
pub fn evidence_view(state: &State) -> Option<EvidenceView> {
    let checked = state.checked.as_ref()?;
    let (truss, report, question) = (&*checked.truss, &checked.report, state.question);
    let of_question = || report.findings.iter().enumerate().filter(|(_, f)| f.rule.question() == question);
    let suspects = if question == Question::Close { report.answers.close.blamed() } else { &[] };
    Some(EvidenceView {
        question,
        sentence: pretty(&sentence(checked, question)),
        numbers: numbers(checked, question).into_iter().map(|(name, value)| (name, pretty(&value))).collect(),
        suspects: suspects.iter().enumerate().map(|item| suspect_view(state, truss, item, suspects)).collect(),
        findings: of_question().take(MOST).map(|(index, f)| finding_view(state, truss, index, f)).collect(),
        limits: limits(state, truss, question),
        more: of_question().count().saturating_sub(MOST),
        has_layout: state.has_layout(),
        layout_shown: state.has_layout() && state.shown != Shown::Sketch,
        waiting: state.fresh().is_none(),
    })
}

fn limits(state: &State, truss: &Truss, question: Question) -> Vec<LimitView> {
    let limit = match question {
        Question::True => Adjustable::Near,
        Question::Clear => Adjustable::Tight,
        Question::Cut => Adjustable::Piece,
        Question::Close | Question::Stands => return Vec::new(),
    };
    let cell = Cell::new(Row::Limits, Column::Limit(limit));
    let refused = state.refused.as_ref().filter(|refused| refused.cell == cell);
    let means = match limit {
        Adjustable::Near => Sheet::of(truss.unit, &truss.step.value).exact_words(&state.limits.near(truss)),
        Adjustable::Tight => {
            let tenth = crate::exact::ratio(1, 10);
            let degrees = crate::exact::nearest_degrees_of_spread(&state.limits.tight_spread, &tenth);
            degrees.map_or_else(String::new, |(steps, _)| {
                format!("{}°", crate::measure::decimal(&(tenth * crate::exact::Rational::from_integer(steps)), 1))
            })
        }
        Adjustable::Piece => String::new(),
    };
    let cell = CellView {
        cell: Some(cell),
        text: refused.map_or_else(|| limit.text(&state.limits, truss.unit), |refused| refused.text.clone()),
        label: limit.name().into(),
        kind: CellKind::Value,
        error: refused.map(|refused| pretty(&refused.error)).unwrap_or_default(),
    };
    vec![LimitView { name: limit.name(), cell, means: pretty(&means), source: limit.source() }]
}

fn suspect_view(state: &State, truss: &Truss, (index, suspect): (usize, &Suspect), blamed: &[Suspect]) -> SuspectView {
    let is_pair = state.checked.as_ref().is_some_and(|checked| checked.report.answers.close.suspects.is_empty());
    let blame = match blamed {
        [_] => "cannot be right".to_string(),
        [a, b] if is_pair => {
            format!("may be wrong, together with {}", truss.figure(if index == 0 { b } else { a }.figure).mark)
        }
        _ => "may be wrong".into(),
    };
    let figure = truss.figure(suspect.figure);
    let sheet = Sheet::of(truss.unit, &truss.step.value);
    let is_length = matches!(figure.kind.name(), "length" | "run" | "rise");
    let end = |value: &crate::exact::Rational| if is_length { sheet.exact_words(value) } else { value.to_string() };
    let (lo, hi) = (suspect.implied_range.lo(), suspect.implied_range.hi());
    let range = if lo == hi { "exactly".into() } else { format!("between {} and {}", end(lo), end(hi)) };
    SuspectView {
        index,
        mark: figure.mark.clone(),
        words: format!("Figure {} {blame}", figure.mark),
        thing: Thing::Figure(suspect.figure),
        between: marks(truss, &figure.kind.joints()),
        printed: pretty(&figure.kind.value_text().unwrap_or_else(|| figure.kind.name().into())),
        implied: pretty(&suspect.implied),
        range: pretty(&range),
        slip: suspect.slip.map(|slip| slip.name().to_string()).unwrap_or_default(),
        open: state.open_suspect == Some(index)
            || (index == 0 && state.open_suspect.is_none() && state.open_finding.is_none()),
        shown: state.shows_without(index),
    }
}

fn finding_view(state: &State, truss: &Truss, index: usize, finding: &Finding) -> FindingView {
    let open = state.open_finding == Some(index);
    FindingView {
        index,
        sign: Sign::of_level(finding.level),
        rule: finding.rule.name(),
        text: pretty(&as_sentence(truss, &finding.text)),
        marks: finding_marks(truss, finding),
        thing: first_thing(finding),
        open,
        lines: if open { finding.evidence.iter().map(line).collect() } else { Vec::new() },
        mend: finding
            .mend
            .as_ref()
            .filter(|_| open)
            .map(|mend| MendView { text: pretty(&mend.text), can: mend.edit.is_some() && state.fresh().is_some() }),
    }
}

/// A text that begins a line: with a capital, unless it begins with a mark of the drawing.
fn as_sentence(truss: &Truss, text: &str) -> String {
    let first = text.split([' ', ',', ':']).next().unwrap_or_default();
    let is_mark = truss.figures.iter().any(|f| f.mark == first) || truss.joint_marked(first).is_some();
    let mut rest = text.chars();
    match rest.next() {
        Some(letter) if letter.is_ascii_lowercase() && !is_mark => {
            format!("{}{}", letter.to_ascii_uppercase(), rest.as_str())
        }
        _ => text.to_string(),
    }
}

fn line(evidence: &Evidence) -> EvidenceLine {
    match evidence {
        Evidence::Words(text) => EvidenceLine::Words(pretty(text)),
        Evidence::Value { name, value } => EvidenceLine::Value(name.clone(), pretty(value)),
        Evidence::Formula { law, text } => EvidenceLine::Law(law.name(), law.statement(), pretty(text)),
    }
}

fn first_thing(finding: &Finding) -> Option<Thing> {
    let member = finding.members.first().copied().map(Thing::Member);
    let figure = finding.figures.first().copied().map(Thing::Figure);
    finding.joints.first().copied().map(Thing::Joint).or(member).or(figure)
}

fn finding_marks(truss: &Truss, finding: &Finding) -> String {
    let figures = finding.figures.iter().map(|id| truss.figure(*id).mark.as_str());
    let members = finding.members.iter().map(|id| truss.member(*id).mark.as_str());
    let joints = finding.joints.iter().map(|id| truss.mark(*id));
    some_of(figures.chain(members).chain(joints))
}

pub(super) fn marks(truss: &Truss, joints: &[crate::truss::JointId]) -> String {
    let list: Vec<&str> = joints.iter().map(|id| truss.mark(*id)).collect();
    list.join(" – ")
}

fn some_of<'a>(marks: impl Iterator<Item = &'a str>) -> String {
    let all: Vec<&str> = marks.collect();
    match all.len() {
        0..=MOST_MARKS => all.join(", "),
        n => format!("{} … {} more", all[..3].join(", "), n - 3),
    }
}

fn sentence(checked: &Checked, question: Question) -> String {
    let (truss, answers) = (&checked.truss, &checked.report.answers);
    let figures = truss.figures.len();
    match question {
        Question::Close => close_sentence(&checked.report, figures),
        Question::True => match answers.lines.state {
            crate::checks::TrueState::True => "Lines meant straight, square, parallel or equal are exactly so.".into(),
            crate::checks::TrueState::Almost => "Something is almost so, but not exactly: somebody should look.".into(),
            crate::checks::TrueState::NotTrue => "A relation that the drawing states does not hold.".into(),
        },
        Question::Clear => match answers.clear.state {
            crate::checks::ClearState::Clear => "Nothing crosses, overlaps or stands where it should not.".into(),
            crate::checks::ClearState::NotClear => "Something is in the way of something else.".into(),
        },
        Question::Stands => match answers.stands.state {
            StandsState::Rigid => "Members and supports hold every joint, by exact rank.".into(),
            StandsState::Mechanism => "It moves: the drawing shows one motion that changes no member's length.".into(),
            StandsState::CriticalForm => {
                "Enough members, well placed in number, yet this very geometry lets it move.".into()
            }
            StandsState::NoSupports => "Nothing holds it, so it is judged as a free body.".into(),
            StandsState::NotSettled => "It was not settled within the bound of work.".into(),
        },
        Question::Cut => "Lengths along the working lines, each rounded once and correctly.".into(),
    }
}

fn close_sentence(report: &Report, figures: usize) -> String {
    let close = &report.answers.close;
    let all = if figures == 1 { "the one figure".into() } else { format!("all {figures} figures") };
    match (close.state, close.suspects.len()) {
        (CloseState::DoesNotClose, 0) if !close.pair.is_empty() => {
            format!("No truss can have {all}. No single figure is to blame; two together may be.")
        }
        (CloseState::Closes, _) if report.places == Places::Set => format!("The set joints agree with {all}."),
        (CloseState::Closes, _) => format!("A layout agrees with {all}; every one was checked exactly."),
        (CloseState::DoesNotClose, 0) => format!("No truss can have {all}."),
        (CloseState::DoesNotClose, 1) => format!("No truss can have {all}. One figure alone is to blame."),
        (CloseState::DoesNotClose, n) => format!("No truss can have {all}. Any one of {n} figures may be to blame."),
        (CloseState::NotSettled, _) => "Neither a layout nor a proof that there is none was found.".into(),
        (CloseState::TooFewFigures, _) => format!("{all} agree, and some joints can still move."),
        (CloseState::NoFigures, _) => "There are no figures yet: type them as the drawing has them.".into(),
    }
}

fn numbers(checked: &Checked, question: Question) -> Vec<(String, String)> {
    let (truss, answers) = (&checked.truss, &checked.report.answers);
    let row = |name: &str, value: String| (name.to_string(), value);
    match question {
        Question::Close => {
            vec![row("figures", truss.figures.len().to_string()), row("proof", answers.close.proof.name().into())]
        }
        Question::True => Vec::new(),
        Question::Clear => vec![row("panels", answers.clear.panels.len().to_string())],
        Question::Stands => vec![
            row("members", truss.members.len().to_string()),
            row("rank", answers.stands.rank.to_string()),
            row("unknowns", answers.stands.unknowns.to_string()),
            row("spare", answers.stands.spare_members.to_string()),
        ],
        Question::Cut => {
            vec![row("pieces", truss.members.len().to_string()), row("lengths", answers.cut.summary.clone())]
        }
    }
}
