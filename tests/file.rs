//! The truss file: what is written reads back, and everything that is wrong is told with its place.

#![cfg(not(target_arch = "wasm32"))]

mod common;

use chordwright::exchange::{read_truss, write_truss};
use chordwright::measure::Written;
use chordwright::truss::{JointId, Limit, Member, Role, Truss};
use common::{flat_truss, trusses};
use proptest::prelude::*;
use std::path::PathBuf;

proptest! {
    #![proptest_config(ProptestConfig { failure_persistence: None, cases: 400, ..ProptestConfig::default() })]

    #[test]
    fn what_is_written_reads_back(truss in trusses()) {
        prop_assert_eq!(truss.problems(), vec![], "the generator makes fit trusses");
        let text = write_truss(&truss);
        let read = read_truss(text.as_bytes());
        prop_assert_eq!(read.as_ref(), Ok(&truss), "{}", text);
        prop_assert_eq!(write_truss(&truss), text);
    }

    #[test]
    fn a_changed_byte_never_panics(truss in trusses(), at in any::<proptest::sample::Index>(), byte in any::<u8>()) {
        let mut bytes = write_truss(&truss).into_bytes();
        let at = at.index(bytes.len());
        bytes[at] = byte;
        if let Err(error) = read_truss(&bytes) {
            prop_assert!(!error.problems.is_empty() && error.problems.iter().all(|problem| !problem.is_empty()));
        }
    }

    #[test]
    fn no_bytes_panic(bytes in proptest::collection::vec(any::<u8>(), 0..200)) {
        prop_assert!(read_truss(&bytes).is_err());
    }
}

/// A file with one of everything.
const SHEET: &str = r#"{
  "chordwright": 1,
  "title": "Shed",
  "unit": "in",
  "step": "1/16",
  "joints": [
    {"mark": "A", "x": "0", "y": 0},
    {"mark": "B", "x": "10'", "y": "0"},
    {"mark": "C", "x": "5'", "y": "5'", "loose": true},
    {"mark": "D", "x": "5'", "y": "0", "loose": false}
  ],
  "members": [
    {"mark": "m1", "from": "A", "to": "B", "role": "bottom chord"},
    {"mark": "m2", "from": "A", "to": "C"}
  ],
  "supports": [
    {"joint": "A", "kind": "pin"},
    {"joint": "B", "kind": "roller", "normal": ["0", 1]},
    {"joint": "D", "kind": "roller"}
  ],
  "figures": [
    {"id": "f1", "kind": "length", "from": "A", "to": "C", "value": "7'-0 7/8\""},
    {"id": "f2", "kind": "run", "from": "A", "to": "B", "value": "10'", "step": "0"},
    {"id": "f3", "kind": "rise", "from": "A", "to": "C", "value": 60},
    {"id": "f4", "kind": "pitch", "from": "A", "to": "C", "value": "12:12", "step": "1/16"},
    {"id": "f5", "kind": "angle", "at": "A", "from": "B", "to": "C", "value": "45°", "step": "0.1"},
    {"id": "f6", "kind": "spread", "at": "A", "from": "B", "to": "C", "value": "1/2", "step": "0"},
    {"id": "f7", "kind": "square", "at": "C", "from": "A", "to": "B"},
    {"id": "f8", "kind": "in line", "joints": ["A", "D", "B"]},
    {"id": "f9", "kind": "parallel", "first": ["A", "B"], "second": ["A", "D"]},
    {"id": "f10", "kind": "equal", "first": ["A", "C"], "second": ["C", "B"]},
    {"id": "f11", "kind": "level", "joints": ["A", "B"]},
    {"id": "f12", "kind": "plumb", "joints": ["D", "C"]}
  ]
}
"#;

/// The sheet with one part replaced; the part has to stand in it once.
fn changed(from: &str, to: &str) -> String {
    assert_eq!(SHEET.matches(from).count(), 1, "`{from}` stands once in the sheet");
    SHEET.replacen(from, to, 1)
}

fn problems(text: &str) -> Vec<String> {
    match read_truss(text.as_bytes()) {
        Ok(_) => panic!("is read: {}", text.chars().take(2000).collect::<String>()),
        Err(error) => error.problems,
    }
}

/// With the first text in place of the second, the sheet has this problem and no other.
fn check(table: &[(&str, &str, &str)]) {
    for (from, to, expected) in table {
        assert_eq!(problems(&changed(from, to)), [*expected], "`{from}` -> `{to}`");
    }
}

