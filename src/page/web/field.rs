//! A box of a table: typed in trade notation, understood in grey while it is typed, refused beside its cause.

use crate::measure::pretty;
use crate::page::state::view::{CellKind, CellView};
use crate::page::state::{Cell, Column, Event as PageEvent, understood};
use crate::truss::Truss;
use gloo::utils::document;
use std::rc::Rc;
use wasm_bindgen::JsCast;
use web_sys::{HtmlElement, HtmlInputElement, HtmlSelectElement, HtmlTextAreaElement};
use yew::prelude::*;

#[derive(Properties, PartialEq)]
pub(super) struct FieldProps {
    pub(super) view: CellView,
    pub(super) cell: Cell,
    /// Row and column on the screen, for moving with the keyboard.
    pub(super) at: (usize, usize),
    pub(super) truss: Rc<Truss>,
    #[prop_or_default]
    pub(super) placeholder: &'static str,
    pub(super) on: Callback<PageEvent>,
}

/// One box.
#[component]
pub(super) fn Field(props: &FieldProps) -> Html {
    let draft = use_state_eq(|| None::<String>);
    let cell = props.cell;
    let typed = {
        let draft = draft.clone();
        Callback::from(move |event: InputEvent| draft.set(Some(text_of(&event))))
    };
    let commit = {
        let (draft, on) = (draft.clone(), props.on.clone());
        Callback::from(move |()| {
            if let Some(text) = (*draft).clone() {
                draft.set(None);
                on.emit(PageEvent::CellEntered(cell, text));
            }
        })
    };
    let keys = {
        let (draft, on, commit, at) = (draft.clone(), props.on.clone(), commit.clone(), props.at);
        Callback::from(move |event: KeyboardEvent| match event.key().as_str() {
            "Enter" if !event.shift_key() => {
                event.prevent_default();
                commit.emit(());
                focus_cell((at.0 + 1, at.1));
            }
            "ArrowDown" => focus_cell((at.0 + 1, at.1)),
            "ArrowUp" if at.0 > 0 => focus_cell((at.0 - 1, at.1)),
            "Escape" => {
                draft.set(None);
                on.emit(PageEvent::CellCleared);
            }
            _ => {}
        })
    };
    let blur = commit.reform(|_: FocusEvent| ());
    let hint = draft.as_ref().and_then(|text| understood(&props.truss, cell, text));
    let shown = draft.as_ref().cloned().unwrap_or_else(|| props.view.text.clone());
    let rows = shown.lines().count().clamp(1, 6).to_string();
    let id = format!("cell-{}-{}", props.at.0, props.at.1);
    let invalid = !props.view.error.is_empty() || matches!(hint, Some(Err(_)));
    let class = if props.view.kind == CellKind::Value { "field value" } else { "field" };
    let input = match cell.column {
        Column::Line => html! {
            <textarea {id} class="field line" {rows} value={shown} placeholder={props.placeholder}
                aria-label={props.view.label.clone()} aria-invalid={invalid.to_string()} spellcheck="false" oninput={typed} onkeydown={keys} onblur={blur} />
        },
        _ => html! {
            <input {id} {class} value={shown} aria-label={props.view.label.clone()} aria-invalid={invalid.to_string()}
                autocomplete="off" spellcheck="false" oninput={typed} onkeydown={keys} onblur={blur} />
        },
    };
    html! {
        <div class="field-place">
            { input }
            if let Some(hint) = hint {
                { match hint {
                    Ok(words) => html! { <span class="understood">{ pretty(&words) }</span> },
                    Err(error) => html! { <span class="understood wrong">{ pretty(&error) }</span> },
                } }
            } else if !props.view.error.is_empty() {
                <span class="error" role="alert">{ &props.view.error }</span>
            }
        </div>
    }
}

fn text_of(event: &InputEvent) -> String {
    let input = event.target_dyn_into::<HtmlInputElement>().map(|input| input.value());
    input.or_else(|| event.target_dyn_into::<HtmlTextAreaElement>().map(|area| area.value())).unwrap_or_default()
}

fn focus_cell((row, column): (usize, usize)) {
    let element = document().get_element_by_id(&format!("cell-{row}-{column}"));
    if let Some(element) = element.and_then(|element| element.dyn_into::<HtmlElement>().ok()) {
        drop(element.focus());
        if let Some(input) = element.dyn_ref::<HtmlInputElement>() {
            input.select();
        }
    }
}

/// A yes or no.
pub(super) fn check(cell: Cell, view: &CellView, yes: bool, on: &Callback<PageEvent>) -> Html {
    let switch = on.reform(move |_: yew::Event| PageEvent::CellSwitched(cell));
    html! { <input type="checkbox" aria-label={view.label.clone()} checked={yes} onchange={switch} /> }
}

/// One of several.
pub(super) fn choice(cell: Cell, view: &CellView, names: &'static [&'static str], on: &Callback<PageEvent>) -> Html {
    let choose = on.reform(move |event: yew::Event| {
        let name = event.target_dyn_into::<HtmlSelectElement>().map(|select| select.value()).unwrap_or_default();
        PageEvent::CellEntered(cell, name)
    });
    let option = |name: &&'static str| html! { <option value={*name} selected={view.text == *name}>{ *name }</option> };
    html! {
        <select class="field" aria-label={view.label.clone()} onchange={choose}>{ for names.iter().map(option) }</select>
    }
}
