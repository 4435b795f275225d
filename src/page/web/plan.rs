//! The plan of a layout: measures typed in trade notation, with a preview that follows.

use super::board::{labels, paths};
use crate::page::state::view::{PREVIEW, PlanView};
use crate::page::state::{Event as PageEvent, PlanField};
use crate::truss::Configuration;
use web_sys::{HtmlInputElement, HtmlSelectElement};
use yew::prelude::*;

#[derive(Properties, PartialEq)]
pub(super) struct PlanProps {
    pub(super) view: PlanView,
    pub(super) on: Callback<PageEvent>,
}

/// The plan.
#[component]
pub(super) fn Plan(props: &PlanProps) -> Html {
    let PlanProps { view, on } = props;
    let choose = on.reform(|event: yew::Event| {
        let name = event.target_dyn_into::<HtmlSelectElement>().map(|select| select.value()).unwrap_or_default();
        PageEvent::PlanConfigured(Configuration::from_name(&name).unwrap_or_default())
    });
    let submit = on.reform(|event: SubmitEvent| {
        event.prevent_default();
        PageEvent::PlanTaken
    });
    let keys = {
        let on = on.clone();
        Callback::from(move |event: KeyboardEvent| {
            if event.key() == "Escape" {
                on.emit(PageEvent::PlanClosed);
            }
        })
    };
    html! {
        <form class="plan" aria-label="lay out a truss" onsubmit={submit} onkeydown={keys}>
            <h2>{ "Lay out a truss" }</h2>
            <div class="plan-fields">
                <label for="plan-configuration">{ "configuration" }</label>
                <select id="plan-configuration" onchange={choose}>
                    { for Configuration::ALL.iter().map(|c| html! { <option value={c.name()} selected={*c == view.configuration}>{ c.name() }</option> }) }
                </select>
                // In a place of their own: otherwise, when one comes or goes, what stands before them is made anew and loses the keyboard.
                <div class="plan-measures">
                    { for view.fields.iter().map(|(field, name, text, understood)| measure(*field, name, text, understood, on)) }
                </div>
                <label for="plan-figured">{ "with all figures" }</label>
                <input id="plan-figured" type="checkbox" checked={view.figured} onchange={on.reform(|_: yew::Event| PageEvent::PlanFigured)} />
            </div>
            <svg class="plan-preview board" viewBox={format!("0 0 {} {}", PREVIEW.0 as u32, PREVIEW.1 as u32)} aria-hidden="true">
                { paths(&view.preview.paths) }{ labels(&view.preview.labels) }
            </svg>
            <p class="plan-words" role="status">{ &view.words }</p>
            if !view.error.is_empty() { <p class="error" role="alert">{ &view.error }</p> }
            <p class="plan-acts">
                <button class="main" id="plan-take" type="submit" disabled={!view.error.is_empty()}>{ "Put it on the sheet" }</button>
                <button class="plain" type="button" onclick={on.reform(|_: MouseEvent| PageEvent::PlanClosed)}>{ "Close" }</button>
            </p>
        </form>
    }
}

fn measure(field: PlanField, name: &'static str, text: &str, understood: &str, on: &Callback<PageEvent>) -> Html {
    let id = format!("plan-{}", name.replace(' ', "-"));
    let typed = on.reform(move |event: InputEvent| {
        let text = event.target_dyn_into::<HtmlInputElement>().map(|input| input.value()).unwrap_or_default();
        PageEvent::PlanTyped(field, text)
    });
    html! {
        <>
            <label for={id.clone()}>{ name }</label>
            <span class="plan-field">
                <input {id} value={text.to_string()} autocomplete="off" spellcheck="false" oninput={typed} />
                <span class="means">{ understood }</span>
            </span>
        </>
    }
}
