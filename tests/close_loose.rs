//! Loose joints: small cases whose answers are known.

mod close_help;

use chordwright::checks::{CloseAnswer, CloseState, Effort, Finding, Proof, Rule, close};
use chordwright::exact::Point;
use chordwright::truss::Truss;
use close_help::{Draft, q, w};

fn ask(draft: Draft) -> (Truss, CloseAnswer, Vec<Finding>) {
    let truss = draft.truss();
    let (answer, findings) = close(&truss, &Effort::default());
    (truss, answer, findings)
}

fn place(truss: &Truss, answer: &CloseAnswer, mark: &str) -> Point {
    let id = truss.joint_marked(mark).expect("a joint");
    answer.layout.as_ref().expect("a layout")[id.index()].clone()
}

/// Two set joints 14 apart and one loose above them.
fn triangle(step: &str) -> Draft {
    Draft::step(step).set("A", "0", "0").set("B", "14", "0").loose("C", "6", "10")
}

#[test]
fn exact_lengths_are_met_exactly() {
    let (truss, answer, _) = ask(triangle("0").length("A", "C", "13").length("B", "C", "15"));
    assert_eq!((answer.state, answer.proof), (CloseState::Closes, Proof::Layout), "{}", answer.summary);
    assert_eq!(place(&truss, &answer, "C"), Point::whole(5, 12));
}

#[test]
fn exact_lengths_meet_at_fractions() {
    // C = (40/7, 40/7·√…): lengths from three joints that agree at a fraction.
    let draft = Draft::step("0")
        .set("A", "0", "0")
        .set("B", "25", "0")
        .loose("C", "10", "10")
        .length("A", "C", "15")
        .length("B", "C", "20");
    let (truss, answer, _) = ask(draft);
    assert_eq!(place(&truss, &answer, "C"), Point::whole(9, 12));
}

#[test]
fn an_exact_chain_of_triangles_without_set_joints() {
    let draft = Draft::step("0")
        .loose("A", "0", "0")
        .loose("B", "13", "1")
        .loose("C", "6", "11")
        .loose("D", "21", "10")
        .length("A", "B", "14")
        .length("A", "C", "13")
        .length("B", "C", "15")
        .length("B", "D", "13")
        .length("C", "D", "14");
    let (truss, answer, findings) = ask(draft);
    assert_eq!(answer.state, CloseState::Closes, "{} {findings:?}", answer.summary);
    assert_eq!(place(&truss, &answer, "A"), Point::whole(0, 0));
}

#[test]
fn an_exact_length_beside_rounded_figures() {
    let draft = triangle("1/16").length("B", "C", "15").rise("A", "C", "12");
    let mut truss = draft.truss();
    let mut exact = triangle("1/16").length("A", "C", "13").truss().figures.remove(0);
    (exact.mark, exact.step) = ("f9".into(), Some(close_help::value("0")));
    truss.figures.push(exact);
    let (answer, _) = close(&truss, &Effort::default());
    assert_eq!(answer.state, CloseState::Closes, "{}", answer.summary);
}

#[test]
fn one_exact_length_that_leaves_a_joint_on_a_circle() {
    let draft = Draft::step("1/16").set("A", "0", "0").loose("C", "7", "7").rise("A", "C", "7");
    let mut truss = draft.truss();
    let mut exact = triangle("1/16").length("A", "C", "10").truss().figures.remove(0);
    exact.mark = "f9".into();
    exact.step = Some(close_help::value("0"));
    exact.kind = chordwright::truss::FigureKind::Length {
        from: chordwright::truss::JointId::new(0),
        to: chordwright::truss::JointId::new(1),
        value: close_help::value("10"),
    };
    truss.figures.push(exact);
    let (answer, _) = close(&truss, &Effort::default());
    assert_eq!(answer.state, CloseState::Closes, "{}", answer.summary);
}

#[test]
fn a_triangle_that_cannot_be() {
    let (_, answer, findings) = ask(Draft::step("1/16")
        .loose("L3", "0", "0")
        .loose("U3", "30", "40")
        .loose("L4", "100", "0")
        .length("L3", "U3", "48")
        .length("U3", "L4", "62")
        .length("L3", "L4", "233/2"));
    assert_eq!((answer.state, answer.proof), (CloseState::DoesNotClose, Proof::Exclusion));
    let excluded = findings.iter().find(|f| f.rule == Rule::Excluded).expect("a finding");
    assert!(excluded.text.contains("cannot be a triangle: 4'-0\" + 5'-2\" < 9'-8 1/2\""), "{}", excluded.text);
    let suspects: Vec<usize> = answer.suspects.iter().map(|suspect| suspect.figure.index()).collect();
    assert_eq!(suspects.len(), 3, "any one of the three may be the wrong one: {suspects:?}");
}

#[test]
fn joints_that_can_still_move_are_named() {
    let (truss, answer, findings) = ask(triangle("1/16").length("A", "C", "13"));
    assert_eq!((answer.state, answer.proof), (CloseState::TooFewFigures, Proof::Layout));
    assert_eq!(answer.free_joints, vec![truss.joint_marked("C").expect("C")]);
    assert_eq!(findings.iter().filter(|f| f.rule == Rule::NeedsAFigure).count(), 1, "{findings:?}");
}

