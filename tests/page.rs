//! The page's state, driven as the browser drives it: events in, state and effects out.

use chordwright::checks::{Progress, Question, Rule, Stage, report};
use chordwright::exact::{Point, ratio, whole};
use chordwright::page::state::view::{
    book_view, drawing_view, evidence_view, head_view, plan_view, sheet_view, work_view,
};
use chordwright::page::state::{
    Book, Button, Cell, Column, Effect, Event, KeyPress, Modifiers, Paper, Pen, Pixel, PlanField, PointerAct, Row,
    SheetSetup, State, Thing, Tone, update,
};
use chordwright::truss::{Configuration, FigureKind, JointId, MemberId, Role, SupportKind};
use std::rc::Rc;

/// A page that answers its own checks at once.
struct Page {
    state: State,
    effects: Vec<Effect>,
}

impl Page {
    fn new() -> Page {
        let mut page = Page { state: State::default(), effects: Vec::new() };
        page.send(Event::BoardResized(900.0, 500.0));
        page
    }

    fn sheet() -> Page {
        let mut page = Page::new();
        page.send(Event::NewSheet);
        page
    }

    fn send(&mut self, event: Event) -> &mut Page {
        let (state, effects) = update(&self.state, event);
        self.state = state;
        for effect in effects {
            if let Effect::Check(ask) = &effect {
                let answers = report(&ask.truss, &ask.limits);
                self.state = update(&self.state, Event::Answered(ask.revision, Rc::new(answers), String::new())).0;
            }
            self.effects.push(effect);
        }
        self
    }

    fn pointer(&mut self, act: PointerAct) -> &mut Page {
        self.send(Event::Pointer(act))
    }

    fn down(&mut self, x: f64, y: f64) -> &mut Page {
        let at = Pixel::new(x, y);
        self.pointer(PointerAct::Down { id: 1, at, button: Button::Main, held: Modifiers::default(), finger: false })
    }

    fn moved(&mut self, x: f64, y: f64) -> &mut Page {
        self.pointer(PointerAct::Move { id: 1, at: Pixel::new(x, y), held: Modifiers::default() })
    }

    fn up(&mut self, x: f64, y: f64) -> &mut Page {
        self.pointer(PointerAct::Up { id: 1, at: Pixel::new(x, y) })
    }

    fn drag(&mut self, from: (f64, f64), to: (f64, f64)) -> &mut Page {
        self.down(from.0, from.1).moved((from.0 + to.0) / 2.0, (from.1 + to.1) / 2.0).moved(to.0, to.1).up(to.0, to.1)
    }

    fn key(&mut self, key: &str) -> &mut Page {
        self.send(Event::Key(KeyPress { key: key.into(), held: Modifiers::default() }))
    }

    fn entry(&mut self, text: &str) -> &mut Page {
        self.send(Event::EntryTyped(text.into())).send(Event::EntryMade)
    }

    fn cell(&mut self, row: Row, column: Column, text: &str) -> &mut Page {
        self.send(Event::CellEntered(Cell::new(row, column), text.into()))
    }

    fn lines(&mut self, row: Row, text: &str) -> &mut Page {
        self.cell(row, Column::Line, text)
    }

    fn pixel(&self, joint: usize) -> (f64, f64) {
        let pixel = self.state.camera.pixel(&self.state.truss.joints[joint].point());
        (pixel.x, pixel.y)
    }
}

/// A king post truss typed in the tables: 16 feet by 6 feet.
fn king_post() -> Page {
    let mut page = Page::sheet();
    page.lines(Row::NewJoint, "L0, 0, 0\nL1, 8', 0\nL2, 16', 0\nU1, 8', 6'");
    page.lines(Row::NewMember, "L0 L1\nL1 L2\nL0 U1 top chord\nU1 L2 top chord\nL1 U1");
    page.lines(Row::NewSupport, "L0 pin\nL2 roller");
    assert_eq!(page.state.refused, None);
    page
}

