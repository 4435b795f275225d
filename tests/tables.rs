//! Tables out and in again, and the drawing alone: nothing is lost, errors name their row, text never becomes anything else.

mod close_help;

use chordwright::checks::report;
use chordwright::exchange::{NOTICE, read_truss};
use chordwright::page::state::{Book, Effect, Event, State, csv_text, update};
use chordwright::truss::Truss;
use close_help::generate::mixed;
use std::rc::Rc;

const DEMOS: [&str; 4] = [
    include_str!("../demo/boathouse-roof.truss.json"),
    include_str!("../demo/boathouse-first-issue.truss.json"),
    include_str!("../demo/mill-footbridge.truss.json"),
    include_str!("../demo/barn-roof-slips.truss.json"),
];

fn send(state: &State, event: Event) -> (State, Vec<Effect>) {
    let (mut state, effects) = update(state, event);
    for effect in &effects {
        if let Effect::Check(ask) = effect {
            let answers = Rc::new(report(&ask.truss, &ask.limits));
            state = update(&state, Event::Answered(ask.revision, answers, String::new())).0;
        }
    }
    (state, effects)
}

/// A page with a truss on it, answered.
fn page(truss: &Truss) -> State {
    let text = chordwright::exchange::write_truss(truss);
    send(&State::default(), Event::FileRead("a.truss.json".into(), text.into_bytes())).0
}

fn take_in(state: &State, table: &str) -> State {
    send(state, Event::FileRead("table.csv".into(), table.as_bytes().to_vec())).0
}

/// The same truss without its lists.
fn empty_sheet(truss: &Truss) -> State {
    page(&Truss { unit: truss.unit, step: truss.step.clone(), title: truss.title.clone(), ..Truss::default() })
}

#[test]
fn every_table_that_is_saved_can_be_taken_in_again() {
    let demos = DEMOS.iter().map(|text| read_truss(text.as_bytes()).expect("a demonstration"));
    for truss in demos.chain((0..40).map(|seed| mixed(seed).truss)) {
        let state = page(&truss);
        let mut copy = empty_sheet(&truss);
        for book in [Book::Joints, Book::Members, Book::Figures, Book::Supports] {
            let is_empty = csv_text(&state, book).lines().count() <= 2;
            if !is_empty {
                copy = take_in(&copy, &csv_text(&state, book));
            }
        }
        assert_eq!(*copy.truss, truss, "{:?}", copy.message);
    }
}

#[test]
fn a_table_says_the_exact_value_beside_the_printed_one_and_the_notice() {
    let state = page(&read_truss(DEMOS[0].as_bytes()).expect("a demonstration"));
    let members = csv_text(&state, Book::Members);
    assert!(members.starts_with("member,from,to,role,length,bevel,degrees,exact run,exact rise,quadrance\r\n"));
    assert!(
        members.ends_with(&format!("{NOTICE}\r\n")) || members.ends_with(&format!("\"{NOTICE}\"\r\n")),
        "{members}"
    );
    let schedule = csv_text(&state, Book::Schedule);
    assert!(schedule.contains(",5364,1,1,\"T1; T8\"\r\n"), "the heel members are opposite hands:\n{schedule}");
    let off: usize = schedule
        .lines()
        .skip(1)
        .filter(|line| !line.contains("in all"))
        .filter_map(|line| line.split(',').next()?.parse::<usize>().ok())
        .sum();
    assert_eq!(off, state.truss.members.len(), "every member is in one group:\n{schedule}");
    assert!(csv_text(&state, Book::Strings).contains("bottom chord,"));
}

#[test]
fn a_row_that_cannot_be_read_is_named_and_nothing_is_changed() {
    let state = page(&read_truss(DEMOS[0].as_bytes()).expect("a demonstration"));
    for (table, error) in [
        ("", "it is empty"),
        ("mark,x,y\r\nA,0,0", "row 1: expected titles of columns"),
        ("joint,right,up\r\nX1,0,0\r\nX2,four,0", "row 3: right: "),
        ("joint,right,up,loose\nX1,0,0,perhaps", "row 2: loose: `perhaps`"),
        ("member,from,to\nM1,L0,nowhere", "row 2: to: there is no joint `nowhere`"),
        ("member,from,to,role\nM1,L0,U7,rope", "row 2: role: `rope` is not a role"),
        ("kind,joints,printed\nlength,L0,4'", "row 2: joints: length takes two joints"),
        ("kind,joints,printed\nlength,L0; U7,four", "row 2: printed: "),
        ("kind,joints,printed\nlengthy,L0; U7,4'", "row 2: kind: `lengthy`"),
        ("joint,kind\nL0,hook", "row 2: "),
        ("joint,right,up\n", "there is no row with a joint in it"),
    ] {
        let after = take_in(&state, table);
        let message = after.message.expect("a message").text;
        assert!(message.contains(error), "{table:?}: {message}");
        assert_eq!(after.truss, state.truss);
    }
    let not_text = send(&state, Event::FileRead("t.CSV".into(), vec![0xff, 0xfe, 0])).0;
    assert!(not_text.message.expect("a message").text.contains("no text in UTF-8"));
}

#[test]
fn a_spreadsheet_gets_no_formula_from_a_name() {
    let mut truss = read_truss(DEMOS[0].as_bytes()).expect("a demonstration");
    let names = ["=1+1", "@SUM(A1)", "+cmd|' /C x'!A0", "-2+3", "a\"b,c", " =A1"];
    for (joint, name) in truss.joints.iter_mut().zip(names) {
        joint.mark = name.trim().to_string();
    }
    let state = page(&truss);
    let table = csv_text(&state, Book::Joints);
    for line in table.lines().skip(1) {
        let first = line.trim_start_matches('"');
        assert!(!first.starts_with(['=', '@']) && !first.starts_with("+c"), "{line}");
    }
    let copy = take_in(&empty_sheet(&truss), &table);
    assert_eq!(copy.truss.joints, truss.joints, "and the names come back as they were");
}

#[test]
fn the_drawing_alone_holds_its_title_its_notice_and_no_markup_from_names() {
    let mut truss = read_truss(DEMOS[0].as_bytes()).expect("a demonstration");
    truss.title = "<script>alert(1)</script> & \"co\"".into();
    truss.joints[3].mark = "<img onerror=x>".into();
    let (_, effects) = send(&page(&truss), Event::DrawingSaveAsked);
    let Some(Effect::Save { name, text }) = effects.first() else { panic!("it is saved: {effects:?}") };
    assert!(name.ends_with(".svg"));
    assert!(text.starts_with("<svg xmlns=\"http://www.w3.org/2000/svg\"") && text.ends_with("</svg>\n"));
    assert!(text.contains(NOTICE) && text.contains("&lt;script&gt;"));
    assert!(!text.contains("<script") && !text.contains("<img"));
    let opened = text.matches("<path ").count() + text.matches("<rect ").count();
    assert_eq!(text.matches("/>").count(), opened, "every part is closed");
    assert_eq!(text.matches("<text").count(), text.matches("</text>").count());
}
