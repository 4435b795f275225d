//! The report as text, for people.

use super::{NOTICE, fingerprint};
use crate::checks::{Question, Report};
use crate::truss::Truss;

/// The report in words: the five answers with their findings, the schedules, and the notice.
pub fn report_text(file: &str, truss: &Truss, report: &Report) -> String {
    let title = if truss.title.is_empty() { "untitled truss" } else { &truss.title };
    let mut text = format!("{}: {}\n", on_one_line(file), on_one_line(title));
    text.push_str(&format!(
        "{} joints, {} members, {} figures; fingerprint {}\n",
        truss.joints.len(),
        truss.members.len(),
        truss.figures.len(),
        fingerprint(truss)
    ));
    for question in Question::ALL {
        text.push_str(&format!("\n{:<24}{}\n", question.text(), answer(report, question)));
        if question == Question::Close {
            text.push_str(&suspects(truss, report));
        }
        for finding in report.findings.iter().filter(|finding| finding.rule.question() == question) {
            text.push_str(&format!("  {:<8}{} ({})\n", finding.level.name(), finding.text, finding.rule.name()));
        }
    }
    text.push_str(&schedule(truss, report));
    text.push_str(&format!("\n{NOTICE}\n"));
    text
}

/// A text without what would move the cursor or colour the screen: control characters as they are escaped in sources.
pub(super) fn on_one_line(text: &str) -> String {
    text.chars().map(|c| if c.is_control() { c.escape_default().to_string() } else { c.to_string() }).collect()
}

fn answer(report: &Report, question: Question) -> String {
    let answers = &report.answers;
    let (state, summary) = match question {
        Question::Close => (answers.close.state.name(), &answers.close.summary),
        Question::True => (answers.lines.state.name(), &answers.lines.summary),
        Question::Clear => (answers.clear.state.name(), &answers.clear.summary),
        Question::Stands => (answers.stands.state.name(), &answers.stands.summary),
        Question::Cut => (answers.cut.state.as_str(), &answers.cut.summary),
    };
    if summary.is_empty() { state.to_string() } else { format!("{state} ({summary})") }
}

fn suspects(truss: &Truss, report: &Report) -> String {
    let line = |suspect: &crate::checks::Suspect| {
        let figure = truss.figure(suspect.figure);
        let printed = figure.kind.value_text().unwrap_or_else(|| figure.kind.name().to_string());
        let slip = suspect.slip.map(|slip| format!(", likely slip: {}", slip.name())).unwrap_or_default();
        format!("  suspect {} reads {printed}, should read {}{slip}\n", figure.mark, suspect.implied)
    };
    report.answers.close.suspects.iter().map(line).collect()
}

fn schedule(truss: &Truss, report: &Report) -> String {
    let rows = &report.answers.cut.members;
    if rows.is_empty() {
        return String::new();
    }
    let mut text =
        format!("\n  {:<10}{:<16}{:>16}  {:<20}{:>8}\n", "member", "from - to", "length", "bevel", "degrees");
    for row in rows {
        let member = truss.member(row.member);
        let ends = format!("{} - {}", truss.mark(member.from), truss.mark(member.to));
        let length = if row.exact { row.length.clone() } else { format!("~ {}", row.length) };
        text.push_str(&format!("  {:<10}{ends:<16}{length:>16}  {:<20}{:>8}\n", member.mark, row.bevel, row.degrees));
    }
    text.push_str("  (~ rounded to the printing step; the others are exact)\n");
    text
}
