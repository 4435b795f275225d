//! The one function in which the page changes.

use super::camera::{Camera, Pixel};
use super::cells::{Cell, Column, Row, edit_of, entry_edit};
use super::checked::Checked;
use super::event::{Ask, Effect, Event, KeyPress};
use super::model::{Book, Drag, Message, Pen, Refused, Shown, Source, State, Thing, Tone};
use super::plan::{self, Plan};
use super::{board_events, draw, files, keys};
use crate::checks::{Adjustable, Report};
use crate::exchange::read_truss;
use crate::truss::{Edit, JointId, Selection, Truss};
use std::rc::Rc;

/// The state after an event, and what is asked of the browser.
pub fn update(state: &State, event: Event) -> (State, Vec<Effect>) {
    let mut next = state.clone();
    let mut effects = Vec::new();
    apply(&mut next, event, &mut effects);
    if !next.shows_the_same_places(state) {
        next.find_places();
    }
    (next, effects)
}

fn apply(state: &mut State, event: Event, effects: &mut Vec<Effect>) {
    match event {
        Event::DemoChosen(index) => files::open_demo(state, index, effects),
        Event::NewSheet => new_sheet(state, effects),
        Event::FileRead(name, bytes) => files::open_file(state, &name, &bytes, effects),
        Event::FileFailed(name, why) => say(state, Tone::Refused, format!("{name} could not be read: {why}")),
        Event::LinkArrived(fragment) => files::open_link(state, &fragment, effects),
        Event::KeptFound(text) => state.kept = read_truss(text.as_bytes()).ok().map(Rc::new),
        Event::LimitsFound(text) => state.limits = serde_json::from_str(&text).map(Rc::new).unwrap_or_default(),
        Event::KeptTaken => take_kept(state, effects),
        Event::KeepFailed => say(
            state,
            Tone::Refused,
            "this browser keeps nothing for the page: save to a file before you close it".into(),
        ),
        Event::StartAsked => state.source = None,
        Event::Answered(revision, report, fingerprint) => answered(state, revision, report, fingerprint),
        Event::Progressed(revision, progress) => {
            state.progress = Some(progress).filter(|_| revision == state.revision && state.is_checking());
        }
        Event::StopAsked => stop_search(state, effects),
        Event::CheckFailed(why) => check_failed(state, why),
        Event::QuestionChosen(question) => {
            state.question = question;
            state.open_finding = None;
            state.open_suspect = None;
        }
        Event::FindingChosen(index) => {
            state.open_suspect = None;
            state.open_finding = (state.open_finding != Some(index)).then_some(index);
        }
        Event::SuspectChosen(index) => {
            state.open_finding = None;
            state.open_suspect = (state.open_suspect != Some(index)).then_some(index);
        }
        Event::MendTaken(index) => take_mend(state, index, effects),
        Event::ImpliedTaken(index) => take_implied(state, index, effects),
        Event::WithoutShown(index) => {
            state.shown = if state.shows_without(index) { Shown::Sketch } else { Shown::Without(index) };
        }
        Event::ShownToggled => toggle_shown(state),
        Event::PointedAt(thing) => state.pointed = thing,
        Event::ThingChosen(thing, extend) => choose(state, thing, extend),
        Event::Pointer(act) => board_events::pointer(state, act, effects),
        Event::Wheel(at, turned) => zoom(state, (-turned * 0.0015).clamp(-1.0, 1.0).exp(), at),
        Event::ZoomAsked(factor) => {
            let (width, height) = state.board_size;
            zoom(state, factor, Pixel::new(width / 2.0, height / 2.0));
        }
        Event::FitAsked => fit(state),
        Event::BoardResized(width, height) => resized(state, width, height),
        Event::Key(press) => key(state, &press, effects),
        Event::PenToggled => {
            state.pen = if state.pen == Pen::Up { Pen::Down } else { Pen::Up };
            state.shown = if state.pen == Pen::Down { Shown::Sketch } else { state.shown };
        }
        Event::BookChosen(book) => {
            state.book = book;
            state.book_start = 0;
        }
        Event::BookMoved(start) => state.book_start = start,
        Event::CellEntered(cell, text) => enter_cell(state, cell, text, effects),
        Event::CellCleared => state.refused = None,
        Event::CellSwitched(cell) => enter_cell(state, cell, String::new(), effects),
        Event::RoleChosen(role) => draw::set_roles(state, role, effects),
        Event::SupportChosen(kind) => draw::set_supports(state, kind, effects),
        Event::LooseChosen(loose) => draw::set_loose(state, loose, effects),
        Event::EntryTyped(text) => {
            state.entry = text;
            state.entry_error = None;
        }
        Event::EntryMade => make_entry(state, effects),
        Event::RemoveAsked => remove(state, effects),
        Event::UndoAsked => go_back(state, effects),
        Event::RedoAsked => go_forth(state, effects),
        Event::SaveAsked => files::save(state, effects),
        Event::TableSaveAsked => files::save_table(state, effects),
        Event::DrawingSaveAsked => files::save_drawing(state, effects),
        Event::LinkAsked => files::make_link(state, effects),
        Event::LinkCopied(done) => link_copied(state, done),
        Event::LinkClosed => state.link = None,
        Event::PlanOpened => {
            plan::open(state, effects);
            effects.push(Effect::FocusPlan);
        }
        Event::PlanConfigured(configuration) => on_plan(state, |plan| plan.configuration = configuration),
        Event::PlanTyped(field, text) => on_plan(state, |plan| *plan.text_mut(field) = text),
        Event::PlanFigured => on_plan(state, |plan| plan.figured = !plan.figured),
        Event::PlanTaken => plan::take(state, effects),
        Event::PlanClosed => state.plan = None,
        Event::PrintPanelToggled => state.print_panel = !state.print_panel,
        Event::SheetChosen(setup) => state.setup = setup,
        Event::PrintAsked => {
            state.printing = true;
            state.print_panel = false;
            effects.push(Effect::Print);
        }
        Event::Printing(now) => state.printing = now,
        Event::ThemeAsked => {
            state.theme = state.theme.next();
            effects.push(Effect::KeepTheme(state.theme.name()));
        }
        Event::MotionAsked(still) => state.still = still,
        Event::HelpToggled => state.help = !state.help,
        Event::MessageClosed => state.message = None,
    }
}