#[test]
fn the_sheet_reads_and_has_one_of_everything() {
    let truss = read_truss(SHEET.as_bytes()).expect("reads");
    assert_eq!((truss.joints.len(), truss.members.len(), truss.supports.len(), truss.figures.len()), (4, 2, 3, 12));
    assert_eq!(truss.members[1].role, Role::Other, "without a role");
    assert_eq!(read_truss(write_truss(&truss).as_bytes()), Ok(truss));
}

#[test]
fn lists_may_be_left_out_and_keys_stand_in_any_order() {
    let truss = read_truss(br#"{"step": 1, "unit": "mm", "chordwright": "1"}"#).expect("reads");
    assert_eq!(
        truss,
        Truss {
            unit: chordwright::measure::Unit::Mm,
            step: Written::plain(chordwright::exact::whole(1)),
            ..Truss::default()
        }
    );
}

#[test]
fn a_mark_of_byte_order_is_stepped_over_once() {
    assert_eq!(read_truss(format!("\u{feff}{SHEET}").as_bytes()), read_truss(SHEET.as_bytes()));
    assert_eq!(problems(&format!("\u{feff}\u{feff}{SHEET}")), ["line 1, column 1: not JSON: expected value"]);
}

#[test]
fn unknown_keys_are_named_everywhere() {
    check(
        &[
            (r#""title": "Shed""#, r#""title": "Shed", "Unit": "mm""#, "unknown key `Unit`"),
            (r#""y": 0}"#, r#""y": 0, "z": "0"}"#, "joints[0]: unknown key `z`"),
            (r#""to": "C"},"#, r#""to": "C"},"#, ""),
        ][..2],
    );
    check(&[
        (r#"{"mark": "m2", "#, r#"{"mark": "m2", "size": "2x6", "#, "members[1]: unknown key `size`"),
        (r#""kind": "pin"}"#, r#""kind": "pin", "normal": ["0", "1"]}"#, "supports[0]: unknown key `normal`"),
        (r#"{"id": "f1", "#, r#"{"id": "f1", "at": "B", "#, "figures[0]: unknown key `at`"),
        (r#"{"id": "f7", "#, r#"{"id": "f7", "value": "90", "#, "figures[6]: unknown key `value`"),
        (r#"{"id": "f8", "#, r#"{"id": "f8", "": 1, "#, "figures[7]: unknown key ``"),
        (r#"{"id": "f9", "#, r#"{"id": "f9", "third": [], "#, "figures[8]: unknown key `third`"),
        (r#"{"id": "f11", "#, r#"{"id": "f11", "\u0000\"<b>": 1, "#, "figures[10]: unknown key `\\0\"<b>`"),
    ]);
}

#[test]
fn keys_that_stand_twice_are_named() {
    check(&[
        (r#""unit": "in""#, r#""unit": "in", "unit": "in""#, "the key `unit` stands twice"),
        (r#""y": 0}"#, r#""y": 0, "y": 0}"#, "joints[0]: the key `y` stands twice"),
        (r#"{"mark": "m2", "#, r#"{"mark": "m2", "mark": "m3", "#, "members[1]: the key `mark` stands twice"),
        (r#""kind": "pin"}"#, r#""kind": "pin", "joint": "B"}"#, "supports[0]: the key `joint` stands twice"),
        (r#"{"id": "f1", "#, r#"{"id": "f1", "value": "7'", "#, "figures[0]: the key `value` stands twice"),
    ]);
}

#[test]
fn keys_that_are_missing_are_named() {
    check(&[
        ("\"chordwright\": 1,\n", "", "the key `chordwright` is missing"),
        ("\"unit\": \"in\",\n", "", "the key `unit` is missing"),
        ("\"step\": \"1/16\",\n", "", "the key `step` is missing"),
        (r#"{"mark": "A", "x": "0", "y": 0}"#, r#"{"mark": "A", "y": 0}"#, "joints[0]: the key `x` is missing"),
        (r#"{"mark": "m1", "#, "{", "members[0]: the key `mark` is missing"),
        (r#""A", "to": "B", "role""#, r#""A", "role""#, "members[0]: the key `to` is missing"),
        (r#", "kind": "pin"}"#, "}", "supports[0]: the key `kind` is missing"),
        (r#"{"joint": "D", "#, "{", "supports[2]: the key `joint` is missing"),
        (r#"{"id": "f1", "kind": "length", "#, r#"{"kind": "length", "#, "figures[0]: the key `id` is missing"),
        (r#", "value": "7'-0 7/8\"""#, "", "figures[0]: the key `value` is missing"),
        (r#""value": "12:12", "#, "", "figures[3]: the key `value` is missing"),
        (
            r#""at": "A", "from": "B", "to": "C", "value": "45°""#,
            r#""from": "B", "to": "C", "value": "45°""#,
            "figures[4]: the key `at` is missing",
        ),
        (r#""in line", "joints": ["A", "D", "B"]"#, r#""in line""#, "figures[7]: the key `joints` is missing"),
        (r#", "second": ["A", "D"]"#, "", "figures[8]: the key `second` is missing"),
        (r#""kind": "square", "#, "", "figures[6]: the key `kind` is missing"),
    ]);
}

#[test]
fn wrong_types_are_told_with_what_was_expected() {
    check(&[
        (r#""chordwright": 1"#, r#""chordwright": true"#, "chordwright: expected 1, found true or false"),
        (r#""Shed""#, "7", "title: expected a text, found a number"),
        (r#""unit": "in""#, r#""unit": ["in"]"#, "unit: expected a text, found a list"),
        (
            r#""step": "1/16",
  "#,
            "\"step\": null,\n",
            "step: expected a value such as \"8'-3 3/8\\\"\", found null",
        ),
        (r#""mark": "A""#, r#""mark": 1"#, "joints[0].mark: expected a text, found a number"),
        (r#""x": "10'""#, r#""x": {}"#, "joints[1].x: expected a value such as \"8'-3 3/8\\\"\", found an object"),
        (r#""loose": true"#, r#""loose": "yes""#, "joints[2].loose: expected true or false, found a text"),
        (r#""role": "bottom chord""#, r#""role": false"#, "members[0].role: expected a text, found true or false"),
        (r#"["0", 1]"#, r#""up""#, "supports[1].normal: expected two numbers, such as [\"0\", \"1\"]"),
        (r#"["0", 1]"#, r#"["0", 1, 2]"#, "supports[1].normal: expected two numbers, such as [\"0\", \"1\"]"),
        (
            r#"["0", 1]"#,
            r#"["0", null]"#,
            "supports[1].normal[1]: expected a value such as \"8'-3 3/8\\\"\", found null",
        ),
        (r#""12:12""#, "12", "figures[3].value: expected a text, found a number"),
        (r#"["A", "D", "B"]"#, r#""A""#, "figures[7].joints: expected a list of joints, found a text"),
        (r#"["A", "D", "B"]"#, r#"["A", 1, "B"]"#, "figures[7].joints[1]: expected a text, found a number"),
        (r#"["A", "D"]"#, r#"["A"]"#, "figures[8].second: expected two joints, found 1"),
        (r#"["A", "D"]"#, r#"["A", "D", "B"]"#, "figures[8].second: expected two joints, found 3"),
        (r#"{"mark": "m2", "from": "A", "to": "C"}"#, "[]", "members[1]: expected an object, found a list"),
    ]);
    for (text, expected) in [
        ("[]", "expected an object, found a list"),
        ("null", "expected an object, found null"),
        ("7", "expected an object, found a number"),
        (r#"{"chordwright": 1, "unit": "in", "step": 0, "joints": {}}"#, "joints: expected a list, found an object"),
        (r#"{"chordwright": 1, "unit": "in", "step": 0, "figures": null}"#, "figures: expected a list, found null"),
    ] {
        assert_eq!(problems(text), [expected]);
    }
}

#[test]
fn numbers_are_texts_or_whole() {
    let inexact = "a JSON number with a fraction is not exact; write it as a text, such as \"10.5\"";
    for number in ["10.5", "1e2", "0.1", "-0.5", "-0.0", "1234567890123456789012345678901234567890.0"] {
        assert_eq!(problems(&changed("\"y\": 0}", &format!("\"y\": {number}}}"))), [format!("joints[0].y: {inexact}")]);
    }
    let forty = "-1234567890123456789012345678901234567890";
    for number in ["0", "-0", "-7", "18446744073709551615", "-9223372036854775808", forty] {
        let truss = read_truss(changed("\"y\": 0}", &format!("\"y\": {number}}}")).as_bytes()).expect("a whole number");
        assert_eq!(truss.joints[0].y.text, number);
    }
    assert!(problems(&changed("\"y\": 0}", "\"y\": 01}"))[0].starts_with("line 7, column "), "not JSON");
}

#[test]
fn values_that_cannot_be_read_are_told_at_their_character() {
    check(&[
        (
            r#""x": "10'""#,
            r#""x": "10'-4x""#,
            "joints[1].x: character 6: to multiply, write * or put a blank on both sides of the x (in `10'-4x`)",
        ),
        (r#""x": "10'""#, r#""x": """#, "joints[1].x: character 1: expected a number, found the end (in ``)"),
        (
            r#""step": "1/16",
"#,
            "\"step\": \"1/0\",\n",
            "step: character 3: division by zero (in `1/0`)",
        ),
        (
            r#"["0", 1]"#,
            r#"["0'", 1]"#,
            "supports[1].normal[0]: character 2: expected a plain number without a unit, found `'` (in `0'`)",
        ),
        (r#""12:12""#, r#""12""#, "figures[3].value: character 3: expected rise and run such as 6:12 (in `12`)"),
        (
            r#""45°""#,
            r#""45'""#,
            "figures[4].value: character 3: expected a plain number without a unit, found `'` (in `45'`)",
        ),
        (
            r#""step": "0.1""#,
            r#""step": "1 mm""#,
            "figures[4].step: character 3: expected a plain number without a unit, found `mm` (in `1 mm`)",
        ),
        (
            r#""1/2", "step": "0""#,
            r#""1/2", "step": "0\"""#,
            "figures[5].step: character 2: expected a plain number without a unit, found `\"` (in `0\"`)",
        ),
    ]);
    let nines = "9".repeat(41);
    let told = problems(&changed(r#""x": "10'""#, &format!(r#""x": "{nines}""#)));
    assert_eq!(
        told,
        [format!("joints[1].x: character 1: the number has more than the limit of 40 digits (in `{nines}`)")]
    );
    let deep = format!("{}1{}", "(".repeat(33), ")".repeat(33));
    let told = problems(&changed(r#""x": "10'""#, &format!(r#""x": "{deep}""#)));
    assert!(told[0].starts_with("joints[1].x: character 34: nested deeper than the limit of 32 (in `((("), "{told:?}");
    let long = "1".repeat(1_000_000);
    let told = problems(&changed(r#""x": "10'""#, &format!(r#""x": "{long}""#)));
    assert!(told[0].starts_with("joints[1].x: character 201: ") && told[0].len() < 300, "{told:?}");
}

#[test]
fn versions_units_roles_and_kinds_that_are_not_known() {
    check(&[
        (r#""chordwright": 1"#, r#""chordwright": 2"#, "chordwright: version `2` is not known here; expected 1"),
        (r#""chordwright": 1"#, r#""chordwright": "1.0""#, "chordwright: version `1.0` is not known here; expected 1"),
        (r#""unit": "in""#, r#""unit": "yd""#, "unit: `yd` is not a unit; expected in, ft, mm, cm or m"),
        (r#""unit": "in""#, r#""unit": "IN""#, "unit: `IN` is not a unit; expected in, ft, mm, cm or m"),
        (
            r#""bottom chord""#,
            r#""Bottom""#,
            "members[0].role: `Bottom` is not a role; expected one of top chord, bottom chord, web, post, other",
        ),
        (
            r#""kind": "pin""#,
            r#""kind": "fixed""#,
            "supports[0].kind: `fixed` is not a support; expected pin or roller",
        ),
        (
            r#""kind": "square""#,
            r#""kind": "Square""#,
            "figures[6].kind: `Square` is not a kind of figure; expected length, run, rise, pitch, angle, spread, square, in line, parallel, equal, level or plumb",
        ),
    ]);
}

#[test]
fn marks_that_may_not_be() {
    let long = "M".repeat(25);
    assert_eq!(
        problems(&changed(r#""mark": "m1""#, &format!(r#""mark": "{long}""#))),
        [format!("members[0].mark: the mark `{long}` is longer than 24 characters")]
    );
    let fits = "é".repeat(24);
    assert!(
        read_truss(changed(r#""mark": "m1""#, &format!(r#""mark": "{fits}""#)).as_bytes()).is_ok(),
        "24 characters, 48 bytes"
    );
    check(&[
        (r#""mark": "m1""#, r#""mark": """#, "members[0].mark: the mark `` is empty; expected 1 to 24 characters"),
        (r#""mark": "m1""#, r#""mark": "a\u0007""#, "members[0].mark: the mark `a\\u{7}` holds a control character"),
        (r#""id": "f1","#, r#""id": "\n","#, "figures[0].id: the mark `\\n` holds a control character"),
        (r#""mark": "m2""#, r#""mark": "m1""#, "member mark `m1` is used twice; expected each mark once"),
        (r#""mark": "D""#, r#""mark": "D\u0000""#, "joints[3].mark: the mark `D\\0` holds a control character"),
        (r#""id": "f2""#, r#""id": "f1""#, "figure mark `f1` is used twice; expected each mark once"),
        (
            r#"{"mark": "m1", "from": "A", "to": "B""#,
            r#"{"mark": "m1", "from": "A", "to": "b""#,
            "members[0].to: there is no joint `b`",
        ),
        (r#"{"joint": "D""#, r#"{"joint": " D""#, "supports[2].joint: there is no joint ` D`"),
        (
            r#"["D", "C"]"#,
            r#"["D", "<img src=x onerror=alert(1)>"]"#,
            "figures[11].joints[1]: there is no joint `<img src=x onerror=alert(1)>`",
        ),
    ]);
    let twice = changed(r#""mark": "D""#, r#""mark": "A""#)
        .replace(r#""joint": "D""#, r#""joint": "A""#)
        .replace(r#""D""#, r#""B""#);
    assert!(problems(&twice).contains(&"joint mark `A` is used twice; expected each mark once".to_string()));
}

#[test]
fn values_out_of_their_ranges() {
    check(&[
        (r#""value": "7'-0 7/8\"""#, r#""value": "-1""#, "figure `f1`: a length is 0 or more"),
        (r#""12:12""#, r#""-6:12""#, "figure `f4`: a pitch is unsigned: expected two numbers that are 0 or more"),
        (r#""12:12""#, r#""0:0""#, "figure `f4`: a pitch of 0:0 has no slope"),
        (r#""45°""#, r#""180.001""#, "figure `f5`: an angle is between 0 and 180 degrees"),
        (r#""1/2", "step": "0""#, r#""1.001", "step": "0""#, "figure `f6`: a spread is between 0 and 1"),
        (r#""10'", "step": "0""#, r#""10'", "step": "-1/16""#, "figure `f2`: its step is negative; expected 0 or more"),
        ("\"step\": \"1/16\",\n", "\"step\": \"-1/16\",\n", "the step `-1/16` is negative; expected 0 or more"),
        (r#"["0", 1]"#, r#"["0", "1 - 1"]"#, "the normal of a roller is 0, 0; expected a direction"),
        (r#"["A", "D", "B"]"#, r#"["A", "D"]"#, "figure `f8`: in line takes three joints or more"),
        (r#"["D", "C"]"#, r#"["D"]"#, "figure `f12`: plumb takes two joints or more"),
        (r#"["D", "C"]"#, r#"["D", "D"]"#, "figure `f12`: names joint `D` twice"),
        (r#"["A", "D"]"#, r#"["A", "A"]"#, "figure `f9`: names joint `A` twice"),
        (
            r#""kind": "length", "from": "A", "to": "C""#,
            r#""kind": "length", "from": "A", "to": "A""#,
            "figure `f1`: names joint `A` twice",
        ),
    ]);
}

#[test]
fn everything_that_is_wrong_is_told_at_once() {
    let text = changed(r#""x": "10'""#, r#""x": "ten""#)
        .replace(r#"{"mark": "m2", "#, r#"{"mark": "m2", "size": "2x6", "#)
        .replace(r#""kind": "pin""#, r#""kind": "fixed""#)
        .replace(r#"["D", "C"]"#, r#"["D", "E"]"#);
    assert_eq!(problems(&text).len(), 4, "{:#?}", problems(&text));
    // A joint that cannot be read is told once, and not again wherever it is named; one that is not there still is.
    assert!(problems(&text)[0].starts_with("joints[1].x: "));
    let text = changed(r#""y": 0}"#, r#""y": 0, "z": 0}"#).replace(r#"{"joint": "D""#, r#"{"joint": "E""#);
    assert_eq!(problems(&text), ["joints[0]: unknown key `z`", "supports[2].joint: there is no joint `E`"]);
    let text = changed("\"step\": \"1/16\",\n", "\"step\": \"x\",\n").replace(r#""x": "10'""#, r#""x": "ten""#);
    assert_eq!(problems(&text).len(), 2, "{:#?}", problems(&text));
}

#[test]
fn many_problems_are_counted_and_twenty_are_told() {
    let joints: Vec<String> = (0..1000).map(|i| format!("{{\"mark\": \"J{i}\", \"x\": \"?\", \"y\": 0}}")).collect();
    let text = format!("{{\"chordwright\": 1, \"unit\": \"in\", \"step\": 0, \"joints\": [{}]}}", joints.join(","));
    let error = read_truss(text.as_bytes()).expect_err("a thousand problems");
    assert_eq!((error.problems.len(), error.more), (20, 980));
    assert!(error.to_string().ends_with("; and 980 more"), "{error}");
}

#[test]
fn text_that_is_no_json_is_told_by_line_and_column() {
    for (text, expected) in [
        ("", "line 1, column 0: the text ends too early"),
        ("{", "line 1, column 1: the text ends too early"),
        ("{\n  \"chordwright\": 1,\n}", "line 3, column 1: not JSON: trailing comma"),
        ("{'chordwright': 1}", "line 1, column 2: not JSON: key must be a string"),
        ("{\"chordwright\": 1} x", "line 1, column 20: not JSON: trailing characters"),
        ("{\"chordwright\": NaN}", "line 1, column 17: not JSON: expected value"),
        ("{\"title\": \"\\ud800\"}", "line 1, column 18: not JSON: unexpected end of hex escape"),
        ("<svg/>", "line 1, column 1: not JSON: expected value"),
    ] {
        assert_eq!(problems(text), [expected], "{text}");
    }
    let mut bytes = SHEET.as_bytes().to_vec();
    let at = SHEET.find("Shed").expect("the title");
    bytes[at] = 0xff;
    let error = read_truss(&bytes).expect_err("not UTF-8");
    assert_eq!(error.problems, [format!("byte {}: not UTF-8 text", at + 1)]);
}

#[test]
fn nesting_is_bounded() {
    for (open, close) in [("[", "]"), ("{\"a\":", "}")] {
        for depth in [200, 100_000] {
            let text = format!("{}1{}", open.repeat(depth), close.repeat(depth));
            let told = problems(&text);
            assert!(told.len() == 1 && told[0].ends_with("nested too deeply for a truss file"), "{told:?}");
        }
    }
    let text = changed(r#"["D", "C"]"#, &format!("{}{}", "[".repeat(200), "]".repeat(200)));
    assert!(problems(&text)[0].starts_with("line 33, column "), "{:?}", problems(&text));
}

/// A file with so many equal entries in one list.
fn with_list(name: &str, count: usize, entry: impl Fn(usize) -> String) -> String {
    let entries: Vec<String> = (0..count).map(entry).collect();
    format!("{{\"chordwright\": 1, \"unit\": \"in\", \"step\": 0, \"{name}\": [{}]}}", entries.join(","))
}

#[test]
fn each_limit_is_told_by_its_name() {
    for (name, limit) in [("joints", 50_000), ("members", 100_000), ("supports", 50_000), ("figures", 100_000)] {
        let text = with_list(name, limit + 1, |_| "0".into());
        assert_eq!(problems(&text), [format!("{name}: more than the limit of {limit} {name}")]);
        let error = read_truss(with_list(name, limit, |_| "0".into()).as_bytes()).expect_err("numbers are no entries");
        assert_eq!(error.problems[0], format!("{name}[0]: expected an object, found a number"));
    }
}

#[test]
fn sixteen_mebibytes_and_not_a_byte_more() {
    assert_eq!(Limit::FILE_BYTES, 16 << 20);
    let mut text = SHEET.to_string();
    text.push_str(&" ".repeat(Limit::FILE_BYTES - text.len()));
    assert!(read_truss(text.as_bytes()).is_ok());
    text.push(' ');
    assert_eq!(problems(&text), ["the file has 16777217 bytes; the limit is 16 MiB of text"]);
}

#[test]
fn a_hostile_file_of_the_full_size_is_refused_in_reasonable_time() {
    let fill = |head: &str, entry: &dyn Fn(usize) -> String, tail: &str| {
        let mut text = head.to_string();
        for i in 0.. {
            let entry = entry(i);
            if text.len() + entry.len() + tail.len() > Limit::FILE_BYTES {
                break;
            }
            text.push_str(&entry);
        }
        text + tail
    };
    let names = |i: usize| format!("\"k{i}\":0,");
    let files = [
        ("keys", fill("{", &names, "\"chordwright\":1}")),
        (
            "keys of a joint",
            fill("{\"chordwright\":1,\"unit\":\"in\",\"step\":0,\"joints\":[{", &names, "\"mark\":\"A\"}]}"),
        ),
        ("the same key", fill("{", &|_| "\"a\":0,".into(), "\"chordwright\":1}")),
        ("a list", fill("[", &|_| "0,".into(), "0]")),
        (
            "joints of a figure",
            fill(&SHEET[..SHEET.rfind("\"D\", \"C\"").expect("the last figure")], &|_| "\"A\",".into(), "\"D\"]}]}"),
        ),
        ("a text", format!("\"{}\"", "\\u0041".repeat(Limit::FILE_BYTES / 6 - 1))),
    ];
    for (name, text) in files {
        let error = read_truss(text.as_bytes()).expect_err(name);
        assert!(error.to_string().len() < 10_000, "{name}");
    }
}

#[test]
fn the_largest_truss_reads_in_reasonable_time() {
    let mut truss = Truss::default();
    let joint = |i: usize| chordwright::truss::Joint {
        mark: format!("J{i}"),
        x: Written::length(&format!("{}'-3 5/16\"", i / 2), truss.unit).expect("a length"),
        y: Written::length(&format!("{}'", i % 2 * 8), truss.unit).expect("a length"),
        loose: false,
    };
    truss.joints = (0..Limit::JOINTS).map(joint).collect();
    let member = |i: usize| {
        let from = i / 2 % (Limit::JOINTS - 2);
        Member { mark: format!("M{i}"), from: JointId::new(from), to: JointId::new(from + 1 + i % 2), role: Role::Web }
    };
    truss.members = (0..Limit::MEMBERS).map(member).collect();
    let text = write_truss(&truss);
    assert!(text.len() < Limit::FILE_BYTES);
    assert_eq!(read_truss(text.as_bytes()).as_ref(), Ok(&truss));
}

fn demos() -> Vec<(String, String)> {
    let directory = PathBuf::from(env!("CARGO_MANIFEST_DIR")).join("demo");
    let entries = std::fs::read_dir(directory).expect("the demonstrations");
    let paths = entries.map(|entry| entry.expect("an entry").path());
    let mut found: Vec<_> = paths
        .filter(|path| path.to_string_lossy().ends_with(".truss.json"))
        .map(|path| (path.display().to_string(), std::fs::read_to_string(&path).expect("text")))
        .collect();
    found.sort();
    found
}

#[test]
fn the_demonstrations_read_and_are_written_as_they_are() {
    let demos = demos();
    assert!(demos.len() >= 3, "{demos:?}");
    for (name, text) in demos {
        let truss = read_truss(text.as_bytes()).unwrap_or_else(|error| panic!("{name}: {error}"));
        assert!(write_truss(&truss) == text, "{name} is not as it would be written");
    }
}

#[test]
fn a_file_that_was_cut_off_anywhere_is_refused() {
    for text in [SHEET.to_string(), write_truss(&flat_truss(4, 9)), demos().swap_remove(0).1] {
        let whole = text.trim_end().len();
        for end in 0..whole {
            let error = read_truss(&text.as_bytes()[..end]).expect_err("a part is no file");
            assert_eq!(error.problems.len(), 1, "cut at {end}");
        }
        assert!(read_truss(&text.as_bytes()[..whole]).is_ok(), "only the end of the last line is missing");
    }
}

#[test]
fn a_value_from_elsewhere_reads_as_the_file_does() {
    let text = include_str!("../demo/mill-footbridge.truss.json");
    let value: serde_json::Value = serde_json::from_str(text).expect("JSON");
    assert_eq!(chordwright::exchange::read_truss_value(&value), read_truss(text.as_bytes()));
    let wrong = serde_json::json!({ "chordwright": 1, "unit": "in", "step": 0.5 });
    let error = chordwright::exchange::read_truss_value(&wrong).expect_err("a fraction").to_string();
    assert!(error.contains("step") && error.contains("not exact"), "{error}");
}
