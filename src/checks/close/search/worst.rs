//! The least worst overshoot: linear programmes over the linearised rows, repeated until the changes are negligible.

use super::adjust::Network;
use super::interior::{Optimum, Programme, Strip};
use super::rows::Linear;

/// Where the worst overshoot is least, as far as was found.
#[derive(Clone, Debug)]
pub(crate) struct Best {
    /// The unknowns, as floats.
    pub unknowns: Vec<f64>,
    /// The worst overshoot there: negative when every row has room to spare.
    pub overshoot: f64,
    /// The multipliers of the last programme, one a row.
    pub multipliers: Vec<f64>,
}

/// Exact rows may be off by this much in floats while the others are worked on.
const EXACT_ROOM: f64 = 1e-11;

impl Network {
    /// The worst overshoot of the kept rows; exact rows do not count while they are met.
    pub(crate) fn worst(&self, lines: &[Linear], keep: &dyn Fn(usize) -> bool) -> f64 {
        let counted = |i: usize, line: &Linear| !self.rows[i].exact || line.overshoot() > EXACT_ROOM * 100.0;
        let overshoots =
            lines.iter().enumerate().filter(|(i, line)| keep(*i) && counted(*i, line)).map(|(_, l)| l.overshoot());
        overshoots.fold(f64::NEG_INFINITY, f64::max)
    }

    /// Minimises the worst overshoot from `start`, in at most `rounds` programmes, without a step to where `allowed` says
    /// no.
    pub(crate) fn least_worst(
        &self,
        start: &[f64],
        rounds: usize,
        keep: &dyn Fn(usize) -> bool,
        allowed: &dyn Fn(&[f64]) -> bool,
    ) -> Option<Best> {
        let mut best = Best { unknowns: start.to_vec(), overshoot: f64::INFINITY, multipliers: Vec::new() };
        best.overshoot = self.worst(&self.linearised(start), keep);
        let mut reach = 0.05;
        for _ in 0..rounds {
            let lines = self.linearised(&best.unknowns);
            let optimum = self.overshoot_programme(&lines, reach, keep).solve()?;
            let next: Vec<f64> = best.unknowns.iter().zip(&optimum.changes).map(|(u, d)| u + d).collect();
            let overshoot = if allowed(&next) { self.worst(&self.linearised(&next), keep) } else { f64::INFINITY };
            let (expected, gained) = (best.overshoot - optimum.overshoot, best.overshoot - overshoot);
            let moved = optimum.changes.iter().fold(0.0f64, |a, d| a.max(d.abs()));
            if best.multipliers.is_empty() || gained >= 0.0 {
                best.multipliers = optimum.multipliers;
            }
            if gained > 0.0 || expected.is_nan() {
                (best.unknowns, best.overshoot) = (next, overshoot);
            }
            if expected.abs() <= 1e-12 + 1e-6 * best.overshoot.abs() || moved < 1e-12 {
                break;
            }
            reach = if gained < 0.25 * expected { moved.min(reach) * 0.25 } else { reach };
        }
        Some(best)
    }

    fn overshoot_programme(&self, lines: &[Linear], reach: f64, keep: &dyn Fn(usize) -> bool) -> Programme<'_> {
        // An exact row that is met stays met, and takes no part in the overshoot.
        let elastic = |i: usize, line: &Linear| {
            if self.rows[i].exact && line.overshoot() < EXACT_ROOM * 100.0 { 0.0 } else { 1.0 }
        };
        let strips = lines.iter().enumerate().map(|(i, line)| keep(i).then(|| strip(line, elastic(i, line)))).collect();
        let slope = vec![0.0; self.unknowns];
        Programme { pattern: &self.pattern, touched: &self.touched, strips, slope, overshoot_weight: 1.0, reach }
    }

    /// The extreme of a row's value while all kept rows hold: the greatest (`sign` 1) or the least (-1), from a point
    /// where they hold. Gives the unknowns reached.
    pub(crate) fn extreme(
        &self,
        start: &[f64],
        row: usize,
        sign: f64,
        rounds: usize,
        keep: &dyn Fn(usize) -> bool,
    ) -> Vec<f64> {
        let mut unknowns = start.to_vec();
        let mut reach = 0.02;
        for _ in 0..rounds {
            let lines = self.linearised(&unknowns);
            let strips = lines.iter().enumerate().map(|(i, line)| keep(i).then(|| strip(line, 0.0))).collect();
            let mut slope = vec![0.0; self.unknowns];
            for (&unknown, g) in self.touched[row].iter().zip(&lines[row].gradient) {
                slope[unknown] -= sign * g;
            }
            let programme = Programme {
                pattern: &self.pattern,
                touched: &self.touched,
                strips,
                slope,
                overshoot_weight: 0.0,
                reach,
            };
            let Some(Optimum { changes, .. }) = programme.solve() else { break };
            let next: Vec<f64> = unknowns.iter().zip(&changes).map(|(u, d)| u + d).collect();
            let after = self.linearised(&next);
            let gained = sign * (after[row].value - lines[row].value);
            let strayed = self.worst(&after, keep);
            unknowns = next;
            if gained.abs() < 1e-10 && strayed < 1e-9 {
                break;
            }
            reach *= if strayed > self.least_half { 0.5 } else { 1.5 };
        }
        unknowns
    }
}

fn strip(line: &Linear, elastic: f64) -> Strip {
    let room = if line.hi - line.lo < EXACT_ROOM { EXACT_ROOM } else { 0.0 };
    Strip { gradient: line.gradient.clone(), lo: line.lo - line.value - room, hi: line.hi - line.value + room, elastic }
}
