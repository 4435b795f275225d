//! Figures against joints that are all set: each kind alone, holding and not.

mod close_help;

use chordwright::checks::{CloseState, Effort, Proof, Rule, close};
use chordwright::truss::Truss;
use close_help::Draft;

/// A triangle with legs 36 and 48 (so 60 long), and a fourth joint that makes a rectangle.
fn sheet() -> Draft {
    Draft::step("1/16").set("A", "0", "0").set("B", "48", "0").set("C", "48", "36").set("D", "0", "36")
}

fn state(truss: &Truss) -> (CloseState, Proof) {
    let (answer, _) = close(truss, &Effort::default());
    (answer.state, answer.proof)
}

#[test]
fn every_kind_that_holds_closes() {
    let cases: Vec<(&str, Draft)> = vec![
        ("length", sheet().length("A", "C", "60")),
        ("length at the border of its interval", sheet().length("A", "C", "1919/32")),
        ("run", sheet().run("C", "D", "-48")),
        ("rise", sheet().rise("A", "D", "36")),
        ("pitch", sheet().pitch("A", "C", "9", "12")),
        ("steep pitch", Draft::step("1/16").set("A", "0", "0").set("C", "36", "48").pitch("A", "C", "12", "9")),
        ("angle", sheet().angle("A", "B", "C", "369/10", "1/10")),
        ("square angle, exact", sheet().angle("A", "B", "D", "90", "0")),
        (
            "obtuse angle",
            Draft::step("1").set("A", "0", "0").set("B", "1", "0").set("C", "-1", "1").angle("A", "B", "C", "135", "0"),
        ),
        ("spread", sheet().spread("A", "B", "C", "9/25", "0")),
        ("square", sheet().square("B", "A", "C")),
        ("in line", sheet().set("E", "24", "18").in_line(&["A", "E", "C"])),
        ("parallel", sheet().parallel("A", "B", "D", "C")),
        ("equal", sheet().equal("A", "C", "B", "D")),
        ("level", sheet().level(&["C", "D"])),
        ("plumb", sheet().plumb(&["B", "C"])),
    ];
    for (name, draft) in cases {
        assert_eq!(state(&draft.truss()), (CloseState::Closes, Proof::Layout), "{name}");
    }
}

#[test]
fn every_kind_that_fails_does_not_close() {
    let cases: Vec<(&str, Draft, Option<&str>)> = vec![
        ("length", sheet().length("A", "C", "59"), Some("5'-0\"")),
        ("run of the wrong sign", sheet().run("C", "D", "48"), Some("-4'-0\"")),
        ("rise", sheet().rise("A", "D", "581/16"), Some("3'-0\"")),
        ("pitch", sheet().pitch("A", "C", "8", "12"), Some("9:12")),
        ("angle", sheet().angle("A", "B", "C", "37", "1/10"), Some("36.9")),
        ("spread", sheet().spread("A", "B", "C", "1/3", "0"), Some("0.36")),
        ("square", sheet().square("A", "B", "C"), Some("not square")),
        ("in line", sheet().set("E", "24", "289/16").in_line(&["A", "E", "C"]), Some("not in line")),
        ("parallel", sheet().parallel("A", "B", "A", "C"), Some("not parallel")),
        ("equal", sheet().equal("A", "C", "A", "B"), Some("not equal")),
        ("level", sheet().level(&["A", "C"]), Some("not level")),
        ("plumb", sheet().plumb(&["A", "C"]), Some("not plumb")),
    ];
    for (name, draft, implied) in cases {
        let truss = draft.truss();
        let (answer, findings) = close(&truss, &Effort::default());
        assert_eq!((answer.state, answer.proof), (CloseState::DoesNotClose, Proof::Exclusion), "{name}");
        assert_eq!(answer.suspects.first().map(|s| s.implied.as_str()), implied, "{name}");
        assert!(!answer.readings[0].holds && !answer.readings[0].misfit.is_empty(), "{name}");
        let told = findings.iter().filter(|finding| finding.rule == Rule::FigureMisfit).count();
        let by_lines = ["square", "in line", "parallel", "equal"].contains(&name);
        assert_eq!(told, usize::from(!by_lines), "{name}");
    }
}

#[test]
fn a_string_that_is_a_sixteenth_short_is_a_caution_with_the_roundings_that_add_up() {
    let mut draft = Draft::step("1/16");
    for i in 0..8 {
        draft = draft.set(&format!("L{i}"), &format!("{}/7", 480 * i), "0");
    }
    for i in 0..7 {
        draft = draft.run(&format!("L{i}"), &format!("L{}", i + 1), "1097/16");
    }
    let truss = draft.run("L0", "L7", "480").truss();
    let (answer, findings) = close(&truss, &Effort::default());
    assert_eq!(answer.state, CloseState::Closes);
    let short = findings.iter().find(|finding| finding.rule == Rule::StringShort).expect("a caution");
    assert!(short.text.contains("39'-11 15/16\", 1/16\" short of the overall 40'-0\""), "{}", short.text);
    let mend = short.mend.as_ref().expect("the roundings that add up");
    let middle = "5'-8 9/16\", 5'-8 9/16\", 5'-8 9/16\", 5'-8 5/8\", 5'-8 9/16\"";
    assert!(mend.text.contains(middle), "the middle panel takes it: {}", mend.text);
    assert_eq!(mend.edit, None, "set joints would then disagree");
}

#[test]
fn an_empty_sheet_has_no_figures() {
    assert_eq!(state(&sheet().truss()), (CloseState::NoFigures, Proof::None));
}
