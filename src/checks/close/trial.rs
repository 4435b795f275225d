//! One question: do the figures close without some of them?

use super::exclusion::judge::Case;
use super::exclusion::stress::{Lean, stress};
use super::exclusion::{Certificate, Source, chains};
use super::meaning::{Condition, Function, conditions};
use super::search::adjust::Network;
use super::search::model::{Model, to_float};
use super::search::place;
use super::search::rows::rows;
use super::search::worst::Best;
use super::sides::{Side, sides};
use super::verify;
use super::{Effort, words};
use crate::exact::{Point, Rational, order};
use crate::truss::{FigureId, Truss};
use num_traits::Signed;

/// A truss with everything about it that every trial needs.
pub(crate) struct Problem<'t> {
    /// The truss.
    pub truss: &'t Truss,
    /// The conditions of each figure.
    pub conditions: Vec<Vec<Condition>>,
    /// The sides the sketch tells.
    pub sides: Vec<Side>,
    /// The step on whose halvings layouts are put.
    pub step: Rational,
    /// The bounds of work.
    pub effort: Effort,
    base: Base,
    /// Of each figure whether it has a row that can be leant on.
    has_row: Vec<bool>,
}

/// The unknowns and rows without the exact ties of some figures.
pub(crate) struct Base {
    /// The unknowns.
    pub model: Model,
    /// Their rows; rows of disregarded figures may still be among them.
    pub network: Network,
}

/// What a trial found.
#[derive(Clone, Debug)]
pub(crate) struct Trial {
    /// A layout that agrees with every figure that was kept: judged exactly.
    pub layout: Option<Vec<Point>>,
    /// Places that agree with every figure kept, but not with the sketch's sides.
    pub mirrored: Option<Vec<Point>>,
    /// The best that floats found; `None` when they broke down or there was nothing to find.
    pub best: Option<Best>,
}

/// An overshoot up to this (of the drawing's extent) may still be nothing but rounding.
const DOUBT: f64 = 1e-9;

