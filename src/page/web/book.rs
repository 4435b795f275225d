//! The book: joints, members, figures and supports as tables.

use super::field::{Field, check, choice};
use crate::page::state::view::{BookView, CellKind, CellView, PAGE_ROWS, RowView, column_titles};
use crate::page::state::{Book as Table, Event as PageEvent, Thing};
use crate::truss::Truss;
use std::rc::Rc;
use yew::prelude::*;

#[derive(Properties, PartialEq)]
pub(super) struct BookProps {
    pub(super) view: BookView,
    pub(super) truss: Rc<Truss>,
    pub(super) pointed: Option<Thing>,
    pub(super) on: Callback<PageEvent>,
}

/// The tables.
#[component]
pub(super) fn Book(props: &BookProps) -> Html {
    let BookProps { view, on, .. } = props;
    let titles = column_titles(view.book);
    html! {
        <section class="book" aria-label="tables">
            <div class="tabs" role="tablist">
                { for Table::ALL.iter().zip(view.counts).map(|(&table, count)| tab(table, count, view.book, on)) }
                <button class="quiet save-table" onclick={on.reform(|_: MouseEvent| PageEvent::TableSaveAsked)}>{ "Save this table (CSV)" }</button>
            </div>
            <div class="table-place">
                <table class={format!("table-{}", view.book.title().to_ascii_lowercase())}>
                    <thead><tr>{ for titles.iter().map(|title| html! { <th scope="col">{ *title }</th> }) }<th class="narrow"></th></tr></thead>
                    <tbody>{ for view.rows.iter().enumerate().map(|(index, row)| table_row(props, index, row)) }</tbody>
                </table>
                if let Some(line) = &view.line { { add_line(props, line) } }
                if view.total > PAGE_ROWS { { pages(view, on) } }
            </div>
        </section>
    }
}

fn tab(table: Table, count: Option<usize>, open: Table, on: &Callback<PageEvent>) -> Html {
    let choose = on.reform(move |_: MouseEvent| PageEvent::BookChosen(table));
    html! {
        <button class={if table == open { "tab open" } else { "tab" }} role="tab" aria-selected={(table == open).to_string()} onclick={choose}>
            { table.title() }if let Some(count) = count { <span class="count">{ count }</span> }
        </button>
    }
}

fn table_row(props: &BookProps, index: usize, row: &RowView) -> Html {
    let on = &props.on;
    let first = row.things.first().copied();
    let enter = on.reform(move |_: MouseEvent| PageEvent::PointedAt(first));
    let leave = on.reform(|_: MouseEvent| PageEvent::PointedAt(None));
    let choose = {
        let (on, things) = (on.clone(), row.things.clone());
        Callback::from(move |event: MouseEvent| {
            for (place, &thing) in things.iter().enumerate() {
                on.emit(PageEvent::ThingChosen(thing, place > 0 || event.shift_key()));
            }
        })
    };
    let remove = {
        let on = on.clone();
        Callback::from(move |event: MouseEvent| {
            event.stop_propagation();
            if let Some(thing) = first {
                on.emit(PageEvent::ThingChosen(thing, false));
                on.emit(PageEvent::RemoveAsked);
            }
        })
    };
    let pointed = (first.is_some() && props.pointed == first).then_some("pointed");
    let name = row.cells.first().map(|cell| cell.text.clone()).unwrap_or_default();
    html! {
        <tr class={classes!(row.class, pointed)} key={format!("{index} {first:?}")} onmouseenter={enter} onmouseleave={leave} onclick={choose}>
            { for row.cells.iter().enumerate().map(|(column, cell)| table_cell(props, (index, column), cell)) }
            <td class="narrow">
                if row.can_remove {
                    <button class="quiet remove" aria-label={format!("remove {name}")} onclick={remove}>{ "×" }</button>
                }
            </td>
        </tr>
    }
}

fn table_cell(props: &BookProps, at: (usize, usize), view: &CellView) -> Html {
    let class = match view.kind {
        CellKind::Number | CellKind::Value => "number",
        _ => "",
    };
    let body = match (view.cell, &view.kind) {
        (Some(cell), CellKind::Check(yes)) => check(cell, view, *yes, &props.on),
        (Some(cell), CellKind::Choice(names)) => choice(cell, view, names, &props.on),
        (Some(cell), _) => {
            html! { <Field view={view.clone()} {cell} {at} truss={props.truss.clone()} on={props.on.clone()} /> }
        }
        (None, _) => html! { { &view.text } },
    };
    let colspan = (view.kind == CellKind::Wide).then_some("7");
    html! { <td {class} {colspan}>{ body }</td> }
}

fn add_line(props: &BookProps, line: &CellView) -> Html {
    let Some(cell) = line.cell else { return Html::default() };
    let at = (props.view.rows.len(), 0);
    html! {
        <div class="add-line">
            <span>{ if props.view.book == Table::Pieces { "cut from" } else { "add" } }</span>
            <Field view={line.clone()} {cell} {at} truss={props.truss.clone()} placeholder={props.view.example} on={props.on.clone()} />
        </div>
    }
}

fn pages(view: &BookView, on: &Callback<PageEvent>) -> Html {
    let to = |start: usize| on.reform(move |_: MouseEvent| PageEvent::BookMoved(start));
    let last = (view.start + view.rows.len()).min(view.total);
    html! {
        <p class="pages">
            <button class="plain" disabled={view.start == 0} onclick={to(view.start.saturating_sub(PAGE_ROWS))}>{ "Earlier" }</button>
            <span>{ format!("{} to {} of {}", view.start + 1, last, view.total) }</span>
            <button class="plain" disabled={last >= view.total} onclick={to(view.start + PAGE_ROWS)}>{ "Later" }</button>
        </p>
    }
}
