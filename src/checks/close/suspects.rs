//! Figures to blame: each left out in turn, to see whether all the others close.
//!
//! A suspect is in the support of every proof that the figures cannot close. So the candidates are the figures that the
//! least worst overshoot leans on, and each trial that fails narrows them to those that it leans on as well.

use super::implied::{Accused, accused};
use super::meaning::is_all_set;
use super::trial::{Problem, Trial};
use super::{Progress, Stage};
use crate::exact::order;
use crate::truss::FigureId;

/// What was found out about blame.
pub(crate) struct Blame {
    /// Single suspects, likeliest first.
    pub singles: Vec<Accused>,
    /// Pairs that together are to blame, when no single figure is; likeliest first.
    pub pairs: Vec<[Accused; 2]>,
    /// False when the bound of work was reached, or the search was stopped.
    pub complete: bool,
}

/// Pairs that are looked for before it is enough.
const ENOUGH_PAIRS: usize = 6;
/// Figures of a proof that are tried as the first, and as the second, of a pair.
const PAIR_WIDTH: usize = 24;

/// Leaves figures out one by one, then two by two.
pub(crate) fn blame(
    problem: &Problem,
    trial: &Trial,
    start: &[[f64; 2]],
    watch: &mut dyn FnMut(Progress) -> bool,
) -> Blame {
    let mut blame = Blame { singles: Vec::new(), pairs: Vec::new(), complete: true };
    // A figure that the set joints contradict is in every proof by itself, so no other can be to blame alone.
    let mut candidates = set_failures(problem);
    if candidates.is_empty() {
        candidates = leaning_figures(problem, &[], trial);
        let others = problem.figures_without_rows();
        candidates.extend(others.into_iter().filter(|id| !candidates.contains(id)).collect::<Vec<_>>());
    }
    candidates.truncate(problem.effort.trials);
    let all = candidates.clone();
    let mut failed: Vec<(FigureId, Trial)> = Vec::new();
    let mut done = 0;
    while let Some(id) = next(&mut candidates) {
        done += 1;
        if !watch(Progress { stage: Stage::Suspects, done, of: done + candidates.len() }) {
            blame.complete = false;
            break;
        }
        let without = trial_without(problem, &[id], start);
        match &without.layout {
            Some(_) => blame.singles.extend(accused(problem, id, &[], &without)),
            None => {
                let leaning = leaning_figures(problem, &[id], &without);
                // Where the others close but for a side of the sketch, nothing is leant on.
                if !leaning.is_empty() && without.mirrored.is_none() {
                    candidates.retain(|candidate| leaning.contains(candidate) || !problem.has_row(*candidate));
                }
                failed.push((id, without));
            }
        }
    }
    if blame.singles.is_empty() && blame.complete {
        from_the_sketch(problem, &failed, watch, &mut blame);
    }
    put_in_order(&mut blame.singles);
    if blame.singles.is_empty() && blame.complete {
        pairs(problem, &all, failed, start, watch, &mut blame);
    }
    blame
}

/// The figures among set joints that do not hold.
pub(crate) fn set_failures(problem: &Problem) -> Vec<FigureId> {
    let truss = problem.truss;
    let places = truss.points();
    let fails = |id: &FigureId| {
        is_all_set(truss, &truss.figure(*id).kind)
            && problem.conditions[id.index()].iter().any(|condition| condition.fails(&places))
    };
    (0..truss.figures.len()).map(FigureId::new).filter(fails).collect()
}

/// Tries those that failed once more, each from the sketch: the places of the whole, spoilt by the wrong figure, can lead
/// astray.
fn from_the_sketch(
    problem: &Problem,
    failed: &[(FigureId, Trial)],
    watch: &mut dyn FnMut(Progress) -> bool,
    blame: &mut Blame,
) {
    let tried = failed.len().min(PAIR_WIDTH);
    for (done, (id, _)) in failed.iter().take(tried).enumerate() {
        if !watch(Progress { stage: Stage::Suspects, done, of: tried }) {
            blame.complete = false;
            return;
        }
        let again = problem.trial(&[*id], &problem.adjusted(&[*id]));
        if again.layout.is_some() {
            blame.singles.extend(accused(problem, *id, &[], &again));
        }
    }
}

