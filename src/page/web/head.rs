//! The head of the page: what truss this is, and the few acts that concern all of it.

use super::field::Field;
use super::shell::read_file;
use crate::page::state::view::{HeadView, PrintView};
use crate::page::state::{Cell, Column, Event as PageEvent, Paper, Row, SheetSetup, Theme};
use crate::truss::Truss;
use std::rc::Rc;
use web_sys::{HtmlInputElement, HtmlSelectElement};
use yew::prelude::*;

/// The units by their symbols and in words.
const UNITS: [(&str, &str); 5] =
    [("in", "inches"), ("ft", "feet"), ("mm", "millimetres"), ("cm", "centimetres"), ("m", "metres")];

#[derive(Properties, PartialEq)]
pub(super) struct HeadProps {
    pub(super) view: HeadView,
    pub(super) theme: Theme,
    pub(super) link: Option<String>,
    pub(super) truss: Rc<Truss>,
    pub(super) on: Callback<PageEvent>,
}

/// The head of the page.
#[component]
pub(super) fn Head(props: &HeadProps) -> Html {
    let HeadProps { view, theme, link, on, .. } = props;
    let choose_unit = on.reform(|event: yew::Event| {
        let symbol = event.target_dyn_into::<HtmlSelectElement>().map(|select| select.value()).unwrap_or_default();
        PageEvent::CellEntered(Cell::new(Row::Sheet, Column::Unit), symbol)
    });
    let act = |event: PageEvent| on.reform(move |_: MouseEvent| event.clone());
    let retitle = on.reform(|event: yew::Event| {
        let text = event.target_dyn_into::<HtmlInputElement>().map(|input| input.value()).unwrap_or_default();
        PageEvent::CellEntered(Cell::new(Row::Sheet, Column::Title), text)
    });
    let undo = view.undo.as_ref().map_or("Nothing to undo".to_string(), |label| format!("Undo: {label}"));
    let redo = view.redo.as_ref().map_or("Nothing to do again".to_string(), |label| format!("Redo: {label}"));
    let theme = match theme {
        Theme::System => "Theme: as the system",
        Theme::Light => "Theme: light",
        Theme::Dark => "Theme: dark",
    };
    html! {
        <header class="head">
            <div class="head-title">
                <h1><input class="title" aria-label="title of the sheet" value={view.title.clone()} onchange={retitle} maxlength="120" /></h1>
                <p class="head-sheet">
                    <span class="sheet-choice">
                        <select aria-label="the unit of the sheet" onchange={choose_unit}>
                            { for UNITS.iter().map(|(symbol, words)| html! { <option value={*symbol} selected={view.unit == *symbol}>{ *words }</option> }) }
                        </select>
                        { "printed to" }
                        <Field view={view.step.clone()} cell={Cell::new(Row::Sheet, Column::Step)} at={(0, 99)} truss={props.truss.clone()} on={on.clone()} />
                    </span>
                    if !view.source.is_empty() { <span class="source">{ &view.source }</span> }
                    if !view.fingerprint.is_empty() {
                        <span class="fingerprint" title="fingerprint of this truss: the same on every machine">{ &view.fingerprint }</span>
                    }
                </p>
            </div>
            <nav class="acts" aria-label="the truss as a whole">
                <button class="act" onclick={act(PageEvent::StartAsked)}>{ "Begin" }</button>
                <button class="act" id="plan" onclick={act(PageEvent::PlanOpened)}>{ "Lay out" }</button>
                <OpenFile on={on.clone()} />
                <button class="act" onclick={act(PageEvent::SaveAsked)}>{ "Save" }</button>
                <button class="act" id="make-link" onclick={act(PageEvent::LinkAsked)}>{ "Link" }</button>
                <button class="act" id="print" aria-expanded={view.print.is_some().to_string()} onclick={act(PageEvent::PrintPanelToggled)}>{ "Print" }</button>
                <button class="act undo" id="undo" disabled={view.undo.is_none()} title={undo.clone()} onclick={act(PageEvent::UndoAsked)}>
                    { if view.undo.is_some() { undo } else { "Undo".into() } }
                </button>
                <button class="act" id="redo" disabled={view.redo.is_none()} title={redo} onclick={act(PageEvent::RedoAsked)}>{ "Redo" }</button>
                <button class="act" title={theme} aria-label={theme} onclick={act(PageEvent::ThemeAsked)}>
                    <svg class="icon" viewBox="0 0 16 16" aria-hidden="true"><path d="M8 1.5a6.5 6.5 0 1 0 0 13z" /><path class="open" d="M8 1.5a6.5 6.5 0 0 1 0 13" /></svg>
                </button>
                <button class="act" title="keys" aria-label="list of keys" onclick={act(PageEvent::HelpToggled)}>{ "Keys" }</button>
            </nav>
            if let Some(link) = link { { link_panel(link, on) } }
            if let Some(print) = &view.print { { print_panel(print, on) } }
        </header>
    }
}

