//! Undo and redo, by keeping the trusses themselves: nearly free, since a truss is shared until it changes.

use crate::truss::Truss;
use std::rc::Rc;

/// How many changes can be undone; older ones are forgotten first.
const KEPT: usize = 300;

/// What can be undone and redone, and what each change was.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct History {
    done: Vec<Change>,
    undone: Vec<Change>,
}

#[derive(Clone, Debug, PartialEq)]
struct Change {
    label: String,
    /// The truss on the far side of the change: before it in `done`, after it in `undone`.
    truss: Rc<Truss>,
}

impl History {
    /// Notes a change that was made to `before`. What had been undone is forgotten.
    pub fn note(&mut self, label: String, before: Rc<Truss>) {
        self.undone.clear();
        self.done.push(Change { label, truss: before });
        if self.done.len() > KEPT {
            self.done.remove(0);
        }
    }

    /// Takes the last change back: the truss before it, and what the change was.
    pub fn undo(&mut self, now: Rc<Truss>) -> Option<(Rc<Truss>, String)> {
        step(&mut self.done, &mut self.undone, now)
    }

    /// Makes the change again that was taken back last.
    pub fn redo(&mut self, now: Rc<Truss>) -> Option<(Rc<Truss>, String)> {
        step(&mut self.undone, &mut self.done, now)
    }

    /// What the last change was.
    pub fn undo_label(&self) -> Option<&str> {
        self.done.last().map(|change| change.label.as_str())
    }

    /// What the change was that was taken back last.
    pub fn redo_label(&self) -> Option<&str> {
        self.undone.last().map(|change| change.label.as_str())
    }
}

fn step(from: &mut Vec<Change>, to: &mut Vec<Change>, now: Rc<Truss>) -> Option<(Rc<Truss>, String)> {
    let change = from.pop()?;
    to.push(Change { label: change.label.clone(), truss: now });
    Some((change.truss, change.label))
}

#[cfg(test)]
mod tests {
    use super::*;

    fn titled(title: &str) -> Rc<Truss> {
        Rc::new(Truss { title: title.into(), ..Truss::default() })
    }

    #[test]
    fn undo_and_redo_go_back_and_forth() {
        let mut history = History::default();
        history.note("first".into(), titled("a"));
        history.note("second".into(), titled("b"));
        let (back, label) = history.undo(titled("c")).expect("two changes");
        assert_eq!((back.title.as_str(), label.as_str()), ("b", "second"));
        let (forth, _) = history.redo(back).expect("one undone");
        assert_eq!(forth.title, "c");
        assert_eq!(history.redo(forth), None);
    }

    #[test]
    fn a_new_change_forgets_what_was_undone() {
        let mut history = History::default();
        history.note("first".into(), titled("a"));
        history.undo(titled("b"));
        history.note("other".into(), titled("a"));
        assert_eq!(history.redo_label(), None);
        assert_eq!(history.undo_label(), Some("other"));
    }

    #[test]
    fn the_oldest_changes_are_forgotten() {
        let mut history = History::default();
        for n in 0..KEPT + 5 {
            history.note(n.to_string(), titled(""));
        }
        assert_eq!(history.done.len(), KEPT);
        assert_eq!(history.done[0].label, "5");
    }
}
