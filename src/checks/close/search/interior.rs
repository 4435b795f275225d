//! Linear programmes over sparse rows, by a primal-dual interior point method.
//!
//! ```text
//! minimise  c·d + w t   over the changes d and the overshoot t
//! so that   lo - e t <= g·d <= hi + e t   for each row (e = 1 elastic, 0 firm),   |d| <= reach
//! ```
//!
//! Mehrotra's predictor and corrector (1992) on the normal equations, with the sparse factor of [`super::sparse`]; `t` is
//! one dense border. It gives the multipliers of both sides of each row, which make exclusions, and a point well inside,
//! which rounds well.

use super::sparse::{Factor, Pattern};

/// One two-sided row.
#[derive(Clone, Debug)]
pub(crate) struct Strip {
    /// In the order of the pattern's row.
    pub gradient: Vec<f64>,
    /// The least of `gradient · d`.
    pub lo: f64,
    /// The greatest.
    pub hi: f64,
    /// How much the overshoot loosens it.
    pub elastic: f64,
}

/// A programme over the rows of a pattern.
#[derive(Clone, Debug)]
pub(crate) struct Programme<'p> {
    /// The pattern of the rows; the strips are in its order.
    pub pattern: &'p Pattern,
    /// The unknowns of each row.
    pub touched: &'p [Vec<usize>],
    /// The rows; `None` for one that is left out.
    pub strips: Vec<Option<Strip>>,
    /// The objective's slope by each change.
    pub slope: Vec<f64>,
    /// The objective's weight of the overshoot; 0 keeps the overshoot at nothing.
    pub overshoot_weight: f64,
    /// No change is greater than this.
    pub reach: f64,
}

/// What a programme found.
#[derive(Clone, Debug)]
pub(crate) struct Optimum {
    /// The changes.
    pub changes: Vec<f64>,
    /// The overshoot.
    pub overshoot: f64,
    /// For each row the multiplier: positive at its upper side, negative at its lower.
    pub multipliers: Vec<f64>,
}

const MOST_ITERATIONS: usize = 60;
/// Share of the way to the border that is gone in one step.
const STEP: f64 = 0.995;

/// Slack and multiplier of a side.
#[derive(Clone, Copy, Debug)]
struct Side {
    slack: f64,
    multiplier: f64,
}

struct State {
    d: Vec<f64>,
    t: f64,
    /// Upper and lower side of each row, then of each reach.
    sides: Vec<[Side; 2]>,
}

struct Step {
    d: Vec<f64>,
    t: f64,
    sides: Vec<[Side; 2]>,
}

impl Programme<'_> {
    /// Solves it; `None` when the numbers break down.
    pub(crate) fn solve(&self) -> Option<Optimum> {
        let mut state = self.start();
        for _ in 0..MOST_ITERATIONS {
            let gap = state.gap();
            let residual = self.residuals(&state);
            if gap < 1e-13 && residual.worst() < 1e-11 {
                break;
            }
            let system = System::new(self, &state)?;
            let affine = system.step(self, &state, &residual, 0.0, None);
            let (ap, ad) = state.lengths(&affine);
            let after = state.gap_after(&affine, ap, ad);
            let centre = (after / gap).clamp(0.0, 1.0).powi(3);
            let step = system.step(self, &state, &residual, centre * gap, Some(&affine));
            let (p, d) = state.lengths(&step);
            if !(p.is_finite() && d.is_finite()) || p.max(d) < 1e-10 {
                break;
            }
            state.advance(&step, p, d);
        }
        let finite = state.t.is_finite() && state.d.iter().all(|d| d.is_finite());
        finite.then(|| Optimum {
            multipliers: state.sides[..self.strips.len()].iter().map(|[u, l]| u.multiplier - l.multiplier).collect(),
            changes: state.d,
            overshoot: state.t,
        })
    }

    fn has_overshoot(&self) -> bool {
        self.overshoot_weight > 0.0
    }

    /// No change, and slacks that are far enough from nothing.
    fn start(&self) -> State {
        let worst = self.strips.iter().flatten().map(|s| s.lo.max(-s.hi)).fold(0.0, f64::max);
        let t = if self.has_overshoot() { worst + self.reach * 0.1 } else { 0.0 };
        let width = self.reach * 0.1;
        let side = |slack: f64| Side { slack: slack.max(width), multiplier: 1.0 };
        let mut sides: Vec<[Side; 2]> = self
            .strips
            .iter()
            .map(|strip| match strip {
                Some(s) => [side(s.hi + s.elastic * t), side(s.elastic * t - s.lo)],
                None => [Side { slack: 1.0, multiplier: 0.0 }; 2],
            })
            .collect();
        sides.extend(vec![[side(self.reach); 2]; self.slope.len()]);
        State { d: vec![0.0; self.slope.len()], t, sides }
    }

    fn product(&self, row: usize, gradient: &[f64], d: &[f64]) -> f64 {
        self.touched[row].iter().zip(gradient).map(|(&unknown, g)| g * d[unknown]).sum()
    }

    fn residuals(&self, state: &State) -> Residuals {
        let mut dual: Vec<f64> = self.slope.clone();
        let mut dual_t = self.overshoot_weight;
        let mut primal = Vec::with_capacity(state.sides.len());
        for (row, strip) in self.strips.iter().enumerate() {
            let Some(s) = strip else {
                primal.push([0.0; 2]);
                continue;
            };
            let [upper, lower] = state.sides[row];
            let value = self.product(row, &s.gradient, &state.d);
            let room = s.elastic * state.t;
            primal.push([value - room + upper.slack - s.hi, -value - room + lower.slack + s.lo]);
            let pull = upper.multiplier - lower.multiplier;
            self.touched[row].iter().zip(&s.gradient).for_each(|(&unknown, g)| dual[unknown] += g * pull);
            dual_t -= s.elastic * (upper.multiplier + lower.multiplier);
        }
        for (unknown, [upper, lower]) in state.sides[self.strips.len()..].iter().enumerate() {
            let d = state.d[unknown];
            primal.push([d + upper.slack - self.reach, -d + lower.slack - self.reach]);
            dual[unknown] += upper.multiplier - lower.multiplier;
        }
        Residuals { dual, dual_t: if self.has_overshoot() { dual_t } else { 0.0 }, primal }
    }
}