#[test]
fn a_truss_is_typed_in_the_tables() {
    let page = king_post();
    let truss = &page.state.truss;
    assert_eq!((truss.joints.len(), truss.members.len(), truss.supports.len()), (4, 5, 2));
    assert_eq!(truss.members.iter().map(|m| m.role).collect::<Vec<_>>(), {
        use Role::*;
        [BottomChord, BottomChord, TopChord, TopChord, Post]
    });
    assert_eq!(truss.members[2].mark, "T1");
    assert!(matches!(truss.supports[1].kind, SupportKind::Roller { .. }));
    let checked = page.state.fresh().expect("answers");
    assert_eq!(checked.report.answers.stands.state.name(), "rigid");
}

#[test]
fn a_truss_is_drawn_with_the_pointer() {
    let mut page = Page::sheet();
    assert_eq!(page.state.pen, Pen::Down);
    page.drag((200.0, 400.0), (440.0, 400.0));
    assert_eq!(page.state.truss.joints[0].point(), Point::whole(0, 0), "the first joint sits at the origin");
    assert_eq!(page.state.truss.joints.len(), 2);
    assert_eq!(page.state.truss.members.len(), 1);
    assert_eq!(page.state.truss.joints[1].y.value, whole(0), "level with the first");
    let (first, second) = (page.pixel(0), page.pixel(1));
    page.drag(first, (320.0, 250.0));
    page.drag((320.0, 250.0), second);
    assert_eq!(page.state.truss.members.len(), 3, "a triangle");
    assert_eq!(page.state.truss.joints.iter().map(|j| j.mark.as_str()).collect::<Vec<_>>(), ["L0", "L1", "U0"]);
    page.drag(first, second);
    assert_eq!(page.state.truss.members.len(), 3, "two joints are joined once");
    assert_eq!(page.state.message.as_ref().map(|m| m.tone), Some(Tone::Refused));
}

#[test]
fn figures_are_typed_as_the_drawing_has_them() {
    let mut page = king_post();
    page.entry("L0 U1 10'-0\"");
    page.entry("L2 L0 run 16'");
    page.entry("L0 U1 6:8");
    page.entry("L0 L1 U1 square");
    page.entry("L1 L0 U1 angle 36.87 step 0.01");
    page.entry("level L0 L2");
    page.entry("L0...L2 2 @ 8'-0\" = 16'-0\"");
    assert_eq!(page.state.entry_error, None);
    let kinds: Vec<&str> = page.state.truss.figures.iter().map(|f| f.kind.name()).collect();
    assert_eq!(kinds, ["length", "run", "pitch", "square", "angle", "level", "run", "run", "run"]);
    let FigureKind::Run { from, to, value } = &page.state.truss.figures[1].kind else { panic!("a run") };
    assert_eq!((from.index(), to.index()), (0, 2), "a positive run goes to the right, as the sketch shows");
    assert_eq!(value.text, "16'");
    assert_eq!(page.state.truss.figures[4].step.as_ref().map(|step| step.value.clone()), Some(ratio(1, 100)));
    assert_eq!(page.state.fresh().expect("answers").report.answers.close.state.name(), "closes");
}

#[test]
fn a_selected_member_takes_its_length_and_two_joints_their_run() {
    let mut page = king_post();
    page.send(Event::ThingChosen(Thing::Member(MemberId(2)), false));
    page.key("1");
    assert_eq!(page.state.entry, "1", "a digit begins the figure");
    assert!(page.effects.contains(&Effect::FocusEntry));
    page.entry("10'");
    assert!(matches!(page.state.truss.figures[0].kind, FigureKind::Length { .. }));
    page.send(Event::ThingChosen(Thing::Joint(JointId(0)), false))
        .send(Event::ThingChosen(Thing::Joint(JointId(2)), true));
    page.entry("16'");
    assert!(matches!(page.state.truss.figures[1].kind, FigureKind::Run { .. }), "level and not joined: a run");
    assert_eq!(page.state.book, Book::Figures);
}

