//! The report as one JSON document: the contract of `report --json` and of the JavaScript interface.

use super::fingerprint::fingerprint;
use crate::checks::{CloseAnswer, CutAnswer, Report, StandsAnswer};
use crate::exact::Point;
use crate::truss::{JointId, Truss};
use serde::Serialize;

/// The report of one truss. Exact values are texts: integers or fractions `p/q` in lowest terms, lengths in the file's unit.
#[derive(Clone, Debug, PartialEq, Eq, Serialize)]
pub struct ReportDocument {
    file: String,
    fingerprint: String,
    answers: Answers,
    findings: Vec<Finding>,
    members: Vec<MemberRow>,
    joints: Vec<JointRow>,
}

#[derive(Clone, Debug, PartialEq, Eq, Serialize)]
struct Answers {
    close: Close,
    #[serde(rename = "true")]
    lines: State,
    clear: State,
    stands: Stands,
}

#[derive(Clone, Debug, PartialEq, Eq, Serialize)]
struct State {
    state: &'static str,
}

#[derive(Clone, Debug, PartialEq, Eq, Serialize)]
struct Close {
    state: &'static str,
    proof: &'static str,
    layout: Vec<Place>,
    free_joints: Vec<String>,
    suspects: Vec<Suspect>,
}

#[derive(Clone, Debug, PartialEq, Eq, Serialize)]
struct Place {
    joint: String,
    x: String,
    y: String,
}

#[derive(Clone, Debug, PartialEq, Eq, Serialize)]
struct Suspect {
    figure: String,
    implied: String,
    implied_range: [String; 2],
    slip: Option<&'static str>,
    layout: Vec<Place>,
}

#[derive(Clone, Debug, PartialEq, Eq, Serialize)]
struct Stands {
    state: &'static str,
    rank: usize,
    unknowns: usize,
    spare_members: usize,
    motion: Vec<Place>,
}

#[derive(Clone, Debug, PartialEq, Eq, Serialize)]
struct Finding {
    rule: &'static str,
    level: &'static str,
    joints: Vec<String>,
    members: Vec<String>,
    figures: Vec<String>,
    text: String,
}

#[derive(Clone, Debug, PartialEq, Eq, Serialize)]
struct MemberRow {
    mark: String,
    from: String,
    to: String,
    run: String,
    rise: String,
    quadrance: String,
    length: String,
    bevel: String,
    degrees: String,
}

#[derive(Clone, Debug, PartialEq, Eq, Serialize)]
struct JointRow {
    mark: String,
    x: String,
    y: String,
    spreads: Vec<SpreadRow>,
}

#[derive(Clone, Debug, PartialEq, Eq, Serialize)]
struct SpreadRow {
    between: [String; 2],
    spread: String,
}

/// The document for a truss and the report on it; `file` is the name it goes by.
pub fn report_document(file: &str, truss: &Truss, report: &Report) -> ReportDocument {
    let answers = &report.answers;
    ReportDocument {
        file: file.to_string(),
        fingerprint: fingerprint(truss),
        answers: Answers {
            close: close(truss, &answers.close),
            lines: State { state: answers.lines.state.name() },
            clear: State { state: answers.clear.state.name() },
            stands: stands(truss, &answers.stands),
        },
        findings: report.findings.iter().map(|item| finding(truss, item)).collect(),
        members: members(truss, &answers.cut),
        joints: joints(truss, &answers.cut),
    }
}

/// The document on one line.
pub fn report_json(file: &str, truss: &Truss, report: &Report) -> String {
    serde_json::to_string(&report_document(file, truss, report)).unwrap_or_default()
}

fn marks(truss: &Truss, joints: &[JointId]) -> Vec<String> {
    joints.iter().map(|id| truss.mark(*id).to_string()).collect()
}

fn places(truss: &Truss, points: &[Point]) -> Vec<Place> {
    let place = |(joint, point): (&crate::truss::Joint, &Point)| Place {
        joint: joint.mark.clone(),
        x: point.x.to_string(),
        y: point.y.to_string(),
    };
    truss.joints.iter().zip(points).map(place).collect()
}

fn close(truss: &Truss, answer: &CloseAnswer) -> Close {
    Close {
        state: answer.state.name(),
        proof: answer.proof.name(),
        layout: answer.layout.as_ref().map(|layout| places(truss, layout)).unwrap_or_default(),
        free_joints: marks(truss, &answer.free_joints),
        suspects: answer.suspects.iter().map(|item| suspect(truss, item)).collect(),
    }
}

fn suspect(truss: &Truss, suspect: &crate::checks::Suspect) -> Suspect {
    let range = &suspect.implied_range;
    Suspect {
        figure: truss.figure(suspect.figure).mark.clone(),
        implied: suspect.implied.clone(),
        implied_range: [range.lo().to_string(), range.hi().to_string()],
        slip: suspect.slip.map(crate::checks::Slip::name),
        layout: places(truss, &suspect.layout),
    }
}

fn stands(truss: &Truss, answer: &StandsAnswer) -> Stands {
    let part = |motion: &crate::checks::Motion| Place {
        joint: truss.mark(motion.joint).to_string(),
        x: motion.velocity.x.to_string(),
        y: motion.velocity.y.to_string(),
    };
    Stands {
        state: answer.state.name(),
        rank: answer.rank,
        unknowns: answer.unknowns,
        spare_members: answer.spare_members,
        motion: answer.motion.iter().map(part).collect(),
    }
}

fn finding(truss: &Truss, finding: &crate::checks::Finding) -> Finding {
    Finding {
        rule: finding.rule.name(),
        level: finding.level.name(),
        joints: marks(truss, &finding.joints),
        members: finding.members.iter().map(|id| truss.member(*id).mark.clone()).collect(),
        figures: finding.figures.iter().map(|id| truss.figure(*id).mark.clone()).collect(),
        text: finding.text.clone(),
    }
}

fn members(truss: &Truss, cut: &CutAnswer) -> Vec<MemberRow> {
    let row = |row: &crate::checks::MemberRow| {
        let member = truss.member(row.member);
        MemberRow {
            mark: member.mark.clone(),
            from: truss.mark(member.from).to_string(),
            to: truss.mark(member.to).to_string(),
            run: row.run.to_string(),
            rise: row.rise.to_string(),
            quadrance: row.quadrance.to_string(),
            length: row.length.clone(),
            bevel: row.bevel.clone(),
            degrees: row.degrees.clone(),
        }
    };
    cut.members.iter().map(|each| row(each)).collect()
}

fn joints(truss: &Truss, cut: &CutAnswer) -> Vec<JointRow> {
    let row = |row: &crate::checks::JointRow| {
        let spread = |spread: &crate::checks::NeighbourSpread| SpreadRow {
            between: spread.between.map(|id| truss.member(id).mark.clone()),
            spread: spread.spread.to_string(),
        };
        JointRow {
            mark: truss.mark(row.joint).to_string(),
            x: row.point.x.to_string(),
            y: row.point.y.to_string(),
            spreads: row.spreads.iter().map(spread).collect(),
        }
    };
    cut.joints.iter().map(|each| row(each)).collect()
}
