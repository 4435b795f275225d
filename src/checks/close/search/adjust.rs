//! Robust adjustment: from the sketch to places that agree with most of the figures.
//!
//! Weighted least squares by Gauss-Newton with damping (Levenberg 1944, Marquardt 1963), reweighted towards least
//! absolute misfit (Huber 1964), so that one wrong figure does not spoil its neighbours.

use super::rows::{Linear, Row};
use super::sparse::Pattern;

/// A set of unknowns with their rows, ready to be adjusted.
#[derive(Clone, Debug)]
pub(crate) struct Network {
    /// The offsets of joint coordinates from unknowns.
    pub offsets: Vec<[(Option<usize>, f64); 2]>,
    /// The number of unknowns.
    pub unknowns: usize,
    /// The rows.
    pub rows: Vec<Row>,
    /// The unknowns of each row.
    pub touched: Vec<Vec<usize>>,
    /// The pattern of their normal equations.
    pub pattern: Pattern,
    /// The half interval of a row that has none, as a length: a small share of the finest.
    pub least_half: f64,
}

impl Network {
    /// Rows over unknowns.
    pub(crate) fn new(offsets: Vec<[(Option<usize>, f64); 2]>, unknowns: usize, rows: Vec<Row>) -> Network {
        let touched: Vec<Vec<usize>> = rows.iter().map(|row| row.unknowns.clone()).collect();
        let pattern = Pattern::new(unknowns, &touched);
        Network { offsets, unknowns, rows, touched, pattern, least_half: 1e-7 }
    }

    /// The places of all joints.
    pub(crate) fn places(&self, unknowns: &[f64]) -> Vec<[f64; 2]> {
        let value = |(unknown, offset): (Option<usize>, f64)| unknown.map_or(offset, |u| unknowns[u] + offset);
        self.offsets.iter().map(|[x, y]| [value(*x), value(*y)]).collect()
    }

    /// Every row at these unknowns.
    pub(crate) fn linearised(&self, unknowns: &[f64]) -> Vec<Linear> {
        let places = self.places(unknowns);
        self.rows.iter().map(|row| row.linearise(&places)).collect()
    }

    /// Adjusts the unknowns with at most `rounds` steps; rows for which `keep` says no are left out, and no step is made to
    /// where `allowed` says no.
    pub(crate) fn adjust(
        &self,
        start: &[f64],
        rounds: usize,
        keep: &dyn Fn(usize) -> bool,
        allowed: &dyn Fn(&[f64]) -> bool,
    ) -> Vec<f64> {
        let mut unknowns = start.to_vec();
        let mut damping = 1e-3;
        let mut knee = self.first_knee(&unknowns, keep);
        let mut quiet = 0;
        for _ in 0..rounds {
            let lines = self.linearised(&unknowns);
            let cost = self.cost(&lines, knee, keep);
            let (next, moved) = self.damped_step(&unknowns, &lines, knee, damping, keep);
            let cost_next = self.cost(&self.linearised(&next), knee, keep);
            if cost_next.is_finite() && cost_next <= cost && allowed(&next) {
                unknowns = next;
                damping = (damping * 0.1).max(1e-9);
                let settled = cost - cost_next <= 1e-10 * cost || moved < 1e-12;
                quiet = if knee <= 1.0 && settled { quiet + 1 } else { 0 };
                knee = (knee * 0.3).max(1.0);
            } else {
                damping *= 10.0;
                quiet += usize::from(damping > 1e8);
            }
            if quiet >= 2 {
                break;
            }
        }
        unknowns
    }

    /// Misfits smaller than this many half intervals count by their squares, greater ones by their size; at first all by
    /// their squares.
    fn first_knee(&self, unknowns: &[f64], keep: &dyn Fn(usize) -> bool) -> f64 {
        let lines = self.linearised(unknowns);
        let standard = |(i, line): (usize, &Linear)| if keep(i) { self.standard(line).abs() } else { 0.0 };
        lines.iter().enumerate().map(standard).fold(1.0, |a: f64, b| if b.is_finite() { a.max(b) } else { a })
    }

    fn half(&self, line: &Linear) -> f64 {
        line.half().max(self.least_half)
    }