fn on_plan(state: &mut State, change: impl FnOnce(&mut Plan)) {
    if let Some(plan) = &mut state.plan {
        change(plan);
    }
}

/// Says something in the message line.
pub(super) fn say(state: &mut State, tone: Tone, text: String) {
    state.message = Some(Message { text, tone });
}

/// Makes an edit, notes it in the history, and asks for new answers. Says why when it is refused.
pub(super) fn change(state: &mut State, edit: &Edit, label: String, effects: &mut Vec<Effect>) -> bool {
    match state.truss.edited(edit) {
        Ok(truss) if truss == *state.truss => true,
        Ok(truss) => {
            let before = std::mem::replace(&mut state.truss, Rc::new(truss));
            state.history.note(label, before);
            state.source.get_or_insert(Source::Own);
            state.message = None;
            after_change(state, effects);
            true
        }
        Err(error) => {
            say(state, Tone::Refused, error.to_string());
            false
        }
    }
}

fn after_change(state: &mut State, effects: &mut Vec<Effect>) {
    keep_ids_valid(state);
    effects.push(Effect::Keep(state.truss.clone()));
    start_checks(state, effects);
}

/// Asks for answers to the truss as it is now.
pub(super) fn start_checks(state: &mut State, effects: &mut Vec<Effect>) {
    state.revision += 1;
    state.progress = None;
    effects.push(Effect::Check(ask(state)));
    effects.push(Effect::SetTitle(state.truss.title.clone()));
}

fn ask(state: &State) -> Ask {
    Ask { revision: state.revision, truss: state.truss.clone(), limits: state.limits.clone(), until: None }
}

/// What the search has come to is kept: it is asked for again, only so far.
fn stop_search(state: &mut State, effects: &mut Vec<Effect>) {
    if let Some(progress) = state.progress.take() {
        effects.push(Effect::Check(Ask { until: Some(progress.stage), ..ask(state) }));
    }
}

fn check_failed(state: &mut State, why: String) {
    state.progress = None;
    say(state, Tone::Refused, format!("the checks could not run: {why}"));
}

/// Drops whatever is selected or pointed at that is no longer there.
fn keep_ids_valid(state: &mut State) {
    let truss = state.truss.clone();
    state.selection.joints.retain(|id| id.index() < truss.joints.len());
    state.selection.members.retain(|id| id.index() < truss.members.len());
    state.selection.figures.retain(|id| id.index() < truss.figures.len());
    state.selection.supports.retain(|id| id.index() < truss.supports.len());
    state.pointed = None;
    state.open_finding = None;
    state.open_suspect = None;
    state.drag = Drag::None;
}

fn answered(state: &mut State, revision: u64, report: Rc<Report>, fingerprint: String) {
    if revision != state.revision {
        return;
    }
    state.progress = None;
    let findings = report.findings.len();
    state.checked = Some(Rc::new(Checked::new(state.truss.clone(), report, fingerprint, state.shop())));
    state.open_finding = state.open_finding.filter(|&index| index < findings);
    if state.fitted && state.drag == Drag::None && state.pen == Pen::Up {
        fit(state);
    }
}

