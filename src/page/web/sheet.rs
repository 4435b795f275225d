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
        <section class="sheet" aria-hidden="true">
            <p class="sheet-title">{ &view.title }</p>
            <p>{ &view.particulars }</p>
            <svg class="sheet-drawing board" viewBox={view.view_box.clone()}>
                { paths(&view.drawing.paths) }{ labels(&view.drawing.labels) }
            </svg>
            { for view.questions.iter().map(|(question, lines)| html! {
                <div class="sheet-question">
                    <p>{ question }</p>
                    <ul>{ for lines.iter().map(|line| html! { <li>{ line }</li> }) }</ul>
                </div>
            }) }
            { for view.tables.iter().map(table) }
            <p class="sheet-notice"><strong>{ NOTICE[0] }</strong>{ NOTICE[1] }</p>
        </section>
    }
}

fn table(view: &SheetTable) -> Html {
    let row = |cells: &Vec<String>| html! { <tr>{ for cells.iter().map(|text| html! { <td>{ text }</td> }) }</tr> };
    html! {
        <table>
            <caption>{ &view.title }</caption>
            <thead><tr>{ for view.columns.iter().map(|title| html! { <th>{ title }</th> }) }</tr></thead>
            <tbody>{ for view.rows.iter().map(row) }</tbody>
        </table>
    }
}
