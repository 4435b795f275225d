//! The whole answer for a truss with loose joints: layout, freedom, exclusion, blame.

use super::explain;
use super::freedom::{Freedom, freedom, weak};
use super::meaning::Axis;
use super::proposal::name_of;
use super::suspects::{Blame, blame, set_failures};
use super::trial::{Problem, Trial};
use super::{Effort, Progress, Stage, answer, misfits, readings, told_here, words};
use crate::checks::{CloseAnswer, CloseState, Finding, Level, Proof, Rule};
use crate::exact::{Point, Rational, nearest_multiple, order, whole};
use crate::truss::{Edit, FigureId, JointId, Truss};

/// Answers for a truss with loose joints.
pub(crate) fn settle(
    truss: &Truss,
    effort: &Effort,
    watch: &mut dyn FnMut(Progress) -> bool,
) -> (CloseAnswer, Vec<Finding>) {
    let loose = truss.joints.iter().filter(|joint| joint.loose).count();
    if loose > effort.joints {
        let text = format!("{loose} loose joints are more than the {} that are searched", effort.joints);
        return not_searched(truss, text);
    }
    if !watch(Progress { stage: Stage::Layout, done: 0, of: 1 }) {
        return not_searched(truss, "stopped before a layout was found".into());
    }
    let problem = Problem::new(truss, effort);
    let start = problem.adjusted(&[]);
    let trial = problem.trial(&[], &start);
    match (&trial.layout, &trial.mirrored) {
        (Some(layout), _) => closed(&problem, layout),
        (None, Some(places)) => match problem.trial_on_sketched_sides(&[]).layout {
            Some(layout) => closed(&problem, &layout),
            None => mirrored(&problem, places),
        },
        (None, None) => open(&problem, &trial, &start, watch),
    }
}

fn not_searched(truss: &Truss, text: String) -> (CloseAnswer, Vec<Finding>) {
    let mut found = answer(CloseState::NotSettled, Proof::None, text.clone());
    found.readings = readings::readings(truss, &truss.points());
    (found, vec![Finding::new(Rule::BestMisfit, Level::Caution, text)])
}

/// A layout was found: it closes, unless some joints can still move.
fn closed(problem: &Problem, layout: &[Point]) -> (CloseAnswer, Vec<Finding>) {
    let truss = problem.truss;
    let freedom = freedom(problem, layout);
    let count = truss.figures.len();
    let mut found = if freedom.is_none() {
        answer(CloseState::Closes, Proof::Layout, format!("{}, every one checked", figures_counted(count)))
    } else {
        let summary = format!("{} can still move", marks(truss, &freedom.joints));
        answer(CloseState::TooFewFigures, Proof::Layout, summary)
    };
    found.readings = readings::readings(truss, layout);
    let mut findings = wanting(truss, &freedom);
    if freedom.is_none() {
        findings.extend(weak(problem, layout).iter().map(|weak| weakly_fixed(truss, weak.joint, weak.axis, &weak.by)));
    }
    found.free_joints = freedom.joints;
    found.layout = Some(layout.to_vec());
    (found, findings)
}

pub(crate) fn figures_counted(count: usize) -> String {
    if count == 1 { "1 figure".into() } else { format!("{count} figures") }
}

fn marks(truss: &Truss, joints: &[JointId]) -> String {
    let shown: Vec<&str> = joints.iter().take(6).map(|id| truss.mark(*id)).collect();
    match joints.len() {
        n if n > shown.len() => format!("{} and {} more", shown.join(", "), n - shown.len()),
        _ => shown.join(", "),
    }
}

