//! The board: the drawing, what moves with the pointer, and the figure entry beneath it.

use crate::page::state::view::{DrawingView, LabelView, OverlayView, PathView, SelectionView, Turned};
use crate::page::state::{Button, Event as PageEvent, Modifiers, Pen, Pixel, PointerAct};
use crate::truss::Role;
use std::rc::Rc;
use wasm_bindgen::JsCast;
use wasm_bindgen::closure::Closure;
use web_sys::{Element, HtmlTextAreaElement, PointerEvent, ResizeObserver, WheelEvent};
use yew::prelude::*;

#[derive(Properties, PartialEq)]
pub(super) struct BoardProps {
    pub(super) drawing: Rc<DrawingView>,
    pub(super) overlay: OverlayView,
    pub(super) selection: Option<SelectionView>,
    pub(super) pen: Pen,
    pub(super) still: bool,
    pub(super) has_layout: bool,
    pub(super) empty: bool,
    pub(super) entry: String,
    pub(super) entry_error: Option<String>,
    pub(super) on: Callback<PageEvent>,
}

/// The board.
#[component]
pub(super) fn Board(props: &BoardProps) -> Html {
    let board = use_node_ref();
    use_board_size(board.clone(), props.on.clone());
    let pointers = Pointers { board: board.clone(), on: props.on.clone() };
    let act = |event: PageEvent| props.on.reform(move |_: MouseEvent| event.clone());
    html! {
        <section class="board-place" aria-label="the board">
            <div class="board-bar">
                <button class={if props.pen == Pen::Down { "tool on" } else { "tool" }} id="pen" aria-pressed={(props.pen == Pen::Down).to_string()} onclick={act(PageEvent::PenToggled)}>
                    <svg class="icon" viewBox="0 0 16 16" aria-hidden="true"><path class="open" d="M3 13l.8-3L11 2.8l2.2 2.2L6 12.2zM9.6 4.2l2.2 2.2" /></svg>
                    { if props.pen == Pen::Down { "Pen down" } else { "Pen up" } }
                </button>
                <button class="tool" onclick={act(PageEvent::FitAsked)}>{ "Show all" }</button>
                <button class="tool" aria-label="larger" onclick={act(PageEvent::ZoomAsked(1.25))}>{ "+" }</button>
                <button class="tool" aria-label="smaller" onclick={act(PageEvent::ZoomAsked(0.8))}>{ "−" }</button>
                if !props.empty { <button class="tool" id="save-drawing" onclick={act(PageEvent::DrawingSaveAsked)}>{ "Save drawing (SVG)" }</button> }
                if props.has_layout {
                    <button class="tool" id="shown" onclick={act(PageEvent::ShownToggled)}>{ &props.drawing.caption }<kbd>{ "K" }</kbd></button>
                } else if !props.drawing.caption.is_empty() {
                    <span class="shown-words">{ &props.drawing.caption }</span>
                }
                if let Some(selection) = &props.selection { { selection_bar(selection, &props.on) } }
            </div>
            <svg ref={board} id="board" class={props.overlay.cursor} tabindex="0" role="application" aria-label={props.drawing.sentence.clone()}
                onpointerdown={pointers.down()} onpointermove={pointers.moved()} onpointerup={pointers.up()}
                onpointercancel={pointers.cancel()} onpointerleave={pointers.leave()} onwheel={pointers.wheel()}>
                <Drawing view={props.drawing.clone()} still={props.still} />
                <g class="overlay">{ paths(&props.overlay.paths) }{ labels(&props.overlay.labels) }</g>
            </svg>
            if props.empty { { empty_board(props.pen, &props.on) } }
            <Entry text={props.entry.clone()} error={props.entry_error.clone()} offer={props.selection.as_ref().map(|s| s.offer.clone()).unwrap_or_default()} on={props.on.clone()} />
        </section>
    }
}

fn empty_board(pen: Pen, on: &Callback<PageEvent>) -> Html {
    let down = on.reform(|_: MouseEvent| PageEvent::PenToggled);
    html! {
        <div class="empty-board">
            if pen == Pen::Down {
                <p>{ "Press to set a joint; drag from joint to joint for a member." }</p>
            } else {
                <p>{ "The sheet is empty. " }<button class="plain" onclick={down}>{ "Put the pen down" }</button></p>
            }
        </div>
    }
}