fn new_sheet(state: &mut State, effects: &mut Vec<Effect>) {
    files::open(state, Truss::default(), Source::Own, effects);
    state.pen = Pen::Down;
    state.shown = Shown::Sketch;
}

fn take_kept(state: &mut State, effects: &mut Vec<Effect>) {
    if let Some(truss) = state.kept.take() {
        files::open(state, Rc::unwrap_or_clone(truss), Source::Kept, effects);
    }
}

/// Shows the whole truss.
pub(super) fn fit(state: &mut State) {
    if state.board_size.0 > 0.0 {
        state.find_places();
        state.camera = Camera::fitted(&state.places, state.board_size);
    }
    state.fitted = true;
}

fn zoom(state: &mut State, factor: f64, about: Pixel) {
    state.camera = state.camera.zoomed(factor, about);
    state.fitted = false;
}

fn resized(state: &mut State, width: f64, height: f64) {
    let (old_width, old_height) = std::mem::replace(&mut state.board_size, (width, height));
    if state.fitted || old_width == 0.0 {
        fit(state);
    } else {
        state.camera = state.camera.panned((width - old_width) / 2.0, (height - old_height) / 2.0);
    }
}

fn toggle_shown(state: &mut State) {
    state.shown = match state.shown {
        Shown::Layout if !state.has_layout() => state.other_places().unwrap_or_default(),
        Shown::Sketch => state.other_places().unwrap_or(Shown::Layout),
        Shown::Layout | Shown::Without(_) | Shown::Nearest => Shown::Sketch,
    };
}

/// Selects a thing, alone or with what is selected already; choosing a selected thing again with `extend` drops it.
pub(super) fn choose(state: &mut State, thing: Thing, extend: bool) {
    let was = state.is_selected(thing);
    if !extend {
        state.selection = Selection::default();
    }
    let selection = &mut state.selection;
    let drop = extend && was;
    match thing {
        Thing::Joint(id) => put(&mut selection.joints, id, drop),
        Thing::Member(id) => put(&mut selection.members, id, drop),
        Thing::Figure(id) => put(&mut selection.figures, id, drop),
        Thing::Support(id) => put(&mut selection.supports, id, drop),
    }
}

fn put<T: PartialEq>(list: &mut Vec<T>, id: T, drop: bool) {
    if drop {
        list.retain(|other| *other != id);
    } else if !list.contains(&id) {
        list.push(id);
    }
}

fn take_mend(state: &mut State, index: usize, effects: &mut Vec<Effect>) {
    let Some(checked) = state.fresh().cloned() else { return };
    let Some(mend) = checked.report.findings.get(index).and_then(|finding| finding.mend.as_ref()) else { return };
    if let Some(edit) = &mend.edit {
        change(state, edit, mend.text.clone(), effects);
    }
}

fn take_implied(state: &mut State, index: usize, effects: &mut Vec<Effect>) {
    let Some(checked) = state.fresh().cloned() else { return };
    let Some(suspect) = checked.report.answers.close.blamed().get(index) else { return };
    let figure = checked.truss.figure(suspect.figure);
    match super::cells::figure_value(&state.truss, &figure.kind, &suspect.implied) {
        Ok(value) => {
            let edit = Edit::FigureReads(suspect.figure, value);
            change(state, &edit, format!("{} reads {}", figure.mark, suspect.implied), effects);
        }
        Err(error) => say(state, Tone::Refused, error),
    }
}

fn enter_limit(state: &mut State, limit: Adjustable, text: &str, effects: &mut Vec<Effect>) -> Result<(), String> {
    let limits = limit.entered(&state.limits, state.truss.unit, text)?;
    if limits != *state.limits {
        effects.push(Effect::KeepLimits(serde_json::to_string(&limits).unwrap_or_default()));
        state.limits = Rc::new(limits);
        start_checks(state, effects);
    }
    Ok(())
}

/// Pieces are cut anew from the stock that a line names.
fn enter_stock(state: &mut State, text: &str) -> Result<(), String> {
    let shop = super::stock::read_stock(&state.shop(), &state.truss, text)?;
    state.checked = state.checked.as_ref().map(|checked| Rc::new(checked.with_shop(shop.clone())));
    state.shop = Some((state.truss.unit, Rc::new(shop)));
    Ok(())
}

fn enter_cell(state: &mut State, cell: Cell, text: String, effects: &mut Vec<Effect>) {
    if cell.row == Row::Stock {
        let entered = enter_stock(state, &text);
        state.refused = entered.err().map(|error| Refused { cell, text, error });
        return;
    }
    if let Column::Limit(limit) = cell.column {
        let entered = enter_limit(state, limit, &text, effects);
        state.refused = entered.err().map(|error| Refused { cell, text, error });
        return;
    }
    let result = edit_of(&state.truss, cell, &text)
        .and_then(|(edit, label)| state.truss.edited(&edit).map_err(|error| error.to_string()).map(|_| (edit, label)));
    match result {
        Ok((edit, label)) => {
            state.refused = None;
            change(state, &edit, label, effects);
        }
        Err(error) => state.refused = Some(Refused { cell, text, error }),
    }
}

