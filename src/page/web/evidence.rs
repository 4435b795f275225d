//! The evidence for the chosen question.

use super::answers::sign;
use super::field::Field;
use crate::page::state::view::{EvidenceLine, EvidenceView, FindingView, LimitView, Sign, SuspectView};
use crate::page::state::{Event as PageEvent, Thing};
use crate::truss::Truss;
use std::rc::Rc;
use yew::prelude::*;

#[derive(Properties, PartialEq)]
pub(super) struct EvidenceProps {
    pub(super) view: Option<EvidenceView>,
    pub(super) truss: Rc<Truss>,
    pub(super) on: Callback<PageEvent>,
}

/// The evidence: the answer in a sentence, the numbers, suspects and findings.
#[component]
pub(super) fn Evidence(props: &EvidenceProps) -> Html {
    let on = &props.on;
    let Some(view) = &props.view else {
        return html! { <aside class="evidence" aria-label="evidence"><p class="waiting-words">{ "The answers are being worked out." }</p></aside> };
    };
    html! {
        <aside class={if view.waiting { "evidence stale" } else { "evidence" }} aria-label="evidence">
            <h2>{ view.question.text() }</h2>
            <p class="sentence">{ &view.sentence }</p>
            if !view.numbers.is_empty() {
                <dl class="numbers">
                    { for view.numbers.iter().map(|(name, value)| html! { <div><dt>{ name }</dt><dd>{ value }</dd></div> }) }
                </dl>
            }
            <ul class="findings">
                { for view.suspects.iter().map(|suspect| suspect_item(suspect, on)) }
                { for view.findings.iter().map(|finding| finding_item(finding, on)) }
            </ul>
            if view.more > 0 { <p class="more">{ format!("and {} more", view.more) }</p> }
            if view.suspects.is_empty() && view.findings.is_empty() { <p class="nothing">{ "Nothing to report." }</p> }
            { for view.limits.iter().enumerate().map(|(index, limit)| limit_item(limit, index, &props.truss, on)) }
        </aside>
    }
}

/// A limit, to be changed where its effect is seen.
fn limit_item(limit: &LimitView, index: usize, truss: &Rc<Truss>, on: &Callback<PageEvent>) -> Html {
    let Some(cell) = limit.cell.cell else { return Html::default() };
    html! {
        <div class="limit">
            <p class="limit-line">
                <span>{ limit.name }</span>
                <Field view={limit.cell.clone()} {cell} at={(index, 98)} truss={truss.clone()} on={on.clone()} />
                <span class="means">{ &limit.means }</span>
            </p>
            <p class="limit-source">{ limit.source }</p>
        </div>
    }
}

fn point_at(on: &Callback<PageEvent>, thing: Option<Thing>) -> (Callback<MouseEvent>, Callback<MouseEvent>) {
    (on.reform(move |_| PageEvent::PointedAt(thing)), on.reform(|_| PageEvent::PointedAt(None)))
}

fn suspect_item(view: &SuspectView, on: &Callback<PageEvent>) -> Html {
    let index = view.index;
    let act = |event: PageEvent| on.reform(move |_: MouseEvent| event.clone());
    let (onmouseenter, onmouseleave) = point_at(on, Some(view.thing));
    html! {
        <li class={if view.open { "finding open" } else { "finding" }} key={format!("s{index}")} {onmouseenter} {onmouseleave}>
            <button class="finding-head" aria-expanded={view.open.to_string()} onclick={act(PageEvent::SuspectChosen(index))}>
                { sign(Sign::Fault) }
                <span class="finding-text">{ &view.words }</span>
                <span class="finding-marks">{ &view.between }</span>
            </button>
            if view.open {
                <dl class="facts">
                    <div><dt>{ "printed" }</dt><dd><s>{ &view.printed }</s></dd></div>
                    <div><dt>{ "should read" }</dt><dd><strong>{ &view.implied }</strong><span class="range">{ &view.range }</span></dd></div>
                    if !view.slip.is_empty() { <div><dt>{ "likely slip" }</dt><dd>{ &view.slip }</dd></div> }
                </dl>
                <p class="mend">
                    <button class="main" onclick={act(PageEvent::ImpliedTaken(index))}>{ format!("Take {}", view.implied) }</button>
                    <button class="plain" onclick={act(PageEvent::WithoutShown(index))}>
                        { if view.shown { "Back to the sketch".to_string() } else { format!("See the layout without {}", view.mark) } }
                    </button>
                </p>
            }
        </li>
    }
}

fn finding_item(view: &FindingView, on: &Callback<PageEvent>) -> Html {
    let index = view.index;
    let act = |event: PageEvent| on.reform(move |_: MouseEvent| event.clone());
    let (onmouseenter, onmouseleave) = point_at(on, view.thing);
    html! {
        <li class={if view.open { "finding open" } else { "finding" }} key={format!("f{index}")} {onmouseenter} {onmouseleave}>
            <button class="finding-head" aria-expanded={view.open.to_string()} onclick={act(PageEvent::FindingChosen(index))}>
                { sign(view.sign) }
                <span class="finding-text">{ &view.text }</span>
                <span class="finding-marks">{ &view.marks }</span>
            </button>
            if view.open {
                <div class="finding-body">
                    <p class="rule">{ format!("{}: {}", view.sign.words(), view.rule) }</p>
                    { for view.lines.iter().map(evidence_line) }
                    if let Some(mend) = &view.mend {
                        <p class="mend">
                            if mend.can {
                                <button class="main" onclick={act(PageEvent::MendTaken(index))}>{ &mend.text }</button>
                            } else {
                                { &mend.text }
                            }
                        </p>
                    }
                </div>
            }
        </li>
    }
}

fn evidence_line(line: &EvidenceLine) -> Html {
    match line {
        EvidenceLine::Words(text) => html! { <p>{ text }</p> },
        EvidenceLine::Value(name, value) => {
            html! { <p class="value"><span>{ name }</span><span class="number">{ value }</span></p> }
        }
        EvidenceLine::Law(name, statement, text) => html! {
            <figure class="law">
                <figcaption title={*statement}>{ *name }<span class="statement">{ *statement }</span></figcaption>
                <code>{ text }</code>
            </figure>
        },
    }
}