fn selection_bar(selection: &SelectionView, on: &Callback<PageEvent>) -> Html {
    let act = |event: PageEvent| on.reform(move |_: MouseEvent| event.clone());
    let role = on.reform(|event: yew::Event| {
        let name =
            event.target_dyn_into::<web_sys::HtmlSelectElement>().map(|select| select.value()).unwrap_or_default();
        PageEvent::RoleChosen(Role::from_name(&name).unwrap_or_default())
    });
    html! {
        <span class="selection-bar">
            <span class="selected-words">{ &selection.words }</span>
            if selection.can_join {
                <button class="tool" onclick={act(PageEvent::Key(crate::page::state::KeyPress { key: "m".into(), held: Modifiers::default() }))}>{ "Join" }</button>
            }
            if selection.joints {
                <button class="tool" onclick={act(PageEvent::SupportChosen(Some("pin")))}>{ "Pin" }</button>
                <button class="tool" onclick={act(PageEvent::SupportChosen(Some("roller")))}>{ "Roller" }</button>
                <button class="tool" onclick={act(PageEvent::SupportChosen(None))}>{ "No support" }</button>
                <button class="tool" onclick={act(PageEvent::LooseChosen(true))}>{ "Loose" }</button>
                <button class="tool" onclick={act(PageEvent::LooseChosen(false))}>{ "Set" }</button>
            }
            if selection.members {
                <select class="tool" aria-label="role of the selected members" onchange={role}>
                    <option selected=true disabled=true>{ "Role" }</option>
                    { for Role::ALL.iter().map(|role| html! { <option value={role.name()}>{ role.name() }</option> }) }
                </select>
            }
            <button class="tool" id="remove" onclick={act(PageEvent::RemoveAsked)}>{ "Remove" }</button>
        </span>
    }
}

#[derive(Properties, PartialEq)]
struct DrawingProps {
    view: Rc<DrawingView>,
    still: bool,
}

/// The drawing itself: made anew only when its view is another.
#[component]
fn Drawing(props: &DrawingProps) -> Html {
    html! {
        <g class="drawing">
            { paths(&props.view.paths) }
            { labels(&props.view.labels) }
            if let Some([rest, there, back]) = &props.view.motion {
                <path class="motion" d={if props.still { there.clone() } else { rest.clone() }}>
                    if !props.still {
                        <animate attributeName="d" values={format!("{rest};{there};{rest};{back};{rest}")} dur="3s" repeatCount="indefinite" />
                    }
                </path>
            }
        </g>
    }
}

pub(super) fn paths(views: &[PathView]) -> Html {
    html! { <g>{ for views.iter().map(|view| html! { <path class={view.class} d={view.d.clone()} /> }) }</g> }
}

pub(super) fn labels(views: &[LabelView]) -> Html {
    let label = |view: &LabelView| {
        html! {
            <text class={view.class} transform={Turned::attribute(view)} text-anchor={view.anchor.name()} dy="0.36em">{ &view.text }</text>
        }
    };
    html! { <g>{ for views.iter().map(label) }</g> }
}

/// Tells the page how large the board is, now and whenever it changes.
#[hook]
fn use_board_size(board: NodeRef, on: Callback<PageEvent>) {
    use_effect_with(board, move |board| {
        let element = board.cast::<Element>();
        let observed = element.clone();
        let closure = Closure::<dyn FnMut()>::new(move || {
            if let Some(element) = &observed {
                let rect = element.get_bounding_client_rect();
                on.emit(PageEvent::BoardResized(rect.width(), rect.height()));
            }
        });
        let observer = ResizeObserver::new(closure.as_ref().unchecked_ref()).ok();
        if let (Some(observer), Some(element)) = (&observer, &element) {
            observer.observe(element);
        }
        move || {
            if let Some(observer) = observer {
                observer.disconnect();
            }
            drop(closure);
        }
    });
}

/// Turns the browser's pointer events into acts.
struct Pointers {
    board: NodeRef,
    on: Callback<PageEvent>,
}

fn held(event: &web_sys::MouseEvent) -> Modifiers {
    Modifiers { shift: event.shift_key(), control: event.ctrl_key() || event.meta_key(), alt: event.alt_key() }
}