/// From the places of the whole first; where those agree but for a side of the sketch, from the sketch once more.
fn trial_without(problem: &Problem, disregarded: &[FigureId], start: &[[f64; 2]]) -> Trial {
    let trial = problem.trial(disregarded, start);
    if trial.mirrored.is_none() {
        return trial;
    }
    let again = problem.trial(disregarded, &problem.adjusted(disregarded));
    if again.layout.is_some() {
        return again;
    }
    let guarded = problem.trial_on_sketched_sides(disregarded);
    if guarded.layout.is_some() { guarded } else { trial }
}

fn next(candidates: &mut Vec<FigureId>) -> Option<FigureId> {
    (!candidates.is_empty()).then(|| candidates.remove(0))
}

/// Those explained by a slip first, then by how likely and how far outside they are. A slip that explains only a less
/// likely figure than one without is taken for chance, and not told.
fn put_in_order(singles: &mut [Accused]) {
    order::sort_by(singles, |a, b| {
        b.worth.total_cmp(&a.worth).then(b.outside.total_cmp(&a.outside)).then(a.suspect.figure.cmp(&b.suspect.figure))
    });
    let leading = singles.iter().take_while(|accused| accused.suspect.slip.is_some()).count();
    singles[leading..].iter_mut().for_each(|accused| accused.suspect.slip = None);
}

/// The figures that a trial leans on, heaviest first.
pub(crate) fn leaning_figures(problem: &Problem, disregarded: &[FigureId], trial: &Trial) -> Vec<FigureId> {
    let Some(best) = &trial.best else { return Vec::new() };
    let mut figures = Vec::new();
    for (source, _) in problem.leaning(disregarded, best) {
        if !figures.contains(&source.figure) {
            figures.push(source.figure);
        }
    }
    figures
}

/// One of a pair is in the support of the first proof, the other in that of the proof without it: for each figure that the
/// whole leans on, the figures that the rest still leans on.
fn pairs(
    problem: &Problem,
    all: &[FigureId],
    mut failed: Vec<(FigureId, Trial)>,
    start: &[[f64; 2]],
    watch: &mut dyn FnMut(Progress) -> bool,
    blame: &mut Blame,
) {
    let mut tried = Vec::new();
    let (contradicted, mut tied) = (set_failures(problem), problem.figures_without_rows());
    tied.truncate(PAIR_WIDTH / 2);
    for first in all.iter().take(PAIR_WIDTH) {
        if failed.iter().all(|(id, _)| id != first) {
            failed.push((*first, trial_without(problem, &[*first], start)));
        }
        let Some((_, without)) = failed.iter().find(|(id, _)| id == first) else { continue };
        let leaning = leaning_figures(problem, &[*first], without);
        let leaning = leaning.into_iter().take(PAIR_WIDTH);
        for second in contradicted.iter().copied().chain(leaning).chain(tied.iter().copied()) {
            if second == *first {
                continue;
            }
            let pair = [*first.min(&second), *first.max(&second)];
            if tried.contains(&pair) {
                continue;
            }
            tried.push(pair);
            let goes_on = watch(Progress { stage: Stage::Suspects, done: tried.len(), of: problem.effort.trials });
            if !goes_on || tried.len() > problem.effort.trials {
                blame.complete = false;
                return;
            }
            let without = trial_without(problem, &pair, start);
            if without.layout.is_some() {
                let one = |id: FigureId| accused(problem, id, &pair, &without);
                if let (Some(a), Some(b)) = (one(pair[0]), one(pair[1])) {
                    blame.pairs.push([a, b]);
                }
            }
            if blame.pairs.len() >= ENOUGH_PAIRS {
                blame.complete = false;
                return;
            }
        }
    }
    let worth = |pair: &[Accused; 2]| pair[0].worth + pair[1].worth;
    order::sort_by(&mut blame.pairs, |a, b| worth(b).total_cmp(&worth(a)));
}