impl<'t> Problem<'t> {
    /// Prepares a truss.
    pub(crate) fn new(truss: &'t Truss, effort: &Effort) -> Problem<'t> {
        let conditions: Vec<Vec<Condition>> = truss.figures.iter().map(|figure| conditions(truss, figure)).collect();
        let base = Base::new(truss, &conditions, &[]);
        let mut has_row = vec![false; conditions.len()];
        let changing = base.network.rows.iter().filter(|row| !row.is_constant());
        changing.for_each(|row| has_row[row.figure] = true);
        let (sides, step, effort) = (sides(truss), lattice_step(truss), effort.clone());
        Problem { truss, sides, step, effort, base, conditions, has_row }
    }

    /// The unknowns and rows for a trial without these figures; built anew when their exact ties have to go.
    pub(crate) fn with_base<R>(&self, disregarded: &[FigureId], work: impl FnOnce(&Base) -> R) -> R {
        if disregarded.iter().any(|id| self.has_tie(*id)) {
            work(&Base::new(self.truss, &self.conditions, disregarded))
        } else {
            work(&self.base)
        }
    }

    /// True when a figure has a row that can be leant on; exact ties are substituted, and what they leave nothing to change
    /// in has none either.
    pub(crate) fn has_row(&self, id: FigureId) -> bool {
        self.has_row[id.index()]
    }

    /// The figures about a loose joint of which nothing can be leant on, so that only leaving them out tells.
    pub(crate) fn figures_without_rows(&self) -> Vec<FigureId> {
        let is_loose = |id: &FigureId| !super::meaning::is_all_set(self.truss, &self.truss.figure(*id).kind);
        (0..self.conditions.len()).map(FigureId::new).filter(|id| !self.has_row(*id)).filter(is_loose).collect()
    }

    fn has_tie(&self, id: FigureId) -> bool {
        let is_tie = |c: &Condition| matches!(c.function, Function::Along { .. }) && c.is_exact();
        self.conditions[id.index()].iter().any(is_tie)
    }

    /// The places that floats start from: the sketch, adjusted to the figures.
    pub(crate) fn adjusted(&self, disregarded: &[FigureId]) -> Vec<[f64; 2]> {
        self.with_base(disregarded, |base| {
            let keep = |row: usize| base.keeps(row, disregarded);
            let start = base.model.unknowns_from(&base.network.offsets, &base.model.float_sketch(self.truss));
            base.network.places(&base.network.adjust(&start, self.effort.adjustments, &keep, &|_| true))
        })
    }

    /// Looks for a layout without the disregarded figures, from these places.
    pub(crate) fn trial(&self, disregarded: &[FigureId], start: &[[f64; 2]]) -> Trial {
        self.with_base(disregarded, |base| self.trial_on(base, disregarded, start, &|_| true))
    }

    /// Looks for a layout from the sketch, without a step over a line that the sketch has a joint on one side of.
    ///
    /// Slower than [`Problem::trial`]: for where that found a mirror image.
    pub(crate) fn trial_on_sketched_sides(&self, disregarded: &[FigureId]) -> Trial {
        self.with_base(disregarded, |base| {
            let keeps_sides = |unknowns: &[f64]| {
                let places = base.network.places(unknowns);
                self.sides.iter().all(|side| side.holds_about(&places))
            };
            self.trial_on(base, disregarded, &base.model.float_sketch(self.truss), &keeps_sides)
        })
    }

    fn trial_on(
        &self,
        base: &Base,
        disregarded: &[FigureId],
        start: &[[f64; 2]],
        allowed: &dyn Fn(&[f64]) -> bool,
    ) -> Trial {
        let (model, network) = (&base.model, &base.network);
        let keep = |row: usize| base.keeps(row, disregarded);
        if model.unknowns == 0 {
            return self.judged(model.places(&[]).into_iter().collect(), disregarded, None);
        }
        let start = model.unknowns_from(&network.offsets, start);
        let start = network.adjust(&start, self.effort.adjustments, &keep, allowed);
        let Some(best) = network.least_worst(&start, self.effort.rounds, &keep, allowed) else {
            return Trial { layout: None, mirrored: None, best: None };
        };
        if best.overshoot > DOUBT {
            return Trial { layout: None, mirrored: None, best: Some(best) };
        }
        let mut trial = Trial { layout: None, mirrored: None, best: None };
        for places in self.candidates(base, &best, &keep) {
            trial = self.judged(places, disregarded, trial.mirrored);
            if trial.layout.is_some() {
                break;
            }
        }
        trial.best = Some(best);
        trial
    }

    fn candidates<'a>(
        &'a self,
        base: &'a Base,
        best: &'a Best,
        keep: &'a dyn Fn(usize) -> bool,
    ) -> impl Iterator<Item = Vec<Point>> + 'a {
        let has_exact = base.network.rows.iter().any(|row| row.exact);
        let fractions = move || {
            has_exact
                .then(|| place::as_fractions(&base.model, &base.network, &self.conditions, &best.unknowns, keep))
                .flatten()
        };
        let (model, network, floats) = (&base.model, &base.network, best.unknowns.as_slice());
        let circles = place::on_circles(model, network, &self.conditions, floats, &self.step, keep)
            .take(if has_exact { 5 } else { 0 });
        place::on_lattices(&base.model, &base.network, &best.unknowns, &self.step, keep)
            .take(4)
            .chain(std::iter::once_with(fractions).flatten())
            .chain(circles)
    }

    fn judged(&self, places: Vec<Point>, disregarded: &[FigureId], mirrored: Option<Vec<Point>>) -> Trial {
        if verify::is_layout(self.truss, &self.sides, &places, disregarded) {
            return Trial { layout: Some(places), mirrored: None, best: None };
        }
        let agrees = mirrored.is_none() && verify::is_layout(self.truss, &[], &places, disregarded);
        Trial { layout: None, mirrored: if agrees { Some(places) } else { mirrored }, best: None }
    }
}

impl Base {
    fn new(truss: &Truss, conditions: &[Vec<Condition>], disregarded: &[FigureId]) -> Base {
        let model = Model::new(truss, conditions, disregarded);
        // Rows of disregarded figures stay: their own ranges are asked for.
        let rows = rows(&model, conditions, &|_| true);
        let mut network = Network::new(model.float_offsets(), model.unknowns, rows);
        network.least_half = least_half(truss, &model);
        Base { model, network }
    }

    /// Exact places as float unknowns.
    pub(crate) fn floats_of(&self, places: &[Point]) -> Vec<f64> {
        let (origin, scale) = (&self.model.origin, &self.model.scale);
        let float = |p: &Point| [to_float(&((&p.x - &origin.x) / scale)), to_float(&((&p.y - &origin.y) / scale))];
        let places: Vec<[f64; 2]> = places.iter().map(float).collect();
        self.model.unknowns_from(&self.network.offsets, &places)
    }

    /// True when a row takes part in a trial.
    pub(crate) fn keeps(&self, row: usize, disregarded: &[FigureId]) -> bool {
        !disregarded.iter().any(|id| id.index() == self.network.rows[row].figure)
    }
}

