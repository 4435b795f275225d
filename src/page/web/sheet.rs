//! The printed sheet: answers, findings and tables, laid out for paper. On the screen it is not shown.

use super::app::NOTICE;
use super::board::{labels, paths};
use crate::page::state::view::{SheetTable, SheetView};
use std::rc::Rc;
use yew::prelude::*;

#[derive(Properties, PartialEq)]
pub(super) struct SheetProps {
    pub(super) view: Rc<Option<SheetView>>,
}

/// The printed sheet.
#[component]
pub(super) fn Sheet(props: &SheetProps) -> Html {
    let Some(view) = &*props.view else { return Html::default() };
    html! {
        <section class={view.class} aria-hidden="true">
            <div class="sheet-body">
            <p class="sheet-title">{ &view.title }</p>
            <svg class="sheet-drawing board" viewBox={view.view_box.clone()} width={view.width.clone()}>
                { paths(&view.drawing.paths) }{ labels(&view.drawing.labels) }
            </svg>
            <dl class="title-block">
                { for view.block.iter().map(|(name, value)| html! { <div><dt>{ *name }</dt><dd>{ value }</dd></div> }) }
            </dl>
            { for view.questions.iter().map(|(question, lines)| html! {
                <div class="sheet-question">
                    <p>{ question }</p>
                    <ul>{ for lines.iter().map(|line| html! { <li>{ line }</li> }) }</ul>
                </div>
            }) }
            { for view.tables.iter().map(table) }
            </div>
            <p class="sheet-notice"><span><strong>{ NOTICE[0] }</strong>{ NOTICE[1] }</span></p>
        </section>
    }
}

fn table(view: &SheetTable) -> Html {
    let row = |cells: &Vec<String>| html! { <tr>{ for cells.iter().map(|text| html! { <td>{ text }</td> }) }</tr> };
    html! {
        <table>
            <thead>
                <tr><th class="table-title" colspan={view.columns.len().to_string()}>{ &view.title }</th></tr>
                <tr>{ for view.columns.iter().map(|title| html! { <th>{ title }</th> }) }</tr>
            </thead>
            <tbody>{ for view.rows.iter().map(row) }</tbody>
        </table>
    }
}