fn make_entry(state: &mut State, effects: &mut Vec<Effect>) {
    match entry_edit(&state.truss, &state.selection, &state.entry) {
        Ok((edit, label)) => {
            if change(state, &edit, label, effects) {
                state.entry.clear();
                state.book = Book::Figures;
                state.book_start = state.truss.figures.len().saturating_sub(1);
            }
        }
        Err(error) => state.entry_error = Some(error),
    }
}

fn remove(state: &mut State, effects: &mut Vec<Effect>) {
    if state.selection.is_empty() {
        return;
    }
    let selection = std::mem::take(&mut state.selection);
    let label = format!("removed {}", draw::name_selection(&state.truss, &selection));
    change(state, &Edit::Remove(selection), label, effects);
}

fn go_back(state: &mut State, effects: &mut Vec<Effect>) {
    if let Some((truss, label)) = state.history.undo(state.truss.clone()) {
        state.truss = truss;
        after_change(state, effects);
        say(state, Tone::Done, format!("Undone: {label}."));
    }
}

fn go_forth(state: &mut State, effects: &mut Vec<Effect>) {
    if let Some((truss, label)) = state.history.redo(state.truss.clone()) {
        state.truss = truss;
        after_change(state, effects);
        say(state, Tone::Done, format!("Done again: {label}."));
    }
}

fn link_copied(state: &mut State, done: bool) {
    let text = match done {
        true => "The link is on the clipboard.".to_string(),
        false => "The link could not be put on the clipboard: copy it from the box.".to_string(),
    };
    say(state, if done { Tone::Done } else { Tone::Refused }, text);
}

fn key(state: &mut State, press: &KeyPress, effects: &mut Vec<Effect>) {
    if let Some(event) = keys::event_of(state, press) {
        return apply(state, event, effects);
    }
    match press.key.as_str() {
        "Escape" => escape(state),
        "Enter" => effects.push(Effect::FocusEntry),
        "n" | "N" => next_joint(state, press.held.shift),
        "m" | "M" => draw::join_selected(state, effects),
        "ArrowLeft" => arrow(state, -1, 0, press.held.shift, effects),
        "ArrowRight" => arrow(state, 1, 0, press.held.shift, effects),
        "ArrowUp" => arrow(state, 0, 1, press.held.shift, effects),
        "ArrowDown" => arrow(state, 0, -1, press.held.shift, effects),
        key if begins_a_value(key) && !state.selection.is_empty() && !press.held.alt && !press.held.control => {
            state.entry = key.to_string();
            state.entry_error = None;
            effects.push(Effect::FocusEntry);
        }
        _ => {}
    }
}

fn begins_a_value(key: &str) -> bool {
    matches!(key.as_bytes(), [b'0'..=b'9' | b'.' | b'(' | b'-'])
}

fn escape(state: &mut State) {
    match () {
        () if state.drag != Drag::None => state.drag = Drag::None,
        () if state.help => state.help = false,
        () if state.plan.is_some() => state.plan = None,
        () if state.print_panel => state.print_panel = false,
        () if state.link.is_some() => state.link = None,
        () if state.message.is_some() => state.message = None,
        () if state.open_finding.is_some() || state.open_suspect.is_some() => {
            state.open_finding = None;
            state.open_suspect = None;
        }
        () if !state.selection.is_empty() => state.selection = Selection::default(),
        () => state.pen = Pen::Up,
    }
}

fn next_joint(state: &mut State, backwards: bool) {
    let count = state.truss.joints.len();
    if count == 0 {
        return;
    }
    let next = match (state.selection.joints.last().map(|id| id.index()), backwards) {
        (None, false) => 0,
        (None, true) => count - 1,
        (Some(now), false) => (now + 1) % count,
        (Some(now), true) => (now + count - 1) % count,
    };
    state.selection = Selection { joints: vec![JointId::new(next)], ..Selection::default() };
    state.pointed = Some(Thing::Joint(JointId::new(next)));
}

fn arrow(state: &mut State, right: i64, up: i64, large: bool, effects: &mut Vec<Effect>) {
    if state.selection.joints.is_empty() {
        let (dx, dy) = (right as f64 * -60.0, up as f64 * 60.0);
        state.fitted = false;
        state.camera = state.camera.panned(dx, dy);
    } else {
        draw::nudge(state, right, up, if large { 12 } else { 1 }, effects);
    }
}