    /// The misfit in half intervals.
    fn standard(&self, line: &Linear) -> f64 {
        line.residual() / self.half(line)
    }

    fn cost(&self, lines: &[Linear], knee: f64, keep: &dyn Fn(usize) -> bool) -> f64 {
        let huber = |x: f64| if x.abs() <= knee { 0.5 * x * x } else { knee * (x.abs() - 0.5 * knee) };
        lines.iter().enumerate().filter(|(i, _)| keep(*i)).map(|(_, line)| huber(self.standard(line))).sum()
    }

    fn damped_step(
        &self,
        unknowns: &[f64],
        lines: &[Linear],
        knee: f64,
        damping: f64,
        keep: &dyn Fn(usize) -> bool,
    ) -> (Vec<f64>, f64) {
        let mut matrix = self.pattern.zeros();
        let mut rhs = vec![0.0; self.unknowns];
        let mut diagonal = vec![0.0f64; self.unknowns];
        for (row, line) in lines.iter().enumerate().filter(|(row, _)| keep(*row)) {
            let half = self.half(line);
            let weight = (knee / self.standard(line).abs().max(knee)) / (half * half);
            self.pattern.add_row(&mut matrix, row, &line.gradient, weight);
            for (&unknown, g) in self.touched[row].iter().zip(&line.gradient) {
                rhs[unknown] -= weight * g * line.residual();
                diagonal[unknown] += weight * g * g;
            }
        }
        let typical = diagonal.iter().sum::<f64>() / self.unknowns.max(1) as f64;
        for (unknown, d) in diagonal.iter().enumerate() {
            self.pattern.add_diagonal(&mut matrix, unknown, damping * d.max(typical * 1e-1) + typical * 1e-14);
        }
        let step = self.pattern.factor(matrix).solve(&rhs);
        let moved = step.iter().fold(0.0f64, |a, b| a.max(b.abs()));
        (unknowns.iter().zip(&step).map(|(u, s)| u + s).collect(), moved)
    }

    /// How well the kept rows go together, from a point near their least squares: the logarithm of the likelihood of the
    /// rows, taken over all places, with uniform rounding (a standard deviation of the half interval over √3) as normal.
    ///
    /// Greater is likelier; only differences between different `keep` of one network mean anything.
    pub(crate) fn evidence(&self, start: &[f64], keep: &dyn Fn(usize) -> bool) -> f64 {
        let mut unknowns = start.to_vec();
        for _ in 0..4 {
            unknowns = self.damped_step(&unknowns, &self.linearised(&unknowns), f64::MAX, 1e-12, keep).0;
        }
        let mut matrix = self.pattern.zeros();
        let mut squares = 0.0;
        for (row, line) in self.linearised(&unknowns).iter().enumerate().filter(|(row, _)| keep(*row)) {
            let half = self.half(line);
            self.pattern.add_row(&mut matrix, row, &line.gradient, 3.0 / (half * half));
            squares += 3.0 * self.standard(line) * self.standard(line);
        }
        (0..self.unknowns).for_each(|unknown| self.pattern.add_diagonal(&mut matrix, unknown, 1.0));
        -0.5 * squares - 0.5 * self.pattern.factor(matrix).log_determinant()
    }

    /// The standard deviation of each unknown, in floats, when every row's half interval is its standard deviation.
    pub(crate) fn deviations(&self, unknowns: &[f64]) -> Vec<f64> {
        let mut matrix = self.pattern.zeros();
        for (row, line) in self.linearised(unknowns).iter().enumerate() {
            let half = self.half(line);
            self.pattern.add_row(&mut matrix, row, &line.gradient, 1.0 / (half * half));
        }
        (0..self.unknowns).for_each(|unknown| self.pattern.add_diagonal(&mut matrix, unknown, 1e-12));
        let factor = self.pattern.factor(matrix);
        let mut unit = vec![0.0; self.unknowns];
        let mut variance = |unknown: usize| {
            unit[unknown] = 1.0;
            let solved = factor.solve(&unit);
            unit[unknown] = 0.0;
            solved[unknown].abs().sqrt()
        };
        (0..self.unknowns).map(&mut variance).collect()
    }
}
