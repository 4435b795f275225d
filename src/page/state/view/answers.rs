//! The five answers, always in sight.

use crate::checks::{
    ClearState, CloseAnswer, CloseState, Level, Places, Progress, Question, Report, Stage, StandsAnswer, StandsState,
    TrueState,
};
use crate::measure::pretty;
use crate::page::state::State;
use crate::truss::Truss;

/// How an answer or a finding is signed, beside its words.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Sign {
    /// In order.
    Good,
    /// A fault.
    Fault,
    /// A caution.
    Caution,
    /// A note, or nothing to say.
    Note,
    /// Being worked out.
    Waiting,
}

impl Sign {
    /// The name used for its style.
    pub fn class(self) -> &'static str {
        match self {
            Sign::Good => "sign good",
            Sign::Fault => "sign fault",
            Sign::Caution => "sign caution",
            Sign::Note => "sign note",
            Sign::Waiting => "sign waiting",
        }
    }

    /// What it means, for those who cannot see it.
    pub fn words(self) -> &'static str {
        match self {
            Sign::Good => "in order",
            Sign::Fault => "fault",
            Sign::Caution => "caution",
            Sign::Note => "note",
            Sign::Waiting => "being worked out",
        }
    }

    pub(super) fn of_level(level: Level) -> Sign {
        match level {
            Level::Fault => Sign::Fault,
            Level::Caution => Sign::Caution,
            Level::Note => Sign::Note,
        }
    }
}

/// One question and its answer.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct AnswerTile {
    /// The question.
    pub question: Question,
    /// The answer in a word or two.
    pub answer: String,
    /// One line more.
    pub detail: String,
    /// How it is signed.
    pub sign: Sign,
    /// Whether its evidence is shown.
    pub chosen: bool,
    /// Whether the answer is about an older state of the truss.
    pub stale: bool,
}

/// The five answers, from the state.
pub fn answer_tiles(state: &State) -> Vec<AnswerTile> {
    Question::ALL.into_iter().map(|question| tile(state, question)).collect()
}

/// How far a search is that takes long.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct WorkView {
    /// What is being done, in words.
    pub words: String,
    /// Steps done, and steps there are; `None` where they cannot be counted.
    pub steps: Option<(usize, usize)>,
}

/// How far the search is, while one is under way that takes long.
pub fn work_view(state: &State) -> Option<WorkView> {
    let Progress { stage, done, of } = state.progress?;
    let words = match stage {
        Stage::Layout => "Looking for a layout".to_string(),
        Stage::Exclusion => "Looking for a proof that there is no layout".to_string(),
        Stage::Suspects => format!("Leaving out figures one by one: {done} of {of}"),
    };
    Some(WorkView { words, steps: (stage == Stage::Suspects).then_some((done, of)) })
}

fn tile(state: &State, question: Question) -> AnswerTile {
    let chosen = state.question == question;
    let stale = state.fresh().is_none();
    match state.checked.as_ref().filter(|_| !state.is_first_screen()) {
        None => AnswerTile {
            question,
            answer: if state.is_first_screen() { "–".into() } else { "…".into() },
            detail: String::new(),
            sign: if state.is_first_screen() { Sign::Note } else { Sign::Waiting },
            chosen,
            stale: false,
        },
        Some(checked) => {
            let (answer, detail, sign) = words(&checked.truss, &checked.report, question);
            AnswerTile { question, answer: pretty(&answer), detail: pretty(&detail), sign, chosen, stale }
        }
    }
}

/// What stands under the answer to the first question: short, since its evidence is beside it.
fn close_detail(truss: &Truss, close: &CloseAnswer) -> String {
    match close.blamed() {
        [a, b] if close.suspects.is_empty() => {
            format!("proved; {} and {} together", truss.figure(a.figure).mark, truss.figure(b.figure).mark)
        }
        [] => close.summary.clone(),
        [only] => format!("proved; {} should read {}", truss.figure(only.figure).mark, only.implied),
        several => format!("proved; {} suspects", several.len()),
    }
}

fn stands_detail(truss: &Truss, stands: &StandsAnswer) -> String {
    match (stands.state, stands.spare_members) {
        (StandsState::Rigid, 0) => format!("{} members, none spare", truss.members.len()),
        (StandsState::Rigid, spare) => format!("{} members, {spare} spare", truss.members.len()),
        _ => stands.summary.clone(),
    }
}

fn words(truss: &Truss, report: &Report, question: Question) -> (String, String, Sign) {
    let answers = &report.answers;
    let has = |level: Level| report.findings.iter().any(|f| f.rule.question() == question && f.level == level);
    let worst = |good: Sign| match () {
        () if has(Level::Fault) => Sign::Fault,
        () if has(Level::Caution) => Sign::Caution,
        () => good,
    };
    match question {
        Question::Close => {
            let (answer, sign) = match answers.close.state {
                CloseState::Closes => ("They close", worst(Sign::Good)),
                CloseState::DoesNotClose => ("They do not", Sign::Fault),
                CloseState::NotSettled => ("Not settled", Sign::Caution),
                CloseState::TooFewFigures => ("Too few figures", worst(Sign::Caution)),
                CloseState::NoFigures => ("No figures", worst(Sign::Note)),
            };
            (answer.into(), close_detail(truss, &answers.close), sign)
        }
        Question::True => {
            let (answer, sign) = match answers.lines.state {
                TrueState::True => ("True", worst(Sign::Good)),
                TrueState::Almost => ("Almost", worst(Sign::Caution)),
                TrueState::NotTrue => ("Not true", Sign::Fault),
            };
            (answer.into(), answers.lines.summary.clone(), sign)
        }
        Question::Clear => {
            let answer = match answers.clear.state {
                ClearState::Clear => "Clear",
                ClearState::NotClear => "Not clear",
            };
            (answer.into(), answers.clear.summary.clone(), worst(Sign::Good))
        }
        Question::Stands => {
            let (answer, sign) = match answers.stands.state {
                StandsState::Rigid => ("Rigid", worst(Sign::Good)),
                StandsState::Mechanism => ("It moves", Sign::Fault),
                StandsState::CriticalForm => ("Critical form", Sign::Fault),
                StandsState::NoSupports => ("No supports", worst(Sign::Note)),
                StandsState::NotSettled => ("Not settled", Sign::Caution),
            };
            (answer.into(), stands_detail(truss, &answers.stands), sign)
        }
        Question::Cut => {
            let summary = &answers.cut.summary;
            let detail = summary
                .split_once(" in all")
                .map_or_else(|| summary.clone(), |(lengths, _)| format!("{lengths} in all"));
            let sign = if report.places == Places::Sketch { Sign::Caution } else { worst(Sign::Note) };
            (answers.cut.state.clone(), detail, sign)
        }
    }
}
