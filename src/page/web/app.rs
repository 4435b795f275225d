//! The page: holds the state, sends every event through the update function, and places the parts.

use super::answers::Answers;
use super::board::Board;
use super::book::Book;
use super::evidence::Evidence;
use super::head::Head;
use super::plan::Plan;
use super::sheet::Sheet;
use super::shell::{self, Shell};
use super::start::Start;
use crate::page::state::view::{self, DrawingView, SheetView};
use crate::page::state::{Event as PageEvent, KEYS, KeyPress, Modifiers, State, Theme, Tone, update};
use gloo::events::{EventListener, EventListenerOptions};
use gloo::utils::{document, window};
use std::cell::RefCell;
use std::rc::Rc;
use wasm_bindgen::JsCast;
use web_sys::{DragEvent, Element, KeyboardEvent};
use yew::prelude::*;

/// The notice that is always on the screen and on every print.
pub(super) const NOTICE: [&str; 2] =
    ["Geometry only.", " A licensed engineer must verify this design, and local codes govern."];

/// The page.
pub(super) struct App {
    state: Rc<State>,
    shell: Shell,
    on: Callback<PageEvent>,
    drawing: RefCell<Memo<State, DrawingView>>,
    sheet: RefCell<Memo<State, Option<SheetView>>>,
    _listeners: Vec<EventListener>,
}

/// A value that is made anew only when what it depends on has changed.
struct Memo<K, V> {
    made: Option<(K, Rc<V>)>,
}

impl<K, V> Memo<K, V> {
    fn get(&mut self, same: impl Fn(&K) -> bool, key: impl FnOnce() -> K, make: impl FnOnce() -> V) -> Rc<V> {
        match &self.made {
            Some((key, value)) if same(key) => value.clone(),
            _ => {
                let value = Rc::new(make());
                self.made = Some((key(), value.clone()));
                value
            }
        }
    }
}

/// True when nothing that the drawing shows differs.
fn same_drawing(a: &State, b: &State) -> bool {
    Rc::ptr_eq(&a.truss, &b.truss)
        && a.checked == b.checked
        && a.camera == b.camera
        && a.board_size == b.board_size
        && a.shown == b.shown
        && a.question == b.question
        && a.open_finding == b.open_finding
        && (a.book == crate::page::state::Book::Pieces) == (b.book == crate::page::state::Book::Pieces)
}

impl Component for App {
    type Message = PageEvent;
    type Properties = ();

    fn create(ctx: &Context<Self>) -> Self {
        let on = ctx.link().callback(|event: PageEvent| event);
        let mut app = App {
            state: Rc::new(State { theme: kept_theme(), still: shell::wants_stillness(), ..State::default() }),
            shell: Shell::new(on.clone()),
            _listeners: listeners(&on),
            drawing: RefCell::new(Memo { made: None }),
            sheet: RefCell::new(Memo { made: None }),
            on,
        };
        app.take(PageEvent::LinkArrived(shell::fragment()));
        if let Some(text) = shell::kept_limits() {
            app.take(PageEvent::LimitsFound(text));
        }
        if let Some(text) = shell::kept_work() {
            app.take(PageEvent::KeptFound(text));
        }
        app
    }

    fn update(&mut self, _: &Context<Self>, event: PageEvent) -> bool {
        self.take(event)
    }

    fn view(&self, _: &Context<Self>) -> Html {
        let state = &self.state;
        let on = &self.on;
        let ondragover = Callback::from(|event: DragEvent| event.prevent_default());
        let ondrop = drop_callback(on.clone());
        let theme = state.theme.name();
        if state.is_first_screen() {
            return html! {
                <div class="page first" data-theme={theme} {ondragover} {ondrop}>
                    <Start kept={state.kept.as_ref().map(|truss| AttrValue::from(kept_words(truss)))} on={on.clone()} message={message_words(state)} />
                    { notice() }
                </div>
            };
        }
        html! {
            <div class="page" data-theme={theme} {ondragover} {ondrop}>
                <Head view={view::head_view(state)} theme={state.theme} link={state.link.clone()} truss={state.truss.clone()} on={on.clone()} />
                <Answers tiles={view::answer_tiles(state)} on={on.clone()} />
                <main class="work">
                    <Board
                        drawing={self.drawing()}
                        overlay={view::overlay_view(state)}
                        selection={view::selection_view(state)}
                        pen={state.pen}
                        still={state.still}
                        has_layout={state.other_places().is_some()}
                        empty={state.truss.joints.is_empty()}
                        entry={state.entry.clone()}
                        entry_error={state.entry_error.clone()}
                        on={on.clone()}
                    />
                    <Evidence view={view::evidence_view(state)} truss={state.truss.clone()} on={on.clone()} />
                </main>
                <Book view={view::book_view(state)} truss={state.truss.clone()} pointed={state.pointed} on={on.clone()} />
                { for state.help.then(|| help(on)) }
                { for view::plan_view(state).map(|view| html! { <Plan {view} on={on.clone()} /> }) }
                { work(state, on) }
                { message(state, on) }
                { notice() }
                if state.printing { <Sheet view={self.sheet()} /> }
            </div>
        }
    }
}

impl App {
    /// Takes an event in: the new state, and what it asks of the browser. True when something changed.
    fn take(&mut self, event: PageEvent) -> bool {
        let (next, effects) = update(&self.state, event);
        let changed = next != *self.state;
        self.state = Rc::new(next);
        for effect in effects {
            self.shell.run(effect);
        }
        changed
    }

