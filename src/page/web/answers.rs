//! The five answers.

use crate::page::state::Event as PageEvent;
use crate::page::state::view::{AnswerTile, Sign};
use yew::prelude::*;

#[derive(Properties, PartialEq)]
pub(super) struct AnswersProps {
    pub(super) tiles: Vec<AnswerTile>,
    pub(super) on: Callback<PageEvent>,
}

/// The five questions with their answers.
#[component]
pub(super) fn Answers(props: &AnswersProps) -> Html {
    html! {
        <section class="answers" aria-label="the five questions" aria-live="polite">
            { for props.tiles.iter().map(|tile| answer(tile, &props.on)) }
        </section>
    }
}

fn answer(tile: &AnswerTile, on: &Callback<PageEvent>) -> Html {
    let question = tile.question;
    let choose = on.reform(move |_: MouseEvent| PageEvent::QuestionChosen(question));
    let class = classes!("answer", tile.chosen.then_some("chosen"), tile.stale.then_some("stale"));
    html! {
        <button {class} aria-pressed={tile.chosen.to_string()} onclick={choose} data-question={format!("{question:?}").to_ascii_lowercase()}>
            <span class="question">{ question.text() }</span>
            <span class="verdict">{ sign(tile.sign) }<span class={tile.sign.class()}>{ &tile.answer }</span></span>
            <span class="detail" title={tile.detail.clone()}>{ &tile.detail }</span>
        </button>
    }
}

/// The sign beside an answer or a finding: by shape as well as by colour.
pub(super) fn sign(sign: Sign) -> Html {
    let d = match sign {
        Sign::Good => "M4.5 8.3l2.4 2.4 4.8-5.2",
        Sign::Fault => "M5.2 5.2l5.6 5.6M10.8 5.2l-5.6 5.6",
        Sign::Caution => "M8 4.2v4.6M8 11.2v.4",
        Sign::Note => "M8 7.6v.8",
        Sign::Waiting => "M8 4.6V8l2.4 1.4",
    };
    let frame = match sign {
        Sign::Fault => "M3.5 1.5h9a2 2 0 0 1 2 2v9a2 2 0 0 1-2 2h-9a2 2 0 0 1-2-2v-9a2 2 0 0 1 2-2z",
        Sign::Caution => "M3.5 14.5a2 2 0 0 1-2-2V8a6.5 6.5 0 0 1 13 0v4.5a2 2 0 0 1-2 2z",
        _ => "M8 1.5a6.5 6.5 0 1 0 0 13 6.5 6.5 0 1 0 0-13z",
    };
    html! {
        <svg class={classes!("icon", sign.class())} viewBox="0 0 16 16" role="img" aria-label={sign.words()}>
            <path {d} /><path class="frame" d={frame} />
        </svg>
    }
}