#[test]
fn a_joint_that_no_figure_names_is_free() {
    let (truss, answer, _) = ask(triangle("1/16").length("A", "C", "13").length("B", "C", "15").loose("D", "30", "5"));
    assert_eq!(answer.state, CloseState::TooFewFigures);
    assert_eq!(answer.free_joints, vec![truss.joint_marked("D").expect("D")]);
}

#[test]
fn a_frame_may_slide_and_turn_as_a_whole() {
    let draft = Draft::step("1/16").loose("A", "3", "4").loose("B", "17", "5").loose("C", "8", "14");
    let (truss, answer, _) = ask(draft.length("A", "C", "13").length("B", "C", "15").length("A", "B", "14"));
    assert_eq!(answer.state, CloseState::Closes, "{}", answer.summary);
    assert_eq!(place(&truss, &answer, "A"), Point::whole(0, 0), "the first joint sits at the origin");
}

#[test]
fn a_chord_held_by_panel_lengths_alone_is_weakly_fixed() {
    let draft = Draft::step("1/16")
        .set("A", "0", "0")
        .set("C", "120", "0")
        .loose("B", "60", "1")
        .length("A", "B", "60")
        .length("B", "C", "60");
    let (truss, answer, findings) = ask(draft);
    assert_eq!(answer.state, CloseState::Closes, "{}", answer.summary);
    let weak = findings.iter().find(|f| f.rule == Rule::WeaklyFixed).expect("a caution");
    assert_eq!(weak.joints, vec![truss.joint_marked("B").expect("B")]);
}

#[test]
fn a_sketch_on_the_wrong_side_is_told() {
    let draft = Draft::step("1/16").set("A", "0", "0").set("B", "14", "0").loose("C", "6", "-10");
    let (truss, answer, findings) = ask(draft.length("A", "C", "13").length("B", "C", "15").rise("A", "C", "12"));
    assert_eq!(answer.state, CloseState::NotSettled, "{}", answer.summary);
    let mend = findings[0].mend.as_ref().and_then(|mend| mend.edit.clone()).expect("a mend");
    let (answer, _) = close(&truss.edited(&mend).expect("it applies"), &Effort::default());
    assert_eq!(answer.state, CloseState::Closes);
}

#[test]
fn several_fixed_frames_and_a_joint_between_them() {
    let draft =
        Draft::step("1").set("A", "0", "0").set("B", "4000", "0").set("C", "0", "3000").loose("D", "3900", "3100");
    let (_, answer, _) = ask(draft.length("B", "D", "3000").length("C", "D", "4000").length("A", "D", "5000"));
    assert_eq!(answer.state, CloseState::Closes, "{}", answer.summary);
}

#[test]
fn a_string_of_loose_joints_adds_up_when_mended() {
    let mut draft = Draft::step("1/16").set("L0", "0", "0");
    for i in 1..8 {
        draft = draft.loose(&format!("L{i}"), &format!("{}", 68 * i), "0");
    }
    for i in 0..7 {
        draft = draft.run(&format!("L{i}"), &format!("L{}", i + 1), "1097/16");
    }
    let level: Vec<String> = (0..8).map(|i| format!("L{i}")).collect();
    let marks: Vec<&str> = level.iter().map(String::as_str).collect();
    let (truss, answer, findings) = ask(draft.run("L0", "L7", "480").level(&marks));
    assert_eq!(answer.state, CloseState::Closes);
    let short = findings.iter().find(|f| f.rule == Rule::StringShort).expect("a caution");
    let edit = short.mend.as_ref().and_then(|mend| mend.edit.clone()).expect("the roundings that add up");
    let mended = truss.edited(&edit).expect("it applies");
    let (answer, findings) = close(&mended, &Effort::default());
    assert_eq!((answer.state, findings.len()), (CloseState::Closes, 0));
}

#[test]
fn values_beyond_floats_are_no_panic() {
    let huge = format!("1{}", "0".repeat(39));
    let (_, answer, _) = ask(Draft::step("1/16").set("A", "0", "0").loose("B", &huge, "1").length("A", "B", &huge));
    assert_ne!(answer.state, CloseState::DoesNotClose);
    let _ = (q(1, 2), w(1));
}

#[test]
fn angles_that_contradict_each_other_are_excluded_by_proof() {
    // With 13 at 60 degrees C is at (6.5, 11.26), which B sees at 56.3 degrees.
    let (_, answer, _) = ask(triangle("1/16")
        .length("A", "C", "13")
        .angle("A", "B", "C", "60", "1/10")
        .angle("B", "A", "C", "52", "1/10"));
    assert_eq!((answer.state, answer.proof), (CloseState::DoesNotClose, Proof::Exclusion), "{}", answer.summary);
    assert_eq!(answer.suspects.len(), 3, "{}", answer.summary);
}