struct Residuals {
    dual: Vec<f64>,
    dual_t: f64,
    primal: Vec<[f64; 2]>,
}

impl Residuals {
    fn worst(&self) -> f64 {
        let primal = self.primal.iter().flatten().fold(0.0f64, |a, b| a.max(b.abs()));
        self.dual.iter().fold(primal.max(self.dual_t.abs()), |a, b| a.max(b.abs()))
    }
}

impl State {
    fn gap(&self) -> f64 {
        let (mut sum, mut count) = (0.0, 0.0);
        for side in self.sides.iter().flatten().filter(|side| side.multiplier > 0.0) {
            sum += side.slack * side.multiplier;
            count += 1.0;
        }
        if count > 0.0 { sum / count } else { 0.0 }
    }

    fn gap_after(&self, step: &Step, primal: f64, dual: f64) -> f64 {
        let (mut sum, mut count) = (0.0, 0.0);
        for (side, change) in self.sides.iter().flatten().zip(step.sides.iter().flatten()) {
            if side.multiplier > 0.0 {
                sum += (side.slack + primal * change.slack) * (side.multiplier + dual * change.multiplier);
                count += 1.0;
            }
        }
        if count > 0.0 { sum / count } else { 0.0 }
    }

    /// How far slacks and multipliers may go along a step.
    fn lengths(&self, step: &Step) -> (f64, f64) {
        let (mut primal, mut dual) = (1.0f64, 1.0f64);
        for (side, change) in self.sides.iter().flatten().zip(step.sides.iter().flatten()) {
            if side.multiplier <= 0.0 {
                continue;
            }
            if change.slack < 0.0 {
                primal = primal.min(-STEP * side.slack / change.slack);
            }
            if change.multiplier < 0.0 {
                dual = dual.min(-STEP * side.multiplier / change.multiplier);
            }
        }
        (primal, dual)
    }

    fn advance(&mut self, step: &Step, primal: f64, dual: f64) {
        self.d.iter_mut().zip(&step.d).for_each(|(d, change)| *d += primal * change);
        self.t += primal * step.t;
        for (side, change) in self.sides.iter_mut().flatten().zip(step.sides.iter().flatten()) {
            if side.multiplier > 0.0 {
                side.slack += primal * change.slack;
                side.multiplier += dual * change.multiplier;
            }
        }
    }
}

/// The normal equations at a state: a sparse block and the border of `t`.
struct System<'p> {
    factor: Factor<'p>,
    border: Vec<f64>,
    corner: f64,
    solved_border: Vec<f64>,
}