#[test]
fn what_cannot_be_read_is_refused_beside_its_cause_and_kept() {
    let mut page = king_post();
    let before = page.state.truss.clone();
    for (text, word) in [
        ("L0 U9 10'", "U9"),
        ("L0 U1", "value"),
        ("L0 L1 L2 4 @ 5'", "values"),
        ("L0 U1 10'-", "character"),
        ("L0...U3 3 @ 4'", "marks"),
        ("frobnicate", "neither"),
        ("", "typed"),
        ("L0 L1 U1 12", "angle or spread"),
    ] {
        page.entry(text);
        let error = page.state.entry_error.clone().unwrap_or_default();
        assert!(error.contains(word), "{text}: {error}");
        assert_eq!(page.state.entry, text, "what was typed is kept");
    }
    page.cell(Row::Joint(JointId(1)), Column::X, "8' +");
    let refused = page.state.refused.clone().expect("refused");
    assert_eq!(refused.text, "8' +");
    page.lines(Row::NewJoint, "L0, 1, 1");
    assert!(page.state.refused.as_ref().is_some_and(|r| r.error.contains("L0")), "the mark is taken");
    page.lines(Row::NewJoint, "A, 1, 1\nB, 1");
    assert!(page.state.refused.as_ref().is_some_and(|r| r.error.starts_with("line 2")), "{:?}", page.state.refused);
    assert!(Rc::ptr_eq(&before, &page.state.truss), "nothing was changed");
}

#[test]
fn undo_knows_what_it_undoes() {
    let mut page = king_post();
    page.cell(Row::Joint(JointId(3)), Column::Y, "6'-6\"");
    assert_eq!(page.state.history.undo_label(), Some("moved U1"));
    page.send(Event::UndoAsked);
    assert_eq!(page.state.truss.joints[3].y.value, whole(72));
    page.send(Event::RedoAsked);
    assert_eq!(page.state.truss.joints[3].y.text, "6'-6\"", "what was typed comes back as it was typed");
}

#[test]
fn removing_a_joint_takes_along_what_cannot_be_without_it() {
    let mut page = king_post();
    page.entry("L0 U1 10'");
    page.send(Event::ThingChosen(Thing::Joint(JointId(0)), false)).send(Event::RemoveAsked);
    let truss = &page.state.truss;
    assert_eq!((truss.joints.len(), truss.members.len(), truss.supports.len(), truss.figures.len()), (3, 3, 1, 0));
    assert_eq!(truss.problems(), vec![]);
    page.send(Event::UndoAsked);
    assert_eq!(page.state.truss.figures.len(), 1);
}

#[test]
fn a_joint_is_dragged_and_put_back_when_the_pointer_is_taken_away() {
    let mut page = king_post();
    page.send(Event::PenToggled);
    page.send(Event::FitAsked);
    let (x, y) = page.pixel(3);
    page.down(x, y).moved(x + 9.0, y - 40.0);
    page.pointer(PointerAct::Cancel { id: 1 });
    assert_eq!(page.state.truss.joints[3].y.value, whole(72));
    page.drag((x, y), (x, y - 40.0));
    let moved = &page.state.truss.joints[3];
    assert!(moved.y.value > whole(72), "it went up");
    assert_eq!(moved.x.value, whole(96), "plumb with L1: {moved:?}");
    assert_eq!(page.state.history.undo_label(), Some("moved U1"));
}

#[test]
fn a_second_finger_zooms_and_does_not_steal_the_drag() {
    let mut page = king_post();
    page.send(Event::PenToggled);
    let finger = |id, x, y| PointerAct::Down {
        id,
        at: Pixel::new(x, y),
        button: Button::Main,
        held: Modifiers::default(),
        finger: true,
    };
    let before = page.state.camera.scale;
    page.pointer(finger(1, 100.0, 50.0)).pointer(finger(2, 200.0, 50.0));
    page.pointer(PointerAct::Move { id: 2, at: Pixel::new(300.0, 50.0), held: Modifiers::default() });
    assert!(page.state.camera.scale > 1.5 * before, "the fingers spread");
    assert_eq!(page.state.truss.joints.len(), 4);
}