    fn drawing(&self) -> Rc<DrawingView> {
        let state = &*self.state;
        self.drawing.borrow_mut().get(|old| same_drawing(old, state), || state.clone(), || view::drawing_view(state))
    }

    fn sheet(&self) -> Rc<Option<SheetView>> {
        let state = &*self.state;
        let same = |old: &State| {
            Rc::ptr_eq(&old.truss, &state.truss) && old.checked == state.checked && old.shown == state.shown
        };
        self.sheet.borrow_mut().get(same, || state.clone(), || view::sheet_view(state))
    }
}

fn kept_theme() -> Theme {
    let kept = shell::kept_theme();
    [Theme::Light, Theme::Dark].into_iter().find(|theme| kept.as_deref() == Some(theme.name())).unwrap_or_default()
}

fn kept_words(truss: &crate::truss::Truss) -> String {
    let title = if truss.title.is_empty() { "Untitled truss" } else { &truss.title };
    format!("{title}: {} joints, {} members, {} figures", truss.joints.len(), truss.members.len(), truss.figures.len())
}

fn message_words(state: &State) -> Option<AttrValue> {
    state.message.as_ref().map(|message| AttrValue::from(message.text.clone()))
}

fn notice() -> Html {
    html! { <footer class="notice"><strong>{ NOTICE[0] }</strong>{ NOTICE[1] }</footer> }
}

fn message(state: &State, on: &Callback<PageEvent>) -> Html {
    let close = on.reform(|_: MouseEvent| PageEvent::MessageClosed);
    html! {
        <div class="message-line" role="status" aria-live="polite">
            if let Some(message) = &state.message {
                <p class={if message.tone == Tone::Refused { "message refused" } else { "message" }}>
                    <span>{ &message.text }</span>
                    <button class="quiet" onclick={close}>{ "Close" }</button>
                </p>
            }
        </div>
    }
}

/// The search that is under way, where it takes long, with a way to stop it.
fn work(state: &State, on: &Callback<PageEvent>) -> Html {
    let stop = on.reform(|_: MouseEvent| PageEvent::StopAsked);
    html! {
        <div class="work-line" role="status">
            if let Some(work) = view::work_view(state) {
                <p class="message">
                    <span>{ work.words }</span>
                    if let Some((done, of)) = work.steps {
                        <progress value={done.to_string()} max={of.to_string()} aria-label="figures tried" />
                    } else {
                        <progress aria-label="working" />
                    }
                    <button class="quiet" id="stop" onclick={stop}>{ "Stop" }</button>
                </p>
            }
        </div>
    }
}

fn help(on: &Callback<PageEvent>) -> Html {
    let close = on.reform(|_: MouseEvent| PageEvent::HelpToggled);
    html! {
        <section class="help" role="dialog" aria-label="Keys">
            <h2>{ "Keys" }</h2>
            <dl>
                { for KEYS.iter().map(|line| html! { <><dt>{ line.keys }</dt><dd>{ line.words }</dd></> }) }
            </dl>
            <button class="plain" onclick={close}>{ "Close" }</button>
        </section>
    }
}

fn drop_callback(on: Callback<PageEvent>) -> Callback<DragEvent> {
    Callback::from(move |event: DragEvent| {
        event.prevent_default();
        if let Some(file) = event.data_transfer().and_then(|data| data.files()).and_then(|files| files.get(0)) {
            shell::read_file(file, on.clone());
        }
    })
}

fn listeners(on: &Callback<PageEvent>) -> Vec<EventListener> {
    let (keys, links, begins, ends) = (on.clone(), on.clone(), on.clone(), on.clone());
    let options = EventListenerOptions::enable_prevent_default();
    vec![
        EventListener::new_with_options(&document(), "keydown", options, move |event| {
            if let Some(press) = event.dyn_ref::<KeyboardEvent>().and_then(key_press) {
                keys.emit(PageEvent::Key(press));
            }
        }),
        EventListener::new(&window(), "beforeprint", move |_| begins.emit(PageEvent::Printing(true))),
        EventListener::new(&window(), "afterprint", move |_| ends.emit(PageEvent::Printing(false))),
        EventListener::new(&window(), "hashchange", move |_| links.emit(PageEvent::LinkArrived(shell::fragment()))),
    ]
}

/// The key press that the page takes in; `None` for keys that belong to a text box or a control.
fn key_press(event: &KeyboardEvent) -> Option<KeyPress> {
    let held =
        Modifiers { shift: event.shift_key(), control: event.ctrl_key() || event.meta_key(), alt: event.alt_key() };
    let key = event.key();
    let tag = event.target().and_then(|target| target.dyn_into::<Element>().ok()).map(|element| element.tag_name());
    let in_text = matches!(tag.as_deref(), Some("INPUT" | "TEXTAREA" | "SELECT"));
    let on_control = matches!(tag.as_deref(), Some("BUTTON" | "A" | "SUMMARY" | "LABEL"));
    let ours = match key.as_str() {
        "s" | "S" | "p" | "P" if held.control => true,
        _ if in_text || held.alt => false,
        "z" | "Z" | "y" | "Y" if held.control => true,
        _ if held.control => false,
        "Enter" | " " => !on_control,
        _ => true,
    };
    let prevents = held.control
        || matches!(key.as_str(), "ArrowLeft" | "ArrowRight" | "ArrowUp" | "ArrowDown" | "Backspace" | "Enter");
    let begins_value = key.len() == 1 && key.starts_with(|c: char| c.is_ascii_digit() || matches!(c, '.' | '(' | '-'));
    if ours && (prevents || begins_value) {
        event.prevent_default();
    }
    ours.then_some(KeyPress { key, held })
}