/// A finding for each figure that is still wanting.
fn wanting(truss: &Truss, freedom: &Freedom) -> Vec<Finding> {
    let held = |id: &JointId| !freedom.joints.contains(id);
    let anchor = |joint: JointId| {
        let linked = truss.members.iter().filter(|m| m.ends().contains(&joint)).flat_map(|m| m.ends());
        linked.filter(|id| *id != joint).find(held).or_else(|| (0..truss.joints.len()).map(JointId::new).find(held))
    };
    let mut findings = Vec::new();
    for (joint, axis) in &freedom.wanting {
        let (what, way) = if *axis == Axis::X { ("run", "sideways") } else { ("rise", "up and down") };
        let from =
            anchor(*joint).filter(|id| id != joint).map_or(String::new(), |id| format!(" from {}", truss.mark(id)));
        let mark = truss.mark(*joint);
        let text = format!("{mark} can still move {way}: a {what}{from} to {mark} would fix it");
        findings.push(Finding::new(Rule::NeedsAFigure, Level::Caution, text.clone()).joints([*joint]).mend(text, None));
    }
    for joint in &freedom.untied {
        let mark = truss.mark(*joint);
        let text = format!("no figure ties {mark} to the rest: a run and a rise to it are wanting");
        findings.push(Finding::new(Rule::NeedsAFigure, Level::Caution, text.clone()).joints([*joint]).mend(text, None));
    }
    findings
}

fn weakly_fixed(truss: &Truss, joint: JointId, axis: Axis, by: &Rational) -> Finding {
    let mark = truss.mark(joint);
    let (way, what) = if axis == Axis::Y {
        ("up and down", "a rise, or `level` or `in line` with its neighbours")
    } else {
        ("sideways", "a run, or `plumb` with a neighbour")
    };
    let size = words::length(truss, by, &truss.step.value.clone().max(words::fine_step(truss)));
    // Where small changes cancel to first order the estimate has no end.
    let stray = if *by < &truss.step.value * whole(1000) { format!(" by about {size}") } else { String::new() };
    let text = format!("{mark} is only weakly fixed: rounding alone lets it stray far {way}{stray}");
    Finding::new(Rule::WeaklyFixed, Level::Caution, text).joints([joint]).mend(format!("add {what} at {mark}"), None)
}

/// Every figure agrees, but only on the other side of a line than was sketched.
fn mirrored(problem: &Problem, places: &[Point]) -> (CloseAnswer, Vec<Finding>) {
    let truss = problem.truss;
    let wrong = problem.sides.iter().find(|side| {
        let [a, b, c] = side.joints.map(|id| &places[id.index()]);
        crate::exact::orientation(a, b, c) != side.orientation
    });
    let text = match wrong.map(|side| side.joints) {
        Some([a, b, c]) => format!(
            "the figures agree only with {} on the other side of {}-{} than it is sketched",
            truss.mark(c),
            truss.mark(a),
            truss.mark(b)
        ),
        None => "the figures agree only as a mirror image of the sketch".to_string(),
    };
    let moves = (0..places.len()).map(JointId::new).filter(|id| truss.joint(*id).loose);
    let edit = Edit::MoveJoints(moves.map(|id| (id, places[id.index()].clone())).collect());
    let finding = Finding::new(Rule::BestMisfit, Level::Caution, text.clone())
        .joints(wrong.map(|side| side.joints).into_iter().flatten())
        .mend("sketch the joints where the figures put them", Some(edit));
    let mut found = answer(CloseState::NotSettled, Proof::Search, text);
    found.readings = readings::readings(truss, places);
    (found, vec![finding])
}