#[test]
fn answers_to_an_older_truss_are_not_shown_as_the_answers_to_this_one() {
    let page = king_post();
    let old = page.state.fresh().expect("answers").report.clone();
    let (state, effects) =
        update(&page.state, Event::CellEntered(Cell::new(Row::Joint(JointId(3)), Column::Y), "7'".into()));
    assert!(state.fresh().is_none() && state.is_checking());
    let revision = effects
        .iter()
        .find_map(|e| if let Effect::Check(ask) = e { Some(ask.revision) } else { None })
        .expect("a check");
    let (state, _) = update(&state, Event::Answered(revision - 1, old.clone(), String::new()));
    assert!(state.fresh().is_none(), "an answer that comes late is dropped");
    let (state, _) = update(&state, Event::Answered(revision, old, String::new()));
    assert!(state.fresh().is_some());
}

#[test]
fn supports_and_roles_are_given_to_what_is_selected() {
    let mut page = king_post();
    page.send(Event::ThingChosen(Thing::Joint(JointId(1)), false)).send(Event::SupportChosen(Some("pin")));
    assert_eq!(page.state.truss.supports.len(), 3);
    page.send(Event::SupportChosen(None));
    assert_eq!(page.state.truss.supports.len(), 2);
    page.send(Event::LooseChosen(true));
    assert!(page.state.truss.joints[1].loose);
    page.send(Event::ThingChosen(Thing::Member(MemberId(4)), false)).send(Event::RoleChosen(Role::Web));
    assert_eq!(page.state.truss.members[4].role, Role::Web);
}

#[test]
fn arrows_move_what_is_selected_by_steps_and_else_the_paper() {
    let mut page = king_post();
    page.key("n");
    page.key("ArrowRight");
    assert_eq!(page.state.truss.joints[0].x.value, ratio(1, 16));
    page.key("Escape").key("Escape");
    let before = page.state.camera.origin;
    page.key("ArrowRight");
    assert!(page.state.camera.origin.x < before.x);
}

#[test]
fn no_key_makes_the_page_panic_in_any_state() {
    let keys =
        ["p", "f", "k", "+", "-", "1", "5", "n", "N", "m", "Delete", "Escape", "Enter", "ArrowUp", "?", "é", "", "F13"];
    for mut page in [Page::new(), Page::sheet(), king_post()] {
        for key in keys.iter().chain(keys.iter().rev()) {
            page.key(key);
        }
        for event in [
            Event::FindingChosen(99),
            Event::SuspectChosen(99),
            Event::MendTaken(99),
            Event::ImpliedTaken(9),
            Event::WithoutShown(7),
            Event::BookMoved(9999),
            Event::ShownToggled,
        ] {
            page.send(event);
        }
        chordwright::page::state::view::drawing_view(&page.state);
        chordwright::page::state::view::overlay_view(&page.state);
        chordwright::page::state::view::book_view(&page.state);
    }
}

#[test]
fn a_long_search_tells_how_far_it_is_and_is_stopped_where_it_is() {
    let mut page = Page::new();
    let (state, _) = update(&page.state, Event::DemoChosen(1));
    page.state = state;
    let progress = Progress { stage: Stage::Suspects, done: 3, of: 12 };
    let old = page.state.revision - 1;
    assert_eq!(update(&page.state, Event::Progressed(old, progress)).0.progress, None, "an older search says nothing");
    let (telling, _) = update(&page.state, Event::Progressed(page.state.revision, progress));
    let words = work_view(&telling).map(|work| (work.words, work.steps));
    assert_eq!(words, Some(("Leaving out figures one by one: 3 of 12".into(), Some((3, 12)))));
    let (stopped, effects) = update(&telling, Event::StopAsked);
    let until = effects.iter().find_map(|e| if let Effect::Check(ask) = e { Some(ask.until) } else { None });
    assert_eq!((until, work_view(&stopped)), (Some(Some(Stage::Suspects)), None), "it is asked again, only so far");
    assert_eq!(update(&stopped, Event::StopAsked).1, vec![], "there is nothing more to stop");
}

/// The first issue of the boathouse roof, whose f34 is a foot too long, with a second slip.
fn two_slips() -> Page {
    let mut page = Page::new();
    page.send(Event::DemoChosen(1));
    page.entry("L0 L4 19'-0\"");
    page
}