/// An eighth of the sheet's half step, in floats: as sure as a figure without any is taken to be.
fn least_half(truss: &Truss, model: &Model) -> f64 {
    let step = if truss.step.value.is_positive() { truss.step.value.clone() } else { words::fine_step(truss) };
    let half = to_float(&(step / &model.scale)) / 16.0;
    if half.is_finite() { half.clamp(1e-9, 1e-2) } else { 1e-6 }
}

/// The sheet's step, else the finest step of a figure, else a fine one.
fn lattice_step(truss: &Truss) -> Rational {
    if truss.step.value.is_positive() {
        return truss.step.value.clone();
    }
    let lengths = truss.figures.iter().filter(|figure| !super::meaning::conditions(truss, figure).is_empty());
    let steps = lengths.map(|figure| truss.step_of(figure)).filter(Signed::is_positive);
    steps.min().unwrap_or_else(|| words::fine_step(truss))
}

/// A condition that the least worst overshoot leans on, with its share of the heaviest.
pub(crate) type Leaning = Vec<(Source, f64)>;

/// Figures that contradict exact ties and are tried for a proof.
const MOST_TIED: usize = 16;

/// A multiplier below this share of the heaviest counts as none.
const LEAST_SHARE: f64 = 1e-5;

impl Problem<'_> {
    /// What exclusions speak about when these figures are disregarded.
    pub(crate) fn case<'a>(&'a self, disregarded: &'a [FigureId]) -> Case<'a> {
        Case { truss: self.truss, conditions: &self.conditions, sides: &self.sides, disregarded }
    }

    /// The conditions that the least worst overshoot leans on, heaviest first.
    pub(crate) fn leaning(&self, disregarded: &[FigureId], best: &Best) -> Leaning {
        self.with_base(disregarded, |base| {
            let heaviest = best.multipliers.iter().fold(0.0f64, |a, m| a.max(m.abs()));
            let share = |(row, m): (usize, &f64)| {
                let row = &base.network.rows[row];
                let source = Source { figure: FigureId::new(row.figure), condition: row.condition };
                (source, m.abs() / heaviest)
            };
            let mut leaning: Leaning = best.multipliers.iter().enumerate().map(share).collect();
            leaning.retain(|(_, share)| *share > LEAST_SHARE);
            order::sort_by(&mut leaning, |a, b| b.1.total_cmp(&a.1).then(a.0.cmp(&b.0)));
            leaning
        })
    }

    /// The sketch mirrored sideways, upside down and both, for figures that may close only there.
    pub(crate) fn mirrored_sketches(&self) -> [Vec<[f64; 2]>; 3] {
        let sketch = self.with_base(&[], |base| base.model.float_sketch(self.truss));
        [[-1.0, 1.0], [1.0, -1.0], [-1.0, -1.0]].map(|[x, y]| sketch.iter().map(|p| [x * p[0], y * p[1]]).collect())
    }

    /// The places of the best that floats found, by joint.
    pub(crate) fn places_of(&self, disregarded: &[FigureId], best: &Best) -> Vec<[f64; 2]> {
        self.with_base(disregarded, |base| base.network.places(&best.unknowns))
    }

    /// A proof, accepted by the judge, that the figures without these cannot close; with the sketch's sides only when asked.
    pub(crate) fn exclusion(
        &self,
        disregarded: &[FigureId],
        best: Option<&Best>,
        with_sides: bool,
    ) -> Option<Certificate> {
        let case = self.case(disregarded);
        let case = if with_sides { case } else { Case { sides: &[], ..case } };
        let simple = chains::simple(&case);
        simple.or_else(|| {
            let Some(best) = best else { return self.tied_exclusion(&case, disregarded) };
            let sources: Vec<Source> = self.leaning(disregarded, best).into_iter().map(|(source, _)| source).collect();
            let places = self.places_of(disregarded, best);
            let lean =
                Lean { sources: &sources, places: &places, scale: &self.base.model.scale, splits: self.effort.splits };
            stress(&case, &lean)
        })
    }

    /// A proof where exact ties leave nothing unknown, so that nothing is leant on: some figure contradicts the ties.
    fn tied_exclusion(&self, case: &Case, disregarded: &[FigureId]) -> Option<Certificate> {
        self.with_base(disregarded, |base| {
            if base.model.unknowns > 0 {
                return None;
            }
            let exact = base.model.places(&[]);
            let places = base.network.places(&[]);
            let failing = verify::figures_that_fail(self.truss, &exact);
            failing.into_iter().filter(|id| !disregarded.contains(id)).take(MOST_TIED).find_map(|figure| {
                let sources: Vec<Source> =
                    (0..self.conditions[figure.index()].len()).map(|condition| Source { figure, condition }).collect();
                let lean = Lean { sources: &sources, places: &places, scale: &base.model.scale, splits: 0 };
                stress(case, &lean)
            })
        })
    }
}