/// No layout was found: exclusion, blame, or the best that there is.
fn open(
    problem: &Problem,
    trial: &Trial,
    start: &[[f64; 2]],
    watch: &mut dyn FnMut(Progress) -> bool,
) -> (CloseAnswer, Vec<Finding>) {
    let truss = problem.truss;
    let goes_on = watch(Progress { stage: Stage::Exclusion, done: 0, of: 1 });
    let mut certificate = if goes_on { problem.exclusion(&[], trial.best.as_ref(), false) } else { None };
    if goes_on && certificate.is_none() {
        // Perhaps only the sketch stands in the way.
        for sketch in problem.mirrored_sketches() {
            match problem.trial(&[], &sketch) {
                Trial { layout: Some(layout), .. } => return closed(problem, &layout),
                Trial { mirrored: Some(places), .. } => return mirrored(problem, &places),
                _ => {}
            }
        }
        certificate = problem.exclusion(&[], trial.best.as_ref(), true);
    }
    let mut findings = set_misfits(problem);
    let blame = match goes_on {
        true => blame(problem, trial, start, watch),
        false => Blame { singles: Vec::new(), pairs: Vec::new(), complete: false },
    };
    let mut found = match &certificate {
        Some(certificate) => {
            let finding = explain::excluded(&problem.case(&[]), certificate, &blame);
            let found = answer(CloseState::DoesNotClose, Proof::Exclusion, summary(truss, &blame, true, &finding.text));
            findings.push(finding);
            found
        }
        None => {
            let finding = explain::best_misfit(truss, &worst(problem, trial), &blame);
            let found = answer(CloseState::NotSettled, Proof::Search, summary(truss, &blame, false, &finding.text));
            findings.push(finding);
            found
        }
    };
    let proved = blame.singles.first().or_else(|| blame.pairs.first().map(|pair| &pair[0]));
    let places = proved.map_or_else(|| nearest_places(problem, start), |accused| accused.suspect.layout.clone());
    found.readings = readings::readings(truss, &places);
    found.nearest = proved.is_none().then_some(places);
    found.pair = blame.pairs.into_iter().next().into_iter().flatten().map(|accused| accused.suspect).collect();
    found.suspects = blame.singles.into_iter().map(|accused| accused.suspect).collect();
    (found, findings)
}

fn summary(truss: &Truss, blame: &Blame, is_proved: bool, otherwise: &str) -> String {
    match blame.singles.as_slice() {
        [only] if blame.complete && is_proved => {
            format!("{} is wrong: it should read {}", name_of(truss, only.suspect.figure), only.suspect.implied)
        }
        [first, others @ ..] => {
            let first = &first.suspect;
            let count = others.len() + 1;
            format!(
                "{count} {}, first {}: it should read {}",
                if count == 1 { "suspect" } else { "suspects" },
                name_of(truss, first.figure),
                first.implied
            )
        }
        [] => otherwise.to_string(),
    }
}

/// Figures among set joints that do not hold, each as its own finding.
fn set_misfits(problem: &Problem) -> Vec<Finding> {
    let truss = problem.truss;
    let places = truss.points();
    let failing = set_failures(problem).into_iter().filter(|id| told_here(truss, *id));
    failing.map(|id| misfits::misfit(truss, id, &places)).collect()
}

/// The figures that are off at the best places, worst first, and by how much in the sheet's unit.
fn worst(problem: &Problem, trial: &Trial) -> Vec<(FigureId, Rational)> {
    let Some(best) = &trial.best else { return Vec::new() };
    problem.with_base(&[], |base| {
        let mut found: Vec<(FigureId, f64)> = Vec::new();
        for (row, line) in base.network.rows.iter().zip(base.network.linearised(&best.unknowns)) {
            let over = line.overshoot();
            let id = FigureId::new(row.figure);
            if over > 1e-9 && found.iter().all(|(other, _)| *other != id) {
                found.push((id, over));
            }
        }
        order::sort_by(&mut found, |a, b| b.1.total_cmp(&a.1).then(a.0.cmp(&b.0)));
        let in_unit = |over: f64| Rational::from_float(over).unwrap_or_default() * &base.model.scale;
        found.into_iter().map(|(id, over)| (id, in_unit(over))).collect()
    })
}

/// The adjusted places, to a sixteenth of the step; the sketch when they cannot be had. They have the least sum of misfits,
/// so that few figures are off.
fn nearest_places(problem: &Problem, adjusted: &[[f64; 2]]) -> Vec<Point> {
    let rounded = problem.with_base(&[], |base| {
        let lattice = &problem.step / whole(16);
        let round = |v: &Rational| Some(&lattice * Rational::from_integer(nearest_multiple(v, &lattice)?));
        let unknowns = base.model.unknowns_from(&base.network.offsets, adjusted);
        let unknowns: Option<Vec<Rational>> = base.model.exactly(&unknowns)?.iter().map(round).collect();
        Some(base.model.places(&unknowns?))
    });
    rounded.unwrap_or_else(|| problem.truss.points())
}