#[test]
fn two_wrong_figures_are_shown_together_with_what_they_should_read() {
    let mut page = two_slips();
    let evidence = evidence_view(&page.state).expect("evidence");
    let told: Vec<(String, String)> = evidence.suspects.iter().map(|s| (s.mark.clone(), s.implied.clone())).collect();
    assert_eq!(told, [("f34".into(), "7′-0 7/8″".into()), ("f40".into(), "20′-0″".into())]);
    page.key("k");
    let drawing = drawing_view(&page.state);
    assert!(drawing.caption.starts_with("Showing the layout without f34 and f40"), "{}", drawing.caption);
    assert_eq!(drawing.labels.iter().filter(|label| label.class == "label figure struck").count(), 2);
    page.send(Event::ImpliedTaken(1));
    let close = &page.state.fresh().expect("answers").report.answers.close;
    assert_eq!(close.suspects.len(), 1, "the other is then to blame alone");
}

#[test]
fn a_misfit_is_drawn_large_enough_to_see() {
    let mut page = Page::new();
    page.send(Event::DemoChosen(0));
    assert!(!drawing_view(&page.state).paths.iter().any(|path| path.class == "misfit"), "all figures agree");
    page.entry("L0 U4 21'-6 7/8\"");
    let drawing = drawing_view(&page.state);
    assert!(drawing.caption.contains("times as large"), "a sixteenth cannot be seen otherwise: {}", drawing.caption);
    let path = drawing.paths.iter().find(|path| path.class == "misfit").expect("a misfit is drawn");
    let numbers: Vec<f64> = path.d.split(['M', 'L', ' ']).filter_map(|part| part.parse().ok()).collect();
    let length = f64::hypot(numbers[2] - numbers[0], numbers[3] - numbers[1]);
    assert!((12.0..=36.5).contains(&length), "{length} pixels: {}", path.d);
    page.send(Event::QuestionChosen(Question::Cut));
    assert!(
        !drawing_view(&page.state).paths.iter().any(|path| path.class == "misfit"),
        "it belongs to the first question"
    );
}

#[test]
fn a_limit_is_changed_where_its_effect_is_seen_and_a_wrong_one_is_refused_there() {
    let mut page = Page::new();
    page.send(Event::DemoChosen(0)).send(Event::QuestionChosen(Question::Clear));
    let tight = |page: &Page| {
        let findings = &page.state.fresh().expect("answers").report.findings;
        findings.iter().filter(|finding| finding.rule == Rule::TightSpread).count()
    };
    let limit = |page: &Page| evidence_view(&page.state).expect("evidence").limits[0].clone();
    let (before, cell) = (tight(&page), limit(&page).cell.cell.expect("it can be changed"));
    assert_eq!((limit(&page).cell.text.as_str(), limit(&page).means.as_str()), ("1/4", "30.0°"));
    assert!(limit(&page).source.contains("EN 1993-1-8"));
    page.send(Event::CellEntered(cell, "1/2".into()));
    assert!(tight(&page) > before, "more is tight below 45 degrees");
    let kept = page
        .effects
        .iter()
        .rev()
        .find_map(|e| if let Effect::KeepLimits(text) = e { Some(text.clone()) } else { None });
    let mut other = Page::new();
    other.send(Event::LimitsFound(kept.expect("it is kept")));
    assert_eq!(other.state.limits, page.state.limits);
    other.send(Event::LimitsFound("{\"near_steps\": -1}".into()));
    assert_eq!(*other.state.limits, chordwright::checks::Limits::default(), "what cannot be read is not taken");
    page.send(Event::CellEntered(cell, "7/4".into()));
    assert!(limit(&page).cell.error.contains("expected 0 to 1"), "{}", limit(&page).cell.error);
    assert_eq!(limit(&page).cell.text, "7/4", "what was typed is kept");
}