/// Paper and scale, and the print.
fn print_panel(view: &PrintView, on: &Callback<PageEvent>) -> Html {
    let setup = view.setup;
    let value = |event: yew::Event| {
        event.target_dyn_into::<HtmlSelectElement>().map(|select| select.value()).unwrap_or_default()
    };
    let paper = on.reform(move |event| {
        let name = value(event);
        PageEvent::SheetChosen(SheetSetup { paper: Paper::ALL.into_iter().find(|p| p.name() == name), ..setup })
    });
    let scale =
        on.reform(move |event| PageEvent::SheetChosen(SheetSetup { times: value(event).parse().ok(), ..setup }));
    html! {
        <div class="link-panel print-panel">
            <label>{ "Paper " }
                <select id="paper" onchange={paper}>
                    { for Paper::ALL.iter().map(|p| html! { <option value={p.name()} selected={*p == view.paper}>{ p.name() }</option> }) }
                </select>
            </label>
            <label>{ "Scale " }
                <select id="scale" onchange={scale}>
                    <option value="" selected={setup.times.is_none()}>{ format!("the largest that fits: {}", view.fits) }</option>
                    { for view.scales.iter().map(|s| html! { <option value={s.times.to_string()} selected={setup.times == Some(s.times)}>{ s.name }</option> }) }
                </select>
            </label>
            <button class="main" id="print-now" onclick={on.reform(|_: MouseEvent| PageEvent::PrintAsked)}>{ "Print the sheet" }</button>
            <button class="plain" onclick={on.reform(|_: MouseEvent| PageEvent::PrintPanelToggled)}>{ "Close" }</button>
        </div>
    }
}

fn link_panel(link: &str, on: &Callback<PageEvent>) -> Html {
    let close = on.reform(|_: MouseEvent| PageEvent::LinkClosed);
    let select = Callback::from(|event: FocusEvent| {
        if let Some(input) = event.target_dyn_into::<HtmlInputElement>() {
            input.select();
        }
    });
    html! {
        <div class="link-panel">
            <label for="link">{ format!("The whole truss in {} characters. Whoever opens it in a copy of this page gets the same truss.", link.len() + 1) }</label>
            <input id="link" readonly=true value={format!("#{link}")} onfocus={select} />
            <button class="plain" onclick={close}>{ "Close" }</button>
        </div>
    }
}

#[derive(Properties, PartialEq)]
pub(super) struct OpenProps {
    pub(super) on: Callback<PageEvent>,
    #[prop_or("Open")]
    pub(super) words: &'static str,
    #[prop_or("act")]
    pub(super) class: &'static str,
}

/// The act of opening a file.
#[component]
pub(super) fn OpenFile(props: &OpenProps) -> Html {
    let on = props.on.clone();
    let input = use_node_ref();
    let onchange = {
        let input = input.clone();
        Callback::from(move |_: yew::Event| {
            let Some(element) = input.cast::<HtmlInputElement>() else { return };
            if let Some(file) = element.files().and_then(|files| files.get(0)) {
                read_file(file, on.clone());
            }
            // The same file may be chosen again after it was changed.
            element.set_value("");
        })
    };
    let press = {
        let input = input.clone();
        Callback::from(move |_: MouseEvent| {
            if let Some(element) = input.cast::<HtmlInputElement>() {
                element.click();
            }
        })
    };
    html! {
        <>
            <button class={props.class} onclick={press}>{ props.words }</button>
            <input ref={input} class="hidden" type="file" accept=".json,.csv,application/json,text/csv" aria-label="open a truss file" tabindex="-1" {onchange} />
        </>
    }
}