impl<'p> System<'p> {
    fn new(programme: &Programme<'p>, state: &State) -> Option<System<'p>> {
        let pattern = programme.pattern;
        let mut matrix = pattern.zeros();
        let (mut border, mut corner) = (vec![0.0; pattern.size()], 0.0);
        for (row, strip) in programme.strips.iter().enumerate() {
            let Some(s) = strip else { continue };
            let [u, l] = state.sides[row].map(|side| side.multiplier / side.slack);
            pattern.add_row(&mut matrix, row, &s.gradient, u + l);
            if s.elastic > 0.0 {
                let pull = s.elastic * (l - u);
                programme.touched[row].iter().zip(&s.gradient).for_each(|(&unknown, g)| border[unknown] += g * pull);
                corner += s.elastic * s.elastic * (u + l);
            }
        }
        for (unknown, sides) in state.sides[programme.strips.len()..].iter().enumerate() {
            let weight: f64 = sides.iter().map(|side| side.multiplier / side.slack).sum();
            pattern.add_diagonal(&mut matrix, unknown, weight);
        }
        if !matrix.iter().all(|n| n.is_finite()) {
            return None;
        }
        let factor = pattern.factor(matrix);
        let solved_border = factor.solve(&border);
        let inner: f64 = border.iter().zip(&solved_border).map(|(a, b)| a * b).sum();
        let corner = corner - inner;
        Some(System { factor, border, corner, solved_border })
    }

    /// The step that meets the residuals with every product of slack and multiplier at `target`.
    fn step(&self, p: &Programme, state: &State, residual: &Residuals, target: f64, ahead: Option<&Step>) -> Step {
        // For each side: wanted change of slack·multiplier, with the second-order term of the predictor.
        let wanted = |index: usize, side: usize| {
            let s = state.sides[index][side];
            let second = ahead.map_or(0.0, |a| a.sides[index][side].slack * a.sides[index][side].multiplier);
            target - s.slack * s.multiplier - second
        };
        // multiplier change = (wanted + multiplier (row change + primal residual)) / slack
        let base = |index: usize, side: usize| {
            let s = state.sides[index][side];
            if s.multiplier > 0.0 {
                (wanted(index, side) + s.multiplier * residual.primal[index][side]) / s.slack
            } else {
                0.0
            }
        };
        let mut rhs: Vec<f64> = residual.dual.iter().map(|r| -r).collect();
        let mut rhs_t = -residual.dual_t;
        for (row, strip) in p.strips.iter().enumerate() {
            let Some(s) = strip else { continue };
            let (u, l) = (base(row, 0), base(row, 1));
            p.touched[row].iter().zip(&s.gradient).for_each(|(&unknown, g)| rhs[unknown] -= g * (u - l));
            rhs_t += s.elastic * (u + l);
        }
        let rows = p.strips.len();
        for (unknown, r) in rhs.iter_mut().enumerate() {
            *r -= base(rows + unknown, 0) - base(rows + unknown, 1);
        }
        let mut d = self.factor.solve(&rhs);
        let mut t = 0.0;
        if p.has_overshoot() && self.corner > 0.0 {
            let inner: f64 = self.border.iter().zip(&d).map(|(a, b)| a * b).sum();
            t = (rhs_t - inner) / self.corner;
            d.iter_mut().zip(&self.solved_border).for_each(|(d, b)| *d -= t * b);
        }
        let sides = self.side_changes(p, state, residual, &d, t, &base);
        Step { d, t, sides }
    }

    fn side_changes(
        &self,
        p: &Programme,
        state: &State,
        residual: &Residuals,
        d: &[f64],
        t: f64,
        base: &dyn Fn(usize, usize) -> f64,
    ) -> Vec<[Side; 2]> {
        let rows = p.strips.len();
        let mut sides = Vec::with_capacity(state.sides.len());
        for index in 0..state.sides.len() {
            let (value, room) = match index.checked_sub(rows) {
                Some(unknown) => (d[unknown], 0.0),
                None => match &p.strips[index] {
                    Some(s) => (p.product(index, &s.gradient, d), s.elastic * t),
                    None => (0.0, 0.0),
                },
            };
            let side = |which: usize, change: f64| {
                let s = state.sides[index][which];
                let slack = -residual.primal[index][which] - change;
                let multiplier =
                    if s.multiplier > 0.0 { base(index, which) + s.multiplier / s.slack * change } else { 0.0 };
                Side { slack, multiplier }
            };
            sides.push([side(0, value - room), side(1, -value - room)]);
        }
        sides
    }
}
