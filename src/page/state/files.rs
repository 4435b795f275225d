//! Trusses that come from outside: demonstrations, files, links, and work that this browser kept.

use super::event::Effect;
use super::model::{Shown, Source, State, Tone};
use super::update::{say, start_checks};
use crate::exchange::{from_link, read_truss, to_link, write_truss};
use crate::truss::{Selection, Truss};
use std::rc::Rc;

/// A demonstration truss.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Demo {
    /// Its name on the first screen.
    pub name: &'static str,
    /// What it shows, in one sentence.
    pub words: &'static str,
    /// The file.
    pub text: &'static str,
}

/// The demonstrations of the first screen.
pub const DEMOS: [Demo; 4] = [
    Demo {
        name: "Boathouse roof",
        words: "feet and inches, fully figured, and right",
        text: include_str!("../../../demo/boathouse-roof.truss.json"),
    },
    Demo {
        name: "Boathouse roof, first issue",
        words: "sketched, figured, and one figure is wrong",
        text: include_str!("../../../demo/boathouse-first-issue.truss.json"),
    },
    Demo {
        name: "Mill stream footbridge",
        words: "millimetres, a parallel truss on two bearings",
        text: include_str!("../../../demo/mill-footbridge.truss.json"),
    },
    Demo {
        name: "Barn roof with slips",
        words: "what the page says when a drawing is wrong",
        text: include_str!("../../../demo/barn-roof-slips.truss.json"),
    },
];

/// Opens a demonstration.
pub(super) fn open_demo(state: &mut State, index: usize, effects: &mut Vec<Effect>) {
    let Some(demo) = DEMOS.get(index) else { return };
    match read_truss(demo.text.as_bytes()) {
        Ok(truss) => open(state, truss, Source::Demo(demo.name), effects),
        Err(error) => say(state, Tone::Refused, format!("{}: {error}", demo.name)),
    }
}

/// Opens a file; a file that cannot be read leaves the present work untouched.
pub(super) fn open_file(state: &mut State, name: &str, bytes: &[u8], effects: &mut Vec<Effect>) {
    if name.to_lowercase().ends_with(".csv") {
        return take_table(state, name, bytes, effects);
    }
    match read_truss(bytes) {
        Ok(truss) => open(state, truss, Source::File(name.to_string()), effects),
        Err(error) => say(state, Tone::Refused, format!("{name} could not be read: {error}")),
    }
}

/// Opens a link, given as the fragment of the address with or without its `#`.
pub(super) fn open_link(state: &mut State, fragment: &str, effects: &mut Vec<Effect>) {
    let link = fragment.trim_start_matches('#');
    if link.is_empty() || state.link.as_deref() == Some(link) {
        return;
    }
    match from_link(link) {
        Ok(truss) if *state.truss == truss && state.source.is_some() => {}
        Ok(truss) => open(state, truss, Source::Link, effects),
        Err(error) => say(state, Tone::Refused, format!("the link could not be read: {error}")),
    }
}

/// Takes a truss in, as a change that can be undone when there was work before it.
pub(super) fn open(state: &mut State, truss: Truss, source: Source, effects: &mut Vec<Effect>) {
    let before = std::mem::replace(&mut state.truss, Rc::new(truss));
    if state.source.is_some() && *before != Truss::default() {
        state.history.note("opened another truss".into(), before);
    }
    state.source = Some(source);
    state.selection = Selection::default();
    state.pointed = None;
    state.open_finding = None;
    state.open_suspect = None;
    state.shown = Shown::Layout;
    state.book_start = 0;
    state.refused = None;
    state.entry_error = None;
    state.message = None;
    state.link = None;
    super::update::fit(state);
    start_checks(state, effects);
}

/// Takes a table in as one change of the present truss; one with an error in any row changes nothing.
fn take_table(state: &mut State, name: &str, bytes: &[u8], effects: &mut Vec<Effect>) {
    let edit = std::str::from_utf8(bytes)
        .map_err(|_| "it is no text in UTF-8".to_string())
        .and_then(|text| super::csv::csv_edit(&state.truss, text));
    match edit {
        Ok((edit, label)) => {
            if super::update::change(state, &edit, label.clone(), effects) {
                say(state, Tone::Done, format!("{name}: {label}."));
                super::update::fit(state);
            }
        }
        Err(error) => say(state, Tone::Refused, format!("{name} could not be taken in: {error}")),
    }
}

/// Saves the open table as comma-separated values.
pub(super) fn save_table(state: &State, effects: &mut Vec<Effect>) {
    let table = state.book.title().to_ascii_lowercase();
    let name = format!("{}-{table}.csv", plain_name(&state.truss.title));
    effects.push(Effect::Save { name, text: super::csv::csv_text(state, state.book) });
}

/// Saves the drawing alone.
pub(super) fn save_drawing(state: &State, effects: &mut Vec<Effect>) {
    let name = format!("{}.svg", plain_name(&state.truss.title));
    effects.push(Effect::Save { name, text: super::view::svg_text(state) });
}

/// Saves the truss to a file named after its title.
pub(super) fn save(state: &State, effects: &mut Vec<Effect>) {
    effects.push(Effect::Save { name: file_name(&state.truss.title), text: write_truss(&state.truss) });
}

/// Makes a link: into the address, onto the clipboard, and onto the page.
pub(super) fn make_link(state: &mut State, effects: &mut Vec<Effect>) {
    match to_link(&state.truss) {
        Ok(link) => {
            effects.push(Effect::SetFragment(link.clone()));
            effects.push(Effect::CopyLink(link.clone()));
            state.link = Some(link);
        }
        Err(error) => say(state, Tone::Refused, format!("{error} Save a file instead, and send that.")),
    }
}

/// A file name made of a title: letters, digits and dashes.
fn file_name(title: &str) -> String {
    format!("{}.truss.json", plain_name(title))
}

fn plain_name(title: &str) -> String {
    let mut name = String::new();
    for c in title.chars().take(60) {
        match c {
            c if c.is_alphanumeric() => name.push(c.to_ascii_lowercase()),
            _ if name.ends_with('-') || name.is_empty() => {}
            _ => name.push('-'),
        }
    }
    let name = name.trim_end_matches('-');
    if name.is_empty() { "truss".into() } else { name.into() }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn file_names_are_plain() {
        for (title, expected) in [
            ("Boathouse roof, truss T3", "boathouse-roof-truss-t3.truss.json"),
            ("", "truss.truss.json"),
            ("../../etc/passwd", "etc-passwd.truss.json"),
            ("<img onerror>", "img-onerror.truss.json"),
        ] {
            assert_eq!(file_name(title), expected);
        }
    }
}