fn place(board: &NodeRef, event: &web_sys::MouseEvent) -> Pixel {
    let rect = board.cast::<Element>().map(|element| element.get_bounding_client_rect());
    let (left, top) = rect.map_or((0.0, 0.0), |rect| (rect.left(), rect.top()));
    Pixel::new(f64::from(event.client_x()) - left, f64::from(event.client_y()) - top)
}

impl Pointers {
    fn callback(&self, act: impl Fn(&NodeRef, &PointerEvent) -> PointerAct + 'static) -> Callback<PointerEvent> {
        let (board, on) = (self.board.clone(), self.on.clone());
        Callback::from(move |event: PointerEvent| on.emit(PageEvent::Pointer(act(&board, &event))))
    }

    fn down(&self) -> Callback<PointerEvent> {
        self.callback(|board, event| {
            if let Some(element) = board.cast::<Element>() {
                drop(element.set_pointer_capture(event.pointer_id()));
                if let Some(svg) = element.dyn_ref::<web_sys::SvgElement>() {
                    drop(svg.focus());
                }
            }
            let button = match event.button() {
                0 => Button::Main,
                1 => Button::Middle,
                _ => Button::Other,
            };
            let finger = event.pointer_type() == "touch";
            PointerAct::Down { id: event.pointer_id(), at: place(board, event), button, held: held(event), finger }
        })
    }

    fn moved(&self) -> Callback<PointerEvent> {
        self.callback(|board, event| PointerAct::Move {
            id: event.pointer_id(),
            at: place(board, event),
            held: held(event),
        })
    }

    fn up(&self) -> Callback<PointerEvent> {
        self.callback(|board, event| PointerAct::Up { id: event.pointer_id(), at: place(board, event) })
    }

    fn cancel(&self) -> Callback<PointerEvent> {
        self.callback(|_, event| PointerAct::Cancel { id: event.pointer_id() })
    }

    fn leave(&self) -> Callback<PointerEvent> {
        self.callback(|_, _| PointerAct::Leave)
    }

    fn wheel(&self) -> Callback<WheelEvent> {
        let (board, on) = (self.board.clone(), self.on.clone());
        Callback::from(move |event: WheelEvent| {
            event.prevent_default();
            on.emit(PageEvent::Wheel(place(&board, &event), event.delta_y()));
        })
    }
}

#[derive(Properties, PartialEq)]
struct EntryProps {
    text: String,
    error: Option<String>,
    offer: String,
    on: Callback<PageEvent>,
}

/// The figure entry: figures as they stand on the drawing.
#[component]
fn Entry(props: &EntryProps) -> Html {
    let typed = props.on.reform(|event: InputEvent| {
        PageEvent::EntryTyped(
            event.target_dyn_into::<HtmlTextAreaElement>().map(|area| area.value()).unwrap_or_default(),
        )
    });
    let on = props.on.clone();
    let keys = Callback::from(move |event: KeyboardEvent| match event.key().as_str() {
        "Enter" if !event.shift_key() => {
            event.prevent_default();
            on.emit(PageEvent::EntryMade);
        }
        "Escape" => {
            on.emit(PageEvent::EntryTyped(String::new()));
            if let Some(area) = event.target_dyn_into::<HtmlTextAreaElement>() {
                drop(area.blur());
            }
        }
        _ => {}
    });
    let placeholder = if props.offer.is_empty() {
        "type a figure:  U2 L3 7'-0 7/8\"   ·   L0...L8 8 @ 5'-0\" = 40'-0\"".to_string()
    } else {
        props.offer.clone()
    };
    let rows = props.text.lines().count().clamp(1, 6).to_string();
    let make = props.on.reform(|_: MouseEvent| PageEvent::EntryMade);
    html! {
        <div class="entry">
            <label for="entry">{ "Figure" }</label>
            <textarea id="entry" {rows} value={props.text.clone()} {placeholder} autocomplete="off" spellcheck="false"
                aria-invalid={props.error.is_some().to_string()} aria-describedby="entry-error" oninput={typed} onkeydown={keys} />
            if !props.text.is_empty() { <button class="plain" onclick={make}>{ "Add" }</button> }
            <p id="entry-error" class="error" role="alert">{ props.error.clone().unwrap_or_default() }</p>
        </div>
    }
}
