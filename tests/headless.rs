//! `chordwright report`: text and JSON, exit statuses, and what every reader of the report may rely on.

#![cfg(not(target_arch = "wasm32"))]

mod common;

use chordwright::checks::{Question, Rule};
use chordwright::exact::{Rational, parse_fraction};
use chordwright::exchange::{NOTICE, Outcome, REPORT_HELP, run_report, write_truss};
use chordwright::truss::Truss;
use common::flat_truss;
use serde::{Deserialize, Serialize};
use std::collections::BTreeSet;
use std::io::Write;
use std::path::PathBuf;
use std::process::{Command, Stdio};

/// The documents of the report as the contract has them: the same keys, in the same order, and no others.
mod contract {
    use super::{Deserialize, Serialize};

    macro_rules! documents {
        ($($name:ident { $($(#[$key:meta])? $field:ident: $type:ty,)* })*) => {
            $(
                #[derive(Serialize, Deserialize)]
                #[serde(deny_unknown_fields)]
                pub(super) struct $name { $($(#[$key])? pub(super) $field: $type,)* }
            )*
        };
    }

    documents! {
        Report { file: String, fingerprint: String, answers: Answers, findings: Vec<Finding>, members: Vec<Member>, joints: Vec<Joint>, }
        Answers { close: Close, #[serde(rename = "true")] lines: State, clear: State, stands: Stands, }
        State { state: String, }
        Close { state: String, proof: String, layout: Vec<Place>, free_joints: Vec<String>, suspects: Vec<Suspect>, }
        Place { joint: String, x: String, y: String, }
        Suspect { figure: String, implied: String, implied_range: [String; 2], slip: Option<String>, layout: Vec<Place>, }
        Stands { state: String, rank: usize, unknowns: usize, spare_members: usize, motion: Vec<Place>, }
        Finding { rule: String, level: String, joints: Vec<String>, members: Vec<String>, figures: Vec<String>, text: String, }
        Member { mark: String, from: String, to: String, run: String, rise: String, quadrance: String, length: String, bevel: String, degrees: String, }
        Joint { mark: String, x: String, y: String, spreads: Vec<Spread>, }
        Spread { between: [String; 2], spread: String, }
    }
}

/// The rules of the contract, by question.
const RULES: [(Question, &[&str]); 5] = [
    (Question::Close, &["figure misfit", "excluded", "best misfit", "string short", "weakly fixed", "needs a figure"]),
    (
        Question::True,
        &[
            "not straight",
            "not square",
            "not parallel",
            "not equal",
            "nearly straight",
            "nearly square",
            "nearly parallel",
            "nearly level",
            "nearly plumb",
            "nearly equal",
            "nearly alike",
        ],
    ),
    (
        Question::Clear,
        &[
            "same place",
            "no length",
            "doubled",
            "overlap",
            "crossing",
            "joint on member",
            "nearly meeting",
            "tight spread",
            "loose end",
            "apart",
            "unused joint",
        ],
    ),
    (Question::Stands, &["supports", "mechanism", "critical form", "spare member"]),
    (Question::Cut, &["too long", "rounding", "tight end"]),
];

const DEMOS: [&str; 4] = [
    "demo/barn-roof-slips.truss.json",
    "demo/boathouse-first-issue.truss.json",
    "demo/boathouse-roof.truss.json",
    "demo/mill-footbridge.truss.json",
];

fn project(file: &str) -> PathBuf {
    PathBuf::from(env!("CARGO_MANIFEST_DIR")).join(file)
}

/// The report as a function, on files of the project, on some that are made up, and on none.
fn run(arguments: &[&str]) -> Outcome {
    let arguments: Vec<String> = arguments.iter().map(|argument| (*argument).to_string()).collect();
    run_report(&arguments, |file| match file {
        "-" => Ok(write_truss(&flat_truss(4, 6)).into_bytes()),
        "empty" => Ok(write_truss(&Truss::default()).into_bytes()),
        "damaged" => Ok(b"{\"chordwright\": 1,".to_vec()),
        "gone" => Err("no such file".into()),
        "title" => Ok(write_truss(&Truss { title: "a\u{1b}[2J\nb: clear".into(), ..Truss::default() }).into_bytes()),
        file => std::fs::read(project(file)).map_err(|error| error.to_string()),
    })
}

fn documents(outcome: &Outcome) -> Vec<contract::Report> {
    let read = |line: &str| {
        let document: contract::Report = serde_json::from_str(line).unwrap_or_else(|error| panic!("{error}: {line}"));
        assert_eq!(serde_json::to_string(&document).expect("writes"), line, "the keys of the contract in their order");
        document
    };
    outcome.out.lines().map(read).collect()
}

fn exact(text: &str) -> Rational {
    let value = parse_fraction(text).unwrap_or_else(|| panic!("`{text}` is no fraction"));
    assert_eq!(value.to_string(), text, "in lowest terms");
    value
}

#[test]
fn exit_statuses() {
    for (arguments, status) in [
        (&["demo/boathouse-roof.truss.json"][..], 0),
        (&["demo/mill-footbridge.truss.json"], 0),
        (&["demo/barn-roof-slips.truss.json"], 1),
        (&["demo/boathouse-first-issue.truss.json"], 1),
        (&["damaged"], 2),
        (&["gone"], 2),
        (&["demo/boathouse-roof.truss.json", "demo/barn-roof-slips.truss.json"], 1),
        (&["demo/barn-roof-slips.truss.json", "demo/boathouse-roof.truss.json"], 1),
        (&["demo/barn-roof-slips.truss.json", "damaged"], 2),
        (&["damaged", "demo/barn-roof-slips.truss.json"], 2),
        (&["-"], 0),
        (&[], 2),
        (&["--json"], 2),
        (&["--jsonn", "empty"], 2),
        (&["-j", "empty"], 2),
        (&["--help"], 0),
        (&["empty", "-h"], 0),
    ] {
        assert_eq!(run(arguments).status, status, "{arguments:?}");
        let with_json: Vec<&str> = arguments.iter().copied().chain(["--json"]).collect();
        assert_eq!(run(&with_json).status, status, "{with_json:?}");
    }
}

#[test]
fn a_file_that_cannot_be_read_does_not_keep_the_others_from_being_reported() {
    let outcome =
        run(&["--json", "demo/boathouse-roof.truss.json", "damaged", "gone", "demo/mill-footbridge.truss.json"]);
    let files: Vec<String> = documents(&outcome).into_iter().map(|document| document.file).collect();
    assert_eq!(files, ["demo/boathouse-roof.truss.json", "demo/mill-footbridge.truss.json"]);
    assert_eq!(outcome.err, "damaged: line 1, column 18: the text ends too early\ngone: no such file\n");
    let text = run(&["damaged", "empty"]);
    assert!(text.out.contains("empty: untitled truss\n"), "{}", text.out);
}

#[test]
fn what_is_asked_for_wrongly_is_told_and_nothing_is_reported() {
    let outcome = run(&["empty", "--frob"]);
    assert_eq!((outcome.out.as_str(), outcome.err.as_str()), ("", "chordwright report: there is no option `--frob`\n"));
    let outcome = run(&[]);
    assert_eq!(outcome.out, "");
    assert!(outcome.err.starts_with("chordwright report: expected a file\n"), "{}", outcome.err);
    assert_eq!(run(&["--help"]).out, REPORT_HELP);
    assert!(REPORT_HELP.contains(NOTICE));
}

#[test]
fn the_text_answers_the_five_questions_and_carries_the_notice() {
    for demo in DEMOS {
        let text = run(&[demo]).out;
        let mut from = 0;
        for question in Question::ALL {
            let at = text[from..].find(question.text()).unwrap_or_else(|| panic!("{demo}: {}", question.text()));
            from += at;
        }
        assert!(text.ends_with(&format!("\n{NOTICE}\n")), "{demo}");
    }
    let both = run(&[DEMOS[2], DEMOS[3]]);
    assert_eq!(both.out, format!("{}\n{}", run(&[DEMOS[2]]).out, run(&[DEMOS[3]]).out));
}

#[test]
fn a_title_cannot_write_on_the_screen() {
    let text = run(&["title"]).out;
    assert!(text.starts_with("title: a\\u{1b}[2J\\nb: clear\n"), "{text}");
    assert_eq!(documents(&run(&["title", "--json"])).len(), 1);
    let error = run(&["x\u{7}\ny"]).err;
    assert!(error.starts_with("x\\u{7}\\ny: ") && error.matches('\n').count() == 1, "{error}");
}

#[test]
fn the_document_has_the_keys_and_states_of_the_contract() {
    for file in DEMOS.into_iter().chain(["-", "empty"]) {
        let mut found = documents(&run(&[file, "--json"]));
        let document = found.pop().expect("a document");
        assert!(found.is_empty(), "{file}: one document, one line");
        assert_eq!(document.file, file);
        assert!(
            document.fingerprint.len() == 16 && document.fingerprint.bytes().all(|b| b.is_ascii_hexdigit()),
            "{file}"
        );
        let answers = &document.answers;
        for (state, states) in [
            (&answers.close.state, &["closes", "does not close", "not settled", "too few figures", "no figures"][..]),
            (&answers.close.proof, &["layout", "exclusion", "search", "none"]),
            (&answers.lines.state, &["true", "almost", "not true"]),
            (&answers.clear.state, &["clear", "not clear"]),
            (&answers.stands.state, &["rigid", "mechanism", "critical form", "no supports"]),
        ] {
            assert!(states.contains(&state.as_str()), "{file}: `{state}`");
        }
        check_findings(file, &document);
        check_exact_values(file, &document);
    }
}

fn check_findings(file: &str, document: &contract::Report) {
    let joints: BTreeSet<&String> = document.joints.iter().map(|joint| &joint.mark).collect();
    let members: BTreeSet<&String> = document.members.iter().map(|member| &member.mark).collect();
    for finding in &document.findings {
        let known = RULES.iter().any(|(_, rules)| rules.contains(&finding.rule.as_str()));
        assert!(known, "{file}: the rule `{}` is not in the contract", finding.rule);
        assert!(["fault", "caution", "note"].contains(&finding.level.as_str()), "{file}: `{}`", finding.level);
        assert!(!finding.text.is_empty() && !finding.text.contains('\n'), "{file}: {}", finding.rule);
        assert!(finding.joints.iter().all(|mark| joints.contains(mark)), "{file}: {:?}", finding.joints);
        assert!(finding.members.iter().all(|mark| members.contains(mark)), "{file}: {:?}", finding.members);
        if ["crossing", "overlap"].contains(&finding.rule.as_str()) {
            assert_eq!(finding.members.len(), 2, "{file}: exactly its two members");
        }
    }
}

fn check_exact_values(file: &str, document: &contract::Report) {
    let close = &document.answers.close;
    assert_eq!(!close.layout.is_empty(), close.state == "closes", "{file}: a layout exactly when it closes");
    let layouts =
        close.suspects.iter().map(|suspect| &suspect.layout).chain([&close.layout, &document.answers.stands.motion]);
    for place in layouts.flatten() {
        exact(&place.x);
        exact(&place.y);
    }
    for suspect in &close.suspects {
        let [low, high] = suspect.implied_range.clone().map(|end| exact(&end));
        assert!(low <= high, "{file}: {}", suspect.figure);
        assert_eq!(suspect.layout.len(), document.joints.len(), "{file}: a place for every joint");
    }
    let place = |mark: &str| {
        let joint = document.joints.iter().find(|joint| joint.mark == mark).expect("a joint of the truss");
        (exact(&joint.x), exact(&joint.y))
    };
    for member in &document.members {
        let ((ax, ay), (bx, by)) = (place(&member.from), place(&member.to));
        let (run, rise) = (exact(&member.run), exact(&member.rise));
        assert_eq!((&bx - &ax, &by - &ay), (run.clone(), rise.clone()), "{file}: {}", member.mark);
        assert_eq!(&run * &run + &rise * &rise, exact(&member.quadrance), "{file}: {}", member.mark);
        assert!(!member.length.is_empty() && !member.bevel.is_empty() && !member.degrees.is_empty(), "{file}");
    }
    for spread in document.joints.iter().flat_map(|joint| &joint.spreads) {
        let value = exact(&spread.spread);
        assert!(value >= exact("0") && value <= exact("1"), "{file}: {}", spread.spread);
    }
}

#[test]
fn the_rules_are_those_of_the_contract() {
    let named = |question: Question| -> BTreeSet<&str> {
        Rule::ALL.iter().filter(|rule| rule.question() == question).map(|rule| rule.name()).collect()
    };
    for (question, rules) in RULES {
        assert_eq!(named(question), rules.iter().copied().collect(), "{}", question.text());
    }
}

#[test]
fn twice_the_same_bytes() {
    for file in DEMOS {
        for arguments in [&[file][..], &[file, "--json"]] {
            assert_eq!(run(arguments), run(arguments), "{arguments:?}");
        }
    }
}

/// Rule, level, members and figures of each finding that is a fault or a caution, sorted.
fn told(file: &str, level: &str) -> Vec<String> {
    let document = documents(&run(&[file, "--json"])).pop().expect("a document");
    let findings = document.findings.into_iter().filter(|finding| finding.level == level);
    let mut told: Vec<String> =
        findings.map(|finding| [vec![finding.rule], finding.members, finding.figures].concat().join(" ")).collect();
    told.sort();
    told
}

#[test]
fn every_slip_of_the_barn_is_named() {
    let barn = DEMOS[0];
    let faults = told(barn, "fault");
    let (mechanism, others): (Vec<_>, Vec<_>) = faults.iter().partition(|fault| fault.starts_with("mechanism"));
    assert_eq!(mechanism.len(), 1, "a web is missing: {faults:?}");
    assert_eq!(others, ["crossing W1 W5", "figure misfit f24", "not square f26"]);
    let cautions = told(barn, "caution");
    for slip in ["nearly straight T1 T2 T3", "string short"] {
        assert!(cautions.iter().any(|caution| caution.starts_with(slip)), "{slip}: {cautions:?}");
    }
}

#[test]
fn the_first_issue_of_the_boathouse_has_one_wrong_figure_and_its_slip_is_told() {
    let document = documents(&run(&[DEMOS[1], "--json"])).pop().expect("a document");
    assert_eq!(document.answers.close.state, "does not close");
    let suspects: Vec<_> = document
        .answers
        .close
        .suspects
        .iter()
        .map(|s| (s.figure.as_str(), s.implied.as_str(), s.slip.as_deref()))
        .collect();
    assert_eq!(suspects, [("f34", "7'-0 7/8\"", Some("one foot"))]);
    assert_eq!(told(DEMOS[1], "fault").len(), 1);
}

#[test]
fn the_other_demonstrations_have_no_fault() {
    for file in &DEMOS[2..] {
        assert_eq!(told(file, "fault"), Vec::<String>::new(), "{file}");
        let document = documents(&run(&[file, "--json"])).pop().expect("a document");
        let answers = &document.answers;
        let states = [&answers.close.state, &answers.lines.state, &answers.clear.state, &answers.stands.state];
        assert_eq!(states, ["closes", "true", "clear", "rigid"], "{file}");
    }
}

/// The real program.
fn program(arguments: &[&str], input: &[u8]) -> (Option<i32>, String, String) {
    let mut child = Command::new(env!("CARGO_BIN_EXE_chordwright"))
        .arg("report")
        .args(arguments)
        .current_dir(env!("CARGO_MANIFEST_DIR"))
        .stdin(Stdio::piped())
        .stdout(Stdio::piped())
        .stderr(Stdio::piped())
        .spawn()
        .expect("the program starts");
    // A program that does not read its input has closed it.
    drop(child.stdin.take().expect("an input").write_all(input));
    let output = child.wait_with_output().expect("the program ends");
    let text = |bytes: Vec<u8>| String::from_utf8(bytes).expect("UTF-8");
    (output.status.code(), text(output.stdout), text(output.stderr))
}

#[test]
fn the_program_says_what_the_function_says() {
    for arguments in
        [&[DEMOS[2]][..], &[DEMOS[0], "--json"], &["--json", DEMOS[3], DEMOS[2]], &["--frob"], &[], &["--help"]]
    {
        let outcome = run(arguments);
        assert_eq!(program(arguments, b""), (Some(outcome.status.into()), outcome.out, outcome.err), "{arguments:?}");
    }
}

#[test]
fn the_program_reads_standard_input() {
    let input = write_truss(&flat_truss(4, 6)).into_bytes();
    for arguments in [&["-"][..], &["-", "--json"]] {
        let outcome = run(arguments);
        assert_eq!(program(arguments, &input), (Some(0), outcome.out, outcome.err), "{arguments:?}");
    }
    let (status, out, err) = program(&["-"], b"\xff");
    assert_eq!((status, out.as_str(), err.as_str()), (Some(2), "", "-: byte 1: not UTF-8 text\n"));
    let (status, out, err) = program(&["-"], b"");
    assert_eq!((status, out.as_str(), err.as_str()), (Some(2), "", "-: line 1, column 0: the text ends too early\n"));
}

#[test]
fn the_program_tells_a_file_that_is_not_there_or_is_too_large() {
    let directory = PathBuf::from(env!("CARGO_TARGET_TMPDIR"));
    let large = directory.join("large.truss.json");
    std::fs::write(&large, vec![b' '; (16 << 20) + 1]).expect("written");
    let large = large.display().to_string();
    let gone = directory.join("gone.truss.json").display().to_string();
    let (status, out, err) = program(&[&gone, &large, &directory.display().to_string(), DEMOS[2]], b"");
    assert_eq!(status, Some(2));
    assert!(out.starts_with("demo/boathouse-roof.truss.json: Boathouse roof"), "{out}");
    let told: Vec<&str> = err.lines().collect();
    assert_eq!(told.len(), 3, "{err}");
    assert!(told[0].starts_with(&format!("{gone}: ")), "{err}");
    assert_eq!(told[1], format!("{large}: the file has 16777217 bytes; the limit is 16 MiB of text"));
    std::fs::remove_file(large).expect("removed");
}

#[test]
fn limits_are_given_with_the_command_and_refused_with_what_was_expected() {
    let run = |arguments: &[&str]| {
        let arguments: Vec<String> = arguments.iter().map(ToString::to_string).collect();
        let file = include_bytes!("../demo/boathouse-roof.truss.json").to_vec();
        run_report(&arguments, |_| Ok(file.clone()))
    };
    let tight = |outcome: &Outcome| outcome.out.matches("leave").count();
    let (usual, strict) = (run(&["roof"]), run(&["roof", "--tight", "1/2"]));
    assert_eq!((usual.status, strict.err.as_str()), (0, ""));
    assert!(tight(&strict) > tight(&usual), "{}", strict.out);
    assert!(run(&["--piece", "7'-6\"", "roof"]).out.contains("more than 7'-6\""));
    for (arguments, error) in [
        (vec!["roof", "--near"], "--near expects a value"),
        (vec!["roof", "--near", "many"], "--near: `many` is not a number of steps; expected 1 to 1000"),
        (vec!["roof", "--tight", "2"], "--tight: `2` is not a spread; expected 0 to 1 (1/4 is 30 degrees)"),
    ] {
        let outcome = run(&arguments);
        assert_eq!((outcome.status, outcome.err), (2, format!("chordwright report: {error}\n")));
    }
}
