//! The first screen: what the page is for, and what to open.

use super::head::OpenFile;
use crate::page::state::{DEMOS, Event as PageEvent};
use web_sys::HtmlInputElement;
use yew::prelude::*;

#[derive(Properties, PartialEq)]
pub(super) struct StartProps {
    pub(super) kept: Option<AttrValue>,
    pub(super) message: Option<AttrValue>,
    pub(super) on: Callback<PageEvent>,
}

/// The first screen.
#[component]
pub(super) fn Start(props: &StartProps) -> Html {
    let act = |event: PageEvent| props.on.reform(move |_: MouseEvent| event.clone());
    let link = props.on.reform(|event: yew::Event| {
        PageEvent::LinkArrived(
            event.target_dyn_into::<HtmlInputElement>().map(|input| input.value()).unwrap_or_default(),
        )
    });
    html! {
        <main class="start">
            <svg class="start-truss" viewBox="0 0 320 96" aria-hidden="true">
                <path class="member chord" d="M10 84L160 14L310 84M10 84H310" />
                <path class="member web" d="M60 84V60.7M110 84V37.3M160 84V14M210 84V37.3M260 84V60.7M60 60.7L110 84M110 37.3L160 84M210 37.3L160 84M260 60.7L210 84" />
            </svg>
            <h1>{ "Chordwright" }</h1>
            <p class="start-words">{ "Do the figures on a truss drawing describe one truss that can be built? Type them as the drawing has them, and get proof, or the figure that is wrong. Everything is worked out here, exactly, and nothing leaves this page." }</p>
            if let Some(message) = &props.message { <p class="message refused" role="alert">{ message }</p> }
            <div class="start-acts">
                if let Some(kept) = &props.kept {
                    <button class="main" id="take-up" onclick={act(PageEvent::KeptTaken)}>{ "Go on with your work" }</button>
                    <span class="kept-words">{ kept }</span>
                }
                <button class={if props.kept.is_some() { "plain" } else { "main" }} id="new-sheet" onclick={act(PageEvent::NewSheet)}>{ "Draw a truss" }</button>
                <button class="plain" id="plan" onclick={act(PageEvent::PlanOpened)}>{ "Lay out a truss" }</button>
                <OpenFile on={props.on.clone()} words="Open a file" class="plain" />
            </div>
            <h2>{ "Or look at one" }</h2>
            <ul class="demos">
                { for DEMOS.iter().enumerate().map(|(index, demo)| html! {
                    <li><button class="demo" onclick={act(PageEvent::DemoChosen(index))}><strong>{ demo.name }</strong><span>{ demo.words }</span></button></li>
                }) }
            </ul>
            <label class="paste-link">{ "Or paste a link here" }<input onchange={link} autocomplete="off" spellcheck="false" /></label>
        </main>
    }
}