#[test]
fn a_truss_is_laid_out_from_its_measures_and_undone() {
    let mut page = Page::new();
    page.send(Event::PlanOpened);
    let plan = |page: &Page| plan_view(&page.state).expect("a plan");
    assert!(plan(&page).error.is_empty() && !plan(&page).preview.paths.is_empty(), "it begins with a truss");
    page.send(Event::PlanConfigured(Configuration::NorthLight));
    page.send(Event::PlanTyped(PlanField::Other, "7'".into()));
    assert!(plan(&page).error.contains("whole number of panels"), "{}", plan(&page).error);
    page.send(Event::PlanTaken);
    assert!(page.state.plan.is_some() && page.state.truss.joints.is_empty(), "a wrong plan stays open");
    page.send(Event::PlanTyped(PlanField::Other, "10'".into())).send(Event::PlanTaken);
    assert!(page.state.plan.is_none());
    let answers = &page.state.fresh().expect("answers").report.answers;
    assert_eq!((answers.close.state.name(), answers.stands.state.name()), ("closes", "rigid"));
    assert!(page.state.truss.figures.len() > 30);
    let first = page.state.truss.clone();
    page.send(Event::PlanOpened).send(Event::PlanFigured).send(Event::PlanTaken);
    assert!(page.state.truss.figures.is_empty());
    page.send(Event::UndoAsked);
    assert_eq!(page.state.truss, first, "the work before it comes back");
    page.send(Event::PlanOpened).key("Escape");
    assert!(page.state.plan.is_none());
}

#[test]
fn paper_and_scale_are_chosen_before_the_print() {
    let mut page = Page::new();
    page.send(Event::DemoChosen(0)).send(Event::PrintPanelToggled);
    let print = head_view(&page.state).print.expect("the choice is open");
    assert_eq!((print.paper, print.fits.as_str()), (Paper::Letter, "3/16″ = 1′-0″"));
    page.send(Event::SheetChosen(SheetSetup { paper: Some(Paper::Tabloid), times: None })).send(Event::PrintAsked);
    assert_eq!(page.effects.last(), Some(&Effect::Print));
    let sheet = sheet_view(&page.state).expect("a sheet");
    assert_eq!(sheet.class, "sheet paper-tabloid");
    assert!(sheet.block.contains(&("scale", "1/4″ = 1′-0″".into())), "{:?}", sheet.block);
    assert!(sheet.tables.iter().any(|table| table.title == "Schedule"));
}

#[test]
fn pieces_are_cut_from_the_stock_that_is_typed_and_drawn_on_the_board() {
    let mut page = Page::new();
    page.send(Event::DemoChosen(0));
    assert!(!drawing_view(&page.state).paths.iter().any(|path| path.class == "piece"));
    page.send(Event::BookChosen(Book::Pieces));
    let outlines = |page: &Page| {
        let drawing = drawing_view(&page.state);
        let path = drawing.paths.iter().find(|path| path.class == "piece").expect("pieces are drawn").d.clone();
        path.matches('Z').count()
    };
    assert_eq!(outlines(&page), page.state.truss.members.len());
    // A post between the chords: half a depth less at its foot.
    let post = |page: &Page| {
        let book = book_view(&page.state);
        let row = book.rows.iter().find(|row| row.cells[0].text == "P4").expect("the middle post").clone();
        row.cells.iter().map(|cell| cell.text.clone()).collect::<Vec<_>>()
    };
    assert!(post(&page)[1] == "3 1/2″" && post(&page)[5].contains("less 1 3/4″"), "{:?}", post(&page));
    page.cell(Row::Stock, Column::Line, "bottom chord 5 1/2\"");
    assert!(post(&page)[5].contains("less 2 3/4″"), "{:?}", post(&page));
    page.cell(Row::Stock, Column::Line, "gap 1/4\"");
    assert!(post(&page)[5].contains("less 3″"), "{:?}", post(&page));
    page.cell(Row::Stock, Column::Line, "rope 2\"");
    let refused = page.state.refused.clone().expect("it is refused");
    assert!(refused.error.contains("expected a role and its depth"), "{}", refused.error);
    let table = chordwright::page::state::csv_text(&page.state, Book::Pieces);
    assert_eq!(table.lines().count(), page.state.truss.members.len() + 2, "a row for each, the titles and the notice");
    page.cell(Row::Sheet, Column::Unit, "mm");
    assert_eq!(post(&page)[1], "90", "inches that were typed are not taken for millimetres");
}
